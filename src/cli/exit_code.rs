//! The table of exit codes (spec page, §7): a script decides on the code, never on a text.

/// What a command came to. Of several outcomes the largest counts.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq, PartialOrd, Ord)]
#[repr(u8)]
pub enum ExitCode {
    /// Done, and all that was asked to hold holds.
    #[default]
    Done = 0,
    /// Done, and something asked does not hold. No command of this version gates; `run` prints and passes.
    DoesNotHold = 1,
    /// The command line, a spec or a data file is wrong; of that spec nothing was computed.
    WrongInput = 2,
    /// A run ended at a limit that the spec states; the result up to there is written.
    LimitLeft = 3,
    /// The numerics failed; place, step, state and advice are printed.
    NumericsFailed = 4,
    /// Something outside failed: a file cannot be read or written, a disk is full.
    OutsideFailed = 5,
    /// A fault of axirad itself; what to report is printed.
    Fault = 70,
    /// Stopped by a signal; what was finished is kept, and the same command goes on. Not in this version.
    Stopped = 75,
    /// A second Ctrl-C: ended at once. Not in this version.
    EndedAtOnce = 130,
}

impl ExitCode {
    /// The number that the shell sees.
    #[must_use]
    pub fn number(self) -> u8 {
        self as u8
    }
}

impl From<ExitCode> for std::process::ExitCode {
    fn from(code: ExitCode) -> Self {
        Self::from(code.number())
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn of_several_outcomes_the_largest_counts() {
        let outcomes = [ExitCode::LimitLeft, ExitCode::Done, ExitCode::WrongInput];
        assert_eq!(outcomes.into_iter().max(), Some(ExitCode::LimitLeft));
        assert!(ExitCode::OutsideFailed > ExitCode::NumericsFailed);
        assert_eq!(ExitCode::Fault.number(), 70);
    }
}
