//! What every unit type shares: the finite, in-range check and the reading of "12.5 unit" texts.

/// A number that a unit type refuses.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
pub enum NumberError {
    /// The text holds no number, or an unknown unit.
    #[error("\"{text}\" is not a number with one of the units {units}")]
    Unreadable {
        /// The text as found.
        text: String,
        /// The units that are understood.
        units: &'static str,
    },
    /// The number is not finite or outside the range of its type.
    #[error("{value} {unit} is outside {least} to {most} {unit}")]
    OutOfRange {
        /// The number as found.
        value: f64,
        /// Its unit.
        unit: &'static str,
        /// The least allowed value.
        least: f64,
        /// The greatest allowed value.
        most: f64,
    },
}

/// `value` if it is finite and within `least..=most`.
///
/// # Errors
/// [`NumberError::OutOfRange`] otherwise; NaN and the infinities are always refused.
pub fn in_range(value: f64, least: f64, most: f64, unit: &'static str) -> Result<f64, NumberError> {
    if value.is_finite() && value >= least && value <= most {
        Ok(value)
    } else {
        Err(NumberError::OutOfRange { value, unit, least, most })
    }
}

/// Splits "34 kt" or "34kt" into its number and its unit.
///
/// # Errors
/// [`NumberError::Unreadable`] when no number leads the text. `units` names the allowed units for the message.
///
/// ```
/// use snugdown::units::number::split_unit;
/// assert_eq!(split_unit(" 17.5 m/s", "kt, m/s"), Ok((17.5, "m/s")));
/// assert!(split_unit("kt", "kt, m/s").is_err());
/// ```
pub fn split_unit<'a>(text: &'a str, units: &'static str) -> Result<(f64, &'a str), NumberError> {
    let unreadable = || NumberError::Unreadable { text: text.to_owned(), units };
    let trimmed = text.trim();
    let end = trimmed
        .find(|c: char| !(c.is_ascii_digit() || matches!(c, '.' | '-' | '+')))
        .unwrap_or(trimmed.len());
    let (number, unit) = trimmed.split_at(end);
    let value: f64 = number.parse().map_err(|_| unreadable())?;
    Ok((value, unit.trim()))
}
