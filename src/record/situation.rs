//! The situation at a time: what follows from all that was known by then.

use crate::finding::fault::Place;
use crate::record::event::{Event, Retracted, What};
use crate::record::taking::Taking;
use crate::time::moment::Minutes;
use crate::units::speed::Knots;
use crate::units::wind::Averaging;
use chrono::{DateTime, Utc};
use std::collections::BTreeMap;

/// What the port knows at a time, as plain values; nothing in it is computed from a forecast.
///
/// Made by [`situation`]. Ids are as they were written: whether the port has such a task, stage, place or member is judged
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
    /// Outages of members of pools, by member, in order of their beginning; a member with none is left out.
    pub means: BTreeMap<String, Vec<Outage>>,
    /// Observed winds, in the order in which they blew.
    pub observed: Vec<Observation>,
    /// When plans were issued, in order.
    pub issued: Vec<Said>,
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

/// The situation at `now`: folds all events known at or before it, in order of time known, ties in the order given.
///
/// Later events mend earlier ones:
/// * The same event twice counts once (it may stand at two places of the record), and so does a file taken twice: the first
///   taking counts.
/// * **Arrival**: adopting replaces what was adopted for the place, withdrawing takes it away.
/// * **Stage**: declaring replaces an earlier declaration and takes away a lifting; lifting stands beside the declaration.
/// * **Task, progress**: of done, cannot and not needed the last told counts. A start told after one of them takes it away
///   if the work began later than it (it goes on again); an earlier start is only told late, and the outcome stands. A
///   finish before the start told so far takes that start away.
/// * **Task, orders**: of each kind (time taken, not before, fixed start, other way) the last counts; progress leaves them
///   alone, and so they leave progress. [`What::TaskRetracted`] takes away what was said of one kind.
/// * **Member**: news of an outage that is running at its beginning moves the end of that outage; other news is an outage
///   more. Back ends what is running at that time, and takes away an outage that would begin at that very time; a later
///   one stays.
/// * **Observation**: told again for the same place, time and averaging replaces.
#[must_use]
pub fn situation(events: &[Event], now: DateTime<Utc>) -> Situation {
    let mut fold = Situation { now, ..Situation::default() };
    for (nth, event) in in_order(events).into_iter().take_while(|event| event.known <= now).enumerate() {
        fold.add(event, nth);
    }
    fold
}

