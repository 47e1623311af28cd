//! The reader of a forecast that somebody typed in as TOML.
//!
//! For offices whose texts are not read, and for one given over the telephone. Needed: issuer, base time, centre,
//! motion, greatest wind with its averaging period, and the reach of 34 kt winds where such winds blow. What else is
//! known is welcome; what is not is assumed and listed, see [`crate::advisory::assume`].

use crate::advisory::assume::{Sketch, SketchPoint, complete, issued_at_base};
use crate::advisory::forecast::{Advisory, Motion, Quadrants, Reach, Storm};
use crate::advisory::notes::Notes;
use crate::advisory::typed_table::Section;
use crate::advisory::typed_values::{TypedReach, motion, pressure, reach, time};
use crate::finding::fault::Finding;
use crate::geo::position::Position;
use crate::geo::position_text::parse_position;
use crate::time::moment::Minutes;
use crate::units::length::NauticalMiles;
use crate::units::pressure::HectoPascals;
use crate::units::speed::Knots;
use crate::units::wind::Averaging;
use chrono::{DateTime, Duration, Utc};
use toml::de::DeTable;

const FILE_KEYS: [&str; 4] = ["forecast", "storm", "now", "later"];
const FORECAST_KEYS: [&str; 8] =
    ["issuer", "base_time", "issued", "next_due", "number", "corrected", "special", "last_valid"];
const STORM_KEYS: [&str; 3] = ["name", "id", "class"];
const NOW_KEYS: [&str; 10] = [
    "centre",
    "accuracy",
    "motion",
    "max_wind",
    "averaging",
    "gust",
    "pressure",
    "reach_34kt",
    "reach_50kt",
    "reach_64kt",
];
const LATER_KEYS: [&str; 9] =
    ["time", "after", "centre", "max_wind", "gust", "reach_34kt", "reach_50kt", "reach_64kt", "remark"];
const REACH_KEYS: [&str; 3] = ["reach_34kt", "reach_50kt", "reach_64kt"];

/// No forecast reaches farther from its base time.
const LONGEST: Duration = Duration::hours(240);

/// Reads a typed-in forecast; `None` where a finding says why it cannot be used.
#[must_use]
pub fn read_typed(text: &str, notes: &mut Notes) -> Option<Advisory> {
    let (table, faults) = DeTable::parse_recoverable(text);
    for fault in &faults {
        let range = fault.span().unwrap_or(0..0);
        notes.error("advisory-toml-syntax", range, fault.message().to_owned(), "correct the line");
    }
    if !faults.is_empty() {
        return None;
    }
    let file = Section::file(&table);
    file.allow(&FILE_KEYS, notes);
    file.require(&["forecast", "now"], notes);
    let forecast = file.table("forecast", "[forecast]", notes);
    let storm = read_storm(&file.table("storm", "[storm]", notes), notes);
    let now = file.table("now", "[now]", notes);
    let later = file.tables("later", "[[later]]", notes);

    let times = read_times(&forecast, notes);
    let present = read_now(&now, times.as_ref(), notes);
    let points = read_later(&later, times.as_ref(), notes);
    let issuer = forecast.text("issuer", notes).map(|(text, _)| text.trim().to_owned());
    let advisory_number = forecast.whole_number("number", notes);
    let (is_corrected, is_special) = (forecast.is_set("corrected", notes), forecast.is_set("special", notes));
    if notes.has_error() {
        return None;
    }
    let (times, present) = (times?, present?);
    let sketch = Sketch {
        base: times.base,
        motion: present.motion,
        last_valid: times.last_valid,
        now: present.point,
        later: points,
    };
    let mut completed = complete(sketch);
    if times.is_issue_time_assumed {
        completed.assumed.insert(0, issued_at_base());
    }
    Some(Advisory {
        storm,
        issuer: issuer?,
        number: advisory_number,
        is_special,
        is_corrected,
        issued: times.issued,
        base: times.base,
        base_position: completed.points.first().map(|point| point.position),
        averaging: present.averaging,
        accuracy: present.accuracy,
        motion: Some(present.motion),
        pressure: present.pressure,
        next_due: times.next_due,
        is_last: false,
        points: completed.points,
        ends: None,
        quoted_track_errors: None,
        circles: Vec::new(),
        is_drill: false,
        assumed: completed.assumed,
    })
}

