//! A burn that takes time and leaves exactly the orbit wanted.
//!
//! The impulsive plan says which conic a burn starts from and which orbit it leaves. Thrust that lasts moves both: braking against the
//! velocity lowers the periapsis meanwhile, raising at apoapsis moves the apoapsis. So one element of the conic it starts from is left
//! open (the periapsis the hyperbola is aimed at, say), and solved for together with ignition and duration, such that the orbit left has
//! the wanted periapsis **and** apoapsis, the circle included. What freedom remains (where the line of apsides ends up; the attitude and
//! its rate) is used to spend least.
//!
//! Symbols: μ GM (km³/s²), s the open element (km), λ lead (s) from ignition to the apsis the burn is centred on, τ duration (s), ω angle
//! from the line of apsides of the conic it starts from to that of the orbit left (rad), ψ yaw out of the plane (rad), e the eccentricity
//! vector. Solved: (s, λ, τ[, ψ]) from (energy, e_x, e_y[, tilt of the plane]); free: ω (not for a circle), attitude, rate.
//!
//! Valid while one body pulls and thrust and Isp are constant; attitude is perfect. A turn of the plane is flown at a constant yaw from
//! the motion and its size is held; that the node lies on the line of apsides is not (it lies within the burn's arc). Source: equations
//! of motion as in any textbook; the formulation is our own (docs/model.md), checked against the reference collection.

mod descent;
mod estimate;
mod flight;
mod off_nominal;
mod solve;

pub use estimate::first_order_loss_km_s;
pub use off_nominal::{Left, Missed};

use super::conic::{Orbit, State};
use crate::numerics::tolerance::ARC_RELATIVE;

/// How the engine is pointed during a burn.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Steering {
    /// Against the velocity when braking, along it when raising.
    AgainstVelocity,
    /// One attitude held against the stars; its angle is optimised.
    FixedAttitude,
    /// An attitude that turns at a constant rate; angle and rate are optimised.
    TurningAttitude,
}

/// The conic a burn starts from: what of it is given, what is open.
#[derive(Clone, Copy)]
pub enum Start<'a> {
    /// The arriving hyperbola; its periapsis is open. v∞² (km²/s²) by periapsis (km): `None` where no approach leads there.
    Hyperbola(&'a dyn Fn(f64) -> Option<f64>),
    /// An ellipse of known apoapsis (km), burnt at its periapsis, which is open.
    AtPeriapsis {
        /// Apoapsis radius.
        apoapsis_km: f64,
    },
    /// An ellipse of known periapsis (km), burnt at its apoapsis, which is open.
    AtApoapsis {
        /// Periapsis radius.
        periapsis_km: f64,
    },
}

/// An engine and the mass it pushes.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Engine {
    /// Thrust, N.
    pub thrust_n: f64,
    /// Isp times g₀, km/s.
    pub exhaust_km_s: f64,
    /// Mass at ignition, kg.
    pub mass_kg: f64,
}

impl Engine {
    /// Mass flow at full thrust, kg/s.
    pub fn flow_kg_s(&self) -> f64 {
        1e-3 * self.thrust_n / self.exhaust_km_s
    }

    /// Time that a Δv (km/s) takes, s.
    pub fn time_for_s(&self, dv_km_s: f64) -> f64 {
        -self.mass_kg * (-dv_km_s / self.exhaust_km_s).exp_m1() / self.flow_kg_s()
    }

    /// Δv after a time, km/s.
    pub fn dv_after_km_s(&self, seconds: f64) -> f64 {
        -self.exhaust_km_s * (-self.flow_kg_s() * seconds / self.mass_kg).ln_1p()
    }
}

