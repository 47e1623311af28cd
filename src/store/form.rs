//! An event as the store keeps it: one JSON text whose keys are those of events.toml, times in UTC, quantities with units.

use crate::advisory::choice::cycle_text;
use crate::record::call::{CallReport, CallStep, Substance};
use crate::record::event::{Event, Retracted, What};
use crate::record::fact::{AnchorageState, Fact, Measure};
use crate::record::reader_call::said_word;
use crate::record::ruling::Ruling;
use crate::time::moment::Minutes;
use crate::units::length::Metres;
use crate::units::speed::Knots;
use crate::units::wind::Averaging;
use chrono::{DateTime, Utc};
use serde::{Deserialize, Serialize};

/// An event and when it was written down.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
pub struct Form {
    /// When it was written into the record, by the clock of the computer that did.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub recorded: Option<String>,
    /// When the port knew it.
    pub at: String,
    /// Who says so, by title.
    pub by: String,
    /// That person's name.
    #[serde(default, skip_serializing_if = "String::is_empty")]
    pub name: String,
    /// In whose place.
    #[serde(default, rename = "for", skip_serializing_if = "String::is_empty")]
    pub on_behalf: String,
    /// How it is known, or why it is ordered.
    #[serde(default, skip_serializing_if = "String::is_empty")]
    pub reason: String,
    /// Whether it waits for a second person.
    #[serde(default, skip_serializing_if = "std::ops::Not::not")]
    pub awaits_second: bool,
    /// What it says.
    pub what: Said,
}

/// What an event says, as in events.toml.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(rename_all = "snake_case", deny_unknown_fields)]
#[expect(missing_docs, reason = "each name is the key of events.toml, explained at `record::event::What`")]
pub enum Said {
    TookAdvisory {
        file: String,
        #[serde(default, skip_serializing_if = "String::is_empty")]
        sha256: String,
        #[serde(default, skip_serializing_if = "Option::is_none")]
        storm: Option<String>,
        #[serde(default, skip_serializing_if = "Option::is_none")]
        technique: Option<String>,
        #[serde(default, skip_serializing_if = "Option::is_none")]
        cycle: Option<String>,
        #[serde(default, skip_serializing_if = "std::ops::Not::not")]
        by_order: bool,
    },
    AdoptsArrival {
        place: String,
        wind: String,
        time: String,
    },
    WithdrawsArrival {
        place: String,
        wind: String,
    },
    Declares {
        stage: String,
        from: String,
    },
    Lifts {
        stage: String,
        from: String,
    },
    Started {
        task: String,
        at: String,
        #[serde(default, skip_serializing_if = "Vec::is_empty")]
        members: Vec<String>,
    },
    Done {
        task: String,
        at: String,
        #[serde(default, skip_serializing_if = "String::is_empty")]
        evidence: String,
    },
    Cannot {
        task: String,
    },
    NotNeeded {
        task: String,
    },
    Takes {
        task: String,
        in_all: String,
    },
    Left {
        task: String,
        still: String,
    },
    NotBefore {
        task: String,
        time: String,
    },
    Fixes {
        task: String,
        start: String,
    },
    Cuts {
        task: String,
    },
    Substitutes {
        task: String,
    },
    Retracts {
        task: String,
        what: String,
    },
    Out {
        member: String,
        from: String,
        #[serde(default, skip_serializing_if = "Option::is_none")]
        until: Option<String>,
    },
    Back {
        member: String,
        from: String,
    },
    Observed {
        place: String,
        wind: String,
        over: String,
        at: String,
    },
    Issued {},
    Stops {
        service: String,
        from: String,
        #[serde(default, skip_serializing_if = "Option::is_none")]
        until: Option<String>,
    },
    Resumes {
        service: String,
        from: String,
    },
    Unusable {
        place: String,
        from: String,
        #[serde(default, skip_serializing_if = "Option::is_none")]
        until: Option<String>,
    },
    Usable {
        place: String,
        from: String,
    },
    DepthLimit {
        place: String,
        draught: String,
        from: String,
        #[serde(default, skip_serializing_if = "Option::is_none")]
        until: Option<String>,
    },
    Signal {
        shown: String,
        from: String,
        #[serde(default, skip_serializing_if = "Option::is_none")]
        until: Option<String>,
    },
    Evacuation {
        area: String,
        from: String,
        #[serde(default, skip_serializing_if = "Option::is_none")]
        until: Option<String>,
    },
    Curfew {
        area: String,
        from: String,
        #[serde(default, skip_serializing_if = "Option::is_none")]
        until: Option<String>,
    },
    Sea {
        place: String,
        height: String,
        at: String,
    },
    Anchorage {
        place: String,
        state: String,
        from: String,
    },
    Holds {
        stage: String,
        #[serde(default, skip_serializing_if = "Option::is_none")]
        until: Option<String>,
    },
    Skips {
        stage: String,
    },
    PermitsStay {
        ship: String,
        #[serde(default, skip_serializing_if = "String::is_empty")]
        conditions: String,
        #[serde(default, skip_serializing_if = "Option::is_none")]
        until: Option<String>,
    },
    Waives {
        what: String,
        #[serde(default, skip_serializing_if = "String::is_empty")]
        conditions: String,
        until: String,
    },
    Refuses {
        what: String,
    },
    ReleasesCall(CallSaid),
    Told(CallSaid),
    Acknowledged(CallSaid),
    NoAnswer(CallSaid),
    Withdraws {
        event: usize,
    },
    Confirms {
        event: usize,
    },
}

