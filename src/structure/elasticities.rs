//! Income, price and compensated elasticities in closed form: ηᵢ = 1 + θₘwᵢ/wᵢ, εᵢⱼ = θⱼwᵢ/wᵢ − δᵢⱼ and
//! εᵢⱼ + wⱼ ηᵢ, with θₓ = x ∂/∂x. Each is offered in several forms, of which a report takes the shortest.

use crate::algebra::budget::{self, Stopped};
use crate::algebra::field::Field;
use crate::algebra::generator::Element;
use crate::algebra::monomial::Var;
use crate::algebra::number::rational;
use crate::algebra::polynomial::Poly;
use crate::model::Model;
use crate::proof::{Expression, Factor, Prover, StepId};

use super::question::Question;

/// The most goods whose elasticities are worked out.
const MOST_GOODS: usize = 16;
/// The most goods for which they are in all prices, and not in a good's own price alone.
const MOST_GOODS_IN_PAIRS: usize = 6;
/// The work that one form of an elasticity may take.
const WORK: u64 = 400_000;
/// Longer elasticities are not tried as a multiple of a share.
const LONGEST_WHOLE: usize = 120;
/// No elasticity is brought to one fraction over a longer share.
const LONGEST_SHARE: usize = 40;
/// Longer products are not multiplied out.
const LONGEST_PRODUCT: usize = 400;

/// A way to write an elasticity.
#[derive(Clone, Debug, PartialEq)]
pub enum Form {
    /// In prices and income.
    Whole(Element),
    /// constant + slope · w of a good, with constants that depend on parameters alone.
    Affine {
        /// The constant.
        constant: Element,
        /// What multiplies the share.
        slope: Element,
        /// The good.
        good: usize,
    },
    /// constant + w of `plus` + (numerator − c w of a good) / w of `below`.
    OverShare {
        /// A whole number.
        constant: i64,
        /// A good whose share is added.
        plus: Option<usize>,
        /// The numerator.
        numerator: Element,
        /// The good whose share is in the numerator, and c.
        less: Option<(usize, Element)>,
        /// The good whose share divides.
        below: usize,
    },
}

impl Form {
    /// How long it is to write, roughly.
    pub fn size(&self) -> usize {
        let of = |e: &Element| e.raw_terms().iter().map(|(monomial, _)| 1 + monomial.len()).sum::<usize>();
        match self {
            Form::Whole(e) => of(e),
            Form::Affine { constant, slope, .. } => 1 + of(constant) + of(slope),
            Form::OverShare { plus, numerator, less, .. } => {
                let less = less.as_ref().map_or(0, |(_, coefficient)| 1 + of(coefficient));
                2 + usize::from(plus.is_some()) + of(numerator) + less
            }
        }
    }
}

/// An elasticity.
#[derive(Clone, Debug)]
pub struct Elasticity {
    /// The good.
    pub good: usize,
    /// The good whose price changes; `None` for income.
    pub price: Option<usize>,
    /// Its forms; none where working it out took too much.
    pub forms: Vec<Form>,
}

/// The elasticities of a system.
#[derive(Clone, Debug, Default)]
pub struct Elasticities {
    /// In income, one for each good.
    pub income: Vec<Elasticity>,
    /// In prices, row by row, or in own prices alone.
    pub price: Vec<Elasticity>,
    /// In prices at constant utility, row by row, or in own prices alone.
    pub compensated: Vec<Elasticity>,
    /// Whether those in other prices are left out.
    pub own_prices_only: bool,
    /// Whether there are too many goods for any.
    pub left_out: bool,
}

impl Elasticities {
    /// The elasticities of a system.
    pub(super) fn of(question: &Question<'_>, prover: &mut Prover<'_>) -> Elasticities {
        let n = question.size();
        if n > MOST_GOODS {
            return Elasticities { left_out: true, ..Elasticities::default() };
        }
        let work = Work { question, model: question.model, field: question.field(), income: question.income };
        let mut all = Elasticities { own_prices_only: n > MOST_GOODS_IN_PAIRS, ..Elasticities::default() };
        for good in 0..n {
            all.income.push(work.elasticity(prover, good, None, Work::in_income));
            for price in (0..n).filter(|price| *price == good || !all.own_prices_only) {
                all.price.push(work.elasticity(prover, good, Some(price), Work::in_price));
                all.compensated.push(work.elasticity(prover, good, Some(price), Work::compensated));
            }
        }
        all
    }
}

