//! The structure of textbook systems: a model, a fact, a verdict. Where a fact has an author, he is named.

use std::rc::Rc;

use mainspring::conditions::{Condition, Verdict};
use mainspring::language::Source;
use mainspring::structure::{Property, Tendency};
use mainspring::vetting::{Part, Vetting};
use mainspring::{Allowance, read, vet};

const PARTS: [Part; 6] = [
    Part::Condition(Condition::Homogeneity),
    Part::Condition(Condition::AddingUp),
    Part::Condition(Condition::Symmetry),
    Part::Structure,
    Part::Responses,
    Part::Claims,
];

fn vetted(text: &str) -> Vetting {
    vetted_in(text, &PARTS)
}

fn vetted_in(text: &str, parts: &[Part]) -> Vetting {
    let model = read(&Source::new("test", text), &[], Allowance::default());
    let Ok(model) = model else { panic!("{model:?} in\n{text}", model = model.err()) };
    vet(Rc::new(model), parts, Allowance::default())
}

/// The verdicts on the properties of preferences; those that are open are left out.
fn properties(vetting: &Vetting) -> Vec<(Property, bool)> {
    let structure = vetting.structure.as_ref().expect("structure was asked for");
    let decided = structure.facts.iter().filter(|fact| fact.finding.verdict != Verdict::Undecided);
    let decided = decided.filter(|fact| fact.property != Property::QuasiLinear);
    decided.map(|fact| (fact.property, fact.finding.verdict == Verdict::Proven)).collect()
}

fn rank(vetting: &Vetting) -> Option<usize> {
    let structure = vetting.structure.as_ref().expect("structure was asked for");
    structure.rank.as_ref().filter(|rank| rank.exact).map(|rank| rank.value)
}

fn claims(vetting: &Vetting) -> Vec<Verdict> {
    vetting.claims.iter().map(|claim| claim.verdict).collect()
}

/// What is known of each good's response to income, to income as a share, and to its own price.
fn goods(vetting: &Vetting) -> Vec<[Option<Tendency>; 3]> {
    let all = &vetting.responses.as_ref().expect("responses were asked for").goods;
    all.iter().map(|good| [&good.income, &good.share, &good.own_price].map(|response| response.tendency)).collect()
}

const INCOME: [Property; 4] = [Property::Homothetic, Property::QuasiHomothetic, Property::Piglog, Property::Pigl];
const ADDITIVE: [Property; 2] = [Property::DirectlyAdditive, Property::IndirectlyAdditive];

fn pairs(properties: &[Property], verdicts: &[bool]) -> Vec<(Property, bool)> {
    properties.iter().copied().zip(verdicts.iter().copied()).collect()
}

const THREE: &str = "goods bread, fish, cloth\nprices p_b, p_f, p_c\nincome m\n";

#[test]
fn constant_elasticities_of_substitution_are_homothetic_and_additive_both_ways() {
    let vetting = vetted(&format!(
        "{THREE}parameters a, b, c, s\nassume a > 0, b > 0, c > 0, s > 0, s != 1\n\
         let D = a*p_b^(1-s) + b*p_f^(1-s) + c*p_c^(1-s)\n\
         share bread = a*p_b^(1-s)/D\nshare fish = b*p_f^(1-s)/D\nshare cloth = c*p_c^(1-s)/D\n"
    ));
    // Houthakker 1960: what is additive both ways is homothetic, and the reverse for these
    let all = [INCOME.as_slice(), &ADDITIVE].concat();
    assert_eq!(properties(&vetting), pairs(&all, &[true; 6]));
    assert_eq!(rank(&vetting), Some(1));
    let own = [Some(Tendency::Positive), Some(Tendency::Zero), Some(Tendency::Negative)];
    assert_eq!(goods(&vetting), [own; 3]);
    let net = &vetting.responses.as_ref().expect("responses").pairs.net;
    assert!(net.iter().all(|(_, _, response)| response.tendency == Some(Tendency::Positive)), "net substitutes");
}

