//! The sixteen outlay and share forms of the incomplete linear, semi-log and log-log systems (LaFrance 1985, 1986, 1990;
//! LaFrance and Hanemann 1989; von Haefen 2002). The printed tables were not at hand: for two and three goods the branches
//! were held against the Slutsky matrix in floating point, at all points of a lattice of parameter values [derived here].

use crate::incomplete_forms::{form, symmetric, table};

#[test]
fn e1_linear() {
    table(
        "outlay",
        false,
        "#",
        "m",
        &[
            "a1 = 0, b12 = 0, b21 = -b11*g2, g1 = 0",
            "a1 = 0, b21 = -b11, g1 = 0, g2 = 1",
            "a2 = a1*b21*(1 - 1/g1)/b11, b22 = b12*(b21/b11 - b21/(b11*g1) - 1/g1), g2 = b21*(g1 - 1)/b11, g1 != 0, b11 != 0",
            "a2 = a1*g2, b11 = 0, b22 = b12*(g2 - 1), g1 = 1",
            "a2 = a1*g2/g1, b11 = 0, b21 = 0, b22 = b12*(g2 - 1)/g1, g1 != 0",
            "b12 = 0, b21 = 0, g1 = 0, g2 = 0",
        ],
    );
}

#[test]
fn e2_log_income() {
    table(
        "outlay",
        false,
        "#",
        "ln(m)",
        &[
            "a1 = 0, a2 = 0, b11 = 0, b12 = 0, b21 = 0, b22 = 0",
            "a1 = 0, b11 = 0, b12 = 0, b21 = 0, g1 = 0",
            "a2 = 0, b12 = 0, b21 = 0, b22 = 0, g2 = 0",
            "b11 = 0, b12 = 0, b21 = 0, b22 = 0, g2 = a2*g1/a1, a1 != 0",
            "b12 = 0, b21 = 0, g1 = 0, g2 = 0",
        ],
    );
}

#[test]
fn e3_log_prices() {
    table(
        "outlay",
        false,
        "ln(#)",
        "m",
        &[
            "b11 = 0, b12 = 0, b21 = -a1*g2, g1 = 0",
            "b12 = a1*g2 - a2*g1 + b11*g2/g1, b21 = b11*g2/g1, b22 = g2*(a1*g2/g1 - a2 + b11*g2/g1^2), g1 != 0",
            "b21 = b12, g1 = 0, g2 = 0",
        ],
    );
}

#[test]
fn e4_log_prices_and_log_income() {
    table(
        "outlay",
        false,
        "ln(#)",
        "ln(m)",
        &[
            "a1 = 0, b11 = 0, b12 = 0, b21 = 0, g1 = 0",
            "a2 = a1*g2/g1, b12 = b11*g2/g1, b21 = b11*g2/g1, b22 = b11*g2^2/g1^2, g1 != 0",
            "b21 = b12, g1 = 0, g2 = 0",
        ],
    );
}

#[test]
fn e5_exponential() {
    table("outlay", true, "#", "m", &["b12 = 0, b21 = 0, g2 = g1"]);
}

#[test]
fn e6_exponential_in_prices_power_of_income() {
    table("outlay", true, "#", "ln(m)", &["b12 = 0, b21 = 0, g2 = g1"]);
}

#[test]
fn e7_powers_of_prices_exponential_in_income() {
    table(
        "outlay",
        true,
        "ln(#)",
        "m",
        &[
            "b11 = 0, b12 = 0, b21 = -a1*g2, g1 = 0",
            "b12 = -a2*g1, b21 = 0, b22 = 0, g2 = 0",
            "b12 = 0, b21 = 0, g2 = g1",
            "b12 = a2*b11/a1, b21 = b11, b22 = a2*b11/a1, g2 = g1",
        ],
    );
}

#[test]
fn e8_powers() {
    table(
        "outlay",
        true,
        "ln(#)",
        "ln(m)",
        &[
            "b11 = 0, b12 = 0, b21 = a1*(1 - g2), g1 = 1",
            "b12 = 0, b21 = 0, g2 = g1",
            "b12 = a2*(1 - g1), b21 = 0, b22 = 0, g2 = 1",
            "b12 = a2*b11/a1, b21 = b11, b22 = a2*b11/a1, g2 = g1",
        ],
    );
}

