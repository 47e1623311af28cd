//! A place in a run of words, and the small things that forecast texts are made of: numbers, times, positions, radii.

use crate::advisory::forecast::Quadrants;
use crate::advisory::words::{DOTS, Word};
use crate::geo::position::Position;
use crate::units::length::NauticalMiles;
use chrono::{DateTime, Datelike, NaiveDate, Utc};
use std::ops::Range;

/// A reading place in some words. Everything it takes it takes wholly, or stays where it was.
#[derive(Clone, Debug)]
pub struct Cursor<'a> {
    words: &'a [Word],
    at: usize,
}

/// A day of the month and a time of day: all that "06/1900Z" says.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct DayTime {
    day: u32,
    hour: u32,
    minute: u32,
}

impl<'a> Cursor<'a> {
    /// At word `at` of `words`.
    #[must_use]
    pub fn new(words: &'a [Word], at: usize) -> Cursor<'a> {
        Cursor { words, at }
    }

    /// The number of the next word.
    #[must_use]
    pub fn at(&self) -> usize {
        self.at
    }

    /// The text of the word `ahead` places on (0 is the next one); empty past the end.
    #[must_use]
    pub fn peek(&self, ahead: usize) -> &'a str {
        self.words.get(self.at + ahead).map_or("", |word| word.text.as_str())
    }

    /// Whether all words have been taken.
    #[must_use]
    pub fn is_done(&self) -> bool {
        self.at >= self.words.len()
    }

    /// Goes on by `count` words.
    pub fn skip(&mut self, count: usize) {
        self.at = (self.at + count).min(self.words.len());
    }

    /// Whether the words of `phrase` come next.
    #[must_use]
    pub fn sees(&self, phrase: &str) -> bool {
        phrase.split(' ').enumerate().all(|(ahead, word)| self.peek(ahead) == word)
    }

    /// Takes the words of `phrase` if they come next.
    pub fn take(&mut self, phrase: &str) -> bool {
        let seen = self.sees(phrase);
        if seen {
            self.skip(phrase.split(' ').count());
        }
        seen
    }

    /// Takes the first of `phrases` that comes next.
    pub fn take_any(&mut self, phrases: &[&str]) -> bool {
        phrases.iter().any(|phrase| self.take(phrase))
    }

    /// Goes on to the next place where `phrase` stands, within `most` words; stays if it stands nowhere there.
    pub fn seek(&mut self, phrase: &str, most: usize) -> bool {
        let found = (0..=most).find(|ahead| Cursor::new(self.words, self.at + ahead).sees(phrase));
        if let Some(ahead) = found {
            self.skip(ahead);
        }
        found.is_some()
    }

    /// The bytes from word `first` up to the next word; those of the next word if none has been taken since.
    #[must_use]
    pub fn range_since(&self, first: usize) -> Range<usize> {
        let last = self.at.max(first + 1) - 1;
        let end_of_text = self.words.last().map_or(0, |word| word.range.end);
        let start = self.words.get(first).map_or(end_of_text, |word| word.range.start);
        let end = self.words.get(last).map_or(end_of_text, |word| word.range.end);
        start..end.max(start)
    }

    /// Takes a number followed by `unit`, in one word or in two: "45 KT", "45KT".
    pub fn quantity(&mut self, unit: &str) -> Option<f64> {
        let word = self.peek(0);
        if let Some(value) = word.strip_suffix(unit).and_then(plain_number) {
            self.skip(1);
            return Some(value);
        }
        let value = plain_number(word).filter(|_| self.peek(1) == unit)?;
        self.skip(2);
        Some(value)
    }

    /// Takes a whole number without sign or unit.
    pub fn whole_number(&mut self) -> Option<u32> {
        let word = self.peek(0);
        let value = Some(word).filter(|word| word.bytes().all(|b| b.is_ascii_digit()))?.parse().ok()?;
        self.skip(1);
        Some(value)
    }

