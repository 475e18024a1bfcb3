//! Names for parts of a formula that are too wide to be set and cannot be broken: "where A = …".

use crate::algebra::formula::{Function, Symbol};
use crate::render::document::{Document, Equation};
use crate::render::expression::Expression;
use crate::render::formula_latex::typeset;
use crate::render::latex_pieces::Style;
use std::collections::BTreeSet;

/// Gives letters that a document does not use to parts of its formulas; a part that comes again keeps its letter.
pub struct Namer {
    taken: BTreeSet<String>,
    given: Vec<(Expression, Symbol)>,
}

/// The letters to choose from, in order.
const LETTERS: &str = "ABCDFGHKLMNQRTVXYZ";

impl Namer {
    /// A namer that avoids every name in `document`.
    pub fn new(document: &Document) -> Namer {
        let mut taken = BTreeSet::new();
        document.for_each_equation(&mut |equation| {
            for side in equation.sides() {
                side.for_each_symbol(&mut |symbol| {
                    let stem = symbol.plain.split(['_', '[']).next().unwrap_or_default();
                    taken.insert(stem.trim_end_matches(|each: char| each.is_ascii_digit()).to_string());
                    taken.insert(symbol.plain.clone());
                    taken.extend(symbol.latex.clone());
                });
            }
        });
        Namer { taken, given: Vec::new() }
    }

    /// How many names were given so far.
    pub fn count(&self) -> usize {
        self.given.len()
    }

    /// The definitions of the names given since there were `count`.
    pub fn definitions_since(&self, count: usize) -> Vec<Equation> {
        let define =
            |(part, name): &(Expression, Symbol)| Equation::equal(Expression::Symbol(name.clone()), part.clone());
        self.given.iter().skip(count).map(define).collect()
    }

    /// The expression with names for the parts that no break can help, if it is to fit into `room`.
    pub fn shorten(&mut self, expression: &Expression, room: u32) -> Expression {
        let width = typeset(expression, Style::Display).width;
        if width <= room {
            return expression.clone();
        }
        let inner = |namer: &mut Namer, part: &Expression| Box::new(namer.shorten(part, room));
        match expression {
            Expression::Sum(terms) => Expression::Sum(terms.iter().map(|term| self.shorten(term, room)).collect()),
            Expression::Product(factors) => {
                Expression::Product(factors.iter().map(|factor| self.shorten(factor, room)).collect())
            }
            Expression::Negative(part) => Expression::Negative(inner(self, part)),
            Expression::Call(Function::Sqrt, part) => {
                Expression::Call(Function::Sqrt, Box::new(self.name_if_wider(part, room * 4 / 5, Style::Display)))
            }
            Expression::Call(function, part) => Expression::Call(*function, inner(self, part)),
            Expression::Quotient(above, below) => {
                let below = self.name_if_wider(below, room * 3 / 5, Style::Text);
                Expression::Quotient(inner(self, above), Box::new(below))
            }
            Expression::Power(base, exponent) => {
                let exponent = self.name_if_wider(exponent, room / 3, Style::Script);
                Expression::Power(inner(self, base), Box::new(exponent))
            }
            other => other.clone(),
        }
    }

    fn name_if_wider(&mut self, part: &Expression, room: u32, style: Style) -> Expression {
        match typeset(part, style).width > room {
            true => Expression::Symbol(self.name(part)),
            false => part.clone(),
        }
    }

    /// The letter for `part`.
    fn name(&mut self, part: &Expression) -> Symbol {
        if let Some((_, name)) = self.given.iter().find(|(known, _)| known == part) {
            return name.clone();
        }
        let mut candidates = LETTERS.chars().map(String::from).chain((1..).map(|number| format!("A_{number}")));
        let used = |candidate: &String| self.given.iter().any(|(_, name)| name.plain == *candidate);
        let chosen = candidates.find(|each| !used(each) && !self.taken.contains(each)).unwrap_or_default();
        let name = Symbol::new(chosen);
        self.given.push((part.clone(), name.clone()));
        name
    }
}
