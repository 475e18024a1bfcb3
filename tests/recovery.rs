//! From demand to preferences: systems with known closed forms, each recovered from its text and compared with the
//! known indirect utility up to a monotone relabelling (equal direction of the gradient in prices and income).

use mainspring::algebra::generator::Element;
use mainspring::language::{self, Source};
use mainspring::model::{self, Model};
use mainspring::proof::Prover;
use mainspring::recovery::{Method, Preferences, Recovered, recover};

/// The model of a text, with v (the known indirect utility) written as a claim `v > 0` at its end.
fn read(text: &str) -> Model {
    let source = Source::new("test", text);
    let tree = language::read(&source).unwrap_or_else(|d| panic!("{:?}\n{text}", d[0].message));
    model::elaborate(&source, &tree, &[]).unwrap_or_else(|d| panic!("{:?}\n{text}", d[0].message))
}

fn found(model: &Model) -> Box<Preferences> {
    let mut prover = Prover::new(&model.field);
    match recover(model, &mut prover) {
        Recovered::Found(found) => found,
        Recovered::NotFound { reason, .. } => panic!("{:?}: {reason}", model.title),
    }
}

/// Whether two functions of prices and income have the same level sets.
fn same_preferences(model: &Model, v: &Element, known: &Element) -> bool {
    let field = &model.field;
    let income = model.income.expect("an income");
    let slope = |e: &Element, x| field.derivative(e, x);
    model.prices.iter().all(|p| {
        let across = field.product(&slope(v, *p), &slope(known, income));
        let along = field.product(&slope(known, *p), &slope(v, income));
        field.is_zero(&(&field.current(&across) - &field.current(&along)))
    })
}

/// Recovers e and v and compares v with the known one.
fn recovers(text: &str, known: &str, method: Method) -> Box<Preferences> {
    let found = recovers_v(text, known, method);
    assert!(found.checked.inverse && found.checked.shephard, "{text}: {:?}", found.checked);
    found
}

/// Recovers v and compares it with the known one, given as the left side of the last claim.
fn recovers_v(text: &str, known: &str, method: Method) -> Box<Preferences> {
    let model = read(&format!("{text}\nclaim {known} > 0\n"));
    let found = found(&model);
    assert_eq!(found.method, method, "{text}");
    assert!(found.checked.roy, "{text}: {:?}", found.checked);
    let v = found.indirect_utility.as_ref().expect("v");
    let (known, _) = model.claims[0].sides().expect("the claim has sides");
    assert!(same_preferences(&model, v, known), "{text}");
    found
}

#[test]
fn cobb_douglas_and_linear_expenditure() {
    recovers(
        "goods a, b\nprices p, q\nincome m\nparameters s\nassume 0 < s < 1\ndemand a = s*m/p\ndemand b = (1-s)*m/q",
        "m/(p^s*q^(1-s))",
        Method::Separable,
    );
    recovers(
        "goods 1..3\nprices p[i]\nincome m\nparameters g[i], s[i]\nassume sum over i of (s[i]) = 1, s[i] > 0\n\
         demand[i] = g[i] + s[i]*(m - sum over j of (p[j]*g[j]))/p[i]",
        "(m - sum over j of (p[j]*g[j]))/product over j of (p[j]^s[j])",
        Method::Linear,
    );
}

#[test]
fn constant_elasticity_with_its_special_value() {
    let ces = "goods 1..3\nprices p[i]\nincome m\nparameters a[i], s\nassume a[i] > 0\n\
               demand[i] = a[i]*p[i]^(-s)*m/sum over j of (a[j]*p[j]^(1-s))";
    recovers(ces, "m/(sum over j of (a[j]*p[j]^(1-s)))^(1/(1-s))", Method::Separable);
    let model = read(ces);
    let found = found(&model);
    assert_eq!(found.conditions.len(), 1);
    let case = &found.cases[0];
    let Recovered::Found(special) = &case.recovered else { panic!("the case s = 1") };
    assert!(special.conditions.is_empty() && special.checked.shephard && special.checked.roy);
}

