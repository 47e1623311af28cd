//! The warning position and the forecasts of a joint warning text, sentence by sentence, before months are known.
//!
//! As in the Forecast/Advisory, what no recogniser takes is never passed over silently if it looks like a figure.

use crate::advisory::cursor::{Cursor, DayTime, is_coordinate};
use crate::advisory::forecast::{Motion, Quadrants};
use crate::advisory::notes::Notes;
use crate::advisory::reach_rule::{semicircles, threshold};
use crate::advisory::words::Word;
use crate::geo::position::Position;
use crate::units::bearing::Bearing;
use crate::units::length::NauticalMiles;
use crate::units::speed::Knots;
use std::ops::Range;

/// What the body says.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct JointBody {
    /// The warning position, then the forecasts; empty if the position is not readable.
    pub states: Vec<JointState>,
    /// How well the centre is known.
    pub accuracy: Option<NauticalMiles>,
    /// Motion over the past six hours.
    pub motion: Option<Motion>,
}

/// One state of the storm as written.
#[derive(Clone, Debug, PartialEq)]
pub struct JointState {
    /// Hours after the warning position.
    pub lead_h: i64,
    /// Day and time.
    pub valid: Option<DayTime>,
    /// The bytes of its first line.
    pub range: Range<usize>,
    /// The centre.
    pub position: Option<Position>,
    /// "BECOMING EXTRATROPICAL": as written; empty if none.
    pub qualifier: String,
    /// Greatest wind.
    pub wind: Option<Knots>,
    /// Gusts.
    pub gust: Option<Knots>,
    /// Radii of 34, 50 and 64 kt, and their bytes.
    pub radii: [Option<(Quadrants, Range<usize>)>; 3],
}

/// Words that say nothing to keep.
const SILENT: [&str; 10] = [
    "WIND RADII VALID OVER OPEN WATER ONLY",
    "PRESENT WIND DISTRIBUTION",
    "EXTENDED OUTLOOK",
    "LONG RANGE OUTLOOK",
    "FORECASTS",
    "POSITION BASED ON",
    "CENTER LOCATED BY",
    "---",
    "/",
    "...",
];

/// Reads from the word after "WARNING POSITION" to the remarks.
#[must_use]
pub fn read_joint_body(words: &[Word], from: usize, notes: &mut Notes) -> JointBody {
    let mut reader = Reader { cursor: Cursor::new(words, from), words, notes, body: JointBody::default() };
    if !reader.state(0) {
        return reader.body;
    }
    let mut free_from = reader.cursor.at();
    while !reader.cursor.is_done() && !reader.cursor.sees("REMARKS") && !reader.cursor.sees("NNNN") {
        let at = reader.cursor.at();
        if reader.sentence() {
            reader.free_words(free_from, at);
            free_from = reader.cursor.at();
        } else {
            reader.cursor.skip(1);
        }
    }
    let end = reader.cursor.at();
    reader.free_words(free_from, end);
    reader.body
}

struct Reader<'a, 'n, 's> {
    cursor: Cursor<'a>,
    words: &'a [Word],
    notes: &'n mut Notes<'s>,
    body: JointBody,
}

