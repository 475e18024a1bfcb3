//! The methods in their order, and the first proposal that is proven.

use crate::algebra::budget;
use crate::algebra::generator::Element;
use crate::algebra::monomial::Var;
use crate::proof::Prover;

use super::Preferences;
use super::check::{self, Established};
use super::divisors::doubtful_divisors;
use super::in_sight;
use super::integrating_factor;
use super::linear;
use super::proposal::Proposal;
use super::riccati;
use super::span::{self, Span};
use super::system::{Coordinate, System, coordinates};

/// How preferences were found.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Method {
    /// One function of income: dz = Σ aᵢ dpᵢ.
    Separable,
    /// dz = Σ (aᵢ + bᵢ z) dpᵢ.
    Linear,
    /// dz = Σ (aᵢ + bᵢ z + cᵢ z²) dpᵢ.
    Riccati,
    /// An integrating factor.
    IntegratingFactor,
    /// They are the author's own.
    Given,
}

/// A method: its proposals for a system.
type Propose = fn(&System, Var) -> Vec<(Method, Proposal)>;

/// Units of work that one attempt may use.
const WORK_OF_ONE_ATTEMPT: u64 = 400_000_000;

/// The first proposal that is proven, or the reason why there is none.
pub fn search(system: &System, utility: Var, prover: &mut Prover<'_>) -> Result<Box<Preferences>, String> {
    let plain = Coordinate::plain();
    if let Some(found) = attempt(system, system, &plain, in_sight::propose, utility, prover) {
        return Ok(found);
    }
    let all: Vec<(Coordinate, System)> =
        coordinates(system).into_iter().filter_map(|c| in_coordinate(system, &c).map(|there| (c, there))).collect();
    let methods: [(Propose, usize); 3] =
        [(linear_proposals, all.len()), (quadratic_proposals, all.len()), (exact_proposals, 1)];
    for (method, coordinates) in methods {
        for (coordinate, there) in all.iter().take(coordinates) {
            if let Some(found) = attempt(system, there, coordinate, method, utility, prover) {
                return Ok(found);
            }
        }
    }
    Err("no change of the income variable makes the system linear or quadratic, and no integrating factor was found"
        .to_string())
}

/// The first of a method's proposals that is proven.
fn attempt(
    system: &System,
    there: &System,
    coordinate: &Coordinate,
    method: Propose,
    utility: Var,
    prover: &mut Prover<'_>,
) -> Option<Box<Preferences>> {
    let proposals = budget::attempt(WORK_OF_ONE_ATTEMPT, || method(there, utility)).unwrap_or_default();
    proposals.into_iter().find_map(|(method, proposal)| {
        let proposal = proposal.in_income(system, there, coordinate)?;
        let proposal = proposal.with_orientation(system).turned(system.field, utility);
        let proposal = proposal.without_factor(system, utility).gathered(system.field);
        let established = check::establish(system, &proposal, utility, prover)?;
        Some(Box::new(preferences(system, utility, method, proposal, established)))
    })
}

fn in_coordinate<'f>(system: &System<'f>, coordinate: &Coordinate) -> Option<System<'f>> {
    if coordinate.is_plain() {
        let demands = system.demands.iter().map(|x| system.field.reduce(x)).collect();
        return Some(System { field: system.field, prices: system.prices.clone(), income: system.income, demands });
    }
    coordinate.transform(system)
}

fn linear_proposals(system: &System, utility: Var) -> Vec<(Method, Proposal)> {
    let Some(span) = Span::of(system) else { return Vec::new() };
    for reduced in span::reductions(system, &span, 1) {
        let method = if reduced.lacks(1) || reduced.lacks(0) { Method::Separable } else { Method::Linear };
        if let Some(proposal) = linear::solve(system, &reduced, utility) {
            return vec![(method, with_functions(proposal, &span))];
        }
    }
    Vec::new()
}

fn quadratic_proposals(system: &System, utility: Var) -> Vec<(Method, Proposal)> {
    let Some(span) = Span::of(system) else { return Vec::new() };
    for reduced in span::reductions(system, &span, 2) {
        if let Some(proposal) = riccati::solve(system, &reduced, utility) {
            return vec![(Method::Riccati, with_functions(proposal, &span))];
        }
    }
    Vec::new()
}

fn exact_proposals(system: &System, utility: Var) -> Vec<(Method, Proposal)> {
    let found = integrating_factor::propose(system, utility);
    found.into_iter().map(|proposal| (Method::IntegratingFactor, proposal)).collect()
}

fn with_functions(mut proposal: Proposal, span: &Span) -> Proposal {
    proposal.working.functions = span.functions.clone();
    proposal
}

fn preferences(
    system: &System,
    utility: Var,
    method: Method,
    proposal: Proposal,
    established: Established,
) -> Preferences {
    let field = system.field;
    let expenditure = established.expenditure;
    let slopes = expenditure.iter().flat_map(|e| system.prices.iter().map(|p| field.derivative(e, *p)));
    let hicksian: Vec<Element> = slopes.collect();
    let mut moving = system.variables();
    moving.push(utility);
    let shown: Vec<&Element> = proposal.indirect_utility.iter().chain(&expenditure).collect();
    let conditions = doubtful_divisors(field, &shown, &moving);
    let rising = proposal.rising == crate::algebra::sign::Sign::Positive;
    Preferences {
        expenditure,
        indirect_utility: proposal.indirect_utility,
        hicksian,
        demanded: None,
        utility: None,
        method,
        working: proposal.working,
        rising,
        checked: established.checks,
        conditions,
        cases: Vec::new(),
        steps: established.steps,
    }
}
