use std::process::ExitCode;

use crate::checks::Verdict;

/// What the process tells by its exit code. Worse ones compare greater.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub(super) enum Code {
    /// All is clear, or was told or written.
    Clear,
    /// Something is not clear.
    NotClear,
    /// Something could not be judged.
    NotJudged,
}

impl Code {
    /// The code of a judged recipe.
    pub(super) fn of(verdict: Verdict) -> Self {
        if verdict == Verdict::Clear { Self::Clear } else { Self::NotClear }
    }
}

impl From<Code> for ExitCode {
    fn from(code: Code) -> Self {
        Self::from(code as u8)
    }
}
