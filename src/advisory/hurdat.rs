//! The reader of best tracks in the HURDAT2 layout, as a perfect forecast for drills.
//!
//! A head line "AL062018, FLORENCE, 79," and as many rows: date, time, mark, kind, latitude, longitude, greatest wind,
//! pressure, four radii each of 34, 50 and 64 kt; -99 and -999 are "not known". Files to 2019 end each row with a comma,
//! later ones with one more figure.

use crate::advisory::best_track::{BestPoint, drill};
use crate::advisory::choice::{Choice, listed, matches_storm, parse_cycle};
use crate::advisory::forecast::{Advisory, Quadrants, Storm};
use crate::advisory::notes::Notes;
use crate::geo::position::Position;
use crate::units::length::NauticalMiles;
use crate::units::pressure::HectoPascals;
use crate::units::speed::Knots;
use chrono::Duration;
use std::ops::Range;

/// One storm of a file: its head, and its rows as lines.
struct Track<'t> {
    id: String,
    name: String,
    rows: usize,
    range: Range<usize>,
    lines: Vec<(&'t str, Range<usize>)>,
}

/// Whether a line is the head of a storm: "AL062018, FLORENCE, 79,".
#[must_use]
pub fn is_track_head(line: &str) -> bool {
    let id = line.split(',').next().unwrap_or("").trim();
    let is_id = id.len() == 8
        && id.bytes().take(2).all(|byte| byte.is_ascii_uppercase())
        && id.bytes().skip(2).all(|byte| byte.is_ascii_digit());
    is_id && (3..=4).contains(&line.trim().split(',').count())
}

/// Reads the chosen storm from the chosen time on; `None` where a finding says why not.
#[must_use]
pub fn read_hurdat(text: &str, choice: &Choice, notes: &mut Notes) -> Option<Advisory> {
    let tracks = tracks(text, notes);
    let fitting: Vec<&Track<'_>> = tracks
        .iter()
        .filter(|track| {
            choice.storm.as_deref().is_none_or(|wanted| matches_storm(wanted, &track.id, &track.name))
        })
        .collect();
    let [track] = fitting[..] else {
        let ids: Vec<String> = tracks.iter().map(|track| format!("{} {}", track.id, track.name)).collect();
        let found = match &choice.storm {
            Some(wanted) => {
                format!("\"{wanted}\" fits {} of the storms in the file: {}", fitting.len(), listed(&ids))
            }
            None => format!("no storm is chosen; the file holds {}", listed(&ids)),
        };
        let range = tracks.first().map_or(0..0, |track| track.range.clone());
        notes.error("advisory-choose-storm", range, found, "choose one by its id");
        return None;
    };
    if track.lines.len() != track.rows {
        let found = format!("{} announces {} rows, and {} follow", track.id, track.rows, track.lines.len());
        notes.error("advisory-deck-row", track.range.clone(), found, "half a track: fetch the file again");
        return None;
    }
    let mut points: Vec<BestPoint> = Vec::new();
    for (line, range) in &track.lines {
        match row(line, range.clone(), notes) {
            Ok(point) if points.last().is_some_and(|last| last.at >= point.at) => {
                let found = format!(
                    "the time in \"{}\" does not follow the one before it",
                    notes.quote(range.clone())
                );
                notes.error("advisory-deck-row", range.clone(), found, "correct the file, or fetch it again");
            }
            Ok(point) => points.push(point),
            Err(what) => {
                let found = format!("\"{}\": {what}", notes.quote(range.clone()));
                notes.error("advisory-deck-row", range.clone(), found, "correct the file, or fetch it again");
            }
        }
    }
    if notes.has_error() {
        return None;
    }
    let kind = points.first().map_or(String::new(), |point| point.kind.clone());
    let storm = Storm { id: Some(track.id.clone()), name: track.name.clone(), class: kind };
    drill(storm, points, choice, notes)
}

fn tracks<'t>(text: &'t str, notes: &mut Notes) -> Vec<Track<'t>> {
    let mut tracks: Vec<Track<'t>> = Vec::new();
    let mut start = 0;
    for line in text.split_inclusive('\n') {
        let range = start..start + line.trim_end().len();
        start += line.len();
        let line = line.trim_end();
        if is_track_head(line) {
            let mut fields = line.split(',').map(str::trim);
            let id = fields.next().unwrap_or("").to_owned();
            let name = fields.next().unwrap_or("").to_uppercase();
            let rows = fields.next().and_then(|field| field.parse().ok()).unwrap_or(0);
            tracks.push(Track { id, name, rows, range, lines: Vec::new() });
        } else if let Some(track) = tracks.last_mut().filter(|_| !line.is_empty()) {
            track.lines.push((line, range));
        } else if !line.is_empty() {
            let found = format!("\"{}\" stands before the first storm's head", notes.quote(range.clone()));
            notes.error(
                "advisory-deck-row",
                range,
                found,
                "a storm begins with a line such as \"AL062018, FLORENCE, 79,\"",
            );
        }
    }
    tracks
}

fn row(line: &str, range: Range<usize>, notes: &Notes) -> Result<BestPoint, String> {
    let fields: Vec<&str> = line.split(',').map(str::trim).collect();
    let field = |index: usize| fields.get(index).copied().unwrap_or("");
    let (hour, minute) =
        field(1).split_at_checked(2).filter(|_| field(1).len() == 4).ok_or("no time such as 1800")?;
    let minute: u32 = minute.parse().ok().filter(|minute| *minute < 60).ok_or("no time such as 1800")?;
    let at = parse_cycle(&format!("{}{hour}", field(0))).ok_or("no date such as 20180830")?;
    let degrees = |text: &str, plus: &str, minus: &str| {
        let (digits, sign) = match (text.strip_suffix(plus), text.strip_suffix(minus)) {
            (Some(digits), _) => (digits, 1.0),
            (None, Some(digits)) => (digits, -1.0),
            (None, None) => return None,
        };
        let is_plain = !digits.is_empty() && digits.bytes().all(|b| b.is_ascii_digit() || b == b'.');
        is_plain.then(|| digits.parse::<f64>().ok()).flatten().map(|degrees| sign * degrees)
    };
    let position = degrees(field(4), "N", "S").zip(degrees(field(5), "E", "W"));
    let position = position.and_then(|(latitude, longitude)| Position::new(latitude, longitude).ok());
    let known = |index: usize| match field(index).parse::<i64>() {
        Ok(value) if value < 0 => Ok(None),
        Ok(value) => Ok(Some(value as f64)),
        Err(_) => Err(format!("\"{}\" is no whole number", field(index))),
    };
    let mut radii = [None; 3];
    for (index, radii) in radii.iter_mut().enumerate() {
        let mut miles = [None; 4];
        for (offset, miles) in miles.iter_mut().enumerate() {
            *miles = known(8 + 4 * index + offset)?.and_then(|miles| NauticalMiles::new(miles).ok());
        }
        if let [Some(northeast), Some(southeast), Some(southwest), Some(northwest)] = miles {
            *radii = Some(Quadrants { northeast, southeast, southwest, northwest });
        }
    }
    Ok(BestPoint {
        at: at + Duration::minutes(i64::from(minute)),
        position: position.ok_or("no position such as 34.2N, 77.8W")?,
        wind: known(6)?.and_then(|kt| Knots::new(kt).ok()),
        pressure: known(7)?.and_then(|hpa| HectoPascals::new(hpa).ok()),
        kind: field(3).to_owned(),
        seas: None,
        radii,
        place: notes.place(range.clone()),
        range,
    })
}
