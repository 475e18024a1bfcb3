//! Displayed equations as statements: what each defines is told by its left side, the declarations, and the word in
//! front of the display.

use pest::Parser;
use pest::iterators::Pair;

use super::super::diagnostic::Diagnostic;
use super::super::syntax::*;
use super::grammar::{LatexParser, Rule, parts as parts_of};
use super::left::{self, Left, Measure, left};
use super::lexicon::{Known, Lexicon, Role};
use super::names::Key;
use super::symbols::splits;
use super::terms::Formulas;
use super::{Reading, prepare, read};

/// The word in front of a display.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Word {
    /// None: what each equation defines is told by its left side.
    Bare,
    /// `demand`, `share`, `outlay`, `log demand`.
    Form(Form),
    /// `let`.
    Let,
    /// `given`.
    Given,
    /// `claim`.
    Claim,
    /// `assume`.
    Assume,
    /// `inverse`.
    Inverse,
}

/// Whether a text begins with a display, or with a formula between `$` signs.
pub fn begins_display(text: &str) -> bool {
    text.starts_with('$') || text.starts_with("\\[") || text.starts_with("\\begin")
}

/// The statements of a display that starts at `offset` of its file, each with its place.
pub fn statements(text: &str, offset: usize, word: Word, lexicon: &Lexicon) -> Reading<Vec<(Statement, Span)>> {
    read(Rule::block, text, offset, lexicon, |formulas, parts| {
        let mut found = Vec::new();
        let mut assumed = Vec::new();
        for part in parts.filter(|part| part.as_rule() == Rule::statement) {
            let span = formulas.span(&part);
            if word == Word::Assume {
                assumed.extend(left::relation(formulas, part));
            } else if let Some(statement) = statement(formulas, part, word, span) {
                found.push((statement, span));
            }
        }
        if let (Some(first), Some(last)) = (assumed.first(), assumed.last()) {
            let span = first.span.join(last.span);
            found.push((Statement::Assume(assumed), span));
        }
        found
    })
}

/// The names that a display defines, in the order of its equations; the right sides are not looked at. None where the
/// display cannot be parsed.
pub fn names_defined(text: &str, offset: usize, word: Word, lexicon: &Lexicon) -> Option<Vec<Known>> {
    let prepared = prepare(text, offset, lexicon).ok()?;
    let pairs = LatexParser::parse(Rule::block, &prepared.text).ok()?;
    let formulas = Formulas::new(&prepared, lexicon);
    let statements = pairs.into_iter().flat_map(Pair::into_inner).filter(|part| part.as_rule() == Rule::statement);
    let sides = statements.filter_map(|statement| statement.into_inner().next());
    let lefts = sides.filter_map(|side| left(&side, &formulas));
    Some(lefts.filter(|left| defines_name(left, word, lexicon)).map(|left| known(&left, lexicon)).collect())
}

/// Whether an equation with this left side is an abbreviation.
fn defines_name(left: &Left, word: Word, lexicon: &Lexicon) -> bool {
    match word {
        Word::Let => true,
        Word::Bare => left.role(lexicon).is_none() && bare_form(left, lexicon) == BareForm::Name,
        _ => false,
    }
}

/// The abbreviation that a left side defines.
fn known(left: &Left, lexicon: &Lexicon) -> Known {
    let declared = declared(left, lexicon);
    let below = if declared.indices.is_empty() { super::names::joined(&left.below) } else { String::new() };
    let base = left.bases.first().cloned().unwrap_or_default();
    let key = Key { base, below, above: left.above.clone() };
    let (arity, arguments) = (declared.indices.len(), left.arguments.clone());
    Known { name: declared.name.text, arity, role: Role::Abbreviation, key, plain: None, arguments }
}

/// A left side as the declaration of a name.
fn declared(left: &Left, lexicon: &Lexicon) -> Declared {
    let indices = splits(lexicon, &left.below, left.below.iter().filter(|token| token.text != ",").count(), &[]);
    let free = |index: &Index| match index {
        Index::Name(name) => lexicon.good(name).is_none().then(|| name.clone()),
        Index::Number(_) => None,
    };
    let names: Option<Vec<String>> =
        indices.first().map(|indices| indices.iter().map(|(index, _)| free(index)).collect()).unwrap_or_default();
    let indices = names.filter(|names| !names.is_empty()).unwrap_or_default();
    let below = super::names::joined(&left.below);
    let base: String = left.base().chars().filter(|letter| letter.is_alphanumeric()).collect();
    let text = match below.is_empty() || !indices.is_empty() {
        true => base,
        false => format!("{base}_{below}"),
    };
    let indices: Vec<Name> = indices.into_iter().map(|text| Name { text, span: left.span }).collect();
    let form =
        if indices.is_empty() { left.form.clone() } else { left.form.split('_').next().unwrap_or("").to_string() };
    let latex = super::super::latex_form::latex_form(&form).ok();
    Declared { name: Name { text, span: left.span }, indices, latex, span: left.span }
}

