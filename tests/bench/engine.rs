//! How fast the engine is. `cargo bench`; quote medians, machines are noisy.

use divan::{Bencher, black_box};
use stoop::arrival::{Burns, Choice, Limits, Passes, PlaneDemand, Policy, Setting, Way};
use stoop::physics::conic::Orbit;
use stoop::physics::transfer::{self, Approach, ParentTransfer, TransferInput};
use stoop::report::plot::Glyphs;
use stoop::scenario::file;
use stoop::study::curve::{self, Axis};
use stoop::study::knob::{KnobId, by_id};
use stoop::study::{Answer, Case, landmarks, verdict};
use stoop::tui::model::Model;
use stoop::tui::theme::Theme;

fn main() {
    divan::main();
}

/// A lunar arrival with room for every way.
fn setting(turn_deg: f64) -> Setting {
    Setting {
        gm: 4902.8,
        body_radius_km: 1737.4,
        approach: Approach::Given(0.85 * 0.85),
        target: Orbit {
            periapsis_km: 14_000.0,
            apoapsis_km: 14_000.0,
        },
        plane: if turn_deg == 0.0 {
            PlaneDemand::Free
        } else {
            PlaneDemand::Turn(turn_deg.to_radians())
        },
        brake: Choice::Radius(1837.4),
        loop_apoapsis: Choice::Radius(59_737.4),
        limits: Limits {
            floor_radius_km: 1797.4,
            cap_radius_km: 60_000.0,
            longest_s: 60.0 * 86_400.0,
            most_starts: 4,
            longest_burn_s: f64::INFINITY,
        },
        vehicle: None,
        burns: Burns::Impulsive,
        passes: Passes::Best,
        policy: Policy {
            margin: 0.05,
            per_start_km_s: 0.0,
            residual: 0.02,
        },
        remembered: None,
    }
}

/// Turns of the plane, deg.
const TURNS: [f64; 2] = [0.0, 28.5];

mod point {
    use super::*;

    #[divan::bench(args = TURNS, sample_size = 1000)]
    fn direct(bencher: Bencher, turn: f64) {
        let setting = setting(turn);
        bencher.bench_local(|| Way::Direct.figures(black_box(&setting)));
    }

    #[divan::bench(args = TURNS, sample_size = 1000)]
    fn dip(bencher: Bencher, turn: f64) {
        let setting = setting(turn);
        bencher.bench_local(|| Way::Dip.figures(black_box(&setting)));
    }

    #[divan::bench(args = TURNS, sample_size = 1000, name = "loop")]
    fn looped(bencher: Bencher, turn: f64) {
        let setting = setting(turn);
        bencher.bench_local(|| Way::Loop.figures(black_box(&setting)));
    }

    #[divan::bench(args = TURNS, sample_size = 1000)]
    fn loop_plan_with_burns(bencher: Bencher, turn: f64) {
        let setting = setting(turn);
        bencher.bench_local(|| Way::Loop.plan(black_box(&setting)));
    }

    #[divan::bench(args = TURNS, sample_size = 1000)]
    fn loop_best_brake_and_apoapsis(bencher: Bencher, turn: f64) {
        let setting = Setting {
            brake: Choice::Best,
            loop_apoapsis: Choice::Best,
            ..setting(turn)
        };
        bencher.bench_local(|| Way::Loop.figures(black_box(&setting)));
    }
}

mod arc {
    use super::*;
    use stoop::physics::thrust_arc::{Capture, Pointing};
    use stoop::physics::vehicle::Vehicle;

    /// A small engine at the Moon: a burn of 37 minutes.
    fn capture() -> Capture {
        Capture {
            gm: 4902.8,
            v_inf_sq: 0.85 * 0.85,
            vehicle: Vehicle {
                dry_mass_kg: 60.0,
                propellant_kg: 90.0,
                thrust_n: 22.0,
                isp_s: 220.0,
            },
            pointing: Pointing::AgainstVelocity,
            apoapsis_km: 10_000.0,
        }
    }

