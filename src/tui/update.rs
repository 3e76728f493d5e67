//! What a message does to the model. The only place that changes it; what touches the world comes back as effects.

use super::action::Action;
use super::keymap;
use super::model::{Lens, Model, Overlay, Question, Tone};
use super::results::{self, Grade};
use super::worker::Report;
use crate::arrival::Way;
use crate::report::path::{Scene, View};
use crate::report::plot::Quantity;
use crate::report::words;
use crate::scenario::file::{Loaded, SaveError, Stamp};
use crate::scenario::write;
use crate::study::entry;
use crate::study::knob::{self, KnobId, Refused, Value};
use crate::study::spec::{Burns, Steering};
use crate::study::{Case, Spec, landmarks};
use crossterm::event::{KeyCode, KeyEvent, KeyModifiers};
use std::path::PathBuf;

/// Everything that can happen to the explorer.
#[derive(Debug)]
pub enum Msg {
    /// A key was pressed (or repeated).
    Key(KeyEvent),
    /// Text was pasted.
    Paste(String),
    /// The terminal has a new size.
    Resize(u16, u16),
    /// The program came back from the shell.
    Resumed,
    /// A save ended.
    Saved(Result<Written, SaveError>),
    /// The worker reports.
    Reported(Report),
    /// A reload ended.
    Reloaded(Result<Box<Loaded>, String>),
}

/// A save that succeeded.
#[derive(Debug)]
pub struct Written {
    /// Where.
    pub path: PathBuf,
    /// What is on disk now.
    pub text: String,
    /// Its stamp.
    pub stamp: Stamp,
    /// The scenario it holds.
    pub case: Box<Case>,
}

/// What the outside has to do.
#[derive(Debug)]
pub enum Effect {
    /// Write the scenario.
    Save {
        /// Where.
        path: PathBuf,
        /// What.
        text: String,
        /// What is expected on disk; `None` for a file that should not exist.
        expected: Option<Stamp>,
        /// Write over whatever is there.
        force: bool,
        /// The scenario the text holds.
        case: Box<Case>,
    },
    /// Read the file again.
    Load(PathBuf),
    /// Stop and go to the shell.
    Suspend,
    /// Draw everything from scratch.
    Repaint,
    /// End the program.
    Quit,
}

/// Applies a message.
pub fn update(model: &mut Model, msg: Msg) -> Vec<Effect> {
    match msg {
        Msg::Key(key) => on_key(model, &key),
        Msg::Paste(text) => {
            paste(model, &text);
            Vec::new()
        }
        Msg::Resize(width, height) => {
            model.size = (width, height);
            model.recompute_curve();
            Vec::new()
        }
        Msg::Resumed => vec![Effect::Repaint],
        Msg::Reported(report) => {
            model.hear(report);
            Vec::new()
        }
        Msg::Saved(result) => {
            saved(model, result);
            Vec::new()
        }
        Msg::Reloaded(result) => {
            reloaded(model, result);
            Vec::new()
        }
    }
}

fn on_key(model: &mut Model, key: &KeyEvent) -> Vec<Effect> {
    model.message = None;
    let control = key.modifiers.contains(KeyModifiers::CONTROL);
    if control && key.code == KeyCode::Char('z') {
        return vec![Effect::Suspend];
    }
    if control && key.code == KeyCode::Char('c') {
        // The second time always leaves, whatever lies over the screen.
        if model.overlay == Some(Overlay::Ask(Question::Quit)) {
            return vec![Effect::Quit];
        }
        return quit(model);
    }
    match model.overlay.take() {
        None => on_plain_key(model, key),
        Some(Overlay::Help) => {
            match keymap::action(key) {
                Some(Action::PageDown | Action::KnobDown) => {
                    model.scroll = model.scroll.saturating_add(5)
                }
                Some(Action::PageUp | Action::KnobUp) => {
                    model.scroll = model.scroll.saturating_sub(5)
                }
                Some(Action::Quit | Action::Cancel | Action::Help) => {
                    model.scroll = 0;
                    return Vec::new();
                }
                _ => {}
            }
            model.overlay = Some(Overlay::Help);
            Vec::new()
        }
        Some(Overlay::Entry { knob, text }) => on_entry_key(model, key, knob, text),
        Some(Overlay::SaveAs { text }) => on_save_as_key(model, key, text),
        Some(Overlay::Ask(question)) => answer(model, key, question),
    }
}