#[test]
fn linear_expenditure_is_of_gormans_polar_form_and_directly_additive() {
    // Stone 1954; Geary 1950
    let vetting = vetted(&format!(
        "{THREE}group food = bread, fish\nparameters b, g, d, c[i]\nassume b > 0, g > 0, d > 0, b + g + d = 1\n\
         let Z = m - p_b*c[bread] - p_f*c[fish] - p_c*c[cloth]\nassume Z > 0\n\
         demand bread = c[bread] + b*Z/p_b\ndemand fish = c[fish] + g*Z/p_f\ndemand cloth = c[cloth] + d*Z/p_c\n\
         claim separable food\nclaim elasticity[bread, income] = b*m/(p_b*c[bread] + b*Z)\n\
         claim compensated elasticity[bread, p_f] = b*g*Z/(p_b*c[bread] + b*Z)\n"
    ));
    let income = pairs(&INCOME, &[false, true, false, true]);
    let separable = (Property::Separable(0), true);
    assert_eq!(properties(&vetting), [income, pairs(&ADDITIVE, &[true, false]), vec![separable]].concat());
    assert_eq!(rank(&vetting), Some(2));
    assert_eq!(claims(&vetting), [Verdict::Proven; 3]);
    assert!(goods(&vetting).iter().all(|[income, _, _]| *income == Some(Tendency::Positive)), "all goods are normal");
}

const ALMOST_IDEAL: &str = "goods bread, fish, cloth\nprices p[i]\nincome m\nparameters a0, a[i], b[i], g[i,j]\n\
     assume sum over i of (a[i]) = 1, sum over i of (b[i]) = 0, sum over i of (g[i,j]) = 0, g[i,j] = g[j,i]\n\
     let lnP = a0 + sum over k of (a[k]*ln(p[k])) + 1/2*sum over k, l of (g[k,l]*ln(p[k])*ln(p[l]))\n";

#[test]
fn the_almost_ideal_system_is_piglog_of_rank_two() {
    // Deaton and Muellbauer 1980
    let vetting =
        vetted(&format!("{ALMOST_IDEAL}share[i] = a[i] + sum over j of (g[i,j]*ln(p[j])) + b[i]*(ln(m) - lnP)\n"));
    let income = pairs(&INCOME, &[false, false, true, true]);
    assert_eq!(properties(&vetting), [income, pairs(&ADDITIVE, &[false, false])].concat());
    assert_eq!(rank(&vetting), Some(2));
}

#[test]
fn a_quadratic_in_the_logarithm_of_income_has_rank_three() {
    // Banks, Blundell and Lewbel 1997
    let text = format!(
        "{ALMOST_IDEAL}parameters c[i]\nassume sum over i of (c[i]) = 0\n\
         let z = ln(m) - lnP\nlet B = product over k of (p[k]^b[k])\n\
         share[i] = a[i] + sum over j of (g[i,j]*ln(p[j])) + b[i]*z + c[i]/B*z^2\n"
    );
    let vetting = vetted_in(&text, &PARTS[..4]);
    assert_eq!(properties(&vetting)[..4], pairs(&INCOME, &[false; 4]));
    assert_eq!(rank(&vetting), Some(3));
}

#[test]
fn the_indirect_addilog_system_is_indirectly_additive_alone() {
    // Houthakker 1960
    let vetting = vetted(
        "goods 1..3\nprices p[i]\nincome m\nparameters a[i], b[i]\nassume a[i] > 0, b[i] > 0\n\
         demand[i] = a[i]*b[i]*(m/p[i])^(b[i] + 1)/(sum over j of (a[j]*b[j]*(m/p[j])^b[j]))\n",
    );
    let income = pairs(&INCOME, &[false; 4]);
    assert_eq!(properties(&vetting), [income, pairs(&ADDITIVE, &[false, true])].concat());
    assert_eq!(rank(&vetting), Some(3));
}

#[test]
fn shares_affine_in_a_power_of_income_are_pigl_with_that_exponent() {
    // Muellbauer 1975
    let vetting = vetted(
        "goods tea, rest_of_it\nprices p, q\nincome m\nparameters k\nassume 0 < k < 1, m > p\n\
         share tea = k*(p/m)^k\nrest rest_of_it\n",
    );
    assert_eq!(properties(&vetting), pairs(&INCOME, &[false, false, false, true]));
    let structure = vetting.structure.as_ref().expect("structure");
    let exponent = structure.exponent.as_ref().map(|e| vetting.model.field.formula(e));
    assert_eq!(exponent.map(|e| mainspring::render::formula_text::plain(&e)), Some("k".to_string()));
    assert_eq!(rank(&vetting), Some(2));
    assert_eq!(goods(&vetting)[0][1], Some(Tendency::Negative), "tea is a necessity");
}

