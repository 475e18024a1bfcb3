//! Demands behind given preferences, and where the best bundle is at a corner.

use std::rc::Rc;

use mainspring::language::Source;
use mainspring::recovery::Recovered;
use mainspring::recovery::given::Demanded;
use mainspring::render::formula_text::plain;
use mainspring::vetting::Part;
use mainspring::{Allowance, read, vet};

/// The demands, and how they print.
fn demanded(given: &str) -> (Demanded, Vec<String>) {
    let text = format!(
        "goods tea, cake\nprices p, q\nincome m\nquantities x, y\nparameters a, b\nassume a > 0, b > 0\n{given}\n"
    );
    let Ok(model) = read(&Source::new("test", &text), &[], Allowance::default()) else { panic!("unreadable:\n{text}") };
    let vetting = vet(Rc::new(model), &[Part::Recovery], Allowance::default());
    let Some(Recovered::Found(found)) = vetting.recovered else { panic!("nothing follows from\n{text}") };
    let demanded = found.demanded.expect("the demands of given preferences");
    let printed = demanded.quantities.iter().map(|x| plain(&vetting.model.field.formula(x))).collect();
    (demanded, printed)
}

#[test]
fn a_quasi_linear_consumer_buys_cake_only_beyond_an_income() {
    let (found, printed) = demanded("given utility = a*ln(x) + b*y");
    assert_eq!(printed, ["a*q/(b*p)", "m/q - a/b"]);
    assert_eq!(found.doubtful, [1]);
    let (good, witness) = &found.corners[0];
    assert_eq!(*good, 1);
    assert_eq!(witness.value.sign(), Some(std::cmp::Ordering::Less));
}

#[test]
fn what_can_be_done_without_may_be_left_out() {
    // ln(x + a) is finite at x = 0
    let (found, _) = demanded("given utility = ln(x + a) + ln(y)");
    assert_eq!(found.doubtful, [0]);
    assert_eq!(found.corners.len(), 1);
}

#[test]
fn an_essential_good_is_never_left_out() {
    let (found, _) = demanded("given utility = a*ln(x) + b*ln(y)");
    assert!(found.doubtful.is_empty() && found.corners.is_empty() && found.constant_rates.is_empty());
}

#[test]
fn of_perfect_substitutes_one_is_bought() {
    let (found, printed) = demanded("given utility = a*x + b*y");
    assert!(printed.is_empty());
    assert!(matches!(found.constant_rates[..], [(0, 1, _)]));
}

#[test]
fn an_expenditure_function_of_the_quasi_linear_kind_ends_at_the_same_income() {
    let (found, printed) = demanded("given expenditure = q*u + q*ln(p/q)");
    assert_eq!(printed, ["q/p", "m/q - 1"]);
    assert_eq!(found.doubtful, [1]);
    assert_eq!(found.corners.len(), 1);
}
