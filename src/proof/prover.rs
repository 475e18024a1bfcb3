//! The prover: a derivation in the making, over one field.

use std::rc::Rc;

use rustc_hash::{FxHashMap, FxHashSet};

use crate::algebra::budget;
use crate::algebra::derivation::Scale;
use crate::algebra::field::{Field, Relation};
use crate::algebra::generator::{Base, Element, Kind, Special};
use crate::algebra::monomial::{Monomial, Var};
use crate::algebra::number::rational;
use crate::algebra::polynomial::Poly;

use super::claim::{Expression, Factor, FunctionId, Matrix};
use super::derivation::{Derivation, Function, Rule, SideCondition, Statement, Step, StepId};

/// A factor with at most this many terms is multiplied out; of two longer ones the field names one.
const SHORT: usize = 8;

/// Establishes claims and writes the derivation down. Derivatives of the functions are computed once and kept.
pub struct Prover<'f> {
    pub(super) field: &'f Field,
    pub(super) derivation: Derivation,
    slopes: FxHashMap<(FunctionId, Var, bool), Rc<Element>>,
    scales: Vec<(Rc<Vec<Var>>, Scale)>,
    pub(super) supposing: Rc<Vec<(Expression, Relation)>>,
}

impl<'f> Prover<'f> {
    /// A derivation without steps over a field whose facts are the domain.
    pub fn new(field: &'f Field) -> Prover<'f> {
        Prover {
            field,
            derivation: Derivation::default(),
            slopes: FxHashMap::default(),
            scales: Vec::new(),
            supposing: Rc::default(),
        }
    }

    /// The field.
    pub fn field(&self) -> &'f Field {
        self.field
    }

    /// What has been established so far.
    pub fn derivation(&self) -> &Derivation {
        &self.derivation
    }

    /// The derivation, complete.
    pub fn into_derivation(self) -> Derivation {
        self.derivation
    }

    /// Adds a function that claims may speak of. The same name and element give the same number.
    pub fn define(&mut self, name: &str, element: &Element) -> FunctionId {
        let known = self.derivation.functions.iter().position(|f| f.name == name && f.element == *element);
        let index = known.unwrap_or_else(|| {
            self.derivation.functions.push(Function { name: name.to_string(), element: element.clone() });
            self.derivation.functions.len() - 1
        });
        FunctionId(index as u32)
    }

    /// A step that states what the author or the language takes for granted.
    pub fn assumed(&mut self, subject: &str, words: &str) -> StepId {
        self.record(subject, Statement::Assumed(words.to_string()), Rule::Assumption, &[], Vec::new())
    }

