//! An evaluation of model files from outside: it walks the syntax tree in floating point and knows nothing of the
//! program's algebra, of how it checks, or of what it found.

pub mod dual;
pub mod integrability;

use std::collections::BTreeMap;

use dual::Dual;
use mainspring::language::{
    self, Comparison, Expr, ExprKind, Form, Function, Goods, Index, Others, Over, Reference, Relation, Source,
    Statement, Target,
};
use num_traits::ToPrimitive;

/// A model file as it stands, ready to be evaluated.
pub struct Outside {
    pub goods: Vec<String>,
    pub prices: Vec<String>,
    /// The prices of goods outside the system.
    pub others: Vec<String>,
    /// Whether the system covers the whole budget.
    pub complete: bool,
    pub income: Option<String>,
    groups: BTreeMap<String, Vec<String>>,
    lets: BTreeMap<String, (Vec<String>, Expr)>,
    pub assumptions: Vec<Relation>,
    demands: Vec<(Form, Target, Expr)>,
    rest: Option<String>,
}

/// Values for declared names, by the names as they are written: `p_b`, `g[1,2]`.
pub type Values = BTreeMap<String, f64>;

impl Outside {
    /// Reads a model file.
    pub fn read(text: &str) -> Outside {
        let source = Source::new("model", text);
        let tree = language::read(&source).unwrap_or_else(|faults| panic!("{}", faults[0].render(&source)));
        let mut model = Outside {
            goods: Vec::new(),
            prices: Vec::new(),
            others: Vec::new(),
            complete: true,
            income: None,
            groups: BTreeMap::new(),
            lets: BTreeMap::new(),
            assumptions: Vec::new(),
            demands: Vec::new(),
            rest: None,
        };
        tree.statements.into_iter().for_each(|located| model.take(located.statement));
        model
    }

    fn take(&mut self, statement: Statement) {
        match statement {
            Statement::Goods(Goods::Named(names)) => self.goods = names.into_iter().map(|name| name.text).collect(),
            Statement::Goods(Goods::Numbered { last, .. }) => self.goods = (1..=last).map(|n| n.to_string()).collect(),
            Statement::Group { name, members } => {
                let members = members.into_iter().map(|(index, _)| index_text(&index)).collect();
                self.groups.insert(name.text, members);
            }
            Statement::Prices(declared) => {
                self.prices = match declared.as_slice() {
                    [family] if !family.indices.is_empty() => {
                        self.goods.iter().map(|good| format!("{}[{good}]", family.name.text)).collect()
                    }
                    names => names.iter().map(|each| each.name.text.clone()).collect(),
                };
            }
            Statement::Income(declared) => self.income = Some(declared.name.text),
            Statement::Assume(relations) => self.assumptions.extend(relations),
            Statement::Let { name, value } => {
                let indices = name.indices.into_iter().map(|index| index.text).collect();
                self.lets.insert(name.name.text, (indices, value));
            }
            Statement::Demand(equation) => self.demands.push((equation.form, equation.target, equation.value)),
            Statement::Rest(target) => self.rest = Some(target_text(&target)),
            Statement::Others(Others::Deflated) => self.complete = false,
            Statement::Others(Others::Prices(names)) => {
                self.complete = false;
                self.others = names.into_iter().map(|each| each.name.text).collect();
            }
            _ => {}
        }
    }

    /// What moves: the prices, then the prices of other goods, and income last.
    pub fn movers(&self) -> Vec<String> {
        self.prices.iter().chain(&self.others).chain(&self.income).cloned().collect()
    }

    /// The quantities demanded, with their slopes in what moves.
    pub fn quantities(&self, values: &Values) -> Vec<Dual> {
        let movers = self.movers();
        let directions = movers.len();
        let moving = movers.iter().enumerate();
        let at: BTreeMap<&str, Dual> =
            moving.map(|(k, name)| (name.as_str(), Dual::variable(values[name], k, directions))).collect();
        let place = Place { model: self, values, moving: &at, directions };
        let income = at[self.income.as_deref().expect("a system has an income")].clone();
        let price = |good: &str| at[self.prices[self.position(good)].as_str()].clone();
        let mut found: BTreeMap<String, Dual> = BTreeMap::new();
        for (form, target, formula) in &self.demands {
            for (good, bound) in self.targets(target) {
                let value = place.evaluate(formula, &bound);
                let quantity = match form {
                    Form::Demand => value,
                    Form::Share => value.times(&income).over(&price(&good)),
                    Form::Outlay => value.over(&price(&good)),
                    Form::LogDemand => value.exp(),
                };
                found.insert(good, quantity);
            }
        }
        if let Some(rest) = &self.rest {
            let spent = found.iter().map(|(good, quantity)| quantity.times(&price(good)));
            let left = spent.fold(income.clone(), |left, outlay| left.minus(&outlay));
            found.insert(rest.clone(), left.over(&price(rest)));
        }
        self.goods.iter().map(|good| found[good].clone()).collect()
    }

