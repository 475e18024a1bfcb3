//! Formulas on one line: where brackets, bars, slashes and signs go. Every markup is written from what is decided here.

use crate::algebra::formula::Function;
use crate::algebra::number::Rational;
use crate::render::expression::{Expression, Mark, Object, Range};
use crate::render::layout::{Edge, Level, Node, Piece, Sign, Style, THIN};
use crate::render::names::{Part, read_name, read_subscripts};
use crate::render::setting_names::{SetName, set_name, set_parts};
use num_traits::{One, Signed};

/// Sets an expression on one line.
pub fn typeset(expression: &Expression, style: Style) -> Piece {
    match expression {
        Expression::Number(value) => number(value, style),
        Expression::Symbol(symbol) => name(set_name(symbol)),
        Expression::Sum(terms) => sum(terms, style),
        Expression::Negative(inner) => typeset(inner, style).with_minus(),
        Expression::Product(factors) => product(factors, style),
        Expression::Quotient(above, below) => quotient(above, below, style),
        Expression::Power(base, exponent) => raise(typeset(base, style).at_least(Level::Atom), exponent),
        Expression::Call(function, argument) => call(*function, argument, style),
        Expression::Object(object) => set_object(object),
        Expression::Partial { of, by } => partial(of, by, style),
        Expression::Total { index, range, body } => total(index, range, body, style),
        Expression::Differential(inner) => {
            let inner = typeset(inner, style).at_least(Level::Scripted);
            let node = Node::Row(vec![Node::letter('d'), inner.node.clone()]);
            Piece::new(node, inner.width + 52, Level::Product).around(&inner)
        }
    }
}

fn number(value: &Rational, style: Style) -> Piece {
    if value.is_negative() {
        return number(&-value, style).with_minus();
    }
    let (above, below) = (value.numer().to_string(), value.denom().to_string());
    let digits = |text: String| Node::Part(Part::Number(text));
    let (piece, brackets) = if value.is_integer() {
        let width = 50 * above.len() as u32;
        (Piece::new(digits(above), width, Level::Atom), 0)
    } else if style == Style::Script {
        let width = 50 * (above.len() + below.len() + 1) as u32;
        let node = Node::Row(vec![digits(above), Node::Sign(Sign::Slash), digits(below)]);
        (Piece::new(node, width, Level::Ratio), 0)
    } else {
        let width = 40 * above.len().max(below.len()) as u32 + 24;
        let (above, below) = (Box::new(digits(above)), Box::new(digits(below)));
        (Piece::new(Node::Fraction { above, below, small: true }, width, Level::Product), 1)
    };
    Piece { brackets, ..piece.edged(Edge::Digit, Edge::Digit) }
}

fn name(set: SetName) -> Piece {
    let level = if set.has_superscript { Level::Scripted } else { Level::Atom };
    let edge = if matches!(set.base, Node::Part(Part::Word(_))) { Edge::Word } else { Edge::Plain };
    let width = set.base_width + set.below_width;
    let node = match set.below {
        None => set.base,
        Some(below) => Node::Scripts { base: Box::new(set.base), below: Some(Box::new(below)), above: None },
    };
    Piece { overhang: set.below_width, ..Piece::new(node, width, level).edged(edge, edge) }
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
    let mut whole = Piece::empty(Level::Sum);
    for (position, term) in terms.iter().enumerate() {
        let (minus, positive) = signed(term);
        let sign = match (position, style, minus) {
            (0, _, true) | (_, Style::Script, true) => Sign::TightMinus,
            (0, _, false) => Sign::Juxtaposed,
            (_, Style::Script, false) => Sign::TightPlus,
            (_, _, true) => Sign::Minus,
            (_, _, false) => Sign::Plus,
        };
        whole.append(sign, &typeset(&positive, style).at_least(Level::Ratio));
    }
    if terms.is_empty() { number(&Rational::from_integer(0.into()), style) } else { whole }
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
    let mut whole = Piece::empty(Level::Product);
    for (position, factor) in factors.iter().enumerate() {
        let piece = factor_piece(factor, factors.get(position + 1), style);
        let between = if position == 0 { Sign::Juxtaposed } else { whole.joint(&piece) };
        whole.append(between, &piece);
    }
    if factors.is_empty() { number(&Rational::one(), style) } else { whole }
}

