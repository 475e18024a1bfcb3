//! Values at a point without touching the field: exactly where they are rational, else enclosed.

use std::cell::RefCell;
use std::cmp::Ordering;

use num_traits::{One, Pow, Signed, ToPrimitive, Zero};
use rustc_hash::FxHashMap;

use crate::algebra::evaluation::Point;
use crate::algebra::field::{Field, Relation};
use crate::algebra::generator::{Base, Element, Kind, Special};
use crate::algebra::monomial::{Monomial, Var};
use crate::algebra::number::Rational;
use crate::algebra::radical::rational_root;

/// The precisions that are tried, in bits.
const PRECISIONS: [u32; 3] = [64, 128, 256];
/// The largest exponent and the largest root that are worked out exactly.
const MOST_EXPONENT: i64 = 64;
/// The largest result of a power that is worked out exactly, in bits.
const MOST_BITS: u64 = 1 << 12;

/// Evaluates elements at one point.
pub(super) struct Values<'a> {
    field: &'a Field,
    point: &'a Point,
    known: RefCell<FxHashMap<Var, Option<Rational>>>,
}

impl<'a> Values<'a> {
    /// Values at the point.
    pub fn at(field: &'a Field, point: &'a Point) -> Values<'a> {
        Values { field, point, known: RefCell::default() }
    }

    /// The value, if it is defined and can be seen to be rational.
    pub fn exact(&self, e: &Element) -> Option<Rational> {
        self.sum(&self.field.current(e))
    }

    fn sum(&self, e: &Element) -> Option<Rational> {
        let mut total = Rational::zero();
        for (monomial, coefficient) in e.terms() {
            total += coefficient * self.monomial(monomial)?;
        }
        Some(total)
    }

    fn monomial(&self, monomial: &Monomial) -> Option<Rational> {
        let mut product = Rational::one();
        for (var, exponent) in monomial.iter() {
            let value = self.variable(var)?;
            product *= integer_power(&value, i64::from(exponent))?;
        }
        Some(product)
    }

    fn variable(&self, var: Var) -> Option<Rational> {
        let known = self.known.borrow().get(&var).cloned();
        if let Some(known) = known {
            return known;
        }
        let value = self.find(var);
        self.known.borrow_mut().insert(var, value.clone());
        value
    }

    fn find(&self, var: Var) -> Option<Rational> {
        match &*self.field.kind(var) {
            Kind::Symbol(_) => self.point.get(&var).cloned(),
            Kind::Ln(base) => self.base(base)?.is_one().then(Rational::zero),
            Kind::Exp(argument) => self.exponential(argument),
            Kind::Sum { value, root } => rational_power(&self.sum(value)?, &Rational::new(1.into(), (*root).into())),
            Kind::Special(Special::Ei, _) => None,
            Kind::Special(_, argument) => self.sum(argument)?.is_zero().then(Rational::zero),
        }
    }

    fn base(&self, base: &Base) -> Option<Rational> {
        match base {
            Base::Var(var) => self.variable(*var),
            Base::Number(number) => Some(Rational::from_integer(number.clone())),
            Base::Sum(value) => self.sum(value),
        }
    }

    /// exp(Σ e ln b) = Π b^e.
    fn exponential(&self, argument: &Element) -> Option<Rational> {
        let mut exponents: Vec<(Var, Rational)> = Vec::new();
        let mut rest = Rational::zero();
        for (monomial, coefficient) in argument.terms() {
            let log = monomial.iter().find(|(var, _)| matches!(&*self.field.kind(*var), Kind::Ln(_)));
            let Some((log, 1)) = log else {
                rest += coefficient * self.monomial(monomial)?;
                continue;
            };
            let exponent = coefficient * self.monomial(&monomial.without(log))?;
            match exponents.iter_mut().find(|(known, _)| *known == log) {
                Some((_, total)) => *total += exponent,
                None => exponents.push((log, exponent)),
            }
        }
        if !rest.is_zero() {
            return None;
        }
        let mut product = Rational::one();
        for (log, exponent) in exponents {
            let Kind::Ln(base) = &*self.field.kind(log) else { return None };
            product *= rational_power(&self.base(base)?, &exponent)?;
        }
        Some(product)
    }

    /// Whether the element stands in the relation to zero; `false` also where no precision tried shows that it does.
    pub fn satisfies(&self, e: &Element, relation: Relation) -> bool {
        let fits = |sign: Ordering| match relation {
            Relation::Positive => sign == Ordering::Greater,
            Relation::NonNegative => sign != Ordering::Less,
            Relation::NonZero => sign != Ordering::Equal,
        };
        if let Some(value) = self.exact(e) {
            return fits(value.cmp(&Rational::zero()));
        }
        let enclosed = PRECISIONS.iter().find_map(|bits| self.field.enclose(e, self.point, *bits)?.sign());
        enclosed.is_some_and(fits)
    }

    /// The value, rounded where it is not rational.
    pub fn about(&self, e: &Element) -> Option<Rational> {
        self.exact(e).or_else(|| Some(self.field.enclose(e, self.point, PRECISIONS[0])?.midpoint().to_rational()))
    }
}

/// valueᵏ, if it is defined and not too long.
fn integer_power(value: &Rational, exponent: i64) -> Option<Rational> {
    let bits = value.numer().bits().max(value.denom().bits());
    if value.is_zero() && exponent < 0 || bits.saturating_mul(exponent.unsigned_abs()) > MOST_BITS {
        return None;
    }
    Some(Pow::pow(value, exponent.to_i32()?))
}

/// value^exponent for a positive value, if it is rational and not too long.
fn rational_power(value: &Rational, exponent: &Rational) -> Option<Rational> {
    if exponent.is_one() {
        return Some(value.clone());
    }
    if !value.is_positive() {
        return None;
    }
    if value.is_one() || exponent.is_zero() {
        return Some(Rational::one());
    }
    let root = exponent.denom().to_i64().filter(|n| *n <= MOST_EXPONENT)?;
    let power = exponent.numer().to_i64().filter(|n| n.abs() <= MOST_EXPONENT)?;
    integer_power(&rational_root(value, root.to_u32()?)?, power)
}
