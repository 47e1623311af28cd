//! One row of the official odds: a place, a wind, and for each period the chance of onset and, in brackets, of the wind
//! having come.

use crate::geo::position::Position;
use crate::units::speed::Knots;

/// The official chances of one wind at one place.
#[derive(Clone, Debug, PartialEq)]
pub struct OfficialRow {
    /// The listed place as written: "ACAPULCO", "15N 100W", "GFMX 290N 850W".
    pub place: String,
    /// Where it is, for a point of the sea that is named by its position.
    pub position: Option<Position>,
    /// The wind, a 1-minute mean.
    pub wind: Knots,
    /// The chance that it begins in each period, in per cent.
    pub onset: Vec<Percent>,
    /// The chance that it has come by the end of each period, in per cent; never falling.
    pub by_then: Vec<Percent>,
}

/// An official chance: whole per cent, or less than 1.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Percent {
    /// "X": less than 1 %.
    BelowOne,
    /// So many per cent, 1 to 100.
    Of(u8),
}

impl Percent {
    /// As a number of per cent, less than 1 as 0: for comparing.
    #[must_use]
    pub fn at_least(self) -> u8 {
        match self {
            Percent::BelowOne => 0,
            Percent::Of(percent) => percent,
        }
    }
}

/// Chances are rounded each for itself: a sum of two may be off by so much, and by as much again for each "X".
const ROUNDING: i32 = 1;

/// Reads a row of so many `periods`; a row without a name goes on with the place of the row `before`.
///
/// # Errors
/// What is wrong with it, in words.
pub fn read_official_row(
    line: &str,
    periods: usize,
    before: Option<&OfficialRow>,
) -> Result<OfficialRow, String> {
    let spaced = line.replace('(', " ( ").replace(')', " ) ");
    let words: Vec<&str> = spaced.split_whitespace().collect();
    // The wind is the last word before the chances: as many as periods, all but the first with one in brackets.
    let figures = periods + 3 * (periods - 1);
    let (name, figures) = words
        .len()
        .checked_sub(figures)
        .and_then(|at| words.split_at_checked(at))
        .ok_or("it has too few chances")?;
    let (wind, name) = name.split_last().ok_or("it has no wind")?;
    let wind = match *wind {
        "34" => Knots::GALE,
        "50" => Knots::STORM,
        "64" => Knots::HURRICANE,
        other => return Err(format!("\"{other}\" is none of 34, 50 and 64 kt")),
    };
    let place = match (name.is_empty(), before) {
        (false, _) => name.join(" "),
        (true, Some(before)) => before.place.clone(),
        (true, None) => return Err("it names no place".to_owned()),
    };
    let mut figures = figures.iter().copied();
    let first = percent(figures.next())?;
    let (mut onset, mut by_then) = (vec![first], vec![first]);
    for _ in 1..periods {
        onset.push(percent(figures.next())?);
        let is_open = figures.next() == Some("(");
        by_then.push(percent(figures.next())?);
        if !is_open || figures.next() != Some(")") {
            return Err("a chance lacks its brackets".to_owned());
        }
    }
    check(&onset, &by_then)?;
    Ok(OfficialRow { position: sea_point(&place), place, wind, onset, by_then })
}

fn percent(word: Option<&str>) -> Result<Percent, String> {
    match word {
        Some("X") => Ok(Percent::BelowOne),
        Some(digits) if digits.len() <= 3 && digits.bytes().all(|byte| byte.is_ascii_digit()) => digits
            .parse::<u8>()
            .ok()
            .filter(|percent| *percent <= 100)
            .map(|percent| if percent == 0 { Percent::BelowOne } else { Percent::Of(percent) })
            .ok_or_else(|| format!("\"{digits}\" is no chance in per cent")),
        Some(other) => Err(format!("\"{other}\" is no chance in per cent")),
        None => Err("it has too few chances".to_owned()),
    }
}

/// The chance by then grows by the chance of onset, within rounding; a digit that slipped shows here.
fn check(onset: &[Percent], by_then: &[Percent]) -> Result<(), String> {
    for ((before, now), onset) in by_then.iter().zip(by_then.iter().skip(1)).zip(onset.iter().skip(1)) {
        let sum = i32::from(before.at_least()) + i32::from(onset.at_least());
        let now = i32::from(now.at_least());
        let unknown = [before, onset].iter().filter(|percent| ***percent == Percent::BelowOne).count() as i32;
        if (now - sum).abs() > ROUNDING + unknown || now < i32::from(before.at_least()) {
            return Err(format!(
                "{} % by then does not follow from {} % before and {} % of onset",
                now,
                before.at_least(),
                onset.at_least()
            ));
        }
    }
    Ok(())
}

