//! Formulas and whole equations in LaTeX, as they stand in a manuscript, read into the syntax tree.
//!
//! [`prepared`] blanks comments and replaces the author's own commands, [`check`] looks over brackets and commands, the
//! grammar in `grammar/latex.pest` finds the parts, and [`terms`] builds the tree: which letters are one name is asked
//! of the [`lexicon`], which holds the declarations. [`display`] turns equations into statements.

mod check;
pub mod display;
mod extents;
mod factors;
mod grammar;
mod left;
pub mod lexicon;
pub mod macros;
mod names;
mod prepared;
mod slips;
mod sums;
mod symbols;
mod terms;

use pest::Parser;
use pest::iterators::Pair;

use super::diagnostic::Diagnostic;
use super::syntax::*;
use grammar::{LatexParser, Rule};
pub use lexicon::Lexicon;
use prepared::Prepared;
use terms::Formulas;

/// What came of a text in LaTeX.
#[derive(Debug)]
pub struct Reading<T> {
    /// What was read; none where there are mistakes.
    pub content: Option<T>,
    /// What is wrong.
    pub mistakes: Vec<Diagnostic>,
    /// What may not be meant.
    pub warnings: Vec<Diagnostic>,
    /// How plain names are set in it.
    pub observed: Vec<(String, String)>,
}

impl<T> Reading<T> {
    fn refused(mistake: Diagnostic) -> Reading<T> {
        Reading { content: None, mistakes: vec![mistake], warnings: Vec::new(), observed: Vec::new() }
    }

    fn of(content: T, formulas: Formulas<'_>) -> Reading<T> {
        let Formulas { mistakes, warnings, observed, .. } = formulas;
        let content = mistakes.is_empty().then_some(content);
        Reading { content, mistakes, warnings, observed }
    }
}

/// Reads a formula, without its `$` signs, that starts at `offset` of its file.
pub fn formula(text: &str, offset: usize, lexicon: &Lexicon) -> Reading<Expr> {
    read(Rule::formula, text, offset, lexicon, |formulas, parts| match parts.next() {
        Some(expression) => formulas.expression(expression, 0),
        None => terms::placeholder(Span::new(offset, offset + text.len())),
    })
}

/// Reads relations with commas between them.
pub fn relations(text: &str, offset: usize, lexicon: &Lexicon) -> Reading<Vec<Relation>> {
    read(Rule::relations, text, offset, lexicon, |formulas, parts| {
        parts.filter_map(|part| left::relation(formulas, part)).collect()
    })
}

/// The parsed text under its rule, given to a builder.
fn read<T>(
    rule: Rule,
    text: &str,
    offset: usize,
    lexicon: &Lexicon,
    build: impl FnOnce(&mut Formulas<'_>, &mut dyn Iterator<Item = Pair<'_, Rule>>) -> T,
) -> Reading<T> {
    let prepared = match prepare(text, offset, lexicon) {
        Ok(prepared) => prepared,
        Err(mistake) => return Reading::refused(mistake),
    };
    let pairs = match LatexParser::parse(rule, &prepared.text) {
        Ok(pairs) => pairs,
        Err(error) => return Reading::refused(slips::explain(&error, &prepared)),
    };
    let mut formulas = Formulas::new(&prepared, lexicon);
    let mut parts = pairs.into_iter().flat_map(Pair::into_inner).filter(|part| part.as_rule() != Rule::EOI);
    let content = build(&mut formulas, &mut parts);
    Reading::of(content, formulas)
}

fn prepare(text: &str, offset: usize, lexicon: &Lexicon) -> Result<Prepared, Diagnostic> {
    let prepared = Prepared::new(text, offset, &mut lexicon.macros.clone())?;
    check::check(&prepared)?;
    Ok(prepared)
}
