//! What looks wrong in a record that can be read: somebody should look, but nothing is lost and nothing is guessed.

use crate::finding::fault::Finding;
use crate::record::codes;
use crate::record::event::{Event, Retracted, What};
use crate::record::fact::Fact;
use crate::record::fold::{Fold, in_order};
use crate::record::situation::{Situation, TaskState};
use crate::record::telling::show;
use crate::time::clock::PortClock;
use chrono::{DateTime, Utc};
use std::collections::BTreeSet;

/// Warnings about `events`, which are in the order of the file.
#[must_use]
pub fn doubts(events: &[Event], clock: Option<&PortClock>) -> Vec<Finding> {
    let mut findings = out_of_order(events, clock);
    findings.extend(doubts_of_new(&[], events, clock));
    findings
}

/// Warnings about `new` events that come after `known` ones; about those nothing is said.
#[must_use]
pub fn doubts_of_new(known: &[Event], new: &[Event], clock: Option<&PortClock>) -> Vec<Finding> {
    let all = || known.iter().chain(new);
    let sorted = in_order(all());
    let is_new = |event: &Event| new.first().is_some_and(|first| first.number <= event.number);
    let first_new = sorted.iter().position(|event| is_new(event)).unwrap_or(sorted.len());
    let mut findings = repeats(new, &sorted);
    let is_there = |number: usize| all().any(|event| event.number == number);
    let mut later = sorted;
    let rest = later.split_off(first_new);
    let mut fold = Fold::of(later, DateTime::UNIX_EPOCH);
    for event in rest {
        if is_new(event) {
            findings.extend(contradiction(fold.situation(), event, clock));
            findings.extend(idle(fold.situation(), event, &is_there));
        }
        fold.add(event);
    }
    findings
}

/// Events known before the one that stands above them.
fn out_of_order(events: &[Event], clock: Option<&PortClock>) -> Vec<Finding> {
    let pairs = events.iter().zip(events.iter().skip(1));
    let reversed = pairs.filter(|(above, below)| below.known < above.known);
    reversed
        .map(|(above, below)| {
            let (earlier, later) = (show(clock, below.known), show(clock, above.known));
            Finding::warning(
                codes::OUT_OF_ORDER,
                below.place.clone(),
                format!("this was known {earlier}, but the event above it {later}"),
                "events stand in the order in which they became known; it counts from its own time",
                "move it, or correct the time that is wrong",
            )
        })
        .collect()
}

/// Events that say the same as an earlier one.
fn repeats(events: &[Event], once: &[&Event]) -> Vec<Finding> {
    let kept: BTreeSet<usize> = once.iter().map(|event| event.number).collect();
    let again = events.iter().filter(|event| !kept.contains(&event.number));
    again
        .map(|event| {
            Finding::warning(
                codes::SAME_TWICE,
                event.place.clone(),
                "another event says the very same",
                "it counts once",
                "remove one of them, or correct it if another was meant",
            )
        })
        .collect()
}

/// A finish before the start, whichever was told first.
fn contradiction(fold: &Situation, event: &Event, clock: Option<&PortClock>) -> Option<Finding> {
    let (task, started, done, effect) = match &event.what {
        What::TaskStarted { task, at, .. } => {
            (task, Some(*at), fold.tasks.get(task)?.done_at(), "the task counts as open again")
        }
        What::TaskDone { task, at, .. } => {
            let started = fold.tasks.get(task)?.started.as_ref().map(|started| started.at);
            (task, started, Some(*at), "the start no longer counts")
        }
        What::AdvisoryTaken(_)
        | What::ArrivalAdopted { .. }
        | What::StageDeclared { .. }
        | What::StageLifted { .. }
        | What::TaskCannot { .. }
        | What::TaskNotNeeded { .. }
        | What::TaskTakes { .. }
        | What::TaskNotBefore { .. }
        | What::TaskFixed { .. }
        | What::CutOrdered { .. }
        | What::SubstituteOrdered { .. }
        | What::TaskRetracted { .. }
        | What::MeansOut { .. }
        | What::MeansBack { .. }
        | What::Observed { .. }
        | What::TaskLeft { .. }
        | What::Told(_)
        | What::Ruled(_)
        | What::Call(_)
        | What::Withdrawn { .. }
        | What::Confirmed { .. }
        | What::PlanIssued => return None,
    };
    let (started, done) = (started?, done?);
    (done < started).then(|| {
        let (done, started) = (show(clock, done), show(clock, started));
        Finding::warning(
            codes::DONE_BEFORE_STARTED,
            event.place.clone(),
            format!("{task} is done {done}, but started {started}"),
            effect,
            "if that is not meant, tell the right time in a further event",
        )
    })
}

