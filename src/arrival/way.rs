//! What every way has in common: its name, the plan it returns, the reasons why it cannot be flown.

use super::setting::{NoPassage, PlaneDemand, Policy, Setting};
use super::{dip, direct, lasting, loop_way};
use crate::physics::burn::{SpeedStep, captured_share, split_turn};
use crate::physics::conic::{self, Orbit};
use crate::physics::held_burn::{Controls, Track};
use crate::physics::transfer::NoArrival;
use crate::physics::vehicle::Vehicle;
use arrayvec::ArrayVec;

/// Most burns that any way makes.
pub const MOST_BURNS: usize = 8;

/// A way of arriving.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum Way {
    /// One burn, at the periapsis of the target orbit.
    Direct,
    /// Brake low into an ellipse that reaches the target apoapsis, raise the periapsis there.
    Dip,
    /// Brake low into a long ellipse, raise the periapsis far out, come back and brake into the target.
    Loop,
    /// Direct or dip with the braking divided over several periapsis passes, so that each burn is short.
    Steps,
}

/// One line of the table of ways.
#[derive(Clone, Copy, Debug)]
pub struct WayEntry {
    /// The way.
    pub way: Way,
    /// Its name in files, JSON and on screen.
    pub name: &'static str,
    /// Its glyph where colour is missing (7-bit).
    pub glyph: char,
    /// One sentence for help and documents.
    pub meaning: &'static str,
}

impl Way {
    /// Every way, in the order they are shown.
    pub const TABLE: &'static [WayEntry] = &[
        WayEntry {
            way: Way::Direct,
            name: "direct",
            glyph: '=',
            meaning: "one burn, at the periapsis of the target orbit",
        },
        WayEntry {
            way: Way::Dip,
            name: "dip",
            glyph: 'v',
            meaning: "brake at a low periapsis into an ellipse that reaches the target apoapsis, then raise the periapsis there",
        },
        WayEntry {
            way: Way::Loop,
            name: "loop",
            glyph: 'o',
            meaning: "brake low into a long ellipse, change plane and raise the periapsis far out, come back and brake into the target orbit",
        },
        WayEntry {
            way: Way::Steps,
            name: "steps",
            glyph: ':',
            meaning: "direct or dip with the braking divided over several periapsis passes, so that each burn is short and loses less",
        },
    ];

    /// How many ways there are.
    pub const COUNT: usize = Self::TABLE.len();

    /// The table's line for this way.
    pub fn entry(self) -> &'static WayEntry {
        // The table lists the variants in their order; a test holds it to that.
        &Self::TABLE[self as usize]
    }

    /// Whether the way means anything in a setting: steps needs burns that last.
    pub fn applies(self, setting: &Setting) -> bool {
        self != Way::Steps || setting.lasting().is_some()
    }

    /// The ways that mean anything in a setting, in the order they are shown.
    pub fn shown(setting: &Setting) -> impl Iterator<Item = &'static WayEntry> {
        Self::TABLE
            .iter()
            .filter(|entry| entry.way.applies(setting))
    }

    /// The name in files and on screen.
    pub fn name(self) -> &'static str {
        self.entry().name
    }

    /// The figures of this way's plan for a setting, without the plan.
    ///
    /// # Errors
    /// As [`Way::plan`].
    #[inline]
    pub fn figures(self, setting: &Setting) -> Result<Figures, NotFlyable> {
        if let Some(engine) = setting.lasting() {
            return lasting::figures(self, setting, engine);
        }
        match self {
            Way::Direct => direct::solve(setting)?.figures(setting),
            Way::Dip => dip::solve(setting)?.figures(setting),
            Way::Loop => loop_way::solve(setting)?.figures(setting),
            Way::Steps => Err(NotFlyable::because(Reason::NothingToDivide)),
        }
    }

    /// Plans this way for a setting.
    ///
    /// # Errors
    /// Every reason why the way cannot be flown there.
    #[inline]
    pub fn plan(self, setting: &Setting) -> Result<Plan, NotFlyable> {
        if let Some(engine) = setting.lasting() {
            return lasting::plan(self, setting, engine);
        }
        match self {
            Way::Direct => direct::solve(setting)?.plan(setting),
            Way::Dip => dip::solve(setting)?.plan(setting),
            Way::Loop => loop_way::solve(setting)?.plan(setting),
            Way::Steps => Err(NotFlyable::because(Reason::NothingToDivide)),
        }
    }
}

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

    /// Finite-burn loss: spent less impulsive Δv, km/s.
    pub fn loss_km_s(&self) -> f64 {
        self.dv_km_s - self.impulsive_dv_km_s
    }
}

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

