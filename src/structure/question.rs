//! The system that facts are looked for in: shares, their slopes in income, and points to refute at.

use std::cell::RefCell;

use crate::algebra::budget;
use crate::algebra::evaluation::Point;
use crate::algebra::field::{Field, Relation};
use crate::algebra::generator::{Element, Kind};
use crate::algebra::monomial::Var;
use crate::algebra::polynomial::Poly;
use crate::conditions::{self, Chart, ClaimFinding, Condition, Coordinates, Finding, System, Verdict, Witness, fact};
use crate::model::{Coverage, Model, PointSearch};
use crate::proof::{Equation, Expression, Factor, FunctionId, Label, Prover, StepId};

/// How many points are looked at against one fact; in larger systems a point takes longer, and shows more.
const MOST_POINTS: usize = 24;
/// The same for a system with as many goods, and with more.
const FEWER_POINTS: [(usize, usize); 2] = [(8, 6), (24, 1)];
/// The work that the search for one point may take.
const POINT_WORK: u64 = 20_000_000;
/// In larger systems quantities need not be positive at the points.
const MOST_GOODS_WITH_POSITIVE: usize = 8;
/// Longer elements are not reduced.
const LONGEST_REDUCED: usize = 30;
/// The work that one reduction may take.
const REDUCING: u64 = 4_000_000;

/// A system in which facts are looked for.
pub struct Question<'a> {
    /// The model.
    pub model: &'a Model,
    /// Its demands.
    pub system: System,
    /// Income.
    pub income: Var,
    /// wᵢ as the author's formulas have it.
    pub written: Vec<Element>,
    /// What holds where the demands are those of given preferences.
    facts: Vec<(Element, Relation)>,
    /// wᵢ.
    pub shares: Vec<FunctionId>,
    /// m ∂wᵢ/∂m.
    pub engel: Vec<FunctionId>,
    /// ∂(pᵢxᵢ)/∂m.
    pub marginal: Vec<FunctionId>,
    /// The step that says what the two are.
    pub links: Vec<StepId>,
    /// Whether the system is complete, and its demands come from preferences: homogeneity, adding-up and symmetry.
    pub consumer: bool,
    /// Whether the Slutsky matrix is symmetric.
    pub symmetric: bool,
    points: RefCell<Points<'a>>,
}

/// Points as they are found.
struct Points<'a> {
    found: Vec<Point>,
    search: PointSearch<'a>,
    /// How many there may be; fewer once the search has ended.
    most: usize,
    /// Whether quantities need not be positive at them.
    everywhere: bool,
}

