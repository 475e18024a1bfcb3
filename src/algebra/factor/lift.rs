//! Multivariate Hensel lifting modulo a prime, one variable after the other (EEZ: Wang 1978).

use super::residual::{self, Residual};
use crate::algebra::budget;
use crate::algebra::modular::Modulus;
use crate::algebra::modular::dense::Dense;
use crate::algebra::monomial::Var;
use crate::algebra::polynomial::Poly;

/// A factorisation to be lifted: f ≡ Π images at the point, the factors having the given leading coefficients in `x`.
pub(super) struct Lifting<'a> {
    pub(super) m: Modulus,
    pub(super) x: Var,
    /// The other variables with their residues at the point.
    pub(super) point: Vec<(Var, u64)>,
    pub(super) leads: &'a [Poly],
    pub(super) images: Vec<Dense>,
}

/// A solved variable: the products of all factors but one, expanded around its value.
struct Level {
    var: Var,
    at: u64,
    /// Cofactors by factor, then by order.
    cofactors: Vec<Vec<Residual>>,
    /// The degree of the polynomial in the variable.
    bound: usize,
}

/// Σ σⱼ·Πₗ≠ⱼ factorₗ = c, solved variable by variable.
struct Equation<'a> {
    m: &'a Modulus,
    x: Var,
    images: &'a [Dense],
    /// Inverses of the cofactors modulo the images.
    inverses: Vec<Dense>,
    levels: Vec<Level>,
}

impl Lifting<'_> {
    /// The factors modulo the prime; None when the images do not come from factors with these leading coefficients
    /// (or the prime is unlucky).
    pub(super) fn run(&self, f: &Residual) -> Option<Vec<Residual>> {
        let m = &self.m;
        let polys = self.stages(f.clone());
        let leads: Vec<Vec<Vec<Residual>>> =
            self.leads.iter().map(|lead| self.stages(residual::reduce(m, lead))).collect();
        let mut equation = Equation::new(m, self.x, &self.images)?;
        let mut factors: Vec<Residual> = self.images.iter().map(|u| residual::from_dense(self.x, u)).collect();
        for (k, &(var, at)) in self.point.iter().enumerate() {
            let leads: Vec<&[Residual]> = leads.iter().map(|stages| &stages[k][..]).collect();
            let series = Stage { lifting: self, equation: &equation, target: &polys[k], leads }.lift(factors)?;
            factors = series.into_iter().map(|list| residual::collapse(m, list, var, at)).collect();
            if k + 1 < self.point.len() {
                equation.levels.push(Level::new(m, (var, at), &factors, polys[k].len() - 1));
            }
        }
        Some(factors)
    }

    /// For every variable the expansion around its value, with the later variables at theirs.
    fn stages(&self, whole: Residual) -> Vec<Vec<Residual>> {
        let mut now = whole;
        let mut list = Vec::with_capacity(self.point.len());
        for &(var, at) in self.point.iter().rev() {
            let expansion = residual::expand(&self.m, &now, var, at);
            now = expansion[0].clone();
            list.push(expansion);
        }
        list.reverse();
        list
    }
}

impl Level {
    fn new(m: &Modulus, (var, at): (Var, u64), factors: &[Residual], bound: usize) -> Level {
        let cofactor = |j: usize| {
            let mut all: Residual = vec![(Default::default(), m.one())];
            for (_, g) in factors.iter().enumerate().filter(|&(l, _)| l != j) {
                all = residual::product(m, &all, g);
            }
            residual::expand(m, &all, var, at)
        };
        Level { var, at, cofactors: (0..factors.len()).map(cofactor).collect(), bound }
    }
}

