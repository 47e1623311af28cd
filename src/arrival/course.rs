//! One advisory's forecast, hour by hour, with the size of its errors at each hour: what every scenario
//! starts from.
//!
//! All of it is kept as if the storm were in the northern hemisphere: a southern storm is mirrored at the
//! equator here, and directions are mirrored back in the answers, so that mirrored forecasts give the same
//! odds to the byte.

use crate::advisory::forecast::{Advisory, Ending, ForecastPoint, Motion, Quadrants, Reach, WindRadii};
use crate::arrival::errors::ErrorTable;
use crate::arrival::landfall::{Landfall, Waypoint};
use crate::arrival::spread::Spread;
use crate::geo::position::Position;
use crate::time::moment::Moment;
use crate::units::speed::Knots;
use crate::wind::field::Hemisphere;
use crate::wind::sphere::{EARTH_RADIUS_NMI, Vector, dot, east_and_north, normalised, plus, vector_of};
use crate::wind::structure::{Expected, Structure};
use crate::wind::track::Track;
use chrono::{DateTime, Utc};

/// Hours from stop to stop. Our choice: with it one onset in ten thousand is missed that every hour would show, as
/// a wind may come and go within them; see `arrival::onset`.
const STRIDE: usize = 3;

/// Hours for which the storm is carried on beyond its forecast, to tell winds that are still coming from
/// winds that never come.
const LOOK_AHEAD_H: usize = 24;

/// The greatest wind (kt) at the hour for which dissipation is forecast. Our choice: offices stop near it.
const DISSIPATED_KT: f64 = 20.0;

/// Least movement of the centre in 12 h (n mi) that gives a heading; below it the last heading stands.
const LEAST_MOVEMENT_NMI: f64 = 6.0;

/// The forecast centre at one time, and how the errors of a scenario add up there.
#[derive(Clone, Debug, PartialEq)]
pub struct Step {
    /// Minutes after issue.
    pub minute: f64,
    /// The forecast centre.
    pub centre: Vector,
    /// Unit tangent along the motion.
    pub along: Vector,
    /// Unit tangent to the right of the motion.
    pub cross: Vector,
    /// What the standard errors at the node at or before are multiplied with: deviation, widened by what was
    /// assumed, times the node's weight; the weights keep a variance of one.
    pub from_node: [f64; 4],
    /// The same for the node after.
    pub from_next: [f64; 4],
    /// Means of the errors.
    pub bias: [f64; 4],
    /// The error node at or before.
    pub node: usize,
}

/// A forecast ready for scenarios.
#[derive(Clone, Debug, PartialEq)]
pub struct Course {
    /// States at issue, each whole hour after it, at the end of the forecast, and hourly beyond (look-ahead
    /// only).
    pub steps: Vec<Step>,
    /// Forecast strength and size at each step.
    pub storms: Vec<Expected>,
    /// Steps from one of which to the next a place is followed at a stride, rising: the first, every third, the end
    /// of the forecast, every third after it, the last.
    pub stops: Vec<usize>,
    /// Index of the step at the end of the forecast.
    pub end: usize,
    /// Correlation of each component's error at a node with that at the node before; the first is unused.
    pub serial: Vec<[f64; 4]>,
    /// Correlation of intensity and size innovations.
    pub intensity_with_size: f64,
    /// Issue time.
    pub issued: Moment,
    /// End of the forecast.
    pub forecast_end: Moment,
    /// On which side of the equator the storm really is.
    pub hemisphere: Hemisphere,
    /// What was assumed about the storm, in words.
    pub notes: Vec<String>,
    /// Land near the forecast's way; `None` if there is none.
    pub land: Option<Landfall>,
}

