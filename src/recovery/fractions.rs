//! Elements as polynomials in what moves, over powers of moving named sums, with constants as coefficients.

use std::cell::RefCell;
use std::collections::BTreeMap;
use std::rc::Rc;

use num_traits::One;
use rustc_hash::FxHashMap;

use crate::algebra::field::Field;
use crate::algebra::generator::{Element, Kind};
use crate::algebra::monomial::{Monomial, Var};
use crate::algebra::number::Rational;
use crate::algebra::polynomial::Poly;

use super::linear_solve::{self, Equation, Solution};

/// numerator / Π value(sum)ᵏ; the numerator holds no moving sum but roots to powers below their order. Constant sums
/// stay in the coefficients, also to negative powers.
#[derive(Clone, Debug)]
pub struct Cleared {
    /// The expanded numerator.
    pub numerator: Poly,
    /// The moving sums of the denominator with their (positive) powers.
    pub denominator: BTreeMap<Var, u32>,
}

/// The symbols that move (prices, or income alone, or both); everything that is not built from them is a constant.
pub struct Moving<'a> {
    /// The field.
    pub field: &'a Field,
    /// The moving symbols.
    pub symbols: Vec<Var>,
    known: RefCell<FxHashMap<Var, bool>>,
    rates: RefCell<FxHashMap<Var, Rc<Vec<Cleared>>>>,
}

