//! The rules of signs: by the facts of the domain, or by a combination that is given and checked.

use std::rc::Rc;

use num_traits::Signed;

use crate::algebra::field::{Field, Relation};
use crate::algebra::generator::Element;
use crate::algebra::number::Rational;
use crate::algebra::polynomial::Poly;
use crate::algebra::sign::Sign;

use super::claim::{Bounded, Expression};
use super::derivation::{Proved, Rule, Statement, StepId};
use super::prover::{Prover, holds};

/// f = Σ λₖ μₖ gₖ + Σ cₗ hₗ² + r with λₖ, cₗ > 0 rational, μₖ ≥ 0, gₖ facts of the domain, and r ≥ 0.
#[derive(Clone, Debug, PartialEq, Default)]
pub struct Combination {
    /// λₖ, μₖ, gₖ.
    pub facts: Vec<(Rational, Element, Element)>,
    /// cₗ, hₗ.
    pub squares: Vec<(Rational, Element)>,
}

impl Prover<'_> {
    /// Establishes a sign that the field derives from its facts; `None` if it does not.
    pub fn bound(
        &mut self,
        subject: &str,
        expression: Expression,
        relation: Relation,
        premises: &[StepId],
    ) -> Option<Proved<Bounded>> {
        let value = self.value(&expression);
        if !holds(self.field, &value, relation) {
            return None;
        }
        Some(self.bounded(subject, expression, relation, Rule::Sign, premises))
    }

    /// Establishes a sign by a combination of facts and squares, which is checked; `None` if it does not hold.
    pub fn bound_by(
        &mut self,
        subject: &str,
        expression: Expression,
        relation: Relation,
        certificate: Combination,
        premises: &[StepId],
    ) -> Option<Proved<Bounded>> {
        let value = self.value(&expression);
        if !certifies(self.field, &certificate, &value, relation) {
            return None;
        }
        Some(self.bounded(subject, expression, relation, Rule::Combination(certificate), premises))
    }

    fn bounded(
        &mut self,
        subject: &str,
        expression: Expression,
        relation: Relation,
        rule: Rule,
        premises: &[StepId],
    ) -> Proved<Bounded> {
        let sides = self.sides(std::iter::once(&expression));
        let claim = Rc::new(Bounded { expression, relation });
        let step = self.record(subject, Statement::Bounded(claim.clone()), rule, premises, sides);
        Proved { claim, step }
    }
}

/// Whether the combination shows the relation for f.
fn certifies(field: &Field, combination: &Combination, f: &Element, relation: Relation) -> bool {
    let mut rest = f.clone();
    let mut strict = false;
    for (scale, multiplier, fact) in &combination.facts {
        let sign = field.sign(multiplier);
        let Some(known) = stated(field, fact) else { return false };
        if !scale.is_positive() || !sign.is_nonnegative() {
            return false;
        }
        strict |= sign == Sign::Positive && known == Relation::Positive;
        rest = &rest - &(multiplier * fact).scale(scale);
    }
    for (scale, root) in &combination.squares {
        if !scale.is_positive() {
            return false;
        }
        rest = &rest - &(root * root).scale(scale);
    }
    let rest_sign = if field.is_zero(&rest) { Sign::Zero } else { field.sign(&rest) };
    strict |= rest_sign == Sign::Positive;
    rest_sign.is_nonnegative() && (relation == Relation::NonNegative || strict)
}

/// How strongly a fact of the field says that g ≥ 0.
fn stated(field: &Field, g: &Poly) -> Option<Relation> {
    let g = field.current(g);
    let facts = field.facts();
    let relations = facts.iter().filter(|fact| field.current(&fact.element) == g).map(|fact| fact.relation);
    relations.filter(|relation| *relation != Relation::NonZero).min()
}
