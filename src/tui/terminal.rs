//! The terminal as it was found and as the explorer needs it. Restoring is safe to do twice and from a panic.

use anyhow::Context;
use crossterm::cursor::{Hide, Show};
use crossterm::event::{DisableBracketedPaste, EnableBracketedPaste};
use crossterm::execute;
use crossterm::terminal::{
    EnterAlternateScreen, LeaveAlternateScreen, disable_raw_mode, enable_raw_mode,
};
use ratatui::Terminal;
use ratatui::backend::CrosstermBackend;
use ratatui::layout::{Position, Rect};
use std::io::{self, BufWriter, Stdout};
use std::sync::Once;
use std::sync::atomic::{AtomicBool, Ordering};

/// The screen drawn to. Buffered, so that a frame leaves in one write.
pub(super) type Screen = Terminal<CrosstermBackend<BufWriter<Stdout>>>;

/// Whether the terminal is in the explorer's hands.
static ENTERED: AtomicBool = AtomicBool::new(false);
static HOOK: Once = Once::new();

/// Takes the terminal: raw mode, alternate screen, bracketed paste, no cursor.
pub(super) fn enter() -> anyhow::Result<Screen> {
    HOOK.call_once(|| {
        let drawing = std::thread::current().id();
        let before = std::panic::take_hook();
        std::panic::set_hook(Box::new(move |info| {
            // A panic on another thread must not tear down a screen that is still running.
            if std::thread::current().id() == drawing {
                restore();
            }
            before(info);
        }));
    });
    take().context("raw mode or the alternate screen is not available")?;
    match Terminal::new(CrosstermBackend::new(BufWriter::with_capacity(
        64 * 1024,
        io::stdout(),
    ))) {
        Ok(screen) => Ok(screen),
        Err(error) => {
            restore();
            Err(error.into())
        }
    }
}

/// Takes the terminal again after the shell had it, and forgets what was drawn.
pub(super) fn enter_again(screen: &mut Screen) -> anyhow::Result<()> {
    take().context("the terminal cannot be taken back")?;
    forget(screen)
}

/// Clears the screen and forgets what was drawn, so that the next frame is drawn whole.
///
/// Not `Terminal::clear`: that asks the terminal for its cursor, and the answer would go to the thread that reads keys.
pub(super) fn forget(screen: &mut Screen) -> anyhow::Result<()> {
    let size = screen
        .size()
        .context("the size of the terminal is not known")?;
    screen
        .resize(Rect::from((Position::ORIGIN, size)))
        .context("the terminal cannot be written to")
}

fn take() -> io::Result<()> {
    enable_raw_mode()?;
    ENTERED.store(true, Ordering::SeqCst);
    let result = execute!(
        io::stdout(),
        EnterAlternateScreen,
        EnableBracketedPaste,
        Hide
    );
    if result.is_err() {
        restore();
    }
    result
}

/// Gives the terminal back as it was found. Does nothing if it is not held; errors are of no use to anybody here.
pub(super) fn restore() {
    if ENTERED.swap(false, Ordering::SeqCst) {
        let _ = execute!(
            io::stdout(),
            DisableBracketedPaste,
            Show,
            LeaveAlternateScreen
        );
        let _ = disable_raw_mode();
    }
}
