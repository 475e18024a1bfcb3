//! Verdicts on curvature against eigenvalues from NumPy, and against Z3 where a system is rational. Skipped, with a line
//! that says so, where there is no Python with both.

use std::collections::BTreeMap;
use std::io::Write;
use std::process::{Command, Stdio};
use std::rc::Rc;

use mainspring::algebra::evaluation::Point;
use mainspring::conditions::{Condition, Verdict};
use mainspring::language::Source;
use mainspring::{Allowance, Part, Vetting, read, vet};
use serde_json::{Value as Json, json};

struct System {
    goods: &'static str,
    declarations: &'static str,
    quantities: &'static [&'static str],
    /// What is positive by assumption.
    facts: &'static [&'static str],
    rational: bool,
}

const SYSTEMS: [System; 8] = [
    System {
        goods: "x, y, z",
        declarations: "prices p, q, r\nincome m\nassume m > p + 2*q + r",
        quantities: &["1 + (m-p-2*q-r)/(2*p)", "2 + (m-p-2*q-r)/(4*q)", "1 + (m-p-2*q-r)/(4*r)"],
        facts: &["m - p - 2*q - r"],
        rational: true,
    },
    System {
        goods: "x, y, z",
        declarations: "prices p, q, r\nincome m",
        quantities: &["1 + (m-p-2*q-r)/(2*p)", "2 + (m-p-2*q-r)/(4*q)", "1 + (m-p-2*q-r)/(4*r)"],
        facts: &[],
        rational: true,
    },
    System {
        goods: "x, y",
        declarations: "prices p, q\nincome m",
        quantities: &["m/p - 1 - (q/p)^2/1000000", "p/q + q/(1000000*p)"],
        facts: &[],
        rational: true,
    },
    System {
        goods: "x, y, z",
        declarations: "prices p, q, r\nincome m",
        quantities: &["10 - 2*p/r - q/r", "8 - p/r - 3*q/r", "m/r - (p/r)*(10-2*p/r-q/r) - (q/r)*(8-p/r-3*q/r)"],
        facts: &[],
        rational: true,
    },
    System {
        goods: "x, y, z",
        declarations: "prices p, q, r\nincome m",
        quantities: &["10 - p/r - 2*q/r", "8 - 2*p/r - q/r", "m/r - (p/r)*(10-p/r-2*q/r) - (q/r)*(8-2*p/r-q/r)"],
        facts: &[],
        rational: true,
    },
    System {
        goods: "x, y, z",
        declarations: "prices p, q, r\nincome m",
        quantities: &[
            "m/p*(1/3 - ln(p/r)/9 + ln(q/r)/20)",
            "m/q*(1/3 + ln(p/r)/20 - ln(q/r)/8)",
            "m/r*(1/3 + ln(p/r)*11/180 + ln(q/r)*3/40)",
        ],
        facts: &[],
        rational: false,
    },
    System {
        goods: "x, y, z",
        declarations: "prices p, q, r\nincome m",
        quantities: &[
            "m/p*(1/3 + ln(p/r)/20 - ln(q/r)/40)",
            "m/q*(1/3 - ln(p/r)/40 - ln(q/r)/8)",
            "m/r*(1/3 - ln(p/r)/40 + ln(q/r)*3/20)",
        ],
        facts: &[],
        rational: false,
    },
    System {
        goods: "x, y, z",
        declarations: "prices p, q, r\nincome m\nparameters s\nassume s > 0, s != 1",
        quantities: &[
            "m*p^(-s)/(p^(1-s)+q^(1-s)+r^(1-s))",
            "m*q^(-s)/(p^(1-s)+q^(1-s)+r^(1-s))",
            "m*r^(-s)/(p^(1-s)+q^(1-s)+r^(1-s))",
        ],
        facts: &[],
        rational: false,
    },
];

fn python() -> Option<String> {
    let named = std::env::var("MAINSPRING_PYTHON").ok();
    let program = named.clone().unwrap_or_else(|| "python3".to_string());
    let asks = ["-c", "import sympy, numpy, z3"];
    let there = Command::new(&program).args(asks).output().is_ok_and(|o| o.status.success());
    assert!(there || named.is_none(), "{program} was to have SymPy, NumPy and Z3");
    if !there {
        println!("not checked: curvature against NumPy and Z3 (there is no Python with them)");
    }
    there.then_some(program)
}

