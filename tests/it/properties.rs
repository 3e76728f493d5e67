//! What must hold for any sound setting, tried on random ones. Seeds are fixed: the same cases every time.

use crate::support::open_setting;
use proptest::prelude::*;
use proptest::test_runner::{Config, RngAlgorithm, TestRng, TestRunner};
use stoop::arrival::{Choice, PlaneDemand, Setting, Way};
use stoop::physics::burn::{SpeedStep, split_turn};
use stoop::physics::vehicle::Vehicle;
use stoop::scenario::{file, write};
use stoop::study::case::Case;
use stoop::study::knob::{KNOBS, Value};
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
        }
        setting.policy.per_start_km_s = per_start * v_inf;
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
        proptest::collection::vec((0.0..1.0_f64, 0.0..1.0_f64), 30),
    );
    hold(400, &strategy, |(setting, choices)| {
        let best = Setting {
            brake: Choice::Best,
            loop_apoapsis: Choice::Best,
            ..setting
        };
        let (floor, p) = (setting.limits.floor_radius_km, setting.target.periapsis_km);
        let (a, cap) = (setting.target.apoapsis_km, setting.limits.cap_radius_km);
        for (brake, apoapsis) in choices {
            let fixed = Setting {
                brake: Choice::Radius(floor + brake * (p - floor)),
                loop_apoapsis: Choice::Radius(a * (cap / a).powf(apoapsis)),
                ..setting
            };
            for way in [Way::Dip, Way::Loop] {
                if let Ok(tried) = way.figures(&fixed) {
                    let found = way.figures(&best);
                    prop_assert!(
                        found.is_ok(),
                        "{way:?}: {fixed:?} is flyable and Best is not: {found:?}"
                    );
                    let found = found.map_or(f64::INFINITY, |figures| figures.cost_km_s);
                    prop_assert!(
                        found <= tried.cost_km_s * (1.0 + 1e-7),
                        "{way:?}: best {found}, fixed {}",
                        tried.cost_km_s
                    );
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

#[test]
fn no_random_split_beats_the_split() {
    let step = (0.01..5.0_f64, 0.01..5.0_f64, any::<bool>());
    let strategy = (
        proptest::array::uniform3(step),
        0.001..3.1_f64,
        proptest::collection::vec((0.0..1.0_f64, 0.0..1.0_f64), 200),
    );
    hold(1500, &strategy, |(steps, total, splits)| {
        let steps = steps.map(|(before, after, same)| {
            let after = if same { before } else { after };
            SpeedStep {
                before,
                after,
                difference: before - after,
            }
        });
        let cost = |angles: [f64; 3]| (0..3).map(|k| steps[k].dv_km_s(angles[k])).sum::<f64>();
        let found = cost(split_turn(&steps, total));
        for (x, y) in splits {
            let (low, high) = if x < y { (x, y) } else { (y, x) };
            let tried = cost([total * low, total * (high - low), total * (1.0 - high)]);
            prop_assert!(found <= tried * (1.0 + 1e-12), "{found} {tried}");
        }
        for corner in [[total, 0.0, 0.0], [0.0, total, 0.0], [0.0, 0.0, total]] {
            prop_assert!(found <= cost(corner) * (1.0 + 1e-12));
        }
        Ok(())
    });
}

#[test]
fn crossovers_are_ties_and_none_is_missed() {
    hold(60, &settings(), |mut setting| {
        // Plenty of room on the axis, and no limit that makes ways come and go.
        setting.limits.cap_radius_km = 200.0 * setting.target.apoapsis_km;
        setting.limits.longest_s = f64::INFINITY;
        setting.vehicle = None;
        setting.loop_apoapsis = Choice::Best;
        let marks = landmarks::landmarks(&setting);
        for crossover in &marks.crossovers {
            let here = landmarks::at_radius(&setting, crossover.radius_km);
            if crossover.kind == landmarks::CrossoverKind::Tie {
                let below = crossover
                    .below
                    .figures(&here)
                    .map(|figures| figures.cost_km_s)
                    .unwrap_or(f64::NAN);
                let above = crossover
                    .above
                    .figures(&here)
                    .map(|figures| figures.cost_km_s)
                    .unwrap_or(f64::NAN);
                prop_assert!((below / above - 1.0).abs() < 1e-9, "{below} {above}");
            }
        }
        let Some((low, high)) = landmarks::sensible_range(&setting) else {
            return Ok(());
        };
        let brake = match setting.brake {
            Choice::Radius(brake) => brake,
            Choice::Best => low,
        };
        let winner = |radius: f64| {
            let here = landmarks::at_radius(&setting, radius);
            stoop::study::answer::cheapest(Way::TABLE.iter().filter_map(|entry| {
                entry
                    .way
                    .figures(&here)
                    .ok()
                    .map(|figures| (entry.way, figures.cost_km_s, figures.starts))
            }))
        };
        let mut changes = 0;
        let mut before = None;
        for k in 0..1500 {
            let radius = low * (high / low).powf(f64::from(k) / 1499.0);
            if radius <= brake * 1.01 {
                continue;
            }
            let now = winner(radius);
            if before.is_some() && now.is_some() && now != before {
                changes += 1;
            }
            before = now;
        }
        let found = marks
            .crossovers
            .iter()
            .filter(|crossover| brake * 1.01 < crossover.radius_km)
            .count();
        prop_assert!(
            changes <= found,
            "{changes} changes seen, {found} crossovers found: {setting:?}"
        );
        Ok(())
    });
}

#[test]
fn the_same_digits_every_time_and_on_every_thread() {
    let case = file::built_in().case;
    let once = stoop::study::Answer::of(&case);
    std::thread::scope(|scope| {
        let runs: Vec<_> = (0..4)
            .map(|_| scope.spawn(|| stoop::study::Answer::of(&case)))
            .collect();
        for run in runs {
            assert_eq!(run.join().expect("no panic"), once);
        }
    });
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
