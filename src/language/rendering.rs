//! A message as text: `file:line:column: message`, the line with carets under the words at fault, the remedy.

use super::diagnostic::{Diagnostic, Severity};
use super::letters::{is_mark, unprintable};
use super::source::Source;

/// The columns of source that are shown; a longer line is cut around the place.
const WIDTH: usize = 76;
/// What is shown before the place where a line is cut on its left.
const LEAD: usize = 24;
/// The bytes on either side of the place that are looked at.
const REACH: usize = 4 * WIDTH;
const INDENT: &str = "    ";
const TAB: &str = "    ";
const CUT: &str = "…";

impl Diagnostic {
    /// The message as plain text of several lines, without a line feed at its end. The same for the same input, always.
    pub fn render(&self, source: &Source) -> String {
        let (line, column) = source.place(self.span.start);
        let kind = if self.severity == Severity::Warning { "warning: " } else { "" };
        let mut text = format!("{}:{line}:{column}: {kind}{}", source.name, self.message);
        let (start, content) = source.line(line);
        if !content.trim().is_empty() {
            let (from, to) = (self.span.start.saturating_sub(start), self.span.end.saturating_sub(start));
            let (shown, carets) = excerpt(content, from, to.max(from));
            text += &format!("\n{INDENT}{shown}\n{INDENT}{carets}");
        }
        if let Some(remedy) = &self.remedy {
            text += &format!("\n  = {remedy}");
        }
        text
    }
}

/// The part of a line around `from..to`, and the carets to go under it. The cost does not grow with the line.
fn excerpt(line: &str, from: usize, to: usize) -> (String, String) {
    let begin = boundary(line, from.saturating_sub(REACH));
    let end = boundary(line, from.saturating_add(REACH));
    let cells = cells(&line[begin..end], from - begin, to - begin);
    let first = cells.iter().position(|cell| cell.marked).unwrap_or(cells.len());
    let whole = begin == 0 && end == line.len() && cells.len() <= WIDTH;
    let left = if whole { 0 } else { first.saturating_sub(LEAD).min(cells.len().saturating_sub(WIDTH)) };
    let right = cells.len().min(left + WIDTH);
    let (mut shown, mut carets) = (String::new(), String::new());
    if begin > 0 || left > 0 {
        shown += CUT;
        carets += " ";
    }
    for cell in &cells[left..right] {
        shown += &cell.text;
        carets += &(if cell.marked { "^" } else { " " }).repeat(cell.width);
    }
    if end < line.len() || right < cells.len() {
        shown += CUT;
    }
    if first == cells.len() {
        carets += "^";
    }
    (shown.trim_end().to_string(), carets.trim_end().to_string())
}

/// The last boundary between characters that is not behind `at`.
fn boundary(line: &str, at: usize) -> usize {
    let at = at.min(line.len());
    (0..=at).rev().find(|at| line.is_char_boundary(*at)).unwrap_or(0)
}

/// One character as it is shown, with the accents on it.
struct Cell {
    text: String,
    width: usize,
    marked: bool,
}

fn cells(line: &str, from: usize, to: usize) -> Vec<Cell> {
    let mut cells: Vec<Cell> = Vec::new();
    for (at, letter) in line.char_indices() {
        if is_mark(letter)
            && let Some(cell) = cells.last_mut()
        {
            cell.text.push(letter);
            continue;
        }
        let marked = at == from || (from <= at && at < to);
        match letter {
            '\t' => cells.extend(TAB.chars().map(|space| Cell { text: space.to_string(), width: 1, marked })),
            _ if unprintable(letter) => cells.push(Cell { text: '\u{fffd}'.to_string(), width: 1, marked }),
            _ => cells.push(Cell { text: letter.to_string(), width: width(letter), marked }),
        }
    }
    cells
}

/// The columns that a terminal gives to a character: two for the wide scripts of East Asia.
fn width(letter: char) -> usize {
    match letter {
        '\u{1100}'..='\u{115f}'
        | '\u{2e80}'..='\u{a4cf}'
        | '\u{ac00}'..='\u{d7a3}'
        | '\u{f900}'..='\u{faff}'
        | '\u{fe30}'..='\u{fe6f}'
        | '\u{ff00}'..='\u{ff60}'
        | '\u{1f300}'..='\u{1faff}'
        | '\u{20000}'..='\u{3fffd}' => 2,
        _ => 1,
    }
}
