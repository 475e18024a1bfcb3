//! Solving φ(y) = Z for y.

use std::collections::BTreeMap;

use num_traits::{One, Signed};

use crate::algebra::field::{Field, Relation};
use crate::algebra::generator::{Base, Element, Kind};
use crate::algebra::monomial::{Monomial, Var};
use crate::algebra::number::{Rational, rational};
use crate::algebra::polynomial::Poly;
use crate::algebra::sign::Sign;

use super::fractions::{Cleared, Moving};
use super::lambert;

/// A solution y = φ⁻¹(Z) together with what must be positive for it.
#[derive(Clone, Debug)]
pub struct Inverse {
    /// y.
    pub value: Element,
    /// What is positive because it equals something positive in y.
    pub positive: Vec<Element>,
    /// The value in summands, as long as it is what was given.
    summands: Vec<Element>,
}

/// Solves φ(y) = Z for y where φ is built by one generator at a time, each layer linear over linear or quadratic over
/// quadratic in it, or of Lambert's form. Z is given in summands, whose exponentials are kept apart.
pub fn solve(field: &Field, phi: &Element, y: Var, target: &[Element]) -> Option<Inverse> {
    let income = Moving::new(field, &[y]);
    let total = Poly::sum(target.iter().map(|e| field.current(e)).collect());
    let mut inverse = Inverse { value: total, positive: Vec::new(), summands: target.to_vec() };
    let mut phi = field.reduce(phi);
    for _ in 0..8 {
        if phi == field.current(&Poly::var(y)) {
            return Some(inverse);
        }
        phi = step(&income, &phi, &mut inverse)
            .or_else(|| quadratic(&income, &phi, &mut inverse))
            .or_else(|| product_of_logs(&income, &phi, &mut inverse))
            .or_else(|| lambert::step(&income, &phi, &mut inverse))?;
        inverse.summands = vec![inverse.value.clone()];
    }
    None
}

/// One layer: φ = (a·M + b)/(c·M + d) for one monomial M in functions of y; the target becomes that of what is inside M.
fn step(income: &Moving, phi: &Element, inverse: &mut Inverse) -> Option<Element> {
    let field = income.field;
    let cleared = income.clear(phi);
    let unit = Cleared { numerator: Poly::one(), denominator: BTreeMap::new() };
    let below = income.collect(&income.raise(&unit, &cleared.denominator));
    let above = income.collect(&cleared.numerator);
    let mut moving: Vec<&Monomial> = above.keys().chain(below.keys()).filter(|m| !m.is_one()).collect();
    moving.sort_unstable();
    moving.dedup();
    let [own] = moving[..] else { return None };
    let coefficient = |terms: &BTreeMap<Monomial, Element>, m: &Monomial| terms.get(m).cloned().unwrap_or_default();
    let one = Monomial::one();
    // a M + b = Z (c M + d)
    let target = field.current(&inverse.value);
    let lead = &coefficient(&above, own) - &field.product(&target, &coefficient(&below, own));
    let rest = &field.product(&target, &coefficient(&below, &one)) - &coefficient(&above, &one);
    let value = field.reduce(&field.quotient(&field.current(&rest), &field.current(&lead)).ok()?);
    if !field.is_zero(&(&value - &target)) {
        inverse.summands = vec![value.clone()];
    }
    inverse.value = value;
    let mut factors = own.iter();
    match (factors.next(), factors.next()) {
        (Some((var, 1)), None) => inside(income, var, inverse),
        _ => inside_product(income, own, inverse),
    }
}

