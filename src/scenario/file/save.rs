//! Writing files whole or not at all.

use super::{Stamp, shown};
use std::fs::{self, File, Metadata, Permissions};
use std::io::{self, Write};
use std::path::{Path, PathBuf};
use tempfile::NamedTempFile;
use thiserror::Error;

/// Why a scenario cannot be written. The file on disk is as it was.
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

/// Writes a scenario: into a new file beside it, synced, then put in its place in one step. The version before is kept as `NAME~`.
///
/// `expected` is the stamp of what was read; `None` means that no file should be there yet. With `force` neither is asked.
/// A symbolic link is followed, so that what it points to is replaced and the link stays. Where the file says the same
/// already, nothing is written and the version before stays.
///
/// # Errors
/// The file is not as expected, or cannot be written; it is as it was then, and so is `NAME~` unless the last step fails.
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
    let unable = |error: io::Error| failed(write_failure(&error));
    let target = destination(path).map_err(unable)?;
    let stamp = Stamp::of(text.as_bytes());
    let present = match fs::metadata(&target) {
        Ok(about) => Some(about),
        Err(error) if error.kind() == io::ErrorKind::NotFound => None,
        Err(error) => return Err(unable(error)),
    };
    let on_disk = match &present {
        None => None,
        Some(about) if about.is_dir() => {
            return Err(failed("this is a directory; give a file name".to_owned()));
        }
        Some(about) if !about.is_file() => {
            return Err(failed(
                "this is a device or a pipe; save to a file".to_owned(),
            ));
        }
        Some(about) if about.permissions().readonly() => {
            return Err(failed(
                "it is read-only; save under another name, or allow writing".to_owned(),
            ));
        }
        Some(_) => {
            let mut file = File::open(&target).map_err(unable)?;
            Some(Stamp::of_stream(&mut file).map_err(unable)?)
        }
    };
    if !force {
        match (&on_disk, expected) {
            (Some(found), Some(expected)) if found != expected => {
                return Err(SaveError::Changed(path.to_owned()));
            }
            (Some(_), None) => return Err(SaveError::Exists(path.to_owned())),
            (None, Some(_)) => return Err(SaveError::Removed(path.to_owned())),
            _ => {}
        }
    }
    if on_disk.as_ref() == Some(&stamp) {
        return Ok(stamp);
    }
    // Both files are complete and on disk before either name is touched.
    let new = prepared(&target, present.as_ref(), |file| {
        file.write_all(text.as_bytes())
    })
    .map_err(unable)?;
    if let Some(about) = &present {
        let backup = prepared(&target, Some(about), |file| {
            io::copy(&mut File::open(&target)?, file).map(|_| ())
        })
        .map_err(unable)?;
        let name = backup_name(&target);
        backup.persist(&name).map_err(|error| {
            failed(format!(
                "the version before cannot be kept as {}: {}",
                shown(&name),
                write_failure(&error.error)
            ))
        })?;
    }
    put_in_place(new, &target).map_err(unable)?;
    Ok(stamp)
}

/// Writes a file whole: a new file in the same folder, synced, renamed over the old one, folder synced. Symbolic links are followed;
/// a device or a pipe is written to instead of replaced. Without `permissions` those of the old file are kept.
///
/// # Errors
/// Whatever the system says; the old file is untouched and no stray file is left.
pub fn replace(path: &Path, bytes: &[u8], permissions: Option<Permissions>) -> io::Result<()> {
    let target = destination(path)?;
    let present = fs::metadata(&target).ok();
    if let Some(about) = &present
        && !about.is_file()
        && !about.is_dir()
    {
        return fs::OpenOptions::new()
            .write(true)
            .open(&target)?
            .write_all(bytes);
    }
    let file = prepared(&target, present.as_ref(), |file| file.write_all(bytes))?;
    if let Some(permissions) = permissions {
        file.as_file().set_permissions(permissions)?;
    }
    put_in_place(file, &target)
}

/// Where a path leads: links are followed, also one whose file is not there yet.
fn destination(path: &Path) -> io::Result<PathBuf> {
    // More links than any system follows in one path.
    const MOST_LINKS: usize = 40;
    let mut at = path.to_owned();
    for _ in 0..MOST_LINKS {
        match fs::read_link(&at) {
            // A relative link starts from its own folder; an absolute one replaces the whole.
            Ok(next) => at = folder(&at).join(next),
            Err(_) => return Ok(at),
        }
    }
    Err(io::Error::other(
        "too many symbolic links lead on from one another",
    ))
}

fn folder(path: &Path) -> &Path {
    path.parent()
        .filter(|folder| !folder.as_os_str().is_empty())
        .unwrap_or(Path::new("."))
}

