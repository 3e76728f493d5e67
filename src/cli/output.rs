//! Where results go: standard output, or a file written whole or not at all.

use super::args::{OutputArgs, SourceArgs};
use crate::scenario::file;
use crate::visible::visible;
use anyhow::{Context, Result, bail};
use std::fs;
use std::io::{self, Write};
use std::path::Path;

/// Writes the result of a command that read a scenario.
///
/// # Errors
/// As [`put`]; also where the result would replace the scenario it came from.
pub(super) fn put_beside(source: &SourceArgs, args: &OutputArgs, text: &str) -> Result<()> {
    if let Some(path) = &args.output
        && same_file(path, &source.file)
    {
        bail!(
            "{} is the scenario itself; give --output another name",
            shown(path)
        );
    }
    put(args, text)
}

/// Writes a result.
///
/// # Errors
/// The file or standard output cannot be written. A closed pipe is an error of kind `BrokenPipe`, which `main` takes for a
/// quiet end.
pub(super) fn put(args: &OutputArgs, text: &str) -> Result<()> {
    let Some(path) = &args.output else {
        return to_stdout(text);
    };
    let about = fs::metadata(path).ok();
    if about.as_ref().is_some_and(fs::Metadata::is_dir) {
        bail!("{} is a directory; give a file name in it", shown(path));
    }
    let written = match &about {
        // A pipe or a device takes what comes; there is nothing to replace. Names such as /dev/stdout lead there by links
        // that only the system can follow, so the path is opened as it is.
        Some(about) if !about.is_file() => fs::OpenOptions::new()
            .write(true)
            .open(path)
            .and_then(|mut file| file.write_all(text.as_bytes())),
        Some(about) if about.permissions().readonly() => bail!(
            "{} is read-only; give --output another name, or allow writing",
            shown(path)
        ),
        _ => file::replace(path, text.as_bytes(), None),
    };
    written
        .map_err(in_words)
        .with_context(|| format!("{} cannot be written, nothing was changed", shown(path)))
}

/// Writes a scenario into a file that must not be there yet.
///
/// # Errors
/// A file is there already, or it cannot be written.
pub(super) fn put_new(args: &OutputArgs, text: &str) -> Result<()> {
    match &args.output {
        Some(path) if fs::metadata(path).is_ok_and(|about| about.is_file()) => {
            bail!(
                "{} exists already and is left as it is; give --output another name",
                shown(path)
            )
        }
        _ => put(args, text),
    }
}

/// Writes to standard output and sees it through to the end.
pub(super) fn to_stdout(text: &str) -> Result<()> {
    let mut out = io::stdout().lock();
    out.write_all(text.as_bytes())
        .and_then(|()| out.flush())
        .map_err(in_words)
        .context("standard output cannot be written")
}

/// The error with a sentence that says what to do, its kind kept.
fn in_words(error: io::Error) -> io::Error {
    let why = match error.kind() {
        io::ErrorKind::StorageFull => "no space is left; make room and try again",
        io::ErrorKind::NotFound => "the folder does not exist; make it first, or choose another",
        io::ErrorKind::PermissionDenied => "writing there is not permitted; choose another place",
        io::ErrorKind::ReadOnlyFilesystem => "the file system is read-only; choose another place",
        _ => return error,
    };
    io::Error::new(error.kind(), why)
}

/// Whether two names lead to one file. Names that lead nowhere are no file.
fn same_file(a: &Path, b: &Path) -> bool {
    match (fs::canonicalize(a), fs::canonicalize(b)) {
        (Ok(a), Ok(b)) => a == b && a.is_file(),
        _ => false,
    }
}

fn shown(path: &Path) -> String {
    visible(&path.display().to_string()).into_owned()
}
