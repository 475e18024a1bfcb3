//! The Slutsky matrix in the coordinates in which it is shortest.
//!
//! With shares wᵢ and θ = p ∂/∂p (θₘ = m ∂/∂m), pᵢ pⱼ Sᵢⱼ / m = Tᵢⱼ + wᵢ wⱼ − δᵢⱼ wᵢ where Tᵢⱼ = θⱼ wᵢ + wⱼ θₘ wᵢ; with outlays
//! yᵢ = pᵢ xᵢ, pᵢ pⱼ Sᵢⱼ = Tᵢⱼ − δᵢⱼ yᵢ where Tᵢⱼ = θⱼ yᵢ + yⱼ ∂yᵢ/∂m. In both, S is symmetric exactly when T is.
//!
//! Two relatives have the same form. For inverse demands πᵢ with shares wᵢ = xᵢ πᵢ and θ = x ∂/∂x, the Antonelli matrix is
//! xᵢ xⱼ Aᵢⱼ = Tᵢⱼ + wᵢ wⱼ − δᵢⱼ wᵢ where Tᵢⱼ = θⱼ wᵢ − wⱼ Σₖ θₖ wᵢ. For Hicksian demands, yᵢ = pᵢ hᵢ(p, u) and Tᵢⱼ = θⱼ yᵢ.

use std::rc::Rc;

use crate::algebra::generator::Element;
use crate::algebra::monomial::{Monomial, Var};
use crate::algebra::number::rational;
use crate::algebra::polynomial::Poly;
use crate::language::Preferences;
use crate::model::{Coverage, Form, Model, inverse_shares};
use crate::proof::{Expression, Factor, FunctionId, Matrix, Prover};

use super::compact::Collector;

/// What the demands are written in.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Coordinates {
    /// Budget shares.
    Shares,
    /// Outlays.
    Outlays,
}

/// What stands in for the change of income that keeps utility.
#[derive(Clone, Debug, PartialEq)]
pub enum Compensation {
    /// Income itself: Marshallian demands.
    Income(Var),
    /// All quantities in proportion: inverse demands.
    Scale,
    /// Nothing: Hicksian demands, with the expenditure function.
    Kept(Element),
}

/// The demands of a model as functions of a derivation.
#[derive(Clone, Debug)]
pub struct System {
    /// What the functions are.
    pub coordinates: Coordinates,
    /// A function for each good, as the author wrote it.
    pub functions: Vec<FunctionId>,
    /// The same functions with long sums named.
    pub collected: Vec<FunctionId>,
    /// The prices of the goods; of inverse demands, their quantities.
    pub prices: Vec<Var>,
    /// How utility is kept.
    pub compensation: Compensation,
    /// The prices of goods outside the system.
    pub others: Vec<Var>,
    /// What else must be positive where the system is a consumer's.
    pub positive: Vec<Element>,
}

impl System {
    /// The demands of a model, in shares where most are written so; else its inverse demands, or the Hicksian demands of
    /// its expenditure function. `None` where it has none of them.
    pub fn of(model: &Model, prover: &mut Prover<'_>) -> Option<System> {
        if model.demands.is_empty() {
            return System::inverse(model, prover).or_else(|| System::hicksian(model, prover));
        }
        let income = model.income?;
        if model.demands.len() != model.prices.len() {
            return None;
        }
        let shares = model.demands.iter().filter(|d| d.form == Form::Share).count();
        let coordinates = if 2 * shares > model.demands.len() { Coordinates::Shares } else { Coordinates::Outlays };
        let mut collector = Collector::new(&model.field, income);
        let (mut functions, mut collected) = (Vec::new(), Vec::new());
        for (demand, good) in model.demands.iter().zip(&model.goods) {
            let (word, element) = match coordinates {
                Coordinates::Shares => ("share", &demand.share),
                Coordinates::Outlays => ("outlay", &demand.outlay),
            };
            let short = collector.short(element);
            let addition = if short == *element { "" } else { ", collected" };
            functions.push(prover.define(&format!("{word} {}", good.name), element));
            collected.push(prover.define(&format!("{word} {}{addition}", good.name), &short));
        }
        let others = match &model.coverage {
            Coverage::Others(others) => others.clone(),
            Coverage::Complete | Coverage::Deflated => Vec::new(),
        };
        let (prices, compensation) = (model.prices.clone(), Compensation::Income(income));
        Some(System { coordinates, functions, collected, prices, compensation, others, positive: Vec::new() })
    }

