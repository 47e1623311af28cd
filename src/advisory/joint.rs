//! The reader of the joint typhoon warning centre's warning texts (WTPN, WTIO, WTXS).
//!
//! Winds are 1-minute means over open water. The time of the warning position is the base time; the text is sent about
//! three hours later, and its forecast hours count from the base. Month and year stand in the remarks only, and nowhere
//! in some texts. A message may hold two storms.

use crate::advisory::choice::{Choice, basin_of_letter, listed, matches_storm};
use crate::advisory::cursor::{Cursor, DayTime, instant};
use crate::advisory::deck_rows::season;
use crate::advisory::forecast::{Advisory, Ending, ForecastPoint, Reach, Storm, WindRadii};
use crate::advisory::joint_body::{JointBody, JointState, read_joint_body};
use crate::advisory::notes::Notes;
use crate::advisory::reach_rule::{Oddity, reach_of};
use crate::advisory::words::Word;
use crate::units::pressure::HectoPascals;
use crate::units::speed::Knots;
use crate::units::wind::Averaging;
use chrono::{DateTime, Duration, Utc};
use std::ops::Range;

/// The text is sent so long after the base time if its own heading does not say.
const SENT_AFTER: Duration = Duration::hours(3);
/// Issue and base time, and the date in the remarks, lie no farther apart.
const NEAR: Duration = Duration::hours(36);

const MONTHS: [&str; 12] =
    ["JAN", "FEB", "MAR", "APR", "MAY", "JUN", "JUL", "AUG", "SEP", "OCT", "NOV", "DEC"];

/// A storm's part of a message: the words from its title up to the next storm's.
struct Part {
    name: String,
    class: String,
    /// "22W".
    designator: String,
    number: Option<u32>,
    is_corrected: bool,
    title: Range<usize>,
    /// The word after "WARNING POSITION".
    body: usize,
    end: usize,
}

/// Reads a warning; `None` where a finding says why it cannot be used.
#[must_use]
pub fn read_joint(words: &[Word], choice: &Choice, notes: &mut Notes) -> Option<Advisory> {
    // Commas and colons end words here as full stops do elsewhere.
    let words: Vec<Word> = words
        .iter()
        .map(|word| Word {
            text: word.text.trim_end_matches([',', ':', ';', '/', '.']).to_owned(),
            ..word.clone()
        })
        .map(|word| if word.text.is_empty() { Word { text: "/".to_owned(), ..word } } else { word })
        .collect();
    let part = choose_part(parts(&words), choice, notes)?;
    let section = words.get(..part.end).unwrap_or(&words);
    let body = read_joint_body(section, part.body, notes);
    let times = times(&words, &part, &body, choice, notes);
    check_end(&words, notes);
    let times = times?;
    let (points, ends) = points(&body, times.base, notes)?;
    if notes.has_error() {
        return None;
    }
    Some(Advisory {
        storm: Storm {
            id: part.designator.split_at_checked(2).and_then(|(number, letter)| {
                let basin = basin_of_letter(letter)?;
                Some(format!("{basin}{number}{}", season(basin, times.base)))
            }),
            name: part.name,
            class: part.class,
        },
        issuer: "JOINT TYPHOON WARNING CENTER".to_owned(),
        number: part.number,
        is_special: false,
        is_corrected: part.is_corrected,
        issued: times.issued,
        base: times.base,
        base_position: points.first().map(|point| point.position),
        averaging: Averaging::Minute1,
        accuracy: body.accuracy,
        motion: body.motion,
        pressure: pressure(&words, part.body),
        next_due: next_due(&words, part.body, times.issued),
        is_last: Cursor::new(&words, part.body).seek("FINAL WARNING", words.len()),
        points,
        ends,
        quoted_track_errors: None,
        circles: Vec::new(),
        is_drill: false,
        assumed: Vec::new(),
    })
}

