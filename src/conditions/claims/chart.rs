//! Charts: coordinates in which prices, income, utility and the quantities chosen are functions.

use crate::algebra::field::{Field, Relation};
use crate::algebra::generator::Element;
use crate::algebra::monomial::Var;
use crate::algebra::polynomial::Poly;
use crate::algebra::sign::Sign;
use crate::language::{Form, Preferences};
use crate::model::{Function, Model};
use crate::proof::StepId;

/// Which symbols are the coordinates.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Coordinates {
    /// Prices and income; u = v(p, m), x = x(p, m).
    Income,
    /// Prices and the utility level; m = e(p, u), x = h(p, u).
    Utility,
    /// Quantities and income; p = m π(x), u = U(x).
    Quantities,
}

impl Coordinates {
    /// The coordinates that are a function's own arguments.
    pub fn of(function: Function) -> Coordinates {
        match function {
            Function::Preferences(Preferences::Expenditure) | Function::Hicksian(_) => Coordinates::Utility,
            Function::Preferences(Preferences::Utility) | Function::Inverse(_) => Coordinates::Quantities,
            _ => Coordinates::Income,
        }
    }
}

/// Everything that is chosen, as functions of coordinates.
#[derive(Clone, Debug)]
pub struct Chart {
    /// The coordinates.
    pub coordinates: Coordinates,
    /// Prices.
    pub prices: Vec<Element>,
    /// Income, or expenditure.
    pub income: Element,
    /// The utility level, where a scale for it is known.
    pub utility: Option<Element>,
    /// Quantities.
    pub quantities: Vec<Element>,
    /// What every point of the domain satisfies in these coordinates.
    pub facts: Vec<(Element, Relation)>,
    /// The steps that establish the chart.
    pub premises: Vec<StepId>,
    /// Whether every point of the chart is one of the consumer's, so that claims may be judged in it; else it only shows
    /// formulas.
    pub judges: bool,
    symbols: Symbols,
}

/// The symbols of a model that a chart gives values to.
#[derive(Clone, Debug)]
struct Symbols {
    prices: Vec<Var>,
    income: Option<Var>,
    utility: Var,
    quantities: Vec<Option<Var>>,
}

/// What is known of the consumer that claims are about.
#[derive(Clone, Debug, Default)]
pub struct Charts {
    /// The charts.
    pub all: Vec<Chart>,
    /// Whether utility is known to rise in income; else a claim about an inverse function cannot be refuted by its
    /// value.
    pub rising: bool,
    /// Why nothing can be said, where the charts may not be those of a consumer.
    pub reserve: Option<String>,
    /// Claims of the file that are right by themselves, by their place.
    pub settled: Vec<(usize, super::ClaimFinding)>,
}

/// The functions that make a chart.
pub struct Values {
    /// Prices.
    pub prices: Vec<Element>,
    /// Income.
    pub income: Element,
    /// The utility level.
    pub utility: Option<Element>,
    /// Quantities.
    pub quantities: Vec<Element>,
}

impl Chart {
    /// A chart from its functions. What is known of the model's symbols is carried over, on top of `facts`; prices,
    /// income and quantities are positive. `None` where that cannot be expressed.
    pub fn new(
        model: &Model,
        coordinates: Coordinates,
        values: Values,
        facts: Vec<(Element, Relation)>,
    ) -> Option<Chart> {
        let field = &model.field;
        let Values { prices, income, utility, quantities } = values;
        let symbols = Symbols {
            prices: model.prices.clone(),
            income: model.income,
            utility: model.utility,
            quantities: model.quantities.clone(),
        };
        let premises = Vec::new();
        let mut chart =
            Chart { coordinates, prices, income, utility, quantities, facts, premises, judges: true, symbols };
        let mut positive = chart.prices.clone();
        positive.push(chart.income.clone());
        positive.extend(chart.quantities.iter().cloned());
        for e in positive {
            chart.require(field, e, Relation::Positive);
        }
        let values = chart.values();
        let known = field.facts();
        for fact in known.iter().filter(|fact| values.iter().any(|(var, _)| field.depends_on(&fact.element, *var))) {
            let there = field.suppose(&chart.facts.clone(), || field.substitute(&fact.element, &values)).ok()?;
            chart.require(field, there, fact.relation);
        }
        Some(chart)
    }

    fn require(&mut self, field: &Field, e: Element, relation: Relation) {
        let sign = field.suppose(&self.facts, || field.sign(&e));
        let follows = match relation {
            Relation::Positive => sign == Sign::Positive,
            Relation::NonNegative => sign.is_nonnegative(),
            Relation::NonZero => sign.excludes_zero(),
        };
        if !follows {
            self.facts.push((e, relation));
        }
    }

