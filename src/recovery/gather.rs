//! Powers brought together for reading: S·Sᵏ, multiplied out in the normal form, as Sᵏ⁺¹ again.

use crate::algebra::field::Field;
use crate::algebra::generator::{Base, Element, Kind};
use crate::algebra::monomial::{Monomial, Var};
use crate::algebra::polynomial::Poly;

/// How often one sum is divided out.
const MOST_TIMES: i32 = 4;

/// The element with multiples of a sum beside a power or root of the same sum written as a higher power.
pub fn gathered(field: &Field, e: &Element) -> Element {
    let mut e = field.current(e);
    for power in e.vars() {
        let Some((value, sum)) = base(field, power) else { continue };
        if value.len() < 2 || !e.contains(power) {
            continue;
        }
        let parts = e.coefficients(power).into_iter().map(|(exponent, coefficient)| {
            let part = if exponent == 0 { coefficient } else { divide_out(coefficient, &value, &sum) };
            part.mul_monomial(&Monomial::power(power, exponent))
        });
        e = Poly::sum(parts.collect());
    }
    e
}

fn divide_out(mut coefficient: Poly, value: &Poly, sum: &Monomial) -> Poly {
    for times in 0..MOST_TIMES {
        match coefficient.div_exact(value) {
            Some(quotient) => coefficient = quotient,
            None => return coefficient.mul_monomial(&sum.pow(times)),
        }
    }
    coefficient.mul_monomial(&sum.pow(MOST_TIMES))
}

/// For a power or root of a sum: the value of the sum, and the monomial that stands for it.
fn base(field: &Field, var: Var) -> Option<(Poly, Monomial)> {
    match &*field.kind(var) {
        Kind::Sum { value, root } if *root > 1 => Some((field.expand(value), Monomial::power(var, *root as i32))),
        Kind::Exp(argument) => {
            let argument = field.current(argument);
            let mut logs = argument.vars();
            logs.retain(|v| matches!(*field.kind(*v), Kind::Ln(_)));
            let [log] = logs[..] else { return None };
            let Kind::Ln(Base::Sum(value)) = &*field.kind(log) else { return None };
            let named = field.named(value, None);
            let (content, monomial) = named.as_monomial()?;
            num_traits::One::is_one(&content).then(|| (field.expand(value), monomial.clone()))
        }
        _ => None,
    }
}
