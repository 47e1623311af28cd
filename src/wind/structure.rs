//! How large a storm is at any hour of its forecast, as ratios to the mean vortex of its strength.
//!
//! ratio = given reach / mean reach (`climatology`) for the storm's own greatest wind. Kept as ratios the
//! radii stay tied to the intensity: a stronger realisation of the storm is larger, a weaker one smaller, and
//! below 34 kt there is no gale. How ratios are filled in:
//!
//! * between two hours that give radii: linear in time;
//! * before the first: as the first;
//! * after the last: they relax to the mean vortex, exp(-dt / relaxation time): the storm's own size is
//!   forgotten slowly (Knaff et al. 2007 let the departure from their mean vortex decay in this way);
//! * a wind whose reach is never given takes the ratio of the next weaker wind, and a storm without any
//!   radii is a mean one. Both are assumptions, and told.

use crate::advisory::forecast::{Advisory, Reach};
use crate::wind::climatology::{log_reach, reach_nmi};
use crate::wind::profile::GIVEN_SPEEDS_KT;

/// Mean ratio of observed reach to mean-vortex reach for 34, 50, 64 kt.
///
/// Our own calculation from HURDAT2, Atlantic, 2006-2015: 34 kt 0.94 to 1.03 (storms of 35-105 kt), 50 kt
/// 0.91 to 1.03 (60-125 kt), 64 kt 0.65 to 0.9 (70-125 kt).
const USUAL: [f64; 3] = [1.0, 0.92, 0.75];

/// Ratios for the three given speeds, in the four quadrants NE, SE, SW, NW.
pub type Ratios = [[f64; 4]; 3];

/// The size of one storm over the hours of its forecast.
#[derive(Clone, Debug, PartialEq)]
pub struct Structure {
    known: [Vec<(f64, [f64; 4])>; 3],
    relaxation_h: f64,
}

impl Structure {
    /// The radii of an advisory; `hours[i]` is the time of its point `i` on any one clock.
    #[must_use]
    pub fn of(advisory: &Advisory, hours: &[f64], relaxation_h: f64) -> Structure {
        let mut known: [Vec<(f64, [f64; 4])>; 3] = [Vec::new(), Vec::new(), Vec::new()];
        for (point, hour) in advisory.points.iter().zip(hours) {
            let (wind, latitude) = (point.max_wind.get(), point.position.latitude());
            for (list, (speed, reach)) in known.iter_mut().zip(point.radii.by_speed()) {
                // A storm too weak for this wind says nothing about how far it would reach.
                let Reach::Given(quadrants) = reach else { continue };
                let usual = reach_nmi(speed.get(), wind, latitude);
                if usual > 0.0 {
                    list.push((*hour, quadrants.clockwise().map(|r| r.get() / usual)));
                }
            }
        }
        Structure { known, relaxation_h: relaxation_h.max(0.1) }
    }

    /// The ratios at an hour.
    #[must_use]
    pub fn ratios_at(&self, hour: f64) -> Ratios {
        let mut ratios = [[0.0; 4]; 3];
        let mut weaker = ([1.0; 4], 1.0);
        for ((list, usual), out) in self.known.iter().zip(USUAL).zip(ratios.iter_mut()) {
            let own = known_at(list, hour, usual, self.relaxation_h);
            *out = own.unwrap_or(weaker.0.map(|ratio| ratio * usual / weaker.1));
            weaker = (*out, usual);
        }
        ratios
    }

    /// The last hour for which the reach of 34 kt is given; `None` if it never is.
    #[must_use]
    pub fn last_known_gale(&self) -> Option<f64> {
        self.known.first().and_then(|list| list.last()).map(|(hour, _)| *hour)
    }
}

fn known_at(list: &[(f64, [f64; 4])], hour: f64, usual: f64, relaxation_h: f64) -> Option<[f64; 4]> {
    let next = list.partition_point(|(at, _)| *at <= hour);
    match (next.checked_sub(1).and_then(|i| list.get(i)), list.get(next)) {
        (Some((h0, a)), Some((h1, b))) => {
            let share = (hour - h0) / (h1 - h0);
            Some(pairwise(*a, *b, |x, y| x + (y - x) * share))
        }
        (Some((last, a)), None) => {
            let kept = libm::exp(-(hour - last) / relaxation_h);
            Some(a.map(|ratio| usual + (ratio - usual) * kept))
        }
        (None, Some((_, b))) => Some(*b),
        (None, None) => None,
    }
}

fn pairwise(a: [f64; 4], b: [f64; 4], f: impl Fn(f64, f64) -> f64) -> [f64; 4] {
    [f(a[0], b[0]), f(a[1], b[1]), f(a[2], b[2]), f(a[3], b[3])]
}

/// By how much (kt) a realisation must be stronger than forecast until a quadrant without a wind has it as
/// the mean of the others.
///
/// Our choice: zeros are left in 1.9 of 4 quadrants in storms of 35 kt, 1.1 at 45 kt, 0.3 at 55 kt (HURDAT2,
/// Atlantic, 2006-2015).
const FILLED_AT_KT: f64 = 20.0;

/// What a forecast says about strength and size at one time.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Expected {
    /// Greatest wind in kt.
    pub wind_kt: f64,
    /// Latitude of the centre in degrees.
    pub latitude: f64,
    /// Size.
    pub ratios: Ratios,
    /// Natural logarithms of the reach (n mi) of the three given speeds in the mean storm of this strength.
    log_usual: [f64; 3],
    follows: f64,
    /// By how much each ratio lies below the mean of its four; zero above it.
    lacks: Ratios,
    /// The mean ratio of 34 kt; 1 if there is none.
    pub mean_gale_ratio: f64,
}

