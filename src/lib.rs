//! Scaffold.
pub mod algebra;
pub mod render;
