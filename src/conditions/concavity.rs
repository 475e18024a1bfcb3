//! Quasi-concavity of a direct utility by concavity: of U itself, or of ln U where U is positive.
//!
//! The Antonelli matrix is, between projections, the Hessian matrix of any utility of the same preferences divided by
//! Σ x ∂U/∂x; so where utility rises, a concave one settles its sign.

use std::rc::Rc;

use crate::algebra::budget;
use crate::algebra::field::Relation;
use crate::algebra::generator::Element;
use crate::algebra::monomial::Var;
use crate::algebra::sign::Sign;
use crate::model::Model;
use crate::proof::{Expression, Matrix, Prover};

use super::finding::{Condition, Finding, Verdict};

/// The work that one utility function may take.
const WORK: u64 = 200_000_000;

/// Shows utility to be concave, on the whole domain or else where every marginal utility is positive; `None` where that
/// is not shown, or where no point of that kind was found.
pub fn by_concavity(model: &Model, utility: &Element, prover: &mut Prover<'_>) -> Option<Finding> {
    let question = Question::of(model, utility)?;
    model.points().with_positive(&question.slopes).next()?;
    question.everywhere(prover).or_else(|| {
        let domain: Vec<(Expression, Relation)> =
            question.slopes.iter().map(|e| (Expression::element(e.clone()), Relation::Positive)).collect();
        prover.supposing(&domain, |prover| question.everywhere(prover))
    })
}

/// Whether the first-order conditions give a maximum: utility is quasi-concave, and rises on the whole domain or is
/// concave on the whole of it. Else a point beyond the part where it rises might be better. The findings that show it.
pub fn maximised(model: &Model, utility: &Element, prover: &mut Prover<'_>) -> Option<Finding> {
    let question = Question::of(model, utility)?;
    let rises = question.slopes.iter().all(|slope| model.field.sign(slope) == Sign::Positive);
    if rises { super::examine_utility(model, utility, prover) } else { question.everywhere(prover) }
}

struct Question<'a> {
    utility: &'a Element,
    quantities: Vec<Var>,
    slopes: Vec<Element>,
}

impl<'a> Question<'a> {
    fn of(model: &Model, utility: &'a Element) -> Option<Question<'a>> {
        let field = &model.field;
        let quantities: Vec<Var> = model.quantities.iter().copied().collect::<Option<_>>()?;
        let slopes = quantities.iter().map(|x| field.reduce(&field.derivative(utility, *x))).collect();
        Some(Question { utility, quantities, slopes })
    }

    /// Shows a form of utility to be concave on the domain as it is supposed.
    fn everywhere(&self, prover: &mut Prover<'_>) -> Option<Finding> {
        let field = prover.field();
        let mut forms = vec![("utility is concave", self.utility.clone())];
        if field.sign(self.utility) == Sign::Positive {
            forms.extend(field.ln(self.utility).ok().map(|log| ("the logarithm of utility is concave", log)));
        }
        forms.into_iter().find_map(|(method, form)| {
            budget::attempt(WORK, || concave(&form, &self.quantities, method, prover)).ok().flatten()
        })
    }
}

fn concave(form: &Element, quantities: &[Var], method: &str, prover: &mut Prover<'_>) -> Option<Finding> {
    let field = prover.field();
    let slopes: Vec<Element> = quantities.iter().map(|x| field.reduce(&field.derivative(form, *x))).collect();
    let n = quantities.len();
    let matrix = Rc::new(Matrix::new(n, |i, j| {
        let entry = slopes.get(i).zip(quantities.get(j)).map(|(slope, x)| field.reduce(&field.derivative(slope, *x)));
        Expression::element(entry.unwrap_or_default())
    }));
    let subject = Condition::Curvature.name();
    let proof = prover.diagonal(subject, &matrix).or_else(|| prover.characteristic(subject, &matrix, None))?;
    let mut finding = Finding::new(Condition::Curvature, Verdict::Proven, method);
    finding.steps.push(proof.step());
    Some(finding)
}
