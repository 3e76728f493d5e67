//! A sweep as SVG: curves for one knob, a grid of winning ways for two. Self-contained, no fonts or scripts fetched.

mod curve;
mod grid;
mod paper;

use super::Sweep;
use crate::arrival::Way;
use paper::{BOTTOM, HEIGHT, LEFT, Paper, RIGHT, WIDTH};
use std::fmt::{Result, Write};

/// Renders the sweep.
pub(super) fn render(sweep: &Sweep) -> String {
    let mut paper = Paper::default();
    // Writing to a string cannot fail.
    let _ = picture(sweep, &mut paper);
    paper.0
}

fn picture(sweep: &Sweep, paper: &mut Paper) -> Result {
    let title = match sweep.case.spec().title.trim() {
        "" => "Cost of arriving",
        title => title,
    };
    writeln!(
        paper.0,
        "<svg xmlns=\"http://www.w3.org/2000/svg\" viewBox=\"0 0 {WIDTH} {HEIGHT}\" role=\"img\" font-family=\"sans-serif\" font-size=\"13\" fill=\"#222\">"
    )?;
    writeln!(paper.0, "<title>{}</title>", paper::escape(title))?;
    writeln!(paper.0, "<desc>{}</desc>", paper::escape(&about(sweep)))?;
    writeln!(
        paper.0,
        "<rect width=\"{WIDTH}\" height=\"{HEIGHT}\" fill=\"#fff\"/>"
    )?;
    paper.text(LEFT, 24.0, "start", &short(title), "font-size=\"16\"")?;
    legend(sweep, paper)?;
    match &sweep.second {
        None => curve::draw(sweep, paper)?,
        Some(second) => grid::draw(sweep, second, paper)?,
    }
    let foot = format!(
        "stoop {}, scenario {}; for preliminary design only",
        env!("CARGO_PKG_VERSION"),
        sweep.fingerprint
    );
    paper.text(LEFT, HEIGHT - 8.0, "start", &foot, "font-size=\"11\"")?;
    writeln!(paper.0, "</svg>")
}

/// What the picture shows, for readers that do not see it.
fn about(sweep: &Sweep) -> String {
    let first = &sweep.first;
    match &sweep.second {
        None => format!(
            "Cost in m/s of every way of arriving over {} from {} to {}.",
            super::title(first),
            first.from,
            first.to
        ),
        Some(second) => format!(
            "The cheapest way of arriving over {} from {} to {} and {} from {} to {}.",
            super::title(first),
            first.from,
            first.to,
            super::title(second),
            second.from,
            second.to
        ),
    }
}

/// A title as long as the picture is wide; the `title` element has it in full.
fn short(title: &str) -> String {
    const MOST: usize = 90;
    if title.chars().count() <= MOST {
        title.to_owned()
    } else {
        title.chars().take(MOST).chain("...".chars()).collect()
    }
}

/// Colour and dash of each way: the dash, or the glyph in a grid, says the same without colour.
fn stroke(way: Way) -> (&'static str, &'static str) {
    match way {
        Way::Direct => ("#0072b2", "none"),
        Way::Dip => ("#d55e00", "9 5"),
        Way::Loop => ("#007a5a", "2 5"),
        Way::Steps => ("#a3457f", "2 4 9 4"),
    }
}

fn legend(sweep: &Sweep, paper: &mut Paper) -> Result {
    let mut x = LEFT;
    for entry in Way::shown(sweep.case.setting()) {
        let (colour, dash) = stroke(entry.way);
        if sweep.second.is_some() {
            paper.cell(x, 34.0, 30.0, 13.0, colour)?;
            paper.text(
                x + 15.0,
                44.0,
                "middle",
                &entry.glyph.to_string(),
                "fill=\"#fff\" font-size=\"10\"",
            )?;
        } else {
            paper.line(
                (x, 40.0),
                (x + 30.0, 40.0),
                &format!("stroke=\"{colour}\" stroke-width=\"3\" stroke-dasharray=\"{dash}\""),
            )?;
        }
        paper.text(x + 36.0, 44.0, "start", entry.name, "")?;
        x += 110.0;
    }
    let gaps = if sweep.second.is_some() {
        "white: nothing flyable; grey: value refused"
    } else {
        "gap: not flyable"
    };
    paper.text(x + 6.0, 44.0, "start", gaps, "")
}

/// Left, right, bottom edge of the drawing area.
fn frame() -> (f64, f64, f64) {
    (LEFT, WIDTH - RIGHT, HEIGHT - BOTTOM)
}