/// A factor; the argument of a logarithm stands in brackets where what follows could be taken for part of it.
pub fn factor_piece(factor: &Expression, next: Option<&Expression>, style: Style) -> Piece {
    if let (Expression::Call(Function::Ln, argument), Some(next)) = (factor, next)
        && !matches!(next, Expression::Call(function, _) if !matches!(function, Function::Sqrt | Function::Exp))
        && stands_without_brackets(argument)
    {
        return applied(Function::Ln, typeset(argument, style).bracketed());
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
    if style == Style::Script || (style == Style::Text && is_simple(above) && is_simple(below)) {
        return slashed(typeset(above, style), typeset(below, style));
    }
    let inner = if style == Style::Display { Style::Text } else { Style::Script };
    let (above, below) = (typeset(above, inner), typeset(below, inner));
    barred(above, below, style)
}

fn slashed(above: Piece, below: Piece) -> Piece {
    let mut whole = above.at_least(Level::Product);
    whole.append(Sign::Slash, &below.at_least(Level::Scripted));
    Piece { level: Level::Ratio, overhang: 0, ..whole }
}

fn barred(above: Piece, below: Piece, style: Style) -> Piece {
    let natural = above.width.max(below.width);
    let width = if style == Style::Display { natural } else { natural * 8 / 10 };
    let height = 1 + above.height.max(below.height);
    let node = Node::Fraction { above: Box::new(above.node), below: Box::new(below.node), small: false };
    Piece { height, ..Piece::new(node, width + 24, Level::Product) }
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

/// Puts an exponent on a unit; over a subscript that is there.
pub fn raise(base: Piece, exponent: &Expression) -> Piece {
    let exponent = typeset(exponent, Style::Script);
    let width = base.width - base.overhang + base.overhang.max(exponent.script_width());
    let above = Some(Box::new(exponent.node));
    let node = match base.node.clone() {
        Node::Scripts { base, below, above: None } => Node::Scripts { base, below, above },
        other => Node::Scripts { base: Box::new(other), below: None, above },
    };
    Piece::new(node, width, Level::Scripted).around(&base).edged(base.starts, Edge::Plain)
}

/// Exponentials of arguments up to this width (as a script) are written as powers of e.
const SHORT_EXPONENT: u32 = 400;

fn call(function: Function, argument: &Expression, style: Style) -> Piece {
    let simple_ratio = matches!(argument, Expression::Quotient(above, below) if is_simple(above) && is_simple(below));
    let set = typeset(argument, if simple_ratio && style == Style::Display { Style::Text } else { style });
    match function {
        Function::Sqrt => Piece::new(Node::Root(Box::new(set.node.clone())), set.width + 115, Level::Atom).around(&set),
        Function::Exp if style != Style::Script => {
            let power = raise(Piece::new(Node::letter('e'), 47, Level::Atom), argument);
            if power.width <= 47 + SHORT_EXPONENT { power } else { applied(function, set.bracketed()) }
        }
        Function::Ln if stands_without_brackets(argument) => {
            let set = Piece { width: set.width + THIN, ..set };
            Piece { level: Level::Product, ..applied(function, set) }
        }
        _ => applied(function, set.bracketed()),
    }
}

/// ln x, but ln(x + y).
fn stands_without_brackets(argument: &Expression) -> bool {
    matches!(argument, Expression::Symbol(_) | Expression::Object(_))
}

/// A function's name with its argument; the whole needs brackets before a script is put on it.
fn applied(function: Function, argument: Piece) -> Piece {
    let node = Node::Row(vec![Node::Function(function), argument.node.clone()]);
    let piece = Piece::new(node, function_width(function) + argument.width, Level::Scripted).around(&argument);
    piece.edged(Edge::Function, Edge::Function)
}

/// The width of a function's name.
pub fn function_width(function: Function) -> u32 {
    match function {
        Function::Ln | Function::Sqrt => 83,
        Function::Exp | Function::Erfi => 150,
        Function::Ei | Function::LambertW => 105,
        Function::Erf => 120,
    }
}

fn set_object(object: &Object) -> Piece {
    let head = set_name(&object.head);
    let (parts, commas) = read_subscripts(&object.subscripts);
    let (own, own_width) = set_parts(&parts, commas);
    let below = match (head.below, own) {
        (Some(first), Some(second)) => Some(Node::Row(vec![first, Node::Sign(Sign::TightComma), second])),
        (first, second) => first.or(second),
    };
    let below_width = head.below_width + own_width;
    let above = object.mark.as_ref().map(set_mark);
    let width = head.base_width + below_width.max(if above.is_some() { 60 } else { 0 });
    let level = if above.is_some() { Level::Scripted } else { Level::Atom };
    let node = match below.is_some() || above.is_some() {
        false => head.base,
        true => Node::Scripts { base: Box::new(head.base), below: below.map(Box::new), above: above.map(Box::new) },
    };
    let piece = Piece { overhang: below_width, ..Piece::new(node, width, level) };
    if object.arguments.is_empty() { piece } else { with_arguments(piece, &object.arguments) }
}

fn set_mark(mark: &Mark) -> Node {
    match mark {
        Mark::Transpose => Node::Sign(Sign::Transpose),
        Mark::Label(label) => match read_name(label) {
            printed if printed.subscripts.is_empty() => Node::Part(printed.base),
            _ => Node::Part(Part::Word(label.clone())),
        },
    }
}

fn with_arguments(head: Piece, arguments: &[Expression]) -> Piece {
    let mut inside = Piece::empty(Level::Atom);
    for (position, argument) in arguments.iter().enumerate() {
        inside.append(if position == 0 { Sign::Juxtaposed } else { Sign::Comma }, &typeset(argument, Style::Text));
    }
    let inside = inside.bracketed();
    let node = Node::Row(vec![head.node, inside.node.clone()]);
    Piece::new(node, head.width + inside.width, Level::Scripted).around(&inside)
}

fn partial(of: &Expression, by: &[Expression], style: Style) -> Piece {
    let inner = if style == Style::Display { Style::Text } else { Style::Script };
    let mut sign = Node::Sign(Sign::Partial);
    if by.len() > 1 {
        let order = Box::new(Node::Part(Part::Number(by.len().to_string())));
        sign = Node::Scripts { base: Box::new(sign), below: None, above: Some(order) };
    }
    let above = with_partial(sign, typeset(of, inner));
    let mut below = Piece::empty(Level::Product);
    let squared = match by {
        [first, second] if first == second => {
            let two = Expression::Number(Rational::from_integer(2.into()));
            vec![Expression::Power(Box::new(first.clone()), Box::new(two))]
        }
        _ => by.to_vec(),
    };
    for variable in &squared {
        let joint = if below.node.is_empty() { Sign::Juxtaposed } else { Sign::Thin };
        below.append(joint, &with_partial(Node::Sign(Sign::Partial), typeset(variable, inner)));
    }
    match style {
        Style::Script => slashed(above, below),
        Style::Text if by.len() == 1 => {
            let mut whole = above;
            whole.append(Sign::Slash, &below);
            Piece { level: Level::Ratio, overhang: 0, ..whole }
        }
        _ => barred(above, below, style),
    }
}

fn with_partial(sign: Node, derivand: Piece) -> Piece {
    let derivand = derivand.at_least(Level::Product);
    let node = Node::Row(vec![sign, derivand.node.clone()]);
    Piece::new(node, Sign::Partial.width() + derivand.width, Level::Product).around(&derivand)
}

/// What stands below the sign of a sum: j, j ≠ i, or k ∈ food.
fn below_total(index: &str, range: &Range) -> Node {
    let part = |name: &str| Node::Part(read_name(name).base);
    let mut below = vec![part(index)];
    if let Some(except) = &range.except {
        below.extend([Node::Sign(Sign::Unequal), part(except)]);
    }
    if let Some(group) = &range.group {
        below.extend([Node::Sign(Sign::In), part(group)]);
    }
    if below.len() == 1 { part(index) } else { Node::Row(below) }
}

fn total(index: &str, range: &Range, body: &Expression, style: Style) -> Piece {
    let body = typeset(body, style).at_least(Level::Product);
    let (base, below) = (
        Box::new(Node::Sign(if range.product { Sign::Product } else { Sign::Sum })),
        Some(Box::new(below_total(index, range))),
    );
    let node = Node::Row(vec![Node::Scripts { base, below, above: None }, Node::Sign(Sign::Juxtaposed), body.node]);
    let piece = Piece::new(node, Sign::Sum.width() + body.width, Level::Product);
    let whole = Piece { height: body.height.max(1), brackets: body.brackets, ..piece };
    whole.edged(Edge::Function, Edge::Function)
}
