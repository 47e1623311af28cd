//! Strength of scenarios whose way over land differs from the forecast's.
//!
//! An official forecast has the decay over land in it already. So only the difference counts: with D the share of its wind
//! over the open sea that a storm has left after its own history of land and sea,
//!
//! V(scenario) = V(forecast) x D(scenario) / D(forecast) + intensity error.
//!
//! D falls over land as [`crate::wind::inland`] says and comes back over the sea by the factor e in `RECOVERY_H`. A scenario
//! that keeps to the forecast's way over land has the forecast's strength.

use crate::geo::land::LandMask;
use crate::geo::position::wrap_longitude;
use crate::wind::inland::{ashore, further_inland};

/// Hours in which, back over the sea, what is lacking of the wind shrinks by the factor e. Our choice, not fitted: about a
/// day, as storms that cross a peninsula take to regain their strength; from memory.
const RECOVERY_H: f64 = 24.0;

/// How far from the forecast track land is looked for, degrees: the along- and cross-track errors of five days, three times.
const MARGIN_DEGREES: f64 = 10.0;

/// No less than this share is ever left: a weaker storm has become another one. Our choice; a storm of 130 kt has 0.28 of
/// its wind after a day over land.
const LEAST_SHARE: f64 = 0.25;

/// A point of a way: hours on any clock, degrees north, degrees east.
pub type Waypoint = (f64, f64, f64);

/// Land around a forecast track, and what it leaves of the forecast's wind.
#[derive(Clone, Debug, PartialEq)]
pub struct Landfall {
    mask: LandMask,
    /// The forecast's wind at each stop as it would be over the sea, kt.
    over_sea_kt: Vec<f64>,
    /// D of the forecast at each stop.
    forecast: Vec<f64>,
}

impl Landfall {
    /// For the forecast's way and winds (kt), stop by stop; `None` if no land is near.
    #[must_use]
    pub fn of(way: &[Waypoint], winds_kt: &[f64]) -> Option<Landfall> {
        let (south, north) = bounds(way.iter().map(|(_, latitude, _)| *latitude))?;
        // Counted from the first point's, so that the date line is no seam.
        let (_, _, first) = way.first()?;
        let eastward = |longitude: f64| first + wrap_longitude(longitude - first);
        let (west, east) = bounds(way.iter().map(|(_, _, longitude)| eastward(*longitude)))?;
        let width = east - west + 2.0 * MARGIN_DEGREES;
        let mask =
            LandMask::over(south - MARGIN_DEGREES, north + MARGIN_DEGREES, west - MARGIN_DEGREES, width);
        if !mask.has_land() {
            return None;
        }
        let mut landfall = Landfall { mask, over_sea_kt: Vec::new(), forecast: Vec::new() };
        let mut history = History::new();
        for (point, wind_kt) in way.iter().zip(winds_kt) {
            let before = landfall.over_sea_kt.last().copied().unwrap_or(*wind_kt);
            let share = history.goes_on(&landfall.mask, *point, before).max(LEAST_SHARE);
            landfall.over_sea_kt.push(wind_kt / share);
            landfall.forecast.push(share);
        }
        Some(landfall)
    }

    /// D(scenario) / D(forecast) at the stop after those that `history` has seen, which the scenario passes at `point`.
    pub fn factor(&self, history: &mut History, point: Waypoint) -> f64 {
        let stop = history.stops;
        let over_sea_kt = self.over_sea_kt.get(stop.saturating_sub(1)).copied().unwrap_or(0.0);
        let share = history.goes_on(&self.mask, point, over_sea_kt).max(LEAST_SHARE);
        share / self.forecast.get(stop).copied().unwrap_or(1.0)
    }
}

fn bounds(values: impl Iterator<Item = f64>) -> Option<(f64, f64)> {
    values.fold(None, |bounds, value| match bounds {
        None => Some((value, value)),
        Some((least, most)) => Some((f64::min(least, value), f64::max(most, value))),
    })
}

/// A storm's way so far.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct History {
    share: f64,
    hour: Option<f64>,
    was_land: bool,
    stops: usize,
}

