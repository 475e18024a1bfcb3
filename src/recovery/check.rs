//! Differentiating back: Roy's identity for v, Shephard's lemma for e, and that e and v are inverse to each other.

use crate::algebra::field::{Field, Relation};
use crate::algebra::generator::Element;
use crate::algebra::monomial::Var;
use crate::algebra::polynomial::Poly;
use crate::algebra::sign::Sign;
use crate::proof::{Equation, Expression, Factor, Label, Prover, StepId};

use super::proposal::Proposal;
use super::system::System;

/// Which identities were proven.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub struct Checks {
    /// ∂e/∂pᵢ = xᵢ(p, e) for every good.
    pub shephard: bool,
    /// ∂v/∂pᵢ + xᵢ ∂v/∂m = 0 for every good.
    pub roy: bool,
    /// e(p, v(p, m)) = m.
    pub inverse: bool,
}

/// What was proven of a proposal.
pub struct Established {
    /// The identities.
    pub checks: Checks,
    /// The steps that establish them.
    pub steps: Vec<StepId>,
    /// e, if it was proven.
    pub expenditure: Option<Element>,
}

/// Proves Roy's identity for the proposed v, and e against it; `None` where Roy's identity is not established.
pub fn establish(system: &System, proposal: &Proposal, utility: Var, prover: &mut Prover<'_>) -> Option<Established> {
    let field = system.field;
    let v = proposal.indirect_utility.as_ref()?;
    if field.is_zero(&field.derivative(v, system.income)) {
        return None;
    }
    let roy = roy(system, v, prover)?;
    let mut found =
        Established { checks: Checks { roy: true, ..Checks::default() }, steps: vec![roy], expenditure: None };
    let Some(e) = &proposal.expenditure else { return Some(found) };
    let inverse = inverse(system, e, v, utility, roy, prover);
    let facts = domain_of_utility(field, system.income, proposal, e);
    let with = at_expenditure(system, proposal, e, &facts);
    let shephard = shephard(system, e, &with, &facts, prover);
    found.checks.inverse = inverse.is_some();
    found.checks.shephard = shephard.is_some();
    found.steps.extend(inverse.into_iter().chain(shephard));
    if found.checks.inverse || found.checks.shephard {
        found.expenditure = Some(e.clone());
    }
    Some(found)
}

fn roy(system: &System, v: &Element, prover: &mut Prover<'_>) -> Option<StepId> {
    let name = prover.define("v", v);
    let equations = system.prices.iter().zip(&system.demands).enumerate().map(|(good, (price, demand))| Equation {
        label: Label::Good(good),
        left: Expression::zero()
            .plus(1, vec![Factor::Slope(name, *price)])
            .plus(1, vec![Factor::Element(demand.clone()), Factor::Slope(name, system.income)]),
        right: Expression::zero(),
    });
    let equations = equations.collect();
    prover.identities("Roy's identity", equations, &[]).ok().map(|proved| proved.step())
}

fn inverse(
    system: &System,
    e: &Element,
    v: &Element,
    utility: Var,
    roy: StepId,
    prover: &mut Prover<'_>,
) -> Option<StepId> {
    let back = system.field.substitute(e, &[(utility, v.clone())]).ok()?;
    let (left, right) = (Expression::element(back), Expression::element(Poly::var(system.income)));
    prover.identity("expenditure at the utility reached", left, right, &[roy]).ok().map(|proved| proved.step())
}

/// What is put in for income, and for its logarithm where ln e is known to be something shorter.
fn at_expenditure(
    system: &System,
    proposal: &Proposal,
    e: &Element,
    facts: &[(Element, Relation)],
) -> Vec<(Var, Element)> {
    let field = system.field;
    let mut with = vec![(system.income, e.clone())];
    let own = field.ln(&Poly::var(system.income)).ok().and_then(|log| log.as_var());
    if let (Some(log), Some(level)) = (own, &proposal.level)
        && field.current(&proposal.working.z).as_var() == Some(log)
    {
        let same = || field.ln(e).is_ok_and(|ln_e| field.is_zero(&(&field.current(&ln_e) - &field.current(level))));
        if field.suppose(facts, same) {
            with.push((log, level.clone()));
        }
    }
    with
}

fn shephard(
    system: &System,
    e: &Element,
    with: &[(Var, Element)],
    facts: &[(Element, Relation)],
    prover: &mut Prover<'_>,
) -> Option<StepId> {
    let further: Vec<(Expression, Relation)> =
        facts.iter().map(|(e, r)| (Expression::element(e.clone()), *r)).collect();
    prover.supposing(&further, |prover| {
        let name = prover.define("e", e);
        let mut equations = Vec::new();
        for (good, (price, demand)) in system.prices.iter().zip(&system.demands).enumerate() {
            let there = system.field.substitute(demand, with).ok()?;
            equations.push(Equation {
                label: Label::Good(good),
                left: Expression::from(Factor::Slope(name, *price)),
                right: Expression::element(there),
            });
        }
        prover.identities("Shephard's lemma", equations, &[]).ok().map(|proved| proved.step())
    })
}

/// What is known in prices and utility because u = v(p, m) at an admissible income: the positivities of the proposal,
/// e > 0, and the facts about income with e in its place.
pub fn domain_of_utility(field: &Field, income: Var, proposal: &Proposal, e: &Element) -> Vec<(Element, Relation)> {
    let mut facts: Vec<(Element, Relation)> =
        proposal.positive.iter().map(|f| (f.clone(), Relation::Positive)).collect();
    let known = facts.clone();
    if field.suppose(&known, || field.sign(e)) != Sign::Positive {
        facts.push((e.clone(), Relation::Positive));
    }
    for fact in field.facts() {
        let about_income = field.depends_on(&fact.element, income);
        if about_income
            && let Ok(there) = field.suppose(&facts, || field.substitute(&fact.element, &[(income, e.clone())]))
        {
            facts.push((there, fact.relation));
        }
    }
    facts
}
