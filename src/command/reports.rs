//! From one model to its report.

use std::io::IsTerminal;
use std::rc::Rc;
use std::time::{Duration, Instant};

use mainspring::algebra::monomial::Var;
use mainspring::algebra::number::Rational;
use mainspring::conditions::{Condition, Verdict};
use mainspring::language::Source;
use mainspring::model::Model;
use mainspring::render::document::Document;
use mainspring::render::latex_setting::{Setting, Vectors};
use mainspring::render::{html, json, json_restrictions, latex, report, text};
use mainspring::restrictions::{Request, Restrictions};
use mainspring::vetting::appendix::Appendix;
use mainspring::vetting::{Allowance, Part, Vetting};
use mainspring::{Unread, read, restrict, vet};

use super::along;
use super::arguments::{self, Accepted, Colour, Form, Options};
use super::figure;
use super::input::Input;
use super::status::Status;
use super::task::{Kind, Task};

/// A report, ready to be written.
pub enum Report {
    /// Text or LaTeX.
    Text(String),
    /// A JSON value.
    Json(serde_json::Value),
}

/// What became of one model.
pub struct Outcome {
    /// The report, where there is one.
    pub report: Option<Report>,
    /// What is said on standard error, line by line.
    pub messages: Vec<String>,
    /// What it means for the exit status.
    pub status: Status,
}

