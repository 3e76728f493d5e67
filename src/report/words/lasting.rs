//! Burns that take time, in words: how each is flown, and what a review asks about the engine.

use super::{altitude, capital, dv, kg, number, starts, time};
use crate::arrival::{Before, Burn, Plan};
use crate::physics::conic::Orbit;
use crate::physics::held_burn::{Left, Missed};
use crate::study::Case;
use crate::study::engine::{Divided, Questions};

/// How an integrated burn is flown, `None` where it has not been integrated.
pub fn flown(case: &Case, k: usize, burn: &Burn) -> Option<String> {
    let flown = burn.flown.as_ref()?;
    let at = |radius: f64| altitude(case.altitude_km(radius));
    let (controls, track) = (&flown.controls, &flown.track);
    let apsis = match flown.before {
        Before::Hyperbola { .. } | Before::AtPeriapsis(_) => "periapsis",
        Before::AtApoapsis(_) => "apoapsis",
    };
    let from = match flown.before {
        Before::Hyperbola { periapsis_km, .. } => format!("aimed at {}", at(periapsis_km)),
        Before::AtPeriapsis(orbit) | Before::AtApoapsis(orbit) => {
            format!("from {}", shape(case, &orbit))
        }
    };
    let when = if controls.lead_s < 0.0 {
        format!("{} after", time(-controls.lead_s))
    } else {
        format!("{} before", time(controls.lead_s))
    };
    let mut parts = vec![
        format!(
            "burn {} at {}: {} (impulsive {}, loss {})",
            k + 1,
            at(burn.at_radius_km),
            dv(burn.dv_km_s),
            dv(burn.impulsive_dv_km_s),
            dv(burn.dv_km_s - burn.impulsive_dv_km_s)
        ),
        from,
        format!(
            "ignition {when} {apsis} at {}",
            at(track.ignition_radius_km)
        ),
        format!(
            "{:.0} s over {:.0} deg of arc",
            controls.duration_s,
            track.arc_rad.to_degrees()
        ),
    ];
    if burn.turn_rad != 0.0 {
        parts.push(format!(
            "turn {} at a yaw of {}",
            super::degrees(burn.turn_rad),
            super::degrees(controls.yaw_rad.abs())
        ));
    }
    parts.extend(burn.propellant_kg.map(kg));
    parts.push(format!("lowest {}", at(track.lowest_radius_km)));
    Some(format!(
        "{}; leaves {}",
        parts.join(", "),
        shape(case, &burn.orbit_after)
    ))
}

/// The same without what a screen says beside it: aim, ignition, arc, loss, lowest.
pub fn flown_short(case: &Case, burn: &Burn) -> Option<String> {
    let flown = burn.flown.as_ref()?;
    let at = |radius: f64| altitude(case.altitude_km(radius));
    let aimed = match flown.before {
        Before::Hyperbola { periapsis_km, .. } => format!("aimed at {}, ", at(periapsis_km)),
        Before::AtPeriapsis(_) | Before::AtApoapsis(_) => String::new(),
    };
    Some(format!(
        "loss {}, {aimed}ignition {:.0} s before the apsis, {:.0} deg of arc, lowest {}",
        dv(burn.dv_km_s - burn.impulsive_dv_km_s),
        flown.controls.lead_s,
        flown.track.arc_rad.to_degrees(),
        at(flown.track.lowest_radius_km)
    ))
}

/// What a review asks about the engine, for a plan; empty where burns take no time.
pub fn engine(
    case: &Case,
    plan: &Plan,
    questions: Option<&Questions>,
    divisions: &[Divided],
) -> Vec<String> {
    if case.setting().lasting().is_none() {
        return Vec::new();
    }
    let mut out = vec![burning(plan)];
    out.extend(captured(plan));
    if let Some(questions) = questions {
        out.extend(early(case, questions));
        out.extend(late(case, questions));
        out.push(match &questions.weak {
            Some(missed) => format!(
                "Thrust 2 % low: {}; {}.",
                longer(missed.extra_s),
                missed_text(case, missed)
            ),
            None => "Thrust 2 % low: the planned orbit energy is not reached.".to_owned(),
        });
    }
    out.extend(saved(divisions));
    out
}

