//! What must hold for any sound setting, tried on random ones. Seeds are fixed: the same cases every time.

use crate::support::open_setting;
use proptest::prelude::*;
use proptest::test_runner::{Config, RngAlgorithm, TestRng, TestRunner};
use stoop::arrival::{Choice, PlaneDemand, Setting, Way};
use stoop::physics::burn::{SpeedStep, split_turn};
use stoop::physics::vehicle::Vehicle;
use stoop::scenario::{file, write};
use stoop::study::answer::cheapest;
use stoop::study::case::Case;
use stoop::study::curve::{self, Axis};
use stoop::study::knob::{KNOBS, KnobId, Value, by_id};
use stoop::study::{landmarks, spec};

/// Runs a property over `cases` random inputs of a strategy, without files and with a fixed seed.
fn hold<S: Strategy>(
    cases: u32,
    strategy: &S,
    test: impl Fn(S::Value) -> Result<(), TestCaseError>,
) {
    let config = Config {
        cases,
        failure_persistence: None,
        ..Config::default()
    };
    let rng = TestRng::from_seed(RngAlgorithm::ChaCha, &[7; 32]);
    if let Err(error) = TestRunner::new_with_rng(config, rng).run(strategy, test) {
        panic!("{error}");
    }
}

prop_compose! {
    /// Settings over six orders of magnitude of GM, with every kind of plane demand, limits that bind and limits that do not.
    fn settings()(
        log_gm in 0.0..8.0_f64,
        low in 1.01..3.0_f64,
        shape in 1.0..20.0_f64,
        energy in -1.5..1.5_f64,
        plane in 0..3_u8,
        angle in 0.0..1.6_f64,
        brake in 0..3_u8,
        brake_at in 0.0..1.0_f64,
        looped in 0..3_u8,
        loop_at in 0.0..1.0_f64,
        cap in 1.0..50.0_f64,
        days in 0.0..2.0_f64,
        starts in 1..5_usize,
        vehicle in any::<bool>(),
        per_start in 0.0..0.02_f64,
        burn in 0.0..2.0_f64,
    ) -> Setting {
        let gm = 10f64.powf(log_gm);
        let radius = 1000.0;
        let (p, a) = (radius * low, radius * low * shape);
        // v_inf so that the break-even radius lies within a factor of thirty of the target.
        let v_inf = (2.0 * gm / (p * 10f64.powf(energy))).sqrt();
        let mut setting = open_setting(gm, v_inf, p, a);
        setting.body_radius_km = radius;
        setting.limits.floor_radius_km = radius * 1.005;
        setting.limits.cap_radius_km = a * cap;
        setting.plane = match plane {
            0 => PlaneDemand::Free,
            1 => PlaneDemand::Turn(2.0 * angle),
            _ => PlaneDemand::Missing(0.4 * angle),
        };
        setting.brake = if brake == 0 { Choice::Best } else { Choice::Radius(radius * 1.005 + brake_at * (p - radius * 1.005)) };
        setting.loop_apoapsis = if looped == 0 { Choice::Best } else { Choice::Radius(a * (1.0 + loop_at * (cap - 1.0))) };
        if days < 1.0 {
            setting.limits.longest_s = 20.0 * days * (a * a * a / gm).sqrt();
        }
        setting.limits.most_starts = starts;
        if vehicle {
            // Exhaust speed scaled to the case, so that propellant is sometimes short and sometimes not.
            setting.vehicle = Some(Vehicle {
                dry_mass_kg: 300.0,
                propellant_kg: 500.0,
                thrust_n: 1e4,
                isp_s: 1e3 * v_inf.max((gm / p).sqrt()) / 9.806_65,
            });
            if burn < 1.0 {
                // Around what half of the propellant takes.
                let flow = setting.vehicle.map_or(1.0, |vehicle| vehicle.mass_flow_kg_s());
                setting.limits.longest_burn_s = burn * 500.0 / flow;
            }
        }
        // Without a price for starts in half of the cases, so that exact ties occur.
        setting.policy.per_start_km_s = (per_start - 0.01).max(0.0) * v_inf;
        setting.policy.margin = 0.05;
        setting.policy.residual = 0.02;
        setting
    }
}

