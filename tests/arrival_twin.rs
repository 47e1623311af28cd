//! The quick way of finding onsets against its slow twin, which looks at every minute of every scenario.
#![allow(clippy::unwrap_used, reason = "helpers of tests may fail loudly")]

mod storms;

use snugdown::arrival::course::Course;
use snugdown::arrival::keyed::Keyed;
use snugdown::arrival::onset::{Onset, Watch};
use snugdown::arrival::scenario::{Draws, Scenario};
use snugdown::wind::profile::Limit;
use snugdown::wind::sphere::{Vector, bearing_degrees, distance_nmi, plus};
use storms::{at, full_forecast, shipped};

/// Places around the made-up forecast: near its start, on the track, left and right of it, near its end.
const PLACES: [(f64, f64); 8] = [
    (19.3, -61.0),
    (18.4, -66.0),
    (21.0, -66.9),
    (22.4, -67.6),
    (25.5, -70.0),
    (25.0, -77.3),
    (28.0, -73.2),
    (33.5, -74.0),
];

const LIMITS_KT: [f64; 6] = [22.0, 30.0, 34.0, 42.0, 50.0, 64.0];

/// The first and the last minute in which each limit is met.
fn minute_by_minute(course: &Course, scenario: &Scenario, place: Vector) -> [Option<(i64, i64)>; 6] {
    let limits = LIMITS_KT.map(Limit::new);
    let mut met = [None; 6];
    let last = course.steps[course.end].minute as i64;
    for minute in 0..=last {
        let next = course.steps.partition_point(|step| step.minute <= minute as f64);
        let (k, s) = match course.steps.get(next) {
            Some(after) => {
                let before = course.steps[next - 1].minute;
                (next - 1, (minute as f64 - before) / (after.minute - before))
            }
            None => (next - 1, 0.0),
        };
        let from = scenario.vortex(course, k).unwrap();
        let to = scenario.vortex(course, k + 1).unwrap_or(from);
        let centre = plus(from.centre, s, plus(to.centre, -1.0, from.centre));
        let distance = distance_nmi(centre, place);
        if distance > 900.0 {
            continue;
        }
        let bearing = bearing_degrees(centre, place);
        let profile = from.profile(bearing).towards(&to.profile(bearing), s);
        for (limit, met) in limits.iter().zip(&mut met) {
            let reach = profile.reach_nmi(limit);
            if reach > 0.0 && distance <= reach {
                *met = Some((met.map_or(minute, |(first, _)| first), minute));
            }
        }
    }
    met
}

#[test]
fn strides_find_what_is_found_minute_by_minute() {
    let storm = full_forecast();
    let course = Course::of(&storm, &shipped().for_advisory(&storm)).unwrap();
    let draws = Draws::of(&course, Keyed::storm("AL992026"), 0);
    let mut scenario = Scenario::default();
    let end = course.steps[course.end].minute as i64;
    let (mut compared, mut different) = (0, Vec::new());
    for index in 0..40 {
        scenario.draw(&course, &draws, index);
        for (latitude, longitude) in PLACES {
            let place = course.vector(at(latitude, longitude));
            let quick = Watch::new(place, LIMITS_KT.to_vec()).follow(&course, &scenario);
            let slow = minute_by_minute(&course, &scenario, place);
            for ((limit, quick), slow) in LIMITS_KT.iter().zip(quick).zip(slow) {
                compared += usize::from(slow.is_some());
                let onset = match quick.onset {
                    Onset::At(onset) => Some((onset - course.issued).get()),
                    Onset::Already => Some(0),
                    Onset::Never => None,
                };
                let until = quick.until.map_or(end, |until| (until - course.issued).get());
                let agrees = match (onset, slow) {
                    (None, None) => true,
                    // Rounded outwards from up to two seconds outside: never late, never early.
                    (Some(onset), Some((first, last))) => {
                        (0..=2).contains(&(first - onset)) && (0..=2).contains(&(until - last))
                    }
                    // A wind that comes and goes within a minute is found by the quick way alone.
                    (Some(onset), None) => until - onset <= 2,
                    (None, Some(_)) => false,
                };
                if !agrees {
                    different.push(format!(
                        "scenario {index}, {latitude} {longitude}, {limit} kt: {onset:?} to {until} for {slow:?}"
                    ));
                }
            }
        }
    }
    assert!(compared > 1000, "{compared}");
    // Winds that blow for less than a stride, and winds that come and go and come again as the eye passes.
    assert!(different.len() * 200 <= compared, "{} of {compared}: {different:#?}", different.len());
}
