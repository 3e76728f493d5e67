//! The cost curve as characters: one glyph a way, axes with ticks, markers. Pure; the screen adds colour by role.

pub mod scale;

use super::picture::Picture;
use crate::arrival::Way;
use crate::study::curve::{Axis, Row, Sample};
use scale::{Scale, label};

/// What a cell of a picture means. Colour follows it and only repeats what the glyph says.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum Role {
    /// Nothing.
    #[default]
    Blank,
    /// Axis line or tick.
    Axis,
    /// Tick label or unit.
    Label,
    /// The curve of a way.
    Way(Way),
    /// The curve of a way without its finite-burn loss.
    Companion(Way),
    /// Where the scenario stands.
    Here,
    /// The cheapest altitude.
    Cheapest,
    /// A crossover.
    Crossover,
}

/// Which symbols are used.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Glyphs {
    /// 7-bit only.
    Ascii,
    /// Denser symbols, where the font has them.
    Fine,
}

/// What the vertical axis shows.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Quantity {
    /// Ranking cost, m/s.
    Cost,
    /// Propellant, kg.
    Propellant,
    /// Delivered mass, kg.
    FinalMass,
    /// Days.
    Days,
    /// Longest burn, min.
    LongestBurn,
    /// Captured after, percent of the first burn.
    CapturedAfter,
}

impl Quantity {
    /// All quantities in the order they are gone through.
    pub const ALL: &'static [Quantity] = &[
        Quantity::Cost,
        Quantity::Propellant,
        Quantity::FinalMass,
        Quantity::Days,
        Quantity::LongestBurn,
        Quantity::CapturedAfter,
    ];

    /// Name and unit for the top of the axis.
    pub fn title(self) -> &'static str {
        match self {
            Quantity::Cost => "cost, m/s",
            Quantity::Propellant => "propellant, kg",
            Quantity::FinalMass => "delivered mass, kg",
            Quantity::Days => "time, d",
            Quantity::LongestBurn => "longest burn, min",
            Quantity::CapturedAfter => "captured after, %",
        }
    }

    /// The value of a sample in the axis unit.
    pub fn of(self, sample: &Sample) -> Option<f64> {
        match self {
            Quantity::Cost => Some(1e3 * sample.cost_km_s),
            Quantity::Propellant => sample.propellant_kg,
            Quantity::FinalMass => sample.final_mass_kg,
            Quantity::Days => Some(sample.duration_s / crate::study::case::DAY_S),
            Quantity::LongestBurn => sample.longest_burn_s.map(|seconds| seconds / 60.0),
            Quantity::CapturedAfter => sample.captured_share.map(|share| 100.0 * share),
        }
    }
}

/// A mark on the curve: a value of the knob and of the vertical quantity.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Mark {
    /// Knob value.
    pub x: f64,
    /// Value in the unit of the vertical axis.
    pub y: f64,
}

/// Everything a curve's picture needs.
#[derive(Clone, Debug)]
pub struct Plot<'a> {
    /// One row for each column of the plot, from left to right; see [`columns`].
    pub rows: &'a [Row],
    /// The axis the rows were swept over.
    pub axis: Axis,
    /// Name and unit of the horizontal axis; up to seven characters stand beside the labels instead of among them.
    pub x_title: &'a str,
    /// What is drawn.
    pub quantity: Quantity,
    /// Logarithmic vertical axis.
    pub y_log: bool,
    /// Where the scenario stands.
    pub here: Option<f64>,
    /// The cheapest altitude.
    pub cheapest: Option<Mark>,
    /// The crossovers.
    pub crossovers: &'a [Mark],
    /// Symbols.
    pub glyphs: Glyphs,
}

/// Cells to the left of the plot: tick labels and the axis line.
const GUTTER: usize = 8;
/// Rows below the plot: axis line and labels.
const BELOW: usize = 2;
/// Rows above the plot: the unit.
const ABOVE: usize = 1;

/// How many values to sweep for a picture of this width: one for each column of the plot.
pub fn columns(width: usize) -> usize {
    width.saturating_sub(GUTTER + 1).max(2)
}

/// The knob value under a column of a picture of this width, `None` in the gutter.
pub fn value_at(axis: &Axis, width: usize, column: usize) -> Option<f64> {
    let scale = Scale::new(axis.from, axis.to, columns(width), axis.log)?;
    let column = column.checked_sub(GUTTER)?;
    (column < scale.cells).then(|| scale.value(column))
}

