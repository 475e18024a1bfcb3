//! From a syntax tree to a model: names, ground, demands, claims, in this order.

use std::rc::Rc;

use rustc_hash::FxHashMap;

use crate::algebra::field::Field;
use crate::algebra::generator::{Element, Role};
use crate::algebra::monomial::Var;
use crate::language::{self, Comparison, Diagnostic, Source, Span};

use super::evaluate::{Evaluator, Failed};
use super::given::{self, Derived};
use super::ground::{Conflict, Ground, establish};
use super::names::{AbbreviationId, FamilyId, Names};
use super::order::Item;
use super::resolve::tuples;
use super::script::{Covered, Defined, Script, Stated, Under, plain_text, script};
use super::symbols::Symbols;
use super::system::{Claim, Coverage, Demand, Given, Good, InverseDemand, Parameter, Statement, Value};
use super::{Model, Text};

/// Builds the model of a text with values put in for parameters.
pub(super) fn build(text: Rc<Text>, values: &[Value<'_>]) -> Result<Model, Vec<Diagnostic>> {
    let script = script(&text.source, &text.tree, true)?;
    let field = Field::new();
    let symbols = Symbols::declare(&script.declarations, &field);
    let evaluator = Evaluator::new(&field, &script, &symbols, &text.source);
    put_in(&evaluator, values)?;
    let ground = match establish(&evaluator, &|_| true) {
        Ok(ground) => ground,
        Err(conflict) => return Err(vec![contradiction(&text, &script, values, conflict)]),
    };
    if !evaluator.naming.replace(true) {
        evaluator.forget();
    }
    let content = content(&evaluator);
    let mistakes = evaluator.take_mistakes();
    let Some(content) = content.filter(|_| mistakes.is_empty()) else { return Err(mistakes) };
    let parameters = parameters(&evaluator);
    drop(evaluator);
    let fixed = |p: &Parameter| values.iter().any(|value| value.parameter == p.name);
    let fixed = parameters.iter().filter(|p| fixed(p)).map(|p| p.var).collect();
    Ok(Model { fixed, ..assemble(text, &script, field, &symbols, ground, content, parameters) })
}

/// The mistakes in the names of a file that could be read in part only.
pub(super) fn further_mistakes(source: &Source, tree: &language::Model) -> Vec<Diagnostic> {
    script(source, tree, false).err().unwrap_or_default()
}

/// What is computed once the ground is established.
struct Content {
    abbreviations: Vec<(String, Element)>,
    demands: Vec<Demand>,
    claims: Vec<Claim>,
    given: Option<Given>,
    inverse: Vec<InverseDemand>,
}

fn content(evaluator: &Evaluator<'_>) -> Option<Content> {
    for item in &evaluator.script.order {
        match item {
            Item::Abbreviation(id) => evaluator.compute_abbreviation(*id),
            Item::Demand(good) => {
                let _ = evaluator.demand(*good, None);
            }
        }
    }
    let abbreviations = abbreviations(evaluator);
    let goods = 0..evaluator.script.defined.len();
    let demands: Vec<Result<Demand, Failed>> =
        goods.map(|good| evaluator.demand(good, None).map(|demand| Demand::clone(&demand))).collect();
    let claims = claims(evaluator);
    let demands = demands.into_iter().collect::<Result<Vec<Demand>, Failed>>();
    let (given, inverse) = (given::given(evaluator), given::inverse_demands(evaluator));
    let (mut demands, given, mut inverse) = (demands.ok()?, given.ok()?, inverse.ok()?);
    let mut claims = claims.ok()?;
    if let Some(given) = &given {
        claims.extend(given::monotone(evaluator, given));
        claims.extend(given::against(evaluator, &demands, given.span));
        let derived = given::derive(evaluator, given);
        match derived.ok()? {
            Derived::Demands(of_given) if demands.is_empty() => demands = of_given,
            Derived::Inverse(of_given) => inverse = of_given,
            _ => {}
        }
    }
    Some(Content { abbreviations: abbreviations.ok()?, demands, claims, given, inverse })
}

/// Puts values in for parameters.
fn put_in(evaluator: &Evaluator<'_>, values: &[Value<'_>]) -> Result<(), Vec<Diagnostic>> {
    if values.is_empty() {
        return Ok(());
    }
    let field = evaluator.field;
    let all = evaluator.symbols.all();
    let by_name: FxHashMap<String, Var> = all.into_iter().filter_map(|var| Some((field.name(var)?, var))).collect();
    let mut mistakes = Vec::new();
    for value in values {
        let named = by_name.get(value.parameter).filter(|var| field.role(**var) == Some(Role::Parameter));
        let Some(var) = named else {
            mistakes.push(no_such_parameter(&evaluator.script.declarations.names, value.parameter));
            continue;
        };
        let symbol = |name: &str| {
            let var = *by_name.get(name)?;
            Some(evaluator.replacement(var).map_or_else(|| Element::var(var), |held| Element::clone(&held)))
        };
        match field.import(value.field, value.element, &symbol) {
            Ok(element) => evaluator.eliminate(*var, element),
            Err(_) => {
                let message = format!("the value for `{}` is not defined in this model", value.parameter);
                mistakes.push(Diagnostic::error(Span::new(0, 0), message).remedy("check the names in it"));
            }
        }
    }
    if mistakes.is_empty() { Ok(()) } else { Err(mistakes) }
}

