//! A page of plain text in columns: wrapping by display width, a margin for labels, nothing wider than it may be.

use crate::output::escape::visible;

/// The narrowest page that is made; narrower terminals wrap by themselves.
pub const LEAST_WIDTH: usize = 40;
/// The widest: longer lines are hard to read on paper. Our choice.
pub const MOST_WIDTH: usize = 160;

/// Joins words that must not be parted at a line end: "2 h 45 min". Shown as a space.
const GLUE: char = '\u{a0}';

/// `text` with its spaces made unbreakable.
#[must_use]
pub fn glued(text: &str) -> String {
    text.replace(' ', "\u{a0}")
}

/// A page that grows downwards. Everything written to it is made safe to show.
#[derive(Clone, Debug)]
pub struct Page {
    width: usize,
    lines: Vec<String>,
}

impl Page {
    /// An empty page, `width` columns wide (held within [`LEAST_WIDTH`] and [`MOST_WIDTH`]).
    #[must_use]
    pub fn new(width: usize) -> Page {
        Page { width: width.clamp(LEAST_WIDTH, MOST_WIDTH), lines: Vec::new() }
    }

    /// Its width in columns.
    #[must_use]
    pub fn width(&self) -> usize {
        self.width
    }

    /// How many lines it has.
    #[must_use]
    pub fn height(&self) -> usize {
        self.lines.len()
    }

    /// An empty line, unless the page is empty or has just had one.
    pub fn gap(&mut self) {
        if self.lines.last().is_some_and(|line| !line.is_empty()) {
            self.lines.push(String::new());
        }
    }

    /// A section's title after an empty line; dots lead to a fact at the right edge: `DUTIES ........ 3 open`.
    pub fn section(&mut self, title: &str, fact: &str) {
        self.gap();
        let fact = clip(&visible(fact), self.width / 2 + 8);
        let title = clip(&visible(title), self.width - columns(&fact) - 5);
        let dots = self.width - columns(&title) - columns(&fact) - 2;
        self.push(format!("{title} {} {fact}", ".".repeat(dots)));
    }

    /// A text over as many lines as it needs, all lines `indent` columns in.
    pub fn text(&mut self, indent: usize, text: &str) {
        self.beside(indent, &[], text);
    }

    /// A text in one line, cut off where the page ends.
    pub fn one_line(&mut self, text: &str) {
        let line = clip(&visible(text), self.width);
        self.push(line);
    }

    /// A label in the margin, `margin` columns wide, and a text beside it.
    pub fn labelled(&mut self, margin: usize, label: &str, text: &str) {
        self.beside(margin, &[label.to_owned()], text);
    }

    /// Lines in the margin and a text beside them; whichever is longer goes on alone.
    pub fn beside(&mut self, margin: usize, left: &[String], text: &str) {
        let margin = margin.min(self.width - 20);
        let right = wrap(&visible(text), self.width - margin);
        for row in 0..left.len().max(right.len()) {
            let label = left.get(row).map(|label| clip(&visible(label), margin.saturating_sub(1)));
            let mut line = label.unwrap_or_default();
            if let Some(words) = right.get(row).filter(|words| !words.is_empty()) {
                line.push_str(&" ".repeat(margin.saturating_sub(columns(&line))));
                line.push_str(words);
            }
            self.push(line);
        }
    }

    /// The page as text; every line ends with a line end.
    #[must_use]
    pub fn finish(self) -> String {
        self.lines.into_iter().flat_map(|line| [line, "\n".to_owned()]).collect()
    }

    fn push(&mut self, line: String) {
        self.lines.push(line.replace(GLUE, " ").trim_end().to_owned());
    }
}

/// How many columns a text takes on a terminal.
#[must_use]
pub fn columns(text: &str) -> usize {
    text.chars().map(char_columns).sum()
}

