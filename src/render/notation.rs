//! The letters of the theory, chosen so that none of them is a name of the author's.

use std::collections::BTreeSet;

use crate::algebra::field::Field;
use crate::algebra::formula::{Formula, Symbol};
use crate::algebra::generator::{Element, Kind};
use crate::algebra::monomial::Var;
use crate::model::{Coverage, Form, Model};
use crate::render::expression::{Expression, Mark, Object};
use crate::render::formula_text::plain;

/// How the objects of one model are written.
pub struct Notation<'a> {
    model: &'a Model,
    quantity: String,
    share: String,
    expenditure: String,
    indirect: String,
    hicksian: Object,
    slutsky: String,
    outlay: String,
    transformed: String,
    inverse: String,
    income_elasticity: String,
    price_elasticity: String,
    proportion: String,
    arguments: Vec<Expression>,
}

impl<'a> Notation<'a> {
    /// Chooses the letters for a model.
    pub fn new(model: &'a Model) -> Notation<'a> {
        let taken = taken(model);
        let free = |candidates: &[&str]| {
            let found = candidates.iter().find(|letter| !taken.contains(**letter));
            found.or(candidates.last()).map(|letter| (*letter).to_string()).unwrap_or_default()
        };
        let quantity = free(&["x", "q", "d", "X", "demand"]);
        let hicksian = match free(&["h", "H", ""]).as_str() {
            "" => Object::new(quantity.clone()).marked(Mark::Label("h".to_string())),
            letter => Object::new(letter),
        };
        Notation {
            model,
            share: free(&["w", "W", "omega", "share"]),
            expenditure: free(&["e", "E", "C", "expenditure"]),
            indirect: free(&["v", "V", "psi", "Psi", "indirect"]),
            slutsky: match model.demands.is_empty() && !model.inverse.is_empty() {
                true => free(&["A", "Antonelli"]),
                false => free(&["S", "K", "Sigma", "Slutsky"]),
            },
            inverse: free(&["pi", "phi", "Pi", "inverse"]),
            income_elasticity: free(&["eta", "E_m", "incomeelasticity"]),
            price_elasticity: free(&["epsilon", "varepsilon", "xi", "priceelasticity"]),
            proportion: free(&["phi", "kappa", "Phi", "lambda", "proportion"]),
            transformed: free(&["z", "Z", "zeta", "transformed"]),
            outlay: free(&["y", "Y", "z", "outlay"]),
            arguments: arguments(model, &taken),
            hicksian,
            quantity,
        }
    }

    /// The model that is written about.
    pub fn model(&self) -> &'a Model {
        self.model
    }

