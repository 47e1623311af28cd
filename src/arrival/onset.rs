//! When, in one scenario, a wind is first and last passed at a place.
//!
//! Between hourly states the storm moves straight and changes evenly. The wind is there while the distance
//! from the centre is within the reach of the limit on the place's bearing (a calm eye does not end it). Each
//! hour is tested at both ends and at the closest approach between, so that a storm that brushes a place for
//! some minutes is not missed; the moment itself is found by root finding to within a second or two.

use crate::arrival::course::Course;
use crate::arrival::scenario::Scenario;
use crate::time::moment::{Minutes, Moment};
use crate::units::bearing::Bearing;
use crate::units::speed::Knots;
use crate::wind::field::{Hemisphere, INFLOW_DEGREES, Vortex, wind_from};
use crate::wind::profile::{Limit, Profile};
use crate::wind::sphere::{EARTH_RADIUS_NMI, Vector, bearing_degrees, distance_nmi, dot, plus};

/// When the wind comes.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Onset {
    /// It blows at issue time, or comes within the minute.
    Already,
    /// At this minute, rounded down.
    At(Moment),
    /// Not by the end of the forecast.
    Never,
}

/// What one scenario says about one question.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ScenarioOnset {
    /// When the wind first reaches the limit.
    pub onset: Onset,
    /// When it last falls below the limit, rounded up; `None` if it never comes or still blows at the end of
    /// the forecast.
    pub until: Option<Moment>,
    /// Wind met where the place lies deepest within the gale radius: the greatest, or very near it. 10 m over
    /// open water in the advisory's averaging; zero if the limit is never reached.
    pub peak: Knots,
    /// From where the wind blows at the onset (at issue, if already there); north if it never comes.
    pub from: Bearing,
    /// The eye passes over: the wind returns from the other side.
    pub has_lull: bool,
    /// `Never`, but it would come within a day after the end of the forecast if the storm went on as it then
    /// is.
    pub is_cut_off: bool,
}

impl ScenarioOnset {
    /// The wind does not come.
    pub const NEVER: ScenarioOnset = ScenarioOnset {
        onset: Onset::Never,
        until: None,
        peak: Knots::ZERO,
        from: Bearing::NORTH,
        has_lull: false,
        is_cut_off: false,
    };
}

/// A place and its limits, as the inner loop wants them.
#[derive(Clone, Debug, PartialEq)]
pub struct Watch {
    place: Vector,
    limits: Vec<Limit>,
    widening: f64,
}

impl Watch {
    /// A place with limits in kt, rising.
    #[must_use]
    pub fn new(place: Vector, limits_kt: Vec<f64>) -> Watch {
        // Winds below 34 kt reach at most (34 / limit)^(1 / 0.4) times as far: 0.4 is the least outer exponent.
        let least = limits_kt.first().copied().unwrap_or(34.0).max(1.0);
        let widening = if least < 34.0 { libm::pow(34.0 / least, 2.5) } else { 1.0 };
        let limits = limits_kt.into_iter().map(Limit::new).collect();
        Watch { place, limits, widening }
    }

    /// One answer for each limit, in their order.
    #[must_use]
    pub fn follow(&self, course: &Course, scenario: &mut Scenario) -> Vec<ScenarioOnset> {
        let mut states = vec![State::default(); self.limits.len()];
        let mut deepest = Deepest::default();
        let mut before: Option<Sight> = None;
        let mut next = 0;
        while next < course.end.max(1) {
            let start = before.take();
            let Some(mut hour) = self.next_hour(course, scenario, &mut next) else { continue };
            if course.end == 0 {
                // A forecast of a single moment: nothing after it belongs to the forecast.
                hour.stand_still();
            }
            let start = start.unwrap_or_else(|| self.seen(hour.look(0.0)));
            let end = self.seen(hour.look(1.0));
            before = Some(end);
            self.pass(&hour, [start, end], &mut states, &mut deepest);
        }
        let reached = states.iter().filter(|state| state.is_reached()).count();
        let all = reached == states.len();
        let cut_off = if all { reached } else { self.still_coming(course, scenario).max(reached) };
        states
            .iter()
            .enumerate()
            .map(|(i, state)| state.told(course, &deepest, (reached..cut_off).contains(&i)))
            .collect()
    }

