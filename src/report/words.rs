//! Results in words: numbers with sensible digits, the verdict as a sentence with its reason, refusals.
//!
//! Screen and brief say the same because both take their sentences from here. Plain 7-bit text.

mod lasting;
mod number;
mod refusal;
mod wrap;

pub use lasting::{engine, flown, flown_short};
use number::grouped;
pub use number::{
    altitude, b_plane, days, degrees, dv, kg, km, newton, number, speed, starts, time,
};
pub use refusal::{reason, reasons};
pub use wrap::wrap;

use crate::arrival::Way;
use crate::study::case::{Case, DAY_S};
use crate::study::landmarks::{Crossover, CrossoverKind};
use crate::study::verdict::{Cause, Shift, Standing, Verdict};
use crate::study::{Answer, landmarks};

fn capital(name: &str) -> String {
    let mut chars = name.chars();
    chars.next().map_or_else(String::new, |first| {
        first.to_uppercase().collect::<String>() + chars.as_str()
    })
}

/// The target in words: `a circle at 6 500 km`, `500 x 30 000 km`.
pub fn target(case: &Case) -> String {
    let orbit = case.setting().target;
    let (low, high) = (
        case.altitude_km(orbit.periapsis_km),
        case.altitude_km(orbit.apoapsis_km),
    );
    if orbit.periapsis_km == orbit.apoapsis_km {
        format!("a circle at {}", altitude(low))
    } else {
        format!("{} x {}", grouped(&format!("{low:.0}")), altitude(high))
    }
}

/// The verdict in one or two sentences: which way, at what price, the next best, where it turns.
pub fn verdict(case: &Case, answer: &Answer, verdict: &Verdict) -> String {
    let here = case.altitude_km(case.setting().target.periapsis_km);
    let at = altitude(here);
    let Some(best) = &verdict.best else {
        return format!(
            "No way can be flown at {at}. The table says why for each; a limit, the brake altitude or the target has to move."
        );
    };
    let price = price(best);
    let name = capital(best.way.name());
    let mut out = match &verdict.runner_up {
        None => format!("{name} is the only way that can be flown at {at}: {price}."),
        Some(next) => {
            let more = next.cost_km_s - best.cost_km_s;
            let all = answer.shown(case.setting()).all(|(_, plan)| plan.is_ok());
            let of = if all { "" } else { " of the flyable ways" };
            if more <= 1e-12 * best.cost_km_s {
                format!(
                    "{name} and {} cost the same at {at}: {price}; {} needs fewer starts.",
                    next.way.name(),
                    best.way.name()
                )
            } else {
                format!(
                    "{name} is cheapest{of} at {at}: {price}. {} would cost {} more.",
                    capital(next.way.name()),
                    dv(more)
                )
            }
        }
    };
    out.push(' ');
    out.push_str(&crossings(case, best, &answer.landmarks.crossovers));
    out
}

fn price(standing: &Standing) -> String {
    let fixed = standing.cost_km_s - standing.dv_km_s;
    let cost = if fixed.abs() < 5e-7 {
        dv(standing.dv_km_s)
    } else {
        format!(
            "{} ({} and {} for the extra starts)",
            dv(standing.cost_km_s),
            dv(standing.dv_km_s),
            dv(fixed)
        )
    };
    let mut parts = vec![cost];
    parts.extend(standing.propellant_kg.map(kg));
    parts.push(starts(standing.starts));
    if 0.005 * DAY_S <= standing.duration_s && 1 < standing.starts {
        parts.push(time(standing.duration_s));
    }
    parts.join(", ")
}

