//! What moves the verdict: for each knob the slope of the cost and of the nearest crossover, and how far it must move until another way
//! becomes the cheapest, or the cheapest stops being flyable.
//!
//! One knob is asked at a time, all others stay; [`one`] is a pure function of its arguments, so a caller may share the knobs out, show
//! them as they come and stop between them ([`one_while`] also inside one). What comes first in [`sort`]ed order turns the verdict
//! soonest, counted in presses of an arrow key ([`presses`]), the one measure that suits every knob.

mod crossing;
mod probe;
mod reach;
mod scale;
mod slope;

use super::answer::Answer;
use super::case::Case;
use super::knob::{KNOBS, Knob, KnobId, Value};
use super::landmarks::Crossover;
use super::verdict::nearest_crossover;
use crate::arrival::{NotFlyable, Way};
use probe::Prober;
use scale::{Scale, is_whole};
pub use scale::{press, presses};

/// A case and its answer, as all knobs start from them.
#[derive(Clone, Debug)]
pub struct Here<'a> {
    case: &'a Case,
    nearest: Option<Crossover>,
    /// Brake and loop apoapsis altitude that the program has chosen, km.
    chosen_brake_km: Option<f64>,
    chosen_loop_km: Option<f64>,
    /// Passes that the program has chosen for way steps.
    chosen_passes: Option<f64>,
}

impl<'a> Here<'a> {
    /// Takes what the knobs need from an answer to the case.
    pub fn new(case: &'a Case, answer: &Answer) -> Self {
        // The best way's own brake is pinned where it has one: pinning another way's would make the best way dearer.
        let brake = answer
            .best_plan()
            .filter(|plan| 1 < plan.starts())
            .or_else(|| answer.plan(Way::Dip))
            .or_else(|| answer.plan(Way::Loop));
        let looped = answer
            .plan(Way::Loop)
            .and_then(|plan| plan.burns.first())
            .map(|burn| burn.orbit_after.apoapsis_km);
        Self {
            case,
            nearest: nearest_crossover(case.setting(), &answer.landmarks.crossovers),
            chosen_brake_km: brake.map(|plan| case.altitude_km(plan.brake_radius_km)),
            chosen_loop_km: looped.map(|radius| case.altitude_km(radius)),
            chosen_passes: answer.plan(Way::Steps).map(|plan| plan.passes() as f64),
        }
    }

    /// The knobs that have a value here, in the order of the table. One that is left to the program counts where a flyable way shows what
    /// the program chose.
    pub fn knobs(&self) -> impl Iterator<Item = &'static Knob> + '_ {
        KNOBS
            .iter()
            .filter(|knob| knob.offered(self.case) && self.start(knob).flatten().is_some())
    }

    /// Where a knob starts: `None` where it has no value here, `Some(None)` where the program chooses and no way shows what.
    fn start(&self, knob: &Knob) -> Option<Option<Start>> {
        Some(match knob.read(self.case).ok()? {
            Value::Number(value) => Some(Start {
                value,
                chosen: false,
            }),
            Value::Best => match knob.id {
                KnobId::BrakeAltitude => self.chosen_brake_km,
                KnobId::LoopApoapsis => self.chosen_loop_km,
                KnobId::Steps => self.chosen_passes,
                _ => None,
            }
            .map(|value| Start {
                value,
                chosen: true,
            }),
        })
    }
}

/// The value a knob starts from.
#[derive(Clone, Copy, Debug)]
struct Start {
    value: f64,
    chosen: bool,
}

