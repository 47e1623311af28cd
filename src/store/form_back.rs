//! From the store's form back to an event.

use crate::advisory::choice::parse_cycle;
use crate::finding::fault::Place;
use crate::record::call::{CallReport, CallStep, Substance};
use crate::record::event::{Event, Retracted, What};
use crate::record::fact::{AnchorageState, Fact, Measure};
use crate::record::reader_call::SAID;
use crate::record::ruling::Ruling;
use crate::record::taking::Taking;
use crate::store::form::{CallSaid, Form, Said};
use crate::time::moment::Minutes;
use crate::units::length::Metres;
use crate::units::speed::Knots;
use crate::units::wind::Averaging;
use chrono::{DateTime, Utc};

/// The event of a form; `None` if a time or quantity in it is not as this program writes them.
#[must_use]
pub fn event_of(form: Form, number: usize, place: Place) -> Option<Event> {
    Some(Event {
        number,
        known: time(&form.at)?,
        by: form.by,
        name: form.name,
        on_behalf: form.on_behalf,
        awaits_second: form.awaits_second,
        what: what(form.what)?,
        reason: form.reason,
        place,
    })
}

/// A time as the store writes it.
#[must_use]
pub fn time(text: &str) -> Option<DateTime<Utc>> {
    DateTime::parse_from_rfc3339(text).ok().map(|time| time.with_timezone(&Utc))
}

/// The end of something, if it was said: within, `None` if it was not.
fn end(text: Option<String>) -> Option<Option<DateTime<Utc>>> {
    match text {
        Some(text) => time(&text).map(Some),
        None => Some(None),
    }
}

fn minutes(text: &str) -> Option<Minutes> {
    text.strip_suffix(" min")?.parse().ok().map(Minutes::new)
}

fn knots(text: &str) -> Option<Knots> {
    Knots::parse(text).ok()
}

fn metres(text: &str) -> Option<Metres> {
    Metres::parse(text).ok()
}

