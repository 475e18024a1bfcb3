//! Charts from an indirect utility or an expenditure function, and the other of the two by solving.

use crate::algebra::budget;
use crate::algebra::field::Relation;
use crate::algebra::generator::Element;
use crate::algebra::monomial::Var;
use crate::algebra::polynomial::Poly;
use crate::algebra::sign::Sign;
use crate::conditions::claims::chart::{Chart, Charts, Coordinates, Values};
use crate::model::{Model, marshallian_shares};
use crate::proof::{Expression, Prover};

use super::super::invert;
use super::supposed;

/// The work that solving for income or utility may take.
const SOLVING: u64 = 400_000_000;

/// Demands, with the value of utility at them and what must hold where they are chosen.
pub(super) struct Chosen {
    /// x(p, m).
    pub quantities: Vec<Element>,
    /// v(p, m).
    pub indirect_utility: Element,
    /// What was used to find them.
    pub facts: Vec<(Element, Relation)>,
}

/// The chart in prices and income.
pub(super) fn in_income(
    model: &Model,
    quantities: Vec<Element>,
    utility: Option<Element>,
    facts: Vec<(Element, Relation)>,
) -> Option<Chart> {
    let prices = model.prices.iter().map(|p| Poly::var(*p)).collect();
    let values = Values { prices, income: Poly::var(model.income?), utility, quantities };
    Chart::new(model, Coordinates::Income, values, facts)
}

/// The chart in prices and utility.
pub(super) fn in_utility(model: &Model, expenditure: Element, mut facts: Vec<(Element, Relation)>) -> Option<Chart> {
    let field = &model.field;
    let known = facts.clone();
    if field.suppose(&known, || field.sign(&expenditure)) != Sign::Positive {
        facts.push((expenditure.clone(), Relation::Positive));
    }
    let quantities: Vec<Element> =
        model.prices.iter().map(|p| field.reduce(&field.derivative(&expenditure, *p))).collect();
    let prices = model.prices.iter().map(|p| Poly::var(*p)).collect();
    let utility = Some(Poly::var(model.utility));
    Chart::new(model, Coordinates::Utility, Values { prices, income: expenditure, utility, quantities }, facts)
}

/// The charts of an indirect utility function: demands by Roy's identity, expenditure by solving for income.
pub(super) fn of_indirect(model: &Model, v: &Element, prover: &mut Prover<'_>) -> Charts {
    let field = &model.field;
    let Some(income) = model.income else { return Charts::default() };
    let Some(shares) = marshallian_shares(field, v, &model.prices, income) else { return Charts::default() };
    let quantity = |(share, price): (&Element, &Var)| {
        let outlay = field.product(share, &Poly::var(income));
        Some(field.reduce(&field.quotient(&outlay, &Poly::var(*price)).ok()?))
    };
    let Some(quantities) = shares.iter().zip(&model.prices).map(quantity).collect() else { return Charts::default() };
    let chosen = Chosen { quantities, indirect_utility: v.clone(), facts: Vec::new() };
    of_demands(model, chosen, prover)
}

/// The charts of demands with the value of utility at them.
pub(super) fn of_demands(model: &Model, chosen: Chosen, prover: &mut Prover<'_>) -> Charts {
    let field = &model.field;
    let Chosen { quantities, indirect_utility: v, facts } = chosen;
    let Some(income) = model.income else { return Charts::default() };
    let mut charts = Charts::default();
    let own = in_income(model, quantities, Some(v.clone()), facts);
    let known = own.as_ref().map(|chart| chart.facts.clone()).unwrap_or_default();
    let slope = field.reduce(&field.derivative(&v, income));
    charts.rising = field.suppose(&known, || field.sign(&slope)) == Sign::Positive;
    charts.all.extend(own);
    let target = [Poly::var(model.utility)];
    let solved = budget::attempt(SOLVING, || invert::solve(field, &v, income, &target)).ok().flatten();
    let Some(solved) = solved else { return charts };
    let positive = solved.positive.iter().map(|e| (e.clone(), Relation::Positive)).collect();
    let chart = in_utility(model, field.reduce(&solved.value), positive);
    charts.all.extend(chart.and_then(|chart| checked(chart, &v, income, model.utility, prover)));
    charts
}

