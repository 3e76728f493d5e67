//! A sweep as SVG: curves for one knob, a grid of winning ways for two. Self-contained, no fonts or scripts fetched.

use super::Sweep;
use crate::arrival::Way;
use crate::report::plot::scale::{Scale, label};
use crate::study::curve::{Axis, Row};
use crate::study::knob::KnobId;
use std::fmt::Write;

const WIDTH: f64 = 900.0;
const HEIGHT: f64 = 560.0;
const LEFT: f64 = 80.0;
const RIGHT: f64 = 24.0;
const TOP: f64 = 56.0;
const BOTTOM: f64 = 60.0;

/// Colour and dash of each way: the dash says the same without colour.
fn stroke(way: Way) -> (&'static str, &'static str) {
    match way {
        Way::Direct => ("#0072b2", "none"),
        Way::Dip => ("#d55e00", "9 5"),
        Way::Loop => ("#007a5a", "2 5"),
    }
}

/// Text as XML shows it literally.
fn escape(text: &str) -> String {
    crate::visible::visible(text)
        .replace('&', "&amp;")
        .replace('<', "&lt;")
        .replace('>', "&gt;")
        .replace('"', "&quot;")
}

/// Renders the sweep.
pub(super) fn render(sweep: &Sweep) -> String {
    let mut out = String::new();
    // Writing to a string cannot fail.
    let _ = picture(sweep, &mut out);
    out
}

fn picture(sweep: &Sweep, out: &mut String) -> std::fmt::Result {
    writeln!(
        out,
        "<svg xmlns=\"http://www.w3.org/2000/svg\" viewBox=\"0 0 {WIDTH} {HEIGHT}\" font-family=\"sans-serif\" font-size=\"13\" fill=\"#222\">"
    )?;
    writeln!(
        out,
        "<rect width=\"{WIDTH}\" height=\"{HEIGHT}\" fill=\"#fff\"/>"
    )?;
    writeln!(
        out,
        "<text x=\"{LEFT}\" y=\"24\" font-size=\"16\">{}</text>",
        escape(&sweep.case.spec().title)
    )?;
    let mut x = LEFT;
    for entry in Way::TABLE {
        let (colour, dash) = stroke(entry.way);
        writeln!(
            out,
            "<line x1=\"{x}\" y1=\"40\" x2=\"{}\" y2=\"40\" stroke=\"{colour}\" stroke-width=\"3\" stroke-dasharray=\"{dash}\"/>",
            x + 30.0
        )?;
        writeln!(
            out,
            "<text x=\"{}\" y=\"44\">{}</text>",
            x + 36.0,
            entry.name
        )?;
        x += 110.0;
    }
    match &sweep.second {
        None => curves(sweep, out)?,
        Some(second) => cells(sweep, second, out)?,
    }
    writeln!(
        out,
        "<text x=\"{LEFT}\" y=\"{}\" font-size=\"11\" fill=\"#555\">stoop {}, scenario {}; preliminary design only</text>",
        HEIGHT - 8.0,
        env!("CARGO_PKG_VERSION"),
        sweep.fingerprint
    )?;
    writeln!(out, "</svg>")
}

/// A scale over pixels: position 0 to `length`.
struct Pixels {
    scale: Scale,
    start: f64,
    length: f64,
}

impl Pixels {
    fn new(low: f64, high: f64, log: bool, start: f64, length: f64) -> Option<Self> {
        // Two cells: the position then runs from 0 to 1.
        Scale::new(low, high, 2, log).map(|scale| Self {
            scale,
            start,
            length,
        })
    }

    fn at(&self, value: f64) -> Option<f64> {
        self.scale
            .position(value)
            .map(|share| self.start + share * self.length)
    }
}

fn title(axis: &Axis) -> String {
    if axis.knob.unit().is_empty() {
        axis.knob.label.to_owned()
    } else {
        format!("{}, {}", axis.knob.label, axis.knob.unit())
    }
}

fn horizontal(axis: &Axis, out: &mut String) -> Result<Option<Pixels>, std::fmt::Error> {
    let Some(x) = Pixels::new(axis.from, axis.to, axis.log, LEFT, WIDTH - LEFT - RIGHT) else {
        return Ok(None);
    };
    let base = HEIGHT - BOTTOM;
    for tick in x.scale.ticks(9) {
        let Some(at) = x.at(tick) else { continue };
        writeln!(
            out,
            "<line x1=\"{at:.1}\" y1=\"{base}\" x2=\"{at:.1}\" y2=\"{}\" stroke=\"#555\"/>",
            base + 5.0
        )?;
        writeln!(
            out,
            "<text x=\"{at:.1}\" y=\"{}\" text-anchor=\"middle\">{}</text>",
            base + 19.0,
            label(tick)
        )?;
    }
    writeln!(
        out,
        "<text x=\"{}\" y=\"{}\" text-anchor=\"end\">{}</text>",
        WIDTH - RIGHT,
        base + 38.0,
        escape(&title(axis))
    )?;
    Ok(Some(x))
}

