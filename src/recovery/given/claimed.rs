//! Without given preferences: the claims about U, v and e that are right by themselves, up to the scale of utility.
//!
//! v is right when Roy's identity gives the demands and it rises in income; e when Shephard's lemma gives them and it
//! rises in utility; U when the first-order conditions hold at the demands and v = U(x(p, m)) rises in income. The first
//! that is right is the scale for all the others.

use crate::algebra::field::Relation;
use crate::algebra::generator::Element;
use crate::algebra::monomial::Var;
use crate::algebra::polynomial::Poly;
use crate::conditions::claims::chart::Chart;
use crate::conditions::claims::judgement;
use crate::conditions::{ClaimFinding, Verdict};
use crate::language::Preferences as Kind;
use crate::model::{Function, Model, Statement, inverse_shares};
use crate::proof::{Equation, Expression, Label, Prover};

use super::functions::{in_income, in_utility};

/// What was settled.
#[derive(Default)]
pub(super) struct Settled {
    /// The function that sets the scale: v or e.
    pub scale: Option<(Kind, Element)>,
    /// Findings by the place of the claim: the one that sets the scale, or those of claims none of which is right.
    pub findings: Vec<(usize, ClaimFinding)>,
}

/// Looks at the claims in the order of the file, until one sets the scale.
pub(super) fn settle(model: &Model, prover: &mut Prover<'_>) -> Settled {
    let mut settled = Settled::default();
    for (place, claim) in model.claims.iter().enumerate() {
        let Statement::Function { function: Function::Preferences(kind), value } = &claim.statement else { continue };
        let Some(test) = test(model, *kind, value) else { continue };
        let mut finding = judgement::hold(model, &test.chart, &claim.text, test.equations, true, prover);
        if finding.verdict == Verdict::Proven {
            let rises = judgement::positive(model, &test.chart, &claim.text, &test.slope, prover);
            match rises.verdict {
                Verdict::Proven => {
                    finding.steps.extend(rises.steps);
                    settled.scale = Some(test.scale);
                    settled.findings = vec![(place, finding)];
                    return settled;
                }
                Verdict::Refuted => finding = rises,
                _ => finding = ClaimFinding::undecided("it is not shown to rise in income or in utility"),
            }
        }
        settled.findings.push((place, finding));
    }
    settled
}

/// What a claimed function must satisfy by itself.
struct Test {
    chart: Chart,
    equations: Vec<Equation>,
    /// What must be positive.
    slope: Element,
    scale: (Kind, Element),
}

fn test(model: &Model, kind: Kind, value: &Element) -> Option<Test> {
    match kind {
        Kind::IndirectUtility => indirect(model, value),
        Kind::Expenditure => expenditure(model, value),
        Kind::Utility => direct(model, value),
    }
}

fn chosen(model: &Model) -> Vec<Element> {
    model.demands.iter().map(|demand| demand.quantity.clone()).collect()
}

fn equations(sides: Vec<(Element, Element)>) -> Vec<Equation> {
    let equation = |(good, (left, right)): (usize, (Element, Element))| Equation {
        label: Label::Good(good),
        left: Expression::element(left),
        right: Expression::element(right),
    };
    sides.into_iter().enumerate().map(equation).collect()
}

/// Roy's identity: ∂v/∂pᵢ + xᵢ ∂v/∂m = 0.
fn indirect(model: &Model, v: &Element) -> Option<Test> {
    let field = &model.field;
    let slope = field.reduce(&field.derivative(v, model.income?));
    let chart = in_income(model, chosen(model), None, Vec::new())?;
    let sides = model.prices.iter().zip(&chart.quantities);
    let sides = sides.map(|(p, x)| (field.derivative(v, *p), field.product(x, &slope).neg())).collect();
    Some(Test { equations: equations(sides), chart, slope, scale: (Kind::IndirectUtility, v.clone()) })
}

/// Shephard's lemma: ∂e/∂pᵢ = xᵢ(p, e).
fn expenditure(model: &Model, e: &Element) -> Option<Test> {
    let field = &model.field;
    let mut chart = in_utility(model, e.clone(), Vec::new())?;
    let with = [(model.income?, e.clone())];
    let there = |x: Element| field.suppose(&chart.facts, || field.substitute(&x, &with).ok());
    let demanded: Vec<Element> = chosen(model).into_iter().map(there).collect::<Option<_>>()?;
    let slopes = model.prices.iter().map(|p| field.derivative(e, *p));
    let sides = slopes.zip(demanded.iter().cloned()).collect();
    // where they differ, the quantities are those demanded
    chart.facts.extend(demanded.iter().map(|x| (x.clone(), Relation::Positive)));
    chart.quantities = demanded;
    let slope = field.reduce(&field.derivative(e, model.utility));
    Some(Test { equations: equations(sides), chart, slope, scale: (Kind::Expenditure, e.clone()) })
}

/// The first-order conditions at the demands: pᵢ xᵢ = m xᵢ πᵢ(x).
fn direct(model: &Model, utility: &Element) -> Option<Test> {
    let field = &model.field;
    let income = model.income?;
    let quantities: Vec<Var> = model.quantities.iter().copied().collect::<Option<_>>()?;
    let shares = inverse_shares(field, utility, &quantities)?;
    let chart = in_income(model, chosen(model), None, Vec::new())?;
    let with: Vec<(Var, Element)> = quantities.into_iter().zip(chart.quantities.iter().cloned()).collect();
    let there = |e: &Element| field.suppose(&chart.facts, || field.substitute(e, &with).ok());
    let mut sides = Vec::new();
    for (share, (price, x)) in shares.iter().zip(model.prices.iter().zip(&chart.quantities)) {
        sides.push((field.product(&there(share)?, &Poly::var(income)), field.product(&Poly::var(*price), x)));
    }
    let v = field.reduce(&there(utility)?);
    let slope = field.reduce(&field.derivative(&v, income));
    Some(Test { equations: equations(sides), chart, slope, scale: (Kind::IndirectUtility, v) })
}
