//! The rule of identities: the normal form of every difference is zero.

use std::rc::Rc;

use super::claim::{Equation, Expression, Identities};
use super::derivation::{Proved, Residual, Rule, Statement, StepId};
use super::prover::Prover;

impl Prover<'_> {
    /// Establishes that all equations of a family hold identically; one step for the whole family. Cost: one zero test
    /// an equation.
    ///
    /// # Errors
    /// The differences whose normal form is not zero. That does not refute them; a point does.
    pub fn identities(
        &mut self,
        subject: &str,
        equations: Vec<Equation>,
        premises: &[StepId],
    ) -> Result<Proved<Identities>, Vec<Residual>> {
        let left_over: Vec<Residual> = equations.iter().filter_map(|equation| self.difference(equation)).collect();
        if !left_over.is_empty() {
            return Err(left_over);
        }
        let sides = self.sides(equations.iter().flat_map(|e| [&e.left, &e.right]));
        let claim = Rc::new(Identities { equations });
        let step = self.record(subject, Statement::Identities(claim.clone()), Rule::NormalForm, premises, sides);
        Ok(Proved { claim, step })
    }

    /// Establishes a single identity left = right between elements.
    ///
    /// # Errors
    /// The difference, if its normal form is not zero.
    pub fn identity(
        &mut self,
        subject: &str,
        left: Expression,
        right: Expression,
        premises: &[StepId],
    ) -> Result<Proved<Identities>, Vec<Residual>> {
        self.identities(subject, vec![Equation { label: super::Label::Whole, left, right }], premises)
    }

    /// left − right, unless its normal form is zero.
    fn difference(&mut self, equation: &Equation) -> Option<Residual> {
        let element = &self.value(&equation.left) - &self.value(&equation.right);
        (!self.field.is_zero(&element)).then(|| Residual { label: equation.label, element })
    }
}
