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
use crate::wind::climatology::reach_nmi;
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
    /// How far radii follow the strength, 0..[`MOST_FOLLOWING`].
    follows: f64,
    /// For the three given speeds the mean reach of the four quadrants in n mi in a storm of any strength, over
    /// g (see [`Expected::reach`]).
    base_nmi: [f64; 3],
    /// Each quadrant's reach as a multiple of that mean.
    shapes: [[f64; 4]; 3],
    /// By how much it lies below 1; zero above it.
    lacks: [[f64; 4]; 3],
    /// The mean ratio of 34 kt to the mean storm; 1 if there is none.
    pub mean_gale_ratio: f64,
}

/// The most that radii may follow the strength: nearly to nothing in a storm that just has the wind.
pub const MOST_FOLLOWING: f64 = 0.95;

/// How a storm turns out other than forecast.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Change {
    /// Greatest wind in kt.
    pub wind_kt: f64,
    /// Reach as a multiple of what the forecast says for that wind.
    pub size: f64,
}

impl Expected {
    /// A forecast of strength and size. `follows`: how far a realisation's radii follow its strength.
    #[must_use]
    pub fn new(wind_kt: f64, latitude: f64, ratios: Ratios, follows: f64) -> Expected {
        let follows = follows.clamp(0.0, MOST_FOLLOWING);
        let means = ratios.map(|row| row.iter().sum::<f64>() / 4.0);
        let mut base_nmi = [0.0; 3];
        let mut shapes = [[1.0; 4]; 3];
        for (i, speed) in GIVEN_SPEEDS_KT.into_iter().enumerate() {
            let wind = wind_kt.max(speed);
            base_nmi[i] = means[i] * reach_nmi(speed, wind, latitude) / growth(speed / wind, follows);
            if means[i] > 0.0 {
                shapes[i] = ratios[i].map(|ratio| ratio / means[i]);
            }
        }
        let lacks = shapes.map(|row| row.map(|shape| (1.0 - shape).max(0.0)));
        let mean_gale_ratio = if means[0] > 0.0 { means[0] } else { 1.0 };
        Expected { wind_kt, latitude, follows, base_nmi, shapes, lacks, mean_gale_ratio }
    }

    /// The mean reach of 34 kt as forecast, at least that of a storm just of gale force, n mi.
    #[must_use]
    pub fn gale_nmi(&self) -> f64 {
        self.base_nmi[0] * growth(34.0 / self.wind_kt.max(34.0), self.follows)
    }

    /// A bound of the reach of 34 kt in any quadrant, n mi.
    #[must_use]
    pub fn bound_nmi(&self, change: &Change) -> f64 {
        let widest = self.shapes[0].into_iter().fold(1.0, f64::max);
        let share = 34.0 / change.wind_kt.max(34.0);
        widest * change.size * self.base_nmi[0] * growth(share, self.follows)
    }

    /// The mean reach of 34 kt in the quadrants, n mi; of a storm just of gale force where it is weaker.
    #[must_use]
    pub fn mean_gale_nmi(&self, change: &Change) -> f64 {
        change.size * self.base_nmi[0] * growth(34.0 / change.wind_kt.max(34.0), self.follows)
    }

    /// The reach in n mi of the three given speeds.
    ///
    /// R = size x R_f x g(u / V) / g(u / V_f), u the given speed, R_f the forecast reach, V the realised and V_f the forecast wind (u, if
    /// it is below); zero where V is below u. g(x) = 1 - c x^3, c how far radii follow the strength. As the storm grows stronger than forecast, quadrants below the storm's mean
    /// come up to it.
    #[must_use]
    pub fn reach(&self, change: &Change) -> [[f64; 4]; 3] {
        let stronger = ((change.wind_kt - self.wind_kt) / FILLED_AT_KT).clamp(0.0, 1.0);
        let mut reach = [[0.0; 4]; 3];
        let mut outside = [f64::INFINITY; 4];
        for (i, (out, speed)) in reach.iter_mut().zip(GIVEN_SPEEDS_KT).enumerate() {
            if change.wind_kt < speed {
                break;
            }
            let scale = change.size * self.base_nmi[i] * growth(speed / change.wind_kt, self.follows);
            let filled =
                pairwise(self.shapes[i], self.lacks[i], |shape, lacks| (shape + stronger * lacks) * scale);
            // A stronger wind never reaches beyond a weaker one.
            *out = pairwise(filled, outside, f64::min);
            outside = *out;
        }
        reach
    }
}

/// How far a wind reaches in a storm in which it is the share `u / V` of the greatest wind, as a share of the reach in an endless storm.
///
/// g = 1 - c (u / V)^3, c how far radii follow the strength. Measured at 24 to 48 h in storms forecast with 53 to 62 kt that came to 35, 40,
/// 45, 50, 60, 72, 90 kt: 0.5, 0.8, 0.9, 1.0, 1.07, 1.15, 1.2 of the forecast reach, and alike in others (advisories of the US National
/// Hurricane Center and HURDAT2, Atlantic, 2006-2015); the formula with c = 0.62: 0.5, 0.8, 0.9, 1.0, 1.1, 1.15, 1.2.
fn growth(share: f64, follows: f64) -> f64 {
    1.0 - follows * share * share * share
}

#[cfg(test)]
mod tests {
    use super::{Change, Expected, Structure};
    use approx::assert_abs_diff_eq;

    fn structure(known: [Vec<(f64, [f64; 4])>; 3]) -> Structure {
        Structure { known, relaxation_h: 36.0 }
    }

    fn to(wind_kt: f64) -> Change {
        Change { wind_kt, size: 1.0 }
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
        assert_abs_diff_eq!(expected.reach(&to(33.0))[0][0], 0.0);
        let as_forecast = expected.reach(&to(45.0))[0];
        let stronger = expected.reach(&to(65.0))[0];
        assert_abs_diff_eq!(as_forecast[2], 0.0);
        assert!(stronger[0] > as_forecast[0] && stronger[2] > 0.0);
    }

    #[test]
    fn a_stronger_wind_never_reaches_further_than_a_weaker_one() {
        let ratios = [[0.2; 4], [3.0; 4], [5.0; 4]];
        let [gale, storm, hurricane] = Expected::new(100.0, 20.0, ratios, 0.5).reach(&to(100.0));
        assert!(gale[0] >= storm[0] && storm[0] >= hurricane[0]);
    }
}
