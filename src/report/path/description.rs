//! The same picture in sentences, for those who hear the screen, and the legend of its glyphs.

use super::{Role, Scene};
use crate::arrival::Burn;
use crate::physics::conic::{self, Orbit};
use crate::report::words;
use crate::visible;

/// What happens, from arrival to target orbit: one sentence or two for each burn, one for each coast.
pub fn describe(scene: &Scene) -> Vec<String> {
    let plan = scene.plan;
    let altitude = |radius: f64| words::altitude(radius - scene.body_radius_km);
    let arriving = &scene.arriving;
    let v_inf_sq = arriving.v_inf_km_s * arriving.v_inf_km_s;
    let (gm, periapsis) = (scene.gm, arriving.periapsis_km);
    let mut out = vec![format!(
        "{} arrives at {} with v_inf {} on a hyperbola of eccentricity {}: aiming radius {}, periapsis at {}.",
        capital(plan.way.name()),
        visible::ascii(scene.body_name),
        words::speed(arriving.v_inf_km_s),
        words::number(conic::hyperbola_eccentricity(gm, v_inf_sq, periapsis)),
        words::km(conic::aiming_radius_km(gm, v_inf_sq, periapsis)),
        altitude(periapsis),
    )];
    let places = scene.burn_places();
    for (k, burn) in plan.burns.iter().enumerate() {
        let side = places.get(k).copied().unwrap_or(0.0);
        let last = k + 1 == plan.burns.len();
        let orbit = &burn.orbit_after;
        let leaves = if last { "the target orbit, " } else { "" };
        let figure = shape(orbit, &altitude);
        out.push(format!(
            "Burn {} {} at {}, {} of the body in the picture: {}{}{}, from {} to {}. It ends in {leaves}{figure}, period {}.",
            k + 1,
            verb(burn),
            altitude(burn.at_radius_km),
            if 0.0 <= side { "right" } else { "left" },
            words::dv(burn.dv_km_s),
            burn.duration_s
                .map_or_else(String::new, |seconds| format!(" in {}", words::time(seconds))),
            if burn.turn_rad == 0.0 {
                String::new()
            } else {
                format!(" with a turn of the plane by {}", words::degrees(burn.turn_rad))
            },
            words::speed(burn.speed_before_km_s),
            words::speed(burn.speed_after_km_s),
            words::time(orbit.period_s(gm)),
        ));
        if let Some(next) = places.get(k + 1) {
            let turns = if next.signum() == side.signum() {
                1.0
            } else {
                0.5
            };
            out.push(format!(
                "It coasts {} to {}.",
                words::time(turns * orbit.period_s(gm)),
                altitude(next.abs()),
            ));
        }
    }
    out.push(format!(
        "In all {} and {}; the floor lies at {}, the cap at {}.",
        words::dv(plan.dv_km_s),
        words::starts(plan.starts()),
        altitude(scene.floor_radius_km),
        altitude(scene.cap_radius_km),
    ));
    if plan.turn_rad != 0.0 {
        out.push("The planes before and after a turn are drawn unfolded into one.".to_owned());
    }
    out
}

/// Each line of the picture: its glyph, its role and its name, in the order of the flight. Burns and floor, cap, body included.
pub fn legend(scene: &Scene) -> Vec<(char, Role, String)> {
    let entry = |role: Role, name: String| (role.glyph(), role, name);
    let burns = scene.plan.burns.len();
    let mut out = vec![entry(Role::Arriving, "arriving hyperbola".to_owned())];
    for k in 1..burns {
        out.push(entry(
            Role::Between(k),
            format!("from burn {k} to burn {}", k + 1),
        ));
    }
    out.push(entry(Role::Target, "target orbit".to_owned()));
    if !scene.arcs.is_empty() {
        out.push(entry(Role::Thrust, "thrust arc".to_owned()));
    }
    for k in 1..=burns {
        out.push(entry(Role::Burn(k), format!("burn {k}")));
    }
    out.push(entry(
        Role::Body,
        visible::ascii(scene.body_name).into_owned(),
    ));
    out.push(entry(Role::Floor, "floor".to_owned()));
    out.push(entry(Role::Cap, "cap".to_owned()));
    out
}

/// What a burn does to the speed.
fn verb(burn: &Burn) -> &'static str {
    if burn.speed_after_km_s < burn.speed_before_km_s {
        "brakes"
    } else if burn.speed_before_km_s < burn.speed_after_km_s {
        "speeds up"
    } else {
        "only turns"
    }
}

/// `a circle at 6500 km` or `an ellipse from 100 km to 6500 km`.
fn shape(orbit: &Orbit, altitude: &impl Fn(f64) -> String) -> String {
    if orbit.periapsis_km == orbit.apoapsis_km {
        format!("a circle at {}", altitude(orbit.periapsis_km))
    } else {
        format!(
            "an ellipse from {} to {}",
            altitude(orbit.periapsis_km),
            altitude(orbit.apoapsis_km)
        )
    }
}

fn capital(name: &str) -> String {
    let mut chars = name.chars();
    chars.next().map_or_else(String::new, |first| {
        first.to_uppercase().collect::<String>() + chars.as_str()
    })
}
