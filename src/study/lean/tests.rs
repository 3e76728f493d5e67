//! Turning points and slopes against what two-body mechanics says exactly. All identities are derived in `docs/model.md` or in the test.

use super::*;
use crate::arrival::Reason;
use crate::study::knob::by_id;
use crate::study::spec::{
    AltitudeChoice, ArrivalSpec, BodySpec, CapSpec, CustomBody, Departure, LimitsSpec, Model,
    PlaneSpec, ShapeSpec, Spec, Steering, TargetSpec, TransferApoapsis, VehicleSpec, defaults,
};

const GM: f64 = 4902.8;
const RADIUS: f64 = 1737.4;
const V_INF: f64 = 0.85;
const BRAKE: f64 = 100.0;
const FLOOR: f64 = 60.0;
const CAP: f64 = 60_000.0;

/// A coplanar arrival into a circle, two starts allowed, so that loop stays out of it.
fn spec(altitude_km: f64) -> Spec {
    let mut braking = defaults::BRAKING;
    braking.brake = AltitudeChoice::AltitudeKm(BRAKE);
    Spec {
        title: String::new(),
        note: String::new(),
        body: BodySpec::Custom(CustomBody {
            name: "Test".to_owned(),
            gm_km3_s2: GM,
            radius_km: RADIUS,
            j2: 0.0,
            lowest_alt_km: 0.0,
            hill_radius_km: None,
            parent: None,
        }),
        arrival: ArrivalSpec::Asymptote {
            v_inf_km_s: V_INF,
            declination_deg: None,
            right_ascension_deg: None,
        },
        target: TargetSpec {
            shape: ShapeSpec::Circular { altitude_km },
            plane: PlaneSpec::Any,
        },
        braking,
        limits: LimitsSpec {
            floor_alt_km: Some(FLOOR),
            cap: Some(CapSpec::AltitudeKm(CAP)),
            most_starts: 2,
            ..defaults::LIMITS
        },
        vehicle: None,
        burns: defaults::BURNS,
        policy: defaults::POLICY,
    }
}

fn lean(spec: Spec, id: KnobId) -> Lean {
    let case = Case::new(spec).expect("sound");
    let answer = Answer::of(&case);
    one(&Here::new(&case, &answer), by_id(id)).expect("the knob has a value")
}

#[track_caller]
fn agree(found: f64, expected: f64, tolerance: f64) {
    let off = (found - expected).abs() / expected.abs();
    assert!(off <= tolerance, "{found} expected {expected}: {off:e}");
}

#[track_caller]
fn turn(reach: &Reach) -> &Turn {
    reach.turn().expect("the verdict turns")
}

#[test]
fn dip_ties_direct_at_the_break_even_radius_whichever_knob_leads_there() {
    let break_even = 2.0 * GM / (V_INF * V_INF);
    let here = 6500.0;
    let target = lean(spec(here), KnobId::TargetAltitude);
    assert_eq!(target.best, Some(Way::Direct));
    let up = turn(&target.up);
    agree(up.value, break_even - RADIUS, 1e-9);
    agree(up.change, break_even - RADIUS - here, 1e-9);
    agree(
        up.presses,
        (break_even / (here + RADIUS)).ln() / 1.01_f64.ln(),
        1e-9,
    );
    assert_eq!((up.to, &up.why), (Some(Way::Dip), &Why::Cheaper));
    // Below, the floor ends it for every way.
    let down = turn(&target.down);
    agree(down.value, FLOOR, 1e-9);
    assert_eq!(down.to, None);
    assert!(matches!(&down.why, Why::Lost(not)
        if matches!(not.reasons[0], Reason::TargetUnderFloor { .. })));
    // The same tie reached by the speed: v∞ = √(2μ/r). Slower arrivals never turn it.
    let speed = lean(spec(here), KnobId::VInf);
    let up = turn(&speed.up);
    agree(up.value, (2.0 * GM / (here + RADIUS)).sqrt(), 1e-9);
    assert_eq!(up.to, Some(Way::Dip));
    assert!(matches!(speed.down, Reach::Never { to, end: End::Range } if to < 1e-5));
    // And by the target's apoapsis, for an ellipse as well: dip ties direct where the apoapsis is r*, whatever the periapsis.
    let apoapsis = lean(spec(here), KnobId::TargetApoapsis);
    agree(turn(&apoapsis.up).value, break_even - RADIUS, 1e-9);
    // The ellipse cannot be made lower than its periapsis.
    assert!(
        matches!(&apoapsis.down, Reach::Never { to, end: End::Refused(why) }
        if *to == here && why.contains("target-apoapsis"))
    );
    // From the other side.
    let back = lean(spec(20_000.0), KnobId::TargetAltitude);
    assert_eq!(back.best, Some(Way::Dip));
    let down = turn(&back.down);
    agree(down.value, break_even - RADIUS, 1e-9);
    assert_eq!(down.to, Some(Way::Direct));
    // The tie does not depend on the brake: only its bounds end dip, at the floor and, far above, at the target.
    let brake = lean(spec(20_000.0), KnobId::BrakeAltitude);
    agree(turn(&brake.down).value, FLOOR, 1e-9);
    agree(turn(&brake.up).value, 20_000.0, 1e-9);
    assert_eq!(turn(&brake.up).to, Some(Way::Direct));
    let brake = lean(spec(here), KnobId::BrakeAltitude);
    assert_eq!(brake.never(), Some((0.0, 1e9)));
    assert_eq!(brake.nearest(), None);
}

