//! A formula for a function of the theory, held against the charts.

use std::cmp::Ordering;

use crate::algebra::budget;
use crate::algebra::evaluation::Point;
use crate::algebra::field::Relation;
use crate::algebra::generator::Element;
use crate::model::{Function, Model};
use crate::proof::{Equation, Expression, Identities, Label, Prover, Refuted, Residual, Value, exact_value};

use super::super::finding::{ClaimFinding, Verdict, Witness};
use super::chart::{Chart, Charts, Coordinates};
use super::difference::difference;

/// How many points are looked at in one chart.
const MOST_POINTS: usize = 200;
/// How many failures are looked through for one whose values are rational.
const MOST_FAILURES: usize = 6;
/// The work that one evaluation may take.
const WORK: u64 = 20_000_000;
/// The work that one chart may take.
const CHART_WORK: u64 = 2_000_000_000;

/// Holds the formula against the charts in turn, its own coordinates first.
pub(super) fn judge(
    model: &Model,
    prover: &mut Prover<'_>,
    text: &str,
    function: Function,
    value: &Element,
    charts: &Charts,
) -> ClaimFinding {
    if let Some(reserve) = &charts.reserve {
        return ClaimFinding::undecided(reserve);
    }
    let own = Coordinates::of(function);
    let mut order: Vec<&Chart> = charts.all.iter().filter(|chart| chart.judges).collect();
    order.sort_by_key(|chart| chart.coordinates != own);
    let mut finding =
        ClaimFinding::undecided("the function is not known in closed form, nor where it could be compared");
    for chart in order {
        let refutes = charts.rising || chart.coordinates == own;
        let tried = budget::attempt(CHART_WORK, || {
            let equation = equation(model, chart, function, value)?;
            Some(hold(model, chart, text, vec![equation], refutes, prover))
        });
        let tried = tried.unwrap_or(None);
        match tried {
            Some(found) if found.verdict != Verdict::Undecided => {
                finding = found;
                break;
            }
            Some(found) => finding = found,
            None => {}
        }
    }
    if finding.verdict != Verdict::Proven {
        finding.correct = correct(model, function, charts);
    }
    if let (Verdict::Refuted, Some(right)) = (finding.verdict, &finding.correct) {
        finding.difference = difference(&model.field, value, right);
    }
    finding
}

/// The function in its own arguments.
pub fn correct(model: &Model, function: Function, charts: &Charts) -> Option<Element> {
    let field = &model.field;
    let chart = charts.all.iter().find(|chart| chart.coordinates == Coordinates::of(function))?;
    let known = budget::attempt(WORK * 10, || Some(field.reduce(&chart.truth(field, function)?)));
    known.ok().flatten()
}

/// claimed = true in the chart's coordinates; `None` where the chart cannot express it.
fn equation(model: &Model, chart: &Chart, function: Function, value: &Element) -> Option<Equation> {
    let field = &model.field;
    if chart.lacks(field, value) {
        return None;
    }
    let truth = chart.truth(field, function)?;
    let claimed = field.suppose(&chart.facts, || field.substitute(value, &chart.values())).ok()?;
    Some(Equation { label: Label::Whole, left: Expression::element(claimed), right: Expression::element(truth) })
}

/// Whether all equations hold in a chart: proven by normal forms, or refuted at a point where `refutes` says that a
/// difference does so.
pub fn hold(
    model: &Model,
    chart: &Chart,
    text: &str,
    equations: Vec<Equation>,
    refutes: bool,
    prover: &mut Prover<'_>,
) -> ClaimFinding {
    let further: Vec<(Expression, Relation)> =
        chart.facts.iter().map(|(e, relation)| (Expression::element(e.clone()), *relation)).collect();
    let question = Question { model, text, chart };
    prover.supposing(&further, |prover| match prover.identities(text, equations.clone(), &chart.premises) {
        Ok(proof) => ClaimFinding::settled(Verdict::Proven, None, proof.step()),
        Err(_) if !refutes => {
            ClaimFinding::undecided("utility is not known to rise in income, so that a difference says nothing")
        }
        Err(residuals) => {
            let failing = residuals.iter().find_map(|residual| question.refute(prover, &equations, residual));
            failing.unwrap_or_else(|| {
                ClaimFinding::undecided(
                    "the normal form of the difference is not zero, and no admissible point was found that shows it",
                )
            })
        }
    })
}

/// Whether the element is positive at every point of a chart.
pub fn positive(model: &Model, chart: &Chart, text: &str, e: &Element, prover: &mut Prover<'_>) -> ClaimFinding {
    let further: Vec<(Expression, Relation)> =
        chart.facts.iter().map(|(e, relation)| (Expression::element(e.clone()), *relation)).collect();
    let zero = Element::zero();
    prover.supposing(&further, |prover| {
        super::relation::examine(model, prover, text, e, crate::language::Comparison::Greater, &zero)
    })
}

struct Question<'a> {
    model: &'a Model,
    text: &'a str,
    chart: &'a Chart,
}

impl Question<'_> {
    fn refute(&self, prover: &mut Prover<'_>, equations: &[Equation], residual: &Residual) -> Option<ClaimFinding> {
        let equation = equations.iter().find(|equation| equation.label == residual.label)?;
        let points = self.failures(&residual.element);
        let refuted = points.into_iter().find_map(|point| self.fails(prover, equation, &point))?;
        let witness = Witness::of(refuted.failure(), None);
        Some(ClaimFinding::settled(Verdict::Refuted, Some(witness), refuted.step()))
    }

    fn fails(&self, prover: &mut Prover<'_>, equation: &Equation, point: &Point) -> Option<Refuted<Identities>> {
        budget::attempt(WORK, || prover.refute(self.text, equation.clone(), point)).ok().flatten()
    }

    /// Points at which the difference is seen not to vanish: those with rational values first.
    fn failures(&self, difference: &Element) -> Vec<Point> {
        let field = &self.model.field;
        let signed = self.chart.facts.iter().filter(|(_, relation)| *relation != Relation::NonZero);
        let positive: Vec<Element> = signed.map(|(e, _)| e.clone()).collect();
        let mut found: Vec<(usize, Point)> = Vec::new();
        for point in self.model.points().with_positive(&positive).take(MOST_POINTS) {
            let Some((point, missing)) = self.completed(point) else { continue };
            let value = budget::attempt(WORK, || field.enclose(difference, &point, 64).and_then(|i| i.sign()));
            if !matches!(value, Ok(Some(Ordering::Less | Ordering::Greater))) {
                continue;
            }
            let value = budget::attempt(WORK, || exact_value(field, difference, &point));
            let flaws = 2 * missing + usize::from(!matches!(value, Ok(Some(Value::Exact(_)))));
            found.push((flaws, point));
            if flaws == 0 || found.len() >= MOST_FAILURES {
                break;
            }
        }
        found.sort_by_key(|(flaws, _)| *flaws);
        found.into_iter().map(|(_, point)| point).collect()
    }

    /// The point with the chart's values in place, and how many of them are not rational and left out. Prices must be.
    fn completed(&self, mut point: Point) -> Option<(Point, usize)> {
        let field = &self.model.field;
        let mut missing = 0;
        for (var, e) in self.chart.values() {
            let value = budget::attempt(WORK, || exact_value(field, &e, &point)).ok().flatten();
            match value {
                Some(Value::Exact(q)) => {
                    point.insert(var, q);
                }
                _ if self.model.prices.contains(&var) => return None,
                _ => {
                    point.remove(&var);
                    missing += 1;
                }
            }
        }
        Some((point, missing))
    }
}
