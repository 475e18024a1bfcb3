//! Completeness, independently: over a lattice of parameter values a condition holds exactly on the union of the
//! branches. Whether it holds is asked of the model with the numbers put in, which knows nothing of the branches.

use std::collections::BTreeMap;

use mainspring::algebra::monomial::Var;
use mainspring::algebra::number::{Rational, rational};
use mainspring::algebra::polynomial::Poly;
use mainspring::conditions::{Condition, differences};
use mainspring::proof::Prover;
use mainspring::restrictions::Restrictions;

use crate::system::{belongs, restricted};

/// Every combination of values for the parameters.
fn lattice(parameters: &[Var], values: &[Rational]) -> Vec<BTreeMap<Var, Rational>> {
    let mut points = vec![BTreeMap::new()];
    for parameter in parameters {
        points = points
            .into_iter()
            .flat_map(|point| {
                values.iter().map(move |value| {
                    let mut point = point.clone();
                    point.insert(*parameter, value.clone());
                    point
                })
            })
            .collect();
    }
    points
}

fn holds(found: &Restrictions, point: &BTreeMap<Var, Rational>) -> Option<bool> {
    let values: Vec<(Var, Poly)> = point.iter().map(|(v, value)| (*v, Poly::constant(value))).collect();
    let special = found.model.respecialised(&values).ok()?;
    let mut prover = Prover::new(&special.field);
    Some(found.only.iter().all(|condition| {
        differences(*condition, &special, &mut prover).is_some_and(|differences| differences.is_empty())
    }))
}

/// Compares at all points of the lattice that the assumptions allow; returns how often the condition holds and fails.
fn compare(text: &str, only: &[Condition], values: &[Rational]) -> (usize, usize) {
    let found = restricted(text, only);
    assert!(found.complete, "{:?}\n{text}", found.reason);
    let parameters: Vec<Var> = found.model.parameters.iter().map(|p| p.var).collect();
    let (mut held, mut failed) = (0, 0);
    for point in lattice(&parameters, values) {
        let Some(holds) = holds(&found, &point) else { continue };
        let inside = belongs(&found, &point);
        let named: Vec<String> =
            point.iter().map(|(v, x)| format!("{} = {x}", found.model.field.name(*v).unwrap())).collect();
        assert_eq!(inside, holds, "inside a branch: {inside}, holds: {holds}, at {named:?}\n{text}");
        if holds { held += 1 } else { failed += 1 }
    }
    (held, failed)
}

fn numbers(all: &[i64]) -> Vec<Rational> {
    all.iter().map(|n| rational(*n, 1)).collect()
}

#[test]
fn exponents_that_fall_together() {
    let text = "goods x, y\nprices p, q\nincome m\nothers deflated\nparameters b, c, g, h\n\
                demand x = p^b*q^c*m^g\ndemand y = q^h*m\n";
    let (held, failed) = compare(text, &[Condition::Symmetry], &numbers(&[-2, -1, 0, 1, 2]));
    assert!(held > 0 && failed > 0);
}

#[test]
fn logarithms_of_powers() {
    let text = "goods x, y\nprices p, q\nincome m\nparameters a, b, c\n\
                share x = a + b*ln(p^c/q)\nshare y = 1 - a - b*ln(p/q^c)\n";
    let (held, failed) = compare(
        text,
        &[Condition::Homogeneity, Condition::AddingUp, Condition::Symmetry],
        &numbers(&[-2, -1, 0, 1, 2]),
    );
    assert!(held > 0 && failed > 0);
}

#[test]
fn linear_systems() {
    let text = "goods x, y\nprices p, q\nincome m\nothers deflated\nparameters a, b, c, g, h\n\
                demand x = a + b*p + c*q + g*m\ndemand y = 1 + c*p + b*q + h*m\n";
    let (held, failed) = compare(text, &[Condition::Symmetry], &numbers(&[-1, 0, 1]));
    assert!(held > 0 && failed > 0);
}

#[test]
fn products_and_powers_of_sums() {
    let text = "goods x, y\nprices p, q\nincome m\nparameters r, s, t\nassume r > 0\n\
                share x = p^s/(p^s + r*q^t)\nshare y = r*q^t/(p^s + r*q^s)\n";
    let (held, failed) = compare(text, &[Condition::Homogeneity, Condition::AddingUp], &numbers(&[-2, -1, 0, 1, 2]));
    assert!(held > 0 && failed > 0);
}

/// Equations that are linear in no parameter: four points, by a Gröbner basis.
#[test]
fn equations_of_the_second_degree() {
    let text = "goods x, y, z\nprices p[k]\nincome m\nparameters s, t\n\
                share x = (s^2 + t^2 - 5)*ln(p[y]) + (s^2 + s*t + t^2 - 7)*ln(p[z])\nshare y = 1/2\nshare z = 1/2\n";
    assert_eq!(compare(text, &[Condition::Symmetry], &numbers(&[-3, -2, -1, 0, 1, 2, 3])), (4, 45));
}

/// A power of a sum is a polynomial for some exponents: the list does not claim to be complete without them.
#[test]
fn powers_of_sums_that_become_polynomials() {
    let text = "goods x, y\nprices p, q\nincome m\nothers deflated\nparameters k\n\
                demand x = (p + q)^k\ndemand y = p^2 + 2*p*q\n";
    let found = restricted(text, &[Condition::Symmetry]);
    let two = BTreeMap::from([(found.model.parameters[0].var, rational(2, 1))]);
    assert_eq!(holds(&found, &two), Some(true));
    assert!(belongs(&found, &two) || !found.complete);
}

/// Almost ideal shares over a linear index with positive weights that are declared last.
#[test]
fn weights_of_a_linear_index() {
    let text = "goods 1..2\nprices p[i]\nincome m\nparameters a, b[i], g, h, s[i]\n\
                assume s[k] > 0, s[1] + s[2] = 1\nlet y = ln(m) - sum over k of (s[k]*ln(p[k]))\n\
                share[1] = a + g*ln(p[1]) + h*ln(p[2]) + b[1]*y\n\
                share[2] = 1 - a + h*ln(p[1]) - h*ln(p[2]) + b[2]*y\n";
    let values: Vec<Rational> = [(0, 1), (1, 2), (1, 1)].map(|(n, d)| rational(n, d)).to_vec();
    let (held, failed) = compare(text, &[Condition::Symmetry], &values);
    assert!(held > 0 && failed > 0);
}
