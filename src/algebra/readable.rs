//! From an element to a formula as an author would write it.

use num_traits::{One, Signed};

use super::budget;
use super::factor::factor;
use super::field::Field;
use super::formula::{Formula, Function, Symbol};
use super::generator::{Base, Element, Kind, Special};
use super::monomial::{Monomial, Var};
use super::number::Rational;
use super::polynomial::Poly;

/// The longest sum that is looked at for factors, and the work that this may cost.
const MOST_FACTORED: usize = 48;
const FACTORING: u64 = 200_000;

impl Field {
    /// The element as a formula: the author's abbreviations where they still stand, common factors in front, powers of
    /// one base together, terms in the order of declaration.
    pub fn formula(&self, e: &Element) -> Formula {
        let e = self.folded(&self.parted(&self.current(e)));
        if e.len() < 2 {
            return self.terms_formula(&e);
        }
        let (content, common, part) = self.common_factor(&e);
        let outside = Poly::term(&content, common);
        let inside = self.inside_formula(&part);
        if outside.is_one() {
            return inside;
        }
        let (above, below) = self.single_term(&outside);
        Formula::quotient(Formula::product(vec![above, inside]), below)
    }

    /// The element with the coefficient of each function of prices reduced by itself, where that is shorter:
    /// (f − t f + g)/((1 − t)(1 − s)) with g/(1 − t) apart from f/(1 − s).
    fn parted(&self, e: &Element) -> Element {
        let divided =
            |v: Var| e.low_degree(v) < 0 && matches!(*self.kind(v), Kind::Sum { .. }) && self.is_of_parameters(v);
        if e.len() < 2 || e.len() > MOST_FACTORED || !e.vars().into_iter().any(divided) {
            return e.clone();
        }
        let parameter = |v: Var| self.is_parameter(v) || self.is_of_parameters(v);
        let groups = e.collect(|v| !parameter(v));
        let reduced = groups.into_iter().map(|(outside, inside)| &self.reduce(&inside) * &Poly::monomial(outside));
        let parted = Poly::sum(reduced.collect());
        if parted.len() < e.len() { parted } else { e.clone() }
    }

    /// A sum without a common factor; as a product where it is one and not too long to look.
    fn inside_formula(&self, part: &Poly) -> Formula {
        if part.len() < 3 || part.len() > MOST_FACTORED {
            return self.sum_formula(part);
        }
        let Ok(factored) = budget::attempt(FACTORING, || factor(part)) else { return self.sum_formula(part) };
        let pieces: u32 = factored.factors.iter().map(|(_, k)| k).sum();
        if pieces < 2 || !factored.monomial.is_one() || factored.content.is_negative() && pieces == 1 {
            return self.sum_formula(part);
        }
        let (sign, mut product) = self.factors_formula(&factored.factors);
        product.insert(0, Formula::number(factored.content * sign));
        Formula::product(product)
    }

    /// The factors, each turned to the side that reads better, and the sign that this costs.
    fn factors_formula(&self, factors: &[(Poly, u32)]) -> (Rational, Vec<Formula>) {
        let mut sign = Rational::one();
        let mut product = Vec::new();
        for (part, exponent) in factors {
            let flip = reads_better_negated(part);
            if flip && exponent % 2 == 1 {
                sign = -sign;
            }
            let shown = self.folded(&if flip { part.neg() } else { part.clone() });
            product.push(Formula::power(self.sum_formula(&shown), Formula::integer(i64::from(*exponent))));
        }
        (sign, product)
    }

    /// The element with sums put back, brought to one reduced fraction, and written with factored numerator.
    pub fn reduced_formula(&self, e: &Element) -> Formula {
        let (numerator, denominator) = self.fraction(e);
        let factored = factor(&numerator);
        let below = self.recombine(&Poly::one(), &denominator);
        let outside = Poly::term(&factored.content, factored.monomial.clone());
        let (sign, mut above) = self.factors_formula(&factored.factors);
        let outer = (&outside * &below).scale(&sign);
        let (top, bottom) = self.single_term(&outer);
        above.insert(0, top);
        Formula::quotient(Formula::product(above), bottom)
    }

