//! A sweep as text of at most 80 columns: a table for one knob, a map of glyphs for two.

use super::{Sweep, title};
use crate::arrival::Way;
use crate::report::words;
use crate::study::curve::{Axis, Cell, Point, Row};
use std::fmt::{Result, Write};

const WIDTH: usize = 78;
/// Width of the column of values.
const VALUE: usize = 21;

/// Renders the sweep.
pub(super) fn render(sweep: &Sweep) -> String {
    let mut out = String::new();
    // Writing to a string cannot fail.
    let _ = write(sweep, &mut out);
    out
}

fn write(sweep: &Sweep, out: &mut String) -> Result {
    let title = &sweep.case.spec().title;
    if !title.trim().is_empty() {
        paragraph(out, &crate::visible::ascii(title))?;
    }
    match &sweep.second {
        None => curve(sweep, out)?,
        Some(second) => map(sweep, second, out)?,
    }
    landmarks(sweep, out)?;
    writeln!(
        out,
        "\nstoop {}, scenario fingerprint {}",
        env!("CARGO_PKG_VERSION"),
        sweep.fingerprint
    )
}

fn curve(sweep: &Sweep, out: &mut String) -> Result {
    writeln!(out, "cost in m/s; propellant of the cheapest way\n")?;
    write!(out, "{:>VALUE$}", title(&sweep.first))?;
    for entry in Way::shown(sweep.case.setting()) {
        write!(out, " {:>8}", format!("{} {}", entry.glyph, entry.name))?;
    }
    writeln!(out, "  cheapest  propellant")?;
    for cell in &sweep.cells {
        row(sweep, &cell.row, out)?;
    }
    writeln!(out, "\n- not flyable; --format csv and json say why")?;
    changes(sweep, out)
}

fn row(sweep: &Sweep, row: &Row, out: &mut String) -> Result {
    match row {
        Row::Refused { x, why } => {
            let head = format!("{:>VALUE$}  refused: ", value(&sweep.first, *x));
            let text = why.to_string();
            for (k, line) in words::wrap(&text, WIDTH - head.len()).iter().enumerate() {
                let lead = if k == 0 { &head } else { "" };
                writeln!(out, "{lead:<width$}{line}", width = head.len())?;
            }
            Ok(())
        }
        Row::Asked(point) => {
            write!(out, "{:>VALUE$}", value(&sweep.first, point.x))?;
            for entry in Way::shown(sweep.case.setting()) {
                match &point.ways[entry.way as usize] {
                    Ok(sample) => write!(out, " {:>8.1}", 1e3 * sample.cost_km_s)?,
                    Err(_) => write!(out, " {:>8}", "-")?,
                }
            }
            let propellant = point
                .best
                .and_then(|best| point.ways[best as usize].as_ref().ok())
                .and_then(|sample| sample.propellant_kg)
                .map_or_else(|| "-".to_owned(), words::kg);
            let best = point.best.map_or("none", Way::name);
            writeln!(out, "  {best:<8} {propellant:>11}")
        }
    }
}

/// A knob value with as many decimals as tell neighbours on the axis apart.
fn value(axis: &Axis, value: f64) -> String {
    if axis.knob.unit().is_empty() {
        // A count.
        return value.to_string();
    }
    let short = words::number(value);
    let steps = (axis.points - 1) as f64;
    // Three digits tell steps of more than two percent apart.
    if axis.log && 0.02 < ((axis.to / axis.from).ln() / steps).abs() {
        return short;
    }
    let step = if axis.log {
        let ends = (
            axis.value(1) - axis.from,
            axis.to - axis.value(axis.points - 2),
        );
        ends.0.abs().min(ends.1.abs())
    } else {
        ((axis.to - axis.from) / steps).abs()
    };
    // A step of 0.25 needs two decimals, one of 30 none.
    let decimals = (1.0 - step.log10().floor()).clamp(0.0, 9.0) as usize;
    let shown = short
        .split_once('.')
        .map_or(0, |(_, fraction)| fraction.len());
    if shown < decimals && value.abs() < 1e6 {
        format!("{value:.decimals$}")
    } else {
        short
    }
}

/// Where in this sweep the cheapest way changes, between which two values.
fn changes(sweep: &Sweep, out: &mut String) -> Result {
    let place = |point: &Point| {
        let name = point.best.map_or("nothing flyable", Way::name);
        let value = value(&sweep.first, point.x);
        let unit = sweep.first.knob.unit();
        format!("{name} at {value} {unit}").trim_end().to_owned()
    };
    let points: Vec<&Point> = sweep.points().collect();
    let mut changed = false;
    for pair in points
        .windows(2)
        .filter(|pair| pair[0].best != pair[1].best)
    {
        changed = true;
        writeln!(
            out,
            "the cheapest changes: {}, {}",
            place(pair[0]),
            place(pair[1])
        )?;
    }
    match points.first() {
        Some(first) if !changed => {
            let name = first.best.map_or("nothing flyable", Way::name);
            writeln!(out, "the same all along this sweep: {name}")
        }
        _ => Ok(()),
    }
}

