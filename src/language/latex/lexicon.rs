//! What the declarations of a file say about names in LaTeX: which letters with which scripts are one name.

use super::super::syntax::*;
use super::macros::Macros;
use super::names::{Key, key_of_form, key_of_name};

/// What kind of number a name stands for.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Role {
    /// A price; that of the good at this place where the names are plain.
    Price(Option<usize>),
    /// A quantity, likewise.
    Quantity(Option<usize>),
    /// Income.
    Income,
    /// The utility level.
    Utility,
    /// A parameter, or the price of the others.
    Parameter,
    /// The author's abbreviation.
    Abbreviation,
}

/// A declared name.
#[derive(Clone, Debug)]
pub struct Known {
    /// The name in model files.
    pub name: String,
    /// How many indices it has.
    pub arity: usize,
    /// What it stands for.
    pub role: Role,
    /// How it is set: by the declared LaTeX form, else as its letters are.
    pub key: Key,
    /// How its letters are set, where another LaTeX form is declared.
    pub plain: Option<Key>,
    /// The arguments it was defined with, `(p)`, as text; none for a plain name.
    pub arguments: Option<String>,
}

/// The declared names of a file, and the author's commands.
#[derive(Clone, Debug, Default)]
pub struct Lexicon {
    /// The goods, in order.
    pub goods: Vec<String>,
    /// Whether they are named rather than numbered.
    pub goods_named: bool,
    /// The groups of goods.
    pub groups: Vec<String>,
    /// The names.
    pub names: Vec<Known>,
    /// The commands.
    pub macros: Macros,
    /// Whether declarations could not be read, so that an unknown name proves nothing.
    pub incomplete: bool,
}

impl Lexicon {
    /// Takes in what a statement declares.
    pub fn take(&mut self, statement: &Statement) {
        match statement {
            Statement::Goods(Goods::Named(names)) => {
                self.goods_named = true;
                self.goods = names.iter().map(|name| name.text.clone()).collect();
            }
            Statement::Goods(Goods::Numbered { last, .. }) => {
                self.goods = (1..=*last).map(|number| number.to_string()).collect();
            }
            Statement::Group { name, .. } => self.groups.push(name.text.clone()),
            Statement::Prices(list) => self.per_good(list, Role::Price),
            Statement::Quantities(list) => self.per_good(list, Role::Quantity),
            Statement::Income(one) => self.declare(one, Role::Income),
            Statement::Utility(one) => self.declare(one, Role::Utility),
            Statement::Parameters(list) | Statement::Others(Others::Prices(list)) => {
                list.iter().for_each(|one| self.declare(one, Role::Parameter));
            }
            Statement::Let { name, .. } => self.declare(name, Role::Abbreviation),
            _ => {}
        }
    }

    fn per_good(&mut self, list: &[Declared], role: fn(Option<usize>) -> Role) {
        for (place, one) in list.iter().enumerate() {
            self.declare(one, role(one.indices.is_empty().then_some(place)));
        }
    }

    /// Takes in a name.
    pub fn declare(&mut self, declared: &Declared, role: Role) {
        let plain = key_of_name(&declared.name.text);
        let form = declared.latex.as_deref().and_then(key_of_form).filter(|form| *form != plain);
        let (key, plain) = match form {
            Some(form) => (form, Some(plain)),
            None => (plain, None),
        };
        let (name, arity) = (declared.name.text.clone(), declared.indices.len());
        self.names.push(Known { name, arity, role, key, plain, arguments: None });
    }

    /// The utility level has a name, declared or not: the first of u, U, θ, κ that nothing else has.
    pub fn imply_utility(&mut self) {
        if self.names.iter().any(|known| known.role == Role::Utility) {
            return;
        }
        let free = |name: &&&str| self.known(name).is_none() && !self.goods.iter().any(|good| good == *name);
        if let Some(name) = ["u", "U", "theta", "kappa"].iter().find(free) {
            let (name, key) = (name.to_string(), key_of_name(name));
            self.names.push(Known { name, arity: 0, role: Role::Utility, key, plain: None, arguments: None });
        }
    }

    /// The good with this name, or whose price or quantity is a plain name with this subscript.
    pub fn good(&self, written: &str) -> Option<usize> {
        let compact = |name: &str| name.replace('_', "");
        let named = self.goods.iter().position(|good| compact(good) == written);
        named.or_else(|| self.good_by_subscript(written))
    }

    fn good_by_subscript(&self, written: &str) -> Option<usize> {
        if written.is_empty() {
            return None;
        }
        self.names.iter().find_map(|known| match known.role {
            Role::Price(Some(place)) | Role::Quantity(Some(place)) if known.key.below == written => {
                self.goods.get(place).map(|_| place)
            }
            _ => None,
        })
    }

    /// A good as an index between square brackets.
    pub fn good_index(&self, place: usize) -> Index {
        match self.goods.get(place) {
            Some(name) if self.goods_named => Index::Name(name.clone()),
            _ => Index::Number(u32::try_from(place + 1).unwrap_or(u32::MAX)),
        }
    }

    /// The declared names as they are written in model files.
    pub fn spelled(&self) -> impl Iterator<Item = &str> {
        self.names.iter().map(|known| known.name.as_str())
    }

    /// The declared name.
    pub fn known(&self, name: &str) -> Option<&Known> {
        self.names.iter().find(|known| known.name == name)
    }
}
