//! The parameter restrictions: a table of branches, and what the system becomes under each.

use crate::algebra::generator::Element;
use crate::algebra::number::Rational;
use crate::conditions::{Condition, Verdict};
use crate::recovery::Recovered;
use crate::render::document::{Block, Document, Equation, Inline, Relation, Table};
use crate::render::expression::{Expression, Object};
use crate::render::notation::Notation;
use crate::render::report::preferences;
use crate::render::report::verdicts::{condition_line, failure};
use crate::render::report::words::{enumerated, listed, relation, text};
use crate::render::vocabulary;
use crate::restrictions::indexed::{self, Pattern, Statement};
use crate::restrictions::{Branch, Restrictions};
use crate::vetting::Part;

/// The branches in a table, and each by itself.
pub fn restrictions(found: &Restrictions) -> Document {
    let notation = Notation::new(&found.model);
    let mut blocks = vec![Block::Paragraph(vec![text(summary(found))])];
    blocks.extend(failures(&notation, found));
    if found.branches.len() > 1 {
        blocks.push(Block::Table(table(&notation, found)));
    }
    for (number, branch) in found.branches.iter().enumerate() {
        blocks.extend(one(&notation, found, number, branch));
    }
    Document { title: found.model.title.clone(), blocks }
}

/// How many branches there are, and whether they are all.
fn summary(found: &Restrictions) -> String {
    let names: Vec<String> = found.only.iter().map(|c| Part::Condition(*c).word().to_string()).collect();
    let (subject, verb) = match names.len() {
        0 => return "None of the conditions asked for makes sense for this model.".to_string(),
        1 => (enumerated(&names), "holds"),
        _ => (enumerated(&names), "hold together"),
    };
    let kept: Vec<String> = found.kept.iter().filter_map(|v| found.model.field.name(*v)).collect();
    let subject = match kept.len() {
        0 => subject,
        _ => format!("where {} must stay free, {subject}", enumerated(&kept)),
    };
    let open = match &found.reason {
        Some(reason) => format!("this list is not known to be complete ({reason})"),
        None => "this list is not known to be complete".to_string(),
    };
    let words = match (found.branches.len(), found.complete) {
        _ if found.unrestricted() => format!("{subject} {verb} for all admissible parameter values."),
        (0, true) => format!("For no admissible parameter values {subject} {verb}."),
        (0, false) => format!("No parameter values were found for which {subject} {verb}; {open}."),
        (1, true) => format!("{subject} {verb} exactly under these restrictions."),
        (1, false) => format!("{subject} {verb} under these restrictions; {open}."),
        (n, true) => format!("{subject} {verb} exactly in these {n} cases."),
        (n, false) => format!("{subject} {verb} in these {n} cases; {open}."),
    };
    let mut letters = words.chars();
    letters.next().map_or_else(String::new, |first| first.to_uppercase().chain(letters).collect())
}

/// A point outside all branches for each condition that fails somewhere.
fn failures(notation: &Notation<'_>, found: &Restrictions) -> Vec<Block> {
    let each = |(condition, witness): &(Condition, crate::conditions::Witness)| {
        let word = Part::Condition(*condition).word();
        let mut words = vec![text(format!("Otherwise {word} may fail: it "))];
        words.extend(failure(notation, *condition, witness));
        words.push(text("."));
        Block::Paragraph(words)
    };
    found.failures.iter().map(each).collect()
}

fn table(notation: &Notation<'_>, found: &Restrictions) -> Table {
    let heading = |words: &str| vec![text(words)];
    let columns = ["case", "restrictions", "free", "curvature"].into_iter().map(heading).collect();
    let row = |(number, branch): (usize, &Branch)| {
        let curvature = branch.finding(Condition::Curvature).map_or("", |f| vocabulary::verdict(f.verdict));
        vec![
            vec![text(letter(number))],
            listed(restrictions_of(notation, branch), ", "),
            vec![text(branch.dimension().to_string())],
            vec![text(curvature)],
        ]
    };
    Table { columns, rows: found.branches.iter().enumerate().map(row).collect() }
}

/// A, B, …, Z, then numbers.
fn letter(number: usize) -> String {
    u8::try_from(number)
        .ok()
        .filter(|n| *n < 26)
        .map_or_else(|| (number + 1).to_string(), |n| char::from(b'A' + n).to_string())
}

