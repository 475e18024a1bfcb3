//! Formulas in LaTeX (amsmath), set on one line.

use crate::algebra::formula::{Formula, Function};
use crate::algebra::number::Rational;
use crate::render::expression::{Expression, Mark, Object};
use crate::render::latex_escape::escape;
use crate::render::latex_names::{SetName, set_name, set_parts};
use crate::render::latex_pieces::{Edge, Level, MINUS_WIDTH, Piece, SIGN_WIDTH, Style, THIN, apart};
use crate::render::names::{read_name, read_subscripts};
use num_traits::{One, Signed};

/// The formula as it stands in a display, unbroken.
pub fn latex(formula: &Formula) -> String {
    typeset(&Expression::from(formula), Style::Display).tex
}

/// Sets an expression on one line.
pub fn typeset(expression: &Expression, style: Style) -> Piece {
    match expression {
        Expression::Number(value) => number(value, style),
        Expression::Symbol(symbol) => name(&set_name(symbol)),
        Expression::Sum(terms) => sum(terms, style),
        Expression::Negative(inner) => typeset(inner, style).with_minus(),
        Expression::Product(factors) => product(factors, style),
        Expression::Quotient(above, below) => quotient(above, below, style),
        Expression::Power(base, exponent) => power(base, exponent, style),
        Expression::Call(function, argument) => call(*function, argument, style),
        Expression::Object(object) => set_object(object),
        Expression::Partial { of, by } => partial(of, by, style),
        Expression::Total { index, body } => total(index, body, style),
        Expression::Differential(inner) => {
            let inner = typeset(inner, style).at_least(Level::Scripted);
            Piece { tex: format!("d{}", apart(&inner.tex)), width: inner.width + 52, level: Level::Product, ..inner }
        }
    }
}

fn number(value: &Rational, style: Style) -> Piece {
    if value.is_negative() {
        return number(&-value, style).with_minus();
    }
    let (above, below) = (value.numer().to_string(), value.denom().to_string());
    if value.is_integer() {
        let width = 50 * above.len() as u32;
        return Piece::new(above, width, Level::Atom).edged(Edge::Digit, Edge::Digit);
    }
    if style == Style::Script {
        let width = 50 * (above.len() + below.len() + 1) as u32;
        return Piece::new(format!("{above}/{below}"), width, Level::Ratio).edged(Edge::Digit, Edge::Digit);
    }
    let width = 40 * above.len().max(below.len()) as u32 + 24;
    let tex = match above.len() == 1 && below.len() == 1 {
        true => format!("\\tfrac{above}{below}"),
        false => format!("\\tfrac{{{above}}}{{{below}}}"),
    };
    Piece { brackets: 1, ..Piece::new(tex, width, Level::Product).edged(Edge::Digit, Edge::Digit) }
}

fn name(set: &SetName) -> Piece {
    let tex = match set.below.is_empty() {
        true => set.base.clone(),
        false => format!("{}_{{{}}}", set.base, set.below),
    };
    let level = if set.has_superscript { Level::Scripted } else { Level::Atom };
    let edge = if set.base.starts_with("\\text") { Edge::Word } else { Edge::Plain };
    let piece = Piece::new(tex, set.base_width + set.below_width, level).edged(edge, edge);
    Piece { overhang: set.below_width, ..piece }
}

/// A term of a sum: whether a minus stands in front, and the rest.
pub fn signed(term: &Expression) -> (bool, Expression) {
    match term {
        Expression::Negative(inner) => (true, (**inner).clone()),
        Expression::Number(value) if value.is_negative() => (true, Expression::Number(-value)),
        other => (false, other.clone()),
    }
}

fn sum(terms: &[Expression], style: Style) -> Piece {
    let mut whole = Piece::new("", 0, Level::Sum);
    for (position, term) in terms.iter().enumerate() {
        let (minus, positive) = signed(term);
        let piece = typeset(&positive, style).at_least(Level::Ratio);
        let sign = match (position, style, minus) {
            (0, _, true) | (_, Style::Script, true) => ("-", MINUS_WIDTH),
            (0, _, false) => ("", 0),
            (_, Style::Script, false) => ("+", MINUS_WIDTH),
            (_, _, true) => (" - ", SIGN_WIDTH),
            (_, _, false) => (" + ", SIGN_WIDTH),
        };
        whole.append(sign, &piece);
    }
    if terms.is_empty() { Piece::new("0", 50, Level::Atom) } else { whole }
}

