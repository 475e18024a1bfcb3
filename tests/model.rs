//! What a model file means: each test states a file and claims about it.

use std::collections::BTreeMap;

use mainspring::algebra::evaluation::Point;
use mainspring::algebra::field::Field;
use mainspring::algebra::generator::{Element, Role};
use mainspring::algebra::number::{Rational, rational};
use mainspring::algebra::polynomial::Poly;
use mainspring::algebra::sign::Sign;
use mainspring::language::Source;
use mainspring::model::{Claim, Coverage, DomainCondition, Form, Model, Value, read};
use mainspring::render::formula_text::plain;

/// A file written with a margin, for the eye.
fn without_margin(text: &str) -> String {
    text.lines().map(|line| line.trim_start().to_string() + "\n").collect()
}

fn model(text: &str) -> Model {
    let source = Source::new("model.demand", without_margin(text));
    read(&source, &[]).unwrap_or_else(|mistakes| {
        let shown: Vec<String> = mistakes.iter().map(|mistake| mistake.render(&source)).collect();
        panic!("{}", shown.join("\n"))
    })
}

/// The first message of a file that is not read.
fn mistake(text: &str) -> String {
    let source = Source::new("model.demand", without_margin(text));
    let mistakes = read(&source, &[]).err().expect("the file has a mistake");
    mistakes[0].message.clone()
}

fn shown(model: &Model, e: &Element) -> String {
    plain(&model.field.formula(e))
}

/// Whether two elements are equal on the domain.
fn equal(model: &Model, a: &Element, b: &Element) -> bool {
    model.field.is_zero(&(a - b))
}

/// Whether the two sides of a claim are equal.
fn stated_equal(model: &Model, claim: &Claim) -> bool {
    let (left, right) = claim.sides().expect("the claim has sides");
    equal(model, left, right)
}

fn parameter(model: &Model, name: &str) -> Element {
    let found = model.parameters.iter().find(|p| p.name == name).expect("a declared parameter");
    found.eliminated.as_ref().map_or_else(|| Poly::var(found.var), |e| model.field.reduce(e))
}

fn coordinate(model: &Model, point: &Point, name: &str) -> Rational {
    let named: BTreeMap<String, Rational> =
        point.iter().filter_map(|(var, value)| Some((model.field.name(*var)?, value.clone()))).collect();
    named[name].clone()
}

const STAPLES: &str = "title \"Three staples\"
goods bread, fish, cloth
prices p_b, p_f, p_c
income m
parameters a_b, a_f, a_c
assume a_b + a_f + a_c = 1
assume a_b > 0, a_f > 0, a_c > 0
demand bread = a_b * m / p_b
share fish = a_f
outlay cloth = a_c * m
";

#[test]
fn demands_in_different_forms_are_one_system() {
    let model = model(STAPLES);
    assert_eq!(model.title.as_deref(), Some("Three staples"));
    assert_eq!(model.goods.iter().map(|g| g.name.as_str()).collect::<Vec<_>>(), ["bread", "fish", "cloth"]);
    assert_eq!(model.coverage, Coverage::Complete);
    let forms: Vec<Form> = model.demands.iter().map(|d| d.form).collect();
    assert_eq!(forms, [Form::Demand, Form::Share, Form::Outlay]);
    let income = Poly::var(model.income.unwrap());
    let spent = model.demands.iter().fold(Poly::zero(), |sum, demand| &sum + &demand.outlay);
    assert!(equal(&model, &spent, &income));
    for (demand, price) in model.demands.iter().zip(&model.prices) {
        assert!(equal(&model, &(&demand.quantity * &Poly::var(*price)), &demand.outlay));
        assert!(equal(&model, &(&demand.share * &income), &demand.outlay));
    }
    assert!(model.warnings.is_empty());
}

#[test]
fn an_assumed_equation_eliminates_the_parameter_declared_last() {
    let model = model(STAPLES);
    let eliminated: Vec<bool> = model.parameters.iter().map(|p| p.eliminated.is_some()).collect();
    assert_eq!(eliminated, [false, false, true]);
    let rest = &Poly::one() - &(&parameter(&model, "a_b") + &parameter(&model, "a_f"));
    assert_eq!(parameter(&model, "a_c"), rest);
    assert_eq!(model.field.sign(&rest), Sign::Positive);
}

