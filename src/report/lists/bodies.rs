//! The catalogue of bodies: constants, orbits, and where each value is from.

use crate::physics::body::Body;
use crate::physics::catalogue::{self, ENTRIES, Entry, Source, Sourced};
use crate::report::{json, words};
use serde::Serialize;
use std::fmt::Write;

const WIDTH: usize = 78;

/// The catalogue as text, with the sources in full below.
pub fn bodies_text() -> String {
    let mut out = String::new();
    // Writing to a string cannot fail.
    let _ = write_bodies(&mut out);
    out
}

fn write_bodies(out: &mut String) -> std::fmt::Result {
    constants(out)?;
    orbits(out)?;
    origins(out)?;
    citations(out)
}

fn or_dash(value: Option<f64>, digits: usize) -> String {
    value.map_or_else(|| "-".to_owned(), |value| format!("{value:.digits$}"))
}

fn constants(out: &mut String) -> std::fmt::Result {
    writeln!(
        out,
        "{:<10} {:<8} {:>22} {:>11} {:>9} {:>11}",
        "body", "orbits", "GM, km3/s2", "radius, km", "J2, 1e-6", "lowest, km"
    )?;
    for entry in ENTRIES {
        writeln!(
            out,
            "{:<10} {:<8} {:>22} {:>11} {:>9} {:>11}",
            entry.name,
            entry.parent.unwrap_or("-"),
            entry.gm_km3_s2.value,
            entry.radius_km.value,
            or_dash(entry.j2.map(|j2| 1e6 * j2.value), 2),
            entry.lowest_alt_km.value,
        )?;
    }
    hanging(
        out,
        "",
        "GM is that of the body alone, without its moons. Altitudes are counted from the radius. Lowest is the lowest sensible altitude of a braking pass and the default floor.",
    )
}

fn orbits(out: &mut String) -> std::fmt::Result {
    writeln!(
        out,
        "\n{:<10} {:>14} {:>13} {:>14} {:>14}",
        "body", "a, km", "eccentricity", "SOI, km", "Hill, km"
    )?;
    for entry in ENTRIES {
        let body = catalogue::body(entry.name);
        let spheres = body.as_ref();
        writeln!(
            out,
            "{:<10} {:>14} {:>13} {:>14} {:>14}",
            entry.name,
            or_dash(entry.semi_major_axis_km.map(|a| a.value), 0),
            or_dash(entry.eccentricity.map(|e| e.value), 6),
            or_dash(spheres.and_then(Body::sphere_of_influence_km), 0),
            or_dash(spheres.and_then(Body::hill_radius_km), 0),
        )?;
    }
    hanging(
        out,
        "",
        "Sphere of influence a (m/M)^0.4, Hill radius a (1 - e)(m/3M)^(1/3), both with planet and moons together.",
    )
}

/// Where each value is from, in short.
fn origins(out: &mut String) -> std::fmt::Result {
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
            "lowest {}: {}",
            entry.lowest_alt_km.source.short(),
            entry.lowest_alt_reason
        ));
        hanging(out, &format!("  {:<10} ", entry.name), &parts.join("; "))?;
        if !entry.note.is_empty() {
            hanging(out, &format!("  {:<10} ", ""), entry.note)?;
        }
    }
    Ok(())
}

/// The sources in full, in the order met.
fn citations(out: &mut String) -> std::fmt::Result {
    writeln!(out, "\nSources")?;
    let mut cited: Vec<Source> = Vec::new();
    for source in ENTRIES.iter().flat_map(sources_of) {
        if !cited.contains(&source) {
            cited.push(source);
        }
    }
    for source in cited {
        let text = format!("{}: {}", source.short(), source.cite());
        hanging(out, "  ", &text)?;
    }
    Ok(())
}

fn sources_of(entry: &Entry) -> impl Iterator<Item = Source> {
    [
        Some(entry.gm_km3_s2),
        entry.system_gm_km3_s2,
        Some(entry.radius_km),
        entry.j2,
        entry.semi_major_axis_km,
        entry.eccentricity,
        Some(entry.lowest_alt_km),
    ]
    .into_iter()
    .flatten()
    .map(|value| value.source)
}

fn hanging(out: &mut String, lead: &str, text: &str) -> std::fmt::Result {
    for (k, line) in words::wrap(text, WIDTH - lead.len()).iter().enumerate() {
        if k == 0 {
            writeln!(out, "{lead}{line}")?;
        } else {
            writeln!(out, "{}{line}", " ".repeat(lead.len()))?;
        }
    }
    Ok(())
}

#[derive(Serialize)]
struct BodiesJson {
    format: u32,
    bodies: Vec<BodyJson>,
}

#[derive(Serialize)]
struct BodyJson {
    name: &'static str,
    parent: Option<&'static str>,
    gm_km3_s2: SourcedJson,
    system_gm_km3_s2: Option<SourcedJson>,
    radius_km: SourcedJson,
    j2: Option<SourcedJson>,
    semi_major_axis_km: Option<SourcedJson>,
    eccentricity: Option<SourcedJson>,
    lowest_alt_km: SourcedJson,
    lowest_alt_reason: &'static str,
    soi_radius_km: Option<f64>,
    hill_radius_km: Option<f64>,
    note: &'static str,
}

#[derive(Serialize)]
struct SourcedJson {
    value: f64,
    source: &'static str,
}

impl From<Sourced> for SourcedJson {
    fn from(sourced: Sourced) -> Self {
        Self {
            value: sourced.value,
            source: sourced.source.cite(),
        }
    }
}

/// The catalogue as JSON, see `docs/output.md`.
pub fn bodies_json() -> String {
    let bodies = ENTRIES
        .iter()
        .map(|entry| {
            let body = catalogue::body(entry.name);
            let spheres = body.as_ref();
            BodyJson {
                name: entry.name,
                parent: entry.parent,
                gm_km3_s2: entry.gm_km3_s2.into(),
                system_gm_km3_s2: entry.system_gm_km3_s2.map(Into::into),
                radius_km: entry.radius_km.into(),
                j2: entry.j2.map(Into::into),
                semi_major_axis_km: entry.semi_major_axis_km.map(Into::into),
                eccentricity: entry.eccentricity.map(Into::into),
                lowest_alt_km: entry.lowest_alt_km.into(),
                lowest_alt_reason: entry.lowest_alt_reason,
                soi_radius_km: spheres.and_then(Body::sphere_of_influence_km),
                hill_radius_km: spheres.and_then(Body::hill_radius_km),
                note: entry.note,
            }
        })
        .collect();
    json::text(&BodiesJson { format: 1, bodies })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_catalogue_fits_a_terminal_and_cites_every_source() {
        let text = bodies_text();
        assert!(text.is_ascii());
        for line in text.lines() {
            assert!(line.len() <= 80, "{} columns: {line}", line.len());
        }
        let flat = text.split_whitespace().collect::<Vec<_>>().join(" ");
        for source in ENTRIES.iter().flat_map(sources_of) {
            assert!(flat.contains(source.cite()), "{}", source.cite());
        }
    }
}
