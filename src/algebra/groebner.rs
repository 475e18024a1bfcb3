//! Gröbner bases of polynomials with rational coefficients, in the lexicographic order of the monomials.
//!
//! Buchberger's algorithm with his two criteria (1979), pairs of the lowest degree first. Exponents must not be negative.

use std::collections::BTreeSet;

use super::budget;
use super::monomial::Monomial;
use super::polynomial::Poly;

/// The reduced basis of the ideal: primitive, the greatest leading monomial first. A basis of one constant says that the
/// polynomials have no common zero. Cost: doubly exponential in the worst case; the work is counted.
pub fn basis(generators: &[Poly]) -> Vec<Poly> {
    let mut elements: Vec<Poly> = Vec::new();
    let mut pairs = Pairs::default();
    for generator in generators {
        let rest = remainder(generator, &elements);
        insert(&mut elements, &mut pairs, rest);
    }
    while let Some((i, j)) = pairs.next(&elements) {
        if pairs.is_superfluous(&elements, i, j) {
            continue;
        }
        let rest = remainder(&s_polynomial(&elements[i], &elements[j]), &elements);
        if rest.is_constant() && !rest.is_zero() {
            return vec![Poly::one()];
        }
        insert(&mut elements, &mut pairs, rest);
    }
    interreduced(elements)
}

/// What is left of a polynomial when its terms are reduced by the leading terms of others.
pub fn remainder(p: &Poly, by: &[Poly]) -> Poly {
    let mut open = p.clone();
    let mut done = Vec::new();
    while let Some((monomial, coefficient)) = open.leading().map(|(m, c)| (m.clone(), c)) {
        budget::spend(10 + 10 * by.len() as u64);
        let divisor = by.iter().find_map(|d| {
            let (leading, scale) = d.leading()?;
            monomial.is_divisible_by(leading).then(|| (d, monomial.div(leading), scale))
        });
        let taken = match divisor {
            Some((d, factor, scale)) => {
                budget::spend(5 * d.len() as u64);
                d.mul_term(&(&coefficient / scale), &factor)
            }
            None => {
                let term = Poly::term(&coefficient, monomial);
                done.push(term.clone());
                term
            }
        };
        open = &open - &taken;
    }
    Poly::sum(done)
}

fn leading(p: &Poly) -> Monomial {
    p.leading().map_or_else(Monomial::one, |(m, _)| m.clone())
}

fn s_polynomial(a: &Poly, b: &Poly) -> Poly {
    let (Some((m, c)), Some((n, d))) = (a.leading(), b.leading()) else { return Poly::zero() };
    let common = m.join(n);
    &a.mul_term(&c.recip(), &common.div(m)) - &b.mul_term(&d.recip(), &common.div(n))
}

fn insert(elements: &mut Vec<Poly>, pairs: &mut Pairs, p: Poly) {
    if p.is_zero() {
        return;
    }
    let new = elements.len();
    elements.push(p.scale(&p.primitive().content.recip()));
    pairs.open.extend((0..new).map(|old| (old, new)));
}

/// The pairs that are still to be looked at.
#[derive(Default)]
struct Pairs {
    open: BTreeSet<(usize, usize)>,
}

impl Pairs {
    fn next(&mut self, elements: &[Poly]) -> Option<(usize, usize)> {
        let degree = |(i, j): &(usize, usize)| leading(&elements[*i]).join(&leading(&elements[*j])).total_degree();
        let best = self.open.iter().min_by_key(|pair| degree(pair)).copied()?;
        self.open.remove(&best);
        Some(best)
    }

    /// Coprime leading monomials, or a third element between them whose pairs with both are done.
    fn is_superfluous(&self, elements: &[Poly], i: usize, j: usize) -> bool {
        let (a, b) = (leading(&elements[i]), leading(&elements[j]));
        if a.meet(&b).is_one() {
            return true;
        }
        let common = a.join(&b);
        let is_done = |k: usize, l: usize| !self.open.contains(&(k.min(l), k.max(l)));
        (0..elements.len()).any(|k| {
            k != i && k != j && common.is_divisible_by(&leading(&elements[k])) && is_done(i, k) && is_done(j, k)
        })
    }
}

fn interreduced(mut elements: Vec<Poly>) -> Vec<Poly> {
    elements.sort_by_key(|p| std::cmp::Reverse(leading(p)));
    elements.reverse();
    let mut needed: Vec<Poly> = Vec::new();
    for p in elements {
        if needed.iter().all(|other| !leading(&p).is_divisible_by(&leading(other))) {
            needed.push(p);
        }
    }
    let reduced = (0..needed.len()).map(|at| {
        let others: Vec<Poly> = needed.iter().enumerate().filter(|(k, _)| *k != at).map(|(_, p)| p.clone()).collect();
        let rest = remainder(&needed[at], &others);
        rest.scale(&rest.primitive().content.recip())
    });
    let mut reduced: Vec<Poly> = reduced.collect();
    reduced.reverse();
    reduced
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::algebra::monomial::Var;

    fn v(i: u32) -> Poly {
        Poly::var(Var::new(i))
    }

    fn n(i: i64) -> Poly {
        Poly::constant(&crate::algebra::number::rational(i, 1))
    }

    /// x² + y² = 5 and xy = 2: the last element holds one variable only, and vanishes at the four solutions.
    #[test]
    fn the_last_variable_is_left_alone() {
        let (x, y) = (v(1), v(2));
        let circle = &(&(&x * &x) + &(&y * &y)) - &n(5);
        let hyperbola = &(&x * &y) - &n(2);
        let basis = basis(&[circle.clone(), hyperbola.clone()]);
        let last = basis.iter().min_by_key(|p| p.vars().len()).unwrap();
        assert_eq!(last.vars().len(), 1);
        let only = last.vars()[0];
        for root in [-2, -1, 1, 2] {
            assert!(last.substitute(only, &n(root)).is_zero(), "{root}");
        }
        assert!(remainder(&circle, &basis).is_zero() && remainder(&hyperbola, &basis).is_zero());
        assert!(!remainder(&x, &basis).is_zero());
    }

    #[test]
    fn contradictions_give_one() {
        let (x, y) = (v(1), v(2));
        assert_eq!(basis(&[&x * &y, &x - &n(1), &y - &n(1)]), [Poly::one()]);
    }

    /// The twisted cubic, from its defining equations.
    #[test]
    fn syzygies_are_reduced() {
        let (x, y, z) = (v(1), v(2), v(3));
        let found = basis(&[&y - &(&x * &x), &z - &(&x * &y)]);
        assert!(remainder(&(&(&y * &y) - &(&x * &z)), &found).is_zero());
        assert!(remainder(&(&(&(&y * &y) * &y) - &(&z * &z)), &found).is_zero());
        assert!(!remainder(&(&y - &z), &found).is_zero());
    }
}
