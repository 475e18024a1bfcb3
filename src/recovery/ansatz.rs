//! Potentials by undetermined coefficients (parallel integration after Risch and Norman).
//!
//! F = Σ xₖ νₖ / D + Σ cⱼ ln bⱼ: the monomials νₖ are found by undoing the derivations on the monomials of the form, the
//! bⱼ are its poles, and all equations θᵢF = gᵢ are solved at once for constants xₖ, cⱼ.

use std::collections::{BTreeMap, BTreeSet};

use num_traits::One;

use crate::algebra::budget;
use crate::algebra::generator::Element;
use crate::algebra::monomial::{Monomial, Var};
use crate::algebra::number::{Rational, rational};
use crate::algebra::polynomial::Poly;

use super::candidates;
use super::fractions::Moving;
use super::frame::{Class, Frame};
use super::linear_solve::{self, Equation};
use super::potential::Potential;
use super::special_integrals::{self, SpecialIntegral};

/// The ansatz for one class: the denominator D, the numerators over P·D, and the poles whose logarithms may occur.
pub struct Ansatz<'f, 'a, 'm> {
    /// The frame of the class.
    pub frame: &'f Frame<'a, 'm>,
    /// D as powers of the values of moving sums; a negative power is a factor of F.
    pub denominator: BTreeMap<Var, i32>,
    /// gᵢ·P·D.
    pub targets: Vec<Poly>,
    /// P·θᵢD/D.
    pub slopes: Vec<Poly>,
    /// What may stand under a new logarithm.
    pub logs: Vec<LogBase>,
    /// Integrals that are special functions.
    pub specials: Vec<SpecialIntegral>,
}

/// What may stand under a new logarithm.
#[derive(Clone, Copy, Debug)]
pub enum LogBase {
    /// A variable of the frame: a pole.
    Pole(Var),
    /// A moving symbol, by its number.
    Symbol(usize),
}

/// How far the search for monomials goes, one attempt after another.
const STAGES: u32 = 3;
/// The most unknowns of one attempt.
const MOST_UNKNOWNS: usize = 1500;

/// The potential of a class, if the ansatz has a solution.
pub fn integrate(frame: &Frame, class: &Class) -> Option<Potential> {
    let ansatz = Ansatz::new(frame, class)?;
    if let Some(found) = ansatz.search() {
        return Some(found);
    }
    if special_integrals::candidates(frame, &grading_key(frame, class)).is_empty() {
        return None;
    }
    // their making may have retired variables
    frame.moving.forget();
    let class = class.current(frame.moving);
    let frame = Frame::new(frame.moving, &class)?;
    let mut ansatz = Ansatz::new(&frame, &class)?;
    ansatz.specials = special_integrals::candidates(&frame, &grading_key(&frame, &class));
    ansatz.search()
}

