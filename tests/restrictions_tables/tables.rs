//! Tables of restrictions for complete systems, each derived by hand and by a Gröbner basis of the coefficient equations
//! [derived here].

use mainspring::conditions::Condition::{self, AddingUp, Homogeneity, Symmetry};

use crate::system::{listed, restricted};

const ALL: [Condition; 3] = [Homogeneity, AddingUp, Symmetry];

fn exactly(text: &str, only: &[Condition], expected: &[&str]) {
    let found = restricted(text, only);
    let mut expected: Vec<String> = expected.iter().map(ToString::to_string).collect();
    expected.sort();
    assert_eq!(listed(&found), expected);
    assert!(found.complete, "{:?}", found.reason);
}

/// Quadratic-log shares with a price aggregator of its own on the quadratic term.
const QUADRATIC: &str = "goods 1..3
prices p[i]
income m
parameters b[i], l[i], c[i]
assume b[1] + b[2] + b[3] = 0
let a = sum over k of (1/3*ln(p[k])) + 3/40*sum over k of (ln(p[k])^2) - 1/40*(sum over k of (ln(p[k])))^2
let y = ln(m) - a
let d[i] = 3/20*ln(p[i]) - 1/20*sum over k of (ln(p[k]))
share[i] = 1/3 + d[i] + b[i]*y + l[i]*y^2/product over k of (p[k]^c[k])
";

#[test]
fn quadratic_homogeneity() {
    exactly(QUADRATIC, &[Homogeneity], &["c[3] = -(c[1] + c[2])", "l[1] = 0, l[2] = 0, l[3] = 0"]);
}

/// The vectors b − c and l are parallel: more than c = b, and more than l = 0.
#[test]
fn quadratic_symmetry() {
    exactly(
        QUADRATIC,
        &[Symmetry],
        &[
            "c[2] = b[2] - b[1]*l[2]/l[1] + l[2]*c[1]/l[1], c[3] = l[3]*c[1]/l[1] - b[1]*l[3]/l[1] + b[3], l[1] != 0",
            "l[1] = 0, c[1] = b[1], c[3] = l[3]*c[2]/l[2] - b[2]*l[3]/l[2] + b[3], l[2] != 0",
            "l[1] = 0, l[2] = 0, c[1] = b[1], c[2] = b[2]",
            "l[1] = 0, l[2] = 0, l[3] = 0",
        ],
    );
}

#[test]
fn constant_shares() {
    let text = "goods 1..3\nprices p[i]\nincome m\nparameters a[i]\nshare[i] = a[i]\n";
    exactly(text, &[Homogeneity, Symmetry], &[""]);
    exactly(text, &ALL, &["a[3] = 1 - a[1] - a[2]"]);
}

#[test]
fn linear_in_nominal_prices() {
    let text = "goods x, y\nprices p1, p2\nincome m\nparameters a1, a2, b11, b12, b21, b22, g1, g2\n\
                demand x = a1 + b11*p1 + b12*p2 + g1*m\ndemand y = a2 + b21*p1 + b22*p2 + g2*m\n";
    exactly(text, &[Homogeneity], &["b11 = 0, b12 = 0, b21 = 0, b22 = 0, g1 = 0, g2 = 0"]);
    exactly(text, &[AddingUp], &[]);
    exactly(text, &ALL, &[]);
}

/// Exactly the linear expenditure system.
#[test]
fn outlays_linear_in_prices_and_income() {
    let text = "goods 1..3\nprices p[i]\nincome m\nparameters a[i], c[i,j]\n\
                assume sum over i of (a[i]) = 1, a[i] > 0, sum over i of (c[i,j]) = 0\n\
                outlay[i] = sum over j of (c[i,j]*p[j]) + a[i]*m\n";
    exactly(text, &[Homogeneity, AddingUp], &[""]);
    exactly(
        text,
        &[Symmetry],
        &["c[2,1] = -a[2]*c[1,1]/(1 - a[1]), c[2,2] = c[1,2]*(a[2] - 1)/a[1], c[2,3] = a[2]*c[1,3]/a[1]"],
    );
}

