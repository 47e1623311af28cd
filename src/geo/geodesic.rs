//! Distances, bearings and destinations on the earth: exact ones for people, quick ones for plans.
//!
//! [`distance`], [`bearing`] and [`destination`] are exact on the WGS 84 ellipsoid, but rest on the platform's sines,
//! whose last digits differ between machines: they are for figures that people read. Whatever decides a plan uses
//! [`Fix`] and [`quick_destination`], which give the same bytes everywhere.

use crate::geo::position::Position;
use crate::units::bearing::Bearing;
use crate::units::length::{METRES_PER_NAUTICAL_MILE, NauticalMiles};
use geographiclib_rs::{DirectGeodesic, Geodesic, InverseGeodesic};

/// Equatorial radius of WGS 84 in metres (NIMA TR8350.2, third edition, table 3.1).
const EQUATORIAL_RADIUS_M: f64 = 6_378_137.0;

/// Flattening of WGS 84 (NIMA TR8350.2, third edition, table 3.1).
const FLATTENING: f64 = 1.0 / 298.257_223_563;

/// Mean radius of WGS 84 in metres, (2a + b) / 3.
const MEAN_RADIUS_M: f64 = EQUATORIAL_RADIUS_M * (1.0 - FLATTENING / 3.0);

/// The length of the shortest way between two positions (WGS 84, to well under a metre).
///
/// For people's eyes; in plans use [`quick_distance_bearing`].
///
/// ```
/// use snugdown::geo::{geodesic::distance, position::Position};
/// let (havana, miami) = (Position::new(23.1, -82.4)?, Position::new(25.8, -80.2)?);
/// assert_eq!(distance(havana, miami).to_string(), "201 n mi");
/// # Ok::<(), snugdown::units::number::NumberError>(())
/// ```
#[must_use]
pub fn distance(a: Position, b: Position) -> NauticalMiles {
    let metres: f64 = Geodesic::wgs84().inverse(a.latitude(), a.longitude(), b.latitude(), b.longitude());
    NauticalMiles::clamped(metres / METRES_PER_NAUTICAL_MILE)
}

/// The true bearing on which the shortest way from `a` to `b` sets out (WGS 84).
///
/// From a position to itself, and wherever all ways are equally short, it is one of the possible bearings.
#[must_use]
pub fn bearing(a: Position, b: Position) -> Bearing {
    let (initial, _at_b, _arc): (f64, f64, f64) =
        Geodesic::wgs84().inverse(a.latitude(), a.longitude(), b.latitude(), b.longitude());
    Bearing::wrapped(initial)
}

/// The position reached from `from` by setting out on `bearing` and keeping straight on for `distance` (WGS 84).
#[must_use]
pub fn destination(from: Position, bearing: Bearing, distance: NauticalMiles) -> Position {
    let metres = distance.get() * METRES_PER_NAUTICAL_MILE;
    let (latitude, longitude): (f64, f64) =
        Geodesic::wgs84().direct(from.latitude(), from.longitude(), bearing.get(), metres);
    Position::clamped(latitude, longitude)
}

/// A position made ready for many quick distances: the sines that it needs are taken once.
///
/// Good to 0.01 % in distance up to 5,400 n mi and 0.1 degrees in bearing up to 1,500 (tested against the published
/// GeodTest set and [`distance`]); between nearly opposite ends of the earth the distance may be 0.5 % out.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Fix {
    sin_beta: f64,
    cos_beta: f64,
    sin_lambda: f64,
    cos_lambda: f64,
}

impl Fix {
    /// The fix of a position.
    #[must_use]
    pub fn of(position: Position) -> Fix {
        // Reduced latitude beta: tan(beta) = (1 - f) tan(phi), phi the geographic latitude, f the flattening.
        let (sin_phi, cos_phi) = libm::sincos(position.latitude().to_radians());
        let (sin_lambda, cos_lambda) = libm::sincos(position.longitude().to_radians());
        let polar = (1.0 - FLATTENING) * sin_phi;
        let length = (polar * polar + cos_phi * cos_phi).sqrt();
        Fix { sin_beta: polar / length, cos_beta: cos_phi / length, sin_lambda, cos_lambda }
    }

