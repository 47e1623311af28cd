//! When, in one scenario, a wind is first and last passed at a place.
//!
//! The storm is looked at from stop to stop of its course, at both ends of each leg and at the closest approach between,
//! so that a storm that brushes a place for some minutes is not missed; where it lies deepest in the storm and a wind is
//! near that is not met, every hour is looked at. The moment itself is found to a second or so.

use crate::arrival::course::Course;
use crate::arrival::leg::{Leg, Sight};
use crate::arrival::scenario::Scenario;
use crate::time::moment::{Minutes, Moment};
use crate::units::bearing::Bearing;
use crate::units::speed::Knots;
use crate::wind::field::{Hemisphere, INFLOW_DEGREES, wind_from};
use crate::wind::profile::Limit;
use crate::wind::sphere::Vector;
use std::ops::Range;

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
    /// Somewhat weaker winds than the limits: where they do not blow, the limits are not near.
    nearly: Vec<Limit>,
    widening: f64,
}

/// A wind of this share of a limit tells that the limit is near. Our choice.
const NEARLY: f64 = 0.9;

impl Watch {
    /// A place with limits in kt, rising.
    #[must_use]
    pub fn new(place: Vector, limits_kt: Vec<f64>) -> Watch {
        // Winds below 34 kt reach at most (34 / limit)^(1 / 0.4) times as far: 0.4 is the least outer exponent.
        let least = limits_kt.first().copied().unwrap_or(34.0).max(1.0);
        let widening = if least < 34.0 { libm::pow(34.0 / least, 2.5) } else { 1.0 };
        let nearly = limits_kt.iter().map(|kt| Limit::new(kt * NEARLY)).collect();
        let limits = limits_kt.into_iter().map(Limit::new).collect();
        Watch { place, limits, nearly, widening }
    }

    /// One answer for each limit, in their order.
    #[must_use]
    pub fn follow(&self, course: &Course, scenario: &Scenario) -> Vec<ScenarioOnset> {
        let mut passage = Passage { states: vec![State::default(); self.limits.len()], deepest: None };
        let mut before: Option<Passed> = None;
        let mut next = 0;
        let last = course.stops.partition_point(|step| *step < course.end);
        // A forecast of a single moment has one leg, from there to there: nothing after it belongs to it.
        while next < last.max(1) {
            let earlier = before.take();
            let Some(leg) = self.next_leg(course, scenario, &mut next, last) else { continue };
            let start = earlier.as_ref().map(|passed| passed.end);
            let Some(start) = start.or_else(|| Some(self.seen(leg.look(leg.from)?, 0))) else { continue };
            let Some(end) = leg.look(leg.to).map(|sight| self.seen(sight, start.met)) else { continue };
            self.pass(&leg, [&start, &end], 0..self.limits.len(), &mut passage);
            let passed = Passed { from: leg.from, start, end };
            if let Some(earlier) = earlier.filter(|earlier| earlier.deepens() && !passed.deepens()) {
                self.look_closely(course, scenario, [&earlier, &passed], &mut passage);
            }
            before = Some(passed);
        }
        let reached = passage.states.iter().filter(|state| state.onset.is_some()).count();
        let all = reached == self.limits.len();
        let cut_off = if all { reached } else { self.still_coming(course, scenario).max(reached) };
        passage.told(course, reached..cut_off)
    }

