//! The author's claims, one a line: what is claimed, the verdict, and what is right where it is wrong.

use crate::algebra::formula::Function as Word;
use crate::algebra::generator::Element;
use crate::conditions::{ClaimFinding, Difference};
use crate::language::{Claim as Written, Form, Preferences, Statement as InFile};
use crate::model::{Claim, Function, Statement};
use crate::render::document::{Equation, Inline, VerdictLine};
use crate::render::expression::Expression;
use crate::render::notation::Notation;
use crate::render::report::verdicts::{LONGEST_BOUND, tone};
use crate::render::report::words::{equation, point, short, text, value};
use crate::render::report::written::Author;
use crate::render::vocabulary;
use crate::vetting::Vetting;
use num_traits::One;

/// The claims, one a line.
pub fn claim_lines(notation: &Notation<'_>, vetting: &Vetting) -> Vec<VerdictLine> {
    let author = Author::new(notation.model());
    let line = |(number, finding): (usize, &ClaimFinding)| {
        let mut note = statement(notation, &author, number);
        let of_function = |claim: &Claim| matches!(claim.statement, Statement::Function { .. });
        let is_relation = !vetting.model.claims.get(number).is_some_and(of_function);
        note.extend(answer(notation, finding, is_relation));
        VerdictLine {
            name: format!("claim {}", number + 1),
            verdict: vocabulary::verdict(finding.verdict).to_string(),
            tone: tone(finding.verdict),
            note,
        }
    };
    vetting.claims.iter().enumerate().map(line).collect()
}

/// What is wrong with the claim, what is right, and where it fails.
fn answer(notation: &Notation<'_>, finding: &ClaimFinding, is_relation: bool) -> Vec<Inline> {
    let mut note = Vec::new();
    if let Some(words) = finding.difference.as_ref().and_then(|difference| pointed(notation, difference, is_relation)) {
        note.push(text(": "));
        note.extend(words);
    }
    if let Some(correct) = finding.correct.as_ref().and_then(|e| short(notation, e, LONGEST_BOUND)) {
        let link = if note.is_empty() { ": correct is " } else { "; correct is " };
        note.extend([text(link), Inline::math(correct)]);
    }
    if let Some(witness) = &finding.witness {
        note.push(text(if note.is_empty() { " fails at " } else { "; it fails at " }));
        note.extend(point(notation, &witness.point));
        note.push(text(": "));
        note.extend(value(Expression::symbol("left - right"), &witness.value));
    }
    if let Some(reason) = &finding.reason {
        note.push(text(format!(": {reason}")));
    }
    note
}

/// Where the claim and what is right differ.
fn pointed(notation: &Notation<'_>, difference: &Difference, is_relation: bool) -> Option<Vec<Inline>> {
    let whole = if is_relation { "the right-hand side" } else { "the claim" };
    let math = |e: &Element| short(notation, e, LONGEST_BOUND).map(Inline::math);
    Some(match difference {
        Difference::Sign => vec![text(format!("{whole} has the wrong sign"))],
        Difference::LacksFactor(e) => vec![text(format!("{whole} lacks the factor ")), math(e)?],
        Difference::ExtraFactor(e) => vec![text(format!("{whole} has the factor ")), math(e)?, text(" too much")],
        Difference::LacksTerm(e) => vec![text(format!("{whole} lacks the term ")), math(e)?],
        Difference::ExtraTerm(e) => vec![text(format!("{whole} has the term ")), math(e)?, text(" too much")],
        Difference::TermSign(e) => vec![text("the term "), math(e)?, text(" has the wrong sign")],
        Difference::TermFactor { term, factor } => match factor.as_constant().filter(|value| value.numer().is_one()) {
            Some(value) => {
                let divisor = Inline::math(Expression::Number(value.recip()));
                vec![text("the term "), math(term)?, text(" has the factor "), divisor, text(" too much")]
            }
            None => vec![text("the term "), math(term)?, text(" lacks the factor "), math(factor)?],
        },
        Difference::OtherFactor { claimed, right } => {
            vec![text("the factor "), math(claimed)?, text(" should be "), math(right)?]
        }
        Difference::OtherTerm { claimed, right } => {
            vec![text("the term "), math(claimed)?, text(" should be "), math(right)?]
        }
    })
}

/// The claim as it was written, with the values of its free indices.
fn statement(notation: &Notation<'_>, author: &Author, number: usize) -> Vec<Inline> {
    let model = notation.model();
    let Some(claim) = model.claims.get(number) else { return Vec::new() };
    let indices = claim.text.rsplit_once(" for ").map(|(_, values)| values.to_string());
    let stated = model.tree().statements.iter().find_map(|located| match &located.statement {
        InFile::Claim(Written::Relation(relation)) if relation.span == claim.span => author.relation(relation),
        _ => None,
    });
    match (&claim.statement, stated) {
        (Statement::Relation { .. }, Some(links)) if !links.is_empty() => {
            let before = model.claims[..number].iter().rev().take_while(|earlier| earlier.span == claim.span).count();
            let link: Equation = links[before % links.len()].clone();
            let mut words = vec![Inline::Math(Box::new(link))];
            words.extend(indices.map(|values| text(format!(" for {values}"))));
            words
        }
        (Statement::Function { function, value }, _) => {
            let written = model.tree().statements.iter().find_map(|located| match &located.statement {
                InFile::Claim(Written::Function { value, span, .. }) if *span == claim.span => author.formula(value),
                _ => None,
            });
            let written = written.filter(|_| indices.is_none()).unwrap_or_else(|| notation.element(value));
            vec![equation(named(notation, *function), written)]
        }
        _ => vec![Inline::Code(claim.text.clone())],
    }
}

/// The sign of a function of the theory.
pub fn named(notation: &Notation<'_>, function: Function) -> Expression {
    let ln = |e: Expression| Expression::Call(Word::Ln, Box::new(e));
    match function {
        Function::Preferences(Preferences::Utility) => notation.direct_utility(),
        Function::Preferences(Preferences::IndirectUtility) => notation.indirect_utility(),
        Function::Preferences(Preferences::Expenditure) => notation.expenditure(),
        Function::Demand(Form::Demand, i) => notation.quantity(i),
        Function::Demand(Form::Share, i) => notation.share(i),
        Function::Demand(Form::Outlay, i) => notation.outlay(i),
        Function::Demand(Form::LogDemand, i) => ln(notation.quantity(i)),
        Function::Hicksian(i) => notation.hicksian(i),
        Function::Inverse(i) => notation.inverse_letter().at(notation.good(i)).into(),
        Function::Slutsky(i, j) => notation.slutsky_entry(i, j),
        Function::PriceElasticity(i, j) => Expression::partial(ln(notation.quantity(i)), ln(notation.price(j))),
        Function::IncomeElasticity(i) => Expression::partial(ln(notation.quantity(i)), ln(notation.income())),
        Function::CompensatedElasticity(i, j) => Expression::partial(ln(notation.hicksian(i)), ln(notation.price(j))),
    }
}
