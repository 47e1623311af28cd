//! A perfect forecast for drills: what happened, told as if it had been forecast.
//!
//! Its track is the best track, so it comes true to the mile; its spread is that of a real forecast, so that a port
//! practises with the odds, the earliest times and the doubts that it will have in earnest.

use crate::advisory::choice::{Choice, cycle_text};
use crate::advisory::forecast::{
    Advisory, Ending, ForecastPoint, Motion, Quadrants, Reach, Seas, Storm, WindRadii,
};
use crate::advisory::notes::Notes;
use crate::advisory::reach_rule::reach_of;
use crate::finding::fault::Place;
use crate::geo::geodesic::quick_distance_bearing;
use crate::geo::position::Position;
use crate::units::bearing::Bearing;
use crate::units::pressure::HectoPascals;
use crate::units::speed::Knots;
use crate::units::wind::Averaging;
use chrono::{DateTime, Duration, Utc};
use std::ops::Range;

/// Stands in place of an office's name wherever a drill's forecast is shown.
pub const DRILL: &str = "DRILL - not a forecast: made from the best track";

/// As far ahead as offices forecast.
const REACH: Duration = Duration::hours(120);

/// One time of a best track.
#[derive(Clone, Debug, PartialEq)]
pub struct BestPoint {
    /// When.
    pub at: DateTime<Utc>,
    /// The centre.
    pub position: Position,
    /// Greatest wind, a 1-minute mean; `None` if not given.
    pub wind: Option<Knots>,
    /// Central pressure.
    pub pressure: Option<HectoPascals>,
    /// "HU", "EX".
    pub kind: String,
    /// Reach of high seas, if given.
    pub seas: Option<Seas>,
    /// Radii of 34, 50 and 64 kt as given.
    pub radii: [Option<Quadrants>; 3],
    /// Where it stands.
    pub place: Place,
    /// Its bytes.
    pub range: Range<usize>,
}

/// The forecast for a drill of `storm` that begins at the chosen time; `points` have rising times.
#[must_use]
pub fn drill(storm: Storm, points: Vec<BestPoint>, choice: &Choice, notes: &mut Notes) -> Option<Advisory> {
    let (first, last) = (points.first()?, points.last()?);
    let whole = first.range.start..last.range.end;
    let holds = format!(
        "the best track of {} from {} to {}",
        storm.id.as_deref().unwrap_or(&storm.name),
        cycle_text(first.at),
        cycle_text(last.at)
    );
    let Some(begins) = choice.cycle else {
        let found = format!("no time is chosen at which the drill begins; the file holds {holds}");
        notes.error(
            "advisory-choose-cycle",
            whole,
            found,
            "choose one of its times as the cycle, as 2018083012",
        );
        return None;
    };
    let Some(now) = points.iter().position(|point| point.at == begins) else {
        let found =
            format!("there is no position at {}; the file holds {holds}", begins.format("%Y-%m-%d %H:%MZ"));
        notes.error(
            "advisory-choose-cycle",
            whole,
            found,
            "choose one of its times, mostly 00, 06, 12 and 18 UTC",
        );
        return None;
    };
    let motion = now.checked_sub(1).and_then(|before| Some(leg(points.get(before)?, points.get(now)?)));
    let end = begins + REACH;
    let ends = Some(last.at).filter(|last| *last < end).map(Ending::Dissipated);
    let pressure = points.get(now).and_then(|point| point.pressure);
    let kept: Vec<ForecastPoint> = points
        .into_iter()
        .skip(now)
        .take_while(|point| point.at <= end)
        .filter_map(|point| forecast_point(point, notes))
        .collect();
    if kept.len() < 2 {
        let found = format!("no best track follows {}; the file holds {holds}", cycle_text(begins));
        notes.error("advisory-no-forecast", whole, found, "choose an earlier time");
        return None;
    }
    Some(Advisory {
        storm,
        issuer: DRILL.to_owned(),
        number: None,
        is_special: false,
        is_corrected: false,
        issued: begins,
        base: begins,
        base_position: kept.first().map(|point| point.position),
        averaging: Averaging::Minute1,
        accuracy: None,
        motion,
        pressure,
        next_due: None,
        is_last: false,
        points: kept,
        ends,
        quoted_track_errors: None,
        circles: Vec::new(),
        is_drill: true,
        assumed: Vec::new(),
    })
}

fn leg(before: &BestPoint, now: &BestPoint) -> Motion {
    let (distance_nmi, _) = quick_distance_bearing(before.position, now.position);
    let (_, back) = quick_distance_bearing(now.position, before.position);
    let hours = ((now.at - before.at).num_minutes() as f64 / 60.0).max(0.1);
    let speed = Knots::clamped(distance_nmi / hours);
    if speed > Knots::ZERO {
        Motion::Towards(Bearing::wrapped(back + 180.0), speed)
    } else {
        Motion::Stationary
    }
}

/// A point as a forecast's; `None`, with a warning, where the best track has no wind.
fn forecast_point(point: BestPoint, notes: &mut Notes) -> Option<ForecastPoint> {
    let Some(wind) = point.wind else {
        let found = format!("no greatest wind at {}", point.at.format("%Y-%m-%d %H:%MZ"));
        notes.warning("advisory-best-track-gap", point.range, found, "this time is left out of the drill");
        return None;
    };
    let speeds = [Knots::GALE, Knots::STORM, Knots::HURRICANE];
    let mut reaches = [Reach::NotGiven; 3];
    for ((reach, speed), given) in reaches.iter_mut().zip(speeds).zip(point.radii) {
        // Four zeros beside a wind that blows are how best tracks leave radii out: nothing to warn of.
        (*reach, _) = reach_of(speed, wind, given);
    }
    let [gale, storm, hurricane] = reaches;
    Some(ForecastPoint {
        valid: point.at,
        position: point.position,
        max_wind: wind,
        gust: None,
        radii: WindRadii { gale, storm, hurricane },
        seas: point.seas,
        qualifier: point.kind,
        place: point.place,
    })
}
