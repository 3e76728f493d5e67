//! Where everything stands, from the size and the lengths of the texts. Pure arithmetic that cannot underflow.

use ratatui::layout::Rect;

/// Smallest size the explorer is useful at.
pub const LEAST: (u16, u16) = (60, 20);

/// The areas of the screen, top to bottom.
///
/// ```text
/// header                                    one line
/// lens                        | knobs       what is left
/// verdict and why                           as many lines as the text needs
/// table of ways                             one line and one for each way
/// footer                                    one line, more for a long message
/// ```
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Areas {
    /// File, body, arrival.
    pub header: Rect,
    /// The large area.
    pub lens: Rect,
    /// The knobs.
    pub knobs: Rect,
    /// Verdict and reason.
    pub verdict: Rect,
    /// The ways side by side.
    pub table: Rect,
    /// Hints or a message.
    pub footer: Rect,
}

/// Divides a screen of `size` for a verdict, a table and a footer of so many lines.
///
/// The width of every area depends on the size alone, so that curves can be computed before texts are known.
pub fn areas(
    size: (u16, u16),
    verdict_lines: usize,
    table_lines: usize,
    footer_lines: usize,
) -> Areas {
    let (width, height) = size;
    let short = |lines: usize| u16::try_from(lines).unwrap_or(u16::MAX);
    let header = 1.min(height);
    let footer = short(footer_lines).min(height.saturating_sub(header));
    let rest = height.saturating_sub(header + footer);
    let table = short(table_lines).min(rest);
    let rest = rest.saturating_sub(table);
    // The hero keeps at least eight lines where there are any.
    let verdict = short(verdict_lines).min(rest.saturating_sub(8).max(rest.min(2)));
    let lens = rest.saturating_sub(verdict);
    let knobs_width = if width < LEAST.0 {
        0
    } else {
        (u32::from(width) * 37 / 100).clamp(25, 38) as u16
    };
    let lens_width = width.saturating_sub(knobs_width);
    let mut y = 0;
    let mut take = |lines: u16| {
        let at = y;
        y += lines;
        at
    };
    let header_y = take(header);
    let lens_y = take(lens);
    let verdict_y = take(verdict);
    let table_y = take(table);
    let footer_y = take(footer);
    Areas {
        header: Rect::new(0, header_y, width, header),
        lens: Rect::new(0, lens_y, lens_width, lens),
        knobs: Rect::new(lens_width, lens_y, knobs_width, lens),
        verdict: Rect::new(0, verdict_y, width, verdict),
        table: Rect::new(0, table_y, width, table),
        footer: Rect::new(0, footer_y, width, footer),
    }
}

/// Cuts a text to `width` cells; what is cut is shown by a trailing `~`.
pub fn fit(text: &str, width: usize) -> String {
    use unicode_width::{UnicodeWidthChar, UnicodeWidthStr};
    if text.width() <= width {
        return text.to_owned();
    }
    let mut out = String::new();
    let mut used = 0;
    for c in text.chars() {
        let cells = c.width().unwrap_or(0);
        if width < used + cells + 1 {
            break;
        }
        out.push(c);
        used += cells;
    }
    if 0 < width {
        out.push('~');
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn areas_tile_every_size() {
        for width in 0..130 {
            for height in 0..50 {
                let areas = areas((width, height), 5, 4, 1 + usize::from(width % 3));
                let total: u16 = [
                    areas.header,
                    areas.lens,
                    areas.verdict,
                    areas.table,
                    areas.footer,
                ]
                .iter()
                .map(|area| area.height)
                .sum();
                assert!(total <= height);
                assert_eq!(areas.lens.width + areas.knobs.width, width);
                assert!(areas.footer.bottom() <= height);
            }
        }
    }

    #[test]
    fn what_does_not_fit_is_cut_with_a_mark() {
        assert_eq!(fit("abcdef", 4), "abc~");
        assert_eq!(fit("abc", 3), "abc");
    }
}
