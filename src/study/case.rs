//! A scenario that has been checked, with everything the engine needs derived from it.
//!
//! The only way to a [`Case`] is [`Case::new`], so whatever holds one needs no further checks.

use super::field::{FIELDS, Field};
use super::spec::{
    AltitudeChoice, ArrivalSpec, BodySpec, Burns, CapSpec, CustomBody, Departure, Model,
    PassesChoice, PlaneSpec, Sense, ShapeSpec, Spec, TransferApoapsis, defaults,
};
use crate::arrival::{self, Choice, Limits, Passes, PlaneDemand, Policy, Setting};
use crate::physics::asymptote;
use crate::physics::body::{Body, Parent};
use crate::physics::catalogue;
use crate::physics::conic::{self, Orbit};
use crate::physics::transfer::{self, Approach, ParentTransfer, TransferInput};
use crate::physics::vehicle::Vehicle;

/// Seconds in a day.
pub const DAY_S: f64 = 86_400.0;

/// A scenario that can be asked.
#[derive(Clone, Debug, PartialEq)]
pub struct Case {
    spec: Spec,
    body: Body,
    setting: Setting,
    declination_rad: Option<f64>,
    journey: Journey,
}

/// What lies before the arrival, where it is known.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Journey {
    /// Burn that leaves the parking orbit, km/s.
    pub departure_dv_km_s: Option<f64>,
    /// Time from departure to the target periapsis, s.
    pub time_of_flight_s: Option<f64>,
}

/// One fault of a scenario.
#[derive(Clone, Debug, PartialEq)]
pub struct Fault {
    /// Field it is about, as in [`FIELDS`].
    pub path: String,
    /// What is wrong, what is allowed, what to do: one or two sentences without a final position.
    pub message: String,
}

impl Case {
    /// Checks a scenario and derives what the engine needs.
    ///
    /// # Errors
    /// Every fault at once: values out of range, names that do not exist, fields that contradict each other.
    pub fn new(spec: Spec) -> Result<Self, Vec<Fault>> {
        let mut faults = Vec::new();
        check_ranges(&spec, &mut faults);
        if spec.burns == Burns::Finite && spec.vehicle.is_none() {
            faults.push(fault(
                "burns",
                "is Finite, and there is no vehicle whose engine could burn; add a `vehicle` with masses, thrust and Isp, or write `burns: Impulsive`",
            ));
        }
        let body = resolve_body(&spec.body, &mut faults);
        // What follows computes with the numbers, so it needs them in range.
        let (Some(body), true) = (body, faults.is_empty()) else {
            return Err(faults);
        };
        let derived = derive(&spec, &body, &mut faults);
        match derived {
            Some((setting, declination_rad, journey)) if faults.is_empty() => Ok(Self {
                spec,
                body,
                setting,
                declination_rad,
                journey,
            }),
            _ => Err(faults),
        }
    }

    /// The scenario as stated.
    pub fn spec(&self) -> &Spec {
        &self.spec
    }

    /// The body.
    pub fn body(&self) -> &Body {
        &self.body
    }

    /// The question as the ways take it.
    pub fn setting(&self) -> &Setting {
        &self.setting
    }

    /// The same case with losses estimated instead of integrated, for a first picture.
    #[must_use]
    pub fn estimated(&self) -> Self {
        Self {
            setting: self.setting.estimated(),
            ..self.clone()
        }
    }

    /// Declination of the incoming asymptote, where it is known, rad.
    pub fn declination_rad(&self) -> Option<f64> {
        self.declination_rad
    }

    /// What lies before the arrival.
    pub fn journey(&self) -> &Journey {
        &self.journey
    }

    /// Altitude of a radius over this body, km.
    pub fn altitude_km(&self, radius_km: f64) -> f64 {
        radius_km - self.body.radius_km
    }
}

fn fault(path: &str, message: impl Into<String>) -> Fault {
    Fault {
        path: path.to_owned(),
        message: message.into(),
    }
}

