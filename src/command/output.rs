//! Where results go: the terminal, or files that are replaced whole or not at all.

use std::io::Write;
use std::path::{Path, PathBuf};

/// Writes to standard output.
///
/// # Errors
/// A message, where that is not possible. A reader that has gone away is not worth one.
pub fn print(text: &str) -> Result<(), String> {
    let mut out = std::io::stdout().lock();
    match out.write_all(text.as_bytes()).and_then(|()| out.flush()) {
        Ok(()) => Ok(()),
        Err(error) if error.kind() == std::io::ErrorKind::BrokenPipe => Err(String::new()),
        Err(error) => Err(format!("standard output: cannot be written: {error}")),
    }
}

/// Replaces a file as a whole; one that has these bytes already is left untouched, so that its time stays.
///
/// # Errors
/// A message, where the file cannot be written. It is then as it was before.
pub fn replace(path: &Path, text: &str) -> Result<(), String> {
    if same(path, text) {
        return Ok(());
    }
    let beside = beside(path);
    let written = std::fs::write(&beside, text).and_then(|()| std::fs::rename(&beside, path));
    written.map_err(|error| {
        let _ = std::fs::remove_file(&beside);
        format!("{}: cannot be written: {error}", path.display())
    })
}

/// Whether the file holds exactly this text.
pub fn same(path: &Path, text: &str) -> bool {
    std::fs::read(path).is_ok_and(|bytes| bytes == text.as_bytes())
}

/// A name in the same folder that no other run uses.
fn beside(path: &Path) -> PathBuf {
    let name = path.file_name().map(|name| name.to_string_lossy().into_owned()).unwrap_or_default();
    path.with_file_name(format!(".{name}.{}.part", std::process::id()))
}

/// Writes a new file.
///
/// # Errors
/// A message, where there is a file of this name already, which is left alone, or where it cannot be written.
pub fn create(path: &Path, text: &str) -> Result<(), String> {
    let written = std::fs::File::create_new(path).and_then(|mut file| file.write_all(text.as_bytes()));
    written.map_err(|error| match error.kind() {
        std::io::ErrorKind::AlreadyExists => {
            format!("{}: there is a file of this name, and it is left as it is; choose another name", path.display())
        }
        _ => format!("{}: cannot be written: {error}", path.display()),
    })
}
