//! Flying a burn of known length: the end state, its elements, and what is seen on the way.

use super::{Controls, Start, Steering, Task, Track};
use crate::numerics::integrate::{Accuracy, Stop, integrate};
use crate::numerics::tolerance::ARC_RELATIVE;
#[cfg(test)]
use crate::physics::conic;
use crate::physics::thrust_arc::{State, hyperbola_state};
use std::f64::consts::PI;

/// Elements of the orbit left, regular for every eccentricity: −2E in units of the goal's, eccentricity vector turned into the plane of the
/// conic before by the shortest rotation, tilt of the plane (rad).
#[derive(Clone, Copy, Debug)]
pub(super) struct Elements {
    pub(super) energy_ratio: f64,
    pub(super) e: [f64; 2],
    pub(super) tilt: f64,
}

/// Direction of thrust by time and state.
struct Law {
    steering: Steering,
    /// −1 against the motion, +1 along it.
    sign: f64,
    yaw: f64,
    offset: f64,
    rate: f64,
    /// Time of ignition from the apsis, s.
    since: f64,
}

/// State at ignition in the plane of the conic before: x towards its periapsis.
pub(super) fn ignition_state(task: &Task, controls: &Controls) -> Option<State> {
    let (s, t) = (controls.open_km, -controls.lead_s);
    if !(0.0 < s && s.is_finite() && t.is_finite()) {
        return None;
    }
    match task.start {
        Start::Hyperbola(approach) => Some(hyperbola_state(task.gm, approach(s)?, s, t)),
        Start::AtPeriapsis { apoapsis_km } => {
            (s <= apoapsis_km).then(|| ellipse_state(task.gm, s, apoapsis_km, t, false))
        }
        Start::AtApoapsis { periapsis_km } => {
            (periapsis_km <= s).then(|| ellipse_state(task.gm, periapsis_km, s, t, true))
        }
    }
}

/// The state on an ellipse at a time from one of its apsides, s.
///
/// Kepler's equation E − e sin E = M; from apoapsis with E = π + x, M = π + m it reads x + e sin x = m, which keeps its digits there.
/// Newton, held in its bracket; error a few units in the last place.
fn ellipse_state(gm: f64, periapsis: f64, apoapsis: f64, t: f64, from_apoapsis: bool) -> State {
    let a = 0.5 * (periapsis + apoapsis);
    let e = (apoapsis - periapsis) / (apoapsis + periapsis);
    let n = (gm / a).sqrt() / a;
    // Whole revolutions do not matter for the state.
    let mean = {
        let m = n * t;
        m - 2.0 * PI * (m / (2.0 * PI)).round()
    };
    let sign = if from_apoapsis { 1.0 } else { -1.0 };
    let (mut low, mut high) = if mean < 0.0 { (-PI, 0.0) } else { (0.0, PI) };
    let mut x = mean / (1.0 + sign * e * 0.9);
    if !(low..=high).contains(&x) {
        x = 0.5 * (low + high);
    }
    for _ in 0..60 {
        let (sine, cosine) = x.sin_cos();
        let miss = x + sign * e * sine - mean;
        if 0.0 < miss {
            high = x;
        } else {
            low = x;
        }
        let newton = x - miss / (1.0 + sign * e * cosine);
        let next = if low <= newton && newton <= high {
            newton
        } else {
            0.5 * (low + high)
        };
        let moved = (next - x).abs();
        x = next;
        if moved <= 1e-15 * x.abs().max(1e-3) {
            break;
        }
    }
    let (sine, cosine) = x.sin_cos();
    // cos E, sin E, and dE/dt, by x.
    let (sine_e, cosine_e) = (-sign * sine, -sign * cosine);
    let rate = n / (1.0 + sign * e * cosine);
    let minor = (periapsis * apoapsis).sqrt();
    [
        a * (cosine_e - e),
        minor * sine_e,
        -a * sine_e * rate,
        minor * cosine_e * rate,
    ]
}

fn law(task: &Task, controls: &Controls) -> Law {
    Law {
        steering: task.steering,
        sign: match task.start {
            Start::Hyperbola(_) | Start::AtPeriapsis { .. } => -1.0,
            Start::AtApoapsis { .. } => 1.0,
        },
        yaw: controls.yaw_rad,
        offset: controls.offset_rad,
        rate: controls.rate_rad_s,
        since: -controls.lead_s,
    }
}

