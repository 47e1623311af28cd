//! The wind at a place hour by hour, as the scenarios have it: its bands, from where it blows, how it turns, how long a
//! gale lasts, whether the eye passes.
//!
//! The scenarios are those of [`crate::arrival::odds`]: what is said here and there is said of the same storms. Winds are
//! looked at every hour, with the calm of the eye filled: a lull is told apart, and never looks like the end.

use crate::advisory::forecast::Advisory;
use crate::arrival::course::Course;
use crate::arrival::errors::ErrorTable;
use crate::arrival::keyed::{BLOCK, Keyed};
use crate::arrival::odds::{Answer, LEAST_ONSETS};
use crate::arrival::onset::{Onset, ScenarioOnset};
use crate::arrival::scenario::{Draws, Scenario};
use crate::geo::exposure::Exposure;
use crate::geo::position::Position;
use crate::time::moment::{Minutes, Moment};
use crate::units::bearing::Bearing;
use crate::units::chance::Chance;
use crate::units::length::Metres;
use crate::units::speed::Knots;
use crate::units::wind::Averaging;
use crate::wind::exposure::Shelter;
use crate::wind::field::Hemisphere;
use crate::wind::turning::{Turn, fan, turn};

/// Below this wind over the open sea (kt) a scenario says nothing about the direction: the storm does not make the
/// weather there. Our choice.
const OWN_WEATHER_KT: f64 = 20.0;

/// A place and the winds that are asked for there.
#[derive(Clone, Copy, Debug)]
pub struct View<'a> {
    /// Where.
    pub position: Position,
    /// How open it lies, by direction.
    pub exposure: &'a Exposure,
    /// Over which time the mean wind is averaged.
    pub averaging: Averaging,
    /// At which height mean wind and gusts are told.
    pub height: Metres,
}

/// The 10, 50 and 90 % points of a wind.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Band {
    /// In one scenario of ten it is less.
    pub low: Knots,
    /// In half it is less.
    pub middle: Knots,
    /// In one of ten it is more.
    pub high: Knots,
}

/// The wind at one time.
#[derive(Clone, Debug, PartialEq)]
pub struct HourWind {
    /// When.
    pub at: Moment,
    /// The mean wind at the place, averaged and at the height asked for.
    pub mean: Band,
    /// The 3-s gust there at that height.
    pub gust: Band,
    /// From where it blows; `None` where too few scenarios have a wind of the storm's own.
    pub from: Option<Fan>,
    /// Share of scenarios with 34 kt or more at this time over the open sea, as the advisory averages.
    pub gale: Chance,
    /// Share with the calm of the eye at the place at this time.
    pub lull: Chance,
}

/// Directions from which the wind may blow.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Fan {
    /// The middle one.
    pub likely: Bearing,
    /// One scenario of ten has it further round anticlockwise.
    pub left: Bearing,
    /// One of ten further round clockwise.
    pub right: Bearing,
}

/// How long a wind lasts from its first to its last minute, of the scenarios in which it comes.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Lasting {
    /// So long.
    For(Minutes),
    /// Until after the forecast ends.
    BeyondEnd,
    /// Too few scenarios in which it comes ([`LEAST_ONSETS`]).
    TooFew,
}

/// Shares of the scenarios in which the gale comes.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Turning {
    /// The wind veers: turns clockwise while it blows (the place lies right of the track).
    pub veers: Chance,
    /// It backs: turns anticlockwise (left of the track).
    pub backs: Chance,
    /// It hardly turns.
    pub steady: Chance,
    /// The eye passes over: a lull, then the wind from the other side.
    pub eye: Chance,
}

/// The wind at a place over the forecast.
#[derive(Clone, Debug, PartialEq)]
pub struct WindSeries {
    /// At issue, each whole hour after it, and at the end of the forecast.
    pub hours: Vec<HourWind>,
    /// The greatest mean wind of all hours.
    pub peak_mean: Band,
    /// The greatest gust.
    pub peak_gust: Band,
    /// How the wind turns while a gale blows; `None` where too few scenarios bring one.
    pub turning: Option<Turning>,
    /// How long the gale lasts: 10, 50 and 90 % points.
    pub lasts: [Lasting; 3],
    /// The forecast's own track, without errors: mean wind and gust at each of the hours.
    pub single: Vec<(Knots, Knots)>,
}

