//! The head of a Forecast/Advisory: which storm, which advisory, who issued it and when.

use crate::advisory::cursor::{Cursor, clock_time, instant};
use crate::advisory::forecast::Storm;
use crate::advisory::notes::Notes;
use crate::advisory::words::{DOTS, Word};
use chrono::{DateTime, Datelike, Utc};
use std::ops::Range;

/// What the head says. The month and the year stand nowhere else in the text.
#[derive(Clone, Debug, PartialEq)]
pub struct Head {
    /// Which storm.
    pub storm: Storm,
    /// The office, as written.
    pub issuer: String,
    /// The advisory's number.
    pub number: u32,
    /// Issued between the routine times.
    pub is_special: bool,
    /// Replaces an advisory with the same number.
    pub is_corrected: bool,
    /// When it was issued.
    pub issued: DateTime<Utc>,
    /// The bytes of the title, for findings about the whole.
    pub title: Range<usize>,
    /// The number of the word after the head.
    pub end: usize,
}

/// A title found in a text: the words of it, and the advisory's number if that could be read.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Title {
    /// The word "FORECAST/ADVISORY" (or "MARINE", or "ADVISORY").
    pub at: usize,
    /// The word after "NUMBER".
    pub number_at: usize,
}

/// Storm classes as the titles write them.
///
/// United States offices' texts 1991 to 2024; the last four are kept for texts of other years.
const CLASSES: [&str; 15] = [
    "POTENTIAL TROPICAL CYCLONE",
    "POST-TROPICAL CYCLONE",
    "TROPICAL DEPRESSION",
    "TROPICAL STORM",
    "SUBTROPICAL DEPRESSION",
    "SUBTROPICAL STORM",
    "SUPER TYPHOON",
    "HURRICANE",
    "TYPHOON",
    "REMNANTS OF",
    "TROPICAL CYCLONE",
    "EXTRATROPICAL STORM",
    "TROPICAL DISTURBANCE",
    "REMNANT LOW",
    "CYCLONE",
];

const MONTHS: [&str; 12] =
    ["JAN", "FEB", "MAR", "APR", "MAY", "JUN", "JUL", "AUG", "SEP", "OCT", "NOV", "DEC"];
const WEEKDAYS: [&str; 7] = ["MON", "TUE", "WED", "THU", "FRI", "SAT", "SUN"];

/// Every title in the words, whatever blanks or line ends stand in it.
///
/// "ADVISORY NUMBER" alone, as in 1994, is also how public advisories begin; the caller tells them apart.
#[must_use]
pub fn titles(words: &[Word]) -> Vec<Title> {
    let forms = ["FORECAST/ADVISORY NUMBER", "MARINE ADVISORY NUMBER", "ADVISORY NUMBER"];
    let mut found = Vec::new();
    let mut cursor = Cursor::new(words, 0);
    while !cursor.is_done() {
        let at = cursor.at();
        if cursor.take_any(&forms) {
            found.push(Title { at, number_at: cursor.at() });
        } else {
            cursor.skip(1);
        }
    }
    found
}

/// Reads the head around `title`; `None` if a finding says why it cannot be used.
#[must_use]
pub fn read_head(words: &[Word], title: Title, notes: &mut Notes) -> Option<Head> {
    let mut cursor = Cursor::new(words, title.number_at);
    let number = cursor.whole_number();
    let named = class_and_name(words, title.at);
    let range = Cursor::new(words, title.number_at + 1).range_since(named.start);
    if number.is_none() || named.name.is_empty() {
        let found = format!("storm and number are not readable in \"{}\"", notes.quote(range.clone()));
        let to_do =
            "bring the whole text as issued: its title names the storm and ends \"NUMBER\" and a number";
        notes.error("advisory-title", range.clone(), found, to_do);
    }
    let office_at = cursor.at();
    let issue = issue_time(words, office_at);
    let Some((issued, weekday, time_at, end)) = issue else {
        notes.error(
            "advisory-issue-time",
            range,
            "no issue time such as \"2100 UTC MON SEP 23 2024\" follows the title".to_owned(),
            "bring the whole text as issued: month and year stand only there",
        );
        return None;
    };
    let time_range = Cursor::new(words, end).range_since(time_at);
    if weekday != WEEKDAYS.get(issued.weekday().num_days_from_monday() as usize).copied().unwrap_or("") {
        let found = format!("{} is a {}, not {weekday}", issued.format("%Y-%m-%d"), issued.format("%a"));
        notes.warning(
            "advisory-weekday",
            time_range,
            found,
            "check day, month and year against another source",
        );
    }
    let (issuer, id) = office(words, office_at, time_at, issued.year());
    if id.is_none() {
        notes.warning(
            "advisory-no-storm-id",
            Cursor::new(words, time_at).range_since(office_at),
            "the office's line holds no storm id such as AL122024".to_owned(),
            "make sure that it is the same storm: it is told from others by its name and year only",
        );
    }
    Some(Head {
        storm: Storm { id, name: named.name, class: named.class },
        issuer,
        number: number?,
        is_special: named.is_special,
        is_corrected: heading_says_corrected(words, named.start) || follows_corrected(words, office_at),
        issued,
        title: range,
        end,
    })
}

