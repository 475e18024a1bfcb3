//! The working of a step: the claim in functions and derivatives, what they are, and what remains.

use crate::algebra::field::Relation as Sign;
use crate::algebra::generator::Element;
use crate::algebra::monomial::Var;
use crate::proof::{self, Derivation, Factor, FunctionId, Label, Product, Rule, Statement, Step, StepId};
use crate::render::document::{Block, Equation, Inline, Relation};
use crate::render::expression::Expression;
use crate::render::formula_text::plain_expression;
use crate::render::notation::Notation;
use crate::render::report::derivation::logarithm;
use crate::render::report::words::{listed, relation, text};
use crate::vetting::appendix::{Appendix, MOST_EQUATIONS, Term};
use num_traits::{One, Signed};

/// The most characters that the line with everything put in may have.
const LONGEST_LINE: usize = 480;

/// What is needed to write the working of steps down.
#[derive(Clone, Copy)]
pub struct Scribe<'a> {
    /// The letters.
    pub notation: &'a Notation<'a>,
    /// The steps.
    pub derivation: &'a Derivation,
    /// What was worked out for print.
    pub appendix: &'a Appendix,
}

impl Scribe<'_> {
    /// The working of one step.
    pub fn step(&self, id: StepId) -> Vec<Block> {
        let Some(step) = self.derivation.step(id) else { return Vec::new() };
        let mut blocks = match step.statement() {
            Statement::Identities(claim) => self.identities(id, step.subject(), &claim.equations),
            Statement::Bounded(claim) => self.bounded(&claim.expression, claim.relation, step.rule()),
            _ => Vec::new(),
        };
        blocks.extend(sides(self.notation, step));
        blocks
    }

    fn identities(&self, id: StepId, subject: &str, equations: &[proof::Equation]) -> Vec<Block> {
        let shown = equations.len().min(MOST_EQUATIONS);
        let chain = |(number, equation)| Block::Display(self.chain(subject, equation, self.appendix.terms(id, number)));
        let mut blocks: Vec<Block> = equations[..shown].iter().enumerate().map(chain).collect();
        if shown < equations.len() {
            let more = equations.len() - shown;
            blocks.push(Block::Paragraph(vec![text(format!(
                "and in the same way for the other {more} equations, each of which was brought to its normal form."
            ))]));
        }
        blocks
    }

    /// claim = the same with derivatives put in = what is left. On the right of Shephard's lemma stands demand at e.
    fn chain(&self, subject: &str, equation: &proof::Equation, terms: Option<&[Term]>) -> Vec<Equation> {
        let substituted = terms.and_then(|terms| self.substituted(terms));
        let right = match (subject, equation.label) {
            ("Shephard's lemma", Label::Good(good)) => self.notation.quantity_at_expenditure(good),
            _ => self.expression(&equation.right),
        };
        let mut lines = Vec::new();
        match substituted.filter(|_| !is_plain(&equation.left)) {
            Some(middle) => {
                lines.push(Equation::equal(self.expression(&equation.left), middle));
                lines.push(Equation::next(Relation::Equal, right));
            }
            None => lines.push(Equation::equal(self.expression(&equation.left), right)),
        }
        lines
    }

    fn bounded(&self, expression: &proof::Expression, relation: Sign, rule: &Rule) -> Vec<Block> {
        let zero = Expression::Number(num_rational::Ratio::from_integer(0.into()));
        let mut blocks = vec![Block::Display(vec![Equation::new(self.expression(expression), sign(relation), zero)])];
        if let Rule::Combination(certificate) = rule {
            let facts = certificate.facts.iter().map(|(scale, multiplier, fact)| {
                let weight = multiplier.scale(scale);
                Expression::Product(vec![self.notation.element(&weight), self.notation.element(fact)])
            });
            let squares = certificate.squares.iter().map(|(scale, root)| {
                Expression::Product(vec![Expression::Number(scale.clone()), square(self.notation.element(root))])
            });
            let sum = Expression::Sum(facts.chain(squares).collect());
            blocks.push(Block::Paragraph(vec![text("since it is at least "), Inline::math(sum)]));
        }
        blocks
    }

    /// A claim's side in functions and derivatives.
    pub fn expression(&self, expression: &proof::Expression) -> Expression {
        let terms: Vec<Expression> = expression.0.iter().map(|product| self.product(product)).collect();
        sum(terms)
    }

    fn product(&self, product: &Product) -> Expression {
        let factors = product.factors.iter().map(|factor| self.factor(factor));
        signed(product.coefficient, factors.collect())
    }

    fn factor(&self, factor: &Factor) -> Expression {
        match factor {
            Factor::Element(e) => self.element(e),
            Factor::Function(f) => self.function(*f),
            Factor::Slope(f, x) => Expression::partial(self.function(*f), self.notation.variable(*x)),
            Factor::LogSlope(f, x) => Expression::partial(self.function(*f), self.logarithm(*x)),
            Factor::Euler(f, vars) => self.euler(*f, vars),
        }
    }

    /// An element, by its name where it is one of the demands.
    fn element(&self, e: &Element) -> Expression {
        let demands = &self.notation.model().demands;
        match demands.iter().position(|demand| !e.is_constant() && demand.quantity == *e) {
            Some(good) => self.notation.quantity(good),
            None => self.notation.element(e),
        }
    }

    /// The sum of the slopes in the logarithms of all prices and income; one by one where they are few.
    fn euler(&self, f: FunctionId, vars: &[Var]) -> Expression {
        let slope = |x: Expression| Expression::partial(self.function(f), logarithm(x));
        match vars {
            [prices @ .., income] if prices.len() > 2 => {
                let over_prices = Expression::total("j", slope(self.notation.price_letter("j")));
                Expression::Sum(vec![over_prices, slope(self.notation.variable(*income))])
            }
            _ => sum(vars.iter().map(|x| slope(self.notation.variable(*x))).collect()),
        }
    }

    fn logarithm(&self, x: Var) -> Expression {
        Expression::Call(crate::algebra::formula::Function::Ln, Box::new(self.notation.variable(x)))
    }

    fn function(&self, f: FunctionId) -> Expression {
        let name = self.derivation.function(f).map(|function| function.name.clone()).unwrap_or_default();
        self.notation.named_function(&name)
    }

    /// The terms with derivatives put in; `None` where that is too long to print.
    fn substituted(&self, terms: &[Term]) -> Option<Expression> {
        let terms: Vec<Expression> =
            terms.iter().map(|each| term(self.notation, each, &|f| self.function(f))).collect();
        let length: usize = terms.iter().map(|term| plain_expression(term).len()).sum();
        (length <= LONGEST_LINE).then(|| sum(terms))
    }
}

