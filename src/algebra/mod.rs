//! Exact computation in a differential field over the rationals.
//!
//! Read upwards: numbers, monomials, polynomials, factors and intervals; then the field, whose elements are Laurent
//! polynomials in symbols and generators, with logarithms, exponentials, derivatives, the zero test, signs and values.

pub mod budget;
pub mod derivation;
pub mod evaluation;
pub mod exponential;
pub mod factor;
pub mod field;
pub mod folding;
pub mod formula;
pub mod gcd;
pub mod generator;
pub mod groebner;
pub mod interval;
pub mod log_sign;
pub mod logarithm;
mod modular;
pub mod monomial;
pub mod normal_form;
pub mod number;
pub mod polynomial;
pub mod radical;
pub mod readable;
pub mod reading_order;
pub mod relation;
mod residue;
pub mod retirement;
pub mod sign;
pub mod sign_rules;
pub mod sign_shift;
pub mod square_sign;
