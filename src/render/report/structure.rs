//! The structure of preferences: each proven fact with the condition that it rests on, then what fails, and where.

use crate::algebra::evaluation::Point;
use crate::conditions::Verdict;
use crate::render::document::{Block, Equation, Inline, Relation, Tone, VerdictLine};
use crate::render::expression::Expression;
use crate::render::notation::Notation;
use crate::render::report::derivation::{heading, logarithm, paragraph};
use crate::render::report::words::{counted, enumerated, point, text};
use crate::structure::{Fact, Property, Structure};
use crate::vetting::Part;

/// The proven facts in one line; `None` where there are none.
pub fn line(notation: &Notation<'_>, structure: &Structure) -> Option<VerdictLine> {
    let mut note: Vec<Vec<Inline>> = Vec::new();
    note.extend(income_structure(structure).map(|property| name(notation, structure, property)));
    if let Some(rank) = structure.rank.as_ref().filter(|rank| rank.exact) {
        note.push(vec![text(format!("rank {}", counted(rank.value)))]);
    }
    match (structure.has(Property::DirectlyAdditive), structure.has(Property::IndirectlyAdditive)) {
        (true, true) => note.push(vec![text("directly and indirectly additive")]),
        _ => {
            let additive = [Property::DirectlyAdditive, Property::IndirectlyAdditive];
            note.extend(additive.into_iter().filter(|p| structure.has(*p)).map(|p| name(notation, structure, p)));
        }
    }
    note.extend(structure.has(Property::QuasiLinear).then(|| name(notation, structure, Property::QuasiLinear)));
    let groups: Vec<String> = structure.facts.iter().filter_map(|fact| separable_group(notation, fact)).collect();
    note.extend((!groups.is_empty()).then(|| vec![text(format!("weakly separable in {}", enumerated(&groups)))]));
    if note.is_empty() {
        return None;
    }
    let mut words = Vec::new();
    for (place, piece) in note.into_iter().enumerate() {
        words.extend((place > 0).then(|| text(", ")));
        words.extend(piece);
    }
    Some(VerdictLine {
        name: Part::Structure.word().to_string(),
        verdict: "proven".to_string(),
        tone: Tone::Holds,
        note: words,
    })
}

/// The narrowest class by the dependence on income that preferences are shown to belong to.
fn income_structure(structure: &Structure) -> Option<Property> {
    let classes = [Property::Homothetic, Property::QuasiHomothetic, Property::Piglog, Property::Pigl];
    classes.into_iter().find(|property| structure.has(*property))
}

/// The property with its exponent or its good.
fn name(notation: &Notation<'_>, structure: &Structure, property: Property) -> Vec<Inline> {
    let mut words = vec![text(plain_name(notation, property))];
    match (property, &structure.exponent, structure.numeraire) {
        (Property::Pigl, Some(e), _) => words.extend([text(" with exponent "), Inline::math(notation.element(e))]),
        (Property::QuasiLinear, _, Some(good)) => words.push(text(format!(" in {}", notation.good(good)))),
        _ => {}
    }
    words
}

fn plain_name(notation: &Notation<'_>, property: Property) -> String {
    match property {
        Property::Homothetic => "homothetic".to_string(),
        Property::QuasiHomothetic => "of Gorman's polar form".to_string(),
        Property::Piglog => "PIGLOG".to_string(),
        Property::Pigl => "PIGL".to_string(),
        Property::DirectlyAdditive => "directly additive".to_string(),
        Property::IndirectlyAdditive => "indirectly additive".to_string(),
        Property::QuasiLinear => "quasi-linear".to_string(),
        Property::Separable(group) => format!("weakly separable in {}", group_name(notation, group)),
    }
}

/// The name of the group that the fact shows to be separable.
fn separable_group(notation: &Notation<'_>, fact: &Fact) -> Option<String> {
    match fact.property {
        Property::Separable(group) if fact.finding.verdict == Verdict::Proven => Some(group_name(notation, group)),
        _ => None,
    }
}

fn group_name(notation: &Notation<'_>, group: usize) -> String {
    notation.model().groups.get(group).map(|(name, _)| name.clone()).unwrap_or_default()
}

