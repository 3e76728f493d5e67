//! The exact identities of the ideal model, and the books that must balance. None of them is used by the engine.

use crate::support::{agree, open_setting};
use stoop::arrival::{Choice, Plan, PlaneDemand, Setting, Way};
use stoop::physics::conic;
use stoop::physics::vehicle::Vehicle;
use stoop::scenario::file;
use stoop::study::landmarks::{self, CrossoverKind};
use stoop::study::{Answer, check, verdict};

const GM: f64 = 4902.8;
const V_INF: f64 = 0.85;

fn break_even() -> f64 {
    2.0 * GM / (V_INF * V_INF)
}

fn cost(way: Way, setting: &Setting) -> f64 {
    way.plan(setting).expect("flyable").dv_km_s
}

/// The one function behind all ways (design notes, section 1): H(q;r*) − H(q;Y) + H(p;Y) − v_p(p,A), H(x;Y) = √(2μ(1/x + 1/Y)),
/// with Y = r* for direct, A for dip, Q for loop.
fn ideal(q: f64, p: f64, a: f64, y: f64) -> f64 {
    let h = |x: f64, y: f64| (2.0 * GM * (1.0 / x + 1.0 / y)).sqrt();
    h(q, break_even()) - h(q, y) + h(p, y) - (2.0 * GM * a / (p * (p + a))).sqrt()
}

/// Textbook two-body mechanics (vis-viva at both apsides): the two apsis speeds of an ellipse add to √(2μ(1/q + 1/A)).
#[test]
fn apsis_speeds_add_up() {
    for q in [1.0, 1738.0, 5000.0, 1e6] {
        for stretch in [1.0, 1.0 + 1e-9, 1.7, 40.0, 1e6] {
            let apoapsis = q * stretch;
            let sum = conic::periapsis_speed_km_s(GM, q, apoapsis)
                + conic::apoapsis_speed_km_s(GM, q, apoapsis);
            agree(sum, (2.0 * GM * (1.0 / q + 1.0 / apoapsis)).sqrt(), 1e-15);
        }
    }
}

#[test]
fn every_way_is_the_one_function_of_its_far_radius() {
    for (p, a) in [
        (2000.0, 2000.0),
        (4000.0, 9000.0),
        (12_000.0, 30_000.0),
        (40_000.0, 40_000.0),
    ] {
        for q in [1800.0, 1999.0, 0.5 * p, 0.999 * p] {
            if p < q {
                continue;
            }
            for loop_apoapsis in [1.001 * a, 3.0 * a, 50.0 * a] {
                let setting = Setting {
                    brake: Choice::Radius(q),
                    loop_apoapsis: Choice::Radius(loop_apoapsis),
                    ..open_setting(GM, V_INF, p, a)
                };
                agree(
                    cost(Way::Direct, &setting),
                    ideal(q, p, a, break_even()),
                    1e-12,
                );
                agree(cost(Way::Dip, &setting), ideal(q, p, a, a), 1e-12);
                agree(
                    cost(Way::Loop, &setting),
                    ideal(q, p, a, loop_apoapsis),
                    1e-12,
                );
                // The cheapest is the one with the largest of the three radii.
                let ranked = stoop::study::answer::ask(&setting);
                let cheapest =
                    stoop::study::answer::cheapest(ranked.iter().filter_map(|(way, plan)| {
                        plan.as_ref()
                            .ok()
                            .map(|plan| (*way, plan.cost_km_s, plan.starts()))
                    }));
                let expected = if break_even().max(a) < loop_apoapsis {
                    Way::Loop
                } else if break_even() < a {
                    Way::Dip
                } else {
                    Way::Direct
                };
                assert_eq!(cheapest, Some(expected), "p {p}, A {a}, q {q}");
            }
        }
    }
}

#[test]
fn dip_ties_direct_exactly_when_the_apoapsis_is_at_the_break_even_radius() {
    let radius = break_even();
    for p in [2000.0, 5000.0, 9000.0, 0.999 * radius, radius] {
        for q in [1500.0, 1800.0, 1999.0, 0.4 * p, 0.9 * p] {
            if p <= q {
                continue;
            }
            let at = |apoapsis: f64| Setting {
                brake: Choice::Radius(q),
                ..open_setting(GM, V_INF, p, apoapsis)
            };
            let tie = at(radius);
            agree(cost(Way::Dip, &tie), cost(Way::Direct, &tie), 1e-12);
            // Both then cost the target's apoapsis speed.
            agree(
                cost(Way::Dip, &tie),
                conic::apoapsis_speed_km_s(GM, p, radius),
                1e-12,
            );
            if p < 0.99 * radius {
                let under = at(0.99 * radius);
                assert!(cost(Way::Direct, &under) < cost(Way::Dip, &under));
            }
            let over = at(1.01 * radius);
            assert!(cost(Way::Dip, &over) < cost(Way::Direct, &over));
        }
    }
}

