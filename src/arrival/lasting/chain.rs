//! The burns of one course, estimated or integrated.

use super::super::guide::{Guide, Leg};
use super::super::setting::Setting;
use super::super::way::{Apsis, Before, Flown, MOST_BURNS, NotFlyable, Reason};
use crate::physics::conic::Orbit;
use crate::physics::held_burn::{
    Engine, HeldBurn, NoBurn, Start, Steering, Task, first_order_loss_km_s,
};
use crate::physics::vehicle::Vehicle;
use arrayvec::ArrayVec;

/// A burn changes speed by less than this (km/s) and turns nothing: there is no burn.
const NOTHING_KM_S: f64 = 1e-9;

/// One burn: what it spends, the orbit it leaves, how it is flown.
#[derive(Clone, Copy, Debug)]
pub(super) struct Part {
    pub(super) dv_km_s: f64,
    pub(super) propellant_kg: f64,
    pub(super) duration_s: f64,
    pub(super) orbit: Orbit,
    pub(super) flown: Option<Flown>,
}

impl Part {
    pub(super) fn lowest_km(&self) -> Option<f64> {
        self.flown.map(|flown| flown.track.lowest_radius_km)
    }

    pub(super) fn captured_s(&self) -> Option<f64> {
        self.flown.and_then(|flown| flown.track.captured_s)
    }

    /// Share of the burn's own Δv until capture.
    pub(super) fn captured_share(&self) -> Option<f64> {
        let flown = self.flown?;
        let seconds = flown.track.captured_s?;
        // With constant flow Δv goes with the logarithm of the mass left.
        let left = |seconds: f64| {
            let share = seconds / flown.controls.duration_s;
            (-share * self.propellant_kg / flown.mass_at_ignition_kg).ln_1p()
        };
        Some(left(seconds) / left(flown.controls.duration_s))
    }

    pub(super) fn aim_km(&self) -> Option<f64> {
        match self.flown?.before {
            Before::Hyperbola { periapsis_km, .. } => Some(periapsis_km),
            Before::AtPeriapsis(_) | Before::AtApoapsis(_) => None,
        }
    }

    pub(super) fn v_inf_sq(&self) -> Option<f64> {
        match self.flown?.before {
            Before::Hyperbola { v_inf_sq, .. } => Some(v_inf_sq),
            Before::AtPeriapsis(_) | Before::AtApoapsis(_) => None,
        }
    }
}

/// Burns with first-order losses, leaving the impulsive orbits.
pub(super) fn estimated(
    setting: &Setting,
    vehicle: &Vehicle,
    steering: Steering,
    guide: &Guide,
) -> ArrayVec<Part, MOST_BURNS> {
    let mut mass = vehicle.start_mass_kg();
    guide
        .legs
        .iter()
        .map(|leg| {
            let bare = leg.dv_km_s();
            let time = vehicle.burn_time_s(vehicle.propellant_for_kg(mass, bare));
            let loss = first_order_loss_km_s(
                setting.gm,
                leg.radius_km,
                (leg.step.before, leg.step.after),
                bare,
                time,
                steering,
            );
            let dv_km_s = bare + loss;
            let propellant_kg = vehicle.propellant_for_kg(mass, dv_km_s);
            mass -= propellant_kg;
            Part {
                dv_km_s,
                propellant_kg,
                duration_s: vehicle.burn_time_s(propellant_kg),
                orbit: leg.orbit,
                flown: None,
            }
        })
        .collect()
}

/// Burns integrated, each leaving exactly what the next one starts from, the last one the target.
///
/// # Errors
/// The first burn that cannot be flown, with its reason.
pub(super) fn integrated(
    setting: &Setting,
    vehicle: &Vehicle,
    steering: Steering,
    guide: &Guide,
) -> Result<ArrayVec<Part, MOST_BURNS>, NotFlyable> {
    let approach = |periapsis: f64| match setting.remembered {
        Some((radius, v_inf_sq)) if radius == periapsis => Some(v_inf_sq),
        _ => setting.approach.v_inf_sq(periapsis).ok(),
    };
    let legs = &guide.legs;
    let mut orbits: ArrayVec<Orbit, MOST_BURNS> = legs.iter().map(|leg| leg.orbit).collect();
    // Masses at ignition: first by estimate.
    let mut masses: ArrayVec<f64, MOST_BURNS> = ArrayVec::new();
    let mut mass = vehicle.start_mass_kg();
    for part in estimated(setting, vehicle, steering, guide) {
        masses.push(mass);
        mass -= part.propellant_kg;
    }
    let mut burns: ArrayVec<Option<HeldBurn>, MOST_BURNS> = legs.iter().map(|_| None).collect();
    for _ in 0..10 {
        for k in (0..legs.len()).rev() {
            let Some(task) = task(
                setting, vehicle, steering, guide, &orbits, k, masses[k], &approach,
            ) else {
                continue;
            };
            let burn = task
                .solve(burns[k].as_ref())
                .map_err(|no| NotFlyable::because(reason(no, k, vehicle)))?;
            if k != 0 {
                match legs[k].apsis {
                    Apsis::Peri => orbits[k - 1].periapsis_km = burn.controls.open_km,
                    Apsis::Apo => orbits[k - 1].apoapsis_km = burn.controls.open_km,
                }
            }
            burns[k] = Some(burn);
        }
        let mut moved = 0.0_f64;
        let mut mass = vehicle.start_mass_kg();
        for (k, burn) in burns.iter().enumerate() {
            moved = moved.max((masses[k] / mass - 1.0).abs());
            masses[k] = mass;
            if let Some(burn) = burn {
                mass *= (-burn.dv_km_s / vehicle.exhaust_speed_km_s()).exp();
            }
        }
        if moved <= 1e-11 {
            break;
        }
    }
    let mut parts = ArrayVec::new();
    for k in 0..legs.len() {
        parts.push(part(
            setting,
            vehicle,
            steering,
            guide,
            &orbits,
            k,
            masses[k],
            burns[k].as_ref(),
            &approach,
        )?);
    }
    Ok(parts)
}

