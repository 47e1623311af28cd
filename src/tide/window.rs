//! When there is enough water, and when it is high and low.

use crate::tide::heights::Tide;
use crate::tide::table::WaterKind;
use crate::time::moment::{Minutes, Moment};
use crate::time::span::Span;
use crate::time::windows::WindowSet;
use crate::units::length::Metres;

/// The level of the water at every minute of a stretch of time: computed once, asked for every ship.
#[derive(Clone, Debug)]
pub struct LevelCurve {
    from: Moment,
    levels: Vec<Option<Metres>>,
}

/// A high or a low water.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Turn {
    /// When, to the minute.
    pub at: Moment,
    /// Its level above chart datum.
    pub level: Metres,
    /// Which of the two.
    pub kind: WaterKind,
}

impl LevelCurve {
    /// The levels of `tide` from `from` up to and with `to`; nothing if `to` comes first.
    #[must_use]
    pub fn of(tide: &Tide, from: Moment, to: Moment) -> LevelCurve {
        let minutes = from.epoch_minutes()..=to.epoch_minutes();
        let levels =
            minutes.map(|minute| tide.height_at(Moment::from_epoch_minutes(minute).to_utc())).collect();
        LevelCurve { from, levels }
    }

    /// The minutes through which the level is at least `needed`, at their beginning and at their end.
    ///
    /// So a window starts at the first whole minute after the water has come and ends at the last before it goes. An
    /// unknown level is not enough.
    #[must_use]
    pub fn windows_above(&self, needed: Metres) -> WindowSet {
        let is_enough = |level: &Option<Metres>| level.is_some_and(|known| known >= needed);
        let mut spans = Vec::new();
        let mut start = None;
        for (at, level) in self.moments().zip(&self.levels) {
            if is_enough(level) {
                start = start.or(Some(at));
            } else if let Some(first) = start.take() {
                spans.extend(Span::new(first, at - Minutes::new(1)));
            }
        }
        if let (Some(first), Some(last)) = (start, self.moments().last()) {
            spans.extend(Span::new(first, last));
        }
        WindowSet::from_spans(spans)
    }

    /// The high and low waters strictly within the curve, in order.
    #[must_use]
    pub fn turns(&self) -> Vec<Turn> {
        let mut turns = Vec::new();
        for (at, three) in self.moments().skip(1).zip(self.levels.windows(3)) {
            let [Some(before), Some(level), Some(after)] = three else { continue };
            let is_high = before < level && level >= after;
            if is_high || (before > level && level <= after) {
                let kind = if is_high { WaterKind::High } else { WaterKind::Low };
                turns.push(Turn { at, level: *level, kind });
            }
        }
        turns
    }

    fn moments(&self) -> impl Iterator<Item = Moment> {
        let from = self.from;
        (0_i64..).zip(&self.levels).map(move |(minute, _)| from + Minutes::new(minute))
    }
}

/// The minutes from `from` until `to` through which the level is at least `needed`, rounded to the safe side.
///
/// For many levels over the same time take a [`LevelCurve`].
#[must_use]
pub fn windows_above(tide: &Tide, needed: Metres, from: Moment, to: Moment) -> WindowSet {
    LevelCurve::of(tide, from, to).windows_above(needed)
}
