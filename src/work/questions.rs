//! Which winds at which places the plan has to know about.

use crate::arrival::question::{Question, Sought};
use crate::port::harbour::Port;
use crate::rules::limit::{Anchor, Deadline, Limit, LimitAt};
use crate::rules::stage::{Rules, Trigger};
use crate::units::speed::Knots;
use crate::units::wind::{Averaging, WindLimit, standard_height};
use crate::wind::exposure::open_sea_limit;
use crate::work::graph::WorkGraph;
use std::collections::BTreeMap;

/// The winds whose arrival is told for every place: gale, storm and hurricane force.
pub const HEAD_WINDS: [Knots; 3] = [Knots::GALE, Knots::STORM, Knots::HURRICANE];

/// The name under which a wind at a place is asked and answered.
#[must_use]
pub fn question_key(wind: &LimitAt) -> String {
    let Limit::Wind(limit) = &wind.limit else { return format!("{} high seas", wind.place) };
    let (speed, seconds, height) = (limit.speed.get(), limit.averaging.seconds(), limit.height.get());
    format!("{} {speed:.2} kt {seconds} s {height:.1} m", wind.place)
}

/// The name under which a place's open-sea wind of the advisory's own averaging is asked and answered.
#[must_use]
pub fn head_key(place: &str, wind: Knots) -> String {
    format!("{place} {:.0} kt open sea", wind.get())
}

/// The open-sea wind as the head of a plan tells it.
#[must_use]
pub fn head_wind(wind: Knots, averaging: Averaging) -> WindLimit {
    WindLimit { speed: wind, averaging, height: standard_height() }
}

/// Every question that the port's rules and tasks raise, each once, in the order of their keys.
///
/// Limits at a place are turned into the open-sea wind of the advisory's `averaging` that the scenarios are tested
/// against; a limit so low that even a light wind exceeds it stays a question and is answered "already".
#[must_use]
pub fn questions(port: &Port, rules: &Rules, work: &WorkGraph, averaging: Averaging) -> Vec<Question> {
    let mut asked: BTreeMap<String, Question> = BTreeMap::new();
    for place in &port.places {
        for wind in HEAD_WINDS {
            let key = head_key(&place.id, wind);
            asked.insert(key.clone(), Question { key, position: place.position, sought: Sought::Wind(wind) });
        }
    }
    for wind in winds(rules, work) {
        let key = question_key(wind);
        let Some(place) = port.place(&wind.place) else { continue };
        let sought = match &wind.limit {
            Limit::Wind(limit) => Sought::Wind(open_sea_limit(&place.exposure, limit, averaging).speed),
            Limit::Seas => Sought::Seas,
        };
        asked.entry(key.clone()).or_insert(Question { key, position: place.position, sought });
    }
    asked.into_values().collect()
}

/// Every wind at a place that a trigger, a deadline or a working limit names; with repeats.
fn winds<'a>(rules: &'a Rules, work: &'a WorkGraph) -> impl Iterator<Item = &'a LimitAt> {
    let triggers = rules.stages.iter().flat_map(|stage| &stage.any).filter_map(|trigger| match trigger {
        Trigger::Forecast { wind, .. } | Trigger::WindOver { wind, .. } => Some(wind),
        Trigger::Observed { .. } | Trigger::Stage { .. } => None,
    });
    let duties = rules.duties.iter().filter_map(|duty| duty.by.as_ref()).filter_map(wind_of);
    let tasks =
        work.tasks().flat_map(|(_, task)| task.done_before.iter().filter_map(wind_of).chain(&task.stops_at));
    triggers.chain(duties).chain(tasks)
}

fn wind_of(deadline: &Deadline) -> Option<&LimitAt> {
    match &deadline.anchor {
        Anchor::Wind(wind) => Some(wind),
        Anchor::Stage(_) | Anchor::Clock(_) => None,
    }
}
