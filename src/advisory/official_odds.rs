//! The official wind speed probabilities: the chances of 34, 50 and 64 kt at listed places, as the United States offices
//! publish them beside each Forecast/Advisory.
//!
//! A row gives for each of seven periods the chance that the wind begins in it, and in brackets the chance that it has come
//! by its end, both in whole per cent; "X" is less than 1. Periods count from the base time, which is three hours before a
//! routine issue. A wind is listed only where its chance within five days is at least 3 % (34 and 50 kt) or 1 % (64 kt).

use crate::advisory::cursor::{Cursor, instant};
use crate::advisory::notes::Notes;
use crate::advisory::official_rows::{OfficialRow, read_official_row};
use crate::advisory::words::{Word, cut, decode};
use crate::finding::fault::{Finding, has_error, sort_findings};
use crate::finding::source::SourceText;
use crate::geo::geodesic::quick_distance_bearing;
use crate::geo::position::Position;
use chrono::{DateTime, Duration, Timelike, Utc};

/// The official odds of one text.
#[derive(Clone, Debug, PartialEq)]
pub struct OfficialOdds {
    /// "EP102024"; `None` if the text has none.
    pub storm: Option<String>,
    /// The number of the advisory that it belongs to.
    pub number: Option<u32>,
    /// When it was issued.
    pub issued: DateTime<Utc>,
    /// From when the chances count.
    pub base: DateTime<Utc>,
    /// Ends of the periods, in hours after the base time, rising.
    pub hours: Vec<i64>,
    /// One for each place and wind, in the order of the text.
    pub rows: Vec<OfficialRow>,
}

/// What reading gave.
#[derive(Clone, Debug, PartialEq)]
pub struct OddsReading {
    /// The odds; `None` if any finding is an error.
    pub odds: Option<OfficialOdds>,
    /// All findings.
    pub findings: Vec<Finding>,
    /// The text as it was read.
    pub source: SourceText,
}

/// A point of the sea and a place nearer to it than this are one: half the step of the grid on which the odds are made.
const SAME_PLACE_NMI: f64 = 15.0;

const MONTHS: [&str; 12] =
    ["JAN", "FEB", "MAR", "APR", "MAY", "JUN", "JUL", "AUG", "SEP", "OCT", "NOV", "DEC"];

impl OfficialOdds {
    /// The rows of a place: of the listed place that the port names, else of one of the same name, else of a point of the
    /// sea that lies there. The winds that it lists, weakest first; empty if it lists none.
    #[must_use]
    pub fn of_place(&self, listed: Option<&str>, name: &str, position: Position) -> Vec<&OfficialRow> {
        let wanted = listed.unwrap_or(name);
        let is_named = |row: &&OfficialRow| row.place.eq_ignore_ascii_case(wanted.trim());
        let mut rows: Vec<&OfficialRow> = self.rows.iter().filter(is_named).collect();
        if rows.is_empty() && listed.is_none() {
            let is_there = |row: &&OfficialRow| {
                row.position.is_some_and(|there| quick_distance_bearing(there, position).0 <= SAME_PLACE_NMI)
            };
            rows = self.rows.iter().filter(is_there).collect();
            let first = rows.first().map(|row| row.place.clone());
            rows.retain(|row| Some(&row.place) == first.as_ref());
        }
        rows.sort_by(|a, b| a.wind.get().total_cmp(&b.wind.get()));
        rows
    }
}

/// Whether a file holds official odds.
#[must_use]
pub fn is_official_odds(bytes: &[u8]) -> bool {
    let start = decode(bytes.get(..bytes.len().min(20_000)).unwrap_or(bytes));
    let words = cut(&start, 0..start.len(), false);
    let has = |phrase: &str| Cursor::new(&words, 0).seek(phrase, words.len());
    has("WIND SPEED PROBABILITIES NUMBER") && has("FORECAST HOUR")
}

/// Reads official odds; `name` is the file's.
#[must_use]
pub fn read_official_odds(name: &str, bytes: &[u8]) -> OddsReading {
    let source = SourceText::new(if name == "-" { "standard input" } else { name }, decode(bytes));
    let mut notes = Notes::on(&source);
    let mut odds = read(&source, &mut notes);
    let mut findings = notes.into_findings();
    sort_findings(&mut findings);
    if has_error(&findings) {
        odds = None;
    }
    OddsReading { odds, findings, source }
}

fn read(source: &SourceText, notes: &mut Notes) -> Option<OfficialOdds> {
    let text = source.text();
    let words = cut(text, 0..text.len(), false);
    let mut cursor = Cursor::new(&words, 0);
    let title_at = cursor.seek("WIND SPEED PROBABILITIES NUMBER", words.len()).then(|| cursor.at());
    cursor.skip(4);
    let number = cursor.whole_number();
    let head_at = cursor.at();
    let issued = issue_time(&words, head_at);
    let storm = words.get(head_at..).unwrap_or(&[]).iter().take(20).find(|word| is_storm_id(&word.text));
    let hours = hours(&words);
    let base = issued.and_then(|issued| base_time(&words, issued));
    let (Some(_), Some(issued), Some(base), Some((hours, rows_from))) = (title_at, issued, base, hours)
    else {
        let range = Cursor::new(&words, title_at.unwrap_or(0)).range_since(title_at.unwrap_or(0));
        let lacks = match (title_at, issued, base) {
            (None, _, _) => "a title with \"WIND SPEED PROBABILITIES NUMBER\"",
            (_, None, _) => "an issue time such as \"2100 UTC MON SEP 23 2024\"",
            (_, _, None) => "a base time near it, as in \"BETWEEN 18Z MON AND THE FORECAST HOUR\"",
            _ => "a line with the forecast hours, as in \"FORECAST HOUR (12) (24) (36)\"",
        };
        notes.error(
            "advisory-odds-head",
            range,
            format!("the text lacks {lacks}"),
            "bring the whole text as issued",
        );
        return None;
    };
    let rows = rows(text, &words, rows_from, hours.len(), notes);
    let is_ended = words.get(rows_from..).unwrap_or(&[]).iter().any(|word| word.text == "$$");
    if !is_ended {
        let last = words.len().saturating_sub(1);
        let range = Cursor::new(&words, last).range_since(last);
        let found = "the table stops before its end mark \"$$\"".to_owned();
        notes.error("advisory-odds-head", range, found, "fetch the whole text");
    }
    Some(OfficialOdds { storm: storm.map(|word| word.text.clone()), number, issued, base, hours, rows })
}

