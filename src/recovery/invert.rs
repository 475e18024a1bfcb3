//! Solving φ(y) = Z for y.

use num_traits::{One, Signed};

use crate::algebra::field::{Field, Relation};
use crate::algebra::generator::{Base, Element, Kind};
use crate::algebra::monomial::Var;
use crate::algebra::number::Rational;
use crate::algebra::polynomial::Poly;
use crate::algebra::sign::Sign;

use super::fractions::Moving;

/// A solution y = φ⁻¹(Z) together with what must be positive for it.
#[derive(Clone, Debug)]
pub struct Inverse {
    /// y.
    pub value: Element,
    /// What is positive because it equals something positive in y.
    pub positive: Vec<Element>,
}

/// Solves φ(y) = Z for y where φ is built by one generator at a time, or linear over linear in one of them.
pub fn solve(field: &Field, phi: &Element, y: Var, target: &Element) -> Option<Inverse> {
    let income = Moving::new(field, &[y]);
    let mut inverse = Inverse { value: target.clone(), positive: Vec::new() };
    let mut phi = field.reduce(phi);
    for _ in 0..8 {
        if phi.as_var() == Some(y) {
            return Some(inverse);
        }
        phi = step(&income, &phi, &mut inverse).or_else(|| product_of_logs(&income, &phi, &mut inverse))?;
    }
    None
}

/// One layer: φ = (a·Gᵏ + b)/(c·Gᵏ + d) for one generator G; the target becomes that of what is inside G.
fn step(income: &Moving, phi: &Element, inverse: &mut Inverse) -> Option<Element> {
    let field = income.field;
    let (numerator, denominator) = {
        let cleared = income.clear(phi);
        let below = income.raise(
            &super::fractions::Cleared { numerator: Poly::one(), denominator: Default::default() },
            &cleared.denominator,
        );
        (cleared.numerator, below)
    };
    let mut moving: Vec<Var> = numerator.vars();
    moving.extend(denominator.vars());
    moving.retain(|v| income.moves(*v));
    moving.sort_unstable();
    moving.dedup();
    let [own] = moving[..] else { return None };
    let power = single_power(own, &[&numerator, &denominator])?;
    let coefficient = |p: &Poly, k: i32| {
        let found = p.coefficients(own).into_iter().find(|(e, _)| *e == k);
        found.map_or_else(Poly::zero, |(_, c)| c)
    };
    // a G^k + b = Z (c G^k + d)
    let target = field.current(&inverse.value);
    let lead = &coefficient(&numerator, power) - &field.product(&target, &coefficient(&denominator, power));
    let rest = &field.product(&target, &coefficient(&denominator, 0)) - &coefficient(&numerator, 0);
    let raised = field.reduce(&field.quotient(&field.current(&rest), &field.current(&lead)).ok()?);
    inverse.value = if power == 1 {
        raised
    } else {
        if field.sign(&Poly::var(own)) != Sign::Positive {
            return None;
        }
        let exponent = Poly::constant(&Rational::new(1.into(), power.into()));
        powered(field, inverse, &raised, &exponent)?
    };
    inside(income, own, inverse)
}

/// k where the variable occurs to the powers 0 and k only.
fn single_power(var: Var, parts: &[&Poly]) -> Option<i32> {
    let mut exponents: Vec<i32> = parts.iter().flat_map(|p| p.coefficients(var)).map(|(k, _)| k).collect();
    exponents.retain(|k| *k != 0);
    exponents.sort_unstable();
    exponents.dedup();
    match exponents[..] {
        [k] => Some(k),
        _ => None,
    }
}

/// value^exponent, the value being positive because a generator of y is.
fn powered(field: &Field, inverse: &mut Inverse, value: &Element, exponent: &Element) -> Option<Element> {
    require_positive(field, inverse, value);
    let facts: Vec<(Element, Relation)> = inverse.positive.iter().map(|e| (e.clone(), Relation::Positive)).collect();
    field.suppose(&facts, || field.power(value, exponent)).ok()
}

fn require_positive(field: &Field, inverse: &mut Inverse, value: &Element) {
    if field.sign(value) != Sign::Positive {
        inverse.positive.push(value.clone());
    }
}

