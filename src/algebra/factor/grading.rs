//! Homogeneous polynomials (for any integer weights) have homogeneous factors: set variables to 1, factor, restore.
//!
//! Polynomials in prices and income are often homogeneous in several ways; each grading removes one variable.

use num_integer::Integer;

use super::{Pieces, factor_squarefree};
use crate::algebra::budget;
use crate::algebra::monomial::{Monomial, Var};
use crate::algebra::polynomial::Poly;

/// More variables than this are not examined.
const MAX_VARS: usize = 40;

/// Weights for which a polynomial is homogeneous: 1 for `var`, integers for others, 0 for the vars of other gradings.
struct Grading {
    var: Var,
    weights: Vec<(Var, i64)>,
}

/// The factors of a primitive squarefree polynomial that is homogeneous for some weights; None when it is not.
pub(super) fn factor_graded(p: &Poly) -> Option<Pieces> {
    let gradings = gradings(p)?;
    let is_removed = |v: Var| gradings.iter().any(|g| g.var == v);
    let terms = p.raw_terms().iter().map(|(m, c)| (m.split(is_removed).1, c.clone()));
    let pieces = factor_squarefree(&Poly::from_int_terms(terms.collect()).primitive().part);
    let found = pieces.found.iter().map(|f| gradings.iter().fold(f.clone(), |f, g| g.restore(&f)));
    Some(Pieces { found: found.map(|f| f.primitive().part).collect(), open: pieces.open })
}

impl Grading {
    /// Multiplies every term by the power of `var` that makes the polynomial homogeneous, least exponent 0.
    fn restore(&self, f: &Poly) -> Poly {
        let weight = |m: &Monomial| self.weights.iter().map(|&(v, w)| w * i64::from(m.exponent(v))).sum::<i64>();
        let top = f.raw_terms().iter().map(|(m, _)| weight(m)).max().unwrap_or(0);
        let terms = f.raw_terms().iter().map(|(m, c)| {
            let missing = i32::try_from(top - weight(m)).unwrap_or(i32::MAX);
            (m.mul(&Monomial::power(self.var, missing)), c.clone())
        });
        Poly::from_int_terms(terms.collect())
    }
}

/// Independent gradings with weight 1 for a variable of their own; None when there are none.
fn gradings(p: &Poly) -> Option<Vec<Grading>> {
    let vars = p.vars();
    if vars.len() > MAX_VARS {
        return None;
    }
    let rows = Echelon::of_differences(p, &vars)?;
    let mut list = Vec::new();
    for (column, &var) in vars.iter().enumerate() {
        if rows.rows.iter().any(|row| row.pivot == column) {
            continue;
        }
        let weights: Option<Vec<(Var, i64)>> = (rows.rows.iter())
            .filter(|row| row.entries[column] != 0)
            .map(|row| {
                let (w, rest) = (-row.entries[column]).div_rem(&row.entries[row.pivot]);
                (rest == 0).then_some((vars[row.pivot], i64::try_from(w).ok()?))
            })
            .collect();
        if let Some(weights) = weights {
            list.push(Grading { var, weights });
        }
    }
    (!list.is_empty()).then_some(list)
}

struct Row {
    pivot: usize,
    entries: Vec<i128>,
}

/// Rows in reduced echelon form up to integer factors.
#[derive(Default)]
struct Echelon {
    rows: Vec<Row>,
}

impl Echelon {
    /// The span of the differences of exponent vectors; None when it is the whole space or the numbers grow too large.
    fn of_differences(p: &Poly, vars: &[Var]) -> Option<Echelon> {
        let (first, others) = p.raw_terms().split_first()?;
        let mut echelon = Echelon::default();
        for (m, _) in others {
            budget::spend((1 + echelon.rows.len() * vars.len()) as u64);
            let gap = vars.iter().map(|&v| i128::from(m.exponent(v) - first.0.exponent(v)));
            echelon.insert(gap.collect())?;
            if echelon.rows.len() == vars.len() {
                return None;
            }
        }
        Some(echelon)
    }

    fn insert(&mut self, mut entries: Vec<i128>) -> Option<()> {
        for row in &self.rows {
            eliminate(&mut entries, row)?;
        }
        let Some(pivot) = entries.iter().position(|&c| c != 0) else { return Some(()) };
        let fresh = Row { pivot, entries };
        for row in &mut self.rows {
            eliminate(&mut row.entries, &fresh)?;
        }
        self.rows.push(fresh);
        Some(())
    }
}

/// Clears the pivot column of `row` in `entries`; None on overflow.
fn eliminate(entries: &mut [i128], row: &Row) -> Option<()> {
    let (c, d) = (entries[row.pivot], row.entries[row.pivot]);
    if c == 0 {
        return Some(());
    }
    for (x, y) in entries.iter_mut().zip(&row.entries) {
        *x = x.checked_mul(d)?.checked_sub(y.checked_mul(c)?)?;
    }
    let common = entries.iter().fold(0i128, |g, x| g.gcd(x));
    if common > 1 {
        entries.iter_mut().for_each(|x| *x /= common);
    }
    Some(())
}
