//! Letters in a formula: which declared names they are, alone or side by side.

use super::super::diagnostic::Diagnostic;
use super::super::nearest::nearest;
use super::super::syntax::*;
use super::grammar::Rule;
use super::lexicon::Role;
use super::names::{self, joined as below_text};
use super::symbols::{Meaning, Written, meanings};
use super::terms::{Formulas, Item, placeholder};

/// The longest run of letters that is taken apart.
const MAX_RUN: usize = 60;

/// A part of a run of letters.
#[derive(Clone, Debug, PartialEq)]
enum Part {
    /// A declared name.
    Name(Meaning),
    /// The number e under an exponent.
    Exponential,
}

impl Formulas<'_> {
    /// The factors that letters with their scripts are.
    pub fn name(&mut self, item: &Item<'_>, depth: usize) -> Vec<Expr> {
        let span = self.prepared.span(item.start, item.end);
        if item.atom.as_rule() == Rule::letters {
            return self.run(item, span, depth);
        }
        let found = self.meanings(item, names::bases(&item.atom));
        match found.as_slice() {
            [one] => {
                let reference = self.reference(one, item, span);
                vec![self.powered(reference, one.takes_above, item, span, depth)]
            }
            [] => vec![self.constant_or_unknown(item, span, depth)],
            several => {
                let readings = several.iter().map(Meaning::text).collect();
                vec![self.two_meanings(item, span, readings)]
            }
        }
    }

    fn meanings(&self, item: &Item<'_>, bases: Vec<String>) -> Vec<Meaning> {
        let written = Written { bases, below: &item.scripts.below, above: &item.scripts.above };
        meanings(self.lexicon, &written, &self.bound)
    }

    /// π and e, where no name is declared like them.
    fn constant_or_unknown(&mut self, item: &Item<'_>, span: Span, depth: usize) -> Expr {
        let bare = item.scripts.below.is_empty();
        if item.atom.as_rule() == Rule::greek && item.atom.as_str() == "\\pi" && bare {
            return self.raised(Expr { kind: ExprKind::Pi, span }, item, span, depth);
        }
        if item.atom.as_rule() == Rule::named && names::words(&item.atom) == "e" && bare && has_exponent(item) {
            return self.exponential(item, span, depth);
        }
        self.unknown(item, span);
        placeholder(span)
    }

    fn exponential(&mut self, item: &Item<'_>, span: Span, depth: usize) -> Expr {
        let power = self.raised(placeholder(span), item, span, depth);
        match power.kind {
            ExprKind::Power(_, exponent) => Expr { kind: ExprKind::Call(Function::Exp, exponent), span },
            _ => placeholder(span),
        }
    }

    fn reference(&mut self, meaning: &Meaning, item: &Item<'_>, span: Span) -> Expr {
        let place = |(index, (start, end)): &(Index, (usize, usize))| (index.clone(), self.prepared.span(*start, *end));
        let indices = meaning.indices.iter().map(place).collect();
        self.observe(meaning, item);
        let name = Name { text: meaning.name.clone(), span };
        Expr { kind: ExprKind::Reference(Reference { name, indices, span }), span }
    }

    /// Keeps how a plain name is set, exponent left out.
    fn observe(&mut self, meaning: &Meaning, item: &Item<'_>) {
        let declared = self.lexicon.known(&meaning.name).is_some_and(|known| known.plain.is_none() && known.arity == 0);
        if !declared || meaning.takes_above || self.observed.iter().any(|(name, _)| *name == meaning.name) {
            return;
        }
        let mut form = item.atom.as_str().trim().to_string();
        if let (Some(first), Some(last)) = (item.scripts.below.first(), item.scripts.below.last()) {
            form = format!("{form}_{{{}}}", self.words(first.start, last.end));
        }
        self.observed.push((meaning.name.clone(), form));
    }

    fn powered(&mut self, base: Expr, takes_above: bool, item: &Item<'_>, span: Span, depth: usize) -> Expr {
        if takes_above {
            return base;
        }
        if item.scripts.exponent.is_none() && !item.scripts.above.is_empty() {
            let message = format!("no declared name has the mark `{}`", item.scripts.above);
            let written = self.words(item.start, item.end);
            let remedy = format!("declare it with its LaTeX form: parameters NAME as {written}");
            self.report(Diagnostic::error(span, message).remedy(remedy));
        }
        self.raised(base, item, span, depth)
    }

    /// Letters side by side: one name, or several multiplied, as declared.
    fn run(&mut self, item: &Item<'_>, span: Span, depth: usize) -> Vec<Expr> {
        let letters: Vec<(usize, char)> = item.atom.as_str().char_indices().collect();
        let ways = if letters.len() > MAX_RUN { Vec::new() } else { self.ways(item, &letters) };
        let [parts] = ways.as_slice() else {
            if ways.is_empty() {
                self.unknown(item, span);
                return vec![placeholder(span)];
            }
            let spell = |parts: &Vec<(usize, Part)>| {
                let part = |(_, part): &(usize, Part)| match part {
                    Part::Name(meaning) => meaning.text(),
                    Part::Exponential => "exp(…)".to_string(),
                };
                parts.iter().map(part).collect::<Vec<_>>().join("*")
            };
            return vec![self.two_meanings(item, span, ways.iter().map(spell).collect())];
        };
        let mut factors = Vec::new();
        let last = parts.len().saturating_sub(1);
        for (place, (start, part)) in parts.iter().enumerate() {
            let end = parts.get(place + 1).map_or(item.end, |(next, _)| item.start + next);
            let own = self.prepared.span(item.start + start, end);
            let expr = match part {
                Part::Exponential => self.exponential(item, own, depth),
                Part::Name(meaning) if place < last => {
                    let name = Name { text: meaning.name.clone(), span: own };
                    Expr { kind: ExprKind::Reference(Reference { name, indices: Vec::new(), span: own }), span: own }
                }
                Part::Name(meaning) => {
                    let bare = self.reference(meaning, item, own);
                    self.powered(bare, meaning.takes_above, item, own, depth)
                }
            };
            factors.push(expr);
        }
        factors
    }

    /// The ways to take a run of letters apart into declared names, at most two.
    fn ways(&self, item: &Item<'_>, letters: &[(usize, char)]) -> Vec<Vec<(usize, Part)>> {
        let count = letters.len();
        let mut from: Vec<Vec<Vec<(usize, Part)>>> = vec![Vec::new(); count + 1];
        from[count].push(Vec::new());
        for start in (0..count).rev() {
            let mut found = Vec::new();
            for end in (start + 1..=count).rev() {
                if from[end].is_empty() {
                    continue;
                }
                let word: String = letters[start..end]
                    .iter()
                    .map(|(_, l)| super::super::letters::normal_name(&l.to_string()))
                    .collect();
                for part in self.parts(item, &word, end == count) {
                    for rest in &from[end] {
                        let mut way = vec![(letters[start].0, part.clone())];
                        way.extend(rest.iter().cloned());
                        found.push(way);
                    }
                }
                found.truncate(2);
            }
            from[start] = found;
        }
        from.swap_remove(0)
    }

    /// What a word in a run may be; the scripts belong to the last.
    fn parts(&self, item: &Item<'_>, word: &str, is_last: bool) -> Vec<Part> {
        let written = match is_last {
            true => Written { bases: vec![word.to_string()], below: &item.scripts.below, above: &item.scripts.above },
            false => Written { bases: vec![word.to_string()], below: &[], above: "" },
        };
        let found: Vec<Part> = meanings(self.lexicon, &written, &self.bound).into_iter().map(Part::Name).collect();
        let is_e = word == "e" && is_last && item.scripts.below.is_empty() && has_exponent(item);
        if found.is_empty() && is_e { vec![Part::Exponential] } else { found }
    }

    fn two_meanings(&mut self, item: &Item<'_>, span: Span, readings: Vec<String>) -> Expr {
        let written = self.words(item.start, item.end);
        let readings = readings.iter().map(|reading| format!("`{reading}`")).collect::<Vec<_>>().join(" or as ");
        let message = format!("`{written}` can be read as {readings}");
        let remedy = "set commas between indices and spaces between factors, or rename one of the names";
        self.report(Diagnostic::error(span, message).remedy(remedy));
        placeholder(span)
    }

    fn unknown(&mut self, item: &Item<'_>, span: Span) {
        if self.lexicon.incomplete {
            // the mistake in the declarations is reported, and the file refused
            return;
        }
        let diagnostic = self.unknown_name(item, span);
        self.report(diagnostic);
    }

    fn unknown_name(&self, item: &Item<'_>, span: Span) -> Diagnostic {
        let base = names::bases(&item.atom).into_iter().next().unwrap_or_default();
        let below = below_text(&item.scripts.below);
        let start = item.atom.as_span().start();
        let written = self.words(start, item.scripts.below.last().map_or(item.atom.as_span().end(), |last| last.end));
        let written = if written.matches('{').count() > written.matches('}').count() { written + "}" } else { written };
        if ["ln", "log", "exp", "sqrt", "sum", "prod", "frac"].contains(&base.as_str()) {
            let message = format!("`{base}` is letters here, and they are multiplied");
            return Diagnostic::error(span, message).remedy(format!("write \\{base}"));
        }
        if base == "e" && below.is_empty() {
            let message = "`e` is not declared; the exponential function is written `e^{…}` or `\\exp(…)`";
            return Diagnostic::error(span, message).remedy("declare it, or write \\exp(…)");
        }
        let message = format!("there is no name `{written}`");
        let same = self.lexicon.names.iter().filter(|known| known.key.base == base);
        if let Some(known) = same.clone().find(|known| known.arity > 0) {
            let remedy = match known.arity {
                1 => format!("`{}` has one index, as in {}_{{i}}", known.name, item.atom.as_str()),
                more => format!("`{}` has {more} indices, as in {}_{{ij}}", known.name, item.atom.as_str()),
            };
            return Diagnostic::error(span, message).remedy(remedy);
        }
        let plain = if below.is_empty() { base.clone() } else { format!("{base}_{below}") };
        if let Some(near) = nearest(&plain, self.lexicon.spelled()) {
            return Diagnostic::error(span, message).remedy(format!("did you mean `{near}`?"));
        }
        let letters = base.chars().count();
        if letters > 1 && item.atom.as_rule() == Rule::letters && self.lexicon.known(&plain).is_none() {
            let remedy = format!("declare each letter, or the whole as one name: parameters {plain}");
            return Diagnostic::error(span, message).remedy(remedy);
        }
        Diagnostic::error(span, message).remedy(format!("declare it: parameters {}", declaration(&base, item)))
    }

    /// Whether what stands in brackets belongs to the name in front of it.
    pub fn applies(&mut self, name: &Item<'_>, brackets: &Item<'_>) -> bool {
        if brackets.atom.as_rule() != Rule::parenthesis || has_exponent(name) || name.applied {
            return false;
        }
        let found = self.meanings(name, names::bases(&name.atom));
        let Some(known) = found.first().and_then(|one| self.lexicon.known(&one.name)) else { return false };
        let arguments = brackets.atom.as_str();
        match (&known.arguments, known.role) {
            (Some(declared), _) => {
                if bare_arguments(arguments) != *declared {
                    let message = format!("`{}` was defined with the arguments {declared}", known.name);
                    let span = self.prepared.span(brackets.start, brackets.end);
                    let remedy = format!("write {declared} behind it, or a sign of multiplication: \\cdot");
                    self.report(Diagnostic::error(span, message).remedy(remedy));
                }
                true
            }
            (None, Role::Quantity(_)) => arguments.contains(','),
            _ => false,
        }
    }
}

/// The arguments of a function as text, alphabets and sizes left out.
pub fn bare_arguments(text: &str) -> String {
    let mut out = text.to_string();
    let marks = ["\\mathbf", "\\boldsymbol", "\\bm", "\\left", "\\right", "\\bigl", "\\bigr", "\\big", "\\,", "\\;"];
    for mark in marks {
        out = out.replace(mark, "");
    }
    out.retain(|letter| !letter.is_whitespace() && !matches!(letter, '{' | '}' | '~'));
    out
}

fn has_exponent(item: &Item<'_>) -> bool {
    item.scripts.exponent.is_some()
}

/// How a name that is not declared could be.
fn declaration(base: &str, item: &Item<'_>) -> String {
    let below = &item.scripts.below;
    let letters = below.iter().filter(|token| token.text != ",");
    let is_indexed = !below.is_empty() && letters.clone().all(|token| token.text.chars().count() == 1);
    match is_indexed {
        true => {
            let indices = ["i", "j", "k", "l"].iter().take(letters.count()).copied().collect::<Vec<_>>().join(",");
            format!("{base}[{indices}]")
        }
        false if below.is_empty() => base.to_string(),
        false => format!("{base}_{}", below_text(below)),
    }
}