/// The numbers of a spec with the path each stands at. Optional fields that are absent do not appear.
pub fn numbers(spec: &Spec) -> Vec<(&'static str, f64)> {
    let mut out = Vec::with_capacity(FIELDS.len());
    let mut put = |path: &'static str, value: f64| out.push((path, value));
    if let BodySpec::Custom(body) = &spec.body {
        put("body.gm_km3_s2", body.gm_km3_s2);
        put("body.radius_km", body.radius_km);
        put("body.j2", body.j2);
        put("body.lowest_alt_km", body.lowest_alt_km);
        if let Some(hill) = body.hill_radius_km {
            put("body.hill_radius_km", hill);
        }
        if let Some(parent) = &body.parent {
            put("body.parent.gm_km3_s2", parent.gm_km3_s2);
            put("body.parent.radius_km", parent.radius_km);
            put("body.parent.semi_major_axis_km", parent.semi_major_axis_km);
            put("body.parent.eccentricity", parent.eccentricity);
        }
    }
    match &spec.arrival {
        ArrivalSpec::Asymptote {
            v_inf_km_s,
            declination_deg,
            right_ascension_deg,
        } => {
            put("arrival.v_inf_km_s", *v_inf_km_s);
            declination_deg
                .iter()
                .for_each(|&value| put("arrival.declination_deg", value));
            right_ascension_deg
                .iter()
                .for_each(|&value| put("arrival.right_ascension_deg", value));
        }
        ArrivalSpec::Energy {
            c3_km2_s2,
            declination_deg,
            right_ascension_deg,
        } => {
            put("arrival.c3_km2_s2", *c3_km2_s2);
            declination_deg
                .iter()
                .for_each(|&value| put("arrival.declination_deg", value));
            right_ascension_deg
                .iter()
                .for_each(|&value| put("arrival.right_ascension_deg", value));
        }
        ArrivalSpec::Transfer { parking_alt_km, .. } => {
            parking_alt_km
                .iter()
                .for_each(|&value| put("arrival.parking_alt_km", value));
        }
        ArrivalSpec::FromParentOrbit {
            periapsis_alt_km,
            apoapsis,
            ..
        } => {
            put("arrival.periapsis_alt_km", *periapsis_alt_km);
            if let TransferApoapsis::RadiusKm(radius) = apoapsis {
                put("arrival.apoapsis.RadiusKm", *radius);
            }
        }
    }
    match spec.target.shape {
        ShapeSpec::Circular { altitude_km } => put("target.shape.altitude_km", altitude_km),
        ShapeSpec::Ellipse {
            periapsis_alt_km,
            apoapsis_alt_km,
        } => {
            put("target.shape.periapsis_alt_km", periapsis_alt_km);
            put("target.shape.apoapsis_alt_km", apoapsis_alt_km);
        }
        ShapeSpec::Period {
            periapsis_alt_km,
            hours,
        } => {
            put("target.shape.periapsis_alt_km", periapsis_alt_km);
            put("target.shape.hours", hours);
        }
    }
    match spec.target.plane {
        PlaneSpec::Any => {}
        PlaneSpec::InclinationDeg(value) => put("target.inclination_deg", value),
        PlaneSpec::PlaneChangeDeg(value) => put("target.plane_change_deg", value),
    }
    if let AltitudeChoice::AltitudeKm(value) = spec.braking.brake {
        put("braking.brake.AltitudeKm", value);
    }
    if let AltitudeChoice::AltitudeKm(value) = spec.braking.loop_apoapsis {
        put("braking.loop_apoapsis.AltitudeKm", value);
    }
    if let PassesChoice::Passes(value) = spec.braking.steps {
        put("braking.steps.Passes", f64::from(value));
    }
    if let Some(value) = spec.limits.floor_alt_km {
        put("limits.floor_alt_km", value);
    }
    match spec.limits.cap {
        Some(CapSpec::HillFraction(value)) => put("limits.cap.HillFraction", value),
        Some(CapSpec::AltitudeKm(value)) => put("limits.cap.AltitudeKm", value),
        None => {}
    }
    put("limits.longest_days", spec.limits.longest_days);
    put("limits.most_starts", f64::from(spec.limits.most_starts));
    if let Some(value) = spec.limits.longest_burn_s {
        put("limits.longest_burn_s", value);
    }
    if let Some(vehicle) = &spec.vehicle {
        put("vehicle.dry_mass_kg", vehicle.dry_mass_kg);
        put("vehicle.propellant_kg", vehicle.propellant_kg);
        put("vehicle.thrust_n", vehicle.thrust_n);
        put("vehicle.isp_s", vehicle.isp_s);
    }
    put("policy.margin_percent", spec.policy.margin_percent);
    put("policy.per_start_m_s", spec.policy.per_start_m_s);
    put("policy.residual_percent", spec.policy.residual_percent);
    out
}