#[test]
fn symmetric_coefficients_with_rows_that_sum_to_zero_leave_half_a_matrix() {
    let model = model(
        "goods 1..4
        prices p[i]
        income m
        parameters a[i], g[i,j]
        assume g[i,j] = g[j,i], sum over j of (g[i,j]) = 0, sum over i of (a[i]) = 1
        share[i] = a[i] + sum over j of (g[i,j]*ln(p[j]))",
    );
    let free = model.parameters.iter().filter(|p| p.eliminated.is_none() && p.name.starts_with('g'));
    assert_eq!(
        free.map(|p| p.name.as_str()).collect::<Vec<_>>(),
        ["g[1,1]", "g[1,2]", "g[1,3]", "g[2,2]", "g[2,3]", "g[3,3]"]
    );
    for i in 1..=4 {
        let row = (1..=4).fold(Poly::zero(), |sum, j| &sum + &parameter(&model, &format!("g[{i},{j}]")));
        let column = (1..=4).fold(Poly::zero(), |sum, j| &sum + &parameter(&model, &format!("g[{j},{i}]")));
        assert!(row.is_zero() && column.is_zero());
    }
    let total = model.demands.iter().fold(Poly::zero(), |sum, demand| &sum + &demand.share);
    assert!(equal(&model, &total, &Poly::one()));
}

#[test]
fn an_equation_with_a_coefficient_that_is_not_zero_is_solved_too() {
    let elasticity = model("parameters r, s\nassume r > 0, s*(1 + r) = 1\nclaim s < 1");
    let (r, s) = (parameter(&elasticity, "r"), parameter(&elasticity, "s"));
    assert!(equal(&elasticity, &(&s * &(&Poly::one() + &r)), &Poly::one()));
    assert_eq!(elasticity.field.sign(&s), Sign::Positive);
    let product = model("parameters a, b, c\nassume c = a*b, a > 0, b > 0\nclaim c > 0");
    assert_eq!(product.field.sign(&parameter(&product, "c")), Sign::Positive);
    let chained = model("parameters a, b, c\nassume a > 0, a*b = 1, c = 2*b\nclaim a*c = 2");
    let (a, c) = (parameter(&chained, "a"), parameter(&chained, "c"));
    assert!(equal(&chained, &(&a * &c), &Poly::int(2)));
}

#[test]
fn what_cannot_be_solved_is_refused() {
    assert!(mistake("parameters a, b\nassume a^2 = b^2\nclaim a = b").contains("one of several factors is zero"));
    assert!(mistake("parameters a, b\nassume a*b = 0\nclaim a = b").contains("one of several factors is zero"));
    assert!(mistake("parameters a, b\nassume exp(a) = b + 1\nclaim a = b").contains("algebraic"));
    assert!(mistake("parameters a, b\nassume a*b = 1\nclaim a = b").contains("solved for none"));
    assert!(mistake(&(STAPLES.to_string() + "assume a_b*m = 1")).contains("only relate parameters"));
}

#[test]
fn a_chain_is_every_one_of_its_links() {
    let model = model("parameters a, b\nassume 0 < a < b <= 1\nclaim a < 1");
    assert_eq!(model.assumptions.len(), 3);
    let (a, b) = (parameter(&model, "a"), parameter(&model, "b"));
    assert_eq!(model.field.sign(&a), Sign::Positive);
    assert_eq!(model.field.sign(&(&a - &b)), Sign::Negative);
    assert_eq!(model.field.sign(&(&Poly::one() - &a)), Sign::Positive);
}

#[test]
fn assumptions_that_no_point_satisfies_are_named() {
    let conflict = |assumptions: &str| mistake(&format!("parameters a, b, c\n{assumptions}\nclaim a = a"));
    assert_eq!(conflict("assume a > 0\nassume b > 1\nassume a < 0"), "no point satisfies `a > 0`, `a < 0` together");
    assert_eq!(
        conflict("assume a + b = 1\nassume c > 0\nassume a + b = 2"),
        "no point satisfies `a + b = 1`, `a + b = 2` together"
    );
    assert_eq!(conflict("assume a^2 < 0"), "no point satisfies `a^2 < 0`");
    assert_eq!(conflict("assume a > b, b > c, c > a"), "no point satisfies `a > b`, `b > c`, `c > a` together");
    assert_eq!(
        conflict("assume a + b + c = 1, a > 1/2, b > 1/2, c >= 0"),
        "no point satisfies `a + b + c = 1`, `a > 1/2`, `b > 1/2`, `c >= 0` together"
    );
    assert_eq!(conflict("assume a = 2*b, a != 2*b"), "no point satisfies `a = 2*b`, `a != 2*b` together");
    // nothing is claimed where a point exists
    model("parameters a, b, c\nassume a >= b, b >= c, c >= a\nclaim a = c");
}

