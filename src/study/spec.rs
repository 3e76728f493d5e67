//! A scenario as its author states it: the file's fields and units, nothing derived, nothing checked.
//!
//! Plain public data. [`Case`](super::Case) checks it and derives what the engine needs; the scenario layer
//! reads and writes it.

pub use crate::physics::transfer::Model;

/// One scenario.
#[derive(Clone, Debug, PartialEq)]
pub struct Spec {
    /// Title, free text.
    pub title: String,
    /// Note, free text.
    pub note: String,
    /// Where to arrive.
    pub body: BodySpec,
    /// How fast and from where.
    pub arrival: ArrivalSpec,
    /// The orbit wanted.
    pub target: TargetSpec,
    /// How low to brake, how far to loop.
    pub braking: BrakingSpec,
    /// What is allowed.
    pub limits: LimitsSpec,
    /// The spacecraft.
    pub vehicle: Option<VehicleSpec>,
    /// Whether burns take time.
    pub burns: Burns,
    /// Margins and fixed costs.
    pub policy: PolicySpec,
}

/// A body of the catalogue, or one's own.
#[derive(Clone, Debug, PartialEq)]
pub enum BodySpec {
    /// By its name in the catalogue.
    Known(String),
    /// Written out.
    Custom(CustomBody),
}

/// A body written out in the scenario.
#[derive(Clone, Debug, PartialEq)]
pub struct CustomBody {
    /// Name as shown.
    pub name: String,
    /// GM, km³/s².
    pub gm_km3_s2: f64,
    /// Radius that altitudes are counted from, km.
    pub radius_km: f64,
    /// J2; zero where left out.
    pub j2: f64,
    /// Lowest sensible altitude, km; zero where left out.
    pub lowest_alt_km: f64,
    /// Hill radius, km, where it does not follow from the parent.
    pub hill_radius_km: Option<f64>,
    /// The parent.
    pub parent: Option<CustomParent>,
}

/// The parent of a body written out in the scenario.
#[derive(Clone, Debug, PartialEq)]
pub struct CustomParent {
    /// Name as shown.
    pub name: String,
    /// GM, km³/s².
    pub gm_km3_s2: f64,
    /// Radius, km.
    pub radius_km: f64,
    /// Semi-major axis of the body's orbit, km.
    pub semi_major_axis_km: f64,
    /// Eccentricity of the body's orbit.
    pub eccentricity: f64,
}

/// Where v∞ comes from.
#[derive(Clone, Debug, PartialEq)]
pub enum ArrivalSpec {
    /// v∞ given.
    Asymptote {
        /// v∞, km/s.
        v_inf_km_s: f64,
        /// Declination of the incoming asymptote to the body's equator, deg.
        declination_deg: Option<f64>,
        /// Its right ascension, deg (carried into the brief, used by no cost).
        right_ascension_deg: Option<f64>,
    },
    /// C3 = v∞² given.
    Energy {
        /// C3, km²/s².
        c3_km2_s2: f64,
        /// Declination, deg.
        declination_deg: Option<f64>,
        /// Right ascension, deg.
        right_ascension_deg: Option<f64>,
    },
    /// Coplanar Hohmann transfer between the mean orbits of two bodies of one parent.
    Transfer {
        /// Body of departure, by its name in the catalogue.
        from: String,
        /// Altitude of the circular parking orbit there, km.
        parking_alt_km: Option<f64>,
    },
    /// From an orbit round the body's parent.
    FromParentOrbit {
        /// Periapsis altitude of the transfer over the parent, km.
        periapsis_alt_km: f64,
        /// Its apoapsis.
        apoapsis: TransferApoapsis,
        /// Which model gives v∞.
        model: Model,
        /// Side on which the body is passed; implied by an inclination.
        sense: Option<Sense>,
        /// Where the spacecraft is before: decides whether a departure burn is counted.
        departure: Departure,
    },
}

/// Apoapsis of the transfer round the parent.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum TransferApoapsis {
    /// At the body's distance.
    AtBody,
    /// At this radius from the parent's centre, km.
    RadiusKm(f64),
}

/// Side on which the body is passed.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Sense {
    /// Same sense as the body's own motion round its parent.
    Prograde,
    /// Against it.
    Retrograde,
}

/// Where the spacecraft is before the transfer round the parent.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Departure {
    /// In a circular parking orbit at the transfer's periapsis altitude: the departure burn is shown.
    ParkingOrbit,
    /// Already in the transfer ellipse: there is no departure burn.
    OnTransfer,
}

/// The orbit wanted.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct TargetSpec {
    /// Size and shape.
    pub shape: ShapeSpec,
    /// Plane.
    pub plane: PlaneSpec,
}

/// Size and shape of the target orbit.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum ShapeSpec {
    /// A circle.
    Circular {
        /// Altitude, km.
        altitude_km: f64,
    },
    /// An ellipse by its apsides.
    Ellipse {
        /// Periapsis altitude, km.
        periapsis_alt_km: f64,
        /// Apoapsis altitude, km.
        apoapsis_alt_km: f64,
    },
    /// An ellipse by periapsis and period.
    Period {
        /// Periapsis altitude, km.
        periapsis_alt_km: f64,
        /// Period, h.
        hours: f64,
    },
}