/// Derivatives in the plane.
#[inline]
fn planar(gm: f64, push: f64, law: &Law, t: f64, y: &[f64; 4]) -> [f64; 4] {
    let r_sq = y[0] * y[0] + y[1] * y[1];
    let pull = -gm / (r_sq * r_sq.sqrt());
    let (ux, uy) = match law.steering {
        Steering::AgainstVelocity => {
            let scale = law.sign / (y[2] * y[2] + y[3] * y[3]).sqrt();
            (scale * y[2], scale * y[3])
        }
        Steering::FixedAttitude | Steering::TurningAttitude => {
            // Against the motion at periapsis and along it at apoapsis are the same direction, −y.
            let (sine, cosine) = (law.offset + law.rate * (law.since + t)).sin_cos();
            (sine, -cosine)
        }
    };
    [y[2], y[3], pull * y[0] + push * ux, pull * y[1] + push * uy]
}

/// Derivatives in space, the yaw leaning the thrust towards the normal of the plane.
#[inline]
fn spatial(gm: f64, push: f64, law: &Law, t: f64, y: &[f64; 6]) -> [f64; 6] {
    let r_sq = y[0] * y[0] + y[1] * y[1] + y[2] * y[2];
    let pull = -gm / (r_sq * r_sq.sqrt());
    let (sine_yaw, cosine_yaw) = law.yaw.sin_cos();
    let u = match law.steering {
        Steering::AgainstVelocity => {
            let h = momentum(y);
            let speed = (y[3] * y[3] + y[4] * y[4] + y[5] * y[5]).sqrt();
            let size = (h[0] * h[0] + h[1] * h[1] + h[2] * h[2]).sqrt();
            let (along, across) = (law.sign * cosine_yaw / speed, sine_yaw / size);
            [
                along * y[3] + across * h[0],
                along * y[4] + across * h[1],
                along * y[5] + across * h[2],
            ]
        }
        Steering::FixedAttitude | Steering::TurningAttitude => {
            let (sine, cosine) = (law.offset + law.rate * (law.since + t)).sin_cos();
            [cosine_yaw * sine, -cosine_yaw * cosine, sine_yaw]
        }
    };
    [
        y[3],
        y[4],
        y[5],
        pull * y[0] + push * u[0],
        pull * y[1] + push * u[1],
        pull * y[2] + push * u[2],
    ]
}

#[inline]
fn momentum(y: &[f64; 6]) -> [f64; 3] {
    [
        y[1] * y[5] - y[2] * y[4],
        y[2] * y[3] - y[0] * y[5],
        y[0] * y[4] - y[1] * y[3],
    ]
}

fn accuracy<const N: usize>(relative: f64, radius: f64, speed: f64) -> Accuracy<N> {
    Accuracy {
        relative,
        absolute: std::array::from_fn(|k| relative * if k < N / 2 { radius } else { speed }),
    }
}

/// Integrates from a state for the duration; `None` where it cannot be followed.
fn run<const N: usize>(
    task: &Task,
    controls: &Controls,
    relative: f64,
    start: [f64; N],
    derivatives: impl Fn(f64, f64, &[f64; N]) -> [f64; N],
    after_step: impl FnMut(f64, &[f64; N]),
) -> Option<[f64; N]> {
    let engine = &task.engine;
    let (flow, force) = (engine.flow_kg_s(), 1e-3 * engine.thrust_n);
    let duration = controls.duration_s;
    if !(0.0 < duration && flow * duration < 0.99 * engine.mass_kg) {
        return None;
    }
    let half = N / 2;
    let radius = start[..half].iter().map(|x| x * x).sum::<f64>().sqrt();
    let speed = start[half..].iter().map(|x| x * x).sum::<f64>().sqrt();
    let first = (0.3 * (radius.powi(3) / task.gm).sqrt()).min(0.25 * duration);
    let end = integrate(
        |t, y: &[f64; N]| derivatives(force / (engine.mass_kg - flow * t), t, y),
        |_, _| -1.0,
        after_step,
        (0.0, start),
        duration,
        first,
        &accuracy(relative, radius, speed),
    );
    (end.stop == Stop::EndOfTime).then_some(end.y)
}

/// End state of a burn in the plane.
pub(super) fn planar_end(task: &Task, controls: &Controls, relative: f64) -> Option<State> {
    let law = law(task, controls);
    let start = ignition_state(task, controls)?;
    run(
        task,
        controls,
        relative,
        start,
        |push, t, y| planar(task.gm, push, &law, t, y),
        |_, _| {},
    )
}

fn lifted(start: State) -> [f64; 6] {
    [start[0], start[1], 0.0, start[2], start[3], 0.0]
}

