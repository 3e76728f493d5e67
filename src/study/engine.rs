//! What a review asks about the engine: how long, captured when, and what if it stops early, starts late or is weak.

use crate::arrival::{Before, Burn, Choice, Flown, Passes, Plan, Setting, Way};
use crate::physics::held_burn::{Engine, HeldBurn, Left, Missed, Start, Task};

/// Delays of the ignition that are asked, s.
pub const DELAYS_S: [f64; 3] = [10.0, 60.0, 300.0];

/// Thrust that is asked instead of the planned one: 2 % low.
pub const WEAK: f64 = 0.98;

/// Moments at which the burn is stopped, evenly spread over it, its end included.
pub const STOPS: usize = 40;

/// What is known about one integrated burn off plan.
#[derive(Clone, Debug, PartialEq)]
pub struct Questions {
    /// Which burn, counted from one.
    pub burn: usize,
    /// Share of the duration at which the engine stops, and what is left: [`STOPS`] of them.
    pub stops: Vec<(f64, Left)>,
    /// Ignition late by so many seconds. `None` where the planned energy is not reached any more.
    pub late: Vec<(f64, Option<Missed>)>,
    /// Thrust low by 2 %.
    pub weak: Option<Missed>,
}

impl Questions {
    /// What a second of delay costs, km/s: the dearest mean rate over the delays asked.
    pub fn cost_per_second_km_s(&self) -> Option<f64> {
        self.late
            .iter()
            .filter_map(|(seconds, missed)| missed.map(|missed| missed.cost_km_s() / seconds))
            .reduce(f64::max)
    }
}

/// Asks about one burn of a plan; `None` where it has not been integrated.
pub fn questions(setting: &Setting, plan: &Plan, index: usize) -> Option<Questions> {
    let burn = plan.burns.get(index)?;
    let flown = burn.flown.as_ref()?;
    with_task(setting, burn, flown, |task, held| Questions {
        burn: index + 1,
        stops: (1..=STOPS)
            .filter_map(|k| {
                let share = k as f64 / STOPS as f64;
                task.stopped_after(held, share).map(|left| (share, left))
            })
            .collect(),
        late: DELAYS_S
            .iter()
            .map(|&late| (late, task.flown_off_plan(held, late, 1.0)))
            .collect(),
        weak: task.flown_off_plan(held, 0.0, WEAK),
    })
}

/// Points of the path during an integrated burn, km in the plane of the conic before it: x towards that conic's periapsis.
pub fn arc_points(setting: &Setting, burn: &Burn, points: usize) -> Vec<(f64, f64)> {
    let Some(flown) = &burn.flown else {
        return Vec::new();
    };
    with_task(setting, burn, flown, |task, held| {
        (0..=points)
            .filter_map(|k| task.state_after(held, k as f64 / points.max(1) as f64))
            .map(|(state, _)| (state[0], state[1]))
            .collect()
    })
    .unwrap_or_default()
}

/// Rebuilds the task of a burn that has been flown.
fn with_task<T>(
    setting: &Setting,
    burn: &Burn,
    flown: &Flown,
    ask: impl FnOnce(&Task, &HeldBurn) -> T,
) -> Option<T> {
    let (vehicle, steering) = setting.lasting()?;
    let approach;
    let (start, v_inf_sq) = match flown.before {
        Before::Hyperbola { v_inf_sq, .. } => {
            approach = move |_: f64| Some(v_inf_sq);
            (Start::Hyperbola(&approach), Some(v_inf_sq))
        }
        Before::AtPeriapsis(orbit) => (
            Start::AtPeriapsis {
                apoapsis_km: orbit.apoapsis_km,
            },
            None,
        ),
        Before::AtApoapsis(orbit) => (
            Start::AtApoapsis {
                periapsis_km: orbit.periapsis_km,
            },
            None,
        ),
    };
    let engine = Engine {
        thrust_n: vehicle.thrust_n,
        exhaust_km_s: vehicle.exhaust_speed_km_s(),
        mass_kg: flown.mass_at_ignition_kg,
    };
    let task = Task {
        gm: setting.gm,
        start,
        open_km: flown.controls.open_km,
        speed_before_km_s: burn.speed_before_km_s,
        speed_after_km_s: burn.speed_after_km_s,
        turn_rad: burn.turn_rad,
        goal: burn.orbit_after,
        engine,
        steering,
    };
    let held = HeldBurn {
        controls: flown.controls,
        v_inf_sq,
        dv_km_s: burn.dv_km_s,
        mass_after_kg: flown.mass_at_ignition_kg - burn.propellant_kg.unwrap_or(0.0),
    };
    Some(ask(&task, &held))
}

/// What dividing the braking over so many passes costs.
#[derive(Clone, Debug, PartialEq)]
pub struct Divided {
    /// Passes; one is direct or dip as it is.
    pub passes: usize,
    /// Burns.
    pub starts: usize,
    /// Ranking cost, km/s.
    pub cost_km_s: f64,
    /// Time, s.
    pub duration_s: f64,
    /// Longest burn, s.
    pub longest_burn_s: f64,
}

/// What each extra pass saves: one pass (the cheaper of direct and dip), then two and more, as far as limits on starts and time let them.
///
/// Empty where burns take no time.
pub fn divisions(setting: &Setting) -> Vec<Divided> {
    if setting.lasting().is_none() {
        return Vec::new();
    }
    let divided = |passes: usize, plan: &Plan| Divided {
        passes,
        starts: plan.starts(),
        cost_km_s: plan.cost_km_s,
        duration_s: plan.duration_s,
        longest_burn_s: plan.consumption.map_or(0.0, |used| used.longest_burn_s),
    };
    let whole = [Way::Direct, Way::Dip]
        .iter()
        .filter_map(|way| way.plan(setting).ok())
        .min_by(|a, b| a.cost_km_s.total_cmp(&b.cost_km_s));
    let mut out: Vec<Divided> = whole.iter().map(|plan| divided(1, plan)).collect();
    // The brake altitude is chosen once: searching it again for every number of passes would not change what a pass saves.
    let mut each = *setting;
    if let Ok(plan) = Way::Steps.plan(setting)
        && setting.brake == Choice::Best
    {
        each.brake = Choice::Radius(plan.brake_radius_km);
    }
    for passes in 2..=setting.limits.most_starts.min(7) {
        each.passes = Passes::Number(passes);
        if let Ok(plan) = Way::Steps.plan(&each) {
            out.push(divided(passes, &plan));
        }
    }
    out
}
