//! Every shipped scenario is read, answered and checked; its headline is a snapshot.

use stoop::report::words;
use stoop::scenario::file;
use stoop::study::verdict::verdict;
use stoop::study::{Answer, check, landmarks};

#[test]
fn every_shipped_scenario_answers_and_checks() {
    let mut headlines = String::new();
    for (name, text) in file::SHIPPED {
        let loaded = file::parse(name, text).unwrap_or_else(|faults| panic!("{name}: {faults}"));
        let case = &loaded.case;
        let answer = Answer::of(case);
        assert!(answer.best.is_some(), "{name}: nothing flyable");
        for check in check::check(case, &answer) {
            assert!(
                check.passed(),
                "{name}: {} differs by {:e}",
                check.name,
                check.difference()
            );
        }
        let verdict = verdict(case.setting(), &answer);
        headlines.push_str(&format!(
            "{name}\n  {}\n  {}\n",
            words::verdict(case, &answer, &verdict),
            words::why(case, &verdict)
        ));
        for shift in words::shifts(case, &answer, &verdict) {
            headlines.push_str(&format!("  - {shift}\n"));
        }
    }
    insta::assert_snapshot!("headlines", headlines);
}

#[test]
fn the_default_shows_a_crossover_in_plain_view() {
    let case = file::built_in().case;
    let marks = landmarks::landmarks(case.setting());
    assert!(!marks.crossovers.is_empty());
    assert!(marks.cheapest.is_some_and(|cheapest| !cheapest.at_border));
}

#[test]
fn every_file_in_the_folder_ships() {
    let folder = std::path::Path::new(env!("CARGO_MANIFEST_DIR")).join("scenarios");
    let mut names: Vec<String> = std::fs::read_dir(folder)
        .expect("folder")
        .map(|entry| {
            entry
                .expect("entry")
                .file_name()
                .to_string_lossy()
                .into_owned()
        })
        .filter(|name| name.ends_with(".ron"))
        .collect();
    names.sort();
    let mut shipped: Vec<String> = file::SHIPPED
        .iter()
        .map(|(name, _)| name.rsplit('/').next().unwrap_or(name).to_owned())
        .map(|name| {
            if name.ends_with(".ron") {
                name
            } else {
                format!("{name}.ron")
            }
        })
        .collect();
    shipped.sort();
    assert_eq!(names, shipped);
}