/// The restrictions of a branch: general statements in indices, single equations, and what does not vanish.
fn restrictions_of(notation: &Notation<'_>, branch: &Branch) -> Vec<Vec<Inline>> {
    let zero = Expression::Number(num_rational::Ratio::from_integer(0.into()));
    let not_zero = |e: &Element| vec![relation(notation.element(e), Relation::NotEqual, zero.clone())];
    let said = indexed::statements(notation.model(), &branch.equations);
    let said = said.iter().filter_map(|statement| match statement {
        Statement::General { family, paired, pattern } => Some(general(family, *paired, pattern)),
        Statement::Single(place) => branch
            .equations
            .get(*place)
            .map(|(v, value)| vec![relation(notation.variable(*v), Relation::Equal, notation.element(value))]),
    });
    let own = Notation::new(&branch.model);
    let not_negative = |e: &Element| vec![relation(own.element(e), Relation::GreaterEqual, zero.clone())];
    let inequalities = branch.inequalities.iter().map(not_negative);
    said.chain(branch.side_conditions.iter().map(not_zero)).chain(inequalities).collect()
}

/// A general statement about a family, with what its indices run over.
fn general(family: &str, paired: bool, pattern: &Pattern) -> Vec<Inline> {
    let at = |indices: &[&str]| {
        Expression::from(indices.iter().fold(Object::new(family), |object, index| object.at(*index)))
    };
    let number = |value: &Rational| Expression::Number(value.clone());
    let zero = number(&Rational::from_integer(0.into()));
    let said = |left: Expression, right: Expression, range: &str| {
        let mut words = vec![relation(left, Relation::Equal, right)];
        if !range.is_empty() {
            words.push(text(format!(" for {range}")));
        }
        words
    };
    match pattern {
        Pattern::Zero if paired => said(at(&["i", "j"]), zero, "all i and j"),
        Pattern::Zero => said(at(&["i"]), zero, "all i"),
        Pattern::Diagonal => said(at(&["i", "j"]), zero, "all i other than j"),
        Pattern::Symmetric => said(at(&["i", "j"]), at(&["j", "i"]), "all i and j"),
        Pattern::ColumnsVanish => said(Expression::total("i", at(&["i", "j"])), zero, "all j"),
        Pattern::RowsVanish => said(Expression::total("j", at(&["i", "j"])), zero, "all i"),
        Pattern::Total(value) => said(Expression::total("i", at(&["i"])), number(value), ""),
    }
}

/// The restrictions set off: aligned equations, or a list where some of them speak of indices.
fn displayed(notation: &Notation<'_>, branch: &Branch) -> Option<Block> {
    let all = restrictions_of(notation, branch);
    let single = |words: &Vec<Inline>| match &words[..] {
        [Inline::Math(equation)] => Some((**equation).clone()),
        _ => None,
    };
    match all.iter().map(single).collect::<Option<Vec<Equation>>>() {
        Some(equations) if equations.is_empty() => None,
        Some(equations) => Some(Block::Display(equations)),
        None => Some(Block::List { ordered: false, items: all }),
    }
}

fn one(notation: &Notation<'_>, found: &Restrictions, number: usize, branch: &Branch) -> Vec<Block> {
    let mut blocks = Vec::new();
    if found.branches.len() > 1 {
        blocks.push(Block::Heading { level: 1, text: vec![text(format!("Case {}", letter(number)))] });
    }
    blocks.extend(displayed(notation, branch));
    let mut words = free(notation, branch);
    words.extend(branch.family.map(|name| text(format!(" Family: {name}."))));
    blocks.push(Block::Paragraph(words));
    let own = Notation::new(&branch.model);
    let asked = |c: Condition| found.only.contains(&c) || c == Condition::Curvature;
    let open = |f: &&crate::conditions::Finding| {
        asked(f.condition) && f.verdict != Verdict::Proven || f.condition == Condition::Curvature
    };
    let lines: Vec<_> = branch.findings.iter().filter(open).map(|finding| condition_line(&own, finding)).collect();
    if !lines.is_empty() {
        blocks.push(Block::Verdicts(lines));
    }
    match &branch.recovered {
        Some(Recovered::Found(preferences)) => blocks.extend(preferences::summary(&own, preferences)),
        Some(Recovered::NotFound { reason, .. }) => {
            blocks.push(Block::Note(vec![text(format!("Preferences exist locally, but {reason}."))]));
        }
        None => {}
    }
    blocks
}

fn free(notation: &Notation<'_>, branch: &Branch) -> Vec<Inline> {
    let names: Vec<Vec<Inline>> = branch.free.iter().map(|v| vec![Inline::math(notation.variable(*v))]).collect();
    let mut words = vec![text(match names.len() {
        0 => "No parameter stays free.".to_string(),
        1 => "One parameter stays free: ".to_string(),
        n => format!("{n} parameters stay free: "),
    })];
    if !names.is_empty() {
        words.extend(listed(names, " and "));
        words.push(text("."));
    }
    words
}
