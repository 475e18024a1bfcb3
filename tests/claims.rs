//! Claims about the consumer's functions: held against given preferences, against the file's own demands, and against
//! each other on one scale of utility. Every refutation comes with an exact point.

use std::rc::Rc;

use mainspring::conditions::{ClaimFinding, Verdict};
use mainspring::language::Source;
use mainspring::model::{self, Model};
use mainspring::proof::Value;
use mainspring::recovery::Recovered;
use mainspring::render::formula_text::plain;
use mainspring::render::report::answer;
use mainspring::render::text::{Layout, text};
use mainspring::vetting::{Allowance, Part, Vetting, vet};

fn vetted(text: &str) -> Vetting {
    let source = Source::new("model.demand", text);
    let model = model::read(&source, &[]).unwrap_or_else(|mistakes| panic!("{}\n{text}", mistakes[0].render(&source)));
    vet(Rc::new(model), &Part::ALL, Allowance::default())
}

fn equal(model: &Model, element: &mainspring::algebra::generator::Element, formula: &str) -> bool {
    let shown = plain(&model.field.formula(element));
    let text = format!("{}claim {shown} = {formula}\n", declarations(model.source().text.as_str()));
    let vetting = vetted(&text);
    vetting.claims[0].verdict == Verdict::Proven
}

/// The file without its demands, preferences and claims.
fn declarations(text: &str) -> String {
    let kept = ["goods", "prices", "income", "quantities", "parameters", "assume", "utility"];
    let lines = text.lines().filter(|line| kept.iter().any(|word| line.trim_start().starts_with(word)));
    let mut text: String = lines.map(|line| format!("{}\n", line.trim_start())).collect();
    if !text.contains("utility ") {
        text.push_str("parameters u\nassume u > 0\n");
    }
    text
}

/// Checks the verdict of each claim: `true` for proven. A refuted one has a point, and a value there that is not zero.
fn verdicts(vetting: &Vetting, expected: &[bool]) {
    for (place, right) in expected.iter().enumerate() {
        let (claim, finding) = (&vetting.model.claims[place], &vetting.claims[place]);
        let wanted = if *right { Verdict::Proven } else { Verdict::Refuted };
        assert_eq!(finding.verdict, wanted, "{}: {:?}", claim.text, finding.reason);
        match right {
            true => assert!(!finding.steps.is_empty(), "{}", claim.text),
            false => refuted(finding, &claim.text),
        }
    }
}

fn refuted(finding: &ClaimFinding, text: &str) {
    let witness = finding.witness.as_ref().unwrap_or_else(|| panic!("{text} has no point"));
    let zero = Value::Exact(mainspring::algebra::number::rational(0, 1));
    assert!(witness.value != zero && !witness.point.is_empty(), "{text}");
}

const TWO_GOODS: &str = "goods bread, fish\nprices p_b, p_f\nincome m\nquantities x_b, x_f\n";

#[test]
fn roys_identity_gives_the_demands_of_an_indirect_utility() {
    let text = format!(
        "{TWO_GOODS}given indirect utility = (m - sqrt(p_b*p_f))*(1/p_b + 1/p_f)
claim demand bread = 1/2*sqrt(p_f/p_b) + (m - sqrt(p_b*p_f))*p_f/(p_b*(p_b + p_f))
claim demand fish = 1/2*sqrt(p_b/p_f) + (m - sqrt(p_b*p_f))*p_f/(p_f*(p_b + p_f))
claim hicksian bread = 1/2*sqrt(p_f/p_b) + u*p_f^2/(p_b + p_f)^2
claim expenditure = sqrt(p_b*p_f) + u
claim indirect utility = (m - sqrt(p_b*p_f))*(p_b + p_f)/(p_b*p_f)
"
    );
    let vetting = vetted(&text);
    verdicts(&vetting, &[true, false, true, false, true]);
    let correct = vetting.claims[3].correct.as_ref().expect("the right expenditure");
    assert!(equal(&vetting.model, correct, "sqrt(p_b*p_f) + u*p_b*p_f/(p_b + p_f)"));
    assert_eq!(vetting.claims[5].verdict, Verdict::Proven, "it rises in income");
}

