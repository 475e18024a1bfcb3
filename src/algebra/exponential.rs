//! Exponentials and powers. Every power bᵉ is exp(e ln b), and one basis over the rationals of all arguments keeps the
//! generators independent: p^(1−s), p^(−s) and p share two, 4^s and 2^(2s) are one, a^(ln b) is b^(ln a).

use std::rc::Rc;

use num_bigint::BigInt;
use num_integer::Integer;
use num_traits::{One, Signed, ToPrimitive};

use super::field::{Exponential, Field, Group};
use super::generator::{Base, Blocked, Built, Element, Kind};
use super::monomial::Var;
use super::number::Rational;
use super::polynomial::Poly;
use super::relation::rational_relation;

/// The largest integer exponent that is multiplied out.
const MOST_EXPONENT: i64 = 4000;
/// A longer sum without a base of its own gets one exponential for all of it.
const MOST_SINGLE_TERMS: usize = 8;
/// The finest root that is taken.
const FINEST_ROOT: u32 = 1000;

impl Field {
    /// bᵉ. An integer exponent needs no sign; any other needs b positive on the domain.
    pub fn power(&self, base: &Element, exponent: &Element) -> Built {
        let (base, exponent) = (self.current(base), self.reduce(exponent));
        if let Some(number) = exponent.as_constant() {
            if number.is_integer() {
                return self.integer_power(&base, number.numer());
            }
            if let Some(root) = self.radical(&base, &number) {
                return Ok(root);
            }
        }
        if base.is_one() {
            return Ok(base);
        }
        let log = self.ln(&base)?;
        self.exp(&self.product(&exponent, &log))
    }

    /// √b for positive b.
    pub fn sqrt(&self, base: &Element) -> Built {
        self.power(base, &Poly::constant(&Rational::new(1.into(), 2.into())))
    }

    /// bᵏ for an integer k. Long sums are named, not multiplied out.
    pub fn integer_power(&self, base: &Element, exponent: &BigInt) -> Built {
        let k = exponent.to_i64().filter(|k| k.abs() <= MOST_EXPONENT).ok_or(Blocked::ExponentTooLarge)?;
        if k == 0 {
            return Ok(Poly::one());
        }
        if k < 0 {
            return self.integer_power(&self.inverse(base)?, &BigInt::from(-k));
        }
        let small = base.len() <= 2 && k <= 3 || base.len() <= 4 && k <= 1;
        let base = if small { base.clone() } else { self.named(base, None) };
        Ok(base.pow(k as u32))
    }

    /// exp f as a product of generators.
    pub fn exp(&self, f: &Element) -> Built {
        let f = self.reduce(f);
        let mut groups: Vec<(Group, Vec<Element>)> = Vec::new();
        for (monomial, coefficient) in f.terms() {
            let term = Poly::term(&coefficient, monomial.clone());
            let group = self.group_of(&term);
            match groups.iter_mut().find(|(g, _)| *g == group) {
                Some((_, terms)) => terms.push(term),
                None => groups.push((group, vec![term])),
            }
        }
        let mut product = Poly::one();
        for (group, terms) in groups {
            let part = match group {
                Group::Log(_) => self.exp_in(group, &Poly::sum(terms))?,
                Group::Other => self.exp_other(terms)?,
            };
            product = &self.current(&product) * &part;
        }
        Ok(product)
    }

    /// A term that is linear in exactly one logarithm belongs to that base; everything else is an exponential proper.
    fn group_of(&self, term: &Element) -> Group {
        let Some((_, monomial)) = term.as_monomial() else { return Group::Other };
        let mut found = None;
        for (var, exponent) in monomial.iter() {
            let depends = self.support(var).iter().any(|v| matches!(*self.kind(*v), Kind::Ln(_)));
            match (&*self.kind(var), exponent, found) {
                (Kind::Ln(_), 1, None) => found = Some(var),
                (Kind::Ln(_), _, _) => return Group::Other,
                _ if depends && matches!(*self.kind(var), Kind::Sum { .. }) => return Group::Other,
                _ => {}
            }
        }
        found.map_or(Group::Other, Group::Log)
    }

