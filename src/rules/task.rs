//! Tasks and task templates: what closing the port takes.

use crate::finding::fault::Place;
use crate::rules::limit::{Anchor, Deadline, LimitAt};
use crate::rules::pick::ForEach;
use crate::time::moment::Minutes;
use chrono::{DateTime, Utc};

/// A task, or a template that makes one task for each ship, piece of plant or berth. An instance of a template is called
/// `<thing>/<template>`: "V01/sail".
#[derive(Clone, Debug, PartialEq)]
pub struct TaskSpec {
    /// Its id; for a template the part after the slash.
    pub id: String,
    /// What is done; "{name}" stands for the thing's name, "{id}" for its id.
    pub name: String,
    /// What it is repeated for; `None` for a single task.
    pub for_each: Option<ForEach>,
    /// How long it takes.
    pub takes: Amount<Minutes>,
    /// A shorter way, with its price.
    pub may_be_cut: Option<Cut>,
    /// Tasks that stand in for it if it is given up.
    pub or_else: Option<Substitute>,
    /// What it waits for.
    pub after: Vec<LinkSpec>,
    /// The stage that must be declared before it may start.
    pub gate: Option<String>,
    /// Times before which it may not start; all must have passed.
    pub not_before: Vec<NotBefore>,
    /// Times by which it must, or should, be finished.
    pub done_before: Vec<Deadline>,
    /// Winds at which the work itself stops, whatever the clock says.
    pub stops_at: Vec<LimitAt>,
    /// Tide needed while it runs.
    pub tide: Option<TideNeed>,
    /// Daylight needed.
    pub daylight: Option<DaylightNeed>,
    /// Passage through a channel.
    pub passage: Option<Passage>,
    /// People, craft and machines it holds.
    pub needs: Vec<NeedSpec>,
    /// Who does it, in words.
    pub who: String,
    /// Who approves it, in words; all of them.
    pub approvers: Vec<String>,
    /// How "done" is confirmed: "second person at each corner".
    pub confirm: String,
    /// The berth or place where it is done, in words or by id; the thing's own berth if empty.
    pub at: String,
    /// What is at stake.
    pub stake: Stake,
    /// Consequence within its stake, 1 to 1000: the greater, the later it is given up.
    pub weight: u32,
    /// Where its numbers come from: "common practice, no source; unconfirmed".
    pub basis: String,
    /// Where it stands in its file.
    pub written: Place,
}

/// What is at stake when a task is not done, the gravest first.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Stake {
    /// Lives.
    Life,
    /// Ships, plant or cargo that would do harm or be lost.
    Harm,
    /// Damage to property.
    Loss,
    /// Order and paperwork.
    Order,
}

/// A value stated in the template, or the thing's own value by name.
#[derive(Clone, Debug, PartialEq)]
pub enum Amount<T> {
    /// Stated.
    Stated(T),
    /// The thing's own value of this name.
    Own(String),
}

/// A shorter way to do a task.
#[derive(Clone, Debug, PartialEq)]
pub struct Cut {
    /// How long it then takes in all.
    pub to: Amount<Minutes>,
    /// What is lost, in words: "260 container moves left behind".
    pub price: String,
    /// Whether the plan may take it by itself, or only offers it.
    pub leave: Leave,
}

/// Tasks that stand in for a task that is given up.
#[derive(Clone, Debug, PartialEq)]
pub struct Substitute {
    /// Template ids for the same thing, or task ids.
    pub tasks: Vec<String>,
    /// What it costs, in words.
    pub price: String,
    /// Whether the plan may take it by itself, or only offers it.
    pub leave: Leave,
}

/// Whether the plan may choose something by itself.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Leave {
    /// The file permits it.
    Permitted,
    /// It is offered, and waits for an order.
    ByOrder,
}

/// What a task waits for.
#[derive(Clone, Debug, PartialEq)]
pub struct LinkSpec {
    /// The task it waits for: an id, a template id for the same thing, or a template id and whose instances.
    pub task: LinkTarget,
    /// Which ends are tied.
    pub kind: LinkKind,
    /// At least this long between them; negative lets them overlap.
    pub lag: Minutes,
    /// What becomes of this task if the other is given up.
    pub if_given_up: IfGivenUp,
    /// Where it stands in its file.
    pub written: Place,
}

/// Which task a link comes from.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum LinkTarget {
    /// One task by its full id ("H05", "V10/sail").
    Task(String),
    /// The same thing's instance of a template.
    Same(String),
    /// All instances of a template.
    Every(String),
    /// For plant and berths: the instances for ships at the same berth.
    ShipsAtBerth(String),
    /// For ships and berths: the instances for plant at the same berth.
    PlantAtBerth(String),
}

/// Which ends of two tasks are tied: the later one's start or finish waits for the earlier one's start or finish.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum LinkKind {
    /// Starts after the other has finished.
    FinishStart,
    /// Starts after the other has started.
    StartStart,
    /// Finishes after the other has finished.
    FinishFinish,
    /// Finishes after the other has started.
    StartFinish,
}

/// What becomes of a task whose predecessor is given up.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum IfGivenUp {
    /// It is given up too.
    GiveUpToo,
    /// It may start as soon as that is decided.
    StartAtDecision,
}

/// A time before which a task may not start.
#[derive(Clone, Debug, PartialEq)]
pub enum NotBefore {
    /// So long after an anchor; negative for before.
    After(Anchor, Minutes),
    /// The thing's own time of this name.
    Own(String),
    /// A fixed instant.
    At(DateTime<Utc>),
}

/// Water needed under the keel.
#[derive(Clone, Debug, PartialEq)]
pub struct TideNeed {
    /// In which channel.
    pub channel: String,
    /// The shallow part is passed this long after the start ...
    pub from: Minutes,
    /// ... until this long after the start.
    pub until: Minutes,
}

/// Daylight needed for a task.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum DaylightNeed {
    /// From sunrise to sunset, all of it.
    Whole,
    /// It must start by daylight.
    Start,
}

/// A passage through a channel.
#[derive(Clone, Debug, PartialEq)]
pub struct Passage {
    /// Which channel.
    pub channel: String,
    /// In or out.
    pub outbound: bool,
    /// Entered this long after the start.
    pub enters: Minutes,
    /// Left this long after the start.
    pub leaves: Minutes,
}

/// People, craft or machines that a task holds.
#[derive(Clone, Debug, PartialEq)]
pub struct NeedSpec {
    /// From which pool.
    pub pool: String,
    /// How many.
    pub count: Amount<u32>,
    /// What each must be able to do; `None` if anybody will do.
    pub class: Option<Amount<String>>,
    /// Held this long before the start.
    pub before: Minutes,
    /// And this long after the finish.
    pub after: Minutes,
}
