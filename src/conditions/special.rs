//! The model with parameter values put in, beside the model that they were put into.

use crate::algebra::field::{Field, Relation};
use crate::algebra::generator::Element;
use crate::algebra::monomial::Var;
use crate::algebra::polynomial::Poly;
use crate::algebra::sign::Sign;
use crate::model::Model;

/// An element of the model's field in that of the special model; the names are the same.
pub fn transfer(model: &Model, special: &Model, e: &Element) -> Option<Element> {
    let symbol = |name: &str| special.parameters.iter().find(|p| p.name == name).map(|p| Poly::var(p.var));
    special.field.import(&model.field, e, &symbol).ok()
}

/// Whether a fact about parameters becomes false whatever the others are.
pub fn contradicts_a_fact(field: &Field, solved: &[(Var, Element)]) -> bool {
    field.facts().iter().any(|fact| {
        if solved.iter().all(|(v, _)| !field.depends_on(&fact.element, *v)) {
            return false;
        }
        let Ok(value) = field.substitute(&fact.element, solved) else { return false };
        let sign = if field.is_zero(&value) { Sign::Zero } else { field.sign(&value) };
        match fact.relation {
            Relation::Positive => matches!(sign, Sign::Zero | Sign::Negative | Sign::NonPositive),
            Relation::NonNegative => sign == Sign::Negative,
            Relation::NonZero => sign == Sign::Zero,
        }
    })
}
