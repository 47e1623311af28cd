//! Whether an advisory can be true: slips of the hand and of the wire, told apart from unusual storms.
//!
//! What nobody can have forecast is an error. Where offices have published such values, it is an error in a forecast
//! typed in here, which can be mended here, and a warning in an office's text, which cannot. The shares named below
//! are of the 6,170 Forecast/Advisories of 2006 to 2015. That a number is not below the last advisory's is for the
//! record to say, and how old an advisory is depends on the clock: neither is asked here.

use crate::advisory::forecast::{Advisory, ForecastPoint, Motion, Quadrants, Reach};
use crate::advisory::notes::Notes;
use crate::finding::fault::Finding;
use crate::geo::geodesic::quick_distance_bearing;
use crate::units::bearing::Bearing;
use crate::units::length::NauticalMiles;
use crate::units::speed::Knots;
use crate::units::wind::Averaging;

/// Who wrote the forecast that is checked.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Origin {
    /// An office published it: nobody here can change it.
    Office,
    /// Somebody here typed it in and can correct it.
    Typed,
}

// Bounds from memory of the records, but where another source is named.
/// Least and greatest mean wind in kt: weaker is no cyclone; the record is 185 (2015).
const WIND_KT: (f64, f64) = (15.0, 190.0);
/// Least and greatest central pressure in hPa.
const PRESSURE_HPA: (f64, f64) = (860.0, 1025.0);
/// Least latitude: nearer the equator no cyclone turns.
const LATITUDE_LEAST: f64 = 1.0;
/// Nearer the equator than this a cyclone is rare.
const LATITUDE_RARE: f64 = 4.0;
/// Greatest usual latitude; 7 advisories had a point beyond it, to 68.5 degrees.
const LATITUDE_MOST: f64 = 65.0;
/// Our choice: no office's track reaches farther.
const LATITUDE_END: f64 = 75.0;
/// Greatest usual reach in n mi; 5 advisories had more, to 750.
const REACH_NM: f64 = 600.0;
/// Our choice: no office's radius is greater.
const REACH_END_NM: f64 = 1000.0;
/// A 34-kt reach beyond this is worth a look; 2.5 % of the advisories had one.
const GALE_REACH_LARGE_NM: f64 = 300.0;
/// Greatest speed of the centre in kt; no advisory had more than 70.
const SPEED_KT: f64 = 70.0;
/// Greatest usual speed in kt nearer the equator than 25 degrees.
const TROPICAL_SPEED_KT: f64 = 40.0;
/// Greatest usual turn in degrees in 6 h, and the least speed in kt for which a turn means anything (our choice: at 3 kt
/// 3 advisories turn more, at 2 kt 10).
const TURN: (f64, f64) = (60.0, 3.0);
/// Greatest usual change of wind in kt in 24 h; 1.8 % of the advisories had more, most over land.
const WIND_CHANGE_KT: f64 = 60.0;
/// Up to this many hours after issue the texts give the reach of 34, 50 and 64 kt wherever such winds blow; 1 % of the
/// points up to there lacked it, all of those beyond.
const REACH_HOURS: [i64; 3] = [72, 72, 40];
/// Our choice: wind and pressure may differ by this many kt; 1 % of the advisories had more (20 kt: 4 %).
const WIND_FROM_PRESSURE_KT: f64 = 25.0;

/// Notes what is odd about `advisory`, and gives it back.
///
/// Two things are changed in an office's text, each with a warning: where a stronger wind reaches farther than a weaker
/// one, the weaker one's reach is raised to it, since where 50 kt blow 34 kt blow too; and gusts below the mean wind are
/// dropped (an advisory of September 2017 has gusts of 115 kt with a wind of 135 kt).
#[must_use]
pub fn check(mut advisory: Advisory, origin: Origin, notes: &mut Notes) -> Advisory {
    let mut desk = Desk { origin, notes };
    for point in &mut advisory.points {
        desk.position(point);
        desk.wind(point);
        desk.reaches(point);
        desk.order_of_reaches(point);
    }
    for pair in advisory.points.windows(2) {
        if let [before, after] = pair {
            desk.leg(before, after);
        }
    }
    for three in advisory.points.windows(3) {
        if let [a, b, c] = three {
            desk.turn(a, b, c);
        }
    }
    desk.missing_reaches(&advisory);
    desk.pressure(&advisory);
    desk.hemisphere(&advisory);
    advisory
}

struct Desk<'n, 's> {
    origin: Origin,
    notes: &'n mut Notes<'s>,
}

