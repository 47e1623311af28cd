//! Where the readers of this room write down what they find.

use crate::finding::fault::{Finding, Place};
use crate::finding::source::SourceText;
use std::ops::Range;

/// The findings about one text, as they are made.
#[derive(Debug)]
pub struct Notes<'a> {
    source: &'a SourceText,
    findings: Vec<Finding>,
}

impl<'a> Notes<'a> {
    /// No findings yet about `source`.
    #[must_use]
    pub fn on(source: &'a SourceText) -> Notes<'a> {
        Notes { source, findings: Vec::new() }
    }

    /// The place of some bytes of the text.
    #[must_use]
    pub fn place(&self, range: Range<usize>) -> Place {
        self.source.place(range)
    }

    /// What stands at some bytes, on one line and cut after 60 characters: for showing what was found.
    #[must_use]
    pub fn quote(&self, range: Range<usize>) -> String {
        let text = self.source.text().get(range).unwrap_or("");
        let line: Vec<&str> = text.split_whitespace().collect();
        let line = line.join(" ");
        if line.chars().count() > 60 { line.chars().take(57).collect::<String>() + "..." } else { line }
    }

    /// Notes an error about some bytes: what was found, and what to do.
    pub fn error(&mut self, code: &'static str, range: Range<usize>, found: String, to_do: &str) {
        let place = self.place(range);
        self.add(Finding::error(code, place, found, "", to_do));
    }

    /// Notes a warning about some bytes: what was found, and what to do.
    pub fn warning(&mut self, code: &'static str, range: Range<usize>, found: String, to_do: &str) {
        let place = self.place(range);
        self.add(Finding::warning(code, place, found, "", to_do));
    }

    /// Notes a finding made elsewhere.
    pub fn add(&mut self, finding: Finding) {
        self.findings.push(finding);
    }

    /// All findings, in the order in which they were made.
    #[must_use]
    pub fn into_findings(self) -> Vec<Finding> {
        self.findings
    }

    /// Whether an error has been noted.
    #[must_use]
    pub fn has_error(&self) -> bool {
        crate::finding::fault::has_error(&self.findings)
    }
}
