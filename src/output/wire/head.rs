//! The advisory and the arrivals of a plan in JSON.

use crate::output::wire::value::{chance, maybe, number, point, time};
use crate::plan::sheet::{AdvisoryInForce, Arrival};
use serde::{Deserialize, Serialize};

/// The advisory on which a plan stands.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct AdvisoryOut {
    /// Its file.
    pub file: String,
    /// The storm's name.
    pub storm: String,
    /// The issuing office.
    pub issuer: String,
    /// Its number; null if it has none.
    pub number: Option<u32>,
    /// Whether it corrects another.
    pub corrected: bool,
    /// When it was issued.
    pub issued: String,
    /// When the port knew it.
    pub known: String,
    /// When the next is due; null if not stated.
    pub next_due: Option<String>,
    /// How old it is.
    pub age_min: i64,
    /// Whether the next one is overdue, so that this is not current.
    pub overdue: bool,
    /// Whether it is the last.
    pub last: bool,
    /// What its reader assumed, in words.
    pub assumed: Vec<String>,
    /// The last time for which it forecasts.
    pub forecast_end: String,
}

/// A wind at a place.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct ArrivalOut {
    /// The place's id.
    pub place: String,
    /// Its name.
    pub name: String,
    /// Whether arrivals are adopted for it.
    pub reference: bool,
    /// The wind's speed in knots.
    pub wind_kt: serde_json::Number,
    /// The averaging period in seconds.
    pub averaging_s: u32,
    /// The height in metres.
    pub height_m: serde_json::Number,
    /// The adopted time; null if none.
    pub adopted: Option<String>,
    /// The computed time as the rules reckon it; null if the chance stays below what they ask.
    pub computed: Option<String>,
    /// The chance that it comes before the forecast ends; belongs to every time beside it.
    pub chance: f64,
    /// The chance that it blew at issue.
    pub already_chance: f64,
    /// The storm that brings it first; null if there is only one.
    pub storm: Option<String>,
    /// The 10 % point of the onsets after issue: a time, "after_end" or null.
    pub earliest: Option<String>,
    /// The 50 % point.
    pub likely: Option<String>,
    /// The 90 % point.
    pub latest: Option<String>,
    /// On the forecast track itself; null if it never comes there.
    pub single_track: Option<String>,
    /// By when it is over with 90 % chance, given that it comes.
    pub over_by: Option<String>,
}

/// The advisory in force.
#[must_use]
pub fn advisory(advisory: &AdvisoryInForce) -> AdvisoryOut {
    AdvisoryOut {
        file: advisory.file.clone(),
        storm: advisory.storm.clone(),
        issuer: advisory.issuer.clone(),
        number: advisory.number,
        corrected: advisory.is_corrected,
        issued: time(advisory.issued),
        known: time(advisory.known),
        next_due: maybe(advisory.next_due),
        age_min: advisory.age.get(),
        overdue: advisory.is_overdue,
        last: advisory.is_last,
        assumed: advisory.assumed.clone(),
        forecast_end: time(advisory.forecast_end),
    }
}

/// A wind at a place.
#[must_use]
pub fn arrival(arrival: &Arrival) -> ArrivalOut {
    ArrivalOut {
        place: arrival.place.clone(),
        name: arrival.place_name.clone(),
        reference: arrival.is_reference,
        wind_kt: number(arrival.wind.speed.get()),
        averaging_s: arrival.wind.averaging.seconds(),
        height_m: number(arrival.wind.height.get()),
        adopted: maybe(arrival.adopted),
        computed: maybe(arrival.computed),
        chance: chance(arrival.chance),
        already_chance: chance(arrival.already),
        storm: arrival.storm.clone(),
        earliest: point(arrival.earliest),
        likely: point(arrival.likely),
        latest: point(arrival.latest),
        single_track: maybe(arrival.single_track),
        over_by: point(arrival.over_by),
    }
}