/// Which apsis a burn is centred on.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Apsis {
    Peri,
    Apo,
}

/// The bare path of a way: what its geometry says before vehicle, policy and limits are asked.
pub(super) struct Path<const N: usize> {
    pub(super) way: Way,
    pub(super) brake_radius_km: f64,
    pub(super) v_inf_sq: f64,
    pub(super) turn: f64,
    /// Radius, speeds and orbit left, burn by burn.
    pub(super) steps: [SpeedStep; N],
    pub(super) radii: [f64; N],
    pub(super) orbits: [Orbit; N],
    pub(super) apsides: [Apsis; N],
    pub(super) coast_s: f64,
}

impl<const N: usize> Path<N> {
    /// Sum of the burns with the turn split at its cheapest, km/s; no vehicle, no limits. For searches.
    #[inline]
    pub(super) fn dv_km_s(&self) -> f64 {
        let angles = split_turn(&self.steps, self.turn);
        (0..N).map(|k| self.steps[k].dv_km_s(angles[k])).sum()
    }

    /// Asks vehicle, policy and limits: what the way costs.
    #[inline]
    pub(super) fn figures(&self, setting: &Setting) -> Result<Figures, NotFlyable> {
        let (figures, _) = self.weighed(setting)?;
        Ok(figures)
    }

    /// The figures with the split of the turn they rest on.
    #[inline]
    fn weighed(&self, setting: &Setting) -> Result<(Figures, [f64; N]), NotFlyable> {
        let angles = split_turn(&self.steps, self.turn);
        let spent: [f64; N] = std::array::from_fn(|k| self.steps[k].dv_km_s(angles[k]));
        let dv: f64 = spent.iter().sum();
        let policy = &setting.policy;
        let mut figures = Figures {
            v_inf_sq: self.v_inf_sq,
            first_step: self.steps[0],
            first_turn: angles[0],
            dv_km_s: dv,
            impulsive_dv_km_s: dv,
            cost_km_s: dv + policy.per_start_km_s * (N - 1) as f64,
            dv_with_margin_km_s: dv * (1.0 + policy.margin),
            duration_s: self.coast_s,
            starts: N,
            consumption: None,
            captured_flown: None,
            lowest_flown_km: None,
        };
        if let Some(vehicle) = &setting.vehicle {
            let (used, burning) = consume(vehicle, &spent, &figures, policy);
            figures.consumption = Some(used);
            figures.duration_s += 0.5 * burning;
        }
        figures.hold_to_limits(setting)?;
        Ok((figures, angles))
    }

