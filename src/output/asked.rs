//! What was asked of a forecast, place by place and wind by wind, with the answers.

use crate::advisory::forecast::Advisory;
use crate::arrival::odds::{Answer, Quantile};
use crate::geo::position::Position;
use crate::output::arrival_text::Onset;
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
}

impl Asked<'_> {
    /// Whether the next advisory is overdue; never where no time was asked for, nor after the last one.
    #[must_use]
    pub fn is_overdue(&self) -> bool {
        let due = self.advisory.next_due.filter(|_| !self.advisory.is_last);
        due.zip(self.now).is_some_and(|(due, now)| due < now.to_utc())
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
