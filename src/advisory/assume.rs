//! What is assumed for a short forecast, and by how much that widens the spread of what may come.
//!
//! The factors are our choice, not measured, except where a source stands beside them; each acts on the standard
//! deviation of the office's usual errors. All of them stand here.

use crate::advisory::forecast::{
    Advisory, Assumption, ForecastPoint, Motion, Quadrants, Reach, Widening, WindRadii,
};
use crate::advisory::typed_values::TypedReach;
use crate::finding::fault::Place;
use crate::geo::geodesic::{quick_destination, quick_distance_bearing};
use crate::geo::position::Position;
use crate::units::bearing::Bearing;
use crate::units::speed::Knots;
use chrono::{DateTime, Duration, Utc};

/// Straight on at the present speed: 3 times the track error. Forecasts without skill had 2.0 (12 h) to 3.5 (48 h) times
/// the official mean error, Atlantic 2020 to 2024 (United States National Hurricane Center, verification report 2025,
/// table 1).
const STRAIGHT_ON: Widening = Widening { track: 3.0, ..Widening::NONE };
/// The last leg of a given track carried on: half as much again, as only the end of the track is concerned.
const LEG_CARRIED_ON: Widening = Widening { track: 1.5, ..Widening::NONE };
/// The greatest wind kept.
const WIND_KEPT: Widening = Widening { intensity: 1.5, ..Widening::NONE };
/// The wind radii kept.
const REACH_KEPT: Widening = Widening { size: 1.5, ..Widening::NONE };
/// One reach taken all round the centre.
const REACH_ALL_ROUND: Widening = Widening { size: 1.25, ..Widening::NONE };

/// A forecast of motion alone is carried this far: the third day is where its error passes 250 n mi (the same table).
const CARRIED_FOR: Duration = Duration::hours(72);
/// A straight track is given as points this far apart.
const STEP: Duration = Duration::hours(12);

/// A forecast as typed in, with gaps.
#[derive(Clone, Debug, PartialEq)]
pub struct Sketch {
    /// The time of `now`.
    pub base: DateTime<Utc>,
    /// Present motion.
    pub motion: Motion,
    /// Up to when the forecast shall be used.
    pub last_valid: Option<DateTime<Utc>>,
    /// The present state.
    pub now: SketchPoint,
    /// Forecast positions, times rising.
    pub later: Vec<SketchPoint>,
}

/// One state as typed in.
#[derive(Clone, Debug, PartialEq)]
pub struct SketchPoint {
    /// When.
    pub valid: DateTime<Utc>,
    /// The centre.
    pub position: Position,
    /// Greatest wind.
    pub wind: Option<Knots>,
    /// Gusts.
    pub gust: Option<Knots>,
    /// Reach of 34, 50 and 64 kt winds.
    pub reaches: [Option<TypedReach>; 3],
    /// A remark such as "INLAND".
    pub remark: String,
    /// Where it stands.
    pub place: Place,
}

/// A forecast without gaps, and what was assumed for it.
#[derive(Clone, Debug, PartialEq)]
pub struct Completed {
    /// The states, present first.
    pub points: Vec<ForecastPoint>,
    /// What was assumed.
    pub assumed: Vec<Assumption>,
}

impl Widening {
    /// No widening.
    pub const NONE: Widening = Widening { track: 1.0, intensity: 1.0, size: 1.0 };
}

impl Advisory {
    /// By how much all assumptions together widen the spread: the product of their factors.
    #[must_use]
    pub fn widening(&self) -> Widening {
        self.assumed.iter().fold(Widening::NONE, |all, one| Widening {
            track: all.track * one.widens.track,
            intensity: all.intensity * one.widens.intensity,
            size: all.size * one.widens.size,
        })
    }
}

/// The issue time was not given and the base time is taken for it.
#[must_use]
pub fn issued_at_base() -> Assumption {
    assumption("issue time: not given, the base time taken".to_owned(), Widening::NONE)
}

/// Fills the gaps of a typed-in forecast.
#[must_use]
pub fn complete(sketch: Sketch) -> Completed {
    let mut assumed = Vec::new();
    let first_is_alone = sketch.later.is_empty();
    let mut states = vec![sketch.now];
    states.extend(sketch.later);
    if first_is_alone {
        let until = sketch.last_valid.unwrap_or(sketch.base + CARRIED_FOR);
        carry_on(&mut states, sketch.motion, until);
        let hours = (until - sketch.base).num_hours();
        let what = format!("positions after the present one: straight on at the present speed for {hours} h");
        assumed.push(assumption(what, STRAIGHT_ON));
    } else if let Some(until) = sketch.last_valid
        && states.last().is_some_and(|last| last.valid < until)
    {
        let motion = last_leg(&states).unwrap_or(sketch.motion);
        carry_on(&mut states, motion, until);
        assumed.push(assumption(
            "positions after the last one given: its motion kept".to_owned(),
            LEG_CARRIED_ON,
        ));
    }
    keep_winds(&mut states, &mut assumed);
    note_all_round(&states, &mut assumed);
    let points = with_reaches(states, &mut assumed);
    Completed { points, assumed }
}

