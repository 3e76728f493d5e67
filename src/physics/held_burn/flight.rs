//! Flying a burn of known length: the end state, its elements, and what is seen on the way.

use super::{Controls, Start, Steering, Task, Track};
use crate::numerics::integrate::Stop;
use crate::numerics::tolerance::ARC_RELATIVE;
use crate::physics::conic::{State, ellipse_state, hyperbola_state};
use crate::physics::thrust::{
    Pointing, Spatial, Thrust, Watch, energy, lifted, momentum, radius, speed,
};

/// Elements of the orbit left, regular for every eccentricity: −2E in units of the goal's, eccentricity vector turned into the plane of the
/// conic before by the shortest rotation, tilt of the plane (rad).
#[derive(Clone, Copy, Debug)]
pub(super) struct Elements {
    pub(super) energy_ratio: f64,
    pub(super) e: [f64; 2],
    pub(super) tilt: f64,
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

/// The engine of a task at work.
fn thrust(task: &Task, controls: &Controls) -> Thrust {
    let raising = matches!(task.start, Start::AtApoapsis { .. });
    Thrust {
        gm: task.gm,
        thrust_n: task.engine.thrust_n,
        flow_kg_s: task.engine.flow_kg_s(),
        mass_kg: task.engine.mass_kg,
        pointing: match task.steering {
            Steering::AgainstVelocity if raising => Pointing::AlongVelocity,
            Steering::AgainstVelocity => Pointing::AgainstVelocity,
            Steering::FixedAttitude | Steering::TurningAttitude => Pointing::Turning {
                offset: controls.offset_rad,
                rate: controls.rate_rad_s,
            },
        },
        yaw_rad: controls.yaw_rad,
        since_s: -controls.lead_s,
    }
}

/// Integrates from a state for the duration; `None` where it cannot be followed.
fn run<const N: usize>(
    task: &Task,
    controls: &Controls,
    relative: f64,
    motion: impl Fn(&Thrust, f64, &[f64; N]) -> [f64; N],
    start: [f64; N],
    after_step: impl FnMut(f64, &[f64; N]),
) -> Option<[f64; N]> {
    let (engine, duration) = (&task.engine, controls.duration_s);
    if !(0.0 < duration && engine.flow_kg_s() * duration < 0.99 * engine.mass_kg) {
        return None;
    }
    let end = thrust(task, controls).fly(motion, start, duration, relative, |_| -1.0, after_step);
    (end.stop == Stop::EndOfTime).then_some(end.y)
}

/// End state of a burn in the plane.
pub(super) fn planar_end(task: &Task, controls: &Controls, relative: f64) -> Option<State> {
    let start = ignition_state(task, controls)?;
    run(task, controls, relative, Thrust::planar, start, |_, _| {})
}

/// End state of a burn in space.
pub(super) fn spatial_end(task: &Task, controls: &Controls, relative: f64) -> Option<Spatial> {
    let start = lifted(&ignition_state(task, controls)?);
    run(task, controls, relative, Thrust::spatial, start, |_, _| {})
}

/// Elements at the end of a burn, and their rates by its duration.
pub(super) fn end(task: &Task, controls: &Controls, relative: f64) -> Option<(Elements, Elements)> {
    let (thrust, duration) = (thrust(task, controls), controls.duration_s);
    let (y, rate) = if task.turn_rad == 0.0 {
        let y = planar_end(task, controls, relative)?;
        (lifted(&y), lifted(&thrust.planar(duration, &y)))
    } else {
        let y = spatial_end(task, controls, relative)?;
        (y, thrust.spatial(duration, &y))
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

fn elements(task: &Task, y: &Spatial) -> Elements {
    let gm = task.gm;
    let h = momentum(y);
    let size = (h[0] * h[0] + h[1] * h[1] + h[2] * h[2]).sqrt();
    let (r, v) = (radius(y), speed(y));
    // e = v × h / μ − r̂.
    let e = [
        (y[4] * h[2] - y[5] * h[1]) / gm - y[0] / r,
        (y[5] * h[0] - y[3] * h[2]) / gm - y[1] / r,
        (y[3] * h[1] - y[4] * h[0]) / gm - y[2] / r,
    ];
    let lean = e[2] / (size + h[2]);
    Elements {
        energy_ratio: (2.0 / r - v * v / gm)
            * 0.5
            * (task.goal.periapsis_km + task.goal.apoapsis_km),
        e: [e[0] - lean * h[0], e[1] - lean * h[1]],
        tilt: h[0].hypot(h[1]).atan2(h[2]),
    }
}

/// Flies a burn until the goal's energy is reached, at most for its duration: time and state.
pub(super) fn until_energy(task: &Task, controls: &Controls) -> Option<(f64, Spatial)> {
    let start = lifted(&ignition_state(task, controls)?);
    let goal = task.goal.energy_km2_s2(task.gm);
    let engine = &task.engine;
    let longest = controls
        .duration_s
        .min(0.99 * engine.mass_kg / engine.flow_kg_s());
    // Braking brings the energy down to the goal, raising up.
    let sign = if matches!(task.start, Start::AtApoapsis { .. }) {
        1.0
    } else {
        -1.0
    };
    let end = thrust(task, controls).fly(
        Thrust::spatial,
        start,
        longest,
        ARC_RELATIVE,
        |y| sign * (energy(task.gm, y) - goal),
        |_, _| {},
    );
    (end.stop == Stop::Event).then_some((end.t, end.y))
}

/// Flies a burn and watches radius, angle and energy.
pub(super) fn track(task: &Task, controls: &Controls) -> Option<Track> {
    let start = lifted(&ignition_state(task, controls)?);
    let mut watch = Watch::new(&start);
    let mut capture = None;
    let end = run(
        task,
        controls,
        ARC_RELATIVE,
        Thrust::spatial,
        start,
        |t, y| {
            let (before, from) = watch.last;
            if 0.0 < energy(task.gm, &from) && energy(task.gm, y) <= 0.0 {
                capture = Some((before, from, t));
            }
            watch.see(t, y);
        },
    )?;
    let thrust = thrust(task, controls);
    // Inside the step where it happened, the moment itself is integrated to.
    let captured_s = capture.map(|step| {
        let event = |y: &Spatial| -energy(task.gm, y);
        thrust.meet(Thrust::spatial, step, ARC_RELATIVE, event).t
    });
    Some(Track {
        lowest_radius_km: watch.lowest_km(&thrust, Thrust::spatial, ARC_RELATIVE),
        ignition_radius_km: radius(&start),
        arc_rad: watch.angle,
        captured_s,
        speed_at_ignition_km_s: speed(&start),
        speed_at_shut_off_km_s: speed(&end),
    })
}
