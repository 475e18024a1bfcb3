//! The answer of one screen: verdicts, and what was recovered.

use crate::algebra::generator::Element;
use crate::conditions::{Branch, Condition, Finding, Verdict, Witness};
use crate::model::Coverage;
use crate::proof::Label;
use crate::recovery::Recovered;
use crate::render::document::{Block, Document, Inline, Relation, Tone, VerdictLine};
use crate::render::expression::Expression;
use crate::render::notation::Notation;
use crate::render::report::along;
use crate::render::report::claims::claim_lines;
use crate::render::report::conditions::quadratic_form;
use crate::render::report::preferences;
use crate::render::report::structure;
use crate::render::report::words::{enumerated, listed, point, relation, short, text, value};
use crate::render::vocabulary;
use crate::vetting::{Part, Vetting};

/// The verdicts, one a line, and the recovered preferences.
pub fn answer(vetting: &Vetting) -> Document {
    let notation = Notation::new(&vetting.model);
    let mut blocks = Vec::new();
    let mut lines: Vec<VerdictLine> =
        vetting.findings.iter().map(|finding| condition_line(&notation, finding)).collect();
    lines.extend(vetting.recovered.as_ref().map(|recovered| recovery_line(vetting, recovered)));
    lines.extend(vetting.structure.as_ref().and_then(|found| structure::line(&notation, found)));
    if !lines.is_empty() {
        blocks.push(Block::Verdicts(lines));
    }
    blocks.extend(remarks(vetting));
    if let Some(Recovered::Found(preferences)) = &vetting.recovered {
        blocks.extend(preferences::summary(&notation, preferences));
    }
    blocks.extend(along::section(&notation, vetting));
    if !vetting.claims.is_empty() {
        blocks.push(Block::Verdicts(claim_lines(&notation, vetting)));
    }
    Document { title: vetting.model.title.clone(), blocks }
}

/// A derivation with the verdicts above it.
pub fn answer_first(vetting: &Vetting, derivation: Document) -> Document {
    let blocks = answer(vetting).blocks.into_iter().chain(derivation.blocks).collect();
    Document { title: derivation.title, blocks }
}

/// How a verdict is to be taken.
pub fn tone(verdict: Verdict) -> Tone {
    match verdict {
        Verdict::Proven => Tone::Holds,
        Verdict::Refuted => Tone::Fails,
        Verdict::Conditional | Verdict::Regional => Tone::Partly,
        Verdict::Undecided => Tone::Open,
    }
}

/// The line for one condition.
pub fn condition_line(notation: &Notation<'_>, finding: &Finding) -> VerdictLine {
    VerdictLine {
        name: Part::Condition(finding.condition).word().to_string(),
        verdict: vocabulary::verdict(finding.verdict).to_string(),
        tone: tone(finding.verdict),
        note: note(notation, finding),
    }
}

fn note(notation: &Notation<'_>, finding: &Finding) -> Vec<Inline> {
    let mut parts: Vec<Vec<Inline>> = Vec::new();
    match finding.verdict {
        Verdict::Proven if finding.condition == Condition::Curvature => parts.push(vec![text(finding.method.clone())]),
        Verdict::Proven => {}
        Verdict::Undecided => parts.extend(finding.reason.clone().map(|reason| vec![text(reason)])),
        Verdict::Conditional => parts.extend(restrictions(notation, finding)),
        Verdict::Regional => parts.extend(region(notation, finding)),
        Verdict::Refuted => {}
    }
    parts.extend(finding.witness.as_ref().map(|witness| failure(notation, finding.condition, witness)));
    let parameters = !notation.model().parameters.is_empty();
    if finding.never == Some(true) && finding.verdict == Verdict::Refuted && parameters {
        parts.push(vec![text("and for no admissible parameter values does it hold")]);
    }
    let mut note = Vec::new();
    for (position, part) in parts.into_iter().enumerate() {
        if position > 0 {
            note.push(text("; "));
        }
        note.extend(part);
    }
    note
}

