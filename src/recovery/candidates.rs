//! Which monomials an ansatz needs: those whose derivatives meet the monomials of the form.

use std::collections::{BTreeMap, BTreeSet};

use crate::algebra::budget;
use crate::algebra::generator::Kind;
use crate::algebra::monomial::{Monomial, Var};
use crate::algebra::polynomial::Poly;

use super::ansatz::Ansatz;

/// How often derivatives of candidates are themselves undone.
const ROUNDS: usize = 16;

/// The candidates of a stage: 0 undoes products and lowers logarithms; 1 also undoes what the candidates' own derivatives
/// bring in; 2 also raises logarithms.
pub fn monomials(ansatz: &Ansatz, stage: u32, most: usize) -> Vec<Monomial> {
    let mut search = Search::new(ansatz, stage, most);
    search.run();
    search.found.into_iter().collect()
}

struct Search<'s, 'f, 'a, 'm> {
    ansatz: &'s Ansatz<'f, 'a, 'm>,
    stage: u32,
    most: usize,
    targets: BTreeSet<Monomial>,
    /// What θᵢ multiplies a monomial by, apart from logarithms.
    factors: Vec<Monomial>,
    /// For each logarithm (or other primitive): the monomials of P·θᵢ of it.
    raises: Vec<(Var, Vec<Monomial>)>,
    bounds: Bounds,
    found: BTreeSet<Monomial>,
}

impl<'s, 'f, 'a, 'm> Search<'s, 'f, 'a, 'm> {
    fn new(ansatz: &'s Ansatz<'f, 'a, 'm>, stage: u32, most: usize) -> Search<'s, 'f, 'a, 'm> {
        let frame = ansatz.frame;
        let moving = frame.moving;
        let support =
            |p: &Poly| -> Vec<Monomial> { p.raw_terms().iter().map(|(m, _)| m.split(|v| moving.moves(v)).0).collect() };
        let targets: BTreeSet<Monomial> = ansatz.targets.iter().flat_map(support).collect();
        let mut factors: BTreeSet<Monomial> = ansatz.slopes.iter().flat_map(support).collect();
        let mut raises = Vec::new();
        for (var, rates) in &frame.rates {
            if frame.is_eigen(*var) {
                factors.extend(rates.iter().flat_map(support));
            } else if !matches!(*moving.field.kind(*var), Kind::Sum { .. }) {
                let above = Monomial::power(*var, 1);
                let slopes: BTreeSet<Monomial> = rates.iter().flat_map(support).map(|m| m.mul(&above)).collect();
                raises.push((*var, slopes.into_iter().collect()));
            }
        }
        factors.extend(support(&frame.scale_value));
        let bounds = Bounds::new(ansatz, &targets, &factors, stage);
        let factors = factors.into_iter().collect();
        Search { ansatz, stage, most, targets, factors, raises, bounds, found: BTreeSet::new() }
    }

    fn run(&mut self) {
        let mut fresh: Vec<Monomial> = self.targets.iter().cloned().collect();
        let own_targets = self.stage > 0 || self.factors.len() <= 4;
        for _ in 0..ROUNDS {
            let added = self.undo(&fresh);
            if added.is_empty() || !own_targets || self.found.len() >= self.most {
                break;
            }
            fresh = self.new_targets(&added);
        }
    }

    /// The candidates that reach these monomials by one derivation.
    fn undo(&mut self, targets: &[Monomial]) -> Vec<Monomial> {
        let mut added = Vec::new();
        for target in targets {
            budget::spend(self.factors.len() as u64);
            for factor in self.factors.clone() {
                self.offer(target.div(&factor), &mut added);
            }
            for (var, slopes) in self.raises.clone() {
                if self.stage >= 2 || target.exponent(var) < 0 {
                    for slope in &slopes {
                        self.offer(target.mul(&Monomial::power(var, 1)).div(slope), &mut added);
                    }
                }
            }
            if self.found.len() >= self.most {
                break;
            }
        }
        added
    }

    /// Takes a candidate in, together with those of lower degree in each logarithm.
    fn offer(&mut self, candidate: Monomial, added: &mut Vec<Monomial>) {
        if self.found.len() >= self.most || self.found.contains(&candidate) || !self.bounds.allow(&candidate) {
            return;
        }
        self.found.insert(candidate.clone());
        added.push(candidate.clone());
        for (var, k) in candidate.iter() {
            if k > 0 && self.raises.iter().any(|(log, _)| *log == var) {
                self.offer(candidate.div(&Monomial::power(var, 1)), added);
            }
        }
    }

