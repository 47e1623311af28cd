//! From bytes to words: laid-out, wrapped, flattened and lower-case texts all become the same run of words.

use std::ops::Range;

/// What a run of two or more full stops becomes: advisories write it where other texts have a comma or a colon.
pub const DOTS: &str = "...";

/// One word of a text, in capitals, without a final full stop, and the bytes it stands in.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Word {
    /// The word in ASCII capitals; a run of full stops is [`DOTS`].
    pub text: String,
    /// Where it stands in the text.
    pub range: Range<usize>,
}

/// The text that some bytes mean: UTF-8, UTF-16 with its mark, else one byte a character as western offices write.
///
/// Never fails; whether the result is a text at all is for others to say.
#[must_use]
pub fn decode(bytes: &[u8]) -> String {
    let wide = |pairs: &[u8], join: fn([u8; 2]) -> u16| {
        let units: Vec<u16> =
            pairs.chunks_exact(2).filter_map(|pair| Some(join(pair.try_into().ok()?))).collect();
        String::from_utf16_lossy(&units)
    };
    match bytes {
        [0xFF, 0xFE, rest @ ..] => wide(rest, u16::from_le_bytes),
        [0xFE, 0xFF, rest @ ..] => wide(rest, u16::from_be_bytes),
        [0xEF, 0xBB, 0xBF, rest @ ..] => decode(rest),
        _ => match std::str::from_utf8(bytes) {
            Ok(text) => text.to_owned(),
            Err(_) => bytes.iter().map(|byte| char::from(*byte)).collect(),
        },
    }
}

/// The words of the bytes `part` of `text`.
///
/// White space of any kind, control characters and zero-width marks part words; so do runs of full stops, which become
/// a word of their own. With `is_markup`, tags and entities of a web page part words too.
#[must_use]
pub fn cut(text: &str, part: Range<usize>, is_markup: bool) -> Vec<Word> {
    let mut words = Vec::new();
    let mut start = None;
    let mut skip_to = part.start;
    let within = text.get(part.clone()).unwrap_or("");
    for (offset, character) in within.char_indices() {
        let at = part.start + offset;
        if at < skip_to {
            continue;
        }
        let skipped = if is_markup { markup_length(text.get(at..part.end).unwrap_or("")) } else { 0 };
        if skipped > 0 || is_gap(character) {
            if let Some(first) = start.take() {
                cut_stops(text, first..at, &mut words);
            }
            skip_to = at + skipped.max(character.len_utf8());
        } else if start.is_none() {
            start = Some(at);
        }
    }
    if let Some(first) = start {
        cut_stops(text, first..part.end.min(text.len()), &mut words);
    }
    words
}

fn is_gap(character: char) -> bool {
    character.is_whitespace() || character.is_control() || matches!(character, '\u{FEFF}' | '\u{200B}')
}

/// The length in bytes of the tag or entity with which `rest` starts; 0 if it starts with neither.
fn markup_length(rest: &str) -> usize {
    let (close, longest) = match rest.as_bytes() {
        [b'<', next, ..] if next.is_ascii_alphabetic() || matches!(next, b'/' | b'!') => ('>', 300),
        [b'&', next, ..] if next.is_ascii_alphabetic() || *next == b'#' => (';', 10),
        _ => return 0,
    };
    rest.char_indices().take(longest).find(|(_, c)| *c == close).map_or(0, |(at, _)| at + 1)
}

/// Cuts a piece without gaps at its runs of full stops.
fn cut_stops(text: &str, piece: Range<usize>, words: &mut Vec<Word>) {
    let mut at = piece.start;
    while at < piece.end {
        let rest = text.get(at..piece.end).unwrap_or("");
        let stops = stops_at(rest);
        if stops > 0 {
            words.push(Word { text: DOTS.to_owned(), range: at..at + stops });
            at += stops;
            continue;
        }
        let is_stop = |i: &usize| rest.get(*i..).is_some_and(|tail| stops_at(tail) > 0);
        let length = rest.char_indices().map(|(i, _)| i).find(is_stop).unwrap_or(rest.len());
        let word = rest.get(..length).unwrap_or("").trim_end_matches('.');
        if !word.is_empty() {
            words.push(Word { text: word.to_ascii_uppercase(), range: at..at + word.len() });
        }
        at += length.max(1);
    }
}

/// The length in bytes of the run of full stops (two or more, or the one character that shows three) at the start.
fn stops_at(rest: &str) -> usize {
    if rest.starts_with("..") || rest.starts_with('…') {
        rest.find(|c| !matches!(c, '.' | '…')).unwrap_or(rest.len())
    } else {
        0
    }
}

#[cfg(test)]
mod tests {
    use super::{cut, decode};

    fn words(text: &str) -> Vec<String> {
        cut(text, 0..text.len(), false).into_iter().map(|word| word.text).collect()
    }

    #[test]
    fn a_flattened_line_has_the_same_words_as_a_laid_out_one() {
        let laid_out = "Max wind  45 KT...GUSTS  55 KT.\r\n34 KT... 60NE 150SE\r\n";
        let flattened = "MAX WIND 45 KT...GUSTS 55 KT. 34 KT...60NE 150SE";
        assert_eq!(words(laid_out), words(flattened));
        assert_eq!(
            words(flattened),
            ["MAX", "WIND", "45", "KT", "...", "GUSTS", "55", "KT", "34", "KT", "...", "60NE", "150SE"]
        );
    }

    #[test]
    fn a_full_stop_inside_a_number_stays_and_one_at_the_end_goes() {
        assert_eq!(words("28.3N 94.7W. . .. x"), ["28.3N", "94.7W", "...", "X"]);
    }

    #[test]
    fn words_know_their_bytes_whatever_stands_around_them() {
        let text = "é\u{a0}34 KT…60NE\u{0}B";
        for word in cut(text, 0..text.len(), false) {
            let there = text[word.range.clone()].to_ascii_uppercase();
            assert!(there == word.text || there.chars().all(|c| matches!(c, '.' | '…')), "{word:?}");
        }
        assert_eq!(words(text), ["é", "34", "KT", "...", "60NE", "B"]);
    }

    #[test]
    fn tags_and_entities_part_words_in_markup_only() {
        let text = "A<br>B&nbsp;C 3 < 4";
        let cut_up: Vec<String> = cut(text, 0..text.len(), true).into_iter().map(|w| w.text).collect();
        assert_eq!(cut_up, ["A", "B", "C", "3", "<", "4"]);
        assert_eq!(words("A<br>B"), ["A<BR>B"]);
    }

    #[test]
    fn bytes_of_several_encodings_become_text() {
        assert_eq!(decode(b"\xEF\xBB\xBF34 KT"), "34 KT");
        assert_eq!(decode(b"34\xA0KT"), "34\u{a0}KT");
        assert_eq!(decode(b"\xFF\xFE3\x004\x00"), "34");
        assert_eq!(decode(b"\xFE\xFF\x003\x004"), "34");
    }
}
