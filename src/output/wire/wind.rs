//! The wind at a place in JSON.

use crate::arrival::odds::Answer;
use crate::arrival::series::{Band, HourWind, Lasting};
use crate::output::asked::{onset, over_by};
use crate::output::wind_asked::{LimitAsked, WindAsked};
use crate::output::wire::port::{PortOut, port};
use crate::output::wire::value::{SCHEMA, chance, instant, number, point, time};
use crate::units::speed::Knots;
use serde::{Deserialize, Serialize};
use serde_json::Number;

/// The wind at one place.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct WindOut {
    /// Version of this form.
    pub schema: u32,
    /// "wind".
    pub kind: String,
    /// The port.
    pub port: PortOut,
    /// The present time.
    pub now: String,
    /// The advisory's file.
    pub file: String,
    /// When it was issued.
    pub issued: String,
    /// The place's name.
    pub place: String,
    /// Degrees, north positive.
    pub lat: Number,
    /// Degrees, east positive.
    pub lon: Number,
    /// The period in seconds over which `mean_kt` is averaged; gusts are over 3 s.
    pub averaging_s: u32,
    /// The height in metres of `mean_kt` and `gust_kt`.
    pub height_m: Number,
    /// 34 kt over the open sea as the advisory averages.
    pub gale: CrossingOut,
    /// Minutes that the gale lasts, if it comes: 10, 50, 90 %; "beyond_end", or null where too few scenarios bring it.
    pub lasts_min: Vec<serde_json::Value>,
    /// Greatest mean wind: 10, 50 and 90 % points.
    pub peak_mean_kt: [Number; 3],
    /// Greatest gust.
    pub peak_gust_kt: [Number; 3],
    /// How the wind turns if the gale comes; null where too few scenarios bring it.
    pub turning: Option<TurningOut>,
    /// Seas of 12 ft or 4 m; null where the advisory does not give their reach.
    pub high_seas: Option<CrossingOut>,
    /// When swell of 18 s, and of 14 s, that left the storm at issue is here, if no land lies between.
    pub swell: [String; 2],
    /// Each hour after issue, and the end of the forecast.
    pub hours: Vec<HourOut>,
    /// The port's limits at this place.
    pub limits: Vec<LimitOut>,
    /// What must be said with the odds.
    pub notes: Vec<String>,
}

/// When a limit is met.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct CrossingOut {
    /// The chance that it is met before the forecast ends.
    pub chance: f64,
    /// The share of scenarios in which it was met at issue.
    pub already_chance: f64,
    /// The 10 % point of the onsets after issue: a time, "after_end", or null where too few scenarios reach it.
    pub earliest: Option<String>,
    /// The 50 % point.
    pub likely: Option<String>,
    /// The 90 % point.
    pub latest: Option<String>,
    /// By when it is over with 90 % chance, given that it comes.
    pub over_by: Option<String>,
}

/// Shares of the scenarios that bring the gale.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct TurningOut {
    /// Clockwise.
    pub veers: f64,
    /// Anticlockwise.
    pub backs: f64,
    /// Hardly.
    pub steady: f64,
    /// The eye passes: a lull, then the wind from the other side.
    pub eye: f64,
}

/// One hour.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct HourOut {
    /// When.
    pub at: String,
    /// Mean wind: 10, 50 and 90 % points.
    pub mean_kt: [Number; 3],
    /// Gust.
    pub gust_kt: [Number; 3],
    /// Degrees true from which it blows: 10 % point anticlockwise, middle, 10 % point clockwise; null where the storm does
    /// not make the wind.
    pub from_deg: Option<[Number; 3]>,
    /// Share of scenarios with 34 kt or more over the open sea.
    pub gale: f64,
    /// Share with the calm of the eye here.
    pub lull: f64,
}

/// A limit of the port's files.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct LimitOut {
    /// In words.
    pub limit: String,
    /// Ids of the tasks, stages and duties that it binds.
    pub used_by: Vec<String>,
    /// When it is met.
    pub met: CrossingOut,
}

/// The wind in its JSON form.
#[must_use]
pub fn wind_out(asked: &WindAsked) -> WindOut {
    let (advisory, file) = asked.advisory;
    let series = &asked.series;
    WindOut {
        schema: SCHEMA,
        kind: "wind".to_owned(),
        port: port(asked.setting),
        now: time(asked.now),
        file: file.to_owned(),
        issued: instant(advisory.issued),
        place: asked.place.clone(),
        lat: number(asked.position.latitude()),
        lon: number(asked.position.longitude()),
        averaging_s: asked.averaging.seconds(),
        height_m: number(asked.height.get()),
        gale: crossing(asked.gale),
        lasts_min: series.lasts.iter().map(lasting).collect(),
        peak_mean_kt: band(&series.peak_mean),
        peak_gust_kt: band(&series.peak_gust),
        turning: series.turning.map(|turning| TurningOut {
            veers: chance(turning.veers),
            backs: chance(turning.backs),
            steady: chance(turning.steady),
            eye: chance(turning.eye),
        }),
        high_seas: asked.seas.map(crossing),
        swell: asked.swell.map(time),
        hours: series.hours.iter().map(hour).collect(),
        limits: asked.limits.iter().map(limit).collect(),
        notes: asked.notes.clone(),
    }
}

fn crossing(answer: &Answer) -> CrossingOut {
    let onset = onset(answer);
    CrossingOut {
        chance: chance(onset.chance),
        already_chance: chance(onset.already),
        earliest: point(onset.earliest),
        likely: point(onset.likely),
        latest: point(onset.latest),
        over_by: point(over_by(answer)),
    }
}

fn lasting(lasting: &Lasting) -> serde_json::Value {
    match lasting {
        Lasting::For(minutes) => minutes.get().into(),
        Lasting::BeyondEnd => "beyond_end".into(),
        Lasting::TooFew => serde_json::Value::Null,
    }
}

fn hour(hour: &HourWind) -> HourOut {
    HourOut {
        at: time(hour.at),
        mean_kt: band(&hour.mean),
        gust_kt: band(&hour.gust),
        from_deg: hour
            .from
            .map(|fan| [fan.left, fan.likely, fan.right].map(|b| number(b.get().round() % 360.0))),
        gale: chance(hour.gale),
        lull: chance(hour.lull),
    }
}

fn limit(asked: &LimitAsked) -> LimitOut {
    LimitOut { limit: asked.limit.clone(), used_by: asked.used_by.clone(), met: crossing(asked.answer) }
}

/// To a tenth of a knot: far finer than anything known.
fn band(band: &Band) -> [Number; 3] {
    [band.low, band.middle, band.high].map(|wind: Knots| number((wind.get() * 10.0).round() / 10.0))
}
