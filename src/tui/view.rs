//! Draws the model. Changes nothing, computes no result.

mod burns;
mod curve;
mod footer;
mod header;
mod help;
mod knobs;
mod notes;
mod path;
mod table;

use super::layout::{self, LEAST};
use super::model::{Lens, Model, Overlay};
use super::theme::Theme;
use crate::report::picture::Picture;
use crate::report::words::wrap;
use ratatui::Frame;
use ratatui::buffer::Buffer;
use ratatui::layout::Rect;
use ratatui::style::Style;
use ratatui::text::{Line, Span};

/// Draws one frame.
pub fn view(model: &Model, theme: Theme, frame: &mut Frame) {
    let area = frame.area();
    let buffer = frame.buffer_mut();
    if area.width < LEAST.0 || area.height < LEAST.1 {
        too_small(model, theme, area, buffer);
    } else if model.overlay == Some(Overlay::Help) {
        help::draw(model, theme, area, buffer);
    } else {
        screen(model, theme, area, buffer);
    }
    if model.glyphs == crate::report::plot::Glyphs::Ascii {
        to_ascii(buffer);
    }
}

fn screen(model: &Model, theme: Theme, area: Rect, buffer: &mut Buffer) {
    let lines = verdict_lines(
        model,
        theme,
        usize::from(area.width),
        usize::from(area.height),
    );
    let size = (area.width, area.height);
    let areas = layout::areas(
        size,
        lines.len(),
        table::height(model),
        footer::height(model, usize::from(area.width)),
    );
    header::draw(model, theme, areas.header, buffer);
    match model.lens {
        Lens::Curve => curve::draw(model, theme, areas.lens, buffer),
        Lens::Path => path::draw(model, theme, areas.lens, buffer),
        Lens::Burns => burns::draw(model, theme, areas.lens, buffer),
        Lens::Notes => notes::draw(model, theme, areas.lens, buffer),
    }
    knobs::draw(model, theme, areas.knobs, buffer);
    put_lines(buffer, areas.verdict, &lines, 0);
    table::draw(model, theme, areas.table, buffer);
    footer::draw(model, theme, areas.footer, buffer);
}

/// The verdict, its reason, and as many of the things that move it as there is room for.
fn verdict_lines(model: &Model, theme: Theme, width: usize, height: usize) -> Vec<Line<'static>> {
    let width = width.saturating_sub(2);
    let styled = |text: &str, style: Style| {
        wrap(text, width)
            .into_iter()
            .map(move |line| Line::from(Span::styled(format!(" {line}"), style)))
    };
    let mut lines: Vec<Line> = styled(&model.results.sentence, theme.strong()).collect();
    lines.extend(styled(&model.results.why, Style::new()));
    let room = if height < 26 { 5 } else { height / 5 + 1 };
    for shift in &model.results.shifts {
        let more: Vec<Line> = styled(shift, theme.faint()).collect();
        if room < lines.len() + more.len() {
            break;
        }
        lines.extend(more);
    }
    lines
}

/// Puts a picture of characters into an area; blanks leave what is there.
fn put_picture<R: Copy + Default>(
    buffer: &mut Buffer,
    area: Rect,
    picture: &Picture<R>,
    style: impl Fn(R) -> Style,
) {
    for y in 0..area.height {
        for x in 0..area.width {
            let (glyph, role) = picture.cell(usize::from(x), usize::from(y));
            if glyph != ' '
                && let Some(cell) = buffer.cell_mut((area.x + x, area.y + y))
            {
                cell.set_char(glyph).set_style(style(role));
            }
        }
    }
}

/// Writes lines into an area from line `first` on; what does not fit is left out.
fn put_lines(buffer: &mut Buffer, area: Rect, lines: &[Line], first: usize) {
    for (row, line) in (area.y..area.bottom()).zip(lines.iter().skip(first)) {
        buffer.set_line(area.x, row, line, area.width);
    }
}

/// Draws a scrolling page: lines from `scroll`, held so that the last page stays full, with a note where more follows.
fn put_page(buffer: &mut Buffer, area: Rect, lines: &[Line], scroll: usize, theme: Theme) {
    let height = usize::from(area.height);
    if height == 0 {
        return;
    }
    if lines.len() <= height {
        return put_lines(buffer, area, lines, 0);
    }
    let shown = height - 1;
    let first = scroll.min(lines.len().saturating_sub(shown));
    put_lines(
        buffer,
        Rect {
            height: area.height - 1,
            ..area
        },
        lines,
        first,
    );
    let left = lines.len() - (first + shown).min(lines.len());
    let note = if left == 0 {
        "-- end; PgUp scrolls back --".to_owned()
    } else {
        format!("-- {left} more lines: PgDn --")
    };
    buffer.set_stringn(
        area.x + 1,
        area.bottom() - 1,
        note,
        usize::from(area.width.saturating_sub(1)),
        theme.faint(),
    );
}

fn too_small(model: &Model, theme: Theme, area: Rect, buffer: &mut Buffer) {
    let text = format!(
        "stoop needs {} x {} cells; this is {} x {}. q quits.",
        LEAST.0, LEAST.1, area.width, area.height
    );
    let mut lines: Vec<Line> = wrap(&text, usize::from(area.width))
        .into_iter()
        .map(Line::from)
        .collect();
    lines.extend(
        wrap(&model.results.sentence, usize::from(area.width))
            .into_iter()
            .map(|line| Line::from(Span::styled(line, theme.faint()))),
    );
    put_lines(buffer, area, &lines, 0);
}

/// The last pass in 7-bit mode: whatever is left beyond it (a file's title) becomes `?`.
fn to_ascii(buffer: &mut Buffer) {
    for cell in &mut buffer.content {
        if !cell.symbol().is_ascii() {
            cell.set_symbol("?");
        }
    }
}
