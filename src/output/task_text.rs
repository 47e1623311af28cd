//! One task of a plan as people read it: its times in the margin, the rest beside them.

use crate::output::arrival_text::glued_chance;
use crate::output::clock_text::{Times, lasting};
use crate::output::layout::Page;
use crate::plan::sheet::{ChainLink, TaskLine, TaskState};
use crate::time::moment::{Minutes, Moment};

/// Room for "06:30 Fri 02:30Z" and "spare 102 h 45 min".
pub const MARGIN: usize = 21;

/// Writes a task: start in local time and UTC, latest start and spare in the margin; name, people, place and risk beside.
pub fn write_task(page: &mut Page, times: &Times, task: &TaskLine) {
    page.beside(MARGIN, &margin(times, task), &sentence(times, task));
}

/// "V01/secure  Secure Ternaby Reach for sea".
#[must_use]
pub fn title(task: &TaskLine) -> String {
    format!("{} {}", task.id, task.name)
}

/// "pilot P1, tug T1 T2"; empty if it holds nobody.
#[must_use]
pub fn members(task: &TaskLine) -> String {
    let pools: Vec<String> = task
        .members
        .iter()
        .filter(|(_, names)| !names.is_empty())
        .map(|(pool, names)| format!("{pool} {}", names.join(" ")))
        .collect();
    pools.join(", ")
}

/// The time left between planned and latest start; `None` where there is none to tell.
#[must_use]
pub fn spare(task: &TaskLine) -> Option<Minutes> {
    (task.state == TaskState::Planned).then_some(())?;
    Some(task.latest_start? - task.start?)
}

/// The planned start as people are told it: ordered and begun ones to the minute.
#[must_use]
pub fn told_start(times: &Times, task: &TaskLine) -> Option<Moment> {
    let start = task.start?;
    let is_exact = task.is_ordered || task.state != TaskState::Planned;
    Some(if is_exact { start } else { times.told_start(start, task.latest_start) })
}

/// "Thu 06:00 + 13 h V01/cargo + 7 h 40 min waits for the tide = Fri 02:40", to the minute, so that it adds up.
#[must_use]
pub fn chain_words(times: &Times, from: Moment, chain: &[ChainLink]) -> String {
    let mut words = times.local_day(from);
    let mut end = from;
    for link in chain {
        end = end + link.minutes;
        words.push_str(&format!(" +\u{a0}{} {}", lasting(link.minutes), link.what));
    }
    words.push_str(&format!(" =\u{a0}{}", times.local_day(end)));
    words
}

fn margin(times: &Times, task: &TaskLine) -> Vec<String> {
    let Some(start) = told_start(times, task) else { return vec!["no time yet".to_owned()] };
    let mut lines = vec![format!("{} {}", times.within(start, start), times.utc(start))];
    if task.state == TaskState::Started {
        lines.push(" started".to_owned());
        return lines;
    }
    if let (Some(exact), Some(latest)) = (task.start, task.latest_start) {
        lines.push(format!(" latest {}", times.within(start, times.told_latest(exact, latest))));
    }
    match spare(task) {
        Some(spare) if spare < Minutes::ZERO => lines.push(" NO SPARE".to_owned()),
        Some(spare) => lines.push(format!(" spare {}", lasting(spare))),
        None => {}
    }
    lines
}

fn sentence(times: &Times, task: &TaskLine) -> String {
    let mut parts = vec![flags(task) + &title(task)];
    if let (Some(start), Some(finish)) = (told_start(times, task), task.finish) {
        let finish = if task.is_ordered { finish } else { times.told_up(finish) };
        parts.push(format!("{}, to {}", lasting(task.takes), times.within(start, finish)));
    }
    parts.extend(said("by ", &task.who));
    parts.extend(said("at ", &task.at));
    parts.extend(said("with ", &members(task)));
    parts.extend(said("approval ", &task.approvers.join(" and ")));
    parts.extend(task.caught.map(|caught| format!("caught by wind {}", glued_chance(caught))));
    parts.extend(task.deadline.map(|at| format!("must be done by {}", times.both(times.told_down(at)))));
    parts.extend(task.due.map(|at| format!("should be done by {}", times.both(times.told_down(at)))));
    if let Some(stage) = task.if_declared.as_ref().filter(|_| task.state != TaskState::Started) {
        let by = told_start(times, task).map_or(String::new(), |start| format!(" by {}", times.both(start)));
        parts.push(format!("if {stage} is declared{by}"));
    }
    parts.extend(task.cut.as_ref().map(|price| format!("the shorter way, at a price: {price}")));
    parts.extend(task.stands_in_for.as_ref().map(|other| format!("stands in for {other}")));
    parts.extend(said("confirm: ", &task.confirm));
    if task.late_by > Minutes::ZERO && !task.chain.is_empty() {
        parts.push(format!("starts then because {}", chain_words(times, task.chain_from, &task.chain)));
    }
    parts.join("; ")
}

fn said(lead: &str, text: &str) -> Option<String> {
    (!text.is_empty()).then(|| format!("{lead}{text}"))
}

/// What must be seen before the name.
fn flags(task: &TaskLine) -> String {
    let mut flags = String::new();
    if task.is_unreported {
        flags.push_str("NOT REPORTED ");
    }
    if task.late_by > Minutes::ZERO {
        flags.push_str(&format!("LATE by {} ", lasting(task.late_by)));
    }
    if task.is_ordered {
        flags.push_str("ORDERED ");
    }
    flags
}
