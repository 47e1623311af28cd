//! Distances in nautical miles; heights, depths and draughts in metres.

use crate::units::number::{NumberError, in_range, split_unit};
use std::fmt;

/// Metres in one nautical mile (exact by definition).
pub const METRES_PER_NAUTICAL_MILE: f64 = 1852.0;

/// Metres in an international foot, by definition.
pub const METRES_PER_FOOT: f64 = 0.3048;

/// A distance in nautical miles, 0 to 11,000 (half way round the earth), never NaN.
#[derive(Clone, Copy, Debug, PartialEq, PartialOrd)]
pub struct NauticalMiles(f64);

impl NauticalMiles {
    /// No distance.
    pub const ZERO: NauticalMiles = NauticalMiles(0.0);

    /// A distance of `miles` nautical miles.
    ///
    /// # Errors
    /// Refuses NaN, infinities, and anything outside 0 to 11,000.
    pub fn new(miles: f64) -> Result<NauticalMiles, NumberError> {
        in_range(miles, 0.0, 11_000.0, "n mi").map(NauticalMiles)
    }

    /// The nearest allowed distance: for the results of computations; NaN becomes 0.
    #[must_use]
    pub fn clamped(miles: f64) -> NauticalMiles {
        if miles.is_finite() { NauticalMiles(miles.clamp(0.0, 11_000.0)) } else { NauticalMiles(0.0) }
    }

    /// Reads "120 n mi", "120 nm" or "222 km".
    ///
    /// # Errors
    /// A missing or unknown unit, or a number out of range.
    pub fn parse(text: &str) -> Result<NauticalMiles, NumberError> {
        let units = "n mi, nm, km";
        let (value, unit) = split_unit(text, units)?;
        match unit {
            "n mi" | "nm" | "NM" => NauticalMiles::new(value),
            "km" => NauticalMiles::new(value * 1000.0 / METRES_PER_NAUTICAL_MILE),
            _ => Err(NumberError::Unreadable { text: text.to_owned(), units }),
        }
    }

    /// The number of nautical miles.
    #[must_use]
    pub fn get(self) -> f64 {
        self.0
    }
}

impl fmt::Display for NauticalMiles {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{:.0} n mi", self.0)
    }
}

/// A height, depth, draught or length in metres, -12,000 to 12,000, never NaN. Below a datum is negative.
#[derive(Clone, Copy, Debug, PartialEq, PartialOrd)]
pub struct Metres(f64);

impl Metres {
    /// No height.
    pub const ZERO: Metres = Metres(0.0);

    /// A length of `metres`.
    ///
    /// # Errors
    /// Refuses NaN, infinities, and anything outside -12,000 to 12,000.
    pub fn new(metres: f64) -> Result<Metres, NumberError> {
        in_range(metres, -12_000.0, 12_000.0, "m").map(Metres)
    }

    /// The nearest allowed length: for the results of computations; NaN becomes 0.
    #[must_use]
    pub fn clamped(metres: f64) -> Metres {
        if metres.is_finite() { Metres(metres.clamp(-12_000.0, 12_000.0)) } else { Metres(0.0) }
    }

    /// Reads "11.8 m", "45 cm" or "38.7 ft".
    ///
    /// # Errors
    /// A missing or unknown unit, or a number out of range.
    pub fn parse(text: &str) -> Result<Metres, NumberError> {
        let units = "m, cm, ft";
        let (value, unit) = split_unit(text, units)?;
        match unit {
            "m" => Metres::new(value),
            "cm" => Metres::new(value / 100.0),
            "ft" => Metres::new(value * METRES_PER_FOOT),
            _ => Err(NumberError::Unreadable { text: text.to_owned(), units }),
        }
    }

    /// The number of metres.
    #[must_use]
    pub fn get(self) -> f64 {
        self.0
    }
}

impl fmt::Display for Metres {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{:.1} m", self.0)
    }
}
