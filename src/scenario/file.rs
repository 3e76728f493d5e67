//! Scenario files on disk: read whole or not at all, written whole or not at all.

mod save;

pub use save::{SaveError, replace, save};

use super::decode::{self, LARGEST};
use super::diagnostic::{Diagnostic, Diagnostics, end_of};
use crate::study::Case;
use sha2::{Digest, Sha256};
use std::fs::File;
use std::io::{self, Read};
use std::path::{Path, PathBuf};
use thiserror::Error;

/// A scenario that was read, with the text it came from.
#[derive(Clone, Debug)]
pub struct Loaded {
    /// The checked scenario.
    pub case: Case,
    /// The text, for saving into.
    pub text: String,
    /// What it was on disk; `None` for text that came from no file.
    pub stamp: Option<Stamp>,
}

/// What a file held when it was read or written, to notice changes by others: length and SHA-256.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Stamp {
    length: u64,
    digest: [u8; 32],
}

impl Stamp {
    fn of(bytes: &[u8]) -> Self {
        Self {
            length: bytes.len() as u64,
            digest: Sha256::digest(bytes).into(),
        }
    }

    /// The stamp of a stream of any length, without holding it in memory.
    fn of_stream(reader: &mut impl Read) -> io::Result<Self> {
        let mut hash = Sha256::new();
        let length = io::copy(reader, &mut HashWriter(&mut hash))?;
        Ok(Self {
            length,
            digest: hash.finalize().into(),
        })
    }
}

struct HashWriter<'a>(&'a mut Sha256);

impl io::Write for HashWriter<'_> {
    fn write(&mut self, bytes: &[u8]) -> io::Result<usize> {
        self.0.update(bytes);
        Ok(bytes.len())
    }

    fn flush(&mut self) -> io::Result<()> {
        Ok(())
    }
}

