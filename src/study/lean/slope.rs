//! Slopes of functions that exist on one or both sides of a point and may have a kink there.

use super::Slope;

/// First and following steps of the stencils, relative to the size of the argument. The first suits a function that is smooth on the scale
/// of its argument (sixth order: truncation near 1e-14, rounding near 1e-13); the smaller ones are for those that are not.
const STEPS: [f64; 4] = [5e-3, 5e-4, 5e-5, 5e-6];

/// Relative error at which no smaller step is tried.
const GOOD: f64 = 1e-10;

/// Relative error above which a central slope is suspected of a kink.
const POOR: f64 = 1e-5;

/// Relative difference below which the slopes of the two sides are the same.
const KINK: f64 = 1e-7;

/// A slope with an estimate of its error.
#[derive(Clone, Copy, Debug)]
struct Estimate {
    slope: f64,
    error: f64,
    /// Whether the curve seems to have a kink at the point itself.
    pointed: bool,
}

impl Estimate {
    /// From two formulas on the same values, the better one first. `rounding` is the error of the values divided by the step: what is
    /// smaller than that cannot be told from zero and counts as zero.
    fn new(better: f64, worse: f64, rounding: f64) -> Option<Self> {
        let slope = if better.abs() <= rounding {
            0.0
        } else {
            better
        };
        let error = (better - worse).abs() + rounding;
        error.is_finite().then_some(Self {
            slope,
            error,
            pointed: false,
        })
    }

    fn relative(&self) -> f64 {
        self.error / self.slope.abs().max(f64::MIN_POSITIVE)
    }
}

/// Slope of `f` at `x` inside `[low, high]`; `size` is the change of `x` over which `f` changes in earnest.
///
/// Central differences of sixth order, whose fourth-order sibling tells the error; of the steps tried the best is taken. Where `f` does not
/// exist on one side, and where the central estimate does not settle, differences of fourth order from one side.
pub(super) fn slope(
    f: impl Fn(f64) -> Option<f64>,
    x: f64,
    size: f64,
    (low, high): (f64, f64),
) -> Slope {
    let f = |at: f64| {
        (low <= at && at <= high)
            .then(|| f(at))
            .flatten()
            .filter(|value| value.is_finite())
    };
    let Some(here) = f(x) else {
        return Slope::Absent;
    };
    let middle = best(|step| central(&f, x, here, step * size));
    if let Some(found) = middle
        && !found.pointed
        && (found.slope == 0.0 || found.relative() <= POOR)
    {
        return Slope::Central(found.slope);
    }
    let above = best(|step| sided(&f, x, here, step * size));
    let below = best(|step| sided(&f, x, here, -step * size));
    match (below, above, middle) {
        (Some(below), Some(above), middle) => {
            let apart = (below.slope - above.slope).abs();
            let certain = 10.0 * (below.error + above.error);
            let visible = KINK * below.slope.abs().max(above.slope.abs());
            match middle {
                Some(found) if apart <= certain.max(visible) => Slope::Central(found.slope),
                _ => Slope::Kinked {
                    below: below.slope,
                    above: above.slope,
                },
            }
        }
        (None, Some(above), _) => Slope::Above(above.slope),
        (Some(below), None, _) => Slope::Below(below.slope),
        (None, None, Some(found)) => Slope::Central(found.slope),
        (None, None, None) => Slope::Absent,
    }
}

/// The estimate with the smallest error over the steps; stops at a good one.
fn best(estimate: impl Fn(f64) -> Option<Estimate>) -> Option<Estimate> {
    let mut found: Option<Estimate> = None;
    for step in STEPS {
        let Some(next) = estimate(step) else { continue };
        if found.is_none_or(|best| next.error < best.error) {
            found = Some(next);
        }
        // A constant has no slope at any step.
        if (next.slope == 0.0 && next.error == 0.0) || next.relative() <= GOOD {
            break;
        }
    }
    found
}

/// Error of a value as the ways compute it: a few units in the last place.
fn rounding(value: f64, step: f64) -> f64 {
    8.0 * f64::EPSILON * (value / step).abs()
}

