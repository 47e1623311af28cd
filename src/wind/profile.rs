//! Wind speed and distance from the centre along one bearing: each from the other.
//!
//! Between the radii that an advisory gives the wind follows a power law, straight in log-log; inside them it
//! rises to the greatest wind as the mean vortex does, outside it falls on with the last exponent.
//! [`Profile::reach_nmi`] and [`Profile::speed_kt`] are each other's inverse.

/// The wind speeds whose reach advisories give, in kt, weakest first.
pub const GIVEN_SPEEDS_KT: [f64; 3] = [34.0, 50.0, 64.0];

/// Bounds of the exponent beyond the gale radius (physics of the modified Rankine vortex: 1 keeps angular
/// momentum, 0.4 is the flattest outer profile in use; Knaff et al. 2007 find 0.3 to 0.9 within the gale
/// radius). Our choice of bounds.
const OUTER_EXPONENT: (f64, f64) = (0.4, 1.0);

/// Where a wind of a given speed is not found on a bearing, the wind there stays this much (kt) below that
/// speed.
const JUST_BELOW_KT: f64 = 0.1;

/// ln(50 / 34).
const LOG_50_OVER_34: f64 = 0.385_662_480_811_984_73;

/// ln(64 / 50).
const LOG_64_OVER_50: f64 = 0.246_860_077_931_525_8;

/// gale radius / storm radius at which the outer exponent is at its upper and at its lower bound: (50 / 34)^(1/x).
const STEEPEST_RATIO: f64 = 50.0 / 34.0;
const FLATTEST_RATIO: f64 = 2.622_573_800_133_358_7;

/// A wind speed, ready to be compared with many profiles.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Limit {
    /// The speed in kt.
    pub kt: f64,
    /// How far its logarithm lies from that of 34 kt, as a share of that from 34 to 50 kt; above 50 kt from 50 kt
    /// as a share of that from 50 to 64 kt.
    share: f64,
}

impl Limit {
    /// A speed of `kt`, above zero.
    #[must_use]
    pub fn new(kt: f64) -> Limit {
        let share = if kt > 50.0 {
            libm::log(kt / 50.0) / LOG_64_OVER_50
        } else {
            libm::log(kt / 34.0) / LOG_50_OVER_34
        };
        Limit { kt, share }
    }
}

/// Whether ln a <= share x ln b, for a and b from 1 up.
///
/// 2 (v - 1) / (v + 1) <= ln v <= (v - 1) / sqrt v decides nearly always, several times faster than the logarithms.
fn log_is_within(a: f64, share: f64, b: f64) -> bool {
    let at_least = |v: f64| 2.0 * (v - 1.0) / (v + 1.0);
    let at_most = |v: f64| (v - 1.0) / f64::sqrt(v);
    if at_most(a) <= share * at_least(b) {
        true
    } else if at_least(a) > share * at_most(b) {
        false
    } else {
        libm::log(a) <= share * libm::log(b)
    }
}

/// The exponent x of v = c r^-x through (r1, v1) and (r2, v2): x = ln(v2 / v1) / ln(r1 / r2).
#[must_use]
pub fn exponent_between(r1_nmi: f64, v1_kt: f64, r2_nmi: f64, v2_kt: f64) -> f64 {
    libm::log(v2_kt / v1_kt) / libm::log(r1_nmi / r2_nmi)
}

/// A quantity known at 45, 135, 225 and 315 degrees (the middles of the quadrants), linear in bearing between
/// them.
#[must_use]
pub fn around(quadrants: [f64; 4], bearing_degrees: f64) -> f64 {
    let (from, to, share) = sector(bearing_degrees);
    quadrants[from] * (1.0 - share) + quadrants[to] * share
}

/// Between which two quadrants (NE 0, SE 1, SW 2, NW 3) a bearing lies, and how far towards the second, 0..1.
#[must_use]
pub fn sector(bearing_degrees: f64) -> (usize, usize, f64) {
    let turned = (bearing_degrees - 45.0 + 360.0) / 90.0;
    // A bearing of 0 to 360 makes 3.5 to 7.5 here: the cast rounds down, and the mask turns 4..7 into 0..3.
    let whole = turned as usize;
    (whole & 3, (whole + 1) & 3, turned - whole as f64)
}

