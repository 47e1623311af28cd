//! Tide, daylight and shifts over the whole time of a record, worked out once for all its plans.

use crate::geo::daylight::{SunLimit, daylight};
use crate::port::harbour::Port;
use crate::port::means::{Member, Shift};
use crate::rules::task::TideNeed;
use crate::tide::under_keel::needed_level;
use crate::tide::window::LevelCurve;
use crate::time::clock::PortClock;
use crate::time::local::LocalTime;
use crate::time::moment::{Minutes, Moment};
use crate::time::span::Span;
use crate::time::windows::WindowSet;
use crate::units::length::Metres;
use chrono::{DateTime, Duration, Utc};
use std::collections::BTreeMap;

/// The water level, minute by minute, when it is light and who is on call, between two moments; outside them nothing is
/// known.
#[derive(Clone, Debug)]
pub struct Calendar {
    level: Option<LevelCurve>,
    daylight: WindowSet,
    on_call: BTreeMap<String, WindowSet>,
}

impl Calendar {
    /// A port's tide, daylight and shifts from `from` to `to`; daylight is that of the reference place.
    ///
    /// Cost: one height for each minute between the two.
    #[must_use]
    pub fn of(port: &Port, from: Moment, to: Moment) -> Calendar {
        let here = port.place(&port.reference).map(|place| place.position);
        Calendar {
            level: port.tide.as_ref().map(|tide| LevelCurve::of(tide, from, to)),
            daylight: here
                .map_or_else(WindowSet::never, |position| daylight(position, from, to, SunLimit::Sunrise)),
            on_call: port
                .pools
                .iter()
                .flat_map(|pool| &pool.members)
                .map(|member| (member.id.clone(), on_call(&port.clock, member, (from, to))))
                .collect(),
        }
    }

    /// When a member is on call; never if nobody knows that member.
    #[must_use]
    pub fn on_call(&self, member: &str) -> WindowSet {
        self.on_call.get(member).cloned().unwrap_or_default()
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

/// When a member is on call between two moments; always if it has no shifts.
fn on_call(clock: &PortClock, member: &Member, within: (Moment, Moment)) -> WindowSet {
    if member.shifts.is_empty() {
        return WindowSet::always();
    }
    WindowSet::from_spans(member.shifts.iter().flat_map(|shift| shift_spans(clock, shift, within)))
}

fn shift_spans(clock: &PortClock, shift: &Shift, (first, last): (Moment, Moment)) -> Vec<Span> {
    match shift {
        Shift::Once { from, to } => {
            Span::new(Moment::at_or_after(*from), Moment::at_or_before(*to)).into_iter().collect()
        }
        Shift::Daily { from, to } => {
            let begins = |local| Moment::at_or_after(instant(clock.local_at(local), Side::Late));
            let ends = |local| Moment::at_or_before(instant(clock.local_at(local), Side::Early));
            let day_before = (first - Minutes::hours(48)).to_utc().date_naive();
            let days = (last - first).get() / 1440 + 4;
            (0..days)
                .filter_map(|day| {
                    let date = day_before.checked_add_signed(Duration::days(day))?;
                    let end = if to > from { date } else { date.succ_opt()? };
                    Span::new(begins(date.and_time(*from)), ends(end.and_time(*to)))
                })
                .collect()
        }
    }
}

/// Which of two instants to take where clocks are put back.
enum Side {
    Early,
    Late,
}

/// The instant of a local time; on the day clocks change, the side that makes a shift shorter.
fn instant(local: LocalTime, side: Side) -> DateTime<Utc> {
    match (local, side) {
        (LocalTime::Once(at) | LocalTime::Never { at, .. }, _) => at,
        (LocalTime::Twice { first, .. }, Side::Early) => first,
        (LocalTime::Twice { second, .. }, Side::Late) => second,
    }
}

/// How far before the record's first plan, and after its last, plans look at water and light: a task may reach a day
/// back, and a plan looks at most two days past a forecast of seven.
pub const REACH: (Minutes, Minutes) = (Minutes::hours(48), Minutes::hours(12 * 24));

/// The longest time before now for which tides are worked out. Our choice: a storm's whole record, from its naming to
/// the re-opening, fits in it three times over.
pub const LONGEST_RECORD: Minutes = Minutes::hours(30 * 24);
