//! An event that a command is about to record: written as events.toml has it, so that it goes through the same reader.

use crate::finding::source::SourceText;
use std::fmt::Write;
use toml::{Table, Value};

/// What the event says: its key, and the values under it.
#[derive(Clone, Debug, PartialEq)]
pub struct Draft {
    key: &'static str,
    values: Table,
    /// Whether it waits for a second person.
    pub awaits_second: bool,
}

impl Draft {
    /// An event under its key of events.toml.
    #[must_use]
    pub fn of(key: &'static str) -> Draft {
        Draft { key, values: Table::new(), awaits_second: false }
    }

    /// With a value.
    #[must_use]
    pub fn with(mut self, key: &str, value: impl Into<Value>) -> Draft {
        self.values.insert(key.to_owned(), value.into());
        self
    }

    /// With a value if it was given.
    #[must_use]
    pub fn maybe(self, key: &str, value: Option<impl Into<Value>>) -> Draft {
        match value {
            Some(value) => self.with(key, value),
            None => self,
        }
    }

    /// Waiting for a second person, if the rules ask for one.
    #[must_use]
    pub fn awaiting_second(self, awaits_second: bool) -> Draft {
        Draft { awaits_second, ..self }
    }
}

/// Who says it, and why; each as it was typed.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Voice {
    /// When it is known, with its offset.
    pub at: String,
    /// By title.
    pub by: String,
    /// That person's name.
    pub name: Option<String>,
    /// In whose place.
    pub on_behalf: Option<String>,
    /// How it is known, or why it is ordered.
    pub reason: Option<String>,
}

/// The events as a text, so that a finding can point at what was typed.
#[must_use]
pub fn text_of(drafts: &[Draft], voice: &Voice) -> SourceText {
    let mut text = String::new();
    for draft in drafts {
        let mut head = Table::new();
        head.insert("at".to_owned(), voice.at.clone().into());
        head.insert("by".to_owned(), voice.by.clone().into());
        let given = [("name", &voice.name), ("for", &voice.on_behalf), ("reason", &voice.reason)];
        for (key, value) in given {
            if let Some(value) = value {
                head.insert(key.to_owned(), value.clone().into());
            }
        }
        if draft.awaits_second {
            head.insert("awaits_second".to_owned(), true.into());
        }
        head.insert(draft.key.to_owned(), Value::Table(draft.values.clone()));
        text.push_str("[[event]]\n");
        for (key, value) in head {
            let _ = writeln!(text, "{key} = {value}");
        }
    }
    SourceText::new("the command line", text)
}
