//! Bounded minima: scan first (a cost may have several valleys and gaps), then refine.

use super::root;
use super::tolerance::{MINIMUM_RELATIVE, STENCIL_RELATIVE};

/// A place and the value there.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Minimum {
    /// Where the smallest value was found.
    pub x: f64,
    /// The value there.
    pub value: f64,
}

/// Refines a minimum of `f` inside `[a, b]`, given one interior or end point `start` where `f` exists.
///
/// `None` from `f` means "not allowed there" and counts as higher than any value.
///
/// # Method
/// Brent (1973), chapter 5: golden section with parabolic steps. Stops at a width of
/// [`MINIMUM_RELATIVE`].
pub fn refine(f: impl FnMut(f64) -> Option<f64>, a: f64, b: f64, start: Minimum) -> Minimum {
    refine_to(f, a, b, start, MINIMUM_RELATIVE)
}

/// As [`refine`], to a relative width of one's own.
pub fn refine_to(
    mut f: impl FnMut(f64) -> Option<f64>,
    a: f64,
    b: f64,
    start: Minimum,
    relative: f64,
) -> Minimum {
    const GOLDEN: f64 = 0.381_966_011_250_105_1;
    let mut at = |x: f64| f(x).unwrap_or(f64::INFINITY);
    let (mut a, mut b) = (a.min(b), a.max(b));
    let mut best = start;
    let mut x = best.x;
    let mut fx = best.value;
    let (mut w, mut fw, mut v, mut fv) = (x, fx, x, fx);
    let (mut d, mut e) = (0.0_f64, 0.0_f64);
    for _ in 0..100 {
        let middle = 0.5 * (a + b);
        let tolerance = relative * x.abs() + 1e-300;
        if (x - middle).abs() <= 2.0 * tolerance - 0.5 * (b - a) {
            break;
        }
        let mut golden = true;
        if tolerance < e.abs() {
            let r = (x - w) * (fx - fv);
            let q0 = (x - v) * (fx - fw);
            let mut p = (x - v) * q0 - (x - w) * r;
            let mut q = 2.0 * (q0 - r);
            if 0.0 < q {
                p = -p;
            }
            q = q.abs();
            let before = e;
            e = d;
            // Written so that a comparison with NaN (an infinite value among the three) falls
            // through to the golden section.
            if p.abs() < (0.5 * q * before).abs() && q * (a - x) < p && p < q * (b - x) {
                d = p / q;
                let u = x + d;
                if u - a < 2.0 * tolerance || b - u < 2.0 * tolerance {
                    d = tolerance.copysign(middle - x);
                }
                golden = false;
            }
        }
        if golden {
            e = if x < middle { b - x } else { a - x };
            d = GOLDEN * e;
        }
        let u = x + if tolerance <= d.abs() {
            d
        } else {
            tolerance.copysign(d)
        };
        let fu = at(u);
        if fu < best.value {
            best = Minimum { x: u, value: fu };
        }
        if fu <= fx {
            if u < x {
                b = x;
            } else {
                a = x;
            }
            (v, fv) = (w, fw);
            (w, fw) = (x, fx);
            (x, fx) = (u, fu);
        } else {
            if u < x {
                a = u;
            } else {
                b = u;
            }
            if fu <= fw || w == x {
                (v, fv) = (w, fw);
                (w, fw) = (u, fu);
            } else if fu <= fv || v == x || v == w {
                (v, fv) = (u, fu);
            }
        }
    }
    best
}

/// The smallest value of `f` over the ascending `grid`, refined inside the cells beside the best node.
///
/// `None` when `f` exists at no node. A minimum at the first or last node is returned as it is when
/// the function still falls towards that end, so that a bound which binds is met exactly.
pub fn scan_then_refine(f: impl FnMut(f64) -> Option<f64>, grid: &[f64]) -> Option<Minimum> {
    scan_then_refine_to(f, grid, MINIMUM_RELATIVE)
}

