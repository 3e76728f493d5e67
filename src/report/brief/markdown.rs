//! The brief as Markdown (CommonMark with tables). Foreign text is escaped.

use super::{Brief, colophon, facts, flags, landmark_lines, way_line};
use crate::arrival::{Burn, Plan, Way};
use crate::report::plot::Glyphs;
use crate::report::{rerun, sources, words};
use crate::study::Case;
use crate::visible::visible;
use std::fmt::{Result, Write};

/// Renders the brief.
pub(super) fn render(brief: &Brief) -> String {
    let mut out = String::new();
    // Writing to a string cannot fail.
    let _ = write(brief, &mut out);
    out
}

/// Text as Markdown shows it literally, also at the start of a line and inside a table.
fn escape(text: &str) -> String {
    let text = visible(text);
    // Leading spaces would make a code block of it.
    let text = text.trim_start();
    let digits = text
        .bytes()
        .take_while(|byte| byte.is_ascii_digit())
        .count();
    let mut out = String::with_capacity(text.len() + 8);
    for (at, c) in text.char_indices() {
        let anywhere = "\\`*_[]<>|~&$@".contains(c);
        let block =
            (at == 0 && "#+-=!".contains(c)) || (0 < digits && at == digits && ".)".contains(c));
        // Bare addresses become links in some dialects.
        let link = (c == ':' && text[at..].starts_with("://"))
            || (c == '.' && text[..at].to_ascii_lowercase().ends_with("www"));
        if anywhere || block || link {
            out.push('\\');
        }
        out.push(c);
    }
    out
}

fn write(brief: &Brief, out: &mut String) -> Result {
    head(brief, out)?;
    writeln!(out, "## Case\n\n| what | value |\n|---|---|")?;
    for (name, fact) in facts(brief) {
        writeln!(out, "| {name} | {} |", escape(&fact))?;
    }
    ways(brief, out)?;
    burns(brief, out)?;
    if !brief.engine.is_empty() {
        writeln!(out, "\n## Engine\n")?;
        list(out, &brief.engine)?;
        writeln!(out, "```text")?;
        for line in brief.stop_curve(78) {
            writeln!(out, "{line}")?;
        }
        writeln!(out, "```")?;
    }
    writeln!(out, "\n## Landmarks\n")?;
    list(out, &landmark_lines(brief))?;
    writeln!(out, "## Cost of every target altitude\n\n```text")?;
    for line in brief.curve(78, 18, Glyphs::Ascii) {
        writeln!(out, "{line}")?;
    }
    writeln!(
        out,
        "```\n\n{}, `*` cheapest direct, `X` crossover, `|` here, gap: not flyable{}\n\n## Warnings\n",
        Way::shown(brief.case.setting())
            .map(|entry| format!("`{}` {}", entry.glyph, entry.name))
            .collect::<Vec<_>>()
            .join(", "),
        if brief.case.setting().lasting().is_some() {
            ", `.` without the finite-burn loss"
        } else {
            ""
        }
    )?;
    if brief.warnings.is_empty() {
        list(out, &["none"])?;
    }
    let warnings: Vec<String> = brief
        .warnings
        .iter()
        .map(|warning| format!("[{}] {}", warning.code, warning.text))
        .collect();
    list(out, &warnings)?;
    writeln!(out, "## Assumptions and sources\n")?;
    list(out, &sources::sources(brief.case))?;
    writeln!(out, "## Cautions\n")?;
    list(out, sources::CAUTIONS)?;
    writeln!(out, "## {}\n\n```ron", super::RERUN_TITLE)?;
    for line in rerun::lines(brief.case.spec()) {
        writeln!(out, "{line}")?;
    }
    writeln!(out, "```\n\n{}", colophon(brief))
}

/// Title, note, and the verdict before anything else.
fn head(brief: &Brief, out: &mut String) -> Result {
    let spec = brief.case.spec();
    let title = if spec.title.trim().is_empty() {
        "Arrival brief".to_owned()
    } else {
        escape(&spec.title)
    };
    writeln!(out, "# {title}\n")?;
    if !spec.note.trim().is_empty() {
        writeln!(out, "{}\n", escape(&spec.note))?;
    }
    writeln!(
        out,
        "**{}**\n\n{}\n",
        escape(&brief.sentence),
        escape(&brief.why)
    )?;
    list(out, &brief.shifts)
}

