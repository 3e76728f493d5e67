//! Thrust arcs against the reference collection (scipy DOP853 at 1e-11 to 3e-14, computed outside this project).

use crate::support::{agree, reference, reference_group};
use serde_json::Value;
use stoop::physics::conic::hyperbola_state;
use stoop::physics::thrust_arc::{BestCapture, Capture, NoArc, Pointing, ShutOff, fly};
use stoop::physics::vehicle::Vehicle;

fn get(case: &Value, part: &str, name: &str) -> f64 {
    case[part][name]
        .as_f64()
        .unwrap_or_else(|| panic!("{}: {part}.{name}", case["id"]))
}

/// The capture of a case; propellant is nearly the whole mass, so that it never runs out.
fn capture(case: &Value) -> Capture {
    let input = |name: &str| get(case, "inputs", name);
    // A given attitude stands among the inputs, an optimised one among the outputs.
    let par = |k: usize| {
        let of = |part: &str| case[part]["par"][k].as_f64();
        of("inputs").or_else(|| of("outputs")).unwrap_or(0.0)
    };
    Capture {
        gm: input("mu"),
        v_inf_sq: input("vinf").powi(2),
        vehicle: Vehicle {
            dry_mass_kg: 0.05 * input("m0"),
            propellant_kg: 0.95 * input("m0"),
            thrust_n: input("thrust_N"),
            isp_s: input("isp"),
        },
        pointing: match case["inputs"]["law"].as_str() {
            Some("antivel") => Pointing::AgainstVelocity,
            Some("inertial" | "rate") => Pointing::Turning {
                offset: par(0),
                rate: par(1),
            },
            other => panic!("{other:?}"),
        },
        apoapsis_km: case["inputs"]["ra_stop"]
            .as_f64()
            .unwrap_or_else(|| input("ra")),
    }
}

#[test]
fn arcs_at_a_fixed_ignition() {
    let cases = reference_group("thrust arc at fixed ignition");
    assert_eq!(cases.len(), 3);
    for case in cases {
        let arc = capture(&case)
            .with_lead(get(&case, "inputs", "q_in"), get(&case, "inputs", "lead_s"))
            .expect("captures");
        let output = |name: &str| get(&case, "outputs", name);
        agree(arc.duration_s, output("duration"), 1e-9);
        agree(arc.final_mass_kg, output("m_final"), 1e-9);
        agree(arc.dv_km_s, output("dv_spent"), 1e-9);
        agree(arc.orbit.periapsis_km, output("rp"), 1e-9);
        agree(arc.orbit.apoapsis_km, output("ra"), 1e-11);
        agree(arc.arc_rad.to_degrees(), output("arc_deg"), 1e-9);
        for k in 0..4 {
            let expected = case["outputs"]["state"][k].as_f64().expect("a number");
            agree(arc.state[k], expected, 1e-8);
        }
    }
}

#[test]
fn the_best_ignition_against_the_velocity() {
    let case = reference("opt-mars4000");
    check_best(
        &case,
        capture(&case)
            .best_lead(get(&case, "inputs", "q"))
            .expect("captures"),
    );
    let case = reference("opt-mars400");
    check_best(
        &case,
        capture(&case)
            .best_lead(get(&case, "inputs", "q"))
            .expect("captures"),
    );
}

