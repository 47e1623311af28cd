//! What one advisory says, whatever product it was read from.

use crate::finding::fault::Place;
use crate::geo::position::Position;
use crate::time::moment::Minutes;
use crate::units::bearing::Bearing;
use crate::units::chance::Chance;
use crate::units::length::{Metres, NauticalMiles};
use crate::units::pressure::HectoPascals;
use crate::units::speed::Knots;
use crate::units::wind::Averaging;
use chrono::{DateTime, Datelike, Utc};

/// One storm's forecast as one office issued it at one time.
#[derive(Clone, Debug, PartialEq)]
pub struct Advisory {
    /// Which storm.
    pub storm: Storm,
    /// The office as the text names it ("NWS NATIONAL HURRICANE CENTER MIAMI FL", or as typed in).
    pub issuer: String,
    /// Advisory number within the storm, if the product numbers them; specials take the next number.
    pub number: Option<u32>,
    /// Issued between the routine times.
    pub is_special: bool,
    /// Replaces an advisory with the same number.
    pub is_corrected: bool,
    /// When the advisory was issued: the "0900 UTC" of its head. Odds count from here.
    pub issued: DateTime<Utc>,
    /// The synoptic time from which the office counts its forecast hours; at or before `issued`.
    pub base: DateTime<Utc>,
    /// Where the centre was at `base`, when the text says so.
    pub base_position: Option<Position>,
    /// Over which time its winds are averaged.
    pub averaging: Averaging,
    /// How well the present centre is known ("POSITION ACCURATE WITHIN 20 NM").
    pub accuracy: Option<NauticalMiles>,
    /// Present motion; `None` if the text gives none.
    pub motion: Option<Motion>,
    /// Estimated minimum central pressure.
    pub pressure: Option<HectoPascals>,
    /// When the next one is due; `None` if not stated.
    pub next_due: Option<DateTime<Utc>>,
    /// The text says that it is the last one for this storm.
    pub is_last: bool,
    /// The present state first, then the forecast, times rising; never empty.
    pub points: Vec<ForecastPoint>,
    /// How the forecast ends before its usual length, if it does.
    pub ends: Option<Ending>,
    /// Mean track errors that the office itself quotes for (day 4, day 5).
    pub quoted_track_errors: Option<(NauticalMiles, NauticalMiles)>,
    /// Circles within which the office expects the centre, times rising; empty if it publishes none.
    pub circles: Vec<ProbabilityCircle>,
    /// Made from what happened, for drills only: no forecast of any office.
    pub is_drill: bool,
    /// What the reader had to assume; each widens the spread. Empty for a full official text.
    pub assumed: Vec<Assumption>,
}

/// A storm's identity.
#[derive(Clone, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub struct Storm {
    /// "AL122024" (basin, number, year), or what was typed in; before 1999 texts carry none.
    pub id: Option<String>,
    /// "KRISTY", "TEN".
    pub name: String,
    /// "HURRICANE", "POTENTIAL TROPICAL CYCLONE".
    pub class: String,
}

/// What tells one advisory from another, in the order in which they replace each other.
///
/// Two advisories with equal keys are the same one, or two corrections of it: then only their contents differ. The
/// number may start again or be missing, and a storm gets a name late, so id and issue time count first.
#[derive(Clone, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub struct AdvisoryKey {
    /// The storm's id, or its name and the year where it has none.
    pub storm: String,
    /// When it was issued.
    pub issued: DateTime<Utc>,
    /// Its number.
    pub number: Option<u32>,
    /// It replaces the one with the same number and issue time.
    pub is_corrected: bool,
}

/// Present motion of the centre.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Motion {
    /// Nearly stationary.
    Stationary,
    /// Towards a bearing at a speed.
    Towards(Bearing, Knots),
}

/// The state of the storm at one time.
#[derive(Clone, Debug, PartialEq)]
pub struct ForecastPoint {
    /// When.
    pub valid: DateTime<Utc>,
    /// The centre.
    pub position: Position,
    /// Greatest mean wind anywhere in the storm, averaged as [`Advisory::averaging`] says, 10 m over open water.
    pub max_wind: Knots,
    /// Gusts, if given.
    pub gust: Option<Knots>,
    /// Reach of 34, 50 and 64 kt winds.
    pub radii: WindRadii,
    /// Reach of high seas; `None` if the product does not say.
    pub seas: Option<Seas>,
    /// "POST-TROP/EXTRATROP", "INLAND": verbatim; empty if none.
    pub qualifier: String,
    /// Where in the text it stands, for findings.
    pub place: Place,
}

