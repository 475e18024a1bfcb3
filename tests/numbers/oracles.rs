//! Recovered preferences against a numeric solution of Shephard's system, and curvature against eigenvalues: formulas
//! are evaluated from outside, by floating point over the syntax tree.

use std::time::Duration;

use crate::outside::integrability::{
    compensated_income, failure, in_domain, named, neighbour, points, printed, try_vetted,
};
use crate::outside::{Outside, Values};
use crate::true_systems::TRUE_SYSTEMS;
use mainspring::conditions::{Condition, Verdict};
use mainspring::recovery::Recovered;
use mainspring::{Allowance, Part, Vetting};

const ALLOWANCE: Allowance = Allowance { work: 20_000_000, time: Duration::from_secs(20), memory_mib: 2048 };

/// Follows the compensated path from a point: e reaches the income that integration gives, v stays where it is.
fn follows_shephard(vetting: &Vetting, text: &str, name: &str) -> usize {
    let Some(Recovered::Found(found)) = &vetting.recovered else { return 0 };
    let outside = Outside::read(text);
    let model = &vetting.model;
    let formula = |element: &Option<_>| element.as_ref().map(|element| printed(model, text, element));
    let (Some(v), e) = (formula(&found.indirect_utility), formula(&found.expenditure)) else { return 0 };
    let mut followed = 0;
    for start in points(model, &outside, 3) {
        let mut end = neighbour(&outside, &start);
        let income = compensated_income(&outside, &start, &end);
        end.insert(outside.income.clone().expect("income"), income);
        if !in_domain(&outside, &end) {
            continue;
        }
        let (before, after) = (outside.formula(&v, &start), outside.formula(&v, &end));
        // how far income would have to move for the two to agree
        let slope = after.slope[after.slope.len() - 1];
        let off = ((after.value - before.value) / slope / income).abs();
        if !before.value.is_finite() || !after.value.is_finite() || before.value.abs() > 1e100 || slope == 0.0 {
            continue;
        }
        let rounding = 1e-13 * (before.value / slope / income).abs();
        assert!(off < 1e-6 + rounding, "{name}: v is off by {off} of income from {start:?}");
        if let Some(e) = &e {
            let level = Values::from([(model.utility_name.clone(), before.value)]);
            let there: Values = end.iter().map(|(k, x)| (k.clone(), *x)).chain(level).collect();
            let claimed = outside.formula(e, &there).value;
            let off = (claimed - income).abs() / income;
            assert!(off < 1e-6 + rounding, "{name}: e is {claimed}, integration gives {income} from {start:?}");
        }
        followed += 1;
    }
    followed
}

#[test]
fn recovered_preferences_follow_the_compensated_path() {
    let mut unfollowed = Vec::new();
    for (name, text) in TRUE_SYSTEMS {
        let vetting = try_vetted(text, &[Part::Condition(Condition::Symmetry), Part::Recovery], ALLOWANCE);
        let vetting = vetting.unwrap_or_else(|| panic!("{name} cannot be read"));
        let symmetric = vetting.finding(Condition::Symmetry).is_some_and(|f| f.verdict == Verdict::Proven);
        if follows_shephard(&vetting, text, name) == 0 && symmetric {
            unfollowed.push(name);
        }
    }
    assert!(unfollowed.is_empty(), "no closed form was followed for {unfollowed:?}");
}

/// No verdict against what the outside evaluation shows at many points, and every witness confirmed by it.
fn agrees(vetting: &Vetting, text: &str, name: &str) {
    let outside = Outside::read(text);
    let at = points(&vetting.model, &outside, 12);
    for finding in &vetting.findings {
        let condition = finding.condition;
        if finding.verdict == Verdict::Proven {
            let failing = at.iter().find(|values| failure(condition, &outside, values) > 1e-7);
            assert!(failing.is_none(), "{name}: {condition:?} is called proven, and fails at {failing:?}");
        }
        if let Some(witness) = &finding.witness {
            let values = named(&vetting.model, &witness.point);
            assert!(outside.violation(&values) < 1e-9, "{name}: the witness breaks an assumption: {values:?}");
            let fails = failure(condition, &outside, &values);
            assert!(fails > 1e-13, "{name}: {condition:?} does not fail at {values:?}: {fails}");
            let admissible = condition != Condition::Curvature || in_domain(&outside, &values);
            assert!(admissible, "{name}: curvature has a witness outside of the domain: {values:?}");
        }
        if let Some(regular) = &finding.regular_point {
            let values = named(&vetting.model, regular);
            assert!(in_domain(&outside, &values), "{name}: the regular point is outside of the domain: {values:?}");
            let fails = failure(condition, &outside, &values);
            assert!(fails < 1e-9, "{name}: curvature fails at the regular point {values:?}: {fails}");
        }
    }
}

#[test]
fn curvature_agrees_with_eigenvalues() {
    let conditions = Condition::ALL.map(Part::Condition);
    for (name, text) in TRUE_SYSTEMS {
        let vetting = try_vetted(text, &conditions, ALLOWANCE).unwrap_or_else(|| panic!("{name} cannot be read"));
        let exact = vetting.findings.iter().filter(|finding| finding.condition != Condition::Curvature);
        let open: Vec<_> = exact.filter(|f| f.verdict != Verdict::Proven).map(|f| (f.condition, f.verdict)).collect();
        assert!(open.is_empty(), "{name}: a true system is not proven: {open:?}");
        agrees(&vetting, text, name);
    }
}