/// The wind at a place over an advisory's forecast. `gale` is the answer for 34 kt at the same position from the same
/// table. `None` if the advisory gives no course.
///
/// Cost: scenarios x hours; 1,000 x 120 take about as long as forty questions of [`crate::arrival::odds::ask`].
#[must_use]
pub fn wind_series(
    advisory: &Advisory,
    table: &ErrorTable,
    view: View<'_>,
    gale: &Answer,
) -> Option<WindSeries> {
    let course = Course::of(advisory, table)?;
    let shelter = Shelter::of(view.exposure, view.averaging, view.height, advisory.averaging);
    let watcher = Watcher { course: &course, place: course.vector(view.position), shelter };
    let storm = advisory.storm.id.as_deref().unwrap_or(&advisory.storm.name);
    let draws = Draws::of(&course, Keyed::storm(storm), 0);
    let count = gale.onsets.len().min(BLOCK);
    let mut scenario = Scenario::default();
    let mut seen: Vec<Vec<Sample>> = vec![Vec::with_capacity(count); course.end + 1];
    for index in 0..count {
        scenario.draw(&course, &draws, index);
        for (k, samples) in seen.iter_mut().enumerate() {
            samples.extend(watcher.sample(&scenario, k));
        }
    }
    scenario.single_track(&course);
    let single = (0..=course.end).filter_map(|k| watcher.sample(&scenario, k)).map(|s| (s.mean(), s.gust()));
    let times = course.steps.iter().map(|step| course.issued + Minutes::new(step.minute as i64));
    Some(WindSeries {
        single: single.collect(),
        peak_mean: band(peaks(&seen, count, |sample| sample.mean_kt)),
        peak_gust: band(peaks(&seen, count, |sample| sample.gust_kt)),
        turning: turning(&course, &gale.onsets, &seen),
        lasts: [1, 5, 9].map(|tenths| lasting(gale, tenths)),
        hours: times.zip(&seen).map(|(at, samples)| hour(at, samples)).collect(),
    })
}

/// One scenario at one hour.
#[derive(Clone, Copy, Debug)]
struct Sample {
    open_sea_kt: f64,
    mean_kt: f64,
    gust_kt: f64,
    from: Bearing,
    in_eye: bool,
}

impl Sample {
    fn mean(&self) -> Knots {
        Knots::clamped(self.mean_kt)
    }

    fn gust(&self) -> Knots {
        Knots::clamped(self.gust_kt)
    }
}

struct Watcher<'a> {
    course: &'a Course,
    place: crate::wind::sphere::Vector,
    shelter: Shelter<'a>,
}

impl Watcher<'_> {
    fn sample(&self, scenario: &Scenario, k: usize) -> Option<Sample> {
        let wind = scenario.vortex(self.course, k)?.wind_at(self.place, Hemisphere::Northern);
        let from = match self.course.hemisphere {
            Hemisphere::Northern => wind.from,
            // The course is mirrored at the equator.
            Hemisphere::Southern => Bearing::wrapped(180.0 - wind.from.get()),
        };
        let factors = self.shelter.from(from);
        let open_sea_kt = wind.around.get();
        Some(Sample {
            open_sea_kt,
            mean_kt: open_sea_kt * factors.mean,
            gust_kt: open_sea_kt * factors.gust,
            from,
            in_eye: wind.in_eye,
        })
    }
}

