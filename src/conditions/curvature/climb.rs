//! Climbing: from admissible points step by step to where the matrix rises (or falls) in more directions, parameters
//! included; long steps follow the leading terms out to where they rule. What is reached is rounded to a rational point.

use num_traits::ToPrimitive;

use crate::algebra::budget;
use crate::algebra::evaluation::Point;
use crate::algebra::field::Relation;
use crate::algebra::generator::Element;
use crate::algebra::number::Rational;

use super::Question;
use super::approximate::{Formulas, exp, rise, simplest};

/// Steps: factors e^s for what is positive, and parts of the size for what is not.
const STEPS: [f64; 5] = [3.0, 0.8, 0.2, 0.03, 0.002];
/// A rise that counts: rounding explains less.
const CLEAR: f64 = 1e-9;
/// How often all directions are tried from one start.
const MOST_ROUNDS: usize = 24;
/// An edge is near where a fact has fallen to this part of what it was.
const NEAR: f64 = 1e-3;
/// A step to measure slopes by.
const TINY: f64 = 1e-6;
/// How often the distance to a corner is halved.
const CORNER_STEPS: usize = 8;
/// How many edges of the domain are visited.
const MOST_EDGES: usize = 12;

/// Where to climb.
#[derive(Clone, Copy)]
enum Aim {
    /// To where the matrix rises.
    Rise,
    /// To where it does not.
    Fall,
    /// To where the fact with this number ends.
    Edge(usize),
}

/// How a climb begins.
#[derive(Clone, Copy)]
enum Way {
    /// Where it starts.
    Straight,
    /// Where one fact has all: one good takes nearly all of the budget.
    Corner(usize),
    /// Where one fact nearly ends.
    Edge(usize),
}

/// The facts at a point, and their slopes there.
struct Level {
    facts: Vec<f64>,
    slopes: Vec<Vec<f64>>,
}

/// The question in machine numbers.
pub(super) struct Climb<'q> {
    question: &'q Question<'q>,
    formulas: Formulas,
    /// The number of rows that count.
    kept: usize,
    /// For each fact, whether it states a sign.
    strict: Vec<bool>,
    positive: Vec<bool>,
    /// What one evaluation counts for.
    cost: u64,
}

