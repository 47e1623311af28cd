//! All words for states, and all cautions, in one place.

use crate::output::setting::Setting;
use crate::plan::changes::Turn;
use crate::plan::sheet::{DutyState, ReliefKind, StageStatus, TaskState};
use crate::rules::stage::StageDirection;
use crate::rules::task::Stake;

/// How a stage stands.
#[must_use]
pub fn stage_status(status: StageStatus) -> &'static str {
    match status {
        StageStatus::NotDue => "not due",
        StageStatus::Computed => "due later",
        StageStatus::Recommended => "RECOMMENDED NOW, not declared",
        StageStatus::Declared => "DECLARED, in force",
        StageStatus::Superseded => "superseded",
        StageStatus::Lifted => "lifted",
    }
}

/// How a stage stands, as a key in JSON.
#[must_use]
pub fn stage_status_key(status: StageStatus) -> &'static str {
    match status {
        StageStatus::NotDue => "not_due",
        StageStatus::Computed => "computed",
        StageStatus::Recommended => "recommended",
        StageStatus::Declared => "declared",
        StageStatus::Superseded => "superseded",
        StageStatus::Lifted => "lifted",
    }
}

/// Closing or re-opening, as a key in JSON.
#[must_use]
pub fn direction_key(direction: StageDirection) -> &'static str {
    match direction {
        StageDirection::Closing => "closing",
        StageDirection::Reopening => "reopening",
    }
}

/// How a task stands, as a key in JSON.
#[must_use]
pub fn task_state_key(state: TaskState) -> &'static str {
    match state {
        TaskState::GivenUp => "given_up",
        TaskState::Started => "started",
        TaskState::Planned => "planned",
        TaskState::Waiting => "waiting",
        TaskState::Done => "done",
        TaskState::NotNeeded => "not_needed",
    }
}

/// How a duty stands.
#[must_use]
pub fn duty_state(state: DutyState) -> &'static str {
    match state {
        DutyState::NotDue => "not due",
        DutyState::Open => "open",
        DutyState::Fulfilled => "fulfilled",
        DutyState::Missed => "MISSED by this plan",
    }
}

/// How a duty stands, as a key in JSON.
#[must_use]
pub fn duty_state_key(state: DutyState) -> &'static str {
    match state {
        DutyState::NotDue => "not_due",
        DutyState::Open => "open",
        DutyState::Fulfilled => "fulfilled",
        DutyState::Missed => "missed",
    }
}

/// What is at stake; also the key in JSON.
#[must_use]
pub fn stake(stake: Stake) -> &'static str {
    match stake {
        Stake::Life => "life",
        Stake::Harm => "harm",
        Stake::Loss => "loss",
        Stake::Order => "order",
    }
}

/// What kind of step relieves a plan, as a key in JSON.
#[must_use]
pub fn relief_key(kind: ReliefKind) -> &'static str {
    match kind {
        ReliefKind::Cut => "cut",
        ReliefKind::Substitute => "substitute",
        ReliefKind::OneMore => "one_more",
        ReliefKind::LiftOrder => "lift_order",
    }
}

/// The title under which tasks stand whose state changed in this way.
#[must_use]
pub fn turn_title(turn: Turn) -> &'static str {
    match turn {
        Turn::GivenUp => "NO LONGER FITS",
        Turn::Relieved => "FITS AGAIN",
        Turn::Late => "NEWLY LATE",
        Turn::Unreported => "TIME PASSED WITHOUT A REPORT",
        Turn::Added => "NEW IN THE PLAN",
        Turn::Dropped => "NO LONGER IN THE PLAN",
        Turn::Started => "STARTED",
        Turn::Done => "DONE",
    }
}

/// How a task's state changed, as a key in JSON.
#[must_use]
pub fn turn_key(turn: Turn) -> &'static str {
    match turn {
        Turn::GivenUp => "given_up",
        Turn::Relieved => "relieved",
        Turn::Late => "late",
        Turn::Unreported => "unreported",
        Turn::Added => "added",
        Turn::Dropped => "dropped",
        Turn::Started => "started",
        Turn::Done => "done",
    }
}

/// "1 task", "3 tasks".
#[must_use]
pub fn count(number: usize, one: &str) -> String {
    format!("{number}\u{a0}{one}{}", if number == 1 { "" } else { "s" })
}

/// What a page about the wind at a place does not cover.
#[must_use]
pub fn wind_cautions(setting: &Setting) -> Vec<String> {
    let official = setting.official_source;
    [
        format!(
            "Squalls in the outer bands can bring gusts of gale force hours before the gale itself, and none of them is \
             in these figures: heed squall and thunderstorm warnings of {official}."
        ),
        "The band is the spread of the forecast, not of the gusts of one hour. Ordinary weather, terrain, buildings, cranes \
         and sheds that funnel the wind are not in it; below 20 kt the storm does not make the wind."
            .to_owned(),
        "Seas and swell are for deep, open water; the bar, the entrance and long-period surge at berths differ.".to_owned(),
        "The wind on the spot overrules the figure, whatever it says.".to_owned(),
    ]
    .into()
}

/// Who decides, and what the numbers do not cover; every full plan ends with these.
#[must_use]
pub fn cautions(setting: &Setting) -> Vec<String> {
    let authority = setting.authority;
    let official = setting.official_source;
    [
        format!(
            "Only the {authority} declares, alters or lifts a stage. This program recommends; the last declared order \
             stands above every computed plan, and nothing here escalates or relaxes by itself."
        ),
        "The master remains answerable for ship and crew and may depart from this plan for safety (SOLAS V/34-1). \
         Where a time is an order, the order says so; all else here is advice."
            .to_owned(),
        format!(
            "Official warnings come from {official}. Arrival times here are calculations from the advisory named \
             above; an advisory that is overdue is not current."
        ),
        "Not modelled: wind outside the published radii, gusts and squalls ahead of the storm, terrain, surge, waves, \
         rain and current; each has limits of its own. No haven named here is thereby safe."
            .to_owned(),
        "Limits of cranes, moorings and craft are the maker's or the terminal's; those in the files are examples until \
         confirmed. Each wind limit says its averaging period; a gust is not a mean."
            .to_owned(),
        "Done means a name, a time and evidence. Planned is not done, and unverified is not secured.".to_owned(),
        "No work aloft or afloat above its limit, whatever the clock says: the wind on the spot overrules the plan. No \
         restart in the eye or a lull: the wind comes back from another side."
            .to_owned(),
        "Rest for crews, pilots and lashers, and their time to go home and shelter, are part of the plan. Evacuation \
         orders of the civil authority prevail."
            .to_owned(),
        "A waiver names who, why, conditions and expiry; each is given for one case and logged.".to_owned(),
        "Re-opening is a decision after survey, not the passing of the wind; aids, depths and daylight limit it, and it \
         may be partial."
            .to_owned(),
        "This plan does not replace the port's own plan, a mooring analysis, an under-keel clearance system or legal \
         advice. Keep each issued plan with its inputs and who accepted it."
            .to_owned(),
    ]
    .into()
}
