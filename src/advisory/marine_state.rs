//! What the sentences of a Forecast/Advisory say, before months and rules are applied.

use crate::advisory::cursor::{Cursor, DayTime, is_numeric};
use crate::advisory::forecast::{Motion, Quadrants, Seas};
use crate::advisory::words::DOTS;
use crate::geo::position::Position;
use crate::units::bearing::Bearing;
use crate::units::length::{METRES_PER_FOOT, Metres, NauticalMiles};
use crate::units::pressure::HectoPascals;
use crate::units::speed::Knots;
use std::ops::Range;

/// The words at which a run of free words ends, as another sentence begins there.
const KEY_WORDS: [&str; 16] = [
    "FORECAST VALID",
    "OUTLOOK VALID",
    "MAX",
    "REQUEST FOR",
    "EXTENDED OUTLOOK",
    "NEXT ADVISORY",
    "THIS IS THE LAST",
    "INTERMEDIATE PUBLIC ADVISORY",
    "PRESENT MOVEMENT",
    "PRESENTLY",
    "ESTIMATED MINIMUM",
    "EYE DIAMETER",
    "REPEAT",
    "FORECASTER",
    "$$",
    "NNNN",
];

/// What the body says, its times still without a month.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Body {
    /// The present state, then the forecast, in the order of the text; empty if no centre was found.
    pub states: Vec<State>,
    /// Where the centre was at the synoptic time, and when that was.
    pub base: Option<(DayTime, Position)>,
    /// How well the centre is known.
    pub accuracy: Option<NauticalMiles>,
    /// Present motion.
    pub motion: Option<Motion>,
    /// Central pressure.
    pub pressure: Option<HectoPascals>,
    /// When the next advisory is due.
    pub next_due: Option<DayTime>,
    /// The text says that it is the last one.
    pub is_last: bool,
    /// Mean track errors on day 4 and day 5, as the office quotes them.
    pub quoted_track_errors: Option<(NauticalMiles, NauticalMiles)>,
}

/// One state of the storm as written.
#[derive(Clone, Debug, PartialEq)]
pub struct State {
    /// Day and time.
    pub valid: DayTime,
    /// The bytes of its first line.
    pub range: Range<usize>,
    /// The centre; `None` where the track ends ("DISSIPATED").
    pub position: Option<Position>,
    /// "INLAND", "DISSIPATED": as written, in capitals; empty if none.
    pub qualifier: String,
    /// Greatest wind.
    pub wind: Option<Knots>,
    /// Gusts.
    pub gust: Option<Knots>,
    /// A finding says already that its wind is damaged.
    pub is_damaged: bool,
    /// Radii lines of 34, 50 and 64 kt, and their bytes.
    pub radii: [Option<(Quadrants, Range<usize>)>; 3],
    /// The line of high seas.
    pub seas: Option<Seas>,
}

impl State {
    /// A state of which only time and place are known yet.
    #[must_use]
    pub fn new(valid: DayTime, range: Range<usize>, position: Option<Position>) -> State {
        State {
            valid,
            range,
            position,
            qualifier: String::new(),
            wind: None,
            gust: None,
            is_damaged: false,
            radii: [const { None }; 3],
            seas: None,
        }
    }
}

/// Whether another sentence begins here.
#[must_use]
pub fn is_at_key(cursor: &Cursor) -> bool {
    KEY_WORDS.iter().any(|key| cursor.sees(key))
}

/// Takes the words between a position and the wind: "INLAND...DISSIPATING".
pub fn take_qualifier(cursor: &mut Cursor) -> String {
    cursor.take_dots();
    let mut text = String::new();
    let mut is_joined = true;
    for _ in 0..8 {
        let word = cursor.peek(0);
        if word.is_empty() || is_at_key(cursor) || is_numeric(word) || (word == DOTS && text.is_empty()) {
            break;
        }
        if !is_joined && word != DOTS {
            text.push(' ');
        }
        is_joined = word == DOTS;
        text.push_str(word);
        cursor.skip(1);
    }
    text
}

/// Takes "360 DEGREES AT  11 KT".
pub fn take_motion(cursor: &mut Cursor) -> Option<Motion> {
    let mut ahead = cursor.clone();
    let bearing = Bearing::new(ahead.quantity("DEGREES")?).ok()?;
    ahead.take("AT");
    let speed = Knots::new(ahead.quantity("KT")?).ok()?;
    *cursor = ahead;
    // A storm that moves at 0 kt has no direction, whatever the text prints beside it.
    Some(if speed > Knots::ZERO { Motion::Towards(bearing, speed) } else { Motion::Stationary })
}

/// Takes "12 FT" or "4 M".
pub fn take_seas_height(cursor: &mut Cursor) -> Option<Metres> {
    let feet = cursor.quantity("FT").map(|feet| feet * METRES_PER_FOOT);
    Metres::new(feet.or_else(|| cursor.quantity("M"))?).ok()
}
