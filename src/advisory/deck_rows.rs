//! The rows of a deck (ATCF a-deck and b-deck): one line for each storm, base time, technique, forecast hour and wind.
//!
//! Format: "Best Track/Objective Aid/Wind Radii Format" of the United States Navy's forecasting system. Fields are parted
//! by commas and padded with blanks; later fields may be missing. Zero means "not given" for pressure, gusts and motion.

use crate::advisory::choice::parse_cycle;
use crate::advisory::forecast::{Motion, Quadrants, Seas};
use crate::advisory::notes::Notes;
use crate::geo::position::Position;
use crate::units::bearing::Bearing;
use crate::units::length::{METRES_PER_FOOT, Metres, NauticalMiles};
use crate::units::pressure::HectoPascals;
use crate::units::speed::Knots;
use chrono::{DateTime, Datelike, Duration, Utc};
use std::ops::Range;

/// One line of a deck.
#[derive(Clone, Debug, PartialEq)]
pub struct DeckRow {
    /// "AL": the basin.
    pub basin: String,
    /// The storm's number within basin and season.
    pub number: u32,
    /// Base time; of a best track the time itself, with minutes.
    pub base: DateTime<Utc>,
    /// "OFCL", "BEST".
    pub technique: String,
    /// Hours after the base time; negative before it.
    pub tau_h: i64,
    /// The centre; `None` where the deck writes 0N 0W or nothing.
    pub position: Option<Position>,
    /// Greatest wind; `None` if not given.
    pub wind: Option<Knots>,
    /// Central pressure; `None` if not given.
    pub pressure: Option<HectoPascals>,
    /// "HU", "TS".
    pub kind: String,
    /// Which wind the radii are of, in kt; 0 if of none.
    pub radii_of: f64,
    /// The radii; `None` where their code is not one of circle or quadrants, or where they are not all there.
    pub radii: Option<Quadrants>,
    /// Whether the radii have a code that is not read.
    pub has_odd_code: bool,
    /// Gusts; `None` if not given.
    pub gust: Option<Knots>,
    /// Motion; `None` if not given.
    pub motion: Option<Motion>,
    /// "FLORENCE"; empty if not given.
    pub name: String,
    /// Reach of high seas; `None` if not given.
    pub seas: Option<Seas>,
    /// Its bytes.
    pub range: Range<usize>,
}

/// A line that could not be read, and its technique if that could.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct DamagedRow {
    /// Its technique; empty if unreadable.
    pub technique: String,
    /// What is wrong with it.
    pub what: String,
    /// Its bytes.
    pub range: Range<usize>,
}

/// A season's storm as a deck names it, its year that of the season.
#[derive(Clone, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub struct DeckStorm {
    /// "AL".
    pub basin: String,
    /// 6.
    pub number: u32,
    /// 2018.
    pub season: i32,
}

impl DeckStorm {
    /// "AL062018".
    #[must_use]
    pub fn id(&self) -> String {
        format!("{}{:02}{}", self.basin, self.number, self.season)
    }
}

/// Whether a line looks like one of a deck: two letters, a number, a base time.
#[must_use]
pub fn is_deck_line(line: &str) -> bool {
    let mut fields = line.split(',').map(str::trim);
    let basin = fields.next().is_some_and(is_basin);
    let number = fields.next().is_some_and(|field| field.len() <= 3 && field.parse::<u32>().is_ok());
    basin && number && fields.next().is_some_and(|field| parse_cycle(field).is_some())
}

fn is_basin(field: &str) -> bool {
    field.len() == 2 && field.bytes().all(|byte| byte.is_ascii_uppercase())
}

/// All rows of a deck, and the lines that could not be read.
#[must_use]
pub fn read_rows(text: &str) -> (Vec<DeckRow>, Vec<DamagedRow>) {
    let (mut rows, mut damaged) = (Vec::new(), Vec::new());
    let (mut start, mut fields_before) = (0, 0);
    for line in text.split_inclusive('\n') {
        let range = start..start + line.trim_end().len();
        start += line.len();
        if line.trim().is_empty() {
            continue;
        }
        let fields = line.split(',').count();
        // A row cut between two digits of a figure looks whole but for its length.
        let is_cut = !line.ends_with('\n') && fields < fields_before;
        fields_before = fields;
        match read_row(line.trim_end(), range.clone()) {
            Ok(_) if is_cut => {
                let technique = String::new();
                damaged.push(DamagedRow { technique, what: "the last row is cut short".to_owned(), range });
            }
            Ok(row) => rows.push(row),
            Err(what) => {
                let technique = line.split(',').nth(4).map_or("", str::trim).to_owned();
                damaged.push(DamagedRow { technique, what, range });
            }
        }
    }
    (rows, damaged)
}

