//! Solving a held burn: Newton on what must hold, quasi-Newton on what is free, from a strong engine down to the real one.
//!
//! A strong engine burns almost in no time, and the impulsive plan is then a good first guess; the solution is followed down in thrust
//! to the engine at hand, with the Isp (hence all masses) unchanged. At every level the constraints are restored by the shortest Newton
//! steps (with Broyden updates), and the burn time is minimised along them: a step in the null space of their Jacobian, with the
//! curvature of the Lagrangian first by differences, then by BFGS. No variable is singled out as the dependent one, so that a fold of the
//! solutions over one of them (two leads for one attitude, say) is passed without noticing. With constant flow the shortest burn is the
//! cheapest.

use super::descent::{ALL, Basis, Curvature, DURATION, Rows, Variables, dot, updated};
use super::flight;
use super::{Controls, Engine, HeldBurn, NoBurn, Start, Steering, Task};
use crate::numerics::tolerance::ARC_RELATIVE;
use arrayvec::ArrayVec;

const YAW: usize = 3;
const APSE: usize = 4;
const OFFSET: usize = 5;
const RATE: usize = 6;

/// How well flights are integrated, misses closed and derivatives taken.
#[derive(Clone, Copy)]
struct Care {
    /// Relative accuracy of a flight, per step.
    flight: f64,
    /// Misses below this are rounding errors of the flight.
    closed: f64,
    /// Step of a difference quotient: its truncation and the flight's rounding are then about equal.
    step: f64,
    /// Most steps of the minimiser.
    most: usize,
}

/// At the engine at hand.
const THOROUGH: Care = Care {
    flight: ARC_RELATIVE,
    closed: 1e-11,
    step: 1e-5,
    most: 12,
};

/// While the solution is followed down to it: only the way there.
const PASSING: Care = Care {
    flight: 1e-7,
    closed: 1e-6,
    step: 1e-4,
    most: 2,
};

/// Angle (rad) that the engine would travel if it took no time, above which the solution is followed down from a stronger one.
const SMALL_ARC: f64 = 0.7;
/// A goal rounder than this is a circle: where its line of apsides lies does not matter.
const CIRCLE: f64 = 1e-9;

pub(super) fn solve(task: &Task, near: Option<&HeldBurn>) -> Result<HeldBurn, NoBurn> {
    let full = Level::new(task, 1.0, THOROUGH).ok_or(NoBurn::TooHeavy)?;
    if let Some(near) = near {
        let mut point = full.point_of(&near.controls);
        if full.settle(&mut point).is_some() {
            return finish(task, &full, &point);
        }
    }
    cold(task, &full)
}

fn cold(task: &Task, full: &Level) -> Result<HeldBurn, NoBurn> {
    let arc = full.scale_s * (task.gm / task.open_km.powi(3)).sqrt();
    let mut strength = (arc / SMALL_ARC).max(1.0);
    let mut found = None;
    for _ in 0..5 {
        if let Some(level) = Level::new(task, strength, care(strength)) {
            let mut point = level.guess();
            if level.settle(&mut point).is_some() {
                found = Some(point);
                break;
            }
        }
        strength *= 3.0;
    }
    let Some(mut point) = found else {
        return Err(
            no_approach(task, task.open_km).unwrap_or(NoBurn::NeverCloses {
                closes_at: f64::INFINITY,
            }),
        );
    };
    let mut ratio = 0.6_f64;
    let mut before: Option<(f64, Point)> = None;
    while 1.0 < strength {
        let next = if strength * ratio < 1.05 {
            1.0
        } else {
            strength * ratio
        };
        let mut trial = match &before {
            Some((other, old)) => point.beyond(old, *other, strength, next),
            None => point.clone(),
        };
        let reached = Level::new(task, next, care(next))
            .is_some_and(|level| level.settle(&mut trial).is_some());
        if reached {
            before = Some((strength, std::mem::replace(&mut point, trial)));
            strength = next;
            ratio = (ratio * ratio).max(0.45);
        } else if 0.985 < ratio {
            let aim = point.at[0] * task.open_km;
            return Err(no_approach(task, aim).unwrap_or(NoBurn::NeverCloses {
                closes_at: strength,
            }));
        } else {
            ratio = ratio.sqrt();
        }
    }
    finish(task, full, &point)
}

fn care(strength: f64) -> Care {
    if strength == 1.0 { THOROUGH } else { PASSING }
}