    /// Marshallian demands that the model does not have itself, by their budget shares.
    pub fn of_shares(model: &Model, shares: &[Element], prover: &mut Prover<'_>) -> Option<System> {
        let income = model.income?;
        Some(System::in_shares(model, shares, model.prices.clone(), Compensation::Income(income), prover))
    }

    /// A system of shares, one for each good, in what moves them.
    fn in_shares(
        model: &Model,
        shares: &[Element],
        movers: Vec<Var>,
        compensation: Compensation,
        prover: &mut Prover<'_>,
    ) -> System {
        let functions = shares.iter().zip(&model.goods);
        let functions = functions.map(|(share, good)| prover.define(&format!("share {}", good.name), share));
        let functions: Vec<FunctionId> = functions.collect();
        System {
            coordinates: Coordinates::Shares,
            collected: functions.clone(),
            functions,
            prices: movers,
            compensation,
            others: Vec::new(),
            positive: Vec::new(),
        }
    }

    fn inverse(model: &Model, prover: &mut Prover<'_>) -> Option<System> {
        let given = model.given.as_ref().filter(|given| given.kind == Preferences::Utility);
        if let Some(given) = given {
            return System::of_utility(model, &given.value, prover);
        }
        if model.inverse.is_empty() {
            return None;
        }
        System::of_inverse(model, model.inverse.iter().map(|i| i.share.clone()).collect(), Vec::new(), prover)
    }

    /// The inverse demands of a direct utility. `None` where quantities have no names, or utility does not change.
    pub(super) fn of_utility(model: &Model, utility: &Element, prover: &mut Prover<'_>) -> Option<System> {
        let quantities: Vec<Var> = model.quantities.iter().copied().collect::<Option<_>>()?;
        let field = prover.field();
        // a utility that falls has the same shares: they alone do not tell
        let slopes = quantities.iter().map(|x| field.reduce(&field.log_derivative(utility, *x))).collect();
        System::of_inverse(model, inverse_shares(field, utility, &quantities)?, slopes, prover)
    }

    fn of_inverse(
        model: &Model,
        shares: Vec<Element>,
        positive: Vec<Element>,
        prover: &mut Prover<'_>,
    ) -> Option<System> {
        let quantities: Vec<Var> = model.quantities.iter().copied().collect::<Option<_>>()?;
        let system = System::in_shares(model, &shares, quantities, Compensation::Scale, prover);
        Some(System { positive, ..system })
    }

    fn hicksian(model: &Model, prover: &mut Prover<'_>) -> Option<System> {
        let e = &model.given.as_ref().filter(|given| given.kind == Preferences::Expenditure)?.value;
        let field = prover.field();
        let outlays = model.prices.iter().zip(&model.goods);
        let outlays = outlays.map(|(price, good)| {
            let outlay = field.log_derivative(e, *price);
            prover.define(&format!("outlay {}", good.name), &outlay)
        });
        let functions: Vec<FunctionId> = outlays.collect();
        Some(System {
            coordinates: Coordinates::Outlays,
            collected: functions.clone(),
            functions,
            prices: model.prices.clone(),
            compensation: Compensation::Kept(e.clone()),
            others: Vec::new(),
            positive: vec![e.clone()],
        })
    }

    /// The movers whose slopes the compensated slopes are made of.
    fn movers(&self) -> Vec<Var> {
        let mut movers = self.prices.clone();
        if let Compensation::Income(income) = self.compensation {
            movers.push(income);
        }
        movers
    }

    /// What all functions sum to where the budget is spent.
    pub(super) fn whole(&self) -> Expression {
        match (self.coordinates, &self.compensation) {
            (Coordinates::Shares, _) | (_, Compensation::Scale) => Expression::integer(1),
            (Coordinates::Outlays, Compensation::Income(income)) => Expression::element(Poly::var(*income)),
            (Coordinates::Outlays, Compensation::Kept(e)) => Expression::element(e.clone()),
        }
    }

