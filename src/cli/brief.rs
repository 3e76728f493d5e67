//! `stoop brief`: the written result.

use super::args::{BriefArgs, BriefFormat, GlyphsArg};
use super::{Outcome, output, source};
use crate::report::brief::Brief;
use crate::scenario::file::Loaded;
use crate::scenario::write;
use anyhow::Result;

pub(super) fn run(args: &BriefArgs) -> Result<Outcome> {
    let loaded = source::open(&args.source.file, &args.source.set)?;
    let brief = Brief::of(&loaded.case, write::fingerprint(loaded.case.spec()));
    let text = match args.format {
        BriefFormat::Text => brief.text(args.glyphs.into()),
        BriefFormat::Markdown => brief.markdown(),
        BriefFormat::Json => brief.json(),
    };
    output::put_beside(&args.source, &args.output, &text)?;
    Ok(Outcome::of(brief.flyable()))
}

pub(super) fn print(loaded: &Loaded, glyphs: GlyphsArg) -> Result<Outcome> {
    let brief = Brief::of(&loaded.case, write::fingerprint(loaded.case.spec()));
    output::to_stdout(&brief.text(glyphs.into()))?;
    Ok(Outcome::of(brief.flyable()))
}
