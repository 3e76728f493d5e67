//! What stands beside the numbers as a warning: codes with the figures behind them.

use super::answer::Answer;
use super::case::{Case, DAY_S};
use super::spec::{ArrivalSpec, CapSpec, Model, PlaneSpec};
use crate::arrival::{Plan, Way};
use crate::physics::conic::Orbit;
use std::f64::consts::PI;

/// One warning.
#[derive(Clone, Debug, PartialEq)]
pub struct Warning {
    /// Short name, stable, for programs.
    pub code: &'static str,
    /// One or two sentences with figures and units.
    pub text: String,
}

/// All warnings about an answer, most serious first.
pub fn warnings(case: &Case, answer: &Answer) -> Vec<Warning> {
    let mut out = Vec::new();
    low_floor(case, &mut out);
    if let Some(plan) = answer.best_plan() {
        uncaptured(plan, &mut out);
    }
    // What can go wrong with a way is said of every way that can be flown, not of the cheapest alone.
    for plan in answer
        .ways
        .iter()
        .filter_map(|(_, plan)| plan.as_ref().ok())
    {
        tide(case, plan, &mut out);
    }
    for plan in answer
        .ways
        .iter()
        .filter_map(|(_, plan)| plan.as_ref().ok())
    {
        impulsive(case, plan, &mut out);
    }
    assumptions(case, &mut out);
    out
}

fn low_floor(case: &Case, out: &mut Vec<Warning>) {
    let body = case.body();
    let floor = case.altitude_km(case.setting().limits.floor_radius_km);
    if floor < body.lowest_alt_km {
        out.push(Warning {
            code: "floor-low",
            text: format!(
                "The floor at {floor:.0} km is under the lowest sensible altitude of {} ({:.0} km): terrain or atmosphere is not modelled there.",
                body.name, body.lowest_alt_km
            ),
        });
    }
}

fn uncaptured(plan: &Plan, out: &mut Vec<Warning>) {
    let Some(share) = plan.captured_share else {
        return;
    };
    let seconds = plan
        .captured_after_s
        .map_or_else(String::new, |seconds| format!(" ({seconds:.0} s)"));
    out.push(Warning {
        code: "uncaptured-if-early",
        text: format!(
            "{}: if the first burn stops before {:.0} % of its delta-v{seconds}, the spacecraft is not captured and flies past.",
            plan.way.name(),
            100.0 * share
        ),
    });
}

/// Largest change of the periapsis radius over half a revolution by the parent's tide, km.
///
/// Orbit-averaged quadrupole of a fixed distant mass, coplanar: |de/dt| ≤ (15/4)(n'²/n) e √(1 − e²) (Lidov, Planet. Space
/// Sci. 9 (1962) 719, for the averaged equations; the fixed-direction maximum derived from them), over half a period π/n,
/// and Δr_p = a Δe. An estimate for a warning, good to a factor of two.
pub fn tidal_periapsis_shift_km(gm: f64, orbit: &Orbit, parent_gm: f64, distance_km: f64) -> f64 {
    let a = 0.5 * (orbit.periapsis_km + orbit.apoapsis_km);
    let e = orbit.eccentricity();
    let ratio = (parent_gm / gm) * (a / distance_km).powi(3);
    a * (15.0 * PI / 4.0) * ratio * e * (1.0 - e * e).max(0.0).sqrt()
}

fn tide(case: &Case, plan: &Plan, out: &mut Vec<Warning>) {
    let Some(parent) = &case.body().parent else {
        return;
    };
    let floor = case.setting().limits.floor_radius_km;
    let worst = plan
        .burns
        .iter()
        .map(|burn| {
            let orbit = burn.orbit_after;
            (
                orbit,
                tidal_periapsis_shift_km(
                    case.body().gm_km3_s2,
                    &orbit,
                    parent.gm_km3_s2,
                    parent.semi_major_axis_km,
                ),
            )
        })
        .filter(|(orbit, shift)| orbit.periapsis_km - shift < floor)
        .max_by(|a, b| a.1.total_cmp(&b.1));
    if let Some((orbit, shift)) = worst {
        out.push(Warning {
            code: "tide-under-floor",
            text: format!(
                "{}: on the orbit {:.0} x {:.0} km altitude the pull of {} can move the periapsis by up to about {shift:.0} km in half a revolution, which reaches under the floor at {:.0} km, possibly to impact.",
                plan.way.name(),
                case.altitude_km(orbit.periapsis_km),
                case.altitude_km(orbit.apoapsis_km),
                parent.name,
                case.altitude_km(floor)
            ),
        });
    }
}