#[test]
fn what_dip_costs_over_direct_falls_strictly_as_the_target_apoapsis_grows() {
    let (q, p) = (1837.4, 6000.0);
    let mut before = f64::INFINITY;
    for k in 0..60 {
        let setting = Setting {
            brake: Choice::Radius(q),
            ..open_setting(GM, V_INF, p, p * 1.2_f64.powi(k))
        };
        let now = cost(Way::Dip, &setting) - cost(Way::Direct, &setting);
        assert!(now < before, "{k}: {now} {before}");
        before = now;
    }
}

#[test]
fn loop_ties_direct_exactly_when_its_apoapsis_is_at_the_break_even_radius() {
    let radius = break_even();
    for (p, a) in [(2000.0, 2000.0), (4000.0, 9000.0), (10_000.0, 10_000.0)] {
        for q in [1500.0, 1800.0, 1950.0, 0.99 * p] {
            let at = |apoapsis: f64| Setting {
                brake: Choice::Radius(q),
                loop_apoapsis: Choice::Radius(apoapsis),
                ..open_setting(GM, V_INF, p, a)
            };
            agree(
                cost(Way::Loop, &at(radius)),
                cost(Way::Direct, &at(radius)),
                1e-12,
            );
            assert!(cost(Way::Direct, &at(0.98 * radius)) < cost(Way::Loop, &at(0.98 * radius)));
            assert!(cost(Way::Loop, &at(1.02 * radius)) < cost(Way::Direct, &at(1.02 * radius)));
        }
    }
}

#[test]
fn the_cost_falls_as_the_loop_grows_and_tends_to_its_limit() {
    let (q, p) = (1837.4, 6000.0);
    let mut before = f64::INFINITY;
    for k in 0..60 {
        let apoapsis = 6000.0 * 1.3_f64.powi(k);
        let setting = Setting {
            brake: Choice::Radius(q),
            loop_apoapsis: Choice::Radius(apoapsis),
            ..open_setting(GM, V_INF, p, p)
        };
        let now = cost(Way::Loop, &setting);
        assert!(now < before, "{apoapsis}: {now} {before}");
        before = now;
    }
    let limit = (V_INF * V_INF + 2.0 * GM / q).sqrt() - (2.0 * GM / q).sqrt()
        + (2.0 * GM / p).sqrt()
        - (GM / p).sqrt();
    let setting = Setting {
        brake: Choice::Radius(q),
        loop_apoapsis: Choice::Radius(1e15),
        limits: stoop::arrival::Limits {
            cap_radius_km: 1e16,
            ..open_setting(GM, V_INF, p, p).limits
        },
        ..open_setting(GM, V_INF, p, p)
    };
    // The remainder falls with 1/√Q of the two apsis speeds: 1e-5 relative at 1e15 km would be generous.
    agree(cost(Way::Loop, &setting), limit, 1e-7);
}

#[test]
fn cheapest_direct_orbit_has_its_apoapsis_at_the_break_even_radius() {
    for e in [0.0_f64, 0.2, 0.5, 0.8] {
        let ratio = (1.0 + e) / (1.0 - e);
        let mut setting = open_setting(GM, V_INF, 2000.0, 2000.0 * ratio);
        setting.limits.floor_radius_km = 100.0;
        setting.limits.cap_radius_km = 1e7;
        let found = landmarks::landmarks(&setting).cheapest.expect("flyable");
        agree(found.radius_km * ratio, break_even(), 1e-10);
        agree(found.dv_km_s, V_INF * ((1.0 - e) / 2.0).sqrt(), 1e-12);
    }
}

#[test]
fn cheapest_altitude_and_crossover_coincide_without_anything_that_parts_them() {
    let mut setting = open_setting(GM, V_INF, 2000.0, 2000.0);
    setting.brake = Choice::Radius(1837.4);
    setting.limits.floor_radius_km = 1837.4;
    setting.limits.cap_radius_km = 1e7;
    setting.limits.most_starts = 2;
    let marks = landmarks::landmarks(&setting);
    assert_eq!(marks.crossovers.len(), 1);
    agree(marks.crossovers[0].radius_km, break_even(), 1e-12);
    agree(
        marks.cheapest.expect("flyable").radius_km,
        break_even(),
        1e-10,
    );
}