#[test]
fn nested_indices_and_generalised_leontief() {
    recovers(
        "goods x, y, z\nprices p, q, r\nincome m\nparameters a, b, c, s, t\nassume a > 0, b > 0, c > 0, s != 1, t != 1\n\
         let A = a*p^(1-s) + b*q^(1-s)\nlet P = A^((1-t)/(1-s)) + c*r^(1-t)\n\
         demand x = m*a*p^(-s)*A^((1-t)/(1-s)-1)/P\ndemand y = m*b*q^(-s)*A^((1-t)/(1-s)-1)/P\ndemand z = m*c*r^(-t)/P",
        "m/P^(1/(1-t))",
        Method::Separable,
    );
    recovers(
        "goods x, y\nprices p, q\nincome m\nparameters a, b, c\nassume a > 0, b > 0, c > 0\n\
         demand x = m*(a + b*sqrt(q/p))/(a*p + 2*b*sqrt(p*q) + c*q)\n\
         demand y = m*(c + b*sqrt(p/q))/(a*p + 2*b*sqrt(p*q) + c*q)",
        "m/(a*p + 2*b*sqrt(p*q) + c*q)",
        Method::Separable,
    );
}

#[test]
fn price_independent_generalised_linearity() {
    recovers(
        "goods 1..3\nprices p[i]\nincome m\nparameters a0, a[i], b[i], g[i,j]\nassume g[i,j] = g[j,i]\n\
         assume sum over i of (a[i]) = 1, sum over i of (b[i]) = 0, sum over j of (g[i,j]) = 0\n\
         let lnP = a0 + sum over k of (a[k]*ln(p[k])) + sum over k, l of (g[k,l]*ln(p[k])*ln(p[l]))/2\n\
         share[i] = a[i] + sum over j of (g[i,j]*ln(p[j])) + b[i]*(ln(m) - lnP)",
        "(ln(m) - lnP)/product over k of (p[k]^b[k])",
        Method::Linear,
    );
    recovers(
        "goods x, y\nprices p, q\nincome m\nparameters k, a, b\nassume k > 0, m > p^a*q^(1-a)\n\
         demand x = m^(1-k)*(a*(p^a*q^(1-a))^k + b*(m^k - (p^a*q^(1-a))^k))/p\n\
         demand y = m^(1-k)*((1-a)*(p^a*q^(1-a))^k + (1-b)*(m^k - (p^a*q^(1-a))^k))/q",
        "(m^k - (p^a*q^(1-a))^k)/(p^b*q^(1-b))^k",
        Method::Linear,
    );
}

/// The price index stays a name in v: its many terms are put back in no step.
#[test]
fn many_goods_with_a_price_index_in_sight() {
    let system = |last: &str| {
        format!(
            "goods 1..8\nprices p[i]\nincome m\nparameters a0, a[i], b[i], h[i], g[i,j]\nassume g[i,j] = g[j,i]\n\
             assume sum over i of (a[i]) = 1, sum over i of (b[i]) = 0, sum over i of (h[i]) = 0\n\
             assume sum over j of (g[i,j]) = 0\nlet B = product over k of (p[k]^b[k])\n\
             let lnP = a0 + sum over k of (a[k]*ln(p[k])) + sum over k, l of (g[k,l]*ln(p[k])*ln(p[l]))/2\n\
             share[i] = a[i] + sum over j of (g[i,j]*ln(p[j])) + b[i]*(ln(m) - lnP){last}"
        )
    };
    let found = recovers(&system(""), "(ln(m) - lnP)/B", Method::Linear);
    assert!(found.indirect_utility.is_some_and(|v| v.len() == 2));
    let quadratic = self::found(&read(&system(" + h[i]/B*(ln(m) - lnP)^2")));
    assert!(quadratic.checked.roy && quadratic.checked.inverse && quadratic.checked.shephard);
    assert_eq!(quadratic.method, Method::Riccati);
}

