//! A solved burn that does not go as planned: the engine stops early, starts late, or is weak.

use super::{Controls, Engine, HeldBurn, Task, flight};
use crate::numerics::tolerance::ARC_RELATIVE;
use crate::physics::conic::{self, Orbit};
use crate::physics::thrust::{energy, inverse_apsides};

/// What is left when the engine stops after a part of the burn.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Left {
    /// Captured into this orbit.
    Orbit(Orbit),
    /// Still on a hyperbola with this v∞, km/s, and this periapsis radius, km: the spacecraft flies past.
    Flyby {
        /// v∞ left, km/s.
        v_inf_km_s: f64,
        /// Periapsis radius, km.
        periapsis_km: f64,
    },
}

/// A burn flown with the energy it was meant to reach, but otherwise off plan, and what putting it right costs.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Missed {
    /// Δv of the burn itself, less the planned one, km/s.
    pub extra_dv_km_s: f64,
    /// Duration less the planned one, s.
    pub extra_s: f64,
    /// Orbit left.
    pub orbit: Orbit,
    /// Δv of two impulsive burns at the apsides that then restore the planned orbit, km/s. A tilt of the plane is not counted.
    pub repair_dv_km_s: f64,
}

impl Missed {
    /// All that it costs, km/s.
    pub fn cost_km_s(&self) -> f64 {
        self.extra_dv_km_s + self.repair_dv_km_s
    }
}

