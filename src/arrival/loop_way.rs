//! Loop: brake low at q into a long ellipse up to Q, raise the periapsis to p out there, come back and brake into the target.
//!
//! Burns: at q v_h(q) − v_p(q, Q); at Q v_a(p, Q) − v_a(q, Q); at p v_p(p, Q) − v_p(p, A). Coast: half of
//! (q, Q) plus half of (p, Q).

use super::reason::{NotFlyable, Objections, Reason};
use super::setting::{Choice, NoPassage, Setting};
use super::way::{
    Apsis, MOST_BRAKE_NODES, Path, Way, brake_nodes, brake_step, log_grid, lower_step, raise_step,
};
use crate::numerics::{minimum, root};
use crate::physics::conic::{self, Orbit};

/// The three burns; brake radius and loop apoapsis are searched where they are left open.
///
/// # Errors
/// As for dip, and where the loop's apoapsis is over the cap or under the target's.
pub(super) fn solve(setting: &Setting) -> Result<Path<3>, NotFlyable> {
    let mut objections = Objections::about_target(setting);
    if let Choice::Radius(q) = setting.brake {
        objections.about_brake(setting, q);
    }
    if let Choice::Radius(apoapsis) = setting.loop_apoapsis {
        let (cap, target) = (setting.limits.cap_radius_km, setting.target.apoapsis_km);
        if cap < apoapsis {
            objections.add(Reason::LoopOverCap { apoapsis, cap });
        }
        if apoapsis < target {
            objections.add(Reason::LoopUnderTarget { apoapsis, target });
        }
    }
    objections.none()?;
    let (q, apoapsis) = match (setting.brake, setting.loop_apoapsis) {
        (Choice::Radius(q), Choice::Radius(apoapsis)) => return at(setting, q, apoapsis),
        (Choice::Radius(q), Choice::Best) => (q, best_apoapsis(setting, q)),
        (Choice::Best, Choice::Radius(apoapsis)) => (best_brake(setting, apoapsis), apoapsis),
        (Choice::Best, Choice::Best) => best_pair(setting),
    };
    let free = at(setting, q, apoapsis)?;
    let another_may_fit = free.figures(setting).is_err_and(|not| {
        not.reasons
            .iter()
            .all(|reason| matches!(reason, Reason::TooLong { .. } | Reason::BurnTooLong { .. }))
    });
    match another_may_fit.then(|| within_limits(setting)).flatten() {
        Some((q, apoapsis)) => at(setting, q, apoapsis),
        None => Ok(free),
    }
}

/// The cheapest pair that keeps every limit, where the free optimum breaks the time or the burn limit: a grid over what is left open,
/// then one refinement of each, with the whole figures as walls. `None` where no node fits.
fn within_limits(setting: &Setting) -> Option<(f64, f64)> {
    const NODES: usize = 12;
    let (floor, p) = (setting.limits.floor_radius_km, setting.target.periapsis_km);
    let (a, cap) = (setting.target.apoapsis_km, setting.limits.cap_radius_km);
    let open = |choice: Choice, low: f64, high: f64| match choice {
        Choice::Radius(radius) => log_grid::<NODES>(radius, radius, NODES),
        Choice::Best => log_grid::<NODES>(low, high, NODES),
    };
    let brakes = open(setting.brake, floor, p);
    let apoapses = open(setting.loop_apoapsis, a, cap);
    let cost = |q: f64, apoapsis: f64| {
        at(setting, q, apoapsis)
            .and_then(|path| path.figures(setting))
            .ok()
            .map(|figures| figures.cost_km_s)
    };
    let along = |q: f64| minimum::scan_then_refine(|apoapsis| cost(q, apoapsis), &apoapses);
    let (q, found) = brakes
        .iter()
        .filter_map(|&q| along(q).map(|found| (q, found)))
        .min_by(|x, y| x.1.value.total_cmp(&y.1.value))?;
    let lower = minimum::scan_then_refine(|q| cost(q, found.x), &brakes)
        .filter(|lower| lower.value < found.value);
    Some((lower.map_or(q, |lower| lower.x), found.x))
}

fn at(setting: &Setting, q: f64, apoapsis: f64) -> Result<Path<3>, NotFlyable> {
    path(setting, q, apoapsis).map_err(|no| NotFlyable::because(Reason::from_no_passage(no, q)))
}

#[inline]
fn path(setting: &Setting, q: f64, apoapsis: f64) -> Result<Path<3>, NoPassage> {
    let gm = setting.gm;
    let Orbit {
        periapsis_km: p,
        apoapsis_km: a,
    } = setting.target;
    let arriving = setting.arriving(q)?;
    Ok(Path {
        way: Way::Loop,
        brake_radius_km: q,
        v_inf_sq: arriving.v_inf_sq,
        turn: arriving.turn,
        steps: [
            brake_step(gm, arriving.v_inf_sq, q, apoapsis),
            raise_step(gm, q, p, apoapsis),
            lower_step(gm, p, apoapsis, a),
        ],
        radii: [q, apoapsis, p],
        orbits: [
            Orbit {
                periapsis_km: q,
                apoapsis_km: apoapsis,
            },
            Orbit {
                periapsis_km: p,
                apoapsis_km: apoapsis,
            },
            setting.target,
        ],
        apsides: [Apsis::Peri, Apsis::Apo, Apsis::Peri],
        coast_s: coast_s(setting, q, apoapsis),
    })
}