#[test]
fn every_plan_is_finite_and_its_books_balance() {
    hold(3000, &settings(), |setting| {
        for entry in Way::TABLE {
            let plan = match entry.way.plan(&setting) {
                Ok(plan) => plan,
                Err(not) => {
                    prop_assert!(!not.reasons.is_empty());
                    continue;
                }
            };
            let sum: f64 = plan.burns.iter().map(|burn| burn.dv_km_s).sum();
            prop_assert!((sum / plan.dv_km_s - 1.0).abs() <= 1e-14);
            let turn: f64 = plan.burns.iter().map(|burn| burn.turn_rad).sum();
            prop_assert!((turn - plan.turn_rad).abs() <= 1e-13);
            for value in [
                plan.dv_km_s,
                plan.cost_km_s,
                plan.duration_s,
                plan.aiming_radius_km,
                plan.v_inf_km_s,
            ] {
                prop_assert!(value.is_finite() && 0.0 <= value, "{value}");
            }
            for burn in &plan.burns {
                prop_assert!(
                    burn.dv_km_s.is_finite() && 0.0 <= burn.dv_km_s && 0.0 <= burn.turn_rad
                );
                let least = (burn.speed_before_km_s - burn.speed_after_km_s).abs();
                prop_assert!(least <= burn.dv_km_s * (1.0 + 1e-9) + 1e-12);
            }
            prop_assert!(
                plan.captured_share
                    .is_some_and(|share| 0.0 < share && share <= 1.0)
            );
            prop_assert!(plan.duration_s <= setting.limits.longest_s);
            prop_assert!(plan.starts() <= setting.limits.most_starts);
            for seconds in plan.burns.iter().filter_map(|burn| burn.duration_s) {
                prop_assert!(seconds <= setting.limits.longest_burn_s * (1.0 + 1e-12));
            }
            prop_assert!(setting.limits.floor_radius_km <= plan.lowest_radius_km);
            for burn in &plan.burns {
                prop_assert!(burn.orbit_after.apoapsis_km <= setting.limits.cap_radius_km);
            }
            if let (Some(used), Some(vehicle)) = (plan.consumption, setting.vehicle) {
                prop_assert!(
                    (used.final_mass_kg + used.propellant_kg - vehicle.start_mass_kg()).abs()
                        < 1e-9
                );
                prop_assert!(used.propellant_with_margin_kg <= vehicle.propellant_kg);
            }
            // The figures alone are the same computation.
            let figures = entry
                .way
                .figures(&setting)
                .map_err(|_| TestCaseError::fail("figures refused"))?;
            prop_assert_eq!(figures.cost_km_s, plan.cost_km_s);
        }
        Ok(())
    });
}

