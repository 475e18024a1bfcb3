//! From formulas to elements of the field.
//!
//! The body of a sum is computed under an environment of goods, once for each tuple, without copying trees. What an
//! abbreviation or a demanded quantity stands for is computed once and remembered, and so are powers and functions.

use std::cell::{Cell, RefCell};
use std::rc::Rc;

use rustc_hash::FxHashMap;

use crate::algebra::budget;
use crate::algebra::field::Field;
use crate::algebra::generator::{Blocked, Built, Element, Kind, Role, Special};
use crate::algebra::monomial::Var;
use crate::algebra::polynomial::Poly;
use crate::language::{Diagnostic, Function, Source};

use super::messages;
use super::names::{AbbreviationId, FamilyId};
use super::resolve::{Node, NodeKind, OverNode, Slot, tuples};
use super::script::{Defined, Script};
use super::symbols::Symbols;
use super::system::{Demand, Form};

/// The computation failed, and the message is written.
#[derive(Clone, Copy, Debug)]
pub(super) struct Failed;

/// A computed formula.
pub(super) type Computed = Result<Rc<Element>, Failed>;

/// What is known of something that is computed once.
#[derive(Clone, Default)]
enum Memo<T> {
    #[default]
    Open,
    Busy,
    Closed(Result<T, Failed>),
}

/// A logarithm that comes out as a longer sum than this is kept as one.
const LONG_SUM: usize = 16;
/// Formulas nested more deeply than this, through each other, are refused.
const MOST_FRAMES: u32 = 1000;
/// What a step from one formula into another counts for.
const FRAMES_OF_REFERENCE: u32 = 3;

/// Computes formulas in a field.
pub(super) struct Evaluator<'s> {
    pub field: &'s Field,
    pub script: &'s Script,
    pub symbols: &'s Symbols,
    pub source: &'s Source,
    /// Abbreviations that are sums are given the author's names.
    pub naming: Cell<bool>,
    /// Quantities stand for themselves, not for what is demanded.
    plain_quantities: Cell<bool>,
    /// What stands for a symbol that a value or an assumed equation replaces.
    replaced: RefCell<FxHashMap<Var, Rc<Element>>>,
    abbreviations: RefCell<Vec<Vec<Memo<Rc<Element>>>>>,
    demands: RefCell<Vec<Memo<Rc<Demand>>>>,
    calls: RefCell<FxHashMap<(Function, Element), Rc<Element>>>,
    powers: RefCell<FxHashMap<(Element, Element), Rc<Element>>>,
    mistakes: RefCell<Vec<Diagnostic>>,
    frames: Cell<u32>,
}

