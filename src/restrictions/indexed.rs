//! Restrictions said in indices: `g[i,j]` = `g[j,i]` rather than an equation for every pair of goods.
//!
//! A general statement is used where every instance of it holds on the branch; it then stands for all equations that
//! follow from its instances, and what does not follow is said singly. Linear algebra on linear equations.

use std::collections::BTreeMap;

use num_traits::Zero;

use crate::algebra::field::Field;
use crate::algebra::generator::Element;
use crate::algebra::monomial::{Monomial, Var};
use crate::algebra::number::Rational;
use crate::algebra::polynomial::Poly;
use crate::model::Model;

use super::terms::put_in;

/// What a general statement says of a family of parameters.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Pattern {
    /// All members vanish.
    Zero,
    /// `F[i,j]` = 0 for i ≠ j.
    Diagonal,
    /// `F[i,j]` = `F[j,i]`.
    Symmetric,
    /// Σᵢ `F[i,j]` = 0 for every j.
    ColumnsVanish,
    /// Σⱼ `F[i,j]` = 0 for every i.
    RowsVanish,
    /// Σᵢ `F[i]` is a number.
    Total(Rational),
}

/// A statement of a branch.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Statement {
    /// A general statement about a family.
    General {
        /// The name of the family.
        family: String,
        /// Whether its members have two indices.
        paired: bool,
        /// What is said.
        pattern: Pattern,
    },
    /// The equation at this place of the branch.
    Single(usize),
}

/// The fewest goods for which indices are shorter than single equations.
const FEWEST_GOODS: usize = 3;

/// A family of parameters with a member for each good or each pair of goods.
struct Family {
    name: String,
    paired: bool,
    members: Vec<Element>,
}

impl Family {
    fn member(&self, goods: usize, i: usize, j: usize) -> Element {
        self.members[i * goods + j].clone()
    }
}

/// The equations of a branch in as few statements as the patterns allow.
pub fn statements(model: &Model, equations: &[(Var, Element)]) -> Vec<Statement> {
    let goods = model.goods.len();
    let mut known = Echelon::default();
    let mut out = Vec::new();
    if goods >= FEWEST_GOODS {
        for family in families(model) {
            for (pattern, instances) in patterns(model, &family, equations) {
                let holds = |e: &Element| put_in(&model.field, e, equations).is_ok_and(|e| model.field.is_zero(&e));
                let new = |e: &Element| !known.reduced(&model.field.expand(e)).is_zero();
                let fresh = instances.iter().filter(|e| new(e)).count();
                if fresh == 0 || (fresh < 2 && !matches!(pattern, Pattern::Total(_))) || !instances.iter().all(holds) {
                    continue;
                }
                instances.iter().for_each(|e| known.insert(&model.field.expand(e)));
                out.push(Statement::General { family: family.name.clone(), paired: family.paired, pattern });
            }
        }
    }
    for (place, (v, value)) in equations.iter().enumerate() {
        let gap = model.field.expand(&(&Poly::var(*v) - value));
        if !known.reduced(&gap).is_zero() {
            known.insert(&gap);
            out.push(Statement::Single(place));
        }
    }
    out
}

/// The families of the model that are indexed by all goods; eliminated members as what stands for them.
fn families(model: &Model) -> Vec<Family> {
    let goods = model.goods.len();
    let mut by_name: Vec<(String, Vec<(String, Element)>)> = Vec::new();
    for parameter in &model.parameters {
        let Some((head, indices)) = parameter.name.strip_suffix(']').and_then(|name| name.split_once('[')) else {
            continue;
        };
        let value = parameter.eliminated.clone().unwrap_or_else(|| Poly::var(parameter.var));
        match by_name.iter_mut().find(|(name, _)| name == head) {
            Some((_, members)) => members.push((indices.to_string(), value)),
            None => by_name.push((head.to_string(), vec![(indices.to_string(), value)])),
        }
    }
    let family = |(name, members): (String, Vec<(String, Element)>)| {
        let paired = members.iter().all(|(indices, _)| indices.contains(','));
        let size = if paired { goods * goods } else { goods };
        let members: Vec<Element> = members.into_iter().map(|(_, value)| value).collect();
        (members.len() == size).then_some(Family { name, paired, members })
    };
    by_name.into_iter().filter_map(family).collect()
}

/// What might be said of a family, each with its instances: elements that vanish where it is true.
fn patterns(model: &Model, family: &Family, equations: &[(Var, Element)]) -> Vec<(Pattern, Vec<Element>)> {
    let n = model.goods.len();
    let mut all = vec![(Pattern::Zero, family.members.clone())];
    if !family.paired {
        all.extend(total(model, family, equations));
        return all;
    }
    let pairs = || (0..n).flat_map(move |i| (0..n).map(move |j| (i, j)));
    let at = |i: usize, j: usize| family.member(n, i, j);
    let off = pairs().filter(|(i, j)| i != j).map(|(i, j)| at(i, j)).collect();
    let mirrored = pairs().filter(|(i, j)| i < j).map(|(i, j)| &at(j, i) - &at(i, j)).collect();
    let columns = (0..n).map(|j| Poly::sum((0..n).map(|i| at(i, j)).collect())).collect();
    let rows = (0..n).map(|i| Poly::sum((0..n).map(|j| at(i, j)).collect())).collect();
    all.push((Pattern::Diagonal, off));
    all.push((Pattern::Symmetric, mirrored));
    all.push((Pattern::ColumnsVanish, columns));
    all.push((Pattern::RowsVanish, rows));
    all
}

/// Σ `F[i]` where it is a number.
fn total(model: &Model, family: &Family, equations: &[(Var, Element)]) -> Option<(Pattern, Vec<Element>)> {
    let field: &Field = &model.field;
    let sum = Poly::sum(family.members.clone());
    let value = field.expand(&put_in(field, &sum, equations).ok()?).as_constant()?;
    Some((Pattern::Total(value.clone()), vec![&sum - &Poly::constant(&value)]))
}

/// Elements reduced against each other, by their leading monomials.
#[derive(Default)]
struct Echelon {
    rows: BTreeMap<Monomial, Element>,
}

impl Echelon {
    /// What is left of an element when multiples of the rows by numbers are taken away.
    fn reduced(&self, e: &Element) -> Element {
        let mut e = e.clone();
        let mut done = Poly::zero();
        while let Some((monomial, coefficient)) = e.leading().map(|(m, c)| (m.clone(), c)) {
            match self.rows.get(&monomial) {
                Some(row) => e = &e - &row.scale(&coefficient),
                None => {
                    let term = Poly::term(&coefficient, monomial);
                    e = &e - &term;
                    done = &done + &term;
                }
            }
        }
        done
    }

    fn insert(&mut self, e: &Element) {
        let row = self.reduced(e);
        if let Some((monomial, coefficient)) = row.leading().map(|(m, c)| (m.clone(), c))
            && !coefficient.is_zero()
        {
            self.rows.insert(monomial, row.scale(&coefficient.recip()));
        }
    }
}