/// What an event says of a call.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
#[serde(deny_unknown_fields)]
#[expect(
    missing_docs,
    reason = "each name is the key of events.toml, explained at `record::call::CallReport`"
)]
pub struct CallSaid {
    pub call: String,
    #[serde(default, skip_serializing_if = "String::is_empty")]
    pub to: String,
    #[serde(default, skip_serializing_if = "String::is_empty")]
    pub about: String,
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub start: Option<String>,
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub said: Option<String>,
    pub at: String,
}

/// How a time is written.
pub type Spell<'a> = &'a dyn Fn(DateTime<Utc>) -> String;

/// A time in UTC, as fine as it is.
#[must_use]
pub fn in_utc(time: DateTime<Utc>) -> String {
    time.to_rfc3339_opts(chrono::SecondsFormat::AutoSi, true)
}

impl Form {
    /// The form of an event; `spell` writes its times.
    #[must_use]
    pub fn of(event: &Event, recorded: Option<DateTime<Utc>>, spell: Spell<'_>) -> Form {
        Form {
            recorded: recorded.map(spell),
            at: spell(event.known),
            by: event.by.clone(),
            name: event.name.clone(),
            on_behalf: event.on_behalf.clone(),
            reason: event.reason.clone(),
            awaits_second: event.awaits_second,
            what: said(&event.what, spell),
        }
    }
}

/// The word for a period over which a wind is averaged.
fn over(averaging: Averaging) -> String {
    match averaging {
        Averaging::Gust3s => "3 s",
        Averaging::Minute1 => "1 min",
        Averaging::Minute2 => "2 min",
        Averaging::Minute3 => "3 min",
        Averaging::Minute10 => "10 min",
    }
    .to_owned()
}

// A quantity is written with all its digits, so that it comes back the same.
fn knots(wind: Knots) -> String {
    format!("{} kt", wind.get())
}

fn metres(length: Metres) -> String {
    format!("{} m", length.get())
}

fn minutes(span: Minutes) -> String {
    format!("{} min", span.get())
}

fn said(what: &What, t: Spell<'_>) -> Said {
    match what {
        What::AdvisoryTaken(taking) => Said::TookAdvisory {
            file: taking.file.clone(),
            sha256: taking.digest.clone(),
            storm: taking.storm.clone(),
            technique: taking.technique.clone(),
            cycle: taking.cycle.map(cycle_text),
            by_order: taking.by_order,
        },
        What::ArrivalAdopted { place, wind, time: Some(time) } => {
            Said::AdoptsArrival { place: place.clone(), wind: knots(*wind), time: t(*time) }
        }
        What::ArrivalAdopted { place, wind, time: None } => {
            Said::WithdrawsArrival { place: place.clone(), wind: knots(*wind) }
        }
        What::StageDeclared { stage, from } => Said::Declares { stage: stage.clone(), from: t(*from) },
        What::StageLifted { stage, from } => Said::Lifts { stage: stage.clone(), from: t(*from) },
        What::TaskStarted { task, at, members } => {
            Said::Started { task: task.clone(), at: t(*at), members: members.clone() }
        }
        What::TaskDone { task, at, evidence } => {
            Said::Done { task: task.clone(), at: t(*at), evidence: evidence.clone() }
        }
        What::TaskCannot { task } => Said::Cannot { task: task.clone() },
        What::TaskNotNeeded { task } => Said::NotNeeded { task: task.clone() },
        What::TaskTakes { task, takes } => Said::Takes { task: task.clone(), in_all: minutes(*takes) },
        What::TaskLeft { task, left } => Said::Left { task: task.clone(), still: minutes(*left) },
        What::TaskNotBefore { task, time } => Said::NotBefore { task: task.clone(), time: t(*time) },
        What::TaskFixed { task, start: Some(start) } => Said::Fixes { task: task.clone(), start: t(*start) },
        What::TaskFixed { task, start: None } => retracts(task, "fixed_start"),
        What::CutOrdered { task } => Said::Cuts { task: task.clone() },
        What::SubstituteOrdered { task } => Said::Substitutes { task: task.clone() },
        What::TaskRetracted { task, kind: Retracted::Progress } => retracts(task, "progress"),
        What::TaskRetracted { task, kind: Retracted::Takes } => retracts(task, "time_taken"),
        What::TaskRetracted { task, kind: Retracted::NotBefore } => retracts(task, "not_before"),
        What::TaskRetracted { task, kind: Retracted::Way } => retracts(task, "way"),
        What::MeansOut { member, from, until } => {
            Said::Out { member: member.clone(), from: t(*from), until: until.map(t) }
        }
        What::MeansBack { member, from } => Said::Back { member: member.clone(), from: t(*from) },
        What::Observed { place, wind, averaging, at } => {
            Said::Observed { place: place.clone(), wind: knots(*wind), over: over(*averaging), at: t(*at) }
        }
        What::PlanIssued => Said::Issued {},
        What::Told(fact) => told(fact, t),
        What::Ruled(ruling) => ruled(ruling, t),
        What::Call(report) => called(report, t),
        What::Withdrawn { event } => Said::Withdraws { event: *event },
        What::Confirmed { event } => Said::Confirms { event: *event },
    }
}