#[test]
fn the_domain_is_what_the_formulas_need() {
    let model = model(
        "goods 1..2
        prices p[i]
        income m
        parameters c[i], k, s
        assume k > 0, s != 1
        let z = m - sum over i of (p[i]*c[i])
        demand[1] = c[1] + k*sqrt(z)/(p[1]*(1 - s)) + ln(p[1]/m)
        rest[2]",
    );
    assert_eq!(model.domain.len(), 1);
    let DomainCondition::Positive(spare) = &model.domain[0] else { panic!("a condition of sign") };
    assert_eq!(model.field.sign(spare), Sign::Positive);
    assert!(equal(&model, spare, &model.abbreviations[0].1));
    assert_eq!(model.rest, Some(1));
    let income = Poly::var(model.income.unwrap());
    assert!(equal(&model, &(&model.demands[0].outlay + &model.demands[1].outlay), &income));
}

#[test]
fn an_assumed_sign_of_a_product_serves_its_logarithm() {
    let product = model("parameters a, b\nassume a*b > 0\nclaim ln(a*b) = ln(b*a)\nclaim ln(a/b) > 0");
    assert!(product.domain.is_empty());
    let square = model("parameters x\nclaim ln(x^2) = 2*ln(x)");
    assert_eq!(square.domain, [DomainCondition::Positive(parameter(&square, "x"))]);
    let unknown = "parameters x\nclaim sqrt(x^2) = x";
    assert_eq!(mistake(unknown), "`sqrt` needs a positive argument, and `x^2` cannot be shown to be positive");
}

#[test]
fn a_symbolic_power_needs_a_base_of_known_sign() {
    let file = |assumption: &str| {
        format!(
            "goods 1..2\nprices p[i]\nincome m\nparameters a[i], s\n{assumption}
            let P = a[1]*p[1]^(1 - s) + a[2]*p[2]^(1 - s)
            share[i] = a[i]*p[i]^(1 - s)*P^(-1)*P^(s - s)/(P^s/P^s)"
        )
    };
    assert!(mistake(&file("assume s > 0")).contains("`P` is not known to be positive"));
    model(&file("assume P > 0"));
    model(&file("assume a[i] > 0"));
}

#[test]
fn a_quantity_stands_for_its_demand() {
    let model = model(
        "goods 1..3
        prices p[i]
        income m
        quantities x[i]
        parameters a, b
        assume 0 < a < 1, 0 < b < 1
        outlay[3] = m - sum over k != 3 of (p[k]*x[k])
        demand[2] = b*p[1]*x[1]/p[2]
        demand[1] = a*m/p[1]
        claim p[2]*x[2] = a*b*m",
    );
    assert!(stated_equal(&model, &model.claims[0]));
    let names = ["1 - a - a*b", "1 - a*b - a"];
    assert!(
        names.contains(&shown(&model, &model.demands[2].share).as_str()),
        "{}",
        shown(&model, &model.demands[2].share)
    );
    let circle = "goods 1..2\nprices p[i]\nincome m\nquantities x[i]\ndemand[1] = x[2]\ndemand[2] = x[1]";
    assert!(mistake(circle).contains("by way of itself"));
}

#[test]
fn sums_run_over_goods_groups_and_pairs() {
    let model = model(
        "goods 1..4
        group food = 1, 2
        parameters a[i], g[i,j]
        claim sum over k in food of (a[k]) = a[1] + a[2]
        claim sum over k != 2 of (a[k]) = a[1] + a[3] + a[4]
        claim sum over k, l in food of (g[k,l]) = g[1,1] + g[1,2] + g[2,1] + g[2,2]
        claim product over k in food of (a[k]^2) = (a[1]*a[2])^2
        claim sum over k != i of (g[i,k]) = sum over k of (g[i,k]) - g[i,i]",
    );
    assert_eq!(model.claims.len(), 8);
    assert!(model.claims.iter().all(|claim| stated_equal(&model, claim)));
    assert!(model.claims[7].text.ends_with("for i = 4"));
}

