//! Weak separability of the model's own groups; the condition is that of `claim separable`.

use crate::conditions::{ClaimFinding, separability};
use crate::proof::Prover;

use super::question::Question;

/// Settles weak separability of a group; `None` where it holds of any preferences: of one good, and of all.
pub(super) fn settle(question: &Question<'_>, prover: &mut Prover<'_>, group: usize) -> Option<ClaimFinding> {
    let (name, goods) = question.model.groups.get(group)?;
    if goods.len() < 2 || goods.len() >= question.size() {
        return None;
    }
    Some(separability::examine(question.model, prover, &format!("separability of {name}"), goods))
}
