//! Reads port.toml: the port's name and clock, the exercise, and its places.

use crate::finding::fault::{did_you_mean, quoted};
use crate::finding::table::{Item, Keys};
use crate::geo::exposure::{Exposure, ExposureClass, ExposureSector};
use crate::geo::position::Position;
use crate::geo::position_text::parse_position;
use crate::port::codes;
use crate::port::harbour::Place;
use crate::port::kind::Kind;
use crate::port::known::Known;
use crate::text::quantity;
use crate::time::clock::PortClock;
use chrono::{DateTime, Utc};

/// What port.toml says of the port as a whole.
#[derive(Clone, Debug)]
pub struct Head {
    /// The port's name.
    pub name: String,
    /// What every page of an invented port says; empty for a real one.
    pub invented: String,
    /// Who declares stages.
    pub authority: String,
    /// Whose warnings count.
    pub official_source: String,
    /// Names of its issuers as their products write them.
    pub official_issuers: Vec<String>,
    /// The place at which the head of a plan gives the gale's arrival.
    pub reference: String,
}

/// The port's clock, if `[port]` names a zone that exists. It is read first: other files hold local times.
#[must_use]
pub fn read_clock(file: &mut Keys<'_>) -> Option<PortClock> {
    // [port] is asked for again, with its findings, by `read_head`.
    let item = file.optional("port").filter(Item::is_table)?;
    let zone = item.keys("[port]")?.optional("zone")?;
    let name = zone.text()?;
    match PortClock::of(name) {
        Ok(clock) => Some(clock),
        Err(error) => {
            let allowed = "names of the IANA time zone database, such as \"Etc/GMT+3\" (3 h behind UTC)";
            zone.fault(codes::UNKNOWN_ZONE, error.to_string(), allowed, "correct the name");
            None
        }
    }
}

/// The table `[port]`.
#[must_use]
pub fn read_head(file: &mut Keys<'_>, known: &Known) -> Option<Head> {
    let mut keys = file.required("port")?.keys("[port]")?;
    // Read before, by `read_clock`.
    let zone = keys.required("zone");
    let name = keys.required("name").and_then(|item| item.text());
    let authority = keys.required("authority").and_then(|item| item.text());
    let official_source = keys.required("official_source").and_then(|item| item.text());
    let official_issuers = keys.one_or_more("official_issuer").iter().map(issuer).collect::<Option<Vec<_>>>();
    let reference =
        keys.required("reference").and_then(|item| known.refer(&item, Kind::Place, codes::UNKNOWN_PLACE));
    let invented = keys.text_or_empty("invented");
    let _ = keys.text_or_empty("source");
    keys.finish();
    zone?;
    Some(Head {
        name: name?.to_owned(),
        invented,
        authority: authority?.to_owned(),
        official_source: official_source?.to_owned(),
        official_issuers: official_issuers?,
        reference: reference?,
    })
}

/// The table `[exercise]`: where the clock stands in a drill.
#[must_use]
pub fn read_exercise(file: &mut Keys<'_>, clock: Option<&PortClock>) -> Option<DateTime<Utc>> {
    let mut keys = file.optional("exercise")?.keys("[exercise]")?;
    let time = keys.required("clock").and_then(|item| quantity::instant(&item, clock));
    keys.finish();
    time
}