/// An event that ends or takes back something that was never said.
fn idle(fold: &Situation, event: &Event, is_there: &dyn Fn(usize) -> bool) -> Option<Finding> {
    let found = match &event.what {
        What::AdvisoryTaken(taking) => {
            let key = taking.key();
            fold.has_taken(taking).then(|| format!("{key} was taken before; the first time counts"))
        }
        What::ArrivalAdopted { place, time: None, .. } => {
            (!fold.adopted.contains_key(place)).then(|| format!("no arrival was adopted for {place}"))
        }
        What::StageLifted { stage, .. } => {
            let is_declared = fold.stages.get(stage).is_some_and(|state| state.declared.is_some());
            (!is_declared).then(|| format!("{stage} was not declared"))
        }
        What::TaskFixed { task, start: None } => {
            let is_fixed = fold.tasks.get(task).is_some_and(|state| state.fixed.is_some());
            (!is_fixed).then(|| format!("no start of {task} was fixed"))
        }
        What::TaskRetracted { task, kind } => {
            let is_told = fold.tasks.get(task).is_some_and(|state| is_told(state, *kind));
            (!is_told).then(|| format!("nothing of this kind was said of {task}"))
        }
        What::MeansBack { member, from } => {
            (!is_out(fold, member, *from)).then(|| format!("{member} is not out of service at that time"))
        }
        What::Told(fact @ (Fact::Resumes { .. } | Fact::Usable { .. })) => {
            let (kind, about) = fact.about();
            let is_told = fold.facts.contains_key(&(kind, about.to_owned()));
            (!is_told).then(|| format!("nobody said that {about} had stopped or could not be used"))
        }
        What::Withdrawn { event: number } => (*number >= event.number || !is_there(*number))
            .then(|| format!("there is no event {number} before this one")),
        What::Confirmed { event: number } => match fold.waiting.get(number) {
            None => Some(format!("event {number} waits for no confirmation")),
            Some(order) => (!order.is_by_another(event))
                .then(|| format!("event {number} was ordered by the same person; another has to confirm it")),
        },
        What::ArrivalAdopted { time: Some(_), .. }
        | What::TaskLeft { .. }
        | What::Told(_)
        | What::Ruled(_)
        | What::Call(_)
        | What::StageDeclared { .. }
        | What::TaskStarted { .. }
        | What::TaskDone { .. }
        | What::TaskCannot { .. }
        | What::TaskNotNeeded { .. }
        | What::TaskTakes { .. }
        | What::TaskNotBefore { .. }
        | What::TaskFixed { start: Some(_), .. }
        | What::CutOrdered { .. }
        | What::SubstituteOrdered { .. }
        | What::MeansOut { .. }
        | What::Observed { .. }
        | What::PlanIssued => None,
    }?;
    Some(Finding::warning(
        codes::NO_EFFECT,
        event.place.clone(),
        found,
        "this event changes nothing",
        "correct the name or the time, or leave it",
    ))
}

fn is_told(task: &TaskState, kind: Retracted) -> bool {
    match kind {
        Retracted::Progress => task.started.is_some() || task.outcome.is_some(),
        Retracted::Takes => task.takes.is_some(),
        Retracted::NotBefore => task.not_before.is_some(),
        Retracted::Way => task.way.is_some(),
    }
}

fn is_out(fold: &Situation, member: &str, at: DateTime<Utc>) -> bool {
    fold.means.get(member).is_some_and(|outages| outages.iter().any(|outage| outage.holds(at)))
}
