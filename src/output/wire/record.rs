//! The record in JSON.

use crate::output::record_lines::RecordLine;
use crate::output::setting::Setting;
use crate::output::wire::port::{PortOut, port};
use crate::output::wire::value::{SCHEMA, instant};
use crate::plan::news::news_words;
use crate::record::mention::{MentionKind, mentions};
use serde::{Deserialize, Serialize};

/// The record, or its end.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct RecordOut {
    /// Version of this form.
    pub schema: u32,
    /// "record".
    pub kind: String,
    /// The port.
    pub port: PortOut,
    /// The events in the order in which they were recorded.
    pub events: Vec<EventOut>,
}

/// An event.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct EventOut {
    /// Its number.
    pub number: usize,
    /// When the port knew it.
    pub known: String,
    /// When it was written down; null if the record is a text.
    pub recorded: Option<String>,
    /// Who says it, by title.
    pub by: String,
    /// That person's name; null if not said.
    pub name: Option<String>,
    /// In whose place; null if in none.
    pub on_behalf: Option<String>,
    /// How it is known, or why it is ordered; null if not said.
    pub reason: Option<String>,
    /// What it says, in words.
    pub words: String,
    /// What it names.
    pub names: Vec<NameOut>,
    /// Whether a later event takes it back.
    pub withdrawn: bool,
    /// Whether it waits for a second person.
    pub waiting: bool,
    /// The first digits of the chain's head after it; null if the record is a text.
    pub chain: Option<String>,
}

/// Something that an event names.
#[derive(Clone, Debug, PartialEq, Eq, Serialize, Deserialize)]
pub struct NameOut {
    /// "place", "stage", "task", "member", "file", "spot" or "ship".
    pub kind: String,
    /// Its id.
    pub id: String,
}

/// The record in JSON.
#[must_use]
pub fn record_out(lines: &[RecordLine], setting: &Setting) -> RecordOut {
    RecordOut {
        schema: SCHEMA,
        kind: "record".to_owned(),
        port: port(setting),
        events: lines.iter().map(|line| event_out(line, setting)).collect(),
    }
}

fn event_out(line: &RecordLine, setting: &Setting) -> EventOut {
    let event = &line.event;
    let said = |text: &str| (!text.is_empty()).then(|| text.to_owned());
    let names = mentions(event)
        .into_iter()
        .map(|mention| NameOut { kind: kind_key(mention.kind).to_owned(), id: mention.id.to_owned() });
    EventOut {
        number: event.number,
        known: instant(event.known),
        recorded: line.recorded.map(instant),
        by: event.by.clone(),
        name: said(&event.name),
        on_behalf: said(&event.on_behalf),
        reason: said(&event.reason),
        words: news_words(event, setting.clock),
        names: names.collect(),
        withdrawn: line.is_withdrawn,
        waiting: line.is_waiting,
        chain: said(&line.chain),
    }
}

fn kind_key(kind: MentionKind) -> &'static str {
    match kind {
        MentionKind::Place => "place",
        MentionKind::Stage => "stage",
        MentionKind::Task => "task",
        MentionKind::Member => "member",
        MentionKind::File => "file",
        MentionKind::Spot => "spot",
        MentionKind::Ship => "ship",
        MentionKind::Call => "call",
    }
}
