//! Swell that runs ahead of a storm, and the waves near its centre.

use crate::units::length::{Metres, NauticalMiles};
use crate::units::speed::{Knots, METRES_PER_SECOND_PER_KNOT};

/// Acceleration of gravity, m/s2: the standard value.
const GRAVITY: f64 = 9.806_65;

/// Periods in seconds of the swell that comes first (forerunners), longest first: 14 to 18 s in common descriptions of
/// cyclone swell; from memory.
pub const FORERUNNER_PERIODS_S: [f64; 2] = [18.0, 14.0];

/// The speed with which the energy of swell of a period `t_s` (seconds) travels over deep water.
///
/// c_g = g T / (4 pi) (linear wave theory).
#[must_use]
pub fn group_speed(t_s: f64) -> Knots {
    Knots::clamped(GRAVITY * t_s / (4.0 * std::f64::consts::PI) / METRES_PER_SECOND_PER_KNOT)
}

/// Hours that swell of a period takes over a distance of deep water, D / c_g.
#[must_use]
pub fn hours_over(distance: NauticalMiles, t_s: f64) -> f64 {
    distance.get() / group_speed(t_s).get().max(0.1)
}

/// Waves near the centre of a storm.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct StormWaves {
    /// Significant height.
    pub height: Metres,
    /// Peak period in seconds.
    pub period_s: f64,
}

/// The greatest significant wave height in a storm over deep water and its peak period, by Young 1988 (Journal of Waterway,
/// Port, Coastal and Ocean Engineering 114:637-652; coefficients as in public codes).
///
/// V greatest 10-min wind (m/s), Vf forward speed (m/s), Rm radius of greatest wind:
/// x / R' = a V^2 + b V Vf + c Vf^2 + d V + e Vf + f, R' = 22500 log10(Rm) - 70800 (m);
/// g Hs / V^2 = 0.0016 (g x / V^2)^0.5; g Tp / (2 pi V) = 0.045 (g x / V^2)^0.33.
///
/// `None` outside its range: 20 < V < 60 m/s, Vf < 12 m/s, Rm from 10 to 200 km.
#[must_use]
pub fn storm_waves(greatest_10_min: Knots, forward: Knots, rm: NauticalMiles) -> Option<StormWaves> {
    const COEFFICIENTS: [f64; 6] = [-2.175e-3, 1.506e-2, -1.223e-1, 2.190e-1, 6.737e-1, 7.980e-1];
    let v = greatest_10_min.get() * METRES_PER_SECOND_PER_KNOT;
    let vf = forward.get() * METRES_PER_SECOND_PER_KNOT;
    let rm = rm.get() * 1852.0;
    if !(20.0..=60.0).contains(&v) || vf > 12.0 || !(10_000.0..=200_000.0).contains(&rm) {
        return None;
    }
    let [a, b, c, d, e, f] = COEFFICIENTS;
    let r = 22_500.0 * libm::log10(rm) - 70_800.0;
    let x = r * (a * v * v + b * v * vf + c * vf * vf + d * v + e * vf + f);
    let fetch = GRAVITY * x / (v * v);
    if fetch <= 0.0 {
        return None;
    }
    Some(StormWaves {
        height: Metres::clamped(0.0016 * f64::sqrt(fetch) * v * v / GRAVITY),
        period_s: 0.045 * libm::pow(fetch, 0.33) * 2.0 * std::f64::consts::PI * v / GRAVITY,
    })
}

#[cfg(test)]
mod tests {
    use super::{group_speed, hours_over, storm_waves};
    use crate::units::length::NauticalMiles;
    use crate::units::speed::{Knots, METRES_PER_SECOND_PER_KNOT};
    use approx::assert_abs_diff_eq;

    #[test]
    fn swell_travels_as_linear_theory_says() {
        // c_g = g T / 4 pi: 12.1, 15.2, 18.2, 21.2, 24.3, 27.3 kt at 8 to 18 s, worked by hand.
        for (period, knots) in
            [(8.0, 12.1), (10.0, 15.2), (12.0, 18.2), (14.0, 21.2), (16.0, 24.3), (18.0, 27.3)]
        {
            assert_abs_diff_eq!(group_speed(period).get(), knots, epsilon = 0.06);
        }
        for (period, miles, hours) in [(14.0, 500.0, 23.5), (10.0, 500.0, 32.9), (16.0, 1000.0, 41.2)] {
            assert_abs_diff_eq!(hours_over(NauticalMiles::new(miles).unwrap(), period), hours, epsilon = 0.1);
        }
    }

    #[test]
    fn waves_near_the_centre_follow_the_published_formula() {
        // Young 1988 worked by an independent calculation: V 40, Vf 5, Rm 30 km: 10.84 m, 13.5 s; V 50: 14.24 m; V 30, 40 km:
        // 7.83 m.
        let kt = |ms: f64| Knots::new(ms / METRES_PER_SECOND_PER_KNOT).unwrap();
        let waves =
            |v, rm_km: f64| storm_waves(kt(v), kt(5.0), NauticalMiles::new(rm_km / 1.852).unwrap()).unwrap();
        assert_abs_diff_eq!(waves(40.0, 30.0).height.get(), 10.84, epsilon = 0.02);
        assert_abs_diff_eq!(waves(40.0, 30.0).period_s, 13.5, epsilon = 0.05);
        assert_abs_diff_eq!(waves(50.0, 30.0).height.get(), 14.24, epsilon = 0.02);
        assert_abs_diff_eq!(waves(30.0, 40.0).height.get(), 7.83, epsilon = 0.02);
        assert!(storm_waves(kt(15.0), kt(5.0), NauticalMiles::new(20.0).unwrap()).is_none());
    }
}
