//! What the grammar of LaTeX refuses, said so that an author knows what to write instead.

use pest::error::{Error, ErrorVariant, InputLocation};

use super::super::diagnostic::Diagnostic;
use super::grammar::Rule;
use super::prepared::{Prepared, command_length};

/// The message for a text that the grammar refuses.
pub fn explain(error: &Error<Rule>, prepared: &Prepared) -> Diagnostic {
    let at = match error.location {
        InputLocation::Pos(at) | InputLocation::Span((at, _)) => at,
    };
    let text = prepared.text.as_str();
    let at = at + text.get(at..).map_or(0, |rest| rest.len() - rest.trim_start().len());
    let rest = text.get(at..).unwrap_or("");
    let token = token(rest);
    let before = text.get(..at).unwrap_or("").trim_end();
    let span = match token.is_empty() {
        true => prepared.span(before.len().saturating_sub(last(before).len()), before.len()),
        false => prepared.span(at, at + token.len()),
    };
    if let Some((message, remedy)) = slip(token, before) {
        return Diagnostic::error(span, message).remedy(remedy);
    }
    let wanted = wanted(error);
    let found = match token {
        "" => "the formula ends too early".to_string(),
        "$" | "$$" | "\\]" | "\\end" => format!("the formula ends too early, at `{token}`"),
        _ => format!("`{token}` cannot stand here"),
    };
    match wanted.is_empty() {
        true => Diagnostic::error(span, found).remedy("take it out, or complete the formula"),
        false => Diagnostic::error(span, found).remedy(format!("{wanted} can stand here")),
    }
}

/// Common slips, by what is found and what stands before it.
fn slip(token: &str, before: &str) -> Option<(String, &'static str)> {
    let message = |text: &str| Some(text.to_string());
    let dangling = before.ends_with(['+', '-', '=', '*', '/', '<', '>']) || before.ends_with("\\cdot");
    match token {
        "\\\\" => {
            Some((message("a line ends here in the middle of a formula")?, "put a sign before what goes on below"))
        }
        "#" => Some((message("`#` has no meaning in a formula")?, "comments in LaTeX begin with `%`")),
        "|" => Some((message("there are no absolute values and no conditions in formulas")?, "take it out")),
        "\"" => Some((message("a quotation mark stands in a formula")?, "take it out")),
        "=" | "<" | ">" | "\\leq" | "\\geq" | "\\neq" if !dangling => Some((
            format!("a sign `{token}` stands in what must be a single formula"),
            "write the right-hand side alone, or give the whole equation to the statement: `demand $x_1 = …$`",
        )),
        "_" | "^" if before.is_empty() || dangling => {
            Some((format!("`{token}` stands without a letter before it"), "write the letter"))
        }
        "'" if before.is_empty() => Some((message("a prime stands without a letter before it")?, "write the letter")),
        "+" | "/" | "*" | "\\cdot" | "\\times" if dangling || before.ends_with('(') => {
            Some((format!("`{token}` stands where a formula should"), "take one of the two signs out"))
        }
        "$" | "$$" | "\\]" | "\\end" | ")" | "}" | "]" if dangling => {
            Some((format!("a formula is missing before `{token}`"), "write what is meant behind the sign"))
        }
        _ => None,
    }
}

/// The command, the number or the sign that a text begins with.
fn token(text: &str) -> &str {
    let Some(first) = text.chars().next() else { return "" };
    let length = match first {
        '\\' => command_length(text).min(text.len()),
        '$' if text.starts_with("$$") => 2,
        _ => first.len_utf8(),
    };
    &text[..length]
}

fn last(text: &str) -> &str {
    let length = text.chars().next_back().map_or(0, char::len_utf8);
    &text[text.len() - length..]
}

/// What would have been right, in words.
fn wanted(error: &Error<Rule>) -> String {
    let ErrorVariant::ParsingError { positives, .. } = &error.variant else { return String::new() };
    let phrases = PHRASES.iter().filter(|(rules, _)| rules.iter().any(|rule| positives.contains(rule)));
    let phrases: Vec<&str> = phrases.map(|(_, phrase)| *phrase).collect();
    match phrases.split_last() {
        None => String::new(),
        Some((last, [])) => (*last).to_string(),
        Some((last, others)) => format!("{} or {last}", others.join(", ")),
    }
}

/// What the rules read, in words.
const PHRASES: [(&[Rule], &str); 8] = [
    (&[Rule::environment_name], "an environment such as `align`"),
    (&[Rule::statement, Rule::expression, Rule::term, Rule::piece, Rule::number, Rule::letters], "a formula"),
    (&[Rule::argument], "an argument in braces"),
    (&[Rule::index, Rule::indices], "an index"),
    (&[Rule::binding, Rule::index_letter], "a letter"),
    (&[Rule::relation], "a sign such as `=`"),
    (&[Rule::operator, Rule::sign], "a sign such as `+`"),
    (&[Rule::EOI], "the end of the formula"),
];