/// With the brake left open dip degenerates to direct below the break-even radius (q = p ties exactly), so the crossover is where dip
/// leaves that tie, wherever floor, cap and scan nodes lie.
#[test]
fn the_crossover_is_at_the_break_even_radius_with_the_brake_left_open_too() {
    for (floor, cap) in [
        (1837.4, 6e4),
        (1837.4, 7e4),
        (1837.4, 1e5),
        (1837.4, 1e6),
        (300.0, 5e5),
        (9000.0, 2e4),
    ] {
        let mut setting = open_setting(GM, V_INF, floor, floor);
        setting.brake = Choice::Best;
        setting.limits.floor_radius_km = floor;
        setting.limits.cap_radius_km = cap;
        setting.limits.most_starts = 2;
        let marks = landmarks::landmarks(&setting);
        assert_eq!(marks.crossovers.len(), 1, "floor {floor}, cap {cap}");
        let found = marks.crossovers[0];
        assert_eq!(
            (found.below, found.above, found.kind),
            (Way::Direct, Way::Dip, CrossoverKind::Tie)
        );
        // Costs that differ by less than 1e-13 count as the same, and dip leaves the tie with a slope of about a tenth.
        agree(found.radius_km, break_even(), 1e-11);
    }
}

/// At the top of the range a loop up to the cap is a dip: a tie that is no more a crossover than r = q is at the bottom.
#[test]
fn the_ends_of_the_range_are_no_crossovers() {
    for reach in [1.2, 2.0, 10.0] {
        let mut setting = open_setting(GM, V_INF, 5000.0, 5000.0);
        setting.brake = Choice::Best;
        setting.loop_apoapsis = Choice::Best;
        setting.limits.floor_radius_km = 1837.4;
        setting.limits.cap_radius_km = reach * break_even();
        // The cap lies above the break-even radius, so the loop is cheapest for every target.
        let found = landmarks::landmarks(&setting).crossovers;
        assert!(found.is_empty(), "{reach}: {found:?}");
        setting.loop_apoapsis = Choice::Radius(setting.limits.cap_radius_km);
        setting.brake = Choice::Radius(1837.4);
        let found = landmarks::landmarks(&setting).crossovers;
        assert!(found.is_empty(), "{reach}: {found:?}");
    }
}

/// A minimum close to an end of the range is still a minimum: nothing holds it there.
#[test]
fn the_cheapest_altitude_is_at_a_border_only_when_the_border_holds_it() {
    let radius = break_even();
    for (floor, cap, held) in [
        (0.5, 4.0, false),
        (0.99, 4.0, false),
        (0.999, 4.0, false),
        (0.5, 1.01, false),
        (0.5, 1.001, false),
        (1.01, 4.0, true),
        (0.5, 0.99, true),
    ] {
        let mut setting = open_setting(GM, V_INF, radius, radius);
        setting.limits.floor_radius_km = floor * radius;
        setting.limits.cap_radius_km = cap * radius;
        setting.limits.most_starts = 1;
        let found = landmarks::landmarks(&setting).cheapest.expect("flyable");
        assert_eq!(found.at_border, held, "floor {floor}, cap {cap}: {found:?}");
        // Without the finer stencil the place is good to 1e-6 (values compared), the cost to rounding.
        agree(
            found.radius_km,
            radius.clamp(floor * radius, cap * radius),
            1e-6,
        );
    }
}

#[test]
fn a_small_extra_cost_moves_the_crossover_by_the_first_order_rule() {
    // d ln r = X / (v_c(r*) (1/2 − 1/√(2(1 + r*/q)))), derived; design notes section 1.
    for q in [1837.4, 6000.0] {
        let mut setting = open_setting(GM, V_INF, 2.0 * q, 2.0 * q);
        setting.brake = Choice::Radius(q);
        setting.limits.floor_radius_km = q;
        setting.limits.cap_radius_km = 1e7;
        setting.limits.most_starts = 2;
        setting.policy.per_start_km_s = 1e-7;
        let found = landmarks::landmarks(&setting).crossovers[0].radius_km;
        let radius = break_even();
        let slope = (GM / radius).sqrt() * (0.5 - 1.0 / (2.0 * (1.0 + radius / q)).sqrt());
        agree((found / radius).ln(), 1e-7 / slope, 1e-4);
    }
}

