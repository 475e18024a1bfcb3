//! How far functions and slashes reach where no brackets say so.

use super::super::diagnostic::Diagnostic;
use super::super::syntax::*;
use super::super::wording::wording;
use super::grammar::Rule;
use super::names;
use super::terms::{Formulas, Item, Joint, joined, placeholder};

impl Formulas<'_> {
    /// Refuses `a/b c`, and a number behind a factor.
    pub fn refuse_two_readings(&mut self, items: &[Item<'_>]) {
        for pair in items.windows(2) {
            let [before, item] = pair else { continue };
            if item.joint != Joint::Beside || before.reaches_on(self.lexicon) {
                continue;
            }
            if item.atom.as_rule() == Rule::number {
                self.number_behind(before, item);
            }
        }
        for (place, three) in items.windows(3).enumerate() {
            let [above, below, behind] = three else { continue };
            let slash = below.joint == Joint::Over && behind.joint == Joint::Beside && !below.reaches_on(self.lexicon);
            let numbers = [above, below].iter().all(|item| item.atom.as_rule() == Rule::number);
            if !slash || numbers && (place == 0 || items[place].joint != Joint::Over) && below.end < behind.start {
                continue;
            }
            let text = |item: &Item<'_>| self.words(item.start, item.end);
            let (above, last, right) = (text(above), text(below), text(behind));
            let message = format!("this can be read as `({above}/{last}) {right}` or as `{above}/({last} {right})`");
            let span = self.prepared.span(three[0].start, behind.end);
            let remedy = "set brackets around what is divided by, or write \\frac{…}{…}";
            self.report(Diagnostic::error(span, message).remedy(remedy));
        }
    }

    fn number_behind(&mut self, before: &Item<'_>, item: &Item<'_>) {
        let (left, number) = (self.words(before.start, before.end), self.words(item.start, item.end));
        let span = self.prepared.span(before.start, item.end);
        let adjacent = before.end == item.start;
        let script = adjacent && left.ends_with(|letter: char| letter.is_ascii_alphanumeric());
        let (message, remedy) = match left.rfind(['_', '^']).filter(|_| script) {
            Some(at) => {
                let braced = format!("{}{{{}{number}}}", &left[..=at], &left[at + 1..]);
                let message = format!("`{left}{number}` can be read as `{braced}` or as `{left} \\cdot {number}`");
                (message, format!("write {braced}"))
            }
            None => (
                format!("the number {number} stands behind `{left}` without a sign"),
                format!("write {left}_{number}, {left}^{number} or {left} \\cdot {number}"),
            ),
        };
        self.report(Diagnostic::error(span, message).remedy(remedy));
    }

    /// A function with its argument, and how many items it takes.
    pub fn call(&mut self, function: Function, items: &[Item<'_>], depth: usize) -> (Expr, usize) {
        let Some((head, rest)) = items.split_first() else { return (placeholder(Span::default()), 0) };
        let word = self.words(head.atom.as_span().start(), head.atom.as_span().end());
        let here = self.prepared.span(head.start, head.end);
        self.refuse_scripts(head, &word);
        let Some(first) = rest.first().filter(|item| item.joint == Joint::Beside) else {
            let message = format!("`{word}` stands without an argument");
            self.report(Diagnostic::error(here, message).remedy(format!("write {word}(…)")));
            return (placeholder(here), 1);
        };
        let (argument, taken) = match first.atom.as_rule() {
            Rule::parenthesis => self.bracketed(function, &word, rest, depth),
            _ => self.without_brackets(function, head, rest, depth),
        };
        let end = rest.get(taken.saturating_sub(1)).map_or(head.end, |item| item.end);
        let span = self.prepared.span(head.start, end);
        let call = match argument {
            Ok(argument) => Expr { kind: ExprKind::Call(function, Box::new(argument)), span },
            Err(whole) => whole,
        };
        let raised = self.raised(call, head, span, depth);
        // `\ln(x)^2`: the exponent stands behind the brackets
        match rest.first().filter(|item| item.atom.as_rule() == Rule::parenthesis && item.scripts.exponent.is_some()) {
            Some(item) => {
                let power = self.raised(raised, item, span, depth);
                self.tell(head.start, item.end, &power, &format!("write ({word}(…))^… or {word}\\bigl((…)^…\\bigr)"));
                (power, taken + 1)
            }
            None => (raised, taken + 1),
        }
    }

    /// Refuses `\log_{10}` and `\ln^{-1}`.
    fn refuse_scripts(&mut self, head: &Item<'_>, word: &str) {
        let span = self.prepared.span(head.start, head.end);
        if !head.scripts.below.is_empty() {
            let message = format!("`{word}` is the natural logarithm here, and has no base");
            let remedy = "write \\frac{\\ln x}{\\ln 10} for the logarithm to the base 10";
            self.report(Diagnostic::error(span, message).remedy(remedy));
        }
        if head.scripts.above.starts_with('-') {
            let message =
                format!("`{word}^{{{0}}}` can be read as a power or as the inverse function", head.scripts.above);
            let remedy = format!("write ({word}(x))^{{{}}} for the power", head.scripts.above);
            self.report(Diagnostic::error(span, message).remedy(remedy));
        }
    }

    /// `\ln(x)`: the brackets are the argument.
    fn bracketed(
        &mut self,
        function: Function,
        word: &str,
        rest: &[Item<'_>],
        depth: usize,
    ) -> (Result<Expr, Expr>, usize) {
        let Some(first) = rest.first() else { return (Err(placeholder(Span::default())), 0) };
        let bare = Item { scripts: names::Scripts::default(), ..first.clone() };
        let argument = joined_of(self.factor(&bare, depth + 1));
        if let Some(next) = rest.get(1).filter(|next| next.joint == Joint::Beside)
            && next.atom.as_rule() == Rule::parenthesis
            && first.scripts.exponent.is_none()
        {
            let (inner, outer) = (self.words(first.start, first.end), self.words(next.start, next.end));
            let call = Expr { kind: ExprKind::Call(function, Box::new(argument.clone())), span: argument.span };
            let message = format!("`{word}{inner}{outer}` is read as `{}` times `{outer}`", wording(&call));
            let span = self.prepared.span(first.start, next.end);
            let remedy = format!("write {word}{inner} \\cdot {outer}, or brackets around the whole argument");
            self.warnings.push(Diagnostic::warning(span, message).remedy(remedy));
        }
        (Ok(argument), 1)
    }

    /// `\ln x y`: the product that follows, up to a sign, a slash or the next function.
    fn without_brackets(
        &mut self,
        function: Function,
        head: &Item<'_>,
        rest: &[Item<'_>],
        depth: usize,
    ) -> (Result<Expr, Expr>, usize) {
        if let Some(name) = self.logarithm_as_name(function, rest) {
            return (Err(name), 1);
        }
        let first_reaches = rest.first().is_some_and(|item| item.reaches_on(self.lexicon));
        if first_reaches {
            let nested = rest.first().is_some_and(|item| item.function(self.lexicon).is_some());
            let mut factors = Vec::new();
            let taken = if nested { self.nested(rest, &mut factors, depth) } else { rest.len() };
            if !nested {
                factors = self.product(rest, depth + 1);
            }
            let argument = joined(factors, self.stretch(rest, taken));
            if !nested {
                self.tell_call(function, head, &argument, rest, taken);
            }
            return (Ok(argument), taken);
        }
        let mut taken = 1;
        while let Some(item) = rest.get(taken) {
            if item.joint != Joint::Beside || item.reaches_on(self.lexicon) {
                break;
            }
            taken += 1;
        }
        self.refuse_what_follows(head, rest, taken);
        let factors = self.product(&rest[..taken], depth + 1);
        let simple = factors.len() == 1 && taken == 1 && rest[0].scripts.exponent.is_none();
        let argument = joined(factors, self.stretch(rest, taken));
        if !simple {
            self.tell_call(function, head, &argument, rest, taken);
        }
        (Ok(argument), taken)
    }

    fn nested(&mut self, rest: &[Item<'_>], factors: &mut Vec<Factor>, depth: usize) -> usize {
        let Some(inner) = rest.first().and_then(|item| item.function(self.lexicon)) else { return 0 };
        if depth > super::super::brackets::MAX_NESTING {
            let span = self.stretch(rest, 1);
            self.report(Diagnostic::error(span, "functions are nested too deep here").remedy("use `let`"));
            return rest.len();
        }
        let (expr, taken) = self.call(inner, rest, depth + 1);
        factors.push(Factor { expr, inverted: false });
        taken
    }

    /// The declared name `lnP`, where `\ln P` stands and no P is declared.
    fn logarithm_as_name(&mut self, function: Function, rest: &[Item<'_>]) -> Option<Expr> {
        let item = rest.first().filter(|item| function == Function::Ln && item.scripts.exponent.is_none())?;
        let base = names::bases(&item.atom).into_iter().next()?;
        if self.lexicon.names.iter().any(|known| known.key.base == base) {
            return None;
        }
        let below = names::joined(&item.scripts.below);
        let is_it = |name: &str| {
            let key = names::key_of_name(name);
            key.below == below && (key.base == format!("ln{base}") || key.base == format!("log{base}"))
        };
        let known = self.lexicon.names.iter().find(|known| known.arity == 0 && is_it(&known.name))?;
        let span = self.prepared.span(item.start, item.end);
        let name = Name { text: known.name.clone(), span };
        Some(Expr { kind: ExprKind::Reference(Reference { name, indices: Vec::new(), span }), span })
    }

    /// Refuses what follows an argument without brackets and might belong to it.
    fn refuse_what_follows(&mut self, head: &Item<'_>, rest: &[Item<'_>], taken: usize) {
        let word = self.words(head.start, head.end);
        let inner = rest[..taken].iter().skip(1).find(|item| item.atom.as_rule() == Rule::parenthesis);
        let next = rest.get(taken).filter(|item| item.joint != Joint::Beside && !item.reaches_on(self.lexicon));
        let Some(doubtful) = inner.or(next) else { return };
        let sign = match doubtful.joint {
            Joint::Beside => " ",
            Joint::Times => " \\cdot ",
            Joint::Over => "/",
        };
        let before =
            rest.iter().take_while(|item| item.start < doubtful.start).last().map_or(head.end, |item| item.end);
        let first = rest.first().map_or(head.end, |item| item.start);
        let (argument, tail) = (self.words(first, before), self.words(doubtful.start, doubtful.end));
        let message =
            format!("this can be read as `{word}({argument}){sign}{tail}` or as `{word}({argument}{sign}{tail})`");
        let span = self.prepared.span(head.start, doubtful.end);
        self.report(Diagnostic::error(span, message).remedy("set brackets around the argument"));
    }

    fn tell_call(&mut self, function: Function, head: &Item<'_>, argument: &Expr, rest: &[Item<'_>], taken: usize) {
        let end = rest.get(taken.saturating_sub(1)).map_or(head.end, |item| item.end);
        let call = Expr { kind: ExprKind::Call(function, Box::new(argument.clone())), span: argument.span };
        let word = self.words(head.atom.as_span().start(), head.atom.as_span().end());
        let inner = rest.first().map_or(String::new(), |first| self.words(first.start, end));
        self.tell(head.start, end, &call, &format!("write {word}({inner}) if so, and brackets elsewhere if not"));
    }

    /// Prints back how something was read that has no brackets.
    fn tell(&mut self, start: usize, end: usize, reading: &Expr, remedy: &str) {
        let message = format!("`{}` is read as `{}`", self.words(start, end), wording(reading));
        self.warnings.push(Diagnostic::warning(self.prepared.span(start, end), message).remedy(remedy));
    }

    fn stretch(&self, items: &[Item<'_>], taken: usize) -> Span {
        let start = items.first().map_or(0, |item| item.start);
        self.prepared.span(start, items.get(taken.saturating_sub(1)).map_or(start, |item| item.end))
    }
}

fn joined_of(mut factors: Vec<Expr>) -> Expr {
    match factors.len() {
        1 => factors.swap_remove(0),
        _ => {
            let span = factors.iter().map(|part| part.span).reduce(Span::join).unwrap_or_default();
            joined(factors.into_iter().map(|expr| Factor { expr, inverted: false }).collect(), span)
        }
    }
}