    /// The hour after step `next`, if any limit can be met in it; moves `next` on by that hour, or by all hours
    /// in which none can.
    fn next_hour<'a>(
        &self,
        course: &Course,
        scenario: &'a mut Scenario,
        next: &mut usize,
    ) -> Option<Hour<'a>> {
        let k = *next;
        let out_of_reach = scenario.hours_out_of_reach(k, self.place, self.widening);
        *next += out_of_reach.max(1);
        if out_of_reach > 0 {
            return None;
        }
        scenario.prepare(course, k);
        let hour = Hour::new(course, scenario, k, self.place)?;
        hour.may_reach(self.widening).then_some(hour)
    }

    fn seen(&self, mut sight: Sight) -> Sight {
        sight.met = sight.count_met(&self.limits);
        sight
    }

    /// One hour for all limits. They are nested: where a limit is met, every lower one is.
    fn pass(&self, hour: &Hour<'_>, [start, end]: [Sight; 2], states: &mut [State], deepest: &mut Deepest) {
        let closest = hour.closest();
        if closest.is_none() && start.met == end.met && hour.k > 0 {
            // Most hours: the wind neither comes nor goes.
            if end.met > 0 {
                deepest.note(end);
            }
            return;
        }
        let middle = closest.map(|s| self.seen(hour.look(s)));
        let dips = middle.map_or(0, |sight| sight.met);
        let most = start.met.max(end.met).max(dips);
        if most == 0 {
            return;
        }
        for sight in [Some(start), Some(end), middle].into_iter().flatten() {
            deepest.note(sight);
        }
        for (i, (limit, state)) in self.limits.iter().zip(states.iter_mut()).take(most).enumerate() {
            let (starts_in, ends_in) = (i < start.met, i < end.met);
            if starts_in && hour.k == 0 {
                state.onset = Some(Found { minute: None, bearing: start.bearing });
            }
            // The stretch over which the wind comes, and the one over which it goes.
            let touch = closest.zip(middle).filter(|_| i < dips);
            let edges = [(0.0, start), (1.0, end)];
            let (comes, goes) = match (starts_in, ends_in) {
                (true, true) => (None, None),
                (false, true) => (Some([edges[0], touch.unwrap_or(edges[1])]), None),
                (true, false) => (None, Some([touch.unwrap_or(edges[0]), edges[1]])),
                (false, false) => (touch.map(|t| [edges[0], t]), touch.map(|t| [t, edges[1]])),
            };
            if let Some(stretch) = comes.filter(|_| !state.is_reached()) {
                let s = hour.crossing(limit.kt, stretch);
                state.onset = Some(Found { minute: Some(hour.minute(s)), bearing: hour.look(s).bearing });
            }
            if ends_in {
                state.until = None;
            } else if let Some(stretch) = goes {
                state.until = Some(hour.minute(hour.crossing(limit.kt, stretch)));
            }
        }
    }

    /// How many limits, the lowest first, would be met in the look-ahead beyond the forecast.
    fn still_coming(&self, course: &Course, scenario: &mut Scenario) -> usize {
        let mut most = 0;
        let mut next = course.end;
        while next + 1 < course.steps.len() {
            let Some(hour) = self.next_hour(course, scenario, &mut next) else { continue };
            for s in [Some(1.0), hour.closest()].into_iter().flatten() {
                most = most.max(self.seen(hour.look(s)).met);
            }
            if most == self.limits.len() {
                break;
            }
        }
        most
    }
}

/// What is seen from the centre towards the place.
#[derive(Clone, Copy, Debug)]
struct Sight {
    distance: f64,
    bearing: f64,
    profile: Profile,
    /// How many of the limits are met.
    met: usize,
}