    /// Takes "28.3N  94.7W", or the same with blanks before the letters.
    pub fn position(&mut self) -> Option<Position> {
        let mut ahead = self.clone();
        let latitude = ahead.coordinate("N", "S")?;
        let longitude = ahead.coordinate("E", "W")?;
        let position = Position::new(latitude, longitude).ok()?;
        *self = ahead;
        Some(position)
    }

    fn coordinate(&mut self, plus: &str, minus: &str) -> Option<f64> {
        self.quantity(plus).or_else(|| self.quantity(minus).map(|degrees| -degrees))
    }

    /// Takes "05/1900Z", "05/1900 UTC".
    pub fn day_time(&mut self) -> Option<DayTime> {
        let word = self.peek(0);
        let (digits, count) = match word.strip_suffix('Z') {
            Some(digits) => (digits, 1),
            None if matches!(self.peek(1), "UTC" | "Z") => (word, 2),
            None => return None,
        };
        let (day, clock) = digits.split_once('/')?;
        let (hour, minute) = clock_time(clock)?;
        let day = Some(day).filter(|day| (1..=2).contains(&day.len())).and_then(digits_only)?;
        self.skip(count);
        Some(DayTime { day, hour, minute })
    }

    /// Takes "051900Z", "051900UTC" or "051900": day, hour and minute in one.
    pub fn day_hour_minute(&mut self) -> Option<DayTime> {
        let word = self.peek(0);
        let digits = word.strip_suffix("UTC").or(word.strip_suffix('Z')).unwrap_or(word);
        let (day, clock) = Some(digits).filter(|digits| digits.len() == 6)?.split_at_checked(2)?;
        let (day, (hour, minute)) = (digits_only(day)?, clock_time(clock)?);
        self.skip(1);
        Some(DayTime { day, hour, minute })
    }

    /// Takes the four radii "60NE 150SE 0SW 20NW": each quadrant once, in any order.
    pub fn quadrants(&mut self) -> Option<Quadrants> {
        let mut ahead = self.clone();
        let mut found = [None; 4];
        for _ in 0..4 {
            let (quadrant, miles) = ["NE", "SE", "SW", "NW"]
                .iter()
                .enumerate()
                .find_map(|(quadrant, unit)| Some((quadrant, ahead.quantity(unit)?)))?;
            let slot = found.get_mut(quadrant)?;
            if slot.is_some() {
                return None;
            }
            *slot = Some(NauticalMiles::new(miles).ok()?);
        }
        let [Some(northeast), Some(southeast), Some(southwest), Some(northwest)] = found else {
            return None;
        };
        *self = ahead;
        Some(Quadrants { northeast, southeast, southwest, northwest })
    }

    /// Takes a run of full stops, if there is one.
    pub fn take_dots(&mut self) -> bool {
        self.take(DOTS)
    }
}

impl DayTime {
    /// The instant nearest to `around` that has this day of the month and time of day.
    ///
    /// Advisories name the month once, at the top; a forecast that runs over the end of a month or a year must still
    /// get the right one. `None` if no month near `around` has such a day.
    #[must_use]
    pub fn nearest_to(self, around: DateTime<Utc>) -> Option<DateTime<Utc>> {
        [-1, 0, 1]
            .iter()
            .filter_map(|step| {
                let month = i64::from(around.month0()) + 12 * i64::from(around.year()) + step;
                let year = i32::try_from(month.div_euclid(12)).ok()?;
                let month = u32::try_from(month.rem_euclid(12)).ok()? + 1;
                instant(year, month, self.day, self.hour, self.minute)
            })
            .min_by_key(|candidate| (*candidate - around).abs())
    }
}

/// The instant of a date and a time of day in UTC, if there is such a date.
#[must_use]
pub fn instant(year: i32, month: u32, day: u32, hour: u32, minute: u32) -> Option<DateTime<Utc>> {
    NaiveDate::from_ymd_opt(year, month, day)?.and_hms_opt(hour, minute, 0).map(|naive| naive.and_utc())
}