/// The task of one burn; `None` where there is nothing to do.
#[allow(clippy::too_many_arguments)]
fn task<'a>(
    setting: &Setting,
    vehicle: &Vehicle,
    steering: Steering,
    guide: &Guide,
    orbits: &[Orbit],
    k: usize,
    mass_kg: f64,
    approach: &'a dyn Fn(f64) -> Option<f64>,
) -> Option<Task<'a>> {
    let leg: &Leg = &guide.legs[k];
    if leg.dv_km_s() < NOTHING_KM_S {
        return None;
    }
    let (start, open_km) = if k == 0 {
        (Start::Hyperbola(approach), guide.brake_radius_km)
    } else {
        let before = orbits[k - 1];
        match leg.apsis {
            Apsis::Peri => (
                Start::AtPeriapsis {
                    apoapsis_km: before.apoapsis_km,
                },
                guide.legs[k - 1].orbit.periapsis_km,
            ),
            Apsis::Apo => (
                Start::AtApoapsis {
                    periapsis_km: before.periapsis_km,
                },
                guide.legs[k - 1].orbit.apoapsis_km,
            ),
        }
    };
    Some(Task {
        gm: setting.gm,
        start,
        open_km,
        speed_before_km_s: leg.step.before,
        speed_after_km_s: leg.step.after,
        turn_rad: leg.turn,
        goal: orbits[k],
        engine: Engine {
            thrust_n: vehicle.thrust_n,
            exhaust_km_s: vehicle.exhaust_speed_km_s(),
            mass_kg,
        },
        steering,
    })
}

#[allow(clippy::too_many_arguments)]
fn part(
    setting: &Setting,
    vehicle: &Vehicle,
    steering: Steering,
    guide: &Guide,
    orbits: &[Orbit],
    k: usize,
    mass_kg: f64,
    burn: Option<&HeldBurn>,
    approach: &dyn Fn(f64) -> Option<f64>,
) -> Result<Part, NotFlyable> {
    let task = task(
        setting, vehicle, steering, guide, orbits, k, mass_kg, approach,
    );
    let (Some(task), Some(burn)) = (task, burn) else {
        return Ok(Part {
            dv_km_s: 0.0,
            propellant_kg: 0.0,
            duration_s: 0.0,
            orbit: orbits[k],
            flown: None,
        });
    };
    let never = || {
        NotFlyable::because(Reason::BurnNeverCloses {
            burn: k + 1,
            thrust: vehicle.thrust_n,
            closes_at: None,
        })
    };
    let track = task.track(burn).ok_or_else(never)?;
    let before = match (k, guide.legs[k].apsis) {
        (0, _) => Before::Hyperbola {
            v_inf_sq: burn.v_inf_sq.unwrap_or(guide.v_inf_sq),
            periapsis_km: burn.controls.open_km,
        },
        (_, Apsis::Peri) => Before::AtPeriapsis(orbits[k - 1]),
        (_, Apsis::Apo) => Before::AtApoapsis(orbits[k - 1]),
    };
    Ok(Part {
        dv_km_s: burn.dv_km_s,
        propellant_kg: vehicle.propellant_for_kg(mass_kg, burn.dv_km_s),
        duration_s: burn.controls.duration_s,
        orbit: orbits[k],
        flown: Some(Flown {
            controls: burn.controls,
            track,
            mass_at_ignition_kg: mass_kg,
            before,
        }),
    })
}

fn reason(no: NoBurn, k: usize, vehicle: &Vehicle) -> Reason {
    match no {
        NoBurn::TooHeavy => Reason::BurnTakesAll { burn: k + 1 },
        NoBurn::NeverCloses { closes_at } => Reason::BurnNeverCloses {
            burn: k + 1,
            thrust: vehicle.thrust_n,
            closes_at: closes_at
                .is_finite()
                .then_some(closes_at * vehicle.thrust_n),
        },
        NoBurn::NoApproach { periapsis_km } => Reason::AimOutOfReach {
            periapsis: periapsis_km,
        },
    }
}
