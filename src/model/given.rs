//! Preferences that the author starts from, and inverse demands: as elements, with what differentiation alone makes of
//! them.
//!
//! Roy: p_i x_i / m = −θᵢv / θₘv with θ = y ∂/∂y. A direct utility has the inverse demands x_i π_i = θᵢU / Σₖ θₖU.

use crate::algebra::field::Field;
use crate::algebra::generator::{Element, Role};
use crate::algebra::monomial::Var;
use crate::algebra::polynomial::Poly;
use crate::language::{Comparison, Diagnostic, Form as WrittenForm, Preferences, Span};

use super::evaluate::{Evaluator, Failed};
use super::resolve::Node;
use super::system::{Claim, Demand, Form, Function, Given, InverseDemand, Statement};

/// What differentiation makes of given preferences.
pub(super) enum Derived {
    /// Marshallian demands, by Roy's identity.
    Demands(Vec<Demand>),
    /// Inverse demands, by the first-order conditions.
    Inverse(Vec<InverseDemand>),
    /// Nothing that is a function of prices and income.
    Nothing,
}

/// The preferences of a `given` statement.
pub(super) fn given(evaluator: &Evaluator<'_>) -> Result<Option<Given>, Failed> {
    let Some((kind, node, span)) = &evaluator.script.given else { return Ok(None) };
    let value = evaluator.in_quantities(|| evaluator.compute(node, &mut Vec::new()))?;
    let allowed: &[Role] = match kind {
        Preferences::Utility => &[Role::Quantity],
        Preferences::IndirectUtility => &[Role::Price, Role::Income],
        Preferences::Expenditure => &[Role::Price, Role::Utility],
    };
    only(evaluator, &value, allowed, node)?;
    Ok(Some(Given { kind: *kind, value: Element::clone(&value), span: *span }))
}

/// The inverse demands of the file.
pub(super) fn inverse_demands(evaluator: &Evaluator<'_>) -> Result<Vec<InverseDemand>, Failed> {
    let mut all = Vec::new();
    for (good, (place, environment)) in evaluator.script.inverse.iter().enumerate() {
        let node = &evaluator.script.inverse_nodes[*place];
        let formula = evaluator.compute(node, &mut environment.clone())?;
        only(evaluator, &formula, &[Role::Quantity], node)?;
        let quantity = evaluator.symbols.quantities().get(good).copied().flatten().ok_or(Failed)?;
        let share = evaluator.field.product(&formula, &Poly::var(quantity));
        all.push(InverseDemand { formula: Element::clone(&formula), share });
    }
    Ok(all)
}

/// Refuses a function of something that it cannot depend on.
fn only(evaluator: &Evaluator<'_>, value: &Element, allowed: &[Role], node: &Node) -> Result<(), Failed> {
    let field = evaluator.field;
    let foreign = field.symbols_of(value).into_iter().find(|var| match field.role(*var) {
        Some(role @ (Role::Price | Role::Income | Role::Quantity | Role::Utility)) => !allowed.contains(&role),
        _ => false,
    });
    let Some(foreign) = foreign else { return Ok(()) };
    let words: Vec<&str> = allowed.iter().map(|role| word(*role)).collect();
    let name = field.name(foreign).unwrap_or_default();
    let message = format!("this is a function of {}, and `{name}` is none of them", words.join(" and "));
    Err(evaluator.report(Diagnostic::error(node.span, message).remedy(format!("take `{name}` out"))))
}

fn word(role: Role) -> &'static str {
    match role {
        Role::Quantity => "quantities",
        Role::Price => "prices",
        Role::Income => "income",
        Role::Utility => "the utility level",
        _ => "parameters",
    }
}

/// The demands of the file as claims to hold against the given preferences.
pub(super) fn against(evaluator: &Evaluator<'_>, demands: &[Demand], span: Span) -> Vec<Claim> {
    let goods = &evaluator.script.declarations.names.goods;
    let claim = |(good, (demand, name)): (usize, (&Demand, &String))| Claim {
        text: format!("the demand for {name} is that of the given preferences"),
        statement: Statement::Function {
            function: Function::Demand(WrittenForm::Demand, good),
            value: demand.quantity.clone(),
        },
        span,
    };
    demands.iter().zip(goods).enumerate().map(claim).collect()
}