/// Where the best way stops being the best: `It wins up to 12 980 km; above, dip.`
fn crossings(case: &Case, best: &Standing, crossovers: &[Crossover]) -> String {
    let here = case.setting().target.periapsis_km;
    let below = crossovers
        .iter()
        .rev()
        .find(|crossover| crossover.radius_km <= here);
    let above = crossovers
        .iter()
        .find(|crossover| here < crossover.radius_km);
    let at = |crossover: &Crossover| altitude(case.altitude_km(crossover.radius_km));
    let limit = |crossover: &Crossover| {
        if crossover.kind == CrossoverKind::Limit {
            " (a limit binds there)"
        } else {
            ""
        }
    };
    match (below, above) {
        (None, None) => {
            let Some((low, high)) = landmarks::sensible_range(case.setting()) else {
                return String::new();
            };
            format!(
                "No other way wins anywhere from {} to {}.",
                altitude(case.altitude_km(low)),
                altitude(case.altitude_km(high))
            )
        }
        (None, Some(above)) if above.below == best.way => {
            format!(
                "{} pays above {}{}.",
                capital(above.above.name()),
                at(above),
                limit(above)
            )
        }
        (Some(below), None) if below.above == best.way => {
            format!(
                "{} wins below {}{}.",
                capital(below.below.name()),
                at(below),
                limit(below)
            )
        }
        (Some(below), Some(above))
            if below.above == best.way && above.below == best.way && below.below == above.above =>
        {
            format!(
                "{} wins below {}{} and above {}{}.",
                capital(below.below.name()),
                at(below),
                limit(below),
                at(above),
                limit(above)
            )
        }
        (Some(below), Some(above)) if below.above == best.way && above.below == best.way => {
            format!(
                "{} wins below {}{}, {} above {}{}.",
                capital(below.below.name()),
                at(below),
                limit(below),
                above.above.name(),
                at(above),
                limit(above)
            )
        }
        // At or beside a crossover the side can differ by rounding; name the place only.
        (Some(near), _) | (_, Some(near)) => {
            format!(
                "The cheapest way changes from {} to {} at {}.",
                near.below.name(),
                near.above.name(),
                at(near)
            )
        }
    }
}

/// Why: the three radii, and what pulls the answer away from the rule.
pub fn why(case: &Case, verdict: &Verdict) -> String {
    let Some(best) = &verdict.best else {
        return "Why: every way breaks a limit or cannot arrive there.".to_owned();
    };
    let Some(break_even) = verdict.radii.break_even_km else {
        return "Why: no hyperbola arrives at the target periapsis, so only ways that brake elsewhere are left.".to_owned();
    };
    let apoapsis = verdict.radii.target_apoapsis_km;
    let mut named = vec![
        ("break-even radius 2mu/v_inf^2", break_even),
        ("target apoapsis radius", apoapsis),
    ];
    if let Some(looped) = verdict.radii.loop_apoapsis_km {
        named.push(("loop apoapsis radius", looped));
    }
    named.sort_by(|a, b| b.1.total_cmp(&a.1));
    let rest: Vec<String> = named[1..]
        .iter()
        .map(|(name, radius)| format!("{name} {}", km(*radius)))
        .collect();
    let rule = format!(
        "Why: the {} ({}) is the largest, above the {}",
        named[0].0,
        km(named[0].1),
        rest.join(" and the ")
    );
    let meaning = match verdict.ideal {
        Way::Direct => "so one burn at the target is cheapest",
        Way::Dip => "so braking low and raising at the apoapsis is cheapest",
        Way::Loop => "so braking low into the long loop is cheapest",
        // The rule never names it: it is direct or dip with the braking divided.
        Way::Steps => "so braking in steps is cheapest",
    };
    if verdict.ideal == best.way {
        return format!("{rule}, {meaning}.");
    }
    let turning: Vec<&'static str> = verdict
        .shifts
        .iter()
        .filter(|shift| shift.best_without == Some(verdict.ideal))
        .map(|shift| cause_name(shift.cause))
        .collect();
    let because = if turning.is_empty() {
        let brake_over = matches!(verdict.ideal, Way::Dip | Way::Loop)
            && matches!(case.setting().brake, crate::arrival::Choice::Radius(brake) if case.setting().target.periapsis_km <= brake);
        if brake_over {
            "the brake altitude leaves no room below the target".to_owned()
        } else {
            "the conditions below together turn it".to_owned()
        }
    } else {
        format!("{} turns it", turning.join(" or "))
    };
    let divided = if best.way == Way::Steps {
        "; braking in steps loses less"
    } else {
        ""
    };
    format!(
        "{rule}; that alone would make {} cheapest, but {because}{divided}.",
        verdict.ideal.name()
    )
}