/// Two nests with elasticities s and r inside, and t between them.
const NESTED: &str = "goods bread, fish, coal, peat\ngroup food = bread, fish\ngroup fuel = coal, peat\n\
     group mixed = bread, coal\ngroup three = bread, fish, coal\nprices p_b, p_f, p_c, p_h\nincome m\n\
     parameters s, r, t\nassume s > 0, r > 0, t > 0, s != 1, r != 1, t != 1, s != t, r != t\n\
     let F = (p_b^(1-s) + 2*p_f^(1-s))^(1/(1-s))\nlet H = (3*p_c^(1-r) + p_h^(1-r))^(1/(1-r))\n\
     let D = F^(1-t) + H^(1-t)\n\
     share bread = F^(s-t)*p_b^(1-s)/D\nshare fish = 2*F^(s-t)*p_f^(1-s)/D\n\
     share coal = 3*H^(r-t)*p_c^(1-r)/D\nshare peat = H^(r-t)*p_h^(1-r)/D\n";

#[test]
fn nests_are_separable_and_nothing_across_them() {
    // Goldman and Uzawa 1964
    let claimed = "claim separable food\nclaim separable fuel\nclaim separable mixed\nclaim separable three\n";
    let vetting = vetted(&format!("{NESTED}{claimed}"));
    use Verdict::{Proven, Refuted};
    assert_eq!(claims(&vetting), [Proven, Proven, Refuted, Refuted]);
    let structure = vetting.structure.as_ref().expect("structure");
    let groups: Vec<bool> = (0..4).map(|group| structure.has(Property::Separable(group))).collect();
    assert_eq!(groups, [true, true, false, false]);
    assert!(structure.has(Property::Homothetic) && !structure.has(Property::DirectlyAdditive));
    let witness = vetting.claims[2].witness.as_ref().expect("a point");
    assert!(vetting.model.is_admissible(&witness.point));
}

#[test]
fn separability_is_refused_where_there_need_not_be_preferences() {
    // outlays that no consumer chooses: the Slutsky matrix is not symmetric; food moves in one direction all the same
    let vetting = vetted(&format!(
        "{THREE}group food = bread, fish\nparameters a, b\nassume a > 0, b > 0, a + b < 1\n\
         outlay bread = a*m*p_c/(p_b + p_c)\noutlay fish = b*m*p_c/(p_b + p_c)\nrest cloth\nclaim separable food\n"
    ));
    let claim = &vetting.claims[0];
    assert_eq!(claim.verdict, Verdict::Undecided);
    assert!(claim.reason.as_ref().is_some_and(|reason| reason.contains("symmetric")), "{:?}", claim.reason);
    assert!(properties(&vetting).is_empty(), "nothing is said of preferences");
}

#[test]
fn the_goods_outside_an_incomplete_system_count_among_the_others() {
    let incomplete = |food: &str| {
        vetted(&format!(
            "goods bread, fish\ngroup food = bread, fish\nprices p, q\nincome m\nothers r\nparameters a, b\n\
             assume a > 0, b > 0, a + b < 1\n{food}claim separable food\n"
        ))
    };
    let shares = "share bread = a\nshare fish = b\n";
    assert_eq!(claims(&incomplete(shares)), [Verdict::Proven]);
    // r raises the demand for bread at the cost of the goods outside, and not that for fish
    let moved = "demand bread = a*m/(p + r)\ndemand fish = b*m/q\n";
    assert_eq!(claims(&incomplete(moved)), [Verdict::Refuted]);
}

#[test]
fn a_given_utility_is_separable_where_rates_of_substitution_say_so() {
    // Leontief 1947; Sono 1945
    let vetting = vetted(
        "goods bread, fish, cloth\ngroup food = bread, fish\ngroup mixed = fish, cloth\nprices p, q, r\nincome m\n\
         quantities x, y, z\ngiven utility = ln(x + sqrt(x*y)) + ln(z)\nclaim separable food\nclaim separable mixed\n",
    );
    assert_eq!(claims(&vetting)[..2], [Verdict::Proven, Verdict::Refuted]);
}

#[test]
fn demands_without_income_effects_are_quasi_linear() {
    let vetting = vetted(
        "goods bread, fish, money\nprices p_b, p_f, p_m\nincome m\nparameters a, b\nassume a > 0, b > 0\n\
         assume m > (a + b)*p_m\n\
         demand bread = a*p_m/p_b\ndemand fish = b*p_m/p_f\ndemand money = m/p_m - a - b\n",
    );
    let structure = vetting.structure.as_ref().expect("structure");
    assert_eq!(structure.numeraire, Some(2));
    assert!(structure.has(Property::QuasiLinear) && structure.has(Property::DirectlyAdditive));
    assert_eq!(goods(&vetting)[0], [Some(Tendency::Zero), Some(Tendency::Negative), Some(Tendency::Negative)]);
}

