//! What an event says, in a few words.

use crate::record::call::{CallReport, CallStep};
use crate::record::event::{Event, What};
use crate::record::fact::{AnchorageState, Fact, Measure};
use crate::record::ruling::Ruling;
use crate::record::situation::Situation;
use crate::time::clock::PortClock;
use crate::time::moment::Moment;
use chrono::{DateTime, Utc};

/// "advisories/12.txt taken (Duty officer)": the event and who says so.
#[must_use]
pub fn news_words(event: &Event, clock: &PortClock) -> String {
    let shown = |time| clock.show(Moment::at_or_before(time));
    let mut what = what_words(&event.what, &shown);
    if let What::MeansOut { from, .. }
    | What::MeansBack { from, .. }
    | What::StageDeclared { from, .. }
    | What::StageLifted { from, .. } = &event.what
        && *from != event.known
    {
        what.push_str(&format!(" from {}", shown(*from)));
    }
    let who = match (event.name.as_str(), event.on_behalf.as_str()) {
        ("", "") => event.by.clone(),
        (name, "") => format!("{name}, {}", event.by),
        ("", for_whom) => format!("{} for {for_whom}", event.by),
        (name, for_whom) => format!("{name}, {} for {for_whom}", event.by),
    };
    if event.reason.is_empty() {
        format!("{what} ({who})")
    } else {
        format!("{what} ({who}: {})", event.reason)
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
        What::TaskLeft { task, left } => format!("{task} still takes {left}"),
        What::Told(fact) => fact_words(fact, shown),
        What::Ruled(ruling) => ruling_words(ruling, shown),
        What::Call(report) => call_words(report),
        What::Withdrawn { event } => format!("event {event} withdrawn"),
        What::Confirmed { event } => format!("event {event} confirmed"),
    }
}

/// "call C3F9A1 to Tug office about V04/sail: acknowledged".
fn call_words(report: &CallReport) -> String {
    let to = if report.to.is_empty() { String::new() } else { format!(" to {}", report.to) };
    let about = if report.about.is_empty() { String::new() } else { format!(" about {}", report.about) };
    let step = match report.step {
        CallStep::Released => "released",
        CallStep::Told => "told",
        CallStep::Acknowledged => "acknowledged",
        CallStep::NoAnswer => "no answer",
    };
    format!("call {}{to}{about}: {step}", report.call)
}

/// "bridge stops from Thu 17 Sep 18:00 -03 (21:00Z) until ...".
fn fact_words(fact: &Fact, shown: &dyn Fn(DateTime<Utc>) -> String) -> String {
    let what = match fact {
        Fact::Stops { service, .. } => format!("{service} stops"),
        Fact::Resumes { service, .. } => format!("{service} works again"),
        Fact::Unusable { spot, .. } => format!("{spot} cannot be used"),
        Fact::Usable { spot, .. } => format!("{spot} can be used again"),
        Fact::DepthLimit { spot, draught, .. } => format!("no draught over {draught} at {spot}"),
        Fact::Signal { shown, .. } => format!("signal {shown} shown"),
        Fact::Authorities { measure: Measure::Evacuation, area, .. } => format!("{area} evacuated"),
        Fact::Authorities { measure: Measure::Curfew, area, .. } => format!("curfew in {area}"),
        Fact::Sea { spot, height, at } => {
            return format!("sea of {height} observed at {spot} {}", shown(*at));
        }
        Fact::Anchorage { spot, state, .. } => match state {
            AnchorageState::Open => format!("anchorage {spot} open"),
            AnchorageState::Full => format!("anchorage {spot} full"),
            AnchorageState::Closed => format!("anchorage {spot} closed"),
        },
    };
    format!("{what} from {}{}", shown(fact.from()), until_words(fact.until(), shown))
}

fn ruling_words(ruling: &Ruling, shown: &dyn Fn(DateTime<Utc>) -> String) -> String {
    let (what, conditions) = match ruling {
        Ruling::Hold { stage, .. } => (format!("stage {stage} held"), ""),
        Ruling::Skip { stage } => (format!("stage {stage} skipped"), ""),
        Ruling::Stay { ship, conditions, .. } => (format!("{ship} may stay"), conditions.as_str()),
        Ruling::Waive { waived, conditions, .. } => (format!("{waived} waived"), conditions.as_str()),
        Ruling::Refuse { refused } => (format!("{refused} refused"), ""),
    };
    let on = if conditions.is_empty() { String::new() } else { format!(", on condition: {conditions}") };
    format!("{what}{}{on}", until_words(ruling.until(), shown))
}

fn until_words(until: Option<DateTime<Utc>>, shown: &dyn Fn(DateTime<Utc>) -> String) -> String {
    until.map_or_else(String::new, |until| format!(" until {}", shown(until)))
}

/// The facts and rulings that hold or will hold, and the orders that wait for a second person, in words: they stand in the
/// head of a plan.
#[must_use]
pub fn standing_words(situation: &Situation, clock: &PortClock) -> Vec<String> {
    let shown = |time: DateTime<Utc>| clock.show(Moment::at_or_before(time));
    let is_over = |until: Option<DateTime<Utc>>| until.is_some_and(|until| until <= situation.now);
    let waiting = situation.waiting.values().map(|order| {
        format!(
            "ORDER {} WAITS FOR A SECOND PERSON and does not count yet: {}",
            order.number,
            news_words(order, clock)
        )
    });
    let facts = situation.facts.values().filter(|told| !is_over(told.value.until()));
    let facts = facts.map(|told| format!("fact: {} ({})", fact_words(&told.value, &shown), told.said.by));
    let rulings = situation.rulings.values().filter(|told| !is_over(told.value.until()));
    let rulings =
        rulings.map(|told| format!("order: {} ({})", ruling_words(&told.value, &shown), told.said.by));
    waiting.chain(rulings).chain(facts).collect()
}
