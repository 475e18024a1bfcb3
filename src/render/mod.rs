//! From one neutral document tree to the forms of output.
//!
//! Nothing is computed here: what is printed is what the document says. [`expression`] is what may stand in a formula,
//! and each form of output has one file for formulas and one for whole documents.
pub mod document;
pub mod expression;
pub mod formula_latex;
pub mod formula_text;
pub mod latex;
mod latex_display;
mod latex_escape;
mod latex_lines;
mod latex_names;
mod latex_pieces;
mod latex_where;
mod letters;
mod names;
pub mod shared;
pub mod text;
mod text_lines;
