//! The head of a plan: the few things that must be known before anything else is read.

use crate::output::arrival_text::{Onset, counted_from, glued_chance, onset_sentence};
use crate::output::call_text::overdue_words;
use crate::output::clock_text::{Times, lasting};
use crate::output::given_up_text::{write_if_adopted, write_overtaken};
use crate::output::layout::Page;
use crate::output::setting::Setting;
use crate::output::words::{count, stage_status};
use crate::plan::sheet::{AdvisoryInForce, Plan, StageLine, StageStatus, TaskState};
use crate::time::moment::Minutes;

/// Room for "joint chance".
const MARGIN: usize = 14;

/// Writes whose page it is and for which time: banner, port, now.
pub fn write_title(page: &mut Page, times: &Times, setting: &Setting, what: &str) {
    let banner = setting.banner();
    if !banner.is_empty() {
        page.text(0, &banner);
    }
    page.text(0, &format!("{}: {what} {}", setting.port.to_uppercase(), times.full(times.now())));
}

/// Writes the head. A failed audit, an overdue advisory and an overtaken adopted arrival come before all else.
pub fn write_head(page: &mut Page, times: &Times, setting: &Setting, plan: &Plan) {
    page.gap();
    if !plan.breaches.is_empty() {
        page.text(
            0,
            &format!(
                "THIS PLAN FAILS ITS AUDIT ({}, listed at the end): do not rely on it.",
                count(plan.breaches.len(), "point")
            ),
        );
    }
    if plan.advisory.iter().chain(&plan.other_advisories).any(|advisory| advisory.is_overdue) {
        page.text(
            0,
            "THE ADVISORY IS NOT CURRENT: a newer one is overdue, and what stands below may be wrong by now.",
        );
    }
    write_overtaken(page, times, plan);
    if let Some((first, more)) = overdue_words(plan, times) {
        let more = if more == 0 { String::new() } else { format!(" (and {more} more: see 'calls')") };
        page.labelled(MARGIN, "CALL", &format!("{first}{more}"));
    }
    page.labelled(MARGIN, "in force", &in_force(times, setting, plan));
    page.labelled(MARGIN, "advisory", &advisory(times, setting, plan.advisory.as_ref()));
    for other in &plan.other_advisories {
        page.labelled(MARGIN, "and", &advisory(times, setting, Some(other)));
    }
    for warning in &plan.warnings {
        page.labelled(MARGIN, "WARNING", warning);
    }
    write_arrivals(page, times, setting, plan);
    page.labelled(MARGIN, "next stage", &next_stage(times, plan));
    if let Some(joint) = &plan.joint {
        page.labelled(
            MARGIN,
            "joint chance",
            &format!(
                "{} that all {} of this plan end before their wind comes, tried in {}",
                glued_chance(joint.chance),
                count(joint.tasks, "hard task"),
                count(joint.scenarios, "scenario"),
            ),
        );
    }
    page.labelled(MARGIN, "verdict", &verdict(times, plan));
    for clash in &plan.clashes {
        page.labelled(MARGIN, "clash", &format!("{}: {}", clash.task, clash.what));
    }
    write_if_adopted(page, MARGIN, times, plan);
    for note in &plan.notes {
        page.labelled(MARGIN, "note", note);
    }
    if !setting.record.is_empty() {
        page.labelled(MARGIN, "record", setting.record);
    }
    if let Some(doubt) = setting.clock.doubt_at(times.now()) {
        page.labelled(MARGIN, "note", &doubt);
    }
}

/// The order in force: "S2 Prepare, declared Wed 12:00 (15:00Z) by Harbour Master".
#[must_use]
pub fn in_force(times: &Times, setting: &Setting, plan: &Plan) -> String {
    let Some(stage) = plan.stage_in_force() else {
        return format!("no stage is declared by the {}", setting.authority);
    };
    let declared = stage
        .declared
        .as_ref()
        .map_or(String::new(), |(since, by)| format!(", declared {} by {by}", times.both(*since)));
    format!("{} {}{declared}", stage.id, stage.name)
}

/// The advisory on which all stands, and how old it is; what is overdue is said loudly.
#[must_use]
pub fn advisory(times: &Times, setting: &Setting, advisory: Option<&AdvisoryInForce>) -> String {
    let Some(advisory) = advisory else {
        return format!("NONE TAKEN: nothing here rests on a forecast; ask {}", setting.official_source);
    };
    let number = advisory.number.map_or(String::new(), |number| format!("{number} "));
    let corrected = if advisory.is_corrected { "(corrected) " } else { "" };
    let mut words = format!(
        "{}{number}{corrected}on {}, issued {}, {}\u{a0}old; {}",
        currency(advisory),
        advisory.storm,
        times.both(advisory.issued),
        lasting(advisory.age),
        next_one(times, advisory),
    );
    words.push_str(&format!("; {}, {}", advisory.issuer, advisory.file));
    for assumed in &advisory.assumed {
        words.push_str(&format!("; assumed: {assumed}"));
    }
    words
}

