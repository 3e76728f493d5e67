//! Curves: one knob swept, every way asked at each value.

use super::answer::cheapest;
use super::case::Case;
use super::knob::{Knob, KnobId, Refused, Value};
use super::watch::{Crew, Stopped, gather};
use crate::arrival::{Figures, NotFlyable, Plan, Setting, Way};

/// What is kept of a plan at one point of a curve. km/s, s, kg.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Sample {
    /// What ways are ranked by, km/s.
    pub cost_km_s: f64,
    /// Δv spent, km/s.
    pub dv_km_s: f64,
    /// Δv if burns took no time, km/s.
    pub impulsive_dv_km_s: f64,
    /// Propellant for the Δv spent, kg.
    pub propellant_kg: Option<f64>,
    /// Mass after the last burn, kg.
    pub final_mass_kg: Option<f64>,
    /// Coasts plus half the burns, s.
    pub duration_s: f64,
    /// Number of burns.
    pub starts: usize,
    /// Longest single burn, s.
    pub longest_burn_s: Option<f64>,
    /// Share of the first burn's Δv after which the spacecraft is captured.
    pub captured_share: Option<f64>,
}

impl From<&Figures> for Sample {
    fn from(figures: &Figures) -> Self {
        Self {
            cost_km_s: figures.cost_km_s,
            dv_km_s: figures.dv_km_s,
            impulsive_dv_km_s: figures.impulsive_dv_km_s,
            propellant_kg: figures.consumption.map(|used| used.propellant_kg),
            final_mass_kg: figures.consumption.map(|used| used.final_mass_kg),
            duration_s: figures.duration_s,
            starts: figures.starts,
            longest_burn_s: figures.consumption.map(|used| used.longest_burn_s),
            captured_share: figures.captured_share(),
        }
    }
}

impl From<&Plan> for Sample {
    fn from(plan: &Plan) -> Self {
        Self {
            cost_km_s: plan.cost_km_s,
            dv_km_s: plan.dv_km_s,
            impulsive_dv_km_s: plan.impulsive_dv_km_s,
            propellant_kg: plan.consumption.map(|used| used.propellant_kg),
            final_mass_kg: plan.consumption.map(|used| used.final_mass_kg),
            duration_s: plan.duration_s,
            starts: plan.starts(),
            longest_burn_s: plan.consumption.map(|used| used.longest_burn_s),
            captured_share: plan.captured_share,
        }
    }
}

/// One point of a curve.
#[derive(Clone, Debug, PartialEq)]
pub struct Point {
    /// The knob's value, in its unit.
    pub x: f64,
    /// Each way of the table, in its order.
    pub ways: [Result<Sample, NotFlyable>; Way::COUNT],
    /// The cheapest flyable way.
    pub best: Option<Way>,
}

impl Point {
    /// Asks every way at a setting.
    pub fn ask(x: f64, setting: &Setting) -> Self {
        let ways = std::array::from_fn(|k| {
            Way::TABLE[k]
                .way
                .figures(setting)
                .map(|figures| Sample::from(&figures))
        });
        Self {
            x,
            best: best_of(&ways),
            ways,
        }
    }
}

/// The cheapest of a point's ways.
pub fn best_of(ways: &[Result<Sample, NotFlyable>; Way::COUNT]) -> Option<Way> {
    cheapest(Way::TABLE.iter().zip(ways).filter_map(|(entry, way)| {
        way.as_ref()
            .ok()
            .map(|sample| (entry.way, sample.cost_km_s, sample.starts))
    }))
}

/// The values a knob takes in a sweep.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Axis {
    /// The knob.
    pub knob: &'static Knob,
    /// First value, in the knob's unit.
    pub from: f64,
    /// Last value.
    pub to: f64,
    /// How many values, ends included.
    pub points: usize,
    /// Evenly spaced in the logarithm.
    pub log: bool,
}

impl PartialEq for Knob {
    fn eq(&self, other: &Self) -> bool {
        self.id == other.id
    }
}

