//! Burns that take time: constant thrust and Isp, mass in the books, shut off when the wanted orbit is reached.
//!
//! Planar two-body motion round the body's centre, x towards the periapsis of the arriving hyperbola, motion counter-clockwise. Symbols: μ GM,
//! q periapsis radius of the arriving hyperbola, A wanted apoapsis radius, T thrust, ṁ = T/(Isp g₀), lead the time from ignition to the
//! hyperbola's periapsis. A burn's own Δv is Isp g₀ ln(m₀/m₁); the finite-burn loss is that less the impulsive Δv for the same result.
//!
//! Valid while one body pulls and thrust and Isp are constant; attitude is perfect. Source: equations of motion as in any textbook; the shut-off
//! on 1/r_a = (1 − e)/p, which is regular through e = 1, and the held periapsis are design choices (docs/model.md).

use super::conic::{self, Orbit};
use super::held_burn::{Engine, Start, Steering, Task};
use super::vehicle::Vehicle;
use crate::numerics::integrate::{Accuracy, End, Stop, integrate};
use crate::numerics::minimum;
use crate::numerics::tolerance::ARC_RELATIVE;

/// How the engine is pointed.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Pointing {
    /// Against the velocity (braking).
    AgainstVelocity,
    /// Along the velocity (raising).
    AlongVelocity,
    /// At an angle from the direction against the motion at periapsis that turns at a constant rate; a rate of zero is an inertially
    /// fixed attitude.
    Turning {
        /// Angle at the hyperbola's periapsis, rad, counter-clockwise.
        offset: f64,
        /// Rate, rad/s.
        rate: f64,
    },
}

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

/// A state in the plane: position (km) and velocity (km/s).
pub type State = [f64; 4];

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

/// The state on a hyperbola at a time from its periapsis, s (negative: before). Takes v∞² (km²/s²).
///
/// Kepler's equation e sinh F − F = t √(μ/|a|³), by Newton from a starter that brackets its growth; error a few units in the last place, times e/(e − 1) near a
/// parabola.
pub fn hyperbola_state(gm: f64, v_inf_sq: f64, q: f64, t: f64) -> State {
    let a = gm / v_inf_sq;
    let e = conic::hyperbola_eccentricity(gm, v_inf_sq, q);
    let n = (gm / (a * a * a)).sqrt();
    let mean = n * t;
    // Bounds from above, so that Newton comes down steadily: e sinh F − F is at least (e − 1) F, e F³/6, and, for F above 1, sinh F
    // times 1 − 1/sinh 1.
    let size = mean.abs();
    let mut anomaly = (6.72 * size)
        .asinh()
        .max(1.0)
        .min((6.0 * size / e).cbrt())
        .min(size / (e - 1.0))
        .copysign(mean);
    for _ in 0..60 {
        let step = (e * anomaly.sinh() - anomaly - mean) / (e * anomaly.cosh() - 1.0);
        anomaly -= step;
        if step.abs() <= 1e-15 * anomaly.abs().max(1e-3) {
            break;
        }
    }
    let (sinh, cosh) = (anomaly.sinh(), anomaly.cosh());
    let rate = n / (e * cosh - 1.0);
    // q + a (1 − cosh F), written so that a near-parabola keeps its digits.
    let half = (0.5 * anomaly).sinh();
    let minor = a * ((e - 1.0) * (e + 1.0)).sqrt();
    [
        q - 2.0 * a * half * half,
        minor * sinh,
        -a * sinh * rate,
        minor * cosh * rate,
    ]
}

