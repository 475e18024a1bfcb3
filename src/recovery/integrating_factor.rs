//! Integrating factors: Ω = D dm − Σ Nᵢ dpᵢ times Π fₖ^nₖ · exp(Σ cⱼ gⱼ).
//!
//! The factors fₖ are those in sight: symbols, sums below fraction bars, bases of powers, arguments of logarithms,
//! factors of D and Nᵢ (Darboux 1878; Prelle and Singer 1983). Closedness is linear in nₖ and cⱼ.

use std::collections::BTreeSet;

use crate::algebra::factor::factor;
use crate::algebra::field::Field;
use crate::algebra::gcd::gcd;
use crate::algebra::generator::{Base, Built, Element, Kind};
use crate::algebra::monomial::Var;
use crate::algebra::number::rational;
use crate::algebra::polynomial::Poly;
use crate::algebra::sign::Sign;

use super::fractions::Moving;
use super::inverse_factor;
use super::invert;
use super::linear_solve;
use super::potential::{Potential, potential};
use super::proposal::{Proposal, Working};
use super::system::System;
use super::uniform::Uniform;

/// Ω in θ = x ∂/∂x: components over prices, then income.
pub struct Form<'m, 'f> {
    /// Prices and income, in this order.
    pub moving: &'m Moving<'f>,
    /// −pᵢNᵢ for each price, then m·D: polynomials without a common factor.
    pub components: Vec<Poly>,
    /// The factors of the components.
    parts: Vec<Poly>,
    /// What the demands are written in: their named sums may be factors that cancel in the components.
    written: Vec<Var>,
}

impl<'m, 'f> Form<'m, 'f> {
    /// The one-form whose leaves are the indifference surfaces in prices and income.
    pub fn of(system: &System, moving: &'m Moving<'f>) -> Form<'m, 'f> {
        let field = moving.field;
        let (numerators, denominator) = moving.over_one_denominator(&system.demands);
        let below = denominator.iter().fold(Poly::one(), |d, (sum, k)| &d * &moving.value(*sum).pow(*k));
        let mut components: Vec<Poly> = numerators
            .iter()
            .zip(&system.prices)
            .map(|(n, p)| field.expand(&(n * &field.current(&Poly::var(*p))).neg()))
            .collect();
        components.push(field.expand(&(&field.expand(&below) * &field.current(&Poly::var(system.income)))));
        let uniform = Uniform::of(field, &components);
        components = match uniform.as_ref().and_then(Uniform::primitive) {
            Some(primitive) => primitive,
            None => primitive(components),
        };
        let mut parts = uniform.map_or_else(Vec::new, |uniform| uniform.factors());
        parts.extend(components.iter().flat_map(|c| factor(c).factors).map(|(part, _)| part));
        let written: BTreeSet<Var> = system.demands.iter().flat_map(|x| field.current(x).vars()).collect();
        Form { moving, components, parts, written: written.into_iter().collect() }
    }

    /// The income component, m·D.
    pub fn last(&self) -> &Poly {
        &self.components[self.components.len() - 1]
    }

    /// θ_m ωᵢ − θᵢ ω_m.
    fn rotation(&self, index: usize) -> Element {
        let field = self.moving.field;
        let (price, income) = (self.moving.symbols[index], self.moving.symbols[self.components.len() - 1]);
        &field.log_derivative(&self.components[index], income) - &field.log_derivative(self.last(), price)
    }
}

/// The polynomials without what they have in common.
fn primitive(polynomials: Vec<Poly>) -> Vec<Poly> {
    let common = polynomials.iter().fold(Poly::zero(), |g, c| gcd(&g, c));
    if common.is_constant() {
        return polynomials;
    }
    let divided: Option<Vec<Poly>> = polynomials.iter().map(|c| c.div_exact(&common)).collect();
    divided.unwrap_or(polynomials)
}

