//! When it is light at a position: the sun's rise, set and civil twilight.

use crate::geo::position::Position;
use crate::time::moment::Moment;
use crate::time::span::Span;
use crate::time::windows::WindowSet;
use chrono::{DateTime, Days, NaiveDate, Utc};

const SECONDS_PER_DAY: f64 = 86_400.0;

/// How high the sun must stand for it to be light.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum SunLimit {
    /// From sunrise to sunset: the upper limb on the horizon.
    Sunrise,
    /// From the beginning of civil twilight in the morning to its end in the evening.
    Civil,
}

impl SunLimit {
    /// The altitude of the sun's centre, in degrees, without refraction.
    ///
    /// -0.833: 34' of refraction and 16' of the sun's half width; -6 for civil twilight (NOAA solar calculator).
    #[must_use]
    pub fn altitude(self) -> f64 {
        match self {
            SunLimit::Sunrise => -0.833,
            SunLimit::Civil => -6.0,
        }
    }
}

/// One day of the sun at a place.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum SunDay {
    /// It passes the limit upwards and later downwards.
    Between {
        /// When it passes the limit upwards, to the second.
        rise: DateTime<Utc>,
        /// When it passes the limit downwards, to the second.
        set: DateTime<Utc>,
    },
    /// It stays above the limit.
    UpAllDay,
    /// It stays below the limit.
    DownAllDay,
}

/// When the sun passes `limit` on a day at a place; the day is the one of local mean time, midnight to midnight.
///
/// Right within a minute of the sea horizon's sunrise up to 65 degrees of latitude, nearer the poles only in most of the
/// year; hills and unusual refraction come on top.
#[must_use]
pub fn sun_day(position: Position, day: NaiveDate, limit: SunLimit) -> SunDay {
    let noon = mean_noon(position, day);
    let (Some(rise), Some(set)) = (passage(position, noon, limit, -1.0), passage(position, noon, limit, 1.0))
    else {
        return SunDay::DownAllDay;
    };
    if rise.is_midnight && set.is_midnight {
        return SunDay::UpAllDay;
    }
    SunDay::Between { rise: instant(rise.at_s), set: instant(set.at_s) }
}

/// The minutes from `from` until `to` in which it is light, rounded to the safe side: starts up, ends down.
#[must_use]
pub fn daylight(position: Position, from: Moment, to: Moment, limit: SunLimit) -> WindowSet {
    let Some(asked) = Span::new(from, to) else { return WindowSet::never() };
    // Local mean time is within half a day of UTC.
    let first = from.to_utc().date_naive() - Days::new(1);
    let last = to.to_utc().date_naive() + Days::new(1);
    let spans =
        first.iter_days().take_while(|day| *day <= last).filter_map(|day| light_of(position, day, limit));
    WindowSet::from_spans(spans).overlap(&WindowSet::from_spans([asked]))
}

fn light_of(position: Position, day: NaiveDate, limit: SunLimit) -> Option<Span> {
    match sun_day(position, day, limit) {
        SunDay::Between { rise, set } => Span::new(Moment::at_or_after(rise), Moment::at_or_before(set)),
        SunDay::DownAllDay => None,
        // Outwards, so that one such day joins the next.
        SunDay::UpAllDay => {
            let noon = mean_noon(position, day);
            let half = SECONDS_PER_DAY / 2.0;
            Span::new(Moment::at_or_before(instant(noon - half)), Moment::at_or_after(instant(noon + half)))
        }
    }
}

/// The altitude of the sun's centre in degrees at an instant, without refraction; good to 0.02 degrees.
///
/// It goes another way than [`sun_day`], so that the one can check the other.
#[must_use]
pub fn sun_altitude(position: Position, at: DateTime<Utc>) -> f64 {
    // sin(alt) = sin(phi) sin(delta) + cos(phi) cos(delta) cos(H); H hour angle, phi latitude, delta declination.
    let at_s = at.timestamp() as f64 + f64::from(at.timestamp_subsec_millis()) / 1000.0;
    let sun = Sun::at(at_s);
    let solar_minutes =
        at_s.rem_euclid(SECONDS_PER_DAY) / 60.0 + sun.equation_min + 4.0 * position.longitude();
    let hour_angle = (solar_minutes / 4.0 - 180.0).to_radians();
    let (sin_phi, cos_phi) = libm::sincos(position.latitude().to_radians());
    let (sin_delta, cos_delta) = libm::sincos(sun.declination);
    let sine = sin_phi * sin_delta + cos_phi * cos_delta * libm::cos(hour_angle);
    libm::asin(sine.clamp(-1.0, 1.0)).to_degrees()
}