#[test]
fn gorman_form_with_roots() {
    recovers(
        "goods x, y, z\nprices p, q, r\nincome m\nparameters k\nassume k > 0, m > k*sqrt(p^2+p*r)\n\
         demand x = k*(p + r/2)/sqrt(p^2+p*r)\ndemand y = (m - k*sqrt(p^2+p*r))/(2*q)\n\
         demand z = -k*p^(3/2)/(2*r*sqrt(p+r)) + m/(2*r)",
        "(m - k*sqrt(p^2+p*r))/sqrt(q*r)",
        Method::Linear,
    );
}

#[test]
fn incomplete_systems() {
    recovers(
        "goods x\nprices p\nincome m\nothers deflated\nparameters a, b, c\nassume b > 0, c > 0\ndemand x = a - b*p + c*m",
        "exp(-c*p)*(m + (a-b*p)/c - b/c^2)",
        Method::Linear,
    );
    recovers(
        "goods x\nprices p\nincome m\nothers deflated\nparameters a, b, c\nassume b > 0, c > 0\ndemand x = exp(a-b*p+c*m)",
        "-exp(-c*m)/c + exp(a-b*p)/b",
        Method::Separable,
    );
    recovers(
        "goods x, y\nprices p, q\nincome m\nothers deflated\nparameters h, a, b, c\nassume h > 0, a > 0, b > 0, c != 1\n\
         demand x = h*a*p^(-a-1)*q^(-b)*m^c\ndemand y = h*b*p^(-a)*q^(-b-1)*m^c",
        "m^(1-c)/(1-c) + h*p^(-a)*q^(-b)",
        Method::Separable,
    );
}

/// e from the principal branch of Lambert's function: Shephard's lemma and Roy's identity are proven, and so is that e
/// is the income at which v is reached.
fn recovers_with_lambert(demands: &str, known: &str) {
    let model = read(&format!("goods x, y\nprices p, q\nincome m\n{demands}\nclaim {known} > 0\n"));
    let found = found(&model);
    assert!(found.checked.roy && found.checked.shephard, "{demands}: {:?}", found.checked);
    let (known, _) = model.claims[0].sides().expect("the claim has sides");
    assert!(same_preferences(&model, found.indirect_utility.as_ref().expect("v"), known), "{demands}");
}

#[test]
fn income_inside_and_outside_a_logarithm() {
    recovers_with_lambert("demand x = m^2/(p*(m+p))\ndemand y = m*p/(q*(m+p))", "m/p + ln(m/q)");
    recovers_with_lambert(
        "parameters k\nassume k > 0\ndemand x = k*m^(k+1)/(p*(k*m^k + p^k))\ndemand y = m*p^k/(q*(k*m^k + p^k))",
        "(m/p)^k + ln(m/q)",
    );
    // a product of income and its exponential, and a sum of both
    recovers_with_lambert("demand x = m^2/(p*(m+p))\ndemand y = m*p/(q*(m+p))", "m/q*exp(m/p)");
    recovers_with_lambert(
        "demand x = m*q*exp(m/p)/(p*(p + q*exp(m/p)))\ndemand y = m*p/(q*(p + q*exp(m/p)))",
        "m/q + exp(m/p)",
    );
}

#[test]
fn what_has_no_potential_is_not_claimed() {
    // x = a/p + c·m leads to the exponential integral
    let model = read(
        "goods x\nprices p\nincome m\nothers deflated\nparameters a, c\nassume a > 0, c > 0\ndemand x = p^(-a) + c*m",
    );
    let mut prover = Prover::new(&model.field);
    assert!(matches!(recover(&model, &mut prover), Recovered::NotFound { existence: true, .. }));
}

