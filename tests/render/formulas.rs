//! Single formulas, each in the syntax of model files and in LaTeX.

use crate::reader::formula;
use mainspring::algebra::formula::{Formula, Symbol};
use mainspring::render::formula_latex::latex;
use mainspring::render::formula_text::plain;

/// Reads each line, prints it in both forms, and asks that the first one be what was read.
fn both_forms(lines: &str) -> String {
    let line = |text: &str| {
        let formula = formula(text);
        assert_eq!(plain(&formula), text, "not printed as it was written");
        format!("{text}\n    {}\n", latex(&formula))
    };
    lines.lines().map(str::trim).filter(|text| !text.is_empty()).map(line).collect()
}

#[test]
fn demands_and_preferences() {
    insta::assert_snapshot!(both_forms(
        "a_1*m/p_1
         m*p_1^(-s)/(a_1*p_1^(1 - s) + a_2*p_2^(1 - s))
         u*(a_1*p_1^(1 - s) + a_2*p_2^(1 - s))^(1/(1 - s))
         c_1 + b_1*(m - p_1*c_1 - p_2*c_2)/p_1
         a_1 + g[1,1]*ln(p_1) + g[1,2]*ln(p_2) + b_1*ln(m/P)
         a_0 + a_1*ln(p_1) + 1/2*g[1,1]*ln(p_1)^2 + g[1,2]*ln(p_1)*ln(p_2)
         ln(m) - a_bread*ln(p_bread) - a_fish*ln(p_fish)
         exp(a + b*u)
         exp(a_0 + a_1*ln(p_1) + a_2*ln(p_2) + u*p_1^b_1)
         -s*a_1*m*p_1^(-s - 1)
         sqrt(p_1*p_2)*b_12/p_1"
    ));
}

#[test]
fn numbers_signs_and_brackets() {
    insta::assert_snapshot!(both_forms(
        "-1
         3/2
         -3/2*x^2
         3*x/2
         12*x/35
         x/2 + 1/2*y^2
         2*3^s
         a*2^s
         (3/2)^s
         x^(3/2)
         (-x)^2
         -x^2
         (a - b)*(a + b)
         a - (b - c)^2
         a/(b*c)
         a/(b/c + 1)
         (x^y)^z
         x^(y^z)
         x^(-1/2*y^2)
         -(a + b)*c
         1 - sigma
         (ln(x) + ln(y))^2
         sqrt(x)^s"
    ));
}

#[test]
fn functions_keep_their_distance() {
    insta::assert_snapshot!(both_forms(
        "ln(x)*ln(y)
         ln(x)*y
         y*ln(x)
         ln(x)*(a + b)
         ln(x/y)*z
         ln(x + y)
         ln(ln(x))
         ln((a + b)/(c + d))
         exp(-x)*y
         exp((a + b)/(c + d))
         sqrt(x/y)
         Ei(x) + erf(x) + erfi(x) + lambertw(x)
         bread*fish"
    ));
}

#[test]
fn names() {
    let names = "x x1 x_1 x12 x_b p_bread p_bread_white p_1_2 g[1,2] g[1,12] g[bread,fish] g[i,j] gamma_12 gamma[1,2] \
                 sigma Sigma sigma_f alpha_beta p_alpha prezzo_caffè é bread b1b x1[2] varphi";
    let line = |name: &str| format!("{name:14} {}\n", latex(&Formula::symbol(name)));
    insta::assert_snapshot!(names.split_whitespace().map(line).collect::<String>());
}

#[test]
fn declared_names() {
    let cases = [
        ("s", r"\sigma"),
        ("g[1,2]", r"\gamma"),
        ("g[1,2]", r"\gamma^{*}"),
        ("x", r"\hat{x}_{0}"),
        ("y", r"\bar y"),
        ("evil", r"\input{secret}"),
        ("bad", "}{"),
        ("worse", "x%"),
        ("loud", r"\mathbf{q}"),
    ];
    let mut lines = String::new();
    for (plain, declared) in cases {
        let name = Formula::Symbol(Symbol { plain: plain.into(), latex: Some(declared.into()) });
        let squared = Formula::power(name.clone(), Formula::integer(2));
        let product = Formula::product(vec![name, Formula::symbol("m")]);
        lines.push_str(&format!("{plain} as {declared}:  {}  {}\n", latex(&squared), latex(&product)));
    }
    insta::assert_snapshot!(lines);
}
