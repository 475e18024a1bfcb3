//! A formula as it is to be read: what the algebra hands to whoever prints it.
//!
//! A [`Formula`] is a plain tree with no meaning beyond its shape. The constructors keep it tidy, so that every form of
//! output starts from the same arrangement: sums and products are flat, a minus stands in front of the term it belongs
//! to, numbers are collected into one leading coefficient, and nothing is multiplied by 1 or raised to the power 1.

use crate::algebra::number::Rational;
use num_bigint::BigInt;
use num_traits::{One, Pow, Signed, ToPrimitive, Zero};

/// A function of one argument that closed forms use.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub enum Function {
    /// The natural logarithm.
    Ln,
    /// The exponential function.
    Exp,
    /// The square root.
    Sqrt,
    /// The exponential integral Ei.
    Ei,
    /// The error function.
    Erf,
    /// The imaginary error function.
    Erfi,
    /// The principal branch of Lambert's W.
    LambertW,
}

/// A name as the author wrote it, with the LaTeX form where the author gave one.
#[derive(Clone, Debug, PartialEq, Eq, Hash, PartialOrd, Ord)]
pub struct Symbol {
    /// The name in the model file: `p_b`, `g[1,2]`, `a_bread`.
    pub plain: String,
    /// The declared LaTeX form (`parameters s as \sigma`); `None` when it follows from the name.
    pub latex: Option<String>,
}

impl Symbol {
    /// A name whose LaTeX form follows from its spelling.
    pub fn new(plain: impl Into<String>) -> Symbol {
        Symbol { plain: plain.into(), latex: None }
    }
}

/// A formula as a tree; see the constructors for the arrangement that they keep.
#[derive(Clone, Debug, PartialEq, Eq, Hash)]
pub enum Formula {
    /// An exact number; the constructors keep it non-negative.
    Number(Rational),
    /// A name.
    Symbol(Symbol),
    /// A sum of at least two terms, none of them a sum.
    Sum(Vec<Formula>),
    /// Minus a term.
    Negative(Box<Formula>),
    /// A product of at least two factors, none of them a product; a number comes first.
    Product(Vec<Formula>),
    /// A numerator over a denominator.
    Quotient(Box<Formula>, Box<Formula>),
    /// A base with an exponent.
    Power(Box<Formula>, Box<Formula>),
    /// A function applied to an argument.
    Call(Function, Box<Formula>),
}

/// Exponents of numbers up to this size are worked out on construction.
const WORKED_OUT: i64 = 64;

impl Formula {
    /// The number `value`; a negative one becomes the negative of its absolute value.
    pub fn number(value: Rational) -> Formula {
        match value.is_negative() {
            true => Formula::Negative(Box::new(Formula::Number(-value))),
            false => Formula::Number(value),
        }
    }

    /// The integer `value`.
    pub fn integer(value: i64) -> Formula {
        Formula::number(Rational::from_integer(BigInt::from(value)))
    }

    /// The name `plain`, whose LaTeX form follows from its spelling.
    pub fn symbol(plain: impl Into<String>) -> Formula {
        Formula::Symbol(Symbol::new(plain))
    }

    /// The sum of `terms` in their order, without zeros. A sum that would begin with a minus begins with its first
    /// positive term instead, where there is one: 1 - s, not -s + 1.
    pub fn sum(terms: Vec<Formula>) -> Formula {
        let mut flat = Vec::with_capacity(terms.len());
        for term in terms {
            match term {
                Formula::Sum(inner) => flat.extend(inner),
                other if other.is_zero() => {}
                Formula::Negative(inner) => match *inner {
                    Formula::Sum(terms) => flat.extend(terms.into_iter().map(Formula::negative)),
                    positive => flat.push(Formula::Negative(Box::new(positive))),
                },
                other => flat.push(other),
            }
        }
        if let Some(first_positive) = flat.iter().position(|term| !term.is_negative()) {
            flat[..=first_positive].rotate_right(1);
        }
        match flat.len() {
            0 => Formula::integer(0),
            1 => flat.swap_remove(0),
            _ => Formula::Sum(flat),
        }
    }

