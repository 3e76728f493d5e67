//! The brief as plain text: at most 80 columns, 7-bit, readable from top to bottom without layout.

use super::{Brief, colophon, facts, flags, landmark_lines, way_line};
use crate::arrival::{Burn, Plan, Way};
use crate::report::plot::Glyphs;
use crate::report::{rerun, sources, words};
use crate::study::Case;
use crate::visible::ascii;

const WIDTH: usize = 78;

/// Renders the brief.
pub(super) fn render(brief: &Brief, glyphs: Glyphs) -> String {
    let mut page = Page(String::new());
    head(brief, &mut page);
    page.heading("Case");
    for (name, fact) in facts(brief) {
        page.hanging(&format!("{name:<11}"), &ascii(&fact));
    }
    page.heading("Ways");
    ways(brief, glyphs, &mut page);
    page.heading("Burns");
    burns(brief, &mut page);
    if !brief.engine.is_empty() {
        page.heading("Engine");
        for line in &brief.engine {
            page.item(&ascii(line));
        }
        for line in brief.stop_curve(WIDTH) {
            page.line(&line);
        }
    }
    page.heading("Landmarks");
    for line in landmark_lines(brief) {
        page.item(&line);
    }
    page.heading("Cost of every target altitude");
    for line in brief.curve(WIDTH, 18, glyphs) {
        page.line(&line);
    }
    page.paragraph(&legend(brief.case, glyphs));
    page.heading("Warnings");
    if brief.warnings.is_empty() {
        page.item("none");
    }
    for warning in &brief.warnings {
        page.item(&format!("[{}] {}", warning.code, ascii(&warning.text)));
    }
    page.heading("Assumptions and sources");
    for source in sources::sources(brief.case) {
        page.item(&ascii(&source));
    }
    page.heading("Cautions");
    for caution in sources::CAUTIONS {
        page.item(caution);
    }
    page.heading(super::RERUN_TITLE);
    for line in rerun::narrow(brief.case.spec(), WIDTH) {
        page.line(&line);
    }
    page.line("");
    page.paragraph(&colophon(brief));
    page.0
}

/// Title, note, and the verdict before anything else.
fn head(brief: &Brief, page: &mut Page) {
    let spec = brief.case.spec();
    let title = if spec.title.trim().is_empty() {
        "Arrival brief".to_owned()
    } else {
        ascii(&spec.title).into_owned()
    };
    page.paragraph(&title);
    page.line(&"=".repeat(title.len().min(WIDTH)));
    if !spec.note.trim().is_empty() {
        page.paragraph(&ascii(&spec.note));
    }
    page.line("");
    page.paragraph(&ascii(&brief.sentence));
    page.paragraph(&ascii(&brief.why));
    for shift in &brief.shifts {
        page.item(&ascii(shift));
    }
}

/// The symbol of a way: of its curve, and before its name in the table.
fn symbol(way: Way, glyphs: Glyphs) -> char {
    match (glyphs, way) {
        (Glyphs::Ascii, _) => way.entry().glyph,
        (Glyphs::Fine, Way::Direct) => '\u{2500}',
        (Glyphs::Fine, Way::Dip) => '\u{b7}',
        (Glyphs::Fine, Way::Loop) => 'o',
        (Glyphs::Fine, Way::Steps) => ':',
    }
}

fn legend(case: &Case, glyphs: Glyphs) -> String {
    let ways: Vec<String> = Way::shown(case.setting())
        .map(|entry| format!("{} {}", symbol(entry.way, glyphs), entry.name))
        .collect();
    let lasting = if case.setting().lasting().is_some() {
        ", . without the finite-burn loss"
    } else {
        ""
    };
    format!(
        "{}, * cheapest direct, X crossover, | here, gap: not flyable{lasting}",
        ways.join(", ")
    )
}

