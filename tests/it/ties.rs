//! The exact identities of the ideal model, and the books that must balance. None of them is used by the engine.

use crate::support::{agree, open_setting};
use stoop::arrival::{Choice, Plan, Setting, Way};
use stoop::physics::conic;
use stoop::physics::vehicle::Vehicle;
use stoop::study::landmarks;

const GM: f64 = 4902.8;
const V_INF: f64 = 0.85;

fn break_even() -> f64 {
    2.0 * GM / (V_INF * V_INF)
}

fn cost(way: Way, setting: &Setting) -> f64 {
    way.plan(setting).expect("flyable").dv_km_s
}

#[test]
fn dip_ties_direct_exactly_when_the_apoapsis_is_at_the_break_even_radius() {
    let radius = break_even();
    for p in [2000.0, 5000.0, 9000.0, radius] {
        for q in [1800.0, 1999.0, 1850.0] {
            let at = |apoapsis: f64| Setting {
                brake: Choice::Radius(q),
                ..open_setting(GM, V_INF, p, apoapsis)
            };
            let tie = at(radius);
            agree(cost(Way::Dip, &tie), cost(Way::Direct, &tie), 1e-12);
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
fn loop_ties_direct_exactly_when_its_apoapsis_is_at_the_break_even_radius() {
    let radius = break_even();
    for (p, a) in [(2000.0, 2000.0), (4000.0, 9000.0), (10_000.0, 10_000.0)] {
        for q in [1800.0, 1950.0] {
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

/// The burns of a plan as states: each burn rebuilds the orbit it claims, and an independent integrator flies each coast.
fn fly(plan: &Plan) {
    let mut total = 0.0;
    for (k, burn) in plan.burns.iter().enumerate() {
        total += burn.dv_km_s;
        let (r, v) = (burn.at_radius_km, burn.speed_after_km_s);
        let energy = 0.5 * v * v - GM / r;
        agree(energy, burn.orbit_after.energy_km2_s2(GM), 1e-12);
        let momentum = r * v;
        let orbit = burn.orbit_after;
        let expected = (2.0 * GM * orbit.periapsis_km * orbit.apoapsis_km
            / (orbit.periapsis_km + orbit.apoapsis_km))
            .sqrt();
        agree(momentum, expected, 1e-12);
        let Some(next) = plan.burns.get(k + 1) else {
            continue;
        };
        let half = 0.5 * orbit.period_s(GM);
        let state = integrate([r, 0.0, 0.0, v], half);
        // Half a revolution later: opposite side, at the next burn's radius, with its speed before.
        agree(state[0], -next.at_radius_km, 1e-8);
        assert!(state[1].abs() < 1e-6 * next.at_radius_km, "{}", state[1]);
        agree(state[2].hypot(state[3]), next.speed_before_km_s, 1e-8);
        let energy_there =
            0.5 * (state[2] * state[2] + state[3] * state[3]) - GM / state[0].hypot(state[1]);
        agree(energy_there, energy, 1e-8);
    }
    agree(plan.dv_km_s, total, 1e-15);
}

/// Two-body motion by the `ivp` crate (general-purpose, DOP853), a route that shares nothing with the engine.
fn integrate(start: [f64; 4], seconds: f64) -> [f64; 4] {
    use ivp::prelude::*;
    struct TwoBody;
    impl FirstOrderSystem for TwoBody {
        fn derivative(&self, _: f64, y: &[f64], dydx: &mut [f64]) {
            let r3 = (y[0] * y[0] + y[1] * y[1]).powf(1.5);
            dydx[0] = y[2];
            dydx[1] = y[3];
            dydx[2] = -GM * y[0] / r3;
            dydx[3] = -GM * y[1] / r3;
        }
    }
    let solution = Ivp::first_order(&TwoBody, 0.0, seconds, &start)
        .method(Method::DOP853)
        .rtol(1e-12)
        .atol(1e-12)
        .solve()
        .expect("integrates");
    let last = solution.y.last().expect("an end state");
    [last[0], last[1], last[2], last[3]]
}

#[test]
fn burns_rebuild_orbits_and_an_integrator_flies_the_coasts() {
    for (p, a) in [(6000.0, 6000.0), (4000.0, 20_000.0)] {
        let mut setting = open_setting(GM, V_INF, p, a);
        setting.brake = Choice::Radius(1837.4);
        setting.loop_apoapsis = Choice::Radius(50_000.0);
        for entry in Way::TABLE {
            fly(&entry.way.plan(&setting).expect("flyable"));
        }
    }
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
    for entry in Way::TABLE {
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

#[test]
fn the_crossover_is_where_the_ways_tie_also_with_the_brake_left_open() {
    for cap in [60_000.0, 100_000.0, 1e6] {
        let mut setting = open_setting(GM, V_INF, 2000.0, 2000.0);
        setting.brake = Choice::Best;
        setting.limits.floor_radius_km = 1837.4;
        setting.limits.cap_radius_km = cap;
        setting.limits.most_starts = 2;
        let marks = landmarks::landmarks(&setting);
        assert_eq!(marks.crossovers.len(), 1, "{cap}");
        agree(marks.crossovers[0].radius_km, break_even(), 1e-9);
    }
}

#[test]
fn the_cheapest_altitude_just_above_the_floor_is_not_taken_for_held_by_it() {
    let mut setting = open_setting(GM, V_INF, 20_000.0, 20_000.0);
    setting.limits.floor_radius_km = break_even() / 1.01;
    setting.limits.cap_radius_km = 1e6;
    let found = landmarks::landmarks(&setting).cheapest.expect("flyable");
    assert!(!found.at_border);
    agree(found.radius_km, break_even(), 1e-6);
}