    /// `first - second`.
    pub fn difference(first: Formula, second: Formula) -> Formula {
        Formula::sum(vec![first, Formula::negative(second)])
    }

    /// Minus `formula`; two minus signs cancel.
    pub fn negative(formula: Formula) -> Formula {
        match formula {
            Formula::Negative(inner) => *inner,
            Formula::Number(value) => Formula::number(-value),
            other => Formula::Negative(Box::new(other)),
        }
    }

    /// The product of `factors` in their order: signs are pulled in front, numbers collected into one leading
    /// coefficient, fractions merged into one.
    pub fn product(factors: Vec<Formula>) -> Formula {
        let mut parts = Parts::default();
        for factor in factors {
            parts.multiply(factor);
        }
        parts.assemble()
    }

    /// `numerator / denominator`, without fractions inside fractions; over a number it becomes a product with a
    /// fractional coefficient, and over one power with a symbolic exponent a product with the negative exponent.
    /// A zero denominator is kept as it is.
    pub fn quotient(numerator: Formula, denominator: Formula) -> Formula {
        if denominator.is_zero() {
            return Formula::Quotient(Box::new(numerator), Box::new(denominator));
        }
        let mut parts = Parts::default();
        parts.multiply(numerator);
        parts.divide(denominator);
        parts.assemble()
    }

    /// `base ^ exponent`; an exponent of 1/2 becomes a square root, a negative integer exponent a denominator, and
    /// small integer powers of numbers are worked out.
    pub fn power(base: Formula, exponent: Formula) -> Formula {
        let Some(value) = exponent.as_number() else {
            return match base.is_one() {
                true => base,
                false => Formula::Power(Box::new(base), Box::new(exponent)),
            };
        };
        if value.is_zero() || base.is_one() {
            return Formula::integer(1);
        }
        if value.is_one() {
            return base;
        }
        if let (Some(number), true) = (base.as_number(), value.is_integer()) {
            let small = value.to_i64().filter(|n| n.abs() <= WORKED_OUT);
            if let (Some(n), false) = (small, number.is_zero() && value.is_negative()) {
                return Formula::number(Pow::pow(number, BigInt::from(n)));
            }
        }
        if value.is_negative() && value.is_integer() {
            return Formula::quotient(Formula::integer(1), Formula::power(base, Formula::number(-value)));
        }
        if value == Rational::new(BigInt::one(), BigInt::from(2)) {
            return Formula::call(Function::Sqrt, base);
        }
        Formula::Power(Box::new(base), Box::new(exponent))
    }

    /// `function(argument)`.
    pub fn call(function: Function, argument: Formula) -> Formula {
        Formula::Call(function, Box::new(argument))
    }

    /// The value, where the formula is a number with or without a minus in front.
    pub fn as_number(&self) -> Option<Rational> {
        match self {
            Formula::Number(value) => Some(value.clone()),
            Formula::Negative(inner) => inner.as_number().map(|value| -value),
            _ => None,
        }
    }

    /// Whether the formula is the number 0.
    pub fn is_zero(&self) -> bool {
        self.as_number().is_some_and(|value| value.is_zero())
    }

    /// Whether the formula is the number 1.
    pub fn is_one(&self) -> bool {
        self.as_number().is_some_and(|value| value.is_one())
    }

    /// Whether the formula is written with a minus in front.
    pub fn is_negative(&self) -> bool {
        match self {
            Formula::Negative(_) => true,
            Formula::Number(value) => value.is_negative(),
            _ => false,
        }
    }
}

/// A product being collected: a coefficient, factors above and factors below the bar.
struct Parts {
    coefficient: Rational,
    above: Vec<Formula>,
    below: Vec<Formula>,
}

impl Default for Parts {
    fn default() -> Parts {
        Parts { coefficient: Rational::one(), above: Vec::new(), below: Vec::new() }
    }
}

impl Parts {
    fn multiply(&mut self, factor: Formula) {
        match factor {
            Formula::Number(value) => self.coefficient *= value,
            Formula::Negative(inner) => {
                self.coefficient = -std::mem::take(&mut self.coefficient);
                self.multiply(*inner);
            }
            Formula::Product(factors) => factors.into_iter().for_each(|inner| self.multiply(inner)),
            Formula::Quotient(numerator, denominator) => {
                self.multiply(*numerator);
                self.divide(*denominator);
            }
            other => self.above.push(other),
        }
    }