#[test]
fn shares_linear_in_log_prices() {
    let text = "goods 1..3\nprices p[i]\nincome m\nparameters a[i], g[i,j]\n\
                share[i] = a[i] + sum over j of (g[i,j]*ln(p[j]))\n";
    exactly(text, &[Symmetry], &["g[2,1] = g[1,2], g[3,1] = g[1,3], g[3,2] = g[2,3]"]);
    exactly(
        text,
        &[AddingUp],
        &["a[3] = 1 - a[1] - a[2], g[3,1] = -(g[1,1] + g[2,1]), g[3,2] = -(g[1,2] + g[2,2]), \
           g[3,3] = -(g[1,3] + g[2,3])"],
    );
}

/// With b1 > 0 no case stands apart.
#[test]
fn shares_linear_in_log_prices_and_log_income() {
    let text = "goods 1..3\nprices p[i]\nincome m\nparameters a[i], b[i], g[i,j]\nassume b[1] > 0\n\
                share[i] = a[i] + sum over j of (g[i,j]*ln(p[j])) + b[i]*ln(m)\n";
    let found = restricted(text, &[Symmetry]);
    assert!(found.complete);
    assert_eq!(found.branches.len(), 1);
    assert_eq!((found.branches[0].equations.len(), found.branches[0].dimension()), (8, 7));
    assert!(found.branches[0].side_conditions.is_empty());
}

/// Only constant shares survive symmetry with three goods.
#[test]
fn shares_over_a_linear_price_index() {
    let text = "goods 1..3\nprices p[i]\nincome m\nparameters a[i], b[i], d[i]\n\
                assume sum over i of (a[i]) = 1, sum over i of (b[i]) = 0, d[i] > 0\n\
                share[i] = a[i] + b[i]*m/sum over k of (d[k]*p[k])\n";
    exactly(text, &[Homogeneity, AddingUp], &[""]);
    exactly(text, &[Symmetry], &["b[1] = 0, b[2] = 0"]);
}

#[test]
fn a_logistic_share() {
    let text = "goods x, y\nprices p, q\nincome m\nparameters k, al, be, ga\nassume k > 0\n\
                share x = 1/(1 + k*p^al*q^be*m^ga)\nshare y = k*p^al*q^be*m^ga/(1 + k*p^al*q^be*m^ga)\n";
    exactly(text, &ALL, &["ga = -(al + be)"]);
    exactly(text, &[AddingUp], &[""]);
}

/// Constant elasticities: only unit elasticities survive adding-up.
#[test]
fn constant_elasticities_of_a_complete_system() {
    let text = "goods x, y\nprices p, q\nincome m\nparameters a, b, c, d, e, f, g, h\nassume a > 0, e > 0\n\
                demand x = a*p^b*q^c*m^d\ndemand y = e*p^f*q^g*m^h\n";
    exactly(text, &[AddingUp], &["b = -1, c = 0, d = 1, e = 1 - a, f = 0, g = -1, h = 1"]);
}

/// What is general is said in indices: symmetry, homogeneity and adding-up of shares in log prices.
#[test]
fn general_statements() {
    use mainspring::restrictions::indexed::{Pattern, Statement, statements};
    let text = "goods 1..4\nprices p[i]\nincome m\nparameters a[i], g[i,j]\n\
                share[i] = a[i] + sum over j of (g[i,j]*ln(p[j]))\n";
    let found = restricted(text, &ALL);
    let said = statements(&found.model, &found.branches[0].equations);
    let general = |family: &str, paired, pattern| Statement::General { family: family.into(), paired, pattern };
    let one = mainspring::algebra::number::rational(1, 1);
    assert_eq!(
        said,
        [
            general("a", false, Pattern::Total(one)),
            general("g", true, Pattern::Symmetric),
            general("g", true, Pattern::ColumnsVanish),
        ]
    );
}
