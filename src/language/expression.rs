//! Formulas: from the flat lists of the grammar to the syntax tree.
//!
//! Precedence, from loose to tight: `+ -`, `* /`, the minus sign before an operand, `^` (to the right). A minus sign
//! before the first factor belongs to the whole product: `-a*b^2` is -(a·b²), which is the same number.

use std::iter::Peekable;
use std::vec::IntoIter;

use num_bigint::BigInt;
use num_integer::Integer;
use pest::iterators::Pair;

use super::brackets::MAX_NESTING;
use super::constant::{self, Constant};
use super::diagnostic::{Diagnostic, MAX_MISTAKES};
use super::grammar::Rule;
use super::latex::{self, Lexicon};
use super::letters::normal_name;
use super::nearest::nearest;
use super::syntax::*;

/// The most digits of a number.
const MAX_DIGITS: usize = 1000;

/// The longest name, in bytes.
const MAX_NAME_BYTES: usize = 200;

/// Builds trees, and keeps what is wrong with them.
#[derive(Debug, Default)]
pub struct Builder<'a> {
    offset: usize,
    /// What is declared, where that is known already; else formulas in LaTeX are left for later.
    pub lexicon: Option<&'a Lexicon>,
    /// The mistakes so far.
    pub mistakes: Vec<Diagnostic>,
    /// The warnings so far.
    pub warnings: Vec<Diagnostic>,
    /// Where a bare `e` is raised to a power.
    pub exponentials: Vec<Span>,
    /// How plain names are set in LaTeX.
    pub observed: Vec<(String, String)>,
}

/// One operand of a flat list, with what stands before it.
struct Item {
    operator: char,
    /// Whether an odd number of minus signs stands before it.
    negative: bool,
    /// Where the first of them stands; the beginning of the span where there is none.
    lead: usize,
    /// With its brackets.
    span: Span,
    expr: Expr,
    /// Without brackets, and not more than a number.
    bare_number: bool,
}

impl Item {
    /// The integer that is written here without brackets, its sign not counted.
    fn bare_integer(&self) -> Option<&BigInt> {
        match &self.expr.kind {
            ExprKind::Number(value) if self.bare_number && value.is_integer() => Some(value.numer()),
            _ => None,
        }
    }
}

type Items = Peekable<IntoIter<Item>>;

/// A tree with the stretch that it fills, brackets included.
struct Part {
    expr: Expr,
    outer: Span,
}

impl Part {
    fn new(kind: ExprKind, outer: Span) -> Part {
        Part { expr: Expr { kind, span: outer }, outer }
    }

    fn negated(self, outer: Span) -> Part {
        Part::new(ExprKind::Negative(Box::new(self.expr)), outer)
    }
}