    /// Runs `body` on a part of the domain, where the expressions stand in the given relations to zero as well; the steps
    /// made meanwhile say so.
    pub fn supposing<T>(&mut self, further: &[(Expression, Relation)], body: impl FnOnce(&mut Prover<'f>) -> T) -> T {
        let mut facts = Vec::with_capacity(further.len());
        for (expression, relation) in further {
            facts.push((self.value(expression), *relation));
        }
        let field = self.field;
        let all = self.supposing.iter().chain(further).cloned().collect();
        let outside = std::mem::replace(&mut self.supposing, Rc::new(all));
        let scope = Scope { prover: self, outside };
        field.suppose(&facts, || body(&mut *scope.prover))
    }

    /// Whether what a step established on its part of the domain holds where the prover is now: all that it supposed is
    /// supposed here too.
    pub(super) fn in_force(&self, step: StepId) -> bool {
        let of = self.derivation.step(step).map(|step| &step.supposing);
        of.is_some_and(|supposing| supposing.iter().all(|each| self.supposing.contains(each)))
    }

    /// The element that an expression stands for.
    pub fn value(&mut self, expression: &Expression) -> Element {
        let mut parts = Vec::with_capacity(expression.0.len());
        for product in &expression.0 {
            let mut value = Poly::int(product.coefficient);
            for factor in &product.factors {
                value = self.times(&value, factor);
            }
            parts.push(value);
        }
        if self.field.has_retired() {
            parts.iter_mut().for_each(|part| *part = self.field.current(part));
        }
        Poly::sum(parts)
    }

    fn times(&mut self, value: &Element, factor: &Factor) -> Element {
        let by = match factor {
            Factor::Element(e) => return self.multiply(value, e),
            Factor::Function(f) => match self.derivation.function(*f) {
                Some(function) => return self.multiply(value, &function.element),
                None => Rc::new(Poly::zero()),
            },
            Factor::Slope(f, x) => self.slope(*f, *x, false),
            Factor::LogSlope(f, x) => self.slope(*f, *x, true),
            Factor::Euler(f, symbols) => Rc::new(self.euler(*f, symbols)),
        };
        self.multiply(value, &by)
    }

    fn multiply(&self, a: &Element, b: &Element) -> Element {
        if a.is_one() {
            return b.clone();
        }
        if a.len().min(b.len()) <= SHORT && !self.field.has_retired() {
            budget::spend((a.len() * b.len()) as u64);
            return a * b;
        }
        self.field.product(a, b)
    }

    /// x ∂f/∂x; the slopes in all other prices and income are found in the same pass and kept.
    fn gradient(&mut self, element: &Element, f: FunctionId, x: Var) -> Element {
        let moving = self.field.moving_symbols();
        if !moving.contains(&x) {
            return self.field.log_derivative(element, x);
        }
        let slopes = self.field.log_gradient(element, &moving);
        let mut wanted = Poly::zero();
        for (symbol, slope) in moving.into_iter().zip(slopes) {
            if symbol == x {
                wanted = slope.clone();
            }
            self.slopes.insert((f, symbol, true), Rc::new(slope));
        }
        wanted
    }

    /// ∂f/∂x, or x ∂f/∂x.
    fn slope(&mut self, f: FunctionId, x: Var, logarithmic: bool) -> Rc<Element> {
        if let Some(known) = self.slopes.get(&(f, x, logarithmic)) {
            return known.clone();
        }
        let value = match self.derivation.function(f) {
            Some(function) if logarithmic => self.gradient(&function.element.clone(), f, x),
            Some(function) => self.field.derivative(&function.element, x),
            None => Poly::zero(),
        };
        let value = Rc::new(value);
        self.slopes.insert((f, x, logarithmic), value.clone());
        value
    }

    /// Computes x ∂f/∂x for all of the symbols in one pass, for the expressions to come. Cost: the size of f plus that of
    /// the answer, where the single slopes cost the size of f each.
    pub fn prepare(&mut self, f: FunctionId, symbols: &[Var]) {
        let missing: Vec<Var> = symbols.iter().copied().filter(|x| !self.slopes.contains_key(&(f, *x, true))).collect();
        let Some(function) = self.derivation.function(f) else { return };
        let slopes = self.field.log_gradient(&function.element, &missing);
        for (x, slope) in missing.into_iter().zip(slopes) {
            self.slopes.insert((f, x, true), Rc::new(slope));
        }
    }

    /// Σ x ∂f/∂x over the symbols.
    fn euler(&mut self, f: FunctionId, symbols: &Rc<Vec<Var>>) -> Element {
        let known = self.scales.iter().position(|(known, _)| known == symbols);
        let at = known.unwrap_or_else(|| {
            self.scales.push((symbols.clone(), Scale::new(symbols)));
            self.scales.len() - 1
        });
        match self.derivation.function(f) {
            Some(function) => self.field.euler(&function.element, &self.scales[at].1),
            None => Poly::zero(),
        }
    }

    /// The entries of a matrix, row by row.
    pub fn entries(&mut self, matrix: &Matrix) -> Vec<Element> {
        matrix.entries.iter().map(|entry| self.value(entry)).collect()
    }

    pub(super) fn record(
        &mut self,
        subject: &str,
        statement: Statement,
        rule: Rule,
        premises: &[StepId],
        sides: Vec<SideCondition>,
    ) -> StepId {
        let subject = subject.to_string();
        let premises = premises.to_vec();
        let supposing = self.supposing.clone();
        self.derivation.add(Step { subject, statement, rule, premises, sides, supposing })
    }

    /// The positivities and non-zero divisors that make the expressions, and their derivatives, well defined.
    pub(super) fn sides<'e>(&self, expressions: impl Iterator<Item = &'e Expression>) -> Vec<SideCondition> {
        let mut walk = Walk { field: self.field, seen: FxHashSet::default(), found: Vec::new() };
        let mut functions: FxHashSet<FunctionId> = FxHashSet::default();
        for factor in expressions.flat_map(|e| &e.0).flat_map(|product| &product.factors) {
            match factor {
                Factor::Element(e) => walk.element(e),
                Factor::Function(f) | Factor::Slope(f, _) | Factor::LogSlope(f, _) | Factor::Euler(f, _) => {
                    if functions.insert(*f)
                        && let Some(function) = self.derivation.function(*f)
                    {
                        walk.element(&function.element);
                    }
                }
            }
        }
        walk.found
    }
}

