//! Model files for the tests, and sets of parameter values given by equations in words.

use std::collections::BTreeMap;
use std::rc::Rc;
use std::time::Duration;

use mainspring::algebra::monomial::Var;
use mainspring::algebra::number::Rational;
use mainspring::conditions::Condition;
use mainspring::language::Source;
use mainspring::model::Model;
use mainspring::restrictions::{Restrictions, branches};
use mainspring::{Allowance, read};

pub fn model(text: &str) -> Rc<Model> {
    let allowance = Allowance { time: Duration::from_secs(600), ..Allowance::default() };
    let source = Source::new("test.demand", text);
    Rc::new(read(&source, &[], allowance).unwrap_or_else(|unread| panic!("{unread:?}\n{text}")))
}

pub fn restricted(text: &str, only: &[Condition]) -> Restrictions {
    branches(model(text), only.to_vec(), &[], Duration::from_secs(600))
}

/// The branches as sorted lists of equations and side conditions, in the syntax of model files.
pub fn listed(found: &Restrictions) -> Vec<String> {
    let field = &found.model.field;
    let formula = |e: &_| mainspring::render::json::formula(field, e);
    let mut all: Vec<String> = found
        .branches
        .iter()
        .map(|branch| {
            let equations =
                branch.equations.iter().map(|(v, e)| format!("{} = {}", field.name(*v).unwrap(), formula(e)));
            let sides = branch.side_conditions.iter().map(|e| format!("{} != 0", formula(e)));
            equations.chain(sides).collect::<Vec<_>>().join(", ")
        })
        .collect();
    all.sort();
    all
}

/// Whether parameter values belong to one of the branches.
pub fn belongs(found: &Restrictions, values: &BTreeMap<Var, Rational>) -> bool {
    let field = &found.model.field;
    let value = |e: &_| field.value_at(e, values).ok().and_then(|value| value.as_rational());
    found.branches.iter().any(|branch| {
        branch.side_conditions.iter().all(|e| value(e).is_some_and(|v| v != Rational::from_integer(0.into())))
            && branch.equations.iter().all(|(v, e)| value(e).as_ref() == values.get(v))
    })
}
