//! `snugdown called`: what became of calls: released, told, acknowledged, not answered.

use crate::cli::calls::find;
use crate::cli::desk::Desk;
use crate::cli::draft::Draft;
use crate::cli::exit::{Exit, Failure};
use crate::cli::planning::{latest, plans_until};
use crate::cli::screen::tell;
use crate::cli::write_args::WriteArgs;
use crate::plan::sheet::Plan;
use crate::record::call::{CallReport, Substance};
use crate::record::event::{Event, What};
use crate::record::reader_call::said_word;
use crate::store::form::in_utc;
use clap::{Args, ValueEnum};

/// What `called` is asked.
#[derive(Clone, Debug, Args)]
#[command(after_help = AFTER_HELP)]
pub struct CalledArgs {
    /// Whose record, and who says it
    #[command(flatten)]
    pub write: WriteArgs,
    /// What became of them
    #[arg(value_name = "WHAT")]
    pub step: Step,
    /// The calls, by the ids that 'calls' shows
    #[arg(value_name = "CALL", required = true)]
    pub calls: Vec<String>,
    /// When they were made or confirmed; else when it became known
    #[arg(long, value_name = "TIME")]
    pub at: Option<String>,
}

const AFTER_HELP: &str = "\
What was said is recorded with each call, so that it stays known when the plan moves on. It moves nothing, so no plan is \
made. Releasing a text takes the --name of who releases it.

Examples:
  snugdown called quillhaven released 7K2M0B --by 'Harbour Master' --name 'A. Tern'
  snugdown called quillhaven told 7K2M0B C3F9A1 --by 'Traffic service'
  snugdown called quillhaven acknowledged 7K2M0B --by 'Traffic service' --at '2026-09-17 07:10'
  snugdown called quillhaven no-answer C3F9A1 --by 'Traffic service'";

/// What became of a call.
#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
pub enum Step {
    /// Its text may go out.
    Released,
    /// It was made.
    Told,
    /// It was confirmed.
    Acknowledged,
    /// Nobody answered.
    NoAnswer,
}

/// Records what became of all calls in one piece.
///
/// # Errors
/// Any [`Failure`]; [`Failure::Usage`] for a call that is not known.
pub fn run(args: &CalledArgs) -> Result<Exit, Failure> {
    if args.step == Step::Released && args.write.name.as_ref().is_none_or(|name| name.trim().is_empty()) {
        return Err(Failure::Usage("say who releases it: --name 'A. Tern'".to_owned()));
    }
    let desk = Desk::open(&args.write)?;
    let history = plans_until(&desk.loaded, desk.now);
    let plan = latest(&history)?;
    let mut drafts = Vec::new();
    for id in &args.calls {
        drafts.push(draft(args, id, plan, &desk.loaded.events)?);
    }
    desk.record_only(&drafts)
}

fn draft(args: &CalledArgs, id: &str, plan: &Plan, events: &[Event]) -> Result<Draft, Failure> {
    let key = match args.step {
        Step::Released => "releases_call",
        Step::Told => "told",
        Step::Acknowledged => "acknowledged",
        Step::NoAnswer => "no_answer",
    };
    let found = find(plan, id);
    if let (Ok(call), Step::Told) = (&found, args.step)
        && call.released_by.is_none()
    {
        tell(&format!("snugdown: nobody has released {}: its text is a draft", call.id));
    }
    let (call, to, about, substance) = match (found, said_before(events, id)) {
        (Ok(call), _) => (call.id.as_str(), call.to.words(), call.about.as_str(), Some(call.substance)),
        // The plan has moved on; what was said then is what they confirm.
        (Err(_), Some(report)) => {
            tell(&format!("snugdown: {} is no longer to be made: the plan has moved on", report.call));
            (report.call.as_str(), report.to.clone(), report.about.as_str(), report.substance)
        }
        (Err(failure), None) => return Err(failure),
    };
    let start = match substance {
        Some(Substance::Start(start)) => Some(in_utc(start)),
        Some(_) | None => None,
    };
    Ok(Draft::of(key)
        .with("call", call)
        .with("to", to)
        .with("about", about)
        .maybe("start", start)
        .maybe("said", substance.and_then(said_word))
        .maybe("at", args.at.clone()))
}

/// The last report about a call that the plan no longer has.
fn said_before<'a>(events: &'a [Event], id: &str) -> Option<&'a CallReport> {
    let report = |event: &'a Event| if let What::Call(report) = &event.what { Some(report) } else { None };
    events.iter().rev().filter_map(report).find(|report| report.call.eq_ignore_ascii_case(id.trim()))
}
