//! After a failure: does the matrix fail for all parameter values, for some of them, or in a part of the domain?

use crate::algebra::budget;
use crate::algebra::factor::factor;
use crate::algebra::field::{Field, Relation};
use crate::algebra::generator::Element;
use crate::algebra::number::rational;
use crate::algebra::polynomial::Poly;
use crate::algebra::sign::Sign;
use crate::proof::{Combination, Expression, Factor, Matrix, Proved, Prover, SemidefiniteAt, StepId};

use super::super::coefficients::moves;
use super::super::finding::{Branch, Condition, Finding, Verdict};
use super::super::slutsky::Coordinates;
use super::search::{self, Failing};
use super::{Question, RUNG_WORK, SUBJECT};

/// The work that the normal form of one coefficient may take.
const REDUCED_WORK: u64 = 20_000_000;

/// The finding for a matrix that fails at a point.
pub(super) fn tell_apart(
    question: &Question<'_>,
    prover: &mut Prover<'_>,
    failing: Failing,
    regular: Option<Proved<SemidefiniteAt>>,
) -> Finding {
    let mut finding = Finding::new(Condition::Curvature, Verdict::Refuted, "a direction v with v'Sv > 0 at a point");
    finding.steps.push(failing.refuted.step());
    finding.witness = Some(failing.witness);
    if let Some(proof) = &regular {
        finding.steps.push(proof.step());
    } else if let Some(step) = budget::attempt(RUNG_WORK, || fails_everywhere(question, prover)).ok().flatten() {
        finding.never = Some(true);
        finding.steps.push(step);
        return finding;
    }
    let coefficients = budget::attempt(RUNG_WORK, || coefficients(question, prover)).unwrap_or_default();
    let conditions = coefficients
        .iter()
        .find_map(|region| budget::attempt(RUNG_WORK, || parameter_conditions(question, region)).ok().flatten());
    if let Some((inequalities, complete)) = conditions
        && let Some(point) = with_conditions(question, &inequalities)
    {
        finding.verdict = Verdict::Conditional;
        finding.never = Some(false);
        finding.region = Some(inequalities.clone());
        finding.regular_point = Some(point);
        finding.restrictions = Some(vec![Branch { equations: Vec::new(), side_conditions: Vec::new(), inequalities }]);
        finding.restrictions_complete = complete;
        return finding;
    }
    if let Some(proof) = regular {
        finding.verdict = Verdict::Regional;
        finding.regular_point = Some(proof.claim().point.clone());
        let shortest = coefficients.into_iter().min_by_key(|region| region.iter().map(Poly::len).sum::<usize>());
        finding.region = shortest;
    }
    finding
}

/// The characteristic coefficients, for each good that may be left out.
fn coefficients(question: &Question<'_>, prover: &mut Prover<'_>) -> Vec<Vec<Element>> {
    let n = question.symmetric.n;
    let choices: Vec<Option<usize>> = match question.balance {
        Some(_) => (0..n).rev().map(Some).collect(),
        None => vec![None],
    };
    let field = prover.field();
    let matrix = Matrix::new(n, |i, j| Expression::element(question.symmetric.at(i, j).clone()));
    let all = choices.into_iter().filter_map(|without| prover.characteristic_coefficients(&matrix, without));
    let shorter = |c: &Element| {
        let reduced = budget::attempt(REDUCED_WORK, || field.reduce(c)).ok().filter(|r| r.len() <= 2 * c.len());
        reduced.unwrap_or_else(|| c.clone())
    };
    all.map(|each| each.iter().map(shorter).collect()).collect()
}

