//! Direct utility from expenditure: prices eliminated from x = ∂e(p, u)/∂p, all but the first, which sets the scale.
//!
//! Each step solves one equation for one unknown price, or for u at the end: an equation that holds one unknown alone, or
//! the quotient of two, x's known parts taken off, that holds one or two. What is found is proven by the first-order
//! conditions and by U(x(p, m)) = v(p, m).

use crate::algebra::budget;
use crate::algebra::field::{Field, Relation};
use crate::algebra::generator::Element;
use crate::algebra::monomial::{Monomial, Var};
use crate::algebra::polynomial::Poly;
use crate::algebra::sign::Sign;
use crate::model::{Coverage, Model, inverse_shares};
use crate::proof::{Equation, Expression, Label, Prover, StepId};

use super::gather::gathered;
use super::given::supposed;
use super::{Preferences, invert};

/// The work that one elimination, and one proof, may take.
const WORK: u64 = 4_000_000;
/// The most goods.
const MOST_GOODS: usize = 8;

/// U(x) with the steps that prove it; `None` where prices could not be eliminated.
pub fn find(model: &Model, found: &Preferences, prover: &mut Prover<'_>) -> Option<(Element, Vec<StepId>)> {
    let goods = model.demands.len();
    if !matches!(model.coverage, Coverage::Complete)
        || !(2..=MOST_GOODS).contains(&goods)
        || found.hicksian.len() != goods
    {
        return None;
    }
    // without the author's names for quantities there is nothing to write it in
    let quantities: Vec<Var> = model.quantities.iter().copied().collect::<Option<_>>()?;
    let solution = budget::attempt(WORK, || eliminate(model, found, &quantities)).ok().flatten()?;
    budget::attempt(WORK, || proven(model, found, &quantities, solution, prover)).ok().flatten()
}

/// What is known of elements.
type Facts = Vec<(Element, Relation)>;

/// u as a function of quantities, with what is positive because the prices found are.
struct Solution {
    utility: Element,
    facts: Vec<(Element, Relation)>,
}

struct Elimination<'a> {
    field: &'a Field,
    /// ∂e/∂pᵢ for the equations that are left, each with its quantity.
    left: Vec<(Element, Var)>,
    /// Prices that are known, in quantities, the first price and those not yet known.
    known: Vec<(Var, Element)>,
    /// Prices that are not yet known.
    prices: Vec<Var>,
    utility: Var,
    facts: Vec<(Element, Relation)>,
}

fn eliminate(model: &Model, found: &Preferences, quantities: &[Var]) -> Option<Solution> {
    let field = &model.field;
    let (first, prices) = model.prices.split_first()?;
    let mut left = Vec::new();
    let mut facts = Vec::new();
    let rises = found.indirect_utility.as_ref().is_some_and(|v| field.sign(v) == Sign::Positive);
    if rises {
        facts.push((Poly::var(model.utility), Relation::Positive));
    }
    for (hicksian, x) in found.hicksian.iter().zip(quantities) {
        let h = field.reduce(hicksian);
        if field.suppose(&facts, || field.sign(&h)) != Sign::Positive {
            facts.push((h.clone(), Relation::Positive));
        }
        left.push((h, *x));
    }
    let (prices, known) = (prices.to_vec(), Vec::new());
    let mut elimination = Elimination { field, left, known, prices, utility: model.utility, facts };
    let last = elimination.run()?;
    let index = quantities.iter().position(|x| *x == last)?;
    elimination.reached(*first, *quantities.first()?, found.hicksian.get(index)?, last)
}

