//! The reader of United States Forecast/Advisory texts (TCM), 1991 to today.
//!
//! Format: United States National Weather Service instruction 10-601 and the texts themselves. Winds are 1-minute means
//! at 10 m over open water; a radius is the greatest reach anywhere in its quadrant.

use crate::advisory::cursor::Cursor;
use crate::advisory::forecast::{Advisory, Ending, ForecastPoint, Quadrants, Reach, WindRadii};
use crate::advisory::marine_body::read_body;
use crate::advisory::marine_head::{Head, Title, read_head};
use crate::advisory::marine_state::{Body, State};
use crate::advisory::notes::Notes;
use crate::advisory::reach_rule::{Oddity, reach_of};
use crate::advisory::words::Word;
use crate::units::speed::Knots;
use crate::units::wind::Averaging;
use chrono::{DateTime, Duration, Timelike, Utc};
use std::ops::Range;

/// The centre's time may differ from the issue time by this much: half the time between routine advisories.
const CENTRE_WITHIN: Duration = Duration::hours(3);
/// No office forecasts farther (168 h today); a later time is a slip in the text.
const FORECAST_WITHIN: Duration = Duration::hours(240);
/// Our choice: a track cut short by a slip is still worth planning on if it reaches a day ahead.
const CUT_USABLE_FROM: Duration = Duration::hours(24);
/// Forecast times without month are looked for around the middle of a five-day forecast.
const FORECAST_MIDDLE: Duration = Duration::hours(60);

/// Reads the advisory whose title stands at `title`; `None` where a finding says why it cannot be used.
#[must_use]
pub fn read_marine(words: &[Word], title: Title, notes: &mut Notes) -> Option<Advisory> {
    let head = read_head(words, title, notes);
    // The body is read without a head too, so that all faults come out at once.
    let body_from = head.as_ref().map_or(title.number_at, |head| head.end);
    let body = read_body(words, body_from, notes);
    let head = head?;
    let track = track(&head, &body, notes)?;
    check_length(&head, &body, &track, notes);
    let base = base_time(&head, &body, &track);
    let text_base = body.base.filter(|(time, _)| time.nearest_to(head.issued) == Some(base));
    Some(Advisory {
        issuer: head.issuer,
        number: Some(head.number),
        is_special: head.is_special,
        is_corrected: head.is_corrected,
        issued: head.issued,
        base,
        base_position: text_base.map(|(_, position)| position),
        averaging: Averaging::Minute1,
        accuracy: body.accuracy,
        motion: body.motion,
        pressure: body.pressure,
        next_due: body.next_due.and_then(|time| time.nearest_to(head.issued)),
        is_last: body.is_last,
        points: track.points,
        ends: track.ends,
        quoted_track_errors: body.quoted_track_errors,
        circles: Vec::new(),
        is_drill: false,
        assumed: Vec::new(),
        storm: head.storm,
    })
}

/// The states with their full times, and how they end.
struct Track {
    points: Vec<ForecastPoint>,
    ends: Option<Ending>,
}

fn track(head: &Head, body: &Body, notes: &mut Notes) -> Option<Track> {
    let (present, forecasts) = body.states.split_first()?;
    let now = present.valid.nearest_to(head.issued);
    let Some(now) = now.filter(|now| (*now - head.issued).abs() <= CENTRE_WITHIN) else {
        let found = format!(
            "the centre's time in \"{}\" is not near the issue time, {}",
            notes.quote(present.range.clone()),
            head.issued.format("%Y-%m-%d %H:%MZ")
        );
        let to_do = "one of the two is wrong: fetch the text again";
        notes.error("advisory-centre-time", present.range.clone(), found, to_do);
        return None;
    };
    let mut points = vec![point(present, now, notes)?];
    let mut ends = None;
    for state in forecasts {
        if let Some(end) = &ends {
            after_the_end(state, end, notes);
            continue;
        }
        let before = points.last().map_or(now, |last| last.valid);
        let valid = state.valid.nearest_to(head.issued + FORECAST_MIDDLE);
        match valid.filter(|valid| *valid > before && *valid - head.issued <= FORECAST_WITHIN) {
            None => {
                ends = Some(Ending::CutShort(before));
                time_does_not_rise(state, before, notes);
            }
            Some(valid) => match ending(state, valid, notes) {
                Some(end) => ends = Some(end),
                None => points.extend(point(state, valid, notes)),
            },
        }
    }
    Some(Track { points, ends })
}

fn time_does_not_rise(state: &State, before: DateTime<Utc>, notes: &mut Notes) {
    let found = format!(
        "the time in \"{}\" does not follow the one before it, {}",
        notes.quote(state.range.clone()),
        before.format("%Y-%m-%d %H:%MZ")
    );
    let to_do = "the forecast is cut before it; ask the office, or fetch the text again";
    notes.warning("advisory-times-not-rising", state.range.clone(), found, to_do);
}

fn after_the_end(state: &State, end: &Ending, notes: &mut Notes) {
    if matches!(end, Ending::CutShort(_)) {
        return;
    }
    let found = format!("\"{}\" follows the end of the storm", notes.quote(state.range.clone()));
    let to_do = "it is left out; ask the office";
    notes.warning("advisory-after-the-end", state.range.clone(), found, to_do);
}