/// The statement that an equation is.
fn statement(formulas: &mut Formulas<'_>, pair: Pair<Rule>, word: Word, span: Span) -> Option<Statement> {
    let mut parts = parts_of(pair.clone());
    let side = parts.next()?;
    let sign = parts.next()?;
    let value = parts.next();
    let is_equation = sign.as_rule() == Rule::relation && left::comparison(sign.as_str()) == Comparison::Equal;
    let found = left(&side, formulas).filter(|_| is_equation && parts.next().is_none());
    if word == Word::Claim {
        return claim(formulas, pair, found, value, span);
    }
    let Some(found) = found else {
        let text = formulas.words(side.as_span().start(), side.as_span().end());
        let several = formulas.words(span.start, span.end).is_empty();
        formulas.report(if is_equation && !several && value.is_some() && parts_left(&pair) > 3 {
            let message = "this equation has two right-hand sides";
            Diagnostic::error(span, message).remedy("keep one of them, and state the other as `claim $… = …$`")
        } else {
            left::no_left_side(formulas.span(&side), &text)
        });
        return None;
    };
    let value = formulas.expression(value?, 0);
    match word {
        Word::Form(form) => demand(formulas, &found, form, value),
        Word::Let => Some(abbreviation(&found, value, formulas.lexicon)),
        Word::Given => {
            let kind = preferences(&found);
            if kind.is_none() {
                let message = "preferences are given by a utility, an indirect utility or an expenditure function";
                let remedy = "write `given $U(x) = …$`, `given $v(p,m) = …$` or `given $e(p,u) = …$`";
                formulas.report(Diagnostic::error(found.span, message).remedy(remedy));
            }
            Some(Statement::Given { kind: kind?, value })
        }
        Word::Inverse => {
            let target = target(formulas, &found)?;
            Some(Statement::Inverse { target, value })
        }
        _ => bare(formulas, &found, value),
    }
}

fn parts_left(pair: &Pair<Rule>) -> usize {
    pair.clone().into_inner().count()
}

fn target(formulas: &mut Formulas<'_>, left: &Left) -> Option<Target> {
    let target = left.target(formulas);
    if target.is_none() {
        let message = "this left side names no good";
        let remedy = "write the good, its number, or a letter for every good below: x_1 = …, x_{bread} = …, x_i = …";
        formulas.report(Diagnostic::error(left.span, message).remedy(remedy));
    }
    target
}

/// A demand whose form is that of the word in front, unless the left side says another.
fn demand(formulas: &mut Formulas<'_>, left: &Left, form: Form, value: Expr) -> Option<Statement> {
    let form = match (left.measure, form) {
        (Measure::Plain, form) => form,
        (Measure::Logarithm, Form::Demand | Form::LogDemand) => Form::LogDemand,
        (Measure::Outlay, Form::Demand | Form::Outlay) => Form::Outlay,
        (Measure::Share, Form::Demand | Form::Share) => Form::Share,
        _ => {
            let message = "the left side and the word in front of the display do not go together";
            let remedy = "write the display without a word in front";
            formulas.report(Diagnostic::error(left.span, message).remedy(remedy));
            return None;
        }
    };
    let wrong = match left.role(formulas.lexicon) {
        Some(Role::Price(_)) => Some("a price"),
        Some(Role::Income) => Some("income"),
        Some(Role::Parameter) => Some("a parameter"),
        Some(Role::Utility) => Some("the utility level"),
        Some(Role::Quantity(_) | Role::Abbreviation) | None => None,
    };
    if let Some(wrong) = wrong {
        let message = format!("the left side is declared as {wrong}, not as a demand");
        formulas.report(Diagnostic::error(left.span, message).remedy("use another letter for the demand"));
        return None;
    }
    let target = target(formulas, left)?;
    Some(Statement::Demand(Equation { form, target, value }))
}

/// `P = …`, and `\ln P = …` as P = exp(…).
fn abbreviation(left: &Left, value: Expr, lexicon: &Lexicon) -> Statement {
    let name = declared(left, lexicon);
    let span = value.span;
    let value = match left.measure {
        Measure::Logarithm => Expr { kind: ExprKind::Call(Function::Exp, Box::new(value)), span },
        _ => value,
    };
    Statement::Let { name, value }
}

/// What a left side defines where no word says it.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum BareForm {
    Demand(Form),
    Name,
    Preferences(Preferences),
    Unclear,
}

