//! The author's own commands: `\newcommand{\b}{\beta}`, `\newcommand{\g}[2]{\gamma_{#1#2}}`.
//!
//! A body may use commands defined above it; since it is replaced when it is read, no command can use itself.

use super::super::diagnostic::Diagnostic;
use super::super::syntax::Span;
use super::prepared::command_length;

/// A command and what it stands for.
#[derive(Clone, Debug)]
struct Command {
    name: String,
    arguments: usize,
    body: String,
}

/// The commands defined so far.
#[derive(Clone, Debug, Default)]
pub struct Macros {
    commands: Vec<Command>,
}

/// The words that define commands.
const DEFINING: [&str; 5] = ["\\newcommand", "\\renewcommand", "\\providecommand", "\\DeclareMathOperator", "\\def"];
/// The most commands of one file.
const MOST_COMMANDS: usize = 200;
/// The longest body, with the commands in it replaced.
const MAX_BODY: usize = 4000;

/// Whether a text begins with the definition of a command.
pub fn begins_definition(text: &str) -> bool {
    DEFINING.contains(&&text[..command_length(text).min(text.len())])
}

impl Macros {
    /// Takes in the definition that the text begins with; its length, where there is one.
    ///
    /// # Errors
    /// A definition in a form that is not read.
    pub fn define(&mut self, text: &str, offset: usize) -> Result<Option<usize>, Diagnostic> {
        let word = command_length(text).min(text.len());
        if !DEFINING.contains(&&text[..word]) {
            return Ok(None);
        }
        let Some((command, length)) = definition(text, word) else {
            let message = format!("this `{}` is not in a form that is read", &text[..word]);
            let remedy = "write \\newcommand{\\name}{…}, or \\newcommand{\\name}[2]{… #1 … #2 …}";
            return Err(Diagnostic::error(Span::new(offset, offset + word), message).remedy(remedy));
        };
        let body = self.replaced(&command.body, offset)?;
        if body.len() > MAX_BODY || self.commands.len() >= MOST_COMMANDS {
            let message = format!("a file may define {MOST_COMMANDS} commands of {MAX_BODY} characters each");
            return Err(Diagnostic::error(Span::new(offset, offset + word), message).remedy("write the formulas out"));
        }
        if body.contains(&command.name) && names_of(&body).any(|name| name == command.name) {
            let message = format!("`{}` is defined by way of itself", command.name);
            return Err(Diagnostic::error(Span::new(offset, offset + length), message).remedy("break the circle"));
        }
        self.commands.retain(|known| known.name != command.name);
        self.commands.push(Command { body, ..command });
        Ok(Some(length))
    }

    /// What stands for the command that the text begins with, and how much of the text it replaces.
    ///
    /// # Errors
    /// A command whose arguments are not there.
    pub fn replace(&self, text: &str, offset: usize) -> Result<Option<(String, usize)>, Diagnostic> {
        let word = command_length(text).min(text.len());
        let Some(command) = self.commands.iter().find(|command| command.name == text[..word]) else { return Ok(None) };
        let mut body = command.body.clone();
        let mut length = word;
        for number in 1..=command.arguments {
            let Some((argument, taken)) = group(&text[length..]) else {
                let message = format!("`{}` takes {} arguments in braces", command.name, command.arguments);
                let span = Span::new(offset, offset + length);
                return Err(Diagnostic::error(span, message).remedy(format!("write {}{{…}}", command.name)));
            };
            body = body.replace(&format!("#{number}"), &self.replaced(argument, offset)?);
            length += taken;
        }
        Ok(Some((format!("{body} "), length)))
    }

