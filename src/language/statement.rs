//! One statement: looked over, parsed, built, or refused with what is wrong.

use pest::Parser;
use pest::iterators::Pairs;

use super::brackets;
use super::build;
use super::diagnostic::Diagnostic;
use super::expression::Builder;
use super::grammar::{ModelParser, Rule};
use super::keywords::{self, KEYWORDS, Keyword};
use super::latex::display::{self, Word};
use super::latex::{Lexicon, macros};
use super::letters::leading_word;
use super::nearest::nearest;
use super::place::Place;
use super::slips;
use super::syntax::{Form, Located, Span};
use super::unsupported;

/// What came of one statement.
#[derive(Debug, Default)]
pub struct Outcome {
    /// The statement, where it has no mistakes; a display may hold several.
    pub statements: Vec<Located>,
    /// Its mistakes.
    pub mistakes: Vec<Diagnostic>,
    /// What may not be meant.
    pub warnings: Vec<Diagnostic>,
    /// Where a bare `e` is raised to a power.
    pub exponentials: Vec<Span>,
    /// Whether names that it may have declared are lost.
    pub declarations_lost: bool,
    /// How plain names are set in LaTeX.
    pub observed: Vec<(String, String)>,
}

impl Outcome {
    fn refused(mistake: Diagnostic, declarations_lost: bool) -> Outcome {
        Outcome { mistakes: vec![mistake], declarations_lost, ..Outcome::default() }
    }
}

/// The word in front of a display, and where the display begins, where a statement is one.
pub fn display_of(text: &str) -> Option<(Word, usize)> {
    if display::begins_display(text) {
        return Some((Word::Bare, 0));
    }
    let (phrase, word) = WORDS.iter().find(|(phrase, _)| leads(text, phrase))?;
    let at = text.len() - after(text, phrase).trim_start().len();
    let rest = text.get(at..).filter(|rest| display::begins_display(rest))?;
    let single = !rest.starts_with("$$") && rest.starts_with('$');
    let closes = rest.get(1..).and_then(|inner| inner.find('$')).map(|end| end + 2);
    let equation = rest.contains('=') || *word == Word::Claim;
    let whole = !single || closes == Some(rest.trim_end().len()) && *word != Word::Assume && equation;
    whole.then_some((*word, at))
}

/// The words that may stand before a display.
const WORDS: [(&str, Word); 9] = [
    ("demand", Word::Form(Form::Demand)),
    ("share", Word::Form(Form::Share)),
    ("outlay", Word::Form(Form::Outlay)),
    ("log demand", Word::Form(Form::LogDemand)),
    ("let", Word::Let),
    ("given", Word::Given),
    ("claim", Word::Claim),
    ("assume", Word::Assume),
    ("inverse", Word::Inverse),
];

/// Whether a text begins with the words of a phrase, whatever white space is between them.
fn leads(text: &str, phrase: &str) -> bool {
    let mut rest = text;
    phrase.split(' ').all(|wanted| {
        let word = leading_word(rest.trim_start());
        rest = &rest.trim_start()[word.len()..];
        word == wanted
    })
}

fn after<'a>(text: &'a str, phrase: &str) -> &'a str {
    phrase.split(' ').fold(text, |rest, _| &rest.trim_start()[leading_word(rest.trim_start()).len()..])
}

/// Reads a display.
fn read_display(text: &str, offset: usize, word: Word, at: usize, lexicon: Option<&Lexicon>) -> Outcome {
    let Some(lexicon) = lexicon else { return Outcome::default() };
    let reading = display::statements(&text[at..], offset + at, word, lexicon);
    let keyword = Span::new(offset, offset + text[..at].trim_end().len().max(1));
    let statements = reading.content.unwrap_or_default().into_iter();
    Outcome {
        statements: statements.map(|(statement, span)| Located { statement, span, keyword }).collect(),
        declarations_lost: !reading.mistakes.is_empty() && matches!(word, Word::Bare | Word::Let),
        mistakes: reading.mistakes,
        warnings: reading.warnings,
        observed: reading.observed,
        ..Outcome::default()
    }
}

/// Reads the statement that starts at `offset` of its file. Without a lexicon, what stands in LaTeX is left unread.
pub fn read(text: &str, offset: usize, lexicon: Option<&Lexicon>) -> Outcome {
    if macros::begins_definition(text) {
        return Outcome::default();
    }
    if let Some((word, at)) = display_of(text) {
        return read_display(text, offset, word, at, lexicon);
    }
    let word = leading_word(text);
    let span = Span::new(offset, offset + word.len());
    let Some(keyword) = keywords::find(word) else {
        return Outcome::refused(unknown_keyword(word, text, span), true);
    };
    if let Err(mistake) = brackets::check(text, offset) {
        return Outcome::refused(mistake, keyword.declares);
    }
    if let Some(mistake) = unsupported::refusal(text, offset) {
        return Outcome::refused(mistake, keyword.declares);
    }
    let Some(rule) = keyword.rule else {
        return Outcome::refused(malformed(keyword, span), keyword.declares);
    };
    match ModelParser::parse(rule, text) {
        Ok(pairs) => build(pairs, text, offset, keyword, lexicon),
        Err(error) => Outcome {
            mistakes: mistakes(rule, Place::of(&error, text, offset), offset, keyword, lexicon),
            declarations_lost: keyword.declares,
            ..Outcome::default()
        },
    }
}

