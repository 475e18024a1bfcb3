//! Sparse linear systems over the constants of the field (rationals, parameters, functions of parameters).
//!
//! Pivots are chosen for being certainly non-zero first and for short rows second; those that may vanish for special
//! parameter values are reported.

use std::collections::{BTreeMap, BTreeSet};

use rustc_hash::FxHashMap;

use crate::algebra::budget;
use crate::algebra::field::Field;
use crate::algebra::generator::Element;
use crate::algebra::polynomial::Poly;
use crate::algebra::sign::Sign;

/// Σ `left[k]`·unknown k = right, with coefficients that are constants of the field.
#[derive(Clone, Debug, Default)]
pub struct Equation {
    /// The coefficients by the number of the unknown; none is zero.
    pub left: BTreeMap<usize, Element>,
    /// The right-hand side.
    pub right: Element,
}

/// A solution of a linear system, unknowns that stay free set to zero.
#[derive(Clone, Debug)]
pub struct Solution {
    /// The value of each unknown.
    pub values: Vec<Element>,
    /// The unknowns that the equations leave free.
    pub free: Vec<usize>,
    /// Divisors that are not known to be non-zero.
    pub pivots: Vec<Element>,
}

/// Solves the equations, or returns `None` where they have no solution for general parameter values.
/// Cost: sparse Gaussian elimination with reduction of each entry to normal form.
pub fn solve(field: &Field, equations: Vec<Equation>, unknowns: usize) -> Option<Solution> {
    let mut elimination = Elimination::new(field, equations)?;
    while elimination.step()? {}
    Some(elimination.back_substitute(unknowns))
}

/// A basis of the solutions of Σ `left[k]`·unknown k = 0. Right-hand sides are ignored.
pub fn kernel(field: &Field, mut equations: Vec<Equation>, unknowns: usize) -> Vec<Vec<Element>> {
    equations.iter_mut().for_each(|e| e.right = Poly::zero());
    let Some(mut elimination) = Elimination::new(field, equations) else { return Vec::new() };
    while elimination.step() == Some(true) {}
    let held: BTreeSet<usize> = elimination.solved.iter().map(|(column, _)| *column).collect();
    let free = (0..unknowns).filter(|k| !held.contains(k));
    free.map(|k| elimination.values(unknowns, Some(k))).collect()
}

struct Elimination<'a> {
    field: &'a Field,
    rows: Vec<Option<Equation>>,
    columns: FxHashMap<usize, BTreeSet<usize>>,
    /// Waiting rows by the number of their unknowns.
    by_length: BTreeSet<(usize, usize)>,
    /// Each solved unknown with its row, divided by the pivot.
    solved: Vec<(usize, Equation)>,
    pivots: Vec<Element>,
    ranks: FxHashMap<Element, u8>,
}

/// Doubt about the pivot, fill-in, length of the row: less is better.
type Score = (u8, usize, usize);

/// How many of the shortest rows are looked at for a pivot.
const ROWS_COMPARED: usize = 12;

