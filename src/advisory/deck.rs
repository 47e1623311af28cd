//! The reader of decks (ATCF): one technique's forecast of one storm from one base time, or a best track for drills.
//!
//! In real-time decks the office's forecast can differ from its text, which is the official one. A deck gives no issue
//! time, no next advisory and no accuracy, and does not say how a storm ends.

use crate::advisory::best_track::{BestPoint, drill};
use crate::advisory::choice::{Choice, cycle_text, listed, matches_storm};
use crate::advisory::deck_rows::{DeckRow, DeckStorm, by_storm, note_damaged, read_rows};
use crate::advisory::forecast::{
    Advisory, Assumption, Ending, ForecastPoint, Quadrants, Reach, Storm, Widening, WindRadii,
};
use crate::advisory::notes::Notes;
use crate::advisory::reach_rule::{reach_of, threshold};
use crate::units::speed::Knots;
use crate::units::wind::Averaging;
use chrono::{DateTime, Duration, Utc};
use std::collections::{BTreeMap, BTreeSet};
use std::ops::Range;

/// The technique that is an office's own forecast, and taken if nobody asks for another.
pub const OFFICIAL: &str = "OFCL";
const BEST: &str = "BEST";

/// Offices send a forecast three hours after its base time.
const ISSUED_AFTER: Duration = Duration::hours(3);
/// A forecast that reaches less far is no forecast to plan on, or half of one.
const USABLE_FROM_H: i64 = 24;
/// The United States offices and the joint centre forecast at least so far for a storm that lives.
const USUAL_H: i64 = 72;
/// No forecast reaches farther.
const LONGEST_H: i64 = 240;

/// Reads the chosen forecast of a deck; `None` where a finding says why not, or what there is to choose from.
#[must_use]
pub fn read_deck(text: &str, choice: &Choice, notes: &mut Notes) -> Option<Advisory> {
    let (rows, damaged) = read_rows(text);
    let storms = by_storm(rows);
    let chosen = choose_storm(storms, choice, notes);
    let technique = chosen.as_ref().map_or(OFFICIAL.to_owned(), |(_, rows)| wanted_technique(rows, choice));
    note_damaged(&damaged, &technique, notes);
    let (storm, rows) = chosen?;
    let storm = Storm { id: Some(storm.id()), name: name_of(&rows, &storm), class: String::new() };
    if technique == BEST {
        return best_track(storm, rows, choice, notes);
    }
    let (base, rows) = choose_cycle(rows, &technique, choice, notes)?;
    if notes.has_error() {
        return None;
    }
    forecast(storm, base, &technique, &rows, notes)
}

fn choose_storm(
    storms: Vec<(DeckStorm, Vec<DeckRow>)>,
    choice: &Choice,
    notes: &mut Notes,
) -> Option<(DeckStorm, Vec<DeckRow>)> {
    let names: Vec<String> =
        storms.iter().map(|(storm, rows)| format!("{} {}", storm.id(), name_of(rows, storm))).collect();
    let range = storms.first().and_then(|(_, rows)| rows.first()).map_or(0..0, |row| row.range.clone());
    let is_wanted = |(storm, rows): &(DeckStorm, Vec<DeckRow>)| {
        choice.storm.as_deref().is_none_or(|wanted| matches_storm(wanted, &storm.id(), &name_of(rows, storm)))
    };
    let mut fitting: Vec<(DeckStorm, Vec<DeckRow>)> = storms.into_iter().filter(is_wanted).collect();
    if fitting.len() == 1 {
        return fitting.pop();
    }
    if names.is_empty() {
        notes.error(
            "advisory-deck-row",
            range,
            "no row of the deck could be read".to_owned(),
            "fetch the deck again",
        );
        return None;
    }
    let found = match &choice.storm {
        Some(wanted) => {
            format!("\"{wanted}\" fits {} of the storms in the deck: {}", fitting.len(), listed(&names))
        }
        None => format!("the deck mixes {} storms: {}", names.len(), listed(&names)),
    };
    notes.error("advisory-choose-storm", range, found, "choose one by its id");
    None
}