fn burning(plan: &Plan) -> String {
    let longest = plan.consumption.map_or(0.0, |used| used.longest_burn_s);
    let total: f64 = plan.burns.iter().filter_map(|burn| burn.duration_s).sum();
    format!(
        "{}: longest burn {} ({longest:.0} s), {}, {} of burning in all; finite-burn loss {}.",
        capital(plan.way.name()),
        time(longest),
        starts(plan.starts()),
        time(total),
        dv(plan.loss_km_s())
    )
}

fn captured(plan: &Plan) -> Option<String> {
    let share = plan.captured_share?;
    let seconds = plan.captured_after_s?;
    Some(format!(
        "Captured {seconds:.0} s after ignition of the first burn, when {:.1} % of its delta-v is spent.",
        100.0 * share
    ))
}

fn early(case: &Case, questions: &Questions) -> Option<String> {
    let stated = [0.5, 0.9];
    let parts: Vec<String> = stated
        .iter()
        .filter_map(|wanted| {
            questions
                .stops
                .iter()
                .min_by(|a, b| (a.0 - wanted).abs().total_cmp(&(b.0 - wanted).abs()))
        })
        .map(|(share, left)| format!("after {:.0} %: {}", 100.0 * share, left_text(case, left)))
        .collect();
    (!parts.is_empty()).then(|| {
        format!(
            "If the first burn stops early, {}; the curve below has every moment.",
            parts.join("; ")
        )
    })
}

fn left_text(case: &Case, left: &Left) -> String {
    match left {
        Left::Orbit(orbit) => format!("captured into {}", shape(case, orbit)),
        Left::Flyby { v_inf_km_s, .. } => {
            format!("a flyby with v_inf {} km/s", number(*v_inf_km_s))
        }
    }
}

fn late(case: &Case, questions: &Questions) -> Option<String> {
    let parts: Vec<String> = questions
        .late
        .iter()
        .map(|(seconds, missed)| match missed {
            Some(missed) => format!("{seconds:.0} s late: {}", missed_text(case, missed)),
            None => format!("{seconds:.0} s late: the planned orbit energy is not reached"),
        })
        .collect();
    let rate = questions
        .cost_per_second_km_s()
        .map_or_else(String::new, |rate| {
            if rate < 1e-6 {
                ", under 0.001 m/s for every second".to_owned()
            } else {
                format!(", at most {:.3} m/s for every second", 1e3 * rate)
            }
        });
    (!parts.is_empty()).then(|| format!("Ignition {}{rate}.", parts.join("; ")))
}

fn missed_text(case: &Case, missed: &Missed) -> String {
    let cost = missed.cost_km_s();
    if cost < 1e-5 {
        return "less than 0.01 m/s".to_owned();
    }
    format!(
        "{} in all, {} of it to put {} right",
        dv(cost),
        dv(missed.repair_dv_km_s.min(cost)),
        shape(case, &missed.orbit)
    )
}

/// `a circle at 6500 km`, `100 km x 6496 km`.
fn shape(case: &Case, orbit: &Orbit) -> String {
    let at = |radius: f64| altitude(case.altitude_km(radius));
    // A held circle is one to ten digits.
    if orbit.apoapsis_km <= orbit.periapsis_km * (1.0 + 1e-9) {
        format!("a circle at {}", at(orbit.periapsis_km))
    } else {
        format!("{} x {}", at(orbit.periapsis_km), at(orbit.apoapsis_km))
    }
}

fn longer(seconds: f64) -> String {
    if seconds < 0.0 {
        format!("{:.0} s shorter", -seconds)
    } else {
        format!("{seconds:.0} s longer")
    }
}

fn saved(divisions: &[Divided]) -> Option<String> {
    if divisions.len() < 2 {
        return None;
    }
    let parts: Vec<String> = divisions
        .windows(2)
        .map(|pair| {
            let gain = pair[0].cost_km_s - pair[1].cost_km_s;
            let effect = if gain < 0.0 {
                format!("costs {} more", dv(-gain))
            } else {
                format!("saves {}", dv(gain))
            };
            format!(
                "{} passes ({}, {}) {effect}",
                pair[1].passes,
                starts(pair[1].starts),
                time(pair[1].duration_s)
            )
        })
        .collect();
    Some(format!(
        "Braking in steps, each against the one before: {}.",
        parts.join("; ")
    ))
}