/// In a script a fractional coefficient is written with a slash: 3x/2.
fn product(factors: &[Expression], style: Style) -> Piece {
    if let (Style::Script, [Expression::Number(value), rest @ ..]) = (style, factors)
        && !value.is_integer()
    {
        let coefficient = (!value.numer().is_one()).then(|| Expression::Number(value.numer().clone().into()));
        let above = Expression::Product(coefficient.into_iter().chain(rest.iter().cloned()).collect());
        return quotient(&above, &Expression::Number(value.denom().clone().into()), style);
    }
    let mut whole = Piece::new("", 0, Level::Product);
    for (position, factor) in factors.iter().enumerate() {
        let piece = factor_piece(factor, factors.get(position + 1), style);
        let between = if position == 0 { ("", 0) } else { whole.joint(&piece) };
        whole.append(between, &piece);
    }
    if factors.is_empty() { Piece::new("1", 50, Level::Atom) } else { whole }
}

/// A factor; the argument of a logarithm stands in brackets where what follows could be taken for part of it.
pub fn factor_piece(factor: &Expression, next: Option<&Expression>, style: Style) -> Piece {
    if let (Expression::Call(Function::Ln, argument), Some(next)) = (factor, next)
        && !matches!(next, Expression::Call(function, _) if *function != Function::Sqrt)
    {
        let whole = call(Function::Ln, argument, style);
        return match matches!(**argument, Expression::Symbol(_) | Expression::Object(_)) {
            true => applied("\\ln", 83, typeset(argument, style).bracketed()),
            false => whole,
        };
    }
    let piece = typeset(factor, style);
    let reaches_on = piece.level == Level::Ratio || matches!(factor, Expression::Total { .. });
    match next.is_some() && reaches_on {
        true => piece.bracketed(),
        false => piece.at_least(Level::Ratio),
    }
}

/// A fraction: with a bar where there is room, with a slash in scripts and, in running text, where both parts are simple.
fn quotient(above: &Expression, below: &Expression, style: Style) -> Piece {
    let slash = style == Style::Script || (style == Style::Text && is_simple(above) && is_simple(below));
    if slash {
        let mut whole = typeset(above, style).at_least(Level::Product);
        let below = typeset(below, style).at_least(Level::Scripted);
        whole.append(("/", 50), &below);
        return Piece { level: Level::Ratio, overhang: 0, ..whole };
    }
    let inner = if style == Style::Display { Style::Text } else { Style::Script };
    let (above, below) = (typeset(above, inner), typeset(below, inner));
    let natural = above.width.max(below.width);
    let width = if style == Style::Display { natural } else { natural * 8 / 10 };
    let height = 1 + above.height.max(below.height);
    Piece::new(format!("\\frac{{{}}}{{{}}}", above.tex, below.tex), width + 24, Level::Product).tall(height)
}

/// Whether an expression is a name, an integer, or a product or power of such.
fn is_simple(expression: &Expression) -> bool {
    match expression {
        Expression::Symbol(_) => true,
        Expression::Number(value) => value.is_integer() && !value.is_negative(),
        Expression::Object(object) => object.arguments.is_empty(),
        Expression::Power(base, exponent) => is_simple(base) && is_simple(exponent),
        Expression::Product(factors) => factors.len() <= 3 && factors.iter().all(is_simple),
        _ => false,
    }
}

fn power(base: &Expression, exponent: &Expression, style: Style) -> Piece {
    let base = typeset(base, style).at_least(Level::Atom);
    raise(base, exponent)
}

/// Puts an exponent on a unit.
pub fn raise(base: Piece, exponent: &Expression) -> Piece {
    let exponent = typeset(exponent, Style::Script);
    let width = base.width - base.overhang + base.overhang.max(exponent.script_width());
    let tex = format!("{}^{{{}}}", base.tex, exponent.tex);
    Piece::new(tex, width, Level::Scripted).around(&base).edged(base.starts, Edge::Plain)
}

/// Exponentials of arguments up to this width (as a script) are written as powers of e.
const SHORT_EXPONENT: u32 = 400;

fn call(function: Function, argument: &Expression, style: Style) -> Piece {
    let simple_ratio = matches!(argument, Expression::Quotient(above, below) if is_simple(above) && is_simple(below));
    let set = typeset(argument, if simple_ratio && style == Style::Display { Style::Text } else { style });
    match function {
        Function::Sqrt => Piece::new(format!("\\sqrt{{{}}}", set.tex), set.width + 90, Level::Atom).around(&set),
        Function::Exp => {
            let short = typeset(argument, Style::Script);
            match style != Style::Script && short.script_width() <= SHORT_EXPONENT {
                true => Piece::new(format!("e^{{{}}}", short.tex), 47 + short.script_width(), Level::Scripted),
                false => applied("\\exp", 150, set.bracketed()),
            }
        }
        Function::Ln if matches!(argument, Expression::Symbol(_) | Expression::Object(_)) => {
            let set = Piece { tex: apart(&set.tex), width: set.width + THIN, ..set };
            Piece { level: Level::Product, ..applied("\\ln", 83, set) }
        }
        Function::Ln => applied("\\ln", 83, set.bracketed()),
        Function::Ei => applied("\\operatorname{Ei}", 105, set.bracketed()),
        Function::Erf => applied("\\operatorname{erf}", 120, set.bracketed()),
        Function::Erfi => applied("\\operatorname{erfi}", 150, set.bracketed()),
        Function::LambertW => applied("\\operatorname{W}", 103, set.bracketed()),
    }
}

