//! From the command line to an exit status: models in, reports out, messages to standard error.

mod along;
mod arguments;
mod delivery;
mod figure;
mod input;
mod internal;
mod output;
mod reports;
mod schedule;
mod starting;
mod status;
mod task;
mod values;
mod watch;

use std::process::ExitCode;

use clap::{CommandFactory, Parser};

use arguments::{Arguments, Command, New};
use status::{Status, written};
use task::{Kind, Task};

/// Runs the program.
pub fn main() -> ExitCode {
    let arguments = Arguments::parse();
    internal::silence();
    let status = match arguments.command {
        Command::Vet(vet) if vet.watch => watch::watch(&vet.options),
        Command::Vet(vet) => Task { along: vet.along, figure: vet.figure, ..Task::new(Kind::Vet, vet.options) }.run(),
        Command::Derive(options) => Task::new(Kind::Derive, options).run(),
        Command::Restrict(restrict) => {
            Task { keep: restrict.keep, ..Task::new(Kind::Restrict, restrict.options) }.run()
        }
        Command::New(new) => begun(&new),
        Command::Completions { shell } => completions(shell),
        Command::Manual { command } => manual(command.as_deref()),
    };
    ExitCode::from(status.code())
}

/// Writes a model file to start from.
fn begun(new: &New) -> Status {
    let text = starting::model_file(&new.goods, new.shape);
    written(match &new.out {
        Some(path) => output::create(path, &text),
        None => output::print(&text),
    })
}

fn completions(shell: clap_complete::Shell) -> Status {
    let mut script = Vec::new();
    clap_complete::generate(shell, &mut Arguments::command(), "mainspring", &mut script);
    written(output::print(&String::from_utf8_lossy(&script)))
}

/// The page of a command, or of the program.
fn manual(command: Option<&str>) -> Status {
    let mut whole = Arguments::command();
    whole.build();
    let about = match command {
        Some(name) => whole.find_subcommand(name).cloned(),
        None => Some(whole),
    };
    let Some(about) = about else {
        eprintln!("mainspring manual: there is no command `{}`", command.unwrap_or_default());
        return Status::Usage;
    };
    let mut page = Vec::new();
    let rendered = clap_mangen::Man::new(about).render(&mut page);
    written(rendered.map_err(|e| e.to_string()).and_then(|()| output::print(&String::from_utf8_lossy(&page))))
}
