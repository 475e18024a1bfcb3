//! Inverse demands, and functions of the theory on the left of claims: their goods and prices looked up.

use crate::algebra::generator::Role;
use crate::language::{
    Claim, Claimed, Diagnostic, Expr, Form, Index, Link, Mover, Name, Preferences, Property, Reference, Relation, Span,
    Target, claim_wording,
};

use super::names::{FamilyId, Meaning};
use super::outline::Outline;
use super::resolve::{Node, Resolver, Slot, free_indices};
use super::script::{Defined, Stated, Under, Writer, plain_text, whole_target};
use super::system::Function;

/// A function of the theory whose goods may be those of an environment.
#[derive(Clone, Copy, Debug)]
pub(super) enum Wanted {
    Preferences(Preferences),
    Demand(Form, Slot),
    Hicksian(Slot),
    Inverse(Slot),
    Slutsky(Slot, Slot),
    PriceElasticity(Slot, Slot),
    IncomeElasticity(Slot),
    CompensatedElasticity(Slot, Slot),
}

impl Wanted {
    /// The function under an environment of goods.
    pub fn function(self, environment: &[usize]) -> Function {
        let good = |slot: Slot| slot.good(environment);
        match self {
            Wanted::Preferences(kind) => Function::Preferences(kind),
            Wanted::Demand(form, i) => Function::Demand(form, good(i)),
            Wanted::Hicksian(i) => Function::Hicksian(good(i)),
            Wanted::Inverse(i) => Function::Inverse(good(i)),
            Wanted::Slutsky(i, j) => Function::Slutsky(good(i), good(j)),
            Wanted::PriceElasticity(i, j) => Function::PriceElasticity(good(i), good(j)),
            Wanted::IncomeElasticity(i) => Function::IncomeElasticity(good(i)),
            Wanted::CompensatedElasticity(i, j) => Function::CompensatedElasticity(good(i), good(j)),
        }
    }

    /// Whether the function is one of quantities.
    pub fn is_of_quantities(self) -> bool {
        matches!(self, Wanted::Preferences(Preferences::Utility) | Wanted::Inverse(_))
    }
}

/// What a demand responds to.
enum Moved {
    Income,
    Price(Slot),
}

