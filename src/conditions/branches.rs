//! Parameter restrictions: the coefficient equations, split by factors and solved where they are linear.

use crate::algebra::budget;
use crate::algebra::factor::factor;
use crate::algebra::field::Field;
use crate::algebra::gcd::coprime;
use crate::algebra::generator::{Element, Role};
use crate::algebra::monomial::{Monomial, Var};
use crate::algebra::number::rational;
use crate::algebra::polynomial::Poly;
use crate::model::Model;
use crate::proof::{Residual, Value, exact_value};

use super::coefficients::{self, normalised};
use super::finding::Branch;
use super::special::{contradicts_a_fact, transfer};

/// What was found.
pub(super) struct Solved {
    /// The branches, each proven and with an admissible point.
    pub branches: Vec<Branch>,
    /// Whether they are all.
    pub complete: bool,
}

/// The most branches that are followed.
const MOST_BRANCHES: usize = 48;
/// How many points are looked at for one that satisfies the side conditions.
const MOST_POINTS: usize = 24;

/// Solves for the parameter values at which all differences vanish. `holds` proves the condition anew in the model that
/// a branch leaves.
pub(super) fn solve(model: &Model, residuals: &[Residual], holds: &dyn Fn(&Model) -> bool) -> Solved {
    let coefficients = coefficients::of(&model.field, residuals);
    let mut search = Search { model, leaves: Vec::new(), complete: coefficients.independent, opened: 1 };
    let impossible = |e: &Element| e.is_constant() || model.field.sign(e).excludes_zero();
    if !coefficients.equations.iter().any(impossible) {
        search.descend(Node { equations: coefficients.equations, ..Node::default() });
    }
    let Search { leaves, mut complete, .. } = search;
    let mut branches: Vec<Node> = Vec::new();
    for leaf in leaves {
        let leaf = leaf.without_idle_sides(&model.field);
        match confirm(model, &leaf, holds) {
            Confirmed::Yes => branches.push(leaf),
            Confirmed::Empty => {}
            Confirmed::No => complete = false,
        }
    }
    let branches = without_inner(&model.field, branches).into_iter().map(Node::into_branch).collect();
    Solved { branches, complete }
}

/// Equations still to be solved, and what has been solved on the way.
#[derive(Clone, Default)]
struct Node {
    equations: Vec<Element>,
    solved: Vec<(Var, Element)>,
    sides: Vec<Element>,
}

impl Node {
    /// The node without the side conditions that no solution divides by: the equations hold where they fail, too.
    fn without_idle_sides(mut self, field: &Field) -> Node {
        let mut divisors: Vec<Element> = Vec::new();
        for (_, value) in &self.solved {
            let below = value.vars().into_iter().filter(|v| value.low_degree(*v) < 0);
            divisors.extend(below.map(|v| field.expand(&Poly::var(v))));
        }
        let mut needed: Vec<Element> = Vec::new();
        for side in &self.sides {
            let factored = factor(&field.fraction(side).0);
            let single = factored.monomial.iter().map(|(v, _)| Poly::var(v));
            for part in single.chain(factored.factors.into_iter().map(|(part, _)| part)) {
                if divisors.iter().any(|d| *d == part || !coprime(d, &part)) && !needed.contains(&part) {
                    needed.push(part);
                }
            }
        }
        self.sides = needed;
        self
    }

    fn into_branch(self) -> Branch {
        let equations = self.solved.into_iter().map(|(v, value)| (Poly::var(v), value)).collect();
        Branch { equations, side_conditions: self.sides, inequalities: Vec::new() }
    }
}

struct Search<'m> {
    model: &'m Model,
    leaves: Vec<Node>,
    complete: bool,
    opened: usize,
}

