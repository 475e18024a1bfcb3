//! Scaffold.
pub mod algebra;
pub mod language;
pub mod render;
