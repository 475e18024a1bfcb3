//! From one model to its report.

use std::io::IsTerminal;
use std::rc::Rc;
use std::time::{Duration, Instant};

use mainspring::algebra::number::Rational;
use mainspring::conditions::{Condition, Verdict};
use mainspring::language::Source;
use mainspring::render::document::Document;
use mainspring::render::{html, json, json_restrictions, latex, report, text};
use mainspring::restrictions::{Request, Restrictions};
use mainspring::vetting::appendix::Appendix;
use mainspring::vetting::{Allowance, Part, Vetting};
use mainspring::{Unread, read, restrict, vet};

use super::arguments::{self, Accepted, Command, Form, Options};
use super::input::Input;
use super::status::Status;

/// A report, ready to be written.
pub enum Report {
    /// Text or LaTeX.
    Text(String),
    /// A JSON value.
    Json(serde_json::Value),
}

impl Report {
    /// The report as the text of a file.
    pub fn into_text(self) -> String {
        match self {
            Report::Text(text) => text,
            Report::Json(value) => format!("{value:#}\n"),
        }
    }
}

/// How files of a form end.
pub fn extension(form: Form) -> &'static str {
    match form {
        Form::Text => "txt",
        Form::Latex => "tex",
        Form::Html => "html",
        Form::Json => "json",
    }
}

/// Reads a model, works it, and makes its report; messages go to standard error.
pub fn report(command: &Command, input: &Input, values: &[(String, Rational)]) -> (Option<Report>, Status) {
    let options = super::options(command);
    let mut clock = Clock::new(options.timings, input.name());
    let source = match input.source() {
        Ok(source) => source,
        Err(fault) => {
            eprintln!("{fault}");
            return (None, Status::Unreadable);
        }
    };
    let allowance = allowance(options);
    let model = match read(&source, values, allowance) {
        Ok(model) => Rc::new(model),
        Err(unread) => return (None, refused(&source, unread)),
    };
    clock.lap("read");
    model.warnings.iter().for_each(|warning| eprintln!("{}", warning.render(&source)));
    if let Command::Restrict(options) = command {
        let found = restrict(model, &request(command), allowance);
        clock.lap("restrictions");
        let report = match options.form {
            Form::Json => Report::Json(json_restrictions::restrictions(&found)),
            _ => in_form(command, options, input, &source, &report::restrictions(&found)),
        };
        return (Some(report), restricted(&found, &options.accept));
    }
    let vetting = vet(model, &asked(command), allowance);
    for (part, time) in &vetting.timings {
        clock.tell(part.word(), *time);
    }
    clock.start = Instant::now();
    let status = judged(&vetting, &options.accept);
    let report = written(command, options, input, &source, &vetting);
    clock.lap("output");
    (Some(report), status)
}

fn refused(source: &Source, unread: Unread) -> Status {
    match unread {
        Unread::Mistakes(mistakes) => {
            mistakes.iter().for_each(|mistake| eprintln!("{}", mistake.render(source)));
            Status::Unreadable
        }
        Unread::Stopped(stopped) => {
            eprintln!("{}: {} while the model was read", source.name, stopped.describe());
            Status::Undecided
        }
    }
}

fn allowance(options: &Options) -> Allowance {
    Allowance { time: Duration::from_secs(options.time), memory_mib: options.memory, ..Allowance::default() }
}

fn asked(command: &Command) -> Vec<Part> {
    let options = super::options(command);
    if options.only.is_empty() {
        return Part::ALL.to_vec();
    }
    Part::ALL.into_iter().filter(|part| options.only.iter().any(|only| named(*only) == *part)).collect()
}

/// The conditions that are to hold together.
fn request(command: &Command) -> Request {
    let condition = |part: &Part| match part {
        Part::Condition(condition) => Some(*condition),
        Part::Recovery | Part::Claims => None,
    };
    Request { only: asked(command).iter().filter_map(condition).collect(), kept: Vec::new() }
}

/// The status that a list of branches calls for.
fn restricted(found: &Restrictions, accept: &[Accepted]) -> Status {
    match (found.unrestricted(), found.complete) {
        (true, _) => Status::Passed,
        (false, true) if accept.contains(&Accepted::Conditional) && !found.branches.is_empty() => Status::Passed,
        (false, true) => Status::Refuted,
        (false, false) if accept.contains(&Accepted::Undecided) => Status::Passed,
        (false, false) => Status::Undecided,
    }
}