struct Times {
    base: DateTime<Utc>,
    issued: DateTime<Utc>,
    is_issue_time_assumed: bool,
    next_due: Option<DateTime<Utc>>,
    last_valid: Option<DateTime<Utc>>,
}

fn read_times(section: &Section, notes: &mut Notes) -> Option<Times> {
    section.allow(&FORECAST_KEYS, notes);
    section.require(&["issuer", "base_time"], notes);
    let mut read = |key: &str| section.parsed(key, "advisory-time-text", notes, time);
    let (base, issued, next_due, last_valid) =
        (read("base_time"), read("issued"), read("next_due"), read("last_valid"));
    let (base, _) = base?;
    let issue = issued.clone().map_or(base, |(issued, _)| issued);
    let spans = [
        ("issued", issued.clone(), base, base + Duration::hours(24), "within 24 h after base_time"),
        ("next_due", next_due.clone(), issue, issue + Duration::hours(48), "within 48 h after issued"),
        (
            "last_valid",
            last_valid.clone(),
            issue,
            base + LONGEST,
            "after issued and within 240 h after base_time",
        ),
    ];
    for (key, value, least, most, allowed) in spans {
        if let Some((instant, range)) = value.filter(|(instant, _)| *instant < least || *instant > most) {
            let found = format!("{key} is {}", instant.format("%Y-%m-%dT%H:%MZ"));
            let place = notes.place(range);
            notes.add(Finding::error(
                "advisory-time-order",
                place,
                found,
                allowed,
                "correct one of the times",
            ));
        }
    }
    Some(Times {
        base,
        issued: issue,
        is_issue_time_assumed: issued.is_none(),
        next_due: next_due.map(|(instant, _)| instant),
        last_valid: last_valid.map(|(instant, _)| instant),
    })
}

fn read_storm(section: &Section, notes: &mut Notes) -> Storm {
    section.allow(&STORM_KEYS, notes);
    let mut read = |key: &str| section.text(key, notes).map(|(text, _)| text.trim().to_uppercase());
    let (name, id, class) = (read("name"), read("id"), read("class"));
    if name.is_none() && id.is_none() {
        let found = "the storm has neither a name nor an id".to_owned();
        let to_do =
            "give one under [storm]: without it a later advisory cannot be told to be of the same storm";
        notes.warning("advisory-no-storm-id", section.range.clone(), found, to_do);
    }
    Storm { id, name: name.unwrap_or_else(|| "UNNAMED".to_owned()), class: class.unwrap_or_default() }
}

struct Present {
    point: SketchPoint,
    motion: Motion,
    averaging: Averaging,
    accuracy: Option<NauticalMiles>,
    pressure: Option<HectoPascals>,
}

fn read_now(section: &Section, times: Option<&Times>, notes: &mut Notes) -> Option<Present> {
    section.allow(&NOW_KEYS, notes);
    section.require(&["centre", "motion", "max_wind", "averaging"], notes);
    let period = |text: &str| {
        Averaging::parse(text)
            .filter(|period| *period != Averaging::Gust3s)
            .ok_or_else(|| format!("\"{text}\" is none of \"1 min\", \"2 min\", \"3 min\", \"10 min\""))
    };
    let code = "advisory-quantity";
    let motion = section.parsed("motion", code, notes, motion);
    let averaging = section.parsed("averaging", code, notes, period);
    let accuracy = section.parsed("accuracy", code, notes, NauticalMiles::parse);
    let pressure = section.parsed("pressure", code, notes, pressure);
    let valid = times.map(|times| times.base);
    let point = read_point(section, valid, notes)?;
    let blows = point.wind.is_some_and(|wind| wind >= Knots::GALE);
    let gale_given = section.text("reach_34kt", notes).is_some();
    if blows && !gale_given {
        section.require(&["reach_34kt"], notes);
    }
    Some(Present {
        motion: motion?.0,
        averaging: averaging?.0,
        accuracy: accuracy.map(|(miles, _)| miles),
        pressure: pressure.map(|(pressure, _)| pressure),
        point,
    })
}