#[test]
fn shephards_lemma_gives_the_demands_of_an_expenditure_function() {
    let vetting = vetted(
        "goods 1..3
prices p[i]
income m
parameters s
assume s > 0, s != 1
given expenditure = u*(sum over k of (p[k]^(1 - s)))^(1/(1 - s))
claim hicksian[i] = u*p[i]^(-s)*(sum over k of (p[k]^(1 - s)))^(s/(1 - s))
claim demand[1] = m*p[1]^(-s)/(sum over k of (p[k]^(1 - s)))
claim demand[2] = m*p[2]^(s)/(sum over k of (p[k]^(1 - s)))
claim indirect utility = m*(sum over k of (p[k]^(1 - s)))^(1/(s - 1))
claim share[3] = p[3]^(1 - s)/(sum over k of (p[k]^(1 - s)))
claim compensated elasticity[1, p[2]] = s*p[2]^(1 - s)/(sum over k of (p[k]^(1 - s)))
claim compensated elasticity[1, p[2]] = p[2]^(1 - s)/(sum over k of (p[k]^(1 - s)))
claim slutsky[1, 2] = s*m*p[1]^(-s)*p[2]^(-s)/(sum over k of (p[k]^(1 - s)))^2
",
    );
    verdicts(&vetting, &[true, true, true, true, false, true, true, true, false, true]);
}

#[test]
fn first_order_conditions_give_the_demands_of_a_direct_utility() {
    let text = "goods 1..3
prices p[i]
income m
quantities x[i]
parameters b[i], c[i]
assume b[i] > 0, sum over i of (b[i]) = 1, c[i] > 0, x[i] > c[i]
given utility = sum over i of (b[i]*ln(x[i] - c[i]))
claim demand[i] = c[i] + b[i]/p[i]*(m - sum over j of (p[j]*c[j]))
claim demand[1] = b[1]/p[1]*(m - sum over j of (p[j]*c[j]))
claim expenditure = sum over j of (p[j]*c[j]) + exp(u)*product over j of ((p[j]/b[j])^b[j])
claim elasticity[1, income] = b[1]*m/(p[1]*x[1])
claim elasticity[1, p[2]] = p[2]*c[2]*b[1]/(p[1]*x[1])
";
    verdicts(&vetted(text), &[true, true, true, false, true, true, false]);
}

#[test]
fn claims_are_judged_where_the_first_order_conditions_are_not_solved() {
    let text = "goods a, b, c
prices p1, p2, p3
income m
quantities x1, x2, x3
given utility = (sqrt(x1) + sqrt(x2))*sqrt(x3)
claim demand c = m/(2*p3)
claim demand a = m*p2/(2*p1*(p1 + p2))
claim demand b = m*p2/(2*p1*(p1 + p2))
claim indirect utility = m*sqrt(1/p1 + 1/p2)/(2*sqrt(p3))
claim expenditure = 2*u*sqrt(p3)/sqrt(1/p1 + 1/p2)
claim inverse c = 1/(2*x3)
";
    verdicts(&vetted(text), &[true, true, false, true, true, true]);
}

#[test]
fn a_utility_that_is_not_quasi_concave_has_no_demands_by_first_order_conditions() {
    let vetting =
        vetted(&format!("{TWO_GOODS}given utility = x_b^2 + x_f^2\nclaim demand bread = m*p_b/(p_b^2 + p_f^2)\n"));
    assert_eq!(vetting.claims[0].verdict, Verdict::Undecided);
    assert!(matches!(vetting.recovered, Some(Recovered::NotFound { .. })));
    let falling = vetted(&format!("{TWO_GOODS}given utility = -x_b - x_f\nclaim demand bread = m/(2*p_b)\n"));
    assert_eq!(falling.claims[0].verdict, Verdict::Undecided);
    assert_eq!(falling.claims[1].verdict, Verdict::Refuted, "it falls");
}

