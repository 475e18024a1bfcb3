//! A slice of the domain for a picture: two variables move, the others stay. Values are machine numbers, for the eye; no
//! verdict is read from them. The points that are marked are exact, and were judged elsewhere.

use crate::algebra::budget;
use crate::algebra::evaluation::Point;
use crate::algebra::generator::Element;
use crate::algebra::monomial::Var;
use crate::algebra::number::{Rational, rational};
use crate::model::Model;
use crate::proof::Prover;

use super::super::slutsky::System;
use super::approximate::{Formulas, exp, largest_eigenvalue, ln, simplest};
use super::direction::{plain, rising};

/// The work that a slice may take.
const WORK: u64 = 2_000_000_000;
/// How many nodes are judged exactly for a point to mark.
const MOST_JUDGED: usize = 12;
/// How far the axis of a positive variable reaches up and down, as a factor.
const REACH: f64 = 20.0;

/// One axis of a slice.
pub struct Axis {
    /// The variable.
    pub var: Var,
    /// From and to.
    pub range: (f64, f64),
    /// Whether the scale is logarithmic.
    pub logarithmic: bool,
}

impl Axis {
    /// Around a value: by factors where the variable is positive, else by differences.
    fn around(var: Var, value: f64, positive: bool) -> Axis {
        let range = if positive {
            (value / REACH, value * REACH)
        } else {
            (value - 2.0 * value.abs().max(0.5), value + 2.0 * value.abs().max(0.5))
        };
        Axis { var, range, logarithmic: positive }
    }

    /// The value at a part of the way along the axis.
    pub fn at(&self, part: f64) -> f64 {
        let (from, to) = self.range;
        if self.logarithmic { from * exp(part * ln(to / from)) } else { from + part * (to - from) }
    }

    /// How far along the axis a value stands.
    pub fn part(&self, value: f64) -> f64 {
        let (from, to) = self.range;
        if self.logarithmic { ln(value / from) / ln(to / from) } else { (value - from) / (to - from) }
    }
}

/// What is known at the nodes of a grid over two axes.
pub struct Slice {
    /// The horizontal and the vertical axis.
    pub axes: [Axis; 2],
    /// The values of all variables where the axes do not move them.
    pub fixed: Point,
    /// The number of nodes along an axis.
    pub nodes: usize,
    /// At each node, row by row from below: the least quantity, share or other fact (positive inside of the domain), and
    /// the largest eigenvalue of the scaled Slutsky matrix (positive where it is not negative semidefinite).
    pub values: Vec<(f64, f64)>,
}

/// The slice through a point. `None` where the model has no demands, a variable is not free, or a formula cannot be
/// evaluated in machine numbers.
pub fn slice(model: &Model, axes: [Var; 2], through: &Point, nodes: usize) -> Option<Slice> {
    use num_traits::ToPrimitive;
    let field = &model.field;
    let mut prover = Prover::new(field);
    let system = System::of(model, &mut prover)?;
    system.prepare(&mut prover);
    let domain = super::positive_quantities(model, &system);
    let facts = field.facts();
    let mut all: Vec<Element> = domain.iter().map(|(e, _)| prover.value(e)).collect();
    all.extend(facts.iter().map(|fact| fact.element.clone()));
    let signs = all.len();
    let n = system.size();
    let entries = prover.entries(&system.scaled_matrix());
    // where the matrix is balanced, the last good says nothing new
    let balanced = prover.balanced("curvature", &system.scaled_matrix(), &[]).is_some();
    let kept = if balanced { n - 1 } else { n };
    all.extend((0..kept * kept).map(|k| entries[k / kept * n + k % kept].clone()));
    let formulas = Formulas::new(field, &all)?;
    let positive = |v: Var| field.role(v).is_some_and(|role| role.is_positive());
    let axis = |v: Var| Some(Axis::around(v, through.get(&v)?.to_f64()?, positive(v)));
    let axes = [axis(axes[0])?, axis(axes[1])?];
    let base: Vec<f64> = formulas.symbols.iter().map(|(v, _)| through.get(v)?.to_f64()).collect::<Option<_>>()?;
    let value = |k: usize| {
        let parts = [k % nodes, k / nodes].map(|i| i as f64 / (nodes - 1) as f64);
        let mut at = base.clone();
        for (axis, part) in axes.iter().zip(parts) {
            if let Some(place) = formulas.symbols.iter().position(|(v, _)| *v == axis.var) {
                at[place] = axis.at(part);
            }
        }
        budget::spend(all.len() as u64);
        let values = formulas.values(&at);
        let (facts, entries) = values.split_at(signs);
        let symmetric = |k: usize| (entries[k] + entries[k % kept * kept + k / kept]) / 2.0;
        let least =
            facts.iter().fold(f64::INFINITY, |least, x| if x.is_nan() { f64::NEG_INFINITY } else { least.min(*x) });
        (least, largest_eigenvalue(&(0..kept * kept).map(symmetric).collect::<Vec<_>>(), kept))
    };
    let values = budget::attempt(WORK, || (0..nodes * nodes).map(value).collect()).ok()?;
    Some(Slice { axes, fixed: through.clone(), nodes, values })
}

