//! Names that the field has given to families of demands, told by the structure of the demands alone. A name is given once
//! everything else about a branch is settled; nothing depends on it.

use crate::algebra::field::Field;
use crate::algebra::generator::{Base, Element, Kind};
use crate::algebra::monomial::Var;
use crate::algebra::polynomial::Poly;
use crate::conditions::coefficients::moves;
use crate::model::{Coverage, Model};

/// The name of the family that the demands of a complete system belong to, symmetry being proven. `integrable` says that
/// homogeneity and adding-up are, too.
pub(super) fn name(model: &Model, integrable: bool) -> Option<&'static str> {
    let system = Shares::of(model)?;
    if model.coverage != Coverage::Complete || !integrable {
        return system.engel_curves();
    }
    system
        .constant()
        .or_else(|| system.powers())
        .or_else(|| system.linear())
        .or_else(|| system.logarithmic())
        .or_else(|| if system.are_ratios_of_logarithms() { Some("indirect translog") } else { system.engel_curves() })
}

/// The shares of a system, and its variables.
struct Shares<'m> {
    field: &'m Field,
    shares: Vec<Element>,
    outlays: Vec<Element>,
    prices: Vec<Var>,
    income: Var,
    complete: bool,
}

impl<'m> Shares<'m> {
    fn of(model: &'m Model) -> Option<Shares<'m>> {
        let income = model.income?;
        if model.demands.is_empty() || model.demands.len() != model.prices.len() {
            return None;
        }
        let shares = model.demands.iter().map(|d| d.share.clone()).collect();
        let outlays = model.demands.iter().map(|d| d.outlay.clone()).collect();
        let complete = model.coverage == Coverage::Complete;
        Some(Shares { field: &model.field, shares, outlays, prices: model.prices.clone(), income, complete })
    }

    /// x ∂e/∂x.
    fn slope(&self, e: &Element, v: Var) -> Element {
        self.field.reduce(&self.field.log_derivative(e, v))
    }

    fn income_slope(&self, e: &Element) -> Element {
        self.slope(e, self.income)
    }

    /// Whether an element changes neither with prices nor with income.
    fn is_fixed(&self, e: &Element) -> bool {
        let still = |v: &Var| self.field.is_zero(&self.field.log_derivative(e, *v));
        self.prices.iter().chain([&self.income]).all(still)
    }

    fn vanishes(&self, e: &Element) -> bool {
        self.field.is_zero(e)
    }

    /// Whether all derivatives of a third order with respect to the logarithms of prices vanish.
    fn is_quadratic_in_log_prices(&self, e: &Element) -> bool {
        let n = self.prices.len();
        (0..n).all(|i| {
            let first = self.slope(e, self.prices[i]);
            (i..n).all(|j| {
                let second = self.slope(&first, self.prices[j]);
                (j..n).all(|k| self.vanishes(&self.field.log_derivative(&second, self.prices[k])))
            })
        })
    }

    fn constant(&self) -> Option<&'static str> {
        self.shares.iter().all(|w| self.is_fixed(w)).then_some("Cobb-Douglas")
    }

