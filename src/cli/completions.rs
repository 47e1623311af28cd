//! `snugdown completions`: what a shell completes.

use crate::cli::exit::{Exit, Failure};
use crate::cli::screen::show;
use clap::{Args, Command};
use clap_complete::{Shell, generate};

/// What `completions` is asked.
#[derive(Clone, Debug, Args)]
pub struct CompletionsArgs {
    /// The shell
    pub shell: Shell,
}

/// Writes the completions of the whole command line.
///
/// # Errors
/// [`Failure::Write`].
pub fn run(args: &CompletionsArgs, mut whole: Command) -> Result<Exit, Failure> {
    let mut script = Vec::new();
    generate(args.shell, &mut whole, "snugdown", &mut script);
    show(&String::from_utf8_lossy(&script))?;
    Ok(Exit::Fits)
}
