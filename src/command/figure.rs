//! The picture of a region: which variables its axes show, and where it goes.

use mainspring::algebra::evaluation::Point;
use mainspring::algebra::monomial::Var;
use mainspring::conditions::{Condition, slice};
use mainspring::render::figure::{Mark, figure};
use mainspring::vetting::Vetting;

use super::arguments::Figure;
use super::output;
use super::status::Status;

/// The nodes along an axis.
const NODES: usize = 161;

/// Draws the region of curvature and writes it.
///
/// # Errors
/// A message with the status that it calls for.
pub fn draw(vetting: &Vetting, asked: &Figure) -> Result<(), (String, Status)> {
    let Some(file) = &asked.figure else { return Ok(()) };
    let model = &vetting.model;
    let axes = axes(vetting, &asked.axes).map_err(|message| (message, Status::Usage))?;
    let cannot = |why: &str| (format!("{}: not drawn: {why}", file.display()), Status::Undecided);
    let through = through(vetting).ok_or_else(|| cannot("there is no admissible point"))?;
    let slice = slice::slice(model, axes, &through, NODES)
        .ok_or_else(|| cannot("the model has no demands that can be drawn over these variables"))?;
    let points = slice.exact_points(model);
    let marks: Vec<Mark<'_>> = points.iter().map(|(point, holds)| Mark { point, holds: *holds }).collect();
    output::replace(file, &figure(model, &slice, &marks)).map_err(|message| (message, Status::Unwritable))
}

/// The variables of the axes: those that are named, else the first two prices, else the first price and income.
fn axes(vetting: &Vetting, named: &[String]) -> Result<[Var; 2], String> {
    let model = &vetting.model;
    let movers: Vec<Var> = model.prices.iter().copied().chain(model.income).collect();
    let quantities = model.quantities.iter().flatten().copied().filter(|_| model.demands.is_empty());
    let free = model.parameters.iter().filter(|p| p.eliminated.is_none()).map(|p| p.var);
    let known: Vec<Var> = movers.into_iter().chain(quantities).chain(free).collect();
    let variable = |name: &String| {
        let found = known.iter().find(|v| model.field.name(**v).as_ref() == Some(name)).copied();
        found.ok_or_else(|| format!("--axes names `{name}`, which is no price, income or free parameter of the model"))
    };
    match named {
        [] => match known.as_slice() {
            [first, second, ..] => Ok([*first, *second]),
            _ => Err("a figure needs two variables".to_string()),
        },
        [first, second] if first != second => Ok([variable(first)?, variable(second)?]),
        _ => Err("--axes takes two different variables".to_string()),
    }
}

/// The point whose values stay: where the condition is known to hold, else where it is known to fail, else any.
fn through(vetting: &Vetting) -> Option<Point> {
    let finding = vetting.finding(Condition::Curvature);
    let regular = finding.and_then(|f| f.regular_point.clone());
    regular.or_else(|| finding.and_then(|f| Some(f.witness.as_ref()?.point.clone()))).or_else(|| {
        let quantities: Vec<_> = vetting.model.demands.iter().map(|demand| demand.quantity.clone()).collect();
        vetting.model.points().with_positive(&quantities).next()
    })
}
