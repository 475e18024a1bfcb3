//! Text to syntax tree, with the messages for what cannot be read.

pub mod diagnostic;
pub mod source;
pub mod syntax;

pub use diagnostic::{Diagnostic, Severity};
pub use source::Source;
pub use syntax::*;

/// A model file as it was written.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Model {
    /// The statements, in the order of the file.
    pub statements: Vec<Located>,
    /// What is read, but perhaps not as its author meant it.
    pub warnings: Vec<Diagnostic>,
}

/// Everything that could be read of a file, mistakes or not: for a caller that looks for further mistakes in the rest.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Reading {
    /// The statements that could be read, and the warnings.
    pub model: Model,
    /// The mistakes, in the order of the file.
    pub mistakes: Vec<Diagnostic>,
    /// Whether a statement that may declare names could not be read, so that an unknown name proves nothing.
    pub declarations_lost: bool,
}

/// Reads what can be read of a model file.
pub fn examine(source: &Source) -> Reading {
    Reading { mistakes: source.fault().cloned().into_iter().collect(), ..Reading::default() }
}

/// Reads a model file.
///
/// # Errors
/// One message for each mistake of the file, in the order of the file; nothing is accepted in part.
pub fn read(source: &Source) -> Result<Model, Vec<Diagnostic>> {
    let reading = examine(source);
    if reading.mistakes.is_empty() { Ok(reading.model) } else { Err(reading.mistakes) }
}