/// A row goes at least as far as the kind of storm; decks leave out what comes later.
const LEAST_FIELDS: usize = 11;

fn read_row(line: &str, range: Range<usize>) -> Result<DeckRow, String> {
    let fields: Vec<&str> = line.split(',').map(str::trim).collect();
    let field = |index: usize| fields.get(index).copied().unwrap_or("");
    if fields.len() < LEAST_FIELDS {
        return Err("it ends before the kind of storm".to_owned());
    }
    let basin = Some(field(0)).filter(|basin| is_basin(basin)).ok_or("no basin such as AL")?;
    let number =
        field(1).parse().ok().filter(|number| *number <= 99).ok_or("no storm number from 0 to 99")?;
    let hour = parse_cycle(field(2)).ok_or("no base time such as 2018083012")?;
    let technique = Some(field(4)).filter(|name| !name.is_empty()).ok_or("no technique")?;
    let is_best = technique == "BEST";
    let minutes = if is_best { field(3).parse().unwrap_or(0) } else { 0 };
    let tau_h = field(5).parse::<i64>().ok().filter(|tau| (-120..=400).contains(tau));
    let tau_h = tau_h.ok_or("no forecast hour")?;
    let position =
        position(field(6), field(7)).ok_or("no position such as 128N, 179W in tenths of a degree")?;
    let wind = number_or_zero(field(8)).ok_or("no greatest wind")?;
    let (radii, has_odd_code) = radii(field(12), [13, 14, 15, 16].map(field))?;
    let given = |index: usize| number_or_zero(field(index)).filter(|value| *value > 0.0);
    Ok(DeckRow {
        basin: basin.to_owned(),
        number,
        base: hour + Duration::minutes(i64::from(u8::min(minutes, 59))),
        technique: technique.to_owned(),
        tau_h,
        position,
        wind: Some(wind).filter(|wind| *wind > 0.0).and_then(|wind| Knots::new(wind).ok()),
        pressure: given(9).and_then(|hpa| HectoPascals::new(hpa).ok()),
        kind: field(10).to_owned(),
        radii_of: number_or_zero(field(11)).ok_or("the wind of the radii is no number")?,
        radii,
        has_odd_code,
        gust: given(20).and_then(|kt| Knots::new(kt).ok()),
        motion: given(26).and_then(|kt| {
            Some(Motion::Towards(Bearing::new(field(25).parse().ok()?).ok()?, Knots::new(kt).ok()?))
        }),
        name: field(27).to_uppercase(),
        seas: seas(field(29), field(30), [31, 32, 33, 34].map(field)),
        range,
    })
}

/// A number of digits; blank and negative ones ("-99", "-999") are how decks leave a figure out.
fn number_or_zero(field: &str) -> Option<f64> {
    if field.is_empty() {
        return Some(0.0);
    }
    let digits = field.strip_prefix('-').unwrap_or(field);
    let is_plain = !digits.is_empty() && digits.len() <= 5 && digits.bytes().all(|b| b.is_ascii_digit());
    is_plain.then(|| if digits.len() < field.len() { Some(0.0) } else { digits.parse().ok() }).flatten()
}

/// "128N", "179W": tenths of a degree; `Some(None)` for 0N 0W, `None` if unreadable.
fn position(latitude: &str, longitude: &str) -> Option<Option<Position>> {
    let degrees = |field: &str, plus: char, minus: char| {
        let sign = if field.ends_with(plus) { 1.0 } else { -1.0 };
        let digits = field.strip_suffix([plus, minus])?;
        let is_plain = !digits.is_empty() && digits.len() <= 4 && digits.bytes().all(|b| b.is_ascii_digit());
        is_plain.then(|| digits.parse::<f64>().ok()).flatten().map(|tenths| sign * tenths / 10.0)
    };
    if latitude.is_empty() && longitude.is_empty() {
        return Some(None);
    }
    let (latitude, longitude) = (degrees(latitude, 'N', 'S')?, degrees(longitude, 'E', 'W')?);
    if latitude.abs() < 0.05 && longitude.abs() < 0.05 {
        return Some(None);
    }
    Position::new(latitude, longitude).ok().map(Some)
}

