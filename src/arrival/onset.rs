//! When, in one scenario, a wind is first and last passed at a place.
//!
//! Between hourly states the storm moves straight and changes evenly. The wind is there while the distance from the centre is within the reach of the limit on
//! the place's bearing (a calm eye does not end it). Each hour is tested at both ends and at the closest approach between, so that a storm that brushes a place for some minutes is not missed; the
//! moment itself is found by root finding to within two seconds.

use crate::arrival::course::Course;
use crate::arrival::scenario::Scenario;
use crate::time::moment::{Minutes, Moment};
use crate::units::bearing::Bearing;
use crate::units::speed::Knots;
use crate::wind::field::{Hemisphere, INFLOW_DEGREES, Vortex, wind_from};
use crate::wind::profile::Profile;
use crate::wind::sphere::{Vector, bearing_degrees, distance_nmi, dot, plus};

/// When the wind comes.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Onset {
    /// It blows at issue time.
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
    /// When it last falls below the limit, rounded up; `None` if it never comes or still blows at the end of the forecast.
    pub until: Option<Moment>,
    /// Wind met where the place lies deepest within the lowest limit asked there: the greatest, or very near it. 10 m over open water in the advisory's averaging; zero if the limit is never reached.
    pub peak: Knots,
    /// From where the wind blows at the onset (at issue, if already there); north if it never comes.
    pub from: Bearing,
    /// The eye passes over: the wind returns from the other side.
    pub has_lull: bool,
    /// `Never`, but it would come within a day after the end of the forecast if the storm went on as it then is.
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
    limits_kt: Vec<f64>,
    widening: f64,
}

impl Watch {
    /// A place with limits in kt, rising.
    #[must_use]
    pub fn new(place: Vector, limits_kt: Vec<f64>) -> Watch {
        // Winds below 34 kt reach at most (34 / limit)^(1 / 0.4) times as far: 0.4 is the least outer exponent.
        let least = limits_kt.first().copied().unwrap_or(34.0).max(1.0);
        let widening = if least < 34.0 { libm::pow(34.0 / least, 2.5) } else { 1.0 };
        Watch { place, limits_kt, widening }
    }

    /// One answer for each limit, in their order.
    #[must_use]
    pub fn follow(&self, course: &Course, scenario: &mut Scenario) -> Vec<ScenarioOnset> {
        let mut states = vec![State::default(); self.limits_kt.len()];
        let mut deepest = Deepest::default();
        let mut before: Option<Sight> = None;
        for k in 0..course.end.max(1) {
            if !scenario.may_reach(k, self.place, self.widening) {
                before = None;
                continue;
            }
            let Some(mut hour) = Hour::new(course, scenario, k, self.place) else { break };
            if course.end == 0 {
                // A forecast of a single moment: nothing after it belongs to the forecast.
                hour.stand_still();
            }
            let start = before.unwrap_or_else(|| hour.look(0.0));
            let end = hour.look(1.0);
            before = Some(end);
            self.pass(&hour, [start, end], &mut states, &mut deepest);
        }
        let coming = states.iter().any(|state| !state.is_reached())
            && course.steps.len() > course.end + 1
            && !self.limits_kt.is_empty();
        let reached = states.iter().filter(|state| state.is_reached()).count();
        let cut_off = if coming { self.still_coming(course, scenario, reached) } else { 0 };
        states
            .iter()
            .enumerate()
            .map(|(i, state)| {
                let is_cut_off = i >= reached && i < reached + cut_off;
                state.told(course, &deepest, is_cut_off)
            })
            .collect()
    }

    /// One hour for all limits. A limit that is not met means that no higher one is.
    fn pass(&self, hour: &Hour, [start, end]: [Sight; 2], states: &mut [State], deepest: &mut Deepest) {
        let closest = hour.closest();
        let middle = closest.map(|s| hour.look(s));
        for (i, (limit, state)) in self.limits_kt.iter().zip(states.iter_mut()).enumerate() {
            let reach_at_start = start.profile.reach_nmi(*limit);
            let (starts_in, ends_in) = (start.is_within(reach_at_start), end.is_inside(*limit));
            let dips = middle.filter(|sight| sight.is_inside(*limit));
            if !starts_in && !ends_in && dips.is_none() {
                break;
            }
            if i == 0 {
                for sight in [Some(start), Some(end), middle].into_iter().flatten() {
                    deepest.note(sight, *limit);
                }
            }
            if starts_in && hour.k == 0 && !state.is_reached() {
                state.onset = Some(Found { minute: None, bearing: start.bearing });
            }
            // The stretch over which the wind comes, and the one over which it goes.
            let touch = closest.filter(|_| dips.is_some());
            let (comes, goes) = match (starts_in, ends_in) {
                (true, true) => (None, None),
                (false, true) => (Some((0.0, 1.0)), None),
                (true, false) => (None, Some((touch.unwrap_or(0.0), 1.0))),
                (false, false) => (touch.map(|s| (0.0, s)), touch.map(|s| (s, 1.0))),
            };
            if let Some(stretch) = comes.filter(|_| !state.is_reached()) {
                let s = hour.crossing(*limit, stretch);
                state.onset = Some(Found { minute: Some(hour.minute(s)), bearing: hour.look(s).bearing });
            }
            state.until = goes.map(|stretch| hour.minute(hour.crossing(*limit, stretch))).or(if ends_in {
                None
            } else {
                state.until
            });
        }
    }

