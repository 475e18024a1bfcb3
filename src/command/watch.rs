//! Vets again whenever a model is saved.
//!
//! Each round is a process of its own, so that a save in the middle of a long computation ends it at once.

use std::ffi::OsString;
use std::io::{IsTerminal, Read};
use std::path::PathBuf;
use std::process::{Child, Command, Stdio};
use std::thread::{JoinHandle, sleep};
use std::time::{Duration, SystemTime};

use super::arguments::Options;
use super::status::{Status, written};
use super::{input, output, reports};

const PAUSE: Duration = Duration::from_millis(60);

/// What can be seen of a model without reading it; none where there is no file, as while an editor replaces it.
type Stamp = (PathBuf, Option<(u64, SystemTime)>);

/// Vets until the program is ended, or nobody reads what it writes.
pub fn watch(options: &Options) -> Status {
    if options.models.iter().any(|path| path.as_os_str() == "-") {
        eprintln!("--watch: standard input cannot be watched; name a file or a folder");
        return Status::Usage;
    }
    loop {
        let stamps = settled(options);
        match round(options, &stamps) {
            Ok(Some(screen)) => {
                if screen.show(options) != Status::Passed {
                    return Status::Unwritable;
                }
                while self::stamps(options) == stamps {
                    sleep(PAUSE);
                }
            }
            // saved in the meantime
            Ok(None) => {}
            Err(error) => {
                eprintln!("mainspring: the program could not be started again: {error}");
                return Status::Internal;
            }
        }
    }
}

/// The models as they are when nothing has changed for a moment.
fn settled(options: &Options) -> Vec<Stamp> {
    let mut before = stamps(options);
    loop {
        sleep(PAUSE);
        let now = stamps(options);
        if now == before {
            return now;
        }
        before = now;
    }
}

fn stamps(options: &Options) -> Vec<Stamp> {
    let models = input::expand(&options.models).map_or_else(|_| Vec::new(), |inputs| inputs.models);
    let paths = models.into_iter().filter_map(|model| match model {
        input::Input::File(path) => Some(path),
        input::Input::Standard => None,
    });
    let stamp = |path: PathBuf| {
        let seen = std::fs::metadata(&path).and_then(|data| Ok((data.len(), data.modified()?)));
        (path, seen.ok())
    };
    paths.map(stamp).collect()
}

/// One run of `vet`; nothing, where a model was saved before it ended.
fn round(options: &Options, stamps: &[Stamp]) -> std::io::Result<Option<Screen>> {
    let mut child = vet(options)?;
    let (results, messages) = (reader(child.stdout.take()), reader(child.stderr.take()));
    while child.try_wait()?.is_none() {
        if self::stamps(options) != stamps {
            child.kill()?;
            child.wait()?;
            return Ok(None);
        }
        sleep(PAUSE / 4);
    }
    let text = |reader: JoinHandle<String>| reader.join().unwrap_or_default();
    Ok(Some(Screen { results: text(results), messages: text(messages) }))
}

fn vet(options: &Options) -> std::io::Result<Child> {
    let program = std::env::current_exe()?;
    let mut arguments: Vec<OsString> = std::env::args_os().skip(1).filter(|word| word != "--watch").collect();
    if reports::colour(options) {
        arguments.push("--colour=always".into());
    }
    Command::new(program).args(arguments).stdin(Stdio::null()).stdout(Stdio::piped()).stderr(Stdio::piped()).spawn()
}

fn reader(pipe: Option<impl Read + Send + 'static>) -> JoinHandle<String> {
    std::thread::spawn(move || {
        let mut bytes = Vec::new();
        if let Some(mut pipe) = pipe {
            // what was read until a fault is shown
            let _ = pipe.read_to_end(&mut bytes);
        }
        String::from_utf8_lossy(&bytes).into_owned()
    })
}

/// What one round has to say.
struct Screen {
    results: String,
    messages: String,
}

impl Screen {
    /// On a terminal in place of what stood there, in one piece; elsewhere one after the other.
    fn show(&self, options: &Options) -> Status {
        if !std::io::stdout().is_terminal() {
            eprint!("{}", self.messages);
            return written(output::print(&self.results));
        }
        let names: Vec<String> = options.models.iter().map(|path| path.display().to_string()).collect();
        let gap = if self.messages.is_empty() { "" } else { "\n" };
        let foot = format!("Vetted again when {} is saved; Ctrl-C ends it.", names.join(" or "));
        written(output::print(&format!("\x1b[H\x1b[J{}{gap}{}\n{foot}\n", self.messages, self.results)))
    }
}
