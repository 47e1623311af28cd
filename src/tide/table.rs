//! The tide from an official table of high and low waters.

use crate::tide::error::TideError;
use crate::time::moment::Minutes;
use crate::units::length::Metres;
use chrono::{DateTime, TimeDelta, Utc};

/// The longest way from a high water to the next low water, or back. Our choice: about 12.5 h in a tide once a day, up to 16 h
/// where that is mixed; two waters missing from a tide twice a day leave 18.6 h.
const LONGEST: TimeDelta = TimeDelta::hours(18);

/// Whether the tide turns from rising to falling, or back.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum WaterKind {
    /// A high water.
    High,
    /// A low water.
    Low,
}

/// A high or low water of an official table.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Water {
    /// Which of the two. It is asked for, so that a row left out is noticed.
    pub kind: WaterKind,
    /// When.
    pub at: DateTime<Utc>,
    /// Its level above chart datum.
    pub level: Metres,
}

/// High and low waters in turn, a cosine between each two; outside the table the level is unknown.
///
/// The cosine is common practice between tabulated waters; in estuaries and shallow bays the true curve may differ by
/// decimetres half way.
#[derive(Clone, Debug, PartialEq)]
pub struct TideTable {
    waters: Vec<Water>,
}

impl TideTable {
    /// A table of waters in order of time.
    ///
    /// # Errors
    /// Fewer than two waters; waters out of order; two high or two low waters in turn, or waters too far apart, as when rows
    /// are missing; a high water that is not above the low water beside it.
    pub fn new(waters: Vec<Water>) -> Result<TideTable, TideError> {
        if waters.len() < 2 {
            return Err(TideError::ShortTable);
        }
        for pair in waters.windows(2) {
            let [before, after] = pair else { continue };
            check_pair(before, after)?;
        }
        Ok(TideTable { waters })
    }

    /// The level above chart datum at an instant; `None` before the first and after the last water.
    #[must_use]
    pub fn height_at(&self, at: DateTime<Utc>) -> Option<Metres> {
        // h = (h1 + h2) / 2 + (h1 - h2) / 2 cos(pi (t - t1) / (t2 - t1)), between (t1, h1) and (t2, h2).
        let next = self.waters.partition_point(|water| water.at <= at);
        let one = self.waters.get(next.checked_sub(1)?)?;
        let Some(two) = self.waters.get(next) else {
            return (one.at == at).then_some(one.level);
        };
        let share = (at - one.at).num_milliseconds() as f64 / (two.at - one.at).num_milliseconds() as f64;
        let (h1, h2) = (one.level.get(), two.level.get());
        let cosine = libm::cos(std::f64::consts::PI * share);
        Some(Metres::clamped(f64::midpoint(h1, h2) + (h1 - h2) / 2.0 * cosine))
    }

    /// The highest level in the table.
    #[must_use]
    pub fn ceiling(&self) -> Metres {
        let levels = self.waters.iter().map(|water| water.level.get());
        Metres::clamped(levels.fold(f64::NEG_INFINITY, f64::max))
    }
}

fn check_pair(before: &Water, after: &Water) -> Result<(), TideError> {
    let at = after.at;
    if at <= before.at {
        return Err(TideError::Order(at));
    }
    let (high, low) = match (before.kind, after.kind) {
        (WaterKind::High, WaterKind::Low) => (before, after),
        (WaterKind::Low, WaterKind::High) => (after, before),
        (WaterKind::High, WaterKind::High) => return Err(TideError::SameKind { at, kind: "high" }),
        (WaterKind::Low, WaterKind::Low) => return Err(TideError::SameKind { at, kind: "low" }),
    };
    if at - before.at > LONGEST {
        return Err(TideError::Gap { at, length: Minutes::new((at - before.at).num_minutes()) });
    }
    if high.level <= low.level {
        return Err(TideError::HighNotAboveLow(high.at));
    }
    Ok(())
}
