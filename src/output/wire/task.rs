//! One task of a plan in JSON.

use crate::output::wire::value::{chance, maybe, time};
use crate::output::words::{stake, task_state_key};
use crate::plan::sheet::{ChainLink, GivenUp, TaskLine};
use crate::time::moment::Moment;
use serde::{Deserialize, Serialize};
use std::collections::BTreeMap;

/// A task.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct TaskOut {
    /// Its full id.
    pub id: String,
    /// What is done.
    pub name: String,
    /// "given_up", "started", "planned", "waiting", "done" or "not_needed".
    pub state: String,
    /// Planned or actual start.
    pub start: Option<String>,
    /// Planned or actual finish.
    pub finish: Option<String>,
    /// The last start with which all deadlines that hang on it can still be met.
    pub latest_start: Option<String>,
    /// `latest_start` less `start`.
    pub spare_min: Option<i64>,
    /// The hard deadline.
    pub deadline: Option<String>,
    /// The soft one.
    pub due: Option<String>,
    /// How long it takes.
    pub takes_min: i64,
    /// Members by pool.
    pub members: BTreeMap<String, Vec<String>>,
    /// Who does it.
    pub who: String,
    /// Where.
    pub at: String,
    /// Who approves.
    pub approvers: Vec<String>,
    /// How it is confirmed.
    pub confirm: String,
    /// "life", "harm", "loss" or "order".
    pub stake: String,
    /// The chance that a wind which stops it comes before it is finished; null if none limits it.
    pub caught: Option<f64>,
    /// The stage that must be declared before it starts, and is not.
    pub if_declared: Option<String>,
    /// Whether its start is fixed by order.
    pub ordered: bool,
    /// Whether its planned time has passed without a report.
    pub unreported: bool,
    /// The price of the shorter way, if that is taken.
    pub cut: Option<String>,
    /// The given-up task for which it stands in.
    pub stands_in_for: Option<String>,
    /// Late against its soft deadline by this much; 0 if not.
    pub late_by_min: i64,
    /// Why it starts when it starts.
    pub chain: ChainOut,
    /// Why it is given up; null if it is not.
    pub given_up: Option<GivenUpOut>,
    /// Where its numbers come from.
    pub basis: String,
}

/// A chain of causes; the minutes of its links add up from `from`.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct ChainOut {
    /// Where it begins.
    pub from: String,
    /// Its links.
    pub links: Vec<LinkOut>,
}

/// A link of a chain.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct LinkOut {
    /// What took the time.
    pub what: String,
    /// How long.
    pub minutes: i64,
}

/// Why a task is given up.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct GivenUpOut {
    /// The cause in words.
    pub why: String,
    /// Whether no plan at all can do it; otherwise none was found.
    pub proved: bool,
    /// When it would be finished.
    pub would_finish: Option<String>,
    /// By how much it misses.
    pub late_by_min: Option<i64>,
    /// The chain to its would-be finish.
    pub chain: ChainOut,
}

/// A task.
#[must_use]
pub fn task(task: &TaskLine) -> TaskOut {
    TaskOut {
        id: task.id.clone(),
        name: task.name.clone(),
        state: task_state_key(task.state).to_owned(),
        start: maybe(task.start),
        finish: maybe(task.finish),
        latest_start: maybe(task.latest_start),
        spare_min: task.latest_start.zip(task.start).map(|(latest, start)| (latest - start).get()),
        deadline: maybe(task.deadline),
        due: maybe(task.due),
        takes_min: task.takes.get(),
        members: task.members.iter().cloned().collect(),
        who: task.who.clone(),
        at: task.at.clone(),
        approvers: task.approvers.clone(),
        confirm: task.confirm.clone(),
        stake: stake(task.stake).to_owned(),
        caught: task.caught.map(chance),
        if_declared: task.if_declared.clone(),
        ordered: task.is_ordered,
        unreported: task.is_unreported,
        cut: task.cut.clone(),
        stands_in_for: task.stands_in_for.clone(),
        late_by_min: task.late_by.get(),
        chain: chain(task.chain_from, &task.chain),
        given_up: task.given_up.as_ref().map(given_up),
        basis: task.basis.clone(),
    }
}

fn given_up(given_up: &GivenUp) -> GivenUpOut {
    GivenUpOut {
        why: given_up.why.clone(),
        proved: given_up.is_proved,
        would_finish: maybe(given_up.would_finish),
        late_by_min: given_up.late_by.map(|late| late.get()),
        chain: chain(given_up.chain_from, &given_up.chain),
    }
}

fn chain(from: Moment, links: &[ChainLink]) -> ChainOut {
    let links =
        links.iter().map(|link| LinkOut { what: link.what.clone(), minutes: link.minutes.get() }).collect();
    ChainOut { from: time(from), links }
}
