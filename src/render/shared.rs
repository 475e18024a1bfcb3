//! Names for long sums that a document shows again and again: the sum is written out once, below the first display
//! that uses it, and stands as a letter everywhere else.

use crate::algebra::formula::Symbol;
use crate::render::document::{Block, Document, Equation, Matrix};
use crate::render::expression::Expression;
use crate::render::formula_text::plain_expression;
use crate::render::letters::Letters;
use rustc_hash::FxHashMap;

/// A sum shorter than this, as text, is not worth a name.
const LEAST_LENGTH: usize = 28;
/// A name must spare the reader at least this many characters.
const LEAST_SAVING: usize = 100;
/// No document gets more names than this.
const MOST_NAMES: usize = 9;
/// Documents with more parts than this are left as they are.
const MOST_PARTS: usize = 100_000;

/// The document with names for long sums that come again in its displays and matrices.
pub fn name_shared_sums(document: &Document) -> Document {
    let mut document = document.clone();
    let mut named: Vec<Expression> = Vec::new();
    while named.len() < MOST_NAMES {
        let Some(part) = most_worth_naming(&document, &named) else { break };
        let mark = Expression::Symbol(placeholder(named.len()));
        let mut replace = |whole: &Expression| replaced(whole, &part, &mark);
        named = named.iter().map(&mut replace).collect();
        change_right_sides(&mut document, &mut |right| top_level(right, &part, &mark));
        named.push(part);
    }
    if named.is_empty() { document } else { with_definitions(document, named) }
}

/// Stands for the name of a part until all are known; no model can use it.
fn placeholder(number: usize) -> Symbol {
    Symbol::new(format!("\u{1}{number}"))
}

/// A right side is left alone where it is the part itself: there it has a name already.
fn top_level(right: &Expression, part: &Expression, mark: &Expression) -> Expression {
    right.map_children(&mut |child| replaced(child, part, mark))
}

fn replaced(whole: &Expression, part: &Expression, mark: &Expression) -> Expression {
    match whole == part {
        true => mark.clone(),
        false => whole.map_children(&mut |child| replaced(child, part, mark)),
    }
}

/// The sums of a document, with how often each is there.
#[derive(Default)]
struct Census<'a> {
    counts: FxHashMap<&'a Expression, usize>,
    repeated: Vec<&'a Expression>,
    parts: usize,
}

impl<'a> Census<'a> {
    /// Counts what is inside `whole`, but not the whole.
    fn take(&mut self, whole: &'a Expression) {
        for child in whole.children() {
            self.parts += 1;
            if matches!(child, Expression::Sum(_)) {
                let seen = self.counts.entry(child).or_insert(0);
                *seen += 1;
                if *seen == 2 {
                    self.repeated.push(child);
                }
            }
            self.take(child);
        }
    }

    /// How many characters a name for `part` would spare.
    fn saving(&self, part: &Expression) -> usize {
        let length = plain_expression(part).chars().count();
        let again = self.counts.get(part).map_or(0, |count| count - 1);
        if length < LEAST_LENGTH { 0 } else { length.saturating_mul(again) }
    }
}

/// The sum whose naming spares most characters, the first of several.
fn most_worth_naming(document: &Document, named: &[Expression]) -> Option<Expression> {
    let mut census = Census::default();
    right_sides(document).into_iter().chain(named).for_each(|side| census.take(side));
    if census.parts > MOST_PARTS {
        return None;
    }
    let mut best: Option<(usize, &Expression)> = None;
    for part in &census.repeated {
        let saving = census.saving(part);
        if saving >= LEAST_SAVING && best.is_none_or(|(most, _)| saving > most) {
            best = Some((saving, part));
        }
    }
    best.map(|(_, part)| part.clone())
}

fn right_sides(document: &Document) -> Vec<&Expression> {
    document.blocks.iter().flat_map(right_sides_of).collect()
}

fn right_sides_of(block: &Block) -> Vec<&Expression> {
    match block {
        Block::Display(equations) | Block::Where(equations) => equations.iter().map(|each| &each.right).collect(),
        Block::Matrix(Matrix { entries, .. }) => entries.iter().flatten().collect(),
        _ => Vec::new(),
    }
}

fn change_right_sides(document: &mut Document, change: &mut impl FnMut(&Expression) -> Expression) {
    document.blocks.iter_mut().for_each(|block| change_block(block, change));
}

fn change_block(block: &mut Block, change: &mut impl FnMut(&Expression) -> Expression) {
    match block {
        Block::Display(equations) | Block::Where(equations) => {
            equations.iter_mut().for_each(|each| each.right = change(&each.right));
        }
        Block::Matrix(Matrix { entries, .. }) => {
            entries.iter_mut().flatten().for_each(|entry| *entry = change(entry));
        }
        _ => {}
    }
}

/// Letters in the order of appearance, and their definitions below the first display that needs them.
fn with_definitions(document: Document, named: Vec<Expression>) -> Document {
    let mut letters = Letters::beside(&document);
    let mut names: Vec<Option<Symbol>> = vec![None; named.len()];
    let mut blocks = Vec::new();
    for block in document.blocks {
        let mut wanted = placeholders_in(&block);
        let mut fresh = Vec::new();
        while let Some(number) = wanted.iter().copied().find(|&number| names[number].is_none()) {
            names[number] = Some(letters.take());
            named[number].for_each_symbol(&mut |symbol| wanted.extend(number_of(symbol)));
            let name = Expression::Symbol(placeholder(number));
            fresh.push(Equation::equal(name, named[number].clone()));
        }
        blocks.push(block);
        if !fresh.is_empty() {
            blocks.push(Block::Where(fresh));
        }
    }
    let mut finish = |side: &Expression| with_letters(side, &names);
    for block in &mut blocks {
        if let Block::Where(equations) = block {
            equations.iter_mut().for_each(|each| each.left = each.left.as_ref().map(&mut finish));
        }
        change_block(block, &mut finish);
    }
    Document { title: document.title, blocks }
}

fn with_letters(side: &Expression, names: &[Option<Symbol>]) -> Expression {
    if let Expression::Symbol(symbol) = side {
        let name = number_of(symbol).and_then(|number| names.get(number)?.clone());
        return Expression::Symbol(name.unwrap_or_else(|| symbol.clone()));
    }
    side.map_children(&mut |child| with_letters(child, names))
}

fn number_of(symbol: &Symbol) -> Option<usize> {
    symbol.plain.strip_prefix('\u{1}')?.parse().ok()
}

/// The names that the right sides of a block wait for.
fn placeholders_in(block: &Block) -> Vec<usize> {
    let mut numbers = Vec::new();
    for side in right_sides_of(block) {
        side.for_each_symbol(&mut |symbol| numbers.extend(number_of(symbol)));
    }
    numbers
}