impl Search<'_> {
    /// Follows a node to its leaves.
    fn descend(&mut self, mut node: Node) {
        loop {
            budget::spend(1 + node.equations.iter().map(|e| e.len() as u64).sum::<u64>());
            let Some((at, v)) = self.straight(&node) else { break };
            let equation = node.equations.swap_remove(at);
            let Some(value) = solution(&self.model.field, &equation, v) else { break };
            match self.substituted(node, v, &value) {
                Some(next) => node = next,
                None => return,
            }
        }
        let Some(at) = (0..node.equations.len()).min_by_key(|i| node.equations[*i].len()) else {
            self.leaves.push(node);
            return;
        };
        let equation = node.equations.swap_remove(at);
        for part in self.factors(&equation) {
            self.open(&node, &part);
        }
    }

    /// An equation that is linear in a parameter with a constant coefficient and does not factor, and that parameter.
    fn straight(&self, node: &Node) -> Option<(usize, Var)> {
        let linear = |e: &Element| {
            let parameters = self.parameters(e).into_iter().rev();
            parameters.into_iter().find(|v| linear_coefficient(e, *v).is_some_and(|c| c.is_constant()))
        };
        let mut order: Vec<usize> = (0..node.equations.len()).collect();
        order.sort_by_key(|i| node.equations[*i].len());
        order.into_iter().find_map(|i| linear(&node.equations[i]).map(|v| (i, v)))
    }

    /// The free parameters of an equation that stand by themselves in it, in declared order.
    fn parameters(&self, e: &Element) -> Vec<Var> {
        let field = &self.model.field;
        let vars = e.vars();
        let alone = |v: &Var| {
            field.role(*v) == Some(Role::Parameter)
                && vars.iter().all(|w| w == v || !field.depends_on(&Poly::var(*w), *v))
        };
        vars.iter().copied().filter(alone).collect()
    }

    /// The irreducible factors of an equation that may vanish.
    fn factors(&self, equation: &Element) -> Vec<Element> {
        let factored = factor(equation);
        let single = factored.monomial.iter().filter(|(_, k)| *k > 0).map(|(v, _)| Poly::var(v));
        let parts = single.chain(factored.factors.into_iter().map(|(part, _)| part));
        parts.filter(|part| !self.model.field.sign(part).excludes_zero()).collect()
    }

    /// Follows the node with part = 0 added; every way to solve for one parameter in turn.
    fn open(&mut self, node: &Node, part: &Element) {
        self.opened += 1;
        if self.opened > MOST_BRANCHES {
            self.complete = false;
            return;
        }
        let field = &self.model.field;
        let linear = self.parameters(part).into_iter().rev().filter_map(|v| Some((v, linear_coefficient(part, v)?)));
        let mut linear: Vec<(Var, Element)> = linear.collect();
        linear.sort_by_key(|(_, c)| (!c.is_constant(), !field.sign(c).excludes_zero(), c.len()));
        let Some((v, coefficient)) = linear.into_iter().next() else {
            self.complete = false;
            return;
        };
        let mut main = node.clone();
        if !field.sign(&coefficient).excludes_zero() {
            main.sides.push(coefficient.clone());
            let mut other = node.clone();
            let rest = part - &(&coefficient * &Poly::var(v));
            other.equations.extend([normalised(&coefficient), normalised(&rest)]);
            other.equations.retain(|e| !e.is_zero());
            if !rest.is_constant() || rest.is_zero() {
                self.descend(other);
            }
        }
        if let Some(value) = solution(field, part, v)
            && let Some(next) = self.substituted(main, v, &value)
        {
            self.descend(next);
        }
    }

    /// The node after v := value; `None` where an equation or a side condition cannot hold any more.
    fn substituted(&mut self, node: Node, v: Var, value: &Element) -> Option<Node> {
        let field = &self.model.field;
        let with = [(v, value.clone())];
        let mut next = Node::default();
        for e in &node.equations {
            let Some(numerator) = self.put_in(e, &with) else { return self.give_up() };
            if numerator.is_zero() {
                continue;
            }
            let numerator = normalised(&numerator);
            if numerator.is_constant() || self.model.field.sign(&numerator).excludes_zero() {
                return None;
            }
            if !next.equations.contains(&numerator) {
                next.equations.push(numerator);
            }
        }
        for e in &node.sides {
            let Some(numerator) = self.put_in(e, &with) else { return self.give_up() };
            if numerator.is_zero() {
                return None;
            }
            if !field.sign(&numerator).excludes_zero() {
                next.sides.push(normalised(&numerator));
            }
        }
        for (w, old) in &node.solved {
            let Ok(new) = field.substitute(old, &with) else { return self.give_up() };
            next.solved.push((*w, field.reduce(&new)));
        }
        next.solved.push((v, value.clone()));
        Some(next)
    }

    fn put_in(&self, e: &Element, with: &[(Var, Element)]) -> Option<Element> {
        let field = &self.model.field;
        if with.iter().all(|(v, _)| !field.depends_on(e, *v)) {
            return Some(e.clone());
        }
        Some(field.fraction(&field.substitute(e, with).ok()?).0)
    }

    fn give_up(&mut self) -> Option<Node> {
        self.complete = false;
        None
    }
}