/// A function whose logarithm, or which itself, may enter the logarithm of the factor.
#[derive(Clone, Debug, PartialEq)]
enum Factor {
    /// f to some power.
    Power(Element),
    /// exp of a multiple of g.
    Exponential(Element),
}

/// A factor f that the form preserves: (θ_m ln f)ωᵢ − (θᵢ ln f)ω_m has no pole at f.
struct Cofactored {
    factor: Factor,
    cofactors: Vec<Element>,
}

/// The proposals by integrating factors: factors in sight first, then polynomial inverse factors.
pub fn propose(system: &System, utility: Var) -> Vec<Proposal> {
    let moving = Moving::new(system.field, &system.variables());
    let form = Form::of(system, &moving);
    let mut found: Vec<Proposal> = Vec::new();
    if let Some((v, factor)) = from_sight(&form) {
        found.extend(proposal(system, v, Some(factor), utility));
    }
    if found.is_empty() {
        for (v, factor) in inverse_factor::integrals(&form) {
            found.extend(proposal(system, v, factor, utility));
        }
    }
    found
}

/// Tries growing sets of factors: symbols, everything in sight, exponentials of ratios, factors of coefficients.
fn from_sight(form: &Form) -> Option<(Element, Element)> {
    let mut factors: Vec<Cofactored> = Vec::new();
    let symbols = form.moving.symbols.iter().map(|x| Factor::Power(Poly::var(*x))).collect();
    let ratios = ratios(form.moving).into_iter().map(Factor::Exponential).collect();
    let sets: [&dyn Fn() -> Vec<Factor>; 4] =
        [&|| Vec::clone(&symbols), &|| candidates(form), &|| Vec::clone(&ratios), &|| of_coefficients(form)];
    for set in sets {
        for factor in set() {
            if factors.iter().all(|known| known.factor != factor) {
                factors.extend(cofactored(form, factor));
            }
        }
        if let Some(found) = exact(form, &factors) {
            return Some(found);
        }
    }
    None
}

fn exact(form: &Form, factors: &[Cofactored]) -> Option<(Element, Element)> {
    let solution = exponents(form, factors)?;
    let multiplier = multiplier(form.moving, factors, &solution).ok()?;
    let v = integral(form, &multiplier)?;
    Some((v, multiplier))
}

/// The potential of the form times the factor.
pub fn integral(form: &Form, multiplier: &Element) -> Option<Element> {
    let moving = form.moving;
    let field = moving.field;
    let slopes: Option<Vec<Element>> = form
        .components
        .iter()
        .zip(&moving.symbols)
        .map(|(c, x)| field.quotient(&field.product(multiplier, c), &Poly::var(*x)).ok())
        .collect();
    value_or_exponential(moving, &potential(moving, &slopes?)?)
}

/// F, or e^(F/κ) where F is a sum of logarithms: with the coefficient of a base of unknown sign for κ, or another that
/// makes the exponents of such bases whole.
fn value_or_exponential(moving: &Moving, found: &Potential) -> Option<Element> {
    let field = moving.field;
    let only_logs = found.regular.vars().into_iter().all(|v| !moving.moves(v));
    if !only_logs || found.logs.is_empty() {
        return found.value(field).ok().or_else(|| exponential(field, found));
    }
    exponential(field, found)
}

fn exponential(field: &Field, found: &Potential) -> Option<Element> {
    let (settled, unknown): (Vec<_>, Vec<_>) =
        found.logs.iter().partition(|(_, base)| matches!(field.sign(base), Sign::Positive | Sign::Negative));
    unknown.into_iter().chain(settled).find_map(|(scale, _)| {
        let inverse = field.inverse(scale).ok()?;
        found.scaled(field, &inverse).exponential(field).ok()
    })
}

