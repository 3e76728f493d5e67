//! A brief alone is enough to repeat it: the scenario it ends with gives the same digits.

use super::{SHIPPED, code, json, run, run_with, stdout};

/// Knobs that every shipped scenario has.
const SETTINGS: [&str; 4] = ["--set", "margin=7.25", "--set", "thrust=77 N"];

#[test]
fn the_scenario_in_the_json_gives_the_same_brief() {
    for path in SHIPPED {
        let args = [&["brief", path, "--format", "json"], &SETTINGS[..]].concat();
        let first = run(&args);
        assert_eq!(code(&first), 0, "{path}");
        let brief = json(&first);
        let ron = brief["scenario"]["ron"].as_str().expect("a text");
        let again = run_with(&["brief", "-", "--format", "json"], ron.as_bytes());
        assert_eq!(again.stdout, first.stdout, "{path}");
    }
}

#[test]
fn the_scenario_in_the_text_and_in_the_markdown_has_the_same_fingerprint() {
    for path in SHIPPED {
        for format in ["text", "markdown"] {
            let args = [&["brief", path, "--format", format], &SETTINGS[..]].concat();
            let page = stdout(&run(&args));
            let from = page.rfind("\n(\n").expect("the scenario begins") + 1;
            let to = from + page[from..].find("\n)\n").expect("the scenario ends") + 3;
            let last = page.lines().last().expect("a last line");
            let again = run_with(&["brief", "-"], &page.as_bytes()[from..to]);
            assert_eq!(code(&again), 0, "{path} {format}");
            assert_eq!(stdout(&again).lines().last(), Some(last), "{path} {format}");
        }
    }
}

#[test]
fn the_scenario_of_a_sweep_gives_the_same_sweep() {
    let rest = ["--over", "target-altitude", "--log", "--format", "json"];
    let first = run(&[&["sweep", SHIPPED[1]], &rest[..], &SETTINGS[..]].concat());
    let sweep = json(&first);
    let ron = sweep["scenario"]["ron"].as_str().expect("a text");
    let again = run_with(&[&["sweep", "-"], &rest[..]].concat(), ron.as_bytes());
    assert_eq!(again.stdout, first.stdout);
}