    fn new_targets(&mut self, added: &[Monomial]) -> Vec<Monomial> {
        let moving = self.ansatz.frame.moving;
        let mut fresh = Vec::new();
        for candidate in added {
            for image in self.ansatz.image(candidate) {
                for (monomial, _) in image.raw_terms() {
                    let monomial = monomial.split(|v| moving.moves(v)).0;
                    if self.targets.insert(monomial.clone()) {
                        fresh.push(monomial);
                    }
                }
            }
        }
        fresh
    }
}

/// Bounds for the exponents of a candidate, from the exponents of the form: nothing cancels at the outermost ones.
struct Bounds {
    low: BTreeMap<Var, i32>,
    high: BTreeMap<Var, i32>,
    roots: Vec<(Var, i32)>,
}

impl Bounds {
    fn new(ansatz: &Ansatz, targets: &BTreeSet<Monomial>, factors: &BTreeSet<Monomial>, stage: u32) -> Bounds {
        let frame = ansatz.frame;
        let (target_low, target_high) = extent(targets.iter());
        let acting = Bounds::acting(ansatz);
        let (scale_low, scale_high) = extent(frame.scale_value.raw_terms().iter().map(|(m, _)| m));
        let (factor_low, factor_high) = extent(factors.iter());
        let mut bounds = Bounds { low: BTreeMap::new(), high: BTreeMap::new(), roots: Vec::new() };
        for var in frame.rates.keys() {
            if let Kind::Sum { root, .. } = &*frame.moving.field.kind(*var) {
                bounds.roots.push((*var, *root as i32));
                continue;
            }
            // at first as if nothing cancelled in what multiplies a candidate
            let (reach, least) = if stage == 0 {
                let reach = acting.iter().map(|(low, _)| low.exponent(*var)).max();
                (reach.unwrap_or(0), acting.iter().map(|(_, high)| high.exponent(*var)).min().unwrap_or(0))
            } else {
                (factor_high.exponent(*var), factor_low.exponent(*var))
            };
            let mut low = target_low.exponent(*var) - reach;
            let mut high = target_high.exponent(*var) - least;
            // a rate that itself moves with the variable (of e^(kp), say) reaches down to the power zero
            let grows = factor_high.exponent(*var) > scale_high.exponent(*var);
            if grows {
                low = low.min(0);
            }
            if factor_low.exponent(*var) < scale_low.exponent(*var) {
                high = high.max(0);
            }
            if !frame.is_eigen(*var) {
                low = low.min(0);
                high = target_high.exponent(*var) + i32::from(stage >= 2);
                if target_low.exponent(*var) < 0 {
                    high += 1;
                }
            }
            bounds.low.insert(*var, low);
            bounds.high.insert(*var, high.max(low));
        }
        bounds
    }

    /// The extent of each polynomial that may multiply a candidate in its image.
    fn acting(ansatz: &Ansatz) -> Vec<(Monomial, Monomial)> {
        let frame = ansatz.frame;
        let rates = frame
            .rates
            .iter()
            .filter(|(var, _)| frame.is_eigen(**var) && !matches!(*frame.moving.field.kind(**var), Kind::Sum { .. }));
        let all = rates.flat_map(|(_, list)| list).chain(&ansatz.slopes).filter(|p| !p.is_zero());
        let extents: BTreeSet<(Monomial, Monomial)> =
            all.map(|p| extent(p.raw_terms().iter().map(|(m, _)| m))).collect();
        extents.into_iter().collect()
    }

    fn allow(&self, candidate: &Monomial) -> bool {
        let roots = self.roots.iter().all(|(var, order)| (0..*order).contains(&candidate.exponent(*var)));
        let low = self.low.iter().all(|(var, low)| candidate.exponent(*var) >= *low);
        roots && low && candidate.iter().all(|(var, k)| self.high.get(&var).is_none_or(|high| k <= *high))
    }
}

/// The least and the greatest exponents that occur, variable by variable.
fn extent<'x>(mut monomials: impl Iterator<Item = &'x Monomial>) -> (Monomial, Monomial) {
    let Some(first) = monomials.next() else { return (Monomial::one(), Monomial::one()) };
    monomials.fold((first.clone(), first.clone()), |(low, high), m| (low.meet(m), high.join(m)))
}
