//! The eight quantity forms of the incomplete linear, semi-log and log-log systems (LaFrance 1985, 1986, 1990; LaFrance
//! and Hanemann 1989; von Haefen 2002). The printed tables were not at hand; the branches here are derived, and were
//! checked through Roy and Shephard and on a lattice of parameter points [derived here].

use mainspring::conditions::Condition;
use mainspring::restrictions::Restrictions;

use crate::system::{listed, restricted};

/// The left side is a quantity, an outlay or a share. x_i = a_i + Σ b_ik f(p_k) + g_i h(m), or a_i times the exponential of the sum, with a_i > 0.
pub fn form(left: &str, goods: usize, exponential: bool, price: &str, income: &str) -> String {
    let names = |stem: &str| (1..=goods).map(|i| format!("{stem}{i}")).collect::<Vec<_>>().join(", ");
    let slopes: Vec<String> = (1..=goods).flat_map(|i| (1..=goods).map(move |k| format!("b{i}{k}"))).collect();
    let mut text = format!(
        "goods {}\nprices {}\nincome m\nothers deflated\nparameters {}, {}, {}\n",
        names("good"),
        names("p"),
        names("a"),
        slopes.join(", "),
        names("g")
    );
    for i in 1..=goods {
        let sum: Vec<String> =
            (1..=goods).map(|k| format!("b{i}{k}*{}", price.replace('#', &format!("p{k}")))).collect();
        let sum = format!("{} + g{i}*{income}", sum.join(" + "));
        text.push_str(&match exponential {
            false => format!("{left} good{i} = a{i} + {sum}\n"),
            true => format!("assume a{i} > 0\n{left} good{i} = a{i}*exp({sum})\n"),
        });
    }
    text
}

pub fn symmetric(text: &str) -> Restrictions {
    let found = restricted(text, &[Condition::Symmetry]);
    assert!(found.complete, "{:?}", found.reason);
    assert_eq!(found.failures.len(), 1, "a point outside all branches");
    found
}

pub fn table(left: &str, exponential: bool, price: &str, income: &str, expected: &[&str]) {
    let found = symmetric(&form(left, 2, exponential, price, income));
    let mut expected: Vec<String> = expected.iter().map(ToString::to_string).collect();
    expected.sort();
    assert_eq!(listed(&found), expected);
}

const QUASILINEAR: &str = "b21 = b12, g1 = 0, g2 = 0";
const SEPARATE: &str = "b12 = 0, b21 = 0, g2 = g1";

#[test]
fn x1_linear() {
    table(
        "demand",
        false,
        "#",
        "m",
        &[
            QUASILINEAR,
            "b12 = a1*g2 - a2*g1 + b11*g2/g1, b21 = b11*g2/g1, b22 = g2*(a1*g2/g1 - a2 + b11*g2/g1^2), g1 != 0",
            "b11 = 0, b12 = 0, b21 = -a1*g2, g1 = 0",
        ],
    );
}

#[test]
fn x2_linear_in_log_income() {
    table(
        "demand",
        false,
        "#",
        "ln(m)",
        &[
            QUASILINEAR,
            "a2 = a1*g2/g1, b12 = b11*g2/g1, b21 = b11*g2/g1, b22 = b11*g2^2/g1^2, g1 != 0",
            "a1 = 0, b11 = 0, b12 = 0, b21 = 0, g1 = 0",
        ],
    );
}

#[test]
fn x3_log_prices() {
    table(
        "demand",
        false,
        "ln(#)",
        "m",
        &[
            "b12 = 0, b21 = 0, g1 = 0, g2 = 0",
            "b11 = 0, b12 = 0, b21 = 0, b22 = 0, g2 = a2*g1/a1, a1 != 0",
            "a1 = 0, b11 = 0, b12 = 0, b21 = 0, g1 = 0",
            "a2 = 0, b12 = 0, b21 = 0, b22 = 0, g2 = 0",
            "a1 = 0, a2 = 0, b11 = 0, b12 = 0, b21 = 0, b22 = 0",
        ],
    );
}

#[test]
fn x4_log_prices_and_log_income() {
    table(
        "demand",
        false,
        "ln(#)",
        "ln(m)",
        &[
            "b12 = 0, b21 = 0, g1 = 0, g2 = 0",
            "b11 = 0, b12 = 0, b21 = 0, b22 = 0, g2 = a2*g1/a1, a1 != 0",
            "a1 = 0, b11 = 0, b12 = 0, b21 = 0, g1 = 0",
            "a2 = 0, b12 = 0, b21 = 0, b22 = 0, g2 = 0",
            "a1 = 0, a2 = 0, b11 = 0, b12 = 0, b21 = 0, b22 = 0",
        ],
    );
}

#[test]
fn x5_exponential() {
    table(
        "demand",
        true,
        "#",
        "m",
        &[
            SEPARATE,
            "b12 = a2*b11/a1, b21 = b11, b22 = a2*b11/a1, g2 = g1",
            "b12 = -a2*g1, b21 = 0, b22 = 0, g2 = 0",
            "b11 = 0, b12 = 0, b21 = -a1*g2, g1 = 0",
        ],
    );
}

#[test]
fn x6_exponential_in_prices_power_of_income() {
    table(
        "demand",
        true,
        "#",
        "ln(m)",
        &[
            SEPARATE,
            "b12 = a2*b11/a1, b21 = b11, b22 = a2*b11/a1, g2 = g1",
            "b12 = a2*(1 - g1), b21 = 0, b22 = 0, g2 = 1",
            "b11 = 0, b12 = 0, b21 = a1*(1 - g2), g1 = 1",
        ],
    );
}

#[test]
fn x7_powers_of_prices_exponential_in_income() {
    table(
        "demand",
        true,
        "ln(#)",
        "m",
        &[
            SEPARATE,
            "b12 = a2*(1 + b11)/a1, b21 = 1 + b11, b22 = a2/a1 + a2*b11/a1 - 1, g2 = g1",
            "b12 = -a2*g1, b21 = 0, b22 = -1, g2 = 0",
            "b11 = -1, b12 = 0, b21 = -a1*g2, g1 = 0",
        ],
    );
}

#[test]
fn x8_constant_elasticities() {
    table(
        "demand",
        true,
        "ln(#)",
        "ln(m)",
        &[
            SEPARATE,
            "b12 = a2*(1 + b11)/a1, b21 = 1 + b11, b22 = a2/a1 + a2*b11/a1 - 1, g2 = g1",
            "b12 = a2*(1 - g1), b21 = 0, b22 = -1, g2 = 1",
            "b11 = -1, b12 = 0, b21 = a1*(1 - g2), g1 = 1",
        ],
    );
}
