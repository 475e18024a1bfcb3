//! Which models are named, and their bytes.

use std::io::Read;
use std::path::{Path, PathBuf};

use mainspring::language::Source;

/// How many bytes of an input are taken in; the language refuses far shorter files with a message of its own.
const MOST_BYTES: u64 = 64 << 20;

/// One model that was named.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Input {
    /// A file.
    File(PathBuf),
    /// Standard input.
    Standard,
}

/// The models that the arguments stand for, and whether they were named as one.
pub struct Inputs {
    /// The models, folders expanded.
    pub models: Vec<Input>,
    /// A single file, or standard input, and no folder.
    pub single: bool,
}

/// Expands folders to the model files in them, sorted by name.
///
/// # Errors
/// A message for each folder that cannot be read or holds no model.
pub fn expand(named: &[PathBuf]) -> Result<Inputs, Vec<String>> {
    let (mut models, mut faults) = (Vec::new(), Vec::new());
    let mut folders = false;
    for path in named {
        if path.as_os_str() == "-" {
            models.push(Input::Standard);
        } else if path.is_dir() {
            folders = true;
            match models_in(path) {
                Ok(found) => models.extend(found.into_iter().map(Input::File)),
                Err(fault) => faults.push(fault),
            }
        } else {
            models.push(Input::File(path.clone()));
        }
    }
    let mut seen: Vec<&Input> = Vec::new();
    let repeated = models.iter().any(|model| {
        let known = seen.contains(&model);
        seen.push(model);
        known && *model == Input::Standard
    });
    if repeated {
        faults.push("-: standard input can be read only once".to_string());
    }
    if faults.is_empty() { Ok(Inputs { single: models.len() == 1 && !folders, models }) } else { Err(faults) }
}

fn models_in(folder: &Path) -> Result<Vec<PathBuf>, String> {
    let fault = |error: std::io::Error| format!("{}: cannot be read: {error}", folder.display());
    let mut found = Vec::new();
    for entry in std::fs::read_dir(folder).map_err(fault)? {
        let path = entry.map_err(fault)?.path();
        if path.extension().is_some_and(|extension| extension == "demand") && !path.is_dir() {
            found.push(path);
        }
    }
    found.sort();
    if found.is_empty() {
        return Err(format!("{}: there is no .demand file in this folder", folder.display()));
    }
    Ok(found)
}

impl Input {
    /// The name for messages.
    pub fn name(&self) -> String {
        match self {
            Input::File(path) => path.display().to_string(),
            Input::Standard => "-".to_string(),
        }
    }

    /// The name that output files are called by.
    pub fn stem(&self) -> String {
        let stem = match self {
            Input::File(path) => path.file_stem().map(|stem| stem.to_string_lossy().into_owned()),
            Input::Standard => None,
        };
        stem.unwrap_or_else(|| "model".to_string())
    }

    /// The model file.
    ///
    /// # Errors
    /// A message, where the bytes cannot be had.
    pub fn source(&self) -> Result<Source, String> {
        let mut bytes = Vec::new();
        let done = match self {
            Input::Standard => std::io::stdin().lock().take(MOST_BYTES).read_to_end(&mut bytes),
            Input::File(path) => {
                std::fs::File::open(path).and_then(|file| file.take(MOST_BYTES).read_to_end(&mut bytes))
            }
        };
        match done {
            Ok(_) => Ok(Source::from_bytes(self.name(), &bytes)),
            Err(error) => Err(format!("{}: cannot be read: {error}", self.name())),
        }
    }
}
