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