/// What is asked of the target's plane.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum PlaneSpec {
    /// Any plane will do.
    Any,
    /// This inclination to the body's equator, deg.
    InclinationDeg(f64),
    /// This turn about the line of apsides for every way, deg.
    PlaneChangeDeg(f64),
}

/// How low to brake, how far to loop.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct BrakingSpec {
    /// Periapsis altitude at which dip and loop brake.
    pub brake: AltitudeChoice,
    /// Apoapsis altitude of the loop.
    pub loop_apoapsis: AltitudeChoice,
    /// How many passes way steps divides its braking over.
    pub steps: PassesChoice,
}

/// A number of passes, or left to the program.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum PassesChoice {
    /// This many.
    Passes(u32),
    /// The program chooses inside the limits on starts and time.
    Best,
}

/// An altitude, or left to the program.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum AltitudeChoice {
    /// This altitude, km.
    AltitudeKm(f64),
    /// The program chooses inside the limits.
    Best,
}

/// What is allowed. `None` takes the documented default.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct LimitsSpec {
    /// Lowest periapsis altitude, km; default the body's lowest sensible altitude.
    pub floor_alt_km: Option<f64>,
    /// Highest apoapsis; default 0.45 of the Hill radius, or 100 body radii where none is known.
    pub cap: Option<CapSpec>,
    /// Longest time from arrival to the target orbit, days.
    pub longest_days: f64,
    /// Most burns.
    pub most_starts: u32,
    /// Longest single burn, s.
    pub longest_burn_s: Option<f64>,
}

/// Highest apoapsis allowed.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum CapSpec {
    /// Radius as a fraction of the Hill radius.
    HillFraction(f64),
    /// Altitude, km.
    AltitudeKm(f64),
}

/// The spacecraft.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct VehicleSpec {
    /// Dry mass, kg.
    pub dry_mass_kg: f64,
    /// Propellant aboard, kg.
    pub propellant_kg: f64,
    /// Thrust, N.
    pub thrust_n: f64,
    /// Specific impulse, s.
    pub isp_s: f64,
    /// How the engine is pointed during a burn.
    pub steering: Steering,
}

pub use crate::physics::held_burn::Steering;

/// Whether burns take time.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Burns {
    /// Burns take no time.
    Impulsive,
    /// Burns are integrated with the vehicle's engine.
    Finite,
}

/// Margins and fixed costs.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct PolicySpec {
    /// Margin on Δv, percent.
    pub margin_percent: f64,
    /// Cost of every start after the first, m/s.
    pub per_start_m_s: f64,
    /// Residual propellant, percent of the propellant needed.
    pub residual_percent: f64,
}

/// Defaults of what a scenario may leave out, each with its reason.
pub mod defaults {
    use super::{
        AltitudeChoice, BrakingSpec, Burns, LimitsSpec, PassesChoice, PolicySpec, Steering,
    };

    /// The program chooses how low to brake and how far to loop.
    pub const BRAKING: BrakingSpec = BrakingSpec {
        brake: AltitudeChoice::Best,
        loop_apoapsis: AltitudeChoice::Best,
        steps: PassesChoice::Best,
    };

    /// 60 days and four starts: what an operations team plans for an arrival without special arrangements (common practice, no source).
    pub const LIMITS: LimitsSpec = LimitsSpec {
        floor_alt_km: None,
        cap: None,
        longest_days: 60.0,
        most_starts: 4,
        longest_burn_s: None,
    };

    /// Share of the Hill radius allowed for apoapses: inside the 0.49 that lasts for prograde orbits
    /// (Domingos, Winter & Yokoyama 2006), with a little room.
    pub const CAP_HILL_FRACTION: f64 = 0.45;

    /// Cap in body radii where no Hill radius is known (our own choice: far enough to show the loop's gain).
    pub const CAP_BODY_RADII: f64 = 100.0;

    /// 5 % on calculated manoeuvres and 2 % residuals: ESA margin philosophy SRE-PA/2011.097, R-DV-11 and R-M1-6.
    pub const POLICY: PolicySpec = PolicySpec {
        margin_percent: 5.0,
        per_start_m_s: 0.0,
        residual_percent: 2.0,
    };

    /// Burns take no time unless the file says otherwise.
    pub const BURNS: Burns = Burns::Impulsive;

    /// The steering that needs no attitude profile.
    pub const STEERING: Steering = Steering::AgainstVelocity;
}

impl ShapeSpec {
    /// Periapsis altitude as stated, km.
    pub fn periapsis_alt_km(&self) -> f64 {
        match *self {
            ShapeSpec::Circular { altitude_km } => altitude_km,
            ShapeSpec::Ellipse {
                periapsis_alt_km, ..
            }
            | ShapeSpec::Period {
                periapsis_alt_km, ..
            } => periapsis_alt_km,
        }
    }
}
