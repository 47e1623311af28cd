//! How far one advisory's forecast may be wrong at each of its hours: the error table, seen from this storm.

use crate::advisory::forecast::Advisory;
use crate::advisory::own_spread::TrackDeviation;
use crate::arrival::errors::{ErrorTable, REACH_OF_THE_TABLE_NMI, WIND_OF_THE_TABLE_KT};
use crate::arrival::own_track::own_factor;
use crate::wind::structure::Expected;

/// Hours between the nodes at which errors are drawn; between them they are interpolated.
const NODE_H: f64 = 12.0;

/// Bounds of the greatest wind (kt) and of the gale reach (n mi) by which deviations are scaled. Our choice: beyond them too few
/// storms were seen.
const WINDS_KT: (f64, f64) = (25.0, 130.0);
const REACHES_NMI: (f64, f64) = (30.0, 250.0);

/// No centre is known better than this (n mi), whatever is stated. Our choice.
const LEAST_ACCURACY_NMI: f64 = 5.0;

/// Error sizes of one advisory by hours after issue.
#[derive(Debug)]
pub struct Spread<'a> {
    table: &'a ErrorTable,
    lead_at_issue_h: f64,
    /// The stated accuracy as a multiple of the usual one.
    accuracy: f64,
    own: Vec<TrackDeviation>,
    widening: [f64; 4],
}

impl<'a> Spread<'a> {
    /// The sizes for an advisory.
    #[must_use]
    pub fn of(advisory: &Advisory, table: &'a ErrorTable) -> Spread<'a> {
        let mut widening = [1.0; 4];
        for assumption in &advisory.assumed {
            let by = assumption.widens;
            for (factor, own) in widening.iter_mut().zip([by.track, by.track, by.intensity, by.size]) {
                *factor *= own.max(1.0);
            }
        }
        let usual = table.settings().accuracy_usual_nmi;
        let accuracy = advisory.accuracy.map_or(1.0, |stated| stated.get().max(LEAST_ACCURACY_NMI) / usual);
        let lead_at_issue_h = (advisory.issued - advisory.base).num_seconds().max(0) as f64 / 3600.0;
        Spread { table, lead_at_issue_h, accuracy, own: advisory.own_track_deviations(), widening }
    }

    /// Deviations and means of the errors at an hour for which `expected` is forecast.
    ///
    /// * centre: table x own(lead) x (V / 60 kt)^w x (a / a_usual)^(p (1 - lead / fade)), V the forecast wind, a the stated accuracy, own(lead) where the office
    ///   says how far it is off itself ([`own_factor`]);
    /// * intensity: table x (V / 60 kt)^w;
    /// * size: table x (R / 100 n mi)^r, R the forecast reach of gales.
    #[must_use]
    pub fn at(&self, hour: f64, expected: &Expected) -> ([f64; 4], [f64; 4]) {
        let lead = hour + self.lead_at_issue_h;
        let (row, settings) = (self.table.at(lead), self.table.settings());
        let wind = expected.wind_kt.clamp(WINDS_KT.0, WINDS_KT.1) / WIND_OF_THE_TABLE_KT;
        let reach = expected.gale_nmi().clamp(REACHES_NMI.0, REACHES_NMI.1) / REACH_OF_THE_TABLE_NMI;
        let fading = (1.0 - lead / settings.accuracy_fades_h).clamp(0.0, 1.0);
        let mut deviation = row.deviation;
        let office = own_factor(&self.own, self.table, lead);
        deviation.iter_mut().take(2).for_each(|track| *track *= office);
        for (i, own) in deviation.iter_mut().enumerate() {
            let of = if i == 3 { reach } else { wind };
            let centre = if i < 2 { libm::pow(self.accuracy, settings.accuracy_power * fading) } else { 1.0 };
            *own *= libm::pow(of, settings.scaling[i]) * centre * self.widening[i];
        }
        (deviation, row.bias)
    }

    /// How far radii follow the strength.
    #[must_use]
    pub fn size_follows_intensity(&self) -> f64 {
        self.table.settings().size_follows_intensity
    }

    /// Serial correlations at the nodes of a forecast of `end_h` hours.
    #[must_use]
    pub fn serial(&self, end_h: f64) -> Vec<[f64; 4]> {
        let last = f64::ceil((end_h + self.lead_at_issue_h) / NODE_H).max(0.0) as usize;
        (0..=last + 1).map(|node| self.table.at(node as f64 * NODE_H).serial).collect()
    }

    /// The node at or before an hour, and how far the hour lies on the way to the next node, 0..1.
    #[must_use]
    pub fn node(&self, hour: f64) -> (usize, f64) {
        let position = (hour + self.lead_at_issue_h) / NODE_H;
        let node = f64::floor(position).max(0.0);
        (node as usize, position - node)
    }

    /// The weights of the nodes before and after an hour.
    ///
    /// z = ((1 - s) z0 + s z1) / sqrt((1 - s)^2 + s^2 + 2 s (1 - s) phi): without the root the variance would
    /// dip between nodes.
    #[must_use]
    pub fn weights(&self, hour: f64, serial: &[[f64; 4]]) -> [[f64; 4]; 2] {
        let (node, s) = self.node(hour);
        let phi = serial.get(node + 1).copied().unwrap_or([1.0; 4]);
        let norm = phi.map(|phi| f64::sqrt((1.0 - s) * (1.0 - s) + s * s + 2.0 * s * (1.0 - s) * phi));
        [norm.map(|norm| (1.0 - s) / norm), norm.map(|norm| s / norm)]
    }
}

#[cfg(test)]
mod tests {
    use super::Spread;
    use crate::arrival::errors::{ErrorRow, ErrorTable, Settings};
    use crate::wind::structure::Expected;
    use approx::assert_relative_eq;

