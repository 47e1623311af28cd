//! `snugdown tell`: a fact that has become known: means, times, services, places, signals, wind and sea.

use crate::cli::desk::Desk;
use crate::cli::draft::Draft;
use crate::cli::exit::{Exit, Failure};
use crate::cli::write_args::{RECORDING, WriteArgs};
use clap::{Args, Subcommand};

/// What `tell` is asked.
#[derive(Clone, Debug, Args)]
#[command(after_help = format!("{EXAMPLES}\n\n{RECORDING}"))]
pub struct TellArgs {
    /// Whose record, and who says it
    #[command(flatten)]
    pub write: WriteArgs,
    /// The fact
    #[command(subcommand)]
    pub fact: FactArgs,
}

const EXAMPLES: &str = "\
The plan works with means, ready times, times taken, places out of use and observed winds; the other facts stand in its \
head until they end.

Examples:
  snugdown tell quillhaven out T4 --by 'Tug office' --reason 'cooling water alarm'
  snugdown tell quillhaven out pilot --from '2026-09-17 18:00' --by 'Pilot office'
  snugdown tell quillhaven left V07/cargo '5 h' --by Foreman
  snugdown tell quillhaven stops 'rail bridge' --from '2026-09-17 20:00' --by 'Traffic service'
  snugdown tell quillhaven wind pilot-station '24 kt' --over '10 min' --by 'Signal station'";

/// The facts.
#[derive(Clone, Debug, Subcommand)]
pub enum FactArgs {
    /// A member of a pool, or a whole pool, is out of service
    Out(Spell),
    /// A member of a pool, or a whole pool, is back
    Back(Since),
    /// A task may not start before a time
    Ready {
        /// The task
        #[arg(value_name = "TASK")]
        task: String,
        /// The time
        #[arg(value_name = "TIME")]
        time: String,
    },
    /// A task takes so long in all
    Takes {
        /// The task
        #[arg(value_name = "TASK")]
        task: String,
        /// How long: '22 h'
        #[arg(value_name = "SPAN")]
        span: String,
    },
    /// A task still takes so long from now: cargo left, work left
    Left {
        /// The task
        #[arg(value_name = "TASK")]
        task: String,
        /// How long: '5 h 30 min'
        #[arg(value_name = "SPAN")]
        span: String,
    },
    /// A service stops: bridge, traffic service, road, airport; a pool's id takes the whole pool out
    Stops(Spell),
    /// A service works again
    Resumes(Since),
    /// A place, berth or channel cannot be used
    Unusable(Spell),
    /// A place, berth or channel can be used again
    Usable(Since),
    /// The deepest draught that may pass a place, berth or channel
    Depth {
        /// The place
        #[arg(value_name = "PLACE")]
        place: String,
        /// The draught: '11.5 m'
        #[arg(value_name = "DRAUGHT")]
        draught: String,
        /// From when; else when it became known
        #[arg(long, value_name = "TIME")]
        from: Option<String>,
        /// Until when
        #[arg(long, value_name = "TIME")]
        until: Option<String>,
    },
    /// A warning signal is shown
    Signal(Spell),
    /// The authorities clear an area
    Evacuation(Spell),
    /// The authorities keep people indoors
    Curfew(Spell),
    /// A wind was observed
    Wind {
        /// The place
        #[arg(value_name = "PLACE")]
        place: String,
        /// The speed: '24 kt'
        #[arg(value_name = "SPEED")]
        speed: String,
        /// Averaged over: 3 s, 1 min, 2 min, 3 min or 10 min
        #[arg(long, value_name = "PERIOD")]
        over: String,
        /// When; else when it became known
        #[arg(long, value_name = "TIME")]
        at: Option<String>,
    },
    /// A sea was observed: its significant height
    Sea {
        /// The place
        #[arg(value_name = "PLACE")]
        place: String,
        /// The height: '3.5 m'
        #[arg(value_name = "HEIGHT")]
        height: String,
        /// When; else when it became known
        #[arg(long, value_name = "TIME")]
        at: Option<String>,
    },
    /// The state of an anchorage: open, full or closed
    Anchorage {
        /// The anchorage
        #[arg(value_name = "PLACE")]
        place: String,
        /// The state
        #[arg(value_name = "STATE")]
        state: String,
        /// From when; else when it became known
        #[arg(long, value_name = "TIME")]
        from: Option<String>,
    },
}

