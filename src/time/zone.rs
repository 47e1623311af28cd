//! Which offset from UTC holds when, in one time zone: compiled-in data with the corrections of a newer release.

use crate::time::moment::{Minutes, Moment};
use chrono::{DateTime, NaiveDateTime, Offset, TimeZone, Utc};
use chrono_tz::{OffsetName, TZ_VARIANTS, Tz};
use serde::Deserialize;
use std::collections::BTreeMap;
use std::sync::LazyLock;

/// The corrections that go with this version of the program (public domain; the file names its source).
const CORRECTIONS: &str = include_str!("../../rules/zone-corrections.toml");

/// Read once: the text never changes while the program runs.
static TABLE: LazyLock<Result<ZoneTable, ZoneTableError>> = LazyLock::new(|| ZoneTable::read(CORRECTIONS));

/// How far a zone's clocks are ahead of UTC, and what its people call that.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct ZoneOffset {
    /// Minutes east of UTC: -180 is three hours behind.
    pub east: Minutes,
    /// "AST", "EDT"; "-03" where there are no letters.
    pub abbreviation: String,
}

/// A time zone that cannot be used.
#[derive(Clone, Debug, PartialEq, Eq, thiserror::Error)]
pub enum ZoneError {
    /// No zone has this name.
    #[error("\"{name}\" is not a time zone{}", nearest_words(.nearest))]
    Unknown {
        /// The name as found.
        name: String,
        /// The names most like it, best first; none if none is alike.
        nearest: Vec<String>,
    },
    /// A fixed offset beyond any clock on earth.
    #[error("an offset of {0} from UTC is outside -14 h to 14 h")]
    Offset(Minutes),
    /// The program's own table of corrections does not read: the build is at fault.
    #[error(transparent)]
    Table(#[from] ZoneTableError),
}

/// A fault in a table of zone corrections.
#[derive(Clone, Debug, PartialEq, Eq, thiserror::Error)]
pub enum ZoneTableError {
    /// Not the TOML that such a table is.
    #[error("the table of time-zone corrections does not read: {0}")]
    Form(String),
    /// A time that is not written 2026-11-01T05:00Z.
    #[error("\"{0}\" in the table of time-zone corrections is not a time such as 2026-11-01T05:00Z")]
    Time(String),
    /// Stretches of a zone that are empty, overlap or are out of order.
    #[error("the stretches of {zone} from {from} on are empty, overlap or are out of order")]
    Order {
        /// The zone.
        zone: String,
        /// Start of the later stretch.
        from: Moment,
    },
}

fn nearest_words(nearest: &[String]) -> String {
    if nearest.is_empty() {
        "; names look like America/Puerto_Rico".to_owned()
    } else {
        format!("; did you mean {}?", nearest.join(" or "))
    }
}

/// One zone's offsets at all times.
#[derive(Clone, Debug)]
pub struct Zone {
    name: String,
    base: Base,
    corrections: Vec<Stretch>,
}

#[derive(Clone, Copy, Debug)]
enum Base {
    Compiled(Tz),
    Fixed(Minutes),
}

#[derive(Clone, Debug, PartialEq, Eq)]
struct Stretch {
    from: Moment,
    until: Moment,
    offset: ZoneOffset,
}

impl Zone {
    /// The zone with an IANA name, such as "America/Puerto_Rico"; capitals matter.
    ///
    /// # Errors
    /// [`ZoneError::Unknown`], with the nearest names.
    pub fn named(name: &str) -> Result<Zone, ZoneError> {
        let Ok(tz) = name.parse::<Tz>() else {
            return Err(ZoneError::Unknown { name: name.to_owned(), nearest: nearest_names(name) });
        };
        let table = TABLE.as_ref().map_err(ZoneTableError::clone)?;
        let corrections = table.zones.get(name).cloned().unwrap_or_default();
        Ok(Zone { name: name.to_owned(), base: Base::Compiled(tz), corrections })
    }

    /// UTC itself.
    #[must_use]
    pub fn utc() -> Zone {
        Zone { name: "UTC".to_owned(), base: Base::Fixed(Minutes::ZERO), corrections: Vec::new() }
    }

    /// A zone that is always `east` of UTC, for a port whose law has changed since this program was made.
    ///
    /// # Errors
    /// [`ZoneError::Offset`] beyond 14 hours either way.
    pub fn fixed(east: Minutes) -> Result<Zone, ZoneError> {
        if east.get().abs() > 14 * 60 {
            return Err(ZoneError::Offset(east));
        }
        let name =
            if east == Minutes::ZERO { "UTC".to_owned() } else { format!("UTC{}", numeric_name(east)) };
        Ok(Zone { name, base: Base::Fixed(east), corrections: Vec::new() })
    }

