//! Reads which ships, plant or berths a rule or a template is for.

use crate::finding::fault::quoted;
use crate::finding::table::{Item, Keys};
use crate::port::fleet::OwnValue;
use crate::port::folder::Draft;
use crate::port::kind::Kind;
use crate::rules::codes;
use crate::rules::pick::{ForEach, Pick};
use crate::text::quantity;
use crate::units::length::Metres;
use std::collections::{BTreeMap, BTreeSet};

/// A ship, a piece of plant or a berth for which a template makes a task.
#[derive(Clone, Copy, Debug)]
pub struct Thing<'a> {
    /// Its id.
    pub id: &'a str,
    /// Its own values.
    pub own: &'a BTreeMap<String, OwnValue>,
    /// Its draught if it is a ship.
    pub draught: Option<Metres>,
}

/// `for_each = { ships = { kinds = ["container"] } }`, or plant, or berths; `{}` picks all of them.
#[must_use]
pub fn read_for_each(item: &Item<'_>, draft: &Draft) -> Option<ForEach> {
    let mut keys = item.keys("for_each")?;
    let way = keys.one_of(&["ships", "plant", "berths"]);
    keys.finish();
    let way = way?;
    let for_each = match way.key() {
        "ships" => ForEach::Ship(read_ship_pick(&way, draft)?),
        "plant" => ForEach::Plant(read_plant_pick(&way, draft)?),
        _ => ForEach::Berth(read_berth_pick(&way, draft)?),
    };
    if things(&for_each, draft).is_empty() {
        warn_of_nothing(&way, draft, kind_of(&for_each));
    }
    Some(for_each)
}

/// Conditions on ships.
#[must_use]
pub fn read_ship_pick(item: &Item<'_>, draft: &Draft) -> Option<Pick> {
    let mut keys = item.keys("a choice of ships")?;
    let pick = read_common(&mut keys, draft, Kind::Ship);
    let kinds = keys.texts("kinds");
    let berths = read_ids(&mut keys, "berths", draft, Kind::Berth);
    let at_least = keys.optional("gross_tonnage_at_least").map(|item| item.count(1, u32::MAX));
    let below = keys.optional("gross_tonnage_below").map(|item| item.count(1, u32::MAX));
    let draught = keys.optional("draught_over").map(|item| quantity::metres(&item, 0.0, 60.0));
    let propelled = keys.optional("self_propelled").map(|item| item.flag());
    keys.finish();
    Some(Pick {
        kinds,
        berths: berths?,
        gross_tonnage_at_least: stated(at_least)?,
        gross_tonnage_below: stated(below)?,
        draught_over: stated(draught)?,
        self_propelled: stated(propelled)?,
        ..pick?
    })
}

fn read_plant_pick(item: &Item<'_>, draft: &Draft) -> Option<Pick> {
    let mut keys = item.keys("a choice of plant")?;
    let pick = read_common(&mut keys, draft, Kind::Plant);
    let kinds = keys.texts("kinds");
    let berths = read_ids(&mut keys, "berths", draft, Kind::Berth);
    keys.finish();
    Some(Pick { kinds, berths: berths?, ..pick? })
}

fn read_berth_pick(item: &Item<'_>, draft: &Draft) -> Option<Pick> {
    let mut keys = item.keys("a choice of berths")?;
    let pick = read_common(&mut keys, draft, Kind::Berth);
    keys.finish();
    pick
}

fn read_common(keys: &mut Keys<'_>, draft: &Draft, kind: Kind) -> Option<Pick> {
    let ids = read_ids(keys, "ids", draft, kind);
    let (tagged, not_tagged) = (keys.texts("tagged"), keys.texts("not_tagged"));
    Some(Pick { ids: ids?, tagged, not_tagged, ..Pick::default() })
}

fn read_ids(keys: &mut Keys<'_>, key: &'static str, draft: &Draft, kind: Kind) -> Option<Vec<String>> {
    let Some(item) = keys.optional(key) else { return Some(Vec::new()) };
    let ids: Vec<Option<String>> =
        item.list().iter().map(|item| draft.known.refer(item, kind, codes::unknown(kind))).collect();
    ids.into_iter().collect()
}

/// Left out is fine, faulty is not.
fn stated<T>(value: Option<Option<T>>) -> Option<Option<T>> {
    match value {
        Some(read) => read.map(Some),
        None => Some(None),
    }
}

fn kind_of(for_each: &ForEach) -> Kind {
    match for_each {
        ForEach::Ship(_) => Kind::Ship,
        ForEach::Plant(_) => Kind::Plant,
        ForEach::Berth(_) => Kind::Berth,
    }
}

/// The things of the port that a template is repeated for.
#[must_use]
pub fn things<'a>(for_each: &ForEach, draft: &'a Draft) -> Vec<Thing<'a>> {
    match for_each {
        ForEach::Ship(pick) => draft
            .ships
            .iter()
            .filter(|ship| pick.takes_ship(ship))
            .map(|ship| Thing { id: &ship.id, own: &ship.own, draught: Some(ship.draught) })
            .collect(),
        ForEach::Plant(pick) => draft
            .plant
            .iter()
            .filter(|piece| pick.takes_plant(piece))
            .map(|piece| Thing { id: &piece.id, own: &piece.own, draught: None })
            .collect(),
        ForEach::Berth(pick) => draft
            .berths
            .iter()
            .filter(|berth| pick.takes_berth(berth))
            .map(|berth| Thing { id: &berth.id, own: &berth.own, draught: None })
            .collect(),
    }
}

fn warn_of_nothing(item: &Item<'_>, draft: &Draft, kind: Kind) {
    let count = match kind {
        Kind::Ship => draft.ships.len(),
        Kind::Plant => draft.plant.len(),
        _ => draft.berths.len(),
    };
    // A faulty ship might have been picked; the mended file will show.
    if !draft.known.could_read(kind) || count < draft.known.of_kind(kind).len() {
        return;
    }
    item.warn(
        codes::PICKS_NOTHING,
        format!("no {} passes these conditions, so the template makes no task", kind.word()),
        words_in_use(draft, kind),
        "correct the conditions, or leave it if none is in port now",
    );
}

/// The kinds and tags that things of this kind have: what a template can ask for.
fn words_in_use(draft: &Draft, kind: Kind) -> String {
    let (kinds, tags): (Vec<&str>, Vec<&String>) = match kind {
        Kind::Ship => (
            draft.ships.iter().map(|ship| ship.kind.as_str()).collect(),
            draft.ships.iter().flat_map(|ship| &ship.tags).collect(),
        ),
        Kind::Plant => (
            draft.plant.iter().map(|piece| piece.kind.as_str()).collect(),
            draft.plant.iter().flat_map(|piece| &piece.tags).collect(),
        ),
        _ => (Vec::new(), draft.berths.iter().flat_map(|berth| &berth.tags).collect()),
    };
    let listed = |words: BTreeSet<&str>| {
        let words: Vec<&str> = words.into_iter().collect();
        if words.is_empty() { "none".to_owned() } else { quoted(&words) }
    };
    let tags = tags.into_iter().map(String::as_str).collect();
    format!("kinds in port: {}; tags in use: {}", listed(kinds.into_iter().collect()), listed(tags))
}
