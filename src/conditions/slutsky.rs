//! The Slutsky matrix in the coordinates in which it is shortest.
//!
//! With shares wᵢ and θ = p ∂/∂p (θₘ = m ∂/∂m), pᵢ pⱼ Sᵢⱼ / m = Tᵢⱼ + wᵢ wⱼ − δᵢⱼ wᵢ where Tᵢⱼ = θⱼ wᵢ + wⱼ θₘ wᵢ; with outlays
//! yᵢ = pᵢ xᵢ, pᵢ pⱼ Sᵢⱼ = Tᵢⱼ − δᵢⱼ yᵢ where Tᵢⱼ = θⱼ yᵢ + yⱼ ∂yᵢ/∂m. In both, S is symmetric exactly when T is.

use std::rc::Rc;

use crate::algebra::generator::Element;
use crate::algebra::monomial::{Monomial, Var};
use crate::algebra::number::rational;
use crate::algebra::polynomial::Poly;
use crate::model::{Coverage, Form, Model};
use crate::proof::{Expression, Factor, FunctionId, Matrix, Prover};

/// What the demands are written in.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Coordinates {
    /// Budget shares.
    Shares,
    /// Outlays.
    Outlays,
}

/// The demands of a model as functions of a derivation.
#[derive(Clone, Debug)]
pub struct System {
    /// What the functions are.
    pub coordinates: Coordinates,
    /// A function for each good.
    pub functions: Vec<FunctionId>,
    /// The prices of the goods.
    pub prices: Vec<Var>,
    /// Income.
    pub income: Var,
    /// The prices of goods outside the system.
    pub others: Vec<Var>,
}

impl System {
    /// The demands of a model, in shares where most are written so. `None` without demands or income.
    pub fn of(model: &Model, prover: &mut Prover<'_>) -> Option<System> {
        let income = model.income?;
        if model.demands.is_empty() || model.demands.len() != model.prices.len() {
            return None;
        }
        let shares = model.demands.iter().filter(|d| d.form == Form::Share).count();
        let coordinates = if 2 * shares > model.demands.len() { Coordinates::Shares } else { Coordinates::Outlays };
        let functions = model.demands.iter().zip(&model.goods).map(|(demand, good)| match coordinates {
            Coordinates::Shares => prover.define(&format!("share {}", good.name), &demand.share),
            Coordinates::Outlays => prover.define(&format!("outlay {}", good.name), &demand.outlay),
        });
        let functions = functions.collect();
        let others = match &model.coverage {
            Coverage::Others(others) => others.clone(),
            Coverage::Complete | Coverage::Deflated => Vec::new(),
        };
        Some(System { coordinates, functions, prices: model.prices.clone(), income, others })
    }

    /// Has the prover differentiate every function in one pass.
    pub(super) fn prepare(&self, prover: &mut Prover<'_>) {
        let mut movers = self.prices.clone();
        movers.push(self.income);
        self.functions.iter().for_each(|f| prover.prepare(*f, &movers));
    }

    /// The number of goods.
    pub fn size(&self) -> usize {
        self.functions.len()
    }

    /// θⱼ of the i-th function.
    pub(super) fn price_slope(&self, i: usize, j: usize) -> Factor {
        Factor::LogSlope(self.functions[i], self.prices[j])
    }

    /// The income slope that goes with the coordinates: θₘ wᵢ or ∂yᵢ/∂m.
    fn income_slope(&self, i: usize) -> Factor {
        match self.coordinates {
            Coordinates::Shares => Factor::LogSlope(self.functions[i], self.income),
            Coordinates::Outlays => Factor::Slope(self.functions[i], self.income),
        }
    }

    /// Tᵢⱼ: the slope that is symmetric exactly when the Slutsky matrix is.
    pub fn compensated_slope(&self, i: usize, j: usize) -> Expression {
        Expression::from(self.price_slope(i, j))
            .plus(1, vec![Factor::Function(self.functions[j]), self.income_slope(i)])
    }

    /// pᵢ pⱼ Sᵢⱼ (outlays) or pᵢ pⱼ Sᵢⱼ/m (shares).
    pub fn scaled_entry(&self, i: usize, j: usize) -> Expression {
        let function = |k: usize| Factor::Function(self.functions[k]);
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
        if self.coordinates == Coordinates::Shares {
            powers.push((self.income, 1));
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
        if self.coordinates == Coordinates::Shares {
            powers.push((self.income, 1));
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
