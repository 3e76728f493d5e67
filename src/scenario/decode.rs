//! A located tree to a `Spec`, collecting every fault instead of stopping at the first.

use super::diagnostic::{Diagnostic, Diagnostics, place};
use super::tree::{self, Kind, Node};
use crate::study::case::{Case, nearest};
use crate::study::spec::{
    AltitudeChoice, ArrivalSpec, BodySpec, BrakingSpec, Burns, CapSpec, CustomBody, CustomParent,
    Departure, LimitsSpec, Model, PlaneSpec, PolicySpec, Sense, ShapeSpec, Spec, Steering,
    TargetSpec, TransferApoapsis, VehicleSpec, defaults,
};

/// Largest scenario read, bytes.
pub const LARGEST: usize = 1024 * 1024;

/// Reads a scenario text into a checked case.
///
/// # Errors
/// Every fault, with its place.
pub fn case(file: &str, text: &str) -> Result<Case, Diagnostics> {
    let refuse = |faults| {
        Err(Diagnostics {
            file: file.to_owned(),
            faults,
        })
    };
    let body = text.strip_prefix('\u{feff}').unwrap_or(text);
    let shift = text.len() - body.len();
    if body.trim().is_empty() {
        return refuse(vec![at(
            text,
            0,
            "",
            "the file is empty; `stoop new` prints a commented starting point",
        )]);
    }
    if let Err(fault) = syntax(body) {
        return refuse(vec![fault]);
    }
    let Some(root) = tree::parse(body) else {
        let message = format!(
            "brackets are nested deeper than {} levels or something is not closed",
            tree::DEEPEST
        );
        return refuse(vec![at(body, 0, "", &message)]);
    };
    let mut reader = Reader {
        text: body,
        faults: Vec::new(),
        broken: Vec::new(),
    };
    let spec = reader.scenario(&root);
    // Ranges and contradictions are looked at even where other fields are broken, so that all faults come at once; a fault about
    // a field that stands in for a broken one is not the author's.
    match Case::new(spec) {
        Ok(case) if reader.faults.is_empty() => return Ok(case),
        Ok(_) => {}
        Err(found) => {
            for fault in found {
                let own = !reader
                    .broken
                    .iter()
                    .any(|path| fault.path.starts_with(path) || path.starts_with(&fault.path));
                if own {
                    let offset = locate(&root, &fault.path);
                    let (line, column) = place(body, offset);
                    reader.faults.push(Diagnostic {
                        line,
                        column,
                        field: fault.path,
                        message: fault.message,
                    });
                }
            }
        }
    }
    let mut faults = reader.faults;
    faults.sort_by_key(|fault| (fault.line, fault.column));
    faults.dedup();
    if shift != 0 {
        // The mark at the start counts as a column of the first line in no editor.
        debug_assert_eq!(shift, '\u{feff}'.len_utf8());
    }
    refuse(faults)
}

fn at(text: &str, offset: usize, field: &str, message: &str) -> Diagnostic {
    let (line, column) = place(text, offset);
    Diagnostic {
        line,
        column,
        field: field.to_owned(),
        message: message.to_owned(),
    }
}

/// The syntax, judged by the `ron` crate with its recursion limit on.
fn syntax(text: &str) -> Result<(), Diagnostic> {
    let options =
        ron::Options::default().with_default_extension(ron::extensions::Extensions::IMPLICIT_SOME);
    options
        .from_str::<serde::de::IgnoredAny>(text)
        .map(|_| ())
        .map_err(|error| Diagnostic {
            line: error.span.start.line,
            column: error.span.start.col,
            field: String::new(),
            message: match error.code {
                ron::Error::ExceededRecursionLimit => {
                    format!(
                        "brackets are nested deeper than the {} levels allowed",
                        tree::DEEPEST
                    )
                }
                code => format!("the file is not valid RON here: {code}"),
            },
        })
}

/// Where a path stands: the deepest part of it that is present.
fn locate(root: &Node, path: &str) -> usize {
    let mut node = root;
    let mut offset = node.span.start;
    for part in path.split('.') {
        let next = match node.field(part) {
            Some(field) => {
                offset = field.name_span.start;
                Some(field.value.plain())
            }
            // `brake.AltitudeKm` is the value inside the variant of that name.
            None => match &node.kind {
                Kind::Tuple {
                    name: Some(name),
                    values,
                } if name == part => values.first(),
                _ => None,
            },
        };
        match next {
            Some(next) => {
                node = next;
                if !matches!(node.kind, Kind::Struct { .. }) {
                    offset = node.span.start;
                }
            }
            None => break,
        }
    }
    offset
}

