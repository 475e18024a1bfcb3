//! Direct utility from inverse demands.
//!
//! π is proportional to the gradient of U. First π itself and π times its common denominator are tried as gradients;
//! then the system is turned round: as functions of x and a scale y, the shares wᵢ(x/y) are those of demands with
//! "prices" x and "income" y, whose "indirect utility" is −U(x/y), so that the methods of recovery apply.

use crate::algebra::budget;
use crate::algebra::field::{Field, Relation};
use crate::algebra::generator::{Element, Role};
use crate::algebra::monomial::Var;
use crate::algebra::polynomial::Poly;
use crate::algebra::sign::Sign;
use crate::model::{Model, inverse_shares};
use crate::proof::{Equation, Expression, Label, Prover, StepId};

use super::super::fractions::Moving;
use super::super::potential::potential;
use super::super::search;
use super::super::system::System;

/// The work that one attempt may take.
const WORK: u64 = 400_000_000;

/// A direct utility with the step that proves it.
pub(super) struct Direct {
    /// U(x), rising.
    pub utility: Element,
    /// The first-order conditions.
    pub step: StepId,
}

/// U with ∂U/∂xᵢ proportional to πᵢ, proven.
pub(super) fn direct_utility(model: &Model, prover: &mut Prover<'_>) -> Option<Direct> {
    let field = &model.field;
    let quantities: Vec<Var> = model.quantities.iter().copied().collect::<Option<_>>()?;
    let shares: Vec<Element> = model.inverse.iter().map(|inverse| field.reduce(&inverse.share)).collect();
    let moving = Moving::new(field, &quantities);
    let plain: Vec<Element> = model.inverse.iter().map(|inverse| field.reduce(&inverse.formula)).collect();
    let (cleared, _) = moving.over_one_denominator(&plain);
    for form in [plain, cleared] {
        let found = budget::attempt(WORK, || potential(&moving, &form)?.value(field).ok()).ok().flatten();
        let proven = found.and_then(|utility| proven(field, &quantities, &shares, utility, prover));
        if proven.is_some() {
            return proven;
        }
    }
    let utility =
        budget::attempt(2 * WORK, || turned_round(field, &quantities, &shares, model.utility)).ok().flatten()?;
    proven(field, &quantities, &shares, utility, prover)
}

/// The utility, turned to rise, once its inverse demands are proven to be the given ones.
fn proven(
    field: &Field,
    quantities: &[Var],
    shares: &[Element],
    utility: Element,
    prover: &mut Prover<'_>,
) -> Option<Direct> {
    let own = inverse_shares(field, &utility, quantities)?;
    let equation = |(good, (left, right)): (usize, (&Element, &Element))| Equation {
        label: Label::Good(good),
        left: Expression::element(left.clone()),
        right: Expression::element(right.clone()),
    };
    let equations = own.iter().zip(shares).enumerate().map(equation).collect();
    let step = prover.identities("first-order conditions", equations, &[]).ok()?.step();
    let slopes = quantities.iter().map(|x| field.log_derivative(&utility, *x));
    let total = field.reduce(&Poly::sum(slopes.collect()));
    let utility = if field.sign(&total) == Sign::Negative { utility.neg() } else { utility };
    Some(Direct { utility: field.reduce(&utility), step })
}

/// −v(x, 1) for the system with prices x and income y.
fn turned_round(field: &Field, quantities: &[Var], shares: &[Element], utility: Var) -> Option<Element> {
    let scale = field.symbol("y", Role::Income);
    let y = Poly::var(scale);
    let mut with = Vec::new();
    for x in quantities {
        with.push((*x, field.quotient(&Poly::var(*x), &y).ok()?));
    }
    let mut facts: Vec<(Element, Relation)> = Vec::new();
    for fact in field.facts() {
        let there = field.suppose(&facts, || field.substitute(&fact.element, &with)).ok()?;
        facts.push((there, fact.relation));
    }
    field.suppose(&facts, || {
        let demand = |(share, x): (&Element, &Var)| {
            let spent = field.product(&field.substitute(share, &with).ok()?, &y);
            Some(field.reduce(&field.quotient(&spent, &Poly::var(*x)).ok()?))
        };
        let demands = shares.iter().zip(quantities).map(demand).collect::<Option<Vec<Element>>>()?;
        let system = System { field, prices: quantities.to_vec(), income: scale, demands };
        // its own steps are about the system turned round; what it finds is proven anew
        let mut aside = Prover::new(field);
        let found = search::search(&system, utility, &mut aside).ok()?;
        let v = found.indirect_utility.as_ref()?;
        field.substitute(v, &[(scale, Poly::one())]).ok().map(|v| v.neg())
    })
}
