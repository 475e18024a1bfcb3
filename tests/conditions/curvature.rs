//! Curvature: certificates where the Slutsky matrix is negative semidefinite, exact points and directions where it is
//! not, and the honest middle.

use crate::vetted::{Vetted, vet};
use mainspring::algebra::number::rational;
use mainspring::conditions::Condition::Curvature;
use mainspring::conditions::Verdict::{Conditional, Proven, Refuted, Regional, Undecided};
use mainspring::conditions::{Finding, System};
use mainspring::proof::{Prover, Rule};

fn curvature(vetted: &Vetted) -> &Finding {
    vetted.on(Curvature)
}

fn ces(assumption: &str) -> String {
    format!(
        "
goods x, y, z
prices p, q, r
income m
parameters a, b, c, s
assume a > 0, b > 0, c > 0, s != 1{assumption}
let D = a*p^(1-s) + b*q^(1-s) + c*r^(1-s)
demand x = a*p^(-s)*m/D
demand y = b*q^(-s)*m/D
demand z = c*r^(-s)*m/D
"
    )
}

#[test]
fn constant_elasticity_demands_curve_the_right_way_exactly_for_nonnegative_elasticity() {
    let substitutes = vet(&ces(", s > 0"));
    assert_eq!(curvature(&substitutes).verdict, Proven);
    let last = curvature(&substitutes).steps.last().expect("a proof has steps");
    assert_eq!(*substitutes.derivation.steps()[last.index()].rule(), Rule::Laplacian);
    let wrong = vet(&ces(", s < 0"));
    assert_eq!((curvature(&wrong).verdict, curvature(&wrong).never), (Refuted, Some(true)));
    let free = vet(&ces(""));
    let finding = curvature(&free);
    assert_eq!((finding.verdict, finding.restrictions_complete), (Conditional, true));
    let branch = &finding.restrictions.as_ref().expect("conditional on a restriction")[0];
    let s = free.model.parameters.iter().find(|p| p.name == "s").expect("declared").var;
    assert_eq!(branch.inequalities, [mainspring::algebra::polynomial::Poly::var(s)]);
}

#[test]
fn a_witness_of_curvature_has_a_direction_that_rises() {
    let vetted = vet(&ces(", s < 0"));
    let witness = curvature(&vetted).witness.as_ref().expect("a refutation has a point");
    let v = witness.vector.as_ref().expect("and a direction");
    let model = &vetted.model;
    let mut prover = Prover::new(&model.field);
    let system = System::of(model, &mut prover).expect("demands");
    let mut form = rational(0, 1);
    for i in 0..3 {
        for j in 0..3 {
            let entry = system.entry(&mut prover, i, j);
            let value = model.field.enclose(&entry, &witness.point, 128).expect("defined there");
            form += &v[i] * &v[j] * (value.lo_rational() + value.hi_rational()) / rational(2, 1);
        }
    }
    assert!(form > rational(0, 1));
    for demand in &model.demands {
        let quantity = model.field.enclose(&demand.quantity, &witness.point, 64).and_then(|i| i.sign());
        assert_eq!(quantity, Some(std::cmp::Ordering::Greater), "curvature is asked where quantities are positive");
    }
}

#[test]
fn fixed_proportions_have_a_slutsky_matrix_of_zeros() {
    let text = "
goods x, y
prices p, q
income m
demand x = 2*m/(2*p + 3*q)
demand y = 3*m/(2*p + 3*q)
";
    let vetted = vet(text);
    assert_eq!(vetted.verdicts(), [Proven; 4]);
    assert_eq!(curvature(&vetted).method, "the matrix is zero");
}

#[test]
fn log_share_demands_hold_in_a_region_whose_boundary_is_stated() {
    let text = "
goods x, y
prices p, q
income m
share x = 1/2 + 1/10*ln(p/q)
share y = 1/2 - 1/10*ln(p/q)
";
    let vetted = vet(text);
    let finding = curvature(&vetted);
    assert_eq!(finding.verdict, Regional);
    assert!(finding.regular_point.is_some() && finding.witness.is_some());
    let region = finding.region.as_ref().expect("a boundary");
    let inside = |point| {
        let signs = region.iter().map(|e| vetted.model.field.enclose(e, point, 128).and_then(|i| i.sign()));
        signs.into_iter().all(|sign| matches!(sign, Some(std::cmp::Ordering::Greater | std::cmp::Ordering::Equal)))
    };
    assert!(finding.regular_point.as_ref().is_some_and(inside));
    assert!(!finding.witness.as_ref().is_some_and(|w| inside(&w.point)));
    // w(1 - w) never reaches 3/10
    let nowhere = vet(&text.replace("1/10", "3/10"));
    assert_eq!((curvature(&nowhere).verdict, curvature(&nowhere).never), (Refuted, Some(true)));
}

#[test]
fn a_demand_that_is_nowhere_positive_leaves_nothing_to_ask() {
    let text = "
goods x, y
prices p, q
income m
demand x = -m/(2*p)
demand y = 3*m/(2*q)
";
    let vetted = vet(text);
    let finding = curvature(&vetted);
    assert_eq!(finding.verdict, Undecided);
    assert!(finding.reason.as_ref().is_some_and(|r| r.contains("nowhere positive")));
}

#[test]
fn goods_that_may_be_complements_are_decided_by_elimination() {
    let text = "
goods coat, glove, hat
prices p, q, r
income m
demand coat = 10 - 2*p/r - q/r
demand glove = 8 - p/r - 3*q/r
demand hat = m/r - (p/r)*(10 - 2*p/r - q/r) - (q/r)*(8 - p/r - 3*q/r)
";
    let vetted = vet(text);
    assert_eq!(vetted.verdicts(), [Proven; 4]);
    assert_eq!(curvature(&vetted).method, "sum of squares");
}

#[test]
fn where_symmetry_fails_the_question_is_about_the_symmetric_part() {
    let text = "
goods x, y, z
prices p, q, r
income m
assume m > p + 2*q
demand x = 1 + (m - p - 2*q)*q/(p*(p + q + r))
demand y = 2 + (m - p - 2*q)*r/(q*(p + q + r))
demand z = (m - p - 2*q)*p/(r*(p + q + r))
";
    let vetted = vet(text);
    assert_eq!(curvature(&vetted).verdict, Regional);
    assert!(curvature(&vetted).method.contains("symmetric part"));
}
