//! `\sum` and `\prod`: what they run over, and how far they reach.

use pest::iterators::Pair;

use super::super::diagnostic::Diagnostic;
use super::super::letters::normal_name;
use super::super::nearest::nearest;
use super::super::syntax::*;
use super::grammar::{Rule, parts as parts_of};
use super::terms::{Formulas, Item, joined, placeholder};

/// What stands below and above a sum.
#[derive(Default)]
struct Bounds {
    binders: Vec<Name>,
    except: Option<(Index, Span)>,
    group: Option<Name>,
}

impl Formulas<'_> {
    /// A sum or a product, over all factors that follow in its term.
    pub fn aggregate(&mut self, items: &[Item<'_>], depth: usize) -> Expr {
        let Some((head, rest)) = items.split_first() else { return placeholder(Span::default()) };
        let sign = self.span(&head.atom);
        let is_product = head.atom.as_str().starts_with("\\prod");
        let bounds = self.bounds(head.atom.clone());
        if bounds.binders.is_empty() {
            let remedy = "write \\sum_{j} …, with the index below";
            self.report(Diagnostic::error(sign, "this sum does not say which index it runs over").remedy(remedy));
            return placeholder(sign);
        }
        if rest.first().is_none_or(|item| item.joint != super::terms::Joint::Beside) {
            self.report(Diagnostic::error(sign, "nothing stands behind this sign that could be added up"));
            return placeholder(sign);
        }
        let outer = self.bound.len();
        self.bound.extend(bounds.binders.iter().map(|binder| binder.text.clone()));
        let factors = self.product(rest, depth + 1);
        self.bound.truncate(outer);
        if is_product {
            self.refuse_constant_factors(head, rest, &factors, &bounds.binders);
        }
        let start = rest.first().map_or(head.end, |item| item.start);
        let end = rest.last().map_or(head.end, |item| item.end);
        let body = joined(factors, self.prepared.span(start, end));
        let Bounds { binders, except, group } = bounds;
        let span = self.prepared.span(head.start, end);
        let over = Over { product: is_product, binders, except, group, body };
        Expr { kind: ExprKind::Over(Box::new(over)), span }
    }

    fn bounds(&mut self, aggregate: Pair<Rule>) -> Bounds {
        let mut bounds = Bounds::default();
        for bound in aggregate.into_inner().filter(|part| part.as_rule() == Rule::bound) {
            for part in bound.into_inner() {
                match part.as_rule() {
                    Rule::binding => self.binding(part, &mut bounds),
                    Rule::index_letter => bounds.binders.push(self.binder(&part)),
                    _ => self.last(&part),
                }
            }
        }
        if let (Some((_, span)), true) = (&bounds.except, bounds.binders.len() > 1) {
            let message = "`\\neq` leaves one good out of a sum over one index";
            let remedy = "write one sum inside the other: \\sum_{j \\neq i} \\sum_{k} …";
            self.report(Diagnostic::error(*span, message).remedy(remedy));
        }
        bounds
    }

    fn binder(&self, pair: &Pair<Rule>) -> Name {
        Name { text: normal_name(pair.as_str().trim().trim_start_matches('\\')), span: self.span(pair) }
    }

    fn binding(&mut self, binding: Pair<Rule>, bounds: &mut Bounds) {
        for part in binding.into_inner() {
            let span = self.span(&part);
            match part.as_rule() {
                Rule::index_letter => {
                    let binder = self.binder(&part);
                    if bounds.binders.iter().all(|known| known.text != binder.text) {
                        bounds.binders.push(binder);
                    }
                }
                Rule::first if part.as_str().trim_start_matches('=').trim() != "1" => {
                    let message = "sums run over all goods, from the first on";
                    self.report(Diagnostic::error(span, message).remedy(OVER_WHAT));
                }
                Rule::except => {
                    let text = parts_of(part).next().map(|index| index.as_str().trim().to_string());
                    let text = normal_name(text.unwrap_or_default().trim_start_matches('\\'));
                    let good = self.lexicon.good(&text).map(|place| self.lexicon.good_index(place));
                    let number = text.parse().ok().map(Index::Number);
                    bounds.except = Some((good.or(number).unwrap_or(Index::Name(text)), span));
                }
                Rule::within => bounds.group = self.group(part, span),
                _ => {}
            }
        }
    }

    fn group(&mut self, within: Pair<Rule>, span: Span) -> Option<Name> {
        let mut written = within.as_str().trim_start_matches("\\in").trim_start_matches('∈').to_string();
        for mark in ["\\mathcal", "\\mathrm", "\\mathbb", "\\operatorname", "\\text", "\\mathit"] {
            written = written.replace(mark, "");
        }
        written.retain(|letter| !letter.is_whitespace() && !matches!(letter, '{' | '}' | '\\'));
        let text = normal_name(&written);
        let groups = self.lexicon.groups.iter().map(String::as_str);
        if self.lexicon.groups.contains(&text) {
            return Some(Name { text, span });
        }
        let message = Diagnostic::error(span, format!("there is no group `{text}`"));
        self.report(match nearest(&text, groups) {
            Some(near) => message.remedy(format!("did you mean `{near}`?")),
            None => message.remedy(format!("declare it: group {text} = …")),
        });
        None
    }

    /// The upper limit: the number of goods, or a letter for it.
    fn last(&mut self, last: &Pair<Rule>) {
        let text = last.as_str().trim();
        let number: Option<usize> = text.parse().ok();
        if number.is_some_and(|number| number != self.lexicon.goods.len()) {
            let count = self.lexicon.goods.len();
            let message = format!("sums run over all goods, and there are {count}");
            self.report(Diagnostic::error(self.span(last), message).remedy(OVER_WHAT));
        }
    }

    /// Refuses a product with factors that do not depend on its index: they may stand inside it or behind it.
    fn refuse_constant_factors(&mut self, head: &Item<'_>, rest: &[Item<'_>], factors: &[Factor], binders: &[Name]) {
        let constant = |factor: &&Factor| !binders.iter().any(|binder| mentions(&factor.expr, &binder.text));
        let Some(factor) = factors.iter().find(constant) else { return };
        if factors.len() == 1 {
            return;
        }
        let word = self.words(head.start, head.end);
        let all = self.words(rest.first().map_or(0, |item| item.start), rest.last().map_or(0, |item| item.end));
        let message =
            format!("this can be read as one product over all of `{all}`, or as a product and factors beside it");
        let remedy = format!("write {word} ({all}), or put what does not depend on the index before the sign");
        self.report(Diagnostic::error(factor.expr.span, message).remedy(remedy));
    }
}

const OVER_WHAT: &str =
    "write \\sum_{j}, \\sum_{j=1}^{n}, \\sum_{j \\neq i}, or \\sum_{k \\in G} with a declared group";

/// Whether an index stands in a formula.
fn mentions(expr: &Expr, index: &str) -> bool {
    match &expr.kind {
        ExprKind::Number(_) | ExprKind::Pi => false,
        ExprKind::Reference(reference) => {
            reference.indices.iter().any(|(known, _)| matches!(known, Index::Name(name) if name == index))
        }
        ExprKind::Negative(inner) | ExprKind::Call(_, inner) => mentions(inner, index),
        ExprKind::Sum(terms) => terms.iter().any(|term| mentions(term, index)),
        ExprKind::Product(factors) => factors.iter().any(|factor| mentions(&factor.expr, index)),
        ExprKind::Power(base, exponent) => mentions(base, index) || mentions(exponent, index),
        ExprKind::Over(over) => {
            mentions(&over.body, index)
                || over.except.as_ref().is_some_and(|(known, _)| matches!(known, Index::Name(name) if name == index))
        }
    }
}
