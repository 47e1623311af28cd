//! `snugdown withdraw` and `snugdown confirm`: what is said of earlier events, by their numbers.

use crate::cli::desk::{Desk, event_number, withdrawal};
use crate::cli::draft::Draft;
use crate::cli::exit::{Exit, Failure};
use crate::cli::write_args::{RECORDING, WriteArgs};
use crate::record::fold::situation;
use clap::Args;

/// What `withdraw` and `confirm` are asked.
#[derive(Clone, Debug, Args)]
#[command(after_help = format!("{EXAMPLES}\n\n{RECORDING}"))]
pub struct MendArgs {
    /// Whose record, and who says it
    #[command(flatten)]
    pub write: WriteArgs,
    /// The numbers of the events; 'record list' shows them
    #[arg(value_name = "NUMBER", required = true)]
    pub events: Vec<usize>,
}

const EXAMPLES: &str = "\
Examples:
  snugdown withdraw quillhaven 64 --by 'Duty officer' --reason 'wrong line ticked'
  snugdown confirm quillhaven 70 --by 'Deputy' --name 'B. Sallow'";

/// Takes events back: they count as never said.
///
/// # Errors
/// Any [`Failure`]; [`Failure::Usage`] if there is no such event.
pub fn withdraw(args: &MendArgs) -> Result<Exit, Failure> {
    let desk = Desk::open(&args.write)?;
    let drafts: Vec<Draft> =
        args.events.iter().map(|number| withdrawal(*number)).collect::<Result<_, _>>()?;
    for number in &args.events {
        if !desk.loaded.events.iter().any(|event| event.number == *number) {
            return Err(Failure::Usage(format!("there is no event {number}; 'record list' shows all")));
        }
    }
    desk.record(&drafts, &[])
}

/// Confirms orders that wait for a second person.
///
/// # Errors
/// Any [`Failure`]; [`Failure::Usage`] if an event waits for no confirmation, or was ordered by the same person.
pub fn confirm(args: &MendArgs) -> Result<Exit, Failure> {
    let desk = Desk::open(&args.write)?;
    let now = situation(&desk.loaded.events, desk.now.to_utc());
    let mut drafts = Vec::new();
    for number in &args.events {
        let Some(order) = now.waiting.get(number) else {
            return Err(Failure::Usage(format!("event {number} waits for no confirmation")));
        };
        if !desk.is_another_than(order) {
            let who = if order.name.is_empty() { &order.by } else { &order.name };
            return Err(Failure::Usage(format!(
                "event {number} was ordered by {who}; another person has to confirm it"
            )));
        }
        drafts.push(Draft::of("confirms").with("event", event_number(*number)?));
    }
    desk.record(&drafts, &[])
}