fn hour(at: Moment, samples: &[Sample]) -> HourWind {
    let share = |test: &dyn Fn(&Sample) -> bool| {
        Chance::share(samples.iter().filter(|sample| test(sample)).count(), samples.len())
    };
    let own: Vec<Bearing> =
        samples.iter().filter(|s| s.open_sea_kt >= OWN_WEATHER_KT).map(|s| s.from).collect();
    let from = (own.len() >= LEAST_ONSETS).then(|| fan(&own)).flatten();
    HourWind {
        at,
        mean: band(samples.iter().map(|sample| sample.mean_kt).collect()),
        gust: band(samples.iter().map(|sample| sample.gust_kt).collect()),
        from: from.map(|[left, likely, right]| Fan { likely, left, right }),
        gale: share(&|sample| sample.open_sea_kt >= Knots::GALE.get()),
        lull: share(&|sample| sample.in_eye && sample.open_sea_kt >= Knots::GALE.get()),
    }
}

/// The greatest of each scenario's values.
fn peaks(seen: &[Vec<Sample>], count: usize, value: impl Fn(&Sample) -> f64) -> Vec<f64> {
    let greatest =
        |scenario| seen.iter().filter_map(|samples| samples.get(scenario)).map(&value).fold(0.0, f64::max);
    (0..count).map(greatest).collect()
}

/// Nearest-rank 10, 50 and 90 % points; calm if there are no values.
fn band(mut values: Vec<f64>) -> Band {
    values.sort_unstable_by(f64::total_cmp);
    let point = |tenths| {
        let value = values.get(rank(values.len(), tenths)).copied().unwrap_or(0.0);
        Knots::clamped(value)
    };
    Band { low: point(1), middle: point(5), high: point(9) }
}

/// The index of the point below or at which so many tenths of `count` values lie.
fn rank(count: usize, tenths: usize) -> usize {
    (count * tenths).div_ceil(10).saturating_sub(1)
}

fn lasting(gale: &Answer, tenths: usize) -> Lasting {
    let mut lengths: Vec<Option<Minutes>> = gale
        .onsets
        .iter()
        .filter_map(|scenario| {
            let begins = begins(scenario, gale.issued)?;
            Some(scenario.until.map(|until| until - begins))
        })
        .collect();
    // What outlasts the forecast is longer than all that does not.
    lengths.sort_by_key(|length| (length.is_none(), *length));
    match lengths.get(rank(lengths.len(), tenths)) {
        _ if lengths.len() < LEAST_ONSETS => Lasting::TooFew,
        Some(Some(length)) => Lasting::For(*length),
        Some(None) => Lasting::BeyondEnd,
        None => Lasting::TooFew,
    }
}

/// When the wind comes; `None` if it does not.
fn begins(scenario: &ScenarioOnset, issued: Moment) -> Option<Moment> {
    match scenario.onset {
        Onset::Already => Some(issued),
        Onset::At(at) => Some(at),
        Onset::Never => None,
    }
}

fn turning(course: &Course, onsets: &[ScenarioOnset], seen: &[Vec<Sample>]) -> Option<Turning> {
    let mut counts = [0_usize; 4];
    for (scenario, onset) in onsets.iter().enumerate().take(seen.first()?.len()) {
        let Some(begins) = begins(onset, course.issued) else { continue };
        let ends = onset.until.unwrap_or(course.forecast_end);
        // From where it blows at the onset, and then at each hour while it lasts.
        let hours = course.steps.iter().zip(seen).filter_map(|(step, samples)| {
            let at = course.issued + Minutes::new(step.minute as i64);
            (begins < at && at <= ends).then(|| samples.get(scenario).map(|sample| sample.from)).flatten()
        });
        let directions: Vec<Bearing> = std::iter::once(onset.from).chain(hours).collect();
        let slot = match (onset.has_lull, turn(&directions)) {
            (true, _) => 3,
            (false, Turn::Veers) => 0,
            (false, Turn::Backs) => 1,
            (false, Turn::Steady) => 2,
        };
        counts[slot] += 1;
    }
    let all: usize = counts.iter().sum();
    let [veers, backs, steady, eye] = counts.map(|count| Chance::share(count, all));
    (all >= LEAST_ONSETS).then_some(Turning { veers, backs, steady, eye })
}
