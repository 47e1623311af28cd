//! The body of a Forecast/Advisory, sentence by sentence.
//!
//! Each kind of sentence has one recogniser, which begins at its key words and takes what belongs to it; so line ends,
//! blanks and final stops do not matter. Between the sentences of the wind and the track nothing may stand that looks
//! like a figure: what no recogniser takes is never passed over silently.

use crate::advisory::cursor::{Cursor, is_coordinate, is_numeric, is_quadrant_distance};
use crate::advisory::forecast::{Motion, Quadrants, Seas};
use crate::advisory::marine_state::{Body, State, is_at_key, take_motion, take_qualifier, take_seas_height};
use crate::advisory::notes::Notes;
use crate::advisory::reach_rule::threshold;
use crate::advisory::words::{DOTS, Word};
use crate::units::length::NauticalMiles;
use crate::units::pressure::HectoPascals;
use crate::units::speed::Knots;
use std::ops::Range;

/// Reads the body from word `from` on.
#[must_use]
pub fn read_body(words: &[Word], from: usize, notes: &mut Notes) -> Body {
    let mut reader =
        Reader { cursor: Cursor::new(words, from), words, notes, body: Body::default(), is_tail: false };
    if reader.find_centre() {
        let is_ended = reader.read_sentences();
        reader.check_end(is_ended);
    }
    reader.body
}

const DAMAGED: &str = "fetch the text again: a line is damaged or missing here";

struct Reader<'a, 'n, 's> {
    cursor: Cursor<'a>,
    words: &'a [Word],
    notes: &'n mut Notes<'s>,
    body: Body,
    /// Past the sentences of wind and track: free words are expected.
    is_tail: bool,
}

