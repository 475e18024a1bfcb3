//! What a run found, as JSON: formulas in the model file's own syntax, numbers as exact rationals in strings.
//!
//! The schema is `schema.json` beside this file; it only grows.

use serde_json::{Map, Value as Json, json};

use crate::algebra::evaluation::Point;
use crate::algebra::field::Field;
use crate::algebra::generator::Element;
use crate::algebra::monomial::Var;
use crate::algebra::number::Rational;
use crate::conditions::{Branch, ClaimFinding, Condition, Difference, Finding, Witness};
use crate::model::{Claim, Coverage, Model};
use crate::proof::{Label, Value, store};
use crate::recovery::given::Demanded;
use crate::recovery::{Case, Preferences, Recovered};
use crate::render::formula_text::plain;
use crate::render::json_structure::structure;
use crate::render::notation::best_formula;
use crate::render::report;
use crate::render::vocabulary;
use crate::vetting::Vetting;
use crate::welfare::Expenditure;

/// The version of the schema; it changes only where something is taken away.
pub const SCHEMA: u32 = 1;

/// One model's verdicts, preferences, claims and structure; with the certificate where it is asked for.
pub fn vetting(vetting: &Vetting, certificate: bool) -> Json {
    let model = &vetting.model;
    let condition = |condition: Condition| vetting.finding(condition).map_or(Json::Null, |f| finding(model, f));
    let claims: Vec<Json> = model.claims.iter().zip(&vetting.claims).map(|(c, f)| claim(model, c, f)).collect();
    json!({
        "schema": SCHEMA,
        "title": model.title,
        "goods": model.goods.iter().map(|good| good.name.as_str()).collect::<Vec<_>>(),
        "complete": model.coverage == Coverage::Complete,
        "deflated": model.coverage == Coverage::Deflated,
        "rest": model.rest.and_then(|good| model.goods.get(good)).map(|good| good.name.as_str()),
        "conditions": {
            "homogeneity": condition(Condition::Homogeneity),
            "adding_up": condition(Condition::AddingUp),
            "symmetry": condition(Condition::Symmetry),
            "curvature": condition(Condition::Curvature),
        },
        "recovered": vetting.recovered.as_ref().map_or(Json::Null, |found| recovered(model, found)),
        "claims": claims,
        "along": vetting.along.as_ref().map(|found| along(vetting, found)),
        "structure": structure(vetting),
        "side_conditions": side_conditions(vetting),
        "stopped": vetting.stops.iter().map(|(part, why)| json!({"part": part.word(), "limit": why})).collect::<Vec<_>>(),
        "certificate": if certificate { stored(vetting) } else { Json::Null },
    })
}

fn along(vetting: &Vetting, found: &Expenditure) -> Json {
    let end = |at: &dyn Fn(&(Var, Rational, Rational)) -> Rational| {
        point(&vetting.model.field, &found.path.prices.iter().map(|price| (price.0, at(price))).collect())
    };
    let (from, to) = report::bounds(found);
    json!({
        "from": end(&|price| price.1.clone()),
        "to": end(&|price| price.2.clone()),
        "income": found.path.income.to_string(),
        "expenditure": {"from": from, "to": to},
        "assumes": report::assumptions(vetting),
    })
}

/// An element in the syntax of model files.
pub fn formula(field: &Field, e: &Element) -> String {
    plain(&best_formula(field, e))
}

pub(super) fn finding(model: &Model, finding: &Finding) -> Json {
    let field = &model.field;
    let mut out = Map::new();
    out.insert("verdict".into(), json!(vocabulary::verdict(finding.verdict)));
    out.insert("witness".into(), finding.witness.as_ref().map_or(Json::Null, |w| witness(model, finding.condition, w)));
    out.insert("never".into(), json!(finding.never));
    let branches = finding.restrictions.as_ref().map(|all| all.iter().map(|b| branch(field, b)).collect::<Vec<_>>());
    out.insert("restrictions".into(), json!(branches));
    out.insert("restrictions_complete".into(), json!(finding.restrictions_complete));
    if finding.condition == Condition::Curvature {
        out.insert("regular_point".into(), json!(finding.regular_point.as_ref().map(|at| point(field, at))));
        let region = finding.region.as_ref().map(|all| all.iter().map(|e| format!("{} >= 0", formula(field, e))));
        out.insert("region".into(), json!(region.map(Iterator::collect::<Vec<_>>)));
    }
    out.insert("method".into(), json!(finding.method));
    out.insert("reason".into(), json!(finding.reason));
    out.insert("steps".into(), json!(finding.steps.iter().map(|step| step.index()).collect::<Vec<_>>()));
    Json::Object(out)
}

