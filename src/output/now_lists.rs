//! The lists of the one-screen view: what no longer fits, is overdue, starts now, comes next, waits for a decision.

use crate::output::clock_text::{Times, lasting};
use crate::output::escape::visible;
use crate::output::layout::{clip, glued};
use crate::output::task_text::{members, told_start};
use crate::output::words::count;
use crate::plan::sheet::{DutyState, Plan, Relief, StageStatus, TaskLine, TaskState};
use crate::time::moment::{Minutes, Moment};

/// What starts within this is told to start now. Our choice: the time it takes to call people out.
const AT_ONCE: Minutes = Minutes::new(15);
/// Ids are cut to this, so that times stay in the line.
const ID: usize = 20;
/// A step of a relief is cut to this, so that what it brings stays in the line.
const STEP: usize = 32;

/// What to show.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct NowOptions {
    /// Only tasks that concern this person, pool, member or office; everybody's if `None`.
    pub concerning: Option<String>,
    /// How far ahead "next" looks.
    pub ahead: Minutes,
}

/// Tasks and decisions for now, each list in the order in which it matters.
#[derive(Clone, Debug, PartialEq)]
pub struct Now<'a> {
    /// Given up, then late against a soft deadline.
    pub no_longer_fits: Vec<&'a TaskLine>,
    /// Planned time passed without a report.
    pub unreported: Vec<&'a TaskLine>,
    /// Starts at once.
    pub start_now: Vec<&'a TaskLine>,
    /// Starts later, within the time asked for.
    pub next: Vec<&'a TaskLine>,
    /// Overdue duties and decisions, earliest first.
    pub decisions: Vec<Decision>,
}

/// Something that a person must decide or see to.
#[derive(Clone, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub struct Decision {
    /// By when.
    pub by: Moment,
    /// What.
    pub what: String,
}

/// Picks out of a plan what matters now.
#[must_use]
pub fn now_of<'a>(plan: &'a Plan, options: &NowOptions) -> Now<'a> {
    let mine: Vec<&TaskLine> = plan
        .tasks
        .iter()
        .filter(|task| options.concerning.as_ref().is_none_or(|who| concerns(task, who)))
        .collect();
    let pick = |test: &dyn Fn(&TaskLine) -> bool| -> Vec<&'a TaskLine> {
        mine.iter().copied().filter(|task| test(task)).collect()
    };
    let is_given_up = |task: &TaskLine| task.state == TaskState::GivenUp;
    let starts_within = |task: &TaskLine, from: Minutes, to: Minutes| {
        let wait = task.start.map(|start| start - plan.now);
        let is_open = task.state == TaskState::Planned && !task.is_unreported;
        is_open && wait.is_some_and(|wait| from < wait && wait <= to)
    };
    let mut no_longer_fits = pick(&is_given_up);
    no_longer_fits.extend(pick(&|task| !is_given_up(task) && task.late_by > Minutes::ZERO));
    Now {
        no_longer_fits,
        unreported: pick(&|task| task.is_unreported && !is_given_up(task)),
        start_now: pick(&|task| starts_within(task, Minutes::hours(-24 * 365), AT_ONCE)),
        next: pick(&|task| starts_within(task, AT_ONCE, options.ahead)),
        decisions: decisions(plan, options.ahead),
    }
}

/// Whether a task concerns somebody: who does it, who approves it, a pool or a member; upper and lower case are alike.
#[must_use]
pub fn concerns(task: &TaskLine, who: &str) -> bool {
    let who = who.trim().to_lowercase();
    names_in(task).any(|name| name.to_lowercase() == who)
}

/// Everybody whom some task of the plan concerns, sorted, for "did you mean".
#[must_use]
pub fn everybody(plan: &Plan) -> Vec<&str> {
    let mut names: Vec<&str> = plan.tasks.iter().flat_map(names_in).filter(|name| !name.is_empty()).collect();
    names.sort_unstable();
    names.dedup();
    names
}

