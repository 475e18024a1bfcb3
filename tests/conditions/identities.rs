//! The exact conditions and the claims, on systems whose truth is known from the literature or from a line of algebra.

use crate::vetted::{vet, vet_only};
use mainspring::algebra::number::rational;
use mainspring::conditions::Condition::{AddingUp, Homogeneity, Symmetry};
use mainspring::conditions::Verdict::{Conditional, Proven, Refuted};
use mainspring::proof::{Label, Statement, Value};

const LINEAR_EXPENDITURE: &str = "
goods bread, cloth, fuel
prices p_b, p_c, p_f
income m
parameters a_b, a_c, a_f, g_b, g_c, g_f
assume a_b + a_c + a_f = 1, a_b > 0, a_c > 0, a_f > 0
let left = m - g_b*p_b - g_c*p_c - g_f*p_f
assume left > 0
demand bread = g_b + a_b*left/p_b
demand cloth = g_c + a_c*left/p_c
demand fuel = g_f + a_f*left/p_f
";

const ALMOST_IDEAL: &str = "
goods 1..3
prices p[i]
income m
parameters a[i], b[i], g[i,j]
assume sum over i of (a[i]) = 1, sum over i of (b[i]) = 0
assume g[i,j] = g[j,i], sum over j of (g[i,j]) = 0
let lnP = sum over k of (a[k]*ln(p[k])) + 1/2 * sum over k, l of (g[k,l]*ln(p[k])*ln(p[l]))
share[i] = a[i] + sum over j of (g[i,j]*ln(p[j])) + b[i]*(ln(m) - lnP)
";

#[test]
fn the_linear_expenditure_system_is_integrable_above_subsistence() {
    assert_eq!(vet(LINEAR_EXPENDITURE).verdicts(), [Proven; 4]);
}

#[test]
fn the_almost_ideal_system_satisfies_the_exact_conditions_with_symbolic_parameters() {
    let vetted = vet_only(ALMOST_IDEAL, &[Homogeneity, AddingUp, Symmetry]);
    assert!(vetted.findings.iter().all(|f| f.verdict == Proven));
    let symmetry = &vetted.derivation.steps()[vetted.on(Symmetry).steps[0].index()];
    match symmetry.statement() {
        Statement::Identities(claim) => assert_eq!(claim.equations.len(), 3, "one step holds every pair i < j"),
        other => panic!("symmetry rests on {other:?}"),
    }
}

#[test]
fn without_symmetric_coefficients_symmetry_is_conditional_on_them() {
    let text = ALMOST_IDEAL.replace("g[i,j] = g[j,i], ", "");
    let vetted = vet_only(&text, &[Symmetry]);
    assert_eq!(vetted.verdict(Symmetry), Conditional);
    assert!(vetted.on(Symmetry).witness.is_some());
    assert!(!vetted.restrictions(Symmetry).is_empty());
}

#[test]
fn shares_linear_in_log_prices_are_symmetric_exactly_when_their_coefficients_are() {
    let text = "
goods x, y, z
prices p, q, r
income m
parameters a, b, c, gxx, gxy, gxz, gyx, gyy, gyz, gzx, gzy, gzz
share x = a + gxx*ln(p) + gxy*ln(q) + gxz*ln(r)
share y = b + gyx*ln(p) + gyy*ln(q) + gyz*ln(r)
share z = c + gzx*ln(p) + gzy*ln(q) + gzz*ln(r)
";
    let vetted = vet_only(text, &[Homogeneity, AddingUp, Symmetry]);
    assert_eq!(vetted.verdict(Symmetry), Conditional);
    let mut symmetric = vetted.restrictions(Symmetry);
    assert_eq!(symmetric.len(), 1);
    symmetric[0].sort();
    assert_eq!(symmetric[0], ["gyx = gxy", "gzx = gxz", "gzy = gyz"]);
    assert!(vetted.on(Symmetry).restrictions_complete);
    assert_eq!(vetted.restrictions(Homogeneity)[0].len(), 3, "the rows sum to zero");
    assert_eq!(vetted.restrictions(AddingUp)[0].len(), 4, "the intercepts sum to one and the columns to zero");
}

#[test]
fn a_product_of_parameters_gives_a_branch_for_each_factor() {
    let text = "
goods x, y
prices p, q
income m
parameters a, b
demand x = m/(2*p) + a*b*q/p
demand y = m/(2*q)
";
    let vetted = vet_only(text, &[AddingUp]);
    assert_eq!(vetted.verdict(AddingUp), Conditional);
    let mut branches = vetted.restrictions(AddingUp);
    branches.sort();
    assert_eq!(branches, [["a = 0"], ["b = 0"]]);
    assert!(vetted.on(AddingUp).restrictions_complete);
}

