//! `stoop check`: is the file sound, and do other routes agree.

use super::args::CheckArgs;
use super::{Outcome, output, source};
use crate::crew::Threads;
use crate::report::checks;
use crate::scenario::write;
use crate::study::{Answer, check, landmarks};
use anyhow::{Result, anyhow};

pub(super) fn run(args: &CheckArgs) -> Result<Outcome> {
    let loaded = source::open(&args.source.file, &args.source.set)?;
    let setting = loaded.case.setting();
    let answer = Answer::with(setting, landmarks::scan_points(setting), &Threads::all())
        .map_err(|_| anyhow!("the computation was stopped"))?;
    let checks = check::check(&loaded.case, &answer);
    let mut text = format!(
        "{} is sound (fingerprint {})\n\n",
        source::name(&args.source.file),
        write::fingerprint(loaded.case.spec())
    );
    if answer.best.is_none() {
        text.push_str("no way can be flown; only the ties of the ideal model are checked\n\n");
    }
    text.push_str(&checks::text(&checks));
    output::put_beside(&args.source, &args.output, &text)?;
    Ok(Outcome::of(
        answer.best.is_some() && checks.iter().all(check::Check::passed),
    ))
}
