//! The reader of the tropical cyclone advisories of RSMC Tokyo (WTPQ).
//!
//! Winds are 10-minute means, and radii those of 50 and 30 kt, for the analysis only: 30 kt is not 34, and no forecast
//! radii are invented. Each forecast centre has a circle within which it will lie with the stated chance, which becomes
//! the spread. The text names a day and an hour but no month.

use crate::advisory::choice::Choice;
use crate::advisory::cursor::Cursor;
use crate::advisory::forecast::{
    Advisory, Assumption, ForecastPoint, ProbabilityCircle, Storm, Widening, WindRadii,
};
use crate::advisory::notes::Notes;
use crate::advisory::reach_rule::reach_of;
use crate::advisory::tokyo_body::{TokyoBody, TokyoState, read_tokyo_body};
use crate::advisory::words::Word;
use crate::units::speed::Knots;
use crate::units::wind::Averaging;
use chrono::{DateTime, Datelike, Duration, Utc};

/// A tropical depression has less than 34 kt (the centre's own definition); 30 is the greatest such wind in its steps of
/// 5 kt.
const DEPRESSION_KT: f64 = 30.0;
/// That wind instead of a forecast one: the same factor as for a wind that is kept.
const DEPRESSION_ASSUMED: Widening = Widening { track: 1.0, intensity: 1.5, size: 1.0 };
/// An advisory is taken at most so long before its nominal time (clocks differ) and not a month after it.
const TAKEN_BEFORE: Duration = Duration::hours(1);

/// Reads an advisory; `None` where a finding says why it cannot be used.
#[must_use]
pub fn read_tokyo(words: &[Word], choice: &Choice, notes: &mut Notes) -> Option<Advisory> {
    // The message ends with "=", which may stand right behind its last word.
    let has_end = words.iter().any(|word| word.text.ends_with('='));
    let words: Vec<Word> = words
        .iter()
        .map(|word| Word { text: word.text.trim_end_matches('=').to_owned(), ..word.clone() })
        .collect();
    let storm = storm(&words, notes);
    let TokyoBody { states, motion, pressure } = read_tokyo_body(&words, notes);
    if !has_end {
        let last = words.len().saturating_sub(1);
        let range = Cursor::new(&words, last).range_since(last);
        let found = "the text stops before its end mark \"=\"".to_owned();
        notes.error("advisory-truncated", range, found, "fetch the whole text");
    }
    let now = states.first()?;
    let base = base_time(now, storm.as_ref(), choice, notes);
    let (storm, base) = (storm?, base?);
    let mut assumed = Vec::new();
    let mut circles = Vec::new();
    let points = points(&states, base, &mut circles, &mut assumed, notes);
    if points.len() < 2 && !notes.has_error() {
        let found = "the text gives no forecast, only the analysis".to_owned();
        notes.error("advisory-no-forecast", now.range.clone(), found, "fetch the whole text");
    }
    if notes.has_error() {
        return None;
    }
    Some(Advisory {
        storm,
        issuer: "RSMC TOKYO".to_owned(),
        number: None,
        is_special: false,
        is_corrected: false,
        issued: base,
        base,
        base_position: now.position,
        averaging: Averaging::Minute10,
        accuracy: None,
        motion,
        pressure,
        next_due: None,
        is_last: false,
        points,
        ends: None,
        quoted_track_errors: None,
        circles,
        is_drill: false,
        assumed,
    })
}

/// "NAME TY 2613 DOLPHIN (2613)": class, number within the year, name.
fn storm(words: &[Word], notes: &mut Notes) -> Option<Storm> {
    let mut cursor = Cursor::new(words, 0);
    let is_there = cursor.seek("NAME", words.len()) && cursor.take("NAME");
    let at = cursor.at();
    let class = Some(cursor.peek(0)).filter(|class| matches!(*class, "TD" | "TS" | "STS" | "TY"));
    cursor.skip(usize::from(class.is_some()));
    let number =
        Some(cursor.peek(0)).filter(|text| text.len() == 4 && text.bytes().all(|b| b.is_ascii_digit()));
    cursor.skip(usize::from(number.is_some()));
    let name =
        Some(cursor.peek(0)).filter(|name| !name.is_empty() && !name.starts_with('(') && *name != "ANALYSIS");
    cursor.skip(usize::from(name.is_some()));
    if !is_there || (number.is_none() && name.is_none()) {
        let range = cursor.range_since(at);
        let to_do = "a line such as \"NAME TY 2613 DOLPHIN (2613)\" must stand there: fetch the text again";
        notes.error("advisory-title", range, "no storm is named".to_owned(), to_do);
        return None;
    }
    let id = number.map(|number| format!("T{number}"));
    Some(Storm {
        name: name.map_or_else(|| id.clone().unwrap_or_default(), str::to_owned),
        id,
        class: class.unwrap_or("").to_owned(),
    })
}