impl Sight {
    /// How many of the limits, which rise, are met here.
    fn count_met(&self, limits: &[Limit]) -> usize {
        limits.iter().take_while(|limit| self.profile.blows(limit, self.distance)).count()
    }

    /// Distance less reach in n mi: negative while the wind is there.
    fn gap(&self, limit_kt: f64) -> f64 {
        let reach = self.profile.reach_nmi(limit_kt);
        // A storm without that wind is as far away as its centre, and never touches.
        if reach > 0.0 { self.distance - reach } else { self.distance.max(1.0) }
    }
}

/// The stretch between two steps of a scenario, seen from a place.
struct Hour<'a> {
    k: usize,
    place: Vector,
    vortices: [&'a Vortex; 2],
    minutes: [f64; 2],
    /// Where on the way between the ends, drawn on beyond both, the centre is nearest; 0 if it stands still.
    nearest: f64,
}

impl<'a> Hour<'a> {
    fn new(course: &Course, scenario: &'a Scenario, k: usize, place: Vector) -> Option<Hour<'a>> {
        let from = scenario.vortex(k)?;
        let to = scenario.vortex(k + 1).unwrap_or(from);
        let minute = |i: usize| course.steps.get(i).map(|step| step.minute);
        let start = minute(k)?;
        let moved = plus(to.centre, -1.0, from.centre);
        let length2 = dot(moved, moved);
        let nearest = if length2 > 0.0 { dot(plus(place, -1.0, from.centre), moved) / length2 } else { 0.0 };
        let minutes = [start, minute(k + 1).unwrap_or(start)];
        Some(Hour { k, place, vortices: [from, to], minutes, nearest })
    }

    fn stand_still(&mut self) {
        self.vortices[1] = self.vortices[0];
        self.minutes[1] = self.minutes[0];
        self.nearest = 0.0;
    }

    /// Whether the centre comes as near as the furthest reach of its gales (times `widening`; at least that
    /// of its core) at either end.
    fn may_reach(&self, widening: f64) -> bool {
        let [from, to] = self.vortices;
        let s = self.nearest.clamp(0.0, 1.0);
        let nearest = plus(from.centre, s, plus(to.centre, -1.0, from.centre));
        let core = if widening > 1.0 { from.core_nmi.max(to.core_nmi) } else { 0.0 };
        let [a, b] = [from, to].map(|vortex| vortex.widest_nmi.max(core));
        // One n mi for the bend of the earth within the hour.
        let reach = (a.max(b) * widening + 1.0) / EARTH_RADIUS_NMI;
        let between = plus(self.place, -1.0, nearest);
        dot(between, between) <= reach * reach
    }

    /// What is seen a share `s` of the way from one end to the other; the centre goes along the chord.
    fn look(&self, s: f64) -> Sight {
        let [from, to] = self.vortices;
        if s <= 0.0 || s >= 1.0 {
            let vortex = if s <= 0.0 { from } else { to };
            let bearing = bearing_degrees(vortex.centre, self.place);
            let distance = distance_nmi(vortex.centre, self.place);
            return Sight { distance, bearing, profile: vortex.profile(bearing), met: 0 };
        }
        let centre = plus(from.centre, s, plus(to.centre, -1.0, from.centre));
        let bearing = bearing_degrees(centre, self.place);
        let profile = from.profile(bearing).towards(&to.profile(bearing), s);
        Sight { distance: distance_nmi(centre, self.place), bearing, profile, met: 0 }
    }

    /// Where between the ends the centre is nearest to the place, if between them.
    fn closest(&self) -> Option<f64> {
        Some(self.nearest).filter(|s| *s > 0.0 && *s < 1.0)
    }

    fn minute(&self, s: f64) -> f64 {
        self.minutes[0] + (self.minutes[1] - self.minutes[0]) * s
    }

    /// Where in the stretch the place passes the limit's edge: regula falsi, halving the value at an end that
    /// stays twice (the Illinois method, Dowell & Jarratt 1971, BIT 11:168-174), until the slope says that it is
    /// found to a second. Then a second outwards: an onset is never late, an end never early.
    fn crossing(
        &self,
        limit_kt: f64,
        [(mut low, low_sight), (mut high, high_sight)]: [(f64, Sight); 2],
    ) -> f64 {
        const SECOND: f64 = 1.0 / 3600.0;
        let (mut at_low, mut at_high) = (low_sight.gap(limit_kt), high_sight.gap(limit_kt));
        let comes = at_low > 0.0;
        let slope = ((at_high - at_low) / (high - low)).abs();
        let mut low_moved = None;
        let mut cut = if comes { low } else { high };
        for _ in 0..40 {
            let next = low + (high - low) * at_low / (at_low - at_high);
            cut = if next.is_finite() { next.clamp(low, high) } else { f64::midpoint(low, high) };
            let value = self.look(cut).gap(limit_kt);
            if value.abs() <= slope * SECOND || high - low < SECOND {
                break;
            }
            let moves_low = (value > 0.0) == comes;
            let again = low_moved == Some(moves_low);
            low_moved = Some(moves_low);
            if moves_low {
                (low, at_low) = (cut, value);
                at_high /= if again { 2.0 } else { 1.0 };
            } else {
                (high, at_high) = (cut, value);
                at_low /= if again { 2.0 } else { 1.0 };
            }
        }
        if comes { (cut - SECOND).max(0.0) } else { (cut + SECOND).min(1.0) }
    }
}

#[derive(Clone, Copy, Debug)]
struct Found {
    /// `None`: at issue already.
    minute: Option<f64>,
    bearing: f64,
}

#[derive(Clone, Copy, Debug, Default)]
struct State {
    onset: Option<Found>,
    until: Option<f64>,
}

impl State {
    fn is_reached(&self) -> bool {
        self.onset.is_some()
    }

