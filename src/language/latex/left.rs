//! Relations, and what stands on the left of an equation.

use pest::iterators::Pair;

use super::super::diagnostic::Diagnostic;
use super::super::syntax::*;
use super::factors::bare_arguments;
use super::grammar::{Rule, parts as parts_of};
use super::lexicon::{Lexicon, Role};
use super::names::{self, Token};
use super::symbols::{Written, meanings, splits};
use super::terms::Formulas;

/// The relation that a `statement` pair is.
pub fn relation(formulas: &mut Formulas<'_>, statement: Pair<Rule>) -> Option<Relation> {
    let span = formulas.span(&statement);
    let mut parts = parts_of(statement);
    let first = formulas.expression(parts.next()?, 0);
    let mut rest = Vec::new();
    while let Some(part) = parts.next() {
        if part.as_rule() == Rule::interval {
            return membership(formulas, first, part, span);
        }
        let sign = comparison(part.as_str());
        rest.push((sign, formulas.expression(parts.next()?, 0)));
    }
    Some(Relation { first, rest, span })
}

/// `a \in (0, 1]` as 0 < a <= 1.
fn membership(formulas: &mut Formulas<'_>, middle: Expr, interval: Pair<Rule>, span: Span) -> Option<Relation> {
    let mut parts = parts_of(interval);
    let open = parts.next()?.as_str() == "(";
    let low = formulas.expression(parts.next()?, 0);
    let high = formulas.expression(parts.next()?, 0);
    let end_open = parts.next()?.as_str() == ")";
    let sign = |open: bool| if open { Comparison::Less } else { Comparison::LessEqual };
    Some(Relation { first: low, rest: vec![(sign(open), middle), (sign(end_open), high)], span })
}

/// The sign of a relation.
pub fn comparison(written: &str) -> Comparison {
    match written.trim() {
        "\\neq" | "\\ne" | "≠" => Comparison::NotEqual,
        "<" | "\\lt" => Comparison::Less,
        "\\leq" | "\\le" | "\\leqslant" | "≤" => Comparison::LessEqual,
        ">" | "\\gt" => Comparison::Greater,
        "\\geq" | "\\ge" | "\\geqslant" | "≥" => Comparison::GreaterEqual,
        _ => Comparison::Equal,
    }
}

/// How the left side of an equation measures what it defines.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Measure {
    /// `x_i`
    Plain,
    /// `\ln x_i`
    Logarithm,
    /// `p_i x_i`
    Outlay,
    /// `p_i x_i / m`
    Share,
}

/// The letter on the left of an equation.
#[derive(Clone, Debug)]
pub struct Left {
    /// How it is measured.
    pub measure: Measure,
    /// What stands on the line, in the forms that it may be declared in.
    pub bases: Vec<String>,
    /// The subscript.
    pub below: Vec<Token>,
    /// The superscript.
    pub above: String,
    /// The arguments, `(p,m)`.
    pub arguments: Option<String>,
    /// How it is set, without arguments.
    pub form: String,
    /// Where it stands.
    pub span: Span,
}

/// The letter that a left side is about; none where it is another formula.
pub fn left(side: &Pair<Rule>, formulas: &Formulas<'_>) -> Option<Left> {
    let mut terms = side.clone().into_inner();
    let term = terms.next().filter(|term| term.as_rule() == Rule::term && terms.next().is_none())?;
    let pieces: Vec<Pair<Rule>> = term.into_inner().filter(|part| !is_times(part)).collect();
    let [first, rest @ ..] = pieces.as_slice() else { return None };
    let atom = first.clone().into_inner().next()?;
    match (atom.as_rule(), rest) {
        (Rule::function, [name, arguments @ ..]) if atom.as_str() != "\\exp" => {
            let inner = match parenthesised(name).filter(|_| arguments.is_empty()) {
                Some(inner) => vec![inner],
                None => rest.to_vec(),
            };
            named(&inner, Measure::Logarithm, formulas)
        }
        (Rule::fraction, []) => {
            let mut parts = parts_of(atom);
            let (above, below) = (parts.next()?, parts.next()?);
            let is_income = pieces_of(&below)
                .and_then(|pieces| role_of(pieces.first()?, formulas.lexicon).filter(|_| pieces.len() == 1))
                == Some(Role::Income);
            let pieces = pieces_of(&above).filter(|_| is_income)?;
            outlay(&pieces, Measure::Share, formulas)
        }
        _ => outlay(&pieces, Measure::Outlay, formulas).or_else(|| named(&pieces, Measure::Plain, formulas)),
    }
}

fn is_times(part: &Pair<Rule>) -> bool {
    part.as_rule() == Rule::operator && !matches!(part.as_str().trim(), "/" | "\\div")
}

/// The pieces of an argument that is one product.
fn pieces_of<'p>(argument: &Pair<'p, Rule>) -> Option<Vec<Pair<'p, Rule>>> {
    let mut terms = argument.clone().into_inner().next()?.into_inner();
    let term = terms.next().filter(|term| term.as_rule() == Rule::term && terms.next().is_none())?;
    Some(term.into_inner().filter(|part| !is_times(part)).collect())
}