    /// The field of the model.
    pub fn field(&self) -> &'a Field {
        &self.model.field
    }

    /// x_i: the author's name for the quantity, or a letter with the good below it.
    pub fn quantity(&self, good: usize) -> Expression {
        match self.model.quantities.get(good).copied().flatten() {
            Some(var) => self.variable(var),
            None => Expression::Object(Object::new(self.quantity.clone()).at(self.good(good))),
        }
    }

    /// x_i(p, e(p, u)).
    pub fn quantity_at_expenditure(&self, good: usize) -> Expression {
        Object::new(self.quantity.clone()).at(self.good(good)).of(self.with(self.expenditure())).into()
    }

    /// e(p, v(p, m)).
    pub fn expenditure_at_indirect_utility(&self) -> Expression {
        Object::new(self.expenditure.clone()).of(self.with(self.indirect_utility())).into()
    }

    /// v(p, e(p, u)).
    pub fn indirect_utility_at_expenditure(&self) -> Expression {
        Object::new(self.indirect.clone()).of(self.with(self.expenditure())).into()
    }

    /// w_i.
    pub fn share(&self, good: usize) -> Expression {
        Expression::Object(Object::new(self.share.clone()).at(self.good(good)))
    }

    /// The letter for shares.
    pub fn share_letter(&self) -> Object {
        Object::new(self.share.clone())
    }

    /// x_i with a free index i.
    pub fn quantity_letter(&self) -> Object {
        Object::new(self.quantity.clone())
    }

    /// p_i x_i.
    pub fn outlay(&self, good: usize) -> Expression {
        Expression::Product(vec![self.price(good), self.quantity(good)])
    }

    /// The left side of a demand as the author wrote it.
    pub fn demanded(&self, good: usize) -> Expression {
        match self.model.demands.get(good).map(|demand| demand.form) {
            Some(Form::Share) => self.share(good),
            Some(Form::Outlay | Form::Rest) => self.outlay(good),
            Some(Form::LogDemand) => {
                Expression::Call(crate::algebra::formula::Function::Ln, Box::new(self.quantity(good)))
            }
            Some(Form::Demand) | None => self.quantity(good),
        }
    }

    /// p_i.
    pub fn price(&self, good: usize) -> Expression {
        self.model.prices.get(good).map_or_else(|| Expression::symbol("p"), |var| self.variable(*var))
    }

    /// m.
    pub fn income(&self) -> Expression {
        self.model.income.map_or_else(|| Expression::symbol("m"), |var| self.variable(var))
    }

    /// u.
    pub fn utility(&self) -> Expression {
        self.variable(self.model.utility)
    }

    /// e(p, u).
    pub fn expenditure(&self) -> Expression {
        Object::new(self.expenditure.clone()).of(self.with(self.utility())).into()
    }

    /// e, without arguments.
    pub fn expenditure_letter(&self) -> Expression {
        Expression::symbol(self.expenditure.clone())
    }

    /// v(p, m).
    pub fn indirect_utility(&self) -> Expression {
        Object::new(self.indirect.clone()).of(self.with(self.income())).into()
    }

    /// v, without arguments.
    pub fn indirect_letter(&self) -> Expression {
        Expression::symbol(self.indirect.clone())
    }

    /// h_i(p, u).
    pub fn hicksian(&self, good: usize) -> Expression {
        self.hicksian.clone().at(self.good(good)).of(self.with(self.utility())).into()
    }

    /// π_i, price over income.
    pub fn inverse_letter(&self) -> Object {
        Object::new(self.inverse.clone())
    }

    /// η.
    pub fn income_elasticity(&self) -> Object {
        Object::new(self.income_elasticity.clone())
    }

    /// ε.
    pub fn price_elasticity(&self) -> Object {
        Object::new(self.price_elasticity.clone())
    }

    /// A letter for a factor of proportion.
    pub fn proportion(&self) -> Expression {
        Expression::symbol(self.proportion.clone())
    }

    /// The letters of quantities with an index.
    pub fn quantity_family(&self, index: &str) -> Expression {
        let first = self.model.quantities.first().copied().flatten().and_then(|var| self.model.field.name(var));
        let letter = first.map_or_else(|| self.quantity.clone(), |name| head(&name).to_string());
        Object::new(letter).at(index).into()
    }

    /// S.
    pub fn slutsky(&self) -> Object {
        Object::new(self.slutsky.clone())
    }

    /// S_ij.
    pub fn slutsky_entry(&self, i: usize, j: usize) -> Expression {
        self.slutsky().at(self.good(i)).at(self.good(j)).into()
    }

    /// The letter for outlays p_i x_i, where they are talked about as functions.
    pub fn outlay_letter(&self) -> Object {
        Object::new(self.outlay.clone())
    }

    /// The expression for a function of a derivation, by its name there: "share bread", "outlay bread", and others as
    /// they are called.
    pub fn named_function(&self, name: &str) -> Expression {
        match name.split_once(' ') {
            Some(("share", good)) => self.share_letter().at(good).into(),
            Some(("outlay", good)) => self.outlay_letter().at(good).into(),
            Some(("quantity", good)) => self.quantity_letter().at(good).into(),
            _ if name == "e" => self.expenditure_letter(),
            _ if name == "v" => self.indirect_letter(),
            _ => Expression::symbol(name),
        }
    }

    /// The letter for a function of income in which a system is linear.
    pub fn transformed_income(&self) -> Expression {
        Expression::symbol(self.transformed.clone())
    }

    /// The price family with a letter for its index.
    pub fn price_letter(&self, index: &str) -> Expression {
        let first = self.model.prices.first().and_then(|var| self.model.field.name(*var)).unwrap_or_default();
        Object::new(head(&first)).at(index).into()
    }

    /// U(x), the direct utility function.
    pub fn direct_utility(&self) -> Expression {
        let goods = 0..self.model.goods.len();
        Object::new("U").of(goods.map(|good| self.quantity(good)).collect()).into()
    }

    /// The arguments that stand for all prices, and one more.
    fn with(&self, last: Expression) -> Vec<Expression> {
        self.arguments.iter().cloned().chain([last]).collect()
    }

    /// What the price arguments stand for, where one letter stands for several prices.
    pub fn price_vector(&self) -> Option<(Expression, Vec<Expression>)> {
        let prices = self.price_symbols();
        match self.arguments.as_slice() {
            [vector] if prices.len() > 1 => Some((vector.clone(), prices)),
            _ => None,
        }
    }

    fn price_symbols(&self) -> Vec<Expression> {
        all_prices(self.model).into_iter().map(|var| self.variable(var)).collect()
    }

    /// The name of a good.
    pub fn good(&self, good: usize) -> String {
        self.model.goods.get(good).map(|good| good.name.clone()).unwrap_or_default()
    }

    /// A variable of the field.
    pub fn variable(&self, var: Var) -> Expression {
        Expression::from(self.model.field.variable_formula(var))
    }

    /// An element as it is best read: as it stands, or reduced to one factored fraction, whichever is shorter.
    pub fn element(&self, e: &Element) -> Expression {
        Expression::from(self.formula(e))
    }

    /// The formula of [`Notation::element`].
    pub fn formula(&self, e: &Element) -> Formula {
        best_formula(&self.model.field, e)
    }
}

