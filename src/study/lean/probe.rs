//! The ways put to one value of a knob after another.

use crate::arrival::{Choice, NotFlyable, Setting, Way};
use crate::study::answer::cheapest;
use crate::study::case::{Case, DAY_S};
use crate::study::curve::setting_at;
use crate::study::knob::{Knob, KnobId, Refused};
use std::cell::Cell;

/// Costs of all ways at one setting, km/s.
#[derive(Clone, Copy, Debug)]
pub(super) struct Costs {
    each: [Option<(f64, usize)>; Way::COUNT],
    /// The cheapest flyable way.
    pub(super) best: Option<Way>,
}

impl Costs {
    /// Asks every way.
    pub(super) fn ask(setting: &Setting) -> Self {
        let each: [Option<(f64, usize)>; Way::COUNT] = std::array::from_fn(|k| {
            Way::TABLE[k]
                .way
                .figures(setting)
                .ok()
                .map(|figures| (figures.cost_km_s, figures.starts))
        });
        let best = cheapest(
            Way::TABLE
                .iter()
                .zip(&each)
                .filter_map(|(entry, cost)| cost.map(|(cost, starts)| (entry.way, cost, starts))),
        );
        Self { each, best }
    }

    /// Cost of one way, km/s; `None` where it cannot be flown.
    pub(super) fn of(&self, way: Way) -> Option<f64> {
        self.each[way as usize].map(|(cost, _)| cost)
    }
}

/// Sets one knob of a case and asks.
pub(super) struct Prober<'a> {
    pub(super) case: &'a Case,
    pub(super) knob: &'static Knob,
    wanted: &'a dyn Fn() -> bool,
    stopped: Cell<bool>,
}

impl<'a> Prober<'a> {
    pub(super) fn new(case: &'a Case, knob: &'static Knob, wanted: &'a dyn Fn() -> bool) -> Self {
        Self {
            case,
            knob,
            wanted,
            stopped: Cell::new(false),
        }
    }

    /// Whether the answer was no longer wanted at some point: whatever came back since is void.
    pub(super) fn stopped(&self) -> bool {
        self.stopped.get()
    }

    /// `true` while the answer is wanted; never again after the first "no".
    fn goes_on(&self) -> bool {
        if !self.stopped.get() && !(self.wanted)() {
            self.stopped.set(true);
        }
        !self.stopped.get()
    }

    /// The setting with the knob at a value. After a stop everything is refused, so that whatever search is under way ends.
    pub(super) fn setting(&self, x: f64) -> Result<Setting, Refused> {
        if !self.goes_on() {
            return Err(Refused::NotAllowed(String::new()));
        }
        match patched(self.case, self.knob.id, x) {
            Some(setting) => Ok(setting),
            None => setting_at(self.case, self.knob, x),
        }
    }

    /// Costs with the knob at a value.
    pub(super) fn costs(&self, x: f64) -> Result<Costs, Refused> {
        self.setting(x).map(|setting| Costs::ask(&setting))
    }

    /// Costs at the case as it stands.
    pub(super) fn stated(&self) -> Option<Costs> {
        self.goes_on().then(|| Costs::ask(self.case.setting()))
    }

    /// Cost of one way with the knob at a value.
    pub(super) fn cost(&self, x: f64, way: Way) -> Option<f64> {
        cost(&self.setting(x).ok()?, way)
    }

    /// Why a way cannot be flown with the knob at a value.
    pub(super) fn objections(&self, x: f64, way: Way) -> Option<NotFlyable> {
        way.figures(&self.setting(x).ok()?).err()
    }
}

/// The setting with a knob set that moves nothing but its own number, without a new case: that would solve the transfer round the parent
/// again, a thousand times the work of the ways. `None` where the scenario has to be asked (or may refuse). A test holds every line to what
/// [`Knob::set`] gives.
pub(super) fn patched(case: &Case, id: KnobId, x: f64) -> Option<Setting> {
    let mut setting = *case.setting();
    let radius = case.body().radius_km + x;
    match id {
        KnobId::BrakeAltitude => {
            setting.brake = Choice::Radius(radius);
            setting.remembered = None;
            return Some(setting.remembering_brake());
        }
        KnobId::LoopApoapsis => setting.loop_apoapsis = Choice::Radius(radius),
        KnobId::Floor if radius < setting.limits.cap_radius_km => {
            setting.limits.floor_radius_km = radius;
        }
        KnobId::Cap if setting.limits.floor_radius_km < radius => {
            setting.limits.cap_radius_km = radius;
        }
        KnobId::LongestDays => setting.limits.longest_s = x * DAY_S,
        KnobId::LongestBurn => setting.limits.longest_burn_s = x,
        KnobId::Thrust => setting.vehicle.as_mut()?.thrust_n = x,
        KnobId::Isp => setting.vehicle.as_mut()?.isp_s = x,
        KnobId::DryMass => setting.vehicle.as_mut()?.dry_mass_kg = x,
        KnobId::Propellant => setting.vehicle.as_mut()?.propellant_kg = x,
        KnobId::PerStart => setting.policy.per_start_km_s = 1e-3 * x,
        KnobId::Margin => setting.policy.margin = 0.01 * x,
        KnobId::Residual => setting.policy.residual = 0.01 * x,
        _ => return None,
    }
    Some(setting)
}

/// Cost of one way at a setting, km/s.
pub(super) fn cost(setting: &Setting, way: Way) -> Option<f64> {
    way.figures(setting).ok().map(|figures| figures.cost_km_s)
}