    /// The leg from stop number `next` on, to stop `last` at most, if any limit can be met on it; moves `next` on by
    /// that leg, or by all in which none can.
    fn next_leg<'a>(
        &self,
        course: &'a Course,
        scenario: &'a Scenario,
        next: &mut usize,
        last: usize,
    ) -> Option<Leg<'a>> {
        let stop = *next;
        let out_of_reach = scenario.stops_out_of_reach(stop, self.place, self.widening);
        *next += out_of_reach.max(1);
        if out_of_reach > 0 {
            return None;
        }
        let steps = [*course.stops.get(stop)?, *course.stops.get((stop + 1).min(last))?];
        Leg::new(course, scenario, steps, self.place).filter(|leg| leg.may_reach(self.widening))
    }

    /// A sight and the number of limits met there; `likely` is how many that is likely to be.
    fn seen(&self, sight: Sight, likely: usize) -> Seen {
        let (below, above) = self.limits.split_at_checked(likely).unwrap_or((&self.limits, &[]));
        // They are nested: where one is met, every lower one is.
        let fails = below.iter().rev().take_while(|limit| !sight.meets(limit)).count();
        let more = if fails > 0 { 0 } else { above.iter().take_while(|limit| sight.meets(limit)).count() };
        Seen { sight, met: below.len() - fails + more }
    }

    /// One leg for the limits in `range`.
    fn pass(&self, leg: &Leg<'_>, [start, end]: [&Seen; 2], range: Range<usize>, passage: &mut Passage) {
        if leg.closest.is_none() && start.met == end.met && leg.from > 0.0 {
            // Most legs: the wind neither comes nor goes.
            if end.met > 0 {
                passage.note(&end.sight);
            }
            return;
        }
        let touch = leg.closest.and_then(|t| Some((t, self.seen(leg.look(t)?, end.met))));
        let dips = touch.as_ref().map_or(0, |(_, seen)| seen.met);
        let most = start.met.max(end.met).max(dips);
        if most == 0 {
            return;
        }
        for seen in [Some(start), Some(end), touch.as_ref().map(|(_, seen)| seen)].into_iter().flatten() {
            passage.note(&seen.sight);
        }
        let limits = self.limits.iter().zip(passage.states.iter_mut()).enumerate();
        for (i, (limit, state)) in limits.take(most.min(range.end)).skip(range.start) {
            let touch = touch.as_ref().filter(|_| i < dips).map(|(t, seen)| (*t, &seen.sight));
            let ends = [(leg.from, &start.sight), (leg.to, &end.sight)];
            state.pass(leg, limit, ends, [i < start.met, i < end.met], touch);
        }
    }

    /// Where the place lies deepest in the storm, between the two legs, a wind that is nearly met may come and go
    /// between the stops: for such limits every hour of both legs is looked at.
    fn look_closely(
        &self,
        course: &Course,
        scenario: &Scenario,
        [earlier, later]: [&Passed; 2],
        passage: &mut Passage,
    ) {
        let met = earlier.start.met.max(earlier.end.met).max(later.end.met);
        let nearly = self.nearly.get(met..).unwrap_or_default();
        let near = nearly.iter().take_while(|limit| later.start.sight.meets(limit)).count();
        if near == 0 {
            return;
        }
        let mut start = earlier.start;
        let mut k = earlier.from as usize;
        let steps = course.stops.iter().filter(|stop| **stop > k).nth(1).copied().unwrap_or(k);
        while k < steps {
            let Some(hour) = Leg::new(course, scenario, [k, k + 1], self.place) else { break };
            let Some(end) = hour.look(hour.to).map(|sight| self.seen(sight, start.met)) else { break };
            self.pass(&hour, [&start, &end], met..met + near, passage);
            start = end;
            k += 1;
        }
    }

    /// How many limits, the lowest first, would be met in the look-ahead beyond the forecast.
    fn still_coming(&self, course: &Course, scenario: &Scenario) -> usize {
        let mut most = 0;
        let mut next = course.stops.partition_point(|step| *step < course.end);
        let last = course.stops.len().saturating_sub(1);
        while next < last && most < self.limits.len() {
            let Some(leg) = self.next_leg(course, scenario, &mut next, last) else { continue };
            for sight in [Some(leg.to), leg.closest].into_iter().flatten().filter_map(|t| leg.look(t)) {
                most = most.max(self.seen(sight, most).met);
            }
        }
        most
    }
}

/// What is seen at some time, and how many of the limits are met.
#[derive(Clone, Copy, Debug)]
struct Seen {
    sight: Sight,
    met: usize,
}

/// A leg that was passed.
#[derive(Clone, Copy, Debug)]
struct Passed {
    from: f64,
    start: Seen,
    end: Seen,
}