    fn told(&self, course: &Course, deepest: &Deepest, is_cut_off: bool) -> ScenarioOnset {
        let Some(found) = self.onset else { return ScenarioOnset { is_cut_off, ..ScenarioOnset::NEVER } };
        let after = |minutes: f64| course.issued + Minutes::new(minutes as i64);
        let northern = wind_from(Bearing::wrapped(found.bearing), Hemisphere::Northern, INFLOW_DEGREES);
        ScenarioOnset {
            // To the minute, rounded down, a wind that comes within the first minute blows at issue.
            onset: match found.minute {
                Some(minute) if minute >= 1.0 => Onset::At(after(f64::floor(minute))),
                Some(_) | None => Onset::Already,
            },
            until: self.until.map(|minute| after(f64::ceil(minute))),
            peak: deepest.peak(),
            from: match course.hemisphere {
                Hemisphere::Northern => northern,
                Hemisphere::Southern => Bearing::wrapped(180.0 - northern.get()),
            },
            has_lull: deepest.has_lull(),
            is_cut_off: false,
        }
    }
}

/// Where in its passage the place lies deepest in the storm: there its wind is greatest.
#[derive(Clone, Copy, Debug, Default)]
struct Deepest {
    at: Option<(f64, Sight)>,
}

impl Deepest {
    fn note(&mut self, sight: Sight) {
        // How deep, as the share of the gale radius (or the core's) at which the place lies.
        let depth = sight.distance / sight.profile.reach_nmi[0].max(sight.profile.core_nmi);
        if self.at.is_none_or(|(least, _)| depth < least) {
            self.at = Some((depth, sight));
        }
    }

    fn peak(&self) -> Knots {
        self.at.map_or(Knots::ZERO, |(_, sight)| Knots::clamped(sight.profile.speed_kt(sight.distance)))
    }

    fn has_lull(&self) -> bool {
        self.at.is_some_and(|(_, sight)| sight.distance < sight.profile.core_nmi / 2.0)
    }
}
