//! Nests of goods: where the slopes between two groups are those of the groups' totals, shared out in fixed proportions,
//! the matrix is a matrix between groups and a matrix within each.

use num_traits::Zero;

use crate::algebra::field::Field;
use crate::algebra::generator::Element;
use crate::algebra::number::Rational;
use crate::algebra::polynomial::Poly;

use super::squares::{Squares, Symmetric, alike, gaps, squares as any_squares};

/// M = Σ_{g≠h} N_gh ρ_g ρ_hᵀ + …: the squares between the groups and those within each.
pub(super) fn squares(field: &Field, m: &Symmetric, shares: &[Element]) -> Option<Squares> {
    if m.n < 3 || m.values.is_empty() || m.weights.len() != m.n || shares.len() != m.n {
        return None;
    }
    partitions(m).into_iter().find_map(|groups| by_groups(field, m, &groups))
}

/// The same as blocks, whatever the signs of their weights: the squares between the groups, and those within each. A
/// vector that is constant within the groups, or vanishes outside of one and has no total there, is seen by one block
/// alone; so the matrix is negative semidefinite exactly where minus each block is.
pub(super) fn blocks(field: &Field, m: &Symmetric) -> Option<Vec<Squares>> {
    if m.n < 3 || m.values.is_empty() || m.weights.len() != m.n {
        return None;
    }
    partitions(m).into_iter().find_map(|groups| {
        let proportions = proportions(field, m, &groups)?;
        if !are_nests(field, m, &groups, &proportions) {
            return None;
        }
        let mut blocks = vec![between(field, m, &groups, &proportions)];
        for (group, proportion) in groups.iter().zip(&proportions).filter(|(group, _)| group.len() > 1) {
            blocks.push(gaps(&own(field, m, group, proportion)));
        }
        Some(blocks)
    })
}

/// Partitions into at least two groups, not all of one good, between which one elasticity rules at the point.
fn partitions(m: &Symmetric) -> Vec<Vec<Vec<usize>>> {
    let n = m.n;
    let elasticity = elasticities(m);
    let mut found: Vec<Vec<Vec<usize>>> = Vec::new();
    for (i, j) in (0..n).flat_map(|i| (0..i).map(move |j| (i, j))) {
        let common = &elasticity[i * n + j];
        let linked = |a: usize, b: usize| a != b && !alike(&elasticity[a * n + b], common);
        let groups = components(n, &linked);
        if groups.len() >= 2 && groups.len() < n && !found.contains(&groups) {
            found.push(groups);
        }
    }
    found
}

/// Mᵢⱼ/(wᵢ wⱼ) at the point.
fn elasticities(m: &Symmetric) -> Vec<Rational> {
    let n = m.n;
    let ratio = |i: usize, j: usize| {
        let product = &m.weights[i] * &m.weights[j];
        if product.is_zero() { Rational::zero() } else { m.value(i, j) / product }
    };
    (0..n * n).map(|k| ratio(k / n, k % n)).collect()
}

fn components(n: usize, linked: &dyn Fn(usize, usize) -> bool) -> Vec<Vec<usize>> {
    let mut group: Vec<usize> = (0..n).collect();
    for i in 0..n {
        for j in 0..i {
            if linked(i, j) && group[i] != group[j] {
                let (from, to) = (group[i].max(group[j]), group[i].min(group[j]));
                group.iter_mut().filter(|g| **g == from).for_each(|g| *g = to);
            }
        }
    }
    let mut heads = group.clone();
    heads.sort_unstable();
    heads.dedup();
    heads.into_iter().map(|head| (0..n).filter(|i| group[*i] == head).collect()).collect()
}

/// In which proportions the goods of each group share its slopes towards the other groups.
fn proportions(field: &Field, m: &Symmetric, groups: &[Vec<usize>]) -> Option<Vec<Vec<Element>>> {
    let of = |group: &Vec<usize>| {
        let outside = groups.iter().find(|other| *other != group)?;
        let whole = m.block_sum(field, group, outside);
        let part =
            |i: &usize| field.quotient(&m.block_sum(field, &[*i], outside), &whole).ok().map(|e| field.reduce(&e));
        group.iter().map(part).collect()
    };
    groups.iter().map(of).collect()
}