#[test]
fn slopes_are_the_derivatives() {
    // Direct into a circle: Δv = √(v² + 2μ/r) − √(μ/r).
    let radius = 6500.0 + RADIUS;
    let fast = (V_INF * V_INF + 2.0 * GM / radius).sqrt();
    let by_radius = -GM / (radius * radius * fast) + 0.5 * (GM / radius).sqrt() / radius;
    let central = |slope: Slope| match slope {
        Slope::Central(slope) => slope,
        other => panic!("{other:?}"),
    };
    let target = lean(spec(6500.0), KnobId::TargetAltitude);
    agree(central(target.cost_slope), by_radius, 1e-9);
    assert_eq!(target.crossover_slope, Slope::Central(0.0));
    let speed = lean(spec(6500.0), KnobId::VInf);
    agree(central(speed.cost_slope), V_INF / fast, 1e-9);
    // r* = 2μ/v², so dr*/dv = −4μ/v³.
    agree(
        central(speed.crossover_slope),
        -4.0 * GM / V_INF.powi(3),
        1e-9,
    );
    // A limit that does not bind has no slope, exactly.
    let cap = lean(spec(6500.0), KnobId::Cap);
    assert_eq!(cap.cost_slope, Slope::Central(0.0));
    // Dip: cost = H(q; r*) − H(q; A) + ..., H(x; Y) = √(2μ(1/x + 1/Y)), dH/dq = −μ/(q² H).
    let q = BRAKE + RADIUS;
    let (a, break_even) = (20_000.0 + RADIUS, 2.0 * GM / (V_INF * V_INF));
    let h = |y: f64| (2.0 * GM * (1.0 / q + 1.0 / y)).sqrt();
    let by_brake = -GM / (q * q) * (1.0 / h(break_even) - 1.0 / h(a));
    let brake = lean(spec(20_000.0), KnobId::BrakeAltitude);
    agree(central(brake.cost_slope), by_brake, 1e-9);
    // Where both are as cheap for every brake, the crossover does not move with it.
    let moves = central(brake.crossover_slope);
    assert!(moves.abs() < 1e-9, "{moves}");
}

#[test]
fn the_cost_of_a_start_moves_dip_by_itself_and_the_crossover_by_the_rule() {
    // Nothing below zero: both slopes from above.
    let per_start = lean(spec(20_000.0), KnobId::PerStart);
    let above = |slope: Slope| match slope {
        Slope::Above(slope) => slope,
        other => panic!("{other:?}"),
    };
    agree(above(per_start.cost_slope), 1e-3, 1e-9);
    // d ln r = X / (v_c(r*)·(1/2 − 1/√(2(1 + r*/q)))) for an extra cost X on dip (design, derived): exact as a derivative.
    let break_even = 2.0 * GM / (V_INF * V_INF);
    let q = BRAKE + RADIUS;
    let rate = (GM / break_even).sqrt() * (0.5 - 1.0 / (2.0 * (1.0 + break_even / q)).sqrt());
    agree(
        above(per_start.crossover_slope),
        1e-3 * break_even / rate,
        1e-8,
    );
    // The start pays up to the difference of the two ways.
    let case = Case::new(spec(20_000.0)).expect("sound");
    let cost = |way: Way| way.figures(case.setting()).expect("flyable").cost_km_s;
    let saves = 1e3 * (cost(Way::Direct) - cost(Way::Dip));
    agree(turn(&per_start.up).value, saves, 1e-9);
    agree(turn(&per_start.up).presses, saves, 1e-9);
    assert_eq!(turn(&per_start.up).to, Some(Way::Direct));
    assert!(matches!(
        per_start.down,
        Reach::Never {
            to: 0.0,
            end: End::Range
        }
    ));
}