fn vetted(system: &System) -> Vetting {
    let goods = system.goods.split(", ").zip(system.quantities);
    let demands: String = goods.map(|(good, x)| format!("demand {good} = {x}\n")).collect();
    let source = Source::new("model", format!("goods {}\n{}\n{demands}", system.goods, system.declarations));
    let model = read(&source, &[], Allowance::default()).unwrap_or_else(|unread| panic!("{unread:?}"));
    vet(Rc::new(model), &[Part::Condition(Condition::Curvature)], Allowance::default())
}

/// For each point the least quantity and the largest eigenvalue; and the answer of Z3.
fn outside(python: &str, system: &System, vetting: &Vetting, points: &[Point]) -> (Vec<(f64, f64)>, Option<String>) {
    let model = &vetting.model;
    let name = |var| model.field.name(var).unwrap();
    let named = |point: &Point| -> BTreeMap<String, String> {
        point.iter().filter_map(|(var, value)| Some((model.field.name(*var)?, value.to_string()))).collect()
    };
    let job = json!({
        "prices": model.prices.iter().map(|var| name(*var)).collect::<Vec<_>>(),
        "income": name(model.income.unwrap()),
        "quantities": system.quantities,
        "facts": system.facts,
        "points": points.iter().map(|p| named(p).into_iter().collect::<Vec<_>>()).collect::<Vec<_>>(),
        "rational": system.rational,
    });
    let script = concat!(env!("CARGO_MANIFEST_DIR"), "/tests/oracle/curvature.py");
    let mut child = Command::new(python).arg(script).stdin(Stdio::piped()).stdout(Stdio::piped()).spawn().unwrap();
    child.stdin.take().unwrap().write_all(job.to_string().as_bytes()).unwrap();
    let output = child.wait_with_output().unwrap();
    let found: Json = serde_json::from_slice(&output.stdout).unwrap_or_else(|error| panic!("{error}: {job:#}"));
    let pair = |pair: &Json| (pair[0].as_f64().unwrap(), pair[1].as_f64().unwrap());
    (found["points"].as_array().unwrap().iter().map(pair).collect(), found["z3"].as_str().map(str::to_string))
}

#[test]
fn verdicts_agree_with_eigenvalues_at_many_points_and_with_z3() {
    let Some(python) = python() else { return };
    let mut answered = 0;
    for system in &SYSTEMS {
        let vetting = vetted(system);
        let finding = vetting.finding(Condition::Curvature).unwrap();
        let quantities: Vec<_> = vetting.model.demands.iter().map(|demand| demand.quantity.clone()).collect();
        let mut points: Vec<Point> = vetting.model.points().with_positive(&quantities).take(40).collect();
        let sampled = points.len();
        let marked = finding.witness.iter().map(|w| &w.point).chain(&finding.regular_point);
        points.extend(marked.cloned());
        let (found, z3) = outside(&python, system, &vetting, &points);
        let described = format!("{:?}, {:?}: {:?}", system.quantities, finding.verdict, finding.witness);
        if finding.verdict == Verdict::Proven {
            assert!(found.iter().all(|(_, eigenvalue)| *eigenvalue < 1e-9), "{described}");
        }
        let mut marked = found[sampled..].iter();
        if finding.witness.is_some() {
            let (least, eigenvalue) = marked.next().unwrap();
            assert!(*least > 0.0 && *eigenvalue > 1e-12, "{described}: {eigenvalue}");
        }
        if finding.regular_point.is_some() {
            let (least, eigenvalue) = marked.next().unwrap();
            assert!(*least > 0.0 && *eigenvalue < 1e-9, "{described}: {eigenvalue}");
        }
        assert_ne!(finding.verdict, Verdict::Undecided, "{described}");
        match z3.as_deref() {
            Some("unsat") => assert_eq!(finding.verdict, Verdict::Proven, "{described}"),
            Some("sat") => assert_ne!(finding.verdict, Verdict::Proven, "{described}"),
            _ => continue,
        }
        answered += 1;
    }
    assert!(answered >= 3, "Z3 answered {answered} times only");
}
