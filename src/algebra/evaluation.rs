//! Values at a point: exact by substitution, or enclosed in an interval.

use std::collections::BTreeMap;

use rustc_hash::FxHashMap;

use super::field::Field;
use super::formula::Formula;
use super::generator::{Base, Blocked, Built, Element, Kind, Role, Special};
use super::interval::Interval;
use super::monomial::Var;
use super::number::Rational;
use super::polynomial::Poly;

/// Rational values for declared symbols.
pub type Point = BTreeMap<Var, Rational>;

/// A number, exactly: an element without symbols, of a field of its own.
pub struct Constant {
    field: Field,
    element: Element,
}

impl Constant {
    /// The number, if it is rational.
    pub fn as_rational(&self) -> Option<Rational> {
        self.element.as_constant()
    }

    /// The number as a formula.
    pub fn formula(&self) -> Formula {
        self.field.formula(&self.element)
    }

    /// An enclosure of the number.
    pub fn enclose(&self, bits: u32) -> Option<Interval> {
        self.field.enclose(&self.element, &Point::new(), bits)
    }
}

impl Field {
    /// The element with elements put in for symbols; every generator is built anew, so that 1/(1 − s) at s = 1 fails
    /// and p^s at s = 2 is p².
    pub fn substitute(&self, e: &Element, with: &[(Var, Element)]) -> Built {
        let mut known: FxHashMap<Var, Element> = with.iter().cloned().collect();
        self.rebuild(&self.current(e), &mut known)
    }

    /// The exact value at a point that gives every symbol of e a value. It lives in a field of its own, so that the
    /// constants of one point (√2, e^(1/3)) burden no other.
    ///
    /// # Errors
    /// Where e is not defined at the point, or not known to be.
    pub fn value_at(&self, e: &Element, at: &Point) -> Result<Constant, Blocked> {
        let field = Field::new();
        let symbol = |var: Var| at.get(&var).map(Poly::constant);
        let element = field.import_element(self, &self.current(e), &symbol, &mut FxHashMap::default())?;
        let element = field.reduce(&element);
        Ok(Constant { field, element })
    }

    fn rebuild(&self, e: &Element, known: &mut FxHashMap<Var, Element>) -> Built {
        let mut parts = Vec::with_capacity(e.len());
        for (monomial, coefficient) in e.terms() {
            let mut product = Poly::constant(&coefficient);
            for (var, exponent) in monomial.iter() {
                let value = self.rebuild_variable(var, known)?;
                product = self.product(&product, &self.integer_power(&value, &exponent.into())?);
            }
            parts.push(product);
        }
        let parts = parts.iter().map(|p| self.current(p)).collect();
        Ok(Poly::sum(parts))
    }

    fn rebuild_variable(&self, var: Var, known: &mut FxHashMap<Var, Element>) -> Built {
        if let Some(value) = known.get(&var) {
            return Ok(self.current(value));
        }
        // what is untouched is not remembered: `known` holds what makes others change
        if !self.support(var).iter().any(|v| *v != var && known.contains_key(v)) {
            return Ok(self.current(&Poly::var(var)));
        }
        let value = match &*self.kind(var) {
            Kind::Symbol(_) | Kind::Ln(Base::Number(_)) => Poly::var(var),
            Kind::Ln(Base::Var(base)) => self.ln(&self.rebuild_variable(*base, known)?)?,
            Kind::Ln(Base::Sum(value)) => self.ln(&self.rebuild(value, known)?)?,
            Kind::Exp(argument) => self.exp(&self.rebuild(argument, known)?)?,
            Kind::Sum { value, root } => {
                let value = self.rebuild(value, known)?;
                let part = Poly::constant(&Rational::new(1.into(), (*root).into()));
                if *root == 1 { value } else { self.power(&value, &part)? }
            }
            Kind::Special(function, argument) => self.special(*function, &self.rebuild(argument, known)?)?,
        };
        known.insert(var, value.clone());
        Ok(value)
    }

    /// An element of another field, built anew in this one; `symbol` says what a declared name of the other field is
    /// here. Fails with the first name that is not known.
    pub fn import(&self, other: &Field, e: &Element, symbol: &dyn Fn(&str) -> Option<Element>) -> Built {
        let by_name = |var: Var| other.name(var).and_then(|name| symbol(&name));
        self.import_element(other, &other.current(e), &by_name, &mut FxHashMap::default())
    }

    fn import_element(
        &self,
        other: &Field,
        e: &Element,
        symbol: &dyn Fn(Var) -> Option<Element>,
        known: &mut FxHashMap<Var, Element>,
    ) -> Built {
        let mut parts = Vec::with_capacity(e.len());
        for (monomial, coefficient) in e.terms() {
            let mut product = Poly::constant(&coefficient);
            for (var, exponent) in monomial.iter() {
                let value = match known.get(&var) {
                    Some(value) => self.current(value),
                    None => self.import_variable(other, var, symbol, known)?,
                };
                known.insert(var, value.clone());
                product = self.product(&product, &self.integer_power(&value, &exponent.into())?);
            }
            parts.push(product);
        }
        let parts = parts.iter().map(|p| self.current(p)).collect();
        Ok(Poly::sum(parts))
    }

