//! The statements of a file, sorted by what they say; the ones that may stand only once do.

use crate::language::{
    self, Claim, Declared, Diagnostic, Equation, Expr, Goods, Index, Located, Name, Others, Preferences, Relation,
    Source, Span, Statement, Target,
};

/// A statement's content with its place.
#[derive(Clone, Copy)]
pub(super) struct Placed<T> {
    pub content: T,
    pub span: Span,
}

/// The content of a file, by kind of statement.
#[derive(Default)]
pub(super) struct Outline<'t> {
    pub title: Option<Placed<&'t str>>,
    pub goods: Option<Placed<&'t Goods>>,
    pub groups: Vec<(&'t Name, &'t [(Index, Span)])>,
    pub prices: Option<Placed<&'t [Declared]>>,
    pub income: Option<Placed<&'t Declared>>,
    pub quantities: Option<Placed<&'t [Declared]>>,
    pub utility: Option<Placed<&'t Declared>>,
    pub others: Option<Placed<&'t Others>>,
    pub rest: Option<Placed<&'t Target>>,
    pub parameters: Vec<&'t Declared>,
    pub assumed: Vec<&'t Relation>,
    pub abbreviations: Vec<(&'t Declared, &'t Expr)>,
    pub equations: Vec<Placed<&'t Equation>>,
    pub inverse: Vec<Placed<(&'t Target, &'t Expr)>>,
    pub given: Option<Placed<(Preferences, &'t Expr)>>,
    pub claims: Vec<&'t Claim>,
}

impl<'t> Outline<'t> {
    /// Sorts the statements; a statement that stands twice where it may stand once is a mistake.
    pub fn of(source: &Source, tree: &'t language::Model, mistakes: &mut Vec<Diagnostic>) -> Outline<'t> {
        let mut outline = Outline::default();
        for located in &tree.statements {
            outline.take(source, located, mistakes);
        }
        outline
    }

    fn take(&mut self, source: &Source, located: &'t Located, mistakes: &mut Vec<Diagnostic>) {
        let span = located.span;
        let mut once = Once { source, span: located.keyword, mistakes };
        match &located.statement {
            Statement::Title(text) => once.put(&mut self.title, Placed { content: text.as_str(), span }),
            Statement::Goods(goods) => once.put(&mut self.goods, Placed { content: goods, span }),
            Statement::Prices(names) => once.put(&mut self.prices, Placed { content: names.as_slice(), span }),
            Statement::Income(name) => once.put(&mut self.income, Placed { content: name, span }),
            Statement::Quantities(names) => once.put(&mut self.quantities, Placed { content: names.as_slice(), span }),
            Statement::Utility(name) => once.put(&mut self.utility, Placed { content: name, span }),
            Statement::Others(others) => once.put(&mut self.others, Placed { content: others, span }),
            Statement::Rest(target) => once.put(&mut self.rest, Placed { content: target, span }),
            Statement::Group { name, members } => self.groups.push((name, members)),
            Statement::Parameters(names) => self.parameters.extend(names),
            Statement::Assume(relations) => self.assumed.extend(relations),
            Statement::Let { name, value } => self.abbreviations.push((name, value)),
            Statement::Demand(equation) => self.equations.push(Placed { content: equation, span }),
            Statement::Inverse { target, value } => self.inverse.push(Placed { content: (target, value), span }),
            Statement::Given { kind, value } => once.put(&mut self.given, Placed { content: (*kind, value), span }),
            Statement::Claim(claim) => self.claims.push(claim),
        }
    }

    /// Whether the file claims something about a function of the theory.
    pub fn claims_functions(&self) -> bool {
        self.claims.iter().any(|claim| matches!(claim, Claim::Function { .. }))
    }

    /// Whether the file defines demands.
    pub fn has_demands(&self) -> bool {
        !self.equations.is_empty() || self.rest.is_some()
    }
}

/// Fills slots that may be filled once.
struct Once<'a> {
    source: &'a Source,
    span: Span,
    mistakes: &'a mut Vec<Diagnostic>,
}

impl Once<'_> {
    fn put<T>(&mut self, slot: &mut Option<Placed<T>>, value: Placed<T>) {
        let Some(first) = slot else {
            *slot = Some(value);
            return;
        };
        let word = self.source.slice(self.span);
        let (line, _) = self.source.place(first.span.start);
        let message = format!("a second `{word}` statement; the first is in line {line}");
        self.mistakes.push(Diagnostic::error(self.span, message).remedy("put it all in one statement"));
    }
}
