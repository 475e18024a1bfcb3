//! The author's claims, one a line: what is claimed, the verdict, and what is right where it is wrong.

use crate::algebra::formula::Function as Word;
use crate::conditions::ClaimFinding;
use crate::language::{Claim as Written, Form, Preferences, Statement as InFile};
use crate::model::{Function, Statement};
use crate::render::document::{Equation, Inline, VerdictLine};
use crate::render::expression::Expression;
use crate::render::notation::Notation;
use crate::render::report::verdicts::{LONGEST_BOUND, tone};
use crate::render::report::words::{equation, point, short, text, value};
use crate::render::report::written::Author;
use crate::render::vocabulary;
use crate::vetting::Vetting;

/// The claims, one a line.
pub fn claim_lines(notation: &Notation<'_>, vetting: &Vetting) -> Vec<VerdictLine> {
    let author = Author::new(notation.model());
    let line = |(number, finding): (usize, &ClaimFinding)| {
        let mut note = statement(notation, &author, number);
        note.extend(answer(notation, finding));
        VerdictLine {
            name: format!("claim {}", number + 1),
            verdict: vocabulary::verdict(finding.verdict).to_string(),
            tone: tone(finding.verdict),
            note,
        }
    };
    vetting.claims.iter().enumerate().map(line).collect()
}

/// Where the claim fails, and what is right.
fn answer(notation: &Notation<'_>, finding: &ClaimFinding) -> Vec<Inline> {
    let mut note = Vec::new();
    if let Some(witness) = &finding.witness {
        note.push(text(" fails at "));
        note.extend(point(notation, &witness.point));
        note.push(text(": "));
        note.extend(value(Expression::symbol("left - right"), &witness.value));
    }
    if let Some(correct) = finding.correct.as_ref().and_then(|e| short(notation, e, LONGEST_BOUND)) {
        note.extend([text("; right is "), Inline::math(correct)]);
    }
    if let Some(reason) = &finding.reason {
        note.push(text(format!(": {reason}")));
    }
    note
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