/// How the verdict leans on one knob. Slopes and values are per or in the knob's own unit.
#[derive(Clone, Debug, PartialEq)]
pub struct Lean {
    /// The knob.
    pub knob: &'static Knob,
    /// The value it starts from.
    pub from: f64,
    /// Whether the program chose that value (`best`): the knob is then taken as held there, for all ways.
    pub chosen: bool,
    /// One press of an arrow at the start, in the knob's unit, see [`press`].
    pub press: f64,
    /// The cheapest way at the start.
    pub best: Option<Way>,
    /// Slope of that way's cost, km/s per unit; the way stays the same along the stencil.
    pub cost_slope: Slope,
    /// Slope of the altitude of the crossover nearest to the target, km per unit. [`Slope::Absent`] without a crossover, and for a value
    /// that the program chose, because there the crossover is one with another choice at every altitude.
    pub crossover_slope: Slope,
    /// What happens below the start.
    pub down: Reach,
    /// What happens above it.
    pub up: Reach,
}

impl Lean {
    /// The nearer of the two turning points, in presses of an arrow.
    pub fn nearest(&self) -> Option<&Turn> {
        [&self.down, &self.up]
            .into_iter()
            .filter_map(Reach::turn)
            .min_by(|a, b| a.presses.total_cmp(&b.presses))
    }

    /// The values between which the verdict was held, where it does not turn on either side.
    pub fn never(&self) -> Option<(f64, f64)> {
        match (&self.down, &self.up) {
            (Reach::Never { to: low, .. }, Reach::Never { to: high, .. }) => Some((*low, *high)),
            _ => None,
        }
    }

    /// What one press of the arrow changes in the cost, km/s; zero where there is no slope.
    fn weight(&self) -> f64 {
        self.cost_slope.steepest() * self.press
    }
}

/// A slope, and which side it was taken from.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Slope {
    /// The same from both sides.
    Central(f64),
    /// From above only: the knob is at the lower end of where the quantity exists.
    Above(f64),
    /// From below only: the knob is at the upper end.
    Below(f64),
    /// The curve has a kink here.
    Kinked {
        /// Slope just below.
        below: f64,
        /// Slope just above.
        above: f64,
    },
    /// There is none: the quantity does not exist here, or the knob takes whole numbers only.
    Absent,
}

impl Slope {
    /// The slope, where it is one number.
    pub fn value(self) -> Option<f64> {
        match self {
            Slope::Central(slope) | Slope::Above(slope) | Slope::Below(slope) => Some(slope),
            Slope::Kinked { .. } | Slope::Absent => None,
        }
    }

    /// The steepest of what there is, without its sign; zero where there is none.
    fn steepest(self) -> f64 {
        match self {
            Slope::Kinked { below, above } => below.abs().max(above.abs()),
            other => other.value().map_or(0.0, f64::abs),
        }
    }
}

/// What lies on one side of the start.
#[derive(Clone, Debug, PartialEq)]
pub enum Reach {
    /// The verdict turns.
    Turns(Turn),
    /// The verdict holds as far as the knob can go.
    Never {
        /// The last value looked at.
        to: f64,
        /// Why not further.
        end: End,
    },
}

impl Reach {
    /// The turning point, if there is one.
    pub fn turn(&self) -> Option<&Turn> {
        match self {
            Reach::Turns(turn) => Some(turn),
            Reach::Never { .. } => None,
        }
    }
}

/// Why a knob goes no further.
#[derive(Clone, Debug, PartialEq)]
pub enum End {
    /// The end of its range. Where the end itself is not allowed (zero thrust), a millionth of the start was the last value looked at.
    Range,
    /// The scenario cannot take more; the sentence says why.
    Refused(String),
}

/// Where the verdict turns.
#[derive(Clone, Debug, PartialEq)]
pub struct Turn {
    /// The knob's value there: where the two ways cost the same; the last value that keeps a limit; the first that sets a way free.
    pub value: f64,
    /// How far that is from the start, signed.
    pub change: f64,
    /// How far that is in presses of an arrow, see [`presses`].
    pub presses: f64,
    /// The cheapest flyable way beyond; `None` where nothing can be flown.
    pub to: Option<Way>,
    /// What makes it turn.
    pub why: Why,
}

