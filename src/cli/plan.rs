//! `snugdown plan`: the whole plan.

use crate::cli::clock::port_now;
use crate::cli::exit::{Exit, Failure};
use crate::cli::load::load;
use crate::cli::planning::{compared_with, exit_of, latest, plans_until};
use crate::cli::port_args::PortArgs;
use crate::cli::screen::{show, width};
use crate::output::plan_text::plan_text;
use crate::output::setting::Setting;
use crate::output::wire::plan::plan_out;
use crate::output::wire::value::to_text;
use crate::plan::changes::changes_between;
use clap::Args;

/// What `plan` is asked.
#[derive(Clone, Debug, Args)]
#[command(after_help = AFTER_HELP)]
pub struct PlanArgs {
    /// The port
    #[command(flatten)]
    pub port: PortArgs,
    /// The time to plan for; else the port's exercise clock, else the system's
    #[arg(long, value_name = "TIME")]
    pub now: Option<String>,
    /// Write JSON, with exact times
    #[arg(long)]
    pub json: bool,
    /// Columns of the text
    #[arg(long, value_name = "COLUMNS")]
    pub width: Option<usize>,
}

/// Stands under the help of the command.
const AFTER_HELP: &str = "\
The plan depends on the folder and the time alone. Times in the text are rounded to the safe side: to 5 min within 24 h,
to 30 min beyond.

Examples:
  snugdown plan demo-port
  snugdown plan demo-port --now '2026-09-16 12:20' --width 120
  snugdown plan demo-port --json | jq '.tasks[] | select(.state == \"given_up\") | .id'";

/// Shows the plan.
///
/// # Errors
/// Any [`Failure`].
pub fn run(args: &PlanArgs) -> Result<Exit, Failure> {
    let loaded = load(&args.port)?;
    let record = loaded.head_words();
    let setting = Setting::of(&loaded.port, &loaded.rules).with_record(&record);
    let now = port_now(args.now.as_deref(), setting.clock, loaded.port.exercise)?;
    let history = plans_until(&loaded, now);
    let plan = latest(&history)?;
    if args.json {
        let earlier = compared_with(&loaded, now).and_then(|moment| history.at(moment));
        let changes =
            earlier.map(|earlier| changes_between(earlier, plan, &loaded.events, &loaded.port.clock));
        show(&to_text(&plan_out(plan, &setting, changes.as_ref()))?)?;
    } else {
        show(&plan_text(plan, &setting, width(args.width)))?;
    }
    Ok(exit_of(plan, &loaded))
}
