//! What times the odds and the record give to stages and tasks.

use crate::record::situation::Situation;
use crate::rules::limit::{Anchor, Binding, Deadline, LimitAt};
use crate::rules::stage::{Rules, StageDirection, Trigger};
use crate::rules::task::NotBefore;
use crate::time::moment::{Minutes, Moment};
use crate::units::chance::Chance;
use crate::work::graph::{Task, WorkGraph};
use crate::work::observed::first_met;
use crate::work::questions::question_key;
use crate::work::reckoned::{ArrivalBook, Basis, moment_of};
use petgraph::graph::NodeIndex;
use std::collections::BTreeMap;

/// The graph with its times at one moment of one record.
#[derive(Clone, Debug, PartialEq)]
pub struct Timed {
    /// One for each stage, in the order of the rules.
    pub stages: Vec<StageTimes>,
    /// One for each task.
    pub tasks: BTreeMap<NodeIndex, TaskTimes>,
}

/// A stage's times.
#[derive(Clone, Debug, PartialEq)]
pub struct StageTimes {
    /// When its triggers make it due; `None` if none does.
    pub due: Option<Moment>,
    /// Which trigger that is, by its place in the stage's list.
    pub trigger: Option<usize>,
    /// What it rests on.
    pub basis: Basis,
    /// Since when it is declared.
    pub declared: Option<Moment>,
    /// Since when it is lifted.
    pub lifted: Option<Moment>,
    /// How it stands.
    pub standing: Standing,
}

/// How a stage stands.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Standing {
    /// Nothing makes it due.
    NotDue,
    /// Due later.
    Later,
    /// Due now and not declared.
    DueNow,
    /// Declared, in force.
    Declared,
    /// A later stage of the same direction is declared.
    Superseded,
    /// Lifted.
    Lifted,
}

/// A task's times.
#[derive(Clone, Debug, PartialEq)]
pub struct TaskTimes {
    /// Before this it may not start; `None` while the stage that gates it is not due.
    pub release: Option<Moment>,
    /// The stage that has to be declared first and is not, by its place in the rules.
    pub if_declared: Option<usize>,
    /// The earliest hard deadline, and what it counts from.
    pub deadline: Option<Bound>,
    /// The earliest soft one.
    pub due: Option<Bound>,
    /// Keys of the winds that stop the task or that it has to precede, for its risk.
    pub risks: Vec<String>,
}

/// A bound on a task's finish, and where it comes from.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Bound {
    /// The bound.
    pub at: Moment,
    /// What it counts from, in words: "34 kt at Pilot station, less 12 h".
    pub because: String,
    /// What it rests on.
    pub basis: Basis,
}

/// Gives every stage and task its times.
///
/// A stage's due time comes from the record and the odds alone, never from the plan.
#[must_use]
pub fn timed(work: &WorkGraph, rules: &Rules, book: &ArrivalBook<'_>, situation: &Situation) -> Timed {
    let now = Moment::at_or_after(situation.now);
    let stages = stage_times(rules, book, situation, now);
    let clock = Clockwork { rules, book, situation, stages: &stages, now };
    let tasks = work.tasks().map(|(index, task)| (index, clock.task_times(task))).collect();
    Timed { stages, tasks }
}

fn stage_times(rules: &Rules, book: &ArrivalBook<'_>, situation: &Situation, now: Moment) -> Vec<StageTimes> {
    let mut stages: Vec<StageTimes> = rules
        .stages
        .iter()
        .map(|stage| {
            let state = situation.stages.get(&stage.id);
            let declared =
                state.and_then(|s| s.declared.as_ref()).map(|told| Moment::at_or_after(told.value));
            let lifted = state.and_then(|s| s.lifted.as_ref()).map(|told| Moment::at_or_after(told.value));
            StageTimes {
                due: None,
                trigger: None,
                basis: Basis::Computed,
                declared: declared.filter(|from| *from <= now),
                lifted: lifted.filter(|from| *from <= now),
                standing: Standing::NotDue,
            }
        })
        .collect();
    // Stages may count from each other, in any order but never in a circle: as many rounds as stages settle all.
    for _ in 0..rules.stages.len() {
        let dues: Vec<_> =
            rules.stages.iter().map(|stage| due_of(&stage.any, rules, book, situation, &stages)).collect();
        for (times, due) in stages.iter_mut().zip(dues) {
            times.due = due.map(|(at, _, _)| at);
            times.trigger = due.map(|(_, trigger, _)| trigger);
            times.basis = due.map_or(Basis::Computed, |(_, _, basis)| basis);
        }
    }
    let standings: Vec<Standing> =
        (0..stages.len()).map(|position| standing(rules, &stages, position, now)).collect();
    for (times, standing) in stages.iter_mut().zip(standings) {
        times.standing = standing;
    }
    stages
}

