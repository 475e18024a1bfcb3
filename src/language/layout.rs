//! The layout of a file: which lines make up which statement.

use std::borrow::Cow;

use super::diagnostic::Diagnostic;
use super::keywords::is_keyword;
use super::latex::display::begins_display;
use super::latex::macros::begins_definition;
use super::letters::{begins_word, leading_word};
use super::syntax::Span;

/// A statement, not yet read.
#[derive(Debug)]
pub struct Draft<'a> {
    /// From its keyword to its last word.
    pub span: Span,
    /// Its text, comments blanked out; offsets are those of the span.
    pub text: Cow<'a, str>,
    /// From where on it holds lines that are joined to it against the layout rule, which is a mistake already reported.
    pub excused: usize,
}

/// The statements of a file, and the lines that belong to none.
#[derive(Debug, Default)]
pub struct Layout<'a> {
    /// The statements, in order.
    pub drafts: Vec<Draft<'a>>,
    /// What is wrong with the layout.
    pub mistakes: Vec<Diagnostic>,
}

/// Splits a file into statements: a line that begins with white space goes on with the statement above it; blank lines
/// and comments in between do not end it. Linear in the length of the file.
pub fn layout(text: &str) -> Layout<'_> {
    let mut splitter = Splitter { text, layout: Layout::default(), orphaned: false, open: None };
    let mut start = 0;
    for line in text.split_inclusive('\n') {
        splitter.line(start, line);
        start += line.len();
    }
    splitter.close();
    splitter.layout
}

struct Splitter<'a> {
    text: &'a str,
    layout: Layout<'a>,
    /// Whether a line that goes on with nothing has been reported.
    orphaned: bool,
    open: Option<Open>,
}

/// The statement that further lines may go on with.
struct Open {
    span: Span,
    excused: usize,
    comments: Vec<Span>,
    in_formula: bool,
    /// Where a display ends that is open.
    display: usize,
}

impl Splitter<'_> {
    fn line(&mut self, start: usize, line: &str) {
        if self.open.as_ref().is_some_and(|open| open.display > start) {
            return self.extend(Span::new(start, start + line.trim_end().len()));
        }
        let content = line.trim_start();
        let in_formula = self.open.as_ref().is_some_and(|open| open.in_formula);
        if content.is_empty() || content.starts_with('#') && !(in_formula && content.len() < line.len()) {
            return self.blank(start, line);
        }
        let first = Span::new(start + line.len() - content.len(), start + line.trim_end().len());
        if content.len() == line.len() {
            match self.break_of_layout(content, first) {
                None if self.awaits_display(content) => {}
                None => self.begin(first),
                Some(mistake) => self.report(mistake, first),
            }
        } else if self.open.is_none() && !std::mem::replace(&mut self.orphaned, true) {
            let message = "there is no statement above that this line could go on with";
            let remedy = "begin a statement in the first column; a line that begins with white space goes on with the \
                          statement above it";
            self.report(Diagnostic::error(first, message).remedy(remedy), first);
        }
        self.extend(first);
    }

    /// A line without words: should it stand inside a statement, its comment is blanked out.
    fn blank(&mut self, start: usize, line: &str) {
        if let Some(open) = &mut self.open {
            open.comments.push(Span::new(start, start + line.trim_end().len()));
        }
    }

    /// Whether the statement above is no more than the words in front of a display, and the line begins one.
    fn awaits_display(&self, content: &str) -> bool {
        let words = self.open.as_ref().map(|open| &self.text[open.span.start..open.span.end]);
        let lone = |words: &str| DISPLAYED.contains(&words.split_whitespace().collect::<Vec<_>>().join(" ").as_str());
        begins_display(content) && words.is_some_and(lone)
    }

    /// What is wrong with a line in the first column that cannot begin a statement.
    fn break_of_layout(&self, content: &str, line: Span) -> Option<Diagnostic> {
        let word = leading_word(content);
        if word.is_empty() && (content.starts_with("//") || content.starts_with('%')) {
            return Some(Diagnostic::error(line, "a comment begins with `#`").remedy("put `#` before it"));
        }
        let dangling = self.open.as_ref().is_some_and(|open| self.text[..open.span.end].ends_with(JOINTS));
        let goes_on = content.starts_with(JOINTS) || content.starts_with([')', ']']);
        if self.open.is_some() && (goes_on || dangling && !is_keyword(word)) {
            let message = "this line goes on with the statement above, and begins in the first column";
            return Some(
                Diagnostic::error(line, message).remedy("put white space before it, or `#` if it is a comment"),
            );
        }
        if content.starts_with(begins_word) || begins_display(content) || begins_definition(content) {
            return None;
        }
        let message = "a statement begins with a word, such as `goods`, `let` or `demand`";
        Some(Diagnostic::error(line, message).remedy("put `#` before the line if it is a comment"))
    }

    fn begin(&mut self, line: Span) {
        self.close();
        let empty = Span::new(line.start, line.start);
        self.open =
            Some(Open { span: empty, excused: usize::MAX, comments: Vec::new(), in_formula: false, display: 0 });
    }

    /// Reports a line and reads it as part of the statement above, whose further mistakes in it are not reported.
    fn report(&mut self, mistake: Diagnostic, line: Span) {
        self.layout.mistakes.push(mistake);
        if let Some(open) = &mut self.open {
            open.excused = open.excused.min(line.start);
        }
    }

    /// Takes a line into the open statement.
    fn extend(&mut self, line: Span) {
        let Some(open) = &mut self.open else { return };
        let from = line.start.max(open.display);
        if from >= line.end || begins_definition(&self.text[open.span.start..]) {
            open.span.end = line.end;
            return;
        }
        let scan = scan(self.text, Span::new(from, line.end), open.in_formula);
        open.in_formula = scan.in_formula;
        open.display = scan.display;
        open.span.end = line.start + self.text[line.start..scan.end].trim_end().len();
        if scan.end < line.end {
            open.comments.push(Span::new(scan.end, line.end));
        }
    }

    fn close(&mut self) {
        let Some(open) = self.open.take() else { return };
        let mut text = Cow::Borrowed(&self.text[open.span.start..open.span.end]);
        if open.comments.iter().any(|comment| comment.start < open.span.end) {
            text = Cow::Owned(blanked(self.text, open.span, &open.comments));
        }
        self.layout.drafts.push(Draft { span: open.span, text, excused: open.excused });
    }
}

