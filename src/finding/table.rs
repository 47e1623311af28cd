//! A TOML file walked key by key, so that every fault in it is found, each with its place.

use crate::finding::fault::{Finding, Place, has_error, nearest, sort_findings};
use crate::finding::source::SourceText;
use std::cell::RefCell;
use std::collections::BTreeSet;
use std::ops::Range;
use toml::Spanned;
use toml::de::{DeTable, DeValue};

/// After so many findings in one file the rest is left out (our choice): nobody mends more in one go, and a file of
/// garbage must not take minutes.
const MOST_FINDINGS: usize = 200;

/// After so many faults in the TOML itself the rest is left out: most follow from the first.
const MOST_SYNTAX_FINDINGS: usize = 10;

/// The codes under which a room reports faults that any table can have.
#[derive(Debug)]
pub struct TableCodes {
    /// The text is not TOML.
    pub syntax: &'static str,
    /// A key stands twice in one table.
    pub duplicate_key: &'static str,
    /// A key that the table does not have.
    pub unknown_key: &'static str,
    /// A key that the table must have.
    pub missing_key: &'static str,
    /// A number where a text should be, and the like.
    pub wrong_type: &'static str,
    /// A quantity without its unit.
    pub no_unit: &'static str,
    /// A value that cannot be read, or is out of range.
    pub bad_value: &'static str,
    /// A word that is not one of those allowed.
    pub unknown_word: &'static str,
    /// A time that cannot be read.
    pub bad_time: &'static str,
    /// A local time that the clock skips.
    pub time_gap: &'static str,
    /// A local time that the clock shows twice.
    pub time_fold: &'static str,
}

/// One file being read: its text, its tables, and what was found wrong so far.
#[derive(Debug)]
pub struct Page<'s> {
    source: &'s SourceText,
    codes: &'static TableCodes,
    table: Option<Spanned<DeTable<'s>>>,
    findings: RefCell<Vec<Finding>>,
}

impl<'s> Page<'s> {
    /// A file as a table; if it is not TOML the page has findings, and no keys.
    ///
    /// A key that stands twice is a finding too, but what stands first is read on.
    #[must_use]
    pub fn read(source: &'s SourceText, codes: &'static TableCodes) -> Page<'s> {
        let (table, errors) = DeTable::parse_recoverable(source.text());
        let mut page = Page { source, codes, table: None, findings: RefCell::new(Vec::new()) };
        let mut is_readable = true;
        for error in errors.iter().take(MOST_SYNTAX_FINDINGS) {
            is_readable &= page.is_only_a_repeated_key(error);
        }
        page.table = is_readable.then_some(table);
        page
    }

    fn is_only_a_repeated_key(&self, error: &toml::de::Error) -> bool {
        let place = self.place(error.span().unwrap_or(0..0));
        let is_repeated = error.message().contains("duplicate key");
        self.report(if is_repeated {
            let (found, allowed) = ("this key stands twice in one table", "each key may stand once");
            Finding::error(self.codes.duplicate_key, place, found, allowed, "remove one of the two")
        } else {
            let found = error.message().lines().collect::<Vec<_>>().join("; ");
            let to_do = "mend this first: the rest of this file was not checked";
            Finding::error(self.codes.syntax, place, found, "", to_do)
        });
        is_repeated
    }

    /// The keys of the whole file; `None` if it is not TOML.
    #[must_use]
    pub fn keys(&self) -> Option<Keys<'_>> {
        let table = self.table.as_ref()?.get_ref();
        Some(Keys { page: self, table, span: 0..0, what: "this file", asked: BTreeSet::new() })
    }

    /// The place of some bytes of the file.
    #[must_use]
    pub fn place(&self, span: Range<usize>) -> Place {
        // Counting columns costs time on a long line; once the page is full nobody sees the place.
        if self.is_full() { self.source.line(1) } else { self.source.place(span) }
    }

    /// The codes of the room that reads.
    #[must_use]
    pub fn codes(&self) -> &'static TableCodes {
        self.codes
    }

    /// Notes a finding.
    pub fn report(&self, finding: Finding) {
        if !self.is_full() {
            self.findings.borrow_mut().push(finding);
        }
    }

    /// All findings, in the order of the file.
    #[must_use]
    pub fn into_findings(self) -> Vec<Finding> {
        let mut findings = self.findings.into_inner();
        sort_findings(&mut findings);
        findings
    }

    /// Whether an error was found so far.
    #[must_use]
    pub fn has_error(&self) -> bool {
        has_error(&self.findings.borrow())
    }

    fn is_full(&self) -> bool {
        self.findings.borrow().len() >= MOST_FINDINGS
    }
}

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
        let text = self.page.source.text().get(self.value.span()).unwrap_or_default();
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
            self.page.codes.wrong_type,
            found,
            format!("{} is {wanted}", self.key),
            "write it in this form",
        );
    }

    /// Reports that the value cannot be read or is out of range; `wanted` says what is allowed.
    pub fn bad_value(&self, found: impl Into<String>, wanted: &str) {
        let found = format!("{} = {}: {}", self.key, self.written(), found.into());
        self.fault(self.page.codes.bad_value, found, wanted, "correct the value");
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
            return self.page.source.text().get(self.value.span());
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
                self.page.codes.unknown_word,
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
            self.page.report(Finding::error(self.page.codes.missing_key, self.place(), found, "", to_do));
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

    /// Which of some keys is there; a finding if none or more than one is.
    #[must_use]
    pub fn one_of(&mut self, keys: &[&'static str]) -> Option<Item<'t>> {
        let present: Vec<Item<'t>> = keys.iter().filter_map(|key| self.optional(key)).collect();
        match present.as_slice() {
            [item] => return Some(*item),
            [] => self.page.report(Finding::error(
                self.page.codes.missing_key,
                self.place(),
                format!("{} says none of {}", self.what, keys.join(", ")),
                "it must say exactly one of them",
                "add one of these keys",
            )),
            [first, second, ..] => second.fault(
                self.page.codes.unknown_key,
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
                self.page.codes.unknown_key,
                self.page.place(key.span()),
                format!("{} has no key \"{name}\"", self.what),
                format!("its keys are {}", known.join(", ")),
                did_you_mean(name, known, "correct or remove it"),
            ));
        }
    }
}

/// "did you mean "pilot"?" if a known name is near the wrong one, else `otherwise`.
#[must_use]
pub fn did_you_mean<'a>(wrong: &str, known: impl IntoIterator<Item = &'a str>, otherwise: &str) -> String {
    nearest(wrong, known).map_or_else(|| otherwise.to_owned(), |name| format!("did you mean \"{name}\"?"))
}

/// Names in quotation marks, with commas; a long list is cut with its count.
#[must_use]
pub fn quoted(names: &[&str]) -> String {
    const MOST: usize = 20;
    let shown: Vec<String> = names.iter().take(MOST).map(|name| format!("\"{name}\"")).collect();
    let more = names.len().saturating_sub(MOST);
    if more > 0 { format!("{} and {more} more", shown.join(", ")) } else { shown.join(", ") }
}
