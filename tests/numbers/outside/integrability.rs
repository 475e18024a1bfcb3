//! What the conditions say at a point, and where Shephard's system leads from it, by the evaluation from outside.

use std::rc::Rc;

use mainspring::algebra::evaluation::Point;
use mainspring::algebra::generator::Element;
use mainspring::conditions::Condition;
use mainspring::language::{self, Claim, Expr, Source, Statement};
use mainspring::model::Model;
use mainspring::render::formula_text::plain;
use mainspring::{Allowance, Part, Vetting, read, vet};
use num_traits::ToPrimitive;

use super::dual::Dual;
use super::{Outside, Values};

/// The findings on a text, or `None` where the text is no model.
pub fn try_vetted(text: &str, asked: &[Part], allowance: Allowance) -> Option<Vetting> {
    let model = read(&Source::new("test", text), &[], allowance).ok()?;
    Some(vet(Rc::new(model), asked, allowance))
}

/// A point of the program with the names of the file.
pub fn named(model: &Model, point: &Point) -> Values {
    point.iter().filter_map(|(var, value)| Some((model.field.name(*var)?, value.to_f64()?))).collect()
}

/// Whether all that a file says of its domain is so, quantities included; strictly, so that rounding does not matter.
pub fn in_domain(outside: &Outside, values: &Values) -> bool {
    let x = outside.quantities(values);
    let spent: f64 = outside.prices.iter().zip(&x).map(|(price, x)| values[price] * x.value).sum();
    let income = values[outside.income.as_ref().expect("a system has an income")];
    let sane = |x: &Dual| x.value > 0.0 && x.slope.iter().all(|slope| slope.is_finite());
    outside.violation(values) < 1e-9 && x.iter().all(sane) && (outside.complete || spent < income)
}

/// Admissible points: some from the program's own search, checked against the file here, and others around them.
pub fn points(model: &Model, outside: &Outside, wanted: usize) -> Vec<Values> {
    let quantities: Vec<_> = model.demands.iter().map(|demand| demand.quantity.clone()).collect();
    let mut chance = Chance(0x9e37_79b9_7f4a_7c15);
    let mut found = Vec::new();
    for point in model.points().with_positive(&quantities).take(10 * wanted) {
        let values = named(model, &point);
        let near = moved(outside, &values, &mut chance);
        found.extend([values, near].into_iter().filter(|v| in_domain(outside, v) && tame(outside, v)));
        if found.len() >= wanted {
            break;
        }
    }
    found
}

/// Whether floating point is good enough at a point.
fn tame(outside: &Outside, values: &Values) -> bool {
    let quantities = outside.quantities(values);
    values.values().all(|value| value.abs() < 1e3) && quantities.iter().all(|x| x.value > 1e-6 && x.value < 1e6)
}

/// The same parameters at other prices and another income.
fn moved(outside: &Outside, values: &Values, chance: &mut Chance) -> Values {
    let mut near = values.clone();
    for name in outside.movers() {
        near.entry(name).and_modify(|value| *value *= 0.6 + chance.next());
    }
    near
}

/// A small generator of numbers between 0 and 1 (xorshift).
pub struct Chance(pub u64);

impl Chance {
    pub fn next(&mut self) -> f64 {
        self.0 ^= self.0 << 13;
        self.0 ^= self.0 >> 7;
        self.0 ^= self.0 << 17;
        (self.0 >> 11) as f64 / (1u64 << 53) as f64
    }
}

/// The Slutsky matrix ∂x_i/∂p_j + x_j ∂x_i/∂m.
pub fn slutsky(x: &[Dual]) -> Vec<Vec<f64>> {
    let entry = |i: &Dual, j: usize| i.slope[j] + x[j].value * i.slope[i.slope.len() - 1];
    x.iter().map(|i| (0..x.len()).map(|j| entry(i, j)).collect()).collect()
}

/// The largest failure of a condition at a point, relative to the size of what is compared.
pub fn failure(condition: Condition, outside: &Outside, values: &Values) -> f64 {
    let x = outside.quantities(values);
    match condition {
        Condition::AddingUp => {
            let outlays: Vec<f64> = outside.prices.iter().zip(&x).map(|(price, x)| values[price] * x.value).collect();
            let income = values[outside.income.as_ref().expect("a system has an income")];
            relative(outlays.iter().sum::<f64>() - income, &outlays)
        }
        Condition::Homogeneity => {
            let movers: Vec<f64> = outside.movers().iter().map(|name| values[name]).collect();
            let euler = |x: &Dual| {
                let terms: Vec<f64> = movers.iter().zip(&x.slope).map(|(at, slope)| at * slope).collect();
                relative(terms.iter().sum(), &terms)
            };
            x.iter().map(euler).fold(0.0, f64::max)
        }
        Condition::Symmetry => {
            let s = slutsky(&x);
            let pairs = (0..x.len()).flat_map(|i| (0..i).map(move |j| (i, j)));
            pairs.map(|(i, j)| relative(s[i][j] - s[j][i], &[s[i][j], s[j][i]])).fold(0.0, f64::max)
        }
        Condition::Curvature => {
            let s = slutsky(&x);
            let size = s.iter().flatten().fold(1e-300, |size: f64, entry| size.max(entry.abs()));
            eigenvalues(&s).into_iter().fold(0.0, f64::max) / size
        }
    }
}

