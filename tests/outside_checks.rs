//! What the program says of the examples, held against an evaluation that shares nothing with it but the reading of
//! the file: slopes carried along in floating point, an ordinary differential equation, eigenvalues.

mod outside;

use std::path::{Path, PathBuf};
use std::rc::Rc;

use mainspring::conditions::{Condition, Verdict};
use mainspring::language::{self, Claim, Expr, Source, Statement};
use mainspring::model::Model;
use mainspring::recovery::Recovered;
use mainspring::render::formula_text::plain;
use mainspring::{Allowance, Part, Vetting, read, vet};
use num_traits::ToPrimitive;
use outside::dual::Dual;
use outside::{Outside, Values};

fn examples() -> Vec<(PathBuf, String)> {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("examples");
    let mut paths: Vec<PathBuf> = std::fs::read_dir(folder).unwrap().map(|entry| entry.unwrap().path()).collect();
    paths.retain(|path| path.extension().is_some_and(|extension| extension == "demand"));
    paths.sort();
    paths.into_iter().map(|path| (path.clone(), std::fs::read_to_string(&path).unwrap())).collect()
}

fn vetted(name: &str, text: &str, asked: &[Part]) -> Vetting {
    let source = Source::new(name, text);
    let model = read(&source, &[], Allowance::default()).unwrap_or_else(|unread| panic!("{name}: {unread:?}"));
    vet(Rc::new(model), asked, Allowance::default())
}

/// Admissible points with positive quantities, from the program's own search, and checked against the file here.
fn points(model: &Model, outside: &Outside, wanted: usize) -> Vec<Values> {
    let quantities: Vec<_> = model.demands.iter().map(|demand| demand.quantity.clone()).collect();
    let mut found = Vec::new();
    for point in model.points().with_positive(&quantities).take(20 * wanted) {
        let named = point.iter().filter_map(|(var, value)| Some((model.field.name(*var)?, value.to_f64()?)));
        let values: Values = named.collect();
        assert!(outside.violation(&values) < 1e-9, "the point breaks an assumption: {values:?}");
        let positive = outside.quantities(&values).iter().all(|x| x.value > 0.0 && x.value < 1e6);
        if positive && values.values().all(|value| value.abs() < 1e3) {
            found.push(values);
        }
        if found.len() == wanted {
            break;
        }
    }
    found
}

/// The Slutsky matrix ∂x_i/∂p_j + x_j ∂x_i/∂m.
fn slutsky(x: &[Dual]) -> Vec<Vec<f64>> {
    let entry = |i: &Dual, j: usize| i.slope[j] + x[j].value * i.slope.last().unwrap();
    x.iter().map(|i| (0..x.len()).map(|j| entry(i, j)).collect()).collect()
}

/// The largest failure of a condition at a point, relative to the size of what is compared.
fn failure(condition: Condition, outside: &Outside, values: &Values) -> f64 {
    let x = outside.quantities(values);
    let n = x.len();
    let p: Vec<f64> = outside.prices.iter().map(|name| values[name]).collect();
    let m = values[outside.income.as_ref().unwrap()];
    match condition {
        Condition::AddingUp => (p.iter().zip(&x).map(|(p, x)| p * x.value).sum::<f64>() - m).abs() / m,
        Condition::Homogeneity => {
            let movers: Vec<f64> = outside.movers().iter().map(|name| values[name]).collect();
            let euler = |x: &Dual| {
                let terms: Vec<f64> = movers.iter().zip(&x.slope).map(|(at, slope)| at * slope).collect();
                terms.iter().sum::<f64>().abs() / (1.0 + terms.iter().map(|t| t.abs()).sum::<f64>())
            };
            x.iter().map(euler).fold(0.0, f64::max)
        }
        Condition::Symmetry => {
            let s = slutsky(&x);
            let gap = |i: usize, j: usize| (s[i][j] - s[j][i]).abs() / (1.0 + s[i][j].abs() + s[j][i].abs());
            (0..n).flat_map(|i| (0..i).map(move |j| (i, j))).map(|(i, j)| gap(i, j)).fold(0.0, f64::max)
        }
        Condition::Curvature => {
            let s = slutsky(&x);
            let size = s.iter().flatten().fold(1e-300, |size: f64, entry| size.max(entry.abs()));
            largest_eigenvalue(&s).max(0.0) / size
        }
    }
}

