//! What the author said: goods, names, assumptions, abbreviations, demands.

use crate::algebra::generator::Element;
use crate::language::{Equation as Defined, Form as WrittenForm, Index, Statement, Target};
use crate::model::{Coverage, DomainCondition, Model};
use crate::render::document::{Block, Equation, Inline, Relation};
use crate::render::expression::{Expression, Object};
use crate::render::notation::Notation;
use crate::render::report::starting;
use crate::render::report::words::{counted, enumerated, listed, relation, text};
use crate::render::report::written::{Author, sign_of};

/// The section that states the system.
pub fn blocks(notation: &Notation<'_>) -> Vec<Block> {
    let model = notation.model();
    let author = Author::new(model);
    let mut blocks = vec![Block::Heading { level: 1, text: vec![text("The system")] }];
    blocks.push(Block::Paragraph(names(notation)));
    let assumed = assumptions(notation, &author);
    if !assumed.is_empty() {
        blocks.push(Block::Paragraph(vec![text("It is assumed that")]));
        blocks.push(Block::Display(assumed));
    }
    let abbreviations = abbreviations(notation, &author);
    if !abbreviations.is_empty() {
        blocks.push(Block::Paragraph(vec![text(if abbreviations.len() == 1 {
            "With the abbreviation"
        } else {
            "With the abbreviations"
        })]));
        blocks.push(Block::Display(abbreviations));
    }
    if model.given.is_some() || !model.inverse.is_empty() {
        blocks.extend(starting::blocks(notation));
    } else {
        blocks.push(Block::Paragraph(vec![text(opening(model))]));
        blocks.push(Block::Display(demands(notation, &author)));
    }
    blocks.extend(closing(notation));
    blocks
}

fn names(notation: &Notation<'_>) -> Vec<Inline> {
    let model = notation.model();
    let goods: Vec<String> = model.goods.iter().map(|good| good.name.clone()).collect();
    let numbered = goods.iter().enumerate().all(|(k, name)| *name == (k + 1).to_string());
    if model.prices.is_empty() {
        return quantities(notation, &goods, numbered);
    }
    let mut out = vec![text(match (goods.len(), numbered) {
        (1, _) => format!("There is one good, {}, with price ", enumerated(&goods)),
        (n, true) => format!("There are {} goods, with prices ", counted(n)),
        (n, false) => format!("There are {} goods, {}, with prices ", counted(n), enumerated(&goods)),
    })];
    let symbols = |vars: &[crate::algebra::monomial::Var]| {
        vars.iter().map(|var| vec![Inline::math(notation.variable(*var))]).collect::<Vec<_>>()
    };
    out.extend(listed(symbols(&model.prices), " and "));
    out.push(text(", and income "));
    out.push(Inline::math(notation.income()));
    if let Coverage::Others(others) = &model.coverage {
        out.push(text("; the goods that are not written down have the price index "));
        out.extend(listed(symbols(others), " and "));
    }
    if model.coverage == Coverage::Deflated {
        out.push(text("; prices and income are divided by the price index of the other goods"));
    }
    out.push(text(". All of these are positive."));
    let parameters: Vec<_> = model.parameters.iter().map(|parameter| parameter.var).collect();
    if !parameters.is_empty() {
        out.push(text(if parameters.len() == 1 { " The parameter " } else { " The parameters " }));
        out.extend(listed(families(notation), " and "));
        out.push(text(if parameters.len() == 1 { " is a real number." } else { " are real numbers." }));
    }
    out
}

/// The same for inverse demands, which speak of quantities alone.
fn quantities(notation: &Notation<'_>, goods: &[String], numbered: bool) -> Vec<Inline> {
    let model = notation.model();
    let mut out = vec![text(match numbered {
        true => format!("There are {} goods, with quantities ", counted(goods.len())),
        false => format!("There are {} goods, {}, with quantities ", counted(goods.len()), enumerated(goods)),
    })];
    let letters = model.quantities.iter().flatten().map(|var| vec![Inline::math(notation.variable(*var))]).collect();
    out.extend(listed(letters, " and "));
    out.push(text(". All of these are positive."));
    let parameters = families(notation);
    if !parameters.is_empty() {
        out.push(text(if parameters.len() == 1 { " The parameter " } else { " The parameters " }));
        let one = parameters.len() == 1;
        out.extend(listed(parameters, " and "));
        out.push(text(if one { " is a real number." } else { " are real numbers." }));
    }
    out
}

/// The parameters as they were declared: a family by its general member.
fn families(notation: &Notation<'_>) -> Vec<Vec<Inline>> {
    let author = Author::new(notation.model());
    let mut families = Vec::new();
    for located in &notation.model().tree().statements {
        let Statement::Parameters(declared) = &located.statement else { continue };
        for each in declared {
            let indices: Vec<String> = each.indices.iter().map(|index| index.text.clone()).collect();
            families.push(vec![Inline::math(author.symbol(&each.name.text, &indices))]);
        }
    }
    families
}

/// Every assumption as it is written, or, where that cannot be set, link by link with its indices spelled out.
fn assumptions(notation: &Notation<'_>, author: &Author) -> Vec<Equation> {
    let model = notation.model();
    let mut equations = Vec::new();
    for located in &model.tree().statements {
        let Statement::Assume(relations) = &located.statement else { continue };
        for stated in relations {
            match author.relation(stated) {
                Some(links) => equations.extend(links),
                None => equations.extend(expanded(notation, stated.span)),
            }
        }
    }
    equations
}

fn expanded(notation: &Notation<'_>, span: crate::language::Span) -> Vec<Equation> {
    let within = |assumption: &&crate::model::Assumption| assumption.span.meets(span);
    let links = notation.model().assumptions.iter().filter(within);
    links.map(|a| Equation::new(notation.element(&a.left), sign_of(a.relation), notation.element(&a.right))).collect()
}

