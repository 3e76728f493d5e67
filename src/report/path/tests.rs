//! Pictures against the geometry they show.

use super::view::CELL_ASPECT;
use super::*;
use crate::scenario::file;

/// A lunar arrival in which every way can be flown.
fn case(shape: &str) -> Case {
    let text = format!(
        "(format: 1, body: Known(\"Moon\"), arrival: Asymptote(v_inf_km_s: 0.85), \
         target: (shape: {shape}, plane_change_deg: 10.0), \
         braking: (brake: AltitudeKm(100.0), loop_apoapsis: AltitudeKm(24000.0)))"
    );
    file::parse("test", &text).expect("sound").case
}

fn circle() -> Case {
    case("Circular(altitude_km: 6500.0)")
}

fn ellipse() -> Case {
    case("Ellipse(periapsis_alt_km: 3000.0, apoapsis_alt_km: 15000.0)")
}

/// Every plan of a case.
fn plans(case: &Case) -> Vec<Plan> {
    let plans: Vec<Plan> = Way::TABLE
        .iter()
        .filter_map(|entry| entry.way.plan(case.setting()).ok())
        .collect();
    assert!(3 <= plans.len());
    plans
}

fn window(scene: &Scene, view: &View, glyphs: Glyphs, width: usize, height: usize) -> Window {
    let raster = Raster::new(width, height, glyphs);
    Window::new(scene, &scene.conics(), view, &raster).expect("something to see")
}

fn burn(k: usize, zoom: f64) -> View {
    View {
        centre: Centre::Burn(k),
        zoom,
    }
}

#[test]
fn lines_lie_on_their_conics_and_have_no_gaps() {
    let views = [View::WHOLE, burn(1, 3.0), burn(2, 12.0), burn(1, 200.0)];
    for case in [circle(), ellipse()] {
        for plan in plans(&case) {
            let scene = Scene::new(&case, &plan);
            for view in &views {
                let (width, height) = (79, 37);
                let picture = draw(&scene, view, Glyphs::Ascii, width, height);
                let window = window(&scene, view, Glyphs::Ascii, width, height);
                let conics = scene.conics();
                for (conic, part, role) in &conics {
                    for y in 0..height {
                        for x in 0..width {
                            if picture.cell(x, y).1 == *role {
                                // A point of the curve lies in the cell, so it is half a diagonal away at most.
                                let off = conic.distance_km(window.point(x, y));
                                let most = 0.5 * CELL_ASPECT.hypot(1.0) * window.cell_km;
                                assert!(off <= most, "{role:?} {view:?} {x} {y} {off} {most}");
                            }
                        }
                    }
                    // Wherever the curve runs inside the picture, something is drawn in that cell or in one that shares a side with it.
                    for point in conic
                        .anomalies(*part, 4000)
                        .filter_map(|anomaly| conic.point(anomaly))
                    {
                        let Some((x, y)) = window.dot_at(point) else {
                            continue;
                        };
                        let drawn = |x: usize, y: usize| picture.cell(x, y).1 != Role::Blank;
                        let near = drawn(x, y)
                            || drawn(x + 1, y)
                            || drawn(x, y + 1)
                            || (0 < x && drawn(x - 1, y))
                            || (0 < y && drawn(x, y - 1));
                        assert!(near, "{role:?} {view:?}: a gap at {x} {y}");
                    }
                }
            }
        }
    }
}

