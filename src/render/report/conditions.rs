//! Each condition: what it says, its working, and what follows.

use crate::conditions::{Condition, Coordinates, Finding, Verdict};
use crate::proof::{Rule, Statement};
use crate::render::document::{Block, Equation, Inline, Relation};
use crate::render::expression::{Expression, Mark, Object};
use crate::render::notation::Notation;
use crate::render::report::derivation::{coordinates, heading, logarithm, paragraph};
use crate::render::report::starting::{self, Start};
use crate::render::report::verdicts;
use crate::render::report::words::{equation, text};
use crate::render::report::working::{Scribe, square};

/// The section on one condition.
pub fn section(scribe: &Scribe<'_>, finding: &Finding) -> Vec<Block> {
    let mut blocks = vec![heading(match finding.condition {
        Condition::Homogeneity => "Homogeneity",
        Condition::AddingUp => "Adding-up",
        Condition::Symmetry => "Symmetry",
        Condition::Curvature => "Negative semidefiniteness",
    })];
    blocks.extend(opening(scribe, finding));
    let concave = finding.condition == Condition::Curvature && finding.method.ends_with("is concave");
    blocks.extend(concave.then(|| paragraph(format!("It is enough that {}, by its Hessian matrix.", finding.method))));
    for id in &finding.steps {
        blocks.extend(reason(scribe, *id));
        if scribe.derivation.step(*id).is_some_and(|step| *step.rule() == Rule::Laplacian) {
            blocks.push(Block::Display(vec![sum_of_squares(scribe.notation)]));
        }
        blocks.extend(scribe.step(*id));
    }
    blocks.push(Block::Paragraph(conclusion(scribe.notation, finding)));
    blocks
}

/// What holds, in a sentence, and the rule by which it was shown.
pub fn in_short(scribe: &Scribe<'_>, finding: &Finding) -> Vec<Block> {
    let mut words = conclusion(scribe.notation, finding);
    if finding.verdict == Verdict::Proven
        && let [Inline::Text(only)] = words.as_mut_slice()
    {
        let rule = match finding.condition {
            Condition::Homogeneity => "By Euler's theorem, ",
            Condition::AddingUp => "Adding up over the goods shows that ",
            Condition::Symmetry => "Differentiation shows that ",
            Condition::Curvature => "Moreover, ",
        };
        let said = only.strip_prefix("Hence ").unwrap_or(only);
        *only = format!("{rule}{said}");
    }
    let mut blocks = vec![Block::Paragraph(words)];
    if finding.condition == Condition::Curvature && finding.verdict == Verdict::Proven {
        let balance = |id: &crate::proof::StepId| {
            scribe.derivation.step(*id).is_some_and(|step| matches!(step.statement(), Statement::Balanced(_)))
        };
        blocks.extend(finding.steps.iter().filter(|id| !balance(id)).filter_map(|id| reason(scribe, *id)));
        let laplacian =
            |id: &crate::proof::StepId| scribe.derivation.step(*id).is_some_and(|step| *step.rule() == Rule::Laplacian);
        if finding.steps.iter().any(laplacian) {
            blocks.push(Block::Display(vec![sum_of_squares(scribe.notation)]));
        }
    }
    blocks
}

/// What is to be shown, and in which coordinates.
fn opening(scribe: &Scribe<'_>, finding: &Finding) -> Vec<Block> {
    let Some(used) = scribe.appendix.coordinates else { return Vec::new() };
    let notation = scribe.notation;
    if let Some(start) = Start::of(notation.model()) {
        return starting::opening(notation, start, finding.condition);
    }
    let mut words = match finding.condition {
        Condition::Homogeneity => vec![text(
            "By Euler's theorem demands are homogeneous of degree zero in prices and income exactly when, for ",
        )],
        Condition::AddingUp => vec![text("Demands exhaust income exactly when, for ")],
        Condition::Symmetry => vec![text("For ")],
        Condition::Curvature => return curvature_opening(notation),
    };
    words.extend(coordinates(notation, used));
    match finding.condition {
        Condition::Homogeneity => {
            words.push(text(", for every good "));
            words.push(Inline::math(Expression::symbol("i")));
            words.push(text(","));
        }
        Condition::AddingUp => words.push(text(",")),
        _ => {
            words.push(text(", "));
            words.push(scaled_slutsky(notation, used));
            words.push(text(" for "));
            words.push(unequal());
            words.push(text(", so that the matrix is symmetric exactly when the slopes below agree."));
        }
    }
    let mut blocks = vec![Block::Paragraph(words)];
    match finding.condition {
        Condition::Homogeneity => blocks.push(Block::Display(vec![euler(notation, used)])),
        Condition::AddingUp => blocks.push(Block::Display(vec![budget(notation, used)])),
        _ => {}
    }
    blocks
}