    /// What every term holds, and what is left: powers with one sign in all terms; a whole number, or a fraction where
    /// no term is whole; a minus where every term has one.
    fn common_factor(&self, e: &Element) -> (Rational, Monomial, Poly) {
        let mut common: Option<Vec<(Var, i32)>> = None;
        for (monomial, _) in e.raw_terms() {
            common = Some(match common {
                None => monomial.iter().collect(),
                Some(held) => {
                    held.into_iter().filter_map(|(v, k)| shared(k, monomial.exponent(v)).map(|k| (v, k))).collect()
                }
            });
        }
        let common = Monomial::from_pairs(common.unwrap_or_default());
        let all_minus = e.raw_terms().iter().all(|(_, c)| c.is_negative());
        let size = e.primitive().content.abs();
        let whole_term = e.terms().any(|(_, c)| c.is_integer());
        let size = if size.is_integer() || !whole_term { size } else { Rational::one() };
        let content = if all_minus { -size } else { size };
        let part = e.mul_term(&content.recip(), &common.inverse());
        (content, common, part)
    }

    fn terms_formula(&self, e: &Element) -> Formula {
        match e.as_monomial() {
            Some(_) => {
                let (above, below) = self.single_term(e);
                Formula::quotient(above, below)
            }
            None if e.is_zero() => Formula::integer(0),
            None => self.sum_formula(e),
        }
    }

    /// A sum in reading order, the terms of one function of prices and income together: a p + (1 − a) q.
    pub(super) fn sum_formula(&self, e: &Poly) -> Formula {
        if e.len() < 2 {
            return self.terms_formula(e);
        }
        let mut groups = Vec::new();
        for (outside, inside) in e.collect(|v| !self.is_parameter(v) && !self.is_of_parameters(v)) {
            if inside.len() == 1 || outside.is_one() {
                groups.extend(inside.terms().map(|(m, c)| Poly::term(&c, m.mul(&outside))));
            } else {
                groups.push(inside.mul_monomial(&outside));
            }
        }
        let plus = groups.iter().any(|group| group.raw_terms().iter().any(|(_, c)| c.signum() > 0));
        groups.sort_by_cached_key(|group| {
            let late = plus && group.as_constant().is_some_and(|c| c.is_negative());
            (late, group.leading().map(|(m, _)| self.reading_order(m)))
        });
        let whole = groups.len() == 1;
        Formula::sum(groups.iter().map(|g| if whole { self.plain_sum(g) } else { self.group_formula(g) }).collect())
    }

    /// Terms that share a function of prices and income: that function times the sum of their coefficients.
    fn group_formula(&self, group: &Poly) -> Formula {
        if group.len() < 2 {
            return self.terms_formula(group);
        }
        let Some((outside, coefficient)) =
            group.collect(|v| !self.is_parameter(v) && !self.is_of_parameters(v)).into_iter().next()
        else {
            return self.plain_sum(group);
        };
        let (above, below) = self.single_term(&Poly::monomial(outside));
        Formula::quotient(Formula::product(vec![self.formula(&coefficient), above]), below)
    }

    /// A sum term by term.
    fn plain_sum(&self, e: &Poly) -> Formula {
        let mut terms: Vec<(Monomial, Rational)> = e.terms().map(|(m, c)| (m.clone(), c)).collect();
        terms.sort_by_cached_key(|(m, _)| self.reading_order(m));
        Formula::sum(terms.into_iter().map(|(m, c)| self.terms_formula(&Poly::term(&c, m))).collect())
    }

    /// Numerator and denominator of a single term.
    fn single_term(&self, e: &Element) -> (Formula, Formula) {
        let Some((coefficient, monomial)) = e.as_monomial() else { return (self.sum_formula(e), Formula::integer(1)) };
        let mut above = vec![Formula::number(Rational::from_integer(coefficient.numer().clone()))];
        let mut below = vec![Formula::number(Rational::from_integer(coefficient.denom().clone()))];
        let (powers, exponentials) = self.gather(monomial);
        for (base, exponent) in powers {
            let whole = exponent.as_constant().filter(|q| q.is_negative());
            match whole {
                Some(_) => below.push(self.power_formula(base, &exponent.neg())),
                None => above.push(self.power_formula(base, &exponent)),
            }
        }
        if !exponentials.is_zero() {
            above.push(Formula::call(Function::Exp, self.formula(&exponentials)));
        }
        (Formula::product(above), Formula::product(below))
    }