#[test]
fn best_is_never_worse_than_a_fixed_choice() {
    let strategy = (
        settings(),
        0..3_u8,
        (0.0..1.0_f64, 0.0..1.0_f64),
        proptest::collection::vec((0.0..1.0_f64, 0.0..1.0_f64), 50),
    );
    hold(1000, &strategy, |(setting, open, held, choices)| {
        let (floor, p) = (setting.limits.floor_radius_km, setting.target.periapsis_km);
        let (a, cap) = (setting.target.apoapsis_km, setting.limits.cap_radius_km);
        let brake = |share: f64| Choice::Radius(floor + share * (p - floor));
        let apoapsis = |share: f64| Choice::Radius(a * (cap / a).powf(share));
        // Both left to the program, or one of them held; starts enough for every way.
        let mut setting = setting;
        setting.limits.most_starts = 4;
        let best = Setting {
            brake: if open == 1 {
                brake(held.0)
            } else {
                Choice::Best
            },
            loop_apoapsis: if open == 2 {
                apoapsis(held.1)
            } else {
                Choice::Best
            },
            ..setting
        };
        for way in [Way::Dip, Way::Loop] {
            let found = way.figures(&best);
            for choice in &choices {
                let mut fixed = best;
                if best.brake == Choice::Best {
                    fixed.brake = brake(choice.0);
                }
                if best.loop_apoapsis == Choice::Best {
                    fixed.loop_apoapsis = apoapsis(choice.1);
                }
                let Ok(tried) = way.figures(&fixed) else {
                    continue;
                };
                match &found {
                    Err(not) => prop_assert!(
                        false,
                        "{way:?}: {fixed:?} is flyable and Best is not: {not:?}"
                    ),
                    // The searches stop at 1.5e-8 in place; at a wall the cost is first order in that.
                    Ok(found) => prop_assert!(
                        found.cost_km_s <= tried.cost_km_s * (1.0 + 1e-9),
                        "{way:?}: best {}, {fixed:?} {}",
                        found.cost_km_s,
                        tried.cost_km_s
                    ),
                }
            }
        }
        Ok(())
    });
}

#[test]
fn best_never_gains_from_a_higher_floor_or_a_lower_cap() {
    hold(600, &settings(), |setting| {
        let best = Setting {
            brake: Choice::Best,
            loop_apoapsis: Choice::Best,
            vehicle: None,
            ..setting
        };
        let mut tighter = best;
        tighter.limits.floor_radius_km *= 1.003;
        tighter.limits.cap_radius_km =
            (best.limits.cap_radius_km * 0.9).max(best.target.apoapsis_km);
        for way in [Way::Dip, Way::Loop] {
            if let (Ok(tight), Ok(wide)) = (way.figures(&tighter), way.figures(&best)) {
                // The searches stop at 1e-8 in place, which is 1e-14 in cost; their scans may settle on another valley.
                prop_assert!(
                    wide.cost_km_s <= tight.cost_km_s * (1.0 + 1e-9),
                    "{way:?} {} {}",
                    wide.cost_km_s,
                    tight.cost_km_s
                );
            }
        }
        Ok(())
    });
}

/// Any way of handing out a turn costs at least as much as the split: random shares, all of it to one burn, and a walk that moves
/// ever smaller parts from one burn to another.
fn no_split_is_cheaper<const N: usize>(
    steps: [SpeedStep; N],
    total: f64,
    shares: &[[f64; N]],
) -> Result<(), TestCaseError> {
    let cost = |angles: &[f64; N]| (0..N).map(|k| steps[k].dv_km_s(angles[k])).sum::<f64>();
    let split = split_turn(&steps, total);
    prop_assert!(split.iter().all(|angle| 0.0 <= *angle));
    prop_assert!((split.iter().sum::<f64>() - total).abs() <= 1e-15 * total);
    let found = cost(&split);
    let corners = (0..N).map(|k| std::array::from_fn(|j| if j == k { total } else { 0.0 }));
    let random = shares.iter().map(|shares| {
        let sum: f64 = shares.iter().sum();
        shares.map(|share| total * share / sum)
    });
    let mut best = split;
    for tried in corners.chain(random) {
        if cost(&tried) < cost(&best) {
            best = tried;
        }
    }
    let mut step = 0.5 * total;
    while 1e-12 * total < step {
        let mut moved = false;
        for from in 0..N {
            for to in (0..N).filter(|to| *to != from) {
                let part = step.min(best[from]);
                let mut tried = best;
                tried[from] -= part;
                tried[to] += part;
                if cost(&tried) < cost(&best) {
                    best = tried;
                    moved = true;
                }
            }
        }
        if !moved {
            step *= 0.5;
        }
    }
    prop_assert!(
        found <= cost(&best) * (1.0 + 1e-13),
        "{steps:?} {total}: {split:?} {found}, {best:?} {}",
        cost(&best)
    );
    Ok(())
}

