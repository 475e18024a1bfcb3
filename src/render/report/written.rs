//! The author's own formulas, from the syntax tree: what is shown is what was written, index by index.

use crate::algebra::formula::{Function, Symbol};
use crate::language::{Comparison, Expr, ExprKind, Function as Word, Over, Reference, Relation as Written, Statement};
use crate::model::Model;
use crate::render::document::{Equation, Relation};
use crate::render::expression::{Expression, Range};

/// Turns the formulas of one file into expressions.
pub struct Author {
    latex: Vec<(String, String)>,
}

impl Author {
    /// Takes in the LaTeX forms that the file declares.
    pub fn new(model: &Model) -> Author {
        let mut latex = Vec::new();
        for located in &model.tree().statements {
            let declared = match &located.statement {
                Statement::Prices(all) | Statement::Quantities(all) | Statement::Parameters(all) => all.as_slice(),
                Statement::Income(one) | Statement::Utility(one) => std::slice::from_ref(one),
                Statement::Let { name, .. } => std::slice::from_ref(name),
                _ => &[],
            };
            latex.extend(declared.iter().filter_map(|d| Some((d.name.text.clone(), d.latex.clone()?))));
        }
        Author { latex }
    }

    /// The name with its indices as a symbol.
    pub fn symbol(&self, name: &str, indices: &[String]) -> Expression {
        let plain = match indices {
            [] => name.to_string(),
            indices => format!("{name}[{}]", indices.join(",")),
        };
        let latex = self.latex.iter().find(|(known, _)| known == name).map(|(_, latex)| latex.clone());
        Expression::Symbol(Symbol { plain, latex })
    }

    /// A chain of relations, one equation a link. `None` where a part cannot be shown as it is written.
    pub fn relation(&self, relation: &Written) -> Option<Vec<Equation>> {
        let mut left = self.formula(&relation.first)?;
        let mut equations = Vec::new();
        for (sign, right) in &relation.rest {
            let right = self.formula(right)?;
            equations.push(Equation::new(left, sign_of(*sign), right.clone()));
            left = right;
        }
        Some(equations)
    }

    /// The formula as it is written.
    pub fn formula(&self, expr: &Expr) -> Option<Expression> {
        Some(match &expr.kind {
            ExprKind::Number(value) => Expression::Number(value.clone()),
            ExprKind::Pi => Expression::symbol("pi"),
            ExprKind::Reference(reference) => self.reference(reference),
            ExprKind::Negative(inner) => Expression::negative(self.formula(inner)?),
            ExprKind::Sum(terms) => Expression::Sum(terms.iter().map(|t| self.formula(t)).collect::<Option<_>>()?),
            ExprKind::Product(_) => self.product(expr)?,
            ExprKind::Power(base, exponent) => {
                Expression::Power(Box::new(self.formula(base)?), Box::new(self.formula(exponent)?))
            }
            ExprKind::Call(function, argument) => {
                Expression::Call(function_of(*function), Box::new(self.formula(argument)?))
            }
            ExprKind::Over(over) => self.total(over)?,
        })
    }

    fn reference(&self, reference: &Reference) -> Expression {
        let indices: Vec<String> = reference.indices.iter().map(|(index, _)| index.to_string()).collect();
        self.symbol(&reference.name.text, &indices)
    }

    /// Factors up to the first division, then one bar for each stretch of divisors.
    fn product(&self, expr: &Expr) -> Option<Expression> {
        let ExprKind::Product(factors) = &expr.kind else { return None };
        let mut above: Vec<Expression> = Vec::new();
        for factor in factors {
            let value = self.formula(&factor.expr)?;
            if factor.inverted {
                let numerator = whole(std::mem::take(&mut above));
                above.push(Expression::Quotient(Box::new(numerator), Box::new(value)));
            } else {
                above.push(value);
            }
        }
        Some(whole(above))
    }

    fn total(&self, over: &Over) -> Option<Expression> {
        let body = self.formula(&over.body)?;
        let except = over.except.as_ref().map(|(index, _)| index.to_string());
        let range = Range { product: over.product, except, group: over.group.as_ref().map(|name| name.text.clone()) };
        Some(over.binders.iter().rev().fold(body, |body, index| Expression::Total {
            index: index.text.clone(),
            range: range.clone(),
            body: Box::new(body),
        }))
    }
}

fn whole(mut factors: Vec<Expression>) -> Expression {
    match factors.len() {
        0 => Expression::Number(num_rational::Ratio::from_integer(1.into())),
        1 => factors.swap_remove(0),
        _ => Expression::Product(factors),
    }
}

/// The sign of a relation, for documents.
pub fn sign_of(sign: Comparison) -> Relation {
    match sign {
        Comparison::Equal => Relation::Equal,
        Comparison::NotEqual => Relation::NotEqual,
        Comparison::Less => Relation::Less,
        Comparison::LessEqual => Relation::LessEqual,
        Comparison::Greater => Relation::Greater,
        Comparison::GreaterEqual => Relation::GreaterEqual,
    }
}

fn function_of(word: Word) -> Function {
    match word {
        Word::Ln => Function::Ln,
        Word::Exp => Function::Exp,
        Word::Sqrt => Function::Sqrt,
        Word::Ei => Function::Ei,
        Word::Erf => Function::Erf,
        Word::Erfi => Function::Erfi,
        Word::LambertW => Function::LambertW,
    }
}
