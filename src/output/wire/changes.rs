//! What changed between two plans in JSON.

use crate::output::setting::Setting;
use crate::output::wire::port::{PortOut, port};
use crate::output::wire::value::{SCHEMA, maybe, time};
use crate::output::words::{stage_status_key, turn_key};
use crate::plan::changes::{Changes, TaskMoved};
use serde::{Deserialize, Serialize};

/// Everything that changed.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct ChangesOut {
    /// Version of this form.
    pub schema: u32,
    /// "changes".
    pub kind: String,
    /// The port.
    pub port: PortOut,
    /// The time of the earlier plan.
    pub from: String,
    /// The time of the later one.
    pub to: String,
    /// What became known between them, in words.
    pub news: Vec<String>,
    /// Arrivals that moved.
    pub arrivals: Vec<ArrivalMovedOut>,
    /// Stages whose due time or status changed.
    pub stages: Vec<StageMovedOut>,
    /// Tasks that start at another time.
    pub moved: Vec<MovedOut>,
    /// Tasks whose state changed.
    pub turned: Vec<TurnedOut>,
}

/// A task that starts at another time.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct MovedOut {
    /// Its id.
    pub id: String,
    /// Its name.
    pub name: String,
    /// Its start before.
    pub from: String,
    /// Its start after.
    pub to: String,
    /// `to` less `from`; negative is earlier.
    pub by_min: i64,
    /// Why, in words.
    pub cause: String,
}

/// An arrival that moved.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct ArrivalMovedOut {
    /// The place's name.
    pub place: String,
    /// The wind in words.
    pub wind: String,
    /// Whether the adopted time moved, or the computed one.
    pub adopted: bool,
    /// Before; null if there was none.
    pub from: Option<String>,
    /// After.
    pub to: Option<String>,
    /// Why.
    pub cause: String,
}

/// A stage whose due time or status changed.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct StageMovedOut {
    /// Its id.
    pub id: String,
    /// Its name.
    pub name: String,
    /// Due before; null if it was not due.
    pub from: Option<String>,
    /// Due after.
    pub to: Option<String>,
    /// Status before, as in a plan's `stages`.
    pub was: String,
    /// Status after.
    pub is: String,
    /// Why.
    pub cause: String,
}

/// A task whose state changed.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct TurnedOut {
    /// Its id.
    pub id: String,
    /// Its name.
    pub name: String,
    /// "given_up", "relieved", "late", "unreported", "added", "dropped", "started" or "done".
    pub turn: String,
    /// Why.
    pub cause: String,
}

/// The changes in their JSON form.
#[must_use]
pub fn changes_out(changes: &Changes, setting: &Setting) -> ChangesOut {
    let arrivals = changes.arrivals.iter().map(|arrival| ArrivalMovedOut {
        place: arrival.place.clone(),
        wind: arrival.wind.clone(),
        adopted: arrival.is_adopted,
        from: maybe(arrival.from),
        to: maybe(arrival.to),
        cause: arrival.cause.clone(),
    });
    let stages = changes.stages.iter().map(|stage| StageMovedOut {
        id: stage.id.clone(),
        name: stage.name.clone(),
        from: maybe(stage.from),
        to: maybe(stage.to),
        was: stage_status_key(stage.was).to_owned(),
        is: stage_status_key(stage.is).to_owned(),
        cause: stage.cause.clone(),
    });
    let turned = changes.turned.iter().map(|task| TurnedOut {
        id: task.id.clone(),
        name: task.name.clone(),
        turn: turn_key(task.turn).to_owned(),
        cause: task.cause.clone(),
    });
    ChangesOut {
        schema: SCHEMA,
        kind: "changes".to_owned(),
        port: port(setting),
        from: time(changes.from),
        to: time(changes.to),
        news: changes.news.clone(),
        arrivals: arrivals.collect(),
        stages: stages.collect(),
        moved: moved(changes),
        turned: turned.collect(),
    }
}

/// Tasks that start at another time.
#[must_use]
pub fn moved(changes: &Changes) -> Vec<MovedOut> {
    let one = |task: &TaskMoved| MovedOut {
        id: task.id.clone(),
        name: task.name.clone(),
        from: time(task.from),
        to: time(task.to),
        by_min: task.by().get(),
        cause: task.cause.clone(),
    };
    changes.moved.iter().map(one).collect()
}
