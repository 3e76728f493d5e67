//! Sweeps: curves and maps as text, CSV, JSON and SVG.

mod svg;
mod table;

use super::words;
use crate::arrival::{NotFlyable, Way};
use crate::study::case::DAY_S;
use crate::study::curve::{Axis, Cell, Row, Sample};
use crate::study::landmarks::Landmarks;
use crate::study::{Case, landmarks};
use serde::Serialize;

/// A finished sweep of one knob, or of two.
#[derive(Debug)]
pub struct Sweep<'a> {
    /// The scenario.
    pub case: &'a Case,
    /// The first knob.
    pub first: Axis,
    /// The second knob of a map.
    pub second: Option<Axis>,
    /// Every value: for a map all values of the first knob for each value of the second.
    pub cells: Vec<Cell>,
    /// Fingerprint of the scenario.
    pub fingerprint: String,
}

/// One line of the long form: one value (or pair) and one way.
#[derive(Serialize)]
struct Line {
    #[serde(skip)]
    x: f64,
    #[serde(skip)]
    y: f64,
    way: &'static str,
    flyable: bool,
    cost_m_s: Option<f64>,
    dv_m_s: Option<f64>,
    impulsive_dv_m_s: Option<f64>,
    finite_burn_loss_m_s: Option<f64>,
    propellant_kg: Option<f64>,
    final_mass_kg: Option<f64>,
    days: Option<f64>,
    starts: Option<usize>,
    longest_burn_s: Option<f64>,
    captured_after_percent: Option<f64>,
    reason: Option<String>,
}

/// Columns after the knobs' own.
const COLUMNS: &[&str] = &[
    "way",
    "flyable",
    "cost_m_s",
    "dv_m_s",
    "impulsive_dv_m_s",
    "finite_burn_loss_m_s",
    "propellant_kg",
    "final_mass_kg",
    "days",
    "starts",
    "longest_burn_s",
    "captured_after_percent",
    "reason",
];

