//! The table of knobs: every scenario value that can be turned live, by name, with how to read and set it.
//!
//! Screen, `--set`, `sweep`, `stoop knobs` and the documents all read this one table. Values are in the unit
//! of the table.

use super::answer::Answer;
use super::case::{Case, Fault};
use super::field::{Field, field_at};
use super::spec::{
    AltitudeChoice, ArrivalSpec, CapSpec, PassesChoice, PlaneSpec, ShapeSpec, Spec,
    TransferApoapsis, VehicleSpec,
};
use crate::arrival::Way;
use crate::physics::conic;

/// One knob.
#[derive(Clone, Copy, Debug)]
pub struct Knob {
    /// Which one.
    pub id: KnobId,
    /// Name on the command line (kebab case).
    pub name: &'static str,
    /// Name on screen.
    pub label: &'static str,
    /// Name of its column in CSV and JSON (unit included).
    pub column: &'static str,
    /// The field whose range it has.
    pub field: &'static str,
    /// One turn of the knob.
    pub step: Step,
    /// One line of help.
    pub meaning: &'static str,
}

/// What one press of an arrow does.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Step {
    /// About one percent of the value (of the radius for altitudes), rounded to a tidy number.
    Percent,
    /// A fixed amount in the knob's unit.
    Fixed(f64),
}

/// Every knob.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
#[allow(missing_docs)] // The table below says what each is.
pub enum KnobId {
    TargetAltitude,
    TargetApoapsis,
    BrakeAltitude,
    LoopApoapsis,
    Steps,
    VInf,
    Declination,
    Inclination,
    PlaneChange,
    Floor,
    Cap,
    LongestDays,
    MostStarts,
    LongestBurn,
    Thrust,
    Isp,
    DryMass,
    Propellant,
    PerStart,
    Margin,
    Residual,
    ParkingAltitude,
    TransferApoapsis,
}
use KnobId as K;

/// A value of a knob: a number, or the choice left to the program.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Value {
    /// In the knob's unit.
    Number(f64),
    /// The program chooses (`best`).
    Best,
}

/// Why a knob cannot be read or set.
#[derive(Clone, Debug, PartialEq)]
pub enum Refused {
    /// The scenario has no such value; the sentence says why and what would bring it.
    NotHere(String),
    /// The value is not allowed; the sentence says what is.
    NotAllowed(String),
}

impl std::fmt::Display for Refused {
    fn fmt(&self, f: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        match self {
            Refused::NotHere(why) | Refused::NotAllowed(why) => f.write_str(why),
        }
    }
}

const fn knob(
    id: KnobId,
    name: &'static str,
    label: &'static str,
    column: &'static str,
    field: &'static str,
    step: Step,
    meaning: &'static str,
) -> Knob {
    Knob {
        id,
        name,
        label,
        column,
        field,
        step,
        meaning,
    }
}