/// The storm's last name among the rows, or its id where it has none.
fn name_of(rows: &[DeckRow], storm: &DeckStorm) -> String {
    let named =
        rows.iter().rev().map(|row| row.name.as_str()).find(|name| !matches!(*name, "" | "INVEST" | "TWO"));
    named.map_or_else(|| storm.id(), str::to_owned)
}

fn wanted_technique(rows: &[DeckRow], choice: &Choice) -> String {
    let only_best = rows.iter().all(|row| row.technique == BEST);
    match &choice.technique {
        Some(wanted) => wanted.trim().to_uppercase(),
        None if only_best => BEST.to_owned(),
        None => OFFICIAL.to_owned(),
    }
}

/// The chosen base time, or the latest one that existed when the file was taken, with its rows.
fn choose_cycle(
    rows: Vec<DeckRow>,
    technique: &str,
    choice: &Choice,
    notes: &mut Notes,
) -> Option<(DateTime<Utc>, Vec<DeckRow>)> {
    let range = rows.first().map_or(0..0, |row| row.range.clone());
    let all: BTreeSet<String> = rows.iter().map(|row| row.technique.clone()).collect();
    let rows: Vec<DeckRow> = rows.into_iter().filter(|row| row.technique == technique).collect();
    let cycles: Vec<DateTime<Utc>> =
        rows.iter().map(|row| row.base).collect::<BTreeSet<_>>().into_iter().collect();
    let (Some(first), Some(last)) = (cycles.first(), cycles.last()) else {
        let all: Vec<String> = all.into_iter().collect();
        let found = format!("the deck holds no forecast by {technique}; it holds {}", listed(&all));
        notes.error("advisory-choose-technique", range, found, "choose one of these techniques");
        return None;
    };
    let chosen = match (choice.cycle, choice.taken) {
        (Some(cycle), _) => cycles.iter().find(|base| **base == cycle),
        (None, Some(taken)) => cycles.iter().rev().find(|base| **base <= taken),
        (None, None) => cycles.last(),
    };
    let Some(base) = chosen.copied() else {
        let wanted =
            choice.cycle.map_or("none of its base times had come when it was taken".to_owned(), |cycle| {
                format!("no forecast by {technique} has the base time {}", cycle_text(cycle))
            });
        let found = format!(
            "{wanted}; the deck holds {} of {technique}, from {} to {}",
            cycles.len(),
            cycle_text(*first),
            cycle_text(*last)
        );
        notes.error(
            "advisory-choose-cycle",
            range,
            found,
            "choose one of its base times as the cycle, as 2018083012",
        );
        return None;
    };
    Some((base, rows.into_iter().filter(|row| row.base == base).collect()))
}

fn forecast(
    storm: Storm,
    base: DateTime<Utc>,
    technique: &str,
    rows: &[DeckRow],
    notes: &mut Notes,
) -> Option<Advisory> {
    let whole = rows.first()?.range.start..rows.last()?.range.end;
    let hours = by_hour(rows, notes);
    let last_h = hours.keys().next_back().copied().unwrap_or(0);
    let Some(now_h) = [3, 0].into_iter().find(|hour| hours.contains_key(hour)) else {
        let found = format!("{technique} of {} gives no present position", cycle_text(base));
        notes.error("advisory-centre", whole, found, "choose another technique, or bring the office's text");
        return None;
    };
    if last_h < USABLE_FROM_H {
        let found = format!("{technique} of {} reaches {last_h} h ahead", cycle_text(base));
        let to_do = "half of it may be missing, or the storm ends: fetch the deck again, choose another cycle, or bring \
                     the office's text";
        notes.error("advisory-cut-too-short", whole, found, to_do);
        return None;
    }
    let mut ends = None;
    if last_h < USUAL_H {
        let found = format!("{technique} of {} ends {last_h} h ahead", cycle_text(base));
        let to_do =
            "a deck does not say whether the storm ends then or a part is missing: look at the office's text";
        notes.warning("advisory-deck-short", whole.clone(), found, to_do);
        ends = Some(Ending::CutShort(base + Duration::hours(last_h)));
    }
    let issuer = issuer(&storm, technique);
    if !is_office(technique) {
        let found = format!("{technique} is no office's forecast");
        notes.warning(
            "advisory-not-official",
            whole,
            found,
            "nobody warns by it; compare, and plan on an office's",
        );
    }
    let points: Option<Vec<ForecastPoint>> =
        hours.range(now_h..).map(|(hour, rows)| point(base, *hour, rows, notes)).collect();
    let present = hours.get(&now_h)?.first()?;
    Some(Advisory {
        storm: Storm { class: present.kind.clone(), ..storm },
        issuer,
        number: None,
        is_special: false,
        is_corrected: false,
        issued: base + ISSUED_AFTER,
        base,
        base_position: hours.get(&0).and_then(|rows| rows.first()?.position),
        averaging: Averaging::Minute1,
        accuracy: None,
        motion: present.motion,
        pressure: present.pressure,
        next_due: None,
        is_last: false,
        points: points?,
        ends,
        quoted_track_errors: None,
        circles: Vec::new(),
        is_drill: false,
        assumed: vec![Assumption {
            what: "issue time: not given, 3 h after the base time taken".to_owned(),
            widens: Widening::NONE,
        }],
    })
}

