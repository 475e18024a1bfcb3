//! Exact computation in a differential field over the rationals.
pub mod budget;
pub mod formula;
