//! What the formulas of a file need in order to be defined: positive arguments of logarithms and bases of fractional
//! powers, divisors that are not zero. Found by looking, without computing; the innermost come first.

use num_traits::{One, Signed, Zero};

use crate::algebra::budget;
use crate::algebra::generator::Role;
use crate::language::{Function, Rational};

use super::names::FamilyId;
use super::order::Item;
use super::resolve::{Node, NodeKind, Slot, tuples};
use super::script::{Defined, Script, Stated};
use super::system::Form;

/// What is needed of a formula.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub(super) enum Need {
    /// Positive, being the argument of this function (a fractional power counts as a root).
    Positive(Function),
    /// At least −1/e, being the argument of Lambert's W.
    AboveBranchPoint,
    /// Not zero, being a divisor.
    NonZero,
    /// Not zero, being the argument of Ei.
    NonZeroArgument,
}

/// A formula of which something is needed, under an environment of goods.
pub(super) struct Requirement<'s> {
    pub node: &'s Node,
    pub environment: Vec<usize>,
    pub need: Need,
    /// How deep functions are nested in the formula.
    pub depth: u32,
}

/// Looks at the formulas of a script.
pub(super) struct Survey<'s> {
    script: &'s Script,
    abbreviation_depths: Vec<u32>,
    demand_depths: Vec<u32>,
    /// Whether the abbreviation is positive by the way it is built.
    abbreviation_signs: Vec<bool>,
}

impl<'s> Survey<'s> {
    /// A survey of the script.
    pub fn new(script: &'s Script) -> Survey<'s> {
        let abbreviations = script.abbreviations.len();
        let mut survey = Survey {
            script,
            abbreviation_depths: vec![0; abbreviations],
            demand_depths: vec![0; script.defined.len()],
            abbreviation_signs: vec![false; abbreviations],
        };
        for item in &script.order {
            match item {
                Item::Abbreviation(id) => {
                    let node = &script.abbreviations[id.0];
                    survey.abbreviation_depths[id.0] = survey.depth(node);
                    survey.abbreviation_signs[id.0] = survey.is_plainly_positive(node);
                }
                Item::Demand(good) => survey.demand_depths[*good] = survey.defined_depth(*good),
            }
        }
        survey
    }

    /// How deep functions are nested in what an item stands for.
    pub fn item_depth(&self, item: Item) -> u32 {
        match item {
            Item::Abbreviation(id) => self.abbreviation_depths[id.0],
            Item::Demand(good) => self.demand_depths[good],
        }
    }

    /// All that the file needs.
    pub fn requirements(&self) -> Vec<Requirement<'s>> {
        let mut found = Vec::new();
        let names = &self.script.declarations.names;
        for (abbreviation, node) in names.abbreviations.iter().zip(&self.script.abbreviations) {
            self.search(node, abbreviation.arity, &mut found);
        }
        for defined in &self.script.defined {
            if let Defined::By(place, environment) = defined {
                self.walk(&self.script.definitions[*place].node, &mut environment.clone(), &mut found);
            }
        }
        for (place, environment) in &self.script.inverse {
            self.walk(&self.script.inverse_nodes[*place], &mut environment.clone(), &mut found);
        }
        if let Some((_, node, _)) = &self.script.given {
            self.walk(node, &mut Vec::new(), &mut found);
        }
        let under = self.script.claims.iter().filter_map(|claim| claim.under.as_ref());
        let related = under.flat_map(|under| &under.relations);
        for stated in self.script.assumed.iter().chain(&self.script.claims).chain(related) {
            stated.sides.iter().for_each(|side| self.search(side, stated.free.len(), &mut found));
        }
        found
    }

    fn search(&self, node: &'s Node, free: usize, found: &mut Vec<Requirement<'s>>) {
        if self.is_demanding(node) {
            for mut environment in tuples(self.script.declarations.names.goods.len(), free) {
                self.walk(node, &mut environment, found);
            }
        }
    }

