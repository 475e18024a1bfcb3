//! Admissible points: exact rational values for every declared name that satisfy every assumption.
//!
//! Symbols get their values one after another, parameters first and income last. Each is chosen within the bounds that
//! the constraints leave once the symbols before it are fixed, and every constraint is checked, exactly or by
//! enclosure, as soon as all of its symbols have values.

mod constraint;
mod exact;
mod numbers;

use std::collections::{BTreeMap, BTreeSet};

use num_traits::Signed;

use crate::algebra::budget;
use crate::algebra::evaluation::Point;
use crate::algebra::field::{Field, Relation};
use crate::algebra::generator::{Element, Kind, Role};
use crate::algebra::monomial::Var;
use crate::algebra::number::Rational;

use super::Model;
use constraint::{Constraint, Range, own_range, static_ranges};
use exact::Values;
use numbers::{Dice, Recipe, for_income, for_parameter, for_price};

/// How many numbers are tried for one symbol before a recipe is given up.
const MOST_TRIALS: usize = 8;

/// A deterministic stream of admissible points. It ends when its recipes are used up.
pub struct PointSearch<'a> {
    model: &'a Model,
    positive: Vec<Element>,
    plan: Option<Plan>,
    next: usize,
    seen: BTreeSet<Point>,
}

/// What is worked out once for all points.
struct Plan {
    constraints: Vec<Constraint>,
    /// The free symbols in the order in which they get values.
    order: Vec<Var>,
    /// The constraints that can be checked once this symbol has its value.
    complete: BTreeMap<Var, Vec<usize>>,
    /// Linear constraints that later symbols belong to as well.
    shared: BTreeMap<Var, Vec<usize>>,
    ranges: BTreeMap<Var, Range>,
    /// The power that makes the roots of a symbol exact.
    powers: BTreeMap<Var, u32>,
    /// Constraints without free symbols hold.
    possible: bool,
    /// Whether the file speaks of the utility level.
    utility_matters: bool,
}

impl<'a> PointSearch<'a> {
    pub(super) fn new(model: &'a Model) -> PointSearch<'a> {
        PointSearch { model, positive: Vec::new(), plan: None, next: 0, seen: BTreeSet::new() }
    }

    /// Only points at which these elements are positive, too (quantities demanded, say).
    pub fn with_positive(mut self, elements: &[Element]) -> PointSearch<'a> {
        self.positive.extend_from_slice(elements);
        self.plan = None;
        self
    }
}

impl Iterator for PointSearch<'_> {
    type Item = Point;

    fn next(&mut self) -> Option<Point> {
        let plan = self.plan.get_or_insert_with(|| Plan::new(self.model, &self.positive));
        if !plan.possible {
            return None;
        }
        while let Some(recipe) = Recipe::nth(self.next) {
            self.next += 1;
            let found = plan.sample(self.model, &recipe, self.next as u64);
            if let Some(point) = found.filter(|point| self.seen.insert(point.clone())) {
                return Some(point);
            }
        }
        None
    }
}

impl Plan {
    fn new(model: &Model, positive: &[Element]) -> Plan {
        let field = &model.field;
        let mut constraints = Constraint::of_model(model);
        constraints.extend(positive.iter().map(|e| Constraint::new(field, e, Relation::Positive)));
        let order = free_symbols(model);
        let determined: Vec<Var> =
            if model.demands.is_empty() { Vec::new() } else { model.quantities.iter().flatten().copied().collect() };
        let places: BTreeMap<Var, usize> = order.iter().enumerate().map(|(place, var)| (*var, place)).collect();
        let mut complete: BTreeMap<Var, Vec<usize>> = BTreeMap::new();
        let mut shared: BTreeMap<Var, Vec<usize>> = BTreeMap::new();
        let mut possible = true;
        for (index, constraint) in constraints.iter().enumerate() {
            // what is demanded follows from the rest; the caller checks it at the whole point
            if constraint.symbols.iter().any(|var| determined.contains(var)) {
                continue;
            }
            let Some(last) = constraint.last(&places) else {
                possible &= Values::at(field, &Point::new()).satisfies(&constraint.element, constraint.relation);
                continue;
            };
            complete.entry(last).or_default().push(index);
            if constraint.linear.is_some() {
                let earlier = constraint.symbols.iter().filter(|var| **var != last);
                earlier.for_each(|var| shared.entry(*var).or_default().push(index));
            }
        }
        let mut ranges = static_ranges(field, &constraints);
        for var in &order {
            ranges.entry(*var).or_insert_with(|| own_range(field, *var));
        }
        let powers = order.iter().map(|var| (*var, root_power(field, *var))).collect();
        let utility_matters = model.speaks_of_utility();
        Plan { constraints, order, complete, shared, ranges, powers, possible, utility_matters }
    }