/// Reads "1900" as 19 h 00 min.
#[must_use]
pub fn clock_time(text: &str) -> Option<(u32, u32)> {
    let value = Some(text).filter(|text| text.len() == 4).and_then(digits_only)?;
    Some((value / 100, value % 100)).filter(|(hour, minute)| *hour < 24 && *minute < 60)
}

/// Whether a word is a distance in a quadrant ("60NE").
#[must_use]
pub fn is_quadrant_distance(word: &str) -> bool {
    ["NE", "SE", "SW", "NW"].iter().any(|unit| word.strip_suffix(unit).and_then(plain_number).is_some())
}

/// Whether a word is a latitude or a longitude with a decimal ("28.3N").
#[must_use]
pub fn is_coordinate(word: &str) -> bool {
    let number = word.strip_suffix(['N', 'S', 'E', 'W']);
    number.is_some_and(|number| number.contains('.') && plain_number(number).is_some())
}

/// Whether a word begins with a digit.
#[must_use]
pub fn is_numeric(word: &str) -> bool {
    word.starts_with(|c: char| c.is_ascii_digit())
}

/// A number of digits and at most one full stop; no sign, no exponent, no "nan".
fn plain_number(text: &str) -> Option<f64> {
    let is_plain =
        !text.is_empty() && text.len() <= 7 && text.bytes().all(|b| b.is_ascii_digit() || b == b'.');
    is_plain.then(|| text.parse().ok()).flatten()
}

fn digits_only(text: &str) -> Option<u32> {
    Some(text).filter(|text| text.bytes().all(|b| b.is_ascii_digit()))?.parse().ok()
}

#[cfg(test)]
mod tests {
    use super::{Cursor, instant};
    use crate::advisory::words::{Word, cut};

    fn words(text: &str) -> Vec<Word> {
        cut(text, 0..text.len(), false)
    }

    #[test]
    fn a_day_without_its_month_goes_to_the_nearest_one() {
        let (new_year, leap) = (instant(2005, 12, 30, 15, 0).unwrap(), instant(2024, 2, 27, 21, 0).unwrap());
        let cases = [
            (new_year, "02/1200Z", instant(2006, 1, 2, 12, 0)),
            (new_year, "30/1200Z", instant(2005, 12, 30, 12, 0)),
            (leap, "29/1800Z", instant(2024, 2, 29, 18, 0)),
            (leap, "01/1800Z", instant(2024, 3, 1, 18, 0)),
            (instant(2023, 2, 27, 21, 0).unwrap(), "30/0000Z", instant(2023, 1, 30, 0, 0)),
        ];
        for (around, text, expected) in cases {
            let words = words(text);
            let found = Cursor::new(&words, 0).day_time().unwrap().nearest_to(around);
            assert_eq!(found, expected, "{text} around {around}");
        }
    }

    #[test]
    fn times_and_positions_that_cannot_be_are_not_taken() {
        for text in ["32.x/1200Z", "05/2460Z", "05/2400Z", "/1200Z", "05/12Z", "005/1200Z"] {
            let words = words(text);
            assert_eq!(Cursor::new(&words, 0).day_time(), None, "{text}");
        }
        for text in ["91.0N 20.0W", "20.0N", "20.0W 20.0N", "-20.0N 20.0W", "NANN INFW", "1E1N 20.0W"] {
            let words = words(text);
            assert_eq!(Cursor::new(&words, 0).position(), None, "{text}");
        }
    }

    #[test]
    fn a_quadrant_named_twice_or_missing_is_not_taken() {
        for text in ["60NE 60SE 60SW", "60NE 60SE 60SE 60NW", "60NE 60SE 60SW NW", "60NE 60SE 60SW 60"] {
            let words = words(text);
            assert_eq!(Cursor::new(&words, 0).quadrants(), None, "{text}");
        }
        let words = words("60 NE 50SE  40SW   30NW.");
        let taken = Cursor::new(&words, 0).quadrants().unwrap();
        assert_eq!(
            taken.clockwise().map(|reach| reach.to_string()),
            ["60 n mi", "50 n mi", "40 n mi", "30 n mi"]
        );
    }
}