/// What a statement cannot end with, nor begin with.
const JOINTS: [char; 11] = ['+', '-', '*', '/', '^', '=', '<', '>', ',', '(', '['];

/// The words that may stand alone in front of a display.
const DISPLAYED: [&str; 9] = ["demand", "share", "outlay", "log demand", "let", "given", "claim", "assume", "inverse"];

/// What a look over a line found.
struct Scan {
    /// Where its comment begins, or its end.
    end: usize,
    /// Whether a formula between `$` signs is still open there.
    in_formula: bool,
    /// Where the display ends that is still open there; 0 where none is.
    display: usize,
}

/// Looks for the comment of a line, and for what stands open at its end.
fn scan(text: &str, line: Span, mut in_formula: bool) -> Scan {
    let mut in_string = false;
    let mut at = line.start;
    while at < line.end {
        if !text.is_char_boundary(at) {
            at += 1;
            continue;
        }
        let rest = &text[at..line.end];
        let outside = !in_string && !in_formula;
        let single = rest.starts_with('$') && !rest.starts_with("$$");
        if outside && begins_display(rest) && !single {
            match display_end(text, at) {
                Some(end) if end > line.end => return Scan { end: line.end, in_formula, display: end },
                Some(end) => {
                    at = end;
                    continue;
                }
                None => at += 1,
            }
        } else {
            match rest.as_bytes()[0] {
                b'"' if !in_formula => in_string = !in_string,
                b'$' if !in_string => in_formula = !in_formula,
                b'#' if outside => return Scan { end: at, in_formula, display: 0 },
                b'%' if in_formula && !text[..at].ends_with('\\') => break,
                _ => {}
            }
        }
        at += 1;
    }
    Scan { end: line.end, in_formula, display: 0 }
}

/// Behind where the display closes that opens at `at`; none where it does not, or where an empty line stands in it.
fn display_end(text: &str, at: usize) -> Option<usize> {
    let rest = &text[at..];
    let length = if let Some(inside) = rest.strip_prefix("$$") {
        2 + inside.find("$$")? + 2
    } else if rest.starts_with("\\[") {
        rest.find("\\]")? + 2
    } else {
        environment_length(rest)?
    };
    let mut lines = rest[..length].lines().skip(1);
    (!lines.any(|line| line.trim().is_empty())).then_some(at + length)
}

/// The length of the environment that a text begins with, those inside it counted.
fn environment_length(text: &str) -> Option<usize> {
    let mut depth = 0usize;
    let mut at = 0;
    loop {
        let next = at + text[at..].find('\\')?;
        let rest = &text[next..];
        if rest.starts_with("\\begin") {
            depth += 1;
        } else if rest.starts_with("\\end") {
            depth = depth.checked_sub(1)?;
            if depth == 0 {
                return Some(next + rest.find('}')? + 1);
            }
        }
        at = next + 1;
    }
}

/// The text of a span with spaces in place of its comments, byte for byte.
fn blanked(text: &str, span: Span, comments: &[Span]) -> String {
    let mut result = String::with_capacity(span.end - span.start);
    let mut from = span.start;
    for comment in comments.iter().filter(|comment| comment.start < span.end) {
        result.push_str(&text[from..comment.start]);
        let end = comment.end.min(span.end);
        result.extend(std::iter::repeat_n(' ', end - comment.start));
        from = end;
    }
    result.push_str(&text[from..span.end]);
    result
}

#[cfg(test)]
mod tests {
    use super::*;

    fn texts(text: &str) -> Vec<String> {
        layout(text).drafts.iter().map(|draft| draft.text.to_string()).collect()
    }

    #[test]
    fn white_space_goes_on_with_the_statement_above() {
        assert_eq!(
            texts("goods a,\n  b\r\n\n# no end\n\tc # end\nincome m\n"),
            ["goods a,\n  b\r\n\n        \n\tc", "income m"]
        );
    }

    #[test]
    fn a_hash_in_a_string_or_a_formula_is_no_comment() {
        assert_eq!(texts("title \"a # b\" # c"), ["title \"a # b\""]);
        assert_eq!(texts("let a = $x #\n # y$ # z"), ["let a = $x #\n # y$"]);
    }

    #[test]
    fn a_line_that_must_go_on_is_reported_once() {
        let layout = layout("let a = b +\nc\nlet d = 1");
        assert_eq!((layout.drafts.len(), layout.mistakes.len()), (2, 1));
    }
}