/// One layer (a₂M² + a₁M + a₀)/(b₂M² + b₁M + b₀) = Z: with aₖ − Z bₖ = qₖ, M = (−q₁ ± √(q₁² − 4q₂q₀))/(2q₂), with the
/// sign of 2q₂M + q₁ before the root.
fn quadratic(income: &Moving, phi: &Element, inverse: &mut Inverse) -> Option<Element> {
    let field = income.field;
    let cleared = income.clear(phi);
    let unit = Cleared { numerator: Poly::one(), denominator: BTreeMap::new() };
    let below = income.collect(&income.raise(&unit, &cleared.denominator));
    let above = income.collect(&cleared.numerator);
    let (own, powers) = progression(above.keys().chain(below.keys()))?;
    let coefficient = |z: &Element, k: usize| {
        let of = |terms: &BTreeMap<Monomial, Element>| terms.get(&powers[k]).cloned().unwrap_or_default();
        field.reduce(&(&of(&above) - &field.product(z, &of(&below))))
    };
    let target = field.current(&inverse.value);
    let doubled = field.product(&coefficient(phi, 2), &Poly::monomial(own.clone())).scale(&rational(2, 1));
    let outer = match field.sign(&field.reduce(&(&field.current(&doubled) + &coefficient(phi, 1)))) {
        Sign::Positive => rational(1, 1),
        Sign::Negative => rational(-1, 1),
        _ => return None,
    };
    let [c, b, a] = [0, 1, 2].map(|k| coefficient(&target, k));
    let squares = &field.product(&b, &b) - &field.product(&a, &c).scale(&rational(4, 1));
    let squares = field.reduce(&squares);
    require_positive(field, inverse, &squares);
    let facts: Vec<(Element, Relation)> = inverse.positive.iter().map(|e| (e.clone(), Relation::Positive)).collect();
    let root = field.suppose(&facts, || field.sqrt(&squares)).ok()?.scale(&outer);
    let above = &root - &field.current(&b);
    inverse.value = field.quotient(&above, &field.current(&a).scale(&rational(2, 1))).ok()?;
    let mut factors = own.iter();
    match (factors.next(), factors.next()) {
        (Some((var, 1)), None) => inside(income, var, inverse),
        _ => inside_product(income, &own, inverse),
    }
}

/// M and L, LM, LM² where these are all the monomials, M to a positive power where it is a single one.
fn progression<'x>(monomials: impl Iterator<Item = &'x Monomial>) -> Option<(Monomial, [Monomial; 3])> {
    let mut all: Vec<&Monomial> = monomials.collect();
    all.sort_unstable();
    all.dedup();
    let [x, y, z] = all[..] else { return None };
    let (first, middle, last) = [(x, y, z), (y, x, z), (x, z, y)].into_iter().find(|(a, b, c)| b.pow(2) == a.mul(c))?;
    let ratio = middle.div(first);
    let falls = ratio.iter().all(|(_, k)| k < 0);
    let (first, last, own) = if falls { (last, first, ratio.inverse()) } else { (first, last, ratio) };
    Some((own, [first.clone(), middle.clone(), last.clone()]))
}

/// From M = target to what is inside M, for M a power of one positive thing.
fn inside_product(income: &Moving, product: &Monomial, inverse: &mut Inverse) -> Option<Element> {
    let field = income.field;
    let whole = Poly::monomial(product.clone());
    if field.sign(&whole) != Sign::Positive {
        return None;
    }
    let log = field.ln(&whole).ok()?;
    let target = field.current(&inverse.value);
    require_positive(field, inverse, &target);
    power_inside(income, &log, inverse, &target)
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
            inverse.value = Poly::one();
            for summand in std::mem::take(&mut inverse.summands) {
                let part = field.exp(&summand).ok()?;
                inverse.value = field.product(&field.current(&inverse.value), &part);
            }
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
                inverse.value = field.named(&target, None).pow(*root);
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
        // the base is kept as one thing, so that its roots can be taken again
        let target = field.named(target, None);
        inverse.value = field.suppose(&facts, || field.power(&target, &exponent)).ok()?;
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
        let smaller =
            scale.as_ref().is_none_or(|s| ratio(field, &coefficient, s).is_some_and(|q| q.abs() < Rational::one()));
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