    /// A text with its commands replaced.
    fn replaced(&self, text: &str, offset: usize) -> Result<String, Diagnostic> {
        let mut out = String::new();
        let mut rest = text;
        while let Some(at) = rest.find('\\') {
            out.push_str(&rest[..at]);
            rest = &rest[at..];
            let (piece, length) = match self.replace(rest, offset)? {
                Some(replacement) => replacement,
                None => {
                    let length = command_length(rest).min(rest.len());
                    (rest[..length].to_string(), length)
                }
            };
            out.push_str(&piece);
            rest = &rest[length..];
            if out.len() > MAX_BODY {
                break;
            }
        }
        out.push_str(rest);
        Ok(out)
    }
}

/// The commands in a text.
fn names_of(text: &str) -> impl Iterator<Item = &str> {
    text.match_indices('\\').map(|(at, _)| &text[at..at + command_length(&text[at..]).min(text.len() - at)])
}

/// A definition whose first word has the given length, and its whole length.
fn definition(text: &str, word: usize) -> Option<(Command, usize)> {
    let mut at = word;
    if text[at..].starts_with('*') {
        at += 1;
    }
    at += blanks(&text[at..]);
    let name = match group(&text[at..]) {
        Some((name, length)) if text[at..].starts_with('{') => {
            at += length;
            name.trim()
        }
        _ => {
            let length = command_length(&text[at..]).min(text.len() - at);
            at += length;
            &text[at - length..at]
        }
    };
    if !name.starts_with('\\') || command_length(name) != name.len() {
        return None;
    }
    at += blanks(&text[at..]);
    let mut arguments = 0;
    if let Some(rest) = text[at..].strip_prefix('[') {
        arguments = rest.split(']').next()?.trim().parse().ok().filter(|count| *count <= 9)?;
        at += rest.find(']')? + 2;
        at += blanks(&text[at..]);
    }
    let (body, length) = group(&text[at..]).filter(|_| text[at..].starts_with('{'))?;
    let operator = text[..word].ends_with("Operator");
    let body = if operator { format!("\\operatorname{{{body}}}") } else { body.to_string() };
    Some((Command { name: name.to_string(), arguments, body }, at + length))
}

fn blanks(text: &str) -> usize {
    text.len() - text.trim_start().len()
}

/// The group in braces, or the one token, that a text begins with, without its braces; and the length of it all.
fn group(text: &str) -> Option<(&str, usize)> {
    let lead = blanks(text);
    let rest = &text[lead..];
    if !rest.starts_with('{') {
        let first = rest.chars().next().filter(|letter| !matches!(letter, '}' | '$'))?;
        let length = if first == '\\' { command_length(rest).min(rest.len()) } else { first.len_utf8() };
        return Some((&rest[..length], lead + length));
    }
    let mut depth = 0i32;
    let mut escaped = false;
    for (at, letter) in rest.char_indices() {
        match letter {
            _ if escaped => escaped = false,
            '\\' => escaped = true,
            '{' => depth += 1,
            '}' => depth -= 1,
            _ => {}
        }
        if depth == 0 {
            return Some((&rest[1..at], lead + at + 1));
        }
    }
    None
}

#[cfg(test)]
mod tests {
    use super::super::prepared::Prepared;
    use super::*;

    #[test]
    fn commands_are_replaced_and_comments_blanked() {
        let mut macros = Macros::default();
        let text = "\\newcommand{\\b}{\\beta}\\newcommand{\\g}[2]{\\gamma_{#1#2}}\\b_1 + \\g{1}{2} % x\n\\bar";
        let prepared = Prepared::new(text, 10, &mut macros).unwrap();
        assert_eq!(prepared.text.split_whitespace().collect::<Vec<_>>().join(" "), "\\beta _1 + \\gamma_{12} \\bar");
        let at = prepared.text.find("gamma").unwrap();
        let span = prepared.span(at, at + 5);
        assert_eq!(&text[span.start - 10..span.end - 10], "\\g{1}{2}");
    }

    #[test]
    fn no_command_uses_itself() {
        let mut macros = Macros::default();
        assert!(macros.define("\\newcommand{\\a}{x\\a}", 0).is_err());
        assert!(macros.define("\\newcommand\\a[x]{}", 0).is_err());
    }
}