/// A step that shows the matrix to fail at every point: a positive entry on the diagonal, or a negative characteristic
/// coefficient.
fn fails_everywhere(question: &Question<'_>, prover: &mut Prover<'_>) -> Option<StepId> {
    let n = question.system.size();
    for i in 0..n {
        let entry = question.matrix.entry(i, i);
        let shown = prover.bound(SUBJECT, entry.clone(), Relation::Positive, &[]);
        if let Some(proof) = shown.or_else(|| by_square(question, prover, i, entry)) {
            return Some(proof.step());
        }
    }
    let negative = coefficients(question, prover).into_iter().flatten().find_map(|c| {
        let minus = Expression::element(c.neg());
        prover.bound(SUBJECT, minus, Relation::Positive, &[])
    });
    negative.map(|proof| proof.step())
}

/// In shares, Kᵢᵢ = (wᵢ − 1/2)² + Tᵢᵢ − 1/4.
fn by_square(
    question: &Question<'_>,
    prover: &mut Prover<'_>,
    i: usize,
    entry: Expression,
) -> Option<Proved<crate::proof::Bounded>> {
    if question.system.coordinates != Coordinates::Shares {
        return None;
    }
    let share = prover.value(&Expression::from(Factor::Function(question.system.collected[i])));
    let root = &share - &Poly::constant(&rational(1, 2));
    let certificate = Combination { facts: Vec::new(), squares: vec![(rational(1, 1), root)] };
    prover.bound_by(SUBJECT, entry, Relation::Positive, certificate, &[])
}

/// Elements of the parameters alone: where they are nonnegative, all coefficients are on the whole domain; and whether
/// the converse is shown as well. `None` if a sign depends on anything else.
fn parameter_conditions(question: &Question<'_>, region: &[Element]) -> Option<(Vec<Element>, bool)> {
    let field = &question.model.field;
    let mut conditions: Vec<Element> = Vec::new();
    let mut complete = true;
    for c in region {
        let doubt = doubt(field, c)?;
        complete &= doubt.complete || doubt.factor.is_one();
        if !doubt.factor.is_one() && !conditions.contains(&doubt.factor) {
            conditions.push(doubt.factor);
        }
    }
    (!conditions.is_empty()).then_some((conditions, complete))
}

/// The parameter factor that the sign of a coefficient hangs on; 1 if it is nonnegative anyway.
struct Doubt {
    factor: Element,
    /// Whether nothing else can make the coefficient vanish for some parameters.
    complete: bool,
}

fn doubt(field: &Field, c: &Element) -> Option<Doubt> {
    if field.sign(c).is_nonnegative() || field.is_zero(c) {
        return Some(Doubt { factor: Poly::one(), complete: true });
    }
    let (numerator, denominator) = field.fraction(c);
    let factored = factor(&numerator);
    let powers = factored.monomial.iter().map(|(v, k)| (Poly::var(v), k));
    let parts = factored.factors.into_iter().map(|(p, k)| (p, k as i32));
    let below = denominator.into_iter().map(|(v, k)| (Poly::var(v), -(k as i32)));
    let mut sign = field.sign(&Poly::constant(&factored.content));
    let mut doubt = Doubt { factor: Poly::one(), complete: true };
    for (part, exponent) in powers.chain(parts).chain(below) {
        let own = field.sign(&part).to_power(exponent);
        let constant = part.vars().into_iter().all(|v| !moves(field, v));
        match own {
            Sign::Positive | Sign::Negative => sign = sign.times(own),
            Sign::NonNegative | Sign::NonPositive => {
                sign = sign.times(own);
                doubt.complete = false;
            }
            _ if constant && exponent % 2 != 0 => doubt.factor = &doubt.factor * &part,
            _ => return None,
        }
    }
    match sign {
        Sign::Positive | Sign::NonNegative => Some(doubt),
        Sign::Negative | Sign::NonPositive => Some(Doubt { factor: doubt.factor.neg(), complete: doubt.complete }),
        _ => None,
    }
}

/// An admissible point at which the conditions hold.
fn with_conditions(question: &Question<'_>, conditions: &[Element]) -> Option<crate::algebra::evaluation::Point> {
    let mut positive = question.quantities.clone();
    positive.extend_from_slice(conditions);
    search::points(question.model, &positive).next()
}
