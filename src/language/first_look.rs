//! A first look over a file: what it declares, before any formula in LaTeX is read; and, afterwards, how it sets its
//! names.

use super::MAX_STATEMENT_BYTES;
use super::Model;
use super::diagnostic::Diagnostic;
use super::keywords;
use super::latex::Lexicon;
use super::latex::display::names_defined;
use super::latex::macros::begins_definition;
use super::latex_form;
use super::layout::Draft;
use super::letters;
use super::statement;
use super::syntax::*;

/// What a file declares, and its own LaTeX commands: a first look over it, in which nothing in LaTeX is read but the
/// left sides of displays.
pub fn lexicon(drafts: &[Draft], mistakes: &mut Vec<Diagnostic>) -> Lexicon {
    let mut lexicon = Lexicon { incomplete: !mistakes.is_empty(), ..Lexicon::default() };
    if !drafts.iter().any(|draft| draft.text.contains(['$', '\\'])) {
        return lexicon;
    }
    for draft in drafts.iter().filter(|draft| begins_definition(&draft.text)) {
        commands(draft, &mut lexicon, mistakes);
    }
    let declaring = |draft: &&Draft| draft.text.len() <= MAX_STATEMENT_BYTES;
    for draft in drafts.iter().filter(declaring) {
        let word = letters::leading_word(&draft.text);
        if keywords::find(word).is_some_and(|keyword| keyword.declares) {
            let outcome = statement::read(&draft.text, draft.span.start, None);
            lexicon.incomplete |= outcome.declarations_lost;
            outcome.statements.iter().for_each(|located| lexicon.take(&located.statement));
        }
    }
    lexicon.imply_utility();
    for draft in drafts.iter().filter(declaring) {
        if let Some((word, at)) = statement::display_of(&draft.text) {
            match names_defined(&draft.text[at..], draft.span.start + at, word, &lexicon) {
                Some(known) => lexicon.names.extend(known),
                None => lexicon.incomplete = true,
            }
        }
    }
    lexicon
}

/// Takes in the commands that a statement defines.
fn commands(draft: &Draft, lexicon: &mut Lexicon, mistakes: &mut Vec<Diagnostic>) {
    let mut rest = draft.text.trim_end();
    while !rest.is_empty() {
        let at = draft.span.start + draft.text.trim_end().len() - rest.len();
        match lexicon.macros.define(rest, at) {
            Ok(Some(length)) => rest = rest[length..].trim_start(),
            Ok(None) if rest.starts_with('%') => rest = rest.split_once('\n').map_or("", |(_, rest)| rest.trim_start()),
            Ok(None) => {
                let span = Span::new(at, at + rest.lines().next().map_or(0, |line| line.trim_end().len()));
                mistakes.push(Diagnostic::error(span, "this line defines commands, and here something else stands"));
                break;
            }
            Err(mistake) => {
                mistakes.push(mistake);
                break;
            }
        }
    }
}

/// Gives the plain names that have no declared LaTeX form the one that the file sets them in.
pub fn set_as_written(model: &mut Model, observed: &[(String, String)]) {
    let set = |declared: &mut Declared| {
        let form = observed.iter().find(|(name, _)| *name == declared.name.text).map(|(_, form)| form);
        if let (None, true, Some(form)) = (&declared.latex, declared.indices.is_empty(), form) {
            declared.latex = latex_form::latex_form(form).ok();
        }
    };
    for located in &mut model.statements {
        match &mut located.statement {
            Statement::Prices(list) | Statement::Quantities(list) | Statement::Parameters(list) => {
                list.iter_mut().for_each(set);
            }
            Statement::Others(Others::Prices(list)) => list.iter_mut().for_each(set),
            Statement::Income(one) | Statement::Utility(one) | Statement::Let { name: one, .. } => set(one),
            _ => {}
        }
    }
}