fn check_ranges(spec: &Spec, faults: &mut Vec<Fault>) {
    for (path, value) in numbers(spec) {
        if let Some(field) = super::field::field_at(path)
            && !field.allows(value)
        {
            faults.push(fault(path, out_of_range(field, value)));
        }
    }
}

/// "is −3: allowed is above 0 and at most 200 km/s".
pub fn out_of_range(field: &Field, value: f64) -> String {
    format!(
        "is {value}; allowed is {}. It is the {}",
        field.range(),
        field.meaning
    )
}

fn resolve_body(spec: &BodySpec, faults: &mut Vec<Fault>) -> Option<Body> {
    match spec {
        BodySpec::Known(name) => {
            let body = catalogue::body(name);
            if body.is_none() {
                let near = nearest(name, catalogue::names());
                faults.push(fault(
                    "body",
                    format!("\"{name}\" is not in the catalogue; `stoop bodies` lists it, `Custom(...)` takes a body of your own{near}"),
                ));
            }
            body
        }
        BodySpec::Custom(CustomBody {
            name,
            gm_km3_s2,
            radius_km,
            j2,
            lowest_alt_km,
            hill_radius_km,
            parent,
        }) => Some(Body {
            name: name.clone(),
            gm_km3_s2: *gm_km3_s2,
            sphere_gm_km3_s2: *gm_km3_s2,
            radius_km: *radius_km,
            j2: *j2,
            lowest_alt_km: *lowest_alt_km,
            stated_hill_radius_km: *hill_radius_km,
            parent: parent.as_ref().map(|parent| Parent {
                name: parent.name.clone(),
                gm_km3_s2: parent.gm_km3_s2,
                radius_km: parent.radius_km,
                semi_major_axis_km: parent.semi_major_axis_km,
                eccentricity: parent.eccentricity,
            }),
        }),
    }
}

/// `; did you mean "Moon"?` for a name close to a known one; empty otherwise.
pub fn nearest<'a>(name: &str, known: impl Iterator<Item = &'a str>) -> String {
    let lower = name.to_lowercase();
    known
        .map(|candidate| {
            (
                strsim::jaro_winkler(&lower, &candidate.to_lowercase()),
                candidate,
            )
        })
        .filter(|(likeness, _)| 0.75 <= *likeness)
        .max_by(|a, b| a.0.total_cmp(&b.0))
        .map_or_else(String::new, |(_, candidate)| {
            format!("; did you mean \"{candidate}\"?")
        })
}