/// The table, in the order of the screen.
pub const KNOBS: &[Knob] = &[
    knob(
        K::TargetAltitude,
        "target-altitude",
        "target altitude",
        "target_altitude_km",
        "target.shape.altitude_km",
        Step::Percent,
        "periapsis altitude of the target, at unchanged eccentricity",
    ),
    knob(
        K::TargetApoapsis,
        "target-apoapsis",
        "target apoapsis",
        "target_apoapsis_km",
        "target.shape.apoapsis_alt_km",
        Step::Percent,
        "apoapsis altitude of the target, at unchanged periapsis",
    ),
    knob(
        K::BrakeAltitude,
        "brake-altitude",
        "brake altitude",
        "brake_altitude_km",
        "braking.brake.AltitudeKm",
        Step::Percent,
        "periapsis altitude at which dip and loop brake; `best` leaves it to the program",
    ),
    knob(
        K::LoopApoapsis,
        "loop-apoapsis",
        "loop apoapsis",
        "loop_apoapsis_km",
        "braking.loop_apoapsis.AltitudeKm",
        Step::Percent,
        "apoapsis altitude of the loop; `best` leaves it to the program",
    ),
    knob(
        K::Steps,
        "steps",
        "steps",
        "steps",
        "braking.steps.Passes",
        Step::Fixed(1.0),
        "periapsis passes that way steps divides its braking over; `best` leaves it to the program",
    ),
    knob(
        K::VInf,
        "v-inf",
        "v-infinity",
        "v_inf_km_s",
        "arrival.v_inf_km_s",
        Step::Fixed(0.01),
        "hyperbolic excess speed, where it is given and not computed",
    ),
    knob(
        K::Declination,
        "declination",
        "declination",
        "declination_deg",
        "arrival.declination_deg",
        Step::Fixed(1.0),
        "declination of the incoming asymptote to the body's equator",
    ),
    knob(
        K::Inclination,
        "inclination",
        "inclination",
        "inclination_deg",
        "target.inclination_deg",
        Step::Fixed(1.0),
        "inclination of the target to the body's equator",
    ),
    knob(
        K::PlaneChange,
        "plane-change",
        "plane change",
        "plane_change_deg",
        "target.plane_change_deg",
        Step::Fixed(1.0),
        "turn about the line of apsides, the same for every way",
    ),
    knob(
        K::Floor,
        "floor",
        "floor",
        "floor_km",
        "limits.floor_alt_km",
        Step::Percent,
        "lowest periapsis altitude allowed",
    ),
    knob(
        K::Cap,
        "cap",
        "cap",
        "cap_km",
        "limits.cap.AltitudeKm",
        Step::Percent,
        "highest apoapsis altitude allowed",
    ),
    knob(
        K::LongestDays,
        "longest-days",
        "longest",
        "longest_days",
        "limits.longest_days",
        Step::Fixed(1.0),
        "longest time from arrival to the target orbit",
    ),
    knob(
        K::MostStarts,
        "most-starts",
        "most starts",
        "most_starts",
        "limits.most_starts",
        Step::Fixed(1.0),
        "most burns",
    ),
    knob(
        K::LongestBurn,
        "longest-burn",
        "longest burn",
        "longest_burn_s",
        "limits.longest_burn_s",
        Step::Percent,
        "longest single burn allowed",
    ),
    knob(
        K::Thrust,
        "thrust",
        "thrust",
        "thrust_n",
        "vehicle.thrust_n",
        Step::Percent,
        "thrust of the engine",
    ),
    knob(
        K::Isp,
        "isp",
        "Isp",
        "isp_s",
        "vehicle.isp_s",
        Step::Fixed(1.0),
        "specific impulse of the engine",
    ),
    knob(
        K::DryMass,
        "dry-mass",
        "dry mass",
        "dry_mass_kg",
        "vehicle.dry_mass_kg",
        Step::Percent,
        "mass without usable propellant",
    ),
    knob(
        K::Propellant,
        "propellant",
        "propellant",
        "propellant_aboard_kg",
        "vehicle.propellant_kg",
        Step::Percent,
        "propellant aboard before the first burn",
    ),
    knob(
        K::PerStart,
        "per-start",
        "cost per start",
        "per_start_m_s",
        "policy.per_start_m_s",
        Step::Fixed(1.0),
        "fixed cost of every start after the first, for ranking",
    ),
    knob(
        K::Margin,
        "margin",
        "margin",
        "margin_percent",
        "policy.margin_percent",
        Step::Fixed(1.0),
        "margin on the velocity change",
    ),
    knob(
        K::Residual,
        "residual",
        "residuals",
        "residual_percent",
        "policy.residual_percent",
        Step::Fixed(0.5),
        "propellant that cannot be used",
    ),
    knob(
        K::ParkingAltitude,
        "parking-altitude",
        "parking altitude",
        "parking_altitude_km",
        "arrival.periapsis_alt_km",
        Step::Percent,
        "altitude of the parking orbit (periapsis of the transfer) at departure",
    ),
    knob(
        K::TransferApoapsis,
        "transfer-apoapsis",
        "transfer apoapsis",
        "transfer_apoapsis_km",
        "arrival.apoapsis.RadiusKm",
        Step::Percent,
        "apoapsis radius of the transfer round the parent",
    ),
];