/// The earliest of a stage's triggers: (when, which, what it rests on).
fn due_of(
    triggers: &[Trigger],
    rules: &Rules,
    book: &ArrivalBook<'_>,
    situation: &Situation,
    stages: &[StageTimes],
) -> Option<(Moment, usize, Basis)> {
    let fires = |trigger: &Trigger| match trigger {
        Trigger::Forecast { wind, within, reckoning } => book
            .arrival(wind, reckoning.unwrap_or(rules.reckoning))
            .map(|arrival| (arrival.at - *within, arrival.basis)),
        Trigger::Observed { wind } => {
            first_met(wind, book.port, &situation.observed).map(|at| (at, Basis::Observed))
        }
        Trigger::Stage { stage, after } => {
            stage_anchor(stage, rules, stages).map(|(at, basis)| (at + *after, basis))
        }
        Trigger::WindOver { wind, after } => book
            .answer(&question_key(wind))
            .and_then(|answer| moment_of(answer.end_quantile(ninety_percent())))
            .map(|at| (at + *after, Basis::Computed)),
    };
    (0..)
        .zip(triggers)
        .filter_map(|(position, trigger)| fires(trigger).map(|(at, basis)| (at, position, basis)))
        .min()
}

/// With which chance "the wind is over for good" is said. Our choice: the same 90 % point as "latest".
fn ninety_percent() -> Chance {
    Chance::share(9, 10)
}

/// The time that "stage X" stands for: declared if it is, else due; and what that rests on.
fn stage_anchor(stage: &str, rules: &Rules, stages: &[StageTimes]) -> Option<(Moment, Basis)> {
    let position = rules.stages.iter().position(|candidate| candidate.id == stage)?;
    let times = stages.get(position)?;
    times.declared.map(|at| (at, Basis::Computed)).or(times.due.map(|at| (at, times.basis)))
}

fn standing(rules: &Rules, stages: &[StageTimes], position: usize, now: Moment) -> Standing {
    let (Some(times), Some(stage)) = (stages.get(position), rules.stages.get(position)) else {
        return Standing::NotDue;
    };
    let later_is_declared = stages.iter().zip(&rules.stages).skip(position + 1).any(|(other, rule)| {
        rule.direction == stage.direction && other.declared.is_some() && other.lifted.is_none()
    });
    match (times.declared, times.lifted, times.due) {
        (Some(declared), Some(lifted), _) if lifted >= declared => Standing::Lifted,
        (Some(_), _, _) if later_is_declared => Standing::Superseded,
        (Some(_), _, _) => Standing::Declared,
        (None, _, _) if later_is_declared => Standing::Superseded,
        (None, _, Some(due)) if due <= now => Standing::DueNow,
        (None, _, Some(_)) => Standing::Later,
        (None, _, None) => Standing::NotDue,
    }
}

/// By how much tasks behind a stage that is due and not declared move on at a time: what people were told should not
/// change every minute. Our choice, the same as the least move of a plan.
const STEP: Minutes = Minutes::new(10);

struct Clockwork<'a> {
    rules: &'a Rules,
    book: &'a ArrivalBook<'a>,
    situation: &'a Situation,
    stages: &'a [StageTimes],
    now: Moment,
}

