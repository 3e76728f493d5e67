//! The ways side by side; a way that cannot be flown says why in its line.

use crate::arrival::Way;
use crate::report::words;
use crate::tui::layout::fit;
use crate::tui::model::Model;
use crate::tui::results::Grade;
use crate::tui::theme::Theme;
use ratatui::buffer::Buffer;
use ratatui::layout::Rect;
use ratatui::style::Style;

/// Lines the table takes.
pub(super) fn height(model: &Model) -> usize {
    1 + Way::shown(model.case.setting()).count()
}

/// Columns: title, width, and whether it stays on a narrow screen.
const COLUMNS: &[(&str, usize)] = &[
    ("cost m/s", 9),
    ("dv m/s", 8),
    ("propellant", 11),
    ("days", 7),
    ("starts", 7),
    ("longest burn", 13),
    ("captured after", 15),
    ("turn", 9),
    ("final mass", 11),
];

/// The column that burns which take time add after the velocity change.
const LOSS: (&str, usize) = ("loss", 7);

pub(super) fn draw(model: &Model, theme: Theme, area: Rect, buffer: &mut Buffer) {
    let width = usize::from(area.width);
    let name_width = 10;
    let mut used = name_width;
    let lasting = model.case.setting().lasting().is_some();
    let columns: Vec<&(&str, usize)> = COLUMNS[..2]
        .iter()
        .chain(lasting.then_some(&LOSS))
        .chain(&COLUMNS[2..])
        .take_while(|(_, cells)| {
            used += cells;
            used <= width
        })
        .collect();
    if area.height == 0 {
        return;
    }
    // The grade of the numbers stands with them, not only in the first line.
    let grade = match model.results.grade {
        Grade::Impulsive | Grade::Integrated => "way",
        Grade::Estimated => "estimate",
        Grade::Coarse => "way",
    };
    let mut head = format!(" {grade:<w$}", w = name_width - 1);
    for (title, cells) in &columns {
        head.push_str(&format!("{title:>cells$}"));
    }
    buffer.set_stringn(area.x, area.y, head, width, theme.faint());
    for ((way, plan), row) in model
        .results
        .answer
        .shown(model.case.setting())
        .zip(area.y + 1..area.bottom())
    {
        let entry = way.entry();
        let best = model.results.answer.best == Some(*way);
        let style = if best { theme.strong() } else { Style::new() };
        buffer.set_stringn(
            area.x + 1,
            row,
            entry.glyph.to_string(),
            1,
            theme.way(*way).patch(style),
        );
        let name = if best {
            format!("{} <", entry.name)
        } else {
            entry.name.to_owned()
        };
        buffer.set_stringn(area.x + 3, row, name, name_width - 3, style);
        let text = match plan {
            Ok(plan) => {
                let optional = |value: Option<String>| value.unwrap_or_else(|| "-".to_owned());
                let used = plan.consumption;
                let loss = lasting.then(|| cost(plan.loss_km_s()));
                let values = [
                    optional(used.map(|used| words::kg(used.propellant_kg))),
                    words::days(plan.duration_s),
                    plan.starts().to_string(),
                    optional(used.map(|used| words::time(used.longest_burn_s))),
                    optional(
                        plan.captured_share
                            .map(|share| format!("{:.0} %", 100.0 * share)),
                    ),
                    words::degrees(plan.turn_rad),
                    optional(used.map(|used| words::kg(used.final_mass_kg))),
                ];
                let values = [cost(plan.cost_km_s), cost(plan.dv_km_s)]
                    .into_iter()
                    .chain(loss)
                    .chain(values);
                columns
                    .iter()
                    .zip(values)
                    .map(|((_, cells), value)| format!("{value:>cells$}"))
                    .collect::<String>()
            }
            Err(not) => fit(
                &format!(" not flyable: {}", words::reasons(&model.case, not)),
                width.saturating_sub(name_width),
            ),
        };
        buffer.set_stringn(
            area.x + name_width as u16,
            row,
            text,
            width.saturating_sub(name_width),
            style,
        );
    }
}

/// m/s with one decimal, so that near ties can be told apart in the table.
fn cost(km_s: f64) -> String {
    format!("{:.1}", 1e3 * km_s)
}
