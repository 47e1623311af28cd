//! One advisory's forecast, hour by hour, with the size of its errors at each hour: what every scenario
//! starts from.
//!
//! All of it is kept as if the storm were in the northern hemisphere: a southern storm is mirrored at the
//! equator here, and directions are mirrored back in the answers, so that mirrored forecasts give the same
//! odds to the byte.

use crate::advisory::forecast::{Advisory, Ending, ForecastPoint, Motion, Quadrants, Reach, WindRadii};
use crate::advisory::own_spread::TrackDeviation;
use crate::arrival::errors::ErrorTable;
use crate::arrival::own_track::own_factor;
use crate::geo::position::Position;
use crate::time::moment::Moment;
use crate::units::speed::Knots;
use crate::wind::climatology::{radius_of_greatest_wind_nmi, reach_nmi};
use crate::wind::field::Hemisphere;
use crate::wind::reach_table::ReachTable;
use crate::wind::sphere::{EARTH_RADIUS_NMI, Vector, dot, east_and_north, normalised, plus, vector_of};
use crate::wind::structure::{Expected, Structure};
use crate::wind::track::Track;
use chrono::{DateTime, Utc};

/// Hours between the nodes at which errors are drawn; between them they are interpolated.
pub const NODE_H: f64 = 12.0;

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

/// The forecast's strength and size at one time.
#[derive(Clone, Debug, PartialEq)]
pub struct Storm {
    /// Reach of the winds for any strength.
    pub table: ReachTable,
    /// Upper bounds of the reach of 34 kt or the core (n mi, before the size error) for storms of up to 35,
    /// 40, ... 90 kt.
    bounds: [f64; BOUNDS],
}

const BOUNDS: usize = 12;

impl Storm {
    fn of(expected: Expected) -> Storm {
        Storm { bounds: bounds(&expected), table: ReachTable::of(expected) }
    }

    /// A bound of the reach of 34 kt, or of the core if that is wider, for a storm of `wind_kt` before its
    /// size error. Much cheaper than the reach itself, it keeps far places out of the inner loop.
    #[must_use]
    pub fn bound_nmi(&self, wind_kt: f64) -> f64 {
        let class = ((wind_kt - 30.0).max(0.0) / 5.0) as usize;
        self.bounds[class.min(BOUNDS - 1)]
    }
}

/// A forecast ready for scenarios.
#[derive(Clone, Debug, PartialEq)]
pub struct Course {
    /// States at issue, each whole hour after it, at the end of the forecast, and hourly beyond (look-ahead
    /// only).
    pub steps: Vec<Step>,
    /// Forecast strength and size at each step.
    pub storms: Vec<Storm>,
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
            errors: Errors::new(advisory, table),
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
        let serial = forecast.errors.serial(end_minute as f64 / 60.0);
        let (steps, storms) = forecast.steps(&minutes, end_minute as f64, &serial);
        let stops = stops(end, steps.len());
        Some(Course {
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
        })
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

/// Error sizes of one advisory by hours after issue.
struct Errors<'a> {
    table: &'a ErrorTable,
    lead_at_issue_h: f64,
    start_nmi: Option<f64>,
    own: Vec<TrackDeviation>,
    widening: [f64; 4],
}

