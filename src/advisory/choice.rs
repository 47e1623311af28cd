//! What picks one forecast out of a file that holds several: a deck, a list of best tracks, a message about two storms.

use chrono::{DateTime, Utc};
use std::fmt;

/// What somebody asked for. Nothing in it is needed for a file that holds one forecast with its full date.
#[derive(Clone, Debug, Default, PartialEq, Eq, PartialOrd, Ord)]
pub struct Choice {
    /// A storm by its id ("AL062018", "AL06", "22W") or its name.
    pub storm: Option<String>,
    /// The technique of a deck: "OFCL" by default.
    pub technique: Option<String>,
    /// The base time of the forecast; of a best track the time at which the drill begins.
    pub cycle: Option<DateTime<Utc>>,
    /// The time at which the file was taken: forecasts with a later base time did not exist yet, and a product that
    /// names no month is of the month before it.
    pub taken: Option<DateTime<Utc>>,
}

impl Choice {
    /// Nothing chosen but the time at which the file was taken.
    #[must_use]
    pub fn taken_at(taken: DateTime<Utc>) -> Choice {
        Choice { taken: Some(taken), ..Choice::default() }
    }

    /// Whether nothing was chosen beyond the file itself.
    #[must_use]
    pub fn is_plain(&self) -> bool {
        self.storm.is_none() && self.technique.is_none() && self.cycle.is_none()
    }
}

/// "AL06 OFCL 2018083012": what was chosen, in the order in which it narrows down.
impl fmt::Display for Choice {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let cycle = self.cycle.map(cycle_text);
        let parts = [self.storm.as_deref(), self.technique.as_deref(), cycle.as_deref()];
        f.write_str(&parts.into_iter().flatten().collect::<Vec<&str>>().join(" "))
    }
}

/// "2018083012": a base time as decks write it.
#[must_use]
pub fn cycle_text(cycle: DateTime<Utc>) -> String {
    cycle.format("%Y%m%d%H").to_string()
}

/// Reads "2018083012" as 30 August 2018, 12 UTC.
///
/// ```
/// use snugdown::advisory::choice::parse_cycle;
/// assert_eq!(parse_cycle("2018083012").unwrap().to_rfc3339(), "2018-08-30T12:00:00+00:00");
/// assert!(parse_cycle("2018-08-30").is_none());
/// assert!(parse_cycle("2018083024").is_none());
/// ```
#[must_use]
pub fn parse_cycle(text: &str) -> Option<DateTime<Utc>> {
    if text.len() != 10 || !text.bytes().all(|byte| byte.is_ascii_digit()) {
        return None;
    }
    let part = |from: usize, to: usize| text.get(from..to)?.parse::<u32>().ok();
    let year = i32::try_from(part(0, 4)?).ok()?;
    crate::advisory::cursor::instant(year, part(4, 6)?, part(6, 8)?, part(8, 10)?, 0)
}

/// Whether a storm is the one that somebody wanted: by its id ("AL062018"), the id without its year ("AL06", "06L") or
/// its name; capitals or not.
#[must_use]
pub fn matches_storm(wanted: &str, id: &str, name: &str) -> bool {
    let wanted = wanted.trim().to_uppercase();
    let short = id.get(..4).unwrap_or(id);
    let by_letter = match wanted.split_at_checked(2) {
        Some((number, letter)) if letter.len() == 1 => {
            basin_of_letter(letter).is_some_and(|basin| short == format!("{basin}{number}"))
        }
        _ => false,
    };
    wanted == id || wanted == short || by_letter || (!name.is_empty() && wanted == name.to_uppercase())
}

/// The basin of a storm's letter, as in "22W": L Atlantic, E and C Pacific, W west Pacific, A and B north Indian Ocean, S
/// and P southern, Q south Atlantic.
#[must_use]
pub fn basin_of_letter(letter: &str) -> Option<&'static str> {
    match letter {
        "L" => Some("AL"),
        "E" => Some("EP"),
        "C" => Some("CP"),
        "W" => Some("WP"),
        "A" | "B" => Some("IO"),
        "S" | "P" => Some("SH"),
        "Q" => Some("SL"),
        _ => None,
    }
}

/// At most this many things are listed in a message; a file of best tracks holds two thousand storms.
const LISTED: usize = 12;

/// "a, b and 3 more".
#[must_use]
pub fn listed(names: &[String]) -> String {
    let shown = names.iter().take(LISTED).map(String::as_str).collect::<Vec<&str>>().join(", ");
    match names.len().saturating_sub(LISTED) {
        0 => shown,
        more => format!("{shown} and {more} more"),
    }
}
