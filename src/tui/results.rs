//! What is known about the scenario as it stands, and how well it is known.
//!
//! Burns that take no time are computed at once. Burns that last are estimated at once and integrated on workers, coarsely first; the
//! grade says which of these is on the screen, and no two of them are ever mixed.

use super::layout;
use super::model::CurveLook;
use crate::arrival::{Plan, Way};
use crate::report::plot::{self, Mark, Quantity};
use crate::report::words;
use crate::study::curve::{self, Axis, Row, Sample};
use crate::study::engine::{self, Divided, Questions};
use crate::study::knob::{self, KnobId};
use crate::study::landmarks;
use crate::study::verdict::{self, Verdict};
use crate::study::warning::{self, Warning};
use crate::study::watch::{Alone, Crew, Stopped, gather};
use crate::study::{Answer, Case};

/// How well results are known.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Grade {
    /// Burns take no time: nothing better is to be had.
    Impulsive,
    /// Losses by first order.
    Estimated,
    /// Integrated; the curve at every few columns, the landmarks from a coarse scan.
    Coarse,
    /// Integrated in full.
    Integrated,
}

impl Grade {
    /// As the status line says it.
    pub fn words(self) -> &'static str {
        match self {
            Grade::Impulsive => "impulsive burns",
            Grade::Estimated => "finite burns: estimate",
            Grade::Coarse => "finite burns: coarse",
            Grade::Integrated => "finite burns",
        }
    }

    /// Whether nothing better is coming.
    pub fn is_final(self) -> bool {
        matches!(self, Grade::Impulsive | Grade::Integrated)
    }
}

/// What is known about the scenario as it stands.
#[derive(Clone, Debug)]
pub struct Results {
    /// How well.
    pub grade: Grade,
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
    /// What a review asks about the first burn of each way, by way; empty where burns take no time.
    pub questions: Vec<(Way, Questions)>,
    /// What each extra pass saves.
    pub divisions: Vec<Divided>,
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
    /// The cheapest altitude, km, and the way there.
    pub cheapest: Option<(f64, Sample)>,
    /// The crossovers.
    pub crossovers: Vec<(f64, Sample)>,
}

impl CurveResult {
    /// A place on the curve as a mark for a quantity.
    pub fn mark((x, sample): &(f64, Sample), quantity: Quantity) -> Option<Mark> {
        quantity.of(sample).map(|y| Mark { x: *x, y })
    }
}

/// Nodes of the coarse scan for landmarks.
const COARSE_POINTS: usize = 20;
/// Values of the coarse curve.
const COARSE_VALUES: usize = 16;

/// Everything at once: for burns that take no time exactly, for others by estimate.
pub fn at_once(case: &Case, look: &CurveLook, size: (u16, u16)) -> Results {
    let lasting = case.setting().lasting().is_some();
    let (rough, grade) = if lasting {
        (case.estimated(), Grade::Estimated)
    } else {
        (case.clone(), Grade::Impulsive)
    };
    let answer = Answer::of(&rough);
    // What each cause moves is asked again many times over; an estimate is on screen too briefly for that.
    let verdict = if lasting {
        verdict::glance(rough.setting(), &answer)
    } else {
        verdict::verdict(rough.setting(), &answer)
    };
    let curve = axis(&rough, look, size).map(|axis| {
        let rows = if lasting {
            let stride = axis.points.div_ceil(2 * COARSE_VALUES);
            curve::coarse_with(&rough, &axis, stride, &Alone).unwrap_or_default()
        } else {
            curve::curve(&rough, &axis)
        };
        with_marks(&rough, &answer, axis, rows)
    });
    in_words(&rough, grade, answer, verdict, curve)
}

/// Integrated results, coarsely: for a picture while the rest is computed.
///
/// # Errors
/// [`Stopped`] where the crew was stopped.
pub fn coarse(
    case: &Case,
    look: &CurveLook,
    size: (u16, u16),
    crew: &dyn Crew,
) -> Result<Results, Stopped> {
    let answer = Answer::with(case.setting(), COARSE_POINTS, crew)?;
    let verdict = verdict::glance(case.setting(), &answer);
    let curve = match axis(case, look, size) {
        Some(axis) => {
            let stride = axis.points.div_ceil(COARSE_VALUES);
            let rows = curve::coarse_with(case, &axis, stride, crew)?;
            Some(with_marks(case, &answer, axis, rows))
        }
        None => None,
    };
    Ok(in_words(case, Grade::Coarse, answer, verdict, curve))
}

/// Integrated results in full.
///
/// # Errors
/// [`Stopped`] where the crew was stopped.
pub fn integrated(
    case: &Case,
    look: &CurveLook,
    size: (u16, u16),
    crew: &dyn Crew,
) -> Result<Results, Stopped> {
    let setting = case.setting();
    let curve = match axis(case, look, size) {
        Some(axis) => Some((axis, curve::curve_with(case, &axis, crew)?)),
        None => None,
    };
    let answer = Answer::with(setting, landmarks::scan_points(setting), crew)?;
    let verdict = verdict::weigh(setting, &answer, crew)?;
    let plans: Vec<&Plan> = answer
        .ways
        .iter()
        .filter_map(|(_, plan)| plan.as_ref().ok())
        .collect();
    let questions = gather(crew, plans.len(), |k| {
        engine::questions(setting, plans[k], 0).map(|questions| (plans[k].way, questions))
    })?;
    let divisions = engine::divisions(setting);
    let curve = curve.map(|(axis, rows)| with_marks(case, &answer, axis, rows));
    let mut results = in_words(case, Grade::Integrated, answer, verdict, curve);
    results.questions = questions.into_iter().flatten().collect();
    results.divisions = divisions;
    Ok(results)
}

fn in_words(
    case: &Case,
    grade: Grade,
    answer: Answer,
    verdict: Verdict,
    curve: Option<CurveResult>,
) -> Results {
    Results {
        grade,
        sentence: words::verdict(case, &answer, &verdict),
        why: words::why(case, &verdict),
        shifts: words::shifts(case, &answer, &verdict),
        warnings: warning::warnings(case, &answer),
        questions: Vec::new(),
        divisions: Vec::new(),
        curve,
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

/// The altitudes that the columns of the picture stand for.
pub fn axis(case: &Case, look: &CurveLook, size: (u16, u16)) -> Option<Axis> {
    let (low, high) = shown_range(case, look)?;
    let (mut from, to) = (case.altitude_km(low), case.altitude_km(high));
    if look.x_log {
        // A floor at the surface has no logarithm; a ten-thousandth of the range is as good as zero there.
        from = from.max(1e-4 * to);
    }
    let columns = plot::columns(usize::from(layout::areas(size, 0, 0, 1).lens.width));
    Axis::new(
        knob::by_id(KnobId::TargetAltitude),
        from,
        to,
        columns,
        look.x_log,
    )
    .ok()
}

fn with_marks(case: &Case, answer: &Answer, axis: Axis, rows: Vec<Row>) -> CurveResult {
    let at = |way: Way, radius: f64| {
        way.figures(&landmarks::at_radius(case.setting(), radius))
            .ok()
            .map(|figures| (case.altitude_km(radius), Sample::from(&figures)))
    };
    let marks = &answer.landmarks;
    CurveResult {
        axis,
        rows,
        cheapest: marks
            .cheapest
            .and_then(|cheapest| at(Way::Direct, cheapest.radius_km)),
        crossovers: marks
            .crossovers
            .iter()
            .filter_map(|crossover| {
                at(crossover.below, crossover.radius_km)
                    .or_else(|| at(crossover.above, crossover.radius_km))
            })
            .collect(),
    }
}
