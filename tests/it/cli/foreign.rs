//! Text from files and from the shell is shown, never obeyed: by a terminal, a spreadsheet, Markdown or a browser.

use super::{WHIMBREL, code, json, run, run_with, stderr, stdout};
use std::fs;

/// A title that would colour a terminal, hide text, start a formula, a table cell, a link and a script.
const TITLE: &str =
    "=1+1 | \u{1b}[31m\u{9b}2J\u{202e}`x` *b* [l](http://x) <script>alert(1)</script> & \u{e9}";

fn scenario() -> String {
    let text = fs::read_to_string(WHIMBREL).expect("readable");
    let body = r#"Custom(name: "=rock\u{1b}|<b>", gm_km3_s2: 4902.8, radius_km: 1737.4, lowest_alt_km: 20.0, parent: (name: "Earth\u{7}", gm_km3_s2: 398600.4, radius_km: 6378.1, semi_major_axis_km: 384400.0))"#;
    let quoted: String = TITLE
        .chars()
        .map(|c| match c {
            '"' | '\\' => format!("\\{c}"),
            c if c.is_ascii() && !c.is_control() => c.to_string(),
            c => c.escape_unicode().to_string(),
        })
        .collect();
    text.replace("Whimbrel, lunar relay orbiter", &quoted)
        .replace("Known(\"Moon\")", body)
}

fn outputs() -> Vec<(String, String)> {
    let text = scenario();
    let curve = ["sweep", "-", "--over", "target-altitude", "--log"];
    let map = ["--and", "thrust", "--and-from", "5", "--and-to", "50"];
    let mut all = Vec::new();
    for format in ["text", "markdown", "json"] {
        let output = run_with(&["brief", "-", "--format", format], text.as_bytes());
        assert_eq!(code(&output), 0, "{}", stderr(&output));
        all.push((format!("brief {format}"), stdout(&output)));
    }
    for format in ["text", "csv", "json", "svg"] {
        for more in [&[][..], &map[..]] {
            let args = [&curve[..], more, &["--format", format]].concat();
            let output = run_with(&args, text.as_bytes());
            assert_eq!(code(&output), 0, "{}", stderr(&output));
            all.push((format!("sweep {format}"), stdout(&output)));
        }
    }
    let output = run_with(&["check", "-"], text.as_bytes());
    all.push(("check".to_owned(), stdout(&output)));
    all
}

#[test]
fn nothing_that_acts_reaches_any_output() {
    for (name, text) in outputs() {
        let acting = |c: char| (c.is_control() && c != '\n') || c == '\u{202e}';
        assert!(!text.chars().any(acting), "{name}: {text}");
        if !name.contains("markdown") && !name.contains("svg") {
            assert!(text.is_ascii(), "{name}");
        }
    }
}

#[test]
fn programs_read_the_text_as_it_is() {
    let output = run_with(&["brief", "-", "--format", "json"], scenario().as_bytes());
    let brief = json(&output);
    assert_eq!(brief["scenario"]["title"], TITLE);
    assert_eq!(brief["body"]["name"], "=rock\u{1b}|<b>");
}

#[test]
fn markup_is_escaped() {
    for (name, text) in outputs() {
        if name == "sweep svg" {
            assert!(!text.contains("<script") && text.contains("&lt;script&gt;"));
            balanced(&text);
        }
        if name == "brief markdown" {
            let title = text.lines().next().expect("a title");
            for mark in ["<", "|", "*", "[", "`", "_", "://"] {
                for (at, _) in title.match_indices(mark) {
                    assert!(title[..at].ends_with('\\'), "{mark} in {title}");
                }
            }
            // Every row of a table has as many cells as its heading.
            let mut cells = None;
            for line in text.lines() {
                let row = line.starts_with('|');
                let count = line.replace("\\|", "").matches('|').count();
                match cells {
                    Some(expected) if row => assert_eq!(count, expected, "{line}"),
                    _ => cells = row.then_some(count),
                }
            }
        }
        if name == "sweep csv" {
            for record in csv::Reader::from_reader(text.as_bytes()).records() {
                for field in record.expect("sound CSV").iter() {
                    let number = field.parse::<f64>().is_ok();
                    assert!(
                        number || !field.starts_with(['=', '+', '-', '@']),
                        "{field}"
                    );
                }
            }
        }
    }
}

