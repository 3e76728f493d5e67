//! Integrated burns flown again by another method: classical Runge-Kutta with fixed steps, in space, from ignition to shut-off.

use crate::arrival::{Before, Flown, Plan, Setting};
use crate::physics::held_burn::Steering;
use crate::physics::vehicle::STANDARD_GRAVITY_M_S2;

/// Name, route, figure of the plan, figure found here, unit, tolerance.
pub(super) type Figure = (String, &'static str, f64, f64, &'static str, f64);

/// Steps of the method; its error falls with the fourth power.
const STEPS: u32 = 20_000;

/// What may differ: the plan's flight keeps 1e-10 a step, and a long burn takes some dozens of steps.
const AGREE: f64 = 1e-8;

type Vector = [f64; 3];

/// What each integrated burn leaves and takes, found again.
pub(super) fn figures(setting: &Setting, plan: &Plan) -> Vec<Figure> {
    let mut out = Vec::new();
    let Some((vehicle, steering)) = setting.lasting() else {
        return out;
    };
    let mut mass = vehicle.start_mass_kg();
    for (k, burn) in plan.burns.iter().enumerate() {
        let Some(flown) = &burn.flown else { continue };
        const ROUTE: &str = "flown again by classical Runge-Kutta, fixed steps";
        let (r, v, left) = fly(setting, flown, steering, mass);
        let speed_sq: f64 = v.iter().map(|x| x * x).sum();
        let radius = r.iter().map(|x| x * x).sum::<f64>().sqrt();
        let h = cross(&r, &v);
        let energy = 0.5 * speed_sq - setting.gm / radius;
        let a = -0.5 * setting.gm / energy;
        let p = h.iter().map(|x| x * x).sum::<f64>() / setting.gm;
        // The apsides are a (1 - e) and a (1 + e), with e from p = a (1 - e^2); near a circle only their sum and product are sharp.
        out.push((
            format!("burn {}, semi-major axis left", k + 1),
            ROUTE,
            0.5 * (burn.orbit_after.periapsis_km + burn.orbit_after.apoapsis_km),
            a,
            "km",
            AGREE,
        ));
        out.push((
            format!("burn {}, semi-latus rectum left", k + 1),
            ROUTE,
            2.0 / (1.0 / burn.orbit_after.periapsis_km + 1.0 / burn.orbit_after.apoapsis_km),
            p,
            "km",
            AGREE,
        ));
        if burn.turn_rad != 0.0 {
            out.push((
                // A turn is held to 1e-11 rad whatever its size, so half a revolution is added to both.
                format!("burn {}, half a revolution and the turn", k + 1),
                ROUTE,
                std::f64::consts::PI + burn.turn_rad,
                std::f64::consts::PI + h[0].hypot(h[1]).atan2(h[2]),
                "rad",
                AGREE,
            ));
        }
        out.push((
            format!("burn {}, mass after", k + 1),
            "mass flow times duration",
            mass * (-burn.dv_km_s / vehicle.exhaust_speed_km_s()).exp(),
            left,
            "kg",
            1e-11,
        ));
        mass = left;
    }
    out
}

fn cross(a: &Vector, b: &Vector) -> Vector {
    [
        a[1] * b[2] - a[2] * b[1],
        a[2] * b[0] - a[0] * b[2],
        a[0] * b[1] - a[1] * b[0],
    ]
}