fn unequal() -> Inline {
    Inline::Math(Box::new(Equation::new(Expression::symbol("i"), Relation::NotEqual, Expression::symbol("j"))))
}

fn letter(notation: &Notation<'_>, used: Coordinates, index: &str) -> Expression {
    match used {
        Coordinates::Shares => notation.share_letter().at(index).into(),
        Coordinates::Outlays => notation.outlay_letter().at(index).into(),
    }
}

fn euler(notation: &Notation<'_>, used: Coordinates) -> Equation {
    let y = || letter(notation, used, "i");
    let over_prices = Expression::total("j", Expression::partial(y(), logarithm(notation.price_letter("j"))));
    let left = Expression::Sum(vec![over_prices, Expression::partial(y(), logarithm(notation.income()))]);
    Equation::equal(
        left,
        match used {
            Coordinates::Shares => number(0),
            Coordinates::Outlays => y(),
        },
    )
}

fn budget(notation: &Notation<'_>, used: Coordinates) -> Equation {
    let left = Expression::total("i", letter(notation, used, "i"));
    Equation::equal(
        left,
        match used {
            Coordinates::Shares => number(1),
            Coordinates::Outlays => notation.income(),
        },
    )
}

/// p_i p_j S_ij in outlays or shares, off the diagonal.
fn scaled_slutsky(notation: &Notation<'_>, used: Coordinates) -> Inline {
    let y = |index: &str| letter(notation, used, index);
    let entry = Expression::from(notation.slutsky().at("i").at("j"));
    let scaled = Expression::Product(vec![notation.price_letter("i"), notation.price_letter("j"), entry]);
    let price_slope = Expression::partial(y("i"), logarithm(notation.price_letter("j")));
    match used {
        Coordinates::Shares => {
            let income_slope = Expression::partial(y("i"), logarithm(notation.income()));
            let sum = Expression::Sum(vec![
                price_slope,
                Expression::Product(vec![y("j"), income_slope]),
                Expression::Product(vec![y("i"), y("j")]),
            ]);
            equation(Expression::Quotient(Box::new(scaled), Box::new(notation.income())), sum)
        }
        Coordinates::Outlays => {
            let income_slope = Expression::partial(y("i"), notation.income());
            equation(scaled, Expression::Sum(vec![price_slope, Expression::Product(vec![y("j"), income_slope])]))
        }
    }
}

fn curvature_opening(notation: &Notation<'_>) -> Vec<Block> {
    vec![Block::Paragraph(vec![
        text("It is to be shown that "),
        Inline::Math(Box::new(Equation::new(quadratic_form(notation), Relation::LessEqual, number(0)))),
        text(" for every vector "),
        Inline::math(Expression::symbol("v")),
        text(", wherever all quantities are positive."),
    ])]
}

/// vᵀ S v.
pub fn quadratic_form(notation: &Notation<'_>) -> Expression {
    let transposed = Object::new("v").marked(Mark::Transpose);
    Expression::Product(vec![transposed.into(), notation.slutsky().into(), Expression::symbol("v")])
}

