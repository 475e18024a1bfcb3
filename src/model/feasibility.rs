//! Whether linear inequalities contradict each other: an exact simplex on the relaxation in which every monomial is an
//! unknown of its own. A contradiction found here is one by Farkas' lemma; finding none says nothing.

use std::collections::BTreeMap;

use num_traits::{One, Signed, Zero};

use crate::algebra::budget;
use crate::algebra::monomial::Monomial;
use crate::algebra::number::{Rational, rational};
use crate::algebra::polynomial::Poly;

/// `form` > 0, or ≥ 0 where it is not strict.
#[derive(Clone, Debug)]
pub(super) struct Constraint {
    pub form: Poly,
    pub strict: bool,
}

/// One row: Σ coefficients · unknowns + constant.
struct Row {
    terms: BTreeMap<usize, Rational>,
    constant: Rational,
    strict: bool,
}

/// The largest tableau that is worked, in entries.
const MOST_ENTRIES: usize = 40_000;

/// Whether the constraints contradict each other; `positive` says which monomials are positive.
pub(super) fn is_contradictory(constraints: &[Constraint], positive: &dyn Fn(&Monomial) -> bool) -> bool {
    let mut unknowns: BTreeMap<&Monomial, usize> = BTreeMap::new();
    let mut signs = Vec::new();
    let mut rows = Vec::new();
    for constraint in constraints {
        let mut row = Row { terms: BTreeMap::new(), constant: Rational::zero(), strict: constraint.strict };
        for (monomial, coefficient) in constraint.form.terms() {
            if monomial.is_one() {
                row.constant = coefficient;
                continue;
            }
            let place = *unknowns.entry(monomial).or_insert_with(|| {
                signs.push(positive(monomial));
                signs.len() - 1
            });
            row.terms.insert(place, coefficient);
        }
        rows.push(row);
    }
    let rows = without_easy_rows(rows, &signs);
    if rows.is_empty() || a_simple_point_fits(&rows, &signs) {
        return false;
    }
    Tableau::new(&rows, &signs).is_some_and(Tableau::shows_contradiction)
}

/// A row with an unknown that only ever helps can always be satisfied, and with it every row that has the unknown.
fn without_easy_rows(mut rows: Vec<Row>, positive: &[bool]) -> Vec<Row> {
    loop {
        let mut helps = vec![true; positive.len()];
        let mut hurts = vec![true; positive.len()];
        for (place, coefficient) in rows.iter().flat_map(|row| &row.terms) {
            helps[*place] &= coefficient.is_positive();
            hurts[*place] &= coefficient.is_negative() && !positive[*place];
        }
        let before = rows.len();
        rows.retain(|row| !row.terms.keys().any(|place| helps[*place] || hurts[*place]));
        if rows.len() == before {
            return rows;
        }
    }
}

/// All positive unknowns at one value and the others at zero.
fn a_simple_point_fits(rows: &[Row], positive: &[bool]) -> bool {
    let values = [rational(1, 1), rational(1, 4), rational(1, 100), rational(1, 10_000), rational(100, 1)];
    values.iter().any(|value| {
        rows.iter().all(|row| {
            let moving = row.terms.iter().filter(|(place, _)| positive[**place]);
            let total = moving.fold(row.constant.clone(), |total, (_, c)| total + c * value);
            total.is_positive() || !row.strict && total.is_zero()
        })
    })
}

/// maximise t subject to t ≤ every row, all unknowns ≥ 0 (a free unknown is a difference of two): columns are the
/// unknowns, t⁺, t⁻ and the slacks, and the last one is the right-hand side.
struct Tableau {
    rows: Vec<Vec<Rational>>,
    objective: Vec<Rational>,
    basis: Vec<usize>,
    strict: Vec<bool>,
    rise: usize,
}

