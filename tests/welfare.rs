//! Expenditure along a price path: the enclosure against closed forms that are known from elsewhere.

use mainspring::algebra::number::{Rational, rational};
use mainspring::language::Source;
use mainspring::vetting::{Allowance, NotFollowed, Part, Vetting, vet};
use mainspring::welfare::{NotAlong, Path};
use std::rc::Rc;

fn vetted(text: &str, values: &[(&str, Rational)]) -> Vetting {
    let values: Vec<(String, Rational)> =
        values.iter().map(|(name, value)| (name.to_string(), value.clone())).collect();
    let model = mainspring::read(&Source::new("test", text), &values, Allowance::default()).expect("a model");
    vet(Rc::new(model), &Part::ALL, Allowance::default())
}

/// From income `income`, the prices going from one list to the other.
fn path(vetting: &Vetting, from: &[Rational], to: &[Rational], income: Rational) -> Path {
    let ends = from.iter().cloned().zip(to.iter().cloned());
    Path { prices: vetting.model.prices.iter().zip(ends).map(|(v, (a, b))| (*v, a, b)).collect(), income }
}

/// Expenditure lies in the enclosure, which is narrow.
fn encloses(vetting: &mut Vetting, path: &Path, value: &Rational) {
    vetting.follow(path, 9, Allowance::default()).unwrap();
    let found = vetting.along.as_ref().unwrap();
    assert!(found.from <= *value && *value <= found.to, "{value}: {} to {}", found.from, found.to);
    assert!(&found.to - &found.from < &path.income * rational(1, 100_000_000));
}

/// Linear expenditure: e = p·c + u Π p^b, so that with b = 1/2 and prices moving between squares everything is rational.
#[test]
fn linear_expenditure_between_squares() {
    let mut les = vetted(
        "goods a, b\nprices p, q\nincome m\nparameters s\nassume 0 < s < 1, m > 2*p + q\n\
         demand a = 2 + s*(m - 2*p - q)/p\ndemand b = 1 + (1-s)*(m - 2*p - q)/q",
        &[("s", rational(1, 2))],
    );
    let line = path(&les, &[rational(1, 1), rational(4, 1)], &[rational(9, 4), rational(4, 1)], rational(100, 1));
    // u = (100 − 6)/2; at the end u·3 + 9/2 + 4
    encloses(&mut les, &line, &rational(299, 2));
}

/// e' = 1 + e² is solved by the tangent, which is outside the class of closed forms: from e(1) = 1,
/// e(3/2) = tan(π/4 + 1/2) = (1 + tan ½)/(1 − tan ½) with tan ½ = 0.546302489843790513…
#[test]
fn a_tangent_without_a_closed_form_in_the_class() {
    let mut one = vetted("goods a\nprices p\nincome m\nothers deflated\ndemand a = 1 + m^2", &[]);
    let line = path(&one, &[rational(1, 1)], &[rational(3, 2)], rational(1, 1));
    let tangent = rational(546_302_489_843_790_513, 1_000_000_000_000_000_000);
    encloses(&mut one, &line, &((rational(1, 1) + &tangent) / (rational(1, 1) - &tangent)));
    // it has a pole at 1 + π/4
    let beyond = path(&one, &[rational(1, 1)], &[rational(2, 1)], rational(1, 1));
    let stuck = one.follow(&beyond, 1, Allowance::default());
    assert_eq!(stuck, Err(NotFollowed::NotAlong(NotAlong::Stuck)));
}

#[test]
fn no_figure_without_symmetry_or_values_or_outside_the_domain() {
    let mut uneven = vetted("goods a, b\nprices p, q\nincome m\ndemand a = m/(1 + p)\nrest b", &[]);
    let line = path(&uneven, &[rational(1, 1), rational(1, 1)], &[rational(2, 1), rational(1, 1)], rational(1, 1));
    assert_eq!(uneven.follow(&line, 6, Allowance::default()), Err(NotFollowed::NotSymmetric));
    let cobb = "goods a, b\nprices p, q\nincome m\nparameters s\nassume 0 < s < 1\nshare a = s\nshare b = 1 - s";
    let mut cobb = vetted(cobb, &[]);
    let line = path(&cobb, &[rational(1, 1), rational(1, 1)], &[rational(2, 1), rational(1, 1)], rational(1, 1));
    let missing = NotAlong::WithoutValue(vec!["s".to_string()]);
    assert_eq!(cobb.follow(&line, 6, Allowance::default()), Err(NotFollowed::NotAlong(missing)));
    let mut satiated = vetted("goods a\nprices p\nincome m\nothers deflated\ndemand a = 2 - p", &[]);
    let line = path(&satiated, &[rational(1, 1)], &[rational(3, 1)], rational(9, 1));
    let outside = NotAlong::Outside { start: false };
    assert_eq!(satiated.follow(&line, 6, Allowance::default()), Err(NotFollowed::NotAlong(outside)));
}
