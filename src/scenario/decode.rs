//! A scenario text to a `Spec` and a checked case, collecting every fault instead of stopping at the first.

mod judge;
mod reader;
mod sections;
mod ways_in;

use super::diagnostic::{Diagnostic, Diagnostics, Found, end_of, placed, short};
use super::tree::{self, Node};
use crate::study::case::Case;
use crate::study::spec::Spec;
use crate::visible::visible;
use reader::Reader;

/// Largest scenario read, bytes.
pub const LARGEST: usize = 1024 * 1024;

/// Reads a scenario text into a checked case. `file` is used in messages.
///
/// # Errors
/// Every fault, with its place; of the syntax only the first, since after it nothing can be relied on.
pub fn case(file: &str, text: &str) -> Result<Case, Diagnostics> {
    let refuse = |faults| {
        Err(Diagnostics {
            file: file.to_owned(),
            faults,
        })
    };
    let body = without_mark(text);
    let root = match located(body) {
        Ok(root) => root,
        Err(fault) => return refuse(vec![fault]),
    };
    let mut reader = Reader::default();
    let spec = reader.scenario(&root);
    let mut faults = reader.faults;
    for fault in judge::faults(&spec, &reader.broken) {
        faults.push(Found {
            offset: judge::locate(&root, &fault.path),
            field: fault.path,
            message: fault.message,
        });
    }
    if faults.is_empty() {
        match Case::new(spec) {
            Ok(case) => return Ok(case),
            // Whatever `judge` did not look at on its own.
            Err(found) => faults.extend(found.into_iter().map(|fault| Found {
                offset: judge::locate(&root, &fault.path),
                field: fault.path,
                message: fault.message,
            })),
        }
    }
    let mut faults = placed(body, faults);
    if 0 < reader.unshown {
        let last = faults
            .last()
            .map_or((1, 1), |last| (last.line, last.column));
        let message = format!("{} more faults are not shown", reader.unshown);
        faults.push(syntax_fault(last.0, last.1, &message));
    }
    refuse(faults)
}

/// What a text says and where, unless its form has faults. Ranges and contradictions are not looked at.
pub(super) fn spec(body: &str) -> Option<(Node, Spec)> {
    let root = located(body).ok()?;
    let mut reader = Reader {
        any_number: true,
        ..Reader::default()
    };
    let spec = reader.scenario(&root);
    reader.faults.is_empty().then_some((root, spec))
}

/// A text without the byte-order mark that some editors put first.
pub(super) fn without_mark(text: &str) -> &str {
    text.strip_prefix('\u{feff}').unwrap_or(text)
}

/// The syntax, judged by the `ron` crate with its recursion limit on, then the tree with places.
fn located(text: &str) -> Result<Node, Diagnostic> {
    let at = |offset: usize, message: &str| {
        let (line, column) = end_of(text.get(..offset).unwrap_or(text));
        syntax_fault(line, column, message)
    };
    if LARGEST < text.len() {
        return Err(at(
            0,
            "the text is larger than 1 MiB, which no scenario is; name the right file",
        ));
    }
    if text.trim().is_empty() {
        return Err(at(
            0,
            "the file is empty; `stoop new` prints a commented starting point",
        ));
    }
    let options =
        ron::Options::default().with_default_extension(ron::extensions::Extensions::IMPLICIT_SOME);
    if let Err(error) = options.from_str::<serde::de::IgnoredAny>(text) {
        let message = match error.code {
            ron::Error::ExceededRecursionLimit => tree::TOO_DEEP.to_owned(),
            code => format!(
                "the file is not valid RON here: {}; `stoop new` prints a commented starting point",
                lower_first(&code.to_string())
            ),
        };
        let place = error.span.start;
        return Err(syntax_fault(place.line, place.col, &message));
    }
    tree::parse(text).map_err(|trouble| at(trouble.at, trouble.why))
}

fn syntax_fault(line: usize, column: usize, message: &str) -> Diagnostic {
    Diagnostic {
        line,
        column,
        field: String::new(),
        message: visible(&short(message, 300)).into_owned(),
    }
}

fn lower_first(text: &str) -> String {
    let mut letters = text.chars();
    match letters.next() {
        Some(first) => first.to_lowercase().chain(letters).collect(),
        None => String::new(),
    }
}
