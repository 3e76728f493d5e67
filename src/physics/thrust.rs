//! Flight under thrust: the equations of motion of a burn, flown and watched. Everything that integrates a burn does so here.
//!
//! Two-body motion round the body's centre plus constant thrust T, mass falling by ṁ = T/(Isp g₀): r̈ = −μ r/r³ + (T/m) u, u the direction of
//! thrust. In the plane (x towards the periapsis of the conic before, motion counter-clockwise), or in space with a yaw that leans u towards
//! the normal. Valid while one body pulls and thrust and Isp are constant; attitude is perfect. Source: any textbook.

use super::conic::State;
use crate::numerics::integrate::{Accuracy, End, integrate};

/// How the engine is pointed.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Pointing {
    /// Against the velocity (braking).
    AgainstVelocity,
    /// Along the velocity (raising).
    AlongVelocity,
    /// At an angle from −y (against the motion at periapsis, along it at apoapsis) that turns at a constant rate; a rate of zero is an inertially
    /// fixed attitude.
    Turning {
        /// Angle at the apsis that the burn is timed from, rad, counter-clockwise.
        offset: f64,
        /// Rate, rad/s.
        rate: f64,
    },
}

/// A state in space: position (km) and velocity (km/s).
pub(super) type Spatial = [f64; 6];

/// An engine at work.
#[derive(Clone, Copy, Debug)]
pub(super) struct Thrust {
    pub(super) gm: f64,
    /// Thrust, N.
    pub(super) thrust_n: f64,
    /// Mass flow, kg/s.
    pub(super) flow_kg_s: f64,
    /// Mass at ignition, kg.
    pub(super) mass_kg: f64,
    pub(super) pointing: Pointing,
    /// Out of the plane, rad; unused in the plane.
    pub(super) yaw_rad: f64,
    /// Time of ignition from the apsis, s (negative: before).
    pub(super) since_s: f64,
}

impl Thrust {
    /// Acceleration by the engine, km/s².
    #[inline]
    fn push(&self, t: f64) -> f64 {
        1e-3 * self.thrust_n / (self.mass_kg - self.flow_kg_s * t)
    }

    /// −1 against the velocity, +1 along it, `None` where the attitude does not follow it.
    #[inline]
    fn sense(&self) -> Option<f64> {
        match self.pointing {
            Pointing::AgainstVelocity => Some(-1.0),
            Pointing::AlongVelocity => Some(1.0),
            Pointing::Turning { .. } => None,
        }
    }

    /// Direction of an attitude that does not follow the velocity, in the plane.
    #[inline]
    fn attitude(&self, t: f64) -> (f64, f64) {
        match self.pointing {
            Pointing::Turning { offset, rate } => {
                let (sine, cosine) = (offset + rate * (self.since_s + t)).sin_cos();
                (sine, -cosine)
            }
            Pointing::AgainstVelocity | Pointing::AlongVelocity => (0.0, -1.0),
        }
    }

    /// Derivatives in the plane.
    #[inline]
    pub(super) fn planar(&self, t: f64, y: &State) -> State {
        let r_sq = y[0] * y[0] + y[1] * y[1];
        let pull = -self.gm / (r_sq * r_sq.sqrt());
        let push = self.push(t);
        let (ux, uy) = match self.sense() {
            Some(sign) => {
                let scale = sign / (y[2] * y[2] + y[3] * y[3]).sqrt();
                (scale * y[2], scale * y[3])
            }
            None => self.attitude(t),
        };
        [y[2], y[3], pull * y[0] + push * ux, pull * y[1] + push * uy]
    }

    /// Derivatives in space.
    #[inline]
    pub(super) fn spatial(&self, t: f64, y: &Spatial) -> Spatial {
        let r_sq = y[0] * y[0] + y[1] * y[1] + y[2] * y[2];
        let pull = -self.gm / (r_sq * r_sq.sqrt());
        let push = self.push(t);
        let (sine_yaw, cosine_yaw) = self.yaw_rad.sin_cos();
        let u = match self.sense() {
            Some(sign) => {
                let h = momentum(y);
                let size = (h[0] * h[0] + h[1] * h[1] + h[2] * h[2]).sqrt();
                let (along, across) = (sign * cosine_yaw / speed(y), sine_yaw / size);
                [
                    along * y[3] + across * h[0],
                    along * y[4] + across * h[1],
                    along * y[5] + across * h[2],
                ]
            }
            None => {
                let (x, y) = self.attitude(t);
                [cosine_yaw * x, cosine_yaw * y, sine_yaw]
            }
        };
        [
            y[3],
            y[4],
            y[5],
            pull * y[0] + push * u[0],
            pull * y[1] + push * u[1],
            pull * y[2] + push * u[2],
        ]
    }

    /// Integrates `motion` ([`Thrust::planar`] or [`Thrust::spatial`]) from a state until `event` rises through zero, at most for `longest` s.
    pub(super) fn fly<const N: usize>(
        &self,
        motion: impl Fn(&Self, f64, &[f64; N]) -> [f64; N],
        start: [f64; N],
        longest: f64,
        relative: f64,
        mut event: impl FnMut(&[f64; N]) -> f64,
        after_step: impl FnMut(f64, &[f64; N]),
    ) -> End<N> {
        let first = (0.3 * (radius(&start).powi(3) / self.gm).sqrt()).min(0.25 * longest);
        integrate(
            |t, y| motion(self, t, y),
            |_, y| event(y),
            after_step,
            (0.0, start),
            longest,
            first,
            &accuracy(relative, &start),
        )
    }