/// The section on structure; empty where nothing was shown.
pub fn section(notation: &Notation<'_>, structure: &Structure) -> Vec<Block> {
    let mut blocks = Vec::new();
    let class = income_structure(structure);
    blocks.extend(class.iter().flat_map(|class| proven(notation, structure, *class)));
    blocks.extend(rank(notation, structure));
    let others = structure.facts.iter().filter(|fact| fact.finding.verdict == Verdict::Proven);
    let others = others.filter(|fact| !is_of_income(fact.property));
    blocks.extend(others.flat_map(|fact| proven(notation, structure, fact.property)));
    blocks.extend(failing(notation, structure));
    if blocks.is_empty() { blocks } else { std::iter::once(heading("Structure")).chain(blocks).collect() }
}

fn is_of_income(property: Property) -> bool {
    matches!(property, Property::Homothetic | Property::QuasiHomothetic | Property::Piglog | Property::Pigl)
}

/// What preferences are not, as far as it narrows down what they are; facts that fail at one point stand together.
fn failing(notation: &Notation<'_>, structure: &Structure) -> Vec<Block> {
    let class = income_structure(structure);
    let mut groups: Vec<(&Point, Vec<String>)> = Vec::new();
    for Fact { property, finding } in &structure.facts {
        let telling = !is_of_income(*property) || class.is_none_or(|class| *property < class);
        let witness = finding.witness.as_ref().filter(|_| telling && *property != Property::QuasiLinear);
        let Some(witness) = witness.filter(|_| finding.verdict == Verdict::Refuted) else { continue };
        let words = plain_name(notation, *property);
        match groups.iter_mut().find(|(point, _)| **point == witness.point) {
            Some((_, names)) => names.push(words),
            None => groups.push((&witness.point, vec![words])),
        }
    }
    let block = |(at, names): (&Point, Vec<String>)| {
        let (list, conditions) =
            (alternatives(&names), if names.len() == 1 { "the condition fails" } else { "the conditions fail" });
        let mut words = vec![text(format!("Preferences are not {list}: {conditions} at "))];
        words.extend(point(notation, at));
        words.push(text("."));
        Block::Paragraph(words)
    };
    groups.into_iter().map(block).collect()
}

/// The names with an "or" before the last.
fn alternatives(names: &[String]) -> String {
    match names {
        [first @ .., last] if !first.is_empty() => format!("{} or {last}", first.join(", ")),
        _ => names.concat(),
    }
}

/// What is said of a proven fact: an introduction, its condition, and what follows.
fn proven(notation: &Notation<'_>, structure: &Structure, property: Property) -> Vec<Block> {
    let letters = Letters { notation };
    let (before, condition, after) = match property {
        Property::Homothetic => (
            "Budget shares do not depend on income: for every good $i$".to_string(),
            letters.vanishing(letters.engel("i")),
            "Hence preferences are homothetic.".to_string(),
        ),
        Property::QuasiHomothetic => (
            "Demands are affine in income: for every good $i$".to_string(),
            letters.vanishing(Expression::second_partial(letters.x("i"), notation.income(), notation.income())),
            "Hence preferences are quasi-homothetic: expenditure has Gorman's polar form, and the demands of consumers who \
             differ in income alone add up to a function of total income."
                .to_string(),
        ),
        Property::Piglog => (
            "Budget shares are affine in the logarithm of income: for every good $i$".to_string(),
            letters.vanishing(letters.bend("i")),
            "Hence preferences are PIGLOG.".to_string(),
        ),
        Property::Pigl => return pigl(&letters, structure),
        Property::DirectlyAdditive => directly_additive(&letters),
        Property::IndirectlyAdditive => (
            "A price changes the demands for all other goods in proportion: for any two goods $i$ and $j$ other than $k$".to_string(),
            Equation::equal(letters.cross("i", "k"), letters.cross("j", "k")),
            "Hence preferences are indirectly additive: indirect utility is a sum of functions of one price over income \
             each, up to a monotone transformation (Houthakker 1960)."
                .to_string(),
        ),
        Property::QuasiLinear => quasi_linear(&letters, structure),
        Property::Separable(group) => separable(&letters, group),
    };
    vec![prose(&before), Block::Display(vec![condition]), paragraph(after)]
}

fn pigl(letters: &Letters<'_>, structure: &Structure) -> Vec<Block> {
    let exponent = structure.exponent.as_ref().map(|e| letters.notation.element(e));
    let factor = exponent.clone().map_or_else(|| number(0), Expression::negative);
    let right = Expression::Product(vec![factor, letters.engel("i")]);
    let mut after = vec![text("Hence preferences are PIGL: shares are affine in income to the power of minus ")];
    after.push(exponent.map_or_else(|| text("any number"), Inline::math));
    after.push(text("."));
    vec![
        prose("For every good $i$"),
        Block::Display(vec![Equation::equal(letters.bend("i"), right)]),
        Block::Paragraph(after),
    ]
}

