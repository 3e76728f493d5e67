//! Axes: values to cells, and ticks a reader expects (1, 2, 5 times powers of ten). Pure.

/// A linear or logarithmic axis over `cells` cells.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Scale {
    /// Value at the middle of the first cell.
    pub low: f64,
    /// Value at the middle of the last cell.
    pub high: f64,
    /// Number of cells, at least one.
    pub cells: usize,
    /// Logarithmic; both ends are then positive.
    pub log: bool,
}

impl Scale {
    /// Makes a scale; `None` for ends that are not finite, equal, or not positive on a logarithmic axis.
    pub fn new(low: f64, high: f64, cells: usize, log: bool) -> Option<Self> {
        let sound = low.is_finite()
            && high.is_finite()
            && low != high
            && 0 < cells
            && (!log || (0.0 < low && 0.0 < high));
        sound.then_some(Self {
            low,
            high,
            cells,
            log,
        })
    }

    /// Position in cells (0 = middle of the first), which may lie outside.
    pub fn position(&self, value: f64) -> Option<f64> {
        if self.log && value <= 0.0 {
            return None;
        }
        let share = if self.log {
            (value / self.low).ln() / (self.high / self.low).ln()
        } else {
            (value - self.low) / (self.high - self.low)
        };
        let position = share * (self.cells - 1) as f64;
        position.is_finite().then_some(position)
    }

    /// The cell of a value, `None` outside (with half a cell of grace at the ends).
    pub fn cell(&self, value: f64) -> Option<usize> {
        let position = self.position(value)?.round();
        // -0.0 and small rounding at the ends belong to the end cells.
        (0.0 <= position && position < self.cells as f64).then_some(position as usize)
    }

    /// Value at the middle of a cell.
    pub fn value(&self, cell: usize) -> f64 {
        if self.cells < 2 {
            return self.low;
        }
        let share = cell.min(self.cells - 1) as f64 / (self.cells - 1) as f64;
        if self.log {
            self.low * (share * (self.high / self.low).ln()).exp()
        } else {
            self.low + share * (self.high - self.low)
        }
    }

    /// Tick values inside the axis, about `wanted` of them, tidy.
    pub fn ticks(&self, wanted: usize) -> Vec<f64> {
        let (low, high) = (self.low.min(self.high), self.low.max(self.high));
        let wanted = wanted.clamp(2, 40);
        if !self.log {
            return linear_ticks(low, high, wanted);
        }
        let decades = (high / low).log10();
        if decades < 0.7 {
            return linear_ticks(low, high, wanted);
        }
        // As many of 1, 2, 5 in each decade as there is room for.
        let room = wanted as f64 / decades;
        let digits: &[f64] = if 6.0 <= room {
            &[1.0, 2.0, 3.0, 4.0, 5.0, 7.0]
        } else if 2.5 <= room {
            &[1.0, 2.0, 5.0]
        } else if 1.6 <= room {
            &[1.0, 3.0]
        } else {
            &[1.0]
        };
        let first = low.log10().floor() as i32;
        let last = high.log10().ceil() as i32;
        (first..=last)
            .flat_map(|power| digits.iter().map(move |digit| digit * 10f64.powi(power)))
            .filter(|tick| low * (1.0 - 1e-9) <= *tick && *tick <= high * (1.0 + 1e-9))
            .collect()
    }
}

/// The tidy step (1, 2 or 5 times a power of ten) that divides `span` into about `wanted` parts.
pub fn tidy_step(span: f64, wanted: usize) -> f64 {
    let rough = span / wanted.max(1) as f64;
    let power = 10f64.powi(rough.log10().floor() as i32);
    let digit = rough / power;
    power
        * if digit < 1.5 {
            1.0
        } else if digit < 3.5 {
            2.0
        } else if digit < 7.5 {
            5.0
        } else {
            10.0
        }
}

fn linear_ticks(low: f64, high: f64, wanted: usize) -> Vec<f64> {
    let step = tidy_step(high - low, wanted);
    if !(0.0 < step && step.is_finite()) {
        return Vec::new();
    }
    let first = (low / step - 1e-9).ceil();
    let last = (high / step + 1e-9).floor();
    // A count beyond any screen means the step drowned in the size of the ends; no ticks then.
    let count = last - first;
    if count.is_nan() || 200.0 < count {
        return Vec::new();
    }
    (0..=(last - first).max(0.0) as usize)
        .map(|k| (first + k as f64) * step)
        .collect()
}

/// A tick's label: `800`, `1k`, `12k`, `2.5M`, `0.05`.
pub fn label(value: f64) -> String {
    let magnitude = value.abs();
    let short = |scaled: f64, suffix: &str| {
        let text = format!("{scaled:.3}");
        let text = text.trim_end_matches('0').trim_end_matches('.');
        format!("{text}{suffix}")
    };
    if magnitude == 0.0 {
        "0".to_owned()
    } else if !(1e-3..1e12).contains(&magnitude) {
        format!("{value:.0e}")
    } else if 1e9 <= magnitude {
        short(value / 1e9, "G")
    } else if 1e6 <= magnitude {
        short(value / 1e6, "M")
    } else if 1e4 <= magnitude || (1e3 <= magnitude && (value / 100.0).fract() == 0.0) {
        short(value / 1e3, "k")
    } else {
        short(value, "")
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn ends_are_cells_and_back() {
        for log in [false, true] {
            let scale = Scale::new(60.0, 24_000.0, 80, log).expect("sound");
            assert_eq!(scale.cell(60.0), Some(0));
            assert_eq!(scale.cell(24_000.0), Some(79));
            assert_eq!(scale.cell(30_000.0), None);
            for cell in 0..80 {
                assert_eq!(scale.cell(scale.value(cell)), Some(cell));
            }
        }
        assert_eq!(Scale::new(0.0, 1.0, 10, true), None);
        assert_eq!(Scale::new(1.0, 1.0, 10, false), None);
        assert_eq!(Scale::new(f64::NAN, 1.0, 10, false), None);
    }

    #[test]
    fn ticks_are_tidy_and_inside() {
        let scale = Scale::new(578.0, 1012.0, 20, false).expect("sound");
        assert_eq!(scale.ticks(5), vec![600.0, 700.0, 800.0, 900.0, 1000.0]);
        let scale = Scale::new(60.0, 24_000.0, 80, true).expect("sound");
        assert_eq!(
            scale.ticks(8),
            vec![
                100.0, 200.0, 500.0, 1000.0, 2000.0, 5000.0, 10_000.0, 20_000.0
            ]
        );
        assert!(linear_ticks(1e16, 1e16 + 2.0, 5).len() <= 201);
    }

    #[test]
    fn labels_are_short() {
        for (value, expected) in [
            (800.0, "800"),
            (1000.0, "1k"),
            (12_000.0, "12k"),
            (1250.0, "1250"),
            (2.5e6, "2.5M"),
            (0.05, "0.05"),
            (-20.0, "-20"),
        ] {
            assert_eq!(label(value), expected);
        }
    }
}
