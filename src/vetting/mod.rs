//! One run over a model: what was asked, what was found, and what ended before it was done.
//!
//! Each part of the work runs within its own limits. A part that runs out leaves what the others found as it is.

pub mod appendix;

use std::rc::Rc;
use std::time::{Duration, Instant};

use crate::algebra::budget::{self, Limits, Stopped};
use crate::conditions::{self, Charts, ClaimFinding, Condition, Finding, Verdict};
use crate::model::{Claim, Model, Statement};
use crate::proof::{Derivation, Prover, Step};
use crate::recovery::{self, Recovered, given};
use crate::restrictions;
use crate::structure::{self, AllResponses, Structure};
use crate::welfare::{self, Expenditure, NotAlong, Path};

/// A part of the work that can be asked for by itself.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Part {
    /// One of the conditions.
    Condition(Condition),
    /// The preferences.
    Recovery,
    /// The author's claims.
    Claims,
    /// The structure of the preferences behind the demands.
    Structure,
    /// How demands respond to income and prices.
    Responses,
}

impl Part {
    /// All parts, in the order in which they are worked.
    pub const ALL: [Part; 8] = [
        Part::Condition(Condition::Homogeneity),
        Part::Condition(Condition::AddingUp),
        Part::Condition(Condition::Symmetry),
        Part::Condition(Condition::Curvature),
        Part::Recovery,
        Part::Claims,
        Part::Structure,
        Part::Responses,
    ];

    /// The word for it, as on the command line.
    pub fn word(self) -> &'static str {
        match self {
            Part::Condition(Condition::Homogeneity) => "homogeneity",
            Part::Condition(Condition::AddingUp) => "adding-up",
            Part::Condition(Condition::Symmetry) => "symmetry",
            Part::Condition(Condition::Curvature) => "curvature",
            Part::Recovery => "recovery",
            Part::Claims => "claims",
            Part::Structure => "structure",
            Part::Responses => "responses",
        }
    }
}

/// What a run may use for one model. The work is counted for each part, so that the same input ends the same way on
/// every machine; the clock and the memory are the outer guard, over all parts together.
#[derive(Clone, Copy, Debug)]
pub struct Allowance {
    /// Units of work for each part.
    pub work: u64,
    /// Wall-clock time for the model.
    pub time: Duration,
    /// Resident memory, in MiB.
    pub memory_mib: u64,
}

impl Default for Allowance {
    fn default() -> Allowance {
        Allowance { work: 20_000_000_000, time: Duration::from_secs(60), memory_mib: 4096 }
    }
}

/// What a run found.
pub struct Vetting {
    /// The model.
    pub model: Rc<Model>,
    /// The parts that were asked for.
    pub asked: Vec<Part>,
    /// A finding for each condition that was asked for and makes sense for the model.
    pub findings: Vec<Finding>,
    /// The preferences, or why there are none; `None` where they were not asked for, or the model has no demands.
    pub recovered: Option<Recovered>,
    /// A finding for each claim.
    pub claims: Vec<ClaimFinding>,
    /// The structure of the demands; `None` where it was not asked for, or the model has none.
    pub structure: Option<Structure>,
    /// The signs of responses and the elasticities; `None` where they were not asked for, or the model has no demands.
    pub responses: Option<AllResponses>,
    /// Expenditure along the price path that was asked for.
    pub along: Option<Expenditure>,
    /// How many steps the verdicts and the preferences have to themselves; those behind them are about structure.
    essential: usize,
    /// The parts that ran out of their limits.
    pub stops: Vec<(Part, Stopped)>,
    /// Every step that established something.
    pub derivation: Derivation,
    /// The time that each part took.
    pub timings: Vec<(Part, Duration)>,
}

impl Vetting {
    /// The finding on a condition.
    pub fn finding(&self, condition: Condition) -> Option<&Finding> {
        self.findings.iter().find(|finding| finding.condition == condition)
    }

    /// Follows expenditure along a price path, to about `digits` digits of the income, and keeps it for the reports.
    ///
    /// # Errors
    /// The reason, where there is no such number: it depends on the path where symmetry is not proven.
    pub fn follow(&mut self, path: &Path, digits: u32, allowance: Allowance) -> Result<(), NotFollowed> {
        if self.finding(Condition::Symmetry).is_none_or(|finding| finding.verdict != Verdict::Proven) {
            return Err(NotFollowed::NotSymmetric);
        }
        let limits = Limits::new(allowance.work, allowance.time, allowance.memory_mib);
        let found = budget::within(limits, || welfare::expenditure(&self.model, path, digits));
        self.along = Some(found.map_err(NotFollowed::Stopped)?.map_err(NotFollowed::NotAlong)?);
        Ok(())
    }