    /// Integrates on from inside a flight to the event inside one of its steps.
    pub(super) fn meet<const N: usize>(
        &self,
        motion: impl Fn(&Self, f64, &[f64; N]) -> [f64; N],
        (from, y, until): Step<N>,
        relative: f64,
        event: impl Fn(&[f64; N]) -> f64,
    ) -> End<N> {
        integrate(
            |t, y| motion(self, t, y),
            |_, y| event(y),
            |_, _| {},
            (from, y),
            until,
            until - from,
            &accuracy(relative, &y),
        )
    }
}

/// A step of a flight: its first time and state, its last time.
pub(super) type Step<const N: usize> = (f64, [f64; N], f64);

/// Error per step relative to each component, and to radius and speed at the start where a component is small.
fn accuracy<const N: usize>(relative: f64, y: &[f64; N]) -> Accuracy<N> {
    let (radius, speed) = (radius(y), speed(y));
    Accuracy {
        relative,
        absolute: std::array::from_fn(|k| relative * if k < N / 2 { radius } else { speed }),
    }
}

/// Watches the radius and the angle travelled along a flight.
pub(super) struct Watch<const N: usize> {
    lowest: f64,
    /// Angle travelled round the body, rad.
    pub(super) angle: f64,
    /// The last time and state seen.
    pub(super) last: (f64, [f64; N]),
    /// The step over which the radius stopped falling.
    turn: Option<Step<N>>,
}

impl<const N: usize> Watch<N> {
    pub(super) fn new(start: &[f64; N]) -> Self {
        Self {
            lowest: radius(start),
            angle: 0.0,
            last: (0.0, *start),
            turn: None,
        }
    }

    pub(super) fn see(&mut self, t: f64, y: &[f64; N]) {
        let (before, from) = self.last;
        if outward(&from) < 0.0 && 0.0 <= outward(y) {
            self.turn = Some((before, from, t));
        }
        self.lowest = self.lowest.min(radius(y));
        // From the chord between the unit vectors, which keeps the digits of a small angle.
        let (before, now) = (radius(&from), radius(y));
        let chord_sq: f64 = (0..N / 2)
            .map(|k| (y[k] / now - from[k] / before).powi(2))
            .sum();
        self.angle += 2.0 * (0.5 * chord_sq.sqrt()).min(1.0).asin();
        self.last = (t, *y);
    }

    /// The lowest radius: where the radius turned inside a step, the turn itself is integrated to.
    pub(super) fn lowest_km(
        &self,
        thrust: &Thrust,
        motion: impl Fn(&Thrust, f64, &[f64; N]) -> [f64; N],
        relative: f64,
    ) -> f64 {
        match self.turn {
            None => self.lowest,
            Some(step) => {
                let end = thrust.meet(motion, step, relative, outward);
                self.lowest.min(radius(&end.y))
            }
        }
    }
}

/// Radial speed times radius: its sign says whether the radius grows.
fn outward<const N: usize>(y: &[f64; N]) -> f64 {
    (0..N / 2).map(|k| y[k] * y[N / 2 + k]).sum()
}

/// Distance from the centre, km.
#[inline]
pub(super) fn radius<const N: usize>(y: &[f64; N]) -> f64 {
    y[..N / 2].iter().map(|x| x * x).sum::<f64>().sqrt()
}

/// Speed, km/s.
#[inline]
pub(super) fn speed<const N: usize>(y: &[f64; N]) -> f64 {
    y[N / 2..].iter().map(|v| v * v).sum::<f64>().sqrt()
}

/// Angular momentum for each kilogram.
#[inline]
pub(super) fn momentum(y: &Spatial) -> [f64; 3] {
    [
        y[1] * y[5] - y[2] * y[4],
        y[2] * y[3] - y[0] * y[5],
        y[0] * y[4] - y[1] * y[3],
    ]
}

/// A state in the plane as one in space.
#[inline]
pub(super) fn lifted(y: &State) -> Spatial {
    [y[0], y[1], 0.0, y[2], y[3], 0.0]
}

/// Specific energy of a state, km²/s².
#[inline]
pub(super) fn energy<const N: usize>(gm: f64, y: &[f64; N]) -> f64 {
    let v = speed(y);
    0.5 * v * v - gm / radius(y)
}

/// The osculating orbit of a state as (1/r_p, 1/r_a): 1/r_a = (1 − e)/p is negative on a hyperbola, zero on a parabola.
pub(super) fn inverse_apsides(gm: f64, y: &Spatial) -> (f64, f64) {
    let h = momentum(y);
    let p = (h[0] * h[0] + h[1] * h[1] + h[2] * h[2]) / gm;
    let e = (1.0 + 2.0 * energy(gm, y) * p / gm).max(0.0).sqrt();
    ((1.0 + e) / p, (1.0 - e) / p)
}