#[test]
fn a_third_start_frees_the_loop() {
    let starts = lean(spec(6500.0), KnobId::MostStarts);
    assert_eq!(starts.cost_slope, Slope::Absent);
    let up = turn(&starts.up);
    assert_eq!((up.value, up.presses, up.to), (3.0, 1.0, Some(Way::Loop)));
    assert!(matches!(&up.why, Why::Freed(not)
        if matches!(not.reasons[..], [Reason::TooManyStarts { needs: 3, limit: 2 }])));
    assert!(matches!(
        starts.down,
        Reach::Never {
            to: 1.0,
            end: End::Range
        }
    ));
    // The loop through apoapsis Q ties direct where Q is r*.
    let mut three = spec(6500.0);
    three.limits.most_starts = 3;
    three.braking.loop_apoapsis = AltitudeChoice::AltitudeKm(50_000.0);
    let apoapsis = lean(three, KnobId::LoopApoapsis);
    assert_eq!(apoapsis.best, Some(Way::Loop));
    let down = turn(&apoapsis.down);
    agree(down.value, 2.0 * GM / (V_INF * V_INF) - RADIUS, 1e-9);
    assert_eq!((down.to, &down.why), (Some(Way::Direct), &Why::Cheaper));
    let up = turn(&apoapsis.up);
    agree(up.value, CAP, 1e-9);
    assert!(matches!(&up.why, Why::Lost(not)
        if matches!(not.reasons[..], [Reason::LoopOverCap { .. }])));
}

#[test]
fn propellant_ends_where_the_rocket_equation_says() {
    let (dry, aboard, isp) = (310.0, 190.0, 312.0);
    let mut with_vehicle = spec(6500.0);
    with_vehicle.vehicle = Some(VehicleSpec {
        dry_mass_kg: dry,
        propellant_kg: aboard,
        thrust_n: 110.0,
        isp_s: isp,
        steering: Steering::AgainstVelocity,
    });
    let radius = 6500.0 + RADIUS;
    let dv = (V_INF * V_INF + 2.0 * GM / radius).sqrt() - (GM / radius).sqrt();
    // m₀ (1 − exp(−Δv (1 + margin) / (Isp g₀))) (1 + residual) = aboard.
    let residual = 0.01 * defaults::POLICY.residual_percent;
    let exhaust = 1e-3 * isp * 9.806_65;
    let share = aboard / ((dry + aboard) * (1.0 + residual));
    let margin = -exhaust * (1.0 - share).ln() / dv - 1.0;
    let found = lean(with_vehicle.clone(), KnobId::Margin);
    assert_eq!(found.cost_slope, Slope::Central(0.0));
    let up = turn(&found.up);
    agree(up.value, 100.0 * margin, 1e-9);
    assert_eq!(up.to, None);
    assert!(matches!(&up.why, Why::Lost(not)
        if matches!(not.reasons[..], [Reason::PropellantShort { .. }])));
    // Thrust changes no impulsive verdict, from almost nothing to the end of its range (half of the burn counts as time, so
    // next to no thrust takes too long).
    let thrust = lean(with_vehicle, KnobId::Thrust);
    assert!(matches!(
        thrust.up,
        Reach::Never {
            to: 1e8,
            end: End::Range
        }
    ));
    assert!(matches!(&turn(&thrust.down).why, Why::Lost(not)
        if matches!(not.reasons[0], Reason::TooLong { .. })));
}

