//! A sweep as text: a table for one knob, a map of glyphs for two.

use super::Sweep;
use crate::arrival::Way;
use crate::report::words;
use crate::study::curve::Row;
use std::fmt::Write;

/// Renders the sweep.
pub(super) fn render(sweep: &Sweep) -> String {
    let mut out = String::new();
    // Writing to a string cannot fail.
    let _ = match &sweep.second {
        None => curve(sweep, &mut out),
        Some(_) => map(sweep, &mut out),
    };
    out
}

fn curve(sweep: &Sweep, out: &mut String) -> std::fmt::Result {
    let knob = sweep.first.knob;
    let head = if knob.unit().is_empty() {
        knob.label.to_owned()
    } else {
        format!("{}, {}", knob.label, knob.unit())
    };
    write!(out, "{head:>20}")?;
    for entry in Way::TABLE {
        write!(out, " {:>12}", format!("{} {}", entry.glyph, entry.name))?;
    }
    writeln!(out, "  cheapest   (cost in m/s)")?;
    for cell in &sweep.cells {
        match &cell.row {
            Row::Refused { x, why } => writeln!(out, "{:>20}  refused: {why}", words::number(*x))?,
            Row::Asked(point) => {
                write!(out, "{:>20}", words::number(point.x))?;
                for way in &point.ways {
                    match way {
                        Ok(sample) => write!(out, " {:>12.1}", 1e3 * sample.cost_km_s)?,
                        Err(_) => write!(out, " {:>12}", "-")?,
                    }
                }
                writeln!(out, "  {}", point.best.map_or("none", Way::name))?;
            }
        }
    }
    writeln!(out)?;
    writeln!(
        out,
        "- means not flyable; --format csv and json say why. Landmarks of the target altitude:"
    )?;
    landmarks(sweep, out)
}

fn landmarks(sweep: &Sweep, out: &mut String) -> std::fmt::Result {
    let marks = sweep.landmarks();
    let case = sweep.case;
    match marks.cheapest {
        Some(cheapest) => writeln!(
            out,
            "  cheapest direct {}, {}",
            words::altitude(case.altitude_km(cheapest.radius_km)),
            words::dv(cheapest.dv_km_s)
        )?,
        None => writeln!(out, "  direct is flyable nowhere")?,
    }
    for crossover in &marks.crossovers {
        writeln!(
            out,
            "  crossover {}, {}: {} below, {} above",
            words::altitude(case.altitude_km(crossover.radius_km)),
            words::dv(crossover.dv_km_s),
            crossover.below.name(),
            crossover.above.name()
        )?;
    }
    Ok(())
}

fn map(sweep: &Sweep, out: &mut String) -> std::fmt::Result {
    let Some(second) = &sweep.second else {
        return Ok(());
    };
    let width = sweep.first.points;
    let unit = |axis: &crate::study::curve::Axis| {
        if axis.knob.unit().is_empty() {
            axis.knob.label.to_owned()
        } else {
            format!("{}, {}", axis.knob.label, axis.knob.unit())
        }
    };
    writeln!(
        out,
        "{} upwards, {} to the right; the cheapest way in each cell",
        unit(second),
        unit(&sweep.first)
    )?;
    writeln!(out)?;
    for line in sweep.cells.chunks(width).rev() {
        let y = line.first().map_or(0.0, |cell| cell.y);
        let glyphs: String = line
            .iter()
            .map(|cell| match &cell.row {
                Row::Asked(point) => point.best.map_or(' ', |way| way.entry().glyph),
                Row::Refused { .. } => '?',
            })
            .collect();
        writeln!(out, "{:>10} |{glyphs}", words::number(y))?;
    }
    writeln!(out, "{:>10} +{}", "", "-".repeat(width))?;
    let (from, to) = (
        words::number(sweep.first.from),
        words::number(sweep.first.to),
    );
    writeln!(
        out,
        "{:>10}  {from}{}{to}",
        "",
        " ".repeat(width.saturating_sub(from.len() + to.len()))
    )?;
    writeln!(out)?;
    let legend: Vec<String> = Way::TABLE
        .iter()
        .map(|entry| format!("{} {}", entry.glyph, entry.name))
        .collect();
    writeln!(
        out,
        "{}, blank: nothing flyable, ?: value refused",
        legend.join(", ")
    )
}