    /// The powers of a monomial, one a base, and the argument of the exponential that is left. The exponentials are put
    /// together before they are folded, so that p₁^a₁ ⋯ exp(½ Σ …) can be read as exp(ln P).
    fn gather(&self, monomial: &Monomial) -> (Vec<(Formula, Element)>, Element) {
        let mut powers: Vec<(PowerBase, Element)> = Vec::new();
        let mut exponents = Vec::new();
        for (var, k) in monomial.iter() {
            let times = Rational::from_integer(k.into());
            let (base, exponent) = match &*self.kind(var) {
                Kind::Exp(argument) => {
                    exponents.push(self.current(argument).scale(&times));
                    continue;
                }
                Kind::Sum { root, .. } if *root > 1 => {
                    (PowerBase::Root(var), Poly::constant(&Rational::new(1.into(), (*root).into())))
                }
                _ => (self.power_base(var), Poly::one()),
            };
            add_power(&mut powers, base, exponent.scale(&times));
        }
        let mut rest = Vec::new();
        for (m, c) in self.folded(&Poly::sum(exponents)).terms() {
            let term = Poly::term(&c, m.clone());
            match self.single_log(&term) {
                Some((log, exponent)) => add_power(&mut powers, PowerBase::Log(log), exponent),
                None => rest.push(term),
            }
        }
        (self.in_reading_order(powers), Poly::sum(rest))
    }

    fn in_reading_order(&self, powers: Vec<(PowerBase, Element)>) -> Vec<(Formula, Element)> {
        let mut keyed: Vec<((u8, bool, usize), Formula, Element)> = powers
            .into_iter()
            .map(|(base, exponent)| {
                let (class, index, formula) = self.base_formula(&base);
                ((class, !exponent.is_constant(), index), formula, exponent)
            })
            .collect();
        keyed.sort_by_key(|(order, _, _)| *order);
        keyed.into_iter().map(|(_, formula, exponent)| (formula, exponent)).collect()
    }

    /// exp(e·ln b) with a single logarithm: the logarithm and e.
    pub(super) fn single_log(&self, argument: &Element) -> Option<(Var, Element)> {
        let argument = self.current(argument);
        let mut found = None;
        for var in argument.vars() {
            if matches!(*self.kind(var), Kind::Ln(_)) {
                if found.is_some() || argument.degree(var) != 1 || argument.low_degree(var) != 1 {
                    return None;
                }
                found = Some(var);
            }
        }
        let log = found?;
        argument.coefficients(log).into_iter().next().map(|(_, exponent)| (log, exponent))
    }

    fn power_base(&self, var: Var) -> PowerBase {
        let by_log = self.tables.borrow().logs.get(&Base::Var(var)).copied();
        let by_value = match &*self.kind(var) {
            Kind::Sum { value, root: 1 } => self.tables.borrow().logs.get(&Base::Sum(value.clone())).copied(),
            _ => None,
        };
        by_log.or(by_value).map_or(PowerBase::Var(var), PowerBase::Log)
    }

    /// Parameters come before prices, prices before functions of them.
    fn base_formula(&self, base: &PowerBase) -> (u8, usize, Formula) {
        match base {
            PowerBase::Var(var) => (self.class(*var), var.index(), self.variable_formula(*var)),
            PowerBase::Root(var) => match &*self.kind(*var) {
                Kind::Sum { value, .. } => (3, var.index(), self.formula(value)),
                _ => (3, var.index(), self.variable_formula(*var)),
            },
            PowerBase::Log(log) => match &*self.kind(*log) {
                Kind::Ln(Base::Var(var)) => (self.class(*var), var.index(), self.variable_formula(*var)),
                Kind::Ln(Base::Number(n)) => (0, log.index(), Formula::number(Rational::from_integer(n.clone()))),
                Kind::Ln(Base::Sum(value)) => (3, log.index(), self.value_formula(value)),
                _ => (3, log.index(), self.variable_formula(*log)),
            },
        }
    }

