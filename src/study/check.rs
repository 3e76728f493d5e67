//! Recomputes an answer by other routes and states the differences.
//!
//! Each check takes a figure of the answer and a second figure for the same thing that shares as little code with it as
//! possible: an identity, a quadrature, a dense search.

mod flown;

use super::answer::Answer;
use super::case::Case;
use super::landmarks::{CrossoverKind, at_radius};
use crate::arrival::{Choice, Plan, PlaneDemand, Setting, Way};
use crate::physics::conic::Orbit;
use crate::physics::transfer::{Approach, Model, ParentTransfer};
use std::f64::consts::PI;

/// One figure found twice.
#[derive(Clone, Debug, PartialEq)]
pub struct Check {
    /// What was checked.
    pub name: String,
    /// By which other route.
    pub route: &'static str,
    /// The figure of the answer.
    pub here: f64,
    /// The figure of the other route.
    pub there: f64,
    /// Unit of both.
    pub unit: &'static str,
    /// Largest relative difference that passes.
    pub tolerance: f64,
}

impl Check {
    /// Relative difference of the two figures (absolute where both are below 1e-9).
    pub fn difference(&self) -> f64 {
        let scale = self.here.abs().max(self.there.abs());
        let gap = (self.here - self.there).abs();
        if scale < 1e-9 { gap } else { gap / scale }
    }

    /// Whether the two agree.
    pub fn passed(&self) -> bool {
        self.difference() <= self.tolerance
    }
}

/// Everything that can be checked about an answer.
pub fn check(case: &Case, answer: &Answer) -> Vec<Check> {
    let setting = case.setting();
    let mut checks = Vec::new();
    for (_, plan) in &answer.ways {
        if let Ok(plan) = plan {
            plan_checks(setting, plan, &mut checks);
            flown_checks(setting, plan, &mut checks);
        }
    }
    landmark_checks(setting, answer, &mut checks);
    tie_checks(setting, &mut checks);
    if let Approach::FromParent(transfer) = &setting.approach {
        jacobi_check(setting, transfer, &mut checks);
    }
    checks
}

/// The integrated burns of a plan flown again by another method.
pub fn flown_checks(setting: &Setting, plan: &Plan, checks: &mut Vec<Check>) {
    for (name, route, here, there, unit, tolerance) in flown::figures(setting, plan) {
        checks.push(Check {
            name: format!("{}: {name}", plan.way.name()),
            route,
            here,
            there,
            unit,
            tolerance,
        });
    }
}

fn plan_checks(setting: &Setting, plan: &Plan, checks: &mut Vec<Check>) {
    let name = plan.way.name();
    let mut add = |what: String, route, here, there, unit, tolerance| {
        checks.push(Check {
            name: format!("{name}: {what}"),
            route,
            here,
            there,
            unit,
            tolerance,
        });
    };
    let gm = setting.gm;
    for (k, burn) in plan.burns.iter().enumerate() {
        let turned = (burn.speed_before_km_s - burn.speed_after_km_s * burn.turn_rad.cos())
            .hypot(burn.speed_after_km_s * burn.turn_rad.sin());
        add(
            format!("burn {}, impulsive", k + 1),
            "length of the vector difference",
            burn.impulsive_dv_km_s,
            turned,
            "km/s",
            1e-9,
        );
        if setting.lasting().is_some() {
            continue;
        }
        let (r, v) = (burn.at_radius_km, burn.speed_after_km_s);
        let (low, high) = apsides_from_state(gm, r, v);
        add(
            format!("orbit after burn {}, apoapsis", k + 1),
            "from radius and speed by energy and momentum",
            burn.orbit_after.apoapsis_km,
            high,
            "km",
            1e-9,
        );
        add(
            format!("orbit after burn {}, periapsis", k + 1),
            "from radius and speed by energy and momentum",
            burn.orbit_after.periapsis_km,
            low,
            "km",
            1e-9,
        );
    }
    let q = plan.brake_radius_km;
    let momentum = plan.aiming_radius_km * plan.v_inf_km_s;
    if let (Some(first), None) = (plan.burns.first(), setting.lasting()) {
        add(
            "speed at the first periapsis, from the aiming radius".to_owned(),
            "angular momentum far out and at periapsis",
            momentum / q,
            first.speed_before_km_s,
            "km/s",
            1e-12,
        );
    }
    let coasts: f64 = plan
        .burns
        .windows(2)
        .map(|pair| {
            let half = half_period_by_quadrature_s(gm, &pair[0].orbit_after);
            // Two burns that both brake are a whole revolution apart.
            if plan.way == Way::Steps && pair[1].brakes() {
                2.0 * half
            } else {
                half
            }
        })
        .sum();
    let burning: f64 = plan.burns.iter().filter_map(|burn| burn.duration_s).sum();
    if 0.0 < coasts {
        add(
            "coasts".to_owned(),
            "quadrature of r2/h over the true anomaly",
            plan.duration_s - 0.5 * burning,
            coasts,
            "s",
            1e-8,
        );
    }
    if let (Some(used), Some(vehicle)) = (&plan.consumption, &setting.vehicle) {
        let ratio = (-plan.dv_km_s / vehicle.exhaust_speed_km_s()).exp();
        add(
            "final mass".to_owned(),
            "rocket equation in one step",
            used.final_mass_kg,
            vehicle.start_mass_kg() * ratio,
            "kg",
            1e-12,
        );
    }
    if setting.lasting().is_some() {
        return;
    }
    if plan.turn_rad == 0.0 {
        let apoapsis = match plan.way {
            Way::Direct => None,
            Way::Dip | Way::Loop | Way::Steps => {
                plan.burns.first().map(|burn| burn.orbit_after.apoapsis_km)
            }
        };
        let closed = ideal_cost_km_s(gm, plan.v_inf_km_s, q, &setting.target, apoapsis);
        add(
            "total".to_owned(),
            "one closed form for every way",
            plan.dv_km_s,
            closed,
            "km/s",
            1e-11,
        );
    } else if 1 < plan.starts() && 0.0 < plan.turn_rad {
        let dense = dense_split_km_s(plan);
        // The search can only come close from above; the split must not be beaten by more than rounding.
        add(
            "split of the turn".to_owned(),
            "dense search over splits (finds no less)",
            plan.dv_km_s,
            dense.max(plan.dv_km_s * (1.0 - 1e-9)),
            "km/s",
            2e-4,
        );
        add(
            "split of the turn is not beaten".to_owned(),
            "dense search over splits",
            plan.dv_km_s.min(dense),
            plan.dv_km_s,
            "km/s",
            1e-11,
        );
    }
}