    #[divan::bench]
    fn to_shut_off(bencher: Bencher) {
        let capture = capture();
        bencher.bench_local(|| black_box(&capture).with_lead(1837.4, 1230.0));
    }

    #[divan::bench]
    fn best_ignition(bencher: Bencher) {
        let capture = capture();
        bencher.bench_local(|| black_box(&capture).best_lead(1837.4));
    }

    #[divan::bench]
    fn best_ignition_with_periapsis_held(bencher: Bencher) {
        let capture = capture();
        bencher.bench_local(|| black_box(&capture).held(1837.4));
    }
}

/// Burns that hold the orbit they leave: the three cases that `finite.py` computes with scipy.
mod held {
    use super::*;
    use stoop::physics::conic;
    use stoop::physics::held_burn::{Engine, Start, Steering, Task};

    struct Held {
        gm: f64,
        v_inf: f64,
        goal: (f64, f64),
        engine: (f64, f64, f64),
        steering: Steering,
    }

    fn solve(bencher: Bencher, held: Held) {
        let v_inf_sq = held.v_inf * held.v_inf;
        let approach = move |_: f64| Some(v_inf_sq);
        let (periapsis_km, apoapsis_km) = held.goal;
        let (thrust_n, isp_s, mass_kg) = held.engine;
        let task = Task {
            gm: held.gm,
            start: Start::Hyperbola(&approach),
            open_km: periapsis_km,
            speed_before_km_s: conic::hyperbola_speed_km_s(held.gm, v_inf_sq, periapsis_km),
            speed_after_km_s: conic::periapsis_speed_km_s(held.gm, periapsis_km, apoapsis_km),
            turn_rad: 0.0,
            goal: Orbit {
                periapsis_km,
                apoapsis_km,
            },
            engine: Engine {
                thrust_n,
                exhaust_km_s: isp_s * 9.806_65e-3,
                mass_kg,
            },
            steering: held.steering,
        };
        bencher.bench_local(|| black_box(&task).solve(None));
    }

    fn mars(thrust_n: f64, steering: Steering) -> Held {
        Held {
            gm: 42_828.375,
            v_inf: 2.65,
            goal: (3696.19, 38_396.19),
            engine: (thrust_n, 317.0, 2000.0),
            steering,
        }
    }

    #[divan::bench]
    fn mars_4000_n(bencher: Bencher) {
        solve(bencher, mars(4000.0, Steering::AgainstVelocity));
    }

    #[divan::bench]
    fn mars_400_n(bencher: Bencher) {
        solve(bencher, mars(400.0, Steering::AgainstVelocity));
    }

    #[divan::bench]
    fn mars_400_n_turning(bencher: Bencher) {
        solve(bencher, mars(400.0, Steering::TurningAttitude));
    }

    #[divan::bench]
    fn moon_22_n(bencher: Bencher) {
        let held = Held {
            gm: 4902.8,
            v_inf: 0.85,
            goal: (1837.4, 10_000.0),
            engine: (22.0, 220.0, 150.0),
            steering: Steering::AgainstVelocity,
        };
        solve(bencher, held);
    }
}

/// Whole ways and curves with burns that last: Moon, 22 N, brake at 100 km.
mod lasting {
    use super::*;
    use stoop::crew::Threads;
    use stoop::physics::held_burn::Steering;
    use stoop::physics::vehicle::Vehicle;
    use stoop::study::watch::gather;
    use stoop::tui::model::CurveLook;
    use stoop::tui::results;

    fn small_engine() -> Setting {
        Setting {
            brake: Choice::Radius(1837.4),
            vehicle: Some(Vehicle {
                dry_mass_kg: 60.0,
                propellant_kg: 90.0,
                thrust_n: 22.0,
                isp_s: 220.0,
            }),
            burns: Burns::Integrated(Steering::AgainstVelocity),
            ..setting(0.0)
        }
    }

