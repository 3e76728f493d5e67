//! The house rules that a compiler does not check: layers, leftovers, documents in step with tables.

use std::fs;
use std::path::{Path, PathBuf};

fn root() -> PathBuf {
    PathBuf::from(env!("CARGO_MANIFEST_DIR"))
}

/// Every Rust source below a folder, with its path relative to the crate and its text.
fn sources(below: &str) -> Vec<(String, String)> {
    fn walk(dir: &Path, out: &mut Vec<PathBuf>) {
        for entry in fs::read_dir(dir).expect("folder exists") {
            let path = entry.expect("entry").path();
            if path.is_dir() {
                walk(&path, out);
            } else if path.extension().is_some_and(|extension| extension == "rs") {
                out.push(path);
            }
        }
    }
    let mut paths = Vec::new();
    walk(&root().join(below), &mut paths);
    paths.sort();
    paths
        .into_iter()
        .map(|path| {
            let name = path
                .strip_prefix(root())
                .expect("below the crate")
                .display()
                .to_string();
            (name, fs::read_to_string(&path).expect("readable source"))
        })
        .collect()
}

/// A source without its comments and its test module, roughly: enough for looking at names.
fn code(text: &str) -> String {
    let body = text.split("#[cfg(test)]\nmod tests").next().unwrap_or("");
    body.lines()
        .filter(|line| !line.trim_start().starts_with("//"))
        .collect::<Vec<_>>()
        .join("\n")
}

/// The layer a source belongs to, by its path: `src/study/knob.rs` and `src/study.rs` are `study`.
fn layer(name: &str) -> String {
    let rest = name.trim_start_matches("src/");
    rest.split('/')
        .next()
        .unwrap_or("")
        .trim_end_matches(".rs")
        .to_owned()
}

#[test]
fn every_layer_uses_only_what_stands_to_its_left() {
    let allowed: &[(&str, &[&str])] = &[
        ("visible", &[]),
        ("numerics", &[]),
        ("physics", &["numerics"]),
        ("arrival", &["numerics", "physics"]),
        // Messages about a name echo it, so the sanitiser is below everything that speaks.
        ("study", &["numerics", "physics", "arrival", "visible"]),
        (
            "scenario",
            &["numerics", "physics", "arrival", "study", "visible"],
        ),
        (
            "report",
            &[
                "numerics", "physics", "arrival", "study", "scenario", "visible",
            ],
        ),
        // Threads: the engine starts none itself.
        ("crew", &["study"]),
        (
            "cli",
            &[
                "numerics", "physics", "arrival", "study", "scenario", "report", "visible", "crew",
            ],
        ),
        (
            "tui",
            &[
                "numerics", "physics", "arrival", "study", "scenario", "report", "visible", "crew",
            ],
        ),
    ];
    let layers: Vec<&str> = allowed.iter().map(|(layer, _)| *layer).collect();
    for (name, text) in sources("src") {
        let own = layer(&name);
        let Some((_, below)) = allowed.iter().find(|(layer, _)| *layer == own) else {
            assert!(
                ["lib", "main"].contains(&own.as_str()),
                "{name}: a layer that the rule does not know"
            );
            continue;
        };
        let code = code(&text);
        for other in layers
            .iter()
            .filter(|other| **other != own && !below.contains(other))
        {
            assert!(
                !code.contains(&format!("crate::{other}")),
                "{name} uses {other}, which stands to its right"
            );
        }
    }
}

#[test]
fn the_engine_is_pure() {
    for (name, text) in sources("src") {
        if !["numerics", "physics", "arrival", "study"].contains(&layer(&name).as_str()) {
            continue;
        }
        let code = code(&text);
        for word in [
            "ratatui",
            "crossterm",
            "serde",
            "ron::",
            "std::io",
            "std::fs",
            "std::env",
            "std::time",
            "std::thread",
        ] {
            assert!(!code.contains(word), "{name} names {word}");
        }
    }
}

#[test]
fn nothing_is_left_lying_about() {
    let words =
        ["to", "fix"].map(|start| start.to_owned() + if start == "to" { "do!" } else { "me" });
    for (name, text) in sources("src").into_iter().chain(sources("tests")) {
        for word in words
            .iter()
            .map(String::as_str)
            .chain(["unimplemented!(", "dbg!("])
        {
            let own = name.ends_with("tidy.rs");
            assert!(
                own || !text.to_lowercase().contains(word),
                "{name} has {word}"
            );
        }
        assert!(
            name.ends_with("tidy.rs") || !text.contains(&format!("#[{}", "ignore")),
            "{name} ignores a test"
        );
    }
}

#[test]
fn every_source_says_what_it_is_for() {
    for (name, text) in sources("src") {
        assert!(
            text.starts_with("//!"),
            "{name} does not start with a sentence about itself"
        );
    }
}

#[test]
fn the_top_level_holds_what_it_should() {
    let allowed = [
        "Cargo.toml",
        "Cargo.lock",
        "README.md",
        "DEVELOPERS.md",
        "LICENSE",
        ".gitignore",
        ".git",
        ".ci",
        "src",
        "tests",
        "scenarios",
        "docs",
        "target",
    ];
    for entry in fs::read_dir(root()).expect("crate folder") {
        let name = entry
            .expect("entry")
            .file_name()
            .to_string_lossy()
            .into_owned();
        assert!(
            allowed.contains(&name.as_str()),
            "{name} does not belong at the top"
        );
    }
}

#[test]
fn the_key_reference_is_in_step() {
    in_step("docs/keys.md", &stoop::tui::action::keys_page());
}

#[test]
fn the_output_reference_names_every_warning_and_the_csv_columns() {
    let output = fs::read_to_string(root().join("docs/output.md")).expect("docs/output.md");
    let warnings = fs::read_to_string(root().join("src/study/warning.rs")).expect("source");
    let codes: Vec<&str> = warnings
        .split("code: \"")
        .skip(1)
        .filter_map(|rest| rest.split('"').next())
        .collect();
    assert!(5 < codes.len());
    for code in codes {
        assert!(
            output.contains(&format!("`{code}`")),
            "docs/output.md lacks {code}"
        );
    }
}

/// Compares a document with what a table makes of it, and rewrites it when asked to.
fn in_step(path: &str, expected: &str) {
    let path = root().join(path);
    if std::env::var_os("UPDATE_DOCS").is_some() {
        fs::write(&path, expected).expect("document written");
    }
    let found = fs::read_to_string(&path).unwrap_or_default();
    assert!(
        found == expected,
        "{} is not in step; run UPDATE_DOCS=1 cargo test",
        path.display()
    );
}

#[test]
fn the_readme_states_commands_cautions_and_links_that_exist() {
    let readme = fs::read_to_string(root().join("README.md")).expect("README");
    for needed in [
        "cargo run --release",
        "cargo test",
        "preliminary design",
        "planetary protection",
        "orbital debris",
        "verified flight-dynamics software",
        "does not model",
    ] {
        assert!(readme.contains(needed), "README lacks: {needed}");
    }
    for link in readme
        .split("](")
        .skip(1)
        .filter_map(|rest| rest.split(')').next())
    {
        assert!(
            link.starts_with("http") || root().join(link).exists(),
            "README links to {link}, which is not there"
        );
    }
}

#[test]
fn documents_name_every_way_and_every_warning() {
    let model = fs::read_to_string(root().join("docs/model.md")).expect("docs/model.md");
    for entry in stoop::arrival::Way::TABLE {
        assert!(
            model.contains(&format!("| {} |", entry.name)),
            "docs/model.md lacks {}",
            entry.name
        );
    }
}