/// As [`scan_then_refine`], to a relative width of one's own.
pub fn scan_then_refine_to(
    mut f: impl FnMut(f64) -> Option<f64>,
    grid: &[f64],
    relative: f64,
) -> Option<Minimum> {
    let mut best: Option<(usize, Minimum)> = None;
    for (k, &x) in grid.iter().enumerate() {
        if let Some(value) = f(x).filter(|value| value.is_finite())
            && best.is_none_or(|(_, so_far)| value < so_far.value)
        {
            best = Some((k, Minimum { x, value }));
        }
    }
    let (k, found) = best?;
    let low = if k == 0 { found.x } else { grid[k - 1] };
    let high = if k + 1 == grid.len() {
        found.x
    } else {
        grid[k + 1]
    };
    if k == 0 || k + 1 == grid.len() {
        // One probe just inside tells whether the end is the answer or only the nearest node.
        let inside = found.x
            + 1e-4
                * if k == 0 {
                    high - found.x
                } else {
                    low - found.x
                };
        if inside == found.x || f(inside).is_none_or(|value| found.value <= value) {
            return Some(found);
        }
    }
    Some(refine_to(f, low, high, found, relative))
}

/// Places the stationary point of a smooth `f` near a minimum already found to about 1e-8.
///
/// # Method
/// Root of the sixth-order central difference of `f` with the relative step [`STENCIL_RELATIVE`],
/// searched in a narrow bracket round `near`. Good to about 1e-12 relative where `f` is smooth on the
/// scale of the step. Returns `None` where `f` does not exist over the whole stencil, or has no sign
/// change of its slope there (a minimum held by a bound).
pub fn stationary_point(mut f: impl FnMut(f64) -> Option<f64>, near: f64) -> Option<f64> {
    let h = STENCIL_RELATIVE * near.abs();
    let mut slope = |x: f64| {
        let d1 = f(x + h)? - f(x - h)?;
        let d2 = f(x + 2.0 * h)? - f(x - 2.0 * h)?;
        let d3 = f(x + 3.0 * h)? - f(x - 3.0 * h)?;
        Some((45.0 * d1 - 9.0 * d2 + d3) / 60.0)
    };
    // Brent places the minimum to a few 1e-8; flat valleys to rather less.
    [1e-6, 1e-4, 3e-3].into_iter().find_map(|width| {
        root::bracketed(&mut slope, near * (1.0 - width), near * (1.0 + width)).ok()
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn finds_the_lower_of_two_valleys() {
        let f = |x: f64| Some((x * x - 4.0).powi(2) + x);
        let grid: Vec<f64> = (0..=20).map(|k| -4.0 + 0.4 * f64::from(k)).collect();
        let found = scan_then_refine(f, &grid).expect("exists");
        // Root of 4x(x² − 4) + 1 = 0 near −2.
        let exact =
            root::bracketed(|x| Some(4.0 * x * (x * x - 4.0) + 1.0), -3.0, -1.9).expect("root");
        assert!((found.x - exact).abs() <= 1e-7, "{} {exact}", found.x);
    }

    #[test]
    fn gaps_are_walls_and_bounds_are_met_exactly() {
        let f = |x: f64| (2.0 <= x).then(|| (x - 1.0).powi(2));
        let grid = [0.0, 1.0, 2.5, 4.0];
        let found = scan_then_refine(f, &grid).expect("exists");
        assert!((found.x - 2.0).abs() <= 1e-6, "{}", found.x);
        let found = scan_then_refine(|x| Some(-x), &[1.0, 2.0, 3.0]).expect("exists");
        assert_eq!(found.x, 3.0);
        assert_eq!(scan_then_refine(|_| None, &grid), None);
    }

    #[test]
    fn stationary_point_beats_value_comparison() {
        // x + 4/x has its minimum at 2, exactly.
        let f = |x: f64| Some(x + 4.0 / x);
        let found = scan_then_refine(f, &[1.0, 1.9, 3.0]).expect("exists");
        let sharp = stationary_point(f, found.x).expect("smooth");
        assert!((sharp - 2.0).abs() <= 4e-12, "{sharp}");
        assert_eq!(stationary_point(Some, 2.0), None);
    }
}
