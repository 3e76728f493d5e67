//! Results in words: numbers with sensible digits, the verdict as a sentence with its reason, refusals.
//!
//! Screen and brief say the same because both take their sentences from here. Plain 7-bit text.

mod lasting;

pub use lasting::{engine, flown, flown_short};

use crate::arrival::{NotFlyable, Reason, Way};
use crate::study::case::{Case, DAY_S};
use crate::study::landmarks::{Crossover, CrossoverKind};
use crate::study::verdict::{Cause, Shift, Standing, Verdict};
use crate::study::{Answer, landmarks};

/// An integer part in groups of three: `12 980`.
fn grouped(digits: &str) -> String {
    let (sign, digits) = digits
        .strip_prefix('-')
        .map_or(("", digits), |rest| ("-", rest));
    let (whole, fraction) = digits
        .split_once('.')
        .map_or((digits, ""), |(whole, fraction)| (whole, fraction));
    let mut out = String::with_capacity(digits.len() + 4);
    for (k, digit) in whole.chars().enumerate() {
        if 0 < k && (whole.len() - k).is_multiple_of(3) && 4 < whole.len() {
            out.push(' ');
        }
        out.push(digit);
    }
    let point = if fraction.is_empty() { "" } else { "." };
    format!("{sign}{out}{point}{fraction}")
}

/// A number to about four digits, grouped: `12 980`, `99.6`, `0.829`.
pub fn number(value: f64) -> String {
    let magnitude = value.abs();
    let decimals = if 100.0 <= magnitude || magnitude == 0.0 {
        0
    } else if 10.0 <= magnitude {
        1
    } else if 1.0 <= magnitude {
        2
    } else {
        3
    };
    if 1e9 <= magnitude {
        return format!("{value:.3e}");
    }
    grouped(&format!("{value:.decimals$}"))
}

/// A length: `12 980 km`.
pub fn km(value: f64) -> String {
    format!("{} km", number(value))
}

/// An altitude: like a length, but without decimals from 10 km up, as altitudes are spoken of.
pub fn altitude(value: f64) -> String {
    if 10.0 <= value.abs() && value.abs() < 1e9 {
        format!("{} km", grouped(&format!("{value:.0}")))
    } else {
        km(value)
    }
}

/// A velocity change given in km/s, to 1 m/s: `667 m/s`; below 1 m/s with decimals.
pub fn dv(km_s: f64) -> String {
    let m_s = 1e3 * km_s;
    let magnitude = m_s.abs();
    if magnitude == 0.0 || 0.95 <= magnitude {
        format!("{} m/s", grouped(&format!("{m_s:.0}")))
    } else if 0.0095 <= magnitude {
        format!("{m_s:.2} m/s")
    } else {
        format!("{m_s:.1e} m/s")
    }
}

/// A speed: `0.8290 km/s`.
pub fn speed(km_s: f64) -> String {
    format!("{km_s:.4} km/s")
}

/// A mass: `41.2 kg`.
pub fn kg(value: f64) -> String {
    if 1000.0 <= value.abs() {
        format!("{} kg", number(value))
    } else {
        format!("{value:.1} kg")
    }
}

/// A thrust: `22 N`, `0.5 N`.
pub fn newton(value: f64) -> String {
    format!("{} N", number(value))
}

/// A time in the unit that suits it: `45 s`, `21 min`, `7.2 h`, `3.1 d`.
pub fn time(seconds: f64) -> String {
    if seconds < 100.0 {
        format!("{seconds:.0} s")
    } else if seconds < 100.0 * 60.0 {
        format!("{:.0} min", seconds / 60.0)
    } else if seconds < 2.0 * DAY_S {
        format!("{:.1} h", seconds / 3600.0)
    } else {
        format!("{} d", days(seconds))
    }
}

/// Seconds as a number of days: `3.1`, `0.08`.
pub fn days(seconds: f64) -> String {
    let days = seconds / DAY_S;
    if days == 0.0 {
        "0".to_owned()
    } else if days < 1.0 {
        format!("{days:.2}")
    } else if days < 100.0 {
        format!("{days:.1}")
    } else {
        grouped(&format!("{days:.0}"))
    }
}

/// An angle given in radians: `16.6 deg`.
pub fn degrees(radians: f64) -> String {
    let degrees = radians.to_degrees();
    if degrees == 0.0 || 0.1 <= degrees.abs() {
        format!("{degrees:.1} deg")
    } else {
        format!("{degrees:.3} deg")
    }
}

