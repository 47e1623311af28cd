//! Reads berths.toml, ships.toml and plant.toml.

use crate::finding::table::{Item, Keys};
use crate::port::codes;
use crate::port::fleet::{Berth, OwnValue, Plant, Ship};
use crate::port::kind::Kind;
use crate::port::known::Known;
use crate::text::quantity;
use crate::time::clock::PortClock;
use crate::time::moment::Minutes;
use std::collections::BTreeMap;

/// The greatest gross tonnage that is taken for true (our choice): the largest ships measure about 230,000 to 260,000.
const MOST_GROSS_TONNAGE: u32 = 500_000;

/// The longest ship that is taken for true, in metres (our choice): the longest ever built measured under 500.
const LONGEST_SHIP: f64 = 500.0;

/// The deepest draught that is taken for true, in metres (our choice).
const DEEPEST_DRAUGHT: f64 = 30.0;

/// The most of anything that a thing may have for itself (our choice).
const MOST_OF_ITS_OWN: u32 = 100_000;

/// The tables `[[berth]]`.
#[must_use]
pub fn read_berths(file: &mut Keys<'_>, known: &Known, clock: Option<&PortClock>) -> Vec<Berth> {
    file.tables("berth").iter().filter_map(|item| read_berth(item, known, clock)).collect()
}

fn read_berth(item: &Item<'_>, known: &Known, clock: Option<&PortClock>) -> Option<Berth> {
    let mut keys = item.keys("a berth")?;
    let id = keys.required("id").and_then(|item| item.as_text());
    let name = keys.required("name").and_then(|item| item.text());
    let place = keys.required("place").and_then(|item| known.refer(&item, Kind::Place, codes::UNKNOWN_PLACE));
    let operator = keys.text_or_empty("operator");
    let (tags, own) = read_tags_and_own(&mut keys, clock);
    keys.finish();
    Some(Berth { id: id?.to_owned(), name: name?.to_owned(), place: place?, operator, tags, own: own? })
}

/// The tables `[[ship]]`.
#[must_use]
pub fn read_ships(file: &mut Keys<'_>, known: &Known, clock: Option<&PortClock>) -> Vec<Ship> {
    file.tables("ship").iter().filter_map(|item| read_ship(item, known, clock)).collect()
}

fn read_ship(item: &Item<'_>, known: &Known, clock: Option<&PortClock>) -> Option<Ship> {
    let mut keys = item.keys("a ship")?;
    let id = keys.required("id").and_then(|item| item.as_text());
    let name = keys.required("name").and_then(|item| item.text());
    let kind = keys.required("kind").and_then(|item| item.text());
    let berth = keys.required("berth").and_then(|item| known.refer(&item, Kind::Berth, codes::UNKNOWN_BERTH));
    let gross_tonnage = keys.required("gross_tonnage").and_then(|item| item.count(1, MOST_GROSS_TONNAGE));
    let length = keys.required("length").and_then(|item| quantity::metres(&item, 1.0, LONGEST_SHIP));
    let draught = keys.required("draught").and_then(|item| quantity::metres(&item, 0.1, DEEPEST_DRAUGHT));
    let is_self_propelled = keys.optional("self_propelled").map_or(Some(true), |item| item.flag());
    let agent = keys.text_or_empty("agent");
    let (tags, own) = read_tags_and_own(&mut keys, clock);
    keys.finish();
    Some(Ship {
        id: id?.to_owned(),
        name: name?.to_owned(),
        kind: kind?.to_owned(),
        berth: berth?,
        gross_tonnage: gross_tonnage?,
        length: length?,
        draught: draught?,
        is_self_propelled: is_self_propelled?,
        agent,
        tags,
        own: own?,
    })
}

/// The tables `[[plant]]`.
#[must_use]
pub fn read_plant(file: &mut Keys<'_>, known: &Known, clock: Option<&PortClock>) -> Vec<Plant> {
    file.tables("plant").iter().filter_map(|item| read_piece(item, known, clock)).collect()
}

fn read_piece(item: &Item<'_>, known: &Known, clock: Option<&PortClock>) -> Option<Plant> {
    let mut keys = item.keys("a piece of plant")?;
    let id = keys.required("id").and_then(|item| item.as_text());
    let name = keys.required("name").and_then(|item| item.text());
    let kind = keys.required("kind").and_then(|item| item.text());
    let berth = keys.required("berth").and_then(|item| known.refer(&item, Kind::Berth, codes::UNKNOWN_BERTH));
    let (tags, own) = read_tags_and_own(&mut keys, clock);
    keys.finish();
    Some(Plant {
        id: id?.to_owned(),
        name: name?.to_owned(),
        kind: kind?.to_owned(),
        berth: berth?,
        tags,
        own: own?,
    })
}

type Own = BTreeMap<String, OwnValue>;

fn read_tags_and_own(keys: &mut Keys<'_>, clock: Option<&PortClock>) -> (Vec<String>, Option<Own>) {
    let tags = keys.texts("tags");
    let _ = keys.text_or_empty("source");
    let Some(table) = keys.optional("own") else { return (tags, Some(Own::new())) };
    let own = table.keys("own").and_then(|keys| {
        // Every value is looked at before the first faulty one spoils the table.
        let values: Vec<_> =
            keys.all().into_iter().map(|(name, item)| (name, read_own(&item, clock))).collect();
        values.into_iter().map(|(name, value)| Some((name.to_owned(), value?))).collect()
    });
    (tags, own)
}

/// A whole number is a count, a text that begins with a digit a time or a time span, any other text a class; a class
/// that begins with a digit is written `{ class = "65 t" }`.
fn read_own(item: &Item<'_>, clock: Option<&PortClock>) -> Option<OwnValue> {
    if item.is_whole_number() {
        return item.count(0, MOST_OF_ITS_OWN).map(OwnValue::Count);
    }
    if item.is_table() {
        let mut keys = item.keys("a class")?;
        let class = keys.required("class").and_then(|item| item.text());
        keys.finish();
        return class.map(|class| OwnValue::Class(class.to_owned()));
    }
    if item.bare_number().is_some() {
        return quantity::lasting(item).map(OwnValue::Lasting);
    }
    let text = item.time_text()?;
    if quantity::looks_like_a_time(text) {
        return quantity::instant(item, clock).map(OwnValue::At);
    }
    if Minutes::parse(text).is_some() {
        return quantity::lasting(item).map(OwnValue::Lasting);
    }
    if text.trim_start().starts_with(|c: char| c.is_ascii_digit() || c == '-') {
        item.fault(
            codes::BAD_OWN_VALUE,
            format!("{} = \"{text}\" is neither a time nor a time span", item.key()),
            "a count (2), a time span (\"3 h\"), a time (\"2026-09-17T19:00-03:00\"), a class (\"unlimited\")",
            format!("correct it; if it is a class, write {} = {{ class = \"{text}\" }}", item.key()),
        );
        return None;
    }
    Some(OwnValue::Class(text.to_owned()))
}
