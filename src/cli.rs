//! The command line: what is typed, what it means, one file a command.
//!
//! Commands return an [`Outcome`]; only `main` ends the process.

mod args;
mod bodies;
mod brief;
mod check;
mod knobs;
mod new;
mod output;
mod source;
mod sweep;
mod trouble;

pub use args::{Cli, Command, GlyphsArg};
pub use source::opened;
pub use trouble::{explain, is_closed_pipe, usage};

use crate::scenario::file::Loaded;
use anyhow::Result;

/// How a command ended.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Outcome {
    /// Answered.
    Answered,
    /// Answered, but nothing is flyable, or a check disagrees.
    Nothing,
}

impl Outcome {
    /// The exit code.
    pub fn code(self) -> u8 {
        match self {
            Outcome::Answered => 0,
            Outcome::Nothing => 1,
        }
    }

    fn of(flyable: bool) -> Self {
        if flyable {
            Outcome::Answered
        } else {
            Outcome::Nothing
        }
    }
}

/// Runs a command.
///
/// # Errors
/// Whatever keeps it from answering, as a sentence.
pub fn run(command: &Command) -> Result<Outcome> {
    match command {
        Command::Brief(args) => brief::run(args),
        Command::Sweep(args) => sweep::run(args),
        Command::Check(args) => check::run(args),
        Command::New(args) => new::run(args),
        Command::Bodies(args) => bodies::run(args),
        Command::Knobs(args) => knobs::run(args),
    }
}

/// The brief as text on standard output: what the explorer gives where there is no terminal.
///
/// # Errors
/// As [`run`].
pub fn plain_brief(loaded: &Loaded, glyphs: GlyphsArg) -> Result<Outcome> {
    brief::print(loaded, glyphs)
}