impl<'a> Question<'a> {
    /// The question about a model, whose demands are those of a chart where it has none itself; `None` without
    /// Marshallian demands. To be asked where the chart's facts are supposed.
    pub fn of(
        model: &'a Model,
        prover: &mut Prover<'_>,
        findings: &[Finding],
        chart: Option<&Chart>,
    ) -> Option<Question<'a>> {
        let income = model.income?;
        let (system, written, facts) = demands(model, prover, chart)?;
        let field = &model.field;
        let (mut shares, mut engel, mut marginal, mut links) = (Vec::new(), Vec::new(), Vec::new(), Vec::new());
        let mut positive: Vec<Element> = Vec::new();
        for (place, good) in model.goods.iter().enumerate() {
            let f = *system.collected.get(place)?;
            let itself = prover.value(&Factor::Function(f).into());
            positive.push(itself.clone());
            let w = match system.coordinates {
                Coordinates::Shares => f,
                Coordinates::Outlays => {
                    let share = field.quotient(&itself, &Poly::var(income)).ok()?;
                    prover.define(&format!("share {}", good.name), &share)
                }
            };
            let slope = Expression::from(Factor::LogSlope(w, income));
            let outlay = slope.clone().plus(1, vec![Factor::Function(w)]);
            let (engel_slope, marginal_outlay) = (brief(prover, &slope), brief(prover, &outlay));
            let d = prover.define(&format!("Engel slope {}", good.name), &engel_slope);
            let g = prover.define(&format!("marginal outlay {}", good.name), &marginal_outlay);
            links.push(Equation { label: Label::Pair(place, 0), left: slope, right: Factor::Function(d).into() });
            links.push(Equation { label: Label::Pair(place, 1), left: outlay, right: Factor::Function(g).into() });
            shares.push(w);
            engel.push(d);
            marginal.push(g);
        }
        let links = vec![prover.identities("slopes in income", links, &[]).ok().map(|proof| proof.step())?];
        // those on given preferences are about other functions
        let findings = if chart.is_some() && model.demands.is_empty() { &[] } else { findings };
        let mut proven = |condition| is_proven(condition, &system, prover, findings);
        let symmetric = proven(Condition::Symmetry);
        let consumer = symmetric
            && model.coverage == Coverage::Complete
            && proven(Condition::Homogeneity)
            && proven(Condition::AddingUp);
        let fewer = FEWER_POINTS.into_iter().filter(|(goods, _)| model.goods.len() > *goods).map(|(_, points)| points);
        let most = fewer.last().unwrap_or(MOST_POINTS);
        positive.extend(facts.iter().filter(|(_, relation)| *relation == Relation::Positive).map(|(e, _)| e.clone()));
        // in a large system points with all quantities positive are hard to find, and refute no more identities
        let everywhere = model.goods.len() > MOST_GOODS_WITH_POSITIVE;
        let search = if everywhere { model.points() } else { model.points().with_positive(&positive) };
        let points = Points { found: Vec::new(), search, most, everywhere };
        let points = RefCell::new(points);
        Some(Question {
            model,
            system,
            income,
            written,
            facts,
            shares,
            engel,
            marginal,
            links,
            consumer,
            symmetric,
            points,
        })
    }

    /// The witness without the quantities and the utility level, where demands say what these are.
    pub fn stripped(&self, mut witness: Witness) -> Witness {
        if self.model.demands.is_empty() {
            self.model.quantities.iter().flatten().chain([&self.model.utility]).for_each(|var| {
                witness.point.remove(var);
            });
        }
        witness
    }

    /// The number of goods.
    pub fn size(&self) -> usize {
        self.shares.len()
    }

    /// The field.
    pub fn field(&self) -> &'a Field {
        &self.model.field
    }

    /// Whether every quantity is positive at the points.
    pub fn points_are_positive(&self) -> bool {
        !self.points.borrow().everywhere
    }

    /// Admissible points; every quantity is positive at them, if the system is not large. Those found are kept.
    pub fn points(&self) -> impl Iterator<Item = Point> + '_ {
        (0..).map_while(|place| self.points.borrow_mut().nth(place))
    }

    /// Settles a family of identities.
    pub fn settle(&self, prover: &mut Prover<'_>, subject: &str, equations: &[Equation]) -> ClaimFinding {
        let mut points = self.points();
        let finding = fact::identities(self.model, prover, subject, equations, &self.links, &mut points);
        let steps = finding.steps.iter().filter_map(|id| prover.derivation().step(*id));
        match finding.verdict {
            Verdict::Proven if steps.flat_map(|step| step.sides()).any(|side| !side.discharged) => {
                ClaimFinding::undecided("the proof leans on something that does not follow from the assumptions")
            }
            _ => finding,
        }
    }

    /// That every quantity is positive, on top of what holds anyway.
    pub fn domain(&self) -> Vec<(Expression, Relation)> {
        let facts = self.facts.iter().map(|(e, relation)| (Expression::element(e.clone()), *relation));
        let functions = self.system.collected.iter();
        facts.chain(functions.map(|f| (Expression::from(Factor::Function(*f)), Relation::Positive))).collect()
    }

    /// A point at which the expression is not zero, as a step.
    pub fn not_zero(&self, prover: &mut Prover<'_>, subject: &str, expression: &Expression) -> Option<StepId> {
        let equation = Equation { label: Label::Whole, left: expression.clone(), right: Expression::zero() };
        self.points().find_map(|point| Some(prover.refute(subject, equation.clone(), &point)?.step()))
    }

    /// Whether the normal form of a function is zero.
    pub fn vanishes(&self, prover: &mut Prover<'_>, f: FunctionId) -> bool {
        let value = prover.value(&Factor::Function(f).into());
        self.field().is_zero(&value)
    }

    /// A good for which the function does not vanish.
    pub fn pivot(&self, prover: &mut Prover<'_>, functions: &[FunctionId]) -> Option<usize> {
        let length = |f: &FunctionId| prover.derivation().function(*f).map_or(0, |function| function.element.len());
        let mut order: Vec<(usize, usize)> = functions.iter().map(length).enumerate().map(|(i, l)| (l, i)).collect();
        order.sort_unstable();
        order.into_iter().map(|(_, good)| good).find(|good| !self.vanishes(prover, functions[*good]))
    }
}

