//! Makes control characters of foreign text visible, so that no file can talk to a terminal.

use std::borrow::Cow;

/// Whether a character would act on a terminal, hide, or reorder what stands beside it.
fn acts(c: char) -> bool {
    c.is_control()
        || matches!(
            u32::from(c),
            // Soft hyphen, Arabic letter mark, zero-width and bidirectional marks, separators, isolates, byte-order mark,
            // interlinear marks, variation selectors, tag characters.
            0xad | 0x61c | 0x115f | 0x1160 | 0x17b4 | 0x17b5 | 0x180e | 0x200b..=0x200f | 0x2028..=0x202e
                | 0x2060..=0x206f | 0xfe00..=0xfe0f | 0xfeff | 0xfff9..=0xfffb | 0xe0000..=0xe0fff
        )
}

/// The text with every acting character written as an escape such as `\u{1b}`; borrowed where there is none.
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

    #[test]
    fn escapes_are_shown_and_clean_text_is_borrowed() {
        assert!(matches!(visible("Whimbrel, 57\u{b0}"), Cow::Borrowed(_)));
        assert_eq!(visible("a\u{1b}[31mb\u{7}"), "a\\u{1b}[31mb\\u{7}");
        assert_eq!(
            visible("a\u{202e}b\u{e0041}c\u{9b}"),
            "a\\u{202e}b\\u{e0041}c\\u{9b}"
        );
        assert_eq!(visible("a\nb"), "a\\nb");
        assert_eq!(ascii("57\u{b0}"), "57\\u{b0}");
    }
}
