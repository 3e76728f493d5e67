//! The command line as a program sees it: exit codes, formats, quiet pipes. Runs the real binary without a terminal.

mod foreign;
mod reference;
mod rerun;
mod writing;

use serde_json::Value;
use std::collections::BTreeSet;
use std::fs;
use std::io::{Read, Write};
use std::process::{Command, Output, Stdio};

fn stoop(args: &[&str]) -> Command {
    let mut command = Command::new(env!("CARGO_BIN_EXE_stoop"));
    command
        .args(args)
        .current_dir(env!("CARGO_MANIFEST_DIR"))
        .stdin(Stdio::null());
    command
}

fn run(args: &[&str]) -> Output {
    stoop(args).output().expect("the binary runs")
}

fn code(output: &Output) -> i32 {
    output.status.code().expect("not killed")
}

fn stdout(output: &Output) -> String {
    String::from_utf8(output.stdout.clone()).expect("UTF-8")
}

fn stderr(output: &Output) -> String {
    String::from_utf8(output.stderr.clone()).expect("UTF-8")
}

const WHIMBREL: &str = "scenarios/whimbrel.ron";
const SHIPPED: [&str; 5] = [
    WHIMBREL,
    "scenarios/dotterel.ron",
    "scenarios/avocet.ron",
    "scenarios/godwit.ron",
    "scenarios/turnstone.ron",
];

/// Runs with a text on standard input.
fn run_with(args: &[&str], input: &[u8]) -> Output {
    let mut child = stoop(args)
        .stdin(Stdio::piped())
        .stdout(Stdio::piped())
        .stderr(Stdio::piped())
        .spawn()
        .expect("the binary runs");
    child
        .stdin
        .take()
        .expect("stdin")
        .write_all(input)
        .expect("written");
    child.wait_with_output().expect("ends")
}

fn json(output: &Output) -> Value {
    serde_json::from_slice(&output.stdout).expect("sound JSON")
}

fn keys(value: &Value) -> BTreeSet<String> {
    value
        .as_object()
        .expect("an object")
        .keys()
        .cloned()
        .collect()
}

#[track_caller]
fn has(value: &Value, expected: &[&str]) {
    let found = keys(value);
    for key in expected {
        assert!(found.contains(*key), "lacks {key}: {found:?}");
    }
}

/// The contract of the design team's 3-files, typed out.
#[test]
fn the_json_of_a_brief_has_every_key_of_the_contract() {
    for name in ["whimbrel", "dotterel", "avocet", "godwit", "turnstone"] {
        let output = run(&[
            "brief",
            &format!("scenarios/{name}.ron"),
            "--format",
            "json",
        ]);
        assert_eq!(code(&output), 0, "{name}: {}", stderr(&output));
        let brief: Value = serde_json::from_str(&stdout(&output)).expect("sound JSON");
        has(
            &brief,
            &[
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
            ],
        );
        assert_eq!(brief["format"], 1);
        has(&brief["program"], &["name", "version"]);
        has(&brief["scenario"], &["title", "fingerprint"]);
        has(
            &brief["body"],
            &[
                "name",
                "gm_km3_s2",
                "radius_km",
                "soi_radius_km",
                "hill_radius_km",
            ],
        );
        has(
            &brief["arrival"],
            &[
                "model",
                "v_inf_km_s",
                "c3_km2_s2",
                "declination_deg",
                "break_even_radius_km",
                "free_inclination_deg",
                "departure_dv_m_s",
                "transfer_days",
            ],
        );
        has(
            &brief["target"],
            &[
                "periapsis_radius_km",
                "apoapsis_radius_km",
                "period_h",
                "inclination_deg",
            ],
        );
        let ways = brief["ways"].as_array().expect("ways");
        let names: Vec<&str> = ways.iter().filter_map(|way| way["way"].as_str()).collect();
        assert_eq!(names, ["direct", "dip", "loop", "steps"]);
        for way in ways {
            has(
                way,
                &[
                    "way",
                    "flyable",
                    "reasons",
                    "plane_change_deg",
                    "cost_m_s",
                    "dv_m_s",
                    "impulsive_dv_m_s",
                    "finite_burn_loss_m_s",
                    "dv_with_margin_m_s",
                    "propellant_kg",
                    "propellant_with_margin_kg",
                    "final_mass_kg",
                    "days",
                    "starts",
                    "longest_burn_s",
                    "captured_after_percent",
                    "aiming_radius_km",
                    "brake_radius_km",
                    "lowest_radius_km",
                    "burns",
                ],
            );
            let flyable = way["flyable"].as_bool().expect("a truth value");
            assert_eq!(way["cost_m_s"].is_number(), flyable);
            assert_eq!(
                way["reasons"].as_array().expect("reasons").is_empty(),
                flyable
            );
            for burn in way["burns"].as_array().expect("burns") {
                has(
                    burn,
                    &[
                        "at_radius_km",
                        "speed_before_km_s",
                        "speed_after_km_s",
                        "dv_m_s",
                        "impulsive_dv_m_s",
                        "loss_m_s",
                        "plane_change_deg",
                        "duration_s",
                        "propellant_kg",
                        "orbit_after",
                    ],
                );
                has(
                    &burn["orbit_after"],
                    &["periapsis_radius_km", "apoapsis_radius_km", "period_h"],
                );
            }
        }
        has(&brief["landmarks"], &["cheapest", "crossovers"]);
        has(&brief["landmarks"]["cheapest"], &["altitude_km", "dv_m_s"]);
        for crossover in brief["landmarks"]["crossovers"]
            .as_array()
            .expect("crossovers")
        {
            has(crossover, &["altitude_km", "dv_m_s", "below", "above"]);
        }
        for warning in brief["warnings"].as_array().expect("warnings") {
            has(warning, &["code", "text"]);
        }
        let fingerprint = brief["scenario"]["fingerprint"].as_str().expect("a text");
        assert!(fingerprint.len() == 16 && fingerprint.bytes().all(|b| b.is_ascii_hexdigit()));
    }
}

