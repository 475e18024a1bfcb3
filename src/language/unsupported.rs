//! Forms of the language that this version does not read: each is recognised, and refused by name.

use super::diagnostic::Diagnostic;
use super::letters::leading_word;
use super::place::leading_number;
use super::syntax::Span;

/// The refusal of a statement, where its form is one that this version does not read.
pub fn refusal(text: &str, offset: usize) -> Option<Diagnostic> {
    let keyword = leading_word(text);
    let rest = text[keyword.len()..].trim_start();
    let (subject, remedy) = match keyword {
        "scenario" => ("a price change to be measured (`scenario \"…\": …`) is".to_string(), TAKE_OUT),
        "goods" => {
            let range = symbolic_range(rest)?;
            (format!("a number of goods that is left open (`{range}`) is"), "write a number, as in goods 1..4")
        }
        _ => return None,
    };
    let message = format!("{subject} not supported yet by this version");
    Some(Diagnostic::error(form_span(text, offset), message).remedy(remedy))
}

const TAKE_OUT: &str = "take the statement out, or put `#` before its lines";

/// What comes before `=` or `:`, at most the first line.
fn form_span(text: &str, offset: usize) -> Span {
    let line = text.find('\n').unwrap_or(text.len());
    let end = text[..line].find(['=', ':']).unwrap_or(line);
    Span::new(offset, offset + text[..end].trim_end().len())
}

fn symbolic_range(rest: &str) -> Option<String> {
    let first = leading_number(rest);
    let last = leading_word(rest[first.len()..].trim_start().strip_prefix("..")?.trim_start());
    if first.is_empty() || last.is_empty() { None } else { Some(format!("goods {first}..{last}")) }
}
