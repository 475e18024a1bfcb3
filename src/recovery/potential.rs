//! Potentials of closed one-forms: F with ∂F/∂pᵢ = fᵢ.
//!
//! The form is written in θᵢ = pᵢ∂/∂pᵢ and split into classes that the derivations do not mix. A class of powers times
//! polynomials in logarithms is integrated directly; every other class by an ansatz with undetermined coefficients
//! (Norman and Moore 1977; Davenport 1982; Bronstein 2005). What is found is differentiated back.

use std::collections::BTreeMap;

use crate::algebra::field::Field;
use crate::algebra::generator::{Built, Element};
use crate::algebra::monomial::Monomial;
use crate::algebra::number::rational;
use crate::algebra::polynomial::Poly;
use crate::algebra::sign::Sign;

use super::ansatz;
use super::fractions::Moving;
use super::frame::{Class, Frame};
use super::power_log;

/// F = regular + Σ c·ln|base| with constants c. The logarithms are kept apart because a base need not have a known sign.
#[derive(Clone, Debug, Default)]
pub struct Potential {
    /// The part without new logarithms.
    pub regular: Element,
    /// Constant coefficients and what stands under the logarithm.
    pub logs: Vec<(Element, Element)>,
    /// Divisors used on the way that are not known to be non-zero.
    pub pivots: Vec<Element>,
}

impl Potential {
    fn add(&mut self, field: &Field, other: Potential) {
        self.regular = &field.current(&self.regular) + &field.current(&other.regular);
        self.logs.extend(other.logs);
        self.pivots.extend(other.pivots);
    }

    /// F as an element. A base of unknown sign enters as ln(base²)/2; fails where it is not known to be non-zero.
    pub fn value(&self, field: &Field) -> Built {
        let mut total = field.current(&self.regular);
        for (coefficient, base) in &self.settled(field) {
            let log = match field.sign(base) {
                Sign::Positive => field.ln(base)?,
                Sign::Negative => field.ln(&base.neg())?,
                _ => field.ln(&field.current(base).pow(2))?.scale(&rational(1, 2)),
            };
            total = &field.current(&total) + &field.product(coefficient, &log);
        }
        Ok(total)
    }

    /// The logarithms, those of unknown sign that share a coefficient taken together: the product may have a known sign.
    fn settled(&self, field: &Field) -> Vec<(Element, Element)> {
        let (mut settled, unknown): (Vec<_>, Vec<_>) =
            self.logs.iter().cloned().partition(|(_, base)| field.sign(base).excludes_zero());
        for (coefficient, base) in unknown {
            match settled.iter_mut().find(|(c, _)| *c == coefficient) {
                Some((_, product)) => *product = field.reduce(&field.product(product, &base)),
                None => settled.push((coefficient, base)),
            }
        }
        settled
    }

    /// exp(F) up to a constant factor, the bases as powers: an integer power needs no sign.
    pub fn exponential(&self, field: &Field) -> Built {
        let mut total = field.exp(&self.regular)?;
        for (coefficient, base) in &self.settled(field) {
            let part = power_of_either_sign(field, base, coefficient)?;
            total = field.product(&field.current(&total), &part);
        }
        Ok(field.current(&total))
    }

    /// κ·F for a constant κ.
    pub fn scaled(&self, field: &Field, by: &Element) -> Potential {
        let times = |e: &Element| field.reduce(&field.product(e, by));
        let logs = self.logs.iter().map(|(c, b)| (times(c), b.clone())).collect();
        Potential { regular: times(&self.regular), logs, pivots: self.pivots.clone() }
    }
}

/// |base|^exponent, without the bars where the exponent is an integer.
fn power_of_either_sign(field: &Field, base: &Element, exponent: &Element) -> Built {
    let exponent = field.reduce(exponent);
    let whole = exponent.as_constant().is_some_and(|q| q.is_integer());
    match field.sign(base) {
        _ if whole => field.power(base, &exponent),
        Sign::Positive => field.power(base, &exponent),
        Sign::Negative => field.power(&base.neg(), &exponent),
        _ => field.power(&field.current(base).pow(2), &exponent.scale(&rational(1, 2))),
    }
}

/// The potential of Σ fᵢ dpᵢ with respect to the moving symbols, proven by differentiation; `None` where the form is
/// not closed or no potential is found in the class searched.
pub fn potential(moving: &Moving, form: &[Element]) -> Option<Potential> {
    let field = moving.field;
    moving.forget();
    let in_logs: Vec<Element> =
        moving.symbols.iter().zip(form).map(|(p, f)| field.product(&Poly::var(*p), f)).collect();
    let (numerators, denominator) = moving.over_one_denominator(&in_logs);
    let mut found = Potential::default();
    integrate(moving, Class { numerators, denominator }, &mut found)?;
    found.regular = field.current(&found.regular);
    is_potential(moving, &found, &in_logs).then_some(found)
}

/// Whether θᵢF = gᵢ for all i.
fn is_potential(moving: &Moving, found: &Potential, in_logs: &[Element]) -> bool {
    let field = moving.field;
    moving.symbols.iter().zip(in_logs).all(|(p, g)| {
        let mut parts = vec![field.log_derivative(&found.regular, *p), field.current(g).neg()];
        for (coefficient, base) in &found.logs {
            let slope = field.log_derivative(base, *p);
            match field.quotient(&field.product(coefficient, &slope), base) {
                Ok(part) => parts.push(part),
                Err(_) => return false,
            }
        }
        let parts = parts.iter().map(|e| field.current(e)).collect();
        field.is_zero(&Poly::sum(parts))
    })
}

/// Integrates a class, splitting it first into parts that the derivations leave apart.
fn integrate(moving: &Moving, class: Class, total: &mut Potential) -> Option<()> {
    let class = class.cancelled(moving);
    if class.is_zero() {
        return Some(());
    }
    let frame = Frame::new(moving, &class)?;
    if let Some(whole) = power_log::integrate(&frame, &class) {
        total.add(moving.field, whole);
        return Some(());
    }
    let parts = split(&frame, &class);
    if parts.len() > 1 {
        for part in parts {
            integrate(moving, part, total)?;
        }
        return Some(());
    }
    total.add(moving.field, ansatz::integrate(&frame, &class)?);
    Some(())
}

/// The parts of a class with different powers of the variables that no derivation mixes.
fn split(frame: &Frame, class: &Class) -> Vec<Class> {
    let n = class.numerators.len();
    let mut parts: BTreeMap<Monomial, Vec<Poly>> = BTreeMap::new();
    for (index, numerator) in class.numerators.iter().enumerate() {
        for (key, rest) in numerator.collect(|v| frame.is_grading(v)) {
            let whole = rest.mul_term(&rational(1, 1), &key);
            if let Some(slot) = parts.entry(key).or_insert_with(|| vec![Poly::zero(); n]).get_mut(index) {
                *slot = whole;
            }
        }
    }
    parts.into_values().map(|numerators| Class { numerators, denominator: class.denominator.clone() }).collect()
}
