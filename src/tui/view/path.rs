//! The path lens: a picture to scale of one way, from all its orbits down to the periapsis, with its legend and the same in sentences.

use super::{put_page, put_picture};
use crate::report::path::{self, Centre, Hyperbola, Scene, View};
use crate::report::words::wrap;
use crate::study::engine;
use crate::tui::layout::fit;
use crate::tui::model::Model;
use crate::tui::theme::Theme;
use ratatui::buffer::Buffer;
use ratatui::layout::Rect;
use ratatui::text::{Line, Span};

/// Points of a thrust arc.
const ARC_POINTS: usize = 64;
/// Rows of the picture: half the lens, at least this many; the sentences have the rest.
const LEAST_ROWS: u16 = 8;

pub(super) fn draw(model: &Model, theme: Theme, area: Rect, buffer: &mut Buffer) {
    let way = model.shown_way();
    let width = usize::from(area.width);
    let Some(plan) = model.results.answer.plan(way) else {
        let text = format!(" {} cannot be flown here; w shows the next way", way.name());
        buffer.set_stringn(area.x, area.y, text, width, theme.faint());
        return;
    };
    let setting = model.case.setting();
    // Only the first burn's arc: the later ones start from conics whose line of apsides the integration has turned a little.
    let arcs: Vec<Vec<(f64, f64)>> = plan
        .burns
        .first()
        .map(|burn| engine::arc_points(setting, burn, ARC_POINTS))
        .filter(|points| !points.is_empty())
        .into_iter()
        .collect();
    let mut scene = Scene::new(&model.case, plan).with_arcs(&arcs);
    if let Some(crate::arrival::Before::Hyperbola {
        v_inf_sq,
        periapsis_km,
    }) = plan
        .burns
        .first()
        .and_then(|burn| burn.flown)
        .map(|flown| flown.before)
    {
        scene.arriving = Hyperbola {
            periapsis_km,
            v_inf_km_s: v_inf_sq.sqrt(),
        };
    }
    let head = Line::from(vec![
        Span::raw(" "),
        Span::styled(
            format!("{} {}", way.entry().glyph, way.name()),
            theme.way(way).patch(theme.strong()),
        ),
        Span::styled(
            fit(
                "  w next way  i closer  o wider  a all",
                width.saturating_sub(9),
            ),
            theme.faint(),
        ),
    ]);
    buffer.set_line(area.x, area.y, &head, area.width);
    let rows = area
        .height
        .saturating_sub(1)
        .min((2 * area.height / 3).max(LEAST_ROWS));
    let view = view_of(model.path_zoom);
    let picture = path::draw(&scene, &view, model.glyphs, width, usize::from(rows));
    let above = Rect {
        y: area.y + 1,
        height: rows,
        ..area
    };
    put_picture(buffer, above, &picture, |role| {
        theme.role(role.as_plot(way))
    });
    let legend: Vec<String> = path::legend(&scene)
        .into_iter()
        .map(|(glyph, _, name)| format!("{glyph} {name}"))
        .collect();
    let mut lines: Vec<Line> = Vec::new();
    let wrapped = |text: &str| wrap(text, width.saturating_sub(2));
    for line in wrapped(&legend.join("   ")) {
        lines.push(Line::from(Span::styled(format!(" {line}"), theme.faint())));
    }
    for sentence in path::describe(&scene) {
        lines.extend(
            wrapped(&sentence)
                .into_iter()
                .map(|line| Line::from(format!(" {line}"))),
        );
    }
    let below = Rect {
        y: area.y + 1 + rows,
        height: area.height.saturating_sub(1 + rows),
        ..area
    };
    put_page(buffer, below, &lines, model.scroll, theme);
}

/// All orbits at once, or closer to where the first burn is made.
fn view_of(zoom: f64) -> View {
    View {
        centre: if zoom <= 1.0 {
            Centre::Whole
        } else {
            Centre::Burn(1)
        },
        zoom,
    }
}
