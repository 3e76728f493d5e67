//! Arguments in, exit code out. The only place that ends the process.

use anyhow::Context;
use clap::Parser;
use std::io::{IsTerminal, Write};
use std::process::ExitCode;
use stoop::cli::{self, Cli};
use stoop::tui::{self, theme::Theme};

/// Cannot run.
const CANNOT: u8 = 2;

fn main() -> ExitCode {
    let result = match Cli::try_parse() {
        Ok(cli) => run(&cli),
        Err(error) if error.use_stderr() => {
            say(&cli::usage(&error));
            return ExitCode::from(CANNOT);
        }
        // Help and version are answers.
        Err(help) => help
            .print()
            .and_then(|()| std::io::stdout().flush())
            .map(|()| 0)
            .context("standard output cannot be written"),
    };
    match result {
        Ok(code) => ExitCode::from(code),
        Err(error) if cli::is_closed_pipe(&error) => ExitCode::SUCCESS,
        Err(error) => {
            say(&cli::explain(&error));
            ExitCode::from(CANNOT)
        }
    }
}

fn run(cli: &Cli) -> anyhow::Result<u8> {
    if let Some(command) = &cli.command {
        return Ok(cli::run(command)?.code());
    }
    let args = &cli.explore;
    let (loaded, path) = cli::opened(args)?;
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

/// Says something on standard error; if that is closed too, nothing can be said.
fn say(text: &str) {
    let _ = writeln!(std::io::stderr(), "{text}");
}