fn on_plain_key(model: &mut Model, key: &KeyEvent) -> Vec<Effect> {
    if let KeyCode::Char(c) = key.code
        && (c.is_ascii_digit() || c == '.' || c == '-' || c == '+')
        && !key
            .modifiers
            .intersects(KeyModifiers::CONTROL | KeyModifiers::ALT)
    {
        model.overlay = Some(Overlay::Entry {
            knob: model.knob,
            text: c.to_string(),
        });
        return Vec::new();
    }
    match keymap::action(key) {
        Some(action) => act(model, action),
        None => Vec::new(),
    }
}

/// Carries out an action.
pub fn act(model: &mut Model, action: Action) -> Vec<Effect> {
    if !matches!(
        action,
        Action::TurnUp
            | Action::TurnDown
            | Action::TurnUpCoarse
            | Action::TurnDownCoarse
            | Action::TurnUpFine
            | Action::TurnDownFine
    ) {
        model.gesture = None;
    }
    match action {
        Action::KnobUp => select(model, -1),
        Action::KnobDown => select(model, 1),
        Action::TurnDown => turn(model, -1.0, 1.0),
        Action::TurnUp => turn(model, 1.0, 1.0),
        Action::TurnDownCoarse => turn(model, -1.0, 10.0),
        Action::TurnUpCoarse => turn(model, 1.0, 10.0),
        Action::TurnDownFine => turn(model, -1.0, 0.1),
        Action::TurnUpFine => turn(model, 1.0, 0.1),
        Action::Enter => {
            model.overlay = Some(Overlay::Entry {
                knob: model.knob,
                text: String::new(),
            });
        }
        Action::Best => set(model, model.knob, Value::Best),
        Action::ToggleBurns => toggle_burns(model),
        Action::NextSteering => next_steering(model),
        Action::ToCheapest => to_cheapest(model),
        Action::ToCrossover => to_crossover(model),
        Action::Undo => step_back(model),
        Action::Redo => step_forward(model),
        Action::NextLens => open(model, neighbour(model.lens, 1)),
        Action::PreviousLens => open(model, neighbour(model.lens, -1)),
        Action::Open(lens) => open(model, lens),
        Action::NextWay => next_way(model),
        Action::ToggleLog => {
            model.look.x_log = !model.look.x_log;
            model.recompute_curve();
        }
        Action::ToggleVerticalLog => model.look.y_log = !model.look.y_log,
        Action::NextQuantity => next_quantity(model),
        Action::ZoomIn if model.lens == Lens::Path => zoom_path(model, 2.0),
        Action::ZoomOut if model.lens == Lens::Path => zoom_path(model, 0.5),
        Action::ZoomAll if model.lens == Lens::Path => model.path_zoom = 1.0,
        Action::ZoomIn => zoom(model, 0.5),
        Action::ZoomOut => zoom(model, 2.0),
        Action::ZoomAll => {
            model.look.zoom = None;
            model.recompute_curve();
        }
        Action::PageUp => model.scroll = model.scroll.saturating_sub(page(model)),
        Action::PageDown => model.scroll = model.scroll.saturating_add(page(model)),
        Action::Save => return save(model, false),
        Action::SaveAs => save_as(model),
        Action::Reload => return reload(model),
        Action::Help => {
            model.scroll = 0;
            model.overlay = Some(Overlay::Help);
        }
        Action::Cancel => cancel(model),
        Action::Suspend => return vec![Effect::Suspend],
        Action::Quit => return quit(model),
    }
    Vec::new()
}

/// Stops the integration; the estimate stays, and says so.
fn cancel(model: &mut Model) {
    if model.working.take().is_some() {
        model.asked += 1;
        model.wanted = None;
        let text = match model.results.grade {
            Grade::Coarse => {
                "integration stopped; what is shown is coarse (any change starts it again)"
            }
            _ => "integration stopped; what is shown is an estimate (any change starts it again)",
        };
        say(model, Tone::Done, text);
    }
}

/// Added to what is said about a place that is not yet known to the digit.
fn so_far(grade: Grade) -> &'static str {
    if grade.is_final() {
        ""
    } else {
        "; not yet integrated: press again when the first line says so"
    }
}

fn page(model: &Model) -> usize {
    usize::from(model.size.1 / 2).max(1)
}

fn say(model: &mut Model, tone: Tone, text: impl Into<String>) {
    model.message = Some((tone, text.into()));
}