/// Ends a supposition, however it ends.
struct Scope<'a, 'f> {
    prover: &'a mut Prover<'f>,
    outside: Rc<Vec<(Expression, Relation)>>,
}

impl Drop for Scope<'_, '_> {
    fn drop(&mut self) {
        self.prover.supposing = self.outside.clone();
    }
}

/// Looks through elements for what must be positive or non-zero.
struct Walk<'f> {
    field: &'f Field,
    seen: FxHashSet<(Var, bool)>,
    found: Vec<SideCondition>,
}

impl Walk<'_> {
    fn element(&mut self, e: &Element) {
        let e = self.field.current(e);
        let mut powers: Vec<(Var, bool)> = Vec::new();
        for (monomial, _) in e.raw_terms() {
            for (var, exponent) in monomial.iter() {
                let key = (var, exponent < 0);
                if !self.seen.contains(&key) {
                    self.seen.insert(key);
                    powers.push(key);
                }
            }
        }
        for (var, divides) in powers {
            self.variable(var, divides);
        }
    }

    fn variable(&mut self, var: Var, divides: bool) {
        let itself = Poly::monomial(Monomial::power(var, 1));
        match &*self.field.kind(var) {
            Kind::Symbol(role) if role.is_positive() => return,
            Kind::Symbol(_) | Kind::Ln(Base::Number(_)) => {}
            Kind::Exp(argument) => return self.element(argument),
            Kind::Ln(Base::Var(base)) => {
                self.element(&Poly::var(*base));
                self.add(Poly::var(*base), Relation::Positive);
            }
            Kind::Ln(Base::Sum(value)) => {
                self.element(value);
                self.add((**value).clone(), Relation::Positive);
            }
            Kind::Sum { value, root: 1 } => self.element(value),
            Kind::Sum { value, .. } => {
                self.element(value);
                return self.add((**value).clone(), Relation::Positive);
            }
            Kind::Special(function, argument) => {
                self.element(argument);
                match function {
                    Special::Ei => self.add((**argument).clone(), Relation::NonZero),
                    Special::LambertW => self.add(&itself + &Poly::one(), Relation::Positive),
                    Special::Erf | Special::Erfi => {}
                }
            }
        }
        if divides {
            self.add(itself, Relation::NonZero);
        }
    }

    fn add(&mut self, element: Element, relation: Relation) {
        let element = self.field.current(&element);
        let trivial = element.as_var().is_some_and(|v| self.field.role(v).is_some_and(|role| role.is_positive()));
        let constant = element.as_constant().is_some_and(|q| q > rational(0, 1));
        if trivial || constant || self.found.iter().any(|s| s.element == element && s.relation == relation) {
            return;
        }
        let discharged = holds(self.field, &element, relation);
        self.found.push(SideCondition { element, relation, discharged });
    }
}

/// Whether the relation follows from the facts.
pub(super) fn holds(field: &Field, element: &Element, relation: Relation) -> bool {
    use crate::algebra::sign::Sign;
    let sign = field.sign(element);
    match relation {
        Relation::Positive => sign == Sign::Positive,
        Relation::NonNegative => sign.is_nonnegative(),
        Relation::NonZero => sign.excludes_zero(),
    }
}
