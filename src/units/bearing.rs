//! Directions in degrees true.

use crate::units::number::{NumberError, in_range};
use std::fmt;

/// A direction in degrees true, 0 <= b < 360, clockwise from north.
#[derive(Clone, Copy, Debug, PartialEq, PartialOrd)]
pub struct Bearing(f64);

impl Bearing {
    /// True north.
    pub const NORTH: Bearing = Bearing(0.0);

    /// A bearing of `degrees`; 360 is read as 0, as forecast texts write either for north.
    ///
    /// # Errors
    /// Refuses NaN, infinities, and anything outside 0 to 360.
    pub fn new(degrees: f64) -> Result<Bearing, NumberError> {
        in_range(degrees, 0.0, 360.0, "degrees").map(Bearing::wrapped)
    }

    /// Any finite angle brought into 0 <= b < 360; NaN and infinities become north.
    ///
    /// ```
    /// use snugdown::units::bearing::Bearing;
    /// assert_eq!(Bearing::wrapped(-90.0).get(), 270.0);
    /// assert_eq!(Bearing::wrapped(360.0).get(), 0.0);
    /// ```
    #[must_use]
    pub fn wrapped(degrees: f64) -> Bearing {
        if (0.0..360.0).contains(&degrees) {
            return Bearing(degrees);
        }
        if !degrees.is_finite() {
            return Bearing(0.0);
        }
        let rest = degrees.rem_euclid(360.0);
        Bearing(if rest >= 360.0 { 0.0 } else { rest })
    }

    /// The number of degrees.
    #[must_use]
    pub fn get(self) -> f64 {
        self.0
    }

    /// The smaller angle between two bearings, 0 to 180 degrees.
    #[must_use]
    pub fn angle_to(self, other: Bearing) -> f64 {
        let difference = (self.0 - other.0).abs();
        if difference > 180.0 { 360.0 - difference } else { difference }
    }
}

impl fmt::Display for Bearing {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        // 359.6 would print as 360: wrap after rounding.
        write!(f, "{:03.0}", self.0.round() % 360.0)
    }
}
