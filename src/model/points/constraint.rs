//! What an admissible point must satisfy, and what that leaves for one symbol once the others have values.

use std::collections::BTreeMap;

use num_traits::{One, Signed, Zero};

use crate::algebra::evaluation::Point;
use crate::algebra::field::{Field, Relation};
use crate::algebra::generator::{Element, Kind};
use crate::algebra::monomial::Var;
use crate::algebra::number::Rational;
use crate::language::Comparison;
use crate::model::{DomainCondition, Model};

use super::exact::Values;

/// An element that stands in a relation to zero.
#[derive(Clone)]
pub(super) struct Constraint {
    pub element: Element,
    /// The element with short sums put back, for bounds.
    open: Element,
    pub relation: Relation,
    /// The symbols that it is built from.
    pub symbols: Vec<Var>,
    /// Σ cᵢ vᵢ + constant, where it is linear in symbols with rational coefficients.
    pub linear: Option<(BTreeMap<Var, Rational>, Rational)>,
}

/// Elements with more terms are not expanded to find bounds.
const MOST_OPENED: usize = 100;

impl Constraint {
    /// The constraint that the element stands in the relation to zero.
    pub fn new(field: &Field, element: &Element, relation: Relation) -> Constraint {
        let element = field.current(element);
        let symbols = field.symbols_of(&element);
        let open = if element.len() <= MOST_OPENED { field.expand(&element) } else { element.clone() };
        let linear = linear(field, &open).filter(|_| relation != Relation::NonZero);
        Constraint { element, open, relation, symbols, linear }
    }

    /// All constraints that the model itself states.
    pub fn of_model(model: &Model) -> Vec<Constraint> {
        let field = &model.field;
        let mut all = Vec::new();
        for assumption in &model.assumptions {
            let (left, right) = (&assumption.left, &assumption.right);
            let (element, relation) = match assumption.relation {
                Comparison::Equal => continue,
                Comparison::NotEqual => (left - right, Relation::NonZero),
                Comparison::Less => (right - left, Relation::Positive),
                Comparison::LessEqual => (right - left, Relation::NonNegative),
                Comparison::Greater => (left - right, Relation::Positive),
                Comparison::GreaterEqual => (left - right, Relation::NonNegative),
            };
            all.push(Constraint::new(field, &element, relation));
        }
        for condition in &model.domain {
            let relation = match condition {
                DomainCondition::Positive(_) => Relation::Positive,
                DomainCondition::NonZero(_) => Relation::NonZero,
            };
            all.push(Constraint::new(field, condition.element(), relation));
        }
        all
    }

    /// The symbol that is last in the given order.
    pub fn last(&self, order: &BTreeMap<Var, usize>) -> Option<Var> {
        self.symbols.iter().filter(|v| order.contains_key(v)).max_by_key(|v| order[*v]).copied()
    }

    /// The bound on one symbol when all others have values, if the constraint is linear in it.
    pub fn bound_on(&self, field: &Field, var: Var, point: &Point) -> Option<Bound> {
        let e = &self.open;
        if self.relation == Relation::NonZero || e.degree(var) != 1 || e.low_degree(var) != 0 {
            return None;
        }
        if e.vars().into_iter().any(|v| v != var && field.depends_on(&Element::var(v), var)) {
            return None;
        }
        let values = Values::at(field, point);
        let mut slope = Rational::zero();
        let mut rest = Rational::zero();
        for (exponent, coefficient) in e.coefficients(var) {
            let value = values.about(&coefficient)?;
            if exponent == 1 { slope = value } else { rest = value }
        }
        Bound::from(slope, rest, self.relation == Relation::Positive)
    }