    /// Its name.
    #[must_use]
    pub fn name(&self) -> &str {
        &self.name
    }

    /// The offset that holds at `instant`; seconds of an offset, known before 1972 only, are left out.
    #[must_use]
    pub fn offset_at(&self, instant: DateTime<Utc>) -> ZoneOffset {
        let moment = Moment::at_or_before(instant);
        let next = self.corrections.partition_point(|stretch| stretch.from <= moment);
        let corrected = next.checked_sub(1).and_then(|last| self.corrections.get(last));
        if let Some(stretch) = corrected.filter(|stretch| moment < stretch.until) {
            return stretch.offset.clone();
        }
        match self.base {
            Base::Fixed(east) if east == Minutes::ZERO => ZoneOffset { east, abbreviation: "UTC".to_owned() },
            Base::Fixed(east) => ZoneOffset { east, abbreviation: numeric_name(east) },
            Base::Compiled(tz) => compiled_offset(tz, instant),
        }
    }

    /// What may be wrong about local times at `at`, in words; `None` while the data is known to cover it.
    #[must_use]
    pub fn doubt_at(&self, at: Moment) -> Option<String> {
        let (Base::Compiled(_), Ok(table)) = (self.base, TABLE.as_ref()) else { return None };
        (at >= table.checked_until).then(|| {
            format!(
                "local times of {} after {} follow old rules: the zone data was checked against IANA release {} up \
                 to then only",
                self.name, table.checked_until, table.release
            )
        })
    }
}

/// What the compiled-in data alone says, without corrections: for comparing it with a newer release.
#[must_use]
pub fn compiled_offset(tz: Tz, instant: DateTime<Utc>) -> ZoneOffset {
    let offset = tz.offset_from_utc_datetime(&instant.naive_utc());
    let east = Minutes::new(i64::from(offset.fix().local_minus_utc()) / 60);
    let abbreviation = offset.abbreviation().map_or_else(|| numeric_name(east), str::to_owned);
    ZoneOffset { east, abbreviation }
}

/// The release of the IANA time zone database up to which the zones are corrected, such as "2026f".
#[must_use]
pub fn release() -> Option<&'static str> {
    TABLE.as_ref().ok().map(|table| table.release.as_str())
}

/// "-03", "+0530": what the IANA database calls an offset without letters.
fn numeric_name(east: Minutes) -> String {
    let (sign, size) = (if east.get() < 0 { '-' } else { '+' }, east.get().abs());
    match size % 60 {
        0 => format!("{sign}{:02}", size / 60),
        minutes => format!("{sign}{:02}{minutes:02}", size / 60),
    }
}

/// Up to three zone names that look like `name`, best first; a city alone is enough.
fn nearest_names(name: &str) -> Vec<String> {
    /// Below this two names have little in common. Our choice, by trying misspelt names.
    const LEAST_LIKENESS: f64 = 0.85;
    /// The longest zone name has 32 letters; a longer text is something else, and slow to compare.
    const MOST_LETTERS: usize = 64;
    if name.len() > MOST_LETTERS {
        return Vec::new();
    }
    let wanted = name.trim().to_lowercase().replace(' ', "_");
    let mut scored: Vec<(f64, &str)> = TZ_VARIANTS
        .iter()
        .map(|tz| {
            let known = tz.name().to_lowercase();
            let city = known.rsplit('/').next().unwrap_or_default();
            let wanted_city = wanted.rsplit('/').next().unwrap_or_default();
            let whole = strsim::jaro_winkler(&wanted, &known);
            // The right city in the wrong region is a likelier slip than the reverse.
            (whole.max(strsim::jaro_winkler(wanted_city, city) * 0.99), tz.name())
        })
        .filter(|(likeness, _)| *likeness >= LEAST_LIKENESS)
        .collect();
    scored.sort_by(|a, b| b.0.total_cmp(&a.0).then(a.1.cmp(b.1)));
    scored.into_iter().take(3).map(|(_, known)| known.to_owned()).collect()
}

/// Corrections by zone, as a file gives them.
#[derive(Clone, Debug)]
struct ZoneTable {
    release: String,
    checked_until: Moment,
    zones: BTreeMap<String, Vec<Stretch>>,
}

#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
struct RawTable {
    release: String,
    checked_from: String,
    checked_until: String,
    correction: Vec<RawCorrection>,
}

#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
struct RawCorrection {
    zones: Vec<String>,
    stretches: Vec<RawStretch>,
}

#[derive(Deserialize)]
#[serde(deny_unknown_fields)]
struct RawStretch {
    from: String,
    until: String,
    east_minutes: i64,
    abbreviation: String,
}

