//! The centre line of a storm between the points that an advisory gives.
//!
//! Latitude and longitude (unwrapped, so that the date line is no seam) are each a monotone cubic in time:
//! the centre passes through every given point, its speed is continuous, and it never overshoots a point at
//! which the forecast stalls or turns. This is how a forecaster's own line between the points is meant to be
//! read; a great circle between points 24 h apart would kink at each.

use crate::geo::position::{Position, wrap_longitude};

/// A centre line in time; before its first and after its last point it carries on as it begins and ends.
#[derive(Clone, Debug, PartialEq)]
pub struct Track {
    hours: Vec<f64>,
    latitude: Vec<f64>,
    longitude: Vec<f64>,
    latitude_slope: Vec<f64>,
    longitude_slope: Vec<f64>,
}

impl Track {
    /// The line through `fixes`: hours on any one clock, rising, with the centre then. `None` if there are
    /// none or the hours do not rise.
    #[must_use]
    pub fn through(fixes: &[(f64, Position)]) -> Option<Track> {
        let (_, first) = fixes.first()?;
        let hours: Vec<f64> = fixes.iter().map(|(hour, _)| *hour).collect();
        let rising = hours.windows(2).all(|pair| matches!(pair, [a, b] if a < b));
        if !rising || hours.iter().any(|hour| !hour.is_finite()) {
            return None;
        }
        let latitude: Vec<f64> = fixes.iter().map(|(_, p)| p.latitude()).collect();
        // Longitudes are counted from the first point's, each within 180 degrees of the one before.
        let mut longitude = Vec::with_capacity(fixes.len());
        let mut last = first.longitude();
        for (_, p) in fixes {
            last += wrap_longitude(p.longitude() - last);
            longitude.push(last);
        }
        let latitude_slope = monotone_slopes(&hours, &latitude);
        let longitude_slope = monotone_slopes(&hours, &longitude);
        Some(Track { hours, latitude, longitude, latitude_slope, longitude_slope })
    }

    /// Latitude and unwrapped longitude in degrees at an hour.
    #[must_use]
    pub fn degrees_at(&self, hour: f64) -> (f64, f64) {
        (
            cubic_at(&self.hours, &self.latitude, &self.latitude_slope, hour).clamp(-89.0, 89.0),
            cubic_at(&self.hours, &self.longitude, &self.longitude_slope, hour),
        )
    }

    /// The centre at an hour.
    #[must_use]
    pub fn position_at(&self, hour: f64) -> Option<Position> {
        let (latitude, longitude) = self.degrees_at(hour);
        Position::new(latitude, wrap_longitude(longitude)).ok()
    }
}

/// Slopes of a monotone cubic through (x, y).
///
/// Inside: the weighted harmonic mean of the neighbouring secants d1, d2 over steps h1, h2, zero where they
/// differ in sign: m = (w1 + w2) / (w1 / d1 + w2 / d2), w1 = 2 h2 + h1, w2 = h2 + 2 h1 (Fritsch & Butland
/// 1984, SIAM J. Sci. Stat. Comput. 5:300-304). At the ends: the secant itself.
fn monotone_slopes(x: &[f64], y: &[f64]) -> Vec<f64> {
    let steps: Vec<(f64, f64)> = x
        .windows(2)
        .zip(y.windows(2))
        .filter_map(|pair| match pair {
            ([x0, x1], [y0, y1]) => Some((x1 - x0, (y1 - y0) / (x1 - x0))),
            _ => None,
        })
        .collect();
    let mut slopes = Vec::with_capacity(x.len());
    slopes.push(steps.first().map_or(0.0, |(_, d)| *d));
    for pair in steps.windows(2) {
        let [(h1, d1), (h2, d2)] = pair else { continue };
        let (w1, w2) = (2.0 * h2 + h1, h2 + 2.0 * h1);
        slopes.push(if d1 * d2 > 0.0 { (w1 + w2) / (w1 / d1 + w2 / d2) } else { 0.0 });
    }
    if let Some((_, d)) = steps.last() {
        slopes.push(*d);
    }
    slopes
}

/// The cubic Hermite value at `at`; beyond the ends the straight line that the end slope gives.
fn cubic_at(x: &[f64], y: &[f64], slope: &[f64], at: f64) -> f64 {
    let next = x.partition_point(|node| *node <= at);
    let node = |i: usize| Some((*x.get(i)?, *y.get(i)?, *slope.get(i)?));
    let before = next.checked_sub(1).and_then(node);
    match (before, node(next)) {
        (Some((x0, y0, m0)), Some((x1, y1, m1))) => {
            let h = x1 - x0;
            let s = (at - x0) / h;
            let (s2, s3) = (s * s, s * s * s);
            (2.0 * s3 - 3.0 * s2 + 1.0) * y0
                + (s3 - 2.0 * s2 + s) * h * m0
                + (3.0 * s2 - 2.0 * s3) * y1
                + (s3 - s2) * h * m1
        }
        (Some((x0, y0, m0)), None) | (None, Some((x0, y0, m0))) => y0 + (at - x0) * m0,
        (None, None) => 0.0,
    }
}

#[cfg(test)]
mod tests {
    use super::Track;
    use crate::geo::position::Position;
    use approx::assert_abs_diff_eq;

    fn at(latitude: f64, longitude: f64) -> Position {
        Position::new(latitude, longitude).unwrap()
    }

    #[test]
    fn the_line_passes_through_every_point_and_crosses_the_date_line_without_a_seam() {
        let track = Track::through(&[
            (0.0, at(-15.0, 178.0)),
            (12.0, at(-16.0, 179.5)),
            (24.0, at(-17.0, -179.0)),
            (36.0, at(-18.5, -177.0)),
        ])
        .unwrap();
        assert_abs_diff_eq!(track.position_at(24.0).unwrap().longitude(), -179.0, epsilon = 1e-9);
        let mut last = track.degrees_at(0.0).1;
        for hour in 1..=48 {
            let longitude = track.degrees_at(f64::from(hour)).1;
            assert!(longitude > last && longitude - last < 0.25, "hour {hour}");
            last = longitude;
        }
    }

    #[test]
    fn a_stall_is_not_overshot() {
        let track =
            Track::through(&[(0.0, at(10.0, -60.0)), (12.0, at(14.0, -60.0)), (36.0, at(14.0, -60.0))])
                .unwrap();
        for hour in 0..=36 {
            assert!(track.degrees_at(f64::from(hour)).0 <= 14.0 + 1e-12);
        }
        assert_abs_diff_eq!(track.degrees_at(24.0).0, 14.0, epsilon = 1e-12);
    }

    #[test]
    fn hours_that_do_not_rise_are_refused() {
        assert!(Track::through(&[(0.0, at(10.0, 0.0)), (0.0, at(11.0, 0.0))]).is_none());
        assert!(Track::through(&[]).is_none());
    }
}
