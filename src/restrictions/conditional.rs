//! Conditional verdicts: the search for restrictions, in short form, for one condition that fails somewhere.

use crate::algebra::budget;
use crate::algebra::polynomial::Poly;
use crate::conditions::{self, Condition, Finding, Verdict};
use crate::model::Model;

use super::node::Node;
use super::search::Search;
use super::{begin, branch, limited, without_inner};

/// The work that the search may take.
const SHORT_WORK: u64 = 400_000_000;

/// Finds the parameter values that rescue a condition: the verdict becomes conditional where there are some, and stays,
/// with the word that it is final, where it is shown that there are none.
pub fn rescue(model: &Model, finding: &mut Finding) {
    let open = finding.verdict == Verdict::Refuted && finding.never.is_none();
    if !open || finding.residuals.is_empty() || finding.condition == Condition::Curvature {
        return;
    }
    let only = [finding.condition];
    let test = |leaf: &Node| branch::test(model, &only, leaf);
    let mut search = Search::new(&model.field, &[], &test);
    let ended = budget::attempt(SHORT_WORK, || begin(model, &finding.residuals, &mut search));
    let complete = search.exhaustive && ended.is_ok();
    let found = search.found;
    let leaves = limited(|| without_inner(model, &found)).unwrap_or(found);
    if leaves.is_empty() {
        finding.never = complete.then_some(true);
        return;
    }
    finding.restrictions = Some(leaves.iter().map(|leaf| said(model, leaf)).collect());
    finding.restrictions_complete = complete;
    finding.verdict = Verdict::Conditional;
    finding.never = Some(false);
}

fn said(model: &Model, leaf: &Node) -> conditions::Branch {
    let place = |v| model.parameters.iter().position(|p| p.var == v);
    let mut solved = leaf.solved.clone();
    solved.sort_by_key(|(v, _)| place(*v));
    let equations = solved.into_iter().map(|(v, value)| (Poly::var(v), value)).collect();
    conditions::Branch { equations, side_conditions: leaf.sides.clone(), inequalities: Vec::new() }
}
