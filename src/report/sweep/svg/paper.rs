//! The paper: shapes and text as SVG elements, pixel scales, axes.

use crate::report::plot::scale::{Scale, label};
use std::fmt::{Result, Write};

pub(super) const WIDTH: f64 = 900.0;
pub(super) const HEIGHT: f64 = 560.0;
pub(super) const LEFT: f64 = 80.0;
pub(super) const RIGHT: f64 = 24.0;
pub(super) const TOP: f64 = 72.0;
pub(super) const BOTTOM: f64 = 66.0;

/// Text as XML shows it literally; what XML cannot hold is written as an escape.
pub(super) fn escape(text: &str) -> String {
    crate::visible::visible(text)
        .replace('&', "&amp;")
        .replace('<', "&lt;")
        .replace('>', "&gt;")
        .replace('"', "&quot;")
        // Two code points that no XML document may contain.
        .replace(['\u{fffe}', '\u{ffff}'], "?")
}

/// What has been drawn so far.
#[derive(Default)]
pub(super) struct Paper(pub(super) String);

impl Paper {
    /// A line with attributes of its own.
    pub(super) fn line(&mut self, from: (f64, f64), to: (f64, f64), style: &str) -> Result {
        writeln!(
            self.0,
            "<line x1=\"{:.1}\" y1=\"{:.1}\" x2=\"{:.1}\" y2=\"{:.1}\" {style}/>",
            from.0, from.1, to.0, to.1
        )
    }

    /// A text, its anchor `start`, `middle` or `end`.
    pub(super) fn text(&mut self, x: f64, y: f64, anchor: &str, text: &str, style: &str) -> Result {
        let space = if style.is_empty() { "" } else { " " };
        writeln!(
            self.0,
            "<text x=\"{x:.1}\" y=\"{y:.1}\" text-anchor=\"{anchor}\"{space}{style}>{}</text>",
            escape(text)
        )
    }

    /// A filled rectangle.
    pub(super) fn cell(&mut self, x: f64, y: f64, width: f64, height: f64, fill: &str) -> Result {
        writeln!(
            self.0,
            "<rect x=\"{x:.2}\" y=\"{y:.2}\" width=\"{width:.2}\" height=\"{height:.2}\" fill=\"{fill}\"/>"
        )
    }

    /// The horizontal axis: line, ticks, title.
    pub(super) fn horizontal(&mut self, x: &Pixels, title: &str) -> Result {
        let (left, right, base) = super::frame();
        self.line((left, base), (right, base), "stroke=\"#555\"")?;
        let mut free_from = 0.0;
        for tick in x.scale.ticks(9) {
            let Some(at) = x.at(tick) else { continue };
            self.line((at, base), (at, base + 5.0), "stroke=\"#555\"")?;
            let text = label(tick);
            // About 8 pixels a character at this size.
            let half = 4.0 * text.len() as f64;
            if free_from <= at - half {
                self.text(at, base + 19.0, "middle", &text, "")?;
                free_from = at + half + 6.0;
            }
        }
        self.text(right, base + 38.0, "end", title, "")
    }

    /// The vertical axis: line, ticks, rules across, title.
    pub(super) fn vertical(&mut self, y: &Pixels, title: &str) -> Result {
        let (left, right, base) = super::frame();
        self.line((left, TOP), (left, base), "stroke=\"#555\"")?;
        for tick in y.scale.ticks(8) {
            let Some(at) = y.at(tick) else { continue };
            self.line((left, at), (right, at), "stroke=\"#ddd\"")?;
            self.text(left - 8.0, at + 4.0, "end", &label(tick), "")?;
        }
        self.text(14.0, TOP - 8.0, "start", title, "")
    }
}

/// A scale over pixels.
pub(super) struct Pixels {
    scale: Scale,
    start: f64,
    length: f64,
}

impl Pixels {
    /// From `low` at `start` to `high` at `start + length`; `None` for ends that make no scale.
    pub(super) fn new(low: f64, high: f64, log: bool, start: f64, length: f64) -> Option<Self> {
        // Two cells: the position then runs from 0 to 1.
        Scale::new(low, high, 2, log).map(|scale| Self {
            scale,
            start,
            length,
        })
    }

    /// Where a value lies; `None` outside the scale.
    pub(super) fn at(&self, value: f64) -> Option<f64> {
        self.scale
            .position(value)
            .filter(|share| (-1e-9..=1.0 + 1e-9).contains(share))
            .map(|share| self.start + share * self.length)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn foreign_text_stays_text() {
        assert_eq!(
            escape("<script>\"a\" & b</script>"),
            "&lt;script&gt;&quot;a&quot; &amp; b&lt;/script&gt;"
        );
        assert_eq!(escape("a\u{1b}b\u{0}"), "a\\u{1b}b\\u{0}");
    }

    #[test]
    fn pixels_end_where_the_scale_ends() {
        let x = Pixels::new(100.0, 10_000.0, true, 80.0, 800.0).expect("a scale");
        assert_eq!(x.at(1000.0), Some(480.0));
        assert_eq!(x.at(10_001.0), None);
        assert_eq!(x.at(-1.0), None);
        // A sweep may run downwards.
        let x = Pixels::new(10.0, 0.0, false, 0.0, 10.0).expect("a scale");
        assert_eq!(x.at(4.0), Some(6.0));
    }
}
