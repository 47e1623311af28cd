//! The situation at a time: what follows from all that was known by then.

use crate::finding::fault::Place;
use crate::record::call::CallReport;
use crate::record::event::Event;
use crate::record::fact::{Fact, FactKind};
use crate::record::ruling::{Ruling, RulingKind};
use crate::record::taking::Taking;
use crate::time::moment::Minutes;
use crate::units::speed::Knots;
use crate::units::wind::Averaging;
use chrono::{DateTime, Utc};
use std::collections::BTreeMap;

/// What the port knows at a time, as plain values; nothing in it is computed from a forecast.
///
/// Made by [`crate::record::fold::situation`]. Ids are as they were written: whether the port has such a task, stage, place or member is judged
/// above, with the help of [`crate::record::mention::mentions`].
#[derive(Clone, Debug, PartialEq, Default)]
pub struct Situation {
    /// The time whose situation this is.
    pub now: DateTime<Utc>,
    /// The advisories in the order they were taken, each file once. Which of them is in force shows only by reading them:
    /// a correction or an old one may come in late.
    pub advisories: Vec<TakenAdvisory>,
    /// The arrival the harbourmaster adopted, by reference place.
    pub adopted: BTreeMap<String, Adopted>,
    /// Stages that were declared or lifted.
    pub stages: BTreeMap<String, StageState>,
    /// Tasks of which anything was told or ordered, by full task id.
    pub tasks: BTreeMap<String, TaskState>,
    /// Outages of members of pools and of whole pools, by id, in order of their beginning; one with none is left out.
    pub means: BTreeMap<String, Vec<Outage>>,
    /// Observed winds, in the order in which they blew.
    pub observed: Vec<Observation>,
    /// When plans were issued, in order.
    pub issued: Vec<Said>,
    /// The last fact about each thing, whether it still holds or not.
    pub facts: BTreeMap<(FactKind, String), Told<Fact>>,
    /// The last ruling about each thing, whether it still holds or not.
    pub rulings: BTreeMap<(RulingKind, String), Told<Ruling>>,
    /// Orders that wait for a second person, by their number.
    pub waiting: BTreeMap<usize, Event>,
    /// What became of calls, in order.
    pub calls: Vec<CallHeard>,
    /// The distinct times at which something became known, in order: at each of them the plan is made again.
    pub changes: Vec<DateTime<Utc>>,
}

/// Who said something, when it was known, and why or how.
#[derive(Clone, Debug, PartialEq)]
pub struct Said {
    /// When the port knew it.
    pub known: DateTime<Utc>,
    /// Its place among all that was known, from 0: tells apart what was known at the same time.
    pub nth: usize,
    /// Who, by title.
    pub by: String,
    /// How it is known, or why it is ordered; empty if not said.
    pub reason: String,
    /// Where it stands in the record.
    pub written: Place,
}

/// A value, and who said so.
#[derive(Clone, Debug, PartialEq)]
pub struct Told<T> {
    /// The value.
    pub value: T,
    /// Who said so.
    pub said: Said,
}

/// A report about a call, and who said so.
#[derive(Clone, Debug, PartialEq)]
pub struct CallHeard {
    /// The report.
    pub report: CallReport,
    /// Who told it, with the name, if it was given.
    pub who: String,
    /// Who told it, and when.
    pub said: Said,
}

/// An advisory that came in.
#[derive(Clone, Debug, PartialEq)]
pub struct TakenAdvisory {
    /// Its file within the port's folder, and what was picked from it; see [`crate::record::taking::Taking::key`].
    pub file: String,
    /// By order it is planned on though it is not from the port's official source.
    pub by_order: bool,
    /// Who took it, and when it was first known.
    pub said: Said,
}

/// An arrival adopted by order.
#[derive(Clone, Debug, PartialEq)]
pub struct Adopted {
    /// The wind that arrives.
    pub wind: Knots,
    /// The working time of its arrival.
    pub time: DateTime<Utc>,
    /// The file of the last advisory taken when it was ordered; `None` if there was none.
    pub advisory_file: Option<String>,
    /// Who ordered it, and when.
    pub said: Said,
}

/// What was ordered about a stage.
#[derive(Clone, Debug, PartialEq, Default)]
pub struct StageState {
    /// From when it holds.
    pub declared: Option<Told<DateTime<Utc>>>,
    /// From when it no longer holds; a declaration after it takes it away.
    pub lifted: Option<Told<DateTime<Utc>>>,
}

impl StageState {
    /// Whether it holds at `now`: declared from then or before, and not lifted by then.
    #[must_use]
    pub fn holds(&self, now: DateTime<Utc>) -> bool {
        let begun = self.declared.as_ref().is_some_and(|declared| declared.value <= now);
        let ended = self.lifted.as_ref().is_some_and(|lifted| lifted.value <= now);
        begun && !ended
    }
}

