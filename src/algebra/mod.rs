//! Exact computation in a differential field over the rationals.
pub mod budget;
pub mod formula;
pub mod monomial;
pub mod number;
pub mod polynomial;