/// Quadrants from a code and its four fields: AAA is a full circle, NEQ begins with the north-east quadrant, and so on.
fn radii(code: &str, fields: [&str; 4]) -> Result<(Option<Quadrants>, bool), String> {
    let miles = fields.map(number_or_zero);
    let [Some(a), Some(b), Some(c), Some(d)] = miles else { return Err("a radius is no number".to_owned()) };
    let in_order = match code {
        // A radius that is not there at all leaves all four out: half a line must not look like zeros.
        _ if fields.iter().all(|field| field.is_empty()) => return Ok((None, false)),
        "AAA" => [a; 4],
        _ if fields.iter().any(|field| field.is_empty()) => {
            return Err("one of the four radii is missing".to_owned());
        }
        "NEQ" => [a, b, c, d],
        "SEQ" => [d, a, b, c],
        "SWQ" => [c, d, a, b],
        "NWQ" => [b, c, d, a],
        "" if [a, b, c, d].iter().all(|radius| radius.abs() < 0.5) => return Ok((None, false)),
        _ => return Ok((None, true)),
    };
    let [Ok(northeast), Ok(southeast), Ok(southwest), Ok(northwest)] = in_order.map(NauticalMiles::new)
    else {
        return Err("a radius is out of range".to_owned());
    };
    Ok((Some(Quadrants { northeast, southeast, southwest, northwest }), false))
}

/// The height of the seas in feet, the code of their radii, and these; decks write all zero where nothing is known.
fn seas(height: &str, code: &str, fields: [&str; 4]) -> Option<Seas> {
    let feet = number_or_zero(height).filter(|feet| *feet > 0.0)?;
    let reach = radii(code, fields).ok()?.0.filter(|reach| *reach != Quadrants::NONE)?;
    Some(Seas { height: Metres::new(feet * METRES_PER_FOOT).ok()?, reach })
}

/// A storm is the same as long as its rows are no farther apart than this: a number is used once a season.
const SAME_STORM_WITHIN: Duration = Duration::days(30);

/// The storms of a deck with their rows in order of base time, technique and hour, storms in the order of their ids.
#[must_use]
pub fn by_storm(mut rows: Vec<DeckRow>) -> Vec<(DeckStorm, Vec<DeckRow>)> {
    rows.sort_by(|a, b| (&a.basin, a.number, a.base).cmp(&(&b.basin, b.number, b.base)));
    let mut storms: Vec<(DeckStorm, Vec<DeckRow>)> = Vec::new();
    for row in rows {
        let same = storms.last_mut().filter(|(storm, rows)| {
            let is_near = rows.last().is_some_and(|last| row.base - last.base <= SAME_STORM_WITHIN);
            storm.basin == row.basin && storm.number == row.number && is_near
        });
        if let Some((_, rows)) = same {
            rows.push(row);
        } else {
            let storm = DeckStorm {
                basin: row.basin.clone(),
                number: row.number,
                season: season(&row.basin, row.base),
            };
            storms.push((storm, vec![row]));
        }
    }
    for (_, rows) in &mut storms {
        rows.sort_by(|a, b| (a.base, &a.technique, a.tau_h).cmp(&(b.base, &b.technique, b.tau_h)));
    }
    storms
}

/// The season of a time: in the southern hemisphere it begins in July and bears the year in which it ends.
#[must_use]
pub fn season(basin: &str, at: DateTime<Utc>) -> i32 {
    if basin == "SH" && at.month() >= 7 { at.year() + 1 } else { at.year() }
}

/// Notes lines that could not be read: an error where they may belong to what was chosen, else one warning for all.
pub fn note_damaged(damaged: &[DamagedRow], technique: &str, notes: &mut Notes) {
    let may_belong = |row: &DamagedRow| row.technique.is_empty() || row.technique == technique;
    for row in damaged.iter().filter(|row| may_belong(row)) {
        let found = format!("\"{}\": {}", notes.quote(row.range.clone()), row.what);
        let to_do = "half a row may be half a deck: fetch the file again";
        notes.error("advisory-deck-row", row.range.clone(), found, to_do);
    }
    let others: Vec<&DamagedRow> = damaged.iter().filter(|row| !may_belong(row)).collect();
    if let Some(first) = others.first() {
        let found = format!(
            "{} of other techniques could not be read, first: {}",
            rows_word(others.len()),
            first.what
        );
        notes.warning("advisory-deck-row", first.range.clone(), found, "they were left out; no others were");
    }
}

fn rows_word(count: usize) -> String {
    if count == 1 { "1 row".to_owned() } else { format!("{count} rows") }
}