    #[divan::bench(args = ["direct", "dip", "loop", "steps"])]
    fn one_point(bencher: Bencher, name: &str) {
        let setting = small_engine();
        let way = Way::TABLE
            .iter()
            .find(|entry| entry.name == name)
            .map_or(Way::Direct, |entry| entry.way);
        bencher.bench_local(|| way.figures(black_box(&setting)));
    }

    #[divan::bench]
    fn dip_best_brake(bencher: Bencher) {
        let setting = Setting {
            brake: Choice::Best,
            ..small_engine()
        };
        bencher.bench_local(|| Way::Dip.figures(black_box(&setting)));
    }

    /// 240 points of direct and dip on two threads, then the landmarks of both (loop and steps kept out by the starts).
    #[divan::bench]
    fn curve_of_240_points_direct_and_dip_with_landmarks(bencher: Bencher) {
        let mut setting = small_engine();
        setting.limits.most_starts = 2;
        setting.passes = Passes::Number(7);
        let crew = Threads::number(2);
        bencher.bench_local(|| {
            let points = gather(&crew, 240, |k| {
                let radius = 1900.0 + 100.0 * k as f64;
                let here = landmarks::at_radius(&setting, radius);
                (Way::Direct.figures(&here), Way::Dip.figures(&here))
            });
            let marks = landmarks::landmarks_with(&setting, 120, &crew);
            (points, marks)
        });
    }

    const LOOK: CurveLook = CurveLook {
        x_log: true,
        y_log: false,
        quantity: stoop::report::plot::Quantity::Cost,
        zoom: None,
    };

    /// What a key does at once: everything by estimate.
    #[divan::bench]
    fn estimate_on_screen(bencher: Bencher) {
        let case = file::built_in().case;
        bencher.bench_local(|| results::at_once(black_box(&case), &LOOK, (200, 60)));
    }

    /// The first integrated picture of the built-in scenario, all four ways, two threads.
    #[divan::bench]
    fn coarse_on_screen(bencher: Bencher) {
        let case = file::built_in().case;
        let crew = Threads::number(2);
        bencher.bench_local(|| results::coarse(black_box(&case), &LOOK, (200, 60), &crew));
    }

    /// All of it, all four ways, two threads.
    #[divan::bench]
    fn integrated_on_screen(bencher: Bencher) {
        let case = file::built_in().case;
        let crew = Threads::number(2);
        bencher.bench_local(|| results::integrated(black_box(&case), &LOOK, (200, 60), &crew));
    }
}

/// One arrival from an orbit round the parent, Earth to Moon from 400 km.
mod approach {
    use super::*;
    use transfer::Model;

    fn input(model: Model) -> TransferInput {
        TransferInput {
            parent_gm: 398_600.4418,
            body_gm: 4902.8,
            distance_km: 384_400.0,
            departure_radius_km: 6778.137,
            apoapsis_km: 384_400.0,
            model,
            cos_inclination: 1.0,
        }
    }

    #[divan::bench(sample_size = 1000)]
    fn three_body_v_inf(bencher: Bencher) {
        let transfer = ParentTransfer::new(input(Model::ThreeBody));
        bencher.bench_local(|| black_box(&transfer).v_inf_sq(black_box(6737.4)));
    }

    #[divan::bench(sample_size = 1000)]
    fn direct_by_three_body(bencher: Bencher) {
        let setting = Setting {
            approach: Approach::FromParent(ParentTransfer::new(input(Model::ThreeBody))),
            ..setting(0.0)
        };
        bencher.bench_local(|| Way::Direct.figures(black_box(&setting)));
    }

    #[divan::bench]
    fn patched_v_inf(bencher: Bencher) {
        let transfer = ParentTransfer::new(input(Model::Patched));
        bencher.bench_local(|| black_box(&transfer).v_inf_sq(black_box(6737.4)));
    }

    #[divan::bench]
    fn three_body_transfer_new(bencher: Bencher) {
        let input = input(Model::ThreeBody);
        bencher.bench_local(|| ParentTransfer::new(black_box(input)));
    }
}

mod study {
    use super::*;

