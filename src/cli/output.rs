//! Where results go: standard output, or a file written whole or not at all.

use super::args::OutputArgs;
use crate::scenario::file;
use anyhow::{Context, Result};
use std::io::Write;

/// Writes a result.
///
/// # Errors
/// The file or standard output cannot be written. A closed pipe is an error of kind `BrokenPipe`, which `main` takes for a quiet end.
pub(super) fn put(args: &OutputArgs, text: &str) -> Result<()> {
    match &args.output {
        Some(path) => file::replace(path, text.as_bytes(), None).with_context(|| {
            format!(
                "{} cannot be written; nothing was changed",
                crate::visible::ascii(&path.display().to_string())
            )
        }),
        None => to_stdout(text),
    }
}

/// Writes to standard output and sees it through to the end.
pub(super) fn to_stdout(text: &str) -> Result<()> {
    let mut out = std::io::stdout().lock();
    out.write_all(text.as_bytes())
        .and_then(|()| out.flush())
        .context("standard output cannot be written")
}