impl Course {
    /// The course of an advisory under an error table; `None` if it has no points or their times do not rise.
    #[must_use]
    pub fn of(advisory: &Advisory, table: &ErrorTable) -> Option<Course> {
        let hemisphere = Hemisphere::of(advisory.points.first()?.position.latitude());
        let points = northern_points(advisory, hemisphere)?;
        let issued = Moment::at_or_before(advisory.issued);
        let hours: Vec<f64> =
            points.iter().map(|point| hours_between(advisory.issued, point.valid)).collect();
        let fixes: Vec<(f64, Position)> =
            hours.iter().zip(&points).map(|(hour, point)| (*hour, point.position)).collect();
        let winds: Vec<(f64, f64)> =
            hours.iter().zip(&points).map(|(hour, point)| (*hour, point.max_wind.get())).collect();
        let northern = Advisory { points, ..advisory.clone() };
        let structure = Structure::of(&northern, &hours, table.settings().radii_relaxation_h);
        let forecast = Forecast {
            track: Track::through(&fixes)?,
            winds,
            structure,
            spread: Spread::of(advisory, table),
            first_heading: first_heading(advisory, hemisphere),
        };
        let forecast_end = Moment::at_or_before(northern.last_valid()).max(issued);
        let end_minute = (forecast_end - issued).get();
        let mut minutes: Vec<i64> = (0..end_minute).step_by(60).collect();
        let end = minutes.len();
        minutes.push(end_minute);
        if !matches!(advisory.ends, Some(Ending::Dissipated(_) | Ending::Absorbed(_))) {
            minutes.extend((1..=LOOK_AHEAD_H as i64).map(|hour| end_minute + 60 * hour));
        }
        let notes = notes(&forecast.structure, issued, forecast_end);
        let serial = forecast.spread.serial(end_minute as f64 / 60.0);
        let (steps, storms) = forecast.steps(&minutes, end_minute as f64, &serial);
        let stops = stops(end, steps.len());
        let course = Course {
            steps,
            storms,
            stops,
            end,
            serial,
            intensity_with_size: table.settings().intensity_with_size,
            issued,
            forecast_end,
            hemisphere,
            notes,
            land: None,
        };
        let land = course.near_land();
        Some(Course { land, ..course })
    }

    /// The land around the forecast's way, stop by stop up to its end.
    fn near_land(&self) -> Option<Landfall> {
        let stops = self.stops.iter().take_while(|k| **k <= self.end);
        let there = stops.filter_map(|k| Some((self.steps.get(*k)?, self.storms.get(*k)?)));
        let (way, winds): (Vec<Waypoint>, Vec<f64>) =
            there.map(|(step, storm)| (self.waypoint(step, step.centre), storm.wind_kt)).unzip();
        Landfall::of(&way, &winds)
    }

    /// A centre at a step as the map has it: on its own side of the equator.
    #[must_use]
    pub fn waypoint(&self, step: &Step, [x, y, z]: Vector) -> Waypoint {
        let latitude = mirrored_latitude(libm::asin(z.clamp(-1.0, 1.0)).to_degrees(), self.hemisphere);
        (step.minute / 60.0, latitude, libm::atan2(y, x).to_degrees())
    }

    /// A position as this course sees it.
    #[must_use]
    pub fn vector(&self, position: Position) -> Vector {
        vector_of(mirrored_latitude(position.latitude(), self.hemisphere), position.longitude())
    }
}

fn mirrored_latitude(latitude: f64, hemisphere: Hemisphere) -> f64 {
    match hemisphere {
        Hemisphere::Northern => latitude,
        Hemisphere::Southern => -latitude,
    }
}

fn hours_between(from: DateTime<Utc>, to: DateTime<Utc>) -> f64 {
    (to - from).num_seconds() as f64 / 3600.0
}

fn notes(structure: &Structure, issued: Moment, end: Moment) -> Vec<String> {
    match structure.last_known_gale() {
        None => vec!["no wind radii given: those of a mean storm of its strength are assumed".to_owned()],
        Some(hour) => {
            let last = Moment::from_epoch_minutes(issued.epoch_minutes() + (hour * 60.0) as i64);
            let note =
                format!("wind radii after {last}: assumed to relax to those of a mean storm of its strength");
            if last < end { vec![note] } else { Vec::new() }
        }
    }
}

/// The advisory's points seen from the northern side, and one for the time at which the storm is to end.
fn northern_points(advisory: &Advisory, hemisphere: Hemisphere) -> Option<Vec<ForecastPoint>> {
    let mut points = Vec::with_capacity(advisory.points.len() + 1);
    for point in &advisory.points {
        let latitude = mirrored_latitude(point.position.latitude(), hemisphere);
        let mut seen = point.clone();
        seen.position = Position::new(latitude, point.position.longitude()).ok()?;
        if hemisphere == Hemisphere::Southern {
            seen.radii = mirrored_radii(&point.radii);
        }
        points.push(seen);
    }
    let (at, wind) = match &advisory.ends {
        Some(Ending::Dissipated(at)) => (*at, Some(DISSIPATED_KT)),
        Some(Ending::Absorbed(at)) => (*at, None),
        Some(Ending::CutShort(_)) | None => return Some(points),
    };
    // Up to its end the storm goes on as it last moved; a dissipating one weakens, an absorbed one keeps its
    // wind.
    let last = points.last()?.clone();
    if at > last.valid {
        let fixes: Vec<(f64, Position)> = points
            .iter()
            .map(|point| (hours_between(advisory.issued, point.valid), point.position))
            .collect();
        let position = Track::through(&fixes)?.position_at(hours_between(advisory.issued, at))?;
        let max_wind = wind.map_or(last.max_wind, |kt| Knots::clamped(last.max_wind.get().min(kt)));
        points.push(ForecastPoint { valid: at, position, max_wind, radii: WindRadii::NOT_GIVEN, ..last });
    }
    Some(points)
}

