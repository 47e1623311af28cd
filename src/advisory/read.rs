//! The door: any bytes in, an advisory or findings out.

use crate::advisory::choice::{Choice, cycle_text, matches_storm};
use crate::advisory::deck::read_deck;
use crate::advisory::forecast::Advisory;
use crate::advisory::hurdat::read_hurdat;
use crate::advisory::joint::read_joint;
use crate::advisory::kind::{Kind, Refused, begins_like_a_deck, recognise};
use crate::advisory::marine::{read_marine, second_centre};
use crate::advisory::marine_head::Title;
use crate::advisory::notes::Notes;
use crate::advisory::plausible::{Origin, check};
use crate::advisory::tokyo::read_tokyo;
use crate::advisory::typed::read_typed;
use crate::advisory::words::{Word, decode};
use crate::finding::fault::{Finding, has_error, sort_findings};
use crate::finding::source::SourceText;

/// The longest text that is read, in bytes. A Forecast/Advisory has 1 to 4 kB.
pub const LONGEST: usize = 1024 * 1024;
/// The longest deck or file of best tracks: one of all Atlantic storms since 1851 has 7 MB, a long storm's deck with every
/// technique somewhat more.
pub const LONGEST_DECK: usize = 16 * 1024 * 1024;

/// What reading gave.
#[derive(Clone, Debug, PartialEq)]
pub struct Reading {
    /// The advisory; `None` if any finding is an error, as half of an advisory is never planned on.
    pub advisory: Option<Advisory>,
    /// All findings, in the order of the text; warnings leave the advisory usable.
    pub findings: Vec<Finding>,
    /// The text as it was read, for showing the findings in it.
    pub source: SourceText,
}

/// Reads a forecast: an office's text, a deck, a best track for a drill, or one typed in as TOML; `name` is the file's,
/// "-" for standard input.
///
/// Any bytes may come in. Whatever is no such forecast is refused by a finding that says what it looks like and what is
/// needed instead.
///
/// ```
/// use snugdown::advisory::read::read_forecast;
/// let reading = read_forecast("mail.txt", b"Dear harbour master, a storm is coming.");
/// assert!(reading.advisory.is_none());
/// assert_eq!(reading.findings[0].code, "advisory-unknown-text");
/// ```
#[must_use]
pub fn read_forecast(name: &str, bytes: &[u8]) -> Reading {
    read_chosen(name, bytes, &Choice::default())
}

/// Reads the chosen one of the forecasts that a file holds; a file with one forecast is read whatever is chosen, if it is
/// of the storm, technique and base time that were chosen.
#[must_use]
pub fn read_chosen(name: &str, bytes: &[u8], choice: &Choice) -> Reading {
    let name = if name == "-" { "standard input" } else { name };
    let longest = if begins_like_a_deck(bytes) { LONGEST_DECK } else { LONGEST };
    let is_too_long = bytes.len() > longest;
    let text = if is_too_long { String::new() } else { decode(bytes) };
    let source = SourceText::new(name, text);
    let mut notes = Notes::on(&source);
    let mut advisory = if is_too_long {
        let found = format!("the file has {} bytes; at most {longest} are read", bytes.len());
        let to_do = "bring one advisory in a file of its own; such a text has 1 to 4 kB";
        notes.error("advisory-too-long", 0..0, found, to_do);
        None
    } else {
        read_text(&source, choice, &mut notes)
    };
    let mut findings = notes.into_findings();
    sort_findings(&mut findings);
    if has_error(&findings) {
        advisory = None;
    }
    Reading { advisory, findings, source }
}

fn read_text(source: &SourceText, choice: &Choice, notes: &mut Notes) -> Option<Advisory> {
    let text = source.text();
    let (advisory, origin) = match recognise(text) {
        Kind::Marine(words, titles) => (read_one(&words, &titles, notes)?, Origin::Office),
        Kind::Typed => (read_typed(text, notes)?, Origin::Typed),
        Kind::Deck => (read_deck(text, choice, notes)?, Origin::Office),
        Kind::BestTracks => (read_hurdat(text, choice, notes)?, Origin::Office),
        Kind::Joint(words) => (read_joint(&words, choice, notes)?, Origin::Office),
        Kind::Tokyo(words) => (read_tokyo(&words, choice, notes)?, Origin::Office),
        Kind::Other(refused) => {
            refuse(refused, notes);
            return None;
        }
    };
    is_as_chosen(&advisory, choice, notes);
    Some(check(advisory, origin, notes))
}

/// A choice that the forecast read does not fit: the file is another one than was meant.
fn is_as_chosen(advisory: &Advisory, choice: &Choice, notes: &mut Notes) {
    let storm = &advisory.storm;
    let is_storm = choice
        .storm
        .as_deref()
        .is_none_or(|wanted| matches_storm(wanted, storm.id.as_deref().unwrap_or(""), &storm.name));
    let is_cycle = choice.cycle.is_none_or(|cycle| cycle == advisory.base);
    if is_storm && is_cycle {
        return;
    }
    let found = format!(
        "the file holds {} of {}, and {choice} was chosen",
        storm.id.as_deref().unwrap_or(&storm.name),
        cycle_text(advisory.base)
    );
    notes.error("advisory-not-chosen", 0..0, found, "choose what the file holds, or name another file");
}

/// Reads the one advisory of a text; two in one file are an error, as nobody could say which of them was read.
fn read_one(words: &[Word], titles: &[Title], notes: &mut Notes) -> Option<Advisory> {
    let title = titles.first()?;
    if titles.len() > 1
        && let Some(second) = second_centre(words, title.at)
    {
        let found = "a second advisory begins before this in the same file".to_owned();
        notes.error("advisory-two-in-one", second, found, "put each advisory in a file of its own");
        return None;
    }
    read_marine(words, *title, notes)
}

fn refuse(refused: Refused, notes: &mut Notes) {
    let Refused { code, looks_like, lacks, seen_at } = refused;
    let to_do = "bring a Forecast/Advisory text (its title says \"FORECAST/ADVISORY NUMBER\"), a joint warning, an \
                 advisory of RSMC Tokyo or a deck, or type the forecast in as TOML";
    notes.error(code, seen_at, format!("this looks like {looks_like}: {lacks}"), to_do);
}
