//! What time it is: as asked, as the port's exercise says, or by the system clock, which is read nowhere else.

use crate::cli::exit::Failure;
use crate::time::clock::PortClock;
use crate::time::moment::{Minutes, Moment};
use chrono::{DateTime, Utc};

/// Now for a port: `--now` if it was given, else the exercise clock of the port, else the system clock.
///
/// # Errors
/// [`Failure::Usage`] if the text of `--now` gives no instant.
pub fn port_now(
    asked: Option<&str>,
    clock: &PortClock,
    exercise: Option<DateTime<Utc>>,
) -> Result<Moment, Failure> {
    match (asked, exercise) {
        (Some(text), _) => port_time("--now", text, clock),
        (None, Some(time)) => Ok(Moment::at_or_after(time)),
        (None, None) => Ok(Moment::at_or_after(system_time())),
    }
}

/// A time given to an option: RFC 3339, or local time of the port.
///
/// # Errors
/// [`Failure::Usage`] if the text gives no instant, or two.
pub fn port_time(option: &str, text: &str, clock: &PortClock) -> Result<Moment, Failure> {
    let time = clock.read(text).map_err(|error| Failure::Usage(format!("{option}: {error}")))?;
    Ok(Moment::at_or_after(time))
}

/// A time given where no port says which local time is meant: RFC 3339 with its zone.
///
/// # Errors
/// [`Failure::Usage`] if the text gives no instant, or depends on a zone.
pub fn zoned_time(option: &str, text: &str) -> Result<Moment, Failure> {
    let in_utc = port_time(option, text, &PortClock::utc())?;
    let elsewhere = PortClock::with_offset(Minutes::hours(1)).ok().and_then(|clock| clock.read(text).ok());
    // A text that names its zone means the same everywhere.
    if elsewhere.map(Moment::at_or_after) == Some(in_utc) {
        return Ok(in_utc);
    }
    Err(Failure::Usage(format!(
        "{option}: \"{text}\" does not name its zone, and a single forecast has none; write 2026-09-17T09:20Z"
    )))
}

/// When something is written down: the system clock, to the second.
#[must_use]
pub fn wall_time() -> DateTime<Utc> {
    let now = system_time();
    DateTime::from_timestamp(now.timestamp(), 0).unwrap_or(now)
}

#[expect(clippy::disallowed_methods, reason = "this is the one place where the command line reads the clock")]
fn system_time() -> DateTime<Utc> {
    Utc::now()
}

#[cfg(test)]
mod tests {
    use super::{port_now, zoned_time};
    use crate::time::clock::PortClock;

    #[test]
    fn a_time_asked_for_wins_over_the_exercise_clock_and_that_over_the_system_clock() {
        let clock = PortClock::of("Etc/GMT+3").unwrap();
        let exercise = clock.read("2026-09-17 06:20").unwrap();
        let asked = port_now(Some("2026-09-17 07:00"), &clock, Some(exercise)).unwrap();
        assert_eq!(asked.to_string(), "2026-09-17T10:00Z");
        assert_eq!(port_now(None, &clock, Some(exercise)).unwrap().to_string(), "2026-09-17T09:20Z");
    }

    #[test]
    fn without_a_port_a_local_time_is_refused() {
        assert!(zoned_time("--now", "2026-09-17 06:20").is_err());
        assert_eq!(zoned_time("--now", "2026-09-17T06:20-03:00").unwrap().to_string(), "2026-09-17T09:20Z");
    }
}