/// The most branches that are written out on the screen.
const MOST_BRANCHES: usize = 3;

fn restrictions(notation: &Notation<'_>, finding: &Finding) -> Option<Vec<Inline>> {
    let branches = finding.restrictions.as_ref().filter(|branches| !branches.is_empty())?;
    let mut out = vec![text(if finding.restrictions_complete { "exactly where " } else { "holds where " })];
    let shown: Vec<Vec<Inline>> =
        branches.iter().take(MOST_BRANCHES).map(|branch| branch_words(notation, branch)).collect();
    out.extend(listed(shown, ", or where "));
    if branches.len() > MOST_BRANCHES {
        out.push(text(format!(", or in one of {} further cases", branches.len() - MOST_BRANCHES)));
    }
    Some(out)
}

/// The equations of a branch, and what must not vanish in it.
pub fn branch_words(notation: &Notation<'_>, branch: &Branch) -> Vec<Inline> {
    let equations = branch.equations.iter().map(|(left, right)| vec![sides(notation, left, Relation::Equal, right)]);
    let zero = Element::zero();
    let conditions = branch.side_conditions.iter().map(|e| vec![sides(notation, e, Relation::NotEqual, &zero)]);
    let mut pieces: Vec<Vec<Inline>> = equations.chain(conditions).collect();
    if !branch.inequalities.is_empty() {
        pieces.push(bounds(notation, &branch.inequalities));
    }
    listed(pieces, " and ")
}

fn sides(notation: &Notation<'_>, left: &Element, sign: Relation, right: &Element) -> Inline {
    relation(notation.element(left), sign, notation.element(right))
}

fn region(notation: &Notation<'_>, finding: &Finding) -> Vec<Vec<Inline>> {
    let mut parts = Vec::new();
    if let Some(region) = &finding.region {
        parts.push([text("holds exactly where ")].into_iter().chain(bounds(notation, region)).collect());
    }
    if let Some(regular) = &finding.regular_point {
        parts.push([text("for instance at ")].into_iter().chain(point(notation, regular)).collect());
    }
    parts
}

/// Elements that are to be nonnegative; those that are too long for the screen are counted.
fn bounds(notation: &Notation<'_>, elements: &[Element]) -> Vec<Inline> {
    let zero = Expression::Number(num_rational::Ratio::from_integer(0.into()));
    let each = |e: &Element| {
        let formula = if e.len() > LONGEST_BOUND { None } else { short(notation, e, LONGEST_BOUND) }?;
        Some(vec![relation(formula, Relation::GreaterEqual, zero.clone())])
    };
    let mut shown: Vec<Vec<Inline>> = elements.iter().filter_map(each).collect();
    let further = if shown.is_empty() { "" } else { "further " };
    match elements.len() - shown.len() {
        0 => {}
        1 => shown
            .push(vec![text(format!("one {further}inequality holds that is too long to print here (see the JSON)"))]),
        n => shown
            .push(vec![text(format!("{n} {further}inequalities hold that are too long to print here (see the JSON)"))]),
    }
    listed(shown, " and ")
}

/// The longest side of an inequality on the screen, in characters.
/// The longest formula that stands within a line.
pub const LONGEST_BOUND: usize = 160;

/// Where and how a condition fails.
pub fn failure(notation: &Notation<'_>, condition: Condition, witness: &Witness) -> Vec<Inline> {
    let mut out = vec![text("fails at ")];
    out.extend(point(notation, &witness.point));
    out.push(text(": "));
    if let Some(vector) = &witness.vector {
        let numbers: Vec<String> = vector.iter().map(ToString::to_string).collect();
        out.push(text("with "));
        out.push(Inline::math(Expression::symbol("v")));
        out.push(text(format!(" = ({}), ", numbers.join(", "))));
    }
    out.extend(value(failing(notation, condition, witness.place), &witness.value));
    out
}