/// Whether the approach ends near a periapsis.
fn no_approach(task: &Task, periapsis_km: f64) -> Option<NoBurn> {
    let Start::Hyperbola(approach) = task.start else {
        return None;
    };
    [1.0, 1.05]
        .iter()
        .any(|more| approach(periapsis_km * more).is_none())
        .then_some(NoBurn::NoApproach { periapsis_km })
}

fn finish(task: &Task, full: &Level, point: &Point) -> Result<HeldBurn, NoBurn> {
    let controls = full.controls(&point.at);
    let engine = &task.engine;
    let v_inf_sq = match task.start {
        Start::Hyperbola(approach) => approach(controls.open_km),
        Start::AtPeriapsis { .. } | Start::AtApoapsis { .. } => None,
    };
    Ok(HeldBurn {
        controls,
        v_inf_sq,
        dv_km_s: engine.dv_after_km_s(controls.duration_s),
        mass_after_kg: engine.mass_kg - engine.flow_kg_s() * controls.duration_s,
    })
}

/// Where the search stands.
#[derive(Clone, Debug)]
struct Point {
    at: Variables,
    /// Curvature of the Lagrangian by the active variables, once known.
    curvature: Option<Curvature>,
}

impl Point {
    /// Extrapolates two solutions to a weaker engine: losses go with the square of the burn time.
    fn beyond(&self, old: &Point, old_strength: f64, strength: f64, next: f64) -> Self {
        let square = |strength: f64| strength.powi(-2);
        let share = (square(next) - square(strength)) / (square(strength) - square(old_strength));
        let share = share.min(2.5);
        Self {
            at: std::array::from_fn(|k| self.at[k] + share * (self.at[k] - old.at[k])),
            curvature: self.curvature,
        }
    }
}

/// The task with an engine of some strength.
struct Level<'a> {
    task: Task<'a>,
    /// Burn time without loss, s.
    scale_s: f64,
    eccentricity: f64,
    /// How many misses there are: 3, or 4 with a turn of the plane.
    misses: usize,
    /// Which variables there are.
    active: ArrayVec<usize, ALL>,
    /// Yaw that turns the plane if the burn takes no time, rad.
    yaw: f64,
    care: Care,
}

/// Misses at a point, their rates by the duration, and their derivatives by the active variables.
#[derive(Clone, Copy)]
struct Here {
    miss: [f64; 4],
    by_duration: [f64; 4],
}

impl<'a> Level<'a> {
    /// `None` where the burn would take nearly the whole mass.
    fn new(task: &Task<'a>, strength: f64, care: Care) -> Option<Self> {
        let (before, after, turn) = (task.speed_before_km_s, task.speed_after_km_s, task.turn_rad);
        let engine = Engine {
            thrust_n: task.engine.thrust_n * strength,
            ..task.engine
        };
        let half = (0.5 * turn).sin();
        let dv = ((before - after).powi(2) + 4.0 * before * after * half * half).sqrt();
        let scale_s = engine.time_for_s(dv);
        if !(0.0 < scale_s && engine.flow_kg_s() * scale_s < 0.98 * engine.mass_kg) {
            return None;
        }
        let sign = match task.start {
            Start::Hyperbola(_) | Start::AtPeriapsis { .. } => -1.0,
            Start::AtApoapsis { .. } => 1.0,
        };
        let eccentricity = task.goal.eccentricity();
        let mut active: ArrayVec<usize, ALL> = (0..=DURATION).collect();
        if turn != 0.0 {
            active.push(YAW);
        } else if CIRCLE < eccentricity {
            // With a turn the line of apsides is kept: it carries the node, and letting it go would move the turn to where it is cheaper
            // than on the line of apsides, which is another manoeuvre.
            active.push(APSE);
        }
        if task.steering != Steering::AgainstVelocity {
            active.push(OFFSET);
        }
        if task.steering == Steering::TurningAttitude {
            active.push(RATE);
        }
        Some(Self {
            task: Task { engine, ..*task },
            scale_s,
            eccentricity,
            misses: if turn == 0.0 { 3 } else { 4 },
            active,
            yaw: (after * turn.sin()).atan2(sign * (after * turn.cos() - before)),
            care,
        })
    }

    /// The impulsive burn, spread evenly over its time.
    fn guess(&self) -> Point {
        let rate = if self.task.steering == Steering::TurningAttitude {
            0.5 * self.task.speed_before_km_s / self.task.open_km * self.scale_s
        } else {
            0.0
        };
        Point {
            at: [1.0, 0.5, 1.0, self.yaw, 0.0, 0.0, rate],
            curvature: None,
        }
    }

