//! Part of a scenario's track as seen from a place: how far away and on which bearing the storm is, and when the place
//! passes the edge of a wind.
//!
//! Between hourly states the storm moves straight and changes evenly. A wind is there while the distance from the
//! centre is within its reach on the place's bearing (a calm eye does not end it).

use crate::arrival::course::Course;
use crate::arrival::scenario::Scenario;
use crate::wind::profile::{Limit, Profile};
use crate::wind::sphere::{EARTH_RADIUS_NMI, Vector, bearing_degrees, distance_nmi, dot, plus};

/// What is seen from the centre towards the place.
#[derive(Clone, Copy, Debug)]
pub struct Sight {
    /// Distance in n mi.
    pub distance: f64,
    /// Bearing in degrees.
    pub bearing: f64,
    /// The wind on that bearing.
    pub profile: Profile,
    /// How deep in the storm the place lies: the distance as a share of the gale radius, or of the core's.
    pub depth: f64,
}

impl Sight {
    fn new(distance: f64, bearing: f64, profile: Profile) -> Sight {
        let depth = distance / profile.reach_nmi[0].max(profile.core_nmi);
        Sight { distance, bearing, profile, depth }
    }

    /// Whether the wind at the place is the limit or more.
    #[must_use]
    pub fn meets(&self, limit: &Limit) -> bool {
        self.profile.blows(limit, self.distance)
    }

    /// Distance less reach in n mi: negative while the wind is there.
    fn gap(&self, limit: &Limit) -> f64 {
        let reach = self.profile.reach_nmi(limit);
        // A storm without that wind is as far away as its centre, and never touches.
        if reach > 0.0 { self.distance - reach } else { self.distance.max(1.0) }
    }
}

/// The track from one step to another, seen from a place. Times in it are counted in steps from the first of all.
#[derive(Clone, Debug)]
pub struct Leg<'a> {
    course: &'a Course,
    scenario: &'a Scenario,
    place: Vector,
    /// When it begins.
    pub from: f64,
    /// When it ends.
    pub to: f64,
    /// Square of the chord between centre and place at the nearer end.
    nearer2: f64,
    /// The furthest reach of gales and of the core at either end in n mi.
    widest_nmi: f64,
    core_nmi: f64,
    /// The way of the centre in n mi.
    way_nmi: f64,
    /// When the centre is nearest to the place, if between the ends.
    pub closest: Option<f64>,
}

