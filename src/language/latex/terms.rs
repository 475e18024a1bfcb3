//! Formulas in LaTeX: from the pairs of the grammar to the syntax tree, names and extents settled.
//!
//! What stands side by side is multiplied. A function without brackets takes the product behind it, up to a sign or the
//! next function; where that is more than one letter, the reading is told. What could be read in two ways, and is not
//! settled by the declarations, is refused with both.

use pest::iterators::Pair;

use super::super::brackets::MAX_NESTING;
use super::super::constant::{self, Constant};
use super::super::diagnostic::{Diagnostic, MAX_MISTAKES};
use super::super::syntax::*;
use super::grammar::{Rule, parts as parts_of};
use super::lexicon::Lexicon;
use super::names::{self, Scripts};
use super::prepared::{Prepared, trimmed};

/// Builds formulas of one prepared text.
pub struct Formulas<'a> {
    /// The text.
    pub prepared: &'a Prepared,
    /// The declarations.
    pub lexicon: &'a Lexicon,
    /// The mistakes so far.
    pub mistakes: Vec<Diagnostic>,
    /// The warnings so far.
    pub warnings: Vec<Diagnostic>,
    /// The indices of the sums around.
    pub bound: Vec<String>,
    /// How plain names are set here, for print.
    pub observed: Vec<(String, String)>,
}

/// What joins a factor to the one before it.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Joint {
    /// Nothing.
    Beside,
    /// A sign of multiplication.
    Times,
    /// A slash.
    Over,
}

/// A factor before it is built.
#[derive(Clone, Debug)]
pub struct Item<'p> {
    /// What stands before it.
    pub joint: Joint,
    /// Whether an odd number of minus signs does.
    pub negative: bool,
    /// What it is.
    pub atom: Pair<'p, Rule>,
    /// What stands on it and below it.
    pub scripts: Scripts<'p>,
    /// Where it begins.
    pub start: usize,
    /// Where it ends, with the arguments behind a name.
    pub end: usize,
    /// Whether arguments behind it belong to it.
    pub applied: bool,
}

impl Item<'_> {
    /// Whether it is a function that takes what follows.
    pub fn function(&self, lexicon: &Lexicon) -> Option<Function> {
        match self.atom.as_rule() {
            Rule::function => Function::from_word(self.atom.as_str().trim_start_matches('\\')),
            Rule::named => {
                let word = names::words(&self.atom);
                let word = if word == "W" { "lambertw".to_string() } else { word };
                let declared = lexicon.names.iter().any(|known| names::bases(&self.atom).contains(&known.key.base));
                Function::from_word(&word).filter(|_| !declared)
            }
            _ => None,
        }
    }

    /// Whether it takes what follows.
    pub fn reaches_on(&self, lexicon: &Lexicon) -> bool {
        self.atom.as_rule() == Rule::aggregate || self.function(lexicon).is_some()
    }
}