#[test]
fn the_same_digits_twice() {
    for format in ["text", "markdown", "json"] {
        let once = run(&["brief", WHIMBREL, "--format", format]);
        assert_eq!(
            once.stdout,
            run(&["brief", WHIMBREL, "--format", format]).stdout
        );
    }
}

#[test]
fn briefs_carry_cautions_and_fit_eighty_columns() {
    for name in ["whimbrel", "dotterel", "avocet", "godwit", "turnstone"] {
        let path = format!("scenarios/{name}.ron");
        let text = stdout(&run(&["brief", &path]));
        assert!(text.is_ascii());
        for line in text.lines() {
            assert!(line.len() <= 80, "{name}: {line}");
        }
        for format in ["text", "markdown", "json"] {
            let flat = stdout(&run(&["brief", &path, "--format", format]))
                .replace("\n  ", " ")
                .replace('\\', "");
            for needed in [
                "preliminary design",
                "planetary protection",
                "orbital debris",
                "verified",
                "qualified people",
            ] {
                assert!(flat.contains(needed), "{name} {format}: {needed}");
            }
        }
    }
    let help = stdout(&run(&["--help"]));
    for needed in [
        "preliminary design",
        "planetary protection",
        "orbital debris",
        "Exit codes",
        "Examples",
    ] {
        assert!(help.contains(needed), "{needed}");
    }
}

#[test]
fn exit_codes_tell_answered_from_nothing_and_from_cannot() {
    assert_eq!(code(&run(&["brief", WHIMBREL])), 0);
    let nothing = run(&["brief", WHIMBREL, "--set", "target-altitude=20"]);
    assert_eq!(code(&nothing), 1);
    assert!(stdout(&nothing).contains("under the floor"));
    assert_eq!(
        code(&run(&[
            "sweep", WHIMBREL, "--over", "v-inf", "--from", "1", "--to", "2"
        ])),
        2
    );
    assert_eq!(code(&run(&["check", WHIMBREL])), 0);
    assert_eq!(code(&run(&["check", "tests/bad/many_faults.ron"])), 2);
    assert_eq!(code(&run(&["brief"])), 2);
    assert_eq!(code(&run(&["no-such-command", "x"])), 2);
    let missing = run(&["brief", "no-such-file.ron"]);
    assert_eq!(code(&missing), 2);
    assert!(stderr(&missing).contains("there is no such file") && missing.stdout.is_empty());
    // Faults begin with their place, without the program's name.
    let faulty = run(&["brief", "tests/bad/many_faults.ron"]);
    assert!(
        stderr(&faulty).starts_with("tests/bad/many_faults.ron:"),
        "{}",
        stderr(&faulty)
    );
}

#[test]
fn without_a_terminal_the_brief_is_printed() {
    let plain = run(&[]);
    assert_eq!(code(&plain), 0);
    assert_eq!(plain.stdout, run(&["brief", WHIMBREL]).stdout);
    assert_eq!(
        stdout(&run(&["scenarios/godwit.ron"])),
        stdout(&run(&["brief", "scenarios/godwit.ron"]))
    );
}

#[test]
fn a_new_scenario_goes_through_a_pipe() {
    let template = run(&["new"]);
    assert_eq!(code(&template), 0);
    let output = run_with(&["brief", "-", "--format", "json"], &template.stdout);
    assert_eq!(code(&output), 0);
    let brief: Value = serde_json::from_slice(&output.stdout).expect("sound JSON");
    assert_eq!(brief["body"]["name"], "Mars");
}

