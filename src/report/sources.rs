//! What stands behind the numbers: models, their sources, constants, and the cautions that go with every result.

use crate::physics::catalogue;
use crate::study::Case;
use crate::study::spec::{ArrivalSpec, BodySpec, Model, PlaneSpec};
use crate::visible::ascii;

/// The cautions that stand in every brief, in `--help` and in the README.
pub const CAUTIONS: &[&str] = &[
    "For concept and preliminary design only. Commanded manoeuvres need verified flight-dynamics software and review by qualified people.",
    "The rules of the launching state and agency on planetary protection and orbital debris apply to every arrival and every orbit named here.",
];

/// What the model leaves out.
pub const NOT_MODELLED: &str = "Not modelled: burns that take time, third bodies after arrival, oblateness, atmosphere, terrain, navigation and execution errors, dates.";

/// Name of the arrival model, for JSON and the brief.
pub fn arrival_model(arrival: &ArrivalSpec) -> &'static str {
    match arrival {
        ArrivalSpec::Asymptote { .. } => "asymptote",
        ArrivalSpec::Energy { .. } => "energy",
        ArrivalSpec::Transfer { .. } => "transfer: coplanar Hohmann",
        ArrivalSpec::FromParentOrbit { model, .. } => match model {
            Model::Textbook => "from parent orbit: textbook",
            Model::BoundarySpeed => "from parent orbit: boundary speed",
            Model::Patched => "from parent orbit: patched conic",
            Model::ThreeBody => "from parent orbit: three-body energy",
        },
    }
}

/// Assumptions and sources, one sentence each.
pub fn sources(case: &Case) -> Vec<String> {
    let mut out = vec![
        "Two-body mechanics round one body, impulsive burns at apsides (any astrodynamics textbook).".to_owned(),
        arrival_source(&case.spec().arrival).to_owned(),
    ];
    if !matches!(case.spec().target.plane, PlaneSpec::Any) {
        out.push("Plane change about the line of apsides, split over the burns at its cheapest; turn for a missing inclination: sin theta = sin m / sin nu (derived, docs/model.md).".to_owned());
    }
    if case.setting().vehicle.is_some() {
        out.push("Rocket equation with g0 = 9.80665 m/s2 (3rd CGPM, 1901); margin and residual practice after ESA SRE-PA/2011.097.".to_owned());
    }
    out.push(NOT_MODELLED.to_owned());
    out.extend(constants(case));
    out
}

fn arrival_source(arrival: &ArrivalSpec) -> &'static str {
    match arrival {
        ArrivalSpec::Asymptote { .. } | ArrivalSpec::Energy { .. } => {
            "Arrival speed as stated in the scenario."
        }
        ArrivalSpec::Transfer { .. } => {
            "Arrival speed from a coplanar Hohmann transfer between the mean orbits of the two bodies."
        }
        ArrivalSpec::FromParentOrbit { model, .. } => match model {
            Model::Textbook => {
                "Arrival speed as the velocity difference to a massless body at the crossing (textbook)."
            }
            Model::BoundarySpeed => {
                "Arrival speed as the velocity difference at the crossing, read as the speed at the sphere of influence."
            }
            Model::Patched => {
                "Arrival speed from conics patched at the sphere of influence a (m/M)^0.4, outbound leg."
            }
            Model::ThreeBody => {
                "Arrival speed from the Jacobi integral of the circular restricted three-body problem (Szebehely, Theory of Orbits, 1967); reach and time of flight from the patched conic."
            }
        },
    }
}

fn constants(case: &Case) -> Vec<String> {
    let mut out = Vec::new();
    match &case.spec().body {
        BodySpec::Custom(body) => out.push(format!(
            "Constants of {} as stated in the scenario.",
            ascii(&body.name)
        )),
        BodySpec::Known(name) => {
            // Citation and what it is for, in the order met.
            let mut cited: Vec<(&'static str, Vec<String>)> = Vec::new();
            let names = std::iter::once(name.as_str())
                .chain(case.body().parent.iter().map(|parent| parent.name.as_str()));
            for (k, entry) in names.filter_map(catalogue::entry).enumerate() {
                // Of the parent only GM and radius enter.
                let orbit = entry.semi_major_axis_km.filter(|_| k == 0);
                for (what, value) in [
                    ("GM", Some(entry.gm_km3_s2)),
                    ("radius", Some(entry.radius_km)),
                    ("orbit", orbit),
                ] {
                    let Some(value) = value else { continue };
                    let what = format!("{} {what}", entry.name);
                    match cited
                        .iter_mut()
                        .find(|(cite, _)| *cite == value.source.cite())
                    {
                        Some((_, uses)) => uses.push(what),
                        None => cited.push((value.source.cite(), vec![what])),
                    }
                }
            }
            out.extend(cited.into_iter().map(|(cite, uses)| {
                format!("{}: {}.", uses.join(", "), cite.trim_end_matches('.'))
            }));
        }
    }
    out
}