impl<'q> Climb<'q> {
    /// `None` where an entry cannot be written in machine numbers.
    pub fn new(question: &'q Question<'q>) -> Option<Climb<'q>> {
        let field = &question.model.field;
        let n = question.symmetric.n;
        let kept = if question.balance.is_some() { n - 1 } else { n };
        let facts: Vec<Element> = field.facts().iter().map(|fact| fact.element.clone()).collect();
        let terms: usize = all_terms(&facts) + all_terms(&question.symmetric.entries);
        let cost = (terms + kept * kept * kept) as u64;
        let strict = field.facts().iter().map(|fact| fact.relation != Relation::NonZero).collect();
        let entries = (0..kept * kept).map(|k| question.symmetric.at(k / kept, k % kept).clone());
        let all: Vec<Element> = entries.chain(facts.iter().cloned()).collect();
        let formulas = Formulas::new(field, &all)?;
        let is_positive = |v| field.role(v).is_some_and(|role| role.is_positive());
        let positive = formulas.symbols.iter().map(|(v, _)| is_positive(*v)).collect();
        Some(Climb { question, formulas, kept, strict, positive, cost })
    }

    /// How far the matrix rises at the point, and the facts there; nothing where one does not hold.
    fn look(&self, at: &[f64]) -> Option<(f64, Vec<f64>)> {
        budget::spend(self.cost);
        let mut values = self.formulas.values(at);
        let facts = values.split_off(self.kept * self.kept);
        let hold = facts.len() == self.strict.len()
            && facts.iter().zip(&self.strict).all(|(x, s)| *s && *x > 0.0 || *x != 0.0 && !s);
        let height = rise(&values, self.kept);
        (hold && !height.is_nan()).then_some((height, facts))
    }

    /// What is to grow: the rise or its opposite, or the nearness of the edge where a fact ends.
    fn goal(&self, at: &[f64], aim: Aim) -> Option<f64> {
        let (height, facts) = self.look(at)?;
        match aim {
            Aim::Rise => Some(height),
            Aim::Fall => Some(-height),
            Aim::Edge(i) => facts.get(i).map(|x| -x.abs()),
        }
    }

    /// A rational point near which the matrix clearly rises (or, downwards, does not), reached from the start, or by way
    /// of the corners and the edges of the domain.
    pub fn from(&self, start: &Point, up: bool) -> Option<Point> {
        let aim = if up { Aim::Rise } else { Aim::Fall };
        let first: Vec<f64> =
            self.formulas.symbols.iter().map(|(v, _)| start.get(v)?.to_f64()).collect::<Option<_>>()?;
        let facts = || (0..self.strict.len()).filter(|i| self.strict[*i]).rev().take(MOST_EDGES);
        let by_way_of = facts().map(Way::Corner).chain(facts().map(Way::Edge));
        std::iter::once(Way::Straight).chain(by_way_of).find_map(|way| {
            let mut at = first.clone();
            match way {
                Way::Straight => {}
                Way::Corner(i) => self.towards_corner(&mut at, i),
                Way::Edge(i) => {
                    let before = self.goal(&at, Aim::Edge(i))?;
                    self.ascend(&mut at, Aim::Edge(i), before * NEAR, MOST_ROUNDS / 4);
                }
            }
            let reached = self.ascend(&mut at, aim, CLEAR, MOST_ROUNDS)?;
            if reached > CLEAR { self.rounded(start, &at, aim) } else { None }
        })
    }

    /// Half of the way, again and again, to where one fact has all of what the facts have together.
    fn towards_corner(&self, at: &mut Vec<f64>, corner: usize) {
        for _ in 0..CORNER_STEPS {
            let Some((_, here)) = self.look(at) else { return };
            let Some(slopes) = self.slopes(at, &here) else { return };
            let whole: f64 = here.iter().sum();
            let wanted = (0..here.len()).map(|i| if i == corner { whole - here[i] } else { -here[i] });
            let wanted: Vec<f64> = wanted.map(|x| 0.5 * x).collect();
            let Some(step) = least_squares(&slopes, &wanted) else { return };
            let moved = |part: f64| (0..at.len()).map(|k| self.stepped(k, at[k], part * step[k])).collect::<Vec<_>>();
            let Some(next) = [1.0, 0.5, 0.2].into_iter().map(moved).find(|next| self.look(next).is_some()) else {
                return;
            };
            *at = next;
        }
    }

    /// Steps along the coordinates, and along what keeps all facts as they are, until the goal is reached or no step leads
    /// on. Where it ends.
    fn ascend(&self, at: &mut Vec<f64>, aim: Aim, enough: f64, rounds: usize) -> Option<f64> {
        let mut best = self.goal(at, aim)?;
        for _ in 0..rounds {
            let before = best;
            let level = self.level(at);
            for (direction, keeps) in self.directions(at, level.as_ref()) {
                let level = level.as_ref().filter(|_| keeps);
                self.along(at, &mut best, &direction, level, aim);
                if best > enough {
                    return Some(best);
                }
            }
            if best <= before + 1e-9 * before.abs() {
                break;
            }
        }
        Some(best)
    }

    /// Unit vectors, and the same less what they change of the facts.
    fn directions(&self, at: &[f64], level: Option<&Level>) -> Vec<(Vec<f64>, bool)> {
        let n = at.len();
        let unit = |k: usize| -> Vec<f64> { (0..n).map(|i| if i == k { 1.0 } else { 0.0 }).collect() };
        let mut basis: Vec<Vec<f64>> = Vec::new();
        for row in level.iter().flat_map(|level| &level.slopes) {
            basis.extend(beyond(row, &basis, 1e-4));
        }
        let kept = (0..n).filter_map(|k| beyond(&unit(k), &basis, 0.05)).filter(|_| !basis.is_empty());
        let kept: Vec<(Vec<f64>, bool)> = kept.map(|d| (d, true)).collect();
        (0..n).map(|k| (unit(k), false)).chain(kept).collect()
    }

    /// The facts at the point and their slopes.
    fn level(&self, at: &[f64]) -> Option<Level> {
        let (_, facts) = self.look(at)?;
        let slopes = self.slopes(at, &facts)?;
        Some(Level { facts, slopes })
    }

    /// The point moved back to where the facts have the values of the level.
    fn restored(&self, mut at: Vec<f64>, level: &Level) -> Vec<f64> {
        for _ in 0..2 {
            budget::spend(self.cost);
            let mut values = self.formulas.values(&at);
            let facts = values.split_off(self.kept * self.kept);
            let missing: Vec<f64> = level.facts.iter().zip(&facts).map(|(a, b)| a - b).collect();
            let Some(step) = least_squares(&level.slopes, &missing) else { return at };
            if step.iter().any(|x| !x.is_finite()) {
                return at;
            }
            at = (0..at.len()).map(|k| self.stepped(k, at[k], step[k])).collect();
        }
        at
    }

    /// The slopes of the facts along the coordinates.
    fn slopes(&self, at: &[f64], here: &[f64]) -> Option<Vec<Vec<f64>>> {
        let mut rows: Vec<Vec<f64>> = vec![vec![0.0; at.len()]; here.len()];
        for k in 0..at.len() {
            let mut moved = at.to_vec();
            moved[k] = self.stepped(k, at[k], TINY);
            let (_, there) = self.look(&moved)?;
            rows.iter_mut().zip(here.iter().zip(&there)).for_each(|(row, (a, b))| row[k] = (b - a) / TINY);
        }
        Some(rows)
    }

    /// Steps in one direction as long as they lead on.
    fn along(&self, at: &mut Vec<f64>, best: &mut f64, direction: &[f64], level: Option<&Level>, aim: Aim) {
        for step in STEPS {
            for side in [step, -step] {
                let mut length = side;
                for _ in 0..12 {
                    let moved = (0..at.len()).map(|k| self.stepped(k, at[k], length * direction[k])).collect();
                    let moved = match level {
                        Some(level) => self.restored(moved, level),
                        None => moved,
                    };
                    match self.goal(&moved, aim) {
                        Some(height) if height > *best => (*best, *at) = (height, moved),
                        _ => break,
                    }
                    length *= 1.6;
                }
            }
        }
    }

    fn stepped(&self, k: usize, x: f64, length: f64) -> f64 {
        if self.positive[k] { x * exp(length) } else { x + length * x.abs().max(0.25) }
    }

    /// The plainest rational point near by at which it is still so.
    fn rounded(&self, start: &Point, at: &[f64], aim: Aim) -> Option<Point> {
        let near = |slack: f64| -> Option<(Vec<Rational>, f64)> {
            let each = |x: &f64| if *x == 0.0 { Some(Rational::default()) } else { simplest(*x, slack) };
            let rounded: Vec<Rational> = at.iter().map(each).collect::<Option<_>>()?;
            let back: Vec<f64> = rounded.iter().map(ToPrimitive::to_f64).collect::<Option<_>>()?;
            Some((rounded, self.goal(&back, aim)?))
        };
        let slacks = [0.3, 0.1, 0.03, 0.01, 1e-3, 1e-4, 1e-5, 1e-6, 1e-8, 1e-10];
        let found = slacks.iter().find_map(|slack| near(*slack).filter(|(_, height)| *height > CLEAR))?;
        let mut point = start.clone();
        for ((v, _), value) in self.formulas.symbols.iter().zip(found.0) {
            point.insert(*v, value);
        }
        self.question.model.completed(point)
    }
}

