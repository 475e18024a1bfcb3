//! What is found of a condition or a claim.

use super::claims::difference::Difference;
use crate::algebra::evaluation::Point;
use crate::algebra::generator::Element;
use crate::algebra::number::Rational;
use crate::proof::{Failure, Label, Residual, StepId, Value};

/// What can be said of a statement about all points of the domain and all admissible parameter values.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Verdict {
    /// It holds for all of them.
    Proven,
    /// It fails at an admissible point.
    Refuted,
    /// It fails at an admissible point, and holds on the whole domain for some admissible parameter values.
    Conditional,
    /// It holds in one part of the domain and fails in another.
    Regional,
    /// Neither could be shown.
    Undecided,
}

/// A condition that demands must satisfy to come from preferences.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Condition {
    /// Demands do not change when prices and income do in proportion.
    Homogeneity,
    /// Outlays add up to income.
    AddingUp,
    /// The Slutsky matrix is symmetric.
    Symmetry,
    /// The Slutsky matrix is negative semidefinite.
    Curvature,
}

impl Condition {
    /// The conditions, in the order in which they are examined.
    pub const ALL: [Condition; 4] =
        [Condition::Homogeneity, Condition::AddingUp, Condition::Symmetry, Condition::Curvature];

    /// The name, as steps of a derivation have it for their subject.
    pub fn name(self) -> &'static str {
        match self {
            Condition::Homogeneity => "homogeneity",
            Condition::AddingUp => "adding-up",
            Condition::Symmetry => "symmetry",
            Condition::Curvature => "curvature",
        }
    }
}

/// Parameter values for which a condition holds: where all equations, side conditions and inequalities hold.
#[derive(Clone, Debug, PartialEq)]
pub struct Branch {
    /// A parameter and its value.
    pub equations: Vec<(Element, Element)>,
    /// Elements that are not zero.
    pub side_conditions: Vec<Element>,
    /// Elements that are not negative.
    pub inequalities: Vec<Element>,
}

/// An admissible point at which a statement fails.
#[derive(Clone, Debug, PartialEq)]
pub struct Witness {
    /// The point: a value for every declared name.
    pub point: Point,
    /// Which member of a family fails.
    pub place: Label,
    /// The value that should be zero, or have the other sign.
    pub value: Value,
    /// For curvature, the vector v with vᵀSv > 0.
    pub vector: Option<Vec<Rational>>,
}

impl Witness {
    /// The witness that a failure is; `vector` is in the quantities' own coordinates.
    pub fn of(failure: &Failure, vector: Option<Vec<Rational>>) -> Witness {
        Witness { point: failure.point.clone(), place: failure.place(), value: failure.value.clone(), vector }
    }
}

/// The finding on one condition.
#[derive(Clone, Debug)]
pub struct Finding {
    /// The condition.
    pub condition: Condition,
    /// The verdict.
    pub verdict: Verdict,
    /// The differences that should vanish and whose normal form does not.
    pub residuals: Vec<Residual>,
    /// The point at which the condition fails.
    pub witness: Option<Witness>,
    /// Whether it is shown that no admissible parameter values rescue the condition.
    pub never: Option<bool>,
    /// The parameter values for which it holds, as far as they were found.
    pub restrictions: Option<Vec<Branch>>,
    /// Whether the restrictions are shown to be all.
    pub restrictions_complete: bool,
    /// For curvature: elements that are nonnegative exactly where the condition holds.
    pub region: Option<Vec<Element>>,
    /// For curvature: a point at which the condition holds.
    pub regular_point: Option<Point>,
    /// The steps that establish the verdict.
    pub steps: Vec<StepId>,
    /// Where nothing could be shown: what is left, and why.
    pub reason: Option<String>,
    /// How the verdict was reached, in words.
    pub method: String,
}

impl Finding {
    /// A finding that says nothing yet beyond its verdict.
    pub(super) fn new(condition: Condition, verdict: Verdict, method: &str) -> Finding {
        Finding {
            condition,
            verdict,
            residuals: Vec::new(),
            witness: None,
            never: None,
            restrictions: None,
            restrictions_complete: false,
            region: None,
            regular_point: None,
            steps: Vec::new(),
            reason: None,
            method: method.to_string(),
        }
    }

    /// Nothing could be shown.
    pub fn undecided(condition: Condition, reason: &str) -> Finding {
        let mut finding = Finding::new(condition, Verdict::Undecided, "");
        finding.reason = Some(reason.to_string());
        finding
    }
}

/// The finding on one claim of the author.
#[derive(Clone, Debug)]
pub struct ClaimFinding {
    /// The verdict: proven, refuted or undecided.
    pub verdict: Verdict,
    /// The point at which the claim fails.
    pub witness: Option<Witness>,
    /// For a claim about a function of the theory: what the function is, in its own arguments, where that is known.
    pub correct: Option<Element>,
    /// Where the claim is wrong: the sign, the factor or the term in which it differs from what is right.
    pub difference: Option<Difference>,
    /// The steps that establish the verdict.
    pub steps: Vec<StepId>,
    /// Where nothing could be shown: what is left, and why.
    pub reason: Option<String>,
}

impl ClaimFinding {
    /// A finding that a step establishes.
    pub fn settled(verdict: Verdict, witness: Option<Witness>, step: StepId) -> ClaimFinding {
        ClaimFinding { verdict, witness, correct: None, difference: None, steps: vec![step], reason: None }
    }

    /// Nothing could be shown.
    pub fn undecided(reason: &str) -> ClaimFinding {
        let reason = Some(reason.to_string());
        ClaimFinding {
            verdict: Verdict::Undecided,
            witness: None,
            correct: None,
            difference: None,
            steps: Vec::new(),
            reason,
        }
    }
}
