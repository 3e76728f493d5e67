//! One way's plan as a picture to scale: body, floor, cap, arriving hyperbola, ellipses, target orbit and burns. Pure; the screen adds
//! colour by role, and [`describe`] says the same in sentences.
//!
//! All conics have the body in a focus and a common line of apsides, which lies flat in the picture: the first periapsis is on the right,
//! the motion is counter-clockwise, the spacecraft arrives from the lower left. A turn of the plane is drawn unfolded. Of the ellipses between
//! the burns only the part that is flown is drawn, of the hyperbola the part before its periapsis.

mod canvas;
mod conic;
mod description;
mod view;

use crate::arrival::{Plan, Way};
use crate::physics::conic as physics;
use crate::report::picture::Picture;
use crate::report::plot::{self, Glyphs};
use crate::study::Case;
use canvas::Raster;
use conic::{Conic, Part};
pub use description::{describe, legend};
pub use view::{Centre, View};
use view::{Window, scale_bar_km};

/// What a cell of a picture means. Colour follows it and only repeats what the glyph says.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum Role {
    /// Nothing.
    #[default]
    Blank,
    /// The body.
    Body,
    /// The circle under which no periapsis may lie.
    Floor,
    /// The circle over which no apoapsis may lie.
    Cap,
    /// The arriving hyperbola.
    Arriving,
    /// The ellipse between burn k and burn k + 1, counted from one.
    Between(usize),
    /// The target orbit.
    Target,
    /// A thrust arc.
    Thrust,
    /// Burn k, counted from one.
    Burn(usize),
    /// An arrow along the motion.
    Motion,
    /// Scale bar and its number.
    Scale,
}

impl Role {
    /// The role that has the same weight in the cost curve's picture, so that one palette serves both.
    pub fn as_plot(self, way: Way) -> plot::Role {
        match self {
            Role::Blank => plot::Role::Blank,
            Role::Body | Role::Floor | Role::Cap => plot::Role::Axis,
            Role::Arriving | Role::Scale => plot::Role::Label,
            Role::Between(_) | Role::Target => plot::Role::Way(way),
            Role::Thrust | Role::Burn(_) | Role::Motion => plot::Role::Here,
        }
    }

    /// The 7-bit glyph of a line or surface.
    fn glyph(self) -> char {
        match self {
            Role::Blank => ' ',
            Role::Body => '#',
            Role::Floor => '.',
            Role::Cap => ',',
            Role::Arriving => '~',
            Role::Between(k) => char::from(b'a' + (k.clamp(1, 26) as u8 - 1)),
            Role::Target => '+',
            Role::Thrust => '%',
            Role::Burn(k) => char::from_digit(k.min(35) as u32, 36).unwrap_or('?'),
            Role::Motion => '>',
            Role::Scale => '-',
        }
    }
}

/// The arriving hyperbola.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Hyperbola {
    /// Periapsis radius, km.
    pub periapsis_km: f64,
    /// v∞, km/s.
    pub v_inf_km_s: f64,
}

/// What is drawn: the plan with the circles around it. Lengths in km.
#[derive(Clone, Debug)]
pub struct Scene<'a> {
    /// GM of the body, km³/s².
    pub gm: f64,
    /// Radius of the body.
    pub body_radius_km: f64,
    /// Radius of the floor.
    pub floor_radius_km: f64,
    /// Radius of the cap.
    pub cap_radius_km: f64,
    /// Name of the body, as the file has it.
    pub body_name: &'a str,
    /// The plan.
    pub plan: &'a Plan,
    /// The hyperbola as it is aimed; the plan's own unless a long burn is aimed elsewhere.
    pub arriving: Hyperbola,
    /// Thrust arcs to be drawn on top: polylines of (x, y) from the body's centre, x towards the first periapsis, y along the motion there.
    pub arcs: &'a [Vec<(f64, f64)>],
}

impl<'a> Scene<'a> {
    /// The scene of a plan, burns taken as points.
    pub fn new(case: &'a Case, plan: &'a Plan) -> Self {
        let limits = &case.setting().limits;
        Self {
            gm: case.body().gm_km3_s2,
            body_radius_km: case.body().radius_km,
            floor_radius_km: limits.floor_radius_km,
            cap_radius_km: limits.cap_radius_km,
            body_name: &case.body().name,
            plan,
            arriving: Hyperbola {
                periapsis_km: plan.brake_radius_km,
                v_inf_km_s: plan.v_inf_km_s,
            },
            arcs: &[],
        }
    }

