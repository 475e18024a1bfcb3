//! Derivations as plain data, for certificates: formulas are text, numbers are exact, and nothing is trusted when it is
//! read back; every step is established anew.

use std::collections::BTreeMap;
use std::rc::Rc;

use serde::{Deserialize, Serialize};

use crate::algebra::evaluation::Point;
use crate::algebra::field::{Field, Relation};
use crate::algebra::generator::Element;
use crate::algebra::monomial::Var;
use crate::algebra::number::Rational;

use super::bound::Combination;
use super::claim::{Bounded, Equation, Expression, Factor, FunctionId, Label, Matrix, Product};
use super::decomposition::{Decomposition, semidefinite_premises};
use super::derivation::{Derivation, Proved, Rule, SideCondition, Statement, StepId};
use super::prover::{Prover, holds};
use super::witness::{Failed, Value};

/// A derivation as data.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct StoredDerivation {
    /// Name and formula of each function.
    pub functions: Vec<(String, String)>,
    /// The steps.
    pub steps: Vec<StoredStep>,
}

/// A step as data.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct StoredStep {
    /// What the step is about.
    pub subject: String,
    /// What it establishes and by which rule.
    pub claim: StoredClaim,
    /// The earlier steps that it uses.
    #[serde(default, skip_serializing_if = "Vec::is_empty")]
    pub premises: Vec<u32>,
    /// What it leans on: formula, relation to zero, whether it follows from the facts.
    #[serde(default, skip_serializing_if = "Vec::is_empty")]
    pub sides: Vec<(String, StoredRelation, bool)>,
    /// The part of the domain that the step is about, where it is not the whole.
    #[serde(default, skip_serializing_if = "Vec::is_empty")]
    pub supposing: Vec<(StoredExpression, StoredRelation)>,
}

/// A relation to zero.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub enum StoredRelation {
    /// Positive.
    #[serde(rename = "> 0")]
    Positive,
    /// Not negative.
    #[serde(rename = ">= 0")]
    NonNegative,
    /// Not zero.
    #[serde(rename = "!= 0")]
    NonZero,
}

/// A factor as data; symbols go by their names.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(rename_all = "snake_case")]
pub enum StoredFactor {
    /// A formula.
    Formula(String),
    /// A function.
    Function(u32),
    /// ∂f/∂x.
    Slope(u32, String),
    /// x ∂f/∂x.
    LogSlope(u32, String),
    /// Σ x ∂f/∂x over the symbols.
    Euler(u32, Vec<String>),
}

/// A sum of products as data.
pub type StoredExpression = Vec<(i64, Vec<StoredFactor>)>;

/// A matrix as data.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct StoredMatrix {
    /// The number of rows.
    pub size: usize,
    /// The entries, row by row.
    pub entries: Vec<StoredExpression>,
}

/// Claims with the rules that establish them.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(rename_all = "snake_case")]
pub enum StoredClaim {
    /// Equations: label, left, right.
    Identities(Vec<(Label, StoredExpression, StoredExpression)>),
    /// A sign from the facts.
    Bound(StoredExpression, StoredRelation),
    /// A sign from a combination of facts (scale, multiplier, fact) and squares (scale, root).
    Combination {
        /// The expression.
        of: StoredExpression,
        /// Its relation to zero.
        relation: StoredRelation,
        /// The facts used.
        facts: Vec<(String, String, String)>,
        /// The squares used.
        squares: Vec<(String, String)>,
    },
    /// A matrix with vanishing sums of rows and columns.
    Balanced(StoredMatrix),
    /// A negative semidefinite matrix by the Laplacian rule (after its premise).
    Laplacian,
    /// By the characteristic coefficients.
    Characteristic {
        /// The matrix.
        matrix: StoredMatrix,
        /// The row and column left out (by the premise).
        without: Option<usize>,
    },
    /// A diagonal matrix without positive entries.
    Diagonal(StoredMatrix),
    /// Multiples of the matrices of the premises, less squares (scale, vector).
    Decomposition(StoredMatrix, Vec<String>, Vec<(String, Vec<String>)>),
    /// A matrix whose symmetric part is zero.
    ZeroMatrix(StoredMatrix),
    /// Negative semidefinite at a point.
    SemidefiniteAt(StoredMatrix, BTreeMap<String, String>),
    /// An equation fails at a point, with the difference there.
    Refuted(Label, StoredExpression, StoredExpression, BTreeMap<String, String>, StoredValue),
    /// A sign fails at a point.
    RefutedBound(StoredExpression, StoredRelation, BTreeMap<String, String>, StoredValue),
    /// Semidefiniteness fails at a point in a direction.
    RefutedSemidefinite(StoredMatrix, Vec<String>, BTreeMap<String, String>, StoredValue),
    /// Taken for granted.
    Assumed(String),
}