impl Points<'_> {
    fn nth(&mut self, place: usize) -> Option<Point> {
        while self.found.len() <= place && self.found.len() < self.most {
            match budget::attempt(POINT_WORK, || self.search.next()).ok().flatten() {
                Some(next) => self.found.push(next),
                None => self.most = self.found.len(),
            }
        }
        self.found.get(place).cloned()
    }
}

/// The value of an expression, reduced where that is cheap: a long one may have sums in it that are much longer.
pub fn brief(prover: &mut Prover<'_>, expression: &Expression) -> Element {
    let value = prover.value(expression);
    let field = prover.field();
    if is_long(field, &value) {
        return value;
    }
    budget::attempt(REDUCING, || field.reduce(&value)).unwrap_or(value)
}

/// Whether the element is long, or a sum that it names.
fn is_long(field: &Field, e: &Element) -> bool {
    let mut waiting = vec![field.current(e)];
    let mut seen = Vec::new();
    while let Some(part) = waiting.pop() {
        if part.len() > LONGEST_REDUCED {
            return true;
        }
        for var in part.vars() {
            if let Kind::Sum { value, .. } = &*field.kind(var)
                && !seen.contains(&var)
            {
                seen.push(var);
                waiting.push(field.current(value));
            }
        }
    }
    false
}

/// a·b = c·d between functions.
pub fn cross(label: Label, [a, b, c, d]: [FunctionId; 4]) -> Equation {
    let both =
        |f: FunctionId, g: FunctionId| Expression::zero().plus(1, vec![Factor::Function(f), Factor::Function(g)]);
    Equation { label, left: both(a, b), right: both(c, d) }
}

/// The demands of a model, or of a chart in prices and income: the system, the shares as they are written, and what holds
/// of them.
type Demands = (System, Vec<Element>, Vec<(Element, Relation)>);

fn demands(model: &Model, prover: &mut Prover<'_>, chart: Option<&Chart>) -> Option<Demands> {
    if !model.demands.is_empty() {
        let written = model.demands.iter().map(|demand| demand.share.clone()).collect();
        return Some((System::of(model, prover)?, written, Vec::new()));
    }
    let (chart, field) = (chart?, &model.field);
    let share = |(x, price): (&Element, &Element)| {
        let outlay = field.product(price, x);
        Some(field.reduce(&field.quotient(&outlay, &chart.income).ok()?))
    };
    let written: Vec<Element> = chart.quantities.iter().zip(&chart.prices).map(share).collect::<Option<_>>()?;
    Some((System::of_shares(model, &written, prover)?, written, chart.facts.clone()))
}

/// Whether a condition is proven, among the findings or anew.
fn is_proven(condition: Condition, system: &System, prover: &mut Prover<'_>, findings: &[Finding]) -> bool {
    match findings.iter().find(|finding| finding.condition == condition) {
        Some(finding) => finding.verdict == Verdict::Proven,
        None => conditions::differences_of(condition, system, prover).is_some_and(|left| left.is_empty()),
    }
}
