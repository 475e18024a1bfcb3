//! The variables of the field: symbols that the author declared, and generators that stand for functions of them.

use std::rc::Rc;

use num_bigint::BigInt;

use super::monomial::Var;
use super::polynomial::Poly;

/// An element of the field, written as a Laurent polynomial in its variables.
///
/// The variables are not all independent: a named sum satisfies Rᴺ = value. Two elements that look different may
/// therefore be equal; equality is decided by [`super::field::Field::is_zero`] on the difference.
pub type Element = Poly;

/// What a declared symbol stands for.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Role {
    /// A price, positive.
    Price,
    /// Total outlay, positive.
    Income,
    /// The price (index) of goods outside the system, positive.
    Others,
    /// A quantity, positive.
    Quantity,
    /// The utility level, real.
    Utility,
    /// A parameter, real.
    Parameter,
    /// A constant of integration or an unknown of an ansatz, real.
    Unknown,
    /// The number π, positive.
    Pi,
}

impl Role {
    /// Whether every admissible value of the symbol is positive.
    pub fn is_positive(self) -> bool {
        !matches!(self, Role::Utility | Role::Parameter | Role::Unknown)
    }
}

/// A special function of one argument, known to the field by its derivative.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Special {
    /// Exponential integral, Ei′(x) = eˣ/x.
    Ei,
    /// Error function, erf′(x) = 2 e^(−x²)/√π.
    Erf,
    /// Imaginary error function, erfi′(x) = 2 e^(x²)/√π.
    Erfi,
    /// Principal Lambert W, W e^W = x, W′(x) = W/(x(1 + W)).
    LambertW,
}

/// The base of a logarithm: positive, and irreducible as far as factorisation went.
#[derive(Clone, Debug, PartialEq, Eq, Hash)]
pub enum Base {
    /// A positive variable (symbol, logarithm, special function).
    Var(Var),
    /// An integer above one, coprime to the other integers in use.
    Number(BigInt),
    /// The value of a named sum.
    Sum(Rc<Element>),
}

/// What a variable of the field is.
#[derive(Clone, Debug)]
pub enum Kind {
    /// A declared symbol.
    Symbol(Role),
    /// ln of a positive base.
    Ln(Base),
    /// exp of an element; positive. A power bᵉ is exp(e ln b).
    Exp(Rc<Element>),
    /// A named sum R with Rᴺ = value; for N > 1 both are positive.
    Sum {
        /// The element that is named.
        value: Rc<Element>,
        /// N.
        root: u32,
    },
    /// A special function.
    Special(Special, Rc<Element>),
}

/// Why a function could not be applied.
#[derive(Clone, Debug, PartialEq)]
pub enum Blocked {
    /// A divisor is zero.
    DivisionByZero,
    /// A logarithm or power needs this element to be positive, and it is not known to be.
    SignUnknown(Element),
    /// The element is known not to be positive.
    NotPositive(Element),
    /// The function is not defined, or not supported, for this argument.
    OutsideDomain(Special, Element),
    /// A name of another field has no meaning here.
    UnknownSymbol,
    /// An exponent is larger than the algebra allows.
    ExponentTooLarge,
}

/// Shorthand for fallible field operations.
pub type Built = Result<Element, Blocked>;
