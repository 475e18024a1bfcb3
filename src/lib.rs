//! Scaffold.
pub mod algebra;
pub mod conditions;
pub mod language;
pub mod model;
pub mod proof;
pub mod recovery;
pub mod render;
