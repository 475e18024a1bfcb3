//! Names for parts of a formula that are too wide to be set and cannot be broken: "where A = …".

use crate::algebra::formula::{Function, Symbol};
use crate::render::document::{Document, Equation};
use crate::render::expression::Expression;
use crate::render::layout::Style;
use crate::render::letters::Letters;
use crate::render::typeset::typeset;

/// Gives letters that a document does not use to parts of its formulas; a part that comes again keeps its letter.
pub struct Namer {
    letters: Letters,
    given: Vec<(Expression, Symbol)>,
}

impl Namer {
    /// A namer that avoids every name in `document`.
    pub fn new(document: &Document) -> Namer {
        Namer { letters: Letters::beside(document), given: Vec::new() }
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
        match expression {
            Expression::Sum(_) | Expression::Product(_) | Expression::Negative(_) => {
                expression.map_children(&mut |part| self.shorten(part, room))
            }
            Expression::Call(Function::Sqrt, part) => {
                Expression::Call(Function::Sqrt, Box::new(self.name_if_wider(part, room * 4 / 5, Style::Display)))
            }
            Expression::Call(function, part) => Expression::Call(*function, Box::new(self.shorten(part, room))),
            Expression::Quotient(above, below) => {
                let below = self.name_if_wider(below, room * 3 / 5, Style::Text);
                Expression::Quotient(Box::new(self.shorten(above, room)), Box::new(below))
            }
            Expression::Power(base, exponent) => {
                let exponent = self.name_if_wider(exponent, room / 3, Style::Script);
                Expression::Power(Box::new(self.shorten(base, room)), Box::new(exponent))
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
        let name = self.letters.take();
        self.given.push((part.clone(), name.clone()));
        name
    }
}
