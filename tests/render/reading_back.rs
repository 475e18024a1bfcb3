//! What is printed in LaTeX reads back as the same formula.

use crate::reader;
use crate::scrambled::{Dice, scrambled};
use mainspring::algebra::formula::Formula;
use mainspring::language::{Source, Statement, read, wording};
use mainspring::render::formula_latex::latex;
use mainspring::render::formula_text::plain;
use mainspring::render::latex::fragment;
use mainspring::render::latex_setting::Setting;
use proptest::prelude::*;

const DECLARED: &str = "goods 1..2\nparameters p_1, p_bread, m, a_1, gamma[i,j], sigma, u, alpha_fish, P\n";

/// The formula that a `let` in LaTeX is read as.
fn read_back(latex: &str) -> Formula {
    let source = Source::new("model.demand", format!("{DECLARED}let y = ${latex}$\n"));
    let model = read(&source).unwrap_or_else(|mistakes| {
        panic!("{}", mistakes.iter().map(|mistake| mistake.render(&source)).collect::<Vec<_>>().join("\n"))
    });
    match model.statements.last().map(|located| &located.statement) {
        Some(Statement::Let { value, .. }) => reader::formula(&wording(value)),
        other => panic!("{other:?}"),
    }
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(400))]

    #[test]
    fn a_printed_formula_reads_back(seed in any::<u64>(), depth in 1usize..5) {
        let formula = reader::formula(&plain(&Dice(seed).formula(depth)));
        // numbers grow beyond what the reader takes for an exponent
        prop_assume!(!plain(&formula).split(|letter: char| !letter.is_ascii_digit()).any(|digits| digits.len() > 4));
        let printed = latex(&formula);
        prop_assert_eq!(plain(&read_back(&printed)), plain(&formula), "{}", printed);
    }
}

/// Displays whose lines are broken, right-hand sides only.
#[test]
fn a_broken_display_reads_back() {
    let mut read = 0;
    for seed in 0..6 {
        let document = scrambled(seed);
        let text = fragment(&document, &[], &Setting::default());
        for display in text.split("\\begin{align*}").skip(1) {
            let Some((inside, _)) = display.split_once("\\end{align*}") else { continue };
            let Some((_, right)) = inside.split_once("&=") else { continue };
            if inside.matches("&=").count() > 1 || display.contains("where\n") || right.contains("_{0}") {
                continue;
            }
            let names = ["A", "B", "C", "D", "E", "F", "G", "H", "K", "L", "M"].map(|name| format!("{name} "));
            if names.iter().any(|name| right.contains(name.as_str())) {
                continue;
            }
            let right = right.replace("\\\\", " ").trim().trim_end_matches(['.', ',']).to_string();
            read_back(&right);
            read += 1;
        }
    }
    assert!(read > 60, "only {read} displays");
}
