//! Displays in LaTeX: aligned equations, broken where they are too wide, and matrices.

use crate::render::document::{Equation, Matrix, Relation};
use crate::render::formula_latex::typeset;
use crate::render::latex_lines::lines;
use crate::render::latex_pieces::{Piece, Style};
use crate::render::latex_where::Namer;

/// The width that a display may have, in hundredths of an em: a column of an article, with a little to spare.
pub const COLUMN: u32 = 3350;
/// The width of a relation with its blanks.
const RELATION_WIDTH: u32 = 160;
/// No display is squeezed into less than this.
const LEAST_ROOM: u32 = 1200;
/// amsmath sets no more columns without being told to.
const MATRIX_COLUMNS: usize = 10;

/// The relation in LaTeX.
pub fn relation_latex(relation: Relation) -> &'static str {
    match relation {
        Relation::Equal => "=",
        Relation::NotEqual => "\\neq",
        Relation::Less => "<",
        Relation::LessEqual => "\\leq",
        Relation::Greater => ">",
        Relation::GreaterEqual => "\\geq",
        Relation::Identical => "\\equiv",
        Relation::Defined => ":=",
    }
}

/// Equations as an `align*`, followed by the definitions of what had to be named; `mark` is the punctuation at the end.
pub fn display(equations: &[Equation], mark: &str, namer: &mut Namer) -> String {
    let mut parts = Vec::new();
    let mut defined = namer.count();
    parts.push(align(equations, namer));
    while namer.count() > defined {
        let definitions = namer.definitions_since(defined);
        defined = namer.count();
        parts.push(align(&definitions, namer));
    }
    let environment = |body: String| format!("\\begin{{align*}}\n  {body}\n\\end{{align*}}\n");
    if let Some(last) = parts.last_mut() {
        last.push_str(mark);
    }
    parts.into_iter().map(environment).collect::<Vec<_>>().join("where\n")
}

/// The rows of equations that are aligned at their relations.
fn align(equations: &[Equation], namer: &mut Namer) -> String {
    let lefts: Vec<Option<Piece>> =
        equations.iter().map(|each| each.left.as_ref().map(|left| typeset(left, Style::Display))).collect();
    let margin = lefts.iter().flatten().map(|left| left.width).max().unwrap_or(0);
    let stacked = margin > COLUMN * 2 / 5 && equations.iter().any(|each| whole_width(each, margin) > COLUMN);
    let mut rows = Vec::new();
    for (equation, left) in equations.iter().zip(&lefts) {
        match (stacked, left) {
            (true, Some(left)) => rows.extend(stacked_rows(equation, left, namer)),
            _ => rows.extend(aligned_rows(equation, left.as_ref(), if stacked { 0 } else { margin }, namer)),
        }
    }
    rows.join(" \\\\\n  ")
}

fn whole_width(equation: &Equation, margin: u32) -> u32 {
    margin + RELATION_WIDTH + typeset(&equation.right, Style::Display).width
}

/// `left &= right`, continued below the relation.
fn aligned_rows(equation: &Equation, left: Option<&Piece>, margin: u32, namer: &mut Namer) -> Vec<String> {
    let room = COLUMN.saturating_sub(margin).max(LEAST_ROOM);
    let first = if equation.relation.is_some() { room - RELATION_WIDTH } else { room };
    let start = match (left, equation.relation) {
        (Some(left), Some(relation)) => format!("{} &{} ", left.tex, relation_latex(relation)),
        (None, Some(relation)) => format!("&{} ", relation_latex(relation)),
        (_, None) => "& ".to_string(),
    };
    broken_rows(equation, &start, (first, room - 100), 1, namer)
}

/// The left side on a line of its own, for where there is no room beside it.
fn stacked_rows(equation: &Equation, left: &Piece, namer: &mut Namer) -> Vec<String> {
    let relation = equation.relation.map_or("", relation_latex);
    let start = format!("&\\quad {relation} ");
    let mut rows = vec![format!("& {}", left.tex)];
    rows.extend(broken_rows(equation, &start, (COLUMN - RELATION_WIDTH - 100, COLUMN - 200), 2, namer));
    rows
}

fn broken_rows(equation: &Equation, start: &str, room: (u32, u32), indent: u32, namer: &mut Namer) -> Vec<String> {
    let right = namer.shorten(&equation.right, room.1);
    let mut rows = Vec::new();
    for (position, line) in lines(&right, room.0, room.1).into_iter().enumerate() {
        match position {
            0 => rows.push(format!("{start}{}", line.tex)),
            _ => rows.push(format!("&{} {}", space(indent + line.depth), line.tex)),
        }
    }
    rows
}

/// Horizontal space of so many em.
fn space(em: u32) -> String {
    let mut out = "\\qquad".repeat((em / 2) as usize);
    if em % 2 == 1 {
        out.push_str("\\quad");
    }
    out
}

/// A matrix as it is, or entry by entry where it is too wide.
pub fn matrix(matrix: &Matrix, namer: &mut Namer) -> String {
    let cells: Vec<Vec<Piece>> =
        matrix.entries.iter().map(|row| row.iter().map(|entry| typeset(entry, Style::Display)).collect()).collect();
    let columns = cells.iter().map(Vec::len).max().unwrap_or(0);
    let widths = (0..columns).map(|column| cells.iter().filter_map(|row| row.get(column)).map(|cell| cell.width).max());
    let name = typeset(&matrix.name.clone().into(), Style::Display);
    let width: u32 = widths.map(|width| width.unwrap_or(0) + 100).sum::<u32>() + name.width + RELATION_WIDTH + 100;
    if columns > MATRIX_COLUMNS || width > COLUMN {
        return display(&matrix.listed(), "", namer);
    }
    let tall = cells.iter().flatten().any(|cell| cell.height > 0);
    let end = if tall { " \\\\[1ex]\n    " } else { " \\\\\n    " };
    let line = |row: &Vec<Piece>| row.iter().map(|cell| cell.tex.as_str()).collect::<Vec<_>>().join(" & ");
    let body = cells.iter().map(line).collect::<Vec<_>>().join(end);
    format!(
        "\\begin{{align*}}\n  {} &=\n  \\begin{{pmatrix}}\n    {body}\n  \\end{{pmatrix}}\n\\end{{align*}}\n",
        name.tex
    )
}