fn names_in(task: &TaskLine) -> impl Iterator<Item = &str> {
    let pools = task.members.iter().flat_map(|(pool, members)| std::iter::once(pool).chain(members));
    std::iter::once(&task.who).chain(&task.approvers).chain(pools).map(String::as_str)
}

fn decisions(plan: &Plan, ahead: Minutes) -> Vec<Decision> {
    let mut all: Vec<Decision> = plan.reliefs.iter().map(relief_decision).collect();
    all.extend(plan.overtaken.iter().map(|overtaken| Decision {
        by: plan.now,
        what: format!("adopt the earlier arrival at {}?", short_id(&overtaken.place)),
    }));
    all.extend(plan.stages.iter().filter_map(|stage| {
        let due = stage.due?;
        let is_open = match stage.status {
            StageStatus::Recommended => true,
            StageStatus::Computed => due - plan.now <= ahead,
            StageStatus::NotDue | StageStatus::Declared | StageStatus::Superseded | StageStatus::Lifted => {
                false
            }
        };
        is_open.then(|| Decision { by: due, what: format!("declare {} {}", short_id(&stage.id), stage.name) })
    }));
    all.extend(plan.duties.iter().filter_map(|duty| {
        let by = duty.by?;
        let is_open = matches!(duty.state, DutyState::Open | DutyState::Missed) && by - plan.now <= ahead;
        is_open.then(|| Decision { by, what: format!("duty: {}: {}", duty.who, duty.act) })
    }));
    all.sort();
    all
}

fn relief_decision(relief: &Relief) -> Decision {
    let first = relief.steps.first().map_or("", |step| step.what.as_str());
    let more = match relief.steps.len() {
        0 | 1 => String::new(),
        steps => format!(" and {}", count(steps - 1, "more step")),
    };
    let fits = if relief.relieves.len() == 1 { "fits" } else { "fit" };
    let step = clip(&visible(first), STEP);
    let what = format!("{step}{more}: then {} {fits}", count(relief.relieves.len(), "task"));
    Decision { by: relief.decide_by, what }
}

/// A task that cannot be done, or only late, in one line.
#[must_use]
pub fn misfit_line(task: &TaskLine) -> String {
    let id = short_id(&task.id);
    let late = match &task.given_up {
        Some(given_up) => {
            let proof = if given_up.is_proved { "proved" } else { "not proved" };
            given_up.late_by.map_or(proof.to_owned(), |late| format!("{} too late, {proof}", lasting(late)))
        }
        None => format!("late by {}", lasting(task.late_by)),
    };
    format!("{id} ({late}) {}", task.name)
}

/// A task with a time, in one line.
#[must_use]
pub fn timed_line(times: &Times, task: &TaskLine) -> String {
    let mut words =
        told_start(times, task).map_or("no time".to_owned(), |start| times.within(times.now(), start));
    if let (Some(start), Some(latest)) = (task.start, task.latest_start) {
        words.push_str(&format!(", latest {}", times.within(times.now(), times.told_latest(start, latest))));
    }
    words.push_str(&format!(" {}", short_id(&task.id)));
    if let Some(stage) = &task.if_declared {
        words.push_str(&format!(" (if {} is declared)", short_id(stage)));
    }
    words.push_str(&format!(" {}", task.name));
    let people = members(task);
    let people = if people.is_empty() { task.who.clone() } else { people };
    if people.is_empty() { words } else { format!("{words}; {people}") }
}

/// A decision in one line.
#[must_use]
pub fn decision_line(times: &Times, decision: &Decision) -> String {
    let told = times.within(times.now(), times.told_down(decision.by));
    let verb = if decision.by < times.now() { "was due" } else { "by" };
    format!("{verb} {told} {}", decision.what)
}

fn short_id(id: &str) -> String {
    glued(&clip(&visible(id), ID))
}
