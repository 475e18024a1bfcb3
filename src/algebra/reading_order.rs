//! The order in which an author writes: parameters before prices, prices before functions of them, each by declaration.

use super::field::Field;
use super::generator::{Base, Kind, Role};
use super::monomial::{Monomial, Var};

impl Field {
    /// Parameters alone first, then by how many prices and functions a term holds, then by declaration.
    pub(super) fn reading_order(&self, m: &Monomial) -> (usize, Vec<(u8, usize, i32)>) {
        let moving = m.iter().filter(|(v, _)| !self.is_parameter(*v)).count();
        let mut vars: Vec<(u8, usize, i32)> = m
            .iter()
            .map(|(v, k)| {
                let (class, index) = self.place(v);
                (class, index, k)
            })
            .collect();
        vars.sort_unstable();
        (moving, vars)
    }

    /// Where a variable stands in the order of reading: functions of one symbol go with it.
    pub(super) fn place(&self, var: Var) -> (u8, usize) {
        let of_base = |log: Var, class: u8| match &*self.kind(log) {
            Kind::Ln(Base::Var(base)) => (class, base.index()),
            _ => (class + 2, log.index()),
        };
        match &*self.kind(var) {
            Kind::Symbol(_) if self.is_parameter(var) => (0, var.index()),
            Kind::Symbol(_) => (1, var.index()),
            Kind::Exp(argument) => match self.single_log(argument) {
                Some((log, _)) => of_base(log, 1),
                None => (4, var.index()),
            },
            Kind::Ln(_) => of_base(var, 2),
            _ => (4, var.index()),
        }
    }

    pub(super) fn is_parameter(&self, var: Var) -> bool {
        matches!(self.role(var), Some(Role::Parameter | Role::Unknown))
    }

    pub(super) fn class(&self, var: Var) -> u8 {
        match self.role(var) {
            Some(Role::Parameter | Role::Unknown | Role::Pi) => 1,
            Some(_) => 2,
            None => 3,
        }
    }
}
