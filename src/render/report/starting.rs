//! What stands at the beginning where the author gives preferences or inverse demands, and the matrix that goes with it.

use crate::conditions::Condition;
use crate::language::Preferences;
use crate::model::Model;
use crate::render::document::{Block, Equation};
use crate::render::expression::Expression;
use crate::render::notation::Notation;
use crate::render::report::derivation::{logarithm, paragraph};

/// What the functions of a derivation are, where they are not Marshallian demands.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Start {
    /// Inverse demands: the author's, or those of a given direct utility.
    Inverse,
    /// Hicksian demands, by Shephard's lemma.
    Hicksian,
}

impl Start {
    /// How the model starts; `None` for Marshallian demands, or none at all.
    pub fn of(model: &Model) -> Option<Start> {
        let hicksian = model.given.as_ref().is_some_and(|given| given.kind == Preferences::Expenditure);
        match () {
            _ if !model.demands.is_empty() => None,
            _ if !model.inverse.is_empty() => Some(Start::Inverse),
            _ => hicksian.then_some(Start::Hicksian),
        }
    }

    /// The name of the matrix.
    pub fn matrix(self) -> &'static str {
        match self {
            Start::Inverse => "the Antonelli matrix",
            Start::Hicksian => "the matrix of compensated price slopes",
        }
    }
}

/// The given preferences and what follows from them by differentiation, or the author's inverse demands.
pub fn blocks(notation: &Notation<'_>) -> Vec<Block> {
    let model = notation.model();
    let mut blocks = Vec::new();
    if let Some(given) = &model.given {
        let (words, left, follows) = match given.kind {
            Preferences::Utility => (
                "Preferences are given by the direct utility function",
                notation.direct_utility(),
                "By the first-order conditions, prices over income are",
            ),
            Preferences::IndirectUtility => (
                "Preferences are given by the indirect utility function",
                notation.indirect_utility(),
                "By Roy's identity, the demands are",
            ),
            Preferences::Expenditure => (
                "Preferences are given by the expenditure function",
                notation.expenditure(),
                "By Shephard's lemma, the Hicksian demands are",
            ),
        };
        blocks.push(paragraph(words));
        blocks.push(Block::Display(vec![Equation::equal(left, notation.element(&given.value))]));
        blocks.push(paragraph(follows));
    } else {
        blocks.push(paragraph("The inverse demands, prices over income, are"));
    }
    blocks.push(Block::Display(functions(notation)));
    blocks
}

fn functions(notation: &Notation<'_>) -> Vec<Equation> {
    let (model, field) = (notation.model(), notation.field());
    let inverse = |good: usize| Expression::from(notation.inverse_letter().at(notation.good(good)));
    match Start::of(model) {
        Some(Start::Inverse) => {
            let all = model.inverse.iter().enumerate();
            all.map(|(good, e)| Equation::equal(inverse(good), notation.element(&e.formula))).collect()
        }
        Some(Start::Hicksian) => {
            let e =
                model.given.iter().flat_map(|given| model.prices.iter().map(|p| field.derivative(&given.value, *p)));
            e.enumerate().map(|(good, h)| Equation::equal(notation.hicksian(good), notation.element(&h))).collect()
        }
        None => {
            let all = model.demands.iter().enumerate();
            all.map(|(good, demand)| Equation::equal(notation.quantity(good), notation.element(&demand.quantity)))
                .collect()
        }
    }
}

/// What a condition asks of inverse or Hicksian demands.
pub fn opening(notation: &Notation<'_>, start: Start, condition: Condition) -> Vec<Block> {
    let (words, equation) = match start {
        Start::Inverse => of_inverse(notation, condition),
        Start::Hicksian => of_hicksian(notation, condition),
    };
    std::iter::once(paragraph(words)).chain(equation.map(|equation| Block::Display(vec![equation]))).collect()
}

fn of_inverse(notation: &Notation<'_>, condition: Condition) -> (&'static str, Option<Equation>) {
    let w = |index: &str| Expression::from(notation.share_letter().at(index));
    let x = |index: &str| notation.quantity_family(index);
    let slope = |by: &str| Expression::partial(w("i"), logarithm(x(by)));
    match condition {
        Condition::AddingUp => {
            let sum = Equation::equal(Expression::total("i", w("i")), number(1));
            (
                "Outlays exhaust income exactly when the budget shares, quantities times inverse demands, sum to one:",
                Some(sum),
            )
        }
        Condition::Symmetry => {
            let entry = Expression::from(notation.slutsky().at("i").at("j"));
            let scale = Expression::total("k", slope("k"));
            let right = Expression::Sum(vec![
                slope("j"),
                Expression::negative(Expression::Product(vec![w("j"), scale])),
                Expression::Product(vec![w("i"), w("j")]),
            ]);
            let equation = Equation::equal(Expression::Product(vec![x("i"), x("j"), entry]), right);
            (
                "In budget shares, quantities times inverse demands, the Antonelli matrix has off the diagonal the entries",
                Some(equation),
            )
        }
        _ => ("It is to be shown that the quadratic form of the Antonelli matrix is nowhere positive.", None),
    }
}

fn of_hicksian(notation: &Notation<'_>, condition: Condition) -> (&'static str, Option<Equation>) {
    let y = |index: &str| Expression::from(notation.outlay_letter().at(index));
    let slope = || Expression::partial(y("i"), logarithm(notation.price_letter("j")));
    match condition {
        Condition::Homogeneity => {
            let euler = Equation::equal(Expression::total("j", slope()), y("i"));
            (
                "By Euler's theorem Hicksian demands are homogeneous of degree zero in prices exactly when the outlays on them satisfy",
                Some(euler),
            )
        }
        Condition::AddingUp => {
            let sum = Equation::equal(Expression::total("i", y("i")), notation.expenditure());
            (
                "The outlays on Hicksian demands sum to expenditure exactly when expenditure is homogeneous of degree one in prices:",
                Some(sum),
            )
        }
        Condition::Symmetry => {
            let entry = Expression::from(notation.slutsky().at("i").at("j"));
            let scaled = Expression::Product(vec![notation.price_letter("i"), notation.price_letter("j"), entry]);
            (
                "In outlays on Hicksian demands, the compensated slopes are off the diagonal",
                Some(Equation::equal(scaled, slope())),
            )
        }
        Condition::Curvature => ("It is to be shown that expenditure is concave in prices.", None),
    }
}

fn number(n: i64) -> Expression {
    Expression::Number(num_rational::Ratio::from_integer(n.into()))
}
