//! Reads what events say of facts about the port, and of rulings.

use crate::finding::table::Keys;
use crate::record::event::What;
use crate::record::fact::{AnchorageState, Fact, Measure};
use crate::record::ruling::Ruling;
use crate::record::telling::{Telling, named};
use crate::text::quantity::metres;
use crate::units::length::Metres;

/// How an anchorage may stand.
const STATES: [(&str, AnchorageState); 3] =
    [("open", AnchorageState::Open), ("full", AnchorageState::Full), ("closed", AnchorageState::Closed)];

/// The highest sea that is taken, in metres: the highest significant height measured by a buoy was 19.0 m (WMO archive of
/// weather extremes, North Atlantic, 4 February 2013; from memory), and a little room.
const HIGHEST_SEA_M: f64 = 25.0;

/// The deepest draught that is taken, in metres: the deepest ships draw about 24 m (common practice, no source).
const DEEPEST_DRAUGHT_M: f64 = 30.0;

fn text(keys: &mut Keys<'_>, key: &'static str) -> Option<String> {
    keys.required(key).and_then(|item| item.text()).map(str::to_owned)
}

fn length(keys: &mut Keys<'_>, key: &'static str, most: f64) -> Option<Metres> {
    keys.required(key).and_then(|item| metres(&item, 0.0, most))
}

/// A service stops.
pub fn stops(telling: &Telling<'_>, keys: &mut Keys<'_>) -> Option<What> {
    let service = text(keys, "service");
    let (from, until) = telling.from_until(keys);
    Some(What::Told(Fact::Stops { service: service?, from: from?, until: until? }))
}

/// A service works again.
pub fn resumes(telling: &Telling<'_>, keys: &mut Keys<'_>) -> Option<What> {
    let service = text(keys, "service");
    let from = telling.any_or_known(keys, "from");
    Some(What::Told(Fact::Resumes { service: service?, from: from? }))
}

/// A place cannot be used.
pub fn unusable(telling: &Telling<'_>, keys: &mut Keys<'_>) -> Option<What> {
    let spot = named(keys, "place");
    let (from, until) = telling.from_until(keys);
    Some(What::Told(Fact::Unusable { spot: spot?, from: from?, until: until? }))
}

/// A place can be used again.
pub fn usable(telling: &Telling<'_>, keys: &mut Keys<'_>) -> Option<What> {
    let spot = named(keys, "place");
    let from = telling.any_or_known(keys, "from");
    Some(What::Told(Fact::Usable { spot: spot?, from: from? }))
}

/// Less water than charted.
pub fn depth_limit(telling: &Telling<'_>, keys: &mut Keys<'_>) -> Option<What> {
    let spot = named(keys, "place");
    let draught = length(keys, "draught", DEEPEST_DRAUGHT_M);
    let (from, until) = telling.from_until(keys);
    Some(What::Told(Fact::DepthLimit { spot: spot?, draught: draught?, from: from?, until: until? }))
}

/// A warning signal is shown.
pub fn signal(telling: &Telling<'_>, keys: &mut Keys<'_>) -> Option<What> {
    let shown = text(keys, "shown");
    let (from, until) = telling.from_until(keys);
    Some(What::Told(Fact::Signal { shown: shown?, from: from?, until: until? }))
}

/// Everybody leaves an area.
pub fn evacuation(telling: &Telling<'_>, keys: &mut Keys<'_>) -> Option<What> {
    authorities(telling, keys, Measure::Evacuation)
}

/// Everybody stays indoors.
pub fn curfew(telling: &Telling<'_>, keys: &mut Keys<'_>) -> Option<What> {
    authorities(telling, keys, Measure::Curfew)
}

fn authorities(telling: &Telling<'_>, keys: &mut Keys<'_>, measure: Measure) -> Option<What> {
    let area = text(keys, "area");
    let (from, until) = telling.from_until(keys);
    Some(What::Told(Fact::Authorities { measure, area: area?, from: from?, until: until? }))
}

/// A sea was observed.
pub fn sea(telling: &Telling<'_>, keys: &mut Keys<'_>) -> Option<What> {
    let spot = named(keys, "place");
    let height = length(keys, "height", HIGHEST_SEA_M);
    let at = telling.past_or_known(keys, "at");
    Some(What::Told(Fact::Sea { spot: spot?, height: height?, at: at? }))
}

/// The state of an anchorage.
pub fn anchorage(telling: &Telling<'_>, keys: &mut Keys<'_>) -> Option<What> {
    let spot = named(keys, "place");
    let state = keys.required("state").and_then(|item| item.word(&STATES));
    let from = telling.any_or_known(keys, "from");
    Some(What::Told(Fact::Anchorage { spot: spot?, state: state?, from: from? }))
}

/// A stage is not declared for now.
pub fn holds(telling: &Telling<'_>, keys: &mut Keys<'_>) -> Option<What> {
    let stage = named(keys, "stage");
    let until = end(telling, keys);
    Some(What::Ruled(Ruling::Hold { stage: stage?, until: until? }))
}

/// A stage is passed over.
pub fn skips(_: &Telling<'_>, keys: &mut Keys<'_>) -> Option<What> {
    Some(What::Ruled(Ruling::Skip { stage: named(keys, "stage")? }))
}

/// A ship may stay.
pub fn permits_stay(telling: &Telling<'_>, keys: &mut Keys<'_>) -> Option<What> {
    let ship = named(keys, "ship");
    let conditions = keys.text_or_empty("conditions");
    let until = end(telling, keys);
    Some(What::Ruled(Ruling::Stay { ship: ship?, conditions, until: until? }))
}

/// A rule or limit is waived, until a time that must be given.
pub fn waives(telling: &Telling<'_>, keys: &mut Keys<'_>) -> Option<What> {
    let waived = text(keys, "what");
    let conditions = keys.text_or_empty("conditions");
    let until = keys.required("until").and_then(|item| telling.end_after(&item, telling.known));
    Some(What::Ruled(Ruling::Waive { waived: waived?, conditions, until: until? }))
}

/// Something is refused.
pub fn refuses(_: &Telling<'_>, keys: &mut Keys<'_>) -> Option<What> {
    Some(What::Ruled(Ruling::Refuse { refused: text(keys, "what")? }))
}

/// The end of a ruling that may last until another order.
fn end(telling: &Telling<'_>, keys: &mut Keys<'_>) -> Option<Option<chrono::DateTime<chrono::Utc>>> {
    match keys.optional("until") {
        Some(item) => telling.end_after(&item, telling.known).map(Some),
        None => Some(None),
    }
}