    /// exp of terms without a base of their own: together if they are a combination of known arguments, else singly
    /// where they are few.
    fn exp_other(&self, terms: Vec<Element>) -> Built {
        let whole = Poly::sum(terms.clone());
        if let Some(known) = self.exp_known(Group::Other, &whole) {
            return known;
        }
        if terms.len() > MOST_SINGLE_TERMS {
            return self.exp_in(Group::Other, &whole);
        }
        let mut product = Poly::one();
        for term in terms {
            product = &self.current(&product) * &self.exp_in(Group::Other, &term)?;
        }
        Ok(product)
    }

    fn exp_in(&self, group: Group, argument: &Element) -> Built {
        if let Some(known) = self.exp_known(group, argument) {
            return known;
        }
        let argument = self.current(argument);
        let var = self.add(Kind::Exp(Rc::new(argument.clone())), None);
        let value = Poly::var(var);
        self.remember(group, Exponential { argument, value: value.clone() });
        Ok(value)
    }

    /// The value of exp(argument) if the argument is a rational combination of the group's arguments.
    fn exp_known(&self, group: Group, argument: &Element) -> Option<Built> {
        let basis = self.basis(group);
        let arguments: Vec<Element> = basis.iter().map(|b| b.argument.clone()).collect();
        let coefficients = rational_relation(self, argument, &arguments)?;
        Some(self.combine(group, &coefficients))
    }

    /// Π valueᵢ^rᵢ, refining a generator to a root of itself where rᵢ is a fraction.
    fn combine(&self, group: Group, coefficients: &[Rational]) -> Built {
        for (index, r) in coefficients.iter().enumerate() {
            if !r.denom().is_one() {
                let root = r.denom().to_u32().filter(|n| *n <= FINEST_ROOT).ok_or(Blocked::ExponentTooLarge)?;
                self.refine(group, index, root)?;
            }
        }
        let mut product = Poly::one();
        for (r, entry) in coefficients.iter().zip(self.basis(group)) {
            // after refining, the entry is the denominator-th root of what it was
            let k =
                r.numer().to_i32().filter(|k| i64::from(k.abs()) <= MOST_EXPONENT).ok_or(Blocked::ExponentTooLarge)?;
            let (c, m) = entry.value.as_monomial().ok_or(Blocked::ExponentTooLarge)?;
            product = product.mul_term(&num_traits::Pow::pow(c, k), &m.pow(k));
        }
        Ok(product)
    }

    /// The known arguments of a group with their exponentials; for a base, its own logarithm comes first.
    fn basis(&self, group: Group) -> Vec<Exponential> {
        let known = self.tables.borrow().exponentials.contains_key(&group);
        if !known {
            let first = match group {
                Group::Log(log) => {
                    vec![Exponential { argument: Poly::var(log), value: self.base_of(log) }]
                }
                Group::Other => Vec::new(),
            };
            self.tables.borrow_mut().exponentials.insert(group, first);
        }
        let basis = self.tables.borrow().exponentials.get(&group).cloned().unwrap_or_default();
        basis
            .into_iter()
            .map(|b| Exponential { argument: self.current(&b.argument), value: self.current(&b.value) })
            .collect()
    }

    /// The positive element whose logarithm the variable is.
    pub(super) fn base_of(&self, log: Var) -> Element {
        match &*self.kind(log) {
            Kind::Ln(Base::Var(var)) => self.current(&Poly::var(*var)),
            Kind::Ln(Base::Number(n)) => Poly::constant(&Rational::from_integer(n.clone())),
            Kind::Ln(Base::Sum(value)) => {
                let value = self.current(value);
                if value.len() > 1 { self.named(&value, None) } else { self.sum_of_one_term(&value) }
            }
            _ => Poly::one(),
        }
    }

