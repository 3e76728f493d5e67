//! One question put to the ways: body, approach, target, freedom of choice, limits, vehicle, policy.
//!
//! Plain numbers that copy without allocating, so that a curve can change one and ask again. Whoever fills
//! it has validated it: radii positive and finite, periapsis not above apoapsis, angles within 0 to π.

use crate::physics::asymptote;
use crate::physics::conic::{self, Orbit};
use crate::physics::held_burn::Steering;
use crate::physics::transfer::{Approach, NoArrival};
use crate::physics::vehicle::Vehicle;

/// Everything a way needs to know, in km, km/s, s, kg, rad.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Setting {
    /// GM of the body, km³/s².
    pub gm: f64,
    /// Radius that altitudes are counted from, km (used in reasons only).
    pub body_radius_km: f64,
    /// v∞ as a function of the periapsis.
    pub approach: Approach,
    /// The orbit wanted.
    pub target: Orbit,
    /// What the wanted plane asks for.
    pub plane: PlaneDemand,
    /// Radius at which dip and loop brake, km.
    pub brake: Choice,
    /// Apoapsis radius of the loop, km.
    pub loop_apoapsis: Choice,
    /// What is allowed.
    pub limits: Limits,
    /// The spacecraft, where one is given.
    pub vehicle: Option<Vehicle>,
    /// Whether burns take time.
    pub burns: Burns,
    /// How often the braking of way steps is divided.
    pub passes: Passes,
    /// Margins and fixed costs.
    pub policy: Policy,
    /// v∞² already found for one periapsis radius (km, km²/s²): a curve asks for the same brake radius hundreds of times,
    /// and a patched conic takes its time. Filled by [`Setting::remembering_brake`]; `None` is always right.
    pub remembered: Option<(f64, f64)>,
}

/// A radius that is given, or left to the program.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Choice {
    /// This radius, km.
    Radius(f64),
    /// The cheapest inside the limits.
    Best,
}

/// Whether burns take time, and how well that is reckoned. Without a vehicle burns take none.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Burns {
    /// They take none.
    Impulsive,
    /// Losses by the first-order formula: instant, for a first picture.
    Estimated(Steering),
    /// Every burn integrated, the orbit it leaves held.
    Integrated(Steering),
}

/// How many periapsis passes way steps divides its braking over.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Passes {
    /// This many, at least two.
    Number(usize),
    /// The cheapest within the limits on starts and time.
    Best,
}

/// The turn of the plane that the target asks for.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum PlaneDemand {
    /// None: the plane is free, or the inclination is reached by aiming.
    Free,
    /// This turn about the line of apsides for every way, rad.
    Turn(f64),
    /// The inclination lies this far outside the free range (rad): the turn depends on the way's hyperbola.
    Missing(f64),
}

/// Bounds on what may be flown.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Limits {
    /// Lowest periapsis radius allowed, km.
    pub floor_radius_km: f64,
    /// Highest apoapsis radius allowed, km.
    pub cap_radius_km: f64,
    /// Longest time from arrival to the target orbit, s.
    pub longest_s: f64,
    /// Most burns allowed.
    pub most_starts: usize,
    /// Longest single burn, s; infinite where no limit is given.
    pub longest_burn_s: f64,
}

/// Margins and fixed costs.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Policy {
    /// Margin on Δv as a fraction.
    pub margin: f64,
    /// Cost of every start after the first, km/s.
    pub per_start_km_s: f64,
    /// Propellant that cannot be used, as a fraction of the propellant needed.
    pub residual: f64,
}

/// The hyperbola a way arrives on.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Arriving {
    /// v∞², km²/s².
    pub v_inf_sq: f64,
    /// Turn about the line of apsides still to be made by burns, rad.
    pub turn: f64,
}

/// Why a way cannot arrive at a periapsis at all.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum NoPassage {
    /// The approach does not exist.
    Approach(NoArrival),
    /// The periapsis lies too far from the equator for burns on the line of apsides; its latitude, rad.
    LineOfApsides {
        /// Smallest latitude that the periapsis can have, rad.
        latitude: f64,
    },
}

impl Setting {
    /// The hyperbola with periapsis q (km) and the turn it leaves to the burns.
    #[inline]
    pub fn arriving(&self, q: f64) -> Result<Arriving, NoPassage> {
        let v_inf_sq = match self.remembered {
            Some((radius, v_inf_sq)) if radius == q => v_inf_sq,
            _ => self.approach.v_inf_sq(q).map_err(NoPassage::Approach)?,
        };
        let turn = match self.plane {
            PlaneDemand::Free => 0.0,
            PlaneDemand::Turn(turn) => turn,
            PlaneDemand::Missing(missing) => {
                let e = conic::hyperbola_eccentricity(self.gm, v_inf_sq, q);
                match asymptote::turn_about_apsides_rad(missing, e) {
                    Some(turn) => turn,
                    None => {
                        // The asymptote is ν∞ from the line of apsides: its latitude less what that arc can make up.
                        let reach = asymptote::sine_asymptote_anomaly(e).asin();
                        return Err(NoPassage::LineOfApsides {
                            latitude: missing - reach,
                        });
                    }
                }
            }
        };
        Ok(Arriving { v_inf_sq, turn })
    }

    /// The same setting with v∞² at a fixed brake radius found beforehand.
    #[must_use]
    pub fn remembering_brake(mut self) -> Self {
        if let (Choice::Radius(q), Approach::FromParent(_)) = (self.brake, &self.approach) {
            self.remembered = self.approach.v_inf_sq(q).ok().map(|v_inf_sq| (q, v_inf_sq));
        }
        self
    }

    /// The same setting with burns that take no time.
    #[must_use]
    pub fn impulsive(mut self) -> Self {
        self.burns = Burns::Impulsive;
        self
    }

    /// The same setting with losses estimated instead of integrated.
    #[must_use]
    pub fn estimated(mut self) -> Self {
        if let Burns::Integrated(steering) = self.burns {
            self.burns = Burns::Estimated(steering);
        }
        self
    }

    /// How the engine is pointed where burns take time: `None` where they take none, or no vehicle is given.
    pub fn lasting(&self) -> Option<(Vehicle, Steering)> {
        match self.burns {
            Burns::Impulsive => None,
            Burns::Estimated(steering) | Burns::Integrated(steering) => {
                self.vehicle.map(|vehicle| (vehicle, steering))
            }
        }
    }

    /// The same setting with another target.
    #[must_use]
    pub fn with_target(mut self, periapsis_km: f64, apoapsis_km: f64) -> Self {
        self.target = Orbit {
            periapsis_km,
            apoapsis_km,
        };
        self
    }
}