/// An elasticity as constant + w of `plus` + numerator / w of `good`.
struct Parts {
    good: usize,
    constant: i64,
    plus: Option<usize>,
    numerator: Element,
}

struct Work<'a, 'm> {
    question: &'a Question<'m>,
    model: &'a Model,
    field: &'a Field,
    income: Var,
}

impl Work<'_, '_> {
    /// An elasticity in the forms that were found and proven.
    fn elasticity(
        &self,
        prover: &mut Prover<'_>,
        good: usize,
        price: Option<usize>,
        parts: fn(&Self, usize, usize) -> Option<Parts>,
    ) -> Elasticity {
        let mut forms: Vec<Form> = Vec::new();
        let parts = budget::attempt(WORK, || parts(self, good, price.unwrap_or(good))).ok().flatten();
        let Some(parts) = parts else { return Elasticity { good, price, forms } };
        let mut offer = |form: Result<Option<Form>, Stopped>| {
            let Some(form) = form.ok().flatten().filter(|form| !forms.contains(form)) else { return };
            if let Ok(Some(_)) = budget::attempt(WORK, || self.prove(prover, &parts, price, &form)) {
                forms.push(form);
            }
        };
        let whole = budget::attempt(WORK, || self.whole(&parts)).ok().flatten();
        offer(Ok(whole.clone().map(Form::Whole)));
        let over = |numerator: Element| {
            let (constant, plus, below) = (parts.constant, parts.plus, good);
            (!numerator.is_zero()).then_some(Form::OverShare { constant, plus, numerator, less: None, below })
        };
        offer(Ok(over(parts.numerator.clone())));
        if whole.is_some() {
            offer(budget::attempt(WORK, || over(self.field.reduce(&parts.numerator))));
            offer(budget::attempt(WORK, || self.ratio(&parts)));
        }
        if let (Some(price), None) = (price, parts.plus) {
            offer(budget::attempt(WORK, || self.by_income_effect(good, price)));
        }
        if let Some(whole) = whole.filter(|whole| whole.len() <= LONGEST_WHOLE) {
            for k in price.filter(|price| *price != good).into_iter().chain([good]) {
                offer(budget::attempt(WORK, || self.affine(&whole, k)));
            }
        }
        Elasticity { good, price, forms }
    }

    /// That the share times a form is what the elasticity is made of.
    fn prove(&self, prover: &mut Prover<'_>, parts: &Parts, price: Option<usize>, form: &Form) -> Option<StepId> {
        let w = |good: usize| self.question.shares.get(good).copied().map(Factor::Function);
        let own = *self.question.shares.get(parts.good)?;
        let mover = price.map_or(Some(self.income), |price| self.model.prices.get(price).copied())?;
        let mut left = Expression::from(Factor::LogSlope(own, mover)).plus(parts.constant, vec![w(parts.good)?]);
        if let Some(plus) = parts.plus {
            left = left.plus(1, vec![w(plus)?, w(parts.good)?]);
            left = left.plus(1, vec![w(plus)?, Factor::LogSlope(own, self.income)]);
        }
        let right = match form {
            Form::Whole(e) => Expression::zero().plus(1, vec![Factor::Element(e.clone()), w(parts.good)?]),
            Form::Affine { constant, slope, good } => Expression::zero()
                .plus(1, vec![Factor::Element(constant.clone()), w(parts.good)?])
                .plus(1, vec![Factor::Element(slope.clone()), w(*good)?, w(parts.good)?]),
            Form::OverShare { constant, plus, numerator, less, .. } => {
                let mut right = Expression::element(numerator.clone()).plus(*constant, vec![w(parts.good)?]);
                if let Some(plus) = plus {
                    right = right.plus(1, vec![w(*plus)?, w(parts.good)?]);
                }
                if let Some((good, coefficient)) = less {
                    right = right.plus(-1, vec![Factor::Element(coefficient.clone()), w(*good)?]);
                }
                right
            }
        };
        prover.identity("elasticity", left, right, &[]).ok().map(|proof| proof.step())
    }

