//! What each task waited for: the stretches of waiting from its root to its start, each with its cause.

use crate::schedule::bound::Bound;
use crate::schedule::model::{ModelWay, NEVER, whole_starts};
use crate::schedule::outcome::{Cause, GivenUp, Outcome, Placement, Root, Step, Why};
use crate::schedule::place::{Builder, Choices, Holdup, Slot, State};
use crate::schedule::problem::{IfGivenUp, Problem};
use crate::time::moment::{Minutes, Moment};
use crate::time::windows::WindowSet;
use std::cmp::Reverse;

/// Builds a schedule once more and tells the outcome of each task, in the order of the problem.
pub(crate) fn told(
    problem: &Problem,
    builder: &mut Builder,
    bound: &Bound,
    choices: &Choices,
) -> Vec<Outcome> {
    let model = builder.model;
    let mut outcomes: Vec<Option<Outcome>> = vec![None; model.tasks.len()];
    let mut held_by = vec![Vec::new(); model.members.len()];
    for (task, slot) in builder.slots.iter().enumerate() {
        if model.tasks[task].fixed.is_some() {
            builder.people_of(slot).iter().for_each(|(_, member)| held_by[*member].push(task));
        }
    }
    builder.build(choices, |builder, task, slot| {
        let teller = Teller { problem, builder, choices, held_by: &held_by, task };
        outcomes[model.number[task]] = Some(match slot.state {
            State::Placed => Outcome::Placed(teller.placement(slot)),
            State::Open | State::Cut(_) | State::Yields | State::Missed => {
                Outcome::GivenUp(teller.given_up(slot, bound.is_hopeless[task]))
            }
        });
        if slot.state == State::Placed {
            builder.people_of(slot).iter().for_each(|(_, member)| held_by[*member].push(task));
        }
    });
    let fixed = |(number, outcome): (usize, Option<Outcome>)| {
        outcome.unwrap_or_else(|| {
            let slot = builder.slots[model.place[number]];
            Outcome::Placed(Placement {
                way: slot.way,
                start: moment(slot.start),
                finish: moment(slot.finish),
                members: members(builder, model.place[number], &slot),
                root: Root::Fixed(moment(slot.start)),
                steps: Vec::new(),
            })
        })
    };
    outcomes.into_iter().enumerate().map(fixed).collect()
}

fn moment(minutes: i64) -> Moment {
    Moment::from_epoch_minutes(minutes)
}

fn members(builder: &Builder, task: usize, slot: &Slot) -> Vec<Vec<usize>> {
    let model = builder.model;
    let mut members = vec![Vec::new(); model.tasks[task].ways[slot.way].needs.len()];
    for (need, member) in builder.people_of(slot) {
        members[*need].push(model.members[*member].number);
    }
    members
}

/// Tells of one task while the builder holds what was placed before it.
struct Teller<'a, 'm> {
    problem: &'a Problem,
    builder: &'a Builder<'m>,
    choices: &'a Choices,
    /// For each member, the tasks that hold it so far.
    held_by: &'a [Vec<usize>],
    task: usize,
}

impl Teller<'_, '_> {
    fn placement(&self, slot: &Slot) -> Placement {
        let (root, steps) = self.waits(slot.way, slot.start);
        Placement {
            way: slot.way,
            start: moment(slot.start),
            finish: moment(slot.finish),
            members: members(self.builder, self.task, slot),
            root,
            steps,
        }
    }

    fn given_up(&self, slot: &Slot, proved: bool) -> GivenUp {
        let model = self.builder.model;
        let data = &model.tasks[self.task];
        let nothing = |why| GivenUp {
            why,
            would_finish: None,
            late_by: None,
            proved,
            way: 0,
            root: None,
            steps: Vec::new(),
        };
        if let State::Cut(other) = slot.state {
            return nothing(Why::Predecessor(model.number[other]));
        }
        if slot.state == State::Yields {
            return nothing(self.heaviest_follower().map_or(Why::NoTime, Why::YieldsTo));
        }
        if slot.finish < NEVER {
            let (root, steps) = self.waits(slot.way, slot.start);
            return GivenUp {
                why: Why::MissedDeadline,
                would_finish: Some(moment(slot.finish)),
                late_by: Some(Minutes::new(slot.finish - data.deadline)),
                proved,
                way: slot.way,
                root: Some(root),
                steps,
            };
        }
        nothing(self.no_place())
    }

    /// The most important task that waits for this one only as long as it is not given up.
    fn heaviest_follower(&self) -> Option<usize> {
        let model = self.builder.model;
        let leads = model.leads[self.task].iter();
        let others =
            leads.filter(|link| link.if_given_up == IfGivenUp::StartAtDecision).map(|link| link.other);
        let weighs = |other: &usize| (model.tasks[*other].class, Reverse(model.tasks[*other].weight));
        others.min_by_key(weighs).map(|other| model.number[other])
    }

    /// Why none of a task's ways has a place before the horizon: told of the way that comes nearest to one.
    fn no_place(&self) -> Why {
        let model = self.builder.model;
        let ways = &model.tasks[self.task].ways;
        let mut why = Why::NoWindow;
        for (number, way) in ways.iter().enumerate() {
            if model.first_start(way, self.builder.root(self.task, number).0).is_none() {
                continue;
            }
            match way.needs.iter().find(|need| need.able.len() < need.count) {
                Some(need) => why = Why::NoMembers(need.pool),
                None => return Why::NoTime,
            }
        }
        why
    }

