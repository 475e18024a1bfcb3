//! Claims as data: expressions in functions and their derivatives, equations between them, bounds, and matrices.

use std::rc::Rc;

use crate::algebra::evaluation::Point;
use crate::algebra::field::Relation;
use crate::algebra::generator::Element;
use crate::algebra::monomial::Var;

/// Which member of a family a statement is about. Positions count from 0.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash, serde::Serialize, serde::Deserialize)]
#[serde(rename_all = "snake_case")]
pub enum Label {
    /// The only one.
    Whole,
    /// The one of a good.
    Good(usize),
    /// The one of a pair of goods.
    Pair(usize, usize),
}

/// A function that claims speak of, by its number in the derivation.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash, serde::Serialize, serde::Deserialize)]
pub struct FunctionId(pub(super) u32);

impl FunctionId {
    /// Its position in [`super::Derivation::functions`].
    pub fn index(self) -> usize {
        self.0 as usize
    }
}

/// A factor of a product.
#[derive(Clone, Debug, PartialEq)]
pub enum Factor {
    /// An element of the field.
    Element(Element),
    /// A function f.
    Function(FunctionId),
    /// ∂f/∂x.
    Slope(FunctionId, Var),
    /// x ∂f/∂x.
    LogSlope(FunctionId, Var),
    /// Σ x ∂f/∂x over the symbols.
    Euler(FunctionId, Rc<Vec<Var>>),
}

/// An integer times factors.
#[derive(Clone, Debug, PartialEq)]
pub struct Product {
    /// The integer.
    pub coefficient: i64,
    /// The factors; none stands for 1.
    pub factors: Vec<Factor>,
}

/// A sum of products.
#[derive(Clone, Debug, PartialEq, Default)]
pub struct Expression(pub Vec<Product>);

impl Expression {
    /// 0.
    pub fn zero() -> Expression {
        Expression(Vec::new())
    }

    /// The integer `n`.
    pub fn integer(n: i64) -> Expression {
        Expression(vec![Product { coefficient: n, factors: Vec::new() }])
    }

    /// An element by itself.
    pub fn element(e: Element) -> Expression {
        Expression::from(Factor::Element(e))
    }

    /// The expression with coefficient · (the product of the factors) added.
    pub fn plus(mut self, coefficient: i64, factors: Vec<Factor>) -> Expression {
        self.0.push(Product { coefficient, factors });
        self
    }
}

impl From<Factor> for Expression {
    fn from(factor: Factor) -> Expression {
        Expression(vec![Product { coefficient: 1, factors: vec![factor] }])
    }
}

/// left = right, one member of a family.
#[derive(Clone, Debug, PartialEq)]
pub struct Equation {
    /// Which member it is.
    pub label: Label,
    /// The left side.
    pub left: Expression,
    /// The right side.
    pub right: Expression,
}

/// A square matrix of expressions, row by row.
#[derive(Clone, Debug, PartialEq)]
pub struct Matrix {
    /// The number of rows.
    pub size: usize,
    /// The entries, row by row; `size`² of them.
    pub entries: Vec<Expression>,
}

impl Matrix {
    /// The matrix with the given entries.
    pub fn new(size: usize, entry: impl Fn(usize, usize) -> Expression) -> Matrix {
        let entries = (0..size * size).map(|k| entry(k / size, k % size)).collect();
        Matrix { size, entries }
    }

    /// The entry in row i and column j; 0 outside the matrix.
    pub fn entry(&self, i: usize, j: usize) -> Expression {
        self.entries.get(i * self.size + j).cloned().unwrap_or_default()
    }
}

/// All equations of a family hold identically on the domain.
#[derive(Clone, Debug, PartialEq)]
pub struct Identities {
    /// The equations.
    pub equations: Vec<Equation>,
}

/// The expression stands in the relation to zero at every point of the domain.
#[derive(Clone, Debug, PartialEq)]
pub struct Bounded {
    /// The expression.
    pub expression: Expression,
    /// The relation.
    pub relation: Relation,
}

/// The rows and the columns of the matrix sum to zero, so that (1, …, 1) adds nothing to its quadratic form.
#[derive(Clone, Debug, PartialEq)]
pub struct Balanced {
    /// The matrix.
    pub matrix: Rc<Matrix>,
}

/// vᵀMv ≤ 0 for every v at every point of the domain.
#[derive(Clone, Debug, PartialEq)]
pub struct Semidefinite {
    /// M.
    pub matrix: Rc<Matrix>,
}

/// vᵀMv ≤ 0 for every v at one point.
#[derive(Clone, Debug, PartialEq)]
pub struct SemidefiniteAt {
    /// M.
    pub matrix: Rc<Matrix>,
    /// The point.
    pub point: Point,
}
