//! Events written as people write them: the text of an events.toml that reads back the same.

use crate::record::event::Event;
use crate::store::form::{Form, in_utc};
use crate::time::clock::PortClock;
use crate::time::moment::Moment;
use chrono::{DateTime, Timelike, Utc};
use std::fmt::Write;
use toml::{Table, Value};

/// An event cannot be put into TOML, which a sound one always can.
#[derive(Debug, thiserror::Error)]
#[error("event {number} cannot be written as TOML: {error}")]
pub struct WriteError {
    /// Its number.
    number: usize,
    /// What the writer says.
    error: toml::ser::Error,
}

/// The text of an events.toml that holds `events` in the order of their numbers, which are 1, 2, 3 ...
///
/// # Errors
/// [`WriteError`].
pub fn events_toml(events: &[Event], clock: &PortClock, title: &str) -> Result<String, WriteError> {
    let mut sorted: Vec<&Event> = events.iter().collect();
    sorted.sort_by_key(|event| event.number);
    let mut text = String::new();
    for line in title.lines() {
        let _ = writeln!(text, "# {line}");
    }
    for event in sorted {
        let written = event_toml(event, clock).map_err(|error| WriteError { number: event.number, error })?;
        let _ = write!(text, "\n[[event]]\n{written}");
    }
    Ok(text)
}

/// One event, without its `[[event]]`.
fn event_toml(event: &Event, clock: &PortClock) -> Result<String, toml::ser::Error> {
    let mut table = Table::try_from(Form::of(event, None, &|time| local(clock, time)))?;
    let what = table.remove("what");
    let mut text = String::new();
    for key in ["at", "by", "name", "for", "reason", "awaits_second"] {
        if let Some(value) = table.get(key) {
            let _ = writeln!(text, "{key} = {value}");
        }
    }
    if let Some(Value::Table(what)) = what {
        for (key, value) in what {
            let _ = writeln!(text, "{key} = {value}");
        }
    }
    Ok(text)
}

/// A time on the port's clock with its offset, which no change of clocks makes unclear; in UTC if it has seconds.
fn local(clock: &PortClock, time: DateTime<Utc>) -> String {
    if time.second() != 0 || time.nanosecond() != 0 {
        return in_utc(time);
    }
    let at = Moment::at_or_before(time);
    let east = clock.offset_at(at).east.get();
    let sign = if east < 0 { '-' } else { '+' };
    let (hours, minutes) = (east.abs() / 60, east.abs() % 60);
    format!("{}{sign}{hours:02}:{minutes:02}", clock.local(at).format("%Y-%m-%dT%H:%M"))
}
