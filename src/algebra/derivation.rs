//! Differentiation: a derivation of the field, given by its values on the variables and Leibniz' rule.

use std::cell::RefCell;
use std::rc::Rc;

use num_bigint::BigInt;
use num_traits::One;
use rustc_hash::FxHashMap;

use super::budget;
use super::field::{Field, Moves};
use super::generator::{Base, Element, Kind, Role, Special};
use super::monomial::{Monomial, Var};
use super::number::{Int, Rational};
use super::polynomial::Poly;

/// Derivatives of named sums that are longer than this are named.
const LONG: usize = 8;

/// The symbols that an Euler operator scales, with what it does to each generator.
pub struct Scale {
    symbols: Vec<Var>,
    known: RefCell<FxHashMap<Var, Rc<Element>>>,
}

impl Scale {
    /// The operator Σ x ∂/∂x over these symbols.
    pub fn new(symbols: &[Var]) -> Scale {
        Scale { symbols: symbols.to_vec(), known: RefCell::default() }
    }
}

impl Field {
    /// ∂e/∂x for a symbol x. Linear in the size of e times the number of its variables that depend on x.
    pub fn derivative(&self, e: &Element, x: Var) -> Element {
        self.derive(e, x, &|field, var| field.variable_derivative(var, x))
    }

    /// x ∂e/∂x for a symbol x.
    pub fn log_derivative(&self, e: &Element, x: Var) -> Element {
        let x_itself = self.current(&Poly::var(x));
        self.derive(e, x, &|field, var| {
            let plain = field.variable_derivative(var, x);
            if plain.is_zero() { plain } else { Rc::new(field.current(&(&*plain * &x_itself))) }
        })
    }

    fn derive(&self, e: &Element, x: Var, on_variable: &dyn Fn(&Field, Var) -> Rc<Element>) -> Element {
        let e = self.current(e);
        let moving: Vec<(Var, Rc<Element>)> = e
            .vars()
            .into_iter()
            .filter(|v| self.depends(*v, x))
            .map(|v| (v, on_variable(self, v)))
            .filter(|(_, d)| !d.is_zero())
            .collect();
        if moving.is_empty() {
            return Poly::zero();
        }
        let (whole, fractional): (Vec<_>, Vec<_>) = moving.iter().partition(|(_, d)| d.denominator().is_one());
        let mut parts = vec![leibniz(&e, &whole)];
        parts.extend(fractional.into_iter().map(|one| leibniz(&e, &[one])));
        self.current(&Poly::sum(parts))
    }

    /// x ∂e/∂x for each of the symbols at once. Cost: the size of e plus the size of the answer.
    pub fn log_gradient(&self, e: &Element, symbols: &[Var]) -> Vec<Element> {
        let e = self.current(e);
        let vars = e.vars();
        let positions: FxHashMap<Var, usize> = symbols.iter().enumerate().map(|(index, x)| (*x, index)).collect();
        let moves: Vec<Vec<(usize, Rc<Element>)>> =
            vars.iter().map(|v| self.log_moves(*v, symbols, &positions)).collect();
        let mut terms: Vec<Vec<(Monomial, Int)>> = vec![Vec::new(); symbols.len()];
        let mut fractional: Vec<Vec<Poly>> = vec![Vec::new(); symbols.len()];
        for (monomial, coefficient) in e.raw_terms() {
            for (var, exponent) in monomial.iter() {
                let Ok(found) = vars.binary_search(&var) else { continue };
                if moves[found].is_empty() {
                    continue;
                }
                let scale = coefficient.mul(&Int::from(i64::from(exponent)));
                let rest = monomial.mul(&Monomial::power(var, -1));
                for (index, by) in &moves[found] {
                    budget::spend(by.len() as u64);
                    if by.denominator().is_one() {
                        terms[*index].extend(by.raw_terms().iter().map(|(m, c)| (rest.mul(m), scale.mul(c))));
                    } else {
                        fractional[*index].push(by.mul_term(&scale.to_rational(), &rest));
                    }
                }
            }
        }
        let over = e.denominator().to_rational().recip();
        let whole = terms.into_iter().map(Poly::from_int_terms);
        let sums = whole.zip(fractional).map(|(whole, mut parts)| {
            if !parts.is_empty() {
                parts.push(whole);
                return Poly::sum(parts);
            }
            whole
        });
        sums.map(|sum| self.current(&if over.is_one() { sum } else { sum.scale(&over) })).collect()
    }