    /// Asks vehicle, policy and limits, and makes the plan.
    pub(super) fn plan(&self, setting: &Setting) -> Result<Plan, NotFlyable> {
        let (figures, angles) = self.weighed(setting)?;
        let mut mass = setting.vehicle.map(|vehicle| vehicle.start_mass_kg());
        let mut burns = ArrayVec::new();
        for (k, step) in self.steps.iter().enumerate() {
            let dv_km_s = step.dv_km_s(angles[k]);
            let propellant_kg = setting
                .vehicle
                .zip(mass)
                .map(|(vehicle, mass)| vehicle.propellant_for_kg(mass, dv_km_s));
            mass = mass.zip(propellant_kg).map(|(mass, used)| mass - used);
            burns.push(Burn {
                at_radius_km: self.radii[k],
                speed_before_km_s: step.before,
                speed_after_km_s: step.after,
                dv_km_s,
                impulsive_dv_km_s: dv_km_s,
                turn_rad: angles[k],
                orbit_after: self.orbits[k],
                propellant_kg,
                duration_s: setting
                    .vehicle
                    .zip(propellant_kg)
                    .map(|(vehicle, used)| vehicle.burn_time_s(used)),
                flown: None,
            });
        }
        let captured_after_s =
            setting
                .vehicle
                .zip(figures.captured_share())
                .map(|(vehicle, share)| {
                    let spent = share * self.steps[0].dv_km_s(angles[0]);
                    vehicle.burn_time_s(vehicle.propellant_for_kg(vehicle.start_mass_kg(), spent))
                });
        Ok(Plan {
            way: self.way,
            burns,
            v_inf_km_s: figures.v_inf_sq.sqrt(),
            turn_rad: self.turn,
            dv_km_s: figures.dv_km_s,
            impulsive_dv_km_s: figures.impulsive_dv_km_s,
            cost_km_s: figures.cost_km_s,
            dv_with_margin_km_s: figures.dv_with_margin_km_s,
            duration_s: figures.duration_s,
            brake_radius_km: self.brake_radius_km,
            lowest_radius_km: self.brake_radius_km,
            aiming_radius_km: conic::aiming_radius_km(
                setting.gm,
                self.v_inf_sq,
                self.brake_radius_km,
            ),
            captured_share: figures.captured_share(),
            captured_after_s,
            consumption: figures.consumption,
        })
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

/// The braking step from the hyperbola into an ellipse: speeds at q, difference without cancellation.
///
/// v_h(q) − v_p(q,Q) = (v∞² + 2μ/(q+Q)) / (v_h + v_p).
#[inline]
pub(super) fn brake_step(gm: f64, v_inf_sq: f64, q: f64, apoapsis: f64) -> SpeedStep {
    let before = conic::hyperbola_speed_km_s(gm, v_inf_sq, q);
    let after = conic::periapsis_speed_km_s(gm, q, apoapsis);
    SpeedStep {
        before,
        after,
        difference: (v_inf_sq + 2.0 * gm / (q + apoapsis)) / (before + after),
    }
}

/// The step at apoapsis Q that moves the periapsis from q to p: speed difference −2μ (p − q) / ((p+Q)(q+Q)(sum)).
#[inline]
pub(super) fn raise_step(gm: f64, q: f64, p: f64, apoapsis: f64) -> SpeedStep {
    let before = conic::apoapsis_speed_km_s(gm, q, apoapsis);
    let after = conic::apoapsis_speed_km_s(gm, p, apoapsis);
    let squares = 2.0 * gm * (q - p) / ((p + apoapsis) * (q + apoapsis));
    SpeedStep {
        before,
        after,
        difference: squares / (before + after),
    }
}

/// The step at periapsis p that lowers the apoapsis from Q to A: 2μ (Q − A) / ((p+Q)(p+A)(sum)).
#[inline]
pub(super) fn lower_step(gm: f64, p: f64, from: f64, to: f64) -> SpeedStep {
    let before = conic::periapsis_speed_km_s(gm, p, from);
    let after = conic::periapsis_speed_km_s(gm, p, to);
    let squares = 2.0 * gm * (from - to) / ((p + from) * (p + to));
    SpeedStep {
        before,
        after,
        difference: squares / (before + after),
    }
}

/// Most nodes of a search for the brake radius.
pub(super) const MOST_BRAKE_NODES: usize = 16;

/// Nodes of a search for the brake radius. The cost has one valley between floor and target, and the nodes only have to
/// bracket it; but where the turn depends on the brake there can be a second one at the target itself, and more are needed.
pub(super) fn brake_nodes(setting: &Setting) -> usize {
    match setting.plane {
        PlaneDemand::Free | PlaneDemand::Turn(_) => 6,
        PlaneDemand::Missing(_) => MOST_BRAKE_NODES,
    }
}

/// An ascending grid of `n` radii from `low` to `high`, evenly spaced in the logarithm, ends exact.
pub(super) fn log_grid<const CAP: usize>(low: f64, high: f64, n: usize) -> ArrayVec<f64, CAP> {
    let mut grid = ArrayVec::new();
    grid.push(low);
    if low < high {
        let n = n.clamp(2, CAP);
        let ratio = (high / low).ln() / (n - 1) as f64;
        for k in 1..n - 1 {
            grid.push(low * (ratio * k as f64).exp());
        }
        grid.push(high);
    }
    grid
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_table_lists_the_ways_in_order_with_glyphs_of_their_own() {
        for (k, entry) in Way::TABLE.iter().enumerate() {
            assert_eq!(entry.way as usize, k);
            assert!(entry.glyph.is_ascii_graphic() && !"*X|+-".contains(entry.glyph));
            assert_eq!(
                Way::TABLE
                    .iter()
                    .filter(|other| other.glyph == entry.glyph || other.name == entry.name)
                    .count(),
                1
            );
        }
    }

    #[test]
    fn steps_equal_the_plain_differences() {
        let (gm, q, p, a, b) = (4902.8, 1837.4, 6000.0, 14_000.0, 60_000.0);
        for step in [
            brake_step(gm, 0.7, q, a),
            raise_step(gm, q, p, b),
            lower_step(gm, p, b, a),
        ] {
            assert!((step.difference - (step.before - step.after)).abs() < 1e-15);
        }
        // Where nothing changes, the difference is zero and not rounding noise.
        assert_eq!(raise_step(gm, p, p, a).difference, 0.0);
        assert_eq!(lower_step(gm, p, a, a).difference, 0.0);
    }
}
