//! Why a way cannot be flown.

use super::setting::{NoPassage, Setting};
use crate::physics::transfer::NoArrival;

/// One reason why a way cannot be flown. Radii in km, times in s, masses in kg, angles in rad.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Reason {
    /// The target periapsis is under the floor.
    TargetUnderFloor {
        /// Target periapsis radius.
        periapsis: f64,
        /// Floor radius.
        floor: f64,
    },
    /// The target apoapsis is over the cap.
    TargetOverCap {
        /// Target apoapsis radius.
        apoapsis: f64,
        /// Cap radius.
        cap: f64,
    },
    /// The brake radius is under the floor.
    BrakeUnderFloor {
        /// Brake radius.
        brake: f64,
        /// Floor radius.
        floor: f64,
    },
    /// The brake radius is above the target periapsis.
    BrakeOverTarget {
        /// Brake radius.
        brake: f64,
        /// Target periapsis radius.
        periapsis: f64,
    },
    /// The loop's apoapsis is over the cap.
    LoopOverCap {
        /// Loop apoapsis radius.
        apoapsis: f64,
        /// Cap radius.
        cap: f64,
    },
    /// The loop's apoapsis is under the target's.
    LoopUnderTarget {
        /// Loop apoapsis radius.
        apoapsis: f64,
        /// Target apoapsis radius.
        target: f64,
    },
    /// It takes too long.
    TooLong {
        /// Time it takes.
        takes: f64,
        /// Limit.
        limit: f64,
    },
    /// It needs too many starts.
    TooManyStarts {
        /// Starts it needs.
        needs: usize,
        /// Limit.
        limit: usize,
    },
    /// One burn is too long.
    BurnTooLong {
        /// Longest burn.
        takes: f64,
        /// Limit.
        limit: f64,
    },
    /// Propellant is short.
    PropellantShort {
        /// Propellant needed with margin and residuals.
        needs: f64,
        /// Propellant aboard.
        aboard: f64,
    },
    /// The transfer from the parent's orbit does not reach this passage.
    OutOfReach {
        /// Periapsis radius asked for.
        periapsis: f64,
        /// Farthest periapsis radius reached on that side; zero if none.
        farthest: f64,
    },
    /// The arrival model gives no hyperbola.
    NotHyperbolic,
    /// Burns take no time, so there is nothing to gain by dividing one.
    NothingToDivide,
    /// The path sinks under the floor during a burn.
    BurnUnderFloor {
        /// Lowest radius.
        lowest: f64,
        /// Floor radius.
        floor: f64,
    },
    /// Propellant is short even for the impulsive burns, so for those that last all the more.
    PropellantShortAnyway {
        /// Propellant that impulsive burns need, with margin and residuals.
        needs: f64,
        /// Propellant aboard.
        aboard: f64,
    },
    /// A burn would take nearly the whole mass as propellant.
    BurnTakesAll {
        /// Which burn, counted from one.
        burn: usize,
    },
    /// No ignition, aim and duration of a burn leave the wanted orbit with this thrust.
    BurnNeverCloses {
        /// Which burn, counted from one.
        burn: usize,
        /// Thrust of the engine, N.
        thrust: f64,
        /// Thrust with which it still does, N, where one was found.
        closes_at: Option<f64>,
    },
    /// A long burn has to be aimed at a periapsis that the transfer does not reach.
    AimOutOfReach {
        /// That periapsis radius.
        periapsis: f64,
    },
    /// The periapsis lies too far from the equator for burns on the line of apsides.
    LineOfApsides {
        /// By how much its latitude is over the wanted inclination.
        over: f64,
    },
}

impl Reason {
    pub(super) fn from_no_passage(no: NoPassage, periapsis: f64) -> Self {
        match no {
            NoPassage::Approach(NoArrival::OutOfReach { farthest_km }) => Reason::OutOfReach {
                periapsis,
                farthest: farthest_km,
            },
            NoPassage::Approach(NoArrival::NotHyperbolic) => Reason::NotHyperbolic,
            NoPassage::LineOfApsides { latitude } => Reason::LineOfApsides { over: latitude },
        }
    }
}

/// A way that cannot be flown: all reasons, the first the most basic.
#[derive(Clone, Debug, PartialEq)]
pub struct NotFlyable {
    /// At least one reason.
    pub reasons: Vec<Reason>,
}

impl NotFlyable {
    pub(super) fn because(reason: Reason) -> Self {
        Self {
            reasons: vec![reason],
        }
    }
}

/// Collects reasons while a way is looked at. Empty it costs nothing, and nearly always it is.
#[derive(Default)]
pub(super) struct Objections(Vec<Reason>);

impl Objections {
    pub(super) fn add(&mut self, reason: Reason) {
        self.0.push(reason);
    }

    /// Reasons that hold for every way: the target itself is not allowed.
    #[inline]
    pub(super) fn about_target(setting: &Setting) -> Self {
        let mut objections = Self::default();
        let (target, limits) = (&setting.target, &setting.limits);
        if target.periapsis_km < limits.floor_radius_km {
            objections.add(Reason::TargetUnderFloor {
                periapsis: target.periapsis_km,
                floor: limits.floor_radius_km,
            });
        }
        if limits.cap_radius_km < target.apoapsis_km {
            objections.add(Reason::TargetOverCap {
                apoapsis: target.apoapsis_km,
                cap: limits.cap_radius_km,
            });
        }
        objections
    }

    /// Reasons about the radius at which dip and loop brake.
    #[inline]
    pub(super) fn about_brake(&mut self, setting: &Setting, brake: f64) {
        if brake < setting.limits.floor_radius_km {
            self.add(Reason::BrakeUnderFloor {
                brake,
                floor: setting.limits.floor_radius_km,
            });
        }
        if setting.target.periapsis_km < brake {
            self.add(Reason::BrakeOverTarget {
                brake,
                periapsis: setting.target.periapsis_km,
            });
        }
    }

    #[inline]
    pub(super) fn none(self) -> Result<(), NotFlyable> {
        if self.0.is_empty() {
            Ok(())
        } else {
            Err(NotFlyable { reasons: self.0 })
        }
    }
}