fn called(report: &CallReport, t: Spell<'_>) -> Said {
    let start = match report.substance {
        Some(Substance::Start(start)) => Some(t(start)),
        Some(_) | None => None,
    };
    let said = CallSaid {
        call: report.call.clone(),
        to: report.to.clone(),
        about: report.about.clone(),
        start,
        said: report.substance.and_then(said_word).map(str::to_owned),
        at: t(report.at),
    };
    match report.step {
        CallStep::Released => Said::ReleasesCall(said),
        CallStep::Told => Said::Told(said),
        CallStep::Acknowledged => Said::Acknowledged(said),
        CallStep::NoAnswer => Said::NoAnswer(said),
    }
}

fn retracts(task: &str, what: &str) -> Said {
    Said::Retracts { task: task.to_owned(), what: what.to_owned() }
}

fn told(fact: &Fact, t: Spell<'_>) -> Said {
    let from = t(fact.from());
    let until = fact.until().map(t);
    match fact {
        Fact::Stops { service, .. } => Said::Stops { service: service.clone(), from, until },
        Fact::Resumes { service, .. } => Said::Resumes { service: service.clone(), from },
        Fact::Unusable { spot, .. } => Said::Unusable { place: spot.clone(), from, until },
        Fact::Usable { spot, .. } => Said::Usable { place: spot.clone(), from },
        Fact::DepthLimit { spot, draught, .. } => {
            Said::DepthLimit { place: spot.clone(), draught: metres(*draught), from, until }
        }
        Fact::Signal { shown, .. } => Said::Signal { shown: shown.clone(), from, until },
        Fact::Authorities { measure: Measure::Evacuation, area, .. } => {
            Said::Evacuation { area: area.clone(), from, until }
        }
        Fact::Authorities { measure: Measure::Curfew, area, .. } => {
            Said::Curfew { area: area.clone(), from, until }
        }
        Fact::Sea { spot, height, .. } => {
            Said::Sea { place: spot.clone(), height: metres(*height), at: from }
        }
        Fact::Anchorage { spot, state, .. } => {
            let state = match state {
                AnchorageState::Open => "open",
                AnchorageState::Full => "full",
                AnchorageState::Closed => "closed",
            };
            Said::Anchorage { place: spot.clone(), state: state.to_owned(), from }
        }
    }
}

fn ruled(ruling: &Ruling, t: Spell<'_>) -> Said {
    match ruling {
        Ruling::Hold { stage, until } => Said::Holds { stage: stage.clone(), until: until.map(t) },
        Ruling::Skip { stage } => Said::Skips { stage: stage.clone() },
        Ruling::Stay { ship, conditions, until } => {
            Said::PermitsStay { ship: ship.clone(), conditions: conditions.clone(), until: until.map(t) }
        }
        Ruling::Waive { waived, conditions, until } => {
            Said::Waives { what: waived.clone(), conditions: conditions.clone(), until: t(*until) }
        }
        Ruling::Refuse { refused } => Said::Refuses { what: refused.clone() },
    }
}