    fn import_variable(
        &self,
        other: &Field,
        var: Var,
        symbol: &dyn Fn(Var) -> Option<Element>,
        known: &mut FxHashMap<Var, Element>,
    ) -> Built {
        match &*other.kind(var) {
            Kind::Symbol(Role::Pi) => Ok(self.pi()),
            Kind::Symbol(_) => symbol(var).ok_or(Blocked::UnknownSymbol),
            Kind::Ln(Base::Number(n)) => self.ln(&Poly::constant(&Rational::from_integer(n.clone()))),
            Kind::Ln(Base::Var(base)) => self.ln(&self.import_element(other, &Poly::var(*base), symbol, known)?),
            Kind::Ln(Base::Sum(value)) => self.ln(&self.import_element(other, value, symbol, known)?),
            Kind::Exp(argument) => self.exp(&self.import_element(other, argument, symbol, known)?),
            Kind::Sum { value, root } => {
                let value = self.import_element(other, value, symbol, known)?;
                let part = Poly::constant(&Rational::new(1.into(), (*root).into()));
                if *root == 1 { Ok(value) } else { self.power(&value, &part) }
            }
            Kind::Special(function, argument) => {
                self.special(*function, &self.import_element(other, argument, symbol, known)?)
            }
        }
    }

    /// A special function of an element. Values that are elementary are given as such.
    pub fn special(&self, function: Special, argument: &Element) -> Built {
        let argument = self.reduce(argument);
        if argument.is_zero() {
            return match function {
                Special::Ei => Err(Blocked::OutsideDomain(function, argument)),
                _ => Ok(Poly::zero()),
            };
        }
        let negative = argument.raw_terms().iter().all(|(_, c)| c.is_negative());
        if negative && matches!(function, Special::Erf | Special::Erfi) {
            return Ok(self.special(function, &argument.neg())?.neg());
        }
        let known = self.tables.borrow().specials.get(&(function, argument.clone())).copied();
        if let Some(var) = known {
            return Ok(self.current(&Poly::var(var)));
        }
        let var = self.add(Kind::Special(function, std::rc::Rc::new(argument.clone())), None);
        self.tables.borrow_mut().specials.insert((function, argument.clone()), var);
        if function == Special::LambertW {
            // e^W = f/W, so that W and its exponential are not taken for independent
            let value =
                argument.mul_term(&Rational::from_integer(1.into()), &super::monomial::Monomial::power(var, -1));
            let value = self.named_term(&value);
            self.remember(super::field::Group::Other, super::field::Exponential { argument: Poly::var(var), value });
        }
        Ok(Poly::var(var))
    }

    fn named_term(&self, value: &Element) -> Element {
        if value.len() > 1 { self.named(value, None) } else { value.clone() }
    }

    /// An enclosure of e at a point that gives every symbol a value; `None` where e is not defined there (or the
    /// precision does not show that it is).
    pub fn enclose(&self, e: &Element, at: &Point, bits: u32) -> Option<Interval> {
        let mut known = FxHashMap::default();
        self.enclose_element(&self.current(e), at, bits, &mut known)
    }

    /// An enclosure of all values of e where symbols range over intervals; `None` where e is not defined on all of them
    /// (or the precision does not show that it is).
    pub fn enclose_over(&self, e: &Element, over: &[(Var, Interval)], bits: u32) -> Option<Interval> {
        let mut known: FxHashMap<Var, Interval> = over.iter().cloned().collect();
        self.enclose_element(&self.current(e), &Point::new(), bits, &mut known)
    }

    fn enclose_element(
        &self,
        e: &Element,
        at: &Point,
        bits: u32,
        known: &mut FxHashMap<Var, Interval>,
    ) -> Option<Interval> {
        let mut total = Interval::from_rational(&Rational::from_integer(0.into()), bits);
        for (monomial, coefficient) in e.terms() {
            let mut product = Interval::from_rational(&coefficient, bits);
            for (var, exponent) in monomial.iter() {
                let value = self.enclose_variable(var, at, bits, known)?;
                product = product.mul(&value.pow_int(i64::from(exponent))?);
            }
            total = total.add(&product);
        }
        Some(total)
    }

    fn enclose_variable(
        &self,
        var: Var,
        at: &Point,
        bits: u32,
        known: &mut FxHashMap<Var, Interval>,
    ) -> Option<Interval> {
        if let Some(value) = known.get(&var) {
            return Some(value.clone());
        }
        let value = match &*self.kind(var) {
            Kind::Symbol(Role::Pi) => Interval::pi(bits),
            Kind::Symbol(_) => Interval::from_rational(at.get(&var)?, bits),
            Kind::Ln(Base::Number(n)) => Interval::from_rational(&Rational::from_integer(n.clone()), bits).ln()?,
            Kind::Ln(Base::Var(base)) => self.enclose_variable(*base, at, bits, known)?.ln()?,
            Kind::Ln(Base::Sum(value)) => self.enclose_element(value, at, bits, known)?.ln()?,
            Kind::Exp(argument) => self.enclose_element(argument, at, bits, known)?.exp()?,
            Kind::Sum { value, root: 1 } => self.enclose_element(value, at, bits, known)?,
            Kind::Sum { value, root } => self.enclose_element(value, at, bits, known)?.root(*root)?,
            Kind::Special(function, argument) => {
                let argument = self.enclose_element(argument, at, bits, known)?;
                match function {
                    Special::Ei => argument.ei()?,
                    Special::Erf => argument.erf()?,
                    Special::Erfi => argument.erfi()?,
                    Special::LambertW => argument.lambertw()?,
                }
            }
        };
        known.insert(var, value.clone());
        Some(value)
    }
}