/// What a burn has to do. The impulsive speeds are the first guess and the scale.
#[derive(Clone, Copy)]
pub struct Task<'a> {
    /// GM of the body, km³/s².
    pub gm: f64,
    /// The conic it starts from.
    pub start: Start<'a>,
    /// The open element if the burn took no time, km.
    pub open_km: f64,
    /// Speed before, km/s, if the burn took no time.
    pub speed_before_km_s: f64,
    /// Speed after, km/s, if the burn took no time.
    pub speed_after_km_s: f64,
    /// Turn of the plane, rad, 0 to π.
    pub turn_rad: f64,
    /// The orbit to be left.
    pub goal: Orbit,
    /// Engine and mass.
    pub engine: Engine,
    /// How it is pointed.
    pub steering: Steering,
}

/// How a burn is flown: all that has been solved for.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Controls {
    /// The open element, km.
    pub open_km: f64,
    /// Ignition before the apsis, s.
    pub lead_s: f64,
    /// Duration, s.
    pub duration_s: f64,
    /// Yaw out of the plane, rad.
    pub yaw_rad: f64,
    /// Line of apsides left, from that of the conic before, rad.
    pub apse_rad: f64,
    /// Attitude at the apsis from the direction against (braking) or along (raising) the motion there, rad; unused when the velocity is
    /// followed.
    pub offset_rad: f64,
    /// Rate of that angle, rad/s.
    pub rate_rad_s: f64,
}

/// A burn that leaves the wanted orbit.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct HeldBurn {
    /// What was solved for.
    pub controls: Controls,
    /// v∞² of the hyperbola it starts from, km²/s², where it does.
    pub v_inf_sq: Option<f64>,
    /// Δv spent, km/s.
    pub dv_km_s: f64,
    /// Mass after, kg.
    pub mass_after_kg: f64,
}

/// What a flight along a solved burn sees.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Track {
    /// Lowest radius during the burn, km.
    pub lowest_radius_km: f64,
    /// Radius at ignition, km.
    pub ignition_radius_km: f64,
    /// Angle travelled round the body, rad.
    pub arc_rad: f64,
    /// Time from ignition to capture (energy below zero), s, where the burn captures.
    pub captured_s: Option<f64>,
    /// Speed at ignition, km/s.
    pub speed_at_ignition_km_s: f64,
    /// Speed at shut-off, km/s.
    pub speed_at_shut_off_km_s: f64,
}

/// Why a burn cannot be flown.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum NoBurn {
    /// It would take nearly the whole mass as propellant.
    TooHeavy,
    /// No ignition, aim and duration leave the wanted orbit with this thrust; with `closes_at` times the thrust there still are some.
    NeverCloses {
        /// Multiple of the thrust with which the burn still leaves the wanted orbit.
        closes_at: f64,
    },
    /// The approach gives no hyperbola at the periapsis (km) it would have to be aimed at.
    NoApproach {
        /// That periapsis.
        periapsis_km: f64,
    },
}

impl Task<'_> {
    /// Solves the burn; `near` is a solution of a nearly equal task, where there is one.
    ///
    /// # Errors
    /// See [`NoBurn`].
    pub fn solve(&self, near: Option<&HeldBurn>) -> Result<HeldBurn, NoBurn> {
        solve::solve(self, near)
    }

    /// Flies a solved burn and watches it.
    pub fn track(&self, burn: &HeldBurn) -> Option<Track> {
        flight::track(self, &burn.controls)
    }

    /// The state in the plane after a part of the burn (0 to 1 of its duration), mass in kg beside it, for burns without a turn.
    pub fn state_after(&self, burn: &HeldBurn, share: f64) -> Option<(State, f64)> {
        let controls = Controls {
            duration_s: share * burn.controls.duration_s,
            yaw_rad: 0.0,
            ..burn.controls
        };
        let state = if share == 0.0 {
            flight::ignition_state(self, &controls)?
        } else {
            flight::planar_end(self, &controls, ARC_RELATIVE)?
        };
        let mass = self.engine.mass_kg - self.engine.flow_kg_s() * controls.duration_s;
        Some((state, mass))
    }
}