/// vᵀSv = −½ Σᵢ Σⱼ pᵢ pⱼ Sᵢⱼ (vᵢ/pᵢ − vⱼ/pⱼ)².
fn sum_of_squares(notation: &Notation<'_>) -> Equation {
    let v = |index: &str| Expression::from(Object::new("v").at(index));
    let ratio = |index: &str| Expression::Quotient(Box::new(v(index)), Box::new(notation.price_letter(index)));
    let gap = Expression::Sum(vec![ratio("i"), Expression::negative(ratio("j"))]);
    let entry = Expression::from(notation.slutsky().at("i").at("j"));
    let term = Expression::Product(vec![notation.price_letter("i"), notation.price_letter("j"), entry, square(gap)]);
    let sum = Expression::total("i", Expression::total("j", term));
    let half = Expression::Number(num_rational::Ratio::new(1.into(), 2.into()));
    Equation::equal(quadratic_form(notation), Expression::negative(Expression::Product(vec![half, sum])))
}

/// Why a step of the curvature ladder settles the matter.
fn reason(scribe: &Scribe<'_>, id: crate::proof::StepId) -> Option<Block> {
    let step = scribe.derivation.step(id)?;
    let words = match (step.statement(), step.rule()) {
        (Statement::Balanced(_), _) => {
            "The matrix with the entries above, scaled by prices, has rows and columns that sum to zero."
        }
        (Statement::Semidefinite(_), Rule::Laplacian) => {
            "Its off-diagonal entries are nonnegative and its rows and columns sum to zero; so its quadratic form is minus \
             a sum of squares with nonnegative weights:"
        }
        (Statement::Semidefinite(_), Rule::Characteristic { without: Some(_) }) => {
            "One row and column may be left out, since rows and columns sum to zero; the coefficients of the \
             characteristic polynomial of minus what remains are nonnegative, and so are its eigenvalues."
        }
        (Statement::Semidefinite(_), Rule::Characteristic { without: None }) => {
            "The coefficients of the characteristic polynomial of minus the matrix are nonnegative, and so are the \
             eigenvalues of minus the matrix."
        }
        (Statement::Semidefinite(_), Rule::Diagonal) => {
            "The Hessian matrix of utility is diagonal, and no entry on its diagonal is positive."
        }
        (Statement::Semidefinite(_), Rule::Decomposition(of)) if of.multipliers.is_empty() => {
            "Minus the matrix is a sum of squares of linear forms with nonnegative weights."
        }
        (Statement::Semidefinite(_), Rule::Decomposition(_)) => {
            "The matrix is a combination, with nonnegative weights, of matrices shown to be negative semidefinite, less a \
             sum of squares of linear forms with nonnegative weights."
        }
        (Statement::Semidefinite(_), Rule::NormalForm) => "The matrix is zero.",
        (Statement::Assumed(words), _) => return Some(paragraph(format!("By assumption: {words}."))),
        _ => return None,
    };
    Some(paragraph(words))
}

fn number(n: i64) -> Expression {
    Expression::Number(num_rational::Ratio::from_integer(n.into()))
}

fn conclusion(notation: &Notation<'_>, finding: &Finding) -> Vec<Inline> {
    let holds = match finding.condition {
        Condition::Homogeneity => "Hence demands are homogeneous of degree zero in prices and income.",
        Condition::AddingUp => "Hence demands exhaust income.",
        Condition::Symmetry => "Hence the Slutsky matrix is symmetric.",
        Condition::Curvature => "Hence the Slutsky matrix is negative semidefinite.",
    };
    if let (Some(start), Verdict::Proven) = (Start::of(notation.model()), finding.verdict) {
        return vec![text(match finding.condition {
            Condition::Homogeneity => "Hence Hicksian demands are homogeneous of degree zero in prices.".to_string(),
            Condition::AddingUp => "Hence all of the budget is spent.".to_string(),
            Condition::Symmetry => format!("Hence {} is symmetric.", start.matrix()),
            Condition::Curvature => format!("Hence {} is negative semidefinite.", start.matrix()),
        })];
    }
    if finding.verdict == Verdict::Proven {
        return vec![text(holds)];
    }
    let line = verdicts::condition_line(notation, finding);
    if finding.verdict == Verdict::Undecided {
        return [text("Nothing was decided: ")].into_iter().chain(line.note).chain([text(".")]).collect();
    }
    let mut out = vec![text("The condition is "), Inline::Emphasis(line.verdict)];
    if !line.note.is_empty() {
        out.push(text(": it "));
        out.extend(line.note);
    }
    out.push(text("."));
    out
}
