//! The ring of Laurent polynomials against the naive reference, and its own laws.

use mainspring::algebra::monomial::{Monomial, Var};
use mainspring::algebra::number::{Rational, rational};
use mainspring::algebra::polynomial::Poly;
use num_traits::Zero;
use proptest::prelude::*;

use crate::generate::{coefficient, laurent, monomial, nonzero};
use crate::reference::Naive;

const P: u64 = (1 << 61) - 1;

fn at(v: Var) -> u64 {
    7_919 * (v.index() as u64 + 3)
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(300))]

    #[test]
    fn operations_agree_with_the_reference(a in laurent(), b in laurent(), v in 0u32..4) {
        for (result, expected) in [
            (&a + &b, Naive::of(&a).add(&Naive::of(&b))),
            (&a * &b, Naive::of(&a).mul(&Naive::of(&b))),
            (&a - &b, Naive::of(&a).add(&Naive::of(&b.scale(&rational(-1, 1))))),
            (a.formal_derivative(Var::new(v)), Naive::of(&a).derivative(v as usize)),
            (Poly::sum(vec![a.clone(), b.clone(), a.clone()]), Naive::of(&a).add(&Naive::of(&b)).add(&Naive::of(&a))),
        ] {
            prop_assert!(result.is_canonical(), "{:?}", result);
            prop_assert_eq!(Naive::of(&result), expected);
        }
    }

    #[test]
    fn ring_axioms(a in laurent(), b in laurent(), c in laurent()) {
        prop_assert_eq!(&(&a + &b) + &c, &a + &(&b + &c));
        prop_assert_eq!(&(&a * &b) * &c, &a * &(&b * &c));
        prop_assert_eq!(&a * &b, &b * &a);
        prop_assert_eq!(&a * &(&b + &c), &(&a * &b) + &(&a * &c));
        prop_assert_eq!(&a - &a, Poly::zero());
        prop_assert_eq!(&a * &Poly::one(), a.clone());
        prop_assert_eq!(&a + &(-&a), Poly::zero());
        prop_assert_eq!(a.pow(3), &(&a * &a) * &a);
    }

    #[test]
    fn the_order_of_monomials_is_a_group_order(a in monomial(4, -3..=3), b in monomial(4, -3..=3), c in monomial(4, -3..=3)) {
        prop_assert_eq!(a.cmp(&b), a.mul(&c).cmp(&b.mul(&c)));
        prop_assert_eq!(a.cmp(&b), b.inverse().cmp(&a.inverse()));
        prop_assert_eq!(a.mul(&b).div(&b), a.clone());
        let differing = (0..4).map(Var::new).find(|&v| a.exponent(v) != b.exponent(v));
        let expected = differing.map_or(std::cmp::Ordering::Equal, |v| a.exponent(v).cmp(&b.exponent(v)));
        prop_assert_eq!(a.cmp(&b), expected);
    }

    #[test]
    fn laurent_division_inverts_multiplication(a in laurent(), b in laurent(), c in laurent()) {
        let b = nonzero(b);
        let product = &a * &b;
        prop_assert_eq!(product.div_exact(&b), Some(a.clone()));
        // A quotient, when there is one, multiplies back.
        if let Some(q) = (&product + &c).div_exact(&b) {
            prop_assert_eq!(&q * &b, &product + &c);
        } else {
            prop_assert!(c.div_exact(&b).is_none());
        }
    }

    #[test]
    fn the_primitive_part_multiplies_back(a in laurent()) {
        let split = a.primitive();
        prop_assert_eq!(split.part.mul_term(&split.content, &split.monomial), a.clone());
        prop_assert!(split.part.is_canonical());
        if !a.is_zero() {
            prop_assert!(split.part.denominator().is_one());
            prop_assert!(split.part.raw_terms()[0].1.signum() > 0);
            prop_assert!(split.part.vars().iter().all(|&v| split.part.low_degree(v) == 0));
            let content = split.part.raw_terms().iter().fold(split.part.raw_terms()[0].1.clone(), |g, (_, c)| g.gcd(c));
            prop_assert!(content.abs().is_one());
        }
    }

    #[test]
    fn product_rule(a in laurent(), b in laurent(), v in (0u32..4).prop_map(Var::new)) {
        let both = &(&a.formal_derivative(v) * &b) + &(&a * &b.formal_derivative(v));
        prop_assert_eq!((&a * &b).formal_derivative(v), both);
    }

    #[test]
    fn coefficients_and_groups_add_up(a in laurent(), v in (0u32..4).prop_map(Var::new)) {
        let parts = a.coefficients(v);
        prop_assert!(parts.windows(2).all(|w| w[0].0 > w[1].0));
        prop_assert!(parts.iter().all(|(_, c)| !c.contains(v) && c.is_canonical()));
        let whole = parts.iter().map(|(e, c)| c.mul_monomial(&Monomial::power(v, *e))).sum::<Poly>();
        prop_assert_eq!(whole, a.clone());
        let groups = a.collect(|w| w.index() % 2 == 0);
        prop_assert!(groups.windows(2).all(|w| w[0].0 > w[1].0));
        prop_assert_eq!(groups.iter().map(|(m, c)| c.mul_monomial(m)).sum::<Poly>(), a);
    }

    #[test]
    fn evaluation_is_a_homomorphism(a in laurent(), b in laurent(), x in coefficient(), v in (0u32..4).prop_map(Var::new)) {
        let mod_p = |p: &Poly| p.eval_mod(P, &mut at);
        let times = |x: u64, y: u64| (u128::from(x) * u128::from(y) % u128::from(P)) as u64;
        prop_assert_eq!(mod_p(&(&a + &b)), mod_p(&a).zip(mod_p(&b)).map(|(x, y)| (x + y) % P));
        prop_assert_eq!(mod_p(&(&a * &b)), mod_p(&a).zip(mod_p(&b)).map(|(x, y)| times(x, y)));
        prop_assume!(!x.is_zero());
        let by = Poly::constant(&x);
        prop_assert_eq!((&a * &b).substitute(v, &by), &a.substitute(v, &by) * &b.substitute(v, &by));
        let mut point = |w: Var| if w == v { x.clone() } else { rational(2 + w.index() as i64, 3) };
        let direct = a.eval(&mut point);
        let step = a.substitute(v, &by).eval(&mut |w| rational(2 + w.index() as i64, 3));
        prop_assert_eq!(direct, step);
    }

    #[test]
    fn substituting_a_sum_agrees_with_the_value(a in laurent(), b in laurent(), v in (0u32..4).prop_map(Var::new)) {
        let point = |w: Var| rational(3 + 2 * w.index() as i64, 5);
        let value: Rational = b.eval(&mut |w| point(w)).unwrap_or_default();
        let direct = a.eval(&mut |w| if w == v { value.clone() } else { point(w) });
        if let Some(composed) = a.try_substitute(v, &b) {
            prop_assert_eq!(composed.eval(&mut |w| point(w)), direct);
        } else {
            prop_assert!(a.low_degree(v) < 0 && b.len() != 1);
        }
    }
}

#[test]
fn a_product_beyond_one_chunk_is_the_same_sum() {
    let long = |seed: u32, n: u32| {
        let terms = (0..n).map(|k| {
            let k = (k * 2_654_435 + seed) % 1_000_003;
            (
                Monomial::from_pairs([(Var::new(k % 5), (k / 5 % 40) as i32), (Var::new(5 + k % 3), 1)]),
                rational(k.into(), 1),
            )
        });
        Poly::from_terms(terms.collect())
    };
    let (a, b) = (long(1, 1_300), long(7, 1_300));
    let half = |p: &Poly, low: bool| {
        let skip = if low { p.len() / 2 } else { 0 };
        let keep = if low { p.len() } else { p.len() / 2 };
        Poly::from_terms(p.terms().take(keep).skip(skip).map(|(m, c)| (m.clone(), c)).collect())
    };
    let parts = [(true, true), (true, false), (false, true), (false, false)];
    let sum = parts.map(|(x, y)| &half(&a, x) * &half(&b, y)).into_iter().sum::<Poly>();
    assert_eq!(&a * &b, sum);
}