#[test]
fn a_system_without_parameters_that_fails_is_never_rescued() {
    let text = "
goods x, y
prices p, q
income m
demand x = m/(2*p) + ln(m)/(100*p)
demand y = m/(2*q) - ln(m)/(100*q)
";
    let vetted = vet_only(text, &[Homogeneity, AddingUp, Symmetry]);
    assert_eq!(vetted.verdict(AddingUp), Proven);
    for condition in [Homogeneity, Symmetry] {
        let finding = vetted.on(condition);
        assert_eq!((finding.verdict, finding.never), (Refuted, Some(true)));
        let witness = finding.witness.as_ref().expect("a refutation has a point");
        assert!(vetted.model.is_admissible(&witness.point));
    }
    let witness = vetted.on(Symmetry).witness.as_ref().expect("a refutation has a point");
    assert_eq!(witness.place, Label::Pair(0, 1));
    assert!(matches!(witness.value, Value::Exact(_)), "a point with m = 1 has no logarithm left");
}

#[test]
fn assumptions_can_exclude_every_rescue() {
    let text = "
goods x, y
prices p, q
income m
parameters a
assume a > 0
demand x = m/(2*p) + a
demand y = m/(2*q)
";
    let finding_of = vet_only(text, &[AddingUp]);
    let finding = finding_of.on(AddingUp);
    assert_eq!((finding.verdict, finding.never), (Refuted, Some(true)));
}

#[test]
fn the_good_that_takes_the_rest_makes_adding_up_an_assumption() {
    let text = "
goods tea, rest_of_budget
prices p, q
income m
parameters a
assume 0 < a < 1
demand tea = a*m/p
rest rest_of_budget
";
    let vetted = vet(text);
    assert_eq!(vetted.verdicts(), [Proven; 4]);
    assert!(vetted.on(AddingUp).method.contains("assumed"));
    let first = &vetted.derivation.steps()[vetted.on(AddingUp).steps[0].index()];
    assert!(matches!(first.statement(), Statement::Assumed(_)));
}

#[test]
fn an_incomplete_system_is_homogeneous_in_its_prices_the_others_and_income() {
    let good = "
goods gas
prices p
others q
income m
parameters a, b
assume a > 0, b > 0, b < 1
demand gas = a*(q/p)^b*(m/q)
";
    let vetted = vet(good);
    assert_eq!(vetted.findings.len(), 3, "adding-up is not asked of an incomplete system");
    assert_eq!(vetted.verdict(Homogeneity), Proven);
    let nominal = good.replace("(m/q)", "m");
    assert_eq!(vet_only(&nominal, &[Homogeneity]).verdict(Homogeneity), Refuted);
    let deflated = good.replace("others q", "others deflated").replace("(q/p)^b*(m/q)", "p^(-b)*m");
    assert_eq!(vet_only(&deflated, &[Homogeneity, AddingUp]).findings.len(), 0);
}

#[test]
fn prices_of_log_demands_and_mixed_forms_count_as_what_they_say() {
    let text = "
goods x, y
prices p, q
income m
parameters a
assume 0 < a < 1
log demand x = ln(a) + ln(m) - ln(p)
share y = 1 - a
";
    assert_eq!(vet(text).verdicts(), [Proven; 4]);
}

#[test]
fn claims_are_proven_refuted_at_a_point_or_left() {
    let text = "
parameters a, b, s
assume a > 0, b > 0
claim ln(a^2*b) = 2*ln(a) + ln(b)
claim ln(a + b) = ln(a) + ln(b)
claim 4^s = 2^(2*s)
claim a + b > a
claim a > b
claim a^2 + 1 != 0
";
    let vetted = vet(text);
    let verdicts: Vec<_> = vetted.claims.iter().map(|c| c.verdict).collect();
    assert_eq!(verdicts, [Proven, Refuted, Proven, Proven, Refuted, Proven]);
    for claim in vetted.claims.iter().filter(|c| c.verdict == Refuted) {
        let witness = claim.witness.as_ref().expect("a refutation has a point");
        assert!(vetted.model.is_admissible(&witness.point));
    }
}

#[test]
fn a_witness_states_the_difference_in_quantities() {
    let text = "
goods x, y
prices p, q
income m
demand x = m/p - 1
demand y = 2
";
    let vetted = vet_only(text, &[AddingUp, Symmetry]);
    let witness = vetted.on(AddingUp).witness.as_ref().expect("2 q - p is not zero");
    let price = |i: usize| witness.point[&vetted.model.prices[i]].clone();
    assert_eq!(witness.value, Value::Exact(rational(2, 1) * price(1) - price(0)));
}
