//! The audit of people and craft: who they are, whether they can, whether they are free, and whether they have rested.

use crate::plan::audit_case::{AuditInputs, breach, holds_time};
use crate::plan::sheet::{Breach, Plan, TaskLine, TaskState};
use crate::port::means::{Member, Pool, Shift};
use crate::time::moment::Moment;
use crate::work::graph::{Task, TaskNeed};
use chrono::{DateTime, Utc};
use std::collections::BTreeMap;

/// One hold of one member.
#[derive(Clone, Debug)]
struct Hold {
    from: Moment,
    to: Moment,
    task: String,
    is_planned: bool,
}

/// Holds every line's members against the port's pools.
pub fn people(inputs: AuditInputs<'_>, plan: &Plan, breaches: &mut Vec<Breach>) {
    let mut holds: BTreeMap<(usize, usize), Vec<Hold>> = BTreeMap::new();
    for line in plan.tasks.iter().filter(|line| holds_time(line.state)) {
        let Some(task) = inputs.work.task(&line.id) else { continue };
        named(inputs, task, line, breaches);
        collect(inputs, task, line, &mut holds);
    }
    for ((pool, member), mut held) in holds {
        let Some(pool) = inputs.port.pools.get(pool) else { continue };
        let Some(member) = pool.members.get(member) else { continue };
        held.sort_by(|a, b| (a.from, a.to, &a.task).cmp(&(b.from, b.to, &b.task)));
        twice(member, &held, breaches);
        on_call(inputs, (pool, member), &held, breaches);
        rested(pool, member, held, breaches);
    }
}

/// Members are known, able, and as many as the task needs.
fn named(inputs: AuditInputs<'_>, task: &Task, line: &TaskLine, breaches: &mut Vec<Breach>) {
    for (pool_id, names) in &line.members {
        let pool = inputs.port.pool(pool_id);
        for name in names {
            if !pool.is_some_and(|pool| pool.members.iter().any(|member| member.id == *name)) {
                let what = format!("{pool_id} has no {name}");
                breaches.push(breach("audit-unknown-member", &line.id, what));
            }
        }
    }
    if line.state != TaskState::Planned {
        return;
    }
    let mut wanted: BTreeMap<usize, usize> = BTreeMap::new();
    for need in &task.needs {
        *wanted.entry(need.pool).or_insert(0) += need.count;
    }
    for (position, count) in &wanted {
        let Some(pool) = inputs.port.pools.get(*position) else { continue };
        let names = names_of(line, pool);
        if names.len() != *count {
            let what = format!("it needs {count} of {} and has {}", pool.name, names.len());
            breaches.push(breach("audit-member-count", &line.id, what));
        }
        let needs: Vec<&TaskNeed> = task.needs.iter().filter(|need| need.pool == *position).collect();
        if !can_serve(pool, names, &needs) {
            let what = format!("{} cannot do what it asks of {}", names.join(" and "), pool.name);
            breaches.push(breach("audit-member-unable", &line.id, what));
        }
    }
}

fn names_of<'a>(line: &'a TaskLine, pool: &Pool) -> &'a [String] {
    line.members.iter().find(|(id, _)| *id == pool.id).map(|(_, names)| names.as_slice()).unwrap_or_default()
}

/// Whether the named members can be dealt out to the needs so that each is able: in the order in which the plan names
/// them, needs take theirs one after the other.
fn can_serve(pool: &Pool, names: &[String], needs: &[&TaskNeed]) -> bool {
    let slots = needs.iter().flat_map(|need| std::iter::repeat_n(*need, need.count));
    names.iter().zip(slots).all(|(name, need)| {
        let position = pool.members.iter().position(|member| member.id == *name);
        position.is_none_or(|position| need.able.contains(&position))
    })
}

