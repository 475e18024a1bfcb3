//! A look over a statement before it is parsed: brackets that match, quotes that close, no deeper than the bound.
//! Linear, and without recursion, so that the recursive parser only ever sees what it can hold.

use super::diagnostic::Diagnostic;
use super::letters::unprintable;
use super::syntax::Span;

/// How deep brackets and powers may be nested.
pub const MAX_NESTING: usize = 200;

/// Checks a statement that starts at `offset` of its file.
///
/// # Errors
/// The first bracket, quote or `$` without its partner, the first bracket too deep, the first character that cannot be
/// shown.
pub fn check(text: &str, offset: usize) -> Result<(), Diagnostic> {
    let mut open: Vec<(char, Span)> = Vec::new();
    let mut quote: Option<(char, usize)> = None;
    // a comment in LaTeX, up to the end of its line
    let mut in_remark = false;
    for (at, letter) in text.char_indices() {
        let span = Span::new(offset + at, offset + at + letter.len_utf8());
        if unprintable(letter) && !letter.is_whitespace() {
            return Err(unprintable_letter(letter, span));
        }
        if in_remark {
            in_remark = letter != '\n';
            continue;
        }
        match (quote, letter) {
            (Some((mark, _)), _) if letter == mark => quote = None,
            (Some(('"', start)), '\n') => return Err(unclosed_quote('"', start, text, offset)),
            (Some(('$', _)), '%') => in_remark = true,
            (Some(_), _) => {}
            (None, '"' | '$') => quote = Some((letter, at)),
            (None, '(' | '[' | '{') => {
                open.push((letter, span));
                if open.len() > MAX_NESTING {
                    return Err(too_deep(span));
                }
            }
            (None, ')' | ']' | '}') => close(&mut open, letter, span, text, offset)?,
            _ => {}
        }
    }
    if let Some((mark, start)) = quote {
        return Err(unclosed_quote(mark, start, text, offset));
    }
    match open.pop() {
        None => Ok(()),
        Some((bracket, span)) => Err(unclosed(bracket, span)),
    }
}

/// Takes the partner of a closing bracket off the stack.
fn close(open: &mut Vec<(char, Span)>, letter: char, span: Span, text: &str, offset: usize) -> Result<(), Diagnostic> {
    match open.pop() {
        None => {
            let remedy = format!("take it out, or put a `{}` where it should open", partner(letter));
            Err(Diagnostic::error(span, format!("`{letter}` closes a bracket that was never opened")).remedy(remedy))
        }
        Some((bracket, _)) if partner(bracket) == letter => Ok(()),
        Some((bracket, opened)) => {
            let between = text.get(opened.start - offset..span.end - offset).unwrap_or("");
            if between.contains('\n') {
                return Err(unclosed(bracket, opened));
            }
            let message = format!("`{bracket}` is closed by `{letter}`");
            Err(Diagnostic::error(opened.join(span), message).remedy(format!("close it with `{}`", partner(bracket))))
        }
    }
}

fn partner(bracket: char) -> char {
    match bracket {
        '(' => ')',
        '[' => ']',
        '{' => '}',
        ')' => '(',
        ']' => '[',
        _ => '{',
    }
}

fn unclosed(bracket: char, span: Span) -> Diagnostic {
    let message = format!("this `{bracket}` is never closed");
    let remedy = format!(
        "close it with `{}`; if the statement goes on below, begin the lines that go on with white space",
        partner(bracket)
    );
    Diagnostic::error(span, message).remedy(remedy)
}

/// The span runs to the end of the line, where a closing mark might be.
fn unclosed_quote(mark: char, start: usize, text: &str, offset: usize) -> Diagnostic {
    let end = text[start..].find('\n').map_or(text.len(), |length| start + length);
    let end = start + text[start..end].trim_end().len();
    let span = Span::new(offset + start, offset + end);
    if mark == '"' {
        Diagnostic::error(span, "this text is never closed").remedy("close it with `\"` on the same line")
    } else {
        Diagnostic::error(span, "this `$` has no partner").remedy("close the LaTeX formula with `$`")
    }
}

fn too_deep(span: Span) -> Diagnostic {
    let message = format!("brackets are nested more than {MAX_NESTING} deep here, which is the bound");
    Diagnostic::error(span, message).remedy("name the inner parts with `let`")
}

fn unprintable_letter(letter: char, span: Span) -> Diagnostic {
    let message = format!("the character U+{:04X} cannot be seen, and does not belong in a model file", letter as u32);
    Diagnostic::error(span, message).remedy("take it out")
}