/// How far winds of 34, 50 and 64 kt reach from the centre.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct WindRadii {
    /// Of 34 kt.
    pub gale: Reach,
    /// Of 50 kt.
    pub storm: Reach,
    /// Of 64 kt.
    pub hurricane: Reach,
}

impl WindRadii {
    /// Nothing given.
    pub const NOT_GIVEN: WindRadii =
        WindRadii { gale: Reach::NotGiven, storm: Reach::NotGiven, hurricane: Reach::NotGiven };

    /// The reaches with their wind speeds, weakest wind first.
    #[must_use]
    pub fn by_speed(&self) -> [(Knots, Reach); 3] {
        [(Knots::GALE, self.gale), (Knots::STORM, self.storm), (Knots::HURRICANE, self.hurricane)]
    }
}

/// The reach of one wind speed. "None there" and "not given" are different things.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Reach {
    /// The product does not say.
    NotGiven,
    /// The greatest reach anywhere in each quadrant; all zero if that wind does not blow anywhere.
    Given(Quadrants),
}

/// How far seas of a height reach.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Seas {
    /// The significant height: 12 ft in texts up to 2024, 4 m in newer ones.
    pub height: Metres,
    /// The greatest reach in each quadrant; all zero if there are none.
    pub reach: Quadrants,
}

/// A distance for each quadrant of the compass, as tropical cyclone advisories order them.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Quadrants {
    /// 0 to 90 degrees true from the centre.
    pub northeast: NauticalMiles,
    /// 90 to 180.
    pub southeast: NauticalMiles,
    /// 180 to 270.
    pub southwest: NauticalMiles,
    /// 270 to 360.
    pub northwest: NauticalMiles,
}

impl Quadrants {
    /// No reach in any quadrant.
    pub const NONE: Quadrants = Quadrants {
        northeast: NauticalMiles::ZERO,
        southeast: NauticalMiles::ZERO,
        southwest: NauticalMiles::ZERO,
        northwest: NauticalMiles::ZERO,
    };

    /// NE, SE, SW, NW.
    #[must_use]
    pub fn clockwise(&self) -> [NauticalMiles; 4] {
        [self.northeast, self.southeast, self.southwest, self.northwest]
    }

    /// The greatest of the four.
    #[must_use]
    pub fn greatest(&self) -> NauticalMiles {
        self.clockwise().into_iter().fold(NauticalMiles::ZERO, |a, b| if b > a { b } else { a })
    }
}

/// Why a forecast stops before its usual length.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Ending {
    /// "DISSIPATED" at a time.
    Dissipated(DateTime<Utc>),
    /// "ABSORBED BY ..." at a time.
    Absorbed(DateTime<Utc>),
    /// The reader stopped here because the text contradicts itself (see the findings).
    CutShort(DateTime<Utc>),
}

/// A circle round a forecast centre within which the centre will lie with a stated chance.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ProbabilityCircle {
    /// The time of the forecast centre.
    pub valid: DateTime<Utc>,
    /// Its radius.
    pub radius: NauticalMiles,
    /// The chance, greater than 0 and less than 1.
    pub chance: Chance,
}

/// Something that a short, typed-in forecast does not say and that was assumed for it.
#[derive(Clone, Debug, PartialEq)]
pub struct Assumption {
    /// What was missing and what was taken instead, in words: "wind radii after 0 h: the present ones kept".
    pub what: String,
    /// By how much it widens the standard deviation of track, intensity and size errors; 1 leaves them.
    pub widens: Widening,
}

/// Factors on the standard deviations of the forecast errors, each at least 1.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Widening {
    /// Along and cross track.
    pub track: f64,
    /// Greatest wind.
    pub intensity: f64,
    /// Wind radii.
    pub size: f64,
}

impl Advisory {
    /// What tells it from other advisories.
    #[must_use]
    pub fn key(&self) -> AdvisoryKey {
        let named = || format!("{} {}", self.storm.name, self.issued.year());
        AdvisoryKey {
            storm: self.storm.id.clone().unwrap_or_else(named),
            issued: self.issued,
            number: self.number,
            is_corrected: self.is_corrected,
        }
    }

    /// How old the advisory is at `now`, in whole minutes rounded up.
    #[must_use]
    pub fn age_at(&self, now: DateTime<Utc>) -> Minutes {
        let seconds = (now - self.issued).num_seconds();
        Minutes::new(seconds.div_euclid(60) + i64::from(seconds.rem_euclid(60) != 0))
    }

    /// The last time for which it gives a state.
    #[must_use]
    pub fn last_valid(&self) -> DateTime<Utc> {
        self.points.last().map_or(self.issued, |point| point.valid)
    }
}