/// The mistakes of a statement that the grammar refuses: the first, and in a list those of the items behind it.
fn mistakes(rule: Rule, first: Place, offset: usize, keyword: &Keyword, lexicon: Option<&Lexicon>) -> Vec<Diagnostic> {
    let mut mistakes = vec![slips::explain(&first, keyword)];
    let mut rest = without_item(first.text(), keyword.word.len(), first.at());
    for _ in 0..MAX_ITEMS {
        let Some(text) = rest.filter(|_| LISTS.contains(&rule)) else { break };
        match ModelParser::parse(rule, &text) {
            Ok(pairs) => {
                mistakes.extend(build(pairs, &text, offset, keyword, lexicon).mistakes);
                break;
            }
            Err(error) => {
                let place = Place::of(&error, &text, offset);
                mistakes.push(slips::explain(&place, keyword));
                rest = without_item(&text, keyword.word.len(), place.at());
            }
        }
    }
    mistakes
}

/// The most items of one list whose mistakes are told.
const MAX_ITEMS: usize = 20;

/// The statements whose items are read one by one, so that a mistake in one does not hide those in the next.
const LISTS: [Rule; 4] = [Rule::prices, Rule::quantities, Rule::parameters, Rule::assume];

/// A list with the item at a place, and all before it, blanked out; none where nothing is left.
fn without_item(text: &str, keyword: usize, at: usize) -> Option<String> {
    let mut depth = 0i32;
    let mut comma = None;
    for (place, letter) in text.char_indices() {
        depth += i32::from(matches!(letter, '(' | '[' | '{')) - i32::from(matches!(letter, ')' | ']' | '}'));
        if letter == ',' && depth == 0 && place >= at {
            comma = Some(place + 1);
            break;
        }
    }
    let rest = text.get(comma?..).filter(|rest| !rest.trim().is_empty())?;
    Some(format!("{}{}{rest}", &text[..keyword], " ".repeat(comma? - keyword)))
}

fn malformed(keyword: &Keyword, span: Span) -> Diagnostic {
    let message = format!("`{}` begins no statement in this form", keyword.word);
    Diagnostic::error(span, message).remedy(format!("write {}", keyword.usage))
}

/// Words that link displays in a text.
const LINKING: [&str; 8] = ["where", "with", "and", "so", "hence", "here", "thus", "Here"];
/// The longest line of such words.
const MOST_LINKING_WORDS: usize = 6;

fn unknown_keyword(word: &str, text: &str, span: Span) -> Diagnostic {
    let known = KEYWORDS.iter().filter(|keyword| keyword.rule.is_some()).map(|keyword| keyword.word);
    if let Some(meant) = nearest(word, known.clone()) {
        let usage = keywords::find(meant).map_or(meant, |keyword| keyword.usage);
        let message = format!("no statement begins with `{word}`; the nearest that does is `{meant}`");
        return Diagnostic::error(span, message).remedy(format!("write {usage}"));
    }
    let diagnostic = Diagnostic::error(span, format!("no statement begins with `{word}`"));
    if text.trim_end_matches([',', ':', '.']).split_whitespace().count() <= MOST_LINKING_WORDS
        && LINKING.contains(&word)
    {
        return diagnostic.remedy("put `#` before words that stand between displays");
    }
    let left = text.split('=').next().map(str::trim).filter(|left| left.len() < text.len() && left.len() <= MAX_SHOWN);
    if let Some(left) = left {
        let remedy =
            format!("write `let {left} = …` for an abbreviation, `demand {left} = …` for the demand of a good");
        return diagnostic.remedy(remedy);
    }
    diagnostic.remedy(format!("a statement begins with one of {}", known.collect::<Vec<_>>().join(", ")))
}

/// The most bytes of a left-hand side that are quoted in a remedy.
const MAX_SHOWN: usize = 24;

fn build(pairs: Pairs<Rule>, text: &str, offset: usize, keyword: &Keyword, lexicon: Option<&Lexicon>) -> Outcome {
    let mut builder = Builder::new(offset, lexicon);
    let statement = pairs.into_iter().next().and_then(|pair| build::statement(pair, &mut builder));
    let Builder { mistakes, warnings, exponentials, observed, .. } = builder;
    let span = Span::new(offset, offset + text.len());
    let statement = statement.filter(|_| mistakes.is_empty());
    let declarations_lost = keyword.declares && statement.is_none();
    let keyword = Span::new(offset, offset + keyword.word.len());
    let statements = statement.map(|statement| Located { statement, span, keyword }).into_iter().collect();
    Outcome { statements, mistakes, warnings, exponentials, declarations_lost, observed }
}
