//! The explorer without a terminal: snapshots of its screens, every size, random keys, and what keys do to the model.

use crossterm::event::{KeyCode, KeyEvent, KeyModifiers};
use ratatui::Terminal;
use ratatui::backend::TestBackend;
use ratatui::style::{Color, Modifier};
use stoop::arrival::Way;
use stoop::report::plot::Glyphs;
use stoop::scenario::file;
use stoop::study::knob::{self, KnobId, Value};
use stoop::tui::model::{Lens, Model, Overlay, Question};
use stoop::tui::results::Grade;
use stoop::tui::theme::Theme;
use stoop::tui::update::{Effect, Msg, update};
use stoop::tui::view::view;
use stoop::tui::worker::{Report, Worker};

/// The built-in scenario, its burns taking no time: every key then leaves final results.
fn model(size: (u16, u16)) -> Model {
    let text = built_in_text().replace("burns: Finite", "burns: Impulsive");
    Model::new(loaded(&text), None, size, Glyphs::Ascii)
}

/// The built-in scenario as it is, its burns integrated.
fn lasting(size: (u16, u16)) -> Model {
    let mut model = Model::new(file::built_in(), None, size, Glyphs::Ascii);
    model.finish_now();
    model
}

fn built_in_text() -> String {
    file::built_in().text
}

fn loaded(text: &str) -> file::Loaded {
    file::parse("built-in", text).unwrap_or_else(|faults| panic!("{faults}"))
}

fn press(model: &mut Model, code: KeyCode) -> Vec<Effect> {
    update(model, Msg::Key(KeyEvent::new(code, KeyModifiers::NONE)))
}

fn type_keys(model: &mut Model, text: &str) {
    for c in text.chars() {
        press(model, KeyCode::Char(c));
    }
}

fn draw(model: &Model) -> Terminal<TestBackend> {
    let mut terminal =
        Terminal::new(TestBackend::new(model.size.0, model.size.1)).expect("test backend");
    terminal
        .draw(|frame| view(model, Theme::COLOURED, frame))
        .expect("drawn");
    terminal
}

fn text(model: &Model) -> String {
    let terminal = draw(model);
    let buffer = terminal.backend().buffer();
    let width = usize::from(buffer.area.width.max(1));
    buffer
        .content
        .chunks(width)
        .map(|row| {
            row.iter()
                .map(|cell| cell.symbol())
                .collect::<String>()
                .trim_end()
                .to_owned()
        })
        .collect::<Vec<_>>()
        .join("\n")
}

fn altitude(model: &Model) -> f64 {
    match knob::by_id(KnobId::TargetAltitude).read(&model.case) {
        Ok(Value::Number(altitude)) => altitude,
        other => panic!("{other:?}"),
    }
}

#[test]
fn screens_at_three_sizes() {
    for size in [(80, 24), (120, 40), (60, 20)] {
        for (lens, name, _) in Lens::ALL {
            let mut model = model(size);
            model.lens = *lens;
            insta::assert_snapshot!(format!("{name}-{}x{}", size.0, size.1), text(&model));
        }
    }
}

#[test]
fn lasting_burns_at_three_sizes() {
    for size in [(80, 24), (120, 40), (60, 20)] {
        let mut model = lasting(size);
        insta::assert_snapshot!(format!("lasting-curve-{}x{}", size.0, size.1), text(&model));
        model.lens = Lens::Burns;
        insta::assert_snapshot!(format!("lasting-burns-{}x{}", size.0, size.1), text(&model));
    }
}

#[test]
fn an_estimate_says_that_it_is_one() {
    let mut model = Model::new(file::built_in(), None, (120, 40), Glyphs::Ascii);
    assert_eq!(model.results.grade, Grade::Estimated);
    assert_eq!(model.working, Some(0));
    assert!(text(&model).contains("finite burns: estimate 0 %"));
    assert!(text(&model).contains("estimate "), "the table says it too");
    let estimate = model
        .results
        .answer
        .plan(Way::Direct)
        .expect("flyable")
        .dv_km_s;
    model.finish_now();
    assert_eq!(
        (model.results.grade, model.working),
        (Grade::Integrated, None)
    );
    let integrated = model
        .results
        .answer
        .plan(Way::Direct)
        .expect("flyable")
        .dv_km_s;
    assert!(estimate != integrated && (estimate / integrated - 1.0).abs() < 1e-2);
    assert!(!text(&model).contains("estimate"));
    // A change is an estimate again, and asks for another integration; an older one's report is dropped.
    let old = Report::Results {
        number: model.asked,
        results: Box::new(model.results.clone()),
    };
    press(&mut model, KeyCode::Right);
    assert_eq!(model.results.grade, Grade::Estimated);
    update(&mut model, Msg::Reported(old));
    assert_eq!(model.results.grade, Grade::Estimated);
    // Esc stops it, says so, and what was under way is no longer heard.
    let job = model.wanted.clone().expect("asked");
    press(&mut model, KeyCode::Esc);
    assert_eq!(model.working, None);
    assert!(text(&model).contains("integration stopped"));
    update(
        &mut model,
        Msg::Reported(Report::Progress {
            number: job.number,
            percent: 50,
        }),
    );
    assert_eq!(model.working, None);
    // A new quantity is read from the curve there is.
    model.finish_now();
    let before = model.asked;
    press(&mut model, KeyCode::Char('y'));
    assert_eq!(model.asked, before);
}

