//! Where moon and sun stand, as the tide needs it.

use chrono::{DateTime, Utc};

const HOURS_PER_CENTURY: f64 = 876_600.0;

/// Mean longitudes of moon and sun, in degrees (not reduced to a circle).
#[derive(Clone, Copy, Debug)]
pub struct Astronomy {
    /// The mean sun's hour angle from midnight UTC, 15 degrees an hour.
    pub t15: f64,
    /// Mean longitude of the moon.
    pub s: f64,
    /// Mean longitude of the sun.
    pub h: f64,
    /// Longitude of the moon's perigee.
    pub p: f64,
    /// Longitude of the moon's ascending node, N.
    pub n: f64,
    /// Longitude of the sun's perigee, p' or p1.
    pub p1: f64,
}

impl Astronomy {
    /// Degrees an hour by which t15, s, h, p and p1 grow (the linear terms of [`Astronomy::at`]).
    pub const RATES: [f64; 5] = [
        15.0,
        481_267.881_342_36 / HOURS_PER_CENTURY,
        36_000.769_748_9 / HOURS_PER_CENTURY,
        4_069.013_711_1 / HOURS_PER_CENTURY,
        1.719_46 / HOURS_PER_CENTURY,
    ];

    /// The longitudes at an instant.
    #[must_use]
    pub fn at(instant: DateTime<Utc>) -> Astronomy {
        // T in Julian centuries from 2000-01-01T12:00. s, h, p, N: Meeus, Astronomical Algorithms (1998), with the
        // constants that published tide libraries share; p1 = 282.93735 + 1.71946 T (Meeus, from memory).
        let unix_s = instant.timestamp() as f64 + f64::from(instant.timestamp_subsec_millis()) / 1000.0;
        let t = (unix_s - 946_728_000.0) / (HOURS_PER_CENTURY * 3600.0);
        Astronomy {
            t15: 15.0 * unix_s.rem_euclid(86_400.0) / 3600.0,
            s: 218.316_459_1 + t * (481_267.881_342_36 - 0.001_326_8 * t),
            h: 280.466_45 + t * (36_000.769_748_9 + 0.000_303_2 * t),
            p: 83.353_243 + t * (4_069.013_711_1 - 0.010_323_8 * t),
            n: 125.044_555 + t * (-1_934.136_184_9 + 0.002_076_2 * t),
            p1: 282.937_35 + 1.719_46 * t,
        }
    }
}

/// Sines and cosines of the node's longitude, taken once for all constituents.
#[derive(Clone, Copy, Debug)]
pub struct NodeTrig {
    sin: [f64; 3],
    cos: [f64; 3],
    p: f64,
    n: f64,
}

/// How far the moon's 18.6-year cycle changes a constituent.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Nodal {
    /// Not at all: it is the sun's.
    Steady,
    /// As M2, to a power: 2 for M4, which is M2 with itself; -1 turns the phase only.
    M2(i8),
    /// As K1.
    K1,
    /// As O1.
    O1,
    /// As K2.
    K2,
    /// As L2, which feels the moon's perigee too.
    L2,
    /// As Mm.
    Mm,
    /// As Mf.
    Mf,
}

impl Nodal {
    /// A factor that f never exceeds: the sum of the sizes of its terms, as [`NodeTrig::factor_angle`] has them.
    #[must_use]
    pub fn greatest_factor(self) -> f64 {
        match self {
            Nodal::Steady => 1.0,
            Nodal::M2(power) => {
                (0..power.unsigned_abs()).fold(1.0, |product, _| product * (1.0004 + 0.0373 + 0.0002))
            }
            Nodal::K1 => 1.0060 + 0.1150 + 0.0088 + 0.0006,
            Nodal::O1 => 1.0089 + 0.1871 + 0.0147 + 0.0014,
            Nodal::K2 => 1.0241 + 0.2863 + 0.0083 + 0.0015,
            Nodal::L2 => 1.0 + 0.2505 + 0.1102 + 0.0156 + 0.0370,
            Nodal::Mm => 1.0 + 0.1300 + 0.0013,
            Nodal::Mf => 1.0429 + 0.4135 + 0.0040,
        }
    }
}

impl NodeTrig {
    /// The node's sines and cosines for these longitudes.
    #[must_use]
    pub fn of(astronomy: &Astronomy) -> NodeTrig {
        let [(s1, c1), (s2, c2), (s3, c3)] =
            [1.0, 2.0, 3.0].map(|times| libm::sincos((times * astronomy.n).to_radians()));
        NodeTrig { sin: [s1, s2, s3], cos: [c1, c2, c3], p: astronomy.p, n: astronomy.n }
    }

    /// The factor f on the amplitude, and the angle u in degrees on the phase.
    #[must_use]
    pub fn factor_angle(&self, nodal: Nodal) -> (f64, f64) {
        // Doodson (1928) and Schureman (1940), the coefficients as published tide libraries give them; Mm, Mf and L2 are
        // Doodson's from memory, compared with such a library. MSf follows Schureman's table 11: u opposite to M2's.
        let ([s1, s2, s3], [c1, c2, c3]) = (self.sin, self.cos);
        match nodal {
            Nodal::Steady => (1.0, 0.0),
            Nodal::M2(power) => {
                let (f, u) = (1.0004 - 0.0373 * c1 + 0.0002 * c2, -2.14 * s1);
                let size = (0..power.unsigned_abs()).fold(1.0, |product, _| product * f);
                (size, f64::from(power) * u)
            }
            Nodal::K1 => {
                (1.0060 + 0.1150 * c1 - 0.0088 * c2 + 0.0006 * c3, -8.86 * s1 + 0.68 * s2 - 0.07 * s3)
            }
            Nodal::O1 => {
                (1.0089 + 0.1871 * c1 - 0.0147 * c2 + 0.0014 * c3, 10.80 * s1 - 1.34 * s2 + 0.19 * s3)
            }
            Nodal::K2 => {
                (1.0241 + 0.2863 * c1 + 0.0083 * c2 - 0.0015 * c3, -17.74 * s1 + 0.68 * s2 - 0.04 * s3)
            }
            Nodal::Mm => (1.0 - 0.1300 * c1 + 0.0013 * c2, 0.0),
            Nodal::Mf => (1.0429 + 0.4135 * c1 - 0.0040 * c2, -23.74 * s1 + 2.68 * s2 - 0.38 * s3),
            Nodal::L2 => self.l2(),
        }
    }

    /// f cos u = 1 - 0.2505 cos 2p - 0.1102 cos(2p - N) - 0.0156 cos(2p - 2N) - 0.0370 cos N, f sin u likewise in sines.
    fn l2(&self) -> (f64, f64) {
        let two_p = 2.0 * self.p;
        let terms =
            [(0.2505, two_p), (0.1102, two_p - self.n), (0.0156, two_p - 2.0 * self.n), (0.0370, self.n)];
        let (mut east, mut north) = (0.0, 1.0);
        for (size, degrees) in terms {
            let (sin, cos) = libm::sincos(degrees.to_radians());
            east -= size * sin;
            north -= size * cos;
        }
        (libm::hypot(east, north), libm::atan2(east, north).to_degrees())
    }
}