/// Apsides from a state at an apsis: e from e² = 1 + 2 E h²/μ², p = h²/μ.
fn apsides_from_state(gm: f64, r: f64, v: f64) -> (f64, f64) {
    let energy = 0.5 * v * v - gm / r;
    let h = r * v;
    let a = -0.5 * gm / energy;
    // (1 − e²) = p/a; the apsis opposite r is 2a − r, which needs no e.
    let _ = h;
    let other = 2.0 * a - r;
    (r.min(other), r.max(other))
}

/// Half a period as ∫ r²/h dν over half a revolution, by the midpoint rule (spectral for a periodic integrand).
fn half_period_by_quadrature_s(gm: f64, orbit: &Orbit) -> f64 {
    let e = orbit.eccentricity();
    let p = orbit.periapsis_km * (1.0 + e);
    let h = (gm * p).sqrt();
    // Near e = 1 the integrand peaks at ν = π with a width of √(1 − e); resolve that.
    let nodes = (64.0 / (1.0 - e).sqrt()).clamp(256.0, 200_000.0) as u32;
    let step = PI / f64::from(nodes);
    (0..nodes)
        .map(|k| {
            let r = p / (1.0 + e * ((f64::from(k) + 0.5) * step).cos());
            r * r / h * step
        })
        .sum()
}

/// The closed form of 2-physics section 1: H(q;r*) − H(q;Y) + H(p;Y) − v_p(p,A), H(x;Y) = √(2μ(1/x + 1/Y)) with 1/Y of
/// the hyperbola equal to v∞²/2μ and of an ellipse with apsides x, Y taken as −1/(x+Y)+… (its periapsis speed).
fn ideal_cost_km_s(gm: f64, v_inf: f64, q: f64, target: &Orbit, apoapsis: Option<f64>) -> f64 {
    let h = |x: f64, inverse: f64| (2.0 * gm * (1.0 / x + inverse)).sqrt();
    let inverse_break_even = v_inf * v_inf / (2.0 * gm);
    let p = target.periapsis_km;
    let last = (2.0 * gm * target.apoapsis_km / (p * (p + target.apoapsis_km))).sqrt();
    match apoapsis {
        None => h(q, inverse_break_even) - last,
        // The two apsis speeds of (x, Y) add to H(x;Y), so H(p;Y) − H(q;Y) is the raise plus the change of the braked speed.
        Some(y) => h(q, inverse_break_even) - h(q, 1.0 / y) + h(p, 1.0 / y) - last,
    }
}

/// Least cost over a dense grid of splits of the turn, km/s.
fn dense_split_km_s(plan: &Plan) -> f64 {
    let cost = |k: usize, angle: f64| {
        let burn = &plan.burns[k];
        (burn.speed_before_km_s.powi(2) + burn.speed_after_km_s.powi(2)
            - 2.0 * burn.speed_before_km_s * burn.speed_after_km_s * angle.cos())
        .max(0.0)
        .sqrt()
    };
    let total = plan.turn_rad;
    match plan.starts() {
        2 => (0..=20_000)
            .map(|i| {
                let first = total * f64::from(i) / 20_000.0;
                cost(0, first) + cost(1, total - first)
            })
            .fold(f64::INFINITY, f64::min),
        3 => (0..=300)
            .flat_map(|i| (0..=300 - i).map(move |j| (i, j)))
            .map(|(i, j)| {
                let (a, b) = (total * f64::from(i) / 300.0, total * f64::from(j) / 300.0);
                cost(0, a) + cost(1, b) + cost(2, (total - a - b).max(0.0))
            })
            .fold(f64::INFINITY, f64::min),
        _ => plan.dv_km_s,
    }
}