fn cause_name(cause: Cause) -> &'static str {
    match cause {
        Cause::PlaneChange => "the plane change",
        Cause::PerStart => "the cost per start",
        Cause::Floor => "the floor",
        Cause::BrakeHeld => "the brake altitude",
        Cause::Cap => "the cap",
        Cause::TimeLimit => "the time limit",
        Cause::StartLimit => "the limit on starts",
        Cause::SpeedVaries => "v_inf changing with the periapsis",
        Cause::BurnsLast => "the finite-burn loss",
    }
}

/// One sentence for each cause that moves cost or crossover by something worth saying, strongest first.
pub fn shifts(case: &Case, answer: &Answer, verdict: &Verdict) -> Vec<String> {
    let mut shifts: Vec<&Shift> = verdict.shifts.iter().collect();
    shifts.sort_by(|a, b| {
        let weight = |shift: &Shift| shift.cost_km_s.map_or(f64::INFINITY, f64::abs);
        weight(b).total_cmp(&weight(a))
    });
    shifts
        .into_iter()
        .filter_map(|shift| shift_sentence(case, answer, verdict, shift))
        .collect()
}

fn shift_sentence(
    case: &Case,
    answer: &Answer,
    verdict: &Verdict,
    shift: &Shift,
) -> Option<String> {
    let setting = case.setting();
    let limits = &setting.limits;
    let here = verdict.best?;
    let cost = shift.cost_km_s;
    let other_way = shift.best_without.filter(|way| *way != here.way);
    let saved = cost.filter(|cost| 5e-7 <= cost.abs());
    let moved = match (verdict.nearest, shift.crossover_without_km) {
        (Some(nearest), Some(without)) if 1e-6 < (without / nearest.radius_km - 1.0).abs() => {
            Some(format!(
                "the {}/{} crossover would lie at {} instead of {}",
                nearest.below.name(),
                nearest.above.name(),
                altitude(case.altitude_km(without)),
                altitude(case.altitude_km(nearest.radius_km))
            ))
        }
        (Some(nearest), None) => Some(format!(
            "there would be no {}/{} crossover",
            nearest.below.name(),
            nearest.above.name()
        )),
        _ => None,
    };
    let effect = match (other_way, saved) {
        (Some(way), Some(saved)) if 0.0 < saved => {
            Some(format!("{} would win and save {}", way.name(), dv(saved)))
        }
        (Some(way), _) => Some(format!("{} would win", way.name())),
        (None, Some(saved)) if 0.0 < saved => Some(format!("it would cost {} less", dv(saved))),
        (None, Some(saved)) => Some(format!("it would cost {} more", dv(-saved))),
        (None, None) => None,
    };
    let effects: Vec<String> = effect.into_iter().chain(moved).collect();
    if effects.is_empty() {
        return None;
    }
    let without = match shift.cause {
        Cause::PlaneChange => {
            let turn = answer.best_plan().map_or(0.0, |plan| plan.turn_rad);
            format!(
                "Without the plane change ({} for {})",
                degrees(turn),
                here.way.name()
            )
        }
        Cause::PerStart => format!(
            "Without the {} for every extra start",
            dv(setting.policy.per_start_km_s)
        ),
        Cause::Floor => format!(
            "With the floor at the surface instead of {}",
            altitude(case.altitude_km(limits.floor_radius_km))
        ),
        Cause::BrakeHeld => format!(
            "With the brake at the floor ({})",
            altitude(case.altitude_km(limits.floor_radius_km))
        ),
        Cause::Cap => format!(
            "With the cap twice as far out as {} radius",
            km(limits.cap_radius_km)
        ),
        Cause::TimeLimit => format!("Without the limit of {}", time(limits.longest_s)),
        Cause::StartLimit => format!("Without the limit of {}", starts(limits.most_starts)),
        Cause::SpeedVaries => {
            let v_inf = setting
                .approach
                .v_inf_sq(setting.target.periapsis_km)
                .map_or(0.0, f64::sqrt);
            format!("With v_inf {} for every periapsis", speed(v_inf))
        }
        Cause::BurnsLast => "If burns took no time".to_owned(),
    };
    Some(format!("{without} {}.", effects.join(", and ")))
}
