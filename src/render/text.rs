//! Documents as plain text for a terminal.

use crate::render::document::{Block, Document, Equation, Inline, Matrix, Table, Tone, VerdictLine};
use crate::render::formula_text::plain_expression;
use crate::render::text_lines::{FIRM_BLANK, break_formula, wrap};
use std::fmt::Write;

/// How text is laid out.
#[derive(Clone, Copy, Debug)]
pub struct Layout {
    /// The number of characters that a line may have.
    pub width: usize,
    /// Whether verdicts are coloured.
    pub colour: bool,
}

impl Default for Layout {
    fn default() -> Layout {
        Layout { width: 80, colour: false }
    }
}

/// How far displays stand from the margin.
const DISPLAY_INDENT: usize = 4;
/// The column where verdicts begin, if the names leave room.
const VERDICT_COLUMN: usize = 16;
/// Left sides up to this width are aligned with each other.
const ALIGNED_LEFT: usize = 28;

/// The document as text, with a newline at the end.
pub fn text(document: &Document, layout: Layout) -> String {
    let mut pieces = Vec::new();
    if let Some(title) = &document.title {
        pieces.push(underlined(&visible(title), '=', layout));
    }
    pieces.extend(document.blocks.iter().map(|block| render_block(block, layout)));
    let mut out = pieces.join("\n\n");
    out.push('\n');
    out
}

fn render_block(block: &Block, layout: Layout) -> String {
    match block {
        Block::Heading { level: 1, text } => underlined(&running(text), '-', layout),
        Block::Heading { text, .. } => wrap(&running(text), layout.width, 0, 0),
        Block::Paragraph(text) => wrap(&running(text), layout.width, 0, 0),
        Block::Display(equations) => display(equations, layout),
        Block::Where(equations) => format!("where\n\n{}", display(equations, layout)),
        Block::Verdicts(lines) => verdicts(lines, layout),
        Block::Table(table) => render_table(table, layout),
        Block::Matrix(matrix) => render_matrix(matrix, layout),
        Block::List { ordered, items } => list(*ordered, items, layout),
        Block::Note(text) => wrap(&format!("Note: {}", running(text)), layout.width, 6, 0),
    }
}

fn underlined(text: &str, line: char, layout: Layout) -> String {
    let wrapped = wrap(text, layout.width, 0, 0);
    let longest = wrapped.lines().map(|each| each.chars().count()).max().unwrap_or(0);
    format!("{wrapped}\n{}", line.to_string().repeat(longest))
}

/// Running text on one line, with firm blanks inside formulas that are short enough to stay whole.
fn running(inlines: &[Inline]) -> String {
    let mut out = String::new();
    for inline in inlines {
        match inline {
            Inline::Text(words) | Inline::Emphasis(words) => out.push_str(&visible(words)),
            Inline::Code(code) => {
                let _ = write!(out, "`{}`", visible(code).replace(' ', &FIRM_BLANK.to_string()));
            }
            Inline::Math(equation) => {
                let formula = equation_text(equation);
                match formula.chars().count() <= 48 {
                    true => out.push_str(&formula.replace(' ', &FIRM_BLANK.to_string())),
                    false => out.push_str(&formula),
                }
            }
        }
    }
    out
}

/// The text without control characters, which a terminal would obey.
fn visible(text: &str) -> String {
    text.chars().map(|each| if each.is_control() { ' ' } else { each }).collect()
}

/// An equation on one line.
pub fn equation_text(equation: &Equation) -> String {
    let mut out = String::new();
    if let Some(left) = &equation.left {
        out.push_str(&plain_expression(left));
        out.push(' ');
    }
    if let Some(relation) = equation.relation {
        out.push_str(relation.plain());
        out.push(' ');
    }
    out.push_str(&plain_expression(&equation.right));
    out
}

fn display(equations: &[Equation], layout: Layout) -> String {
    let lefts: Vec<String> =
        equations.iter().map(|each| each.left.as_ref().map(plain_expression).unwrap_or_default()).collect();
    let widths = lefts.iter().map(|left| left.chars().count());
    let aligned = widths.filter(|&width| width <= ALIGNED_LEFT).max().unwrap_or(0);
    let lines: Vec<String> =
        equations.iter().zip(&lefts).map(|(equation, left)| display_line(equation, left, aligned, layout)).collect();
    lines.join("\n")
}

fn display_line(equation: &Equation, left: &str, aligned: usize, layout: Layout) -> String {
    let right = plain_expression(&equation.right);
    let mut out = " ".repeat(DISPLAY_INDENT);
    let Some(relation) = equation.relation else {
        place(&mut out, &break_formula(&right, DISPLAY_INDENT, DISPLAY_INDENT, layout.width));
        return out;
    };
    let (sign, width) = (relation.plain(), left.chars().count());
    let mut start = DISPLAY_INDENT + aligned.max(width) + 1;
    let _ = write!(out, "{left:aligned$} {sign} ");
    if width > ALIGNED_LEFT && start + sign.len() + 1 + right.chars().count() > layout.width {
        start = DISPLAY_INDENT + 4;
        out = format!("{}{left}\n{}{sign} ", " ".repeat(DISPLAY_INDENT), " ".repeat(start));
    }
    place(&mut out, &break_formula(&right, start + sign.len() + 1, 2 * DISPLAY_INDENT, layout.width));
    out
}