/// `NAME.ron~`.
fn backup_name(path: &Path) -> PathBuf {
    let mut name = path.as_os_str().to_owned();
    name.push("~");
    PathBuf::from(name)
}

/// A complete, synced file beside `target` that goes away unless it is put in place, with the permissions of what is there.
fn prepared(
    target: &Path,
    present: Option<&Metadata>,
    fill: impl FnOnce(&mut File) -> io::Result<()>,
) -> io::Result<NamedTempFile> {
    let mut builder = tempfile::Builder::new();
    builder.prefix(".stoop-");
    // A new file gets what the user's mask leaves of 666, not a temporary file's 600.
    #[cfg(unix)]
    if present.is_none() {
        use std::os::unix::fs::PermissionsExt;
        builder.permissions(Permissions::from_mode(0o666));
    }
    let mut file = builder.tempfile_in(folder(target))?;
    fill(file.as_file_mut())?;
    if let Some(about) = present {
        // Only the superuser may give files away; for everybody else the owner is right already.
        #[cfg(unix)]
        {
            use std::os::unix::fs::MetadataExt;
            let _ = std::os::unix::fs::fchown(file.as_file(), Some(about.uid()), Some(about.gid()));
        }
        file.as_file().set_permissions(about.permissions())?;
    }
    file.as_file().sync_all()?;
    Ok(file)
}