    /// The bound on one symbol from a linear constraint in which other symbols may still be open within known ranges;
    /// what is left is shared evenly among them.
    pub fn shared_bound(&self, var: Var, point: &Point, ranges: &BTreeMap<Var, Range>) -> Option<Bound> {
        let (terms, constant) = self.linear.as_ref()?;
        let slope = terms.get(&var)?;
        let mut rest = constant.clone();
        let mut open = 0u32;
        for (other, coefficient) in terms.iter().filter(|(other, _)| **other != var) {
            if let Some(value) = point.get(other) {
                rest += value * coefficient;
                continue;
            }
            let range = ranges.get(other)?;
            let best = if coefficient.is_positive() { range.high.as_ref()? } else { range.low.as_ref()? };
            rest += best * coefficient;
            open += 1;
        }
        let mut bound = Bound::from(slope.clone(), rest, self.relation == Relation::Positive)?;
        bound.shares = open + 1;
        Some(bound)
    }
}

/// One side of a range.
#[derive(Clone, Debug)]
pub(super) struct Bound {
    pub value: Rational,
    pub is_upper: bool,
    pub strict: bool,
    /// Among how many symbols the distance to the bound is to be shared.
    pub shares: u32,
}

impl Bound {
    /// slope · x + rest > 0 (or ≥ 0), as a bound on x.
    fn from(slope: Rational, rest: Rational, strict: bool) -> Option<Bound> {
        if slope.is_zero() {
            return None;
        }
        Some(Bound { value: -rest / &slope, is_upper: slope.is_negative(), strict, shares: 1 })
    }
}

/// The values that are left for a symbol.
#[derive(Clone, Debug, Default)]
pub(super) struct Range {
    pub low: Option<Rational>,
    pub high: Option<Rational>,
    /// Among how many symbols the room up to the nearer bound is to be shared.
    pub shares: u32,
    /// Whether an end that both bounds share may itself be taken.
    pub closed: bool,
}

impl Range {
    /// The range of all numbers, or of the positive ones.
    pub fn of(positive: bool) -> Range {
        Range { low: positive.then(Rational::zero), high: None, shares: 1, closed: !positive }
    }

    /// Narrows the range.
    pub fn narrow(&mut self, bound: &Bound) {
        let side = if bound.is_upper { &mut self.high } else { &mut self.low };
        let tighter = |old: &Rational| if bound.is_upper { bound.value < *old } else { bound.value > *old };
        if side.as_ref().is_none_or(tighter) {
            *side = Some(bound.value.clone());
            self.closed = !bound.strict;
        }
        self.shares = self.shares.max(bound.shares);
    }

    /// Whether a number lies strictly inside.
    pub fn holds(&self, x: &Rational) -> bool {
        self.low.as_ref().is_none_or(|low| x > low) && self.high.as_ref().is_none_or(|high| x < high)
    }
}

fn linear(field: &Field, e: &Element) -> Option<(BTreeMap<Var, Rational>, Rational)> {
    let mut terms = BTreeMap::new();
    let mut constant = Rational::zero();
    for (monomial, coefficient) in e.terms() {
        let mut powers = monomial.iter();
        match (powers.next(), powers.next()) {
            (None, _) => constant = coefficient,
            (Some((var, 1)), None) if matches!(&*field.kind(var), Kind::Symbol(_)) => {
                terms.insert(var, coefficient);
            }
            _ => return None,
        }
    }
    Some((terms, constant))
}

/// The ranges that constraints on single symbols leave.
pub(super) fn static_ranges(field: &Field, constraints: &[Constraint]) -> BTreeMap<Var, Range> {
    let mut ranges: BTreeMap<Var, Range> = BTreeMap::new();
    for constraint in constraints {
        let Some((terms, constant)) = &constraint.linear else { continue };
        let mut entries = terms.iter();
        if let (Some((var, slope)), None) = (entries.next(), entries.next())
            && let Some(bound) = Bound::from(slope.clone(), constant.clone(), constraint.relation == Relation::Positive)
        {
            ranges.entry(*var).or_insert_with(|| own_range(field, *var)).narrow(&bound);
        }
    }
    ranges
}

/// What the role of a symbol leaves.
pub(super) fn own_range(field: &Field, var: Var) -> Range {
    Range::of(field.role(var).is_some_and(|role| role.is_positive()))
}

/// A step inside a range: the part of its length that one symbol among `shares` takes.
pub(super) fn share_of(range: &Range) -> Rational {
    Rational::new(1.into(), (range.shares.max(1) + 1).into()).min(Rational::one())
}