/// Why a scenario cannot be read.
#[derive(Debug, Error)]
pub enum LoadError {
    /// The file cannot be opened or read.
    #[error("{}: {why}", shown(path))]
    Unreadable {
        /// The file.
        path: PathBuf,
        /// What is wrong and what to do.
        why: String,
    },
    /// The text has faults. Transparent: shown with its chain of causes, they must not come twice.
    #[error(transparent)]
    Faulty(#[from] Diagnostics),
}

fn shown(path: &Path) -> String {
    crate::visible::visible(&path.display().to_string()).into_owned()
}

/// The scenarios that ship with the program, by file name; the first is the built-in one.
pub const SHIPPED: &[(&str, &str)] = &[
    ("whimbrel.ron", include_str!("../../scenarios/whimbrel.ron")),
    ("dotterel.ron", include_str!("../../scenarios/dotterel.ron")),
    ("avocet.ron", include_str!("../../scenarios/avocet.ron")),
    ("godwit.ron", include_str!("../../scenarios/godwit.ron")),
    (
        "turnstone.ron",
        include_str!("../../scenarios/turnstone.ron"),
    ),
];

/// The scenario that is opened when none is named.
///
/// # Panics
/// Never in a build that passes its tests: they load it.
pub fn built_in() -> Loaded {
    let (name, text) = SHIPPED[0];
    parse(name, text).expect("the built-in scenario is sound; a test loads it")
}

/// Reads a scenario from text; `name` is used in messages.
///
/// # Errors
/// Every fault with its place.
pub fn parse(name: &str, text: &str) -> Result<Loaded, Diagnostics> {
    decode::case(name, text).map(|case| Loaded {
        case,
        text: text.to_owned(),
        stamp: None,
    })
}

/// Reads a scenario from a file.
///
/// # Errors
/// The file cannot be read, is larger than [`LARGEST`], is not UTF-8, or has faults.
pub fn load(path: &Path) -> Result<Loaded, LoadError> {
    let unreadable = |why: String| LoadError::Unreadable {
        path: path.to_owned(),
        why,
    };
    let file = File::open(path).map_err(|error| unreadable(open_failure(&error)))?;
    let about = file
        .metadata()
        .map_err(|error| unreadable(open_failure(&error)))?;
    if about.is_dir() {
        return Err(unreadable(
            "this is a directory; name a scenario file in it".to_owned(),
        ));
    }
    if (LARGEST as u64) < about.len() {
        return Err(unreadable(too_large(Some(about.len()))));
    }
    let bytes = read_bounded(file).map_err(unreadable)?;
    let text = utf8(&shown(path), &bytes)?;
    let mut loaded = parse(&shown(path), text)?;
    loaded.stamp = Some(Stamp::of(&bytes));
    Ok(loaded)
}

/// Reads a scenario from a stream such as standard input; `name` is used in messages.
///
/// # Errors
/// As [`load`].
pub fn read_from(reader: impl Read, name: &str) -> Result<Loaded, LoadError> {
    let bytes = read_bounded(reader).map_err(|why| LoadError::Unreadable {
        path: PathBuf::from(name),
        why,
    })?;
    Ok(parse(name, utf8(name, &bytes)?)?)
}

fn open_failure(error: &io::Error) -> String {
    match error.kind() {
        io::ErrorKind::NotFound => {
            "there is no such file; `stoop new` prints a starting point, and without a file the built-in scenario opens".to_owned()
        }
        io::ErrorKind::PermissionDenied => {
            "reading it is not permitted; check its permissions".to_owned()
        }
        _ => format!("cannot be opened: {error}"),
    }
}

fn too_large(length: Option<u64>) -> String {
    let length = length.map_or_else(String::new, |length| format!(" ({length} bytes)"));
    format!("is larger than 1 MiB{length}, which no scenario is; name the right file")
}

/// Reads at most one byte more than allowed, so that an endless stream costs nothing.
fn read_bounded(reader: impl Read) -> Result<Vec<u8>, String> {
    let mut bytes = Vec::new();
    reader
        .take(LARGEST as u64 + 1)
        .read_to_end(&mut bytes)
        .map_err(|error| format!("cannot be read: {error}"))?;
    if LARGEST < bytes.len() {
        return Err(too_large(None));
    }
    Ok(bytes)
}

fn utf8<'a>(name: &str, bytes: &'a [u8]) -> Result<&'a str, Diagnostics> {
    std::str::from_utf8(bytes).map_err(|error| {
        let sound = bytes.get(..error.valid_up_to()).unwrap_or(&[]);
        let (line, column) = end_of(std::str::from_utf8(sound).unwrap_or(""));
        Diagnostics {
            file: name.to_owned(),
            faults: vec![Diagnostic {
                line,
                column,
                field: String::new(),
                message: "the file is not UTF-8 text from here on; save it as UTF-8".to_owned(),
            }],
        }
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn what_ships_loads() {
        for (name, text) in SHIPPED {
            parse(name, text).unwrap_or_else(|faults| panic!("{faults}"));
        }
        assert!(built_in().stamp.is_none());
    }

    #[test]
    fn an_endless_stream_is_refused() {
        let error = read_from(io::repeat(b' '), "standard input").expect_err("too large");
        assert_eq!(
            error.to_string(),
            "standard input: is larger than 1 MiB, which no scenario is; name the right file"
        );
    }

    #[test]
    fn faults_are_said_once_in_a_chain_of_causes() {
        let error = read_from(&b"(format: 2)"[..], "two.ron").expect_err("refused");
        let once = error.to_string();
        assert_eq!(format!("{:#}", anyhow::Error::new(error)), once);
    }

    #[test]
    fn a_stamp_of_a_stream_is_that_of_its_bytes() {
        let bytes = vec![7; 100_000];
        assert_eq!(
            Stamp::of_stream(&mut bytes.as_slice()).expect("memory reads"),
            Stamp::of(&bytes)
        );
    }
}
