//! `stoop new`: a commented scenario to start from.

use super::args::NewArgs;
use super::{Outcome, output};
use crate::scenario::write;
use anyhow::Result;

pub(super) fn run(args: &NewArgs) -> Result<Outcome> {
    output::put_new(&args.output, write::template())?;
    Ok(Outcome::Answered)
}