#[test]
fn no_split_beats_the_split() {
    // Speeds over three orders of magnitude, equal speeds (a pure turn) and nearly equal ones among them. The first burn brakes, as in
    // every arrival, by a hundredth or more.
    let step = (-2.0..1.0_f64, -2.0..1.0_f64, 0..3_u8, -9.0..-0.3_f64);
    let strategy = (
        proptest::array::uniform3(step),
        prop_oneof![-5.0..0.0_f64, Just(0.49)],
        proptest::collection::vec(proptest::array::uniform3(0.001..1.0_f64), 60),
    );
    hold(1500, &strategy, |(steps, log_total, shares)| {
        let total = 10f64.powf(log_total);
        let mut k = 0;
        let steps = steps.map(|(before, after, kind, near)| {
            k += 1;
            let before = 10f64.powf(before);
            let (after, difference) = match kind {
                _ if k == 1 => {
                    let difference = before * 10f64.powf(near.max(-2.0));
                    (before - difference, difference)
                }
                0 => (before, 0.0),
                1 => {
                    let difference = before * 10f64.powf(near);
                    (before - difference, difference)
                }
                _ => {
                    let after = 10f64.powf(after);
                    (after, before - after)
                }
            };
            SpeedStep {
                before,
                after,
                difference,
            }
        });
        no_split_is_cheaper(steps, total, &shares)?;
        let pairs: Vec<[f64; 2]> = shares.iter().map(|share| [share[0], share[1]]).collect();
        no_split_is_cheaper([steps[0], steps[1]], total, &pairs)
    });
}

/// The landmarks of one setting against a scan of `points` radii: every change of the winner lies where a crossover was found, at
/// every crossover the two ways tie and win on their sides, and direct is nowhere cheaper than at its cheapest.
fn landmarks_hold(setting: &Setting, points: u32) -> Result<(), TestCaseError> {
    let marks = landmarks::landmarks(setting);
    let Some((low, high)) = landmarks::sensible_range(setting) else {
        prop_assert_eq!(marks, landmarks::Landmarks::default());
        return Ok(());
    };
    let brake = match setting.brake {
        Choice::Radius(brake) => brake,
        Choice::Best => low,
    };
    let costs = |radius: f64| {
        let here = landmarks::at_radius(setting, radius);
        Way::TABLE.iter().filter_map(move |entry| {
            entry
                .way
                .figures(&here)
                .ok()
                .map(|figures| (entry.way, figures.cost_km_s, figures.starts))
        })
    };
    let winner = |radius: f64| cheapest(costs(radius));
    let cost = |way: Way, radius: f64| {
        costs(radius)
            .find(|(each, ..)| *each == way)
            .map(|(_, cost, _)| cost)
    };
    let alone = |radius: f64| {
        marks
            .crossovers
            .iter()
            .filter(|other| (other.radius_km / radius - 1.0).abs() < 1e-3)
            .count()
            == 1
    };
    for crossover in &marks.crossovers {
        let radius = crossover.radius_km;
        prop_assert!(low <= radius && radius <= high);
        prop_assert!(crossover.below != crossover.above);
        if crossover.kind == landmarks::CrossoverKind::Tie {
            let (Some(below), Some(above)) =
                (cost(crossover.below, radius), cost(crossover.above, radius))
            else {
                return Err(TestCaseError::fail(format!("no tie: {crossover:?}")));
            };
            prop_assert!(
                (below / above - 1.0).abs() < 1e-12,
                "{crossover:?}: {below} {above}"
            );
        }
        // The winner is the one said on either side.
        if alone(radius) && low < 0.999 * radius && 1.001 * radius < high {
            let (under, over) = (winner(radius * (1.0 - 2e-5)), winner(radius * (1.0 + 2e-5)));
            prop_assert_eq!(
                (under, over),
                (Some(crossover.below), Some(crossover.above)),
                "{:?} {:?}",
                crossover,
                setting
            );
        }
    }
    let mut before: Option<(f64, Way)> = None;
    for k in 0..points {
        let radius = low * (high / low).powf(f64::from(k) / f64::from(points - 1));
        // At either end ways degenerate to one another (dip to direct at the brake, loop to dip at the cap).
        if radius <= brake * 1.001 || high * (1.0 - 1e-5) < radius {
            continue;
        }
        if let (Some(found), Some(direct)) = (marks.cheapest, cost(Way::Direct, radius)) {
            prop_assert!(
                found.dv_km_s <= direct * (1.0 + 1e-13),
                "{found:?} {direct} at {radius}"
            );
        }
        let now = winner(radius);
        if let (Some((left, was)), Some(is)) = (before, now)
            && was != is
        {
            let inside = marks
                .crossovers
                .iter()
                .any(|found| (left..=radius).contains(&found.radius_km));
            prop_assert!(
                inside,
                "{was:?} to {is:?} between {left} and {radius}, found {:?}: {setting:?}",
                marks.crossovers
            );
        }
        before = now.map(|way| (radius, way));
    }
    Ok(())
}

