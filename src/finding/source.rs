//! A file's text with its name, able to turn bytes into lines and columns.

use crate::finding::fault::Place;
use std::ops::Range;

/// A text somebody wrote, and what they call it.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct SourceText {
    name: String,
    text: String,
    line_starts: Vec<usize>,
}

impl SourceText {
    /// A text called `name` (a path as the user gave it, or "standard input").
    #[must_use]
    pub fn new(name: impl Into<String>, text: impl Into<String>) -> SourceText {
        let text = text.into();
        let line_starts = std::iter::once(0).chain(text.match_indices('\n').map(|(at, _)| at + 1)).collect();
        SourceText { name: name.into(), text, line_starts }
    }

    /// What the file is called.
    #[must_use]
    pub fn name(&self) -> &str {
        &self.name
    }

    /// The whole text.
    #[must_use]
    pub fn text(&self) -> &str {
        &self.text
    }

    /// The place of the bytes `range`; a range past the end, or inside a character, is brought back into the text.
    #[must_use]
    pub fn place(&self, range: Range<usize>) -> Place {
        let start = self.boundary(range.start);
        let end = self.boundary(range.end.max(start));
        let line = self.line_starts.partition_point(|first| *first <= start).max(1);
        let line_start = self.line_starts.get(line - 1).copied().unwrap_or(0);
        let column = self.text.get(line_start..start).map_or(0, |before| before.chars().count()) + 1;
        Place { file: self.name.clone(), line, column, start, end }
    }

    /// The place of a whole line, counted from 1.
    #[must_use]
    pub fn line(&self, line: usize) -> Place {
        let start = self.line_starts.get(line.saturating_sub(1)).copied().unwrap_or(self.text.len());
        let length = self.text.get(start..).map_or(0, |rest| rest.find('\n').unwrap_or(rest.len()));
        self.place(start..start + length)
    }

    fn boundary(&self, at: usize) -> usize {
        let mut at = at.min(self.text.len());
        while !self.text.is_char_boundary(at) {
            at -= 1;
        }
        at
    }
}

#[cfg(test)]
mod tests {
    use super::SourceText;

    #[test]
    fn columns_count_characters_not_bytes() {
        let source = SourceText::new("x.toml", "é = 1\nname = \"é\" # end\n");
        let hash = source.text().find('#').unwrap();
        let place = source.place(hash..hash + 1);
        assert_eq!((place.line, place.column), (2, 12));
    }

    #[test]
    fn a_range_past_the_end_is_the_end() {
        let source = SourceText::new("x", "ab");
        assert_eq!(source.place(10..20).column, 3);
        assert_eq!(source.line(99).line, 1);
    }
}
