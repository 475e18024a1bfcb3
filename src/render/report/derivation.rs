//! The appendix: the system, the Slutsky matrix, each condition with its working, the recovery, the check back.

use crate::algebra::formula::Function;
use crate::conditions::{Condition, Coordinates, Verdict};
use crate::proof::FunctionId;
use crate::render::document::{Block, Document, Equation, Inline, Matrix};
use crate::render::expression::Expression;
use crate::render::notation::Notation;
use crate::render::report::starting::Start;
use crate::render::report::words::{short, text};
use crate::render::report::working::{Scribe, square, sum, term};
use crate::render::report::{claims, conditions, recovery, responses, structure, system};
use crate::vetting::Vetting;
use crate::vetting::appendix::Appendix;

/// The whole derivation.
pub fn derivation(vetting: &Vetting, appendix: &Appendix) -> Document {
    framed(vetting, appendix, |scribe, blocks| {
        let notation = scribe.notation;
        if Start::of(&vetting.model).is_none() && !vetting.model.demands.is_empty() {
            blocks.extend(slutsky(notation, vetting, appendix));
        }
        blocks.extend(vetting.findings.iter().flat_map(|finding| conditions::section(scribe, finding)));
        blocks.extend(vetting.recovered.iter().flat_map(|recovered| recovery::sections(scribe, recovered)));
        blocks.extend(vetting.structure.iter().flat_map(|found| structure::section(notation, found)));
        blocks.extend(vetting.responses.iter().flat_map(|found| responses::sections(notation, found)));
    })
}

/// The statements and the results, without the working.
pub fn short_derivation(vetting: &Vetting, appendix: &Appendix) -> Document {
    framed(vetting, appendix, |scribe, blocks| {
        if !vetting.findings.is_empty() {
            blocks.push(heading("Integrability"));
            blocks.extend(vetting.findings.iter().flat_map(|finding| conditions::in_short(scribe, finding)));
        }
        blocks.extend(vetting.recovered.iter().flat_map(|recovered| recovery::in_short(scribe, recovered)));
    })
}

/// The system in front, the claims at the end.
fn framed(vetting: &Vetting, appendix: &Appendix, body: impl FnOnce(&Scribe<'_>, &mut Vec<Block>)) -> Document {
    let notation = Notation::new(&vetting.model);
    let scribe = Scribe { notation: &notation, derivation: &vetting.derivation, appendix };
    let mut blocks = Vec::new();
    if !vetting.model.demands.is_empty() || Start::of(&vetting.model).is_some() {
        blocks.extend(system::blocks(&notation));
    }
    body(&scribe, &mut blocks);
    if !vetting.claims.is_empty() {
        blocks.push(heading("Claims"));
        blocks.push(Block::Verdicts(claims::claim_lines(&notation, vetting)));
    }
    Document { title: vetting.model.title.clone(), blocks }
}

/// The heading of a section.
pub fn heading(words: &str) -> Block {
    Block::Heading { level: 1, text: vec![text(words)] }
}

/// A paragraph of words.
pub fn paragraph(words: impl Into<String>) -> Block {
    Block::Paragraph(vec![text(words)])
}

fn slutsky(notation: &Notation<'_>, vetting: &Vetting, appendix: &Appendix) -> Vec<Block> {
    let x = |i: &str| Expression::from(notation.quantity_letter().at(i));
    let definition = Expression::Sum(vec![
        Expression::partial(x("i"), notation.price_letter("j")),
        Expression::Product(vec![x("j"), Expression::partial(x("i"), notation.income())]),
    ]);
    let mut blocks = vec![heading("The Slutsky matrix"), paragraph("The Slutsky matrix has the entries")];
    blocks.push(Block::Display(vec![Equation::equal(notation.slutsky().at("i").at("j"), definition)]));
    if appendix.slutsky.is_empty() {
        return blocks;
    }
    let symmetric = vetting.finding(Condition::Symmetry).is_some_and(|found| found.verdict == Verdict::Proven);
    let entries: Vec<Vec<Option<Expression>>> =
        appendix.slutsky.iter().map(|row| row.iter().map(|e| short(notation, e, LONGEST_ENTRY)).collect()).collect();
    let entries: Option<Vec<Vec<Expression>>> = entries.into_iter().map(|row| row.into_iter().collect()).collect();
    match entries {
        Some(entries) => blocks.extend(full_matrix(notation, entries, symmetric)),
        None => blocks.extend(scaled_matrix(notation, appendix, symmetric)),
    }
    blocks
}

/// The longest entry that is written out in full, in characters.
const LONGEST_ENTRY: usize = 150;

fn full_matrix(notation: &Notation<'_>, entries: Vec<Vec<Expression>>, symmetric: bool) -> Vec<Block> {
    let goods: Vec<String> = (0..entries.len()).map(|good| notation.good(good)).collect();
    let words = match symmetric && goods.len() > 1 {
        true => "which are here (those below the diagonal repeat those above it)",
        false => "which are here",
    };
    let matrix = Matrix { name: notation.slutsky(), rows: goods.clone(), columns: goods, entries, symmetric };
    vec![paragraph(words), Block::Matrix(matrix)]
}

/// The entries times prices, in shares or outlays that keep their names.
fn scaled_matrix(notation: &Notation<'_>, appendix: &Appendix, symmetric: bool) -> Vec<Block> {
    let Some(used) = appendix.coordinates else { return Vec::new() };
    let name = |f: FunctionId| {
        notation.named_function(appendix.functions.get(f.index()).map_or("", |function| function.name.as_str()))
    };
    let mut equations = Vec::new();
    for (i, row) in appendix.scaled.iter().enumerate() {
        for (j, terms) in row.iter().enumerate().skip(if symmetric { i } else { 0 }) {
            let mut factors =
                if i == j { vec![square(notation.price(i))] } else { vec![notation.price(i), notation.price(j)] };
            factors.push(notation.slutsky_entry(i, j));
            let product = Expression::Product(factors);
            let left = match used {
                Coordinates::Shares => Expression::Quotient(Box::new(product), Box::new(notation.income())),
                Coordinates::Outlays => product,
            };
            let terms = terms.iter().map(|each| term(notation, each, &name)).collect();
            equations.push(Equation::equal(left, sum(terms)));
        }
    }
    let mut words = vec![text("which are here, with ")];
    words.extend(coordinates(notation, used));
    words.push(text(if symmetric { " (those below the diagonal repeat those above it)," } else { "," }));
    vec![Block::Paragraph(words), Block::Display(equations)]
}

/// The coordinates in words and as a formula: "the shares w_i = p_i x_i/m".
pub fn coordinates(notation: &Notation<'_>, coordinates: Coordinates) -> Vec<Inline> {
    let outlay = vec![notation.price_letter("i"), notation.quantity_letter().at("i").into()];
    let (words, left, right) = match coordinates {
        Coordinates::Shares => {
            let share = Expression::Quotient(Box::new(Expression::Product(outlay)), Box::new(notation.income()));
            ("the budget shares ", notation.share_letter(), share)
        }
        Coordinates::Outlays => ("the outlays ", notation.outlay_letter(), Expression::Product(outlay)),
    };
    vec![text(words), Inline::Math(Box::new(Equation::equal(left.at("i"), right)))]
}

/// ln x.
pub fn logarithm(x: Expression) -> Expression {
    Expression::Call(Function::Ln, Box::new(x))
}