/// The vortex along one bearing.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Profile {
    /// Greatest wind of the storm in kt.
    pub max_wind_kt: f64,
    /// Reach of 34, 50 and 64 kt in n mi, not rising; zero where that wind does not blow.
    pub reach_nmi: [f64; 3],
    /// Exponent of the mean vortex for this storm, above zero.
    pub exponent: f64,
    /// Radius of greatest wind in n mi, above zero: carries the profile where even 34 kt do not blow.
    pub core_nmi: f64,
}

impl Profile {
    /// The profile a share `s` (0..1) of the way from `self` to `next`.
    #[must_use]
    pub fn towards(&self, next: &Profile, s: f64) -> Profile {
        let mix = |a: f64, b: f64| a + (b - a) * s;
        let ([a0, a1, a2], [b0, b1, b2]) = (self.reach_nmi, next.reach_nmi);
        Profile {
            max_wind_kt: mix(self.max_wind_kt, next.max_wind_kt),
            reach_nmi: [mix(a0, b0), mix(a1, b1), mix(a2, b2)],
            exponent: mix(self.exponent, next.exponent),
            core_nmi: mix(self.core_nmi, next.core_nmi),
        }
    }

    /// How far a wind of the limit or more reaches on this bearing in n mi; zero if it does not blow. The calm of
    /// the eye is not cut out.
    #[must_use]
    pub fn reach_nmi(&self, limit: &Limit) -> f64 {
        if self.max_wind_kt < limit.kt {
            return 0.0;
        }
        let [gale, storm, hurricane] = self.reach_nmi;
        if limit.kt < 34.0 {
            return self.outer_reach(limit);
        }
        let between = |r1: f64, v1: f64, r2: f64| {
            if r1 <= 0.0 {
                0.0
            } else if r2 > 0.0 {
                // ln R is linear in ln v between the two given winds.
                r1 * libm::exp(libm::log(r2 / r1) * limit.share)
            } else {
                self.inner_reach(r1, v1, limit.kt)
            }
        };
        if limit.kt <= 34.0 {
            gale
        } else if limit.kt < 50.0 {
            between(gale, 34.0, storm)
        } else if limit.kt <= 50.0 {
            storm
        } else if limit.kt < 64.0 {
            between(storm, 50.0, hurricane)
        } else if hurricane > 0.0 {
            self.inner_reach(hurricane, 64.0, limit.kt)
        } else {
            0.0
        }
    }

    /// R = R1 (v1 / v)^(1/x) outside the gales.
    fn outer_reach(&self, limit: &Limit) -> f64 {
        let (radius, speed) = self.outer_start();
        let log_beyond = match self.outer_ratio() {
            // 1/x = ln(gale / storm) / ln(50 / 34), of which the limit knows the divisor.
            Some(ratio) if speed >= 34.0 => -limit.share * libm::log(ratio),
            _ => libm::log(speed / limit.kt) / self.outer_exponent(),
        };
        radius * libm::exp(log_beyond)
    }

    /// The wind in kt at `r_nmi` from the centre on this bearing; the calm of the eye is not cut out.
    #[must_use]
    pub fn speed_kt(&self, r_nmi: f64) -> f64 {
        let [gale, storm, hurricane] = self.reach_nmi;
        if r_nmi > gale {
            let (radius, speed) = self.outer_start();
            let cap = self.max_wind_kt.min(34.0 - JUST_BELOW_KT);
            if r_nmi <= radius {
                return cap;
            }
            return cap.min(speed * libm::exp(libm::log(radius / r_nmi) * self.outer_exponent()));
        }
        let between = |r1: f64, v1: f64, r2: f64, v2: f64| {
            if r2 > 0.0 && r2 < r1 {
                v1 * libm::exp(libm::log(r1 / r_nmi) / libm::log(r1 / r2) * libm::log(v2 / v1))
            } else if r2 > 0.0 {
                v1
            } else {
                self.inner_speed(r1, v1, r_nmi).min(v2 - JUST_BELOW_KT)
            }
        };
        if r_nmi > storm {
            between(gale, 34.0, storm, 50.0)
        } else if r_nmi > hurricane {
            between(storm, 50.0, hurricane, 64.0)
        } else {
            self.inner_speed(hurricane, 64.0, r_nmi)
        }
    }

