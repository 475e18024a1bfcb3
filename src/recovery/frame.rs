//! A class of a one-form, and how the derivations θᵢ = pᵢ∂/∂pᵢ act on the variables that occur in it.

use std::collections::{BTreeMap, BTreeSet};
use std::rc::Rc;

use crate::algebra::generator::{Base, Kind};
use crate::algebra::monomial::Var;
use crate::algebra::polynomial::Poly;

use super::fractions::{Cleared, Moving};

/// Part of a one-form in θᵢ: numeratorᵢ / Π value(sum)ᵏ for each i.
#[derive(Clone, Debug)]
pub struct Class {
    /// One numerator for each moving symbol.
    pub numerators: Vec<Poly>,
    /// The common denominator.
    pub denominator: BTreeMap<Var, u32>,
}

impl Class {
    /// Whether nothing is left to integrate.
    pub fn is_zero(&self) -> bool {
        self.numerators.iter().all(Poly::is_zero)
    }

    /// The class with factors common to all numerators and the denominator cancelled.
    pub fn cancelled(mut self, moving: &Moving) -> Class {
        for (sum, power) in self.denominator.iter_mut() {
            let value = moving.value(*sum);
            while *power > 0 {
                let divided: Option<Vec<Poly>> = self.numerators.iter().map(|n| n.div_exact(&value)).collect();
                let Some(divided) = divided else { break };
                self.numerators = divided;
                *power -= 1;
            }
        }
        self.denominator.retain(|_, power| *power > 0);
        self
    }

    /// The class in variables that are still in use.
    pub fn current(&self, moving: &Moving) -> Class {
        let numerators = self.numerators.iter().map(|n| moving.field.expand(n)).collect();
        Class { numerators, denominator: self.denominator.clone() }
    }

    /// The moving variables of the numerators.
    pub fn variables(&self, moving: &Moving) -> BTreeSet<Var> {
        self.numerators.iter().flat_map(Poly::vars).filter(|v| moving.moves(*v)).collect()
    }
}

/// θᵢv/v for the variables of a class, over one common denominator P.
pub struct Frame<'a, 'f> {
    /// What moves.
    pub moving: &'a Moving<'f>,
    /// P as powers of moving sums; every pole of the class is among them.
    pub scale: BTreeMap<Var, u32>,
    /// P expanded.
    pub scale_value: Poly,
    /// P·θᵢv/v for each variable v: one polynomial for each moving symbol i. Poles are among the variables.
    pub rates: BTreeMap<Var, Vec<Poly>>,
    grading: BTreeSet<Var>,
}

/// The most variables that one frame follows.
const MOST_VARIABLES: usize = 4000;

impl<'a, 'f> Frame<'a, 'f> {
    /// The frame of a class: its variables, its poles, and all variables that their derivatives bring in.
    pub fn new(moving: &'a Moving<'f>, class: &Class) -> Option<Frame<'a, 'f>> {
        let mut waiting: Vec<Var> = class.variables(moving).into_iter().collect();
        waiting.extend(class.denominator.keys());
        let mut cleared: BTreeMap<Var, Rc<Vec<Cleared>>> = BTreeMap::new();
        let mut scale: BTreeMap<Var, u32> = class.denominator.keys().map(|v| (*v, 1)).collect();
        let mut mixing: BTreeSet<Var> = BTreeSet::new();
        while let Some(var) = waiting.pop() {
            if cleared.contains_key(&var) {
                continue;
            }
            if cleared.len() > MOST_VARIABLES {
                return None;
            }
            let rates = moving.rates(var)?;
            for rate in rates.iter() {
                for (sum, power) in &rate.denominator {
                    let slot = scale.entry(*sum).or_insert(0);
                    *slot = (*slot).max(*power);
                    waiting.push(*sum);
                }
                let seen: Vec<Var> = rate.numerator.vars().into_iter().filter(|v| moving.moves(*v)).collect();
                mixing.extend(&seen);
                waiting.extend(seen);
            }
            if moving.is_moving_sum(var) {
                let inside: Vec<Var> = moving.value(var).vars().into_iter().filter(|v| moving.moves(*v)).collect();
                if scale.contains_key(&var) {
                    mixing.extend(&inside);
                }
                waiting.extend(inside);
            }
            cleared.insert(var, rates);
        }
        let scale_value = moving.raise(&Cleared { numerator: Poly::one(), denominator: BTreeMap::new() }, &scale);
        let rates: BTreeMap<Var, Vec<Poly>> = cleared
            .iter()
            .map(|(var, list)| (*var, list.iter().map(|rate| moving.raise(rate, &scale)).collect()))
            .collect();
        let grading = cleared.keys().copied().filter(|v| is_eigen(moving, *v) && !mixing.contains(v)).collect();
        Some(Frame { moving, scale, scale_value, rates, grading })
    }

    /// Whether the variable only ever multiplies: θᵢ keeps its power, and it occurs in no pole and no rate.
    pub fn is_grading(&self, var: Var) -> bool {
        self.grading.contains(&var)
    }

    /// Whether θᵢv = v·(something free of v): symbols, exponentials, powers and roots.
    pub fn is_eigen(&self, var: Var) -> bool {
        is_eigen(self.moving, var)
    }
}

fn is_eigen(moving: &Moving, var: Var) -> bool {
    match &*moving.field.kind(var) {
        Kind::Symbol(_) | Kind::Exp(_) => true,
        Kind::Sum { root, .. } => *root > 1,
        _ => false,
    }
}

/// The symbol whose plain logarithm the variable is.
pub fn log_of_symbol(moving: &Moving, var: Var) -> Option<Var> {
    match &*moving.field.kind(var) {
        Kind::Ln(Base::Var(base)) if moving.symbols.contains(base) => Some(*base),
        _ => None,
    }
}