fn relative(gap: f64, terms: &[f64]) -> f64 {
    gap.abs() / (1e-9 + terms.iter().map(|term| term.abs()).sum::<f64>())
}

/// The eigenvalues of the symmetric part, by Jacobi's rotations.
pub fn eigenvalues(matrix: &[Vec<f64>]) -> Vec<f64> {
    let n = matrix.len();
    let mut a: Vec<Vec<f64>> = (0..n).map(|i| (0..n).map(|j| (matrix[i][j] + matrix[j][i]) / 2.0).collect()).collect();
    for _ in 0..40 {
        for (i, j) in (0..n).flat_map(|i| (0..i).map(move |j| (i, j))) {
            if a[i][j] != 0.0 {
                let theta = (a[j][j] - a[i][i]) / (2.0 * a[i][j]);
                let sign = if theta < 0.0 { -1.0 } else { 1.0 };
                let t = sign / (theta.abs() + (theta * theta + 1.0).sqrt());
                let c = 1.0 / (t * t + 1.0).sqrt();
                rotate(&mut a, i, j, c, t * c);
            }
        }
    }
    (0..n).map(|i| a[i][i]).collect()
}

fn rotate(a: &mut [Vec<f64>], i: usize, j: usize, c: f64, s: f64) {
    for row in a.iter_mut() {
        (row[i], row[j]) = (c * row[i] - s * row[j], s * row[i] + c * row[j]);
    }
    let (above, below) = (a[i].clone(), a[j].clone());
    a[i] = above.iter().zip(&below).map(|(x, y)| c * x - s * y).collect();
    a[j] = above.iter().zip(&below).map(|(x, y)| s * x + c * y).collect();
}

/// Income along the compensated path: de/dt = Σ x_i(p(t), e) dp_i/dt, by the classical Runge–Kutta method.
pub fn compensated_income(outside: &Outside, start: &Values, end: &Values) -> f64 {
    let income = outside.income.clone().expect("a system has an income");
    let rate = |t: f64, e: f64| {
        let mut values = start.clone();
        for price in &outside.prices {
            values.insert(price.clone(), start[price] + t * (end[price] - start[price]));
        }
        values.insert(income.clone(), e);
        let x = outside.quantities(&values);
        outside.prices.iter().zip(&x).map(|(price, x)| x.value * (end[price] - start[price])).sum::<f64>()
    };
    let steps = 200;
    let h = 1.0 / f64::from(steps);
    (0..steps).fold(start[&income], |e, k| {
        let t = f64::from(k) * h;
        let k1 = rate(t, e);
        let k2 = rate(t + h / 2.0, e + h / 2.0 * k1);
        let k3 = rate(t + h / 2.0, e + h / 2.0 * k2);
        let k4 = rate(t + h, e + h * k3);
        e + h / 6.0 * (k1 + 2.0 * k2 + 2.0 * k3 + k4)
    })
}

/// A nearby point: every price up by a few percent, each by another share.
pub fn neighbour(outside: &Outside, values: &Values) -> Values {
    let mut near = values.clone();
    for (k, price) in outside.prices.iter().enumerate() {
        near.insert(price.clone(), values[price] * (1.02 + 0.013 * k as f64));
    }
    near
}

/// An element of a model as a report prints it, read again as a formula in the names of the file.
pub fn printed(model: &Model, text: &str, element: &Element) -> Expr {
    let formula = plain(&model.field.formula(element));
    let declared: String = text.lines().filter(|line| !line.starts_with("claim")).map(|l| format!("{l}\n")).collect();
    let source = Source::new("formula", format!("{declared}claim {formula} = {}\n", model.utility_name));
    let tree = language::read(&source).unwrap_or_else(|faults| panic!("{}", faults[0].render(&source)));
    let mut claims = tree.statements.into_iter().filter_map(|located| match located.statement {
        Statement::Claim(Claim::Relation(relation)) => Some(relation.first),
        _ => None,
    });
    claims.next_back().expect("the claim just written")
}
