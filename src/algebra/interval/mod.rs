//! Interval arithmetic with dyadic endpoints, always rounded outward: an interval that excludes zero is a proof.
//!
//! Endpoints are `m·2^e` with integers `m` and `e`; no floating-point number takes part. Every [`Interval`] carries
//! its working precision in bits; an operation on two of them works at the larger one. Raising the precision until a
//! question is settled is left to the caller.
//!
//! A function is evaluated at a point by a series whose truncation and rounding errors are bounded in the comments
//! beside it, and on an interval by monotonicity: the lower bound at one end, the upper bound at the other.

mod arithmetic;
mod constants;
mod decimal;
mod dyadic;
mod elementary;
mod enclosure;
mod error_function;
mod exponential_integral;
mod growth;
mod lambert;
mod series;

pub use dyadic::{Dyadic, Toward};
pub use enclosure::Interval;
