//! Lau, Functional forms in econometric model building, Handbook of Econometrics III (1986), eqs (2.16)-(2.45): the
//! intervals of relative prices on which a translog and a generalised Leontief unit cost function of two prices, with the
//! same share 1/3 at equal prices, have positive demands and the right curvature. Their ends in closed form.

use crate::vetted::{Vetted, vet};
use mainspring::algebra::evaluation::Point;
use mainspring::algebra::generator::Element;
use mainspring::algebra::number::{Rational, rational};
use mainspring::algebra::polynomial::Poly;
use mainspring::conditions::Condition::Curvature;
use mainspring::conditions::Verdict::{Proven, Regional};

fn translog(b: &str) -> Vetted {
    vet(&format!("goods x, y\nprices p, q\nincome m\nshare x = 1/3 + {b}*ln(p/q)\nshare y = 2/3 - {b}*ln(p/q)\n"))
}

/// The element at p = ratio·q.
fn at(vetted: &Vetted, e: &Element, ratio: &Element) -> Element {
    let field = &vetted.model.field;
    let (p, q) = (vetted.model.prices[0], Poly::var(vetted.model.prices[1]));
    field.substitute(e, &[(p, &field.current(ratio) * &q)]).expect("defined for every positive ratio")
}

fn power_of_e(vetted: &Vetted, exponent: Rational) -> Element {
    vetted.model.field.exp(&Poly::constant(&exponent)).expect("exponentials are defined")
}

/// Whether an element is zero at the ratio, positive where it is a little smaller and negative where it is larger.
fn ends_at(vetted: &Vetted, e: &Element, ratio: &Element) -> bool {
    let field = &vetted.model.field;
    let equal: Point = [(vetted.model.prices[1], rational(1, 1))].into_iter().collect();
    let sign = |by: Rational| {
        let near = at(vetted, e, &field.current(ratio).scale(&by));
        field.enclose(&near, &equal, 128).and_then(|i| i.sign())
    };
    use std::cmp::Ordering::{Greater, Less};
    field.is_zero(&at(vetted, e, ratio))
        && sign(rational(99, 100)) == Some(Greater)
        && sign(rational(101, 100)) == Some(Less)
}

#[test]
fn a_translog_without_substitution_at_equal_prices_curves_from_one_to_e_to_the_three_halves() {
    let vetted = translog("2/9");
    let finding = vetted.on(Curvature);
    assert_eq!(finding.verdict, Regional);
    let region = finding.region.as_ref().expect("a boundary");
    assert_eq!(region.len(), 1);
    assert!(ends_at(&vetted, &region[0], &power_of_e(&vetted, rational(3, 2))), "up to e^(3/2)");
    let one = Poly::one();
    assert!(vetted.model.field.is_zero(&at(&vetted, &region[0], &one)), "from 1");
}

#[test]
fn a_translog_with_elasticity_five_fourths_is_valid_where_demand_is_positive_up_to_e_to_the_six() {
    let vetted = translog("(-1/18)");
    assert_eq!(vetted.on(Curvature).verdict, Proven);
    let shares: Vec<Element> = vetted.model.demands.iter().map(|demand| demand.share.clone()).collect();
    assert!(ends_at(&vetted, &shares[0], &power_of_e(&vetted, rational(6, 1))));
    assert!(vetted.model.field.is_zero(&at(&vetted, &shares[1], &power_of_e(&vetted, rational(-12, 1)))));
}

#[test]
fn the_generalised_leontief_form_with_the_same_elasticity_is_valid_up_to_twenty_five_fourths() {
    let text = "
goods x, y
prices p, q
income m
let C = -2/9*p + 10/9*sqrt(p*q) + 1/9*q
assume C > 0
demand x = m*(-2/9 + 5/9*sqrt(q/p))/C
demand y = m*(1/9 + 5/9*sqrt(p/q))/C
";
    let vetted = vet(text);
    assert_eq!(vetted.on(Curvature).verdict, Proven);
    let field = &vetted.model.field;
    let ratio = rational(25, 4);
    let quantity = &vetted.model.demands[0].quantity;
    let around = |by: Rational| {
        let point = [(vetted.model.prices[0], &ratio * by), (vetted.model.prices[1], rational(1, 1))];
        let point = point.into_iter().chain(vetted.model.income.map(|m| (m, rational(1, 1)))).collect();
        field.enclose(quantity, &point, 64).and_then(|i| i.sign())
    };
    use std::cmp::Ordering::{Equal, Greater, Less};
    assert_eq!([(99, 100), (101, 100)].map(|(n, d)| around(rational(n, d))), [Some(Greater), Some(Less)]);
    assert_ne!(around(rational(1, 1)), Some(Greater));
    let point = [(vetted.model.prices[0], ratio), (vetted.model.prices[1], rational(1, 1))];
    let point = point.into_iter().chain(vetted.model.income.map(|m| (m, rational(1, 1)))).collect();
    let exact = mainspring::proof::exact_value(field, quantity, &point).and_then(|value| value.sign());
    assert_eq!(exact, Some(Equal), "demand is zero at exactly 25/4");
}
