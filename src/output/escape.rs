//! Names from files made safe to show: nothing in them can move the cursor, turn the text round or hide.

use std::fmt::Write;

/// `text` with every character written out that would not be seen as itself: control characters, line and paragraph
/// separators, direction marks and overrides, invisible and tag characters. "\n" stands for a line end, "\u{202e}" for
/// the rest.
///
/// The backslash itself is left alone: this is for reading, not for turning back.
///
/// ```
/// use snugdown::output::escape::visible;
/// assert_eq!(visible("V01\n\u{202e}x"), "V01\\n\\u{202e}x");
/// assert_eq!(visible("Ærø < & > \"'"), "Ærø < & > \"'");
/// ```
#[must_use]
pub fn visible(text: &str) -> String {
    let mut shown = String::with_capacity(text.len());
    for c in text.chars() {
        push_visible(&mut shown, c);
    }
    shown
}

/// The same for a text of several lines: line ends and tabs stay.
#[must_use]
pub fn visible_lines(text: &str) -> String {
    let mut shown = String::with_capacity(text.len());
    for c in text.chars() {
        match c {
            '\n' | '\t' => shown.push(c),
            _ => push_visible(&mut shown, c),
        }
    }
    shown
}

/// JSON text with the same characters written as JSON escapes, so that it means the same and shows no tricks.
///
/// Outside strings JSON has none of them but line ends, which stay.
#[must_use]
pub fn visible_json(json: &str) -> String {
    let mut shown = String::with_capacity(json.len());
    for c in json.chars() {
        if c != '\n' && is_unseen(c) {
            let mut units = [0; 2];
            for unit in c.encode_utf16(&mut units) {
                // Writing to a String cannot fail.
                let _ = write!(shown, "\\u{unit:04x}");
            }
        } else {
            shown.push(c);
        }
    }
    shown
}

fn push_visible(shown: &mut String, c: char) {
    match c {
        '\n' => shown.push_str("\\n"),
        '\r' => shown.push_str("\\r"),
        '\t' => shown.push_str("\\t"),
        c if is_unseen(c) => shown.extend(c.escape_unicode()),
        c => shown.push(c),
    }
}

/// Characters that act instead of showing. The joiners U+200C and U+200D stay: several scripts need them.
///
/// Direction marks and overrides: Unicode Standard Annex 9, table of explicit formatting characters. The others are
/// Unicode's control characters (Cc) and its format characters (Cf) as far as they hide, from memory.
fn is_unseen(c: char) -> bool {
    c.is_control()
        || matches!(c,
            '\u{ad}' | '\u{61c}' | '\u{180e}' | '\u{200b}' | '\u{200e}' | '\u{200f}'
            | '\u{2028}'..='\u{202e}' | '\u{2060}'..='\u{206f}' | '\u{feff}'
            | '\u{fff9}'..='\u{fffb}' | '\u{1d173}'..='\u{1d17a}' | '\u{e0000}'..='\u{e007f}')
}

#[cfg(test)]
mod tests {
    use super::{visible, visible_json, visible_lines};
    use proptest::prelude::{any, proptest};

    #[test]
    fn a_terminal_command_in_a_name_is_shown_and_not_obeyed() {
        assert_eq!(visible("\u{1b}[2JV01\u{7f}\u{9b}"), "\\u{1b}[2JV01\\u{7f}\\u{9b}");
    }

    #[test]
    fn emoji_and_joined_scripts_stay_as_they_are() {
        let name = "⚓ 👩\u{200d}✈\u{fe0f} क\u{94d}\u{200d}ष";
        assert_eq!(visible(name), name);
    }

    #[test]
    fn lines_keep_their_ends_but_lose_returns_that_overwrite() {
        assert_eq!(visible_lines("a\tb\r\nc"), "a\tb\\r\nc");
    }

    proptest! {
        #[test]
        fn escaped_json_means_the_same(name in any::<String>()) {
            let json = serde_json::to_string_pretty(&[&name]).unwrap();
            let shown = visible_json(&json);
            assert_eq!(serde_json::from_str::<Vec<String>>(&shown).unwrap(), [name]);
            assert!(!shown.contains(['\u{202e}', '\u{9b}', '\u{2028}', '\u{e0041}']));
        }
    }
}