impl<'a> Errors<'a> {
    fn new(advisory: &Advisory, table: &'a ErrorTable) -> Errors<'a> {
        let mut widening = [1.0; 4];
        for assumption in &advisory.assumed {
            let by = assumption.widens;
            for (factor, own) in widening.iter_mut().zip([by.track, by.track, by.intensity, by.size]) {
                *factor *= own.max(1.0);
            }
        }
        let start_nmi = advisory.accuracy.map(|a| a.get() / table.settings().accuracy_divisor);
        let lead_at_issue_h = hours_between(advisory.base, advisory.issued).max(0.0);
        Errors { table, lead_at_issue_h, start_nmi, own: advisory.own_track_deviations(), widening }
    }

    /// Deviations and biases. The present centre's own accuracy replaces the table's at lead 0 and fades into
    /// the next 12 h.
    fn at(&self, hour: f64) -> ([f64; 4], [f64; 4]) {
        let lead = hour + self.lead_at_issue_h;
        let row = self.table.at(lead);
        let mut deviation = row.deviation;
        let own = own_factor(&self.own, self.table, lead);
        deviation.iter_mut().take(2).for_each(|track| *track *= own);
        if let Some(start) = self.start_nmi {
            let fading = (1.0 - lead / NODE_H).clamp(0.0, 1.0);
            let at_start = self.table.at(0.0).deviation;
            for (own, table) in deviation.iter_mut().zip(at_start).take(2) {
                *own += (start - table) * fading;
            }
        }
        for (own, factor) in deviation.iter_mut().zip(self.widening) {
            *own = own.max(0.0) * factor;
        }
        (deviation, row.bias)
    }

    fn serial(&self, end_h: f64) -> Vec<[f64; 4]> {
        let last = f64::ceil((end_h + self.lead_at_issue_h) / NODE_H).max(0.0) as usize;
        (0..=last + 1).map(|node| self.table.at(node as f64 * NODE_H).serial).collect()
    }

    /// The node at or before an hour, and how far the hour lies on the way to the next node, 0..1.
    fn node(&self, hour: f64) -> (usize, f64) {
        let position = (hour + self.lead_at_issue_h) / NODE_H;
        let node = f64::floor(position).max(0.0);
        (node as usize, position - node)
    }

    /// The weights of the nodes before and after an hour.
    ///
    /// z = ((1 - s) z0 + s z1) / sqrt((1 - s)^2 + s^2 + 2 s (1 - s) phi): without the root the variance would
    /// dip between nodes.
    fn weights(&self, hour: f64, serial: &[[f64; 4]]) -> [[f64; 4]; 2] {
        let (node, s) = self.node(hour);
        let phi = serial.get(node + 1).copied().unwrap_or([1.0; 4]);
        let norm = phi.map(|phi| f64::sqrt((1.0 - s) * (1.0 - s) + s * s + 2.0 * s * (1.0 - s) * phi));
        [norm.map(|norm| (1.0 - s) / norm), norm.map(|norm| s / norm)]
    }
}

struct Forecast<'a> {
    track: Track,
    winds: Vec<(f64, f64)>,
    structure: Structure,
    errors: Errors<'a>,
    first_heading: f64,
}

impl Forecast<'_> {
    fn steps(&self, minutes: &[i64], end_minute: f64, serial: &[[f64; 4]]) -> (Vec<Step>, Vec<Storm>) {
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
            let follows = self.errors.table.settings().size_follows_intensity;
            let expected = Expected::new(linear_at(&self.winds, held), latitude, ratios, follows);
            storms.push(Storm::of(expected));
            let (deviation, bias) = self.errors.at(held);
            let [from_node, from_next] =
                self.errors.weights(held, serial).map(|weights| times(weights, deviation));
            let (node, _) = self.errors.node(held);
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
    [a[0] * b[0], a[1] * b[1], a[2] * b[2], a[3] * b[3]]
}

/// The stops of a course of `count` steps whose forecast ends with step `end`.
fn stops(end: usize, count: usize) -> Vec<usize> {
    let last = count.saturating_sub(1);
    let mut stops: Vec<usize> = (0..end).step_by(STRIDE).chain((end..last).step_by(STRIDE)).collect();
    stops.push(last);
    stops
}

fn bounds(expected: &Expected) -> [f64; BOUNDS] {
    let latitude = expected.latitude;
    let widest = expected.ratios[0].iter().copied().fold(0.0, f64::max);
    let widest = if widest > 0.0 { widest } else { 1.0 };
    // The reach lies between that of the forecast and of the realised strength.
    let core = radius_of_greatest_wind_nmi(0.0, latitude).max(expected.usual_gale_nmi());
    let mut bounds = [widest * core; BOUNDS];
    let mut wind = 30.0;
    for bound in &mut bounds {
        wind += 5.0;
        *bound = bound.max(widest * reach_nmi(34.0, wind, latitude));
    }
    // The last one is for every stronger storm.
    bounds[BOUNDS - 1] = bounds[BOUNDS - 1].max(widest * reach_nmi(34.0, 400.0, latitude));
    bounds
}

fn linear_at(values: &[(f64, f64)], hour: f64) -> f64 {
    let next = values.partition_point(|(at, _)| *at <= hour);
    match (next.checked_sub(1).and_then(|i| values.get(i)), values.get(next)) {
        (Some((h0, a)), Some((h1, b))) => a + (b - a) * (hour - h0) / (h1 - h0),
        (Some((_, v)), None) | (None, Some((_, v))) => *v,
        (None, None) => 0.0,
    }
}
