//! From the command line to an exit status: models in, reports out, messages to standard error.

mod arguments;
mod input;
mod internal;
mod output;
mod reports;
mod status;
mod values;

use std::process::ExitCode;
use std::sync::mpsc;
use std::thread::JoinHandle;
use std::time::Duration;

use clap::Parser;

use arguments::{Arguments, Command, Options};
use reports::Report;
use status::Status;

/// The stack of the thread that computes, in bytes. Only what is touched is taken from memory.
const STACK: usize = 1 << 29;

/// Runs the program.
pub fn main() -> ExitCode {
    let arguments = Arguments::parse();
    internal::silence();
    let patience = patience(options(&arguments.command));
    let (tell, told) = mpsc::channel();
    let worker = std::thread::Builder::new().stack_size(STACK).spawn(move || run(&arguments.command, &tell));
    let status = match worker {
        Ok(worker) => wait(worker, &told, patience),
        Err(error) => {
            eprintln!("mainspring: no thread could be started: {error}");
            Status::Internal
        }
    };
    ExitCode::from(status.code())
}

fn options(command: &Command) -> &Options {
    let (Command::Vet(options) | Command::Derive(options) | Command::Restrict(options)) = command;
    options
}

/// How long one model may stay silent: a step that does not look at the clock must not keep the program forever.
fn patience(options: &Options) -> Duration {
    Duration::from_secs(3 * options.time + 30)
}

/// Waits for the worker, which tells of each model that it begins and of its end.
fn wait(worker: JoinHandle<Status>, told: &mpsc::Receiver<String>, patience: Duration) -> Status {
    let mut current = String::new();
    loop {
        match told.recv_timeout(patience) {
            Ok(name) => current = name,
            Err(mpsc::RecvTimeoutError::Disconnected) => {
                return worker.join().unwrap_or_else(|_| internal::report("mainspring"));
            }
            Err(mpsc::RecvTimeoutError::Timeout) => {
                eprintln!("{current}: the time limit was reached in the middle of a step; no result is given");
                return Status::Undecided;
            }
        }
    }
}

fn run(command: &Command, tell: &mpsc::Sender<String>) -> Status {
    let options = options(command);
    let values = match values::read(&options.values) {
        Ok(values) => values,
        Err(fault) => return failed(&[fault], Status::Usage),
    };
    let inputs = match input::expand(&options.models) {
        Ok(inputs) => inputs,
        Err(faults) => return failed(&faults, Status::Unreadable),
    };
    let mut delivery = match Delivery::new(options, &inputs) {
        Ok(delivery) => delivery,
        Err(fault) => return failed(&[fault], Status::Unwritable),
    };
    let mut worst = Status::Passed;
    for model in &inputs.models {
        // the receiver is there as long as the program is
        let _ = tell.send(model.name());
        let (report, status) = internal::guarded(&model.name(), || reports::report(command, model, &values));
        worst = worst.and(status);
        if let Some(report) = report {
            worst = worst.and(delivery.deliver(&model.stem(), report));
        }
    }
    worst.and(delivery.finish())
}

fn failed(faults: &[String], status: Status) -> Status {
    faults.iter().for_each(|fault| eprintln!("{fault}"));
    status
}

/// Takes reports to where they are wanted.
struct Delivery<'a> {
    options: &'a Options,
    single: bool,
    printed: usize,
    collected: Vec<serde_json::Value>,
}

impl<'a> Delivery<'a> {
    fn new(options: &'a Options, inputs: &input::Inputs) -> Result<Delivery<'a>, String> {
        let delivery = Delivery { options, single: inputs.single, printed: 0, collected: Vec::new() };
        let Some(folder) = options.out.as_ref().filter(|_| !inputs.single) else { return Ok(delivery) };
        let mut stems: Vec<String> = inputs.models.iter().map(input::Input::stem).collect();
        stems.sort();
        if let Some(pair) = stems.windows(2).find(|pair| pair[0] == pair[1]) {
            return Err(format!("{}: two of the models are called {}", folder.display(), pair[0]));
        }
        if !options.check {
            std::fs::create_dir_all(folder).map_err(|e| format!("{}: cannot be made: {e}", folder.display()))?;
        }
        Ok(delivery)
    }

    fn deliver(&mut self, stem: &str, report: Report) -> Status {
        let Some(out) = &self.options.out else {
            return match report {
                Report::Json(value) => {
                    self.collected.push(value);
                    Status::Passed
                }
                Report::Text(text) => self.print(&text),
            };
        };
        let path = match self.single {
            true => out.clone(),
            false => out.join(format!("{stem}.{}", reports::extension(self.options.form))),
        };
        let text = report.into_text();
        if !self.options.check {
            return told(output::replace(&path, &text));
        }
        if output::same(&path, &text) {
            return Status::Passed;
        }
        eprintln!("{}: is not what the model gives now", path.display());
        Status::Differs
    }

    /// Reports on the terminal stand apart by an empty line.
    fn print(&mut self, text: &str) -> Status {
        let gap = if self.printed > 0 { "\n" } else { "" };
        self.printed += 1;
        told(output::print(&format!("{gap}{text}")))
    }

    fn finish(&mut self) -> Status {
        if self.options.form != arguments::Form::Json || self.options.out.is_some() {
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
}

fn told(written: Result<(), String>) -> Status {
    match written {
        Ok(()) => Status::Passed,
        Err(fault) => {
            if !fault.is_empty() {
                eprintln!("{fault}");
            }
            Status::Unwritable
        }
    }
}
