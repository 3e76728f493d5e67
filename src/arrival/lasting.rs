//! Ways whose burns take time: the impulsive course of a way, its burns estimated or integrated one by one, its open choices searched again.
//!
//! Burns hang together both ways: the orbit a burn has to leave is the one the next burn has to start from (its open element), and the
//! mass of a burn is what the ones before have left. Orbits are therefore solved from the last burn to the first, masses from the first
//! to the last, until neither moves; the second round already changes little, for an intermediate orbit depends on the mass only through
//! the loss.

mod chain;

use super::guide::Guide;
use super::plan::{Burn, Figures, Plan, consume};
use super::reason::{NotFlyable, Objections, Reason};
use super::setting::{Burns, Choice, Passes, Setting};
use super::way::{MOST_BURNS, Way, log_grid};
use super::{dip, direct, loop_way, steps};
use crate::numerics::minimum;
use crate::numerics::tolerance::FLAT_RELATIVE;
use crate::physics::conic;
use crate::physics::held_burn::Steering;
use crate::physics::vehicle::Vehicle;
use arrayvec::ArrayVec;
use chain::Part;

type Engine = (Vehicle, Steering);

/// What a way costs where burns take time.
pub(super) fn figures(way: Way, setting: &Setting, engine: Engine) -> Result<Figures, NotFlyable> {
    let course = chosen(way, setting, engine)?;
    course.figures.hold_to_limits(setting)?;
    Ok(course.figures)
}

/// The plan of a way where burns take time.
pub(super) fn plan(way: Way, setting: &Setting, engine: Engine) -> Result<Plan, NotFlyable> {
    let course = chosen(way, setting, engine)?;
    course.figures.hold_to_limits(setting)?;
    Ok(course.plan(setting))
}

/// A course with its burns, not yet held against the limits.
struct Course {
    guide: Guide,
    parts: ArrayVec<Part, MOST_BURNS>,
    figures: Figures,
}

fn chosen(way: Way, setting: &Setting, engine: Engine) -> Result<Course, NotFlyable> {
    match way {
        Way::Direct => course(
            setting,
            engine,
            direct::solve(&setting.impulsive())?.guide(),
        ),
        Way::Dip | Way::Loop => over_brake(setting, |q| at_brake(way, setting, engine, q)),
        Way::Steps => stepped(setting, engine),
    }
}

/// Dip or loop with a brake radius; the loop's apoapsis is chosen by its impulsive cost, which the losses hardly touch, inside a time
/// limit that they do.
fn at_brake(way: Way, setting: &Setting, engine: Engine, q: f64) -> Result<Course, NotFlyable> {
    let mut bare = setting.impulsive();
    bare.brake = Choice::Radius(q);
    if way == Way::Dip {
        return course(setting, engine, dip::solve(&bare)?.guide());
    }
    let mut found = course(setting, engine, loop_way::solve(&bare)?.guide())?;
    for _ in 0..4 {
        let excess = found.figures.duration_s - setting.limits.longest_s;
        if setting.loop_apoapsis != Choice::Best || excess <= 0.0 {
            break;
        }
        bare.limits.longest_s -= 1.001 * excess + 1.0;
        found = course(setting, engine, loop_way::solve(&bare)?.guide())?;
    }
    Ok(found)
}

/// Steps: braking at the brake radius or at the target, with as many passes as are cheapest.
fn stepped(setting: &Setting, engine: Engine) -> Result<Course, NotFlyable> {
    Objections::about_target(setting).none()?;
    let target = setting.target.periapsis_km;
    match setting.brake {
        Choice::Radius(q) if setting.limits.floor_radius_km <= q && q < target => {
            let low = over_passes(setting, engine, q);
            let high = over_passes(setting, engine, target);
            let price = |found: &Result<Course, NotFlyable>| {
                found
                    .as_ref()
                    .ok()
                    .filter(|course| course.figures.hold_to_limits(setting).is_ok())
                    .map(|course| course.figures.cost_km_s)
            };
            match (price(&low), price(&high)) {
                (Some(a), Some(b)) if b < a => high,
                (None, Some(_)) => high,
                _ => low,
            }
        }
        Choice::Radius(_) => over_passes(setting, engine, target),
        Choice::Best => over_brake(setting, |q| over_passes(setting, engine, q)),
    }
}

