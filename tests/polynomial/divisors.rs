//! Greatest common divisors: they divide, they are greatest, and bases built from them are coprime.

use mainspring::algebra::gcd::{coprime, coprime_base, gcd};
use mainspring::algebra::polynomial::Poly;
use proptest::collection::vec;
use proptest::prelude::*;

use crate::generate::{laurent, sum_of_terms};

fn check(a: &Poly, b: &Poly, planted: &Poly) -> Result<(), TestCaseError> {
    let common = gcd(a, b);
    prop_assert_eq!(&common, &common.primitive().part);
    let (left, right) = (a.div_exact(&common), b.div_exact(&common));
    prop_assert!(left.is_some() && right.is_some());
    prop_assert!(coprime(&left.unwrap_or_default(), &right.unwrap_or_default()));
    prop_assert!(common.is_divisible_by(planted), "{:?} lacks {:?}", common, planted);
    prop_assert_eq!(gcd(b, a), common);
    Ok(())
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(120))]

    #[test]
    fn in_three_variables(f in sum_of_terms(3, 2..=6), a in sum_of_terms(3, 2..=5), b in sum_of_terms(3, 2..=5)) {
        check(&(&f * &a), &(&f * &b), &f)?;
        check(&(&f.pow(2) * &a), &(&f.pow(3) * &b), &f.pow(2))?;
    }

    #[test]
    fn in_one_variable(f in sum_of_terms(1, 2..=4), a in sum_of_terms(1, 2..=4), b in sum_of_terms(1, 2..=4)) {
        check(&(&f * &a), &(&f * &b), &f)?;
    }

    #[test]
    fn in_six_variables(f in sum_of_terms(6, 3..=8), a in sum_of_terms(6, 2..=6), b in sum_of_terms(6, 2..=6)) {
        check(&(&f * &a), &(&f * &b), &f)?;
    }

    #[test]
    fn with_foreign_variables_and_contents(f in sum_of_terms(2, 2..=4), a in sum_of_terms(5, 2..=4), b in laurent()) {
        prop_assume!(!b.is_zero());
        check(&(&f * &a), &(&f * &b), &f)?;
    }

    #[test]
    fn a_base_is_coprime_and_generates(list in vec(sum_of_terms(2, 2..=3), 2..=3), i in 0usize..3, j in 0usize..3) {
        let mut all = list.clone();
        all.push(&list[i % list.len()] * &list[j % list.len()]);
        let base = coprime_base(&all);
        for (k, p) in base.iter().enumerate() {
            prop_assert!(!p.is_constant());
            prop_assert!(base[..k].iter().all(|q| coprime(p, q)));
        }
        for p in &all {
            let mut rest = p.primitive().part;
            for q in &base {
                while let Some(quotient) = rest.div_exact(q) {
                    rest = quotient;
                }
            }
            prop_assert!(rest.is_constant(), "{:?} is left of {:?}", rest, p);
        }
    }
}
