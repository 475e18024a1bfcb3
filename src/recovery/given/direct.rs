//! The first-order conditions of a direct utility, solved: each quantity from its rate of substitution with one good of
//! reference, then that good from the budget. This reaches additive, homothetic and displaced power forms, and whatever
//! else has rates of substitution that depend on two quantities at a time.

use crate::algebra::budget;
use crate::algebra::field::{Field, Relation};
use crate::algebra::generator::Element;
use crate::algebra::monomial::Var;
use crate::algebra::polynomial::Poly;
use crate::model::{Model, inverse_shares};
use crate::proof::{Equation, Expression, Label, Prover};

use super::super::invert;
use super::functions::Chosen;
use super::supposed;

/// The work that one good of reference may take.
const SOLVING: u64 = 300_000_000;

/// The demands of a direct utility, proven to satisfy the first-order conditions and the budget.
pub(super) fn solve(model: &Model, utility: &Element, prover: &mut Prover<'_>) -> Option<Chosen> {
    let field = &model.field;
    let quantities: Vec<Var> = model.quantities.iter().copied().collect::<Option<_>>()?;
    let shares = inverse_shares(field, utility, &quantities)?;
    let slopes: Vec<Element> = quantities.iter().map(|x| field.reduce(&field.derivative(utility, *x))).collect();
    let problem =
        Problem { model, field, quantities: &quantities, shares: &shares, slopes: &slopes, income: model.income? };
    (0..quantities.len()).find_map(|reference| {
        let solution = budget::attempt(SOLVING, || problem.solve(reference)).ok().flatten()?;
        problem.checked(solution, utility, prover)
    })
}

struct Problem<'a> {
    model: &'a Model,
    field: &'a Field,
    quantities: &'a [Var],
    /// xᵢ πᵢ(x).
    shares: &'a [Element],
    /// ∂U/∂xᵢ.
    slopes: &'a [Element],
    income: Var,
}

struct Solution {
    quantities: Vec<Element>,
    facts: Vec<(Element, Relation)>,
}

impl Problem<'_> {
    fn solve(&self, reference: usize) -> Option<Solution> {
        let field = self.field;
        let base = *self.quantities.get(reference)?;
        let mut facts: Vec<(Element, Relation)> = Vec::new();
        let mut outlays = Vec::new();
        let mut others = Vec::new();
        for good in 0..self.quantities.len() {
            let value = if good == reference { Poly::var(base) } else { self.by_rate(good, reference, &mut facts)? };
            outlays.push(field.product(&self.price(good)?, &value));
            others.push(value);
        }
        // Σ p g(p, x₁) = m, for x₁
        let spent = Poly::sum(outlays.iter().map(|e| field.current(e)).collect());
        let target = [Poly::var(self.income)];
        let solved = field.suppose(&facts, || invert::solve(field, &spent, base, &target))?;
        let value = field.reduce(&solved.value);
        facts.extend(solved.positive.iter().map(|e| (e.clone(), Relation::Positive)));
        facts.push((value.clone(), Relation::Positive));
        let with = [(base, value)];
        let mut carried = Vec::new();
        for (e, relation) in &facts {
            carried.push((field.suppose(&carried, || field.substitute(e, &with)).ok()?, *relation));
        }
        let there = |e: &Element| field.suppose(&carried, || field.substitute(e, &with).ok());
        let quantities: Vec<Element> = others.iter().map(|e| Some(field.reduce(&there(e)?))).collect::<Option<_>>()?;
        carried.extend(quantities.iter().map(|x| (x.clone(), Relation::Positive)));
        Some(Solution { quantities, facts: carried })
    }

    fn price(&self, good: usize) -> Option<Element> {
        self.model.prices.get(good).map(|p| Poly::var(*p))
    }

    /// xᵢ from Uᵢ/U₁ = pᵢ/p₁, where the left side depends on xᵢ and x₁ alone.
    fn by_rate(&self, good: usize, reference: usize, facts: &mut Vec<(Element, Relation)>) -> Option<Element> {
        let field = self.field;
        let (x, base) = (*self.quantities.get(good)?, *self.quantities.get(reference)?);
        let rate = field.reduce(&field.quotient(self.slopes.get(good)?, self.slopes.get(reference)?).ok()?);
        let others = self.quantities.iter().filter(|q| **q != x && **q != base);
        if others.into_iter().any(|q| field.depends_on(&rate, *q)) {
            return None;
        }
        let target = [field.quotient(&self.price(good)?, &self.price(reference)?).ok()?];
        let solved = field.suppose(facts, || invert::solve(field, &rate, x, &target))?;
        facts.extend(solved.positive.iter().map(|e| (e.clone(), Relation::Positive)));
        Some(field.reduce(&solved.value))
    }

    /// The solution, once pᵢxᵢ/m = xᵢπᵢ(x) is proven for every good; this holds the budget as well, since the shares sum
    /// to one.
    fn checked(&self, solution: Solution, utility: &Element, prover: &mut Prover<'_>) -> Option<Chosen> {
        let field = self.field;
        let Solution { quantities, mut facts } = solution;
        let with: Vec<(Var, Element)> = self.quantities.iter().copied().zip(quantities.iter().cloned()).collect();
        // what the author assumes of quantities holds of those demanded
        for fact in field.facts().iter().filter(|fact| with.iter().any(|(x, _)| field.depends_on(&fact.element, *x))) {
            let there = field.suppose(&facts, || field.substitute(&fact.element, &with)).ok()?;
            facts.push((there, fact.relation));
        }
        let income = Poly::var(self.income);
        let indirect_utility = prover.supposing(&supposed(&facts), |prover| {
            let mut equations = Vec::new();
            for (good, (share, x)) in self.shares.iter().zip(&quantities).enumerate() {
                let there = field.substitute(share, &with).ok()?;
                let left = field.product(&self.price(good)?, x);
                let right = field.product(&there, &income);
                let (left, right) = (Expression::element(left), Expression::element(right));
                equations.push(Equation { label: Label::Good(good), left, right });
            }
            prover.identities("first-order conditions", equations, &[]).ok()?;
            field.substitute(utility, &with).ok().map(|v| field.reduce(&v))
        })?;
        Some(Chosen { quantities, indirect_utility, facts })
    }
}
