//! Positions as people write them: "22 18.0 N 040 48.0 W", "22.3 N 40.8 W", and bare "22.3,-40.8" where that is agreed.

use crate::geo::position::Position;

/// A text that is no position.
#[derive(Clone, Debug, PartialEq, Eq, thiserror::Error)]
pub enum PositionError {
    /// It does not consist of a latitude and a longitude, each with its letter.
    #[error("\"{text}\" is not a position such as \"22 18.0 N 040 48.0 W\" or \"22.3 N 40.8 W\"")]
    Unreadable {
        /// The text as found.
        text: String,
    },
    /// Minutes of 60 or more, a latitude beyond 90 or a longitude beyond 180 degrees.
    #[error(
        "\"{text}\" has minutes of 60 or more, or lies beyond 90 degrees of latitude or 180 of longitude"
    )]
    OutOfRange {
        /// The text as found.
        text: String,
    },
    /// It is not two decimal numbers with a comma between them.
    #[error("\"{text}\" is not a latitude and a longitude in decimal degrees such as \"22.3,-40.8\"")]
    NotDecimal {
        /// The text as found.
        text: String,
    },
}

/// Reads a latitude and a longitude with their letters, latitude first, in degrees or in degrees and minutes.
///
/// Blanks, and the signs for degrees and minutes, may stand or be left out: "22.3N 40.8W", "22°18.0'N 040°48.0'W".
/// For two bare numbers use [`parse_decimal`].
///
/// # Errors
/// [`PositionError`] if it is something else; a bare number is never taken for north or east.
///
/// ```
/// use snugdown::geo::position_text::parse_position;
/// let chart = parse_position("22 18.0 N 040 48.0 W").unwrap();
/// let decimal = parse_position("22.3 N 40.8 W").unwrap();
/// assert!((chart.latitude() - 22.3).abs() < 1e-9 && (chart.longitude() - decimal.longitude()).abs() < 1e-9);
/// assert!(parse_position("22.3 40.8").is_err());
/// ```
pub fn parse_position(text: &str) -> Result<Position, PositionError> {
    let unreadable = || PositionError::Unreadable { text: text.to_owned() };
    let (north_south, rest) = text
        .split_once(['N', 'S', 'n', 's'])
        .map(|(before, rest)| (before, rest.trim()))
        .ok_or_else(unreadable)?;
    let is_south = text.get(north_south.len()..).is_some_and(|from| from.starts_with(['S', 's']));
    let is_west = rest.ends_with(['W', 'w']);
    let east_west = rest.strip_suffix(['E', 'W', 'e', 'w']).ok_or_else(unreadable)?;
    let east_west = east_west.trim_start_matches([',', ';', ' ']);
    let signed = |degrees: f64, is_negative: bool| if is_negative { -degrees } else { degrees };
    let latitude = degrees(north_south).ok_or_else(unreadable)?;
    let longitude = degrees(east_west).ok_or_else(unreadable)?;
    match (latitude, longitude) {
        (Some(latitude), Some(longitude)) if longitude <= 180.0 => {
            Position::new(signed(latitude, is_south), signed(longitude, is_west))
                .map_err(|_| PositionError::OutOfRange { text: text.to_owned() })
        }
        _ => Err(PositionError::OutOfRange { text: text.to_owned() }),
    }
}

/// Reads "LAT,LON" in decimal degrees, north and east positive, for places named on a command line.
///
/// # Errors
/// [`PositionError`] if it is something else or out of range.
///
/// ```
/// use snugdown::geo::position_text::parse_decimal;
/// assert_eq!(parse_decimal("22.3,-40.8").unwrap().longitude(), -40.8);
/// assert!(parse_decimal("22.3").is_err());
/// ```
pub fn parse_decimal(text: &str) -> Result<Position, PositionError> {
    let not_decimal = || PositionError::NotDecimal { text: text.to_owned() };
    let (latitude, longitude) = text.split_once(',').ok_or_else(not_decimal)?;
    let number = |part: &str| -> Option<f64> {
        let unsigned = part.trim().trim_start_matches(['+', '-']);
        plain_number(unsigned)?;
        part.trim().parse().ok()
    };
    let latitude = number(latitude).ok_or_else(not_decimal)?;
    let longitude = number(longitude).ok_or_else(not_decimal)?;
    let out_of_range = || PositionError::OutOfRange { text: text.to_owned() };
    if longitude.abs() > 180.0 {
        return Err(out_of_range());
    }
    Position::new(latitude, longitude).map_err(|_| out_of_range())
}