/// One branch of restrictions: its equations, then what must not vanish.
fn branch(field: &Field, branch: &Branch) -> Vec<String> {
    let equations = branch.equations.iter().map(|(l, r)| format!("{} = {}", formula(field, l), formula(field, r)));
    let conditions = branch.side_conditions.iter().map(|e| format!("{} != 0", formula(field, e)));
    let bounds = branch.inequalities.iter().map(|e| format!("{} >= 0", formula(field, e)));
    equations.chain(conditions).chain(bounds).collect()
}

pub(super) fn witness(model: &Model, condition: Condition, witness: &Witness) -> Json {
    let mut out = Map::new();
    out.insert("point".into(), json!(point(&model.field, &witness.point)));
    out.insert("where".into(), json!(place(model, condition, witness.place)));
    out.insert("value".into(), value(&witness.value));
    if let Some(vector) = &witness.vector {
        out.insert("vector".into(), json!(vector.iter().map(ToString::to_string).collect::<Vec<_>>()));
    }
    Json::Object(out)
}

fn place(model: &Model, condition: Condition, place: Label) -> String {
    let good = |i: usize| model.goods.get(i).map(|good| good.name.clone()).unwrap_or_default();
    match (condition, place) {
        (_, Label::Good(i)) => good(i),
        (_, Label::Pair(i, j)) => format!("{}, {}", good(i), good(j)),
        (Condition::AddingUp, Label::Whole) => "budget".to_string(),
        (_, Label::Whole) => "slutsky".to_string(),
    }
}

/// The coordinates of a point by name, in the order of declaration.
fn point(field: &Field, at: &Point) -> Map<String, Json> {
    let coordinate = |(var, value): (&Var, &crate::algebra::number::Rational)| {
        field.name(*var).map(|name| (name, json!(value.to_string())))
    };
    at.iter().filter_map(coordinate).collect()
}

fn value(value: &Value) -> Json {
    match value {
        Value::Exact(value) => json!(value.to_string()),
        Value::Enclosed { formula: exact, from, to } => json!({
            "formula": exact.as_ref().map(plain),
            "from": from.to_string(),
            "to": to.to_string(),
        }),
    }
}

pub(super) fn recovered(model: &Model, recovered: &Recovered) -> Json {
    match recovered {
        Recovered::Found(preferences) => found(model, preferences),
        Recovered::NotFound { reason, existence } => json!({"reason": reason, "existence": existence}),
    }
}

fn found(model: &Model, found: &Preferences) -> Json {
    let text = |e: &Option<Element>| e.as_ref().map(|e| formula(&model.field, e));
    let hicksian: Map<String, Json> = model
        .goods
        .iter()
        .zip(&found.hicksian)
        .map(|(good, h)| (good.name.clone(), json!(formula(&model.field, h))))
        .collect();
    json!({
        "expenditure": text(&found.expenditure),
        "indirect_utility": text(&found.indirect_utility),
        "hicksian": hicksian,
        "demanded": found.demanded.as_ref().map(|all| demanded(model, all)),
        "utility": text(&found.utility),
        "utility_symbol": model.utility_name,
        "method": vocabulary::method(found.method),
        "checked": {
            "shephard": found.checked.shephard,
            "roy": found.checked.roy,
            "inverse": found.checked.inverse,
        },
        "conditions": found.conditions.iter().map(|e| format!("{} != 0", formula(&model.field, e))).collect::<Vec<_>>(),
        "cases": found.cases.iter().map(|each| case(model, each)).collect::<Vec<_>>(),
    })
}