impl Tableau {
    fn new(rows: &[Row], positive: &[bool]) -> Option<Tableau> {
        let columns: Vec<(usize, bool)> = positive
            .iter()
            .enumerate()
            .flat_map(|(place, own)| if *own { vec![(place, false)] } else { vec![(place, false), (place, true)] })
            .collect();
        let used: Vec<usize> = (0..positive.len()).filter(|p| rows.iter().any(|r| r.terms.contains_key(p))).collect();
        let bounds: Vec<Row> = used
            .iter()
            .filter(|place| positive[**place])
            .map(|place| Row {
                terms: BTreeMap::from([(*place, Rational::one())]),
                constant: Rational::zero(),
                strict: true,
            })
            .collect();
        let all: Vec<&Row> = rows.iter().chain(&bounds).collect();
        let rise = columns.len();
        let width = rise + 2 + all.len() + 1;
        if width * all.len() > MOST_ENTRIES {
            return None;
        }
        let mut table = Vec::with_capacity(all.len());
        for (index, row) in all.iter().enumerate() {
            let mut line = vec![Rational::zero(); width];
            for (column, (place, turned)) in columns.iter().enumerate() {
                if let Some(coefficient) = row.terms.get(place) {
                    line[column] = if *turned { coefficient.clone() } else { -coefficient };
                }
            }
            line[rise] = Rational::one();
            line[rise + 1] = -Rational::one();
            line[rise + 2 + index] = Rational::one();
            line[width - 1] = row.constant.clone();
            table.push(line);
        }
        let mut objective = vec![Rational::zero(); width];
        objective[rise] = -Rational::one();
        objective[rise + 1] = Rational::one();
        let basis = (0..all.len()).map(|index| rise + 2 + index).collect();
        let strict = all.iter().map(|row| row.strict).collect();
        Some(Tableau { rows: table, objective, basis, strict, rise })
    }

    fn pivot(&mut self, line: usize, column: usize) {
        let lead = self.rows[line][column].clone();
        self.rows[line].iter_mut().for_each(|x| *x = &*x / &lead);
        let pivot = self.rows[line].clone();
        let clear = |row: &mut Vec<Rational>| {
            let factor = row[column].clone();
            if !factor.is_zero() {
                row.iter_mut().zip(&pivot).filter(|(_, p)| !p.is_zero()).for_each(|(x, p)| *x = &*x - p * &factor);
            }
        };
        budget::spend((self.rows.len() * pivot.len()) as u64);
        self.rows.iter_mut().enumerate().filter(|(index, _)| *index != line).for_each(|(_, row)| clear(row));
        clear(&mut self.objective);
        self.basis[line] = column;
    }

    /// t⁻ enters for the row that is most wanting: from there every step is feasible.
    fn start(&mut self) {
        let last = self.objective.len() - 1;
        let lowest = (0..self.rows.len()).min_by(|a, b| self.rows[*a][last].cmp(&self.rows[*b][last]));
        if let Some(line) = lowest.filter(|line| self.rows[*line][last].is_negative()) {
            self.pivot(line, self.rise + 1);
        }
    }

    /// Whether the largest t is negative, or zero by a combination that a strict row enters.
    fn shows_contradiction(mut self) -> bool {
        let last = self.objective.len() - 1;
        self.start();
        loop {
            if self.objective[last].is_positive() {
                return false;
            }
            // Bland's rule: the first column that improves, the lowest basic variable among the tightest rows
            let Some(column) = (0..last).find(|c| self.objective[*c].is_negative()) else { break };
            let ratio = |line: &usize| &self.rows[*line][last] / &self.rows[*line][column];
            let leaving = (0..self.rows.len())
                .filter(|line| self.rows[*line][column].is_positive())
                .min_by(|a, b| ratio(a).cmp(&ratio(b)).then(self.basis[*a].cmp(&self.basis[*b])));
            let Some(line) = leaving else { return false };
            self.pivot(line, column);
        }
        if self.objective[last].is_negative() {
            return true;
        }
        let slacks = self.rise + 2;
        self.strict.iter().enumerate().any(|(index, strict)| *strict && self.objective[slacks + index].is_positive())
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::algebra::monomial::Var;

    fn contradictory(forms: &[(Poly, bool)], positive: &[u32]) -> bool {
        let constraints: Vec<Constraint> =
            forms.iter().map(|(form, strict)| Constraint { form: form.clone(), strict: *strict }).collect();
        is_contradictory(&constraints, &|m| m.iter().all(|(v, _)| positive.contains(&(v.index() as u32))))
    }

    #[test]
    fn farkas_decides_linear_inequalities() {
        let (a, b) = (Poly::var(Var::new(0)), Poly::var(Var::new(1)));
        let one = Poly::one();
        // a > b, b > 1, a < 1
        assert!(contradictory(&[(&a - &b, true), (&b - &one, true), (&one - &a, true)], &[]));
        // a ≥ b ≥ 1 ≥ a has a solution, and none once one of them is strict
        assert!(!contradictory(&[(&a - &b, false), (&b - &one, false), (&one - &a, false)], &[]));
        assert!(contradictory(&[(&a - &b, false), (&b - &one, true), (&one - &a, false)], &[]));
        // positive a and b with a + b < 0
        assert!(contradictory(&[((&a + &b).neg(), true)], &[0, 1]));
        assert!(!contradictory(&[((&a + &b).neg(), true)], &[0]));
        assert!(!contradictory(&[(&one - &(&a + &b), true)], &[0, 1]));
    }
}
