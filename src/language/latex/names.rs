//! Names taken apart, as they are declared and as they stand in LaTeX, into what stands on the line and its scripts.

use pest::Parser;
use pest::iterators::Pair;

use super::super::letters::normal_name;
use super::grammar::{LatexParser, Rule};

/// What makes a name: `\gamma^*_{12}` is gamma with 12 below and * above.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct Key {
    /// What stands on the line, Greek letters spelled out, with its accents: `gamma`, `bar(x)`.
    pub base: String,
    /// What stands below, without commas.
    pub below: String,
    /// What stands above.
    pub above: String,
}

/// One index of a subscript.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Token {
    /// The letter, the digit or the word; a comma is `,`.
    pub text: String,
    /// Where it stands in the prepared text.
    pub start: usize,
    /// Where it ends.
    pub end: usize,
}

/// What stands on a letter and below it.
#[derive(Clone, Debug, Default)]
pub struct Scripts<'p> {
    /// The subscript.
    pub below: Vec<Token>,
    /// The superscript, where it may be an exponent.
    pub exponent: Option<Pair<'p, Rule>>,
    /// The superscript as part of a name.
    pub above: String,
    /// Whether there are two of a kind, which LaTeX refuses.
    pub doubled: bool,
    /// Where the scripts end.
    pub end: usize,
}

/// The scripts of a piece.
pub fn scripts<'p>(scripts: impl Iterator<Item = Pair<'p, Rule>>) -> Scripts<'p> {
    let mut read = Scripts::default();
    for script in scripts {
        read.end = script.as_span().end();
        let Some(script) = script.into_inner().next() else { continue };
        match script.as_rule() {
            Rule::below => {
                read.doubled |= !read.below.is_empty();
                read.below = tokens(script);
            }
            Rule::prime => read.above.push('\''),
            _ => {
                read.doubled |= read.exponent.is_some() || !read.above.trim_matches('\'').is_empty();
                read.above.push_str(&bare(script.as_str().trim_start_matches('^')));
                read.exponent = script.into_inner().find(|part| part.as_rule() != Rule::ornament);
            }
        }
    }
    read
}

/// A superscript without braces, spaces and alphabets.
fn bare(text: &str) -> String {
    let mut out = text.replace("\\prime", "'").replace("\\ast", "*");
    for command in ["\\operatorname", "\\mathrm", "\\textrm", "\\textit", "\\text", "\\mathit", "\\mathsf", "\\mbox"] {
        out = out.replace(command, "");
    }
    out.retain(|letter| !letter.is_whitespace() && letter != '{' && letter != '}');
    out
}

/// The letters, digits and words of a subscript.
fn tokens(below: Pair<Rule>) -> Vec<Token> {
    let mut found = Vec::new();
    for part in below.into_inner().flatten() {
        let (start, end) = (part.as_span().start(), part.as_span().end());
        match part.as_rule() {
            Rule::index_comma => found.push(Token { text: ",".to_string(), start, end }),
            Rule::number | Rule::letters | Rule::letter | Rule::digit => {
                let letters = part.as_str().char_indices();
                found.extend(letters.map(|(at, letter)| Token {
                    text: normal_name(&letter.to_string()),
                    start: start + at,
                    end: start + at + letter.len_utf8(),
                }));
            }
            Rule::greek => found.push(Token { text: part.as_str().trim_start_matches('\\').to_string(), start, end }),
            Rule::named => found.push(Token { text: compact(&words(&part)), start, end }),
            _ => {}
        }
    }
    found
}

/// The words of a `named` pair.
pub fn words(named: &Pair<Rule>) -> String {
    let words = named.clone().into_inner().find(|part| part.as_rule() == Rule::words);
    words.map(|words| words.as_str().trim().replace('\\', "")).unwrap_or_default()
}

/// A word without what may separate its parts.
fn compact(word: &str) -> String {
    let kept: String = word.chars().filter(|letter| !matches!(letter, '_' | ' ' | '-' | '~')).collect();
    normal_name(&kept)
}

