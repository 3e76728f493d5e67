//! Bad input: one broken file each, and what is said about it. The sentences are snapshots; they were read before they were accepted.

use proptest::prelude::*;
use std::fs;
use std::io::Cursor;
use std::path::{Path, PathBuf};
use stoop::scenario::{file, reference, write};
use stoop::visible::visible;

fn root() -> PathBuf {
    PathBuf::from(env!("CARGO_MANIFEST_DIR"))
}

/// Every file of `tests/bad`, by name.
fn broken() -> Vec<(String, Vec<u8>)> {
    let mut paths: Vec<PathBuf> = fs::read_dir(root().join("tests/bad"))
        .expect("folder")
        .map(|entry| entry.expect("entry").path())
        .collect();
    paths.sort();
    paths
        .iter()
        .map(|path| {
            let name = path.file_stem().unwrap_or_default().to_string_lossy();
            (name.into_owned(), fs::read(path).expect("readable"))
        })
        .collect()
}

fn said(name: &str, bytes: &[u8]) -> String {
    match file::read_from(Cursor::new(bytes), &format!("{name}.ron")) {
        Ok(loaded) => format!("loads; title: {}", visible(&loaded.case.spec().title)),
        Err(error) => error.to_string(),
    }
}

#[test]
fn every_broken_file_has_its_diagnostic() {
    for (name, bytes) in broken() {
        insta::assert_snapshot!(name.as_str(), said(&name, &bytes));
    }
}

#[test]
fn every_broken_file_is_refused_but_those_that_only_need_showing() {
    let loads: Vec<String> = broken()
        .into_iter()
        .filter(|(name, bytes)| said(name, bytes).starts_with("loads"))
        .map(|(name, _)| name)
        .collect();
    assert_eq!(loads, ["escapes_in_the_title"]);
}

#[test]
fn sentences_have_a_place_and_nothing_that_acts() {
    for (name, bytes) in broken() {
        let said = said(&name, &bytes);
        for line in said.lines().filter(|line| !line.starts_with("loads")) {
            assert_eq!(visible(line), line);
            let mut parts = line.splitn(4, ':');
            assert_eq!(parts.next(), Some(format!("{name}.ron").as_str()));
            for part in [parts.next(), parts.next()] {
                let number = part.and_then(|part| part.parse::<usize>().ok());
                assert!(number.is_some_and(|number| 0 < number), "{line}");
            }
            assert!(line.len() < 1000, "{line}");
        }
    }
}

#[test]
fn files_that_are_no_scenario_files() {
    let room = tempfile::tempdir().expect("a folder for the test");
    let at = |name: &str| room.path().join(name);
    let said = |path: &Path| {
        let error = file::load(path).expect_err("refused").to_string();
        error.replace(&room.path().display().to_string(), "ROOM")
    };
    fs::create_dir(at("folder.ron")).expect("made");
    // 100 MB that take no room on the disk, and must take none in memory.
    let sparse = fs::File::create(at("huge.ron")).expect("made");
    sparse.set_len(100_000_000).expect("grown");
    fs::write(at("empty.ron"), "").expect("written");
    insta::assert_snapshot!(
        [
            said(&at("missing.ron")),
            said(&at("folder.ron")),
            said(&at("huge.ron")),
            said(&at("empty.ron")),
        ]
        .join("\n")
    );
}

#[test]
fn deep_nesting_is_refused_without_a_crash() {
    for open in ["(", "[", "{", "Some(", "(a:", "[(", "/*"] {
        let text = open.repeat(200_000);
        assert!(file::parse("deep.ron", &text).is_err(), "{open}");
    }
    let text = "(".repeat(200_000);
    insta::assert_snapshot!(file::parse("deep.ron", &text).expect_err("refused"));
}

/// As many faults as fit into the largest file: work must not grow with their square, and what is listed is bounded.
#[test]
fn a_flood_of_faults_is_bounded() {
    let line = "    zz: 1,\n";
    let text = format!("(\n{})", line.repeat(90_000));
    let faults = file::parse("flood.ron", &text).expect_err("refused").faults;
    assert!(faults.len() <= 201, "{}", faults.len());
    let last = faults.last().map(|fault| fault.message.as_str());
    assert_eq!(last, Some("89804 more faults are not shown"));
}

#[test]
fn the_largest_size_is_a_megabyte() {
    let (_, text) = file::SHIPPED[0];
    let padded = |length: usize| format!("{text}{}", " ".repeat(length - text.len()));
    assert!(file::parse("full.ron", &padded(1024 * 1024)).is_ok());
    assert!(file::parse("over.ron", &padded(1024 * 1024 + 1)).is_err());
}

proptest! {
    /// Damaged files are refused or read, and never crash; what is read is saved back as it was.
    #[test]
    fn damage_never_crashes(
        which in 0..file::SHIPPED.len(),
        cuts in proptest::collection::vec((any::<prop::sample::Index>(), 0..4usize, "[(),:\"/*\\[\\]a-z0-9.\u{e9} ]{0,3}"), 1..4),
    ) {
        let mut letters: Vec<char> = file::SHIPPED[which].1.chars().collect();
        for (place, length, new) in cuts {
            let start = place.index(letters.len());
            let end = (start + length).min(letters.len());
            letters.splice(start..end, new.chars());
        }
        let text: String = letters.into_iter().collect();
        if let Ok(loaded) = file::parse("damaged.ron", &text) {
            prop_assert_eq!(write::patch(&text, loaded.case.spec()), text);
        }
    }
}

#[test]
fn the_field_reference_is_in_step() {
    let path = root().join("docs/scenario.md");
    let found = fs::read_to_string(&path).expect("docs/scenario.md");
    let (start, end) = ("<!-- fields -->\n", "<!-- end of fields -->");
    let before = found.split(start).next().unwrap_or_default();
    let after = found.rsplit(end).next().unwrap_or_default();
    let expected = format!("{before}{start}{}{end}{after}", reference::field_table());
    if std::env::var_os("UPDATE_DOCS").is_some() {
        fs::write(&path, &expected).expect("document written");
    } else {
        assert!(
            found == expected,
            "docs/scenario.md is not in step; run UPDATE_DOCS=1 cargo test"
        );
    }
}

/// The scenarios written out in the reference load as they stand.
#[test]
fn the_examples_of_the_reference_load() {
    let text = fs::read_to_string(root().join("docs/scenario.md")).expect("docs/scenario.md");
    let examples: Vec<&str> = text
        .split("```ron\n")
        .skip(1)
        .filter_map(|rest| rest.split("```").next())
        .filter(|example| example.starts_with('('))
        .collect();
    assert!(!examples.is_empty());
    for example in examples {
        file::parse("docs/scenario.md", example).unwrap_or_else(|faults| panic!("{faults}"));
    }
}
