//! Scaffold.
pub mod algebra;
pub mod language;
pub mod model;
pub mod proof;
pub mod render;