#[test]
fn crossovers_are_where_a_dense_scan_sees_them() {
    hold(150, &settings(), |mut setting| {
        setting.limits.cap_radius_km = 200.0 * setting.target.apoapsis_km;
        setting.loop_apoapsis = Choice::Radius(20.0 * setting.target.apoapsis_km);
        if setting.brake == Choice::Best {
            setting.brake = Choice::Radius(setting.limits.floor_radius_km);
        }
        landmarks_hold(&setting, 5000)
    });
}

#[test]
fn crossovers_are_where_a_dense_scan_sees_them_with_everything_left_open() {
    hold(25, &settings(), |mut setting| {
        setting.limits.cap_radius_km = 200.0 * setting.target.apoapsis_km;
        setting.limits.longest_s = f64::INFINITY;
        // Starts for a loop in half of the cases; without it direct and dip meet.
        setting.limits.most_starts = if setting.vehicle.is_some() { 2 } else { 3 };
        setting.vehicle = None;
        (setting.brake, setting.loop_apoapsis) = (Choice::Best, Choice::Best);
        landmarks_hold(&setting, 1500)
    });
}

#[test]
fn the_same_digits_every_time_and_on_every_thread() {
    for (name, text) in file::SHIPPED {
        let case = file::parse(name, text).expect("sound").case;
        let ask = |case: &Case| {
            let top = case.altitude_km(case.setting().limits.cap_radius_km);
            let axis =
                Axis::new(by_id(KnobId::TargetAltitude), 100.0, top, 60, true).expect("an axis");
            (
                stoop::study::Answer::of(case),
                curve::curve(case, &axis),
                axis,
            )
        };
        let once = ask(&case);
        assert_eq!(ask(&case), once, "{name}");
        std::thread::scope(|scope| {
            let runs: Vec<_> = (0..4).map(|_| scope.spawn(|| ask(&case))).collect();
            for run in runs {
                assert_eq!(run.join().expect("no panic"), once, "{name}");
            }
        });
        // A curve is its points: each asked alone, in another order, on other threads.
        let (_, rows, axis) = &once;
        let (axis, case) = (*axis, &case);
        std::thread::scope(|scope| {
            for part in 0..4 {
                scope.spawn(move || {
                    for k in (part..axis.points).step_by(4).rev() {
                        let x = axis.value(k);
                        let setting = curve::setting_at(case, axis.knob, x).expect("in range");
                        assert_eq!(rows[k], curve::Row::Asked(curve::Point::ask(x, &setting)));
                    }
                });
            }
        });
    }
}

