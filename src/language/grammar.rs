//! The grammar of model files, compiled from `grammar/model.pest`.

use pest_derive::Parser;

/// The parser that the grammar describes.
#[derive(Parser)]
#[grammar = "../grammar/model.pest"]
pub struct ModelParser;
