//! Displays in LaTeX.

use crate::render::display::{Row, displays, matrix_cells};
use crate::render::document::{Equation, Matrix, Relation};
use crate::render::formula_latex::tex;
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

/// Equations as an `align*`, followed by the definitions of what had to be named; `mark` is the punctuation at the end.
pub fn display(equations: &[Equation], mark: &str, namer: &mut Namer) -> String {
    let align = |rows: Vec<Row>| rows.iter().map(row).collect::<Vec<_>>().join(" \\\\\n  ");
    let mut parts: Vec<String> = displays(equations, namer).into_iter().map(align).collect();
    if let Some(last) = parts.last_mut() {
        last.push_str(mark);
    }
    let environment = |body: String| format!("\\begin{{align*}}\n  {body}\n\\end{{align*}}\n");
    parts.into_iter().map(environment).collect::<Vec<_>>().join("where\n")
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
pub fn matrix(matrix: &Matrix, namer: &mut Namer) -> String {
    let Some((name, cells, tall)) = matrix_cells(matrix) else {
        return display(&matrix.listed(), "", namer);
    };
    let end = if tall { " \\\\[1ex]\n    " } else { " \\\\\n    " };
    let line = |row: &Vec<Node>| row.iter().map(tex).collect::<Vec<_>>().join(" & ");
    let body = cells.iter().map(line).collect::<Vec<_>>().join(end);
    format!(
        "\\begin{{align*}}\n  {} &=\n  \\begin{{pmatrix}}\n    {body}\n  \\end{{pmatrix}}\n\\end{{align*}}\n",
        tex(&name)
    )
}
