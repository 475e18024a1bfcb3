//! From preferences to demand, and what claims are held against.
//!
//! The scale of utility is that of the file's `given` statement; else that of the first claim about U, v or e that is
//! right by itself (Roy's identity, Shephard's lemma, the first-order conditions); else that of the recovered
//! preferences. On it, charts are made: demands by Roy and Shephard, the inverse of v or e by solving for income or
//! utility, and for a direct utility the first-order conditions, solved where that is possible ([`direct`]).

mod claimed;
mod corners;
mod direct;
mod functions;
mod inverse;

use crate::algebra::field::Relation;
use crate::algebra::generator::Element;
use crate::algebra::polynomial::Poly;
use crate::algebra::sign::Sign;
use crate::conditions::claims::chart::{Chart, Charts, Coordinates, Values};
use crate::conditions::claims::judgement;
use crate::conditions::{self, Verdict};
use crate::language::Preferences as Kind;
use crate::model::{Model, Statement};
use crate::proof::{Expression, Prover};

pub use corners::{Demanded, demanded};

use super::check::Checks;
use super::proposal::Working;
use super::search::Method;
use super::{Preferences, Recovered};

/// The charts for the claims of a model. `recovered` are the preferences found for its demands.
pub fn charts(model: &Model, recovered: Option<&Recovered>, prover: &mut Prover<'_>) -> Charts {
    if let Some(given) = &model.given {
        return of_given(model, given.kind, &given.value, prover);
    }
    if model.demands.is_empty() {
        return Charts { all: inverse_chart(model, None).into_iter().collect(), ..Charts::default() };
    }
    let settled = claimed::settle(model, prover);
    if let Some((kind, value)) = &settled.scale {
        let mut charts = of_given(model, *kind, value, prover);
        charts.settled = settled.findings;
        return charts;
    }
    let mut charts = of_recovered(model, recovered, prover);
    charts.settled = settled.findings;
    let function = |place: usize| match model.claims.get(place).map(|claim| &claim.statement) {
        Some(Statement::Function { function, .. }) => Some(*function),
        _ => None,
    };
    let known: Vec<_> =
        charts.settled.iter().map(|(place, _)| judgement::correct(model, function(*place)?, &charts)).collect();
    charts.settled.iter_mut().zip(known).for_each(|((_, finding), known)| finding.correct = known);
    charts
}

/// The charts on the scale of a function.
fn of_given(model: &Model, kind: Kind, value: &Element, prover: &mut Prover<'_>) -> Charts {
    match kind {
        Kind::IndirectUtility => functions::of_indirect(model, value, prover),
        Kind::Expenditure => functions::of_expenditure(model, value, prover),
        Kind::Utility => of_utility(model, value, prover),
    }
}

/// The charts of a direct utility: only where it is shown to be quasi-concave are they a consumer's.
fn of_utility(model: &Model, utility: &Element, prover: &mut Prover<'_>) -> Charts {
    let mut charts = Charts::default();
    let finding = conditions::maximised(model, utility, prover);
    if finding.as_ref().is_none_or(|finding| finding.verdict != Verdict::Proven) {
        let words = "utility is not shown to be quasi-concave and rising, so that the first-order conditions need not give a maximum";
        charts.reserve = Some(words.to_string());
    }
    let premises = finding.map(|finding| finding.steps).unwrap_or_default();
    if let Some(demands) = direct::solve(model, utility, prover) {
        charts = Charts { reserve: charts.reserve, ..functions::of_demands(model, demands, prover) };
    }
    charts.all.extend(inverse_chart(model, Some(utility)));
    charts.rising = true;
    charts.all.iter_mut().for_each(|chart| chart.premises.extend(premises.iter().copied()));
    charts
}

/// Quantities and income as coordinates: p = m π(x), u = U(x).
fn inverse_chart(model: &Model, utility: Option<&Element>) -> Option<Chart> {
    let field = &model.field;
    let quantities: Vec<_> = model.quantities.iter().copied().collect::<Option<_>>()?;
    let income = Poly::var(model.income?);
    let mut facts = Vec::new();
    let shares = match utility {
        Some(utility) => {
            let slope = |x| (field.reduce(&field.derivative(utility, x)), Relation::Positive);
            let unknown = |(e, _): &(Element, Relation)| field.sign(e) != Sign::Positive;
            facts.extend(quantities.iter().copied().map(slope).filter(unknown));
            crate::model::inverse_shares(field, utility, &quantities)?
        }
        None => model.inverse.iter().map(|inverse| inverse.share.clone()).collect(),
    };
    let price = |(share, x): (&Element, &crate::algebra::monomial::Var)| {
        let scaled = field.product(&field.current(share), &income);
        Some(field.reduce(&field.quotient(&scaled, &Poly::var(*x)).ok()?))
    };
    let prices = shares.iter().zip(&quantities).map(price).collect::<Option<Vec<Element>>>()?;
    let quantities = quantities.into_iter().map(Poly::var).collect();
    let values = Values { prices, income, utility: utility.cloned(), quantities };
    Chart::new(model, Coordinates::Quantities, values, facts)
}

