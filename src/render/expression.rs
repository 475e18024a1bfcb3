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
        /// Whether terms are multiplied, and over which goods.
        range: Range,
        /// What is summed.
        body: Box<Expression>,
    },
    /// The differential of an expression: dp_1.
    Differential(Box<Expression>),
}

/// What a sum or a product over an index runs over.
#[derive(Clone, Debug, Default, PartialEq, Eq, Hash)]
pub struct Range {
    /// A product rather than a sum.
    pub product: bool,
    /// The good that is left out.
    pub except: Option<String>,
    /// The group of goods; all of them where there is none.
    pub group: Option<String>,
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
        Expression::Total { index: index.into(), range: Range::default(), body: Box::new(body.into()) }
    }

    /// The differential of `expression`.
    pub fn differential(expression: impl Into<Expression>) -> Expression {
        Expression::Differential(Box::new(expression.into()))
    }

    /// The expressions that this one is directly made of, in reading order.
    pub fn children(&self) -> Vec<&Expression> {
        match self {
            Expression::Number(_) | Expression::Symbol(_) => Vec::new(),
            Expression::Sum(parts) | Expression::Product(parts) => parts.iter().collect(),
            Expression::Negative(inner) | Expression::Call(_, inner) | Expression::Differential(inner) => vec![inner],
            Expression::Quotient(first, second) | Expression::Power(first, second) => vec![first, second],
            Expression::Object(object) => object.arguments.iter().collect(),
            Expression::Partial { of, by } => std::iter::once(&**of).chain(by).collect(),
            Expression::Total { body, .. } => vec![body],
        }
    }

    /// The same expression made of what `change` makes of its children.
    pub fn map_children(&self, change: &mut impl FnMut(&Expression) -> Expression) -> Expression {
        match self {
            Expression::Number(_) | Expression::Symbol(_) => self.clone(),
            Expression::Sum(parts) => Expression::Sum(parts.iter().map(change).collect()),
            Expression::Product(parts) => Expression::Product(parts.iter().map(change).collect()),
            Expression::Negative(inner) => Expression::Negative(Box::new(change(inner))),
            Expression::Call(function, inner) => Expression::Call(*function, Box::new(change(inner))),
            Expression::Differential(inner) => Expression::Differential(Box::new(change(inner))),
            Expression::Quotient(above, below) => {
                Expression::Quotient(Box::new(change(above)), Box::new(change(below)))
            }
            Expression::Power(base, exponent) => Expression::Power(Box::new(change(base)), Box::new(change(exponent))),
            Expression::Object(object) => {
                let arguments = object.arguments.iter().map(change).collect();
                Expression::Object(Object { arguments, ..object.clone() })
            }
            Expression::Partial { of, by } => {
                let of = Box::new(change(of));
                Expression::Partial { of, by: by.iter().map(change).collect() }
            }
            Expression::Total { index, range, body } => {
                Expression::Total { index: index.clone(), range: range.clone(), body: Box::new(change(body)) }
            }
        }
    }

    /// Calls `visit` on the expression and on every part of it, in reading order.
    pub fn for_each_part<'a>(&'a self, visit: &mut impl FnMut(&'a Expression)) {
        visit(self);
        self.children().into_iter().for_each(|part| part.for_each_part(visit));
    }

    /// Calls `visit` on every name in the expression, heads of objects and bound indices included.
    pub fn for_each_symbol(&self, visit: &mut impl FnMut(&Symbol)) {
        self.for_each_part(&mut |part| match part {
            Expression::Symbol(symbol) => visit(symbol),
            Expression::Object(object) => visit(&object.head),
            Expression::Total { index, .. } => visit(&Symbol::new(index.as_str())),
            _ => {}
        });
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
