//! How far given winds reach at one time of a forecast, ready for any strength: read off a table in place of the
//! logarithms of the formula, which every hour of every scenario would ask for.

use crate::wind::climatology::GROWS_WITHIN_KT;
use crate::wind::profile::GIVEN_SPEEDS_KT;
use crate::wind::structure::Expected;

/// Steps of a table over the strengths within which a wind's reach grows.
const STEPS: usize = 16;

/// [`Expected::reach`] for any strength, to 1 part in 10,000.
#[derive(Clone, Debug, PartialEq)]
pub struct ReachTable {
    /// What was forecast.
    pub expected: Expected,
    /// [`Expected::scale`] of each given speed for a greatest wind of that speed, a sixteenth of 53 kt more, two
    /// sixteenths more, ...
    scales: [[f64; STEPS + 1]; 3],
}

impl ReachTable {
    /// The table of a forecast.
    #[must_use]
    pub fn of(expected: Expected) -> ReachTable {
        let mut scales = [[0.0; STEPS + 1]; 3];
        for (i, (row, speed)) in scales.iter_mut().zip(GIVEN_SPEEDS_KT).enumerate() {
            for (step, scale) in row.iter_mut().enumerate() {
                *scale = expected.scale(i, speed + GROWS_WITHIN_KT * step as f64 / STEPS as f64);
            }
        }
        ReachTable { expected, scales }
    }

    /// The reach in n mi of the three given speeds for a realisation of greatest wind `wind_kt` and the size
    /// error `size`; see [`Expected::reach`].
    #[must_use]
    pub fn reach(&self, wind_kt: f64, size: f64) -> [[f64; 4]; 3] {
        self.expected.reach_scaled(wind_kt, |i| size * self.scale(i, wind_kt))
    }

    /// The third-degree polynomial through the four entries around a strength (Lagrange).
    fn scale(&self, i: usize, wind_kt: f64) -> f64 {
        let row = &self.scales[i];
        let at = ((wind_kt - GIVEN_SPEEDS_KT[i]) * (STEPS as f64 / GROWS_WITHIN_KT)).clamp(0.0, STEPS as f64);
        let first = (at as usize).clamp(1, STEPS - 2) - 1;
        let t = at - first as f64;
        let (a, b, c) = (t - 1.0, t - 2.0, t - 3.0);
        let [y0, y1, y2, y3] = [row[first], row[first + 1], row[first + 2], row[first + 3]];
        (t * a * (y3 * b - 3.0 * y2 * c) + b * c * (3.0 * y1 * t - y0 * a)) / 6.0
    }
}

#[cfg(test)]
mod tests {
    use super::ReachTable;
    use crate::wind::structure::Expected;
    use approx::assert_relative_eq;

    #[test]
    fn the_table_says_what_the_formula_says() {
        let ratios = [[1.0, 1.2, 0.0, 0.5], [0.9, 1.1, 0.4, 0.5], [0.8; 4]];
        for (forecast, latitude, follows) in [(30.0, 8.0, 0.5), (60.0, 20.0, 1.0), (120.0, 45.0, 0.5)] {
            let expected = Expected::new(forecast, latitude, ratios, follows);
            let table = ReachTable::of(expected);
            for tenth in 0..2000 {
                let wind = f64::from(tenth) / 10.0;
                let (quick, slow) = (table.reach(wind, 1.3), expected.reach(wind, 1.3));
                for (q, s) in quick.as_flattened().iter().zip(slow.as_flattened()) {
                    assert_relative_eq!(*q, *s, max_relative = 1e-4);
                }
            }
        }
    }
}