#[test]
fn what_is_symmetrical_comes_out_symmetrical() {
    let mut inclined = spec(20_000.0);
    inclined.arrival = ArrivalSpec::Asymptote {
        v_inf_km_s: V_INF,
        declination_deg: Some(0.0),
        right_ascension_deg: None,
    };
    inclined.target.plane = PlaneSpec::InclinationDeg(30.0);
    let declination = lean(inclined, KnobId::Declination);
    let (up, down) = (turn(&declination.up), turn(&declination.down));
    assert!(30.0 < up.value, "{}", up.value);
    agree(up.value, -down.value, 1e-12);
    assert_eq!(up.presses, up.value);
    assert_eq!(
        (up.to, declination.cost_slope),
        (down.to, Slope::Central(0.0))
    );
    // On the edge of the free range every further degree has to be turned: a kink.
    let mut edge = spec(6500.0);
    edge.arrival = ArrivalSpec::Asymptote {
        v_inf_km_s: V_INF,
        declination_deg: Some(30.0),
        right_ascension_deg: None,
    };
    edge.target.plane = PlaneSpec::InclinationDeg(40.0);
    let inside = lean(edge, KnobId::Inclination);
    assert_eq!(inside.cost_slope, Slope::Central(0.0));
}

#[test]
fn where_nothing_can_be_flown_the_turn_is_what_frees_a_way() {
    let target = lean(spec(40.0), KnobId::TargetAltitude);
    assert_eq!((target.best, target.cost_slope), (None, Slope::Absent));
    let up = turn(&target.up);
    agree(up.value, FLOOR, 1e-9);
    assert_eq!(up.to, Some(Way::Direct));
    assert!(matches!(&up.why, Why::Freed(not)
        if matches!(not.reasons[0], Reason::TargetUnderFloor { .. })));
    assert!(matches!(
        target.down,
        Reach::Never {
            to: 0.0,
            end: End::Range
        }
    ));
    let floor = lean(spec(40.0), KnobId::Floor);
    agree(turn(&floor.down).value, 40.0, 1e-9);
    // The floor cannot rise above the cap: the scenario refuses that, and the sentence says so.
    assert!(
        matches!(&floor.up, Reach::Never { to, end: End::Refused(why) }
        if (to / CAP - 1.0).abs() < 1e-9 && why.contains("cap"))
    );
}

/// An arrival from an orbit round a parent, everything that can be left to the program left to it.
fn open_case() -> Case {
    let mut open = spec(6500.0);
    open.body = BodySpec::Known("Moon".to_owned());
    open.arrival = ArrivalSpec::FromParentOrbit {
        periapsis_alt_km: 400.0,
        apoapsis: TransferApoapsis::AtBody,
        model: Model::ThreeBody,
        sense: None,
        departure: Departure::ParkingOrbit,
    };
    open.braking = defaults::BRAKING;
    open.limits = defaults::LIMITS;
    Case::new(open).expect("sound")
}

#[test]
fn the_short_way_to_a_setting_gives_what_the_scenario_gives() {
    let mut with_vehicle = open_case().spec().clone();
    with_vehicle.vehicle = Some(VehicleSpec {
        dry_mass_kg: 310.0,
        propellant_kg: 190.0,
        thrust_n: 110.0,
        isp_s: 312.0,
        steering: Steering::AgainstVelocity,
    });
    with_vehicle.limits.longest_burn_s = Some(4000.0);
    let case = Case::new(with_vehicle).expect("sound");
    let mut patched = 0;
    for knob in KNOBS {
        for x in [0.0, 1.5, 60.0, 117.3, 6500.0, 1e5, 1e9] {
            if !knob.range_field().allows(x) {
                continue;
            }
            if let Some(setting) = probe::patched(&case, knob.id, x) {
                let set = knob.set(&case, Value::Number(x)).expect("allowed");
                assert_eq!(&setting, set.setting(), "{} {x}", knob.name);
                patched += 1;
            }
        }
    }
    assert!(40 < patched, "{patched}");
}

