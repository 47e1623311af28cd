//! Air pressure in hectopascals.

use crate::units::number::{NumberError, in_range};
use std::fmt;

/// A pressure in hectopascals (equal to millibars), 800 to 1100, never NaN.
#[derive(Clone, Copy, Debug, PartialEq, PartialOrd)]
pub struct HectoPascals(f64);

impl HectoPascals {
    /// A pressure of `hpa` hectopascals.
    ///
    /// # Errors
    /// Refuses NaN, infinities, and anything outside 800 to 1100.
    pub fn new(hpa: f64) -> Result<HectoPascals, NumberError> {
        in_range(hpa, 800.0, 1100.0, "hPa").map(HectoPascals)
    }

    /// The number of hectopascals.
    #[must_use]
    pub fn get(self) -> f64 {
        self.0
    }
}

impl fmt::Display for HectoPascals {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{:.0} hPa", self.0)
    }
}