fn mirrored_radii(radii: &WindRadii) -> WindRadii {
    let mirrored = |reach: Reach| match reach {
        Reach::NotGiven => Reach::NotGiven,
        Reach::Given(q) => Reach::Given(Quadrants {
            northeast: q.southeast,
            southeast: q.northeast,
            southwest: q.northwest,
            northwest: q.southwest,
        }),
    };
    WindRadii {
        gale: mirrored(radii.gale),
        storm: mirrored(radii.storm),
        hurricane: mirrored(radii.hurricane),
    }
}

fn first_heading(advisory: &Advisory, hemisphere: Hemisphere) -> f64 {
    match (advisory.motion, hemisphere) {
        (Some(Motion::Towards(bearing, _)), Hemisphere::Northern) => bearing.get(),
        (Some(Motion::Towards(bearing, _)), Hemisphere::Southern) => 180.0 - bearing.get(),
        (Some(Motion::Stationary) | None, _) => 0.0,
    }
}

struct Forecast<'a> {
    track: Track,
    winds: Vec<(f64, f64)>,
    structure: Structure,
    spread: Spread<'a>,
    first_heading: f64,
}

impl Forecast<'_> {
    fn steps(&self, minutes: &[i64], end_minute: f64, serial: &[[f64; 4]]) -> (Vec<Step>, Vec<Expected>) {
        let mut heading: Option<Vector> = None;
        let mut steps = Vec::with_capacity(minutes.len());
        let mut storms = Vec::with_capacity(minutes.len());
        for minute in minutes {
            let minute = *minute as f64;
            // Beyond the end only the centre moves on; everything else stays as it was then.
            let hour = minute / 60.0;
            let held = minute.min(end_minute) / 60.0;
            let (latitude, longitude) = self.track.degrees_at(hour);
            let centre = vector_of(latitude, longitude);
            let along = self.along(centre, hour, heading);
            heading = Some(along);
            let cross = normalised([
                along[1] * centre[2] - along[2] * centre[1],
                along[2] * centre[0] - along[0] * centre[2],
                along[0] * centre[1] - along[1] * centre[0],
            ]);
            let ratios = self.structure.ratios_at(held);
            let follows = self.spread.size_follows_intensity();
            let expected = Expected::new(linear_at(&self.winds, held), latitude, ratios, follows);
            let (deviation, bias) = self.spread.at(held, &expected);
            storms.push(expected);
            let [from_node, from_next] =
                self.spread.weights(held, serial).map(|weights| times(weights, deviation));
            let (node, _) = self.spread.node(held);
            steps.push(Step { minute, centre, along, cross, from_node, from_next, bias, node });
        }
        (steps, storms)
    }

    /// The direction of motion over the 12 h around an hour; a centre that hardly moves keeps its last heading.
    fn along(&self, centre: Vector, hour: f64, last: Option<Vector>) -> Vector {
        let at = |h: f64| {
            let (latitude, longitude) = self.track.degrees_at(h);
            vector_of(latitude, longitude)
        };
        let moved = plus(at(hour + 6.0), -1.0, at(hour - 6.0));
        let flat = plus(moved, -dot(moved, centre), centre);
        let length_nmi = f64::sqrt(dot(flat, flat)) * EARTH_RADIUS_NMI;
        let heading = if length_nmi >= LEAST_MOVEMENT_NMI {
            flat
        } else {
            last.unwrap_or_else(|| {
                let (east, north) = east_and_north(centre);
                let (sin, cos) = libm::sincos(self.first_heading.to_radians());
                plus(north.map(|n| n * cos), sin, east)
            })
        };
        normalised(plus(heading, -dot(heading, centre), centre))
    }
}

fn times(a: [f64; 4], b: [f64; 4]) -> [f64; 4] {
    std::array::from_fn(|i| a[i] * b[i])
}

/// The stops of a course of `count` steps whose forecast ends with step `end`.
fn stops(end: usize, count: usize) -> Vec<usize> {
    let last = count.saturating_sub(1);
    let mut stops: Vec<usize> = (0..end).step_by(STRIDE).chain((end..last).step_by(STRIDE)).collect();
    stops.push(last);
    stops
}

fn linear_at(values: &[(f64, f64)], hour: f64) -> f64 {
    let next = values.partition_point(|(at, _)| *at <= hour);
    match (next.checked_sub(1).and_then(|i| values.get(i)), values.get(next)) {
        (Some((h0, a)), Some((h1, b))) => a + (b - a) * (hour - h0) / (h1 - h0),
        (Some((_, v)), None) | (None, Some((_, v))) => *v,
        (None, None) => 0.0,
    }
}
