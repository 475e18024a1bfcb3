//! A demand system as the recovery sees it: de = Σ xᵢ(p, e) dpᵢ, possibly in another income coordinate.

use crate::algebra::field::{Field, Relation};
use crate::algebra::generator::{Built, Element, Kind, Role};
use crate::algebra::monomial::Var;
use crate::algebra::polynomial::Poly;
use crate::algebra::sign::Sign;

use super::fractions::Moving;

/// dy = Σ demandsᵢ dpᵢ.
pub struct System<'f> {
    /// The field.
    pub field: &'f Field,
    /// The prices.
    pub prices: Vec<Var>,
    /// Income, or the coordinate that stands for it.
    pub income: Var,
    /// ∂y/∂pᵢ at constant utility, in prices and the income coordinate.
    pub demands: Vec<Element>,
}

impl System<'_> {
    /// Prices and income.
    pub fn variables(&self) -> Vec<Var> {
        let mut all = self.prices.clone();
        all.push(self.income);
        all
    }
}

/// Another coordinate for income: y = scale·m + shift, with functions of prices.
#[derive(Clone, Debug, PartialEq)]
pub struct Coordinate {
    /// What multiplies income.
    pub scale: Element,
    /// What is added.
    pub shift: Element,
}

impl Coordinate {
    /// Income itself.
    pub fn plain() -> Coordinate {
        Coordinate { scale: Poly::one(), shift: Poly::zero() }
    }

    /// Whether it is income itself.
    pub fn is_plain(&self) -> bool {
        self.scale.is_one() && self.shift.is_zero()
    }

    /// y for a given income.
    pub fn of_income(&self, field: &Field, income: &Element) -> Element {
        let scaled = field.product(&self.scale, income);
        &field.current(&scaled) + &field.current(&self.shift)
    }

    /// Income for a given y.
    pub fn to_income(&self, field: &Field, y: &Element) -> Built {
        field.quotient(&(&field.current(y) - &field.current(&self.shift)), &self.scale)
    }

    /// The system in this coordinate: ∂y/∂pᵢ = scale·xᵢ + m ∂scale/∂pᵢ + ∂shift/∂pᵢ, with a fresh symbol for y. The
    /// facts that speak of income are known of the symbol as well.
    pub fn transform<'f>(&self, system: &System<'f>) -> Option<System<'f>> {
        let field = system.field;
        let old = Poly::var(system.income);
        let positive = field.sign(&self.of_income(field, &old)) == Sign::Positive;
        let role = if positive { Role::Income } else { Role::Unknown };
        let y = field.symbol("y", role);
        let income = self.to_income(field, &Poly::var(y)).ok()?;
        field.assume(&income, Relation::Positive);
        for fact in field.facts() {
            if field.depends_on(&fact.element, system.income)
                && let Ok(element) = field.substitute(&fact.element, &[(system.income, income.clone())])
            {
                field.assume(&element, fact.relation);
            }
        }
        let mut demands = Vec::with_capacity(system.prices.len());
        for (price, demand) in system.prices.iter().zip(&system.demands) {
            let parts = [
                field.product(&self.scale, demand),
                field.product(&old, &field.derivative(&self.scale, *price)),
                field.derivative(&self.shift, *price),
            ];
            let whole = Poly::sum(parts.iter().map(|e| field.current(e)).collect());
            let there = field.substitute(&whole, &[(system.income, income.clone())]).ok()?;
            demands.push(field.reduce(&there));
        }
        Some(System { field, prices: system.prices.clone(), income: y, demands })
    }
}

/// The coordinates in sight: income itself, and what is linear in income below a fraction bar, a power, a logarithm or
/// an exponential together with prices.
pub fn coordinates(system: &System) -> Vec<Coordinate> {
    let field = system.field;
    let income = Moving::new(field, &[system.income]);
    let prices = Moving::new(field, &system.prices);
    let mut all = vec![Coordinate::plain()];
    let mut waiting: Vec<Var> = system.demands.iter().flat_map(|d| field.reduce(d).vars()).collect();
    let mut seen = Vec::new();
    while let Some(var) = waiting.pop() {
        if seen.contains(&var) || !income.moves(var) || !prices.moves(var) {
            continue;
        }
        seen.push(var);
        let inside = match &*field.kind(var) {
            Kind::Exp(argument) | Kind::Special(_, argument) => field.reduce(argument),
            Kind::Ln(crate::algebra::generator::Base::Sum(value)) | Kind::Sum { value, .. } => field.reduce(value),
            Kind::Ln(crate::algebra::generator::Base::Var(base)) => Poly::var(*base),
            _ => continue,
        };
        waiting.extend(inside.vars());
        if let Some(found) = linear_in(&income, &inside)
            && !all.contains(&found)
        {
            all.push(found);
        }
    }
    if !seen.is_empty() {
        let numeraires = system.prices.iter().filter_map(|p| field.inverse(&Poly::var(*p)).ok());
        let more = numeraires.map(|scale| Coordinate { scale, shift: Poly::zero() });
        let more: Vec<Coordinate> = more.filter(|c| !all.contains(c)).collect();
        all.extend(more);
    }
    all
}

/// scale·m + shift, if the element has that form; the shift is left out where it does not move with prices.
fn linear_in(income: &Moving, e: &Element) -> Option<Coordinate> {
    let field = income.field;
    let cleared = income.clear(e);
    if !cleared.denominator.is_empty() {
        return None;
    }
    let (mut scale, mut shift) = (Poly::zero(), Poly::zero());
    let own = field.current(&Poly::var(*income.symbols.first()?));
    let (_, own) = own.as_monomial().map(|(c, m)| (c, m.clone()))?;
    for (monomial, coefficient) in income.collect(&cleared.numerator) {
        if monomial == own {
            scale = coefficient;
        } else if monomial.is_one() {
            shift = coefficient;
        } else {
            return None;
        }
    }
    (!scale.is_zero()).then_some(Coordinate { scale, shift })
}
