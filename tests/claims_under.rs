//! Claims that a condition holds if, only if, or exactly if relations between the parameters hold.

use std::rc::Rc;

use mainspring::conditions::Verdict::{self, Proven, Refuted, Undecided};
use mainspring::language::Source;
use mainspring::{Allowance, Part, Vetting, read, vet};

fn vetted(text: &str) -> Vetting {
    let source = Source::new("test.demand", text);
    let model = read(&source, &[], Allowance::default()).unwrap_or_else(|unread| panic!("{unread:?}\n{text}"));
    vet(Rc::new(model), &[Part::Claims], Allowance::default())
}

/// Claims with their verdicts; what is refuted has a point that satisfies the assumptions.
fn judged(system: &str, claims: &[(&str, Verdict)]) {
    let lines: String = claims.iter().map(|(claim, _)| format!("claim {claim}\n")).collect();
    let vetting = vetted(&format!("{system}{lines}"));
    for ((claim, expected), found) in claims.iter().zip(&vetting.claims) {
        assert_eq!(found.verdict, *expected, "{claim}: {:?}", found.reason);
        assert_eq!(found.witness.is_some(), *expected == Refuted, "{claim}");
        assert!(found.witness.iter().all(|w| vetting.model.is_admissible(&w.point)), "{claim}");
    }
}

const LINEAR: &str = "goods x, y\nprices p, q\nincome m\nothers deflated\nparameters a1, a2, b11, b12, b21, b22, g1, g2\n\
                      demand x = a1 + b11*p + b12*q + g1*m\ndemand y = a2 + b21*p + b22*q + g2*m\n";

#[test]
fn symmetry_of_linear_demands() {
    judged(
        LINEAR,
        &[
            ("symmetry if b12 = b21, g1 = 0, g2 = 0", Proven),
            ("symmetry iff b12 = b21, g1 = 0, g2 = 0", Refuted),
            ("symmetry only if b12 = b21", Refuted),
            ("symmetry if b12 = b21", Refuted),
            ("symmetry iff g1*b21 = g2*b11, g1*b22 = g2*b12, b12 + g1*a2 = b21 + g2*a1", Proven),
            ("symmetry only if g1*b21 = g2*b11", Proven),
            ("symmetry if g1*b21 = g2*b11", Refuted),
        ],
    );
}

#[test]
fn relations_with_indices() {
    let shares = "goods 1..3\nprices p[i]\nincome m\nparameters a[i], g[i,j]\n\
                  share[i] = a[i] + sum over j of (g[i,j]*ln(p[j]))\n";
    judged(
        shares,
        &[
            ("symmetry iff g[i,j] = g[j,i]", Proven),
            ("homogeneity iff sum over j of (g[i,j]) = 0", Proven),
            ("adding-up iff sum over k of (a[k]) = 1, sum over i of (g[i,j]) = 0", Proven),
            ("adding-up if sum over k of (a[k]) = 1", Refuted),
            ("homogeneity only if g[i,j] = g[j,i]", Refuted),
        ],
    );
}

#[test]
fn inequalities() {
    let proportional = "goods x, y\nprices p, q\nincome m\nparameters a, b\nassume a > 0, b > 0\n\
                        demand x = a*m/p\ndemand y = b*m/q\n";
    judged(
        proportional,
        &[
            ("adding-up iff b = 1 - a, a < 1", Proven),
            ("adding-up only if a < 1/2", Refuted),
            ("adding-up if a < 1/2", Refuted),
            ("curvature if a + b <= 1", Proven),
            ("curvature if a <= 1, b <= 1", Refuted),
            ("symmetry iff a > 0", Proven),
        ],
    );
}

/// No demands, no conditions.
#[test]
fn what_makes_no_sense_is_not_judged() {
    let deflated = "goods x\nprices p\nincome m\nothers deflated\nparameters a\ndemand x = a\n";
    judged(deflated, &[("adding-up if a = 1", Undecided), ("symmetry iff a = a", Proven)]);
}
