//! One event in the port's record.

use crate::finding::fault::Place;
use crate::record::call::CallReport;
use crate::record::fact::Fact;
use crate::record::ruling::Ruling;
use crate::record::taking::Taking;
use crate::time::moment::Minutes;
use crate::units::speed::Knots;
use crate::units::wind::Averaging;
use chrono::{DateTime, Utc};
use std::cmp::Ordering;

/// Something that became known, was ordered, or was done. Never changed: a mistake is mended by a later event.
#[derive(Clone, Debug, PartialEq)]
pub struct Event {
    /// Its number in the record, from 1: a later event takes it back or confirms it by this number.
    pub number: usize,
    /// When the port knew it.
    pub known: DateTime<Utc>,
    /// Who says so, by title.
    pub by: String,
    /// The name of that person; empty if not said.
    pub name: String,
    /// The title of the one in whose place that person acts; empty if in none.
    pub on_behalf: String,
    /// Whether it counts only once a second person has confirmed it.
    pub awaits_second: bool,
    /// What.
    pub what: What,
    /// How it is known, or why it is ordered; empty if not said.
    pub reason: String,
    /// Where it stands in the record.
    pub place: Place,
}

/// What an event says.
#[derive(Clone, Debug, PartialEq, PartialOrd)]
pub enum What {
    /// An advisory came in.
    AdvisoryTaken(Taking),
    /// The harbourmaster adopts one working arrival time of gales at a reference place, until changed by order.
    ArrivalAdopted {
        /// The reference place.
        place: String,
        /// The wind.
        wind: Knots,
        /// The time; `None` withdraws the adopted one, and the computed one counts again.
        time: Option<DateTime<Utc>>,
    },
    /// A stage is declared, from this time on.
    StageDeclared {
        /// The stage.
        stage: String,
        /// From when it holds; when it is known if not said.
        from: DateTime<Utc>,
    },
    /// A stage is lifted.
    StageLifted {
        /// The stage.
        stage: String,
        /// From when.
        from: DateTime<Utc>,
    },
    /// Work on a task began.
    TaskStarted {
        /// Full task id.
        task: String,
        /// When it began.
        at: DateTime<Utc>,
        /// Who does it, if known: members by id.
        members: Vec<String>,
    },
    /// A task is done.
    TaskDone {
        /// Full task id.
        task: String,
        /// When it was finished.
        at: DateTime<Utc>,
        /// Evidence, in words.
        evidence: String,
    },
    /// A task cannot be done.
    TaskCannot {
        /// Full task id.
        task: String,
    },
    /// A task is not needed.
    TaskNotNeeded {
        /// Full task id.
        task: String,
    },
    /// A task takes another time than the files say, in all.
    TaskTakes {
        /// Full task id.
        task: String,
        /// How long it takes in all.
        takes: Minutes,
    },
    /// From when this is known a task still takes so long: cargo left, work left.
    TaskLeft {
        /// Full task id.
        task: String,
        /// How long it still takes.
        left: Minutes,
    },
    /// A task may not start before this.
    TaskNotBefore {
        /// Full task id.
        task: String,
        /// The time.
        time: DateTime<Utc>,
    },
    /// By order a task starts at this time and is not moved.
    TaskFixed {
        /// Full task id.
        task: String,
        /// Its start; `None` lifts the order.
        start: Option<DateTime<Utc>>,
    },
    /// By order a task may take its shorter way, or must.
    CutOrdered {
        /// Full task id.
        task: String,
    },
    /// By order the substitute of a task is taken: the task itself is given up.
    SubstituteOrdered {
        /// Full task id.
        task: String,
    },
    /// What was told or ordered about a task is taken back, as if never said; for a fixed start see `TaskFixed`.
    TaskRetracted {
        /// Full task id.
        task: String,
        /// What of it.
        kind: Retracted,
    },
    /// A member of a pool, or a whole pool, is out of service.
    MeansOut {
        /// The member or pool.
        member: String,
        /// From when.
        from: DateTime<Utc>,
        /// Until when; `None` if unknown.
        until: Option<DateTime<Utc>>,
    },
    /// A member of a pool, or a whole pool, is back.
    MeansBack {
        /// The member or pool.
        member: String,
        /// From when.
        from: DateTime<Utc>,
    },
    /// A wind was observed.
    Observed {
        /// The place.
        place: String,
        /// The speed.
        wind: Knots,
        /// Over which time it is averaged.
        averaging: Averaging,
        /// When.
        at: DateTime<Utc>,
    },
    /// The plan made at this time was issued to those concerned.
    PlanIssued,
    /// A fact about the port beyond its tasks and means.
    Told(Fact),
    /// An order about a stage, a ship or a rule that moves no time by itself.
    Ruled(Ruling),
    /// What became of a call to whoever must know something.
    Call(CallReport),
    /// An earlier event was a mistake: from now on it counts as never said. Taken back itself, that event counts again.
    Withdrawn {
        /// The number of that event.
        event: usize,
    },
    /// A second person confirms an order that waits for one.
    Confirmed {
        /// The number of that order.
        event: usize,
    },
}

/// What an event can take back about a task.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Retracted {
    /// That it started, is done, cannot be done or is not needed: somebody ticked the wrong line.
    Progress,
    /// How long it takes: the files count again.
    Takes,
    /// The time before which it may not start.
    NotBefore,
    /// The order to cut it or to take its substitute.
    Way,
}

impl Event {
    /// Orders events by when they were known, then by what they say; equal are those that say the same, wherever they stand
    /// and whatever their numbers.
    #[must_use]
    pub fn compare(&self, other: &Event) -> Ordering {
        let said = (&self.by, &self.name, &self.on_behalf, &self.reason, self.awaits_second);
        let other_said = (&other.by, &other.name, &other.on_behalf, &other.reason, other.awaits_second);
        // No part of an event is ever NaN, so any two can be compared. What they say differs sooner than who says it.
        let what = self.what.partial_cmp(&other.what).unwrap_or(Ordering::Equal);
        self.known.cmp(&other.known).then(what).then_with(|| said.cmp(&other_said))
    }

    /// Whether another person says `other`: told apart by their names where both are given, else by title.
    #[must_use]
    pub fn is_by_another(&self, other: &Event) -> bool {
        let same = |one: &str, two: &str| one.trim().to_lowercase() == two.trim().to_lowercase();
        match (self.name.as_str(), other.name.as_str()) {
            ("", _) | (_, "") => !same(&self.by, &other.by),
            (one, two) => !same(one, two),
        }
    }

    /// The number of the event that this one takes back.
    #[must_use]
    pub fn withdraws(&self) -> Option<usize> {
        if let What::Withdrawn { event } = self.what { Some(event) } else { None }
    }
}