/// The piece in brackets that is all of them.
fn parenthesised<'p>(piece: &Pair<'p, Rule>) -> Option<Pair<'p, Rule>> {
    let mut parts = piece.clone().into_inner();
    let atom = parts.next().filter(|atom| atom.as_rule() == Rule::parenthesis && parts.next().is_none())?;
    names::only_piece(parts_of(atom).next()?.into_inner().next()?)
}

/// A price and the quantity: `p_i x_i`.
fn outlay(pieces: &[Pair<Rule>], measure: Measure, formulas: &Formulas<'_>) -> Option<Left> {
    let (price, rest) = pieces.split_first()?;
    if rest.is_empty() || !matches!(role_of(price, formulas.lexicon)?, Role::Price(_)) {
        return None;
    }
    let left = named(rest, measure, formulas)?;
    let below = price.clone().into_inner().skip(1);
    let price = names::joined(&names::scripts(below).below);
    (price == names::joined(&left.below)).then_some(left)
}

fn role_of(piece: &Pair<Rule>, lexicon: &Lexicon) -> Option<Role> {
    let mut parts = piece.clone().into_inner();
    let bases = names::bases(&parts.next()?);
    let scripts = names::scripts(parts);
    let written = Written { bases, below: &scripts.below, above: &scripts.above };
    let found = meanings(lexicon, &written, &[]);
    lexicon.known(&found.first()?.name).map(|known| known.role)
}

/// A letter with its scripts, and perhaps with arguments behind it.
fn named(pieces: &[Pair<Rule>], measure: Measure, formulas: &Formulas<'_>) -> Option<Left> {
    let (piece, arguments) = match pieces {
        [piece] => (piece, None),
        [piece, behind] => {
            let mut parts = behind.clone().into_inner();
            let brackets = parts.next().filter(|atom| atom.as_rule() == Rule::parenthesis && parts.next().is_none())?;
            (piece, Some(bare_arguments(brackets.as_str())))
        }
        _ => return None,
    };
    let mut parts = piece.clone().into_inner();
    let atom = parts.next()?;
    let bases = names::bases(&atom);
    if bases.is_empty() {
        return None;
    }
    let scripts = names::scripts(parts);
    let end = pieces.last().map_or(0, |last| last.as_span().end());
    let span = formulas.prepared.span(piece.as_span().start(), end);
    let mut form = atom.as_str().trim().to_string();
    if let (Some(first), Some(last)) = (scripts.below.first(), scripts.below.last()) {
        form = format!("{form}_{{{}}}", formulas.words(first.start, last.end));
    }
    Some(Left { measure, bases, below: scripts.below, above: scripts.above, arguments, form, span })
}

impl Left {
    /// The declared name that it is, where it is one.
    pub fn declared(&self, lexicon: &Lexicon) -> Option<String> {
        let written = Written { bases: self.bases.clone(), below: &self.below, above: &self.above };
        meanings(lexicon, &written, &[]).first().map(|meaning| meaning.name.clone())
    }

    /// What the declared name stands for.
    pub fn role(&self, lexicon: &Lexicon) -> Option<Role> {
        lexicon.known(&self.declared(lexicon)?).map(|known| known.role)
    }

    /// The letter, accents and alphabets included.
    pub fn base(&self) -> &str {
        self.bases.last().map_or("", String::as_str)
    }

    /// The goods that it stands for: one of them, or each by a free letter.
    pub fn target(&self, formulas: &Formulas<'_>) -> Option<Target> {
        let lexicon = formulas.lexicon;
        if let Some(Role::Quantity(Some(place))) = self.role(lexicon) {
            return Some(Target::Indexed(lexicon.good_index(place), self.span));
        }
        if self.below.is_empty() {
            let place = lexicon.goods.iter().position(|good| good == self.base() && lexicon.goods_named)?;
            return Some(Target::Indexed(lexicon.good_index(place), self.span));
        }
        let (index, _) = splits(lexicon, &self.below, 1, &[]).into_iter().next()?.into_iter().next()?;
        Some(Target::Indexed(index, self.span))
    }

    /// The two indices of a term of a matrix.
    pub fn pair(&self, formulas: &Formulas<'_>) -> Option<[(Index, Span); 2]> {
        let indices = splits(formulas.lexicon, &self.below, 2, &[]).into_iter().next()?;
        let place = |(index, (start, end)): (Index, (usize, usize))| (index, formulas.prepared.span(start, end));
        let mut indices = indices.into_iter().map(place);
        Some([indices.next()?, indices.next()?])
    }
}

/// A message for a left side that defines nothing.
pub fn no_left_side(span: Span, text: &str) -> Diagnostic {
    let message = format!("`{text}` is no left side: it is neither a quantity nor a budget share nor a new name");
    let remedy = "write x_i = …, w_i = …, p_i x_i = …, \\ln x_i = …, or P = … for an abbreviation; for relations write \
                  `assume $…$` or `claim $…$`";
    Diagnostic::error(span, message).remedy(remedy)
}