fn bare_form(left: &Left, lexicon: &Lexicon) -> BareForm {
    match left.measure {
        Measure::Outlay => return BareForm::Demand(Form::Outlay),
        Measure::Share => return BareForm::Demand(Form::Share),
        Measure::Plain | Measure::Logarithm => {}
    }
    let is_demand = matches!(left.role(lexicon), Some(Role::Quantity(_)));
    let log = left.measure == Measure::Logarithm;
    if is_demand {
        return BareForm::Demand(if log { Form::LogDemand } else { Form::Demand });
    }
    let indexed = !left.below.is_empty();
    match left.base() {
        "x" | "q" | "d" | "X" | "Q" | "D" if indexed => {
            BareForm::Demand(if log { Form::LogDemand } else { Form::Demand })
        }
        "w" | "s" if indexed && !log => BareForm::Demand(Form::Share),
        _ => match preferences(left).filter(|_| left.arguments.is_some()) {
            Some(kind) => BareForm::Preferences(kind),
            None if indexed && left.arguments.as_ref().is_some_and(|list| list.contains(',')) => BareForm::Unclear,
            None => BareForm::Name,
        },
    }
}

fn bare(formulas: &mut Formulas<'_>, left: &Left, value: Expr) -> Option<Statement> {
    if matches!(left.role(formulas.lexicon), Some(role) if !matches!(role, Role::Quantity(_) | Role::Abbreviation)) {
        return demand(formulas, left, Form::Demand, value);
    }
    match bare_form(left, formulas.lexicon) {
        BareForm::Demand(form) => demand(formulas, left, form, value),
        BareForm::Name => Some(abbreviation(left, value, formulas.lexicon)),
        BareForm::Preferences(_) => {
            let message = format!("`{}` can be where preferences start from, or a claim about them", left.form);
            let remedy = "write `given` or `claim` before the display";
            formulas.report(Diagnostic::error(left.span, message).remedy(remedy));
            None
        }
        BareForm::Unclear => {
            let message = format!("`{}` can be a quantity or a budget share", left.form);
            let remedy = "write `demand` or `share` before the display, or declare the quantities: quantities x[i]";
            formulas.report(Diagnostic::error(left.span, message).remedy(remedy));
            None
        }
    }
}

/// The function of preferences that a letter stands for.
fn preferences(left: &Left) -> Option<Preferences> {
    if !left.below.is_empty() || left.measure != Measure::Plain {
        return None;
    }
    match left.base() {
        "U" | "u" => Some(Preferences::Utility),
        "v" | "V" | "psi" | "Psi" => Some(Preferences::IndirectUtility),
        "e" | "E" | "c" | "C" => Some(Preferences::Expenditure),
        _ => None,
    }
}

/// A claim about a function of the theory, or a relation.
fn claim(
    formulas: &mut Formulas<'_>,
    pair: Pair<Rule>,
    found: Option<Left>,
    value: Option<Pair<Rule>>,
    span: Span,
) -> Option<Statement> {
    let function = found.as_ref().and_then(|left| claimed(formulas, left));
    let Some(function) = function else {
        return left::relation(formulas, pair).map(|relation| Statement::Claim(Claim::Relation(relation)));
    };
    let value = formulas.expression(value?, 0);
    Some(Statement::Claim(Claim::Function { function, value, span }))
}

fn claimed(formulas: &Formulas<'_>, left: &Left) -> Option<Claimed> {
    if left.arguments.is_none() && left.role(formulas.lexicon).is_some() {
        return None;
    }
    if let Some(kind) = preferences(left).filter(|_| left.role(formulas.lexicon).is_none()) {
        return Some(Claimed::Preferences(kind));
    }
    let compensated = matches!(left.above.as_str(), "h" | "c" | "H");
    match (left.base(), left.measure) {
        ("s" | "S", Measure::Plain) if left.pair(formulas).is_some() => {
            let [good, other] = left.pair(formulas)?;
            Some(Claimed::Slutsky(good, mover(other)))
        }
        ("varepsilon" | "epsilon" | "eta" | "e", Measure::Plain) if left.pair(formulas).is_some() => {
            let [good, other] = left.pair(formulas)?;
            Some(match compensated || left.above == "*" {
                true => Claimed::CompensatedElasticity(good, mover(other)),
                false => Claimed::Elasticity(good, mover(other)),
            })
        }
        ("eta" | "varepsilon" | "epsilon", Measure::Plain) => {
            let Target::Indexed(good, span) = left.target(formulas)? else { return None };
            let name = Name { text: "income".to_string(), span };
            Some(Claimed::Elasticity((good, span), Mover::Named(Reference { name, indices: Vec::new(), span })))
        }
        ("h" | "H", Measure::Plain) => Some(Claimed::Hicksian(left.target(formulas)?)),
        _ if compensated => Some(Claimed::Hicksian(left.target(formulas)?)),
        _ => match bare_form(left, formulas.lexicon) {
            BareForm::Demand(form) => Some(Claimed::Demand(form, left.target(formulas)?)),
            _ => None,
        },
    }
}

fn mover((index, span): (Index, Span)) -> Mover {
    match index {
        Index::Number(number) => Mover::Number(number, span),
        Index::Name(text) => Mover::Named(Reference { name: Name { text, span }, indices: Vec::new(), span }),
    }
}
