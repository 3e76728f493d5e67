//! `docs/output.md` against what the program writes: every key in the tables, and no key besides.

use super::{SHIPPED, WHIMBREL, code, json, run, stdout};
use serde_json::Value;
use std::collections::BTreeSet;
use std::fs;
use std::path::Path;

/// Paths of everything that is no object, `[]` for the items of a list; apart from them what is empty in this output.
#[derive(Default)]
struct Paths {
    full: BTreeSet<String>,
    empty: BTreeSet<String>,
}

impl Paths {
    fn collect(&mut self, path: &str, value: &Value) {
        match value {
            Value::Object(fields) => {
                for (name, value) in fields {
                    let dot = if path.is_empty() { "" } else { "." };
                    self.collect(&format!("{path}{dot}{name}"), value);
                }
            }
            Value::Array(items) if items.iter().any(Value::is_object) => {
                for item in items {
                    self.collect(&format!("{path}[]"), item);
                }
            }
            Value::Array(items) if items.is_empty() => {
                self.empty.insert(path.to_owned());
            }
            Value::Null => {
                self.empty.insert(path.to_owned());
            }
            _ => {
                self.full.insert(path.to_owned());
            }
        }
    }
}

fn page() -> String {
    fs::read_to_string(Path::new(env!("CARGO_MANIFEST_DIR")).join("docs/output.md"))
        .expect("docs/output.md")
}

/// The keys in the first column of the key table below a heading.
fn documented(heading: &str) -> BTreeSet<String> {
    let page = page();
    let section = page
        .split("\n## ")
        .find(|section| section.starts_with(heading))
        .expect("the section");
    section
        .lines()
        .skip_while(|line| !line.starts_with("| key |"))
        .skip(2)
        .take_while(|line| line.starts_with('|'))
        .filter_map(|line| line.split('|').nth(1))
        .flat_map(|cell| cell.split('`').skip(1).step_by(2))
        .map(str::to_owned)
        .collect()
}

#[track_caller]
fn agree(heading: &str, paths: &Paths) {
    let documented = documented(heading);
    assert!(3 < documented.len(), "{heading}: no table");
    for path in &paths.full {
        assert!(documented.contains(path), "{heading} lacks {path}");
    }
    for path in &paths.empty {
        let inside = |key: &String| {
            key.strip_prefix(path.as_str())
                .is_some_and(|rest| rest.is_empty() || rest.starts_with(['.', '[']))
        };
        assert!(documented.iter().any(inside), "{heading} lacks {path}");
    }
    for key in &documented {
        assert!(
            paths.full.contains(key) || paths.empty.contains(key),
            "{heading} documents {key}, which is not written"
        );
    }
}

#[test]
fn the_brief_writes_the_documented_keys() {
    let mut paths = Paths::default();
    for path in SHIPPED {
        paths.collect("", &json(&run(&["brief", path, "--format", "json"])));
    }
    agree("`stoop brief FILE --format json`", &paths);
}

#[test]
fn the_sweep_writes_the_documented_keys() {
    let args = ["sweep", WHIMBREL, "--over", "target-altitude"];
    let more = ["--from", "20", "--to", "20000", "--points", "5"];
    let output = run(&[&args[..], &more[..], &["--format", "json"]].concat());
    let mut paths = Paths::default();
    paths.collect("", &json(&output));
    assert!(paths.full.remove("rows[].target_altitude_km"));
    agree("`stoop sweep FILE --format json`", &paths);
}

#[test]
fn the_lists_write_the_documented_keys() {
    for command in ["bodies", "knobs"] {
        let mut paths = Paths::default();
        paths.collect("", &json(&run(&[command, "--format", "json"])));
        agree(&format!("`stoop {command} --format json`"), &paths);
    }
}

#[test]
fn the_csv_header_stands_in_the_reference() {
    let rest = stoop::report::sweep::COLUMNS.join(",");
    assert!(page().contains(&format!("<knob with unit>[,<second knob>],{rest}\n")));
}

#[test]
fn keys_come_in_the_order_of_the_contract() {
    let text = stdout(&run(&["brief", WHIMBREL, "--format", "json"]));
    let mut from = 0;
    for key in [
        "format",
        "program",
        "scenario",
        "body",
        "arrival",
        "target",
        "ways",
        "best",
        "landmarks",
        "warnings",
        "sources",
    ] {
        let at = text[from..].find(&format!("\n  \"{key}\":"));
        from += at.unwrap_or_else(|| panic!("{key} in its place"));
    }
}

#[test]
fn help_of_every_command_has_examples_and_fits() {
    for command in ["brief", "sweep", "check", "new", "bodies", "knobs"] {
        let output = run(&[command, "--help"]);
        assert_eq!(code(&output), 0);
        let help = stdout(&output);
        assert!(help.contains("Examples:"), "{command}");
        for line in help.lines() {
            assert!(line.len() <= 100, "{command}: {line}");
        }
        if ["brief", "sweep", "check"].contains(&command) {
            assert!(help.contains("Exit codes: 0 "), "{command}");
        }
    }
}

/// What is read in a terminal fits one of 80 columns.
#[test]
fn text_fits_eighty_columns() {
    let mut pages = vec![stdout(&run(&["bodies"])), stdout(&run(&["knobs"]))];
    for path in SHIPPED {
        pages.push(stdout(&run(&["check", path])));
        let sweep = ["sweep", path, "--over", "target-altitude", "--log"];
        pages.push(stdout(&run(&sweep)));
        let map = ["--and", "thrust", "--and-from", "5", "--and-to", "50"];
        pages.push(stdout(&run(&[&sweep[..], &map[..]].concat())));
        let nothing = run(&["brief", path, "--set", "propellant=0"]);
        assert_eq!(code(&nothing), 1, "{path}");
        pages.push(stdout(&nothing));
    }
    for page in pages {
        assert!(page.is_ascii());
        for line in page.lines() {
            assert!(line.len() <= 80, "{} columns: {line}", line.len());
        }
    }
}