fn derive(
    spec: &Spec,
    body: &Body,
    faults: &mut Vec<Fault>,
) -> Option<(Setting, Option<f64>, Journey)> {
    let target = target_orbit(&spec.target.shape, body, faults)?;
    let limits = limits(spec, body, faults)?;
    let (approach, declination_rad, mut journey) = approach(spec, body, faults)?;
    if let Approach::FromParent(parent) = &approach {
        journey.time_of_flight_s = parent.time_of_flight_s(target.periapsis_km);
    }
    let plane = match (spec.target.plane, declination_rad) {
        (PlaneSpec::PlaneChangeDeg(turn), _) if 0.0 < turn => PlaneDemand::Turn(turn.to_radians()),
        (PlaneSpec::InclinationDeg(inclination), Some(declination)) => {
            let missing = asymptote::missing_inclination_rad(inclination.to_radians(), declination);
            // The free range's ends come from degrees; an excess of rounding size is inside.
            if 1e-12 < missing {
                PlaneDemand::Missing(missing)
            } else {
                PlaneDemand::Free
            }
        }
        _ => PlaneDemand::Free,
    };
    let radius = |choice: AltitudeChoice| match choice {
        AltitudeChoice::AltitudeKm(altitude) => Choice::Radius(body.radius_km + altitude),
        AltitudeChoice::Best => Choice::Best,
    };
    let setting = Setting {
        gm: body.gm_km3_s2,
        body_radius_km: body.radius_km,
        approach,
        target,
        plane,
        brake: radius(spec.braking.brake),
        loop_apoapsis: radius(spec.braking.loop_apoapsis),
        limits,
        vehicle: spec.vehicle.map(|vehicle| Vehicle {
            dry_mass_kg: vehicle.dry_mass_kg,
            propellant_kg: vehicle.propellant_kg,
            thrust_n: vehicle.thrust_n,
            isp_s: vehicle.isp_s,
        }),
        burns: match (spec.burns, &spec.vehicle) {
            (Burns::Finite, Some(vehicle)) => arrival::Burns::Integrated(vehicle.steering),
            _ => arrival::Burns::Impulsive,
        },
        passes: match spec.braking.steps {
            // The field's range (2 to 7) has been checked.
            PassesChoice::Passes(passes) => Passes::Number(passes as usize),
            PassesChoice::Best => Passes::Best,
        },
        policy: Policy {
            margin: 0.01 * spec.policy.margin_percent,
            per_start_km_s: 1e-3 * spec.policy.per_start_m_s,
            residual: 0.01 * spec.policy.residual_percent,
        },
        remembered: None,
    }
    .remembering_brake();
    Some((setting, declination_rad, journey))
}

fn target_orbit(shape: &ShapeSpec, body: &Body, faults: &mut Vec<Fault>) -> Option<Orbit> {
    let orbit = match *shape {
        ShapeSpec::Circular { altitude_km } => {
            let radius = body.radius_km + altitude_km;
            Orbit {
                periapsis_km: radius,
                apoapsis_km: radius,
            }
        }
        ShapeSpec::Ellipse {
            periapsis_alt_km,
            apoapsis_alt_km,
        } => {
            if apoapsis_alt_km < periapsis_alt_km {
                faults.push(fault(
                    "target.shape.apoapsis_alt_km",
                    format!("is {apoapsis_alt_km} km, under the periapsis at {periapsis_alt_km} km; allowed is {periapsis_alt_km} km or more. Swap the two, or use Circular"),
                ));
                return None;
            }
            Orbit {
                periapsis_km: body.radius_km + periapsis_alt_km,
                apoapsis_km: body.radius_km + apoapsis_alt_km,
            }
        }
        ShapeSpec::Period {
            periapsis_alt_km,
            hours,
        } => {
            let periapsis_km = body.radius_km + periapsis_alt_km;
            let apoapsis_km =
                2.0 * conic::semi_major_axis_km(body.gm_km3_s2, hours * 3600.0) - periapsis_km;
            if apoapsis_km < periapsis_km {
                let least = conic::period_s(body.gm_km3_s2, periapsis_km, periapsis_km) / 3600.0;
                faults.push(fault(
                    "target.shape.hours",
                    format!("is {hours} h, shorter than a circle at {periapsis_alt_km} km takes ({least:.4} h); allowed is that or more. Lower the periapsis or lengthen the period"),
                ));
                return None;
            }
            Orbit {
                periapsis_km,
                apoapsis_km,
            }
        }
    };
    Some(orbit)
}

