//! Random polynomials of the sizes met in practice.

use mainspring::algebra::monomial::{Monomial, Var};
use mainspring::algebra::number::{Rational, rational};
use mainspring::algebra::polynomial::Poly;
use num_bigint::BigInt;
use num_traits::pow::Pow;
use proptest::collection::vec;
use proptest::prelude::*;

/// Mostly small coefficients, now and then one beyond a machine word.
pub fn coefficient() -> impl Strategy<Value = Rational> {
    prop_oneof![
        8 => (-9i64..=9, 1i64..=4).prop_map(|(n, d)| rational(n, d)),
        1 => any::<i64>().prop_map(|n| rational(n, 1)),
        1 => (any::<i64>(), 2u32..4).prop_map(|(n, k)| Rational::from_integer(BigInt::from(n).pow(k))),
    ]
}

pub fn monomial(vars: u32, exponents: std::ops::RangeInclusive<i32>) -> impl Strategy<Value = Monomial> {
    vec((0..vars, exponents), 0..=3)
        .prop_map(|pairs| Monomial::from_pairs(pairs.into_iter().map(|(v, e)| (Var::new(v), e))))
}

/// A Laurent polynomial in four variables.
pub fn laurent() -> impl Strategy<Value = Poly> {
    vec((monomial(4, -2..=3), coefficient()), 0..=6).prop_map(Poly::from_terms)
}

/// A polynomial with integer coefficients in `vars` variables that is neither constant nor a single term.
pub fn sum_of_terms(vars: u32, terms: std::ops::RangeInclusive<usize>) -> impl Strategy<Value = Poly> {
    vec((monomial(vars, 0..=2), (-6i64..=6).prop_map(|n| rational(n, 1))), terms)
        .prop_map(Poly::from_terms)
        .prop_filter("a sum", |p| p.len() > 1)
}

pub fn nonzero(p: Poly) -> Poly {
    if p.is_zero() { Poly::one() } else { p }
}