impl<'a> Equation<'a> {
    fn new(m: &'a Modulus, x: Var, images: &'a [Dense]) -> Option<Equation<'a>> {
        let mut inverses = Vec::with_capacity(images.len());
        for (j, image) in images.iter().enumerate() {
            let others = images.iter().enumerate().filter(|&(l, _)| l != j);
            let cofactor = others.fold(vec![m.one()], |all, (_, u)| m.product(&all, u));
            inverses.push(m.bezout(&m.remainder(&cofactor, image), image)?.0);
        }
        Some(Equation { m, x, images, inverses, levels: Vec::new() })
    }

    fn solve(&self, c: &Residual) -> Vec<Residual> {
        self.solve_at(self.levels.len(), c)
    }

    fn solve_at(&self, depth: usize, c: &Residual) -> Vec<Residual> {
        let m = self.m;
        if c.is_empty() {
            return vec![Vec::new(); self.images.len()];
        }
        let Some(level) = depth.checked_sub(1).and_then(|k| self.levels.get(k)) else {
            return self.solve_univariate(c);
        };
        let orders = residual::expand(m, c, level.var, level.at);
        let mut series: Vec<Vec<Residual>> = vec![Vec::new(); self.images.len()];
        for order in 0..=level.bound {
            budget::spend(1);
            let known = series.iter().zip(&level.cofactors).flat_map(|(solution, cofactor)| {
                solution.iter().enumerate().filter_map(move |(t, s)| Some((s, cofactor.get(order - t)?)))
            });
            let known = residual::sum_of_products(m, known);
            let empty = Vec::new();
            let gap = residual::difference(m, orders.get(order).unwrap_or(&empty), &known);
            for (list, part) in series.iter_mut().zip(self.solve_at(depth - 1, &gap)) {
                list.push(part);
            }
        }
        series.into_iter().map(|list| residual::collapse(m, list, level.var, level.at)).collect()
    }

    fn solve_univariate(&self, c: &Residual) -> Vec<Residual> {
        let m = self.m;
        let c = residual::to_dense(self.x, c);
        let part = |(inverse, image): (&Dense, &Dense)| {
            let reduced = m.remainder(&c, image);
            residual::from_dense(self.x, &m.remainder(&m.product(&reduced, inverse), image))
        };
        self.inverses.iter().zip(self.images).map(part).collect()
    }
}

/// The lifting of one variable.
struct Stage<'a> {
    lifting: &'a Lifting<'a>,
    equation: &'a Equation<'a>,
    /// The polynomial by orders of the variable.
    target: &'a [Residual],
    /// The leading coefficients by orders.
    leads: Vec<&'a [Residual]>,
}

impl Stage<'_> {
    /// The factors by orders of the variable, given their values at order 0.
    fn lift(&self, factors: Vec<Residual>) -> Option<Vec<Vec<Residual>>> {
        let m = &self.lifting.m;
        let degrees: Vec<i32> = self.lifting.images.iter().map(|u| u.len() as i32 - 1).collect();
        let total: i32 = degrees.iter().sum();
        let mut series: Vec<Vec<Residual>> = factors.into_iter().map(|g| vec![g]).collect();
        // partial[j] is the product of the first j + 1 factors.
        let mut partial: Vec<Vec<Residual>> = Vec::with_capacity(series.len());
        for g in &series {
            let product = partial.last().map_or_else(|| g[0].clone(), |p| residual::product(m, &p[0], &g[0]));
            partial.push(vec![product]);
        }
        for order in 1..self.target.len() {
            for ((list, lead), &d) in series.iter_mut().zip(&self.leads).zip(&degrees) {
                list.push(lead.get(order).map_or_else(Vec::new, |l| residual::shifted_up(l, self.lifting.x, d)));
            }
            extend_products(m, &series, &mut partial, order);
            let gap = residual::difference(m, &self.target[order], &partial[partial.len() - 1][order]);
            if gap.is_empty() {
                continue;
            }
            if gap.iter().any(|(k, _)| k.exponent(self.lifting.x) >= total) {
                return None;
            }
            let corrections = self.equation.solve(&gap);
            for (list, correction) in series.iter_mut().zip(&corrections) {
                list[order] = residual::sum(m, &list[order], correction);
            }
            correct_products(m, &series, &mut partial, &corrections, order);
        }
        let top = |list: &[Residual]| list.iter().rposition(|c| !c.is_empty()).unwrap_or(0);
        (series.iter().map(|list| top(list)).sum::<usize>() == top(self.target)).then_some(series)
    }
}

/// The terms of the given order of all partial products.
fn extend_products(m: &Modulus, series: &[Vec<Residual>], partial: &mut [Vec<Residual>], order: usize) {
    for j in 0..series.len() {
        let next = match j.checked_sub(1) {
            None => series[0][order].clone(),
            Some(before) => {
                let pairs = (0..=order).map(|s| (&partial[before][s], &series[j][order - s]));
                residual::sum_of_products(m, pairs)
            }
        };
        partial[j].push(next);
    }
}

/// The change of the partial products at one order when the factors change there.
fn correct_products(
    m: &Modulus,
    series: &[Vec<Residual>],
    partial: &mut [Vec<Residual>],
    corrections: &[Residual],
    order: usize,
) {
    let mut change: Residual = Vec::new();
    for j in 0..series.len() {
        change = match j.checked_sub(1) {
            None => corrections[0].clone(),
            Some(before) => {
                let pairs = [(&change, &series[j][0]), (&partial[before][0], &corrections[j])];
                residual::sum_of_products(m, pairs.into_iter())
            }
        };
        partial[j][order] = residual::sum(m, &partial[j][order], &change);
    }
}
