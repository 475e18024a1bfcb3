//! From the pairs of the grammar to the statements of the syntax tree.

use pest::iterators::Pair;

use super::diagnostic::Diagnostic;
use super::expression::Builder;
use super::grammar::Rule;
use super::latex;
use super::latex_form::latex_form;
use super::letters::leading_word;
use super::syntax::*;

/// The statement that a pair of the grammar is; what is wrong with it goes to the builder.
pub fn statement(pair: Pair<Rule>, builder: &mut Builder) -> Option<Statement> {
    Reader { builder }.statement(pair)
}

struct Reader<'a, 'b> {
    builder: &'a mut Builder<'b>,
}

impl Reader<'_, '_> {
    fn statement(&mut self, pair: Pair<Rule>) -> Option<Statement> {
        let rule = pair.as_rule();
        let whole = self.builder.span(&pair);
        let mut parts =
            pair.into_inner().filter(|part| !matches!(part.as_rule(), Rule::EOI | Rule::comma | Rule::equals));
        Some(match rule {
            Rule::title => Statement::Title(parts.next()?.as_str().trim_matches('"').trim().to_string()),
            Rule::goods => Statement::Goods(self.goods(parts.collect())?),
            Rule::group => {
                let name = self.builder.name(&parts.next()?);
                Statement::Group { name, members: parts.flat_map(|part| self.members(part)).collect() }
            }
            Rule::prices => Statement::Prices(self.declarations(parts)),
            Rule::quantities => Statement::Quantities(self.declarations(parts)),
            Rule::parameters => Statement::Parameters(self.declarations(parts)),
            Rule::income => Statement::Income(self.single(parts.next()?)?),
            Rule::utility => Statement::Utility(self.single(parts.next()?)?),
            Rule::others => Statement::Others(self.others(parts)),
            Rule::assume => Statement::Assume(parts.flat_map(|part| self.assumed(part)).collect()),
            Rule::claim => Statement::Claim(self.claim(parts)?),
            Rule::given => {
                let kind = preferences(parts.next()?.as_str());
                Statement::Given { kind, value: self.builder.expression(parts.next()?, 0) }
            }
            Rule::inverse => {
                let target = self.target(parts.next()?)?;
                Statement::Inverse { target, value: self.builder.expression(parts.next()?, 0) }
            }
            Rule::abbreviation => {
                let name = self.declared(parts.next()?)?;
                Statement::Let { name, value: self.builder.expression(parts.next()?, 0) }
            }
            Rule::demand => {
                let form = form(parts.next()?.as_str());
                let target = self.target(parts.next()?)?;
                Statement::Demand(Equation { form, target, value: self.builder.expression(parts.next()?, 0) })
            }
            Rule::rest => Statement::Rest(self.target(parts.next()?)?),
            _ => {
                self.builder.report(Diagnostic::error(whole, "this is not a statement"));
                return None;
            }
        })
    }

    fn goods(&mut self, parts: Vec<Pair<Rule>>) -> Option<Goods> {
        let Some(range) = parts.first().filter(|part| part.as_rule() == Rule::range) else {
            return Some(Goods::Named(parts.iter().map(|part| self.builder.name(part)).collect()));
        };
        let span = self.builder.span(range);
        let numbers: Vec<u32> = self.range_ends(range.clone())?;
        match numbers[..] {
            [1, last] if last >= 1 => Some(Goods::Numbered { last, span }),
            [1, _] => self.refuse(span, "this range is empty", "write goods 1..4 for four goods"),
            _ => self.refuse(span, "numbered goods begin with 1", "write goods 1..4 for four goods"),
        }
    }

    /// The numbers of a range, within the bound.
    fn range_ends(&mut self, range: Pair<Rule>) -> Option<Vec<u32>> {
        let ends: Vec<_> = range.into_inner().filter(|part| part.as_rule() == Rule::good_number).collect();
        let numbers: Vec<u32> = ends.iter().filter_map(|part| part.as_str().parse().ok()).collect();
        if numbers.len() == ends.len() && numbers.iter().all(|number| *number <= MAX_GOODS) {
            return Some(numbers);
        }
        let span = ends.last().map(|part| self.builder.span(part)).unwrap_or_default();
        self.refuse(span, &format!("a model may have at most {MAX_GOODS} goods"), "take a smaller number")
    }

