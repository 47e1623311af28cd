//! `snugdown order`: what whoever has the authority orders: arrivals, stages, times, permits, waivers, refusals.

use crate::cli::desk::Desk;
use crate::cli::draft::Draft;
use crate::cli::exit::{Exit, Failure};
use crate::cli::write_args::{RECORDING, WriteArgs};
use clap::{Args, Subcommand};

/// What `order` is asked.
#[derive(Clone, Debug, Args)]
#[command(after_help = format!("{EXAMPLES}\n\n{RECORDING}"))]
pub struct OrderArgs {
    /// Whose record, and who says it
    #[command(flatten)]
    pub write: WriteArgs,
    /// The order
    #[command(subcommand)]
    pub order: OrderKind,
}

const EXAMPLES: &str = "\
A stage for which the rules ask two_persons counts only when another person has confirmed the order: see 'confirm'.

Examples:
  snugdown order quillhaven adopt pilot-station '34 kt' '2026-09-18 14:00' --by 'Harbour Master'
  snugdown order quillhaven declare S3 --by Deputy --for 'Harbour Master' --reason 'gale in 24 h'
  snugdown order quillhaven fix V04/sail '2026-09-17 10:00' --by 'Harbour Master'
  snugdown order quillhaven waive 'two tugs for V10' --until '2026-09-17 18:00' --by 'Harbour Master'";

/// The orders.
#[derive(Clone, Debug, Subcommand)]
pub enum OrderKind {
    /// Adopt one working time of arrival of a wind at a place
    Adopt {
        /// The reference place
        #[arg(value_name = "PLACE")]
        place: String,
        /// The wind: '34 kt'
        #[arg(value_name = "WIND")]
        wind: String,
        /// When it is to be taken to arrive
        #[arg(value_name = "TIME")]
        time: String,
    },
    /// Withdraw the adopted arrival: the computed one counts
    Unadopt {
        /// The reference place
        #[arg(value_name = "PLACE")]
        place: String,
        /// The wind: '34 kt'
        #[arg(value_name = "WIND")]
        wind: String,
    },
    /// Declare a stage
    Declare {
        /// The stage
        #[arg(value_name = "STAGE")]
        stage: String,
        /// From when; else now
        #[arg(long, value_name = "TIME")]
        from: Option<String>,
    },
    /// Declare a stage for a time earlier than it is due
    Advance {
        /// The stage
        #[arg(value_name = "STAGE")]
        stage: String,
        /// From when
        #[arg(value_name = "TIME")]
        from: String,
    },
    /// Do not declare a stage for now, though it may be due
    Hold {
        /// The stage
        #[arg(value_name = "STAGE")]
        stage: String,
        /// Until when; else until another order
        #[arg(long, value_name = "TIME")]
        until: Option<String>,
    },
    /// Pass over a stage: the next one follows
    Skip {
        /// The stage
        #[arg(value_name = "STAGE")]
        stage: String,
    },
    /// Lift a stage
    Lift {
        /// The stage
        #[arg(value_name = "STAGE")]
        stage: String,
        /// From when; else now
        #[arg(long, value_name = "TIME")]
        from: Option<String>,
    },
    /// Fix the start of a task: it is not moved
    Fix {
        /// The task
        #[arg(value_name = "TASK")]
        task: String,
        /// Its start
        #[arg(value_name = "TIME")]
        start: String,
    },
    /// Let a fixed start go
    Release {
        /// The task
        #[arg(value_name = "TASK")]
        task: String,
    },
    /// Let a task take its shorter way
    Cut {
        /// The task
        #[arg(value_name = "TASK")]
        task: String,
    },
    /// Take what stands in for a task
    Substitute {
        /// The task
        #[arg(value_name = "TASK")]
        task: String,
    },
    /// Permit a ship to stay in port
    Stay {
        /// The ship
        #[arg(value_name = "SHIP")]
        ship: String,
        /// On which conditions
        #[arg(long, value_name = "TEXT")]
        conditions: Option<String>,
        /// Until when; else until another order
        #[arg(long, value_name = "TIME")]
        until: Option<String>,
    },
    /// Waive a rule or limit until a time
    Waive {
        /// What is waived
        #[arg(value_name = "TEXT")]
        what: String,
        /// On which conditions
        #[arg(long, value_name = "TEXT")]
        conditions: Option<String>,
        /// Until when: no waiver is for ever
        #[arg(long, value_name = "TIME")]
        until: String,
    },
    /// Refuse what was asked for
    Refuse {
        /// What
        #[arg(value_name = "TEXT")]
        what: String,
    },
    /// The plan as it stands was sent to those concerned
    Issue,
}

/// Records the order.
///
/// # Errors
/// Any [`Failure`].
pub fn run(args: &OrderArgs) -> Result<Exit, Failure> {
    let desk = Desk::open(&args.write)?;
    let stages = &desk.loaded.rules.stages;
    let needs_second = |id: &str| stages.iter().any(|stage| stage.id == id && stage.needs_second);
    let draft = draft(&args.order, &needs_second);
    desk.record(&[draft], &[])
}

fn draft(order: &OrderKind, needs_second: &dyn Fn(&str) -> bool) -> Draft {
    match order {
        OrderKind::Adopt { place, wind, time } => Draft::of("adopts_arrival")
            .with("place", place.as_str())
            .with("wind", wind.as_str())
            .with("time", time.as_str()),
        OrderKind::Unadopt { place, wind } => {
            Draft::of("withdraws_arrival").with("place", place.as_str()).with("wind", wind.as_str())
        }
        OrderKind::Declare { stage, from } => Draft::of("declares")
            .with("stage", stage.as_str())
            .maybe("from", from.clone())
            .awaiting_second(needs_second(stage)),
        OrderKind::Advance { stage, from } => Draft::of("declares")
            .with("stage", stage.as_str())
            .with("from", from.as_str())
            .awaiting_second(needs_second(stage)),
        OrderKind::Lift { stage, from } => Draft::of("lifts")
            .with("stage", stage.as_str())
            .maybe("from", from.clone())
            .awaiting_second(needs_second(stage)),
        OrderKind::Hold { stage, until } => {
            Draft::of("holds").with("stage", stage.as_str()).maybe("until", until.clone())
        }
        OrderKind::Skip { stage } => Draft::of("skips").with("stage", stage.as_str()),
        OrderKind::Fix { task, start } => {
            Draft::of("fixes").with("task", task.as_str()).with("start", start.as_str())
        }
        OrderKind::Release { task } => {
            Draft::of("retracts").with("task", task.as_str()).with("what", "fixed_start")
        }
        OrderKind::Cut { task } => Draft::of("cuts").with("task", task.as_str()),
        OrderKind::Substitute { task } => Draft::of("substitutes").with("task", task.as_str()),
        OrderKind::Stay { ship, conditions, until } => Draft::of("permits_stay")
            .with("ship", ship.as_str())
            .maybe("conditions", conditions.clone())
            .maybe("until", until.clone()),
        OrderKind::Waive { what, conditions, until } => Draft::of("waives")
            .with("what", what.as_str())
            .maybe("conditions", conditions.clone())
            .with("until", until.as_str()),
        OrderKind::Refuse { what } => Draft::of("refuses").with("what", what.as_str()),
        OrderKind::Issue => Draft::of("issued"),
    }
}
