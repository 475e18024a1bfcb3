//! Text to syntax tree, with the messages for what cannot be read.
//!
//! A file is split into statements by [`layout`], each statement is looked over by [`brackets`], parsed by the grammar
//! of its keyword, and built by [`build`] and [`expression`]; [`slips`] turns what the grammar refuses into a
//! message. A mistake in one statement does not hide those in the next.

mod brackets;
mod build;
mod constant;
pub mod diagnostic;
mod expression;
mod first_look;
mod grammar;
mod keywords;
pub mod latex;
mod latex_form;
mod layout;
mod letters;
mod nearest;
mod place;
mod rendering;
mod slips;
pub mod source;
mod statement;
pub mod syntax;
mod unsupported;
mod wording;

use diagnostic::MAX_MISTAKES;
pub use diagnostic::{Diagnostic, Severity};
use latex::Lexicon;
pub use letters::normal_name;
pub use nearest::nearest;
pub use source::Source;
pub use syntax::*;
pub use wording::{claim_wording, relation_wording, wording};

/// A model file as it was written.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Model {
    /// The statements, in the order of the file.
    pub statements: Vec<Located>,
    /// What is read, but perhaps not as its author meant it.
    pub warnings: Vec<Diagnostic>,
    /// The statements in which something is in LaTeX.
    pub latex: Vec<Span>,
}

impl Model {
    /// Whether a stretch of the file is in LaTeX, or beside it in one statement.
    pub fn is_latex(&self, span: Span) -> bool {
        self.latex.iter().any(|statement| statement.meets(span))
    }
}

/// Everything that could be read of a file, mistakes or not: for a caller that looks for further mistakes in the rest.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Reading {
    /// The statements that could be read, and the warnings.
    pub model: Model,
    /// The mistakes, in the order of the file.
    pub mistakes: Vec<Diagnostic>,
    /// Whether a statement that may declare names could not be read, so that an unknown name proves nothing.
    pub declarations_lost: bool,
}

/// The longest statement, in bytes.
const MAX_STATEMENT_BYTES: usize = 1 << 20;

/// Reads what can be read of a model file.
pub fn examine(source: &Source) -> Reading {
    if let Some(fault) = source.fault() {
        return Reading { mistakes: vec![fault.clone()], declarations_lost: true, ..Reading::default() };
    }
    let layout = layout::layout(&source.text);
    let declarations_lost = !layout.mistakes.is_empty();
    let mut reading = Reading { mistakes: layout.mistakes, declarations_lost, ..Reading::default() };
    let mut exponentials = Vec::new();
    let lexicon = first_look::lexicon(&layout.drafts, &mut reading.mistakes);
    let mut observed = Vec::new();
    for draft in &layout.drafts {
        if reading.mistakes.len() > MAX_MISTAKES {
            reading.declarations_lost = true;
            break;
        }
        take(draft, &lexicon, &mut reading, &mut exponentials, &mut observed);
    }
    let in_latex = |draft: &&layout::Draft| draft.text.contains('$') || latex::display::begins_display(&draft.text);
    reading.model.latex = layout.drafts.iter().filter(in_latex).map(|draft| draft.span).collect();
    first_look::set_as_written(&mut reading.model, &observed);
    if reading.model.statements.is_empty() && reading.mistakes.is_empty() {
        reading.mistakes.push(nothing_there(source));
    }
    if !reading.declarations_lost && !declares_e(&reading.model) {
        reading.mistakes.extend(exponentials.into_iter().map(bare_e));
    }
    reading.mistakes.sort_by_key(|mistake| mistake.span);
    reading.model.warnings.sort_by_key(|warning| warning.span);
    cut_off(&mut reading.mistakes);
    reading
}

/// Reads a model file.
///
/// # Errors
/// One message for each mistake of the file, in the order of the file; nothing is accepted in part.
pub fn read(source: &Source) -> Result<Model, Vec<Diagnostic>> {
    let reading = examine(source);
    if reading.mistakes.is_empty() { Ok(reading.model) } else { Err(reading.mistakes) }
}

/// Reads one statement into the reading.
fn take(
    draft: &layout::Draft,
    lexicon: &Lexicon,
    reading: &mut Reading,
    exponentials: &mut Vec<Span>,
    observed: &mut Vec<(String, String)>,
) {
    if draft.text.len() > MAX_STATEMENT_BYTES {
        reading.declarations_lost = true;
        reading.mistakes.push(too_long(draft));
        return;
    }
    let outcome = statement::read(&draft.text, draft.span.start, Some(lexicon));
    observed.extend(outcome.observed);
    reading.declarations_lost |= outcome.declarations_lost;
    reading.mistakes.extend(outcome.mistakes.into_iter().filter(|mistake| mistake.span.end <= draft.excused));
    reading.model.warnings.extend(outcome.warnings);
    reading.model.statements.extend(outcome.statements);
    exponentials.extend(outcome.exponentials);
}

/// Whether the model has a name `e` of its own.
fn declares_e(model: &Model) -> bool {
    let is_e = |name: &Name| name.text == "e";
    let any = |list: &[Declared]| list.iter().any(|declared| is_e(&declared.name));
    model.statements.iter().any(|located| match &located.statement {
        Statement::Goods(Goods::Named(names)) => names.iter().any(is_e),
        Statement::Prices(list) | Statement::Quantities(list) | Statement::Parameters(list) => any(list),
        Statement::Others(Others::Prices(list)) => any(list),
        Statement::Income(one) | Statement::Utility(one) | Statement::Let { name: one, .. } => is_e(&one.name),
        _ => false,
    })
}

fn bare_e(span: Span) -> Diagnostic {
    Diagnostic::error(span, "`e` is not declared; the exponential function is written `exp`").remedy("write exp(…)")
}

fn nothing_there(source: &Source) -> Diagnostic {
    let what = if source.text.trim().is_empty() { "the file is empty" } else { "the file holds comments only" };
    let remedy = "a model file begins with statements such as `goods bread, fish`, `prices p_b, p_f`, `income m`";
    Diagnostic::error(Span::default(), what).remedy(remedy)
}

fn too_long(draft: &layout::Draft) -> Diagnostic {
    let first_word = draft.span.start + letters::leading_word(&draft.text).len();
    let message =
        format!("this statement has {} bytes; a statement may have at most {MAX_STATEMENT_BYTES}", draft.text.len());
    Diagnostic::error(Span::new(draft.span.start, first_word), message)
        .remedy("name parts of it with `let`, or use sums over goods")
}

/// Ends a list of mistakes that is too long to be of use.
fn cut_off(mistakes: &mut Vec<Diagnostic>) {
    if mistakes.len() > MAX_MISTAKES {
        let span = mistakes[MAX_MISTAKES].span;
        mistakes.truncate(MAX_MISTAKES);
        mistakes.push(Diagnostic::error(span, format!("more than {MAX_MISTAKES} mistakes; the rest is not looked at")));
    }
}
