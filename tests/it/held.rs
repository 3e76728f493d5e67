//! Burns that hold the orbit wanted, against the reference collection (scipy DOP853 and hybrid roots, computed outside this project).

use crate::support::{agree, reference, reference_group};
use serde_json::Value;
use stoop::physics::conic::{self, Orbit};
use stoop::physics::held_burn::{Engine, HeldBurn, Start, Steering, Task, Track};

fn get(case: &Value, part: &str, name: &str) -> f64 {
    case[part][name]
        .as_f64()
        .unwrap_or_else(|| panic!("{}: {part}.{name}", case["id"]))
}

fn engine(case: &Value) -> Engine {
    Engine {
        thrust_n: get(case, "inputs", "thrust_N"),
        exhaust_km_s: get(case, "inputs", "isp") * 9.806_65e-3,
        mass_kg: get(case, "inputs", "m0"),
    }
}

/// The task of braking from a hyperbola of given v∞ into an orbit.
fn braking<'a>(
    gm: f64,
    approach: &'a dyn Fn(f64) -> Option<f64>,
    goal: Orbit,
    engine: Engine,
    steering: Steering,
) -> Task<'a> {
    let v_inf_sq = approach(goal.periapsis_km).expect("an approach");
    Task {
        gm,
        start: Start::Hyperbola(approach),
        open_km: goal.periapsis_km,
        speed_before_km_s: conic::hyperbola_speed_km_s(gm, v_inf_sq, goal.periapsis_km),
        speed_after_km_s: conic::periapsis_speed_km_s(gm, goal.periapsis_km, goal.apoapsis_km),
        turn_rad: 0.0,
        goal,
        engine,
        steering,
    }
}

fn solved(task: &Task) -> (HeldBurn, Track) {
    let burn = task.solve(None).expect("closes");
    let track = task.track(&burn).expect("flies");
    (burn, track)
}

#[test]
fn direct_into_exact_circles() {
    let cases = reference_group("finite direct to a circle");
    assert_eq!(cases.len(), 3);
    for case in cases {
        let v_inf_sq = get(&case, "inputs", "vinf").powi(2);
        let approach = |_: f64| Some(v_inf_sq);
        let r = get(&case, "inputs", "r");
        let goal = Orbit {
            periapsis_km: r,
            apoapsis_km: r,
        };
        let task = braking(
            get(&case, "inputs", "mu"),
            &approach,
            goal,
            engine(&case),
            Steering::AgainstVelocity,
        );
        let (burn, track) = solved(&task);
        let output = |name: &str| get(&case, "outputs", name);
        agree(burn.dv_km_s, output("dv"), 1e-9);
        agree(burn.controls.duration_s, output("dur"), 1e-9);
        agree(burn.controls.lead_s, output("lead"), 1e-8);
        agree(burn.controls.open_km, output("q_in"), 1e-8);
        agree(burn.mass_after_kg, output("mf"), 1e-9);
        agree(track.lowest_radius_km, output("rmin"), 1e-9);
        agree(track.arc_rad.to_degrees(), output("arc_deg"), 1e-8);
    }
}

