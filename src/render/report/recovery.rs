//! The recovery, step by step: the income variable, the equations that it makes linear, their solution, the check.

use crate::algebra::generator::Element;
use crate::proof::StepId;
use crate::recovery::{Method, Preferences, Recovered, Working};
use crate::render::document::{Block, Equation, Inline};
use crate::render::expression::Expression;
use crate::render::notation::Notation;
use crate::render::report::derivation::{heading, logarithm, paragraph};
use crate::render::report::preferences;
use crate::render::report::words::{equation, listed, text};
use crate::render::report::working::{Scribe, sum};

/// The sections on preferences and on the check back.
pub fn sections(scribe: &Scribe<'_>, recovered: &Recovered) -> Vec<Block> {
    let mut blocks = vec![heading("Preferences")];
    match recovered {
        Recovered::NotFound { reason, existence } => {
            if *existence {
                blocks.push(paragraph(
                    "Since the Slutsky matrix is symmetric, preferences exist locally, around each point of the domain.",
                ));
            }
            blocks.push(paragraph(format!("No closed form was found: {reason}.")));
        }
        Recovered::Found(found) => {
            blocks.extend(match (found.method, &found.expenditure, &found.indirect_utility) {
                (Method::Given, _, _) => {
                    vec![paragraph("From the given function follow, by solving for the other argument,")]
                }
                (_, None, None) => vec![paragraph("The inverse demands are proportional to the slopes of")],
                _ => steps(scribe.notation, &found.working),
            });
            blocks.extend(preferences::summary(scribe.notation, found));
            blocks.extend(preferences::further(scribe.notation, found));
            blocks.extend(check(scribe, found));
        }
    }
    blocks
}

/// The preferences and the way to them, with the check in a sentence.
pub fn in_short(scribe: &Scribe<'_>, recovered: &Recovered) -> Vec<Block> {
    let mut blocks = sections(scribe, recovered);
    let is_check = |block: &Block| matches!(block, Block::Heading { text, .. } if matches!(text.as_slice(), [Inline::Text(words)] if words == "Check"));
    let Some(at) = blocks.iter().position(is_check) else { return blocks };
    blocks.truncate(at);
    let Recovered::Found(found) = recovered else { return blocks };
    let mut rules: Vec<&str> = Vec::new();
    for id in &found.steps {
        let words = match scribe.derivation.step(*id).map(|step| step.subject()) {
            Some("Roy's identity") => "Roy's identity",
            Some("Shephard's lemma") => "Shephard's lemma",
            Some("first-order conditions") => "the first-order conditions",
            _ => continue,
        };
        if !rules.contains(&words) {
            rules.push(words);
        }
    }
    if !rules.is_empty() {
        let words = rules.join(" and ");
        blocks.push(paragraph(format!("Differentiating back confirms {words}.")));
    }
    blocks
}

fn steps(notation: &Notation<'_>, working: &Working) -> Vec<Block> {
    let mut blocks = Vec::new();
    let mut words = vec![text("Expenditure at a given utility satisfies ")];
    words.push(equation(
        Expression::partial(notation.expenditure_letter(), notation.price_letter("i")),
        Expression::from(notation.quantity_letter().at("i")),
    ));
    words.push(text(" with income replaced by expenditure."));
    if !working.functions.is_empty() {
        let functions: Vec<Vec<Inline>> =
            working.functions.iter().map(|f| vec![Inline::math(notation.element(f))]).collect();
        words.push(text(" As functions of income, the demands are combinations of "));
        words.extend(listed(functions, " and "));
        words.push(text("."));
    }
    let income = working.income.map_or_else(|| notation.income(), |var| notation.variable(var));
    if let Some(coordinate) = &working.coordinate {
        let of_income = sum(vec![
            Expression::Product(vec![notation.element(&coordinate.scale), notation.income()]),
            notation.element(&coordinate.shift),
        ]);
        words.extend([text(" In place of income, take "), equation(income.clone(), of_income), text(".")]);
    }
    let z = notation.element(&working.z);
    let letter = if z == income { income } else { notation.transformed_income() };
    if letter != z {
        words.extend([text(" Put "), equation(letter.clone(), z), text(". Then")]);
    } else {
        words.extend([text(" Thus, with "), Inline::math(letter.clone()), text(" for expenditure,")]);
    }
    blocks.push(Block::Paragraph(words));
    blocks.push(Block::Display(slopes(notation, working, &letter)));
    blocks.extend(solution(notation, working, &letter));
    blocks
}

