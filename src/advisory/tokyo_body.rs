//! The analysis and the forecasts of an advisory of RSMC Tokyo, line by line, before months are known.
//!
//! As in the Forecast/Advisory, what no recogniser takes is never passed over silently if it looks like a figure.

use crate::advisory::cursor::{Cursor, DayTime, is_coordinate};
use crate::advisory::forecast::{Motion, Quadrants};
use crate::advisory::notes::Notes;
use crate::advisory::reach_rule::{semicircles, threshold};
use crate::advisory::words::Word;
use crate::geo::position::Position;
use crate::units::bearing::Bearing;
use crate::units::chance::Chance;
use crate::units::length::NauticalMiles;
use crate::units::pressure::HectoPascals;
use crate::units::speed::Knots;
use std::ops::Range;

const COMPASS: [&str; 16] =
    ["N", "NNE", "NE", "ENE", "E", "ESE", "SE", "SSE", "S", "SSW", "SW", "WSW", "W", "WNW", "NW", "NNW"];

/// What the body says.
#[derive(Clone, Debug, Default)]
pub struct TokyoBody {
    /// The analysis, then the forecasts; empty if there is none.
    pub states: Vec<TokyoState>,
    /// Motion of the centre in the analysis.
    pub motion: Option<Motion>,
    /// Central pressure in the analysis.
    pub pressure: Option<HectoPascals>,
}

/// One state of the storm as written.
#[derive(Clone, Debug, Default)]
pub struct TokyoState {
    /// Hours after the analysis.
    pub lead_h: i64,
    /// Day and time.
    pub valid: Option<DayTime>,
    /// The centre.
    pub position: Option<Position>,
    /// Radius and chance of the circle within which the centre will lie.
    pub circle: Option<(NauticalMiles, Chance)>,
    /// Greatest wind, a 10-minute mean.
    pub wind: Option<Knots>,
    /// Gusts.
    pub gust: Option<Knots>,
    /// Reach of 50 kt.
    pub storm_radii: Option<Quadrants>,
    /// "TROPICAL DEPRESSION": as written; empty if none.
    pub qualifier: String,
    /// The bytes of its first line.
    pub range: Range<usize>,
}

/// Reads all lines from the analysis on.
#[must_use]
pub fn read_tokyo_body(words: &[Word], notes: &mut Notes) -> TokyoBody {
    let mut reader = Reader { cursor: Cursor::new(words, 0), words, notes, body: TokyoBody::default() };
    reader.read();
    reader.body
}

struct Reader<'a, 'n, 's> {
    cursor: Cursor<'a>,
    words: &'a [Word],
    notes: &'n mut Notes<'s>,
    body: TokyoBody,
}

