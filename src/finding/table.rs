//! The tables of a TOML file walked key by key, so that every fault in them is found, each with its place.

use crate::finding::fault::{Finding, Place, did_you_mean, quoted};
use crate::finding::page::Page;
use std::collections::BTreeSet;
use std::ops::Range;
use toml::Spanned;
use toml::de::{DeTable, DeValue};

/// One value of a page, with the key it stands under.
#[derive(Clone, Copy, Debug)]
pub struct Item<'t> {
    page: &'t Page<'t>,
    key: &'t str,
    value: &'t Spanned<DeValue<'t>>,
}

impl<'t> Item<'t> {
    /// The key it stands under; in a list, the key of the list.
    #[must_use]
    pub fn key(&self) -> &'t str {
        self.key
    }

    /// The page it stands on.
    #[must_use]
    pub fn page(&self) -> &'t Page<'t> {
        self.page
    }

    /// Where it stands.
    #[must_use]
    pub fn place(&self) -> Place {
        self.page.place(self.value.span())
    }

    /// The value as it is written, cut short if it is long.
    #[must_use]
    pub fn written(&self) -> String {
        let text = self.page.text(self.value.span());
        let line = text.lines().next().unwrap_or_default();
        let short: String = line.chars().take(40).collect();
        if short.len() < text.len() { format!("{short} ...") } else { short }
    }

    /// Reports an error at this value.
    pub fn fault(
        &self,
        code: &'static str,
        found: impl Into<String>,
        allowed: impl Into<String>,
        to_do: impl Into<String>,
    ) {
        self.page.report(Finding::error(code, self.place(), found, allowed, to_do));
    }

    /// Reports a warning at this value.
    pub fn warn(
        &self,
        code: &'static str,
        found: impl Into<String>,
        allowed: impl Into<String>,
        to_do: impl Into<String>,
    ) {
        self.page.report(Finding::warning(code, self.place(), found, allowed, to_do));
    }

    /// Reports that the value is of the wrong kind; `wanted` says what it should be.
    pub fn wrong_type(&self, wanted: &str) {
        let found = format!("{} = {} is {}", self.key, self.written(), self.kind());
        self.fault(
            self.page.codes().wrong_type,
            found,
            format!("{} is {wanted}", self.key),
            "write it in this form",
        );
    }

    /// Reports that the value cannot be read or is out of range; `wanted` says what is allowed.
    pub fn bad_value(&self, found: impl Into<String>, wanted: &str) {
        let found = format!("{} = {}: {}", self.key, self.written(), found.into());
        self.fault(self.page.codes().bad_value, found, wanted, "correct the value");
    }

    /// Whether it is a table.
    #[must_use]
    pub fn is_table(&self) -> bool {
        self.value.get_ref().is_table()
    }

    /// Whether it is a list.
    #[must_use]
    pub fn is_list(&self) -> bool {
        self.value.get_ref().is_array()
    }

    /// Whether it is a whole number.
    #[must_use]
    pub fn is_whole_number(&self) -> bool {
        self.value.get_ref().is_integer()
    }

    /// The number as written, if it is one: a count, or a quantity that lacks its unit.
    #[must_use]
    pub fn bare_number(&self) -> Option<&'t str> {
        match self.value.get_ref() {
            DeValue::Integer(number) => Some(number.as_str()),
            DeValue::Float(number) => Some(number.as_str()),
            _ => None,
        }
    }

    /// The text if it is one, without a finding if it is not.
    #[must_use]
    pub fn as_text(&self) -> Option<&'t str> {
        self.value.get_ref().as_str()
    }

    /// A text that is not empty.
    #[must_use]
    pub fn text(&self) -> Option<&'t str> {
        let Some(text) = self.as_text() else {
            self.wrong_type("a text in quotation marks");
            return None;
        };
        if text.trim().is_empty() {
            self.bad_value("the text is empty", "some words");
            return None;
        }
        Some(text)
    }

    /// A text for a time: a date and time without quotation marks will do as well.
    #[must_use]
    pub fn time_text(&self) -> Option<&'t str> {
        if self.value.get_ref().is_datetime() {
            return Some(self.page.text(self.value.span()));
        }
        self.text()
    }

    /// A whole number between `least` and `most`.
    #[must_use]
    pub fn count(&self, least: u32, most: u32) -> Option<u32> {
        let DeValue::Integer(number) = self.value.get_ref() else {
            self.wrong_type("a whole number without quotation marks");
            return None;
        };
        let value = i128::from_str_radix(number.as_str(), number.radix()).ok();
        let count = value.and_then(|value| u32::try_from(value).ok());
        match count {
            Some(count) if (least..=most).contains(&count) => Some(count),
            _ => {
                self.bad_value("this number is out of range", &format!("{least} to {most}"));
                None
            }
        }
    }

    /// `true` or `false`.
    #[must_use]
    pub fn flag(&self) -> Option<bool> {
        let flag = self.value.get_ref().as_bool();
        if flag.is_none() {
            self.wrong_type("true or false, without quotation marks");
        }
        flag
    }

    /// One of the words allowed, as what it stands for.
    #[must_use]
    pub fn word<T: Copy>(&self, words: &[(&'static str, T)]) -> Option<T> {
        let text = self.text()?;
        let known = words.iter().find(|(word, _)| *word == text).map(|(_, meaning)| *meaning);
        if known.is_none() {
            let names: Vec<&str> = words.iter().map(|(word, _)| *word).collect();
            self.fault(
                self.page.codes().unknown_word,
                format!("{} = \"{text}\" is not a word used here", self.key),
                format!("{} is one of {}", self.key, quoted(&names)),
                did_you_mean(text, names, "use one of these words"),
            );
        }
        known
    }

    /// The values of a list; anything else is a finding and an empty list.
    #[must_use]
    pub fn list(&self) -> Vec<Item<'t>> {
        let Some(values) = self.value.get_ref().as_array() else {
            self.wrong_type("a list in square brackets");
            return Vec::new();
        };
        values.iter().map(|value| Item { value, ..*self }).collect()
    }

    /// The values of a list, or the single value itself.
    #[must_use]
    pub fn one_or_more(&self) -> Vec<Item<'t>> {
        if self.value.get_ref().is_array() { self.list() } else { vec![*self] }
    }

    /// A list of texts; faulty ones are reported and left out.
    #[must_use]
    pub fn texts(&self) -> Vec<String> {
        self.list().iter().filter_map(Item::text).map(str::to_owned).collect()
    }

    /// The table's keys; `what` names the table in findings: "a channel".
    #[must_use]
    pub fn keys(&self, what: &'static str) -> Option<Keys<'t>> {
        let Some(table) = self.value.get_ref().as_table() else {
            self.wrong_type("a table: keys and values in curly brackets, or a heading of its own");
            return None;
        };
        Some(Keys { page: self.page, table, span: self.value.span(), what, asked: BTreeSet::new() })
    }

    fn kind(&self) -> &'static str {
        match self.value.get_ref() {
            DeValue::String(_) => "a text",
            DeValue::Integer(_) | DeValue::Float(_) => "a number",
            DeValue::Boolean(_) => "true or false",
            DeValue::Datetime(_) => "a date or time",
            DeValue::Array(_) => "a list",
            DeValue::Table(_) => "a table",
        }
    }
}

