//! Parameter restrictions against known tables, and against lattices of parameter values.

mod incomplete_forms;
mod lattice;
mod outlay_and_share_forms;
mod system;
mod tables;
