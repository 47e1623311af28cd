//! Arrivals in JSON.

use crate::arrival::odds::Answer;
use crate::output::asked::{Asked, AskedPlace, onset, over_by};
use crate::output::wire::value::{SCHEMA, chance, instant, maybe, number, point, time};
use crate::time::moment::Minutes;
use crate::units::speed::Knots;
use serde::{Deserialize, Serialize};
use serde_json::Number;

/// The last hour after issue for which a chance is given.
const HOURS: i64 = 120;

/// The arrivals of one advisory.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct ArrivalsOut {
    /// Version of this form.
    pub schema: u32,
    /// "arrivals".
    pub kind: String,
    /// Words that must be shown with everything about an invented port or a drill; empty otherwise.
    pub banner: String,
    /// The advisory.
    pub forecast: ForecastOut,
    /// The present time; null if none was asked for.
    pub now: Option<String>,
    /// The places, in the order asked.
    pub places: Vec<PlaceOut>,
    /// What must be said with the odds: assumptions, and where the errors do not hold.
    pub notes: Vec<String>,
}

/// The advisory.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct ForecastOut {
    /// Its file.
    pub file: String,
    /// The storm's name.
    pub storm: String,
    /// The issuing office.
    pub issuer: String,
    /// Its number; null if it has none.
    pub number: Option<u32>,
    /// When it was issued; chances count from here.
    pub issued: String,
    /// The time from which the office counts its forecast hours.
    pub base: String,
    /// When the next is due; null if not stated.
    pub next_due: Option<String>,
    /// Whether the next is overdue at `now`.
    pub overdue: bool,
    /// The period in seconds over which its winds are averaged.
    pub averaging_s: u32,
}

/// One place.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct PlaceOut {
    /// Its name.
    pub name: String,
    /// Degrees, north positive.
    pub lat: Number,
    /// Degrees, east positive.
    pub lon: Number,
    /// The winds asked about, weakest first.
    pub thresholds: Vec<ThresholdOut>,
}

/// One wind at one place.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct ThresholdOut {
    /// The wind in knots, as the advisory averages it.
    pub wind_kt: Number,
    /// `chance_by_hour[h]`: the chance that it comes within h hours after issue, h = 0 to 120.
    pub chance_by_hour: Vec<f64>,
    /// The chance that it comes before the forecast ends.
    pub chance: f64,
    /// Whether it blew at issue in at least half of the scenarios.
    pub already: bool,
    /// In what share of the scenarios it blew at issue.
    pub already_chance: f64,
    /// The 10 % point of the onsets after issue: a time, "after_end", or null where too few scenarios reach it.
    pub earliest: Option<String>,
    /// The 50 % point.
    pub likely: Option<String>,
    /// The 90 % point.
    pub latest: Option<String>,
    /// When it comes on the forecast track itself, without errors; null if never.
    pub single_track: Option<String>,
    /// By when it is over with 90 % chance, given that it comes.
    pub over_by: Option<String>,
    /// How many scenarios were drawn.
    pub scenarios: usize,
}

/// The arrivals in their JSON form.
#[must_use]
pub fn arrivals_out(asked: &Asked) -> ArrivalsOut {
    let advisory = asked.advisory;
    ArrivalsOut {
        schema: SCHEMA,
        kind: "arrivals".to_owned(),
        banner: asked.banner.clone(),
        forecast: ForecastOut {
            file: asked.file.to_owned(),
            storm: advisory.storm.name.clone(),
            issuer: advisory.issuer.clone(),
            number: advisory.number,
            issued: instant(advisory.issued),
            base: instant(advisory.base),
            next_due: advisory.next_due.map(instant),
            overdue: asked.is_overdue(),
            averaging_s: advisory.averaging.seconds(),
        },
        now: maybe(asked.now),
        places: asked.places.iter().map(place).collect(),
        notes: asked.notes.clone(),
    }
}

fn place(place: &AskedPlace) -> PlaceOut {
    PlaceOut {
        name: place.name.clone(),
        lat: number(place.position.latitude()),
        lon: number(place.position.longitude()),
        thresholds: place.winds.iter().map(|(wind, answer)| threshold(*wind, answer)).collect(),
    }
}

fn threshold(wind: Knots, answer: &Answer) -> ThresholdOut {
    let onset = onset(answer);
    let by_hour = |hour| chance(answer.chance_by(answer.issued + Minutes::hours(hour)));
    ThresholdOut {
        wind_kt: number(wind.get()),
        chance_by_hour: (0..=HOURS).map(by_hour).collect(),
        chance: chance(onset.chance),
        already: answer.already(),
        already_chance: chance(onset.already),
        earliest: point(onset.earliest),
        likely: point(onset.likely),
        latest: point(onset.latest),
        single_track: answer.single_track.map(time),
        over_by: point(over_by(answer)),
        scenarios: answer.onsets.len(),
    }
}