fn select(model: &mut Model, by: isize) {
    let knobs = model.knobs();
    let at = knobs
        .iter()
        .position(|knob| knob.id == model.knob)
        .unwrap_or(0);
    let next = at
        .saturating_add_signed(by)
        .min(knobs.len().saturating_sub(1));
    if let Some(knob) = knobs.get(next) {
        model.knob = knob.id;
    }
}

fn turn(model: &mut Model, turns: f64, coarseness: f64) {
    let knob = model.selected();
    let resolved = knob.resolved(&model.case, &model.results.answer);
    let value = match knob.turned(&model.case, turns, coarseness, resolved) {
        Ok(value) => value,
        Err(why) => return say(model, Tone::Refused, why.to_string()),
    };
    let gesture = (knob.id, 0.0 < turns);
    let continues = model.gesture == Some(gesture);
    match knob.set(&model.case, value) {
        Ok(case) => {
            if continues {
                model.redo.clear();
                model.case = case;
                model.recompute();
            } else {
                change(model, case);
            }
            model.gesture = Some(gesture);
        }
        Err(why) => say(model, Tone::Refused, why.to_string()),
    }
}

fn set(model: &mut Model, id: KnobId, value: Value) {
    match knob::by_id(id).set(&model.case, value) {
        Ok(case) => change(model, case),
        Err(why) => say(model, Tone::Refused, why.to_string()),
    }
}

/// Burns that last, or take no time: the same scenario seen with and without the loss.
fn toggle_burns(model: &mut Model) {
    let mut spec = model.case.spec().clone();
    let (burns, said) = match spec.burns {
        Burns::Impulsive => (
            Burns::Finite,
            "burns are finite: integrated with the engine",
        ),
        Burns::Finite => (
            Burns::Impulsive,
            "burns are impulsive: they take no time and lose nothing",
        ),
    };
    spec.burns = burns;
    changed_spec(model, spec, said);
}

fn next_steering(model: &mut Model) {
    let mut spec = model.case.spec().clone();
    let Some(vehicle) = &mut spec.vehicle else {
        return say(
            model,
            Tone::Refused,
            "there is no vehicle whose engine could be pointed; add one to the file",
        );
    };
    let (steering, said) = match vehicle.steering {
        Steering::AgainstVelocity => (Steering::FixedAttitude, "steering: fixed attitude"),
        Steering::FixedAttitude => (Steering::TurningAttitude, "steering: turning attitude"),
        Steering::TurningAttitude => (Steering::AgainstVelocity, "steering: against the velocity"),
    };
    vehicle.steering = steering;
    let said = match spec.burns {
        Burns::Finite => said.to_owned(),
        Burns::Impulsive => format!("{said} (it matters once burns are finite)"),
    };
    changed_spec(model, spec, said);
}

fn changed_spec(model: &mut Model, spec: Spec, said: impl Into<String>) {
    match Case::new(spec) {
        Ok(case) => {
            change(model, case);
            say(model, Tone::Done, said);
        }
        Err(faults) => {
            let all: Vec<String> = faults
                .iter()
                .map(|fault| format!("{} {}", fault.path, fault.message))
                .collect();
            say(model, Tone::Refused, all.join("; "));
        }
    }
}

/// Takes a new scenario as one step that can be taken back.
fn change(model: &mut Model, case: Case) {
    if case.spec() == model.case.spec() {
        return;
    }
    model.undo.push(model.case.spec().clone());
    model.redo.clear();
    take(model, case);
}

fn take(model: &mut Model, case: Case) {
    model.case = case;
    model.gesture = None;
    if !model.selected().offered(&model.case) {
        model.knob = KnobId::TargetAltitude;
    }
    model.recompute();
}

fn step_back(model: &mut Model) {
    match model.undo.pop() {
        None => say(model, Tone::Refused, "nothing to take back"),
        Some(spec) => {
            let now = model.case.spec().clone();
            // It was valid when it was left.
            if let Ok(case) = Case::new(spec) {
                model.redo.push(now);
                take(model, case);
            }
        }
    }
}

fn step_forward(model: &mut Model) {
    match model.redo.pop() {
        None => say(model, Tone::Refused, "nothing to do again"),
        Some(spec) => {
            let now = model.case.spec().clone();
            if let Ok(case) = Case::new(spec) {
                model.undo.push(now);
                take(model, case);
            }
        }
    }
}

