//! Factorisation over the rationals: squarefree parts, then irreducible factors.
//!
//! Every splitting is verified by exact division, so a factorisation is always a true product; when the work for one
//! part runs out, the part stays whole and the result says so.

mod grading;
mod integer;
mod integral;
mod leading;
mod lift;
mod multivariate;
mod quadratic;
mod residual;
mod splitting;
mod squarefree;
mod univariate;

use crate::algebra::budget;
use crate::algebra::gcd::gcd;
use crate::algebra::monomial::{Monomial, Var};
use crate::algebra::number::Rational;
use crate::algebra::polynomial::Poly;

pub use integer::integer_factors;
pub use squarefree::squarefree;

/// Work granted to one squarefree part.
const WORK: u64 = 30_000_000;

/// content · monomial · Π factorᵉ; see [`factor`].
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Factored {
    /// The rational content with the sign; 0 for the polynomial 0.
    pub content: Rational,
    /// The monomial factor.
    pub monomial: Monomial,
    /// Primitive non-constant factors with positive leading coefficient and their exponents: squarefree, pairwise
    /// coprime, ascending.
    pub factors: Vec<(Poly, u32)>,
    /// Whether every factor is known to be irreducible over the rationals.
    pub complete: bool,
}

impl Factored {
    /// The product of everything.
    pub fn expand(&self) -> Poly {
        let powers: Vec<Poly> = self.factors.iter().map(|(f, e)| f.pow(*e)).collect();
        Poly::product(&powers).mul_term(&self.content, &self.monomial)
    }
}

/// The factors of one squarefree polynomial.
#[derive(Default)]
struct Pieces {
    found: Vec<Poly>,
    /// Whether some piece may still be reducible.
    open: bool,
}

impl Pieces {
    fn irreducible(p: Poly) -> Pieces {
        Pieces { found: vec![p], open: false }
    }

    fn unknown(p: Poly) -> Pieces {
        Pieces { found: vec![p], open: true }
    }

    fn of(found: Vec<Poly>) -> Pieces {
        Pieces { found, open: false }
    }

    fn join(mut self, other: Pieces) -> Pieces {
        self.found.extend(other.found);
        self.open |= other.open;
        self
    }
}

/// self = content · monomial · Π factorᵉ over the rationals.
///
/// Complete for polynomials in one variable and for most in several; a part for which the work runs out is returned
/// unsplit with `complete = false`. A polynomial that is linear in some variable with coprime coefficients is
/// recognised at once.
pub fn factor(p: &Poly) -> Factored {
    let split = p.primitive();
    let mut factors = Vec::new();
    let mut complete = true;
    if !split.part.is_constant() {
        if is_evidently_irreducible(&split.part) {
            factors.push((split.part, 1));
        } else {
            for (part, exponent) in squarefree_or_whole(&split.part, &mut complete) {
                let pieces =
                    budget::attempt(WORK, || factor_squarefree(&part)).unwrap_or_else(|_| Pieces::unknown(part));
                complete &= !pieces.open;
                factors.extend(pieces.found.into_iter().map(|piece| (piece, exponent)));
            }
        }
    }
    factors.sort();
    Factored { content: split.content, monomial: split.monomial, factors, complete }
}

/// Whether the polynomial is irreducible over the rationals; false also when that could not be decided.
pub fn is_irreducible(p: &Poly) -> bool {
    let split = factor(p);
    split.complete && split.monomial.is_one() && matches!(&split.factors[..], [(_, 1)])
}

fn squarefree_or_whole(part: &Poly, complete: &mut bool) -> Vec<(Poly, u32)> {
    budget::attempt(WORK, || squarefree(part)).unwrap_or_else(|_| {
        *complete = false;
        vec![(part.clone(), 1)]
    })
}

/// Linear in some variable with coprime coefficients.
fn is_evidently_irreducible(p: &Poly) -> bool {
    linear_variable(p).is_some_and(|v| match &p.coefficients(v)[..] {
        [(_, a), (_, b)] => gcd(a, b).is_one(),
        [(_, a)] => a.len() == 1,
        _ => false,
    })
}

/// A variable of degree 1, preferably one whose coefficient is short.
fn linear_variable(p: &Poly) -> Option<Var> {
    let mut seen: std::collections::BTreeMap<Var, (i32, usize)> = std::collections::BTreeMap::new();
    for (v, e) in p.raw_terms().iter().flat_map(|(m, _)| m.iter()) {
        let entry = seen.entry(v).or_insert((0, 0));
        *entry = (entry.0.max(e), entry.1 + 1);
    }
    seen.into_iter().filter(|(_, (e, _))| *e == 1).min_by_key(|(_, (_, terms))| *terms).map(|(v, _)| v)
}

/// The irreducible factors of a primitive squarefree polynomial.
fn factor_squarefree(p: &Poly) -> Pieces {
    if p.is_constant() {
        return Pieces::default();
    }
    if let [v] = p.vars()[..] {
        return Pieces::of(univariate::factor_univariate(p, v));
    }
    if let Some(v) = linear_variable(p) {
        let content = crate::algebra::gcd::content_in(p, v);
        return match p.div_exact(&content) {
            Some(line) if !content.is_one() => {
                factor_squarefree(&content).join(Pieces::irreducible(line.primitive().part))
            }
            _ => Pieces::irreducible(p.clone()),
        };
    }
    if let Some(pieces) = grading::factor_graded(p) {
        return pieces;
    }
    multivariate::factor_multivariate(p)
}

#[cfg(test)]
mod tests;