#[test]
fn knobs_give_back_what_was_set_and_refuse_what_is_out_of_range() {
    for (name, text) in file::SHIPPED {
        let case = file::parse(name, text).expect("sound").case;
        for knob in KNOBS.iter().filter(|knob| knob.offered(&case)) {
            let field = knob.range_field();
            for outside in [
                field.low.value() - 1.0,
                field.high.value() * 2.0 + 1.0,
                f64::NAN,
                f64::INFINITY,
            ] {
                assert!(
                    knob.set(&case, Value::Number(outside)).is_err(),
                    "{name} {} {outside}",
                    knob.name
                );
            }
            let Ok(Value::Number(now)) = knob.read(&case) else {
                continue;
            };
            for wanted in [now * 1.25, now * 0.8] {
                let wanted = if knob.name == "most-starts" {
                    wanted.round().max(1.0)
                } else {
                    wanted
                };
                let Ok(set) = knob.set(&case, Value::Number(wanted)) else {
                    continue;
                };
                match knob.read(&set) {
                    Ok(Value::Number(back)) => {
                        assert!(
                            (back - wanted).abs() <= 1e-9 * wanted.abs().max(1.0),
                            "{name} {}: {back} {wanted}",
                            knob.name
                        );
                    }
                    other => panic!("{name} {}: {other:?}", knob.name),
                }
            }
            for (there, back) in [(1.0, -1.0), (-1.0, 1.0)] {
                let Ok(Value::Number(first)) = knob.turned(&case, there, 1.0, None) else {
                    continue;
                };
                assert!(field.allows(first), "{name} {}", knob.name);
                let Ok(once) = knob.set(&case, Value::Number(first)) else {
                    continue;
                };
                let Ok(Value::Number(second)) = knob.turned(&once, back, 1.0, None) else {
                    continue;
                };
                // From a value between two steps one turn leads to the next step, and back over it to the one before: never
                // further from the start than one step.
                let step = (second - first).abs();
                assert!(
                    (second - now).abs() <= step * (1.0 + 1e-9),
                    "{name} {}: {now} {first} {second}",
                    knob.name
                );
            }
        }
    }
}

/// Any sound case, any knob it offers, any value: read gives back what was set; a turn stays in range, there and back returns; the
/// quick way to the setting of a curve is the slow way.
#[test]
fn knobs_hold_on_random_cases() {
    let strategy = (specs(), 0..KNOBS.len(), 0.0..1.0_f64);
    hold(3000, &strategy, |(spec, which, share)| {
        let Ok(case) = Case::new(spec) else {
            return Ok(());
        };
        let knob = &KNOBS[which];
        let field = knob.range_field();
        let now = match knob.read(&case) {
            Ok(Value::Number(now)) => now,
            _ => 1.0,
        };
        // Between a fifth and five times what it is, on the knob's own scale.
        let wanted = now * 25f64.powf(share - 0.5);
        let wanted = if knob.id == KnobId::MostStarts {
            wanted.round()
        } else {
            wanted
        };
        if let Ok(set) = knob.set(&case, Value::Number(wanted)) {
            prop_assert!(field.allows(wanted));
            let Ok(Value::Number(back)) = knob.read(&set) else {
                return Err(TestCaseError::fail(format!("{}: not readable", knob.name)));
            };
            // Stated fields come back to the digit; an energy is a square, an apoapsis may be stated as a period.
            prop_assert!(
                (back - wanted).abs() <= 1e-12 * wanted.abs().max(case.body().radius_km),
                "{}: {back} {wanted}",
                knob.name
            );
            if knob.id == KnobId::TargetAltitude {
                let quick = curve::setting_at(&case, knob, wanted)
                    .map_err(|refused| TestCaseError::fail(refused.to_string()))?
                    .target;
                let slow = set.setting().target;
                for (quick, slow) in [
                    (quick.periapsis_km, slow.periapsis_km),
                    (quick.apoapsis_km, slow.apoapsis_km),
                ] {
                    prop_assert!((quick / slow - 1.0).abs() < 1e-13, "{quick} {slow}");
                }
            }
        } else if field.allows(wanted) && knob.offered(&case) {
            // Refused although in its own range: only because another field contradicts it, and that is said.
            let why = knob
                .set(&case, Value::Number(wanted))
                .map_err(|refused| refused.to_string());
            prop_assert!(
                why.is_err_and(|why| why.contains(knob.name)),
                "{}",
                knob.name
            );
        }
        for outside in [
            field.low.value() - 1.0,
            field.high.value() * 2.0 + 1.0,
            f64::NAN,
            f64::INFINITY,
            f64::NEG_INFINITY,
        ] {
            prop_assert!(knob.set(&case, Value::Number(outside)).is_err());
        }
        if knob.takes_best() {
            let best = knob
                .set(&case, Value::Best)
                .map_err(|refused| TestCaseError::fail(refused.to_string()))?;
            prop_assert_eq!(knob.read(&best), Ok(Value::Best));
        } else {
            prop_assert!(knob.set(&case, Value::Best).is_err());
        }
        for there in [1.0, -1.0] {
            for coarseness in [0.1, 1.0, 10.0] {
                let Ok(Value::Number(first)) = knob.turned(&case, there, coarseness, None) else {
                    continue;
                };
                prop_assert!(field.allows(first), "{} {first}", knob.name);
                prop_assert!((first - now) * there > 0.0, "{} {now} {first}", knob.name);
            }
        }
        Ok(())
    });
}

