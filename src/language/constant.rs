//! The size of exponents without names, found before any power is worked out.

use num_traits::{One, Signed, ToPrimitive, Zero};

use super::syntax::{Expr, ExprKind, Rational};

/// The largest exponent without names, in absolute value.
pub const MAX_EXPONENT: i32 = 10_000;

/// What is known of the value of a formula.
#[derive(Clone, Debug, PartialEq)]
pub enum Constant {
    /// The value, exact.
    Value(Rational),
    /// A number beyond the bound on exponents.
    TooLarge,
    /// Not a number, or not one that is worked out here.
    Unknown,
}

/// The value of a formula of integers and decimals; what has names or functions in it is unknown. Intermediate results
/// beyond the bound on size count as too large.
pub fn value(expr: &Expr) -> Constant {
    match evaluate(expr) {
        Constant::Value(value) if value.abs() > Rational::from_integer(MAX_EXPONENT.into()) => Constant::TooLarge,
        other => other,
    }
}

/// The bound on the size of intermediate results.
const MAX_BITS: u64 = 256;

fn evaluate(expr: &Expr) -> Constant {
    match &expr.kind {
        ExprKind::Number(value) => bounded(value.clone()),
        ExprKind::Negative(inner) => {
            combine(Constant::Value(Rational::zero()), inner, |zero, value| bounded(zero - value))
        }
        ExprKind::Sum(terms) => terms
            .iter()
            .fold(Constant::Value(Rational::zero()), |sum, term| combine(sum, term, |sum, value| bounded(sum + value))),
        ExprKind::Product(factors) => factors.iter().fold(Constant::Value(Rational::one()), |product, factor| {
            combine(product, &factor.expr, |product, value| match factor.inverted {
                false => bounded(product * value),
                true if value.is_zero() => Constant::Unknown,
                true => bounded(product / value),
            })
        }),
        ExprKind::Power(base, exponent) => combine(evaluate(base), exponent, power),
        _ => Constant::Unknown,
    }
}

/// The result of a step on two values; what is unknown or too large stays so.
fn combine(a: Constant, b: &Expr, step: impl Fn(Rational, Rational) -> Constant) -> Constant {
    let Constant::Value(a) = a else { return a };
    match evaluate(b) {
        Constant::Value(b) => step(a, b),
        other => other,
    }
}

/// A value, unless writing it out would take too much room.
fn bounded(value: Rational) -> Constant {
    if value.numer().bits() <= MAX_BITS && value.denom().bits() <= MAX_BITS {
        Constant::Value(value)
    } else if value.abs() > Rational::from_integer(MAX_EXPONENT.into()) {
        Constant::TooLarge
    } else {
        Constant::Unknown
    }
}

/// A power with an integer exponent, worked out where it is of moderate size.
fn power(base: Rational, exponent: Rational) -> Constant {
    if base.is_one() || exponent.is_zero() {
        return Constant::Value(Rational::one());
    }
    let bits = base.numer().bits().max(base.denom().bits());
    match exponent.to_i32().filter(|_| exponent.is_integer()) {
        _ if base.is_zero() => Constant::Unknown,
        Some(times) if bits * u64::from(times.unsigned_abs()) <= 2 * MAX_BITS => bounded(base.pow(times)),
        _ if base.is_integer()
            && base.abs() > Rational::one()
            && exponent > Rational::from_integer(MAX_BITS.into()) =>
        {
            Constant::TooLarge
        }
        _ => Constant::Unknown,
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::language::{Source, Statement, read};

    /// What is known of the exponent of `a^(…)`.
    fn of(formula: &str) -> Constant {
        let model = read(&Source::new("", format!("let y = {formula}"))).unwrap();
        match &model.statements[0].statement {
            Statement::Let { value: expr, .. } => value(expr),
            other => panic!("{other:?}"),
        }
    }

    #[test]
    fn small_values_are_exact() {
        for (formula, numerator, denominator) in
            [("3/4 - 1", -1, 4), ("-2^3", -8, 1), ("(1/2)^-2", 4, 1), ("100^2", 10_000, 1), ("2^-3*4", 1, 2)]
        {
            let expected = Rational::new(numerator.into(), denominator.into());
            assert_eq!(of(formula), Constant::Value(expected), "{formula}");
        }
    }

    #[test]
    fn large_values_are_never_worked_out() {
        for formula in ["10001", "-10001", "10^9", "2^10000", "2^1000*3^1000", "(3/2)^100", "1 + 10^4"] {
            assert_eq!(of(formula), Constant::TooLarge, "{formula}");
        }
        for formula in ["a", "2*a", "ln(2)", "2^(1/2)", "1/0", "0^-1", "pi"] {
            assert_eq!(of(formula), Constant::Unknown, "{formula}");
        }
    }
}