    fn walk(&self, node: &'s Node, environment: &mut Vec<usize>, found: &mut Vec<Requirement<'s>>) {
        budget::spend(1);
        if let Some((target, need)) = self.own_need(node) {
            self.note(target, need, environment, found);
        }
        match &node.kind {
            NodeKind::Number(_) | NodeKind::Pi | NodeKind::Symbol(..) | NodeKind::Abbreviation(..) => {}
            NodeKind::Faulty => {}
            NodeKind::Negative(inner) | NodeKind::Call(_, inner) => self.walk(inner, environment, found),
            NodeKind::Sum(terms) => terms.iter().for_each(|term| self.walk(term, environment, found)),
            NodeKind::Product(factors) => {
                for (factor, inverted) in factors {
                    if *inverted && !self.is_plainly_positive(factor) {
                        self.note(factor, Need::NonZero, environment, found);
                    }
                    self.walk(factor, environment, found);
                }
            }
            NodeKind::Power(base, exponent) => {
                self.walk(base, environment, found);
                self.walk(exponent, environment, found);
            }
            NodeKind::Over(over) if self.is_demanding(&over.body) => {
                over.each(environment, &mut |environment| self.walk(&over.body, environment, found));
            }
            NodeKind::Over(_) => {}
        }
    }

    fn note(&self, node: &'s Node, need: Need, environment: &[usize], found: &mut Vec<Requirement<'s>>) {
        let depth = self.depth(node);
        found.push(Requirement { node, environment: environment.to_vec(), need, depth });
    }

    /// What a function or power needs of its argument or base.
    fn own_need(&self, node: &'s Node) -> Option<(&'s Node, Need)> {
        let (target, need): (&Node, Need) = match &node.kind {
            NodeKind::Call(function @ (Function::Ln | Function::Sqrt), argument) => {
                (argument, Need::Positive(*function))
            }
            NodeKind::Call(Function::Ei, argument) => (argument, Need::NonZeroArgument),
            NodeKind::Call(Function::LambertW, argument) => (argument, Need::AboveBranchPoint),
            NodeKind::Power(base, exponent) => match literal(exponent) {
                Some(number) if !number.is_integer() => (base, Need::Positive(Function::Sqrt)),
                Some(number) if number.is_negative() => (base, Need::NonZero),
                _ => return None,
            },
            _ => return None,
        };
        (!self.is_plainly_positive(target)).then_some((target, need))
    }

    /// Whether something is needed of a part of the formula.
    fn is_demanding(&self, node: &'s Node) -> bool {
        if self.own_need(node).is_some() {
            return true;
        }
        match &node.kind {
            NodeKind::Number(_) | NodeKind::Pi | NodeKind::Symbol(..) | NodeKind::Abbreviation(..) => false,
            NodeKind::Faulty => false,
            NodeKind::Negative(inner) | NodeKind::Call(_, inner) => self.is_demanding(inner),
            NodeKind::Sum(terms) => terms.iter().any(|term| self.is_demanding(term)),
            NodeKind::Product(factors) => factors
                .iter()
                .any(|(factor, inverted)| *inverted && !self.is_plainly_positive(factor) || self.is_demanding(factor)),
            NodeKind::Power(base, exponent) => self.is_demanding(base) || self.is_demanding(exponent),
            NodeKind::Over(over) => self.is_demanding(&over.body),
        }
    }

