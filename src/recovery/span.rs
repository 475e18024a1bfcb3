//! Demands as functions of income: xᵢ = Σₖ Aᵢₖ(p) gₖ(y) with independent gₖ, and the change of variable z = φ(y) in
//! which the system is linear or quadratic (Gorman 1981; Lie's classification of algebras on the line).

use std::collections::BTreeMap;

use num_traits::Signed;

use crate::algebra::field::Field;
use crate::algebra::generator::Element;
use crate::algebra::monomial::{Monomial, Var};
use crate::algebra::polynomial::Poly;
use crate::algebra::sign::Sign;

use super::fractions::Moving;
use super::potential::{Potential, potential};
use super::system::System;

/// xᵢ = Σₖ `coefficients[k][i]`·`functions[k]`.
pub struct Span {
    /// gₖ: functions of income alone, independent over the constants.
    pub functions: Vec<Element>,
    /// Aₖ: functions of prices alone, one vector over the goods for each gₖ; independent over the constants.
    pub coefficients: Vec<Vec<Element>>,
    /// Whether sums of prices stand in the coefficients as they are named, not put back.
    pub named: bool,
}

impl Span {
    /// Reads the demands as functions of income; `None` where a function of income and prices together occurs.
    pub fn of(system: &System) -> Option<Span> {
        let field = system.field;
        let income = Moving::new(field, &[system.income]);
        let prices = Moving::new(field, &system.prices);
        let both = Moving::new(field, &system.variables());
        let (numerators, denominator) = both.over_one_denominator(&system.demands);
        let (mut of_income, mut of_prices) = (BTreeMap::new(), BTreeMap::new());
        for (sum, power) in denominator {
            match (income.moves(sum), prices.moves(sum)) {
                (true, true) => return None,
                (true, false) => of_income.insert(sum, power),
                _ => of_prices.insert(sum, power),
            };
        }
        let mixed = |v: &Var| income.moves(*v) && prices.moves(*v);
        if numerators.iter().flat_map(Poly::vars).any(|v| mixed(&v)) {
            return None;
        }
        let below = both.below(&of_prices);
        let mut columns: BTreeMap<Monomial, Vec<Element>> = BTreeMap::new();
        for (good, numerator) in numerators.iter().enumerate() {
            for (monomial, coefficient) in numerator.collect(|v| income.moves(v)) {
                let column = columns.entry(monomial).or_insert_with(|| vec![Poly::zero(); numerators.len()]);
                if let Some(slot) = column.get_mut(good) {
                    *slot = field.reduce(&(&coefficient * &below));
                }
            }
        }
        columns.retain(|_, column| column.iter().any(|e| !e.is_zero()));
        let over = both.below(&of_income);
        let functions = columns.keys().map(|m| field.reduce(&(&Poly::monomial(m.clone()) * &over))).collect();
        let coefficients = columns.into_values().collect();
        Some(Span { functions, coefficients, named: false }.independent(&prices))
    }

    /// Columns that are constant combinations of earlier ones join their functions to those.
    fn independent(self, prices: &Moving) -> Span {
        let field = prices.field;
        let mut kept = Span { functions: Vec::new(), coefficients: Vec::new(), named: false };
        for (function, column) in self.functions.into_iter().zip(self.coefficients) {
            match prices.constant_combination(&column, &kept.coefficients) {
                Some(shares) if !kept.functions.is_empty() => {
                    for (own, share) in kept.functions.iter_mut().zip(&shares.values) {
                        *own = field.reduce(&(&field.current(own) + &field.product(share, &function)));
                    }
                }
                _ => {
                    kept.functions.push(function);
                    kept.coefficients.push(column);
                }
            }
        }
        if kept.functions.len() == 1 {
            kept.move_constants(prices);
        }
        kept
    }

    /// With a single function, constant factors of its coefficients go over to it.
    fn move_constants(&mut self, prices: &Moving) {
        let field = prices.field;
        let (Some(function), Some(column)) = (self.functions.first_mut(), self.coefficients.first_mut()) else {
            return;
        };
        let Some(first) = column.iter().find(|e| !e.is_zero()) else { return };
        let Some((_, constant)) = prices.collect(&prices.clear(first).numerator).into_iter().next() else { return };
        let Ok(inverse) = field.inverse(&constant) else { return };
        if constant.is_one() || field.sign(&constant) == Sign::Zero {
            return;
        }
        let simpler: Vec<Element> = column.iter().map(|e| field.reduce(&field.product(e, &inverse))).collect();
        let size = |list: &[Element]| {
            list.iter().map(|e| e.raw_terms().iter().map(|(m, _)| 1 + m.len()).sum::<usize>()).sum::<usize>()
        };
        if size(&simpler) < size(column) {
            *column = simpler;
            *function = field.reduce(&field.product(function, &constant));
        }
    }
}

/// dz = Σ (aᵢ + bᵢ z + cᵢ z²) dpᵢ with z = φ(y).
pub struct Reduced {
    /// φ(y).
    pub z: Element,
    /// φ′(y).
    pub slope: Element,
    /// The coefficients of 1, of z and of z², each a vector over the goods.
    pub coefficients: [Vec<Element>; 3],
}

impl Reduced {
    /// Whether the coefficient of zᵏ vanishes for every good.
    pub fn lacks(&self, k: usize) -> bool {
        self.coefficients[k].iter().all(Poly::is_zero)
    }
}

