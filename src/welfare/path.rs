//! Expenditure at constant utility along a price path, without a closed form.
//!
//! On an indifference surface de = Σ xᵢ(p, e) dpᵢ (Shephard's lemma). Along the straight line p(t) = p⁰ + t Δp this is an
//! ordinary differential equation e' = f(t, e), whose solution with e(0) = m is e(p(1), v(p⁰, m)). Each step is Taylor's
//! formula of the third order with the remainder enclosed over the step (Moore 1966), so that the result is an interval
//! that contains the exact value. Solutions do not cross; the two ends are carried along each by itself.

use num_traits::{One, Signed, Zero};

use crate::algebra::budget;
use crate::algebra::evaluation::Point;
use crate::algebra::field::Field;
use crate::algebra::generator::Element;
use crate::algebra::interval::Interval;
use crate::algebra::monomial::Var;
use crate::algebra::number::{Rational, rational};
use crate::algebra::polynomial::Poly;
use crate::model::{Model, Parameter};

/// The working precision, in bits.
const BITS: u32 = 96;
/// The shortest step is 2^−`SHORTEST`.
const SHORTEST: u32 = 24;
/// The most steps.
const MOST_STEPS: u32 = 20_000;
/// Units of work for one enclosure, beside the length of what is enclosed.
const WORK: u64 = 64;

/// A straight line in prices, and the income to begin with.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Path {
    /// Each price with its value at the start and at the end.
    pub prices: Vec<(Var, Rational, Rational)>,
    /// The income at the start.
    pub income: Rational,
}

/// The income that keeps utility at the end of a path lies between these.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Expenditure {
    /// The path.
    pub path: Path,
    /// A lower bound.
    pub from: Rational,
    /// An upper bound.
    pub to: Rational,
    /// How many steps were taken.
    pub steps: u32,
}

/// Why there is no number.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum NotAlong {
    /// These names have no value: parameters, or prices that the path leaves out.
    WithoutValue(Vec<String>),
    /// The model has no demands.
    NoDemands,
    /// The start, or the end, is not a point of the domain with positive quantities.
    Outside {
        /// Whether it is the start.
        start: bool,
    },
    /// Somewhere on the way the demands are not defined, or change too fast.
    Stuck,
}

impl NotAlong {
    /// The reason in words.
    pub fn describe(&self) -> String {
        match self {
            NotAlong::WithoutValue(names) => {
                format!("no value is given for {}: prices by --along, parameters by --with", names.join(", "))
            }
            NotAlong::NoDemands => "the model has no Marshallian demands".to_string(),
            NotAlong::Outside { start: true } => {
                "the start of the path is not shown to be a point of the domain with positive quantities".to_string()
            }
            NotAlong::Outside { start: false } => {
                "the end of the path is not shown to be a point of the domain with positive quantities".to_string()
            }
            NotAlong::Stuck => "the demands could not be followed along the whole path".to_string(),
        }
    }
}

/// e(p¹, v(p⁰, m)) to about `digits` decimal digits of the income. Where the Slutsky matrix is symmetric it does not
/// depend on the path between the two ends, and that is for the caller to know. Cost: the number of steps, which grows
/// with the cube root of the accuracy, times the length of the demands' second derivatives.
///
/// # Errors
/// Where a value is missing, or the path leaves what is known of the domain.
pub fn expenditure(model: &Model, path: &Path, digits: u32) -> Result<Expenditure, NotAlong> {
    let (Some(income), false) = (model.income, model.demands.is_empty()) else { return Err(NotAlong::NoDemands) };
    all_given(model, path, income)?;
    at_end(model, path, income, &path.income, true)?;
    let flow = Flow::new(model, path, income);
    let tolerance = &path.income / Rational::from_integer(num_bigint::BigInt::from(10).pow(digits));
    let (mut from, mut to, mut steps) = (path.income.clone(), path.income.clone(), 0);
    let (mut at, mut level) = (Rational::zero(), 4);
    while at < Rational::one() {
        let length = power_of_half(level);
        let allowed = &tolerance * &length;
        let pair = flow.step(&at, &length, &from).zip(flow.step(&at, &length, &to));
        match pair.filter(|(low, high)| steps < MOST_STEPS && width(low) <= allowed && width(high) <= allowed) {
            Some((low, high)) => {
                (from, to) = (low.lo_rational(), high.hi_rational());
                at += &length;
                steps += 1;
                // a longer step only from where it fits into the whole
                let slack = width(&low).max(width(&high)) * rational(32, 1) < allowed;
                if slack && level > 0 && (&at / power_of_half(level - 1)).is_integer() {
                    level -= 1;
                }
            }
            None if level < SHORTEST && steps < MOST_STEPS => level += 1,
            None => return Err(NotAlong::Stuck),
        }
    }
    at_end(model, path, income, &from, false)?;
    at_end(model, path, income, &to, false)?;
    Ok(Expenditure { path: path.clone(), from, to, steps })
}

fn power_of_half(level: u32) -> Rational {
    Rational::new(One::one(), num_bigint::BigInt::one() << level)
}

fn width(interval: &Interval) -> Rational {
    interval.hi_rational() - interval.lo_rational()
}

