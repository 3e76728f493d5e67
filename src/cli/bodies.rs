//! `stoop bodies`: the catalogue with its sources.

use super::args::{ListArgs, ListFormat};
use super::{Outcome, output};
use crate::report::lists;
use anyhow::Result;

pub(super) fn run(args: &ListArgs) -> Result<Outcome> {
    let text = match args.format {
        ListFormat::Text => lists::bodies_text(),
        ListFormat::Json => lists::bodies_json(),
    };
    output::put(&args.output, &text)?;
    Ok(Outcome::Answered)
}