/// The changes of variable in which the system has degree at most `degree` in z. Candidates for dz/dy = 1/g are the
/// brackets g h′ − h g′ of the functions of the span, then the functions themselves.
pub fn reductions(system: &System, span: &Span, degree: usize) -> Vec<Reduced> {
    let income = Moving::new(system.field, &[system.income]);
    let mut tried: Vec<Element> = Vec::new();
    let mut found = Vec::new();
    for candidate in slopes(&income, &span.functions) {
        let integral = system.field.inverse(&candidate).ok().and_then(|slope| potential(&income, &[slope]));
        let Some(integral) = integral else { continue };
        match coordinate(&income, &integral) {
            Some((z, slope)) if !tried.contains(&z) => {
                tried.push(z.clone());
                found.extend(reduce(&income, span, z, slope, degree));
            }
            Some(_) => {}
            None => found.extend(exponential(&income, span, &integral)),
        }
    }
    found
}

/// With a single function g and z = ∫dy/g a logarithm of something of unknown sign: ζ = e^(z/κ), dζ = ζ Σ (Aᵢ/κ) dpᵢ.
fn exponential(income: &Moving, span: &Span, integral: &Potential) -> Option<Reduced> {
    let field = income.field;
    let [column] = &span.coefficients[..] else { return None };
    let (scale, _) = integral.logs.first()?;
    let inverse = field.inverse(scale).ok()?;
    let z = field.reduce(&integral.scaled(field, &inverse).exponential(field).ok()?);
    let slope = field.reduce(&field.derivative(&z, *income.symbols.first()?));
    let none = vec![Poly::zero(); column.len()];
    let rates = column.iter().map(|e| field.reduce(&field.product(e, &inverse))).collect();
    Some(Reduced { z, slope, coefficients: [none.clone(), rates, none] })
}

/// The candidates for g with dz/dy = 1/g.
fn slopes(income: &Moving, functions: &[Element]) -> Vec<Element> {
    let field = income.field;
    let mut candidates = Vec::new();
    if functions.len() == 1 {
        return functions.to_vec();
    }
    let y = income.symbols.first().copied();
    for (k, g) in functions.iter().enumerate() {
        for h in &functions[k + 1..] {
            let Some(y) = y else { continue };
            let forth = field.product(g, &field.derivative(h, y));
            let back = field.product(h, &field.derivative(g, y));
            let bracket = field.reduce(&(&field.current(&forth) - &field.current(&back)));
            if !bracket.is_zero() {
                candidates.push(bracket);
            }
        }
    }
    candidates.extend(functions.iter().cloned());
    candidates
}

/// z = ∫ dy/g without constant factors whose sign is known, and dz/dy.
fn coordinate(income: &Moving, integral: &Potential) -> Option<(Element, Element)> {
    let field = income.field;
    let y = *income.symbols.first()?;
    let z = field.reduce(&integral.value(field).ok()?);
    let mut terms = income.collect(&income.clear(&z).numerator).into_iter();
    let z = match (terms.next(), terms.next()) {
        (Some((_, factor)), None) => without_known_factors(field, z, &factor),
        (Some((_, factor)), Some(_)) => match factor.as_constant() {
            Some(q) => z.scale(&q.abs().recip()),
            None => z,
        },
        _ => z,
    };
    let z = field.reduce(&z);
    let slope = field.reduce(&field.derivative(&z, y));
    Some((z, slope))
}

/// z over those factors of its constant coefficient whose sign is known.
fn without_known_factors(field: &Field, z: Element, coefficient: &Element) -> Element {
    let Some((content, monomial)) = coefficient.as_monomial() else { return z };
    let known = monomial.split(|v| orientation(field, &Poly::var(v)).is_some()).0;
    z.mul_term(&content.recip(), &known.inverse())
}

/// The system in z, if every gₖ dz/dy is a polynomial of at most that degree in z with constant coefficients.
fn reduce(income: &Moving, span: &Span, z: Element, slope: Element, degree: usize) -> Option<Reduced> {
    let field = income.field;
    let goods = span.coefficients.first()?.len();
    let mut powers = vec![vec![Poly::one()]];
    for _ in 0..degree {
        let last = powers.last()?.first()?.clone();
        powers.push(vec![field.reduce(&field.product(&last, &z))]);
    }
    let mut coefficients = [vec![Poly::zero(); goods], vec![Poly::zero(); goods], vec![Poly::zero(); goods]];
    for (function, column) in span.functions.iter().zip(&span.coefficients) {
        let image = field.reduce(&field.product(function, &slope));
        let shares = income.constant_combination(&[image], &powers)?;
        for (slot, share) in coefficients.iter_mut().zip(&shares.values) {
            for (total, entry) in slot.iter_mut().zip(column) {
                let sum = &field.current(total) + &field.product(share, entry);
                *total = if span.named { sum } else { field.reduce(&sum) };
            }
        }
    }
    Some(Reduced { z, slope, coefficients })
}

/// Whether the element is a known positive or negative factor; its sign otherwise unknown.
pub fn orientation(field: &Field, e: &Element) -> Option<bool> {
    match field.sign(e) {
        Sign::Positive => Some(true),
        Sign::Negative => Some(false),
        _ => None,
    }
}