/// 12:00 local mean time of `day`, in seconds since 1970.
fn mean_noon(position: Position, day: NaiveDate) -> f64 {
    let days = f64::from(day.to_epoch_days());
    // The earth turns one degree in 240 seconds.
    days * SECONDS_PER_DAY + SECONDS_PER_DAY / 2.0 - 240.0 * position.longitude()
}

struct Passage {
    at_s: f64,
    is_midnight: bool,
}

/// The passage before (`side` -1) or after (1) noon; `None` if the sun stays below the limit.
fn passage(position: Position, mean_noon: f64, limit: SunLimit, side: f64) -> Option<Passage> {
    // cos(H0) = (sin(h0) - sin(phi) sin(delta)) / (cos(phi) cos(delta)); H0 hour angle at the altitude h0,
    // phi latitude, delta declination (Meeus, Astronomical Algorithms, 2nd ed., eq. 15.1). The sun moves on meanwhile:
    // delta and the equation of time are taken again at the passage found; the fourth round moves it by milliseconds.
    const ROUNDS: usize = 5;
    let (sin_phi, cos_phi) = libm::sincos(position.latitude().to_radians());
    let sin_h0 = libm::sin(limit.altitude().to_radians());
    let mut at_s = mean_noon;
    let mut cosine = 0.0;
    for _ in 0..ROUNDS {
        let sun = Sun::at(at_s);
        let (sin_delta, cos_delta) = libm::sincos(sun.declination);
        cosine = (sin_h0 - sin_phi * sin_delta) / (cos_phi * cos_delta);
        let hour_angle = libm::acos(cosine.clamp(-1.0, 1.0)).to_degrees();
        at_s = mean_noon - sun.equation_min * 60.0 + side * hour_angle * 240.0;
    }
    (cosine < 1.0).then_some(Passage { at_s, is_midnight: cosine <= -1.0 })
}

fn instant(seconds: f64) -> DateTime<Utc> {
    DateTime::from_timestamp(seconds.round() as i64, 0).unwrap_or_default()
}

/// Where the sun stands at an instant.
struct Sun {
    /// Declination in radians.
    declination: f64,
    /// Equation of time in minutes: true minus mean solar time.
    equation_min: f64,
}

impl Sun {
    /// The sun's place by the equations of the NOAA solar calculator (Meeus, Astronomical Algorithms, ch. 25 and 28).
    fn at(seconds: f64) -> Sun {
        // t   Julian centuries since 2000-01-01T12:00        l0  mean longitude, degrees
        // m   mean anomaly, degrees                          e   eccentricity of the orbit
        // c   equation of the centre, degrees                om  longitude of the moon's node, degrees
        // lam apparent longitude, degrees                    eps obliquity of the ecliptic, degrees
        let t = (seconds - 946_728_000.0) / (36_525.0 * SECONDS_PER_DAY);
        let l0 = 280.466_46 + t * (36_000.769_83 + 0.000_303_2 * t);
        let m = 357.529_11 + t * (35_999.050_29 - 0.000_153_7 * t);
        let e = 0.016_708_634 - t * (0.000_042_037 + 0.000_000_126_7 * t);
        let sine = |degrees: f64| libm::sin(degrees.to_radians());
        let cosine = |degrees: f64| libm::cos(degrees.to_radians());
        let c = sine(m) * (1.914_602 - t * (0.004_817 + 0.000_014 * t))
            + sine(2.0 * m) * (0.019_993 - 0.000_101 * t)
            + sine(3.0 * m) * 0.000_289;
        let om = 125.04 - 1934.136 * t;
        let lam = l0 + c - 0.005_69 - 0.004_78 * sine(om);
        let arc_seconds = 21.448 - t * (46.815 + t * (0.000_59 - t * 0.001_813));
        let eps = 23.0 + (26.0 + arc_seconds / 60.0) / 60.0 + 0.002_56 * cosine(om);
        let declination = libm::asin(sine(eps) * sine(lam));
        // y = tan2(eps / 2); E = y sin 2 l0 - 2 e sin m + 4 e y sin m cos 2 l0 - y2/2 sin 4 l0 - 5/4 e2 sin 2 m
        // (Smart; Meeus eq. 28.3), in radians; the earth turns a degree in 4 minutes.
        let half = libm::tan((eps / 2.0).to_radians());
        let y = half * half;
        let equation = y * sine(2.0 * l0) - 2.0 * e * sine(m) + 4.0 * e * y * sine(m) * cosine(2.0 * l0)
            - 0.5 * y * y * sine(4.0 * l0)
            - 1.25 * e * e * sine(2.0 * m);
        Sun { declination, equation_min: 4.0 * equation.to_degrees() }
    }
}