/// A knob by its command-line name.
pub fn by_name(name: &str) -> Option<&'static Knob> {
    KNOBS.iter().find(|knob| knob.name == name)
}

/// A knob by its id.
pub fn by_id(id: KnobId) -> &'static Knob {
    // The table holds every id; a test sees to it.
    &KNOBS[id as usize]
}

impl Knob {
    /// The field with its range and unit.
    pub fn range_field(&self) -> &'static Field {
        const NOWHERE: Field = Field {
            path: "",
            unit: "",
            low: super::field::Bound::Including(f64::MIN),
            high: super::field::Bound::Including(f64::MAX),
            meaning: "",
            default: "",
        };
        // Every knob names a field of the table; a test sees to it.
        field_at(self.field).unwrap_or(&NOWHERE)
    }

    /// Unit as shown.
    pub fn unit(&self) -> &'static str {
        self.range_field().unit
    }

    /// Whether `best` is a value of this knob.
    pub fn takes_best(&self) -> bool {
        matches!(self.id, K::BrakeAltitude | K::LoopApoapsis | K::Steps)
    }

    /// Reads the knob.
    ///
    /// # Errors
    /// [`Refused::NotHere`] where the scenario has no such value.
    pub fn read(&self, case: &Case) -> Result<Value, Refused> {
        let spec = case.spec();
        let number = |value: f64| Ok(Value::Number(value));
        match self.id {
            K::TargetAltitude => number(spec.target.shape.periapsis_alt_km()),
            K::TargetApoapsis => number(match spec.target.shape {
                ShapeSpec::Circular { altitude_km } => altitude_km,
                ShapeSpec::Ellipse { apoapsis_alt_km, .. } => apoapsis_alt_km,
                ShapeSpec::Period { .. } => case.altitude_km(case.setting().target.apoapsis_km),
            }),
            K::BrakeAltitude => Ok(choice(spec.braking.brake)),
            K::LoopApoapsis => Ok(choice(spec.braking.loop_apoapsis)),
            K::Steps => Ok(match spec.braking.steps {
                PassesChoice::Passes(passes) => Value::Number(f64::from(passes)),
                PassesChoice::Best => Value::Best,
            }),
            K::VInf => match &spec.arrival {
                ArrivalSpec::Asymptote { v_inf_km_s, .. } => number(*v_inf_km_s),
                ArrivalSpec::Energy { c3_km2_s2, .. } => number(c3_km2_s2.sqrt()),
                _ => not_here("v-infinity follows from the transfer here; turn parking-altitude or transfer-apoapsis, or use an Asymptote arrival"),
            },
            K::Declination => match &spec.arrival {
                ArrivalSpec::Asymptote { declination_deg, .. } | ArrivalSpec::Energy { declination_deg, .. } => {
                    declination_deg.map_or_else(
                        || not_here("the declination of the asymptote is not stated; set it to hold the inclination against it"),
                        number,
                    )
                }
                ArrivalSpec::FromParentOrbit { .. } => {
                    not_here("a transfer in the body's orbital plane leaves every inclination free, so there is no declination to turn")
                }
                ArrivalSpec::Transfer { .. } => {
                    not_here("a coplanar transfer has no declination; use an Asymptote arrival to state one")
                }
            },
            K::Inclination => match spec.target.plane {
                PlaneSpec::InclinationDeg(value) => number(value),
                PlaneSpec::PlaneChangeDeg(_) => not_here("the plane is stated by plane-change; setting an inclination replaces it"),
                PlaneSpec::Any => not_here("any plane will do; set an inclination to ask for one"),
            },
            K::PlaneChange => match spec.target.plane {
                PlaneSpec::PlaneChangeDeg(value) => number(value),
                PlaneSpec::InclinationDeg(_) => not_here("the plane is stated by inclination; setting a plane change replaces it"),
                PlaneSpec::Any => not_here("no plane change is asked for; set one to see what it costs"),
            },
            K::Floor => number(spec.limits.floor_alt_km.unwrap_or(case.body().lowest_alt_km)),
            K::Cap => number(match spec.limits.cap {
                Some(CapSpec::AltitudeKm(altitude)) => altitude,
                _ => case.altitude_km(case.setting().limits.cap_radius_km),
            }),
            K::LongestDays => number(spec.limits.longest_days),
            K::MostStarts => number(f64::from(spec.limits.most_starts)),
            K::LongestBurn => spec
                .limits
                .longest_burn_s
                .map_or_else(|| not_here("no limit on single burns is set; set one to hold burns to it"), number),
            K::Thrust => vehicle(spec, |vehicle| vehicle.thrust_n),
            K::Isp => vehicle(spec, |vehicle| vehicle.isp_s),
            K::DryMass => vehicle(spec, |vehicle| vehicle.dry_mass_kg),
            K::Propellant => vehicle(spec, |vehicle| vehicle.propellant_kg),
            K::PerStart => number(spec.policy.per_start_m_s),
            K::Margin => number(spec.policy.margin_percent),
            K::Residual => number(spec.policy.residual_percent),
            K::ParkingAltitude => match &spec.arrival {
                ArrivalSpec::FromParentOrbit { periapsis_alt_km, .. } => number(*periapsis_alt_km),
                ArrivalSpec::Transfer { parking_alt_km, .. } => {
                    parking_alt_km.map_or_else(|| not_here("no parking orbit is stated; set its altitude to see the departure burn"), number)
                }
                _ => not_here("the arrival is given by its asymptote, so there is no parking orbit"),
            },
            K::TransferApoapsis => match &spec.arrival {
                ArrivalSpec::FromParentOrbit { apoapsis, .. } => number(match apoapsis {
                    TransferApoapsis::RadiusKm(radius) => *radius,
                    TransferApoapsis::AtBody => case.body().parent.as_ref().map_or(0.0, |parent| parent.semi_major_axis_km),
                }),
                _ => not_here("only an arrival from an orbit round the parent has a transfer apoapsis"),
            },
        }
    }

    /// The scenario with this knob set.
    ///
    /// # Errors
    /// [`Refused::NotHere`] where the scenario cannot have the value, [`Refused::NotAllowed`] where the value is
    /// out of range or contradicts another field. Nothing is clamped.
    pub fn set(&self, case: &Case, value: Value) -> Result<Case, Refused> {
        let number = match value {
            Value::Best if self.takes_best() => f64::NAN,
            Value::Best => {
                return Err(Refused::NotAllowed(format!(
                    "{} takes a number, not `best`",
                    self.name
                )));
            }
            Value::Number(number) => {
                let field = self.range_field();
                if !field.allows(number) {
                    return Err(Refused::NotAllowed(format!(
                        "{} {number} is not allowed: {}",
                        self.name,
                        field.range()
                    )));
                }
                number
            }
        };
        let mut spec = case.spec().clone();
        self.put(case, &mut spec, value, number)?;
        Case::new(spec).map_err(|faults| Refused::NotAllowed(sentence(self, &faults)))
    }

    fn put(&self, case: &Case, spec: &mut Spec, value: Value, number: f64) -> Result<(), Refused> {
        let altitude_choice = match value {
            Value::Best => AltitudeChoice::Best,
            Value::Number(number) => AltitudeChoice::AltitudeKm(number),
        };
        match self.id {
            K::TargetAltitude => spec.target.shape = reshaped(case, number),
            K::TargetApoapsis => spec.target.shape = stretched(case, number),
            K::BrakeAltitude => spec.braking.brake = altitude_choice,
            K::LoopApoapsis => spec.braking.loop_apoapsis = altitude_choice,
            K::Steps => {
                spec.braking.steps = match value {
                    Value::Best => PassesChoice::Best,
                    Value::Number(number) => PassesChoice::Passes(whole(self, number)?),
                };
            }
            K::VInf => match &mut spec.arrival {
                ArrivalSpec::Asymptote { v_inf_km_s, .. } => *v_inf_km_s = number,
                ArrivalSpec::Energy { c3_km2_s2, .. } => *c3_km2_s2 = number * number,
                _ => return self.read(case).map(|_| ()),
            },
            K::Declination => match &mut spec.arrival {
                ArrivalSpec::Asymptote {
                    declination_deg, ..
                }
                | ArrivalSpec::Energy {
                    declination_deg, ..
                } => {
                    *declination_deg = Some(number);
                }
                _ => return self.read(case).map(|_| ()),
            },
            K::Inclination => {
                spec.target.plane = PlaneSpec::InclinationDeg(number);
                // A stated sense would contradict the new inclination on the other side of 90°; it is implied now.
                if let ArrivalSpec::FromParentOrbit { sense, .. } = &mut spec.arrival {
                    *sense = None;
                }
            }
            K::PlaneChange => spec.target.plane = PlaneSpec::PlaneChangeDeg(number),
            K::Floor => spec.limits.floor_alt_km = Some(number),
            K::Cap => spec.limits.cap = Some(CapSpec::AltitudeKm(number)),
            K::LongestDays => spec.limits.longest_days = number,
            K::MostStarts => {
                spec.limits.most_starts = whole(self, number)?;
            }
            K::LongestBurn => spec.limits.longest_burn_s = Some(number),
            K::Thrust => vehicle_mut(spec, self)?.thrust_n = number,
            K::Isp => vehicle_mut(spec, self)?.isp_s = number,
            K::DryMass => vehicle_mut(spec, self)?.dry_mass_kg = number,
            K::Propellant => vehicle_mut(spec, self)?.propellant_kg = number,
            K::PerStart => spec.policy.per_start_m_s = number,
            K::Margin => spec.policy.margin_percent = number,
            K::Residual => spec.policy.residual_percent = number,
            K::ParkingAltitude => match &mut spec.arrival {
                ArrivalSpec::FromParentOrbit {
                    periapsis_alt_km, ..
                } => *periapsis_alt_km = number,
                ArrivalSpec::Transfer { parking_alt_km, .. } => *parking_alt_km = Some(number),
                _ => return self.read(case).map(|_| ()),
            },
            K::TransferApoapsis => match &mut spec.arrival {
                ArrivalSpec::FromParentOrbit { apoapsis, .. } => {
                    *apoapsis = TransferApoapsis::RadiusKm(number)
                }
                _ => return self.read(case).map(|_| ()),
            },
        }
        Ok(())
    }

    /// The value one turn away: `turns` steps up (negative: down), each `coarseness` times the plain step.
    ///
    /// Percent steps follow the radius for altitudes and the value for the rest, rounded to one significant digit,
    /// and land on multiples of themselves, so that turning there and back returns to a tidy number. Held inside the
    /// field's range. A choice left to the program starts from `resolved` where it is known.
    pub fn turned(
        &self,
        case: &Case,
        turns: f64,
        coarseness: f64,
        resolved: Option<f64>,
    ) -> Result<Value, Refused> {
        let now = match self.read(case)? {
            Value::Number(number) => number,
            Value::Best => match resolved {
                Some(number) => number,
                None => return not_here("no value to start from; type one"),
            },
        };
        let plain = match self.step {
            Step::Fixed(step) => step,
            Step::Percent => {
                let base = if self.is_altitude() {
                    now + case.body().radius_km
                } else {
                    now
                };
                one_digit(0.01 * base.abs().max(1e-3))
            }
        };
        let step = if matches!(self.id, K::MostStarts | K::Steps) {
            1.0
        } else {
            plain * coarseness
        };
        let nearest = (now / step).round() * step;
        // From a value between two multiples the first turn goes to the next multiple in that direction.
        let off = now - nearest;
        let raw = if off.abs() <= 1e-9 * step {
            nearest + turns * step
        } else if 0.0 < turns {
            ((now / step).floor() + turns) * step
        } else {
            ((now / step).ceil() + turns) * step
        };
        let tidy = round_to(raw, step);
        let field = self.range_field();
        if field.allows(tidy) {
            return Ok(Value::Number(tidy));
        }
        let bound = if 0.0 < turns { field.high } else { field.low };
        match bound {
            super::field::Bound::Including(end) if end != now => Ok(Value::Number(end)),
            _ => Err(Refused::NotAllowed(format!(
                "{} is at the end of its range: {}",
                self.name,
                field.range()
            ))),
        }
    }

    /// Whether the scenario has this value or can be given it by typing one.
    pub fn offered(&self, case: &Case) -> bool {
        // Dividing burns that take no time means nothing.
        if self.id == K::Steps {
            return case.setting().lasting().is_some();
        }
        if self.read(case).is_ok() {
            return true;
        }
        match self.id {
            K::Inclination | K::PlaneChange | K::LongestBurn => true,
            K::Declination => {
                matches!(
                    case.spec().arrival,
                    ArrivalSpec::Asymptote { .. } | ArrivalSpec::Energy { .. }
                )
            }
            K::ParkingAltitude => matches!(case.spec().arrival, ArrivalSpec::Transfer { .. }),
            _ => false,
        }
    }

    /// Whether the knob is an altitude over the body.
    pub fn is_altitude(&self) -> bool {
        matches!(
            self.id,
            K::TargetAltitude
                | K::TargetApoapsis
                | K::BrakeAltitude
                | K::LoopApoapsis
                | K::Floor
                | K::Cap
        )
    }

    /// The value that `best` stands for in an answer to this case, in the knob's unit, where a flyable way shows it.
    pub fn resolved(&self, case: &Case, answer: &Answer) -> Option<f64> {
        let plan = |way: Way| answer.plan(way);
        match self.id {
            K::BrakeAltitude => plan(Way::Dip)
                .or_else(|| plan(Way::Loop))
                .map(|plan| case.altitude_km(plan.brake_radius_km)),
            K::LoopApoapsis => plan(Way::Loop).and_then(|plan| {
                plan.burns
                    .first()
                    .map(|burn| case.altitude_km(burn.orbit_after.apoapsis_km))
            }),
            K::Steps => plan(Way::Steps).map(|plan| plan.passes() as f64),
            _ => None,
        }
    }
}