fn limits(spec: &Spec, body: &Body, faults: &mut Vec<Fault>) -> Option<Limits> {
    let hill = body.hill_radius_km();
    let cap_radius_km = match (spec.limits.cap, hill) {
        (Some(CapSpec::AltitudeKm(altitude)), _) => body.radius_km + altitude,
        (Some(CapSpec::HillFraction(fraction)), Some(hill)) => fraction * hill,
        (Some(CapSpec::HillFraction(_)), None) => {
            faults.push(fault(
                "limits.cap.HillFraction",
                "needs a Hill radius, and this body has neither `hill_radius_km` nor a `parent`; give one of them, or `cap: AltitudeKm(...)`",
            ));
            return None;
        }
        (None, Some(hill)) => defaults::CAP_HILL_FRACTION * hill,
        (None, None) => defaults::CAP_BODY_RADII * body.radius_km,
    };
    let floor_alt_km = spec.limits.floor_alt_km.unwrap_or(body.lowest_alt_km);
    let floor_radius_km = body.radius_km + floor_alt_km;
    if cap_radius_km <= floor_radius_km {
        faults.push(fault(
            "limits.cap",
            format!(
                "lies at radius {cap_radius_km:.6} km, not above the floor at {floor_radius_km:.6} km, so no orbit is left; raise the cap or lower the floor"
            ),
        ));
        return None;
    }
    Some(Limits {
        floor_radius_km,
        cap_radius_km,
        longest_s: spec.limits.longest_days * DAY_S,
        most_starts: spec.limits.most_starts as usize,
        longest_burn_s: spec.limits.longest_burn_s.unwrap_or(f64::INFINITY),
    })
}

fn approach(
    spec: &Spec,
    body: &Body,
    faults: &mut Vec<Fault>,
) -> Option<(Approach, Option<f64>, Journey)> {
    let mut journey = Journey {
        departure_dv_km_s: None,
        time_of_flight_s: None,
    };
    let radians = |degrees: &Option<f64>| degrees.map(f64::to_radians);
    match &spec.arrival {
        ArrivalSpec::Asymptote {
            v_inf_km_s,
            declination_deg,
            ..
        } => Some((
            Approach::Given(v_inf_km_s * v_inf_km_s),
            radians(declination_deg),
            journey,
        )),
        ArrivalSpec::Energy {
            c3_km2_s2,
            declination_deg,
            ..
        } => Some((
            Approach::Given(*c3_km2_s2),
            radians(declination_deg),
            journey,
        )),
        ArrivalSpec::Transfer {
            from,
            parking_alt_km,
        } => {
            let (origin, parent) = transfer_ends(from, body, faults)?;
            let origin_orbit = origin.parent.as_ref()?;
            let hohmann = transfer::hohmann(
                parent.gm_km3_s2,
                origin_orbit.semi_major_axis_km,
                parent.semi_major_axis_km,
            );
            journey.time_of_flight_s = Some(hohmann.time_of_flight_s);
            journey.departure_dv_km_s = parking_alt_km.map(|altitude| {
                transfer::escape_burn_km_s(
                    origin.gm_km3_s2,
                    origin.radius_km + altitude,
                    hohmann.departure_v_inf_km_s,
                )
            });
            Some((
                Approach::Given(hohmann.arrival_v_inf_km_s * hohmann.arrival_v_inf_km_s),
                None,
                journey,
            ))
        }
        ArrivalSpec::FromParentOrbit {
            periapsis_alt_km,
            apoapsis,
            model,
            sense,
            departure,
        } => {
            let Some(parent) = &body.parent else {
                faults.push(fault(
                    "arrival",
                    format!("FromParentOrbit needs a body with a parent, and {} has none; give `parent`, or use Asymptote", body.name),
                ));
                return None;
            };
            let cos_inclination = passage(spec, *sense, faults)?;
            let departure_radius_km = parent.radius_km + periapsis_alt_km;
            let distance_km = parent.semi_major_axis_km;
            let apoapsis_km = match apoapsis {
                TransferApoapsis::AtBody => distance_km,
                TransferApoapsis::RadiusKm(radius) => *radius,
            };
            check_transfer(
                parent,
                body,
                departure_radius_km,
                apoapsis_km,
                *model,
                faults,
            )?;
            let parent_transfer = ParentTransfer::new(TransferInput {
                parent_gm: parent.gm_km3_s2,
                body_gm: body.gm_km3_s2,
                distance_km,
                departure_radius_km,
                apoapsis_km,
                model: *model,
                cos_inclination,
            });
            journey.departure_dv_km_s = (*departure == Departure::ParkingOrbit)
                .then(|| parent_transfer.departure_dv_km_s());
            // The transfer lies in the body's orbital plane, taken as its equator: every inclination is free.
            Some((Approach::FromParent(parent_transfer), Some(0.0), journey))
        }
    }
}

