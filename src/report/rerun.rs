//! The scenario as a file that reruns to the same digits, 7-bit: what a brief carries along.

use crate::scenario::write;
use crate::study::spec::Spec;

/// The scenario as lines of a scenario file, without comments, in 7-bit.
///
/// Knobs set on the command line are in it, so a brief alone is enough to repeat what it says.
pub(super) fn lines(spec: &Spec) -> Vec<String> {
    write::emit(spec)
        .lines()
        .map(|line| seven_bit(without_comment(line)))
        .filter(|line| !line.is_empty())
        .collect()
}

/// As [`lines`], without a title or note that is wider than a page: neither moves a number.
pub(super) fn narrow(spec: &Spec, width: usize) -> Vec<String> {
    let text = |line: &str| {
        ["title:", "note:"]
            .iter()
            .any(|name| line.trim_start().starts_with(name))
    };
    let mut lines = lines(spec);
    lines.retain(|line| line.len() <= width || !text(line));
    lines
}

/// A line up to its comment; two slashes inside a quoted text are no comment.
fn without_comment(line: &str) -> &str {
    let (mut quoted, mut escaped) = (false, false);
    let mut before = '\0';
    for (at, c) in line.char_indices() {
        match c {
            '"' if !escaped => quoted = !quoted,
            // A slash is one byte long.
            '/' if !quoted && before == '/' => return line[..at - 1].trim_end(),
            _ => {}
        }
        escaped = quoted && c == '\\' && !escaped;
        before = c;
    }
    line.trim_end()
}

/// Beyond 7-bit only quoted texts can have anything, and there RON reads the escape back.
fn seven_bit(line: &str) -> String {
    crate::visible::ascii(line).into_owned()
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::scenario::file;

    #[test]
    fn comments_go_and_quoted_slashes_stay() {
        for (line, expected) in [
            (
                "    isp_s: 312.0,  // s: specific impulse",
                "    isp_s: 312.0,",
            ),
            ("// A stoop scenario.", ""),
            (
                r#"    title: "see http://x \" // y", // z"#,
                r#"    title: "see http://x \" // y","#,
            ),
            (r#"title: "a\\", // z"#, r#"title: "a\\","#),
            ("(", "("),
        ] {
            assert_eq!(without_comment(line), expected);
        }
    }

    #[test]
    fn what_a_brief_carries_loads_and_says_the_same() {
        for (name, text) in file::SHIPPED {
            let mut spec = file::parse(name, text)
                .expect("it loads")
                .case
                .spec()
                .clone();
            spec.title = "caf\u{e9} // \"x\" \\ \u{1b}".to_owned();
            let text = lines(&spec).join("\n");
            assert!(text.is_ascii());
            let again =
                file::parse(name, &text).unwrap_or_else(|faults| panic!("{text}\n{faults}"));
            assert_eq!(again.case.spec(), &spec, "{name}");
            let narrow = narrow(&spec, 78);
            assert!(narrow.iter().all(|line| line.len() <= 78));
            let again = file::parse(name, &narrow.join("\n"))
                .unwrap_or_else(|faults| panic!("{text}\n{faults}"));
            assert_eq!(
                write::fingerprint(again.case.spec()),
                write::fingerprint(&spec)
            );
        }
    }
}
