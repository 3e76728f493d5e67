//! One point asked whole: every way, the cheapest, the landmarks.

use super::case::Case;
use super::landmarks::{self, Landmarks};
use super::watch::{Alone, Crew, Stopped, gather};
use crate::arrival::way::WayEntry;
use crate::arrival::{NotFlyable, Plan, Setting, Way};

/// What the ways say at one setting.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Answer {
    /// Each way of the table, in its order.
    pub ways: Vec<(Way, Result<Plan, NotFlyable>)>,
    /// The cheapest flyable way.
    pub best: Option<Way>,
    /// Cheapest altitude and crossovers over the sensible range.
    pub landmarks: Landmarks,
}

impl Answer {
    /// Asks everything about a case.
    pub fn of(case: &Case) -> Self {
        let setting = case.setting();
        let points = landmarks::scan_points(setting);
        // One thread that is never stopped does not stop.
        Self::with(setting, points, &Alone).unwrap_or_default()
    }

    /// Asks everything about a setting, with a number of scan nodes, the work shared by a crew.
    ///
    /// # Errors
    /// [`Stopped`] where the crew was stopped.
    pub fn with(setting: &Setting, points: usize, crew: &dyn Crew) -> Result<Self, Stopped> {
        let ways = gather(crew, Way::COUNT, |k| {
            let way = Way::TABLE[k].way;
            (way, way.plan(setting))
        })?;
        let best = cheapest(ways.iter().filter_map(|(way, plan)| {
            plan.as_ref()
                .ok()
                .map(|plan| (*way, plan.cost_km_s, plan.starts()))
        }));
        Ok(Self {
            ways,
            best,
            landmarks: landmarks::landmarks_with(setting, points, crew)?,
        })
    }

    /// The plan of a way, where it is flyable.
    pub fn plan(&self, way: Way) -> Option<&Plan> {
        self.ways
            .iter()
            .find(|(each, _)| *each == way)
            .and_then(|(_, plan)| plan.as_ref().ok())
    }

    /// The ways that mean anything in a setting, with what they say.
    pub fn shown(
        &self,
        setting: &Setting,
    ) -> impl Iterator<Item = &(Way, Result<Plan, NotFlyable>)> {
        self.ways.iter().filter(|(way, _)| way.applies(setting))
    }

    /// The plan of the cheapest way.
    pub fn best_plan(&self) -> Option<&Plan> {
        self.best.and_then(|way| self.plan(way))
    }
}

/// Plans every way for a setting.
pub fn ask(setting: &Setting) -> Vec<(Way, Result<Plan, NotFlyable>)> {
    Way::TABLE
        .iter()
        .map(|WayEntry { way, .. }| (*way, way.plan(setting)))
        .collect()
}

/// The cheapest of (way, cost, starts). Costs that differ by rounding only count as equal; then fewer starts win.
pub fn cheapest(ways: impl Iterator<Item = (Way, f64, usize)>) -> Option<Way> {
    use crate::numerics::tolerance::SAME_COST_RELATIVE;
    ways.reduce(|best, next| {
        let slack = SAME_COST_RELATIVE * best.1.abs().max(next.1.abs());
        if next.1 < best.1 - slack || (next.1 <= best.1 + slack && next.2 < best.2) {
            next
        } else {
            best
        }
    })
    .map(|(way, _, _)| way)
}
