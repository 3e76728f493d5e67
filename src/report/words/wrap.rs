//! Breaking text into lines.

/// Breaks a text into lines of at most `width` cells at spaces; a longer word is cut.
///
/// Spaces inside a grouped number and before its unit do not break, and the text's indent is kept on every line.
pub fn wrap(text: &str, width: usize) -> Vec<String> {
    use unicode_width::{UnicodeWidthChar, UnicodeWidthStr};
    if width == 0 {
        return Vec::new();
    }
    let body = text.trim_start_matches(' ');
    let indent = (text.len() - body.len()).min(width / 2);
    let mut lines = Vec::new();
    let mut line = " ".repeat(indent);
    let mut used = indent;
    for word in unbroken(body) {
        let length = word.width();
        if indent < used && width < used + 1 + length {
            lines.push(std::mem::replace(&mut line, " ".repeat(indent)));
            used = indent;
        }
        if indent < used {
            line.push(' ');
            used += 1;
        }
        for c in word.chars() {
            let cells = c.width().unwrap_or(0);
            if width < used + cells && indent < used {
                lines.push(std::mem::replace(&mut line, " ".repeat(indent)));
                used = indent;
            }
            line.push(c);
            used += cells;
        }
    }
    lines.push(line);
    lines
}

/// The words of a text, with a number kept together with its groups of digits and its unit.
fn unbroken(text: &str) -> Vec<String> {
    const UNITS: &[&str] = &[
        "km", "km/s", "m/s", "kg", "deg", "%", "s", "min", "h", "d", "starts", "start",
    ];
    let mut words: Vec<String> = Vec::new();
    for word in text.split(' ').filter(|word| !word.is_empty()) {
        let bare = word.trim_end_matches(|c: char| ",.;:)".contains(c));
        let group = 3 <= bare.len()
            && bare.bytes().take(3).all(|b| b.is_ascii_digit())
            && !bare[3..].starts_with(|c: char| c.is_ascii_digit());
        match words.last_mut() {
            Some(last)
                if last.ends_with(|c: char| c.is_ascii_digit())
                    && (group || UNITS.contains(&bare)) =>
            {
                last.push(' ');
                last.push_str(word);
            }
            _ => words.push(word.to_owned()),
        }
    }
    words
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn wrapping_keeps_every_word() {
        let text = "Direct is cheapest at 6500 km: 667 m/s";
        assert_eq!(
            wrap(text, 12),
            ["Direct is", "cheapest at", "6500 km:", "667 m/s"]
        );
        assert_eq!(wrap("abcdefgh", 3), ["abc", "def", "gh"]);
        assert_eq!(
            wrap("radius 19 347 km, x", 10),
            ["radius", "19 347 km,", "x"]
        );
        assert_eq!(wrap("   a bb ccc", 7), ["   a bb", "   ccc"]);
        assert_eq!(wrap("", 7), [""]);
        assert_eq!(
            wrap("\u{4f60}\u{597d}\u{5417}", 1),
            ["\u{4f60}", "\u{597d}", "\u{5417}"]
        );
    }
}
