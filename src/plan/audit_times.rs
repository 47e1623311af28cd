//! The audit of times: gates, releases, deadlines, stages, and the chances that a plan shows.

use crate::plan::audit_case::{AuditInputs, breach};
use crate::plan::sheet::{Breach, Plan, StageStatus, TaskLine, TaskState};
use crate::record::situation::{Situation, Way};
use crate::rules::limit::{Anchor, Binding};
use crate::rules::stage::{Rules, Stage, StageDirection, Trigger};
use crate::rules::task::{Leave, NotBefore};
use crate::time::moment::{Minutes, Moment};
use crate::units::chance::Chance;
use crate::work::graph::Task;
use crate::work::observed::first_met;
use crate::work::questions::question_key;
use crate::work::reckoned::moment_of;

/// Holds every line's times against the rules.
pub fn times(inputs: AuditInputs<'_>, plan: &Plan, breaches: &mut Vec<Breach>) {
    for line in &plan.tasks {
        let Some(task) = inputs.work.task(&line.id) else { continue };
        length(inputs, task, line, breaches);
        if line.state == TaskState::Planned {
            gate(inputs, task, line, breaches);
            releases(inputs, task, line, breaches);
            deadlines(inputs, task, line, breaches);
        }
        shown_chance(inputs, task, line, breaches);
    }
    stages(inputs, plan, breaches);
}

/// The time that a stage stands for: declared if it is, else the earliest of its triggers.
fn stage_time(inputs: AuditInputs<'_>, stage: &Stage, depth: usize) -> Option<Moment> {
    declared(inputs.situation, &stage.id).or_else(|| stage_due(inputs, stage, depth))
}

fn declared(situation: &Situation, stage: &str) -> Option<Moment> {
    let told = situation.stages.get(stage)?.declared.as_ref()?;
    (told.value <= situation.now).then(|| Moment::at_or_after(told.value))
}

fn is_lifted(situation: &Situation, stage: &str) -> bool {
    let state = situation.stages.get(stage);
    state.and_then(|state| state.lifted.as_ref()).is_some_and(|told| told.value <= situation.now)
}

fn stage_due(inputs: AuditInputs<'_>, stage: &Stage, depth: usize) -> Option<Moment> {
    if depth > inputs.rules.stages.len() {
        return None;
    }
    let of_trigger = |trigger: &Trigger| match trigger {
        Trigger::Forecast { wind, within, reckoning } => {
            let arrival = inputs.book.arrival(wind, reckoning.unwrap_or(inputs.rules.reckoning))?;
            Some(arrival.at - *within)
        }
        Trigger::Observed { wind } => first_met(wind, inputs.port, &inputs.situation.observed),
        Trigger::Stage { stage: other, after } => {
            let other = find_stage(inputs.rules, other)?;
            stage_time(inputs, other, depth + 1).map(|at| at + *after)
        }
        Trigger::WindOver { wind, after } => {
            let answer = inputs.book.answer(&question_key(wind))?;
            moment_of(answer.end_quantile(Chance::share(9, 10))).map(|at| at + *after)
        }
    };
    stage.any.iter().filter_map(of_trigger).min()
}

fn find_stage<'a>(rules: &'a Rules, id: &str) -> Option<&'a Stage> {
    rules.stages.iter().find(|stage| stage.id == id)
}

fn anchor_time(inputs: AuditInputs<'_>, anchor: &Anchor) -> Option<Moment> {
    match anchor {
        Anchor::Wind(wind) => inputs.book.usual_arrival(wind).map(|arrival| arrival.at),
        Anchor::Stage(stage) => {
            find_stage(inputs.rules, stage).and_then(|stage| stage_time(inputs, stage, 0))
        }
        Anchor::Clock(time) => Some(Moment::at_or_before(*time)),
    }
}