impl Desk<'_, '_> {
    fn error(&mut self, code: &'static str, point: &ForecastPoint, found: String, allowed: &str) {
        let to_do = match self.origin {
            Origin::Office => "the text is damaged: fetch it again",
            Origin::Typed => "correct the figure",
        };
        self.notes.add(Finding::error(code, point.place.clone(), found, allowed, to_do));
    }

    fn warning(&mut self, code: &'static str, point: &ForecastPoint, found: String, allowed: &str) {
        let to_do = "unusual: compare with another source; it is used as it stands";
        self.notes.add(Finding::warning(code, point.place.clone(), found, allowed, to_do));
    }

    /// An error where it can be mended, a warning where an office wrote it.
    fn by_origin(&mut self, code: &'static str, point: &ForecastPoint, found: String, allowed: &str) {
        match self.origin {
            Origin::Office => self.warning(code, point, found, allowed),
            Origin::Typed => self.error(code, point, found, allowed),
        }
    }

    fn position(&mut self, point: &ForecastPoint) {
        let from_equator = point.position.latitude().abs();
        let found = format!("the centre at {} is {from_equator:.1} degrees from the equator", point.position);
        if !(LATITUDE_LEAST..=LATITUDE_END).contains(&from_equator) {
            self.error("advisory-latitude", point, found, "1 to 75 degrees");
        } else if from_equator > LATITUDE_MOST {
            self.by_origin("advisory-latitude", point, found, "1 to 65 degrees");
        } else if from_equator < LATITUDE_RARE {
            self.warning("advisory-near-equator", point, found, "mostly above 4 degrees");
        }
    }

    fn wind(&mut self, point: &mut ForecastPoint) {
        if !(WIND_KT.0..=WIND_KT.1).contains(&point.max_wind.get()) {
            let found = format!("a greatest wind of {}", point.max_wind);
            self.error("advisory-wind-range", point, found, "15 to 190 kt");
        }
        let Some(gust) = point.gust.filter(|gust| *gust < point.max_wind) else { return };
        let found = format!("gusts of {gust} below the mean wind of {}", point.max_wind);
        let (code, place) = ("advisory-gust-below-wind", point.place.clone());
        self.notes.add(match self.origin {
            Origin::Typed => Finding::error(code, place, found, "", "correct one of the two"),
            Origin::Office => Finding::warning(code, place, found, "", "the gusts are taken as not given"),
        });
        point.gust = None;
    }

    fn reaches(&mut self, point: &ForecastPoint) {
        for (speed, reach) in point.radii.by_speed() {
            let Reach::Given(quadrants) = reach else { continue };
            let greatest = quadrants.greatest();
            let found = format!("winds of {speed} reach {greatest} from the centre");
            if greatest.get() > REACH_END_NM {
                self.error("advisory-reach-range", point, found, "at most 1000 n mi");
            } else if greatest.get() > REACH_NM {
                self.by_origin("advisory-reach-range", point, found, "at most 600 n mi");
            } else if greatest.get() > GALE_REACH_LARGE_NM {
                self.warning("advisory-reach-large", point, found, "mostly at most 300 n mi");
            }
        }
    }

    fn order_of_reaches(&mut self, point: &mut ForecastPoint) {
        let [gale, storm, hurricane] = point.radii.by_speed().map(|(_, reach)| reach);
        // From the strongest wind down, so that a raised 50-kt reach raises the 34-kt one in its turn.
        let raised_storm = at_least(storm, hurricane);
        let raised_gale = at_least(at_least(gale, hurricane), raised_storm);
        if raised_storm == storm && raised_gale == gale {
            return;
        }
        let found = "a stronger wind reaches farther than a weaker one".to_owned();
        let place = point.place.clone();
        let allowed = "64 kt at most as far as 50 kt, 50 kt at most as far as 34 kt, in each quadrant";
        let code = "advisory-reach-order";
        self.notes.add(match self.origin {
            Origin::Typed => Finding::error(code, place, found, allowed, "correct the figures"),
            Origin::Office => {
                let to_do = "the weaker wind's reach is raised to the stronger one's; ask the office";
                Finding::warning(code, place, found, allowed, to_do)
            }
        });
        (point.radii.storm, point.radii.gale) = (raised_storm, raised_gale);
    }