/// A function's name with its argument; the whole needs brackets before a script is put on it.
pub fn applied(function: &str, width: u32, argument: Piece) -> Piece {
    let tex = format!("{function}{}", argument.tex);
    let piece = Piece::new(tex, width + argument.width, Level::Scripted).around(&argument);
    piece.edged(Edge::Function, Edge::Function)
}

fn set_object(object: &Object) -> Piece {
    let head = set_name(&object.head);
    let (parts, commas) = read_subscripts(&object.subscripts);
    let (own, own_width) = set_parts(&parts, commas);
    let comma = if !head.below.is_empty() && !own.is_empty() { "," } else { "" };
    let below = format!("{}{comma}{own}", head.below);
    let below_width = head.below_width + own_width;
    let above = match &object.mark {
        None => String::new(),
        Some(Mark::Transpose) => "^{\\top}".to_string(),
        Some(Mark::Label(label)) => match set_parts(&[read_name(label).base], false).0 {
            set if read_name(label).subscripts.is_empty() => format!("^{{{set}}}"),
            _ => format!("^{{\\text{{{}}}}}", escape(label)),
        },
    };
    let scripts = if below.is_empty() { above.clone() } else { format!("_{{{below}}}{above}") };
    let mark_width = if above.is_empty() { 0 } else { 40 };
    let width = head.base_width + below_width.max(mark_width);
    let level = if above.is_empty() { Level::Atom } else { Level::Scripted };
    let mut piece = Piece { overhang: below_width, ..Piece::new(format!("{}{scripts}", head.base), width, level) };
    if !object.arguments.is_empty() {
        let mut arguments = Piece::new("", 0, Level::Atom);
        for (position, argument) in object.arguments.iter().enumerate() {
            arguments.append(if position == 0 { ("", 0) } else { (", ", 45) }, &typeset(argument, Style::Text));
        }
        piece.append(("", 0), &arguments.bracketed());
        piece = Piece { level: Level::Scripted, overhang: 0, ..piece };
    }
    piece
}

fn partial(of: &Expression, by: &[Expression], style: Style) -> Piece {
    let inner = if style == Style::Display { Style::Text } else { Style::Script };
    let order = if by.len() > 1 { format!("^{{{}}}", by.len()) } else { String::new() };
    let derivand = typeset(of, inner).at_least(Level::Product);
    let above = format!("\\partial{order}{}", apart(&derivand.tex));
    let mut below = Piece::new("", 0, Level::Product);
    for variable in by {
        let variable = typeset(variable, inner).at_least(Level::Product);
        let piece = Piece { tex: format!("\\partial{}", apart(&variable.tex)), width: variable.width + 58, ..variable };
        below.append(if below.tex.is_empty() { ("", 0) } else { (" \\, ", THIN) }, &piece);
    }
    let natural = (derivand.width + 58).max(below.width);
    match style {
        Style::Script => Piece::new(format!("{above}/{}", below.tex), derivand.width + 108 + below.width, Level::Ratio),
        Style::Text if by.len() == 1 => {
            Piece::new(format!("{above}/{}", below.tex), derivand.width + 108 + below.width, Level::Ratio)
        }
        Style::Text => {
            Piece::new(format!("\\frac{{{above}}}{{{}}}", below.tex), natural * 8 / 10 + 24, Level::Product).tall(1)
        }
        Style::Display => {
            Piece::new(format!("\\frac{{{above}}}{{{}}}", below.tex), natural + 24, Level::Product).tall(1)
        }
    }
}

fn total(index: &str, body: &Expression, style: Style) -> Piece {
    let body = typeset(body, style).at_least(Level::Product);
    let below = set_parts(&[read_name(index).base], false).0;
    let tex = format!("\\sum_{{{below}}} {}", body.tex);
    Piece::new(tex, body.width + 161, Level::Product).tall(body.height.max(1)).edged(Edge::Function, Edge::Function)
}
