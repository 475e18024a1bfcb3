//! The symbols of the field for the declared names, in the order of the file.

use crate::algebra::field::Field;
use crate::algebra::generator::Role;
use crate::algebra::monomial::Var;

use super::declarations::{Declarations, GoodNames, utility_default};
use super::names::FamilyId;
use super::resolve::tuples;

/// The symbol of every declared name.
pub(super) struct Symbols {
    families: Vec<Vec<Var>>,
    prices: Vec<Var>,
    quantities: Vec<Option<Var>>,
    income: Option<Var>,
    utility: Var,
    utility_name: String,
}

impl Symbols {
    /// Declares every name in the field.
    pub fn declare(declarations: &Declarations, field: &Field) -> Symbols {
        let names = &declarations.names;
        let goods = names.goods.len();
        let families: Vec<Vec<Var>> = names
            .families
            .iter()
            .map(|family| {
                let members = tuples(goods, family.arity);
                let member = |at: Vec<usize>| {
                    let var = field.symbol(&names.member_name(&family.name, &at), family.role);
                    family.latex.iter().for_each(|latex| field.set_latex(var, latex));
                    var
                };
                members.map(member).collect()
            })
            .collect();
        let first = |id: &FamilyId| families.get(id.0).and_then(|family| family.first()).copied();
        let per_good = |names: &GoodNames| -> Vec<Var> {
            match names {
                GoodNames::None => Vec::new(),
                GoodNames::Indexed(id) => families.get(id.0).cloned().unwrap_or_default(),
                GoodNames::Plain(ids) => ids.iter().filter_map(first).collect(),
            }
        };
        let prices = per_good(&declarations.prices);
        let mut quantities: Vec<Option<Var>> = per_good(&declarations.quantities).into_iter().map(Some).collect();
        quantities.resize(goods, None);
        let income = declarations.income.as_ref().and_then(first);
        let utility_name = declarations
            .utility
            .map_or_else(|| utility_default(names).to_string(), |id| names.families[id.0].name.clone());
        let declared = declarations.utility.as_ref().and_then(first);
        let utility = declared.unwrap_or_else(|| field.symbol(&utility_name, Role::Utility));
        Symbols { families, prices, quantities, income, utility, utility_name }
    }

    /// The member of a family at a place; its index tuple read as a number to the base of the count of goods.
    pub fn member(&self, id: FamilyId, place: usize) -> Option<Var> {
        self.families.get(id.0).and_then(|family| family.get(place)).copied()
    }

    /// All members of a family.
    pub fn family(&self, id: FamilyId) -> &[Var] {
        self.families.get(id.0).map_or(&[], Vec::as_slice)
    }

    /// All symbols, family by family.
    pub fn all(&self) -> Vec<Var> {
        self.families.iter().flatten().copied().chain([self.utility]).collect()
    }

    /// The price of a good.
    pub fn price(&self, good: usize) -> Option<Var> {
        self.prices.get(good).copied()
    }

    /// All prices.
    pub fn prices(&self) -> &[Var] {
        &self.prices
    }

    /// The quantities, where they have names.
    pub fn quantities(&self) -> &[Option<Var>] {
        &self.quantities
    }

    /// Income.
    pub fn income(&self) -> Option<Var> {
        self.income
    }

    /// The utility level.
    pub fn utility(&self) -> Var {
        self.utility
    }

    /// Its name.
    pub fn utility_name(&self) -> &str {
        &self.utility_name
    }
}