    /// Whether the wind at `r_nmi` from the centre is `limit` or more: what [`Profile::speed_kt`] says, mostly
    /// without its logarithms.
    #[must_use]
    pub fn blows(&self, limit: &Limit, r_nmi: f64) -> bool {
        let [gale, storm, hurricane] = self.reach_nmi;
        let kt = limit.kt;
        if self.max_wind_kt < kt {
            return false;
        }
        if r_nmi > gale || gale <= 0.0 {
            return kt < 34.0 && self.blows_outside(limit, r_nmi);
        }
        // Inside the nearest given radius that is known, and outside the next: ln R is linear in ln v between them.
        let (sure, at_most, outer, inner) = if r_nmi <= hurricane {
            (64.0, f64::INFINITY, hurricane, 0.0)
        } else if r_nmi <= storm {
            (50.0, 64.0, storm, hurricane)
        } else {
            (34.0, 50.0, gale, storm)
        };
        if kt <= sure {
            true
        } else if kt >= at_most || inner >= outer {
            false
        } else if inner > 0.0 {
            !log_is_within(outer / r_nmi, limit.share, outer / inner)
        } else {
            self.speed_kt(r_nmi) >= kt
        }
    }

    /// The same outside the gales.
    fn blows_outside(&self, limit: &Limit, r_nmi: f64) -> bool {
        let (radius, speed) = self.outer_start();
        if limit.kt > 34.0 - JUST_BELOW_KT {
            return false;
        }
        if r_nmi <= radius {
            return true;
        }
        match self.outer_ratio() {
            Some(ratio) if speed >= 34.0 => log_is_within(r_nmi / radius, -limit.share, ratio),
            _ => self.speed_kt(r_nmi) >= limit.kt,
        }
    }

    /// R = R1 (v1 / v)^(1/x) towards the core, with the mean vortex's x, up to the greatest wind.
    fn inner_reach(&self, r1_nmi: f64, v1_kt: f64, speed_kt: f64) -> f64 {
        r1_nmi * libm::exp(libm::log(v1_kt / speed_kt) / self.exponent)
    }

    /// v = v1 (R1 / r)^x towards the core, at most the greatest wind.
    fn inner_speed(&self, r1_nmi: f64, v1_kt: f64, r_nmi: f64) -> f64 {
        if r_nmi <= 0.0 {
            return self.max_wind_kt;
        }
        self.max_wind_kt.min(v1_kt * libm::exp(libm::log(r1_nmi / r_nmi) * self.exponent))
    }

    /// Radius and speed from which winds below 34 kt fall off: the gale radius, or the core where it is the
    /// wider or no gale blows.
    fn outer_start(&self) -> (f64, f64) {
        (self.reach_nmi[0].max(self.core_nmi), self.max_wind_kt.min(34.0))
    }

    /// The last exponent known, within its bounds: between the 34- and 50-kt radii where both are there, else
    /// the mean vortex's.
    fn outer_exponent(&self) -> f64 {
        match self.outer_ratio() {
            Some(ratio) => LOG_50_OVER_34 / libm::log(ratio),
            None => self.exponent.clamp(OUTER_EXPONENT.0, OUTER_EXPONENT.1),
        }
    }

    /// The gale radius over the storm radius, held where the exponent between them is within its bounds; `None`
    /// if they are not both there.
    fn outer_ratio(&self) -> Option<f64> {
        let [gale, storm, _] = self.reach_nmi;
        (storm > 0.0 && gale > storm).then(|| (gale / storm).clamp(STEEPEST_RATIO, FLATTEST_RATIO))
    }
}

#[cfg(test)]
mod tests {
    use super::{
        FLATTEST_RATIO, LOG_50_OVER_34, LOG_64_OVER_50, Limit, OUTER_EXPONENT, Profile, around,
        exponent_between,
    };
    use approx::assert_abs_diff_eq;
    use proptest::prelude::{prop_assert, proptest};

