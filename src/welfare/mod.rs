//! Money measures: what a change of prices is worth in income.

mod path;

pub use path::{Expenditure, NotAlong, Path, expenditure};
