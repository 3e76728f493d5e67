//! The last line (or lines): a message if there is one, a prompt's help while typing, else the keys that matter now.

use crate::report::words::wrap;
use crate::study::knob::{Knob, by_id};
use crate::tui::action::{ACTIONS, Action, Entry};
use crate::tui::layout::fit;
use crate::tui::model::{Model, Overlay, Question, Tone};
use crate::tui::theme::Theme;
use ratatui::buffer::Buffer;
use ratatui::layout::Rect;
use ratatui::style::Style;
use ratatui::text::{Line, Span};

/// Most lines a message takes.
const MOST_LINES: usize = 4;

/// Lines the footer takes.
pub(super) fn height(model: &Model, width: usize) -> usize {
    said(model).map_or(1, |(_, text)| {
        wrap(&text, width.saturating_sub(2)).len().min(MOST_LINES)
    })
}

/// A question or message, if there is one; it goes before hints.
fn said(model: &Model) -> Option<(Tone, String)> {
    if let Some(Overlay::Ask(question)) = &model.overlay {
        let text = match question {
            Question::Quit => {
                "Unsaved changes. y leaves without them, s saves, any other key stays."
            }
            Question::Reload => {
                "Unsaved changes. y reads the file again over them (u brings them back), any other key keeps them."
            }
            Question::Overwrite => {
                "The file changed on disk since it was read. y writes over it (the other version is kept with a ~), any other key stays."
            }
            Question::Replace => {
                "That file exists. y replaces it (the old one is kept with a ~), any other key stays."
            }
        };
        return Some((Tone::Refused, text.to_owned()));
    }
    model.message.clone()
}

pub(super) fn draw(model: &Model, theme: Theme, area: Rect, buffer: &mut Buffer) {
    let width = usize::from(area.width);
    if let Some((tone, text)) = said(model) {
        let style = match tone {
            Tone::Done => theme.strong(),
            Tone::Refused => theme.alert(),
        };
        for (row, line) in (area.y..area.bottom()).zip(wrap(&text, width.saturating_sub(2))) {
            buffer.set_stringn(area.x, row, format!(" {line}"), width, style);
        }
        return;
    }
    match &model.overlay {
        Some(Overlay::Entry { knob, .. }) => {
            let text = entry_hint(by_id(*knob));
            buffer.set_stringn(area.x, area.y, fit(&text, width), width, theme.faint());
        }
        Some(Overlay::SaveAs { text }) => {
            let shown = crate::visible::ascii(text);
            let prompt = " save as: ";
            let room = width.saturating_sub(prompt.len() + 30);
            let tail: String = shown
                .chars()
                .rev()
                .take(room.max(8))
                .collect::<Vec<_>>()
                .into_iter()
                .rev()
                .collect();
            let line = format!("{prompt}{tail}_   Enter saves, Esc leaves");
            buffer.set_stringn(area.x, area.y, fit(&line, width), width, theme.strong());
        }
        _ => hints(theme, area, buffer),
    }
}

fn entry_hint(knob: &Knob) -> String {
    let best = if knob.takes_best() { ", or best" } else { "" };
    format!(
        " {}: {}{best}. Enter sets it, Esc leaves it",
        knob.label,
        knob.range_field().range()
    )
}

/// The hints by importance; help and quit always stand at the end, the rest as far as there is room.
fn hints(theme: Theme, area: Rect, buffer: &mut Buffer) {
    const LAST: [Action; 2] = [Action::Help, Action::Quit];
    let width = usize::from(area.width);
    let hint = |entry: &Entry| {
        let key = match entry.action {
            Action::TurnUp => "<>".to_owned(),
            Action::KnobDown => "^v".to_owned(),
            _ => entry
                .keys
                .first()
                .map_or_else(String::new, |key| key.shown()),
        };
        let text = entry.hint.to_owned();
        (key, text)
    };
    let length = |(key, text): &(String, String)| key.len() + text.len() + 3;
    let mut ranked: Vec<&Entry> = ACTIONS
        .iter()
        .filter(|entry| !entry.hint.is_empty())
        .collect();
    ranked.sort_by_key(|entry| entry.action == Action::Enter);
    let (last, first): (Vec<&Entry>, Vec<&Entry>) = ranked
        .into_iter()
        .partition(|entry| LAST.contains(&entry.action));
    let last: Vec<_> = last.into_iter().map(hint).collect();
    let mut used = 1 + last.iter().map(length).sum::<usize>();
    let mut shown = Vec::new();
    for each in first.into_iter().map(hint) {
        if used + length(&each) <= width {
            used += length(&each);
            shown.push(each);
        }
    }
    let mut spans = vec![Span::raw(" ")];
    for (key, text) in shown.into_iter().chain(last) {
        spans.push(Span::styled(key, theme.strong()));
        spans.push(Span::styled(format!(" {text}  "), Style::new()));
    }
    buffer.set_line(area.x, area.y, &Line::from(spans), area.width);
}