    fn point_of(&self, controls: &Controls) -> Point {
        Point {
            at: [
                controls.open_km / self.task.open_km,
                controls.lead_s / self.scale_s,
                controls.duration_s / self.scale_s,
                controls.yaw_rad,
                controls.apse_rad,
                controls.offset_rad,
                controls.rate_rad_s * self.scale_s,
            ],
            curvature: None,
        }
    }

    fn controls(&self, at: &Variables) -> Controls {
        Controls {
            open_km: at[0] * self.task.open_km,
            lead_s: at[1] * self.scale_s,
            duration_s: at[DURATION] * self.scale_s,
            yaw_rad: if self.misses == 4 { at[YAW] } else { 0.0 },
            apse_rad: at[APSE],
            offset_rad: at[OFFSET],
            rate_rad_s: at[RATE] / self.scale_s,
        }
    }

    fn here(&self, at: &Variables) -> Option<Here> {
        let (there, rate) = flight::end(&self.task, &self.controls(at), self.care.flight)?;
        let (sine, cosine) = at[APSE].sin_cos();
        let e = self.eccentricity;
        let miss = [
            there.energy_ratio - 1.0,
            there.e[0] - e * cosine,
            there.e[1] - e * sine,
            there.tilt - self.task.turn_rad,
        ];
        let by_duration =
            [rate.energy_ratio, rate.e[0], rate.e[1], rate.tilt].map(|slope| slope * self.scale_s);
        miss.iter()
            .all(|value| value.is_finite())
            .then_some(Here { miss, by_duration })
    }

    fn size_of(&self, miss: &[f64; 4]) -> f64 {
        miss[..self.misses]
            .iter()
            .fold(0.0, |most, value| value.abs().max(most))
    }

    /// Derivatives of the misses by the active variables.
    fn jacobian(&self, at: &Variables, here: &Here) -> Option<Rows> {
        let mut rows = [[0.0; ALL]; 4];
        for (column, &variable) in self.active.iter().enumerate() {
            let slope = match variable {
                DURATION => here.by_duration,
                APSE => {
                    let (sine, cosine) = at[APSE].sin_cos();
                    [
                        0.0,
                        self.eccentricity * sine,
                        -self.eccentricity * cosine,
                        0.0,
                    ]
                }
                _ => self.difference(at, variable, here)?,
            };
            for (row, slope) in rows.iter_mut().zip(slope) {
                row[column] = slope;
            }
        }
        Some(rows)
    }

    /// A one-sided difference quotient; the other side where the first does not exist.
    fn difference(&self, at: &Variables, variable: usize, here: &Here) -> Option<[f64; 4]> {
        [self.care.step, -self.care.step].iter().find_map(|&h| {
            let mut moved = *at;
            moved[variable] += h;
            let there = self.here(&moved)?;
            Some(std::array::from_fn(|k| (there.miss[k] - here.miss[k]) / h))
        })
    }

    fn moved(&self, at: &Variables, step: &Variables, part: f64) -> Variables {
        let mut moved = *at;
        for (column, &variable) in self.active.iter().enumerate() {
            moved[variable] += part * step[column];
        }
        moved
    }

    /// Closes the misses, then makes the burn as short as it can be.
    fn settle(&self, point: &mut Point) -> Option<()> {
        let here = self.restore(&mut point.at, None)?;
        self.optimise(point, here)
    }

    /// Moves the variables by shortest steps until nothing is missed; `rows` is the Jacobian to begin with, where one is known.
    fn restore(&self, at: &mut Variables, rows: Option<Rows>) -> Option<Here> {
        let mut here = self.here(at)?;
        let mut known = rows;
        let n = self.active.len();
        for _ in 0..30 {
            let size = self.size_of(&here.miss);
            if size <= self.care.closed {
                return Some(here);
            }
            let fresh = known.is_none();
            let rows = match known {
                Some(rows) => rows,
                None => self.jacobian(at, &here)?,
            };
            let step = Basis::new(&rows, self.misses, n)?.shortest(&here.miss);
            let longest = step.iter().fold(0.0_f64, |most, s| most.max(s.abs()));
            let mut part = if 0.4 < longest { 0.4 / longest } else { 1.0 };
            let mut taken = None;
            for _ in 0..5 {
                let trial = self.moved(at, &step, part);
                if let Some(there) = self.here(&trial)
                    && self.size_of(&there.miss) < size
                {
                    taken = Some((trial, there));
                    break;
                }
                part *= 0.35;
            }
            let Some((trial, there)) = taken else {
                if !fresh {
                    known = None;
                    continue;
                }
                // Rounding errors of the flight end the descent a little above the mark.
                return (size <= 100.0 * self.care.closed).then_some(here);
            };
            let slow = 0.3 * size < self.size_of(&there.miss);
            // A slow step means that the matrix is no longer worth keeping.
            known = (!slow).then(|| {
                // Broyden: the least change of the matrix that explains what the step did.
                let step = step.map(|s| part * s);
                let length: f64 = step.iter().map(|s| s * s).sum();
                let mut updated = rows;
                for (k, row) in updated.iter_mut().enumerate().take(self.misses) {
                    let predicted: f64 = (0..n).map(|j| row[j] * step[j]).sum();
                    let surprise = (there.miss[k] - here.miss[k] - predicted) / length;
                    for (value, s) in row.iter_mut().zip(&step) {
                        *value += surprise * s;
                    }
                }
                updated
            });
            (*at, here) = (trial, there);
        }
        (self.size_of(&here.miss) <= 100.0 * self.care.closed).then_some(here)
    }

