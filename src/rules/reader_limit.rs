//! Reads winds, reckonings and the times that rules count from.

use crate::finding::fault::Finding;
use crate::finding::table::{Item, Keys};
use crate::port::kind::Kind;
use crate::rules::codes;
use crate::rules::desk::{Desk, WindSense};
use crate::rules::limit::{Anchor, Binding, Deadline, Limit, LimitAt, Reckoning};
use crate::text::quantity;
use crate::time::moment::Minutes;
use crate::units::chance::Chance;
use crate::units::length::Metres;
use crate::units::wind::{Averaging, WindLimit};

/// The greatest height at which a wind limit is taken for true, in metres (our choice): above any crane or mast.
const HIGHEST: f64 = 250.0;

/// The words for averaging periods.
const PERIODS: [(&str, Averaging); 5] = [
    ("3 s", Averaging::Gust3s),
    ("1 min", Averaging::Minute1),
    ("2 min", Averaging::Minute2),
    ("3 min", Averaging::Minute3),
    ("10 min", Averaging::Minute10),
];

/// `winds = { averaging = "1 min", height = "10 m" }` of `[rules]`.
#[must_use]
pub fn read_wind_sense(item: &Item<'_>) -> Option<WindSense> {
    let mut keys = item.keys("winds")?;
    let averaging = keys.required("averaging").and_then(|item| item.word(&PERIODS));
    let height = keys.required("height").and_then(|item| read_height(&item));
    keys.finish();
    Some(WindSense { averaging: averaging?, height: height? })
}

/// The limit that `keys` name: wind (with averaging) or gust, and its height; or seas; and at which place or berth.
#[must_use]
pub fn read_wind_at(keys: &mut Keys<'_>, desk: &Desk<'_>) -> Option<LimitAt> {
    let speed_item = keys.one_of(&["wind", "gust", "seas"]);
    if let Some(seas) = speed_item.filter(|item| item.key() == "seas") {
        let is_known = read_seas(&seas);
        let place = keys.required("at").and_then(|item| read_where(&item, desk));
        return is_known.then_some(LimitAt { limit: Limit::Seas, place: place? });
    }
    let speed = speed_item.and_then(|item| quantity::speed(&item));
    let height = keys.optional("height").map(|item| read_height(&item));
    let place = keys.required("at").and_then(|item| read_where(&item, desk));
    let averaging = if speed_item.is_some_and(|item| item.key() == "gust") {
        Some(Averaging::Gust3s)
    } else {
        match keys.optional("averaging") {
            Some(item) => item.word(&PERIODS),
            None => desk.winds.map(|winds| winds.averaging),
        }
    };
    let height = match height {
        Some(height) => height?,
        None => desk.winds?.height,
    };
    let wind = WindLimit { speed: speed?, averaging: averaging?, height };
    Some(LimitAt { limit: Limit::Wind(wind), place: place? })
}

/// "12 ft" or "4 m": the seas whose reach advisories give.
fn read_seas(item: &Item<'_>) -> bool {
    let Some(height) = quantity::metres(item, 0.1, HIGHEST_SEAS) else { return false };
    let is_given = (LEAST_GIVEN_SEAS..=MOST_GIVEN_SEAS).contains(&height.get());
    if !is_given {
        item.fault(
            codes::SEAS_NOT_GIVEN,
            format!("seas of {height}"),
            "12 ft or 4 m: advisories give the reach of no other seas, and no simple law carries it over",
            "write \"12 ft\" if that is near enough; for a lower limit use a wind that goes with it in your port, or a lead before the high seas",
        );
    }
    is_given
}

/// Between these heights (m) seas count as the high seas of advisories: 12 ft are 3.66 m.
const LEAST_GIVEN_SEAS: f64 = 3.6;
const MOST_GIVEN_SEAS: f64 = 4.0;
/// No sea is higher (m).
const HIGHEST_SEAS: f64 = 40.0;

fn read_height(item: &Item<'_>) -> Option<Metres> {
    quantity::metres(item, 1.0, HIGHEST)
}

