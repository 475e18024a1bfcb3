//! Curvature: whether the Slutsky matrix is negative semidefinite wherever the quantities demanded are positive.
//!
//! A ladder, one rung a file; the first that decides ends it. Certificates come first ([`certificates`]); then points are
//! searched for one where the matrix is not negative semidefinite ([`search`]), and what fails there is told apart
//! ([`failure`]): for all parameter values, for some, or in a part of the domain. Where symmetry fails the question is
//! about vᵀSv, that is about the symmetric part.

mod approximate;
mod certificates;
mod climb;
mod direction;
mod failure;
mod nests;
mod region;
mod search;
pub mod slice;
mod split;
mod squares;

use std::rc::Rc;

use crate::algebra::budget;
use crate::algebra::field::Relation;
use crate::algebra::generator::Element;
use crate::model::{Coverage, Model};
use crate::proof::{Balanced, Expression, Factor, Matrix, Proved, Prover};

use super::finding::{Condition, Finding, Verdict};
use super::slutsky::{Coordinates, System};
use squares::Symmetric;

/// The work that one rung may take.
const RUNG_WORK: u64 = 300_000_000;
/// The work that the normal form of the entries may take.
const NORMAL_WORK: u64 = 60_000_000;
/// The subject of the steps.
const SUBJECT: &str = "curvature";

/// The question, with what is known of the matrix.
struct Question<'a> {
    model: &'a Model,
    system: &'a System,
    /// pᵢ pⱼ Sᵢⱼ, over m in shares.
    matrix: Rc<Matrix>,
    /// Its entries, reduced where that was not too much work.
    entries: Vec<Element>,
    /// The symmetric part of it, with its values at one point.
    symmetric: Symmetric,
    /// That its rows and columns sum to zero, if they do.
    balance: Option<Proved<Balanced>>,
    /// What must be positive for the quantities demanded to be.
    quantities: Vec<Element>,
    /// The share of each good in what all functions sum to, long ones named.
    shares: Vec<Element>,
}

/// Climbs the ladder.
pub(super) fn examine(model: &Model, system: &System, prover: &mut Prover<'_>, earlier: &[Finding]) -> Finding {
    let domain = positive_quantities(model, system);
    let mut finding = prover.supposing(&domain, |prover| {
        let quantities: Vec<Element> = domain.iter().map(|(e, _)| prover.value(e)).collect();
        if search::points(model, &quantities).next().is_none() {
            return nowhere(model, &quantities);
        }
        let matrix = system.scaled_matrix();
        let shares = budget::attempt(RUNG_WORK, || shares(model, system, prover)).ok().flatten().unwrap_or_default();
        let entries = entries(model, system, prover, &matrix, &shares);
        let balance = budget::attempt(RUNG_WORK, || prover.balanced(SUBJECT, &matrix, &[])).ok().flatten();
        let symmetric = split::symmetric(model, &entries, &quantities);
        let question = Question { symmetric, model, system, matrix, entries, balance, quantities, shares };
        certificates::prove(&question, prover).unwrap_or_else(|| by_points(&question, prover))
    });
    let symmetry = earlier.iter().find(|f| f.condition == Condition::Symmetry);
    if symmetry.is_some_and(|f| f.verdict != Verdict::Proven) {
        finding.method.push_str("; symmetry is not proven, so the question is about the symmetric part, v'Sv");
    }
    finding
}

/// The entries in the shortest of three forms: as they are defined, in their normal form, and in shares with the slopes
/// in their normal form.
fn entries(
    model: &Model,
    system: &System,
    prover: &mut Prover<'_>,
    matrix: &Matrix,
    shares: &[Element],
) -> Vec<Element> {
    let (field, n) = (&model.field, system.size());
    let mut forms = vec![prover.entries(matrix)];
    if system.coordinates == Coordinates::Shares && shares.len() == n {
        let form = budget::attempt(RUNG_WORK, || {
            let entry = |k: usize| {
                let (i, j) = (k / n, k % n);
                let slope = field.reduce(&prover.value(&system.compensated_slope(i, j)));
                let own = if i == j { shares[i].clone() } else { Element::zero() };
                &(&slope + &(&shares[i] * &shares[j])) - &own
            };
            (0..n * n).map(entry).collect::<Vec<_>>()
        });
        forms.extend(form);
    }
    let length = |form: &Vec<Element>| form.iter().map(Element::len).sum::<usize>();
    let shortest = forms.iter().map(length).min().unwrap_or_default();
    let reduced = budget::attempt(NORMAL_WORK, || forms[0].iter().map(|e| field.reduce(e)).collect::<Vec<_>>());
    // a normal form that is not much longer shows more
    forms.extend(reduced.ok().filter(|form| length(form) <= 2 * shortest));
    if forms.last().is_some_and(|form| length(form) > 2 * shortest) {
        forms.sort_by_key(length);
        forms.truncate(1);
    }
    forms.pop().unwrap_or_default()
}

/// Each function over what all of them sum to.
fn shares(model: &Model, system: &System, prover: &mut Prover<'_>) -> Option<Vec<Element>> {
    let field = &model.field;
    let whole = prover.value(&system.whole());
    let each = system.functions.iter().map(|f| {
        let value = prover.value(&Expression::from(Factor::Function(*f)));
        field.quotient(&value, &whole).ok().map(|e| field.named(&field.reduce(&e), None))
    });
    each.collect()
}

/// The part of the domain that curvature is about: every quantity positive, and less than all of income spent on the
/// goods of an incomplete system.
fn positive_quantities(model: &Model, system: &System) -> Vec<(Expression, Relation)> {
    let mut domain: Vec<(Expression, Relation)> =
        system.functions.iter().map(|f| (Expression::from(Factor::Function(*f)), Relation::Positive)).collect();
    if model.coverage != Coverage::Complete {
        let left = system.functions.iter().fold(system.whole(), |sum, f| sum.plus(-1, vec![Factor::Function(*f)]));
        domain.push((left, Relation::Positive));
    }
    domain.extend(system.positive.iter().map(|e| (Expression::element(e.clone()), Relation::Positive)));
    domain
}

fn nowhere(model: &Model, quantities: &[Element]) -> Finding {
    use crate::algebra::sign::Sign;
    let negative = |e: &Element| {
        let sign = budget::attempt(RUNG_WORK, || model.field.sign(e)).unwrap_or(Sign::Unknown);
        matches!(sign, Sign::Negative | Sign::NonPositive | Sign::Zero)
    };
    let reason = match quantities.iter().position(negative).and_then(|i| model.goods.get(i)) {
        Some(good) => {
            format!("the demand for {} is nowhere positive, so that there is no point to ask about", good.name)
        }
        None => "no admissible point was found at which every quantity is positive".to_string(),
    };
    Finding::undecided(Condition::Curvature, &reason)
}

fn by_points(question: &Question<'_>, prover: &mut Prover<'_>) -> Finding {
    let seen = search::look(question, prover);
    let looked = seen.looked;
    match seen.failing {
        Some(failing) => failure::tell_apart(question, prover, failing, seen.regular),
        None => {
            let mut finding = Finding::undecided(
                Condition::Curvature,
                &format!(
                    "no certificate was found (signs of the entries and of the characteristic coefficients), and no \
                     direction v with v'Sv > 0 at {looked} admissible points"
                ),
            );
            finding.regular_point = seen.regular.map(|proof| proof.claim().point.clone());
            finding
        }
    }
}