/// The body of departure and the common parent of a Hohmann transfer.
fn transfer_ends<'a>(
    from: &str,
    body: &'a Body,
    faults: &mut Vec<Fault>,
) -> Option<(Body, &'a Parent)> {
    let Some(origin) = catalogue::body(from) else {
        let near = nearest(from, catalogue::names());
        faults.push(fault(
            "arrival.from",
            format!("\"{from}\" is not in the catalogue; `stoop bodies` lists it{near}"),
        ));
        return None;
    };
    let (Some(parent), Some(origin_parent)) = (&body.parent, &origin.parent) else {
        faults.push(fault(
            "arrival",
            format!("Transfer needs two bodies with a common parent; {} or {} has no parent. Use Asymptote", body.name, origin.name),
        ));
        return None;
    };
    if parent.name != origin_parent.name || origin.name == body.name {
        faults.push(fault(
            "arrival.from",
            format!(
                "{} orbits {} and {} orbits {}; a Transfer needs two different bodies of one parent. Use FromParentOrbit or Asymptote",
                origin.name, origin_parent.name, body.name, parent.name
            ),
        ));
        return None;
    }
    Some((origin, parent))
}

/// cos i of the passage: from the target's inclination, else from the sense (prograde where left out).
fn passage(spec: &Spec, sense: Option<Sense>, faults: &mut Vec<Fault>) -> Option<f64> {
    if let PlaneSpec::InclinationDeg(inclination) = spec.target.plane {
        let implied = if inclination < 90.0 {
            Sense::Prograde
        } else {
            Sense::Retrograde
        };
        if let Some(stated) = sense
            && stated != implied
            && inclination != 90.0
        {
            faults.push(fault(
                "arrival.sense",
                format!("says {stated:?}, but an inclination of {inclination} deg is {implied:?}; leave `sense` out, or change one of the two"),
            ));
            return None;
        }
        // cos 90° would come out as 6e-17; the polar passage is exact.
        return Some(if inclination == 90.0 {
            0.0
        } else {
            inclination.to_radians().cos()
        });
    }
    Some(match sense {
        Some(Sense::Retrograde) => -1.0,
        Some(Sense::Prograde) | None => 1.0,
    })
}

fn check_transfer(
    parent: &Parent,
    body: &Body,
    departure_radius_km: f64,
    apoapsis_km: f64,
    model: Model,
    faults: &mut Vec<Fault>,
) -> Option<()> {
    let distance = parent.semi_major_axis_km;
    if distance <= departure_radius_km {
        faults.push(fault(
            "arrival.periapsis_alt_km",
            format!(
                "puts the transfer's periapsis at radius {departure_radius_km:.0} km, not inside the orbit of {} at {distance:.0} km; allowed is below {:.0} km altitude",
                body.name,
                distance - parent.radius_km
            ),
        ));
        return None;
    }
    if apoapsis_km <= departure_radius_km {
        faults.push(fault(
            "arrival.apoapsis.RadiusKm",
            format!("is {apoapsis_km} km, not above the transfer's periapsis radius {departure_radius_km:.3} km; it is a radius from the centre of {}", parent.name),
        ));
        return None;
    }
    let sphere = body.sphere_of_influence_km().unwrap_or(0.0);
    let least = match model {
        Model::Textbook | Model::BoundarySpeed => distance,
        Model::Patched | Model::ThreeBody => distance - sphere,
    };
    if apoapsis_km < least {
        faults.push(fault(
            "arrival.apoapsis.RadiusKm",
            format!("is {apoapsis_km} km and does not come as far as {} (allowed is {least:.0} km or more with model {model:?}); raise it, or write AtBody", body.name),
        ));
        return None;
    }
    Some(())
}