fn with_passes(
    setting: &Setting,
    engine: Engine,
    q: f64,
    passes: usize,
) -> Result<Course, NotFlyable> {
    let guide = |spare: f64| steps::guide(setting, &engine.0, q, passes, spare);
    // Half the burns count as time too; the first guess of them is the impulsive one.
    let start = engine.0.start_mass_kg();
    let first = guide(0.0)?;
    let mut spare = 0.5
        * engine
            .0
            .burn_time_s(engine.0.propellant_for_kg(start, first.dv_km_s()));
    let mut found = course(setting, engine, guide(spare)?)?;
    for _ in 0..3 {
        let excess = found.figures.duration_s - setting.limits.longest_s;
        if excess <= 0.0 {
            break;
        }
        spare += 1.001 * excess + 1.0;
        found = course(setting, engine, guide(spare)?)?;
    }
    Ok(found)
}

/// The cheapest number of passes at a brake radius: a first guess by estimate, then neighbours while they are better.
fn over_passes(setting: &Setting, engine: Engine, q: f64) -> Result<Course, NotFlyable> {
    if let Passes::Number(passes) = setting.passes {
        return with_passes(setting, engine, q, passes);
    }
    let most = steps::most_passes(setting, q);
    if most < 2 {
        return with_passes(setting, engine, q, 2);
    }
    let price = |setting: &Setting, found: &Course| {
        found
            .figures
            .hold_to_limits(setting)
            .is_ok()
            .then_some(found.figures.cost_km_s)
    };
    let rough = setting.estimated();
    let guess = (2..=most)
        .filter_map(|n| {
            let found = with_passes(&rough, engine, q, n).ok()?;
            price(&rough, &found).map(|cost| (n, cost))
        })
        .min_by(|a, b| a.1.total_cmp(&b.1))
        .map_or(2, |(n, _)| n);
    let mut best = with_passes(setting, engine, q, guess);
    let mut cost = best.as_ref().ok().and_then(|found| price(setting, found));
    for direction in [-1_isize, 1] {
        let mut n = guess;
        while let Some(next) = n
            .checked_add_signed(direction)
            .filter(|n| (2..=most).contains(n))
        {
            let Ok(found) = with_passes(setting, engine, q, next) else {
                break;
            };
            let Some(new) = price(setting, &found) else {
                break;
            };
            if cost.is_some_and(|cost| cost <= new) {
                break;
            }
            (n, cost, best) = (next, Some(new), Ok(found));
        }
    }
    best
}

/// The course at the given brake radius, or at the cheapest one between floor and target that keeps the limits.
///
/// With losses the valley is often inside the range, and flat; the nodes bracket it.
fn over_brake(
    setting: &Setting,
    at: impl Fn(f64) -> Result<Course, NotFlyable>,
) -> Result<Course, NotFlyable> {
    let mut objections = Objections::about_target(setting);
    if let Choice::Radius(q) = setting.brake {
        objections.about_brake(setting, q);
        objections.none()?;
        return at(q);
    }
    objections.none()?;
    const NODES: usize = 7;
    let (low, high) = (setting.limits.floor_radius_km, setting.target.periapsis_km);
    let grid = log_grid::<NODES>(low, high, NODES);
    let within = |q: f64| {
        at(q)
            .ok()
            .filter(|course| course.figures.hold_to_limits(setting).is_ok())
            .map(|course| course.figures.cost_km_s)
    };
    if let Some(found) = minimum::scan_then_refine_to(within, &grid, FLAT_RELATIVE) {
        return at(found.x);
    }
    // No node keeps every limit: the reasons are those of the cheapest one.
    let free = grid
        .iter()
        .filter_map(|&q| at(q).ok().map(|course| (q, course.figures.cost_km_s)))
        .min_by(|a, b| a.1.total_cmp(&b.1));
    match free {
        Some((q, _)) => at(q),
        None => at(low),
    }
}

/// What is known before any burn is integrated: the starts, and that burns which last take no less propellant than impulsive ones.
fn out_of_the_question(
    setting: &Setting,
    vehicle: &Vehicle,
    guide: &Guide,
) -> Result<(), NotFlyable> {
    let mut objections = Objections::default();
    let (limits, policy) = (&setting.limits, &setting.policy);
    if limits.most_starts < guide.legs.len() {
        objections.add(Reason::TooManyStarts {
            needs: guide.legs.len(),
            limit: limits.most_starts,
        });
    }
    let spent = guide.dv_km_s() * (1.0 + policy.margin);
    let needs = vehicle.propellant_for_kg(vehicle.start_mass_kg(), spent) * (1.0 + policy.residual);
    if vehicle.propellant_kg < needs {
        objections.add(Reason::PropellantShortAnyway {
            needs,
            aboard: vehicle.propellant_kg,
        });
    }
    objections.none()
}