/// The coefficient of v in an equation that is linear in v.
fn linear_coefficient(e: &Element, v: Var) -> Option<Element> {
    if e.degree(v) != 1 || e.low_degree(v) < 0 {
        return None;
    }
    e.coefficients(v).into_iter().find(|(k, _)| *k == 1).map(|(_, c)| c)
}

/// v from e = 0, linear in v.
fn solution(field: &Field, e: &Element, v: Var) -> Option<Element> {
    let coefficient = linear_coefficient(e, v)?;
    let rest = e - &coefficient.mul_term(&rational(1, 1), &Monomial::power(v, 1));
    let quotient = field.quotient(&rest.neg(), &coefficient).ok()?;
    Some(field.reduce(&quotient))
}

enum Confirmed {
    Yes,
    /// No admissible parameter values satisfy the equations.
    Empty,
    /// It could not be shown.
    No,
}

fn confirm(model: &Model, leaf: &Node, holds: &dyn Fn(&Model) -> bool) -> Confirmed {
    if contradicts_a_fact(&model.field, &leaf.solved) {
        return Confirmed::Empty;
    }
    let Ok(special) = model.respecialised(&leaf.solved) else { return Confirmed::No };
    if !holds(&special) {
        return Confirmed::No;
    }
    let kept: Option<Vec<Element>> = leaf.sides.iter().map(|e| transfer(model, &special, e)).collect();
    let Some(sides) = kept else { return Confirmed::No };
    let satisfied = special.points().take(MOST_POINTS).any(|point| {
        let nonzero = |e: &Element| match exact_value(&special.field, e, &point).as_ref().and_then(Value::sign) {
            Some(sign) => sign != std::cmp::Ordering::Equal,
            None => false,
        };
        sides.iter().all(nonzero)
    });
    if satisfied { Confirmed::Yes } else { Confirmed::No }
}

/// The branches that are inside none of the others.
fn without_inner(field: &Field, branches: Vec<Node>) -> Vec<Node> {
    let inside = |inner: &Node, outer: &Node| {
        let side_holds = |e: &Element| inner.sides.contains(e) || field.sign(e).excludes_zero();
        outer.sides.iter().all(side_holds)
            && outer.solved.iter().all(|(v, value)| {
                let difference = &Poly::var(*v) - value;
                field.substitute(&difference, &inner.solved).is_ok_and(|d| field.is_zero(&d))
            })
    };
    let mut kept: Vec<Node> = Vec::new();
    for (at, node) in branches.iter().enumerate() {
        let covered = |other: &Node| inside(node, other);
        let later = branches[at + 1..].iter().any(|other| covered(other) && !inside(other, node));
        if !later && !kept.iter().any(covered) {
            kept.push(node.clone());
        }
    }
    kept
}