/// Draws a curve into `width` × `height` cells. Too small a space gives an empty picture.
pub fn draw(plot: &Plot, width: usize, height: usize) -> Picture<Role> {
    let mut picture = Picture::new(width, height);
    if width < GUTTER + 12 || height < ABOVE + BELOW + 3 {
        return picture;
    }
    let (plot_width, plot_height) = (columns(width), height - ABOVE - BELOW);
    let Some(x_scale) = Scale::new(plot.axis.from, plot.axis.to, plot_width, plot.axis.log) else {
        return picture;
    };
    let y_scale = y_scale(plot, plot_height);
    let frame = Frame {
        x_scale,
        y_scale,
        plot_height,
    };
    draw_axes(&mut picture, plot, &frame);
    let Some(y_scale) = y_scale else {
        let text = "nothing flyable in this range";
        picture.write(
            GUTTER + plot_width.saturating_sub(text.len()) / 2,
            ABOVE + plot_height / 2,
            text,
            Role::Label,
        );
        draw_here(&mut picture, plot, &frame);
        return picture;
    };
    draw_here(&mut picture, plot, &frame);
    if plot.quantity == Quantity::Cost {
        for entry in Way::TABLE.iter().rev() {
            draw_companion(&mut picture, plot, &y_scale, plot_height, entry.way);
        }
    }
    for entry in Way::TABLE.iter().rev() {
        draw_way(&mut picture, plot, &y_scale, plot_height, entry.way, false);
    }
    // The cheapest way lies on top wherever it is cheapest.
    for entry in Way::TABLE {
        draw_way(&mut picture, plot, &y_scale, plot_height, entry.way, true);
    }
    let mut mark = |mark: &Mark, glyph: char, role: Role| {
        if let (Some(x), Some(y)) = (x_scale.cell(mark.x), y_scale.cell(mark.y)) {
            picture.put(GUTTER + x, ABOVE + plot_height - 1 - y, glyph, role);
        }
    };
    if let Some(cheapest) = &plot.cheapest {
        mark(cheapest, '*', Role::Cheapest);
    }
    for crossover in plot.crossovers {
        mark(crossover, 'X', Role::Crossover);
    }
    picture
}

struct Frame {
    x_scale: Scale,
    y_scale: Option<Scale>,
    plot_height: usize,
}

fn values<'a>(plot: &'a Plot, way: Way) -> impl Iterator<Item = Option<(f64, bool)>> + 'a {
    plot.rows.iter().map(move |row| match row {
        Row::Asked(point) => point.ways[way as usize]
            .as_ref()
            .ok()
            .and_then(|sample| plot.quantity.of(sample))
            .filter(|value| value.is_finite())
            .map(|value| (value, point.best == Some(way))),
        Row::Refused { .. } => None,
    })
}

/// The vertical range: everything that is drawn, with a little air; tidy ends are left to the ticks.
fn y_scale(plot: &Plot, plot_height: usize) -> Option<Scale> {
    let (mut low, mut high) = (f64::INFINITY, f64::NEG_INFINITY);
    for entry in Way::TABLE {
        for (value, _) in values(plot, entry.way).flatten() {
            low = low.min(value);
            high = high.max(value);
        }
    }
    if !low.is_finite() {
        return None;
    }
    if plot.y_log && 0.0 < low {
        let air = ((high / low).ln() * 0.04).max(0.01);
        return Scale::new(low * (-air).exp(), high * air.exp(), plot_height, true);
    }
    let air = if low < high {
        0.05 * (high - low)
    } else {
        0.05 * low.abs().max(1e-6)
    };
    let bottom = if 0.0 <= low {
        (low - air).max(0.0)
    } else {
        low - air
    };
    Scale::new(bottom, high + air, plot_height, false)
}

fn draw_axes(picture: &mut Picture<Role>, plot: &Plot, frame: &Frame) {
    let (axis_y, plot_height) = (ABOVE + frame.plot_height, frame.plot_height);
    let (corner, horizontal, vertical) = match plot.glyphs {
        Glyphs::Ascii => ('+', '-', '|'),
        Glyphs::Fine => ('\u{2514}', '\u{2500}', '\u{2502}'),
    };
    for y in 0..plot_height {
        picture.put(GUTTER - 1, ABOVE + y, vertical, Role::Axis);
    }
    for x in 0..frame.x_scale.cells {
        picture.put(GUTTER + x, axis_y, horizontal, Role::Axis);
    }
    picture.put(GUTTER - 1, axis_y, corner, Role::Axis);
    picture.write(0, 0, plot.quantity.title(), Role::Label);
    if let Some(y_scale) = &frame.y_scale {
        let mut last: Option<usize> = None;
        for tick in y_scale.ticks(plot_height / 3) {
            let Some(cell) = y_scale.cell(tick) else {
                continue;
            };
            if last == Some(cell) {
                continue;
            }
            last = Some(cell);
            let y = ABOVE + plot_height - 1 - cell;
            let text = label(tick);
            picture.write(
                (GUTTER - 2).saturating_sub(text.len()),
                y,
                &text,
                Role::Label,
            );
            picture.put(GUTTER - 1, y, '+', Role::Axis);
        }
    }
    draw_x_labels(picture, plot, frame, axis_y);
}