prop_compose! {
    fn specs()(
        title in "[a-zA-Z0-9 \"\\\\\n\u{1b}=|<>é]{0,20}",
        arrival in 0..4_u8,
        numbers in proptest::array::uniform8(0.01..0.99_f64),
        plane in 0..3_u8,
        brake in any::<bool>(),
        looped in any::<bool>(),
        floor in any::<bool>(),
        cap in 0..3_u8,
        vehicle in any::<bool>(),
        custom in any::<bool>(),
    ) -> spec::Spec {
        let n = numbers;
        let mut out = file::built_in().case.spec().clone();
        out.title = title;
        out.arrival = match arrival {
            0 => spec::ArrivalSpec::Asymptote { v_inf_km_s: 3.0 * n[0], declination_deg: Some(80.0 * n[1]), right_ascension_deg: None },
            1 => spec::ArrivalSpec::Energy { c3_km2_s2: 9.0 * n[0], declination_deg: None, right_ascension_deg: Some(10.0 * n[1]) },
            _ => spec::ArrivalSpec::FromParentOrbit {
                periapsis_alt_km: 300.0 + 1000.0 * n[0],
                apoapsis: if n[1] < 0.5 { spec::TransferApoapsis::AtBody } else { spec::TransferApoapsis::RadiusKm(400_000.0 + n[1]) },
                model: [spec::Model::Textbook, spec::Model::BoundarySpeed, spec::Model::Patched, spec::Model::ThreeBody][(4.0 * n[2]) as usize],
                sense: if plane == 1 { None } else { Some(spec::Sense::Prograde) },
                departure: if n[3] < 0.5 { spec::Departure::ParkingOrbit } else { spec::Departure::OnTransfer },
            },
        };
        if custom && arrival < 2 {
            out.body = spec::BodySpec::Custom(spec::CustomBody {
                name: "A \"body\"".to_owned(),
                gm_km3_s2: 4000.0 * n[4],
                radius_km: 1000.0 + n[5],
                j2: 0.0,
                lowest_alt_km: n[6],
                hill_radius_km: Some(60_000.0),
                parent: None,
            });
        }
        out.target.shape = match (3.0 * n[5]) as u8 {
            0 => spec::ShapeSpec::Circular { altitude_km: 1000.0 + 5000.0 * n[6] },
            1 => spec::ShapeSpec::Ellipse { periapsis_alt_km: 1000.0 * n[6] + 100.0, apoapsis_alt_km: 9000.0 },
            _ => spec::ShapeSpec::Period { periapsis_alt_km: 100.0 + 100.0 * n[6], hours: 30.0 + n[7] },
        };
        out.target.plane = match plane {
            0 => spec::PlaneSpec::Any,
            1 => spec::PlaneSpec::InclinationDeg(89.0 * n[3]),
            _ => spec::PlaneSpec::PlaneChangeDeg(90.0 * n[3]),
        };
        out.braking.brake = if brake { spec::AltitudeChoice::Best } else { spec::AltitudeChoice::AltitudeKm(100.0 * n[2]) };
        out.braking.loop_apoapsis = if looped { spec::AltitudeChoice::Best } else { spec::AltitudeChoice::AltitudeKm(2e4 * n[4]) };
        out.limits.floor_alt_km = floor.then_some(50.0 * n[1]);
        out.limits.cap = match cap {
            0 => None,
            1 => Some(spec::CapSpec::HillFraction(n[0].max(0.2))),
            _ => Some(spec::CapSpec::AltitudeKm(3e4 * n[0] + 1000.0)),
        };
        out.limits.longest_burn_s = (n[7] < 0.5).then_some(1e4 * n[7]);
        if !vehicle {
            out.vehicle = None;
        }
        out.policy.per_start_m_s = 100.0 * n[7];
        out
    }
}