    /// All prices and incomes, in the order of their declaration.
    pub fn moving_symbols(&self) -> Vec<Var> {
        let tables = self.tables.borrow();
        let moves = |kind: &Kind| matches!(kind, Kind::Symbol(Role::Price | Role::Income | Role::Others));
        let all = tables.kinds.iter().enumerate().filter(|(_, kind)| moves(kind));
        all.map(|(index, _)| Var::new(index as u32)).collect()
    }

    /// The symbols (by position) that move a variable, with x ∂v/∂x.
    fn log_moves(&self, var: Var, symbols: &[Var], positions: &FxHashMap<Var, usize>) -> Vec<(usize, Rc<Element>)> {
        let positive = || symbols.iter().all(|x| self.role(*x).is_some_and(Role::is_positive));
        let all = match &*self.kind(var) {
            Kind::Sum { value, root } if positive() => Some(self.moves_of(var, value, Some(*root))),
            Kind::Exp(argument) if positive() => Some(self.moves_of(var, argument, None)),
            _ => None,
        };
        if let Some(all) = all {
            return all.iter().filter_map(|(x, by)| Some((*positions.get(x)?, by.clone()))).collect();
        }
        let support = self.support(var);
        let mut moves = Vec::new();
        for (index, x) in symbols.iter().enumerate() {
            if *x != var && support.binary_search(x).is_err() {
                continue;
            }
            let plain = self.variable_derivative(var, *x);
            if !plain.is_zero() {
                moves.push((index, Rc::new(self.current(&(&*plain * &self.current(&Poly::var(*x)))))));
            }
        }
        moves
    }

    /// x ∂v/∂x for the positive symbols that v is built from, where v is the N-th root of `inner` or exp(`inner`): long
    /// derivatives are named in turn. Found once.
    fn moves_of(&self, var: Var, inner: &Element, root: Option<u32>) -> Rc<Moves> {
        let known = self.tables.borrow().moves.get(&var).cloned();
        if let Some(known) = known {
            return known;
        }
        let mut symbols: Vec<Var> = self.symbols_of(&Poly::var(var));
        symbols.retain(|x| self.role(*x).is_some_and(Role::is_positive));
        let n = root.unwrap_or(1);
        let share = Rational::new(BigInt::one(), BigInt::from(n));
        let outer = Monomial::power(var, if root.is_some() { 1 - n as i32 } else { 1 });
        // a single term is moved by a multiple of itself
        let itself = inner.as_monomial().filter(|_| root == Some(1)).map(|(c, m)| (c.recip(), m.clone()));
        let shorter = |slope: Element| match &itself {
            Some((scale, m)) => slope.mul_term(scale, &Monomial::power(var, 1).div(m)),
            None if slope.len() > LONG => self.named(&slope, None),
            None => slope,
        };
        let slopes = self.log_gradient(inner, &symbols).into_iter().zip(&symbols).filter(|(slope, _)| !slope.is_zero());
        let moves = slopes.map(|(slope, x)| (*x, Rc::new(shorter(slope).mul_term(&share, &outer))));
        let moves = Rc::new(moves.collect::<Moves>());
        self.tables.borrow_mut().moves.insert(var, moves.clone());
        moves
    }

    /// Σ x ∂e/∂x over the symbols, the Euler operator: zero for a function that is homogeneous of degree zero in them.
    /// The degree of each generator is found once; where a named sum is homogeneous its derivative is a multiple of it.
    pub fn euler(&self, e: &Element, scale: &Scale) -> Element {
        let e = self.current(e);
        let moving: Vec<(Var, Rc<Element>)> =
            e.vars().into_iter().map(|v| (v, self.euler_variable(v, scale))).filter(|(_, d)| !d.is_zero()).collect();
        let all: Vec<_> = moving.iter().collect();
        let (whole, fractional): (Vec<_>, Vec<_>) = all.into_iter().partition(|(_, d)| d.denominator().is_one());
        let mut parts = vec![leibniz(&e, &whole)];
        parts.extend(fractional.into_iter().map(|one| leibniz(&e, &[one])));
        self.current(&Poly::sum(parts))
    }

