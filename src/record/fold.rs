//! How the situation follows from the events: each event folded in after the ones before it.

use crate::record::event::{Event, Retracted, What};
use crate::record::fact::Fact;
use crate::record::ruling::RulingKind;
use crate::record::situation::{
    Adopted, CallHeard, Observation, Outage, Outcome, Said, Situation, StageState, Started, TakenAdvisory,
    TaskState, Told, Way,
};
use crate::time::moment::{Minutes, Moment};
use crate::units::speed::Knots;
use chrono::{DateTime, Utc};
use std::collections::BTreeSet;

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
/// * **Facts and rulings**: of each thing the last counts; a service that resumes, or a place that is usable again, ends
///   what was told before. Declaring or lifting a stage ends a hold on it.
/// * **Calls**: every report counts; it moves nothing, so no plan is made at its time.
/// * **Withdrawn**: the event counts as never said from the time at which its withdrawal is known.
/// * **Awaiting a second person**: it counts from its confirmation by somebody else.
#[must_use]
pub fn situation(events: &[Event], now: DateTime<Utc>) -> Situation {
    let known: Vec<&Event> = in_order(events).into_iter().take_while(|event| event.known <= now).collect();
    Fold::of(known, now).situation
}

/// The events in order of time known, ties in the order given, without those that say the same as one before, unless that
/// one was withdrawn.
#[must_use]
pub fn in_order<'a>(events: impl IntoIterator<Item = &'a Event>) -> Vec<&'a Event> {
    let mut sorted: Vec<&Event> = events.into_iter().collect();
    let taken_back: BTreeSet<usize> = sorted.iter().filter_map(|event| event.withdraws()).collect();
    sorted.sort_by_key(|event| event.known);
    let mut once = Vec::with_capacity(sorted.len());
    // Only events of the same time can say the same.
    for same_time in sorted.chunk_by(|a, b| a.known == b.known) {
        if let [only] = same_time {
            once.push(*only);
            continue;
        }
        let mut ranked: Vec<(usize, &Event)> = same_time.iter().copied().enumerate().collect();
        ranked.sort_by(|(_, a), (_, b)| a.compare(b));
        ranked.dedup_by(|(_, later), (_, earlier)| {
            later.compare(earlier).is_eq() && !taken_back.contains(&earlier.number)
        });
        ranked.sort_by_key(|(nth, _)| *nth);
        once.extend(ranked.into_iter().map(|(_, event)| event));
    }
    once
}

/// A situation that grows event by event, in the order of [`in_order`].
#[derive(Clone, Debug, Default)]
pub struct Fold<'a> {
    events: Vec<&'a Event>,
    situation: Situation,
}

impl<'a> Fold<'a> {
    /// The situation after these events, in order, at `now`.
    #[must_use]
    pub fn of(events: Vec<&'a Event>, now: DateTime<Utc>) -> Fold<'a> {
        let mut situation = Situation { now, ..Situation::default() };
        let withdrawn = withdrawn(&events);
        for (nth, event) in events.iter().enumerate() {
            situation.take_in(event, nth, !withdrawn.contains(&event.number));
        }
        Fold { events, situation }
    }

    /// Takes in the next event. What withdraws an earlier one costs a fold of all of them, anything else one step.
    pub fn add(&mut self, event: &'a Event) {
        self.events.push(event);
        if event.withdraws().is_some() {
            *self = Fold::of(std::mem::take(&mut self.events), self.situation.now);
        } else {
            self.situation.take_in(event, self.events.len() - 1, true);
        }
    }

    /// Lets time pass without an event.
    pub fn wait_until(&mut self, now: DateTime<Utc>) {
        self.situation.now = now;
    }

    /// The situation so far.
    #[must_use]
    pub fn situation(&self) -> &Situation {
        &self.situation
    }
}

/// The numbers of the events that are withdrawn in the end: by an event that is not itself withdrawn.
#[must_use]
pub fn withdrawn(events: &[&Event]) -> BTreeSet<usize> {
    let mut pairs: Vec<(usize, usize)> =
        events.iter().filter_map(|event| Some((event.number, event.withdraws()?))).collect();
    pairs.sort_unstable();
    let mut withdrawn = BTreeSet::new();
    // A withdrawal has a higher number than what it takes back, so the last one stands for certain.
    for (number, target) in pairs.into_iter().rev() {
        if target < number && !withdrawn.contains(&number) {
            withdrawn.insert(target);
        }
    }
    withdrawn
}

impl Situation {
    fn take_in(&mut self, event: &Event, nth: usize, counts: bool) {
        if counts && matches!(&event.what, What::AdvisoryTaken(taking) if self.has_taken(taking)) {
            return;
        }
        let moves_nothing = matches!(event.what, What::Call(_));
        if !moves_nothing && self.changes.last() != Some(&event.known) {
            self.changes.push(event.known);
        }
        if !counts {
            return;
        }
        if event.awaits_second {
            self.waiting.insert(event.number, event.clone());
            return;
        }
        match &event.what {
            What::Confirmed { event: number } => self.confirm(*number, event, nth),
            What::Call(report) => {
                let who = match event.name.as_str() {
                    "" => event.by.clone(),
                    name => format!("{name}, {}", event.by),
                };
                self.calls.push(CallHeard { report: report.clone(), who, said: said_of(event, nth) });
            }
            what => self.tell(what, said_of(event, nth)),
        }
    }

