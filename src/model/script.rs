//! The statements of a model with all names looked up, before any of it is computed.

use crate::language::{
    self, Comparison, Declared, Diagnostic, Equation, Expr, Index, Link, Name, Others, Preferences, Property, Relation,
    Source, Span, Target,
};

use super::claimed::Wanted;
use super::declarations::{self, Declarations, unknown_good};
use super::names::Names;
use super::order::{Item, computing_order};
use super::outline::{Outline, Placed};
use super::resolve::{Node, Resolver, free_indices};
use super::system::Form;

/// A relation between formulas, for every value of its free indices.
pub(super) struct Stated {
    pub text: String,
    pub free: Vec<Name>,
    /// The sides, one more than the signs.
    pub sides: Vec<Node>,
    pub signs: Vec<Comparison>,
    /// The function of the theory that the only side is claimed to be.
    pub function: Option<Wanted>,
    /// The condition on the system that depends on the relations between the sides.
    pub under: Option<Under>,
    /// The goods that preferences are claimed to be separable in.
    pub separable: Option<Vec<usize>>,
    pub span: Span,
}

/// A condition on the system, and the relations that it is claimed to depend on.
pub(super) struct Under {
    pub condition: Property,
    pub link: Link,
    /// Each with its own free indices.
    pub relations: Vec<Stated>,
}

impl Stated {
    /// A statement that is not about sides.
    pub fn without_sides(text: String, span: Span) -> Stated {
        let (free, sides, signs) = (Vec::new(), Vec::new(), Vec::new());
        Stated { text, free, sides, signs, function: None, under: None, separable: None, span }
    }
}

/// The right-hand side of a demand statement.
pub(super) struct Definition {
    pub form: Form,
    pub node: Node,
}

/// Which statement gives a good its demand.
#[derive(Clone, Debug, PartialEq, Eq)]
pub(super) enum Defined {
    /// The definition at this place, under these values of its free index.
    By(usize, Vec<usize>),
    /// What is left of income.
    Rest,
}

/// How an incomplete system is stated.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Covered {
    All,
    Some,
    Deflated,
}

/// A model with its names looked up.
pub(super) struct Script {
    pub title: Option<String>,
    pub declarations: Declarations,
    /// By the place of the abbreviation.
    pub abbreviations: Vec<Node>,
    pub definitions: Vec<Definition>,
    /// For each good; empty in a file of lemmas.
    pub defined: Vec<Defined>,
    pub assumed: Vec<Stated>,
    pub claims: Vec<Stated>,
    /// The inverse demand for each good, with the good for its free index; empty where there are none.
    pub inverse: Vec<(usize, Vec<usize>)>,
    /// The right-hand sides of inverse demands.
    pub inverse_nodes: Vec<Node>,
    pub given: Option<(Preferences, Node, Span)>,
    pub covered: Covered,
    /// The order in which abbreviations and demands are computed.
    pub order: Vec<Item>,
    /// The statements in which something is in LaTeX.
    pub latex: Vec<Span>,
}

/// Looks up everything. Of a tree from which statements may be missing (it is not `whole`), only mistakes that no
/// missing statement could explain are reported.
///
/// # Errors
/// All mistakes that can be seen without computing.
pub(super) fn script(source: &Source, tree: &language::Model, whole: bool) -> Result<Script, Vec<Diagnostic>> {
    let mut mistakes = Vec::new();
    let outline = Outline::of(source, tree, &mut mistakes);
    let declarations = declarations::declare(source, &outline, &mut mistakes);
    if whole {
        declarations::missing(&outline, &mut mistakes);
    }
    let mut writer = Writer { source, tree, declarations: &declarations, mistakes: &mut mistakes };
    let abbreviations = outline.abbreviations.iter().map(|(name, value)| writer.abbreviation(name, value)).collect();
    let assumed = outline.assumed.iter().map(|relation| writer.stated(relation)).collect();
    let claims = outline.claims.iter().map(|claim| writer.claim(claim)).collect();
    let (definitions, defined) = writer.demands(&outline, whole);
    let (inverse_nodes, inverse) = writer.inverse_demands(&outline, whole);
    let given = outline.given.map(|given| (given.content.0, writer.resolve(&[], given.content.1), given.span));
    let covered = writer.covered(&outline);
    if whole {
        writer.something_to_do(&outline);
    }
    if !mistakes.is_empty() {
        mistakes.sort_by_key(|mistake| mistake.span);
        mistakes.dedup();
        return Err(mistakes);
    }
    let title = outline.title.map(|title| title.content.to_string());
    let script = Script {
        title,
        declarations,
        abbreviations,
        definitions,
        defined,
        assumed,
        claims,
        inverse,
        inverse_nodes,
        given,
        covered,
        order: Vec::new(),
        latex: tree.latex.clone(),
    };
    let order = computing_order(&script)?;
    Ok(Script { order, ..script })
}

