//! The first line: file, body, arrival, what the numbers assume.

use crate::report::words;
use crate::tui::layout::fit;
use crate::tui::model::Model;
use crate::tui::theme::Theme;
use crate::visible::visible;
use ratatui::buffer::Buffer;
use ratatui::layout::Rect;
use unicode_width::UnicodeWidthStr;

pub(super) fn draw(model: &Model, theme: Theme, area: Rect, buffer: &mut Buffer) {
    let case = &model.case;
    let setting = case.setting();
    let mark = if model.unsaved() { " *" } else { "" };
    let mut parts = vec![
        format!("{}{mark}", visible(&model.name())),
        visible(&case.body().name).into_owned(),
    ];
    if let Ok(v_inf_sq) = setting.approach.v_inf_sq(setting.target.periapsis_km) {
        parts.push(format!("v_inf {} km/s", words::number(v_inf_sq.sqrt())));
        let break_even = crate::physics::conic::break_even_radius_km(setting.gm, v_inf_sq);
        parts.push(format!("break-even {}", words::km(break_even)));
    }
    parts.push(format!(
        "floor {}",
        words::altitude(case.altitude_km(setting.limits.floor_radius_km))
    ));
    let journey = case.journey();
    if let Some(departure) = journey.departure_dv_km_s {
        parts.push(format!("departure {}", words::dv(departure)));
    }
    let burns = match model.working {
        Some(percent) => format!("{} {percent} %", model.results.grade.words()),
        None => model.results.grade.words().to_owned(),
    };
    let width = usize::from(area.width);
    let room = width.saturating_sub(burns.len() + 3);
    // What does not fit is left out whole, from the end; only a long file name is cut.
    let mut text = String::new();
    for part in parts {
        let longer = format!("{text}{}{part}", if text.is_empty() { " " } else { "  " });
        if text.is_empty() || longer.width() <= room {
            text = longer;
        }
    }
    let text = fit(&text, room);
    let style = theme.selected();
    buffer.set_style(area, style);
    buffer.set_stringn(area.x, area.y, text, width, style);
    let at = area.right().saturating_sub(burns.len() as u16 + 1);
    buffer.set_stringn(at, area.y, &burns, burns.len(), style);
}
