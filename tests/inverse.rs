//! Inverse demand: adding-up, symmetry and curvature of the Antonelli matrix, and the direct utility behind it.

use std::rc::Rc;

use mainspring::conditions::{Condition, Verdict};
use mainspring::language::Source;
use mainspring::model;
use mainspring::proof::Value;
use mainspring::recovery::Recovered;
use mainspring::vetting::{Allowance, Part, Vetting, vet};

fn vetted(text: &str) -> Vetting {
    let source = Source::new("model.demand", text);
    let model = model::read(&source, &[]).unwrap_or_else(|mistakes| panic!("{}\n{text}", mistakes[0].render(&source)));
    vet(Rc::new(model), &Part::ALL, Allowance::default())
}

fn verdict(vetting: &Vetting, condition: Condition) -> Option<Verdict> {
    vetting.finding(condition).map(|finding| finding.verdict)
}

/// Whether the recovered utility has the same indifference curves as a known one: the gradients are proportional.
fn same_curves(vetting: &Vetting, known: &str) -> bool {
    let Some(Recovered::Found(found)) = &vetting.recovered else { return false };
    let text: String =
        vetting.model.source().text.lines().filter(|l| !l.starts_with("inverse")).map(|l| format!("{l}\n")).collect();
    let source = Source::new("model.demand", format!("{text}claim {known} > 0\n"));
    let other = model::read(&source, &[]).unwrap_or_else(|mistakes| panic!("{}", mistakes[0].render(&source)));
    let (known, _) = other.claims[0].sides().expect("sides");
    let vars: Vec<_> = vetting.model.quantities.iter().map(|x| x.expect("a name")).collect();
    let by_name = |name: &str| {
        let all = vars.iter().copied().chain(vetting.model.parameters.iter().map(|p| p.var));
        let var = all.into_iter().find(|var| vetting.model.field.name(*var).as_deref() == Some(name))?;
        let eliminated = vetting.model.parameters.iter().find(|p| p.var == var).and_then(|p| p.eliminated.clone());
        Some(eliminated.unwrap_or_else(|| mainspring::algebra::polynomial::Poly::var(var)))
    };
    let field = &vetting.model.field;
    let known = field.import(&other.field, known, &by_name).expect("the same names");
    let utility = found.utility.as_ref().expect("a direct utility");
    let slope = |e, x| field.current(&field.derivative(e, x));
    vars.windows(2).all(|pair| {
        let one = field.product(&slope(utility, pair[0]), &slope(&known, pair[1]));
        let two = field.product(&slope(utility, pair[1]), &slope(&known, pair[0]));
        field.is_zero(&(&field.current(&one) - &field.current(&two)))
    })
}

#[test]
fn cobb_douglas() {
    let vetting = vetted(
        "goods 1..3
quantities x[i]
parameters a[i]
assume a[i] > 0, sum over i of (a[i]) = 1
inverse[i] = a[i]/x[i]
",
    );
    assert_eq!(verdict(&vetting, Condition::Homogeneity), None);
    for condition in [Condition::AddingUp, Condition::Symmetry, Condition::Curvature] {
        assert_eq!(verdict(&vetting, condition), Some(Verdict::Proven), "{condition:?}");
    }
    assert!(same_curves(&vetting, "sum over i of (a[i]*ln(x[i]))"));
}

#[test]
fn quadratic_utility_is_concave() {
    let vetting = vetted(
        "goods a, b
quantities y1, y2
assume 9 - 2*y1 + y2/2 > 0, 8 + y1/2 - y2 > 0
let T = y1*(9 - 2*y1 + y2/2) + y2*(8 + y1/2 - y2)
inverse a = (9 - 2*y1 + y2/2)/T
inverse b = (8 + y1/2 - y2)/T
",
    );
    for condition in [Condition::AddingUp, Condition::Symmetry, Condition::Curvature] {
        assert_eq!(verdict(&vetting, condition), Some(Verdict::Proven), "{condition:?}");
    }
    assert!(same_curves(&vetting, "9*y1 + 8*y2 - y1^2 - y2^2/2 + y1*y2/2"));
}

#[test]
fn constant_elasticity_of_substitution() {
    let vetting = vetted(
        "goods 1..3
quantities x[i]
parameters r
assume r < 1, r != 0
inverse[i] = x[i]^(r - 1)/(sum over k of (x[k]^r))
",
    );
    assert_eq!(verdict(&vetting, Condition::Symmetry), Some(Verdict::Proven));
    assert_eq!(verdict(&vetting, Condition::Curvature), Some(Verdict::Proven));
    assert!(same_curves(&vetting, "sum over k of (x[k]^r)/r"));
}

#[test]
fn shares_that_go_round_in_a_circle_have_no_utility() {
    let vetting = vetted(
        "goods 1..3
quantities x[i]
let T = sum over k of (x[k])
inverse[1] = x[2]/(x[1]*T)
inverse[2] = x[3]/(x[2]*T)
inverse[3] = x[1]/(x[3]*T)
",
    );
    assert_eq!(verdict(&vetting, Condition::AddingUp), Some(Verdict::Proven));
    let symmetry = vetting.finding(Condition::Symmetry).expect("symmetry");
    assert_eq!(symmetry.verdict, Verdict::Refuted);
    let witness = symmetry.witness.as_ref().expect("a point");
    let at: Vec<String> =
        vetting.model.quantities.iter().map(|x| witness.point[&x.expect("a name")].to_string()).collect();
    // A_12 − A_21 at (1, 2, 3), worked by hand
    assert_eq!(at, ["1", "2", "3"]);
    assert_eq!(witness.value, Value::Exact(mainspring::algebra::number::rational(11, 72)));
    assert!(matches!(vetting.recovered, Some(Recovered::NotFound { .. })));
}

#[test]
fn convex_indifference_curves_are_told_from_concave_ones() {
    let vetting = vetted(
        "goods a, b
quantities x, y
inverse a = x/(x^2 + y^2)
inverse b = y/(x^2 + y^2)
",
    );
    assert_eq!(verdict(&vetting, Condition::Symmetry), Some(Verdict::Proven));
    assert_eq!(verdict(&vetting, Condition::Curvature), Some(Verdict::Refuted));
    assert!(same_curves(&vetting, "x^2 + y^2"));
}

#[test]
fn adding_up_can_fail() {
    let vetting = vetted("goods a, b\nquantities x, y\ninverse a = 1/(2*x)\ninverse b = 1/(3*y)\n");
    let finding = vetting.finding(Condition::AddingUp).expect("adding-up");
    assert_eq!(finding.verdict, Verdict::Refuted);
    let witness = finding.witness.as_ref().expect("a point");
    assert_eq!(witness.value, Value::Exact(mainspring::algebra::number::rational(-1, 6)));
}