/// Columns of one character: 0 for marks that stand on another one, 2 for East Asian wide characters and most emoji.
///
/// After Unicode Standard Annex 11 (East Asian Width), in whole blocks and from memory; terminals differ in the rest.
fn char_columns(c: char) -> usize {
    match u32::from(c) {
        0x20..=0x7e => 1,
        0x300..=0x36f
        | 0x483..=0x489
        | 0x591..=0x5bd
        | 0x610..=0x61a
        | 0x64b..=0x65f
        | 0x93c
        | 0x941..=0x948
        | 0x94d
        | 0xe31
        | 0xe34..=0xe3a
        | 0xe47..=0xe4e
        | 0x1ab0..=0x1aff
        | 0x1dc0..=0x1dff
        | 0x200c..=0x200d
        | 0x20d0..=0x20ff
        | 0xfe00..=0xfe0f
        | 0xfe20..=0xfe2f
        | 0xe0100..=0xe01ef => 0,
        0x1100..=0x115f
        | 0x231a..=0x231b
        | 0x23e9..=0x23f3
        | 0x25fd..=0x25fe
        | 0x2614..=0x2615
        | 0x2648..=0x2653
        | 0x267f
        | 0x2693
        | 0x26a1
        | 0x26c4..=0x26c5
        | 0x26d4
        | 0x26ea
        | 0x26f2..=0x26f5
        | 0x2705
        | 0x270a..=0x270b
        | 0x274c
        | 0x2753..=0x2757
        | 0x2b1b..=0x2b1c
        | 0x2b50
        | 0x2e80..=0x303e
        | 0x3041..=0x4dbf
        | 0x4e00..=0xa4cf
        | 0xa960..=0xa97c
        | 0xac00..=0xd7a3
        | 0xf900..=0xfaff
        | 0xfe30..=0xfe6f
        | 0xff00..=0xff60
        | 0xffe0..=0xffe6
        | 0x1f1e6..=0x1f202
        | 0x1f300..=0x1f64f
        | 0x1f680..=0x1f6ff
        | 0x1f7e0..=0x1f7eb
        | 0x1f900..=0x1f9ff
        | 0x1fa70..=0x1faff
        | 0x20000..=0x3fffd => 2,
        _ => 1,
    }
}

/// The beginning of a text, with ".." at its end if it had to be cut to `width` columns.
#[must_use]
pub fn clip(text: &str, width: usize) -> String {
    if columns(text) <= width {
        return text.to_owned();
    }
    let mut cut = head_of(text, width.saturating_sub(2)).trim_end().to_owned();
    cut.push_str(if width >= 2 { ".." } else { "" });
    cut
}

/// As much of the beginning of `text` as takes no more than `width` columns.
fn head_of(text: &str, width: usize) -> &str {
    let mut used = 0;
    for (at, c) in text.char_indices() {
        used += char_columns(c);
        if used > width {
            return text.get(..at).unwrap_or_default();
        }
    }
    text
}

/// A text broken at its spaces into lines of at most `width` columns; longer words are broken anywhere.
#[must_use]
pub fn wrap(text: &str, width: usize) -> Vec<String> {
    let width = width.max(2);
    let mut lines = Vec::new();
    let mut line = String::new();
    for word in text.split(' ').filter(|word| !word.is_empty()) {
        if !line.is_empty() && columns(&line) + 1 + columns(word) > width {
            lines.push(std::mem::take(&mut line));
        }
        if !line.is_empty() {
            line.push(' ');
        }
        line.push_str(word);
        while columns(&line) > width {
            let head = head_of(&line, width).to_owned();
            let rest = line.get(head.len()..).unwrap_or_default().to_owned();
            lines.push(head);
            line = rest;
        }
    }
    if !line.is_empty() || lines.is_empty() {
        lines.push(line);
    }
    lines
}

#[cfg(test)]
mod tests {
    use super::{Page, clip, columns, wrap};
    use proptest::prelude::{any, proptest};

    #[test]
    fn words_that_are_glued_stay_in_one_line() {
        assert_eq!(wrap("spare 2\u{a0}h\u{a0}45\u{a0}min", 9), ["spare", "2\u{a0}h\u{a0}45\u{a0}mi", "n"]);
        assert_eq!(wrap("in 2\u{a0}h now", 6), ["in 2\u{a0}h", "now"]);
    }

    #[test]
    fn wide_characters_count_double_and_marks_not_at_all() {
        assert_eq!(columns("港A e\u{301} 👍"), 2 + 1 + 1 + 1 + 1 + 2);
        assert_eq!(clip("港港港", 5), "港..");
    }

    #[test]
    fn the_margin_and_the_text_run_side_by_side() {
        let mut page = Page::new(40);
        page.beside(10, &["06:30".into(), " latest".into()], "Secure a ship for sea and say so");
        assert_eq!(page.finish(), "06:30     Secure a ship for sea and say\n latest   so\n");
    }

    proptest! {
        #[test]
        fn no_line_is_wider_than_the_page(
            width in 0_usize..200, margin in 0_usize..60, label in any::<String>(), text in any::<String>(),
        ) {
            let mut page = Page::new(width);
            page.section(&label, &text);
            page.labelled(margin, &label, &text);
            page.one_line(&text);
            let most = page.width();
            for line in page.finish().lines() {
                assert!(columns(line) <= most, "{line:?}");
            }
        }

        #[test]
        fn wrapping_loses_no_character(text in "[a-z港👍 ]{0,80}", width in 2_usize..30) {
            let squeeze = |s: &str| s.chars().filter(|c| *c != ' ').collect::<String>();
            assert_eq!(squeeze(&wrap(&text, width).join(" ")), squeeze(&text));
        }
    }
}
