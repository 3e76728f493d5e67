//! The table of knobs: name, unit, range, meaning.

use crate::report::{json, words};
use crate::study::knob::KNOBS;
use serde::Serialize;

const WIDTH: usize = 78;
const PAD: &str = "    ";

/// The knobs as text: a line with name, unit and range, the meaning below it.
pub fn knobs_text() -> String {
    let mut out = format!("{:<18} {:<5} range\n", "knob", "unit");
    for knob in KNOBS {
        let best = if knob.takes_best() { ", or best" } else { "" };
        let unit = match knob.unit() {
            "" => "-",
            unit => unit,
        };
        out.push_str(&format!(
            "{:<18} {unit:<5} {}{best}\n",
            knob.name,
            knob.range_field().range()
        ));
        for line in words::wrap(knob.meaning, WIDTH - PAD.len()) {
            out.push_str(&format!("{PAD}{line}\n"));
        }
    }
    out.push('\n');
    let note = "Set one with --set KNOB=VALUE, sweep one with --over KNOB. A value may carry a unit: 6500, 6.5e3km, 800 m, 22 N, 0.4kN, 12 h, 830 m/s.";
    for line in words::wrap(note, WIDTH) {
        out.push_str(&line);
        out.push('\n');
    }
    out
}

#[derive(Serialize)]
struct KnobsJson {
    format: u32,
    knobs: Vec<KnobJson>,
}

#[derive(Serialize)]
struct KnobJson {
    name: &'static str,
    column: &'static str,
    unit: &'static str,
    low: f64,
    high: f64,
    range: String,
    best: bool,
    meaning: &'static str,
}

/// The knobs as JSON, see `docs/output.md`.
pub fn knobs_json() -> String {
    let knobs = KNOBS
        .iter()
        .map(|knob| {
            let field = knob.range_field();
            KnobJson {
                name: knob.name,
                column: knob.column,
                unit: knob.unit(),
                low: field.low.value(),
                high: field.high.value(),
                range: field.range().to_string(),
                best: knob.takes_best(),
                meaning: knob.meaning,
            }
        })
        .collect();
    json::text(&KnobsJson { format: 1, knobs })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_knob_is_listed_within_a_terminal() {
        let text = knobs_text();
        assert!(text.is_ascii());
        for line in text.lines() {
            assert!(line.len() <= 80, "{} columns: {line}", line.len());
        }
        for knob in KNOBS {
            assert!(text.contains(&format!("\n{} ", knob.name)), "{}", knob.name);
        }
    }
}
