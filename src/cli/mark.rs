//! `snugdown mark`: how work goes on: started, done, cannot be done, not needed.

use crate::cli::desk::Desk;
use crate::cli::draft::Draft;
use crate::cli::exit::{Exit, Failure};
use crate::cli::folder::read_bytes;
use crate::cli::screen::tell;
use crate::cli::write_args::{RECORDING, WriteArgs};
use crate::plan::news::news_words;
use crate::record::event::{Event, What};
use crate::record::fold::withdrawn;
use crate::store::chain::digest;
use clap::{Args, ValueEnum};
use std::path::PathBuf;

/// What `mark` is asked.
#[derive(Clone, Debug, Args)]
#[command(after_help = format!("{EXAMPLES}\n\n{RECORDING}"))]
pub struct MarkArgs {
    /// Whose record, and who says it
    #[command(flatten)]
    pub write: WriteArgs,
    /// What happened
    #[arg(value_name = "WHAT")]
    pub what: Progress,
    /// The tasks, by their full ids
    #[arg(value_name = "TASK", required = true)]
    pub tasks: Vec<String>,
    /// When it began or was finished; else when it became known
    #[arg(long, value_name = "TIME")]
    pub at: Option<String>,
    /// Who does it, for a task that has started: a member of a pool; may be given many times
    #[arg(long, value_name = "MEMBER")]
    pub with: Vec<String>,
    /// What shows that it is done
    #[arg(long, value_name = "TEXT")]
    pub evidence: Option<String>,
    /// A file that shows that it is done: its name and SHA-256 are recorded, the file stays where it is
    #[arg(long, value_name = "FILE")]
    pub proof: Option<PathBuf>,
}

const EXAMPLES: &str = "\
Examples:
  snugdown mark quillhaven started V04/sail --with P3 --with T1 --by 'Traffic service'
  snugdown mark quillhaven done U1/pin U2/pin --by 'Duty manager' --evidence 'seen by two'
  snugdown mark quillhaven cannot Q03 --by Foreman --reason 'the hoist is broken'";

/// How work goes on.
#[derive(Clone, Copy, Debug, PartialEq, Eq, ValueEnum)]
pub enum Progress {
    /// It has begun.
    Started,
    /// It is finished.
    Done,
    /// It cannot be done.
    Cannot,
    /// It is not needed.
    NotNeeded,
}

/// Records the progress of all tasks in one piece.
///
/// # Errors
/// Any [`Failure`].
pub fn run(args: &MarkArgs) -> Result<Exit, Failure> {
    check_fit(args)?;
    let desk = Desk::open(&args.write)?;
    let evidence = evidence(args)?;
    for task in &args.tasks {
        if let Some(before) = told_before(&desk.loaded.events, task) {
            let words = news_words(before, &desk.loaded.port.clock);
            tell(&format!("snugdown: event {}: {words}; what you say now counts", before.number));
        }
    }
    let draft = |task: &String| match args.what {
        Progress::Started => {
            let members = (!args.with.is_empty()).then(|| args.with.clone());
            Draft::of("started")
                .with("task", task.as_str())
                .maybe("at", args.at.clone())
                .maybe("members", members)
        }
        Progress::Done => Draft::of("done")
            .with("task", task.as_str())
            .maybe("at", args.at.clone())
            .maybe("evidence", evidence.clone()),
        Progress::Cannot => Draft::of("cannot").with("task", task.as_str()),
        Progress::NotNeeded => Draft::of("not_needed").with("task", task.as_str()),
    };
    let drafts: Vec<Draft> = args.tasks.iter().map(draft).collect();
    desk.record(&drafts, &[])
}

/// The last event, if it still stands, that said how a task ended; looked for without folding the whole record.
fn told_before<'a>(events: &'a [Event], task: &str) -> Option<&'a Event> {
    let is_end = |event: &&Event| match &event.what {
        What::TaskDone { task: told, .. }
        | What::TaskCannot { task: told }
        | What::TaskNotNeeded { task: told } => told == task,
        What::AdvisoryTaken { .. }
        | What::ArrivalAdopted { .. }
        | What::StageDeclared { .. }
        | What::StageLifted { .. }
        | What::TaskStarted { .. }
        | What::TaskTakes { .. }
        | What::TaskLeft { .. }
        | What::TaskNotBefore { .. }
        | What::TaskFixed { .. }
        | What::CutOrdered { .. }
        | What::SubstituteOrdered { .. }
        | What::TaskRetracted { .. }
        | What::MeansOut { .. }
        | What::MeansBack { .. }
        | What::Observed { .. }
        | What::PlanIssued
        | What::Told(_)
        | What::Ruled(_)
        | What::Call(_)
        | What::Withdrawn { .. }
        | What::Confirmed { .. } => false,
    };
    let all: Vec<&Event> = events.iter().collect();
    let gone = withdrawn(&all);
    events.iter().rev().filter(is_end).find(|event| !gone.contains(&event.number))
}

/// An option that would be lost in silence is refused.
fn check_fit(args: &MarkArgs) -> Result<(), Failure> {
    let lost = match args.what {
        Progress::Started if args.evidence.is_some() || args.proof.is_some() => {
            "--evidence and --proof go with done"
        }
        Progress::Done | Progress::Cannot | Progress::NotNeeded if !args.with.is_empty() => {
            "--with goes with started"
        }
        Progress::Cannot | Progress::NotNeeded if args.at.is_some() => "--at goes with started and done",
        Progress::Cannot | Progress::NotNeeded if args.evidence.is_some() || args.proof.is_some() => {
            "--evidence and --proof go with done; say why with --reason"
        }
        Progress::Started | Progress::Done | Progress::Cannot | Progress::NotNeeded => return Ok(()),
    };
    Err(Failure::Usage(lost.to_owned()))
}

fn evidence(args: &MarkArgs) -> Result<Option<String>, Failure> {
    let Some(path) = &args.proof else { return Ok(args.evidence.clone()) };
    let proof = format!("file {}, SHA-256 {}", path.display(), digest(&read_bytes(path)?));
    Ok(Some(match &args.evidence {
        Some(text) => format!("{text}; {proof}"),
        None => proof,
    }))
}