impl<'a> Moving<'a> {
    /// Computation with these moving symbols.
    pub fn new(field: &'a Field, symbols: &[Var]) -> Moving<'a> {
        Moving { field, symbols: symbols.to_vec(), known: RefCell::default(), rates: RefCell::default() }
    }

    /// θᵢv/v for each moving symbol i, where θᵢ = pᵢ∂/∂pᵢ; remembered until [`Moving::forget`].
    pub fn rates(&self, var: Var) -> Option<Rc<Vec<Cleared>>> {
        if let Some(known) = self.rates.borrow().get(&var) {
            return Some(known.clone());
        }
        let mut rates = Vec::with_capacity(self.symbols.len());
        let itself = Poly::var(var);
        for symbol in &self.symbols {
            let slope = self.field.log_derivative(&itself, *symbol);
            let rate = if slope.is_zero() { slope } else { self.field.quotient(&slope, &itself).ok()? };
            rates.push(self.clear(&rate));
        }
        let rates = Rc::new(rates);
        self.rates.borrow_mut().insert(var, rates.clone());
        Some(rates)
    }

    /// Forgets the rates: variables may have been retired since.
    pub fn forget(&self) {
        self.rates.borrow_mut().clear();
    }

    /// Whether the variable is built from a moving symbol.
    pub fn moves(&self, var: Var) -> bool {
        if let Some(known) = self.known.borrow().get(&var) {
            return *known;
        }
        let moves = !self.field.is_constant_in(&Poly::var(var), &self.symbols);
        self.known.borrow_mut().insert(var, moves);
        moves
    }

    /// Whether the element, as it is written, is built from no moving symbol.
    pub fn is_constant(&self, e: &Element) -> bool {
        self.field.current(e).vars().into_iter().all(|v| !self.moves(v))
    }

    /// The value of a named sum (for a root: of its power), expanded.
    pub fn value(&self, sum: Var) -> Poly {
        match &*self.field.kind(sum) {
            Kind::Sum { value, .. } => self.field.expand(value),
            _ => Poly::var(sum),
        }
    }

    /// The element as a polynomial over moving sums.
    pub fn clear(&self, e: &Element) -> Cleared {
        let (mut numerator, below) = self.field.fraction(e);
        let mut denominator = BTreeMap::new();
        let mut constant = Vec::new();
        for (sum, power) in below {
            if self.moves(sum) {
                denominator.insert(sum, power);
            } else {
                let root = if let Kind::Sum { root, .. } = &*self.field.kind(sum) { *root as i32 } else { 1 };
                constant.push((sum, -(power as i32) * root));
            }
        }
        numerator = numerator.mul_term(&Rational::one(), &Monomial::from_pairs(constant));
        self.without_inner_fractions(Cleared { numerator, denominator })
    }

    /// A sum of the denominator whose own value is a fraction gives way to the sum of its numerator.
    fn without_inner_fractions(&self, mut cleared: Cleared) -> Cleared {
        for (sum, power) in cleared.denominator.clone() {
            let value = self.value(sum);
            if !value.vars().into_iter().any(|v| self.is_moving_sum(v) && value.low_degree(v) < 0) {
                continue;
            }
            let inner = self.clear(&value);
            let named = self.field.named(&inner.numerator, None);
            let Some((content, monomial)) = named.as_monomial().map(|(c, m)| (c, m.clone())) else { continue };
            cleared.denominator.remove(&sum);
            let unit = num_traits::Pow::pow(content.recip(), power);
            let mut outside = Monomial::one();
            for (var, k) in monomial.iter() {
                if self.is_moving_sum(var) {
                    *cleared.denominator.entry(var).or_insert(0) += power * k.unsigned_abs();
                } else {
                    outside = outside.mul(&Monomial::power(var, -k * power as i32));
                }
            }
            cleared.numerator = cleared.numerator.mul_term(&unit, &outside);
            for (var, k) in inner.denominator {
                cleared.numerator = self.field.expand(&(&cleared.numerator * &self.value(var).pow(k * power)));
            }
        }
        cleared
    }

    /// Whether the variable is a moving named sum (or root of one).
    pub fn is_moving_sum(&self, var: Var) -> bool {
        matches!(*self.field.kind(var), Kind::Sum { .. }) && self.moves(var)
    }

    /// The numerators over the least common denominator, and that denominator.
    pub fn over_one_denominator(&self, elements: &[Element]) -> (Vec<Poly>, BTreeMap<Var, u32>) {
        let all: Vec<Cleared> = elements.iter().map(|e| self.clear(e)).collect();
        let mut common: BTreeMap<Var, u32> = BTreeMap::new();
        for (sum, power) in all.iter().flat_map(|c| &c.denominator) {
            let slot = common.entry(*sum).or_insert(0);
            *slot = (*slot).max(*power);
        }
        let numerators = all.iter().map(|c| self.raise(c, &common)).collect();
        (numerators, common)
    }

    /// The numerator over a given multiple of the denominator.
    pub fn raise(&self, cleared: &Cleared, common: &BTreeMap<Var, u32>) -> Poly {
        let mut numerator = self.field.current(&cleared.numerator);
        for (sum, power) in common {
            let missing = power - cleared.denominator.get(sum).copied().unwrap_or(0).min(*power);
            if missing > 0 {
                numerator = &numerator * &self.value(*sum).pow(missing);
            }
        }
        self.field.expand(&numerator)
    }

    /// Π sum^−k as an element.
    pub fn below(&self, denominator: &BTreeMap<Var, u32>) -> Element {
        let pairs: Vec<(Var, u32)> = denominator.iter().map(|(v, k)| (*v, *k)).collect();
        self.field.recombine(&Poly::one(), &pairs)
    }

    /// A polynomial by monomials in what moves, with constant coefficients in normal form.
    pub fn collect(&self, numerator: &Poly) -> BTreeMap<Monomial, Element> {
        let mut terms = BTreeMap::new();
        for (monomial, coefficient) in numerator.collect(|v| self.moves(v)) {
            let coefficient = self.field.reduce(&coefficient);
            if !coefficient.is_zero() {
                terms.insert(monomial, coefficient);
            }
        }
        terms
    }

    /// Constants c with Σ cⱼ `basis`ⱼ = `target`, entry by entry, if there are any.
    pub fn constant_combination(&self, target: &[Element], basis: &[Vec<Element>]) -> Option<Solution> {
        let mut equations = Vec::new();
        for (index, entry) in target.iter().enumerate() {
            let mut row: Vec<Element> = basis.iter().filter_map(|b| b.get(index).cloned()).collect();
            row.push(entry.clone());
            let (numerators, _) = self.over_one_denominator(&row);
            equations.extend(self.matched(&numerators));
        }
        linear_solve::solve(self.field, equations, basis.len())
    }

    /// One equation for each moving monomial: Σ unknownⱼ·numeratorⱼ = last numerator.
    pub fn matched(&self, numerators: &[Poly]) -> Vec<Equation> {
        let unknowns = numerators.len().saturating_sub(1);
        let mut rows: BTreeMap<Monomial, Equation> = BTreeMap::new();
        for (index, numerator) in numerators.iter().enumerate() {
            for (monomial, coefficient) in self.collect(numerator) {
                let row = rows.entry(monomial).or_default();
                if index == unknowns {
                    row.right = coefficient;
                } else {
                    row.left.insert(index, coefficient);
                }
            }
        }
        rows.into_values().collect()
    }
}
