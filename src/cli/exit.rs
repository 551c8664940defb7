//! What the exit status says.

use std::process::ExitCode;

/// Exit statuses; whose fault it was decides.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum ExitStatus {
    /// Computed.
    Computed = 0,
    /// Failed: a file can't be written, the solver gave up.
    Failed = 1,
    /// Wrong usage, or a case or log that can't be read or accepted.
    Refused = 2,
    /// Computed, and with `--strict` something is amiss: a verdict other than within-limits.
    Amiss = 3,
    /// Interrupted by Ctrl-C.
    Interrupted = 130,
}

impl From<ExitStatus> for ExitCode {
    fn from(status: ExitStatus) -> Self {
        Self::from(status as u8)
    }
}
