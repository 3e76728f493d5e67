//! `stoop knobs`: every knob with unit, range and meaning.

use super::args::{ListArgs, ListFormat};
use super::{Outcome, output};
use crate::report::lists;
use anyhow::Result;

pub(super) fn run(args: &ListArgs) -> Result<Outcome> {
    let text = match args.format {
        ListFormat::Text => lists::knobs_text(),
        ListFormat::Json => lists::knobs_json(),
    };
    output::put(&args.output, &text)?;
    Ok(Outcome::Answered)
}