/// Elements at the end of a burn, and their rates by its duration.
pub(super) fn end(task: &Task, controls: &Controls, relative: f64) -> Option<(Elements, Elements)> {
    let law = law(task, controls);
    let duration = controls.duration_s;
    let push =
        1e-3 * task.engine.thrust_n / (task.engine.mass_kg - task.engine.flow_kg_s() * duration);
    let (y, rate) = if task.turn_rad == 0.0 {
        let y = planar_end(task, controls, relative)?;
        let rate = planar(task.gm, push, &law, duration, &y);
        (lifted(y), lifted(rate))
    } else {
        let y = run(
            task,
            controls,
            relative,
            lifted(ignition_state(task, controls)?),
            |push, t, y| spatial(task.gm, push, &law, t, y),
            |_, _| {},
        )?;
        (y, spatial(task.gm, push, &law, duration, &y))
    };
    let here = elements(task, &y);
    // A central difference along the motion: the elements are closed form, so this costs no flight.
    let h = 1e-4 * duration;
    let shifted = |h: f64| elements(task, &std::array::from_fn(|k| y[k] + h * rate[k]));
    let (before, after) = (shifted(-h), shifted(h));
    let slope = |a: f64, b: f64| (b - a) / (2.0 * h);
    Some((
        here,
        Elements {
            energy_ratio: slope(before.energy_ratio, after.energy_ratio),
            e: [
                slope(before.e[0], after.e[0]),
                slope(before.e[1], after.e[1]),
            ],
            tilt: slope(before.tilt, after.tilt),
        },
    ))
}

fn elements(task: &Task, y: &[f64; 6]) -> Elements {
    let gm = task.gm;
    let h = momentum(y);
    let size = (h[0] * h[0] + h[1] * h[1] + h[2] * h[2]).sqrt();
    let r = (y[0] * y[0] + y[1] * y[1] + y[2] * y[2]).sqrt();
    let speed_sq = y[3] * y[3] + y[4] * y[4] + y[5] * y[5];
    // e = v × h / μ − r̂.
    let e = [
        (y[4] * h[2] - y[5] * h[1]) / gm - y[0] / r,
        (y[5] * h[0] - y[3] * h[2]) / gm - y[1] / r,
        (y[3] * h[1] - y[4] * h[0]) / gm - y[2] / r,
    ];
    let lean = e[2] / (size + h[2]);
    Elements {
        energy_ratio: (2.0 / r - speed_sq / gm)
            * 0.5
            * (task.goal.periapsis_km + task.goal.apoapsis_km),
        e: [e[0] - lean * h[0], e[1] - lean * h[1]],
        tilt: h[0].hypot(h[1]).atan2(h[2]),
    }
}

/// State at the end of a burn, in space.
pub(super) fn end_state(task: &Task, controls: &Controls) -> Option<[f64; 6]> {
    let law = law(task, controls);
    run(
        task,
        controls,
        ARC_RELATIVE,
        lifted(ignition_state(task, controls)?),
        |push, t, y| spatial(task.gm, push, &law, t, y),
        |_, _| {},
    )
}

/// 1/r_p, 1/r_a (negative on a hyperbola) and energy of a state.
pub(super) fn apsides(gm: f64, y: &[f64; 6]) -> (f64, f64, f64) {
    let h = momentum(y);
    let p = (h[0] * h[0] + h[1] * h[1] + h[2] * h[2]) / gm;
    let energy = 0.5 * (y[3] * y[3] + y[4] * y[4] + y[5] * y[5]) - gm / radius(y);
    let e = (1.0 + 2.0 * energy * p / gm).max(0.0).sqrt();
    ((1.0 + e) / p, (1.0 - e) / p, energy)
}

/// Flies a burn until the goal's energy is reached, at most for its duration: time, state, lowest radius.
pub(super) fn until_energy(task: &Task, controls: &Controls) -> Option<(f64, [f64; 6], f64)> {
    let law = law(task, controls);
    let engine = &task.engine;
    let (flow, force) = (engine.flow_kg_s(), 1e-3 * engine.thrust_n);
    let start = lifted(ignition_state(task, controls)?);
    let goal = task.goal.energy_km2_s2(task.gm);
    let longest = controls.duration_s.min(0.99 * engine.mass_kg / flow);
    let first = (0.3 * (radius(&start).powi(3) / task.gm).sqrt()).min(0.1 * longest);
    let mut lowest = radius(&start);
    let end = integrate(
        |t, y: &[f64; 6]| spatial(task.gm, force / (engine.mass_kg - flow * t), &law, t, y),
        // Braking brings the energy down to the goal, raising up.
        |_, y| law.sign * (apsides(task.gm, y).2 - goal),
        |_, y| lowest = lowest.min(radius(y)),
        (0.0, start),
        longest,
        first,
        &accuracy(ARC_RELATIVE, radius(&start), speed(&start)),
    );
    (end.stop == Stop::Event).then_some((end.t, end.y, lowest))
}

