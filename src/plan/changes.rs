//! What changed between two plans, and why.

use crate::plan::draft::LEAST_SPARE;
use crate::plan::news::news_words;
use crate::plan::sheet::{Arrival, Plan, StageLine, StageStatus, TaskLine, TaskState};
use crate::record::event::{Event, What};
use crate::record::mention::{MentionKind, mentions};
use crate::time::clock::PortClock;
use crate::time::moment::{Minutes, Moment};
use std::collections::BTreeMap;

/// Everything that differs between an earlier plan and a later one.
#[derive(Clone, Debug, PartialEq)]
pub struct Changes {
    /// The time of the earlier plan.
    pub from: Moment,
    /// The time of the later plan.
    pub to: Moment,
    /// What became known between them, in words, oldest first: "advisory 12 taken", "T3 out of service".
    pub news: Vec<String>,
    /// Arrivals that moved.
    pub arrivals: Vec<ArrivalMoved>,
    /// Stages whose due time or status changed.
    pub stages: Vec<StageMoved>,
    /// Tasks with another start, by their new start.
    pub moved: Vec<TaskMoved>,
    /// Tasks whose state changed: newly given up first, then relieved, late, unreported, added, dropped, started, done.
    pub turned: Vec<TaskTurned>,
}

/// An arrival that moved.
#[derive(Clone, Debug, PartialEq)]
pub struct ArrivalMoved {
    /// The place's name.
    pub place: String,
    /// The wind in words.
    pub wind: String,
    /// Whether the adopted or the computed time moved.
    pub is_adopted: bool,
    /// Before; `None` if there was none.
    pub from: Option<Moment>,
    /// After.
    pub to: Option<Moment>,
    /// Why, in words.
    pub cause: String,
}

/// A stage whose due time or status changed.
#[derive(Clone, Debug, PartialEq)]
pub struct StageMoved {
    /// Its id.
    pub id: String,
    /// Its name.
    pub name: String,
    /// Due before.
    pub from: Option<Moment>,
    /// Due after.
    pub to: Option<Moment>,
    /// Status before.
    pub was: StageStatus,
    /// Status after.
    pub is: StageStatus,
    /// Why, in words.
    pub cause: String,
}

/// A task that starts at another time.
#[derive(Clone, Debug, PartialEq)]
pub struct TaskMoved {
    /// Its id.
    pub id: String,
    /// Its name.
    pub name: String,
    /// Its start before.
    pub from: Moment,
    /// Its start after.
    pub to: Moment,
    /// Why, in words.
    pub cause: String,
}

impl TaskMoved {
    /// How far it moved; negative is earlier.
    #[must_use]
    pub fn by(&self) -> Minutes {
        self.to - self.from
    }
}

/// A task whose state changed.
#[derive(Clone, Debug, PartialEq)]
pub struct TaskTurned {
    /// Its id.
    pub id: String,
    /// Its name.
    pub name: String,
    /// How.
    pub turn: Turn,
    /// Why, in words.
    pub cause: String,
}

/// How a task's state changed.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Turn {
    /// It no longer fits.
    GivenUp,
    /// It fits again.
    Relieved,
    /// It is late against its soft deadline.
    Late,
    /// Its time passed without a report.
    Unreported,
    /// It has a time now.
    Added,
    /// It has none any more.
    Dropped,
    /// It was begun.
    Started,
    /// It was done.
    Done,
}

/// What differs between two plans of one port, and why; `events` is the port's whole record.
#[must_use]
pub fn changes_between(earlier: &Plan, later: &Plan, events: &[Event], clock: &PortClock) -> Changes {
    let mut between: Vec<&Event> = events
        .iter()
        .filter(|event| {
            let known = Moment::at_or_after(event.known);
            earlier.now < known && known <= later.now
        })
        .collect();
    between.sort_by_key(|event| event.known);
    changes_by(earlier, later, between, clock)
}

