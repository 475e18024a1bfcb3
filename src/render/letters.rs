//! Letters for parts of formulas that get a name in print only.

use crate::algebra::formula::Symbol;
use crate::render::document::Document;
use std::collections::BTreeSet;

/// The letters to choose from, in order.
const CHOICE: &str = "ABCDFGHKLMNQRTVXYZ";

/// Letters that a document does not use yet.
pub struct Letters {
    taken: BTreeSet<String>,
}

impl Letters {
    /// The letters that no name in `document` begins with.
    pub fn beside(document: &Document) -> Letters {
        let mut taken = BTreeSet::new();
        document.for_each_equation(&mut |equation| {
            for side in equation.sides() {
                side.for_each_symbol(&mut |symbol| {
                    let stem = symbol.plain.split(['_', '[']).next().unwrap_or_default();
                    taken.insert(stem.trim_end_matches(|each: char| each.is_ascii_digit()).to_string());
                    taken.insert(symbol.plain.clone());
                    taken.extend(symbol.latex.clone());
                });
            }
        });
        Letters { taken }
    }

    /// The next letter, and from now on taken; after the last one A_1, A_2, and so on.
    pub fn take(&mut self) -> Symbol {
        let mut candidates = CHOICE.chars().map(String::from).chain((1..).map(|number| format!("A_{number}")));
        let chosen = candidates.find(|each| !self.taken.contains(each)).unwrap_or_default();
        self.taken.insert(chosen.clone());
        Symbol::new(chosen)
    }
}