impl<'f, 'a, 'm> Ansatz<'f, 'a, 'm> {
    fn new(frame: &'f Frame<'a, 'm>, class: &Class) -> Option<Ansatz<'f, 'a, 'm>> {
        let moving = frame.moving;
        let key = grading_key(frame, class);
        let mut denominator = BTreeMap::new();
        let mut lift = BTreeMap::new();
        for (sum, scale) in &frame.scale {
            let pole = class.denominator.get(sum).copied().unwrap_or(0) as i32;
            let own = if is_tied(moving, &key, *sum) { pole - 1 } else { (pole - 1).max(0) };
            denominator.insert(*sum, own);
            lift.insert(*sum, *scale as i32 + own - pole);
        }
        let mut factor = Poly::one();
        for (sum, power) in &lift {
            factor = &factor * &moving.value(*sum).pow(u32::try_from(*power).ok()?);
        }
        let targets = class.numerators.iter().map(|n| moving.field.expand(&(n * &factor))).collect();
        let slopes = slopes(frame, &denominator);
        let logs = if key.is_one() { log_candidates(frame, class) } else { Vec::new() };
        Some(Ansatz { frame, denominator, targets, slopes, logs, specials: Vec::new() })
    }

    /// Tries growing sets of monomials.
    fn search(&self) -> Option<Potential> {
        let mut tried = BTreeSet::new();
        (0..STAGES).find_map(|stage| {
            let monomials = candidates::monomials(self, stage, MOST_UNKNOWNS);
            if tried.insert(monomials.len()) { self.solve(&monomials) } else { None }
        })
    }

    /// P·D·θᵢ(ν/D) for each i.
    pub fn image(&self, monomial: &Monomial) -> Vec<Poly> {
        let moving = self.frame.moving;
        let mut images = Vec::with_capacity(self.slopes.len());
        for (index, slope) in self.slopes.iter().enumerate() {
            let mut parts = vec![slope.neg()];
            for (var, exponent) in monomial.iter() {
                if let Some(rate) = self.frame.rates.get(&var).and_then(|r| r.get(index)) {
                    parts.push(rate.scale(&rational(i64::from(exponent), 1)));
                }
            }
            let total = Poly::sum(parts).mul_term(&Rational::one(), monomial);
            budget::spend(total.len() as u64);
            images.push(moving.field.expand(&total));
        }
        images
    }

    /// P·D·θᵢ ln v for each i.
    fn log_image(&self, base: LogBase) -> Vec<Poly> {
        let below = self.denominator_value();
        let expand = |rate: &Poly| self.frame.moving.field.expand(&(rate * &below));
        match base {
            LogBase::Pole(var) => self.frame.rates.get(&var).into_iter().flatten().map(expand).collect(),
            LogBase::Symbol(own) => (0..self.slopes.len())
                .map(|index| if index == own { expand(&self.frame.scale_value) } else { Poly::zero() })
                .collect(),
        }
    }

    fn denominator_value(&self) -> Poly {
        let moving = self.frame.moving;
        let powers =
            self.denominator.iter().filter_map(|(sum, k)| Some(moving.value(*sum).pow(u32::try_from(*k).ok()?)));
        powers.fold(Poly::one(), |product, power| &product * &power)
    }

    fn solve(&self, monomials: &[Monomial]) -> Option<Potential> {
        let moving = self.frame.moving;
        let mut columns: Vec<Vec<Poly>> = monomials.iter().map(|m| self.image(m)).collect();
        columns.extend(self.logs.iter().map(|base| self.log_image(*base)));
        let below = self.denominator_value();
        for special in &self.specials {
            columns.push(special.image.iter().map(|e| moving.field.expand(&(e * &below))).collect());
        }
        let equations = self.equations(&columns);
        let solution = linear_solve::solve(moving.field, equations, columns.len())?;
        let mut terms = Vec::new();
        for (monomial, value) in monomials.iter().zip(&solution.values) {
            terms.push(value.mul_term(&Rational::one(), monomial));
        }
        let mut logs = Vec::new();
        for (base, value) in self.logs.iter().zip(&solution.values[monomials.len()..]) {
            let var = match base {
                LogBase::Pole(var) => *var,
                LogBase::Symbol(index) => moving.symbols[*index],
            };
            if !value.is_zero() {
                logs.push((value.clone(), moving.field.current(&Poly::var(var))));
            }
        }
        let mut regular = self.over_denominator(&Poly::sum(terms));
        for (special, value) in self.specials.iter().zip(&solution.values[monomials.len() + self.logs.len()..]) {
            let part = moving.field.product(value, &moving.field.current(&special.value));
            regular = &moving.field.current(&regular) + &part;
        }
        Some(Potential { regular, logs, pivots: solution.pivots })
    }

    fn over_denominator(&self, numerator: &Poly) -> Element {
        let moving = self.frame.moving;
        let mut below = BTreeMap::new();
        let mut above = numerator.clone();
        for (sum, power) in &self.denominator {
            match u32::try_from(*power) {
                Ok(power) if power > 0 => {
                    below.insert(*sum, power);
                }
                Ok(_) => {}
                Err(_) => {
                    let named = moving.field.product(&above, &moving.value(*sum).pow(power.unsigned_abs()));
                    above = moving.field.expand(&named);
                }
            }
        }
        moving.field.reduce(&(&above * &moving.below(&below)))
    }

    fn equations(&self, columns: &[Vec<Poly>]) -> Vec<Equation> {
        let moving = self.frame.moving;
        let mut equations = Vec::new();
        for (index, target) in self.targets.iter().enumerate() {
            let mut rows: BTreeMap<Monomial, Equation> = BTreeMap::new();
            for (unknown, column) in columns.iter().enumerate() {
                let Some(entry) = column.get(index) else { continue };
                for (monomial, coefficient) in moving.collect(entry) {
                    rows.entry(monomial).or_default().left.insert(unknown, coefficient);
                }
            }
            for (monomial, coefficient) in moving.collect(target) {
                rows.entry(monomial).or_default().right = coefficient;
            }
            equations.extend(rows.into_values());
        }
        equations
    }
}

/// The powers of grading variables that all terms of the class share.
fn grading_key(frame: &Frame, class: &Class) -> Monomial {
    let first = class.numerators.iter().find_map(|n| n.raw_terms().first().map(|(m, _)| m.clone()));
    first.map_or_else(Monomial::one, |m| m.split(|v| frame.is_grading(v)).0)
}

/// Whether a power or root of the sum itself is a factor of the class, so that the sum may enter F to any power.
fn is_tied(moving: &Moving, key: &Monomial, sum: Var) -> bool {
    key.iter().any(|(var, _)| {
        if var == sum {
            return true;
        }
        moving.rates(var).is_some_and(|rates| rates.iter().any(|rate| rate.denominator.contains_key(&sum)))
    })
}

fn slopes(frame: &Frame, denominator: &BTreeMap<Var, i32>) -> Vec<Poly> {
    (0..frame.moving.symbols.len())
        .map(|index| {
            let parts = denominator.iter().filter_map(|(sum, power)| {
                let rate = frame.rates.get(sum)?.get(index)?;
                let order = order_of(frame.moving, *sum);
                Some(rate.scale(&rational(i64::from(*power) * i64::from(order), 1)))
            });
            Poly::sum(parts.collect())
        })
        .collect()
}

/// N for a root variable R with Rᴺ = value, 1 for a plain sum.
fn order_of(moving: &Moving, sum: Var) -> u32 {
    match &*moving.field.kind(sum) {
        crate::algebra::generator::Kind::Sum { root, .. } => *root,
        _ => 1,
    }
}

/// The poles of the frame, the logarithms and special functions that occur below a fraction bar, and the symbols.
fn log_candidates(frame: &Frame, class: &Class) -> Vec<LogBase> {
    let mut logs: Vec<LogBase> = frame.scale.keys().map(|v| LogBase::Pole(*v)).collect();
    for var in class.variables(frame.moving) {
        let below = class.numerators.iter().any(|n| n.low_degree(var) < 0);
        if below && !frame.is_eigen(var) {
            logs.push(LogBase::Pole(var));
        }
    }
    logs.extend((0..frame.moving.symbols.len()).map(LogBase::Symbol));
    logs
}
