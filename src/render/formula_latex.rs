//! Laid-out formulas written in LaTeX (amsmath).

use crate::algebra::formula::{Formula, Function};
use crate::render::expression::Expression;
use crate::render::latex_escape::escape;
use crate::render::layout::{Node, Sign, Size, Style};
use crate::render::names::Part;
use crate::render::typeset::typeset;

/// The formula as it stands in a display, unbroken.
pub fn latex(formula: &Formula) -> String {
    tex(&typeset(&Expression::from(formula), Style::Display).node)
}

/// A laid-out formula in LaTeX.
pub fn tex(node: &Node) -> String {
    let mut out = String::new();
    write(node, &mut out);
    out
}

fn write(node: &Node, out: &mut String) {
    match node {
        Node::Row(nodes) => nodes.iter().for_each(|each| write(each, out)),
        Node::Part(Part::Letter(letter)) => put(&letter.to_string(), out),
        Node::Part(Part::Greek(name)) => put(&format!("\\{name}"), out),
        Node::Part(Part::Number(digits)) => put(digits, out),
        Node::Part(Part::Word(word)) => put(&format!("\\text{{{}}}", escape(word)), out),
        Node::Declared(latex) => put(latex, out),
        Node::Sign(sign) => put(sign_latex(*sign), out),
        Node::Function(function) => put(function_latex(*function), out),
        Node::Scripts { base, below, above } => {
            match **base {
                Node::Declared(ref latex) if below.is_some() && latex.contains(['_', '^', '\'']) => {
                    put(&format!("{{{latex}}}"), out);
                }
                _ => write(base, out),
            }
            for (mark, script) in [('_', below), ('^', above)] {
                if let Some(script) = script {
                    out.push(mark);
                    in_braces(script, out);
                }
            }
        }
        Node::Fraction { above, below, small } => write_fraction(above, below, *small, out),
        Node::Root(inner) => {
            put("\\sqrt", out);
            in_braces(inner, out);
        }
        Node::Open(size) => put(bracket(*size).0, out),
        Node::Close(size) => put(bracket(*size).1, out),
    }
}

fn write_fraction(above: &Node, below: &Node, small: bool, out: &mut String) {
    put(if small { "\\tfrac" } else { "\\frac" }, out);
    match (above, below) {
        (Node::Part(Part::Number(first)), Node::Part(Part::Number(second)))
            if small && first.len() == 1 && second.len() == 1 =>
        {
            out.push_str(first);
            out.push_str(second);
        }
        _ => {
            in_braces(above, out);
            in_braces(below, out);
        }
    }
}

fn in_braces(node: &Node, out: &mut String) {
    out.push('{');
    write(node, out);
    out.push('}');
}

/// Appends LaTeX, with a blank where it would otherwise become part of the command in front of it.
fn put(next: &str, out: &mut String) {
    if next.starts_with(|each: char| each.is_ascii_alphanumeric()) && ends_in_command(out) {
        out.push(' ');
    }
    out.push_str(next);
}

/// Whether a letter put after `tex` would be taken for part of a command's name.
fn ends_in_command(tex: &str) -> bool {
    tex.rfind('\\').is_some_and(|slash| {
        let name = &tex[slash + 1..];
        !name.is_empty() && name.bytes().all(|each| each.is_ascii_alphabetic())
    })
}

fn sign_latex(sign: Sign) -> &'static str {
    match sign {
        Sign::Plus => " + ",
        Sign::Minus => " - ",
        Sign::TightPlus => "+",
        Sign::TightMinus => "-",
        Sign::LinePlus => "{}+ ",
        Sign::LineMinus => "{}- ",
        Sign::LineTimes => "{}\\times ",
        Sign::Juxtaposed => " ",
        Sign::Thin => " \\, ",
        Sign::Dot => " \\cdot ",
        Sign::Slash => "/",
        Sign::Comma => ", ",
        Sign::TightComma => ",",
        Sign::Partial => "\\partial",
        Sign::Sum => "\\sum",
        Sign::Product => "\\prod",
        Sign::Unequal => " \\neq ",
        Sign::In => " \\in ",
        Sign::Transpose => "\\top",
    }
}

fn function_latex(function: Function) -> &'static str {
    match function {
        Function::Ln => "\\ln",
        Function::Exp => "\\exp",
        Function::Sqrt => "\\sqrt",
        Function::Ei => "\\operatorname{Ei}",
        Function::Erf => "\\operatorname{erf}",
        Function::Erfi => "\\operatorname{erfi}",
        Function::LambertW => "\\operatorname{W}",
    }
}

fn bracket(size: Size) -> (&'static str, &'static str) {
    match size {
        Size::Normal => ("(", ")"),
        Size::Big => ("\\bigl(", "\\bigr)"),
        Size::Bigger => ("\\Bigl(", "\\Bigr)"),
        Size::Tall => ("\\biggl(", "\\biggr)"),
        Size::Fitting => ("\\left(", "\\right)"),
    }
}