    /// A named sum for a single term: one that must not be split (the product of factors of unknown sign), or a long one
    /// that comes again and again.
    pub fn sum_of_one_term(&self, value: &Element) -> Element {
        let known = self.tables.borrow().sums.get(value).cloned();
        known.unwrap_or_else(|| {
            let var = self.add(Kind::Sum { value: Rc::new(value.clone()), root: 1 }, None);
            let named = Poly::var(var);
            self.tables.borrow_mut().sums.insert(value.clone(), named.clone());
            named
        })
    }

    pub(super) fn remember(&self, group: Group, entry: Exponential) {
        self.basis(group);
        self.tables.borrow_mut().exponentials.entry(group).or_default().push(entry);
    }

    /// Replaces the group's entry by its root-th part: a new generator R with Rⁿ = the old value.
    fn refine(&self, group: Group, index: usize, root: u32) -> Result<(), Blocked> {
        let basis = self.basis(group);
        let Some(entry) = basis.get(index) else { return Ok(()) };
        let part = Rational::new(BigInt::one(), BigInt::from(root));
        let argument = entry.argument.scale(&part);
        let value = self.root_of(&entry.value, root, &argument)?;
        if let Some(list) = self.tables.borrow_mut().exponentials.get_mut(&group)
            && let Some(slot) = list.get_mut(index)
        {
            *slot = Exponential { argument, value };
        }
        Ok(())
    }

    /// The root-th root of a positive constant or variable (times a positive constant); the variable is retired.
    fn root_of(&self, value: &Element, root: u32, argument: &Element) -> Built {
        let constant = value.as_constant();
        let held = value.as_monomial().map(|(c, m)| (c, m.clone()));
        let Some((content, monomial)) = held else { return Err(Blocked::SignUnknown(value.clone())) };
        if let Some(number) = constant {
            return Ok(Poly::var(self.add(Kind::Sum { value: Rc::new(Poly::constant(&number)), root }, None)));
        }
        let mut powers = monomial.iter();
        let (Some((var, exponent)), None) = (powers.next(), powers.next()) else {
            return Err(Blocked::SignUnknown(value.clone()));
        };
        if content.is_negative() || !content.is_one() {
            return self.root_of_turned(value, root);
        }
        let common = exponent.unsigned_abs().gcd(&root);
        let (inner, outer) = (exponent / common as i32, root / common);
        if outer == 1 {
            return Ok(Poly::term(&Rational::one(), super::monomial::Monomial::power(var, inner)));
        }
        let finer = match &*self.kind(var) {
            Kind::Sum { value, root: old } => Kind::Sum { value: value.clone(), root: old * outer },
            _ => Kind::Exp(Rc::new(self.argument_part(argument, inner))),
        };
        let fresh = self.add(finer, None);
        self.retire(var, Poly::term(&Rational::one(), super::monomial::Monomial::power(fresh, outer as i32)));
        Ok(Poly::term(&Rational::one(), super::monomial::Monomial::power(fresh, inner)))
    }

    fn argument_part(&self, argument: &Element, inner: i32) -> Element {
        self.current(argument).scale(&Rational::new(BigInt::one(), BigInt::from(inner)))
    }

    /// The root of −R or c·R for a named sum R: the positive value gets a sum of its own.
    fn root_of_turned(&self, value: &Element, root: u32) -> Built {
        let expanded = Rc::new(self.reduce(value));
        let fresh = self.add(Kind::Sum { value: expanded, root }, None);
        if let Some((c, m)) = value.as_monomial()
            && let Some((var, 1)) = m.iter().next()
            && matches!(*self.kind(var), Kind::Sum { root: 1, .. })
        {
            let power = super::monomial::Monomial::power(fresh, root as i32);
            self.retire(var, Poly::term(&c.recip(), power));
        }
        Ok(Poly::var(fresh))
    }
}