fn landmarks(sweep: &Sweep, out: &mut String) -> Result {
    let marks = sweep.landmarks();
    let case = sweep.case;
    writeln!(
        out,
        "\nLandmarks of the target altitude, with everything else as in the scenario"
    )?;
    match marks.cheapest {
        Some(cheapest) => writeln!(
            out,
            "- cheapest direct {}, {}{}",
            words::altitude(case.altitude_km(cheapest.radius_km)),
            words::dv(cheapest.dv_km_s),
            if cheapest.at_border {
                ", held there by a limit"
            } else {
                ""
            }
        )?,
        None => writeln!(out, "- direct is flyable nowhere")?,
    }
    for crossover in &marks.crossovers {
        writeln!(
            out,
            "- crossover {}, {}: {} below, {} above",
            words::altitude(case.altitude_km(crossover.radius_km)),
            words::dv(crossover.dv_km_s),
            crossover.below.name(),
            crossover.above.name()
        )?;
    }
    if marks.crossovers.is_empty() {
        writeln!(out, "- no crossover")?;
    }
    Ok(())
}

fn map(sweep: &Sweep, second: &Axis, out: &mut String) -> Result {
    let head = format!(
        "the cheapest way in each cell; upwards {}{}; to the right {}{}",
        title(second),
        spacing(second),
        title(&sweep.first),
        spacing(&sweep.first)
    );
    paragraph(out, &head)?;
    writeln!(out)?;
    let width = sweep.first.points;
    for line in sweep.cells.chunks(width).rev() {
        let y = line.first().map_or(0.0, |cell| cell.y);
        let glyphs: String = line.iter().map(glyph).collect();
        writeln!(out, "{:>10} |{}", value(second, y), glyphs.trim_end())?;
    }
    writeln!(out, "{:>10} +{}", "", "-".repeat(width))?;
    let (from, to) = (
        value(&sweep.first, sweep.first.from),
        value(&sweep.first, sweep.first.to),
    );
    // One value at each end, with a gap between them even under a narrow map.
    let gap = width.saturating_sub(from.len() + to.len()).max(2);
    writeln!(out, "{:>10}  {from}{}{to}", "", " ".repeat(gap))?;
    let legend: Vec<String> = Way::shown(sweep.case.setting())
        .map(|entry| format!("{} {}", entry.glyph, entry.name))
        .collect();
    let legend = format!(
        "{}, blank: nothing flyable, ?: value refused; --format csv has the costs",
        legend.join(", ")
    );
    writeln!(out)?;
    paragraph(out, &legend)
}

fn spacing(axis: &Axis) -> &'static str {
    if axis.log { " (logarithmic)" } else { "" }
}

fn glyph(cell: &Cell) -> char {
    match &cell.row {
        Row::Asked(point) => point.best.map_or(' ', |way| way.entry().glyph),
        Row::Refused { .. } => '?',
    }
}

fn paragraph(out: &mut String, text: &str) -> Result {
    for line in words::wrap(text, WIDTH) {
        writeln!(out, "{line}")?;
    }
    Ok(())
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::study::knob::by_name;

    #[test]
    fn neighbours_on_an_axis_are_told_apart() {
        for (from, to, points, third) in [
            (0.7, 1.1, 41, "0.720"),
            (0.82, 0.8201, 101, "0.8200020"),
            (1.0, 3.0, 3, "3.00"),
        ] {
            let knob = by_name("v-inf").expect("a knob");
            let axis = Axis::new(knob, from, to, points, false).expect("an axis");
            assert_eq!(value(&axis, axis.value(2)), third);
            let shown: Vec<String> = axis.values().map(|x| value(&axis, x)).collect();
            let mut distinct = shown.clone();
            distinct.dedup();
            assert_eq!(shown, distinct);
        }
        let knob = by_name("target-altitude").expect("a knob");
        let axis = Axis::new(knob, 100.0, 20_100.0, 101, false).expect("an axis");
        assert_eq!(value(&axis, 12_300.0), "12 300");
        let axis = Axis::new(knob, 6500.0, 6501.0, 11, false).expect("an axis");
        assert_eq!(value(&axis, 6500.1), "6500.10");
    }
}
