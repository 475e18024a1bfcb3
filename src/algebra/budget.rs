//! Work accounting: every long loop spends units here, so that the same input ends the same way on every machine.
//!
//! Running out unwinds to the nearest [`within`], which turns it into an ordinary [`Stopped`] value; no hook runs and
//! nothing is printed. The clock and the memory are the outer guard and are looked at only now and then.

use std::cell::Cell;
use std::panic::{AssertUnwindSafe, catch_unwind, resume_unwind};
use std::time::{Duration, Instant};

/// Which limit ended a computation.
#[derive(Clone, Copy, Debug, PartialEq, Eq, serde::Serialize)]
#[serde(rename_all = "snake_case")]
pub enum Stopped {
    /// The counted work was used up.
    Work,
    /// The clock ran out.
    Time,
    /// The process grew beyond its allowance.
    Memory,
    /// A size bound of the algebra (exponent, number of variables) was reached.
    Size,
}

impl Stopped {
    /// The limit in words.
    pub fn describe(self) -> &'static str {
        match self {
            Stopped::Work => "the work budget was used up",
            Stopped::Time => "the time limit was reached",
            Stopped::Memory => "the memory limit was reached",
            Stopped::Size => "a size bound of the algebra was reached",
        }
    }
}

/// The limits of one computation: units of work, a clock, and a resident size in MiB.
#[derive(Clone, Copy, Debug)]
pub struct Limits {
    /// Units of work (about one monomial operation each).
    pub work: u64,
    /// Wall-clock time.
    pub time: Duration,
    /// Resident memory in MiB.
    pub memory_mib: u64,
}

impl Limits {
    /// Limits of `work` units under the given outer guards.
    pub fn new(work: u64, time: Duration, memory_mib: u64) -> Limits {
        Limits { work, time, memory_mib }
    }
}

const LOOK_EVERY: u64 = 1 << 20;

thread_local! {
    static LEFT: Cell<u64> = const { Cell::new(u64::MAX) };
    static UNTIL_LOOK: Cell<u64> = const { Cell::new(LOOK_EVERY) };
    static DEADLINE: Cell<Option<Instant>> = const { Cell::new(None) };
    static MEMORY_MIB: Cell<u64> = const { Cell::new(u64::MAX) };
}

/// Spends `units` of work; unwinds to the enclosing [`within`] when a limit is passed.
#[inline]
pub fn spend(units: u64) {
    let left = LEFT.get();
    if left < units {
        LEFT.set(0);
        stop(Stopped::Work);
    }
    LEFT.set(left - units);
    let look = UNTIL_LOOK.get();
    if look > units {
        UNTIL_LOOK.set(look - units);
    } else {
        UNTIL_LOOK.set(LOOK_EVERY);
        look_around();
    }
}

/// Ends the computation at once for the stated reason.
pub fn stop(reason: Stopped) -> ! {
    resume_unwind(Box::new(reason))
}

fn look_around() {
    if DEADLINE.get().is_some_and(|end| Instant::now() > end) {
        stop(Stopped::Time);
    }
    let allowed = MEMORY_MIB.get();
    if allowed != u64::MAX && resident_mib().is_some_and(|now| now > allowed) {
        stop(Stopped::Memory);
    }
}

fn resident_mib() -> Option<u64> {
    let statm = std::fs::read_to_string("/proc/self/statm").ok()?;
    let pages: u64 = statm.split_whitespace().nth(1)?.parse().ok()?;
    Some(pages / 256)
}

/// Restores the counters of the enclosing computation, whatever happens inside.
struct Restore {
    left: u64,
    granted: u64,
    deadline: Option<Instant>,
    memory_mib: u64,
}

impl Drop for Restore {
    fn drop(&mut self) {
        let used = self.granted.saturating_sub(LEFT.get());
        LEFT.set(self.left.saturating_sub(used));
        DEADLINE.set(self.deadline);
        MEMORY_MIB.set(self.memory_mib);
    }
}

/// Runs `body` within `limits` (never beyond the limits already in force) and returns what ended it if it did not end
/// by itself. Other panics pass through.
pub fn within<T>(limits: Limits, body: impl FnOnce() -> T) -> Result<T, Stopped> {
    let granted = limits.work.min(LEFT.get());
    let own_end = Instant::now().checked_add(limits.time);
    let end = match (DEADLINE.get(), own_end) {
        (Some(outer), Some(own)) => Some(outer.min(own)),
        (outer, own) => outer.or(own),
    };
    let restore = Restore { left: LEFT.get(), granted, deadline: DEADLINE.get(), memory_mib: MEMORY_MIB.get() };
    LEFT.set(granted);
    DEADLINE.set(end);
    MEMORY_MIB.set(limits.memory_mib.min(restore.memory_mib));
    let outcome = catch_unwind(AssertUnwindSafe(body));
    drop(restore);
    match outcome {
        Ok(value) => Ok(value),
        Err(payload) => match payload.downcast::<Stopped>() {
            Ok(reason) => {
                // where the enclosing guards have passed too, going on would only spoil what is found
                if matches!(*reason, Stopped::Time | Stopped::Memory) {
                    look_around();
                }
                Err(*reason)
            }
            Err(other) => resume_unwind(other),
        },
    }
}

/// Runs `body` with at most `units` of work and the guards already in force.
pub fn attempt<T>(units: u64, body: impl FnOnce() -> T) -> Result<T, Stopped> {
    within(Limits { work: units, time: Duration::from_secs(1 << 30), memory_mib: u64::MAX }, body)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn running_out_is_a_value_and_the_outer_budget_pays() {
        let outer = within(Limits::new(100, Duration::from_secs(60), u64::MAX), || {
            assert_eq!(attempt(10, || spend(11)), Err(Stopped::Work));
            assert_eq!(attempt(10, || spend(5)), Ok(()));
            LEFT.get()
        });
        assert_eq!(outer, Ok(85));
    }

    #[test]
    fn a_clock_that_has_run_out_ends_the_enclosing_computation_too() {
        let outer =
            within(Limits::new(u64::MAX, Duration::ZERO, u64::MAX), || attempt(LOOK_EVERY * 4, || spend(LOOK_EVERY)));
        assert_eq!(outer, Err(Stopped::Time));
        let inner = within(Limits::new(u64::MAX, Duration::from_secs(60), u64::MAX), || {
            within(Limits::new(u64::MAX, Duration::ZERO, u64::MAX), || spend(LOOK_EVERY))
        });
        assert_eq!(inner, Ok(Err(Stopped::Time)));
    }
}