fn what(said: Said) -> Option<What> {
    Some(match said {
        Said::TookAdvisory { file, sha256: digest, storm, technique, cycle, by_order } => {
            let cycle = match cycle {
                Some(text) => Some(parse_cycle(&text)?),
                None => None,
            };
            What::AdvisoryTaken(Taking { file, storm, technique, cycle, digest, by_order })
        }
        Said::AdoptsArrival { place, wind, time: at } => {
            What::ArrivalAdopted { place, wind: knots(&wind)?, time: Some(time(&at)?) }
        }
        Said::WithdrawsArrival { place, wind } => {
            What::ArrivalAdopted { place, wind: knots(&wind)?, time: None }
        }
        Said::Declares { stage, from } => What::StageDeclared { stage, from: time(&from)? },
        Said::Lifts { stage, from } => What::StageLifted { stage, from: time(&from)? },
        Said::Started { task, at, members } => What::TaskStarted { task, at: time(&at)?, members },
        Said::Done { task, at, evidence } => What::TaskDone { task, at: time(&at)?, evidence },
        Said::Cannot { task } => What::TaskCannot { task },
        Said::NotNeeded { task } => What::TaskNotNeeded { task },
        Said::Takes { task, in_all } => What::TaskTakes { task, takes: minutes(&in_all)? },
        Said::Left { task, still } => What::TaskLeft { task, left: minutes(&still)? },
        Said::NotBefore { task, time: at } => What::TaskNotBefore { task, time: time(&at)? },
        Said::Fixes { task, start } => What::TaskFixed { task, start: Some(time(&start)?) },
        Said::Cuts { task } => What::CutOrdered { task },
        Said::Substitutes { task } => What::SubstituteOrdered { task },
        Said::Retracts { task, what } => retracts(task, &what)?,
        Said::Out { member, from, until } => {
            What::MeansOut { member, from: time(&from)?, until: end(until)? }
        }
        Said::Back { member, from } => What::MeansBack { member, from: time(&from)? },
        Said::Observed { place, wind, over, at } => {
            What::Observed { place, wind: knots(&wind)?, averaging: Averaging::parse(&over)?, at: time(&at)? }
        }
        Said::Issued {} => What::PlanIssued,
        Said::Holds { stage, until } => What::Ruled(Ruling::Hold { stage, until: end(until)? }),
        Said::Skips { stage } => What::Ruled(Ruling::Skip { stage }),
        Said::PermitsStay { ship, conditions, until } => {
            What::Ruled(Ruling::Stay { ship, conditions, until: end(until)? })
        }
        Said::Waives { what, conditions, until } => {
            What::Ruled(Ruling::Waive { waived: what, conditions, until: time(&until)? })
        }
        Said::Refuses { what } => What::Ruled(Ruling::Refuse { refused: what }),
        Said::ReleasesCall(said) => called(said, CallStep::Released)?,
        Said::Told(said) => called(said, CallStep::Told)?,
        Said::Acknowledged(said) => called(said, CallStep::Acknowledged)?,
        Said::NoAnswer(said) => called(said, CallStep::NoAnswer)?,
        Said::Withdraws { event } => What::Withdrawn { event },
        Said::Confirms { event } => What::Confirmed { event },
        Said::Stops { service, from, until } => {
            What::Told(Fact::Stops { service, from: time(&from)?, until: end(until)? })
        }
        Said::Resumes { service, from } => What::Told(Fact::Resumes { service, from: time(&from)? }),
        Said::Unusable { place, from, until } => {
            What::Told(Fact::Unusable { spot: place, from: time(&from)?, until: end(until)? })
        }
        Said::Usable { place, from } => What::Told(Fact::Usable { spot: place, from: time(&from)? }),
        Said::DepthLimit { place, draught, from, until } => What::Told(Fact::DepthLimit {
            spot: place,
            draught: metres(&draught)?,
            from: time(&from)?,
            until: end(until)?,
        }),
        Said::Signal { shown, from, until } => {
            What::Told(Fact::Signal { shown, from: time(&from)?, until: end(until)? })
        }
        Said::Evacuation { area, from, until } => What::Told(Fact::Authorities {
            measure: Measure::Evacuation,
            area,
            from: time(&from)?,
            until: end(until)?,
        }),
        Said::Curfew { area, from, until } => What::Told(Fact::Authorities {
            measure: Measure::Curfew,
            area,
            from: time(&from)?,
            until: end(until)?,
        }),
        Said::Sea { place, height, at } => {
            What::Told(Fact::Sea { spot: place, height: metres(&height)?, at: time(&at)? })
        }
        Said::Anchorage { place, state, from } => {
            let state = match state.as_str() {
                "open" => AnchorageState::Open,
                "full" => AnchorageState::Full,
                "closed" => AnchorageState::Closed,
                _ => return None,
            };
            What::Told(Fact::Anchorage { spot: place, state, from: time(&from)? })
        }
    })
}

fn called(said: CallSaid, step: CallStep) -> Option<What> {
    let CallSaid { call, to, about, start, said, at } = said;
    let substance = match (start, said) {
        (Some(start), None) => Some(Substance::Start(time(&start)?)),
        (None, Some(word)) => Some(SAID.iter().find(|(known, _)| *known == word)?.1),
        (None, None) => None,
        (Some(_), Some(_)) => return None,
    };
    Some(What::Call(CallReport { call, step, to, about, substance, at: time(&at)? }))
}

fn retracts(task: String, what: &str) -> Option<What> {
    let kind = match what {
        "progress" => Retracted::Progress,
        "time_taken" => Retracted::Takes,
        "not_before" => Retracted::NotBefore,
        "way" => Retracted::Way,
        "fixed_start" => return Some(What::TaskFixed { task, start: None }),
        _ => return None,
    };
    Some(What::TaskRetracted { task, kind })
}
