//! The structure of a demand system as JSON: `null` for what could not be shown either way.

use serde_json::{Map, Value as Json, json};

use crate::algebra::generator::Element;
use crate::conditions::{ClaimFinding, Verdict};
use crate::model::Model;
use crate::structure::elasticities::{Elasticities, Elasticity, Form};
use crate::structure::{AllResponses, Property, Response, Responses, Structure, Tendency};
use crate::vetting::Vetting;

use super::formula_text::plain;
use super::json::{claim_witness, formula};
use super::vocabulary;

/// Longer elements are not looked at for a shorter form.
const SHORT: usize = 20;
/// Longer formulas are left out.
const LONGEST: usize = 2000;

/// The facts, the responses and the elasticities; `null` where neither was asked for.
pub fn structure(vetting: &Vetting) -> Json {
    if vetting.structure.is_none() && vetting.responses.is_none() {
        return Json::Null;
    }
    let mut all = Map::new();
    all.extend(vetting.structure.iter().flat_map(|found| facts(&vetting.model, found)));
    all.extend(vetting.responses.iter().flat_map(|found| responses(&vetting.model, found)));
    Json::Object(all)
}

fn facts(model: &Model, structure: &Structure) -> Map<String, Json> {
    let fact = |property: Property| structure.on(property).map_or(Json::Null, |finding| settled(model, finding));
    let groups: Map<String, Json> = model
        .groups
        .iter()
        .enumerate()
        .map(|(place, (name, _))| (name.clone(), fact(Property::Separable(place))))
        .collect();
    let rank = structure.rank.as_ref();
    let numeraire = structure.numeraire.and_then(|good| model.goods.get(good)).map(|good| good.name.as_str());
    let all = [
        ("homothetic", fact(Property::Homothetic)),
        ("quasi_homothetic", fact(Property::QuasiHomothetic)),
        ("piglog", fact(Property::Piglog)),
        ("pigl", fact(Property::Pigl)),
        ("pigl_exponent", json!(structure.exponent.as_ref().map(|e| formula(&model.field, e)))),
        ("rank", json!(rank.filter(|rank| rank.exact).map(|rank| rank.value))),
        ("rank_at_least", json!(rank.map(|rank| rank.value))),
        ("directly_additive", fact(Property::DirectlyAdditive)),
        ("indirectly_additive", fact(Property::IndirectlyAdditive)),
        ("quasi_linear", fact(Property::QuasiLinear)),
        ("quasi_linear_in", json!(numeraire)),
        ("separable", Json::Object(groups)),
    ];
    all.into_iter().map(|(key, value)| (key.to_string(), value)).collect()
}

fn responses(model: &Model, all: &AllResponses) -> Map<String, Json> {
    let goods: Map<String, Json> =
        model.goods.iter().zip(&all.goods).map(|(good, r)| (good.name.clone(), of_good(model, r))).collect();
    let parts = [
        ("goods", Json::Object(goods)),
        ("gross", pairs(model, &all.pairs.gross)),
        ("net", pairs(model, &all.pairs.net)),
        ("elasticities", elasticities(model, &all.elasticities)),
    ];
    parts.into_iter().map(|(key, value)| (key.to_string(), value)).collect()
}

fn settled(model: &Model, finding: &ClaimFinding) -> Json {
    match finding.verdict {
        Verdict::Undecided => Json::Null,
        verdict => json!({
            "verdict": vocabulary::verdict(verdict),
            "witness": finding.witness.as_ref().map(|witness| claim_witness(model, witness)),
        }),
    }
}

fn of_good(model: &Model, responses: &Responses) -> Json {
    json!({
        "income": response(model, &responses.income, ["normal", "inferior"]),
        "share": response(model, &responses.share, ["luxury", "necessity"]),
        "own_price": response(model, &responses.own_price, ["giffen", "ordinary"]),
    })
}

