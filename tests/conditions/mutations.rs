//! A true system with one sign changed is not proven, unless an evaluation from outside finds nothing wrong with it.

use crate::vetted::{try_read, vet_only};
use mainspring::algebra::evaluation::Point;
use mainspring::algebra::field::Field;
use mainspring::algebra::generator::Element;
use mainspring::algebra::monomial::Var;
use mainspring::algebra::number::{Rational, rational};
use mainspring::conditions::Condition::{self, AddingUp, Homogeneity, Symmetry};
use mainspring::conditions::Verdict;
use mainspring::model::Model;

const TRUE_SYSTEMS: [&str; 5] = [
    "
goods x, y
prices p, q
income m
parameters a, s
assume a > 0, s > 0, s != 1
demand x = a*p^(-s)*m/(a*p^(1-s) + q^(1-s))
demand y = q^(-s)*m/(a*p^(1-s) + q^(1-s))
",
    "
goods x, y
prices p, q
income m
parameters a, c, d
assume 0 < a < 1
demand x = c + a*(m - c*p - d*q)/p
demand y = d + (1 - a)*(m - c*p - d*q)/q
",
    "
goods x, y
prices p, q
income m
parameters a, g, b
share x = a + g*ln(p) - g*ln(q) + b*(ln(m) - a*ln(p) - (1 - a)*ln(q) - g/2*(ln(p) - ln(q))^2)
share y = 1 - a - g*ln(p) + g*ln(q) - b*(ln(m) - a*ln(p) - (1 - a)*ln(q) - g/2*(ln(p) - ln(q))^2)
",
    "
goods x, y
prices p, q
income m
parameters b, c, d
assume b > 0, c > 0, d > 0
demand x = m*(b + c*sqrt(q/p))/(b*p + 2*c*sqrt(p*q) + d*q)
demand y = m*(d + c*sqrt(p/q))/(b*p + 2*c*sqrt(p*q) + d*q)
",
    "
goods x, y, z
prices p, q, r
income m
share x = (1/3 + 1/10*ln(p/m) + 1/20*ln(q/m))/(1 + 3/20*ln(p/m) + 1/20*ln(r/m))
share y = (1/3 + 1/20*ln(p/m) - 1/10*ln(q/m) + 1/20*ln(r/m))/(1 + 3/20*ln(p/m) + 1/20*ln(r/m))
share z = (1/3 + 1/20*ln(q/m))/(1 + 3/20*ln(p/m) + 1/20*ln(r/m))
",
];

const EXACT: [Condition; 3] = [Homogeneity, AddingUp, Symmetry];

/// Every text that differs by one plus or minus inside a demand.
fn with_one_sign_changed(text: &str) -> Vec<String> {
    let body = text.find("demand").or_else(|| text.find("share")).expect("a system has demands");
    let signs = text.char_indices().filter(|(at, c)| *at > body && matches!(c, '+' | '-'));
    let changed =
        signs.map(|(at, c)| format!("{}{}{}", &text[..at], if c == '+' { '-' } else { '+' }, &text[at + 1..]));
    // "(+s)" is not an expression of the language
    changed.filter(|text| !text.contains("(+")).collect()
}

/// x at a point, by enclosure.
fn value(field: &Field, e: &Element, point: &Point) -> Option<Rational> {
    let enclosure = field.enclose(e, point, 320)?;
    Some((enclosure.lo_rational() + enclosure.hi_rational()) / rational(2, 1))
}

/// ∂e/∂x by a central difference with a step of 2⁻⁶⁰.
fn slope(field: &Field, e: &Element, point: &Point, x: Var) -> Option<Rational> {
    let step = Rational::new(1.into(), num_bigint::BigInt::from(1u64 << 60));
    let moved = |by: Rational| {
        let mut there = point.clone();
        there.entry(x).and_modify(|at| *at += by);
        value(field, e, &there)
    };
    Some((moved(step.clone())? - moved(-step.clone())?) / (step * rational(2, 1)))
}

/// The largest departure from a condition at a point.
fn departure(model: &Model, condition: Condition, point: &Point) -> Option<Rational> {
    let field = &model.field;
    let income = model.income?;
    let x = |i: usize| &model.demands[i].quantity;
    let at = |v: Var| point[&v].clone();
    let n = model.demands.len();
    let mut largest = rational(0, 1);
    let mut note = |q: Rational| largest = largest.clone().max(if q < rational(0, 1) { -q } else { q });
    match condition {
        AddingUp => {
            let mut left = -at(income);
            for i in 0..n {
                left += at(model.prices[i]) * value(field, x(i), point)?;
            }
            note(left);
        }
        Homogeneity => {
            for i in 0..n {
                let mut euler = at(income) * slope(field, x(i), point, income)?;
                for p in &model.prices {
                    euler += at(*p) * slope(field, x(i), point, *p)?;
                }
                note(euler);
            }
        }
        _ => {
            let entry = |i: usize, j: usize| -> Option<Rational> {
                let direct = slope(field, x(i), point, model.prices[j])?;
                Some(direct + value(field, x(j), point)? * slope(field, x(i), point, income)?)
            };
            for i in 0..n {
                for j in 0..i {
                    note(entry(i, j)? - entry(j, i)?);
                }
            }
        }
    }
    Some(largest)
}

#[test]
fn the_systems_themselves_are_proven() {
    for text in TRUE_SYSTEMS {
        let vetted = vet_only(text, &EXACT);
        assert!(vetted.findings.iter().all(|f| f.verdict == Verdict::Proven), "{text}");
    }
}

#[test]
fn one_sign_changed_is_not_proven_where_it_matters() {
    let tolerance = Rational::new(1.into(), num_bigint::BigInt::from(1u64 << 40));
    let (mut proven, mut refused) = (0, 0);
    for text in TRUE_SYSTEMS.iter().flat_map(|text| with_one_sign_changed(text)) {
        if try_read(&text).is_err() {
            continue;
        }
        let vetted = vet_only(&text, &EXACT);
        let points: Vec<Point> = vetted.model.points().take(4).collect();
        for finding in &vetted.findings {
            let worst = points.iter().filter_map(|p| departure(&vetted.model, finding.condition, p)).max();
            match finding.verdict {
                Verdict::Proven => {
                    proven += 1;
                    assert!(worst.is_none_or(|w| w < tolerance), "{} proven of {text}", finding.condition.name());
                }
                Verdict::Refuted | Verdict::Conditional => {
                    refused += 1;
                    let witness = finding.witness.as_ref().expect("a refutation has a point");
                    let there = departure(&vetted.model, finding.condition, &witness.point);
                    assert!(there.is_some_and(|d| d > rational(0, 1)), "{text}");
                    assert!(vetted.model.is_admissible(&witness.point), "{text}");
                }
                other => panic!("{other:?} for {} of {text}", finding.condition.name()),
            }
        }
    }
    assert!(refused > 50, "{refused} refused and {proven} proven");
}
