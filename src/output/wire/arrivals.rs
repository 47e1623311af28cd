//! Arrivals in JSON.

use crate::advisory::forecast::Advisory;
use crate::advisory::official_rows::Percent;
use crate::arrival::odds::Answer;
use crate::output::asked::{Asked, AskedPlace, onset, over_by};
use crate::output::beside::{Beside, OfficialSource, RULES_USE};
use crate::output::wire::value::{SCHEMA, chance, instant, maybe, number, point, time};
use crate::time::moment::Minutes;
use crate::units::chance::Chance;
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
    /// Advisories of other storms in force; the arrivals are of all storms together.
    pub other_storms: Vec<ForecastOut>,
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
    /// It tells what happened, for drills only.
    pub drill: bool,
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
    /// The official odds beside ours; null if none are at hand.
    pub official: Option<OfficialOut>,
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
    /// The storm that brings it first in most scenarios; null if there is only one, or if it never comes.
    pub first_storm: Option<String>,
    /// In what share of the scenarios in which it comes.
    pub first_storm_share: Option<f64>,
}

/// Official odds beside ours.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct OfficialOut {
    /// The file of the official odds.
    pub file: String,
    /// The number of their advisory; null if not stated.
    pub number: Option<u32>,
    /// When they were issued.
    pub issued: String,
    /// From when they count.
    pub base: String,
    /// The listed place; null if nothing is listed for this one, so that its chances are below what is listed.
    pub listed: Option<String>,
    /// Which of the two the rules use: always "ours".
    pub rules_use: String,
    /// The times for which chances stand below.
    pub by: Vec<String>,
    /// The winds, weakest first.
    pub winds: Vec<OfficialWindOut>,
}

/// One wind, officially and by us.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct OfficialWindOut {
    /// The wind in knots.
    pub wind_kt: Number,
    /// The official chance that it has come by each time, null for less than 1 %; null if the wind is not listed.
    pub official: Option<Vec<Option<f64>>>,
    /// Ours.
    pub ours: Vec<f64>,
}

/// The arrivals in their JSON form.
#[must_use]
pub fn arrivals_out(asked: &Asked) -> ArrivalsOut {
    ArrivalsOut {
        schema: SCHEMA,
        kind: "arrivals".to_owned(),
        banner: asked.banner.clone(),
        forecast: forecast(asked, asked.file, asked.advisory),
        other_storms: asked.other_storms.iter().map(|(file, other)| forecast(asked, file, other)).collect(),
        now: maybe(asked.now),
        places: asked.places.iter().map(|one| place(one, asked.official.as_ref())).collect(),
        notes: asked.notes.clone(),
    }
}

fn forecast(asked: &Asked, file: &str, advisory: &Advisory) -> ForecastOut {
    ForecastOut {
        file: file.to_owned(),
        storm: advisory.storm.name.clone(),
        issuer: advisory.issuer.clone(),
        number: advisory.number,
        issued: instant(advisory.issued),
        base: instant(advisory.base),
        next_due: advisory.next_due.map(instant),
        overdue: asked.overdue_since(advisory).is_some(),
        averaging_s: advisory.averaging.seconds(),
        drill: advisory.is_drill,
    }
}

fn official(source: &OfficialSource, beside: &Beside) -> OfficialOut {
    let percent = |percent: &Percent| match percent {
        Percent::BelowOne => None,
        Percent::Of(percent) => Some(f64::from(*percent) / 100.0),
    };
    OfficialOut {
        file: source.file.to_owned(),
        number: source.odds.number,
        issued: instant(source.odds.issued),
        base: instant(source.odds.base),
        listed: beside.listed.clone(),
        rules_use: RULES_USE.to_owned(),
        by: beside.times.iter().map(|at| time(*at)).collect(),
        winds: beside
            .winds
            .iter()
            .map(|wind| OfficialWindOut {
                wind_kt: number(wind.wind.get()),
                official: wind.official.as_ref().map(|row| row.iter().map(percent).collect()),
                ours: wind.ours.iter().map(|ours| chance(*ours)).collect(),
            })
            .collect(),
    }
}

fn place(place: &AskedPlace, source: Option<&OfficialSource>) -> PlaceOut {
    PlaceOut {
        name: place.name.clone(),
        lat: number(place.position.latitude()),
        lon: number(place.position.longitude()),
        thresholds: place
            .winds
            .iter()
            .zip(place.first_storms.iter().copied().chain(std::iter::repeat(None)))
            .map(|((wind, answer), first)| threshold(*wind, answer, first))
            .collect(),
        official: source.zip(place.beside.as_ref()).map(|(source, beside)| official(source, beside)),
    }
}

fn threshold(wind: Knots, answer: &Answer, first: Option<(&str, Chance)>) -> ThresholdOut {
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
        first_storm: first.map(|(storm, _)| storm.to_owned()),
        first_storm_share: first.map(|(_, share)| chance(share)),
    }
}