/// The osculating orbit of a state, as (1/r_p, 1/r_a): 1/r_a is negative on a hyperbola and zero on a parabola.
fn inverse_apsides(gm: f64, y: &State) -> (f64, f64) {
    let momentum = y[0] * y[3] - y[1] * y[2];
    let r = y[0].hypot(y[1]);
    let energy = 0.5 * (y[2] * y[2] + y[3] * y[3]) - gm / r;
    let p = momentum * momentum / gm;
    let e = (1.0 + 2.0 * energy * p / gm).max(0.0).sqrt();
    ((1.0 + e) / p, (1.0 - e) / p)
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
    let exhaust = vehicle.exhaust_speed_km_s();
    let push = 1e-3 * vehicle.thrust_n;
    let usable = (mass - vehicle.dry_mass_kg).max(0.0) / flow;
    let end_of_time = match shut_off {
        ShutOff::After(seconds) => seconds.min(usable),
        _ => longest.min(usable),
    };
    let motion = |t: f64, y: &State| {
        let r_sq = y[0] * y[0] + y[1] * y[1];
        let pull = -gm / (r_sq * r_sq.sqrt());
        let thrust = push / (mass - flow * t);
        let (ux, uy) = match pointing {
            Pointing::AgainstVelocity | Pointing::AlongVelocity => {
                let speed = y[2].hypot(y[3]);
                let sign = if pointing == Pointing::AlongVelocity {
                    1.0
                } else {
                    -1.0
                };
                (sign * y[2] / speed, sign * y[3] / speed)
            }
            Pointing::Turning { offset, rate } => {
                let (sine, cosine) = (offset + rate * (since_periapsis + t)).sin_cos();
                (sine, -cosine)
            }
        };
        [
            y[2],
            y[3],
            pull * y[0] + thrust * ux,
            pull * y[1] + thrust * uy,
        ]
    };
    let event = |_: f64, y: &State| match shut_off {
        ShutOff::ApoapsisDownTo(radius) => inverse_apsides(gm, y).1 * radius - 1.0,
        ShutOff::PeriapsisUpTo(radius) => 1.0 - inverse_apsides(gm, y).0 * radius,
        ShutOff::After(_) => -1.0,
    };
    let radius = start[0].hypot(start[1]);
    let speed = start[2].hypot(start[3]);
    let accuracy = Accuracy {
        relative: ARC_RELATIVE,
        absolute: [
            ARC_RELATIVE * radius,
            ARC_RELATIVE * radius,
            ARC_RELATIVE * speed,
            ARC_RELATIVE * speed,
        ],
    };
    let mut watch = Watch::new(&start);
    // A fiftieth of a revolution at the start's radius, or a tenth of the burn: the step control takes it from there.
    let first = (0.1 * (radius.powi(3) / gm).sqrt()).min(0.1 * end_of_time);
    if end_of_time <= 0.0 {
        return Err(NoArc::OutOfPropellant);
    }
    let end = integrate(
        motion,
        event,
        |t, y| watch.see(t, y),
        (0.0, start),
        end_of_time,
        first,
        &accuracy,
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
    let lowest = watch.lowest(|t, y| motion(t, y), &accuracy);
    let (inverse_p, inverse_a) = inverse_apsides(gm, &end.y);
    let final_mass_kg = mass - flow * end.t;
    Ok(ThrustArc {
        duration_s: end.t,
        state: end.y,
        final_mass_kg,
        dv_km_s: -exhaust * (-flow * end.t / mass).ln_1p(),
        orbit: Orbit {
            periapsis_km: 1.0 / inverse_p,
            apoapsis_km: 1.0 / inverse_a,
        },
        lowest_radius_km: lowest,
        arc_rad: watch.angle,
    })
}

/// Watches the radius and the angle travelled along an arc.
struct Watch {
    lowest: f64,
    angle: f64,
    last: (f64, State),
    /// The step over which the radius stopped falling, by its ends.
    turn: Option<((f64, State), f64)>,
}

impl Watch {
    fn new(start: &State) -> Self {
        Self {
            lowest: start[0].hypot(start[1]),
            angle: 0.0,
            last: (0.0, *start),
            turn: None,
        }
    }

    fn see(&mut self, t: f64, y: &State) {
        let outward = |y: &State| y[0] * y[2] + y[1] * y[3];
        let (_, before) = self.last;
        if outward(&before) < 0.0 && 0.0 <= outward(y) {
            self.turn = Some((self.last, t));
        }
        self.lowest = self.lowest.min(y[0].hypot(y[1]));
        let cross = before[0] * y[1] - before[1] * y[0];
        let dot = before[0] * y[0] + before[1] * y[1];
        self.angle += cross.atan2(dot);
        self.last = (t, *y);
    }

    /// The lowest radius: where the radius turned inside a step, the turn itself is integrated to.
    fn lowest(&self, motion: impl FnMut(f64, &State) -> State, accuracy: &Accuracy<4>) -> f64 {
        let Some(((t, y), until)) = self.turn else {
            return self.lowest;
        };
        let outward = |_: f64, y: &State| y[0] * y[2] + y[1] * y[3];
        let End { y, .. } = integrate(
            motion,
            outward,
            |_, _| {},
            (t, y),
            until,
            until - t,
            accuracy,
        );
        self.lowest.min(y[0].hypot(y[1]))
    }
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

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_state_on_the_hyperbola_keeps_energy_and_momentum() {
        let (gm, v_inf_sq, q) = (42_828.375, 2.65 * 2.65, 3696.19);
        for t in [-1e6, -4000.0, -200.0, -1e-3, 0.0, 300.0] {
            let y = hyperbola_state(gm, v_inf_sq, q, t);
            let energy = 0.5 * (y[2] * y[2] + y[3] * y[3]) - gm / y[0].hypot(y[1]);
            assert!(
                (energy / (0.5 * v_inf_sq) - 1.0).abs() < 1e-12,
                "{t}: {energy}"
            );
            let momentum = y[0] * y[3] - y[1] * y[2];
            assert!(
                (momentum / (q * (v_inf_sq + 2.0 * gm / q).sqrt()) - 1.0).abs() < 1e-12,
                "{t}"
            );
            // The clock agrees with the time to that radius.
            if t < -1.0 {
                let r = y[0].hypot(y[1]);
                let back =
                    conic::time_to_radius_hyperbola_s(gm, v_inf_sq, q, r).expect("above periapsis");
                assert!((back / -t - 1.0).abs() < 1e-9, "{t}: {back}");
            }
        }
    }
}