fn directly_additive(letters: &Letters<'_>) -> (String, Equation, String) {
    let factor = letters.notation.proportion();
    let right = Expression::Product(vec![factor, letters.income_slope("i"), letters.income_slope("j")]);
    (
        "For any two goods $i$ and $j$, with one function of prices and income that is the same for all and not zero,"
            .to_string(),
        Equation::equal(letters.entry("i", "j"), right),
        "Hence preferences are directly additive: utility is a sum of functions of one quantity each, up to a monotone \
         transformation (Houthakker 1960)."
            .to_string(),
    )
}

fn quasi_linear(letters: &Letters<'_>, structure: &Structure) -> (String, Equation, String) {
    let good = structure.numeraire.map(|good| letters.notation.good(good)).unwrap_or_default();
    (
        format!("Income changes the demand for {good} alone: for every other good $i$"),
        letters.vanishing(letters.income_slope("i")),
        format!("Hence preferences are quasi-linear in {good}."),
    )
}

fn separable(letters: &Letters<'_>, group: usize) -> (String, Equation, String) {
    let model = letters.notation.model();
    let (name, goods) = model.groups.get(group).cloned().unwrap_or_default();
    let goods: Vec<String> = goods.into_iter().map(|good| letters.notation.good(good)).collect();
    let side = |a: &str, b: &str| Expression::Product(vec![letters.entry(a, "k"), letters.income_slope(b)]);
    (
        format!(
            "For any two goods $i$ and $j$ of the group {name} ({}) and any good $k$ outside it",
            enumerated(&goods)
        ),
        Equation::equal(side("i", "j"), side("j", "i")),
        format!("Hence preferences are weakly separable in {name} (Goldman and Uzawa 1964)."),
    )
}

fn rank(notation: &Notation<'_>, structure: &Structure) -> Vec<Block> {
    let Some(rank) = &structure.rank else { return Vec::new() };
    let letters = Letters { notation };
    let span = match rank.value {
        1 => "one function".to_string(),
        value => format!("{} functions", counted(value)),
    };
    let least = if rank.exact { "" } else { "at least " };
    let words = format!(
        "At fixed prices the Engel curves, as shares, span {least}{span} of income: the rank of the system is {least}{}",
        counted(rank.value)
    );
    // for two goods and for PIGL the minors vanish of themselves
    if rank.value != 2 || notation.model().goods.len() < 3 || income_structure(structure).is_some() {
        return vec![paragraph(format!("{words}."))];
    }
    let side = |a: &str, b: &str| Expression::Product(vec![letters.bend(a), letters.engel(b)]);
    vec![
        prose(&format!("{words}, since for any two goods $i$ and $j$")),
        Block::Display(vec![Equation::equal(side("i", "j"), side("j", "i"))]),
    ]
}

/// Slopes with free indices.
struct Letters<'a> {
    notation: &'a Notation<'a>,
}

impl Letters<'_> {
    fn x(&self, index: &str) -> Expression {
        self.notation.quantity_letter().at(index).into()
    }

    fn w(&self, index: &str) -> Expression {
        self.notation.share_letter().at(index).into()
    }

    fn income_slope(&self, index: &str) -> Expression {
        Expression::partial(self.x(index), self.notation.income())
    }

    fn engel(&self, index: &str) -> Expression {
        Expression::partial(self.w(index), logarithm(self.notation.income()))
    }

    fn bend(&self, index: &str) -> Expression {
        let log = || logarithm(self.notation.income());
        Expression::second_partial(self.w(index), log(), log())
    }

    fn cross(&self, index: &str, price: &str) -> Expression {
        Expression::partial(logarithm(self.x(index)), logarithm(self.notation.price_letter(price)))
    }

    fn entry(&self, i: &str, j: &str) -> Expression {
        self.notation.slutsky().at(i).at(j).into()
    }

    fn vanishing(&self, left: Expression) -> Equation {
        Equation::new(left, Relation::Equal, number(0))
    }
}

/// Words with letters between dollar signs.
fn prose(words: &str) -> Block {
    let piece = |(place, piece): (usize, &str)| match place % 2 {
        0 => text(piece),
        _ => Inline::math(Expression::symbol(piece)),
    };
    Block::Paragraph(words.split('$').enumerate().map(piece).collect())
}

fn number(n: i64) -> Expression {
    Expression::Number(num_rational::Ratio::from_integer(n.into()))
}
