//! How demands respond to income and prices: the signs that are known, and the elasticities.

use crate::algebra::generator::Element;
use crate::render::document::{Block, Equation, Matrix, Table};
use crate::render::expression::{Expression, Mark, Object};
use crate::render::formula_text::plain_expression;
use crate::render::notation::Notation;
use crate::render::report::derivation::{heading, paragraph};
use crate::render::report::words::{enumerated, text};
use crate::render::report::working::sum;
use crate::structure::elasticities::{Elasticities, Elasticity, Form};
use crate::structure::{AllResponses, Response, Responses, Tendency};

/// The most goods for which matrices are written out.
const MOST_GOODS: usize = 5;
/// The longest elasticity that is written out, in characters.
const LONGEST: usize = 400;
/// How many forms of an elasticity are written out to find the shortest.
const MOST_FORMS: usize = 2;
/// Longer elements are not looked at for a shorter form.
const SHORT: usize = 10;
/// The most pairs that are named one by one.
const MOST_PAIRS: usize = 12;

/// The sections on signs and on elasticities; empty where nothing is known.
pub fn sections(notation: &Notation<'_>, all: &AllResponses) -> Vec<Block> {
    let signs: Vec<Block> = goods(notation, &all.goods).into_iter().chain(pairs(notation, all)).collect();
    let mut blocks = Vec::new();
    if !signs.is_empty() {
        blocks.push(heading("Signs of the responses"));
        blocks.push(paragraph("Wherever all quantities are positive,"));
        blocks.extend(signs);
    }
    blocks.extend(elasticities(notation, &all.elasticities));
    blocks
}

/// A table of the goods, with the columns in which anything is known.
fn goods(notation: &Notation<'_>, all: &[Responses]) -> Option<Block> {
    type Column = (&'static str, fn(&Responses) -> &Response, [&'static str; 5]);
    let columns: [Column; 3] = [
        ("income", |r| &r.income, ["normal", "not inferior", "no income effect", "not normal", "inferior"]),
        ("share", |r| &r.share, ["luxury", "not a necessity", "constant share", "not a luxury", "necessity"]),
        ("own price", |r| &r.own_price, ["Giffen", "not ordinary", "no effect", "not Giffen", "ordinary"]),
    ];
    let word = |response: &Response, words: &[&'static str; 5]| match response.tendency {
        Some(Tendency::Positive) => Some(words[0]),
        Some(Tendency::NonNegative) => Some(words[1]),
        Some(Tendency::Zero) => Some(words[2]),
        Some(Tendency::NonPositive) => Some(words[3]),
        Some(Tendency::Negative) => Some(words[4]),
        Some(Tendency::Varies) | None => None,
    };
    let known: Vec<&Column> =
        columns.iter().filter(|(_, of, words)| all.iter().any(|r| word(of(r), words).is_some())).collect();
    if known.is_empty() {
        return None;
    }
    let head = std::iter::once("good").chain(known.iter().map(|(name, _, _)| *name));
    let row = |(good, responses): (usize, &Responses)| {
        let cells = known.iter().map(|(_, of, words)| match word(of(responses), words) {
            Some(word) => word,
            None if of(responses).tendency == Some(Tendency::Varies) => "either sign",
            None => "",
        });
        std::iter::once(vec![text(notation.good(good))]).chain(cells.map(|cell| vec![text(cell)])).collect()
    };
    Some(Block::Table(Table {
        columns: head.map(|name| vec![text(name)]).collect(),
        rows: all.iter().enumerate().map(row).collect(),
    }))
}