#[test]
fn incomplete_systems_name_the_rest_of_the_budget() {
    let others = model("goods 1..1\nprices p[i]\nincome m\nothers q\nparameters a\nassume a > 0\ndemand[1] = a*q/p[1]");
    assert!(matches!(&others.coverage, Coverage::Others(all) if all.len() == 1));
    let deflated = model(
        "goods 1..1\nprices p[i]\nincome m\nothers deflated\nparameters a\nassume a > 0\nlog demand[1] = a*ln(p[1])",
    );
    assert_eq!(deflated.coverage, Coverage::Deflated);
    assert_eq!(shown(&deflated, &deflated.demands[0].quantity), "p[1]^a");
}

#[test]
fn the_utility_symbol_is_one_that_is_free() {
    let file = |names: &str| model(&format!("parameters {names}\nclaim a = a")).utility_name;
    assert_eq!(file("a"), "u");
    assert_eq!(file("a, u"), "U");
    assert_eq!(file("a, u, U, θ"), "kappa");
    assert_eq!(model("utility w\nparameters a\nclaim a = a").utility_name, "w");
}

#[test]
fn a_model_is_built_anew_with_values_put_in() {
    let ces = "goods 1..2
        prices p[i]
        income m
        parameters a[i], s
        assume a[i] > 0, s > 0
        let P = sum over k of (a[k]*p[k]^(1 - s))
        demand[i] = a[i]*p[i]^(-s)*m/P";
    let general = model(ces);
    let s = general.parameters.iter().find(|p| p.name == "s").unwrap().var;
    let unit = general.respecialised(&[(s, Poly::one())]).unwrap();
    let expected = &(&Poly::var(unit.income.unwrap()) * &parameter(&unit, "a[1]"));
    let sum = &parameter(&unit, "a[1]") + &parameter(&unit, "a[2]");
    assert!(equal(&unit, &(&unit.demands[0].outlay * &sum), expected));
    let refused = general.respecialised(&[(s, Poly::int(-1))]).err().unwrap();
    assert_eq!(refused[0].message, "no point satisfies `s > 0` for the values put in");
    let elsewhere = Field::new();
    let t = elsewhere.symbol("a[2]", Role::Parameter);
    let element = Poly::var(t);
    let source = Source::new("model.demand", without_margin(ces));
    let equal_weights = read(&source, &[Value { parameter: "a[1]", element: &element, field: &elsewhere }]).unwrap();
    assert_eq!(parameter(&equal_weights, "a[1]"), parameter(&equal_weights, "a[2]"));
    let unknown = read(&source, &[Value { parameter: "t", element: &Poly::one(), field: &elsewhere }]).err().unwrap();
    assert_eq!(unknown[0].message, "there is no parameter `t` to give a value to");
}

#[test]
fn points_satisfy_what_is_assumed_and_give_every_name_a_value() {
    let model = model(
        "goods 1..3
        prices p[i]
        income m
        parameters b[i], c[i], s
        assume sum over i of (b[i]) = 1, b[i] > 0, 1/4 <= s < 1, s != 1/2
        assume m > sum over i of (p[i]*c[i])
        outlay[i] = p[i]*c[i] + b[i]*(m - sum over j of (p[j]*c[j]))*s/s",
    );
    let quantities: Vec<Element> = model.demands.iter().map(|d| d.quantity.clone()).collect();
    let points: Vec<Point> = model.points().with_positive(&quantities).take(60).collect();
    assert_eq!(points.len(), 60);
    for point in &points {
        assert!(model.is_admissible(point));
        let at = |name: &str| coordinate(&model, point, name);
        assert_eq!(at("b[1]") + at("b[2]") + at("b[3]"), rational(1, 1));
        let committed = (1..=3).map(|i| at(&format!("p[{i}]")) * at(&format!("c[{i}]"))).sum::<Rational>();
        assert!(at("m") > committed);
        assert!(at("s") >= rational(1, 4) && at("s") < rational(1, 1) && at("s") != rational(1, 2));
        for quantity in &quantities {
            assert!(model.field.value_at(quantity, point).unwrap().as_rational().unwrap() > rational(0, 1));
        }
    }
    let again: Vec<Point> = model.points().with_positive(&quantities).take(60).collect();
    assert_eq!(points, again);
    let mut outside = points[0].clone();
    outside.insert(model.income.unwrap(), rational(-1, 1));
    assert!(!model.is_admissible(&outside));
}

