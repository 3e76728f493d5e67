//! Steps: direct or dip with the braking divided over n periapsis passes.
//!
//! Burns 1 to n at q: from the hyperbola into (q, Q₁), then down through (q, Q₂) … to (q, A); where q is below the target periapsis one
//! more at A raises it. The impulsive sum is that of direct or dip; what shrinks is the finite-burn loss, about with the square of n.
//! Burns are divided into equal propellant (equal time at full thrust, the least loss by first order), except that the first one has to
//! bring the apoapsis under the cap, and under what the time limit leaves. Coasts: one period of each (q, Q_k), half of (q, A).

use super::guide::{Guide, Leg};
use super::reason::{NotFlyable, Objections, Reason};
use super::setting::Setting;
use super::way::{Apsis, MOST_BURNS, Way, brake_step, lower_step, raise_step};
use crate::numerics::root;
use crate::physics::conic::{self, Orbit};
use crate::physics::vehicle::Vehicle;
use arrayvec::ArrayVec;

/// Most passes that the braking is divided over.
pub(super) const MOST_PASSES: usize = MOST_BURNS - 1;

/// Most passes that the limit on starts leaves with a brake at radius q, one start being kept for the raise where there is one.
pub(super) fn most_passes(setting: &Setting, q: f64) -> usize {
    let raise = usize::from(q < setting.target.periapsis_km);
    setting
        .limits
        .most_starts
        .saturating_sub(raise)
        .min(MOST_PASSES)
}

/// The course with n passes at q; `spare_s` is time to be kept free of coasts.
///
/// # Errors
/// Target not allowed, passage not reachable, too many starts.
pub(super) fn guide(
    setting: &Setting,
    vehicle: &Vehicle,
    q: f64,
    n: usize,
    spare_s: f64,
) -> Result<Guide, NotFlyable> {
    let mut objections = Objections::about_target(setting);
    let raises = q < setting.target.periapsis_km;
    let needs = n + usize::from(raises);
    if setting.limits.most_starts < needs {
        objections.add(Reason::TooManyStarts {
            needs,
            limit: setting.limits.most_starts,
        });
    }
    objections.none()?;
    let arriving = setting
        .arriving(q)
        .map_err(|no| NotFlyable::because(Reason::from_no_passage(no, q)))?;
    let apoapsis = setting.target.apoapsis_km;
    let course = |highest: f64| {
        let apoapses = divided(
            setting,
            vehicle,
            arriving.v_inf_sq,
            (q, apoapsis),
            n,
            highest,
        );
        legs(setting, arriving.v_inf_sq, q, &apoapses)
    };
    let time = |legs: &Guide| {
        let orbits: ArrayVec<Orbit, MOST_BURNS> = legs.legs.iter().map(|leg| leg.orbit).collect();
        legs.coast_s(setting.gm, &orbits)
    };
    let cap = setting.limits.cap_radius_km;
    let allowed = setting.limits.longest_s - spare_s;
    let mut guide = course(cap);
    if allowed < time(&guide) {
        // Shorter from the first ellipse on: time falls as the first apoapsis does.
        let excess = |highest: f64| Some(time(&course(highest)) - allowed);
        if let Ok(highest) = root::bracketed(excess, apoapsis, cap) {
            guide = course(apoapsis.max(highest * (1.0 - 1e-9)));
        }
    }
    guide.turn_by(arriving.turn);
    Ok(guide)
}

/// Apoapses after each pass, the last one A.
fn divided(
    setting: &Setting,
    vehicle: &Vehicle,
    v_inf_sq: f64,
    (q, apoapsis): (f64, f64),
    n: usize,
    highest: f64,
) -> ArrayVec<f64, MOST_BURNS> {
    let gm = setting.gm;
    let exhaust = vehicle.exhaust_speed_km_s();
    let before = conic::hyperbola_speed_km_s(gm, v_inf_sq, q);
    let after = conic::periapsis_speed_km_s(gm, q, apoapsis);
    // Share of the mass left after a pass, when each takes the same propellant of what is left to spend.
    let even = |from: f64, passes: usize| -> f64 {
        let spent = -(-(from - after) / exhaust).exp_m1() / passes as f64;
        from + exhaust * (-spent).ln_1p()
    };
    let capped = conic::periapsis_speed_km_s(gm, q, highest);
    let mut speed = even(before, n).min(capped);
    let mut out = ArrayVec::new();
    for left in (0..n).rev() {
        if left == 0 {
            out.push(apoapsis);
            break;
        }
        let s = speed * speed * q / gm;
        out.push((q * s / (2.0 - s)).clamp(apoapsis, highest.max(apoapsis)));
        speed = even(speed, left);
    }
    out
}

fn legs(setting: &Setting, v_inf_sq: f64, q: f64, apoapses: &[f64]) -> Guide {
    let gm = setting.gm;
    let mut legs = ArrayVec::new();
    let mut last = None;
    for &apoapsis in apoapses {
        legs.push(Leg {
            apsis: Apsis::Peri,
            radius_km: q,
            step: match last {
                None => brake_step(gm, v_inf_sq, q, apoapsis),
                Some(from) => lower_step(gm, q, from, apoapsis),
            },
            turn: 0.0,
            orbit: Orbit {
                periapsis_km: q,
                apoapsis_km: apoapsis,
            },
        });
        last = Some(apoapsis);
    }
    let target = setting.target;
    if q < target.periapsis_km && legs.len() < MOST_BURNS {
        legs.push(Leg {
            apsis: Apsis::Apo,
            radius_km: target.apoapsis_km,
            step: raise_step(gm, q, target.periapsis_km, target.apoapsis_km),
            turn: 0.0,
            orbit: target,
        });
    }
    Guide {
        way: Way::Steps,
        brake_radius_km: q,
        v_inf_sq,
        legs,
    }
}
