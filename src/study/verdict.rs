//! Why the cheapest way is the cheapest: the ideal rule, what turns it, and how far each cause moves cost and crossover.
//!
//! The ideal rule (coplanar, impulsive, one v∞, no limits): the cheapest way is the one that belongs to the largest of
//! break-even radius, target apoapsis and loop apoapsis. Everything that pulls the answer away from it is a
//! [`Cause`], and its weight is found by asking again without it.

use super::answer::{Answer, ask, cheapest};
use super::landmarks::{self, Crossover};
use super::watch::{Alone, Crew, Stopped, gather};
use crate::arrival::{Choice, NotFlyable, Plan, Reason, Setting, Way};
use crate::arrival::{PlaneDemand, Policy};
use crate::numerics::root;
use crate::physics::conic;
use crate::physics::transfer::Approach;

/// The verdict at one setting, ready to be put into words.
#[derive(Clone, Debug, PartialEq)]
pub struct Verdict {
    /// The cheapest flyable way and the next.
    pub best: Option<Standing>,
    /// The next best flyable way.
    pub runner_up: Option<Standing>,
    /// The three radii that the ideal rule compares.
    pub radii: Radii,
    /// The way that the ideal rule names, of those that can be flown and with the radii as they are.
    pub ideal: Way,
    /// The crossover nearest to the target (in the logarithm of the radius).
    pub nearest: Option<Crossover>,
    /// What pulls the answer away from the ideal rule, each with its weight.
    pub shifts: Vec<Shift>,
}

/// A way and its price.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Standing {
    /// The way.
    pub way: Way,
    /// What it is ranked by, km/s.
    pub cost_km_s: f64,
    /// Δv spent, km/s.
    pub dv_km_s: f64,
    /// Number of burns.
    pub starts: usize,
    /// Time, s.
    pub duration_s: f64,
    /// Propellant, kg.
    pub propellant_kg: Option<f64>,
}

impl From<&Plan> for Standing {
    fn from(plan: &Plan) -> Self {
        Self {
            way: plan.way,
            cost_km_s: plan.cost_km_s,
            dv_km_s: plan.dv_km_s,
            starts: plan.starts(),
            duration_s: plan.duration_s,
            propellant_kg: plan.consumption.map(|used| used.propellant_kg),
        }
    }
}

/// The radii of the ideal rule, km.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Radii {
    /// 2μ/v∞² with the v∞ at the target periapsis; `None` where no hyperbola arrives there.
    pub break_even_km: Option<f64>,
    /// Apoapsis of the target.
    pub target_apoapsis_km: f64,
    /// Apoapsis of the loop, where the loop can be flown.
    pub loop_apoapsis_km: Option<f64>,
}

/// Something that pulls the answer away from the ideal rule.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Cause {
    /// The plane has to be turned.
    PlaneChange,
    /// Every start after the first costs something.
    PerStart,
    /// The floor keeps the brake up.
    Floor,
    /// The brake altitude is held above the floor.
    BrakeHeld,
    /// The cap keeps the loop short.
    Cap,
    /// The time limit keeps the loop short or out.
    TimeLimit,
    /// The limit on starts keeps a way out.
    StartLimit,
    /// v∞ depends on the periapsis.
    SpeedVaries,
    /// Burns take time, and lose by it.
    BurnsLast,
}

/// What one cause does: cost and crossover as they are against how they would be without it.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Shift {
    /// The cause.
    pub cause: Cause,
    /// Cost of the cheapest way less its cost without the cause, km/s; `None` where either does not exist.
    pub cost_km_s: Option<f64>,
    /// The nearest crossover's radius without the cause, km; `None` where there is none of that kind.
    pub crossover_without_km: Option<f64>,
    /// Cheapest way without the cause.
    pub best_without: Option<Way>,
}

/// Weighs an answer.
pub fn verdict(setting: &Setting, answer: &Answer) -> Verdict {
    // One thread that is never stopped does not stop.
    weigh(setting, answer, &Alone).unwrap_or_else(|Stopped| glance(setting, answer))
}

/// Weighs an answer without asking again what each cause moves.
pub fn glance(setting: &Setting, answer: &Answer) -> Verdict {
    weighed(setting, answer, Vec::new())
}

fn weighed(setting: &Setting, answer: &Answer, shifts: Vec<Shift>) -> Verdict {
    let mut standings: Vec<Standing> = answer
        .ways
        .iter()
        .filter_map(|(_, plan)| plan.as_ref().ok().map(Standing::from))
        .collect();
    let best = answer.best_plan().map(Standing::from);
    standings.retain(|standing| Some(standing.way) != answer.best);
    let runner_up = standings
        .into_iter()
        .min_by(|a, b| a.cost_km_s.total_cmp(&b.cost_km_s));
    let radii = radii(setting, answer);
    Verdict {
        best,
        runner_up,
        radii,
        ideal: ideal(&radii),
        nearest: nearest_crossover(setting, &answer.landmarks.crossovers),
        shifts,
    }
}

