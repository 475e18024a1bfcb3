//! Decides exactly whether a consumer demand system comes from a utility-maximising consumer, and from which.
//!
//! A model file becomes a [`model::Model`] with [`read`]; [`vet`] finds the verdicts and the preferences; the reports
//! of [`render`] are made from what it found.

#![deny(missing_docs)]
// the documentation is for contributors too, and is built with the private items
#![allow(rustdoc::private_intra_doc_links)]

pub mod algebra;
pub mod conditions;
pub mod language;
pub mod model;
pub mod proof;
pub mod recovery;
pub mod render;
pub mod restrictions;
pub mod vetting;

use algebra::budget::{self, Limits, Stopped};
use algebra::field::Field;
use algebra::number::Rational;
use algebra::polynomial::Poly;
use language::{Diagnostic, Source};
use model::{Model, Value};
pub use vetting::{Allowance, Part, Vetting, vet};

/// Why a model file gives no model.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Unread {
    /// The mistakes of the file.
    Mistakes(Vec<Diagnostic>),
    /// Reading it ran out of its limits.
    Stopped(Stopped),
}

/// Reads a model file, with numbers put in for parameters.
///
/// # Errors
/// The mistakes of the file, all of them; or the limit that ended the reading.
pub fn read(source: &Source, values: &[(String, Rational)], allowance: Allowance) -> Result<Model, Unread> {
    let limits = Limits::new(allowance.work, allowance.time, allowance.memory_mib);
    let outcome = budget::within(limits, || {
        let tree = language::read(source)?;
        let field = Field::new();
        let elements: Vec<Poly> = values.iter().map(|(_, value)| Poly::constant(value)).collect();
        let values: Vec<Value<'_>> = values
            .iter()
            .zip(&elements)
            .map(|((parameter, _), element)| Value { parameter, element, field: &field })
            .collect();
        model::elaborate(source, &tree, &values)
    });
    match outcome {
        Ok(Ok(model)) => Ok(model),
        Ok(Err(mistakes)) => Err(Unread::Mistakes(mistakes)),
        Err(stopped) => Err(Unread::Stopped(stopped)),
    }
}
