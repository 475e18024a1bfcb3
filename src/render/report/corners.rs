//! Where the demands behind given preferences end, and the best bundle is at a corner.

use crate::language::Preferences as Kind;
use crate::recovery::given::Demanded;
use crate::render::document::{Block, Equation, Relation};
use crate::render::expression::Expression;
use crate::render::notation::Notation;
use crate::render::report::words::{enumerated, listed, point, relation, short, text, value};

/// The longest quantity that is written out in a remark, in characters.
const LONGEST: usize = 120;
/// The most pairs of goods that are named.
const MOST_PAIRS: usize = 4;

/// The demands themselves, where the file does not have them.
pub fn demands(notation: &Notation<'_>, demanded: &Demanded) -> Vec<Block> {
    if !notation.model().demands.is_empty() || demanded.quantities.is_empty() {
        return Vec::new();
    }
    let quantities = demanded.quantities.iter().enumerate();
    let equations = quantities.map(|(good, x)| Equation::equal(notation.quantity(good), notation.element(x))).collect();
    vec![Block::Paragraph(vec![text("The demands are")]), Block::Display(equations)]
}

/// Remarks on corners: those that are there, and those that may be.
pub fn remarks(notation: &Notation<'_>, demanded: &Demanded) -> Vec<Block> {
    let mut blocks: Vec<Block> = interior(notation, demanded).into_iter().collect();
    blocks.extend(demanded.constant_rates.iter().take(MOST_PAIRS).map(|(i, j, rate)| {
        let ratio = Expression::Quotient(Box::new(notation.price(*i)), Box::new(notation.price(*j)));
        let mut words = vec![text(format!(
            "The rate of substitution between {} and {} is the same at every bundle: unless ",
            notation.good(*i),
            notation.good(*j)
        ))];
        words.push(relation(ratio, Relation::Equal, notation.element(rate)));
        words.push(text(", at most one of the two is bought, and the best bundle is at a corner."));
        Block::Note(words)
    }));
    blocks
}

/// Where all quantities are positive, and a point where one is not.
fn interior(notation: &Notation<'_>, demanded: &Demanded) -> Option<Block> {
    if demanded.doubtful.is_empty() {
        return None;
    }
    let zero = || Expression::Number(num_rational::Ratio::from_integer(0.into()));
    let mut conditions = Vec::new();
    let mut long = Vec::new();
    for good in &demanded.doubtful {
        match demanded.quantities.get(*good).and_then(|x| short(notation, x, LONGEST)) {
            Some(x) => conditions.push(vec![relation(x, Relation::Greater, zero())]),
            None => long.push(notation.good(*good)),
        }
    }
    match long.as_slice() {
        [] => {}
        [one] => conditions.push(vec![text(format!("the demand for {one} is positive"))]),
        _ => conditions.push(vec![text(format!("the demands for {} are positive", enumerated(&long)))]),
    }
    let mut words = vec![text("These are choices with all quantities positive only where ")];
    words.extend(listed(conditions, " and "));
    words.push(text(match notation.model().given.as_ref().map(|given| given.kind) {
        Some(Kind::Utility) => "; elsewhere the best bundle is at a corner",
        _ => "; elsewhere the given function describes no such choice",
    }));
    if let Some((good, witness)) = demanded.corners.first() {
        words.push(text(", as at "));
        words.extend(point(notation, &witness.point));
        words.push(text(", where by the formula "));
        words.extend(value(notation.quantity(*good), &witness.value));
    }
    words.push(text("."));
    Some(Block::Note(words))
}