fn coast_s(setting: &Setting, q: f64, apoapsis: f64) -> f64 {
    let p = setting.target.periapsis_km;
    0.5 * (conic::period_s(setting.gm, q, apoapsis) + conic::period_s(setting.gm, p, apoapsis))
}

/// Bare cost for searches: `None` where the passage does not exist.
#[inline]
fn bare(setting: &Setting, q: f64, apoapsis: f64) -> Option<f64> {
    path(setting, q, apoapsis).ok().map(|path| path.dv_km_s())
}

/// Nodes of the search over the loop's apoapsis. Nearly always the highest allowed is cheapest; the nodes bracket the
/// valley that a large plane change can make.
const APOAPSIS_NODES: usize = 5;

/// The highest loop apoapsis that cap and time allow with brake radius q; the target's apoapsis if none.
///
/// Time grows strictly with Q, so without a vehicle the border is one root of the coasts. With one, half of the burns' time counts
/// too; that changes so little with Q that taking it from the last border and solving again settles in a few rounds.
fn highest_apoapsis(setting: &Setting, q: f64) -> f64 {
    let (lowest, cap) = (setting.target.apoapsis_km, setting.limits.cap_radius_km);
    let border = |allowed: f64| {
        if coast_s(setting, q, cap) <= allowed {
            return cap;
        }
        if allowed <= coast_s(setting, q, lowest) {
            return lowest;
        }
        root::bracketed(|x| Some(coast_s(setting, q, x) - allowed), lowest, cap).unwrap_or(lowest)
    };
    let limit = setting.limits.longest_s;
    let Some(vehicle) = setting.vehicle.filter(|_| limit.is_finite()) else {
        return inside(border(limit), cap, lowest);
    };
    let burning = |apoapsis: f64| {
        let start = vehicle.start_mass_kg();
        bare(setting, q, apoapsis).map_or(0.0, |dv| {
            vehicle.burn_time_s(vehicle.propellant_for_kg(start, dv))
        })
    };
    let mut found = border(limit);
    for _ in 0..8 {
        let next = border(limit - 0.5 * burning(found));
        let settled = (next - found).abs() <= 1e-13 * found;
        found = next;
        if settled {
            break;
        }
    }
    inside(found, cap, lowest)
}

/// A border found by a root may lie a rounding error on the far side of the limit; this steps inside.
fn inside(found: f64, cap: f64, lowest: f64) -> f64 {
    if found == cap || found == lowest {
        found
    } else {
        found * (1.0 - 1e-12)
    }
}

fn best_apoapsis(setting: &Setting, q: f64) -> f64 {
    let lowest = setting.target.apoapsis_km;
    let highest = highest_apoapsis(setting, q);
    let grid = log_grid::<APOAPSIS_NODES>(lowest, highest, APOAPSIS_NODES);
    minimum::scan_then_refine(|apoapsis| bare(setting, q, apoapsis), &grid)
        .map_or(lowest, |found| found.x)
}

fn best_brake(setting: &Setting, apoapsis: f64) -> f64 {
    let (low, high) = (setting.limits.floor_radius_km, setting.target.periapsis_km);
    let grid = log_grid::<MOST_BRAKE_NODES>(low, high, brake_nodes(setting));
    minimum::scan_then_refine(|q| bare(setting, q, apoapsis), &grid).map_or(low, |found| found.x)
}

/// Brake radius and loop apoapsis together: one after the other until neither moves.
///
/// The time limit ties the two (a higher q leaves less room for Q), and it does so weakly; two or three rounds
/// settle. The bound on the rounds only guards against a cycle of equal costs.
fn best_pair(setting: &Setting) -> (f64, f64) {
    let mut tried = highest_apoapsis(setting, setting.limits.floor_radius_km);
    let mut q = best_brake(setting, tried);
    let mut apoapsis = best_apoapsis(setting, q);
    let mut cost = bare(setting, q, apoapsis);
    for _ in 0..4 {
        // The brake was searched for this very apoapsis: neither moves any more.
        if apoapsis == tried {
            break;
        }
        tried = apoapsis;
        let next_q = best_brake(setting, apoapsis);
        let next_apoapsis = best_apoapsis(setting, next_q);
        let next_cost = bare(setting, next_q, next_apoapsis);
        match (next_cost, cost) {
            (Some(new), Some(old)) if new < old * (1.0 - 1e-14) => {
                (q, apoapsis, cost) = (next_q, next_apoapsis, next_cost);
            }
            _ => break,
        }
    }
    (q, apoapsis)
}
