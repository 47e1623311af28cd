//! Reads the tide of water.toml.

use crate::finding::table::{Item, Keys};
use crate::port::codes;
use crate::text::quantity;
use crate::tide::constituent::Constituent;
use crate::tide::error::TideError;
use crate::tide::harmonic::{HarmonicTide, Term};
use crate::tide::heights::Tide;
use crate::tide::simple::{SimpleTerm, SimpleTide};
use crate::tide::table::{TideTable, Water, WaterKind};
use crate::time::clock::PortClock;
use crate::units::length::Metres;

/// Levels further than this from the datum, in metres, are not taken for true (our choice): the greatest range on earth
/// is some 16 m.
const MOST_LEVEL: f64 = 20.0;

/// What `[tide]` says: the datum, and the tide itself, each `None` if it is faulty.
#[derive(Clone, Debug)]
pub struct TideRead<'t> {
    /// The words for what levels count from.
    pub datum: Option<&'t str>,
    /// The tide.
    pub tide: Option<Tide>,
}

/// The table `[tide]`; `None` if there is none.
#[must_use]
pub fn read_tide<'t>(file: &mut Keys<'t>, clock: Option<&PortClock>) -> Option<TideRead<'t>> {
    let item = file.optional("tide")?;
    let Some(mut keys) = item.keys("[tide]") else { return Some(TideRead { datum: None, tide: None }) };
    let datum = keys.required("datum").and_then(|item| item.text());
    let _ = keys.text_or_empty("source");
    let way = keys.one_of(&["waters", "harmonic", "simple"]);
    let tide = way.and_then(|way| match way.key() {
        "waters" => read_waters(&way, clock),
        "harmonic" => read_harmonic(&way, read_mean_level(&mut keys)),
        _ => read_simple(&way, read_mean_level(&mut keys), clock),
    });
    if way.is_none() {
        keys.pass_over(&["mean_level"]);
    }
    keys.finish();
    Some(TideRead { datum, tide })
}

fn read_mean_level(keys: &mut Keys<'_>) -> Option<Metres> {
    keys.required("mean_level").and_then(|item| quantity::metres(&item, -MOST_LEVEL, MOST_LEVEL))
}

fn read_waters(item: &Item<'_>, clock: Option<&PortClock>) -> Option<Tide> {
    let waters = all(item.list().iter().map(|item| read_water(item, clock)))?;
    said(item, TideTable::new(waters)).map(Tide::Table)
}

fn read_water(item: &Item<'_>, clock: Option<&PortClock>) -> Option<Water> {
    let mut keys = item.keys("a water")?;
    let way = keys.one_of(&["high", "low"]);
    let at = way.and_then(|way| quantity::instant(&way, clock));
    let level = keys.required("level").and_then(|item| quantity::metres(&item, -MOST_LEVEL, MOST_LEVEL));
    keys.finish();
    let kind = if way?.key() == "high" { WaterKind::High } else { WaterKind::Low };
    Some(Water { kind, at: at?, level: level? })
}

fn read_harmonic(item: &Item<'_>, mean_level: Option<Metres>) -> Option<Tide> {
    let terms = all(item.list().iter().map(|item| {
        let mut keys = item.keys("a constituent")?;
        let (constituent, amplitude) = read_constituent(&mut keys);
        let lag = keys.required("lag").and_then(|item| quantity::bearing(&item));
        keys.finish();
        Some(Term { constituent: constituent?, amplitude: amplitude?, lag: lag?.get() })
    }))?;
    said(item, HarmonicTide::new(mean_level?, terms)).map(Tide::Harmonic)
}

fn read_simple(item: &Item<'_>, mean_level: Option<Metres>, clock: Option<&PortClock>) -> Option<Tide> {
    let terms = all(item.list().iter().map(|item| {
        let mut keys = item.keys("a constituent")?;
        let (constituent, amplitude) = read_constituent(&mut keys);
        let high_water = keys.required("high_water").and_then(|item| quantity::instant(&item, clock));
        keys.finish();
        Some(SimpleTerm { constituent: constituent?, amplitude: amplitude?, high_water: high_water? })
    }))?;
    said(item, SimpleTide::new(mean_level?, terms)).map(Tide::Simple)
}

fn read_constituent(keys: &mut Keys<'_>) -> (Option<Constituent>, Option<Metres>) {
    let constituent =
        keys.required("constituent").and_then(|item| said(&item, Constituent::named(item.text()?)));
    let amplitude = keys.required("amplitude").and_then(|item| quantity::metres(&item, 0.0, 12.0));
    (constituent, amplitude)
}

/// Every row is looked at before the first faulty one spoils the list.
fn all<T>(rows: impl Iterator<Item = Option<T>>) -> Option<Vec<T>> {
    rows.collect::<Vec<_>>().into_iter().collect()
}

fn said<T>(item: &Item<'_>, read: Result<T, TideError>) -> Option<T> {
    match read {
        Ok(value) => Some(value),
        Err(error) => {
            item.fault(codes::BAD_TIDE, error.to_string(), "", "correct the tide");
            None
        }
    }
}