pub(super) struct Writer<'a> {
    pub source: &'a Source,
    pub tree: &'a language::Model,
    pub declarations: &'a Declarations,
    pub mistakes: &'a mut Vec<Diagnostic>,
}

impl Writer<'_> {
    pub fn names(&self) -> &Names {
        &self.declarations.names
    }

    pub fn resolve(&mut self, free: &[Name], expr: &Expr) -> Node {
        Resolver::new(&self.declarations.names, free, self.mistakes).resolve(expr)
    }

    fn abbreviation(&mut self, declared: &Declared, value: &Expr) -> Node {
        self.resolve(&declared.indices, value)
    }

    pub fn stated(&mut self, relation: &Relation) -> Stated {
        let exprs: Vec<&Expr> =
            std::iter::once(&relation.first).chain(relation.rest.iter().map(|(_, side)| side)).collect();
        let free = free_indices(&exprs, self.names());
        self.doubt_indices(&free);
        let mut resolver = Resolver::new(&self.declarations.names, &free, self.mistakes);
        let sides = exprs.into_iter().map(|expr| resolver.resolve(expr)).collect();
        let signs = relation.rest.iter().map(|(sign, _)| *sign).collect();
        let text = match self.tree.is_latex(relation.span) {
            true => language::relation_wording(relation),
            false => plain_text(self.source.slice(relation.span)),
        };
        Stated { text, free, sides, signs, function: None, under: None, separable: None, span: relation.span }
    }

    /// A free index that looks like the name of a good is more likely a slip of the pen.
    pub fn doubt_indices(&mut self, free: &[Name]) {
        for index in free.iter().filter(|index| index.text.chars().count() > 2) {
            let goods = self.names().goods.iter().map(String::as_str);
            if let Some(near) = language::nearest(&index.text, goods).filter(|_| self.names().goods_named) {
                let message = format!("there is no good `{}`", index.text);
                let remedy = format!("did you mean `{near}`?");
                self.mistakes.push(Diagnostic::error(index.span, message).remedy(remedy));
            }
        }
    }

    fn demands(&mut self, outline: &Outline<'_>, whole: bool) -> (Vec<Definition>, Vec<Defined>) {
        let count = self.names().goods.len();
        let mut slots: Vec<Option<(Defined, Span)>> = vec![None; count];
        let mut definitions = Vec::new();
        for placed in &outline.equations {
            let equation = placed.content;
            let (free, goods) = self.targets(&equation.target, true);
            let node = self.resolve(&free, &equation.value);
            for good in goods {
                let environment = if free.is_empty() { Vec::new() } else { vec![good] };
                self.define(&mut slots, good, Defined::By(definitions.len(), environment), target_span(equation));
            }
            definitions.push(Definition { form: equation.form.into(), node });
        }
        if let Some(Placed { content: target, .. }) = outline.rest {
            let (_, goods) = self.targets(target, false);
            for good in goods {
                self.define(&mut slots, good, Defined::Rest, whole_target(target));
            }
        }
        if whole && outline.has_demands() {
            let spans: Vec<Span> = outline.equations.iter().map(|e| e.span).collect();
            self.undefined(outline, &slots, &spans);
        }
        let defined = slots.into_iter().flatten().map(|(defined, _)| defined).collect();
        (definitions, defined)
    }

    /// The goods that a statement defines, and its free index.
    pub fn targets(&mut self, target: &Target, many: bool) -> (Vec<Name>, Vec<usize>) {
        let (index, span, bracketed) = match target {
            Target::Good(name) => (Index::Name(name.text.clone()), name.span, false),
            Target::Indexed(index, span) => (index.clone(), *span, true),
        };
        if let Some(good) = self.names().good_of(&index) {
            return (Vec::new(), vec![good]);
        }
        let near_good = |text: &str| {
            let goods = self.names().goods.iter().map(String::as_str);
            self.names().goods_named && text.chars().count() > 2 && language::nearest(text, goods).is_some()
        };
        match index {
            Index::Name(text) if bracketed && many && !self.names().goods.is_empty() && !near_good(&text) => {
                (vec![Name { text, span }], (0..self.names().goods.len()).collect())
            }
            _ if self.names().goods.is_empty() => (Vec::new(), Vec::new()),
            index => {
                self.mistakes.push(self.no_such_target(&index, span, bracketed));
                (Vec::new(), Vec::new())
            }
        }
    }

    fn no_such_target(&self, index: &Index, span: Span, bracketed: bool) -> Diagnostic {
        let Index::Name(text) = index else { return unknown_good(self.names(), index, span) };
        let name = Name { text: text.clone(), span };
        if let Some(good) = declarations::quantity_named(self.declarations, &name) {
            let message = format!("`{text}` is a quantity; a demand is stated for a good");
            let remedy = format!("write `{}`", self.good_as_target(good));
            return Diagnostic::error(span, message).remedy(remedy);
        }
        let message = unknown_good(self.names(), index, span);
        let indexable = !bracketed && !self.names().goods_named;
        if indexable {
            message.remedy("numbered goods stand in brackets: `demand[1] = …`, `demand[i] = …`")
        } else {
            message
        }
    }

    fn good_as_target(&self, good: usize) -> String {
        let name = &self.names().goods[good];
        if self.names().goods_named { format!("demand {name}") } else { format!("demand[{name}]") }
    }

    pub fn define(&mut self, slots: &mut [Option<(Defined, Span)>], good: usize, defined: Defined, span: Span) {
        let Some(slot) = slots.get_mut(good) else { return };
        match slot {
            None => *slot = Some((defined, span)),
            Some((_, first)) => {
                let (line, _) = self.source.place(first.start);
                let message = format!("the good `{}` is already defined in line {line}", self.names().goods[good]);
                let mistake = Diagnostic::error(span, message).remedy("define each good once");
                if !self.mistakes.iter().any(|known| known.span == span) {
                    self.mistakes.push(mistake);
                }
            }
        }
    }

    pub fn undefined(&mut self, outline: &Outline<'_>, slots: &[Option<(Defined, Span)>], spans: &[Span]) {
        let missing: Vec<String> = self
            .names()
            .goods
            .iter()
            .zip(slots)
            .filter(|(_, slot)| slot.is_none())
            .map(|(good, _)| good.clone())
            .collect();
        let Some(goods) = outline.goods.filter(|_| !missing.is_empty()) else { return };
        if self.mistakes.iter().any(|m| spans.iter().any(|span| span.meets(m.span))) {
            // a definition that could not be read may be the missing one
            return;
        }
        let list = declarations::listed(&missing);
        let message = match missing.len() {
            1 => format!("the good `{list}` has no definition"),
            _ => format!("{} goods have no definition: {list}", missing.len()),
        };
        let first = self.names().good(&missing[0]).map_or_else(String::new, |good| self.good_as_target(good));
        let rest =
            if self.names().goods_named { format!("rest {}", missing[0]) } else { format!("rest[{}]", missing[0]) };
        let remedy = format!("add `{first} = …`, or `{rest}` for what is left of income");
        self.mistakes.push(Diagnostic::error(goods.span, message).remedy(remedy));
    }

    fn covered(&mut self, outline: &Outline<'_>) -> Covered {
        let Some(others) = outline.others else { return Covered::All };
        if let Some(rest) = outline.rest {
            let message = "`rest` takes what is left of income, and `others` says that something else is bought, too";
            self.mistakes.push(Diagnostic::error(rest.span, message).remedy("drop one of the two statements"));
        }
        match others.content {
            Others::Prices(_) => Covered::Some,
            Others::Deflated => Covered::Deflated,
        }
    }

    fn something_to_do(&mut self, outline: &Outline<'_>) {
        let system = outline.has_demands() || outline.given.is_some() || !outline.inverse.is_empty();
        if !system && outline.claims.is_empty() && self.mistakes.is_empty() {
            let message = Diagnostic::error(Span::new(0, 0), "the file states no demand and no claim");
            self.mistakes.push(message.remedy("add `demand GOOD = …` for each good, or `claim … = …`"));
        }
        self.claims_have_an_object(outline, system);
    }
}

pub(super) fn whole_target(target: &Target) -> Span {
    match target {
        Target::Good(name) => name.span,
        Target::Indexed(_, span) => *span,
    }
}

fn target_span(equation: &Equation) -> Span {
    whole_target(&equation.target)
}

/// The words of a stretch on one line, comments left out.
pub(super) fn plain_text(stretch: &str) -> String {
    let lines = stretch.lines().map(|line| line.split('#').next().unwrap_or(""));
    lines.flat_map(str::split_whitespace).collect::<Vec<_>>().join(" ")
}
