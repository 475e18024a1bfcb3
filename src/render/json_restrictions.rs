//! Parameter restrictions as JSON.

use serde_json::{Map, Value as Json, json};

use crate::conditions::Condition;
use crate::restrictions::{Branch, Restrictions};

use super::json::{SCHEMA, finding, formula, recovered, witness};

/// The branches for one model.
pub fn restrictions(found: &Restrictions) -> Json {
    let model = &found.model;
    let failures: Map<String, Json> = found
        .failures
        .iter()
        .map(|(condition, failure)| (key(*condition).to_string(), witness(model, *condition, failure)))
        .collect();
    json!({
        "schema": SCHEMA,
        "title": model.title,
        "only": found.only.iter().map(|condition| key(*condition)).collect::<Vec<_>>(),
        "branches_complete": found.complete,
        "reason": found.reason,
        "failures": failures,
        "branches": found.branches.iter().map(|each| branch(found, each)).collect::<Vec<_>>(),
    })
}

fn key(condition: Condition) -> &'static str {
    match condition {
        Condition::Homogeneity => "homogeneity",
        Condition::AddingUp => "adding_up",
        Condition::Symmetry => "symmetry",
        Condition::Curvature => "curvature",
    }
}

fn branch(found: &Restrictions, branch: &Branch) -> Json {
    let field = &found.model.field;
    let name = |v: &crate::algebra::monomial::Var| field.name(*v).unwrap_or_default();
    let equation = |(v, value): &(crate::algebra::monomial::Var, crate::algebra::generator::Element)| {
        format!("{} = {}", name(v), formula(field, value))
    };
    let condition = |condition: Condition| branch.finding(condition).map_or(Json::Null, |f| finding(&branch.model, f));
    json!({
        "equations": branch.equations.iter().map(equation).collect::<Vec<_>>(),
        "side_conditions":
            branch.side_conditions.iter().map(|e| format!("{} != 0", formula(field, e))).collect::<Vec<_>>(),
        "free": branch.free.iter().map(name).collect::<Vec<_>>(),
        "dimension": branch.dimension(),
        "conditions": {
            "homogeneity": condition(Condition::Homogeneity),
            "adding_up": condition(Condition::AddingUp),
            "symmetry": condition(Condition::Symmetry),
            "curvature": condition(Condition::Curvature),
        },
        "recovered": branch.recovered.as_ref().map_or(Json::Null, |r| recovered(&branch.model, r)),
        "family": Json::Null,
    })
}
