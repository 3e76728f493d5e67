//! The impulsive course that lasting burns are built on: which conics, which burns between them, at which apsis.

use super::way::{Apsis, MOST_BURNS, Path, Way};
use crate::physics::burn::{SpeedStep, split_turn};
use crate::physics::conic::Orbit;
use arrayvec::ArrayVec;

/// One burn of the course and the orbit it leaves.
#[derive(Clone, Copy, Debug)]
pub(super) struct Leg {
    pub(super) apsis: Apsis,
    pub(super) radius_km: f64,
    pub(super) step: SpeedStep,
    pub(super) turn: f64,
    pub(super) orbit: Orbit,
}

impl Leg {
    /// Δv if it takes no time, km/s.
    pub(super) fn dv_km_s(&self) -> f64 {
        self.step.dv_km_s(self.turn)
    }
}

/// The whole course.
#[derive(Clone, Debug)]
pub(super) struct Guide {
    pub(super) way: Way,
    pub(super) brake_radius_km: f64,
    pub(super) v_inf_sq: f64,
    pub(super) legs: ArrayVec<Leg, MOST_BURNS>,
}

impl Guide {
    /// Δv if no burn takes time, km/s.
    pub(super) fn dv_km_s(&self) -> f64 {
        self.legs.iter().map(Leg::dv_km_s).sum()
    }

    /// Splits a turn over the legs at its cheapest.
    pub(super) fn turn_by(&mut self, turn: f64) {
        if turn == 0.0 {
            return;
        }
        match self.legs.len() {
            1 => self.split::<1>(turn),
            2 => self.split::<2>(turn),
            3 => self.split::<3>(turn),
            4 => self.split::<4>(turn),
            5 => self.split::<5>(turn),
            6 => self.split::<6>(turn),
            7 => self.split::<7>(turn),
            8 => self.split::<8>(turn),
            _ => {}
        }
    }

    fn split<const N: usize>(&mut self, turn: f64) {
        let steps: [SpeedStep; N] = std::array::from_fn(|k| self.legs[k].step);
        for (leg, angle) in self.legs.iter_mut().zip(split_turn(&steps, turn)) {
            leg.turn = angle;
        }
    }

    /// Time from the first burn to the last along given orbits, one for each leg, s: half a period from one apsis to the other, a whole
    /// one back to the same.
    pub(super) fn coast_s(&self, gm: f64, orbits: &[Orbit]) -> f64 {
        self.legs
            .windows(2)
            .zip(orbits)
            .map(|(pair, orbit)| {
                let share = if pair[0].apsis == pair[1].apsis {
                    1.0
                } else {
                    0.5
                };
                share * orbit.period_s(gm)
            })
            .sum()
    }
}

impl<const N: usize> Path<N> {
    /// The course of a path, its turn split.
    pub(super) fn guide(&self) -> Guide {
        let mut guide = Guide {
            way: self.way,
            brake_radius_km: self.brake_radius_km,
            v_inf_sq: self.v_inf_sq,
            legs: (0..N)
                .map(|k| Leg {
                    apsis: self.apsides[k],
                    radius_km: self.radii[k],
                    step: self.steps[k],
                    turn: 0.0,
                    orbit: self.orbits[k],
                })
                .collect(),
        };
        guide.turn_by(self.turn);
        guide
    }
}
