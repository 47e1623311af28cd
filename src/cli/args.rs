//! What can be asked on the command line.

use crate::cli::arrivals::ArrivalsArgs;
use crate::cli::changes::ChangesArgs;
use crate::cli::check::CheckArgs;
use crate::cli::completions::CompletionsArgs;
use crate::cli::now::NowArgs;
use crate::cli::plan::PlanArgs;
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
A port is a folder of TOML files: port, rules, tasks, ships, means ..., and events.toml with what was known and done.
A plan depends on that folder and the time alone. The harbour master decides; the program advises.

Examples:
  snugdown check demo-port                      is everything in the files right?
  snugdown plan demo-port                       the whole plan
  snugdown now demo-port --for 'pilot office'   one screen: what matters now
  snugdown changes demo-port                    what the last news moved, and why
  snugdown arrivals advisory.txt --at 'Pilot station=22.3,-40.8'
  snugdown wind demo-port greywether            the wind there, hour by hour

Times: RFC 3339 (2026-09-17T06:20-03:00, 2026-09-17T09:20Z), or the port's local time ('2026-09-17 06:20').

Exit codes:
  0  done, and it fits
  1  a disk or terminal failed
  2  the command line makes no sense
  3  the input is at fault; the findings are shown
  4  a plan was made, but something cannot be done in time
  5  the forecast is overdue, or older than one taken before; 4 goes before 5";

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
    /// Say when gale, storm and hurricane force arrive at places, and with what chance.
    Arrivals(ArrivalsArgs),
    /// Show the wind at a place hour by hour: bands, gusts, direction, lull, end, and when each limit there is met.
    Wind(WindArgs),
    /// Write a shell's completions to standard output.
    Completions(CompletionsArgs),
    /// Write the manual page to standard output.
    Man,
}
