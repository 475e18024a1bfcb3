//! What is wrong, where, and what would be right.

use super::syntax::Span;

/// The most mistakes that are reported for one file.
pub const MAX_MISTAKES: usize = 200;

/// How bad it is.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Severity {
    /// The file cannot be read.
    Error,
    /// The file is read, and perhaps not as its author meant it.
    Warning,
}

/// One mistake.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Diagnostic {
    /// How bad it is.
    pub severity: Severity,
    /// The words at fault.
    pub span: Span,
    /// What is wrong.
    pub message: String,
    /// What would be right.
    pub remedy: Option<String>,
}

impl Diagnostic {
    /// A mistake without a remedy yet.
    pub fn error(span: Span, message: impl Into<String>) -> Diagnostic {
        Diagnostic { severity: Severity::Error, span, message: clipped(message.into()), remedy: None }
    }

    /// A warning without a remedy yet.
    pub fn warning(span: Span, message: impl Into<String>) -> Diagnostic {
        Diagnostic { severity: Severity::Warning, span, message: clipped(message.into()), remedy: None }
    }

    /// The same, with what would be right.
    pub fn remedy(mut self, remedy: impl Into<String>) -> Diagnostic {
        self.remedy = Some(clipped(remedy.into()));
        self
    }
}

/// The longest message, in bytes: the words that it quotes may be of any length.
const MAX_LENGTH: usize = 600;

/// A message as it is, or its two ends.
fn clipped(message: String) -> String {
    if message.len() <= MAX_LENGTH {
        return message;
    }
    let head = (0..=MAX_LENGTH / 2).rev().find(|at| message.is_char_boundary(*at)).unwrap_or(0);
    let tail = (message.len() - MAX_LENGTH / 2..message.len()).find(|at| message.is_char_boundary(*at));
    format!("{} … {}", &message[..head], &message[tail.unwrap_or(message.len())..])
}