/// A column of the table of ways: two lines of heading, width, value.
struct Column {
    heading: [&'static str; 2],
    width: usize,
    value: fn(&Plan) -> Option<String>,
}

const fn column(
    heading: [&'static str; 2],
    width: usize,
    value: fn(&Plan) -> Option<String>,
) -> Column {
    Column {
        heading,
        width,
        value,
    }
}

/// The columns in their order; the loss stands only where burns take time, and the others draw together for it.
fn columns(lasting: bool) -> Vec<Column> {
    let narrow = |wide: usize, by: usize| if lasting { wide - by } else { wide };
    let mut columns = vec![
        column(["cost", "m/s"], narrow(8, 1), |plan| m_s(plan.cost_km_s)),
        column(["dv", "m/s"], narrow(9, 1), |plan| m_s(plan.dv_km_s)),
    ];
    if lasting {
        columns.push(column(["loss", "m/s"], 7, |plan| m_s(plan.loss_km_s())));
    }
    columns.extend([
        column(["propel-", "lant"], narrow(11, 1), |plan| {
            plan.consumption.map(|used| words::kg(used.propellant_kg))
        }),
        column(["with", "margin"], narrow(10, 1), |plan| {
            plan.consumption
                .map(|used| words::kg(used.propellant_with_margin_kg))
        }),
        column(["days", ""], narrow(7, 1), |plan| {
            Some(words::days(plan.duration_s))
        }),
        column(["starts", ""], 7, |plan| Some(plan.starts().to_string())),
        column(["longest", "burn"], narrow(10, 2), |plan| {
            plan.consumption
                .map(|used| words::time(used.longest_burn_s))
        }),
        column(["captured", "after"], 9, |plan| {
            plan.captured_share
                .map(|share| format!("{:.0} %", 100.0 * share))
        }),
    ]);
    columns
}

fn m_s(km_s: f64) -> Option<String> {
    Some(format!("{:.1}", 1e3 * km_s))
}

fn ways(brief: &Brief, glyphs: Glyphs, page: &mut Page) {
    let columns = columns(brief.case.setting().lasting().is_some());
    for line in 0..2 {
        let mut head = format!("{:<9}", if line == 0 { "way" } else { "" });
        for column in &columns {
            head.push_str(&format!("{:>w$}", column.heading[line], w = column.width));
        }
        page.line(&head);
    }
    for (way, plan) in brief.answer.shown(brief.case.setting()) {
        let mark = if brief.answer.best == Some(*way) {
            '<'
        } else {
            ' '
        };
        let head = format!("{} {:<6}{mark}", symbol(*way, glyphs), way.name());
        match plan {
            Ok(plan) => {
                let figures: String = columns
                    .iter()
                    .map(|column| {
                        let value = (column.value)(plan).unwrap_or_else(|| "-".to_owned());
                        format!("{value:>w$}", w = column.width)
                    })
                    .collect();
                page.line(&format!("{head}{figures}"));
            }
            Err(not) => page.hanging(
                &format!("{head} "),
                &format!("not flyable: {}", words::reasons(brief.case, not)),
            ),
        }
    }
    if brief.answer.best.is_some() {
        page.line("< cheapest");
    }
    for flag in flags(brief) {
        page.hanging("! ", &flag);
    }
}

fn burns(brief: &Brief, page: &mut Page) {
    for (_, plan) in &brief.answer.ways {
        let Ok(plan) = plan else { continue };
        page.paragraph(&way_line(plan));
        for (k, burn) in plan.burns.iter().enumerate() {
            page.item(&burn_line(brief.case, k, burn));
        }
    }
    if brief.answer.best.is_none() {
        page.item("no way can be flown");
    }
}

fn burn_line(case: &Case, k: usize, burn: &Burn) -> String {
    let at = |radius: f64| words::altitude(case.altitude_km(radius));
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
    if let Some(flown) = words::flown(case, k, burn) {
        return flown;
    }
    format!(
        "burn {} at {}: {} ({:.4} to {}){turn}{engine}; leaves {} x {}",
        k + 1,
        at(burn.at_radius_km),
        words::dv(burn.dv_km_s),
        burn.speed_before_km_s,
        words::speed(burn.speed_after_km_s),
        at(burn.orbit_after.periapsis_km),
        at(burn.orbit_after.apoapsis_km),
    )
}

struct Page(String);

impl Page {
    fn line(&mut self, text: &str) {
        self.0.push_str(text.trim_end());
        self.0.push('\n');
    }

    fn heading(&mut self, text: &str) {
        self.line("");
        self.line(text);
        self.line(&"-".repeat(text.len()));
    }

    fn paragraph(&mut self, text: &str) {
        self.hanging("", text);
    }

    fn item(&mut self, text: &str) {
        self.hanging("- ", text);
    }

    /// A paragraph whose further lines stand under the first after its lead.
    fn hanging(&mut self, lead: &str, text: &str) {
        // Counted in characters: the lead may hold a fine symbol.
        let cells = lead.chars().count();
        for (k, line) in words::wrap(text, WIDTH.saturating_sub(cells))
            .iter()
            .enumerate()
        {
            if k == 0 {
                self.line(&format!("{lead}{line}"));
            } else {
                self.line(&format!("{}{line}", " ".repeat(cells)));
            }
        }
    }
}
