//! Homogeneity: demands have degree zero in all prices and income.

use std::rc::Rc;

use crate::algebra::monomial::Var;
use crate::proof::{Equation, Expression, Factor, Label};

use super::finding::Condition;
use super::settlement::Family;
use super::slutsky::{Compensation, Coordinates, System, scaled};

/// By Euler's theorem: Σⱼ θⱼ wᵢ + θₘ wᵢ = 0 for shares, Σⱼ θⱼ yᵢ + θₘ yᵢ = yᵢ for outlays; the prices of goods outside the
/// system count among the pⱼ.
pub(super) const FAMILY: Family = Family { condition: Condition::Homogeneity, equations, in_quantities };

fn equations(system: &System) -> Vec<Equation> {
    // Hicksian demands are homogeneous in prices alone
    let income = match system.compensation {
        Compensation::Income(income) => Some(income),
        Compensation::Scale | Compensation::Kept(_) => None,
    };
    let movers = Rc::new(system.prices.iter().chain(&system.others).copied().chain(income).collect());
    (0..system.size()).map(|i| equation(system, i, &movers)).collect()
}

fn equation(system: &System, i: usize, movers: &Rc<Vec<Var>>) -> Equation {
    let f = system.collected[i];
    let left = Expression::from(Factor::Euler(f, movers.clone()));
    let right = match system.coordinates {
        Coordinates::Shares => Expression::zero(),
        Coordinates::Outlays => Expression::from(Factor::Function(f)),
    };
    Equation { label: Label::Good(i), left, right }
}

/// The difference of the sides becomes Σⱼ pⱼ ∂xᵢ/∂pⱼ + m ∂xᵢ/∂m.
fn in_quantities(system: &System, equation: &Equation) -> Equation {
    let Label::Good(i) = equation.label else { return equation.clone() };
    let scale = system.quantity_scale(i);
    let (left, right) = (scaled(&equation.left, &scale), scaled(&equation.right, &scale));
    Equation { label: equation.label, left, right }
}