fn is_office(technique: &str) -> bool {
    matches!(technique, OFFICIAL | "JTWC")
}

fn issuer(storm: &Storm, technique: &str) -> String {
    let basin = storm.id.as_deref().and_then(|id| id.get(..2));
    match (technique, basin) {
        (OFFICIAL, Some("CP")) => "CENTRAL PACIFIC HURRICANE CENTER (OFCL)".to_owned(),
        (OFFICIAL, _) => "NATIONAL HURRICANE CENTER (OFCL)".to_owned(),
        ("JTWC", _) => "JOINT TYPHOON WARNING CENTER (JTWC)".to_owned(),
        (other, _) => format!("technique {other}, no office"),
    }
}

/// The rows by forecast hour, as far as forecasts reach; those without a position are left out.
fn by_hour<'r>(rows: &'r [DeckRow], notes: &mut Notes) -> BTreeMap<i64, Vec<&'r DeckRow>> {
    let mut hours: BTreeMap<i64, Vec<&DeckRow>> = BTreeMap::new();
    for row in rows.iter().filter(|row| (0..=LONGEST_H).contains(&row.tau_h)) {
        if row.position.is_none() {
            let found = format!("no position for {} h in \"{}\"", row.tau_h, notes.quote(row.range.clone()));
            notes.warning("advisory-deck-gap", row.range.clone(), found, "this row is left out");
            continue;
        }
        hours.entry(row.tau_h).or_default().push(row);
    }
    hours
}

/// One forecast hour from its rows, of which each gives the radii of one wind.
fn point(base: DateTime<Utc>, hour: i64, rows: &[&DeckRow], notes: &mut Notes) -> Option<ForecastPoint> {
    let first = rows.first()?;
    let is_same = |row: &&DeckRow| row.position == first.position && row.wind == first.wind;
    if let Some(other) = rows.iter().find(|row| !is_same(row)) {
        let found = format!("the rows for {hour} h give different positions or winds");
        let to_do = "two forecasts are mixed in one: fetch the deck again";
        notes.error("advisory-deck-differs", other.range.clone(), found, to_do);
        return None;
    }
    let Some(wind) = first.wind else {
        let found = format!("no greatest wind for {hour} h");
        notes.error(
            "advisory-wind",
            first.range.clone(),
            found,
            "choose another technique: this one gives none",
        );
        return None;
    };
    let given = radii_of(rows, notes);
    let speeds = [Knots::GALE, Knots::STORM, Knots::HURRICANE];
    let mut reaches = [Reach::NotGiven; 3];
    for ((reach, speed), given) in reaches.iter_mut().zip(speeds).zip(given) {
        // Four zeros beside a wind that blows are how decks leave radii out, mostly from 96 h on: nothing to warn of.
        (*reach, _) = reach_of(speed, wind, given);
    }
    let [gale, storm, hurricane] = reaches;
    Some(ForecastPoint {
        valid: base + Duration::hours(hour),
        position: first.position?,
        max_wind: wind,
        gust: first.gust.filter(|gust| *gust >= wind),
        radii: WindRadii { gale, storm, hurricane },
        seas: rows.iter().find_map(|row| row.seas),
        qualifier: qualifier(&first.kind).to_owned(),
        place: notes.place(first.range.clone()),
    })
}

