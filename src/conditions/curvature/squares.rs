//! Symmetric matrices written as minus sums of squares: by the entries off the diagonal, by nests of goods, by additive
//! elasticities, by elimination. What is found here is a proposal; `proof` checks it.

use num_traits::{Signed, Zero};

use crate::algebra::field::Field;
use crate::algebra::generator::Element;
use crate::algebra::number::{Rational, rational};
use crate::algebra::polynomial::Poly;
use crate::algebra::sign::Sign;

use super::nests;

/// λ and u of a square λ (uᵀv)².
pub(super) type Squares = Vec<(Element, Vec<Element>)>;

/// A symmetric matrix, row by row.
#[derive(Clone)]
pub(super) struct Symmetric {
    /// The number of rows.
    pub n: usize,
    /// The entries, reduced.
    pub entries: Vec<Element>,
    /// The entries at an admissible point, rounded: they say what to try. Empty where there is none.
    pub values: Vec<Rational>,
    /// The shares there.
    pub weights: Vec<Rational>,
}

/// An entry longer than this is not divided by.
const LONGEST_PIVOT: usize = 40;

impl Symmetric {
    /// The entry in row i and column j.
    pub fn at(&self, i: usize, j: usize) -> &Element {
        &self.entries[i * self.n + j]
    }

    /// The value there.
    pub fn value(&self, i: usize, j: usize) -> Rational {
        self.values.get(i * self.n + j).cloned().unwrap_or_default()
    }

    /// The sum of the entries in the given rows and columns.
    pub fn block_sum(&self, field: &Field, rows: &[usize], columns: &[usize]) -> Element {
        let pairs = rows.iter().flat_map(|i| columns.iter().map(move |j| (*i, *j)));
        let parts = pairs.map(|(i, j)| field.current(self.at(i, j))).collect();
        field.reduce(&Poly::sum(parts))
    }

    fn is_balanced(&self, field: &Field) -> bool {
        let all: Vec<usize> = (0..self.n).collect();
        all.iter().all(|i| field.is_zero(&self.block_sum(field, &[*i], &all)))
    }
}

/// Squares whose sum is minus the matrix, as far as one of the ways leads to them.
pub(super) fn squares(field: &Field, m: &Symmetric, shares: &[Element]) -> Option<Squares> {
    if m.is_balanced(field) {
        let by_nests = || nests::squares(field, m, shares);
        let found = rising_gaps(field, m).or_else(by_nests).or_else(|| additive(field, m, shares));
        if found.is_some() {
            return found;
        }
    }
    elimination(field, m)
}

fn is_nonnegative(field: &Field, e: &Element) -> bool {
    e.is_zero() || field.sign(e).is_nonnegative()
}

/// Σ_{i<j} Mᵢⱼ (vᵢ − vⱼ)², which is minus a balanced matrix, whatever the signs.
pub(super) fn gaps(m: &Symmetric) -> Squares {
    let pairs = (0..m.n).flat_map(|i| (0..i).map(move |j| (i, j)));
    let square = |(i, j): (usize, usize)| {
        let u = (0..m.n).map(|k| Poly::int(i64::from(k == i) - i64::from(k == j))).collect();
        (m.at(i, j).clone(), u)
    };
    pairs.filter(|(i, j)| !m.at(*i, *j).is_zero()).map(square).collect()
}

/// The same, where no entry off the diagonal is negative.
fn rising_gaps(field: &Field, m: &Symmetric) -> Option<Squares> {
    // a clearly negative value ends it before a sign is looked for
    let falls = (0..m.n).any(|i| (0..i).any(|j| m.value(i, j).is_negative()));
    let squares = if falls { return None } else { gaps(m) };
    squares.iter().all(|(weight, _)| is_nonnegative(field, weight)).then_some(squares)
}

/// Minus a balanced matrix as squares in blocks, whatever their signs, such that it is negative semidefinite exactly where
/// each block is a nonnegative form.
pub(super) fn blocks(field: &Field, m: &Symmetric) -> Vec<Squares> {
    nests::blocks(field, m).unwrap_or_else(|| vec![gaps(m)])
}

