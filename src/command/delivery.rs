//! Takes reports to where they are wanted, and keeps count.

use std::collections::BTreeMap;
use std::path::PathBuf;

use super::arguments::{Form, Options};
use super::input::{Input, Inputs};
use super::output;
use super::reports::{Outcome, Report, extension};
use super::status::{Status, written};

/// Takes the outcomes of models, in their order.
pub struct Delivery<'a> {
    options: &'a Options,
    single: bool,
    printed: usize,
    collected: Vec<serde_json::Value>,
    count: BTreeMap<Status, usize>,
    worst: Status,
}

impl<'a> Delivery<'a> {
    /// For the models that are named; makes the folder that reports are wanted in.
    ///
    /// # Errors
    /// A message where two reports would have one name, or the folder cannot be made.
    pub fn new(options: &'a Options, inputs: &Inputs) -> Result<Delivery<'a>, String> {
        let delivery = Delivery {
            options,
            single: inputs.single,
            printed: 0,
            collected: Vec::new(),
            count: BTreeMap::new(),
            worst: Status::Passed,
        };
        let place = options.out.as_ref().or(options.check.as_ref());
        let Some(folder) = place.filter(|_| !inputs.single) else { return Ok(delivery) };
        let mut stems: Vec<String> = inputs.models.iter().map(Input::stem).collect();
        stems.sort();
        if let Some(pair) = stems.windows(2).find(|pair| pair[0] == pair[1]) {
            return Err(format!("{}: two of the models are called {}", folder.display(), pair[0]));
        }
        if options.check.is_none() {
            std::fs::create_dir_all(folder).map_err(|e| format!("{}: cannot be made: {e}", folder.display()))?;
        }
        Ok(delivery)
    }

    /// Takes what became of one model.
    pub fn deliver(&mut self, model: &Input, outcome: Outcome) {
        outcome.messages.iter().for_each(|message| eprintln!("{message}"));
        let delivered = outcome.report.map_or(Status::Passed, |report| self.place(&model.stem(), report));
        let status = outcome.status.and(delivered);
        *self.count.entry(status).or_default() += 1;
        self.worst = self.worst.and(status);
    }

    fn place(&mut self, stem: &str, report: Report) -> Status {
        let path = |place: &PathBuf| match self.single {
            true => place.clone(),
            false => place.join(format!("{stem}.{}", extension(self.options.form))),
        };
        if let Some(known) = &self.options.check {
            return compared(&path(known), &report.into_text());
        }
        match (self.options.out.as_ref().map(path), report) {
            (Some(path), report) => written(output::replace(&path, &report.into_text())),
            (None, Report::Text(text)) => self.print(&text),
            (None, Report::Json(value)) => {
                self.collected.push(value);
                Status::Passed
            }
        }
    }

    /// Reports on the terminal stand apart by an empty line.
    fn print(&mut self, text: &str) -> Status {
        let gap = if self.printed > 0 { "\n" } else { "" };
        self.printed += 1;
        written(output::print(&format!("{gap}{text}")))
    }

    /// The status of the whole run, after what remains to be printed; several models end with a line that counts them.
    pub fn finish(mut self) -> Status {
        let printed = self.print_collected();
        if !self.single {
            eprintln!("{}", self.summary());
        }
        self.worst.and(printed)
    }

    fn print_collected(&mut self) -> Status {
        if self.options.form != Form::Json || self.options.out.is_some() || self.options.check.is_some() {
            return Status::Passed;
        }
        let mut collected = std::mem::take(&mut self.collected);
        let whole = match (self.single, collected.pop()) {
            (true, None) => return Status::Passed,
            (true, Some(only)) => only,
            (false, last) => serde_json::Value::Array(collected.into_iter().chain(last).collect()),
        };
        self.print(&Report::Json(whole).into_text())
    }

    fn summary(&self) -> String {
        let models: usize = self.count.values().sum();
        let plural = if models == 1 { "" } else { "s" };
        let parts: Vec<String> =
            self.count.iter().rev().map(|(status, count)| format!("{count} {}", status.of_a_model())).collect();
        format!("{models} model{plural}: {}", parts.join(", "))
    }
}

fn compared(path: &std::path::Path, text: &str) -> Status {
    if output::same(path, text) {
        return Status::Passed;
    }
    eprintln!("{}: is not what the model gives now", path.display());
    Status::Differs
}
