//! Published results: each system is vetted, and the preferences recovered are the published ones up to a relabelling
//! of utility, which the program proves.

mod results;

use std::rc::Rc;
use std::time::Duration;

use mainspring::algebra::generator::Element;
use mainspring::algebra::polynomial::Poly;
use mainspring::conditions::{Condition, Verdict};
use mainspring::language::Source;
use mainspring::model::Model;
use mainspring::recovery::Recovered;
use mainspring::{Allowance, Part, Vetting, read, vet};
use results::{Curvature, PUBLISHED, Preferences, Published, head};

/// The system, with the published function as the left side of a claim at its end.
fn vetted(result: &Published, parts: &[Part]) -> Vetting {
    let (Preferences::Indirect(formula) | Preferences::Expenditure(formula)) = result.preferences;
    let text = format!("{}utility u\nclaim {formula} > 0\n", head(result));
    let allowance = Allowance { work: 15_000_000, time: Duration::from_secs(60), memory_mib: 2048 };
    let model = read(&Source::new("published", text), &[], allowance);
    let model = model.unwrap_or_else(|unread| panic!("{}: {unread:?}", result.source));
    vet(Rc::new(model), parts, allowance)
}

fn published_function(model: &Model) -> &Element {
    model.claims[0].sides().expect("a claim with two sides").0
}

/// Whether v and another function of prices and income have the same level sets.
fn same_level_sets(model: &Model, v: &Element, other: &Element) -> bool {
    let field = &model.field;
    let income = model.income.expect("an income");
    model.prices.iter().all(|price| {
        let across = field.product(&field.derivative(v, *price), &field.derivative(other, income));
        let along = field.product(&field.derivative(other, *price), &field.derivative(v, income));
        field.is_zero(&(&field.current(&across) - &field.current(&along)))
    })
}

/// Whether v, at the published income e(p, u), depends on u alone.
fn depends_on_utility_alone(model: &Model, v: &Element, e: &Element) -> bool {
    let field = &model.field;
    let income = model.income.expect("an income");
    // dv/dp along e: v_p(p, e) + v_m(p, e) e_p
    let there = |element: &Element| field.substitute(element, &[(income, e.clone())]).expect("e is an income");
    let along = there(&field.derivative(v, income));
    model.prices.iter().all(|price| {
        let moved = field.product(&along, &field.derivative(e, *price));
        let direct = there(&field.derivative(v, *price));
        field.is_zero(&(&field.current(&direct) + &field.current(&moved)))
    })
}

/// Shephard's lemma for a published e, where v is not to be evaluated at it.
fn satisfies_shephard(model: &Model, e: &Element) -> bool {
    let field = &model.field;
    let income = model.income.expect("an income");
    model.prices.iter().zip(&model.demands).all(|(price, demand)| {
        let there = field.substitute(&demand.quantity, &[(income, e.clone())]).expect("e is an income");
        field.is_zero(&(&there - &field.current(&field.derivative(e, *price))))
    })
}

#[test]
fn every_result_has_its_conditions() {
    for result in &PUBLISHED {
        let stated =
            |condition: &Condition| *condition != Condition::Curvature || result.curvature != Curvature::Unstated;
        let parts: Vec<Part> = Condition::ALL.into_iter().filter(stated).map(Part::Condition).collect();
        let vetting = vetted(result, &parts);
        for finding in &vetting.findings {
            let (condition, verdict, source) = (finding.condition, finding.verdict, result.source);
            let reason = finding.reason.as_deref().unwrap_or("");
            match (condition, result.curvature) {
                (Condition::Curvature, Curvature::Everywhere) => {
                    let wrong = matches!(verdict, Verdict::Refuted | Verdict::Regional | Verdict::Conditional);
                    assert!(!wrong, "{source}: curvature is called {verdict:?}, {:?}", finding.witness);
                    println!("{source} ({:?}): curvature {verdict:?} {reason}", result.evidence);
                }
                (Condition::Curvature, Curvature::SomewhereNot) => {
                    assert_ne!(verdict, Verdict::Proven, "{source}: {}", finding.method);
                    println!("{source} ({:?}): curvature {verdict:?} {reason}", result.evidence);
                }
                _ => assert_eq!(verdict, Verdict::Proven, "{source}: {condition:?} {reason}"),
            }
        }
    }
}

#[test]
fn the_published_preferences_are_recovered() {
    let mut missing = Vec::new();
    for result in &PUBLISHED {
        let vetting = vetted(result, &[Part::Recovery]);
        let model = &vetting.model;
        let known = published_function(model);
        let Some(Recovered::Found(found)) = &vetting.recovered else {
            missing.push(result.source);
            continue;
        };
        let v = found.indirect_utility.as_ref().expect("an indirect utility function");
        match result.preferences {
            Preferences::Indirect(_) => {
                assert!(same_level_sets(model, v, known), "{} ({:?})", result.source, result.evidence)
            }
            Preferences::Expenditure(_) => {
                let utility = Poly::var(model.utility);
                assert!(!model.field.is_zero(&utility) && model.field.depends_on(known, model.utility));
                let same = depends_on_utility_alone(model, v, known) || satisfies_shephard(model, known);
                assert!(same, "{}", result.source);
            }
        }
    }
    assert!(missing.is_empty(), "nothing was found for {missing:#?}");
}
