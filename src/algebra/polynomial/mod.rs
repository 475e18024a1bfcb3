//! Laurent polynomials with rational coefficients: the elements of every computation.
//!
//! Coefficients are integers over one common denominator, so rational arithmetic happens once per polynomial.

mod arithmetic;
mod division;
mod structure;

use std::cmp::Ordering;
use std::fmt;

use num_traits::{One, Zero};

use crate::algebra::monomial::{Monomial, Var};
use crate::algebra::number::{Int, Rational, denom, numer, rational_from};

pub use division::Primitive;

/// A term with integer coefficient.
pub(crate) type Term = (Monomial, Int);

/// A Laurent polynomial: (Σ cᵢ·mᵢ) / den.
///
/// Canonical: monomials strictly descending, no zero coefficient, den > 0, gcd of all coefficients and den is 1.
/// Equality of values is therefore equality of the structure.
#[derive(Clone, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct Poly {
    terms: Vec<Term>,
    den: Int,
}

impl Default for Poly {
    fn default() -> Poly {
        Poly::zero()
    }
}

impl Poly {
    /// 0.
    pub fn zero() -> Poly {
        Poly { terms: Vec::new(), den: Int::ONE }
    }

    /// 1.
    pub fn one() -> Poly {
        Poly::int(1)
    }

    /// The constant `n`.
    pub fn int(n: i64) -> Poly {
        Poly::from_int(Int::from(n), Monomial::one())
    }

    /// The constant `c`.
    pub fn constant(c: &Rational) -> Poly {
        Poly::term(c, Monomial::one())
    }

    /// The variable `v`.
    pub fn var(v: Var) -> Poly {
        Poly::monomial(Monomial::power(v, 1))
    }

    /// The monomial `m`.
    pub fn monomial(m: Monomial) -> Poly {
        Poly::from_int(Int::ONE, m)
    }

    /// c · m.
    pub fn term(c: &Rational, m: Monomial) -> Poly {
        if c.is_zero() {
            return Poly::zero();
        }
        Poly { terms: vec![(m, numer(c))], den: denom(c) }
    }

    fn from_int(c: Int, m: Monomial) -> Poly {
        if c.is_zero() {
            return Poly::zero();
        }
        Poly { terms: vec![(m, c)], den: Int::ONE }
    }

    /// The sum of arbitrary terms.
    pub fn from_terms(terms: Vec<(Monomial, Rational)>) -> Poly {
        let den = terms.iter().fold(Int::ONE, |d, (_, c)| if c.is_integer() { d } else { d.lcm(&denom(c)) });
        let scaled = terms.into_iter().map(|(m, c)| {
            let k = den.div_exact(&denom(&c));
            (m, numer(&c).mul(&k))
        });
        Poly::collected(scaled.collect(), den)
    }

    /// The sum of arbitrary integer terms.
    pub fn from_int_terms(terms: Vec<(Monomial, Int)>) -> Poly {
        Poly::collected(terms, Int::ONE)
    }

    /// (sum of the terms) / den for terms in any order; den > 0.
    pub(crate) fn collected(terms: Vec<Term>, den: Int) -> Poly {
        Poly::reduced(arithmetic::combine(terms), den)
    }

    /// Terms already strictly descending and non-zero; only the denominator has to be brought to lowest terms.
    pub(crate) fn reduced(mut terms: Vec<Term>, mut den: Int) -> Poly {
        if terms.is_empty() {
            return Poly::zero();
        }
        if !den.is_one() {
            let common = gcd_with(&terms, den.clone());
            if !common.is_one() {
                terms.iter_mut().for_each(|(_, c)| *c = c.div_exact(&common));
                den = den.div_exact(&common);
            }
        }
        Poly { terms, den }
    }

    /// Whether the polynomial is 0.
    #[inline]
    pub fn is_zero(&self) -> bool {
        self.terms.is_empty()
    }

    /// Whether the polynomial is 1.
    #[inline]
    pub fn is_one(&self) -> bool {
        self.den.is_one() && matches!(&self.terms[..], [(m, c)] if m.is_one() && c.is_one())
    }

