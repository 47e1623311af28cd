//! The audit of water, light and channel, at second precision.

use crate::geo::daylight::{SunLimit, sun_altitude};
use crate::plan::audit_case::{AuditInputs, breach, holds_time};
use crate::plan::sheet::{Breach, Plan, TaskLine, TaskState};
use crate::rules::task::DaylightNeed;
use crate::time::moment::Moment;
use crate::work::graph::Task;
use chrono::{DateTime, TimeDelta, Utc};

/// How often heights and light are looked at between start and finish, in seconds: a tide rises at most a few
/// millimetres in that time.
const EVERY_S: i64 = 10;

/// How far a height may fall short and still count as enough, in metres: far below what a tide table can know.
const HEIGHT_TOLERANCE_M: f64 = 1e-6;

/// How far below the limit the sun may stand, in degrees: six seconds of its fastest climb.
const SUN_TOLERANCE_DEGREES: f64 = 0.025;

/// Holds every planned line against tide, daylight and the other ships in the channel.
pub fn water(inputs: AuditInputs<'_>, plan: &Plan, breaches: &mut Vec<Breach>) {
    for line in plan.tasks.iter().filter(|line| line.state == TaskState::Planned) {
        let (Some(task), Some(start), Some(finish)) = (inputs.work.task(&line.id), line.start, line.finish)
        else {
            continue;
        };
        tide(inputs, task, start, breaches);
        daylight(inputs, task, (start, finish), breaches);
        usable(inputs, task, (start, finish), breaches);
    }
    channel(inputs, plan, breaches);
}

/// Nothing is planned where a place, berth or channel was told to be out of use.
fn usable(
    inputs: AuditInputs<'_>,
    task: &Task,
    (start, finish): (Moment, Moment),
    breaches: &mut Vec<Breach>,
) {
    let (start, finish) = (start.to_utc(), finish.to_utc());
    for spot in task.spots(inputs.port) {
        if let Some((from, until)) = inputs.situation.unusable(spot)
            && from < finish
            && until.is_none_or(|until| start < until)
        {
            breaches.push(breach("audit-unusable", &task.id, format!("{spot} cannot be used at that time")));
        }
    }
}

fn instants(from: Moment, to: Moment) -> impl Iterator<Item = DateTime<Utc>> {
    let (first, last) = (from.to_utc(), to.to_utc());
    let steps = (last - first).num_seconds() / EVERY_S;
    (0..=steps).map(move |step| first + TimeDelta::seconds(step * EVERY_S)).chain(std::iter::once(last))
}

fn tide(inputs: AuditInputs<'_>, task: &Task, start: Moment, breaches: &mut Vec<Breach>) {
    let Some((need, draught)) = &task.tide else { return };
    let (Some(channel), Some(tide)) = (inputs.port.channel(&need.channel), inputs.port.tide.as_ref()) else {
        breaches.push(breach("audit-tide", &task.id, String::from("it needs tide, and none is known")));
        return;
    };
    // Under-keel clearance = level + depth - draught, to be at least the greater of the share and the least.
    let clearance_m = |level_m: f64| level_m + channel.depth.get() - draught.get();
    let wanted_m = channel.under_keel.clearance(*draught).get();
    let worst = instants(start + need.from, start + need.until)
        .map(|at| tide.height_at(at).map(|level| clearance_m(level.get()) - wanted_m))
        .try_fold(f64::INFINITY, |worst, spare| Some(worst.min(spare?)));
    match worst {
        None => {
            breaches.push(breach("audit-tide", &task.id, String::from("the tide is not known at that time")))
        }
        Some(spare) if spare < -HEIGHT_TOLERANCE_M => {
            let what = format!("under its keel {:.2} m are lacking", -spare);
            breaches.push(breach("audit-tide", &task.id, what));
        }
        Some(_) => {}
    }
}

fn daylight(inputs: AuditInputs<'_>, task: &Task, span: (Moment, Moment), breaches: &mut Vec<Breach>) {
    let Some(need) = task.daylight else { return };
    let here = inputs.port.place(&inputs.port.reference).map(|place| place.position);
    let Some(position) = here else { return };
    let until = match need {
        DaylightNeed::Start => span.0,
        DaylightNeed::Whole => span.1,
    };
    let limit = SunLimit::Sunrise.altitude() - SUN_TOLERANCE_DEGREES;
    if instants(span.0, until).any(|at| sun_altitude(position, at) < limit) {
        breaches.push(breach("audit-daylight", &task.id, String::from("the sun is down")));
    }
}

/// Ships in one channel keep their spacing, and never meet.
fn channel(inputs: AuditInputs<'_>, plan: &Plan, breaches: &mut Vec<Breach>) {
    let passages: Vec<(&TaskLine, &Task, Moment)> = plan
        .tasks
        .iter()
        .filter(|line| holds_time(line.state))
        .filter_map(|line| {
            let task = inputs.work.task(&line.id)?;
            task.passage.as_ref().and(line.start.map(|start| (line, task, start)))
        })
        .collect();
    for (number, (line, task, start)) in passages.iter().enumerate() {
        for (other_line, other, other_start) in passages.iter().skip(number + 1) {
            // What is done or begun cannot be mended: only pairs with a planned passage count.
            if line.state != TaskState::Planned && other_line.state != TaskState::Planned {
                continue;
            }
            if let Some(what) = conflict(inputs, (task, *start), (other, *other_start)) {
                breaches.push(breach("audit-channel", &line.id, format!("{what} {}", other.id)));
            }
        }
    }
}

fn conflict(inputs: AuditInputs<'_>, one: (&Task, Moment), two: (&Task, Moment)) -> Option<String> {
    let ((a, a_class), (b, b_class)) = (one.0.passage.as_ref()?, two.0.passage.as_ref()?);
    if a.channel != b.channel {
        return None;
    }
    let channel = inputs.port.channel(&a.channel)?;
    let (a_in, a_out) = (one.1 + a.enters, one.1 + a.leaves);
    let (b_in, b_out) = (two.1 + b.enters, two.1 + b.leaves);
    if a.outbound == b.outbound {
        let spacing = |first: usize, second: usize| channel.spacing.get(first)?.get(second).copied();
        let wanted = if a_in <= b_in { spacing(*a_class, *b_class)? } else { spacing(*b_class, *a_class)? };
        let gap = if a_in <= b_in { b_in - a_in } else { a_in - b_in };
        return (gap < wanted).then(|| format!("only {gap} in {} apart from", channel.name));
    }
    let meets =
        if a_in <= b_in { b_in < a_out + channel.clearance } else { a_in < b_out + channel.clearance };
    meets.then(|| format!("it meets in {}", channel.name))
}