    fn leg(&mut self, before: &ForecastPoint, after: &ForecastPoint) {
        let hours = hours_between(before, after);
        let (distance_nm, _) = quick_distance_bearing(before.position, after.position);
        let speed = distance_nm / hours;
        let found = format!("the centre moves {distance_nm:.0} n mi in {hours:.0} h, {speed:.0} kt");
        let both_tropical = [before, after].iter().all(|point| point.position.latitude().abs() < 25.0);
        if speed > SPEED_KT {
            self.error("advisory-speed", after, found, "at most 70 kt");
        } else if speed > TROPICAL_SPEED_KT && both_tropical {
            self.warning("advisory-speed-tropical", after, found, "mostly at most 40 kt below 25 degrees");
        }
        let change = after.max_wind.get() - before.max_wind.get();
        let is_inland = |point: &ForecastPoint| point.qualifier.contains("INLAND");
        let falls_over_land = change < 0.0 && (is_inland(before) || is_inland(after));
        if change.abs() * 24.0 / hours > WIND_CHANGE_KT && !falls_over_land {
            let found =
                format!("the wind goes from {} to {} in {hours:.0} h", before.max_wind, after.max_wind);
            self.warning("advisory-wind-change", after, found, "mostly at most 60 kt in 24 h");
        }
        if change > 0.0 && is_inland(before) && is_inland(after) {
            let found = format!("inland, but the wind rises from {} to {}", before.max_wind, after.max_wind);
            self.warning("advisory-rising-inland", after, found, "");
        }
    }

    fn turn(&mut self, a: &ForecastPoint, b: &ForecastPoint, c: &ForecastPoint) {
        let (first_nm, first_bearing) = quick_distance_bearing(a.position, b.position);
        let (second_nm, second_bearing) = quick_distance_bearing(b.position, c.position);
        let (first_h, second_h) = (hours_between(a, b), hours_between(b, c));
        let is_slow = first_nm / first_h < TURN.1 || second_nm / second_h < TURN.1;
        let turn = Bearing::wrapped(first_bearing).angle_to(Bearing::wrapped(second_bearing));
        // Each leg's bearing belongs to its middle.
        let turn_in_6_h = turn * 6.0 / ((first_h + second_h) / 2.0);
        if !is_slow && turn_in_6_h > TURN.0 {
            let found = format!("the track turns by {turn:.0} degrees here");
            self.warning("advisory-sharp-turn", b, found, "mostly at most 60 degrees in 6 h");
        }
    }

    /// Winds that blow but whose reach is not given, within the hours for which it usually is.
    ///
    /// A forecast typed in need not give more than the reach of 34 kt.
    fn missing_reaches(&mut self, advisory: &Advisory) {
        let asked = if self.origin == Origin::Typed { 1 } else { 3 };
        let speeds = [Knots::GALE, Knots::STORM, Knots::HURRICANE];
        for (index, (speed, hours)) in speeds.into_iter().zip(REACH_HOURS).enumerate().take(asked) {
            let lacks = |point: &&ForecastPoint| {
                let reaches = point.radii.by_speed();
                let given =
                    |(_, reach): &(Knots, Reach)| matches!(reach, Reach::Given(q) if *q != Quadrants::NONE);
                let is_stronger_given = reaches.iter().skip(index + 1).any(given);
                let is_soon = (point.valid - advisory.issued).num_hours() <= hours;
                let is_missing = reaches.get(index).is_some_and(|(_, reach)| *reach == Reach::NotGiven);
                is_missing && (is_stronger_given || is_soon)
            };
            let lacking: Vec<&ForecastPoint> = advisory.points.iter().filter(lacks).collect();
            let Some(first) = lacking.first() else { continue };
            let times = match lacking.len() {
                1 => String::new(),
                2 => " (and once more later)".to_owned(),
                count => format!(" (and {} times more later)", count - 1),
            };
            let found = format!("a wind of {} but no reach of {speed}{times}", first.max_wind);
            let to_do = "the reach is taken as not given, not as none; look for it elsewhere";
            self.notes.add(Finding::warning("advisory-reach-missing", first.place.clone(), found, "", to_do));
        }
    }

    fn pressure(&mut self, advisory: &Advisory) {
        let (Some(pressure), Some(now)) = (advisory.pressure, advisory.points.first()) else { return };
        if !(PRESSURE_HPA.0..=PRESSURE_HPA.1).contains(&pressure.get()) {
            let found = format!("a central pressure of {pressure}");
            self.error("advisory-pressure-range", now, found, "860 to 1025 hPa");
            return;
        }
        let (Some(Motion::Towards(_, speed)), Reach::Given(gale)) = (advisory.motion, now.radii.gale) else {
            return;
        };
        if advisory.averaging != Averaging::Minute1 || now.max_wind < Knots::GALE {
            return;
        }
        let mean_nm = gale.clockwise().iter().map(|reach| reach.get()).sum::<f64>() / 4.0;
        let latitude = now.position.latitude().abs();
        let at_wind = |wind_kt: f64| pressure_of(wind_kt.max(WIND_KT.0), speed.get(), latitude, mean_nm);
        let wind = now.max_wind.get();
        let (deepest, shallowest) =
            (at_wind(wind + WIND_FROM_PRESSURE_KT), at_wind(wind - WIND_FROM_PRESSURE_KT));
        if pressure.get() < deepest || pressure.get() > shallowest {
            let found = format!("a wind of {} and a pressure of {pressure} hardly go together", now.max_wind);
            let allowed = format!("about {:.0} hPa for that wind", at_wind(wind));
            self.warning("advisory-wind-and-pressure", now, found, &allowed);
        }
    }

