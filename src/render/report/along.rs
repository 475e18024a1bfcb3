//! Expenditure along a price path, as an interval, with what it assumes.

use crate::algebra::interval::Interval;
use crate::algebra::monomial::Var;
use crate::algebra::number::Rational;
use crate::conditions::{Condition, Verdict};
use crate::render::document::{Block, Inline};
use crate::render::notation::Notation;
use crate::render::report::derivation::{heading, paragraph};
use crate::render::report::words::{enumerated, listed, text};
use crate::vetting::{Part, Vetting};
use crate::welfare::Expenditure;

/// Significant digits of the bounds that are shown.
const DIGITS: u32 = 12;

/// The section, where a path was followed.
pub fn section(notation: &Notation<'_>, vetting: &Vetting) -> Vec<Block> {
    let Some(found) = &vetting.along else { return Vec::new() };
    let (from, to) = bounds(found);
    let mut figure = vec![text("While ")];
    figure.extend(listed(found.path.prices.iter().map(|price| movement(notation, price)).collect(), ", "));
    figure.push(text(format!(
        ", utility stays what an income of {} gives at the start if expenditure comes to between {from} and {to} at the \
         end.",
        found.path.income
    )));
    vec![heading("Expenditure along a price path"), Block::Paragraph(figure), paragraph(assumptions(vetting))]
}

/// Decimal bounds.
pub fn bounds(found: &Expenditure) -> (String, String) {
    let end = |x: &Rational| Interval::from_rational(x, 128).to_decimal_bounds(DIGITS);
    (end(&found.from).0, end(&found.to).1)
}

/// What the figure leans on, and what it is not.
pub fn assumptions(vetting: &Vetting) -> String {
    let open: Vec<String> = vetting
        .findings
        .iter()
        .filter(|finding| finding.verdict != Verdict::Proven)
        .map(|finding| Part::Condition(finding.condition).word().to_string())
        .collect();
    let asked = vetting.finding(Condition::Curvature).is_some();
    let reserve = match (open.is_empty(), asked) {
        (true, true) => String::new(),
        (true, false) => " Curvature was not asked here.".to_string(),
        (false, _) => format!(" Not proven here: {}.", enumerated(&open)),
    };
    format!(
        "This assumes that these demands are those of one consumer at every point of the way, with the parameters as \
         given.{reserve} It is a figure of the model, and no policy advice."
    )
}

fn movement(notation: &Notation<'_>, (price, from, to): &(Var, Rational, Rational)) -> Vec<Inline> {
    let name = Inline::math(notation.variable(*price));
    let words = if from == to { format!(" stays {from}") } else { format!(" goes from {from} to {to}") };
    vec![name, text(words)]
}
