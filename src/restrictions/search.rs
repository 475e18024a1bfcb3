//! The search for all parameter values at which differences vanish identically.
//!
//! Two moves, each exhaustive. *Coefficients*: in a difference, choose a term; it vanishes only where its coefficient
//! does or where another term's function coincides with its own, so these alternatives together cover all solutions.
//! *Equations*: a product vanishes where a factor does; a factor that is linear in a parameter is solved for it, and
//! where its coefficient may vanish, that is an alternative of its own. What has neither open equations nor terms left
//! is a leaf, and is tested by building the model anew.

use crate::algebra::budget;
use crate::algebra::field::Field;
use crate::algebra::generator::Element;
use crate::algebra::groebner::basis;
use crate::algebra::monomial::Var;

use super::equations::{Linear, interreduced, is_plain, linear_readings, parts, rewritten};
use super::node::{Changed, Node, numerator};
use super::terms::gaps;

/// The work that one Gröbner basis may take.
const BASIS_WORK: u64 = 200_000_000;
/// The most nodes that are opened.
const MOST_NODES: usize = 20_000;

/// What testing a leaf gave.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Tested {
    /// The conditions hold there, and admissible values are there.
    Holds,
    /// No admissible parameter values are there.
    Empty,
    /// Neither could be shown.
    Open,
}

/// The state of a search.
pub struct Search<'a> {
    field: &'a Field,
    /// Parameters that are not to be restricted.
    kept: &'a [Var],
    test: &'a dyn Fn(&Node) -> Tested,
    /// Parameters that assumptions speak of: solved for last, since a value has to satisfy these.
    assumed: Vec<Var>,
    /// The leaves that passed the test.
    pub found: Vec<Node>,
    /// Whether everything that was left out is known to hold no solutions.
    pub exhaustive: bool,
    /// What was left out, in words; the first reason.
    pub reason: Option<String>,
    opened: usize,
}

