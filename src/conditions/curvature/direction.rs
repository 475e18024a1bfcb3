//! A direction in which a symmetric matrix of rational numbers is not negative semidefinite.

use num_bigint::BigInt;
use num_traits::{Signed, Zero};

use crate::algebra::number::{Rational, rational};

/// Elimination finds v with vᵀAv > 0, or `None` if A is negative semidefinite; A is given row by row.
pub(super) fn rising(a: &[Rational], n: usize) -> Option<Vec<Rational>> {
    // A is turned to Wᵀ A W by congruence; the columns of W are kept
    let mut form: Vec<Vec<Rational>> = (0..n).map(|i| a[i * n..(i + 1) * n].to_vec()).collect();
    let mut basis: Vec<Vec<Rational>> = (0..n).map(|i| unit(n, i)).collect();
    for k in 0..n {
        if let Some(i) = (k..n).find(|i| form[*i][*i].is_positive()) {
            return Some(basis[i].clone());
        }
        let Some(pivot) = (k..n).find(|i| form[*i][*i].is_negative()) else {
            return isotropic(&form, &basis, k, n);
        };
        form.swap(k, pivot);
        form.iter_mut().for_each(|row| row.swap(k, pivot));
        basis.swap(k, pivot);
        eliminate(&mut form, &mut basis, k, n);
    }
    None
}

fn unit(n: usize, at: usize) -> Vec<Rational> {
    (0..n).map(|i| rational(i64::from(i == at), 1)).collect()
}

fn eliminate(form: &mut [Vec<Rational>], basis: &mut [Vec<Rational>], k: usize, n: usize) {
    for i in k + 1..n {
        let factor = &form[i][k] / &form[k][k];
        if factor.is_zero() {
            continue;
        }
        for j in 0..n {
            let (by_form, by_basis) = (&factor * &form[k][j], &factor * &basis[k][j]);
            form[i][j] = &form[i][j] - by_form;
            basis[i][j] = &basis[i][j] - by_basis;
        }
        for row in form.iter_mut() {
            let by = &factor * &row[k];
            row[i] = &row[i] - by;
        }
    }
}

/// With zeros on the rest of the diagonal, any entry beside it gives a direction.
fn isotropic(form: &[Vec<Rational>], basis: &[Vec<Rational>], k: usize, n: usize) -> Option<Vec<Rational>> {
    for i in k..n {
        for j in i + 1..n {
            if !form[i][j].is_zero() {
                let sign = form[i][j].signum();
                return Some(basis[i].iter().zip(&basis[j]).map(|(x, y)| x + &sign * y).collect());
            }
        }
    }
    None
}

/// vᵀAv.
pub(super) fn quadratic(a: &[Rational], v: &[Rational]) -> Rational {
    let n = v.len();
    (0..n * n).fold(Rational::zero(), |sum, k| sum + &a[k] * &v[k / n] * &v[k % n])
}

/// Directions near v with small entries, the plainest first; unit vectors before all. v itself comes last.
pub(super) fn plain(v: &[Rational]) -> Vec<Vec<Rational>> {
    let n = v.len();
    let largest = v.iter().map(Rational::abs).max().unwrap_or_default();
    let mut all: Vec<Vec<Rational>> = (0..n).map(|i| unit(n, i)).collect();
    if largest.is_zero() {
        return all;
    }
    for steps in [1i64, 2, 3, 5, 8, 12, 20, 50, 200, 1000, 10_000] {
        let round = |x: &Rational| {
            let scaled = x / &largest * rational(steps, 1);
            Rational::new((scaled * rational(2, 1) + rational(1, 1)).floor().to_integer(), BigInt::from(2)).floor()
        };
        all.push(v.iter().map(round).collect());
    }
    all.push(v.to_vec());
    all
}

#[cfg(test)]
mod tests {
    use super::*;

    fn matrix(entries: &[i64]) -> Vec<Rational> {
        entries.iter().map(|e| rational(*e, 1)).collect()
    }

    #[test]
    fn a_direction_is_found_exactly_where_there_is_one() {
        let indefinite = [
            matrix(&[-1, 2, 2, -1]),
            matrix(&[0, 1, 1, 0]),
            matrix(&[-1, 0, 0, 0, 0, 1, 0, 1, 0]),
            matrix(&[-2, 1, 1, 1, -2, 1, 1, 1, 5]),
        ];
        for a in &indefinite {
            let n = if a.len() == 4 { 2 } else { 3 };
            let v = rising(a, n).expect("the matrix is not negative semidefinite");
            assert!(quadratic(a, &v).is_positive());
        }
        let semidefinite = [matrix(&[-1, 1, 1, -1]), matrix(&[0, 0, 0, 0]), matrix(&[-2, 1, 1, 1, -2, 1, 1, 1, -2])];
        for a in &semidefinite {
            let n = if a.len() == 4 { 2 } else { 3 };
            assert_eq!(rising(a, n), None);
        }
    }

    #[test]
    fn plain_directions_end_with_the_one_given() {
        let v = vec![rational(1, 3), rational(-2, 7)];
        let all = plain(&v);
        assert_eq!(all.last(), Some(&v));
        assert!(all.contains(&vec![rational(1, 1), rational(-1, 1)]));
    }
}