/// The position in the name of a point of the sea: "15N 100W" in degrees, "GFMX 290N 850W" in tenths of a degree.
#[must_use]
pub fn sea_point(place: &str) -> Option<Position> {
    let words: Vec<&str> = place.split_whitespace().collect();
    let [.., latitude, longitude] = words[..] else { return None };
    let part = |word: &str, plus: char, minus: char| {
        let sign = if word.ends_with(plus) { 1.0 } else { -1.0 };
        let digits = word.strip_suffix([plus, minus])?;
        let is_plain = (1..=4).contains(&digits.len()) && digits.bytes().all(|byte| byte.is_ascii_digit());
        is_plain.then(|| digits.parse::<f64>().ok()).flatten().map(|value| (sign * value, digits.len()))
    };
    let ((latitude, in_latitude), (longitude, in_longitude)) =
        (part(latitude, 'N', 'S')?, part(longitude, 'E', 'W')?);
    // Three figures of latitude, or four of longitude, cannot be whole degrees.
    let scale = if in_latitude == 3 || in_longitude == 4 { 10.0 } else { 1.0 };
    Position::new(latitude / scale, longitude / scale).ok()
}

#[cfg(test)]
mod tests {
    use super::{Percent, read_official_row, sea_point};

    #[test]
    fn a_row_is_read_with_its_brackets_however_they_stand() {
        // As issued on 23 September 2024, text 6 of EP102024.
        let row = read_official_row(
            "ACAPULCO       34  2  11(13)   4(17)   X(17)   X(17)   X(17)   X(17)",
            7,
            None,
        )
        .unwrap();
        assert_eq!(row.place, "ACAPULCO");
        let by_then: Vec<u8> = row.by_then.iter().map(|percent| percent.at_least()).collect();
        assert_eq!(by_then, [2, 13, 17, 17, 17, 17, 17]);
        assert_eq!((row.onset[1], row.onset[3]), (Percent::Of(11), Percent::BelowOne));
        let low = read_official_row(
            "15N 95W        34  X   2( 2)   1( 3)   X( 3)   X( 3)   X( 3)   X( 3)",
            7,
            None,
        )
        .unwrap();
        assert_eq!((low.place.as_str(), low.by_then[0]), ("15N 95W", Percent::BelowOne));
        let next = read_official_row(
            "               50  X   X( X)   X( X)   1( 1)   1( 2)   1( 3)   X( 3)",
            7,
            Some(&low),
        )
        .unwrap();
        assert_eq!(next.place, "15N 95W");
    }

    #[test]
    fn a_slipped_digit_and_a_lost_column_are_noticed() {
        for damaged in [
            "ACAPULCO       34  2  11(18)   4(17)   X(17)   X(17)   X(17)   X(17)",
            "ACAPULCO       34  2  11(13)   4(17)   X(17)   X(17)   X(17)",
            "ACAPULCO       35  2  11(13)   4(17)   X(17)   X(17)   X(17)   X(17)",
            "ACAPULCO       34  2  11(13)   4(17)   X(17)   X(17)   X(17)   X(7)",
            "               34  2  11(13)   4(17)   X(17)   X(17)   X(17)   X(17)",
            "ACAPULCO       34  2  11 13    4(17)   X(17)   X(17)   X(17)   X(17)",
            "34",
            "",
        ] {
            assert!(read_official_row(damaged, 7, None).is_err(), "{damaged}");
        }
    }

    #[test]
    fn points_of_the_sea_are_known_by_their_names() {
        let at = |name: &str| sea_point(name).map(|point| (point.latitude(), point.longitude()));
        assert_eq!(at("GFMX 290N 850W"), Some((29.0, -85.0)));
        assert_eq!(at("15N 100W"), Some((15.0, -100.0)));
        assert_eq!(at("20N 155W"), Some((20.0, -155.0)));
        assert_eq!(at("P MALDONADO"), None);
    }
}
