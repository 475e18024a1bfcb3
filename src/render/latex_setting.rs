//! How an author's paper sets things: labels, the name of the logarithm, vectors, long displays, theorems.

use std::collections::{BTreeMap, BTreeSet};

use crate::algebra::formula::Symbol;
use crate::render::document::{Block, Document, Equation, Inline};
use crate::render::expression::{Expression, Object};

/// What an author may choose; by default nothing is numbered, logarithms are `\ln`, and vectors look like numbers.
#[derive(Clone, Debug, Default, PartialEq, Eq)]
pub struct Setting {
    /// Equations are numbered, with labels `eq:PREFIX-…`.
    pub labels: Option<String>,
    /// `\log` in place of `\ln`.
    pub log: bool,
    /// How the vector of prices is set.
    pub vectors: Vectors,
    /// The most equations of one display; none for as many as belong together.
    pub per_display: Option<usize>,
    /// What is proven stands in an environment of this name, its working in a `proof`.
    pub theorems: Option<String>,
}

/// How a vector is set.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum Vectors {
    /// p
    #[default]
    Plain,
    /// p in bold type
    Bold,
    /// p under an arrow
    Arrow,
}

impl Setting {
    /// The document with vectors and displays as they are chosen.
    pub fn applied(&self, document: &Document) -> Document {
        let mut document = document.clone();
        if let Some(most) = self.per_display.filter(|most| *most > 0) {
            document.blocks = document.blocks.into_iter().flat_map(|block| split(block, most)).collect();
        }
        let command = match self.vectors {
            Vectors::Plain => return document,
            Vectors::Bold => "mathbf",
            Vectors::Arrow => "vec",
        };
        let vectors = vectors(&document);
        let set = |symbol: &Symbol| match vectors.contains(&symbol.plain) && symbol.latex.is_none() {
            true => Symbol { latex: Some(format!("\\{command}{{{}}}", symbol.plain)), ..symbol.clone() },
            false => symbol.clone(),
        };
        for block in &mut document.blocks {
            change(block, &mut |e| renamed(e, &set));
        }
        document
    }

    /// A piece of LaTeX with the chosen name of the logarithm.
    pub fn named(&self, tex: String) -> String {
        if !self.log {
            return tex;
        }
        let mut out = String::with_capacity(tex.len() + 16);
        let mut rest = tex.as_str();
        while let Some(at) = rest.find("\\ln") {
            let behind = &rest[at + 3..];
            let whole = !behind.starts_with(|letter: char| letter.is_ascii_alphabetic());
            out.push_str(&rest[..at]);
            out.push_str(if whole { "\\log" } else { "\\ln" });
            rest = behind;
        }
        out + rest
    }
}

/// A display in displays of at most so many equations; what goes on from the line above stays with it.
fn split(block: Block, most: usize) -> Vec<Block> {
    let Block::Display(equations) = block else { return vec![block] };
    let mut parts: Vec<Vec<Equation>> = vec![Vec::new()];
    let mut begun = 0;
    for equation in equations {
        if equation.left.is_some() {
            if begun == most {
                parts.push(Vec::new());
                begun = 0;
            }
            begun += 1;
        }
        if let Some(part) = parts.last_mut() {
            part.push(equation);
        }
    }
    parts.into_iter().map(Block::Display).collect()
}

/// The letters that stand only as the first of several arguments, or alone on the left of what they are.
fn vectors(document: &Document) -> BTreeSet<String> {
    let (mut first, mut elsewhere) = (BTreeSet::new(), BTreeSet::new());
    for equation in equations(document) {
        for side in equation.left.iter().chain([&equation.right]) {
            match side {
                Expression::Symbol(_) if Some(side) == equation.left.as_ref() => {}
                _ => look(side, &mut first, &mut elsewhere),
            }
        }
    }
    first.difference(&elsewhere).cloned().collect()
}

fn look(e: &Expression, first: &mut BTreeSet<String>, elsewhere: &mut BTreeSet<String>) {
    match e {
        Expression::Symbol(symbol) => {
            elsewhere.insert(symbol.plain.clone());
        }
        Expression::Object(Object { arguments, .. }) => {
            for (place, argument) in arguments.iter().enumerate() {
                match argument {
                    Expression::Symbol(symbol) if place == 0 && arguments.len() > 1 => {
                        first.insert(symbol.plain.clone());
                    }
                    _ => look(argument, first, elsewhere),
                }
            }
        }
        _ => e.children().into_iter().for_each(|child| look(child, first, elsewhere)),
    }
}