fn put_in_place(file: NamedTempFile, target: &Path) -> io::Result<()> {
    file.persist(target).map_err(|error| error.error)?;
    #[cfg(unix)]
    if let Ok(folder) = File::open(folder(target)) {
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
        io::ErrorKind::NotADirectory => {
            "a part of the path is a file, not a folder; choose another place".to_owned()
        }
        io::ErrorKind::IsADirectory => {
            "a directory has that name; move it, or choose another name".to_owned()
        }
        io::ErrorKind::PermissionDenied => {
            "writing there is not permitted; choose another place".to_owned()
        }
        io::ErrorKind::StorageFull | io::ErrorKind::QuotaExceeded => {
            "the disk is full; make room and save again".to_owned()
        }
        io::ErrorKind::ReadOnlyFilesystem => {
            "the file system is read-only; choose another place".to_owned()
        }
        io::ErrorKind::InvalidFilename => {
            "the name is not allowed; choose a shorter one".to_owned()
        }
        _ => error.to_string(),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use tempfile::TempDir;

    fn room() -> TempDir {
        tempfile::tempdir().expect("a folder for the test")
    }

    fn read(path: &Path) -> String {
        fs::read_to_string(path).expect("readable")
    }

    fn names(folder: &Path) -> Vec<String> {
        let mut names: Vec<String> = fs::read_dir(folder)
            .expect("folder")
            .map(|entry| {
                entry
                    .expect("entry")
                    .file_name()
                    .to_string_lossy()
                    .into_owned()
            })
            .collect();
        names.sort();
        names
    }

    #[test]
    fn saving_keeps_the_version_before() {
        let room = room();
        let path = room.path().join("a.ron");
        let first = save(&path, "one", None, false).expect("a new file");
        let second = save(&path, "two", Some(&first), false).expect("as expected");
        assert_eq!(read(&path), "two");
        assert_eq!(read(&backup_name(&path)), "one");
        // Saving the same again does not wipe out the version before.
        assert_eq!(
            save(&path, "two", Some(&second), false).expect("unchanged"),
            second
        );
        assert_eq!(read(&backup_name(&path)), "one");
        assert_eq!(names(room.path()), ["a.ron", "a.ron~"]);
    }

    #[test]
    fn what_others_did_is_not_overwritten_unless_told() {
        let room = room();
        let path = room.path().join("a.ron");
        fs::write(&path, "theirs").expect("written");
        let exists = save(&path, "mine", None, false).expect_err("exists");
        assert!(matches!(exists, SaveError::Exists(_)) && exists.is_changed());
        let stamp = Stamp::of(b"before");
        let changed = save(&path, "mine", Some(&stamp), false).expect_err("changed");
        assert!(matches!(changed, SaveError::Changed(_)) && changed.is_changed());
        assert_eq!(read(&path), "theirs");
        save(&path, "mine", Some(&stamp), true).expect("told to");
        assert_eq!(
            (read(&path), read(&backup_name(&path))),
            ("mine".to_owned(), "theirs".to_owned())
        );
        fs::remove_file(&path).expect("removed");
        let removed = save(&path, "mine", Some(&stamp), false).expect_err("removed");
        assert!(matches!(removed, SaveError::Removed(_)) && removed.is_changed());
        assert!(!path.exists());
    }

    #[test]
    fn a_large_file_in_the_way_is_kept_whole() {
        let room = room();
        let path = room.path().join("a.ron");
        let large = vec![b'x'; 20 * 1024 * 1024];
        fs::write(&path, &large).expect("written");
        save(&path, "mine", None, true).expect("told to");
        assert!(fs::read(backup_name(&path)).expect("readable") == large);
    }

    #[test]
    fn places_that_cannot_be_written_are_named_and_left_alone() {
        let room = room();
        let missing = room.path().join("no/such/a.ron");
        let error = save(&missing, "x", None, false).expect_err("no folder");
        assert!(error.to_string().contains("the folder does not exist"));
        assert!(error.to_string().contains("a.ron"));
        assert!(!error.is_changed());
        let error = save(room.path(), "x", None, true).expect_err("a directory");
        assert!(error.to_string().contains("directory"));
        let file = room.path().join("f");
        fs::write(&file, "f").expect("written");
        let error = save(&file.join("a.ron"), "x", None, false).expect_err("below a file");
        assert!(error.to_string().contains("not a folder"), "{error}");
        assert_eq!(names(room.path()), ["f"]);
    }

    #[test]
    fn a_backup_that_cannot_be_kept_stops_the_saving() {
        let room = room();
        let path = room.path().join("a.ron");
        fs::write(&path, "one").expect("written");
        fs::create_dir(backup_name(&path)).expect("in the way");
        let error = save(&path, "two", None, true).expect_err("no backup");
        assert!(error.to_string().contains("cannot be kept as"), "{error}");
        assert_eq!(read(&path), "one");
        assert_eq!(names(room.path()), ["a.ron", "a.ron~"]);
    }

    #[test]
    fn every_system_failure_says_what_to_do() {
        for kind in [
            io::ErrorKind::NotFound,
            io::ErrorKind::PermissionDenied,
            io::ErrorKind::StorageFull,
            io::ErrorKind::ReadOnlyFilesystem,
            io::ErrorKind::InvalidFilename,
        ] {
            assert!(write_failure(&kind.into()).contains("; "), "{kind:?}");
        }
    }

    #[cfg(unix)]
    mod unix {
        use super::*;
        use std::os::unix::fs::{PermissionsExt, symlink};

        #[test]
        fn links_stay_and_lead_to_what_is_written() {
            let room = room();
            let real = room.path().join("real.ron");
            let link = room.path().join("link.ron");
            symlink("real.ron", &link).expect("linked");
            let first = save(&link, "one", None, false).expect("through a link to nothing yet");
            save(&link, "two", Some(&first), false).expect("through the link");
            replace(&link, b"three", None).expect("through the link");
            assert!(fs::symlink_metadata(&link).expect("there").is_symlink());
            assert_eq!(read(&real), "three");
            assert_eq!(names(room.path()), ["link.ron", "real.ron", "real.ron~"]);
        }

        #[test]
        fn permissions_stay() {
            let room = room();
            let path = room.path().join("a.ron");
            fs::write(&path, "one").expect("written");
            fs::set_permissions(&path, Permissions::from_mode(0o640)).expect("set");
            save(&path, "two", None, true).expect("saved");
            replace(&path, b"three", None).expect("replaced");
            for each in [&path, &backup_name(&path)] {
                let mode = fs::metadata(each).expect("there").permissions().mode();
                assert_eq!(mode & 0o777, 0o640);
            }
        }

        #[test]
        fn a_read_only_file_is_refused() {
            let room = room();
            let path = room.path().join("a.ron");
            fs::write(&path, "one").expect("written");
            fs::set_permissions(&path, Permissions::from_mode(0o444)).expect("set");
            let error = save(&path, "two", None, true).expect_err("read-only");
            assert!(error.to_string().contains("read-only"));
            assert_eq!(read(&path), "one");
        }

        /// A socket of our own stands for devices and pipes: no test may go near the machine's own devices.
        #[test]
        fn what_is_no_file_is_not_replaced() {
            use std::os::unix::fs::FileTypeExt;
            let room = room();
            let path = room.path().join("s");
            let _socket = std::os::unix::net::UnixListener::bind(&path).expect("a socket");
            assert!(replace(&path, b"x", None).is_err());
            let error = save(&path, "x", None, true).expect_err("no place for a scenario");
            assert!(error.to_string().contains("device"));
            let kind = fs::symlink_metadata(&path).expect("there").file_type();
            assert!(kind.is_socket());
            assert_eq!(names(room.path()), ["s"]);
        }
    }
}
