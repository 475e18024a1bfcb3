//! The recovered preferences: in short for the screen, and one by one for the appendix.

use crate::algebra::generator::Element;
use crate::model::Coverage;
use crate::recovery::{Case, Preferences, Recovered};
use crate::render::document::{Block, Equation, Inline, Relation};
use crate::render::expression::Expression;
use crate::render::notation::Notation;
use crate::render::report::corners;
use crate::render::report::words::{listed, relation, text};

/// Expenditure and indirect utility, the conditions and the special cases. The author's abbreviations stand as such.
pub fn summary(notation: &Notation<'_>, found: &Preferences) -> Vec<Block> {
    let mut blocks = vec![Block::Display(functions(notation, found))];
    blocks.extend(conditions(notation, &found.conditions));
    blocks.extend(found.cases.iter().flat_map(|each| case(notation, each)));
    blocks.extend(found.demanded.iter().flat_map(|demanded| corners::remarks(notation, demanded)));
    blocks
}

/// Hicksian demands and, where it was found, direct utility.
pub fn further(notation: &Notation<'_>, found: &Preferences) -> Vec<Block> {
    let mut blocks: Vec<Block> =
        found.demanded.iter().flat_map(|demanded| corners::demands(notation, demanded)).collect();
    if !found.hicksian.is_empty() {
        let equations: Vec<Equation> = found
            .hicksian
            .iter()
            .enumerate()
            .map(|(good, h)| Equation::equal(notation.hicksian(good), notation.element(h)))
            .collect();
        blocks.push(Block::Paragraph(vec![text("The Hicksian demands are, by Shephard's lemma,")]));
        blocks.push(Block::Display(equations));
    }
    let stated = found.expenditure.is_none() && found.indirect_utility.is_none();
    if let Some(utility) = found.utility.as_ref().filter(|_| !stated) {
        blocks.push(Block::Paragraph(vec![text("and direct utility is")]));
        blocks.push(Block::Display(vec![Equation::equal(notation.direct_utility(), notation.element(utility))]));
    } else if lacks_utility(notation, found) {
        let words =
            "Prices could not be eliminated from these demands in closed form: no direct utility function was found.";
        blocks.push(Block::Paragraph(vec![text(words)]));
    }
    blocks
}

/// Whether a direct utility could have been written down, in the author's names for quantities, and was not found.
fn lacks_utility(notation: &Notation<'_>, found: &Preferences) -> bool {
    let model = notation.model();
    let complete = matches!(model.coverage, Coverage::Complete) && model.given.is_none();
    let named = !model.quantities.is_empty() && model.quantities.iter().all(Option::is_some);
    complete && named && !found.hicksian.is_empty() && found.utility.is_none()
}

fn functions(notation: &Notation<'_>, found: &Preferences) -> Vec<Equation> {
    let expenditure = found.expenditure.as_ref().map(|e| Equation::equal(notation.expenditure(), notation.element(e)));
    let indirect =
        found.indirect_utility.as_ref().map(|v| Equation::equal(notation.indirect_utility(), notation.element(v)));
    let mut all: Vec<Equation> = expenditure.into_iter().chain(indirect).collect();
    if all.is_empty() {
        all.extend(found.utility.as_ref().map(|u| Equation::equal(notation.direct_utility(), notation.element(u))));
    }
    all
}

/// What must not vanish.
fn conditions(notation: &Notation<'_>, conditions: &[Element]) -> Option<Block> {
    let zero = Expression::Number(num_rational::Ratio::from_integer(0.into()));
    let each = |e: &Element| vec![relation(notation.element(e), Relation::NotEqual, zero.clone())];
    let words: Vec<Vec<Inline>> = conditions.iter().map(each).collect();
    (!words.is_empty()).then(|| {
        let out = [text("This holds for ")].into_iter().chain(listed(words, " and "));
        Block::Paragraph(out.chain([text(".")]).collect())
    })
}

/// The preferences at special parameter values.
fn case(notation: &Notation<'_>, case: &Case) -> Vec<Block> {
    let own = Notation::new(&case.model);
    let when = case
        .when
        .iter()
        .map(|(var, value)| vec![relation(notation.variable(*var), Relation::Equal, notation.element(value))]);
    let mut words = vec![text("For ")];
    words.extend(listed(when.collect(), " and "));
    let Recovered::Found(found) = &case.recovered else {
        words.push(text(" no closed form was found."));
        return vec![Block::Paragraph(words)];
    };
    words.push(text(":"));
    vec![Block::Paragraph(words), Block::Display(functions(&own, found))]
}