fn draw_x_labels(picture: &mut Picture<Role>, plot: &Plot, frame: &Frame, axis_y: usize) {
    let scale = &frame.x_scale;
    // A short title stands in the gutter, where it takes no room from the ticks.
    let title = plot.x_title;
    let title_at = if title.len() < GUTTER {
        picture.write(0, axis_y + 1, title, Role::Label);
        picture.width + 2
    } else {
        let at = (GUTTER + scale.cells).saturating_sub(title.len());
        picture.write(at, axis_y + 1, title, Role::Label);
        at
    };
    // `here` has its word where it fits; tick labels make room for it.
    let here = plot.here.and_then(|here| scale.cell(here));
    // Labels start right of a title in the gutter, with a blank between.
    let mut free_from = if title.len() < GUTTER {
        title.len() + 1
    } else {
        0
    };
    let mut taken: Vec<(usize, usize)> = Vec::new();
    if let Some(cell) = here {
        let at = (GUTTER + cell).saturating_sub(1);
        if at + 5 < title_at {
            picture.write(at, axis_y + 1, "here", Role::Here);
            taken.push((at, at + 4));
        }
    }
    for tick in scale.ticks(scale.cells / 9) {
        let Some(cell) = scale.cell(tick) else {
            continue;
        };
        picture.put(GUTTER + cell, axis_y, '+', Role::Axis);
        let text = label(tick);
        let at = (GUTTER + cell).saturating_sub(text.len() / 2).max(GUTTER);
        let end = at + text.len();
        let clear = taken.iter().all(|(from, to)| end < *from || *to < at);
        if free_from <= at && end + 1 < title_at && end <= picture.width && clear {
            picture.write(at, axis_y + 1, &text, Role::Label);
            free_from = end + 1;
        }
    }
    if let Some(cell) = here {
        picture.put(GUTTER + cell, axis_y, '^', Role::Here);
    }
}

fn draw_here(picture: &mut Picture<Role>, plot: &Plot, frame: &Frame) {
    let Some(cell) = plot.here.and_then(|here| frame.x_scale.cell(here)) else {
        return;
    };
    for y in 0..frame.plot_height {
        picture.put(GUTTER + cell, ABOVE + y, '|', Role::Here);
    }
}

/// Draws what a way would cost without the finite-burn loss: a faint line that shows only where it leaves the way's own.
fn draw_companion(
    picture: &mut Picture<Role>,
    plot: &Plot,
    scale: &Scale,
    plot_height: usize,
    way: Way,
) {
    let glyph = match plot.glyphs {
        Glyphs::Ascii => '.',
        Glyphs::Fine => '\u{2508}',
    };
    for (x, row) in plot.rows.iter().enumerate() {
        let Row::Asked(point) = row else { continue };
        let Ok(sample) = &point.ways[way as usize] else {
            continue;
        };
        let loss = sample.dv_km_s - sample.impulsive_dv_km_s;
        if loss == 0.0 {
            continue;
        }
        if let Some(cell) = scale.cell(1e3 * (sample.cost_km_s - loss)) {
            picture.put(
                GUTTER + x,
                ABOVE + plot_height - 1 - cell,
                glyph,
                Role::Companion(way),
            );
        }
    }
}

/// Draws one way; `best_only` draws just the stretch where it is the cheapest.
fn draw_way(
    picture: &mut Picture<Role>,
    plot: &Plot,
    scale: &Scale,
    plot_height: usize,
    way: Way,
    best_only: bool,
) {
    let mut before: Option<usize> = None;
    for (x, value) in values(plot, way).enumerate() {
        let shown = value.filter(|(_, best)| *best || !best_only);
        let cell = shown.and_then(|(value, _)| scale.cell(value));
        if let (Some((value, _)), Some(cell)) = (shown, cell) {
            let glyph = glyph(plot.glyphs, way, scale.position(value), cell);
            picture.put(
                GUTTER + x,
                ABOVE + plot_height - 1 - cell,
                glyph,
                Role::Way(way),
            );
            // A steep stretch is joined up, half from each side, so that the curve stays one line.
            if let Some(last) = before.filter(|last| 1 < last.abs_diff(cell)) {
                let middle = usize::midpoint(last, cell);
                for y in last.min(cell) + 1..last.max(cell) {
                    let own = (y <= middle) == (cell < last);
                    let column = if own { x } else { x.saturating_sub(1) };
                    let (_, role) = picture.cell(GUTTER + column, ABOVE + plot_height - 1 - y);
                    if matches!(role, Role::Blank | Role::Here | Role::Companion(_)) {
                        let glyph = way.entry().glyph;
                        picture.put(
                            GUTTER + column,
                            ABOVE + plot_height - 1 - y,
                            glyph,
                            Role::Way(way),
                        );
                    }
                }
            }
        }
        before = cell;
    }
}

/// The glyph of a way; with fine symbols it also says where in the cell's height the value lies.
fn glyph(glyphs: Glyphs, way: Way, position: Option<f64>, cell: usize) -> char {
    if glyphs == Glyphs::Ascii {
        return way.entry().glyph;
    }
    let within = position.map_or(0.0, |position| position - cell as f64);
    let pick = |steps: &[char]| {
        let k = ((within + 0.5) * steps.len() as f64)
            .floor()
            .clamp(0.0, (steps.len() - 1) as f64);
        steps[k as usize]
    };
    match way {
        Way::Direct => pick(&['\u{23bd}', '\u{23bc}', '\u{2500}', '\u{23bb}', '\u{23ba}']),
        Way::Dip => pick(&['.', '\u{b7}', '\u{2d9}']),
        Way::Loop => pick(&['\u{2080}', 'o', '\u{b0}']),
        Way::Steps => ':',
    }
}
