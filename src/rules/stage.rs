//! Readiness stages, what triggers them, and the duties that hang on them.

use crate::finding::fault::Place;
use crate::rules::limit::{Deadline, LimitAt, Reckoning};
use crate::rules::pick::Pick;
use crate::rules::task::{LinkSpec, TaskSpec};
use crate::time::moment::Minutes;
use crate::units::chance::Chance;

/// A port's rules as its files state them. Every id that one part names exists in the other, and the whole of stages and
/// tasks holds no circle: the reader and the work graph have checked that.
#[derive(Clone, Debug, PartialEq)]
pub struct Rules {
    /// Their title: "Quillhaven by-law 7".
    pub title: String,
    /// In force since, in words.
    pub effective: String,
    /// How arrivals are reckoned where a trigger or deadline does not say.
    pub reckoning: Reckoning,
    /// The least chance of the wind at which the head of a plan speaks of an arrival at all.
    pub least_chance: Chance,
    /// How much earlier than the adopted arrival the computed one may be before the plan's head says so first.
    pub adopted_margin: Minutes,
    /// Stages in the order in which they follow each other.
    pub stages: Vec<Stage>,
    /// Duties.
    pub duties: Vec<Duty>,
    /// Tasks and task templates.
    pub tasks: Vec<TaskSpec>,
}

/// A readiness stage.
#[derive(Clone, Debug, PartialEq)]
pub struct Stage {
    /// Its id: "S3".
    pub id: String,
    /// Its name: "Clear the port".
    pub name: String,
    /// Where the rule is written.
    pub source: String,
    /// Any of these makes it due; the earliest counts. Empty: by order only.
    pub any: Vec<Trigger>,
    /// Tasks that must be done before it may be declared.
    pub after: Vec<LinkSpec>,
    /// What is open, closed or by permission while it is in force: ("inbound", "closed").
    pub status: Vec<(String, String)>,
    /// Whether it belongs to the way down (closing) or up (re-opening).
    pub direction: StageDirection,
    /// Whether declaring and lifting it counts only once a second person has confirmed it.
    pub needs_second: bool,
    /// Where it stands in its file.
    pub written: Place,
}

/// Closing or re-opening.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum StageDirection {
    /// Towards a closed port.
    Closing,
    /// Towards an open port.
    Reopening,
}

/// What makes a stage due.
#[derive(Clone, Debug, PartialEq)]
pub enum Trigger {
    /// The wind is forecast at the place within this time.
    Forecast {
        /// Which wind, where.
        wind: LimitAt,
        /// How long before its arrival the stage is due.
        within: Minutes,
        /// How the arrival is reckoned; the rules' own way if `None`.
        reckoning: Option<Reckoning>,
    },
    /// The wind has been observed at the place.
    Observed {
        /// Which wind, where.
        wind: LimitAt,
    },
    /// So long after another stage is due or declared; negative for before.
    Stage {
        /// The other stage.
        stage: String,
        /// How long after it.
        after: Minutes,
    },
    /// So long after the wind has fallen below the limit for good.
    WindOver {
        /// Which wind, where.
        wind: LimitAt,
        /// How long after.
        after: Minutes,
    },
}

/// Something that a rule lays on somebody while a stage is in force.
#[derive(Clone, Debug, PartialEq)]
pub struct Duty {
    /// Its id.
    pub id: String,
    /// The stage it hangs on.
    pub stage: String,
    /// Who, in words.
    pub who: String,
    /// The ships it is for; `None` if it is not about ships.
    pub ships: Option<Pick>,
    /// What, in words.
    pub act: String,
    /// By when; when the stage is declared if `None`.
    pub by: Option<Deadline>,
    /// Tasks (or templates) that fulfil it when done; empty if a person reports it.
    pub fulfilled_by: Vec<String>,
    /// Where the rule is written.
    pub source: String,
    /// Where it stands in its file.
    pub written: Place,
}
