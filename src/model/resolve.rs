//! Formulas with their names looked up: what every reference means is settled once, however often a sum repeats it.

use crate::language::{Diagnostic, Expr, ExprKind, Function, Index, Name, Over, Rational, Reference, Span};

use super::declarations::unknown_good;
use super::names::{AbbreviationId, FamilyId, Meaning, Names, brackets};

/// An index: a good, or the good that the environment has at this place.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Slot {
    Good(usize),
    Bound(usize),
}

impl Slot {
    /// The good under an environment.
    pub fn good(self, environment: &[usize]) -> usize {
        match self {
            Slot::Good(good) => good,
            Slot::Bound(place) => environment.get(place).copied().unwrap_or(0),
        }
    }
}

/// A formula whose names are looked up, with the stretch that it was read from.
#[derive(Debug)]
pub(super) struct Node {
    pub kind: NodeKind,
    pub span: Span,
}

/// The kinds of formula.
#[derive(Debug)]
pub(super) enum NodeKind {
    Number(Rational),
    Pi,
    Symbol(FamilyId, Vec<Slot>),
    Abbreviation(AbbreviationId, Vec<Slot>),
    Negative(Box<Node>),
    Sum(Vec<Node>),
    /// Factors, each with whether it stands behind a `/`.
    Product(Vec<(Node, bool)>),
    Power(Box<Node>, Box<Node>),
    Call(Function, Box<Node>),
    Over(Box<OverNode>),
    /// Something that could not be looked up; the message is written.
    Faulty,
}

/// A sum or product over goods.
#[derive(Debug)]
pub(super) struct OverNode {
    pub product: bool,
    /// How many indices are bound; they take the next places of the environment.
    pub binders: usize,
    pub except: Option<Slot>,
    /// The goods that are gone through.
    pub members: Vec<usize>,
    pub body: Node,
}

/// Looks up the names of one formula.
pub(super) struct Resolver<'a> {
    names: &'a Names,
    scope: Vec<String>,
    mistakes: &'a mut Vec<Diagnostic>,
}