/// Appends broken lines; the first goes on where the text stands.
fn place(out: &mut String, lines: &[(usize, String)]) {
    for (position, (indent, line)) in lines.iter().enumerate() {
        if position > 0 {
            let _ = write!(out, "\n{}", " ".repeat(*indent));
        }
        out.push_str(line);
    }
}

fn verdicts(lines: &[VerdictLine], layout: Layout) -> String {
    let longest_name = lines.iter().map(|line| line.name.chars().count()).max().unwrap_or(0);
    let longest_verdict = lines.iter().map(|line| line.verdict.chars().count()).max().unwrap_or(0);
    let name_width = VERDICT_COLUMN.max(longest_name + 2);
    let note_column = name_width + longest_verdict + 2;
    let mut out = Vec::new();
    for line in lines {
        let padded = format!("{:longest_verdict$}", line.verdict);
        let verdict = if layout.colour { coloured(&padded, line.tone) } else { padded };
        let head = format!("{:name_width$}{verdict}  ", visible(&line.name));
        let note = wrap(&running(&line.note), layout.width, note_column, note_column);
        out.push(format!("{head}{note}").trim_end().to_string());
    }
    out.join("\n")
}

fn coloured(text: &str, tone: Tone) -> String {
    let code = match tone {
        Tone::Holds => 32,
        Tone::Fails => 31,
        Tone::Partly => 33,
        Tone::Open => 36,
    };
    format!("\u{1b}[{code}m{text}\u{1b}[0m")
}

fn render_table(table: &Table, layout: Layout) -> String {
    let cell = |inlines: &Vec<Inline>| running(inlines).replace(FIRM_BLANK, " ");
    let head: Vec<String> = table.columns.iter().map(cell).collect();
    let rows: Vec<Vec<String>> = table.rows.iter().map(|row| row.iter().map(cell).collect()).collect();
    let length = |text: &String| text.chars().count();
    let widths: Vec<usize> = (0..head.len())
        .map(|column| rows.iter().filter_map(|row| row.get(column)).map(length).fold(length(&head[column]), usize::max))
        .collect();
    if widths.iter().sum::<usize>() + 2 * widths.len() > layout.width {
        return rows.iter().map(|row| table_row_as_list(&head, row, layout)).collect::<Vec<_>>().join("\n\n");
    }
    let line = |cells: &[String]| {
        let padded: Vec<String> = cells.iter().zip(&widths).map(|(text, &width)| format!("{text:width$}")).collect();
        padded.join("  ").trim_end().to_string()
    };
    let rule = widths.iter().map(|&width| "-".repeat(width)).collect::<Vec<_>>().join("  ");
    let mut out = vec![line(&head), rule];
    out.extend(rows.iter().map(|row| line(row)));
    out.join("\n")
}

/// A row that is too wide for a line, as one line for each column.
fn table_row_as_list(head: &[String], row: &[String], layout: Layout) -> String {
    let mut lines = Vec::new();
    for (name, cell) in head.iter().zip(row) {
        let label = format!("{name}: ");
        let indent = label.chars().count().min(8);
        lines.push(format!("{label}{}", wrap(cell, layout.width, indent, label.chars().count())));
    }
    lines.join("\n")
}

fn render_matrix(matrix: &Matrix, layout: Layout) -> String {
    let cells: Vec<Vec<String>> = matrix.entries.iter().map(|row| row.iter().map(plain_expression).collect()).collect();
    let columns = cells.first().map_or(0, Vec::len);
    let widths: Vec<usize> = (0..columns)
        .map(|column| {
            cells.iter().filter_map(|row| row.get(column)).map(|cell| cell.chars().count()).max().unwrap_or(0)
        })
        .collect();
    let name = plain_expression(&matrix.name.clone().into());
    let lead = DISPLAY_INDENT + name.chars().count() + 3;
    if lead + widths.iter().sum::<usize>() + 3 * columns + 4 > layout.width {
        return display(&matrix.listed(), layout);
    }
    let middle = cells.len().saturating_sub(1) / 2;
    let mut lines = Vec::new();
    for (position, row) in cells.iter().enumerate() {
        let start = match position == middle {
            true => format!("{}{name} = ", " ".repeat(DISPLAY_INDENT)),
            false => " ".repeat(lead),
        };
        let padded: Vec<String> = row.iter().zip(&widths).map(|(cell, &width)| format!("{cell:width$}")).collect();
        lines.push(format!("{start}[ {} ]", padded.join("   ")));
    }
    lines.join("\n")
}

fn list(ordered: bool, items: &[Vec<Inline>], layout: Layout) -> String {
    let mut lines = Vec::new();
    for (position, item) in items.iter().enumerate() {
        let mark = if ordered { format!("{:>3}. ", position + 1) } else { "  - ".to_string() };
        let indent = mark.chars().count();
        lines.push(format!("{mark}{}", wrap(&running(item), layout.width, indent, indent)));
    }
    lines.join("\n")
}
