//! Symmetry of the Slutsky matrix.

use crate::proof::{Equation, Label};

use super::finding::Condition;
use super::settlement::Family;
use super::slutsky::{System, scaled};

/// Tᵢⱼ = Tⱼᵢ for i < j; the terms of S that are symmetric by themselves are left out.
pub(super) const FAMILY: Family = Family { condition: Condition::Symmetry, equations, in_quantities };

fn equations(system: &System) -> Vec<Equation> {
    let n = system.size();
    let mut equations = Vec::with_capacity(n * n.saturating_sub(1) / 2);
    for i in 0..n {
        for j in i + 1..n {
            let (left, right) = (system.compensated_slope(i, j), system.compensated_slope(j, i));
            equations.push(Equation { label: Label::Pair(i, j), left, right });
        }
    }
    equations
}

/// The difference of the sides becomes Sᵢⱼ − Sⱼᵢ.
fn in_quantities(system: &System, equation: &Equation) -> Equation {
    let Label::Pair(i, j) = equation.label else { return equation.clone() };
    let scale = system.scale(i, j);
    let (left, right) = (scaled(&equation.left, &scale), scaled(&equation.right, &scale));
    Equation { label: equation.label, left, right }
}
