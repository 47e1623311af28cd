//! Speeds in knots.

use crate::units::number::{NumberError, in_range, split_unit};
use std::fmt;

/// Metres per second in one knot: 1852 m / 3600 s (exact by the definition of the nautical mile).
pub const METRES_PER_SECOND_PER_KNOT: f64 = 1852.0 / 3600.0;

/// Kilometres per hour in one knot (exact).
pub const KM_PER_HOUR_PER_KNOT: f64 = 1.852;

/// Statute miles per hour in one knot (1852 m / 1609.344 m, exact).
pub const MILES_PER_HOUR_PER_KNOT: f64 = 1852.0 / 1609.344;

/// A speed in knots, 0 to 400, never NaN.
///
/// For a *wind* that a limit names use [`crate::units::wind::WindLimit`], which also says averaging period and height.
#[derive(Clone, Copy, Debug, PartialEq, PartialOrd)]
pub struct Knots(f64);

impl Knots {
    /// No speed at all.
    pub const ZERO: Knots = Knots(0.0);
    /// Gale force, 34 kt: the onset on which port closures turn (Beaufort 8, WMO).
    pub const GALE: Knots = Knots(34.0);
    /// Storm force as tropical cyclone advisories give it, 50 kt.
    pub const STORM: Knots = Knots(50.0);
    /// Hurricane force, 64 kt.
    pub const HURRICANE: Knots = Knots(64.0);

    /// A speed of `knots`.
    ///
    /// # Errors
    /// Refuses NaN, infinities, and anything outside 0 to 400 kt.
    pub fn new(knots: f64) -> Result<Knots, NumberError> {
        in_range(knots, 0.0, 400.0, "kt").map(Knots)
    }

    /// The nearest allowed speed: for the results of computations, which may stray by rounding; NaN becomes 0.
    #[must_use]
    pub fn clamped(knots: f64) -> Knots {
        if knots.is_finite() { Knots(knots.clamp(0.0, 400.0)) } else { Knots(0.0) }
    }

    /// Reads "34 kt", "17.5 m/s", "63 km/h" or "39 mph".
    ///
    /// # Errors
    /// A missing or unknown unit, or a number out of range.
    ///
    /// ```
    /// use snugdown::units::speed::Knots;
    /// assert_eq!(Knots::parse("34 kt").unwrap().get(), 34.0);
    /// assert!((Knots::parse("63 km/h").unwrap().get() - 34.02).abs() < 0.01);
    /// assert!(Knots::parse("34").is_err());
    /// ```
    pub fn parse(text: &str) -> Result<Knots, NumberError> {
        let units = "kt, m/s, km/h, mph";
        let (value, unit) = split_unit(text, units)?;
        match unit {
            "kt" | "kn" => Knots::new(value),
            "m/s" => Knots::new(value / METRES_PER_SECOND_PER_KNOT),
            "km/h" => Knots::new(value / KM_PER_HOUR_PER_KNOT),
            "mph" => Knots::new(value / MILES_PER_HOUR_PER_KNOT),
            _ => Err(NumberError::Unreadable { text: text.to_owned(), units }),
        }
    }

    /// The number of knots.
    #[must_use]
    pub fn get(self) -> f64 {
        self.0
    }
}

impl fmt::Display for Knots {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{:.0} kt", self.0)
    }
}
