//! Everything the explorer knows: the scenario, its history, what is looked at, and the results for it.
//!
//! Results are computed here, when something they depend on changes; drawing only reads them.

use super::layout;
use crate::arrival::Way;
use crate::report::plot::{self, Glyphs, Mark, Quantity};
use crate::report::words;
use crate::scenario::file::{self, Loaded, Stamp};
use crate::study::curve::{self, Axis, Row};
use crate::study::knob::{self, KNOBS, Knob, KnobId};
use crate::study::landmarks;
use crate::study::verdict::{self, Verdict};
use crate::study::warning::{self, Warning};
use crate::study::{Answer, Case, Spec};
use std::path::PathBuf;

/// What the large area shows.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Lens {
    /// The cost curve.
    Curve,
    /// The burns of one way.
    Burns,
    /// Reasons, warnings, assumptions, sources.
    Notes,
}

impl Lens {
    /// All lenses in the order they are gone through, with name and purpose.
    pub const ALL: &'static [(Lens, &'static str, &'static str)] = &[
        (
            Lens::Curve,
            "curve",
            "what every target altitude costs, way by way",
        ),
        (
            Lens::Burns,
            "burns",
            "each burn of one way: where, before and after, how long",
        ),
        (
            Lens::Notes,
            "notes",
            "why, what is refused, warnings, assumptions and sources in full",
        ),
    ];
}

/// Something that lies over the screen and takes the keys.
#[derive(Clone, Debug, PartialEq)]
pub enum Overlay {
    /// The help page.
    Help,
    /// A value being typed for a knob.
    Entry {
        /// The knob.
        knob: KnobId,
        /// What has been typed.
        text: String,
    },
    /// A file name being typed.
    SaveAs {
        /// What has been typed.
        text: String,
    },
    /// A question answered by `y` or anything else.
    Ask(Question),
}

/// A question before something is lost.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Question {
    /// Leave with unsaved changes.
    Quit,
    /// Read the file again over unsaved changes.
    Reload,
    /// Overwrite a file that changed on disk.
    Overwrite,
    /// Overwrite another file that exists.
    Replace,
}

/// How a message is meant.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Tone {
    /// Something was done.
    Done,
    /// Something was refused or failed.
    Refused,
}

/// The file behind the scenario.
#[derive(Clone, Debug)]
pub struct FileState {
    /// Where it is saved; `None` for the built-in scenario.
    pub path: Option<PathBuf>,
    /// Its text as last read or saved.
    pub text: String,
    /// What it was on disk then.
    pub stamp: Option<Stamp>,
    /// The scenario as last read or saved.
    pub saved: Spec,
}

/// How the curve is looked at.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct CurveLook {
    /// Logarithmic horizontal axis.
    pub x_log: bool,
    /// Logarithmic vertical axis.
    pub y_log: bool,
    /// What is drawn.
    pub quantity: Quantity,
    /// Radii shown, km, where not the whole sensible range.
    pub zoom: Option<(f64, f64)>,
}

/// What is known about the scenario as it stands.
#[derive(Clone, Debug)]
pub struct Results {
    /// Every way, the cheapest, the landmarks.
    pub answer: Answer,
    /// The verdict weighed.
    pub verdict: Verdict,
    /// The verdict in words.
    pub sentence: String,
    /// Its reason in words.
    pub why: String,
    /// What moves it, strongest first.
    pub shifts: Vec<String>,
    /// Warnings.
    pub warnings: Vec<Warning>,
    /// The curve, one row for each column; `None` where there is no range to show.
    pub curve: Option<CurveResult>,
}

/// The curve on screen.
#[derive(Clone, Debug)]
pub struct CurveResult {
    /// The altitudes swept.
    pub axis: Axis,
    /// A row for each column.
    pub rows: Vec<Row>,
    /// The cheapest altitude.
    pub cheapest: Option<Mark>,
    /// The crossovers.
    pub crossovers: Vec<Mark>,
}

/// The explorer's state.
#[derive(Clone, Debug)]
pub struct Model {
    /// Terminal size in cells.
    pub size: (u16, u16),
    /// The scenario.
    pub case: Case,
    /// The file behind it.
    pub file: FileState,
    /// Steps that can be taken back, oldest first.
    pub undo: Vec<Spec>,
    /// Steps taken back, latest last.
    pub redo: Vec<Spec>,
    /// The gesture that the latest step belongs to, so that holding an arrow is one step.
    pub gesture: Option<(KnobId, bool)>,
    /// The selected knob.
    pub knob: KnobId,
    /// What the large area shows.
    pub lens: Lens,
    /// How the curve is looked at.
    pub look: CurveLook,
    /// The way the burns lens shows; `None` follows the cheapest.
    pub way: Option<Way>,
    /// First line shown in lenses and pages that scroll.
    pub scroll: usize,
    /// What lies over the screen.
    pub overlay: Option<Overlay>,
    /// Where a save waits to go while a question about it is open.
    pub pending_path: Option<PathBuf>,
    /// A message until the next key.
    pub message: Option<(Tone, String)>,
    /// Symbols.
    pub glyphs: Glyphs,
    /// Results for the scenario as it stands.
    pub results: Results,
}