fn to_cheapest(model: &mut Model) {
    match model.results.answer.landmarks.cheapest {
        None => say(
            model,
            Tone::Refused,
            "direct can be flown nowhere in the range, so there is no cheapest altitude",
        ),
        Some(cheapest) => {
            let grade = model.results.grade;
            go_to_radius(model, cheapest.radius_km);
            let altitude = words::altitude(model.case.altitude_km(cheapest.radius_km));
            let held = if cheapest.at_border {
                "; the curve still falls there, a limit holds it"
            } else {
                ""
            };
            say(
                model,
                Tone::Done,
                format!(
                    "cheapest direct altitude {altitude}, {}{held}{}",
                    words::dv(cheapest.dv_km_s),
                    so_far(grade)
                ),
            );
        }
    }
}

fn to_crossover(model: &mut Model) {
    let setting = model.case.setting();
    let crossovers = &model.results.answer.landmarks.crossovers;
    let here = setting.target.periapsis_km;
    let on = |radius: f64| (radius / here - 1.0).abs() <= 1e-9;
    // Standing on one, the next above is meant, and after the last the first again.
    let next = match crossovers
        .iter()
        .position(|crossover| on(crossover.radius_km))
    {
        Some(at) => crossovers.get((at + 1) % crossovers.len().max(1)).copied(),
        None => crate::study::verdict::nearest_crossover(setting, crossovers),
    };
    match next {
        None => {
            let (low, high) = landmarks::sensible_range(setting).unwrap_or((here, here));
            let text = format!(
                "no crossover from {} to {}: the same way is cheapest all along",
                words::altitude(model.case.altitude_km(low)),
                words::altitude(model.case.altitude_km(high))
            );
            say(model, Tone::Refused, text);
        }
        Some(crossover) => {
            let (name, count) = (
                format!(
                    "crossover: {} below, {} above",
                    crossover.below.name(),
                    crossover.above.name()
                ),
                crossovers.len(),
            );
            let again = if 1 < count {
                format!(" (one of {count}, x for the next)")
            } else {
                String::new()
            };
            let grade = model.results.grade;
            go_to_radius(model, crossover.radius_km);
            let altitude = words::altitude(model.case.altitude_km(crossover.radius_km));
            let text = format!("{name}, at {altitude}{again}{}", so_far(grade));
            say(model, Tone::Done, text);
        }
    }
}

fn go_to_radius(model: &mut Model, radius_km: f64) {
    let altitude = model.case.altitude_km(radius_km);
    set(model, KnobId::TargetAltitude, Value::Number(altitude));
    model.knob = KnobId::TargetAltitude;
}

fn neighbour(lens: Lens, by: isize) -> Lens {
    let count = Lens::ALL.len() as isize;
    let at = Lens::ALL
        .iter()
        .position(|(each, ..)| *each == lens)
        .unwrap_or(0) as isize;
    Lens::ALL
        .get((at + by).rem_euclid(count) as usize)
        .map_or(Lens::Curve, |(each, ..)| *each)
}

fn open(model: &mut Model, lens: Lens) {
    model.lens = lens;
    model.scroll = 0;
}

fn next_way(model: &mut Model) {
    let shown: Vec<Way> = Way::shown(model.case.setting())
        .map(|entry| entry.way)
        .collect();
    let now = model.shown_way();
    let at = shown.iter().position(|way| *way == now).unwrap_or(0);
    model.way = shown.get((at + 1) % shown.len().max(1)).copied();
    if !matches!(model.lens, Lens::Burns | Lens::Path) {
        open(model, Lens::Burns);
    }
    model.scroll = 0;
}

fn next_quantity(model: &mut Model) {
    let all = Quantity::ALL;
    let at = all
        .iter()
        .position(|quantity| *quantity == model.look.quantity)
        .unwrap_or(0);
    let has_vehicle = model.case.setting().vehicle.is_some();
    let needs_vehicle = |quantity: Quantity| {
        matches!(
            quantity,
            Quantity::Propellant | Quantity::FinalMass | Quantity::LongestBurn
        )
    };
    let next = (1..=all.len())
        .filter_map(|k| all.get((at + k) % all.len()))
        .find(|quantity| has_vehicle || !needs_vehicle(**quantity));
    if let Some(next) = next {
        model.look.quantity = *next;
        model.lens = Lens::Curve;
        model.recompute_curve();
    }
}