/// Position and velocity on the conic before a burn, found by walking its true anomaly to the ignition radius; inbound for a lead.
fn ignition(gm: f64, flown: &Flown) -> (Vector, Vector) {
    let (p, e, outward) = match flown.before {
        Before::Hyperbola {
            v_inf_sq,
            periapsis_km,
        } => {
            let e = 1.0 + periapsis_km * v_inf_sq / gm;
            (periapsis_km * (1.0 + e), e, flown.controls.lead_s < 0.0)
        }
        Before::AtPeriapsis(orbit) => {
            let e = orbit.eccentricity();
            (
                orbit.periapsis_km * (1.0 + e),
                e,
                flown.controls.lead_s < 0.0,
            )
        }
        // Before the apoapsis it still climbs.
        Before::AtApoapsis(orbit) => {
            let e = orbit.eccentricity();
            (
                orbit.periapsis_km * (1.0 + e),
                e,
                0.0 < flown.controls.lead_s,
            )
        }
    };
    let r = flown.track.ignition_radius_km;
    let cosine = ((p / r - 1.0) / e).clamp(-1.0, 1.0);
    let sine = (1.0 - cosine * cosine).max(0.0).sqrt() * if outward { 1.0 } else { -1.0 };
    let scale = (gm / p).sqrt();
    (
        [r * cosine, r * sine, 0.0],
        [-scale * sine, scale * (e + cosine), 0.0],
    )
}

fn fly(setting: &Setting, flown: &Flown, steering: Steering, mass: f64) -> (Vector, Vector, f64) {
    let gm = setting.gm;
    let vehicle = setting.vehicle;
    let (thrust, isp) = vehicle.map_or((0.0, 1.0), |vehicle| (vehicle.thrust_n, vehicle.isp_s));
    let flow = thrust / (isp * STANDARD_GRAVITY_M_S2);
    let controls = &flown.controls;
    let sign = match flown.before {
        Before::Hyperbola { .. } | Before::AtPeriapsis(_) => -1.0,
        Before::AtApoapsis(_) => 1.0,
    };
    let (sine_yaw, cosine_yaw) = controls.yaw_rad.sin_cos();
    let acceleration = |t: f64, r: &Vector, v: &Vector| -> Vector {
        let cube = r.iter().map(|x| x * x).sum::<f64>().powf(1.5);
        let push = 1e-3 * thrust / (mass - flow * t);
        let along: Vector = match steering {
            Steering::AgainstVelocity => {
                let speed = v.iter().map(|x| x * x).sum::<f64>().sqrt();
                let h = cross(r, v);
                let size = h.iter().map(|x| x * x).sum::<f64>().sqrt();
                std::array::from_fn(|k| sign * cosine_yaw * v[k] / speed + sine_yaw * h[k] / size)
            }
            Steering::FixedAttitude | Steering::TurningAttitude => {
                let angle = controls.offset_rad + controls.rate_rad_s * (t - controls.lead_s);
                [
                    cosine_yaw * angle.sin(),
                    -cosine_yaw * angle.cos(),
                    sine_yaw,
                ]
            }
        };
        std::array::from_fn(|k| -gm * r[k] / cube + push * along[k])
    };
    let (mut r, mut v) = ignition(gm, flown);
    let h = controls.duration_s / f64::from(STEPS);
    let add =
        |a: &Vector, b: &Vector, s: f64| -> Vector { std::array::from_fn(|k| a[k] + s * b[k]) };
    for step in 0..STEPS {
        let t = f64::from(step) * h;
        let (r1, v1) = (v, acceleration(t, &r, &v));
        let (ra, va) = (add(&r, &r1, 0.5 * h), add(&v, &v1, 0.5 * h));
        let (r2, v2) = (va, acceleration(t + 0.5 * h, &ra, &va));
        let (rb, vb) = (add(&r, &r2, 0.5 * h), add(&v, &v2, 0.5 * h));
        let (r3, v3) = (vb, acceleration(t + 0.5 * h, &rb, &vb));
        let (rc, vc) = (add(&r, &r3, h), add(&v, &v3, h));
        let (r4, v4) = (vc, acceleration(t + h, &rc, &vc));
        r = std::array::from_fn(|k| r[k] + h / 6.0 * (r1[k] + 2.0 * (r2[k] + r3[k]) + r4[k]));
        v = std::array::from_fn(|k| v[k] + h / 6.0 * (v1[k] + 2.0 * (v2[k] + v3[k]) + v4[k]));
    }
    (r, v, mass - flow * controls.duration_s)
}
