//! Laws of assumptions: what one point satisfies is never called contradictory, and elimination keeps its solutions.

use mainspring::algebra::evaluation::Point;
use mainspring::algebra::number::{Rational, rational};
use mainspring::language::Source;
use mainspring::model::{Model, read};
use proptest::prelude::*;

const NAMES: [&str; 4] = ["a", "b", "c", "d"];

/// A linear form as text, and its value at a point.
fn form(coefficients: &[i64], at: &[i64]) -> (String, i64) {
    let terms: Vec<String> = coefficients.iter().zip(NAMES).map(|(c, name)| format!("({c})*{name}")).collect();
    (terms.join(" + "), coefficients.iter().zip(at).map(|(c, x)| c * x).sum())
}

fn model(assumptions: &[String]) -> Result<Model, String> {
    let lines: String = assumptions.iter().map(|assumption| format!("assume {assumption}\n")).collect();
    let source = Source::new("laws.demand", format!("parameters a, b, c, d\n{lines}claim a = a\n"));
    read(&source, &[]).map_err(|mistakes| mistakes[0].message.clone())
}

/// The point, with the names of the model.
fn located(model: &Model, at: &[i64]) -> Point {
    model.parameters.iter().zip(at).map(|(parameter, x)| (parameter.var, rational(*x, 1))).collect()
}

fn rows(most: usize) -> impl Strategy<Value = Vec<Vec<i64>>> {
    prop::collection::vec(prop::collection::vec(-3i64..=3, NAMES.len()), 1..=most)
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(48))]

    #[test]
    fn inequalities_with_a_common_point_are_accepted(
        rows in rows(6),
        slack in prop::collection::vec(0i64..=2, 6),
        at in prop::collection::vec(-3i64..=3, NAMES.len()),
    ) {
        let assumptions: Vec<String> = rows.iter().zip(&slack).map(|(row, slack)| {
            let (text, value) = form(row, &at);
            let sign = if *slack > 0 { ">" } else { ">=" };
            format!("{text} {sign} {}", value - slack)
        }).collect();
        let model = model(&assumptions);
        prop_assert!(model.is_ok(), "{:?} though {:?} satisfies {:?}", model.err(), at, assumptions);
        let model = model.unwrap();
        prop_assert!(model.is_admissible(&located(&model, &at)));
        prop_assert!(model.points().take(5).all(|point| model.is_admissible(&point)));
    }

    #[test]
    fn equations_keep_their_solutions(rows in rows(5), at in prop::collection::vec(-3i64..=3, NAMES.len())) {
        let assumptions: Vec<String> = rows.iter().map(|row| {
            let (text, value) = form(row, &at);
            format!("{text} = {value}")
        }).collect();
        let model = model(&assumptions).unwrap();
        let point = located(&model, &at);
        prop_assert!(model.is_admissible(&point));
        for parameter in &model.parameters {
            let Some(element) = &parameter.eliminated else { continue };
            let value = model.field.value_at(element, &point).unwrap().as_rational();
            prop_assert_eq!(value, point.get(&parameter.var).cloned());
        }
        for found in model.points().take(3) {
            for row in &rows {
                let value = |point: &Point| -> Rational {
                    model.parameters.iter().zip(row).map(|(p, c)| &point[&p.var] * rational(*c, 1)).sum()
                };
                prop_assert_eq!(value(&found), value(&point));
            }
        }
    }

    #[test]
    fn an_inequality_and_its_opposite_are_a_contradiction(row in prop::collection::vec(-3i64..=3, NAMES.len()), bound in -3i64..=3) {
        let (text, _) = form(&row, &[0; 4]);
        let conflict = model(&[format!("{text} > {bound}"), format!("{text} < {bound}")]);
        prop_assert!(conflict.is_err_and(|message| message.starts_with("no point satisfies")));
    }
}
