//! What every way has in common: its name, its impulsive path, and what the steps of a path are made of.

use super::plan::{Burn, Figures, Plan, consume};
use super::reason::{NotFlyable, Reason};
use super::setting::{PlaneDemand, Setting};
use super::{dip, direct, lasting, loop_way};
use crate::physics::burn::{SpeedStep, split_turn};
use crate::physics::conic::{self, Orbit};
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