impl Slice {
    /// A point of each kind that the grid shows, with plain coordinates on the axes, judged exactly.
    pub fn exact_points(&self, model: &Model) -> Vec<(Point, bool)> {
        let kind = |holds: bool| {
            let fits = |(fact, rise): &(f64, f64)| *fact > 0.0 && if holds { *rise < 0.0 } else { *rise > 0.0 };
            let nodes = (0..self.values.len()).filter(|k| fits(&self.values[*k]));
            // from the middle outwards
            let middle = (self.nodes / 2) as i64;
            let apart = |k: &usize| {
                let (column, row) = ((k % self.nodes) as i64 - middle, (k / self.nodes) as i64 - middle);
                column * column + row * row
            };
            let mut order: Vec<usize> = nodes.collect();
            order.sort_by_key(apart);
            order.into_iter().step_by(7).take(MOST_JUDGED).find_map(|k| {
                let mut point = self.fixed.clone();
                for (axis, place) in self.axes.iter().zip([k % self.nodes, k / self.nodes]) {
                    point.insert(axis.var, simplest(axis.at(place as f64 / (self.nodes - 1) as f64), 0.03)?);
                }
                let point = model.completed(point)?;
                (judged(model, &point)? == holds).then_some((point, holds))
            })
        };
        [true, false].into_iter().filter_map(kind).collect()
    }
}

/// Whether the Slutsky matrix is negative semidefinite at a point of the domain, exactly; `None` where neither is shown.
fn judged(model: &Model, point: &Point) -> Option<bool> {
    let mut prover = Prover::new(&model.field);
    let system = System::of(model, &mut prover)?;
    system.prepare(&mut prover);
    let domain = super::positive_quantities(model, &system);
    prover.supposing(&domain, |prover| {
        let matrix = system.scaled_matrix();
        let balance = prover.balanced("curvature", &matrix, &[]);
        if prover.semidefinite_at("curvature", &matrix, balance.as_ref(), point).is_some() {
            return Some(true);
        }
        let n = system.size();
        let value = |e: &Element| Some(model.field.enclose(e, point, 128)?.midpoint().to_rational());
        let slutsky = system.slutsky_matrix();
        let entries: Vec<Rational> = prover.entries(&slutsky).iter().map(value).collect::<Option<_>>()?;
        let mean = |k: usize| (&entries[k] + &entries[k % n * n + k / n]) / rational(2, 1);
        let direction = rising(&(0..n * n).map(mean).collect::<Vec<_>>(), n)?;
        let fails = |v: Vec<Rational>| prover.refute_semidefinite("curvature", &slutsky, &v, point);
        plain(&direction).into_iter().find_map(fails).map(|_| false)
    })
}
