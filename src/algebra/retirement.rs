//! Retiring a variable in favour of finer ones, and keeping the tables in step.
//!
//! When p becomes R², a named sum p − q over it may split into (R − T)(R + T); its logarithm and its powers then
//! split too, so that the bases stay coprime.

use std::rc::Rc;

use super::factor::factor;
use super::field::{Field, Group};
use super::generator::{Base, Element, Kind};
use super::monomial::Var;

impl Field {
    /// From now on `var` is written as `by`. Derivatives, supports and signs that were remembered are forgotten.
    pub(super) fn retire(&self, var: Var, by: Element) {
        {
            let mut tables = self.tables.borrow_mut();
            tables.retired.insert(var, by);
            tables.derivatives.clear();
            tables.moves.clear();
            tables.support.clear();
            tables.levels.clear();
            tables.signs.clear();
        }
        self.rekey_sums();
        self.rekey_logs();
        self.split_sums();
    }

    fn rekey_sums(&self) {
        let mut entries: Vec<(Element, Element)> =
            self.tables.borrow().sums.iter().map(|(k, v)| (k.clone(), v.clone())).collect();
        entries.sort();
        for (value, named) in entries {
            let fresh = self.current(&value);
            if fresh != value {
                self.tables.borrow_mut().sums.entry(fresh).or_insert(named);
            }
        }
    }

    fn rekey_logs(&self) {
        let mut entries: Vec<(Rc<Element>, Var)> = self
            .tables
            .borrow()
            .logs
            .iter()
            .filter_map(|(base, var)| match base {
                Base::Sum(value) => Some((value.clone(), *var)),
                _ => None,
            })
            .collect();
        entries.sort();
        for (value, var) in entries {
            let fresh = self.current(&value);
            if fresh != *value {
                self.tables.borrow_mut().logs.entry(Base::Sum(Rc::new(fresh))).or_insert(var);
            }
        }
    }

    /// Named sums whose value has become reducible give way to the product of their factors.
    fn split_sums(&self) {
        for index in 0..self.len() {
            let var = Var::new(index as u32);
            let Kind::Sum { value, root: 1 } = &*self.kind(var) else { continue };
            let fresh = self.current(value);
            if self.is_retired(var) || fresh == **value || fresh.len() < 2 {
                continue;
            }
            let factored = factor(&fresh);
            let pieces: u32 = factored.factors.iter().map(|(_, k)| k).sum();
            if pieces < 2 {
                continue;
            }
            let mut product = super::polynomial::Poly::term(&factored.content, factored.monomial.clone());
            for (part, exponent) in &factored.factors {
                product = &product * &self.named(part, None).pow(*exponent);
            }
            self.retire(var, product);
            self.split_log(&fresh);
        }
    }

    /// ln of a sum that has split, and the powers built on it, give way to those of the factors where all are positive.
    fn split_log(&self, value: &Element) {
        let known = self.tables.borrow().logs.get(&Base::Sum(Rc::new(value.clone()))).copied();
        let Some(log) = known.filter(|log| !self.is_retired(*log)) else { return };
        let Ok(parts) = self.ln(value) else { return };
        if parts.contains(log) {
            return;
        }
        let powers = self.tables.borrow().exponentials.get(&Group::Log(log)).cloned().unwrap_or_default();
        self.retire(log, parts);
        for power in powers {
            let held = power.value.as_monomial().and_then(|(_, m)| m.iter().next());
            if let Some((var, 1)) = held
                && !self.is_retired(var)
                && matches!(*self.kind(var), Kind::Exp(_))
                && let Ok(finer) = self.exp(&self.current(&power.argument))
                && !finer.contains(var)
            {
                self.retire(var, finer);
            }
        }
    }

    pub(super) fn is_retired(&self, var: Var) -> bool {
        self.tables.borrow().retired.contains_key(&var)
    }
}
