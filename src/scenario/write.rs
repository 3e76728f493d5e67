//! A `Spec` as text: fresh with comments, patched into the author's own text, or canonical for the fingerprint.
//!
//! Saving patches. Only values that differ from what the text says are replaced, where they stand; comments, order and spacing
//! stay the author's.

use super::decode;
use super::tree::{self, Kind, Node};
use crate::study::field::field_at;
use crate::study::spec::{
    AltitudeChoice, ArrivalSpec, BodySpec, CapSpec, Departure, PlaneSpec, ShapeSpec, Spec,
    TransferApoapsis,
};
use sha2::{Digest, Sha256};
use std::ops::Range;

/// A commented starting point that loads: what `stoop new` prints.
pub fn template() -> &'static str {
    include_str!("template.ron")
}

/// A piece of the file to be: a value as written, or a group of fields.
#[derive(Clone, Debug, PartialEq)]
enum Piece {
    Value(String),
    Group {
        name: &'static str,
        fields: Vec<(&'static str, Piece)>,
    },
}

fn number(value: f64) -> Piece {
    // Debug is the shortest text that reads back to the same bits, with a point or an exponent.
    Piece::Value(format!("{value:?}"))
}

fn text(value: &str) -> Piece {
    // ron escapes quotes, backslashes and control characters.
    Piece::Value(ron::to_string(value).unwrap_or_else(|_| "\"\"".to_owned()))
}

fn word(value: impl std::fmt::Debug) -> Piece {
    Piece::Value(format!("{value:?}"))
}

fn pieces(spec: &Spec) -> Piece {
    let mut fields = vec![("format", Piece::Value("1".to_owned()))];
    fields.push(("title", text(&spec.title)));
    fields.push(("note", text(&spec.note)));
    fields.push(("body", body(&spec.body)));
    fields.push(("arrival", arrival(&spec.arrival)));
    fields.push(("target", target(spec)));
    fields.push((
        "braking",
        Piece::Group {
            name: "",
            fields: vec![
                ("brake", choice(spec.braking.brake)),
                ("loop_apoapsis", choice(spec.braking.loop_apoapsis)),
            ],
        },
    ));
    fields.push(("limits", limits(spec)));
    if let Some(vehicle) = &spec.vehicle {
        fields.push((
            "vehicle",
            Piece::Group {
                name: "",
                fields: vec![
                    ("dry_mass_kg", number(vehicle.dry_mass_kg)),
                    ("propellant_kg", number(vehicle.propellant_kg)),
                    ("thrust_n", number(vehicle.thrust_n)),
                    ("isp_s", number(vehicle.isp_s)),
                    ("steering", word(vehicle.steering)),
                ],
            },
        ));
    }
    fields.push(("burns", word(spec.burns)));
    fields.push((
        "policy",
        Piece::Group {
            name: "",
            fields: vec![
                ("margin_percent", number(spec.policy.margin_percent)),
                ("per_start_m_s", number(spec.policy.per_start_m_s)),
                ("residual_percent", number(spec.policy.residual_percent)),
            ],
        },
    ));
    Piece::Group { name: "", fields }
}

fn body(spec: &BodySpec) -> Piece {
    match spec {
        BodySpec::Known(name) => Piece::Value(format!(
            "Known({})",
            ron::to_string(name).unwrap_or_default()
        )),
        BodySpec::Custom(body) => {
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
                (
                    "parent",
                    Piece::Group {
                        name: "",
                        fields: vec![
                            ("name", text(&parent.name)),
                            ("gm_km3_s2", number(parent.gm_km3_s2)),
                            ("radius_km", number(parent.radius_km)),
                            ("semi_major_axis_km", number(parent.semi_major_axis_km)),
                            ("eccentricity", number(parent.eccentricity)),
                        ],
                    },
                )
            }));
            Piece::Group {
                name: "Custom",
                fields,
            }
        }
    }
}