impl History {
    /// Before the first stop.
    #[must_use]
    pub fn new() -> History {
        History { share: 1.0, hour: None, was_land: false, stops: 0 }
    }

    /// D at the next stop. A storm that begins over land has its wind already.
    fn goes_on(&mut self, mask: &LandMask, (hour, latitude, longitude): Waypoint, over_sea_kt: f64) -> f64 {
        let is_land = mask.is_land(latitude, longitude);
        if let Some(before) = self.hour {
            let hours = (hour - before).max(0.0);
            if is_land && over_sea_kt > 0.0 {
                let wind = self.share * over_sea_kt;
                let begins = if self.was_land { wind } else { ashore(wind) };
                self.share = further_inland(begins, hours) / over_sea_kt;
            } else {
                self.share = 1.0 - (1.0 - self.share) * libm::exp(-hours / RECOVERY_H);
            }
        }
        (self.hour, self.was_land) = (Some(hour), is_land);
        self.stops += 1;
        self.share
    }
}

impl Default for History {
    fn default() -> History {
        History::new()
    }
}

#[cfg(test)]
mod tests {
    use super::{History, Landfall, Waypoint};
    use crate::wind::inland::wind_after;
    use approx::assert_abs_diff_eq;

    /// Westwards along a latitude at 3 degrees a stop of 3 hours, from a longitude on.
    fn westwards(latitude: f64, from: f64) -> Vec<Waypoint> {
        (0..12).map(|i| (f64::from(i) * 3.0, latitude, from - f64::from(i))).collect()
    }

    fn factors(landfall: &Landfall, way: &[Waypoint]) -> Vec<f64> {
        let mut history = History::new();
        way.iter().map(|point| landfall.factor(&mut history, *point)).collect()
    }

    #[test]
    fn the_forecasts_own_way_changes_nothing() {
        let way = westwards(28.0, -75.0);
        let winds: Vec<f64> = (0..12).map(|i| 90.0 - f64::from(i)).collect();
        let landfall = Landfall::of(&way, &winds).unwrap();
        for factor in factors(&landfall, &way) {
            assert_abs_diff_eq!(factor, 1.0, epsilon = 1e-12);
        }
    }

    #[test]
    fn a_scenario_that_comes_ashore_alone_decays_as_published() {
        // The forecast passes the Atlantic at 15 N, the scenario the middle of North America at 33 N with the same 100 kt:
        // every stop from the first inland one on has the wind of Kaplan & DeMaria.
        let winds = [100.0; 12];
        let landfall = Landfall::of(&westwards(24.0, -70.0), &winds).unwrap();
        let way = westwards(33.0, -78.0);
        let told = factors(&landfall, &way);
        let inland =
            way.iter().position(|(_, latitude, longitude)| landfall.mask.is_land(*latitude, *longitude));
        let inland = inland.unwrap();
        assert!(inland > 0 && inland < 6, "{inland}");
        for (stop, factor) in told.iter().enumerate() {
            if stop < inland {
                assert_abs_diff_eq!(*factor, 1.0, epsilon = 1e-12);
            } else {
                let hours = 3.0 * (stop - inland + 1) as f64;
                assert_abs_diff_eq!(100.0 * factor, wind_after(100.0, hours), epsilon = 1e-9);
            }
        }
    }

    #[test]
    fn a_scenario_that_stays_at_sea_keeps_what_the_forecast_loses() {
        let way = westwards(33.0, -78.0);
        let winds: Vec<f64> = (0..12).map(|i| if i < 3 { 100.0 } else { 60.0 }).collect();
        let landfall = Landfall::of(&way, &winds).unwrap();
        let told = factors(&landfall, &westwards(30.0, -60.0));
        assert!(told.iter().all(|factor| *factor >= 1.0 - 1e-12));
        assert!(told.last().unwrap() > &1.3, "{told:?}");
    }

    #[test]
    fn far_from_land_there_is_nothing_to_do() {
        assert!(Landfall::of(&westwards(22.0, -40.0), &[80.0; 12]).is_none());
        assert!(Landfall::of(&[], &[]).is_none());
    }
}
