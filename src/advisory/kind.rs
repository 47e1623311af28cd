//! What a text looks like: which of our readers takes it, or what it is instead.

use crate::advisory::cursor::Cursor;
use crate::advisory::deck_rows::is_deck_line;
use crate::advisory::hurdat::is_track_head;
use crate::advisory::marine_head::{Title, titles};
use crate::advisory::words::{Word, cut};
use std::ops::Range;

/// What a text looks like.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Kind {
    /// A Forecast/Advisory text: its words and its titles.
    Marine(Vec<Word>, Vec<Title>),
    /// A forecast typed in as TOML.
    Typed,
    /// A deck: rows of many forecasts, or of a best track.
    Deck,
    /// Best tracks in the HURDAT2 layout.
    BestTracks,
    /// A joint warning centre's warning: its words.
    Joint(Vec<Word>),
    /// An advisory of RSMC Tokyo: its words.
    Tokyo(Vec<Word>),
    /// Something that is refused.
    Other(Refused),
}

/// A text that no reader takes.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Refused {
    /// The finding's code.
    pub code: &'static str,
    /// What it looks like: "a public advisory".
    pub looks_like: &'static str,
    /// Why that is not enough, or what it lacks.
    pub lacks: &'static str,
    /// The bytes that gave it away.
    pub seen_at: Range<usize>,
}

const FIGURES: &str = "it gives no wind radii by quadrant and no forecast positions with times in UTC";

/// Products that can be taken for a forecast: any of the phrases, code, what it is, what it lacks. The first that fits
/// counts.
const PRODUCTS: [(&[&str], &str, &str, &str); 8] = [
    (
        &["ICAO ADVISORY NUMBER", "TC ADVISORY DTG:", "TCAC:", "FCST PSN"],
        "advisory-other-product",
        "an advisory for aviation",
        "it reaches only 24 h ahead and gives no wind radii",
    ),
    (
        &["DISCUSSION NUMBER", "FORECAST DISCUSSION", "PROGNOSTIC REASONING"],
        "advisory-other-product",
        "a forecaster's discussion",
        FIGURES,
    ),
    (
        &["WIND SPEED PROBABILITIES", "PROBABILITIES NUMBER"],
        "advisory-other-product",
        "the official table of wind speed probabilities",
        "it gives chances at named places, not the storm's track and radii; it can stand beside a forecast",
    ),
    (
        &["JOINT TYPHOON", "WARNING NR", "PGTW", "END PART"],
        "advisory-other-product",
        "a part of a joint warning, or another text of that centre",
        "it has no warning position with forecasts behind it",
    ),
    (
        &["RSMC TROPICAL CYCLONE", "SUBJECTIVE FORECAST", "PSTN", "MXWD", "INITIAL TIME"],
        "advisory-other-centre",
        "an advisory of a regional centre in its own layout",
        "of those only RSMC Tokyo's is read",
    ),
    (
        &["TROPICAL CYCLONE UPDATE", "POSITION ESTIMATE", "TROPICAL CYCLONE POSITION"],
        "advisory-other-product",
        "an update between advisories",
        "it gives the present state only",
    ),
    (
        &[
            "TROPICAL WEATHER OUTLOOK",
            "HIGH SEAS FORECAST",
            "OFFSHORE WATERS FORECAST",
            "COASTAL WATERS FORECAST",
        ],
        "advisory-other-product",
        "an outlook or a marine area forecast",
        FIGURES,
    ),
    (
        &["BULLETIN", "INTERMEDIATE ADVISORY NUMBER", "ADVISORY NUMBER", "PUBLIC ADVISORY"],
        "advisory-other-product",
        "a public advisory",
        FIGURES,
    ),
];

/// Says what `text` looks like; never fails.
#[must_use]
pub fn recognise(text: &str) -> Kind {
    let trimmed = text.trim_start_matches(|c: char| c.is_whitespace() || c == '\u{FEFF}');
    let first = text.len() - trimmed.len();
    let first_line = first..first + trimmed.find('\n').unwrap_or(trimmed.len()).min(60);
    let refuse = |code, looks_like, lacks| {
        Kind::Other(Refused { code, looks_like, lacks, seen_at: first_line.clone() })
    };
    if trimmed.trim_end().is_empty() {
        return refuse("advisory-empty", "an empty file", "there is nothing to read");
    }
    if let Some(what) = binary(text) {
        return refuse("advisory-binary", what, "only plain text can be read");
    }
    if is_web_page(trimmed) {
        return web_page(text).unwrap_or_else(|| {
            let lacks = "no part of it set as plain text (\"pre\") holds one Forecast/Advisory";
            refuse("advisory-web-page", "a web page", lacks)
        });
    }
    if trimmed.starts_with('<') {
        // A news feed of an office holds the text as a web page does.
        return web_page(text)
            .unwrap_or_else(|| refuse("advisory-data-format", "an XML document", "that format is not read"));
    }
    if is_json(trimmed) {
        return refuse("advisory-data-format", "a JSON document", "that format is not read");
    }
    if is_toml(trimmed) {
        return Kind::Typed;
    }
    if first_lines(trimmed).any(is_track_head) {
        return Kind::BestTracks;
    }
    if first_lines(trimmed).any(is_deck_line) {
        return Kind::Deck;
    }
    let words = cut(text, 0..text.len(), false);
    let titles = marine_titles(&words);
    let says = |phrase| holds(&words, phrase).is_some();
    if !titles.is_empty() {
        Kind::Marine(words, titles)
    } else if says("WARNING POSITION") && says("WARNING NR") && !says("PROGNOSTIC REASONING") {
        Kind::Joint(words)
    } else if says("RSMC TROPICAL CYCLONE ADVISORY") && says("PSTN") {
        Kind::Tokyo(words)
    } else {
        Kind::Other(product(&words, first_line))
    }
}

