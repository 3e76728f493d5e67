//! The explorer: one screen on one scenario, everything recomputed as knobs turn.
//!
//! `update(&mut Model, Msg) -> Vec<Effect>` changes the state, `view(&Model, …)` draws it, and the loop here carries out
//! the effects. The loop sleeps until a key, a signal or a new size arrives: no timers, no polling.

pub mod action;
pub mod keymap;
pub mod layout;
pub mod model;
pub mod results;
mod signals;
mod terminal;
pub mod theme;
pub mod update;
pub mod view;
pub mod worker;

use crate::report::plot::Glyphs;
use crate::scenario::file::{self, Loaded};
use anyhow::Context;
use crossterm::event::{Event as TerminalEvent, KeyEventKind};
use model::Model;
use std::path::PathBuf;
use std::sync::mpsc::{Receiver, Sender, channel};
use theme::Theme;
use update::{Effect, Msg, Written, update};
use worker::Worker;

/// How the explorer is started.
#[derive(Clone, Debug)]
pub struct Options {
    /// Symbols.
    pub glyphs: Glyphs,
    /// Colours.
    pub theme: Theme,
}

/// Everything the loop can be woken by.
enum Event {
    /// From the terminal.
    Terminal(TerminalEvent),
    /// From the operating system.
    Signal(signals::Signal),
    /// The terminal is gone.
    InputEnded(String),
    /// From the worker.
    Worker(worker::Report),
}

/// Runs the explorer until it is left; returns the exit code.
///
/// # Errors
/// The terminal cannot be set up or written to. It is restored first.
pub fn run(loaded: Loaded, path: Option<PathBuf>, options: &Options) -> anyhow::Result<u8> {
    let size = crossterm::terminal::size().context("the size of the terminal is not known")?;
    let mut model = Model::new(loaded, path, size, options.glyphs);
    let (sender, events) = channel();
    signals::watch(sender.clone()).context("signals cannot be watched")?;
    let mut screen = terminal::enter().context("the terminal cannot be set up")?;
    let reports = sender.clone();
    let mut worker = Worker::start(move |report| reports.send(Event::Worker(report)).is_ok());
    watch_input(sender);
    let result = explore(&mut model, &events, &mut screen, &mut worker, options.theme);
    worker.stop();
    terminal::restore();
    result
}

fn explore(
    model: &mut Model,
    events: &Receiver<Event>,
    screen: &mut terminal::Screen,
    worker: &mut Worker,
    theme: Theme,
) -> anyhow::Result<u8> {
    loop {
        if let Some(job) = model.wanted.take() {
            worker.ask(job);
        }
        screen
            .draw(|frame| view::view(model, theme, frame))
            .context("the terminal cannot be written to")?;
        // Sleep until something happens; then take everything that has piled up before drawing once.
        let mut next = Some(events.recv().context("the event sources have ended")?);
        while let Some(event) = next {
            match event {
                Event::Signal(signals::Signal::End(code)) => return Ok(code),
                Event::Worker(report) => {
                    update(model, Msg::Reported(report));
                }
                Event::InputEnded(why) => anyhow::bail!("the terminal cannot be read: {why}"),
                Event::Signal(signals::Signal::Stop) => {
                    if let Some(code) = carry_out(model, screen, vec![Effect::Suspend])? {
                        return Ok(code);
                    }
                }
                Event::Signal(signals::Signal::Continue) => {
                    terminal::enter_again(screen)?;
                    let effects = update(model, Msg::Resumed);
                    carry_out(model, screen, effects)?;
                }
                Event::Terminal(event) => {
                    if let Some(msg) = message(event) {
                        let effects = update(model, msg);
                        // What ran for the state before is of no use, and the cores are wanted for the next frame.
                        if model.wanted.is_some() || model.working.is_none() {
                            worker.stop();
                        }
                        if let Some(code) = carry_out(model, screen, effects)? {
                            return Ok(code);
                        }
                    }
                }
            }
            next = events.try_recv().ok();
        }
    }
}

/// A terminal's event as a message. Releases of keys, mouse and focus mean nothing here.
fn message(event: TerminalEvent) -> Option<Msg> {
    match event {
        TerminalEvent::Key(key) if key.kind != KeyEventKind::Release => Some(Msg::Key(key)),
        TerminalEvent::Paste(text) => Some(Msg::Paste(text)),
        TerminalEvent::Resize(width, height) => Some(Msg::Resize(width, height)),
        _ => None,
    }
}

/// Carries out effects; `Some(code)` ends the program.
fn carry_out(
    model: &mut Model,
    screen: &mut terminal::Screen,
    effects: Vec<Effect>,
) -> anyhow::Result<Option<u8>> {
    for effect in effects {
        match effect {
            Effect::Quit => return Ok(Some(0)),
            Effect::Repaint => {
                terminal::forget(screen)?;
                let (width, height) = crossterm::terminal::size().unwrap_or(model.size);
                update(model, Msg::Resize(width, height));
            }
            Effect::Suspend => {
                terminal::restore();
                signals::stop_self();
                terminal::enter_again(screen)?;
                let effects = update(model, Msg::Resumed);
                if let Some(code) = carry_out(model, screen, effects)? {
                    return Ok(Some(code));
                }
            }
            Effect::Save {
                path,
                text,
                expected,
                force,
                case,
            } => {
                let result =
                    file::save(&path, &text, expected.as_ref(), force).map(|stamp| Written {
                        path,
                        text,
                        stamp,
                        case,
                    });
                update(model, Msg::Saved(result));
            }
            Effect::Load(path) => {
                let result = file::load(&path).map(Box::new).map_err(|error| {
                    // A screen's footer has one line: the first fault, and how many more there are.
                    let text = error.to_string();
                    let mut lines = text.lines();
                    let first =
                        crate::visible::ascii(lines.next().unwrap_or("the file cannot be read"))
                            .into_owned();
                    match lines.count() {
                        0 => first,
                        more => format!("{first} (and {more} more; stoop check lists them)"),
                    }
                });
                update(model, Msg::Reloaded(result));
            }
        }
    }
    Ok(None)
}

/// Reads the terminal on a thread of its own, so that signals and keys meet in one channel.
fn watch_input(sender: Sender<Event>) {
    std::thread::spawn(move || {
        loop {
            let event = match crossterm::event::read() {
                Ok(event) => Event::Terminal(event),
                Err(error) => {
                    // The receiver may be gone already; then nobody needs to know.
                    let _ = sender.send(Event::InputEnded(error.to_string()));
                    return;
                }
            };
            if sender.send(event).is_err() {
                return;
            }
        }
    });
}
