//! What is left when a burn stops early, as a small curve of characters: the apoapsis by the share of the burn flown.

use super::plot::scale::{Scale, label};
use crate::physics::held_burn::Left;
use crate::study::Case;
use crate::study::engine::Questions;

/// Cells to the left of the curve.
const GUTTER: usize = 8;

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
    let mut cells = vec![vec![' '; columns]; rows];
    let column = |share: f64| {
        let at = (share * (columns - 1) as f64).round();
        (at.max(0.0) as usize).min(columns - 1)
    };
    // Before capture the spacecraft flies past: said along the top.
    let captured = apoapses.first().map_or(1.0, |(share, _)| *share);
    let flyby = column(captured);
    for cell in cells[0].iter_mut().take(flyby) {
        *cell = '~';
    }
    for (word, glyph) in " flies past ".chars().enumerate() {
        if let Some(cell) = cells[0].get_mut(2 + word)
            && 14 < flyby
        {
            *cell = glyph;
        }
    }
    // Between two moments asked the curve is drawn through, in the logarithm that the axis has.
    for pair in apoapses.windows(2) {
        let (from, to) = (column(pair[0].0), column(pair[1].0));
        for x in from..=to {
            let part = if to == from {
                0.0
            } else {
                (x - from) as f64 / (to - from) as f64
            };
            let value = (pair[0].1.ln() * (1.0 - part) + pair[1].1.ln() * part).exp();
            if let Some(cell) = scale.cell(value.clamp(low, high))
                && let Some(row) = cells.get_mut(rows - 1 - cell.min(rows - 1))
            {
                row[x] = '#';
            }
        }
    }
    let mut out = vec![format!(
        "apoapsis left, km, if burn {} stops early",
        questions.burn
    )];
    let ticks: Vec<(usize, String)> = scale
        .ticks(rows.div_ceil(2))
        .into_iter()
        .filter_map(|tick| scale.cell(tick).map(|cell| (cell, label(tick))))
        .collect();
    for (k, row) in cells.iter().enumerate() {
        let tick = ticks.iter().find(|(cell, _)| rows - 1 - cell == k);
        let (text, mark) = tick.map_or(("", '|'), |(_, text)| (text.as_str(), '+'));
        let line: String = row.iter().collect();
        out.push(format!("{text:>6} {mark}{}", line.trim_end()));
    }
    out.push(format!("{:>7}+{}", "", "-".repeat(columns)));
    let mut axis = vec![' '; columns];
    for percent in [0_u32, 25, 50, 75, 100] {
        let text = percent.to_string();
        let at = column(f64::from(percent) / 100.0)
            .saturating_sub(text.len() / 2)
            .min(columns - text.len());
        for (k, c) in text.chars().enumerate() {
            axis[at + k] = c;
        }
    }
    let axis: String = axis.into_iter().collect();
    out.push(format!("% burnt {}", axis.trim_end()));
    out
}