fn central(f: &impl Fn(f64) -> Option<f64>, x: f64, here: f64, h: f64) -> Option<Estimate> {
    // The outermost first: where one side ends, it ends there.
    let pair = |k: f64| Some((f(x + k * h)?, f(x - k * h)?));
    let (p3, p2, p1) = (pair(3.0)?, pair(2.0)?, pair(1.0)?);
    let difference = |(above, below): (f64, f64)| above - below;
    let (d3, d2, d1) = (difference(p3), difference(p2), difference(p1));
    let sixth = (45.0 * d1 - 9.0 * d2 + d3) / (60.0 * h);
    let fourth = (8.0 * d1 - d2) / (12.0 * h);
    // What bends smoothly bends with the square of the step, four times as far at twice the step; what is pointed, twice as far. A pointed
    // curve's differences are as smooth as any, so nothing else would tell.
    let bend = |(above, below): (f64, f64)| (above + below - 2.0 * here).abs();
    let pointed = 64.0 * f64::EPSILON * here.abs() < bend(p1) && bend(p2) < 3.0 * bend(p1);
    let mut found = Estimate::new(sixth, fourth, rounding(here, h))?;
    found.pointed = pointed;
    Some(found)
}

fn sided(f: &impl Fn(f64) -> Option<f64>, x: f64, here: f64, h: f64) -> Option<Estimate> {
    let at = |k: f64| f(x + k * h);
    let (f4, f3, f2, f1) = (at(4.0)?, at(3.0)?, at(2.0)?, at(1.0)?);
    let fourth = (-25.0 * here + 48.0 * f1 - 36.0 * f2 + 16.0 * f3 - 3.0 * f4) / (12.0 * h);
    let third = (-11.0 * here + 18.0 * f1 - 9.0 * f2 + 2.0 * f3) / (6.0 * h);
    Estimate::new(fourth, third, rounding(here, h))
}

#[cfg(test)]
mod tests {
    use super::*;

    const EVERYWHERE: (f64, f64) = (f64::NEG_INFINITY, f64::INFINITY);

    #[test]
    fn smooth_slopes_to_the_digit() {
        for (x, exact) in [(2.0, 2.0_f64.exp()), (-1.0, (-1.0_f64).exp())] {
            let Slope::Central(found) = slope(|x| Some(x.exp()), x, 1.0, EVERYWHERE) else {
                panic!("not central");
            };
            assert!((found / exact - 1.0).abs() < 1e-11, "{found}");
        }
        // A valley's floor and a constant have no slope, and say so exactly.
        for f in [|x: f64| Some(x * x), |_: f64| Some(3.0)] {
            assert_eq!(slope(f, 0.0, 1.0, EVERYWHERE), Slope::Central(0.0));
        }
    }

    #[test]
    fn ends_and_gaps_are_taken_from_one_side() {
        let f = |x: f64| Some((x + 2.0).ln());
        let Slope::Above(found) = slope(f, 0.0, 1.0, (0.0, 5.0)) else {
            panic!("not from above");
        };
        assert!((found - 0.5).abs() < 1e-9, "{found}");
        let gap = |x: f64| (x <= 1.0).then_some(x * x);
        let Slope::Below(found) = slope(gap, 1.0, 1.0, EVERYWHERE) else {
            panic!("not from below");
        };
        assert!((found - 2.0).abs() < 1e-9, "{found}");
        assert_eq!(slope(|_| None, 1.0, 1.0, EVERYWHERE), Slope::Absent);
        // Nothing on either side: a point alone has no slope.
        let alone = |x: f64| (x == 1.0).then_some(1.0);
        assert_eq!(slope(alone, 1.0, 1.0, EVERYWHERE), Slope::Absent);
    }

    #[test]
    fn kinks_have_two_slopes() {
        for (f, below, above) in [
            (
                (|x: f64| Some(x.abs())) as fn(f64) -> Option<f64>,
                -1.0,
                1.0,
            ),
            (|x: f64| Some(1.0 + x.max(0.0)), 0.0, 1.0),
            (|x: f64| Some(x.exp() + x.max(0.0)), 1.0, 2.0),
        ] {
            match slope(f, 0.0, 1.0, EVERYWHERE) {
                Slope::Kinked { below: b, above: a } => {
                    assert!(
                        (b - below).abs() < 1e-8 && (a - above).abs() < 1e-8,
                        "{b} {a}"
                    );
                }
                other => panic!("{other:?}"),
            }
        }
    }

    #[test]
    fn a_kink_beside_the_point_shortens_the_step() {
        let f = |x: f64| Some(x * x + (x - 1.004).max(0.0));
        let Slope::Central(found) = slope(f, 1.0, 1.0, EVERYWHERE) else {
            panic!("not central");
        };
        assert!((found - 2.0).abs() < 1e-9, "{found}");
    }
}
