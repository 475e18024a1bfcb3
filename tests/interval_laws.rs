//! Laws of the interval arithmetic on random arguments.

use mainspring::algebra::interval::Interval;
use mainspring::algebra::number::{Rational, rational};
use num_traits::{Signed, Zero};
use proptest::prelude::*;
use std::cmp::Ordering;

type Unary = fn(&Interval) -> Option<Interval>;

/// Functions with, for each, the span of arguments on which to try it.
const FUNCTIONS: [(&str, Unary, i64, i64); 12] = [
    ("exp", Interval::exp, -60, 60),
    ("ln", Interval::ln, 0, 60),
    ("sqrt", Interval::sqrt, 0, 60),
    ("seventh root", |x| x.root(7), 0, 60),
    ("fiftieth root", |x| x.root(50), 0, 60),
    ("cube", |x| x.pow_int(3), -60, 60),
    ("inverse square", |x| x.pow_int(-2), 0, 60),
    ("Ei right", Interval::ei, 0, 60),
    ("Ei left", Interval::ei, -60, 0),
    ("erf", Interval::erf, -12, 12),
    ("erfi", Interval::erfi, -12, 12),
    ("W", Interval::lambertw, 0, 60),
];

fn fraction() -> impl Strategy<Value = Rational> {
    (-100_000i64..100_000, 1i64..5_000).prop_map(|(n, d)| rational(n, d))
}

fn positive() -> impl Strategy<Value = Rational> {
    (1i64..100_000, 1i64..5_000).prop_map(|(n, d)| rational(n, d))
}

/// A proper fraction.
fn share() -> impl Strategy<Value = Rational> {
    (1i64..100_000).prop_map(|n| rational(n, 100_001))
}

fn precision() -> impl Strategy<Value = u32> {
    prop_oneof![8u32..40, Just(64), Just(128), Just(200)]
}

fn within(low: i64, high: i64, share: &Rational) -> Rational {
    rational(low, 1) + share * rational(high - low, 1)
}

fn enclosed(x: &Rational, bits: u32) -> Interval {
    Interval::from_rational(x, bits)
}

