//! The record: steps in the order in which they were established, and the tokens that only a rule can make.

use std::rc::Rc;

use crate::algebra::evaluation::Point;
use crate::algebra::field::Relation;
use crate::algebra::generator::Element;

use super::bound::Combination;
use super::claim::{Balanced, Bounded, Expression, FunctionId, Identities, Label, Semidefinite, SemidefiniteAt};
use super::decomposition::Decomposition;
use super::witness::Failure;

/// A step, by its number in the derivation.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash, serde::Serialize, serde::Deserialize)]
pub struct StepId(pub(super) u32);

impl StepId {
    /// Its position in [`Derivation::steps`].
    pub fn index(self) -> usize {
        self.0 as usize
    }
}

/// What a step establishes.
#[derive(Clone, Debug)]
pub enum Statement {
    /// Equations that hold identically.
    Identities(Rc<Identities>),
    /// A sign on the whole domain.
    Bounded(Rc<Bounded>),
    /// A matrix whose rows and columns sum to zero.
    Balanced(Rc<Balanced>),
    /// A negative semidefinite matrix.
    Semidefinite(Rc<Semidefinite>),
    /// A matrix that is negative semidefinite at a point.
    SemidefiniteAt(Rc<SemidefiniteAt>),
    /// A point at which something fails.
    Failure(Rc<Failure>),
    /// What is taken for granted, in words.
    Assumed(String),
}

/// By which rule a step was established.
#[derive(Clone, Debug, PartialEq)]
pub enum Rule {
    /// The normal form of every difference is zero.
    NormalForm,
    /// The sign follows from the facts of the domain.
    Sign,
    /// The sign follows from the given combination of facts and squares.
    Combination(Combination),
    /// Off-diagonal entries are nonnegative and rows and columns sum to zero.
    Laplacian,
    /// The coefficients of the characteristic polynomial of −M are nonnegative; one row and column may be left out of
    /// a balanced matrix.
    Characteristic {
        /// The row and column left out.
        without: Option<usize>,
    },
    /// The symmetric part vanishes off the diagonal and is nowhere positive on it.
    Diagonal,
    /// The matrix is a combination of negative semidefinite ones, less squares.
    Decomposition(Decomposition),
    /// Evaluation at a point.
    Evaluation,
    /// Not established, but assumed by the author or the language.
    Assumption,
}

/// Something that a step leans on.
#[derive(Clone, Debug, PartialEq)]
pub struct SideCondition {
    /// The element.
    pub element: Element,
    /// How it must stand to zero.
    pub relation: Relation,
    /// Whether it follows from the facts of the domain. One that does not is to be stated beside the result.
    pub discharged: bool,
}

/// One step of a derivation.
#[derive(Clone, Debug)]
pub struct Step {
    pub(super) subject: String,
    pub(super) statement: Statement,
    pub(super) rule: Rule,
    pub(super) premises: Vec<StepId>,
    pub(super) sides: Vec<SideCondition>,
    pub(super) supposing: Rc<Vec<(Expression, Relation)>>,
}

impl Step {
    /// What the step is about: "symmetry", "Shephard's lemma".
    pub fn subject(&self) -> &str {
        &self.subject
    }

    /// What it establishes.
    pub fn statement(&self) -> &Statement {
        &self.statement
    }

    /// By which rule.
    pub fn rule(&self) -> &Rule {
        &self.rule
    }

    /// The earlier steps that it uses or comes from.
    pub fn premises(&self) -> &[StepId] {
        &self.premises
    }

    /// The positivities and non-zero divisors that it leans on.
    pub fn sides(&self) -> &[SideCondition] {
        &self.sides
    }

    /// The part of the domain that the step is about, where it is not the whole: expressions with their relations to
    /// zero.
    pub fn supposing(&self) -> &[(Expression, Relation)] {
        &self.supposing
    }
}

/// A function with its name.
#[derive(Clone, Debug)]
pub struct Function {
    /// The name, for reading.
    pub name: String,
    /// What it is.
    pub element: Element,
}

/// The steps of a derivation, and the functions that they speak of.
#[derive(Clone, Debug, Default)]
pub struct Derivation {
    pub(super) functions: Vec<Function>,
    pub(super) steps: Vec<Step>,
}

impl Derivation {
    /// The steps, in the order in which they were established.
    pub fn steps(&self) -> &[Step] {
        &self.steps
    }

    /// The step with this number, if it is of this derivation.
    pub fn step(&self, id: StepId) -> Option<&Step> {
        self.steps.get(id.index())
    }

    /// The functions, by their numbers.
    pub fn functions(&self) -> &[Function] {
        &self.functions
    }

    /// The function with this number, if it is of this derivation.
    pub fn function(&self, id: FunctionId) -> Option<&Function> {
        self.functions.get(id.index())
    }

    pub(super) fn add(&mut self, step: Step) -> StepId {
        self.steps.push(step);
        StepId((self.steps.len() - 1) as u32)
    }
}

/// A claim that a rule has established.
#[derive(Clone, Debug)]
pub struct Proved<C> {
    pub(super) claim: Rc<C>,
    pub(super) step: StepId,
}

impl<C> Proved<C> {
    /// The claim.
    pub fn claim(&self) -> &C {
        &self.claim
    }

    /// The step that established it.
    pub fn step(&self) -> StepId {
        self.step
    }
}

/// A claim that fails at a point.
#[derive(Clone, Debug)]
pub struct Refuted<C> {
    pub(super) claim: Rc<C>,
    pub(super) failure: Rc<Failure>,
    pub(super) step: StepId,
}

impl<C> Refuted<C> {
    /// The claim.
    pub fn claim(&self) -> &C {
        &self.claim
    }

    /// The point.
    pub fn point(&self) -> &Point {
        &self.failure.point
    }

    /// Where and how it fails.
    pub fn failure(&self) -> &Failure {
        &self.failure
    }

    /// The step that established it.
    pub fn step(&self) -> StepId {
        self.step
    }
}

/// left − right of an equation whose normal form is not zero.
#[derive(Clone, Debug, PartialEq)]
pub struct Residual {
    /// Which equation of the family.
    pub label: Label,
    /// The difference.
    pub element: Element,
}