/// The subscript as one word.
pub fn joined(tokens: &[Token]) -> String {
    tokens.iter().filter(|token| token.text != ",").map(|token| token.text.as_str()).collect()
}

/// What stands on the line, in the forms that it may be declared in, the closest one first; none for what is no name.
pub fn bases(atom: &Pair<Rule>) -> Vec<String> {
    match atom.as_rule() {
        Rule::greek => vec![atom.as_str().trim_start_matches('\\').to_string()],
        Rule::letters | Rule::letter => vec![atom.as_str().chars().map(|l| normal_name(&l.to_string())).collect()],
        Rule::named => vec![compact(&words(atom))],
        Rule::styled => styled_bases(atom),
        Rule::group => {
            // `{\alpha}_i` is the same as `\alpha_i`
            let inner = atom.clone().into_inner().next().and_then(only_piece);
            inner
                .filter(|piece| piece.clone().into_inner().count() == 1)
                .map_or_else(Vec::new, |piece| piece.into_inner().next().map(|atom| bases(&atom)).unwrap_or_default())
        }
        _ => Vec::new(),
    }
}

/// The only piece of an expression.
pub fn only_piece(expression: Pair<Rule>) -> Option<Pair<Rule>> {
    let mut terms = expression.into_inner();
    let term = terms.next().filter(|term| term.as_rule() == Rule::term)?;
    let mut pieces = term.into_inner();
    let piece = pieces.next()?;
    (terms.next().is_none() && pieces.next().is_none()).then_some(piece)
}

fn styled_bases(atom: &Pair<Rule>) -> Vec<String> {
    let mut parts = atom.clone().into_inner();
    let style = parts.next().map(|style| style.as_str().trim_start_matches('\\').to_string()).unwrap_or_default();
    let Some(inner) = parts.next() else { return Vec::new() };
    let text = bare(inner.as_str()).replace('\\', "");
    let alphabet = matches!(style.as_str(), "mathbf" | "boldsymbol" | "bm" | "mathcal" | "mathbb" | "mathfrak");
    let whole = format!("{style}({text})");
    if alphabet { vec![whole, text] } else { vec![whole] }
}

/// How the name of a model file is set where no LaTeX form is declared.
pub fn key_of_name(name: &str) -> Key {
    let (head, below) = match name.split_once('_') {
        Some((head, below)) if !head.is_empty() => (head, below.replace('_', "")),
        _ => (name, String::new()),
    };
    let stem = head.trim_end_matches(|letter: char| letter.is_ascii_digit());
    let split = !stem.is_empty() && stem.chars().all(char::is_alphabetic);
    let (base, digits) = if split { head.split_at(stem.len()) } else { (head, "") };
    Key { base: base.to_string(), below: format!("{digits}{below}"), above: String::new() }
}

/// How a declared LaTeX form is set; none where it is more than a name with its scripts.
pub fn key_of_form(form: &str) -> Option<Key> {
    let piece = LatexParser::parse(Rule::symbol, form).ok()?.next()?.into_inner().next()?;
    let mut parts = piece.into_inner();
    let base = bases(&parts.next()?).into_iter().next()?;
    let scripts = scripts(parts);
    Some(Key { base, below: joined(&scripts.below), above: scripts.above })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn declared_names_and_forms_are_taken_apart() {
        let key = |base: &str, below: &str, above: &str| Key {
            base: base.to_string(),
            below: below.to_string(),
            above: above.to_string(),
        };
        assert_eq!(key_of_name("p_bread_white"), key("p", "breadwhite", ""));
        assert_eq!(key_of_name("x12"), key("x", "12", ""));
        assert_eq!(key_of_name("lnP"), key("lnP", "", ""));
        assert_eq!(key_of_form("\\gamma^{*}_{ij}"), Some(key("gamma", "ij", "*")));
        assert_eq!(key_of_form("\\bar{p}_0"), Some(key("bar(p)", "0", "")));
        assert_eq!(key_of_form("p^{\\mathrm{wheat}}"), Some(key("p", "", "wheat")));
        assert_eq!(key_of_form("{\\alpha}_1"), Some(key("alpha", "1", "")));
    }
}