/// The Marshallian demands of given preferences, where they are choices with all quantities positive, points where they
/// are not, and pairs of goods of which at most one is bought unless their prices stand in the given ratio.
fn demanded(model: &Model, demanded: &Demanded) -> Json {
    let name = |good: usize| model.goods.get(good).map(|good| good.name.clone()).unwrap_or_default();
    let quantity = |good: usize| demanded.quantities.get(good).map(|x| formula(&model.field, x)).unwrap_or_default();
    let marshallian: Map<String, Json> =
        (0..demanded.quantities.len()).map(|good| (name(good), json!(quantity(good)))).collect();
    let corner =
        |(good, witness): &(usize, Witness)| json!({"good": name(*good), "witness": claim_witness(model, witness)});
    let rate = |(i, j, rate): &(usize, usize, Element)| json!({"goods": [name(*i), name(*j)], "rate_of_substitution": formula(&model.field, rate)});
    json!({
        "marshallian": marshallian,
        "interior": demanded.doubtful.iter().map(|good| format!("{} > 0", quantity(*good))).collect::<Vec<_>>(),
        "corners": demanded.corners.iter().map(corner).collect::<Vec<_>>(),
        "constant_rates": demanded.constant_rates.iter().map(rate).collect::<Vec<_>>(),
    })
}

fn case(model: &Model, case: &Case) -> Json {
    let own = &case.model.field;
    let when = |(var, value): &(Var, Element)| {
        format!("{} = {}", plain(&model.field.variable_formula(*var)), formula(&model.field, value))
    };
    let (expenditure, indirect) = match &case.recovered {
        Recovered::Found(found) => (found.expenditure.as_ref(), found.indirect_utility.as_ref()),
        Recovered::NotFound { .. } => (None, None),
    };
    json!({
        "when": case.when.iter().map(when).collect::<Vec<_>>(),
        "expenditure": expenditure.map(|e| formula(own, e)),
        "indirect_utility": indirect.map(|e| formula(own, e)),
    })
}

/// A point at which a claim fails.
pub(super) fn claim_witness(model: &Model, witness: &Witness) -> Json {
    json!({"point": point(&model.field, &witness.point), "where": "claim", "value": value(&witness.value)})
}

fn claim(model: &Model, claim: &Claim, finding: &ClaimFinding) -> Json {
    let witness = finding.witness.as_ref().map(|witness| claim_witness(model, witness));
    json!({
        "claim": claim.text,
        "verdict": vocabulary::verdict(finding.verdict),
        "witness": witness,
        "correct": finding.correct.as_ref().map(|e| formula(&model.field, e)),
        "difference": finding.difference.as_ref().map(|difference| pointed(model, difference)),
        "reason": finding.reason,
    })
}

/// Where a refuted claim and what is right differ.
fn pointed(model: &Model, difference: &Difference) -> Json {
    let (kind, claimed, right) = match difference {
        Difference::Sign => ("sign", None, None),
        Difference::LacksFactor(e) => ("lacks_factor", None, Some(e)),
        Difference::ExtraFactor(e) => ("extra_factor", Some(e), None),
        Difference::OtherFactor { claimed, right } => ("other_factor", Some(claimed), Some(right)),
        Difference::LacksTerm(e) => ("lacks_term", None, Some(e)),
        Difference::ExtraTerm(e) => ("extra_term", Some(e), None),
        Difference::TermSign(e) => ("term_sign", Some(e), None),
        Difference::TermFactor { term, factor } => ("term_lacks_factor", Some(term), Some(factor)),
        Difference::OtherTerm { claimed, right } => ("other_term", Some(claimed), Some(right)),
    };
    let print = |e: Option<&Element>| e.map(|e| formula(&model.field, e));
    json!({"kind": kind, "claimed": print(claimed), "right": print(right)})
}

/// What steps lean on that does not follow from the domain, each once, in the order of the derivation.
fn side_conditions(vetting: &Vetting) -> Vec<String> {
    use crate::algebra::field::Relation;
    let mut out: Vec<String> = Vec::new();
    for side in vetting.essential_steps().iter().flat_map(|step| step.sides()).filter(|side| !side.discharged) {
        let sign = match side.relation {
            Relation::Positive => "> 0",
            Relation::NonNegative => ">= 0",
            Relation::NonZero => "!= 0",
        };
        let words = format!("{} {sign}", formula(&vetting.model.field, &side.element));
        if !out.contains(&words) {
            out.push(words);
        }
    }
    out
}

fn stored(vetting: &Vetting) -> Json {
    let field = &vetting.model.field;
    let print = |e: &Element| plain(&field.formula(e));
    serde_json::to_value(store(field, &vetting.derivation, &print)).unwrap_or(Json::Null)
}