#[test]
fn w1_linear() {
    table(
        "share",
        false,
        "#",
        "m",
        &[
            "a1 = 0, a2 = 0, b11 = 0, b12 = 0, b21 = 0, b22 = 0",
            "a1 = 0, b11 = 0, b12 = 0, b21 = 0, g1 = 0",
            "a2 = 0, b12 = 0, b21 = 0, b22 = 0, g2 = 0",
            "b11 = 0, b12 = 0, b21 = 0, b22 = 0, g2 = a2*g1/a1, a1 != 0",
            "b12 = 0, b21 = 0, g1 = 0, g2 = 0",
        ],
    );
}

#[test]
fn w2_log_income() {
    table(
        "share",
        false,
        "#",
        "ln(m)",
        &[
            "a1 = 0, b12 = 0, b21 = -b11*g2, g1 = 0",
            "a1 = 0, b21 = -b11, g1 = 0, g2 = 1",
            "a2 = a1*b21*(1 - 1/g1)/b11, b22 = b12*(b21/b11 - b21/(b11*g1) - 1/g1), g2 = b21*(g1 - 1)/b11, g1 != 0, b11 != 0",
            "a2 = a1*g2, b11 = 0, b22 = b12*(g2 - 1), g1 = 1",
            "a2 = a1*g2/g1, b11 = 0, b21 = 0, b22 = b12*(g2 - 1)/g1, g1 != 0",
            "b12 = 0, b21 = 0, g1 = 0, g2 = 0",
        ],
    );
}

#[test]
fn w3_log_prices() {
    table(
        "share",
        false,
        "ln(#)",
        "m",
        &[
            "a1 = 0, b11 = 0, b12 = 0, b21 = 0, g1 = 0",
            "a2 = a1*g2/g1, b12 = b11*g2/g1, b21 = b11*g2/g1, b22 = b11*g2^2/g1^2, g1 != 0",
            "b21 = b12, g1 = 0, g2 = 0",
        ],
    );
}

#[test]
fn w4_log_prices_and_log_income() {
    table(
        "share",
        false,
        "ln(#)",
        "ln(m)",
        &[
            "b11 = 0, b12 = 0, b21 = -a1*g2, g1 = 0",
            "b12 = a1*g2 - a2*g1 + b11*g2/g1, b21 = b11*g2/g1, b22 = g2*(a1*g2/g1 - a2 + b11*g2/g1^2), g1 != 0",
            "b21 = b12, g1 = 0, g2 = 0",
        ],
    );
}

#[test]
fn w5_exponential() {
    table("share", true, "#", "m", &["b12 = 0, b21 = 0, g2 = g1"]);
}

#[test]
fn w6_exponential_in_prices_power_of_income() {
    table("share", true, "#", "ln(m)", &["b12 = 0, b21 = 0, g2 = g1"]);
}

#[test]
fn w7_powers_of_prices_exponential_in_income() {
    table(
        "share",
        true,
        "ln(#)",
        "m",
        &["b12 = 0, b21 = 0, g2 = g1", "b12 = a2*b11/a1, b21 = b11, b22 = a2*b11/a1, g2 = g1"],
    );
}

#[test]
fn w8_powers() {
    table(
        "share",
        true,
        "ln(#)",
        "ln(m)",
        &[
            "b11 = 0, b12 = 0, b21 = -a1*g2, g1 = 0",
            "b12 = -a2*g1, b21 = 0, b22 = 0, g2 = 0",
            "b12 = 0, b21 = 0, g2 = g1",
            "b12 = a2*b11/a1, b21 = b11, b22 = a2*b11/a1, g2 = g1",
        ],
    );
}

/// Three goods: how many branches each of the twenty-four forms has.
#[test]
fn three_goods() {
    let counts: [(&str, [usize; 8]); 3] = [
        ("demand", [4, 4, 7, 7, 14, 14, 14, 14]),
        ("outlay", [11, 7, 4, 4, 1, 1, 14, 14]),
        ("share", [7, 11, 4, 4, 1, 1, 5, 14]),
    ];
    for (left, counts) in counts {
        for (at, count) in counts.into_iter().enumerate() {
            let (price, income) = (["#", "ln(#)"][at / 2 % 2], ["m", "ln(m)"][at % 2]);
            let found = symmetric(&form(left, 3, at >= 4, price, income));
            assert_eq!(found.branches.len(), count, "{left} form {}", at + 1);
        }
    }
}