/// Substitutes and complements, net and gross.
fn pairs(notation: &Notation<'_>, all: &AllResponses) -> Vec<Block> {
    let kinds =
        [(Tendency::Positive, "substitutes"), (Tendency::Negative, "complements"), (Tendency::Zero, "independent")];
    let mut blocks = Vec::new();
    for (word, list, directed) in [("net", &all.pairs.net, false), ("gross", &all.pairs.gross, true)] {
        for (tendency, kind) in kinds {
            let found: Vec<(usize, usize)> = list
                .iter()
                .filter(|(_, _, response)| response.tendency == Some(tendency))
                .map(|(i, j, _)| (*i, *j))
                .collect();
            if found.is_empty() {
                continue;
            }
            if found.len() == list.len() {
                let which = if list.len() == 1 || directed && list.len() == 2 { "The two" } else { "All" };
                blocks.push(match (tendency, directed) {
                    (Tendency::Zero, true) => paragraph("The demand for no good depends on the price of another."),
                    _ => paragraph(format!("{which} goods are {word} {kind}.")),
                });
                continue;
            }
            blocks.extend(named(notation, &found, directed, &format!("{word} {kind}")));
        }
    }
    blocks
}

fn named(notation: &Notation<'_>, found: &[(usize, usize)], directed: bool, kind: &str) -> Option<Block> {
    let (good, link) = (|i: usize| notation.good(i), if directed { " to the price of " } else { " and " });
    let mut words: Vec<String> =
        found.iter().take(MOST_PAIRS).map(|(i, j)| format!("{}{link}{}", good(*i), good(*j))).collect();
    if words.len() < found.len() {
        words.push(format!("{} more pairs (see the JSON)", found.len() - words.len()));
    }
    let words = if directed { words.join("; ") } else { words.join(", ") };
    Some(paragraph(format!("{}: {words}.", capitalised(kind))))
}

fn capitalised(words: &str) -> String {
    let mut letters = words.chars();
    letters.next().map(|first| first.to_uppercase().chain(letters).collect()).unwrap_or_default()
}

fn elasticities(notation: &Notation<'_>, all: &Elasticities) -> Vec<Block> {
    if all.left_out || all.income.is_empty() {
        return Vec::new();
    }
    let mut blocks = vec![heading("Elasticities")];
    let (eta, epsilon) = (notation.income_elasticity(), notation.price_elasticity());
    let compensated = epsilon.clone().marked(Mark::Label("h".to_string()));
    let income: Vec<(Object, Option<Expression>)> =
        all.income.iter().map(|each| (eta.clone().at(notation.good(each.good)), shortest(notation, each))).collect();
    let mut missing = income.iter().filter(|(_, value)| value.is_none()).count();
    blocks.push(paragraph("Written with budget shares where that is shorter, the income elasticities are"));
    blocks.push(display(income));
    for (words, name, list) in [
        ("the price elasticities", epsilon, &all.price),
        ("and those at constant utility", compensated, &all.compensated),
    ] {
        let values: Vec<(&Elasticity, Option<Expression>)> =
            list.iter().map(|each| (each, shortest(notation, each))).collect();
        missing += values.iter().filter(|(_, value)| value.is_none()).count();
        blocks.push(paragraph(words));
        blocks.push(in_prices(notation, name, values, all.income.len()));
    }
    blocks.extend(left_out(all, missing));
    blocks
}

/// A matrix for few goods and no gap; else the entries one by one.
fn in_prices(
    notation: &Notation<'_>,
    name: Object,
    values: Vec<(&Elasticity, Option<Expression>)>,
    goods: usize,
) -> Block {
    let complete = values.len() == goods * goods && values.iter().all(|(_, value)| value.is_some());
    if complete && goods <= MOST_GOODS {
        let names: Vec<String> = (0..goods).map(|good| notation.good(good)).collect();
        let entries: Vec<Expression> = values.into_iter().filter_map(|(_, value)| value).collect();
        let entries = entries.chunks(goods).map(<[Expression]>::to_vec).collect();
        return Block::Matrix(Matrix { name, rows: names.clone(), columns: names, entries, symmetric: false });
    }
    let few = goods <= MOST_GOODS;
    let shown = values.into_iter().filter(|(each, _)| few || each.price == Some(each.good));
    let entry = |(each, value): (&Elasticity, Option<Expression>)| {
        let price = each.price.unwrap_or(each.good);
        (name.clone().at(notation.good(each.good)).at(notation.good(price)), value)
    };
    display(shown.map(entry).collect())
}