impl Outcome {
    /// A message in place of a report.
    pub fn without_report(message: &str, status: Status) -> Outcome {
        Outcome { report: None, messages: vec![message.to_string()], status }
    }
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

/// Reads a model, works it, and makes its report.
pub fn report(task: &Task, input: &Input, values: &[(String, Rational)]) -> Outcome {
    let options = &task.options;
    let mut clock = Clock::new(options.timings, input.name());
    let source = match input.source() {
        Ok(source) => source,
        Err(fault) => return Outcome::without_report(&fault, Status::Unreadable),
    };
    let model = match read(&source, values, allowance(options)) {
        Ok(model) => Rc::new(model),
        Err(unread) => return refused(&source, unread),
    };
    clock.lap("read");
    let mut messages: Vec<String> = model.warnings.iter().map(|warning| warning.render(&source)).collect();
    let (report, status) = match task.kind {
        Kind::Restrict => match kept(&model, &task.keep) {
            Ok(kept) => branches(task, input, &source, model, kept, &mut clock),
            Err(unknown) => {
                let message = format!("{}: --keep names `{unknown}`, which is no parameter of the model", source.name);
                return Outcome::without_report(&message, Status::Usage);
            }
        },
        Kind::Vet | Kind::Derive => verdicts(task, input, &source, model, &mut clock, &mut messages),
    };
    messages.append(&mut clock.told);
    Outcome { report: Some(report), messages, status }
}

/// The report of `restrict`.
fn branches(
    task: &Task,
    input: &Input,
    source: &Source,
    model: Rc<Model>,
    kept: Vec<Var>,
    clock: &mut Clock,
) -> (Report, Status) {
    let options = &task.options;
    let found = restrict(model, &Request { only: wanted(task), kept }, allowance(options));
    clock.lap("restrictions");
    let report = match options.form {
        Form::Json => Report::Json(json_restrictions::restrictions(&found)),
        _ => in_form(task, input, source, &report::restrictions(&found)),
    };
    (report, restricted(&found, &options.accept))
}

/// The reports of `vet` and `derive`.
fn verdicts(
    task: &Task,
    input: &Input,
    source: &Source,
    model: Rc<Model>,
    clock: &mut Clock,
    messages: &mut Vec<String>,
) -> (Report, Status) {
    let options = &task.options;
    let mut vetting = vet(model, &asked(task), allowance(options));
    for (part, time) in &vetting.timings {
        clock.tell(part.word(), *time);
    }
    clock.start = Instant::now();
    let mut status = judged(&vetting, &options.accept);
    let mut told = |(message, fault): (String, Status)| {
        messages.push(message);
        status = status.and(fault);
    };
    if let Some(line) = &task.along {
        let followed = along::follow(&mut vetting, line, allowance(options));
        followed.unwrap_or_else(|(fault, grave)| told((format!("{}: --along: {fault}", input.name()), grave)));
    }
    figure::draw(&vetting, &task.figure).unwrap_or_else(told);
    let report = written(task, input, source, &vetting);
    clock.lap("output");
    (report, status)
}

fn refused(source: &Source, unread: Unread) -> Outcome {
    match unread {
        Unread::Mistakes(mistakes) => {
            let messages = mistakes.iter().map(|mistake| mistake.render(source)).collect();
            Outcome { report: None, messages, status: Status::Unreadable }
        }
        Unread::Stopped(stopped) => {
            let message = format!("{}: {} while the model was read", source.name, stopped.describe());
            Outcome::without_report(&message, Status::Undecided)
        }
    }
}

fn allowance(options: &Options) -> Allowance {
    Allowance { time: Duration::from_secs(options.time), memory_mib: options.memory, ..Allowance::default() }
}

/// The parts of the work that are asked for; where none is named, all that the report has room for.
fn asked(task: &Task) -> Vec<Part> {
    let options = &task.options;
    let short = task.kind == Kind::Vet && options.form != Form::Json;
    if options.only.is_empty() {
        return Part::ALL.into_iter().filter(|part| !short || *part != Part::Responses).collect();
    }
    Part::ALL.into_iter().filter(|part| options.only.iter().any(|only| named(*only) == *part)).collect()
}

/// The conditions that are to hold together. Curvature, which is no equation, is among them where it is named.
fn wanted(task: &Task) -> Vec<Condition> {
    let named_or_equation = |part: &Part| match part {
        Part::Condition(Condition::Curvature) if task.options.only.is_empty() => None,
        Part::Condition(condition) => Some(*condition),
        Part::Recovery | Part::Claims | Part::Structure | Part::Responses => None,
    };
    asked(task).iter().filter_map(named_or_equation).collect()
}

/// The parameters that names stand for, a family for all its members; or the first name that is none.
fn kept(model: &Model, names: &[String]) -> Result<Vec<Var>, String> {
    let mut kept = Vec::new();
    for name in names.iter().flat_map(|list| separated(list)) {
        let head = |full: &str| full.split_once('[').is_some_and(|(head, _)| head == name);
        let known: Vec<Var> =
            model.parameters.iter().filter(|p| p.name == name || head(&p.name)).map(|p| p.var).collect();
        if known.is_empty() {
            return Err(name);
        }
        kept.extend(known);
    }
    Ok(kept)
}

/// The names of a list, at the commas outside brackets.
fn separated(list: &str) -> Vec<String> {
    let mut names = vec![String::new()];
    let mut depth = 0_usize;
    for letter in list.chars().filter(|c| !c.is_whitespace()) {
        depth = match letter {
            '[' => depth + 1,
            ']' => depth.saturating_sub(1),
            _ => depth,
        };
        match names.last_mut() {
            Some(name) if letter != ',' || depth > 0 => name.push(letter),
            _ => names.push(String::new()),
        }
    }
    names
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
        arguments::Part::Structure => Part::Structure,
        arguments::Part::Responses => Part::Responses,
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

fn written(task: &Task, input: &Input, source: &Source, vetting: &Vetting) -> Report {
    if task.options.form == Form::Json {
        return Report::Json(json::vetting(vetting, task.kind == Kind::Derive));
    }
    let document = match task.kind {
        Kind::Derive if task.options.setting.short => {
            report::short_derivation(vetting, &Appendix::of(vetting, allowance(&task.options)))
        }
        Kind::Derive => report::derivation(vetting, &Appendix::of(vetting, allowance(&task.options))),
        Kind::Vet | Kind::Restrict => report::answer(vetting),
    };
    let document = match (task.options.form, task.kind) {
        (Form::Html, Kind::Derive) => report::answer_first(vetting, document),
        _ => document,
    };
    in_form(task, input, source, &document)
}

/// A document in the form that is asked for.
fn in_form(task: &Task, input: &Input, source: &Source, document: &Document) -> Report {
    let options = &task.options;
    Report::Text(match (options.form, options.document) {
        (Form::Latex, true) => latex::whole(document, &header(task.kind, input, source), &setting(options)),
        (Form::Latex, false) => latex::fragment(document, &header(task.kind, input, source), &setting(options)),
        (Form::Html, _) => html::page(document),
        _ => text::text(document, text::Layout { colour: colour(options), ..Default::default() }),
    })
}

/// How LaTeX is set.
fn setting(options: &Options) -> Setting {
    let chosen = &options.setting;
    Setting {
        labels: chosen.labels.clone(),
        log: chosen.log,
        vectors: match chosen.vectors {
            arguments::Vectors::Plain => Vectors::Plain,
            arguments::Vectors::Bold => Vectors::Bold,
            arguments::Vectors::Arrow => Vectors::Arrow,
        },
        per_display: chosen.per_display.map(usize::from),
        theorems: chosen.theorems.clone(),
    }
}

/// Where the file comes from: program, command, input; no date and no path.
fn header(kind: Kind, input: &Input, source: &Source) -> Vec<String> {
    let (version, word) = (env!("CARGO_PKG_VERSION"), kind.word());
    let made = format!("mainspring {version}: mainspring {word} {}.demand --as latex", input.stem());
    vec![made, format!("input: {} bytes, FNV-1a {:016x}", source.text.len(), fnv(source.text.as_bytes()))]
}

/// The 64-bit FNV-1a hash.
fn fnv(bytes: &[u8]) -> u64 {
    bytes.iter().fold(0xcbf2_9ce4_8422_2325, |hash, byte| (hash ^ u64::from(*byte)).wrapping_mul(0x0100_0000_01b3))
}

/// Whether text is written in colour.
pub fn colour(options: &Options) -> bool {
    let refused = || std::env::var_os("NO_COLOR").is_some_and(|value| !value.is_empty());
    let dumb = || std::env::var_os("TERM").is_some_and(|value| value == "dumb");
    match options.colour {
        Colour::Always => true,
        Colour::Never => false,
        Colour::Auto => {
            options.out.is_none() && options.check.is_none() && std::io::stdout().is_terminal() && !refused() && !dumb()
        }
    }
}

/// Notes how long the parts took, where that is asked for.
struct Clock {
    wanted: bool,
    name: String,
    start: Instant,
    told: Vec<String>,
}

impl Clock {
    fn new(wanted: bool, name: String) -> Clock {
        Clock { wanted, name, start: Instant::now(), told: Vec::new() }
    }

    fn lap(&mut self, part: &str) {
        self.tell(part, self.start.elapsed());
        self.start = Instant::now();
    }

    fn tell(&mut self, part: &str, time: Duration) {
        if self.wanted {
            self.told.push(format!("{}: {part}: {:.3} ms", self.name, time.as_secs_f64() * 1e3));
        }
    }
}
