//! `snugdown check`: all faults in a port's files at once.

use crate::cli::exit::{Exit, Failure};
use crate::cli::load::{Look, examine};
use crate::cli::port_args::PortArgs;
use crate::cli::screen::show;
use crate::finding::fault::has_error;
use crate::finding::render::with_source;
use crate::output::escape::visible_lines;
use crate::output::wire::findings::findings_out;
use crate::output::wire::value::to_text;
use clap::Args;

/// What `check` is asked.
#[derive(Clone, Debug, Args)]
pub struct CheckArgs {
    /// The port
    #[command(flatten)]
    pub port: PortArgs,
    /// Write JSON
    #[arg(long)]
    pub json: bool,
}

/// Shows the findings: here they are the data, so they go to standard output.
///
/// # Errors
/// [`Failure::Read`], [`Failure::Write`]; [`Failure::Input`] without findings, as they are shown already.
pub fn run(args: &CheckArgs) -> Result<Exit, Failure> {
    let examined = examine(&args.port, Look::Whole)?;
    if args.json {
        show(&to_text(&findings_out(&examined.findings))?)?;
    } else {
        show(&visible_lines(&with_source(&examined.findings, &examined.sources)))?;
    }
    if has_error(&examined.findings) {
        return Err(Failure::Input { findings: Vec::new(), sources: Vec::new() });
    }
    Ok(Exit::Fits)
}