/// What makes the verdict turn.
#[derive(Clone, Debug, PartialEq)]
pub enum Why {
    /// The other way becomes cheaper.
    Cheaper,
    /// The way that was cheapest can no longer be flown, for these reasons just beyond.
    Lost(NotFlyable),
    /// A cheaper way can be flown at last; these reasons forbade it just before.
    Freed(NotFlyable),
}

/// How closely the range is looked at: steps start at `first` and grow by the factor `growth` from one to the next, both in the knob's
/// own scale (the logarithm of a radius, speed or mass; radians).
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Effort {
    /// First step away from the start.
    pub first: f64,
    /// Growth of the step, above 1.
    pub growth: f64,
}

impl Effort {
    /// Steps of a tenth of the distance: some fifty values on each side. For burns that take no time.
    pub const FULL: Effort = Effort {
        first: 0.004,
        growth: 1.1,
    };
    /// Steps of half the distance: some fifteen values on each side. For ways that are dear to ask.
    pub const QUICK: Effort = Effort {
        first: 0.01,
        growth: 1.5,
    };
}

/// How the verdict leans on a knob; `None` where the knob has no value here (see [`Here::knobs`]).
pub fn one(here: &Here, knob: &'static Knob) -> Option<Lean> {
    one_while(here, knob, Effort::FULL, &|| true)
}

/// As [`one`], with a chosen effort, and given up (`None`) as soon as `wanted` says that the answer is no longer wanted. `wanted` is
/// asked before every setting that the ways are put to.
pub fn one_while(
    here: &Here,
    knob: &'static Knob,
    effort: Effort,
    wanted: &dyn Fn() -> bool,
) -> Option<Lean> {
    let start = here.start(knob)??;
    let prober = Prober::new(here.case, knob, wanted);
    let from = start.value;
    // A value as stated needs no setting: the case has it. This also keeps a cap given as a fraction exactly where it is.
    let at_start = if start.chosen {
        prober.costs(from).ok()?
    } else {
        prober.stated()?
    };
    let scale = Scale::of(knob, here.case, from);
    let best = at_start.best;
    let whole = is_whole(knob);
    let (low, high) = scale::ends(knob, from);
    let cost_slope = match best {
        Some(way) if !whole => {
            slope::slope(|x| prober.cost(x, way), from, scale.size(from), (low, high))
        }
        _ => Slope::Absent,
    };
    let crossover_slope = match here.nearest {
        Some(crossover) if !start.chosen && !whole => {
            crossing::slope(&prober, &crossover, from, &scale, (low, high))
        }
        _ => Slope::Absent,
    };
    let search = reach::Search {
        prober: &prober,
        from,
        at_start,
        scale,
        effort,
    };
    let lean = Lean {
        knob,
        from,
        chosen: start.chosen,
        press: press(knob, here.case.body().radius_km, from),
        best,
        cost_slope,
        crossover_slope,
        down: search.towards(low),
        up: search.towards(high),
    };
    (!prober.stopped()).then_some(lean)
}

/// Every knob in turn, in the order of the table. Lazy: a caller may stop between knobs.
pub fn each<'a>(here: &'a Here<'a>) -> impl Iterator<Item = Lean> + 'a {
    here.knobs().filter_map(move |knob| one(here, knob))
}

/// Every knob, [`sort`]ed.
pub fn all(case: &Case, answer: &Answer) -> Vec<Lean> {
    let here = Here::new(case, answer);
    let mut leans: Vec<Lean> = each(&here).collect();
    sort(&mut leans);
    leans
}

/// Sorts by the presses to the nearer turning point, the knob that turns the verdict soonest first. Those that never turn it come after,
/// the one whose press changes the cost most first; last, the order of the table.
pub fn sort(leans: &mut [Lean]) {
    let presses = |lean: &Lean| lean.nearest().map_or(f64::INFINITY, |turn| turn.presses);
    leans.sort_by(|a, b| {
        presses(a)
            .total_cmp(&presses(b))
            .then(b.weight().total_cmp(&a.weight()))
            .then(a.knob.id.cmp(&b.knob.id))
    });
}

#[cfg(test)]
mod tests;
