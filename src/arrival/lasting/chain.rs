//! The burns of one course, estimated or integrated.

use super::super::guide::{Guide, Leg};
use super::super::plan::{Before, Flown};
use super::super::reason::{NotFlyable, Reason};
use super::super::setting::Setting;
use super::super::way::{Apsis, MOST_BURNS};
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
    let mut chain = Chain::new(setting, vehicle, steering, guide, &approach);
    let mut burns: ArrayVec<Option<HeldBurn>, MOST_BURNS> =
        guide.legs.iter().map(|_| None).collect();
    for _ in 0..10 {
        for k in (0..guide.legs.len()).rev() {
            let Some(task) = chain.task(k) else { continue };
            let burn = task
                .solve(burns[k].as_ref())
                .map_err(|no| NotFlyable::because(reason(no, k, vehicle)))?;
            chain.start_from(k, burn.controls.open_km);
            burns[k] = Some(burn);
        }
        if chain.weigh(&burns) <= 1e-11 {
            break;
        }
    }
    burns
        .iter()
        .enumerate()
        .map(|(k, burn)| chain.part(k, burn.as_ref()))
        .collect()
}

/// The burns of a course while they are being solved: what each starts from and leaves, with which mass.
struct Chain<'a> {
    setting: &'a Setting,
    vehicle: &'a Vehicle,
    steering: Steering,
    guide: &'a Guide,
    approach: &'a dyn Fn(f64) -> Option<f64>,
    /// Orbit after each burn, km.
    orbits: ArrayVec<Orbit, MOST_BURNS>,
    /// Mass at each ignition, kg.
    masses: ArrayVec<f64, MOST_BURNS>,
}

impl<'a> Chain<'a> {
    /// The impulsive orbits, and masses by estimate.
    fn new(
        setting: &'a Setting,
        vehicle: &'a Vehicle,
        steering: Steering,
        guide: &'a Guide,
        approach: &'a dyn Fn(f64) -> Option<f64>,
    ) -> Self {
        let mut mass = vehicle.start_mass_kg();
        let masses = estimated(setting, vehicle, steering, guide)
            .iter()
            .map(|part| {
                let at_ignition = mass;
                mass -= part.propellant_kg;
                at_ignition
            })
            .collect();
        Self {
            setting,
            vehicle,
            steering,
            guide,
            approach,
            orbits: guide.legs.iter().map(|leg| leg.orbit).collect(),
            masses,
        }
    }

    /// The orbit before a burn and the one the impulsive course has there; `None` for the first burn.
    fn before(&self, k: usize) -> Option<(Orbit, Orbit)> {
        let last = k.checked_sub(1)?;
        Some((self.orbits[last], self.guide.legs[last].orbit))
    }

    /// The task of one burn; `None` where there is nothing to do.
    fn task(&self, k: usize) -> Option<Task<'a>> {
        let leg: &Leg = &self.guide.legs[k];
        if leg.dv_km_s() < NOTHING_KM_S {
            return None;
        }
        let (start, open_km) = match (self.before(k), leg.apsis) {
            (None, _) => (Start::Hyperbola(self.approach), self.guide.brake_radius_km),
            (Some((before, impulsive)), Apsis::Peri) => (
                Start::AtPeriapsis {
                    apoapsis_km: before.apoapsis_km,
                },
                impulsive.periapsis_km,
            ),
            (Some((before, impulsive)), Apsis::Apo) => (
                Start::AtApoapsis {
                    periapsis_km: before.periapsis_km,
                },
                impulsive.apoapsis_km,
            ),
        };
        Some(Task {
            gm: self.setting.gm,
            start,
            open_km,
            speed_before_km_s: leg.step.before,
            speed_after_km_s: leg.step.after,
            turn_rad: leg.turn,
            goal: self.orbits[k],
            engine: Engine {
                thrust_n: self.vehicle.thrust_n,
                exhaust_km_s: self.vehicle.exhaust_speed_km_s(),
                mass_kg: self.masses[k],
            },
            steering: self.steering,
        })
    }

    /// The burn before has to leave what this one starts from.
    fn start_from(&mut self, k: usize, open_km: f64) {
        let Some(last) = k.checked_sub(1) else { return };
        match self.guide.legs[k].apsis {
            Apsis::Peri => self.orbits[last].periapsis_km = open_km,
            Apsis::Apo => self.orbits[last].apoapsis_km = open_km,
        }
    }

    /// Masses by the burns as they are; returns by how much one moved at most, as a fraction.
    fn weigh(&mut self, burns: &[Option<HeldBurn>]) -> f64 {
        let mut moved = 0.0_f64;
        let mut mass = self.vehicle.start_mass_kg();
        for (known, burn) in self.masses.iter_mut().zip(burns) {
            moved = moved.max((*known / mass - 1.0).abs());
            *known = mass;
            if let Some(burn) = burn {
                mass *= (-burn.dv_km_s / self.vehicle.exhaust_speed_km_s()).exp();
            }
        }
        moved
    }

    fn part(&self, k: usize, burn: Option<&HeldBurn>) -> Result<Part, NotFlyable> {
        let (orbit, mass_at_ignition_kg) = (self.orbits[k], self.masses[k]);
        let (Some(task), Some(burn)) = (self.task(k), burn) else {
            return Ok(Part {
                dv_km_s: 0.0,
                propellant_kg: 0.0,
                duration_s: 0.0,
                orbit,
                flown: None,
            });
        };
        let track = task.track(burn).ok_or_else(|| {
            let never = NoBurn::NeverCloses {
                closes_at: f64::INFINITY,
            };
            NotFlyable::because(reason(never, k, self.vehicle))
        })?;
        let before = match (self.before(k), self.guide.legs[k].apsis) {
            (None, _) => Before::Hyperbola {
                v_inf_sq: burn.v_inf_sq.unwrap_or(self.guide.v_inf_sq),
                periapsis_km: burn.controls.open_km,
            },
            (Some((before, _)), Apsis::Peri) => Before::AtPeriapsis(before),
            (Some((before, _)), Apsis::Apo) => Before::AtApoapsis(before),
        };
        Ok(Part {
            dv_km_s: burn.dv_km_s,
            propellant_kg: self
                .vehicle
                .propellant_for_kg(mass_at_ignition_kg, burn.dv_km_s),
            duration_s: burn.controls.duration_s,
            orbit,
            flown: Some(Flown {
                controls: burn.controls,
                track,
                mass_at_ignition_kg,
                before,
            }),
        })
    }
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
