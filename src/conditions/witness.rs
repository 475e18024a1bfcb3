//! The search for an admissible point at which an identity fails.

use std::cmp::Ordering;

use crate::algebra::budget;
use crate::algebra::evaluation::Point;
use crate::model::Model;
use crate::proof::{Equation, Identities, Label, Prover, Refuted, Residual, Value, exact_value};

/// How many points are looked at.
const MOST_POINTS: usize = 240;
/// How many differences are looked at, the shortest first.
const MOST_RESIDUALS: usize = 12;
/// How many points are worth a full evaluation where the quick one says nothing.
const STUBBORN_POINTS: usize = 6;
/// How many failures are looked through for one with a rational value.
const MOST_FAILURES: usize = 5;
/// The work that one evaluation may take.
const WORK: u64 = 20_000_000;
/// The precision of the quick evaluation.
const QUICK: u32 = 64;

/// A point at which one of the equations fails, if possible with a rational value. `shown` gives the equation that a
/// difference belongs to.
pub(super) fn against(
    model: &Model,
    prover: &mut Prover<'_>,
    subject: &str,
    residuals: &[Residual],
    shown: &dyn Fn(&Residual) -> Option<Equation>,
) -> Option<Refuted<Identities>> {
    among(&mut model.points(), model, prover, subject, residuals, shown)
}

/// The same among given points.
pub(super) fn among(
    points: &mut dyn Iterator<Item = Point>,
    model: &Model,
    prover: &mut Prover<'_>,
    subject: &str,
    residuals: &[Residual],
    shown: &dyn Fn(&Residual) -> Option<Equation>,
) -> Option<Refuted<Identities>> {
    let mut shortest: Vec<&Residual> = residuals.iter().collect();
    shortest.sort_by_key(|r| r.element.len());
    shortest.truncate(MOST_RESIDUALS);
    let candidates = failures(points, model, &shortest);
    let is_exact = |(residual, point): &&(&Residual, Point)| {
        let value = budget::attempt(WORK, || exact_value(&model.field, &residual.element, point));
        matches!(value, Ok(Some(Value::Exact(_))))
    };
    let best = candidates.iter().find(is_exact);
    let mut order: Vec<&(&Residual, Point)> = best.into_iter().collect();
    order.extend(&candidates);
    order.into_iter().find_map(|(residual, point)| prover.refute(subject, shown(residual)?, point))
}

/// Differences with admissible points at which they are seen not to vanish.
fn failures<'r>(
    points: &mut dyn Iterator<Item = Point>,
    model: &Model,
    residuals: &[&'r Residual],
) -> Vec<(&'r Residual, Point)> {
    let mut found = Vec::new();
    for (count, point) in points.take(MOST_POINTS).enumerate() {
        let failing = residuals.iter().find(|r| quickly_nonzero(model, r, &point));
        let failing = failing.or_else(|| {
            let stubborn = count < STUBBORN_POINTS;
            residuals.iter().find(|r| stubborn && slowly_nonzero(model, r, &point))
        });
        if let Some(residual) = failing {
            found.push((*residual, point));
        }
        if found.len() >= MOST_FAILURES {
            break;
        }
    }
    found
}

fn quickly_nonzero(model: &Model, residual: &Residual, point: &Point) -> bool {
    let sign = budget::attempt(WORK, || model.field.enclose(&residual.element, point, QUICK).and_then(|i| i.sign()));
    matches!(sign, Ok(Some(Ordering::Less | Ordering::Greater)))
}

fn slowly_nonzero(model: &Model, residual: &Residual, point: &Point) -> bool {
    let value = budget::attempt(WORK, || exact_value(&model.field, &residual.element, point));
    let sign = value.ok().flatten().and_then(|v| v.sign());
    matches!(sign, Some(Ordering::Less | Ordering::Greater))
}

/// The members of a family in words: "bread, fish" or "(bread, fish)".
pub(super) fn places(model: &Model, residuals: &[Residual]) -> String {
    let name = |i: usize| model.goods.get(i).map_or_else(|| (i + 1).to_string(), |good| good.name.clone());
    let words: Vec<String> = residuals
        .iter()
        .take(6)
        .map(|r| match r.label {
            Label::Whole => "the identity".to_string(),
            Label::Good(i) => name(i),
            Label::Pair(i, j) => format!("({}, {})", name(i), name(j)),
        })
        .collect();
    let more = if residuals.len() > words.len() { " and others" } else { "" };
    format!("{}{more}", words.join(", "))
}