impl<'a> Elimination<'a> {
    fn new(field: &'a Field, equations: Vec<Equation>) -> Option<Elimination<'a>> {
        let mut this = Elimination {
            field,
            rows: Vec::new(),
            columns: FxHashMap::default(),
            by_length: BTreeSet::new(),
            solved: Vec::new(),
            pivots: Vec::new(),
            ranks: FxHashMap::default(),
        };
        let mut seen = BTreeSet::new();
        for equation in equations {
            let key: Vec<(usize, Element)> = equation.left.iter().map(|(k, e)| (*k, e.clone())).collect();
            if !seen.insert((key, equation.right.clone())) {
                continue;
            }
            this.insert(equation)?;
        }
        Some(this)
    }

    /// Adds a row; `None` if it reads 0 = c with c ≠ 0.
    fn insert(&mut self, equation: Equation) -> Option<()> {
        if equation.left.is_empty() {
            return equation.right.is_zero().then_some(());
        }
        let index = self.rows.len();
        for column in equation.left.keys() {
            self.columns.entry(*column).or_default().insert(index);
        }
        self.by_length.insert((equation.left.len(), index));
        self.rows.push(Some(equation));
        Some(())
    }

    fn remove(&mut self, index: usize) -> Option<Equation> {
        let equation = self.rows.get_mut(index)?.take()?;
        self.by_length.remove(&(equation.left.len(), index));
        for column in equation.left.keys() {
            if let Some(rows) = self.columns.get_mut(column) {
                rows.remove(&index);
            }
        }
        Some(equation)
    }

    /// Eliminates one unknown. `Some(false)` when no rows wait, `None` on a contradiction.
    fn step(&mut self) -> Option<bool> {
        let Some((row, column)) = self.choose() else { return Some(false) };
        let Some(mut equation) = self.remove(row) else { return Some(false) };
        let Some(pivot) = equation.left.remove(&column) else { return Some(false) };
        if self.rank(&pivot) > 1 {
            self.pivots.push(pivot.clone());
        }
        let inverse = self.field.inverse(&pivot).ok()?;
        for entry in equation.left.values_mut() {
            *entry = self.times(entry, &inverse);
        }
        equation.right = self.times(&equation.right, &inverse);
        let touched: Vec<usize> = self.columns.get(&column).into_iter().flatten().copied().collect();
        for other in touched {
            let Some(mut old) = self.remove(other) else { continue };
            let Some(factor) = old.left.remove(&column) else { continue };
            self.subtract(&mut old, &factor, &equation);
            self.insert(old)?;
        }
        self.solved.push((column, equation));
        Some(true)
    }

    /// row − factor·pivot row.
    fn subtract(&self, row: &mut Equation, factor: &Element, pivot_row: &Equation) {
        for (column, entry) in &pivot_row.left {
            let change = self.times(factor, entry);
            let fresh = match row.left.get(column) {
                Some(old) => self.reduced(&(old - &change)),
                None => change.neg(),
            };
            if fresh.is_zero() {
                row.left.remove(column);
            } else {
                row.left.insert(*column, fresh);
            }
        }
        row.right = self.reduced(&(&row.right - &self.times(factor, &pivot_row.right)));
    }

    /// The surest pivot among the shortest rows; an unknown that few rows hold is preferred.
    fn choose(&mut self) -> Option<(usize, usize)> {
        let shortest: Vec<usize> = self.by_length.iter().take(ROWS_COMPARED).map(|(_, row)| *row).collect();
        let mut best: Option<(Score, (usize, usize))> = None;
        for row in shortest {
            let entries: Vec<(usize, Element)> = match self.rows.get(row) {
                Some(Some(equation)) => equation.left.iter().map(|(c, e)| (*c, e.clone())).collect(),
                _ => continue,
            };
            let length = entries.len();
            for (column, entry) in entries {
                let rank = self.rank(&entry);
                let held = self.columns.get(&column).map_or(0, BTreeSet::len);
                let score = (rank, (length - 1) * (held - 1), length);
                if best.as_ref().is_none_or(|(s, _)| score < *s) {
                    best = Some((score, (row, column)));
                }
            }
            if best.as_ref().is_some_and(|((rank, cost, _), _)| *rank == 0 && *cost == 0) {
                break;
            }
        }
        best.map(|(_, place)| place)
    }

    /// 0 a number, 1 known not to vanish, 2 a single term, 3 anything else.
    fn rank(&mut self, e: &Element) -> u8 {
        if e.is_constant() {
            return 0;
        }
        if let Some(rank) = self.ranks.get(e) {
            return *rank;
        }
        let rank = match self.field.sign(e) {
            Sign::Positive | Sign::Negative | Sign::NonZero => 1,
            _ if e.len() == 1 => 2,
            _ => 3,
        };
        self.ranks.insert(e.clone(), rank);
        rank
    }

    fn times(&self, a: &Element, b: &Element) -> Element {
        budget::spend((a.len() * b.len()) as u64);
        self.reduced(&self.field.product(a, b))
    }

    fn reduced(&self, e: &Element) -> Element {
        self.field.reduce(e)
    }

    fn back_substitute(self, unknowns: usize) -> Solution {
        let held: BTreeSet<usize> = self.solved.iter().map(|(column, _)| *column).collect();
        let free = (0..unknowns).filter(|k| !held.contains(k)).collect();
        let values = self.values(unknowns, None);
        Solution { values, free, pivots: self.pivots }
    }

    /// The unknowns, those that stay free zero, except that `raised` is one.
    fn values(&self, unknowns: usize, raised: Option<usize>) -> Vec<Element> {
        let mut values: Vec<Element> = vec![Poly::zero(); unknowns];
        if let Some(slot) = raised.and_then(|k| values.get_mut(k)) {
            *slot = Poly::one();
        }
        for (column, equation) in self.solved.iter().rev() {
            let mut total = vec![equation.right.clone()];
            for (other, entry) in &equation.left {
                if let Some(value) = values.get(*other).filter(|v| !v.is_zero()) {
                    total.push(self.times(entry, value).neg());
                }
            }
            if let Some(slot) = values.get_mut(*column) {
                *slot = self.reduced(&Poly::sum(total));
            }
        }
        values
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::algebra::generator::Role;

    fn row(left: &[(usize, Element)], right: Element) -> Equation {
        Equation { left: left.iter().cloned().collect(), right }
    }

    #[test]
    fn a_symbolic_pivot_is_reported_and_a_contradiction_found() {
        let field = Field::new();
        let s = Poly::var(field.symbol("s", Role::Parameter));
        let one_minus_s = &Poly::one() - &s;
        // (1 − s) x = 1, x + y = 2
        let equations = vec![
            row(&[(0, one_minus_s.clone())], Poly::one()),
            row(&[(0, Poly::one()), (1, Poly::one())], Poly::int(2)),
        ];
        let solution = solve(&field, equations.clone(), 2).expect("solvable");
        assert!(field.is_zero(&(&field.product(&one_minus_s, &solution.values[0]) - &Poly::one())));
        assert!(field.is_zero(&(&(&solution.values[0] + &solution.values[1]) - &Poly::int(2))));
        assert_eq!(solution.pivots.len(), 1);
        let mut more = equations;
        more.push(row(&[(1, Poly::one())], Poly::one()));
        assert!(solve(&field, more, 2).is_none());
    }
}
