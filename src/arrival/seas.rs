//! When the high seas of a scenario reach a place.
//!
//! Advisories give the reach of 12-ft (or 4-m) seas at issue alone. A scenario carries them along with its storm, as wide
//! beside the gales as they are at issue:
//!
//! R(t) = R(0) x G(t) / G(0), with G the mean reach of 34 kt as the scenario has it (of a storm just of gale force where it
//! is weaker), and G(0) that of the forecast at issue. Nothing is known of shores: seas behind land do not reach as far.
//! Looked at every hour in which they may be near, straight between.

use crate::advisory::forecast::{Advisory, Quadrants};
use crate::arrival::course::Course;
use crate::arrival::onset::{Onset, ScenarioOnset};
use crate::arrival::scenario::Scenario;
use crate::time::moment::Minutes;
use crate::units::bearing::Bearing;
use crate::wind::field::Hemisphere;
use crate::wind::profile::around;
use crate::wind::sphere::{Vector, bearing_degrees, distance_nmi};

/// The reach of the high seas at issue, ready for scenarios.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct HighSeas {
    /// As a multiple of the mean gale reach, by quadrant.
    share: [f64; 4],
}

impl HighSeas {
    /// The seas of an advisory; `None` if its present state does not give their reach.
    #[must_use]
    pub fn of(advisory: &Advisory, course: &Course) -> Option<HighSeas> {
        let reach = mirrored(advisory.points.first()?.seas?.reach, course.hemisphere);
        let mut forecast = Scenario::default();
        forecast.single_track(course);
        let (_, at_issue) = forecast.gale_reach_nmi(course, 0)?;
        (at_issue > 0.0).then(|| HighSeas { share: reach.map(|nmi| nmi / at_issue) })
    }

    /// When they reach `place` in a scenario, and when they leave it for good.
    #[must_use]
    pub fn follow(&self, course: &Course, scenario: &Scenario, place: Vector) -> ScenarioOnset {
        let mut told = ScenarioOnset::NEVER;
        let mut before: Option<(usize, f64)> = None;
        let widest = self.share.into_iter().fold(0.0, f64::max);
        let mut stop = 0;
        while let Some(from) = course.stops.get(stop) {
            let out_of_reach = scenario.stops_out_of_reach(stop, place, widest);
            stop += out_of_reach.max(1);
            if out_of_reach > 0 {
                continue;
            }
            let to = course.stops.get(stop).copied().unwrap_or(*from);
            for k in *from..=to {
                if before.is_none_or(|(last, _)| last < k) {
                    before = self.pass(course, scenario, (k, place), before, &mut told);
                }
            }
        }
        told
    }

    /// Takes in step `k` after what was seen one step before, if it was looked at.
    fn pass(
        &self,
        course: &Course,
        scenario: &Scenario,
        (k, place): (usize, Vector),
        before: Option<(usize, f64)>,
        told: &mut ScenarioOnset,
    ) -> Option<(usize, f64)> {
        let (gap, bearing) = self.gap_nmi(course, scenario, k, place)?;
        let minute = course.steps.get(k)?.minute;
        let last = before.filter(|(last, _)| last + 1 == k);
        let crossing = last.and_then(|(last, was)| {
            let then = course.steps.get(last)?.minute;
            Some(then + (minute - then) * was / (was - gap))
        });
        let (is_met, was_met) = (gap <= 0.0, last.is_some_and(|(_, was)| was <= 0.0));
        if k > course.end {
            told.is_cut_off |= is_met && told.onset == Onset::Never;
        } else if is_met && told.onset == Onset::Never {
            let minute = crossing.unwrap_or(minute) as i64;
            let at = course.issued + Minutes::new(minute);
            told.onset = if minute < 1 { Onset::Already } else { Onset::At(at) };
            told.from = bearing;
        } else if was_met && !is_met {
            told.until = crossing.map(|minute| course.issued + Minutes::new(f64::ceil(minute) as i64));
        }
        if is_met && k <= course.end {
            told.until = None;
        }
        Some((k, gap))
    }

    /// Distance of the place from the centre less the reach of the seas, n mi; and on which true bearing from the place
    /// the storm lies, from where its seas come.
    fn gap_nmi(
        &self,
        course: &Course,
        scenario: &Scenario,
        k: usize,
        place: Vector,
    ) -> Option<(f64, Bearing)> {
        let (centre, gale) = scenario.gale_reach_nmi(course, k)?;
        let reach = around(self.share, bearing_degrees(centre, place)) * gale;
        let back = bearing_degrees(place, centre);
        let back = match course.hemisphere {
            Hemisphere::Northern => back,
            Hemisphere::Southern => 180.0 - back,
        };
        Some((distance_nmi(centre, place) - reach, Bearing::wrapped(back)))
    }
}

/// Clockwise from north-east, as seen by a course that is mirrored at the equator in the south.
fn mirrored(reach: Quadrants, hemisphere: Hemisphere) -> [f64; 4] {
    let [ne, se, sw, nw] = reach.clockwise().map(|nmi| nmi.get());
    match hemisphere {
        Hemisphere::Northern => [ne, se, sw, nw],
        Hemisphere::Southern => [se, ne, nw, sw],
    }
}
