//! Signals of the operating system as events. Everything Unix lives here; elsewhere there is nothing to watch.

use super::Event;
use std::sync::mpsc::Sender;

/// A signal, by what it asks for.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Signal {
    /// End with this exit code (128 + number, as shells report it).
    #[cfg_attr(not(unix), allow(dead_code))]
    End(u8),
    /// Stop and go to the shell.
    #[cfg_attr(not(unix), allow(dead_code))]
    Stop,
    /// Back from the shell.
    #[cfg_attr(not(unix), allow(dead_code))]
    Continue,
}

/// Sends signals into the channel from a thread that sleeps until one comes.
#[cfg(unix)]
pub(super) fn watch(sender: Sender<Event>) -> std::io::Result<()> {
    use signal_hook::consts::{SIGCONT, SIGHUP, SIGINT, SIGTERM, SIGTSTP};
    let mut signals =
        signal_hook::iterator::Signals::new([SIGTERM, SIGHUP, SIGINT, SIGTSTP, SIGCONT])?;
    std::thread::spawn(move || {
        for number in &mut signals {
            let signal = match number {
                SIGTSTP => Signal::Stop,
                SIGCONT => Signal::Continue,
                // The numbers watched here are small and positive.
                number => Signal::End(u8::try_from(128 + number).unwrap_or(2)),
            };
            if sender.send(Event::Signal(signal)).is_err() {
                return;
            }
        }
    });
    Ok(())
}

/// Stops this process as Ctrl-Z would; returns when the shell continues it.
#[cfg(unix)]
pub(super) fn stop_self() {
    // An error would mean that stopping is not possible; going on is then the right thing.
    let _ = signal_hook::low_level::emulate_default_handler(signal_hook::consts::SIGTSTP);
}

#[cfg(not(unix))]
pub(super) fn watch(_: Sender<Event>) -> std::io::Result<()> {
    Ok(())
}

#[cfg(not(unix))]
pub(super) fn stop_self() {}