fn landmark_checks(setting: &Setting, answer: &Answer, checks: &mut Vec<Check>) {
    for crossover in answer
        .landmarks
        .crossovers
        .iter()
        .filter(|crossover| crossover.kind == CrossoverKind::Tie)
    {
        let here = at_radius(setting, crossover.radius_km);
        if let (Ok(below), Ok(above)) = (crossover.below.plan(&here), crossover.above.plan(&here)) {
            checks.push(Check {
                name: format!("crossover at {:.3} km radius", crossover.radius_km),
                route: "cost of the way below and of the way above",
                here: below.cost_km_s,
                there: above.cost_km_s,
                unit: "km/s",
                // Integrated costs carry the rounding of their flights.
                tolerance: if setting.lasting().is_some() {
                    1e-9
                } else {
                    1e-12
                },
            });
        }
    }
    if let (Some(cheapest), Approach::Given(v_inf_sq), PlaneDemand::Free) =
        (answer.landmarks.cheapest, setting.approach, setting.plane)
        && !cheapest.at_border
        && setting.lasting().is_none()
    {
        // Handbook form: r_p = (2μ/v∞²)(1 − e)/(1 + e).
        let e = setting.target.eccentricity();
        checks.push(Check {
            name: "cheapest altitude, as a radius".to_owned(),
            route: "(2 mu/v_inf^2)(1 - e)/(1 + e)",
            here: cheapest.radius_km,
            there: 2.0 * setting.gm / v_inf_sq * (1.0 - e) / (1.0 + e),
            unit: "km",
            tolerance: 1e-9,
        });
    }
}

/// The ties of the ideal model, with this scenario's body and v∞: at the break-even radius direct, dip and loop cost v∞/√2.
fn tie_checks(setting: &Setting, checks: &mut Vec<Check>) {
    let Ok(v_inf_sq) = setting.approach.v_inf_sq(setting.target.periapsis_km) else {
        return;
    };
    let break_even = 2.0 * setting.gm / v_inf_sq;
    let mut ideal = setting.with_target(break_even, break_even);
    ideal.approach = Approach::Given(v_inf_sq);
    ideal.remembered = None;
    ideal.plane = PlaneDemand::Free;
    ideal.vehicle = None;
    ideal.burns = crate::arrival::Burns::Impulsive;
    ideal.policy.per_start_km_s = 0.0;
    ideal.limits.cap_radius_km = f64::INFINITY;
    ideal.limits.floor_radius_km = 0.0;
    ideal.limits.longest_s = f64::INFINITY;
    ideal.limits.most_starts = crate::arrival::way::MOST_BURNS;
    ideal.brake = Choice::Radius(setting.limits.floor_radius_km.min(0.5 * break_even));
    ideal.loop_apoapsis = Choice::Radius(break_even);
    for entry in Way::TABLE {
        if let Ok(plan) = entry.way.plan(&ideal) {
            checks.push(Check {
                name: format!(
                    "{}: ideal cost of a circle at the break-even radius",
                    entry.name
                ),
                route: "v_inf / sqrt 2",
                here: plan.dv_km_s,
                there: (0.5 * v_inf_sq).sqrt(),
                unit: "km/s",
                tolerance: 1e-12,
            });
        }
    }
}

/// The Jacobi integral of the departure state against that of the periapsis state, both as rotating-frame sums.
fn jacobi_check(setting: &Setting, transfer: &ParentTransfer, checks: &mut Vec<Check>) {
    let input = transfer.input();
    if input.model != Model::ThreeBody {
        return;
    }
    let (mp, mm, a) = (input.parent_gm, input.body_gm, input.distance_km);
    let q = setting.target.periapsis_km;
    let Ok(v_inf_sq) = transfer.v_inf_sq(q) else {
        return;
    };
    let rate_sq = (mp + mm) / (a * a * a);
    let b = a * mm / (mp + mm);
    let r0 = input.departure_radius_km;
    let v0 = (2.0 * mp * input.apoapsis_km / (r0 * (r0 + input.apoapsis_km))).sqrt();
    let depart = 0.5 * (v0 - rate_sq.sqrt() * r0).powi(2)
        - 0.5 * rate_sq * (r0 * r0 + b * b)
        - mp / r0
        - mm / a;
    let v = (v_inf_sq + 2.0 * mm / q).sqrt();
    let relative_sq =
        v * v - 2.0 * rate_sq.sqrt() * q * v * input.cos_inclination + rate_sq * q * q;
    let arrive = 0.5 * relative_sq - 0.5 * rate_sq * ((a - b).powi(2) + q * q) - mp / a - mm / q;
    checks.push(Check {
        name: "Jacobi integral at the target periapsis".to_owned(),
        route: "the same integral at departure",
        here: arrive,
        there: depart,
        unit: "km2/s2",
        tolerance: 1e-12,
    });
}