#[test]
fn burns_and_steering_are_switched_and_taken_back() {
    let mut model = lasting((120, 40));
    press(&mut model, KeyCode::Char('f'));
    assert_eq!(model.results.grade, Grade::Impulsive);
    assert!(!text(&model).contains("steps"), "nothing to divide");
    press(&mut model, KeyCode::Char('u'));
    model.finish_now();
    assert_eq!(model.results.grade, Grade::Integrated);
    let before = model
        .results
        .answer
        .plan(Way::Dip)
        .expect("flyable")
        .loss_km_s();
    press(&mut model, KeyCode::Char('F'));
    assert!(text(&model).contains("steering: fixed attitude"));
    model.finish_now();
    let after = model
        .results
        .answer
        .plan(Way::Dip)
        .expect("flyable")
        .loss_km_s();
    // A fixed attitude loses about twice as much at this length of burn.
    assert!(1.3 * before < after, "{before} {after}");
    // Without an engine there is nothing to integrate.
    let bare = "(format: 1, body: Known(\"Moon\"), arrival: Asymptote(v_inf_km_s: 0.9), target: (shape: Circular(altitude_km: 500.0)))";
    let mut model = Model::new(loaded(bare), None, (120, 40), Glyphs::Ascii);
    press(&mut model, KeyCode::Char('f'));
    assert!(text(&model).contains("there is no vehicle"));
    press(&mut model, KeyCode::Char('F'));
    assert!(text(&model).contains("there is no vehicle"));
}

#[test]
fn the_path_lens_goes_from_the_cap_to_the_periapsis() {
    let mut model = lasting((120, 40));
    press(&mut model, KeyCode::Char('p'));
    assert_eq!(model.lens, Lens::Path);
    assert!(text(&model).contains("target orbit") && text(&model).contains("thrust arc"));
    // The ends are met and said, and nothing moves beyond them.
    for (key, end) in [('i', "as close as"), ('o', "as wide as")] {
        for _ in 0..60 {
            press(&mut model, KeyCode::Char(key));
            let _ = draw(&model);
        }
        let held = model.path_zoom;
        press(&mut model, KeyCode::Char(key));
        assert!(text(&model).contains(end), "{key}");
        assert_eq!(model.path_zoom, held);
    }
    press(&mut model, KeyCode::Char('a'));
    assert_eq!(model.path_zoom, 1.0);
    // A way that cannot be flown says so instead.
    while model.shown_way() != Way::Loop {
        press(&mut model, KeyCode::Char('w'));
    }
    assert_eq!(model.lens, Lens::Path);
    assert!(text(&model).contains("cannot be flown here"));
}

/// Coarse first, then integrated; what the worker finds is what one thread finds; the newest of many requests is answered.
#[test]
fn the_worker_answers_the_newest_request() {
    let (sender, reports) = std::sync::mpsc::channel();
    let mut worker = Worker::start(move |report| sender.send(report).is_ok());
    let mut model = Model::new(file::built_in(), None, (80, 24), Glyphs::Ascii);
    for _ in 0..10 {
        worker.ask(model.wanted.take().expect("asked"));
        press(&mut model, KeyCode::Right);
    }
    let last = model.wanted.clone().expect("asked");
    worker.ask(last.clone());
    let mut grades = Vec::new();
    while model.results.grade != Grade::Integrated {
        let report = reports
            .recv_timeout(std::time::Duration::from_secs(60))
            .expect("a report");
        if let Report::Results { number, results } = &report
            && *number == last.number
        {
            grades.push(results.grade);
        }
        update(&mut model, Msg::Reported(report));
    }
    assert_eq!(grades, [Grade::Coarse, Grade::Integrated]);
    let shared = model.results.clone();
    model.wanted = Some(last);
    model.finish_now();
    assert_eq!(shared.answer, model.results.answer);
    assert_eq!(shared.verdict, model.results.verdict);
    assert_eq!(
        shared.curve.map(|curve| curve.rows),
        model.results.curve.clone().map(|curve| curve.rows)
    );
}