/// The charts of a file's own demands, on the scale of what was recovered for them.
fn of_recovered(model: &Model, recovered: Option<&Recovered>, prover: &mut Prover<'_>) -> Charts {
    let quantities: Vec<Element> = model.demands.iter().map(|demand| demand.quantity.clone()).collect();
    let found = match recovered {
        Some(Recovered::Found(found)) => Some(found),
        _ => None,
    };
    let Some((found, v)) = found.and_then(|found| Some((found, found.indirect_utility.clone()?))) else {
        let all = functions::in_income(model, quantities, None, Vec::new()).into_iter().collect();
        return Charts { all, ..Charts::default() };
    };
    let chosen = functions::Chosen { quantities, indirect_utility: v.clone(), facts: Vec::new() };
    let mut charts = functions::of_demands(model, chosen, prover);
    charts.rising |= found.rising;
    let solved = charts.all.iter().any(|chart| chart.coordinates == Coordinates::Utility);
    if let (false, Some(e)) = (solved, found.expenditure.clone()) {
        charts.all.extend(functions::known(model, e, &v, prover));
    }
    charts
}

/// The preferences behind a file's own inverse demands: a direct utility.
pub fn of_inverse(model: &Model, prover: &mut Prover<'_>) -> Recovered {
    match inverse::direct_utility(model, prover) {
        None => {
            Recovered::NotFound { reason: "no direct utility was found in closed form".to_string(), existence: true }
        }
        Some(found) => Recovered::Found(Box::new(Preferences {
            utility: Some(found.utility),
            steps: vec![found.step],
            ..nothing(Method::IntegratingFactor)
        })),
    }
}

/// Preferences of which nothing is known yet.
fn nothing(method: Method) -> Preferences {
    Preferences {
        expenditure: None,
        indirect_utility: None,
        hicksian: Vec::new(),
        demanded: None,
        utility: None,
        method,
        working: Working::default(),
        rising: false,
        checked: Checks::default(),
        conditions: Vec::new(),
        cases: Vec::new(),
        steps: Vec::new(),
    }
}

/// The given preferences with what follows from them; `None` where nothing was given.
pub fn derived(model: &Model, charts: &Charts) -> Option<Recovered> {
    let given = model.given.as_ref()?;
    let field = &model.field;
    if let Some(reason) = charts.reserve.clone() {
        return Some(Recovered::NotFound { reason, existence: false });
    }
    let at = |coordinates: Coordinates| charts.all.iter().find(|chart| chart.coordinates == coordinates);
    let clean = |e: &Element| field.reduce(e);
    let (income, utility) = (at(Coordinates::Income), at(Coordinates::Utility));
    let own = |kind: Kind| (given.kind == kind).then(|| given.value.clone());
    Some(Recovered::Found(Box::new(Preferences {
        expenditure: own(Kind::Expenditure).or_else(|| utility.map(|chart| clean(&chart.income))),
        indirect_utility: own(Kind::IndirectUtility)
            .or_else(|| income.and_then(|chart| chart.utility.as_ref()).map(clean)),
        hicksian: utility.map(|chart| chart.quantities.iter().map(clean).collect()).unwrap_or_default(),
        utility: own(Kind::Utility),
        rising: charts.rising,
        checked: Checks {
            shephard: utility.is_some(),
            roy: income.is_some(),
            inverse: income.is_some() && utility.is_some(),
        },
        steps: charts.all.iter().flat_map(|chart| chart.premises.iter().copied()).collect(),
        ..nothing(Method::Given)
    })))
}

/// Elements as assumptions of a part of the domain.
pub(super) fn supposed(facts: &[(Element, Relation)]) -> Vec<(Expression, Relation)> {
    facts.iter().map(|(e, relation)| (Expression::element(e.clone()), *relation)).collect()
}