/// Something that lasts from a time until another.
#[derive(Clone, Debug, Args)]
pub struct Spell {
    /// What it is about: a member, pool, service, place, signal or area
    #[arg(value_name = "WHAT")]
    pub what: String,
    /// From when; else when it became known
    #[arg(long, value_name = "TIME")]
    pub from: Option<String>,
    /// Until when; else until something else is told
    #[arg(long, value_name = "TIME")]
    pub until: Option<String>,
}

/// Something that holds from a time on.
#[derive(Clone, Debug, Args)]
pub struct Since {
    /// What it is about: a member, pool, service, place, signal or area
    #[arg(value_name = "WHAT")]
    pub what: String,
    /// From when; else when it became known
    #[arg(long, value_name = "TIME")]
    pub from: Option<String>,
}

/// Records the fact.
///
/// # Errors
/// Any [`Failure`].
pub fn run(args: &TellArgs) -> Result<Exit, Failure> {
    let desk = Desk::open(&args.write)?;
    let is_pool = |id: &str| desk.loaded.port.pools.iter().any(|pool| pool.id == id);
    let draft = draft(&args.fact, &is_pool);
    desk.record(&[draft], &[])
}

fn draft(fact: &FactArgs, is_pool: &dyn Fn(&str) -> bool) -> Draft {
    match fact {
        FactArgs::Out(spell) => lasting("out", "member", spell),
        FactArgs::Back(since) => beginning("back", "member", since),
        FactArgs::Stops(spell) if is_pool(&spell.what) => lasting("out", "member", spell),
        FactArgs::Resumes(since) if is_pool(&since.what) => beginning("back", "member", since),
        FactArgs::Stops(spell) => lasting("stops", "service", spell),
        FactArgs::Resumes(since) => beginning("resumes", "service", since),
        FactArgs::Unusable(spell) => lasting("unusable", "place", spell),
        FactArgs::Usable(since) => beginning("usable", "place", since),
        FactArgs::Signal(spell) => lasting("signal", "shown", spell),
        FactArgs::Evacuation(spell) => lasting("evacuation", "area", spell),
        FactArgs::Curfew(spell) => lasting("curfew", "area", spell),
        FactArgs::Ready { task, time } => {
            Draft::of("not_before").with("task", task.as_str()).with("time", time.as_str())
        }
        FactArgs::Takes { task, span } => {
            Draft::of("takes").with("task", task.as_str()).with("in_all", span.as_str())
        }
        FactArgs::Left { task, span } => {
            Draft::of("left").with("task", task.as_str()).with("still", span.as_str())
        }
        FactArgs::Depth { place, draught, from, until } => Draft::of("depth_limit")
            .with("place", place.as_str())
            .with("draught", draught.as_str())
            .maybe("from", from.clone())
            .maybe("until", until.clone()),
        FactArgs::Wind { place, speed, over, at } => Draft::of("observed")
            .with("place", place.as_str())
            .with("wind", speed.as_str())
            .with("over", over.as_str())
            .maybe("at", at.clone()),
        FactArgs::Sea { place, height, at } => Draft::of("sea")
            .with("place", place.as_str())
            .with("height", height.as_str())
            .maybe("at", at.clone()),
        FactArgs::Anchorage { place, state, from } => Draft::of("anchorage")
            .with("place", place.as_str())
            .with("state", state.as_str())
            .maybe("from", from.clone()),
    }
}

fn lasting(key: &'static str, about: &str, spell: &Spell) -> Draft {
    Draft::of(key)
        .with(about, spell.what.as_str())
        .maybe("from", spell.from.clone())
        .maybe("until", spell.until.clone())
}

fn beginning(key: &'static str, about: &str, since: &Since) -> Draft {
    Draft::of(key).with(about, since.what.as_str()).maybe("from", since.from.clone())
}