impl<'a> Resolver<'a> {
    /// A resolver for formulas in which these indices are free; they take the first places of the environment.
    pub fn new(names: &'a Names, free: &[Name], mistakes: &'a mut Vec<Diagnostic>) -> Resolver<'a> {
        let mut resolver = Resolver { names, scope: Vec::new(), mistakes };
        for index in free {
            resolver.bind(index);
        }
        resolver
    }

    /// Brings a new index into scope.
    fn bind(&mut self, index: &Name) {
        let taken = if self.scope.contains(&index.text) {
            Some("another index")
        } else if self.names.good(&index.text).is_some() {
            Some("a good")
        } else {
            match self.names.meaning(&index.text) {
                Some(Meaning::Group(_)) => Some("a group"),
                Some(_) => Some("a declared name"),
                None => None,
            }
        };
        if let Some(taken) = taken {
            let message = format!("the index `{}` hides {taken} of the same name", index.text);
            self.mistakes.push(Diagnostic::error(index.span, message).remedy("give the index another name"));
        }
        self.scope.push(index.text.clone());
    }

    /// The formula with its names looked up; what cannot be is reported and becomes [`NodeKind::Faulty`].
    pub fn resolve(&mut self, expr: &Expr) -> Node {
        let kind = match &expr.kind {
            ExprKind::Number(number) => NodeKind::Number(number.clone()),
            ExprKind::Pi => NodeKind::Pi,
            ExprKind::Reference(reference) => self.reference(reference),
            ExprKind::Negative(inner) => NodeKind::Negative(Box::new(self.resolve(inner))),
            ExprKind::Sum(terms) => NodeKind::Sum(terms.iter().map(|term| self.resolve(term)).collect()),
            ExprKind::Product(factors) => {
                NodeKind::Product(factors.iter().map(|f| (self.resolve(&f.expr), f.inverted)).collect())
            }
            ExprKind::Power(base, exponent) => {
                NodeKind::Power(Box::new(self.resolve(base)), Box::new(self.resolve(exponent)))
            }
            ExprKind::Call(function, argument) => NodeKind::Call(*function, Box::new(self.resolve(argument))),
            ExprKind::Over(over) => self.over(over, expr.span),
        };
        Node { kind, span: expr.span }
    }

    fn over(&mut self, over: &Over, span: Span) -> NodeKind {
        let depth = self.scope.len();
        if self.names.goods.is_empty() {
            let message = Diagnostic::error(span, "a sum over goods, and there are no goods");
            self.mistakes.push(message.remedy("declare them before: `goods 1..4`"));
        }
        let except = over.except.as_ref().and_then(|(index, span)| self.slot(index, *span));
        let members = self.members(over.group.as_ref());
        for binder in &over.binders {
            self.bind(binder);
        }
        let body = self.resolve(&over.body);
        self.scope.truncate(depth);
        NodeKind::Over(Box::new(OverNode { product: over.product, binders: over.binders.len(), except, members, body }))
    }

    pub fn members(&mut self, group: Option<&Name>) -> Vec<usize> {
        let Some(name) = group else { return (0..self.names.goods.len()).collect() };
        if let Some(group) = self.names.group(&name.text) {
            group.used.set(true);
            return group.members.clone();
        }
        let known = self.names.groups.iter().map(|g| g.name.as_str());
        let message = Diagnostic::error(name.span, format!("there is no group `{}`", name.text));
        self.mistakes.push(match crate::language::nearest(&name.text, known) {
            Some(near) => message.remedy(format!("did you mean `{near}`?")),
            None => message.remedy(format!("declare it: `group {} = …`", name.text)),
        });
        Vec::new()
    }

    /// What an index stands for.
    pub fn slot(&mut self, index: &Index, span: Span) -> Option<Slot> {
        if let Index::Name(name) = index
            && let Some(place) = self.scope.iter().rposition(|bound| bound == name)
        {
            return Some(Slot::Bound(place));
        }
        if let Some(good) = self.names.good_of(index) {
            return Some(Slot::Good(good));
        }
        self.mistakes.push(self.unknown_index(index, span));
        None
    }

    fn unknown_index(&self, index: &Index, span: Span) -> Diagnostic {
        let Index::Name(name) = index else { return unknown_good(self.names, index, span) };
        let goods = self.names.goods.iter().map(String::as_str);
        if self.names.goods.is_empty() || crate::language::nearest(name, goods).is_some() {
            return unknown_good(self.names, index, span);
        }
        let message = Diagnostic::error(span, format!("`{name}` is neither a good nor an index here"));
        match self.scope.last() {
            Some(bound) => message.remedy(format!("write `{bound}`, or sum over it: `sum over {name} of (…)`")),
            None => message.remedy(format!("sum over it: `sum over {name} of (…)`")),
        }
    }

    fn reference(&mut self, reference: &Reference) -> NodeKind {
        let text = &reference.name.text;
        match self.names.meaning(text) {
            Some(Meaning::Family(id)) => {
                let family = &self.names.families[id.0];
                family.used.set(true);
                let slots = self.slots(reference, family.arity);
                slots.map_or(NodeKind::Faulty, |slots| NodeKind::Symbol(id, slots))
            }
            Some(Meaning::Abbreviation(id)) => {
                let abbreviation = &self.names.abbreviations[id.0];
                abbreviation.used.set(true);
                let slots = self.slots(reference, abbreviation.arity);
                slots.map_or(NodeKind::Faulty, |slots| NodeKind::Abbreviation(id, slots))
            }
            Some(Meaning::Group(_)) => {
                let message = format!("`{text}` is a group of goods, not a number");
                let remedy = format!("sum over it: `sum over k in {text} of (…)`");
                self.mistakes.push(Diagnostic::error(reference.span, message).remedy(remedy));
                NodeKind::Faulty
            }
            None => {
                self.mistakes.push(self.unknown(reference));
                NodeKind::Faulty
            }
        }
    }

    fn unknown(&self, reference: &Reference) -> Diagnostic {
        let text = &reference.name.text;
        if self.scope.contains(text) {
            let message = format!("`{text}` is an index; it stands for a good, not for a number");
            return Diagnostic::error(reference.span, message).remedy("use it between square brackets");
        }
        if self.names.good(text).is_some() {
            let message = format!("`{text}` is a good, not a number");
            let remedy = "name the quantities (`quantities x[i]`), or mean its price or outlay";
            return Diagnostic::error(reference.span, message).remedy(remedy);
        }
        let message = Diagnostic::error(reference.name.span, format!("there is no `{text}`"));
        match self.names.nearest_name(text) {
            Some(near) => message.remedy(format!("did you mean `{near}`?")),
            None => message.remedy(format!("declare it: `parameters {text}{}`", brackets(reference.indices.len()))),
        }
    }

    fn slots(&mut self, reference: &Reference, arity: usize) -> Option<Vec<Slot>> {
        let given = reference.indices.len();
        if given != arity {
            let message = match arity {
                0 => format!("`{}` has no index", reference.name.text),
                1 => format!("`{}` has one index", reference.name.text),
                _ => format!("`{}` has {arity} indices", reference.name.text),
            };
            let remedy = format!("write `{}{}`", reference.name.text, brackets(arity));
            self.mistakes.push(Diagnostic::error(reference.span, message).remedy(remedy));
            return None;
        }
        let slots: Vec<Option<Slot>> = reference.indices.iter().map(|(index, span)| self.slot(index, *span)).collect();
        slots.into_iter().collect()
    }
}

