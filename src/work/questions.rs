//! Which winds at which places the plan has to know about.

use crate::arrival::question::{Question, Sought};
use crate::port::harbour::{Place, Port};
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
    for (_, limit) in limits(rules, work) {
        let Some(place) = port.place(&limit.place) else { continue };
        let question = question(limit, place, averaging);
        asked.entry(question.key.clone()).or_insert(question);
    }
    asked.into_values().collect()
}

/// The same for one place only, and for high seas there, whether or not a rule speaks of them.
#[must_use]
pub fn questions_at(place: &Place, rules: &Rules, work: &WorkGraph, averaging: Averaging) -> Vec<Question> {
    let seas = seas_at(&place.id);
    let limits = limits(rules, work).map(|(_, limit)| limit).filter(|limit| limit.place == place.id);
    let asked = limits.chain([&seas]).map(|limit| question(limit, place, averaging));
    let mut asked: BTreeMap<String, Question> =
        asked.map(|question| (question.key.clone(), question)).collect();
    asked.extend(HEAD_WINDS.map(|wind| {
        let key = head_key(&place.id, wind);
        (key.clone(), Question { key, position: place.position, sought: Sought::Wind(wind) })
    }));
    asked.into_values().collect()
}

/// High seas at a place.
#[must_use]
pub fn seas_at(place: &str) -> LimitAt {
    LimitAt { limit: Limit::Seas, place: place.to_owned() }
}

/// Every limit at a place, each once, in the order of their keys, with the ids of the stages, duties and tasks that name
/// it.
#[must_use]
pub fn limits_at<'a>(place: &str, rules: &'a Rules, work: &'a WorkGraph) -> Vec<(&'a LimitAt, Vec<String>)> {
    let mut told: BTreeMap<String, (&LimitAt, Vec<String>)> = BTreeMap::new();
    for (user, limit) in limits(rules, work).filter(|(_, limit)| limit.place == place) {
        let (_, users) = told.entry(question_key(limit)).or_insert((limit, Vec::new()));
        if !users.iter().any(|known| known == user) {
            users.push(user.to_owned());
        }
    }
    told.into_values().collect()
}

fn question(limit: &LimitAt, place: &Place, averaging: Averaging) -> Question {
    let sought = match &limit.limit {
        Limit::Wind(wind) => Sought::Wind(open_sea_limit(&place.exposure, wind, averaging).speed),
        Limit::Seas => Sought::Seas,
    };
    Question { key: question_key(limit), position: place.position, sought }
}

/// Every limit at a place that a trigger, a deadline or a working limit names, with the id of who names it; with repeats.
fn limits<'a>(rules: &'a Rules, work: &'a WorkGraph) -> impl Iterator<Item = (&'a str, &'a LimitAt)> {
    let triggers = rules.stages.iter().flat_map(|stage| {
        let limits = stage.any.iter().filter_map(|trigger| match trigger {
            Trigger::Forecast { wind, .. } | Trigger::WindOver { wind, .. } => Some(wind),
            Trigger::Observed { .. } | Trigger::Stage { .. } => None,
        });
        limits.map(|limit| (stage.id.as_str(), limit))
    });
    let duties = rules.duties.iter().filter_map(|duty| {
        let limit = duty.by.as_ref().and_then(limit_of)?;
        Some((duty.id.as_str(), limit))
    });
    let tasks = work.tasks().flat_map(|(_, task)| {
        let limits = task.done_before.iter().filter_map(limit_of).chain(&task.stops_at);
        limits.map(|limit| (task.id.as_str(), limit))
    });
    triggers.chain(duties).chain(tasks)
}

fn limit_of(deadline: &Deadline) -> Option<&LimitAt> {
    match &deadline.anchor {
        Anchor::Wind(limit) => Some(limit),
        Anchor::Stage(_) | Anchor::Clock(_) => None,
    }
}