    /// The same scene with thrust arcs.
    #[must_use]
    pub fn with_arcs(mut self, arcs: &'a [Vec<(f64, f64)>]) -> Self {
        self.arcs = arcs;
        self
    }

    /// The conics in the order they are flown, each with the part that is.
    fn conics(&self) -> Vec<(Conic, Part, Role)> {
        let mut out = Vec::with_capacity(self.plan.burns.len() + 1);
        let hyperbola = Conic::with_periapsis(
            self.arriving.periapsis_km,
            physics::hyperbola_eccentricity(
                self.gm,
                self.arriving.v_inf_km_s * self.arriving.v_inf_km_s,
                self.arriving.periapsis_km,
            ),
            1.0,
        );
        out.push((hyperbola, Part::Incoming, Role::Arriving));
        let places = self.burn_places();
        for (k, burn) in self.plan.burns.iter().enumerate() {
            let side = places.get(k).map_or(1.0, |place| place.signum());
            let orbit = &burn.orbit_after;
            // Which apsis of the orbit it leaves the burn is at: the nearer one.
            let at_periapsis = (burn.at_radius_km - orbit.periapsis_km).abs()
                <= (orbit.apoapsis_km - burn.at_radius_km).abs();
            let towards = if at_periapsis { side } else { -side };
            let conic = Conic::with_periapsis(orbit.periapsis_km, orbit.eccentricity(), towards);
            let (part, role) = match places.get(k + 1) {
                None => (Part::Whole, Role::Target),
                // The next burn on the same side: a whole turn is flown.
                Some(next) if next.signum() == side => (Part::Whole, Role::Between(k + 1)),
                // Counter-clockwise from the right to the left is over the top.
                Some(_) if 0.0 < side => (Part::Upper, Role::Between(k + 1)),
                Some(_) => (Part::Lower, Role::Between(k + 1)),
            };
            out.push((conic, part, role));
        }
        out
    }

    /// Where each burn lies on the line of apsides, km: positive towards the first periapsis.
    fn burn_places(&self) -> Vec<f64> {
        let mut places: Vec<f64> = Vec::with_capacity(self.plan.burns.len());
        let mut before: Option<(f64, &crate::physics::conic::Orbit)> = None;
        for burn in &self.plan.burns {
            let side = match before {
                None => 1.0,
                Some((last, orbit)) => {
                    let near = |radius: f64, apsis: f64| (radius - apsis).abs();
                    let at_periapsis = |radius: f64| {
                        near(radius, orbit.periapsis_km) <= near(radius, orbit.apoapsis_km)
                    };
                    // On the same apsis of the orbit as the burn before: the same side.
                    if at_periapsis(burn.at_radius_km) == at_periapsis(f64::abs(last)) {
                        last.signum()
                    } else {
                        -last.signum()
                    }
                }
            };
            places.push(side * burn.at_radius_km);
            before = Some((side * burn.at_radius_km, &burn.orbit_after));
        }
        places
    }
}

/// Draws a scene into `width` × `height` cells. Any size will do; a view whose zoom is not a positive number gives an empty picture.
pub fn draw(
    scene: &Scene,
    view: &View,
    glyphs: Glyphs,
    width: usize,
    height: usize,
) -> Picture<Role> {
    let mut raster = Raster::new(width, height, glyphs);
    let conics = scene.conics();
    let Some(window) = Window::new(scene, &conics, view, &raster) else {
        return raster.finish();
    };
    raster.disc(&window, scene.body_radius_km, Role::Body);
    for (radius, role) in [
        (scene.cap_radius_km, Role::Cap),
        (scene.floor_radius_km, Role::Floor),
    ] {
        raster.conic(&window, &Conic::circle(radius), Part::Whole, role);
    }
    for (conic, part, role) in &conics {
        raster.conic(&window, conic, *part, *role);
    }
    for arc in scene.arcs {
        raster.polyline(&window, arc, Role::Thrust);
    }
    for (conic, part, role) in &conics {
        raster.arrow(&window, conic, *part, *role);
    }
    for (k, place) in scene.burn_places().into_iter().enumerate() {
        raster.mark(&window, (place, 0.0), Role::Burn(k + 1));
    }
    if let Some((km, cells)) = scale_bar_km(&window, width) {
        raster.scale_bar(km, cells);
    }
    raster.finish()
}

#[cfg(test)]
mod tests;
