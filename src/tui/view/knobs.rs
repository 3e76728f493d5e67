//! The knobs: names and values, the selected one marked, a value being typed in its place.

use crate::report::words;
use crate::study::knob::{Knob, Value};
use crate::tui::layout::fit;
use crate::tui::model::{Model, Overlay};
use crate::tui::theme::Theme;
use ratatui::buffer::Buffer;
use ratatui::layout::Rect;
use ratatui::style::Style;

pub(super) fn draw(model: &Model, theme: Theme, area: Rect, buffer: &mut Buffer) {
    let knobs = model.knobs();
    let height = usize::from(area.height);
    if height == 0 || area.width < 8 {
        return;
    }
    let at = knobs
        .iter()
        .position(|knob| knob.id == model.knob)
        .unwrap_or(0);
    // The last line says how many more there are, where not all fit.
    let shown = if knobs.len() <= height {
        height
    } else {
        height - 1
    };
    let first = (at + 1)
        .saturating_sub(shown)
        .max(at.saturating_sub(shown / 2))
        .min(knobs.len().saturating_sub(shown));
    for (row, knob) in (area.y..).zip(knobs.iter().skip(first).take(shown)) {
        draw_knob(
            model,
            knob,
            theme,
            Rect::new(area.x, row, area.width, 1),
            buffer,
        );
    }
    if shown < knobs.len() {
        let (above, below) = (first, knobs.len().saturating_sub(first + shown));
        let text = match (above, below) {
            (0, below) => format!("  {below} more below"),
            (above, 0) => format!("  {above} more above"),
            (above, below) => format!("  {above} more above, {below} below"),
        };
        buffer.set_stringn(
            area.x,
            area.bottom() - 1,
            text,
            usize::from(area.width),
            theme.faint(),
        );
    }
}

fn draw_knob(model: &Model, knob: &Knob, theme: Theme, area: Rect, buffer: &mut Buffer) {
    let selected = knob.id == model.knob;
    let width = usize::from(area.width);
    let value = match &model.overlay {
        Some(Overlay::Entry { knob: typed, text }) if *typed == knob.id => {
            // The end of a long text is what is being typed.
            let room = width.saturating_sub(knob.label.len() + 6);
            let tail: String = text
                .chars()
                .rev()
                .take(room)
                .collect::<Vec<_>>()
                .into_iter()
                .rev()
                .collect();
            format!("[{}_]", crate::visible::ascii(&tail))
        }
        _ => shown(model, knob),
    };
    // The mark says without reversed video or colour which one is selected.
    let mark = if selected { '>' } else { ' ' };
    let label = fit(knob.label, width.saturating_sub(value.len() + 3));
    let gap = width.saturating_sub(label.len() + value.len() + 2);
    let text = format!("{mark}{label}{}{value} ", " ".repeat(gap));
    let style = if selected {
        theme.selected()
    } else {
        Style::new()
    };
    buffer.set_stringn(area.x, area.y, text, width, style);
}

/// A knob's value as shown.
fn shown(model: &Model, knob: &Knob) -> String {
    match knob.read(&model.case) {
        Err(_) => "-".to_owned(),
        Ok(Value::Best) => match knob.resolved(&model.case, &model.results.answer) {
            Some(resolved) if knob.is_altitude() => format!("best {}", words::altitude(resolved)),
            Some(resolved) => format!("best {resolved}"),
            None => "best".to_owned(),
        },
        Ok(Value::Number(number)) => {
            let digits = if knob.is_altitude() {
                exact_altitude(number)
            } else {
                plain(number)
            };
            if knob.unit().is_empty() {
                digits
            } else {
                format!("{digits} {}", knob.unit())
            }
        }
    }
}

/// A number as set, without binary dust and without losing what was typed (up to seven digits).
fn plain(value: f64) -> String {
    let text = format!("{value:.6}");
    let text = text.trim_end_matches('0').trim_end_matches('.');
    if text.len() <= 9 {
        text.to_owned()
    } else {
        words::number(value)
    }
}

/// Altitudes keep up to three decimals that were typed; computed ones (a crossover, a cap by Hill radius) are rounded.
fn exact_altitude(value: f64) -> String {
    let text = format!("{value:.3}");
    let exact = text
        .parse::<f64>()
        .is_ok_and(|back| (back - value).abs() <= 1e-12 * value.abs());
    if !exact {
        return words::altitude(value).trim_end_matches(" km").to_owned();
    }
    let text = text.trim_end_matches('0').trim_end_matches('.');
    match text.split_once('.') {
        None if 100.0 <= value.abs() => words::number(value),
        None => text.to_owned(),
        Some((_, fraction)) if 100.0 <= value.abs() => {
            format!("{}.{fraction}", words::number(value.trunc()))
        }
        Some(_) => text.to_owned(),
    }
}