    /// Forecast points 12 h apart at the table's own deviations.
    fn table() -> ErrorTable {
        let settings = Settings {
            intensity_with_size: 0.0,
            size_follows_intensity: 0.5,
            radii_relaxation_h: 36.0,
            accuracy_usual_nmi: 20.0,
            accuracy_power: 1.0,
            accuracy_fades_h: 60.0,
            scaling: [-0.5, 0.0, 0.5, -1.0],
        };
        let row = |lead_h: f64| ErrorRow { lead_h, deviation: [10.0, 10.0, 5.0, 0.2], ..ErrorRow::NONE };
        ErrorTable::new("t", Vec::new(), vec![row(0.0), row(120.0)], settings).unwrap()
    }

    fn of(accuracy: f64) -> impl Fn(f64, f64) -> [f64; 4] {
        move |hour, wind_kt| {
            let table = table();
            let spread =
                Spread { table: &table, lead_at_issue_h: 0.0, accuracy, own: Vec::new(), widening: [1.0; 4] };
            spread.at(hour, &Expected::new(wind_kt, 25.0, [[1.0; 4]; 3], 0.5)).0
        }
    }

    #[test]
    fn a_stronger_storm_is_better_forecast_in_place_and_worse_in_strength_by_the_given_powers() {
        let deviation = of(1.0);
        let (usual, stronger) = (deviation(24.0, 60.0), deviation(24.0, 120.0));
        assert_relative_eq!(usual[0], 10.0, max_relative = 1e-12);
        assert_relative_eq!(stronger[0], 10.0 / f64::sqrt(2.0), max_relative = 1e-12);
        assert_relative_eq!(stronger[1], 10.0, max_relative = 1e-12);
        assert_relative_eq!(stronger[2], 5.0 * f64::sqrt(2.0), max_relative = 1e-12);
        assert!(stronger[3] < usual[3]);
    }

    #[test]
    fn a_vague_centre_tells_less_the_further_ahead() {
        let (usual, vague) = (of(1.0), of(4.0));
        for (hour, factor) in [(0.0, 4.0), (30.0, 2.0), (60.0, 1.0), (90.0, 1.0)] {
            assert_relative_eq!(vague(hour, 60.0)[1], factor * usual(hour, 60.0)[1], max_relative = 1e-12);
        }
    }
}
