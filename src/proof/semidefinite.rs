//! The rules of negative semidefiniteness.

use std::rc::Rc;

use crate::algebra::field::{Field, Relation};
use crate::algebra::generator::Element;
use crate::algebra::number::rational;
use crate::algebra::polynomial::Poly;

use super::claim::{Balanced, Expression, Factor, Matrix, Semidefinite};
use super::derivation::{Proved, Rule, Statement, StepId};
use super::prover::{Prover, holds};

/// The largest matrix whose characteristic coefficients are formed as elements.
const LARGEST: usize = 3;

impl Prover<'_> {
    /// Establishes that rows and columns of the matrix sum to zero; `None` if a normal form is not zero.
    pub fn balanced(&mut self, subject: &str, matrix: &Rc<Matrix>, premises: &[StepId]) -> Option<Proved<Balanced>> {
        let n = matrix.size;
        let entries = self.entries(matrix);
        let sums = |pick: &dyn Fn(usize, usize) -> usize| -> bool {
            (0..n).all(|i| {
                let line = (0..n).filter_map(|j| entries.get(pick(i, j))).map(|e| self.field.current(e)).collect();
                self.field.is_zero(&Poly::sum(line))
            })
        };
        if entries.len() != n * n || !sums(&|i, j| i * n + j) || !sums(&|i, j| j * n + i) {
            return None;
        }
        let sides = self.sides(matrix.entries.iter());
        let claim = Rc::new(Balanced { matrix: matrix.clone() });
        let step = self.record(subject, Statement::Balanced(claim.clone()), Rule::NormalForm, premises, sides);
        Some(Proved { claim, step })
    }

    /// A balanced matrix with nonnegative entries off the diagonal is negative semidefinite:
    /// vᵀMv = −Σ_{i<j} (Mᵢⱼ + Mⱼᵢ)/2 · (vᵢ − vⱼ)². `None` if a sign is not known.
    pub fn laplacian(&mut self, subject: &str, balance: &Proved<Balanced>) -> Option<Proved<Semidefinite>> {
        if !self.in_force(balance.step) {
            return None;
        }
        let matrix = balance.claim.matrix.clone();
        let n = matrix.size;
        let entries = self.entries(&matrix);
        for i in 0..n {
            for j in 0..i {
                if !either_is_nonnegative(self.field, &entries[i * n + j], &entries[j * n + i]) {
                    return None;
                }
            }
        }
        Some(self.semidefinite(subject, matrix, Rule::Laplacian, &[balance.step]))
    }

    /// A matrix of at most three rows (after one is left out, where the matrix is balanced) is negative semidefinite
    /// if the coefficients of the characteristic polynomial of minus its symmetric part are nonnegative: each is a sum of
    /// principal minors, whose signs are looked at one by one and together. `None` if a sign is not known.
    pub fn characteristic(
        &mut self,
        subject: &str,
        matrix: &Rc<Matrix>,
        reduction: Option<(&Proved<Balanced>, usize)>,
    ) -> Option<Proved<Semidefinite>> {
        let fits = |(balance, without): (&Proved<Balanced>, usize)| {
            balance.claim.matrix == *matrix && without < matrix.size && self.in_force(balance.step)
        };
        if !reduction.is_none_or(fits) {
            return None;
        }
        let without = reduction.map(|(_, without)| without);
        let minus = self.minus_symmetric_part(matrix, without)?;
        let k = matrix.size - usize::from(without.is_some());
        let is_nonnegative = |e: &Element| holds(self.field, e, Relation::NonNegative) || self.field.is_zero(e);
        let each_size = (1..=k).all(|size| {
            let minors = self.principal_minors(&minus, k, size);
            minors.iter().all(is_nonnegative) || is_nonnegative(&Poly::sum(minors))
        });
        if !each_size {
            return None;
        }
        let premises: Vec<StepId> = reduction.iter().map(|(balance, _)| balance.step).collect();
        Some(self.semidefinite(subject, matrix.clone(), Rule::Characteristic { without }, &premises))
    }

    /// The coefficients c₁, …, cₙ of det(λ + M) = λⁿ − …, that is the sums of the principal minors of −(M + Mᵀ)/2, one
    /// row and column left out if wanted. `None` for more than three rows.
    pub fn characteristic_coefficients(&mut self, matrix: &Matrix, without: Option<usize>) -> Option<Vec<Element>> {
        let minus = self.minus_symmetric_part(matrix, without)?;
        let k = matrix.size - usize::from(without.is_some());
        Some((1..=k).map(|size| Poly::sum(self.principal_minors(&minus, k, size))).collect())
    }

    /// −(M + Mᵀ)/2, row by row, one row and column left out if wanted. `None` for more than three rows.
    fn minus_symmetric_part(&mut self, matrix: &Matrix, without: Option<usize>) -> Option<Vec<Element>> {
        let kept: Vec<usize> = (0..matrix.size).filter(|i| Some(*i) != without).collect();
        if kept.len() > LARGEST {
            return None;
        }
        let mut minus = Vec::with_capacity(kept.len() * kept.len());
        for i in &kept {
            for j in &kept {
                let (a, b) = (self.value(&matrix.entry(*i, *j)), self.value(&matrix.entry(*j, *i)));
                let same = i == j || self.field.is_zero(&(&a - &b));
                let mean = if same { a } else { (&a + &b).scale(&rational(1, 2)) };
                minus.push(self.field.current(&mean).neg());
            }
        }
        Some(minus)
    }

    /// The principal minors of the given size of a matrix with k rows.
    fn principal_minors(&self, a: &[Element], k: usize, size: usize) -> Vec<Element> {
        let minors = (0u32..1 << k).filter(|set| set.count_ones() as usize == size).map(|set| {
            let rows: Vec<usize> = (0..k).filter(|i| set & (1 << i) != 0).collect();
            self.determinant(a, k, &rows, &rows)
        });
        let minors: Vec<Element> = minors.collect();
        minors.iter().map(|m| self.field.current(m)).collect()
    }

    fn determinant(&self, a: &[Element], k: usize, rows: &[usize], columns: &[usize]) -> Element {
        let Some((first, rest)) = rows.split_first() else { return Poly::one() };
        let mut parts = Vec::new();
        for (position, column) in columns.iter().enumerate() {
            let others: Vec<usize> = columns.iter().copied().filter(|c| c != column).collect();
            let minor = self.determinant(a, k, rest, &others);
            let term = self.field.product(&a[first * k + column], &minor);
            parts.push(if position % 2 == 0 { term } else { term.neg() });
        }
        Poly::sum(parts.iter().map(|p| self.field.current(p)).collect())
    }

    /// A matrix whose symmetric part vanishes identically is negative semidefinite.
    pub fn zero_matrix(&mut self, subject: &str, matrix: &Rc<Matrix>) -> Option<Proved<Semidefinite>> {
        let n = matrix.size;
        let entries = self.entries(matrix);
        let vanish = (0..n).all(|i| {
            (0..=i).all(|j| {
                let both = &self.field.current(&entries[i * n + j]) + &self.field.current(&entries[j * n + i]);
                self.field.is_zero(&both)
            })
        });
        vanish.then(|| self.semidefinite(subject, matrix.clone(), Rule::NormalForm, &[]))
    }

    /// A matrix whose symmetric part is diagonal is negative semidefinite if no entry on the diagonal is positive.
    pub fn diagonal(&mut self, subject: &str, matrix: &Rc<Matrix>) -> Option<Proved<Semidefinite>> {
        let n = matrix.size;
        let entries = self.entries(matrix);
        let current: Vec<_> = entries.iter().map(|e| self.field.current(e)).collect();
        let off = |i: usize, j: usize| self.field.is_zero(&(&current[i * n + j] + &current[j * n + i]));
        let fits = (0..n)
            .all(|i| (0..i).all(|j| off(i, j)) && holds(self.field, &current[i * n + i].neg(), Relation::NonNegative));
        fits.then(|| self.semidefinite(subject, matrix.clone(), Rule::Diagonal, &[]))
    }

    pub(super) fn semidefinite(
        &mut self,
        subject: &str,
        matrix: Rc<Matrix>,
        rule: Rule,
        premises: &[StepId],
    ) -> Proved<Semidefinite> {
        let sides = self.sides(matrix.entries.iter());
        let claim = Rc::new(Semidefinite { matrix });
        let step = self.record(subject, Statement::Semidefinite(claim.clone()), rule, premises, sides);
        Proved { claim, step }
    }
}

/// Whether a + b ≥ 0 on the domain: by the sign of one of them where they are equal, else by that of the sum.
fn either_is_nonnegative(field: &Field, a: &Element, b: &Element) -> bool {
    if field.is_zero(&(&field.current(a) - &field.current(b))) {
        return [a, b].iter().any(|e| holds(field, e, Relation::NonNegative) || field.is_zero(e));
    }
    holds(field, &(&field.current(a) + &field.current(b)), Relation::NonNegative)
}

/// vᵀMv as an expression.
pub(super) fn quadratic_form(matrix: &Matrix, vector: &[crate::algebra::number::Rational]) -> Expression {
    let mut form = Expression::zero();
    for (i, v) in vector.iter().enumerate() {
        for (j, w) in vector.iter().enumerate() {
            let weight = v * w;
            if weight == rational(0, 1) {
                continue;
            }
            for product in matrix.entry(i, j).0 {
                let mut factors = product.factors;
                factors.push(Factor::Element(Poly::constant(&weight)));
                form = form.plus(product.coefficient, factors);
            }
        }
    }
    form
}