/// The most goods for which the equations are written out.
const MOST_GOODS: usize = 6;

/// ∂z/∂p_i = a_i + b_i z + c_i z².
fn slopes(notation: &Notation<'_>, working: &Working, z: &Expression) -> Vec<Equation> {
    let goods = working.forms.first().map_or(0, Vec::len).min(MOST_GOODS);
    let power = |k: usize| match k {
        0 => None,
        1 => Some(z.clone()),
        _ => Some(super::working::square(z.clone())),
    };
    (0..goods)
        .map(|good| {
            let terms = working.forms.iter().enumerate().filter_map(|(k, form)| {
                let coefficient = form.get(good).filter(|e| !e.is_zero())?;
                Some(times(notation, coefficient, power(k)))
            });
            Equation::equal(Expression::partial(z.clone(), notation.price(good)), sum(terms.collect()))
        })
        .collect()
}

fn times(notation: &Notation<'_>, coefficient: &Element, power: Option<Expression>) -> Expression {
    let value = notation.element(coefficient);
    match (power, value) {
        (None, value) => value,
        (Some(power), value) if coefficient.is_one() => {
            let _ = value;
            power
        }
        (Some(power), Expression::Negative(inner)) => Expression::negative(Expression::Product(vec![*inner, power])),
        (Some(power), value) => Expression::Product(vec![value, power]),
    }
}

fn solution(notation: &Notation<'_>, working: &Working, z: &Expression) -> Vec<Block> {
    let mut blocks = Vec::new();
    let u = notation.utility();
    let solved = match (&working.factor, &working.base) {
        (Some(factor), Some(base)) => {
            blocks.push(paragraph(
                "These equations are linear, and their integrability conditions hold. With the constant of integration \
                 for the utility level, they are solved by",
            ));
            let product = times(notation, factor, Some(u));
            if base.is_zero() { product } else { sum(vec![notation.element(base), product]) }
        }
        (Some(index), None) => {
            blocks.push(paragraph(
                "The right-hand sides do not depend on income, and are the slopes of one function. With the logarithm of \
                 the utility level for the constant of integration,",
            ));
            sum(vec![logarithm(notation.element(index)), logarithm(u)])
        }
        _ => return blocks,
    };
    blocks.push(Block::Display(vec![Equation::equal(z.clone(), solved)]));
    blocks.push(paragraph("Solved for the utility level and for income, this gives"));
    blocks
}

fn check(scribe: &Scribe<'_>, found: &Preferences) -> Vec<Block> {
    let mut told: Vec<StepId> = Vec::new();
    let mut blocks = Vec::new();
    for id in &found.steps {
        if !told.contains(id) {
            told.push(*id);
            blocks.extend(identity(scribe, *id));
        }
    }
    if blocks.is_empty() { blocks } else { std::iter::once(heading("Check")).chain(blocks).collect() }
}

/// One of the identities that the preferences were put to.
fn identity(scribe: &Scribe<'_>, id: StepId) -> Vec<Block> {
    let Some(step) = scribe.derivation.step(id) else { return Vec::new() };
    let notation = scribe.notation;
    let words = match step.subject() {
        "Roy's identity" => "Roy's identity holds:",
        "Shephard's lemma" => "Shephard's lemma holds:",
        "first-order conditions" => "The first-order conditions hold:",
        "expenditure at the utility reached" => {
            let inverse = Equation::equal(notation.expenditure_at_indirect_utility(), notation.income());
            let words = paragraph("Expenditure and indirect utility are inverse to each other:");
            return vec![words, Block::Display(vec![inverse])];
        }
        "utility reached with expenditure" => {
            let inverse = Equation::equal(notation.indirect_utility_at_expenditure(), notation.utility());
            let words = paragraph("Indirect utility and expenditure are inverse to each other:");
            return vec![words, Block::Display(vec![inverse])];
        }
        _ => return Vec::new(),
    };
    std::iter::once(paragraph(words)).chain(scribe.step(id)).collect()
}