#[test]
fn a_circle_is_round_and_the_scale_bar_is_true() {
    let case = circle();
    let plan = Way::Direct.plan(case.setting()).expect("flyable");
    let scene = Scene::new(&case, &plan);
    let (width, height) = (80, 30);
    let picture = draw(&scene, &View::WHOLE, Glyphs::Ascii, width, height);
    let of = |wanted: fn(Role) -> bool| {
        let cells: Vec<(usize, usize)> = (0..height)
            .flat_map(|y| (0..width).map(move |x| (x, y)))
            .filter(|(x, y)| wanted(picture.cell(*x, *y).1))
            .collect();
        let span = |side: fn(&(usize, usize)) -> usize| {
            let sides = || cells.iter().map(side);
            sides().max().expect("cells") - sides().min().expect("cells") + 1
        };
        (span(|cell| cell.0) as f64, span(|cell| cell.1) as f64)
    };
    let (across, down) = of(|role| matches!(role, Role::Target | Role::Motion | Role::Burn(_)));
    assert!(
        (across - CELL_ASPECT * down).abs() <= 2.0 + CELL_ASPECT,
        "{across} {down}"
    );
    let window = window(&scene, &View::WHOLE, Glyphs::Ascii, width, height);
    let diameter = 2.0 * (6500.0 + case.body().radius_km) / window.cell_km;
    assert!(
        (across - 1.0 - diameter).abs() <= 1.0,
        "{across} {diameter}"
    );
    let (km, cells) = scale_bar_km(&window, width).expect("room");
    assert!((km / window.cell_km - cells as f64).abs() <= 0.5);
    let bar: String = (0..=cells).map(|x| picture.cell(x, height - 1).0).collect();
    assert_eq!(bar, format!("+{}+", "-".repeat(cells - 1)));
    let text: String = picture.lines()[height - 1].clone();
    assert!(
        text.contains(&format!(" {} km", plot::scale::label(km))),
        "{text}"
    );
    // The body's disc is to scale too.
    let (body, _) = of(|role| matches!(role, Role::Body));
    let expected = 2.0 * case.body().radius_km / window.cell_km;
    assert!((body - expected).abs() <= 1.0, "{body} {expected}");
}

#[test]
fn burns_are_numbered_where_they_are_made_and_the_motion_is_shown() {
    for case in [circle(), ellipse()] {
        for plan in plans(&case) {
            let scene = Scene::new(&case, &plan);
            for glyphs in [Glyphs::Ascii, Glyphs::Fine] {
                let picture = draw(&scene, &View::WHOLE, glyphs, 100, 40);
                let all: String = picture.lines().join("\n");
                for k in 1..=plan.starts() {
                    let digit = char::from_digit(k as u32, 10).expect("a digit");
                    let count = (0..40)
                        .flat_map(|y| (0..100).map(move |x| (x, y)))
                        .filter(|(x, y)| picture.cell(*x, *y) == (digit, Role::Burn(k)))
                        .count();
                    assert_eq!(count, 1, "{all}");
                    // Centred on a burn, its number is in the middle.
                    let close = draw(&scene, &burn(k, 40.0), glyphs, 61, 21);
                    assert_eq!(close.cell(30, 10), (digit, Role::Burn(k)));
                }
                assert!(all.contains(['<', '>', '^', 'V']), "{all}");
                assert!(glyphs == Glyphs::Fine || all.is_ascii(), "{all}");
            }
        }
    }
    // Counter-clockwise: over the top to the left.
    let case = circle();
    let plan = Way::Dip.plan(case.setting()).expect("flyable");
    let scene = Scene::new(&case, &plan);
    let (conic, part, _) = scene.conics()[1];
    assert_eq!(part, Part::Upper);
    let top = conic.point(2.0).expect("on the ellipse");
    assert!(0.0 < top.1 && conic.direction(top).0 < 0.0);
    // Dip raises at the far apsis, on the left.
    let places = scene.burn_places();
    assert_eq!(
        places,
        [plan.burns[0].at_radius_km, -plan.burns[1].at_radius_km]
    );
}

#[test]
fn every_size_centre_and_zoom_is_drawn_without_panic() {
    let zooms = [
        1.0,
        0.02,
        7.0,
        1e3,
        1e9,
        1e300,
        0.0,
        -1.0,
        f64::NAN,
        f64::INFINITY,
    ];
    let centres = [
        Centre::Whole,
        Centre::Body,
        Centre::Burn(1),
        Centre::Burn(0),
        Centre::Burn(9),
    ];
    let arcs = vec![
        vec![(1837.4, -900.0), (1837.4, 0.0), (1700.0, 900.0)],
        vec![(f64::NAN, 0.0), (1e300, -1e300), (f64::INFINITY, 2.0)],
        vec![(5.0, 5.0)],
        vec![],
    ];
    let mut turn = 0;
    for case in [circle(), ellipse()] {
        for plan in plans(&case) {
            let scene = Scene::new(&case, &plan).with_arcs(&arcs);
            for width in 0..=60 {
                for height in 0..=30 {
                    turn += 1;
                    let view = View {
                        centre: centres[turn % centres.len()],
                        zoom: zooms[turn / centres.len() % zooms.len()],
                    };
                    let glyphs = [Glyphs::Ascii, Glyphs::Fine][turn / 3 % 2];
                    let picture = draw(&scene, &view, glyphs, width, height);
                    assert_eq!((picture.width, picture.height), (width, height));
                    assert_eq!(picture.lines().len(), height);
                    let cap = View::to_the_cap(&scene, width, height);
                    draw(&scene, &cap, glyphs, width, height);
                }
            }
        }
    }
}

