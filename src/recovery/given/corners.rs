//! Where the demands behind given preferences end: a quantity that is not positive means that the best bundle is at a
//! corner, where the first-order conditions say nothing.

use std::cmp::Ordering;

use crate::algebra::budget;
use crate::algebra::field::Relation;
use crate::algebra::generator::Element;
use crate::algebra::monomial::Var;
use crate::algebra::sign::Sign;
use crate::conditions::Witness;
use crate::conditions::claims::chart::{Charts, Coordinates};
use crate::language::Preferences as Kind;
use crate::model::Model;
use crate::proof::{Bounded, Expression, Prover};

/// How many points are looked at for a corner.
const MOST_POINTS: usize = 60;
/// The work that one evaluation, sign or quotient may take.
const WORK: u64 = 10_000_000;
/// The most goods whose rates of substitution are looked at.
const MOST_GOODS: usize = 12;

/// The demands that go with given preferences.
#[derive(Clone, Debug, Default)]
pub struct Demanded {
    /// x(p, m), one for each good; empty where they are not known in closed form.
    pub quantities: Vec<Element>,
    /// The goods whose quantity is not known to be positive for all prices and incomes.
    pub doubtful: Vec<usize>,
    /// Points at which the formula for a good is not positive, so that the best bundle is at a corner.
    pub corners: Vec<(usize, Witness)>,
    /// Pairs of goods with a rate of substitution that is the same at every bundle: unless it is the ratio of their
    /// prices, at most one of the two is bought.
    pub constant_rates: Vec<(usize, usize, Element)>,
}

/// The demands of given preferences, and where they end; `None` where nothing was given.
pub fn demanded(model: &Model, charts: &Charts, prover: &mut Prover<'_>) -> Option<Demanded> {
    let given = model.given.as_ref()?;
    let field = &model.field;
    let mut found = Demanded::default();
    if let Some(chart) = charts.all.iter().find(|chart| chart.coordinates == Coordinates::Income) {
        let others: Vec<(Element, Relation)> =
            chart.facts.iter().filter(|(e, _)| !chart.quantities.contains(e)).cloned().collect();
        let positive = |x: &Element| {
            let sign = budget::attempt(WORK, || field.suppose(&others, || field.sign(x)));
            sign.unwrap_or(Sign::Unknown) == Sign::Positive
        };
        found.quantities = chart.quantities.iter().map(|x| field.reduce(x)).collect();
        found.doubtful = (0..found.quantities.len()).filter(|good| !positive(&found.quantities[*good])).collect();
        found.corners =
            found.doubtful.iter().filter_map(|good| corner(model, prover, *good, &found.quantities[*good])).collect();
    } else if given.kind == Kind::Utility {
        found.constant_rates = budget::attempt(WORK, || constant_rates(model, &given.value)).unwrap_or_default();
    }
    Some(found)
}

/// A point at which a quantity is not positive.
fn corner(model: &Model, prover: &mut Prover<'_>, good: usize, quantity: &Element) -> Option<(usize, Witness)> {
    let claim = Bounded { expression: Expression::element(quantity.clone()), relation: Relation::Positive };
    model.points().take(MOST_POINTS).find_map(|point| {
        let sign = budget::attempt(WORK, || model.field.enclose(quantity, &point, 64).and_then(|i| i.sign()));
        if !matches!(sign, Ok(Some(Ordering::Less))) {
            return None;
        }
        let refuted = budget::attempt(WORK, || prover.refute_bound("corner", claim.clone(), &point)).ok().flatten()?;
        let mut witness = Witness::of(refuted.failure(), None);
        // quantities are what is chosen at the point, and not a part of it
        model.quantities.iter().flatten().chain([&model.utility]).for_each(|var| {
            witness.point.remove(var);
        });
        Some((good, witness))
    })
}

/// Uᵢ/Uⱼ for the pairs of goods for which it depends on no quantity.
fn constant_rates(model: &Model, utility: &Element) -> Vec<(usize, usize, Element)> {
    let field = &model.field;
    let Some(quantities) = model.quantities.iter().copied().collect::<Option<Vec<Var>>>() else { return Vec::new() };
    if quantities.len() > MOST_GOODS {
        return Vec::new();
    }
    let slopes: Vec<Element> = quantities.iter().map(|x| field.reduce(&field.derivative(utility, *x))).collect();
    let mut found = Vec::new();
    for i in 0..slopes.len() {
        for j in i + 1..slopes.len() {
            let Ok(rate) = field.quotient(&slopes[i], &slopes[j]) else { continue };
            let rate = field.reduce(&rate);
            if quantities.iter().all(|x| !field.depends_on(&rate, *x)) {
                found.push((i, j, rate));
            }
        }
    }
    found
}
