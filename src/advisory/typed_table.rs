//! One table of a typed-in file, read key by key so that every fault in it is found at once.
//!
//! Deserialising into a struct would stop at the first wrong type or unknown key; a duty officer who types a forecast at
//! night should see all of them together.

use crate::advisory::notes::Notes;
use crate::finding::fault::{Finding, nearest};
use std::ops::Range;
use toml::Spanned;
use toml::de::{DeTable, DeValue};

/// A table with the name people know it by.
#[derive(Clone, Debug)]
pub struct Section<'t> {
    entries: Option<&'t DeTable<'t>>,
    /// `[now]`, for messages.
    pub title: &'static str,
    /// The bytes of its head.
    pub range: Range<usize>,
}

impl<'t> Section<'t> {
    /// The file itself, whose entries are its tables.
    #[must_use]
    pub fn file(table: &'t Spanned<DeTable<'t>>) -> Section<'t> {
        Section { entries: Some(table.get_ref()), title: "the file", range: 0..0 }
    }

    /// The table `key` of this one; an empty one if it is not there.
    pub fn table(&self, key: &str, title: &'static str, notes: &mut Notes) -> Section<'t> {
        let empty = Section { entries: None, title, range: self.range.clone() };
        let Some((name, value)) = self.entry(key) else { return empty };
        match value.get_ref() {
            DeValue::Table(entries) => Section { entries: Some(entries), title, range: name },
            _ => {
                wrong_type(key, "a table", value, notes);
                empty
            }
        }
    }

    /// The tables of the list `key`, in order.
    pub fn tables(&self, key: &str, title: &'static str, notes: &mut Notes) -> Vec<Section<'t>> {
        let Some((_, value)) = self.entry(key) else { return Vec::new() };
        let DeValue::Array(items) = value.get_ref() else {
            wrong_type(key, "a list of tables", value, notes);
            return Vec::new();
        };
        let mut sections = Vec::new();
        for item in items {
            match item.get_ref() {
                DeValue::Table(entries) => {
                    sections.push(Section { entries: Some(entries), title, range: item.span() });
                }
                _ => wrong_type(key, "a list of tables", item, notes),
            }
        }
        sections
    }

    /// The string `key` and its bytes, if it is there.
    pub fn text(&self, key: &str, notes: &mut Notes) -> Option<(&'t str, Range<usize>)> {
        let (_, value) = self.entry(key)?;
        match value.get_ref() {
            DeValue::String(text) => Some((text.as_ref(), value.span())),
            _ => {
                wrong_type(key, "a text in quotation marks", value, notes);
                None
            }
        }
    }

    /// The string `key` made into something by `parse`, whose message becomes the finding `code`.
    pub fn parsed<T, M: ToString>(
        &self,
        key: &str,
        code: &'static str,
        notes: &mut Notes,
        parse: impl FnOnce(&str) -> Result<T, M>,
    ) -> Option<(T, Range<usize>)> {
        let (text, range) = self.text(key, notes)?;
        match parse(text) {
            Ok(value) => Some((value, range)),
            Err(message) => {
                let found = format!("{key}: {}", message.to_string());
                notes.error(code, range, found, "correct it; numbers carry their unit");
                None
            }
        }
    }

    /// The whole number `key`, not negative.
    pub fn whole_number(&self, key: &str, notes: &mut Notes) -> Option<u32> {
        let (_, value) = self.entry(key)?;
        let number = match value.get_ref() {
            DeValue::Integer(integer) => u32::from_str_radix(integer.as_str(), integer.radix()).ok(),
            _ => None,
        };
        if number.is_none() {
            wrong_type(key, "a whole number", value, notes);
        }
        number
    }

    /// Whether the switch `key` is there and true.
    pub fn is_set(&self, key: &str, notes: &mut Notes) -> bool {
        match self.entry(key).map(|(_, value)| (value, value.get_ref())) {
            None => false,
            Some((_, DeValue::Boolean(is_set))) => *is_set,
            Some((value, _)) => {
                wrong_type(key, "true or false", value, notes);
                false
            }
        }
    }

    /// Notes each of `keys` that is not there.
    pub fn require(&self, keys: &[&str], notes: &mut Notes) {
        for key in keys.iter().filter(|key| self.entry(key).is_none()) {
            let found = format!("{} lacks {key}", self.title);
            let to_do = format!("add {key} = ... under {}", self.title);
            let place = notes.place(self.range.clone());
            notes.add(Finding::error("advisory-missing-key", place, found, "", to_do));
        }
    }

    /// Notes each key that is none of `known`.
    pub fn allow(&self, known: &[&str], notes: &mut Notes) {
        let Some(entries) = self.entries else { return };
        for (name, _) in entries {
            let key = name.get_ref().as_ref();
            if known.contains(&key) {
                continue;
            }
            let to_do = nearest(key, known.iter().copied())
                .map_or("remove it".to_owned(), |near| format!("did you mean \"{near}\"?"));
            let found = format!("{} has no key \"{key}\"", self.title);
            let allowed = format!("keys are {}", known.join(", "));
            let place = notes.place(name.span());
            notes.add(Finding::error("advisory-unknown-key", place, found, allowed, to_do));
        }
    }

    /// The bytes of a key's name, and its value.
    fn entry(&self, key: &str) -> Option<(Range<usize>, &'t Spanned<DeValue<'t>>)> {
        let (name, value) = self.entries?.iter().find(|(name, _)| name.get_ref().as_ref() == key)?;
        Some((name.span(), value))
    }
}

fn wrong_type(key: &str, wanted: &str, value: &Spanned<DeValue>, notes: &mut Notes) {
    let kind = match value.get_ref() {
        DeValue::String(_) => "a text",
        DeValue::Integer(_) | DeValue::Float(_) => "a bare number",
        DeValue::Boolean(_) => "true or false",
        DeValue::Datetime(_) => "a bare time",
        DeValue::Array(_) => "a list",
        DeValue::Table(_) => "a table",
    };
    let found = format!("{key} is {kind}; it must be {wanted}");
    let to_do = "write quantities and times in quotation marks, with unit or zone: \"34 kt\"";
    notes.error("advisory-wrong-type", value.span(), found, to_do);
}