fn candidates(form: &Form) -> Vec<Factor> {
    let moving = form.moving;
    let field = moving.field;
    let mut seen: BTreeSet<Var> = BTreeSet::new();
    let mut waiting: Vec<Var> =
        form.components.iter().flat_map(Poly::vars).chain(form.written.iter().copied()).collect();
    waiting.extend(moving.symbols.iter().flat_map(|s| field.current(&Poly::var(*s)).vars()));
    let mut found: Vec<Factor> = Vec::new();
    let mut offer = |f: Factor| {
        if !found.contains(&f) {
            found.push(f);
        }
    };
    for symbol in &moving.symbols {
        offer(Factor::Power(Poly::var(*symbol)));
    }
    while let Some(var) = waiting.pop() {
        if !moving.moves(var) || !seen.insert(var) {
            continue;
        }
        match &*field.kind(var) {
            Kind::Symbol(_) => {}
            Kind::Exp(argument) => {
                let argument = field.reduce(argument);
                waiting.extend(argument.vars());
                if moving.clear(&argument).numerator.vars().iter().all(|v| !matches!(*field.kind(*v), Kind::Ln(_))) {
                    offer(Factor::Exponential(argument));
                }
            }
            Kind::Ln(base) => {
                offer(Factor::Power(Poly::var(var)));
                if let Base::Sum(value) = base {
                    waiting.extend(value.vars());
                    offer(Factor::Power(field.named(value, None)));
                }
            }
            Kind::Sum { value, .. } => {
                waiting.extend(field.expand(value).vars());
                offer(Factor::Power(Poly::var(var)));
            }
            Kind::Special(_, argument) => {
                waiting.extend(argument.vars());
                offer(Factor::Power(Poly::var(var)));
            }
        }
    }
    for part in form.parts.iter().filter(|part| part.vars().into_iter().any(|v| moving.moves(v))) {
        offer(Factor::Power(field.named(part, None)));
    }
    found
}

/// Factors of the coefficients of logarithms and roots in the components: for v = A·ln B, of B.
fn of_coefficients(form: &Form) -> Vec<Factor> {
    let moving = form.moving;
    let apart = |v: Var| moving.moves(v) && !matches!(*moving.field.kind(v), Kind::Symbol(_) | Kind::Exp(_));
    let mut found = Vec::new();
    for component in form.components.iter().filter(|c| c.vars().into_iter().any(apart)) {
        for (_, coefficient) in component.collect(apart).into_iter().filter(|(_, c)| c.len() > 1) {
            let parts = factor(&coefficient).factors.into_iter();
            let parts = parts.filter(|(part, _)| part.vars().into_iter().any(|v| moving.moves(v)));
            found.extend(parts.map(|(part, _)| Factor::Power(moving.field.named(&part, None))));
        }
    }
    found
}

/// Quotients of two symbols: exponentials of them are the factors of equations that are linear in a price.
fn ratios(moving: &Moving) -> Vec<Element> {
    let field = moving.field;
    let mut all = Vec::new();
    for above in &moving.symbols {
        all.push(Poly::var(*above));
        for below in moving.symbols.iter().filter(|b| *b != above) {
            all.extend(field.quotient(&Poly::var(*above), &Poly::var(*below)).ok());
        }
    }
    all
}

/// The factor with its cofactors, if it is preserved.
fn cofactored(form: &Form, factor: Factor) -> Option<Cofactored> {
    let moving = form.moving;
    let field = moving.field;
    let n = form.components.len() - 1;
    let rates: Option<Vec<Element>> = moving.symbols.iter().map(|x| log_rate(moving, &factor, *x).ok()).collect();
    let rates = rates?;
    // at a root the form itself is ramified, and the pole is needed
    let pole = match &factor {
        Factor::Power(f) => f.as_var().filter(|f| !matches!(*field.kind(*f), Kind::Sum { root: 2.., .. })),
        Factor::Exponential(_) => None,
    };
    let mut cofactors = Vec::with_capacity(n);
    for index in 0..n {
        let forth = field.product(&rates[n], &form.components[index]);
        let back = field.product(&rates[index], form.last());
        let cofactor = field.reduce(&(&field.current(&forth) - &field.current(&back)));
        if pole.is_some_and(|f| has_pole(moving, &cofactor, f)) {
            return None;
        }
        cofactors.push(cofactor);
    }
    Some(Cofactored { factor, cofactors })
}