fn no_such_parameter(names: &Names, wanted: &str) -> Diagnostic {
    let message = Diagnostic::error(Span::new(0, 0), format!("there is no parameter `{wanted}` to give a value to"));
    match names.nearest_name(wanted) {
        Some(near) => message.remedy(format!("did you mean `{near}`?")),
        None => message.remedy("name a declared parameter"),
    }
}

fn parameters(evaluator: &Evaluator<'_>) -> Vec<Parameter> {
    let names = &evaluator.script.declarations.names;
    let mut all = Vec::new();
    for (place, family) in names.families.iter().enumerate() {
        if family.role != Role::Parameter {
            continue;
        }
        let id = FamilyId(place);
        for (at, var) in tuples(names.goods.len(), family.arity).zip(evaluator.symbols.family(id)) {
            let eliminated = evaluator.replacement(*var).map(|held| evaluator.field.current(&held));
            let name = names.member_name(&family.name, &at);
            all.push(Parameter { name, var: *var, latex: family.latex.clone(), eliminated });
        }
    }
    all
}

fn abbreviations(evaluator: &Evaluator<'_>) -> Result<Vec<(String, Element)>, Failed> {
    let names = &evaluator.script.declarations.names;
    let mut all = Vec::new();
    let mut outcome = Ok(());
    for (place, abbreviation) in names.abbreviations.iter().enumerate() {
        for at in tuples(names.goods.len(), abbreviation.arity) {
            match evaluator.abbreviation(AbbreviationId(place), &at, None) {
                Ok(value) => all.push((names.member_name(&abbreviation.name, &at), Element::clone(&value))),
                Err(failed) => outcome = Err(failed),
            }
        }
    }
    outcome.map(|()| all)
}

fn claims(evaluator: &Evaluator<'_>) -> Result<Vec<Claim>, Failed> {
    let script = evaluator.script;
    let goods = script.declarations.names.goods.len();
    let mut all = Vec::new();
    let mut outcome = Ok(());
    for stated in &script.claims {
        if let Some(under) = &stated.under {
            match conditional(evaluator, stated, under) {
                Ok(claim) => all.push(claim),
                Err(failed) => outcome = Err(failed),
            }
            continue;
        }
        for mut environment in tuples(goods, stated.free.len()) {
            match instances(evaluator, stated, &mut environment) {
                Ok(claims) => all.extend(claims),
                Err(failed) => outcome = Err(failed),
            }
        }
    }
    outcome.map(|()| all)
}

/// A claim about a condition: one, with its relations for all values of their indices.
fn conditional(evaluator: &Evaluator<'_>, stated: &Stated, under: &Under) -> Result<Claim, Failed> {
    let goods = evaluator.script.declarations.names.goods.len();
    let mut relations: Vec<(Element, Comparison, Element)> = Vec::new();
    for part in &under.relations {
        for mut environment in tuples(goods, part.free.len()) {
            let links = instances(evaluator, part, &mut environment)?;
            let links = links.into_iter().filter_map(|link| match link.statement {
                Statement::Relation { left, relation, right } => Some((left, relation, right)),
                _ => None,
            });
            links.for_each(|link| {
                if !relations.contains(&link) {
                    relations.push(link)
                }
            });
        }
    }
    let statement = Statement::Under { condition: under.condition, link: under.link, relations };
    Ok(Claim { text: stated.text.clone(), statement, span: stated.span })
}

/// The claims that a stated one makes under an environment: one for each link of a chain.
fn instances(evaluator: &Evaluator<'_>, stated: &Stated, environment: &mut Vec<usize>) -> Result<Vec<Claim>, Failed> {
    if let Some(goods) = &stated.separable {
        let statement = Statement::Separable(goods.clone());
        return Ok(vec![Claim { text: stated.text.clone(), statement, span: stated.span }]);
    }
    if let (Some(wanted), [side]) = (stated.function, stated.sides.as_slice()) {
        let value = match wanted.is_of_quantities() {
            true => evaluator.in_quantities(|| evaluator.compute(side, environment))?,
            false => evaluator.compute(side, environment)?,
        };
        let statement = Statement::Function { function: wanted.function(environment), value: Element::clone(&value) };
        let text = claim_text(evaluator, stated, 0, environment);
        return Ok(vec![Claim { text, statement, span: stated.span }]);
    }
    let sides: Vec<_> = stated.sides.iter().map(|side| evaluator.compute(side, environment)).collect();
    let sides = sides.into_iter().collect::<Result<Vec<_>, Failed>>()?;
    let links = stated.signs.iter().zip(sides.windows(2)).enumerate();
    let claim = |(index, (sign, pair)): (usize, (&Comparison, &[std::rc::Rc<Element>]))| {
        let (left, right) = (Element::clone(pair.first()?), Element::clone(pair.last()?));
        let text = claim_text(evaluator, stated, index, environment);
        Some(Claim { text, statement: Statement::Relation { left, relation: *sign, right }, span: stated.span })
    };
    Ok(links.filter_map(claim).collect())
}

