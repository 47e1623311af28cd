//! Whether two advisories are about the same storm, whoever issued them.

use crate::advisory::forecast::Advisory;
use crate::geo::geodesic::{quick_destination, quick_distance_bearing};
use crate::geo::position::Position;
use chrono::{DateTime, Utc};

/// Two centres' positions of one storm at one time lie nearer to each other than this, in n mi; two storms' centres do not.
/// Our choice: a degree or two is what offices disagree by, and storms nearer than that are merging.
const SAME_WITHIN_NMI: f64 = 150.0;

/// Whether two advisories are about one storm: by their ids where both are of the common form ("AL062018"), else by name,
/// else by where they put it at the first time that both cover.
#[must_use]
pub fn is_same_storm(a: &Advisory, b: &Advisory) -> bool {
    if let (Some(a), Some(b)) = (common_id(a), common_id(b)) {
        return a == b;
    }
    if a.storm.id.is_some() && a.storm.id == b.storm.id {
        return true;
    }
    let is_named = |advisory: &Advisory| !matches!(advisory.storm.name.as_str(), "" | "UNNAMED");
    if is_named(a) && is_named(b) && a.storm.name.eq_ignore_ascii_case(&b.storm.name) {
        // A name comes back after some years: the advisories of one storm lie within weeks.
        return (a.issued - b.issued).num_days().abs() <= 45;
    }
    // Where it is now is what centres agree on best; their forecasts may part, and those of two storms may meet.
    let mut times: Vec<DateTime<Utc>> = a.points.iter().chain(&b.points).map(|point| point.valid).collect();
    times.sort_unstable();
    times
        .iter()
        .find_map(|at| Some((position_at(a, *at)?, position_at(b, *at)?)))
        .is_some_and(|(of_a, of_b)| quick_distance_bearing(of_a, of_b).0 <= SAME_WITHIN_NMI)
}

/// An id of two letters for the basin and six digits.
fn common_id(advisory: &Advisory) -> Option<&str> {
    let id = advisory.storm.id.as_deref()?;
    let is_common = id.len() == 8
        && id.bytes().take(2).all(|byte| byte.is_ascii_uppercase())
        && id.bytes().skip(2).all(|byte| byte.is_ascii_digit());
    is_common.then_some(id)
}

/// Where an advisory puts the centre at a time within its forecast, along the great circle between its points.
fn position_at(advisory: &Advisory, at: DateTime<Utc>) -> Option<Position> {
    advisory.points.windows(2).find_map(|pair| {
        let [before, after] = pair else { return None };
        if at < before.valid || at > after.valid {
            return None;
        }
        let whole = (after.valid - before.valid).num_seconds().max(1) as f64;
        let share = (at - before.valid).num_seconds() as f64 / whole;
        let (distance_nmi, bearing) = quick_distance_bearing(before.position, after.position);
        Some(quick_destination(before.position, bearing, distance_nmi * share))
    })
}
