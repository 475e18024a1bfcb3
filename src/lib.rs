//! Decides exactly whether a consumer demand system comes from a utility-maximising consumer, and from which.
//!
//! A model file becomes a [`model::Model`] with [`read`]; [`vet`] finds the verdicts and the preferences,
//! [`restrict`] the parameter values for which conditions hold; the reports of [`render`] are made from what it found.

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
pub mod structure;
pub mod vetting;
pub mod welfare;

use algebra::budget::{self, Limits, Stopped};
use algebra::field::Field;
use algebra::number::Rational;
use algebra::polynomial::Poly;
use language::{Diagnostic, Source};
use model::{Model, Value};
use restrictions::{Request, Restrictions};
use std::rc::Rc;
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

/// Finds the parameter values for which the conditions asked for hold together, and examines what each branch leaves.
/// The time and the memory are for everything; running out leaves what was found until then.
pub fn restrict(model: Rc<Model>, request: &Request, allowance: Allowance) -> Restrictions {
    let limits = Limits::new(u64::MAX, allowance.time, allowance.memory_mib);
    let mut found = None;
    let outcome =
        budget::within(limits, || restrictions::restrict_into(&mut found, model.clone(), request, allowance.time));
    let reason = outcome.err().map_or("nothing was asked", Stopped::describe);
    found.unwrap_or_else(|| Restrictions::unknown(model, reason))
}