#[test]
fn help_and_prompts() {
    let mut with_help = model((80, 24));
    press(&mut with_help, KeyCode::Char('?'));
    insta::assert_snapshot!("help-80x24", text(&with_help));
    let mut typing = model((80, 24));
    type_keys(&mut typing, "9000x");
    press(&mut typing, KeyCode::Enter);
    insta::assert_snapshot!("entry-refused-80x24", text(&typing));
}

#[test]
fn every_size_from_one_cell_up_draws_in_every_state() {
    let states: Vec<Model> = {
        let mut states: Vec<Model> = Lens::ALL
            .iter()
            .map(|(lens, ..)| {
                let mut model = model((80, 24));
                model.lens = *lens;
                model
            })
            .collect();
        for lens in [Lens::Curve, Lens::Burns] {
            let mut model = lasting((80, 24));
            model.lens = lens;
            states.push(model);
        }
        states.push(Model::new(file::built_in(), None, (80, 24), Glyphs::Ascii));
        for keys in ["?", "123", "S", "s"] {
            let mut model = model((80, 24));
            type_keys(&mut model, keys);
            states.push(model);
        }
        let mut nothing_flyable = model((80, 24));
        type_keys(&mut nothing_flyable, "20");
        press(&mut nothing_flyable, KeyCode::Enter);
        assert_eq!(nothing_flyable.results.answer.best, None);
        states.push(nothing_flyable);
        states
    };
    for state in states {
        for width in (1..=70).chain([79, 80, 100, 119, 120, 160, 200]) {
            for height in (1..=26).chain([30, 40, 60]) {
                let mut model = state.clone();
                // The curve of another size stays drawable until the resize has been worked through.
                model.size = (width, height);
                let _ = draw(&model);
            }
        }
    }
}

#[test]
fn resizing_keeps_the_place_and_fills_the_plot() {
    let mut model = model((80, 24));
    press(&mut model, KeyCode::Down);
    let before = (model.knob, altitude(&model));
    update(&mut model, Msg::Resize(200, 60));
    assert_eq!((model.knob, altitude(&model)), before);
    let rows = model.results.curve.as_ref().map(|curve| curve.rows.len());
    assert_eq!(rows, Some(stoop::report::plot::columns(200 - 38)));
}

#[test]
fn output_is_seven_bit_unless_asked_otherwise() {
    assert!(text(&model((120, 40))).is_ascii());
    let mut fine = model((120, 40));
    fine.glyphs = Glyphs::Fine;
    assert!(!text(&fine).is_ascii());
}

#[test]
fn colour_repeats_the_glyph() {
    let terminal = draw(&model((120, 40)));
    let buffer = terminal.backend().buffer();
    let mut seen = [false; Way::COUNT];
    for y in 2..26 {
        for x in 8..82 {
            let cell = &buffer[(x, y)];
            for entry in Way::TABLE {
                if cell.symbol() == entry.glyph.to_string() {
                    seen[entry.way as usize] = true;
                    assert_eq!(
                        cell.fg,
                        Theme::COLOURED.way(entry.way).fg.unwrap_or(Color::Reset),
                        "{x} {y}"
                    );
                }
            }
            if cell.symbol() == "X" || cell.symbol() == "*" {
                assert!(cell.modifier.contains(Modifier::BOLD));
            }
        }
    }
    assert!(seen[Way::Direct as usize] && seen[Way::Dip as usize]);
}

#[test]
fn without_colour_nothing_has_a_colour() {
    let model = model((120, 40));
    let mut terminal = Terminal::new(TestBackend::new(120, 40)).expect("test backend");
    terminal
        .draw(|frame| view(&model, Theme::PLAIN, frame))
        .expect("drawn");
    for cell in &terminal.backend().buffer().content {
        assert_eq!((cell.fg, cell.bg), (Color::Reset, Color::Reset));
    }
}

#[test]
fn arrows_turn_and_undo_takes_a_whole_gesture_back() {
    let mut model = model((80, 24));
    let start = altitude(&model);
    for _ in 0..5 {
        press(&mut model, KeyCode::Right);
    }
    let up = altitude(&model);
    assert!(start < up);
    press(&mut model, KeyCode::Left);
    assert!(altitude(&model) < up);
    press(&mut model, KeyCode::Char('u'));
    assert_eq!(altitude(&model), up);
    press(&mut model, KeyCode::Char('u'));
    assert_eq!(altitude(&model), start);
    assert!(!model.unsaved());
    press(&mut model, KeyCode::Char('r'));
    assert_eq!(altitude(&model), up);
}

