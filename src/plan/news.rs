//! What an event says, in a few words.

use crate::record::event::{Event, What};
use crate::time::clock::PortClock;
use crate::time::moment::Moment;
use chrono::{DateTime, Utc};

/// "advisories/12.txt taken (Duty officer)": the event and who says so.
#[must_use]
pub fn news_words(event: &Event, clock: &PortClock) -> String {
    let what = what_words(&event.what, &|time| clock.show(Moment::at_or_before(time)));
    if event.reason.is_empty() {
        format!("{what} ({})", event.by)
    } else {
        format!("{what} ({}: {})", event.by, event.reason)
    }
}

fn what_words(what: &What, shown: &dyn Fn(DateTime<Utc>) -> String) -> String {
    match what {
        What::AdvisoryTaken(taking) if taking.by_order => format!("{} taken, to be planned on", taking.key()),
        What::AdvisoryTaken(taking) => format!("{} taken", taking.key()),
        What::ArrivalAdopted { place, wind, time: Some(time) } => {
            format!("arrival of {wind} at {place} adopted for {}", shown(*time))
        }
        What::ArrivalAdopted { place, wind, time: None } => {
            format!("adopted arrival of {wind} at {place} withdrawn")
        }
        What::StageDeclared { stage, .. } => format!("stage {stage} declared"),
        What::StageLifted { stage, .. } => format!("stage {stage} lifted"),
        What::TaskStarted { task, .. } => format!("{task} begun"),
        What::TaskDone { task, .. } => format!("{task} done"),
        What::TaskCannot { task } => format!("{task} cannot be done"),
        What::TaskNotNeeded { task } => format!("{task} not needed"),
        What::TaskTakes { task, takes } => format!("{task} takes {takes}"),
        What::TaskNotBefore { task, time } => format!("{task} not before {}", shown(*time)),
        What::TaskFixed { task, start: Some(start) } => {
            format!("start of {task} fixed for {}", shown(*start))
        }
        What::TaskFixed { task, start: None } => format!("fixed start of {task} released"),
        What::CutOrdered { task } => format!("{task} to be cut short"),
        What::SubstituteOrdered { task } => format!("stand-ins ordered for {task}"),
        What::TaskRetracted { task, .. } => format!("a report about {task} withdrawn"),
        What::MeansOut { member, until: None, .. } => format!("{member} out of service"),
        What::MeansOut { member, until: Some(until), .. } => {
            format!("{member} out of service until {}", shown(*until))
        }
        What::MeansBack { member, .. } => format!("{member} back in service"),
        What::Observed { place, wind, averaging, .. } => format!("{wind} ({averaging}) observed at {place}"),
        What::PlanIssued => String::from("plan issued"),
    }
}