/// The index names of a formula that are neither bound in it nor goods, in the order in which they first stand.
pub(super) fn free_indices(exprs: &[&Expr], names: &Names) -> Vec<Name> {
    let mut found = Vec::new();
    let mut bound = Vec::new();
    for expr in exprs {
        collect_free(expr, names, &mut bound, &mut found);
    }
    found
}

fn collect_free(expr: &Expr, names: &Names, bound: &mut Vec<String>, found: &mut Vec<Name>) {
    let note = |index: &Index, span: Span, bound: &[String], found: &mut Vec<Name>| {
        if let Index::Name(name) = index
            && names.good(name).is_none()
            && !bound.contains(name)
            && !found.iter().any(|known| known.text == *name)
        {
            found.push(Name { text: name.clone(), span });
        }
    };
    match &expr.kind {
        ExprKind::Number(_) | ExprKind::Pi => {}
        ExprKind::Reference(reference) => {
            reference.indices.iter().for_each(|(index, span)| note(index, *span, bound, found));
        }
        ExprKind::Negative(inner) | ExprKind::Call(_, inner) => collect_free(inner, names, bound, found),
        ExprKind::Sum(terms) => terms.iter().for_each(|term| collect_free(term, names, bound, found)),
        ExprKind::Product(factors) => factors.iter().for_each(|f| collect_free(&f.expr, names, bound, found)),
        ExprKind::Power(base, exponent) => {
            collect_free(base, names, bound, found);
            collect_free(exponent, names, bound, found);
        }
        ExprKind::Over(over) => {
            if let Some((index, span)) = &over.except {
                note(index, *span, bound, found);
            }
            let depth = bound.len();
            bound.extend(over.binders.iter().map(|binder| binder.text.clone()));
            collect_free(&over.body, names, bound, found);
            bound.truncate(depth);
        }
    }
}

/// Every value of so many free indices: tuples of goods in lexicographic order.
pub(super) fn tuples(goods: usize, length: usize) -> impl Iterator<Item = Vec<usize>> {
    let mut next = (length == 0 || goods > 0).then(|| vec![0usize; length]);
    std::iter::from_fn(move || {
        let current = next.clone()?;
        next = advance(current.clone(), goods);
        Some(current)
    })
}

fn advance(mut tuple: Vec<usize>, goods: usize) -> Option<Vec<usize>> {
    for place in (0..tuple.len()).rev() {
        tuple[place] += 1;
        if tuple[place] < goods {
            return Some(tuple);
        }
        tuple[place] = 0;
    }
    None
}