    /// The symbols that are not coordinates, with their values.
    pub fn values(&self) -> Vec<(Var, Element)> {
        let symbols = &self.symbols;
        let mut all: Vec<(Var, Element)> = symbols.prices.iter().copied().zip(self.prices.iter().cloned()).collect();
        all.extend(symbols.income.map(|var| (var, self.income.clone())));
        all.extend(self.utility.clone().map(|utility| (symbols.utility, utility)));
        let quantities = symbols.quantities.iter().zip(&self.quantities);
        all.extend(quantities.filter_map(|(var, e)| Some(((*var)?, e.clone()))));
        all.retain(|(var, e)| *e != Poly::var(*var));
        all
    }

    /// Whether a formula speaks of the utility level, and the chart knows none.
    pub fn lacks(&self, field: &Field, e: &Element) -> bool {
        self.utility.is_none() && field.depends_on(e, self.symbols.utility)
    }

    /// What a function is; `None` where it is not known in these coordinates.
    pub fn truth(&self, field: &Field, function: Function) -> Option<Element> {
        let x = |i: usize| self.quantities.get(i).cloned();
        let quotient = |a: &Element, b: &Element| field.quotient(a, b).ok();
        let outlay = |i: usize| Some(field.product(self.prices.get(i)?, &x(i)?));
        Some(match function {
            Function::Preferences(Preferences::Expenditure) => self.income.clone(),
            Function::Preferences(_) => self.utility.clone()?,
            Function::Hicksian(i) | Function::Demand(Form::Demand, i) => x(i)?,
            Function::Demand(Form::LogDemand, i) => field.suppose(&self.facts, || field.ln(&x(i)?).ok())?,
            Function::Demand(Form::Outlay, i) => outlay(i)?,
            Function::Demand(Form::Share, i) => quotient(&outlay(i)?, &self.income)?,
            Function::Inverse(i) => quotient(self.prices.get(i)?, &self.income)?,
            Function::Slutsky(i, j) => self.slutsky(field, i, j)?,
            Function::PriceElasticity(i, j) => self.per_quantity(field, i, Some(j), &self.price_slope(field, i, j)?)?,
            Function::IncomeElasticity(i) => self.per_quantity(field, i, None, &self.income_slope(field, i)?)?,
            Function::CompensatedElasticity(i, j) => {
                self.per_quantity(field, i, Some(j), &self.slutsky(field, i, j)?)?
            }
        })
    }

    /// The slope of a quantity, as an elasticity in a price or in income.
    fn per_quantity(&self, field: &Field, i: usize, price: Option<usize>, slope: &Element) -> Option<Element> {
        let mover = match price {
            Some(j) => self.prices.get(j)?,
            None => &self.income,
        };
        field.quotient(&field.product(mover, slope), self.quantities.get(i)?).ok()
    }

    fn slutsky(&self, field: &Field, i: usize, j: usize) -> Option<Element> {
        let price = *self.symbols.prices.get(j)?;
        let own = field.derivative(self.quantities.get(i)?, price);
        match self.coordinates {
            Coordinates::Utility => Some(own),
            Coordinates::Income => {
                let effect = field.product(self.quantities.get(j)?, &self.income_slope(field, i)?);
                Some(&field.current(&own) + &field.current(&effect))
            }
            Coordinates::Quantities => None,
        }
    }

    fn price_slope(&self, field: &Field, i: usize, j: usize) -> Option<Element> {
        match self.coordinates {
            Coordinates::Income => Some(field.derivative(self.quantities.get(i)?, *self.symbols.prices.get(j)?)),
            Coordinates::Utility => {
                let effect = field.product(self.quantities.get(j)?, &self.income_slope(field, i)?);
                let slutsky = self.slutsky(field, i, j)?;
                Some(&field.current(&slutsky) - &field.current(&effect))
            }
            Coordinates::Quantities => None,
        }
    }

    /// ∂x/∂m; at given utility, (∂h/∂u)/(∂e/∂u).
    fn income_slope(&self, field: &Field, i: usize) -> Option<Element> {
        let x = self.quantities.get(i)?;
        match self.coordinates {
            Coordinates::Income => Some(field.derivative(x, self.symbols.income?)),
            Coordinates::Utility => {
                let along = field.derivative(&self.income, self.symbols.utility);
                field.quotient(&field.derivative(x, self.symbols.utility), &along).ok()
            }
            Coordinates::Quantities => None,
        }
    }
}