    /// The steps that the verdicts and the preferences rest on.
    pub fn essential_steps(&self) -> &[Step] {
        let steps = self.derivation.steps();
        steps.get(..self.essential).unwrap_or(steps)
    }

    /// All verdicts that were asked for, on conditions and claims.
    pub fn verdicts(&self) -> impl Iterator<Item = Verdict> + '_ {
        let claims = self.claims.iter().map(|claim| claim.verdict);
        self.findings.iter().map(|finding| finding.verdict).chain(claims)
    }
}

/// Why expenditure was not followed along a path.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum NotFollowed {
    /// Symmetry is not proven, so that expenditure at constant utility means nothing that does not depend on the path.
    NotSymmetric,
    /// There is no number.
    NotAlong(NotAlong),
    /// It ran out of its limits.
    Stopped(Stopped),
}

impl NotFollowed {
    /// The reason in words.
    pub fn describe(&self) -> String {
        match self {
            NotFollowed::NotSymmetric => {
                "symmetry is not proven, so that expenditure along a path may depend on the path".to_string()
            }
            NotFollowed::NotAlong(reason) => reason.describe(),
            NotFollowed::Stopped(stopped) => stopped.describe().to_string(),
        }
    }
}

/// Works the parts that are asked for.
pub fn vet(model: Rc<Model>, asked: &[Part], allowance: Allowance) -> Vetting {
    let mut run =
        Run { end: Instant::now().checked_add(allowance.time), allowance, stops: Vec::new(), timings: Vec::new() };
    let mut prover = Prover::new(&model.field);
    let mut findings = Vec::new();
    for condition in conditions_in_order(asked, &model) {
        let part = Part::Condition(condition);
        let found = run.part(part, || conditions::examine(condition, &model, &mut prover, &findings));
        let mut found = found.unwrap_or_else(|stopped| Finding::undecided(condition, stopped.describe()));
        // where this runs out of its limits, the finding stands without the restrictions
        let _ = run.part(part, || restrictions::rescue(&model, &mut found));
        findings.push(found);
    }
    let mut recovered = None;
    let of_functions = model.claims.iter().any(Claim::is_of_function);
    if model.given.is_none()
        && !model.demands.is_empty()
        && (asked.contains(&Part::Recovery) || asked.contains(&Part::Claims) && of_functions)
    {
        let found = run.part(Part::Recovery, || recover(&model, &mut prover, &findings));
        recovered = Some(found.unwrap_or_else(|stopped| not_found(stopped.describe())));
    }
    if model.given.is_none() && model.demands.is_empty() && !model.inverse.is_empty() {
        recovered = Some(of_inverse_demands(&mut run, &model, asked, &mut prover, &mut findings));
    }
    let mut charts = Charts::default();
    if model.given.is_some() || asked.contains(&Part::Claims) && of_functions {
        let part = if asked.contains(&Part::Claims) { Part::Claims } else { Part::Recovery };
        charts = run.part(part, || given::charts(&model, recovered.as_ref(), &mut prover)).unwrap_or_default();
        recovered = given::derived(&model, &charts).or(recovered);
        if let Some(Recovered::Found(found)) = &mut recovered {
            found.demanded = run.part(part, || given::demanded(&model, &charts, &mut prover)).ok().flatten();
        }
    }
    recovered = recovered.filter(|_| asked.contains(&Part::Recovery));
    let mut claims = Vec::new();
    if asked.contains(&Part::Claims) {
        for (place, claim) in model.claims.iter().enumerate() {
            if let Some((_, settled)) = charts.settled.iter().find(|(settled, _)| *settled == place) {
                claims.push(settled.clone());
                continue;
            }
            let found = run.part(Part::Claims, || match &claim.statement {
                Statement::Under { condition, link, relations } => {
                    restrictions::claimed::judge(&model, *condition, *link, relations)
                }
                _ => conditions::examine_claim(&model, claim, &charts, &mut prover),
            });
            claims.push(found.unwrap_or_else(|stopped| ClaimFinding::undecided(stopped.describe())));
        }
    }
    let (mut structure, essential) = (None, prover.derivation().steps().len());
    if asked.contains(&Part::Structure) {
        structure =
            run.part(Part::Structure, || structure::examine(&model, &mut prover, &findings, &charts)).ok().flatten();
    }
    let mut responses = None;
    if asked.contains(&Part::Responses) {
        responses =
            run.part(Part::Responses, || structure::responses(&model, &mut prover, &findings, &charts)).ok().flatten();
    }
    let derivation = prover.into_derivation();
    let Run { stops, timings, .. } = run;
    Vetting {
        asked: asked.to_vec(),
        findings,
        recovered,
        claims,
        structure,
        responses,
        along: None,
        essential,
        stops,
        derivation,
        timings,
        model,
    }
}

