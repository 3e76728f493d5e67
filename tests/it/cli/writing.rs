//! Where results go: files that are never half written, never the scenario itself, and streams that fail.

use super::{WHIMBREL, code, run, stderr, stdout, stoop};
use std::fs;
use std::process::Stdio;

#[test]
fn a_result_never_replaces_its_scenario() {
    let folder = tempfile::tempdir().expect("folder");
    let path = folder.path().join("mine.ron");
    fs::copy(WHIMBREL, &path).expect("copied");
    let name = path.display().to_string();
    for args in [
        vec!["brief", &name, "--output", &name],
        vec!["check", &name, "--output", &name],
        vec![
            "sweep",
            &name,
            "--over",
            "target-altitude",
            "--output",
            &name,
        ],
    ] {
        let output = run(&args);
        assert_eq!(code(&output), 2);
        assert!(stderr(&output).contains("is the scenario itself"));
    }
    let before = fs::read(WHIMBREL).expect("readable");
    assert_eq!(fs::read(&path).expect("readable"), before);
    let output = run(&["new", "--output", &name]);
    assert_eq!(code(&output), 2);
    assert!(stderr(&output).contains("exists already"));
    assert_eq!(fs::read(&path).expect("readable"), before);
    let fresh = folder.path().join("fresh.ron");
    let output = run(&["new", "--output", &fresh.display().to_string()]);
    assert_eq!(code(&output), 0);
    assert_eq!(
        fs::read_to_string(&fresh).expect("written"),
        stdout(&run(&["new"]))
    );
    assert_eq!(fs::read_dir(folder.path()).expect("folder").count(), 2);
}

#[test]
fn places_that_cannot_be_written_are_named_with_what_to_do() {
    let folder = tempfile::tempdir().expect("folder");
    let inside = folder.path().display().to_string();
    let output = run(&["brief", WHIMBREL, "--output", &inside]);
    assert_eq!(code(&output), 2);
    assert!(stderr(&output).contains("is a directory; give a file name in it"));
    let kept = folder.path().join("kept.txt");
    fs::write(&kept, "mine").expect("written");
    let mut permissions = fs::metadata(&kept).expect("there").permissions();
    permissions.set_readonly(true);
    fs::set_permissions(&kept, permissions).expect("set");
    let output = run(&["brief", WHIMBREL, "--output", &kept.display().to_string()]);
    assert_eq!(code(&output), 2);
    assert!(stderr(&output).contains("is read-only"));
    assert_eq!(fs::read_to_string(&kept).expect("readable"), "mine");
    let nowhere = folder.path().join("no/where.txt").display().to_string();
    let output = run(&["brief", WHIMBREL, "--output", &nowhere]);
    assert!(stderr(&output).contains("the folder does not exist"));
    assert!(!stderr(&output).contains("os error"));
    assert_eq!(fs::read_dir(folder.path()).expect("folder").count(), 1);
}

#[test]
fn a_failed_command_leaves_no_file() {
    let folder = tempfile::tempdir().expect("folder");
    let path = folder.path().join("x.txt").display().to_string();
    for args in [
        vec!["brief", WHIMBREL, "--set", "nonsense=1", "--output", &path],
        vec!["brief", "tests/bad/many_faults.ron", "--output", &path],
        vec!["sweep", WHIMBREL, "--over", "thrust", "--output", &path],
    ] {
        assert_eq!(code(&run(&args)), 2);
    }
    assert_eq!(fs::read_dir(folder.path()).expect("folder").count(), 0);
    // Nothing flyable is an answer, and answers are written.
    let args = [
        "brief",
        WHIMBREL,
        "--set",
        "propellant=0",
        "--output",
        &path,
    ];
    assert_eq!(code(&run(&args)), 1);
    assert!(
        fs::read_to_string(&path)
            .expect("written")
            .contains("No way can be flown")
    );
}

/// A pipe named as an output is written to, not replaced.
#[cfg(target_os = "linux")]
#[test]
fn an_output_may_be_a_pipe_or_a_device() {
    let output = run(&["new", "--output", "/dev/stdout"]);
    assert_eq!(code(&output), 0, "{}", stderr(&output));
    assert_eq!(output.stdout, run(&["new"]).stdout);
    assert_eq!(code(&run(&["new", "--output", "/dev/null"])), 0);
    let full = run(&["brief", WHIMBREL, "--output", "/dev/full"]);
    assert_eq!(code(&full), 2);
    assert!(stderr(&full).contains("no space is left"));
}

#[cfg(target_os = "linux")]
#[test]
fn every_command_says_that_the_disk_is_full() {
    for args in [
        vec!["--help"],
        vec!["--version"],
        vec!["new"],
        vec!["bodies"],
        vec!["knobs"],
        vec!["check", WHIMBREL],
        vec!["brief", WHIMBREL, "--format", "json"],
        vec![WHIMBREL],
    ] {
        let full = fs::OpenOptions::new()
            .write(true)
            .open("/dev/full")
            .expect("/dev/full");
        let output = stoop(&args)
            .stdout(full)
            .stderr(Stdio::piped())
            .output()
            .expect("the binary runs");
        assert_eq!(code(&output), 2, "{args:?}");
        let said = stderr(&output);
        assert!(
            said.starts_with("stoop: standard output cannot be written"),
            "{args:?}: {said}"
        );
        assert_eq!(said.lines().count(), 1, "{args:?}: {said}");
    }
}

/// The shell's own pipe, with a reader that takes one line of more than any pipe holds.
#[cfg(unix)]
#[test]
fn the_first_line_through_a_shell_pipe() {
    let script = r#"{ "$0" sweep "$1" --over target-altitude --points 20000 --format json; echo "code $?" >&2; } | head -n 1"#;
    let output = std::process::Command::new("sh")
        .args(["-c", script, env!("CARGO_BIN_EXE_stoop"), WHIMBREL])
        .current_dir(env!("CARGO_MANIFEST_DIR"))
        .stdin(Stdio::null())
        .output()
        .expect("a shell");
    assert_eq!(stdout(&output), "{\n");
    assert_eq!(stderr(&output), "code 0\n");
}