/// What ends the track: a time without a position and a wind.
fn ending(state: &State, valid: DateTime<Utc>, notes: &mut Notes) -> Option<Ending> {
    let says = |what: &str| state.qualifier.split(['.', ' ']).any(|word| word == what);
    if state.position.is_some() && (state.wind.is_some() || !says("DISSIPATED")) {
        return None;
    }
    if says("DISSIPATED") {
        Some(Ending::Dissipated(valid))
    } else if says("ABSORBED") {
        Some(Ending::Absorbed(valid))
    } else {
        let found = format!("no position, but \"{}\"", state.qualifier);
        let to_do = "the track ends before it; whether the storm does is for you to find out";
        notes.warning("advisory-track-ends", state.range.clone(), found, to_do);
        Some(Ending::CutShort(valid))
    }
}

/// One state as a point; `None` (with a finding) if its wind is missing.
fn point(state: &State, valid: DateTime<Utc>, notes: &mut Notes) -> Option<ForecastPoint> {
    let position = state.position?;
    let Some(wind) = state.wind else {
        if state.is_damaged {
            return None;
        }
        let found = format!("no wind follows \"{}\"", notes.quote(state.range.clone()));
        let to_do = "a line such as \"MAX WIND  45 KT...GUSTS  55 KT.\" is missing: fetch the text again";
        notes.error("advisory-wind", state.range.clone(), found, to_do);
        return None;
    };
    let [gale, storm, hurricane] = [0, 1, 2].map(|index| {
        let given = state.radii.get(index).cloned().flatten();
        let speed = [Knots::GALE, Knots::STORM, Knots::HURRICANE].get(index).copied().unwrap_or(Knots::GALE);
        reach(speed, wind, given, notes)
    });
    Some(ForecastPoint {
        valid,
        position,
        max_wind: wind,
        gust: state.gust,
        radii: WindRadii { gale, storm, hurricane },
        seas: state.seas,
        qualifier: state.qualifier.clone(),
        place: notes.place(state.range.clone()),
    })
}

/// The reach of one wind by [`reach_of`]; what is odd is noted.
fn reach(speed: Knots, wind: Knots, given: Option<(Quadrants, Range<usize>)>, notes: &mut Notes) -> Reach {
    let (reach, oddity) = reach_of(speed, wind, given.as_ref().map(|(quadrants, _)| *quadrants));
    let Some((oddity, (_, range))) = oddity.zip(given) else { return reach };
    let found = format!("\"{}\" though the greatest wind is {wind}", notes.quote(range.clone()));
    match oddity {
        Oddity::ZeroThoughItBlows => {
            notes.warning("advisory-zero-radii", range, found, "the reach is taken as not given");
        }
        Oddity::ReachesThoughTooWeak => {
            notes.warning("advisory-radii-above-wind", range, found, "the radii are used; ask the office");
        }
    }
    reach
}

/// When the office's forecast hours begin.
///
/// The text's own "AT 05/1800Z CENTER WAS"; else 12 h before the first forecast time, as all of them count from it; else
/// the last of 00, 06, 12 and 18 UTC.
fn base_time(head: &Head, body: &Body, track: &Track) -> DateTime<Utc> {
    let is_near = |base: &DateTime<Utc>| *base <= head.issued && head.issued - *base <= Duration::hours(12);
    let stated = body.base.and_then(|(time, _)| time.nearest_to(head.issued)).filter(is_near);
    let first = track.points.get(1).map(|point| point.valid - Duration::hours(12)).filter(is_near);
    stated.or(first).unwrap_or_else(|| {
        let past = i64::from(head.issued.hour() % 6) * 60 + i64::from(head.issued.minute());
        head.issued - Duration::minutes(past)
    })
}

/// A forecast that stops too early to plan on is an error; a storm that ends is not.
fn check_length(head: &Head, body: &Body, track: &Track, notes: &mut Notes) {
    let last = track.points.last().map_or(head.issued, |point| point.valid);
    match &track.ends {
        Some(Ending::Dissipated(_) | Ending::Absorbed(_)) => {}
        Some(Ending::CutShort(_)) if last - head.issued < CUT_USABLE_FROM => {
            let found = format!("what is left of the forecast ends at {}", last.format("%Y-%m-%d %H:%MZ"));
            let to_do = "less than a day ahead is no forecast to plan on: fetch the text again or type it in";
            notes.error("advisory-cut-too-short", head.title.clone(), found, to_do);
        }
        Some(Ending::CutShort(_)) => {}
        // Of remnants there may be nothing to forecast.
        None if track.points.len() < 2 && !body.is_last && !head.storm.class.contains("REMNANT") => {
            let found = "the text gives no forecast, only the present state".to_owned();
            notes.error("advisory-no-forecast", head.title.clone(), found, "fetch the whole text");
        }
        None => {}
    }
}

/// Where the words of a second advisory begin in a text that should hold one.
#[must_use]
pub fn second_centre(words: &[Word], from: usize) -> Option<Range<usize>> {
    let mut cursor = Cursor::new(words, from);
    let mut found = 0;
    while !cursor.is_done() {
        let at = cursor.at();
        if cursor.take_any(&["REPEAT ... CENTER LOCATED NEAR", "REPEAT CENTER LOCATED NEAR"]) {
            continue;
        }
        if cursor.take("CENTER LOCATED NEAR") {
            found += 1;
            if found == 2 {
                return Some(cursor.range_since(at));
            }
        } else {
            cursor.skip(1);
        }
    }
    None
}