#[test]
fn all_knobs_come_sorted_and_the_same_every_time() {
    let case = open_case();
    let answer = Answer::of(&case);
    let leans = all(&case, &answer);
    assert_eq!(leans, all(&case, &answer));
    let here = Here::new(&case, &answer);
    assert_eq!(leans.len(), here.knobs().count());
    let presses: Vec<f64> = leans
        .iter()
        .map(|lean| lean.nearest().map_or(f64::INFINITY, |turn| turn.presses))
        .collect();
    assert!(
        presses.windows(2).all(|pair| pair[0] <= pair[1]),
        "{presses:?}"
    );
    // What the program chose is held there, and the best way costs what it did.
    let brake = leans
        .iter()
        .find(|lean| lean.knob.id == KnobId::BrakeAltitude)
        .expect("resolved");
    assert!(brake.chosen && brake.best == answer.best);
    assert_eq!(brake.crossover_slope, Slope::Absent);
    // A transfer that stops short of the Moon is refused; its words are passed on.
    let transfer = leans
        .iter()
        .find(|lean| lean.knob.id == KnobId::TransferApoapsis)
        .expect("has a value");
    assert!(
        transfer.down.turn().is_some()
            || matches!(&transfer.down,
        Reach::Never { end: End::Refused(why), .. } if why.contains("transfer-apoapsis"))
    );
    // Every turning point is one: the verdict on its near side is the old one, on its far side the new one.
    for lean in &leans {
        for (turn, sign) in [(&lean.down, -1.0), (&lean.up, 1.0)]
            .into_iter()
            .filter_map(|(reach, sign)| reach.turn().map(|turn| (turn, sign)))
        {
            let best = |x: f64| {
                crate::study::curve::setting_at(&case, lean.knob, x)
                    .map(|setting| super::probe::Costs::ask(&setting).best)
            };
            if scale::is_whole(lean.knob) {
                continue;
            }
            // Just beyond, and before by more than the millionth that a sliver may have.
            let aside = sign * 1e-6 * lean.press;
            let before = turn.value - 1e3 * aside;
            if sign * (before - lean.from) > 0.0 {
                assert_eq!(best(before), Ok(lean.best), "{}", lean.knob.name);
            }
            if let Ok(found) = best(turn.value + aside) {
                assert_eq!(found, turn.to, "{}", lean.knob.name);
            }
        }
    }
    assert!(
        brake
            .down
            .turn()
            .is_some_and(|turn| turn.change.abs() < 1e-12)
    );
}

#[test]
fn work_that_is_no_longer_wanted_ends_at_once() {
    let case = open_case();
    let answer = Answer::of(&case);
    let here = Here::new(&case, &answer);
    let knob = by_id(KnobId::TargetAltitude);
    for limit in [0, 1, 7, 30] {
        let asked = std::cell::Cell::new(0);
        let wanted = || {
            asked.set(asked.get() + 1);
            asked.get() <= limit
        };
        assert_eq!(one_while(&here, knob, Effort::FULL, &wanted), None);
        assert_eq!(asked.get(), limit + 1);
    }
    let quick = one_while(&here, knob, Effort::QUICK, &|| true).expect("wanted");
    let full = one(&here, knob).expect("wanted");
    let values = |lean: &Lean| {
        [&lean.down, &lean.up].map(|reach| reach.turn().map(|turn| (turn.to, turn.value)))
    };
    for (quick, full) in values(&quick).iter().zip(&values(&full)) {
        match (quick, full) {
            (Some(quick), Some(full)) => {
                assert_eq!(quick.0, full.0);
                agree(quick.1, full.1, 1e-9);
            }
            (quick, full) => assert_eq!(quick, full),
        }
    }
}

#[test]
fn the_walk_meets_its_end_on_every_scale() {
    for (scale, from, end) in [
        (Scale::Radius(1737.4), 6500.0, 1e9),
        (Scale::Radius(1737.4), 6500.0, 0.0),
        (Scale::Log, 110.0, 1.1e-4),
        (Scale::Soft(0.1), 0.0, 10_000.0),
        (Scale::Soft(0.1), 60.0, 0.0),
        (Scale::Angle, 57.0, 180.0),
        (Scale::Angle, 57.0, 0.0),
        (Scale::Whole, 2.0, 8.0),
        (Scale::Whole, 2.0, 1.0),
    ] {
        let values: Vec<f64> = scale.walk(from, end, 0.004, 1.1).collect();
        assert_eq!(values.last(), Some(&end), "{scale:?}");
        let away = |pair: &[f64]| (pair[1] - pair[0]).signum() == (end - from).signum();
        assert!(values.windows(2).all(away), "{scale:?} {values:?}");
        assert!(values.len() < 90, "{scale:?} {}", values.len());
    }
    assert_eq!(Scale::Log.walk(5.0, 5.0, 0.004, 1.1).count(), 0);
}
