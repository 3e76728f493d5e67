//! The notes lens: what moves the verdict, reasons in full, warnings, assumptions, sources.

use super::put_page;
use crate::report::words;
use crate::report::words::wrap;
use crate::tui::model::Model;
use crate::tui::theme::Theme;
use crate::visible::visible;
use ratatui::buffer::Buffer;
use ratatui::layout::Rect;
use ratatui::style::Style;
use ratatui::text::{Line, Span};

pub(super) fn draw(model: &Model, theme: Theme, area: Rect, buffer: &mut Buffer) {
    let width = usize::from(area.width).saturating_sub(2);
    let mut page = Page {
        lines: Vec::new(),
        width,
        theme,
    };
    let case = &model.case;
    let (title, note) = (visible(&case.spec().title), visible(&case.spec().note));
    if !title.is_empty() {
        page.heading(&title);
    }
    if !note.is_empty() {
        page.text(&note);
    }
    page.heading("Verdict");
    page.text(&model.results.sentence);
    page.text(&model.results.why);
    for shift in &model.results.shifts {
        page.item(shift);
    }
    let refused: Vec<_> = model
        .results
        .answer
        .ways
        .iter()
        .filter_map(|(way, plan)| plan.as_ref().err().map(|not| (way, not)))
        .collect();
    if !refused.is_empty() {
        page.heading("Not flyable");
        for (way, not) in refused {
            page.item(&format!("{}: {}", way.name(), words::reasons(case, not)));
        }
    }
    if !model.results.warnings.is_empty() {
        page.heading("Warnings");
        for warning in &model.results.warnings {
            page.item(&visible(&warning.text));
        }
    }
    page.heading("Assumptions and sources");
    for line in crate::report::sources::sources(case) {
        page.item(&visible(&line));
    }
    put_page(buffer, area, &page.lines, model.scroll, theme);
}

struct Page {
    lines: Vec<Line<'static>>,
    width: usize,
    theme: Theme,
}

impl Page {
    fn heading(&mut self, text: &str) {
        if !self.lines.is_empty() {
            self.lines.push(Line::default());
        }
        for line in wrap(text, self.width) {
            self.lines.push(Line::from(Span::styled(
                format!(" {line}"),
                self.theme.strong(),
            )));
        }
    }

    fn text(&mut self, text: &str) {
        for line in wrap(text, self.width) {
            self.lines
                .push(Line::from(Span::styled(format!(" {line}"), Style::new())));
        }
    }

    fn item(&mut self, text: &str) {
        for (k, line) in wrap(text, self.width.saturating_sub(2))
            .into_iter()
            .enumerate()
        {
            let lead = if k == 0 { " - " } else { "   " };
            self.lines.push(Line::from(format!("{lead}{line}")));
        }
    }
}
