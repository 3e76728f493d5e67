//! What keeps the program from answering, as plain sentences for standard error.

use crate::scenario::file::LoadError;
use crate::visible::visible;
use std::io;

/// The sentences for an error.
///
/// Faults of a file begin with their place, `file:line:column`, as editors and other programs expect it; everything else
/// begins with the program's name.
pub fn explain(error: &anyhow::Error) -> String {
    if let Some(LoadError::Faulty(faults)) = error.downcast_ref() {
        return faults.to_string();
    }
    let mut text = String::from("stoop");
    for cause in error.chain() {
        let cause = cause.to_string();
        // A cause that only passes on its own cause says the same again.
        if !text.ends_with(&cause) {
            text.push_str(": ");
            text.push_str(&cause);
        }
    }
    seen(&text)
}

/// What the argument parser has to say, without colours, and with the typed text made visible: a file name from the shell
/// is foreign text too.
pub fn usage(error: &clap::Error) -> String {
    seen(error.to_string().trim_end())
}

fn seen(text: &str) -> String {
    let lines: Vec<_> = text.lines().map(visible).collect();
    lines.join("\n")
}

/// Whether the reader of our output simply stopped reading.
pub fn is_closed_pipe(error: &anyhow::Error) -> bool {
    error.chain().any(|cause| {
        cause
            .downcast_ref::<io::Error>()
            .is_some_and(|error| error.kind() == io::ErrorKind::BrokenPipe)
    })
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::scenario::file;
    use anyhow::Context;

    #[test]
    fn faults_begin_with_their_place_and_come_once() {
        let faults = file::parse("x.ron", "(format: 1)").expect_err("a scenario needs more");
        let error = anyhow::Error::from(file::LoadError::from(faults.clone()));
        assert_eq!(explain(&error), faults.to_string());
        assert!(explain(&error).starts_with("x.ron:1:"));
    }

    #[test]
    fn causes_follow_and_are_not_repeated() {
        let io = io::Error::new(io::ErrorKind::StorageFull, "no space is left");
        let error = Err::<(), _>(io)
            .context("standard output cannot be written")
            .expect_err("an error");
        assert_eq!(
            explain(&error),
            "stoop: standard output cannot be written: no space is left"
        );
        assert!(!is_closed_pipe(&error));
        let closed = anyhow::Error::from(io::Error::from(io::ErrorKind::BrokenPipe)).context("x");
        assert!(is_closed_pipe(&closed));
        let foreign = anyhow::anyhow!("no file \u{1b}[31m");
        assert_eq!(explain(&foreign), "stoop: no file \\u{1b}[31m");
    }
}
