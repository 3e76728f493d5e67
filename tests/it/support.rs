//! What several modules need: a setting without limits, and a small random walk with a fixed seed.

use stoop::arrival::{Burns, Choice, Limits, Passes, PlaneDemand, Policy, Setting};
use stoop::physics::conic::Orbit;
use stoop::physics::transfer::Approach;

/// A setting without limits that bind.
pub(crate) fn open_setting(gm: f64, v_inf: f64, periapsis_km: f64, apoapsis_km: f64) -> Setting {
    Setting {
        gm,
        body_radius_km: 0.0,
        approach: Approach::Given(v_inf * v_inf),
        target: Orbit {
            periapsis_km,
            apoapsis_km,
        },
        plane: PlaneDemand::Free,
        brake: Choice::Radius(periapsis_km),
        loop_apoapsis: Choice::Radius(apoapsis_km),
        limits: Limits {
            floor_radius_km: 1e-3,
            cap_radius_km: 1e12,
            longest_s: f64::INFINITY,
            most_starts: 8,
            longest_burn_s: f64::INFINITY,
        },
        vehicle: None,
        burns: Burns::Impulsive,
        passes: Passes::Best,
        policy: Policy {
            margin: 0.0,
            per_start_km_s: 0.0,
            residual: 0.0,
        },
        remembered: None,
    }
}

/// Asserts that two numbers agree to a relative tolerance.
#[track_caller]
pub(crate) fn agree(found: f64, expected: f64, tolerance: f64) {
    let difference = (found - expected).abs() / expected.abs().max(f64::MIN_POSITIVE);
    assert!(
        difference <= tolerance,
        "{found} expected {expected}: {difference:e} > {tolerance:e}"
    );
}

/// All cases of the reference collection (computed with mpmath and scipy, outside this project).
fn references() -> Vec<serde_json::Value> {
    let all: serde_json::Value =
        serde_json::from_str(include_str!("../data/computed.json")).expect("sound JSON");
    all["cases"].as_array().expect("cases").clone()
}

/// The cases of one group of the reference collection; there is at least one.
pub(crate) fn reference_group(group: &str) -> Vec<serde_json::Value> {
    let mut cases = references();
    cases.retain(|case| case["group"] == group);
    assert!(!cases.is_empty(), "{group}");
    cases
}

/// One case of the reference collection.
pub(crate) fn reference(id: &str) -> serde_json::Value {
    references()
        .into_iter()
        .find(|case| case["id"] == id)
        .expect("the case")
}
