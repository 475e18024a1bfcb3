//! Formulas in the model file's own syntax, so that what is printed can be read back.
//!
//! `^` binds tightest and groups to the right, then the minus sign, then `*` and `/`, then `+` and `-`. Brackets stand
//! where these rules need them, and around every exponent that is more than a name or a number.

use crate::algebra::formula::{Formula, Function};
use crate::algebra::number::Rational;
use crate::language::Level;
use crate::render::expression::{Expression, Mark, Object};
use num_traits::{One, Signed};
use std::fmt::Write;

/// The formula in the syntax of model files: `m*p_1^(-s)/(a_1*p_1^(1 - s) + a_2*p_2^(1 - s))`.
pub fn plain(formula: &Formula) -> String {
    plain_expression(&Expression::from(formula))
}

/// The expression in the syntax of model files; objects and derivatives, which that syntax does not have, are written
/// as `x_1(p, m)` and `∂x_1/∂p_2`.
pub fn plain_expression(expression: &Expression) -> String {
    let mut out = String::new();
    write_at(expression, Level::Sum, &mut out);
    out
}

fn level(expression: &Expression) -> Level {
    match expression {
        Expression::Number(value) if value.is_negative() => Level::Negative,
        Expression::Number(value) if value.is_integer() => Level::Atom,
        Expression::Sum(_) => Level::Sum,
        Expression::Negative(_) => Level::Negative,
        Expression::Number(_) | Expression::Product(_) | Expression::Quotient(_, _) => Level::Product,
        Expression::Partial { .. } | Expression::Differential(_) => Level::Product,
        Expression::Power(_, _) => Level::Power,
        Expression::Symbol(_) | Expression::Call(_, _) | Expression::Object(_) | Expression::Total { .. } => {
            Level::Atom
        }
    }
}

/// Writes the expression, in brackets if it holds together less tightly than `least`.
fn write_at(expression: &Expression, least: Level, out: &mut String) {
    if level(expression) < least {
        out.push('(');
        write_bare(expression, out);
        out.push(')');
    } else {
        write_bare(expression, out);
    }
}

fn write_bare(expression: &Expression, out: &mut String) {
    match expression {
        Expression::Number(value) => write_number(value, out),
        Expression::Symbol(symbol) => out.push_str(&symbol.plain),
        Expression::Sum(terms) => write_sum(terms, out),
        Expression::Negative(inner) => {
            out.push('-');
            write_at(inner, Level::Product, out);
        }
        Expression::Product(factors) => write_product(factors, out),
        Expression::Quotient(above, below) => {
            write_at(above, Level::Product, out);
            out.push('/');
            write_at(below, Level::Power, out);
        }
        Expression::Power(base, exponent) => {
            write_at(base, Level::Atom, out);
            out.push('^');
            write_at(exponent, Level::Atom, out);
        }
        Expression::Call(function, argument) => {
            out.push_str(function_name(*function));
            out.push('(');
            write_bare(argument, out);
            out.push(')');
        }
        Expression::Object(object) => write_object(object, out),
        Expression::Partial { of, by } => write_partial(of, by, out),
        Expression::Total { index, range, body } => {
            let kind = if range.product { "product" } else { "sum" };
            let except = range.except.as_ref().map(|good| format!(" != {good}")).unwrap_or_default();
            let group = range.group.as_ref().map(|group| format!(" in {group}")).unwrap_or_default();
            let _ = write!(out, "{kind} over {index}{except}{group} of (");
            write_bare(body, out);
            out.push(')');
        }
        Expression::Differential(inner) => {
            out.push('d');
            write_at(inner, Level::Atom, out);
        }
    }
}

/// The word for a function in the syntax of model files.
pub fn function_name(function: Function) -> &'static str {
    match function {
        Function::Ln => "ln",
        Function::Exp => "exp",
        Function::Sqrt => "sqrt",
        Function::Ei => "Ei",
        Function::Erf => "erf",
        Function::Erfi => "erfi",
        Function::LambertW => "lambertw",
    }
}

fn write_number(value: &Rational, out: &mut String) {
    let _ = write!(out, "{value}");
}

fn write_sum(terms: &[Expression], out: &mut String) {
    for (position, term) in terms.iter().enumerate() {
        match term {
            _ if position == 0 => write_at(term, Level::Negative, out),
            Expression::Negative(inner) => {
                out.push_str(" - ");
                write_at(inner, Level::Product, out);
            }
            Expression::Number(value) if value.is_negative() => {
                out.push_str(" - ");
                write_number(&-value, out);
            }
            _ => {
                out.push_str(" + ");
                write_at(term, Level::Product, out);
            }
        }
    }
    if terms.is_empty() {
        out.push('0');
    }
}

/// A fractional coefficient is split, 3/2 x y into `3*x*y/2`, unless a power stands last: x^2/2 looks like a mistake.
fn write_product(factors: &[Expression], out: &mut String) {
    let start = out.len();
    let mut divisor = None;
    let mut rest = factors;
    if let [Expression::Number(value), others @ ..] = factors
        && value.is_positive()
        && !others.is_empty()
        && !matches!(others, [.., Expression::Power(_, _)] if !value.is_integer())
    {
        if !value.numer().is_one() {
            let _ = write!(out, "{}", value.numer());
        }
        divisor = Some(value.denom()).filter(|denominator| !denominator.is_one());
        rest = others;
    }
    for factor in rest {
        let least = match out.len() == start {
            true => Level::Product,
            false => Level::Power,
        };
        if out.len() > start {
            out.push('*');
        }
        write_at(factor, least, out);
    }
    if out.len() == start {
        out.push('1');
    }
    if let Some(denominator) = divisor {
        let _ = write!(out, "/{denominator}");
    }
}

fn write_object(object: &Object, out: &mut String) {
    out.push_str(&object.head.plain);
    let subscripts = &object.subscripts;
    match subscripts.as_slice() {
        [] => {}
        [only] => {
            let _ = write!(out, "_{only}");
        }
        several if several.iter().all(|each| each.chars().count() == 1) => {
            let _ = write!(out, "_{}", several.concat());
        }
        several => {
            let _ = write!(out, "[{}]", several.join(","));
        }
    }
    match &object.mark {
        None => {}
        Some(Mark::Transpose) => out.push('\''),
        Some(Mark::Label(label)) => {
            let _ = write!(out, "^{label}");
        }
    }
    if !object.arguments.is_empty() {
        let arguments: Vec<String> = object.arguments.iter().map(plain_expression).collect();
        let _ = write!(out, "({})", arguments.join(", "));
    }
}

fn write_partial(of: &Expression, by: &[Expression], out: &mut String) {
    out.push('∂');
    if by.len() > 1 {
        let _ = write!(out, "^{} ", by.len());
    }
    write_derivand(of, out);
    out.push('/');
    if let [first, second] = by
        && first == second
    {
        out.push('∂');
        write_derivand(first, out);
        out.push_str("^2");
        return;
    }
    let bracketed = by.len() > 1;
    if bracketed {
        out.push('(');
    }
    for (position, variable) in by.iter().enumerate() {
        if position > 0 {
            out.push(' ');
        }
        out.push('∂');
        write_derivand(variable, out);
    }
    if bracketed {
        out.push(')');
    }
}

/// A function reads better with a space after the sign: `∂ ln(x_1)`.
fn write_derivand(expression: &Expression, out: &mut String) {
    if matches!(expression, Expression::Call(_, _)) {
        out.push(' ');
    }
    write_at(expression, Level::Atom, out);
}