/// First-order finite-burn loss of a plan's longest burn for a fixed attitude: Δv t² μ/(24 r³), km/s.
///
/// Holds while t √(μ/r³) is below about 0.5 and overestimates beyond 1 (derived; 2-physics section 4).
pub fn loss_estimate_km_s(gm: f64, plan: &Plan) -> Option<(f64, f64)> {
    plan.burns
        .iter()
        .filter_map(|burn| {
            let t = burn.duration_s?;
            let rate_sq = gm / burn.at_radius_km.powi(3);
            Some((burn.dv_km_s * t * t * rate_sq / 24.0, t))
        })
        .max_by(|a, b| a.0.total_cmp(&b.0))
}

/// Where an integrated burn begins or ends too far out for one body's pull alone.
fn far_burn(case: &Case, plan: &Plan, out: &mut Vec<Warning>) {
    let Some(sphere) = case.body().sphere_of_influence_km() else {
        return;
    };
    let farthest = plan
        .burns
        .iter()
        .filter_map(|burn| burn.flown)
        .map(|flown| flown.track.ignition_radius_km)
        .fold(0.0, f64::max);
    if sphere < farthest {
        out.push(Warning {
            code: "burn-far-out",
            text: format!(
                "{}: a burn begins at {farthest:.0} km radius, outside the sphere of influence ({sphere:.0} km), where the pull of one body alone is not the truth.",
                plan.way.name()
            ),
        });
    }
}

/// Where an integrated burn goes so far round the body that its loss depends on every detail of the steering.
fn long_arc(plan: &Plan, out: &mut Vec<Warning>) {
    let widest = plan
        .burns
        .iter()
        .filter_map(|burn| burn.flown)
        .map(|flown| flown.track.arc_rad)
        .fold(0.0, f64::max);
    if 0.5 * PI < widest {
        out.push(Warning {
            code: "long-arc",
            text: format!(
                "{}: one burn goes {:.0} degrees round the body; its loss depends on the steering in detail, and more thrust or steps would cost less.",
                plan.way.name(),
                widest.to_degrees()
            ),
        });
    }
}

fn impulsive(case: &Case, plan: &Plan, out: &mut Vec<Warning>) {
    if case.setting().lasting().is_some() {
        far_burn(case, plan, out);
        long_arc(plan, out);
        return;
    }
    let Some((loss, seconds)) = loss_estimate_km_s(case.body().gm_km3_s2, plan) else {
        return;
    };
    if 1e-3 < loss {
        out.push(Warning {
            code: "burns-take-time",
            text: format!(
                "{}: costs here are impulsive (`burns: Impulsive`), but one burn takes {:.1} min; a first-order estimate of its finite-burn loss is {:.0} m/s (fixed attitude; an upper estimate for long burns).",
                plan.way.name(),
                seconds / 60.0,
                1e3 * loss
            ),
        });
    }
}

fn assumptions(case: &Case, out: &mut Vec<Warning>) {
    let spec = case.spec();
    if case.declination_rad().is_none() && matches!(spec.target.plane, PlaneSpec::InclinationDeg(_))
    {
        out.push(Warning {
            code: "declination-unknown",
            text: "The asymptote's declination is not stated, so the wanted inclination is taken to be reachable by aiming alone; state declination_deg to hold it against the free range.".to_owned(),
        });
    }
    if let ArrivalSpec::FromParentOrbit { model, .. } = &spec.arrival {
        match model {
            Model::BoundarySpeed | Model::Patched => out.push(Warning {
                code: "model-low",
                text: "Treatments that cut the transfer at the sphere of influence read low: at the Moon 24 to 70 m/s against integrated arrivals. The three-body energy is the better answer.".to_owned(),
            }),
            Model::Textbook => out.push(Warning {
                code: "model-textbook",
                text: "The textbook model ignores the body's own pull on the transfer: at the Moon it is off by -15 to +4 m/s against integrated arrivals.".to_owned(),
            }),
            Model::ThreeBody => {}
        }
    }
    if spec.limits.cap.is_none() && case.body().hill_radius_km().is_none() {
        out.push(Warning {
            code: "cap-by-default",
            text: "No Hill radius is known for this body, so the cap is a mere 100 body radii; state limits.cap.".to_owned(),
        });
    }
    if let Some(CapSpec::HillFraction(fraction)) = spec.limits.cap
        && crate::physics::body::STABLE_PROGRADE_HILL_SHARE < fraction
    {
        out.push(Warning {
            code: "cap-beyond-stable",
            text: format!(
                "The cap at {fraction} of the Hill radius is beyond the 0.49 inside which prograde orbits last (Domingos, Winter & Yokoyama 2006)."
            ),
        });
    }
}

/// A way's time in days.
pub fn days(plan: &Plan) -> f64 {
    plan.duration_s / DAY_S
}

/// The way a warning's text starts with, if any: lets a screen put it beside that way's numbers.
pub fn about(warning: &Warning) -> Option<Way> {
    Way::TABLE
        .iter()
        .find(|entry| warning.text.starts_with(&format!("{}:", entry.name)))
        .map(|entry| entry.way)
}
