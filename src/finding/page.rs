//! One TOML file being read, and what was found wrong in it so far.

use crate::finding::fault::{Finding, Place, has_error, sort_findings};
use crate::finding::source::SourceText;
use std::cell::RefCell;
use std::ops::Range;
use toml::Spanned;
use toml::de::DeTable;

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

    /// The whole file as a table; `None` if it is not TOML. For its keys see `Keys::of_file` in `finding::table`.
    #[must_use]
    pub fn table(&self) -> Option<&DeTable<'s>> {
        self.table.as_ref().map(Spanned::get_ref)
    }

    /// The text of some bytes of the file.
    #[must_use]
    pub fn text(&self, span: Range<usize>) -> &'s str {
        self.source.text().get(span).unwrap_or_default()
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
