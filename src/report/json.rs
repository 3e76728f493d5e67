//! JSON as this program writes it: indented, 7-bit, with a newline at the end.

use serde::Serialize;

/// The value as JSON text.
///
/// Everything beyond printable 7-bit is written as `\uXXXX`: a program reads the same text back, and a terminal that is shown
/// the output cannot be spoken to by a title.
pub(super) fn text(value: &impl Serialize) -> String {
    // Fails only for maps whose keys are not text; there are none here, and the tests read every output back.
    let mut text = seven_bit(&serde_json::to_string_pretty(value).unwrap_or_default());
    text.push('\n');
    text
}

/// Outside strings JSON is 7-bit anyway, and serde_json has escaped the control characters below 0x20.
fn seven_bit(json: &str) -> String {
    let mut out = String::with_capacity(json.len());
    for c in json.chars() {
        if c == '\n' || (' '..='~').contains(&c) {
            out.push(c);
        } else {
            for unit in c.encode_utf16(&mut [0; 2]) {
                out.push_str(&format!("\\u{unit:04x}"));
            }
        }
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn foreign_text_reads_back_and_is_seven_bit() {
        for title in [
            "Whimbrel",
            "57\u{b0}",
            "a\u{1b}[31m\u{9b}b\u{7f}",
            "\u{202e}\u{e0041}\u{1f426}",
            "\"\\\n",
        ] {
            let json = text(&title);
            assert!(
                json.trim_end().chars().all(|c| (' '..='~').contains(&c)),
                "{json}"
            );
            assert_eq!(serde_json::from_str::<String>(&json).expect("JSON"), title);
        }
    }
}
