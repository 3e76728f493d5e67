//! What is left when a burn stops early, as a small curve of characters: the apoapsis by the share of the burn flown.

use super::picture::Picture;
use super::plot::scale::{Scale, label};
use crate::physics::held_burn::Left;
use crate::study::Case;
use crate::study::engine::Questions;

/// Cells to the left of the curve.
const GUTTER: usize = 8;
/// Rows above it: the title.
const TOP: usize = 1;

/// Draws the curve into at most `width` by `height` cells; nothing where there is no room or nothing is captured.
pub fn lines(case: &Case, questions: &Questions, width: usize, height: usize) -> Vec<String> {
    let apoapses: Vec<(f64, f64)> = questions
        .stops
        .iter()
        .filter_map(|(share, left)| match left {
            Left::Orbit(orbit) => Some((*share, case.altitude_km(orbit.apoapsis_km))),
            Left::Flyby { .. } => None,
        })
        .collect();
    if width < GUTTER + 24 || height < 5 {
        return Vec::new();
    }
    let (columns, rows) = (width - GUTTER - 1, height - 3);
    let low = apoapses
        .iter()
        .map(|(_, y)| *y)
        .fold(f64::INFINITY, f64::min);
    let high = apoapses.iter().map(|(_, y)| *y).fold(0.0, f64::max);
    let Some(scale) = (low < high && 0.0 < low)
        .then(|| Scale::new(low, high, rows, true))
        .flatten()
    else {
        return Vec::new();
    };
    let mut picture = Picture::<()>::new(width, height);
    let column = |share: f64| {
        let at = (share * (columns - 1) as f64).round();
        GUTTER + (at.max(0.0) as usize).min(columns - 1)
    };
    let title = format!("apoapsis left, km, if burn {} stops early", questions.burn);
    picture.write(0, 0, &title, ());
    // Before capture the spacecraft flies past: said along the top.
    let flyby = column(apoapses.first().map_or(1.0, |(share, _)| *share));
    for x in GUTTER..flyby {
        picture.put(x, TOP, '~', ());
    }
    if GUTTER + 14 < flyby {
        picture.write(GUTTER + 2, TOP, " flies past ", ());
    }
    // Between two moments asked the curve is drawn through, in the logarithm that the axis has.
    for pair in apoapses.windows(2) {
        let (from, to) = (column(pair[0].0), column(pair[1].0));
        for x in from..=to {
            let part = (x - from) as f64 / (to - from).max(1) as f64;
            let value = (pair[0].1.ln() * (1.0 - part) + pair[1].1.ln() * part).exp();
            if let Some(cell) = scale.cell(value.clamp(low, high)) {
                picture.put(x, TOP + rows - 1 - cell.min(rows - 1), '#', ());
            }
        }
    }
    for row in 0..rows {
        picture.put(GUTTER - 1, TOP + row, '|', ());
    }
    for tick in scale.ticks(rows.div_ceil(2)) {
        if let Some(cell) = scale.cell(tick) {
            let (row, text) = (TOP + rows - 1 - cell.min(rows - 1), label(tick));
            picture.write((GUTTER - 2).saturating_sub(text.len()), row, &text, ());
            picture.put(GUTTER - 1, row, '+', ());
        }
    }
    let axis = TOP + rows;
    picture.write(GUTTER - 1, axis, &format!("+{}", "-".repeat(columns)), ());
    picture.write(0, axis + 1, "% burnt", ());
    for percent in [0_u32, 25, 50, 75, 100] {
        let text = percent.to_string();
        let at = column(f64::from(percent) / 100.0).saturating_sub(text.len() / 2);
        let at = at.clamp(GUTTER, GUTTER + columns - text.len());
        picture.write(at, axis + 1, &text, ());
    }
    picture.lines()
}