#[test]
fn landing_on_the_crossover_and_the_cheapest() {
    let mut model = model((80, 24));
    press(&mut model, KeyCode::Char('x'));
    let crossover = model.results.answer.landmarks.crossovers[0];
    assert!((altitude(&model) - model.case.altitude_km(crossover.radius_km)).abs() < 1e-6);
    let (direct, dip) = (
        model.results.answer.plan(Way::Direct),
        model.results.answer.plan(Way::Dip),
    );
    let difference = direct.expect("flyable").cost_km_s - dip.expect("flyable").cost_km_s;
    assert!(difference.abs() < 1e-12, "{difference:e}");
    press(&mut model, KeyCode::Char('z'));
    let cheapest = model
        .results
        .answer
        .landmarks
        .cheapest
        .expect("a cheapest altitude");
    assert!((altitude(&model) - model.case.altitude_km(cheapest.radius_km)).abs() < 1e-6);
}

#[test]
fn typed_values_take_units_and_refusals_change_nothing() {
    let mut model = model((80, 24));
    type_keys(&mut model, "9 000 km");
    press(&mut model, KeyCode::Enter);
    assert_eq!(altitude(&model), 9000.0);
    type_keys(&mut model, "-5");
    press(&mut model, KeyCode::Enter);
    assert_eq!(altitude(&model), 9000.0);
    let (_, message) = model.message.clone().expect("a refusal");
    assert!(message.contains("at least 0 and at most"), "{message}");
    assert!(
        matches!(&model.overlay, Some(Overlay::Entry { text, .. }) if text == "-5"),
        "what was typed stays"
    );
    press(&mut model, KeyCode::Esc);
    assert_eq!(model.overlay, None);
}

#[test]
fn leaving_asks_once_when_something_is_unsaved() {
    let mut model = model((80, 24));
    assert!(matches!(
        press(&mut model, KeyCode::Char('q'))[..],
        [Effect::Quit]
    ));
    press(&mut model, KeyCode::Right);
    assert!(press(&mut model, KeyCode::Char('q')).is_empty());
    assert_eq!(model.overlay, Some(Overlay::Ask(Question::Quit)));
    assert!(press(&mut model, KeyCode::Char('n')).is_empty());
    assert_eq!(model.overlay, None);
    press(&mut model, KeyCode::Char('q'));
    assert!(matches!(
        press(&mut model, KeyCode::Char('y'))[..],
        [Effect::Quit]
    ));
}

#[test]
fn a_paste_is_a_value_and_never_a_command() {
    let mut model = model((80, 24));
    update(&mut model, Msg::Paste("q\nq".to_owned()));
    assert_eq!(model.overlay, None);
    update(&mut model, Msg::Paste("7000 km\nq".to_owned()));
    press(&mut model, KeyCode::Enter);
    assert_eq!(altitude(&model), 7000.0);
}

/// A small generator with a fixed seed (xorshift64*, Vigna 2016): the walk is the same every time.
struct Walk(u64);

impl Walk {
    fn next(&mut self, below: usize) -> usize {
        self.0 ^= self.0 >> 12;
        self.0 ^= self.0 << 25;
        self.0 ^= self.0 >> 27;
        (self.0.wrapping_mul(0x2545_F491_4F6C_DD1D) >> 33) as usize % below
    }
}

#[test]
fn random_keys_and_sizes_leave_a_sound_state() {
    let named = [
        KeyCode::Left,
        KeyCode::Right,
        KeyCode::Up,
        KeyCode::Down,
        KeyCode::Enter,
        KeyCode::Esc,
        KeyCode::Tab,
        KeyCode::BackTab,
        KeyCode::PageUp,
        KeyCode::PageDown,
        KeyCode::Backspace,
        KeyCode::Home,
        KeyCode::F(1),
        KeyCode::Delete,
    ];
    let modifiers = [
        KeyModifiers::NONE,
        KeyModifiers::NONE,
        KeyModifiers::SHIFT,
        KeyModifiers::ALT,
        KeyModifiers::CONTROL,
    ];
    let mut walk = Walk(0x5eed_0000_0000_0001);
    let mut model = model((80, 24));
    for step in 0..3000 {
        let code = if walk.next(2) == 0 {
            named[walk.next(named.len())]
        } else {
            KeyCode::Char(char::from(32 + walk.next(95) as u8))
        };
        let effects = if walk.next(40) == 0 {
            update(
                &mut model,
                Msg::Resize(1 + walk.next(200) as u16, 1 + walk.next(60) as u16),
            )
        } else {
            update(
                &mut model,
                Msg::Key(KeyEvent::new(code, modifiers[walk.next(modifiers.len())])),
            )
        };
        // Nothing is carried out here; a save that is asked for simply never comes back.
        drop(effects);
        if step % 7 == 0 {
            let _ = draw(&model);
        }
        assert!(model.selected().offered(&model.case), "step {step}");
        assert!(
            stoop::study::Case::new(model.case.spec().clone()).is_ok(),
            "step {step}"
        );
        assert!(
            model.results.sentence.is_ascii() && !model.results.sentence.contains("NaN"),
            "step {step}: {}",
            model.results.sentence
        );
    }
}
