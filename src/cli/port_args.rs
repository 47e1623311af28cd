//! Which port a command is about: its folder, and the record to read.

use clap::Args;
use std::path::PathBuf;

/// A port's folder and record.
#[derive(Clone, Debug, Args)]
pub struct PortArgs {
    /// The port's folder
    #[arg(value_name = "DIR")]
    pub folder: PathBuf,
    /// Use this record in place of the folder's own: a text, or a file that only grows; its file names count from the
    /// port's folder
    #[arg(long, value_name = "FILE", global = true)]
    pub record: Option<PathBuf>,
}

impl PortArgs {
    /// A folder with its own record.
    #[must_use]
    pub fn of(folder: PathBuf) -> PortArgs {
        PortArgs { folder, record: None }
    }
}