impl Reader<'_, '_, '_> {
    /// Goes to the sentence of the centre; watches and warnings before it are free words and never read.
    fn find_centre(&mut self) -> bool {
        let from = self.cursor.at();
        while !self.cursor.is_done() {
            let at = self.cursor.at();
            // "DISSIPATING NEAR" stands in some last advisories; free words may say it too, but without a position.
            let mut ahead = self.cursor.clone();
            let is_dissipating = ahead.take("DISSIPATING NEAR") && ahead.position().is_some();
            if self.cursor.take_any(&["CENTER LOCATED NEAR", "CENTER LOCATED INLAND NEAR"])
                || (is_dissipating && self.cursor.take("DISSIPATING NEAR"))
            {
                let position = self.cursor.position();
                let valid = if self.cursor.take("AT") { self.cursor.day_time() } else { None };
                let range = self.cursor.range_since(at);
                if let (Some(position), Some(valid)) = (position, valid) {
                    self.body.states.push(State::new(valid, range, Some(position)));
                    return true;
                }
                let found = format!("the centre is not readable in \"{}\"", self.notes.quote(range.clone()));
                let to_do =
                    "it must read as \"CENTER LOCATED NEAR 28.3N  94.7W AT 05/1900Z\": fetch the text again";
                self.notes.error("advisory-centre", range, found, to_do);
                return false;
            }
            self.cursor.skip(1);
        }
        let range = Cursor::new(self.words, from).range_since(from);
        self.notes.error(
            "advisory-centre",
            range,
            "no sentence \"CENTER LOCATED NEAR ...\" says where the storm is".to_owned(),
            "bring the whole text as issued",
        );
        false
    }

    /// Reads to the end mark; whether there was one.
    fn read_sentences(&mut self) -> bool {
        let mut is_ended = false;
        let mut free_from = self.cursor.at();
        while !self.cursor.is_done() {
            let at = self.cursor.at();
            let was_tail = self.is_tail;
            if self.cursor.take_any(&["$$", "NNNN", "FORECASTER"]) {
                self.free_words(free_from, at, was_tail);
                return true;
            }
            if self.sentence() {
                self.free_words(free_from, at, was_tail);
                free_from = self.cursor.at();
                is_ended |= self.body.next_due.is_some() || self.body.is_last;
            } else {
                self.cursor.skip(1);
            }
        }
        self.free_words(free_from, self.cursor.at(), self.is_tail);
        is_ended
    }

    fn sentence(&mut self) -> bool {
        self.repeat()
            || self.base()
            || self.accuracy()
            || self.motion()
            || self.pressure()
            || self.wind()
            || self.radii()
            || self.explanation()
            || self.forecast()
            || self.outlook_note()
            || self.tail()
    }

    /// "REPEAT...CENTER LOCATED NEAR 28.3N  94.7W AT 05/1900Z".
    fn repeat(&mut self) -> bool {
        let at = self.cursor.at();
        if !(self.cursor.take("REPEAT ... CENTER LOCATED NEAR")
            || self.cursor.take("REPEAT CENTER LOCATED NEAR"))
        {
            return false;
        }
        let position = self.cursor.position();
        let valid = if self.cursor.take("AT") { self.cursor.day_time() } else { None };
        let is_same =
            self.body.states.first().is_some_and(|now| now.position == position && Some(now.valid) == valid);
        if !is_same {
            let range = self.cursor.range_since(at);
            let found =
                format!("\"{}\" differs from the centre given above", self.notes.quote(range.clone()));
            let to_do = "the first one is used: ask the office which of the two holds";
            self.notes.warning("advisory-repeat-differs", range, found, to_do);
        }
        true
    }

    /// "AT 05/1800Z CENTER WAS LOCATED NEAR 28.1N  94.7W".
    fn base(&mut self) -> bool {
        let mut ahead = self.cursor.clone();
        if !ahead.take("AT") {
            return false;
        }
        let Some(valid) = ahead.day_time() else { return false };
        if !ahead.take("CENTER WAS LOCATED NEAR") {
            return false;
        }
        let position = ahead.position();
        self.cursor = ahead;
        self.body.base = position.map(|position| (valid, position));
        true
    }

    /// "POSITION ACCURATE WITHIN  30 NM", to which 1991 adds by what it was found.
    fn accuracy(&mut self) -> bool {
        if !self.cursor.take("POSITION ACCURATE WITHIN") {
            return false;
        }
        self.body.accuracy = self.cursor.quantity("NM").and_then(|miles| NauticalMiles::new(miles).ok());
        if self.cursor.take("BASED ON") {
            self.skip_free(12);
        }
        true
    }

    /// "PRESENT MOVEMENT TOWARD THE NORTH OR 360 DEGREES AT  11 KT", "PRESENTLY THREE-C IS NEARLY STATIONARY".
    fn motion(&mut self) -> bool {
        let at = self.cursor.at();
        if !self.cursor.take_any(&["PRESENT MOVEMENT", "PRESENTLY"]) {
            return false;
        }
        let stops = ["ESTIMATED", "EYE", "MAX", "REPEAT", "POSITION"];
        for _ in 0..16 {
            if self.cursor.is_done() || stops.contains(&self.cursor.peek(0)) {
                break;
            }
            if self.cursor.take("STATIONARY") {
                self.body.motion = Some(Motion::Stationary);
                return true;
            }
            if let Some(motion) = take_motion(&mut self.cursor) {
                self.body.motion = Some(motion);
                return true;
            }
            self.cursor.skip(1);
        }
        let range = self.cursor.range_since(at);
        let found = format!("no direction and speed in \"{}\"", self.notes.quote(range.clone()));
        let to_do = "the forecast positions are used as they are; check the present motion";
        self.notes.warning("advisory-no-motion", range, found, to_do);
        true
    }

    /// "ESTIMATED MINIMUM CENTRAL PRESSURE 1004 MB", "EYE DIAMETER  15 NM".
    fn pressure(&mut self) -> bool {
        let at = self.cursor.at();
        if self.cursor.take("EYE DIAMETER") {
            self.cursor.quantity("NM");
            return true;
        }
        if !self.cursor.take("ESTIMATED MINIMUM CENTRAL PRESSURE") {
            return false;
        }
        let value = self.cursor.quantity("MB");
        self.body.pressure = value.and_then(|hpa| HectoPascals::new(hpa).ok());
        if self.body.pressure.is_none() {
            let range = self.cursor.range_since(at);
            let found =
                format!("\"{}\" holds no pressure between 800 and 1100 MB", self.notes.quote(range.clone()));
            self.notes.warning(
                "advisory-pressure",
                range,
                found,
                "it is taken as not given; check the figure",
            );
        }
        true
    }

    /// "MAX SUSTAINED WINDS  50 KT WITH GUSTS TO  60 KT.", "MAX WIND  45 KT...GUSTS  55 KT."
    fn wind(&mut self) -> bool {
        let at = self.cursor.at();
        if !self.cursor.take_any(&["MAX SUSTAINED WINDS", "MAX SUSTAINED WIND", "MAX WINDS", "MAX WIND"]) {
            return false;
        }
        let knots = |value: Option<f64>| value.and_then(|value| Knots::new(value).ok());
        let wind = knots(self.cursor.quantity("KT"));
        self.cursor.take_dots();
        self.cursor.take("WITH");
        let says_gusts = self.cursor.take("GUSTS");
        self.cursor.take("TO");
        let gust = if says_gusts { knots(self.cursor.quantity("KT")) } else { None };
        self.cursor.take("NEAR THE CENTER");
        let range = self.cursor.range_since(at);
        let quote = self.notes.quote(range.clone());
        let Some(state) = self.body.states.last_mut() else { return true };
        let found = if wind.is_none() || (says_gusts && gust.is_none()) {
            format!("no readable wind in \"{quote}\"")
        } else if state.wind.is_some() {
            format!("a second \"{quote}\" for one time")
        } else {
            (state.wind, state.gust) = (wind, gust);
            return true;
        };
        state.is_damaged = true;
        self.notes.error("advisory-wind", range, found, DAMAGED);
        self.skip_damaged();
        true
    }

    /// "34 KT....... 60NE  60SE  60SW  60NW.", "RADIUS IN NM OF 34 KT WINDS ...", and the seas that look alike.
    fn radii(&mut self) -> bool {
        let at = self.cursor.at();
        let mut ahead = self.cursor.clone();
        let is_named = ahead.take("RADIUS IN NM OF");
        let wind = ahead.quantity("KT");
        let height = if wind.is_none() { take_seas_height(&mut ahead) } else { None };
        let is_seas = height.is_some() && ahead.take("SEAS");
        if !is_seas && wind.is_none() {
            return false;
        }
        ahead.take_any(&["WINDS", "WIND"]);
        ahead.take_any(&["OR HIGHER", "OR GREATER"]);
        ahead.take_dots();
        if !is_named && !is_seas && !is_quadrant_distance(ahead.peek(0)) {
            return false;
        }
        let quadrants = ahead.quadrants();
        self.cursor = ahead;
        let range = self.cursor.range_since(at);
        let seas = height.filter(|_| is_seas);
        match (quadrants, seas, wind.and_then(threshold)) {
            (None, _, _) => self.no_quadrants(is_seas, range),
            (Some(reach), Some(height), _) => {
                if let Some(state) = self.body.states.last_mut() {
                    state.seas.get_or_insert(Seas { height, reach });
                }
            }
            (Some(_), None, None) => {
                let found = format!("radii of another wind: \"{}\"", self.notes.quote(range.clone()));
                let to_do = "only those of 34, 50 and 64 kt are used";
                self.notes.warning("advisory-radius-speed", range, found, to_do);
            }
            (Some(quadrants), None, Some(index)) => self.keep_radii(index, quadrants, range),
        }
        true
    }

    fn no_quadrants(&mut self, is_seas: bool, range: Range<usize>) {
        let found = format!("\"{}\" does not give four radii", self.notes.quote(range.clone()));
        let to_do = "each of NE, SE, SW and NW must stand there once: fetch the text again";
        if is_seas {
            self.notes.warning("advisory-seas", range, found, to_do);
        } else {
            self.notes.error("advisory-radii", range, found, to_do);
        }
        self.skip_damaged();
    }

    fn keep_radii(&mut self, index: usize, quadrants: Quadrants, range: Range<usize>) {
        let slot = self.body.states.last_mut().and_then(|state| state.radii.get_mut(index));
        match slot {
            Some(slot @ None) => *slot = Some((quadrants, range)),
            _ => {
                let found = format!("\"{}\" stands twice for one time", self.notes.quote(range.clone()));
                self.notes.error("advisory-radii", range, found, DAMAGED);
            }
        }
    }

    /// What the radii mean, in the words of 1998 and of today: nothing to keep.
    fn explanation(&mut self) -> bool {
        let is_here = self.cursor.take_any(&[
            "WINDS AND SEAS VARY GREATLY IN EACH QUADRANT",
            "ALL QUADRANT RADII IN NAUTICAL MILES",
        ]);
        if is_here {
            self.cursor
                .take("RADII IN NAUTICAL MILES ARE THE LARGEST RADII EXPECTED ANYWHERE IN THAT QUADRANT");
        }
        is_here
    }

    /// "FORECAST VALID 06/0600Z 30.1N  94.2W...INLAND", "OUTLOOK VALID 22/1800Z...DISSIPATED".
    fn forecast(&mut self) -> bool {
        let at = self.cursor.at();
        if !self.cursor.take_any(&["FORECAST VALID", "OUTLOOK VALID"]) {
            return false;
        }
        self.is_tail = false;
        let valid = self.cursor.day_time();
        let position = self.cursor.position();
        let starts_like_position = position.is_none() && is_numeric(self.cursor.peek(0));
        let range = self.cursor.range_since(at);
        let quote = self.notes.quote(range.clone());
        let qualifier = take_qualifier(&mut self.cursor);
        let to_do = "it must read as \"FORECAST VALID 06/0600Z 30.1N  94.2W\": fetch the text again";
        let Some(valid) = valid else {
            self.notes.error("advisory-valid-time", range, format!("no readable time in \"{quote}\""), to_do);
            return true;
        };
        if starts_like_position || (position.is_none() && qualifier.is_empty()) {
            let found = format!("no readable position in \"{quote}\"");
            self.notes.error("advisory-position", range.clone(), found, to_do);
        }
        self.body.states.push(State { qualifier, ..State::new(valid, range, position) });
        true
    }

    /// "EXTENDED OUTLOOK. NOTE...ERRORS FOR TRACK HAVE AVERAGED NEAR 150 NM ON DAY 4 AND 200 NM ON DAY 5..."
    fn outlook_note(&mut self) -> bool {
        if !self.cursor.take("EXTENDED OUTLOOK") {
            return false;
        }
        self.is_tail = true;
        let mut ahead = self.cursor.clone();
        if ahead.seek("HAVE AVERAGED NEAR", 12) && ahead.take("HAVE AVERAGED NEAR") {
            let miles = |cursor: &mut Cursor| NauticalMiles::new(cursor.quantity("NM")?).ok();
            let day_4 = miles(&mut ahead);
            let is_both = ahead.take("ON DAY 4 AND");
            let day_5 = miles(&mut ahead);
            if is_both && ahead.take("ON DAY 5") {
                self.body.quoted_track_errors = day_4.zip(day_5);
            }
        }
        self.skip_free(60);
        true
    }

    /// Requests to ships, the next advisory, the last advisory, intermediate bulletins: then free words may follow.
    fn tail(&mut self) -> bool {
        let at = self.cursor.at();
        if self.cursor.take("REQUEST FOR") {
            self.skip_free(16);
        } else if self.cursor.take("NEXT ADVISORY") {
            self.cursor.take("AT");
            self.body.next_due = self.cursor.day_time();
            if self.body.next_due.is_none() {
                let range = self.cursor.range_since(at);
                let found = format!("no readable time in \"{}\"", self.notes.quote(range.clone()));
                let to_do = "the time of the next advisory is taken as not stated";
                self.notes.warning("advisory-next-due", range, found, to_do);
            }
        } else if self.cursor.take("THIS IS THE LAST") {
            self.body.is_last = true;
        } else if !self.cursor.take("INTERMEDIATE PUBLIC ADVISORY") {
            return false;
        }
        self.is_tail = true;
        true
    }

    /// Passes over what is left of a damaged line, up to the next sentence or line of radii.
    fn skip_damaged(&mut self) {
        for _ in 0..12 {
            let mut ahead = self.cursor.clone();
            let is_radii = ahead.quantity("KT").is_some() && {
                ahead.take_dots();
                is_quadrant_distance(ahead.peek(0))
            };
            let is_seas = self.cursor.peek(2) == "SEAS" || self.cursor.sees("RADIUS IN NM OF");
            if self.cursor.is_done() || is_at_key(&self.cursor) || is_radii || is_seas {
                return;
            }
            self.cursor.skip(1);
        }
    }

    /// Passes over free words up to the next key words, at most `most`.
    fn skip_free(&mut self, most: usize) {
        for _ in 0..most {
            if self.cursor.is_done() || is_at_key(&self.cursor) {
                return;
            }
            self.cursor.skip(1);
        }
    }

    /// Words that no recogniser took: figures among them are an error, other words a warning, and in the tail neither.
    fn free_words(&mut self, from: usize, to: usize, is_tail: bool) {
        let Some(run) = self.words.get(from..to).filter(|run| !run.is_empty()) else { return };
        let range = Cursor::new(self.words, to).range_since(from);
        let is_radius = |word: &Word| is_quadrant_distance(&word.text);
        let is_figure =
            |word: &Word| is_coordinate(&word.text) || is_radius(word) || word.text.ends_with("KT");
        let holds_figures = if is_tail { run.iter().any(is_radius) } else { run.iter().any(is_figure) };
        let found = || format!("\"{}\" could not be read", self.notes.quote(range.clone()));
        if holds_figures {
            let (found, to_do) = (found(), "it holds figures that may matter: fetch the text again");
            self.notes.error("advisory-unread-figures", range, found, to_do);
        } else if !is_tail && run.iter().any(|word| word.text != DOTS) {
            let (found, to_do) = (found(), "it holds no figures of wind or track and was left out");
            self.notes.warning("advisory-unread-words", range, found, to_do);
        }
    }

    fn check_end(&mut self, is_ended: bool) {
        if is_ended {
            return;
        }
        let last = self.words.len().saturating_sub(1);
        let range = Cursor::new(self.words, last).range_since(last);
        self.notes.error(
            "advisory-truncated",
            range,
            "the text stops before its end: no next advisory, no \"$$\", no forecaster's name".to_owned(),
            "fetch the whole text",
        );
    }
}
