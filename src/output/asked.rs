//! What was asked of a forecast, place by place and wind by wind, with the answers.

use crate::advisory::forecast::Advisory;
use crate::arrival::odds::{Answer, Quantile};
use crate::geo::position::Position;
use crate::output::arrival_text::Onset;
use crate::output::beside::{Beside, OfficialSource};
use crate::plan::sheet::Point;
use crate::time::clock::PortClock;
use crate::time::moment::Moment;
use crate::units::chance::Chance;
use crate::units::speed::Knots;

/// One advisory's answers for some places.
#[derive(Clone, Debug)]
pub struct Asked<'a> {
    /// The advisory.
    pub advisory: &'a Advisory,
    /// The file it was read from.
    pub file: &'a str,
    /// Advisories of other storms in force, with their files: the answers are of all storms together.
    pub other_storms: Vec<(&'a str, &'a Advisory)>,
    /// The official odds that stand beside ours.
    pub official: Option<OfficialSource<'a>>,
    /// Local time for people; UTC where no port is given.
    pub clock: &'a PortClock,
    /// What every page must carry; empty for real ports and single forecasts.
    pub banner: String,
    /// The present time; `None` where no time was asked for, so that nothing depends on a clock.
    pub now: Option<Moment>,
    /// The places.
    pub places: Vec<AskedPlace<'a>>,
    /// What must be said with the odds.
    pub notes: Vec<String>,
}

/// The answers for one place.
#[derive(Clone, Debug)]
pub struct AskedPlace<'a> {
    /// Its name.
    pub name: String,
    /// Where it is.
    pub position: Position,
    /// The winds, weakest first, with their answers.
    pub winds: Vec<(Knots, &'a Answer)>,
    /// For each wind the storm that brings it first in most scenarios, and in what share of those in which it comes;
    /// `None` where there is one storm only, or the wind never comes.
    pub first_storms: Vec<Option<(&'a str, Chance)>>,
    /// The official odds beside ours of the same storm; `None` where no official odds are at hand.
    pub beside: Option<Beside>,
}

impl Asked<'_> {
    /// Whether the next advisory is overdue; never where no time was asked for, nor after the last one.
    #[must_use]
    pub fn is_overdue(&self) -> bool {
        std::iter::once(self.advisory)
            .chain(self.other_storms.iter().map(|(_, advisory)| *advisory))
            .any(|advisory| self.overdue_since(advisory).is_some())
    }

    /// Since when the advisory after this one is overdue, if it is.
    #[must_use]
    pub fn overdue_since(&self, advisory: &Advisory) -> Option<Moment> {
        let due = advisory.next_due.filter(|_| !advisory.is_last)?;
        self.now.filter(|now| due < now.to_utc()).map(|_| Moment::at_or_before(due))
    }
}

/// The spread of an answer's arrival.
#[must_use]
pub fn onset(answer: &Answer) -> Onset {
    Onset {
        chance: answer.chance(),
        already: answer.already_share(),
        earliest: point(answer.earliest()),
        likely: point(answer.likely()),
        latest: point(answer.latest()),
    }
}

/// By when it is over with 90 % chance, given that it comes.
#[must_use]
pub fn over_by(answer: &Answer) -> Point {
    point(answer.end_quantile(Chance::share(9, 10)))
}

fn point(quantile: Quantile) -> Point {
    match quantile {
        Quantile::At(at) => Point::At(at),
        Quantile::AfterEnd => Point::AfterEnd,
        Quantile::TooFew => Point::Unknown,
    }
}
