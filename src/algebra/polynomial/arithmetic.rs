//! Sums and products.

use std::cmp::Ordering;

use num_traits::Zero;

use super::{Poly, Term};
use crate::algebra::budget;
use crate::algebra::monomial::Monomial;
use crate::algebra::number::{Int, Rational, binary_operator, denom, numer};

/// Products formed at one time before they are sorted and combined: what the cache holds.
const CHUNK: usize = 1 << 13;

/// Sorts terms descending, adds equal monomials and drops zeros.
pub(super) fn combine(mut terms: Vec<Term>) -> Vec<Term> {
    // The terms of a sum arrive as a few descending runs; the merging sort takes advantage of that.
    terms.sort_by(|a, b| b.0.cmp(&a.0));
    merge_equal(terms)
}

/// All products of two term lists, combined; the order is a group order, so a single term needs no sorting.
fn multiply(a: &[Term], b: &[Term]) -> Vec<Term> {
    let mut products = Vec::with_capacity(a.len() * b.len());
    for (m, c) in a {
        products.extend(b.iter().map(|(n, d)| (m.mul(n), c.mul(d))));
    }
    if a.len() == 1 || b.len() == 1 {
        return products;
    }
    products.sort_unstable_by(|a, b| b.0.cmp(&a.0));
    merge_equal(products)
}

fn merge_equal(mut terms: Vec<Term>) -> Vec<Term> {
    terms.dedup_by(|next, kept| {
        let same = next.0 == kept.0;
        if same {
            kept.1 += &next.1;
        }
        same
    });
    terms.retain(|(_, c)| !c.is_zero());
    terms
}

/// ka·a + kb·b for descending term lists.
fn merge(a: &[Term], ka: &Int, b: &[Term], kb: &Int) -> Vec<Term> {
    let mut out = Vec::with_capacity(a.len() + b.len());
    let (mut i, mut j) = (0, 0);
    while i < a.len() && j < b.len() {
        match a[i].0.cmp(&b[j].0) {
            Ordering::Greater => {
                out.push((a[i].0.clone(), scaled(&a[i].1, ka)));
                i += 1;
            }
            Ordering::Less => {
                out.push((b[j].0.clone(), scaled(&b[j].1, kb)));
                j += 1;
            }
            Ordering::Equal => {
                let c = scaled(&a[i].1, ka).add(&scaled(&b[j].1, kb));
                if !c.is_zero() {
                    out.push((a[i].0.clone(), c));
                }
                i += 1;
                j += 1;
            }
        }
    }
    out.extend(a[i..].iter().map(|(m, c)| (m.clone(), scaled(c, ka))));
    out.extend(b[j..].iter().map(|(m, c)| (m.clone(), scaled(c, kb))));
    out
}

#[inline]
fn scaled(c: &Int, k: &Int) -> Int {
    if k.is_one() { c.clone() } else { c.mul(k) }
}

impl Poly {
    /// self + other.
    pub fn add(&self, other: &Poly) -> Poly {
        self.combination(other, false)
    }

    /// self − other.
    pub fn sub(&self, other: &Poly) -> Poly {
        self.combination(other, true)
    }

    fn combination(&self, other: &Poly, negative: bool) -> Poly {
        if other.is_zero() {
            return self.clone();
        }
        if self.is_zero() {
            return if negative { other.neg() } else { other.clone() };
        }
        budget::spend((self.len() + other.len()) as u64);
        let sign = Int::from(if negative { -1 } else { 1 });
        if self.den == other.den {
            return Poly::reduced(merge(&self.terms, &Int::ONE, &other.terms, &sign), self.den.clone());
        }
        let common = self.den.gcd(&other.den);
        let (ka, kb) = (other.den.div_exact(&common), self.den.div_exact(&common));
        let den = self.den.mul(&ka);
        Poly::reduced(merge(&self.terms, &ka, &other.terms, &kb.mul(&sign)), den)
    }

    /// −self.
    pub fn neg(&self) -> Poly {
        let terms = self.terms.iter().map(|(m, c)| (m.clone(), c.neg())).collect();
        Poly { terms, den: self.den.clone() }
    }

    /// self · other. Cost: one unit of work per product of terms; a single term costs no sorting.
    pub fn mul(&self, other: &Poly) -> Poly {
        let (a, b) = if self.len() <= other.len() { (self, other) } else { (other, self) };
        if a.is_zero() {
            return Poly::zero();
        }
        if a.is_one() {
            return b.clone();
        }
        budget::spend(a.len() as u64 * b.len() as u64);
        let den = a.den.mul(&b.den);
        if a.len() * b.len() <= CHUNK {
            return Poly::reduced(multiply(&a.terms, &b.terms), den);
        }
        let width = (CHUNK / a.len()).max(1);
        let mut parts: Vec<Vec<Term>> = Vec::new();
        for piece in b.terms.chunks(width) {
            parts.push(multiply_long(&a.terms, piece));
        }
        Poly::reduced(sum_tree(parts), den)
    }

    /// c · self.
    pub fn scale(&self, c: &Rational) -> Poly {
        self.mul_term(c, &Monomial::one())
    }