impl Clockwork<'_> {
    fn task_times(&self, task: &Task) -> TaskTimes {
        let bounds = |binding: Binding| -> Option<Bound> {
            task.done_before
                .iter()
                .filter(|deadline| deadline.binds == binding)
                .filter_map(|deadline| self.bound(deadline))
                .min_by(|a, b| (a.at, &a.because).cmp(&(b.at, &b.because)))
        };
        // Work on the way up is done after the wind: its limits hold it back instead of cutting it off.
        let is_after = self.is_reopening(task);
        let stop = task.stops_at.iter().filter(|_| !is_after).filter_map(|wind| self.stop(wind));
        let deadline = bounds(Binding::Hard)
            .into_iter()
            .chain(stop)
            .min_by(|a, b| (a.at, &a.because).cmp(&(b.at, &b.because)));
        let (gate, if_declared) = self.gate(task);
        let over = task.stops_at.iter().filter(|_| is_after).filter_map(|wind| self.over(wind));
        let release = gate
            .and_then(|gate| self.not_before(task).map(|times| times.max(gate)))
            .map(|release| over.fold(release, Moment::max));
        let risks = if is_after { Vec::new() } else { risks(task) };
        TaskTimes { release, if_declared, deadline, due: bounds(Binding::Soft), risks }
    }

    fn is_reopening(&self, task: &Task) -> bool {
        let gate = task.gate.and_then(|position| self.rules.stages.get(position));
        gate.is_some_and(|stage| stage.direction == StageDirection::Reopening)
    }

    /// When a wind is over for good with 90 % chance; `None` if it never comes or the forecast ends first.
    fn over(&self, wind: &LimitAt) -> Option<Moment> {
        let answer = self.book.answer(&question_key(wind))?;
        moment_of(answer.end_quantile(ninety_percent()))
    }

    /// When the gate opens (now, if it stands open), and the stage that is still to be declared.
    fn gate(&self, task: &Task) -> (Option<Moment>, Option<usize>) {
        let Some(position) = task.gate else { return (Some(self.now), None) };
        let Some(times) = self.stages.get(position) else { return (None, None) };
        match times.standing {
            Standing::Declared | Standing::Superseded => (Some(self.now), None),
            // Waiting for the order, tasks move on with the clock, but only by whole steps.
            Standing::DueNow => (Some(self.now.ceil_to(STEP)), Some(position)),
            Standing::Later => (times.due, Some(position)),
            Standing::NotDue | Standing::Lifted => (None, Some(position)),
        }
    }

    /// The latest of the times before which the task may not start; `None` if one of them is not known yet.
    fn not_before(&self, task: &Task) -> Option<Moment> {
        let told = self.situation.tasks.get(&task.id).and_then(|state| state.not_before.as_ref());
        if let Some(told) = told {
            // A report about this task replaces what the files say: it is the newer knowledge.
            return Some(Moment::at_or_after(told.value).max(self.now));
        }
        task.not_before.iter().try_fold(self.now, |latest, condition| {
            let time = match condition {
                NotBefore::After(anchor, offset) => self.anchor(anchor).map(|(at, _, _)| at + *offset),
                NotBefore::At(time) => Some(Moment::at_or_after(*time)),
                NotBefore::Own(_) => Some(self.now),
            };
            time.map(|time| time.max(latest))
        })
    }

    fn bound(&self, deadline: &Deadline) -> Option<Bound> {
        let (at, words, basis) = self.anchor(&deadline.anchor)?;
        let lead = deadline.lead;
        let because = match lead.get() {
            0 => words,
            minutes if minutes > 0 => format!("{words}, less {lead}"),
            _ => format!("{words}, plus {}", -lead),
        };
        Some(Bound { at: at - lead, because, basis })
    }

    fn stop(&self, wind: &LimitAt) -> Option<Bound> {
        let arrival = self.book.usual_arrival(wind)?;
        Some(Bound { at: arrival.at, because: self.wind_words(wind), basis: arrival.basis })
    }

    /// The time of an anchor, its words, and what that rests on.
    fn anchor(&self, anchor: &Anchor) -> Option<(Moment, String, Basis)> {
        match anchor {
            Anchor::Wind(wind) => {
                let arrival = self.book.usual_arrival(wind)?;
                Some((arrival.at, self.wind_words(wind), arrival.basis))
            }
            Anchor::Stage(stage) => {
                let (at, basis) = stage_anchor(stage, self.rules, self.stages)?;
                Some((at, format!("stage {stage}"), basis))
            }
            Anchor::Clock(time) => {
                Some((Moment::at_or_before(*time), String::from("a fixed time"), Basis::Computed))
            }
        }
    }

    fn wind_words(&self, wind: &LimitAt) -> String {
        let place =
            self.book.port.place(&wind.place).map_or(wind.place.as_str(), |place| place.name.as_str());
        format!("{} at {place}", wind.limit)
    }
}

/// Keys of the winds that limit a task, each once.
fn risks(task: &Task) -> Vec<String> {
    let winds = task.done_before.iter().filter_map(|deadline| match &deadline.anchor {
        Anchor::Wind(wind) => Some(wind),
        Anchor::Stage(_) | Anchor::Clock(_) => None,
    });
    let mut keys: Vec<String> = winds.chain(&task.stops_at).map(question_key).collect();
    keys.sort_unstable();
    keys.dedup();
    keys
}
