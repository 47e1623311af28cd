//! When the high seas of a scenario reach a place.
//!
//! Advisories give the reach of 12-ft (or 4-m) seas at issue alone. A scenario carries them along with its storm, as wide
//! beside the gales as they are at issue:
//!
//! R(t) = R(0) x G(t) / G(0), with G the mean reach of 34 kt as the scenario has it (of a storm just of gale force where it
//! is weaker), and G(0) that of the forecast at issue. Nothing is known of shores: seas behind land do not reach as far.
//! Looked at every hour, straight between.

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
        let mut before: Option<(f64, f64)> = None;
        for (k, step) in course.steps.iter().enumerate() {
            let Some((gap, bearing)) = self.gap_nmi(course, scenario, k, place) else { break };
            let crossing = before.map(|(minute, last)| minute + (step.minute - minute) * last / (last - gap));
            let is_met = gap <= 0.0;
            let was_met = before.is_some_and(|(_, last)| last <= 0.0);
            if k > course.end {
                told.is_cut_off |= is_met && told.onset == Onset::Never;
            } else if is_met && told.onset == Onset::Never {
                let minute = crossing.map_or(0, |minute| minute as i64);
                let at = course.issued + Minutes::new(minute);
                told.onset = if minute < 1 { Onset::Already } else { Onset::At(at) };
                told.from = bearing;
            } else if was_met && !is_met {
                told.until = crossing.map(|minute| course.issued + Minutes::new(f64::ceil(minute) as i64));
            }
            if is_met && k <= course.end {
                told.until = None;
            }
            before = Some((step.minute, gap));
        }
        told
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