impl Elimination<'_> {
    /// Finds all prices but the first; what is left is the equation of the quantity returned.
    fn run(&mut self) -> Option<Var> {
        while !self.prices.is_empty() {
            let (used, unknown, value) = self.single().or_else(|| self.pair())?;
            self.left.remove(used);
            self.prices.retain(|p| *p != unknown);
            let with = [(unknown, value.clone())];
            let facts = self.facts.clone();
            let put_in = |e: &Element| self.field.suppose(&facts, || self.field.substitute(e, &with)).ok();
            for (h, _) in &mut self.left {
                *h = self.field.reduce(&put_in(h)?);
            }
            for (_, price) in &mut self.known {
                *price = put_in(price)?;
            }
            for (fact, _) in &mut self.facts {
                *fact = put_in(fact)?;
            }
            self.known.push((unknown, value));
        }
        self.left.first().map(|(_, x)| *x)
    }

    /// u from the last equation. Any price will do for the first: the one in which the others look alike.
    fn reached(mut self, first: Var, quantity: Var, hicksian: &Element, x: Var) -> Option<Solution> {
        let field = self.field;
        let scale = [(first, self.scale(first, quantity))];
        let facts = self.facts.clone();
        let at = |e: &Element, with: &[(Var, Element)]| field.suppose(&facts, || field.substitute(e, with)).ok();
        let mut prices = scale.to_vec();
        for (price, value) in &self.known {
            prices.push((*price, field.reduce(&at(value, &scale)?)));
        }
        let equation = field.reduce(&at(hicksian, &prices)?);
        self.facts = facts.iter().map(|(e, r)| Some((at(e, &scale)?, *r))).collect::<Option<_>>()?;
        let utility = self.solved(&equation, self.utility, &Poly::var(x))?;
        let reached = [(self.utility, utility.clone())];
        let known = self.facts.clone();
        let positive = |(e, r): &(Element, Relation)| {
            let there = field.suppose(&known, || field.substitute(e, &reached)).ok()?;
            Some((there, *r))
        };
        let facts = known.iter().map(positive).collect::<Option<_>>()?;
        Some(Solution { utility: gathered(field, &field.reduce(&utility)), facts })
    }

    /// The inverse of what all prices found have in common, apart from the first price itself; of a single price, of what
    /// it has from the first quantity.
    fn scale(&self, first: Var, quantity: Var) -> Element {
        let field = self.field;
        let prices: Option<Vec<Monomial>> =
            self.known.iter().map(|(_, e)| field.reduce(e).as_monomial().map(|(_, m)| m.clone())).collect();
        let Some((one, others)) = prices.as_deref().and_then(<[Monomial]>::split_first) else { return Poly::one() };
        let common = one.iter().filter(|(v, k)| {
            let own = Poly::var(*v);
            let apart = !field.depends_on(&own, first) && (!others.is_empty() || field.depends_on(&own, quantity));
            apart && others.iter().all(|other| other.exponent(*v) == *k)
        });
        Poly::monomial(Monomial::from_pairs(common.map(|(v, k)| (v, -k))))
    }

    /// The unknowns in an element.
    fn unknowns(&self, e: &Element) -> Vec<Var> {
        let all = self.prices.iter().copied().chain([self.utility]);
        all.filter(|v| self.field.depends_on(e, *v)).collect()
    }

    /// An equation with one unknown.
    fn single(&mut self) -> Option<(usize, Var, Element)> {
        (0..self.left.len()).find_map(|index| {
            let (h, x) = self.left[index].clone();
            let unknowns = self.unknowns(&h);
            let [unknown] = unknowns[..] else { return None };
            if unknown == self.utility {
                return None;
            }
            Some((index, unknown, self.solved(&h, unknown, &Poly::var(x))?))
        })
    }

    /// The quotient of two equations, what is known taken off both sides, with few unknowns.
    fn pair(&mut self) -> Option<(usize, Var, Element)> {
        let pairs: Vec<(usize, usize)> = (0..self.left.len())
            .flat_map(|i| (0..self.left.len()).filter(move |j| *j != i).map(move |j| (i, j)))
            .collect();
        for few in [1, 2] {
            for (i, j) in &pairs {
                let Some((rate, target, facts)) = self.rate(*i, *j) else { continue };
                let unknowns = self.unknowns(&rate);
                if unknowns.len() != few || unknowns.contains(&self.utility) {
                    continue;
                }
                let before = self.facts.len();
                self.facts.extend(facts);
                let solved = unknowns.iter().find_map(|k| Some((*i, *k, self.solved(&rate, *k, &target)?)));
                if solved.is_some() {
                    return solved;
                }
                self.facts.truncate(before);
            }
        }
        None
    }

    /// (hᵢ − known)/(hⱼ − known), (xᵢ − known)/(xⱼ − known), and what is positive among the parts of the latter.
    fn rate(&self, i: usize, j: usize) -> Option<(Element, Element, Facts)> {
        let field = self.field;
        let mut facts = Vec::new();
        let mut parts = Vec::new();
        for (h, x) in [self.left.get(i)?, self.left.get(j)?] {
            let h = field.current(h);
            let unknown = |v: Var| !self.unknowns(&Poly::var(v)).is_empty();
            let known = h.collect(unknown).into_iter().find(|(m, _)| m.is_one()).map(|(_, c)| c).unwrap_or_default();
            let (moving, rest) = (&h - &known, &field.current(&Poly::var(*x)) - &known);
            if !known.is_zero() && field.suppose(&self.facts, || field.sign(&moving)) == Sign::Positive {
                facts.push((rest.clone(), Relation::Positive));
            }
            parts.push((moving, rest));
        }
        let [above, below] = &parts[..] else { return None };
        let rate = field.reduce(&field.quotient(&above.0, &below.0).ok()?);
        let target = field.suppose(&facts, || field.quotient(&above.1, &below.1)).ok()?;
        Some((rate, target, facts))
    }

    fn solved(&mut self, phi: &Element, unknown: Var, target: &Element) -> Option<Element> {
        let field = self.field;
        let solved = field.suppose(&self.facts, || invert::solve(field, phi, unknown, std::slice::from_ref(target)))?;
        self.facts.extend(solved.positive.iter().map(|e| (e.clone(), Relation::Positive)));
        Some(field.reduce(&solved.value))
    }
}

