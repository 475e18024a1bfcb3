//! Formulas of the syntax tree in the signs of model files, for messages and for claims that were read in LaTeX.

use super::syntax::*;

/// The formula in the signs of model files; reading it gives the formula back.
pub fn wording(expr: &Expr) -> String {
    text(expr).0
}

/// The relation in the signs of model files.
pub fn relation_wording(relation: &Relation) -> String {
    let mut all = wording(&relation.first);
    for (sign, side) in &relation.rest {
        all += &format!(" {} {}", sign.sign(), wording(side));
    }
    all
}

/// A claim about a function of the theory in the words of model files.
pub fn claim_wording(function: &Claimed, value: &Expr) -> String {
    let of_good = |words: &str, target: &Target| match target {
        Target::Good(name) => format!("{words} {}", name.text),
        Target::Indexed(index, _) => format!("{words}[{index}]"),
    };
    let of_two = |words: &str, good: &(Index, Span), mover: &Mover| {
        let mover = match mover {
            Mover::Named(reference) => name_text(&reference.name.text, &reference.indices),
            Mover::Number(number, _) => number.to_string(),
        };
        format!("{words}[{}, {mover}]", good.0)
    };
    let left = match function {
        Claimed::Preferences(Preferences::Utility) => "utility".to_string(),
        Claimed::Preferences(Preferences::IndirectUtility) => "indirect utility".to_string(),
        Claimed::Preferences(Preferences::Expenditure) => "expenditure".to_string(),
        Claimed::Demand(Form::Demand, target) => of_good("demand", target),
        Claimed::Demand(Form::Share, target) => of_good("share", target),
        Claimed::Demand(Form::Outlay, target) => of_good("outlay", target),
        Claimed::Demand(Form::LogDemand, target) => of_good("log demand", target),
        Claimed::Hicksian(target) => of_good("hicksian", target),
        Claimed::Inverse(target) => of_good("inverse", target),
        Claimed::Slutsky(good, mover) => of_two("slutsky", good, mover),
        Claimed::Elasticity(good, mover) => of_two("elasticity", good, mover),
        Claimed::CompensatedElasticity(good, mover) => of_two("compensated elasticity", good, mover),
    };
    format!("{left} = {}", wording(value))
}

fn text(expr: &Expr) -> (String, Level) {
    match &expr.kind {
        ExprKind::Number(value) if value.is_integer() => (value.to_string(), Level::Atom),
        ExprKind::Number(value) => (value.to_string(), Level::Product),
        ExprKind::Pi => ("pi".to_string(), Level::Atom),
        ExprKind::Reference(reference) => (name_text(&reference.name.text, &reference.indices), Level::Atom),
        ExprKind::Negative(inner) => (format!("-{}", at_least(inner, Level::Product)), Level::Negative),
        ExprKind::Sum(terms) => (sum(terms), Level::Sum),
        ExprKind::Product(factors) => (product(factors), Level::Product),
        ExprKind::Power(base, exponent) => {
            (format!("{}^{}", at_least(base, Level::Atom), at_least(exponent, Level::Power)), Level::Power)
        }
        ExprKind::Call(function, argument) => (format!("{}({})", function.word(), wording(argument)), Level::Atom),
        ExprKind::Over(over) => (over_text(over), Level::Atom),
    }
}

/// A name with its indices.
pub fn name_text(name: &str, indices: &[(Index, Span)]) -> String {
    let indices: Vec<String> = indices.iter().map(|(index, _)| index.to_string()).collect();
    if indices.is_empty() { name.to_string() } else { format!("{name}[{}]", indices.join(",")) }
}

fn at_least(expr: &Expr, level: Level) -> String {
    let (text, own) = text(expr);
    if own < level { format!("({text})") } else { text }
}

fn sum(terms: &[Expr]) -> String {
    let mut all = String::new();
    for (place, term) in terms.iter().enumerate() {
        match (&term.kind, place) {
            (ExprKind::Negative(inner), 1..) => all += &format!(" - {}", at_least(inner, Level::Product)),
            (_, 0) => all += &at_least(term, Level::Negative),
            _ => all += &format!(" + {}", at_least(term, Level::Product)),
        }
    }
    all
}

fn product(factors: &[Factor]) -> String {
    let mut all = String::new();
    for (place, factor) in factors.iter().enumerate() {
        match (place, factor.inverted) {
            (0, false) => {}
            (0, true) => all += "1/",
            (_, false) => all += "*",
            (_, true) => all += "/",
        }
        all += &at_least(&factor.expr, if place == 0 && !factor.inverted { Level::Product } else { Level::Power });
    }
    all
}

fn over_text(over: &Over) -> String {
    let binders = over.binders.iter().map(|name| name.text.as_str()).collect::<Vec<_>>().join(", ");
    let except = over.except.as_ref().map(|(index, _)| format!(" != {index}")).unwrap_or_default();
    let group = over.group.as_ref().map(|name| format!(" in {}", name.text)).unwrap_or_default();
    let kind = if over.product { "product" } else { "sum" };
    format!("{kind} over {binders}{except}{group} of ({})", wording(&over.body))
}