/// From G = target to what is inside G.
fn inside(income: &Moving, own: Var, inverse: &mut Inverse) -> Option<Element> {
    let field = income.field;
    let target = field.current(&inverse.value);
    match &*field.kind(own) {
        Kind::Symbol(_) => Some(Poly::var(own)),
        Kind::Ln(base) => {
            inverse.value = field.exp(&target).ok()?;
            Some(match base {
                Base::Sum(value) => field.reduce(value),
                Base::Var(var) => field.current(&Poly::var(*var)),
                Base::Number(_) => return None,
            })
        }
        Kind::Exp(argument) => {
            require_positive(field, inverse, &target);
            power_inside(income, argument, inverse, &target)
        }
        Kind::Sum { value, root } => {
            if *root > 1 {
                require_positive(field, inverse, &target);
                inverse.value = field.integer_power(&target, &(*root).into()).ok()?;
            }
            Some(field.reduce(value))
        }
        Kind::Special(..) => None,
    }
}

/// exp(argument) = target: as a power of y where the argument is a constant times ln y, else by its logarithm.
fn power_inside(income: &Moving, argument: &Element, inverse: &mut Inverse, target: &Element) -> Option<Element> {
    let field = income.field;
    let facts: Vec<(Element, Relation)> = inverse.positive.iter().map(|e| (e.clone(), Relation::Positive)).collect();
    let argument = field.reduce(argument);
    let mut logs = argument.vars();
    logs.retain(|v| income.moves(*v));
    if let [log] = logs[..]
        && let Kind::Ln(base) = &*field.kind(log)
        && let [(1, factor)] = &argument.coefficients(log)[..]
    {
        let exponent = field.inverse(factor).ok()?;
        inverse.value = field.suppose(&facts, || field.power(target, &exponent)).ok()?;
        return Some(match base {
            Base::Sum(value) => field.reduce(value),
            Base::Var(var) => field.current(&Poly::var(*var)),
            Base::Number(_) => return None,
        });
    }
    inverse.value = field.suppose(&facts, || field.ln(target)).ok()?;
    Some(argument)
}

/// φ = κ Σ nⱼ ln bⱼ + λ with integers nⱼ: Π bⱼ^nⱼ = exp((Z − λ)/κ).
fn product_of_logs(income: &Moving, phi: &Element, inverse: &mut Inverse) -> Option<Element> {
    let field = income.field;
    let (product, scale, shift) = log_product(income, phi)?;
    let target = &field.current(&inverse.value) - &shift;
    inverse.value = field.exp(&field.quotient(&target, &scale).ok()?).ok()?;
    Some(product)
}

/// Π bⱼ^nⱼ, κ and λ for φ = κ Σ nⱼ ln bⱼ + λ.
pub fn log_product(income: &Moving, phi: &Element) -> Option<(Element, Element, Element)> {
    let field = income.field;
    let mut scale: Option<Element> = None;
    let mut shift = Poly::zero();
    let mut factors: Vec<(Var, Element)> = Vec::new();
    for (monomial, coefficient) in income.collect(&field.reduce(phi)) {
        if monomial.is_one() {
            shift = coefficient;
            continue;
        }
        let mut powers = monomial.iter();
        let (Some((log, 1)), None) = (powers.next(), powers.next()) else { return None };
        let Kind::Ln(_) = &*field.kind(log) else { return None };
        factors.push((log, coefficient.clone()));
        let smaller = scale.as_ref().is_none_or(|s| ratio(field, &coefficient, s).is_some_and(|q| q.abs() < Rational::one()));
        if smaller {
            scale = Some(coefficient);
        }
    }
    let scale = scale?;
    let mut product = Poly::one();
    for (log, coefficient) in factors {
        let times = ratio(field, &coefficient, &scale).filter(|q| q.is_integer())?;
        let Kind::Ln(base) = &*field.kind(log) else { return None };
        let base = match base {
            Base::Sum(value) => field.reduce(value),
            Base::Var(var) => field.current(&Poly::var(*var)),
            Base::Number(_) => return None,
        };
        product = field.product(&product, &field.integer_power(&base, times.numer()).ok()?);
    }
    Some((field.reduce(&product), scale, shift))
}

fn ratio(field: &Field, a: &Element, b: &Element) -> Option<Rational> {
    field.reduce(&field.quotient(a, b).ok()?).as_constant()
}