/// Every element of an SVG is closed, in the right order.
#[track_caller]
fn balanced(svg: &str) {
    let mut open: Vec<&str> = Vec::new();
    for tag in svg.split('<').skip(1) {
        let (tag, _) = tag.split_once('>').expect("a tag ends");
        let name = tag.split([' ', '/']).next().unwrap_or("");
        if let Some(name) = tag.strip_prefix('/') {
            assert_eq!(open.pop(), Some(name));
        } else if !tag.ends_with('/') {
            open.push(name);
        }
        assert_eq!(tag.matches('"').count() % 2, 0, "{tag}");
    }
    assert!(open.is_empty());
}

#[test]
fn what_was_typed_is_shown_and_not_obeyed() {
    for (args, shown) in [
        (vec!["brief", "\u{1b}[31m.ron"], true),
        (vec!["brief", WHIMBREL, "--set", "\u{1b}[31m=1"], true),
        (vec!["brief", WHIMBREL, "--set", "thrust=\u{1b}[31m"], true),
        (vec!["sweep", WHIMBREL, "--over", "\u{202e}x"], true),
        // The argument parser leaves out what colours a terminal.
        (vec!["brief", WHIMBREL, "\u{1b}[31mextra"], false),
        (vec!["--\u{1b}[31m"], false),
    ] {
        let output = run(&args);
        assert_eq!(code(&output), 2, "{args:?}");
        let said = stderr(&output);
        assert!(!said.contains(['\u{1b}', '\u{202e}']), "{said}");
        assert!(!shown || said.contains("\\u{"), "{said}");
    }
}

#[test]
fn mistyped_names_are_answered_with_the_nearest() {
    let output = run(&["swep"]);
    assert_eq!(code(&output), 2);
    assert_eq!(
        stderr(&output),
        "stoop: swep is no file and no command, did you mean \"stoop sweep\"?\n"
    );
    let output = run(&["sweep", WHIMBREL, "--over", "targt-altitude"]);
    assert!(stderr(&output).contains("did you mean \"target-altitude\"?"));
}

/// A floor at the surface leaves no first value for a logarithmic axis; the message says which argument brings one.
#[test]
fn a_logarithmic_axis_from_the_surface_asks_for_its_first_value() {
    let args = ["sweep", WHIMBREL, "--set", "floor=0", "--over"];
    let axis = ["target-altitude", "--log"];
    let output = run(&[&args[..], &axis[..]].concat());
    assert_eq!(code(&output), 2);
    assert!(stderr(&output).contains("--log needs --from above 0"));
    let output = run(&[&args[..], &axis[..], &["--from", "1"]].concat());
    assert_eq!(code(&output), 0);
}

/// A second axis of target altitude takes the sensible range like a first one; other knobs say which arguments they miss.
#[test]
fn the_second_axis_has_the_rights_of_the_first() {
    let args = ["sweep", WHIMBREL, "--format", "csv", "--points", "4"];
    let ends = ["--over", "thrust", "--from", "50", "--to", "60"];
    let second = ["--and", "target-altitude", "--and-points", "3"];
    let output = run(&[&args[..], &ends[..], &second[..]].concat());
    assert_eq!(code(&output), 0, "{}", stderr(&output));
    let text = stdout(&output);
    assert!(text.starts_with("thrust_n,target_altitude_km,way,"));
    assert!(text.contains("\n50,60,direct,true,"), "{text}");
    let output = run(&[&args[..], &ends[..], &["--and", "isp"]].concat());
    assert_eq!(code(&output), 2);
    assert!(
        stderr(&output).contains("isp needs --and-from and --and-to"),
        "{}",
        stderr(&output)
    );
}
