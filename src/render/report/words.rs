//! Small pieces of sentences: lists, points, numbers.

use crate::algebra::evaluation::Point;
use crate::algebra::generator::Element;
use crate::algebra::interval::Interval;
use crate::algebra::monomial::Var;
use crate::model::{Coverage, Model};
use crate::proof::Value;
use crate::render::document::{Equation, Inline, Relation};
use crate::render::expression::Expression;
use crate::render::formula_text::plain_expression;
use crate::render::notation::Notation;

/// Words.
pub fn text(words: impl Into<String>) -> Inline {
    Inline::text(words)
}

/// `left = right` within the text.
pub fn equation(left: impl Into<Expression>, right: impl Into<Expression>) -> Inline {
    relation(left, Relation::Equal, right)
}

/// `left relation right` within the text.
pub fn relation(left: impl Into<Expression>, relation: Relation, right: impl Into<Expression>) -> Inline {
    Inline::Math(Box::new(Equation::new(left, relation, right)))
}

/// Pieces with commas between them, and `last` (" and ", " or ") before the last one.
pub fn listed(pieces: Vec<Vec<Inline>>, last: &str) -> Vec<Inline> {
    let count = pieces.len();
    let mut out = Vec::new();
    for (position, piece) in pieces.into_iter().enumerate() {
        if position > 0 {
            out.push(text(if position + 1 == count { last } else { ", " }));
        }
        out.extend(piece);
    }
    out
}

/// Words with commas between them and an "and" before the last.
pub fn enumerated(names: &[String]) -> String {
    match names {
        [] => String::new(),
        [only] => only.clone(),
        [first @ .., last] => format!("{} and {last}", first.join(", ")),
    }
}

/// A small number in letters.
pub fn counted(n: usize) -> String {
    const WORDS: [&str; 13] =
        ["no", "one", "two", "three", "four", "five", "six", "seven", "eight", "nine", "ten", "eleven", "twelve"];
    WORDS.get(n).map_or_else(|| n.to_string(), |word| (*word).to_string())
}

/// The most coordinates of a point that are written out in running text.
const MOST_COORDINATES: usize = 14;

/// The coordinates of a point in the order of declaration: prices, income, the rest.
pub fn point(notation: &Notation<'_>, at: &Point) -> Vec<Inline> {
    let declared: Vec<Var> = declared(notation.model()).into_iter().filter(|var| at.contains_key(var)).collect();
    let shown = if declared.len() > MOST_COORDINATES { MOST_COORDINATES } else { declared.len() };
    let coordinate = |var: &Var| {
        let value = at.get(var).cloned().unwrap_or_default();
        vec![equation(notation.variable(*var), Expression::Number(value))]
    };
    let mut pieces: Vec<Vec<Inline>> = declared[..shown].iter().map(coordinate).collect();
    if shown < declared.len() {
        pieces.push(vec![text(format!("and {} more coordinates (see the JSON)", declared.len() - shown))]);
    }
    listed(pieces, ", ")
}

/// Every declared symbol, prices and income first.
pub fn declared(model: &Model) -> Vec<Var> {
    let others = match &model.coverage {
        Coverage::Others(others) => others.clone(),
        _ => Vec::new(),
    };
    let parameters = model.parameters.iter().map(|parameter| parameter.var);
    let quantities = model.quantities.iter().copied().flatten();
    let utility = model.speaks_of_utility().then_some(model.utility);
    model
        .prices
        .iter()
        .copied()
        .chain(others)
        .chain(model.income)
        .chain(parameters)
        .chain(quantities)
        .chain(utility)
        .collect()
}

/// `left = value`; where the value is not rational, its formula if that is short, and bounds.
pub fn value(left: impl Into<Expression>, value: &Value) -> Vec<Inline> {
    let left = left.into();
    match value {
        Value::Exact(value) => vec![equation(left, Expression::Number(value.clone()))],
        Value::Enclosed { formula, from, to } => {
            let bounds = Interval::from_rational(from, BITS).hull(&Interval::from_rational(to, BITS));
            let (low, high) = bounds.to_decimal_bounds(DIGITS);
            let between = text(format!(" between {low} and {high}"));
            let exact = formula.as_ref().map(Expression::from);
            match exact.filter(|exact| plain_expression(exact).len() <= SHORT_VALUE) {
                Some(exact) => vec![equation(left, exact), text(", which lies"), between],
                None => vec![Inline::math(left), text(" lies"), between],
            }
        }
    }
}

/// The precision and the digits of bounds in print.
const BITS: u32 = 96;
const DIGITS: u32 = 6;
/// The longest formula for a value, in characters.
const SHORT_VALUE: usize = 60;

/// An element, where it takes at most `longest` characters in print.
pub fn short(notation: &Notation<'_>, e: &Element, longest: usize) -> Option<Expression> {
    if e.len() > longest / 3 {
        return None;
    }
    let expression = notation.element(e);
    (plain_expression(&expression).len() <= longest).then_some(expression)
}