    /// The order counts from its confirmation; by the same person it goes on waiting.
    fn confirm(&mut self, number: usize, by: &Event, nth: usize) {
        if self.waiting.get(&number).is_some_and(|order| order.is_by_another(by))
            && let Some(order) = self.waiting.remove(&number)
        {
            self.tell(&order.what, said_of(&order, nth));
        }
    }

    fn tell(&mut self, what: &What, said: Said) {
        match what {
            What::AdvisoryTaken(taking) => {
                self.advisories.push(TakenAdvisory { file: taking.key(), by_order: taking.by_order, said });
            }
            What::ArrivalAdopted { place, wind, time } => self.adopt(place, *wind, *time, said),
            What::StageDeclared { stage, from } => {
                self.rulings.remove(&(RulingKind::Stage, stage.clone()));
                let declared = Some(Told { value: *from, said });
                self.stages.insert(stage.clone(), StageState { declared, lifted: None });
            }
            What::StageLifted { stage, from } => {
                self.rulings.remove(&(RulingKind::Stage, stage.clone()));
                self.stages.entry(stage.clone()).or_default().lifted = Some(Told { value: *from, said });
            }
            What::TaskStarted { task, at, members } => {
                self.task(task).start(Started { at: *at, members: members.clone(), said });
            }
            What::TaskDone { task, at, evidence } => self.task(task).finish(*at, evidence, said),
            What::TaskCannot { task } => self.task(task).outcome = Some(Outcome::Cannot { said }),
            What::TaskNotNeeded { task } => self.task(task).outcome = Some(Outcome::NotNeeded { said }),
            What::TaskTakes { task, takes } => self.task(task).takes = Some(Told { value: *takes, said }),
            What::TaskLeft { task, left } => self.still_takes(task, *left, said),
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
            What::Told(fact) => self.hear(fact, said),
            What::Ruled(ruling) => {
                let (kind, about) = ruling.about();
                self.rulings.insert((kind, about.to_owned()), Told { value: ruling.clone(), said });
            }
            What::Call(report) => {
                let who = said.by.clone();
                self.calls.push(CallHeard { report: report.clone(), who, said });
            }
            // Both act on other events, in the fold.
            What::Withdrawn { .. } | What::Confirmed { .. } => {}
        }
    }

    /// What is left counts from when that was known; before the work has begun it is all there is.
    fn still_takes(&mut self, task: &str, left: Minutes, said: Said) {
        let state = self.task(task);
        let begun = state.started.as_ref().filter(|started| started.at <= said.known);
        let gone = begun.map_or(Minutes::ZERO, |started| {
            Moment::at_or_after(said.known) - Moment::at_or_before(started.at)
        });
        state.takes = Some(Told { value: gone + left, said });
    }

    fn hear(&mut self, fact: &Fact, said: Said) {
        let (kind, about) = fact.about();
        let key = (kind, about.to_owned());
        match fact {
            Fact::Resumes { from, .. } | Fact::Usable { from, .. } => {
                if let Some(before) = self.facts.remove(&key)
                    && before.value.from() < *from
                {
                    self.facts.insert(key, Told { value: before.value.ended(*from), said });
                }
            }
            Fact::Stops { .. }
            | Fact::Unusable { .. }
            | Fact::DepthLimit { .. }
            | Fact::Signal { .. }
            | Fact::Authorities { .. }
            | Fact::Sea { .. }
            | Fact::Anchorage { .. } => {
                self.facts.insert(key, Told { value: fact.clone(), said });
            }
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

fn said_of(event: &Event, nth: usize) -> Said {
    Said {
        known: event.known,
        nth,
        by: event.by.clone(),
        reason: event.reason.clone(),
        written: event.place.clone(),
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