#[test]
fn a_sum_below_a_root_of_income_and_prices() {
    recovers_v(
        "goods a, b\nprices p, q\nincome m\n\
         demand a = m/(p^2*(1/(2*q*sqrt(m/q + 1)) + 1/p))\n\
         demand b = m/(2*q^2*sqrt(m/q + 1)*(1/(2*q*sqrt(m/q + 1)) + 1/p))",
        "m/p + sqrt(m/q + 1)",
        Method::IntegratingFactor,
    );
    recovers_v(
        "goods a, b\nprices p, q\nincome m\nparameters k\nassume k > 0\nlet B = sqrt(k*p^2 + q^2)\n\
         let D = 1/B + 1/(2*q*sqrt(m/q + 1/2))\n\
         demand a = k*m*p/(B^3*D)\ndemand b = (m*q/B^3 + m/(2*q^2*sqrt(m/q + 1/2)))/D",
        "m/B + sqrt(m/q + 1/2)",
        Method::IntegratingFactor,
    );
}

#[test]
fn a_quadratic_logarithmic_system_with_algebraic_indices() {
    recovers_v(
        "goods a, b\nprices p, q\nincome m\nparameters k, h\nassume k > 0, h > 0\n\
         let z = ln(m) - ln(p + 4*q)\n\
         let B = (k*p + sqrt(p*q)/3)/(h*q + p/2)\n\
         let bp = (k + sqrt(q/p)/6)/(k*p + sqrt(p*q)/3) - 1/(2*(h*q + p/2))\n\
         let bq = (sqrt(p/q)/6)/(k*p + sqrt(p*q)/3) - h/(h*q + p/2)\n\
         let lp = (3*sqrt(q/p)/4)/(3*sqrt(p*q)/2 + q/2) - k/(k*p + h*q)\n\
         let lq = (3*sqrt(p/q)/4 + 1/2)/(3*sqrt(p*q)/2 + q/2) - h/(k*p + h*q)\n\
         demand a = m*(1/(p + 4*q) + bp*z + 4*lp*z^2/B)\n\
         demand b = m*(4/(p + 4*q) + bq*z + 4*lq*z^2/B)",
        "1/(B/z + 4*ln((3*sqrt(p*q)/2 + q/2)/(k*p + h*q)))",
        Method::Riccati,
    );
}

/// The direct utility recovered for a system, and what it is compared with by the ratio of all marginal utilities.
fn recovers_direct(text: &str, known: &str) {
    let model = read(&format!("{text}\nclaim {known} > 0\n"));
    let found = found(&model);
    let utility = found.utility.as_ref().unwrap_or_else(|| panic!("{text}: no direct utility"));
    let field = &model.field;
    let (known, _) = model.claims[0].sides().expect("the claim has sides");
    let quantities: Vec<_> = model.quantities.iter().copied().flatten().collect();
    // the known utility is read at the demands; so is the recovered one
    let demands: Vec<_> = quantities.iter().copied().zip(model.demands.iter().map(|d| d.quantity.clone())).collect();
    let there = field.substitute(utility, &demands).expect("defined at the demands");
    assert!(same_preferences(&model, &there, known), "{text}");
}

#[test]
fn direct_utility_by_eliminating_prices() {
    let goods = "goods 1..3\nprices p[i]\nincome m\nquantities x[i]\n";
    recovers_direct(
        &format!(
            "{goods}parameters g[i], s[i]\nassume sum over i of (s[i]) = 1, s[i] > 0\n\
             assume m > sum over j of (p[j]*g[j])\n\
             demand[i] = g[i] + s[i]*(m - sum over j of (p[j]*g[j]))/p[i]"
        ),
        "product over i of ((x[i] - g[i])^s[i])",
    );
    recovers_direct(
        &format!(
            "{goods}parameters a[i], s\nassume a[i] > 0, s > 0, s != 1\n\
             demand[i] = a[i]*p[i]^(-s)*m/sum over j of (a[j]*p[j]^(1-s))"
        ),
        "(sum over i of (a[i]^(1/s)*x[i]^(1-1/s)))^(s/(s-1))",
    );
    recovers_direct(
        "goods tea, cake\nprices p, q\nincome m\nquantities x, y\nassume m > p^2/q\n\
         demand tea = m/p - p/q\ndemand cake = p^2/q^2",
        "x + 2*sqrt(y)",
    );
}
