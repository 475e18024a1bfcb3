//! The ground that a model stands on: assumed equations used up, inequalities and the needs of the formulas known to
//! the field.
//!
//! Relations and needs are taken in the order of how deep functions are nested in them, so that what a formula leans on
//! is known before the formula is computed.

use rustc_hash::FxHashSet;

use crate::algebra::field::Relation;
use crate::algebra::generator::{Element, Kind};
use crate::algebra::monomial::Var;
use crate::algebra::polynomial::Poly;
use crate::algebra::sign::Sign;
use crate::language::{Comparison, Diagnostic, Function};

use super::equations::{self, Elimination, Inserted, Solved, Unusable};
use super::evaluate::{Evaluator, Failed};
use super::feasibility::{self, Constraint};
use super::messages;
use super::order::Item;
use super::requirements::{Need, Requirement, Survey};
use super::resolve::{Node, NodeKind, tuples};
use super::script::Stated;
use super::system::{Assumption, DomainCondition};

/// The assumption at this place contradicts others.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) struct Conflict(pub usize);

/// What was established.
#[derive(Default)]
pub(super) struct Ground {
    pub assumptions: Vec<Assumption>,
    pub domain: Vec<DomainCondition>,
}

/// One link of an assumed chain, under values of its free indices.
#[derive(Clone)]
struct Link<'s> {
    stated: usize,
    environment: Vec<usize>,
    left: &'s Node,
    sign: Comparison,
    right: &'s Node,
}

/// What is taken in one turn.
enum Turn<'a, 's> {
    Relation(&'a Link<'s>),
    Need(&'a Requirement<'s>),
    /// Abbreviations and referred quantities of this depth.
    Items(u32),
    /// The waiting equations up to this depth.
    Equations(u32),
}

/// Establishes the ground on the chosen assumptions (by their places). Mistakes go to the evaluator.
pub(super) fn establish(evaluator: &Evaluator<'_>, chosen: &dyn Fn(usize) -> bool) -> Result<Ground, Conflict> {
    let survey = Survey::new(evaluator.script);
    let mut builder = Builder {
        evaluator,
        survey: &survey,
        placed: Vec::new(),
        domain: Vec::new(),
        seen: FxHashSet::default(),
        constrained: FxHashSet::default(),
        constraints: Vec::new(),
    };
    let links = links(evaluator, chosen);
    let (equations, inequalities): (Vec<Link<'_>>, Vec<Link<'_>>) =
        links.into_iter().partition(|link| link.sign == Comparison::Equal);
    let later = builder.linear(equations)?;
    // where nothing more is eliminated, the author's names can be given from here on
    evaluator.naming.set(later.is_empty());
    let requirements = survey.requirements();
    builder.in_turn(&inequalities, later, &requirements)?;
    builder.relaxation(&inequalities)?;
    builder.placed.sort_by_key(|(place, _)| *place);
    let assumptions = builder.placed.into_iter().map(|(_, assumption)| assumption).collect();
    Ok(Ground { assumptions, domain: builder.domain })
}

fn links<'s>(evaluator: &Evaluator<'s>, chosen: &dyn Fn(usize) -> bool) -> Vec<Link<'s>> {
    let script: &'s super::script::Script = evaluator.script;
    let goods = script.declarations.names.goods.len();
    let mut all = Vec::new();
    for (place, stated) in script.assumed.iter().enumerate().filter(|(place, _)| chosen(*place)) {
        for environment in tuples(goods, stated.free.len()) {
            for (index, sign) in stated.signs.iter().enumerate() {
                let (left, right) = (&stated.sides[index], &stated.sides[index + 1]);
                all.push(Link { stated: place, environment: environment.clone(), left, sign: *sign, right });
            }
        }
    }
    all
}

struct Builder<'a, 's> {
    evaluator: &'a Evaluator<'s>,
    survey: &'a Survey<'s>,
    placed: Vec<(usize, Assumption)>,
    domain: Vec<DomainCondition>,
    seen: FxHashSet<(bool, Element)>,
    /// Symbols that a fact is about.
    constrained: FxHashSet<Var>,
    constraints: Vec<Constraint>,
}

