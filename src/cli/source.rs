//! The scenario of a command: a file or standard input, with knobs set.

use crate::scenario::file::{self, Loaded};
use crate::study::case::nearest;
use crate::study::entry;
use crate::study::knob::{self, KNOBS, Knob};
use crate::visible::ascii;
use anyhow::{Result, anyhow};
use std::path::Path;

/// Reads a scenario (`-` is standard input) and sets knobs in it, in the order given.
///
/// # Errors
/// The file cannot be read or has faults; a knob is unknown or refuses its value.
pub fn open(path: &Path, settings: &[String]) -> Result<Loaded> {
    let mut loaded = if path.as_os_str() == "-" {
        file::read_from(std::io::stdin().lock(), "standard input")?
    } else {
        file::load(path)?
    };
    set_all(&mut loaded, settings)?;
    Ok(loaded)
}

/// A scenario with knobs set in it.
///
/// # Errors
/// A knob is unknown or refuses its value.
pub fn with_settings(mut loaded: Loaded, settings: &[String]) -> Result<Loaded> {
    set_all(&mut loaded, settings)?;
    Ok(loaded)
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