    /// wᵢ/wⱼ a product of powers: those of pᵢ and pⱼ alone, and of income so that it is homogeneous.
    fn powers(&self) -> Option<&'static str> {
        let first = self.shares.first()?;
        let mut exponents: Vec<Element> = Vec::new();
        for (at, share) in self.shares.iter().enumerate().skip(1) {
            let ratio = self.field.quotient(share, first).ok()?;
            for (k, price) in self.prices.iter().enumerate() {
                let exponent = self.field.reduce(&self.field.quotient(&self.slope(&ratio, *price), &ratio).ok()?);
                match k {
                    0 if at == 1 => exponents.push(exponent.neg()),
                    0 if !self.vanishes(&(&exponents[0] + &exponent)) => return None,
                    k if k == at => exponents.push(exponent),
                    0 => {}
                    _ if !self.vanishes(&exponent) => return None,
                    _ => {}
                }
            }
        }
        if !exponents.iter().all(|e| self.is_fixed(e)) {
            return None;
        }
        let equal = exponents.iter().all(|e| self.vanishes(&(e - &exponents[0])));
        Some(if equal { "constant elasticity of substitution" } else { "indirect addilog" })
    }

    /// Outlays linear in prices and income.
    fn linear(&self) -> Option<&'static str> {
        let linear = |e: &Element| {
            let derivative = |v: &Var| {
                let slope = self.field.log_derivative(e, *v);
                self.field.quotient(&slope, &Poly::var(*v)).is_ok_and(|d| self.is_fixed(&d))
            };
            self.prices.iter().chain([&self.income]).all(derivative)
        };
        self.outlays.iter().all(linear).then_some("linear expenditure system")
    }

    /// Shares that are polynomials in the logarithm of income of degree one or two, with quadratic price indices.
    fn logarithmic(&self) -> Option<&'static str> {
        let first: Vec<Element> = self.shares.iter().map(|w| self.income_slope(w)).collect();
        if first.iter().all(|slope| self.is_fixed(slope)) {
            if !self.shares.iter().all(|w| self.is_quadratic_in_log_prices(w)) {
                return None;
            }
            let homothetic = first.iter().all(|slope| self.vanishes(slope));
            return Some(if homothetic { "homothetic translog" } else { "almost ideal" });
        }
        let second: Vec<Element> = first.iter().map(|slope| self.income_slope(slope)).collect();
        if !second.iter().all(|curve| self.vanishes(&self.income_slope(curve))) {
            return None;
        }
        let lead = second.iter().position(|curve| !self.vanishes(curve))?;
        self.is_quadratic(&first, &second, lead).then_some("quadratic almost ideal")
    }

    /// With θₘ² wᵢ = 2λᵢ/b(p): b a product of powers, θₘ wᵢ = βᵢ + 2λᵢ(ln m − ln a)/b with a quadratic ln a.
    fn is_quadratic(&self, first: &[Element], second: &[Element], lead: usize) -> bool {
        let Ok(level) = self.field.quotient(&first[lead], &second[lead]) else { return false };
        let parallel = |i: usize| {
            let ratio = self.field.quotient(&second[i], &second[lead]);
            ratio.is_ok_and(|ratio| {
                let rest = &first[i] - &self.field.product(&ratio, &first[lead]);
                self.is_fixed(&ratio) && self.is_fixed(&rest)
            })
        };
        let index = |price: &Var| {
            let growth = self.field.quotient(&self.slope(&second[lead], *price), &second[lead]);
            growth.is_ok_and(|growth| {
                let cleared = &self.slope(&level, *price) + &self.field.product(&growth, &level);
                self.is_fixed(&growth) && self.is_quadratic_in_log_prices(&cleared)
            })
        };
        (0..first.len()).all(parallel) && self.prices.iter().all(index)
    }

    /// Shares with numerators and one denominator that are linear in logarithms.
    fn are_ratios_of_logarithms(&self) -> bool {
        let mut denominators = Vec::new();
        for share in &self.shares {
            let (numerator, below) = self.field.fraction(share);
            let below: Vec<Element> = below.iter().map(|(v, _)| self.field.expand(&Poly::var(*v))).collect();
            let moving = below.into_iter().filter(|e| e.vars().iter().any(|v| moves(self.field, *v)));
            denominators.extend(moving);
            if !self.is_linear_in_logarithms(&numerator) {
                return false;
            }
        }
        let same = denominators.iter().all(|e| *e == denominators[0]);
        !denominators.is_empty() && same && denominators.iter().all(|e| self.is_linear_in_logarithms(e))
    }

    fn is_linear_in_logarithms(&self, e: &Element) -> bool {
        self.field.expand(e).collect(|v| moves(self.field, v)).iter().all(|(monomial, _)| {
            let mut moving = monomial.iter();
            match (moving.next(), moving.next()) {
                (None, _) => true,
                (Some((v, 1)), None) => matches!(&*self.field.kind(v), Kind::Ln(Base::Var(_))),
                _ => false,
            }
        })
    }

    /// Families named after their Engel curves.
    fn engel_curves(&self) -> Option<&'static str> {
        let slopes: Vec<Element> = self.shares.iter().map(|w| self.income_slope(w)).collect();
        if slopes.iter().all(|slope| self.vanishes(slope)) {
            return Some("homothetic");
        }
        let outlay_slopes: Vec<Element> = self.outlays.iter().map(|y| self.income_slope(y)).collect();
        let moving = outlay_slopes.iter().filter(|slope| !self.vanishes(slope)).count();
        if moving == usize::from(self.complete) && self.outlays.len() > 1 {
            return Some("quasi-linear");
        }
        if outlay_slopes.iter().all(|slope| self.vanishes(&(&self.income_slope(slope) - slope))) {
            return Some("Gorman polar form");
        }
        slopes.iter().all(|slope| self.vanishes(&self.income_slope(slope))).then_some("PIGLOG")
    }
}