    /// Whether the formula is positive by the roles of its names and the way it is built.
    fn is_plainly_positive(&self, node: &Node) -> bool {
        match &node.kind {
            NodeKind::Number(number) => number.is_positive(),
            NodeKind::Pi => true,
            NodeKind::Symbol(id, _) => {
                let role = self.script.declarations.names.families[id.0].role;
                role.is_positive() && !self.is_demanded(*id)
            }
            NodeKind::Abbreviation(id, _) => self.abbreviation_signs[id.0],
            NodeKind::Negative(_) | NodeKind::Faulty => false,
            NodeKind::Sum(terms) => terms.iter().all(|term| self.is_plainly_positive(term)),
            NodeKind::Product(factors) => factors.iter().all(|(factor, _)| self.is_plainly_positive(factor)),
            NodeKind::Power(base, _) => self.is_plainly_positive(base),
            NodeKind::Call(Function::Exp, _) => true,
            NodeKind::Call(Function::Sqrt, argument) => self.is_plainly_positive(argument),
            NodeKind::Call(..) => false,
            NodeKind::Over(over) => self.is_plainly_positive(&over.body) && (over.product || self.is_never_empty(over)),
        }
    }

    fn is_never_empty(&self, over: &super::resolve::OverNode) -> bool {
        over.members.len() > usize::from(over.except.is_some())
    }

    /// Whether a symbol is the name of a quantity that the file's own demands give.
    fn is_demanded(&self, id: FamilyId) -> bool {
        let role = self.script.declarations.names.families[id.0].role;
        role == Role::Quantity && !self.script.defined.is_empty()
    }

    /// How deep functions are nested in a formula.
    pub fn depth(&self, node: &Node) -> u32 {
        match &node.kind {
            NodeKind::Number(_) | NodeKind::Pi | NodeKind::Faulty => 0,
            NodeKind::Symbol(id, slots) if self.is_demanded(*id) => self.quantity_depth(*id, slots),
            NodeKind::Symbol(..) => 0,
            NodeKind::Abbreviation(id, _) => self.abbreviation_depths[id.0],
            NodeKind::Negative(inner) => self.depth(inner),
            NodeKind::Sum(terms) => terms.iter().map(|term| self.depth(term)).max().unwrap_or(0),
            NodeKind::Product(factors) => factors.iter().map(|(factor, _)| self.depth(factor)).max().unwrap_or(0),
            NodeKind::Power(base, exponent) => match literal(exponent) {
                Some(number) if number.is_integer() => self.depth(base),
                _ => 1 + self.depth(base).max(self.depth(exponent)),
            },
            NodeKind::Call(_, argument) => 1 + self.depth(argument),
            NodeKind::Over(over) => self.depth(&over.body),
        }
    }

    /// The depth of a relation: that of its deepest side.
    pub fn stated_depth(&self, stated: &Stated) -> u32 {
        stated.sides.iter().map(|side| self.depth(side)).max().unwrap_or(0)
    }

    fn quantity_depth(&self, id: FamilyId, slots: &[Slot]) -> u32 {
        let own = self.script.declarations.names.families[id.0].good;
        let good = own.or(match slots {
            [Slot::Good(good)] => Some(*good),
            _ => None,
        });
        match good {
            Some(good) => self.demand_depths.get(good).copied().unwrap_or(0),
            None => self.demand_depths.iter().copied().max().unwrap_or(0),
        }
    }

    fn defined_depth(&self, good: usize) -> u32 {
        match &self.script.defined[good] {
            Defined::By(place, _) => {
                let definition = &self.script.definitions[*place];
                self.depth(&definition.node) + u32::from(definition.form == Form::LogDemand)
            }
            Defined::Rest => self.demand_depths.iter().copied().max().unwrap_or(0),
        }
    }
}

/// The number that a formula of numbers alone denotes.
pub(super) fn literal(node: &Node) -> Option<Rational> {
    match &node.kind {
        NodeKind::Number(number) => Some(number.clone()),
        NodeKind::Negative(inner) => literal(inner).map(|number| -number),
        NodeKind::Sum(terms) => terms.iter().map(literal).try_fold(Rational::zero(), |sum, term| Some(sum + term?)),
        NodeKind::Product(factors) => factors.iter().try_fold(Rational::one(), |product, (factor, inverted)| {
            let number = literal(factor)?;
            match inverted {
                true if number.is_zero() => None,
                true => Some(product / number),
                false => Some(product * number),
            }
        }),
        _ => None,
    }
}