/// Whether the cofactor of f is not polynomial at f. The form may hold a root to a fraction of its order, and the
/// derivative of that is a pole of less than the order.
fn has_pole(moving: &Moving, cofactor: &Element, f: Var) -> bool {
    let field = moving.field;
    let Kind::Sum { root, .. } = &*field.kind(f) else {
        return cofactor.low_degree(f) < 0 && !matches!(*field.kind(f), Kind::Symbol(_));
    };
    if cofactor.low_degree(f) >= 0 {
        return false;
    }
    let (numerator, denominator) = field.fraction(cofactor);
    let power = denominator.iter().find(|(sum, _)| *sum == f).map_or(0, |(_, power)| *power);
    match (power, root) {
        (0, _) => false,
        (1, 2..) => {
            let terms = numerator.coefficients(f);
            let lowest = terms.iter().find(|(k, _)| *k == 0);
            lowest.is_some_and(|(_, lowest)| lowest.div_exact(&moving.value(f)).is_none())
        }
        _ => true,
    }
}

/// The constants nₖ and cⱼ with d ln μ ∧ Ω + dΩ = 0.
fn exponents(form: &Form, factors: &[Cofactored]) -> Option<Vec<Element>> {
    let moving = form.moving;
    let mut equations = Vec::new();
    for index in 0..form.components.len() - 1 {
        let mut row: Vec<Element> = factors.iter().filter_map(|f| f.cofactors.get(index).cloned()).collect();
        row.push(form.rotation(index).neg());
        let (numerators, _) = moving.over_one_denominator(&row);
        equations.extend(moving.matched(&numerators));
    }
    Some(linear_solve::solve(moving.field, equations, factors.len())?.values)
}

/// θ ln f, or θg.
fn log_rate(moving: &Moving, factor: &Factor, x: Var) -> Built {
    let field = moving.field;
    match factor {
        Factor::Power(f) => field.quotient(&field.log_derivative(f, x), f),
        Factor::Exponential(g) => Ok(field.log_derivative(g, x)),
    }
}

fn multiplier(moving: &Moving, factors: &[Cofactored], exponents: &[Element]) -> Built {
    let field = moving.field;
    let mut logs = Potential::default();
    for (factor, exponent) in factors.iter().zip(exponents).filter(|(_, n)| !n.is_zero()) {
        match &factor.factor {
            Factor::Power(f) => logs.logs.push((exponent.clone(), f.clone())),
            Factor::Exponential(g) => {
                logs.regular = &field.current(&logs.regular) + &field.reduce(&field.product(exponent, g));
            }
        }
    }
    logs.exponential(field)
}

/// v as found, solved for income where that can be done.
fn proposal(system: &System, v: Element, factor: Option<Element>, utility: Var) -> Option<Proposal> {
    let field = system.field;
    let slope = field.reduce(&field.derivative(&v, system.income));
    if slope.is_zero() {
        return None;
    }
    let rising = field.sign(&slope);
    let solved = invert::solve(field, &v, system.income, &[Poly::var(utility)]);
    let mut positive = solved.as_ref().map_or_else(Vec::new, |inverse| inverse.positive.clone());
    match field.sign(&v) {
        Sign::Positive => positive.push(Poly::var(utility)),
        Sign::Negative => positive.push(Poly::var(utility).scale(&rational(-1, 1))),
        _ => {}
    }
    let working = Working { z: v.clone(), integrating_factor: factor, ..Working::default() };
    Some(Proposal {
        indirect_utility: Some(v),
        expenditure: solved.map(|inverse| inverse.value),
        positive,
        level: None,
        rising,
        working,
    })
}