#[test]
fn points_are_found_for_many_shares_and_for_awkward_conditions() {
    let many = model(
        "goods 1..64
        prices p[i]
        income m
        parameters a[i]
        assume sum over i of (a[i]) = 1, a[i] > 0
        share[i] = a[i]",
    );
    assert!(many.points().take(3).all(|point| many.is_admissible(&point)));
    assert_eq!(many.points().take(3).count(), 3);
    let definite = model("parameters a, b, c\nassume a < 0, c < 0, a*c > b^2\nclaim a + c < 2*b");
    assert!(definite.points().count() > 20);
    let root = model("parameters a, b\nassume a > 0, b = sqrt(a)\nclaim b > 0");
    let point = root.points().next().expect("a square");
    assert_eq!(coordinate(&root, &point, "a"), coordinate(&root, &point, "b").pow(2));
    // contradictory by the inequality of means, which nobody here claims to see
    let empty = model("parameters a, b\nassume a^2 + b^2 < 1, a*b > 1\nclaim a = b");
    assert_eq!(empty.points().count(), 0);
}

#[test]
fn logarithms_and_powers_are_checked_by_enclosure_at_points() {
    let model = model(
        "goods 1..2
        prices p[i]
        income m
        parameters s
        assume 0 < s < 1, m > p[1]^s + p[2], ln(m) > 2
        demand[1] = 1 + (m - p[1])/(4*p[1])
        rest[2]",
    );
    let points: Vec<Point> = model.points().take(12).collect();
    assert!(points.len() >= 8, "{}", points.len());
    assert!(points.iter().all(|point| model.is_admissible(point)));
    assert!(points.iter().all(|point| coordinate(&model, point, "m") > rational(7, 1)));
}

#[test]
fn sixty_four_goods_are_read() {
    let model = model(
        "goods 1..64
        prices p[i]
        income m
        parameters a0, a[i], b[i], g[i,j]
        assume g[i,j] = g[j,i], sum over j of (g[i,j]) = 0
        assume sum over i of (a[i]) = 1, sum over i of (b[i]) = 0
        let lnP = a0 + sum over k of (a[k]*ln(p[k])) + 1/2*sum over k, l of (g[k,l]*ln(p[k])*ln(p[l]))
        share[i] = a[i] + sum over j of (g[i,j]*ln(p[j])) + b[i]*(ln(m) - lnP)",
    );
    let free = model.parameters.iter().filter(|p| p.eliminated.is_none()).count();
    assert_eq!(free, 1 + 63 + 63 + 63 * 64 / 2);
    let total = Poly::sum(model.demands.iter().map(|demand| demand.share.clone()).collect());
    assert!(equal(&model, &total, &Poly::one()));
    assert_eq!(model.abbreviations[0].0, "lnP");
    assert_eq!(shown(&model, &model.abbreviations[0].1), "lnP");
}

#[test]
fn abbreviations_may_stand_in_any_order_and_in_long_chains() {
    let link = |k: usize| format!("let c{k} = c{} + a/2^2\n", k + 1);
    let forward: String = (0..3000).map(link).collect();
    let chain = model(&format!("parameters a\n{forward}let c3000 = a\nclaim c0 = 751*a"));
    assert!(stated_equal(&chain, &chain.claims[0]));
    let circle = mistake(&format!("parameters a\n{forward}let c3000 = c0\nclaim c0 = 751*a"));
    assert_eq!(circle, "`c0` is defined by way of itself");
    let assumed = mistake(&format!("parameters a\n{forward}let c3000 = a\nassume c0 > 0\nclaim a > 0"));
    assert_eq!(assumed, "formulas refer to each other too deeply here");
    let demands: String = (1..300).map(|k| format!("outlay[{k}] = p[{0}]*x[{0}]/2\n", k + 1)).collect();
    let goods = model(&format!("goods 1..300\nprices p[i]\nincome m\nquantities x[i]\n{demands}outlay[300] = m/2"));
    assert_eq!(shown(&goods, &goods.demands[298].share), "1/4");
}

#[test]
fn formulas_may_be_nested_as_deeply_as_the_reader_allows() {
    let nested = format!("{}a{}", "(1 + 1*(2 - (".repeat(60), ")))".repeat(60));
    let deep = model(&format!("parameters a\nclaim {nested} = {nested}"));
    assert!(stated_equal(&deep, &deep.claims[0]));
}