impl Axis {
    /// Makes an axis.
    ///
    /// # Errors
    /// A sentence where the ends are not allowed for the knob, fewer than two points, or a logarithm of what is not positive.
    pub fn new(
        knob: &'static Knob,
        from: f64,
        to: f64,
        points: usize,
        log: bool,
    ) -> Result<Self, String> {
        let field = knob.range_field();
        for (end, value) in [("from", from), ("to", to)] {
            if !field.allows(value) {
                return Err(format!(
                    "{} {end} {value} is not allowed: {}",
                    knob.name,
                    field.range()
                ));
            }
        }
        if from == to {
            return Err(format!(
                "{} from and to are both {from}; give two different values",
                knob.name
            ));
        }
        if !(2..=MOST_POINTS).contains(&points) {
            return Err(format!(
                "{points} points are not allowed: at least 2 and at most {MOST_POINTS}"
            ));
        }
        if log && (from <= 0.0 || to <= 0.0) {
            return Err(format!(
                "a logarithmic axis needs ends above 0, and {} goes from {from} to {to}",
                knob.name
            ));
        }
        Ok(Self {
            knob,
            from,
            to,
            points,
            log,
        })
    }

    /// The k-th value; the ends are met exactly.
    pub fn value(&self, k: usize) -> f64 {
        if k == 0 {
            return self.from;
        }
        if self.points <= k + 1 {
            return self.to;
        }
        let share = k as f64 / (self.points - 1) as f64;
        if self.log {
            self.from * (share * (self.to / self.from).ln()).exp()
        } else {
            self.from + share * (self.to - self.from)
        }
    }

    /// All values.
    pub fn values(&self) -> impl Iterator<Item = f64> + '_ {
        (0..self.points).map(|k| self.value(k))
    }
}

/// Most values an axis may have: keeps a typing error from filling the memory.
pub const MOST_POINTS: usize = 100_000;

/// The setting at a value of a knob. Target altitude, the axis of the screen, is set without building a new case.
///
/// # Errors
/// Where the scenario has no such knob or the value contradicts another field.
pub fn setting_at(case: &Case, knob: &Knob, value: f64) -> Result<Setting, Refused> {
    if knob.id == KnobId::TargetAltitude {
        let target = case.setting().target;
        let periapsis = case.body().radius_km + value;
        // The eccentricity is kept by keeping the ratio of the apsides.
        let apoapsis = periapsis * (target.apoapsis_km / target.periapsis_km);
        return Ok(case.setting().with_target(periapsis, apoapsis));
    }
    knob.set(case, Value::Number(value))
        .map(|case| *case.setting())
}

/// A value of a sweep: the point, or why the scenario cannot take the value.
#[derive(Clone, Debug, PartialEq)]
pub enum Row {
    /// Every way asked.
    Asked(Point),
    /// The scenario cannot take this value.
    Refused {
        /// The value.
        x: f64,
        /// Why.
        why: Refused,
    },
}

/// Sweeps one knob.
pub fn curve(case: &Case, axis: &Axis) -> Vec<Row> {
    axis.values().map(|x| row(case, axis, x)).collect()
}

/// Sweeps one knob, the work shared by a crew.
///
/// # Errors
/// [`Stopped`] where the crew was stopped.
pub fn curve_with(case: &Case, axis: &Axis, crew: &dyn Crew) -> Result<Vec<Row>, Stopped> {
    gather(crew, axis.points, |k| row(case, axis, axis.value(k)))
}

/// Sweeps one knob coarsely: only every `stride`-th value (and the last) is computed, those between are drawn through in a straight
/// line. For a picture that is shown while the rest is computed, and marked as such.
///
/// # Errors
/// [`Stopped`] where the crew was stopped.
pub fn coarse_with(
    case: &Case,
    axis: &Axis,
    stride: usize,
    crew: &dyn Crew,
) -> Result<Vec<Row>, Stopped> {
    let stride = stride.max(1);
    let mut asked: Vec<usize> = (0..axis.points).step_by(stride).collect();
    if asked.last() != Some(&(axis.points - 1)) {
        asked.push(axis.points - 1);
    }
    let nodes = gather(crew, asked.len(), |k| row(case, axis, axis.value(asked[k])))?;
    let mut rows: Vec<Row> = Vec::with_capacity(axis.points);
    for (ends, pair) in asked.windows(2).zip(nodes.windows(2)) {
        for k in ends[0]..ends[1] {
            let share = (k - ends[0]) as f64 / (ends[1] - ends[0]) as f64;
            rows.push(between(&pair[0], &pair[1], share, axis.value(k)));
        }
    }
    rows.extend(nodes.last().cloned());
    Ok(rows)
}