impl<'a> Builder<'a> {
    /// A builder for a statement that starts at `offset` of its file.
    pub fn new(offset: usize, lexicon: Option<&'a Lexicon>) -> Builder<'a> {
        Builder { offset, lexicon, ..Builder::default() }
    }

    /// What came of a text in LaTeX, its messages taken down.
    pub fn taken<T>(&mut self, reading: latex::Reading<T>) -> Option<T> {
        reading.mistakes.into_iter().for_each(|mistake| self.report(mistake));
        self.warnings.extend(reading.warnings);
        self.observed.extend(reading.observed);
        reading.content
    }

    /// The formula between `$` signs.
    fn latex(&mut self, part: &Pair<Rule>, span: Span) -> Expr {
        let Some(lexicon) = self.lexicon else { return placeholder(span) };
        let inner = part.as_str().trim_matches('$');
        let reading = latex::formula(inner, span.start + 1, lexicon);
        self.taken(reading).unwrap_or_else(|| placeholder(span))
    }

    /// Takes a mistake down, unless there are more than anyone will read.
    pub fn report(&mut self, mistake: Diagnostic) {
        if !self.is_full() {
            self.mistakes.push(mistake);
        }
    }

    fn is_full(&self) -> bool {
        self.mistakes.len() > MAX_MISTAKES
    }

    /// Where in the file a pair stands.
    pub fn span(&self, pair: &Pair<Rule>) -> Span {
        let span = pair.as_span();
        Span::new(self.offset + span.start(), self.offset + span.end())
    }

    /// The name that a pair is.
    pub fn name(&mut self, pair: &Pair<Rule>) -> Name {
        if pair.as_str().len() > MAX_NAME_BYTES {
            let message =
                format!("this name has {} bytes; a name may have at most {MAX_NAME_BYTES}", pair.as_str().len());
            self.report(Diagnostic::error(self.span(pair), message).remedy("choose a shorter name"));
        }
        Name { text: normal_name(pair.as_str()), span: self.span(pair) }
    }

    /// The formula of an `expression` pair, `depth` levels of nesting inside its statement.
    pub fn expression(&mut self, pair: Pair<Rule>, depth: usize) -> Expr {
        let span = self.span(&pair);
        let items = self.items(pair, depth);
        self.warn_of_roots(&items);
        let mut items = items.into_iter().peekable();
        match self.sum(&mut items) {
            Some(part) => part.expr,
            None => placeholder(span),
        }
    }

    fn items(&mut self, pair: Pair<Rule>, depth: usize) -> Vec<Item> {
        let mut items = Vec::new();
        let (mut operator, mut negative, mut start) = ('+', false, None);
        let mut exponents = 0;
        for part in pair.into_inner() {
            let span = self.span(&part);
            match part.as_rule() {
                Rule::operator => operator = part.as_str().chars().next().unwrap_or('+'),
                Rule::negative => {
                    negative = !negative;
                    start.get_or_insert(span.start);
                }
                _ => {
                    exponents = if operator == '^' { exponents + 1 } else { 0 };
                    if depth + exponents > MAX_NESTING {
                        self.report(nested_powers(span));
                        break;
                    }
                    let bare_number = part.as_rule() == Rule::number;
                    let expr = self.operand(part, span, depth + exponents);
                    let lead = start.take().unwrap_or(span.start);
                    items.push(Item { operator, negative, lead, span, expr, bare_number });
                    negative = false;
                }
            }
        }
        items
    }

    /// `a + b - c`
    fn sum(&mut self, items: &mut Items) -> Option<Part> {
        let mut terms = vec![self.product(items)?];
        while let Some(term) = self.product(items) {
            terms.push(term);
        }
        Some(joined(terms, |terms| ExprKind::Sum(terms.into_iter().map(|part| part.expr).collect())))
    }

    /// `a * b / c`, up to the next `+` or `-`, with the sign before it.
    fn product(&mut self, items: &mut Items) -> Option<Part> {
        let first = items.peek_mut()?;
        let negative = std::mem::take(&mut first.negative) != (first.operator == '-');
        let (lead, start) = (first.lead, first.span.start);
        let mut factors = vec![(self.power(items)?, false)];
        while let Some(next) = items.next_if(|item| matches!(item.operator, '*' | '/')) {
            let (inverted, negative, lead) = (next.operator == '/', next.negative, next.lead);
            let factor = self.power_from(next, items);
            let outer = Span::new(lead, factor.outer.end);
            factors.push((if negative { factor.negated(outer) } else { factor }, inverted));
        }
        let end = factors.last().map_or(start, |(factor, _)| factor.outer.end);
        let product = if factors.len() == 1 {
            factors.pop()?.0
        } else {
            let factors = factors.into_iter().map(|(part, inverted)| Factor { expr: part.expr, inverted });
            Part::new(ExprKind::Product(factors.collect()), Span::new(start, end))
        };
        Some(if negative { product.negated(Span::new(lead, end)) } else { product })
    }

    fn power(&mut self, items: &mut Items) -> Option<Part> {
        let base = items.next()?;
        Some(self.power_from(base, items))
    }

    /// `a ^ b ^ c`, to the right; a minus sign before an exponent belongs to all of it.
    fn power_from(&mut self, base: Item, items: &mut Items) -> Part {
        let mut chain = vec![base];
        while let Some(next) = items.next_if(|item| item.operator == '^') {
            chain.push(next);
        }
        let mut exponent: Option<Part> = None;
        while let Some(item) = chain.pop() {
            let outer = exponent.as_ref().map_or(item.span, |part| item.span.join(part.outer));
            let part = match exponent.take() {
                None => Part { outer, expr: item.expr },
                Some(exponent) => self.raised(item.expr, exponent, outer),
            };
            if chain.is_empty() {
                return part;
            }
            exponent = Some(if item.negative { part.negated(Span::new(item.lead, outer.end)) } else { part });
        }
        Part::new(ExprKind::Pi, Span::default())
    }

    fn raised(&mut self, base: Expr, exponent: Part, outer: Span) -> Part {
        if let ExprKind::Reference(reference) = &base.kind
            && reference.name.text == "e"
            && reference.indices.is_empty()
        {
            self.exponentials.push(reference.span);
        }
        if constant::value(&exponent.expr) == Constant::TooLarge {
            let message = format!("this exponent is beyond the bound of {}", constant::MAX_EXPONENT);
            let remedy = "write a smaller exponent, or a parameter in its place";
            self.report(Diagnostic::error(exponent.outer, message).remedy(remedy));
            return Part::new(ExprKind::Pi, outer);
        }
        Part::new(ExprKind::Power(Box::new(base), Box::new(exponent.expr)), outer)
    }

    fn operand(&mut self, part: Pair<Rule>, span: Span, depth: usize) -> Expr {
        match part.as_rule() {
            Rule::number => Expr { kind: ExprKind::Number(self.number(&part)), span },
            Rule::reference => self.reference(part, span, depth),
            Rule::aggregate => self.aggregate(part, span, depth),
            Rule::formula => self.latex(&part, span),
            _ => self.inside(part, depth),
        }
    }

    /// The formula inside the brackets of a `parenthesis` or a `body`.
    fn inside(&mut self, brackets: Pair<Rule>, depth: usize) -> Expr {
        let span = self.span(&brackets);
        match brackets.into_inner().find(|part| part.as_rule() == Rule::expression) {
            Some(expression) => self.expression(expression, depth + 1),
            None => placeholder(span),
        }
    }

    fn number(&mut self, pair: &Pair<Rule>) -> Rational {
        match decimal(pair.as_str()) {
            Ok(value) => value,
            Err(message) => {
                self.report(Diagnostic::error(self.span(pair), message).remedy("write a parameter in its place"));
                Rational::from_integer(BigInt::ZERO)
            }
        }
    }

    fn reference(&mut self, pair: Pair<Rule>, span: Span, depth: usize) -> Expr {
        let mut parts = pair.into_inner();
        let Some(name) = parts.next().map(|part| self.name(&part)) else { return placeholder(span) };
        let function = Function::from_word(&name.text);
        let kind = match (parts.next(), function) {
            (Some(argument), Some(function)) if argument.as_rule() == Rule::argument => {
                ExprKind::Call(function, Box::new(self.inside(argument, depth)))
            }
            (Some(argument), None) if argument.as_rule() == Rule::argument => {
                if !self.is_full() {
                    self.report(no_function(&name, span));
                }
                self.inside(argument, depth);
                return placeholder(span);
            }
            (_, Some(function)) => {
                let message = format!("`{}` is a function, and its argument stands in parentheses", name.text);
                self.mistakes
                    .push(Diagnostic::error(name.span, message).remedy(format!("write {}(…)", function.word())));
                return placeholder(span);
            }
            (None, None) if name.text == "pi" => ExprKind::Pi,
            (Some(_), None) if name.text == "pi" => {
                self.report(Diagnostic::error(span, "`pi` is a number, and has no indices"));
                return placeholder(span);
            }
            (indices, None) => {
                let indices = indices.map(|part| self.indices(part)).unwrap_or_default();
                ExprKind::Reference(Reference { name, indices, span })
            }
        };
        Expr { kind, span }
    }

    /// What stands between the square brackets of a pair.
    pub fn indices(&mut self, pair: Pair<Rule>) -> Vec<(Index, Span)> {
        let indices = pair.into_inner().filter(|part| part.as_rule() == Rule::index);
        indices.filter_map(|part| self.index(part)).collect()
    }

    /// An index between square brackets.
    pub fn index(&mut self, pair: Pair<Rule>) -> Option<(Index, Span)> {
        let span = self.span(&pair);
        let part = pair.into_inner().next()?;
        if part.as_rule() == Rule::index_name {
            return Some((Index::Name(self.name(&part).text), span));
        }
        match part.as_str().parse() {
            Ok(number) => Some((Index::Number(number), span)),
            Err(_) => {
                self.report(Diagnostic::error(span, "no good has so large a number"));
                None
            }
        }
    }

    fn aggregate(&mut self, pair: Pair<Rule>, span: Span, depth: usize) -> Expr {
        let (mut product, mut body) = (false, placeholder(span));
        let (mut binders, mut excepts, mut groups) = (Vec::new(), Vec::new(), Vec::new());
        for part in pair.into_inner() {
            match part.as_rule() {
                Rule::aggregate_kind => product = part.as_str() == "product",
                Rule::binder => binders.push(self.name(&part)),
                Rule::except => excepts.extend(self.indices(part)),
                Rule::within => groups.extend(part.into_inner().next_back().map(|name| self.name(&name))),
                Rule::body => body = self.inside(part, depth),
                _ => {}
            }
        }
        if let Some((_, again)) = excepts.get(1).or(excepts.first().filter(|_| binders.len() > 1)) {
            let message = "`!=` leaves one good out of a sum over one index";
            let remedy = "write one sum inside the other: sum over j != i of (sum over k of (…))";
            self.report(Diagnostic::error(*again, message).remedy(remedy));
        }
        if let Some(again) = groups.get(1) {
            self.report(Diagnostic::error(again.span, "a sum runs over one group"));
        }
        let except = excepts.into_iter().next();
        let over = Over { product, binders, except, group: groups.into_iter().next(), body };
        Expr { kind: ExprKind::Over(Box::new(over)), span }
    }

    /// Warns of `p^1/2`, which is (p^1)/2: an exponent and a divisor that look like one fraction in lowest terms.
    fn warn_of_roots(&mut self, items: &[Item]) {
        for (at, three) in items.windows(3).enumerate() {
            let [base, exponent, divisor] = three else { continue };
            let next = items.get(at + 3).map_or('+', |item| item.operator);
            if exponent.operator != '^' || divisor.operator != '/' || next == '^' {
                continue;
            }
            let (Some(over), Some(under)) = (exponent.bare_integer(), divisor.bare_integer()) else { continue };
            let signed = divisor.lead < divisor.span.start;
            if !signed && under > &BigInt::from(1) && over.gcd(under) == BigInt::from(1) {
                let over = if exponent.negative { format!("-{over}") } else { over.to_string() };
                let message = format!("the exponent here is {over}, and the power is divided by {under}");
                let remedy = format!("write ^({over}/{under}) for a root, or parentheses around the power");
                let span = base.span.join(divisor.span);
                self.warnings.push(Diagnostic::warning(span, message).remedy(remedy));
            }
        }
    }
}

/// The exact value of an integer or a decimal: `0.1` is 1/10.
///
/// # Errors
/// Says that the number is too long.
pub fn decimal(written: &str) -> Result<Rational, String> {
    let (whole, fraction) = written.split_once('.').unwrap_or((written, ""));
    let digits = whole.len() + fraction.len();
    if digits > MAX_DIGITS {
        return Err(format!("this number has {digits} digits; a number may have at most {MAX_DIGITS}"));
    }
    let numerator = format!("{whole}{fraction}").parse().unwrap_or(BigInt::ZERO);
    let places = u32::try_from(fraction.len()).unwrap_or(0);
    Ok(if places == 0 {
        Rational::from_integer(numerator)
    } else {
        Rational::new(numerator, BigInt::from(10).pow(places))
    })
}

/// One part as it is; more than one as a node.
fn joined(mut parts: Vec<Part>, node: impl FnOnce(Vec<Part>) -> ExprKind) -> Part {
    let outer = parts.iter().map(|part| part.outer).reduce(Span::join).unwrap_or_default();
    match parts.pop() {
        Some(only) if parts.is_empty() => only,
        last => {
            parts.extend(last);
            Part::new(node(parts), outer)
        }
    }
}

fn nested_powers(span: Span) -> Diagnostic {
    let message = format!("powers are nested more than {MAX_NESTING} deep here, which is the bound");
    Diagnostic::error(span, message).remedy("name the inner parts with `let`")
}

/// What stands for a formula that is wrong; it never leaves this floor, since the mistake goes with it.
fn placeholder(span: Span) -> Expr {
    Expr { kind: ExprKind::Pi, span }
}

/// A name before an opening parenthesis that is no function.
fn no_function(name: &Name, span: Span) -> Diagnostic {
    let known: Vec<&str> = Function::WORDS.iter().map(|(word, _)| *word).collect();
    let list = known.join(", ");
    if name.text == "e" {
        return Diagnostic::error(name.span, "there is no function `e`").remedy("the exponential function is exp(…)");
    }
    if let Some(meant) = nearest(&name.text, known.iter().copied()).filter(|_| name.text.len() > 2) {
        let message = format!("there is no function `{}`; the nearest is `{meant}`", name.text);
        return Diagnostic::error(name.span, message).remedy(format!("the functions are {list}"));
    }
    let message = format!("`{}` is no function, and no sign stands between it and the parenthesis", name.text);
    Diagnostic::error(span, message)
        .remedy(format!("write {} * (…) for a product; the functions are {list}", name.text))
}