impl Passed {
    fn deepens(&self) -> bool {
        self.end.sight.depth < self.start.sight.depth
    }
}

/// All that was found on the way so far.
#[derive(Clone, Debug)]
struct Passage {
    /// One for each limit.
    states: Vec<State>,
    /// Where the place lies deepest in the storm while any limit is met: there its wind is greatest.
    deepest: Option<Sight>,
}

impl Passage {
    fn note(&mut self, sight: &Sight) {
        if self.deepest.is_none_or(|deepest| sight.depth < deepest.depth) {
            self.deepest = Some(*sight);
        }
    }

    /// The answers; the limits in `cut_off` would be met in the look-ahead only.
    fn told(&self, course: &Course, cut_off: Range<usize>) -> Vec<ScenarioOnset> {
        let peak = self.deepest.map_or(0.0, |sight| sight.profile.speed_kt(sight.distance));
        let peak = Knots::clamped(peak);
        let has_lull = self.deepest.is_some_and(|sight| sight.distance < sight.profile.core_nmi / 2.0);
        let told = |(i, state): (usize, &State)| match state.told(course) {
            Some(told) => ScenarioOnset { peak, has_lull, ..told },
            None => ScenarioOnset { is_cut_off: cut_off.contains(&i), ..ScenarioOnset::NEVER },
        };
        self.states.iter().enumerate().map(told).collect()
    }
}

/// When one limit is first and last passed.
#[derive(Clone, Copy, Debug, Default)]
struct State {
    onset: Option<Found>,
    until: Option<f64>,
}

#[derive(Clone, Copy, Debug)]
struct Found {
    /// `None`: at issue already.
    minute: Option<f64>,
    bearing: f64,
}

impl State {
    /// Takes in one leg, of which the limit is met at the start, at the end (`met`), or at the closest approach
    /// between (`touch`).
    fn pass(
        &mut self,
        leg: &Leg<'_>,
        limit: &Limit,
        [start, end]: [(f64, &Sight); 2],
        met: [bool; 2],
        touch: Option<(f64, &Sight)>,
    ) {
        if met[0] && leg.from <= 0.0 {
            self.onset = Some(Found { minute: None, bearing: start.1.bearing });
        }
        // The stretch over which the wind comes, and the one over which it goes.
        let (comes, goes) = match met {
            [true, true] => (None, None),
            [false, true] => (Some([start, touch.unwrap_or(end)]), None),
            [true, false] => (None, Some([touch.unwrap_or(start), end])),
            [false, false] => (touch.map(|touch| [start, touch]), touch.map(|touch| [touch, end])),
        };
        if let Some(stretch) = comes.filter(|_| self.onset.is_none()) {
            let (t, bearing) = leg.crossing(limit, stretch);
            self.onset = Some(Found { minute: Some(leg.minute(t)), bearing });
        }
        if met[1] {
            self.until = None;
        } else if let Some(stretch) = goes {
            self.until = Some(leg.minute(leg.crossing(limit, stretch).0));
        }
    }

    /// The answer, of which the peak is still to be told; `None` if the wind never comes.
    fn told(&self, course: &Course) -> Option<ScenarioOnset> {
        let found = self.onset?;
        let after = |minutes: f64| course.issued + Minutes::new(minutes as i64);
        let northern = wind_from(Bearing::wrapped(found.bearing), Hemisphere::Northern, INFLOW_DEGREES);
        Some(ScenarioOnset {
            // To the minute, rounded down, a wind that comes within the first minute blows at issue.
            onset: match found.minute {
                Some(minute) if minute >= 1.0 => Onset::At(after(f64::floor(minute))),
                Some(_) | None => Onset::Already,
            },
            until: self.until.map(|minute| after(f64::ceil(minute))),
            from: match course.hemisphere {
                Hemisphere::Northern => northern,
                Hemisphere::Southern => Bearing::wrapped(180.0 - northern.get()),
            },
            ..ScenarioOnset::NEVER
        })
    }
}