impl Sweep<'_> {
    /// Whether any way can be flown anywhere.
    pub fn flyable(&self) -> bool {
        self.cells
            .iter()
            .any(|cell| matches!(&cell.row, Row::Asked(point) if point.best.is_some()))
    }

    /// As a readable table, or a map of characters.
    pub fn text(&self) -> String {
        table::render(self)
    }

    /// As SVG.
    pub fn svg(&self) -> String {
        svg::render(self)
    }

    /// As CSV, see `docs/output.md`.
    pub fn csv(&self) -> String {
        let mut writer = csv::Writer::from_writer(Vec::new());
        let mut header = vec![self.first.knob.column];
        header.extend(self.second.map(|axis| axis.knob.column));
        header.extend(COLUMNS);
        // Writing into memory cannot fail, and every record has the header's length.
        let _ = writer.write_record(&header);
        for line in self.lines() {
            let number =
                |value: Option<f64>| value.map_or_else(String::new, |value| value.to_string());
            let mut record = vec![line.x.to_string()];
            record.extend(self.second.map(|_| line.y.to_string()));
            record.extend([
                line.way.to_owned(),
                line.flyable.to_string(),
                number(line.cost_m_s),
                number(line.dv_m_s),
                number(line.impulsive_dv_m_s),
                number(line.finite_burn_loss_m_s),
                number(line.propellant_kg),
                number(line.final_mass_kg),
                number(line.days),
                line.starts
                    .map_or_else(String::new, |starts| starts.to_string()),
                number(line.longest_burn_s),
                number(line.captured_after_percent),
                line.reason
                    .as_deref()
                    .map_or_else(String::new, not_a_formula),
            ]);
            let _ = writer.write_record(&record);
        }
        writer
            .into_inner()
            .ok()
            .and_then(|bytes| String::from_utf8(bytes).ok())
            .unwrap_or_default()
    }

    /// As JSON, see `docs/output.md`.
    pub fn json(&self) -> String {
        let rows: Vec<serde_json::Value> = self
            .lines()
            .map(|line| {
                let mut row = serde_json::Map::new();
                row.insert(self.first.knob.column.to_owned(), line.x.into());
                if let Some(second) = &self.second {
                    row.insert(second.knob.column.to_owned(), line.y.into());
                }
                if let Ok(serde_json::Value::Object(rest)) = serde_json::to_value(&line) {
                    row.extend(rest);
                }
                serde_json::Value::Object(row)
            })
            .collect();
        let marks = landmarks::landmarks(self.case.setting());
        let value = serde_json::json!({
            "format": 1,
            "program": { "name": "stoop", "version": env!("CARGO_PKG_VERSION") },
            "scenario": { "title": self.case.spec().title, "fingerprint": self.fingerprint },
            "over": self.first.knob.name,
            "and": self.second.map(|axis| axis.knob.name),
            "rows": rows,
            "landmarks": super::brief::landmarks_value(self.case, &marks),
        });
        let mut text = serde_json::to_string_pretty(&value).unwrap_or_default();
        text.push('\n');
        text
    }

    /// The landmarks of the scenario.
    fn landmarks(&self) -> Landmarks {
        landmarks::landmarks(self.case.setting())
    }

    fn lines(&self) -> impl Iterator<Item = Line> + '_ {
        self.cells.iter().flat_map(move |cell| {
            let (x, refused) = match &cell.row {
                Row::Asked(point) => (point.x, None),
                Row::Refused { x, why } => (*x, Some(why.to_string())),
            };
            Way::TABLE.iter().map(move |entry| {
                let asked = match &cell.row {
                    Row::Asked(point) => Some(&point.ways[entry.way as usize]),
                    Row::Refused { .. } => None,
                };
                self.line(x, cell.y, entry.way, asked, refused.clone())
            })
        })
    }

    fn line(
        &self,
        x: f64,
        y: f64,
        way: Way,
        asked: Option<&Result<Sample, NotFlyable>>,
        refused: Option<String>,
    ) -> Line {
        let sample = asked.and_then(|result| result.as_ref().ok());
        let reason = match asked {
            Some(Err(not)) => Some(words::reasons(self.case, not)),
            Some(Ok(_)) => None,
            None => refused,
        };
        Line {
            x,
            y,
            way: way.name(),
            flyable: sample.is_some(),
            cost_m_s: sample.map(|sample| 1e3 * sample.cost_km_s),
            dv_m_s: sample.map(|sample| 1e3 * sample.dv_km_s),
            impulsive_dv_m_s: sample.map(|sample| 1e3 * sample.impulsive_dv_km_s),
            finite_burn_loss_m_s: sample
                .map(|sample| 1e3 * (sample.dv_km_s - sample.impulsive_dv_km_s)),
            propellant_kg: sample.and_then(|sample| sample.propellant_kg),
            final_mass_kg: sample.and_then(|sample| sample.final_mass_kg),
            days: sample.map(|sample| sample.duration_s / DAY_S),
            starts: sample.map(|sample| sample.starts),
            longest_burn_s: sample.and_then(|sample| sample.longest_burn_s),
            captured_after_percent: sample
                .and_then(|sample| sample.captured_share)
                .map(|share| 100.0 * share),
            reason,
        }
    }
}

/// Text that no spreadsheet takes for a formula: a leading sign is preceded by an apostrophe.
fn not_a_formula(text: &str) -> String {
    let clean = crate::visible::visible(text);
    if clean.starts_with(['=', '+', '-', '@', '\t', '\r']) {
        format!("'{clean}")
    } else {
        clean.into_owned()
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn text_never_starts_a_formula() {
        assert_eq!(not_a_formula("=1+1"), "'=1+1");
        assert_eq!(not_a_formula("@x"), "'@x");
        assert_eq!(not_a_formula("3 starts, limit 2"), "3 starts, limit 2");
    }
}