impl<'a> Leg<'a> {
    /// The leg between two steps; `None` if there are no such steps.
    #[must_use]
    pub fn new(
        course: &'a Course,
        scenario: &'a Scenario,
        [first, last]: [usize; 2],
        place: Vector,
    ) -> Option<Leg<'a>> {
        let (start, end) = (scenario.vortex(course, first)?, scenario.vortex(course, last)?);
        let (to_start, to_end) = (plus(place, -1.0, start.centre), plus(place, -1.0, end.centre));
        let moved = plus(end.centre, -1.0, start.centre);
        let mut leg = Leg {
            course,
            scenario,
            place,
            from: first as f64,
            to: last as f64,
            nearer2: f64::min(dot(to_start, to_start), dot(to_end, to_end)),
            widest_nmi: start.widest_nmi.max(end.widest_nmi),
            core_nmi: start.core_nmi.max(end.core_nmi),
            way_nmi: f64::sqrt(dot(moved, moved)) * EARTH_RADIUS_NMI,
            closest: None,
        };
        // Only a storm that draws near at first and draws away at last is nearest in between.
        if dot(to_start, moved) > 0.0 && dot(to_end, moved) < 0.0 {
            leg.closest = leg.nearest(first, last).filter(|t| *t > leg.from && *t < leg.to);
        }
        Some(leg)
    }

    /// When the centre is nearest to the place, the ends included.
    fn nearest(&self, first: usize, last: usize) -> Option<f64> {
        let mut nearest = None;
        let mut least = f64::INFINITY;
        for k in first..last {
            let from = self.scenario.vortex(self.course, k)?.centre;
            let moved = plus(self.scenario.vortex(self.course, k + 1)?.centre, -1.0, from);
            let length2 = dot(moved, moved);
            let share = if length2 > 0.0 { dot(plus(self.place, -1.0, from), moved) / length2 } else { 0.0 };
            let share = share.clamp(0.0, 1.0);
            let between = plus(self.place, -1.0, plus(from, share, moved));
            let distance2 = dot(between, between);
            if distance2 < least {
                (least, nearest) = (distance2, Some(k as f64 + share));
            }
        }
        nearest
    }

    /// Whether the centre comes as near as the furthest reach of its gales (times `widening`, and then at least
    /// that of its core) at either end, or is nearest in between.
    #[must_use]
    pub fn may_reach(&self, widening: f64) -> bool {
        let furthest = if widening > 1.0 { self.widest_nmi.max(self.core_nmi) } else { self.widest_nmi };
        // One n mi for the bend of the earth.
        let reach = (furthest * widening + 1.0) / EARTH_RADIUS_NMI;
        self.closest.is_some() || self.nearer2 <= reach * reach
    }

    /// What is seen at a time; the centre goes straight from step to step. `None` beyond the last step.
    #[must_use]
    pub fn look(&self, t: f64) -> Option<Sight> {
        let k = t as usize;
        let s = t - k as f64;
        let from = self.scenario.vortex(self.course, k)?;
        if s <= 0.0 {
            let bearing = bearing_degrees(from.centre, self.place);
            let distance = distance_nmi(from.centre, self.place);
            return Some(Sight::new(distance, bearing, from.profile(bearing)));
        }
        let to = self.scenario.vortex(self.course, k + 1)?;
        let centre = plus(from.centre, s, plus(to.centre, -1.0, from.centre));
        let bearing = bearing_degrees(centre, self.place);
        let profile = from.profile(bearing).towards(&to.profile(bearing), s);
        Some(Sight::new(distance_nmi(centre, self.place), bearing, profile))
    }

    /// Minutes after issue at a time.
    #[must_use]
    pub fn minute(&self, t: f64) -> f64 {
        let k = t as usize;
        let minute = |k: usize| self.course.steps.get(k).map(|step| step.minute);
        let start = minute(k).unwrap_or(0.0);
        start + (minute(k + 1).unwrap_or(start) - start) * (t - k as f64)
    }

    /// When in a stretch the place passes the limit's edge, and the bearing then.
    ///
    /// Starts from where it would be if the centre went straight and the reach changed evenly all the way. Then regula
    /// falsi, halving the value at an end that stays twice (the Illinois method, Dowell & Jarratt 1971, BIT
    /// 11:168-174), until the slope says that it is found to some seconds, of which a last step along the slope leaves
    /// less than one. Then a second outwards: an onset is never late, an end never early.
    #[must_use]
    pub fn crossing(&self, limit: &Limit, [start, end]: [(f64, &Sight); 2]) -> (f64, f64) {
        const SECOND: f64 = 1.0 / 3600.0;
        const SOME_SECONDS: f64 = 20.0 * SECOND;
        let (mut low, mut high) = (start.0, end.0);
        let (mut at_low, mut at_high) = (start.1.gap(limit), end.1.gap(limit));
        let comes = at_low > 0.0;
        let (guess, slope) = self.straight_crossing([start, end], [at_low, at_high]);
        let mut low_moved = None;
        let (mut cut, mut bearing) = (guess, start.1.bearing);
        for _ in 0..40 {
            let Some(sight) = self.look(cut) else { break };
            let value = sight.gap(limit);
            bearing = sight.bearing;
            if value.abs() <= slope.abs() * SOME_SECONDS || high - low < SECOND {
                cut = (cut - (value / slope).clamp(-SOME_SECONDS, SOME_SECONDS)).clamp(low, high);
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
            let next = low + (high - low) * at_low / (at_low - at_high);
            cut = if next.is_finite() { next.clamp(low, high) } else { f64::midpoint(low, high) };
        }
        let outwards = if comes { (cut - SECOND).max(self.from) } else { (cut + SECOND).min(self.to) };
        (outwards, bearing)
    }

    /// When the gap between two sights would close if the centre went straight and the reach changed evenly, and the
    /// gap's slope there in n mi a step.
    ///
    /// At a share u of the way L between, d(u)^2 = (1 - u) d0^2 + u d1^2 - u (1 - u) L^2 (Stewart's theorem) is to be
    /// R(u)^2 = (R0 + u (R1 - R0))^2: a u^2 + b u + c = 0, with a root between 0 and 1 as the signs differ there.
    fn straight_crossing(&self, [start, end]: [(f64, &Sight); 2], gaps: [f64; 2]) -> (f64, f64) {
        let [(low, d0), (high, d1)] = [(start.0, start.1.distance), (end.0, end.1.distance)];
        let (r0, r1) = (d0 - gaps[0], d1 - gaps[1]);
        let way = self.way_nmi * (high - low) / (self.to - self.from);
        let a = way * way - (r1 - r0) * (r1 - r0);
        let b = d1 * d1 - d0 * d0 - way * way - 2.0 * r0 * (r1 - r0);
        let c = d0 * d0 - r0 * r0;
        let root = f64::sqrt((b * b - 4.0 * a * c).max(0.0));
        let q = -0.5 * (b + if b < 0.0 { -root } else { root });
        let share = [c / q, q / a].into_iter().find(|u| (0.0..=1.0).contains(u)).unwrap_or(0.5);
        let slope = (2.0 * a * share + b) / (2.0 * (r0 + share * (r1 - r0)));
        // Near the centre, and where a wind sets in at once, the straight way tells little.
        let mean = gaps[1] - gaps[0];
        let ratio = slope / mean;
        let slope = if (1.0 / 3.0..3.0).contains(&ratio) { slope } else { mean };
        (low + (high - low) * share, slope / (high - low))
    }
}