/// A value as data: the number, or bounds.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(untagged)]
pub enum StoredValue {
    /// A rational number.
    Exact(String),
    /// Lower and upper bound.
    Between(String, String),
}

/// Why a stored derivation is not accepted.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Rejected {
    /// The step, counted from 0; `None` for the table of functions.
    pub step: Option<usize>,
    /// What is wrong with it.
    pub reason: String,
}

/// Writes a derivation as data; `print` gives formulas that the reader of [`replay`] reads.
pub fn store(field: &Field, derivation: &Derivation, print: &dyn Fn(&Element) -> String) -> StoredDerivation {
    let writer = Writer { field, print, derivation };
    StoredDerivation {
        functions: derivation.functions.iter().map(|f| (f.name.clone(), print(&f.element))).collect(),
        steps: (0..derivation.steps.len()).map(|at| writer.step(at)).collect(),
    }
}

struct Writer<'a> {
    field: &'a Field,
    print: &'a dyn Fn(&Element) -> String,
    derivation: &'a Derivation,
}

impl Writer<'_> {
    fn step(&self, at: usize) -> StoredStep {
        let step = &self.derivation.steps[at];
        StoredStep {
            subject: step.subject.clone(),
            claim: self.claim(&step.statement, &step.rule),
            premises: step.premises.iter().map(|p| p.0).collect(),
            sides: step.sides.iter().map(|s| ((self.print)(&s.element), relation(s.relation), s.discharged)).collect(),
            supposing: step.supposing.iter().map(|(e, r)| (self.expression(e), relation(*r))).collect(),
        }
    }

    fn claim(&self, statement: &Statement, rule: &Rule) -> StoredClaim {
        match statement {
            Statement::Identities(claim) => StoredClaim::Identities(
                claim
                    .equations
                    .iter()
                    .map(|e| (e.label, self.expression(&e.left), self.expression(&e.right)))
                    .collect(),
            ),
            Statement::Bounded(claim) => self.bound(claim, rule),
            Statement::Balanced(claim) => StoredClaim::Balanced(self.matrix(&claim.matrix)),
            Statement::Semidefinite(claim) => match rule {
                Rule::Laplacian => StoredClaim::Laplacian,
                Rule::Characteristic { without } => {
                    StoredClaim::Characteristic { matrix: self.matrix(&claim.matrix), without: *without }
                }
                Rule::Diagonal => StoredClaim::Diagonal(self.matrix(&claim.matrix)),
                Rule::Decomposition(parts) => self.decomposition(&claim.matrix, parts),
                _ => StoredClaim::ZeroMatrix(self.matrix(&claim.matrix)),
            },
            Statement::SemidefiniteAt(claim) => {
                StoredClaim::SemidefiniteAt(self.matrix(&claim.matrix), self.point(&claim.point))
            }
            Statement::Failure(failure) => {
                let (point, value) = (self.point(&failure.point), self.value(&failure.value));
                match &failure.of {
                    Failed::Equation(e) => {
                        let (left, right) = (self.expression(&e.left), self.expression(&e.right));
                        StoredClaim::Refuted(e.label, left, right, point, value)
                    }
                    Failed::Bound(b) => {
                        let expression = self.expression(&b.expression);
                        StoredClaim::RefutedBound(expression, relation(b.relation), point, value)
                    }
                    Failed::Semidefinite { matrix, vector } => {
                        let vector = vector.iter().map(Rational::to_string).collect();
                        StoredClaim::RefutedSemidefinite(self.matrix(matrix), vector, point, value)
                    }
                }
            }
            Statement::Assumed(words) => StoredClaim::Assumed(words.clone()),
        }
    }

    fn decomposition(&self, matrix: &Matrix, of: &Decomposition) -> StoredClaim {
        let print = |elements: &[Element]| elements.iter().map(self.print).collect::<Vec<String>>();
        let squares = of.squares.iter().map(|(scale, u)| ((self.print)(scale), print(u))).collect();
        StoredClaim::Decomposition(self.matrix(matrix), print(&of.multipliers), squares)
    }

    fn bound(&self, claim: &Bounded, rule: &Rule) -> StoredClaim {
        let of = self.expression(&claim.expression);
        let relation = relation(claim.relation);
        let Rule::Combination(combination) = rule else { return StoredClaim::Bound(of, relation) };
        let print = self.print;
        StoredClaim::Combination {
            of,
            relation,
            facts: combination.facts.iter().map(|(q, m, g)| (q.to_string(), print(m), print(g))).collect(),
            squares: combination.squares.iter().map(|(q, h)| (q.to_string(), print(h))).collect(),
        }
    }

    fn expression(&self, expression: &Expression) -> StoredExpression {
        let factor = |factor: &Factor| match factor {
            Factor::Element(e) => StoredFactor::Formula((self.print)(e)),
            Factor::Function(f) => StoredFactor::Function(f.0),
            Factor::Slope(f, x) => StoredFactor::Slope(f.0, self.name(*x)),
            Factor::LogSlope(f, x) => StoredFactor::LogSlope(f.0, self.name(*x)),
            Factor::Euler(f, all) => StoredFactor::Euler(f.0, all.iter().map(|x| self.name(*x)).collect()),
        };
        expression.0.iter().map(|p| (p.coefficient, p.factors.iter().map(factor).collect())).collect()
    }

    fn matrix(&self, matrix: &Matrix) -> StoredMatrix {
        StoredMatrix { size: matrix.size, entries: matrix.entries.iter().map(|e| self.expression(e)).collect() }
    }

    fn name(&self, x: Var) -> String {
        self.field.name(x).unwrap_or_default()
    }

    fn point(&self, point: &Point) -> BTreeMap<String, String> {
        point.iter().map(|(v, q)| (self.name(*v), q.to_string())).collect()
    }

    fn value(&self, value: &Value) -> StoredValue {
        match value {
            Value::Exact(q) => StoredValue::Exact(q.to_string()),
            Value::Enclosed { from, to, .. } => StoredValue::Between(from.to_string(), to.to_string()),
        }
    }
}

