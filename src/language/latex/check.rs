//! A look over LaTeX before it is parsed: brackets that match, commands that are known, no deeper than the bound.

use super::super::brackets::MAX_NESTING;
use super::super::diagnostic::Diagnostic;
use super::super::nearest::nearest;
use super::prepared::{Prepared, command_length};

/// Checks a prepared text.
///
/// # Errors
/// The first bracket without its partner, the first one too deep, the first command that is not read.
pub fn check(prepared: &Prepared) -> Result<(), Diagnostic> {
    let text = prepared.text.as_str();
    let mut open: Vec<(&str, usize)> = Vec::new();
    let mut at = 0;
    while at < text.len() {
        let rest = &text[at..];
        let Some(first) = rest.chars().next() else { break };
        let length = if first == '\\' { command_length(rest).min(rest.len()) } else { first.len_utf8() };
        let token = &rest[..length];
        match token {
            "(" | "[" | "{" | "\\{" | "\\lbrace" => {
                open.push((token, at));
                if open.len() > MAX_NESTING {
                    let message = format!("brackets are nested more than {MAX_NESTING} deep here, which is the bound");
                    let span = prepared.span(at, at + length);
                    return Err(Diagnostic::error(span, message).remedy("name the inner parts with `let`"));
                }
            }
            ")" | "]" | "}" | "\\}" | "\\rbrace" => close(&mut open, token, at, prepared)?,
            _ if first == '\\' => command(token, &rest[length..], at, prepared)?,
            _ => {}
        }
        at += length;
    }
    match open.pop() {
        None => Ok(()),
        Some((bracket, at)) => Err(unclosed(bracket, at, prepared)),
    }
}

fn close(open: &mut Vec<(&str, usize)>, token: &str, at: usize, prepared: &Prepared) -> Result<(), Diagnostic> {
    let here = prepared.span(at, at + token.len());
    let Some((bracket, opened)) = open.pop() else {
        let remedy = format!("take it out, or put a `{}` where it should open", opener(token));
        return Err(Diagnostic::error(here, format!("`{token}` closes a bracket that was never opened")).remedy(remedy));
    };
    if closer(bracket) == closer_form(token) {
        return Ok(());
    }
    let before = prepared.text[..opened].trim_end();
    let before = before.strip_suffix("\\left").unwrap_or(before).trim_end();
    if matches!(bracket, "(" | "[") && matches!(token, ")" | "]") && before.ends_with("\\in") {
        return Ok(());
    }
    let message = format!("`{bracket}` is closed by `{token}`");
    let span = prepared.span(opened, opened + bracket.len()).join(here);
    Err(Diagnostic::error(span, message).remedy(format!("close it with `{}`", closer(bracket))))
}

fn unclosed(bracket: &str, at: usize, prepared: &Prepared) -> Diagnostic {
    let span = prepared.span(at, at + bracket.len());
    let message = format!("this `{bracket}` is never closed");
    Diagnostic::error(span, message).remedy(format!("close it with `{}`", closer(bracket)))
}

fn closer(open: &str) -> &'static str {
    match open {
        "(" => ")",
        "[" => "]",
        "{" => "}",
        _ => "\\}",
    }
}

fn closer_form(token: &str) -> &str {
    if token == "\\rbrace" { "\\}" } else { token }
}

fn opener(close: &str) -> &'static str {
    match close {
        ")" => "(",
        "]" => "[",
        "}" => "{",
        _ => "\\{",
    }
}

/// Refuses a command that the grammar does not know.
fn command(token: &str, behind: &str, at: usize, prepared: &Prepared) -> Result<(), Diagnostic> {
    let name = &token[1..];
    if !name.starts_with(|letter: char| letter.is_ascii_alphabetic()) {
        let known = name.starts_with(['\\', ',', ';', ':', '!', ' ', '>', '/', '\n', '_', '-', '{', '}', '[', ']']);
        return if known { Ok(()) } else { Err(unknown(token, at, prepared)) };
    }
    let point = behind.trim_start().starts_with('.');
    if point && (name == "left" || name == "right") {
        let message = format!("`{token}.` is a bracket that is not there");
        let span = prepared.span(at, at + token.len() + 1);
        return Err(Diagnostic::error(span, message).remedy("write the formula without \\left. and \\right."));
    }
    match KNOWN.split_whitespace().any(|known| known == name) {
        true => Ok(()),
        false => Err(unknown(token, at, prepared)),
    }
}

fn unknown(token: &str, at: usize, prepared: &Prepared) -> Diagnostic {
    let message = format!("`{token}` is not read in formulas");
    let diagnostic = Diagnostic::error(prepared.span(at, at + token.len()), message);
    let remedy = match &token[1..] {
        "partial" => {
            "derivatives are not written in formulas; write `claim slutsky[…] = …` or `claim elasticity[…] = …`"
        }
        "int" => "integrals are not read; write the closed form",
        "infty" => "there is no infinity in formulas",
        "cases" => "write one statement for each case",
        "pm" | "mp" => "write + or -",
        "binom" | "choose" => "write the number",
        "min" | "max" => "there are no minima and maxima in formulas; write `assume`, and one case at a time",
        name => match nearest(name, KNOWN.split_whitespace()) {
            Some(near) => return diagnostic.remedy(format!("did you mean `\\{near}`?")),
            None => "if it is a command of your own, define it: \\newcommand{…}{…} on a line of the model file",
        },
    };
    diagnostic.remedy(remedy)
}

/// The commands that the grammar reads.
const KNOWN: &str = "
    alpha beta gamma delta epsilon varepsilon zeta eta theta vartheta iota kappa varkappa lambda mu nu xi omicron pi
    varpi rho varrho sigma varsigma tau upsilon phi varphi chi psi omega Gamma Delta Theta Lambda Xi Pi Sigma Upsilon
    Phi Psi Omega ell hbar imath jmath wp Re Im nabla flat natural sharp infty aleph
    frac tfrac dfrac cfrac sqrt ln log exp sum prod cdot times ast div
    left right bigl bigr Bigl Bigr biggl biggr Biggl Biggr big Big bigg Bigg lbrace rbrace
    operatorname mathrm textrm textit textnormal text mathit mathsf mathtt mbox
    mathbf boldsymbol bm mathcal mathbb mathfrak vec bar hat tilde dot ddot check breve acute grave overline underline
    widehat widetilde mathring underbrace overbrace
    quad qquad nonumber notag displaystyle textstyle limits nolimits allowbreak thinspace hfill relax label tag hspace
    mspace vspace phantom begin end
    star prime dagger circ top
    equiv coloneqq leqslant leq le geqslant geq ge neq ne lt gt in forall dots dotsc ldots cdots";
