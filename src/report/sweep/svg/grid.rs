//! The grid of a sweep over two knobs: the winning way in each cell, by colour and glyph.

use super::paper::{Paper, Pixels, TOP};
use super::{frame, stroke};
use crate::report::sweep::{Sweep, title};
use crate::study::curve::{Axis, Row};
use std::fmt::Result;

/// Grey of cells whose value the scenario refuses.
const REFUSED: &str = "#ccc";

pub(super) fn draw(sweep: &Sweep, second: &Axis, paper: &mut Paper) -> Result {
    let (left, right, base) = frame();
    let first = &sweep.first;
    let (columns, rows) = (first.points as f64, second.points as f64);
    let (w, h) = ((right - left) / columns, (base - TOP) / rows);
    // Values belong to the middles of their cells.
    let x = Pixels::new(
        first.from,
        first.to,
        first.log,
        left + 0.5 * w,
        right - left - w,
    );
    let y = Pixels::new(
        second.from,
        second.to,
        second.log,
        base - 0.5 * h,
        TOP - base + h,
    );
    if let Some(x) = &x {
        paper.horizontal(x, &title(first))?;
    }
    if let Some(y) = &y {
        paper.vertical(y, &title(second))?;
    }
    for (k, cell) in sweep.cells.iter().enumerate() {
        let (column, row) = (k % first.points, k / first.points);
        let px = left + column as f64 * w;
        let py = base - (row + 1) as f64 * h;
        let (colour, glyph, ink) = match &cell.row {
            Row::Refused { .. } => (REFUSED, '?', "#444"),
            Row::Asked(point) => match point.best {
                Some(best) => (stroke(best).0, best.entry().glyph, "#fff"),
                None => continue,
            },
        };
        paper.cell(px, py, w, h, colour)?;
        if 9.0 < w && 12.0 < h {
            paper.text(
                px + 0.5 * w,
                py + 0.5 * h + 4.0,
                "middle",
                &glyph.to_string(),
                &format!("fill=\"{ink}\" font-size=\"10\""),
            )?;
        }
    }
    Ok(())
}