/// Weighs an answer, the work shared by a crew.
///
/// # Errors
/// [`Stopped`] where the crew was stopped.
pub fn weigh(setting: &Setting, answer: &Answer, crew: &dyn Crew) -> Result<Verdict, Stopped> {
    let nearest = nearest_crossover(setting, &answer.landmarks.crossovers);
    let causes = causes(setting, answer);
    let shifts = gather(crew, causes.len(), |k| {
        shift(setting, answer, nearest, causes[k])
    })?;
    Ok(weighed(setting, answer, shifts))
}

fn radii(setting: &Setting, answer: &Answer) -> Radii {
    let p = setting.target.periapsis_km;
    Radii {
        break_even_km: setting
            .approach
            .v_inf_sq(p)
            .ok()
            .map(|v_inf_sq| conic::break_even_radius_km(setting.gm, v_inf_sq)),
        target_apoapsis_km: setting.target.apoapsis_km,
        loop_apoapsis_km: answer
            .plan(Way::Loop)
            .and_then(|plan| plan.burns.first().map(|burn| burn.orbit_after.apoapsis_km)),
    }
}

fn ideal(radii: &Radii) -> Way {
    let break_even = radii.break_even_km.unwrap_or(0.0);
    let looped = radii.loop_apoapsis_km.unwrap_or(0.0);
    if break_even.max(radii.target_apoapsis_km) < looped {
        Way::Loop
    } else if break_even < radii.target_apoapsis_km {
        Way::Dip
    } else {
        Way::Direct
    }
}

/// The crossover nearest to the target periapsis, in the logarithm of the radius.
pub fn nearest_crossover(setting: &Setting, crossovers: &[Crossover]) -> Option<Crossover> {
    let here = setting.target.periapsis_km;
    crossovers
        .iter()
        .min_by(|a, b| {
            (a.radius_km / here)
                .ln()
                .abs()
                .total_cmp(&(b.radius_km / here).ln().abs())
        })
        .copied()
}

/// The causes at work here.
fn causes(setting: &Setting, answer: &Answer) -> Vec<Cause> {
    let mut causes = Vec::new();
    let broken = |test: fn(&Reason) -> bool| {
        answer.ways.iter().any(
            |(_, plan)| matches!(plan, Err(NotFlyable { reasons }) if reasons.iter().any(test)),
        )
    };
    if setting.plane != PlaneDemand::Free {
        causes.push(Cause::PlaneChange);
    }
    if 0.0 < setting.policy.per_start_km_s {
        causes.push(Cause::PerStart);
    }
    let floor = setting.limits.floor_radius_km;
    let at_floor = |plan: &Plan| plan.starts() != 1 && plan.brake_radius_km <= floor * (1.0 + 1e-9);
    match setting.brake {
        Choice::Best
            if setting.body_radius_km < floor
                && answer
                    .ways
                    .iter()
                    .any(|(_, plan)| plan.as_ref().is_ok_and(at_floor)) =>
        {
            causes.push(Cause::Floor);
        }
        Choice::Radius(brake) if floor < brake && brake <= setting.target.periapsis_km => {
            causes.push(Cause::BrakeHeld)
        }
        _ => {}
    }
    let looped = answer.plan(Way::Loop);
    if setting.loop_apoapsis == Choice::Best
        && let Some(plan) = looped
    {
        let apoapsis = plan
            .burns
            .first()
            .map_or(0.0, |burn| burn.orbit_after.apoapsis_km);
        if setting.limits.cap_radius_km * (1.0 - 1e-9) <= apoapsis {
            causes.push(Cause::Cap);
        } else if setting.limits.longest_s * (1.0 - 1e-6) <= plan.duration_s {
            causes.push(Cause::TimeLimit);
        }
    }
    if broken(|reason| matches!(reason, Reason::TooLong { .. }))
        && !causes.contains(&Cause::TimeLimit)
    {
        causes.push(Cause::TimeLimit);
    }
    if broken(|reason| matches!(reason, Reason::TooManyStarts { .. })) {
        causes.push(Cause::StartLimit);
    }
    if matches!(setting.approach, Approach::FromParent(_)) {
        causes.push(Cause::SpeedVaries);
    }
    if setting.lasting().is_some() {
        causes.push(Cause::BurnsLast);
    }
    causes
}