fn choice(choice: AltitudeChoice) -> Value {
    match choice {
        AltitudeChoice::AltitudeKm(altitude) => Value::Number(altitude),
        AltitudeChoice::Best => Value::Best,
    }
}

/// A whole number; its field's range has been checked.
fn whole(knob: &Knob, number: f64) -> Result<u32, Refused> {
    if number.fract() == 0.0 {
        Ok(number as u32)
    } else {
        Err(Refused::NotAllowed(format!(
            "{} {number} is not a whole number",
            knob.name
        )))
    }
}

fn not_here<T>(why: &str) -> Result<T, Refused> {
    Err(Refused::NotHere(why.to_owned()))
}

const NO_VEHICLE: &str =
    "the scenario has no vehicle; add one to the file for propellant and burn times";

fn vehicle(spec: &Spec, get: impl Fn(&VehicleSpec) -> f64) -> Result<Value, Refused> {
    spec.vehicle.as_ref().map_or_else(
        || not_here(NO_VEHICLE),
        |vehicle| Ok(Value::Number(get(vehicle))),
    )
}

fn vehicle_mut<'a>(spec: &'a mut Spec, _: &Knob) -> Result<&'a mut VehicleSpec, Refused> {
    spec.vehicle
        .as_mut()
        .ok_or_else(|| Refused::NotHere(NO_VEHICLE.to_owned()))
}

