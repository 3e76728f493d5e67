//! The curves of a sweep over one knob: cost of every way, the scenario's own place, cheapest altitude and crossovers.

use super::paper::{Paper, Pixels, TOP};
use super::{frame, stroke};
use crate::arrival::Way;
use crate::report::sweep::{Sweep, title};
use crate::study::curve::Row;
use crate::study::knob::{KnobId, Value};
use crate::study::landmarks;
use std::fmt::{Result, Write};

pub(super) fn draw(sweep: &Sweep, paper: &mut Paper) -> Result {
    let (left, right, base) = frame();
    let axis = &sweep.first;
    let Some(x) = Pixels::new(axis.from, axis.to, axis.log, left, right - left) else {
        return Ok(());
    };
    paper.horizontal(&x, &title(axis))?;
    let Some(y) = scale(sweep, base) else {
        let middle = (0.5 * (left + right), 0.5 * (TOP + base));
        return paper.text(
            middle.0,
            middle.1,
            "middle",
            "nothing flyable in this range",
            "",
        );
    };
    paper.vertical(&y, "cost, m/s")?;
    here(sweep, &x, paper)?;
    for entry in Way::shown(sweep.case.setting()) {
        way(sweep, entry.way, (&x, &y), paper)?;
    }
    if axis.knob.id == KnobId::TargetAltitude {
        marks(sweep, (&x, &y), paper)?;
    }
    Ok(())
}

/// Costs of a way in m/s by knob value; `None` where it cannot be flown.
fn costs<'a>(sweep: &'a Sweep, way: Way) -> impl Iterator<Item = (f64, Option<f64>)> + 'a {
    sweep.cells.iter().map(move |cell| match &cell.row {
        Row::Asked(point) => {
            let sample = point.ways[way as usize].as_ref().ok();
            (point.x, sample.map(|sample| 1e3 * sample.cost_km_s))
        }
        Row::Refused { x, .. } => (*x, None),
    })
}

/// The vertical scale: everything that is drawn, with a little air.
fn scale(sweep: &Sweep, base: f64) -> Option<Pixels> {
    let (low, high) = Way::TABLE
        .iter()
        .flat_map(|entry| costs(sweep, entry.way))
        .filter_map(|(_, cost)| cost)
        .fold((f64::INFINITY, f64::NEG_INFINITY), |(low, high), cost| {
            (low.min(cost), high.max(cost))
        });
    let air = (0.05 * (high - low)).max(1e-6 * high.abs()).max(1e-9);
    Pixels::new((low - air).max(0.0), high + air, false, base, TOP - base)
}

/// A dashed line where the scenario stands.
fn here(sweep: &Sweep, x: &Pixels, paper: &mut Paper) -> Result {
    let (_, _, base) = frame();
    let Ok(Value::Number(value)) = sweep.first.knob.read(sweep.case) else {
        return Ok(());
    };
    let Some(at) = x.at(value) else { return Ok(()) };
    paper.line(
        (at, TOP),
        (at, base),
        "stroke=\"#888\" stroke-dasharray=\"4 4\"",
    )?;
    paper.text(at, TOP - 6.0, "middle", "here", "fill=\"#555\"")
}

/// One way as a path; the pen is lifted where it cannot be flown.
fn way(sweep: &Sweep, way: Way, (x, y): (&Pixels, &Pixels), paper: &mut Paper) -> Result {
    let (colour, dash) = stroke(way);
    let mut path = String::new();
    let mut pen = false;
    for (value, cost) in costs(sweep, way) {
        match (x.at(value), cost.and_then(|cost| y.at(cost))) {
            (Some(px), Some(py)) => {
                write!(path, "{}{px:.2} {py:.2} ", if pen { "L" } else { "M" })?;
                pen = true;
            }
            _ => pen = false,
        }
    }
    writeln!(
        paper.0,
        "<path d=\"{}\" fill=\"none\" stroke=\"{colour}\" stroke-width=\"2\" stroke-linecap=\"round\" stroke-dasharray=\"{dash}\"/>",
        path.trim_end()
    )
}

/// Rings at the crossovers, a diamond at the cheapest altitude.
fn marks(sweep: &Sweep, (x, y): (&Pixels, &Pixels), paper: &mut Paper) -> Result {
    let found = sweep.landmarks();
    let mut labels = Labels::default();
    let place = |way: Way, radius: f64| {
        let setting = landmarks::at_radius(sweep.case.setting(), radius);
        let figures = way.figures(&setting).ok()?;
        let px = x.at(sweep.case.altitude_km(radius))?;
        let py = y.at(1e3 * figures.cost_km_s)?;
        Some((px, py))
    };
    if let Some(cheapest) = &found.cheapest
        && let Some((px, py)) = place(Way::Direct, cheapest.radius_km)
    {
        writeln!(
            paper.0,
            "<polygon points=\"{px:.1},{:.1} {:.1},{py:.1} {px:.1},{:.1} {:.1},{py:.1}\" fill=\"#222\"/>",
            py - 6.0,
            px + 6.0,
            py + 6.0,
            px - 6.0
        )?;
        labels.put((px, py), "cheapest direct", paper)?;
    }
    for crossover in &found.crossovers {
        let Some((px, py)) = place(crossover.below, crossover.radius_km) else {
            continue;
        };
        writeln!(
            paper.0,
            "<circle cx=\"{px:.1}\" cy=\"{py:.1}\" r=\"6\" fill=\"none\" stroke=\"#222\" stroke-width=\"2\"/>"
        )?;
        let names = format!("{} / {}", crossover.below.name(), crossover.above.name());
        labels.put((px, py), &names, paper)?;
    }
    Ok(())
}

/// Labels beside marks that keep out of each other's way: left end, right end and baseline of each.
#[derive(Default)]
struct Labels(Vec<(f64, f64, f64)>);

impl Labels {
    fn put(&mut self, (px, py): (f64, f64), text: &str, paper: &mut Paper) -> Result {
        const LINE: f64 = 16.0;
        let (_, right, base) = frame();
        // About 7.5 pixels a character at this size.
        let width = 7.5 * text.chars().count() as f64;
        let from = if px + 9.0 + width <= right {
            px + 9.0
        } else {
            px - 9.0 - width
        };
        // Above the mark, below it, then further up and down.
        let free = (0..8)
            .map(|k| {
                let away = f64::from(k / 2) * LINE;
                if k % 2 == 0 {
                    py - 9.0 - away
                } else {
                    py + 20.0 + away
                }
            })
            .filter(|y| TOP + LINE <= *y && *y <= base - 4.0)
            .find(|y| {
                self.0.iter().all(|(left, right, taken)| {
                    from + width < *left || *right < from || LINE <= (y - taken).abs()
                })
            })
            .unwrap_or(py - 9.0);
        self.0.push((from, from + width, free));
        // A white rim keeps the label readable where it crosses a curve.
        paper.text(
            from,
            free,
            "start",
            text,
            "paint-order=\"stroke\" stroke=\"#fff\" stroke-width=\"4\"",
        )
    }
}
