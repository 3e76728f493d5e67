//! Dip: brake at a low periapsis q into an ellipse that reaches the target apoapsis A, raise the periapsis to p there.
//!
//! Burns: at q v_h(q) − v_p(q, A); at A v_a(p, A) − v_a(q, A). Coast: half the period of (q, A).

use super::reason::{NotFlyable, Objections, Reason};
use super::setting::{Choice, NoPassage, Setting};
use super::way::{
    Apsis, MOST_BRAKE_NODES, Path, Way, brake_nodes, brake_step, log_grid, raise_step,
};
use crate::numerics::minimum;
use crate::physics::conic::{self, Orbit};

/// The two burns; the brake radius is searched between floor and target where it is left open.
///
/// # Errors
/// Target or brake not allowed, or passage not reachable. Where the brake is left open and no radius is flyable,
/// the reasons are those of the lowest one.
#[inline]
pub(super) fn solve(setting: &Setting) -> Result<Path<2>, NotFlyable> {
    let mut objections = Objections::about_target(setting);
    match setting.brake {
        Choice::Radius(q) => {
            objections.about_brake(setting, q);
            objections.none()?;
            at(setting, q)
        }
        Choice::Best => {
            objections.none()?;
            best(setting)
        }
    }
}

#[inline]
fn at(setting: &Setting, q: f64) -> Result<Path<2>, NotFlyable> {
    path(setting, q).map_err(|no| NotFlyable::because(Reason::from_no_passage(no, q)))
}

#[inline]
fn path(setting: &Setting, q: f64) -> Result<Path<2>, NoPassage> {
    let gm = setting.gm;
    let Orbit {
        periapsis_km: p,
        apoapsis_km: a,
    } = setting.target;
    let arriving = setting.arriving(q)?;
    Ok(Path {
        way: Way::Dip,
        brake_radius_km: q,
        v_inf_sq: arriving.v_inf_sq,
        turn: arriving.turn,
        steps: [
            brake_step(gm, arriving.v_inf_sq, q, a),
            raise_step(gm, q, p, a),
        ],
        radii: [q, a],
        orbits: [
            Orbit {
                periapsis_km: q,
                apoapsis_km: a,
            },
            setting.target,
        ],
        apsides: [Apsis::Peri, Apsis::Apo],
        coast_s: 0.5 * conic::period_s(gm, q, a),
    })
}

fn best(setting: &Setting) -> Result<Path<2>, NotFlyable> {
    let (low, high) = (setting.limits.floor_radius_km, setting.target.periapsis_km);
    let grid = log_grid::<MOST_BRAKE_NODES>(low, high, brake_nodes(setting));
    // Limits that depend on the radius (time, propellant) count as walls, so the whole figures are asked for only where
    // the bare cost has been found; an optimum that breaks a limit falls back to the search within them.
    let bare =
        minimum::scan_then_refine(|q| path(setting, q).ok().map(|path| path.dv_km_s()), &grid);
    let Some(bare) = bare else {
        return at(setting, low);
    };
    let free = at(setting, bare.x)?;
    if free.figures(setting).is_ok() {
        return Ok(free);
    }
    let within = |q: f64| {
        at(setting, q)
            .and_then(|path| path.figures(setting))
            .ok()
            .map(|figures| figures.cost_km_s)
    };
    match minimum::scan_then_refine(within, &grid) {
        Some(held) => at(setting, held.x),
        None => Ok(free),
    }
}
