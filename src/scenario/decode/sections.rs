//! The scenario and its sections from `target` on.

use super::reader::{Reader, optional};
use crate::scenario::tree::{Kind, Node};
use crate::study::field::field_at;
use crate::study::spec::{
    AltitudeChoice, ArrivalSpec, BodySpec, BrakingSpec, Burns, CapSpec, LimitsSpec, PassesChoice,
    PlaneSpec, PolicySpec, ShapeSpec, Spec, Steering, TargetSpec, VehicleSpec, defaults,
};

/// Values without a fault, for what is missing or broken, so that the rest can still be looked at.
pub(super) fn harmless() -> Spec {
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
            shape: ShapeSpec::Circular { altitude_km: 1.0 },
            plane: PlaneSpec::Any,
        },
        braking: defaults::BRAKING,
        limits: LimitsSpec {
            floor_alt_km: Some(0.0),
            cap: Some(CapSpec::AltitudeKm(1e9)),
            ..defaults::LIMITS
        },
        vehicle: None,
        burns: defaults::BURNS,
        policy: defaults::POLICY,
    }
}

impl Reader {
    /// The whole scenario; stand-ins where something is broken.
    pub(super) fn scenario(&mut self, root: &Node) -> Spec {
        const FIELDS: &[&str] = &[
            "format", "title", "note", "body", "arrival", "target", "braking", "limits", "vehicle",
            "burns", "policy",
        ];
        let mut spec = Spec {
            limits: defaults::LIMITS,
            ..harmless()
        };
        if !self.is_group(root, "") {
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
        if let Some(value) = optional(root, "title") {
            spec.title = self.text(value, "title");
        }
        if let Some(value) = optional(root, "note") {
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
        if let Some(value) = optional(root, "braking") {
            spec.braking = self.braking(value);
        }
        if let Some(value) = optional(root, "limits") {
            spec.limits = self.limits(value);
        }
        if let Some(value) = optional(root, "vehicle") {
            spec.vehicle = self.vehicle(value);
        }
        let burns = [("Impulsive", Burns::Impulsive), ("Finite", Burns::Finite)];
        if let Some(choice) = self.optional_choice(root, "", "burns", &burns) {
            spec.burns = choice;
        }
        if let Some(value) = optional(root, "policy") {
            spec.policy = self.policy(value);
        }
        spec
    }

    fn target(&mut self, value: &Node) -> TargetSpec {
        let path = "target";
        let mut target = harmless().target;
        if !self.is_group(value, path) {
            return target;
        }
        self.fields(
            value,
            path,
            &["shape", "inclination_deg", "plane_change_deg"],
        );
        if let Some(shape) = self.required(value, path, "shape") {
            target.shape = self.shape(shape);
        }
        let inclination = self.optional_number(value, path, "inclination_deg");
        let change = self.optional_number(value, path, "plane_change_deg");
        target.plane = match (inclination, change) {
            (Some(_), Some(_)) => {
                let second = ["target.inclination_deg", "target.plane_change_deg"]
                    .into_iter()
                    .filter_map(|full| {
                        let field = value.field(full.rsplit('.').next()?)?;
                        Some((field.name_span.start, full))
                    })
                    .max();
                let (offset, full) = second.unwrap_or((value.span.start, path));
                self.fault(
                    offset,
                    full,
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
        const KNOWN: &[&str] = &[
            "Circular(altitude_km: ...)",
            "Ellipse(periapsis_alt_km: ..., apoapsis_alt_km: ...)",
            "Period(periapsis_alt_km: ..., hours: ...)",
        ];
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
                self.no_variant(value, path, KNOWN);
                harmless().target.shape
            }
        }
    }

    fn braking(&mut self, value: &Node) -> BrakingSpec {
        let mut braking = defaults::BRAKING;
        if !self.is_group(value, "braking") {
            return braking;
        }
        self.fields(value, "braking", &["brake", "loop_apoapsis", "steps"]);
        if let Some(brake) = optional(value, "brake") {
            braking.brake = self.altitude_choice(brake, "braking.brake");
        }
        if let Some(apoapsis) = optional(value, "loop_apoapsis") {
            braking.loop_apoapsis = self.altitude_choice(apoapsis, "braking.loop_apoapsis");
        }
        if let Some(steps) = optional(value, "steps") {
            braking.steps = self.passes_choice(steps);
        }
        braking
    }

    fn altitude_choice(&mut self, value: &Node, path: &str) -> AltitudeChoice {
        match (value.variant(), &value.kind) {
            (Some("Best"), Kind::Word(_)) => AltitudeChoice::Best,
            (Some("AltitudeKm"), _) => AltitudeChoice::AltitudeKm(self.inner(value, path)),
            _ => {
                self.no_variant(value, path, &["Best", "AltitudeKm(100.0)"]);
                AltitudeChoice::Best
            }
        }
    }

    fn passes_choice(&mut self, value: &Node) -> PassesChoice {
        let path = "braking.steps";
        match (value.variant(), &value.kind) {
            (Some("Best"), Kind::Word(_)) => PassesChoice::Best,
            (Some("Passes"), _) => {
                let number = self.inner(value, path);
                let path = "braking.steps.Passes";
                self.whole(value, path, number)
                    .map_or(PassesChoice::Best, PassesChoice::Passes)
            }
            _ => {
                self.no_variant(value, path, &["Best", "Passes(3)"]);
                PassesChoice::Best
            }
        }
    }

    fn limits(&mut self, value: &Node) -> LimitsSpec {
        let path = "limits";
        let mut limits = defaults::LIMITS;
        if !self.is_group(value, path) {
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
        limits.cap = optional(value, "cap").and_then(|cap| self.cap(cap));
        if let Some(days) = self.optional_number(value, path, "longest_days") {
            limits.longest_days = days;
        }
        if let Some(starts) = optional(value, "most_starts") {
            limits.most_starts = self.starts(starts);
        }
        limits.longest_burn_s = self.optional_number(value, path, "longest_burn_s");
        limits
    }

    fn cap(&mut self, value: &Node) -> Option<CapSpec> {
        let path = "limits.cap";
        match value.variant() {
            Some("HillFraction") => Some(CapSpec::HillFraction(self.inner(value, path))),
            Some("AltitudeKm") => Some(CapSpec::AltitudeKm(self.inner(value, path))),
            _ => {
                self.no_variant(value, path, &["HillFraction(0.45)", "AltitudeKm(60000.0)"]);
                None
            }
        }
    }

    /// A whole number of starts.
    fn starts(&mut self, value: &Node) -> u32 {
        let path = "limits.most_starts";
        let number = self.number(value, path);
        self.whole(value, path, number)
            .unwrap_or(defaults::LIMITS.most_starts)
    }

    fn whole(&mut self, value: &Node, path: &str, number: f64) -> Option<u32> {
        let whole = number.fract() == 0.0 && (0.0..=f64::from(u32::MAX)).contains(&number);
        if whole {
            return Some(number as u32);
        }
        let range = field_at(path).map_or_else(String::new, |field| field.range().to_string());
        self.fault(
            value.span.start,
            path,
            format!("is {number:?}; allowed is a whole number, {range}"),
        );
        None
    }

    fn vehicle(&mut self, value: &Node) -> Option<VehicleSpec> {
        let path = "vehicle";
        if !self.is_group(value, path) {
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
        let steering = [
            ("AgainstVelocity", Steering::AgainstVelocity),
            ("FixedAttitude", Steering::FixedAttitude),
            ("TurningAttitude", Steering::TurningAttitude),
        ];
        Some(VehicleSpec {
            dry_mass_kg: self.required_number(value, path, "dry_mass_kg"),
            propellant_kg: self.required_number(value, path, "propellant_kg"),
            thrust_n: self.required_number(value, path, "thrust_n"),
            isp_s: self.required_number(value, path, "isp_s"),
            steering: self
                .optional_choice(value, path, "steering", &steering)
                .unwrap_or(defaults::STEERING),
        })
    }

    fn policy(&mut self, value: &Node) -> PolicySpec {
        let path = "policy";
        let mut policy = defaults::POLICY;
        if !self.is_group(value, path) {
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