/// Looks closer at the first burn or wider, from the cap down to the gap between floor and surface.
fn zoom_path(model: &mut Model, factor: f64) {
    let way = model.shown_way();
    let Some(plan) = model.results.answer.plan(way) else {
        return;
    };
    let scene = Scene::new(&model.case, plan);
    let closest = View::closest_zoom(&scene);
    let widest = View::to_the_cap(&scene, 80, 24).zoom.min(1.0);
    let wanted = model.path_zoom * factor;
    if (widest..=closest.max(1.0)).contains(&wanted) {
        model.path_zoom = wanted;
    } else if 1.0 < factor {
        say(
            model,
            Tone::Refused,
            "this is as close as there is something to see",
        );
    } else {
        say(model, Tone::Refused, "this is as wide as the cap");
    }
}

/// Narrows or widens the range shown round the marker, by a factor in the logarithm of the radius.
fn zoom(model: &mut Model, factor: f64) {
    let (Some((low, high)), Some((whole_low, whole_high))) = (
        results::shown_range(&model.case, &model.look),
        landmarks::sensible_range(model.case.setting()),
    ) else {
        return say(
            model,
            Tone::Refused,
            "no altitude is left between floor and cap to look at",
        );
    };
    let here = model
        .case
        .setting()
        .target
        .periapsis_km
        .clamp(whole_low, whole_high);
    let half = 0.5 * factor * (high / low).ln();
    if half < 5e-5 {
        return say(
            model,
            Tone::Refused,
            "this is as close as the axis has digits for",
        );
    }
    let (from, to) = (here * (-half).exp(), here * half.exp());
    model.look.zoom = if from <= whole_low && whole_high <= to {
        None
    } else {
        Some((from.max(whole_low), to.min(whole_high)))
    };
    model.lens = Lens::Curve;
    model.recompute_curve();
}

fn paste(model: &mut Model, pasted: &str) {
    // Only the first line, without control characters: a paste is a value or a name, never a command.
    let line: String = pasted
        .lines()
        .next()
        .unwrap_or("")
        .chars()
        .filter(|c| !c.is_control())
        .take(200)
        .collect();
    match &mut model.overlay {
        Some(Overlay::Entry { text, .. } | Overlay::SaveAs { text }) => push_text(text, &line),
        None if line
            .trim_start()
            .starts_with(|c: char| c.is_ascii_digit() || c == '-' || c == '.') =>
        {
            model.overlay = Some(Overlay::Entry {
                knob: model.knob,
                text: line,
            });
        }
        _ => {}
    }
}

/// Longest text a prompt takes.
const LONGEST_TEXT: usize = 400;

fn push_text(text: &mut String, more: &str) {
    for c in more.chars() {
        if text.chars().count() < LONGEST_TEXT {
            text.push(c);
        }
    }
}

/// Edits a prompt's text; says whether the key was meant for it.
fn edit(text: &mut String, key: &KeyEvent) -> bool {
    let control = key.modifiers.contains(KeyModifiers::CONTROL);
    match key.code {
        KeyCode::Char('u') if control => text.clear(),
        KeyCode::Char('w') if control => {
            let kept = text.trim_end().rfind(' ').map_or(0, |at| at + 1);
            text.truncate(kept);
        }
        KeyCode::Char(c) if !control && !c.is_control() => {
            push_text(text, c.encode_utf8(&mut [0; 4]))
        }
        KeyCode::Backspace => {
            text.pop();
        }
        _ => return false,
    }
    true
}

fn on_entry_key(model: &mut Model, key: &KeyEvent, knob: KnobId, mut text: String) -> Vec<Effect> {
    match key.code {
        KeyCode::Esc => return Vec::new(),
        KeyCode::Enter => {
            let value = entry::parse(knob::by_id(knob), &text);
            let result = value.and_then(|value| {
                knob::by_id(knob)
                    .set(&model.case, value)
                    .map_err(|why: Refused| why.to_string())
            });
            match result {
                Ok(case) => {
                    change(model, case);
                    return Vec::new();
                }
                // Nothing changes and nothing typed is lost; the reason stands in the footer.
                Err(why) => say(model, Tone::Refused, why),
            }
        }
        _ => {
            edit(&mut text, key);
        }
    }
    model.overlay = Some(Overlay::Entry { knob, text });
    Vec::new()
}

fn on_save_as_key(model: &mut Model, key: &KeyEvent, mut text: String) -> Vec<Effect> {
    match key.code {
        KeyCode::Esc => return Vec::new(),
        KeyCode::Enter => {
            let name = text.trim();
            if name.is_empty() {
                say(model, Tone::Refused, "type a file name, or Esc");
            } else {
                let path = PathBuf::from(name);
                if model.file.path.as_ref() == Some(&path) {
                    return save(model, false);
                }
                model.overlay = Some(Overlay::SaveAs { text: text.clone() });
                return vec![save_effect(model, path, None, false)];
            }
        }
        _ => {
            edit(&mut text, key);
        }
    }
    model.overlay = Some(Overlay::SaveAs { text });
    Vec::new()
}