    /// Whether the polynomial is a constant (0 included).
    #[inline]
    pub fn is_constant(&self) -> bool {
        match &self.terms[..] {
            [] => true,
            [(m, _)] => m.is_one(),
            _ => false,
        }
    }

    /// The number of terms.
    #[inline]
    pub fn len(&self) -> usize {
        self.terms.len()
    }

    /// Whether there is no term (the same as [`Poly::is_zero`]).
    #[inline]
    pub fn is_empty(&self) -> bool {
        self.terms.is_empty()
    }

    /// The value when the polynomial is a constant.
    pub fn as_constant(&self) -> Option<Rational> {
        match &self.terms[..] {
            [] => Some(Rational::zero()),
            [(m, c)] if m.is_one() => Some(self.over_den(c)),
            _ => None,
        }
    }

    /// Coefficient and monomial when there is exactly one term.
    pub fn as_monomial(&self) -> Option<(Rational, &Monomial)> {
        match &self.terms[..] {
            [(m, c)] => Some((self.over_den(c), m)),
            _ => None,
        }
    }

    /// The variable when the polynomial is just that.
    pub fn as_var(&self) -> Option<Var> {
        match &self.terms[..] {
            [(m, c)] if c.is_one() && self.den.is_one() && m.len() == 1 => {
                m.iter().find(|&(_, e)| e == 1).map(|(v, _)| v)
            }
            _ => None,
        }
    }

    #[inline]
    fn over_den(&self, c: &Int) -> Rational {
        rational_from(c.clone(), self.den.clone())
    }

    /// The terms, descending, with their rational coefficients.
    pub fn terms(&self) -> impl DoubleEndedIterator<Item = (&Monomial, Rational)> + ExactSizeIterator + '_ {
        self.terms.iter().map(|(m, c)| (m, self.over_den(c)))
    }

    /// The terms, descending, with integer coefficients over [`Poly::denominator`].
    #[inline]
    pub fn raw_terms(&self) -> &[(Monomial, Int)] {
        &self.terms
    }

    /// The common denominator of the coefficients, positive.
    #[inline]
    pub fn denominator(&self) -> &Int {
        &self.den
    }

    /// The greatest term.
    pub fn leading(&self) -> Option<(&Monomial, Rational)> {
        self.terms.first().map(|(m, c)| (m, self.over_den(c)))
    }

    /// The coefficient of `m`, 0 when it is absent.
    pub fn coefficient(&self, m: &Monomial) -> Rational {
        let place = self.terms.binary_search_by(|(other, _)| m.cmp(other));
        place.map_or_else(|_| Rational::zero(), |k| self.over_den(&self.terms[k].1))
    }

    /// Whether the representation keeps its invariants; for tests.
    pub fn is_canonical(&self) -> bool {
        let descending = self.terms.windows(2).all(|w| w[0].0.cmp(&w[1].0) == Ordering::Greater);
        let nonzero = self.terms.iter().all(|(_, c)| !c.is_zero());
        let lowest = gcd_with(&self.terms, self.den.clone()).is_one();
        descending && nonzero && self.den.signum() > 0 && (self.terms.is_empty() || lowest) && {
            !self.terms.is_empty() || self.den.is_one()
        }
    }
}

/// gcd of `start` and all coefficients; stops early at 1.
fn gcd_with(terms: &[Term], start: Int) -> Int {
    let mut common = start;
    for (_, c) in terms {
        if common.is_one() {
            break;
        }
        common = common.gcd(c);
    }
    common
}

impl From<i64> for Poly {
    fn from(n: i64) -> Poly {
        Poly::int(n)
    }
}

impl From<Var> for Poly {
    fn from(v: Var) -> Poly {
        Poly::var(v)
    }
}

impl fmt::Debug for Poly {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        if self.is_zero() {
            return f.write_str("0");
        }
        for (k, (m, c)) in self.terms().enumerate() {
            let plus = if k > 0 { " + " } else { "" };
            match (m.is_one(), c.is_one()) {
                (true, _) => write!(f, "{plus}{c}")?,
                (false, true) => write!(f, "{plus}{m:?}")?,
                (false, false) => write!(f, "{plus}({c})·{m:?}")?,
            }
        }
        Ok(())
    }
}

#[cfg(test)]
mod tests;