#[test]
fn knobs_are_set_in_order_and_refused_with_reasons() {
    let output = run(&[
        "brief",
        WHIMBREL,
        "--format",
        "json",
        "--set",
        "target-altitude=9000",
        "--set",
        "target-altitude=9 500 km",
    ]);
    let brief: Value = serde_json::from_str(&stdout(&output)).expect("sound JSON");
    let radius = brief["target"]["periapsis_radius_km"]
        .as_f64()
        .expect("a number");
    assert!((radius - 1737.4 - 9500.0).abs() < 1e-9);
    for (setting, said) in [
        ("targt-altitude=1", "did you mean \"target-altitude\"?"),
        ("target-altitude", "write KNOB=VALUE"),
        ("target-altitude=-5", "at least 0 and at most 1e9 km"),
        ("target-altitude=5 furlongs", "is not a unit"),
        ("v-inf=1", "follows from the transfer"),
        ("depart=2031-01-25", "dated arrivals"),
        ("floor=best", "takes a number"),
        ("most-starts=2.5", "whole number"),
    ] {
        let output = run(&["brief", WHIMBREL, "--set", setting]);
        assert_eq!(code(&output), 2, "{setting}");
        assert!(
            stderr(&output).contains(said),
            "{setting}: {}",
            stderr(&output)
        );
    }
}

#[test]
fn csv_has_the_columns_of_the_contract() {
    let output = run(&[
        "sweep",
        WHIMBREL,
        "--over",
        "target-altitude",
        "--from",
        "20",
        "--to",
        "20000",
        "--points",
        "9",
        "--format",
        "csv",
    ]);
    assert_eq!(code(&output), 0);
    let mut reader = csv::Reader::from_reader(output.stdout.as_slice());
    let header: Vec<String> = reader
        .headers()
        .expect("header")
        .iter()
        .map(str::to_owned)
        .collect();
    assert_eq!(
        header.join(","),
        "target_altitude_km,way,flyable,cost_m_s,dv_m_s,impulsive_dv_m_s,finite_burn_loss_m_s,propellant_kg,final_mass_kg,days,starts,longest_burn_s,captured_after_percent,reason"
    );
    let rows: Vec<csv::StringRecord> = reader
        .records()
        .map(|record| record.expect("sound CSV"))
        .collect();
    assert_eq!(rows.len(), 9 * 4);
    assert_eq!(&rows[0][0], "20");
    assert_eq!(&rows[0][2], "false");
    assert!(rows[0][3].is_empty() && rows[0][13].contains("under the floor"));
    // JSON holds the same rows.
    let json = run(&[
        "sweep",
        WHIMBREL,
        "--over",
        "target-altitude",
        "--from",
        "20",
        "--to",
        "20000",
        "--points",
        "9",
        "--format",
        "json",
    ]);
    let value: Value = serde_json::from_str(&stdout(&json)).expect("sound JSON");
    has(&value, &["rows", "landmarks", "scenario", "over", "and"]);
    let same = value["rows"].as_array().expect("rows");
    assert_eq!(same.len(), rows.len());
    for (row, line) in same.iter().zip(&rows) {
        match row["cost_m_s"].as_f64() {
            Some(cost) => assert_eq!(line[3].parse::<f64>(), Ok(cost)),
            None => assert!(line[3].is_empty()),
        }
    }
}

#[test]
fn maps_have_both_columns_in_every_format() {
    let args = |format: &'static str| {
        vec![
            "sweep",
            "scenarios/dotterel.ron",
            "--over",
            "target-altitude",
            "--from",
            "300",
            "--to",
            "20000",
            "--points",
            "7",
            "--and",
            "v-inf",
            "--and-from",
            "2",
            "--and-to",
            "4",
            "--and-points",
            "5",
            "--format",
            format,
        ]
    };
    let csv = stdout(&run(&args("csv")));
    assert!(csv.starts_with("target_altitude_km,v_inf_km_s,way,"));
    assert_eq!(csv.lines().count(), 1 + 7 * 5 * 4);
    let svg = stdout(&run(&args("svg")));
    assert!(
        svg.starts_with("<svg ") && svg.ends_with("</svg>\n") && 30 < svg.matches("<rect").count()
    );
    let text = stdout(&run(&args("text")));
    assert!(text.contains("= direct, v dip, o loop"));
    let one = stdout(&run(&[
        "sweep",
        WHIMBREL,
        "--over",
        "target-altitude",
        "--log",
        "--format",
        "svg",
    ]));
    assert_eq!(one.matches("<path").count(), 4);
}