impl Reader<'_, '_, '_> {
    fn read(&mut self) {
        if !self.cursor.seek("PSTN", self.words.len()) {
            let range = self.cursor.range_since(self.cursor.at());
            let found = "no line \"PSTN\" says where the storm is".to_owned();
            self.notes.error("advisory-centre", range, found, "bring the whole text as issued");
            return;
        }
        let mut free_from = self.cursor.at();
        while !self.cursor.is_done() {
            let at = self.cursor.at();
            if self.sentence() {
                self.free_words(free_from, at);
                free_from = self.cursor.at();
            } else {
                self.cursor.skip(1);
            }
        }
        self.free_words(free_from, self.cursor.at());
    }

    fn sentence(&mut self) -> bool {
        self.cursor.take("FORECAST")
            || self.analysis()
            || self.forecast()
            || self.movement()
            || self.central_pressure()
            || self.wind()
            || self.radii()
    }

    /// "PSTN 080000UTC 27.0N 126.1E GOOD".
    fn analysis(&mut self) -> bool {
        let at = self.cursor.at();
        if !self.cursor.take("PSTN") {
            return false;
        }
        if !self.body.states.is_empty() {
            let range = self.cursor.range_since(at);
            let to_do = "put each advisory in a file of its own";
            self.notes.error("advisory-two-in-one", range, "a second analysis begins here".to_owned(), to_do);
        }
        self.state(at, 0);
        self.cursor.take_any(&["GOOD", "FAIR", "POOR"]);
        true
    }

    /// "24HF 090000UTC 27.7N 123.2E 35NM 70%".
    fn forecast(&mut self) -> bool {
        let at = self.cursor.at();
        let word = self.cursor.peek(0);
        let digits = word.strip_suffix("HF").filter(|digits| digits.bytes().all(|b| b.is_ascii_digit()));
        let Some(lead) =
            digits.and_then(|digits| digits.parse::<i64>().ok()).filter(|lead| (1..=240).contains(lead))
        else {
            return false;
        };
        self.cursor.skip(1);
        self.state(at, lead);
        let mut ahead = self.cursor.clone();
        let radius = ahead.quantity("NM").and_then(|miles| NauticalMiles::new(miles).ok());
        let chance = ahead.quantity("%").and_then(|percent| Chance::new(percent / 100.0).ok());
        let chance = chance.filter(|chance| *chance > Chance::NEVER && *chance < Chance::CERTAIN);
        match (radius, chance, self.body.states.last_mut()) {
            (Some(radius), Some(chance), Some(state)) => {
                state.circle = Some((radius, chance));
                self.cursor = ahead;
            }
            _ => {
                let range = self.cursor.range_since(at);
                let found =
                    format!("no circle such as \"35NM 70%\" follows \"{}\"", self.notes.quote(range.clone()));
                self.notes.warning("advisory-no-circle", range, found, "the usual errors are taken there");
            }
        }
        true
    }

    fn state(&mut self, at: usize, lead_h: i64) {
        let valid = self.cursor.day_hour_minute();
        let position = self.cursor.position();
        let range = self.cursor.range_since(at);
        if valid.is_none() || position.is_none() {
            let found =
                format!("time and position are not readable in \"{}\"", self.notes.quote(range.clone()));
            let to_do = "it must read as \"24HF 090000UTC 27.7N 123.2E\": fetch the text again";
            let code = if lead_h == 0 { "advisory-centre" } else { "advisory-position" };
            self.notes.error(code, range.clone(), found, to_do);
        }
        self.body.states.push(TokyoState { lead_h, valid, position, range, ..TokyoState::default() });
    }

    /// "MOVE NW 06KT", "MOVE W SLOWLY", "MOVE ALMOST STATIONARY"; only that of the analysis is kept.
    fn movement(&mut self) -> bool {
        if !self.cursor.take("MOVE") {
            return false;
        }
        if self.cursor.take("ALMOST STATIONARY") || self.cursor.take("STATIONARY") {
            self.keep_motion(Motion::Stationary);
            return true;
        }
        let towards = COMPASS.iter().position(|name| *name == self.cursor.peek(0));
        self.cursor.skip(usize::from(towards.is_some()));
        // "SLOWLY" has no speed: the direction alone is no motion.
        if !self.cursor.take("SLOWLY")
            && let (Some(sixteenth), Some(Ok(speed))) = (towards, self.cursor.quantity("KT").map(Knots::new))
        {
            self.keep_motion(Motion::Towards(Bearing::wrapped(sixteenth as f64 * 22.5), speed));
        }
        true
    }

    fn keep_motion(&mut self, motion: Motion) {
        if self.body.states.len() == 1 {
            self.body.motion = Some(motion);
        }
    }

    /// "PRES 945HPA".
    fn central_pressure(&mut self) -> bool {
        let is_here = self.cursor.take("PRES");
        if is_here && let Some(hpa) = self.cursor.quantity("HPA").filter(|_| self.body.states.len() == 1) {
            self.body.pressure = HectoPascals::new(hpa).ok();
        }
        is_here
    }

    /// "MXWD 085KT", "GUST 120KT".
    fn wind(&mut self) -> bool {
        let at = self.cursor.at();
        let is_gust = self.cursor.take("GUST");
        if !is_gust && !self.cursor.take("MXWD") {
            return false;
        }
        let speed = self.cursor.quantity("KT").and_then(|kt| Knots::new(kt).ok());
        let range = self.cursor.range_since(at);
        let slot =
            self.body.states.last_mut().map(|state| if is_gust { &mut state.gust } else { &mut state.wind });
        match (slot, speed) {
            (Some(slot @ None), Some(speed)) => *slot = Some(speed),
            _ => {
                let found = format!(
                    "no readable wind, or a second one for one time: \"{}\"",
                    self.notes.quote(range.clone())
                );
                self.notes.error("advisory-wind", range, found, "fetch the text again");
            }
        }
        true
    }

    /// "50KT 120NM NORTH 100NM SOUTH", "30KT 180NM".
    fn radii(&mut self) -> bool {
        let at = self.cursor.at();
        let mut ahead = self.cursor.clone();
        let Some(speed) = ahead.quantity("KT") else { return false };
        let mut sides = Vec::new();
        while let Some(miles) = ahead.quantity("NM") {
            let towards = Some(ahead.peek(0))
                .filter(|word| semicircles(word, NauticalMiles::ZERO, NauticalMiles::ZERO).is_some());
            ahead.skip(usize::from(towards.is_some()));
            sides.push((NauticalMiles::new(miles).ok(), towards));
        }
        self.cursor = ahead;
        let range = self.cursor.range_since(at);
        let quote = self.notes.quote(range.clone());
        let quadrants = match sides[..] {
            [(Some(all), None)] => {
                Some(Quadrants { northeast: all, southeast: all, southwest: all, northwest: all })
            }
            [(Some(one), Some(towards)), (Some(other), Some(_))] => semicircles(towards, one, other),
            _ => None,
        };
        let Some(quadrants) = quadrants else {
            let to_do = "a circle or two semicircles must stand there, as \"50KT 120NM NORTH 100NM SOUTH\"";
            self.notes.error("advisory-radii", range, format!("\"{quote}\" is not readable"), to_do);
            return true;
        };
        match (threshold(speed), self.body.states.last_mut()) {
            (Some(1), Some(state)) => state.storm_radii = Some(quadrants),
            _ => {
                let to_do = "only those of 34, 50 and 64 kt are used, and 30 kt is not taken for 34: the reach of 34 kt \
                             is not given";
                self.notes.warning(
                    "advisory-radius-speed",
                    range,
                    format!("radii of another wind: \"{quote}\""),
                    to_do,
                );
            }
        }
        true
    }

    /// Words between the lines: what becomes of the storm; figures among them are an error.
    fn free_words(&mut self, from: usize, to: usize) {
        let Some(run) = self.words.get(from..to) else { return };
        let range = Cursor::new(self.words, to).range_since(from);
        let is_figure = |word: &Word| {
            let ends_so = ["KT", "NM", "HPA", "HF", "%"].iter().any(|unit| word.text.ends_with(unit));
            is_coordinate(&word.text) || (ends_so && word.text.starts_with(|c: char| c.is_ascii_digit()))
        };
        if run.iter().any(is_figure) {
            let found = format!("\"{}\" could not be read", self.notes.quote(range.clone()));
            let to_do = "it holds figures that may matter: fetch the text again";
            self.notes.error("advisory-unread-figures", range, found, to_do);
        } else if let Some(state) = self.body.states.last_mut() {
            let words: Vec<&str> =
                run.iter().map(|word| word.text.as_str()).filter(|word| *word != "NNNN").collect();
            let text = words.join(" ");
            if !text.trim().is_empty() {
                state.qualifier = text.trim().to_owned();
            }
        }
    }
}
