//! `--along`: from names and values to a price path of the model.

use mainspring::model::Model;
use mainspring::vetting::{Allowance, Vetting};
use mainspring::welfare::Path;

use super::status::Status;
use super::values::Line;

/// Digits of income to which expenditure is enclosed.
const DIGITS: u32 = 9;

/// Follows expenditure along the line and keeps it for the report; or why not, and what that means for the exit status.
pub fn follow(vetting: &mut Vetting, line: &Line, allowance: Allowance) -> Result<(), (String, Status)> {
    let path = path(&vetting.model, line).map_err(|fault| (fault, Status::Usage))?;
    vetting.follow(&path, DIGITS, allowance).map_err(|reason| (reason.describe(), Status::Undecided))
}

fn path(model: &Model, line: &Line) -> Result<Path, String> {
    let (mut prices, mut income) = (Vec::new(), None);
    for (name, from, to) in &line.0 {
        let called = |v: &&_| model.field.name(**v).as_ref() == Some(name);
        let moving = model.prices.iter().find(called);
        let fixed = model.coverage.prices().iter().chain(&model.income).find(called);
        match (moving, fixed) {
            (None, None) => {
                return Err(format!("`{name}` is neither a price nor income; parameters are given by --with"));
            }
            (None, Some(_)) if from != to => {
                return Err(format!("`{name}` cannot move: only prices of the goods written down do"));
            }
            (None, Some(v)) if Some(*v) == model.income => income = Some(from.clone()),
            (Some(v), _) | (None, Some(v)) => prices.push((*v, from.clone(), to.clone())),
        }
    }
    let income = income.ok_or("income has no value: add it, like m=100")?;
    Ok(Path { prices, income })
}
