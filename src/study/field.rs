//! Every numeric field of a scenario: unit, allowed range, meaning, default. One table for validation, messages,
//! knobs and documents.

use std::fmt;

/// One numeric field.
#[derive(Clone, Copy, Debug)]
pub struct Field {
    /// Where it stands in the file, dots between levels; a value in a bare variant ends in the variant's name.
    pub path: &'static str,
    /// Unit as shown; empty for a pure number.
    pub unit: &'static str,
    /// Lowest value allowed.
    pub low: Bound,
    /// Highest value allowed.
    pub high: Bound,
    /// One line for documents.
    pub meaning: &'static str,
    /// Default as shown in documents; empty where the field must be given or may be absent.
    pub default: &'static str,
}

/// An end of a range.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Bound {
    /// The value itself is allowed.
    Including(f64),
    /// The value itself is not allowed.
    Excluding(f64),
}
use Bound::{Excluding, Including};

impl Bound {
    /// The number, whether or not it is allowed itself.
    pub fn value(self) -> f64 {
        match self {
            Including(value) | Excluding(value) => value,
        }
    }
}

impl Field {
    /// Whether a value is allowed. NaN and infinities never are.
    pub fn allows(&self, value: f64) -> bool {
        let above = match self.low {
            Including(low) => low <= value,
            Excluding(low) => low < value,
        };
        let below = match self.high {
            Including(high) => value <= high,
            Excluding(high) => value < high,
        };
        value.is_finite() && above && below
    }

    /// The range in words with the unit.
    pub fn range(&self) -> Range<'_> {
        Range(self)
    }
}

/// Shows a field's range: `above 0 and at most 1e12 km`.
pub struct Range<'a>(&'a Field);

impl fmt::Display for Range<'_> {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let field = self.0;
        match field.low {
            Including(low) => write!(f, "at least {}", Number(low))?,
            Excluding(low) => write!(f, "above {}", Number(low))?,
        }
        match field.high {
            Including(high) => write!(f, " and at most {}", Number(high))?,
            Excluding(high) => write!(f, " and below {}", Number(high))?,
        }
        if field.unit.is_empty() {
            Ok(())
        } else {
            write!(f, " {}", field.unit)
        }
    }
}

/// A number as short as it can be written exactly.
struct Number(f64);

impl fmt::Display for Number {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        let magnitude = self.0.abs();
        if magnitude != 0.0 && !(1e-4..1e6).contains(&magnitude) {
            write!(f, "{:e}", self.0)
        } else {
            write!(f, "{}", self.0)
        }
    }
}

/// Highest length that occurs, km: a thousand astronomical units, far outside any orbit of the catalogue.
const FAR_KM: f64 = 1.5e11;

const fn field(
    path: &'static str,
    unit: &'static str,
    low: Bound,
    high: Bound,
    meaning: &'static str,
    default: &'static str,
) -> Field {
    Field {
        path,
        unit,
        low,
        high,
        meaning,
        default,
    }
}

