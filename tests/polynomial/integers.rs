//! Integers across the border of the machine word, and the division of the big-integer library underneath.

use mainspring::algebra::factor::integer_factors;
use mainspring::algebra::number::Int;
use num_bigint::{BigInt, Sign};
use num_integer::Integer;
use num_traits::pow::Pow;
use num_traits::{One, Signed};
use proptest::collection::vec;
use proptest::prelude::*;

fn digits(most: usize) -> impl Strategy<Value = BigInt> {
    let word = prop_oneof![4 => any::<u64>(), 1 => Just(0), 1 => Just(u64::MAX), 1 => Just(1 << 63)];
    (any::<bool>(), vec(word, 1..=most)).prop_map(|(minus, words)| {
        let bytes: Vec<u8> = words.iter().flat_map(|w| w.to_le_bytes()).collect();
        BigInt::from_bytes_le(if minus { Sign::Minus } else { Sign::Plus }, &bytes)
    })
}

fn near_the_border() -> impl Strategy<Value = BigInt> {
    prop_oneof![
        any::<i8>().prop_map(BigInt::from),
        any::<i64>().prop_map(BigInt::from),
        any::<i8>().prop_map(|k| BigInt::from(i64::MAX) + k),
        any::<i8>().prop_map(|k| BigInt::from(i64::MIN) + k),
        digits(3),
    ]
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(400))]

    #[test]
    fn division_with_remainder_up_to_400_words(n in digits(400), d in digits(400)) {
        prop_assume!(d.sign() != Sign::NoSign);
        let (q, r) = n.div_rem(&d);
        prop_assert_eq!(&q * &d + &r, n.clone());
        prop_assert!(r.abs() < d.abs());
        let product = &n * &d;
        prop_assert_eq!(product.div_rem(&d), (n, BigInt::from(0)));
    }

    #[test]
    fn words_and_big_integers_agree(a in near_the_border(), b in near_the_border(), p in 3u64..1 << 62) {
        let (x, y) = (Int::from(&a), Int::from(&b));
        prop_assert_eq!(matches!(x, Int::Small(_)), i64::try_from(&a).is_ok());
        prop_assert_eq!((&x + &y).to_bigint(), &a + &b);
        prop_assert_eq!((&x - &y).to_bigint(), &a - &b);
        prop_assert_eq!((&x * &y).to_bigint(), &a * &b);
        prop_assert_eq!((-&x).to_bigint(), -&a);
        prop_assert_eq!(x.cmp(&y), a.cmp(&b));
        prop_assert_eq!(x.gcd(&y).to_bigint(), a.gcd(&b));
        prop_assert_eq!(x.bits(), a.bits());
        prop_assert_eq!(BigInt::from(x.rem_u64(p)), a.mod_floor(&BigInt::from(p)));
        prop_assert_eq!(x.pow(3).to_bigint(), Pow::pow(&a, 3u32));
        prop_assert_eq!(Int::from((&x - &y).to_bigint()), &x - &y);
        if !y.is_zero() {
            let (q, r) = x.div_rem(&y);
            prop_assert_eq!((q.to_bigint(), r.to_bigint()), a.div_rem(&b));
            prop_assert_eq!((&x * &y).div_exact(&y), x);
        }
    }

    #[test]
    fn integer_factors_multiply_back_and_are_coprime(a in 2u64.., b in 2u64..5000, n in digits(3)) {
        for n in [n, BigInt::from(a), BigInt::from(a) * b * b] {
            prop_assume!(n.sign() != Sign::NoSign);
            let factors = integer_factors(&n);
            let product = factors.iter().fold(BigInt::one(), |all, (f, e)| all * Pow::pow(f, *e));
            prop_assert_eq!(product, n.abs());
            for (k, (f, _)) in factors.iter().enumerate() {
                prop_assert!(*f > BigInt::one());
                prop_assert!(factors[..k].iter().all(|(g, _)| g < f && g.gcd(f).is_one()));
            }
        }
    }
}
