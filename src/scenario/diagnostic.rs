//! Faults of a scenario text with their places, as plain sentences.

use std::fmt;

/// One fault at its place.
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
        for (k, fault) in self.faults.iter().enumerate() {
            if 0 < k {
                f.write_str("\n")?;
            }
            let file = crate::visible::visible(&self.file);
            write!(f, "{file}:{}:{}: ", fault.line, fault.column)?;
            if !fault.field.is_empty() {
                write!(f, "{}: ", crate::visible::visible(&fault.field))?;
            }
            f.write_str(&crate::visible::visible(&fault.message))?;
        }
        Ok(())
    }
}

impl std::error::Error for Diagnostics {}

/// Line and column (characters, from 1) of a byte offset.
pub fn place(text: &str, offset: usize) -> (usize, usize) {
    let mut end = offset.min(text.len());
    while !text.is_char_boundary(end) {
        end -= 1;
    }
    let before = &text[..end];
    let line = before.bytes().filter(|b| *b == b'\n').count() + 1;
    let column = before
        .rsplit('\n')
        .next()
        .map_or(0, |last| last.chars().count())
        + 1;
    (line, column)
}
