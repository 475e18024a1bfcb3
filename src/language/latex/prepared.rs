//! LaTeX before it is parsed: comments blanked, the author's own commands replaced, and the way back to the file.

use super::super::diagnostic::Diagnostic;
use super::super::syntax::Span;
use super::macros::Macros;

/// The most bytes that the replacement of commands may make of a formula.
const MAX_BYTES: usize = 1 << 18;

/// A stretch of prepared text, and where it comes from.
#[derive(Clone, Copy, Debug)]
struct Stretch {
    /// Where it begins in the prepared text.
    start: usize,
    /// Where it comes from.
    origin: Span,
    /// Whether it stands in the file as it is; else it replaces a command.
    literal: bool,
}

/// A text that the grammar can read.
#[derive(Debug)]
pub struct Prepared {
    /// The text.
    pub text: String,
    stretches: Vec<Stretch>,
    /// Where it begins in the file.
    offset: usize,
}

impl Prepared {
    /// Prepares the text that starts at `offset` of its file; definitions of commands in it are added to `macros`.
    ///
    /// # Errors
    /// A definition that cannot be read, a command without its arguments, a replacement beyond the bound.
    pub fn new(text: &str, offset: usize, macros: &mut Macros) -> Result<Prepared, Diagnostic> {
        let mut prepared = Prepared { text: String::with_capacity(text.len()), stretches: Vec::new(), offset };
        let mut at = 0;
        while at < text.len() {
            at = prepared.step(text, at, offset, macros)?;
            if prepared.text.len() > MAX_BYTES {
                let message = format!("with its commands replaced this formula has more than {MAX_BYTES} bytes");
                return Err(Diagnostic::error(Span::new(offset, offset + 1), message).remedy("write it out in parts"));
            }
        }
        Ok(prepared)
    }

    /// Takes over what stands at `at`; returns where to go on.
    fn step(&mut self, text: &str, at: usize, offset: usize, macros: &mut Macros) -> Result<usize, Diagnostic> {
        let rest = &text[at..];
        let length = match rest.as_bytes().first() {
            Some(b'%') => {
                let length = rest.find('\n').unwrap_or(rest.len());
                self.put(" ", Span::new(offset + at, offset + at + length), false);
                return Ok(at + length);
            }
            Some(b'\\') => {
                if let Some(length) = macros.define(rest, offset + at)? {
                    self.put(" ", Span::new(offset + at, offset + at + length), false);
                    return Ok(at + length);
                }
                if let Some((replacement, length)) = macros.replace(rest, offset + at)? {
                    self.put(&replacement, Span::new(offset + at, offset + at + length), false);
                    return Ok(at + length);
                }
                command_length(rest)
            }
            _ => rest.find(['%', '\\']).unwrap_or(rest.len()),
        };
        let length = length.clamp(1, rest.len());
        self.put(&rest[..length], Span::new(offset + at, offset + at + length), true);
        Ok(at + length)
    }

    fn put(&mut self, text: &str, origin: Span, literal: bool) {
        self.stretches.push(Stretch { start: self.text.len(), origin, literal });
        self.text.push_str(text);
    }

    /// Where in the file a stretch of the prepared text comes from.
    pub fn span(&self, start: usize, end: usize) -> Span {
        let first = self.origin(start, false);
        Span::new(first, self.origin(end, true).max(first))
    }

    fn origin(&self, at: usize, is_end: bool) -> usize {
        let reached = |stretch: &Stretch| stretch.start < at || (stretch.start == at && !is_end);
        let place = self.stretches.partition_point(reached);
        match place.checked_sub(1).and_then(|place| self.stretches.get(place)) {
            Some(stretch) if stretch.literal => stretch.origin.start + (at - stretch.start),
            Some(stretch) if is_end => stretch.origin.end,
            Some(stretch) => stretch.origin.start,
            None => self.offset,
        }
    }
}

/// The length of the command that a text begins with, a word or one character; 0 where it begins with none.
pub fn command_length(text: &str) -> usize {
    let Some(rest) = text.strip_prefix('\\') else { return 0 };
    let letters = rest.bytes().take_while(u8::is_ascii_alphabetic).count();
    1 + if letters > 0 { letters } else { rest.chars().next().map_or(0, char::len_utf8) }
}

/// A text without the spacing at its end.
pub fn trimmed(text: &str) -> &str {
    const SPACING: [&str; 12] =
        ["\\,", "\\;", "\\:", "\\!", "\\ ", "\\>", "~", "&", "\\quad", "\\qquad", "\\nonumber", "\\notag"];
    let mut rest = text.trim_end();
    while let Some(shorter) = SPACING.iter().find_map(|mark| rest.strip_suffix(mark)) {
        rest = shorter.trim_end();
    }
    rest
}