/// A planned task takes its whole time, unless it is cut, and it is cut only with leave.
fn length(inputs: AuditInputs<'_>, task: &Task, line: &TaskLine, breaches: &mut Vec<Breach>) {
    let recorded = inputs.situation.tasks.get(&task.id);
    let is_ordered = |way| recorded.and_then(|r| r.way.as_ref()).is_some_and(|told| told.value == way);
    let whole = recorded.and_then(|r| r.takes.as_ref()).map_or(task.takes, |told| told.value);
    let is_permitted = task.cut.as_ref().is_some_and(|cut| cut.leave == Leave::Permitted);
    let shortest = match &task.cut {
        Some(cut) if is_permitted || is_ordered(Way::Cut) => cut.to.min(whole),
        Some(_) | None => whole,
    };
    if line.cut.is_some() && !is_permitted && !is_ordered(Way::Cut) {
        let what = String::from("its shorter way is taken, which neither the files nor an order permit");
        breaches.push(breach("audit-cut-without-leave", &line.id, what));
    }
    if line.state == TaskState::Planned && line.takes < shortest {
        let what = format!("it is planned to take {}, and takes {shortest}", line.takes);
        breaches.push(breach("audit-too-short", &line.id, what));
    }
    let stands_in = |main: &String| {
        let by_order = inputs
            .situation
            .tasks
            .get(main)
            .and_then(|state| state.way.as_ref())
            .is_some_and(|told| told.value == Way::Substitute);
        let by_file = inputs
            .work
            .task(main)
            .and_then(|task| task.or_else.as_ref())
            .is_some_and(|substitute| substitute.leave == Leave::Permitted);
        by_order || by_file
    };
    if line.state == TaskState::Planned
        && !task.stands_in_for.is_empty()
        && !task.stands_in_for.iter().any(stands_in)
    {
        let what = String::from("it stands in for a task that nobody has given up");
        breaches.push(breach("audit-stand-in-without-leave", &line.id, what));
    }
}

/// Nothing starts before the stage that gates it is declared, or due if it is not.
fn gate(inputs: AuditInputs<'_>, task: &Task, line: &TaskLine, breaches: &mut Vec<Breach>) {
    let Some(stage) = task.gate.and_then(|position| inputs.rules.stages.get(position)) else { return };
    let later = inputs.rules.stages.iter().skip_while(|other| other.id != stage.id);
    let is_open = later.filter(|other| other.direction == stage.direction).any(|other| {
        declared(inputs.situation, &other.id).is_some() && !is_lifted(inputs.situation, &other.id)
    });
    if is_open {
        return;
    }
    if line.if_declared.as_deref() != Some(stage.id.as_str()) {
        let what = format!("stage {} is not declared, and the plan does not say so", stage.id);
        breaches.push(breach("audit-gate-unsaid", &line.id, what));
    }
    match (stage_due(inputs, stage, 0), line.start) {
        (Some(due), Some(start)) if start < due => {
            let what = format!("it starts {} before stage {} is due", due - start, stage.id);
            breaches.push(breach("audit-gate", &line.id, what));
        }
        (None, Some(_)) => {
            let what = format!("stage {} is not due at all, yet it is planned", stage.id);
            breaches.push(breach("audit-gate", &line.id, what));
        }
        (Some(_), Some(_)) | (_, None) => {}
    }
}

fn releases(inputs: AuditInputs<'_>, task: &Task, line: &TaskLine, breaches: &mut Vec<Breach>) {
    let Some(start) = line.start else { return };
    let recorded = inputs.situation.tasks.get(&task.id);
    let told = recorded.and_then(|state| state.not_before.as_ref());
    let times: Vec<Moment> = match told {
        Some(told) => vec![Moment::at_or_after(told.value)],
        None => task
            .not_before
            .iter()
            .filter_map(|condition| match condition {
                NotBefore::After(anchor, offset) => anchor_time(inputs, anchor).map(|at| at + *offset),
                NotBefore::At(time) => Some(Moment::at_or_after(*time)),
                NotBefore::Own(_) => None,
            })
            .collect(),
    };
    // Work on the way up is done after the winds that stop it.
    let winds = task.stops_at.iter().filter(|_| is_reopening(inputs, task));
    let over = winds.filter_map(|wind| {
        let answer = inputs.book.answer(&question_key(wind))?;
        moment_of(answer.end_quantile(Chance::share(9, 10)))
    });
    if let Some(late) = times.into_iter().chain(over).filter(|time| start < *time).max() {
        let what = format!("it starts {} before it may", late - start);
        breaches.push(breach("audit-released-later", &line.id, what));
    }
}