#[test]
fn what_is_saved_says_what_was_on_screen() {
    hold(400, &specs(), |spec| {
        let Ok(case) = Case::new(spec) else {
            return Ok(());
        };
        let spec = case.spec();
        let says = |text: &str| {
            let read = file::parse("saved.ron", text);
            match read {
                Ok(read) if read.case.spec() == spec => Ok(()),
                Ok(read) => Err(TestCaseError::fail(format!(
                    "{text}\n{:?}\n{spec:?}",
                    read.case.spec()
                ))),
                Err(faults) => Err(TestCaseError::fail(format!("{text}\n{faults}"))),
            }
        };
        for (_, original) in file::SHIPPED {
            let patched = write::patch(original, spec);
            says(&patched)?;
            // The author's first comment is still there.
            prop_assert!(
                patched.starts_with(original.lines().next().unwrap_or("")),
                "{}",
                patched
            );
        }
        says(&write::emit(spec))?;
        says(&write::patch(&write::emit(spec), spec))?;
        Ok(())
    });
}

#[test]
fn an_unchanged_scenario_is_saved_byte_for_byte() {
    for (name, text) in file::SHIPPED {
        let case = file::parse(name, text).expect("sound").case;
        assert_eq!(write::patch(text, case.spec()), *text);
    }
    let template = write::template();
    let case = file::parse("new", template)
        .expect("the template loads")
        .case;
    assert_eq!(write::patch(template, case.spec()), template);
}

#[test]
fn best_keeps_a_burn_limit_where_a_fixed_choice_can() {
    // Moon, circle at 100 km: the free optimum's longest burn is 1927 s.
    let text = "(format: 1, body: Known(\"Moon\"), arrival: Asymptote(v_inf_km_s: 0.85), \
        target: (shape: Circular(altitude_km: 100.0)), limits: (floor_alt_km: 60.0, longest_burn_s: 1500.0), \
        vehicle: (dry_mass_kg: 150.0, propellant_kg: 120.0, thrust_n: 66.0, isp_s: 220.0))";
    let case = file::parse("limit", text).expect("sound").case;
    let found = Way::Loop
        .plan(case.setting())
        .expect("a loop fits the limit");
    assert!(found.consumption.expect("a vehicle").longest_burn_s <= 1500.0);
    assert!(found.dv_km_s < 0.8288, "{}", found.dv_km_s);
}