/// The preferences, unless the Slutsky matrix is known not to be symmetric.
fn recover(model: &Model, prover: &mut Prover<'_>, findings: &[Finding]) -> Recovered {
    let symmetry = findings.iter().find(|finding| finding.condition == Condition::Symmetry).map(|found| found.verdict);
    match symmetry {
        Some(Verdict::Refuted) => not_found("the Slutsky matrix is not symmetric, so there are none"),
        Some(Verdict::Conditional) => not_found("the Slutsky matrix is symmetric only under the restrictions above"),
        _ => match recovery::recover(model, prover) {
            Recovered::NotFound { reason, existence } => {
                Recovered::NotFound { reason, existence: existence && symmetry == Some(Verdict::Proven) }
            }
            found => found,
        },
    }
}

/// The direct utility behind inverse demands. A concave one settles their curvature, where that is open.
fn of_inverse_demands(
    run: &mut Run,
    model: &Model,
    asked: &[Part],
    prover: &mut Prover<'_>,
    findings: &mut [Finding],
) -> Recovered {
    let verdict = |findings: &[Finding], condition: Condition| {
        findings.iter().find(|finding| finding.condition == condition).map(|finding| finding.verdict)
    };
    let open = verdict(findings, Condition::Curvature) == Some(Verdict::Undecided);
    if !asked.contains(&Part::Recovery) && !open {
        return not_found("they were not asked for");
    }
    if let Some(Verdict::Refuted | Verdict::Conditional) = verdict(findings, Condition::Symmetry) {
        return not_found("the Antonelli matrix is not symmetric");
    }
    let found = run.part(Part::Recovery, || {
        let found = given::of_inverse(model, prover);
        let concave = match &found {
            Recovered::Found(found) if open => {
                found.utility.as_ref().and_then(|utility| conditions::by_concavity(model, utility, prover))
            }
            _ => None,
        };
        (found, concave)
    });
    let (found, concave) = found.unwrap_or_else(|stopped| (not_found(stopped.describe()), None));
    let curvature = findings.iter_mut().find(|finding| finding.condition == Condition::Curvature);
    if let (Some(slot), Some(concave)) = (curvature, concave) {
        *slot = concave;
    }
    found
}

fn not_found(reason: &str) -> Recovered {
    Recovered::NotFound { reason: reason.to_string(), existence: false }
}

fn conditions_in_order<'a>(asked: &'a [Part], model: &'a Model) -> impl Iterator<Item = Condition> + 'a {
    Part::ALL.into_iter().filter(|part| asked.contains(part)).filter_map(|part| match part {
        Part::Condition(condition) if conditions::applies(condition, model) => Some(condition),
        _ => None,
    })
}

/// The limits of a run, and the account of it.
struct Run {
    end: Option<Instant>,
    allowance: Allowance,
    stops: Vec<(Part, Stopped)>,
    timings: Vec<(Part, Duration)>,
}

impl Run {
    fn part<T>(&mut self, part: Part, work: impl FnOnce() -> T) -> Result<T, Stopped> {
        let start = Instant::now();
        let left = self.end.map_or(Duration::MAX, |end| end.saturating_duration_since(start));
        let outcome = budget::within(Limits::new(self.allowance.work, left, self.allowance.memory_mib), work);
        match self.timings.iter_mut().find(|(known, _)| *known == part) {
            Some((_, total)) => *total += start.elapsed(),
            None => self.timings.push((part, start.elapsed())),
        }
        if let Err(stopped) = outcome {
            self.stops.push((part, stopped));
        }
        outcome
    }
}