    /// A formula in the model's names, with its slopes in what moves.
    pub fn formula(&self, expr: &Expr, values: &Values) -> Dual {
        let movers = self.movers();
        let directions = movers.len();
        let moving = movers.iter().enumerate();
        let at: BTreeMap<&str, Dual> = moving
            .filter_map(|(k, name)| Some((name.as_str(), Dual::variable(*values.get(name)?, k, directions))))
            .collect();
        Place { model: self, values, moving: &at, directions }.evaluate(expr, &BTreeMap::new())
    }

    /// How far the assumptions are from holding: 0 where all hold.
    pub fn violation(&self, values: &Values) -> f64 {
        self.assumptions.iter().map(|relation| self.relation_violation(relation, values)).fold(0.0, f64::max)
    }

    fn relation_violation(&self, relation: &Relation, values: &Values) -> f64 {
        let mut free = Vec::new();
        relation_names(relation, &mut |index| {
            if !self.goods.contains(index) && !free.contains(index) {
                free.push(index.clone());
            }
        });
        let place = Place { model: self, values, moving: &BTreeMap::new(), directions: 0 };
        let mut worst: f64 = 0.0;
        for bound in assignments(&free, &self.goods) {
            let mut left = place.evaluate(&relation.first, &bound).value;
            for (sign, right) in &relation.rest {
                let right = place.evaluate(right, &bound).value;
                worst = worst.max(broken_by(left, *sign, right));
                left = right;
            }
        }
        worst
    }

    fn position(&self, good: &str) -> usize {
        self.goods.iter().position(|known| known == good).expect("a declared good")
    }

    fn targets(&self, target: &Target) -> Vec<(String, BTreeMap<String, String>)> {
        let named = target_text(target);
        if self.goods.contains(&named) {
            return vec![(named, BTreeMap::new())];
        }
        let each = |good: &String| (good.clone(), BTreeMap::from([(named.clone(), good.clone())]));
        self.goods.iter().map(each).collect()
    }
}

/// Where formulas are evaluated.
struct Place<'a> {
    model: &'a Outside,
    values: &'a Values,
    moving: &'a BTreeMap<&'a str, Dual>,
    directions: usize,
}

impl Place<'_> {
    fn evaluate(&self, expr: &Expr, bound: &BTreeMap<String, String>) -> Dual {
        let number = |value: f64| Dual::constant(value, self.directions);
        match &expr.kind {
            ExprKind::Number(value) => number(value.to_f64().unwrap_or(f64::NAN)),
            ExprKind::Pi => number(std::f64::consts::PI),
            ExprKind::Reference(reference) => self.look_up(reference, bound),
            ExprKind::Negative(inner) => self.evaluate(inner, bound).negated(),
            ExprKind::Sum(terms) => terms.iter().fold(number(0.0), |sum, term| sum.plus(&self.evaluate(term, bound))),
            ExprKind::Product(factors) => factors.iter().fold(number(1.0), |product, factor| {
                let value = self.evaluate(&factor.expr, bound);
                if factor.inverted { product.over(&value) } else { product.times(&value) }
            }),
            ExprKind::Power(base, exponent) => self.evaluate(base, bound).power(&self.evaluate(exponent, bound)),
            ExprKind::Call(function, argument) => {
                let argument = self.evaluate(argument, bound);
                match function {
                    Function::Ln => argument.ln(),
                    Function::Exp => argument.exp(),
                    Function::Sqrt => argument.sqrt(),
                    _ => number(f64::NAN),
                }
            }
            ExprKind::Over(over) => self.fold(over, bound),
        }
    }

    fn fold(&self, over: &Over, bound: &BTreeMap<String, String>) -> Dual {
        let binders: Vec<String> = over.binders.iter().map(|name| name.text.clone()).collect();
        let except = over.except.as_ref().map(|(index, _)| resolve(index, bound));
        let range = over.group.as_ref().map_or(&self.model.goods, |name| &self.model.groups[&name.text]);
        let range: Vec<String> = range.iter().filter(|good| Some(*good) != except.as_ref()).cloned().collect();
        let start = Dual::constant(if over.product { 1.0 } else { 0.0 }, self.directions);
        assignments(&binders, &range).into_iter().fold(start, |so_far, inner| {
            let bound = bound.clone().into_iter().chain(inner).collect();
            let value = self.evaluate(&over.body, &bound);
            if over.product { so_far.times(&value) } else { so_far.plus(&value) }
        })
    }

    fn look_up(&self, reference: &Reference, bound: &BTreeMap<String, String>) -> Dual {
        let indices: Vec<String> = reference.indices.iter().map(|(index, _)| resolve(index, bound)).collect();
        if let Some((names, value)) = self.model.lets.get(&reference.name.text) {
            let inner = names.iter().cloned().zip(indices).collect();
            return self.evaluate(value, &inner);
        }
        let name = match indices.is_empty() {
            true => reference.name.text.clone(),
            false => format!("{}[{}]", reference.name.text, indices.join(",")),
        };
        if let Some(moving) = self.moving.get(name.as_str()) {
            return moving.clone();
        }
        let value = self.values.get(&name).unwrap_or_else(|| panic!("{name} has no value"));
        Dual::constant(*value, self.directions)
    }
}

