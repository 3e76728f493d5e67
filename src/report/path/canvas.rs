//! A canvas of terminal cells that draws conics, lines and marks; with fine symbols each cell has 2 × 4 dots.

use super::conic::Conic;
use super::view::Window;
use super::{Part, Role};
use crate::report::picture::Picture;
use crate::report::plot::Glyphs;
use crate::report::plot::scale::label;

/// First code point of the braille patterns; the low eight bits say which dots are set (Unicode, block 2800-28FF).
const BRAILLE: u32 = 0x2800;

/// Bit of the dot in a column and row of a cell.
const DOT_BITS: [[u8; 4]; 2] = [[0x01, 0x02, 0x04, 0x40], [0x08, 0x10, 0x20, 0x80]];

/// One cell while it is drawn.
#[derive(Clone, Copy, Debug)]
struct Cell {
    role: Role,
    /// Dots set, for fine symbols.
    dots: u8,
    /// A glyph of its own, above all lines.
    text: Option<char>,
}

/// The canvas.
#[derive(Clone, Debug)]
pub(super) struct Raster {
    pub(super) width: usize,
    pub(super) height: usize,
    glyphs: Glyphs,
    cells: Vec<Cell>,
}

impl Raster {
    pub(super) fn new(width: usize, height: usize, glyphs: Glyphs) -> Self {
        let blank = Cell {
            role: Role::Blank,
            dots: 0,
            text: None,
        };
        Self {
            width,
            height,
            glyphs,
            cells: vec![blank; width.saturating_mul(height)],
        }
    }

    /// Dots of a cell, across and down.
    pub(super) fn dots_per_cell(&self) -> (usize, usize) {
        match self.glyphs {
            Glyphs::Ascii => (1, 1),
            Glyphs::Fine => (2, 4),
        }
    }

    pub(super) fn finish(self) -> Picture<Role> {
        let glyph = |cell: &Cell| match cell.text {
            Some(glyph) => (glyph, cell.role),
            None if cell.role == Role::Blank => (' ', Role::Blank),
            None => match self.glyphs {
                Glyphs::Ascii => (cell.role.glyph(), cell.role),
                Glyphs::Fine => (
                    char::from_u32(BRAILLE + u32::from(cell.dots)).unwrap_or(' '),
                    cell.role,
                ),
            },
        };
        let mut picture = Picture::new(self.width, self.height);
        for (k, cell) in self.cells.iter().enumerate() {
            let (shown, role) = glyph(cell);
            // There is no cell without a width.
            picture.put(k % self.width, k / self.width, shown, role);
        }
        picture
    }

    fn cell(&self, x: usize, y: usize) -> Option<Cell> {
        (x < self.width)
            .then(|| self.cells.get(y * self.width + x).copied())
            .flatten()
    }

    fn cell_mut(&mut self, x: usize, y: usize) -> Option<&mut Cell> {
        if self.width <= x {
            return None;
        }
        self.cells.get_mut(y * self.width + x)
    }

    /// Sets a dot. Circles of floor and cap go under everything; of the rest the last drawn lies on top.
    fn set(&mut self, column: usize, row: usize, role: Role) {
        let (across, down) = self.dots_per_cell();
        let bit = DOT_BITS[column % across % 2][row % down % 4];
        if let Some(cell) = self.cell_mut(column / across, row / down) {
            let background = matches!(role, Role::Floor | Role::Cap);
            if background && cell.role != Role::Blank && cell.role != role {
                return;
            }
            cell.role = role;
            cell.dots |= bit;
        }
    }

    /// The disc of a body: every dot whose middle lies inside, and always the one that its centre falls into.
    pub(super) fn disc(&mut self, window: &Window, radius_km: f64, role: Role) {
        for row in 0..window.dots.1 {
            let (_, y) = window.point(0, row);
            let half = (radius_km - y.abs()) * (radius_km + y.abs());
            if half < 0.0 {
                continue;
            }
            let half = half.sqrt();
            let (from, to) = (window.place((-half, y)).0, window.place((half, y)).0);
            let last = window.dots.0 as f64 - 1.0;
            if to < 0.0 || last < from {
                continue;
            }
            let (from, to) = (from.ceil().max(0.0), to.floor().min(last));
            if from <= to {
                for column in from as usize..=to as usize {
                    self.set(column, row, role);
                }
            }
        }
        if let Some((column, row)) = window.dot_at((0.0, 0.0)) {
            self.set(column, row, role);
        }
    }

    /// A conic, or a part of one. Where it runs flat (seen in dots) its crossing with the middle line of each column is drawn, where it runs
    /// steep that with the middle line of each row: each dot has a point of the curve in it. Between flat and steep both are, or a curve that
    /// turns from one to the other just there would show a gap.
    pub(super) fn conic(&mut self, window: &Window, conic: &Conic, part: Part, role: Role) {
        const BOTH: f64 = 1.5;
        let slopes = |point: (f64, f64)| {
            let (u, v) = conic.direction(point);
            ((u / window.dot.0).abs(), (v / window.dot.1).abs())
        };
        let flat = |point: (f64, f64)| {
            let (across, up) = slopes(point);
            up <= BOTH * across
        };
        let steep = |point: (f64, f64)| {
            let (across, up) = slopes(point);
            across <= BOTH * up
        };
        for column in 0..window.dots.0 {
            let (x, _) = window.point(column, 0);
            for y in conic.at_x(x, part).filter(|y| flat((x, *y))) {
                if let Some((_, row)) = window.dot_at((x, y)) {
                    self.set(column, row, role);
                }
            }
        }
        for row in 0..window.dots.1 {
            let (_, y) = window.point(0, row);
            for x in conic.at_y(y, part).filter(|x| steep((*x, y))) {
                if let Some((column, _)) = window.dot_at((x, y)) {
                    self.set(column, row, role);
                }
            }
        }
    }