    fn divide(&mut self, factor: Formula) {
        match factor {
            Formula::Number(value) if !value.is_zero() => self.coefficient /= value,
            Formula::Negative(inner) => {
                self.coefficient = -std::mem::take(&mut self.coefficient);
                self.divide(*inner);
            }
            Formula::Product(factors) => factors.into_iter().for_each(|inner| self.divide(inner)),
            Formula::Quotient(numerator, denominator) => {
                self.divide(*numerator);
                self.multiply(*denominator);
            }
            other => self.below.push(other),
        }
    }

    fn assemble(mut self) -> Formula {
        if self.coefficient.is_zero() {
            return Formula::integer(0);
        }
        let negative = self.coefficient.is_negative();
        let coefficient = self.coefficient.abs();
        if let [Formula::Power(_, exponent)] = self.below.as_slice()
            && exponent.as_number().is_none()
            && let Some(Formula::Power(base, exponent)) = self.below.pop()
        {
            self.above.push(Formula::power(*base, Formula::negative(*exponent)));
        }
        let positive = match self.below.is_empty() {
            true => times(coefficient, self.above),
            false => {
                let (above, below) = (coefficient.numer().clone(), coefficient.denom().clone());
                let numerator = times(Rational::from_integer(above), self.above);
                let denominator = times(Rational::from_integer(below), self.below);
                Formula::Quotient(Box::new(numerator), Box::new(denominator))
            }
        };
        match negative {
            true => Formula::negative(positive),
            false => positive,
        }
    }
}

/// A coefficient and flat factors as one formula.
fn times(coefficient: Rational, mut factors: Vec<Formula>) -> Formula {
    if !coefficient.is_one() || factors.is_empty() {
        factors.insert(0, Formula::Number(coefficient));
    }
    match factors.len() {
        1 => factors.swap_remove(0),
        _ => Formula::Product(factors),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn name(text: &str) -> Formula {
        Formula::symbol(text)
    }

    #[test]
    fn a_sum_is_flat_and_begins_with_a_positive_term() {
        let sum = Formula::sum(vec![Formula::negative(name("s")), Formula::integer(0), Formula::integer(1)]);
        assert_eq!(sum, Formula::Sum(vec![Formula::integer(1), Formula::negative(name("s"))]));
        assert_eq!(Formula::difference(name("a"), Formula::integer(0)), name("a"));
        let inner = Formula::difference(name("a"), name("b"));
        let expected = Formula::Sum(vec![name("b"), Formula::negative(name("a"))]);
        assert_eq!(Formula::sum(vec![Formula::negative(inner)]), expected);
    }

    #[test]
    fn a_product_has_one_sign_one_coefficient_and_one_bar() {
        let half = Formula::quotient(Formula::integer(-1), Formula::integer(2));
        let ratio = Formula::quotient(name("m"), name("p"));
        let product = Formula::product(vec![half, name("a"), ratio]);
        let below = Formula::Product(vec![Formula::integer(2), name("p")]);
        let above = Formula::Product(vec![name("a"), name("m")]);
        assert_eq!(product, Formula::negative(Formula::Quotient(Box::new(above), Box::new(below))));
    }

    #[test]
    fn powers_are_tidy() {
        assert_eq!(Formula::power(Formula::integer(-2), Formula::integer(3)), Formula::integer(-8));
        assert_eq!(Formula::power(name("p"), Formula::integer(1)), name("p"));
        assert_eq!(Formula::power(name("p"), Formula::integer(0)), Formula::integer(1));
        let over = Formula::quotient(name("m"), Formula::power(name("p"), name("s")));
        let power = Formula::power(name("p"), Formula::negative(name("s")));
        assert_eq!(over, Formula::Product(vec![name("m"), power]));
        let zero = Formula::power(Formula::integer(0), Formula::integer(-1));
        assert!(matches!(zero, Formula::Quotient(_, _)));
    }
}