impl ZoneTable {
    fn read(text: &str) -> Result<ZoneTable, ZoneTableError> {
        let raw: RawTable = toml::from_str(text).map_err(|error| ZoneTableError::Form(error.to_string()))?;
        read_moment(&raw.checked_from)?;
        let checked_until = read_moment(&raw.checked_until)?;
        let mut zones = BTreeMap::new();
        for correction in raw.correction {
            let stretches =
                correction.stretches.iter().map(checked_stretch).collect::<Result<Vec<_>, _>>()?;
            for zone in correction.zones {
                in_order(&zone, &stretches)?;
                zones.insert(zone, stretches.clone());
            }
        }
        Ok(ZoneTable { release: raw.release, checked_until, zones })
    }
}

fn checked_stretch(raw: &RawStretch) -> Result<Stretch, ZoneTableError> {
    let offset = ZoneOffset { east: Minutes::new(raw.east_minutes), abbreviation: raw.abbreviation.clone() };
    Ok(Stretch { from: read_moment(&raw.from)?, until: read_moment(&raw.until)?, offset })
}

fn in_order(zone: &str, stretches: &[Stretch]) -> Result<(), ZoneTableError> {
    let mut free = Moment::EARLIEST;
    for stretch in stretches {
        if stretch.from < free || stretch.until <= stretch.from {
            return Err(ZoneTableError::Order { zone: zone.to_owned(), from: stretch.from });
        }
        free = stretch.until;
    }
    Ok(())
}

fn read_moment(text: &str) -> Result<Moment, ZoneTableError> {
    NaiveDateTime::parse_from_str(text, "%Y-%m-%dT%H:%MZ")
        .map(|utc| Moment::at_or_before(utc.and_utc()))
        .map_err(|_| ZoneTableError::Time(text.to_owned()))
}

#[cfg(test)]
mod tests {
    use super::{CORRECTIONS, Zone, ZoneError, ZoneTable, ZoneTableError};
    use crate::time::moment::Minutes;

    #[test]
    fn the_programs_own_corrections_read_and_name_known_zones() {
        let table = ZoneTable::read(CORRECTIONS).unwrap();
        assert!(table.zones.len() >= 15, "{}", table.zones.len());
        for zone in table.zones.keys() {
            assert!(zone.parse::<chrono_tz::Tz>().is_ok(), "{zone}");
        }
    }

    #[test]
    fn a_table_with_overlapping_stretches_or_bad_times_is_refused() {
        let table = |from: &str, until: &str| {
            ZoneTable::read(&format!(
                "release = 'x'\nchecked_from = '2026-01-01T00:00Z'\nchecked_until = '2029-01-01T00:00Z'\n\
                 [[correction]]\nzones = ['Cuba']\nstretches = [\
                 {{ from = '2026-11-01T05:00Z', until = '2027-03-14T05:00Z', east_minutes = -240, abbreviation = 'CDT' }},\
                 {{ from = '{from}', until = '{until}', east_minutes = -240, abbreviation = 'CDT' }}]"
            ))
            .map(|_| ())
        };
        assert_eq!(table("2027-03-14T05:00Z", "2027-03-15T05:00Z"), Ok(()));
        assert!(matches!(table("2027-03-13T05:00Z", "2027-03-15T05:00Z"), Err(ZoneTableError::Order { .. })));
        assert!(matches!(table("2027-03-14T05:00Z", "2027-03-14T05:00Z"), Err(ZoneTableError::Order { .. })));
        assert!(matches!(table("2027-03-14", "2027-03-15T05:00Z"), Err(ZoneTableError::Time(_))));
        assert!(matches!(ZoneTable::read("release = 3"), Err(ZoneTableError::Form(_))));
    }

    #[test]
    fn an_unknown_zone_is_answered_with_the_nearest_names() {
        let nearest = |name: &str| match Zone::named(name) {
            Err(ZoneError::Unknown { nearest, .. }) => nearest,
            other => panic!("{name}: {other:?}"),
        };
        assert_eq!(nearest("America/Havanna")[0], "America/Havana");
        assert_eq!(nearest("america/puerto rico")[0], "America/Puerto_Rico");
        assert_eq!(nearest("Brisbane")[0], "Australia/Brisbane");
        assert_eq!(nearest("Europe/Manila")[0], "Asia/Manila");
        assert_eq!(nearest("qqqq"), Vec::<String>::new());
        assert_eq!(nearest(""), Vec::<String>::new());
        assert_eq!(nearest(&"America/Havana".repeat(9)), Vec::<String>::new());
    }

    #[test]
    fn a_fixed_offset_beyond_any_clock_is_refused() {
        assert_eq!(Zone::fixed(Minutes::new(345)).unwrap().name(), "UTC+0545");
        assert_eq!(Zone::fixed(Minutes::new(841)).unwrap_err(), ZoneError::Offset(Minutes::new(841)));
    }
}