/// Flies a plan as vectors: each burn turns and changes the velocity, an independent integrator flies each coast to the next burn.
///
/// Energy and momentum are held along every coast, the orbits claimed are rebuilt, the plane ends turned by the plan's turn, and burns
/// and coasts sum to the totals.
fn fly(setting: &Setting, plan: &Plan) {
    let gm = setting.gm;
    let first = plan.burns.first().expect("a burn");
    let arrival_speed = (plan.v_inf_km_s.powi(2) + 2.0 * gm / first.at_radius_km).sqrt();
    let mut state = [first.at_radius_km, 0.0, 0.0, 0.0, arrival_speed, 0.0];
    let arriving = momentum(&state);
    let (mut total, mut coasts) = (0.0, 0.0);
    for (k, burn) in plan.burns.iter().enumerate() {
        // Turn the velocity about the line of apsides, which is x; the sense is the same in space at both apsides.
        let (r, before) = (state[0], [state[4], state[5]]);
        agree(r.abs(), burn.at_radius_km, 1e-9);
        agree(before[0].hypot(before[1]), burn.speed_before_km_s, 1e-9);
        let ratio = burn.speed_after_km_s / burn.speed_before_km_s;
        let (sine, cosine) = burn.turn_rad.sin_cos();
        let after = [
            ratio * (before[0] * cosine - before[1] * sine),
            ratio * (before[0] * sine + before[1] * cosine),
        ];
        agree(
            (after[0] - before[0]).hypot(after[1] - before[1]),
            burn.dv_km_s,
            1e-9,
        );
        total += burn.dv_km_s;
        state = [r, 0.0, 0.0, 0.0, after[0], after[1]];
        let orbit = burn.orbit_after;
        let expected = (2.0 * gm * orbit.periapsis_km * orbit.apoapsis_km
            / (orbit.periapsis_km + orbit.apoapsis_km))
            .sqrt();
        agree(energy(gm, &state), orbit.energy_km2_s2(gm), 1e-9);
        agree(length(momentum(&state)), expected, 1e-9);
        if k + 1 == plan.starts() {
            break;
        }
        let half = 0.5 * orbit.period_s(gm);
        let (held_energy, held_momentum) = (energy(gm, &state), length(momentum(&state)));
        let states = integrate(gm, state, half);
        for state in &states {
            // At apoapsis kinetic and potential energy nearly cancel, so the scale is theirs at the start.
            let scale = 0.5 * length([state[3], state[4], state[5]]).powi(2)
                + gm / length([state[0], state[1], state[2]]);
            assert!((energy(gm, state) - held_energy).abs() < 1e-10 * scale);
            agree(length(momentum(state)), held_momentum, 1e-10);
        }
        state = *states.last().expect("an end state");
        coasts += half;
        // Half a revolution later: on the line of apsides again, moving across it.
        assert!(
            state[1].hypot(state[2]) < 1e-7 * state[0].abs(),
            "{state:?}"
        );
        assert!(
            state[3].abs() < 1e-7 * state[4].hypot(state[5]),
            "{state:?}"
        );
        (state[1], state[2], state[3]) = (0.0, 0.0, 0.0);
    }
    let leaving = momentum(&state);
    let cosine = dot(arriving, leaving) / (length(arriving) * length(leaving));
    let sine = length(cross(arriving, leaving)) / (length(arriving) * length(leaving));
    assert!((sine.atan2(cosine) - plan.turn_rad).abs() < 1e-12);
    agree(plan.dv_km_s, total, 1e-15);
    let burning: f64 = plan.burns.iter().filter_map(|burn| burn.duration_s).sum();
    if plan.starts() == 1 {
        assert_eq!(plan.duration_s, 0.5 * burning);
    } else {
        agree(plan.duration_s, coasts + 0.5 * burning, 1e-14);
    }
}

fn dot(a: [f64; 3], b: [f64; 3]) -> f64 {
    a[0] * b[0] + a[1] * b[1] + a[2] * b[2]
}

fn cross(a: [f64; 3], b: [f64; 3]) -> [f64; 3] {
    [
        a[1] * b[2] - a[2] * b[1],
        a[2] * b[0] - a[0] * b[2],
        a[0] * b[1] - a[1] * b[0],
    ]
}

fn length(a: [f64; 3]) -> f64 {
    dot(a, a).sqrt()
}

fn momentum(s: &[f64; 6]) -> [f64; 3] {
    cross([s[0], s[1], s[2]], [s[3], s[4], s[5]])
}