impl Task<'_> {
    /// What is left when the engine stops after a share (0 to 1) of the burn. `None` where the path cannot be followed.
    pub fn stopped_after(&self, burn: &HeldBurn, share: f64) -> Option<Left> {
        let controls = Controls {
            duration_s: share * burn.controls.duration_s,
            ..burn.controls
        };
        let y = flight::spatial_end(self, &controls, ARC_RELATIVE)?;
        let (inverse_p, inverse_a) = inverse_apsides(self.gm, &y);
        let energy = energy(self.gm, &y);
        Some(if energy < 0.0 {
            Left::Orbit(Orbit {
                periapsis_km: 1.0 / inverse_p,
                apoapsis_km: 1.0 / inverse_a,
            })
        } else {
            Left::Flyby {
                v_inf_km_s: (2.0 * energy).sqrt(),
                periapsis_km: 1.0 / inverse_p,
            }
        })
    }

    /// The burn ignited `late` seconds late with a thrust of `strength` times the planned one, shut off at the planned energy.
    ///
    /// `None` where that energy is not reached: after three times the planned duration, or with the propellant of 99 % of the mass.
    pub fn flown_off_plan(&self, burn: &HeldBurn, late: f64, strength: f64) -> Option<Missed> {
        let engine = Engine {
            thrust_n: self.engine.thrust_n * strength,
            ..self.engine
        };
        let task = Task { engine, ..*self };
        let controls = Controls {
            lead_s: burn.controls.lead_s - late,
            duration_s: 3.0 * burn.controls.duration_s,
            ..burn.controls
        };
        let (duration_s, y) = flight::until_energy(&task, &controls)?;
        let (inverse_p, inverse_a) = inverse_apsides(self.gm, &y);
        let orbit = Orbit {
            periapsis_km: 1.0 / inverse_p,
            apoapsis_km: 1.0 / inverse_a,
        };
        let goal = self.goal;
        // At the apoapsis left the periapsis is put right, at that periapsis the apoapsis.
        let at_apoapsis = conic::apoapsis_speed_km_s(self.gm, goal.periapsis_km, orbit.apoapsis_km)
            - conic::apoapsis_speed_km_s(self.gm, orbit.periapsis_km, orbit.apoapsis_km);
        let at_periapsis =
            conic::periapsis_speed_km_s(self.gm, goal.periapsis_km, goal.apoapsis_km)
                - conic::periapsis_speed_km_s(self.gm, goal.periapsis_km, orbit.apoapsis_km);
        Some(Missed {
            extra_dv_km_s: engine.dv_after_km_s(duration_s) - burn.dv_km_s,
            extra_s: duration_s - burn.controls.duration_s,
            orbit,
            repair_dv_km_s: at_apoapsis.abs() + at_periapsis.abs(),
        })
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::physics::held_burn::{Start, Steering};

    /// Moon, v∞ 0.85 km/s, 22 N: the reference case of 2-physics.
    fn with_task(check: impl Fn(&Task, &HeldBurn)) {
        let (gm, v_inf_sq, q, apoapsis) = (4902.8, 0.85_f64.powi(2), 1837.4, 10_000.0);
        let approach = |_: f64| Some(v_inf_sq);
        let task = Task {
            gm,
            start: Start::Hyperbola(&approach),
            open_km: q,
            speed_before_km_s: conic::hyperbola_speed_km_s(gm, v_inf_sq, q),
            speed_after_km_s: conic::periapsis_speed_km_s(gm, q, apoapsis),
            turn_rad: 0.0,
            goal: Orbit {
                periapsis_km: q,
                apoapsis_km: apoapsis,
            },
            engine: Engine {
                thrust_n: 22.0,
                exhaust_km_s: 220.0 * 9.806_65e-3,
                mass_kg: 150.0,
            },
            steering: Steering::AgainstVelocity,
        };
        let burn = task.solve(None).expect("closes");
        check(&task, &burn);
    }

    #[test]
    fn stopping_at_capture_leaves_a_parabola_and_at_the_end_the_goal() {
        with_task(|task, burn| {
            let track = task.track(burn).expect("flies");
            let share = track.captured_s.expect("captures") / burn.controls.duration_s;
            match task.stopped_after(burn, share * (1.0 - 1e-6)) {
                Some(Left::Flyby { v_inf_km_s, .. }) => assert!(v_inf_km_s < 2e-3),
                other => panic!("{other:?}"),
            }
            match task.stopped_after(burn, share * (1.0 + 1e-6)) {
                Some(Left::Orbit(orbit)) => assert!(1e6 < orbit.apoapsis_km),
                other => panic!("{other:?}"),
            }
            match task.stopped_after(burn, 1.0) {
                Some(Left::Orbit(orbit)) => {
                    assert!((orbit.apoapsis_km / task.goal.apoapsis_km - 1.0).abs() < 1e-9);
                    assert!((orbit.periapsis_km / task.goal.periapsis_km - 1.0).abs() < 1e-9);
                }
                other => panic!("{other:?}"),
            }
            // Before anything is burnt it is the hyperbola it came on.
            match task.stopped_after(burn, 1e-9) {
                Some(Left::Flyby {
                    v_inf_km_s,
                    periapsis_km,
                }) => {
                    assert!((v_inf_km_s / 0.85 - 1.0).abs() < 1e-7);
                    assert!((periapsis_km / burn.controls.open_km - 1.0).abs() < 1e-7);
                }
                other => panic!("{other:?}"),
            }
        });
    }

    #[test]
    fn on_plan_nothing_is_missed_and_off_plan_everything_costs() {
        with_task(|task, burn| {
            let none = task.flown_off_plan(burn, 0.0, 1.0).expect("flies");
            assert!(none.extra_dv_km_s.abs() < 1e-10 && none.extra_s.abs() < 1e-6);
            assert!(none.repair_dv_km_s < 1e-8, "{none:?}");
            for late in [-60.0, -10.0, 10.0, 60.0] {
                let missed = task.flown_off_plan(burn, late, 1.0).expect("flies");
                assert!(0.0 < missed.cost_km_s(), "{late} {missed:?}");
            }
            // Two percent less thrust takes about two percent longer.
            let weak = task.flown_off_plan(burn, 0.0, 0.98).expect("flies");
            assert!((weak.extra_s / burn.controls.duration_s - 0.02).abs() < 0.01);
            assert!(0.0 < weak.cost_km_s());
        });
    }
}
