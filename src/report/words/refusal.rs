//! Why a way cannot be flown, in short clauses.

use super::{altitude, degrees, kg, newton, starts, time};
use crate::arrival::{NotFlyable, Reason};
use crate::study::Case;

/// One reason in a short clause: `brake altitude 40 km is under the floor 60 km`.
pub fn reason(case: &Case, reason: &Reason) -> String {
    let at = |radius: f64| altitude(case.altitude_km(radius));
    match *reason {
        Reason::TargetUnderFloor { periapsis, floor } => {
            format!(
                "target periapsis {} is under the floor {}",
                at(periapsis),
                at(floor)
            )
        }
        Reason::TargetOverCap { apoapsis, cap } => format!(
            "target apoapsis {} is over the cap {}",
            at(apoapsis),
            at(cap)
        ),
        Reason::BrakeUnderFloor { brake, floor } => format!(
            "brake altitude {} is under the floor {}",
            at(brake),
            at(floor)
        ),
        Reason::BrakeOverTarget { brake, periapsis } => {
            format!(
                "brake altitude {} is above the target periapsis {}",
                at(brake),
                at(periapsis)
            )
        }
        Reason::LoopOverCap { apoapsis, cap } => {
            format!("loop apoapsis {} is over the cap {}", at(apoapsis), at(cap))
        }
        Reason::LoopUnderTarget { apoapsis, target } => {
            format!(
                "loop apoapsis {} is under the target apoapsis {}",
                at(apoapsis),
                at(target)
            )
        }
        Reason::TooLong { takes, limit } => format!("takes {}, limit {}", time(takes), time(limit)),
        Reason::TooManyStarts { needs, limit } => format!("{}, limit {limit}", starts(needs)),
        Reason::BurnTooLong { takes, limit } => {
            format!("one burn of {}, limit {}", time(takes), time(limit))
        }
        Reason::PropellantShort { needs, aboard } => {
            format!(
                "propellant short by {} (needs {}, aboard {})",
                kg(needs - aboard),
                kg(needs),
                kg(aboard)
            )
        }
        Reason::OutOfReach {
            periapsis,
            farthest,
        } => {
            if farthest < case.body().radius_km {
                format!(
                    "the transfer reaches no passage on this side of {}",
                    crate::visible::ascii(&case.body().name)
                )
            } else {
                format!(
                    "the transfer does not reach a passage at {}; the farthest on this side is {}",
                    at(periapsis),
                    at(farthest)
                )
            }
        }
        Reason::NothingToDivide => {
            "burns take no time here, so dividing one saves nothing; set `burns: Finite`".to_owned()
        }
        Reason::BurnUnderFloor { lowest, floor } => format!(
            "sinks to {} during a burn, under the floor {}",
            at(lowest),
            at(floor)
        ),
        Reason::PropellantShortAnyway { needs, aboard } => format!(
            "propellant short by {} even if burns took no time (needs {}, aboard {})",
            kg(needs - aboard),
            kg(needs),
            kg(aboard)
        ),
        Reason::BurnTakesAll { burn } => {
            format!("burn {burn} would take nearly the whole mass as propellant")
        }
        Reason::BurnNeverCloses {
            burn,
            thrust,
            closes_at,
        } => {
            let more = closes_at.map_or_else(String::new, |thrust| {
                format!("; with {} there still is one", newton(thrust))
            });
            format!(
                "burn {burn}: with {} no ignition leaves the wanted orbit{more}",
                newton(thrust)
            )
        }
        Reason::AimOutOfReach { periapsis } => format!(
            "the long burn has to be aimed at a passage at {}, which the transfer does not reach",
            at(periapsis)
        ),
        Reason::NotHyperbolic => {
            "the arrival model gives no hyperbola at this periapsis".to_owned()
        }
        Reason::LineOfApsides { over } => format!(
            "its periapsis lies at least {} further from the equator than the inclination allows, so no turn about the line of apsides reaches it",
            degrees(over)
        ),
    }
}

/// All reasons of a way, in one line.
pub fn reasons(case: &Case, not: &NotFlyable) -> String {
    let all: Vec<String> = not.reasons.iter().map(|each| reason(case, each)).collect();
    all.join("; ")
}
