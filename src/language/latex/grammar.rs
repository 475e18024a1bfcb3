//! The grammar of formulas in LaTeX, compiled from `grammar/latex.pest`.

use pest::iterators::Pair;
use pest_derive::Parser;

/// The parser that the grammar describes.
#[derive(Parser)]
#[grammar = "../grammar/latex.pest"]
pub struct LatexParser;

/// The parts of a pair that say something: the words of commands and the sizes of brackets are left out.
pub fn parts<'p>(pair: Pair<'p, Rule>) -> impl Iterator<Item = Pair<'p, Rule>> {
    pair.into_inner().filter(|part| !SILENT.contains(&part.as_rule()))
}

/// What only marks where a part begins.
const SILENT: [Rule; 11] = [
    Rule::fraction_word,
    Rule::root_word,
    Rule::brace_word,
    Rule::left_brace,
    Rule::right_brace,
    Rule::size,
    Rule::in_word,
    Rule::except_word,
    Rule::forall_word,
    Rule::dots,
    Rule::EOI,
];
