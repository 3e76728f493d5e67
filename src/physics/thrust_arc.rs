//! One burn to a shut-off: constant thrust and Isp, mass in the books, shut off when the wanted orbit is reached.
//!
//! Planar two-body motion round the body's centre, x towards the periapsis of the arriving hyperbola, motion counter-clockwise. Symbols: μ GM,
//! q periapsis radius of the arriving hyperbola, A wanted apoapsis radius, T thrust, ṁ = T/(Isp g₀), lead the time from ignition to the
//! hyperbola's periapsis. A burn's own Δv is Isp g₀ ln(m₀/m₁); the finite-burn loss is that less the impulsive Δv for the same result.
//!
//! The flight is that of `physics/thrust.rs`, as for the ways; here stand the questions that published burns answer (a given ignition, the cheapest one at a
//! given aim), which the ways do not ask, for [`super::held_burn`] holds the orbit left instead. The shut-off on 1/r_a = (1 − e)/p is regular
//! through e = 1.

use super::conic::{self, Orbit, State, hyperbola_state};
use super::held_burn::{Engine, Start, Steering, Task};
pub use super::thrust::Pointing;
use super::thrust::{Thrust, Watch, inverse_apsides, lifted};
use super::vehicle::Vehicle;
use crate::numerics::integrate::Stop;
use crate::numerics::minimum;
use crate::numerics::tolerance::ARC_RELATIVE;

/// What shuts the engine off.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum ShutOff {
    /// The osculating apoapsis has come down to this radius, km.
    ApoapsisDownTo(f64),
    /// The osculating periapsis has come up to this radius, km.
    PeriapsisUpTo(f64),
    /// This time has passed, s.
    After(f64),
}

/// A finished burn.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct ThrustArc {
    /// Time from ignition to shut-off, s.
    pub duration_s: f64,
    /// State at shut-off.
    pub state: State,
    /// Mass at shut-off, kg.
    pub final_mass_kg: f64,
    /// Δv spent, km/s.
    pub dv_km_s: f64,
    /// Orbit left (osculating).
    pub orbit: Orbit,
    /// Lowest radius during the burn, km.
    pub lowest_radius_km: f64,
    /// Angle travelled round the body during the burn, rad.
    pub arc_rad: f64,
}

/// Why a burn did not do what it should.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum NoArc {
    /// All propellant is gone before the shut-off.
    OutOfPropellant,
    /// The shut-off is not reached within the time allowed.
    NeverReached,
    /// The path comes too near the centre to be followed.
    Impact,
}

/// Flies a burn from a state with a full-thrust engine until it is shut off.
///
/// `mass` is the mass at ignition, kg; `since_periapsis` the time of ignition from the hyperbola's periapsis (negative before), s, used by turning
/// attitudes only; `longest` the time after which the burn counts as never reaching its shut-off.
///
/// # Errors
/// Propellant out, shut-off never reached, or a path into the centre.
pub fn fly(
    gm: f64,
    vehicle: &Vehicle,
    pointing: Pointing,
    (start, mass): (State, f64),
    since_periapsis: f64,
    shut_off: ShutOff,
    longest: f64,
) -> Result<ThrustArc, NoArc> {
    let flow = vehicle.mass_flow_kg_s();
    let usable = (mass - vehicle.dry_mass_kg).max(0.0) / flow;
    let end_of_time = match shut_off {
        ShutOff::After(seconds) => seconds.min(usable),
        _ => longest.min(usable),
    };
    if end_of_time <= 0.0 {
        return Err(NoArc::OutOfPropellant);
    }
    let thrust = Thrust {
        gm,
        thrust_n: vehicle.thrust_n,
        flow_kg_s: flow,
        mass_kg: mass,
        pointing,
        yaw_rad: 0.0,
        since_s: since_periapsis,
    };
    let apsides = |y: &State| inverse_apsides(gm, &lifted(y));
    let event = |y: &State| match shut_off {
        ShutOff::ApoapsisDownTo(radius) => apsides(y).1 * radius - 1.0,
        ShutOff::PeriapsisUpTo(radius) => 1.0 - apsides(y).0 * radius,
        ShutOff::After(_) => -1.0,
    };
    let mut watch = Watch::new(&start);
    let end = thrust.fly(
        Thrust::planar,
        start,
        end_of_time,
        ARC_RELATIVE,
        event,
        |t, y| watch.see(t, y),
    );
    match (end.stop, shut_off) {
        (Stop::Stuck, _) => return Err(NoArc::Impact),
        (Stop::EndOfTime, ShutOff::After(seconds)) if seconds <= usable => {}
        (Stop::EndOfTime, _) => {
            return Err(if usable <= longest {
                NoArc::OutOfPropellant
            } else {
                NoArc::NeverReached
            });
        }
        (Stop::Event, _) => {}
    }
    let (inverse_p, inverse_a) = apsides(&end.y);
    Ok(ThrustArc {
        duration_s: end.t,
        state: end.y,
        final_mass_kg: mass - flow * end.t,
        dv_km_s: -vehicle.exhaust_speed_km_s() * (-flow * end.t / mass).ln_1p(),
        orbit: Orbit {
            periapsis_km: 1.0 / inverse_p,
            apoapsis_km: 1.0 / inverse_a,
        },
        lowest_radius_km: watch.lowest_km(&thrust, Thrust::planar, ARC_RELATIVE),
        arc_rad: watch.angle,
    })
}

