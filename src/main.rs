//! Arguments in, exit code out. The only place that ends the process.

use clap::Parser;
use std::io::{IsTerminal, Write};
use std::path::Path;
use std::process::ExitCode;
use stoop::cli::{self, Cli};
use stoop::scenario::file::{self, LoadError};
use stoop::tui::{self, theme::Theme};

fn main() -> ExitCode {
    match run(&Cli::parse()) {
        Ok(code) => ExitCode::from(code),
        Err(error) if is_closed_pipe(&error) => ExitCode::SUCCESS,
        Err(error) => {
            // Faults of a file begin with their place, as editors and other programs expect it. Nothing can be said if
            // standard error is closed too.
            let faults = matches!(error.downcast_ref(), Some(LoadError::Faulty(_)));
            let name = if faults { "" } else { "stoop: " };
            let _ = writeln!(std::io::stderr(), "{name}{error:#}");
            ExitCode::from(2)
        }
    }
}

fn run(cli: &Cli) -> anyhow::Result<u8> {
    if let Some(command) = &cli.command {
        return Ok(cli::run(command)?.code());
    }
    let args = &cli.explore;
    let (loaded, path) = match &args.file {
        Some(path) => {
            // What came through a pipe has no file to be saved into.
            let is_file = path != Path::new("-");
            (cli::open(path, &args.set)?, is_file.then(|| path.clone()))
        }
        None => (cli::with_settings(file::built_in(), &args.set)?, None),
    };
    if !std::io::stdout().is_terminal() || !std::io::stdin().is_terminal() {
        return Ok(cli::plain_brief(&loaded, args.glyphs)?.code());
    }
    let no_colour = std::env::var_os("NO_COLOR").is_some_and(|value| !value.is_empty());
    let theme = if no_colour {
        Theme::PLAIN
    } else {
        Theme::COLOURED
    };
    tui::run(
        loaded,
        path,
        &tui::Options {
            glyphs: args.glyphs.into(),
            theme,
        },
    )
}

/// Whether the reader of our output simply stopped reading.
fn is_closed_pipe(error: &anyhow::Error) -> bool {
    error.chain().any(|cause| {
        cause
            .downcast_ref::<std::io::Error>()
            .is_some_and(|error| error.kind() == std::io::ErrorKind::BrokenPipe)
    })
}
