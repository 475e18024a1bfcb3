//! Parameter restrictions: for which parameter values conditions hold, as a list of branches, and what each leaves.
//!
//! The differences that should vanish become sums of functions of prices and income with coefficients of the parameters
//! ([`terms`]); where they vanish is searched exhaustively ([`search`]), coincidences of functions included; each branch
//! is proven by building the model anew ([`branch`]).

pub mod branch;
pub mod claimed;
mod conditional;
mod curvature;
mod equations;
mod family;
pub mod indexed;
mod node;
mod search;
mod sums;
mod terms;

use std::rc::Rc;
use std::time::Duration;

use crate::algebra::budget::{self, Limits, Stopped};
use crate::algebra::monomial::Var;
use crate::conditions::{self, Condition, Witness};
use crate::model::Model;
use crate::proof::{Prover, Residual};

pub use branch::Branch;
pub use conditional::rescue;

use node::Node;
use search::Search;

/// What is asked.
#[derive(Clone, Debug)]
pub struct Request {
    /// The conditions that are to hold, together.
    pub only: Vec<Condition>,
    /// Parameters that must stay free: branches that restrict them alone are left out.
    pub kept: Vec<Var>,
}

/// The parameter values for which conditions hold.
pub struct Restrictions {
    /// The model.
    pub model: Rc<Model>,
    /// The conditions that are to hold, as far as they make sense for the model.
    pub only: Vec<Condition>,
    /// The parameters that stay free.
    pub kept: Vec<Var>,
    /// The branches, none inside another, the largest first.
    pub branches: Vec<Branch>,
    /// Whether they are shown to be all.
    pub complete: bool,
    /// Why they may not be all.
    pub reason: Option<String>,
    /// For each condition that does not hold for all parameter values: a point, outside all branches, at which it fails.
    pub failures: Vec<(Condition, Witness)>,
}

impl Restrictions {
    /// Nothing was found.
    pub fn unknown(model: Rc<Model>, reason: &str) -> Restrictions {
        let reason = Some(reason.to_string());
        let kept = Vec::new();
        Restrictions {
            model,
            only: Vec::new(),
            kept,
            branches: Vec::new(),
            complete: false,
            reason,
            failures: Vec::new(),
        }
    }

    /// Whether the conditions hold for all parameter values.
    pub fn unrestricted(&self) -> bool {
        self.branches.iter().any(|branch| branch.equations.is_empty() && branch.side_conditions.is_empty())
    }
}

/// The work that the search for branches may take.
const SEARCH_WORK: u64 = 8_000_000_000;
/// The work that one part of the examination of a branch may take; the table has many.
const PART_WORK: u64 = 20_000_000;
/// The work that the examination of all branches may take.
const TABLE_WORK: u64 = 240_000_000;

/// Finds the branches, and examines each. The search may take half of the time, the examination a quarter: each ends
/// within its own part of it, so that what was found until then can be kept.
pub fn restrict(model: Rc<Model>, request: &Request, time: Duration) -> Restrictions {
    let mut found = None;
    restrict_into(&mut found, model.clone(), request, time);
    found.unwrap_or_else(|| Restrictions::unknown(model, "nothing was asked"))
}

/// The same, with what is found put where it stays when an enclosing limit ends the work.
pub fn restrict_into(out: &mut Option<Restrictions>, model: Rc<Model>, request: &Request, time: Duration) {
    let only: Vec<Condition> =
        Condition::ALL.into_iter().filter(|c| request.only.contains(c) && conditions::applies(*c, &model)).collect();
    let found = out.insert(branches(model, only, &request.kept, time / 2));
    let complete = found.complete;
    let with_curvature = found.only.contains(&Condition::Curvature);
    found.complete &= !with_curvature;
    let share = TABLE_WORK / (2 * found.branches.len().max(1) as u64);
    let part = PART_WORK.min(share);
    let limits = Limits::new(u64::MAX, time / 4, u64::MAX);
    // what a limit cuts off stays unexamined: the list of branches does not depend on it
    let _ = budget::within(limits, || found.branches.iter_mut().for_each(|branch| branch::examine(branch, part)));
    if with_curvature {
        found.complete = complete;
        curvature::settle(found);
    }
}

/// Finds the branches without examining what they leave.
pub fn branches(model: Rc<Model>, only: Vec<Condition>, kept: &[Var], time: Duration) -> Restrictions {
    let mut out = Restrictions {
        only: only.clone(),
        kept: kept.to_vec(),
        reason: None,
        ..Restrictions::unknown(model.clone(), "")
    };
    let Some(differences) = differences(&model, &only, &mut out) else { return out };
    let test = |leaf: &Node| branch::test(&model, &only, leaf);
    let mut search = Search::new(&model.field, kept, &test);
    let limits = Limits::new(SEARCH_WORK, time, u64::MAX);
    let ended = budget::within(limits, || begin(&model, &differences, &mut search));
    if let Err(stopped) = ended {
        search.leave_out(stopped.describe());
    }
    (out.complete, out.reason) = (search.exhaustive, search.reason);
    let found = search.found;
    let mut leaves = limited(|| without_inner(&model, &found)).unwrap_or(found);
    leaves.sort_by_key(|leaf| leaf.solved.len());
    out.branches = leaves.iter().filter_map(|leaf| limited(|| branch::branch(&model, leaf)).ok().flatten()).collect();
    out.complete &= out.branches.len() == leaves.len();
    out
}

/// Runs a part of the work within its own limit.
fn limited<T>(work: impl FnOnce() -> T) -> Result<T, Stopped> {
    budget::attempt(PART_WORK, work)
}

/// The differences of all conditions, and a failure for each condition that has any.
fn differences(model: &Model, only: &[Condition], out: &mut Restrictions) -> Option<Vec<Residual>> {
    let mut prover = Prover::new(&model.field);
    let mut all = Vec::new();
    for condition in only.iter().filter(|c| **c != Condition::Curvature) {
        let found = budget::attempt(SEARCH_WORK, || {
            let differences = conditions::differences(*condition, model, &mut prover).unwrap_or_default();
            let failure = conditions::failure(*condition, model, &mut prover, &differences);
            (differences, failure)
        });
        match found {
            Ok((differences, failure)) => {
                out.failures.extend(failure.map(|witness| (*condition, witness)));
                all.extend(differences);
            }
            Err(stopped) => {
                out.reason = Some(stopped.describe().to_string());
                return None;
            }
        }
    }
    Some(all)
}

fn begin(model: &Model, differences: &[Residual], search: &mut Search<'_>) {
    let mut root = Node::default();
    for residual in differences {
        let sum = terms::terms_of(&model.field, &residual.element);
        let terms = terms::merged(&model.field, sum.terms);
        if !sum.understood || !sums::are_independent(&model.field, &terms) {
            search.leave_out("functions of prices and parameters whose coincidences are not known");
        }
        root.sums.push(terms);
    }
    search.follow(root);
}

/// The leaves that are inside none of the others.
fn without_inner(model: &Model, leaves: &[Node]) -> Vec<Node> {
    let field = &model.field;
    let mut kept: Vec<Node> = Vec::new();
    for (at, leaf) in leaves.iter().enumerate() {
        let later = leaves[at + 1..].iter().any(|other| leaf.is_inside(field, other) && !other.is_inside(field, leaf));
        if !later && !kept.iter().any(|other| leaf.is_inside(field, other)) {
            kept.push(leaf.clone());
        }
    }
    kept
}
