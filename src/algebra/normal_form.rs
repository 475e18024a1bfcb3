//! The normal form: named sums put back, denominators kept as powers of named sums, and the zero test.

use num_traits::One;
use rustc_hash::FxHashMap;

use super::budget;
use super::field::Field;
use super::generator::{Element, Kind};
use super::monomial::{Monomial, Var};
use super::number::Rational;
use super::polynomial::Poly;

/// A reduced fraction: an expanded numerator over powers of named sums. A sum with a root N counts in powers of its
/// value: (R, k) stands for 1/value(R)ᵏ. Monomial denominators stay in the numerator as negative exponents.
pub type Fraction = (Poly, Vec<(Var, u32)>);

impl Field {
    /// All named sums with a positive power put back, highest first; exponents of roots below N. Negative powers stay.
    pub fn expand(&self, e: &Element) -> Element {
        let mut e = self.current(e);
        loop {
            if let Some(next) = self.put_back_plain(&e) {
                e = next;
                continue;
            }
            let Some((var, value, root)) = self.highest_sum(&e) else { return e };
            e = put_back(&e, var, &value, root as i32);
        }
    }

    /// The named sum of highest level that occurs to its N-th or a higher power.
    fn highest_sum(&self, e: &Element) -> Option<(Var, Element, u32)> {
        let mut best: Option<(u32, Var)> = None;
        for (var, (_, high)) in e.ranges() {
            if let Kind::Sum { root, .. } = &*self.kind(var)
                && high >= *root as i32
                && best.is_none_or(|b| b < (self.level(var), var))
            {
                best = Some((self.level(var), var));
            }
        }
        let (_, var) = best?;
        match &*self.kind(var) {
            Kind::Sum { value, root } => Some((var, self.current(value), *root)),
            _ => None,
        }
    }

    /// How deep sums are nested in a variable.
    fn level(&self, var: Var) -> u32 {
        let known = self.tables.borrow().levels.get(&var).copied();
        if let Some(known) = known {
            return known;
        }
        let kind = self.kind(var);
        let level = match &*kind {
            Kind::Sum { value, .. } => {
                1 + self.current(value).vars().into_iter().map(|v| self.level(v)).max().unwrap_or(0)
            }
            _ => 0,
        };
        self.tables.borrow_mut().levels.insert(var, level);
        level
    }

    /// The element as a reduced fraction. Cost: expansion, and one trial division for each power of a denominator.
    pub fn fraction(&self, e: &Element) -> Fraction {
        let mut numerator = self.expand(e);
        let mut denominator: Vec<(Var, u32)> = Vec::new();
        while let Some((var, root, power)) = self.lowest_sum(&numerator) {
            // k = -root·j + r with 0 ≤ r < root
            let cleared = Monomial::power(var, (root * power) as i32);
            numerator = self.expand(&numerator.mul_term(&Rational::one(), &cleared));
            match denominator.iter_mut().find(|(v, _)| *v == var) {
                Some((_, k)) => *k += power,
                None => denominator.push((var, power)),
            }
        }
        self.cancel(&mut numerator, &mut denominator);
        denominator.sort_unstable();
        (numerator, denominator)
    }

    /// A sum with a negative power, its root, and the power of its value that clears it; highest level first.
    fn lowest_sum(&self, e: &Element) -> Option<(Var, u32, u32)> {
        let mut best: Option<(u32, Var, u32, u32)> = None;
        for (var, (low, _)) in e.ranges() {
            if let Kind::Sum { root, .. } = &*self.kind(var)
                && low < 0
            {
                let power = low.unsigned_abs().div_ceil(*root);
                let level = self.level(var);
                if best.is_none_or(|b| (b.0, b.1) < (level, var)) {
                    best = Some((level, var, *root, power));
                }
            }
        }
        best.map(|(_, var, root, power)| (var, root, power))
    }

    fn cancel(&self, numerator: &mut Poly, denominator: &mut Vec<(Var, u32)>) {
        if numerator.is_zero() {
            denominator.clear();
            return;
        }
        for (var, power) in denominator.iter_mut() {
            let Kind::Sum { value, .. } = &*self.kind(*var) else { continue };
            let value = self.expand(value);
            if let Some(number) = value.as_constant().filter(|q| *q != Rational::from_integer(0.into())) {
                // the root of a number: no denominator is left
                *numerator = numerator.scale(&num_traits::Pow::pow(number.recip(), *power));
                *power = 0;
            }
            if value.len() < 2 {
                continue;
            }
            while *power > 0 {
                let Some(quotient) = numerator.div_exact(&value) else { break };
                *numerator = quotient;
                *power -= 1;
            }
        }
        denominator.retain(|(_, power)| *power > 0);
    }