fn arrival(spec: &ArrivalSpec) -> Piece {
    let angles = |declination: &Option<f64>, ascension: &Option<f64>| {
        let declination = declination.map(|value| ("declination_deg", number(value)));
        let ascension = ascension.map(|value| ("right_ascension_deg", number(value)));
        declination.into_iter().chain(ascension)
    };
    match spec {
        ArrivalSpec::Asymptote {
            v_inf_km_s,
            declination_deg,
            right_ascension_deg,
        } => {
            let mut fields = vec![("v_inf_km_s", number(*v_inf_km_s))];
            fields.extend(angles(declination_deg, right_ascension_deg));
            Piece::Group {
                name: "Asymptote",
                fields,
            }
        }
        ArrivalSpec::Energy {
            c3_km2_s2,
            declination_deg,
            right_ascension_deg,
        } => {
            let mut fields = vec![("c3_km2_s2", number(*c3_km2_s2))];
            fields.extend(angles(declination_deg, right_ascension_deg));
            Piece::Group {
                name: "Energy",
                fields,
            }
        }
        ArrivalSpec::Transfer {
            from,
            parking_alt_km,
        } => {
            let mut fields = vec![("from", text(from))];
            fields.extend(parking_alt_km.map(|value| ("parking_alt_km", number(value))));
            Piece::Group {
                name: "Transfer",
                fields,
            }
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
                TransferApoapsis::RadiusKm(radius) => Piece::Value(format!("RadiusKm({radius:?})")),
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
            Piece::Group {
                name: "FromParentOrbit",
                fields,
            }
        }
    }
}

fn target(spec: &Spec) -> Piece {
    let shape = match spec.target.shape {
        ShapeSpec::Circular { altitude_km } => Piece::Group {
            name: "Circular",
            fields: vec![("altitude_km", number(altitude_km))],
        },
        ShapeSpec::Ellipse {
            periapsis_alt_km,
            apoapsis_alt_km,
        } => Piece::Group {
            name: "Ellipse",
            fields: vec![
                ("periapsis_alt_km", number(periapsis_alt_km)),
                ("apoapsis_alt_km", number(apoapsis_alt_km)),
            ],
        },
        ShapeSpec::Period {
            periapsis_alt_km,
            hours,
        } => Piece::Group {
            name: "Period",
            fields: vec![
                ("periapsis_alt_km", number(periapsis_alt_km)),
                ("hours", number(hours)),
            ],
        },
    };
    let mut fields = vec![("shape", shape)];
    match spec.target.plane {
        PlaneSpec::Any => {}
        PlaneSpec::InclinationDeg(value) => fields.push(("inclination_deg", number(value))),
        PlaneSpec::PlaneChangeDeg(value) => fields.push(("plane_change_deg", number(value))),
    }
    Piece::Group { name: "", fields }
}

fn choice(choice: AltitudeChoice) -> Piece {
    Piece::Value(match choice {
        AltitudeChoice::AltitudeKm(altitude) => format!("AltitudeKm({altitude:?})"),
        AltitudeChoice::Best => "Best".to_owned(),
    })
}

fn limits(spec: &Spec) -> Piece {
    let limits = &spec.limits;
    let mut fields = Vec::new();
    fields.extend(
        limits
            .floor_alt_km
            .map(|value| ("floor_alt_km", number(value))),
    );
    fields.extend(limits.cap.map(|cap| {
        let text = match cap {
            CapSpec::HillFraction(fraction) => format!("HillFraction({fraction:?})"),
            CapSpec::AltitudeKm(altitude) => format!("AltitudeKm({altitude:?})"),
        };
        ("cap", Piece::Value(text))
    }));
    fields.push(("longest_days", number(limits.longest_days)));
    fields.push(("most_starts", Piece::Value(limits.most_starts.to_string())));
    fields.extend(
        limits
            .longest_burn_s
            .map(|value| ("longest_burn_s", number(value))),
    );
    Piece::Group { name: "", fields }
}