/// The sign of a response, its name where the sign is the same everywhere, and points at which it is one or the other
/// where that is all that is known.
fn response(model: &Model, response: &Response, [rising, falling]: [&str; 2]) -> Json {
    let (sign, word) = match response.tendency {
        Some(Tendency::Positive) => (Some("> 0"), Some(rising)),
        Some(Tendency::NonNegative) => (Some(">= 0"), None),
        Some(Tendency::Zero) => (Some("= 0"), None),
        Some(Tendency::NonPositive) => (Some("<= 0"), None),
        Some(Tendency::Negative) => (Some("< 0"), Some(falling)),
        Some(Tendency::Varies) | None => (None, None),
    };
    let witness = |witness: &Option<crate::conditions::Witness>| {
        witness.as_ref().map(|witness| claim_witness(model, witness)["point"].clone())
    };
    json!({
        "sign": sign,
        "kind": word,
        "positive_at": witness(&response.positive),
        "negative_at": witness(&response.negative),
    })
}

fn pairs(model: &Model, all: &[(usize, usize, Response)]) -> Json {
    let name = |good: usize| model.goods.get(good).map(|good| good.name.as_str());
    let pair = |(i, j, found): &(usize, usize, Response)| {
        let kind = match found.tendency? {
            Tendency::Positive => "substitutes",
            Tendency::Negative => "complements",
            Tendency::Zero => "independent",
            Tendency::NonNegative => "not complements",
            Tendency::NonPositive => "not substitutes",
            Tendency::Varies => "varies",
        };
        Some(json!({"good": name(*i), "price": name(*j), "kind": kind}))
    };
    Json::Array(all.iter().filter_map(pair).collect())
}

fn elasticities(model: &Model, all: &Elasticities) -> Json {
    let name = |good: usize| model.goods.get(good).map(|good| good.name.clone()).unwrap_or_default();
    let value = |elasticity: &Elasticity| {
        let text = elasticity.forms.iter().filter_map(|form| in_prices_and_income(model, form)).next();
        json!(text.filter(|text| text.len() <= LONGEST))
    };
    let in_prices = |list: &[Elasticity]| {
        let mut rows: Map<String, Json> = Map::new();
        for elasticity in list {
            let row = rows.entry(name(elasticity.good)).or_insert_with(|| Json::Object(Map::new()));
            if let (Some(price), Json::Object(row)) = (elasticity.price, row) {
                row.insert(name(price), value(elasticity));
            }
        }
        Json::Object(rows)
    };
    let income: Map<String, Json> = all.income.iter().map(|e| (name(e.good), value(e))).collect();
    json!({
        "income": income,
        "price": in_prices(&all.price),
        "compensated": in_prices(&all.compensated),
        "left_out": match (all.left_out, all.own_prices_only) {
            (true, _) => json!("all, for the number of goods"),
            (_, true) => json!("those in the prices of other goods"),
            _ => Json::Null,
        },
    })
}

/// A form with the shares put in.
fn in_prices_and_income(model: &Model, form: &Form) -> Option<String> {
    let text = |e: &Element| if e.len() <= SHORT { formula(&model.field, e) } else { plain(&model.field.formula(e)) };
    let share = |good: usize| model.demands.get(good).map(|demand| text(&demand.share));
    Some(match form {
        Form::Whole(e) => text(e),
        Form::Affine { constant, slope, good } => format!("{} + ({})*({})", text(constant), text(slope), share(*good)?),
        Form::OverShare { constant, plus, numerator, less, below } => {
            let less = match less {
                Some((good, coefficient)) => format!(" - ({})*({})", text(coefficient), share(*good)?),
                None => String::new(),
            };
            let plus = match plus {
                Some(good) => format!(" + {}", share(*good)?),
                None => String::new(),
            };
            format!("({}{less})/({}){plus} + {constant}", text(numerator), share(*below)?).replace("+ -", "- ")
        }
    })
}