impl Reader<'_, '_, '_> {
    fn sentence(&mut self) -> bool {
        self.cursor.take_any(&SILENT)
            || self.motion()
            || self.accuracy()
            || self.repeat()
            || self.forecast()
            || self.wind()
            || self.radii()
            || self.vector()
    }

    /// "020600Z --- NEAR 23.1N 132.4E"; whether it could be read.
    fn state(&mut self, lead_h: i64) -> bool {
        let at = self.cursor.at();
        let valid = self.cursor.day_hour_minute();
        self.cursor.take("---");
        self.cursor.take("NEAR");
        let position = self.cursor.position();
        let range = self.cursor.range_since(at);
        if valid.is_none() || position.is_none() {
            let found =
                format!("time and position are not readable in \"{}\"", self.notes.quote(range.clone()));
            let to_do = "it must read as \"020600Z --- NEAR 23.1N 132.4E\": fetch the text again";
            let code = if lead_h == 0 { "advisory-centre" } else { "advisory-position" };
            self.notes.error(code, range, found, to_do);
            return false;
        }
        let (wind, gust, radii) = (None, None, [const { None }; 3]);
        let qualifier = String::new();
        self.body.states.push(JointState { lead_h, valid, range, position, qualifier, wind, gust, radii });
        true
    }

    /// "12 HRS, VALID AT: 021800Z --- 24.7N 130.9E".
    fn forecast(&mut self) -> bool {
        let mut ahead = self.cursor.clone();
        let Some(lead) = ahead.whole_number() else { return false };
        if !ahead.take("HRS VALID AT") || !(1..=240).contains(&lead) {
            return false;
        }
        self.cursor = ahead;
        self.state(i64::from(lead));
        true
    }

    /// "MOVEMENT PAST SIX HOURS - 310 DEGREES AT 06 KTS".
    fn motion(&mut self) -> bool {
        if !self.cursor.take("MOVEMENT PAST SIX HOURS") {
            return false;
        }
        self.cursor.take("-");
        let mut ahead = self.cursor.clone();
        let bearing = ahead.quantity("DEGREES").and_then(|degrees| Bearing::new(degrees).ok());
        ahead.take("AT");
        let speed = ahead.quantity("KTS").or_else(|| ahead.quantity("KT")).and_then(|kt| Knots::new(kt).ok());
        if let (Some(bearing), Some(speed)) = (bearing, speed) {
            self.cursor = ahead;
            let is_moving = speed > Knots::ZERO;
            self.body.motion =
                Some(if is_moving { Motion::Towards(bearing, speed) } else { Motion::Stationary });
        }
        true
    }

    /// "POSITION ACCURATE TO WITHIN 030 NM".
    fn accuracy(&mut self) -> bool {
        let is_here = self.cursor.take("POSITION ACCURATE TO WITHIN");
        if is_here {
            self.body.accuracy = self.cursor.quantity("NM").and_then(|miles| NauticalMiles::new(miles).ok());
        }
        is_here
    }

    /// "REPEAT POSIT: 23.1N 132.4E".
    fn repeat(&mut self) -> bool {
        let at = self.cursor.at();
        if !self.cursor.take("REPEAT POSIT") {
            return false;
        }
        let position = self.cursor.position();
        if self.body.states.first().is_some_and(|now| now.position != position) {
            let range = self.cursor.range_since(at);
            let found = format!("\"{}\" differs from the warning position", self.notes.quote(range.clone()));
            self.notes.warning(
                "advisory-repeat-differs",
                range,
                found,
                "the first one is used: ask the office",
            );
        }
        true
    }

    /// "MAX SUSTAINED WINDS - 035 KT, GUSTS 045 KT".
    fn wind(&mut self) -> bool {
        let at = self.cursor.at();
        if !self.cursor.take("MAX SUSTAINED WINDS") {
            return false;
        }
        // "MAX SUSTAINED WINDS BASED ON ONE-MINUTE AVERAGE" stands above the first position.
        self.cursor.take("-");
        let knots = |value: Option<f64>| value.and_then(|value| Knots::new(value).ok());
        let wind = knots(self.cursor.quantity("KT"));
        let says_gusts = self.cursor.take("GUSTS");
        let gust = if says_gusts { knots(self.cursor.quantity("KT")) } else { None };
        let range = self.cursor.range_since(at);
        let is_second = self.body.states.last().is_some_and(|state| state.wind.is_some());
        if wind.is_none() || (says_gusts && gust.is_none()) || is_second {
            let found = format!(
                "no readable wind, or a second one for one time: \"{}\"",
                self.notes.quote(range.clone())
            );
            self.notes.error("advisory-wind", range, found, "fetch the text again");
        } else if let Some(state) = self.body.states.last_mut() {
            (state.wind, state.gust) = (wind, gust);
        }
        true
    }

    /// "RADIUS OF 034 KT WINDS - 120 NM NORTHEAST QUADRANT" and three more lines without the wind.
    fn radii(&mut self) -> bool {
        let at = self.cursor.at();
        if !self.cursor.take("RADIUS OF") {
            return false;
        }
        let speed = self.cursor.quantity("KT");
        self.cursor.take("WINDS");
        self.cursor.take("-");
        let quadrants = take_reach(&mut self.cursor);
        let range = self.cursor.range_since(at);
        let quote = self.notes.quote(range.clone());
        let slot = speed.and_then(threshold);
        let kept =
            self.body.states.last_mut().zip(slot).and_then(|(state, index)| state.radii.get_mut(index));
        match (speed, quadrants, kept) {
            (None, _, _) | (_, None, _) => {
                let to_do = "four quadrants, a circle, or a semicircle and the rest must stand there: fetch the text again";
                self.notes.error("advisory-radii", range, format!("\"{quote}\" is not readable"), to_do);
            }
            (Some(_), Some(_), None) => {
                let found = format!("radii of another wind: \"{quote}\"");
                let to_do = "only those of 34, 50 and 64 kt are used, and 35 kt is not taken for 34";
                self.notes.warning("advisory-radius-speed", range, found, to_do);
            }
            (Some(_), Some(_), Some(Some(_))) => {
                let found = format!("\"{quote}\" stands twice for one time");
                self.notes.error("advisory-radii", range, found, "fetch the text again: lines are mixed up");
            }
            (Some(_), Some(quadrants), Some(kept)) => *kept = Some((quadrants, range)),
        }
        true
    }

    /// "VECTOR TO 24 HR POSIT: 325 DEG/ 11 KTS": says nothing that the positions do not say.
    fn vector(&mut self) -> bool {
        if !self.cursor.take("VECTOR TO") {
            return false;
        }
        if self.cursor.seek("POSIT", 3) {
            self.cursor.take("POSIT");
        }
        let mut ahead = self.cursor.clone();
        if ahead.quantity("DEG").is_some() {
            ahead.take("AT");
            let _ = ahead.quantity("KTS").or_else(|| ahead.quantity("KT"));
            self.cursor = ahead;
        }
        true
    }

    /// Words between the sentences: what becomes of the storm; figures among them are an error.
    fn free_words(&mut self, from: usize, to: usize) {
        let Some(run) = self.words.get(from..to).filter(|run| !run.is_empty()) else { return };
        let range = Cursor::new(self.words, to).range_since(from);
        let is_figure = |word: &Word| {
            is_coordinate(&word.text)
                || matches!(word.text.as_str(), "KT" | "KTS" | "NM" | "QUADRANT" | "SEMICIRCLE")
        };
        let text: Vec<&str> = run.iter().map(|word| word.text.as_str()).collect();
        let text = text.join(" ");
        // "SATELLITE", "A FIX": how the position was found.
        let is_about_position =
            self.body.states.len() == 1 && self.body.states.iter().all(|now| now.wind.is_none());
        if run.iter().any(is_figure) {
            let found = format!("\"{}\" could not be read", self.notes.quote(range.clone()));
            let to_do = "it holds figures that may matter: fetch the text again";
            self.notes.error("advisory-unread-figures", range, found, to_do);
        } else if !is_about_position && let Some(state) = self.body.states.last_mut() {
            if !state.qualifier.is_empty() {
                state.qualifier.push(' ');
            }
            state.qualifier.push_str(&text);
        }
    }
}

