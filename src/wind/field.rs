//! The wind at a point around one state of a storm: speed, direction, and whether the point lies in the eye.

use crate::units::bearing::Bearing;
use crate::units::speed::Knots;
use crate::wind::climatology::{radius_of_greatest_wind_nmi, rankine_exponent};
use crate::wind::profile::{Profile, sector};
use crate::wind::sphere::{Vector, bearing_degrees, distance_nmi};
use crate::wind::structure::{Change, Expected};

/// How far the surface wind is turned inwards from the circle around the centre, in degrees, over the sea.
///
/// 20: our rounding of the mean of 22.6 that Zhang & Uhlhorn 2012 (Monthly Weather Review 140:3587-3605)
/// measured; cited from memory.
pub const INFLOW_DEGREES: f64 = 20.0;

/// The least exponent with which the mean vortex is used: its formula would fall below it in storms under 16
/// kt.
const LEAST_EXPONENT: f64 = 0.2;

/// On which side of the equator a storm turns.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Hemisphere {
    /// Winds blow counter-clockwise around the centre.
    Northern,
    /// Winds blow clockwise.
    Southern,
}

impl Hemisphere {
    /// The hemisphere of a latitude; the equator counts as northern.
    #[must_use]
    pub fn of(latitude: f64) -> Hemisphere {
        if latitude < 0.0 { Hemisphere::Southern } else { Hemisphere::Northern }
    }
}

/// The direction from which the wind blows at a site on bearing b from the centre, turned inwards by the
/// angle beta.
///
/// Northern hemisphere: b + 90 - beta; southern: b - 90 + beta.
#[must_use]
pub fn wind_from(site: Bearing, hemisphere: Hemisphere, inflow_degrees: f64) -> Bearing {
    match hemisphere {
        Hemisphere::Northern => Bearing::wrapped(site.get() + 90.0 - inflow_degrees),
        Hemisphere::Southern => Bearing::wrapped(site.get() - 90.0 + inflow_degrees),
    }
}

/// One state of a storm: where it is, how strong, how large.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Vortex {
    /// The centre as a unit vector.
    pub centre: Vector,
    /// Greatest wind anywhere in it, kt.
    pub max_wind_kt: f64,
    /// Reach of 34, 50, 64 kt in the quadrants NE, SE, SW, NW, n mi.
    pub reach_nmi: [[f64; 4]; 3],
    /// The widest reach of 34 kt in any quadrant, n mi.
    pub widest_nmi: f64,
    /// Exponent of the mean vortex of this strength.
    pub exponent: f64,
    /// Radius of greatest wind, n mi.
    pub core_nmi: f64,
}

impl Vortex {
    /// The storm with its centre there, where it turns out so and `expected` was forecast.
    #[must_use]
    pub fn realised(expected: &Expected, centre: Vector, change: &Change) -> Vortex {
        let reach_nmi = expected.reach(change);
        let wind_kt = change.wind_kt;
        Vortex {
            centre,
            max_wind_kt: wind_kt,
            reach_nmi,
            widest_nmi: reach_nmi[0].into_iter().fold(0.0, f64::max),
            exponent: rankine_exponent(wind_kt, expected.latitude).max(LEAST_EXPONENT),
            core_nmi: expected.mean_gale_ratio
                * change.size
                * radius_of_greatest_wind_nmi(wind_kt, expected.latitude),
        }
    }

    /// The vortex along one bearing.
    #[must_use]
    pub fn profile(&self, bearing_degrees: f64) -> Profile {
        let (from, to, share) = sector(bearing_degrees);
        let along = |quadrants: [f64; 4]| quadrants[from] * (1.0 - share) + quadrants[to] * share;
        Profile {
            max_wind_kt: self.max_wind_kt,
            reach_nmi: self.reach_nmi.map(along),
            exponent: self.exponent,
            core_nmi: self.core_nmi,
        }
    }