fn energy(gm: f64, s: &[f64; 6]) -> f64 {
    0.5 * dot([s[3], s[4], s[5]], [s[3], s[4], s[5]]) - gm / length([s[0], s[1], s[2]])
}

/// Two-body motion by the `ivp` crate (general-purpose, DOP853), a route that shares nothing with the engine: every step taken.
fn integrate(gm: f64, start: [f64; 6], seconds: f64) -> Vec<[f64; 6]> {
    use ivp::prelude::*;
    struct TwoBody(f64);
    impl FirstOrderSystem for TwoBody {
        fn derivative(&self, _: f64, y: &[f64], dydx: &mut [f64]) {
            let r = length([y[0], y[1], y[2]]);
            let pull = self.0 / (r * r * r);
            for k in 0..3 {
                dydx[k] = y[k + 3];
                dydx[k + 3] = -pull * y[k];
            }
        }
    }
    let solution = Ivp::first_order(&TwoBody(gm), 0.0, seconds, &start)
        .method(Method::DOP853)
        .rtol(1e-13)
        .atol(1e-13)
        .solve()
        .expect("integrates");
    solution
        .y
        .iter()
        .map(|y| std::array::from_fn(|k| y[k]))
        .collect()
}

#[test]
fn burns_rebuild_orbits_and_an_integrator_flies_the_coasts() {
    let engine = Vehicle {
        dry_mass_kg: 310.0,
        propellant_kg: 1e5,
        thrust_n: 110.0,
        isp_s: 312.0,
    };
    // Moon, Mars and Jupiter (DE440 constants); a circle, an ellipse, and a turn from none to most of a half circle.
    for (gm, q, v_inf) in [
        (GM, 1837.4, V_INF),
        (42_828.373_62, 3696.19, 2.65),
        (126_686_531.9, 75_000.0, 5.6),
    ] {
        for stretch in [1.0, 6.0] {
            for turn in [0.0_f64, 5.0, 60.0, 150.0] {
                let p = 3.0 * q;
                let mut setting = open_setting(gm, v_inf, p, p * stretch);
                setting.brake = Choice::Radius(q);
                setting.loop_apoapsis = Choice::Radius(30.0 * p);
                if turn != 0.0 {
                    setting.plane = PlaneDemand::Turn(turn.to_radians());
                }
                if turn == 5.0 {
                    setting.vehicle = Some(engine);
                }
                // Steps divides lasting burns only; tests/it/lasting.rs flies it.
                for entry in Way::TABLE.iter().filter(|entry| entry.way != Way::Steps) {
                    fly(&setting, &entry.way.plan(&setting).expect("flyable"));
                }
            }
        }
    }
}

/// `stoop check` recomputes an answer by other routes; every figure of every shipped scenario agrees, and so does a parent-orbit
/// arrival whose brake is held at the floor.
#[test]
fn an_answer_agrees_with_its_own_other_routes() {
    let held = FLOOR_HELD.iter().map(|(name, text)| (*name, *text));
    for (name, text) in file::SHIPPED.iter().copied().chain(held) {
        let case = file::parse(name, text)
            .unwrap_or_else(|faults| panic!("{name}: {faults}"))
            .case;
        let checks = check::check(&case, &Answer::of(&case));
        assert!(3 < checks.len(), "{name}");
        for check in checks {
            assert!(check.passed(), "{name}: {check:?}");
        }
    }
}

/// Arrivals at the Moon with the brake at the floor, so that the one v∞ of the ideal ties meets the v∞ that depends on the periapsis.
const FLOOR_HELD: [(&str, &str); 3] = [
    (
        "three-body",
        "(format: 1, body: Known(\"Moon\"), arrival: FromParentOrbit(periapsis_alt_km: 400.0, apoapsis: AtBody, model: ThreeBody), target: (shape: Circular(altitude_km: 6500.0)), braking: (brake: AltitudeKm(100.0), loop_apoapsis: Best), limits: (floor_alt_km: 100.0))",
    ),
    (
        "patched",
        "(format: 1, body: Known(\"Moon\"), arrival: FromParentOrbit(periapsis_alt_km: 400.0, apoapsis: AtBody, model: Patched), target: (shape: Circular(altitude_km: 6500.0)), braking: (brake: AltitudeKm(100.0), loop_apoapsis: Best), limits: (floor_alt_km: 100.0))",
    ),
    (
        "given, turned",
        "(format: 1, body: Known(\"Moon\"), arrival: Asymptote(v_inf_km_s: 0.85), target: (shape: Circular(altitude_km: 6500.0), plane_change_deg: 12.0), braking: (brake: AltitudeKm(100.0), loop_apoapsis: AltitudeKm(20000.0)), limits: (floor_alt_km: 100.0))",
    ),
];

