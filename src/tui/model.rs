//! Everything the explorer knows: the scenario, its history, what is looked at, and the results for it.
//!
//! Results are asked for here, when something they depend on changes; drawing only reads them.

use super::results::{self, Results};
use super::worker::{Job, Report};
use crate::arrival::Way;
use crate::report::plot::{Glyphs, Quantity};
use crate::scenario::file::{self, Loaded, Stamp};
use crate::study::knob::{self, KNOBS, Knob, KnobId};
use crate::study::watch::Alone;
use crate::study::{Case, Spec};
use std::path::PathBuf;

/// What the large area shows.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Lens {
    /// The cost curve.
    Curve,
    /// A picture of one way, to scale.
    Path,
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
            Lens::Path,
            "path",
            "one way to scale: body, hyperbola, orbits, burns, floor and cap",
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
    /// How close the path lens looks: 1 shows all orbits.
    pub path_zoom: f64,
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
    /// Number of the latest request to the worker; older answers are dropped.
    pub asked: u64,
    /// What the worker has to be asked next.
    pub wanted: Option<Job>,
    /// How far the worker is, in percent, while it works.
    pub working: Option<u8>,
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
        let results = results::at_once(&loaded.case, &look, size);
        let mut model = Self {
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
            path_zoom: 1.0,
            scroll: 0,
            overlay: None,
            pending_path: None,
            message: None,
            glyphs,
            results,
            asked: 0,
            wanted: None,
            working: None,
        };
        model.ask_worker();
        model
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

    /// Computes everything anew for the scenario, the look and the size: at once what can be, the rest by the worker.
    pub fn recompute(&mut self) {
        self.results = results::at_once(&self.case, &self.look, self.size);
        self.ask_worker();
    }

    /// Computes the curve anew, for another look or size. The same curve is kept: a quantity is only read from it.
    pub fn recompute_curve(&mut self) {
        let axis = results::axis(&self.case, &self.look, self.size);
        if self.results.curve.as_ref().map(|curve| curve.axis) != axis {
            self.recompute();
        }
    }

    fn ask_worker(&mut self) {
        self.asked += 1;
        let grade = self.results.grade;
        self.working = (!grade.is_final()).then_some(0);
        self.wanted = (!grade.is_final()).then(|| Job {
            number: self.asked,
            case: self.case.clone(),
            look: self.look,
            size: self.size,
        });
    }

    /// Takes what the worker reports, unless something newer has been asked.
    pub fn hear(&mut self, report: Report) {
        match report {
            Report::Progress { number, percent } if number == self.asked => {
                self.working = self.working.map(|before| before.max(percent));
            }
            Report::Results { number, results } if number == self.asked => {
                if results.grade.is_final() {
                    self.working = None;
                }
                self.results = *results;
            }
            Report::Failed { number } if number == self.asked => {
                self.working = None;
                self.message = Some((
                    Tone::Refused,
                    "the integration came to an unforeseen end; what is shown is an estimate"
                        .to_owned(),
                ));
            }
            _ => {}
        }
    }

    /// Does the worker's part here and now, on one thread. For what has no worker.
    pub fn finish_now(&mut self) {
        if let Some(job) = self.wanted.take()
            && let Ok(results) = results::integrated(&job.case, &job.look, job.size, &Alone)
        {
            self.hear(Report::Results {
                number: job.number,
                results: Box::new(results),
            });
        }
    }
}
