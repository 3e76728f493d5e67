//! The scenario of a command: a file or standard input, with knobs set.

use super::args::{Cli, ExploreArgs};
use crate::scenario::file::{self, Loaded};
use crate::study::case::nearest;
use crate::study::entry;
use crate::study::knob::{self, KNOBS, Knob};
use crate::visible::{ascii, visible};
use anyhow::{Result, anyhow, bail};
use clap::CommandFactory;
use std::path::{Path, PathBuf};

const STDIN: &str = "standard input";

/// Reads a scenario (`-` is standard input) and sets knobs in it, in the order given.
///
/// # Errors
/// The file cannot be read or has faults; a knob is unknown or refuses its value.
pub(super) fn open(path: &Path, settings: &[String]) -> Result<Loaded> {
    let mut loaded = if path.as_os_str() == "-" {
        file::read_from(std::io::stdin().lock(), STDIN)?
    } else {
        file::load(path)?
    };
    set_all(&mut loaded, settings)?;
    Ok(loaded)
}

/// What the explorer opens: a file, standard input, or the built-in scenario, with knobs set; and the file to save into, if any.
///
/// # Errors
/// The file cannot be read or has faults, or a knob refuses its value; a name that is no file but nearly a command is answered with the command.
pub fn opened(args: &ExploreArgs) -> Result<(Loaded, Option<PathBuf>)> {
    let Some(path) = &args.file else {
        let mut loaded = file::built_in();
        set_all(&mut loaded, &args.set)?;
        return Ok((loaded, None));
    };
    if let Some(command) = meant_command(path) {
        bail!(
            "{} is no file and no command, did you mean \"stoop {command}\"?",
            name(path)
        );
    }
    let loaded = open(path, &args.set)?;
    // What came through a pipe has no file to be saved into.
    let is_file = path.as_os_str() != "-";
    Ok((loaded, is_file.then(|| path.clone())))
}

/// The command that a mistyped name comes near to, where there is no file of that name.
fn meant_command(path: &Path) -> Option<String> {
    let typed = path.to_str()?;
    if typed.contains(['.', '/', '\\']) || path.exists() {
        return None;
    }
    Cli::command()
        .get_subcommands()
        .map(|command| command.get_name().to_owned())
        .find(|command| 0.85 <= strsim::jaro_winkler(typed, command))
}

/// A scenario's name for sentences.
pub(super) fn name(path: &Path) -> String {
    if path.as_os_str() == "-" {
        STDIN.to_owned()
    } else {
        visible(&path.display().to_string()).into_owned()
    }
}

fn set_all(loaded: &mut Loaded, settings: &[String]) -> Result<()> {
    for setting in settings {
        let (name, value) = setting.split_once('=').ok_or_else(|| {
            anyhow!(
                "--set {}: write KNOB=VALUE, like target-altitude=9000",
                ascii(setting)
            )
        })?;
        let knob = find(name)?;
        let value =
            entry::parse(knob, value).map_err(|why| anyhow!("--set {}: {why}", ascii(setting)))?;
        loaded.case = knob
            .set(&loaded.case, value)
            .map_err(|why| anyhow!("--set {}: {why}", ascii(setting)))?;
    }
    Ok(())
}

/// A knob by name.
pub(super) fn find(name: &str) -> Result<&'static Knob> {
    let name = name.trim();
    knob::by_name(name).ok_or_else(|| {
        if ["depart", "arrive"].contains(&name) {
            return anyhow!("{name} belongs to dated arrivals, which are not available in this version; use an Asymptote arrival and v-inf");
        }
        let near = nearest(name, KNOBS.iter().map(|knob| knob.name));
        anyhow!("there is no knob \"{}\"; `stoop knobs` lists them{near}", ascii(name))
    })
}