/// Four quadrants, one circle, or a semicircle and what lies elsewhere.
fn take_reach(cursor: &mut Cursor) -> Option<Quadrants> {
    let mut ahead = cursor.clone();
    let first = NauticalMiles::new(ahead.quantity("NM")?).ok()?;
    let towards = ahead.peek(0);
    let reach = match ahead.peek(1) {
        "QUADRANT" => return take_quadrants(cursor),
        "SEMICIRCLE" => {
            ahead.skip(2);
            ahead.take("OVER WATER");
            let elsewhere = NauticalMiles::new(ahead.quantity("NM")?).ok()?;
            let is_named = ahead.take("ELSEWHERE") || {
                ahead.skip(1);
                ahead.take("SEMICIRCLE")
            };
            semicircles(towards, first, elsewhere).filter(|_| is_named)?
        }
        _ => Quadrants { northeast: first, southeast: first, southwest: first, northwest: first },
    };
    ahead.take("OVER WATER");
    *cursor = ahead;
    Some(reach)
}

/// "120 NM NORTHEAST QUADRANT 090 NM SOUTHEAST QUADRANT ...": each quadrant once.
fn take_quadrants(cursor: &mut Cursor) -> Option<Quadrants> {
    let mut ahead = cursor.clone();
    let mut found: [Option<NauticalMiles>; 4] = [None; 4];
    for _ in 0..4 {
        let miles = NauticalMiles::new(ahead.quantity("NM")?).ok()?;
        let names = ["NORTHEAST QUADRANT", "SOUTHEAST QUADRANT", "SOUTHWEST QUADRANT", "NORTHWEST QUADRANT"];
        let quadrant = names.iter().position(|name| ahead.take(name))?;
        let slot = found.get_mut(quadrant).filter(|slot| slot.is_none())?;
        *slot = Some(miles);
    }
    let [Some(northeast), Some(southeast), Some(southwest), Some(northwest)] = found else { return None };
    *cursor = ahead;
    Some(Quadrants { northeast, southeast, southwest, northwest })
}
