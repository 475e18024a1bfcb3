//! Displays in LaTeX.

use crate::render::display::{Row, displays, matrix_cells};
use crate::render::document::{Document, Equation, Matrix, Relation};
use crate::render::formula_latex::tex;
use crate::render::latex_setting::{Labels, Setting};
use crate::render::layout::Node;
use crate::render::naming::Namer;

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

/// What is kept while a document is written: the names given to parts, and the labels given to equations.
pub struct Pen {
    namer: Namer,
    labels: Option<Labels>,
}

impl Pen {
    /// A pen for a document.
    pub fn new(document: &Document, setting: &Setting) -> Pen {
        Pen { namer: Namer::new(document), labels: setting.labels.as_deref().map(Labels::new) }
    }
}

/// Equations as an `align*`, or numbered as an `align`, followed by the definitions of what had to be named; `mark` is
/// the punctuation at the end.
pub fn display(equations: &[Equation], mark: &str, pen: &mut Pen) -> String {
    let mut parts = Vec::new();
    for rows in displays(equations, &mut pen.namer) {
        let mut lines: Vec<(String, String)> = rows.iter().map(|each| (row(each), number(each, pen))).collect();
        if let Some((last, _)) = lines.last_mut() {
            last.push_str(mark);
        }
        let lines: Vec<String> = lines.into_iter().map(|(line, number)| line + &number).collect();
        parts.push(lines.join(" \\\\\n  "));
    }
    let name = if pen.labels.is_some() { "align" } else { "align*" };
    let environment = |body: String| format!("\\begin{{{name}}}\n  {body}\n\\end{{{name}}}\n");
    parts.into_iter().map(environment).collect::<Vec<_>>().join("where\n")
}

/// The label of a row that begins an equation; a row that goes on has no number.
fn number(row: &Row, pen: &mut Pen) -> String {
    let Some(labels) = &mut pen.labels else { return String::new() };
    let stacked = row.left.is_none() && row.relation.is_none() && row.indent == 0;
    match row.left.as_ref().or(stacked.then_some(&row.body)) {
        Some(left) => format!(" \\label{{{}}}", labels.of(&tex(left))),
        None => " \\nonumber".to_string(),
    }
}

fn row(row: &Row) -> String {
    let left = row.left.as_ref().map(|left| format!("{} ", tex(left))).unwrap_or_default();
    let relation = row.relation.map_or("", relation_latex);
    let space = space(row.indent);
    let gap = if space.is_empty() || relation.is_empty() { "" } else { " " };
    format!("{left}&{space}{gap}{relation} {}", tex(&row.body))
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
pub fn matrix(matrix: &Matrix, pen: &mut Pen) -> String {
    let Some((name, cells, tall)) = matrix_cells(matrix) else {
        return display(&matrix.listed(), "", pen);
    };
    let end = if tall { " \\\\[1ex]\n    " } else { " \\\\\n    " };
    let line = |row: &Vec<Node>| row.iter().map(tex).collect::<Vec<_>>().join(" & ");
    let body = cells.iter().map(line).collect::<Vec<_>>().join(end);
    let number = pen.labels.as_mut().map(|labels| format!(" \\label{{{}}}", labels.of(&tex(&name))));
    let environment = if number.is_some() { "align" } else { "align*" };
    format!(
        "\\begin{{{environment}}}\n  {} &=\n  \\begin{{pmatrix}}\n    {body}\n  \\end{{pmatrix}}{}\n\\end{{{environment}}}\n",
        tex(&name),
        number.unwrap_or_default()
    )
}
