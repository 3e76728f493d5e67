//! A body one can arrive at: its constants, its place round its parent, how far its pull reaches.

/// A body as the engine needs it: from the catalogue or written out in a scenario.
#[derive(Clone, Debug, PartialEq)]
pub struct Body {
    /// Name as shown.
    pub name: String,
    /// GM of the body alone, km³/s².
    pub gm_km3_s2: f64,
    /// GM that its sphere of influence and Hill radius are reckoned with: planet and moons together, km³/s².
    pub sphere_gm_km3_s2: f64,
    /// Radius that altitudes are counted from (equatorial), km.
    pub radius_km: f64,
    /// Second zonal coefficient J2, unnormalised; zero where unknown.
    pub j2: f64,
    /// Lowest sensible altitude: top of the atmosphere or terrain, km.
    pub lowest_alt_km: f64,
    /// Hill radius stated by a scenario, km; otherwise it follows from the parent.
    pub stated_hill_radius_km: Option<f64>,
    /// The parent and the body's mean orbit round it.
    pub parent: Option<Parent>,
}

/// The body that a body orbits, and its mean orbit.
#[derive(Clone, Debug, PartialEq)]
pub struct Parent {
    /// Name of the parent.
    pub name: String,
    /// GM of the parent alone, km³/s².
    pub gm_km3_s2: f64,
    /// Radius of the parent, km.
    pub radius_km: f64,
    /// Semi-major axis of the orbit round it, km.
    pub semi_major_axis_km: f64,
    /// Eccentricity of that orbit.
    pub eccentricity: f64,
}

impl Body {
    /// Radius of the sphere of influence a (m/M)^0.4 (Laplace), km.
    pub fn sphere_of_influence_km(&self) -> Option<f64> {
        self.parent.as_ref().map(|parent| {
            parent.semi_major_axis_km * (self.sphere_gm_km3_s2 / parent.gm_km3_s2).powf(0.4)
        })
    }

    /// Hill radius: as stated, or at the pericentre of the orbit a (1 − e) (m/3M)^(1/3), km.
    ///
    /// Source: Hamilton & Burns, Icarus 96 (1992) 43, for the pericentre form.
    pub fn hill_radius_km(&self) -> Option<f64> {
        self.stated_hill_radius_km.or_else(|| {
            self.parent.as_ref().map(|parent| {
                parent.semi_major_axis_km
                    * (1.0 - parent.eccentricity)
                    * (self.sphere_gm_km3_s2 / (3.0 * parent.gm_km3_s2)).cbrt()
            })
        })
    }
}

/// Share of the Hill radius inside which prograde orbits last: 0.4895 for circular orbits of satellite and host.
///
/// Source: Domingos, Winter & Yokoyama, MNRAS 373 (2006) 1227.
pub const STABLE_PROGRADE_HILL_SHARE: f64 = 0.4895;

/// The same for retrograde orbits: 0.9309.
pub const STABLE_RETROGRADE_HILL_SHARE: f64 = 0.9309;
