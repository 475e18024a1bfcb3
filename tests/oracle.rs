//! Verdicts and closed forms against SymPy: its own reading of the formulas, its own derivatives, 40 digits at rational
//! points. Skipped, with a line that says so, where there is no Python with SymPy.

use std::io::Write;
use std::process::{Command, Stdio};
use std::rc::Rc;

use mainspring::conditions::{Condition, Verdict};
use mainspring::language::Source;
use mainspring::model::Model;
use mainspring::recovery::Recovered;
use mainspring::render::formula_text::plain;
use mainspring::{Allowance, Part, Vetting, read, vet};
use serde_json::{Value as Json, json};

/// Declarations, and the demanded quantities of each good.
type System = (&'static str, &'static [&'static str]);

const TRUE: [System; 6] = [
    ("goods x, y\nprices p, q\nincome m\nparameters a\nassume 0 < a < 1", &["a*m/p", "(1-a)*m/q"]),
    (
        "goods x, y\nprices p, q\nincome m\nparameters a, b, s\nassume a > 0, b > 0, s > 0, s != 1",
        &["a*m*p^(-s)/(a*p^(1-s)+b*q^(1-s))", "b*m*q^(-s)/(a*p^(1-s)+b*q^(1-s))"],
    ),
    (
        "goods x, y, z\nprices p, q, r\nincome m\nparameters a, b, c\nassume a > 0, b > 0, c > 0, m > a*p + b*q + c*r",
        &["a+(m-a*p-b*q-c*r)/(3*p)", "b+(m-a*p-b*q-c*r)/(3*q)", "c+(m-a*p-b*q-c*r)/(3*r)"],
    ),
    (
        "goods x, y\nprices p, q\nincome m\nparameters a, b, c\nassume a > 0, b > 0, c > 0",
        &["m*(a+b*sqrt(q/p))/(a*p+2*b*sqrt(p*q)+c*q)", "m*(c+b*sqrt(p/q))/(a*p+2*b*sqrt(p*q)+c*q)"],
    ),
    (
        "goods x, y\nprices p, q\nincome m\nparameters a, b, g",
        &[
            "m/p*(a+g*ln(p/q)+b*(ln(m)-a*ln(p)-(1-a)*ln(q)-g/2*ln(p/q)^2))",
            "m/q*(1-a-g*ln(p/q)-b*(ln(m)-a*ln(p)-(1-a)*ln(q)-g/2*ln(p/q)^2))",
        ],
    ),
    (
        "goods x, y\nprices p, q\nincome m\nparameters a, h, k\nassume 0 < a < 1, h > 0, k > 0, m > h*q",
        &["(m-h*q)*(a/p-k/q)", "h+(m-h*q)/q*(1-a+k*p/q)"],
    ),
];

/// Each fails one condition at least.
const FALSE: [System; 3] = [
    ("goods x, y\nprices p, q\nincome m\nparameters a\nassume 0 < a < 1/2", &["a*m/p", "a*m/q"]),
    (
        "goods x, y\nprices p, q\nincome m\nparameters a\nassume 0 < a < 1",
        &["a*m^2/(p*(m+q^2))", "m/q-a*m^2/(q*(m+q^2))"],
    ),
    (
        "goods x, y, z\nprices p, q, r\nincome m\nparameters g\nassume g > 0",
        &["m/p*(1/3+g*ln(q/r))", "m/q*(1/3)", "m/r*(1/3-g*ln(q/r))"],
    ),
];

fn python() -> Option<String> {
    let named = std::env::var("MAINSPRING_PYTHON").ok();
    let program = named.clone().unwrap_or_else(|| "python3".to_string());
    let there = Command::new(&program).args(["-c", "import sympy"]).output().is_ok_and(|o| o.status.success());
    assert!(there || named.is_none(), "{program} was to have SymPy");
    if !there {
        println!("not checked: results against SymPy (there is no Python with it)");
    }
    there.then_some(program)
}

fn vetted((declarations, quantities): &System) -> Vetting {
    let goods = declarations.lines().next().unwrap().trim_start_matches("goods ");
    let demands = goods.split(", ").zip(*quantities).map(|(good, x)| format!("demand {good} = {x}\n"));
    let source = Source::new("model", format!("{declarations}\n{}", demands.collect::<String>()));
    let model = read(&source, &[], Allowance::default()).unwrap_or_else(|unread| panic!("{unread:?}"));
    let asked = [Condition::Homogeneity, Condition::AddingUp, Condition::Symmetry].map(Part::Condition);
    vet(Rc::new(model), &[&asked[..], &[Part::Recovery]].concat(), Allowance::default())
}

fn points(model: &Model) -> Vec<Vec<(String, String)>> {
    let quantities: Vec<_> = model.demands.iter().map(|demand| demand.quantity.clone()).collect();
    let named = |point: mainspring::algebra::evaluation::Point| {
        point.iter().filter_map(|(var, value)| Some((model.field.name(*var)?, value.to_string()))).collect()
    };
    model.points().with_positive(&quantities).step_by(3).take(5).map(named).collect()
}

/// SymPy's failures, condition by condition.
fn failures(python: &str, (_, quantities): &System, vetting: &Vetting) -> Json {
    let model = &vetting.model;
    let name = |var| model.field.name(var).unwrap();
    let mut job = json!({
        "prices": model.prices.iter().map(|var| name(*var)).collect::<Vec<_>>(),
        "income": name(model.income.unwrap()),
        "utility": model.utility_name,
        "quantities": quantities,
        "points": points(model),
    });
    if let Some(Recovered::Found(found)) = &vetting.recovered {
        let text = |e: &Option<_>| e.as_ref().map(|e| plain(&model.field.formula(e)));
        job["expenditure"] = json!(text(&found.expenditure));
        job["indirect_utility"] = json!(text(&found.indirect_utility));
    }
    let script = concat!(env!("CARGO_MANIFEST_DIR"), "/tests/oracle/check.py");
    let mut child = Command::new(python).arg(script).stdin(Stdio::piped()).stdout(Stdio::piped()).spawn().unwrap();
    child.stdin.take().unwrap().write_all(job.to_string().as_bytes()).unwrap();
    let output = child.wait_with_output().unwrap();
    serde_json::from_slice(&output.stdout).unwrap_or_else(|error| panic!("{error}: {job:#}"))
}

#[test]
fn what_is_proven_holds_and_closed_forms_are_right() {
    let Some(python) = python() else { return };
    for system in &TRUE {
        let vetting = vetted(system);
        for finding in &vetting.findings {
            assert_eq!(finding.verdict, Verdict::Proven, "{}: {:?}", system.0, finding.condition);
        }
        let found = failures(&python, system, &vetting);
        for key in ["adding_up", "homogeneity", "symmetry", "roy", "inverse", "shephard"] {
            assert!(found[key].as_f64().is_some_and(|failure| failure < 1e-30), "{}: {key}: {found}", system.0);
        }
    }
}

#[test]
fn what_fails_is_not_proven() {
    let Some(python) = python() else { return };
    for system in &FALSE {
        let vetting = vetted(system);
        let found = failures(&python, system, &vetting);
        let keys = [("homogeneity", Condition::Homogeneity), ("adding_up", Condition::AddingUp)];
        let mut failing = 0;
        for (key, condition) in keys.into_iter().chain([("symmetry", Condition::Symmetry)]) {
            let fails = found[key].as_f64().unwrap() > 1e-20;
            let proven = vetting.finding(condition).unwrap().verdict == Verdict::Proven;
            assert_eq!(proven, !fails, "{}: {key}: {found}", system.0);
            failing += usize::from(fails);
        }
        assert!(failing > 0, "{} was to fail", system.0);
    }
}
