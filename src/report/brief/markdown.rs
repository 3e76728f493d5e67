//! The brief as Markdown (CommonMark with tables). Foreign text is escaped.

use super::{Brief, facts, landmark_lines};
use crate::report::plot::Glyphs;
use crate::report::{sources, words};
use crate::visible::visible;
use std::fmt::Write;

/// Text as Markdown shows it literally.
pub(super) fn escape(text: &str) -> String {
    let mut out = String::with_capacity(text.len());
    for c in visible(text).chars() {
        if c.is_ascii_punctuation() && !".,;:/()%'\"=?".contains(c) {
            out.push('\\');
        }
        out.push(c);
    }
    out
}

/// Renders the brief.
pub(super) fn render(brief: &Brief) -> String {
    let mut out = String::new();
    // Writing to a string cannot fail.
    let _ = write(brief, &mut out);
    out
}

fn write(brief: &Brief, out: &mut String) -> std::fmt::Result {
    let spec = brief.case.spec();
    let title = if spec.title.is_empty() {
        "Arrival brief".to_owned()
    } else {
        escape(&spec.title)
    };
    writeln!(out, "# {title}\n")?;
    if !spec.note.is_empty() {
        writeln!(out, "{}\n", escape(&spec.note))?;
    }
    writeln!(
        out,
        "**{}**\n\n{}\n",
        escape(&brief.sentence),
        escape(&brief.why)
    )?;
    list(out, brief.shifts.iter().map(String::as_str))?;
    writeln!(out, "## Case\n\n| | |\n|---|---|")?;
    for (name, fact) in facts(brief) {
        writeln!(out, "| {name} | {} |", escape(&fact))?;
    }
    writeln!(out, "\n## Ways\n")?;
    writeln!(
        out,
        "| way | cost m/s | dv m/s | propellant | days | starts | longest burn | captured after |\n|---|--:|--:|--:|--:|--:|--:|--:|"
    )?;
    for (way, plan) in &brief.answer.ways {
        let name = if brief.answer.best == Some(*way) {
            format!("**{}**", way.name())
        } else {
            way.name().to_owned()
        };
        match plan {
            Ok(plan) => {
                let used = plan.consumption;
                let optional = |value: Option<String>| value.unwrap_or_else(|| "-".to_owned());
                writeln!(
                    out,
                    "| {name} | {:.1} | {:.1} | {} | {} | {} | {} | {} |",
                    1e3 * plan.cost_km_s,
                    1e3 * plan.dv_km_s,
                    optional(used.map(|used| words::kg(used.propellant_kg))),
                    words::days(plan.duration_s),
                    plan.starts(),
                    optional(used.map(|used| words::time(used.longest_burn_s))),
                    optional(
                        plan.captured_share
                            .map(|share| format!("{:.0} %", 100.0 * share))
                    ),
                )?;
            }
            Err(not) => writeln!(
                out,
                "| {name} | not flyable: {} | | | | | | |",
                escape(&words::reasons(brief.case, not))
            )?,
        }
    }
    writeln!(out, "\n## Burns\n")?;
    writeln!(
        out,
        "| way | burn | at altitude | dv m/s | turn | propellant | time | leaves |\n|---|--:|--:|--:|--:|--:|--:|---|"
    )?;
    let case = brief.case;
    for (way, plan) in &brief.answer.ways {
        let Ok(plan) = plan else { continue };
        for (k, burn) in plan.burns.iter().enumerate() {
            writeln!(
                out,
                "| {} | {} | {} | {:.1} | {} | {} | {} | {} x {} |",
                way.name(),
                k + 1,
                words::altitude(case.altitude_km(burn.at_radius_km)),
                1e3 * burn.dv_km_s,
                words::degrees(burn.turn_rad),
                burn.propellant_kg.map_or_else(|| "-".to_owned(), words::kg),
                burn.duration_s.map_or_else(|| "-".to_owned(), words::time),
                words::altitude(case.altitude_km(burn.orbit_after.periapsis_km)),
                words::altitude(case.altitude_km(burn.orbit_after.apoapsis_km)),
            )?;
        }
    }
    writeln!(out, "\n## Landmarks\n")?;
    list(out, landmark_lines(brief).iter().map(String::as_str))?;
    writeln!(out, "## Cost of every target altitude\n\n```text")?;
    for line in brief.curve(78, 18, Glyphs::Ascii) {
        writeln!(out, "{line}")?;
    }
    writeln!(
        out,
        "```\n\n`=` direct, `v` dip, `o` loop, `*` cheapest, `X` crossover, `|` here, gap: not flyable\n\n## Warnings\n"
    )?;
    let warnings: Vec<String> = brief
        .warnings
        .iter()
        .map(|warning| format!("[{}] {}", warning.code, warning.text))
        .collect();
    list(out, warnings.iter().map(String::as_str))?;
    writeln!(out, "## Assumptions and sources\n")?;
    list(out, sources::sources(case).iter().map(String::as_str))?;
    writeln!(out, "## Cautions\n")?;
    list(out, sources::CAUTIONS.iter().copied())?;
    writeln!(
        out,
        "stoop {}, scenario fingerprint `{}`",
        env!("CARGO_PKG_VERSION"),
        brief.fingerprint
    )
}

fn list<'a>(out: &mut String, items: impl Iterator<Item = &'a str>) -> std::fmt::Result {
    let mut any = false;
    for item in items {
        any = true;
        writeln!(out, "- {}", escape(item))?;
    }
    if any { writeln!(out) } else { Ok(()) }
}