#[test]
fn a_bliss_point_outside_the_domain_leaves_the_demands() {
    let text = format!(
        "{TWO_GOODS}assume 9 - 2*x_b + x_f/2 > 0, 8 + x_b/2 - x_f > 0
given utility = 9*x_b + 8*x_f - x_b^2 - x_f^2/2 + x_b*x_f/2
claim demand bread = (9*p_f^2 - 8*p_b*p_f + p_b*m + p_f*m/2)/(p_b^2 + 2*p_f^2 + p_b*p_f)
claim demand bread = m/(2*p_b)
"
    );
    verdicts(&vetted(&text), &[true, false]);
}

const COBB_DOUGLAS: &str = "parameters a\nassume 0 < a < 1\ndemand bread = a*m/p_b\ndemand fish = (1 - a)*m/p_f\n";

#[test]
fn without_given_preferences_the_first_right_claim_sets_the_scale() {
    let text = format!(
        "{TWO_GOODS}{COBB_DOUGLAS}claim indirect utility = a*ln(m/p_b) + (1 - a)*ln(m/p_f)
claim expenditure = exp(u)*p_b^a*p_f^(1 - a)
claim expenditure = u*p_b^a*p_f^(1 - a)
claim hicksian bread = a*exp(u)*(p_f/p_b)^(1 - a)
claim hicksian fish = a*exp(u)*(p_f/p_b)^(1 - a)
claim utility = a*ln(x_b) + (1 - a)*ln(x_f) - a*ln(a) - (1 - a)*ln(1 - a)
claim utility = a*ln(x_b) + (1 - a)*ln(x_f)
"
    );
    verdicts(&vetted(&text), &[true, true, false, true, false, true, false]);
    let cubed = format!("{TWO_GOODS}{COBB_DOUGLAS}claim utility = x_b^(3*a)*x_f^(3 - 3*a)\n");
    verdicts(&vetted(&cubed), &[true]);
}

#[test]
fn claims_none_of_which_is_right_are_refuted_by_roy_and_shephard() {
    let text = format!(
        "{TWO_GOODS}{COBB_DOUGLAS}claim expenditure = u*p_b*p_f
claim indirect utility = m*p_b
claim indirect utility = -m/(p_b^a*p_f^(1 - a))
claim utility = x_b*x_f^2
"
    );
    verdicts(&vetted(&text), &[false, false, false, false]);
}

#[test]
fn responses_of_the_files_own_demands() {
    let text = format!(
        "{TWO_GOODS}{COBB_DOUGLAS}claim slutsky[bread, fish] = a*(1 - a)*m/(p_b*p_f)
claim slutsky[bread, bread] = a*(1 - a)*m/p_b^2
claim elasticity[bread, p_b] = -1
claim elasticity[bread, income] = 1
claim elasticity[fish, p_b] = a
claim compensated elasticity[bread, p_b] = a - 1
claim share bread = a
claim log demand fish = ln(m) - ln(p_f) + ln(1 - a)
claim outlay fish = (1 - a)*m
claim inverse bread = a/x_b
claim demand bread = a*m/p_f
"
    );
    verdicts(&vetted(&text), &[true, false, true, true, false, true, true, true, true, true, false]);
}

#[test]
fn demands_beside_given_preferences_are_held_against_them() {
    let right = format!("{TWO_GOODS}given utility = x_b*x_f\ndemand bread = m/(2*p_b)\ndemand fish = m/(2*p_f)\n");
    let vetting = vetted(&right);
    assert!(vetting.claims.iter().all(|claim| claim.verdict == Verdict::Proven));
    assert_eq!(vetting.claims.len(), 4);
    let wrong = format!("{TWO_GOODS}given utility = x_b*x_f\ndemand bread = m/(3*p_b)\ndemand fish = 2*m/(3*p_f)\n");
    let vetting = vetted(&wrong);
    let verdicts: Vec<Verdict> = vetting.claims.iter().map(|claim| claim.verdict).collect();
    assert_eq!(verdicts, [Verdict::Proven, Verdict::Proven, Verdict::Refuted, Verdict::Refuted]);
}

#[test]
fn utility_levels_below_zero() {
    let text = format!(
        "{TWO_GOODS}given utility = -1/x_b - 1/x_f
claim demand bread = m/(p_b + sqrt(p_b*p_f))
claim indirect utility = -(sqrt(p_b) + sqrt(p_f))^2/m
claim expenditure = -(p_b + p_f + 2*sqrt(p_b*p_f))/u
claim expenditure = (p_b + p_f + 2*sqrt(p_b*p_f))/u
"
    );
    verdicts(&vetted(&text), &[true, true, true, false]);
}