/// The events in order of time known, ties in the order given, without those that say the same as one before.
#[must_use]
pub fn in_order(events: &[Event]) -> Vec<&Event> {
    let mut once: Vec<(usize, &Event)> = events.iter().enumerate().collect();
    once.sort_by(|(_, a), (_, b)| a.compare(b));
    once.dedup_by(|(_, later), (_, earlier)| later.compare(earlier).is_eq());
    once.sort_by_key(|(nth, event)| (event.known, *nth));
    once.into_iter().map(|(_, event)| event).collect()
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

    /// Takes in the next event by [`in_order`], the `nth` from 0; for all up to a time see [`situation`].
    pub fn add(&mut self, event: &Event, nth: usize) {
        if matches!(&event.what, What::AdvisoryTaken(taking) if self.has_taken(taking)) {
            return;
        }
        if self.changes.last() != Some(&event.known) {
            self.changes.push(event.known);
        }
        let said = Said {
            known: event.known,
            nth,
            by: event.by.clone(),
            reason: event.reason.clone(),
            written: event.place.clone(),
        };
        self.tell(&event.what, said);
    }

    fn tell(&mut self, what: &What, said: Said) {
        match what {
            What::AdvisoryTaken(taking) => {
                self.advisories.push(TakenAdvisory { file: taking.key(), by_order: taking.by_order, said });
            }
            What::ArrivalAdopted { place, wind, time } => self.adopt(place, *wind, *time, said),
            What::StageDeclared { stage, from } => {
                let declared = Some(Told { value: *from, said });
                self.stages.insert(stage.clone(), StageState { declared, lifted: None });
            }
            What::StageLifted { stage, from } => {
                self.stages.entry(stage.clone()).or_default().lifted = Some(Told { value: *from, said });
            }
            What::TaskStarted { task, at, members } => {
                self.task(task).start(Started { at: *at, members: members.clone(), said });
            }
            What::TaskDone { task, at, evidence } => self.task(task).finish(*at, evidence, said),
            What::TaskCannot { task } => self.task(task).outcome = Some(Outcome::Cannot { said }),
            What::TaskNotNeeded { task } => self.task(task).outcome = Some(Outcome::NotNeeded { said }),
            What::TaskTakes { task, takes } => self.task(task).takes = Some(Told { value: *takes, said }),
            What::TaskNotBefore { task, time } => {
                self.task(task).not_before = Some(Told { value: *time, said });
            }
            What::TaskFixed { task, start } => {
                self.task(task).fixed = start.map(|value| Told { value, said });
            }
            What::CutOrdered { task } => self.task(task).way = Some(Told { value: Way::Cut, said }),
            What::SubstituteOrdered { task } => {
                self.task(task).way = Some(Told { value: Way::Substitute, said });
            }
            What::TaskRetracted { task, kind } => self.task(task).retract(*kind),
            What::MeansOut { member, from, until } => self.take_out(member, *from, *until, said),
            What::MeansBack { member, from } => self.bring_back(member, *from, &said),
            What::Observed { place, wind, averaging, at } => {
                let place = place.clone();
                self.observe(Observation { place, wind: *wind, averaging: *averaging, at: *at, said });
            }
            What::PlanIssued => self.issued.push(said),
        }
    }

    fn task(&mut self, task: &str) -> &mut TaskState {
        self.tasks.entry(task.to_owned()).or_default()
    }

    fn adopt(&mut self, place: &str, wind: Knots, time: Option<DateTime<Utc>>, said: Said) {
        let Some(time) = time else {
            self.adopted.remove(place);
            return;
        };
        let advisory_file = self.advisories.last().map(|taken| taken.file.clone());
        self.adopted.insert(place.to_owned(), Adopted { wind, time, advisory_file, said });
    }

    fn take_out(&mut self, member: &str, from: DateTime<Utc>, until: Option<DateTime<Utc>>, said: Said) {
        if until.is_some_and(|until| until <= from) {
            return;
        }
        let outages = self.means.entry(member.to_owned()).or_default();
        let mut is_news_of_one = false;
        for outage in outages.iter_mut().filter(|outage| outage.holds(from)) {
            outage.until = until;
            outage.said = said.clone();
            is_news_of_one = true;
        }
        if !is_news_of_one {
            outages.push(Outage { from, until, said });
            outages.sort_by_key(|outage| (outage.from, outage.said.nth));
        }
    }

    fn bring_back(&mut self, member: &str, from: DateTime<Utc>, said: &Said) {
        let Some(outages) = self.means.get_mut(member) else { return };
        outages.retain(|outage| outage.from != from);
        for outage in outages.iter_mut().filter(|outage| outage.holds(from)) {
            outage.until = Some(from);
            outage.said = said.clone();
        }
        if outages.is_empty() {
            self.means.remove(member);
        }
    }

    fn observe(&mut self, new: Observation) {
        let first = self.observed.partition_point(|old| old.at < new.at);
        let after = self.observed.partition_point(|old| old.at <= new.at);
        let is_same = |old: &Observation| old.place == new.place && old.averaging == new.averaging;
        match self.observed.iter_mut().take(after).skip(first).find(|old| is_same(old)) {
            Some(old) => *old = new,
            None => self.observed.insert(after, new),
        }
    }
}

impl TaskState {
    fn start(&mut self, started: Started) {
        if self.outcome.as_ref().is_some_and(|outcome| outcome.since() < started.at) {
            self.outcome = None;
        }
        self.started = Some(started);
    }

    fn finish(&mut self, at: DateTime<Utc>, evidence: &str, said: Said) {
        if self.started.as_ref().is_some_and(|started| started.at > at) {
            self.started = None;
        }
        self.outcome = Some(Outcome::Done { at, evidence: evidence.to_owned(), said });
    }

    fn retract(&mut self, kind: Retracted) {
        match kind {
            Retracted::Progress => (self.started, self.outcome) = (None, None),
            Retracted::Takes => self.takes = None,
            Retracted::NotBefore => self.not_before = None,
            Retracted::Way => self.way = None,
        }
    }
}