#[test]
fn a_good_can_be_inferior_and_giffen() {
    // U = ln(x − c) − 2 ln(d − y), with c p < m < … : the first-order conditions hold where income is short
    let vetting = vetted(
        "goods potatoes, meat\nprices p, q\nincome m\nparameters c, d\nassume c > 0, d > 0\n\
         assume p*c + q*d > m, m > q*d\n\
         demand potatoes = c + (p*c + q*d - m)/p\ndemand meat = d - 2*(p*c + q*d - m)/q\n",
    );
    use Tendency::{Negative, Positive};
    assert_eq!(goods(&vetting)[0], [Some(Negative), Some(Negative), Some(Positive)], "inferior, a necessity, Giffen");
    assert_eq!(goods(&vetting)[1][0], Some(Positive), "meat is normal");
}

#[test]
fn what_can_be_either_is_shown_by_two_points() {
    // the Engel curve of tea rises up to m = 4p and falls from there on
    let vetting = vetted(
        "goods tea, others_of_it\nprices p, q\nincome m\nassume m < 8*p\n\
         demand tea = m/p - m^2/(8*p^2)\nrest others_of_it\n",
    );
    let tea = &vetting.responses.as_ref().expect("responses").goods[0];
    assert_eq!(tea.income.tendency, Some(Tendency::Varies));
    for witness in [&tea.income.positive, &tea.income.negative] {
        let witness = witness.as_ref().expect("a point");
        assert!(vetting.model.is_admissible(&witness.point));
    }
}

#[test]
fn large_systems_are_asked_less() {
    let vetting = vetted(
        "goods 1..40\nprices p[i]\nincome m\nparameters a[i]\nassume a[i] > 0, sum over i of (a[i]) = 1\n\
         demand[i] = a[i]*m/p[i]\n",
    );
    let structure = vetting.structure.as_ref().expect("structure");
    assert!(structure.has(Property::Homothetic));
    assert!(structure.on(Property::DirectlyAdditive).is_none());
    let responses = vetting.responses.as_ref().expect("responses");
    assert!(responses.goods.is_empty() && responses.pairs.net.is_empty() && responses.elasticities.left_out);
}

#[test]
fn given_preferences_have_the_structure_of_their_demands() {
    let given = |preferences: &str| {
        vetted(&format!(
            "goods bread, fish, cloth\nprices p, q, r\nincome m\nquantities x, y, z\nparameters a\nassume a > 0\n{preferences}\n"
        ))
    };
    // Stone and Geary, with a of two goods at hand; with one alone it would be additive both ways (Hicks 1969)
    let geary = given("given utility = ln(x) + 2*ln(y + a) + 3*ln(z + a)");
    let income = pairs(&INCOME, &[false, true, false, true]);
    assert_eq!(properties(&geary), [income, pairs(&ADDITIVE, &[true, false])].concat());
    let homothetic = given("given expenditure = u*p^(1/2)*q^(1/4)*r^(1/4)");
    assert_eq!(properties(&homothetic)[..4], pairs(&INCOME, &[true; 4]));
    let addilog = given("given indirect utility = m/p + sqrt(m/q) + ln(m/r)");
    assert_eq!(properties(&addilog)[4..], pairs(&ADDITIVE, &[false, true]));
}

/// Elements by number, in place of a text for each.
#[derive(Default)]
struct Register(std::cell::RefCell<Vec<mainspring::algebra::generator::Element>>);

#[test]
fn every_step_can_be_made_anew() {
    use mainspring::proof::{replay, store};
    for text in [
        "goods 1..3\nprices p[i]\nincome m\nparameters a[i], b[i]\nassume a[i] > 0, b[i] > 0\n\
         demand[i] = a[i]*b[i]*(m/p[i])^(b[i] + 1)/(sum over j of (a[j]*b[j]*(m/p[j])^b[j]))\n",
        "goods tea, cake\nprices p, q\nincome m\nquantities x, y\ngiven utility = ln(x) + y\n",
    ] {
        let vetting = vetted(text);
        let register = Register::default();
        let print = |e: &mainspring::algebra::generator::Element| {
            register.0.borrow_mut().push(e.clone());
            (register.0.borrow().len() - 1).to_string()
        };
        let stored = store(&vetting.model.field, &vetting.derivation, &print);
        let read = |number: &str| {
            let place: usize = number.parse().map_err(|_| number.to_string())?;
            register.0.borrow().get(place).cloned().ok_or_else(|| number.to_string())
        };
        let replayed = replay(&vetting.model.field, &stored, &read);
        let replayed = replayed.unwrap_or_else(|rejected| panic!("{rejected:?}\n{text}"));
        assert_eq!(replayed.steps().len(), vetting.derivation.steps().len());
    }
}
