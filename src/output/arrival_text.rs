//! When a wind comes, told in one sentence with the chance that it comes at all.

use crate::output::clock_text::{Times, lasting};
use crate::output::layout::glued;
use crate::plan::sheet::{Arrival, Point};
use crate::time::moment::{Minutes, Moment};
use crate::units::chance::Chance;

/// The chance of a wind and the spread of its arrival.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Onset {
    /// The chance that it comes at all before the forecast ends.
    pub chance: Chance,
    /// The chance that it blew already at issue.
    pub already: Chance,
    /// The 10 % point of the onsets after issue.
    pub earliest: Point,
    /// Their 50 % point.
    pub likely: Point,
    /// Their 90 % point.
    pub latest: Point,
}

impl Onset {
    /// The onset of an arrival.
    #[must_use]
    pub fn of(arrival: &Arrival) -> Onset {
        Onset {
            chance: arrival.chance,
            already: arrival.already,
            earliest: arrival.earliest,
            likely: arrival.likely,
            latest: arrival.latest,
        }
    }
}

/// "71 % chance that it comes before the forecast ends Mon 06:00; if so, earliest Fri 14:00 (17:00Z), most likely
/// Fri 20:00 (23:00Z), latest Sat 09:00 (12:00Z)". Times are rounded down, the safe side for an onset.
#[must_use]
pub fn onset_sentence(times: &Times, onset: &Onset, forecast_end: Option<Moment>) -> String {
    let end = forecast_end.map_or(String::new(), |end| format!(" {}", times.local_day(end)));
    let mut words =
        format!("{} chance that it comes before the forecast ends{end}", glued_chance(onset.chance));
    if onset.already > Chance::NEVER {
        words.push_str(&format!("; {} that it blew already at issue", glued_chance(onset.already)));
    }
    words + &when_words(onset, |at| times.both(times.told_down(at)))
}

/// The same in local time only: "71 % chance that it comes; if so, earliest Fri 14:00, most likely Fri 20:00, latest
/// Sat 09:00".
#[must_use]
pub fn onset_in_short(times: &Times, onset: &Onset) -> String {
    let words = format!("{} chance that it comes", glued_chance(onset.chance));
    words + &when_words(onset, |at| times.local_day(times.told_down(at)))
}

fn when_words(onset: &Onset, time: impl Fn(Moment) -> String) -> String {
    let told = |point| match point {
        Point::At(at) => Some(time(at)),
        Point::AfterEnd => Some("after the forecast ends".to_owned()),
        Point::Unknown => None,
    };
    match (told(onset.earliest), told(onset.likely), told(onset.latest)) {
        (Some(earliest), Some(likely), Some(latest)) => {
            format!("; if so, earliest {earliest}, most likely {likely}, latest {latest}")
        }
        // Where it blew already in all scenarios that reach it there is nothing left to come.
        _ if onset.chance <= onset.already => String::new(),
        _ => "; too few scenarios reach it to say when".to_owned(),
    }
}

/// What the port counts from: the adopted time by order, or else the computed one, and how they differ.
#[must_use]
pub fn counted_from(times: &Times, arrival: &Arrival, authority: &str) -> String {
    let computed = arrival.computed.map(|time| times.both(times.told_down(time)));
    match (arrival.adopted, arrival.computed, computed) {
        (Some(adopted), Some(time), Some(computed)) => {
            format!(
                "adopted {} by order; this advisory computes {computed}, {}",
                times.both(adopted),
                apart(time - adopted)
            )
        }
        (Some(adopted), _, _) => format!(
            "adopted {} by order; this advisory computes none, as the chance stays below what the rules ask",
            times.both(adopted)
        ),
        (None, _, Some(computed)) => {
            format!("computed {computed}; the {authority} has adopted none, so the computed one counts")
        }
        (None, _, None) => "none: the chance stays below what the rules ask, and none is adopted".to_owned(),
    }
}

/// "8 h earlier", "20 min later", "the same".
#[must_use]
pub fn apart(difference: Minutes) -> String {
    let length = lasting(Minutes::new(difference.get().abs()));
    match difference.get() {
        0 => "the same".to_owned(),
        ..0 => format!("{length}\u{a0}earlier"),
        1.. => format!("{length}\u{a0}later"),
    }
}

/// A chance that is not parted at a line end.
#[must_use]
pub fn glued_chance(chance: Chance) -> String {
    glued(&chance.to_string())
}