impl Piece {
    /// The piece in one line: `Circular(altitude_km: 6500.0)`.
    fn inline(&self) -> String {
        match self {
            Piece::Value(text) => text.clone(),
            Piece::Group { name, fields } => {
                let inner: Vec<String> = fields
                    .iter()
                    .map(|(name, piece)| format!("{name}: {}", piece.inline()))
                    .collect();
                format!("{name}({})", inner.join(", "))
            }
        }
    }

    /// The piece over several lines with a comment beside every number.
    fn commented(&self, path: &str, indent: usize) -> String {
        match self {
            Piece::Value(text) => text.clone(),
            Piece::Group { name, fields } if indent < 2 || 2 < fields.len() => {
                let pad = " ".repeat(4 * (indent + 1));
                let mut out = format!("{name}(\n");
                for (field, piece) in fields {
                    let full = if path.is_empty() {
                        (*field).to_owned()
                    } else {
                        format!("{path}.{field}")
                    };
                    let value = piece.commented(&full, indent + 1);
                    let comment = comment(&full, piece)
                        .map_or_else(String::new, |comment| format!("  // {comment}"));
                    out.push_str(&format!("{pad}{field}: {value},{comment}\n"));
                }
                out + &" ".repeat(4 * indent) + ")"
            }
            Piece::Group { .. } => self.inline(),
        }
    }
}

/// What stands beside a value in a fresh file: unit and meaning.
fn comment(path: &str, piece: &Piece) -> Option<String> {
    let field = field_at(path).or_else(|| match piece {
        // `brake: AltitudeKm(100.0)` has its entry under the variant's name.
        Piece::Value(text) => field_at(&format!("{path}.{}", text.split('(').next().unwrap_or(""))),
        Piece::Group { .. } => None,
    })?;
    Some(if field.unit.is_empty() {
        field.meaning.to_owned()
    } else {
        format!("{}: {}", field.unit, field.meaning)
    })
}

/// A fresh, commented file.
pub fn emit(spec: &Spec) -> String {
    format!(
        "// A stoop scenario. Units are part of every field's name.\n{}\n",
        pieces(spec).commented("", 0)
    )
}

/// The values alone, one fixed text for each scenario: what the fingerprint is taken of. Without title and note, so that
/// renaming changes nothing.
pub fn canonical(spec: &Spec) -> String {
    let nameless = Spec {
        title: String::new(),
        note: String::new(),
        ..spec.clone()
    };
    pieces(&nameless).inline()
}

/// First 16 hexadecimal digits of the SHA-256 of [`canonical`].
pub fn fingerprint(spec: &Spec) -> String {
    let digest = Sha256::digest(canonical(spec).as_bytes());
    digest
        .iter()
        .take(8)
        .map(|byte| format!("{byte:02x}"))
        .collect()
}

/// The author's text with the values of `new` in it. A text that does not load is replaced by a fresh one.
pub fn patch(original: &str, new: &Spec) -> String {
    let mark = original.len() - original.trim_start_matches('\u{feff}').len();
    let body = &original[mark..];
    let (Ok(case), Some(root)) = (decode::case("", original), tree::parse(body)) else {
        return emit(new);
    };
    let mut edits = Edits {
        text: body,
        edits: Vec::new(),
    };
    edits.value(&root, &pieces(case.spec()), &pieces(new));
    let patched = format!("{}{}", &original[..mark], edits.apply());
    // The promise is that what is saved says what was on screen; if a text defeats the patching, a fresh one keeps it.
    match decode::case("", &patched) {
        Ok(back) if back.spec() == new => patched,
        _ => emit(new),
    }
}

struct Edits<'a> {
    text: &'a str,
    edits: Vec<(Range<usize>, String)>,
}