impl Model {
    /// The explorer on a scenario, at a terminal size.
    pub fn new(loaded: Loaded, path: Option<PathBuf>, size: (u16, u16), glyphs: Glyphs) -> Self {
        let look = CurveLook {
            x_log: true,
            y_log: false,
            quantity: Quantity::Cost,
            zoom: None,
        };
        // What the file says, which is not what is shown when knobs were set on the command line.
        let saved = file::parse("", &loaded.text).map_or_else(
            |_| loaded.case.spec().clone(),
            |read| read.case.spec().clone(),
        );
        let results = results(&loaded.case, &look, size);
        Self {
            size,
            file: FileState {
                path,
                text: loaded.text,
                stamp: loaded.stamp,
                saved,
            },
            case: loaded.case,
            undo: Vec::new(),
            redo: Vec::new(),
            gesture: None,
            knob: KnobId::TargetAltitude,
            lens: Lens::Curve,
            look,
            way: None,
            scroll: 0,
            overlay: None,
            pending_path: None,
            message: None,
            glyphs,
            results,
        }
    }

    /// Whether the scenario differs from the file.
    pub fn unsaved(&self) -> bool {
        self.file.saved != *self.case.spec()
    }

    /// The file's name as shown.
    pub fn name(&self) -> String {
        match &self.file.path {
            Some(path) => path.file_name().map_or_else(
                || path.display().to_string(),
                |name| name.to_string_lossy().into_owned(),
            ),
            None => "built-in".to_owned(),
        }
    }

    /// The knobs this scenario offers, in the order of the table.
    pub fn knobs(&self) -> Vec<&'static Knob> {
        KNOBS
            .iter()
            .filter(|knob| knob.offered(&self.case))
            .collect()
    }

    /// The selected knob.
    pub fn selected(&self) -> &'static Knob {
        knob::by_id(self.knob)
    }

    /// The way the burns lens shows.
    pub fn shown_way(&self) -> Way {
        self.way.or(self.results.answer.best).unwrap_or(Way::Direct)
    }

    /// Computes everything anew for the scenario, the look and the size.
    pub fn recompute(&mut self) {
        self.results = results(&self.case, &self.look, self.size);
    }

    /// Computes the curve anew, for another look or size.
    pub fn recompute_curve(&mut self) {
        self.results.curve = curve_result(&self.case, &self.results.answer, &self.look, self.size);
    }
}

fn results(case: &Case, look: &CurveLook, size: (u16, u16)) -> Results {
    let answer = Answer::of(case);
    let verdict = verdict::verdict(case.setting(), &answer);
    Results {
        sentence: words::verdict(case, &answer, &verdict),
        why: words::why(case, &verdict),
        shifts: words::shifts(case, &answer, &verdict),
        warnings: warning::warnings(case, &answer),
        curve: curve_result(case, &answer, look, size),
        verdict,
        answer,
    }
}

/// The range of target periapsis radii shown, km.
pub fn shown_range(case: &Case, look: &CurveLook) -> Option<(f64, f64)> {
    let (low, high) = landmarks::sensible_range(case.setting())?;
    match look.zoom {
        Some((from, to)) => {
            let (from, to) = (from.max(low), to.min(high));
            if from < to {
                Some((from, to))
            } else {
                Some((low, high))
            }
        }
        None => Some((low, high)),
    }
}

fn curve_result(
    case: &Case,
    answer: &Answer,
    look: &CurveLook,
    size: (u16, u16),
) -> Option<CurveResult> {
    let (low, high) = shown_range(case, look)?;
    let (mut from, to) = (case.altitude_km(low), case.altitude_km(high));
    if look.x_log {
        // A floor at the surface has no logarithm; a ten-thousandth of the range is as good as zero there.
        from = from.max(1e-4 * to);
    }
    let columns = plot::columns(usize::from(layout::areas(size, 0, 0, 1).lens.width));
    let axis = Axis::new(
        knob::by_id(KnobId::TargetAltitude),
        from,
        to,
        columns,
        look.x_log,
    )
    .ok()?;
    let rows = curve::curve(case, &axis);
    let value_at = |way: Way, radius: f64| {
        let plan = way
            .plan(&landmarks::at_radius(case.setting(), radius))
            .ok()?;
        let y = look.quantity.of(&(&plan).into())?;
        Some(Mark {
            x: case.altitude_km(radius),
            y,
        })
    };
    let marks = &answer.landmarks;
    Some(CurveResult {
        axis,
        rows,
        cheapest: marks
            .cheapest
            .and_then(|cheapest| value_at(Way::Direct, cheapest.radius_km)),
        crossovers: marks
            .crossovers
            .iter()
            .filter_map(|crossover| {
                value_at(crossover.below, crossover.radius_km)
                    .or_else(|| value_at(crossover.above, crossover.radius_km))
            })
            .collect(),
    })
}
