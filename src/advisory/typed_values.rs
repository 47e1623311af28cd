//! The values of a typed-in forecast: times, motions, pressures and reaches from what people write.

use crate::advisory::cursor::Cursor;
use crate::advisory::forecast::{Motion, Quadrants, Reach};
use crate::advisory::words::cut;
use crate::units::bearing::Bearing;
use crate::units::length::{METRES_PER_NAUTICAL_MILE, NauticalMiles};
use crate::units::number::split_unit;
use crate::units::pressure::HectoPascals;
use crate::units::speed::Knots;
use chrono::{DateTime, Datelike, Timelike, Utc};

/// A reach as typed in: one distance all round, or four.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum TypedReach {
    /// "120 n mi": the same in every quadrant.
    AllRound(Quadrants),
    /// "120NE 90SE 60SW 100NW n mi", or "none".
    ByQuadrant(Quadrants),
}

impl TypedReach {
    /// The reach in each quadrant.
    #[must_use]
    pub fn reach(self) -> Reach {
        match self {
            TypedReach::AllRound(quadrants) | TypedReach::ByQuadrant(quadrants) => Reach::Given(quadrants),
        }
    }
}

/// The points of the compass, clockwise from north.
const COMPASS: [&str; 16] =
    ["N", "NNE", "NE", "ENE", "E", "ESE", "SE", "SSE", "S", "SSW", "SW", "WSW", "W", "WNW", "NW", "NNW"];

/// Reads "2026-09-17T06:00Z" or "2026-09-17T03:00:00-03:00" (RFC 3339; the seconds may be left out).
///
/// # Errors
/// A message if it is something else, has no zone, is not on a whole minute, or lies outside the years 1900 to 2199.
pub fn time(text: &str) -> Result<DateTime<Utc>, String> {
    let wrong = || {
        format!(
            "\"{text}\" is not a time with its offset such as \"2026-09-17T06:00Z\" or \"2026-09-17T03:00-03:00\""
        )
    };
    let text = text.trim();
    let has_seconds = text.as_bytes().get(16) == Some(&b':');
    let full = match (has_seconds, text.split_at_checked(16)) {
        (false, Some((minute, offset))) => format!("{minute}:00{offset}"),
        _ => text.to_owned(),
    };
    let instant = DateTime::parse_from_rfc3339(&full).map_err(|_| wrong())?.with_timezone(&Utc);
    let is_whole = instant.second() == 0 && instant.nanosecond() == 0;
    if is_whole && (1900..2200).contains(&instant.year()) { Ok(instant) } else { Err(wrong()) }
}

/// Reads "300 at 12 kt" (the bearing towards which it moves), "WNW at 12 kt" or "stationary".
///
/// # Errors
/// A message if it is something else.
pub fn motion(text: &str) -> Result<Motion, String> {
    let wrong =
        || format!("\"{text}\" is not a motion such as \"300 at 12 kt\", \"WNW at 12 kt\" or \"stationary\"");
    if text.trim().eq_ignore_ascii_case("stationary") {
        return Ok(Motion::Stationary);
    }
    let (towards, speed) = text.split_once(" at ").ok_or_else(wrong)?;
    let towards = towards.trim();
    let point = COMPASS.iter().position(|point| point.eq_ignore_ascii_case(towards));
    let bearing = match point {
        Some(index) => Bearing::wrapped(index as f64 * 22.5),
        None => {
            let degrees = towards.trim_end_matches("degrees").trim_end_matches('°').trim();
            let is_plain = !degrees.is_empty() && degrees.bytes().all(|b| b.is_ascii_digit() || b == b'.');
            let value = degrees.parse().ok().filter(|_| is_plain).ok_or_else(wrong)?;
            Bearing::new(value).map_err(|error| error.to_string())?
        }
    };
    let speed = Knots::parse(speed).map_err(|error| error.to_string())?;
    Ok(if speed > Knots::ZERO { Motion::Towards(bearing, speed) } else { Motion::Stationary })
}

/// Reads "985 hPa" or "985 mb".
///
/// # Errors
/// A message if it is something else or outside 800 to 1100 hPa.
pub fn pressure(text: &str) -> Result<HectoPascals, String> {
    match split_unit(text, "hPa, mb").map_err(|error| error.to_string())? {
        (value, "hPa" | "mb" | "mbar") => HectoPascals::new(value).map_err(|error| error.to_string()),
        _ => Err(format!("\"{text}\" is not a pressure such as \"985 hPa\"")),
    }
}