/// The storms of a message, each by the title before its warning position.
fn parts(words: &[Word]) -> Vec<Part> {
    let mut found: Vec<Part> = Vec::new();
    let mut title: Option<(usize, usize)> = None;
    let mut cursor = Cursor::new(words, 0);
    while !cursor.is_done() {
        let at = cursor.at();
        if cursor.take("WARNING NR") {
            title = Some((at, cursor.at()));
        } else if cursor.take("WARNING POSITION") {
            if let Some(before) = found.last_mut() {
                before.end = title.map_or(at, |(at, _)| at);
            }
            found.push(part(words, title.take(), at, cursor.at()));
        } else {
            cursor.skip(1);
        }
    }
    found
}

/// "TROPICAL STORM 22W (KROVANH) WARNING NR 005".
fn part(words: &[Word], title: Option<(usize, usize)>, position_at: usize, body: usize) -> Part {
    let (at, number_at) = title.unwrap_or((position_at, position_at));
    let text = |index: Option<usize>| index.and_then(|i| words.get(i)).map_or("", |word| word.text.as_str());
    let is_designator = |text: &str| {
        text.len() == 3
            && text.split_at_checked(2).is_some_and(|(number, letter)| {
                number.bytes().all(|byte| byte.is_ascii_digit()) && basin_of_letter(letter).is_some()
            })
    };
    let designator_at =
        (1..=4).filter_map(|back| at.checked_sub(back)).find(|i| is_designator(text(Some(*i))));
    let name = designator_at.map_or(String::new(), |from| {
        let named: Vec<&str> = words
            .get(from + 1..at)
            .unwrap_or(&[])
            .iter()
            .map(|word| word.text.trim_matches(['(', ')']))
            .collect();
        named.join(" ")
    });
    let class_from = designator_at.map(|end| {
        let is_class =
            |i: &usize| words.get(*i).is_some_and(|word| word.text.bytes().all(|b| b.is_ascii_alphabetic()));
        (end.saturating_sub(3)..end).rev().take_while(is_class).last().unwrap_or(end)
    });
    let class = class_from.zip(designator_at).map_or(String::new(), |(from, to)| {
        let class: Vec<&str> =
            words.get(from..to).unwrap_or(&[]).iter().map(|word| word.text.as_str()).collect();
        class.join(" ")
    });
    let number_text = text(title.map(|_| number_at));
    let digits: String = number_text.chars().take_while(char::is_ascii_digit).collect();
    Part {
        name,
        class,
        designator: text(designator_at).to_owned(),
        number: digits.parse().ok(),
        is_corrected: number_text.len() > digits.len() && !digits.is_empty(),
        title: Cursor::new(words, number_at + 1).range_since(class_from.unwrap_or(at)),
        body,
        end: words.len(),
    }
}

fn choose_part(parts: Vec<Part>, choice: &Choice, notes: &mut Notes) -> Option<Part> {
    let names: Vec<String> = parts.iter().map(|part| format!("{} {}", part.designator, part.name)).collect();
    let range = parts.first().map_or(0..0, |part| part.title.clone());
    let is_wanted = |part: &Part| {
        let id = part
            .designator
            .split_at_checked(2)
            .and_then(|(number, letter)| Some(format!("{}{number}", basin_of_letter(letter)?)));
        let fits = |wanted: &str| {
            // The year stands in the remarks only: an id is compared without it.
            let short = if wanted.len() == 8 { wanted.get(..4).unwrap_or(wanted) } else { wanted };
            matches_storm(short, id.as_deref().unwrap_or(""), &part.name)
        };
        choice.storm.as_deref().is_none_or(fits)
    };
    let mut fitting: Vec<Part> = parts.into_iter().filter(is_wanted).collect();
    if fitting.len() == 1
        && let Some(part) = fitting.pop()
    {
        if part.designator.is_empty() {
            let to_do =
                "its title must read as \"TROPICAL STORM 22W (NAME) WARNING NR 005\": fetch the text again";
            notes.error("advisory-title", part.title, "no storm such as 22W is named".to_owned(), to_do);
            return None;
        }
        return Some(part);
    }
    let found = match &choice.storm {
        Some(wanted) => {
            format!("\"{wanted}\" fits {} of the storms in the message: {}", fitting.len(), listed(&names))
        }
        None => format!("the message holds {} storms: {}", names.len(), listed(&names)),
    };
    notes.error("advisory-choose-storm", range, found, "choose one by its number, as 22W");
    None
}

