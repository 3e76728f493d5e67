//! Body and arrival: where to, how fast, from where.

use super::reader::{Reader, join, optional};
use super::sections::harmless;
use crate::scenario::tree::{Kind, Node};
use crate::study::spec::{
    ArrivalSpec, BodySpec, CustomBody, CustomParent, Departure, Model, Sense, TransferApoapsis,
};

impl Reader {
    pub(super) fn body(&mut self, value: &Node) -> BodySpec {
        const KNOWN: &[&str] = &[
            "Known(\"Moon\")",
            "Custom(name: ..., gm_km3_s2: ..., radius_km: ...)",
        ];
        match (value.variant(), &value.kind) {
            (Some("Known"), Kind::Tuple { values, .. }) if values.len() == 1 => {
                let name = values.first().map(|name| self.text(name.plain(), "body"));
                BodySpec::Known(name.unwrap_or_default())
            }
            (Some("Custom"), Kind::Struct { .. }) => self.custom_body(value),
            _ => {
                self.no_variant(value, "body", KNOWN);
                harmless().body
            }
        }
    }

    fn custom_body(&mut self, value: &Node) -> BodySpec {
        let path = "body";
        self.fields(
            value,
            path,
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
        BodySpec::Custom(CustomBody {
            name: self.required_text(value, path, "name"),
            gm_km3_s2: self.required_number(value, path, "gm_km3_s2"),
            radius_km: self.required_number(value, path, "radius_km"),
            j2: self.optional_number(value, path, "j2").unwrap_or(0.0),
            lowest_alt_km: self
                .optional_number(value, path, "lowest_alt_km")
                .unwrap_or(0.0),
            hill_radius_km: self.optional_number(value, path, "hill_radius_km"),
            parent: optional(value, "parent").and_then(|parent| self.parent(parent)),
        })
    }

    fn parent(&mut self, value: &Node) -> Option<CustomParent> {
        let path = "body.parent";
        if !self.is_group(value, path) {
            return None;
        }
        self.fields(
            value,
            path,
            &[
                "name",
                "gm_km3_s2",
                "radius_km",
                "semi_major_axis_km",
                "eccentricity",
            ],
        );
        Some(CustomParent {
            name: self.required_text(value, path, "name"),
            gm_km3_s2: self.required_number(value, path, "gm_km3_s2"),
            radius_km: self.required_number(value, path, "radius_km"),
            semi_major_axis_km: self.required_number(value, path, "semi_major_axis_km"),
            eccentricity: self
                .optional_number(value, path, "eccentricity")
                .unwrap_or(0.0),
        })
    }

    pub(super) fn arrival(&mut self, value: &Node) -> ArrivalSpec {
        const KNOWN: &[&str] = &[
            "Asymptote(v_inf_km_s: ...)",
            "Energy(c3_km2_s2: ...)",
            "Transfer(from: ...)",
            "FromParentOrbit(periapsis_alt_km: ...)",
        ];
        let path = "arrival";
        let is_struct = matches!(value.kind, Kind::Struct { .. });
        match value.variant() {
            Some("Asymptote") if is_struct => {
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
            Some("Energy") if is_struct => {
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
            Some("Transfer") if is_struct => {
                self.fields(value, path, &["from", "parking_alt_km"]);
                ArrivalSpec::Transfer {
                    from: self.required_text(value, path, "from"),
                    parking_alt_km: self.optional_number(value, path, "parking_alt_km"),
                }
            }
            Some("FromParentOrbit") if is_struct => self.parent_orbit(value),
            Some("Dated") => {
                self.fault(
                    value.span.start,
                    path,
                    "dated arrivals are not available in this version; use Asymptote or Energy with the v-infinity of the date",
                );
                harmless().arrival
            }
            _ => {
                self.no_variant(value, path, KNOWN);
                harmless().arrival
            }
        }
    }

    fn parent_orbit(&mut self, value: &Node) -> ArrivalSpec {
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
        let model = [
            ("Textbook", Model::Textbook),
            ("BoundarySpeed", Model::BoundarySpeed),
            ("Patched", Model::Patched),
            ("ThreeBody", Model::ThreeBody),
        ];
        let sense = [
            ("Prograde", Sense::Prograde),
            ("Retrograde", Sense::Retrograde),
        ];
        let departure = [
            ("ParkingOrbit", Departure::ParkingOrbit),
            ("OnTransfer", Departure::OnTransfer),
        ];
        ArrivalSpec::FromParentOrbit {
            periapsis_alt_km: self.required_number(value, path, "periapsis_alt_km"),
            apoapsis: optional(value, "apoapsis").map_or(TransferApoapsis::AtBody, |apoapsis| {
                self.transfer_apoapsis(apoapsis)
            }),
            model: self
                .optional_choice(value, path, "model", &model)
                .unwrap_or(Model::ThreeBody),
            sense: self.optional_choice(value, path, "sense", &sense),
            departure: self
                .optional_choice(value, path, "departure", &departure)
                .unwrap_or(Departure::ParkingOrbit),
        }
    }

    fn transfer_apoapsis(&mut self, value: &Node) -> TransferApoapsis {
        let path = "arrival.apoapsis";
        match (value.variant(), &value.kind) {
            (Some("AtBody"), Kind::Word(_)) => TransferApoapsis::AtBody,
            (Some("RadiusKm"), _) => TransferApoapsis::RadiusKm(self.inner(value, path)),
            _ => {
                self.no_variant(value, path, &["AtBody", "RadiusKm(390000.0)"]);
                TransferApoapsis::AtBody
            }
        }
    }

    /// One of several bare words, which may be left out.
    pub(super) fn optional_choice<T: Copy>(
        &mut self,
        node: &Node,
        path: &str,
        name: &str,
        known: &[(&str, T)],
    ) -> Option<T> {
        optional(node, name).and_then(|value| self.choice(value, &join(path, name), known))
    }
}