/// What the dependence of v∞ on the periapsis moves is weighed for a held brake as it is for an open one.
#[test]
fn a_varying_v_inf_is_weighed_with_a_held_brake_too() {
    let shift = |brake: &str| {
        let text = FLOOR_HELD[0].1.replace("AltitudeKm(100.0)", brake);
        let case = file::parse("weighed", &text).expect("sound").case;
        let answer = Answer::of(&case);
        verdict::verdict(case.setting(), &answer)
            .shifts
            .into_iter()
            .find(|shift| shift.cause == verdict::Cause::SpeedVaries)
            .and_then(|shift| shift.cost_km_s)
            .expect("both exist")
    };
    // Best brakes at the floor here, so the two scenarios are one.
    let (held, open) = (shift("AltitudeKm(100.0)"), shift("Best"));
    assert!(open.abs() > 1e-3, "{open}");
    agree(held, open, 1e-9);
}

#[test]
fn masses_close() {
    let vehicle = Vehicle {
        dry_mass_kg: 310.0,
        propellant_kg: 190.0,
        thrust_n: 110.0,
        isp_s: 312.0,
    };
    let mut setting = open_setting(GM, V_INF, 6000.0, 6000.0);
    setting.brake = Choice::Radius(1837.4);
    setting.loop_apoapsis = Choice::Radius(50_000.0);
    setting.vehicle = Some(vehicle);
    let impulsive = Way::TABLE.iter().filter(|entry| entry.way != Way::Steps);
    for entry in impulsive {
        let plan = entry.way.plan(&setting).expect("flyable");
        let used = plan.consumption.expect("a vehicle is given");
        let burned: f64 = plan
            .burns
            .iter()
            .filter_map(|burn| burn.propellant_kg)
            .sum();
        agree(burned, used.propellant_kg, 1e-13);
        agree(
            used.final_mass_kg + used.propellant_kg,
            vehicle.start_mass_kg(),
            1e-15,
        );
        agree(
            used.final_mass_kg,
            500.0 * (-plan.dv_km_s / vehicle.exhaust_speed_km_s()).exp(),
            1e-13,
        );
        let times: f64 = plan.burns.iter().filter_map(|burn| burn.duration_s).sum();
        let coasts: f64 = plan
            .burns
            .iter()
            .take(plan.starts() - 1)
            .map(|burn| 0.5 * burn.orbit_after.period_s(GM))
            .sum();
        agree(plan.duration_s, coasts + 0.5 * times, 1e-13);
        // Figures and plan are one computation.
        let figures = entry.way.figures(&setting).expect("flyable");
        assert_eq!(
            (figures.dv_km_s, figures.duration_s, figures.consumption),
            (plan.dv_km_s, plan.duration_s, plan.consumption)
        );
    }
}

#[test]
fn aiming_conserves_momentum() {
    let setting = open_setting(GM, V_INF, 3000.0, 9000.0);
    let plan = Way::Direct.plan(&setting).expect("flyable");
    agree(
        plan.aiming_radius_km * V_INF,
        3000.0 * conic::hyperbola_speed_km_s(GM, V_INF * V_INF, 3000.0),
        1e-14,
    );
}

/// Dip becomes the cheapest way and meets the time limit within one cell of the scan: both changes are reported.
#[test]
fn a_crossover_and_the_limit_right_after_it_are_both_seen() {
    let mut setting = open_setting(1.0, 3.293e-5_f64.sqrt(), 1966.17, 24_907.04);
    setting.brake = Choice::Radius(1005.0);
    setting.loop_apoapsis = Choice::Best;
    setting.limits.floor_radius_km = 1005.0;
    setting.limits.cap_radius_km = 4_981_408.0;
    setting.limits.longest_s = 24_023_197.8;
    setting.limits.most_starts = 2;
    setting.policy.per_start_km_s = 9.7568e-5;
    let found = landmarks::landmarks(&setting).crossovers;
    let ways: Vec<_> = found
        .iter()
        .map(|crossover| (crossover.below, crossover.above))
        .collect();
    assert_eq!(
        ways,
        [(Way::Direct, Way::Dip), (Way::Dip, Way::Direct)],
        "{found:?}"
    );
    assert!((found[0].radius_km - 5969.0).abs() < 5.0, "{found:?}");
}
