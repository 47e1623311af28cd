//! `snugdown now`: what matters now, on one screen.

use crate::cli::clock::port_now;
use crate::cli::exit::{Exit, Failure};
use crate::cli::load::{Loaded, load};
use crate::cli::planning::{exit_of, latest, plans_until};
use crate::cli::port_args::PortArgs;
use crate::cli::screen::show;
use crate::finding::fault::nearest;
use crate::output::now_lists::{NowOptions, concerns, everybody, now_of};
use crate::output::now_text::now_text;
use crate::output::setting::Setting;
use crate::output::wire::now::now_out;
use crate::output::wire::value::to_text;
use crate::plan::sheet::Plan;
use crate::time::moment::Minutes;
use clap::Args;
use clap::value_parser;

/// What `now` is asked.
#[derive(Clone, Debug, Args)]
#[command(after_help = AFTER_HELP)]
pub struct NowArgs {
    /// The port
    #[command(flatten)]
    pub port: PortArgs,
    /// Only tasks of this person, office, pool or member
    #[arg(long = "for", value_name = "WHO")]
    pub concerning: Option<String>,
    /// How many hours ahead to look
    #[arg(long, value_name = "HOURS", default_value_t = 6, value_parser = value_parser!(i64).range(1..=240))]
    pub hours: i64,
    /// The present time; else the port's exercise clock, else the system's
    #[arg(long, value_name = "TIME")]
    pub now: Option<String>,
    /// Write JSON, with exact times and uncut lists
    #[arg(long)]
    pub json: bool,
}

/// Stands under the help of the command.
const AFTER_HELP: &str = "\
At most 24 lines of 80 columns: a longer list is cut with a count. It ages by the clock, without a new advisory.

Examples:
  snugdown now demo-port
  snugdown now demo-port --for T3 --hours 12
  snugdown now demo-port --now '2026-09-17 07:30'";

/// Shows what matters now.
///
/// # Errors
/// Any [`Failure`].
pub fn run(args: &NowArgs) -> Result<Exit, Failure> {
    let loaded = load(&args.port)?;
    let record = loaded.head_words();
    let setting = Setting::of(&loaded.port, &loaded.rules).with_record(&record);
    let now = port_now(args.now.as_deref(), setting.clock, loaded.port.exercise)?;
    let history = plans_until(&loaded, now);
    let plan = latest(&history)?;
    if let Some(who) = &args.concerning {
        check_known(who, plan, &loaded)?;
    }
    let options = NowOptions { concerning: args.concerning.clone(), ahead: Minutes::hours(args.hours) };
    if args.json {
        show(&to_text(&now_out(plan, &setting, &options, &now_of(plan, &options)))?)?;
    } else {
        show(&now_text(plan, &setting, &options))?;
    }
    Ok(exit_of(plan, &loaded))
}

/// An empty screen for a misspelt name would look like a quiet night.
fn check_known(who: &str, plan: &Plan, loaded: &Loaded) -> Result<(), Failure> {
    let members = loaded.port.pools.iter().flat_map(|pool| {
        std::iter::once(pool.id.as_str()).chain(pool.members.iter().map(|member| member.id.as_str()))
    });
    let known: Vec<&str> = everybody(plan).into_iter().chain(members).collect();
    let is_known = plan.tasks.iter().any(|task| concerns(task, who))
        || known.iter().any(|name| name.to_lowercase() == who.trim().to_lowercase());
    if is_known {
        return Ok(());
    }
    let hint = nearest(who, known.iter().copied())
        .map_or(format!("known are {}", known.join(", ")), |meant| format!("did you mean \"{meant}\"?"));
    Err(Failure::Usage(format!("--for: no task concerns \"{who}\"; {hint}")))
}