impl<'a> Search<'a> {
    /// A search that has not begun.
    pub fn new(field: &'a Field, kept: &'a [Var], test: &'a dyn Fn(&Node) -> Tested) -> Search<'a> {
        let assumed = field.facts().iter().flat_map(|fact| field.symbols_of(&fact.element)).collect();
        Search { field, kept, test, assumed, found: Vec::new(), exhaustive: true, reason: None, opened: 0 }
    }

    /// Says that solutions may be missing.
    pub fn leave_out(&mut self, reason: &str) {
        self.exhaustive = false;
        self.reason.get_or_insert_with(|| reason.to_string());
    }

    /// Follows a node to its leaves.
    pub fn follow(&mut self, node: Node) {
        let mut open = vec![node];
        while let Some(node) = open.pop() {
            self.opened += 1;
            if self.opened > MOST_NODES {
                self.leave_out("too many cases");
                return;
            }
            budget::spend(100 + node.sums.iter().map(|sum| 10 * sum.len() as u64).sum::<u64>());
            if self.found.iter().any(|leaf| node.is_inside(self.field, leaf)) {
                continue;
            }
            let mut next = if node.equations.is_empty() { self.coefficients(node) } else { self.equations(node) };
            next.reverse();
            open.append(&mut next);
        }
    }

    fn leaf(&mut self, node: &Node) {
        let leaf = node.without_idle_sides(self.field);
        match (self.test)(&leaf) {
            Tested::Holds => self.found.push(leaf),
            Tested::Empty => {}
            Tested::Open => self.leave_out("a case could not be confirmed or excluded"),
        }
    }

    /// The alternatives for one term of one difference.
    fn coefficients(&mut self, node: Node) -> Vec<Node> {
        let mut best: Option<Vec<Vec<Element>>> = None;
        let mut certain: Vec<Element> = Vec::new();
        for sum in &node.sums {
            for at in 0..sum.len() {
                let ways = self.ways(&node, sum, at);
                match &ways[..] {
                    [] => return Vec::new(),
                    [only] => certain.extend(only.iter().filter(|e| !certain.contains(e)).cloned().collect::<Vec<_>>()),
                    _ if best.as_ref().is_none_or(|known| ways.len() < known.len()) => best = Some(ways),
                    _ => {}
                }
            }
        }
        if !certain.is_empty() {
            return vec![node.with(certain)];
        }
        match best {
            Some(ways) => ways.into_iter().map(|way| node.with(way)).collect(),
            None => {
                self.leaf(&node);
                Vec::new()
            }
        }
    }

    /// The ways in which the term can vanish or be cancelled: its coefficient, or a coincidence with another term.
    fn ways(&self, node: &Node, sum: &[super::terms::Term], at: usize) -> Vec<Vec<Element>> {
        let term = &sum[at];
        let mut ways = Vec::new();
        let coefficient = numerator(self.field, &term.coefficient);
        if !node.excludes_zero(self.field, &coefficient) {
            ways.push(vec![coefficient]);
        }
        for (other_at, other) in sum.iter().enumerate() {
            if other_at == at || other.factor != term.factor {
                continue;
            }
            let gaps: Vec<Element> =
                gaps(&term.growth, &other.growth).iter().map(|gap| numerator(self.field, gap)).collect();
            let gaps: Vec<Element> = gaps.into_iter().filter(|gap| !gap.is_zero()).collect();
            if !gaps.iter().any(|gap| node.excludes_zero(self.field, gap)) {
                ways.push(gaps);
            }
        }
        ways
    }

    /// One move on the open equations.
    fn equations(&mut self, mut node: Node) -> Vec<Node> {
        node.equations = interreduced(&node.equations);
        if node.equations.iter().any(|e| e.is_constant()) {
            return Vec::new();
        }
        let mut split: Vec<Vec<Element>> = Vec::new();
        for e in &node.equations {
            let mut factors = parts(self.field, e);
            factors.retain(|part| !node.sides.contains(part));
            if factors.is_empty() {
                return Vec::new();
            }
            if !split.contains(&factors) {
                split.push(factors);
            }
        }
        node.equations = split.iter().map(|factors| product(factors)).collect();
        let single: Vec<Element> = split.iter().filter(|f| f.len() == 1).flatten().cloned().collect();
        if let Some(linear) = self.solvable(&node, &single) {
            return self.solved(&node, &linear);
        }
        if let Some(at) = (0..split.len()).filter(|i| split[*i].len() > 1).min_by_key(|i| split[*i].len()) {
            node.equations.remove(at);
            return split[at].iter().map(|part| node.with([part.clone()])).collect();
        }
        self.with_a_divisor(node, &single)
    }

    /// An equation that can be solved for a parameter without a case apart.
    fn solvable(&self, node: &Node, equations: &[Element]) -> Option<Linear> {
        let mut readings: Vec<Linear> =
            equations.iter().flat_map(|e| linear_readings(self.field, e, self.kept)).collect();
        readings.sort_by_key(|linear| {
            (self.assumed.contains(&linear.v), !is_plain(linear), linear.rest.len() + linear.coefficient.len())
        });
        readings.into_iter().find(|linear| is_plain(linear) || node.excludes_zero(self.field, &linear.coefficient))
    }

    fn solved(&mut self, node: &Node, linear: &Linear) -> Vec<Node> {
        let Some(value) = linear.value(self.field) else {
            self.leave_out("an equation could not be solved");
            return Vec::new();
        };
        match node.after(self.field, linear.v, &value) {
            Changed::To(next) => vec![next],
            Changed::Empty => Vec::new(),
            Changed::Undefined => {
                self.leave_out("a value is not defined everywhere");
                Vec::new()
            }
        }
    }

    /// The reading whose divisor serves the most equations, so that few cases stand apart; a short divisor before a long
    /// one.
    fn best_divisor(&self, equations: &[Element]) -> Option<Linear> {
        let readings: Vec<Vec<(Linear, Vec<Element>)>> = equations
            .iter()
            .map(|e| linear_readings(self.field, e, self.kept))
            .map(|all| {
                all.into_iter().map(|linear| (divisor(self.field, &linear), linear)).map(|(d, l)| (l, d)).collect()
            })
            .collect();
        let serves = |divisor: &[Element]| {
            readings.iter().filter(|all| all.iter().any(|(_, other)| other.as_slice() == divisor)).count()
        };
        let cost = |(linear, divisor): &(Linear, Vec<Element>)| {
            let assumed = self.assumed.contains(&linear.v);
            (linear.coefficient.len(), assumed, std::cmp::Reverse(serves(divisor)), divisor.len(), linear.rest.len())
        };
        readings.iter().flatten().min_by_key(|each| cost(each)).map(|(linear, _)| linear.clone())
    }

    /// Solves an equation whose coefficient may vanish, with the case that it does; or rewrites one.
    fn with_a_divisor(&mut self, node: Node, equations: &[Element]) -> Vec<Node> {
        let best = self.best_divisor(equations);
        if let Some(linear) = best {
            let mut main = node.clone();
            let divisor = parts(self.field, &linear.coefficient);
            main.sides.extend(divisor.into_iter().filter(|part| !node.sides.contains(part)));
            let mut next = self.solved(&main, &linear);
            let apart = [numerator(self.field, &linear.coefficient), numerator(self.field, &linear.rest)];
            let possible = apart.iter().all(|e| e.is_zero() || !e.is_constant());
            next.extend(possible.then(|| node.with(apart)));
            return next;
        }
        for e in equations {
            if e.vars().iter().all(|v| self.kept.contains(v)) {
                return Vec::new();
            }
            if let Some(ways) = rewritten(self.field, e, self.kept) {
                let mut rest = node.clone();
                rest.equations.retain(|other| other != e);
                return ways.into_iter().map(|way| rest.with(way)).collect();
            }
        }
        self.by_a_basis(node)
    }

    /// Equations that are linear in no parameter: a Gröbner basis in their place, whose last elements hold fewest
    /// parameters, so that they may factor or be solved.
    fn by_a_basis(&mut self, node: Node) -> Vec<Node> {
        let polynomial = node.equations.iter().all(|e| e.vars().into_iter().all(|v| e.low_degree(v) >= 0));
        if polynomial && !node.is_basis {
            let found = budget::attempt(BASIS_WORK, || basis(&node.equations));
            match found.as_deref() {
                Ok([only]) if only.is_constant() => return Vec::new(),
                Ok(found) if found.iter().any(|e| !node.equations.contains(e)) => {
                    let mut next = Node { equations: Vec::new(), ..node }.with(found.to_vec());
                    next.is_basis = true;
                    return vec![next];
                }
                _ => {}
            }
        }
        self.leave_out("an equation between the parameters could not be solved for one of them");
        Vec::new()
    }
}

/// What may vanish in a coefficient.
fn divisor(field: &Field, linear: &Linear) -> Vec<Element> {
    let mut divisor = parts(field, &numerator(field, &linear.coefficient));
    divisor.sort();
    divisor
}

fn product(factors: &[Element]) -> Element {
    factors.iter().fold(Element::one(), |product, factor| &product * factor)
}
