//! A position on the earth, WGS 84, in degrees.

use crate::units::number::{NumberError, in_range};
use std::fmt;

/// Latitude -90 to 90 (north positive) and longitude -180 to 180 (east positive), never NaN.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Position {
    latitude: f64,
    longitude: f64,
}

impl Position {
    /// A position in degrees; longitudes to 360 are brought into -180..180, as some texts count eastwards.
    ///
    /// # Errors
    /// Refuses NaN, infinities, latitudes beyond 90 and longitudes beyond 360 degrees.
    pub fn new(latitude: f64, longitude: f64) -> Result<Position, NumberError> {
        let latitude = in_range(latitude, -90.0, 90.0, "degrees of latitude")?;
        let longitude = in_range(longitude, -360.0, 360.0, "degrees of longitude")?;
        Ok(Position { latitude, longitude: wrap_longitude(longitude) })
    }

    /// The nearest allowed position, longitude wrapped: for the results of computations; NaN becomes 0.
    #[must_use]
    pub fn clamped(latitude: f64, longitude: f64) -> Position {
        let latitude = if latitude.is_nan() { 0.0 } else { latitude.clamp(-90.0, 90.0) };
        let longitude = if longitude.is_finite() { wrap_longitude(longitude) } else { 0.0 };
        Position { latitude, longitude }
    }

    /// Degrees north (south negative).
    #[must_use]
    pub fn latitude(self) -> f64 {
        self.latitude
    }

    /// Degrees east (west negative), -180..180.
    #[must_use]
    pub fn longitude(self) -> f64 {
        self.longitude
    }
}

/// Any longitude brought into -180 <= x < 180.
#[must_use]
pub fn wrap_longitude(degrees: f64) -> f64 {
    if (-180.0..180.0).contains(&degrees) { degrees } else { (degrees + 180.0).rem_euclid(360.0) - 180.0 }
}

impl fmt::Display for Position {
    /// "22 18.0 N 040 48.0 W": degrees and minutes, as charts and mariners write them.
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let part = |value: f64| {
            let tenths = (value.abs() * 600.0).round() as i64;
            (tenths / 600, (tenths % 600) as f64 / 10.0)
        };
        let ((lat_d, lat_m), (lon_d, lon_m)) = (part(self.latitude), part(self.longitude));
        let (ns, ew) =
            (if self.latitude < 0.0 { 'S' } else { 'N' }, if self.longitude < 0.0 { 'W' } else { 'E' });
        write!(f, "{lat_d:02} {lat_m:04.1} {ns} {lon_d:03} {lon_m:04.1} {ew}")
    }
}