impl<'s> Evaluator<'s> {
    /// An evaluator that knows nothing yet.
    pub fn new(field: &'s Field, script: &'s Script, symbols: &'s Symbols, source: &'s Source) -> Evaluator<'s> {
        Evaluator {
            field,
            script,
            symbols,
            source,
            naming: Cell::new(false),
            plain_quantities: Cell::new(false),
            replaced: RefCell::default(),
            abbreviations: RefCell::new(vec![Vec::new(); script.abbreviations.len()]),
            demands: RefCell::new(vec![Memo::Open; script.defined.len()]),
            calls: RefCell::default(),
            powers: RefCell::default(),
            mistakes: RefCell::default(),
            frames: Cell::new(0),
        }
    }

    /// Forgets what was computed, since something that it was computed from has changed.
    pub fn forget(&self) {
        self.abbreviations.borrow_mut().iter_mut().for_each(Vec::clear);
        self.demands.borrow_mut().iter_mut().for_each(|memo| *memo = Memo::Open);
        self.calls.borrow_mut().clear();
        self.powers.borrow_mut().clear();
    }

    /// Computes with quantities as variables of their own, as in a direct utility function.
    pub fn in_quantities<T>(&self, work: impl FnOnce() -> T) -> T {
        if self.script.defined.is_empty() {
            return work();
        }
        self.forget();
        self.plain_quantities.set(true);
        let done = work();
        self.plain_quantities.set(false);
        self.forget();
        done
    }

    /// From now on the symbol is written as the element; a sum keeps the symbol's name.
    pub fn replace(&self, var: Var, element: Element) {
        let name = self.field.name(var);
        let element = self.field.named(&element, name.as_deref());
        self.shorten(name.as_deref(), self.field.latex(var).as_deref(), &element);
        self.replaced.borrow_mut().insert(var, Rc::new(element));
    }

    /// Lets reports write an element by the author's name for it: a named sum by itself, a product of powers by a symbol
    /// that stands for it in print only.
    fn shorten(&self, name: Option<&str>, latex: Option<&str>, element: &Element) {
        let Some(name) = name else { return };
        match element.as_var() {
            Some(var) if matches!(*self.field.kind(var), Kind::Sum { .. }) => {
                if self.field.name(var).as_deref() == Some(name) {
                    latex.iter().for_each(|latex| self.field.set_latex(var, latex));
                }
                self.field.shorthand(var, element);
            }
            Some(var) if matches!(*self.field.kind(var), Kind::Symbol(_)) => {}
            _ if element.as_monomial().is_some_and(|(c, _)| num_traits::One::is_one(&c)) => {
                let symbol = self.field.symbol(name, Role::Unknown);
                latex.iter().for_each(|latex| self.field.set_latex(symbol, latex));
                self.field.shorthand(symbol, element);
                self.field.logarithm_shorthand(symbol, element);
            }
            _ => {}
        }
    }

    /// What stands for the symbol, if it is replaced.
    pub fn replacement(&self, var: Var) -> Option<Rc<Element>> {
        self.replaced.borrow().get(&var).cloned()
    }

    /// From now on the symbol is written as the element, also in what stands for other symbols.
    pub fn eliminate(&self, var: Var, element: Element) {
        let with = [(var, element.clone())];
        for held in self.replaced.borrow_mut().values_mut() {
            if self.field.depends_on(held, var)
                && let Ok(fresh) = self.field.substitute(held, &with)
            {
                *held = Rc::new(self.field.reduce(&fresh));
            }
        }
        self.replace(var, element);
    }

    /// Writes a message down, unless one for the same place is there already.
    pub fn report(&self, mistake: Diagnostic) -> Failed {
        let mut mistakes = self.mistakes.borrow_mut();
        if !mistakes.iter().any(|known| known.span == mistake.span) {
            mistakes.push(mistake);
        }
        Failed
    }

    /// The messages so far, in the order of the file.
    pub fn take_mistakes(&self) -> Vec<Diagnostic> {
        let mut all = self.mistakes.take();
        all.sort_by_key(|mistake| mistake.span);
        all
    }

    /// The formula as an element, under an environment of goods.
    pub fn compute(&self, node: &Node, environment: &mut Vec<usize>) -> Computed {
        budget::spend(1);
        if self.frames.get() >= MOST_FRAMES {
            return Err(self.report(messages::too_deep(node.span)));
        }
        self.frames.set(self.frames.get() + 1);
        let result = match &node.kind {
            NodeKind::Number(number) => Ok(Rc::new(Poly::constant(number))),
            NodeKind::Pi => Ok(Rc::new(self.field.pi())),
            NodeKind::Symbol(id, slots) => self.symbol(*id, slots, node, environment),
            NodeKind::Abbreviation(id, slots) => {
                let goods: Vec<usize> = slots.iter().map(|slot| slot.good(environment)).collect();
                self.abbreviation(*id, &goods, Some(node))
            }
            NodeKind::Negative(inner) => self.compute(inner, environment).map(|value| Rc::new(value.neg())),
            NodeKind::Sum(terms) => self.sum(terms, environment),
            NodeKind::Product(factors) => self.product(factors, environment),
            NodeKind::Power(base, exponent) => self.power(node, base, exponent, environment),
            NodeKind::Call(function, argument) => self.call(*function, node, argument, environment),
            NodeKind::Over(over) => self.over(over, environment),
            NodeKind::Faulty => Err(Failed),
        };
        self.frames.set(self.frames.get() - 1);
        result
    }

    fn symbol(&self, id: FamilyId, slots: &[Slot], node: &Node, environment: &[usize]) -> Computed {
        let family = &self.script.declarations.names.families[id.0];
        let place = slots.iter().fold(0, |at, slot| at * self.goods() + slot.good(environment));
        if family.role == Role::Quantity && !self.script.defined.is_empty() && !self.plain_quantities.get() {
            let good = family.good.unwrap_or(place);
            return self.demand(good, Some(node)).map(|demand| Rc::new(demand.quantity.clone()));
        }
        let Some(var) = self.symbols.member(id, place) else { return Err(Failed) };
        Ok(self.replacement(var).unwrap_or_else(|| Rc::new(Poly::var(var))))
    }

    fn goods(&self) -> usize {
        self.script.declarations.names.goods.len()
    }

    #[inline(never)]
    fn sum(&self, terms: &[Node], environment: &mut Vec<usize>) -> Computed {
        let parts: Result<Vec<Element>, Failed> =
            terms.iter().map(|term| self.compute(term, environment).map(Rc::unwrap_or_clone)).collect();
        Ok(Rc::new(Poly::sum(parts?)))
    }

    #[inline(never)]
    fn product(&self, factors: &[(Node, bool)], environment: &mut Vec<usize>) -> Computed {
        let mut product: Option<Rc<Element>> = None;
        for (factor, inverted) in factors {
            let mut value = self.compute(factor, environment)?;
            if *inverted {
                value = Rc::new(self.built(self.field.inverse(&value), factor, environment)?);
            }
            product = Some(match product {
                None => value,
                Some(before) => Rc::new(self.field.product(&before, &value)),
            });
        }
        Ok(product.unwrap_or_else(|| Rc::new(Poly::one())))
    }

    #[inline(never)]
    fn power(&self, node: &Node, base: &Node, exponent: &Node, environment: &mut Vec<usize>) -> Computed {
        let below = self.compute(base, environment)?;
        let above = self.compute(exponent, environment)?;
        let key = (Rc::unwrap_or_clone(below), Rc::unwrap_or_clone(above));
        let known = self.powers.borrow().get(&key).cloned();
        if let Some(known) = known {
            return Ok(known);
        }
        let value = match self.field.power(&key.0, &key.1) {
            Ok(value) => Rc::new(value),
            Err(Blocked::DivisionByZero) => return Err(self.report(messages::division_by_zero(self, base))),
            Err(blocked) => return Err(self.report(messages::power(self, &blocked, node, base, environment))),
        };
        self.powers.borrow_mut().insert(key, value.clone());
        Ok(value)
    }

    #[inline(never)]
    fn call(&self, function: Function, node: &Node, argument: &Node, environment: &mut Vec<usize>) -> Computed {
        let argument_value = Rc::unwrap_or_clone(self.compute(argument, environment)?);
        let key = (function, argument_value);
        let known = self.calls.borrow().get(&key).cloned();
        if let Some(known) = known {
            return Ok(known);
        }
        let value = &key.1;
        let built = match function {
            Function::Ln => self.field.ln(value),
            Function::Exp => self.field.exp(value),
            Function::Sqrt => self.field.sqrt(value),
            Function::Ei => self.field.special(Special::Ei, value),
            Function::Erf => self.field.special(Special::Erf, value),
            Function::Erfi => self.field.special(Special::Erfi, value),
            Function::LambertW => self.field.special(Special::LambertW, value),
        };
        let value = match built {
            Ok(value) if self.naming.get() && value.len() > LONG_SUM => Rc::new(self.field.named(&value, None)),
            Ok(value) => Rc::new(value),
            Err(blocked) => {
                return Err(self.report(messages::call(self, &blocked, function, node, argument, environment)));
            }
        };
        self.calls.borrow_mut().insert(key, value.clone());
        Ok(value)
    }

    #[inline(never)]
    fn over(&self, over: &OverNode, environment: &mut Vec<usize>) -> Computed {
        let mut parts = Vec::new();
        let mut outcome = Ok(());
        over.each(environment, &mut |environment| match self.compute(&over.body, environment) {
            Ok(value) => parts.push(Rc::unwrap_or_clone(value)),
            Err(failed) => outcome = Err(failed),
        });
        outcome?;
        if over.product {
            let product = parts.iter().fold(Poly::one(), |product, part| self.field.product(&product, part));
            return Ok(Rc::new(product));
        }
        Ok(Rc::new(Poly::sum(parts)))
    }

    /// The result of the field, with a message at the node where it is blocked.
    pub fn built(&self, built: Built, node: &Node, environment: &[usize]) -> Result<Element, Failed> {
        built.map_err(|blocked| self.report(messages::blocked(self, &blocked, node, environment)))
    }

    /// What an abbreviation stands for; `from` is the reference that asks.
    pub fn abbreviation(&self, id: AbbreviationId, goods: &[usize], from: Option<&Node>) -> Computed {
        let names = &self.script.declarations.names;
        let place = goods.iter().fold(0, |at, good| at * self.goods() + good);
        let size = names.family_size(goods.len()).unwrap_or(0);
        match self.abbreviation_memo(id, place, size) {
            Memo::Closed(result) => return result,
            Memo::Busy => {
                let span = from.map_or(names.abbreviations[id.0].span, |node| node.span);
                return Err(self.report(messages::circular(span, &names.abbreviations[id.0].name)));
            }
            Memo::Open => {}
        }
        let node = &self.script.abbreviations[id.0];
        self.frames.set(self.frames.get() + FRAMES_OF_REFERENCE);
        let result = self.compute(node, &mut goods.to_vec()).map(|value| {
            if !self.naming.get() {
                return value;
            }
            let name = names.member_name(&names.abbreviations[id.0].name, goods);
            let value = self.field.named(&value, Some(&name));
            self.shorten(Some(&name), names.abbreviations[id.0].latex.as_deref(), &value);
            Rc::new(value)
        });
        self.frames.set(self.frames.get() - FRAMES_OF_REFERENCE);
        if let Some(slot) = self.abbreviations.borrow_mut()[id.0].get_mut(place) {
            *slot = Memo::Closed(result.clone());
        }
        result
    }

    /// Computes all members of an abbreviation; what is wrong with them is reported.
    pub fn compute_abbreviation(&self, id: AbbreviationId) {
        let names = &self.script.declarations.names;
        for goods in tuples(self.goods(), names.abbreviations[id.0].arity) {
            if self.abbreviation(id, &goods, None).is_err() {
                return;
            }
        }
    }

    /// The memo of an abbreviation; an open one is busy from now on.
    fn abbreviation_memo(&self, id: AbbreviationId, place: usize, size: usize) -> Memo<Rc<Element>> {
        let mut all = self.abbreviations.borrow_mut();
        let family = &mut all[id.0];
        if family.is_empty() {
            family.resize(size, Memo::Open);
        }
        match family.get_mut(place) {
            Some(slot @ Memo::Open) => {
                *slot = Memo::Busy;
                Memo::Open
            }
            Some(slot) => slot.clone(),
            None => Memo::Closed(Err(Failed)),
        }
    }

    /// The demand for a good; `from` is the reference that asks.
    pub fn demand(&self, good: usize, from: Option<&Node>) -> Result<Rc<Demand>, Failed> {
        let memo = match self.demands.borrow_mut().get_mut(good) {
            Some(slot @ Memo::Open) => {
                *slot = Memo::Busy;
                Memo::Open
            }
            Some(slot) => slot.clone(),
            None => Memo::Closed(Err(Failed)),
        };
        match memo {
            Memo::Closed(result) => return result,
            Memo::Busy => {
                let name = self.script.declarations.names.goods[good].clone();
                let span = from.map_or_else(Default::default, |node| node.span);
                return Err(self.report(messages::circular_quantity(span, &name)));
            }
            Memo::Open => {}
        }
        self.frames.set(self.frames.get() + FRAMES_OF_REFERENCE);
        let result = self.define(good).map(Rc::new);
        self.frames.set(self.frames.get() - FRAMES_OF_REFERENCE);
        self.demands.borrow_mut()[good] = Memo::Closed(result.clone());
        result
    }

    fn define(&self, good: usize) -> Result<Demand, Failed> {
        let (form, formula, node) = match &self.script.defined[good] {
            Defined::Rest => (Form::Rest, self.left_over(good)?, None),
            Defined::By(place, environment) => {
                let definition = &self.script.definitions[*place];
                let formula = self.compute(&definition.node, &mut environment.clone())?;
                (definition.form, Rc::unwrap_or_clone(formula), Some(&definition.node))
            }
        };
        let (Some(price), Some(income)) = (self.symbols.price(good), self.symbols.income()) else { return Err(Failed) };
        if self.field.depends_on(&formula, self.symbols.utility()) {
            let node = node.ok_or(Failed)?;
            return Err(self.report(messages::utility_in_demand(node.span)));
        }
        let (price, income) = (Poly::var(price), Poly::var(income));
        let of = |e: &Element, by: &Element| self.field.quotient(e, by).map_err(|_| Failed);
        let outlay = match form {
            Form::Demand => self.field.product(&formula, &price),
            Form::Share => self.field.product(&formula, &income),
            Form::Outlay | Form::Rest => formula.clone(),
            Form::LogDemand => {
                let node = node.ok_or(Failed)?;
                let quantity = self.built(self.field.exp(&formula), node, &[])?;
                self.field.product(&quantity, &price)
            }
        };
        let quantity = if form == Form::Demand { formula.clone() } else { of(&outlay, &price)? };
        let share = if form == Form::Share { formula.clone() } else { of(&outlay, &income)? };
        Ok(Demand { form, formula, quantity, outlay, share })
    }

    /// Income less what is spent on the other goods.
    fn left_over(&self, good: usize) -> Result<Element, Failed> {
        let income = self.symbols.income().ok_or(Failed)?;
        let others = (0..self.goods()).filter(|other| *other != good);
        let mut parts = vec![Poly::var(income)];
        for other in others {
            parts.push(self.demand(other, None)?.outlay.neg());
        }
        Ok(Poly::sum(parts))
    }
}

impl OverNode {
    /// Visits every tuple of goods, with the tuple at the end of the environment.
    pub fn each(&self, environment: &mut Vec<usize>, visit: &mut dyn FnMut(&mut Vec<usize>)) {
        let depth = environment.len();
        let except = self.except.map(|slot| slot.good(environment));
        self.each_from(self.binders, except, environment, visit);
        environment.truncate(depth);
    }

    fn each_from(
        &self,
        left: usize,
        except: Option<usize>,
        environment: &mut Vec<usize>,
        visit: &mut dyn FnMut(&mut Vec<usize>),
    ) {
        if left == 0 {
            visit(environment);
            return;
        }
        for good in self.members.iter().filter(|good| Some(**good) != except) {
            budget::spend(1);
            environment.push(*good);
            self.each_from(left - 1, except, environment, visit);
            environment.pop();
        }
    }
}
