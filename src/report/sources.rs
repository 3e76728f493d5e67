//! What stands behind the numbers: models, their sources, constants, and the cautions that go with every result.

use crate::physics::catalogue::{self, Entry, Sourced};
use crate::study::Case;
use crate::study::spec::{ArrivalSpec, BodySpec, Model, PlaneSpec};
use crate::visible::ascii;

/// The cautions that stand in every brief, in `--help` and in the README.
pub const CAUTIONS: &[&str] = &[
    "For concept and preliminary design only. Commanded manoeuvres need verified flight-dynamics software and review by qualified people.",
    "The rules of the launching state and agency on planetary protection and orbital debris apply to every arrival and every orbit named here.",
];

/// What the model leaves out.
pub const NOT_MODELLED: &str = "Not modelled: third bodies after arrival, oblateness, atmosphere, terrain, navigation and execution errors, dates.";

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
    let lasting = case.setting().lasting().is_some();
    let mut out = vec![
        if lasting {
            "Two-body mechanics round one body (any astrodynamics textbook); every burn integrated at constant thrust and Isp, the resulting orbit held (Dormand-Prince 8(5,3): Hairer, Norsett & Wanner 1993; docs/model.md).".to_owned()
        } else {
            "Two-body mechanics round one body, impulsive burns at apsides (any astrodynamics textbook); burns take no time here.".to_owned()
        },
        arrival_source(&case.spec().arrival).to_owned(),
    ];
    let plane = case.spec().target.plane;
    if !matches!(plane, PlaneSpec::Any) {
        out.push("Plane change about the line of apsides, split over the burns at its cheapest; turn for a missing inclination: sin theta = sin m / sin nu (derived, docs/model.md).".to_owned());
    }
    if case.declination_rad().is_some() && matches!(plane, PlaneSpec::InclinationDeg(_)) {
        out.push(
            "B-plane angle from cos i = cos d cos theta (Kizner 1959, JPL EP-674).".to_owned(),
        );
    }
    out.push("Break-even radius 2 mu/v_inf^2 (Curtis, Orbital Mechanics for Engineering Students, section 8.8). Cheapest altitude and crossovers are searched with the costs as they are, not taken from it.".to_owned());
    if case.setting().vehicle.is_some() {
        out.push("Rocket equation with g0 = 9.80665 m/s2 (3rd CGPM, 1901); margin and residual practice after ESA SRE-PA/2011.097.".to_owned());
        if !lasting {
            out.push("Finite-burn loss, for the warning only: dv t^2 mu/(24 r^3), first order, fixed attitude (derived, docs/model.md).".to_owned());
        }
    }
    if case.body().parent.is_some() {
        out.push("Sphere of influence a (m/M)^0.4 (Laplace); Hill radius a (1 - e)(m/3M)^(1/3) (Hamilton & Burns 1992, Icarus 96, 43); tide, for the warning only (Lidov 1962, Planet. Space Sci. 9, 719).".to_owned());
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

/// The constants that enter, grouped by source.
fn constants(case: &Case) -> Vec<String> {
    let mut out = Vec::new();
    let mut cited = Cited::default();
    match &case.spec().body {
        BodySpec::Custom(body) => out.push(format!(
            "Constants of {} as stated in the scenario.",
            ascii(&body.name)
        )),
        BodySpec::Known(name) => {
            use Constant::{Gm, Lowest, Orbit, Radius};
            cited.add(name, &[Gm, Radius, Orbit, Lowest]);
            if let Some(parent) = &case.body().parent {
                cited.add(&parent.name, &[Gm]);
                // Only a transfer that starts at an altitude over the parent needs its radius.
                if matches!(case.spec().arrival, ArrivalSpec::FromParentOrbit { .. }) {
                    cited.add(&parent.name, &[Radius]);
                }
            }
        }
    }
    if let ArrivalSpec::Transfer {
        from,
        parking_alt_km,
    } = &case.spec().arrival
    {
        cited.add(from, &[Constant::Orbit]);
        if parking_alt_km.is_some() {
            cited.add(from, &[Constant::Gm, Constant::Radius]);
        }
    }
    out.extend(cited.sentences());
    out
}

/// Citations, each with what it is for, in the order met.
#[derive(Default)]
struct Cited(Vec<(&'static str, Vec<String>)>);

impl Cited {
    fn add(&mut self, name: &str, wanted: &[Constant]) {
        let Some(entry) = catalogue::entry(name) else {
            return;
        };
        for constant in wanted {
            let Some(value) = constant.of(entry) else {
                continue;
            };
            let what = format!("{} {}", entry.name, constant.name());
            match self
                .0
                .iter_mut()
                .find(|(cite, _)| *cite == value.source.cite())
            {
                Some((_, uses)) => uses.push(what),
                None => self.0.push((value.source.cite(), vec![what])),
            }
        }
    }

    fn sentences(self) -> impl Iterator<Item = String> {
        self.0
            .into_iter()
            .map(|(cite, uses)| format!("{}: {}.", uses.join(", "), cite.trim_end_matches('.')))
    }
}

/// A constant of the catalogue that can enter a result.
#[derive(Clone, Copy)]
enum Constant {
    Gm,
    Radius,
    Orbit,
    Lowest,
}

impl Constant {
    fn name(self) -> &'static str {
        match self {
            Constant::Gm => "GM",
            Constant::Radius => "radius",
            Constant::Orbit => "orbit",
            Constant::Lowest => "lowest altitude",
        }
    }

    fn of(self, entry: &Entry) -> Option<Sourced> {
        match self {
            Constant::Gm => Some(entry.gm_km3_s2),
            Constant::Radius => Some(entry.radius_km),
            Constant::Orbit => entry.semi_major_axis_km,
            Constant::Lowest => Some(entry.lowest_alt_km),
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::scenario::file;

    #[test]
    fn every_body_that_enters_is_cited_and_no_other() {
        let text = r#"(
            format: 1,
            body: Known("Mars"),
            arrival: Transfer(from: "Earth", parking_alt_km: 300.0),
            target: (shape: Circular(altitude_km: 400.0)),
        )"#;
        let case = file::parse("transfer", text)
            .unwrap_or_else(|faults| panic!("{faults}"))
            .case;
        let all = sources(&case).join("\n");
        for needed in [
            "Mars GM",
            "Mars lowest altitude",
            "Earth GM",
            "Earth radius",
            "Earth orbit",
            "Sun GM",
        ] {
            assert!(all.contains(needed), "{needed} is not in\n{all}");
        }
        assert!(!all.contains("Sun radius"), "{all}");
        assert!(all.is_ascii());
    }
}
