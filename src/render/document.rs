//! The neutral document that every form of output is made from.
//!
//! Whoever has something to say builds a [`Document`]; the forms of output are leaves that only walk it. It holds no
//! markup of any of them, and what it says does not depend on which of them is chosen.

use crate::render::expression::{Expression, Object};

/// A report: an optional title and what follows it.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Document {
    /// The title, as the author gave it.
    pub title: Option<String>,
    /// What the report says, in order.
    pub blocks: Vec<Block>,
}

/// One piece of a report.
#[derive(Clone, Debug, PartialEq)]
pub enum Block {
    /// The heading of a section; level 1 is the outermost below the title.
    Heading {
        /// 1 for a section, 2 for a subsection, and so on.
        level: u8,
        /// The words.
        text: Vec<Inline>,
    },
    /// Running text.
    Paragraph(Vec<Inline>),
    /// Displayed equations, aligned at their relations.
    Display(Vec<Equation>),
    /// What the names in the display above stand for: "where A = …".
    Where(Vec<Equation>),
    /// Verdicts, one a line.
    Verdicts(Vec<VerdictLine>),
    /// A table.
    Table(Table),
    /// A matrix with a name.
    Matrix(Matrix),
    /// A list, numbered or not.
    List {
        /// Whether the items are numbered.
        ordered: bool,
        /// The items.
        items: Vec<Vec<Inline>>,
    },
    /// A remark that is set off from the text.
    Note(Vec<Inline>),
}

/// A piece of running text.
#[derive(Clone, Debug, PartialEq)]
pub enum Inline {
    /// Words.
    Text(String),
    /// A formula within the text.
    Math(Box<Equation>),
    /// Words that are set off.
    Emphasis(String),
    /// Something to be typed or found in a file, as it stands.
    Code(String),
}

/// `left relation right`; without a relation just `right`; without a left side the relation goes on from the line above.
#[derive(Clone, Debug, PartialEq)]
pub struct Equation {
    /// The left side.
    pub left: Option<Expression>,
    /// What is said of the two sides.
    pub relation: Option<Relation>,
    /// The right side.
    pub right: Expression,
}

/// A relation between two expressions.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Relation {
    /// =
    Equal,
    /// ≠
    NotEqual,
    /// <
    Less,
    /// ≤
    LessEqual,
    /// >
    Greater,
    /// ≥
    GreaterEqual,
    /// Equal for all values of the variables.
    Identical,
    /// Equal by definition.
    Defined,
}

/// What was asked, the answer in one word, and what goes with it.
#[derive(Clone, Debug, PartialEq)]
pub struct VerdictLine {
    /// What was asked: `symmetry`.
    pub name: String,
    /// The answer: `proven`.
    pub verdict: String,
    /// How the answer is to be taken.
    pub tone: Tone,
    /// What goes with it; may be empty.
    pub note: Vec<Inline>,
}

/// Whether an answer is the one hoped for; chooses its colour.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Tone {
    /// It holds.
    Holds,
    /// It fails.
    Fails,
    /// It holds in part, or under conditions.
    Partly,
    /// Nothing was shown.
    Open,
}

/// A table with a heading for each column.
#[derive(Clone, Debug, PartialEq)]
pub struct Table {
    /// The headings.
    pub columns: Vec<Vec<Inline>>,
    /// The rows, each as long as `columns`.
    pub rows: Vec<Vec<Vec<Inline>>>,
}

/// A matrix whose entries can be told apart by the names of their row and column.
#[derive(Clone, Debug, PartialEq)]
pub struct Matrix {
    /// The name of the matrix, without subscripts.
    pub name: Object,
    /// The names of the rows.
    pub rows: Vec<String>,
    /// The names of the columns.
    pub columns: Vec<String>,
    /// The entries, row by row.
    pub entries: Vec<Vec<Expression>>,
    /// Whether the entries below the diagonal repeat those above it, so that they need not be listed.
    pub symmetric: bool,
}

impl Equation {
    /// `left relation right`.
    pub fn new(left: impl Into<Expression>, relation: Relation, right: impl Into<Expression>) -> Equation {
        Equation { left: Some(left.into()), relation: Some(relation), right: right.into() }
    }

    /// `left = right`.
    pub fn equal(left: impl Into<Expression>, right: impl Into<Expression>) -> Equation {
        Equation::new(left, Relation::Equal, right)
    }

    /// `= right`, going on from the line above.
    pub fn next(relation: Relation, right: impl Into<Expression>) -> Equation {
        Equation { left: None, relation: Some(relation), right: right.into() }
    }

    /// An expression by itself.
    pub fn only(expression: impl Into<Expression>) -> Equation {
        Equation { left: None, relation: None, right: expression.into() }
    }

    /// Both sides, as far as there are two.
    pub fn sides(&self) -> impl Iterator<Item = &Expression> {
        self.left.iter().chain(std::iter::once(&self.right))
    }
}

impl Relation {
    /// The relation in the syntax of model files, as far as that has it.
    pub fn plain(self) -> &'static str {
        match self {
            Relation::Equal | Relation::Identical => "=",
            Relation::NotEqual => "!=",
            Relation::Less => "<",
            Relation::LessEqual => "<=",
            Relation::Greater => ">",
            Relation::GreaterEqual => ">=",
            Relation::Defined => ":=",
        }
    }
}

impl Matrix {
    /// The entries that have to be listed, each with its name.
    pub fn listed(&self) -> Vec<Equation> {
        let mut equations = Vec::new();
        for (position, (row, entries)) in self.rows.iter().zip(&self.entries).enumerate() {
            let first = if self.symmetric { position } else { 0 };
            for (column, entry) in self.columns.iter().zip(entries).skip(first) {
                let name = self.name.clone().at(row.as_str()).at(column.as_str());
                equations.push(Equation::equal(name, entry.clone()));
            }
        }
        equations
    }
}

impl Inline {
    /// Words.
    pub fn text(words: impl Into<String>) -> Inline {
        Inline::Text(words.into())
    }

    /// An expression within the text.
    pub fn math(expression: impl Into<Expression>) -> Inline {
        Inline::equation(Equation::only(expression))
    }

    /// An equation within the text.
    pub fn equation(equation: Equation) -> Inline {
        Inline::Math(Box::new(equation))
    }
}

impl Document {
    /// Calls `visit` on every equation of the document, wherever it stands.
    pub fn for_each_equation(&self, visit: &mut impl FnMut(&Equation)) {
        for block in &self.blocks {
            match block {
                Block::Heading { text, .. } | Block::Paragraph(text) | Block::Note(text) => visit_inlines(text, visit),
                Block::Display(equations) | Block::Where(equations) => equations.iter().for_each(&mut *visit),
                Block::Verdicts(lines) => lines.iter().for_each(|line| visit_inlines(&line.note, visit)),
                Block::Table(table) => {
                    let cells = table.columns.iter().chain(table.rows.iter().flatten());
                    cells.for_each(|cell| visit_inlines(cell, visit));
                }
                Block::Matrix(matrix) => matrix.listed().iter().for_each(&mut *visit),
                Block::List { items, .. } => items.iter().for_each(|item| visit_inlines(item, visit)),
            }
        }
    }
}

fn visit_inlines(inlines: &[Inline], visit: &mut impl FnMut(&Equation)) {
    for inline in inlines {
        if let Inline::Math(equation) = inline {
            visit(equation);
        }
    }
}
