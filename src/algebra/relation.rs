//! Linear relations over the rationals between elements.

use num_traits::Zero;
use rustc_hash::FxHashMap;

use super::field::Field;
use super::generator::Element;
use super::monomial::Monomial;
use super::number::Rational;
use super::polynomial::Poly;

/// Coefficients r with `target` = Σ rᵢ `basis`ᵢ, if there are any. Exact: the elements are put over one denominator and
/// compared coefficient by coefficient. Cost: Gaussian elimination on the monomials that occur.
pub fn rational_relation(field: &Field, target: &Element, basis: &[Element]) -> Option<Vec<Rational>> {
    if basis.is_empty() {
        return field.is_zero(target).then(Vec::new);
    }
    let mut all: Vec<Element> = basis.to_vec();
    all.push(target.clone());
    let columns = over_one_denominator(field, &all);
    let connected = connected(&columns)?;
    let few: Vec<Poly> = connected.iter().map(|place| &columns[*place]).chain(columns.last()).cloned().collect();
    let mut coefficients = vec![Rational::zero(); basis.len()];
    for (place, coefficient) in connected.into_iter().zip(solve(&few)?) {
        coefficients[place] = coefficient;
    }
    Some(coefficients)
}

/// The columns that share monomials with the last one, directly or through each other: only they can matter. `None` if
/// a monomial of the last column stands in no other.
fn connected(columns: &[Poly]) -> Option<Vec<usize>> {
    let (target, basis) = columns.split_last()?;
    let mut holders: FxHashMap<&Monomial, Vec<usize>> = FxHashMap::default();
    for (place, column) in basis.iter().enumerate() {
        column.raw_terms().iter().for_each(|(monomial, _)| holders.entry(monomial).or_default().push(place));
    }
    if !target.raw_terms().iter().all(|(monomial, _)| holders.contains_key(monomial)) {
        return None;
    }
    let mut reached = vec![false; basis.len()];
    let mut waiting: Vec<&Poly> = vec![target];
    while let Some(column) = waiting.pop() {
        for place in column.raw_terms().iter().filter_map(|(monomial, _)| holders.remove(monomial)).flatten() {
            if !std::mem::replace(&mut reached[place], true) {
                waiting.push(&basis[place]);
            }
        }
    }
    Some((0..basis.len()).filter(|place| reached[*place]).collect())
}

/// The numerators of the elements over a common denominator.
pub fn over_one_denominator(field: &Field, elements: &[Element]) -> Vec<Poly> {
    let fractions: Vec<_> = elements.iter().map(|e| field.fraction(e)).collect();
    let mut common: std::collections::BTreeMap<super::monomial::Var, u32> = std::collections::BTreeMap::new();
    for (_, denominator) in &fractions {
        for (var, exponent) in denominator {
            let slot = common.entry(*var).or_insert(0);
            *slot = (*slot).max(*exponent);
        }
    }
    fractions
        .into_iter()
        .map(|(numerator, denominator)| {
            let missing = common.iter().filter_map(|(var, exponent)| {
                let has = denominator.iter().find(|(v, _)| v == var).map_or(0, |(_, k)| *k);
                (exponent > &has).then(|| (*var, ((exponent - has) * field.root_index(*var)) as i32))
            });
            let factor = Poly::term(&Rational::from_integer(1.into()), Monomial::from_pairs(missing));
            field.expand(&(&numerator * &factor))
        })
        .collect()
}

/// Solves Σ rᵢ columnᵢ = last column.
fn solve(columns: &[Poly]) -> Option<Vec<Rational>> {
    let mut monomials: Vec<&Monomial> = columns.iter().flat_map(|c| c.raw_terms().iter().map(|(m, _)| m)).collect();
    monomials.sort_unstable();
    monomials.dedup();
    let unknowns = columns.len() - 1;
    let mut rows: Vec<Vec<Rational>> = vec![vec![Rational::zero(); columns.len()]; monomials.len()];
    for (j, column) in columns.iter().enumerate() {
        for (monomial, coefficient) in column.terms() {
            if let Ok(i) = monomials.binary_search(&monomial) {
                rows[i][j] = coefficient;
            }
        }
    }
    let pivots = eliminate(&mut rows, unknowns);
    if rows[pivots.len()..].iter().any(|row| !row[unknowns].is_zero()) {
        return None;
    }
    let mut solution = vec![Rational::zero(); unknowns];
    for (row, column) in pivots.into_iter().enumerate() {
        solution[column] = rows[row][unknowns].clone();
    }
    Some(solution)
}

/// Reduced row echelon form on the first `unknowns` columns; the pivot column of each leading row.
fn eliminate(rows: &mut [Vec<Rational>], unknowns: usize) -> Vec<usize> {
    let mut pivots = Vec::new();
    for column in 0..unknowns {
        let start = pivots.len();
        let Some(found) = (start..rows.len()).find(|r| !rows[*r][column].is_zero()) else { continue };
        rows.swap(start, found);
        let pivot = rows[start][column].clone();
        rows[start].iter_mut().for_each(|x| *x = &*x / &pivot);
        let lead = rows[start].clone();
        for (index, row) in rows.iter_mut().enumerate() {
            if index != start && !row[column].is_zero() {
                let factor = row[column].clone();
                row.iter_mut().zip(&lead).for_each(|(x, l)| *x = &*x - l * &factor);
            }
        }
        pivots.push(column);
    }
    pivots
}