/// Fixed and turning attitudes: the reference's optimum is reproduced by its own lead and attitude, and no neighbour is cheaper.
#[test]
fn the_best_attitude_of_the_reference() {
    for id in [
        "opt-mars4000-inertial",
        "opt-mars4000-rate",
        "opt-moon22-inertial",
    ] {
        let case = reference(id);
        let output = |name: &str| get(&case, "outputs", name);
        let (mut best, lead) = (capture(&case), output("lead"));
        let q = get(&case, "inputs", "q");
        if let Pointing::Turning { offset, rate } = &mut best.pointing {
            // The reference counts the angle from half the impulsive burn's time after ignition, we from the periapsis (found by trying; its
            // collection does not say).
            let used = best
                .vehicle
                .propellant_for_kg(best.vehicle.start_mass_kg(), output("dv_ideal_in"));
            *offset += *rate * (lead - 0.5 * best.vehicle.burn_time_s(used));
        }
        let arc = best.with_lead(q, lead).expect("captures");
        agree(arc.dv_km_s, output("dv"), 1e-9);
        agree(arc.duration_s, output("dur"), 1e-9);
        agree(arc.orbit.periapsis_km, output("rp_final"), 1e-7);
        agree(arc.arc_rad.to_degrees(), output("arc_deg"), 1e-7);
        let Pointing::Turning { offset, rate } = best.pointing else {
            panic!("{id}: {:?}", best.pointing);
        };
        let turning = matches!(case["inputs"]["law"].as_str(), Some("rate"));
        for k in 0..if turning { 3 } else { 2 } {
            for sign in [-1.0, 1.0] {
                // A hundredth of the lead, half a degree, a hundredth of the rate.
                let by = |which: usize, size: f64| if k == which { sign * size } else { 0.0 };
                let mut moved = best;
                moved.pointing = Pointing::Turning {
                    offset: offset + by(1, 0.01),
                    rate: rate + by(2, 0.01 * rate),
                };
                let other = moved
                    .with_lead(q, lead + by(0, 0.01 * lead))
                    .expect("captures");
                assert!(arc.dv_km_s < other.dv_km_s, "{id} {k} {sign}");
            }
        }
    }
}

/// The reference takes the best ignition for each aim and then the aim that holds the periapsis; here the cheapest ignition is searched
/// among those that hold it, which is what is wanted and never costs more (at Mars with 400 N 1.2 mm/s less).
#[test]
fn the_best_ignition_with_the_resulting_periapsis_held() {
    for (id, gain) in [("opt-mars400-hit", 2e-6), ("opt-moon22-hit", 2e-6)] {
        let case = reference(id);
        let held = get(&case, "inputs", "hit_rp");
        let best = capture(&case).held(held).expect("captures");
        agree(best.arc.orbit.periapsis_km, held, 1e-10);
        let reference = get(&case, "outputs", "dv");
        assert!(
            best.arc.dv_km_s <= reference * (1.0 + 1e-9),
            "{id}: {} {reference}",
            best.arc.dv_km_s
        );
        agree(best.arc.dv_km_s, reference, gain);
        agree(best.aimed_periapsis_km, get(&case, "outputs", "q_in"), 3e-3);
        // At the reference's own aim the best ignition is the reference's.
        let same = capture(&case)
            .best_lead(get(&case, "outputs", "q_in"))
            .expect("captures");
        check_best(&case, same);
    }
}

/// Δv is tight; lead, aim and resulting orbit are flat at the optimum and good to about 1e-5 in the reference itself.
fn check_best(case: &Value, best: BestCapture) {
    let output = |name: &str| get(case, "outputs", name);
    agree(best.arc.dv_km_s, output("dv"), 1e-7);
    agree(best.arc.duration_s, output("dur"), 1e-7);
    agree(best.lead_s, output("lead"), 1e-4);
    agree(best.aimed_periapsis_km, output("q_in"), 1e-4);
    agree(best.arc.orbit.periapsis_km, output("rp_final"), 3e-5);
    // The reference's lowest radius is the least over the moments it kept, so it lies above the true one by the sag between two of them
    // (a stop every four thousandth of the burn confirms ours to 1e-7, below).
    assert!(best.arc.lowest_radius_km <= output("rmin") * (1.0 + 1e-6));
    agree(best.arc.lowest_radius_km, output("rmin"), 1e-3);
}