fn named(part: arguments::Part) -> Part {
    match part {
        arguments::Part::Homogeneity => Part::Condition(Condition::Homogeneity),
        arguments::Part::AddingUp => Part::Condition(Condition::AddingUp),
        arguments::Part::Symmetry => Part::Condition(Condition::Symmetry),
        arguments::Part::Curvature => Part::Condition(Condition::Curvature),
        arguments::Part::Recovery => Part::Recovery,
        arguments::Part::Claims => Part::Claims,
    }
}

/// The status that the verdicts of one model call for.
fn judged(vetting: &Vetting, accept: &[Accepted]) -> Status {
    let of = |verdict: Verdict| match verdict {
        Verdict::Proven => Status::Passed,
        Verdict::Conditional if accept.contains(&Accepted::Conditional) => Status::Passed,
        Verdict::Regional if accept.contains(&Accepted::Regional) => Status::Passed,
        Verdict::Undecided if accept.contains(&Accepted::Undecided) => Status::Passed,
        Verdict::Undecided => Status::Undecided,
        Verdict::Refuted | Verdict::Conditional | Verdict::Regional => Status::Refuted,
    };
    vetting.verdicts().map(of).fold(Status::Passed, Status::and)
}

fn written(command: &Command, options: &Options, input: &Input, source: &Source, vetting: &Vetting) -> Report {
    if options.form == Form::Json {
        return Report::Json(json::vetting(vetting, matches!(command, Command::Derive(_))));
    }
    let document = match command {
        Command::Derive(_) => report::derivation(vetting, &Appendix::of(vetting, allowance(options))),
        Command::Vet(_) | Command::Restrict(_) => report::answer(vetting),
    };
    in_form(command, options, input, source, &document)
}

/// A document in the form that is asked for.
fn in_form(command: &Command, options: &Options, input: &Input, source: &Source, document: &Document) -> Report {
    Report::Text(match (options.form, options.document) {
        (Form::Latex, true) => latex::whole(document, &header(command, input, source)),
        (Form::Latex, false) => latex::fragment(document, &header(command, input, source)),
        (Form::Html, _) => html::page(document),
        _ => text::text(document, text::Layout { colour: options.out.is_none() && colour(), ..Default::default() }),
    })
}

/// Where the file comes from: program, command, input; no date and no path.
fn header(command: &Command, input: &Input, source: &Source) -> Vec<String> {
    let word = match command {
        Command::Vet(_) => "vet",
        Command::Derive(_) => "derive",
        Command::Restrict(_) => "restrict",
    };
    let version = env!("CARGO_PKG_VERSION");
    let made = format!("mainspring {version}: mainspring {word} {}.demand --as latex", input.stem());
    vec![made, format!("input: {} bytes, FNV-1a {:016x}", source.text.len(), fnv(source.text.as_bytes()))]
}

/// The 64-bit FNV-1a hash.
fn fnv(bytes: &[u8]) -> u64 {
    bytes.iter().fold(0xcbf2_9ce4_8422_2325, |hash, byte| (hash ^ u64::from(*byte)).wrapping_mul(0x0100_0000_01b3))
}

fn colour() -> bool {
    let refused = std::env::var_os("NO_COLOR").is_some_and(|value| !value.is_empty());
    let dumb = std::env::var_os("TERM").is_some_and(|value| value == "dumb");
    !refused && !dumb && std::io::stdout().is_terminal()
}

/// Tells how long the parts took, where that is asked for.
struct Clock {
    wanted: bool,
    name: String,
    start: Instant,
}

impl Clock {
    fn new(wanted: bool, name: String) -> Clock {
        Clock { wanted, name, start: Instant::now() }
    }

    fn lap(&mut self, part: &str) {
        self.tell(part, self.start.elapsed());
        self.start = Instant::now();
    }

    fn tell(&self, part: &str, time: Duration) {
        if self.wanted {
            eprintln!("{}: {part}: {:.3} ms", self.name, time.as_secs_f64() * 1e3);
        }
    }
}