    /// Has the prover differentiate every function in one pass.
    pub(super) fn prepare(&self, prover: &mut Prover<'_>) {
        let movers = self.movers();
        self.collected.iter().for_each(|f| prover.prepare(*f, &movers));
    }

    /// The number of goods.
    pub fn size(&self) -> usize {
        self.functions.len()
    }

    /// θⱼ of the i-th function.
    pub(super) fn price_slope(&self, i: usize, j: usize) -> Factor {
        Factor::LogSlope(self.collected[i], self.prices[j])
    }

    /// Tᵢⱼ: the slope that is symmetric exactly when the Slutsky matrix is.
    pub fn compensated_slope(&self, i: usize, j: usize) -> Expression {
        let (f, weight) = (self.collected[i], Factor::Function(self.collected[j]));
        let slope = Expression::from(self.price_slope(i, j));
        match (&self.compensation, self.coordinates) {
            (Compensation::Income(m), Coordinates::Shares) => slope.plus(1, vec![weight, Factor::LogSlope(f, *m)]),
            (Compensation::Income(m), Coordinates::Outlays) => slope.plus(1, vec![weight, Factor::Slope(f, *m)]),
            (Compensation::Scale, _) => slope.plus(-1, vec![weight, Factor::Euler(f, Rc::new(self.prices.clone()))]),
            (Compensation::Kept(_), _) => slope,
        }
    }

    /// pᵢ pⱼ Sᵢⱼ (outlays) or pᵢ pⱼ Sᵢⱼ/m (shares).
    pub fn scaled_entry(&self, i: usize, j: usize) -> Expression {
        let function = |k: usize| Factor::Function(self.collected[k]);
        let mut entry = self.compensated_slope(i, j);
        if self.coordinates == Coordinates::Shares {
            entry = entry.plus(1, vec![function(i), function(j)]);
        }
        if i == j { entry.plus(-1, vec![function(i)]) } else { entry }
    }

    /// The matrix of the scaled entries: the Slutsky matrix between positive diagonal matrices.
    pub fn scaled_matrix(&self) -> Rc<Matrix> {
        Rc::new(Matrix::new(self.size(), |i, j| self.scaled_entry(i, j)))
    }

    /// The Slutsky matrix itself.
    pub fn slutsky_matrix(&self) -> Rc<Matrix> {
        Rc::new(Matrix::new(self.size(), |i, j| scaled(&self.scaled_entry(i, j), &self.scale(i, j))))
    }

    /// What a scaled entry is multiplied by to give Sᵢⱼ.
    pub(super) fn scale(&self, i: usize, j: usize) -> Element {
        let mut powers = vec![(self.prices[i], -1), (self.prices[j], -1)];
        if let (Coordinates::Shares, Compensation::Income(income)) = (self.coordinates, &self.compensation) {
            powers.push((*income, 1));
        }
        Poly::term(&rational(1, 1), Monomial::from_pairs(powers))
    }

    /// Sᵢⱼ = ∂xᵢ/∂pⱼ + xⱼ ∂xᵢ/∂m, in its normal form.
    pub fn entry(&self, prover: &mut Prover<'_>, i: usize, j: usize) -> Element {
        let scaled = prover.value(&self.scaled_entry(i, j));
        let field = prover.field();
        field.reduce(&(&field.current(&scaled) * &field.current(&self.scale(i, j))))
    }

    /// What a function is multiplied by to give the quantity.
    pub(super) fn quantity_scale(&self, i: usize) -> Element {
        let mut powers = vec![(self.prices[i], -1)];
        if let (Coordinates::Shares, Compensation::Income(income)) = (self.coordinates, &self.compensation) {
            powers.push((*income, 1));
        }
        Poly::term(&rational(1, 1), Monomial::from_pairs(powers))
    }
}

/// The expression with every product multiplied by an element.
pub(super) fn scaled(expression: &Expression, by: &Element) -> Expression {
    let mut scaled = expression.clone();
    for product in &mut scaled.0 {
        product.factors.push(Factor::Element(by.clone()));
    }
    scaled
}
