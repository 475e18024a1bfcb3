//! Weak separability of a group of goods from all others (Goldman and Uzawa 1964): for goods i, j of the group and k
//! outside it, Sᵢₖ ∂xⱼ/∂m = Sⱼₖ ∂xᵢ/∂m. The terms xₖ ∂xᵢ/∂m ∂xⱼ/∂m on both sides cancel, and what remains says that the
//! demands for the group move in one direction, whatever moves them from outside: income, or a price pₖ.
//!
//! For inverse demands, the rates of substitution πᵢ/πⱼ do not depend on the quantity xₖ (Leontief 1947).

use std::rc::Rc;

use crate::algebra::monomial::Var;
use crate::model::{Coverage, Model};
use crate::proof::{Equation, Expression, Factor, Identities, Label, Prover, Rule, Statement};

use super::fact;
use super::finding::{ClaimFinding, Condition, Verdict};
use super::settlement;
use super::slutsky::{Compensation, Coordinates, System};
use super::symmetry;

/// Examines whether preferences are weakly separable in a group of goods.
pub fn examine(model: &Model, prover: &mut Prover<'_>, subject: &str, goods: &[usize]) -> ClaimFinding {
    let Some(system) = System::of(model, prover) else {
        return ClaimFinding::undecided("the model has no demands, nor preferences that slopes could be taken from");
    };
    let Some(equations) = equations(model, &system, prover, goods) else {
        return ClaimFinding::undecided("the demands for the group depend on its own prices alone");
    };
    let positive: Vec<_> = system.functions.iter().map(|f| prover.value(&Factor::Function(*f).into())).collect();
    let mut points = model.points().with_positive(&positive);
    let mut finding = fact::identities(model, prover, subject, &equations, &[], &mut points);
    if finding.verdict == Verdict::Proven && !is_symmetric(&system, prover) {
        let matrix = if system.compensation == Compensation::Scale { "Antonelli" } else { "Slutsky" };
        finding = ClaimFinding::undecided(&format!(
            "the condition on the slopes holds, but the {matrix} matrix is not shown to be symmetric, so that there need \
             be no preferences"
        ));
    }
    finding
}

/// The equations of separability: one for each good of the group but one, and each mover outside. `None` where nothing
/// outside moves the demands for the group.
fn equations(model: &Model, system: &System, prover: &mut Prover<'_>, goods: &[usize]) -> Option<Vec<Equation>> {
    let movers = Mover::outside(model, system, goods);
    if goods.len() < 2 || movers.len() < 2 {
        return Some(Vec::new());
    }
    let moved = |good: usize, mover: &Mover| mover.slope(system, good);
    // a good and a mover by which all others are measured
    let mut moves = |good: usize, mover: &Mover| {
        let value = prover.value(&moved(good, mover));
        !prover.field().is_zero(&value)
    };
    let pivot =
        |(place, mover): (usize, &Mover)| Some((goods.iter().copied().find(|good| moves(*good, mover))?, place));
    let (base, place) = movers.iter().enumerate().find_map(pivot)?;
    let standard = &movers[place];
    let mut equations = Vec::new();
    for mover in movers.iter().skip(place + 1) {
        for good in goods.iter().filter(|good| **good != base) {
            equations.push(Equation {
                label: mover.label(*good),
                left: product(&moved(*good, mover), &moved(base, standard)),
                right: product(&moved(base, mover), &moved(*good, standard)),
            });
        }
    }
    Some(equations)
}

/// Something outside the group that moves the demands for it.
enum Mover {
    /// Income, the utility level, or (for inverse demands) nothing: the demand itself is the standard.
    Common(Option<Var>),
    /// The price of a good outside, with its position; or its quantity.
    Good(usize, Var),
    /// The price of goods that the system does not cover.
    Other(Var),
    /// The price of the goods outside a deflated system, by homogeneity.
    Deflator(Rc<Vec<Var>>),
}

impl Mover {
    fn outside(model: &Model, system: &System, goods: &[usize]) -> Vec<Mover> {
        let common = match system.compensation {
            Compensation::Income(income) => Some(income),
            Compensation::Kept(_) => Some(model.utility),
            Compensation::Scale => None,
        };
        let mut movers = vec![Mover::Common(common)];
        let outside = system.prices.iter().enumerate().filter(|(good, _)| !goods.contains(good));
        movers.extend(outside.map(|(good, price)| Mover::Good(good, *price)));
        movers.extend(system.others.iter().map(|price| Mover::Other(*price)));
        if model.coverage == Coverage::Deflated {
            movers.push(Mover::Deflator(Rc::new(system.prices.iter().copied().chain(common).collect())));
        }
        movers
    }

    fn label(&self, good: usize) -> Label {
        match self {
            Mover::Good(outside, _) => Label::Pair(good, *outside),
            Mover::Common(_) | Mover::Other(_) | Mover::Deflator(_) => Label::Good(good),
        }
    }

    /// What the mover does to the quantity of a good of the group, times its price (and over income, in shares).
    fn slope(&self, system: &System, good: usize) -> Expression {
        let Some(f) = system.collected.get(good).copied() else { return Expression::zero() };
        let itself = Expression::from(Factor::Function(f));
        match (self, system.coordinates) {
            (Mover::Common(None), _) => itself,
            (Mover::Common(Some(income)), Coordinates::Outlays) => Factor::Slope(f, *income).into(),
            (Mover::Common(Some(income)), Coordinates::Shares) => itself.plus(1, vec![Factor::LogSlope(f, *income)]),
            (Mover::Good(_, price) | Mover::Other(price), _) => Factor::LogSlope(f, *price).into(),
            (Mover::Deflator(all), Coordinates::Shares) => Factor::Euler(f, all.clone()).into(),
            (Mover::Deflator(all), Coordinates::Outlays) => {
                Expression::from(Factor::Euler(f, all.clone())).plus(-1, vec![Factor::Function(f)])
            }
        }
    }
}

/// The product, multiplied out.
pub fn product(a: &Expression, b: &Expression) -> Expression {
    let mut all = Expression::zero();
    for left in &a.0 {
        for right in &b.0 {
            let factors = left.factors.iter().chain(&right.factors).cloned().collect();
            all = all.plus(left.coefficient * right.coefficient, factors);
        }
    }
    all
}

/// Whether the matrix of compensated slopes is symmetric: by a step that says so, or anew.
fn is_symmetric(system: &System, prover: &mut Prover<'_>) -> bool {
    if matches!(system.compensation, Compensation::Kept(_)) {
        return true;
    }
    let known = prover.derivation().steps().iter().any(|step| {
        step.subject() == Condition::Symmetry.name()
            && *step.rule() == Rule::NormalForm
            && step.supposing().is_empty()
            && matches!(step.statement(), Statement::Identities(claim) if is_whole(claim, system))
    });
    known || settlement::differences(system, prover, &symmetry::FAMILY).is_empty()
}

/// Whether the family has an equation for every pair of goods.
fn is_whole(claim: &Identities, system: &System) -> bool {
    2 * claim.equations.len() == system.size() * (system.size() - 1)
}
