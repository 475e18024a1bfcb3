//! Logarithms: ln of an element is split over its factors wherever each factor is known to be positive.
//!
//! With irreducible, pairwise coprime bases the logarithms that remain are independent (Risch 1979; Rothstein and
//! Caviness 1979): ln 6 = ln 2 + ln 3, ln(a²b) = 2 ln a + ln b.

use std::rc::Rc;

use num_bigint::BigInt;
use num_rational::Ratio;
use num_traits::{One, Signed, Zero};

use super::factor::integer_factors;
use super::field::Field;
use super::generator::{Base, Blocked, Built, Element, Kind, Special};
use super::monomial::Var;
use super::number::Rational;
use super::polynomial::Poly;
use super::sign::Sign;

impl Field {
    /// ln e. Fails where e is not known to be positive, or where it can only be split over factors of unknown sign and
    /// their product is not known to be positive either.
    pub fn ln(&self, e: &Element) -> Built {
        let (mut content, pieces) = self.pieces(e);
        if content.is_zero() {
            return Err(Blocked::NotPositive(e.clone()));
        }
        let mut sum = Vec::new();
        let mut unsettled = Poly::one();
        for (base, exponent) in pieces {
            match self.sign(&base) {
                Sign::Positive => sum.push(self.ln_positive(&base)?.scale(&Rational::from_integer(exponent.into()))),
                Sign::Negative => {
                    if exponent % 2 != 0 {
                        content = -content;
                    }
                    sum.push(self.ln_positive(&base.neg())?.scale(&Rational::from_integer(exponent.into())));
                }
                _ => unsettled = &unsettled * &signed_power(&base, exponent),
            }
        }
        if unsettled.is_one() {
            if content.is_negative() {
                return Err(Blocked::NotPositive(e.clone()));
            }
        } else {
            let rest = if content.is_negative() { unsettled.neg() } else { unsettled };
            content = content.abs();
            sum.push(self.ln_unsplit(&rest, e)?);
        }
        sum.push(self.ln_rational(&content));
        Ok(Poly::sum(sum))
    }

    /// ln of a product of factors whose single signs are unknown, if the product is known to be positive.
    fn ln_unsplit(&self, rest: &Element, whole: &Element) -> Built {
        match self.sign(rest) {
            Sign::Positive => {
                let expanded = self.reduce(rest);
                Ok(Poly::var(self.log_var(Base::Sum(Rc::new(expanded)))))
            }
            Sign::Negative | Sign::NonPositive | Sign::Zero => Err(Blocked::NotPositive(whole.clone())),
            _ => Err(Blocked::SignUnknown(rest.clone())),
        }
    }

    /// ln of c·vᵏ, known to be positive, for a single variable v.
    fn ln_positive(&self, base: &Element) -> Built {
        let Some((content, monomial)) = base.as_monomial() else {
            return Ok(Poly::var(self.log_var(Base::Sum(Rc::new(base.clone())))));
        };
        let mut powers = monomial.iter();
        let (first, second) = (powers.next(), powers.next());
        match (first, second) {
            (None, _) if content.is_positive() => Ok(self.ln_rational(&content)),
            (Some((var, k)), None) if content.is_positive() => {
                let log = self.ln_var(var).scale(&Rational::from_integer(k.into()));
                Ok(&log + &self.ln_rational(&content))
            }
            (Some((var, 1)), None) => Ok(&self.ln_negated(var) + &self.ln_rational(&-content)),
            _ => Err(Blocked::SignUnknown(base.clone())),
        }
    }

    /// ln(−v) for a negative variable; a named sum is turned round, another variable gets a sum for its negative.
    fn ln_negated(&self, var: Var) -> Element {
        let value = match &*self.kind(var) {
            Kind::Sum { value, root: 1 } => value.neg(),
            _ => Poly::var(var).neg(),
        };
        Poly::var(self.log_var(Base::Sum(Rc::new(value))))
    }

    /// ln of a positive variable.
    pub(super) fn ln_var(&self, var: Var) -> Element {
        match &*self.kind(var) {
            Kind::Exp(argument) => self.current(argument),
            Kind::Sum { value, root } => {
                let value = self.current(value);
                let log = match value.as_constant() {
                    Some(number) => self.ln_rational(&number),
                    None => Poly::var(self.log_var(Base::Sum(Rc::new(value)))),
                };
                log.scale(&Ratio::new(BigInt::one(), BigInt::from(*root)))
            }
            Kind::Special(Special::LambertW, argument) => match self.ln(argument) {
                // W e^W = f
                Ok(log) => &log - &Poly::var(var),
                Err(_) => Poly::var(self.log_var(Base::Var(var))),
            },
            _ => Poly::var(self.log_var(Base::Var(var))),
        }
    }

    /// ln of a positive rational, over pairwise coprime integers.
    pub(super) fn ln_rational(&self, q: &Rational) -> Element {
        if q.is_one() {
            return Poly::zero();
        }
        let mut sum = Vec::new();
        for (number, sign) in [(q.numer(), 1i64), (q.denom(), -1)] {
            for (prime, exponent) in integer_factors(number) {
                let log = Poly::var(self.log_var(Base::Number(prime)));
                sum.push(log.scale(&Rational::from_integer((sign * i64::from(exponent)).into())));
            }
        }
        Poly::sum(sum)
    }

    pub(super) fn log_var(&self, base: Base) -> Var {
        let known = self.tables.borrow().logs.get(&base).copied();
        known.unwrap_or_else(|| {
            let var = self.add(Kind::Ln(base.clone()), None);
            self.tables.borrow_mut().logs.insert(base, var);
            var
        })
    }
}

fn signed_power(base: &Element, exponent: i32) -> Element {
    match base.as_monomial() {
        Some((c, m)) => {
            let sign = if c.is_negative() && exponent % 2 != 0 { -Rational::one() } else { Rational::one() };
            Poly::term(&sign, m.pow(exponent))
        }
        None => base.pow(exponent.unsigned_abs()),
    }
}
