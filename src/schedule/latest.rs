//! The earliest and the latest that each task can be, people and craft aside: windows, links, releases and limits alone.
//!
//! No schedule starts a task sooner than [`earliest`] says as long as nothing it waits for is given up, and none that
//! keeps every limit after it starts it later than [`latest`] says. Both are quick and need no search. For what a
//! schedule did, see [`crate::schedule::outcome`].

use crate::schedule::check::Refused;
use crate::schedule::model::{Model, ModelLink, NEVER, first_in, last_in};
use crate::schedule::problem::{IfGivenUp, LinkKind, Problem};
use crate::time::moment::{Minutes, Moment};

/// A start and a finish.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Ends {
    /// The start.
    pub start: Moment,
    /// The finish.
    pub finish: Moment,
}

/// Which limits count.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Limits {
    /// Deadlines and windows: later, and something must be given up.
    Deadlines,
    /// Due times as well: later, and something is late.
    DeadlinesAndDues,
}

/// How late a task can be.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Latest {
    /// Nothing limits it before the horizon.
    Unlimited,
    /// It must be at these times at the latest; a fixed task is where it is fixed.
    By(Ends),
    /// It cannot keep its limits at all.
    Never,
}

impl Latest {
    /// How much later than `start` it could start; negative if that is too late already, `None` without a limit.
    #[must_use]
    pub fn spare(self, start: Moment) -> Option<Minutes> {
        match self {
            Latest::By(ends) => Some(ends.start - start),
            Latest::Unlimited | Latest::Never => None,
        }
    }
}

/// The earliest start and the earliest finish of each task, each by the way that is quickest to it; `None` if windows
/// and links let no way be done before the horizon.
///
/// # Errors
/// When the problem has a structural fault.
pub fn earliest(problem: &Problem) -> Result<Vec<Option<Ends>>, Refused> {
    let model = Model::new(problem)?;
    let mut found: Vec<Option<(i64, i64)>> = vec![None; model.tasks.len()];
    for task in &model.in_turn {
        let data = &model.tasks[*task];
        if let Some(fixed) = &data.fixed {
            found[*task] = Some((fixed.start, fixed.finish));
            continue;
        }
        let is_lost =
            |link: &ModelLink| link.if_given_up == IfGivenUp::GiveUpToo && found[link.other].is_none();
        if model.waits[*task].iter().any(is_lost) {
            continue;
        }
        let start_of = |takes: i64, starts: usize| {
            let after = model.waits[*task].iter().filter_map(|link| {
                let (start, finish) = found[link.other]?;
                Some(link.start_after(start, finish, takes))
            });
            let root = after.max().unwrap_or(data.release).max(data.release);
            first_in(&model.starts[starts], root)
        };
        let ways = data.ways.iter();
        let starts: Vec<(i64, i64)> = ways
            .filter_map(|way| start_of(way.takes, way.starts).map(|start| (start, start + way.takes)))
            .collect();
        let start = starts.iter().map(|ends| ends.0).min();
        let finish = starts.iter().map(|ends| ends.1).min();
        found[*task] = start.zip(finish);
    }
    let ends = |(start, finish): (i64, i64)| Ends {
        start: Moment::from_epoch_minutes(start),
        finish: Moment::from_epoch_minutes(finish),
    };
    Ok(model.place.iter().map(|place| found[*place].map(ends)).collect())
}

/// The latest start and finish of each task, done in the way that `ways` says for it (the first if it says none), at
/// which it and all that waits for it can still keep their limits.
///
/// A task that cannot keep its own limits puts none on those that it waits for.
///
/// # Errors
/// When the problem has a structural fault.
pub fn latest(problem: &Problem, limits: Limits, ways: &[usize]) -> Result<Vec<Latest>, Refused> {
    let model = Model::new(problem)?;
    let mut found = vec![Latest::Unlimited; model.tasks.len()];
    for task in model.in_turn.iter().rev() {
        let way = ways.get(model.number[*task]).copied().unwrap_or(0);
        found[*task] = latest_of(&model, *task, way, (limits, &found));
    }
    Ok(model.place.iter().map(|place| found[*place]).collect())
}

fn latest_of(model: &Model, task: usize, way: usize, (limits, found): (Limits, &[Latest])) -> Latest {
    let data = &model.tasks[task];
    let ends = |start: i64, finish: i64| Ends {
        start: Moment::from_epoch_minutes(start),
        finish: Moment::from_epoch_minutes(finish),
    };
    if let Some(fixed) = &data.fixed {
        return Latest::By(ends(fixed.start, fixed.finish));
    }
    let Some(way) = data.ways.get(way).or_else(|| data.ways.first()) else { return Latest::Never };
    let mut finish = match limits {
        Limits::Deadlines => data.deadline,
        Limits::DeadlinesAndDues => data.deadline.min(data.due),
    };
    let mut start = NEVER;
    for link in &model.leads[task] {
        let Latest::By(other) = found[link.other] else { continue };
        if model.tasks[link.other].fixed.is_some() {
            continue;
        }
        let (other_start, other_finish) = (other.start.epoch_minutes(), other.finish.epoch_minutes());
        match link.kind {
            LinkKind::FinishStart => finish = finish.min(other_start - link.lag),
            LinkKind::StartStart => start = start.min(other_start - link.lag),
            LinkKind::FinishFinish => finish = finish.min(other_finish - link.lag),
            LinkKind::StartFinish => start = start.min(other_finish - link.lag),
        }
    }
    let wanted = start.min(finish - way.takes);
    let at_horizon = model.horizon - way.takes;
    match last_in(&model.starts[way.starts], wanted.min(at_horizon)) {
        Some(start) if start < data.release => Latest::Never,
        Some(start) if start == at_horizon && wanted > at_horizon => Latest::Unlimited,
        Some(start) => Latest::By(ends(start, start + way.takes)),
        None => Latest::Never,
    }
}
