//! `snugdown changes`: what moved between two times, and why.

use crate::cli::clock::{port_now, port_time};
use crate::cli::exit::{Exit, Failure};
use crate::cli::load::load;
use crate::cli::planning::{compared_with, exit_of, latest, plans_until};
use crate::cli::port_args::PortArgs;
use crate::cli::screen::{show, width};
use crate::output::changes_text::changes_text;
use crate::output::setting::Setting;
use crate::output::wire::changes::changes_out;
use crate::output::wire::value::to_text;
use crate::plan::changes::changes_between;
use clap::Args;

/// What `changes` is asked.
#[derive(Clone, Debug, Args)]
#[command(after_help = AFTER_HELP)]
pub struct ChangesArgs {
    /// The port
    #[command(flatten)]
    pub port: PortArgs,
    /// The earlier time; else when the last plan was issued, or just before the last advisory was taken
    #[arg(long, value_name = "TIME")]
    pub from: Option<String>,
    /// The later time; else now: the port's exercise clock, else the system's
    #[arg(long, value_name = "TIME")]
    pub to: Option<String>,
    /// Write JSON
    #[arg(long)]
    pub json: bool,
    /// Columns of the text
    #[arg(long, value_name = "COLUMNS")]
    pub width: Option<usize>,
}

/// Stands under the help of the command.
const AFTER_HELP: &str = "\
Examples:
  snugdown changes demo-port
  snugdown changes demo-port --from '2026-09-16 12:20' --to '2026-09-17 06:20'";

/// Shows what changed.
///
/// # Errors
/// Any [`Failure`].
pub fn run(args: &ChangesArgs) -> Result<Exit, Failure> {
    let loaded = load(&args.port)?;
    let record = loaded.head_words();
    let setting = Setting::of(&loaded.port, &loaded.rules).with_record(&record);
    let to = match &args.to {
        Some(text) => port_time("--to", text, setting.clock)?,
        None => port_now(None, setting.clock, loaded.port.exercise)?,
    };
    let history = plans_until(&loaded, to);
    let later = latest(&history)?;
    let from = match &args.from {
        Some(text) => port_time("--from", text, setting.clock)?,
        None => compared_with(&loaded, to).ok_or_else(|| {
            Failure::Usage(
                "no advisory was taken and no plan issued by then; name a time with --from".to_owned(),
            )
        })?,
    };
    if from > to {
        return Err(Failure::Usage(format!("--from is later than {}", setting.clock.show(to))));
    }
    // The earlier plan ages by the clock too, so it is made for its own moment.
    let before = plans_until(&loaded, from);
    let changes = changes_between(latest(&before)?, later, &loaded.events, &loaded.port.clock);
    if args.json {
        show(&to_text(&changes_out(&changes, &setting))?)?;
    } else {
        show(&changes_text(&changes, &setting, width(args.width)))?;
    }
    Ok(exit_of(later, &loaded))
}