impl Edits<'_> {
    fn value(&mut self, node: &Node, old: &Piece, new: &Piece) {
        if old == new {
            return;
        }
        let node = node.plain();
        if let (
            Piece::Group {
                name: old_name,
                fields: old_fields,
            },
            Piece::Group { name, fields },
            Kind::Struct { .. },
        ) = (old, new, &node.kind)
            && old_name == name
        {
            return self.group(node, old_fields, fields);
        }
        self.edits.push((node.span.clone(), new.inline()));
    }

    fn group(&mut self, node: &Node, old: &[(&'static str, Piece)], new: &[(&'static str, Piece)]) {
        let before = |name: &str| {
            old.iter()
                .find(|(each, _)| *each == name)
                .map(|(_, piece)| piece)
        };
        let mut added = Vec::new();
        for (name, piece) in new {
            match (node.field(name), before(name)) {
                (Some(field), Some(old)) if !field.value.is_none() => {
                    self.value(&field.value, old, piece)
                }
                (Some(field), None) => self.edits.push((field.value.span.clone(), piece.inline())),
                (Some(field), Some(old)) if old != piece => {
                    self.edits.push((field.value.span.clone(), piece.inline()))
                }
                (None, Some(old)) if old == piece => {}
                (None, _) => added.push(format!("{name}: {}", piece.inline())),
                _ => {}
            }
        }
        self.add(node, &added);
        for (name, _) in old
            .iter()
            .filter(|(name, _)| !new.iter().any(|(each, _)| each == name))
        {
            if let Some(field) = node.field(name) {
                self.remove(field.name_span.start..field.value.span.end);
            }
        }
    }

    /// Adds fields before the closing parenthesis, on lines of their own where the group has such.
    fn add(&mut self, node: &Node, added: &[String]) {
        let Kind::Struct { fields, close, .. } = &node.kind else {
            return;
        };
        if added.is_empty() {
            return;
        }
        let Some(last) = fields.last() else {
            self.edits.push((*close..*close, added.join(", ")));
            return;
        };
        let end = last.value.span.end;
        let comma = self.text[tree::skip_blanks(self.text, end)..].starts_with(',');
        if !comma {
            self.edits.push((end..end, ",".to_owned()));
        }
        let line = self.text[..*close].rfind('\n').map_or(0, |at| at + 1);
        if self.text[line..*close].trim().is_empty() && end <= line {
            // The closing parenthesis stands on its own line: new lines go above it, indented like the last field's.
            let start = self.text[..last.name_span.start]
                .rfind('\n')
                .map_or(0, |at| at + 1);
            let indent: String = self.text[start..]
                .chars()
                .take_while(|c| c.is_whitespace() && *c != '\n')
                .collect();
            let lines: String = added
                .iter()
                .map(|field| format!("{indent}{field},\n"))
                .collect();
            self.edits.push((line..line, lines));
        } else {
            self.edits
                .push((*close..*close, format!(" {}", added.join(", "))));
        }
    }

    /// Removes a field with its comma, and its line where nothing else is left on it.
    fn remove(&mut self, range: Range<usize>) {
        let after = tree::skip_blanks(self.text, range.end);
        let end = if self.text[after..].starts_with(',') {
            after + 1
        } else {
            range.end
        };
        let line = self.text[..range.start].rfind('\n').map_or(0, |at| at + 1);
        let rest = self.text[end..]
            .find('\n')
            .map_or(self.text.len(), |at| end + at);
        let alone = self.text[line..range.start].trim().is_empty()
            && self.text[end..rest].trim().is_empty();
        if alone && rest < self.text.len() {
            self.edits.push((line..rest + 1, String::new()));
        } else {
            self.edits.push((range.start..end, String::new()));
        }
    }

    fn apply(mut self) -> String {
        self.edits
            .sort_by_key(|(range, _)| (range.start, range.end));
        let mut out = String::with_capacity(self.text.len() + 64);
        let mut at = 0;
        for (range, text) in &self.edits {
            if at <= range.start {
                out.push_str(&self.text[at..range.start]);
                out.push_str(text);
                at = range.end;
            }
        }
        out.push_str(&self.text[at..]);
        out
    }
}