fn resolve(index: &Index, bound: &BTreeMap<String, String>) -> String {
    let text = index_text(index);
    bound.get(&text).cloned().unwrap_or(text)
}

fn index_text(index: &Index) -> String {
    match index {
        Index::Number(number) => number.to_string(),
        Index::Name(name) => name.clone(),
    }
}

fn target_text(target: &Target) -> String {
    match target {
        Target::Good(name) => name.text.clone(),
        Target::Indexed(index, _) => index_text(index),
    }
}

/// Every way of giving each name one of the goods.
fn assignments(names: &[String], goods: &[String]) -> Vec<BTreeMap<String, String>> {
    names.iter().fold(vec![BTreeMap::new()], |so_far, name| {
        let with = |known: &BTreeMap<String, String>, good: &String| {
            let mut next = known.clone();
            next.insert(name.clone(), good.clone());
            next
        };
        so_far.iter().flat_map(|known| goods.iter().map(move |good| with(known, good))).collect()
    })
}

fn broken_by(left: f64, sign: Comparison, right: f64) -> f64 {
    let gap = left - right;
    let broken = match sign {
        Comparison::Equal => gap.abs() / (1.0 + left.abs()),
        Comparison::NotEqual => f64::from(gap == 0.0),
        Comparison::Less | Comparison::LessEqual => gap.max(0.0),
        Comparison::Greater | Comparison::GreaterEqual => (-gap).max(0.0),
    };
    if broken.is_nan() { f64::INFINITY } else { broken }
}

/// Calls `visit` on every index name that stands free in a relation.
fn relation_names(relation: &Relation, visit: &mut impl FnMut(&String)) {
    let sides = std::iter::once(&relation.first).chain(relation.rest.iter().map(|(_, side)| side));
    sides.for_each(|side| free_names(side, &mut Vec::new(), visit));
}

fn free_names(expr: &Expr, bound: &mut Vec<String>, visit: &mut impl FnMut(&String)) {
    match &expr.kind {
        ExprKind::Number(_) | ExprKind::Pi => {}
        ExprKind::Reference(reference) => {
            for (index, _) in &reference.indices {
                if let Index::Name(name) = index
                    && !bound.contains(name)
                {
                    visit(name);
                }
            }
        }
        ExprKind::Negative(inner) | ExprKind::Call(_, inner) => free_names(inner, bound, visit),
        ExprKind::Sum(terms) => terms.iter().for_each(|term| free_names(term, bound, visit)),
        ExprKind::Product(factors) => factors.iter().for_each(|factor| free_names(&factor.expr, bound, visit)),
        ExprKind::Power(base, exponent) => {
            free_names(base, bound, visit);
            free_names(exponent, bound, visit);
        }
        ExprKind::Over(over) => {
            let known = bound.len();
            if let Some((Index::Name(name), _)) = &over.except
                && !bound.contains(name)
            {
                visit(name);
            }
            bound.extend(over.binders.iter().map(|name| name.text.clone()));
            free_names(&over.body, bound, visit);
            bound.truncate(known);
        }
    }
}