/// A term with its names in front of a sum, or behind a single factor.
pub fn term(notation: &Notation<'_>, term: &Term, name: &dyn Fn(FunctionId) -> Expression) -> Expression {
    let names = match term.names.as_slice() {
        [f, g] if f == g => vec![square(name(*f))],
        names => names.iter().map(|f| name(*f)).collect(),
    };
    if let Some(number) = term.value.as_constant() {
        let size = Expression::Number(number.abs());
        let factors: Vec<Expression> = if number.abs().is_one() && !term.names.is_empty() {
            names
        } else {
            std::iter::once(size).chain(names).collect()
        };
        let product = product(factors);
        return if number.is_negative() { Expression::negative(product) } else { product };
    }
    match notation.element(&term.value) {
        Expression::Negative(inner) => Expression::negative(product(std::iter::once(*inner).chain(names).collect())),
        value => product(std::iter::once(value).chain(names).collect()),
    }
}

/// y².
pub fn square(y: Expression) -> Expression {
    Expression::Power(Box::new(y), Box::new(Expression::Number(num_rational::Ratio::from_integer(2.into()))))
}

fn product(mut factors: Vec<Expression>) -> Expression {
    if factors.len() == 1 { factors.swap_remove(0) } else { Expression::Product(factors) }
}

/// Whether nothing is differentiated or named, so that putting in changes nothing.
fn is_plain(expression: &proof::Expression) -> bool {
    expression.0.iter().flat_map(|product| &product.factors).all(|factor| matches!(factor, Factor::Element(_)))
}

/// The sum of the terms, nested sums taken apart.
pub fn sum(terms: Vec<Expression>) -> Expression {
    let mut terms: Vec<Expression> = terms.into_iter().flat_map(opened).collect();
    match terms.len() {
        0 => Expression::Number(num_rational::Ratio::from_integer(0.into())),
        1 => terms.swap_remove(0),
        _ => Expression::Sum(terms),
    }
}

/// The terms of a sum; anything else by itself.
fn opened(expression: Expression) -> Vec<Expression> {
    match expression {
        Expression::Sum(terms) => terms,
        other => vec![other],
    }
}

fn signed(coefficient: i64, mut factors: Vec<Expression>) -> Expression {
    let size = coefficient.unsigned_abs();
    if size != 1 || factors.is_empty() {
        factors.insert(0, Expression::Number(num_rational::Ratio::from_integer(size.into())));
    }
    let product = if factors.len() == 1 { factors.swap_remove(0) } else { Expression::Product(factors) };
    if coefficient < 0 { Expression::negative(product) } else { product }
}

fn sign(relation: Sign) -> Relation {
    match relation {
        Sign::Positive => Relation::Greater,
        Sign::NonNegative => Relation::GreaterEqual,
        Sign::NonZero => Relation::NotEqual,
    }
}

/// What the step leans on and does not follow from the assumptions.
fn sides(notation: &Notation<'_>, step: &Step) -> Option<Block> {
    let zero = Expression::Number(num_rational::Ratio::from_integer(0.into()));
    let open = step.sides().iter().filter(|side| !side.discharged);
    let words: Vec<Vec<Inline>> =
        open.map(|side| vec![relation(notation.element(&side.element), sign(side.relation), zero.clone())]).collect();
    if words.is_empty() {
        return None;
    }
    let mut out = vec![text("Here ")];
    out.extend(listed(words, " and "));
    out.push(text(" is used."));
    Some(Block::Paragraph(out))
}