/// What differs between two plans because of the events `between` them, whatever the times of the plans.
#[must_use]
pub fn changes_by(earlier: &Plan, later: &Plan, between: Vec<&Event>, clock: &PortClock) -> Changes {
    let teller = Teller { earlier, later, between, clock };
    let before: BTreeMap<&str, &TaskLine> =
        earlier.tasks.iter().map(|line| (line.id.as_str(), line)).collect();
    let pairs = || later.tasks.iter().filter_map(|line| before.get(line.id.as_str()).map(|old| (*old, line)));
    let mut turned: Vec<TaskTurned> = pairs().filter_map(|(old, new)| teller.turned(old, new)).collect();
    turned.sort_by(|a, b| (a.turn, &a.id).cmp(&(b.turn, &b.id)));
    Changes {
        from: earlier.now,
        to: later.now,
        news: teller.between.iter().map(|event| news_words(event, clock)).collect(),
        arrivals: teller.arrivals(),
        stages: teller.stages(),
        moved: pairs().filter_map(|(old, new)| teller.moved(old, new)).collect(),
        turned,
    }
}

struct Teller<'a> {
    earlier: &'a Plan,
    later: &'a Plan,
    between: Vec<&'a Event>,
    clock: &'a PortClock,
}

impl Teller<'_> {
    fn arrivals(&self) -> Vec<ArrivalMoved> {
        let mut moved = Vec::new();
        let same = |a: &&Arrival, b: &Arrival| {
            a.place == b.place && (a.wind.speed.get() - b.wind.speed.get()).abs() < 0.05
        };
        for new in &self.later.arrivals {
            let old = self.earlier.arrivals.iter().find(|old| same(old, new));
            let mut say = |is_adopted, from: Option<Moment>, to: Option<Moment>, cause: String| {
                if from != to {
                    let (place, wind) = (new.place_name.clone(), new.wind.to_string());
                    moved.push(ArrivalMoved { place, wind, is_adopted, from, to, cause });
                }
            };
            let ordered = self.said_about(MentionKind::Place, &new.place);
            say(true, old.and_then(|old| old.adopted), new.adopted, ordered.unwrap_or_default());
            say(false, old.and_then(|old| old.computed), new.computed, self.advisory_words());
        }
        moved
    }

    /// "advisory 12": what made the computed arrivals move.
    fn advisory_words(&self) -> String {
        let number = self.later.advisory.as_ref().map(|advisory| match advisory.number {
            Some(number) => format!("advisory {number}"),
            None => advisory.file.clone(),
        });
        number.unwrap_or_else(|| String::from("no advisory"))
    }

    fn stages(&self) -> Vec<StageMoved> {
        let changed = |(old, new): (&StageLine, &StageLine)| {
            if old.due == new.due && old.status == new.status {
                return None;
            }
            let ordered = self.said_about(MentionKind::Stage, &new.id);
            let cause = ordered.unwrap_or_else(|| {
                if old.due == new.due { String::from("the clock") } else { self.arrival_cause() }
            });
            Some(StageMoved {
                id: new.id.clone(),
                name: new.name.clone(),
                from: old.due,
                to: new.due,
                was: old.status,
                is: new.status,
                cause,
            })
        };
        let old = |new: &StageLine| self.earlier.stages.iter().find(|old| old.id == new.id);
        self.later
            .stages
            .iter()
            .filter_map(|new| old(new).map(|old| (old, new)))
            .filter_map(changed)
            .collect()
    }

    /// What moved the times that count from a wind: an order that adopted an arrival, else the advisory.
    fn arrival_cause(&self) -> String {
        let adopted = self
            .later
            .arrivals
            .iter()
            .zip(&self.earlier.arrivals)
            .find(|(new, old)| new.place == old.place && new.adopted != old.adopted);
        let by_order = adopted.and_then(|(new, _)| self.said_about(MentionKind::Place, &new.place));
        by_order.unwrap_or_else(|| self.advisory_words())
    }

    fn moved(&self, old: &TaskLine, new: &TaskLine) -> Option<TaskMoved> {
        let (from, to) = (old.start?, new.start?);
        if from == to || new.state == TaskState::Done || new.state == TaskState::Started {
            return None;
        }
        Some(TaskMoved { id: new.id.clone(), name: new.name.clone(), from, to, cause: self.cause(old, new) })
    }

    fn turned(&self, old: &TaskLine, new: &TaskLine) -> Option<TaskTurned> {
        let turn = match (old.state, new.state) {
            (was, TaskState::GivenUp) if was != TaskState::GivenUp => Turn::GivenUp,
            (TaskState::GivenUp, TaskState::Planned | TaskState::Waiting) => Turn::Relieved,
            (was, TaskState::Done) if was != TaskState::Done => Turn::Done,
            (was, TaskState::Started) if was != TaskState::Started => Turn::Started,
            (TaskState::Waiting | TaskState::NotNeeded, TaskState::Planned) => Turn::Added,
            (TaskState::Planned | TaskState::GivenUp, TaskState::NotNeeded) => Turn::Dropped,
            (TaskState::Planned, TaskState::Waiting) => Turn::Dropped,
            _ if new.is_unreported && !old.is_unreported => Turn::Unreported,
            _ if new.late_by > Minutes::ZERO && old.late_by <= Minutes::ZERO => Turn::Late,
            _ => return None,
        };
        let cause = match turn {
            Turn::GivenUp => {
                new.given_up.as_ref().map(|g| g.why.clone()).unwrap_or_default() + &self.because_of(old, new)
            }
            Turn::Relieved
            | Turn::Late
            | Turn::Unreported
            | Turn::Added
            | Turn::Dropped
            | Turn::Started
            | Turn::Done => self.cause(old, new),
        };
        Some(TaskTurned { id: new.id.clone(), name: new.name.clone(), turn, cause })
    }

    /// What was said of a newly given-up task or its members, else what moved the deadline that it misses.
    fn because_of(&self, old: &TaskLine, new: &TaskLine) -> String {
        let members = members_and_pools(old);
        let told = std::iter::once(self.said_about(MentionKind::Task, &new.id))
            .chain(members.into_iter().map(|member| self.said_about(MentionKind::Member, member)));
        if let Some(said) = told.flatten().next() {
            return format!("; {said}");
        }
        match (old.deadline, new.deadline) {
            (was, Some(is)) if was != Some(is) => format!("; {} moved its deadline", self.arrival_cause()),
            (_, Some(_) | None) => String::new(),
        }
    }

    /// Why a task is not where it was: what was said of it or its members first, then its stage, its deadline, and what
    /// it waits for now.
    fn cause(&self, old: &TaskLine, new: &TaskLine) -> String {
        if let Some(said) = self.said_about(MentionKind::Task, &new.id) {
            return said;
        }
        if new.is_unreported {
            return String::from("its time passed without a report, so it is placed again");
        }
        let members = members_and_pools(old);
        if let Some(said) =
            members.into_iter().find_map(|member| self.said_about(MentionKind::Member, member))
        {
            return said;
        }
        let stage = old.if_declared.as_ref().or(new.if_declared.as_ref());
        if let Some(stage) = stage
            && let Some(moved) = self.stages().into_iter().find(|moved| moved.id == *stage)
        {
            return format!("stage {stage}: {}", moved.cause);
        }
        let is_earlier = matches!((old.start, new.start), (Some(was), Some(is)) if is < was);
        let spare = old.start.zip(new.latest_start).map(|(was, latest)| latest - was);
        if is_earlier && spare.is_some_and(|spare| spare < LEAST_SPARE) {
            return format!("its issued time left less than {LEAST_SPARE} to spare");
        }
        if let Some(last) = new.chain.last() {
            return last.what.clone();
        }
        if old.deadline != new.deadline {
            return self.arrival_cause();
        }
        if is_earlier {
            return String::from("it can go earlier now, and must for what waits for it");
        }
        // A call tells what moved; it moves nothing.
        let mut moving = self.between.iter().rev().filter(|event| !matches!(event.what, What::Call(_)));
        moving.next().map_or_else(|| String::from("the clock"), |event| news_words(event, self.clock))
    }

    /// The last thing that was said of something between the two plans.
    fn said_about(&self, kind: MentionKind, id: &str) -> Option<String> {
        let about = |event: &&&Event| mentions(event).iter().any(|m| m.kind == kind && m.id == id);
        self.between.iter().rev().find(about).map(|event| news_words(event, self.clock))
    }
}

/// Whom a task had: news may be of a member or of its whole pool.
fn members_and_pools(line: &TaskLine) -> Vec<&String> {
    line.members.iter().flat_map(|(pool, members)| members.iter().chain(std::iter::once(pool))).collect()
}
