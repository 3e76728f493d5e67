//! What a way that can be flown costs: its burns, its figures, and the limits they are held to.

use super::reason::{NotFlyable, Objections, Reason};
use super::setting::{Policy, Setting};
use super::way::{MOST_BURNS, Way};
use crate::physics::burn::{SpeedStep, captured_share};
use crate::physics::conic::Orbit;
use crate::physics::held_burn::{Controls, Track};
use crate::physics::vehicle::Vehicle;
use arrayvec::ArrayVec;

/// One burn of a plan.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Burn {
    /// Radius at which it is made, km.
    pub at_radius_km: f64,
    /// Speed before, km/s.
    pub speed_before_km_s: f64,
    /// Speed after, km/s.
    pub speed_after_km_s: f64,
    /// Δv spent, km/s.
    pub dv_km_s: f64,
    /// Δv if it took no time, km/s.
    pub impulsive_dv_km_s: f64,
    /// Turn of the plane it makes, rad.
    pub turn_rad: f64,
    /// The orbit it leaves.
    pub orbit_after: Orbit,
    /// Propellant, kg, where a vehicle is given.
    pub propellant_kg: Option<f64>,
    /// Time at full thrust, s, where a vehicle is given.
    pub duration_s: Option<f64>,
    /// How it is flown, where burns are integrated and there is something to burn.
    pub flown: Option<Flown>,
}

impl Burn {
    /// Whether it slows the spacecraft down.
    pub fn brakes(&self) -> bool {
        self.speed_after_km_s < self.speed_before_km_s
    }
}

/// How an integrated burn is flown.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Flown {
    /// Ignition, duration, aim and attitude.
    pub controls: Controls,
    /// What is seen on the way.
    pub track: Track,
    /// Mass at ignition, kg.
    pub mass_at_ignition_kg: f64,
    /// The conic before it.
    pub before: Before,
}

/// The conic before an integrated burn.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Before {
    /// The arriving hyperbola.
    Hyperbola {
        /// Its v∞², km²/s².
        v_inf_sq: f64,
        /// Its periapsis radius, km.
        periapsis_km: f64,
    },
    /// An ellipse, burnt at its periapsis.
    AtPeriapsis(Orbit),
    /// An ellipse, burnt at its apoapsis.
    AtApoapsis(Orbit),
}

/// What a way costs, without its burns: all that a curve or a search asks for. Copies without allocating.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Figures {
    /// v∞² of the hyperbola it arrives on, km²/s².
    pub v_inf_sq: f64,
    /// Speeds of the first burn.
    pub first_step: SpeedStep,
    /// Turn of the first burn, rad.
    pub first_turn: f64,
    /// Δv spent by all burns, before margins, km/s.
    pub dv_km_s: f64,
    /// Δv if no burn took time, km/s.
    pub impulsive_dv_km_s: f64,
    /// Δv plus the fixed cost of every start after the first: what ways are ranked by, km/s.
    pub cost_km_s: f64,
    /// Δv with the margin, km/s.
    pub dv_with_margin_km_s: f64,
    /// Coasts plus half the burns, s.
    pub duration_s: f64,
    /// Number of burns.
    pub starts: usize,
    /// Masses and times, where a vehicle is given.
    pub consumption: Option<Consumption>,
    /// Share of the first burn's Δv until capture, where it has been integrated.
    pub captured_flown: Option<f64>,
    /// Lowest radius of integrated burns, km.
    pub lowest_flown_km: Option<f64>,
}

/// What a vehicle makes of a plan.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Consumption {
    /// Propellant for the Δv spent, kg.
    pub propellant_kg: f64,
    /// Propellant for the Δv with margin, plus the residual share, kg.
    pub propellant_with_margin_kg: f64,
    /// Mass after the last burn, kg.
    pub final_mass_kg: f64,
    /// Longest single burn, s.
    pub longest_burn_s: f64,
}

