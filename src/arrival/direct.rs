//! Direct: one burn, at the periapsis of the target orbit.
//!
//! Δv = v_h(p) − v_p(p, A), turned where the plane asks for it. No coast.

use super::reason::{NotFlyable, Objections, Reason};
use super::setting::Setting;
use super::way::{Apsis, Path, Way, brake_step};

/// The one burn.
///
/// # Errors
/// Target not allowed, or passage not reachable.
#[inline]
pub(super) fn solve(setting: &Setting) -> Result<Path<1>, NotFlyable> {
    Objections::about_target(setting).none()?;
    let p = setting.target.periapsis_km;
    let arriving = setting
        .arriving(p)
        .map_err(|no| NotFlyable::because(Reason::from_no_passage(no, p)))?;
    Ok(Path {
        way: Way::Direct,
        brake_radius_km: p,
        v_inf_sq: arriving.v_inf_sq,
        turn: arriving.turn,
        steps: [brake_step(
            setting.gm,
            arriving.v_inf_sq,
            p,
            setting.target.apoapsis_km,
        )],
        radii: [p],
        orbits: [setting.target],
        apsides: [Apsis::Peri],
        coast_s: 0.0,
    })
}