/// The time of the analysis, its month from the cycle that was chosen or from the time at which the text was taken.
fn base_time(
    now: &TokyoState,
    storm: Option<&Storm>,
    choice: &Choice,
    notes: &mut Notes,
) -> Option<DateTime<Utc>> {
    let time = now.valid?;
    let base = match (choice.cycle, choice.taken) {
        (Some(cycle), _) => time.nearest_to(cycle).filter(|base| *base == cycle),
        (None, Some(taken)) => {
            let latest = taken + TAKEN_BEFORE;
            // The nearest such day may be still to come: then the month before is meant.
            time.nearest_to(latest)
                .filter(|base| *base <= latest)
                .or_else(|| time.nearest_to(latest - Duration::days(20)).filter(|base| *base <= latest))
        }
        (None, None) => None,
    };
    let Some(base) = base else {
        let found = match choice.cycle {
            Some(_) => "the chosen cycle is not the time of the analysis",
            None => "this product names no month and no year",
        };
        let to_do = "choose the time of its analysis as the cycle, as 2026080800";
        notes.error("advisory-issue-time", now.range.clone(), found.to_owned(), to_do);
        return None;
    };
    let season = storm.and_then(|storm| storm.id.as_deref()?.get(1..3)?.parse::<i32>().ok());
    // A storm of the end of one year may live into the next.
    if let Some(season) = season.filter(|season| !(0..=1).contains(&(base.year() - 2000 - season))) {
        let found = format!(
            "the storm's number is of 20{season:02}, and the text was taken for one of {}",
            base.year()
        );
        notes.warning("advisory-season", now.range.clone(), found, "check the month and the year");
    }
    Some(base)
}

fn points(
    states: &[TokyoState],
    base: DateTime<Utc>,
    circles: &mut Vec<ProbabilityCircle>,
    assumed: &mut Vec<Assumption>,
    notes: &mut Notes,
) -> Vec<ForecastPoint> {
    let mut points: Vec<ForecastPoint> = Vec::new();
    let mut depressions = 0;
    for state in states {
        let valid = base + Duration::hours(state.lead_h);
        let says_so = state.valid.is_some_and(|time| time.nearest_to(valid) == Some(valid));
        if !says_so || points.last().is_some_and(|last| last.valid >= valid) {
            let found = format!(
                "the time in \"{}\" is not {} h after the analysis",
                notes.quote(state.range.clone()),
                state.lead_h
            );
            notes.error("advisory-valid-time", state.range.clone(), found, "fetch the text again");
            continue;
        }
        let is_depression = state.qualifier.contains("DEPRESSION");
        depressions += usize::from(state.wind.is_none() && is_depression);
        let wind = state.wind.or_else(|| Knots::new(DEPRESSION_KT).ok().filter(|_| is_depression));
        let (Some(wind), Some(position)) = (wind, state.position) else {
            if state.position.is_some() {
                let found = format!("no wind follows \"{}\"", notes.quote(state.range.clone()));
                let to_do = "a line such as \"MXWD 080KT\" is missing: fetch the text again";
                notes.error("advisory-wind", state.range.clone(), found, to_do);
            }
            continue;
        };
        if let Some((radius, chance)) = state.circle {
            circles.push(ProbabilityCircle { valid, radius, chance });
        }
        let given = |speed, radii| reach_of(speed, wind, radii).0;
        points.push(ForecastPoint {
            valid,
            position,
            max_wind: wind,
            gust: state.gust,
            radii: WindRadii {
                gale: given(Knots::GALE, None),
                storm: given(Knots::STORM, state.storm_radii),
                hurricane: given(Knots::HURRICANE, None),
            },
            seas: None,
            qualifier: state.qualifier.clone(),
            place: notes.place(state.range.clone()),
        });
    }
    if depressions > 0 {
        let what = format!("greatest wind of a tropical depression, not given: {DEPRESSION_KT:.0} kt taken");
        assumed.push(Assumption { what, widens: DEPRESSION_ASSUMED });
    }
    points
}