struct Reader<'a> {
    text: &'a str,
    faults: Vec<Diagnostic>,
    /// Paths whose values are stand-ins.
    broken: Vec<String>,
}

impl Reader<'_> {
    fn fault(&mut self, offset: usize, field: &str, message: impl AsRef<str>) {
        self.faults
            .push(at(self.text, offset, field, message.as_ref()));
        self.broken.push(field.to_owned());
    }

    /// Checks the field names of a struct: unknown ones, doubled ones.
    fn fields(&mut self, node: &Node, path: &str, known: &[&str]) {
        let Kind::Struct { fields, .. } = &node.kind else {
            return;
        };
        for (k, field) in fields.iter().enumerate() {
            let full = join(path, &field.name);
            if !known.contains(&field.name.as_str()) {
                let near = nearest(&field.name, known.iter().copied());
                let message = format!(
                    "there is no such field{near}; allowed here: {}",
                    known.join(", ")
                );
                self.faults
                    .push(at(self.text, field.name_span.start, &full, &message));
            } else if fields[..k].iter().any(|before| before.name == field.name) {
                self.faults.push(at(
                    self.text,
                    field.name_span.start,
                    &full,
                    "this field is given twice; keep one of the two",
                ));
            }
        }
    }

    /// A field that must be there.
    fn required<'n>(&mut self, node: &'n Node, path: &str, name: &str) -> Option<&'n Node> {
        let found = node
            .field(name)
            .map(|field| field.value.plain())
            .filter(|value| !value.is_none());
        if found.is_none() {
            let offset = match &node.kind {
                Kind::Struct { close, .. } => *close,
                _ => node.span.start,
            };
            self.fault(
                offset,
                &join(path, name),
                "this field is missing; `stoop new` shows a complete scenario",
            );
        }
        found
    }

    /// A field that may be left out, or be `None`.
    fn optional<'n>(&self, node: &'n Node, name: &str) -> Option<&'n Node> {
        node.field(name)
            .map(|field| field.value.plain())
            .filter(|value| !value.is_none())
    }

    fn number(&mut self, value: &Node, path: &str) -> f64 {
        if let Kind::Number(number) = value.kind {
            return number;
        }
        self.fault(
            value.span.start,
            path,
            format!("a number is wanted here, not {}", value.described()),
        );
        1.0
    }

    fn required_number(&mut self, node: &Node, path: &str, name: &str) -> f64 {
        match self.required(node, path, name) {
            Some(value) => self.number(value, &join(path, name)),
            None => 1.0,
        }
    }

    fn optional_number(&mut self, node: &Node, path: &str, name: &str) -> Option<f64> {
        let value = self.optional(node, name)?;
        Some(self.number(value, &join(path, name)))
    }

    fn text(&mut self, value: &Node, path: &str) -> String {
        if let Kind::Text(text) = &value.kind {
            return text.clone();
        }
        self.fault(
            value.span.start,
            path,
            format!("a text in quotes is wanted here, not {}", value.described()),
        );
        String::new()
    }

    fn required_text(&mut self, node: &Node, path: &str, name: &str) -> String {
        match self.required(node, path, name) {
            Some(value) => self.text(value, &join(path, name)),
            None => String::new(),
        }
    }

    /// The position of a bare variant among the known ones.
    fn choice(&mut self, value: &Node, path: &str, known: &[&str]) -> usize {
        let found = match &value.kind {
            Kind::Word(word) => known.iter().position(|name| name == word),
            _ => None,
        };
        found.unwrap_or_else(|| {
            self.no_variant(value, path, known);
            0
        })
    }

    fn no_variant(&mut self, value: &Node, path: &str, known: &[&str]) {
        let near = value
            .variant()
            .map_or_else(String::new, |name| nearest(name, known.iter().copied()));
        let message = format!(
            "{} is not understood here{near}; allowed: {}",
            value.described(),
            known.join(", ")
        );
        self.fault(value.span.start, path, message);
    }

    /// The one value of a variant such as `AltitudeKm(100.0)`.
    fn inner(&mut self, value: &Node, path: &str) -> f64 {
        let name = value.variant().unwrap_or("").to_owned();
        match &value.kind {
            Kind::Tuple { values, .. } if values.len() == 1 => {
                self.number(values[0].plain(), &join(path, &name))
            }
            _ => {
                self.fault(
                    value.span.start,
                    &join(path, &name),
                    format!("one number in parentheses is wanted, like {name}(100.0)"),
                );
                1.0
            }
        }
    }

    /// Whether a value is a struct with fields; says so if not.
    fn is_struct(&mut self, value: &Node, path: &str) -> bool {
        let sound = matches!(value.kind, Kind::Struct { .. });
        if !sound {
            let message = format!(
                "a group (field: value, ...) is wanted here, not {}",
                value.described()
            );
            self.fault(value.span.start, path, message);
        }
        sound
    }

    fn scenario(&mut self, root: &Node) -> Spec {
        const FIELDS: &[&str] = &[
            "format", "title", "note", "body", "arrival", "target", "braking", "limits", "vehicle",
            "burns", "policy",
        ];
        let mut spec = stand_in();
        if !self.is_struct(root, "") {
            return spec;
        }
        self.fields(root, "", FIELDS);
        if let Some(value) = self.required(root, "", "format")
            && value.kind != Kind::Number(1.0)
        {
            self.fault(
                value.span.start,
                "format",
                "this version reads format 1; write `format: 1`",
            );
        }
        if let Some(value) = self.optional(root, "title") {
            spec.title = self.text(value, "title");
        }
        if let Some(value) = self.optional(root, "note") {
            spec.note = self.text(value, "note");
        }
        if let Some(value) = self.required(root, "", "body") {
            spec.body = self.body(value);
        }
        if let Some(value) = self.required(root, "", "arrival") {
            spec.arrival = self.arrival(value);
        }
        if let Some(value) = self.required(root, "", "target") {
            spec.target = self.target(value);
        }
        if let Some(value) = self.optional(root, "braking") {
            spec.braking = self.braking(value);
        }
        if let Some(value) = self.optional(root, "limits") {
            spec.limits = self.limits(value);
        }
        if let Some(value) = self.optional(root, "vehicle") {
            spec.vehicle = self.vehicle(value);
        }
        if let Some(value) = self.optional(root, "burns") {
            spec.burns = [Burns::Impulsive, Burns::Finite]
                [self.choice(value, "burns", &["Impulsive", "Finite"])];
        }
        if let Some(value) = self.optional(root, "policy") {
            spec.policy = self.policy(value);
        }
        spec
    }

    fn body(&mut self, value: &Node) -> BodySpec {
        match (value.variant(), &value.kind) {
            (Some("Known"), Kind::Tuple { values, .. }) if values.len() == 1 => {
                BodySpec::Known(self.text(values[0].plain(), "body"))
            }
            (Some("Known"), _) => {
                self.fault(
                    value.span.start,
                    "body",
                    "the name of a body in quotes is wanted, like Known(\"Moon\")",
                );
                stand_in().body
            }
            (Some("Custom"), Kind::Struct { .. }) => self.custom_body(value),
            _ => {
                self.no_variant(
                    value,
                    "body",
                    &[
                        "Known(\"name\")",
                        "Custom(name: ..., gm_km3_s2: ..., radius_km: ...)",
                    ],
                );
                stand_in().body
            }
        }
    }

    fn custom_body(&mut self, value: &Node) -> BodySpec {
        self.fields(
            value,
            "body",
            &[
                "name",
                "gm_km3_s2",
                "radius_km",
                "j2",
                "lowest_alt_km",
                "hill_radius_km",
                "parent",
            ],
        );
        let parent = self
            .optional(value, "parent")
            .filter(|parent| self.is_struct(parent, "body.parent"))
            .map(|parent| {
                let path = "body.parent";
                self.fields(
                    parent,
                    path,
                    &[
                        "name",
                        "gm_km3_s2",
                        "radius_km",
                        "semi_major_axis_km",
                        "eccentricity",
                    ],
                );
                CustomParent {
                    name: self.required_text(parent, path, "name"),
                    gm_km3_s2: self.required_number(parent, path, "gm_km3_s2"),
                    radius_km: self.required_number(parent, path, "radius_km"),
                    semi_major_axis_km: self.required_number(parent, path, "semi_major_axis_km"),
                    eccentricity: self
                        .optional_number(parent, path, "eccentricity")
                        .unwrap_or(0.0),
                }
            });
        BodySpec::Custom(CustomBody {
            name: self.required_text(value, "body", "name"),
            gm_km3_s2: self.required_number(value, "body", "gm_km3_s2"),
            radius_km: self.required_number(value, "body", "radius_km"),
            j2: self.optional_number(value, "body", "j2").unwrap_or(0.0),
            lowest_alt_km: self
                .optional_number(value, "body", "lowest_alt_km")
                .unwrap_or(0.0),
            hill_radius_km: self.optional_number(value, "body", "hill_radius_km"),
            parent,
        })
    }

    fn arrival(&mut self, value: &Node) -> ArrivalSpec {
        const KNOWN: &[&str] = &[
            "Asymptote",
            "Energy",
            "Transfer",
            "FromParentOrbit",
            "Dated",
        ];
        let path = "arrival";
        if value.variant() == Some("Dated") {
            self.fault(
                value.span.start,
                path,
                "dated arrivals are not available in this version; use Asymptote or Energy with the v-infinity of the date",
            );
            return stand_in().arrival;
        }
        let known = value.variant().is_some_and(|name| KNOWN.contains(&name));
        if !known || !matches!(value.kind, Kind::Struct { .. }) {
            if known {
                self.fault(
                    value.span.start,
                    path,
                    "fields in parentheses are wanted, like Asymptote(v_inf_km_s: 2.65)",
                );
            } else {
                self.no_variant(value, path, KNOWN);
            }
            return stand_in().arrival;
        }
        match value.variant() {
            Some("Energy") => {
                self.fields(
                    value,
                    path,
                    &["c3_km2_s2", "declination_deg", "right_ascension_deg"],
                );
                ArrivalSpec::Energy {
                    c3_km2_s2: self.required_number(value, path, "c3_km2_s2"),
                    declination_deg: self.optional_number(value, path, "declination_deg"),
                    right_ascension_deg: self.optional_number(value, path, "right_ascension_deg"),
                }
            }
            Some("Transfer") => {
                self.fields(value, path, &["from", "parking_alt_km"]);
                ArrivalSpec::Transfer {
                    from: self.required_text(value, path, "from"),
                    parking_alt_km: self.optional_number(value, path, "parking_alt_km"),
                }
            }
            Some("FromParentOrbit") => self.from_parent_orbit(value),
            _ => {
                self.fields(
                    value,
                    path,
                    &["v_inf_km_s", "declination_deg", "right_ascension_deg"],
                );
                ArrivalSpec::Asymptote {
                    v_inf_km_s: self.required_number(value, path, "v_inf_km_s"),
                    declination_deg: self.optional_number(value, path, "declination_deg"),
                    right_ascension_deg: self.optional_number(value, path, "right_ascension_deg"),
                }
            }
        }
    }

    fn from_parent_orbit(&mut self, value: &Node) -> ArrivalSpec {
        let path = "arrival";
        self.fields(
            value,
            path,
            &[
                "periapsis_alt_km",
                "apoapsis",
                "model",
                "sense",
                "departure",
            ],
        );
        let periapsis_alt_km = self.required_number(value, path, "periapsis_alt_km");
        let apoapsis = match self.optional(value, "apoapsis") {
            None => TransferApoapsis::AtBody,
            Some(apoapsis) => match apoapsis.variant() {
                Some("AtBody") => TransferApoapsis::AtBody,
                Some("RadiusKm") => {
                    TransferApoapsis::RadiusKm(self.inner(apoapsis, "arrival.apoapsis"))
                }
                _ => {
                    self.no_variant(
                        apoapsis,
                        "arrival.apoapsis",
                        &["AtBody", "RadiusKm(390000.0)"],
                    );
                    TransferApoapsis::AtBody
                }
            },
        };
        let model = self
            .optional(value, "model")
            .map_or(Model::ThreeBody, |model| {
                [
                    Model::Textbook,
                    Model::BoundarySpeed,
                    Model::Patched,
                    Model::ThreeBody,
                ][self.choice(
                    model,
                    "arrival.model",
                    &["Textbook", "BoundarySpeed", "Patched", "ThreeBody"],
                )]
            });
        let sense = self.optional(value, "sense").map(|sense| {
            [Sense::Prograde, Sense::Retrograde]
                [self.choice(sense, "arrival.sense", &["Prograde", "Retrograde"])]
        });
        let departure =
            self.optional(value, "departure")
                .map_or(Departure::ParkingOrbit, |departure| {
                    [Departure::ParkingOrbit, Departure::OnTransfer][self.choice(
                        departure,
                        "arrival.departure",
                        &["ParkingOrbit", "OnTransfer"],
                    )]
                });
        ArrivalSpec::FromParentOrbit {
            periapsis_alt_km,
            apoapsis,
            model,
            sense,
            departure,
        }
    }

    fn target(&mut self, value: &Node) -> TargetSpec {
        let mut target = stand_in().target;
        if !self.is_struct(value, "target") {
            return target;
        }
        self.fields(
            value,
            "target",
            &["shape", "inclination_deg", "plane_change_deg"],
        );
        if let Some(shape) = self.required(value, "target", "shape") {
            target.shape = self.shape(shape);
        }
        let inclination = self.optional_number(value, "target", "inclination_deg");
        let change = self.optional_number(value, "target", "plane_change_deg");
        target.plane = match (inclination, change) {
            (Some(_), Some(_)) => {
                let offset = value
                    .field("plane_change_deg")
                    .map_or(value.span.start, |field| field.name_span.start);
                self.fault(
                    offset,
                    "target.plane_change_deg",
                    "inclination_deg and plane_change_deg are both given; keep the one that is meant",
                );
                PlaneSpec::Any
            }
            (Some(inclination), None) => PlaneSpec::InclinationDeg(inclination),
            (None, Some(change)) => PlaneSpec::PlaneChangeDeg(change),
            (None, None) => PlaneSpec::Any,
        };
        target
    }

    fn shape(&mut self, value: &Node) -> ShapeSpec {
        let path = "target.shape";
        let is_struct = matches!(value.kind, Kind::Struct { .. });
        match value.variant() {
            Some("Circular") if is_struct => {
                self.fields(value, path, &["altitude_km"]);
                ShapeSpec::Circular {
                    altitude_km: self.required_number(value, path, "altitude_km"),
                }
            }
            Some("Ellipse") if is_struct => {
                self.fields(value, path, &["periapsis_alt_km", "apoapsis_alt_km"]);
                ShapeSpec::Ellipse {
                    periapsis_alt_km: self.required_number(value, path, "periapsis_alt_km"),
                    apoapsis_alt_km: self.required_number(value, path, "apoapsis_alt_km"),
                }
            }
            Some("Period") if is_struct => {
                self.fields(value, path, &["periapsis_alt_km", "hours"]);
                ShapeSpec::Period {
                    periapsis_alt_km: self.required_number(value, path, "periapsis_alt_km"),
                    hours: self.required_number(value, path, "hours"),
                }
            }
            _ => {
                let known = [
                    "Circular(altitude_km: ...)",
                    "Ellipse(periapsis_alt_km: ..., apoapsis_alt_km: ...)",
                    "Period(periapsis_alt_km: ..., hours: ...)",
                ];
                self.no_variant(value, path, &known);
                stand_in().target.shape
            }
        }
    }

    fn altitude_choice(&mut self, value: &Node, path: &str) -> AltitudeChoice {
        match value.variant() {
            Some("Best") => AltitudeChoice::Best,
            Some("AltitudeKm") => AltitudeChoice::AltitudeKm(self.inner(value, path)),
            _ => {
                self.no_variant(value, path, &["Best", "AltitudeKm(100.0)"]);
                AltitudeChoice::Best
            }
        }
    }

    fn braking(&mut self, value: &Node) -> BrakingSpec {
        let mut braking = defaults::BRAKING;
        if !self.is_struct(value, "braking") {
            return braking;
        }
        self.fields(value, "braking", &["brake", "loop_apoapsis"]);
        if let Some(brake) = self.optional(value, "brake") {
            braking.brake = self.altitude_choice(brake, "braking.brake");
        }
        if let Some(apoapsis) = self.optional(value, "loop_apoapsis") {
            braking.loop_apoapsis = self.altitude_choice(apoapsis, "braking.loop_apoapsis");
        }
        braking
    }

    fn limits(&mut self, value: &Node) -> LimitsSpec {
        let path = "limits";
        let mut limits = defaults::LIMITS;
        if !self.is_struct(value, path) {
            return limits;
        }
        self.fields(
            value,
            path,
            &[
                "floor_alt_km",
                "cap",
                "longest_days",
                "most_starts",
                "longest_burn_s",
            ],
        );
        limits.floor_alt_km = self.optional_number(value, path, "floor_alt_km");
        limits.cap = self
            .optional(value, "cap")
            .and_then(|cap| match cap.variant() {
                Some("HillFraction") => Some(CapSpec::HillFraction(self.inner(cap, "limits.cap"))),
                Some("AltitudeKm") => Some(CapSpec::AltitudeKm(self.inner(cap, "limits.cap"))),
                _ => {
                    self.no_variant(
                        cap,
                        "limits.cap",
                        &["HillFraction(0.45)", "AltitudeKm(60000.0)"],
                    );
                    None
                }
            });
        if let Some(days) = self.optional_number(value, path, "longest_days") {
            limits.longest_days = days;
        }
        if let Some(node) = self.optional(value, "most_starts") {
            let number = self.number(node, "limits.most_starts");
            if number.fract() == 0.0 && (0.0..=1e6).contains(&number) {
                limits.most_starts = number as u32;
            } else {
                self.fault(
                    node.span.start,
                    "limits.most_starts",
                    format!("is {number}; allowed is a whole number from 1 to 8"),
                );
            }
        }
        limits.longest_burn_s = self.optional_number(value, path, "longest_burn_s");
        limits
    }

    fn vehicle(&mut self, value: &Node) -> Option<VehicleSpec> {
        let path = "vehicle";
        if !self.is_struct(value, path) {
            return None;
        }
        self.fields(
            value,
            path,
            &[
                "dry_mass_kg",
                "propellant_kg",
                "thrust_n",
                "isp_s",
                "steering",
            ],
        );
        let steering = self
            .optional(value, "steering")
            .map_or(defaults::STEERING, |steering| {
                [
                    Steering::AgainstVelocity,
                    Steering::FixedAttitude,
                    Steering::TurningAttitude,
                ][self.choice(
                    steering,
                    "vehicle.steering",
                    &["AgainstVelocity", "FixedAttitude", "TurningAttitude"],
                )]
            });
        Some(VehicleSpec {
            dry_mass_kg: self.required_number(value, path, "dry_mass_kg"),
            propellant_kg: self.required_number(value, path, "propellant_kg"),
            thrust_n: self.required_number(value, path, "thrust_n"),
            isp_s: self.required_number(value, path, "isp_s"),
            steering,
        })
    }

    fn policy(&mut self, value: &Node) -> PolicySpec {
        let path = "policy";
        let mut policy = defaults::POLICY;
        if !self.is_struct(value, path) {
            return policy;
        }
        self.fields(
            value,
            path,
            &["margin_percent", "per_start_m_s", "residual_percent"],
        );
        if let Some(margin) = self.optional_number(value, path, "margin_percent") {
            policy.margin_percent = margin;
        }
        if let Some(cost) = self.optional_number(value, path, "per_start_m_s") {
            policy.per_start_m_s = cost;
        }
        if let Some(residual) = self.optional_number(value, path, "residual_percent") {
            policy.residual_percent = residual;
        }
        policy
    }
}

fn join(path: &str, name: &str) -> String {
    if path.is_empty() {
        name.to_owned()
    } else {
        format!("{path}.{name}")
    }
}

/// Harmless values for what is missing or broken, so that the rest can still be looked at.
fn stand_in() -> Spec {
    Spec {
        title: String::new(),
        note: String::new(),
        body: BodySpec::Known("Moon".to_owned()),
        arrival: ArrivalSpec::Asymptote {
            v_inf_km_s: 1.0,
            declination_deg: None,
            right_ascension_deg: None,
        },
        target: TargetSpec {
            shape: ShapeSpec::Circular {
                altitude_km: 1000.0,
            },
            plane: PlaneSpec::Any,
        },
        braking: defaults::BRAKING,
        limits: defaults::LIMITS,
        vehicle: None,
        burns: defaults::BURNS,
        policy: defaults::POLICY,
    }
}