/// A planned task meets its hard deadlines; unless an order fixed it, and then the clash is named elsewhere.
fn deadlines(inputs: AuditInputs<'_>, task: &Task, line: &TaskLine, breaches: &mut Vec<Breach>) {
    let Some(finish) = line.finish else { return };
    let is_ordered = inputs.situation.tasks.get(&task.id).is_some_and(|state| state.fixed.is_some());
    let hard = task.done_before.iter().filter(|deadline| deadline.binds == Binding::Hard);
    let bounds =
        hard.filter_map(|deadline| anchor_time(inputs, &deadline.anchor).map(|at| at - deadline.lead));
    let is_after = is_reopening(inputs, task);
    let stops = task
        .stops_at
        .iter()
        .filter(|_| !is_after)
        .filter_map(|wind| inputs.book.usual_arrival(wind))
        .map(|a| a.at);
    if let Some(bound) = bounds.chain(stops).min() {
        if finish > bound && !is_ordered {
            let what = format!("it is finished {} after its hard deadline", finish - bound);
            breaches.push(breach("audit-deadline", &line.id, what));
        }
        if line.latest_start.is_some_and(|latest| latest + line.takes > bound) {
            let what = String::from("its latest start is too late for its hard deadline");
            breaches.push(breach("audit-latest-start", &line.id, what));
        }
    }
    if let (Some(latest), Some(start)) = (line.latest_start, line.start)
        && start > latest
        && line.late_by <= Minutes::ZERO
        && !is_ordered
    {
        let what = format!("it starts {} after its latest start", start - latest);
        breaches.push(breach("audit-after-latest-start", &line.id, what));
    }
}

fn is_reopening(inputs: AuditInputs<'_>, task: &Task) -> bool {
    let gate = task.gate.and_then(|position| inputs.rules.stages.get(position));
    gate.is_some_and(|stage| stage.direction == StageDirection::Reopening)
}

/// The chance that a line shows is that of the odds.
fn shown_chance(inputs: AuditInputs<'_>, task: &Task, line: &TaskLine, breaches: &mut Vec<Breach>) {
    let (Some(shown), Some(finish)) = (line.caught, line.finish) else { return };
    let winds = task.stops_at.iter().chain(task.done_before.iter().filter_map(|d| match &d.anchor {
        Anchor::Wind(wind) => Some(wind),
        Anchor::Stage(_) | Anchor::Clock(_) => None,
    }));
    let worst = winds
        .filter_map(|wind| inputs.book.answer(&question_key(wind)))
        .map(|answer| answer.chance_by(finish).get())
        .fold(0.0, f64::max);
    // Half a scenario in ten thousand: anything nearer is the same count.
    if (worst - shown.get()).abs() > 5e-5 {
        let what = format!("it shows a chance of {shown} to be caught; the odds say {:.1} %", worst * 100.0);
        breaches.push(breach("audit-chance", &line.id, what));
    }
}

/// Only an event declares or lifts a stage, and due times follow from record and odds.
fn stages(inputs: AuditInputs<'_>, plan: &Plan, breaches: &mut Vec<Breach>) {
    for line in &plan.stages {
        let Some(stage) = find_stage(inputs.rules, &line.id) else {
            breaches.push(breach(
                "audit-unknown-stage",
                &line.id,
                String::from("the rules have no such stage"),
            ));
            continue;
        };
        let is_declared = declared(inputs.situation, &line.id).is_some();
        if line.status == StageStatus::Declared && !is_declared {
            breaches.push(breach("audit-undeclared", &line.id, String::from("nobody has declared it")));
        }
        if line.status == StageStatus::Lifted && !is_lifted(inputs.situation, &line.id) {
            breaches.push(breach("audit-unlifted", &line.id, String::from("nobody has lifted it")));
        }
        if is_declared
            && matches!(line.status, StageStatus::Computed | StageStatus::Recommended | StageStatus::NotDue)
        {
            breaches.push(breach(
                "audit-order-dropped",
                &line.id,
                String::from("it is declared, and the plan hides it"),
            ));
        }
        if line.due != stage_due(inputs, stage, 0) {
            breaches.push(breach(
                "audit-stage-due",
                &line.id,
                String::from("its due time does not follow from its triggers"),
            ));
        }
    }
}