/// The target with another periapsis altitude and the same eccentricity.
fn reshaped(case: &Case, periapsis_alt_km: f64) -> ShapeSpec {
    let radius = case.body().radius_km;
    let target = case.setting().target;
    let ratio = (radius + periapsis_alt_km) / target.periapsis_km;
    match case.spec().target.shape {
        ShapeSpec::Circular { .. } => ShapeSpec::Circular {
            altitude_km: periapsis_alt_km,
        },
        ShapeSpec::Ellipse { .. } => ShapeSpec::Ellipse {
            periapsis_alt_km,
            apoapsis_alt_km: target.apoapsis_km * ratio - radius,
        },
        ShapeSpec::Period { hours, .. } => {
            // Kepler's third law: the period goes with the 3/2 power of the size.
            ShapeSpec::Period {
                periapsis_alt_km,
                hours: hours * ratio * ratio.sqrt(),
            }
        }
    }
}

/// The target with another apoapsis altitude and the same periapsis.
fn stretched(case: &Case, apoapsis_alt_km: f64) -> ShapeSpec {
    let radius = case.body().radius_km;
    let target = case.setting().target;
    match case.spec().target.shape {
        ShapeSpec::Circular {
            altitude_km: periapsis_alt_km,
        }
        | ShapeSpec::Ellipse {
            periapsis_alt_km, ..
        } => ShapeSpec::Ellipse {
            periapsis_alt_km,
            apoapsis_alt_km,
        },
        ShapeSpec::Period {
            periapsis_alt_km, ..
        } => {
            let seconds = conic::period_s(
                case.body().gm_km3_s2,
                target.periapsis_km,
                radius + apoapsis_alt_km,
            );
            ShapeSpec::Period {
                periapsis_alt_km,
                hours: seconds / 3600.0,
            }
        }
    }
}

