//! The curve lens: the cost of every target altitude, the hero of the screen.

use super::put_picture;
use crate::report::plot::{self, Plot};
use crate::study::knob::{KnobId, Value, by_id};
use crate::tui::model::Model;
use crate::tui::results::CurveResult;
use crate::tui::theme::Theme;
use ratatui::buffer::Buffer;
use ratatui::layout::Rect;

pub(super) fn draw(model: &Model, theme: Theme, area: Rect, buffer: &mut Buffer) {
    let Some(curve) = &model.results.curve else {
        let text = "no altitude is left between floor and cap";
        buffer.set_stringn(
            area.x + 1,
            area.y + area.height / 2,
            text,
            usize::from(area.width),
            theme.faint(),
        );
        return;
    };
    let here = match by_id(KnobId::TargetAltitude).read(&model.case) {
        Ok(Value::Number(altitude)) => Some(altitude),
        _ => None,
    };
    let crossovers: Vec<_> = curve
        .crossovers
        .iter()
        .filter_map(|place| CurveResult::mark(place, model.look.quantity))
        .collect();
    let picture = plot::draw(
        &Plot {
            rows: &curve.rows,
            axis: curve.axis,
            x_title: "alt, km",
            quantity: model.look.quantity,
            y_log: model.look.y_log,
            here,
            cheapest: curve
                .cheapest
                .as_ref()
                .and_then(|place| CurveResult::mark(place, model.look.quantity)),
            crossovers: &crossovers,
            glyphs: model.glyphs,
        },
        usize::from(area.width),
        usize::from(area.height),
    );
    put_picture(buffer, area, &picture, |role| theme.role(role));
    legend(model, theme, area, buffer);
}

/// Glyph and name of each way, on the first line right of the axis title.
fn legend(model: &Model, theme: Theme, area: Rect, buffer: &mut Buffer) {
    let mut x = area.x + model.look.quantity.title().len() as u16 + 3;
    let mut write = |text: &str, style| {
        if x + (text.len() as u16) < area.right() {
            buffer.set_string(x, area.y, text, style);
            x += text.len() as u16;
        }
    };
    for entry in crate::arrival::Way::shown(model.case.setting()) {
        let best = model.results.answer.best == Some(entry.way);
        let style = theme.way(entry.way);
        let style = if best {
            style.patch(theme.strong())
        } else {
            style
        };
        write(&format!("{} {}  ", entry.glyph, entry.name), style);
    }
    if model
        .results
        .curve
        .as_ref()
        .is_some_and(|curve| curve.cheapest.is_some())
    {
        write("* cheapest  ", theme.faint());
    }
    if model
        .results
        .curve
        .as_ref()
        .is_some_and(|curve| !curve.crossovers.is_empty())
    {
        write("X crossover  ", theme.faint());
    }
    if model.case.setting().lasting().is_some() {
        write(". no loss", theme.faint());
    }
}
