//! Which calls follow from what differs between the plan issued last and the plan now, and from open decisions.
//!
//! A call is one addressee and one matter. What people know of a task is what the issued plan said, or what they were told
//! since; who knows how it stands now is not called.

use crate::plan::call::{Addressee, Call, Matter};
use crate::plan::call_book::{CallInputs, Talk, channel, lead};
use crate::plan::calls_decided::decisions_and_orders;
use crate::plan::changes::{Changes, changes_between};
use crate::plan::sheet::{Plan, TaskLine, TaskState};
use crate::port::contact::is_same_name;
use crate::port::fleet::Ship;
use crate::port::harbour::Port;
use crate::record::call::Substance;
use crate::record::situation::CallHeard;

/// All calls, most urgent first: by when they are of use, then by what is at stake; those that are confirmed last.
#[must_use]
pub fn calls(inputs: &CallInputs<'_>) -> Vec<Call> {
    let mut calls = decisions_and_orders(inputs);
    if let Some(issued) = inputs.issued {
        calls.extend(calls_about_tasks(inputs, issued));
    }
    calls.sort_by(|a, b| {
        let key = |call: &Call| (!call.is_unanswered(), call.by, call.stake);
        key(a).cmp(&key(b)).then_with(|| (&a.about, &a.to).cmp(&(&b.about, &b.to)))
    });
    calls
}

fn calls_about_tasks(inputs: &CallInputs<'_>, issued: &Plan) -> Vec<Call> {
    let changes = changes_between(issued, inputs.plan, inputs.events, &inputs.port.clock);
    let since = inputs.situation.issued.last().map(|said| said.nth);
    let reports: Vec<&CallHeard> = inputs
        .situation
        .calls
        .iter()
        .filter(|heard| since.is_none_or(|issue| issue < heard.said.nth))
        .collect();
    let mut calls = Vec::new();
    for line in &inputs.plan.tasks {
        let Some(old) = issued.task(&line.id) else { continue };
        let Some(now) = substance(line) else { continue };
        let differs = substance(old) != Some(now);
        for to in addressees(inputs.port, old, line) {
            let talk = Talk { reports: &reports, to: &to, about: &line.id };
            if differs || talk.was_told_otherwise(now) {
                calls.push(call_about(inputs, &changes, (old, line), now, &talk));
            }
        }
    }
    calls
}

/// How a task stands, as far as people must know; `None` once it has begun.
fn substance(line: &TaskLine) -> Option<Substance> {
    match line.state {
        TaskState::GivenUp => Some(Substance::GivenUp),
        TaskState::NotNeeded => Some(Substance::NotNeeded),
        TaskState::Waiting => Some(Substance::Waits),
        TaskState::Planned if line.is_unreported => Some(Substance::Unreported),
        TaskState::Planned => line.start.map(|start| Substance::Start(start.to_utc())),
        TaskState::Started | TaskState::Done => None,
    }
}

fn call_about(
    inputs: &CallInputs<'_>,
    changes: &Changes,
    (old, line): (&TaskLine, &TaskLine),
    now: Substance,
    talk: &Talk<'_>,
) -> Call {
    let lead = lead(inputs.port, &talk.to.who);
    let known = old.start.filter(|_| old.state == TaskState::Planned);
    let by = match (now, known) {
        // Who was to begin is asked as long after as others are told before.
        (Substance::Unreported, Some(start)) => start + lead,
        (Substance::Start(_), Some(start)) => line.start.map_or(start, |now| now.min(start)) - lead,
        (Substance::Start(_), None) => line.start.map_or(inputs.plan.now, |start| start - lead),
        (_, Some(start)) => start - lead,
        (_, None) => inputs.plan.now,
    };
    let state = inputs.situation.tasks.get(&line.id);
    let told = talk.told(now);
    Call {
        id: told.id,
        to: talk.to.clone(),
        channel: channel(inputs.port, &talk.to.who),
        by,
        lead,
        is_order: line.is_ordered || state.is_some_and(|state| state.fixed.is_some() || state.way.is_some()),
        about: line.id.clone(),
        substance: now,
        matter: Matter::Task { name: line.name.clone(), issued: known, latest: line.latest_start },
        place: place(inputs.port, line),
        reason: reason(changes, inputs.plan, line),
        stake: line.stake,
        standing: told.standing,
        released_by: told.released_by,
    }
}

/// Why a task is not as it was issued; empty if nothing says so.
fn reason(changes: &Changes, plan: &Plan, line: &TaskLine) -> String {
    let turned = changes.turned.iter().find(|turned| turned.id == line.id).map(|turned| &turned.cause);
    let moved = changes.moved.iter().find(|moved| moved.id == line.id).map(|moved| &moved.cause);
    let cause = turned.or(moved).cloned().unwrap_or_default();
    // A chain's last link may be a task alone.
    if plan.task(&cause).is_some() { format!("it waits for {cause}") } else { cause }
}

fn place(port: &Port, line: &TaskLine) -> String {
    let ship = ship_of(port, &line.id);
    let berth = ship.and_then(|ship| port.berth(&ship.berth)).map(|berth| berth.name.clone());
    if line.at.is_empty() { berth.unwrap_or_default() } else { line.at.clone() }
}

fn ship_of<'a>(port: &'a Port, task: &str) -> Option<&'a Ship> {
    let (thing, _) = task.split_once('/')?;
    port.ships.iter().find(|ship| ship.id == thing)
}

/// Whom a task concerns, each once: who does it, who approves it, and the offices of its pools before and now. Whoever has
/// the port's authority is told if nobody is named.
fn addressees(port: &Port, old: &TaskLine, line: &TaskLine) -> Vec<Addressee> {
    let ship = ship_of(port, &line.id).map(|ship| format!("{} {}", ship.id, ship.name)).unwrap_or_default();
    // An office serves every ship; a master, an agent or an officer belongs to one.
    let is_office = port.contact(&line.who).is_some_and(|contact| !contact.pools.is_empty());
    let ship = if is_office || is_same_name(&line.who, &port.authority) { String::new() } else { ship };
    let plain = |who: &String| Addressee { who: who.clone(), ship: String::new() };
    let pools = old.members.iter().chain(&line.members).map(|(pool, _)| office(port, pool));
    let all = std::iter::once(Addressee { who: line.who.clone(), ship })
        .chain(line.approvers.iter().map(plain))
        .chain(pools.map(|who| plain(&who)));
    let mut once: Vec<Addressee> = Vec::new();
    for to in all {
        if !to.who.trim().is_empty() && once.iter().all(|other| !is_same_name(&other.who, &to.who)) {
            once.push(to);
        }
    }
    if once.is_empty() { vec![plain(&port.authority)] } else { once }
}

/// Whom one calls for a pool.
fn office(port: &Port, pool: &str) -> String {
    let contact = port.contacts.iter().find(|contact| contact.pools.iter().any(|one| one == pool));
    match (contact, port.pool(pool)) {
        (Some(contact), _) => contact.who.clone(),
        (None, Some(pool)) => pool.name.clone(),
        (None, None) => pool.to_owned(),
    }
}
