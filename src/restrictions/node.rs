//! A set of parameter values on the way to a branch: what has been solved, what must not vanish, what is still open.

use crate::algebra::field::Field;
use crate::algebra::gcd::coprime;
use crate::algebra::generator::Element;
use crate::algebra::monomial::Var;
use crate::algebra::polynomial::Poly;
use crate::conditions::coefficients::normalised;

use super::equations::parts;
use super::terms::{Term, Undefined, merged, put_in};

/// The parameter values that satisfy everything solved so far and all open equations, and let no side condition vanish.
#[derive(Clone, Debug, Default)]
pub struct Node {
    /// The differences that must vanish identically.
    pub sums: Vec<Vec<Term>>,
    /// Elements of the parameters that must vanish, normalised.
    pub equations: Vec<Element>,
    /// Parameters with their values; no value holds a solved parameter.
    pub solved: Vec<(Var, Element)>,
    /// Irreducible elements that must not vanish.
    pub sides: Vec<Element>,
    /// Whether the open equations are a Gröbner basis already.
    pub is_basis: bool,
}

/// What came of a change to a node.
pub enum Changed {
    /// A smaller set.
    To(Node),
    /// No parameter values are left.
    Empty,
    /// A value is not defined on the whole set.
    Undefined,
}

impl Node {
    /// The node with an equation added.
    pub fn with(&self, equations: impl IntoIterator<Item = Element>) -> Node {
        let mut node = self.clone();
        for e in equations {
            if !e.is_zero() && !node.equations.contains(&e) {
                node.is_basis = false;
                node.equations.push(e);
            }
        }
        node
    }

    /// The node after v := value in everything.
    pub fn after(&self, field: &Field, v: Var, value: &Element) -> Changed {
        match self.put_in(field, v, value) {
            Ok(Some(node)) => Changed::To(node),
            Ok(None) => Changed::Empty,
            Err(Undefined) => Changed::Undefined,
        }
    }

    fn put_in(&self, field: &Field, v: Var, value: &Element) -> Result<Option<Node>, Undefined> {
        let with = [(v, value.clone())];
        let mut next = Node::default();
        for e in &self.equations {
            let e = numerator(field, &put_in(field, e, &with)?);
            if e.is_zero() || next.equations.contains(&e) {
                continue;
            }
            if e.is_constant() {
                return Ok(None);
            }
            next.equations.push(e);
        }
        for side in &self.sides {
            if !field.depends_on(side, v) {
                next.sides.push(side.clone());
                continue;
            }
            let side = put_in(field, side, &with)?;
            if side.is_zero() {
                return Ok(None);
            }
            let split = parts(field, &numerator(field, &side));
            next.sides.extend(split.into_iter().filter(|part| !next.sides.contains(part)).collect::<Vec<_>>());
        }
        for (w, old) in &self.solved {
            next.solved.push((*w, put_in(field, old, &with)?));
        }
        next.solved.push((v, value.clone()));
        for sum in &self.sums {
            let terms: Result<Vec<Option<Term>>, Undefined> =
                sum.iter().map(|term| term.substituted(field, &with)).collect();
            let terms = merged(field, terms?.into_iter().flatten().collect());
            if !terms.is_empty() {
                next.sums.push(terms);
            }
        }
        Ok(Some(next))
    }

    /// Whether an element is known not to vanish here: by its sign, or because a side condition says so.
    pub fn excludes_zero(&self, field: &Field, e: &Element) -> bool {
        if e.is_zero() {
            return false;
        }
        e.is_constant()
            || field.sign(e).excludes_zero()
            || parts(field, &numerator(field, e)).iter().all(|part| self.sides.contains(part))
    }

    /// Whether every point of this set belongs to the other one, which has no open equations.
    pub fn is_inside(&self, field: &Field, other: &Node) -> bool {
        let vanishes = |(v, value): &(Var, Element)| {
            let gap = &Poly::var(*v) - value;
            put_in(field, &gap, &self.solved).is_ok_and(|gap| {
                let gap = numerator(field, &gap);
                gap.is_zero() || self.equations.contains(&gap)
            })
        };
        let holds =
            |side: &Element| put_in(field, side, &self.solved).is_ok_and(|side| self.excludes_zero(field, &side));
        // the side conditions first: the values of the other set are defined only where they hold
        other.sides.iter().all(holds) && other.solved.iter().all(vanishes)
    }

    /// The node without the side conditions that no value divides by: what was solved holds where they fail, too.
    pub fn without_idle_sides(&self, field: &Field) -> Node {
        let mut divisors: Vec<Element> = Vec::new();
        for (_, value) in &self.solved {
            let below = value.vars().into_iter().filter(|v| value.low_degree(*v) < 0);
            divisors.extend(below.map(|v| field.expand(&Poly::var(v))));
        }
        let needed = |side: &&Element| divisors.iter().any(|d| d == *side || !coprime(d, side));
        Node { sides: self.sides.iter().filter(needed).cloned().collect(), ..self.clone() }
    }
}

/// The numerator of an element of the parameters, normalised: it vanishes exactly where the element does.
pub fn numerator(field: &Field, e: &Element) -> Element {
    let (numerator, _) = field.fraction(e);
    if numerator.is_zero() { numerator } else { normalised(&numerator) }
}