/// "NOT CURRENT: " before an advisory whose successor is overdue.
#[must_use]
pub fn currency(advisory: &AdvisoryInForce) -> &'static str {
    if advisory.is_overdue { "NOT CURRENT: " } else { "" }
}

/// When the next advisory is due, or since when it is overdue.
#[must_use]
pub fn next_one(times: &Times, advisory: &AdvisoryInForce) -> String {
    match (advisory.is_last, advisory.is_overdue, advisory.next_due) {
        (true, _, _) => "the office said that it is the last".to_owned(),
        (false, true, Some(due)) => {
            format!(
                "the next one was due {} and is {}\u{a0}OVERDUE",
                times.both(due),
                lasting(times.now() - due)
            )
        }
        (false, true, None) => "the next one is OVERDUE".to_owned(),
        (false, false, Some(due)) => format!("next due {}", times.both(due)),
        (false, false, None) => "when the next is due is not stated".to_owned(),
    }
}

fn write_arrivals(page: &mut Page, times: &Times, setting: &Setting, plan: &Plan) {
    let end = plan.advisory.as_ref().map(|advisory| advisory.forecast_end);
    for arrival in plan.arrivals.iter().filter(|arrival| arrival.is_reference) {
        let mut onset = onset_sentence(times, &Onset::of(arrival), end);
        if let Some(storm) = &arrival.storm {
            onset.push_str(&format!("; {storm} brings it first"));
        }
        page.labelled(
            MARGIN,
            &format!("{}", arrival.wind.speed),
            &format!("at {}: {onset}", arrival.place_name),
        );
        page.labelled(MARGIN, " counts from", &counted_from(times, arrival, setting.authority));
    }
}

/// The stage that comes next: a recommended one, else the first that is due later.
#[must_use]
pub fn next_stage(times: &Times, plan: &Plan) -> String {
    let Some(stage) = next_stage_line(plan) else {
        return "none is due on this forecast".to_owned();
    };
    let due = stage.due.map_or(String::new(), |due| format!(" due {}", times.both(times.told_down(due))));
    let because = if stage.because.is_empty() { String::new() } else { format!(": {}", stage.because) };
    let status = match stage.status {
        StageStatus::Recommended => format!(", {}", stage_status(stage.status)),
        _ => String::new(),
    };
    format!("{} {}{due}{status}{because}", stage.id, stage.name)
}

/// The stage of [`next_stage`].
#[must_use]
pub fn next_stage_line(plan: &Plan) -> Option<&StageLine> {
    let with = |status| plan.stages.iter().filter(move |stage| stage.status == status);
    // Of several recommended ones the last in the rules' order is the strictest.
    with(StageStatus::Recommended)
        .next_back()
        .or_else(|| with(StageStatus::Computed).min_by_key(|stage| stage.due))
}

/// How the plan stands as a whole.
#[must_use]
pub fn verdict(times: &Times, plan: &Plan) -> String {
    let number = |test: &dyn Fn(&crate::plan::sheet::TaskLine) -> bool| {
        plan.tasks.iter().filter(|task| test(task)).count()
    };
    let given_up = number(&|task| task.state == TaskState::GivenUp);
    let late = number(&|task| task.state != TaskState::GivenUp && task.late_by > Minutes::ZERO);
    let unreported = number(&|task| task.is_unreported);
    let mut words = match (given_up, late) {
        (0, 0) => vec!["everything planned fits".to_owned()],
        (0, late) => vec![format!("everything has a time, {} late", count(late, "task"))],
        (given_up, _) => vec![format!("{} CANNOT BE DONE IN TIME", count(given_up, "task"))],
    };
    if let Some(by) = plan.reliefs.iter().map(|relief| relief.decide_by).min().filter(|_| given_up > 0) {
        words.push(format!("what would help must be decided by {}", times.both(times.told_down(by))));
    }
    if given_up > 0 && late > 0 {
        words.push(format!("{} late", count(late, "task")));
    }
    if unreported > 0 {
        words.push(format!("{} NOT REPORTED, listed first", count(unreported, "task")));
    }
    words.join("; ")
}