/// The setting without a cause.
fn without(setting: &Setting, cause: Cause) -> Option<Setting> {
    let mut other = *setting;
    match cause {
        Cause::PlaneChange => other.plane = PlaneDemand::Free,
        Cause::PerStart => {
            other.policy = Policy {
                per_start_km_s: 0.0,
                ..other.policy
            }
        }
        Cause::Floor => other.limits.floor_radius_km = setting.body_radius_km,
        Cause::BrakeHeld => other.brake = Choice::Radius(setting.limits.floor_radius_km),
        Cause::Cap => other.limits.cap_radius_km = 2.0 * setting.limits.cap_radius_km,
        Cause::TimeLimit => other.limits.longest_s = f64::INFINITY,
        Cause::StartLimit => other.limits.most_starts = crate::arrival::way::MOST_BURNS,
        Cause::BurnsLast => other = other.impulsive(),
        Cause::SpeedVaries => {
            other.remembered = None;
            other.approach = Approach::Given(
                setting
                    .approach
                    .v_inf_sq(setting.target.periapsis_km)
                    .ok()?,
            );
        }
    }
    Some(other)
}

fn shift(setting: &Setting, answer: &Answer, nearest: Option<Crossover>, cause: Cause) -> Shift {
    let Some(other) = without(setting, cause) else {
        return Shift {
            cause,
            cost_km_s: None,
            crossover_without_km: None,
            best_without: None,
        };
    };
    let ways = ask(&other);
    let flyable = || {
        ways.iter()
            .filter_map(|(way, plan)| plan.as_ref().ok().map(|plan| (*way, plan)))
    };
    let best_without = cheapest(flyable().map(|(way, plan)| (way, plan.cost_km_s, plan.starts())));
    let cost_without = best_without
        .and_then(|best| flyable().find(|(way, _)| *way == best))
        .map(|(_, plan)| plan.cost_km_s);
    let crossover_without_km = nearest.and_then(|nearest| moved(&other, &nearest));
    let cost_km_s = answer
        .best_plan()
        .zip(cost_without)
        .map(|(plan, without)| plan.cost_km_s - without);
    Shift {
        cause,
        cost_km_s,
        crossover_without_km,
        best_without,
    }
}

/// Where the two ways of a crossover cost the same in another setting: the place nearest to where they did, provided that no
/// third way is cheaper there.
///
/// Looks outwards from the known place in growing steps on both sides, which takes a small part of the work of all landmarks.
fn moved(setting: &Setting, crossover: &Crossover) -> Option<f64> {
    let (low, high) = landmarks::sensible_range(setting)?;
    let floor = match setting.brake {
        Choice::Radius(brake) => low.max(brake * (1.0 + 1e-3)),
        Choice::Best => low * (1.0 + 1e-3),
    };
    if high <= floor {
        return None;
    }
    let gap = |radius: f64| {
        let here = landmarks::at_radius(setting, radius);
        let cost = |way: Way| way.figures(&here).ok().map(|figures| figures.cost_km_s);
        Some(cost(crossover.below)? - cost(crossover.above)?)
    };
    let start = crossover.radius_km.clamp(floor, high);
    let at_start = gap(start)?;
    // Each side goes on until it meets its end or a gap in a curve.
    let (mut left, mut right) = (Some((start, at_start)), Some((start, at_start)));
    let mut factor = 1.01_f64;
    let found = loop {
        let step = |side: Option<(f64, f64)>, next: f64| -> Result<Option<(f64, f64)>, f64> {
            let Some((radius, value)) = side.filter(|(radius, _)| *radius != next) else {
                return Ok(None);
            };
            let Some(there) = gap(next) else {
                return Ok(None);
            };
            if (there < 0.0) != (value < 0.0) {
                let sharp = landmarks::sharpness(setting).0;
                return root::bracketed_to(gap, radius, next, sharp).map_or(Ok(None), Err);
            }
            Ok(Some((next, there)))
        };
        match step(
            left,
            left.map_or(floor, |(radius, _)| (radius / factor).max(floor)),
        ) {
            Ok(next) => left = next,
            Err(found) => break found,
        }
        match step(
            right,
            right.map_or(high, |(radius, _)| (radius * factor).min(high)),
        ) {
            Ok(next) => right = next,
            Err(found) => break found,
        }
        if left.is_none() && right.is_none() {
            return None;
        }
        factor = (factor * 1.05).min(1.5);
    };
    let here = landmarks::at_radius(setting, found);
    let cost = |way: Way| way.figures(&here).ok().map(|figures| figures.cost_km_s);
    let tied = cost(crossover.below)?;
    let beaten = Way::TABLE
        .iter()
        .filter_map(|entry| cost(entry.way))
        .any(|other| other < tied * (1.0 - 1e-9));
    (!beaten).then_some(found)
}