fn between(a: &Rational, b: &Rational, bits: u32) -> Interval {
    enclosed(a, bits).hull(&enclosed(b, bits))
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(300))]

    #[test]
    fn exact_operations_are_enclosed(x in fraction(), y in fraction(), bits in precision()) {
        let (a, b) = (enclosed(&x, bits), enclosed(&y, bits));
        prop_assert!(a.contains(&x) && b.contains(&y));
        prop_assert!(a.add(&b).contains(&(&x + &y)));
        prop_assert!(a.sub(&b).contains(&(&x - &y)));
        prop_assert!(a.mul(&b).contains(&(&x * &y)));
        if !y.is_zero() {
            prop_assert!(a.div(&b).unwrap().contains(&(&x / &y)));
        }
        for n in [2, 3, 6] {
            prop_assert!(a.pow_int(i64::from(n)).unwrap().contains(&x.pow(n)));
        }
    }

    /// Operations on sets: whatever members are picked, the result is a member of the result.
    #[test]
    fn operations_on_members_are_members(
        ends in [fraction(), fraction(), fraction(), fraction()],
        picks in [share(), share()],
        bits in precision(),
    ) {
        let [a, b, c, d] = ends;
        let (x, y) = (between(&a, &b, bits), between(&c, &d, bits));
        let p = &a + (&b - &a) * &picks[0];
        let q = &c + (&d - &c) * &picks[1];
        prop_assert!(x.add(&y).contains(&(&p + &q)));
        prop_assert!(x.sub(&y).contains(&(&p - &q)));
        prop_assert!(x.mul(&y).contains(&(&p * &q)));
        if let Some(quotient) = x.div(&y) {
            prop_assert!(quotient.contains(&(&p / &q)));
        }
        for n in [2, 3] {
            prop_assert!(x.pow_int(i64::from(n)).unwrap().contains(&p.pow(n)));
        }
        prop_assert!(x.hull(&y).contains(&p) && x.hull(&y).contains(&q));
        prop_assert_eq!(x.intersection(&y).is_some_and(|both| both.contains(&p)), x.contains(&p) && y.contains(&p));
        prop_assert!(x.contains(&x.midpoint().to_rational()));
        prop_assert!(x.width().to_rational() >= (&a - &b).abs());
    }

    #[test]
    fn a_product_and_a_quotient_of_sets_reach_no_further_than_their_corners(
        ends in [fraction(), fraction(), fraction(), fraction()],
    ) {
        let [a, b, c, d] = &ends;
        let (x, y) = (between(a, b, 256), between(c, d, 256));
        let spans = |set: &Interval, corners: [Rational; 4]| {
            let (least, most) = (corners.iter().min().unwrap(), corners.iter().max().unwrap());
            let slack = (set.hi_rational() - most) + (least - set.lo_rational());
            set.contains(least) && set.contains(most) && slack <= rational(1, 1 << 60)
        };
        prop_assert!(spans(&x.mul(&y), [a * c, a * d, b * c, b * d]));
        if let Some(quotient) = x.div(&y) {
            prop_assert!(spans(&quotient, [a / c, a / d, b / c, b / d]));
        }
    }

    /// A narrower argument has a narrower value, also when that is computed more finely.
    #[test]
    fn functions_are_isotone(shares in [share(), share(), share()], bits in precision()) {
        let mut shares = shares;
        shares.sort();
        for (name, f, low, high) in FUNCTIONS {
            let [a, m, b] = [0, 1, 2].map(|i| within(low, high, &shares[i]));
            let inner = f(&enclosed(&m, bits + 60));
            prop_assert!(inner.is_some(), "{} at {}", name, m);
            if let (Some(wide), Some(inner)) = (f(&between(&a, &b, bits)), inner) {
                prop_assert!(wide.encloses(&inner), "{} on [{}, {}] and at {}", name, a, b, m);
            }
        }
    }

    /// At a dyadic point the value at a coarse precision encloses the one at a fine precision: no rounding or remainder
    /// goes uncounted.
    #[test]
    fn coarse_values_enclose_fine_ones(n in 1i64..1_000_000, bits in 8u32..100) {
        for (name, f, low, high) in FUNCTIONS {
            // eight bits fit every precision
            let point = Interval::point(enclosed(&within(low, high, &rational(n, 1 << 20)), 8).lo(), 8);
            if point.lo().is_zero() {
                continue;
            }
            let [coarse, fine] = [bits, bits + 150].map(|bits| f(&point.with_bits(bits)).unwrap());
            prop_assert!(coarse.encloses(&fine), "{} at {:?} with {} bits", name, point.lo(), bits);
        }
    }

    /// Terms of very different sizes: the smaller one still decides the direction of rounding.
    #[test]
    fn sums_of_far_apart_terms(x in fraction(), y in fraction(), far in -300i64..300, bits in precision()) {
        let (a, b) = (enclosed(&x, bits), enclosed(&y, bits).scaled(far));
        let exact = &x + &y * rational(2, 1).pow(i32::try_from(far).unwrap());
        prop_assert!(a.add(&b).contains(&exact));
        prop_assert!(a.sub(&a.add(&b)).contains(&(&x - &exact)));
    }

    /// At a dyadic point the value is as narrow as the precision allows, up to a few units in the last place. (Ei has a
    /// zero at 0.3725, near which the precision is absolute.)
    #[test]
    fn functions_are_tight(n in 1i64..1_000_000, bits in 64u32..300) {
        for (name, f, low, high) in FUNCTIONS {
            let x = within(low, high, &rational(n, 1 << 20));
            if x.is_zero() || (name == "Ei right" && x < rational(1, 1)) {
                continue;
            }
            let value = f(&enclosed(&x, bits)).unwrap();
            let relative = value.width().top() - value.lo().top().min(value.hi().top());
            prop_assert!(relative <= 3 - i64::from(bits), "{} at {}: 2^{} for {} bits", name, x, relative, bits);
        }
    }

    #[test]
    fn exponential_and_logarithm_are_inverse(x in positive(), bits in precision()) {
        prop_assert!(enclosed(&x, bits).ln().unwrap().exp().unwrap().contains(&x));
        let small = x / rational(100, 1);
        prop_assert!(enclosed(&small, bits).exp().unwrap().ln().unwrap().contains(&small));
    }

    #[test]
    fn logarithm_of_a_product(x in positive(), y in positive(), bits in precision()) {
        let together = enclosed(&(&x * &y), bits).ln().unwrap();
        let apart = enclosed(&x, bits).ln().unwrap().add(&enclosed(&y, bits).ln().unwrap());
        prop_assert!(together.intersection(&apart).is_some());
    }

    #[test]
    fn roots_undo_powers(x in positive(), n in 1u32..60, bits in precision()) {
        let root = enclosed(&x, bits).root(n).unwrap();
        prop_assert!(root.pow_int(i64::from(n)).unwrap().contains(&x));
    }

    /// x^(p/q) raised to q is x^p.
    #[test]
    fn real_powers_agree_with_integer_powers(x in positive(), p in -9i64..9, q in 1i64..9, bits in precision()) {
        let a = enclosed(&x, bits);
        let power = a.pow(&enclosed(&rational(p, q), bits)).unwrap();
        prop_assert!(power.pow_int(q).unwrap().intersection(&a.pow_int(p).unwrap()).is_some());
    }

    #[test]
    fn lambert_w_solves_its_equation(x in positive(), bits in precision()) {
        let w = enclosed(&x, bits).lambertw().unwrap();
        prop_assert!(w.mul(&w.exp().unwrap()).contains(&x));
    }

    /// Left of zero, down to −0.3678 > −1/e.
    #[test]
    fn lambert_w_solves_its_equation_for_negative_arguments(s in share(), bits in 16u32..200) {
        let x = -s * rational(3678, 10_000);
        let w = enclosed(&x, bits).lambertw().unwrap();
        prop_assert!(w.mul(&w.exp().unwrap()).contains(&x));
        prop_assert!(w.lo_rational() >= rational(-1, 1) && w.hi_rational() < Rational::zero());
    }

    /// The mean value theorem: a difference quotient is a value of the derivative between the points.
    #[test]
    fn difference_quotients_are_values_of_the_derivative(s in share(), step in 1i64..1000) {
        let derivatives: [(&str, Unary, Unary, i64, i64); 7] = [
            ("exp", Interval::exp, Interval::exp, -20, 20),
            ("ln", Interval::ln, Interval::recip, 0, 20),
            ("Ei", Interval::ei, |x| x.exp()?.div(x), 0, 600),
            ("Ei", Interval::ei, |x| x.exp()?.div(x), -60, -1),
            ("erf", Interval::erf, |x| gaussian(x, -1), 0, 8),
            ("erfi", Interval::erfi, |x| gaussian(x, 1), 0, 30),
            ("W", Interval::lambertw, slope_of_w, 0, 60),
        ];
        for (name, f, slope, low, high) in derivatives {
            let x = within(low, high, &s);
            let h = rational(step, 1_000_000) * &s;
            let (a, b) = (enclosed(&x, 192), enclosed(&(&x + &h), 192));
            let quotient = f(&b).unwrap().sub(&f(&a).unwrap()).div(&enclosed(&h, 192)).unwrap();
            prop_assert!(slope(&a.hull(&b)).unwrap().intersection(&quotient).is_some(), "{} at {}", name, x);
        }
    }

    #[test]
    fn a_sign_is_the_sign_of_every_member(x in fraction(), y in fraction(), bits in precision()) {
        let set = between(&x, &y, bits);
        match set.sign() {
            Some(Ordering::Greater) => prop_assert!(x.is_positive() && y.is_positive() && !set.contains_zero()),
            Some(Ordering::Less) => prop_assert!(x.is_negative() && y.is_negative() && !set.contains_zero()),
            Some(Ordering::Equal) => prop_assert!(x.is_zero() && y.is_zero()),
            None => prop_assert!(set.contains_zero() && !set.is_point()),
        }
    }

    #[test]
    fn decimal_bounds_enclose_and_are_close(x in fraction(), power in -60i64..60, digits in 1u32..30) {
        let value = enclosed(&x, 150).scaled(power);
        let (lower, upper) = value.to_decimal_bounds(digits);
        let (a, b) = (decimal(&lower), decimal(&upper));
        prop_assert!(a <= value.lo_rational() && value.hi_rational() <= b);
        let places = rational(10, 1).pow(1 - i32::try_from(digits).unwrap());
        let size = value.lo_rational().abs().max(value.hi_rational().abs());
        prop_assert!(&b - &a <= size * places * rational(2, 1) + (value.hi_rational() - value.lo_rational()));
    }
}

/// `(2/√π)·e^(±x²)`.
fn gaussian(x: &Interval, sign: i64) -> Option<Interval> {
    let square = x.pow_int(2)?.mul(&enclosed(&rational(sign, 1), x.bits()));
    square.exp()?.scaled(1).div(&Interval::pi(x.bits()).sqrt()?)
}

/// `W' = 1/(e^W·(1 + W))`.
fn slope_of_w(x: &Interval) -> Option<Interval> {
    let w = x.lambertw()?;
    w.exp()?.mul(&w.add(&Interval::one(x.bits()))).recip()
}

fn decimal(text: &str) -> Rational {
    let (figures, power) = text.split_once('e').unwrap_or((text, "0"));
    let (whole, part) = figures.split_once('.').unwrap_or((figures, ""));
    let digits: num_bigint::BigInt = format!("{whole}{part}").parse().unwrap();
    let exponent = power.parse::<i32>().unwrap() - i32::try_from(part.len()).unwrap();
    Rational::from_integer(digits) * rational(10, 1).pow(exponent)
}