/// Flies a burn and watches radius, angle and energy.
pub(super) fn track(task: &Task, controls: &Controls) -> Option<Track> {
    let law = law(task, controls);
    let start = lifted(ignition_state(task, controls)?);
    let energy =
        |y: &[f64; 6]| 0.5 * (y[3] * y[3] + y[4] * y[4] + y[5] * y[5]) - task.gm / radius(y);
    let outward = |y: &[f64; 6]| y[0] * y[3] + y[1] * y[4] + y[2] * y[5];
    let mut last = (0.0, start);
    let mut arc = 0.0;
    let mut lowest = radius(&start);
    let (mut turn, mut capture) = (None, None);
    let end = run(
        task,
        controls,
        ARC_RELATIVE,
        start,
        |push, t, y| spatial(task.gm, push, &law, t, y),
        |t, y| {
            let (before, from) = (last.0, last.1);
            if outward(&from) < 0.0 && 0.0 <= outward(y) {
                turn = Some((before, from, t));
            }
            if 0.0 < energy(&from) && energy(y) <= 0.0 {
                capture = Some((before, from, t));
            }
            let dot = from[0] * y[0] + from[1] * y[1] + from[2] * y[2];
            arc += (dot / (radius(&from) * radius(y))).clamp(-1.0, 1.0).acos();
            lowest = lowest.min(radius(y));
            last = (t, *y);
        },
    )?;
    // Inside the step where it happened, the moment itself is integrated to.
    let meet = |(from, y, until): (f64, [f64; 6], f64), event: &dyn Fn(&[f64; 6]) -> f64| {
        let engine = &task.engine;
        let (flow, force) = (engine.flow_kg_s(), 1e-3 * engine.thrust_n);
        integrate(
            |t, y: &[f64; 6]| spatial(task.gm, force / (engine.mass_kg - flow * t), &law, t, y),
            |_, y| event(y),
            |_, _| {},
            (from, y),
            until,
            until - from,
            &accuracy(ARC_RELATIVE, radius(&y), speed(&y)),
        )
    };
    if let Some(step) = turn {
        lowest = lowest.min(radius(&meet(step, &outward).y));
    }
    Some(Track {
        lowest_radius_km: lowest,
        ignition_radius_km: radius(&start),
        arc_rad: arc,
        captured_s: capture.map(|step| meet(step, &|y| -energy(y)).t),
        speed_at_ignition_km_s: speed(&start),
        speed_at_shut_off_km_s: speed(&end),
    })
}

fn radius(y: &[f64; 6]) -> f64 {
    (y[0] * y[0] + y[1] * y[1] + y[2] * y[2]).sqrt()
}

fn speed(y: &[f64; 6]) -> f64 {
    (y[3] * y[3] + y[4] * y[4] + y[5] * y[5]).sqrt()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_state_on_an_ellipse_keeps_energy_momentum_and_clock() {
        let (gm, p, a) = (4902.8, 1837.4, 60_000.0);
        for from_apoapsis in [false, true] {
            for t in [-40_000.0, -900.0, 0.0, 1e-3, 5000.0] {
                let y = ellipse_state(gm, p, a, t, from_apoapsis);
                let r = y[0].hypot(y[1]);
                let energy = 0.5 * (y[2] * y[2] + y[3] * y[3]) - gm / r;
                assert!((energy / (-gm / (p + a)) - 1.0).abs() < 1e-12, "{t}");
                let momentum = y[0] * y[3] - y[1] * y[2];
                let expected = p * conic::periapsis_speed_km_s(gm, p, a);
                assert!((momentum / expected - 1.0).abs() < 1e-13, "{t}");
                // At the apsides the radius does not tell the time.
                if t.abs() < 1.0 {
                    continue;
                }
                let clock = conic::time_to_radius_ellipse_s(gm, p, a, r).expect("on it");
                let from_periapsis = if from_apoapsis {
                    0.5 * conic::period_s(gm, p, a) - t.abs()
                } else {
                    t.abs()
                };
                assert!((clock - from_periapsis).abs() < 1e-5, "{t}: {clock}");
            }
        }
    }
}