/// Longer elements are not factored for print.
const MOST_TERMS: usize = 60;
/// The most work spent on finding a shorter form of one formula.
const SHORTENING_WORK: u64 = 3_000_000;

/// An element as it stands, or reduced to one factored fraction where that is shorter by a fifth in print.
pub fn best_formula(field: &Field, e: &Element) -> Formula {
    let as_it_stands = field.formula(e);
    if longest(field, e) > MOST_TERMS {
        return as_it_stands;
    }
    let length = plain(&as_it_stands).len();
    let reduced = crate::algebra::budget::attempt(SHORTENING_WORK, || field.reduced_formula(e));
    match reduced {
        Ok(reduced) if plain(&reduced).len() * 5 < length * 4 => reduced,
        _ => as_it_stands,
    }
}

/// The terms of the longest sum in sight or behind a name.
fn longest(field: &Field, e: &Element) -> usize {
    let behind = e.vars().into_iter().map(|var| match &*field.kind(var) {
        Kind::Sum { value, .. } => longest(field, value),
        _ => 1,
    });
    behind.max().unwrap_or(0).max(e.len())
}

fn all_prices(model: &Model) -> Vec<Var> {
    let others = match &model.coverage {
        Coverage::Others(others) => others.as_slice(),
        _ => &[],
    };
    model.prices.iter().chain(others).copied().collect()
}

/// The names that the author uses, and the letters in front of their subscripts.
fn taken(model: &Model) -> BTreeSet<String> {
    let vars = all_prices(model).into_iter().chain(model.income).chain(model.quantities.iter().copied().flatten());
    let vars = vars.chain([model.utility]).chain(model.parameters.iter().map(|parameter| parameter.var));
    let names = vars.filter_map(|var| model.field.name(var));
    let names = names.chain(model.abbreviations.iter().map(|(name, _)| name.clone()));
    names.flat_map(|name| [head(&name).to_string(), name]).collect()
}

fn head(name: &str) -> &str {
    let end = name.find(|c: char| c == '[' || c == '_' || c.is_ascii_digit()).filter(|end| *end > 0);
    &name[..end.unwrap_or(name.len())]
}

/// One letter for all prices where they share it and nothing else has it; otherwise the prices, one by one.
fn arguments(model: &Model, taken: &BTreeSet<String>) -> Vec<Expression> {
    let prices = all_prices(model);
    let names: Vec<String> = prices.iter().filter_map(|var| model.field.name(*var)).collect();
    let symbols = || prices.iter().map(|var| Expression::from(model.field.variable_formula(*var))).collect();
    let Some(letter) = names.first().map(|name| head(name).to_string()) else { return Vec::new() };
    let one_letter = names.iter().all(|name| head(name) == letter && *name != letter);
    let whole: BTreeSet<&str> = names.iter().map(String::as_str).collect();
    let elsewhere = taken.contains(&letter) && others_use(model, &letter, &whole);
    match names.len() > 1 && one_letter && !elsewhere {
        true => vec![Expression::Symbol(Symbol::new(letter))],
        false => symbols(),
    }
}

/// Whether something that is no price goes by the letter.
fn others_use(model: &Model, letter: &str, prices: &BTreeSet<&str>) -> bool {
    let vars = model.income.into_iter().chain(model.quantities.iter().copied().flatten()).chain([model.utility]);
    let vars = vars.chain(model.parameters.iter().map(|parameter| parameter.var));
    let names = vars.filter_map(|var| model.field.name(var)).chain(model.abbreviations.iter().map(|(n, _)| n.clone()));
    names.filter(|name| !prices.contains(name.as_str())).any(|name| name == letter)
}
