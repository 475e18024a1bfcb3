use super::*;
use crate::algebra::number::rational;

fn v(k: u32) -> Poly {
    Poly::var(Var::new(k))
}

fn sum(parts: &[Poly]) -> Poly {
    Poly::sum(parts.to_vec())
}

/// Factors the product and checks that exactly the given irreducible polynomials come out.
fn finds(parts: &[(Poly, u32)]) {
    let whole = Poly::product(&parts.iter().map(|(f, e)| f.pow(*e)).collect::<Vec<_>>());
    let result = factor(&whole);
    assert_eq!(result.expand(), whole);
    assert!(result.complete, "{result:?}");
    let mut expected: Vec<(Poly, u32)> = parts.iter().map(|(f, e)| (f.primitive().part, *e)).collect();
    expected.sort();
    assert_eq!(result.factors, expected);
}

#[test]
fn univariate_factors() {
    let x = v(0);
    let one = Poly::one();
    finds(&[(&x - &one, 3), (&x + &one, 1), (&x.pow(2) + &one, 2)]);
    finds(&[(sum(&[x.pow(2).scale(&rational(6, 1)), x.clone(), Poly::int(-7)]).div_exact(&(&x - &one)).unwrap(), 1)]);
    // Irreducible although reducible modulo every prime.
    finds(&[(sum(&[x.pow(4), x.pow(2).scale(&rational(-10, 1)), one.clone()]), 1)]);
    assert_eq!(factor(&(&x.pow(12) - &one)).factors.len(), 6);
    assert_eq!(factor(&(&x.pow(105) - &one)).factors.len(), 8);
    let big = Poly::constant(&num_traits::pow::Pow::pow(rational(10, 1), 30u32));
    finds(&[(sum(&[x.pow(3), &x * &big, Poly::int(3)]), 1), (sum(&[&x.pow(2) * &Poly::int(7), big, x.clone()]), 1)]);
}

#[test]
fn linear_quadratic_and_homogeneous_shortcuts() {
    let (x, y, z) = (v(0), v(1), v(2));
    finds(&[(&x - &y, 1), (&x + &y, 1)]);
    finds(&[(sum(&[&x * &y, z.clone()]), 1), (&x + &z, 2)]);
    finds(&[(sum(&[x.pow(2), y.pow(2), z.pow(2)]), 1)]);
    finds(&[(sum(&[x.pow(2), &(&x * &y) * &Poly::int(3), y.pow(2)]), 1), (sum(&[x.pow(2), y.pow(2)]), 1)]);
    assert_eq!(factor(&(&x.pow(6) - &y.pow(6))).factors.len(), 4);
    assert_eq!(factor(&(&x.pow(2) - &(&y * &z).pow(2))).factors.len(), 2);
}

#[test]
fn lifting_with_leading_coefficients() {
    let (x, y, z) = (v(0), v(1), v(2));
    let one = Poly::one();
    let f = sum(&[&(&y.pow(2) + &z) * &x.pow(3), &(&x * &y) * &z, Poly::int(2), z.pow(3)]);
    let g = sum(&[&(&y.pow(2) + &z) * &x.pow(3), &x.pow(2) * &y.pow(3), z.pow(2), Poly::int(-5)]);
    let h = sum(&[&(&y * &z.pow(2)) * &x.pow(4), y.pow(3), &x * &z, one]);
    finds(&[(f.clone(), 1), (g.clone(), 1)]);
    finds(&[(f.clone(), 1), (g, 1), (h.clone(), 1)]);
    finds(&[(f, 1), (h, 2)]);
}

#[test]
fn large_coefficients_need_several_primes() {
    let (x, y) = (v(0), v(1));
    let big = Poly::constant(&num_traits::pow::Pow::pow(rational(1_000_003, 1), 7u32));
    let f = sum(&[x.pow(3), &y.pow(3) * &big, Poly::int(2), &x * &y]);
    let g = sum(&[x.pow(3), y.pow(4), big, &x * &y]);
    finds(&[(f, 1), (g, 1)]);
}

#[test]
fn content_sign_and_monomial_are_separate() {
    let (x, y) = (v(0), v(1));
    let p = (&x.pow(2) - &y.pow(2)).mul_term(&rational(-3, 2), &Monomial::power(Var::new(1), -4));
    let result = factor(&p);
    assert_eq!((result.content.clone(), result.monomial.clone()), (rational(-3, 2), Monomial::power(Var::new(1), -4)));
    assert_eq!(result.expand(), p);
    assert_eq!(factor(&Poly::zero()).expand(), Poly::zero());
    assert!(factor(&Poly::int(5)).factors.is_empty());
    assert!(!is_irreducible(&p) && is_irreducible(&(&x.pow(2) + &y.pow(2))));
}
