//! What the appendix shows beyond the steps themselves: the Slutsky matrix, and each identity with its parts worked out.

use rustc_hash::FxHashMap;

use crate::algebra::budget::{self, Limits};
use crate::algebra::generator::Element;
use crate::conditions::{Coordinates, System};
use crate::proof::derivation::Function;
use crate::proof::{Expression, Factor, FunctionId, Product, Prover, Statement, StepId};
use crate::recovery::Recovered;
use crate::vetting::{Allowance, Vetting};

/// The most goods for which the matrix is written out.
const MOST_GOODS: usize = 5;
/// The most equations of a family that are worked one by one.
pub const MOST_EQUATIONS: usize = 12;

/// What is worked out for print.
#[derive(Default)]
pub struct Appendix {
    /// What the demands are examined in; `None` without demands.
    pub coordinates: Option<Coordinates>,
    /// The entries of the Slutsky matrix, row by row; empty for many goods.
    pub slutsky: Vec<Vec<Element>>,
    /// The entries scaled by prices (and income, for shares), with the functions kept as names; as many as in `slutsky`.
    pub scaled: Vec<Vec<Vec<Term>>>,
    /// The functions that the scaled entries speak of.
    pub functions: Vec<Function>,
    terms: FxHashMap<(StepId, usize), Vec<Term>>,
}

/// A product with its derivatives put in: the functions that are kept as names, and the rest.
#[derive(Clone, Debug)]
pub struct Term {
    /// The functions.
    pub names: Vec<FunctionId>,
    /// What they are multiplied by.
    pub value: Element,
}

impl Appendix {
    /// Works out what a run's appendix shows. What runs out of its limits is left out.
    pub fn of(vetting: &Vetting, allowance: Allowance) -> Appendix {
        let mut appendix = Appendix::default();
        let limits = Limits::new(allowance.work, allowance.time, allowance.memory_mib);
        // what was worked out before a limit was reached stays
        let _ = budget::within(limits, || appendix.work(vetting));
        appendix
    }

    /// The products on the left of an equation of a step, with derivatives put in; those that vanish are left out.
    pub fn terms(&self, step: StepId, equation: usize) -> Option<&[Term]> {
        self.terms.get(&(step, equation)).map(Vec::as_slice)
    }

    fn work(&mut self, vetting: &Vetting) {
        let model = &vetting.model;
        let mut prover = Prover::new(&model.field);
        let system = System::of(model, &mut prover);
        self.coordinates = system.as_ref().map(|system| system.coordinates);
        self.work_steps(vetting);
        if let Some(system) = system.filter(|system| system.size() <= MOST_GOODS) {
            let n = system.size();
            let row = |i: usize, prover: &mut Prover<'_>| (0..n).map(|j| system.entry(prover, i, j)).collect();
            self.slutsky = (0..n).map(|i| row(i, &mut prover)).collect();
            let scaled = |i: usize, prover: &mut Prover<'_>| {
                (0..n).map(|j| with_names(prover, &system.scaled_entry(i, j), true)).collect()
            };
            self.scaled = (0..n).map(|i| scaled(i, &mut prover)).collect();
            self.functions = prover.derivation().functions().to_vec();
        }
    }

    fn work_steps(&mut self, vetting: &Vetting) {
        let mut prover = Prover::new(&vetting.model.field);
        // the functions of the derivation, defined again in the same order, so that their numbers mean the same
        for function in vetting.derivation.functions() {
            prover.define(&function.name, &function.element);
        }
        let found = vetting.findings.iter().flat_map(|finding| &finding.steps);
        let recovered = match &vetting.recovered {
            Some(Recovered::Found(found)) => found.steps.as_slice(),
            _ => &[],
        };
        for id in found.chain(recovered) {
            let Some(Statement::Identities(claim)) = vetting.derivation.step(*id).map(|step| step.statement()) else {
                continue;
            };
            for (number, equation) in claim.equations.iter().enumerate().take(MOST_EQUATIONS) {
                self.terms.insert((*id, number), with_names(&mut prover, &equation.left, false));
            }
        }
    }
}

/// The products of an expression with derivatives put in. A function keeps its name beside other factors; alone it does
/// so where that is wanted.
fn with_names(prover: &mut Prover<'_>, expression: &Expression, alone: bool) -> Vec<Term> {
    let mut terms = Vec::new();
    for product in expression.0.iter().flat_map(each_slope) {
        let (names, others): (Vec<Factor>, Vec<Factor>) = match product.factors.as_slice() {
            [_] if !alone => (Vec::new(), product.factors),
            _ => product.factors.into_iter().partition(|factor| matches!(factor, Factor::Function(_))),
        };
        let rest = Product { coefficient: product.coefficient, factors: others };
        let value = prover.value(&Expression(vec![rest]));
        let value = prover.field().current(&value);
        let names = names.into_iter().filter_map(|factor| match factor {
            Factor::Function(f) => Some(f),
            _ => None,
        });
        if !value.is_zero() {
            terms.push(Term { names: names.collect(), value });
        }
    }
    terms
}

/// The Euler operator as the slopes that it sums.
fn each_slope(product: &Product) -> Vec<Product> {
    match product.factors.as_slice() {
        [Factor::Euler(f, vars)] => vars
            .iter()
            .map(|x| Product { coefficient: product.coefficient, factors: vec![Factor::LogSlope(*f, *x)] })
            .collect(),
        _ => vec![product.clone()],
    }
}