fn vertical(y: &Pixels, name: &str, out: &mut String) -> std::fmt::Result {
    for tick in y.scale.ticks(8) {
        let Some(at) = y.at(tick) else { continue };
        writeln!(
            out,
            "<line x1=\"{LEFT}\" y1=\"{at:.1}\" x2=\"{}\" y2=\"{at:.1}\" stroke=\"#ddd\"/>",
            WIDTH - RIGHT
        )?;
        writeln!(
            out,
            "<text x=\"{}\" y=\"{:.1}\" text-anchor=\"end\">{}</text>",
            LEFT - 8.0,
            at + 4.0,
            label(tick)
        )?;
    }
    writeln!(
        out,
        "<text x=\"14\" y=\"{TOP}\" dy=\"-2\">{}</text>",
        escape(name)
    )
}

fn curves(sweep: &Sweep, out: &mut String) -> std::fmt::Result {
    let costs = |way: Way| {
        sweep.cells.iter().map(move |cell| match &cell.row {
            Row::Asked(point) => (
                point.x,
                point.ways[way as usize]
                    .as_ref()
                    .ok()
                    .map(|sample| 1e3 * sample.cost_km_s),
            ),
            Row::Refused { x, .. } => (*x, None),
        })
    };
    let (mut low, mut high) = (f64::INFINITY, f64::NEG_INFINITY);
    for entry in Way::TABLE {
        for cost in costs(entry.way).filter_map(|(_, cost)| cost) {
            low = low.min(cost);
            high = high.max(cost);
        }
    }
    let Some(x) = horizontal(&sweep.first, out)? else {
        return Ok(());
    };
    let air = 0.05 * (high - low).max(1e-9);
    let length = HEIGHT - TOP - BOTTOM;
    let Some(y) = Pixels::new(low - air, high + air, false, HEIGHT - BOTTOM, -length) else {
        return writeln!(
            out,
            "<text x=\"{}\" y=\"{}\">nothing flyable in this range</text>",
            LEFT + 40.0,
            TOP + 60.0
        );
    };
    vertical(&y, "cost, m/s", out)?;
    for entry in Way::TABLE {
        let (colour, dash) = stroke(entry.way);
        let mut path = String::new();
        let mut pen = false;
        for (value, cost) in costs(entry.way) {
            match (x.at(value), cost.and_then(|cost| y.at(cost))) {
                (Some(px), Some(py)) => {
                    write!(path, "{}{px:.2} {py:.2} ", if pen { "L" } else { "M" })?;
                    pen = true;
                }
                _ => pen = false,
            }
        }
        writeln!(
            out,
            "<path d=\"{path}\" fill=\"none\" stroke=\"{colour}\" stroke-width=\"2\" stroke-dasharray=\"{dash}\"/>"
        )?;
    }
    if sweep.first.knob.id == KnobId::TargetAltitude {
        let marks = sweep.landmarks();
        for crossover in &marks.crossovers {
            let altitude = sweep.case.altitude_km(crossover.radius_km);
            if let (Some(px), Some(py)) = (x.at(altitude), y.at(1e3 * crossover.dv_km_s))
                && (LEFT..=WIDTH - RIGHT).contains(&px)
            {
                writeln!(
                    out,
                    "<circle cx=\"{px:.1}\" cy=\"{py:.1}\" r=\"5\" fill=\"none\" stroke=\"#000\" stroke-width=\"2\"/>"
                )?;
                writeln!(
                    out,
                    "<text x=\"{:.1}\" y=\"{:.1}\">{} / {}</text>",
                    px + 8.0,
                    py - 8.0,
                    crossover.below.name(),
                    crossover.above.name()
                )?;
            }
        }
    }
    Ok(())
}

fn cells(sweep: &Sweep, second: &Axis, out: &mut String) -> std::fmt::Result {
    let Some(_) = horizontal(&sweep.first, out)? else {
        return Ok(());
    };
    let length = HEIGHT - TOP - BOTTOM;
    let Some(y) = Pixels::new(second.from, second.to, second.log, HEIGHT - BOTTOM, -length) else {
        return Ok(());
    };
    vertical(&y, &title(second), out)?;
    let (columns, rows) = (sweep.first.points as f64, second.points as f64);
    let (w, h) = ((WIDTH - LEFT - RIGHT) / columns, length / rows);
    for (k, cell) in sweep.cells.iter().enumerate() {
        let (column, row) = (k % sweep.first.points, k / sweep.first.points);
        let Row::Asked(point) = &cell.row else {
            continue;
        };
        let Some(best) = point.best else { continue };
        let (px, py) = (
            LEFT + column as f64 * w,
            HEIGHT - BOTTOM - (row + 1) as f64 * h,
        );
        let (colour, _) = stroke(best);
        writeln!(
            out,
            "<rect x=\"{px:.2}\" y=\"{py:.2}\" width=\"{w:.2}\" height=\"{h:.2}\" fill=\"{colour}\" fill-opacity=\"0.75\"/>"
        )?;
        if 9.0 < w && 12.0 < h {
            writeln!(
                out,
                "<text x=\"{:.1}\" y=\"{:.1}\" text-anchor=\"middle\" fill=\"#fff\" font-size=\"10\">{}</text>",
                px + 0.5 * w,
                py + 0.5 * h + 4.0,
                best.entry().glyph
            )?;
        }
    }
    Ok(())
}
