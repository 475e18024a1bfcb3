//! Claims that a condition holds if, only if, or exactly if relations between the parameters hold.
//!
//! *If*: the relations are solved, and the condition is tested on every set of values that satisfies them. *Only if*: the
//! relations are tested on every branch of the condition.

use std::cmp::Ordering;
use std::rc::Rc;
use std::time::Duration;

use crate::algebra::evaluation::Point;
use crate::algebra::field::Relation;
use crate::algebra::generator::Element;
use crate::conditions::special::{contradicts_a_fact, transfer};
use crate::conditions::{self, ClaimFinding, Condition, Verdict, Witness};
use crate::language::{Comparison, Link, Property};
use crate::model::{DomainCondition, Model};
use crate::proof::{Expression, Label, Prover, exact_value};

use super::branch::{self, Branch};
use super::node::{Node, numerator};
use super::search::{Search, Tested};
use super::terms::put_in;
use super::{Request, restrict};

/// A relation between elements of the parameters.
pub type Related = (Element, Comparison, Element);

/// The subject of the steps.
const SUBJECT: &str = "relation";
/// How many points of a branch are looked at for one that does not satisfy a relation.
const MOST_POINTS: usize = 48;

/// Judges the claim.
pub fn judge(model: &Rc<Model>, condition: Property, link: Link, relations: &[Related]) -> ClaimFinding {
    let condition = match condition {
        Property::Homogeneity => Condition::Homogeneity,
        Property::AddingUp => Condition::AddingUp,
        Property::Symmetry => Condition::Symmetry,
        Property::Curvature => Condition::Curvature,
    };
    if !conditions::applies(condition, model) {
        return ClaimFinding::undecided("the condition makes no sense for this model");
    }
    let mut found = Vec::new();
    if link != Link::OnlyIf {
        found.push(sufficient(model, condition, relations));
    }
    if link != Link::If && found.iter().all(|f| f.verdict != Verdict::Refuted) {
        found.push(necessary(model, condition, relations));
    }
    let worst = |f: &ClaimFinding| match f.verdict {
        Verdict::Refuted => 0,
        Verdict::Proven => 2,
        _ => 1,
    };
    found.into_iter().min_by_key(worst).unwrap_or_else(|| ClaimFinding::undecided("nothing was asked"))
}

fn proven() -> ClaimFinding {
    ClaimFinding {
        verdict: Verdict::Proven,
        witness: None,
        correct: None,
        difference: None,
        steps: Vec::new(),
        reason: None,
    }
}

fn refuted(witness: Witness, reason: &str) -> ClaimFinding {
    let reason = Some(reason.to_string());
    ClaimFinding {
        verdict: Verdict::Refuted,
        witness: Some(witness),
        correct: None,
        difference: None,
        steps: Vec::new(),
        reason,
    }
}

/// Whether the condition holds wherever the relations do.
fn sufficient(model: &Model, condition: Condition, relations: &[Related]) -> ClaimFinding {
    let field = &model.field;
    let test = |leaf: &Node| if contradicts_a_fact(field, &leaf.solved) { Tested::Empty } else { Tested::Holds };
    let mut search = Search::new(field, &[], &test);
    let equations = relations.iter().filter(|(_, sign, _)| *sign == Comparison::Equal);
    let equations: Vec<Element> = equations.map(|(left, _, right)| numerator(field, &(left - right))).collect();
    if !equations.iter().any(|e| e.is_constant() && !e.is_zero()) {
        search.follow(Node::default().with(equations));
    }
    let mut open = (!search.exhaustive).then(|| "the relations could not be solved for the parameters".to_string());
    for leaf in &search.found {
        let Some((special, _)) =
            branch::special(model, leaf).filter(|(special, _)| assume(model, special, leaf, relations))
        else {
            open.get_or_insert_with(|| "the model could not be built under the relations".to_string());
            continue;
        };
        let special = restricted(model, special, leaf, relations);
        match holds(&special, condition) {
            Ok(()) => {}
            Err(Some(witness)) if same_names(model, &special, &witness.point) => {
                return refuted(*witness, "the relations hold there, and the condition does not");
            }
            Err(_) => {
                open.get_or_insert_with(|| "the condition is not proven under the relations".to_string());
            }
        }
    }
    open.map_or_else(proven, |reason| ClaimFinding::undecided(&reason))
}

/// Adds the inequalities to the facts of a special model; whether all could be added.
fn assume(model: &Model, special: &Model, leaf: &Node, relations: &[Related]) -> bool {
    relations.iter().filter(|related| related.1 != Comparison::Equal).all(|related| {
        let found = fact(model, special, leaf, related);
        found.iter().for_each(|(e, relation)| special.field.assume(e, *relation));
        found.is_some()
    })
}

/// The special model with the inequalities in its domain, so that its points satisfy them.
fn restricted(model: &Model, mut special: Model, leaf: &Node, relations: &[Related]) -> Model {
    for related in relations {
        let Some((e, relation)) = fact(model, &special, leaf, related) else { continue };
        special.domain.push(match relation {
            Relation::NonZero => DomainCondition::NonZero(e),
            Relation::Positive | Relation::NonNegative => DomainCondition::Positive(e),
        });
    }
    special
}

