//! What an event that takes an advisory says: the file, and what picks a forecast out of a file that holds several.

use crate::finding::table::{Item, Keys};
use crate::record::telling::{file_digest, file_name};
use chrono::{DateTime, NaiveDateTime, Utc};

/// An advisory as it was taken.
#[derive(Clone, Debug, Default, PartialEq, Eq, PartialOrd, Ord)]
pub struct Taking {
    /// The file within the port's folder.
    pub file: String,
    /// The storm, for a file that holds several.
    pub storm: Option<String>,
    /// The technique, for a deck.
    pub technique: Option<String>,
    /// The base time, for a deck; where a drill begins, for a best track.
    pub cycle: Option<DateTime<Utc>>,
    /// The SHA-256 of its bytes in hexadecimal digits; empty if not said.
    pub digest: String,
    /// By order this advisory is planned on though it is not from the port's official source.
    pub by_order: bool,
}

impl Taking {
    /// A file that holds one forecast.
    #[must_use]
    pub fn of(file: &str) -> Taking {
        Taking { file: file.to_owned(), ..Taking::default() }
    }

    /// What tells it from other forecasts of the same port, and what it is called: the file, and what was picked from it.
    #[must_use]
    pub fn key(&self) -> String {
        let cycle = self.cycle.map(|cycle| cycle.format("%Y%m%d%H").to_string());
        let picks = [self.storm.as_deref(), self.technique.as_deref(), cycle.as_deref()];
        let picks: Vec<&str> = picks.into_iter().flatten().collect();
        if picks.is_empty() { self.file.clone() } else { format!("{} ({})", self.file, picks.join(" ")) }
    }
}

/// Reads what an event says of the advisory that it takes.
#[must_use]
pub fn read_taking(keys: &mut Keys<'_>) -> Option<Taking> {
    let file = keys.required("file").and_then(|item| file_name(&item));
    let storm = keys.optional("storm").map(|item| word(&item));
    let technique = keys.optional("technique").map(|item| word(&item));
    let cycle = keys.optional("cycle").map(|item| cycle(&item));
    let digest = keys.optional("sha256").map_or(Some(String::new()), |item| file_digest(&item));
    let by_order = keys.optional("by_order").map(|item| item.flag());
    Some(Taking {
        file: file?,
        storm: all_or_none(storm)?,
        technique: all_or_none(technique)?,
        cycle: all_or_none(cycle)?,
        digest: digest?,
        by_order: by_order.unwrap_or(Some(false))?,
    })
}

/// A key that is not there is nothing wrong; one that is there and faulty leaves the event out.
fn all_or_none<T>(read: Option<Option<T>>) -> Option<Option<T>> {
    match read {
        None => Some(None),
        Some(Some(value)) => Some(Some(value)),
        Some(None) => None,
    }
}

/// A short name of letters and digits, in capitals.
fn word(item: &Item<'_>) -> Option<String> {
    let text = item.text()?.trim().to_uppercase();
    let is_word =
        (1..=20).contains(&text.chars().count()) && text.chars().all(|c| c.is_alphanumeric() || c == '-');
    if !is_word {
        item.bad_value(
            "this cannot be a storm or a technique",
            "letters and digits, as in \"AL062018\" or \"JTWC\"",
        );
        return None;
    }
    Some(text)
}

/// "2018083012".
fn cycle(item: &Item<'_>) -> Option<DateTime<Utc>> {
    let text = item.text()?;
    let is_digits = text.len() == 10 && text.bytes().all(|byte| byte.is_ascii_digit());
    let time = NaiveDateTime::parse_from_str(&format!("{text}00"), "%Y%m%d%H%M").ok().filter(|_| is_digits);
    if time.is_none() {
        item.bad_value("this is no base time", "year, month, day and hour in UTC, as in \"2018083012\"");
    }
    time.map(|time| time.and_utc())
}
