//! Chances between 0 and 1.

use crate::units::number::{NumberError, in_range, split_unit};
use std::fmt;

/// A chance, 0 to 1, never NaN.
#[derive(Clone, Copy, Debug, PartialEq, PartialOrd)]
pub struct Chance(f64);

impl Chance {
    /// It cannot happen (in the scenarios at hand).
    pub const NEVER: Chance = Chance(0.0);
    /// It happens (in all scenarios at hand).
    pub const CERTAIN: Chance = Chance(1.0);

    /// A chance from a share between 0 and 1.
    ///
    /// # Errors
    /// Refuses NaN and anything outside 0 to 1.
    pub fn new(share: f64) -> Result<Chance, NumberError> {
        in_range(share, 0.0, 1.0, "(share)").map(Chance)
    }

    /// `part` of `whole`; of nothing, no chance.
    #[must_use]
    pub fn share(part: usize, whole: usize) -> Chance {
        if whole == 0 { Chance(0.0) } else { Chance((part as f64 / whole as f64).min(1.0)) }
    }

    /// Reads "10 %" (a bare number is refused: 10 could mean 10 % or certainty).
    ///
    /// # Errors
    /// A missing or unknown unit, or a number outside 0 to 100 %.
    pub fn parse(text: &str) -> Result<Chance, NumberError> {
        let (value, unit) = split_unit(text, "%")?;
        match unit {
            "%" => in_range(value, 0.0, 100.0, "%").map(|percent| Chance(percent / 100.0)),
            _ => Err(NumberError::Unreadable { text: text.to_owned(), units: "%" }),
        }
    }

    /// The share between 0 and 1.
    #[must_use]
    pub fn get(self) -> f64 {
        self.0
    }

    /// The chance in per cent, 0 to 100.
    #[must_use]
    pub fn percent(self) -> f64 {
        self.0 * 100.0
    }
}

impl fmt::Display for Chance {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let percent = self.percent();
        if percent > 0.0 && percent < 1.0 {
            write!(f, "<1 %")
        } else if percent > 99.0 && percent < 100.0 {
            write!(f, ">99 %")
        } else {
            write!(f, "{percent:.0} %")
        }
    }
}