#[test]
fn sweeps_refuse_what_makes_no_axis() {
    for (args, said) in [
        (vec!["--over", "thrust"], "needs --from and --to"),
        (
            vec!["--over", "thrust", "--from", "5", "--to", "5"],
            "two different values",
        ),
        (
            vec![
                "--over", "thrust", "--from", "1", "--to", "5", "--points", "1",
            ],
            "at least 2",
        ),
        (
            vec!["--over", "floor", "--from", "0", "--to", "5", "--log"],
            "above 0",
        ),
        (
            vec!["--over", "thrust", "--from", "-1", "--to", "5"],
            "above 0",
        ),
        (
            vec![
                "--over",
                "thrust",
                "--from",
                "1",
                "--to",
                "5",
                "--and",
                "thrust",
                "--and-from",
                "1",
                "--and-to",
                "2",
            ],
            "two different knobs",
        ),
    ] {
        let mut all = vec!["sweep", WHIMBREL];
        all.extend(args.iter());
        let output = run(&all);
        assert_eq!(code(&output), 2, "{args:?}");
        assert!(
            stderr(&output).contains(said),
            "{args:?}: {}",
            stderr(&output)
        );
    }
}

#[test]
fn output_is_written_whole_or_not_at_all() {
    let folder = tempfile::tempdir().expect("folder");
    let path = folder.path().join("brief.md");
    let name = path.display().to_string();
    let output = run(&["brief", WHIMBREL, "--format", "markdown", "--output", &name]);
    assert_eq!(code(&output), 0);
    assert!(output.stdout.is_empty());
    assert_eq!(
        fs::read(&path).expect("written"),
        run(&["brief", WHIMBREL, "--format", "markdown"]).stdout
    );
    let lost = folder.path().join("no/where.md").display().to_string();
    let output = run(&["brief", WHIMBREL, "--output", &lost]);
    assert_eq!(code(&output), 2);
    assert!(stderr(&output).contains("cannot be written"));
    assert_eq!(fs::read_dir(folder.path()).expect("folder").count(), 1);
}

#[test]
fn a_closed_pipe_is_a_quiet_end() {
    let mut child = stoop(&[
        "sweep",
        WHIMBREL,
        "--over",
        "target-altitude",
        "--points",
        "20000",
        "--format",
        "csv",
    ])
    .stdout(Stdio::piped())
    .stderr(Stdio::piped())
    .spawn()
    .expect("the binary runs");
    let mut first = [0; 64];
    let mut pipe = child.stdout.take().expect("stdout");
    pipe.read_exact(&mut first).expect("a first line");
    drop(pipe);
    let output = child.wait_with_output().expect("ends");
    assert_eq!(code(&output), 0);
    assert_eq!(stderr(&output), "");
}

#[cfg(target_os = "linux")]
#[test]
fn a_full_disk_is_said() {
    let full = fs::OpenOptions::new()
        .write(true)
        .open("/dev/full")
        .expect("/dev/full");
    let output = stoop(&["brief", WHIMBREL])
        .stdout(full)
        .stderr(Stdio::piped())
        .output()
        .expect("the binary runs");
    assert_eq!(code(&output), 2);
    assert!(
        stderr(&output).contains("standard output cannot be written"),
        "{}",
        stderr(&output)
    );
}

#[test]
fn lists_are_complete() {
    let bodies: Value =
        serde_json::from_str(&stdout(&run(&["bodies", "--format", "json"]))).expect("sound JSON");
    let names: Vec<&str> = bodies["bodies"]
        .as_array()
        .expect("bodies")
        .iter()
        .filter_map(|body| body["name"].as_str())
        .collect();
    for name in [
        "Sun", "Mercury", "Venus", "Earth", "Moon", "Mars", "Titan", "Triton", "Ceres", "Vesta",
        "Pluto",
    ] {
        assert!(names.contains(&name), "{name}");
    }
    let text = stdout(&run(&["bodies"]));
    let flat = text.split_whitespace().collect::<Vec<_>>().join(" ");
    assert!(flat.contains("Park et al. 2021"));
    let knobs = stdout(&run(&["knobs"]));
    for name in [
        "target-altitude",
        "target-apoapsis",
        "brake-altitude",
        "loop-apoapsis",
        "v-inf",
        "inclination",
        "declination",
        "floor",
        "thrust",
        "isp",
        "dry-mass",
        "propellant",
        "longest-days",
        "per-start",
        "margin",
        "parking-altitude",
    ] {
        assert!(
            knobs
                .lines()
                .any(|line| line.starts_with(&format!("{name} "))),
            "{name}"
        );
    }
}

#[test]
fn check_recomputes_every_shipped_scenario() {
    for name in ["whimbrel", "dotterel", "avocet", "godwit", "turnstone"] {
        let output = run(&["check", &format!("scenarios/{name}.ron")]);
        assert_eq!(code(&output), 0, "{}", stdout(&output));
        assert!(stdout(&output).contains("checks agree"));
    }
}