/// Radii of 34, 50 and 64 kt as the rows of one hour give them.
fn radii_of(rows: &[&DeckRow], notes: &mut Notes) -> [Option<Quadrants>; 3] {
    let mut given: [Option<Quadrants>; 3] = [None; 3];
    for row in rows {
        let quote = notes.quote(row.range.clone());
        let is_none = row.radii.is_none_or(|quadrants| quadrants == Quadrants::NONE);
        if row.has_odd_code {
            let to_do =
                "only circles (AAA) and quadrants (NEQ and so on) are read; the radii are taken as not given";
            notes.warning(
                "advisory-radius-code",
                row.range.clone(),
                format!("radii of an unknown code: \"{quote}\""),
                to_do,
            );
            continue;
        }
        let Some(slot) = threshold(row.radii_of).and_then(|index| given.get_mut(index)) else {
            if !is_none {
                let found = format!("radii of another wind: \"{quote}\"");
                notes.warning(
                    "advisory-radius-speed",
                    row.range.clone(),
                    found,
                    "only those of 34, 50 and 64 kt are used",
                );
            }
            continue;
        };
        if slot.is_some() && *slot != row.radii {
            let found = format!("\"{quote}\" stands twice for one time, with other radii");
            notes.error(
                "advisory-radii",
                row.range.clone(),
                found,
                "two forecasts are mixed in one: fetch the deck again",
            );
        }
        *slot = row.radii;
    }
    given
}

fn qualifier(kind: &str) -> &str {
    match kind {
        "IN" => "INLAND",
        "EX" | "ET" => "POST-TROP/EXTRATROP",
        "LO" | "PT" => "POST-TROPICAL",
        "DS" => "DISSIPATING",
        _ => "",
    }
}

/// A best track's rows as its times, each with up to three rows of radii.
fn best_track(storm: Storm, rows: Vec<DeckRow>, choice: &Choice, notes: &mut Notes) -> Option<Advisory> {
    let mut times: BTreeMap<DateTime<Utc>, Vec<&DeckRow>> = BTreeMap::new();
    for row in rows.iter().filter(|row| row.technique == BEST && row.tau_h == 0) {
        times.entry(row.base).or_default().push(row);
    }
    let mut points = Vec::new();
    for (at, rows) in &times {
        let Some(first) = rows.first() else { continue };
        if rows.iter().any(|row| row.position != first.position || row.wind != first.wind) {
            let found =
                format!("the rows for {} give different positions or winds", at.format("%Y-%m-%d %H:%MZ"));
            notes.error("advisory-deck-differs", first.range.clone(), found, "fetch the deck again");
            continue;
        }
        let Some(position) = first.position else { continue };
        points.push(BestPoint {
            at: *at,
            position,
            wind: first.wind,
            pressure: first.pressure,
            kind: first.kind.clone(),
            radii: radii_of(rows, notes),
            seas: rows.iter().find_map(|row| row.seas),
            place: notes.place(first.range.clone()),
            range: span(rows),
        });
    }
    if points.is_empty() {
        let range = rows.first().map_or(0..0, |row| row.range.clone());
        let found = "the deck holds no best track".to_owned();
        notes.error("advisory-choose-technique", range, found, "choose a technique that it holds");
    }
    if notes.has_error() {
        return None;
    }
    drill(storm, points, choice, notes)
}

fn span(rows: &[&DeckRow]) -> Range<usize> {
    let start = rows.iter().map(|row| row.range.start).min().unwrap_or(0);
    start..rows.iter().map(|row| row.range.end).max().unwrap_or(start)
}
