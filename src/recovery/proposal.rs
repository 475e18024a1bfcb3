//! What a method proposes before anything is proven.

use num_traits::Signed;

use crate::algebra::budget;
use crate::algebra::field::{Field, Relation};
use crate::algebra::generator::Element;
use crate::algebra::monomial::{Monomial, Var};
use crate::algebra::number::Rational;
use crate::algebra::polynomial::Poly;
use crate::algebra::sign::Sign;

use super::fractions::Moving;
use super::gather::gathered;
use super::system::{Coordinate, System};

/// Preferences as a method found them.
#[derive(Clone, Debug)]
pub struct Proposal {
    /// v(p, m).
    pub indirect_utility: Option<Element>,
    /// e(p, u), where v could be solved for m.
    pub expenditure: Option<Element>,
    /// Elements in p and u that are positive because they equal positive functions of p and m.
    pub positive: Vec<Element>,
    /// z at the expenditure for utility u, where it was found as such: shorter than what φ(e) gives.
    pub level: Option<Element>,
    /// The sign of ∂v/∂m.
    pub rising: Sign,
    /// How it was found.
    pub working: Working,
}

/// The stations of a recovery, for the report.
#[derive(Clone, Debug, Default)]
pub struct Working {
    /// The income coordinate y, where it is not income itself.
    pub coordinate: Option<Coordinate>,
    /// The symbol for y in the elements below.
    pub income: Option<Var>,
    /// The functions of income that span the demands.
    pub functions: Vec<Element>,
    /// z = φ(y).
    pub z: Element,
    /// The coefficients of 1, z, z² in dz, one vector each.
    pub forms: Vec<Vec<Element>>,
    /// The particular solution of a quadratic system.
    pub particular: Option<Element>,
    /// e^B, or the price index of a system with b = 0.
    pub factor: Option<Element>,
    /// e^B·A.
    pub base: Option<Element>,
    /// The factor that makes D dm − Σ Nᵢ dpᵢ exact.
    pub integrating_factor: Option<Element>,
}

/// Quantities with more terms say little about signs.
const LONGEST_QUANTITY: usize = 12;
/// Units of work for the sign of ∂v/∂m.
const WORK_OF_ONE_SIGN: u64 = 2_000_000;

impl Proposal {
    /// The proposal in income itself, when it was found in another coordinate.
    pub fn in_income(mut self, system: &System, there: &System, coordinate: &Coordinate) -> Option<Proposal> {
        let field = system.field;
        if coordinate.is_plain() {
            return Some(self);
        }
        let y = coordinate.of_income(field, &Poly::var(system.income));
        if let Some(v) = &self.indirect_utility {
            self.indirect_utility = Some(field.substitute(v, &[(there.income, y)]).ok()?);
        }
        if let Some(e) = &self.expenditure {
            self.expenditure = coordinate.to_income(field, e).ok();
        }
        self.level = None;
        self.rising = self.rising.times(field.sign(&coordinate.scale));
        self.working.coordinate = Some(coordinate.clone());
        self.working.income = Some(there.income);
        Some(self)
    }

    /// The proposal with the sign of ∂v/∂m looked for where quantities are positive, if it is not known yet.
    pub fn with_orientation(mut self, system: &System) -> Proposal {
        let field = system.field;
        if let (Sign::Unknown | Sign::NonZero, Some(v)) = (self.rising, &self.indirect_utility) {
            let slope = field.derivative(v, system.income);
            let quantities = system.demands.iter().filter(|x| x.len() <= LONGEST_QUANTITY);
            let quantities: Vec<_> = quantities.map(|x| (x.clone(), Relation::Positive)).collect();
            let sign = budget::attempt(WORK_OF_ONE_SIGN, || field.suppose(&quantities, || field.sign(&slope)));
            self.rising = sign.unwrap_or(Sign::Unknown);
        }
        self
    }

    /// The proposal with powers of one sum brought together.
    pub fn gathered(mut self, field: &Field) -> Proposal {
        self.indirect_utility = self.indirect_utility.map(|v| gathered(field, &v));
        self.expenditure = self.expenditure.map(|e| gathered(field, &e));
        self
    }

    /// The proposal with utility measured without a positive constant factor that all of v shares.
    pub fn without_factor(mut self, system: &System, utility: Var) -> Proposal {
        let field = system.field;
        let Some(v) = self.indirect_utility.as_ref().map(|v| field.current(v)) else { return self };
        let moving = Moving::new(field, &system.variables());
        let split = v.primitive();
        let shared = split
            .monomial
            .iter()
            .filter(|(x, k)| *k > 0 && !moving.moves(*x) && field.sign(&Poly::var(*x)) == Sign::Positive);
        let constant = Monomial::from_pairs(shared);
        let factor = Poly::term(&Rational::from_integer(split.content.numer().abs()), constant);
        let Ok(inverse) = field.inverse(&factor) else { return self };
        if factor.is_one() {
            return self;
        }
        let scale = [(utility, field.product(&factor, &Poly::var(utility)))];
        let rescaled = |e: &Element| field.substitute(e, &scale).ok();
        self.indirect_utility = Some(field.product(&v, &inverse));
        self.positive = self.positive.iter().filter_map(rescaled).collect();
        self.level = self.level.as_ref().and_then(rescaled);
        let facts: Vec<_> = self.positive.iter().map(|e| (e.clone(), Relation::Positive)).collect();
        self.expenditure = self.expenditure.and_then(|e| field.suppose(&facts, || rescaled(&e)));
        self
    }

    /// The proposal with v turned round if it falls in income.
    pub fn turned(mut self, field: &Field, utility: Var) -> Proposal {
        if self.rising != Sign::Negative {
            return self;
        }
        let negative = [(utility, Poly::var(utility).neg())];
        let turn = |e: &Element| field.substitute(e, &negative).ok();
        self.indirect_utility = self.indirect_utility.map(|v| v.neg());
        self.positive = self.positive.iter().filter_map(turn).collect();
        self.level = self.level.as_ref().and_then(turn);
        let facts: Vec<_> = self.positive.iter().map(|e| (e.clone(), Relation::Positive)).collect();
        self.expenditure = self.expenditure.and_then(|e| field.suppose(&facts, || turn(&e)));
        self.rising = Sign::Positive;
        self
    }
}