#[test]
fn what_cannot_be_claimed_is_refused() {
    let message = |text: &str| {
        let mistakes = model::read(&Source::new("model.demand", text), &[]).err().expect("a mistake");
        mistakes[0].message.clone()
    };
    assert!(message("claim expenditure = 1").contains("no demands and no preferences"));
    assert!(message(&format!("{TWO_GOODS}given utility = x_b*p_f\n")).contains("quantities"));
    assert!(message(&format!("{TWO_GOODS}given indirect utility = p_b\n")).contains("income"));
    assert!(message("goods a, b\nprices p, q\nincome m\ngiven utility = 1\n").contains("no quantities"));
    let beside = format!("{TWO_GOODS}inverse bread = 1/(2*x_b)\ninverse fish = 1/(2*x_f)\ngiven utility = x_b*x_f\n");
    assert!(message(&beside).contains("inverse"));
    let slutsky = format!("{TWO_GOODS}given utility = x_b*x_f\nclaim slutsky[bread, income] = 0\n");
    assert!(message(&slutsky).contains("compensated"));
    let price = format!("{TWO_GOODS}given utility = x_b*x_f\nclaim elasticity[bread, p_c] = 0\n");
    assert!(message(&price).contains("neither a price nor income"));
}

/// Two goods with a constant elasticity of substitution, and claims that a hurried author might make.
#[test]
fn a_refuted_claim_points_at_the_sign_the_factor_or_the_term() {
    let system = "goods 1..2
prices p[i]
income m
parameters a, s, c
assume 0 < a < 1, s > 0, s != 1, c > 0
let D = a*p[1]^(1-s) + (1-a)*p[2]^(1-s)
demand[1] = a*m*p[1]^(-s)/D
demand[2] = (1-a)*m*p[2]^(-s)/D
";
    for (claim, pointed_at) in [
        ("elasticity[1,income] = -1", "the claim has the wrong sign"),
        ("elasticity[1,income] = 2", "the claim has the factor 2 too much"),
        ("slutsky[1,2] = a*(1-a)*m*p[1]^(-s)*p[2]^(-s)/D^2", "the claim lacks the factor s"),
        ("slutsky[1,2] = -s*a*(1-a)*m*p[1]^(-s)*p[2]^(-s)/D^2", "the claim has the wrong sign"),
        ("slutsky[1,2] = s*(1-s)*a*(1-a)*m*p[1]^(-s)*p[2]^(-s)/D^2", "the claim has the factor 1 - s too much"),
        ("elasticity[1,2] = a*(s-1)*p[2]^(1-s)/D", "the factor a should be 1 - a"),
        ("elasticity[1,1] = -s + (1-s)*a*p[1]^(1-s)/D", "the term a*p[1]^(1 - s)*(1 - s)/D has the wrong sign"),
        ("share[1] = a*p[1]^(1-s)/D + c", "the claim has the term c too much"),
        ("hicksian[1] = a*u*p[1]^(-s)*D^(1/(1-s))", "the claim has the factor D too much"),
        ("(a + s)^2 = a^2 + s^2", "the right-hand side lacks the term 2*a*s"),
        ("ln(a*p[1]) = ln(a) - ln(p[1])", "the term -ln(p[1]) has the wrong sign"),
        ("a*s + c*s = a*s + 2*c*s", "the term 2*s*c has the factor 2 too much"),
        ("1 - c = 1 + s*c", "the term s*c lacks the factor -1/s"),
    ] {
        let vetting = vetted(&format!("{system}claim expenditure = u*D^(1/(1-s))\nclaim {claim}\n"));
        assert_eq!(vetting.claims[1].verdict, Verdict::Refuted, "{claim}");
        refuted(&vetting.claims[1], claim);
        let words = text(&answer(&vetting), Layout { width: 80, colour: false });
        let words = words.split_whitespace().collect::<Vec<_>>().join(" ");
        assert!(words.contains(&format!(": {pointed_at}; correct is ")), "{claim}\n{words}");
    }
}