    /// How many limits beyond the first `reached` would be met in the look-ahead.
    fn still_coming(&self, course: &Course, scenario: &mut Scenario, reached: usize) -> usize {
        let limits = self.limits_kt.get(reached..).unwrap_or_default();
        let mut most = 0;
        for k in course.end..course.steps.len() - 1 {
            if most == limits.len() {
                break;
            }
            if !scenario.may_reach(k, self.place, self.widening) {
                continue;
            }
            let Some(hour) = Hour::new(course, scenario, k, self.place) else { break };
            let sights = [Some(hour.look(1.0)), hour.closest().map(|s| hour.look(s))];
            let met = |limit: &f64| sights.iter().flatten().any(|sight| sight.is_inside(*limit));
            most = most.max(limits.iter().take_while(|limit| met(limit)).count());
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
}

impl Sight {
    fn is_within(&self, reach_nmi: f64) -> bool {
        reach_nmi > 0.0 && self.distance <= reach_nmi
    }

    fn is_inside(&self, limit_kt: f64) -> bool {
        self.is_within(self.profile.reach_nmi(limit_kt))
    }

    /// Distance less reach in n mi: negative while the wind is there.
    fn gap(&self, limit_kt: f64) -> f64 {
        let reach = self.profile.reach_nmi(limit_kt);
        // A storm without that wind is as far away as its centre, and never touches.
        if reach > 0.0 { self.distance - reach } else { self.distance.max(1.0) }
    }
}

/// The stretch between two steps of a scenario, seen from a place.
struct Hour {
    k: usize,
    place: Vector,
    vortices: [Vortex; 2],
    minutes: [f64; 2],
}

impl Hour {
    fn new(course: &Course, scenario: &mut Scenario, k: usize, place: Vector) -> Option<Hour> {
        let from = scenario.vortex(course, k)?;
        let to = scenario.vortex(course, k + 1).unwrap_or(from);
        let minute = |i: usize| course.steps.get(i).map(|step| step.minute);
        let start = minute(k)?;
        Some(Hour { k, place, vortices: [from, to], minutes: [start, minute(k + 1).unwrap_or(start)] })
    }

    fn stand_still(&mut self) {
        self.vortices[1] = self.vortices[0];
        self.minutes[1] = self.minutes[0];
    }

    fn look(&self, s: f64) -> Sight {
        let [from, to] = &self.vortices;
        let vortex = from.towards(to, s);
        let bearing = bearing_degrees(vortex.centre, self.place);
        Sight { distance: distance_nmi(vortex.centre, self.place), bearing, profile: vortex.profile(bearing) }
    }

    /// Where between the ends the centre is nearest to the place, if between them.
    fn closest(&self) -> Option<f64> {
        let [from, to] = &self.vortices;
        let moved = plus(to.centre, -1.0, from.centre);
        let length2 = dot(moved, moved);
        if length2 <= 0.0 {
            return None;
        }
        let s = dot(plus(self.place, -1.0, from.centre), moved) / length2;
        (s > 0.0 && s < 1.0).then_some(s)
    }

    fn minute(&self, s: f64) -> f64 {
        self.minutes[0] + (self.minutes[1] - self.minutes[0]) * s
    }

    /// Where in the stretch the place passes the limit's edge: regula falsi, halving the value at an end that stays twice (the Illinois method,
    /// Dowell & Jarratt 1971, BIT 11:168-174). The outer end of the last bracket is taken: an onset is never late, an end never early.
    fn crossing(&self, limit_kt: f64, (mut low, mut high): (f64, f64)) -> f64 {
        const TWO_SECONDS: f64 = 2.0 / 3600.0;
        let gap = |s: f64| self.look(s).gap(limit_kt);
        let (mut at_low, mut at_high) = (gap(low), gap(high));
        let comes = at_low > 0.0;
        let mut low_moved = None;
        for _ in 0..40 {
            if high - low < TWO_SECONDS {
                break;
            }
            // Keeping a second away from the ends lets the bracket close from both sides.
            let margin = TWO_SECONDS / 2.0;
            let cut = low + (high - low) * at_low / (at_low - at_high);
            let cut = if cut.is_finite() { cut } else { (low + high) / 2.0 };
            let cut = cut.clamp(low + margin, high - margin);
            let value = gap(cut);
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
        if comes { low } else { high }
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
            onset: found.minute.map_or(Onset::Already, |minute| Onset::At(after(libm::floor(minute)))),
            until: self.until.map(|minute| after(libm::ceil(minute))),
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
    fn note(&mut self, sight: Sight, limit_kt: f64) {
        let reach = sight.profile.reach_nmi(limit_kt);
        let depth = if reach > 0.0 { sight.distance / reach } else { f64::INFINITY };
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
