//! Forecasts against what came: one case for each point of each advisory, seen as the odds see it.

use super::Archive;
use super::advisories::Entry;
use snugdown::arrival::course::Course;
use snugdown::arrival::errors::ErrorTable;
use snugdown::wind::sphere::{EARTH_RADIUS_NMI, dot, plus};

/// Leads in hours at which errors are gathered; the first is the state at issue, 3 h after the base time of a routine advisory.
pub const LEADS_H: [i64; 8] = [3, 12, 24, 36, 48, 72, 96, 120];

/// Storms further north are left out: few of them are tropical, and few ports lie there.
const NORTHERNMOST: f64 = 45.0;

/// One point of a forecast, and what came.
#[derive(Clone, Copy, Debug)]
pub struct Case {
    /// Which advisory: its place in the archive.
    pub entry: usize,
    /// Index of the lead.
    pub lead: usize,
    /// The forecast wind, kt.
    pub wind_kt: f64,
    /// The accuracy that the advisory states of its present centre, n mi.
    pub accuracy_nmi: Option<f64>,
    /// Error of the centre along and across the forecast motion, n mi.
    pub along: f64,
    /// See `along`.
    pub cross: f64,
    /// The wind that came, kt.
    pub came_kt: f64,
    /// Mean reach of 34 kt over the quadrants, forecast and come, n mi; where both had the wind.
    pub reach_nmi: Option<[f64; 2]>,
}

/// All cases of Atlantic storms outside a season; the table only says how radii relax.
pub fn cases(archive: &Archive, without: Option<&str>, table: &ErrorTable) -> Vec<Case> {
    let counts = |entry: &Entry| entry.key.starts_with("AL") && Some(entry.season()) != without;
    let entries = archive.entries.iter().enumerate().filter(|(_, entry)| counts(entry));
    entries.flat_map(|(number, entry)| cases_of(archive, number, entry, table)).collect()
}

fn cases_of(archive: &Archive, number: usize, entry: &Entry, table: &ErrorTable) -> Vec<Case> {
    let advisory = &entry.advisory;
    let (Some(track), Some(course)) = (archive.tracks.get(&entry.key), Course::of(advisory, table)) else {
        return Vec::new();
    };
    let mut cases = Vec::new();
    for (i, point) in advisory.points.iter().enumerate() {
        let lead_h = if i == 0 { 3 } else { (point.valid - advisory.base).num_hours() };
        let Some(lead) = LEADS_H.iter().position(|lead| *lead == lead_h && (i > 0) == (*lead > 3)) else {
            continue;
        };
        let minute = (point.valid - advisory.issued).num_minutes() as f64;
        let near = |step: &&snugdown::arrival::course::Step| (step.minute - minute).abs() <= 31.0;
        let Some(k) = course.steps.iter().position(|step| near(&step)) else { continue };
        let (step, storm) = (&course.steps[k], &course.storms[k]);
        let time = advisory.issued + chrono::TimeDelta::minutes(step.minute as i64);
        let Some(came) = track.at(time).filter(|_| point.position.latitude() < NORTHERNMOST) else {
            continue;
        };
        let off = plus(came.centre(), -1.0, step.centre);
        let reach_nmi = came.reach_nmi[0].and_then(|quadrants| {
            let mean = quadrants.iter().sum::<f64>() / 4.0;
            let both = mean > 0.0 && came.wind_kt >= 34.0 && point.max_wind.get() >= 34.0;
            both.then_some([storm.gale_nmi(), mean])
        });
        cases.push(Case {
            entry: number,
            lead,
            wind_kt: point.max_wind.get(),
            accuracy_nmi: advisory.accuracy.map(|accuracy| accuracy.get()),
            along: dot(off, step.along) * EARTH_RADIUS_NMI,
            cross: dot(off, step.cross) * EARTH_RADIUS_NMI,
            came_kt: came.wind_kt,
            reach_nmi,
        });
    }
    cases
}
