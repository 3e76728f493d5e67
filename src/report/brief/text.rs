//! The brief as plain text: at most 80 columns, 7-bit, readable from top to bottom without layout.

use super::{Brief, facts, landmark_lines};
use crate::report::plot::Glyphs;
use crate::report::{sources, words};
use crate::visible::ascii;
use std::fmt::Write;

const WIDTH: usize = 78;

/// Renders the brief.
pub(super) fn render(brief: &Brief, glyphs: Glyphs) -> String {
    let mut page = Page(String::new());
    let spec = brief.case.spec();
    let title = if spec.title.is_empty() {
        "Arrival brief".to_owned()
    } else {
        ascii(&spec.title).into_owned()
    };
    page.wrapped("", &title);
    page.line(&"=".repeat(title.len().min(WIDTH)));
    if !spec.note.is_empty() {
        page.wrapped("", &ascii(&spec.note));
    }
    page.line("");
    page.wrapped("", &brief.sentence);
    page.wrapped("", &brief.why);
    for shift in &brief.shifts {
        page.item(shift);
    }
    page.heading("Case");
    for (name, fact) in facts(brief) {
        page.labelled(name, &fact);
    }
    page.heading("Ways");
    ways(brief, &mut page);
    page.heading("Burns");
    burns(brief, &mut page);
    page.heading("Landmarks");
    for line in landmark_lines(brief) {
        page.item(&line);
    }
    page.heading("Cost of every target altitude");
    for line in brief.curve(WIDTH, 18, glyphs) {
        page.line(&line);
    }
    page.line("= direct   v dip   o loop   * cheapest   X crossover   | here   gap: not flyable");
    page.heading("Warnings");
    if brief.warnings.is_empty() {
        page.item("none");
    }
    for warning in &brief.warnings {
        page.item(&format!("[{}] {}", warning.code, ascii(&warning.text)));
    }
    page.heading("Assumptions and sources");
    for source in sources::sources(brief.case) {
        page.item(&source);
    }
    page.heading("Cautions");
    for caution in sources::CAUTIONS {
        page.item(caution);
    }
    page.line("");
    page.wrapped(
        "",
        &format!(
            "stoop {}, scenario fingerprint {}",
            env!("CARGO_PKG_VERSION"),
            brief.fingerprint
        ),
    );
    page.0
}

fn ways(brief: &Brief, page: &mut Page) {
    page.line("  way         cost     dv  propellant   days  starts  longest   captured");
    page.line("               m/s    m/s                               burn      after");
    for (way, plan) in &brief.answer.ways {
        let mark = if brief.answer.best == Some(*way) {
            '<'
        } else {
            ' '
        };
        let head = format!("{} {:<6}{mark}", way.entry().glyph, way.name());
        match plan {
            Ok(plan) => {
                let used = plan.consumption;
                let optional = |value: Option<String>| value.unwrap_or_else(|| "-".to_owned());
                page.line(&format!(
                    "{head} {:>8.1} {:>6.0} {:>11} {:>6} {:>7} {:>8} {:>10}",
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
                ));
            }
            Err(not) => page.hanging(
                &format!("{head} "),
                &format!("not flyable: {}", words::reasons(brief.case, not)),
            ),
        }
    }
}

fn burns(brief: &Brief, page: &mut Page) {
    let case = brief.case;
    for (way, plan) in &brief.answer.ways {
        let Ok(plan) = plan else { continue };
        page.wrapped(
            "",
            &format!(
                "{}: aiming radius {}, v_inf {}, with margin {}",
                way.name(),
                words::km(plan.aiming_radius_km),
                words::speed(plan.v_inf_km_s),
                words::dv(plan.dv_with_margin_km_s)
            ),
        );
        for (k, burn) in plan.burns.iter().enumerate() {
            let engine = match (burn.propellant_kg, burn.duration_s) {
                (Some(propellant), Some(duration)) => {
                    format!(", {} in {}", words::kg(propellant), words::time(duration))
                }
                _ => String::new(),
            };
            let turn = if burn.turn_rad == 0.0 {
                String::new()
            } else {
                format!(", turn {}", words::degrees(burn.turn_rad))
            };
            page.item(&format!(
                "burn {} at {}: {}{turn}{engine}; leaves {} x {}",
                k + 1,
                words::altitude(case.altitude_km(burn.at_radius_km)),
                words::dv(burn.dv_km_s),
                words::altitude(case.altitude_km(burn.orbit_after.periapsis_km)),
                words::altitude(case.altitude_km(burn.orbit_after.apoapsis_km)),
            ));
        }
    }
    if brief.answer.best.is_none() {
        page.item("no way can be flown");
    }
}

struct Page(String);

impl Page {
    fn line(&mut self, text: &str) {
        // Writing to a string cannot fail.
        let _ = writeln!(self.0, "{}", text.trim_end());
    }

    fn heading(&mut self, text: &str) {
        self.line("");
        self.line(text);
        self.line(&"-".repeat(text.len()));
    }

    fn wrapped(&mut self, lead: &str, text: &str) {
        self.hanging(lead, text);
    }

    fn item(&mut self, text: &str) {
        self.hanging("- ", text);
    }

    fn labelled(&mut self, name: &str, text: &str) {
        self.hanging(&format!("{name:<11}"), text);
    }

    /// A paragraph whose further lines stand under the first after its lead.
    fn hanging(&mut self, lead: &str, text: &str) {
        for (k, line) in words::wrap(text, WIDTH.saturating_sub(lead.len()))
            .iter()
            .enumerate()
        {
            if k == 0 {
                self.line(&format!("{lead}{line}"));
            } else {
                self.line(&format!("{}{line}", " ".repeat(lead.len())));
            }
        }
    }
}