/// Two burns: brake at q into the coast, raise along the velocity to the exact circle. The second burn's open apoapsis is the first
/// one's goal, and the first one's mass the second one's; both are settled by repetition.
#[test]
fn dip_into_exact_circles() {
    let cases = reference_group("finite dip to a circle");
    assert_eq!(cases.len(), 4);
    for case in cases {
        let input = |name: &str| get(&case, "inputs", name);
        let (gm, v_inf_sq) = (input("mu"), input("vinf").powi(2));
        let approach = |_: f64| Some(v_inf_sq);
        let (q, r) = (input("q"), input("r"));
        let first_engine = engine(&case);
        let mut apoapsis = r;
        let mut last: Option<(HeldBurn, Track, HeldBurn)> = None;
        for _ in 0..6 {
            let goal = Orbit {
                periapsis_km: q,
                apoapsis_km: apoapsis,
            };
            let braking = braking(gm, &approach, goal, first_engine, Steering::AgainstVelocity);
            let (first, track) = solved(&braking);
            let raising = Task {
                gm,
                start: Start::AtApoapsis { periapsis_km: q },
                open_km: r,
                speed_before_km_s: conic::apoapsis_speed_km_s(gm, q, r),
                speed_after_km_s: conic::circular_speed_km_s(gm, r),
                turn_rad: 0.0,
                goal: Orbit {
                    periapsis_km: r,
                    apoapsis_km: r,
                },
                engine: Engine {
                    mass_kg: first.mass_after_kg,
                    ..first_engine
                },
                steering: Steering::AgainstVelocity,
            };
            let second = raising.solve(None).expect("closes");
            apoapsis = second.controls.open_km;
            last = Some((first, track, second));
        }
        let (first, track, second) = last.expect("ran");
        let output = |name: &str| get(&case, "outputs", name);
        // The reference holds its coast periapsis to 1e-8 and its lead to what a flat valley gives; ours may not cost more.
        let dv = first.dv_km_s + second.dv_km_s;
        assert!(dv <= output("dv") * (1.0 + 1e-9));
        agree(dv, output("dv"), 5e-8);
        agree(first.dv_km_s, output("dv1"), 1e-7);
        agree(second.dv_km_s, output("dv2"), 1e-8);
        agree(second.mass_after_kg, output("mf"), 1e-7);
        agree(apoapsis, output("ra_coast"), 1e-8);
        agree(first.controls.lead_s, output("lead1"), 1e-3);
        agree(first.controls.open_km, output("q_in"), 1e-5);
        // The reference's is the least over the moments it kept, so above the true one (1e-3 at 10 N, where its steps are longest).
        assert!(track.lowest_radius_km <= output("rmin") * (1.0 + 1e-6));
        let goal = Orbit {
            periapsis_km: q,
            apoapsis_km: apoapsis,
        };
        let task = braking(gm, &approach, goal, first_engine, Steering::AgainstVelocity);
        let dense = (0..=2000)
            .filter_map(|k| task.state_after(&first, f64::from(k) / 2000.0))
            .map(|(state, _)| state[0].hypot(state[1]))
            .fold(f64::INFINITY, f64::min);
        agree(track.lowest_radius_km, dense, 1e-6);
    }
}

/// The reference takes the best ignition for each aim and then the aim that holds the periapsis; the cheapest of all that hold it costs no
/// more.
#[test]
fn ellipses_with_the_periapsis_held() {
    for id in ["opt-mars400-hit", "opt-moon22-hit"] {
        let case = reference(id);
        let input = |name: &str| get(&case, "inputs", name);
        let v_inf_sq = input("vinf").powi(2);
        let approach = |_: f64| Some(v_inf_sq);
        let goal = Orbit {
            periapsis_km: input("hit_rp"),
            apoapsis_km: input("ra"),
        };
        let task = braking(
            input("mu"),
            &approach,
            goal,
            engine(&case),
            Steering::AgainstVelocity,
        );
        let (burn, _) = solved(&task);
        let expected = get(&case, "outputs", "dv");
        assert!(burn.dv_km_s <= expected * (1.0 + 1e-9));
        agree(burn.dv_km_s, expected, 2e-6);
    }
}

/// The reference optimises attitude and ignition at a fixed aim; what it leaves is an orbit that ours may leave too, with the aim free,
/// and no dearer.
#[test]
fn attitudes_that_hold_the_orbit_are_no_dearer() {
    for (id, steering) in [
        ("opt-mars4000-inertial", Steering::FixedAttitude),
        ("opt-mars4000-rate", Steering::TurningAttitude),
        ("opt-moon22-inertial", Steering::FixedAttitude),
    ] {
        let case = reference(id);
        let v_inf_sq = get(&case, "inputs", "vinf").powi(2);
        let approach = |_: f64| Some(v_inf_sq);
        let goal = Orbit {
            periapsis_km: get(&case, "outputs", "rp_final"),
            apoapsis_km: get(&case, "inputs", "ra"),
        };
        let task = braking(
            get(&case, "inputs", "mu"),
            &approach,
            goal,
            engine(&case),
            steering,
        );
        let (burn, _) = solved(&task);
        let expected = get(&case, "outputs", "dv");
        assert!(
            burn.dv_km_s <= expected * (1.0 + 1e-9),
            "{id}: {} {expected}",
            burn.dv_km_s
        );
        // The freedom of the aim is worth little: the loss itself is 0.2 to 13 % of the dv.
        agree(burn.dv_km_s, expected, 1e-3);
    }
}