    /// The canonical element: numerators expanded, common factors with the denominators cancelled.
    pub fn reduce(&self, e: &Element) -> Element {
        let e = self.current(e);
        if !self.has_sums(&e) {
            return e;
        }
        let (numerator, denominator) = self.fraction(&e);
        self.recombine(&numerator, &denominator)
    }

    /// numerator / Π sumᵏ as an element.
    pub fn recombine(&self, numerator: &Poly, denominator: &[(Var, u32)]) -> Element {
        let below = denominator.iter().map(|(var, k)| (*var, -((self.root_index(*var) * k) as i32)));
        numerator.mul_term(&Rational::one(), &Monomial::from_pairs(below))
    }

    pub(super) fn has_sums(&self, e: &Element) -> bool {
        e.vars().into_iter().any(|v| matches!(*self.kind(v), Kind::Sum { .. }))
    }

    /// Whether the normal form of e is zero. `true` is a proof that e vanishes identically on the domain; `false` says
    /// that the normal form is not zero, which is a refutation only together with a point where e is not zero.
    pub fn is_zero(&self, e: &Element) -> bool {
        let e = self.current(e);
        if e.is_zero() || !self.has_sums(&e) {
            return e.is_zero();
        }
        if self.is_visibly_nonzero(&e) {
            return false;
        }
        self.vanishes(e)
    }

    /// Clears denominators and puts sums back one at a time, small ones first, looking at every stage whether nothing
    /// is left.
    fn vanishes(&self, mut e: Element) -> bool {
        loop {
            budget::spend(e.len() as u64);
            if e.is_zero() {
                return true;
            }
            if let Some((var, root, power)) = self.lowest_sum(&e) {
                e = e.mul_term(&Rational::one(), &Monomial::power(var, (root * power) as i32));
                continue;
            }
            let Some(next) = self.put_back_plain(&e) else {
                let Some((var, value, root)) = self.highest_sum(&e) else { return false };
                e = put_back(&e, var, &value, root as i32);
                continue;
            };
            e = next;
        }
    }

    /// Puts back all sums of parameters that occur to the first power at once, in one pass; they are the cheap ones.
    /// `None` where there is no such sum.
    fn put_back_plain(&self, e: &Element) -> Option<Element> {
        let ranges = e.ranges();
        let mut plain: FxHashMap<Var, Element> = FxHashMap::default();
        for (var, range) in &ranges {
            if let Kind::Sum { value, root: 1 } = &*self.kind(*var)
                && *range == (1, 1)
                && self.is_of_parameters(*var)
            {
                plain.insert(*var, self.current(value));
            }
        }
        if plain.is_empty() {
            return None;
        }
        let mut untouched = Vec::new();
        let mut parts = Vec::new();
        for (monomial, coefficient) in e.raw_terms() {
            let Some((var, value)) = monomial.iter().find_map(|(v, _)| plain.get(&v).map(|value| (v, value))) else {
                untouched.push((monomial.clone(), coefficient.clone()));
                continue;
            };
            parts.push(value.mul_term(&coefficient.to_rational(), &monomial.mul(&Monomial::power(var, -1))));
        }
        parts.push(Poly::from_int_terms(untouched));
        Some(Poly::sum(parts).scale(&e.denominator().to_rational().recip()))
    }

    /// Whether a variable is built from parameters alone.
    pub(super) fn is_of_parameters(&self, var: Var) -> bool {
        self.support(var).iter().all(|v| match &*self.kind(*v) {
            Kind::Symbol(role) => !role.is_positive(),
            Kind::Sum { root, .. } => *root == 1,
            _ => false,
        })
    }
}

/// Puts value back for Rᴺ in every non-negative power of R.
fn put_back(e: &Element, var: Var, value: &Element, root: i32) -> Element {
    let mut powers: Vec<Poly> = vec![Poly::one()];
    let mut parts = Vec::new();
    for (exponent, coefficient) in e.coefficients(var) {
        if exponent < root {
            let rest = Monomial::power(var, exponent);
            parts.push(coefficient.mul_term(&Rational::one(), &rest));
            continue;
        }
        let (whole, rest) = ((exponent / root) as usize, exponent % root);
        while powers.len() <= whole {
            let next = &powers[powers.len() - 1] * value;
            powers.push(next);
        }
        let product = &coefficient * &powers[whole];
        parts.push(product.mul_term(&Rational::one(), &Monomial::power(var, rest)));
    }
    Poly::sum(parts)
}