fn sentence(knob: &Knob, faults: &[Fault]) -> String {
    let parts: Vec<String> = faults
        .iter()
        .map(|fault| format!("{} {}", fault.path, fault.message))
        .collect();
    format!("{}: {}", knob.name, parts.join("; "))
}

/// Rounds to one significant digit of 1, 2 or 5: the steps a hand likes.
fn one_digit(value: f64) -> f64 {
    let power = 10f64.powi(value.log10().floor() as i32);
    let digit = value / power;
    power
        * if digit < 1.5 {
            1.0
        } else if digit < 3.5 {
            2.0
        } else if digit < 7.5 {
            5.0
        } else {
            10.0
        }
}

/// Removes the binary dust of a multiple of `step` (6500.000000000001 → 6500).
fn round_to(value: f64, step: f64) -> f64 {
    let digits = (-(step.log10().floor()) + 1.0).clamp(0.0, 12.0);
    let scale = 10f64.powi(digits as i32);
    let rounded = (value * scale).round() / scale;
    if rounded.is_finite() { rounded } else { value }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_table_is_in_order_and_complete() {
        for (k, knob) in KNOBS.iter().enumerate() {
            assert_eq!(knob.id as usize, k, "{}", knob.name);
            assert!(field_at(knob.field).is_some(), "{}", knob.name);
            let same = |other: &&Knob| {
                other.name == knob.name || other.column == knob.column || other.label == knob.label
            };
            assert_eq!(KNOBS.iter().filter(same).count(), 1, "{}", knob.name);
            assert!(
                knob.name
                    .bytes()
                    .all(|b| b.is_ascii_lowercase() || b == b'-')
            );
        }
    }

    #[test]
    fn tidy_steps() {
        assert_eq!(one_digit(82.4), 100.0);
        assert_eq!(one_digit(0.0131), 0.01);
        assert_eq!(round_to(6500.000_000_000_001, 50.0), 6500.0);
        assert_eq!(round_to(0.830_000_000_000_000_1, 0.01), 0.83);
    }
}