fn is_storm_id(word: &str) -> bool {
    word.len() == 8
        && word.bytes().take(2).all(|byte| byte.is_ascii_uppercase())
        && word.bytes().skip(2).all(|byte| byte.is_ascii_digit())
}

/// "2100 UTC MON SEP 23 2024".
fn issue_time(words: &[Word], from: usize) -> Option<DateTime<Utc>> {
    (from..words.len().min(from + 40)).find_map(|at| {
        let mut cursor = Cursor::new(words, at);
        let (hour, minute) = crate::advisory::cursor::clock_time(cursor.peek(0))?;
        if !matches!(cursor.peek(1), "UTC" | "GMT" | "Z") {
            return None;
        }
        let month = MONTHS.iter().position(|month| *month == cursor.peek(3))? as u32 + 1;
        cursor.skip(4);
        let (day, year) = (cursor.whole_number()?, cursor.whole_number()?);
        instant(i32::try_from(year).ok()?, month, day, hour, minute)
    })
}

/// The base time from "BETWEEN 18Z MON AND THE FORECAST HOUR": that hour, at most 12 h before the issue.
fn base_time(words: &[Word], issued: DateTime<Utc>) -> Option<DateTime<Utc>> {
    let mut cursor = Cursor::new(words, 0);
    if !cursor.seek("OCCURRING BETWEEN", words.len()) {
        return None;
    }
    cursor.skip(2);
    let hour: u32 = cursor.peek(0).strip_suffix('Z')?.parse().ok().filter(|hour| *hour < 24)?;
    let back = (i64::from(issued.hour()) - i64::from(hour)).rem_euclid(24);
    let base = issued - Duration::hours(back) - Duration::minutes(i64::from(issued.minute()));
    (back <= 12).then_some(base)
}

/// "FORECAST HOUR (12) (24) (36) (48) (72) (96) (120)", and the word after it.
fn hours(words: &[Word]) -> Option<(Vec<i64>, usize)> {
    let mut cursor = Cursor::new(words, 0);
    let found = (0..words.len()).find(|at| {
        let ahead = Cursor::new(words, *at);
        // "AND THE FORECAST HOUR (CUMULATIVE PROBABILITY)" stands above the table.
        ahead.sees("FORECAST HOUR")
            && ahead.peek(2).trim_start_matches('(').starts_with(|c: char| c.is_ascii_digit())
    })?;
    cursor.skip(found + 2);
    let mut hours: Vec<i64> = Vec::new();
    while let Some(hour) = cursor.peek(0).strip_prefix('(').and_then(|word| word.strip_suffix(')')) {
        hours.push(hour.parse().ok()?);
        cursor.skip(1);
    }
    let rises = hours.windows(2).all(|pair| matches!(pair, [a, b] if a < b));
    (rises && (1..=12).contains(&hours.len()) && hours.iter().all(|hour| (1..=240).contains(hour)))
        .then(|| (hours, cursor.at()))
}

/// The rows of the table: every line that has a wind of 34, 50 or 64 kt behind a name.
fn rows(text: &str, words: &[Word], from: usize, periods: usize, notes: &mut Notes) -> Vec<OfficialRow> {
    let Some(start) = words.get(from).map(|word| word.range.start) else { return Vec::new() };
    let mut rows: Vec<OfficialRow> = Vec::new();
    let mut at = start;
    for line in text.get(start..).unwrap_or("").split_inclusive('\n') {
        let range = at..at + line.trim_end().len();
        at += line.len();
        let line = line.trim_end();
        if line.trim_start().starts_with("$$") {
            break;
        }
        let is_ruler = line.chars().all(|c| matches!(c, '-' | ' '));
        if is_ruler || line.trim_start().starts_with("LOCATION") {
            continue;
        }
        match read_official_row(line, periods, rows.last()) {
            Ok(row) => {
                let is_twice = rows
                    .iter()
                    .any(|other| other.place == row.place && (other.wind.get() - row.wind.get()).abs() < 0.5);
                if is_twice {
                    let found = format!("\"{}\" stands twice", notes.quote(range.clone()));
                    notes.error("advisory-odds-row", range, found, "fetch the text again");
                } else {
                    rows.push(row);
                }
            }
            Err(what) => {
                let found = format!("\"{}\": {what}", notes.quote(range.clone()));
                notes.error("advisory-odds-row", range, found, "fetch the text again: a row is damaged");
            }
        }
    }
    rows
}
