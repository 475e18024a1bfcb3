//! Laws of exact arithmetic: integers, Laurent polynomials, greatest common divisors, factorisation.

mod divisors;
mod factors;
mod generate;
mod integers;
mod reference;
mod ring;
