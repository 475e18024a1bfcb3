//! Displays laid out: equations aligned at their relations and broken where they are too wide, and matrices.

use crate::render::document::{Equation, Matrix, Relation};
use crate::render::layout::{Node, Piece, Style};
use crate::render::lines::lines;
use crate::render::naming::Namer;
use crate::render::typeset::typeset;

/// The width that a display may have, in hundredths of an em: a column of an article, with a little to spare.
pub const COLUMN: u32 = 3350;
/// The width of a relation with its blanks.
const RELATION_WIDTH: u32 = 160;
/// No display is squeezed into less than this.
const LEAST_ROOM: u32 = 1200;
/// A matrix with more columns is listed entry by entry.
const MATRIX_COLUMNS: usize = 10;

/// A line of a display.
pub struct Row {
    /// What ends at the line of alignment.
    pub left: Option<Node>,
    /// How many em the rest is indented.
    pub indent: u32,
    /// The relation, which stands at the line of alignment.
    pub relation: Option<Relation>,
    /// What follows.
    pub body: Node,
}

/// The rows of equations, and then those of the definitions of what had to be named, as displays of their own.
pub fn displays(equations: &[Equation], namer: &mut Namer) -> Vec<Vec<Row>> {
    let mut defined = namer.count();
    let mut parts = vec![align(equations, namer)];
    while namer.count() > defined {
        let definitions = namer.definitions_since(defined);
        defined = namer.count();
        parts.push(align(&definitions, namer));
    }
    parts
}

/// The rows of equations that are aligned at their relations.
fn align(equations: &[Equation], namer: &mut Namer) -> Vec<Row> {
    let lefts: Vec<Option<Piece>> =
        equations.iter().map(|each| each.left.as_ref().map(|left| typeset(left, Style::Display))).collect();
    let margin = lefts.iter().flatten().map(|left| left.width).max().unwrap_or(0);
    let stacked = margin > COLUMN * 2 / 5 && equations.iter().any(|each| whole_width(each, margin) > COLUMN);
    let mut rows = Vec::new();
    for (equation, left) in equations.iter().zip(lefts) {
        match stacked {
            true => stacked_rows(equation, namer, &mut rows),
            false => aligned_rows(equation, left, margin, namer, &mut rows),
        }
    }
    rows
}

fn whole_width(equation: &Equation, margin: u32) -> u32 {
    margin + RELATION_WIDTH + typeset(&equation.right, Style::Display).width
}

/// The left side in front of the relation, and the rest continued below the relation.
fn aligned_rows(equation: &Equation, left: Option<Piece>, margin: u32, namer: &mut Namer, rows: &mut Vec<Row>) {
    let room = COLUMN.saturating_sub(margin).max(LEAST_ROOM);
    let first = if equation.relation.is_some() { room - RELATION_WIDTH } else { room };
    let start = Row { left: left.map(|left| left.node), indent: 0, relation: equation.relation, body: Node::empty() };
    broken_rows(equation, start, (first, room - 100), namer, rows);
}

/// The left side on a line of its own, for where there is no room beside it.
fn stacked_rows(equation: &Equation, namer: &mut Namer, rows: &mut Vec<Row>) {
    if let Some(left) = &equation.left {
        let left = namer.shorten(left, COLUMN - 200);
        for (place, line) in lines(&left, COLUMN - 100, COLUMN - 200).into_iter().enumerate() {
            let indent = if place == 0 { 0 } else { 1 + line.depth };
            rows.push(Row { left: None, indent, relation: None, body: line.node });
        }
    }
    let start = Row { left: None, indent: 1, relation: equation.relation, body: Node::empty() };
    broken_rows(equation, start, (COLUMN - RELATION_WIDTH - 100, COLUMN - 200), namer, rows);
}

fn broken_rows(equation: &Equation, start: Row, room: (u32, u32), namer: &mut Namer, rows: &mut Vec<Row>) {
    let right = namer.shorten(&equation.right, room.1);
    let indent = start.indent + 1;
    let mut start = Some(start);
    for line in lines(&right, room.0, room.1) {
        rows.push(match start.take() {
            Some(start) => Row { body: line.node, ..start },
            None => Row { left: None, indent: indent + line.depth, relation: None, body: line.node },
        });
    }
}

/// The name and the cells of a matrix that fits, and whether its rows are high; `None` where it has to be listed.
pub fn matrix_cells(matrix: &Matrix) -> Option<(Node, Vec<Vec<Node>>, bool)> {
    let cells: Vec<Vec<Piece>> =
        matrix.entries.iter().map(|row| row.iter().map(|entry| typeset(entry, Style::Display)).collect()).collect();
    let columns = cells.iter().map(Vec::len).max().unwrap_or(0);
    let widest = |column: usize| cells.iter().filter_map(|row| row.get(column)).map(|cell| cell.width).max();
    let name = typeset(&matrix.name.clone().into(), Style::Display);
    let body: u32 = (0..columns).map(|column| widest(column).unwrap_or(0) + 100).sum();
    if columns > MATRIX_COLUMNS || body + name.width + RELATION_WIDTH + 100 > COLUMN {
        return None;
    }
    let tall = cells.iter().flatten().any(|cell| cell.height > 0);
    let nodes = cells.into_iter().map(|row| row.into_iter().map(|cell| cell.node).collect()).collect();
    Some((name.node, nodes, tall))
}