/// What `[now]` and each `[[later]]` share; `None` without a time or a centre, which have their findings.
fn read_point(section: &Section, valid: Option<DateTime<Utc>>, notes: &mut Notes) -> Option<SketchPoint> {
    let code = "advisory-quantity";
    let centre = section.parsed("centre", "advisory-position-text", notes, parse_position);
    let wind = section.parsed("max_wind", code, notes, Knots::parse);
    let gust = section.parsed("gust", code, notes, Knots::parse);
    let reaches = REACH_KEYS.map(|key| section.parsed(key, code, notes, reach));
    let speeds = [Knots::GALE, Knots::STORM, Knots::HURRICANE];
    for (given, speed) in reaches.iter().zip(speeds) {
        let (Some((given, range)), Some((wind, _))) = (given, &wind) else { continue };
        if *wind >= speed && given.reach() == Reach::Given(Quadrants::NONE) {
            let found = format!("no winds of {speed} though the greatest wind is {wind}");
            let to_do = "correct one of the two, or leave the reach out if it is not known";
            notes.error("advisory-zero-radii", range.clone(), found, to_do);
        }
    }
    let remark = section.text("remark", notes).map_or(String::new(), |(text, _)| text.trim().to_uppercase());
    let place = notes.place(section.range.clone());
    let (position, _): (Position, _) = centre?;
    Some(SketchPoint {
        valid: valid?,
        position,
        wind: wind.map(|(wind, _)| wind),
        gust: gust.map(|(gust, _)| gust),
        reaches: reaches.map(|given| given.map(|(given, _): (TypedReach, _)| given)),
        remark,
        place,
    })
}

fn read_later(sections: &[Section], times: Option<&Times>, notes: &mut Notes) -> Vec<SketchPoint> {
    let mut before = times.map(|times| times.base);
    let mut points = Vec::new();
    for section in sections {
        section.allow(&LATER_KEYS, notes);
        section.require(&["centre"], notes);
        let valid = later_time(section, times, notes);
        let latest = times.map(|times| times.last_valid.unwrap_or(times.base + LONGEST));
        if let (Some(valid), Some(earlier), Some(latest)) = (valid, before, latest)
            && (valid <= earlier || valid > latest)
        {
            let found = format!("this position is for {}", valid.format("%Y-%m-%dT%H:%MZ"));
            let allowed = format!(
                "after {} and not after {}",
                earlier.format("%Y-%m-%dT%H:%MZ"),
                latest.format("%Y-%m-%dT%H:%MZ")
            );
            let place = notes.place(section.range.clone());
            let to_do = "put the positions in the order of their times";
            notes.add(Finding::error("advisory-time-order", place, found, allowed, to_do));
        }
        before = valid.or(before);
        points.extend(read_point(section, valid, notes));
    }
    points
}

/// When a later position holds: `time`, or `after` counted from the base time; one of them, not both.
fn later_time(section: &Section, times: Option<&Times>, notes: &mut Notes) -> Option<DateTime<Utc>> {
    let hours = |text: &str| {
        let span = Minutes::parse(text).filter(|span| (1..=14_400).contains(&span.get()));
        span.ok_or_else(|| format!("\"{text}\" is not a time after base_time such as \"24 h\""))
    };
    let time = section.parsed("time", "advisory-time-text", notes, time);
    let after = section.parsed("after", "advisory-time-text", notes, hours);
    match (time, after) {
        (Some(_), Some((_, range))) => {
            let found = "time and after are both given".to_owned();
            notes.error("advisory-time-order", range, found, "keep one of them");
            None
        }
        (Some((time, _)), None) => Some(time),
        (None, Some((after, _))) => Some(times?.base + Duration::minutes(after.get())),
        (None, None) => {
            if section.text("after", notes).is_none() {
                section.require(&["time"], notes);
            }
            None
        }
    }
}
