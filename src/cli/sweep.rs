//! `stoop sweep`: a curve over one knob, a map over two.

use super::args::{SweepArgs, SweepFormat};
use super::{Outcome, output, source};
use crate::crew::Threads;
use crate::report::sweep::Sweep;
use crate::scenario::write;
use crate::study::curve::{self, Axis, Cell, MOST_POINTS};
use crate::study::entry;
use crate::study::knob::{Knob, KnobId, Value};
use crate::study::{Case, landmarks};
use anyhow::{Result, anyhow, bail};

pub(super) fn run(args: &SweepArgs) -> Result<Outcome> {
    let loaded = source::open(&args.source.file, &args.source.set)?;
    let case = &loaded.case;
    let first = axis(
        case,
        source::find(&args.over)?,
        &Ends {
            from: ("--from", args.from.as_deref()),
            to: ("--to", args.to.as_deref()),
        },
        args.points,
        args.log,
    )?;
    let second = match &args.and {
        None => None,
        Some(name) => {
            let knob = source::find(name)?;
            if knob.id == first.knob.id {
                bail!(
                    "--over and --and are both {}; a map needs two different knobs",
                    knob.name
                );
            }
            Some(axis(
                case,
                knob,
                &Ends {
                    from: ("--and-from", args.and_from.as_deref()),
                    to: ("--and-to", args.and_to.as_deref()),
                },
                args.and_points,
                args.and_log,
            )?)
        }
    };
    let crew = Threads::all();
    let cells = match &second {
        None => curve::curve_with(case, &first, &crew)
            .map_err(|_| anyhow!("the computation was stopped"))?
            .into_iter()
            .map(|row| Cell { y: 0.0, row })
            .collect(),
        Some(second) => {
            if MOST_POINTS < first.points.saturating_mul(second.points) {
                bail!(
                    "{} x {} values are not allowed: at most {MOST_POINTS} together",
                    first.points,
                    second.points
                );
            }
            curve::map_with(case, &first, second, &crew)
                .map_err(|_| anyhow!("the computation was stopped"))?
        }
    };
    let sweep = Sweep {
        case,
        first,
        second,
        cells,
        fingerprint: write::fingerprint(case.spec()),
        crew: &crew,
    };
    let text = match args.format {
        SweepFormat::Text => sweep.text(),
        SweepFormat::Csv => sweep.csv(),
        SweepFormat::Json => sweep.json(),
        SweepFormat::Svg => sweep.svg(),
    };
    output::put_beside(&args.source, &args.output, &text)?;
    Ok(Outcome::of(sweep.flyable()))
}

/// The ends of an axis as typed, each with the name of its argument.
struct Ends<'a> {
    from: (&'static str, Option<&'a str>),
    to: (&'static str, Option<&'a str>),
}

fn axis(case: &Case, knob: &'static Knob, ends: &Ends, points: usize, log: bool) -> Result<Axis> {
    // A knob that the scenario cannot have at all is refused before anything is computed.
    if !knob.offered(case)
        && let Err(why) = knob.read(case)
    {
        bail!("{}: {why}", knob.name);
    }
    let sensible = || {
        (knob.id == KnobId::TargetAltitude)
            .then(|| landmarks::sensible_range(case.setting()))
            .flatten()
    };
    let end = |(name, text): (&str, Option<&str>), pick: fn((f64, f64)) -> f64| -> Result<f64> {
        match text {
            Some(text) => match entry::parse(knob, text).map_err(|why| anyhow!("{name}: {why}"))? {
                Value::Number(number) => Ok(number),
                Value::Best => bail!("{name} takes a number, not `best`"),
            },
            None if log && sensible().is_some_and(|range| case.altitude_km(pick(range)) <= 0.0) => {
                bail!(
                    "--log needs {name} above 0 here, since the range of {} begins at the surface",
                    knob.name
                )
            }
            None => sensible()
                .map(|range| case.altitude_km(pick(range)))
                .ok_or_else(|| {
                    anyhow!(
                        "{} needs {} and {} ({})",
                        knob.name,
                        ends.from.0,
                        ends.to.0,
                        knob.range_field().range()
                    )
                }),
        }
    };
    let (from, to) = (
        end(ends.from, |range| range.0)?,
        end(ends.to, |range| range.1)?,
    );
    Axis::new(knob, from, to, points, log).map_err(|why| anyhow!(why))
}
