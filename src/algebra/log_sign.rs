//! Signs of combinations of logarithms: Σ nⱼ ln bⱼ has the sign of Π bⱼ^nⱼ − 1.

use num_bigint::BigInt;
use num_integer::Integer;
use num_traits::{One, Signed, ToPrimitive};

use super::field::Field;
use super::generator::{Element, Kind};
use super::monomial::{Monomial, Var};
use super::number::Rational;
use super::polynomial::Poly;
use super::sign_rules::Sign;

/// The longest polynomial that is looked at.
const MOST_TERMS: usize = 40;
/// The highest power of a base.
const MOST_POWER: i64 = 6;

impl Field {
    /// The sign of f, where the terms that share everything but one logarithm are taken together.
    pub(super) fn logarithmic_sign(&self, f: &Poly) -> Sign {
        if f.len() > MOST_TERMS {
            return Sign::Unknown;
        }
        let mut groups: Vec<(Monomial, Vec<(Var, Rational)>)> = Vec::new();
        let mut total = Sign::Zero;
        for (monomial, coefficient) in f.terms() {
            match self.one_log(monomial) {
                Some((log, rest)) => match groups.iter_mut().find(|(m, _)| *m == rest) {
                    Some((_, logs)) => logs.push((log, coefficient)),
                    None => groups.push((rest, vec![(log, coefficient)])),
                },
                None => total = total.plus(self.sign(&Poly::term(&coefficient, monomial.clone()))),
            }
        }
        if groups.is_empty() {
            return Sign::Unknown;
        }
        for (rest, logs) in groups {
            total = total.plus(self.sign(&Poly::monomial(rest)).times(self.combination_sign(&logs)));
        }
        total
    }

    /// The only logarithm of a monomial, to the first power, and what else it holds.
    fn one_log(&self, monomial: &Monomial) -> Option<(Var, Monomial)> {
        let mut logs = monomial.iter().filter(|(v, _)| matches!(*self.kind(*v), Kind::Ln(_)));
        match (logs.next(), logs.next()) {
            (Some((log, 1)), None) => Some((log, monomial.without(log))),
            _ => None,
        }
    }

    fn combination_sign(&self, logs: &[(Var, Rational)]) -> Sign {
        let scale = logs.iter().fold(BigInt::one(), |lcm, (_, q)| lcm.lcm(q.denom()));
        let common = logs.iter().fold(BigInt::from(0), |gcd, (_, q)| gcd.gcd(&(q.numer() * (&scale / q.denom()))));
        let (mut above, mut below): (Element, Element) = (Poly::one(), Poly::one());
        for (log, q) in logs {
            let whole = q.numer() * (&scale / q.denom()) / &common;
            let Some(power) = whole.to_i64().filter(|n| n.abs() <= MOST_POWER) else { return Sign::Unknown };
            let base = self.base_of(*log).pow(power.unsigned_abs() as u32);
            if whole.is_positive() {
                above = &above * &base;
            } else {
                below = &below * &base;
            }
        }
        self.sign(&(&self.expand(&above) - &self.expand(&below)))
    }
}