/// The B-plane angles that give an inclination, from one of them (rad): `57.0 deg or -57.0 deg`, or the one there is.
pub fn b_plane(angle: f64) -> String {
    let shown = degrees(angle);
    if angle.sin().abs() < 1e-12 {
        shown
    } else {
        format!("{shown} or -{shown}")
    }
}

/// `1 start`, `2 starts`.
pub fn starts(count: usize) -> String {
    if count == 1 {
        "1 start".to_owned()
    } else {
        format!("{count} starts")
    }
}

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

/// Breaks a text into lines of at most `width` cells at spaces; a longer word is cut.
///
/// Spaces inside a grouped number and before its unit do not break, and the text's indent is kept on every line.
pub fn wrap(text: &str, width: usize) -> Vec<String> {
    use unicode_width::{UnicodeWidthChar, UnicodeWidthStr};
    if width == 0 {
        return Vec::new();
    }
    let body = text.trim_start_matches(' ');
    let indent = (text.len() - body.len()).min(width / 2);
    let mut lines = Vec::new();
    let mut line = " ".repeat(indent);
    let mut used = indent;
    for word in unbroken(body) {
        let length = word.width();
        if indent < used && width < used + 1 + length {
            lines.push(std::mem::replace(&mut line, " ".repeat(indent)));
            used = indent;
        }
        if indent < used {
            line.push(' ');
            used += 1;
        }
        for c in word.chars() {
            let cells = c.width().unwrap_or(0);
            if width < used + cells && indent < used {
                lines.push(std::mem::replace(&mut line, " ".repeat(indent)));
                used = indent;
            }
            line.push(c);
            used += cells;
        }
    }
    lines.push(line);
    lines
}

/// The words of a text, with a number kept together with its groups of digits and its unit.
fn unbroken(text: &str) -> Vec<String> {
    const UNITS: &[&str] = &[
        "km", "km/s", "m/s", "kg", "deg", "%", "s", "min", "h", "d", "starts", "start",
    ];
    let mut words: Vec<String> = Vec::new();
    for word in text.split(' ').filter(|word| !word.is_empty()) {
        let bare = word.trim_end_matches(|c: char| ",.;:)".contains(c));
        let group = 3 <= bare.len()
            && bare.bytes().take(3).all(|b| b.is_ascii_digit())
            && !bare[3..].starts_with(|c: char| c.is_ascii_digit());
        match words.last_mut() {
            Some(last)
                if last.ends_with(|c: char| c.is_ascii_digit())
                    && (group || UNITS.contains(&bare)) =>
            {
                last.push(' ');
                last.push_str(word);
            }
            _ => words.push(word.to_owned()),
        }
    }
    words
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn numbers_read_well() {
        for (value, expected) in [
            (12_980.4, "12 980"),
            (1837.4, "1837"),
            (99.64, "99.6"),
            (8.2, "8.20"),
            (0.829, "0.829"),
            (-12_345.0, "-12 345"),
            (0.0, "0"),
            (1.5e11, "1.500e11"),
        ] {
            assert_eq!(number(value), expected);
        }
        assert_eq!(dv(0.6674), "667 m/s");
        assert_eq!(dv(0.000_124), "0.12 m/s");
        assert_eq!(dv(17.2), "17 200 m/s");
        assert_eq!(time(1260.0), "21 min");
        assert_eq!(time(86_400.0 * 3.06), "3.1 d");
    }

    #[test]
    fn wrapping_keeps_every_word() {
        let text = "Direct is cheapest at 6500 km: 667 m/s";
        assert_eq!(
            wrap(text, 12),
            ["Direct is", "cheapest at", "6500 km:", "667 m/s"]
        );
        assert_eq!(wrap("abcdefgh", 3), ["abc", "def", "gh"]);
        assert_eq!(
            wrap("radius 19 347 km, x", 10),
            ["radius", "19 347 km,", "x"]
        );
        assert_eq!(wrap("   a bb ccc", 7), ["   a bb", "   ccc"]);
        assert_eq!(wrap("", 7), [""]);
        assert_eq!(
            wrap("\u{4f60}\u{597d}\u{5417}", 1),
            ["\u{4f60}", "\u{597d}", "\u{5417}"]
        );
    }
}
