//! The structure of a demand system, each fact proven as an identity between its demands and their slopes, or refuted at
//! a point.
//!
//! Facts about preferences (homothetic, Gorman polar form, PIGL and PIGLOG, rank, additivity, separability) are asked of
//! complete systems that come from preferences; the signs of responses, of every system. A fact that could not be shown
//! either way is left open, and nothing is said of it. One file a fact. What takes longer, the signs of responses and
//! the elasticities, is apart ([`responses()`]).

mod directly_additive;
pub mod elasticities;
mod homothetic;
mod indirectly_additive;
mod pigl;
mod quasi_homothetic;
mod quasi_linear;
mod question;
mod rank;
pub mod responses;
mod separable;
mod sign;
mod substitutes;

use crate::algebra::budget;
use crate::algebra::field::Relation;
use crate::algebra::generator::Element;
use crate::conditions::claims::chart::Coordinates;
use crate::conditions::{Chart, Charts, ClaimFinding, Finding, Verdict};
use crate::model::Model;
use crate::proof::{Expression, Prover};

use elasticities::Elasticities;
use question::Question;
pub use rank::Rank;
pub use responses::Responses;
pub use sign::{Response, Tendency};
pub use substitutes::Pairs;

/// A property of preferences.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Property {
    /// Budget shares do not depend on income.
    Homothetic,
    /// Gorman's polar form: demands are affine in income.
    QuasiHomothetic,
    /// Shares are affine in the logarithm of income.
    Piglog,
    /// Shares are affine in a power of income.
    Pigl,
    /// U is a sum of functions of one quantity each, up to a monotone transformation.
    DirectlyAdditive,
    /// v is a sum of functions of one normalised price each, up to a monotone transformation.
    IndirectlyAdditive,
    /// U is one quantity plus a function of the others, up to a monotone transformation.
    QuasiLinear,
    /// The goods of a group (by its place) are weakly separable from all others.
    Separable(usize),
}

/// What is known of one property.
#[derive(Clone, Debug)]
pub struct Fact {
    /// The property.
    pub property: Property,
    /// Proven, refuted at a point, or open.
    pub finding: ClaimFinding,
}

/// What is known of a system.
#[derive(Clone, Debug, Default)]
pub struct Structure {
    /// The properties that were asked about.
    pub facts: Vec<Fact>,
    /// α in w = A(p) + B(p) m^(−α), where preferences are PIGL and α is one number for all incomes.
    pub exponent: Option<Element>,
    /// The good that preferences are quasi-linear in.
    pub numeraire: Option<usize>,
    /// The dimension of the span of the Engel curves.
    pub rank: Option<Rank>,
}

/// How demands respond.
#[derive(Clone, Debug, Default)]
pub struct AllResponses {
    /// How each good responds to income and to its own price; empty for very many goods.
    pub goods: Vec<Responses>,
    /// How goods respond to each other's prices; empty for many goods.
    pub pairs: Pairs,
    /// By how much, in closed form.
    pub elasticities: Elasticities,
}

impl Structure {
    /// What is known of a property.
    pub fn on(&self, property: Property) -> Option<&ClaimFinding> {
        self.facts.iter().find(|fact| fact.property == property).map(|fact| &fact.finding)
    }

    /// Whether a property is proven.
    pub fn has(&self, property: Property) -> bool {
        self.on(property).is_some_and(|finding| finding.verdict == Verdict::Proven)
    }
}

/// The work that one property may take.
const FACT_WORK: u64 = 30_000_000;
/// Properties that take an equation for each pair of goods are asked of systems up to this size.
const MOST_GOODS_IN_PAIRS: usize = 16;

/// Looks for the structure of a system. `findings` are those on the conditions so far; what is missing among them is
/// looked at anew; `charts` have the demands of given preferences. The steps are added to the prover's derivation. `None` for a model without Marshallian demands.
pub fn examine(model: &Model, prover: &mut Prover<'_>, findings: &[Finding], charts: &Charts) -> Option<Structure> {
    asked(model, prover, findings, charts, |question, prover| {
        let mut structure = Structure::default();
        if question.consumer {
            of_preferences(question, prover, &mut structure);
        }
        structure
    })
}

/// Asks about the demands of the model; where it has none, about those of its given preferences, on the part of the
/// domain where they are chosen.
fn asked<T>(
    model: &Model,
    prover: &mut Prover<'_>,
    findings: &[Finding],
    charts: &Charts,
    ask: impl FnOnce(&Question<'_>, &mut Prover<'_>) -> T,
) -> Option<T> {
    let in_income = |chart: &&Chart| chart.coordinates == Coordinates::Income && chart.judges;
    let chart = charts.all.iter().find(in_income).filter(|_| charts.reserve.is_none());
    let further: Vec<(Expression, Relation)> = match chart {
        Some(chart) if model.demands.is_empty() => {
            chart.facts.iter().map(|(e, relation)| (Expression::element(e.clone()), *relation)).collect()
        }
        _ => Vec::new(),
    };
    prover.supposing(&further, |prover| {
        let question = Question::of(model, prover, findings, chart)?;
        Some(ask(&question, prover))
    })
}

/// The signs of the responses of a system, and its elasticities. `None` for a model without Marshallian demands.
pub fn responses(
    model: &Model,
    prover: &mut Prover<'_>,
    findings: &[Finding],
    charts: &Charts,
) -> Option<AllResponses> {
    asked(model, prover, findings, charts, |question, prover| AllResponses {
        goods: responses::examine(question, prover),
        pairs: substitutes::examine(question, prover),
        elasticities: Elasticities::of(question, prover),
    })
}

/// A way to settle one property; `None` where it is not to be asked.
type Settle = fn(&Question<'_>, &mut Prover<'_>) -> Option<ClaimFinding>;

fn of_preferences(question: &Question<'_>, prover: &mut Prover<'_>, structure: &mut Structure) {
    let settled: [(Property, Settle, bool); 5] = [
        (Property::Homothetic, homothetic::settle, false),
        (Property::QuasiHomothetic, quasi_homothetic::settle, false),
        (Property::Piglog, pigl::settle_logarithmic, false),
        (Property::DirectlyAdditive, directly_additive::settle, true),
        (Property::IndirectlyAdditive, indirectly_additive::settle, true),
    ];
    for (property, settle, in_pairs) in settled {
        if in_pairs && question.size() > MOST_GOODS_IN_PAIRS {
            continue;
        }
        let finding = budget::attempt(FACT_WORK, || settle(question, prover)).ok().flatten();
        structure.facts.extend(finding.map(|finding| Fact { property, finding }));
    }
    if let Ok(Some((finding, exponent))) = budget::attempt(FACT_WORK, || pigl::settle(question, prover)) {
        structure.facts.push(Fact { property: Property::Pigl, finding });
        structure.exponent = exponent;
    }
    if let Ok(Some((finding, good))) = budget::attempt(FACT_WORK, || quasi_linear::settle(question, prover)) {
        structure.facts.push(Fact { property: Property::QuasiLinear, finding });
        structure.numeraire = good;
    }
    for group in 0..question.model.groups.len() {
        let finding = budget::attempt(FACT_WORK, || separable::settle(question, prover, group)).ok().flatten();
        structure.facts.extend(finding.map(|finding| Fact { property: Property::Separable(group), finding }));
    }
    structure.rank = budget::attempt(FACT_WORK, || rank::examine(question, prover)).ok().flatten();
    for fact in &mut structure.facts {
        fact.finding.witness = fact.finding.witness.take().map(|witness| question.stripped(witness));
    }
    structure.facts.sort_by_key(|fact| fact.property);
}