fn collect(
    inputs: AuditInputs<'_>,
    task: &Task,
    line: &TaskLine,
    holds: &mut BTreeMap<(usize, usize), Vec<Hold>>,
) {
    let (Some(start), Some(finish)) = (line.start, line.finish) else { return };
    let mut given: BTreeMap<usize, usize> = BTreeMap::new();
    for need in &task.needs {
        let Some(pool) = inputs.port.pools.get(need.pool) else { continue };
        let names = names_of(line, pool);
        let first = given.entry(need.pool).or_insert(0);
        for name in names.iter().skip(*first).take(need.count) {
            let Some(member) = pool.members.iter().position(|member| member.id == *name) else { continue };
            holds.entry((need.pool, member)).or_default().push(Hold {
                from: start - need.before,
                to: finish + need.after,
                task: line.id.clone(),
                is_planned: line.state == TaskState::Planned,
            });
        }
        *first += need.count;
    }
}

fn twice(member: &Member, held: &[Hold], breaches: &mut Vec<Breach>) {
    for (number, one) in held.iter().enumerate() {
        for other in held.iter().skip(number + 1).take_while(|other| other.from < one.to) {
            if (one.is_planned || other.is_planned) && one.from < one.to && other.from < other.to {
                let what = format!("{} is held by {} and {} at once", member.id, one.task, other.task);
                breaches.push(breach("audit-held-twice", &one.task, what));
            }
        }
    }
}

/// Members are held only while on call and in service.
fn on_call(
    inputs: AuditInputs<'_>,
    (pool, member): (&Pool, &Member),
    held: &[Hold],
    breaches: &mut Vec<Breach>,
) {
    let of = |id: &str| inputs.situation.means.get(id).cloned().unwrap_or_default();
    let outages = [of(&member.id), of(&pool.id)].concat();
    for hold in held.iter().filter(|hold| hold.is_planned && hold.from < hold.to) {
        let (from, to) = (hold.from.to_utc(), hold.to.to_utc());
        let is_out = outages.iter().any(|out| out.from < to && out.until.is_none_or(|until| from < until));
        if is_out {
            let what = format!("{} is out of service", member.id);
            breaches.push(breach("audit-out-of-service", &hold.task, what));
        }
        let is_on = member.shifts.is_empty() || every_minute_on(inputs, member, from, to);
        if !is_on {
            breaches.push(breach("audit-off-shift", &hold.task, format!("{} is not on call", member.id)));
        }
    }
}

fn every_minute_on(inputs: AuditInputs<'_>, member: &Member, from: DateTime<Utc>, to: DateTime<Utc>) -> bool {
    let minutes = (to - from).num_minutes();
    (0..minutes).map(|minute| from + chrono::TimeDelta::minutes(minute)).all(|at| {
        let local = inputs.port.clock.local(Moment::at_or_before(at)).time();
        member.shifts.iter().any(|shift| match shift {
            Shift::Once { from, to } => *from <= at && at < *to,
            Shift::Daily { from, to } if from < to => *from <= local && local < *to,
            Shift::Daily { from, to } => *from <= local || local < *to,
        })
    })
}

/// A duty from its first hold to its last release, gaps shorter than the rest inside, is not longer than allowed. Only
/// duties that the plan adds to are judged: what has been worked is past mending.
fn rested(pool: &Pool, member: &Member, mut held: Vec<Hold>, breaches: &mut Vec<Breach>) {
    let Some(duty) = pool.duty else { return };
    held.extend(member.worked.iter().map(|(from, to)| Hold {
        from: Moment::at_or_before(*from),
        to: Moment::at_or_after(*to),
        task: String::from("work before the plan"),
        is_planned: false,
    }));
    held.retain(|hold| hold.from < hold.to);
    held.sort_by_key(|hold| (hold.from, hold.to));
    let mut block: Option<(Moment, Moment, bool)> = None;
    let mut judge = |from: Moment, to: Moment, has_planned: bool, task: &str| {
        if has_planned && to - from > duty.at_most {
            let what =
                format!("{} would be on duty for {}; {} is allowed", member.id, to - from, duty.at_most);
            breaches.push(breach("audit-duty", task, what));
        }
    };
    for hold in &held {
        let (from, to, has_planned) = match block {
            Some((from, to, has_planned)) if hold.from - to < duty.then_rest => {
                (from, to.max(hold.to), has_planned || hold.is_planned)
            }
            Some(_) | None => (hold.from, hold.to, hold.is_planned),
        };
        judge(from, to, has_planned, &hold.task);
        block = Some((from, to, has_planned));
    }
}
