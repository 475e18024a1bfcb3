//! The rung that refutes: admissible points with positive quantities, and at each the question whether some direction
//! rises. A direction is guessed from rounded entries and then verified exactly.

use num_bigint::BigInt;
use num_traits::{Signed, ToPrimitive, Zero};

use crate::algebra::budget;
use crate::algebra::evaluation::Point;
use crate::algebra::field::Field;
use crate::algebra::generator::Element;
use crate::algebra::interval::Interval;
use crate::algebra::number::{Rational, rational};
use crate::model::{Model, PointSearch};
use crate::proof::{Proved, Prover, Refuted, Semidefinite, SemidefiniteAt};

use super::super::finding::Witness;
use super::climb::Climb;
use super::direction::{plain, quadratic, rising};
use super::{Question, SUBJECT};

/// The work that all points together may take.
const WORK: u64 = 600_000_000;
/// The work that one point may take.
const POINT_WORK: u64 = 60_000_000;
/// The work that climbing may take, and from how many points it starts.
const CLIMB_WORK: u64 = 60_000_000;
const MOST_STARTS: usize = 4;
/// The precision at which entries are guessed from, in bits.
const BITS: u32 = 96;
/// Entries are rounded to multiples of the largest over 2^40.
const ROUNDING: u32 = 40;
/// A rise counts from the largest entry over 2^30.
const TOLERANCE: i64 = 30;

/// What the search saw.
pub(super) struct Seen {
    /// A point and direction that refute.
    pub failing: Option<Failing>,
    /// A point at which the matrix is negative semidefinite.
    pub regular: Option<Proved<SemidefiniteAt>>,
    /// How many points were looked at.
    pub looked: usize,
}

/// A refutation.
pub(super) struct Failing {
    /// The refutation, of the Slutsky matrix itself.
    pub refuted: Refuted<Semidefinite>,
    /// The same for the reader.
    pub witness: Witness,
}

/// The admissible points at which the elements are positive.
pub(super) fn points<'m>(model: &'m Model, positive: &[Element]) -> PointSearch<'m> {
    model.points().with_positive(positive)
}

/// Looks at points until one fails and one does not, or there have been enough.
pub(super) fn look(question: &Question<'_>, prover: &mut Prover<'_>) -> Seen {
    let mut seen = Seen { failing: None, regular: None, looked: 0 };
    let most = match question.system.size() {
        0..=4 => 240,
        5..=8 => 48,
        _ => 16,
    };
    let first = most / 6;
    let _ = budget::attempt(WORK, || {
        for (count, point) in points(question.model, &question.quantities).take(most).enumerate() {
            if count == first {
                let _ = budget::attempt(CLIMB_WORK, || climb(question, prover, &mut seen));
            }
            seen.looked += 1;
            let _ = budget::attempt(POINT_WORK, || look_at(question, prover, &point, &mut seen));
            if seen.failing.is_some() && seen.regular.is_some() {
                return;
            }
        }
    });
    seen
}

/// Climbs to a point of the kind that has not been seen yet.
fn climb(question: &Question<'_>, prover: &mut Prover<'_>, seen: &mut Seen) {
    let Some(climb) = Climb::new(question) else { return };
    for up in [true, false] {
        for start in points(question.model, &question.quantities).take(MOST_STARTS) {
            let known = if up { seen.failing.is_some() } else { seen.regular.is_some() };
            if known {
                break;
            }
            if let Some(point) = climb.from(&start, up) {
                let _ = budget::attempt(POINT_WORK, || look_at(question, prover, &point, seen));
            }
        }
    }
}

fn look_at(question: &Question<'_>, prover: &mut Prover<'_>, point: &Point, seen: &mut Seen) {
    let Some(a) = rounded(&question.model.field, &question.entries, point) else { return };
    match clearly_rising(question, &a) {
        Some(v) if seen.failing.is_none() => seen.failing = refute(question, prover, point, &a, &v),
        None if seen.regular.is_none() => {
            let (matrix, balance) = (&question.matrix, question.balance.as_ref());
            seen.regular = prover.semidefinite_at(SUBJECT, matrix, balance, point);
        }
        _ => {}
    }
}

/// A direction that rises by more than rounding explains. The last good is left out where the matrix is balanced.
fn clearly_rising(question: &Question<'_>, a: &[Rational]) -> Option<Vec<Rational>> {
    let n = question.system.size();
    let kept = if question.balance.is_some() { n - 1 } else { n };
    let reduced: Vec<Rational> = (0..kept * kept).map(|k| a[k / kept * n + k % kept].clone()).collect();
    let mut v = rising(&reduced, kept)?;
    let length = v.iter().fold(Rational::zero(), |sum, x| sum + x * x);
    let largest = reduced.iter().map(|q| q.abs()).max()?;
    let clear = quadratic(&reduced, &v) > length * largest * power_of_two(-TOLERANCE);
    v.resize(n, Rational::zero());
    clear.then_some(v)
}

/// Tries plain directions near the one that was found, in the coordinates of quantities: with v = p z (in each good),
/// vᵀSv is zᵀKz up to a positive factor.
fn refute(
    question: &Question<'_>,
    prover: &mut Prover<'_>,
    point: &Point,
    a: &[Rational],
    z: &[Rational],
) -> Option<Failing> {
    let prices: Vec<Rational> = question.system.prices.iter().map(|p| point.get(p).cloned()).collect::<Option<_>>()?;
    let v: Vec<Rational> = z.iter().zip(&prices).map(|(z, p)| z * p).collect();
    let slutsky = question.system.slutsky_matrix();
    plain(&v).into_iter().find_map(|v| {
        let back: Vec<Rational> = v.iter().zip(&prices).map(|(v, p)| v / p).collect();
        if !quadratic(a, &back).is_positive() {
            return None;
        }
        let refuted = prover.refute_semidefinite(SUBJECT, &slutsky, &v, point)?;
        let witness = Witness::of(refuted.failure(), Some(v));
        Some(Failing { refuted, witness })
    })
}

/// The symmetric part of the matrix at a point, rounded; entries that are small beside the largest become zero.
fn rounded(field: &Field, entries: &[Element], point: &Point) -> Option<Vec<Rational>> {
    let n = entries.len().isqrt();
    let enclosed: Vec<Interval> = entries.iter().map(|e| field.enclose(e, point, BITS)).collect::<Option<_>>()?;
    let middle: Vec<Rational> = enclosed.iter().map(|i| (i.lo_rational() + i.hi_rational()) / rational(2, 1)).collect();
    let largest = middle.iter().map(|q| q.abs()).max()?;
    if !largest.is_positive() {
        return Some(middle);
    }
    // a power of two near the largest entry, so that exact zeros and exact multiples survive the rounding
    let size = largest.numer().bits() as i64 - largest.denom().bits() as i64;
    let unit = power_of_two(size - i64::from(ROUNDING));
    let mean = |k: usize| (&middle[k] + &middle[k % n * n + k / n]) / rational(2, 1);
    Some((0..n * n).map(|k| (mean(k) / &unit).round() * &unit).collect())
}

fn power_of_two(exponent: i64) -> Rational {
    let power = BigInt::from(1) << exponent.unsigned_abs().to_usize().unwrap_or(0);
    if exponent < 0 { Rational::new(BigInt::from(1), power) } else { Rational::from_integer(power) }
}
