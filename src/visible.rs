//! Makes control characters of foreign text visible, so that no file can talk to a terminal.

use std::borrow::Cow;

/// Whether a character would act on a terminal, hide, or reorder what stands beside it.
pub(crate) fn acts(c: char) -> bool {
    c.is_control()
        || matches!(
            u32::from(c),
            // Soft hyphen, grapheme joiner, Arabic letter mark, fillers that show nothing, Mongolian selectors.
            0xad | 0x34f | 0x61c | 0x115f | 0x1160 | 0x17b4 | 0x17b5 | 0x180b..=0x180f | 0x3164 | 0xffa0
                // Zero-width and bidirectional marks, line and paragraph separators, isolates.
                | 0x200b..=0x200f | 0x2028..=0x202e | 0x2060..=0x206f
                // Variation selectors, byte-order mark, interlinear marks, musical format marks, tags.
                | 0xfe00..=0xfe0f | 0xfeff | 0xfff9..=0xfffb | 0x1d173..=0x1d17a | 0xe0000..=0xe0fff
        )
}

/// The text with every acting character written as an escape such as `\u{1b}`; borrowed where there is none.
///
/// For reading, not for parsing back: a backslash of the text's own stays single. Applying it twice changes nothing.
pub fn visible(text: &str) -> Cow<'_, str> {
    escaped(text, acts)
}

/// As [`visible`], and with everything beyond printable 7-bit written as an escape too.
pub fn ascii(text: &str) -> Cow<'_, str> {
    escaped(text, |c| !(' '..='~').contains(&c))
}

fn escaped(text: &str, acts: impl Fn(char) -> bool) -> Cow<'_, str> {
    if !text.chars().any(&acts) {
        return Cow::Borrowed(text);
    }
    let mut out = String::with_capacity(text.len() + 16);
    for c in text.chars() {
        match c {
            '\n' => out.push_str("\\n"),
            '\t' => out.push_str("\\t"),
            '\r' => out.push_str("\\r"),
            c if acts(c) => out.extend(c.escape_unicode()),
            c => out.push(c),
        }
    }
    Cow::Owned(out)
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn escapes_are_shown_and_clean_text_is_borrowed() {
        assert!(matches!(visible("Whimbrel, 57\u{b0}"), Cow::Borrowed(_)));
        assert!(matches!(ascii("Whimbrel, 57"), Cow::Borrowed(_)));
        assert_eq!(visible("a\u{1b}[31mb\u{7}"), "a\\u{1b}[31mb\\u{7}");
        assert_eq!(visible("a\u{202e}b\u{9b}c"), "a\\u{202e}b\\u{9b}c");
        assert_eq!(visible("a\u{e0041}\u{7f}"), "a\\u{e0041}\\u{7f}");
        assert_eq!(visible("a\nb\tc\rd"), "a\\nb\\tc\\rd");
        assert_eq!(ascii("57\u{b0}"), "57\\u{b0}");
    }

    proptest! {
        #[test]
        fn nothing_acting_is_left_and_twice_is_once(text in any::<String>()) {
            let once = visible(&text).into_owned();
            prop_assert!(!once.chars().any(acts));
            prop_assert_eq!(visible(&once), once.as_str());
            prop_assert!(ascii(&text).chars().all(|c| (' '..='~').contains(&c)));
        }
    }
}