/// The table. Altitudes may be as low as the surface; whether they are sensible is for floor and warnings to say.
pub const FIELDS: &[Field] = &[
    field(
        "body.gm_km3_s2",
        "km3/s2",
        Excluding(0.0),
        Including(1e13),
        "GM of a body of one's own",
        "",
    ),
    field(
        "body.radius_km",
        "km",
        Excluding(0.0),
        Including(1e7),
        "radius that altitudes are counted from",
        "",
    ),
    field(
        "body.j2",
        "",
        Including(-0.5),
        Including(0.5),
        "second zonal coefficient, unnormalised",
        "0",
    ),
    field(
        "body.lowest_alt_km",
        "km",
        Including(0.0),
        Including(1e7),
        "lowest sensible altitude",
        "0",
    ),
    field(
        "body.hill_radius_km",
        "km",
        Excluding(0.0),
        Including(FAR_KM),
        "Hill radius, where it does not follow from the parent",
        "",
    ),
    field(
        "body.parent.gm_km3_s2",
        "km3/s2",
        Excluding(0.0),
        Including(1e13),
        "GM of the parent",
        "",
    ),
    field(
        "body.parent.radius_km",
        "km",
        Excluding(0.0),
        Including(1e7),
        "radius of the parent",
        "",
    ),
    field(
        "body.parent.semi_major_axis_km",
        "km",
        Excluding(0.0),
        Including(FAR_KM),
        "semi-major axis of the body's orbit",
        "",
    ),
    field(
        "body.parent.eccentricity",
        "",
        Including(0.0),
        Excluding(1.0),
        "eccentricity of the body's orbit",
        "0",
    ),
    field(
        "arrival.v_inf_km_s",
        "km/s",
        Excluding(0.0),
        Including(200.0),
        "hyperbolic excess speed",
        "",
    ),
    field(
        "arrival.c3_km2_s2",
        "km2/s2",
        Excluding(0.0),
        Including(40_000.0),
        "square of v-infinity",
        "",
    ),
    field(
        "arrival.declination_deg",
        "deg",
        Including(-90.0),
        Including(90.0),
        "declination of the incoming asymptote to the body's equator",
        "",
    ),
    field(
        "arrival.right_ascension_deg",
        "deg",
        Including(-360.0),
        Including(360.0),
        "right ascension of the incoming asymptote; for the record, no cost depends on it",
        "",
    ),
    field(
        "arrival.parking_alt_km",
        "km",
        Including(0.0),
        Including(1e8),
        "altitude of the circular parking orbit at the body of departure",
        "",
    ),
    field(
        "arrival.periapsis_alt_km",
        "km",
        Including(0.0),
        Including(1e9),
        "periapsis altitude of the transfer over the parent",
        "",
    ),
    field(
        "arrival.apoapsis.RadiusKm",
        "km",
        Excluding(0.0),
        Including(FAR_KM),
        "apoapsis radius of the transfer round the parent",
        "AtBody",
    ),
    field(
        "target.shape.altitude_km",
        "km",
        Including(0.0),
        Including(1e9),
        "altitude of the target circle",
        "",
    ),
    field(
        "target.shape.periapsis_alt_km",
        "km",
        Including(0.0),
        Including(1e9),
        "periapsis altitude of the target",
        "",
    ),
    field(
        "target.shape.apoapsis_alt_km",
        "km",
        Including(0.0),
        Including(1e9),
        "apoapsis altitude of the target",
        "",
    ),
    field(
        "target.shape.hours",
        "h",
        Excluding(0.0),
        Including(1e6),
        "period of the target",
        "",
    ),
    field(
        "target.inclination_deg",
        "deg",
        Including(0.0),
        Including(180.0),
        "inclination of the target to the body's equator",
        "",
    ),
    field(
        "target.plane_change_deg",
        "deg",
        Including(0.0),
        Including(180.0),
        "turn about the line of apsides, the same for every way",
        "",
    ),
    field(
        "braking.brake.AltitudeKm",
        "km",
        Including(0.0),
        Including(1e9),
        "periapsis altitude at which dip and loop brake",
        "Best",
    ),
    field(
        "braking.loop_apoapsis.AltitudeKm",
        "km",
        Including(0.0),
        Including(1e9),
        "apoapsis altitude of the loop",
        "Best",
    ),
    field(
        "limits.floor_alt_km",
        "km",
        Including(0.0),
        Including(1e9),
        "lowest periapsis altitude allowed",
        "the body's lowest sensible altitude",
    ),
    field(
        "limits.cap.HillFraction",
        "",
        Excluding(0.0),
        Including(1.0),
        "highest apoapsis radius as a fraction of the Hill radius",
        "0.45",
    ),
    field(
        "limits.cap.AltitudeKm",
        "km",
        Excluding(0.0),
        Including(1e9),
        "highest apoapsis altitude",
        "",
    ),
    field(
        "limits.longest_days",
        "d",
        Including(0.0),
        Including(36_525.0),
        "longest time from arrival to the target orbit",
        "60",
    ),
    field(
        "braking.steps.Passes",
        "",
        Including(2.0),
        Including(7.0),
        "number of periapsis passes that way steps divides its braking over",
        "Best",
    ),
    field(
        "limits.most_starts",
        "",
        Including(1.0),
        Including(8.0),
        "largest number of burns allowed",
        "4",
    ),
    field(
        "limits.longest_burn_s",
        "s",
        Excluding(0.0),
        Including(1e7),
        "longest single burn",
        "no limit",
    ),
    field(
        "vehicle.dry_mass_kg",
        "kg",
        Excluding(0.0),
        Including(1e7),
        "mass without usable propellant",
        "",
    ),
    field(
        "vehicle.propellant_kg",
        "kg",
        Including(0.0),
        Including(1e7),
        "propellant aboard before the first burn",
        "",
    ),
    field(
        "vehicle.thrust_n",
        "N",
        Excluding(0.0),
        Including(1e8),
        "thrust",
        "",
    ),
    field(
        "vehicle.isp_s",
        "s",
        Including(1.0),
        Including(100_000.0),
        "specific impulse",
        "",
    ),
    field(
        "policy.margin_percent",
        "%",
        Including(0.0),
        Including(1000.0),
        "margin on the velocity change",
        "5",
    ),
    field(
        "policy.per_start_m_s",
        "m/s",
        Including(0.0),
        Including(10_000.0),
        "fixed cost of every start after the first",
        "0",
    ),
    field(
        "policy.residual_percent",
        "%",
        Including(0.0),
        Including(100.0),
        "propellant that cannot be used, as a share of the propellant needed",
        "2",
    ),
];

/// The table's line for a path.
pub fn field_at(path: &str) -> Option<&'static Field> {
    FIELDS.iter().find(|field| field.path == path)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn paths_are_unique_and_ranges_read_well() {
        for field in FIELDS {
            assert_eq!(
                FIELDS
                    .iter()
                    .filter(|other| other.path == field.path)
                    .count(),
                1,
                "{}",
                field.path
            );
            assert!(field.low.value() < field.high.value());
        }
        let range = |path| field_at(path).map(|field| field.range().to_string());
        assert_eq!(
            range("arrival.v_inf_km_s").as_deref(),
            Some("above 0 and at most 200 km/s")
        );
        assert_eq!(
            range("body.parent.eccentricity").as_deref(),
            Some("at least 0 and below 1")
        );
        assert_eq!(
            range("body.gm_km3_s2").as_deref(),
            Some("above 0 and at most 1e13 km3/s2")
        );
    }

    #[test]
    fn nothing_that_is_not_a_number_is_allowed() {
        for field in FIELDS {
            for value in [f64::NAN, f64::INFINITY, f64::NEG_INFINITY] {
                assert!(!field.allows(value));
            }
        }
    }
}