impl Expected {
    /// A forecast of strength and size. `follows`, 0..1: how far a realisation's radii follow its strength; 1
    /// is as in the mean vortex.
    #[must_use]
    pub fn new(wind_kt: f64, latitude: f64, ratios: Ratios, follows: f64) -> Expected {
        let log_usual = GIVEN_SPEEDS_KT.map(|speed| log_reach(speed, wind_kt.max(speed), latitude));
        let means = ratios.map(|row| row.iter().sum::<f64>() / 4.0);
        let lacks = std::array::from_fn(|i| ratios[i].map(|ratio| (means[i] - ratio).max(0.0)));
        let mean_gale_ratio = if means[0] > 0.0 { means[0] } else { 1.0 };
        Expected { wind_kt, latitude, ratios, log_usual, follows, lacks, mean_gale_ratio }
    }

    /// The mean reach of 34 kt as forecast, at least that of a storm just of gale force, n mi.
    #[must_use]
    pub fn usual_gale_nmi(&self) -> f64 {
        libm::exp(self.log_usual[0])
    }

    /// The reach in n mi of the three given speeds for a realisation of greatest wind `wind_kt` and the size
    /// error `size` (1 for none).
    ///
    /// R = ratio x size x U^(1 - g) x M^g, U the mean vortex's reach for the forecast wind (for one just
    /// strong enough, if it is below), M the same for the realised wind, g how far radii follow the strength;
    /// zero if the realised wind is too weak. As the storm grows stronger than forecast, quadrants below the
    /// storm's mean ratio come up to it.
    #[must_use]
    pub fn reach(&self, wind_kt: f64, size: f64) -> [[f64; 4]; 3] {
        self.reach_scaled(wind_kt, |i| size * self.scale(i, wind_kt))
    }

    /// U^(1 - g) x M^g of [`Expected::reach`] in n mi for the given speed number `i`, the weakest being 0, in a
    /// storm that has that wind.
    #[must_use]
    pub fn scale(&self, i: usize, wind_kt: f64) -> f64 {
        let usual = self.log_usual[i];
        let grown = log_reach(GIVEN_SPEEDS_KT[i], wind_kt, self.latitude) - usual;
        libm::exp(usual + self.follows * grown)
    }

    /// The reach where `scale` gives size x U^(1 - g) x M^g for each given speed; see [`Expected::reach`].
    #[must_use]
    pub fn reach_scaled(&self, wind_kt: f64, scale: impl Fn(usize) -> f64) -> [[f64; 4]; 3] {
        let stronger = ((wind_kt - self.wind_kt) / FILLED_AT_KT).clamp(0.0, 1.0);
        let mut reach = [[0.0; 4]; 3];
        let mut outside = [f64::INFINITY; 4];
        for (i, (out, speed)) in reach.iter_mut().zip(GIVEN_SPEEDS_KT).enumerate() {
            if wind_kt < speed {
                break;
            }
            let scale = scale(i);
            let filled =
                pairwise(self.ratios[i], self.lacks[i], |ratio, lacks| (ratio + stronger * lacks) * scale);
            // A stronger wind never reaches beyond a weaker one.
            *out = pairwise(filled, outside, f64::min);
            outside = *out;
        }
        reach
    }
}

#[cfg(test)]
mod tests {
    use super::{Expected, Structure};
    use approx::assert_abs_diff_eq;

    fn structure(known: [Vec<(f64, [f64; 4])>; 3]) -> Structure {
        Structure { known, relaxation_h: 36.0 }
    }

    #[test]
    fn after_the_last_given_radii_the_storm_relaxes_to_a_mean_one() {
        let storm = structure([vec![(0.0, [2.0; 4])], Vec::new(), Vec::new()]);
        assert_abs_diff_eq!(storm.ratios_at(36.0)[0][0], 1.0 + libm::exp(-1.0), epsilon = 1e-12);
        assert_abs_diff_eq!(storm.ratios_at(36.0)[1][0], 0.92 * (1.0 + libm::exp(-1.0)), epsilon = 1e-12);
        assert_abs_diff_eq!(storm.ratios_at(-6.0)[0][0], 2.0, epsilon = 1e-12);
    }

    #[test]
    fn a_storm_below_gale_force_has_no_gales_and_a_stronger_one_reaches_further() {
        let ratios = [[1.0, 1.0, 0.0, 0.5], [1.0; 4], [1.0; 4]];
        let expected = Expected::new(45.0, 20.0, ratios, 0.5);
        assert_abs_diff_eq!(expected.reach(33.0, 1.0)[0][0], 0.0);
        let as_forecast = expected.reach(45.0, 1.0)[0];
        let stronger = expected.reach(65.0, 1.0)[0];
        assert_abs_diff_eq!(as_forecast[2], 0.0);
        assert!(stronger[0] > as_forecast[0] && stronger[2] > 0.0);
    }

    #[test]
    fn a_stronger_wind_never_reaches_further_than_a_weaker_one() {
        let ratios = [[0.2; 4], [3.0; 4], [5.0; 4]];
        let [gale, storm, hurricane] = Expected::new(100.0, 20.0, ratios, 1.0).reach(100.0, 1.0);
        assert!(gale[0] >= storm[0] && storm[0] >= hurricane[0]);
    }
}