    #[divan::bench]
    fn case_new_given(bencher: Bencher) {
        let spec = case(0.0, true).spec().clone();
        bencher.bench_local(|| Case::new(black_box(spec.clone())));
    }

    #[divan::bench]
    fn case_new_from_parent(bencher: Bencher) {
        let spec = file::built_in().case.spec().clone();
        bencher.bench_local(|| Case::new(black_box(spec.clone())));
    }

    #[divan::bench]
    fn landmarks_alone(bencher: Bencher) {
        let case = case(28.5, false);
        bencher.bench_local(|| landmarks::landmarks(black_box(case.setting())));
    }

    #[divan::bench]
    fn verdict_alone(bencher: Bencher) {
        let case = file::built_in().case;
        let answer = Answer::of(&case);
        bencher.bench_local(|| verdict::verdict(black_box(case.setting()), black_box(&answer)));
    }

    /// 240 target altitudes, all three ways, and all landmarks.
    fn curve_and_landmarks(case: &Case) -> usize {
        let axis =
            Axis::new(by_id(KnobId::TargetAltitude), 100.0, 24_000.0, 240, true).expect("an axis");
        curve::curve(case, &axis).len() + landmarks::landmarks(case.setting()).crossovers.len()
    }

    fn case(plane_change_deg: f64, best: bool) -> Case {
        let choice = |altitude: f64| {
            if best {
                "Best".to_owned()
            } else {
                format!("AltitudeKm({altitude:?})")
            }
        };
        let text = format!(
            "(format: 1, body: Known(\"Moon\"), arrival: Asymptote(v_inf_km_s: 0.85), \
             target: (shape: Circular(altitude_km: 6500.0), plane_change_deg: {plane_change_deg:?}), \
             braking: (brake: {}, loop_apoapsis: {}))",
            choice(100.0),
            choice(24_000.0),
        );
        file::parse("bench", &text).expect("sound").case
    }

    #[divan::bench(args = TURNS)]
    fn curve_240_and_landmarks(bencher: Bencher, turn: f64) {
        let case = case(turn, false);
        bencher.bench_local(|| curve_and_landmarks(black_box(&case)));
    }

    /// The work of `sweep.py`: costs only, no landmarks.
    #[divan::bench(args = TURNS)]
    fn curve_240(bencher: Bencher, turn: f64) {
        let case = case(turn, false);
        let axis =
            Axis::new(by_id(KnobId::TargetAltitude), 100.0, 24_000.0, 240, true).expect("an axis");
        bencher.bench_local(|| curve::curve(black_box(&case), &axis));
    }

    #[divan::bench(args = TURNS)]
    fn curve_240_and_landmarks_all_best(bencher: Bencher, turn: f64) {
        let case = case(turn, true);
        bencher.bench_local(|| curve_and_landmarks(black_box(&case)));
    }

    #[divan::bench]
    fn answer_and_verdict(bencher: Bencher) {
        let case = file::built_in().case;
        bencher.bench_local(|| {
            let answer = Answer::of(black_box(&case));
            verdict::verdict(case.setting(), &answer)
        });
    }
}

mod screen {
    use super::*;
    use crossterm::event::{KeyCode, KeyEvent, KeyModifiers};
    use ratatui::Terminal;
    use ratatui::backend::TestBackend;
    use stoop::tui::update::{Msg, update};
    use stoop::tui::view::view;

    /// A key press to a finished frame at 200 x 60.
    #[divan::bench]
    fn key_to_frame(bencher: Bencher) {
        let mut model = Model::new(file::built_in(), None, (200, 60), Glyphs::Ascii);
        let mut terminal = Terminal::new(TestBackend::new(200, 60)).expect("test backend");
        let mut up = true;
        bencher.bench_local(|| {
            let key = if up { KeyCode::Right } else { KeyCode::Left };
            up = !up;
            update(&mut model, Msg::Key(KeyEvent::new(key, KeyModifiers::NONE)));
            terminal
                .draw(|frame| view(&model, Theme::COLOURED, frame))
                .expect("drawn");
        });
    }
}