    /// The value of a named sum: by the author's name for it, if there is one.
    fn value_formula(&self, value: &Element) -> Formula {
        let named = self.tables.borrow().sums.get(value).cloned();
        let named = named.and_then(|n| n.as_var()).filter(|var| self.name(*var).is_some());
        named.map_or_else(|| self.formula(value), |var| self.variable_formula(var))
    }

    fn power_formula(&self, base: Formula, exponent: &Element) -> Formula {
        if exponent.as_constant() == Some(Rational::new(1.into(), 2.into())) {
            return Formula::call(Function::Sqrt, base);
        }
        Formula::power(base, self.formula(&self.reduce(exponent)))
    }

    /// Whether the value of a named sum, written short, is a product that holds the sum itself, or another name of it.
    fn comes_back(&self, var: Var, value: &Element) -> bool {
        let value = self.current(value);
        let short = self.folded(&self.parted(&value));
        let same = |v: Var| match &*self.kind(v) {
            _ if v == var => true,
            Kind::Sum { value: other, root: 1 } => self.current(other) == value,
            _ => false,
        };
        short.len() == 1 && short.vars().into_iter().any(same)
    }

    /// A single variable as a formula.
    pub fn variable_formula(&self, var: Var) -> Formula {
        if let Some(name) = self.name(var) {
            return Formula::Symbol(Symbol { plain: name, latex: self.latex(var) });
        }
        match &*self.kind(var) {
            Kind::Symbol(_) => Formula::symbol("?"),
            Kind::Ln(Base::Var(base)) => Formula::call(Function::Ln, self.variable_formula(*base)),
            Kind::Ln(Base::Number(n)) => {
                Formula::call(Function::Ln, Formula::number(Rational::from_integer(n.clone())))
            }
            Kind::Ln(Base::Sum(value)) => Formula::call(Function::Ln, self.value_formula(value)),
            Kind::Exp(argument) => match self.single_log(argument) {
                Some((log, exponent)) => {
                    let (_, _, base) = self.base_formula(&PowerBase::Log(log));
                    self.power_formula(base, &exponent)
                }
                None => Formula::call(Function::Exp, self.formula(argument)),
            },
            Kind::Sum { value, root: 1 } if self.comes_back(var, value) => self.sum_formula(value),
            Kind::Sum { value, root: 1 } => self.formula(value),
            Kind::Sum { value, root } => {
                let part = Poly::constant(&Rational::new(1.into(), (*root).into()));
                self.power_formula(self.formula(value), &part)
            }
            Kind::Special(function, argument) => {
                let function = match function {
                    Special::Ei => Function::Ei,
                    Special::Erf => Function::Erf,
                    Special::Erfi => Function::Erfi,
                    Special::LambertW => Function::LambertW,
                };
                Formula::call(function, self.formula(argument))
            }
        }
    }
}

/// The power of a variable that two terms share: both positive or both negative, the one nearer to zero.
fn shared(k: i32, own: i32) -> Option<i32> {
    if k > 0 && own > 0 {
        Some(k.min(own))
    } else if k < 0 && own < 0 {
        Some(k.max(own))
    } else {
        None
    }
}

/// Whether a factor has more minus than plus signs, or as many and ends in a minus.
fn reads_better_negated(part: &Poly) -> bool {
    let minus = part.raw_terms().iter().filter(|(_, c)| c.is_negative()).count();
    2 * minus > part.len() || 2 * minus == part.len() && part.raw_terms().last().is_some_and(|(_, c)| c.is_negative())
}

fn add_power(powers: &mut Vec<(PowerBase, Element)>, base: PowerBase, exponent: Element) {
    match powers.iter_mut().find(|(b, _)| *b == base) {
        Some((_, total)) => *total = &*total + &exponent,
        None => powers.push((base, exponent)),
    }
}

/// What a power in a monomial is a power of.
#[derive(Clone, Copy, PartialEq, Eq)]
enum PowerBase {
    Var(Var),
    Root(Var),
    Log(Var),
}
