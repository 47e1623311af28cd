//! Tide and daylight over the whole time of a record, worked out once for all its plans.

use crate::geo::daylight::{SunLimit, daylight};
use crate::port::harbour::Port;
use crate::rules::task::TideNeed;
use crate::tide::under_keel::needed_level;
use crate::tide::window::LevelCurve;
use crate::time::moment::{Minutes, Moment};
use crate::time::span::Span;
use crate::time::windows::WindowSet;
use crate::units::length::Metres;

/// The water level, minute by minute, and when it is light, between two moments; outside them nothing is known.
#[derive(Clone, Debug)]
pub struct Waters {
    level: Option<LevelCurve>,
    daylight: WindowSet,
}

impl Waters {
    /// A port's tide and daylight from `from` to `to`; daylight is that of the reference place.
    ///
    /// Cost: one height for each minute between the two.
    #[must_use]
    pub fn of(port: &Port, from: Moment, to: Moment) -> Waters {
        let here = port.place(&port.reference).map(|place| place.position);
        Waters {
            level: port.tide.as_ref().map(|tide| LevelCurve::of(tide, from, to)),
            daylight: here
                .map_or_else(WindowSet::never, |position| daylight(position, from, to, SunLimit::Sunrise)),
        }
    }

    /// When it is light, from sunrise to sunset.
    #[must_use]
    pub fn daylight(&self) -> &WindowSet {
        &self.daylight
    }

    /// The minutes in which a ship may start so that there is water enough over the whole of the shallow part; none if
    /// the port has no tide or no such channel.
    #[must_use]
    pub fn starts_afloat(&self, port: &Port, need: &TideNeed, draught: Metres) -> WindowSet {
        let (Some(channel), Some(level)) = (port.channel(&need.channel), &self.level) else {
            return WindowSet::never();
        };
        // Squat is part of the under-keel rule here: the files state one allowance for both.
        let enough =
            level.windows_above(needed_level(draught, channel.depth, channel.under_keel, Metres::ZERO));
        let starts = enough.spans().iter().filter_map(|span| {
            // The last minute of the passage may be the last with water enough.
            Span::new(span.start() - need.from, span.end() - need.until)
        });
        WindowSet::from_spans(starts)
    }
}

/// How far before the record's first plan, and after its last, plans look at water and light: a task may reach a day
/// back, and a plan looks at most two days past a forecast of seven.
pub const REACH: (Minutes, Minutes) = (Minutes::hours(48), Minutes::hours(12 * 24));

/// The longest time before now for which tides are worked out. Our choice: a storm's whole record, from its naming to
/// the re-opening, fits in it three times over.
pub const LONGEST_RECORD: Minutes = Minutes::hours(30 * 24);
