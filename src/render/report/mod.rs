//! What a run found, as a document: the answer of one screen, and the appendix.

mod along;
mod claims;
mod conditions;
mod corners;
mod derivation;
mod preferences;
mod recovery;
mod responses;
mod restrictions;
mod starting;
mod structure;
mod system;
mod verdicts;
mod words;
mod working;
mod written;

pub use along::{assumptions, bounds};
pub use derivation::{derivation, short_derivation};
pub use restrictions::restrictions;
pub use verdicts::{answer, answer_first};