/// The lowest radius by stopping the burn at four thousand moments.
#[test]
fn the_lowest_radius_is_the_lowest() {
    for (id, q, lead) in [
        ("opt-mars4000", 3696.19, 205.567_369_952),
        ("fix-moon22", 1837.4, 1230.0),
    ] {
        let capture = capture(&reference(id));
        let whole = capture.with_lead(q, lead).expect("captures");
        let start = hyperbola_state(capture.gm, capture.v_inf_sq, q, -lead);
        let mass = capture.vehicle.start_mass_kg();
        let mut lowest = f64::INFINITY;
        for k in 1..=4000 {
            let after = ShutOff::After(whole.duration_s * f64::from(k) / 4000.0);
            let arc = fly(
                capture.gm,
                &capture.vehicle,
                capture.pointing,
                (start, mass),
                -lead,
                after,
                1e6,
            )
            .expect("flies");
            lowest = lowest.min(arc.state[0].hypot(arc.state[1]));
        }
        agree(whole.lowest_radius_km, lowest, 1e-7);
    }
}

#[test]
fn halving_the_accuracy_moves_no_loss() {
    // The arc at the named accuracy against the reference at 3e-14: far inside 0.01 m/s.
    for case in reference_group("thrust arc at fixed ignition") {
        let arc = capture(&case)
            .with_lead(get(&case, "inputs", "q_in"), get(&case, "inputs", "lead_s"))
            .expect("captures");
        assert!(1e3 * (arc.dv_km_s - get(&case, "outputs", "dv_spent")).abs() < 1e-5);
    }
}

#[test]
fn what_cannot_be_flown_says_why() {
    let case = reference("fix-moon22");
    let mut capture = capture(&case);
    capture.vehicle.dry_mass_kg = 140.0;
    capture.vehicle.propellant_kg = 10.0;
    assert_eq!(
        capture.with_lead(1837.4, 1230.0),
        Err(NoArc::OutOfPropellant)
    );
    // Ignition hours too late: the spacecraft is on its way out and the small engine never catches it.
    let late = self::capture(&case).with_lead(1837.4, -40_000.0);
    assert!(late.is_err(), "{late:?}");
}

#[test]
fn a_burn_over_in_no_time_is_impulsive() {
    let case = reference("opt-mars4000");
    let mut capture = capture(&case);
    capture.vehicle.thrust_n = 4e7;
    let best = capture.best_lead(3696.19).expect("captures");
    agree(best.arc.dv_km_s, get(&case, "outputs", "dv_ideal_in"), 1e-9);
}

#[test]
fn a_raising_burn_raises() {
    // From the apoapsis of 1837 x 14 000 km, along the velocity until the periapsis has come up to 12 000 km. The engine is strong, so that the
    // burn is nearly impulsive.
    let gm = 4902.8;
    let at_apoapsis =
        |periapsis: f64| (2.0 * gm * periapsis / (14_000.0 * (14_000.0 + periapsis))).sqrt();
    let speed = at_apoapsis(1837.4);
    let vehicle = Vehicle {
        dry_mass_kg: 50.0,
        propellant_kg: 100.0,
        thrust_n: 22_000.0,
        isp_s: 220.0,
    };
    let start = [-14_000.0, 0.0, 0.0, -speed];
    let along = Pointing::AlongVelocity;
    let arc = fly(
        gm,
        &vehicle,
        along,
        (start, 150.0),
        0.0,
        ShutOff::PeriapsisUpTo(12_000.0),
        1e5,
    )
    .expect("raises");
    agree(arc.dv_km_s, at_apoapsis(12_000.0) - speed, 1e-4);
    agree(arc.orbit.periapsis_km, 12_000.0, 1e-11);
    let timed = fly(
        gm,
        &vehicle,
        along,
        (start, 150.0),
        0.0,
        ShutOff::After(arc.duration_s),
        1e5,
    )
    .expect("flies");
    agree(timed.orbit.periapsis_km, 12_000.0, 1e-9);
}

#[test]
fn the_start_of_a_burn_is_on_the_hyperbola() {
    let y = hyperbola_state(4902.8, 0.7225, 1837.4, 0.0);
    assert_eq!((y[0], y[1], y[2]), (1837.4, 0.0, 0.0));
}