/// The tables `[[place]]`.
#[must_use]
pub fn read_places(file: &mut Keys<'_>, known: &Known) -> Vec<Place> {
    let read: Vec<(Place, Option<Item<'_>>)> =
        file.tables("place").iter().filter_map(|item| read_place(item, known)).collect();
    for (place, counts_from) in &read {
        let target = read.iter().map(|(other, _)| other).find(|other| other.id == place.counts_from);
        if let (Some(item), Some(target)) = (counts_from, target)
            && target.counts_from != target.id
        {
            item.fault(
                codes::NOT_A_REFERENCE,
                format!("\"{}\" counts from \"{}\" itself", target.id, target.counts_from),
                "a place that others count from counts from itself",
                format!("write counts_from = \"{}\"", target.counts_from),
            );
        }
    }
    read.into_iter().map(|(place, _)| place).collect()
}

fn read_place<'t>(item: &Item<'t>, known: &Known) -> Option<(Place, Option<Item<'t>>)> {
    let mut keys = item.keys("a place")?;
    let id = keys.required("id").and_then(|item| item.as_text());
    let name = keys.required("name").and_then(|item| item.text());
    let position = keys.required("position").and_then(|item| read_position(&item));
    let exposure = keys.required("exposure").and_then(|item| read_exposure(&item));
    let official_place = keys.optional("official_place").map(|item| item.text().map(str::to_owned));
    let counts_item = keys.optional("counts_from");
    let counts_from = counts_item.map(|item| known.refer(&item, Kind::Place, codes::UNKNOWN_PLACE));
    let _ = keys.text_or_empty("source");
    keys.finish();
    let id = id?;
    let counts_from = match counts_from {
        Some(other) => other?,
        None => id.to_owned(),
    };
    let place = Place {
        id: id.to_owned(),
        name: name?.to_owned(),
        position: position?,
        exposure: exposure?,
        official_place: match official_place {
            Some(listed) => Some(listed?),
            None => None,
        },
        counts_from,
    };
    Some((place, counts_item))
}

/// Words of an issuer's name, enough to know it by.
fn issuer(item: &Item<'_>) -> Option<String> {
    let name = item.text()?.trim();
    if name.chars().count() < 4 {
        item.bad_value(
            "this is too short to know an issuer by",
            "words of its name, as in \"NATIONAL HURRICANE CENTER\"",
        );
        return None;
    }
    Some(name.to_owned())
}

fn read_position(item: &Item<'_>) -> Option<Position> {
    match parse_position(item.text()?) {
        Ok(position) => Some(position),
        Err(error) => {
            let allowed = "latitude first, such as \"22 18.0 N 040 48.0 W\" or \"22.3 N 40.8 W\"";
            item.fault(codes::BAD_POSITION, error.to_string(), allowed, "correct the position");
            None
        }
    }
}

fn read_exposure(item: &Item<'_>) -> Option<Exposure> {
    if !item.is_table() {
        return read_class(item).map(Exposure::all_round);
    }
    let mut keys = item.keys("an exposure")?;
    let otherwise = keys.required("otherwise").and_then(|item| read_class(&item));
    let sectors: Vec<Option<ExposureSector>> = keys.one_or_more("sectors").iter().map(read_sector).collect();
    keys.finish();
    Some(Exposure { otherwise: otherwise?, sectors: sectors.into_iter().collect::<Option<Vec<_>>>()? })
}

fn read_sector(item: &Item<'_>) -> Option<ExposureSector> {
    let mut keys = item.keys("a sector of winds")?;
    let from = keys.required("from").and_then(|item| quantity::bearing(&item));
    let to = keys.required("to").and_then(|item| quantity::bearing(&item));
    let class = keys.required("class").and_then(|item| read_class(&item));
    keys.finish();
    let (from, to) = (from?, to?);
    if from.angle_to(to) < 1.0 {
        item.bad_value(
            "this sector has no width",
            "a sector that ends at least 1 deg clockwise of its beginning",
        );
        return None;
    }
    Some(ExposureSector { from, to, class: class? })
}

fn read_class(item: &Item<'_>) -> Option<ExposureClass> {
    let text = item.text()?;
    let class = ExposureClass::parse(text);
    if class.is_none() {
        let words: Vec<&str> = ExposureClass::ALL.iter().map(|class| class.word()).collect();
        item.fault(
            codes::TABLE.unknown_word,
            format!("{} = \"{text}\" is not an exposure", item.key()),
            format!("exposures are {}", quoted(&words)),
            did_you_mean(text, words, "use one of these words"),
        );
    }
    class
}