/// What was told and ordered about a task.
#[derive(Clone, Debug, PartialEq, Default)]
pub struct TaskState {
    /// Its beginning; never after the finish in `outcome`.
    pub started: Option<Started>,
    /// How it ended; `None` while it is open.
    pub outcome: Option<Outcome>,
    /// How long it takes in all, in place of what the files say.
    pub takes: Option<Told<Minutes>>,
    /// It may not start before this.
    pub not_before: Option<Told<DateTime<Utc>>>,
    /// By order it starts then and is not moved.
    pub fixed: Option<Told<DateTime<Utc>>>,
    /// By order it is done in another way than the usual one.
    pub way: Option<Told<Way>>,
}

impl TaskState {
    /// When it was finished, if it is done.
    #[must_use]
    pub fn done_at(&self) -> Option<DateTime<Utc>> {
        match &self.outcome {
            Some(Outcome::Done { at, .. }) => Some(*at),
            Some(Outcome::Cannot { .. } | Outcome::NotNeeded { .. }) | None => None,
        }
    }
}

/// The beginning of a task.
#[derive(Clone, Debug, PartialEq)]
pub struct Started {
    /// When it began.
    pub at: DateTime<Utc>,
    /// Who does it, by id; empty if not said.
    pub members: Vec<String>,
    /// Who told it.
    pub said: Said,
}

/// How a task ended.
#[derive(Clone, Debug, PartialEq)]
pub enum Outcome {
    /// It is done.
    Done {
        /// When it was finished.
        at: DateTime<Utc>,
        /// Evidence, in words; empty if not said.
        evidence: String,
        /// Who told it.
        said: Said,
    },
    /// It cannot be done.
    Cannot {
        /// Who told it.
        said: Said,
    },
    /// It is not needed.
    NotNeeded {
        /// Who said so.
        said: Said,
    },
}

impl Outcome {
    /// From when it holds: the finish, or when it was known.
    #[must_use]
    pub fn since(&self) -> DateTime<Utc> {
        match self {
            Outcome::Done { at, .. } => *at,
            Outcome::Cannot { said } | Outcome::NotNeeded { said } => said.known,
        }
    }
}

/// A way of doing a task that was ordered in place of the usual one.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Way {
    /// Its shorter way.
    Cut,
    /// Its substitute: the task itself is given up.
    Substitute,
}

/// A time without a member of a pool: [from, until).
#[derive(Clone, Debug, PartialEq)]
pub struct Outage {
    /// From when.
    pub from: DateTime<Utc>,
    /// Until when; `None` if unknown. Always after `from`.
    pub until: Option<DateTime<Utc>>,
    /// Who told the latest of it.
    pub said: Said,
}

impl Outage {
    /// Whether the member is out at `time`.
    #[must_use]
    pub fn holds(&self, time: DateTime<Utc>) -> bool {
        self.from <= time && self.until.is_none_or(|until| time < until)
    }
}

/// A wind that was observed.
#[derive(Clone, Debug, PartialEq)]
pub struct Observation {
    /// The place.
    pub place: String,
    /// The speed.
    pub wind: Knots,
    /// Over which time it is averaged.
    pub averaging: Averaging,
    /// When it blew.
    pub at: DateTime<Utc>,
    /// Who told it.
    pub said: Said,
}

impl Situation {
    /// The stage that was declared last and holds now: the one with the latest beginning, then the one told last.
    #[must_use]
    pub fn order_in_force(&self) -> Option<&str> {
        self.stages
            .iter()
            .filter(|(_, state)| state.holds(self.now))
            .filter_map(|(stage, state)| state.declared.as_ref().map(|declared| (stage, declared)))
            .max_by_key(|(_, declared)| (declared.value, declared.said.nth))
            .map(|(stage, _)| stage.as_str())
    }

    /// The latest wind observed at `place`; of several at the same time the one told last.
    #[must_use]
    pub fn latest_observed(&self, place: &str) -> Option<&Observation> {
        self.observed.iter().filter(|seen| seen.place == place).max_by_key(|seen| (seen.at, seen.said.nth))
    }

    /// Whether an advisory was taken already; an order to plan on it is news all the same.
    #[must_use]
    pub fn has_taken(&self, taking: &Taking) -> bool {
        let key = taking.key();
        self.advisories.iter().any(|taken| taken.file == key && (taken.by_order || !taking.by_order))
    }

    /// The times [from, until) at which a place, berth or channel cannot be used; `None` until something else is told.
    #[must_use]
    pub fn unusable(&self, spot: &str) -> Option<(DateTime<Utc>, Option<DateTime<Utc>>)> {
        match &self.facts.get(&(FactKind::Use, spot.to_owned()))?.value {
            Fact::Unusable { from, until, .. } => Some((*from, *until)),
            Fact::Stops { .. }
            | Fact::Resumes { .. }
            | Fact::Usable { .. }
            | Fact::DepthLimit { .. }
            | Fact::Signal { .. }
            | Fact::Authorities { .. }
            | Fact::Sea { .. }
            | Fact::Anchorage { .. } => None,
        }
    }

    /// The outages of a member and of its pool.
    pub fn outages<'a>(&'a self, member: &str, pool: &str) -> impl Iterator<Item = &'a Outage> + use<'a> {
        let of = |id: &str| self.means.get(id).into_iter().flatten();
        of(member).chain(of(pool))
    }
}
