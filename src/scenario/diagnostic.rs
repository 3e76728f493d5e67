//! Faults of a scenario text with their places, as plain sentences.

use crate::visible::visible;
use std::fmt;

/// One fault at its place. Its texts have no acting characters left in them.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Diagnostic {
    /// Line, from 1.
    pub line: usize,
    /// Column in characters, from 1.
    pub column: usize,
    /// Field it is about; empty for the syntax of the file.
    pub field: String,
    /// What is wrong, what is allowed, what to do.
    pub message: String,
}

/// All faults of one text, in the order of their places.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Diagnostics {
    /// Name of the file.
    pub file: String,
    /// At least one fault.
    pub faults: Vec<Diagnostic>,
}

impl fmt::Display for Diagnostics {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let file = visible(&self.file);
        for (k, fault) in self.faults.iter().enumerate() {
            if 0 < k {
                f.write_str("\n")?;
            }
            write!(f, "{file}:{fault}")?;
        }
        Ok(())
    }
}

impl fmt::Display for Diagnostic {
    /// `line:column: field: message`, without the file.
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(f, "{}:{}: ", self.line, self.column)?;
        if !self.field.is_empty() {
            write!(f, "{}: ", visible(&self.field))?;
        }
        f.write_str(&visible(&self.message))
    }
}

impl std::error::Error for Diagnostics {}

/// A fault that knows its place as a byte offset only.
#[derive(Clone, Debug, PartialEq)]
pub(crate) struct Found {
    pub(crate) offset: usize,
    pub(crate) field: String,
    pub(crate) message: String,
}

/// Longest message, characters: a name that a message echoes may be as long as the file.
const LONGEST: usize = 400;

/// Faults in the order of their places, with line and column. One pass over the text, however many there are.
pub(crate) fn placed(text: &str, mut found: Vec<Found>) -> Vec<Diagnostic> {
    found.sort_by_key(|fault| fault.offset);
    let (mut line, mut column) = (1, 1);
    let mut letters = text.char_indices().peekable();
    let mut out: Vec<Diagnostic> = Vec::with_capacity(found.len());
    for fault in found {
        while let Some(&(at, letter)) = letters.peek()
            && at < fault.offset
        {
            letters.next();
            if letter == '\n' {
                (line, column) = (line + 1, 1);
            } else {
                column += 1;
            }
        }
        let diagnostic = Diagnostic {
            line,
            column,
            field: visible(&fault.field).into_owned(),
            message: visible(&short(&fault.message, LONGEST)).into_owned(),
        };
        if !out.contains(&diagnostic) {
            out.push(diagnostic);
        }
    }
    out
}

/// Line and column (characters, from 1) after a text.
pub(crate) fn end_of(text: &str) -> (usize, usize) {
    let line = text.bytes().filter(|byte| *byte == b'\n').count() + 1;
    let last = text.rsplit('\n').next().unwrap_or("");
    (line, last.chars().count() + 1)
}

/// At most so many characters of a text, with dots where more were left out.
pub(crate) fn short(text: &str, longest: usize) -> String {
    let mut letters = text.chars();
    let start: String = letters.by_ref().take(longest).collect();
    if letters.next().is_some() {
        format!("{start}...")
    } else {
        start
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn found(offset: usize) -> Found {
        Found {
            offset,
            field: "title".to_owned(),
            message: format!("at {offset}\u{1b}"),
        }
    }

    #[test]
    fn places_count_characters_and_lines() {
        let text = "\u{e9}\u{e9}x\n\u{e9}y";
        let faults = placed(text, vec![found(8), found(4), found(4), found(99)]);
        let places: Vec<_> = faults.iter().map(|f| (f.line, f.column)).collect();
        assert_eq!(places, [(1, 3), (2, 2), (2, 3)]);
        assert_eq!(end_of("\u{e9}\u{e9}\na"), (2, 2));
    }

    #[test]
    fn a_set_is_a_list_of_sentences_without_escapes() {
        let set = Diagnostics {
            file: "a\u{1b}.ron".to_owned(),
            faults: placed("abc", vec![found(0), found(1)]),
        };
        assert_eq!(
            set.to_string(),
            "a\\u{1b}.ron:1:1: title: at 0\\u{1b}\na\\u{1b}.ron:1:2: title: at 1\\u{1b}"
        );
        assert_eq!(short(&"x".repeat(50), 40).len(), 43);
    }
}
