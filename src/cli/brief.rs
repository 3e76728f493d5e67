//! `stoop brief`: the written result.

use super::args::{BriefArgs, BriefFormat, GlyphsArg};
use super::{Outcome, output, source};
use crate::crew::Threads;
use crate::report::brief::Brief;
use crate::scenario::file::Loaded;
use crate::scenario::write;
use anyhow::{Result, anyhow};

pub(super) fn run(args: &BriefArgs) -> Result<Outcome> {
    let loaded = source::open(&args.source.file, &args.source.set)?;
    let crew = Threads::all();
    let brief = brief(&loaded, &crew)?;
    let text = match args.format {
        BriefFormat::Text => brief.text(args.glyphs.into()),
        BriefFormat::Markdown => brief.markdown(),
        BriefFormat::Json => brief.json(),
    };
    output::put_beside(&args.source, &args.output, &text)?;
    Ok(Outcome::of(brief.flyable()))
}

fn brief<'a>(loaded: &'a Loaded, crew: &'a Threads) -> Result<Brief<'a>> {
    Brief::with(&loaded.case, write::fingerprint(loaded.case.spec()), crew)
        .map_err(|_| anyhow!("the computation was stopped"))
}

pub(super) fn print(loaded: &Loaded, glyphs: GlyphsArg) -> Result<Outcome> {
    let crew = Threads::all();
    let brief = brief(loaded, &crew)?;
    output::to_stdout(&brief.text(glyphs.into()))?;
    Ok(Outcome::of(brief.flyable()))
}