fn abbreviations(notation: &Notation<'_>, author: &Author) -> Vec<Equation> {
    let model = notation.model();
    let mut equations = Vec::new();
    for located in &model.tree().statements {
        let Statement::Let { name, value } = &located.statement else { continue };
        let indices: Vec<String> = name.indices.iter().map(|index| index.text.clone()).collect();
        match author.formula(value) {
            Some(right) => equations.push(Equation::equal(author.symbol(&name.name.text, &indices), right)),
            None => {
                let member = |known: &str| known.split('[').next() == Some(name.name.text.as_str());
                let members = model.abbreviations.iter().filter(|(known, _)| member(known));
                equations.extend(members.map(|(known, e)| spelled_out(notation, known, e)));
            }
        }
    }
    equations
}

/// An abbreviation without use of its own name on the right.
fn spelled_out(notation: &Notation<'_>, name: &str, e: &Element) -> Equation {
    Equation::equal(Expression::symbol(name), Expression::from(notation.field().formula(&notation.field().expand(e))))
}

fn opening(model: &Model) -> String {
    match model.coverage {
        Coverage::Complete => "The demand system is".to_string(),
        _ => "The incomplete demand system is".to_string(),
    }
}

fn demands(notation: &Notation<'_>, author: &Author) -> Vec<Equation> {
    let mut equations = Vec::new();
    for located in &notation.model().tree().statements {
        let Statement::Demand(defined) = &located.statement else { continue };
        match author.formula(&defined.value) {
            Some(right) => equations.push(Equation::equal(left_side(notation, author, defined), right)),
            None => {
                let goods = targets(notation.model(), &defined.target);
                equations.extend(goods.into_iter().filter_map(|good| {
                    let demand = notation.model().demands.get(good)?;
                    Some(Equation::equal(notation.demanded(good), notation.element(&demand.formula)))
                }));
            }
        }
    }
    equations
}

fn good_of(model: &Model, target: &Target) -> Option<usize> {
    let name = match target {
        Target::Good(name) => name.text.clone(),
        Target::Indexed(Index::Name(name), _) => name.clone(),
        Target::Indexed(Index::Number(number), _) => number.to_string(),
    };
    model.goods.iter().position(|good| good.name == name)
}

fn targets(model: &Model, target: &Target) -> Vec<usize> {
    good_of(model, target).map_or_else(|| (0..model.goods.len()).collect(), |good| vec![good])
}

/// The left side; for a family with its free index.
fn left_side(notation: &Notation<'_>, author: &Author, defined: &Defined) -> Expression {
    if let Some(good) = good_of(notation.model(), &defined.target) {
        return notation.demanded(good);
    }
    let index = match &defined.target {
        Target::Indexed(Index::Name(index), _) => index.clone(),
        _ => "i".to_string(),
    };
    let quantity: Expression = notation.quantity_letter().at(index.clone()).into();
    match defined.form {
        WrittenForm::Demand => quantity,
        WrittenForm::Share => notation.share_letter().at(index).into(),
        WrittenForm::Outlay => Expression::Product(vec![price_family(notation, author, &index), quantity]),
        WrittenForm::LogDemand => Expression::Call(crate::algebra::formula::Function::Ln, Box::new(quantity)),
    }
}

fn price_family(notation: &Notation<'_>, author: &Author, index: &str) -> Expression {
    for located in &notation.model().tree().statements {
        if let Statement::Prices(declared) = &located.statement
            && let [family] = declared.as_slice()
            && !family.indices.is_empty()
        {
            return author.symbol(&family.name.text, &[index.to_string()]);
        }
    }
    Object::new("p").at(index).into()
}

/// The domain, and what of Walras' law is assumed.
fn closing(notation: &Notation<'_>) -> Vec<Block> {
    let model = notation.model();
    let mut blocks = Vec::new();
    if let Some(rest) = model.rest {
        blocks.push(Block::Paragraph(vec![
            text(format!(
                "and {} takes what is left of income, so that Walras' law holds by assumption: ",
                notation.good(rest)
            )),
            relation(notation.outlay(rest), Relation::Equal, rest_outlay(notation, rest)),
            text("."),
        ]));
    }
    let needed: Vec<Vec<Inline>> =
        model.domain.iter().filter_map(|condition| domain_words(notation, condition)).collect();
    if !needed.is_empty() {
        let mut words = vec![text("The formulas are defined where ")];
        words.extend(listed(needed, " and "));
        words.push(text("."));
        blocks.push(Block::Paragraph(words));
    }
    blocks
}

fn rest_outlay(notation: &Notation<'_>, rest: usize) -> Expression {
    let others = (0..notation.model().goods.len()).filter(|good| *good != rest);
    let minus = others.map(|good| Expression::negative(notation.outlay(good)));
    Expression::Sum(std::iter::once(notation.income()).chain(minus).collect())
}

/// A condition that is not plain from the positivity of prices and income.
fn domain_words(notation: &Notation<'_>, condition: &DomainCondition) -> Option<Vec<Inline>> {
    let field = notation.field();
    let e = field.expand(condition.element());
    let plain = e.vars().into_iter().all(|var| field.role(var).is_some_and(|role| role.is_positive()))
        && e.raw_terms().iter().all(|(_, c)| !c.is_negative());
    let sign = match condition {
        DomainCondition::Positive(_) => Relation::Greater,
        DomainCondition::NonZero(_) => Relation::NotEqual,
    };
    (!plain).then(|| {
        vec![relation(notation.element(condition.element()), sign, Expression::from(field.formula(&Element::zero())))]
    })
}