/// Whether the slopes between two groups are those of the totals, shared out in the proportions.
fn are_nests(field: &Field, m: &Symmetric, groups: &[Vec<usize>], proportions: &[Vec<Element>]) -> bool {
    let agree = |g: usize, h: usize| {
        let whole = m.block_sum(field, &groups[g], &groups[h]);
        groups[g].iter().zip(&proportions[g]).all(|(i, r)| {
            groups[h].iter().zip(&proportions[h]).all(|(j, s)| {
                let shared = field.product(&field.product(r, s), &whole);
                field.is_zero(&(&field.current(m.at(*i, *j)) - &field.current(&shared)))
            })
        })
    };
    (0..groups.len()).all(|g| (0..g).all(|h| agree(g, h)))
}

fn by_groups(field: &Field, m: &Symmetric, groups: &[Vec<usize>]) -> Option<Squares> {
    let proportions = proportions(field, m, groups)?;
    let mut all = between(field, m, groups, &proportions);
    if !all.iter().all(|(weight, _)| field.sign(weight).is_nonnegative()) {
        return None;
    }
    for (group, proportion) in groups.iter().zip(&proportions).filter(|(group, _)| group.len() > 1) {
        for (weight, u) in any_squares(field, &own(field, m, group, proportion), proportion)? {
            let mut full = vec![Poly::zero(); m.n];
            group.iter().zip(u).for_each(|(i, x)| full[*i] = x);
            all.push((weight, full));
        }
    }
    Some(all)
}

/// The matrix within a group.
fn own(field: &Field, m: &Symmetric, group: &[usize], proportion: &[Element]) -> Symmetric {
    let rest: Vec<usize> = (0..m.n).filter(|i| !group.contains(i)).collect();
    // N_gg = −Σ_{h≠g} N_gh
    within(field, m, group, proportion, &m.block_sum(field, group, &rest).neg())
}

/// N_gh (ρ_gᵀv − ρ_hᵀv)² over the pairs of groups.
fn between(field: &Field, m: &Symmetric, groups: &[Vec<usize>], proportions: &[Vec<Element>]) -> Squares {
    let mut squares = Squares::new();
    for g in 0..groups.len() {
        for h in 0..g {
            let weight = m.block_sum(field, &groups[g], &groups[h]);
            let mut u = vec![Poly::zero(); m.n];
            groups[g].iter().zip(&proportions[g]).for_each(|(i, r)| u[*i] = r.clone());
            groups[h].iter().zip(&proportions[h]).for_each(|(i, r)| u[*i] = r.neg());
            squares.push((weight, u));
        }
    }
    squares
}

/// What the matrix within a group is beyond the share of the group in the matrix between groups.
fn within(field: &Field, m: &Symmetric, group: &[usize], proportion: &[Element], own: &Element) -> Symmetric {
    let n = group.len();
    let outside = |i: usize| (0..m.n).filter(|j| !group.contains(j)).fold(Rational::zero(), |s, j| s + m.value(i, j));
    let sums: Vec<Rational> = group.iter().map(|i| outside(*i)).collect();
    let whole = sums.iter().fold(Rational::zero(), |s, x| s + x);
    let (mut entries, mut values) = (Vec::with_capacity(n * n), Vec::with_capacity(n * n));
    for (a, i) in group.iter().enumerate() {
        for (b, j) in group.iter().enumerate() {
            let shared = field.product(&field.product(&proportion[a], &proportion[b]), own);
            entries.push(field.reduce(&(&field.current(m.at(*i, *j)) - &field.current(&shared))));
            let taken = if whole.is_zero() { Rational::zero() } else { &sums[a] * &sums[b] / &whole };
            values.push(m.value(*i, *j) + taken);
        }
    }
    let weights = group.iter().map(|i| m.weights[*i].clone()).collect();
    Symmetric { n, entries, values, weights }
}