/// Puts burns into a course.
fn course(
    setting: &Setting,
    (vehicle, steering): Engine,
    guide: Guide,
) -> Result<Course, NotFlyable> {
    out_of_the_question(setting, &vehicle, &guide)?;
    let parts = match setting.burns {
        Burns::Integrated(_) => chain::integrated(setting, &vehicle, steering, &guide)?,
        _ => chain::estimated(setting, &vehicle, steering, &guide),
    };
    let orbits: ArrayVec<_, MOST_BURNS> = parts.iter().map(|part| part.orbit).collect();
    let spent: ArrayVec<f64, MOST_BURNS> = parts.iter().map(|part| part.dv_km_s).collect();
    let dv: f64 = spent.iter().sum();
    let policy = &setting.policy;
    let first = guide.legs.first().ok_or_else(|| {
        // No way is without a burn; said as a reason rather than assumed.
        NotFlyable::because(Reason::NothingToDivide)
    })?;
    let starts = guide.legs.len();
    let mut figures = Figures {
        v_inf_sq: parts
            .first()
            .and_then(Part::v_inf_sq)
            .unwrap_or(guide.v_inf_sq),
        first_step: first.step,
        first_turn: first.turn,
        dv_km_s: dv,
        impulsive_dv_km_s: guide.dv_km_s(),
        cost_km_s: dv + policy.per_start_km_s * (starts - 1) as f64,
        dv_with_margin_km_s: dv * (1.0 + policy.margin),
        duration_s: guide.coast_s(setting.gm, &orbits),
        starts,
        consumption: None,
        captured_flown: parts.first().and_then(Part::captured_share),
        lowest_flown_km: parts
            .iter()
            .filter_map(Part::lowest_km)
            .min_by(f64::total_cmp),
    };
    let (used, burning) = consume(&vehicle, &spent, &figures, policy);
    figures.consumption = Some(used);
    figures.duration_s += 0.5 * burning;
    Ok(Course {
        guide,
        parts,
        figures,
    })
}

impl Course {
    fn plan(&self, setting: &Setting) -> Plan {
        let figures = &self.figures;
        let burns = self
            .guide
            .legs
            .iter()
            .zip(&self.parts)
            .map(|(leg, part)| Burn {
                at_radius_km: leg.radius_km,
                speed_before_km_s: leg.step.before,
                speed_after_km_s: leg.step.after,
                dv_km_s: part.dv_km_s,
                impulsive_dv_km_s: leg.dv_km_s(),
                turn_rad: leg.turn,
                orbit_after: part.orbit,
                propellant_kg: Some(part.propellant_kg),
                duration_s: Some(part.duration_s),
                flown: part.flown,
            })
            .collect();
        let coast_low = self
            .parts
            .iter()
            .map(|part| part.orbit.periapsis_km)
            .fold(self.guide.brake_radius_km, f64::min);
        let aim = self
            .parts
            .first()
            .and_then(Part::aim_km)
            .unwrap_or(self.guide.brake_radius_km);
        let share = figures.captured_share();
        let captured_after_s = self.parts.first().and_then(|part| {
            part.captured_s()
                .or_else(|| share.map(|share| share * part.duration_s))
        });
        Plan {
            way: self.guide.way,
            burns,
            v_inf_km_s: figures.v_inf_sq.sqrt(),
            turn_rad: self.guide.legs.iter().map(|leg| leg.turn).sum(),
            dv_km_s: figures.dv_km_s,
            impulsive_dv_km_s: figures.impulsive_dv_km_s,
            cost_km_s: figures.cost_km_s,
            dv_with_margin_km_s: figures.dv_with_margin_km_s,
            duration_s: figures.duration_s,
            brake_radius_km: self.guide.brake_radius_km,
            lowest_radius_km: figures
                .lowest_flown_km
                .map_or(coast_low, |flown| flown.min(coast_low)),
            aiming_radius_km: conic::aiming_radius_km(setting.gm, figures.v_inf_sq, aim),
            captured_share: share,
            captured_after_s: share.and(captured_after_s),
            consumption: figures.consumption,
        }
    }
}
