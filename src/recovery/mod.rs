//! From demand to preferences.

pub mod ansatz;
pub mod candidates;
pub mod fractions;
pub mod frame;
pub mod linear_solve;
pub mod potential;
pub mod power_log;
