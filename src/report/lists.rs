//! The catalogue and the knobs as tables and JSON.

use super::words;
use crate::physics::catalogue::{self, ENTRIES};
use crate::study::knob::KNOBS;
use std::fmt::Write;

/// The catalogue of bodies as text, with the sources in full below.
pub fn bodies_text() -> String {
    let mut out = String::new();
    // Writing to a string cannot fail.
    let _ = write_bodies(&mut out);
    out
}

fn write_bodies(out: &mut String) -> std::fmt::Result {
    writeln!(
        out,
        "{:<10} {:<8} {:>18} {:>10} {:>9} {:>12} {:>7} {:>9} {:>12} {:>12}",
        "body",
        "orbits",
        "GM km3/s2",
        "radius km",
        "J2 1e-6",
        "a km",
        "e",
        "lowest km",
        "SOI km",
        "Hill km"
    )?;
    let mut cited: Vec<(&'static str, &'static str)> = Vec::new();
    for entry in ENTRIES {
        let optional = |value: Option<f64>, digits: usize| {
            value.map_or_else(|| "-".to_owned(), |value| format!("{value:.digits$}"))
        };
        let body = catalogue::body(entry.name);
        writeln!(
            out,
            "{:<10} {:<8} {:>18} {:>10} {:>9} {:>12} {:>7} {:>9} {:>12} {:>12}",
            entry.name,
            entry.parent.unwrap_or("-"),
            format!("{:.9}", entry.gm_km3_s2.value)
                .trim_end_matches('0')
                .trim_end_matches('.'),
            entry.radius_km.value,
            optional(entry.j2.map(|j2| 1e6 * j2.value), 2),
            optional(entry.semi_major_axis_km.map(|a| a.value), 0),
            optional(entry.eccentricity.map(|e| e.value), 4),
            entry.lowest_alt_km.value,
            optional(
                body.as_ref().and_then(|body| body.sphere_of_influence_km()),
                0
            ),
            optional(body.as_ref().and_then(|body| body.hill_radius_km()), 0),
        )?;
        let values = [
            Some(entry.gm_km3_s2),
            Some(entry.radius_km),
            entry.j2,
            entry.semi_major_axis_km,
            entry.eccentricity,
            Some(entry.lowest_alt_km),
        ];
        for source in values.into_iter().flatten().map(|value| value.source) {
            if !cited.contains(&(source.short(), source.cite())) {
                cited.push((source.short(), source.cite()));
            }
        }
    }
    writeln!(out, "\nWhere each value is from")?;
    for entry in ENTRIES {
        let mut parts = vec![
            format!("GM {}", entry.gm_km3_s2.source.short()),
            format!("radius {}", entry.radius_km.source.short()),
        ];
        parts.extend(entry.j2.map(|value| format!("J2 {}", value.source.short())));
        parts.extend(
            entry
                .semi_major_axis_km
                .map(|value| format!("orbit {}", value.source.short())),
        );
        parts.push(format!(
            "lowest {} ({})",
            entry.lowest_alt_km.source.short(),
            entry.lowest_alt_reason
        ));
        writeln!(out, "  {:<10} {}", entry.name, parts.join("; "))?;
    }
    writeln!(out, "\nSources")?;
    for (short, cite) in cited {
        writeln!(out, "  {short}: {cite}")?;
    }
    writeln!(
        out,
        "\nSphere of influence a (m/M)^0.4, Hill radius a (1 - e)(m/3M)^(1/3), both with planet and moons together."
    )
}

/// The catalogue as JSON.
pub fn bodies_json() -> String {
    let bodies: Vec<serde_json::Value> = ENTRIES
        .iter()
        .map(|entry| {
            let sourced = |value: Option<catalogue::Sourced>| {
                value.map(|value| serde_json::json!({ "value": value.value, "source": value.source.cite() }))
            };
            let body = catalogue::body(entry.name);
            serde_json::json!({
                "name": entry.name,
                "parent": entry.parent,
                "gm_km3_s2": sourced(Some(entry.gm_km3_s2)),
                "system_gm_km3_s2": sourced(entry.system_gm_km3_s2),
                "radius_km": sourced(Some(entry.radius_km)),
                "j2": sourced(entry.j2),
                "semi_major_axis_km": sourced(entry.semi_major_axis_km),
                "eccentricity": sourced(entry.eccentricity),
                "lowest_alt_km": sourced(Some(entry.lowest_alt_km)),
                "soi_radius_km": body.as_ref().and_then(|body| body.sphere_of_influence_km()),
                "hill_radius_km": body.as_ref().and_then(|body| body.hill_radius_km()),
            })
        })
        .collect();
    let mut text =
        serde_json::to_string_pretty(&serde_json::json!({ "format": 1, "bodies": bodies }))
            .unwrap_or_default();
    text.push('\n');
    text
}

/// The knobs as text.
pub fn knobs_text() -> String {
    let mut out = format!(
        "{:<18} {:<5} {:<42} {}\n",
        "knob", "unit", "range", "meaning"
    );
    for knob in KNOBS {
        let best = if knob.takes_best() { ", or best" } else { "" };
        let range = format!("{}{best}", knob.range_field().range());
        let head = format!("{:<18} {:<5} {range:<42} ", knob.name, knob.unit());
        for (k, line) in words::wrap(knob.meaning, 60).iter().enumerate() {
            let lead = if k == 0 {
                head.clone()
            } else {
                " ".repeat(head.len())
            };
            out.push_str(&format!("{lead}{line}\n"));
        }
    }
    out
}

/// The knobs as JSON.
pub fn knobs_json() -> String {
    let knobs: Vec<serde_json::Value> = KNOBS
        .iter()
        .map(|knob| {
            let field = knob.range_field();
            serde_json::json!({
                "name": knob.name,
                "column": knob.column,
                "unit": knob.unit(),
                "low": field.low.value(),
                "high": field.high.value(),
                "range": field.range().to_string(),
                "best": knob.takes_best(),
                "meaning": knob.meaning,
            })
        })
        .collect();
    let mut text =
        serde_json::to_string_pretty(&serde_json::json!({ "format": 1, "knobs": knobs }))
            .unwrap_or_default();
    text.push('\n');
    text
}