/// The expression that should vanish (or should not be positive).
pub fn failing(notation: &Notation<'_>, condition: Condition, place: Label) -> Expression {
    match (condition, place) {
        (Condition::Homogeneity, Label::Good(i)) => euler_sum(notation, i),
        (Condition::AddingUp, _) => {
            let terms = (0..notation.model().goods.len()).map(|i| notation.outlay(i));
            Expression::Sum(terms.chain([Expression::negative(notation.income())]).collect())
        }
        (Condition::Symmetry, Label::Pair(i, j)) => {
            Expression::Sum(vec![notation.slutsky_entry(i, j), Expression::negative(notation.slutsky_entry(j, i))])
        }
        _ => quadratic_form(notation),
    }
}

/// Σ_j p_j ∂x_i/∂p_j + m ∂x_i/∂m.
fn euler_sum(notation: &Notation<'_>, good: usize) -> Expression {
    let x = notation.quantity(good);
    let term = |y: Expression| Expression::Product(vec![y.clone(), Expression::partial(x.clone(), y)]);
    let over_prices = Expression::total("j", term(notation.price_letter("j")));
    Expression::Sum(vec![over_prices, term(notation.income())])
}

fn recovery_line(vetting: &Vetting, recovered: &Recovered) -> VerdictLine {
    let (verdict, tone, note) = match recovered {
        Recovered::Found(found) => {
            ("found", Tone::Holds, format!("{}{}", vocabulary::method(found.method), reserve(vetting)))
        }
        Recovered::NotFound { reason, existence: true } => {
            ("not found", Tone::Open, format!("they exist, locally around each point, but {reason}"))
        }
        Recovered::NotFound { reason, existence: false } => ("not found", Tone::Open, reason.clone()),
    };
    VerdictLine { name: "preferences".to_string(), verdict: verdict.to_string(), tone, note: vec![text(note)] }
}

/// What keeps the functions found from being those of a consumer.
fn reserve(vetting: &Vetting) -> String {
    let fails = |finding: &&Finding| finding.verdict != Verdict::Proven && finding.verdict != Verdict::Undecided;
    let failing: Vec<String> = vetting
        .findings
        .iter()
        .filter(fails)
        .map(|finding| Part::Condition(finding.condition).word().to_string())
        .collect();
    match failing.as_slice() {
        [] => String::new(),
        [one] => format!("; they are a consumer's only where {one} holds"),
        several => format!("; they are a consumer's only where {} hold", enumerated(several)),
    }
}

/// What is assumed or left out rather than tested.
fn remarks(vetting: &Vetting) -> Vec<Block> {
    let model = &vetting.model;
    let mut remarks = Vec::new();
    let good = |i: usize| model.goods.get(i).map(|good| good.name.clone()).unwrap_or_default();
    let conditions = vetting.asked.iter().any(|part| matches!(part, Part::Condition(_)));
    if let (Some(rest), true) = (model.rest, conditions) {
        remarks.push(format!("Walras' law is assumed, not tested: {} takes what is left of income.", good(rest)));
    }
    if !model.demands.is_empty() && conditions {
        let verdict = |condition| vetting.finding(condition).map(|finding| finding.verdict);
        if matches!(verdict(Condition::Symmetry), Some(Verdict::Refuted | Verdict::Conditional))
            && verdict(Condition::Curvature).is_some()
        {
            remarks.push("Where the matrix is not symmetric, curvature is that of its symmetric part.".to_string());
        }
        match &model.coverage {
            Coverage::Complete => {}
            Coverage::Others(_) => remarks.push("The system is incomplete; adding-up is not asked of it.".to_string()),
            Coverage::Deflated => remarks.push(
                "The system is incomplete and deflated: homogeneity is built in, and adding-up is not asked."
                    .to_string(),
            ),
        }
    }
    remarks.into_iter().map(|words| Block::Note(vec![text(words)])).collect()
}