fn relation(relation: Relation) -> StoredRelation {
    match relation {
        Relation::Positive => StoredRelation::Positive,
        Relation::NonNegative => StoredRelation::NonNegative,
        Relation::NonZero => StoredRelation::NonZero,
    }
}

fn relation_back(relation: StoredRelation) -> Relation {
    match relation {
        StoredRelation::Positive => Relation::Positive,
        StoredRelation::NonNegative => Relation::NonNegative,
        StoredRelation::NonZero => Relation::NonZero,
    }
}

/// Reads a formula; the error says why it cannot be read.
pub type Reader<'r> = &'r dyn Fn(&str) -> Result<Element, String>;

/// Establishes every step of a stored derivation anew, over a field whose facts are the domain.
///
/// # Errors
/// The first step that cannot be read or established, that leans on other conditions than it says, or whose value is
/// not the one stated.
pub fn replay(field: &Field, stored: &StoredDerivation, read: Reader<'_>) -> Result<Derivation, Rejected> {
    let mut replay = Replay { prover: Prover::new(field), symbols: symbols(field), read };
    for (index, (name, formula)) in stored.functions.iter().enumerate() {
        let element = read(formula).map_err(|reason| Rejected { step: None, reason })?;
        if replay.prover.define(name, &element).index() != index {
            return Err(Rejected { step: None, reason: format!("{name} is defined twice") });
        }
    }
    for (index, step) in stored.steps.iter().enumerate() {
        replay.step(step).map_err(|reason| Rejected { step: Some(index), reason })?;
    }
    Ok(replay.prover.into_derivation())
}