/// A place, or a berth for the place whose wind it has.
fn read_where(item: &Item<'_>, desk: &Desk<'_>) -> Option<String> {
    let known = &desk.draft.known;
    if item.as_text().is_some_and(|id| known.is(id, Kind::Berth)) {
        let id = item.as_text()?;
        return desk.draft.berths.iter().find(|berth| berth.id == id).map(|berth| berth.place.clone());
    }
    known.refer(item, Kind::Place, codes::unknown(Kind::Place))
}

/// `{ chance = "10 %" }`, `{ earliest = { at_least = "20 %" } }` or `{ likely = { at_least = "20 %" } }`.
#[must_use]
pub fn read_reckoning(item: &Item<'_>) -> Option<Reckoning> {
    if let Some(word @ ("earliest" | "likely")) = item.as_text() {
        no_least_chance(item, word);
        return None;
    }
    let mut keys = item.keys("a reckoning")?;
    let way = keys.one_of(&["chance", "earliest", "likely"]);
    keys.finish();
    let way = way?;
    if way.key() == "chance" {
        return read_chance(&way).map(Reckoning::FirstReaching);
    }
    if !way.is_table() {
        no_least_chance(&way, way.key());
        return None;
    }
    let mut keys = way.keys("an arrival")?;
    let least = keys.optional("at_least");
    keys.finish();
    let Some(least) = least else {
        no_least_chance(&way, way.key());
        return None;
    };
    let at_least = read_chance(&least)?;
    Some(if way.key() == "earliest" {
        Reckoning::Earliest { at_least }
    } else {
        Reckoning::Likely { at_least }
    })
}

fn no_least_chance(item: &Item<'_>, way: &str) {
    item.fault(
        codes::NO_LEAST_CHANCE,
        format!("the {way} arrival without the least chance at which it counts"),
        "the earliest or likely arrival means little unless the wind comes at all",
        format!(
            "write {{ {way} = {{ at_least = \"20 %\" }} }} with your own chance, or {{ chance = \"10 %\" }}"
        ),
    );
}

/// A chance that a forecast can reach and fail to reach: above 0 and below 100 %.
#[must_use]
pub fn read_chance(item: &Item<'_>) -> Option<Chance> {
    let chance = quantity::share(item)?;
    if chance.get() <= 0.0 || chance.get() >= 1.0 {
        item.fault(
            codes::BAD_CHANCE,
            format!("{} = {} is always or never reached", item.key(), item.written()),
            "more than 0 % and less than 100 %",
            "choose a chance between them",
        );
        return None;
    }
    Some(chance)
}

/// What `keys` count from: a wind or gust at a place, a stage, or the clock; and the key that says so.
#[must_use]
pub fn read_anchor<'t>(keys: &mut Keys<'t>, desk: &Desk<'_>) -> Option<(Anchor, &'t str)> {
    let Some(way) = keys.one_of(&["wind", "gust", "seas", "stage", "clock"]) else {
        // What the rest belongs to is unknown; it is not reported as well.
        keys.pass_over(&["at", "averaging", "height"]);
        return None;
    };
    let anchor = match way.key() {
        "stage" => desk.stage(&way).map(Anchor::Stage),
        "clock" => quantity::instant(&way, desk.draft.clock.as_ref()).map(Anchor::Clock),
        _ => read_wind_at(keys, desk).map(Anchor::Wind),
    };
    Some((anchor?, way.key()))
}

/// A deadline: what it counts from, how long before, and whether it binds.
#[must_use]
pub fn read_deadline(item: &Item<'_>, desk: &Desk<'_>) -> Option<Deadline> {
    let mut keys = item.keys("a deadline")?;
    let anchor = read_anchor(&mut keys, desk);
    let lead = keys.optional("lead");
    let binds = keys
        .optional("binds")
        .map_or(Some(Binding::Hard), |item| item.word(&[("hard", Binding::Hard), ("soft", Binding::Soft)]));
    let place = keys.place();
    let page = keys.page();
    keys.finish();
    let (anchor, way) = anchor?;
    let lead = match lead {
        Some(item) => quantity::shift(&item)?,
        None if way == "clock" => Minutes::ZERO,
        None => {
            let found = format!("a deadline before a {way} lacks the key lead");
            let to_do = "add lead = \"...\": how long before; \"0 min\" for at once";
            page.report(Finding::error(codes::TABLE.missing_key, place, found, "", to_do));
            return None;
        }
    };
    Some(Deadline { anchor, lead, binds: binds? })
}