impl<'a> Formulas<'a> {
    /// A builder for the formulas of a text.
    pub fn new(prepared: &'a Prepared, lexicon: &'a Lexicon) -> Formulas<'a> {
        let (mistakes, warnings, bound, observed) = (Vec::new(), Vec::new(), Vec::new(), Vec::new());
        Formulas { prepared, lexicon, mistakes, warnings, bound, observed }
    }

    /// Takes a mistake down, unless there are more than anyone will read.
    pub fn report(&mut self, mistake: Diagnostic) {
        if self.mistakes.len() <= MAX_MISTAKES {
            self.mistakes.push(mistake);
        }
    }

    /// Where in the file a pair stands.
    pub fn span(&self, pair: &Pair<Rule>) -> Span {
        let span = pair.as_span();
        self.prepared.span(span.start(), span.start() + trimmed(span.as_str()).len())
    }

    /// The text of a stretch, on one line.
    pub fn words(&self, start: usize, end: usize) -> String {
        let text = self.prepared.text.get(start..end).unwrap_or("");
        text.split_whitespace().collect::<Vec<_>>().join(" ")
    }

    /// The formula of an `expression` pair, so deep inside its statement.
    pub fn expression(&mut self, pair: Pair<Rule>, depth: usize) -> Expr {
        let span = self.span(&pair);
        if depth > MAX_NESTING {
            let message = format!("formulas are nested more than {MAX_NESTING} deep here, which is the bound");
            self.report(Diagnostic::error(span, message).remedy("name the inner parts with `let`"));
            return placeholder(span);
        }
        let mut terms = Vec::new();
        let (mut negative, mut lead) = (false, None);
        for part in pair.into_inner() {
            let at = self.span(&part);
            if part.as_rule() == Rule::sign {
                negative ^= part.as_str() != "+";
                lead.get_or_insert(at.start);
                continue;
            }
            let term = self.term(part, depth);
            let outer = Span::new(lead.take().unwrap_or(at.start), at.end);
            terms.push(if std::mem::take(&mut negative) { negated(term, outer) } else { term });
        }
        match terms.len() {
            1 => terms.swap_remove(0),
            _ => Expr { kind: ExprKind::Sum(terms), span },
        }
    }

    fn term(&mut self, pair: Pair<Rule>, depth: usize) -> Expr {
        let span = self.span(&pair);
        let items = self.items(pair);
        self.refuse_two_readings(&items);
        let factors = self.product(&items, depth);
        joined(factors, span)
    }

    /// The factors of a term, arguments put to the names in front of them.
    fn items<'p>(&mut self, term: Pair<'p, Rule>) -> Vec<Item<'p>> {
        let mut items: Vec<Item<'p>> = Vec::new();
        let (mut joint, mut negative) = (Joint::Beside, false);
        for part in term.into_inner() {
            match part.as_rule() {
                Rule::operator => {
                    joint = if matches!(part.as_str().trim(), "/" | "\\div") { Joint::Over } else { Joint::Times };
                }
                Rule::sign => negative ^= part.as_str() != "+",
                _ => {
                    let (start, text) = (part.as_span().start(), trimmed(part.as_str()).len());
                    let mut parts = part.into_inner();
                    let Some(atom) = parts.next() else { continue };
                    let scripts = names::scripts(parts);
                    let item = Item { joint, negative, atom, scripts, start, end: start + text, applied: false };
                    (joint, negative) = (Joint::Beside, false);
                    match items.last_mut() {
                        Some(name) if item.joint == Joint::Beside && self.applies(name, &item) => {
                            name.applied = true;
                            name.end = item.end;
                            if item.scripts.exponent.is_some() {
                                name.scripts.exponent = item.scripts.exponent;
                            }
                        }
                        _ => items.push(item),
                    }
                }
            }
        }
        items
    }

    /// Builds all factors of a list.
    pub fn product(&mut self, items: &[Item<'_>], depth: usize) -> Vec<Factor> {
        let mut factors: Vec<Factor> = Vec::new();
        let mut at = 0;
        while let Some(item) = items.get(at) {
            let (mut found, taken) = self.next(&items[at..], depth);
            if item.negative
                && let Some(first) = found.first_mut()
            {
                let span = first.span;
                *first = negated(std::mem::replace(first, placeholder(span)), span);
            }
            let inverted = item.joint == Joint::Over;
            if inverted && found.len() > 1 {
                let span = found.iter().map(|part| part.span).reduce(Span::join).unwrap_or_default();
                found = vec![joined(found.into_iter().map(|expr| Factor { expr, inverted: false }).collect(), span)];
            }
            factors.extend(found.into_iter().map(|expr| Factor { expr, inverted }));
            at += taken.max(1);
        }
        factors
    }

    /// The factors that begin a list, and how many items they take.
    fn next(&mut self, items: &[Item<'_>], depth: usize) -> (Vec<Expr>, usize) {
        let Some(item) = items.first() else { return (Vec::new(), 0) };
        if item.scripts.doubled {
            let message = format!("`{}` has two scripts in one place", self.words(item.start, item.end));
            let span = self.prepared.span(item.start, item.end);
            self.report(Diagnostic::error(span, message).remedy("set one of them in braces: {x^a}^b"));
        }
        if depth > MAX_NESTING {
            let span = self.prepared.span(item.start, item.end);
            self.report(Diagnostic::error(span, "functions are nested too deep here").remedy("use `let`"));
            return (vec![placeholder(span)], items.len());
        }
        if let Some(function) = item.function(self.lexicon) {
            let (call, taken) = self.call(function, items, depth);
            return (vec![call], taken);
        }
        if item.atom.as_rule() == Rule::aggregate {
            return (vec![self.aggregate(items, depth)], items.len());
        }
        (self.factor(item, depth), 1)
    }

    /// What one item is: a letter run may be several factors.
    pub fn factor(&mut self, item: &Item<'_>, depth: usize) -> Vec<Expr> {
        let span = self.prepared.span(item.start, item.end);
        let is_name = match item.atom.as_rule() {
            Rule::greek | Rule::letters | Rule::named | Rule::styled => true,
            Rule::group => !item.scripts.below.is_empty() && !names::bases(&item.atom).is_empty(),
            _ => false,
        };
        if is_name {
            return self.name(item, depth);
        }
        if let Some(first) = item.scripts.below.first() {
            let at = self.prepared.span(first.start, first.end);
            self.report(Diagnostic::error(at, "a subscript stands behind a formula here, not behind a letter"));
        }
        if item.scripts.exponent.is_none() && !item.scripts.above.is_empty() {
            let message = format!("the mark `{}` stands on a formula here, not on a letter", item.scripts.above);
            self.report(Diagnostic::error(span, message).remedy("take it out"));
        }
        let inner = self.unit(item.atom.clone(), depth);
        vec![self.raised(inner, item, span, depth)]
    }

    /// A number, a fraction, a root, brackets.
    fn unit(&mut self, atom: Pair<Rule>, depth: usize) -> Expr {
        let span = self.span(&atom);
        let rule = atom.as_rule();
        if rule == Rule::number {
            return self.number(atom.as_str(), span);
        }
        let mut parts = parts_of(atom);
        let kind = match rule {
            Rule::fraction => {
                let (Some(above), Some(below)) = (parts.next(), parts.next()) else { return placeholder(span) };
                let above = Factor { expr: self.argument(above, depth + 1), inverted: false };
                ExprKind::Product(vec![above, Factor { expr: self.argument(below, depth + 1), inverted: true }])
            }
            Rule::root => {
                let mut parts: Vec<Pair<Rule>> = parts.collect();
                let Some(argument) = parts.pop() else { return placeholder(span) };
                let argument = self.argument(argument, depth + 1);
                match parts.pop().and_then(|degree| degree.into_inner().next()) {
                    None => ExprKind::Call(Function::Sqrt, Box::new(argument)),
                    Some(degree) => {
                        let degree = self.expression(degree, depth + 1);
                        ExprKind::Power(Box::new(argument), Box::new(inverse(degree)))
                    }
                }
            }
            Rule::brace => return parts.next().map_or(placeholder(span), |inner| self.argument(inner, depth + 1)),
            Rule::parenthesis => return parts.next().map_or(placeholder(span), |inside| self.inside(inside, depth)),
            _ => return parts.next().map_or(placeholder(span), |inner| self.expression(inner, depth + 1)),
        };
        Expr { kind, span }
    }

    /// What stands in brackets: one formula.
    fn inside(&mut self, inside: Pair<Rule>, depth: usize) -> Expr {
        let span = self.span(&inside);
        let mut parts = inside.into_inner();
        let Some(first) = parts.next() else { return placeholder(span) };
        if parts.next().is_some() {
            let message = "a comma stands in these brackets, and what stands before them is not declared a function";
            let remedy = "a function's arguments are written where it is defined: `let $P(p) = …$`";
            self.report(Diagnostic::error(span, message).remedy(remedy));
            return placeholder(span);
        }
        self.expression(first, depth + 1)
    }

    /// What a command is applied to.
    pub fn argument(&mut self, argument: Pair<Rule>, depth: usize) -> Expr {
        let span = self.span(&argument);
        let Some(inner) = argument.into_inner().next() else { return placeholder(span) };
        match inner.as_rule() {
            Rule::expression => self.expression(inner, depth),
            Rule::single => self.single(inner, depth),
            _ => placeholder(span),
        }
    }

    fn single(&mut self, single: Pair<Rule>, depth: usize) -> Expr {
        let (span, text) = (self.span(&single), single.as_span());
        let (start, end) = (text.start(), text.end());
        let Some(atom) = single.into_inner().next() else { return placeholder(span) };
        match atom.as_rule() {
            Rule::digit => self.number(atom.as_str(), span),
            Rule::single_fraction => {
                atom.into_inner().next().map_or(placeholder(span), |fraction| self.unit(fraction, depth + 1))
            }
            _ => {
                let item = Item {
                    joint: Joint::Beside,
                    negative: false,
                    atom,
                    scripts: Scripts::default(),
                    start,
                    end,
                    applied: false,
                };
                joined(self.name(&item, depth).into_iter().map(|expr| Factor { expr, inverted: false }).collect(), span)
            }
        }
    }

    fn number(&mut self, written: &str, span: Span) -> Expr {
        match super::super::expression::decimal(written) {
            Ok(value) => Expr { kind: ExprKind::Number(value), span },
            Err(message) => {
                self.report(Diagnostic::error(span, message).remedy("write a parameter in its place"));
                placeholder(span)
            }
        }
    }

    /// The formula under the exponent of an item.
    pub fn raised(&mut self, base: Expr, item: &Item<'_>, span: Span, depth: usize) -> Expr {
        let Some(exponent) = item.scripts.exponent.clone() else { return base };
        let exponent = match exponent.as_rule() {
            Rule::expression => self.expression(exponent, depth + 1),
            _ => self.single(exponent, depth + 1),
        };
        if constant::value(&exponent) == Constant::TooLarge {
            let message = format!("this exponent is beyond the bound of {}", constant::MAX_EXPONENT);
            let remedy = "write a smaller exponent, or a parameter in its place";
            self.report(Diagnostic::error(exponent.span, message).remedy(remedy));
            return placeholder(span);
        }
        Expr { kind: ExprKind::Power(Box::new(base), Box::new(exponent)), span }
    }
}

/// 1/x
fn inverse(degree: Expr) -> Expr {
    let span = degree.span;
    let one = Expr { kind: ExprKind::Number(Rational::from_integer(1.into())), span };
    let factors = vec![Factor { expr: one, inverted: false }, Factor { expr: degree, inverted: true }];
    Expr { kind: ExprKind::Product(factors), span }
}

/// -x
pub fn negated(expr: Expr, span: Span) -> Expr {
    Expr { kind: ExprKind::Negative(Box::new(expr)), span }
}

/// One factor as it is; several as a product.
pub fn joined(mut factors: Vec<Factor>, span: Span) -> Expr {
    match factors.as_slice() {
        [] => placeholder(span),
        [only] if !only.inverted => factors.swap_remove(0).expr,
        _ => Expr { kind: ExprKind::Product(factors), span },
    }
}

/// What stands for a formula that is wrong; it never leaves this floor, since the mistake goes with it.
pub fn placeholder(span: Span) -> Expr {
    Expr { kind: ExprKind::Pi, span }
}