/// The symbols by name; the author's come before those of our own working that may be called the same.
fn symbols(field: &Field) -> BTreeMap<String, Var> {
    let all = (0..field.len()).rev().map(|index| Var::new(index as u32));
    all.filter(|v| field.role(*v).is_some()).filter_map(|v| Some((field.name(v)?, v))).collect()
}

struct Replay<'a> {
    prover: Prover<'a>,
    symbols: BTreeMap<String, Var>,
    read: Reader<'a>,
}

type Read<T> = Result<T, String>;

impl Replay<'_> {
    fn step(&mut self, stored: &StoredStep) -> Read<()> {
        let count = self.prover.derivation().steps().len() as u32;
        if stored.premises.iter().any(|p| *p >= count) {
            return Err("a premise is not an earlier step".into());
        }
        let premises: Vec<StepId> = stored.premises.iter().map(|p| StepId(*p)).collect();
        let mut supposing = Vec::new();
        for (expression, relation) in &stored.supposing {
            supposing.push((self.expression(expression)?, relation_back(*relation)));
        }
        let subject = &stored.subject;
        let read = self.read;
        let symbols = std::mem::take(&mut self.symbols);
        let outcome = self.prover.supposing(&supposing, |prover| {
            Rebuild { prover, symbols: &symbols, read, subject, premises: &premises }.claim(&stored.claim)
        });
        self.symbols = symbols;
        outcome?.ok_or("the rule does not establish the claim")?;
        self.same_sides(&stored.sides)
    }

    /// Whether the step just made leans on what the stored one says. What follows from the facts may be more or less by
    /// now: a price becomes the square of its root.
    fn same_sides(&self, stored: &[(String, StoredRelation, bool)]) -> Read<()> {
        let field = self.prover.field();
        let made: &[SideCondition] = self.prover.derivation().steps().last().map_or(&[], |step| step.sides());
        let mut listed = vec![false; made.len()];
        for (formula, relation, discharged) in stored {
            let (element, relation) = ((self.read)(formula)?, relation_back(*relation));
            let same = |own: &SideCondition| {
                own.relation == relation
                    && own.discharged == *discharged
                    && field.is_zero(&(&field.current(&own.element) - &field.current(&element)))
            };
            match made.iter().position(same) {
                Some(at) => listed[at] = true,
                None if *discharged && holds(field, &element, relation) => {}
                None => return Err(format!("the side condition {formula} is not that of the step")),
            }
        }
        let all = made.iter().zip(listed).all(|(own, listed)| listed || own.discharged);
        if all { Ok(()) } else { Err("a side condition of the step is missing".into()) }
    }

    fn expression(&self, stored: &StoredExpression) -> Read<Expression> {
        expression(stored, &self.symbols, self.prover.derivation(), self.read)
    }
}

struct Rebuild<'a, 'f> {
    prover: &'a mut Prover<'f>,
    symbols: &'a BTreeMap<String, Var>,
    read: Reader<'a>,
    subject: &'a str,
    premises: &'a [StepId],
}

impl Rebuild<'_, '_> {
    /// Makes the step; `Ok(None)` where the rule refuses.
    fn claim(mut self, claim: &StoredClaim) -> Read<Option<StepId>> {
        let (subject, premises) = (self.subject, self.premises);
        match claim {
            StoredClaim::Identities(stored) => {
                let mut equations = Vec::with_capacity(stored.len());
                for (label, left, right) in stored {
                    equations.push(Equation {
                        label: *label,
                        left: self.expression(left)?,
                        right: self.expression(right)?,
                    });
                }
                Ok(self.prover.identities(subject, equations, premises).ok().map(|p| p.step()))
            }
            StoredClaim::Bound(of, relation) => {
                let of = self.expression(of)?;
                Ok(self.prover.bound(subject, of, relation_back(*relation), premises).map(|p| p.step()))
            }
            StoredClaim::Combination { of, relation, facts, squares } => {
                let of = self.expression(of)?;
                let certificate = self.combination(facts, squares)?;
                let relation = relation_back(*relation);
                Ok(self.prover.bound_by(subject, of, relation, certificate, premises).map(|p| p.step()))
            }
            StoredClaim::Balanced(matrix) => {
                let matrix = self.matrix(matrix)?;
                Ok(self.prover.balanced(subject, &matrix, premises).map(|p| p.step()))
            }
            StoredClaim::Assumed(words) => Ok(Some(self.prover.assumed(subject, words))),
            _ => self.semidefinite(claim),
        }
    }