struct Times {
    base: DateTime<Utc>,
    issued: DateTime<Utc>,
}

/// The base and the issue time, with the month and the year of the remarks, or of the cycle that was chosen.
fn times(words: &[Word], part: &Part, body: &JointBody, choice: &Choice, notes: &mut Notes) -> Option<Times> {
    let now = body.states.first()?;
    let dated = words.get(part.body..).unwrap_or(&[]).iter().find_map(|word| date(&word.text));
    let near = |time: DayTime, around: DateTime<Utc>| {
        time.nearest_to(around).filter(|found| (*found - around).abs() <= NEAR)
    };
    let base = match (dated, choice.cycle) {
        (Some(date), _) => near(now.valid?, date + Duration::hours(12)),
        (None, Some(cycle)) => near(now.valid?, cycle).filter(|base| *base == cycle),
        (None, None) => None,
    };
    let Some(base) = base else {
        let (found, to_do) = match (dated, choice.cycle) {
            (Some(date), _) => (
                format!(
                    "the remarks' date, {}, is not near the warning position's time",
                    date.format("%Y-%m-%d")
                ),
                "one of the two is wrong: fetch the text again",
            ),
            (None, Some(_)) => (
                "the chosen cycle is not the time of the warning position".to_owned(),
                "choose the base time that the text means, as 2026090206",
            ),
            (None, None) => (
                "the text names no month and no year, which stand in its remarks, as 02SEP26".to_owned(),
                "fetch the whole text, or choose its base time as the cycle, as 2026090206",
            ),
        };
        notes.error("advisory-issue-time", now.range.clone(), found, to_do);
        return None;
    };
    // "WTPN31 PGTW 020900": when it was sent.
    let before = words.get(..part.body).unwrap_or(&[]);
    let heading = before.iter().rposition(|word| word.text == "PGTW");
    let sent = heading.and_then(|at| Cursor::new(words, at + 1).day_hour_minute());
    let sent = sent.and_then(|time| near(time, base)).filter(|sent| *sent >= base);
    Some(Times {
        base,
        issued: sent.filter(|sent| *sent - base <= Duration::hours(24)).unwrap_or(base + SENT_AFTER),
    })
}

/// "02SEP26".
fn date(word: &str) -> Option<DateTime<Utc>> {
    let (day, rest) = word.split_at_checked(2)?;
    let (month, year) = rest.split_at_checked(3)?;
    let month = MONTHS.iter().position(|name| *name == month)? as u32 + 1;
    let is_year = year.len() == 2 && year.bytes().all(|byte| byte.is_ascii_digit());
    let year: i32 = Some(year).filter(|_| is_year)?.parse().ok()?;
    instant(2000 + year, month, day.parse().ok()?, 0, 0)
}

fn points(
    body: &JointBody,
    base: DateTime<Utc>,
    notes: &mut Notes,
) -> Option<(Vec<ForecastPoint>, Option<Ending>)> {
    let mut points: Vec<ForecastPoint> = Vec::new();
    let mut ends = None;
    for state in &body.states {
        let valid = base + Duration::hours(state.lead_h);
        let says_so = state.valid.is_some_and(|time| time.nearest_to(valid) == Some(valid));
        if !says_so || points.last().is_some_and(|last| last.valid >= valid) {
            let found = format!(
                "the time in \"{}\" is not {} h after the warning position's",
                notes.quote(state.range.clone()),
                state.lead_h
            );
            notes.error("advisory-valid-time", state.range.clone(), found, "fetch the text again");
            continue;
        }
        points.extend(point(state, valid, notes));
        if ends.is_none() && state.qualifier.contains("DISSIPATED") {
            ends = Some(Ending::Dissipated(valid));
        }
    }
    if points.len() < 2 && !notes.has_error() {
        let range = body.states.first().map_or(0..0, |state| state.range.clone());
        let found = "the text gives no forecast, only the present state".to_owned();
        notes.error("advisory-no-forecast", range, found, "fetch the whole text");
    }
    if let Some(Ending::Dissipated(at)) = ends {
        points.retain(|point| point.valid <= at);
    }
    (!points.is_empty()).then_some((points, ends))
}