/// What makes given preferences those of a consumer and is not asked by a condition: U rises in every quantity, v in
/// income, e in the utility level.
pub(super) fn monotone(evaluator: &Evaluator<'_>, given: &Given) -> Vec<Claim> {
    let (symbols, field) = (evaluator.symbols, evaluator.field);
    let movers: Vec<Var> = match given.kind {
        Preferences::Utility => symbols.quantities().iter().copied().flatten().collect(),
        Preferences::IndirectUtility => symbols.income().into_iter().collect(),
        Preferences::Expenditure => vec![symbols.utility()],
    };
    let what = match given.kind {
        Preferences::Utility => "utility",
        Preferences::IndirectUtility => "indirect utility",
        Preferences::Expenditure => "expenditure",
    };
    let claim = |mover: Var| Claim {
        text: format!("the given {what} rises in {}", field.name(mover).unwrap_or_default()),
        statement: Statement::Relation {
            left: field.reduce(&field.derivative(&given.value, mover)),
            relation: Comparison::Greater,
            right: Poly::zero(),
        },
        span: given.span,
    };
    movers.into_iter().map(claim).collect()
}

/// What follows from the given preferences by differentiation.
pub(super) fn derive(evaluator: &Evaluator<'_>, given: &Given) -> Result<Derived, Failed> {
    match given.kind {
        Preferences::IndirectUtility => roy(evaluator, given).map(Derived::Demands),
        Preferences::Utility => first_order(evaluator, given).map(Derived::Inverse),
        Preferences::Expenditure => Ok(Derived::Nothing),
    }
}

fn roy(evaluator: &Evaluator<'_>, given: &Given) -> Result<Vec<Demand>, Failed> {
    let field = evaluator.field;
    let income = evaluator.symbols.income().ok_or(Failed)?;
    let Some(shares) = marshallian_shares(field, &given.value, evaluator.symbols.prices(), income) else {
        return Err(constant(evaluator, given.span, "indirect utility does not depend on income"));
    };
    let m = Poly::var(income);
    let demand = |(price, share): (&Var, Element)| {
        let outlay = field.reduce(&field.product(&share, &m));
        let quantity = field.reduce(&field.quotient(&outlay, &Poly::var(*price)).map_err(|_| Failed)?);
        Ok(Demand { form: Form::Demand, formula: quantity.clone(), quantity, outlay, share })
    };
    evaluator.symbols.prices().iter().zip(shares).map(demand).collect()
}

/// The budget shares p_i x_i / m that an indirect utility function has by Roy's identity; `None` where it does not
/// depend on income.
pub fn marshallian_shares(field: &Field, v: &Element, prices: &[Var], income: Var) -> Option<Vec<Element>> {
    let along = field.reduce(&field.log_derivative(v, income));
    if field.is_zero(&along) {
        return None;
    }
    let share = |price: &Var| {
        let across = field.reduce(&field.log_derivative(v, *price));
        Some(field.reduce(&field.quotient(&across.neg(), &along).ok()?))
    };
    prices.iter().map(share).collect()
}

/// The shares x_i π_i of inverse demand that a direct utility function has by the first-order conditions; `None` where
/// it does not change as all quantities grow in proportion.
pub fn inverse_shares(field: &Field, utility: &Element, quantities: &[Var]) -> Option<Vec<Element>> {
    let slopes: Vec<Element> = quantities.iter().map(|x| field.reduce(&field.log_derivative(utility, *x))).collect();
    let total = field.reduce(&Poly::sum(slopes.iter().map(|e| field.current(e)).collect()));
    if field.is_zero(&total) {
        return None;
    }
    slopes.iter().map(|slope| Some(field.reduce(&field.quotient(slope, &total).ok()?))).collect()
}

fn first_order(evaluator: &Evaluator<'_>, given: &Given) -> Result<Vec<InverseDemand>, Failed> {
    let field = evaluator.field;
    let quantities: Vec<Var> = evaluator.symbols.quantities().iter().copied().collect::<Option<_>>().ok_or(Failed)?;
    let Some(shares) = inverse_shares(field, &given.value, &quantities) else {
        return Err(constant(evaluator, given.span, "utility does not change as all quantities grow in proportion"));
    };
    let inverse = |(share, x): (Element, &Var)| {
        let formula = field.reduce(&field.quotient(&share, &Poly::var(*x)).map_err(|_| Failed)?);
        Ok(InverseDemand { formula, share })
    };
    shares.into_iter().zip(&quantities).map(inverse).collect()
}

fn constant(evaluator: &Evaluator<'_>, span: Span, message: &str) -> Failed {
    evaluator.report(Diagnostic::error(span, message).remedy("preferences of a consumer rise along every such path"))
}
