//! Which part of the plane is seen: centre and zoom to kilometres per cell.

use super::canvas::Raster;
use super::conic::Conic;
use super::{Part, Role, Scene};
use crate::report::plot::scale::tidy_step;

/// Height of a terminal cell over its width: 2 in nearly every font (common practice, no source).
pub(super) const CELL_ASPECT: f64 = 2.0;

/// Air around the whole picture.
const AIR: f64 = 1.06;

/// What lies in the middle of the picture.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Centre {
    /// The middle of all orbits.
    Whole,
    /// The body.
    Body,
    /// Burn k, counted from one.
    Burn(usize),
}

/// A view of a scene.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct View {
    /// What lies in the middle. A burn that does not exist counts as the body.
    pub centre: Centre,
    /// 1 shows all orbits whatever the centre, 2 half of that, and so on; below 1 shows more (the cap, see [`View::to_the_cap`]).
    pub zoom: f64,
}

impl View {
    /// Everything.
    pub const WHOLE: View = View {
        centre: Centre::Whole,
        zoom: 1.0,
    };

    /// The whole cap circle, the body in the middle, at this size of picture.
    pub fn to_the_cap(scene: &Scene, width: usize, height: usize) -> View {
        let (width, height) = (width.max(1) as f64, CELL_ASPECT * height.max(1) as f64);
        let per_cell = |(x, y): (f64, f64)| (2.0 * x / width).max(2.0 * y / height);
        let conics = scene.conics();
        let all = per_cell(half_spans(&conics, scene, (0.0, 0.0)));
        let cap = per_cell((scene.cap_radius_km, scene.cap_radius_km));
        View {
            centre: Centre::Body,
            zoom: all / cap,
        }
    }

    /// Closest zoom that still shows something: floor and surface, at the first periapsis, as far apart as the picture is high, or a hundredth
    /// of the periapsis radius where they are one.
    pub fn closest_zoom(scene: &Scene) -> f64 {
        let gap =
            (scene.floor_radius_km - scene.body_radius_km).max(0.01 * scene.arriving.periapsis_km);
        let conics = scene.conics();
        let (x, y) = half_spans(&conics, scene, (0.0, 0.0));
        2.0 * x.max(y) / gap
    }
}

/// The box round all that is drawn whole (orbits and body; circles and the hyperbola's far part are cut): x from, x to, y to. km.
fn bounds(conics: &[(Conic, Part, Role)], scene: &Scene) -> (f64, f64, f64) {
    let radius = scene.body_radius_km;
    let mut bounds = (-radius, radius, radius);
    for (conic, _, _) in conics {
        let (l, e) = (conic.parameter_km, conic.eccentricity);
        let periapsis = conic.towards * l / (1.0 + e);
        let apoapsis = if e < 1.0 {
            -conic.towards * l / (1.0 - e)
        } else {
            // Of the hyperbola, as much as its semi-latus rectum: it is seen to come from somewhere.
            0.0
        };
        // Semi-minor axis ℓ/√(1 − e²); the hyperbola's height beside the focus is ℓ.
        let height = if e < 1.0 {
            l / ((1.0 - e) * (1.0 + e)).sqrt()
        } else {
            l
        };
        bounds.0 = bounds.0.min(periapsis).min(apoapsis);
        bounds.1 = bounds.1.max(periapsis).max(apoapsis);
        bounds.2 = bounds.2.max(height);
    }
    bounds
}

/// Half the width and half the height that a picture needs to show everything with this point in the middle, km.
fn half_spans(conics: &[(Conic, Part, Role)], scene: &Scene, middle: (f64, f64)) -> (f64, f64) {
    let (left, right, up) = bounds(conics, scene);
    (
        AIR * (middle.0 - left).max(right - middle.0),
        AIR * (up + middle.1.abs()),
    )
}

/// The plane seen through the dots of a raster.
#[derive(Clone, Copy, Debug)]
pub(super) struct Window {
    /// What lies in the middle, km.
    middle: (f64, f64),
    /// Width and height of a dot, km.
    pub(super) dot: (f64, f64),
    /// Dots across and down.
    pub(super) dots: (usize, usize),
    /// Width of a cell, km.
    pub(super) cell_km: f64,
}

impl Window {
    /// `None` where there is nothing to see: no cells, or a zoom that is not a positive number.
    pub(super) fn new(
        scene: &Scene,
        conics: &[(Conic, Part, Role)],
        view: &View,
        raster: &Raster,
    ) -> Option<Self> {
        let (width, height) = (raster.width, raster.height);
        if width == 0 || height == 0 || !(0.0 < view.zoom && view.zoom.is_finite()) {
            return None;
        }
        let middle = match view.centre {
            Centre::Whole => {
                let (left, right, _) = bounds(conics, scene);
                (0.5 * (left + right), 0.0)
            }
            Centre::Body => (0.0, 0.0),
            Centre::Burn(k) => {
                let place = k
                    .checked_sub(1)
                    .and_then(|k| scene.burn_places().get(k).copied());
                (place.unwrap_or(0.0), 0.0)
            }
        };
        let (x, y) = half_spans(conics, scene, middle);
        let cell_km =
            (2.0 * x / width as f64).max(2.0 * y / (CELL_ASPECT * height as f64)) / view.zoom;
        let (across, down) = raster.dots_per_cell();
        let sound = cell_km.is_finite() && 0.0 < cell_km;
        sound.then_some(Self {
            middle,
            dot: (cell_km / across as f64, CELL_ASPECT * cell_km / down as f64),
            dots: (width * across, height * down),
            cell_km,
        })
    }

    /// Middle of a dot, km; dots are counted from the upper left.
    pub(super) fn point(&self, column: usize, row: usize) -> (f64, f64) {
        (
            self.middle.0 + (column as f64 + 0.5 - 0.5 * self.dots.0 as f64) * self.dot.0,
            self.middle.1 - (row as f64 + 0.5 - 0.5 * self.dots.1 as f64) * self.dot.1,
        )
    }

    /// Place of a point in dots, fractional: the middle of the first dot is 0.
    pub(super) fn place(&self, (x, y): (f64, f64)) -> (f64, f64) {
        (
            (x - self.middle.0) / self.dot.0 + 0.5 * self.dots.0 as f64 - 0.5,
            (self.middle.1 - y) / self.dot.1 + 0.5 * self.dots.1 as f64 - 0.5,
        )
    }

    /// The dot a point falls into, `None` outside.
    pub(super) fn dot_at(&self, point: (f64, f64)) -> Option<(usize, usize)> {
        let (column, row) = self.place(point);
        let index = |place: f64, count: usize| {
            let nearest = place.round();
            (0.0 <= nearest && nearest < count as f64).then_some(nearest as usize)
        };
        Some((index(column, self.dots.0)?, index(row, self.dots.1)?))
    }
}

/// Length (km, tidy) and cells of a scale bar of about a quarter of the picture; `None` where there is no room for one.
pub(super) fn scale_bar_km(window: &Window, width: usize) -> Option<(f64, usize)> {
    let room = width.checked_sub(2).filter(|room| 5 <= *room)?;
    // The tidy step may be up to a half more than asked for; a third asked for is less than the room.
    let mut km = tidy_step(window.cell_km * width as f64, 4);
    for _ in 0..3 {
        let cells = (km / window.cell_km).round() as usize;
        if (2..=room).contains(&cells) {
            return Some((km, cells));
        }
        km = tidy_step(0.5 * km, 1);
    }
    None
}
