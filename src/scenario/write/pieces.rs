//! A `Spec` as a tree of written pieces, in the order of the file format.

use crate::study::spec::{
    AltitudeChoice, ArrivalSpec, BodySpec, CapSpec, Departure, LimitsSpec, PassesChoice, PlaneSpec,
    ShapeSpec, Spec, TargetSpec, TransferApoapsis,
};
use std::fmt::Debug;

/// Fields of a group, in order.
pub(super) type Fields = Vec<(&'static str, Piece)>;

/// A piece of the file to be.
#[derive(Clone, Debug, PartialEq)]
pub(super) enum Piece {
    /// A number, text or word as written.
    Value(String),
    /// A variant with one value: `AltitudeKm(100.0)`.
    Inner { name: &'static str, value: String },
    /// A group of fields, with a name where it is a variant.
    Group { name: &'static str, fields: Fields },
}

impl Piece {
    /// The piece in one line: `Circular(altitude_km: 6500.0)`.
    pub(super) fn inline(&self) -> String {
        match self {
            Piece::Value(text) => text.clone(),
            Piece::Inner { name, value } => format!("{name}({value})"),
            Piece::Group { name, fields } => {
                let inner: Vec<String> = fields
                    .iter()
                    .map(|(name, piece)| format!("{name}: {}", piece.inline()))
                    .collect();
                format!("{name}({})", inner.join(", "))
            }
        }
    }
}

/// The shortest text that reads back to the same bits, with a point or an exponent.
fn written(value: f64) -> String {
    // Adding zero makes a negative zero positive: equal scenarios are written alike.
    format!("{:?}", value + 0.0)
}

fn number(value: f64) -> Piece {
    Piece::Value(written(value))
}

fn inner(name: &'static str, value: f64) -> Piece {
    Piece::Inner {
        name,
        value: written(value),
    }
}

/// A text in quotes. What would act on a terminal is escaped, so that a saved file can be shown; RON reads it back.
fn quoted(text: &str) -> String {
    let mut out = String::with_capacity(text.len() + 2);
    out.push('"');
    for c in text.chars() {
        match c {
            '"' | '\\' => out.extend(['\\', c]),
            '\n' => out.push_str("\\n"),
            '\t' => out.push_str("\\t"),
            '\r' => out.push_str("\\r"),
            c if crate::visible::acts(c) => out.extend(c.escape_unicode()),
            c => out.push(c),
        }
    }
    out.push('"');
    out
}

fn text(value: &str) -> Piece {
    Piece::Value(quoted(value))
}

fn word(value: impl Debug) -> Piece {
    Piece::Value(format!("{value:?}"))
}

fn group(fields: Fields) -> Piece {
    Piece::Group { name: "", fields }
}

fn passes(choice: PassesChoice) -> Piece {
    match choice {
        PassesChoice::Best => Piece::Value("Best".to_owned()),
        PassesChoice::Passes(passes) => Piece::Value(format!("Passes({passes})")),
    }
}

/// The whole scenario.
pub(super) fn pieces(spec: &Spec) -> Piece {
    let mut fields = vec![
        ("format", Piece::Value("1".to_owned())),
        ("title", text(&spec.title)),
        ("note", text(&spec.note)),
        ("body", body(&spec.body)),
        ("arrival", arrival(&spec.arrival)),
        ("target", target(&spec.target)),
        (
            "braking",
            group(vec![
                ("brake", choice(spec.braking.brake)),
                ("loop_apoapsis", choice(spec.braking.loop_apoapsis)),
                ("steps", passes(spec.braking.steps)),
            ]),
        ),
        ("limits", limits(&spec.limits)),
    ];
    fields.extend(spec.vehicle.map(|vehicle| {
        let fields = vec![
            ("dry_mass_kg", number(vehicle.dry_mass_kg)),
            ("propellant_kg", number(vehicle.propellant_kg)),
            ("thrust_n", number(vehicle.thrust_n)),
            ("isp_s", number(vehicle.isp_s)),
            ("steering", word(vehicle.steering)),
        ];
        ("vehicle", group(fields))
    }));
    fields.push(("burns", word(spec.burns)));
    fields.push((
        "policy",
        group(vec![
            ("margin_percent", number(spec.policy.margin_percent)),
            ("per_start_m_s", number(spec.policy.per_start_m_s)),
            ("residual_percent", number(spec.policy.residual_percent)),
        ]),
    ));
    group(fields)
}

fn body(spec: &BodySpec) -> Piece {
    let body = match spec {
        BodySpec::Known(name) => {
            return Piece::Inner {
                name: "Known",
                value: quoted(name),
            };
        }
        BodySpec::Custom(body) => body,
    };
    let mut fields = vec![
        ("name", text(&body.name)),
        ("gm_km3_s2", number(body.gm_km3_s2)),
        ("radius_km", number(body.radius_km)),
        ("j2", number(body.j2)),
        ("lowest_alt_km", number(body.lowest_alt_km)),
    ];
    fields.extend(
        body.hill_radius_km
            .map(|value| ("hill_radius_km", number(value))),
    );
    fields.extend(body.parent.as_ref().map(|parent| {
        let fields = vec![
            ("name", text(&parent.name)),
            ("gm_km3_s2", number(parent.gm_km3_s2)),
            ("radius_km", number(parent.radius_km)),
            ("semi_major_axis_km", number(parent.semi_major_axis_km)),
            ("eccentricity", number(parent.eccentricity)),
        ];
        ("parent", group(fields))
    }));
    Piece::Group {
        name: "Custom",
        fields,
    }
}

fn arrival(spec: &ArrivalSpec) -> Piece {
    let angles = |declination: &Option<f64>, ascension: &Option<f64>| {
        let declination = declination.map(|value| ("declination_deg", number(value)));
        let ascension = ascension.map(|value| ("right_ascension_deg", number(value)));
        declination.into_iter().chain(ascension)
    };
    let (name, fields) = match spec {
        ArrivalSpec::Asymptote {
            v_inf_km_s,
            declination_deg,
            right_ascension_deg,
        } => {
            let mut fields = vec![("v_inf_km_s", number(*v_inf_km_s))];
            fields.extend(angles(declination_deg, right_ascension_deg));
            ("Asymptote", fields)
        }
        ArrivalSpec::Energy {
            c3_km2_s2,
            declination_deg,
            right_ascension_deg,
        } => {
            let mut fields = vec![("c3_km2_s2", number(*c3_km2_s2))];
            fields.extend(angles(declination_deg, right_ascension_deg));
            ("Energy", fields)
        }
        ArrivalSpec::Transfer {
            from,
            parking_alt_km,
        } => {
            let mut fields = vec![("from", text(from))];
            fields.extend(parking_alt_km.map(|value| ("parking_alt_km", number(value))));
            ("Transfer", fields)
        }
        ArrivalSpec::FromParentOrbit {
            periapsis_alt_km,
            apoapsis,
            model,
            sense,
            departure,
        } => {
            let apoapsis = match apoapsis {
                TransferApoapsis::AtBody => Piece::Value("AtBody".to_owned()),
                TransferApoapsis::RadiusKm(radius) => inner("RadiusKm", *radius),
            };
            let mut fields = vec![
                ("periapsis_alt_km", number(*periapsis_alt_km)),
                ("apoapsis", apoapsis),
                ("model", word(model)),
            ];
            fields.extend(sense.map(|sense| ("sense", word(sense))));
            // The default is left unwritten: it is an addition of ours that few files need.
            if *departure != Departure::ParkingOrbit {
                fields.push(("departure", word(departure)));
            }
            ("FromParentOrbit", fields)
        }
    };
    Piece::Group { name, fields }
}

fn target(spec: &TargetSpec) -> Piece {
    let (name, fields) = match spec.shape {
        ShapeSpec::Circular { altitude_km } => {
            ("Circular", vec![("altitude_km", number(altitude_km))])
        }
        ShapeSpec::Ellipse {
            periapsis_alt_km,
            apoapsis_alt_km,
        } => (
            "Ellipse",
            vec![
                ("periapsis_alt_km", number(periapsis_alt_km)),
                ("apoapsis_alt_km", number(apoapsis_alt_km)),
            ],
        ),
        ShapeSpec::Period {
            periapsis_alt_km,
            hours,
        } => (
            "Period",
            vec![
                ("periapsis_alt_km", number(periapsis_alt_km)),
                ("hours", number(hours)),
            ],
        ),
    };
    let mut out = vec![("shape", Piece::Group { name, fields })];
    match spec.plane {
        PlaneSpec::Any => {}
        PlaneSpec::InclinationDeg(value) => out.push(("inclination_deg", number(value))),
        PlaneSpec::PlaneChangeDeg(value) => out.push(("plane_change_deg", number(value))),
    }
    group(out)
}

fn choice(choice: AltitudeChoice) -> Piece {
    match choice {
        AltitudeChoice::AltitudeKm(altitude) => inner("AltitudeKm", altitude),
        AltitudeChoice::Best => Piece::Value("Best".to_owned()),
    }
}

fn limits(limits: &LimitsSpec) -> Piece {
    let mut fields = Vec::new();
    fields.extend(
        limits
            .floor_alt_km
            .map(|value| ("floor_alt_km", number(value))),
    );
    fields.extend(limits.cap.map(|cap| {
        let cap = match cap {
            CapSpec::HillFraction(fraction) => inner("HillFraction", fraction),
            CapSpec::AltitudeKm(altitude) => inner("AltitudeKm", altitude),
        };
        ("cap", cap)
    }));
    fields.push(("longest_days", number(limits.longest_days)));
    fields.push(("most_starts", Piece::Value(limits.most_starts.to_string())));
    fields.extend(
        limits
            .longest_burn_s
            .map(|value| ("longest_burn_s", number(value))),
    );
    group(fields)
}