/// A way that can be flown, with everything it costs.
#[derive(Clone, Debug, PartialEq)]
pub struct Plan {
    /// Which way this is.
    pub way: Way,
    /// The burns in order.
    pub burns: ArrayVec<Burn, MOST_BURNS>,
    /// v∞ of the hyperbola it arrives on, km/s.
    pub v_inf_km_s: f64,
    /// Turn of the plane over all burns, rad.
    pub turn_rad: f64,
    /// Δv spent by all burns, before margins, km/s.
    pub dv_km_s: f64,
    /// Δv if no burn took time, km/s.
    pub impulsive_dv_km_s: f64,
    /// Δv plus the fixed cost of every start after the first: what ways are ranked by, km/s.
    pub cost_km_s: f64,
    /// Δv with the margin, km/s.
    pub dv_with_margin_km_s: f64,
    /// Coasts plus half the burns, s.
    pub duration_s: f64,
    /// Radius of the first braking, km.
    pub brake_radius_km: f64,
    /// Lowest radius on the way, km.
    pub lowest_radius_km: f64,
    /// Aiming radius of the arriving hyperbola, km.
    pub aiming_radius_km: f64,
    /// Share of the first burn's own Δv after which the spacecraft is captured.
    pub captured_share: Option<f64>,
    /// Time from the start of the first burn to capture, s, where a vehicle is given.
    pub captured_after_s: Option<f64>,
    /// Masses and times, where a vehicle is given.
    pub consumption: Option<Consumption>,
}

impl Plan {
    /// Number of burns.
    pub fn starts(&self) -> usize {
        self.burns.len()
    }

    /// How many of its burns brake.
    pub fn passes(&self) -> usize {
        self.burns.iter().filter(|burn| burn.brakes()).count()
    }

    /// Finite-burn loss: spent less impulsive Δv, km/s.
    pub fn loss_km_s(&self) -> f64 {
        self.dv_km_s - self.impulsive_dv_km_s
    }
}

/// Rocket equation over the burns: masses and the longest burn, and the time all burns take together, s.
pub(super) fn consume(
    vehicle: &Vehicle,
    spent: &[f64],
    figures: &Figures,
    policy: &Policy,
) -> (Consumption, f64) {
    let start = vehicle.start_mass_kg();
    let mut mass = start;
    let (mut longest, mut burning) = (0.0_f64, 0.0);
    for dv in spent {
        let propellant = vehicle.propellant_for_kg(mass, *dv);
        let duration = vehicle.burn_time_s(propellant);
        mass -= propellant;
        longest = longest.max(duration);
        burning += duration;
    }
    let with_margin = vehicle.propellant_for_kg(start, figures.dv_with_margin_km_s);
    let used = Consumption {
        propellant_kg: start - mass,
        propellant_with_margin_kg: with_margin * (1.0 + policy.residual),
        final_mass_kg: mass,
        longest_burn_s: longest,
    };
    (used, burning)
}

impl Figures {
    /// Share of the first burn's own Δv after which the spacecraft is captured. Computed when asked for: searches do not.
    pub fn captured_share(&self) -> Option<f64> {
        self.captured_flown.or_else(|| self.captured_impulsively())
    }

    fn captured_impulsively(&self) -> Option<f64> {
        captured_share(self.first_step, self.first_turn, self.v_inf_sq)
    }

    /// Holds times, starts and masses against the limits.
    #[inline]
    pub(super) fn hold_to_limits(&self, setting: &Setting) -> Result<(), NotFlyable> {
        let limits = &setting.limits;
        let mut objections = Objections::default();
        if limits.longest_s < self.duration_s {
            objections.add(Reason::TooLong {
                takes: self.duration_s,
                limit: limits.longest_s,
            });
        }
        if limits.most_starts < self.starts {
            objections.add(Reason::TooManyStarts {
                needs: self.starts,
                limit: limits.most_starts,
            });
        }
        if let Some(lowest) = self.lowest_flown_km
            && lowest < limits.floor_radius_km * (1.0 - 1e-9)
        {
            objections.add(Reason::BurnUnderFloor {
                lowest,
                floor: limits.floor_radius_km,
            });
        }
        if let (Some(used), Some(vehicle)) = (&self.consumption, &setting.vehicle) {
            if limits.longest_burn_s < used.longest_burn_s {
                objections.add(Reason::BurnTooLong {
                    takes: used.longest_burn_s,
                    limit: limits.longest_burn_s,
                });
            }
            if vehicle.propellant_kg < used.propellant_with_margin_kg {
                objections.add(Reason::PropellantShort {
                    needs: used.propellant_with_margin_kg,
                    aboard: vehicle.propellant_kg,
                });
            }
        }
        objections.none()
    }
}