fn ways(brief: &Brief, out: &mut String) -> Result {
    writeln!(
        out,
        "\n## Ways\n\n| way | cost m/s | dv m/s | loss m/s | propellant | with margin | days | starts | longest burn | captured after |\n|---|--:|--:|--:|--:|--:|--:|--:|--:|--:|"
    )?;
    for (way, plan) in brief.answer.shown(brief.case.setting()) {
        let name = if brief.answer.best == Some(*way) {
            format!("**{}**", way.name())
        } else {
            way.name().to_owned()
        };
        match plan {
            Ok(plan) => writeln!(out, "| {name} | {} |", figures(plan))?,
            Err(not) => writeln!(
                out,
                "| {name} | not flyable: {} | | | | | | | | |",
                escape(&words::reasons(brief.case, not))
            )?,
        }
    }
    writeln!(out)?;
    list(out, &flags(brief))
}

/// A way's numbers as the cells of its row.
fn figures(plan: &Plan) -> String {
    let used = plan.consumption;
    let optional = |value: Option<String>| value.unwrap_or_else(|| "-".to_owned());
    [
        format!("{:.1}", 1e3 * plan.cost_km_s),
        format!("{:.1}", 1e3 * plan.dv_km_s),
        format!("{:.1}", 1e3 * plan.loss_km_s()),
        optional(used.map(|used| words::kg(used.propellant_kg))),
        optional(used.map(|used| words::kg(used.propellant_with_margin_kg))),
        words::days(plan.duration_s),
        plan.starts().to_string(),
        optional(used.map(|used| words::time(used.longest_burn_s))),
        optional(
            plan.captured_share
                .map(|share| format!("{:.0} %", 100.0 * share)),
        ),
    ]
    .join(" | ")
}

fn burns(brief: &Brief, out: &mut String) -> Result {
    writeln!(out, "## Burns\n")?;
    let plans: Vec<&Plan> = brief
        .answer
        .ways
        .iter()
        .filter_map(|(_, plan)| plan.as_ref().ok())
        .collect();
    if plans.is_empty() {
        return writeln!(out, "- no way can be flown");
    }
    let lines: Vec<String> = plans.iter().map(|plan| way_line(plan)).collect();
    list(out, &lines)?;
    writeln!(
        out,
        "| way | burn | at altitude | before km/s | after km/s | dv m/s | turn | propellant | time | leaves |\n|---|--:|--:|--:|--:|--:|--:|--:|--:|---|"
    )?;
    for plan in &plans {
        for (k, burn) in plan.burns.iter().enumerate() {
            let cells = burn_cells(brief.case, burn);
            writeln!(out, "| {} | {} | {cells} |", plan.way.name(), k + 1)?;
        }
    }
    let flown: Vec<String> = plans
        .iter()
        .flat_map(|plan| {
            plan.burns.iter().enumerate().filter_map(|(k, burn)| {
                words::flown(brief.case, k, burn).map(|text| format!("{}, {text}", plan.way.name()))
            })
        })
        .collect();
    if !flown.is_empty() {
        writeln!(out)?;
    }
    list(out, &flown)
}

fn burn_cells(case: &Case, burn: &Burn) -> String {
    let at = |radius: f64| words::altitude(case.altitude_km(radius));
    [
        at(burn.at_radius_km),
        format!("{:.4}", burn.speed_before_km_s),
        format!("{:.4}", burn.speed_after_km_s),
        format!("{:.1}", 1e3 * burn.dv_km_s),
        words::degrees(burn.turn_rad),
        burn.propellant_kg.map_or_else(|| "-".to_owned(), words::kg),
        burn.duration_s.map_or_else(|| "-".to_owned(), words::time),
        format!(
            "{} x {}",
            at(burn.orbit_after.periapsis_km),
            at(burn.orbit_after.apoapsis_km)
        ),
    ]
    .join(" | ")
}

/// Items with an empty line after them; nothing where there are none.
fn list(out: &mut String, items: &[impl AsRef<str>]) -> Result {
    for item in items {
        writeln!(out, "- {}", escape(item.as_ref()))?;
    }
    if items.is_empty() {
        Ok(())
    } else {
        writeln!(out)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn foreign_text_is_shown_and_not_obeyed() {
        for (text, expected) in [
            ("Whimbrel, lunar orbiter", "Whimbrel, lunar orbiter"),
            ("a | b * c _ d", r"a \| b \* c \_ d"),
            ("e < f ` [g](h)", r"e \< f \` \[g\](h)"),
            ("# no heading", r"\# no heading"),
            ("- no item", r"\- no item"),
            ("1. no list", r"1\. no list"),
            ("12) no list", r"12\) no list"),
            ("    no code", "no code"),
            ("===", r"\==="),
            ("![x](y) &amp; $z$", r"\!\[x\](y) \&amp; \$z\$"),
            ("see https://x.example", r"see https\://x.example"),
            ("see www.x.example", r"see www\.x.example"),
            ("two\nlines", r"two\\nlines"),
            ("\u{1b}[31m", r"\\u{1b}\[31m"),
            ("finite-burn loss", "finite-burn loss"),
            ("", ""),
        ] {
            assert_eq!(escape(text), expected);
        }
    }
}
