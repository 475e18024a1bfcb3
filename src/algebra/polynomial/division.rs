//! Primitive parts and exact division.

use std::cmp::Ordering;
use std::collections::BinaryHeap;
use std::collections::binary_heap::PeekMut;

use num_traits::One;

use super::{Poly, Term, gcd_with};
use crate::algebra::budget;
use crate::algebra::monomial::Monomial;
use crate::algebra::number::{Int, Rational, rational_from};

/// A polynomial as content · monomial · part; see [`Poly::primitive`].
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Primitive {
    /// The rational content; it carries the sign. 0 for the polynomial 0.
    pub content: Rational,
    /// The componentwise least exponents.
    pub monomial: Monomial,
    /// Integer coefficients with gcd 1, positive leading coefficient, least exponent 0 in every variable.
    pub part: Poly,
}

impl Poly {
    /// self = content · monomial · part. The polynomial 0 gives content 0, monomial 1, part 0.
    pub fn primitive(&self) -> Primitive {
        let Some((lead, lead_coefficient)) = self.terms.first() else {
            return Primitive { content: Rational::default(), monomial: Monomial::one(), part: Poly::zero() };
        };
        budget::spend(self.len() as u64);
        let mut content = gcd_with(&self.terms, lead_coefficient.abs());
        if lead_coefficient.is_negative() {
            content = content.neg();
        }
        let mut monomial = lead.clone();
        for (m, _) in &self.terms[1..] {
            if !monomial.is_below(m) {
                monomial = monomial.meet(m);
            }
        }
        let part = if content.is_one() && self.den.is_one() && monomial.is_one() {
            self.clone()
        } else {
            let down = monomial.inverse();
            let terms = self
                .terms
                .iter()
                .map(|(m, c)| (if down.is_one() { m.clone() } else { m.mul(&down) }, c.div_exact(&content)));
            Poly { terms: terms.collect(), den: Int::ONE }
        };
        Primitive { content: rational_from(content, self.den.clone()), monomial, part }
    }

    /// The quotient self / d when `d` divides self in the ring of Laurent polynomials over the rationals.
    /// None when it does not, and for d = 0. Fails early: at the first leading term that is not divisible.
    pub fn div_exact(&self, d: &Poly) -> Option<Poly> {
        if d.is_zero() {
            return None;
        }
        if self.is_zero() {
            return Some(Poly::zero());
        }
        if let Some((c, m)) = d.as_monomial() {
            return Some(self.mul_term(&c.recip(), &m.inverse()));
        }
        if self.len() < 2 {
            return None;
        }
        let (n, d) = (self.primitive(), d.primitive());
        let quotient = divide_primitive(&n.part, &d.part)?;
        let (c, m) = (n.content / d.content, n.monomial.div(&d.monomial));
        Some(if c.is_one() && m.is_one() { quotient } else { quotient.mul_term(&c, &m) })
    }

    /// Whether `d` divides self in the ring of Laurent polynomials over the rationals.
    pub fn is_divisible_by(&self, d: &Poly) -> bool {
        self.div_exact(d).is_some()
    }
}

/// n / d for primitive polynomials; by Gauss the quotient has integer coefficients.
fn divide_primitive(n: &Poly, d: &Poly) -> Option<Poly> {
    if n == d {
        return Some(Poly::one());
    }
    let bound = quotient_bound(n, d)?;
    let ((n_last, n_low), (d_last, d_low)) = (n.terms.last()?, d.terms.last()?);
    n_low.checked_div(d_low)?;
    if !n_last.is_divisible_by(d_last) {
        return None;
    }
    let terms = Division::new(&n.terms, &d.terms, bound).run()?;
    Some(Poly { terms, den: Int::ONE })
}

/// The largest exponents a quotient may have: degree by degree.
fn quotient_bound(n: &Poly, d: &Poly) -> Option<Monomial> {
    let degrees = |p: &Poly| {
        let join = |all: Monomial, (m, _): &Term| if m.is_below(&all) { all } else { all.join(m) };
        p.terms.iter().fold(Monomial::one(), join)
    };
    let (top, low) = (degrees(n), degrees(d));
    let bound = top.div(&low);
    bound.is_polynomial().then_some(bound)
}

/// A product `q[i]·d[j]` waiting in the heap.
struct Waiting {
    monomial: Monomial,
    i: usize,
    j: usize,
}

impl PartialEq for Waiting {
    fn eq(&self, other: &Waiting) -> bool {
        self.monomial == other.monomial
    }
}
impl Eq for Waiting {}
impl PartialOrd for Waiting {
    fn partial_cmp(&self, other: &Waiting) -> Option<Ordering> {
        Some(self.cmp(other))
    }
}
impl Ord for Waiting {
    fn cmp(&self, other: &Waiting) -> Ordering {
        self.monomial.cmp(&other.monomial)
    }
}

/// Sparse division with a heap holding at most one product per divisor term (Johnson; Monagan and Pearce).
struct Division<'a> {
    n: &'a [Term],
    d: &'a [Term],
    bound: Monomial,
    quotient: Vec<Term>,
    heap: BinaryHeap<Waiting>,
    /// Divisor terms whose next quotient term is not known yet.
    idle: Vec<usize>,
}

impl<'a> Division<'a> {
    fn new(n: &'a [Term], d: &'a [Term], bound: Monomial) -> Division<'a> {
        Division { n, d, bound, quotient: Vec::new(), heap: BinaryHeap::new(), idle: (1..d.len()).collect() }
    }

    fn run(mut self) -> Option<Vec<Term>> {
        let (lead, lead_coefficient) = &self.d[0];
        let mut k = 0;
        loop {
            let (monomial, mut c) = match (self.n.get(k), self.heap.peek()) {
                (None, None) => return Some(self.quotient),
                (Some((m, c)), None) => (m.clone(), c.clone()),
                (None, Some(top)) => (top.monomial.clone(), Int::ZERO),
                (Some((m, c)), Some(top)) => match m.cmp(&top.monomial) {
                    Ordering::Less => (top.monomial.clone(), Int::ZERO),
                    _ => (m.clone(), c.clone()),
                },
            };
            if self.n.get(k).is_some_and(|(m, _)| *m == monomial) {
                k += 1;
            }
            self.subtract_products(&monomial, &mut c);
            if c.is_zero() {
                continue;
            }
            let m = monomial.div(lead);
            if !m.is_polynomial() || !self.bound.is_divisible_by(&m) {
                return None;
            }
            let q = c.checked_div(lead_coefficient)?;
            self.append(m, q);
        }
    }

    /// Takes every waiting product with this monomial off the coefficient.
    fn subtract_products(&mut self, monomial: &Monomial, c: &mut Int) {
        let mut spent = 1;
        while let Some(mut top) = self.heap.peek_mut() {
            if top.monomial != *monomial {
                break;
            }
            let (i, j) = (top.i, top.j);
            *c = c.sub(&self.quotient[i].1.mul(&self.d[j].1));
            match self.quotient.get(i + 1) {
                Some((q, _)) => {
                    top.monomial = q.mul(&self.d[j].0);
                    top.i = i + 1;
                }
                None => {
                    PeekMut::pop(top);
                    self.idle.push(j);
                }
            }
            spent += 2;
        }
        budget::spend(spent);
    }

    fn append(&mut self, m: Monomial, q: Int) {
        let i = self.quotient.len();
        for j in std::mem::take(&mut self.idle) {
            self.heap.push(Waiting { monomial: m.mul(&self.d[j].0), i, j });
        }
        self.quotient.push((m, q));
    }
}