    /// c · m · self.
    pub fn mul_term(&self, c: &Rational, m: &Monomial) -> Poly {
        if c.is_zero() {
            return Poly::zero();
        }
        budget::spend(self.len() as u64);
        let k = numer(c);
        let terms = self.terms.iter().map(|(n, d)| (n.mul(m), scaled(d, &k))).collect();
        Poly::reduced(terms, self.den.mul(&denom(c)))
    }

    /// m · self.
    pub fn mul_monomial(&self, m: &Monomial) -> Poly {
        if m.is_one() {
            return self.clone();
        }
        budget::spend(self.len() as u64);
        Poly { terms: self.terms.iter().map(|(n, d)| (n.mul(m), d.clone())).collect(), den: self.den.clone() }
    }

    /// self^exponent; self^0 = 1.
    pub fn pow(&self, exponent: u32) -> Poly {
        if let [(m, c)] = &self.terms[..] {
            let e = i32::try_from(exponent).unwrap_or(i32::MAX);
            return Poly { terms: vec![(m.pow(e), c.pow(exponent))], den: self.den.pow(exponent) };
        }
        if exponent == 0 {
            return Poly::one();
        }
        // Repeated multiplication by the short base beats squaring for sparse polynomials.
        (1..exponent).fold(self.clone(), |power, _| power.mul(self))
    }

    /// The sum of many polynomials: collected and sorted once.
    pub fn sum(parts: Vec<Poly>) -> Poly {
        budget::spend(parts.iter().map(|p| p.len() as u64).sum());
        let den = parts.iter().fold(Int::ONE, |d, p| if p.den == d { d } else { d.lcm(&p.den) });
        let mut terms = Vec::with_capacity(parts.iter().map(Poly::len).sum());
        for part in parts {
            let k = den.div_exact(&part.den);
            terms.extend(part.terms.into_iter().map(|(m, c)| if k.is_one() { (m, c) } else { (m, c.mul(&k)) }));
        }
        Poly::collected(terms, den)
    }

    /// The product of many polynomials, short ones first.
    pub fn product<'a>(parts: impl IntoIterator<Item = &'a Poly>) -> Poly {
        let mut list: Vec<&Poly> = parts.into_iter().collect();
        list.sort_by_key(|p| p.len());
        list.into_iter().fold(Poly::one(), |all, p| all.mul(p))
    }
}

/// Products of two lists of which the first alone may be longer than a chunk.
fn multiply_long(a: &[Term], piece: &[Term]) -> Vec<Term> {
    let width = (CHUNK / piece.len()).max(1);
    let parts = a.chunks(width).map(|part| multiply(part, piece));
    sum_tree(parts.collect())
}

/// Adds descending lists pairwise.
fn sum_tree(mut parts: Vec<Vec<Term>>) -> Vec<Term> {
    while parts.len() > 1 {
        let mut next = Vec::with_capacity(parts.len().div_ceil(2));
        let mut rest = parts.into_iter();
        while let Some(a) = rest.next() {
            next.push(match rest.next() {
                Some(b) => merge_owned(a, b),
                None => a,
            });
        }
        parts = next;
    }
    parts.pop().unwrap_or_default()
}

/// a + b for descending term lists, moving the terms.
fn merge_owned(a: Vec<Term>, b: Vec<Term>) -> Vec<Term> {
    let mut out = Vec::with_capacity(a.len() + b.len());
    let (mut a, mut b) = (a.into_iter().peekable(), b.into_iter().peekable());
    while let (Some(x), Some(y)) = (a.peek(), b.peek()) {
        match x.0.cmp(&y.0) {
            Ordering::Greater => out.extend(a.next()),
            Ordering::Less => out.extend(b.next()),
            Ordering::Equal => {
                if let (Some((m, mut c)), Some((_, d))) = (a.next(), b.next()) {
                    c += &d;
                    if !c.is_zero() {
                        out.push((m, c));
                    }
                }
            }
        }
    }
    out.extend(a);
    out.extend(b);
    out
}

binary_operator!(Poly, Add, add);
binary_operator!(Poly, Sub, sub);
binary_operator!(Poly, Mul, mul);

impl std::ops::Neg for &Poly {
    type Output = Poly;
    fn neg(self) -> Poly {
        Poly::neg(self)
    }
}

impl std::ops::Neg for Poly {
    type Output = Poly;
    fn neg(mut self) -> Poly {
        self.terms.iter_mut().for_each(|(_, c)| *c = Int::neg(c));
        self
    }
}

impl std::ops::AddAssign<&Poly> for Poly {
    fn add_assign(&mut self, other: &Poly) {
        *self = Poly::add(self, other);
    }
}

impl std::ops::SubAssign<&Poly> for Poly {
    fn sub_assign(&mut self, other: &Poly) {
        *self = Poly::sub(self, other);
    }
}

impl std::iter::Sum for Poly {
    fn sum<I: Iterator<Item = Poly>>(parts: I) -> Poly {
        Poly::sum(parts.collect())
    }
}