    /// Moves along the constraints until the burn is shortest, or the most steps are done.
    fn optimise(&self, point: &mut Point, here: Here) -> Option<()> {
        let n = self.active.len();
        if n == self.misses {
            return Some(());
        }
        let mut rows = self.jacobian(&point.at, &here)?;
        for _ in 0..self.care.most {
            let basis = Basis::new(&rows, self.misses, n)?;
            let curvature = match point.curvature {
                Some(curvature) => curvature,
                None => self.curvature(&point.at, &rows, &basis)?,
            };
            let (mut step, gain) = basis.descent(&curvature);
            let longest = step.iter().fold(0.0_f64, |most, s| most.max(s.abs()));
            if 0.3 < longest {
                step = step.map(|s| s * 0.3 / longest);
            }
            let mut next = self.moved(&point.at, &step, 1.0);
            let mut reached = self.restore(&mut next, Some(rows));
            for part in [0.25, 0.06] {
                if reached.is_none() {
                    // Too far along a curved constraint.
                    next = self.moved(&point.at, &step, part);
                    reached = self.restore(&mut next, Some(rows));
                }
            }
            let there = reached?;
            // What another step could still gain is far below what this one did.
            if gain <= 1e-9 * point.at[DURATION] {
                point.at = next;
                point.curvature = Some(curvature);
                return Some(());
            }
            let new_rows = self.jacobian(&next, &there)?;
            let step: Variables = std::array::from_fn(|column| {
                self.active
                    .get(column)
                    .map_or(0.0, |&variable| next[variable] - point.at[variable])
            });
            let change = basis.lagrangian_change(&rows, &new_rows);
            point.curvature = Some(updated(&curvature, &step, &change));
            point.at = next;
            rows = new_rows;
        }
        Some(())
    }

    /// Curvature of the Lagrangian by differences of the Jacobian along the null space; a round value across it.
    fn curvature(&self, at: &Variables, rows: &Rows, basis: &Basis) -> Option<Curvature> {
        const H: f64 = 1e-3;
        let n = self.active.len();
        let mut columns = [[0.0; ALL]; ALL];
        for (k, column) in columns.iter_mut().enumerate().take(n).skip(self.misses) {
            let moved = self.moved(at, &basis.q[k], H);
            let there = self.here(&moved)?;
            let moved_rows = self.jacobian(&moved, &there)?;
            *column = basis.lagrangian_change(rows, &moved_rows).map(|c| c / H);
        }
        // In the basis of the null space, made symmetric.
        let mut small = [[0.0; ALL]; ALL];
        let mut largest = 1e-6_f64;
        for k in self.misses..n {
            for j in self.misses..n {
                small[k][j] = 0.5 * (dot(&columns[k], &basis.q[j]) + dot(&columns[j], &basis.q[k]));
            }
            largest = largest.max(small[k][k].abs());
        }
        for (k, row) in small.iter_mut().enumerate().take(self.misses) {
            row[k] = largest;
        }
        let mut full = [[0.0; ALL]; ALL];
        for (i, row) in full.iter_mut().enumerate().take(n) {
            for (j, value) in row.iter_mut().enumerate().take(n) {
                *value = (0..n)
                    .flat_map(|k| (0..n).map(move |l| (k, l)))
                    .map(|(k, l)| basis.q[k][i] * small[k][l] * basis.q[l][j])
                    .sum();
            }
        }
        Some(full)
    }
}
