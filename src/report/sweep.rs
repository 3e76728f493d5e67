//! Sweeps: curves and maps as text, CSV, JSON and SVG.

mod csv_form;
mod json_form;
mod svg;
mod table;

pub use csv_form::COLUMNS;

use super::words;
use crate::arrival::{NotFlyable, Way};
use crate::study::case::DAY_S;
use crate::study::curve::{Axis, Cell, Point, Row, Sample};
use crate::study::landmarks::Landmarks;
use crate::study::watch::Crew;
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
    /// Who shares the work of the landmarks.
    pub crew: &'a dyn Crew,
}

impl Sweep<'_> {
    /// Whether any way can be flown anywhere.
    pub fn flyable(&self) -> bool {
        self.points().any(|point| point.best.is_some())
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
        csv_form::render(self)
    }

    /// As JSON, see `docs/output.md`.
    pub fn json(&self) -> String {
        json_form::render(self)
    }

    /// The landmarks of the scenario.
    fn landmarks(&self) -> Landmarks {
        let setting = self.case.setting();
        landmarks::landmarks_with(setting, landmarks::scan_points(setting), self.crew)
            .unwrap_or_default()
    }

    /// Every value that the scenario could take.
    fn points(&self) -> impl Iterator<Item = &Point> {
        self.cells.iter().filter_map(|cell| match &cell.row {
            Row::Asked(point) => Some(point),
            Row::Refused { .. } => None,
        })
    }

    /// The long form: every value (or pair) and every way.
    fn entries(&self) -> impl Iterator<Item = Entry> + '_ {
        self.cells.iter().flat_map(move |cell| {
            Way::TABLE.iter().map(move |entry| {
                let (x, line) = match &cell.row {
                    Row::Asked(point) => {
                        let result = &point.ways[entry.way as usize];
                        (point.x, Line::asked(self.case, entry.way, result))
                    }
                    Row::Refused { x, why } => (*x, Line::refused(entry.way, why.to_string())),
                };
                Entry { x, y: cell.y, line }
            })
        })
    }
}

/// The values of the knobs and the line that belongs to them.
struct Entry {
    x: f64,
    y: f64,
    line: Line,
}

/// What the long form says of one way at one value. Quantities that do not exist are `None`.
#[derive(Serialize)]
struct Line {
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

impl Line {
    fn asked(case: &Case, way: Way, result: &Result<Sample, NotFlyable>) -> Self {
        match result {
            Ok(sample) => Self::of(way, Some(sample), None),
            Err(not) => Self::of(way, None, Some(words::reasons(case, not))),
        }
    }

    fn refused(way: Way, why: String) -> Self {
        Self::of(way, None, Some(why))
    }

    fn of(way: Way, sample: Option<&Sample>, reason: Option<String>) -> Self {
        let m_s = |pick: fn(&Sample) -> f64| sample.map(|sample| 1e3 * pick(sample));
        Self {
            way: way.name(),
            flyable: sample.is_some(),
            cost_m_s: m_s(|sample| sample.cost_km_s),
            dv_m_s: m_s(|sample| sample.dv_km_s),
            impulsive_dv_m_s: m_s(|sample| sample.impulsive_dv_km_s),
            finite_burn_loss_m_s: m_s(|sample| sample.dv_km_s - sample.impulsive_dv_km_s),
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

/// Name and unit of an axis: `target altitude, km`.
fn title(axis: &Axis) -> String {
    if axis.knob.unit().is_empty() {
        axis.knob.label.to_owned()
    } else {
        format!("{}, {}", axis.knob.label, axis.knob.unit())
    }
}
