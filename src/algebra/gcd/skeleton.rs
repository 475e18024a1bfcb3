//! Images of a gcd with known support: evaluation along geometric points, coefficients by Vandermonde systems.

use smallvec::SmallVec;

use crate::algebra::budget;
use crate::algebra::gcd::image::degrees;
use crate::algebra::modular::Modulus;
use crate::algebra::modular::dense::{Dense, degree, trim};
use crate::algebra::monomial::Var;
use crate::algebra::polynomial::Poly;

/// Exponents of the variables other than the main one, as far as they have been interpolated.
pub(super) type Exponents = SmallVec<[u16; 8]>;

/// One coefficient of the gcd as polynomial in the main variable: main exponent, then the terms.
pub(super) type Row = (usize, Vec<(Exponents, u64)>);

/// A polynomial prepared for evaluation modulo a prime.
pub(super) struct Side {
    /// Exponent of the main variable and coefficient of every term.
    terms: Vec<(usize, u64)>,
    /// (position of the variable, exponent) for all terms, one after the other.
    factors: Vec<(usize, usize)>,
    ends: Vec<usize>,
    /// Degrees in the other variables.
    pub(super) top: Vec<u32>,
    main_degree: usize,
}

/// The values of all terms at the points (b₁ᵗ, …, bᵢᵗ, fixed, …, fixed), t = 1, 2, …
struct Walk<'a> {
    side: &'a Side,
    now: Vec<u64>,
    ratio: Vec<u64>,
}

impl Side {
    pub(super) fn new(m: &Modulus, p: &Poly, main: Var, others: &[Var]) -> Side {
        let mut side = Side {
            terms: Vec::with_capacity(p.len()),
            factors: Vec::new(),
            ends: Vec::with_capacity(p.len()),
            top: degrees(p, others),
            main_degree: p.degree(main) as usize,
        };
        for (monomial, c) in p.raw_terms() {
            side.terms.push((monomial.exponent(main) as usize, m.residue(c)));
            let places = monomial.iter().filter_map(|(v, e)| Some((others.binary_search(&v).ok()?, e as usize)));
            side.factors.extend(places);
            side.ends.push(side.factors.len());
        }
        side
    }

    fn walk(&self, m: &Modulus, base: &[u64], moving: usize) -> Walk<'_> {
        budget::spend(self.terms.len() as u64);
        let powers: Vec<Vec<u64>> = base.iter().zip(&self.top).map(|(&x, &d)| m.powers(x, d as usize)).collect();
        let (mut now, mut ratio) = (Vec::with_capacity(self.terms.len()), Vec::with_capacity(self.terms.len()));
        let mut start = 0;
        for (&(_, c), &end) in self.terms.iter().zip(&self.ends) {
            let (mut fixed, mut step) = (c, m.one());
            for &(k, e) in &self.factors[start..end] {
                let place = if k < moving { &mut step } else { &mut fixed };
                *place = m.mul(*place, powers[k][e]);
            }
            start = end;
            now.push(fixed);
            ratio.push(step);
        }
        Walk { side: self, now, ratio }
    }

    /// The image in the main variable at one point.
    pub(super) fn image(&self, m: &Modulus, point: &[u64]) -> Option<Dense> {
        self.walk(m, point, point.len()).next(m)
    }
}

impl Walk<'_> {
    /// The image at the next point; None when the degree drops.
    fn next(&mut self, m: &Modulus) -> Option<Dense> {
        budget::spend(1 + self.now.len() as u64 / 4);
        let mut image = vec![0; self.side.main_degree + 1];
        for ((value, &step), &(e, _)) in self.now.iter_mut().zip(&self.ratio).zip(&self.side.terms) {
            *value = m.mul(*value, step);
            image[e] = m.add(image[e], *value);
        }
        trim(&mut image);
        (degree(&image) == self.side.main_degree && !image.is_empty()).then_some(image)
    }
}

/// Both polynomials and the leading coefficient the gcd is given, modulo one prime.
pub(super) struct Images {
    pub(super) m: Modulus,
    pub(super) left: Side,
    pub(super) right: Side,
    pub(super) lead: Side,
}

impl Images {
    /// The image of the gcd at one point, with the prescribed leading coefficient.
    pub(super) fn at(&self, point: &[u64]) -> Option<Dense> {
        let (a, b) = (self.left.image(&self.m, point)?, self.right.image(&self.m, point)?);
        let lead = self.lead.image(&self.m, point)?;
        Some(self.m.multiple(&self.m.common(&a, &b), lead[0]))
    }

    /// The coefficients of all terms of the skeleton `rows`, which has the first `moving` variables, with the later
    /// variables fixed as in `base`. The leading coefficient (exponent `top`) is known and not part of the rows.
    /// None when the point or the skeleton is unlucky.
    pub(super) fn coefficients(&self, rows: &[Row], top: usize, base: &[u64], moving: usize) -> Option<Vec<Vec<u64>>> {
        let m = &self.m;
        let count = rows.iter().map(|(_, terms)| terms.len()).max().unwrap_or(0);
        let mut walks = [&self.left, &self.right, &self.lead].map(|side| side.walk(m, base, moving));
        let mut values: Vec<Vec<u64>> = rows.iter().map(|_| Vec::with_capacity(count)).collect();
        for _ in 0..count {
            let [left, right, lead] = &mut walks;
            let common = m.common(&left.next(m)?, &right.next(m)?);
            let scale = lead.next(m)?[0];
            if degree(&common) != top {
                return None;
            }
            let mut known = rows.iter().zip(&mut values).peekable();
            for (e, &c) in common[..top].iter().enumerate() {
                match known.next_if(|((exponent, _), _)| *exponent == e) {
                    Some((_, list)) => list.push(m.mul(c, scale)),
                    None if c != 0 => return None,
                    None => {}
                }
            }
        }
        rows.iter().zip(&values).map(|((_, terms), list)| self.solve_row(terms, list, base)).collect()
    }

    /// Solves Σₖ cₖ·wₖᵗ = valuesₜ (t = 1, 2, …) where wₖ is the value of the k-th monomial at the base point.
    fn solve_row(&self, terms: &[(Exponents, u64)], values: &[u64], base: &[u64]) -> Option<Vec<u64>> {
        let m = &self.m;
        let node = |e: &Exponents| {
            e.iter().zip(base).fold(m.one(), |w, (&e, &b)| if e == 0 { w } else { m.mul(w, m.pow(b, u64::from(e))) })
        };
        let nodes: Vec<u64> = terms.iter().map(|(e, _)| node(e)).collect();
        budget::spend((nodes.len() * nodes.len() / 8) as u64);
        let mut master = vec![m.one()];
        for &w in &nodes {
            master.insert(0, 0);
            for i in 1..master.len() {
                let below = m.mul(master[i], w);
                master[i - 1] = m.sub(master[i - 1], below);
            }
        }
        let mut solution = Vec::with_capacity(nodes.len());
        for &w in &nodes {
            // Synthetic division of the master polynomial by (z − w), highest coefficient first.
            let (mut quotient, mut above, mut below) = (0, 0, 0);
            for s in (0..nodes.len()).rev() {
                quotient = m.add(m.mul(quotient, w), master[s + 1]);
                above = m.add(above, m.mul(quotient, values[s]));
                below = m.add(m.mul(below, w), quotient);
            }
            if below == 0 || w == 0 {
                return None;
            }
            solution.push(m.mul(above, m.inverse(m.mul(below, w))));
        }
        Some(solution)
    }
}