    /// A point by this recipe, if it leads to one.
    fn sample(&self, model: &Model, recipe: &Recipe, seed: u64) -> Option<Point> {
        let field = &model.field;
        let mut dice = Dice::new(seed);
        let mut point = Point::new();
        for (place, var) in self.order.iter().enumerate() {
            budget::spend(1 + self.complete.get(var).map_or(0, Vec::len) as u64);
            let range = self.range(field, *var, &point);
            let power = self.powers.get(var).copied().unwrap_or(1);
            let numbers = match field.role(*var) {
                Some(Role::Income) => for_income(recipe, power, &range, &mut dice),
                Some(Role::Price | Role::Others | Role::Quantity) => for_price(recipe, place, power, &range, &mut dice),
                Some(Role::Utility) if !self.utility_matters => vec![Rational::from_integer(1.into())],
                _ => for_parameter(recipe, place, &range, &mut dice),
            };
            let fits = |value: &Rational| {
                point.insert(*var, value.clone());
                self.holds(field, *var, &point)
            };
            numbers.into_iter().take(MOST_TRIALS).find(fits)?;
        }
        complete(model, point)
    }

    fn range(&self, field: &Field, var: Var, point: &Point) -> Range {
        let mut range = self.ranges.get(&var).cloned().unwrap_or_default();
        for index in self.shared.get(&var).into_iter().flatten() {
            if let Some(bound) = self.constraints[*index].shared_bound(var, point, &self.ranges) {
                range.narrow(&bound);
            }
        }
        for index in self.complete.get(&var).into_iter().flatten() {
            if let Some(bound) = self.constraints[*index].bound_on(field, var, point) {
                range.narrow(&bound);
            }
        }
        range
    }

    /// Whether the constraints hold that this symbol was the last to wait for.
    fn holds(&self, field: &Field, var: Var, point: &Point) -> bool {
        let Some(indices) = self.complete.get(&var) else { return true };
        let values = Values::at(field, point);
        indices.iter().all(|index| {
            let constraint = &self.constraints[*index];
            values.satisfies(&constraint.element, constraint.relation)
        })
    }
}

/// The symbols that are not determined by others: parameters, then prices, then quantities, income and utility.
fn free_symbols(model: &Model) -> Vec<Var> {
    let parameters = model.parameters.iter().filter(|p| p.eliminated.is_none()).map(|p| p.var);
    let others = match &model.coverage {
        super::Coverage::Others(others) => others.as_slice(),
        _ => &[],
    };
    let quantities = model.quantities.iter().flatten().filter(|_| model.demands.is_empty());
    let prices = model.prices.iter().chain(others);
    let states = prices.chain(quantities).chain(&model.income).chain([&model.utility]);
    parameters.chain(states.copied()).collect()
}

/// n where the field holds the n-th root of the symbol.
fn root_power(field: &Field, var: Var) -> u32 {
    let current = field.current(&Element::var(var));
    match current.as_monomial().map(|(_, monomial)| monomial.iter().next()) {
        Some(Some((_, exponent))) if exponent > 1 => exponent.unsigned_abs(),
        _ => 1,
    }
}

/// Values for what the free symbols determine: eliminated parameters, and quantities where they are rational.
pub(super) fn complete(model: &Model, mut point: Point) -> Option<Point> {
    let mut determined = Vec::new();
    {
        let values = Values::at(&model.field, &point);
        for parameter in &model.parameters {
            if let Some(element) = &parameter.eliminated {
                determined.push((parameter.var, values.exact(element)?));
            }
        }
        for (quantity, demand) in model.quantities.iter().zip(&model.demands) {
            let value = quantity.and_then(|var| Some((var, values.exact(&demand.quantity)?)));
            determined.extend(value);
        }
    }
    point.extend(determined);
    Some(point)
}

pub(super) fn is_admissible(model: &Model, point: &Point) -> bool {
    let field = &model.field;
    // a demanded quantity has no role of its own: its demand decides its sign
    let free = |role: Role| !role.is_positive() || role == Role::Quantity && !model.demands.is_empty();
    let in_role = |(var, value): (&Var, &Rational)| match &*field.kind(*var) {
        Kind::Symbol(role) => free(*role) || value.is_positive(),
        _ => false,
    };
    let values = Values::at(field, point);
    let consistent = |parameter: &super::Parameter| match &parameter.eliminated {
        Some(element) => values.exact(element).as_ref() == point.get(&parameter.var),
        None => point.contains_key(&parameter.var),
    };
    point.iter().all(in_role)
        && model.parameters.iter().all(consistent)
        && Constraint::of_model(model).iter().all(|c| values.satisfies(&c.element, c.relation))
}