/// A row between two: numbers where both have them, otherwise what the nearer one says.
fn between(left: &Row, right: &Row, share: f64, x: f64) -> Row {
    let (Row::Asked(a), Row::Asked(b)) = (left, right) else {
        let mut near = if share < 0.5 { left } else { right }.clone();
        match &mut near {
            Row::Asked(point) => point.x = x,
            Row::Refused { x: at, .. } => *at = x,
        }
        return near;
    };
    let ways = std::array::from_fn(|k| match (&a.ways[k], &b.ways[k]) {
        (Ok(a), Ok(b)) => Ok(Sample::between(a, b, share)),
        (a, b) => if share < 0.5 { a } else { b }.clone(),
    });
    Row::Asked(Point {
        x,
        best: best_of(&ways),
        ways,
    })
}

impl Sample {
    fn between(a: &Self, b: &Self, share: f64) -> Self {
        let mix = |a: f64, b: f64| a + share * (b - a);
        let maybe = |a: Option<f64>, b: Option<f64>| a.zip(b).map(|(a, b)| mix(a, b));
        Self {
            cost_km_s: mix(a.cost_km_s, b.cost_km_s),
            dv_km_s: mix(a.dv_km_s, b.dv_km_s),
            impulsive_dv_km_s: mix(a.impulsive_dv_km_s, b.impulsive_dv_km_s),
            propellant_kg: maybe(a.propellant_kg, b.propellant_kg),
            final_mass_kg: maybe(a.final_mass_kg, b.final_mass_kg),
            duration_s: mix(a.duration_s, b.duration_s),
            starts: a.starts,
            longest_burn_s: maybe(a.longest_burn_s, b.longest_burn_s),
            captured_share: maybe(a.captured_share, b.captured_share),
        }
    }
}

/// One value of a sweep.
pub fn row(case: &Case, axis: &Axis, x: f64) -> Row {
    match setting_at(case, axis.knob, x) {
        Ok(setting) => Row::Asked(Point::ask(x, &setting)),
        Err(why) => Row::Refused { x, why },
    }
}

/// One cell of a map: the values of both knobs and the point (its `x` is the first knob's value).
#[derive(Clone, Debug, PartialEq)]
pub struct Cell {
    /// Value of the second knob.
    pub y: f64,
    /// The row at the first knob's value.
    pub row: Row,
}

/// Sweeps two knobs: for each value of the second, all values of the first.
pub fn map(case: &Case, first: &Axis, second: &Axis) -> Vec<Cell> {
    second
        .values()
        .flat_map(|y| {
            let at_y = second.knob.set(case, Value::Number(y));
            first
                .values()
                .map(move |x| cell(&at_y, first, x, y))
                .collect::<Vec<_>>()
        })
        .collect()
}

/// Sweeps two knobs, the work shared by a crew.
///
/// # Errors
/// [`Stopped`] where the crew was stopped.
pub fn map_with(
    case: &Case,
    first: &Axis,
    second: &Axis,
    crew: &dyn Crew,
) -> Result<Vec<Cell>, Stopped> {
    let cases: Vec<(f64, Result<Case, Refused>)> = second
        .values()
        .map(|y| (y, second.knob.set(case, Value::Number(y))))
        .collect();
    gather(crew, first.points * second.points, |k| {
        let (y, at_y) = &cases[k / first.points];
        cell(at_y, first, first.value(k % first.points), *y)
    })
}

fn cell(at_y: &Result<Case, Refused>, first: &Axis, x: f64, y: f64) -> Cell {
    let row = match at_y {
        Ok(case) => row(case, first, x),
        Err(why) => Row::Refused {
            x,
            why: why.clone(),
        },
    };
    Cell { y, row }
}