/// The vector less its part in the span of an orthonormal basis, of length one; `None` where little of it is left.
fn beyond(v: &[f64], basis: &[Vec<f64>], least: f64) -> Option<Vec<f64>> {
    let size = v.iter().map(|x| x * x).sum::<f64>().sqrt();
    let mut rest = v.to_vec();
    for b in basis {
        let along: f64 = rest.iter().zip(b).map(|(x, y)| x * y).sum();
        rest.iter_mut().zip(b).for_each(|(x, y)| *x -= along * y);
    }
    let left = rest.iter().map(|x| x * x).sum::<f64>().sqrt();
    if !(left > least * size && size > 0.0) {
        return None;
    }
    rest.iter_mut().for_each(|x| *x /= left);
    Some(rest)
}

fn all_terms(elements: &[Element]) -> usize {
    elements.iter().map(Element::len).sum()
}

/// The shortest d with J d as near to r as it comes: Jᵀ (J Jᵀ + ε)⁻¹ r.
fn least_squares(j: &[Vec<f64>], r: &[f64]) -> Option<Vec<f64>> {
    let n = j.len();
    let dot = |a: &[f64], b: &[f64]| -> f64 { a.iter().zip(b).map(|(x, y)| x * y).sum() };
    let size = j.iter().map(|row| dot(row, row)).fold(0.0, f64::max);
    let mut a: Vec<Vec<f64>> = (0..n)
        .map(|i| {
            let ridge = |k: usize| if i == k { 1e-9 * size } else { 0.0 };
            (0..n).map(|k| dot(&j[i], &j[k]) + ridge(k)).chain([r[i]]).collect()
        })
        .collect();
    for p in 0..n {
        let pivot = (p..n).max_by(|x, y| a[*x][p].abs().total_cmp(&a[*y][p].abs()))?;
        a.swap(p, pivot);
        if a[p][p] == 0.0 {
            return None;
        }
        let row = a[p].clone();
        for other in a.iter_mut().skip(p + 1) {
            let factor = other[p] / row[p];
            other.iter_mut().zip(&row).for_each(|(x, y)| *x -= factor * y);
        }
    }
    let mut solution = vec![0.0; n];
    for p in (0..n).rev() {
        let known: f64 = (p + 1..n).map(|k| a[p][k] * solution[k]).sum();
        solution[p] = (a[p][n] - known) / a[p][p];
    }
    let columns = j.first().map_or(0, Vec::len);
    Some((0..columns).map(|k| (0..n).map(|i| j[i][k] * solution[i]).sum()).collect())
}