/// The largest eigenvalue of the symmetric part, by Jacobi's rotations.
fn largest_eigenvalue(matrix: &[Vec<f64>]) -> f64 {
    let n = matrix.len();
    let mut a: Vec<Vec<f64>> = (0..n).map(|i| (0..n).map(|j| (matrix[i][j] + matrix[j][i]) / 2.0).collect()).collect();
    for _ in 0..60 {
        for i in 0..n {
            for j in 0..i {
                if a[i][j].abs() < 1e-300 {
                    continue;
                }
                let theta = (a[j][j] - a[i][i]) / (2.0 * a[i][j]);
                let t = if theta == 0.0 { 1.0 } else { theta.signum() / (theta.abs() + (theta * theta + 1.0).sqrt()) };
                let c = 1.0 / (t * t + 1.0).sqrt();
                rotate(&mut a, i, j, c, t * c);
            }
        }
    }
    (0..n).map(|i| a[i][i]).fold(f64::NEG_INFINITY, f64::max)
}

fn rotate(a: &mut [Vec<f64>], i: usize, j: usize, c: f64, s: f64) {
    for row in a.iter_mut() {
        (row[i], row[j]) = (c * row[i] - s * row[j], s * row[i] + c * row[j]);
    }
    let (above, below) = (a[i].clone(), a[j].clone());
    a[i] = above.iter().zip(&below).map(|(x, y)| c * x - s * y).collect();
    a[j] = above.iter().zip(&below).map(|(x, y)| s * x + c * y).collect();
}

#[test]
fn verdicts_agree_with_slopes_and_eigenvalues() {
    for (path, text) in examples() {
        let name = path.display().to_string();
        let conditions: Vec<Part> = Condition::ALL.into_iter().map(Part::Condition).collect();
        let vetting = vetted(&name, &text, &conditions);
        let outside = Outside::read(&text);
        for finding in &vetting.findings {
            let failing = points(&vetting.model, &outside, 12)
                .into_iter()
                .find(|values| failure(finding.condition, &outside, values) > 1e-7);
            let proven = finding.verdict == Verdict::Proven;
            assert!(!(proven && failing.is_some()), "{name}: {:?} is not so at {failing:?}", finding.condition);
            if let Some(witness) = &finding.witness {
                let named = witness.point.iter();
                let values: Values =
                    named.filter_map(|(var, value)| Some((vetting.model.field.name(*var)?, value.to_f64()?))).collect();
                assert!(
                    outside.violation(&values) < 1e-9,
                    "{name}: {:?}: the witness breaks an assumption",
                    finding.condition
                );
                let fails = failure(finding.condition, &outside, &values);
                assert!(fails > 1e-12, "{name}: {:?} does not fail at {values:?}", finding.condition);
            }
        }
    }
}

/// A formula of a report, read again in the names of its model.
fn formula(model_text: &str, utility: &str, formula: &str) -> Expr {
    let declared: String =
        model_text.lines().filter(|line| !line.trim_start().starts_with("claim")).map(|l| format!("{l}\n")).collect();
    let text = format!("{declared}claim {formula} = {utility}\n");
    let source = Source::new("formula", text);
    let tree = language::read(&source).unwrap_or_else(|faults| panic!("{}", faults[0].render(&source)));
    let mut claims = tree.statements.into_iter().filter_map(|located| match located.statement {
        Statement::Claim(Claim::Relation(relation)) => Some(relation.first),
        _ => None,
    });
    claims.next_back().unwrap()
}

