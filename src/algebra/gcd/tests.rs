use super::*;

fn v(k: u32) -> Poly {
    Poly::var(Var::new(k))
}

fn sum(parts: &[Poly]) -> Poly {
    Poly::sum(parts.to_vec())
}

#[test]
fn coprime_and_equal_and_constant_cases() {
    let (x, y) = (v(0), v(1));
    let s = &x + &y;
    assert!(gcd(&s, &(&x - &y)).is_one());
    assert_eq!(gcd(&s, &Poly::zero()), s);
    assert_eq!(gcd(&(&s * &x), &(&s * &Poly::int(6))), s);
    assert!(gcd(&x, &s).is_one());
}

#[test]
fn a_planted_factor_of_high_degree_is_found() {
    let (x, y, z) = (v(0), v(1), v(2));
    let g = sum(&[x.pow(3), &(&x * &y.pow(2)) * &Poly::int(5), z.pow(2).neg(), Poly::int(7)]);
    let a = sum(&[&x.pow(2) * &y, z.pow(3), Poly::int(-2)]);
    let b = sum(&[&y.pow(3) * &z, &x.pow(2) * &Poly::int(3), Poly::int(1)]);
    assert_eq!(gcd(&(&g * &a), &(&g * &b)), g);
    assert_eq!(gcd(&(&g.pow(2) * &a), &(&g.pow(3) * &b)), g.pow(2));
}

#[test]
fn leading_coefficients_and_contents_are_kept() {
    let (x, y, z) = (v(0), v(1), v(2));
    let g = sum(&[&(&y.pow(2) + &z) * &x.pow(2), &(&z.pow(2) - &y) * &x, &y.pow(2) * &z.pow(2), Poly::int(3)]);
    let content = sum(&[y.pow(2), z.pow(2), Poly::int(1)]);
    let a = sum(&[&(&y + &z) * &x.pow(2), z.pow(2), Poly::int(1)]);
    let b = sum(&[&(&y.pow(2) - &Poly::int(2)) * &x.pow(2), z.clone()]);
    let (left, right) = (&(&g * &content) * &a, &(&g * &content) * &b);
    assert_eq!(gcd(&left, &right), &g * &content);
    let main = Var::new(0);
    assert_eq!(remainder::gcd_by_remainders(&(&g * &a), &(&g * &b), main), g);
}

#[test]
fn coefficients_beyond_one_prime() {
    let (x, y) = (v(0), v(1));
    let big = Poly::constant(&num_traits::pow::Pow::pow(crate::algebra::number::rational(1_000_003, 1), 9));
    let g = sum(&[&x.pow(2) * &big, &(&y.pow(2) * &x) * &Poly::int(3), &big + &Poly::int(1), y.pow(3)]);
    let (a, b) = (&x.pow(2) + &y, &(&x.pow(2) * &y) + &Poly::int(9));
    assert_eq!(gcd(&(&g * &a), &(&g * &b)), g);
}

#[test]
fn a_coprime_base_splits_by_common_factors() {
    let (x, y) = (v(0), v(1));
    let (s, d) = (&x + &y, &x - &y);
    let base = coprime_base(&[&s.pow(3) * &d, s.pow(2), &d * &x]);
    assert_eq!(base, {
        let mut expected = vec![s, d];
        expected.sort();
        expected
    });
}