    /// The wind at a place.
    #[must_use]
    pub fn wind_at(&self, place: Vector, hemisphere: Hemisphere) -> PointWind {
        let distance = distance_nmi(self.centre, place);
        let bearing = bearing_degrees(self.centre, place);
        let wall = self.profile(bearing).speed_kt(distance);
        // Within half the radius of greatest wind the speed falls linearly to the calm of the centre.
        let eye = self.core_nmi / 2.0;
        let in_eye = distance < eye;
        PointWind {
            around: Knots::clamped(wall),
            speed: Knots::clamped(if in_eye { wall * distance / eye } else { wall }),
            from: wind_from(Bearing::wrapped(bearing), hemisphere, INFLOW_DEGREES),
            in_eye,
        }
    }
}

/// The wind at one point and time.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct PointWind {
    /// Mean wind, averaged as the advisory's, 10 m over open water; falls to a calm in the eye.
    pub speed: Knots,
    /// The same with the eye filled: what a gale's onset and end are judged by, since a calm eye never ends
    /// the gale.
    pub around: Knots,
    /// From where it blows.
    pub from: Bearing,
    /// The point lies in the eye: the wind returns from the other side.
    pub in_eye: bool,
}

#[cfg(test)]
mod tests {
    use super::{Hemisphere, Vortex, wind_from};
    use crate::units::bearing::Bearing;
    use crate::wind::sphere::{displaced, east_and_north, vector_of};
    use approx::assert_abs_diff_eq;

    fn hurricane(latitude: f64) -> Vortex {
        Vortex {
            centre: vector_of(latitude, -60.0),
            max_wind_kt: 100.0,
            reach_nmi: [[120.0; 4], [60.0; 4], [30.0; 4]],
            widest_nmi: 120.0,
            exponent: 0.66,
            core_nmi: 20.0,
        }
    }

    #[test]
    fn the_wind_blows_from_where_the_hemisphere_says() {
        let cases = [(0.0, 70.0, 290.0), (90.0, 160.0, 20.0), (180.0, 250.0, 110.0), (270.0, 340.0, 200.0)];
        for (bearing, north, south) in cases {
            let site = Bearing::wrapped(bearing);
            assert_abs_diff_eq!(wind_from(site, Hemisphere::Northern, 20.0).get(), north);
            assert_abs_diff_eq!(wind_from(site, Hemisphere::Southern, 20.0).get(), south);
        }
    }

    #[test]
    fn a_site_left_of_a_southern_storm_moving_south_sees_the_wind_back() {
        // On the storm's left (east) the site's bearing goes 180, 90, 0 as the centre passes: wind 110, 020,
        // 290.
        let from = |bearing: f64| wind_from(Bearing::wrapped(bearing), Hemisphere::Southern, 20.0).get();
        assert_abs_diff_eq!(from(180.0), 110.0);
        assert_abs_diff_eq!(from(90.0), 20.0);
        assert_abs_diff_eq!(from(0.0), 290.0);
    }

    #[test]
    fn the_eye_is_calm_but_counts_as_gale() {
        let storm = hurricane(20.0);
        let centre = storm.wind_at(storm.centre, Hemisphere::Northern);
        assert!(centre.in_eye);
        assert_abs_diff_eq!(centre.speed.get(), 0.0);
        assert_abs_diff_eq!(centre.around.get(), 100.0);
    }

    #[test]
    fn the_given_wind_blows_at_the_given_radius() {
        let storm = hurricane(20.0);
        let (east, north) = east_and_north(storm.centre);
        for (miles, speed) in [(120.0, 34.0), (60.0, 50.0), (30.0, 64.0)] {
            let place = displaced(storm.centre, north, east, 0.0, miles);
            assert_abs_diff_eq!(
                storm.wind_at(place, Hemisphere::Northern).speed.get(),
                speed,
                epsilon = 0.02
            );
        }
    }
}
