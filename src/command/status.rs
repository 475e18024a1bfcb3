//! How a run ended, as its exit status.

/// The ways in which a run can end, the gravest first.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Status {
    /// The command line is wrong.
    Usage,
    /// A check of the program on itself failed.
    Internal,
    /// An output cannot be written.
    Unwritable,
    /// A model cannot be read.
    Unreadable,
    /// `--check` found a difference.
    Differs,
    /// Something is refuted, regional or conditional.
    Refuted,
    /// Something is undecided, or ran out of its limits.
    Undecided,
    /// Everything that was asked for is proven, or counts as passed.
    Passed,
}

impl Status {
    /// The exit status.
    pub fn code(self) -> u8 {
        match self {
            Status::Passed => 0,
            Status::Refuted => 1,
            Status::Usage => 2,
            Status::Undecided => 3,
            Status::Unreadable => 4,
            Status::Unwritable => 5,
            Status::Differs => 6,
            Status::Internal => 70,
        }
    }

    /// In a count of models.
    pub fn of_a_model(self) -> &'static str {
        match self {
            Status::Passed => "proven",
            Status::Refuted => "not proven (refuted, regional or conditional)",
            Status::Undecided => "undecided",
            Status::Usage | Status::Unreadable => "unreadable",
            Status::Unwritable => "not written",
            Status::Differs => "different",
            Status::Internal => "with an internal error",
        }
    }

    /// The graver of the two.
    pub fn and(self, other: Status) -> Status {
        self.min(other)
    }
}

/// The status of something written; what went wrong goes to standard error.
pub fn written(result: Result<(), String>) -> Status {
    match result {
        Ok(()) => Status::Passed,
        Err(fault) => {
            if !fault.is_empty() {
                eprintln!("{fault}");
            }
            Status::Unwritable
        }
    }
}
