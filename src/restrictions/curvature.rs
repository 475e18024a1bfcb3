//! Curvature among the conditions asked for. It is no identity: a branch of the others is kept where curvature is proven on
//! it, is cut down by inequalities where these are known to be all, and falls where no parameter values rescue it.

use crate::algebra::generator::Element;
use crate::conditions::{Condition, Finding, Verdict};

use super::Restrictions;
use super::branch::Branch;

/// Leaves the parameter values for which curvature holds too, as far as they are known.
pub(super) fn settle(found: &mut Restrictions) {
    let mut kept = Vec::new();
    let mut open = false;
    for branch in std::mem::take(&mut found.branches) {
        let Some(finding) = branch.finding(Condition::Curvature) else {
            open = true;
            continue;
        };
        match finding.verdict {
            Verdict::Proven => kept.push(branch),
            Verdict::Conditional => match cut(finding) {
                Some(inequalities) => {
                    open |= !finding.restrictions_complete;
                    kept.push(Branch { inequalities, ..branch });
                }
                None => open = true,
            },
            Verdict::Refuted => open |= finding.never != Some(true),
            Verdict::Regional | Verdict::Undecided => open = true,
        }
    }
    found.branches = kept;
    if open {
        found.complete = false;
        let words = "for some parameter values curvature holds in a part of the domain only, or is not decided";
        found.reason.get_or_insert_with(|| words.to_string());
    }
}

/// The inequalities under which curvature holds, where these alone are the restriction.
fn cut(finding: &Finding) -> Option<Vec<Element>> {
    match finding.restrictions.as_deref() {
        Some([only]) if only.equations.is_empty() && only.side_conditions.is_empty() => Some(only.inequalities.clone()),
        _ => None,
    }
}
