//! The help page: every key from the table of actions, and how to read the screen.

use super::put_page;
use crate::arrival::Way;
use crate::report::words::wrap;
use crate::tui::action::{ACTIONS, Group, keys_shown};
use crate::tui::model::{Lens, Model};
use crate::tui::theme::Theme;
use ratatui::buffer::Buffer;
use ratatui::layout::Rect;
use ratatui::text::{Line, Span};

pub(super) fn draw(model: &Model, theme: Theme, area: Rect, buffer: &mut Buffer) {
    let width = usize::from(area.width).saturating_sub(2);
    let mut lines: Vec<Line> = Vec::new();
    let mut prose = |text: &str| {
        lines.extend(
            wrap(text, width)
                .into_iter()
                .map(|line| Line::from(format!(" {line}"))),
        )
    };
    prose(
        "stoop answers how to arrive: the curve shows what every target altitude costs by each way, the sentence below it which way is cheapest where you stand (|), and why. Turn a knob and everything follows.",
    );
    prose("");
    for entry in Way::TABLE {
        prose(&format!(
            "{} {}: {}",
            entry.glyph, entry.name, entry.meaning
        ));
    }
    for mark in [
        "* the cheapest direct altitude",
        "X a crossover: the cheapest way changes",
        ". what a way would cost if its burns took no time",
        "| here; a gap: not flyable, the table says why",
    ] {
        prose(mark);
    }
    for (group, title) in Group::ALL {
        lines.push(Line::default());
        lines.push(Line::from(Span::styled(
            format!(" {title}"),
            theme.strong(),
        )));
        let entries: Vec<_> = ACTIONS
            .iter()
            .filter(|entry| entry.group == *group)
            .collect();
        if 100 <= width {
            let half = entries.len().div_ceil(2);
            for k in 0..half {
                let left = key_line(entries.get(k).copied(), width / 2);
                let right = key_line(entries.get(k + half).copied(), width / 2);
                lines.push(Line::from(format!("{left}{right}")));
            }
        } else {
            lines.extend(
                entries
                    .iter()
                    .map(|entry| Line::from(key_line(Some(entry), width))),
            );
        }
    }
    lines.push(Line::default());
    let mut prose = |text: &str| {
        lines.extend(
            wrap(text, width)
                .into_iter()
                .map(|line| Line::from(format!(" {line}"))),
        )
    };
    for (_, name, purpose) in Lens::ALL {
        prose(&format!("{name} lens: {purpose}."));
    }
    prose(
        "For concept and preliminary design. Commanded manoeuvres need verified flight-dynamics software and review by qualified people, and the rules on planetary protection and orbital debris apply.",
    );
    put_page(buffer, area, &lines, model.scroll, theme);
}

fn key_line(entry: Option<&crate::tui::action::Entry>, width: usize) -> String {
    let Some(entry) = entry else {
        return String::new();
    };
    let text = format!("   {:<16} {}", keys_shown(entry), entry.help);
    format!("{:<width$}", crate::tui::layout::fit(&text, width))
}