struct Named {
    class: String,
    name: String,
    is_special: bool,
    start: usize,
}

/// Class and name stand before the title's fixed words, over one line or two.
fn class_and_name(words: &[Word], title_at: usize) -> Named {
    let is_special = title_at > 0 && matches!(Cursor::new(words, title_at - 1).peek(0), "SPECIAL" | "SP");
    let end = title_at - usize::from(is_special);
    let join = |from: usize, to: usize| {
        let part: Vec<&str> =
            words.get(from..to).unwrap_or(&[]).iter().map(|word| word.text.as_str()).collect();
        part.join(" ")
    };
    for start in end.saturating_sub(10)..end {
        let mut cursor = Cursor::new(words, start);
        while cursor.take_any(&CLASSES) {}
        let name_at = cursor.at();
        if name_at > start && name_at < end && end - name_at <= 3 {
            return Named { class: join(start, name_at), name: join(name_at, end), is_special, start };
        }
    }
    // A class of which nobody told us: whatever stands between the headings and the last word.
    let is_heading = |word: &Word| {
        word.text.bytes().any(|b| b.is_ascii_digit())
            || matches!(word.text.as_str(), "ALL" | "LOC" | "DDHHMM")
    };
    let name_at = end.saturating_sub(1);
    let before = words.get(..name_at).unwrap_or(&[]);
    let start = before.iter().rposition(is_heading).map_or(0, |at| at + 1).max(name_at.saturating_sub(5));
    Named { class: join(start, name_at), name: join(name_at, end), is_special, start }
}

/// "CCA", "COR" or "AAA" in the transmission heading, which stands before the title.
fn heading_says_corrected(words: &[Word], title_start: usize) -> bool {
    words.get(..title_start).unwrap_or(&[]).iter().any(|word| {
        let text = word.text.as_str();
        let is_series = text.len() == 3 && (text.starts_with("CC") || text.starts_with("AA"));
        text == "COR" || is_series
    })
}

/// "...CORRECTED" after the number, or a sentence about a correction before the centre is given.
fn follows_corrected(words: &[Word], from: usize) -> bool {
    let mut cursor = Cursor::new(words, from);
    while !cursor.is_done() && !cursor.sees("CENTER LOCATED NEAR") {
        if matches!(cursor.peek(0), "CORRECTED" | "CORRECTION" | "CORRECTS") {
            return true;
        }
        cursor.skip(1);
    }
    false
}

/// "2100 UTC MON SEP 23 2024" or "1900Z TUE JUN 05 2001": the instant, the weekday as written, first word, word after.
fn issue_time(words: &[Word], from: usize) -> Option<(DateTime<Utc>, &str, usize, usize)> {
    (from..words.len().min(from + 80)).find_map(|at| {
        let mut cursor = Cursor::new(words, at);
        let clock = cursor.peek(0);
        let clock = match clock.strip_suffix('Z') {
            Some(digits) => digits,
            None if matches!(cursor.peek(1), "UTC" | "Z" | "GMT") => {
                cursor.skip(1);
                clock
            }
            None => return None,
        };
        cursor.skip(1);
        let (hour, minute) = clock_time(clock)?;
        let weekday = Some(cursor.peek(0)).filter(|word| WEEKDAYS.contains(word))?;
        let month = MONTHS.iter().position(|month| *month == cursor.peek(1))? + 1;
        cursor.skip(2);
        let day = cursor.whole_number()?;
        let year = cursor.whole_number().filter(|year| (1900..2200).contains(year))?;
        let issued = instant(i32::try_from(year).ok()?, u32::try_from(month).ok()?, day, hour, minute)?;
        Some((issued, weekday, at, cursor.at()))
    })
}

/// The office's name and the storm's id, which stand between the number and the issue time.
///
/// Where a correction names two ids ("...CORRECTION...AL9199 TO AL1599...") the last one counts.
fn office(words: &[Word], from: usize, to: usize, year: i32) -> (String, Option<String>) {
    let line = words.get(from..to).unwrap_or(&[]);
    let id = line.iter().rev().find_map(|word| full_id(&word.text, year));
    let is_mark = |word: &&Word| word.text == DOTS || word.text == "CORRECTED";
    let issuer: Vec<&str> = line
        .iter()
        .skip_while(is_mark)
        .take_while(|word| word.text != DOTS && full_id(&word.text, year).is_none())
        .map(|word| word.text.as_str())
        .collect();
    (issuer.join(" "), id)
}

/// "AL122024" from itself or, as before 2003, from "AL1299": the century is that of the issue time.
fn full_id(word: &str, year: i32) -> Option<String> {
    let (basin, digits) = word.split_at_checked(2)?;
    let is_id = basin.bytes().all(|b| b.is_ascii_uppercase()) && digits.bytes().all(|b| b.is_ascii_digit());
    match digits.len() {
        6 if is_id => Some(word.to_owned()),
        4 if is_id => {
            let (number, short_year) = digits.split_at_checked(2)?;
            let this_century = year - year.rem_euclid(100) + short_year.parse::<i32>().ok()?;
            // A storm of December 1999 may still be there in January 2000.
            let full_year = if this_century > year + 1 { this_century - 100 } else { this_century };
            Some(format!("{basin}{number}{full_year}"))
        }
        _ => None,
    }
}