/// A capture burn: what it starts from and what it is for.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Capture {
    /// GM of the body, km³/s².
    pub gm: f64,
    /// v∞², km²/s².
    pub v_inf_sq: f64,
    /// The spacecraft; its start mass is the mass at ignition.
    pub vehicle: Vehicle,
    /// How the engine is pointed.
    pub pointing: Pointing,
    /// Apoapsis radius at which the engine is shut off, km.
    pub apoapsis_km: f64,
}

/// A capture burn with its best ignition.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct BestCapture {
    /// Periapsis radius of the arriving hyperbola, km.
    pub aimed_periapsis_km: f64,
    /// Time from ignition to the hyperbola's periapsis, s.
    pub lead_s: f64,
    /// The burn.
    pub arc: ThrustArc,
}

impl Capture {
    /// Flies the burn with a given ignition.
    ///
    /// # Errors
    /// As [`fly`].
    pub fn with_lead(&self, q: f64, lead_s: f64) -> Result<ThrustArc, NoArc> {
        let start = hyperbola_state(self.gm, self.v_inf_sq, q, -lead_s);
        // Twenty times what the burn would last without loss: beyond that it does not capture.
        let longest = 20.0 * self.impulsive_time_s(q);
        let shut_off = ShutOff::ApoapsisDownTo(self.apoapsis_km);
        fly(
            self.gm,
            &self.vehicle,
            self.pointing,
            (start, self.vehicle.start_mass_kg()),
            -lead_s,
            shut_off,
            longest,
        )
    }

    /// Burn time of the impulsive Δv, s: the scale of leads and durations.
    fn impulsive_time_s(&self, q: f64) -> f64 {
        let before = conic::hyperbola_speed_km_s(self.gm, self.v_inf_sq, q);
        let dv = before - conic::periapsis_speed_km_s(self.gm, q, self.apoapsis_km.max(q));
        self.vehicle.burn_time_s(
            self.vehicle
                .propellant_for_kg(self.vehicle.start_mass_kg(), dv.max(1e-9)),
        )
    }

    /// The ignition that spends least, for a hyperbola with periapsis q.
    ///
    /// Δv is infinite (no capture) at the ends of the range and flat at its valley: a scan brackets it, a bounded minimiser refines. Good to
    /// 1e-12 in Δv while the lead itself is only good to about 1e-6, which is what flat means.
    pub fn best_lead(&self, q: f64) -> Option<BestCapture> {
        let scale = self.impulsive_time_s(q);
        let cost = |share: f64| self.with_lead(q, share * scale).ok().map(|arc| arc.dv_km_s);
        const SHARES: [f64; 7] = [0.25, 0.4, 0.5, 0.6, 0.75, 1.0, 1.5];
        let found = minimum::scan_then_refine(cost, &SHARES)?;
        self.with_lead(q, found.x * scale)
            .ok()
            .map(|arc| BestCapture {
                aimed_periapsis_km: q,
                lead_s: found.x * scale,
                arc,
            })
    }

    /// The ignition and the aim that spend least and leave an orbit with periapsis `held` (km), the engine against the velocity.
    ///
    /// Solved by [`super::held_burn`], flown here. `None` where no burn closes, and for another pointing: a fixed or turning attitude is
    /// optimised there and not given.
    pub fn held(&self, held: f64) -> Option<BestCapture> {
        if self.pointing != Pointing::AgainstVelocity {
            return None;
        }
        let approach = |_: f64| Some(self.v_inf_sq);
        let burn = Task {
            gm: self.gm,
            start: Start::Hyperbola(&approach),
            open_km: held,
            speed_before_km_s: conic::hyperbola_speed_km_s(self.gm, self.v_inf_sq, held),
            speed_after_km_s: conic::periapsis_speed_km_s(self.gm, held, self.apoapsis_km),
            turn_rad: 0.0,
            goal: Orbit {
                periapsis_km: held,
                apoapsis_km: self.apoapsis_km,
            },
            engine: Engine {
                thrust_n: self.vehicle.thrust_n,
                exhaust_km_s: self.vehicle.exhaust_speed_km_s(),
                mass_kg: self.vehicle.start_mass_kg(),
            },
            steering: Steering::AgainstVelocity,
        }
        .solve(None)
        .ok()?;
        let (aim, lead_s) = (burn.controls.open_km, burn.controls.lead_s);
        let start = hyperbola_state(self.gm, self.v_inf_sq, aim, -lead_s);
        let arc = fly(
            self.gm,
            &self.vehicle,
            self.pointing,
            (start, self.vehicle.start_mass_kg()),
            -lead_s,
            ShutOff::After(burn.controls.duration_s),
            f64::INFINITY,
        )
        .ok()?;
        Some(BestCapture {
            aimed_periapsis_km: aim,
            lead_s,
            arc,
        })
    }
}