fn display(values: Vec<(Object, Option<Expression>)>) -> Block {
    let equations = values.into_iter().filter_map(|(name, value)| Some(Equation::equal(name, value?)));
    Block::Display(equations.collect())
}

fn left_out(all: &Elasticities, missing: usize) -> Option<Block> {
    let mut words = Vec::new();
    if all.own_prices_only {
        words.push("those in the prices of other goods".to_string());
    } else if all.income.len() > MOST_GOODS {
        words.push("those in the prices of other goods (see the JSON)".to_string());
    }
    match missing {
        0 => {}
        1 => words.push("one that is too long to print (see the JSON)".to_string()),
        several => words.push(format!("{several} that are too long to print (see the JSON)")),
    }
    (!words.is_empty()).then(|| Block::Note(vec![text(format!("Left out are {}.", enumerated(&words)))]))
}

/// The form that is shortest in print; `None` where all are too long.
fn shortest(notation: &Notation<'_>, elasticity: &Elasticity) -> Option<Expression> {
    let mut forms: Vec<&Form> = elasticity.forms.iter().collect();
    forms.sort_by_key(|form| form.size());
    let measured = forms.into_iter().take(MOST_FORMS).map(|form| expression(notation, form));
    let measured = measured.map(|e| (plain_expression(&e).chars().count(), e));
    measured.filter(|(length, _)| *length <= LONGEST).min_by_key(|(length, _)| *length).map(|(_, e)| e)
}

fn expression(notation: &Notation<'_>, form: &Form) -> Expression {
    match form {
        Form::Whole(e) => written(notation, e),
        Form::Affine { constant, slope, good } => {
            let term = scaled(notation, slope, |value| product(value, notation.share(*good)));
            let constant = (!constant.is_zero()).then(|| written(notation, constant));
            sum(constant.into_iter().chain([term]).collect())
        }
        Form::OverShare { constant, plus, numerator, less, below } => {
            let ratio = ratio(notation, numerator, less.as_ref(), *below);
            let plus = plus.map(|good| notation.share(good));
            let number = |n: i64| Expression::Number(num_rational::Ratio::from_integer(n.into()));
            let terms = match constant {
                0 => plus.into_iter().chain([ratio]).collect(),
                n if *n > 0 => std::iter::once(number(*n)).chain(plus).chain([ratio]).collect(),
                n => plus.into_iter().chain([ratio, Expression::negative(number(-n))]).collect(),
            };
            sum(terms)
        }
    }
}

/// (numerator − c w of a good) / w of `below`.
fn ratio(notation: &Notation<'_>, numerator: &Element, less: Option<&(usize, Element)>, below: usize) -> Expression {
    let Some((good, coefficient)) = less else {
        return scaled(notation, numerator, |value| over(value, notation.share(below)));
    };
    let drawn = match scaled(notation, coefficient, |value| product(value, notation.share(*good))) {
        Expression::Negative(inner) => *inner,
        value => Expression::negative(value),
    };
    over(sum(vec![written(notation, numerator), drawn]), notation.share(below))
}

/// What is made of an element, with its minus sign in front.
fn scaled(notation: &Notation<'_>, e: &Element, made: impl Fn(Expression) -> Expression) -> Expression {
    match written(notation, e) {
        Expression::Negative(inner) => Expression::negative(made(*inner)),
        value => made(value),
    }
}

/// The quotient, without a fraction in its numerator.
fn over(value: Expression, share: Expression) -> Expression {
    match value {
        Expression::Quotient(above, below) => Expression::Quotient(above, Box::new(product(*below, share))),
        value => Expression::Quotient(Box::new(value), Box::new(share)),
    }
}

fn product(value: Expression, share: Expression) -> Expression {
    use num_traits::One;
    match value {
        Expression::Number(one) if one.is_one() => share,
        Expression::Product(factors) => Expression::Product(factors.into_iter().chain([share]).collect()),
        value => Expression::Product(vec![value, share]),
    }
}

/// An element; a long one as it stands.
fn written(notation: &Notation<'_>, e: &Element) -> Expression {
    if e.len() <= SHORT { notation.element(e) } else { Expression::from(notation.field().formula(e)) }
}
