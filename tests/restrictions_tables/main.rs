//! Parameter restrictions against known tables, and against lattices of parameter values.

mod incomplete_forms;
mod lattice;
mod system;
mod tables;