/// One link of a chain as it was written, with the values of its free indices.
fn claim_text(evaluator: &Evaluator<'_>, stated: &Stated, link: usize, environment: &[usize]) -> String {
    let side = |at: usize| plain_text(evaluator.source.slice(stated.sides[at].span));
    let mut text = match stated.signs.as_slice() {
        [] | [_] => stated.text.clone(),
        signs => format!("{} {} {}", side(link), signs[link].sign(), side(link + 1)),
    };
    if !stated.free.is_empty() {
        let goods = &evaluator.script.declarations.names.goods;
        let values =
            stated.free.iter().zip(environment).map(|(index, good)| format!("{} = {}", index.text, goods[*good]));
        text = format!("{text} for {}", values.collect::<Vec<_>>().join(", "));
    }
    text
}

/// The message for assumptions that cannot hold together: with any one of those named left out, no contradiction is
/// found any more.
fn contradiction(text: &Text, script: &Script, values: &[Value<'_>], first: Conflict) -> Diagnostic {
    let conflicts = |chosen: &[usize]| -> bool {
        let field = Field::new();
        let symbols = Symbols::declare(&script.declarations, &field);
        let evaluator = Evaluator::new(&field, script, &symbols, &text.source);
        put_in(&evaluator, values).is_ok() && establish(&evaluator, &|place| chosen.contains(&place)).is_err()
    };
    let mut kept: Vec<usize> = (0..script.assumed.len()).collect();
    let mut step = kept.len();
    while step > 0 {
        let mut at = 0;
        while at < kept.len() {
            let mut fewer = kept.clone();
            fewer.drain(at..(at + step).min(kept.len()));
            if conflicts(&fewer) { kept = fewer } else { at += step }
        }
        step /= 2;
    }
    let named: Vec<String> = kept.iter().map(|place| format!("`{}`", script.assumed[*place].text)).collect();
    let place = kept.last().copied().unwrap_or(first.0);
    let span = script.assumed[place].span;
    let under = if values.is_empty() { "" } else { " for the values put in" };
    match named.as_slice() {
        [one] => Diagnostic::error(span, format!("no point satisfies {one}{under}")).remedy("correct this assumption"),
        many => Diagnostic::error(span, format!("no point satisfies {} together{under}", many.join(", ")))
            .remedy("drop or correct one of these assumptions"),
    }
}

fn assemble(
    text: Rc<Text>,
    script: &Script,
    field: Field,
    symbols: &Symbols,
    ground: Ground,
    content: Content,
    parameters: Vec<Parameter>,
) -> Model {
    let names = &script.declarations.names;
    let fresh = |e: &Element| field.current(e);
    let mut content = content;
    for demand in &mut content.demands {
        let all = [&mut demand.formula, &mut demand.quantity, &mut demand.outlay, &mut demand.share];
        all.into_iter().for_each(|e| *e = fresh(e));
    }
    content.abbreviations.iter_mut().for_each(|(_, e)| *e = fresh(e));
    content.claims.iter_mut().for_each(|claim| match &mut claim.statement {
        Statement::Relation { left, right, .. } => (*left, *right) = (fresh(left), fresh(right)),
        Statement::Function { value, .. } => *value = fresh(value),
        Statement::Under { relations, .. } => {
            relations.iter_mut().for_each(|(left, _, right)| (*left, *right) = (fresh(left), fresh(right)));
        }
        Statement::Separable(_) => {}
    });
    content.given.iter_mut().for_each(|given| given.value = fresh(&given.value));
    content.inverse.iter_mut().for_each(|i| (i.formula, i.share) = (fresh(&i.formula), fresh(&i.share)));
    let mut warnings = text.tree.warnings.clone();
    warnings.extend(names.unused().into_iter().map(|(name, span)| {
        Diagnostic::warning(span, format!("`{name}` is declared and never used")).remedy("use it, or drop it")
    }));
    warnings.sort_by_key(|warning| warning.span);
    let others = script.declarations.others.iter().filter_map(|id| symbols.member(*id, 0)).collect();
    Model {
        title: script.title.clone(),
        goods: names.goods.iter().map(|name| Good { name: name.clone() }).collect(),
        groups: names.groups.iter().map(|group| (group.name.clone(), group.members.clone())).collect(),
        prices: symbols.prices().to_vec(),
        income: symbols.income(),
        quantities: symbols.quantities().to_vec(),
        utility: symbols.utility(),
        utility_name: symbols.utility_name().to_string(),
        parameters,
        assumptions: ground.assumptions,
        abbreviations: content.abbreviations,
        coverage: match script.covered {
            Covered::All => Coverage::Complete,
            Covered::Some => Coverage::Others(others),
            Covered::Deflated => Coverage::Deflated,
        },
        demands: content.demands,
        rest: script.defined.iter().position(|defined| *defined == Defined::Rest),
        inverse: content.inverse,
        given: content.given,
        claims: content.claims,
        domain: ground.domain,
        warnings,
        field,
        fixed: Vec::new(),
        text,
    }
}
