//! Why there is no answer, and whose fault that is.

use super::exit::ExitStatus;
use soakdown::diagnostics::Diagnostics;
use soakdown::report::ReportError;
use soakdown::run::RunError;
use std::io;
use std::path::PathBuf;

/// Why a command ended without its answer, or without its files.
#[derive(Debug, thiserror::Error)]
pub enum Failure {
    /// The case was not accepted.
    #[error("the case was not accepted")]
    Refused(Diagnostics),
    /// The run ended early.
    #[error(transparent)]
    Run(#[from] RunError),
    /// Ctrl-C can't be listened for.
    #[error("Ctrl-C can't be listened for: {0}")]
    Interrupt(#[from] ctrlc::Error),
    /// A document can't be put together.
    #[error(transparent)]
    Report(#[from] ReportError),
    /// The answer can't be printed.
    #[error("the answer can't be printed: {0}")]
    Print(#[source] io::Error),
    /// A new file would take the place of one that is there.
    #[error("{} exists already and is left as it is: choose another name, or move it out of the way first", path.display())]
    Exists {
        /// The file.
        path: PathBuf,
    },
    /// The folder of a new file is not there.
    #[error("there is no folder {}: make it first, or choose another name", folder.display())]
    NoFolder {
        /// The folder.
        folder: PathBuf,
    },
    /// A name that can't be a case file's.
    #[error("\"{name}\" can't name a case file: a name such as my-wall is due, which becomes my-wall.toml")]
    BadName {
        /// As typed.
        name: String,
    },
    /// A file can't be written.
    #[error("{} was not written: {source}", path.display())]
    Write {
        /// The file or folder.
        path: PathBuf,
        /// Why.
        source: io::Error,
    },
}

impl Failure {
    /// The exit status that says whose fault it was.
    pub fn status(&self) -> ExitStatus {
        match self {
            Self::Refused(_) => ExitStatus::Refused,
            Self::Run(RunError::Interrupted) => ExitStatus::Interrupted,
            Self::BadName { .. } => ExitStatus::Refused,
            Self::Run(_)
            | Self::Interrupt(_)
            | Self::Report(_)
            | Self::Print(_)
            | Self::Exists { .. }
            | Self::NoFolder { .. }
            | Self::Write { .. } => ExitStatus::Failed,
        }
    }
}
