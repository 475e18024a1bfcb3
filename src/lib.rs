//! Scaffold.
pub mod algebra;
pub mod language;
pub mod model;
pub mod render;