/// Whether a file is a deck or holds best tracks, which may be longer than texts.
#[must_use]
pub fn begins_like_a_deck(bytes: &[u8]) -> bool {
    let start = String::from_utf8_lossy(bytes.get(..bytes.len().min(1000)).unwrap_or(bytes));
    first_lines(&start).any(|line| is_track_head(line) || is_deck_line(line))
}

/// The very first lines of a deck may be lost or damaged: one of several is enough to know it.
fn first_lines(text: &str) -> impl Iterator<Item = &str> {
    text.lines().map(str::trim).filter(|line| !line.is_empty()).take(5)
}

/// The titles, if they are those of a Forecast/Advisory.
///
/// "ADVISORY NUMBER" alone heads public advisories too, and did head forecasts in 1994: then the forecast's own key words
/// must be there.
fn marine_titles(words: &[Word]) -> Vec<Title> {
    let mut titles = titles(words);
    let has_forecast = holds(words, "CENTER LOCATED NEAR").is_some()
        && (holds(words, "FORECAST VALID").is_some() || holds(words, "OUTLOOK VALID").is_some());
    titles.retain(|title| {
        let cursor = Cursor::new(words, title.at);
        let is_aviation = title.at > 0 && Cursor::new(words, title.at - 1).sees("ICAO");
        !is_aviation && (!cursor.sees("ADVISORY NUMBER") || has_forecast)
    });
    titles
}

fn product(words: &[Word], first_line: Range<usize>) -> Refused {
    let known = PRODUCTS.iter().find_map(|(phrases, code, looks_like, lacks)| {
        let seen_at = phrases.iter().find_map(|phrase| holds(words, phrase))?;
        Some(Refused { code, looks_like, lacks, seen_at })
    });
    known.unwrap_or(Refused {
        code: "advisory-unknown-text",
        looks_like: "a text of an unknown kind",
        lacks: "it has no title with \"FORECAST/ADVISORY NUMBER\"",
        seen_at: first_line,
    })
}

/// The bytes where `phrase` first stands; commas and colons at the end of words do not matter.
fn holds(words: &[Word], phrase: &str) -> Option<Range<usize>> {
    let parts: Vec<&str> = phrase.split(' ').collect();
    let found = words.windows(parts.len()).find(|window| {
        window.iter().zip(&parts).all(|(word, part)| {
            word.text == *part || word.text.strip_suffix([',', ':']).is_some_and(|text| text == *part)
        })
    })?;
    Some(found.first()?.range.start..found.last()?.range.end)
}

/// What kind of binary file this is; `None` for a text.
fn binary(text: &str) -> Option<&'static str> {
    let known =
        [("%PDF", "a PDF document"), ("PK\u{3}\u{4}", "a packed archive"), ("\u{89}PNG", "a picture")];
    if let Some((_, what)) = known.iter().find(|(start, _)| text.starts_with(start)) {
        return Some(what);
    }
    let odd = text
        .chars()
        .filter(|c| {
            (c.is_control() && !c.is_whitespace() && *c != '\u{1}' && *c != '\u{3}') || *c == '\u{FFFD}'
        })
        .count();
    // Our choice: a stray control byte is transmission noise; one character in twenty is no text.
    (odd * 20 > text.chars().count()).then_some("a file that is no text")
}

fn is_web_page(trimmed: &str) -> bool {
    let start: String = trimmed.chars().take(2000).collect::<String>().to_ascii_lowercase();
    start.starts_with('<')
        && ["<!doctype html", "<html", "<head", "<body", "<pre", "<div", "<p>"]
            .iter()
            .any(|tag| start.contains(tag))
}

/// The one "pre" part of a web page, or of a news feed, that holds one Forecast/Advisory.
fn web_page(text: &str) -> Option<Kind> {
    let lower = text.to_ascii_lowercase();
    let mut found = Vec::new();
    let mut from = 0;
    while let Some(open) = lower.get(from..).and_then(|rest| rest.find("<pre")).map(|at| from + at) {
        let close = lower.get(open..).and_then(|rest| rest.find("</pre")).map_or(text.len(), |at| open + at);
        let words = cut(text, open..close, true);
        let titles = marine_titles(&words);
        if !titles.is_empty() {
            found.push(Kind::Marine(words, titles));
        }
        from = close.max(open + 4);
    }
    if found.len() == 1 { found.pop() } else { None }
}

fn is_json(trimmed: &str) -> bool {
    let mut characters = trimmed.chars().filter(|c| !c.is_whitespace());
    match characters.next() {
        Some('{') => true,
        // "[[name]]" is a TOML table; a JSON list holds something quoted, a number or an object.
        Some('[') => characters.next().is_some_and(|c| matches!(c, '{' | '"' | ']') || c.is_ascii_digit()),
        _ => false,
    }
}

/// Whether the first line that is no comment is a TOML table head or a key with a value.
fn is_toml(trimmed: &str) -> bool {
    let line = trimmed.lines().map(str::trim).find(|line| !line.is_empty() && !line.starts_with('#'));
    let Some(line) = line else { return trimmed.starts_with('#') };
    let is_key = |text: &str| {
        let text = text.trim().trim_matches('"');
        !text.is_empty()
            && text.chars().all(|c| c.is_ascii_alphanumeric() || matches!(c, '_' | '-' | '.' | ' '))
    };
    let head = line.strip_prefix('[').map(|rest| rest.trim_start_matches('['));
    let is_head = head.and_then(|head| head.split_once(']')).is_some_and(|(name, _)| is_key(name));
    is_head || line.split_once('=').is_some_and(|(key, _)| is_key(key) && !key.trim().contains(' '))
}