/// The chart of a known expenditure function; claims are judged in it where v(p, e(p, u)) = u is proven.
pub(super) fn known(model: &Model, e: Element, v: &Element, prover: &mut Prover<'_>) -> Option<Chart> {
    let mut chart = in_utility(model, e, Vec::new())?;
    let judging = checked(chart.clone(), v, model.income?, model.utility, prover);
    chart.judges = false;
    Some(judging.unwrap_or(chart))
}

/// The chart, once v(p, e(p, u)) = u is proven.
fn checked(mut chart: Chart, v: &Element, income: Var, utility: Var, prover: &mut Prover<'_>) -> Option<Chart> {
    let field = prover.field();
    let step = prover.supposing(&supposed(&chart.facts), |prover| {
        let there = field.substitute(v, &[(income, chart.income.clone())]).ok()?;
        let (left, right) = (Expression::element(there), Expression::element(Poly::var(utility)));
        prover.identity("utility reached with expenditure", left, right, &[]).ok().map(|proof| proof.step())
    })?;
    chart.premises.push(step);
    Some(chart)
}

/// The charts of an expenditure function: Hicksian demands by Shephard's lemma, indirect utility by solving for u.
pub(super) fn of_expenditure(model: &Model, e: &Element, prover: &mut Prover<'_>) -> Charts {
    let field = &model.field;
    let Some(income) = model.income else { return Charts::default() };
    let mut charts = Charts::default();
    let own = in_utility(model, e.clone(), Vec::new());
    let known = own.as_ref().map(|chart| chart.facts.clone()).unwrap_or_default();
    let hicksian = own.as_ref().map(|chart| chart.quantities.clone());
    let slope = field.reduce(&field.derivative(e, model.utility));
    charts.rising = field.suppose(&known, || field.sign(&slope)) == Sign::Positive;
    charts.all.extend(own);
    let target = [Poly::var(income)];
    let solved = budget::attempt(SOLVING, || field.suppose(&known, || invert::solve(field, e, model.utility, &target)));
    let (Some(solved), Some(hicksian)) = (solved.ok().flatten(), hicksian) else { return charts };
    let v = field.reduce(&solved.value);
    let positive: Vec<(Element, Relation)> = solved.positive.iter().map(|e| (e.clone(), Relation::Positive)).collect();
    let with = [(model.utility, v.clone())];
    let demands: Option<Vec<Element>> = field.suppose(&positive, || {
        hicksian.iter().map(|h| field.substitute(h, &with).ok().map(|x| field.reduce(&x))).collect()
    });
    let Some(mut chart) = demands.and_then(|demands| in_income(model, demands, Some(v.clone()), positive)) else {
        return charts;
    };
    let step = prover.supposing(&supposed(&chart.facts), |prover| {
        let there = field.substitute(e, &with).ok()?;
        let (left, right) = (Expression::element(there), Expression::element(Poly::var(income)));
        prover.identity("expenditure at the utility reached", left, right, &[]).ok().map(|proof| proof.step())
    });
    // v(p, e(p, u)) = u shows v to be right, and leaves open which incomes are reached
    chart.judges = step.is_some();
    let step = step.or_else(|| {
        prover.supposing(&supposed(&known), |prover| {
            let there = field.substitute(&v, &[(income, e.clone())]).ok()?;
            let (left, right) = (Expression::element(there), Expression::element(Poly::var(model.utility)));
            prover.identity("utility reached with expenditure", left, right, &[]).ok().map(|proof| proof.step())
        })
    });
    if let Some(step) = step {
        chart.premises.push(step);
        charts.all.push(chart);
    }
    charts
}