/// Mᵢⱼ = wᵢ wⱼ (κᵢ + κⱼ − Σ κw) off the diagonal, as additive preferences have it: the squares κᵢ wᵢ (vᵢ − Σ w v)².
fn additive(field: &Field, m: &Symmetric, shares: &[Element]) -> Option<Squares> {
    if m.n < 3 || shares.len() != m.n || !looks_additive(m) {
        return None;
    }
    let elasticity = |i: usize, j: usize| {
        let product = field.product(&shares[i], &shares[j]);
        field.quotient(m.at(i, j), &product).ok().map(|e| field.reduce(&e))
    };
    let half = rational(1, 2);
    let mut parts = Vec::with_capacity(m.n);
    for i in 0..m.n {
        let (j, k) = ((i + 1) % m.n, (i + 2) % m.n);
        let twice = &(&elasticity(i, j)? + &elasticity(i, k)?) - &elasticity(j, k)?;
        parts.push(field.reduce(&field.current(&twice).scale(&half)));
    }
    let weighted = parts.iter().zip(shares).map(|(part, w)| field.product(part, w)).collect::<Vec<_>>();
    let mean = Poly::sum(weighted.iter().map(|e| field.current(e)).collect());
    let mut squares = Squares::new();
    for i in 0..m.n {
        let weight = field.reduce(&(&field.current(&parts[i]) + &mean));
        if !is_nonnegative(field, &weight) {
            return None;
        }
        let u = (0..m.n).map(|j| if i == j { &Poly::one() - &shares[j] } else { shares[j].neg() }).collect();
        squares.push((field.product(&weight, &shares[i]), u));
    }
    Some(squares)
}

/// Whether the elasticities at the point are κᵢ + κⱼ off the diagonal, with no negative weight.
fn looks_additive(m: &Symmetric) -> bool {
    let n = m.n;
    if m.values.len() != n * n || m.weights.len() != n || m.weights.iter().any(Zero::is_zero) {
        return false;
    }
    let whole = m.weights.iter().fold(Rational::zero(), |s, w| s + w);
    let elasticity = |i: usize, j: usize| m.value(i, j) / (&m.weights[i] * &m.weights[j]) * &whole;
    let part = |i: usize| {
        let (j, k) = ((i + 1) % n, (i + 2) % n);
        (elasticity(i, j) + elasticity(i, k) - elasticity(j, k)) / rational(2, 1)
    };
    let parts: Vec<Rational> = (0..n).map(part).collect();
    let mean = parts.iter().zip(&m.weights).fold(Rational::zero(), |s, (p, w)| s + p * w / &whole);
    let slack = mean.abs() * rational(1, 1 << 20);
    parts.iter().all(|p| p + &mean >= -&slack)
        && (0..n).all(|i| (0..i).all(|j| alike(&elasticity(i, j), &(&parts[i] + &parts[j]))))
}

/// Elimination with pivots of known sign: −M = Σ λ u uᵀ.
fn elimination(field: &Field, m: &Symmetric) -> Option<Squares> {
    let n = m.n;
    let mut rest: Vec<Element> = m.entries.iter().map(Poly::neg).collect();
    let mut open: Vec<usize> = (0..n).collect();
    let mut squares = Squares::new();
    loop {
        open.retain(|i| !(0..n).all(|j| rest[i * n + j].is_zero()));
        if open.is_empty() {
            return Some(squares);
        }
        let short = |i: &&usize| rest[**i * n + **i].len() <= LONGEST_PIVOT;
        let mut order: Vec<usize> = open.iter().filter(short).copied().collect();
        order.sort_by_key(|i| rest[i * n + i].len());
        let pivot = order.into_iter().find(|i| field.sign(&rest[i * n + i]) == Sign::Positive);
        let Some(p) = pivot else {
            // what is left of a balanced matrix is balanced
            let entries = rest.iter().map(Poly::neg).collect();
            let left = Symmetric { n, entries, values: Vec::new(), weights: Vec::new() };
            squares.extend(rising_gaps(field, &left).filter(|_| left.is_balanced(field))?);
            return Some(squares);
        };
        let weight = rest[p * n + p].clone();
        let mut u = vec![Poly::zero(); n];
        for j in &open {
            u[*j] = field.reduce(&field.quotient(&rest[p * n + j], &weight).ok()?);
        }
        let mut next = vec![Poly::zero(); n * n];
        for i in open.iter().filter(|i| **i != p) {
            for j in open.iter().filter(|j| **j != p && **j <= *i) {
                let taken = field.product(&rest[p * n + i], &u[*j]);
                let entry = field.reduce(&(&field.current(&rest[i * n + j]) - &field.current(&taken)));
                if entry.len() > 10 * LONGEST_PIVOT {
                    return None;
                }
                next[i * n + j] = entry.clone();
                next[j * n + i] = entry;
            }
        }
        squares.push((weight, u));
        rest = next;
    }
}

/// Whether two rounded values are the same for all that rounding can tell.
pub(super) fn alike(a: &Rational, b: &Rational) -> bool {
    let gap = (a - b).abs();
    gap.is_zero() || gap <= (a.abs() + b.abs()) * rational(1, 1 << 20)
}