impl Writer<'_> {
    /// A claim with its names looked up.
    pub fn claim(&mut self, claim: &Claim) -> Stated {
        let (function, value, span) = match claim {
            Claim::Relation(relation) => return self.stated(relation),
            Claim::Separable { group, span } => return self.separable(group, *span),
            Claim::Function { function, value, span } => (function, value, *span),
            Claim::Under { condition, link, relations, span } => {
                return self.under(*condition, *link, relations, *span);
            }
        };
        let mut free = self.own_indices(function);
        for index in free_indices(&[value], self.names()) {
            if !free.iter().any(|known| known.text == index.text) {
                free.push(index);
            }
        }
        self.doubt_indices(&free);
        let side = self.resolve(&free, value);
        let text = match self.tree.is_latex(span) {
            true => claim_wording(function, value),
            false => plain_text(self.source.slice(span)),
        };
        let function = self.wanted(&free, function);
        Stated { text, free, sides: vec![side], signs: Vec::new(), function, under: None, separable: None, span }
    }

    /// A claim about a condition: its sides are those of its relations.
    fn under(&mut self, condition: Property, link: Link, relations: &[Relation], span: Span) -> Stated {
        let relations = relations.iter().map(|relation| self.stated(relation)).collect();
        let text = plain_text(self.source.slice(span));
        let under = Some(Under { condition, link, relations });
        Stated { under, ..Stated::without_sides(text, span) }
    }

    fn separable(&mut self, group: &Name, span: Span) -> Stated {
        let goods = Resolver::new(&self.declarations.names, &[], self.mistakes).members(Some(group));
        let text = plain_text(self.source.slice(span));
        Stated { separable: Some(goods), ..Stated::without_sides(text, span) }
    }

    /// The free indices on the left of a claim.
    fn own_indices(&self, function: &Claimed) -> Vec<Name> {
        let mut all: Vec<(Index, Span)> = Vec::new();
        match function {
            Claimed::Preferences(_) => {}
            Claimed::Demand(_, target) | Claimed::Hicksian(target) | Claimed::Inverse(target) => {
                if let Target::Indexed(index, span) = target {
                    all.push((index.clone(), *span));
                }
            }
            Claimed::Slutsky(good, mover)
            | Claimed::Elasticity(good, mover)
            | Claimed::CompensatedElasticity(good, mover) => {
                all.push(good.clone());
                if let Mover::Named(reference) = mover {
                    all.extend(reference.indices.iter().cloned());
                    if self.may_be_index(reference) {
                        all.push((Index::Name(reference.name.text.clone()), reference.name.span));
                    }
                }
            }
        }
        let mut free: Vec<Name> = Vec::new();
        for (index, span) in all {
            if let Index::Name(text) = index
                && self.names().good(&text).is_none()
                && !free.iter().any(|known| known.text == text)
            {
                free.push(Name { text, span });
            }
        }
        free
    }

    /// Whether what a demand responds to is an index: a letter that means nothing else.
    fn may_be_index(&self, reference: &Reference) -> bool {
        let text = &reference.name.text;
        reference.indices.is_empty() && self.names().meaning(text).is_none() && text.chars().count() == 1
    }

    fn wanted(&mut self, free: &[Name], function: &Claimed) -> Option<Wanted> {
        Some(match function {
            Claimed::Preferences(kind) => Wanted::Preferences(*kind),
            Claimed::Demand(form, target) => Wanted::Demand(*form, self.good_slot(free, target)?),
            Claimed::Hicksian(target) => Wanted::Hicksian(self.good_slot(free, target)?),
            Claimed::Inverse(target) => Wanted::Inverse(self.good_slot(free, target)?),
            Claimed::Slutsky(good, mover) => match self.response(free, good, mover)? {
                (i, Moved::Price(j)) => Wanted::Slutsky(i, j),
                (_, Moved::Income) => return self.not_income(mover),
            },
            Claimed::Elasticity(good, mover) => match self.response(free, good, mover)? {
                (i, Moved::Price(j)) => Wanted::PriceElasticity(i, j),
                (i, Moved::Income) => Wanted::IncomeElasticity(i),
            },
            Claimed::CompensatedElasticity(good, mover) => match self.response(free, good, mover)? {
                (i, Moved::Price(j)) => Wanted::CompensatedElasticity(i, j),
                (_, Moved::Income) => return self.not_income(mover),
            },
        })
    }

    fn not_income(&mut self, mover: &Mover) -> Option<Wanted> {
        let message = Diagnostic::error(mover_span(mover), "a compensated response is one to a price, not to income");
        self.mistakes.push(message.remedy("name a price"));
        None
    }

    fn slot(&mut self, free: &[Name], index: &Index, span: Span) -> Option<Slot> {
        Resolver::new(&self.declarations.names, free, self.mistakes).slot(index, span)
    }

    fn good_slot(&mut self, free: &[Name], target: &Target) -> Option<Slot> {
        match target {
            Target::Indexed(index, span) => self.slot(free, index, *span),
            Target::Good(_) => {
                let (_, goods) = self.targets(target, false);
                goods.first().map(|good| Slot::Good(*good))
            }
        }
    }

    fn response(&mut self, free: &[Name], good: &(Index, Span), mover: &Mover) -> Option<(Slot, Moved)> {
        let good = self.slot(free, &good.0, good.1)?;
        Some((good, self.moved(free, mover)?))
    }

    fn moved(&mut self, free: &[Name], mover: &Mover) -> Option<Moved> {
        let reference = match mover {
            Mover::Number(number, span) => {
                return Some(Moved::Price(self.slot(free, &Index::Number(*number), *span)?));
            }
            Mover::Named(reference) => reference,
        };
        let text = &reference.name.text;
        let Some(Meaning::Family(FamilyId(id))) = self.names().meaning(text) else {
            let is_index = free.iter().any(|index| index.text == *text) || self.names().good(text).is_some();
            return match (reference.indices.is_empty(), text.as_str()) {
                (true, _) if is_index => {
                    Some(Moved::Price(self.slot(free, &Index::Name(text.clone()), reference.span)?))
                }
                (true, "income") => Some(Moved::Income),
                _ => self.no_price(reference),
            };
        };
        let family = &self.names().families[id];
        match (family.role, family.arity, family.good, reference.indices.as_slice()) {
            (Role::Income, _, _, []) => Some(Moved::Income),
            (Role::Price, 0, Some(good), []) => Some(Moved::Price(Slot::Good(good))),
            (Role::Price, 1, _, [(index, span)]) => Some(Moved::Price(self.slot(free, index, *span)?)),
            _ => self.no_price(reference),
        }
    }

    fn no_price(&mut self, reference: &Reference) -> Option<Moved> {
        let message = format!("`{}` is neither a price nor income", self.source.slice(reference.span));
        let near = self.names().nearest_name(&reference.name.text);
        let remedy = near.map_or_else(
            || "write the name of a price, or `income`".to_string(),
            |near| format!("did you mean `{near}`? Write the name of a price, or `income`"),
        );
        self.mistakes.push(Diagnostic::error(reference.span, message).remedy(remedy));
        None
    }

    /// The inverse demands, and which of them each good has.
    pub fn inverse_demands(&mut self, outline: &Outline<'_>, whole: bool) -> (Vec<Node>, Vec<(usize, Vec<usize>)>) {
        let mut slots: Vec<Option<(Defined, Span)>> = vec![None; self.names().goods.len()];
        let mut nodes = Vec::new();
        for placed in &outline.inverse {
            let (target, value): (&Target, &Expr) = placed.content;
            let (free, goods) = self.targets(target, true);
            let node = self.resolve(&free, value);
            for good in goods {
                let environment = if free.is_empty() { Vec::new() } else { vec![good] };
                self.define(&mut slots, good, Defined::By(nodes.len(), environment), whole_target(target));
            }
            nodes.push(node);
        }
        let spans: Vec<Span> = outline.inverse.iter().map(|placed| placed.span).collect();
        if let (Some(span), true) = (spans.first(), outline.has_demands() || outline.given.is_some()) {
            let message = Diagnostic::error(*span, "inverse demands stand beside demands or given preferences");
            self.mistakes.push(message.remedy("put them into a file of their own, or write `claim inverse GOOD = …`"));
        } else if whole && !spans.is_empty() {
            self.undefined(outline, &slots, &spans);
        }
        let found = slots.into_iter().flatten().filter_map(|(defined, _)| match defined {
            Defined::By(place, environment) => Some((place, environment)),
            Defined::Rest => None,
        });
        (nodes, found.collect())
    }

    /// A claim about a function of the theory needs a system, or preferences, that the function is one of.
    pub fn claims_have_an_object(&mut self, outline: &Outline<'_>, system: bool) {
        let first = outline.claims.iter().find_map(|claim| match claim {
            Claim::Function { span, .. } | Claim::Under { span, .. } | Claim::Separable { span, .. } => Some(*span),
            Claim::Relation(_) => None,
        });
        if let (Some(span), false, true) = (first, system, self.mistakes.is_empty()) {
            let message =
                "a claim about the consumer's functions, but no demands and no preferences to hold it against";
            let remedy = "add `demand GOOD = …` for each good, or `given utility = …`";
            self.mistakes.push(Diagnostic::error(span, message).remedy(remedy));
        }
    }
}

fn mover_span(mover: &Mover) -> Span {
    match mover {
        Mover::Named(reference) => reference.span,
        Mover::Number(_, span) => *span,
    }
}