    #[test]
    fn between_two_radii_the_wind_is_straight_in_log_log() {
        assert_abs_diff_eq!(exponent_between(120.0, 34.0, 60.0, 50.0), 0.5564, epsilon = 5e-5);
        assert_abs_diff_eq!(LOG_50_OVER_34, libm::log(50.0 / 34.0), epsilon = 1e-16);
        assert_abs_diff_eq!(LOG_64_OVER_50, libm::log(64.0 / 50.0), epsilon = 1e-16);
        assert_abs_diff_eq!(FLATTEST_RATIO, libm::pow(50.0 / 34.0, 1.0 / OUTER_EXPONENT.0), epsilon = 1e-15);
        let profile =
            Profile { max_wind_kt: 55.0, reach_nmi: [120.0, 60.0, 0.0], exponent: 0.5, core_nmi: 30.0 };
        assert_abs_diff_eq!(profile.speed_kt(90.0), 39.90, epsilon = 5e-3);
        assert_abs_diff_eq!(profile.reach_nmi(&Limit::new(40.0)), 89.60, epsilon = 5e-3);
    }

    #[test]
    fn inside_the_given_radii_it_is_a_modified_rankine_vortex() {
        // Vm = 100 kt at Rm = 20 n mi, x = 0.6: 51.73 kt at 60 n mi, 34.13 kt at 120 n mi.
        let r64 = 20.0 * libm::pow(100.0 / 64.0, 1.0 / 0.6);
        let r50 = 20.0 * libm::pow(100.0 / 50.0, 1.0 / 0.6);
        let r34 = 20.0 * libm::pow(100.0 / 34.0, 1.0 / 0.6);
        let profile =
            Profile { max_wind_kt: 100.0, reach_nmi: [r34, r50, r64], exponent: 0.6, core_nmi: 20.0 };
        assert_abs_diff_eq!(profile.speed_kt(20.0), 100.0, epsilon = 1e-9);
        assert_abs_diff_eq!(profile.speed_kt(60.0), 51.73, epsilon = 5e-3);
        assert_abs_diff_eq!(profile.speed_kt(120.0), 34.13, epsilon = 5e-3);
        assert_abs_diff_eq!(profile.speed_kt(150.0), 100.0 * libm::pow(20.0 / 150.0, 0.6), epsilon = 1e-9);
    }

    #[test]
    fn between_quadrant_middles_the_reach_is_linear_in_bearing() {
        let quadrants = [120.0, 100.0, 60.0, 0.0];
        for (bearing, reach) in
            [(45.0, 120.0), (90.0, 110.0), (0.0, 60.0), (315.0, 0.0), (359.0, 58.666_667), (292.5, 15.0)]
        {
            assert_abs_diff_eq!(around(quadrants, bearing), reach, epsilon = 1e-5);
        }
    }

    proptest! {
        #[test]
        fn speed_and_reach_are_each_others_inverse(
            gale in 0.0..300.0_f64, storm in 0.0..1.0_f64, hurricane in 0.0..1.0_f64,
            wind in 10.0..180.0_f64, core in 5.0..60.0_f64, speed in 5.0..180.0_f64,
        ) {
            let reach = |u: f64, r: f64| if wind < u || r < 2.0 { 0.0 } else { r };
            let gale = reach(34.0, gale);
            let storm = reach(50.0, gale * storm);
            let hurricane = reach(64.0, storm * hurricane);
            let profile = Profile {
                max_wind_kt: wind, reach_nmi: [gale, storm, hurricane], exponent: 0.1147 + 0.0055 * wind, core_nmi: core,
            };
            for r in [0.1, 0.3, 0.9, 1.1, 2.0, 5.0].map(|times| times * core.max(gale)) {
                let wind = profile.speed_kt(r);
                prop_assert!((wind - speed).abs() < 1e-9 || profile.blows(&Limit::new(speed), r) == (wind >= speed));
            }
            let limit = profile.reach_nmi(&Limit::new(speed));
            if limit > 0.1 {
                prop_assert!(profile.speed_kt(limit * 0.999) >= speed - 0.11, "inside");
            }
            prop_assert!(profile.speed_kt(limit * 1.001 + 0.001) < speed + 1e-9, "outside");
        }
    }
}
