//! How a command ends: its exit code, and why it could not do what was asked.

use crate::finding::fault::Finding;
use crate::finding::source::SourceText;
use crate::store::error::StoreError;
use std::io;
use std::process::ExitCode;

/// How a command that did its work ends.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Exit {
    /// Done, and it fits: 0.
    Fits,
    /// A plan was made, but something cannot be done in time: 4. It outranks [`Exit::Stale`].
    CannotBeDone,
    /// The forecast is overdue, or older than one taken before it: 5.
    Stale,
}

impl Exit {
    /// Its exit code.
    #[must_use]
    pub fn code(self) -> ExitCode {
        ExitCode::from(match self {
            Exit::Fits => 0,
            Exit::CannotBeDone => 4,
            Exit::Stale => 5,
        })
    }
}

/// Why a command could not do what was asked.
#[derive(Debug, thiserror::Error)]
pub enum Failure {
    /// A file or folder cannot be read: exit code 1.
    #[error("cannot read {name}: {error}")]
    Read {
        /// The path as given.
        name: String,
        /// What the system says.
        error: io::Error,
    },
    /// The output cannot be written: exit code 1.
    #[error("cannot write: {0}")]
    Write(#[from] io::Error),
    /// A document cannot be put into JSON: exit code 1.
    #[error("cannot write JSON: {0}")]
    Json(#[from] serde_json::Error),
    /// The fold left no plan, which a sound one never does: exit code 1.
    #[error("no plan could be made")]
    NoPlan,
    /// The record cannot be read or written: exit code 1, or 3 if the file itself is at fault.
    #[error(transparent)]
    Store(#[from] StoreError),
    /// Somebody else has recorded something about the same since it was last looked at: exit code 6. Nothing was recorded.
    #[error("{0}")]
    Stale(String),
    /// The command was called in a way that makes no sense: exit code 2.
    #[error("{0}")]
    Usage(String),
    /// The input is at fault: exit code 3. The findings are shown instead of a message.
    #[error("the input is at fault")]
    Input {
        /// All findings; at least one is an error.
        findings: Vec<Finding>,
        /// The texts they are in.
        sources: Vec<SourceText>,
    },
}

impl Failure {
    /// Its exit code.
    #[must_use]
    pub fn code(&self) -> ExitCode {
        ExitCode::from(match self {
            Failure::Read { .. } | Failure::Write(_) | Failure::Json(_) | Failure::NoPlan => 1,
            Failure::Usage(_) => 2,
            Failure::Input { .. } => 3,
            Failure::Store(error) if error.is_fault_of_file() => 3,
            Failure::Store(_) => 1,
            Failure::Stale(_) => 6,
        })
    }
}
