//! Messages for formulas that cannot be computed, in the author's own words.

use crate::algebra::generator::Blocked;
use crate::language::{Diagnostic, Function, Span};

use super::evaluate::Evaluator;
use super::resolve::Node;
use super::script::plain_text;

/// Where an indexed formula was met: ` (for bread, fish)`.
fn place(evaluator: &Evaluator<'_>, environment: &[usize]) -> String {
    let goods = &evaluator.script.declarations.names.goods;
    let named: Vec<&str> = environment.iter().filter_map(|good| goods.get(*good)).map(String::as_str).collect();
    match named.len() {
        0 => String::new(),
        1 => format!(" (first for good {})", named[0]),
        _ => format!(" (first for goods {})", named.join(", ")),
    }
}

/// A formula as it is written; one in LaTeX between `$` signs, so that it can be put back into the file.
fn written(evaluator: &Evaluator<'_>, node: &Node) -> String {
    let text = plain_text(evaluator.source.slice(node.span));
    let in_latex = evaluator.script.latex.iter().any(|statement| statement.meets(node.span));
    let marked = text.contains(['\\', '{']) || text.contains("_") && text.contains(' ');
    if in_latex && marked && !text.contains('$') { format!("${text}$") } else { text }
}

pub(super) fn too_deep(span: Span) -> Diagnostic {
    Diagnostic::error(span, "formulas refer to each other too deeply here")
        .remedy("state abbreviations and demands before they are used, or use fewer levels")
}

pub(super) fn circular(span: Span, name: &str) -> Diagnostic {
    Diagnostic::error(span, format!("`{name}` is defined by way of itself")).remedy("break the circle")
}

pub(super) fn circular_quantity(span: Span, good: &str) -> Diagnostic {
    Diagnostic::error(span, format!("the demand for {good} is defined by way of itself"))
        .remedy("solve the equations for the quantities first")
}

pub(super) fn utility_in_demand(span: Span) -> Diagnostic {
    Diagnostic::error(span, "a Marshallian demand cannot depend on the utility level")
        .remedy("write it in prices and income")
}

pub(super) fn division_by_zero(evaluator: &Evaluator<'_>, divisor: &Node) -> Diagnostic {
    let text = written(evaluator, divisor);
    Diagnostic::error(divisor.span, format!("the divisor `{text}` is zero"))
        .remedy("divide by something that is not zero")
}

/// A base that is not known to be positive, where it must be.
pub(super) fn power(
    evaluator: &Evaluator<'_>,
    blocked: &Blocked,
    node: &Node,
    base: &Node,
    environment: &[usize],
) -> Diagnostic {
    let (whole, text) = (written(evaluator, node), written(evaluator, base));
    let place = place(evaluator, environment);
    match blocked {
        Blocked::SignUnknown(_) => {
            let message = format!("`{whole}` needs a positive base, and `{text}` is not known to be positive{place}");
            Diagnostic::error(base.span, message)
                .remedy(format!("add `assume {text} > 0`, or assumptions from which it follows"))
        }
        Blocked::NotPositive(_) => {
            let message = format!("`{whole}` needs a positive base, and `{text}` is nowhere positive{place}");
            Diagnostic::error(base.span, message).remedy("check the signs of the base")
        }
        _ => blocked_anyway(evaluator, blocked, node, environment),
    }
}

/// A function that is not defined for its argument.
pub(super) fn call(
    evaluator: &Evaluator<'_>,
    blocked: &Blocked,
    function: Function,
    node: &Node,
    argument: &Node,
    environment: &[usize],
) -> Diagnostic {
    let text = written(evaluator, argument);
    let (word, place) = (function.word(), place(evaluator, environment));
    match blocked {
        Blocked::SignUnknown(_) => {
            let message =
                format!("`{word}` needs a positive argument, and `{text}` cannot be shown to be positive{place}");
            Diagnostic::error(argument.span, message)
                .remedy(format!("add `assume {text} > 0`, with a sign for each of its factors"))
        }
        Blocked::NotPositive(_) => nowhere_defined(evaluator, function, argument, environment),
        Blocked::OutsideDomain(..) => outside_domain(evaluator, function, argument),
        _ => blocked_anyway(evaluator, blocked, node, environment),
    }
}

/// A logarithm, root or the like whose argument is never positive.
pub(super) fn nowhere_defined(
    evaluator: &Evaluator<'_>,
    function: Function,
    argument: &Node,
    environment: &[usize],
) -> Diagnostic {
    let text = written(evaluator, argument);
    let (word, place) = (function.word(), place(evaluator, environment));
    let message = match function {
        Function::LambertW => format!("`{word}` is defined from -1/e on, and `{text}` lies below{place}"),
        _ => format!("`{word}` needs a positive argument, and `{text}` is nowhere positive{place}"),
    };
    Diagnostic::error(argument.span, message).remedy("check the signs of the argument")
}

/// An argument at which the function has no value.
pub(super) fn outside_domain(evaluator: &Evaluator<'_>, function: Function, argument: &Node) -> Diagnostic {
    let text = written(evaluator, argument);
    Diagnostic::error(argument.span, format!("`{}` is not defined for `{text}`", function.word()))
        .remedy("check the argument")
}

/// Whatever else the field refuses.
pub(super) fn blocked(evaluator: &Evaluator<'_>, blocked: &Blocked, node: &Node, environment: &[usize]) -> Diagnostic {
    match blocked {
        Blocked::DivisionByZero => division_by_zero(evaluator, node),
        _ => blocked_anyway(evaluator, blocked, node, environment),
    }
}

fn blocked_anyway(evaluator: &Evaluator<'_>, blocked: &Blocked, node: &Node, environment: &[usize]) -> Diagnostic {
    let text = written(evaluator, node);
    let place = place(evaluator, environment);
    let (message, remedy) = match blocked {
        Blocked::DivisionByZero => (format!("a divisor in `{text}` is zero{place}"), "check its divisors"),
        Blocked::SignUnknown(_) => {
            (format!("the sign of a part of `{text}` is not known{place}"), "add the assumption that it is positive")
        }
        Blocked::NotPositive(_) => {
            (format!("a part of `{text}` that must be positive is not{place}"), "check the signs of its parts")
        }
        Blocked::OutsideDomain(..) => (format!("`{text}` is not defined{place}"), "check its argument"),
        Blocked::UnknownSymbol => (format!("`{text}` holds a name that is not known{place}"), "declare it"),
        Blocked::ExponentTooLarge => (format!("an exponent in `{text}` is too large{place}"), "use a smaller exponent"),
    };
    Diagnostic::error(node.span, message).remedy(remedy)
}