/// Income along the compensated path: de/dt = Σ x_i(p(t), e) dp_i/dt, by the classical Runge–Kutta method.
fn compensated_income(outside: &Outside, start: &Values, end: &Values) -> f64 {
    let income = outside.income.clone().unwrap();
    let at = |t: f64, e: f64| {
        let mut values = start.clone();
        for price in &outside.prices {
            values.insert(price.clone(), start[price] + t * (end[price] - start[price]));
        }
        values.insert(income.clone(), e);
        let x = outside.quantities(&values);
        outside.prices.iter().zip(&x).map(|(price, x)| x.value * (end[price] - start[price])).sum::<f64>()
    };
    let steps = 400;
    let h = 1.0 / f64::from(steps);
    (0..steps).fold(start[&income], |e, k| {
        let t = f64::from(k) * h;
        let k1 = at(t, e);
        let k2 = at(t + h / 2.0, e + h / 2.0 * k1);
        let k3 = at(t + h / 2.0, e + h / 2.0 * k2);
        let k4 = at(t + h, e + h * k3);
        e + h / 6.0 * (k1 + 2.0 * k2 + 2.0 * k3 + k4)
    })
}

/// A nearby point: every price up by a few percent, each by another share.
fn neighbour(outside: &Outside, values: &Values) -> Values {
    let mut near = values.clone();
    for (k, price) in outside.prices.iter().enumerate() {
        near.insert(price.clone(), values[price] * (1.02 + 0.013 * k as f64));
    }
    near
}

#[test]
fn closed_forms_solve_shephards_system() {
    let mut checked = 0;
    for (path, text) in examples() {
        let name = path.display().to_string();
        let vetting = vetted(&name, &text, &[Part::Recovery]);
        let Some(Recovered::Found(found)) = &vetting.recovered else { continue };
        let (Some(e), Some(v)) = (&found.expenditure, &found.indirect_utility) else { continue };
        let (model, outside) = (&vetting.model, Outside::read(&text));
        let u = model.utility_name.as_str();
        let print = |element| plain(&model.field.formula(element));
        let (e, v) = (formula(&text, u, &print(e)), formula(&text, u, &print(v)));
        for start in points(model, &outside, 3) {
            let end = neighbour(&outside, &start);
            let expected = compensated_income(&outside, &start, &end);
            let mut there = end.clone();
            there.insert(u.to_string(), outside.formula(&v, &start).value);
            let claimed = outside.formula(&e, &there).value;
            let off = (claimed - expected).abs() / expected.abs();
            assert!(off < 1e-6, "{name}: e is {claimed}, integration gives {expected} from {start:?}");
            checked += 1;
        }
    }
    assert!(checked >= 20, "only {checked} points were checked");
}

/// Small slips: each operator, number or index of a demand, one at a time.
fn mutations(text: &str) -> Vec<String> {
    let swaps = [(" + ", " - "), (" - ", " + "), ("1/2", "1/3"), (" * ", " / "), ("ln(p", "2 * ln(p"), ("^2", "^3")];
    let mut mutated = Vec::new();
    let mut offset = 0;
    for line in text.split_inclusive('\n') {
        let formula = ["demand", "share", "outlay", "log demand", "   "].iter().any(|word| line.starts_with(word));
        if formula && !line.starts_with("   #") {
            for (from, to) in swaps {
                for (at, _) in line.match_indices(from) {
                    let place = offset + at;
                    mutated.push(format!("{}{to}{}", &text[..place], &text[place + from.len()..]));
                }
            }
        }
        offset += line.len();
    }
    mutated
}

#[test]
fn a_slip_that_matters_is_never_proven() {
    let (mut tried, mut mattered) = (0, 0);
    for (path, text) in examples() {
        let name = path.display().to_string();
        if text.contains("title   \"Lemmas") {
            continue;
        }
        for slip in mutations(&text).into_iter().step_by(3).take(8) {
            let source = Source::new(name.clone(), slip.clone());
            let Ok(model) = read(&source, &[], Allowance::default()) else { continue };
            let conditions = [Condition::Homogeneity, Condition::AddingUp, Condition::Symmetry];
            let vetting = vet(Rc::new(model), &conditions.map(Part::Condition), Allowance::default());
            let outside = Outside::read(&slip);
            let at = points(&vetting.model, &outside, 6);
            tried += 1;
            for finding in &vetting.findings {
                let fails = at.iter().any(|values| failure(finding.condition, &outside, values) > 1e-6);
                mattered += usize::from(fails);
                let proven = finding.verdict == Verdict::Proven;
                assert!(!(fails && proven), "{:?} is called proven, and fails:\n{slip}", finding.condition);
            }
        }
    }
    assert!(tried > 45 && mattered > 60, "too few slips: {tried} tried, {mattered} that matter");
}
