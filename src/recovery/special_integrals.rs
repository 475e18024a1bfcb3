//! Integrals of exponentials that need a special function: ∫ e^φ dS/S is an exponential integral where φ = κS + λ, and
//! ∫ e^φ dv an error function where φ is quadratic in v.

use std::collections::BTreeSet;

use crate::algebra::generator::{Built, Element, Kind, Special};
use crate::algebra::monomial::{Monomial, Var};
use crate::algebra::number::rational;
use crate::algebra::polynomial::Poly;
use crate::algebra::sign::Sign;

use super::fractions::Moving;
use super::frame::Frame;

/// A function F with θᵢF = e^φ·θᵢS/S or e^φ·θᵢv, for the exponential e^φ of a class.
pub struct SpecialIntegral {
    /// F.
    pub value: Element,
    /// P·θᵢF for each i.
    pub image: Vec<Poly>,
}

/// The special integrals of a class whose terms share the power `key`, with S among its poles, symbols and logarithms.
pub fn candidates(frame: &Frame, key: &Monomial) -> Vec<SpecialIntegral> {
    let moving = frame.moving;
    let Ok(exponent) = exponent_of(moving, key) else { return Vec::new() };
    if exponent.is_zero() {
        return Vec::new();
    }
    let mut found = Vec::new();
    for base in bases(frame) {
        found.extend(exponential_integral(frame, key, &exponent, base));
        found.extend(error_function(frame, key, &exponent, base));
    }
    found
}

/// φ with e^φ = the monomial.
fn exponent_of(moving: &Moving, key: &Monomial) -> Built {
    let field = moving.field;
    let mut total = Poly::zero();
    for (var, k) in key.iter() {
        total = &field.current(&total) + &field.ln(&Poly::var(var))?.scale(&rational(i64::from(k), 1));
    }
    Ok(field.reduce(&total))
}

/// What may stand in a special function: poles, symbols, logarithms.
fn bases(frame: &Frame) -> BTreeSet<Var> {
    let field = frame.moving.field;
    let primitive = |v: &Var| matches!(*field.kind(*v), Kind::Symbol(_) | Kind::Ln(_));
    frame.scale.keys().copied().chain(frame.rates.keys().copied().filter(primitive)).collect()
}

fn exponential_integral(frame: &Frame, key: &Monomial, exponent: &Element, base: Var) -> Option<SpecialIntegral> {
    let moving = frame.moving;
    let field = moving.field;
    let value = moving.value(base);
    let slope = ratio(moving, exponent, &value)?;
    let scaled = field.reduce(&field.product(&slope, &value));
    let constant = field.reduce(&(exponent - &scaled));
    if !moving.is_constant(&constant) {
        return None;
    }
    let special = field.special(Special::Ei, &scaled).ok()?;
    let value = field.product(&field.exp(&constant).ok()?, &special);
    let image = frame.rates.get(&base)?.iter().map(|rate| rate.mul_monomial(key)).collect();
    Some(SpecialIntegral { value, image })
}

/// κ with φ − κS constant, judged by one monomial.
fn ratio(moving: &Moving, exponent: &Element, value: &Poly) -> Option<Element> {
    let own = moving.collect(value);
    let terms = moving.collect(exponent);
    let (monomial, coefficient) = own.iter().find(|(m, _)| !m.is_one())?;
    moving.field.quotient(terms.get(monomial)?, coefficient).ok()
}

/// φ = κv² + βv + γ: q = v + β/(2κ), λ = γ − β²/(4κ), F = e^λ √π/(2√|κ|)·erf or erfi(√|κ| q).
fn error_function(frame: &Frame, key: &Monomial, exponent: &Element, base: Var) -> Option<SpecialIntegral> {
    let moving = frame.moving;
    let field = moving.field;
    let mut terms = moving.collect(exponent);
    let square = terms.remove(&Monomial::power(base, 2))?;
    let linear = terms.remove(&Monomial::power(base, 1)).unwrap_or_default();
    let constant = terms.remove(&Monomial::one()).unwrap_or_default();
    if !terms.is_empty() {
        return None;
    }
    let (function, size) = match field.sign(&square) {
        Sign::Positive => (Special::Erfi, square.clone()),
        Sign::Negative => (Special::Erf, square.neg()),
        _ => return None,
    };
    let root = field.sqrt(&size).ok()?;
    let shift = field.quotient(&linear, &square.scale(&rational(2, 1))).ok()?;
    let argument = field.product(&root, &(&Poly::var(base) + &field.current(&shift)));
    let lost = field.product(&field.product(&linear, &shift), &Poly::constant(&rational(1, 2)));
    let outside = field.exp(&(&field.current(&constant) - &field.current(&lost))).ok()?;
    let scale = field.quotient(&field.sqrt(&field.pi()).ok()?, &root.scale(&rational(2, 1))).ok()?;
    let special = field.special(function, &argument).ok()?;
    let value = field.product(&field.product(&outside, &scale), &special);
    let itself = key.mul(&Monomial::power(base, 1));
    let image = frame.rates.get(&base)?.iter().map(|rate| rate.mul_monomial(&itself)).collect();
    Some(SpecialIntegral { value, image })
}