#[test]
fn zooms_reach_from_the_cap_to_the_periapsis() {
    let case = circle();
    for plan in plans(&case) {
        let scene = Scene::new(&case, &plan);
        let out = draw(
            &scene,
            &View::to_the_cap(&scene, 80, 30),
            Glyphs::Ascii,
            80,
            30,
        );
        let cap = |x: usize, y: usize| out.cell(x, y).1 == Role::Cap;
        // The circle is whole: it is met at the top, at the bottom (the scale bar may hide a part), and on both sides.
        assert!((0..80).any(|x| cap(x, 0) || cap(x, 1)));
        assert!((0..80).any(|x| cap(x, 29) || cap(x, 28)));
        assert!((0..40).any(|x| (0..30).any(|y| cap(x, y))));
        assert!((40..80).any(|x| (0..30).any(|y| cap(x, y))));
    }
    // Close up, floor and surface are apart.
    let plan = Way::Dip.plan(case.setting()).expect("flyable");
    let scene = Scene::new(&case, &plan);
    let view = burn(1, 0.1 * View::closest_zoom(&scene));
    let close = draw(&scene, &view, Glyphs::Ascii, 80, 30);
    let row: Vec<Role> = (0..80).map(|x| close.cell(x, 15).1).collect();
    assert!(
        row.contains(&Role::Body) && row.contains(&Role::Burn(1)),
        "{row:?}"
    );
}

#[test]
fn thrust_arcs_lie_on_top() {
    let case = circle();
    let plan = Way::Dip.plan(case.setting()).expect("flyable");
    let arcs = vec![vec![(1837.4, -900.0), (1837.4, 900.0)]];
    let scene = Scene::new(&case, &plan).with_arcs(&arcs);
    let picture = draw(&scene, &burn(1, 8.0), Glyphs::Ascii, 61, 21);
    let column: Vec<Role> = (0..21).map(|y| picture.cell(30, y).1).collect();
    assert_eq!(column[10], Role::Burn(1));
    assert_eq!(column[9], Role::Thrust);
    assert!(
        legend(&scene)
            .iter()
            .any(|(glyph, role, _)| (*glyph, *role) == ('%', Role::Thrust))
    );
}

#[test]
fn the_description_tells_every_burn_and_shows_nothing_that_acts() {
    let mut hostile = circle().spec().clone();
    hostile.body = crate::study::spec::BodySpec::Custom(crate::study::spec::CustomBody {
        name: "A\u{1b}[31mB".to_owned(),
        gm_km3_s2: 4902.8,
        radius_km: 1737.4,
        j2: 0.0,
        lowest_alt_km: 10.0,
        hill_radius_km: Some(60_000.0),
        parent: None,
    });
    for case in [circle(), ellipse(), Case::new(hostile).expect("sound")] {
        for plan in plans(&case) {
            let scene = Scene::new(&case, &plan);
            let text = describe(&scene).join("\n");
            assert!(
                text.bytes()
                    .all(|b| b == b'\n' || (b' '..=b'~').contains(&b)),
                "{text}"
            );
            for (k, burn) in plan.burns.iter().enumerate() {
                assert!(text.contains(&format!("Burn {} ", k + 1)), "{text}");
                assert!(
                    text.contains(&crate::report::words::dv(burn.dv_km_s)),
                    "{text}"
                );
            }
            assert!(
                text.contains("0.8500 km/s") && text.contains("floor"),
                "{text}"
            );
            assert_eq!(text.contains("It coasts"), 1 < plan.starts());
            assert!(text.contains("unfolded"));
            let legend = legend(&scene);
            let glyphs: Vec<char> = legend.iter().map(|(glyph, ..)| *glyph).collect();
            for (k, glyph) in glyphs.iter().enumerate() {
                assert!(!glyphs[..k].contains(glyph), "{glyphs:?}");
            }
        }
    }
}