    /// A polyline; pieces with an end that is not a number are left out.
    pub(super) fn polyline(&mut self, window: &Window, points: &[(f64, f64)], role: Role) {
        for pair in points.windows(2) {
            let (from, to) = (window.place(pair[0]), window.place(pair[1]));
            let Some((from, to)) = clipped(from, to, window.dots) else {
                continue;
            };
            let length = (to.0 - from.0).abs().max((to.1 - from.1).abs());
            let steps = length.ceil().max(1.0) as usize;
            for k in 0..=steps {
                let share = k as f64 / steps as f64;
                let x = (from.0 + share * (to.0 - from.0)).round();
                let y = (from.1 + share * (to.1 - from.1)).round();
                if 0.0 <= x && 0.0 <= y {
                    self.set(x as usize, y as usize, role);
                }
            }
        }
    }

    /// An arrow along the motion on one conic: at the middle of what is seen of it, where no other line lies.
    pub(super) fn arrow(&mut self, window: &Window, conic: &Conic, part: Part, role: Role) {
        const PLACES: usize = 240;
        let (across, down) = self.dots_per_cell();
        let mut seen: Vec<(f64, f64)> = conic
            .anomalies(part, PLACES)
            .filter_map(|anomaly| conic.point(anomaly))
            .filter(|point| {
                window.dot_at(*point).is_some_and(|(column, row)| {
                    self.cell(column / across, row / down)
                        .is_some_and(|cell| cell.role == role && cell.text.is_none())
                })
            })
            .collect();
        if seen.is_empty() {
            return;
        }
        // On a whole turn the middle is a periapsis, where burns are; three quarters on is a quarter turn past it.
        let at = match part {
            Part::Whole => seen.len() * 3 / 4,
            Part::Upper | Part::Lower | Part::Incoming => seen.len() / 2,
        };
        let (x, y) = seen.swap_remove(at);
        let (u, v) = conic.direction((x, y));
        // Seen in cells, which are taller than wide.
        let glyph = if (v / super::view::CELL_ASPECT).abs() < u.abs() {
            if 0.0 < u { '>' } else { '<' }
        } else if 0.0 < v {
            '^'
        } else {
            'V'
        };
        if let Some((column, row)) = window.dot_at((x, y)) {
            self.write(column / across, row / down, glyph, Role::Motion);
        }
    }

    /// A burn's number at its place, or beside it where another number stands.
    pub(super) fn mark(&mut self, window: &Window, point: (f64, f64), role: Role) {
        let (across, down) = self.dots_per_cell();
        let Some((column, row)) = window.dot_at(point) else {
            return;
        };
        let (x, y) = (column / across, row / down);
        let free = |x: usize| {
            self.cell(x, y)
                .is_some_and(|cell| !matches!(cell.role, Role::Burn(_)))
        };
        let place = (x..self.width.min(x + 8))
            .find(|x| free(*x))
            .or_else(|| (0..x).rev().find(|x| free(*x)));
        if let Some(x) = place {
            self.write(x, y, role.glyph(), role);
        }
    }

    /// A bar of so many cells with its length, in the lower left corner: `+----+ 5k km`.
    pub(super) fn scale_bar(&mut self, km: f64, cells: usize) {
        let Some(y) = self.height.checked_sub(1) else {
            return;
        };
        // From the middle of the first cell to the middle of the last: `cells` cell widths.
        for x in 0..=cells {
            let end = x == 0 || x == cells;
            self.write(x, y, if end { '+' } else { '-' }, Role::Scale);
        }
        let text = format!(" {} km", label(km));
        if cells + 1 + text.len() <= self.width {
            for (k, glyph) in text.chars().enumerate() {
                self.write(cells + 1 + k, y, glyph, Role::Scale);
            }
        } else if let Some(above) = y.checked_sub(1)
            && text.len() <= self.width + 1
        {
            for (k, glyph) in text.trim_start().chars().enumerate() {
                self.write(k, above, glyph, Role::Scale);
            }
        }
    }

    fn write(&mut self, x: usize, y: usize, glyph: char, role: Role) {
        if let Some(cell) = self.cell_mut(x, y) {
            cell.text = Some(glyph);
            cell.role = role;
        }
    }
}

/// The part of a segment inside the dots, with half a dot of room around (Liang and Barsky 1984, a new concept and method for line
/// clipping). `None` where nothing is inside or an end is not a number.
fn clipped(
    from: (f64, f64),
    to: (f64, f64),
    dots: (usize, usize),
) -> Option<((f64, f64), (f64, f64))> {
    let (dx, dy) = (to.0 - from.0, to.1 - from.1);
    if !(dx.is_finite() && dy.is_finite()) {
        return None;
    }
    let (right, bottom) = (dots.0 as f64 - 0.5, dots.1 as f64 - 0.5);
    let (mut start, mut end) = (0.0_f64, 1.0_f64);
    for (step, room) in [
        (-dx, from.0 + 0.5),
        (dx, right - from.0),
        (-dy, from.1 + 0.5),
        (dy, bottom - from.1),
    ] {
        if step == 0.0 {
            if room < 0.0 {
                return None;
            }
        } else if step < 0.0 {
            start = start.max(room / step);
        } else {
            end = end.min(room / step);
        }
    }
    (start <= end).then_some((
        (from.0 + start * dx, from.1 + start * dy),
        (from.0 + end * dx, from.1 + end * dy),
    ))
}
