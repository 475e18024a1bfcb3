//! Potentials of powers times polynomials in logarithms, without a linear system.
//!
//! For E a power with θᵢE = wᵢE and qᵢ polynomials in lⱼ = ln pⱼ, the closed form Σ E qᵢ dlᵢ has the potential E·Q with
//! Q = Σₖ (−1)ᵏ ∂ᵏqᵢ/∂lᵢᵏ / wᵢᵏ⁺¹ for any i with wᵢ ≠ 0 (parts), and where all wᵢ vanish, Q = Σᵢ lᵢ qᵢ/(deg + 1).

use std::collections::BTreeMap;

use crate::algebra::field::Field;
use crate::algebra::generator::Element;
use crate::algebra::monomial::{Monomial, Var};
use crate::algebra::number::rational;
use crate::algebra::polynomial::Poly;

use super::frame::{Class, Frame, log_of_symbol};
use super::potential::Potential;

/// The potential of a class of powers and logarithms of the moving symbols; `None` where something else occurs.
pub fn integrate(frame: &Frame, class: &Class) -> Option<Potential> {
    if !frame.scale.is_empty() {
        return None;
    }
    let moving = frame.moving;
    let mut powers: BTreeMap<Monomial, Vec<Poly>> = BTreeMap::new();
    for (index, numerator) in class.numerators.iter().enumerate() {
        for (power, inside) in numerator.collect(|v| moving.moves(v) && frame.is_eigen(v)) {
            let slots = powers.entry(power).or_insert_with(|| vec![Poly::zero(); class.numerators.len()]);
            if let Some(slot) = slots.get_mut(index) {
                *slot = inside;
            }
        }
    }
    let mut total = Potential::default();
    for (power, parts) in powers {
        let weights = weights(frame, &power)?;
        let inside = if weights.iter().all(Poly::is_zero) {
            by_degree(frame, &parts)?
        } else {
            by_parts(frame, &parts, &weights, &mut total.pivots)?
        };
        total.regular = &total.regular + &inside.mul_term(&rational(1, 1), &power);
    }
    Some(total)
}

/// θᵢE/E, if these are constants.
fn weights(frame: &Frame, power: &Monomial) -> Option<Vec<Element>> {
    let n = frame.moving.symbols.len();
    let mut weights = vec![Vec::new(); n];
    for (var, exponent) in power.iter() {
        for (slot, rate) in weights.iter_mut().zip(frame.rates.get(&var)?) {
            if !frame.moving.is_constant(rate) {
                return None;
            }
            slot.push(rate.scale(&rational(i64::from(exponent), 1)));
        }
    }
    Some(weights.into_iter().map(|w| frame.moving.field.reduce(&Poly::sum(w))).collect())
}

/// Logarithms of moving symbols to non-negative powers, and nothing else that moves.
fn logs_of(frame: &Frame, part: &Poly) -> Option<Vec<Var>> {
    let moving = frame.moving;
    let logs: Vec<Var> = part.vars().into_iter().filter(|v| moving.moves(*v)).collect();
    logs.iter().all(|v| log_of_symbol(moving, *v).is_some() && part.low_degree(*v) >= 0).then_some(logs)
}

fn by_degree(frame: &Frame, parts: &[Poly]) -> Option<Poly> {
    let moving = frame.moving;
    let mut total = Vec::new();
    for (symbol, part) in moving.symbols.iter().zip(parts) {
        logs_of(frame, part)?;
        if part.is_zero() {
            continue;
        }
        let log = moving.field.ln(&Poly::var(*symbol)).ok()?;
        for (monomial, coefficient) in part.terms() {
            let degree: i64 = monomial.iter().filter(|(v, _)| moving.moves(*v)).map(|(_, k)| i64::from(k)).sum();
            let share = coefficient / rational(degree + 1, 1);
            total.push(&log * &Poly::term(&share, monomial.clone()));
        }
    }
    Some(Poly::sum(total))
}

fn by_parts(frame: &Frame, parts: &[Poly], weights: &[Element], pivots: &mut Vec<Element>) -> Option<Poly> {
    let moving = frame.moving;
    let field = moving.field;
    let (index, certain) = surest(field, weights)?;
    let (weight, part) = (&weights[index], &parts[index]);
    if !certain {
        pivots.push(weight.clone());
    }
    let logs = logs_of(frame, part)?;
    let own = logs.into_iter().find(|v| log_of_symbol(moving, *v) == Some(moving.symbols[index]));
    let inverse = field.inverse(weight).ok()?;
    let mut term = part.clone();
    let mut total = Vec::new();
    while !term.is_zero() {
        term = field.reduce(&field.product(&term, &inverse));
        total.push(term.clone());
        term = match own {
            Some(log) => term.formal_derivative(log).neg(),
            None => Poly::zero(),
        };
    }
    Some(Poly::sum(total))
}

/// How many signs are looked for.
const SIGNS_TRIED: usize = 3;

/// The weight to divide by, and whether it is known not to vanish: a number if there is one, else one of the shortest.
fn surest(field: &Field, weights: &[Element]) -> Option<(usize, bool)> {
    let mut order: Vec<usize> = (0..weights.len()).filter(|i| !weights[*i].is_zero()).collect();
    order.sort_by_key(|i| (!weights[*i].is_constant(), !weights[*i].is_one(), weights[*i].len()));
    let first = *order.first()?;
    let certain = |i: &usize| weights[*i].is_constant() || field.sign(&weights[*i]).excludes_zero();
    Some(order.iter().take(SIGNS_TRIED).find(|i| certain(i)).map_or((first, false), |i| (*i, true)))
}