    fn share(&self, good: usize) -> Option<&Element> {
        self.question.written.get(good)
    }

    fn slope(&self, good: usize, mover: Var) -> Option<Element> {
        Some(self.field.log_derivative(self.share(good)?, mover))
    }

    /// a·b, multiplied out where that is short, so that what cancels is seen to.
    fn product(&self, a: &Element, b: &Element) -> Element {
        let (a, b) = (self.field.current(a), self.field.current(b));
        if a.len() * b.len() <= LONGEST_PRODUCT { &a * &b } else { self.field.product(&a, &b) }
    }

    fn in_income(&self, good: usize, _: usize) -> Option<Parts> {
        Some(Parts { good, constant: 1, plus: None, numerator: self.slope(good, self.income)? })
    }

    fn in_price(&self, good: usize, price: usize) -> Option<Parts> {
        let numerator = self.slope(good, *self.model.prices.get(price)?)?;
        Some(Parts { good, constant: -i64::from(good == price), plus: None, numerator })
    }

    fn compensated(&self, good: usize, price: usize) -> Option<Parts> {
        let own = self.in_price(good, price)?;
        let effect = self.product(self.share(price)?, &self.slope(good, self.income)?);
        let numerator = &self.field.current(&own.numerator) + &self.field.current(&effect);
        Some(Parts { plus: Some(price), numerator, ..own })
    }

    fn whole(&self, parts: &Parts) -> Option<Element> {
        let field = self.field;
        let share = self.share(parts.good)?;
        if field.expand(share).len() > LONGEST_SHARE {
            return None;
        }
        let ratio = field.quotient(&field.reduce(&parts.numerator), share).ok()?;
        let mut terms = vec![Poly::int(parts.constant), ratio];
        terms.extend(parts.plus.and_then(|plus| self.share(plus)).cloned());
        let terms = terms.iter().map(|term| field.current(term)).collect();
        Some(field.reduce(&Poly::sum(terms)))
    }

    /// As one numerator over the share.
    fn ratio(&self, parts: &Parts) -> Option<Form> {
        let field = self.field;
        let w = self.share(parts.good)?;
        let mut terms = vec![w.scale(&rational(parts.constant, 1)), parts.numerator.clone()];
        if let Some(plus) = parts.plus {
            terms.push(self.product(self.share(plus)?, w));
        }
        let terms = terms.iter().map(|term| field.current(term)).collect();
        let numerator = field.reduce(&Poly::sum(terms));
        (!numerator.is_zero()).then_some(Form::OverShare {
            constant: 0,
            plus: None,
            numerator,
            less: None,
            below: parts.good,
        })
    }

    /// A price elasticity by its income effect: θⱼwᵢ = (θⱼwᵢ + wⱼ θₘwᵢ) − wⱼ θₘwᵢ.
    fn by_income_effect(&self, good: usize, price: usize) -> Option<Form> {
        let effect = self.slope(good, self.income)?;
        let Parts { constant, numerator, .. } = self.compensated(good, price)?;
        if effect.is_zero() || numerator.is_zero() {
            return None;
        }
        Some(Form::OverShare { constant, plus: None, numerator, less: Some((price, effect)), below: good })
    }

    /// a + b w of a good, where a and b come out as constants.
    fn affine(&self, whole: &Element, good: usize) -> Option<Form> {
        let field = self.field;
        let movers: Vec<Var> = self.model.prices.iter().copied().chain([self.income]).collect();
        let is_constant = |e: &Element| movers.iter().all(|x| !field.depends_on(e, *x));
        if is_constant(whole) {
            return None;
        }
        let share = self.share(good)?;
        let (mover, along) = movers.iter().find_map(|x| {
            let slope = field.reduce(&field.log_derivative(share, *x));
            (!slope.is_zero()).then_some((*x, slope))
        })?;
        let slope = field.reduce(&field.quotient(&field.log_derivative(whole, mover), &along).ok()?);
        if !is_constant(&slope) || slope.is_zero() {
            return None;
        }
        let rest = &field.current(whole) - &field.current(&field.product(&slope, share));
        let constant = field.reduce(&rest);
        is_constant(&constant).then_some(Form::Affine { constant, slope, good })
    }
}
