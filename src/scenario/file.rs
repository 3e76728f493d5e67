//! Scenario files on disk: read whole or not at all, written whole or not at all.

use super::decode::{self, LARGEST};
use super::diagnostic::{Diagnostic, Diagnostics, place};
use crate::study::Case;
use sha2::{Digest, Sha256};
use std::fs::{self, File};
use std::io::{self, Read, Write};
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

/// What a file held when it was read or written, to notice changes by others.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Stamp {
    length: usize,
    digest: [u8; 32],
}

impl Stamp {
    fn of(bytes: &[u8]) -> Self {
        Self {
            length: bytes.len(),
            digest: Sha256::digest(bytes).into(),
        }
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
    /// The text has faults.
    #[error(transparent)]
    Faulty(#[from] Diagnostics),
}

/// Why a scenario cannot be written. Nothing on disk has changed.
#[derive(Debug, Error)]
pub enum SaveError {
    /// The file on disk is not what was read.
    #[error("{} changed on disk since it was read", shown(.0))]
    Changed(PathBuf),
    /// A file stands where a new one was to be made.
    #[error("{} exists already", shown(.0))]
    Exists(PathBuf),
    /// The file is gone.
    #[error("{} was removed since it was read", shown(.0))]
    Removed(PathBuf),
    /// Writing failed.
    #[error("{} cannot be written: {why}. Nothing was changed", shown(path))]
    Failed {
        /// The file.
        path: PathBuf,
        /// What is wrong and what to do.
        why: String,
    },
}

impl SaveError {
    /// Whether writing anyway (`force`) is a sensible answer.
    pub fn is_changed(&self) -> bool {
        matches!(
            self,
            SaveError::Changed(_) | SaveError::Exists(_) | SaveError::Removed(_)
        )
    }
}

fn shown(path: &Path) -> String {
    crate::visible::visible(&path.display().to_string()).into_owned()
}

/// The scenarios that ship with the program, by file name.
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
/// The file cannot be read, is too large, is not UTF-8, or has faults.
pub fn load(path: &Path) -> Result<Loaded, LoadError> {
    let unreadable = |why: String| LoadError::Unreadable {
        path: path.to_owned(),
        why,
    };
    let file = File::open(path).map_err(|error| unreadable(open_failure(&error)))?;
    let about = file
        .metadata()
        .map_err(|error| unreadable(error.to_string()))?;
    if about.is_dir() {
        return Err(unreadable(
            "this is a directory; name a scenario file in it".to_owned(),
        ));
    }
    let bytes = read_bounded(file).map_err(unreadable)?;
    let text = utf8(&shown(path), &bytes)?;
    let mut loaded = parse(&shown(path), text)?;
    loaded.stamp = Some(Stamp::of(&bytes));
    Ok(loaded)
}

/// Reads a scenario from a stream such as standard input.
///
/// # Errors
/// As [`load`].
pub fn read_from(reader: impl Read, name: &str) -> Result<Loaded, LoadError> {
    let unreadable = |why: String| LoadError::Unreadable {
        path: PathBuf::from(name),
        why,
    };
    let bytes = read_bounded(reader).map_err(unreadable)?;
    Ok(parse(name, utf8(name, &bytes)?)?)
}

fn open_failure(error: &io::Error) -> String {
    match error.kind() {
        io::ErrorKind::NotFound => {
            "there is no such file; `stoop new` prints a starting point, and without a file the built-in scenario opens".to_owned()
        }
        io::ErrorKind::PermissionDenied => "reading it is not permitted; check its permissions".to_owned(),
        _ => format!("cannot be opened: {error}"),
    }
}

/// Reads at most one byte more than allowed, so that an endless or huge file costs nothing.
fn read_bounded(reader: impl Read) -> Result<Vec<u8>, String> {
    let mut bytes = Vec::new();
    reader
        .take(LARGEST as u64 + 1)
        .read_to_end(&mut bytes)
        .map_err(|error| format!("cannot be read: {error}"))?;
    if LARGEST < bytes.len() {
        return Err("is larger than 1 MiB, which no scenario is; name the right file".to_owned());
    }
    Ok(bytes)
}

fn utf8<'a>(name: &str, bytes: &'a [u8]) -> Result<&'a str, Diagnostics> {
    std::str::from_utf8(bytes).map_err(|error| {
        let sound = std::str::from_utf8(&bytes[..error.valid_up_to()]).unwrap_or("");
        let (line, column) = place(sound, sound.len());
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

/// Writes a scenario: into a new file beside it, synced, then put in its place in one step. The version before is kept as `NAME~`.
///
/// `expected` is the stamp of what was read; `None` means that no file should be there yet. With `force` neither is asked.
/// A symbolic link is followed, so that what it points to is replaced and the link stays.
///
/// # Errors
/// The file is not as expected, or cannot be written; nothing on disk has changed then.
pub fn save(
    path: &Path,
    text: &str,
    expected: Option<&Stamp>,
    force: bool,
) -> Result<Stamp, SaveError> {
    let failed = |why: String| SaveError::Failed {
        path: path.to_owned(),
        why,
    };
    let target = fs::canonicalize(path).unwrap_or_else(|_| path.to_owned());
    let present = match File::open(&target) {
        Ok(file) => {
            let about = file.metadata().map_err(|error| failed(error.to_string()))?;
            if about.is_dir() {
                return Err(failed("this is a directory; give a file name".to_owned()));
            }
            if about.permissions().readonly() {
                return Err(failed(
                    "it is read-only; save under another name, or allow writing".to_owned(),
                ));
            }
            let mut bytes = Vec::new();
            file.take(16 * LARGEST as u64)
                .read_to_end(&mut bytes)
                .map_err(|error| failed(error.to_string()))?;
            Some((bytes, about.permissions()))
        }
        Err(error) if error.kind() == io::ErrorKind::NotFound => None,
        Err(error) => return Err(failed(write_failure(&error))),
    };
    if !force {
        match (&present, expected) {
            (Some((bytes, _)), Some(expected)) if Stamp::of(bytes) != *expected => {
                return Err(SaveError::Changed(path.to_owned()));
            }
            (Some(_), None) => return Err(SaveError::Exists(path.to_owned())),
            (None, Some(_)) => return Err(SaveError::Removed(path.to_owned())),
            _ => {}
        }
    }
    let permissions = present.as_ref().map(|(_, permissions)| permissions.clone());
    // The backup is complete before the file itself is touched.
    if let Some((bytes, _)) = &present {
        replace(&backup_name(&target), bytes, permissions.clone())
            .map_err(|error| failed(write_failure(&error)))?;
    }
    replace(&target, text.as_bytes(), permissions)
        .map_err(|error| failed(write_failure(&error)))?;
    Ok(Stamp::of(text.as_bytes()))
}

/// `NAME.ron~`.
fn backup_name(path: &Path) -> PathBuf {
    let mut name = path.as_os_str().to_owned();
    name.push("~");
    PathBuf::from(name)
}

/// Writes a file whole: new file in the same folder, synced, renamed over the old one, folder synced.
///
/// # Errors
/// Whatever the system says; the old file is untouched and no stray file is left.
pub fn replace(path: &Path, bytes: &[u8], permissions: Option<fs::Permissions>) -> io::Result<()> {
    let folder = path
        .parent()
        .filter(|folder| !folder.as_os_str().is_empty())
        .unwrap_or(Path::new("."));
    let mut builder = tempfile::Builder::new();
    builder.prefix(".stoop-");
    // A new file gets what the user's mask leaves of 666, not a temporary file's 600.
    #[cfg(unix)]
    {
        use std::os::unix::fs::PermissionsExt;
        builder.permissions(fs::Permissions::from_mode(0o666));
    }
    let mut file = builder.tempfile_in(folder)?;
    file.write_all(bytes)?;
    if let Some(permissions) = permissions {
        file.as_file().set_permissions(permissions)?;
    }
    file.as_file().sync_all()?;
    file.persist(path).map_err(|error| error.error)?;
    #[cfg(unix)]
    if let Ok(folder) = File::open(folder) {
        // Some file systems do not sync folders; the rename itself has happened.
        let _ = folder.sync_all();
    }
    Ok(())
}

fn write_failure(error: &io::Error) -> String {
    match error.kind() {
        io::ErrorKind::NotFound => {
            "the folder does not exist; make it first, or choose another".to_owned()
        }
        io::ErrorKind::PermissionDenied => {
            "writing there is not permitted; choose another place".to_owned()
        }
        io::ErrorKind::StorageFull => "the disk is full; make room and save again".to_owned(),
        io::ErrorKind::ReadOnlyFilesystem => {
            "the file system is read-only; choose another place".to_owned()
        }
        _ => error.to_string(),
    }
}