/// Reads "120 n mi" (all round), "120NE 90SE 60SW 100NW n mi" (each quadrant once) or "none".
///
/// # Errors
/// A message if it is something else.
pub fn reach(text: &str) -> Result<TypedReach, String> {
    if text.trim() == "none" {
        return Ok(TypedReach::ByQuadrant(Quadrants::NONE));
    }
    if let Ok(miles) = NauticalMiles::parse(text) {
        let all = Quadrants { northeast: miles, southeast: miles, southwest: miles, northwest: miles };
        return Ok(TypedReach::AllRound(all));
    }
    let wrong = || {
        format!("\"{text}\" is not a reach such as \"120 n mi\", \"120NE 90SE 60SW 100NW n mi\" or \"none\"")
    };
    let units = [("n mi", 1.0), ("nm", 1.0), ("NM", 1.0), ("km", 1000.0 / METRES_PER_NAUTICAL_MILE)];
    let (four, factor) = units
        .iter()
        .find_map(|(unit, factor)| Some((text.trim().strip_suffix(unit)?, *factor)))
        .ok_or_else(wrong)?;
    let words = cut(four, 0..four.len(), false);
    let mut cursor = Cursor::new(&words, 0);
    let quadrants = cursor.quadrants().filter(|_| cursor.is_done()).ok_or_else(wrong)?;
    let scaled = |miles: NauticalMiles| NauticalMiles::clamped(miles.get() * factor);
    Ok(TypedReach::ByQuadrant(Quadrants {
        northeast: scaled(quadrants.northeast),
        southeast: scaled(quadrants.southeast),
        southwest: scaled(quadrants.southwest),
        northwest: scaled(quadrants.northwest),
    }))
}

#[cfg(test)]
mod tests {
    use super::{Motion, TypedReach, motion, pressure, reach, time};

    #[test]
    fn a_time_needs_its_offset() {
        assert_eq!(time("2026-09-17T03:00-03:00"), time("2026-09-17T06:00:00Z"));
        for text in [
            "",
            "2026-09-17T06:00",
            "2026-09-17",
            "2026-09-17T06:00:30Z",
            "1066-10-14T09:00Z",
            "é026-09-17T06:0Z",
        ] {
            assert!(time(text).is_err(), "{text}");
        }
    }

    #[test]
    fn a_motion_is_a_bearing_or_a_point_of_the_compass_with_a_speed() {
        let Ok(Motion::Towards(bearing, speed)) = motion("WNW at 12 kt") else { panic!("not read") };
        assert!((bearing.get() - 292.5).abs() < 1e-9 && (speed.get() - 12.0).abs() < 1e-9);
        assert_eq!(motion("stationary"), Ok(Motion::Stationary));
        assert_eq!(motion("300 at 0 kt"), Ok(Motion::Stationary));
        for text in ["", "300", "300 at 12", "361 at 12 kt", "nan at 12 kt", "-10 at 12 kt", "up at 12 kt"] {
            assert!(motion(text).is_err(), "{text}");
        }
    }

    #[test]
    fn a_reach_is_one_distance_or_four() {
        assert!(matches!(reach("120 n mi"), Ok(TypedReach::AllRound(_))));
        let Ok(TypedReach::ByQuadrant(four)) = reach("120NE 90SE 60SW 0NW n mi") else { panic!("not read") };
        assert_eq!(
            four.clockwise().map(|miles| miles.to_string()),
            ["120 n mi", "90 n mi", "60 n mi", "0 n mi"]
        );
        let Ok(TypedReach::ByQuadrant(km)) = reach("185.2NE 0SE 0SW 0NW km") else { panic!("not read") };
        assert!((km.northeast.get() - 100.0).abs() < 1e-9);
        for text in [
            "",
            "120",
            "120NE 90SE 60SW n mi",
            "120NE 90SE 60SW 0NW",
            "nan n mi",
            "120NE 90SE 60SW 0NW 5 n mi",
        ] {
            assert!(reach(text).is_err(), "{text}");
        }
    }

    #[test]
    fn a_pressure_needs_its_unit() {
        assert!(pressure("985 hPa").is_ok() && pressure("985 mb").is_ok());
        assert!(pressure("985").is_err() && pressure("29 inHg").is_err() && pressure("20 hPa").is_err());
    }
}
