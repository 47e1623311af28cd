//! What can be asked on the command line.

use crate::cli::arrivals::ArrivalsArgs;
use crate::cli::called::CalledArgs;
use crate::cli::calls::CallsArgs;
use crate::cli::changes::ChangesArgs;
use crate::cli::check::CheckArgs;
use crate::cli::completions::CompletionsArgs;
use crate::cli::mark::MarkArgs;
use crate::cli::mend::MendArgs;
use crate::cli::now::NowArgs;
use crate::cli::order::OrderArgs;
use crate::cli::plan::PlanArgs;
use crate::cli::record::RecordArgs;
use crate::cli::take::TakeArgs;
use crate::cli::tell::TellArgs;
use crate::cli::wind::WindArgs;
use clap::{Parser, Subcommand};

/// From a tropical-cyclone forecast to a port's timed closure checklist.
#[derive(Clone, Debug, Parser)]
#[command(name = "snugdown", version, about, after_help = AFTER_HELP, after_long_help = AFTER_HELP)]
pub struct Args {
    /// The command.
    #[command(subcommand)]
    pub command: Command,
}

/// Stands under the help of the whole program.
const AFTER_HELP: &str = "\
A port is a folder of TOML files: port, rules, tasks, ships, means ..., and a record of what was known, ordered and \
done: record.sqlite, to which take, mark, tell, order and called add, or a text, events.toml.
A plan depends on that folder and the time alone. The harbour master decides; the program advises.

Examples:
  snugdown check demo-port                      is everything in the files right?
  snugdown plan demo-port                       the whole plan
  snugdown now demo-port --for 'pilot office'   one screen: what matters now
  snugdown changes demo-port                    what the last news moved, and why
  snugdown calls demo-port                      who must be told what, by when
  snugdown take my-port advisory-12.txt --by 'Duty officer'
  snugdown mark my-port done H05 V01/papers --by 'Duty officer'
  snugdown arrivals advisory.txt --at 'Pilot station=22.3,-40.8'
  snugdown wind demo-port greywether            the wind there, hour by hour

Times: RFC 3339 (2026-09-17T06:20-03:00, 2026-09-17T09:20Z), or the port's local time ('2026-09-17 06:20').

Exit codes:
  0  done, and it fits
  1  a disk or terminal failed
  2  the command line makes no sense
  3  the input is at fault; the findings are shown
  4  a plan was made, but something cannot be done in time
  5  the forecast is overdue, or older than one taken before; 4 goes before 5
  6  nothing was recorded: somebody else has recorded something about the same";

/// The commands.
#[derive(Clone, Debug, Subcommand)]
pub enum Command {
    /// Look for faults in a port's files, all at once.
    Check(CheckArgs),
    /// Make the whole plan.
    Plan(PlanArgs),
    /// Show what matters now, on one screen.
    Now(NowArgs),
    /// Say what moved since an earlier plan, and why.
    Changes(ChangesArgs),
    /// Say who must be told what, by when, with the texts to paste or read out.
    Calls(CallsArgs),
    /// Say when gale, storm and hurricane force arrive at places, and with what chance.
    Arrivals(ArrivalsArgs),
    /// Show the wind at a place hour by hour: bands, gusts, direction, lull, end, and when each limit there is met.
    Wind(WindArgs),
    /// An advisory has come in: keep it, and plan on it.
    Take(TakeArgs),
    /// Say how work goes on: started, done, cannot be done, not needed.
    Mark(MarkArgs),
    /// Tell a fact: means, times, services, places, signals, wind and sea.
    Tell(TellArgs),
    /// Order: adopt an arrival, declare a stage, fix a time, permit, waive, refuse.
    Order(OrderArgs),
    /// Say what became of calls: released, told, acknowledged, not answered.
    Called(CalledArgs),
    /// Take back events that were mistakes.
    Withdraw(MendArgs),
    /// Confirm orders that wait for a second person.
    Confirm(MendArgs),
    /// Look at the record: list, verify, back up, bring in and out, review.
    Record(RecordArgs),
    /// Write a shell's completions to standard output.
    Completions(CompletionsArgs),
    /// Write the manual page to standard output.
    Man,
}