    fn semidefinite(&mut self, claim: &StoredClaim) -> Read<Option<StepId>> {
        let subject = self.subject;
        match claim {
            StoredClaim::Laplacian => {
                let balance = self.balance()?;
                Ok(self.prover.laplacian(subject, &balance).map(|p| p.step()))
            }
            StoredClaim::Characteristic { matrix, without } => {
                let matrix = self.matrix(matrix)?;
                let balance = without.map(|_| self.balance()).transpose()?;
                let reduction = balance.as_ref().zip(*without);
                Ok(self.prover.characteristic(subject, &matrix, reduction).map(|p| p.step()))
            }
            StoredClaim::Diagonal(matrix) => {
                let matrix = self.matrix(matrix)?;
                Ok(self.prover.diagonal(subject, &matrix).map(|p| p.step()))
            }
            StoredClaim::ZeroMatrix(matrix) => {
                let matrix = self.matrix(matrix)?;
                Ok(self.prover.zero_matrix(subject, &matrix).map(|p| p.step()))
            }
            StoredClaim::Decomposition(matrix, multipliers, squares) => {
                let read = |texts: &[String]| texts.iter().map(|text| (self.read)(text)).collect::<Read<Vec<_>>>();
                let squares = squares.iter().map(|(scale, u)| Ok(((self.read)(scale)?, read(u)?)));
                let of = Decomposition { multipliers: read(multipliers)?, squares: squares.collect::<Read<_>>()? };
                let matrix = self.matrix(matrix)?;
                let parts = semidefinite_premises(self.prover, self.premises)?;
                Ok(self.prover.decomposed(subject, &matrix, &parts, of).map(|p| p.step()))
            }
            StoredClaim::SemidefiniteAt(matrix, point) => {
                let (matrix, point) = (self.matrix(matrix)?, self.point(point)?);
                let balance = if self.premises.is_empty() { None } else { Some(self.balance()?) };
                Ok(self.prover.semidefinite_at(subject, &matrix, balance.as_ref(), &point).map(|p| p.step()))
            }
            _ => self.failure(claim),
        }
    }

    fn failure(&mut self, claim: &StoredClaim) -> Read<Option<StepId>> {
        let subject = self.subject;
        let (step, value) = match claim {
            StoredClaim::Refuted(label, left, right, point, value) => {
                let (left, right) = (self.expression(left)?, self.expression(right)?);
                let point = self.point(point)?;
                let made = self.prover.refute(subject, Equation { label: *label, left, right }, &point);
                (made.map(|r| (r.step(), r.failure().value.clone())), value)
            }
            StoredClaim::RefutedBound(of, relation, point, value) => {
                let claim = Bounded { expression: self.expression(of)?, relation: relation_back(*relation) };
                let point = self.point(point)?;
                let made = self.prover.refute_bound(subject, claim, &point);
                (made.map(|r| (r.step(), r.failure().value.clone())), value)
            }
            StoredClaim::RefutedSemidefinite(matrix, vector, point, value) => {
                let (matrix, point) = (self.matrix(matrix)?, self.point(point)?);
                let vector = vector.iter().map(|q| number(q)).collect::<Read<Vec<_>>>()?;
                let made = self.prover.refute_semidefinite(subject, &matrix, &vector, &point);
                (made.map(|r| (r.step(), r.failure().value.clone())), value)
            }
            _ => return Err("an unknown claim".into()),
        };
        let Some((step, made)) = step else { return Ok(None) };
        if agrees(&made, value)? { Ok(Some(step)) } else { Err("the value at the point is not the one stated".into()) }
    }

