//! A model file as text, and where in it an offset lies.

use super::diagnostic::{Diagnostic, Severity};
use super::syntax::Span;

/// A model file: its name as it is shown in messages, and its text without byte-order mark.
#[derive(Clone, Debug)]
pub struct Source {
    /// The name shown in messages.
    pub name: String,
    /// The text; spans are byte offsets into it.
    pub text: String,
    lines: Vec<usize>,
    fault: Option<Diagnostic>,
}

impl Source {
    /// The longest file that is read, in bytes.
    pub const MAX_BYTES: usize = 4 << 20;
    /// How much is kept of a file that is not read, for the message.
    const KEPT_BYTES: usize = 4096;

    /// A source from text that is known to be UTF-8.
    pub fn new(name: impl Into<String>, text: impl Into<String>) -> Source {
        let text: String = text.into();
        Source::from_bytes(name, text.as_bytes())
    }

    /// A source from the bytes of a file. Bytes that cannot be a model file (not UTF-8, too many) give a source whose
    /// fault [`Source::fault`] tells; reading it returns that fault.
    pub fn from_bytes(name: impl Into<String>, bytes: &[u8]) -> Source {
        let bytes = bytes.strip_prefix(b"\xef\xbb\xbf").unwrap_or(bytes);
        if bytes.len() > Self::MAX_BYTES {
            let kept = String::from_utf8_lossy(&bytes[..Self::KEPT_BYTES]).into_owned();
            return Source::build(name.into(), kept, Some(too_long(bytes.len())));
        }
        match std::str::from_utf8(bytes) {
            Ok(text) => Source::build(name.into(), text.to_string(), None),
            Err(error) => {
                let at = error.valid_up_to();
                let fault = not_utf8(at, bytes.get(at).copied().unwrap_or(0));
                Source::build(name.into(), String::from_utf8_lossy(bytes).into_owned(), Some(fault))
            }
        }
    }

    fn build(name: String, text: String, fault: Option<Diagnostic>) -> Source {
        let breaks = text.bytes().enumerate().filter(|(_, byte)| *byte == b'\n').map(|(at, _)| at + 1);
        let lines = std::iter::once(0).chain(breaks).collect();
        Source { name, text, lines, fault }
    }

    /// Why the bytes are not a model file, where they are not.
    pub fn fault(&self) -> Option<&Diagnostic> {
        self.fault.as_ref()
    }

    /// Line and column of an offset, both counted from 1, the column in characters.
    pub fn place(&self, offset: usize) -> (usize, usize) {
        let line = self.lines.partition_point(|start| *start <= offset).max(1);
        let before = self.text.get(self.lines[line - 1]..offset).unwrap_or("");
        (line, before.chars().count() + 1)
    }

    /// The text of a line, counted from 1, without its end; with the offset at which it starts.
    pub fn line(&self, line: usize) -> (usize, &str) {
        let start = self.lines.get(line.wrapping_sub(1)).copied().unwrap_or(self.text.len());
        let end = self.lines.get(line).copied().unwrap_or(self.text.len());
        let text = self.text.get(start..end).unwrap_or("");
        (start, text.trim_end_matches(['\n', '\r']))
    }

    /// The text of a stretch.
    pub fn slice(&self, span: Span) -> &str {
        self.text.get(span.start..span.end).unwrap_or("")
    }
}

fn too_long(bytes: usize) -> Diagnostic {
    Diagnostic {
        severity: Severity::Error,
        span: Span::new(0, 0),
        message: format!("the file has {bytes} bytes; a model file may have at most {}", Source::MAX_BYTES),
        remedy: Some("state the system with indexed families, or split it into several files".to_string()),
    }
}

fn not_utf8(at: usize, byte: u8) -> Diagnostic {
    Diagnostic {
        severity: Severity::Error,
        span: Span::new(at, at + '\u{fffd}'.len_utf8()),
        message: format!("the file is not UTF-8 text: the byte 0x{byte:02X} here belongs to no character"),
        remedy: Some("save the file as UTF-8".to_string()),
    }
}