    fn euler_variable(&self, var: Var, scale: &Scale) -> Rc<Element> {
        if let Some(known) = scale.known.borrow().get(&var) {
            return known.clone();
        }
        let value = Rc::new(self.find_euler(var, scale));
        scale.known.borrow_mut().insert(var, value.clone());
        value
    }

    fn find_euler(&self, var: Var, scale: &Scale) -> Element {
        if scale.symbols.contains(&var) {
            return self.current(&Poly::var(var));
        }
        let by_value = |value: &Element, inverse: Element| {
            let moved = self.euler(value, scale);
            if self.is_zero(&moved) {
                return Poly::zero();
            }
            self.product(&self.as_multiple(&moved, value), &inverse)
        };
        match &*self.kind(var) {
            Kind::Symbol(_) | Kind::Ln(Base::Number(_)) => Poly::zero(),
            Kind::Ln(Base::Var(base)) => {
                let inner = self.euler_variable(*base, scale);
                let inverse = self.current(&Poly::term(&Rational::from_integer(1.into()), Monomial::power(*base, -1)));
                self.product(&inner, &inverse)
            }
            Kind::Ln(Base::Sum(value)) => {
                by_value(value, self.inverse(&self.base_of(var)).unwrap_or_else(|_| Poly::zero()))
            }
            Kind::Exp(argument) => self.product(&self.reduce(&self.euler(argument, scale)), &Poly::var(var)),
            Kind::Sum { value, root } => {
                let share = Rational::new(BigInt::from(1), BigInt::from(*root));
                by_value(value, Poly::term(&share, Monomial::power(var, 1 - *root as i32)))
            }
            Kind::Special(function, argument) => {
                let inner = self.reduce(&self.euler(argument, scale));
                self.product(&inner, &self.special_derivative(*function, argument, var))
            }
        }
    }

    /// `e` as a multiple of the named sum with this value, where it is one; else as short as it is.
    fn as_multiple(&self, e: &Element, value: &Element) -> Element {
        let expanded = self.expand(e);
        if expanded.len() >= value.len()
            && let Some(ratio) = expanded.div_exact(&self.expand(value))
        {
            return self.product(&ratio, &self.named(value, None));
        }
        if expanded.len() < e.len() { expanded } else { e.clone() }
    }

    fn variable_derivative(&self, var: Var, x: Var) -> Rc<Element> {
        let known = self.tables.borrow().derivatives.get(&(var, x)).cloned();
        if let Some(known) = known {
            return known;
        }
        let value = Rc::new(self.current(&self.derive_variable(var, x)));
        self.tables.borrow_mut().derivatives.insert((var, x), value.clone());
        value
    }

    fn derive_variable(&self, var: Var, x: Var) -> Element {
        if var == x {
            return Poly::one();
        }
        match &*self.kind(var) {
            Kind::Symbol(_) => Poly::zero(),
            Kind::Ln(Base::Number(_)) => Poly::zero(),
            Kind::Ln(Base::Var(base)) => {
                let inner = self.variable_derivative(*base, x);
                let inverse = self.current(&Poly::term(&Rational::from_integer(1.into()), Monomial::power(*base, -1)));
                self.product(&inner, &inverse)
            }
            Kind::Ln(Base::Sum(value)) => {
                let inner = self.derivative(value, x);
                let inverse = self.inverse(&self.base_of(var)).unwrap_or_else(|_| Poly::zero());
                self.product(&inner, &inverse)
            }
            Kind::Exp(argument) => self.product(&self.derivative(argument, x), &Poly::var(var)),
            Kind::Sum { value, root } => {
                let inner = self.derivative(value, x);
                let share = Rational::new(BigInt::from(1), BigInt::from(*root));
                self.product(&inner, &Poly::term(&share, Monomial::power(var, 1 - *root as i32)))
            }
            Kind::Special(function, argument) => {
                let inner = self.derivative(argument, x);
                self.product(&inner, &self.special_derivative(*function, argument, var))
            }
        }
    }

    /// Whether a variable depends on the symbol x.
    pub(super) fn depends(&self, var: Var, x: Var) -> bool {
        var == x || self.support(var).binary_search(&x).is_ok()
    }