fn assumption(what: String, widens: Widening) -> Assumption {
    Assumption { what, widens }
}

/// Adds states from the last one on along a great circle, every 12 h and at `until`.
fn carry_on(states: &mut Vec<SketchPoint>, motion: Motion, until: DateTime<Utc>) {
    let Some(last) = states.last().cloned() else { return };
    let mut valid = last.valid;
    while valid < until {
        valid = (valid + STEP).min(until);
        let hours = (valid - last.valid).num_minutes() as f64 / 60.0;
        let position = match motion {
            Motion::Stationary => last.position,
            Motion::Towards(bearing, speed) => {
                quick_destination(last.position, bearing.get(), speed.get() * hours)
            }
        };
        states.push(SketchPoint {
            valid,
            position,
            wind: None,
            gust: None,
            reaches: [None; 3],
            remark: String::new(),
            place: last.place.clone(),
        });
    }
}

/// The motion over the last leg of the track.
fn last_leg(states: &[SketchPoint]) -> Option<Motion> {
    let [.., before, last] = states else { return None };
    let hours = (last.valid - before.valid).num_minutes() as f64 / 60.0;
    let (distance_nm, _) = quick_distance_bearing(before.position, last.position);
    // The great circle's bearing where it arrives, which is the one to keep.
    let (_, back) = quick_distance_bearing(last.position, before.position);
    let speed = Knots::clamped(distance_nm / hours.max(0.1));
    let bearing = Bearing::wrapped(back + 180.0);
    Some(if speed > Knots::ZERO { Motion::Towards(bearing, speed) } else { Motion::Stationary })
}

/// Where no wind is given, the one before it is kept.
fn keep_winds(states: &mut [SketchPoint], assumed: &mut Vec<Assumption>) {
    let mut kept = None;
    let mut count = 0;
    for state in states {
        if state.wind.is_none() {
            state.wind = kept;
            count += 1;
        }
        kept = state.wind;
    }
    if count > 0 {
        let what = format!("greatest wind at {}: the one before it kept", times(count));
        assumed.push(assumption(what, WIND_KEPT));
    }
}

fn note_all_round(states: &[SketchPoint], assumed: &mut Vec<Assumption>) {
    let is_round = |state: &&SketchPoint| {
        state.reaches.iter().any(|reach| matches!(reach, Some(TypedReach::AllRound(_))))
    };
    let count = states.iter().filter(is_round).count();
    if count > 0 {
        let what = format!("wind radii at {}: the one distance given taken in every quadrant", times(count));
        assumed.push(assumption(what, REACH_ALL_ROUND));
    }
}

/// Where no reach of a wind is given: none if it blows nowhere, else the last one given, else not given.
fn with_reaches(states: Vec<SketchPoint>, assumed: &mut Vec<Assumption>) -> Vec<ForecastPoint> {
    let speeds = [Knots::GALE, Knots::STORM, Knots::HURRICANE];
    let mut kept: [Option<Quadrants>; 3] = [None; 3];
    let mut count = 0;
    let mut points = Vec::with_capacity(states.len());
    for state in states {
        let wind = state.wind.unwrap_or(Knots::ZERO);
        let mut is_kept = false;
        let mut reaches = [Reach::NotGiven; 3];
        for (((reach, given), speed), kept) in
            reaches.iter_mut().zip(state.reaches).zip(speeds).zip(&mut kept)
        {
            *reach = match (given.map(TypedReach::reach), *kept) {
                (Some(Reach::Given(quadrants)), _) => {
                    *kept = Some(quadrants).filter(|quadrants| *quadrants != Quadrants::NONE);
                    Reach::Given(quadrants)
                }
                _ if wind < speed => Reach::Given(Quadrants::NONE),
                (_, Some(quadrants)) => {
                    is_kept = true;
                    Reach::Given(quadrants)
                }
                _ => Reach::NotGiven,
            };
        }
        count += usize::from(is_kept);
        let [gale, storm, hurricane] = reaches;
        points.push(ForecastPoint {
            valid: state.valid,
            position: state.position,
            max_wind: wind,
            gust: state.gust,
            radii: WindRadii { gale, storm, hurricane },
            seas: None,
            qualifier: state.remark,
            place: state.place,
        });
    }
    if count > 0 {
        let what = format!("wind radii at {}: the ones before kept", times(count));
        assumed.push(assumption(what, REACH_KEPT));
    }
    points
}

fn times(count: usize) -> String {
    if count == 1 { "1 time".to_owned() } else { format!("{count} times") }
}