    /// The basin of the storm's id says on which side of the equator it is.
    fn hemisphere(&mut self, advisory: &Advisory) {
        let (Some(id), Some(now)) = (advisory.storm.id.as_deref(), advisory.points.first()) else { return };
        let should_be_north = match id.get(..2) {
            Some("AL" | "EP" | "CP" | "WP" | "IO" | "AB" | "BB") => true,
            Some("SH" | "SI" | "SP" | "AU" | "SL" | "LS") => false,
            _ => return,
        };
        if should_be_north != (now.position.latitude() > 0.0) {
            let found = format!("storm {id} at {}, on the other side of the equator", now.position);
            self.warning("advisory-hemisphere", now, found, "");
        }
    }
}

/// `weaker` raised in each quadrant to `stronger`; what is not given stays so.
fn at_least(weaker: Reach, stronger: Reach) -> Reach {
    let (Reach::Given(low), Reach::Given(high)) = (weaker, stronger) else { return weaker };
    let more = |a: NauticalMiles, b: NauticalMiles| if b > a { b } else { a };
    Reach::Given(Quadrants {
        northeast: more(low.northeast, high.northeast),
        southeast: more(low.southeast, high.southeast),
        southwest: more(low.southwest, high.southwest),
        northwest: more(low.northwest, high.northwest),
    })
}

fn hours_between(before: &ForecastPoint, after: &ForecastPoint) -> f64 {
    ((after.valid - before.valid).num_minutes() as f64 / 60.0).max(0.1)
}

/// Pressure of the environment in hPa: our choice, with it half of the archive's advisories lie on either side.
const ENVIRONMENT_HPA: f64 = 1011.0;

/// The central pressure in hPa that goes with a 1-minute wind.
///
/// ```text
/// Pc = 23.286 - 0.483 Vs - (Vs/24.254)^2 - 12.587 S - 0.483 phi + Penv      (phi >= 18)
/// Pc =  5.962 - 0.267 Vs - (Vs/18.26)^2  -  6.8 S               + Penv      (phi < 18)
/// Vs = V - 1.5 c^0.63     S = max(0.4, (R34/9 - 3) / V500)     V500 = V (Rm/500)^x
/// Rm = 66.785 - 0.09102 V + 1.0619 (phi - 25)     x = 0.1147 + 0.0055 V - 0.001 (phi - 25)
/// ```
/// V greatest wind, c speed of the centre, Vs storm-relative wind (kt); phi latitude (degrees); R34 mean reach of 34 kt
/// (n mi); Rm radius of greatest wind (km); Penv pressure of the environment (hPa). J. Courtney and J. Knaff, 2009,
/// Australian Meteorological and Oceanographic Journal 58, 167-179.
fn pressure_of(v: f64, c: f64, phi: f64, r34: f64) -> f64 {
    let vs = (v - 1.5 * libm::pow(c, 0.63)).max(0.0);
    let x = 0.1147 + 0.0055 * v - 0.001 * (phi - 25.0);
    let rm = 66.785 - 0.09102 * v + 1.0619 * (phi - 25.0);
    let v500 = v * libm::pow(rm.max(1.0) / 500.0, x);
    let s = ((r34 / 9.0 - 3.0) / v500).max(0.4);
    if phi >= 18.0 {
        23.286 - 0.483 * vs - (vs / 24.254) * (vs / 24.254) - 12.587 * s - 0.483 * phi + ENVIRONMENT_HPA
    } else {
        5.962 - 0.267 * vs - (vs / 18.26) * (vs / 18.26) - 6.8 * s + ENVIRONMENT_HPA
    }
}

#[cfg(test)]
mod tests {
    use super::{ENVIRONMENT_HPA, pressure_of};

    #[test]
    fn the_wind_pressure_relation_gives_the_worked_values() {
        // Worked with Penv 1010 and 1008 hPa.
        let cases = [(100.0, 10.0, 25.0, 150.0, 1010.0, 953.88), (65.0, 10.0, 15.0, 100.0, 1008.0, 985.30)];
        for (v, c, phi, r34, environment, expected) in cases {
            let found = pressure_of(v, c, phi, r34) - ENVIRONMENT_HPA + environment;
            assert!((found - expected).abs() < 0.01, "{found}");
        }
    }
}