/// U, once the first-order conditions hold at the demands and U(x(p, m)) = v(p, m).
fn proven(
    model: &Model,
    found: &Preferences,
    quantities: &[Var],
    solution: Solution,
    prover: &mut Prover<'_>,
) -> Option<(Element, Vec<StepId>)> {
    let field = &model.field;
    let Solution { utility, facts } = solution;
    let v = found.indirect_utility.as_ref()?;
    let demands: Vec<(Var, Element)> =
        quantities.iter().copied().zip(model.demands.iter().map(|d| d.quantity.clone())).collect();
    let shares = field.suppose(&facts, || inverse_shares(field, &utility, quantities))?;
    let mut carried: Vec<(Element, Relation)> = Vec::new();
    for (fact, relation) in &facts {
        let there = field.suppose(&carried, || field.substitute(fact, &demands)).ok()?;
        if field.suppose(&carried, || field.sign(&there)) != Sign::Positive {
            carried.push((there, *relation));
        }
    }
    let income = Poly::var(model.income?);
    let steps = prover.supposing(&supposed(&carried), |prover| {
        let mut equations = Vec::new();
        for (good, (share, price)) in shares.iter().zip(&model.prices).enumerate() {
            let spent = field.product(&Poly::var(*price), &demands.get(good)?.1);
            let right = field.product(&field.substitute(share, &demands).ok()?, &income);
            let (left, right) = (Expression::element(spent), Expression::element(right));
            equations.push(Equation { label: Label::Good(good), left, right });
        }
        let first = prover.identities("first-order conditions", equations, &[]).ok()?.step();
        let (left, right) = (field.substitute(&utility, &demands).ok()?, v.clone());
        let (left, right) = (Expression::element(left), Expression::element(right));
        let reached = prover.identity("direct utility at the demands", left, right, &[first]).ok()?.step();
        Some(vec![first, reached])
    })?;
    Some((utility, steps))
}
