//! A panic is a mistake of the program: it is caught for each model, told in one line, and no result is given.

use std::cell::RefCell;
use std::panic::{AssertUnwindSafe, catch_unwind};

use super::reports::Outcome;
use super::status::Status;

thread_local! {
    static LAST: RefCell<Option<String>> = const { RefCell::new(None) };
}

/// Keeps panics from printing; what they say is kept for [`guarded`].
pub fn silence() {
    std::panic::set_hook(Box::new(|panic| {
        let place = panic.location().map(|at| format!(" ({}:{})", at.file(), at.line())).unwrap_or_default();
        let words = panic.payload_as_str().unwrap_or("a check failed");
        LAST.set(Some(format!("{words}{place}")));
    }));
}

/// Runs `work` for one model; a panic in it becomes a message and [`Status::Internal`].
pub fn guarded(name: &str, work: impl FnOnce() -> Outcome) -> Outcome {
    catch_unwind(AssertUnwindSafe(work)).unwrap_or_else(|_| {
        let words = LAST.take().unwrap_or_else(|| "a check failed".to_string());
        let message =
            format!("{name}: internal error: {words}; no result is given, please report this with the model file");
        Outcome::without_report(&message, Status::Internal)
    })
}