/// "22.3" or "22 18.0" as degrees; `Some(None)` if the minutes are 60 or more, `None` if it is no angle at all.
fn degrees(text: &str) -> Option<Option<f64>> {
    let spaced: String =
        text.chars().map(|c| if matches!(c, '°' | 'º' | '\'' | '’' | '′' | '"') { ' ' } else { c }).collect();
    let parts: Vec<&str> = spaced.split_whitespace().collect();
    match parts.as_slice() {
        [degrees] => Some(Some(plain_number(degrees)?)),
        [degrees, minutes] => {
            let (whole, minutes) =
                (plain_number(degrees).filter(|_| !degrees.contains('.'))?, plain_number(minutes)?);
            Some((minutes < 60.0).then_some(whole + minutes / 60.0))
        }
        _ => None,
    }
}

/// Digits and at most one full stop: no sign, no exponent, no "nan".
fn plain_number(text: &str) -> Option<f64> {
    let is_plain = text.len() <= 12 && text.bytes().all(|b| b.is_ascii_digit() || b == b'.');
    is_plain.then(|| text.parse().ok()).flatten()
}

#[cfg(test)]
mod tests {
    use super::{PositionError, parse_decimal, parse_position};

    #[test]
    fn what_a_position_prints_is_read_back() {
        for (latitude, longitude) in [(22.3, -40.8), (-17.05, 179.99), (0.5, 0.0), (-5.0, -179.9)] {
            let position = crate::geo::position::Position::new(latitude, longitude).unwrap();
            let back = parse_position(&position.to_string()).unwrap();
            // Printed to a tenth of a minute.
            let half_step = 0.05 / 60.0 + 1e-9;
            assert!((back.latitude() - latitude).abs() <= half_step, "{position}");
            assert!((back.longitude() - longitude).abs() <= half_step, "{position}");
        }
    }

    #[test]
    fn the_letter_says_the_hemisphere_however_it_is_written() {
        for text in ["22.3N 40.8W", "22.3 n, 40.8 w", "22°18.0'N 040°48.0'W", "22 18 N 40 48 W", "22.3N40.8W"]
        {
            let position = parse_position(text).unwrap();
            assert!((position.latitude() - 22.3).abs() < 1e-9, "{text}");
            assert!((position.longitude() + 40.8).abs() < 1e-9, "{text}");
        }
        assert!(parse_position("10 S 170 E").unwrap().latitude() < 0.0);
    }

    #[test]
    fn what_might_mean_something_else_is_refused() {
        let texts =
            ["", "N", "NE", "22.3 40.8", "22.3 N", "40.8 W 22.3 N", "-22.3 N 40.8 W", "22.5 30 N 40 W"];
        for text in
            texts.iter().chain(&["22 N 40 W 5", "nan N 40 W", "1e1 N 40 W", "22 10 20 N 40 W", "É N 1 W"])
        {
            assert!(matches!(parse_position(text), Err(PositionError::Unreadable { .. })), "{text}");
        }
        for text in ["91 N 40 W", "22 60.0 N 40 W", "22 N 181 W"] {
            assert!(matches!(parse_position(text), Err(PositionError::OutOfRange { .. })), "{text}");
        }
        for text in ["22.3", "22.3,", "22.3 N,40", "nan,1", "--1,2", "1,2,3", "91,0", "0,181"] {
            assert!(parse_decimal(text).is_err(), "{text}");
        }
    }
}
