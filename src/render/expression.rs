//! What may stand in a formula of a document: formulas of the algebra, and the notation that talks about them.

use crate::algebra::formula::{Formula, Function, Symbol};
use crate::algebra::number::Rational;

/// A mathematical expression as it is to be read.
#[derive(Clone, Debug, PartialEq, Eq, Hash)]
pub enum Expression {
    /// An exact number.
    Number(Rational),
    /// A name of the model.
    Symbol(Symbol),
    /// A sum.
    Sum(Vec<Expression>),
    /// Minus an expression.
    Negative(Box<Expression>),
    /// A product.
    Product(Vec<Expression>),
    /// A numerator over a denominator.
    Quotient(Box<Expression>, Box<Expression>),
    /// A base with an exponent.
    Power(Box<Expression>, Box<Expression>),
    /// A function of the language applied to an argument.
    Call(Function, Box<Expression>),
    /// An object that is talked about: x_1(p, m), S_12.
    Object(Object),
    /// A partial derivative, ∂ `of` / ∂ `by`, of as high an order as `by` is long.
    Partial {
        /// What is differentiated.
        of: Box<Expression>,
        /// The variables, in order.
        by: Vec<Expression>,
    },
    /// The sum of `body` over an index.
    Total {
        /// The index, as a name.
        index: String,
        /// What is summed.
        body: Box<Expression>,
    },
    /// The differential of an expression: dp_1.
    Differential(Box<Expression>),
}

/// A named object of the theory, with subscripts, a mark and arguments: x_1(p, m), S_12, h_bread(p, u), v'.
#[derive(Clone, Debug, PartialEq, Eq, Hash)]
pub struct Object {
    /// The name before the subscripts.
    pub head: Symbol,
    /// The subscripts, each the name or number of a good.
    pub subscripts: Vec<String>,
    /// What stands above on the right.
    pub mark: Option<Mark>,
    /// The arguments in parentheses; none are printed when there are none.
    pub arguments: Vec<Expression>,
}

/// What may stand above an object on the right.
#[derive(Clone, Debug, PartialEq, Eq, Hash)]
pub enum Mark {
    /// The transpose of a vector or a matrix.
    Transpose,
    /// A word or letter that tells the object from its namesakes: x^h.
    Label(String),
}

impl Object {
    /// The object `head`, bare.
    pub fn new(head: impl Into<String>) -> Object {
        Object { head: Symbol::new(head), subscripts: Vec::new(), mark: None, arguments: Vec::new() }
    }

    /// The same object with one more subscript.
    pub fn at(mut self, subscript: impl Into<String>) -> Object {
        self.subscripts.push(subscript.into());
        self
    }

    /// The same object with a mark.
    pub fn marked(mut self, mark: Mark) -> Object {
        self.mark = Some(mark);
        self
    }

    /// The same object applied to `arguments`.
    pub fn of(mut self, arguments: Vec<Expression>) -> Object {
        self.arguments = arguments;
        self
    }
}

impl Expression {
    /// The name `plain`, whose LaTeX form follows from its spelling.
    pub fn symbol(plain: impl Into<String>) -> Expression {
        Expression::Symbol(Symbol::new(plain))
    }

    /// Minus `expression`.
    pub fn negative(expression: impl Into<Expression>) -> Expression {
        Expression::Negative(Box::new(expression.into()))
    }

    /// ∂ `of` / ∂ `by`.
    pub fn partial(of: impl Into<Expression>, by: impl Into<Expression>) -> Expression {
        Expression::Partial { of: Box::new(of.into()), by: vec![by.into()] }
    }

    /// ∂² `of` / ∂ `first` ∂ `second`.
    pub fn second_partial(
        of: impl Into<Expression>,
        first: impl Into<Expression>,
        second: impl Into<Expression>,
    ) -> Expression {
        Expression::Partial { of: Box::new(of.into()), by: vec![first.into(), second.into()] }
    }

    /// The sum of `body` over `index`.
    pub fn total(index: impl Into<String>, body: impl Into<Expression>) -> Expression {
        Expression::Total { index: index.into(), body: Box::new(body.into()) }
    }

    /// The differential of `expression`.
    pub fn differential(expression: impl Into<Expression>) -> Expression {
        Expression::Differential(Box::new(expression.into()))
    }

    /// Calls `visit` on every name in the expression, heads of objects and bound indices included.
    pub fn for_each_symbol(&self, visit: &mut impl FnMut(&Symbol)) {
        match self {
            Expression::Number(_) => {}
            Expression::Symbol(symbol) => visit(symbol),
            Expression::Sum(parts) | Expression::Product(parts) => {
                parts.iter().for_each(|part| part.for_each_symbol(visit));
            }
            Expression::Negative(inner) | Expression::Call(_, inner) | Expression::Differential(inner) => {
                inner.for_each_symbol(visit);
            }
            Expression::Quotient(first, second) | Expression::Power(first, second) => {
                first.for_each_symbol(visit);
                second.for_each_symbol(visit);
            }
            Expression::Object(object) => {
                visit(&object.head);
                object.arguments.iter().for_each(|argument| argument.for_each_symbol(visit));
            }
            Expression::Partial { of, by } => {
                of.for_each_symbol(visit);
                by.iter().for_each(|variable| variable.for_each_symbol(visit));
            }
            Expression::Total { index, body } => {
                visit(&Symbol::new(index.as_str()));
                body.for_each_symbol(visit);
            }
        }
    }
}

impl From<&Formula> for Expression {
    fn from(formula: &Formula) -> Expression {
        let boxed = |inner: &Formula| Box::new(Expression::from(inner));
        match formula {
            Formula::Number(value) => Expression::Number(value.clone()),
            Formula::Symbol(symbol) => Expression::Symbol(symbol.clone()),
            Formula::Sum(terms) => Expression::Sum(terms.iter().map(Expression::from).collect()),
            Formula::Negative(inner) => Expression::Negative(boxed(inner)),
            Formula::Product(factors) => Expression::Product(factors.iter().map(Expression::from).collect()),
            Formula::Quotient(above, below) => Expression::Quotient(boxed(above), boxed(below)),
            Formula::Power(base, exponent) => Expression::Power(boxed(base), boxed(exponent)),
            Formula::Call(function, argument) => Expression::Call(*function, boxed(argument)),
        }
    }
}

impl From<Formula> for Expression {
    fn from(formula: Formula) -> Expression {
        Expression::from(&formula)
    }
}

impl From<Object> for Expression {
    fn from(object: Object) -> Expression {
        Expression::Object(object)
    }
}