    /// Distance in n mi, and initial true bearing in degrees (0 <= b < 360), from here to `other`.
    ///
    /// From a fix to itself the bearing is 0.
    #[must_use]
    pub fn distance_bearing(&self, other: &Fix) -> (f64, f64) {
        // Great circle on the sphere of reduced latitudes, the length corrected to first order in f:
        // the Forsyth-Andoyer-Lambert formula (Andoyer 1932, Lambert 1942; cited from memory, tested against the exact).
        //   sigma  angle between the two on that sphere        P = (beta1 + beta2) / 2, Q = (beta2 - beta1) / 2
        //   X = (sigma - sin sigma) sin2 P cos2 Q / cos2(sigma / 2)
        //   Y = (sigma + sin sigma) cos2 P sin2 Q / sin2(sigma / 2)
        //   s = a (sigma - f / 2 (X + Y))
        // with 2 sin P cos Q = sin beta1 + sin beta2, 2 cos P sin Q = sin beta2 - sin beta1,
        // 2 cos2(sigma / 2) = 1 + cos sigma, 2 sin2(sigma / 2) = 1 - cos sigma.
        let sin_delta = other.sin_lambda * self.cos_lambda - other.cos_lambda * self.sin_lambda;
        let cos_delta = other.cos_lambda * self.cos_lambda + other.sin_lambda * self.sin_lambda;
        let east = other.cos_beta * sin_delta;
        let north = self.cos_beta * other.sin_beta - self.sin_beta * other.cos_beta * cos_delta;
        let sin_sigma = (east * east + north * north).sqrt();
        let cos_sigma = self.sin_beta * other.sin_beta + self.cos_beta * other.cos_beta * cos_delta;
        let sigma = libm::atan2(sin_sigma, cos_sigma);
        let (sum, difference) = (self.sin_beta + other.sin_beta, other.sin_beta - self.sin_beta);
        // At the two ends of the range the quotients turn into 0 / 0; the correction itself stays small there.
        let x = (sigma - sin_sigma) * sum * sum / (2.0 * (1.0 + cos_sigma)).max(LEAST_DIVISOR);
        let y = (sigma + sin_sigma) * difference * difference / (2.0 * (1.0 - cos_sigma)).max(LEAST_DIVISOR);
        let metres = EQUATORIAL_RADIUS_M * (sigma - FLATTENING / 2.0 * (x + y));
        (metres / METRES_PER_NAUTICAL_MILE, degrees_round(libm::atan2(east, north)))
    }

    /// Whether `other` is certainly farther than `limit_nm` n mi: a quick no, several times cheaper than the distance.
    ///
    /// False does not mean nearer: then ask [`Fix::distance_bearing`].
    #[must_use]
    pub fn is_beyond(&self, other: &Fix, limit_nm: f64) -> bool {
        // The chord through the earth is shorter than any way over it; 1 % covers the flattening (0.34 %).
        let cos_delta = other.cos_lambda * self.cos_lambda + other.sin_lambda * self.sin_lambda;
        let cos_sigma = self.sin_beta * other.sin_beta + self.cos_beta * other.cos_beta * cos_delta;
        let limit = limit_nm * METRES_PER_NAUTICAL_MILE / (0.99 * EQUATORIAL_RADIUS_M);
        limit >= 0.0 && 2.0 * (1.0 - cos_sigma) > limit * limit
    }
}

/// Below this the correction's quotients are noise: 1e-12 is an angle of 1e-6, six metres on the ground.
const LEAST_DIVISOR: f64 = 1e-12;

/// Distance in n mi and initial true bearing in degrees from `a` to `b`, the same bytes on any machine.
///
/// See [`Fix`] for the accuracy, and for many distances from one position.
///
/// ```
/// use snugdown::geo::{geodesic::quick_distance_bearing, position::Position};
/// let (fiji, samoa) = (Position::new(-18.0, 178.0)?, Position::new(-18.0, -178.0)?);
/// let (nm, degrees) = quick_distance_bearing(fiji, samoa);
/// assert!((nm - 228.7).abs() < 0.1 && (degrees - 90.6).abs() < 0.1);
/// # Ok::<(), snugdown::units::number::NumberError>(())
/// ```
#[must_use]
pub fn quick_distance_bearing(a: Position, b: Position) -> (f64, f64) {
    Fix::of(a).distance_bearing(&Fix::of(b))
}

/// The position `distance_nm` n mi from `from` on `bearing_degrees` true, the same bytes on any machine.
///
/// A great circle on the mean sphere: good to 0.6 % of the distance, enough to place a drawn error. A negative distance
/// goes the other way.
#[must_use]
pub fn quick_destination(from: Position, bearing_degrees: f64, distance_nm: f64) -> Position {
    // sin(phi2) = sin(phi1) cos(sigma) + cos(phi1) sin(sigma) cos(alpha), kept as the vector (u, v, w) with
    // u along the meridian of `from`, v to its east and w to the pole, so that the poles need no special case.
    let (sin_phi, cos_phi) = libm::sincos(from.latitude().to_radians());
    let (sin_alpha, cos_alpha) = libm::sincos(bearing_degrees.to_radians());
    let (sin_sigma, cos_sigma) = libm::sincos(distance_nm * METRES_PER_NAUTICAL_MILE / MEAN_RADIUS_M);
    let u = cos_phi * cos_sigma - sin_phi * sin_sigma * cos_alpha;
    let v = sin_sigma * sin_alpha;
    let w = sin_phi * cos_sigma + cos_phi * sin_sigma * cos_alpha;
    let latitude = libm::atan2(w, (u * u + v * v).sqrt()).to_degrees();
    Position::clamped(latitude, from.longitude() + libm::atan2(v, u).to_degrees())
}

/// `from` moved `along_nm` n mi on `heading` and `right_nm` n mi to the right of it, the same bytes on any machine.
///
/// Either may be negative: behind, or to the left. Good to 0.6 %, as [`quick_destination`].
#[must_use]
pub fn displaced(from: Position, heading: Bearing, along_nm: f64, right_nm: f64) -> Position {
    let off = libm::atan2(right_nm, along_nm).to_degrees();
    quick_destination(from, heading.get() + off, libm::hypot(along_nm, right_nm))
}

/// An angle in radians, -pi to pi, as degrees 0 <= d < 360.
fn degrees_round(radians: f64) -> f64 {
    let degrees = radians.to_degrees();
    if degrees >= 0.0 {
        return degrees;
    }
    let positive = degrees + 360.0;
    if positive >= 360.0 { 0.0 } else { positive }
}
