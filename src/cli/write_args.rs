//! What every command that records something is told: whose port, who says it, and when it was known.

use crate::cli::port_args::PortArgs;
use clap::Args;

/// Stands under the help of every command that records something.
pub const RECORDING: &str = "\
Each command adds to the port's record, record.sqlite, which is made if the port has none; nothing in it is ever changed. \
A mistake is mended with 'withdraw', or with --replaces beside the right command. After recording, the plan is made again \
and what changed is told in a few lines; the exit code is 0 as soon as it is recorded.";

/// Whose record, who says it, when it was known.
#[derive(Clone, Debug, Args)]
pub struct WriteArgs {
    /// The port
    #[command(flatten)]
    pub port: PortArgs,
    /// Who says so, by title; must be given
    #[arg(long, value_name = "TITLE", global = true)]
    pub by: Option<String>,
    /// That person's name
    #[arg(long, value_name = "NAME", global = true)]
    pub name: Option<String>,
    /// In whose place that person acts, by title
    #[arg(long = "for", value_name = "TITLE", global = true)]
    pub on_behalf: Option<String>,
    /// How it is known, or why it is ordered
    #[arg(long, value_name = "TEXT", global = true)]
    pub reason: Option<String>,
    /// When it became known; else the port's exercise clock, else the system's
    #[arg(long, value_name = "TIME", global = true)]
    pub now: Option<String>,
    /// The last event that you have seen: if somebody has recorded anything about the same since, nothing is recorded
    #[arg(long, value_name = "NUMBER", global = true)]
    pub seen: Option<usize>,
    /// Take back this event in the same stroke
    #[arg(long, value_name = "NUMBER", global = true)]
    pub replaces: Option<usize>,
    /// Record only, and make no plan
    #[arg(long, global = true)]
    pub record_only: bool,
}
