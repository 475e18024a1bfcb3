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
        Diagnostic { severity: Severity::Error, span, message: message.into(), remedy: None }
    }

    /// A warning without a remedy yet.
    pub fn warning(span: Span, message: impl Into<String>) -> Diagnostic {
        Diagnostic { severity: Severity::Warning, span, message: message.into(), remedy: None }
    }

    /// The same, with what would be right.
    pub fn remedy(mut self, remedy: impl Into<String>) -> Diagnostic {
        self.remedy = Some(remedy.into());
        self
    }
}
