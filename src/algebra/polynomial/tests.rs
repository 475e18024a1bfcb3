use super::*;
use crate::algebra::number::rational;

fn x() -> Poly {
    Poly::var(Var::new(0))
}
fn y() -> Poly {
    Poly::var(Var::new(1))
}

#[test]
fn a_square_expands_and_divides_back() {
    let s = &x() + &y().scale(&rational(1, 2));
    let square = s.pow(2);
    assert_eq!(square, Poly::sum(vec![x().pow(2), &x() * &y(), y().pow(2).scale(&rational(1, 4))]));
    assert!(square.is_canonical());
    assert_eq!(square.div_exact(&s), Some(s.clone()));
    assert_eq!(square.div_exact(&(&x() - &y())), None);
    assert_eq!((&s - &s), Poly::zero());
}

#[test]
fn the_primitive_part_takes_out_sign_content_and_monomial() {
    let inverse = Poly::monomial(Monomial::power(Var::new(0), -2));
    let p = &(&y().scale(&rational(-4, 3)) + &Poly::int(2)) * &inverse;
    let parts = p.primitive();
    assert!(parts.part.is_canonical());
    assert_eq!(parts.part, &y().scale(&rational(2, 1)) - &Poly::int(3));
    assert_eq!(parts.content, rational(-2, 3));
    assert_eq!(parts.part.mul_term(&parts.content, &parts.monomial), p);
}

#[test]
fn substitution_and_derivative() {
    let p = &x().pow(3) + &(&x() * &y());
    assert_eq!(p.substitute(Var::new(0), &(&y() + &Poly::one())), {
        let s = &y() + &Poly::one();
        &s.pow(3) + &(&s * &y())
    });
    assert_eq!(p.formal_derivative(Var::new(0)), &x().pow(2).scale(&rational(3, 1)) + &y());
    let laurent = Poly::monomial(Monomial::power(Var::new(0), -1));
    assert_eq!(laurent.try_substitute(Var::new(0), &(&y() + &Poly::one())), None);
    assert_eq!(laurent.substitute(Var::new(0), &y().scale(&rational(2, 1))), {
        Poly::term(&rational(1, 2), Monomial::power(Var::new(1), -1))
    });
}

#[test]
fn evaluation_modulo_a_prime_agrees_with_rational_evaluation() {
    let p = &x().scale(&rational(1, 3)) + &Poly::monomial(Monomial::power(Var::new(1), -1));
    let mut at = |v: Var| if v.index() == 0 { 5 } else { 4 };
    assert_eq!(p.eval_mod(101, &mut at), Some(44)); // 5/3 + 1/4 = 23/12
    assert_eq!(44 * 12 % 101, 23);
    assert_eq!(p.eval_mod(3, &mut at), None);
    assert_eq!(p.eval_mod(101, &mut |_| 0), None);
}