    /// All variables that a variable is built from, itself included, sorted.
    pub(super) fn support(&self, var: Var) -> Rc<Vec<Var>> {
        let known = self.tables.borrow().support.get(&var).cloned();
        if let Some(known) = known {
            return known;
        }
        let mut all = vec![var];
        let mut add = |e: &Element| {
            for v in e.vars() {
                all.extend(self.support(v).iter().copied());
            }
        };
        match &*self.kind(var) {
            Kind::Symbol(_) | Kind::Ln(Base::Number(_)) => {}
            Kind::Ln(Base::Var(base)) => add(&Poly::var(*base)),
            Kind::Ln(Base::Sum(e)) | Kind::Exp(e) | Kind::Special(_, e) => add(e),
            Kind::Sum { value, .. } => add(value),
        }
        all.sort_unstable();
        all.dedup();
        let all = Rc::new(all);
        self.tables.borrow_mut().support.insert(var, all.clone());
        all
    }

    /// Whether e is built from x (it may still be constant in x after cancellation).
    pub fn depends_on(&self, e: &Element, x: Var) -> bool {
        self.current(e).vars().into_iter().any(|v| self.depends(v, x))
    }

    /// Whether e is built from none of the symbols.
    pub fn is_constant_in(&self, e: &Element, symbols: &[Var]) -> bool {
        symbols.iter().all(|x| !self.depends_on(e, *x))
    }

    /// The declared symbols that e is built from, in the order of their declaration.
    pub fn symbols_of(&self, e: &Element) -> Vec<Var> {
        let mut all: Vec<Var> = self.current(e).vars().iter().flat_map(|v| self.support(*v).to_vec()).collect();
        all.retain(|v| matches!(*self.kind(*v), Kind::Symbol(role) if role != Role::Pi));
        all.sort_unstable();
        all.dedup();
        all
    }

    fn special_derivative(&self, function: Special, argument: &Element, var: Var) -> Element {
        let square = |sign: i64| -> Element {
            let exponent = self.reduce(&self.product(argument, argument)).scale(&Rational::from_integer(sign.into()));
            self.exp(&exponent).unwrap_or_else(|_| Poly::zero())
        };
        let two_over_root_pi = || {
            let root = self.sqrt(&self.pi()).unwrap_or_else(|_| Poly::one());
            self.quotient(&Poly::int(2), &root).unwrap_or_else(|_| Poly::zero())
        };
        match function {
            Special::Ei => {
                let over = self.inverse(argument).unwrap_or_else(|_| Poly::zero());
                self.product(&self.exp(argument).unwrap_or_else(|_| Poly::zero()), &over)
            }
            Special::Erf => self.product(&two_over_root_pi(), &square(-1)),
            Special::Erfi => self.product(&two_over_root_pi(), &square(1)),
            Special::LambertW => {
                let w = Poly::var(var);
                let below = self.product(argument, &self.named(&(&Poly::one() + &w), None));
                self.quotient(&w, &below).unwrap_or_else(|_| Poly::zero())
            }
        }
    }
}

/// Σ over the terms c·μ of e and the given variables v of c·k·(μ/v)·∂v, k the exponent of v in μ; the derivatives have
/// one denominator.
fn leibniz(e: &Element, moving: &[&(Var, Rc<Element>)]) -> Element {
    let Some((_, first)) = moving.first() else { return Poly::zero() };
    let mut terms = Vec::new();
    for (monomial, coefficient) in e.raw_terms() {
        for (var, exponent) in monomial.iter() {
            let Ok(found) = moving.binary_search_by(|(v, _)| v.cmp(&var)) else { continue };
            let scale = coefficient.mul(&Int::from(i64::from(exponent)));
            let rest = monomial.mul(&Monomial::power(var, -1));
            terms.extend(moving[found].1.raw_terms().iter().map(|(m, c)| (rest.mul(m), scale.mul(c))));
        }
    }
    budget::spend(terms.len() as u64);
    let denominator = e.denominator().mul(first.denominator());
    let sum = Poly::from_int_terms(terms);
    if denominator.is_one() { sum } else { sum.scale(&denominator.to_rational().recip()) }
}
