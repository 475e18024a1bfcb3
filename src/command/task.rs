//! What is done with each model.

use std::sync::Arc;
use std::thread::available_parallelism;
use std::time::Duration;

use super::arguments::{Figure, Options};
use super::delivery::Delivery;
use super::reports;
use super::schedule::Schedule;
use super::status::Status;
use super::values::Line;
use super::{input, values};

/// The kinds of work.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Kind {
    /// Verdicts and preferences.
    Vet,
    /// The derivation.
    Derive,
    /// Branches of parameter restrictions.
    Restrict,
}

impl Kind {
    /// The command's word.
    pub fn word(self) -> &'static str {
        match self {
            Kind::Vet => "vet",
            Kind::Derive => "derive",
            Kind::Restrict => "restrict",
        }
    }
}

/// A kind of work, with its options.
#[derive(Clone, Debug)]
pub struct Task {
    /// The kind.
    pub kind: Kind,
    /// The options.
    pub options: Options,
    /// For restrictions: the parameters, or families of them, that must stay free.
    pub keep: Vec<String>,
    /// For verdicts: the price path along which expenditure is followed.
    pub along: Option<Line>,
    /// The picture that is to be drawn.
    pub figure: Figure,
}

impl Task {
    /// A task without parameters that must stay free.
    pub fn new(kind: Kind, options: Options) -> Task {
        Task { kind, options, keep: Vec::new(), along: None, figure: Figure::default() }
    }

    /// Works all models: reports go where they are wanted, messages to standard error.
    pub fn run(self) -> Status {
        let values = match values::read(&self.options.values) {
            Ok(values) => values,
            Err(fault) => return failed(&[fault], Status::Usage),
        };
        let inputs = match input::expand(&self.options.models) {
            Ok(inputs) if inputs.models.len() > 1 && self.figure.figure.is_some() => {
                return failed(&["--figure is for one model at a time".to_string()], Status::Usage);
            }
            Ok(inputs) => inputs,
            Err(faults) => return failed(&faults, Status::Unreadable),
        };
        let options = self.options.clone();
        let mut delivery = match Delivery::new(&options, &inputs) {
            Ok(delivery) => delivery,
            Err(fault) => return failed(&[fault], Status::Unwritable),
        };
        let work = Arc::new(move |model: &input::Input| reports::report(&self, model, &values));
        Schedule::new(inputs.models, patience(&options), work)
            .run(threads(&options), |model, outcome| delivery.deliver(model, outcome));
        delivery.finish()
    }
}

fn patience(options: &Options) -> Duration {
    Duration::from_secs(options.time.saturating_mul(3).saturating_add(30))
}

fn threads(options: &Options) -> usize {
    options.jobs.map_or_else(|| available_parallelism().map_or(1, usize::from), usize::from)
}

fn failed(faults: &[String], status: Status) -> Status {
    faults.iter().for_each(|fault| eprintln!("{fault}"));
    status
}