    fn balance(&self) -> Read<Proved<super::claim::Balanced>> {
        let id = *self.premises.first().ok_or("a premise is missing")?;
        match self.prover.derivation().step(id).map(|step| step.statement()) {
            Some(Statement::Balanced(claim)) => Ok(Proved { claim: claim.clone(), step: id }),
            _ => Err("the premise is not about a balanced matrix".into()),
        }
    }

    fn combination(&self, facts: &[(String, String, String)], squares: &[(String, String)]) -> Read<Combination> {
        let mut combination = Combination::default();
        for (scale, multiplier, fact) in facts {
            combination.facts.push((number(scale)?, (self.read)(multiplier)?, (self.read)(fact)?));
        }
        for (scale, root) in squares {
            combination.squares.push((number(scale)?, (self.read)(root)?));
        }
        Ok(combination)
    }

    fn expression(&self, stored: &StoredExpression) -> Read<Expression> {
        expression(stored, self.symbols, self.prover.derivation(), self.read)
    }

    fn matrix(&self, stored: &StoredMatrix) -> Read<Rc<Matrix>> {
        let entries = stored.entries.iter().map(|e| self.expression(e)).collect::<Read<Vec<_>>>()?;
        if Some(entries.len()) != stored.size.checked_mul(stored.size) || entries.is_empty() {
            return Err("the matrix is not square".into());
        }
        Ok(Rc::new(Matrix { size: stored.size, entries }))
    }

    fn point(&self, stored: &BTreeMap<String, String>) -> Read<Point> {
        stored.iter().map(|(name, value)| Ok((symbol(self.symbols, name)?, number(value)?))).collect()
    }
}

fn expression(
    stored: &StoredExpression,
    symbols: &BTreeMap<String, Var>,
    derivation: &Derivation,
    read: Reader<'_>,
) -> Read<Expression> {
    let function = |id: u32| -> Read<FunctionId> {
        let known = derivation.functions().len() as u32;
        if id < known { Ok(FunctionId(id)) } else { Err(format!("there is no function {id}")) }
    };
    let factor = |factor: &StoredFactor| -> Read<Factor> {
        Ok(match factor {
            StoredFactor::Formula(text) => Factor::Element(read(text)?),
            StoredFactor::Function(f) => Factor::Function(function(*f)?),
            StoredFactor::Slope(f, x) => Factor::Slope(function(*f)?, symbol(symbols, x)?),
            StoredFactor::LogSlope(f, x) => Factor::LogSlope(function(*f)?, symbol(symbols, x)?),
            StoredFactor::Euler(f, all) => {
                let all = all.iter().map(|x| symbol(symbols, x)).collect::<Read<Vec<_>>>()?;
                Factor::Euler(function(*f)?, Rc::new(all))
            }
        })
    };
    let product = |(coefficient, factors): &(i64, Vec<StoredFactor>)| -> Read<Product> {
        Ok(Product { coefficient: *coefficient, factors: factors.iter().map(factor).collect::<Read<Vec<_>>>()? })
    };
    Ok(Expression(stored.iter().map(product).collect::<Read<Vec<_>>>()?))
}

fn symbol(symbols: &BTreeMap<String, Var>, name: &str) -> Read<Var> {
    symbols.get(name).copied().ok_or_else(|| format!("there is no symbol {name}"))
}

fn number(text: &str) -> Read<Rational> {
    let (numerator, denominator) = text.split_once('/').unwrap_or((text, "1"));
    let parsed = numerator.trim().parse().ok().zip(denominator.trim().parse().ok());
    match parsed {
        Some((n, d)) if d != num_bigint::BigInt::ZERO => Ok(Rational::new(n, d)),
        _ => Err(format!("{text} is not a rational number")),
    }
}

/// Whether a value that was computed is the stated one: equal numbers, or bounds that overlap.
fn agrees(made: &Value, stated: &StoredValue) -> Read<bool> {
    Ok(match (made, stated) {
        (Value::Exact(q), StoredValue::Exact(text)) => *q == number(text)?,
        (Value::Enclosed { from, to, .. }, StoredValue::Between(low, high)) => {
            let (low, high) = (number(low)?, number(high)?);
            low <= high && low <= *to && *from <= high
        }
        _ => false,
    })
}