impl<'s> Builder<'_, 's> {
    fn stated(&self, link: &Link<'s>) -> &'s Stated {
        &self.evaluator.script.assumed[link.stated]
    }

    fn sides(&self, link: &Link<'s>) -> Result<(Element, Element), Failed> {
        let mut environment = link.environment.clone();
        let left = self.evaluator.compute(link.left, &mut environment)?;
        let right = self.evaluator.compute(link.right, &mut environment)?;
        Ok((Element::clone(&left), Element::clone(&right)))
    }

    fn keep(&mut self, link: &Link<'s>, left: Element, right: Element) {
        let stated = self.stated(link);
        let (text, span) = (stated.text.clone(), stated.span);
        self.placed.push((link.stated, Assumption { text, left, relation: link.sign, right, span }));
    }

    /// Uses the equations that are linear in the parameters; returns the others.
    fn linear(&mut self, equations: Vec<Link<'s>>) -> Result<Vec<Link<'s>>, Conflict> {
        let mut elimination = Elimination::default();
        let mut later = Vec::new();
        for link in equations {
            if self.survey.stated_depth(self.stated(&link)) > 0 {
                later.push(link);
                continue;
            }
            let Ok((left, right)) = self.sides(&link) else { continue };
            let difference = &left - &right;
            if difference.is_zero() {
                continue;
            }
            match elimination.insert(self.evaluator.field, &difference) {
                Inserted::Consistent => self.keep(&link, left, right),
                Inserted::Contradiction => return Err(Conflict(link.stated)),
                Inserted::NotLinear => later.push(link),
            }
        }
        for (var, value) in elimination.solved() {
            self.evaluator.replace(var, value);
        }
        self.evaluator.forget();
        Ok(later)
    }

    /// Takes relations and needs by depth. Each equation that eliminates a parameter starts the round anew.
    fn in_turn(
        &mut self,
        inequalities: &[Link<'s>],
        mut equations: Vec<Link<'s>>,
        requirements: &[Requirement<'s>],
    ) -> Result<(), Conflict> {
        let turns = self.turns(inequalities, requirements);
        'rounds: loop {
            for turn in &turns {
                match turn {
                    Turn::Items(depth) => self.compute_items(*depth),
                    Turn::Relation(link) => self.inequality(link)?,
                    Turn::Need(requirement) => self.need(requirement),
                    Turn::Equations(depth) if self.solve(&mut equations, *depth)? => {
                        self.start_again();
                        continue 'rounds;
                    }
                    Turn::Equations(_) => {}
                }
            }
            return Ok(());
        }
    }

    /// Computes what formulas refer to, in an order in which no reference is deep.
    fn compute_items(&self, depth: u32) {
        let script = self.evaluator.script;
        let quantities = script.declarations.names.quantities_are_used();
        for item in script.order.iter().filter(|item| self.survey.item_depth(**item) == depth) {
            match item {
                Item::Abbreviation(id) => self.evaluator.compute_abbreviation(*id),
                Item::Demand(good) if quantities => {
                    let _ = self.evaluator.demand(*good, None);
                }
                Item::Demand(_) => {}
            }
        }
    }

    /// At each depth relations come first, then equations, then needs, those of logarithms before those of divisors.
    fn turns<'b>(&self, inequalities: &'b [Link<'s>], requirements: &'b [Requirement<'s>]) -> Vec<Turn<'b, 's>> {
        type Order = (u32, u8, Option<Need>, bool);
        let mut turns: Vec<(Order, Turn<'b, 's>)> = Vec::new();
        for link in inequalities {
            turns.push(((self.survey.stated_depth(self.stated(link)), 0, None, false), Turn::Relation(link)));
        }
        // a condition on a single name may make others superfluous
        let compound = |r: &Requirement<'s>| !matches!(r.node.kind, NodeKind::Symbol(..) | NodeKind::Abbreviation(..));
        turns.extend(requirements.iter().map(|r| ((r.depth, 3, Some(r.need), compound(r)), Turn::Need(r))));
        let mut depths: Vec<u32> = turns.iter().map(|(order, _)| order.0).collect();
        depths.push(u32::MAX);
        depths.sort_unstable();
        depths.dedup();
        for depth in depths {
            turns.push(((depth, 1, None, false), Turn::Items(depth)));
            turns.push(((depth, 2, None, false), Turn::Equations(depth)));
        }
        turns.sort_by_key(|(order, _)| *order);
        turns.into_iter().map(|(_, turn)| turn).collect()
    }

    fn start_again(&mut self) {
        self.placed.retain(|(_, assumption)| assumption.relation == Comparison::Equal);
        self.domain.clear();
        self.seen.clear();
        self.constraints.clear();
        self.evaluator.forget();
    }

    /// Solves the waiting equations up to a depth; whether a parameter was eliminated.
    fn solve(&mut self, equations: &mut Vec<Link<'s>>, depth: u32) -> Result<bool, Conflict> {
        let mut eliminated = false;
        let waiting = std::mem::take(equations);
        for link in waiting {
            if self.survey.stated_depth(self.stated(&link)) > depth {
                equations.push(link);
                continue;
            }
            let Ok((left, right)) = self.sides(&link) else { continue };
            match equations::solve(self.evaluator.field, &(&left - &right)) {
                Solved::Nothing => self.keep(&link, left, right),
                Solved::Contradiction => return Err(Conflict(link.stated)),
                Solved::For(var, value) => {
                    self.keep(&link, left, right);
                    self.evaluator.eliminate(var, value);
                    self.evaluator.forget();
                    eliminated = true;
                }
                Solved::Unusable(reason) => {
                    self.evaluator.report(unusable(self.stated(&link), reason));
                }
            }
        }
        Ok(eliminated)
    }

    fn inequality(&mut self, link: &Link<'s>) -> Result<(), Conflict> {
        let Ok((left, right)) = self.sides(link) else { return Ok(()) };
        let (difference, relation) = match link.sign {
            Comparison::Greater => (&left - &right, Relation::Positive),
            Comparison::Less => (&right - &left, Relation::Positive),
            Comparison::GreaterEqual => (&left - &right, Relation::NonNegative),
            Comparison::LessEqual => (&right - &left, Relation::NonNegative),
            Comparison::NotEqual | Comparison::Equal => (&left - &right, Relation::NonZero),
        };
        self.keep(link, left, right);
        if relation != Relation::NonZero {
            let strict = relation == Relation::Positive;
            let form = self.evaluator.field.expand(&difference);
            self.constraints.push(Constraint { form, strict });
        }
        if !self.takes_every_value(&difference) {
            let sign = self.evaluator.field.sign(&difference);
            if contradicts(sign, relation)
                || self.evaluator.field.is_zero(&difference) && relation != Relation::NonNegative
            {
                return Err(Conflict(link.stated));
            }
            if follows(sign, relation) {
                return Ok(());
            }
        }
        self.assume(&difference, relation);
        Ok(())
    }

    fn assume(&mut self, e: &Element, relation: Relation) {
        self.constrained.extend(self.evaluator.field.symbols_of(e));
        self.evaluator.field.assume(e, relation);
    }

    /// Whether a real symbol that no fact is about stands in the element alone and linearly: then no fact can say
    /// anything about its sign.
    fn takes_every_value(&self, e: &Element) -> bool {
        let field = self.evaluator.field;
        e.raw_terms().iter().any(|(monomial, _)| {
            let mut powers = monomial.iter();
            let (Some((var, 1)), None) = (powers.next(), powers.next()) else { return false };
            let real = matches!(&*field.kind(var), Kind::Symbol(role) if !role.is_positive());
            let alone = e.raw_terms().iter().filter(|(m, _)| m.exponent(var) != 0).count() == 1;
            real && alone
                && !self.constrained.contains(&var)
                && !e.vars().into_iter().any(|v| v != var && field.depends_on(&Poly::var(v), var))
        })
    }

    fn need(&mut self, requirement: &Requirement<'s>) {
        let field = self.evaluator.field;
        let mut environment = requirement.environment.clone();
        let Ok(value) = self.evaluator.compute(requirement.node, &mut environment) else { return };
        let value = match requirement.need {
            Need::AboveBranchPoint => match field.exp(&Poly::int(-1)) {
                Ok(least) if !field.sign(&value).is_nonnegative() => &*value + &least,
                _ => return,
            },
            _ => Element::clone(&value),
        };
        let nonzero = matches!(requirement.need, Need::NonZero | Need::NonZeroArgument);
        if !self.seen.insert((nonzero, value.clone())) {
            return;
        }
        let sign = field.sign(&value);
        if nonzero {
            if sign == Sign::Zero || !sign.excludes_zero() && field.is_zero(&value) {
                self.evaluator.report(match requirement.need {
                    Need::NonZero => messages::division_by_zero(self.evaluator, requirement.node),
                    _ => messages::outside_domain(self.evaluator, Function::Ei, requirement.node),
                });
            } else if !sign.excludes_zero() {
                self.domain.push(DomainCondition::NonZero(value.clone()));
                self.assume(&value, Relation::NonZero);
            }
            return;
        }
        match sign {
            Sign::Positive => {}
            Sign::Zero | Sign::Negative | Sign::NonPositive => self.nowhere(requirement),
            _ => {
                self.domain.push(DomainCondition::Positive(value.clone()));
                self.assume(&value, Relation::Positive);
            }
        }
    }

    fn nowhere(&self, requirement: &Requirement<'s>) {
        let function = match requirement.need {
            Need::Positive(function) => function,
            _ => Function::LambertW,
        };
        let message = messages::nowhere_defined(self.evaluator, function, requirement.node, &requirement.environment);
        self.evaluator.report(message);
    }

    /// The inequalities together, by the linear relaxation.
    fn relaxation(&mut self, inequalities: &[Link<'s>]) -> Result<(), Conflict> {
        let Some(last) = inequalities.last() else { return Ok(()) };
        let field = self.evaluator.field;
        let constraints = std::mem::take(&mut self.constraints);
        let positive = |monomial: &crate::algebra::monomial::Monomial| {
            field.sign(&Poly::monomial(monomial.clone())) == Sign::Positive
        };
        match feasibility::is_contradictory(&constraints, &positive) {
            true => Err(Conflict(last.stated)),
            false => Ok(()),
        }
    }
}

fn contradicts(sign: Sign, relation: Relation) -> bool {
    match relation {
        Relation::Positive => matches!(sign, Sign::Zero | Sign::Negative | Sign::NonPositive),
        Relation::NonNegative => sign == Sign::Negative,
        Relation::NonZero => sign == Sign::Zero,
    }
}

fn follows(sign: Sign, relation: Relation) -> bool {
    match relation {
        Relation::Positive => sign == Sign::Positive,
        Relation::NonNegative => sign.is_nonnegative(),
        Relation::NonZero => sign.excludes_zero(),
    }
}

fn unusable(stated: &Stated, reason: Unusable) -> Diagnostic {
    let (message, remedy) = match reason {
        Unusable::NotParameters => {
            ("an assumed equation may only relate parameters", "write it as a demand or as an abbreviation (`let`)")
        }
        Unusable::NotAlgebraic => (
            "an assumed equation must be algebraic in the parameters",
            "replace the function in it by a parameter of its own",
        ),
        Unusable::Product => (
            "this equation says that one of several factors is zero; it splits the model into cases",
            "assume one of the factors to be zero, a file for each case",
        ),
        Unusable::NoPivot => (
            "this equation can be solved for none of its parameters",
            "solve it for one parameter by hand, or assume that the coefficient of one is not zero",
        ),
    };
    Diagnostic::error(stated.span, format!("`{}`: {message}", stated.text)).remedy(remedy)
}
