//! Curvature decided: proofs by structure with symbolic parameters, conditions on parameters in full, regions as short
//! inequalities, and points that are found where the matrix fails in a thin or a far part of the domain.

use crate::vetted::{Vetted, vet};
use mainspring::conditions::Condition::Curvature;
use mainspring::conditions::Finding;
use mainspring::conditions::Verdict::{Conditional, Proven, Regional};
use mainspring::render::formula_text::plain;

fn curvature(vetted: &Vetted) -> &Finding {
    vetted.on(Curvature)
}

fn inequalities(vetted: &Vetted) -> Vec<String> {
    let region = curvature(vetted).region.as_ref().expect("a region is described");
    region.iter().map(|e| plain(&vetted.model.field.formula(e))).collect()
}

/// Two nests of two goods with elasticities s and z within and t between them.
fn nested(assumption: &str) -> String {
    format!(
        "
goods x, y, v, w
prices p, q, r, k
income m
parameters s, z, t
assume s > 0, s != 1, z > 0, z != 1, t != 1{assumption}
let D = p^(1-s) + q^(1-s)
let E = r^(1-z) + k^(1-z)
let P = D^((1-t)/(1-s))
let Q = E^((1-t)/(1-z))
share x = P/(P+Q)*p^(1-s)/D
share y = P/(P+Q)*q^(1-s)/D
share v = Q/(P+Q)*r^(1-z)/E
share w = Q/(P+Q)*k^(1-z)/E
"
    )
}

#[test]
fn nests_are_negative_semidefinite_exactly_where_every_elasticity_is_nonnegative() {
    assert_eq!(curvature(&vet(&nested(", t > 0"))).verdict, Proven);
    let free = vet(&nested(""));
    let finding = curvature(&free);
    assert_eq!((finding.verdict, finding.restrictions_complete), (Conditional, true));
    assert_eq!(inequalities(&free), ["t"]);
}

#[test]
fn the_indirect_addilog_is_proven_for_exponents_above_minus_one() {
    let text = "
goods 1..4
prices p[i]
income m
parameters a[i], b[i]
assume a[i] > 0, b[i] > -1
let D = sum over k of (a[k]*(m/p[k])^b[k])
share[i] = a[i]*(m/p[i])^b[i]/D
";
    let vetted = vet(text);
    assert_eq!((curvature(&vetted).verdict, curvature(&vetted).method.as_str()), (Proven, "sum of squares"));
}

#[test]
fn committed_spending_with_a_square_root_is_proven_around_the_bound_of_income() {
    let text = "
goods x, y
prices p, q
income m
parameters b, d
assume 0 < b < 1, d > 0
let A = 2*d*sqrt(p*q)
assume m > A
demand x = d*sqrt(q/p) + b*(m - A)/p
demand y = d*sqrt(p/q) + (1 - b)*(m - A)/q
";
    assert_eq!(curvature(&vet(text)).verdict, Proven);
}

#[test]
fn linear_expenditure_holds_where_income_covers_what_is_committed() {
    let text = "
goods x, y
prices p, q
income m
parameters b, c, d
assume 0 < b < 1
let A = c*p + d*q
demand x = c + b*(m - A)/p
demand y = d + (1 - b)*(m - A)/q
";
    let vetted = vet(text);
    assert_eq!(curvature(&vetted).verdict, Regional);
    assert_eq!(inequalities(&vetted), ["m - A"]);
}

/// Log shares of three goods whose slopes are the entries given.
fn log_shares(g11: &str, g12: &str, g22: &str, declarations: &str) -> String {
    format!(
        "
goods x, y, z
prices p, q, r
income m
{declarations}
let l = ln(p/r)
let k = ln(q/r)
share x = 1/3 + ({g11})*l + ({g12})*k
share y = 1/3 + ({g12})*l + ({g22})*k
share z = 1/3 - ({g11} + {g12})*l - ({g12} + {g22})*k
"
    )
}

#[test]
fn log_shares_hold_for_all_prices_exactly_where_their_slopes_are_negative_semidefinite() {
    assert_eq!(curvature(&vet(&log_shares("-1/9", "1/20", "-1/8", ""))).verdict, Proven);
    // a slope that is positive by one in a hundred fails near a corner of the shares
    let far = vet(&log_shares("1/100", "0", "-1/8", ""));
    assert_eq!(curvature(&far).verdict, Regional);
    let free = vet(&log_shares("a", "b", "c", "parameters a, b, c"));
    let finding = curvature(&free);
    assert_eq!((finding.verdict, finding.restrictions_complete), (Conditional, true));
    assert_eq!(inequalities(&free), ["-(a + c)", "a*c - b^2"]);
}

#[test]
fn a_slope_that_is_wrong_on_a_thin_stretch_of_prices_is_found() {
    let text = "
goods x, y
prices p, q
income m
let z = q/p
demand y = 200 - ((z - 7)^3/3 - z/1000000)
rest x
";
    let vetted = vet(text);
    assert_eq!(curvature(&vetted).verdict, Regional);
    assert_eq!(curvature(&vet(&text.replace("- z/1000000", "+ z/1000000"))).verdict, Proven);
}
