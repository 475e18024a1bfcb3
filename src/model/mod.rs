//! What the author said, checked for sense: goods, prices, income, parameters, assumptions and equations, as elements
//! of one field in which the assumptions are known.

mod build;
mod claimed;
mod declarations;
mod equations;
mod evaluate;
mod feasibility;
mod given;
mod ground;
mod messages;
mod names;
mod order;
mod outline;
pub mod points;
mod requirements;
mod resolve;
mod script;
mod symbols;
pub mod system;

use std::rc::Rc;

use crate::algebra::evaluation::Point;
use crate::algebra::field::Field;
use crate::algebra::generator::Element;
use crate::algebra::monomial::Var;
use crate::language::{self, Diagnostic, Source};

pub use given::{inverse_shares, marshallian_shares};
pub use points::PointSearch;
pub use system::{
    Assumption, Claim, Coverage, Demand, DomainCondition, Form, Function, Given, Good, InverseDemand, Parameter,
    Statement, Value,
};

/// A model file with its meaning.
pub struct Model {
    /// The title, for reports.
    pub title: Option<String>,
    /// The field that all elements of the model belong to; assumptions and domain are facts in it.
    pub field: Field,
    /// The goods, in declared order.
    pub goods: Vec<Good>,
    /// The named sets of goods, as positions in `goods`.
    pub groups: Vec<(String, Vec<usize>)>,
    /// The prices, one for each good; empty in a file of lemmas without prices.
    pub prices: Vec<Var>,
    /// Total outlay; absent only in a file of lemmas.
    pub income: Option<Var>,
    /// The names of the quantities, one slot for each good.
    pub quantities: Vec<Option<Var>>,
    /// The symbol for the utility level in recovered functions.
    pub utility: Var,
    /// Its name.
    pub utility_name: String,
    /// The parameters, families member by member, in declared order.
    pub parameters: Vec<Parameter>,
    /// The assumptions, in the order of the file.
    pub assumptions: Vec<Assumption>,
    /// The author's abbreviations, in the order of the file.
    pub abbreviations: Vec<(String, Element)>,
    /// Which goods of the budget the system covers.
    pub coverage: Coverage,
    /// The demands, one for each good: those of the file, or those of a given indirect utility; else empty.
    pub demands: Vec<Demand>,
    /// The inverse demands, one for each good: those of the file, or those of a given direct utility; else empty.
    pub inverse: Vec<InverseDemand>,
    /// The preferences that the author starts from.
    pub given: Option<Given>,
    /// The good that takes what is left of income.
    pub rest: Option<usize>,
    /// The claims, in the order of the file.
    pub claims: Vec<Claim>,
    /// What the formulas of the file need in order to be defined.
    pub domain: Vec<DomainCondition>,
    /// What is read, but perhaps not as its author meant it.
    pub warnings: Vec<Diagnostic>,
    /// The parameters that values were put in for.
    fixed: Vec<Var>,
    text: Rc<Text>,
}

/// The file that a model was made from, kept so that it can be made anew with other values.
struct Text {
    source: Source,
    tree: language::Model,
}

/// Reads a model file and gives it its meaning, with values put in for parameters.
///
/// # Errors
/// Every mistake of the file, those of its form and those of its names together where both can be seen, in the order of
/// the file.
pub fn read(source: &Source, values: &[Value<'_>]) -> Result<Model, Vec<Diagnostic>> {
    let reading = language::examine(source);
    if reading.mistakes.is_empty() {
        return build::build(Rc::new(Text { source: source.clone(), tree: reading.model }), values);
    }
    let mut mistakes = reading.mistakes;
    if !reading.declarations_lost {
        let further = build::further_mistakes(source, &reading.model);
        mistakes.extend(further);
        mistakes.sort_by_key(|mistake| mistake.span);
    }
    Err(mistakes)
}

/// Gives a syntax tree its meaning.
///
/// # Errors
/// Every mistake of the file, each with its place and, where there is one, a remedy.
pub fn elaborate(source: &Source, tree: &language::Model, values: &[Value<'_>]) -> Result<Model, Vec<Diagnostic>> {
    build::build(Rc::new(Text { source: source.clone(), tree: tree.clone() }), values)
}

impl Model {
    /// The model of the same text with elements of this model's field put in for parameters, built anew in a fresh
    /// field. Values that were put in before stay.
    ///
    /// # Errors
    /// What is wrong with the file under these values: a divisor that becomes zero, an assumption that fails.
    pub fn respecialised(&self, equations: &[(Var, Element)]) -> Result<Model, Vec<Diagnostic>> {
        let mut all = self.values_so_far(equations)?;
        all.extend_from_slice(equations);
        let names: Vec<String> = all.iter().map(|(v, _)| self.field.name(*v).unwrap_or_default()).collect();
        let values: Vec<Value<'_>> = names
            .iter()
            .zip(&all)
            .map(|(parameter, (_, element))| Value { parameter, element, field: &self.field })
            .collect();
        build::build(self.text.clone(), &values)
    }

    /// The values that were put in before, under the new ones.
    fn values_so_far(&self, new: &[(Var, Element)]) -> Result<Vec<(Var, Element)>, Vec<Diagnostic>> {
        let mut values = Vec::new();
        let old =
            self.parameters.iter().filter(|p| self.fixed.contains(&p.var) && new.iter().all(|(v, _)| *v != p.var));
        for parameter in old {
            let Some(value) = &parameter.eliminated else { continue };
            let Ok(value) = self.field.substitute(value, new) else {
                let words = format!("the value of `{}` is not defined there", parameter.name);
                return Err(vec![Diagnostic::error(language::Span::new(0, 0), words)]);
            };
            values.push((parameter.var, value));
        }
        Ok(values)
    }

    /// The file that the model was made from.
    pub fn source(&self) -> &Source {
        &self.text.source
    }

    /// The point with values for what its free symbols determine; `None` where one is not rational.
    pub fn completed(&self, point: Point) -> Option<Point> {
        points::complete(self, point)
    }

    /// A deterministic stream of admissible points with exact rational coordinates: small numbers first, then random
    /// ones, then extreme ones. Every declared name has a value, eliminated parameters included.
    pub fn points(&self) -> PointSearch<'_> {
        PointSearch::new(self)
    }

    /// Whether the point satisfies every assumption and every domain condition, and gives positive values to prices,
    /// income and quantities. `false` also where the precision spent does not show it.
    pub fn is_admissible(&self, point: &Point) -> bool {
        points::is_admissible(self, point)
    }

    /// Whether the file speaks of the utility level.
    pub fn speaks_of_utility(&self) -> bool {
        self.given.is_some() || self.claims.iter().any(Claim::is_of_function)
    }

    /// The syntax tree that the model was made from.
    pub fn tree(&self) -> &language::Model {
        &self.text.tree
    }
}