fn point(state: &JointState, valid: DateTime<Utc>, notes: &mut Notes) -> Option<ForecastPoint> {
    let Some(wind) = state.wind else {
        let found = format!("no readable wind follows \"{}\"", notes.quote(state.range.clone()));
        let to_do =
            "a line such as \"MAX SUSTAINED WINDS - 035 KT, GUSTS 045 KT\" is missing: fetch the text again";
        notes.error("advisory-wind", state.range.clone(), found, to_do);
        return None;
    };
    let speeds = [Knots::GALE, Knots::STORM, Knots::HURRICANE];
    let mut reaches = [Reach::NotGiven; 3];
    for ((reach, speed), given) in reaches.iter_mut().zip(speeds).zip(&state.radii) {
        let (found, oddity) = reach_of(speed, wind, given.as_ref().map(|(quadrants, _)| *quadrants));
        *reach = found;
        if let Some((oddity, (_, range))) = oddity.zip(given.clone()) {
            let (code, to_do) = match oddity {
                Oddity::ZeroThoughItBlows => ("advisory-zero-radii", "the reach is taken as not given"),
                Oddity::ReachesThoughTooWeak => {
                    ("advisory-radii-above-wind", "the radii are used; ask the office")
                }
            };
            let found = format!("\"{}\" though the greatest wind is {wind}", notes.quote(range.clone()));
            notes.warning(code, range, found, to_do);
        }
    }
    let [gale, storm, hurricane] = reaches;
    Some(ForecastPoint {
        valid,
        position: state.position?,
        max_wind: wind,
        gust: state.gust,
        radii: WindRadii { gale, storm, hurricane },
        seas: None,
        qualifier: state.qualifier.clone(),
        place: notes.place(state.range.clone()),
    })
}

/// "MINIMUM CENTRAL PRESSURE AT 020600Z IS 994 MB".
fn pressure(words: &[Word], from: usize) -> Option<HectoPascals> {
    let mut cursor = Cursor::new(words, from);
    if !cursor.seek("CENTRAL PRESSURE AT", words.len()) {
        return None;
    }
    cursor.skip(4);
    cursor.take("IS");
    HectoPascals::new(cursor.quantity("MB")?).ok()
}

/// "NEXT WARNINGS AT 021500Z, 022100Z": the first of them.
fn next_due(words: &[Word], from: usize, issued: DateTime<Utc>) -> Option<DateTime<Utc>> {
    let mut cursor = Cursor::new(words, from);
    let is_there =
        cursor.seek("NEXT WARNINGS AT", words.len()) || cursor.seek("NEXT WARNING AT", words.len());
    cursor.skip(3);
    cursor.day_hour_minute().filter(|_| is_there)?.nearest_to(issued).filter(|due| *due > issued)
}

/// A text that was sent to its end says when the next one comes, or that it is the final one.
fn check_end(words: &[Word], notes: &mut Notes) {
    let ends = ["NEXT WARNINGS AT", "NEXT WARNING AT", "FINAL WARNING", "NNNN"];
    if ends.iter().any(|end| Cursor::new(words, 0).seek(end, words.len())) {
        return;
    }
    let last = words.len().saturating_sub(1);
    let range = Cursor::new(words, last).range_since(last);
    let found = "the text stops before its end: no next warnings, no \"NNNN\"".to_owned();
    notes.error("advisory-truncated", range, found, "fetch the whole text");
}