/// The keys of one table, taken by name; [`Keys::finish`] reports those that nobody asked for.
#[derive(Debug)]
pub struct Keys<'t> {
    page: &'t Page<'t>,
    table: &'t DeTable<'t>,
    span: Range<usize>,
    what: &'static str,
    asked: BTreeSet<&'static str>,
}

impl<'t> Keys<'t> {
    /// The keys of a whole file; `None` if it is not TOML.
    #[must_use]
    pub fn of_file(page: &'t Page<'t>) -> Option<Keys<'t>> {
        let table = page.table()?;
        Some(Keys { page, table, span: 0..0, what: "this file", asked: BTreeSet::new() })
    }

    /// Where the table stands: its heading, or its opening bracket.
    #[must_use]
    pub fn place(&self) -> Place {
        self.page.place(self.span.clone())
    }

    /// The page it stands on.
    #[must_use]
    pub fn page(&self) -> &'t Page<'t> {
        self.page
    }

    /// The value of a key that may be left out.
    #[must_use]
    pub fn optional(&mut self, key: &'static str) -> Option<Item<'t>> {
        self.asked.insert(key);
        self.table.get_key_value(key).map(|(key, value)| Item { page: self.page, key: key.get_ref(), value })
    }

    /// Lets keys stand that cannot be read, because something else that they belong to is faulty.
    pub fn pass_over(&mut self, keys: &[&'static str]) {
        self.asked.extend(keys);
    }

    /// The value of a key that must be there.
    #[must_use]
    pub fn required(&mut self, key: &'static str) -> Option<Item<'t>> {
        let item = self.optional(key);
        if item.is_none() {
            let found = format!("{} lacks the key {key}", self.what);
            let to_do = format!("add {key} = ...");
            self.page.report(Finding::error(self.page.codes().missing_key, self.place(), found, "", to_do));
        }
        item
    }

    /// The texts of a key that may be left out.
    #[must_use]
    pub fn texts(&mut self, key: &'static str) -> Vec<String> {
        self.optional(key).map(|item| item.texts()).unwrap_or_default()
    }

    /// The text of a key that may be left out; empty if it is.
    #[must_use]
    pub fn text_or_empty(&mut self, key: &'static str) -> String {
        self.optional(key).and_then(|item| item.text()).unwrap_or_default().to_owned()
    }

    /// The tables under a heading in double brackets, or none.
    #[must_use]
    pub fn tables(&mut self, key: &'static str) -> Vec<Item<'t>> {
        let Some(item) = self.optional(key) else { return Vec::new() };
        if item.is_table() {
            let wanted = format!("a list of tables: write the heading as [[{key}]], in double brackets");
            item.wrong_type(&wanted);
            return Vec::new();
        }
        item.list()
    }

    /// The values of a list under a key that may be left out; a single value may stand without brackets.
    #[must_use]
    pub fn one_or_more(&mut self, key: &'static str) -> Vec<Item<'t>> {
        self.optional(key).map(|item| item.one_or_more()).unwrap_or_default()
    }

    /// Which of some keys is there; a finding if none or more than one is.
    #[must_use]
    pub fn one_of(&mut self, keys: &[&'static str]) -> Option<Item<'t>> {
        let present: Vec<Item<'t>> = keys.iter().filter_map(|key| self.optional(key)).collect();
        match present.as_slice() {
            [item] => return Some(*item),
            [] => self.page.report(Finding::error(
                self.page.codes().missing_key,
                self.place(),
                format!("{} says none of {}", self.what, keys.join(", ")),
                "it must say exactly one of them",
                "add one of these keys",
            )),
            [first, second, ..] => second.fault(
                self.page.codes().unknown_key,
                format!("{} says {} as well as {}", self.what, second.key, first.key),
                format!("it must say exactly one of {}", keys.join(", ")),
                "remove one of them",
            ),
        }
        None
    }

    /// Every key and value, in the order of the file: for tables whose keys are names that the user chose.
    #[must_use]
    pub fn all(self) -> Vec<(&'t str, Item<'t>)> {
        let mut entries: Vec<_> = self
            .table
            .iter()
            .map(|(key, value)| {
                (
                    key.span().start,
                    key.get_ref().as_ref(),
                    Item { page: self.page, key: key.get_ref(), value },
                )
            })
            .collect();
        entries.sort_by_key(|(start, ..)| *start);
        entries.into_iter().map(|(_, key, item)| (key, item)).collect()
    }

    /// Reports every key that was not asked for.
    pub fn finish(self) {
        for (key, _) in self.table.iter() {
            let name: &str = key.get_ref();
            if self.asked.contains(name) {
                continue;
            }
            let known: Vec<&str> = self.asked.iter().copied().collect();
            self.page.report(Finding::error(
                self.page.codes().unknown_key,
                self.page.place(key.span()),
                format!("{} has no key \"{name}\"", self.what),
                format!("its keys are {}", known.join(", ")),
                did_you_mean(name, known, "correct or remove it"),
            ));
        }
    }
}