    /// A good of a group, or the goods of a range.
    fn members(&mut self, member: Pair<Rule>) -> Vec<(Index, Span)> {
        let span = self.builder.span(&member);
        let named = member.clone().into_inner().find(|part| part.as_rule() == Rule::good);
        if let Some(good) = named {
            return vec![(Index::Name(self.builder.name(&good).text), span)];
        }
        match self.range_ends(member).as_deref() {
            Some([one]) => vec![(Index::Number(*one), span)],
            Some([first, last]) if first <= last => (*first..=*last).map(|good| (Index::Number(good), span)).collect(),
            Some(_) => self.refuse(span, "this range is empty", "write the smaller number first").unwrap_or_default(),
            None => Vec::new(),
        }
    }

    fn others<'a>(&mut self, parts: impl Iterator<Item = Pair<'a, Rule>>) -> Others {
        let prices: Vec<Declared> = parts.filter_map(|part| self.single(part)).collect();
        match &prices[..] {
            [one] if one.name.text == "deflated" && one.latex.is_none() => Others::Deflated,
            _ => Others::Prices(prices),
        }
    }

    fn declarations<'a>(&mut self, parts: impl Iterator<Item = Pair<'a, Rule>>) -> Vec<Declared> {
        parts.filter_map(|part| self.declared(part)).collect()
    }

    /// A declaration that cannot have indices.
    fn single(&mut self, pair: Pair<Rule>) -> Option<Declared> {
        let declared = self.declared(pair)?;
        if declared.indices.is_empty() {
            return Some(declared);
        }
        let message = format!("`{}` is one number here, and has no indices", declared.name.text);
        self.refuse(declared.span, &message, &format!("write {}", declared.name.text))
    }

    fn declared(&mut self, pair: Pair<Rule>) -> Option<Declared> {
        let span = self.builder.span(&pair);
        let mut parts = pair.into_inner();
        let name = self.builder.name(&parts.next()?);
        let (mut indices, mut latex): (Vec<Name>, _) = (Vec::new(), None);
        for part in parts {
            if part.as_rule() == Rule::declared_indices {
                let names = part.into_inner().filter(|part| part.as_rule() == Rule::index_name);
                indices.extend(names.map(|part| self.builder.name(&part)));
            } else {
                let form = part.into_inner().find(|part| part.as_rule() == Rule::latex);
                latex = form.and_then(|form| self.latex(&form));
            }
        }
        if Function::from_word(&name.text).is_some() || name.text == "pi" {
            let what = if name.text == "pi" { "the number π" } else { "a function of the language" };
            let message = format!("`{}` is {what}, and cannot be declared", name.text);
            return self.refuse(name.span, &message, "choose another name");
        }
        let again =
            indices.iter().enumerate().find(|(at, index)| indices[..*at].iter().any(|one| one.text == index.text));
        if let Some((_, again)) = again {
            let message = format!("the index `{}` stands here twice", again.text);
            return self.refuse(again.span, &message, "name each index differently, as in g[i,j]");
        }
        Some(Declared { name, indices, latex, span })
    }

    fn latex(&mut self, form: &Pair<Rule>) -> Option<String> {
        match latex_form(form.as_str()) {
            Ok(latex) => Some(latex),
            Err(message) => {
                let start = self.builder.span(form).start;
                let span = Span::new(start, start + form.as_str().trim_end().len());
                self.refuse(
                    span,
                    &message,
                    "write letters, Greek letters, accents, sub- and superscripts, as in `s as \\sigma`",
                )
            }
        }
    }

    /// A relation, or those in LaTeX.
    fn assumed(&mut self, pair: Pair<Rule>) -> Vec<Relation> {
        if pair.as_rule() == Rule::relation {
            return self.relation(pair).into_iter().collect();
        }
        let Some(lexicon) = self.builder.lexicon else { return Vec::new() };
        let start = self.builder.span(&pair).start + 1;
        let reading = latex::relations(pair.as_str().trim_matches('$'), start, lexicon);
        self.builder.taken(reading).unwrap_or_default()
    }

    fn relation(&mut self, pair: Pair<Rule>) -> Option<Relation> {
        let span = self.builder.span(&pair);
        let mut parts = pair.into_inner();
        let first = self.builder.expression(parts.next()?, 0);
        let mut rest = Vec::new();
        while let (Some(sign), Some(side)) = (parts.next(), parts.next()) {
            rest.push((comparison(sign.as_str()), self.builder.expression(side, 0)));
        }
        Some(Relation { first, rest, span })
    }

    fn claim<'a>(&mut self, mut parts: impl Iterator<Item = Pair<'a, Rule>>) -> Option<Claim> {
        let first = parts.next()?;
        if first.as_rule() == Rule::relation {
            return Some(Claim::Relation(self.relation(first)?));
        }
        if first.as_rule() == Rule::separable {
            let span = self.builder.span(&first);
            let group = first.into_inner().find(|part| part.as_rule() == Rule::group_name)?;
            return Some(Claim::Separable { group: self.builder.name(&group), span });
        }
        let start = self.builder.span(&first);
        if first.as_rule() == Rule::under {
            return self.under(first);
        }
        let function = self.claimed(first)?;
        let value = self.builder.expression(parts.next()?, 0);
        let span = start.join(value.span);
        Some(Claim::Function { function, value, span })
    }

    fn under(&mut self, pair: Pair<Rule>) -> Option<Claim> {
        let span = self.builder.span(&pair);
        let mut parts = pair.into_inner();
        let condition = match parts.next()?.as_str() {
            "homogeneity" => Property::Homogeneity,
            "adding-up" => Property::AddingUp,
            "symmetry" => Property::Symmetry,
            _ => Property::Curvature,
        };
        let link = match leading_word(parts.next()?.as_str()) {
            "iff" => Link::Iff,
            "if" => Link::If,
            _ => Link::OnlyIf,
        };
        let relations = parts.filter(|part| matches!(part.as_rule(), Rule::relation | Rule::formula));
        let relations = relations.flat_map(|part| self.assumed(part)).collect();
        Some(Claim::Under { condition, link, relations, span })
    }

    fn claimed(&mut self, pair: Pair<Rule>) -> Option<Claimed> {
        let mut parts = pair.into_inner();
        let head = parts.next()?;
        if head.as_rule() == Rule::preferences {
            return Some(Claimed::Preferences(preferences(head.as_str())));
        }
        let tail = parts.next()?;
        if head.as_rule() == Rule::claimed_of_good {
            let target = self.target(tail)?;
            return Some(match leading_word(head.as_str()) {
                "hicksian" => Claimed::Hicksian(target),
                "inverse" => Claimed::Inverse(target),
                _ => Claimed::Demand(form(head.as_str()), target),
            });
        }
        let mut of = tail.into_inner().filter(|part| matches!(part.as_rule(), Rule::index | Rule::mover));
        let good = self.builder.index(of.next()?)?;
        let mover = self.mover(of.next()?)?;
        Some(match leading_word(head.as_str()) {
            "slutsky" => Claimed::Slutsky(good, mover),
            "compensated" => Claimed::CompensatedElasticity(good, mover),
            _ => Claimed::Elasticity(good, mover),
        })
    }

    fn mover(&mut self, pair: Pair<Rule>) -> Option<Mover> {
        let span = self.builder.span(&pair);
        let mut parts = pair.into_inner();
        let head = parts.next()?;
        if head.as_rule() == Rule::good_number {
            return match head.as_str().parse() {
                Ok(number) => Some(Mover::Number(number, span)),
                Err(_) => self.refuse(span, "this number is too large", "write the number of a good"),
            };
        }
        let name = self.builder.name(&head);
        let indices = parts.next().map(|part| self.builder.indices(part)).unwrap_or_default();
        Some(Mover::Named(Reference { name, indices, span }))
    }

    fn target(&mut self, pair: Pair<Rule>) -> Option<Target> {
        let part = pair.into_inner().next()?;
        if part.as_rule() == Rule::good {
            return Some(Target::Good(self.builder.name(&part)));
        }
        let (index, span) = self.builder.indices(part).into_iter().next()?;
        Some(Target::Indexed(index, span))
    }

    fn refuse<T>(&mut self, span: Span, message: &str, remedy: &str) -> Option<T> {
        self.builder.report(Diagnostic::error(span, message).remedy(remedy));
        None
    }
}

/// The most goods that a model may have.
const MAX_GOODS: u32 = 1000;

fn form(words: &str) -> Form {
    match leading_word(words) {
        "share" => Form::Share,
        "outlay" => Form::Outlay,
        "log" => Form::LogDemand,
        _ => Form::Demand,
    }
}

fn preferences(words: &str) -> Preferences {
    match leading_word(words) {
        "utility" => Preferences::Utility,
        "indirect" => Preferences::IndirectUtility,
        _ => Preferences::Expenditure,
    }
}

fn comparison(sign: &str) -> Comparison {
    match sign {
        "!=" => Comparison::NotEqual,
        "<" => Comparison::Less,
        "<=" => Comparison::LessEqual,
        ">" => Comparison::Greater,
        ">=" => Comparison::GreaterEqual,
        _ => Comparison::Equal,
    }
}
