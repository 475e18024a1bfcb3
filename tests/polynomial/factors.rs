//! Factorisation: it multiplies back, it is unique, and planted factors come out.

use std::collections::BTreeMap;

use mainspring::algebra::factor::{Factored, factor, is_irreducible, squarefree};
use mainspring::algebra::gcd::coprime;
use mainspring::algebra::monomial::{Monomial, Var};
use mainspring::algebra::number::rational;
use mainspring::algebra::polynomial::Poly;
use proptest::prelude::*;

use crate::generate::{laurent, sum_of_terms};

fn check_form(p: &Poly) -> Result<Factored, TestCaseError> {
    let result = factor(p);
    prop_assert_eq!(&result.expand(), p);
    for (k, (f, e)) in result.factors.iter().enumerate() {
        prop_assert!(*e > 0 && !f.is_constant());
        prop_assert_eq!(f, &f.primitive().part);
        prop_assert!(result.factors[..k].iter().all(|(g, _)| g < f && coprime(f, g)));
        prop_assert!(f.vars().iter().any(|&v| coprime(f, &f.formal_derivative(v))));
    }
    Ok(result)
}

fn multiset(parts: &[&Factored]) -> BTreeMap<Poly, u32> {
    let mut all = BTreeMap::new();
    for (f, e) in parts.iter().flat_map(|part| &part.factors) {
        *all.entry(f.clone()).or_insert(0) += e;
    }
    all
}

/// The factors of a product are those of its parts.
fn check_unique(a: &Poly, b: &Poly) -> Result<(), TestCaseError> {
    let (left, right, whole) = (check_form(a)?, check_form(b)?, check_form(&(a * b))?);
    prop_assert!(left.complete && right.complete && whole.complete, "{:?} · {:?}", a, b);
    prop_assert_eq!(multiset(&[&left, &right]), multiset(&[&whole]));
    Ok(())
}

/// The polynomial with every variable replaced by its k-th power, plus the product of the variables.
fn powered(p: &Poly, k: i32) -> Poly {
    let terms = p.terms().map(|(m, c)| (m.pow(k), c));
    let all = Monomial::from_pairs((0..3).map(|v| (Var::new(v), 1)));
    &Poly::from_terms(terms.collect()) + &Poly::monomial(all)
}

/// A rational root of a cubic or quadratic with small integer coefficients, found by trying all candidates.
fn has_rational_root(p: &Poly, v: Var) -> bool {
    (1..=6i64).any(|d| (-6..=6).any(|n| p.substitute(v, &Poly::constant(&rational(n, d))).is_zero()))
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(100))]

    #[test]
    fn unique_in_one_variable(a in sum_of_terms(1, 2..=4), b in sum_of_terms(1, 2..=4), c in sum_of_terms(1, 2..=4)) {
        check_unique(&(&a * &c.pow(2)), &(&b * &c))?;
    }

    #[test]
    fn unique_in_two_variables(a in sum_of_terms(2, 2..=5), b in sum_of_terms(2, 2..=5)) {
        check_unique(&a, &b)?;
    }

    #[test]
    fn unique_in_three_variables(a in sum_of_terms(3, 3..=6), b in sum_of_terms(3, 3..=6)) {
        check_unique(&a, &b)?;
        check_unique(&(&a * &b), &b)?;
    }

    #[test]
    fn unique_in_five_variables(a in sum_of_terms(5, 3..=6), b in sum_of_terms(5, 3..=6)) {
        check_unique(&a, &b)?;
    }

    #[test]
    fn unique_when_no_variable_is_linear(a in sum_of_terms(3, 3..=5), b in sum_of_terms(3, 3..=5)) {
        check_unique(&powered(&a, 2), &powered(&b, 3))?;
    }

    #[test]
    fn laurent_polynomials_multiply_back(p in laurent()) {
        check_form(&p)?;
    }

    #[test]
    fn low_degree_in_one_variable_is_decided_by_rational_roots(c in proptest::collection::vec(-6i64..=6, 3..=4)) {
        prop_assume!(c[0] != 0 && c[c.len() - 1] != 0);
        let v = Var::new(0);
        let terms = c.iter().enumerate().map(|(e, &c)| (Monomial::power(v, e as i32), rational(c, 1)));
        let p = Poly::from_terms(terms.collect());
        prop_assert_eq!(is_irreducible(&p), !has_rational_root(&p, v));
    }

    #[test]
    fn squarefree_parts_multiply_back(a in sum_of_terms(3, 2..=4), b in sum_of_terms(3, 2..=4)) {
        let p = &a.pow(3) * &b;
        let parts = squarefree(&p);
        let product = Poly::product(&parts.iter().map(|(f, e)| f.pow(*e)).collect::<Vec<_>>());
        prop_assert_eq!(product, p.primitive().part);
        for (k, (f, _)) in parts.iter().enumerate() {
            prop_assert!(parts[..k].iter().all(|(g, _)| coprime(f, g)));
        }
    }
}
