//! A sweep as JSON: the rows of the CSV, the landmarks, and what it takes to repeat it.

use super::{Line, Sweep};
use crate::report::brief::{LandmarksJson, PROGRAM, ProgramJson, landmarks_json};
use crate::report::{json, rerun};
use crate::study::curve::Axis;
use serde::{Serialize, Serializer};

#[derive(Serialize)]
struct SweepJson<'a> {
    format: u32,
    program: ProgramJson,
    scenario: ScenarioJson<'a>,
    over: &'static str,
    and: Option<&'static str>,
    axes: Vec<AxisJson>,
    landmarks: LandmarksJson,
    rows: Vec<RowJson>,
}

#[derive(Serialize)]
struct ScenarioJson<'a> {
    title: &'a str,
    fingerprint: &'a str,
    ron: String,
}

#[derive(Serialize)]
struct AxisJson {
    knob: &'static str,
    column: &'static str,
    from: f64,
    to: f64,
    points: usize,
    log: bool,
}

impl From<&Axis> for AxisJson {
    fn from(axis: &Axis) -> Self {
        Self {
            knob: axis.knob.name,
            column: axis.knob.column,
            from: axis.from,
            to: axis.to,
            points: axis.points,
            log: axis.log,
        }
    }
}

#[derive(Serialize)]
struct RowJson {
    #[serde(flatten)]
    knobs: Knobs,
    #[serde(flatten)]
    line: Line,
}

/// The knobs' columns, named as the knobs are, and their values.
struct Knobs(Vec<(&'static str, f64)>);

impl Serialize for Knobs {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        serializer.collect_map(self.0.iter().copied())
    }
}

/// Renders the sweep.
pub(super) fn render(sweep: &Sweep) -> String {
    let (first, second) = (&sweep.first, sweep.second.as_ref());
    let spec = sweep.case.spec();
    let rows = sweep
        .entries()
        .map(|entry| {
            let mut knobs = vec![(first.knob.column, entry.x)];
            knobs.extend(second.map(|axis| (axis.knob.column, entry.y)));
            RowJson {
                knobs: Knobs(knobs),
                line: entry.line,
            }
        })
        .collect();
    json::text(&SweepJson {
        format: 1,
        program: PROGRAM,
        scenario: ScenarioJson {
            title: &spec.title,
            fingerprint: &sweep.fingerprint,
            ron: rerun::lines(spec).join("\n") + "\n",
        },
        over: first.knob.name,
        and: second.map(|axis| axis.knob.name),
        axes: std::iter::once(first)
            .chain(second)
            .map(AxisJson::from)
            .collect(),
        landmarks: landmarks_json(sweep.case, &sweep.landmarks()),
        rows,
    })
}