/// An inequality as a fact of the special model. `None` for an equation, and where it has no meaning there.
fn fact(model: &Model, special: &Model, leaf: &Node, related: &Related) -> Option<(Element, Relation)> {
    let (left, sign, right) = related;
    let (e, relation) = match sign {
        Comparison::Equal => return None,
        Comparison::NotEqual => (left - right, Relation::NonZero),
        Comparison::Greater => (left - right, Relation::Positive),
        Comparison::GreaterEqual => (left - right, Relation::NonNegative),
        Comparison::Less => (right - left, Relation::Positive),
        Comparison::LessEqual => (right - left, Relation::NonNegative),
    };
    let e = put_in(&model.field, &e, &leaf.solved).ok()?;
    Some((transfer(model, special, &e)?, relation))
}

/// Whether the condition is proven in a model; else a point at which it fails, where one is found.
fn holds(model: &Model, condition: Condition) -> Result<(), Option<Box<Witness>>> {
    let mut prover = Prover::new(&model.field);
    let finding = conditions::examine(condition, model, &mut prover, &[]);
    if finding.verdict == Verdict::Proven { Ok(()) } else { Err(finding.witness.map(Box::new)) }
}

/// Whether the relations hold wherever the condition does.
fn necessary(model: &Rc<Model>, condition: Condition, relations: &[Related]) -> ClaimFinding {
    let found = restrict_quietly(model, condition);
    let mut open = (!found.complete)
        .then(|| found.reason.clone().unwrap_or_else(|| "the branches are not known to be all".to_string()));
    for branch in &found.branches {
        for (left, sign, right) in relations {
            match on_branch(model, branch, &(left - right), *sign) {
                Ok(()) => {}
                Err(Some(witness)) => return refuted(*witness, "the condition holds there, and the relations do not"),
                Err(None) => {
                    open.get_or_insert_with(|| "a relation is not decided where the condition holds".to_string());
                }
            }
        }
    }
    open.map_or_else(proven, |reason| ClaimFinding::undecided(&reason))
}

/// The branches; examined only where the condition is no identity.
fn restrict_quietly(model: &Rc<Model>, condition: Condition) -> super::Restrictions {
    match condition {
        Condition::Curvature => {
            restrict(model.clone(), &Request { only: vec![condition], kept: Vec::new() }, Duration::from_secs(60))
        }
        _ => super::branches(model.clone(), vec![condition], &[], Duration::MAX),
    }
}

/// Whether a relation holds on all of a branch; else a point of the branch at which it does not.
fn on_branch(model: &Model, branch: &Branch, gap: &Element, sign: Comparison) -> Result<(), Option<Box<Witness>>> {
    let special = &branch.model;
    let here = put_in(&model.field, gap, &branch.equations).ok().and_then(|e| transfer(model, special, &e));
    let Some(here) = here else { return Err(None) };
    if is_proven(special, &here, sign) {
        return Ok(());
    }
    let fails = |order: Ordering| match sign {
        Comparison::Equal => order != Ordering::Equal,
        Comparison::NotEqual => order == Ordering::Equal,
        Comparison::Greater => order != Ordering::Greater,
        Comparison::GreaterEqual => order == Ordering::Less,
        Comparison::Less => order != Ordering::Less,
        Comparison::LessEqual => order == Ordering::Greater,
    };
    let witness = special.points().take(MOST_POINTS).find_map(|point| {
        let value = exact_value(&special.field, &here, &point)?;
        let fails = value.sign().is_some_and(fails) && inside(special, branch, &point);
        fails.then_some(Witness { point, place: Label::Whole, value, vector: None })
    });
    Err(witness.filter(|witness| same_names(model, special, &witness.point)).map(Box::new))
}

/// Whether a relation of an element to zero is established on the whole domain.
fn is_proven(special: &Model, e: &Element, sign: Comparison) -> bool {
    let mut prover = Prover::new(&special.field);
    let mut bound = |e: Element, relation| prover.bound(SUBJECT, Expression::element(e), relation, &[]).is_some();
    match sign {
        Comparison::Equal => prover.identity(SUBJECT, Expression::element(e.clone()), Expression::zero(), &[]).is_ok(),
        Comparison::NotEqual => bound(e.clone(), Relation::NonZero),
        Comparison::Greater => bound(e.clone(), Relation::Positive),
        Comparison::GreaterEqual => bound(e.clone(), Relation::NonNegative),
        Comparison::Less => bound(e.neg(), Relation::Positive),
        Comparison::LessEqual => bound(e.neg(), Relation::NonNegative),
    }
}

/// Whether the inequalities of a branch hold at a point.
fn inside(special: &Model, branch: &Branch, point: &Point) -> bool {
    branch.inequalities.iter().all(|e| {
        let sign = exact_value(&special.field, e, point).and_then(|value| value.sign());
        sign.is_some_and(|sign| sign != Ordering::Less)
    })
}

/// Whether the names of a point mean the same in both models: they are declared in the same order.
fn same_names(model: &Model, special: &Model, point: &Point) -> bool {
    point.keys().all(|v| model.field.name(*v).is_some() && model.field.name(*v) == special.field.name(*v))
}