fn all_given(model: &Model, path: &Path, income: Var) -> Result<(), NotAlong> {
    let given = |v: &Var| *v == income || path.prices.iter().any(|(price, ..)| price == v);
    let symbols = model.demands.iter().flat_map(|demand| model.field.symbols_of(&demand.quantity));
    let open = model.parameters.iter().filter(|parameter| value(parameter).is_none()).map(|parameter| parameter.var);
    let mut missing: Vec<Var> = symbols.chain(model.prices.iter().copied()).chain(open).filter(|v| !given(v)).collect();
    missing.sort_unstable();
    missing.dedup();
    let names: Vec<String> = missing.into_iter().filter_map(|v| model.field.name(v)).collect();
    if names.is_empty() { Ok(()) } else { Err(NotAlong::WithoutValue(names)) }
}

/// The number that is put in for a parameter.
fn value(parameter: &Parameter) -> Option<Rational> {
    parameter.eliminated.as_ref()?.as_constant()
}

/// Whether an end of the path is known to be admissible.
fn at_end(model: &Model, path: &Path, income: Var, level: &Rational, start: bool) -> Result<(), NotAlong> {
    let price = |(v, from, to): &(Var, Rational, Rational)| (*v, if start { from.clone() } else { to.clone() });
    let mut point: Point = path.prices.iter().map(price).collect();
    point.insert(income, level.clone());
    point.extend(model.parameters.iter().filter_map(|parameter| Some((parameter.var, value(parameter)?))));
    let positive = |e: &Element| model.field.enclose(e, &point, BITS).is_some_and(|x| x.lo_rational().is_positive());
    let quantities = model.demands.iter().all(|demand| positive(&demand.quantity));
    if quantities && model.is_admissible(&point) { Ok(()) } else { Err(NotAlong::Outside { start }) }
}

/// e' = f and its first two derivatives along solutions.
struct Flow<'m> {
    field: &'m Field,
    path: &'m Path,
    income: Var,
    rates: [Element; 3],
}

impl<'m> Flow<'m> {
    fn new(model: &'m Model, path: &'m Path, income: Var) -> Flow<'m> {
        let field = &model.field;
        let moves: Vec<(Var, Rational)> = path.prices.iter().map(|(v, from, to)| (*v, to - from)).collect();
        let demanded = model.demands.iter().zip(&model.prices).filter_map(|(demand, price)| {
            let (_, change) = moves.iter().find(|(v, _)| v == price)?;
            Some(demand.quantity.scale(change))
        });
        let slope = Poly::sum(demanded.map(|e| field.current(&e)).collect());
        let along = |g: &Element| {
            let by_prices = moves.iter().map(|(v, change)| field.derivative(g, *v).scale(change));
            let by_income = field.product(&field.derivative(g, income), &slope);
            let all: Vec<Element> = by_prices.chain([by_income]).collect();
            Poly::sum(all.iter().map(|e| field.current(e)).collect())
        };
        let first = along(&slope);
        let second = along(&first);
        Flow { field, path, income, rates: [slope, first, second] }
    }

    /// An enclosure of the solution after a step from this income; `None` where the step is too long.
    fn step(&self, at: &Rational, length: &Rational, income: &Rational) -> Option<Interval> {
        let here = Interval::from_rational(income, BITS);
        let now = self.prices(at, at);
        let slope = self.enclose(0, &now, &here)?;
        let next = at + length;
        let during = self.prices(at, &next);
        let range = self.range(&slope, length, income, &during)?;
        let step = Interval::from_rational(length, BITS);
        let half = step.mul(&step).scaled(-1);
        let sixth = half.mul(&step).div(&Interval::from_rational(&rational(3, 1), BITS))?;
        let curve = self.enclose(1, &now, &here)?;
        let rest = self.enclose(2, &during, &range)?;
        Some(here.add(&step.mul(&slope)).add(&half.mul(&curve)).add(&sixth.mul(&rest)))
    }

    /// An interval that the solution does not leave during the step (Picard): e + [0, h] f(interval) lies inside.
    fn range(
        &self,
        slope: &Interval,
        length: &Rational,
        income: &Rational,
        during: &[(Var, Interval)],
    ) -> Option<Interval> {
        let steepest = slope.lo_rational().abs().max(slope.hi_rational().abs());
        let reach = (steepest * rational(2, 1) + income * rational(1, 1024)) * length;
        let range = hull(&(income - &reach), &(income + &reach));
        let moved = hull(&Rational::zero(), length).mul(&self.enclose(0, during, &range)?);
        let after = Interval::from_rational(income, BITS).add(&moved);
        range.encloses(&after).then_some(range)
    }

    fn enclose(&self, order: usize, prices: &[(Var, Interval)], income: &Interval) -> Option<Interval> {
        let rate = self.rates.get(order)?;
        budget::spend(WORK * (rate.len() as u64 + 1));
        let over: Vec<(Var, Interval)> = prices.iter().cloned().chain([(self.income, income.clone())]).collect();
        self.field.enclose_over(rate, &over, BITS)
    }

    /// The prices while t runs from `from` to `to`.
    fn prices(&self, from: &Rational, to: &Rational) -> Vec<(Var, Interval)> {
        let value = |start: &Rational, end: &Rational, t: &Rational| start + (end - start) * t;
        self.path.prices.iter().map(|(v, a, b)| (*v, hull(&value(a, b, from), &value(a, b, to)))).collect()
    }
}

fn hull(a: &Rational, b: &Rational) -> Interval {
    let (low, high) = if a <= b { (a, b) } else { (b, a) };
    let (low, high) = (Interval::from_rational(low, BITS), Interval::from_rational(high, BITS));
    Interval::between(low.lo().clone(), high.hi().clone(), BITS)
}
