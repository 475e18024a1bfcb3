//! The conditions, their verdicts and what comes with them.

mod curvature;
mod curvature_decided;
mod curvature_intervals;
mod identities;
mod mutations;
mod vetted;
