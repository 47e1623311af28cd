//! The door: any bytes in, an advisory or findings out.

use crate::advisory::forecast::Advisory;
use crate::advisory::kind::{Kind, Refused, recognise};
use crate::advisory::marine::{read_marine, second_centre};
use crate::advisory::marine_head::Title;
use crate::advisory::notes::Notes;
use crate::advisory::plausible::{Origin, check};
use crate::advisory::typed::read_typed;
use crate::advisory::words::{Word, decode};
use crate::finding::fault::{Finding, has_error, sort_findings};
use crate::finding::source::SourceText;

/// The longest file that is read, in bytes. A Forecast/Advisory has 1 to 4 kB.
pub const LONGEST: usize = 1024 * 1024;

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

/// Reads a forecast: a Forecast/Advisory text, or one typed in as TOML; `name` is the file's, "-" for standard input.
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
    let name = if name == "-" { "standard input" } else { name };
    let is_too_long = bytes.len() > LONGEST;
    let text = if is_too_long { String::new() } else { decode(bytes) };
    let source = SourceText::new(name, text);
    let mut notes = Notes::on(&source);
    let mut advisory = if is_too_long {
        let found = format!("the file has {} bytes; at most {LONGEST} are read", bytes.len());
        let to_do = "bring one advisory in a file of its own; such a text has 1 to 4 kB";
        notes.error("advisory-too-long", 0..0, found, to_do);
        None
    } else {
        read_text(&source, &mut notes)
    };
    let mut findings = notes.into_findings();
    sort_findings(&mut findings);
    if has_error(&findings) {
        advisory = None;
    }
    Reading { advisory, findings, source }
}

fn read_text(source: &SourceText, notes: &mut Notes) -> Option<Advisory> {
    let (advisory, origin) = match recognise(source.text()) {
        Kind::Marine(words, titles) => (read_one(&words, &titles, notes)?, Origin::Office),
        Kind::Typed => (read_typed(source.text(), notes)?, Origin::Typed),
        Kind::Other(refused) => {
            refuse(refused, notes);
            return None;
        }
    };
    Some(check(advisory, origin, notes))
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
    let to_do = "bring the Forecast/Advisory text (its title says \"FORECAST/ADVISORY NUMBER\"), or type the forecast in \
                 as TOML";
    notes.error(code, seen_at, format!("this looks like {looks_like}: {lacks}"), to_do);
}