fn save_as(model: &mut Model) {
    let text = match &model.file.path {
        Some(path) => path.display().to_string(),
        None => "scenario.ron".to_owned(),
    };
    model.overlay = Some(Overlay::SaveAs { text });
}

fn save(model: &mut Model, force: bool) -> Vec<Effect> {
    match model.file.path.clone() {
        None => {
            save_as(model);
            Vec::new()
        }
        Some(path) => {
            if !force && !model.unsaved() {
                say(
                    model,
                    Tone::Done,
                    format!(
                        "{} is up to date; nothing to save",
                        crate::visible::ascii(&model.name())
                    ),
                );
                return Vec::new();
            }
            let expected = model.file.stamp.clone();
            vec![save_effect(model, path, expected, force)]
        }
    }
}

fn save_effect(model: &Model, path: PathBuf, expected: Option<Stamp>, force: bool) -> Effect {
    Effect::Save {
        path,
        text: write::patch(&model.file.text, model.case.spec()),
        expected,
        force,
        case: Box::new(model.case.clone()),
    }
}

fn saved(model: &mut Model, result: Result<Written, SaveError>) {
    let asked_name = matches!(model.overlay, Some(Overlay::SaveAs { .. }));
    match result {
        Ok(Written {
            path,
            text,
            stamp,
            case,
        }) => {
            model.file.path = Some(path);
            model.file.text = text;
            model.file.stamp = Some(stamp);
            model.file.saved = case.spec().clone();
            if asked_name {
                model.overlay = None;
            }
            say(
                model,
                Tone::Done,
                format!(
                    "saved {}; the version before is kept with a ~",
                    crate::visible::ascii(&model.name())
                ),
            );
        }
        Err(why) => {
            let text = crate::visible::ascii(&why.to_string()).into_owned();
            if why.is_changed() {
                let question = if asked_name {
                    Question::Replace
                } else {
                    Question::Overwrite
                };
                // The name stays in the prompt's place: it is taken from the message's path when answered.
                if let Some(Overlay::SaveAs { text }) = &model.overlay {
                    model.pending_path = Some(PathBuf::from(text.trim()));
                }
                model.overlay = Some(Overlay::Ask(question));
            }
            say(model, Tone::Refused, text);
        }
    }
}

fn reload(model: &mut Model) -> Vec<Effect> {
    let Some(path) = model.file.path.clone() else {
        say(
            model,
            Tone::Refused,
            "the built-in scenario has no file to read; S saves it under a name",
        );
        return Vec::new();
    };
    if model.unsaved() {
        model.overlay = Some(Overlay::Ask(Question::Reload));
        return Vec::new();
    }
    vec![Effect::Load(path)]
}

fn reloaded(model: &mut Model, result: Result<Box<Loaded>, String>) {
    match result {
        Ok(loaded) => {
            let loaded = *loaded;
            model.file.text = loaded.text;
            model.file.stamp = loaded.stamp;
            model.file.saved = loaded.case.spec().clone();
            // What was there before the reload can be had back by undo.
            change(model, loaded.case);
            say(
                model,
                Tone::Done,
                format!(
                    "read {} again; u brings back what was here",
                    crate::visible::ascii(&model.name())
                ),
            );
        }
        Err(why) => say(model, Tone::Refused, why),
    }
}

fn quit(model: &mut Model) -> Vec<Effect> {
    if model.unsaved() {
        model.overlay = Some(Overlay::Ask(Question::Quit));
        return Vec::new();
    }
    vec![Effect::Quit]
}

fn answer(model: &mut Model, key: &KeyEvent, question: Question) -> Vec<Effect> {
    let yes = matches!(key.code, KeyCode::Char('y' | 'Y'));
    let pending = model.pending_path.take();
    if question == Question::Quit && keymap::action(key) == Some(Action::Save) {
        return save(model, false);
    }
    if !yes {
        return Vec::new();
    }
    match question {
        Question::Quit => vec![Effect::Quit],
        Question::Reload => model
            .file
            .path
            .clone()
            .map(Effect::Load)
            .into_iter()
            .collect(),
        Question::Overwrite => save(model, true),
        Question::Replace => pending
            .map(|path| save_effect(model, path, None, true))
            .into_iter()
            .collect(),
    }
}