fn renamed(e: &Expression, set: &impl Fn(&Symbol) -> Symbol) -> Expression {
    match e {
        Expression::Symbol(symbol) => Expression::Symbol(set(symbol)),
        _ => e.map_children(&mut |child| renamed(child, set)),
    }
}

/// Every equation of a document, those in running text included.
fn equations(document: &Document) -> Vec<Equation> {
    let mut all = Vec::new();
    for block in &document.blocks {
        let mut block = block.clone();
        change_equations(&mut block, &mut |equation| all.push(equation.clone()));
        if let Block::Matrix(matrix) = &block {
            all.extend(matrix.entries.iter().flatten().map(|e| Equation {
                left: None,
                relation: None,
                right: e.clone(),
            }));
        }
    }
    all
}

fn change(block: &mut Block, to: &mut impl FnMut(&Expression) -> Expression) {
    if let Block::Matrix(matrix) = block {
        matrix.entries.iter_mut().flatten().for_each(|e| *e = to(e));
    }
    change_equations(block, &mut |equation| {
        equation.left = equation.left.as_ref().map(&mut *to);
        equation.right = to(&equation.right);
    });
}

fn change_equations(block: &mut Block, to: &mut impl FnMut(&mut Equation)) {
    let mut running = |inlines: &mut Vec<Inline>| {
        for inline in inlines {
            if let Inline::Math(equation) = inline {
                to(equation);
            }
        }
    };
    match block {
        Block::Display(equations) | Block::Where(equations) => equations.iter_mut().for_each(to),
        Block::Heading { text, .. } | Block::Paragraph(text) | Block::Note(text) => running(text),
        Block::Verdicts(lines) => lines.iter_mut().for_each(|line| running(&mut line.note)),
        Block::List { items, .. } => items.iter_mut().for_each(running),
        Block::Table(table) => {
            table.columns.iter_mut().for_each(&mut running);
            table.rows.iter_mut().flatten().for_each(running);
        }
        Block::Matrix(_) => {}
    }
}

/// Gives each numbered equation a label of its own.
#[derive(Debug)]
pub struct Labels {
    prefix: String,
    given: BTreeMap<String, usize>,
}

impl Labels {
    /// Labels that begin with `eq:` and this prefix; signs that a label cannot have are left out of it.
    pub fn new(prefix: &str) -> Labels {
        let kept = prefix.chars().filter(|letter| letter.is_ascii_alphanumeric() || "-_.:".contains(*letter));
        Labels { prefix: kept.collect(), given: BTreeMap::new() }
    }

    /// The label of an equation with this left side: `eq:PREFIX-S-12`.
    pub fn of(&mut self, left: &str) -> String {
        let mut words: Vec<String> = Vec::new();
        let mut word = String::new();
        for letter in left.split('(').next().unwrap_or("").chars().chain([' ']) {
            if letter.is_ascii_alphanumeric() {
                word.push(letter);
            } else if !word.is_empty() {
                words.push(std::mem::take(&mut word));
            }
        }
        words.retain(|word| !matches!(word.as_str(), "frac" | "tfrac" | "text" | "left" | "right" | "operatorname"));
        words.truncate(LONGEST_LABEL);
        let name = if words.is_empty() { "equation".to_string() } else { words.join("-") };
        let again = self.given.entry(name.clone()).or_insert(0);
        *again += 1;
        match *again {
            1 => format!("eq:{}-{name}", self.prefix),
            more => format!("eq:{}-{name}-{more}", self.prefix),
        }
    }
}

/// The most words of a label.
const LONGEST_LABEL: usize = 8;

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn labels_are_told_apart() {
        let mut labels = Labels::new("my paper");
        assert_eq!(labels.of("S_{\\text{cod},\\text{salt}}"), "eq:mypaper-S-cod-salt");
        assert_eq!(labels.of("e(p, u)"), "eq:mypaper-e");
        assert_eq!(labels.of("e(p, u)"), "eq:mypaper-e-2");
        assert_eq!(labels.of("\\frac{\\partial z}{\\partial p_{1}}"), "eq:mypaper-partial-z-partial-p-1");
        assert_eq!(labels.of("\\sum"), "eq:mypaper-sum");
    }

    #[test]
    fn the_logarithm_has_one_name() {
        let setting = Setting { log: true, ..Setting::default() };
        assert_eq!(setting.named("\\ln x + \\lnot \\ln(y)".to_string()), "\\log x + \\lnot \\log(y)");
    }
}