    fn waits(&self, number: usize, start: i64) -> (Root, Vec<Step>) {
        let model = self.builder.model;
        let data = &model.tasks[self.task];
        let (at, link) = self.builder.root(self.task, number);
        let root = match link {
            Some(link) => Root::Link(link, moment(at)),
            None if at > model.now => Root::Release(moment(at)),
            None => Root::Now(moment(at)),
        };
        let mut steps = Steps { list: Vec::new() };
        let issued = data.issued.as_ref().filter(|issued| issued.start == start && issued.way == number);
        let mut from = at;
        let held_back = self.choices.not_before[self.task];
        if issued.is_none() && held_back > from {
            steps.add(Cause::HeldBack, held_back.min(start) - from);
            from = held_back.min(start);
        }
        from = self.wait_from(number, from, start, &mut steps);
        if from < start && issued.is_some() {
            steps.add(Cause::Issued, start - from);
        } else if from < start {
            let least = data.issued.as_ref().map_or(start, |issued| issued.start + model.least_move);
            let least = least.clamp(from, start);
            steps.add(Cause::LeastMove, least - from);
            let reached = self.wait_from(number, least, start, &mut steps);
            steps.add(Cause::LeastMove, start - reached);
        }
        (root, steps.list)
    }

    /// Adds what a way waits for from `from` on; tells when it could start, at `start` at the latest.
    fn wait_from(&self, number: usize, from: i64, start: i64, steps: &mut Steps) -> i64 {
        let way = &self.builder.model.tasks[self.task].ways[number];
        let reached = self.builder.first_start(way, from, |holdup, since, until| {
            let until = until.min(start);
            if since < until {
                self.add_holdup(number, holdup, (since, until), steps);
            }
        });
        reached.unwrap_or(start).min(start)
    }

    fn add_holdup(&self, number: usize, holdup: Holdup, (since, until): (i64, i64), steps: &mut Steps) {
        let model = self.builder.model;
        let way = &model.tasks[self.task].ways[number];
        let cause = match holdup {
            Holdup::Windows => self.window(number, since, until),
            Holdup::Lane(other) => {
                let lane = way.lane.map_or(0, |passage| passage.lane);
                Cause::Lane { lane, other: model.number[other] }
            }
            Holdup::Need(need, member) => self.need(way, need, member, since),
            Holdup::Together => Cause::Together,
        };
        steps.add(cause, until - since);
    }

    /// The window set that alone keeps the way waiting until then; all that are shut now if none does.
    fn window(&self, number: usize, since: i64, until: i64) -> Cause {
        let way = &self.problem.tasks[self.builder.model.number[self.task]].ways[number];
        let opening = |starts: &WindowSet| starts.first_fit(moment(since), Minutes::ZERO);
        let windows = &self.problem.windows;
        let whole = way.whole_in.iter().map(|set| (*set, opening(&whole_starts(&windows[*set], way.takes))));
        let start = way.start_in.iter().map(|set| (*set, opening(&windows[*set])));
        let mut shut: Vec<usize> = Vec::new();
        for (set, opens) in whole.chain(start) {
            if opens == Some(moment(until)) {
                return Cause::Window(set);
            }
            if opens != Some(moment(since)) {
                shut.push(set);
            }
        }
        Cause::Windows(shut)
    }

    fn need(&self, way: &ModelWay, number: usize, member: usize, start: i64) -> Cause {
        let model = self.builder.model;
        let need = &way.needs[number];
        let (from, until) = (start - need.before, start + way.takes + need.after);
        let overlaps = |(start, end): &(i64, i64)| *start < until && from < *end;
        let mut holders = Vec::new();
        let (mut is_held, mut is_resting) = (false, false);
        for able in &need.able {
            if self.builder.rosters[*able].iter().any(overlaps) {
                is_held = true;
                holders.extend(self.holders(*able, from, until));
            } else if is_on_shift(&model.members[*able].available, from, until) {
                let fit = model.members[*able].first_fit(&self.builder.rosters[*able], from, until - from);
                is_resting |= fit != Some(from);
            }
        }
        holders.sort_unstable();
        holders.dedup();
        let pool = need.pool;
        if is_held {
            Cause::Pool { pool, holders }
        } else if is_resting {
            Cause::Rest { pool, member: model.members[member].number }
        } else {
            Cause::Shift { pool }
        }
    }

    /// The tasks that hold a member at some time from `from` to `until`, by their numbers in the problem.
    fn holders(&self, member: usize, from: i64, until: i64) -> Vec<usize> {
        let model = self.builder.model;
        let holds = |task: &&usize| {
            let slot = &self.builder.slots[**task];
            let mut people = self.builder.people_of(slot).iter().filter(|(_, held)| *held == member);
            people.any(|(need, _)| {
                let need = &model.tasks[**task].ways[slot.way].needs[*need];
                slot.start - need.before < until && from < slot.finish + need.after
            })
        };
        self.held_by[member].iter().filter(holds).map(|task| model.number[*task]).collect()
    }
}

/// Whether all of [from, until) lies in one stretch.
fn is_on_shift(available: &[(i64, i64)], from: i64, until: i64) -> bool {
    available.iter().any(|(opens, closes)| *opens <= from && until <= *closes)
}

/// Stretches of waiting, one after another.
struct Steps {
    list: Vec<Step>,
}

impl Steps {
    /// Adds a stretch, if it has a length; one with the same cause as the last makes that longer.
    fn add(&mut self, cause: Cause, minutes: i64) {
        if minutes <= 0 {
            return;
        }
        let wait = Minutes::new(minutes);
        match self.list.last_mut() {
            Some(last) if last.cause == cause => last.wait += wait,
            _ => self.list.push(Step { cause, wait }),
        }
    }
}
