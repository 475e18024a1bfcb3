//! From one neutral document tree to the forms of output.
//!
//! Nothing is computed here: what is printed is what the document says. [`expression`] is what may stand in a formula,
//! and each form of output has one file for formulas and one for whole documents.
mod display;
pub mod document;
pub mod expression;
pub mod figure;
pub mod formula_latex;
pub mod formula_text;
pub mod html;
pub mod json;
pub mod json_restrictions;
mod json_structure;
pub mod latex;
mod latex_display;
mod latex_escape;
pub mod latex_setting;
mod layout;
mod letters;
mod lines;
mod mathml;
mod names;
mod naming;
pub mod notation;
pub mod report;
mod setting_names;
pub mod shared;
pub mod text;
mod text_lines;
mod typeset;
pub mod vocabulary;
